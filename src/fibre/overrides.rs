//! Figures given in a spec, and what can be wrong with them.

use std::fmt;

use thiserror::Error;

use super::kind::{CompressionBasis, FlawKind, Hazard, Kind, StrengthBasis};
use super::origin::FigureName;

/// Figures given in a spec, in internal units; what is `None` comes from the record.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct FibreOverrides {
    /// The name in the spec; becomes the fibre's `id`.
    pub id: Option<String>,
    /// How the fibre fails.
    pub kind: Option<Kind>,
    /// The caution that goes with it; none where nobody says.
    pub hazard: Option<Hazard>,
    /// Filament diameter in mm.
    pub diameter_mm: Option<f64>,
    /// Density in g/cm3.
    pub density_g_cm3: Option<f64>,
    /// Axial modulus in MPa.
    pub modulus_mpa: Option<f64>,
    /// Mean tensile strength in MPa.
    pub strength_mpa: Option<f64>,
    /// What was pulled to find it; `yarn` where nobody says, so that counts are marked indicative.
    pub strength_basis: Option<StrengthBasis>,
    /// Gauge length of the strength in mm; needed with a Weibull modulus.
    pub strength_gauge_mm: Option<f64>,
    /// Compressive strength in MPa (brittle, fibrillar).
    pub compressive_strength_mpa: Option<f64>,
    /// How it was read; `bending` where nobody says, which adds no factor and is the safe side.
    pub compression_basis: Option<CompressionBasis>,
    /// Yield stress in MPa (ductile).
    pub yield_mpa: Option<f64>,
    /// Strain at break, ratio (ductile).
    pub strain_at_break: Option<f64>,
    /// Share of strength lost by kinking, ratio up to 1 (fibrillar).
    pub kink_strength_loss: Option<f64>,
    /// Weibull modulus.
    pub weibull_modulus: Option<f64>,
    /// Where the flaws sit; `surface` where nobody says, which counts more breaks and is the safe side.
    pub flaws: Option<FlawKind>,
    /// Highest temperature in air in degC.
    pub max_temp_c: Option<f64>,
    /// Coefficient of friction on a guide.
    pub friction_on_guide: Option<f64>,
}

/// One thing that keeps given figures from being a fibre.
#[derive(Debug, Clone, Copy, PartialEq, Error)]
pub enum FibreProblem {
    /// Nothing says how the fibre fails.
    #[error(
        "`kind` is missing: say `brittle`, `fibrillar` or `ductile`, or name a library fibre in `like`"
    )]
    KindMissing,
    /// A figure that the kind needs is not there.
    #[error("`{figure}` is missing")]
    Missing {
        /// The figure.
        figure: FigureName,
    },
    /// A figure was given that the kind has no use for.
    #[error("`{figure}` has no meaning for a {kind} fibre")]
    Unused {
        /// The figure.
        figure: FigureName,
        /// The kind.
        kind: Kind,
    },
    /// A figure is no number above zero, or a share above one.
    #[error("`{figure}` must be {must}, not {value}")]
    BadValue {
        /// The figure.
        figure: FigureName,
        /// The value in internal units.
        value: f64,
        /// What it must be.
        must: &'static str,
    },
    /// The yield stress lies above the strength.
    #[error("the yield stress, {yield_mpa} MPa, lies above the strength, {strength_mpa} MPa")]
    YieldAboveStrength {
        /// Yield stress in MPa.
        yield_mpa: f64,
        /// Strength in MPa.
        strength_mpa: f64,
    },
    /// The fibre would break before it yields.
    #[error(
        "the strain at break, {strain_at_break}, lies below the strain at yield, {strain_at_yield:.4}"
    )]
    BreaksBeforeYield {
        /// Strain at break (ratio).
        strain_at_break: f64,
        /// Yield stress over modulus (ratio).
        strain_at_yield: f64,
    },
}

impl FibreProblem {
    /// The figure at fault, so that a spec can point at its line.
    #[must_use]
    pub fn figure(&self) -> Option<FigureName> {
        match self {
            Self::KindMissing => None,
            Self::Missing { figure }
            | Self::Unused { figure, .. }
            | Self::BadValue { figure, .. } => Some(*figure),
            Self::YieldAboveStrength { .. } => Some(FigureName::Yield),
            Self::BreaksBeforeYield { .. } => Some(FigureName::StrainAtBreak),
        }
    }
}

/// Everything that keeps given figures from being a fibre.
#[derive(Debug, Clone, PartialEq, Error)]
pub struct FibreError {
    /// The fibre.
    pub id: String,
    /// At least one problem.
    pub problems: Vec<FibreProblem>,
}

impl fmt::Display for FibreError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "fibre `{}`: ", self.id)?;
        for (index, problem) in self.problems.iter().enumerate() {
            let comma = if index == 0 { "" } else { "; " };
            write!(f, "{comma}{problem}")?;
        }
        Ok(())
    }
}

impl FibreOverrides {
    /// The figure of that name, where given, in internal units.
    #[must_use]
    pub fn value(&self, name: FigureName) -> Option<f64> {
        match name {
            FigureName::Diameter => self.diameter_mm,
            FigureName::Density => self.density_g_cm3,
            FigureName::Modulus => self.modulus_mpa,
            FigureName::Strength => self.strength_mpa,
            FigureName::Gauge => self.strength_gauge_mm,
            FigureName::Compression => self.compressive_strength_mpa,
            FigureName::Yield => self.yield_mpa,
            FigureName::StrainAtBreak => self.strain_at_break,
            FigureName::KinkStrengthLoss => self.kink_strength_loss,
            FigureName::WeibullModulus => self.weibull_modulus,
            FigureName::MaxTemp => self.max_temp_c,
            FigureName::Friction => self.friction_on_guide,
        }
    }
}
