//! The units that are read, what they measure, and their factor to the internal unit.

/// What a unit measures; the internal unit stands beside each.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Dimension {
    /// Length, mm.
    Length,
    /// Mass per length, tex (g/km).
    LinearDensity,
    /// Threads per length, 1/mm.
    Sett,
    /// Force, N.
    Force,
    /// Force per linear density, N/tex.
    SpecificForce,
    /// Stress or modulus, MPa (N/mm2).
    Stress,
    /// Angle, rad.
    Angle,
    /// Temperature, degrees Celsius.
    Temperature,
    /// Turns of twist per length, 1/mm.
    Twist,
    /// A share, as a ratio.
    Share,
    /// Bending rigidity, N mm2.
    Rigidity,
    /// Mass per volume, g/cm3.
    Density,
    /// A number per length, 1/m.
    Number,
}

/// One unit: its symbol, other ways to write it, and how to get to the internal unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unit {
    /// The symbol shown in messages.
    pub symbol: &'static str,
    /// Other spellings that are read.
    pub aliases: &'static [&'static str],
    /// What it measures.
    pub dimension: Dimension,
    /// Internal value = (written + `shift`) * `factor`.
    pub factor: f64,
    /// Only temperatures have one.
    pub shift: f64,
}

const STANDARD_GRAVITY: f64 = 9.806_65;
const POUND_FORCE_N: f64 = 0.453_592_37 * STANDARD_GRAVITY;
const INCH_MM: f64 = 25.4;
const PSI_MPA: f64 = POUND_FORCE_N / (INCH_MM * INCH_MM);

const fn unit(
    symbol: &'static str,
    aliases: &'static [&'static str],
    dimension: Dimension,
    factor: f64,
) -> Unit {
    Unit {
        symbol,
        aliases,
        dimension,
        factor,
        shift: 0.0,
    }
}

/// Every unit that is read.
pub(super) const UNITS: &[Unit] = {
    use Dimension::*;
    &[
        unit("um", &["µm", "μm", "micron"], Length, 1e-3),
        unit("mm", &[], Length, 1.0),
        unit("cm", &[], Length, 10.0),
        unit("m", &[], Length, 1e3),
        unit("mil", &[], Length, INCH_MM / 1e3),
        unit("in", &["\""], Length, INCH_MM),
        unit("tex", &["g/km"], LinearDensity, 1.0),
        unit("dtex", &[], LinearDensity, 0.1),
        unit("ktex", &[], LinearDensity, 1e3),
        unit("den", &["denier"], LinearDensity, 1.0 / 9.0),
        unit("/cm", &["1/cm"], Sett, 0.1),
        unit("/in", &["1/in", "/inch", "epi", "ppi"], Sett, 1.0 / INCH_MM),
        unit("/m", &["1/m"], Sett, 1e-3),
        unit("N", &[], Force, 1.0),
        unit("cN", &[], Force, 1e-2),
        unit("mN", &[], Force, 1e-3),
        unit("kN", &[], Force, 1e3),
        unit("gf", &[], Force, STANDARD_GRAVITY * 1e-3),
        unit("kgf", &[], Force, STANDARD_GRAVITY),
        unit("lbf", &[], Force, POUND_FORCE_N),
        unit("cN/tex", &[], SpecificForce, 1e-2),
        unit("N/tex", &[], SpecificForce, 1.0),
        unit("mN/tex", &[], SpecificForce, 1e-3),
        unit("cN/dtex", &[], SpecificForce, 0.1),
        unit(
            "gf/den",
            &["gpd"],
            SpecificForce,
            STANDARD_GRAVITY * 1e-3 * 9.0,
        ),
        unit("MPa", &["N/mm2", "N/mm^2"], Stress, 1.0),
        unit("GPa", &[], Stress, 1e3),
        unit("kPa", &[], Stress, 1e-3),
        unit("psi", &[], Stress, PSI_MPA),
        unit("ksi", &[], Stress, PSI_MPA * 1e3),
        unit("Msi", &[], Stress, PSI_MPA * 1e6),
        unit("deg", &["°"], Angle, std::f64::consts::PI / 180.0),
        unit("rad", &[], Angle, 1.0),
        unit("degC", &["°C"], Temperature, 1.0),
        Unit {
            symbol: "degF",
            aliases: &["°F"],
            dimension: Temperature,
            factor: 5.0 / 9.0,
            shift: -32.0,
        },
        unit("/m", &["1/m", "tpm"], Twist, 1e-3),
        unit("/cm", &["1/cm"], Twist, 0.1),
        unit("/in", &["1/in", "tpi"], Twist, 1.0 / INCH_MM),
        unit("%", &["percent"], Share, 0.01),
        unit("N mm2", &["N mm^2", "N*mm2", "Nmm2"], Rigidity, 1.0),
        unit("mN mm2", &["mN mm^2"], Rigidity, 1e-3),
        unit("cN cm2", &["cN cm^2"], Rigidity, 1.0),
        unit(
            "gf cm2",
            &["gf cm^2"],
            Rigidity,
            STANDARD_GRAVITY * 1e-3 * 100.0,
        ),
        unit("g/cm3", &["g/cm^3"], Density, 1.0),
        unit("kg/m3", &["kg/m^3"], Density, 1e-3),
        unit("/m", &["1/m"], Number, 1.0),
        unit("/km", &["1/km"], Number, 1e-3),
        unit("/cm", &["1/cm"], Number, 100.0),
        unit("/in", &["1/in"], Number, 1e3 / INCH_MM),
    ]
};

impl Unit {
    /// Whether a person may write this unit so; case counts (mN is not MN).
    pub(super) fn is_written(&self, text: &str) -> bool {
        self.symbol == text || self.aliases.contains(&text)
    }
}

impl Dimension {
    /// The word for messages.
    pub fn word(self) -> &'static str {
        match self {
            Self::Length => "a length",
            Self::LinearDensity => "a linear density",
            Self::Sett => "threads per length",
            Self::Force => "a force",
            Self::SpecificForce => "a force per linear density",
            Self::Stress => "a stress",
            Self::Angle => "an angle",
            Self::Temperature => "a temperature",
            Self::Twist => "turns per length",
            Self::Share => "a share",
            Self::Rigidity => "a bending rigidity",
            Self::Density => "a density",
            Self::Number => "a number per length",
        }
    }

    /// What a yarn, cloth, machine or fibre can have, in the internal unit, beside zero: far outside of it is a slip
    /// of the unit, and nothing can be computed.
    pub fn plausible(self) -> (f64, f64) {
        match self {
            Self::Length => (1e-6, 1e6),
            Self::LinearDensity => (1e-6, 1e8),
            Self::Sett => (1e-5, 1e4),
            Self::Force => (1e-9, 1e7),
            Self::SpecificForce => (1e-9, 1e3),
            Self::Stress => (1e-6, 1e8),
            Self::Angle => (1e-6, 1e3),
            Self::Temperature => (1e-6, 1e4),
            Self::Twist => (1e-9, 1e3),
            Self::Share => (1e-9, 1e3),
            Self::Rigidity => (1e-15, 1e9),
            Self::Density => (1e-3, 1e2),
            Self::Number => (1e-12, 1e12),
        }
    }

    /// The symbols that would do, in the order of use.
    pub fn symbols(self) -> impl Iterator<Item = &'static str> {
        UNITS
            .iter()
            .filter(move |unit| unit.dimension == self)
            .map(|unit| unit.symbol)
    }
}
