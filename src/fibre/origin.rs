//! Which figure of a fibre, and where it comes from, in words that a report can print.

use std::fmt;

use super::figure::{Figure, How};
use super::record::Record;

/// The figures that a fibre is made of. Each has a key in a spec's `[fibre.NAME]`.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum FigureName {
    /// Filament diameter (mm).
    Diameter,
    /// Density (g/cm3).
    Density,
    /// Axial modulus (MPa).
    Modulus,
    /// Tensile strength (MPa).
    Strength,
    /// Gauge length of the strength (mm).
    Gauge,
    /// Compressive strength (MPa).
    Compression,
    /// Yield stress (MPa).
    Yield,
    /// Strain at break (ratio).
    StrainAtBreak,
    /// Share of strength lost by kinking (ratio).
    KinkStrengthLoss,
    /// Weibull modulus.
    WeibullModulus,
    /// Highest temperature in air (degC).
    MaxTemp,
    /// Friction on a guide (coefficient).
    Friction,
}

impl FigureName {
    /// The key in a spec.
    #[must_use]
    pub fn spec_key(self) -> &'static str {
        match self {
            Self::Diameter => "filament_diameter",
            Self::Density => "density",
            Self::Modulus => "modulus",
            Self::Strength => "strength",
            Self::Gauge => "gauge_length",
            Self::Compression => "compressive_strength",
            Self::Yield => "yield_stress",
            Self::StrainAtBreak => "strain_at_break",
            Self::KinkStrengthLoss => "kink_strength_loss",
            Self::WeibullModulus => "weibull_modulus",
            Self::MaxTemp => "max_temperature",
            Self::Friction => "friction",
        }
    }
}

impl fmt::Display for FigureName {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.spec_key())
    }
}

/// Where one number of a [`Fibre`](super::Fibre) comes from.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Origin {
    /// Given in the spec.
    Given,
    /// From a record of the library.
    Library {
        /// Id of the record.
        record: String,
        /// How the record knows it.
        how: How,
        /// The sources that the record names; none from memory.
        source: Vec<String>,
        /// Whether the typical value is a judgement inside a sourced range.
        judged: bool,
    },
}

impl fmt::Display for Origin {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let Self::Library {
            record,
            how,
            source,
            judged,
        } = self
        else {
            return f.write_str("given in the spec");
        };
        write!(f, "library record `{record}`, ")?;
        match how {
            How::Read => write!(f, "read in {}", source.join("; "))?,
            How::Derived => write!(f, "derived from {}", source.join("; "))?,
            How::Memory => f.write_str("from memory")?,
        }
        if *judged {
            f.write_str(" (typical value judged inside that range)")?;
        }
        Ok(())
    }
}

impl Record {
    /// The record's figure of that name, in the record's own unit. Friction on a guide is the larger of steel and ceramic:
    /// a spec does not say what its guides are made of, and more friction is more pull. The gauge has no figure of its own.
    #[must_use]
    pub fn figure(&self, name: FigureName) -> Option<&Figure> {
        match name {
            FigureName::Diameter => Some(&self.filament_diameter_um),
            FigureName::Density => Some(&self.density_g_cm3),
            FigureName::Modulus => Some(&self.modulus_gpa),
            FigureName::Strength => Some(&self.strength_gpa),
            FigureName::Gauge => None,
            FigureName::Compression => self.compressive_strength_gpa.as_ref(),
            FigureName::Yield => self.yield_stress_gpa.as_ref(),
            FigureName::StrainAtBreak => Some(&self.strain_at_break_pct),
            FigureName::KinkStrengthLoss => self.kink_strength_loss.as_ref(),
            FigureName::WeibullModulus => self.weibull_modulus.as_ref(),
            FigureName::MaxTemp => Some(&self.max_temp_air_c),
            FigureName::Friction => {
                let (steel, ceramic) = (&self.friction_fibre_steel, &self.friction_fibre_ceramic);
                Some(if ceramic.value > steel.value {
                    ceramic
                } else {
                    steel
                })
            }
        }
    }

    /// The typical value of that name in internal units (mm, MPa, g/cm3, degC, ratio).
    #[must_use]
    pub fn value(&self, name: FigureName) -> Option<f64> {
        if name == FigureName::Gauge {
            return self.strength_gpa.gauge_mm;
        }
        let value = self.figure(name)?.value;
        Some(match name {
            FigureName::Diameter => value / 1000.0,
            FigureName::Modulus
            | FigureName::Strength
            | FigureName::Compression
            | FigureName::Yield => value * 1000.0,
            FigureName::StrainAtBreak => value / 100.0,
            _ => value,
        })
    }

    /// Where the value of that name comes from.
    #[must_use]
    pub fn origin(&self, name: FigureName) -> Option<Origin> {
        let from = match name {
            FigureName::Gauge => &self.strength_gpa,
            _ => self.figure(name)?,
        };
        Some(Origin::Library {
            record: self.id.clone(),
            how: from.how,
            source: from.source.clone(),
            judged: from.basis.is_some(),
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn origins_read_as_sentences() {
        let text = include_str!("data/alumina.toml");
        let alumina = Record::parse("alumina", text).unwrap();
        let said = |name| alumina.origin(name).unwrap().to_string();
        assert_eq!(
            said(FigureName::Modulus),
            "library record `alumina`, read in bunsell-2018, table 1.4; nrc-1824; course-fibre-table"
        );
        assert_eq!(
            said(FigureName::WeibullModulus),
            "library record `alumina`, from memory"
        );
        assert!(said(FigureName::Strength).ends_with("(typical value judged inside that range)"));
        assert_eq!(Origin::Given.to_string(), "given in the spec");
    }

    #[test]
    fn friction_on_a_guide_is_the_larger_one() {
        let text = include_str!("data/aramid-hm.toml");
        let aramid = Record::parse("aramid-hm", text).unwrap();
        assert_eq!(aramid.value(FigureName::Friction), Some(0.22));
    }
}
