//! From a record, or from given values, to the plain numbers of a [`Fibre`].
//!
//! A spec may start from a record and replace figures, or give a fibre whole. Either way the kind decides which figures must
//! be there: every kind needs diameter, density, modulus and strength; a fibrillar fibre its compressive strength; a ductile
//! one its yield stress and strain at break. A figure given for a kind that has no use for it is refused, not ignored.
//! All problems come together.

use super::filament::{Compression, Fibre, Mechanism, Weibull};
use super::kind::{CompressionBasis, FlawKind, Hazard, Kind, StrengthBasis};
use super::origin::{FigureName, Origin};
use super::overrides::{FibreError, FibreOverrides, FibreProblem};
use super::record::Record;

impl Record {
    /// The record's typical figures as plain numbers.
    ///
    /// # Errors
    /// Never for a record that [`Record::parse`] returned.
    pub fn fibre(&self) -> Result<Fibre, FibreError> {
        self.fibre_with(&FibreOverrides::default())
    }

    /// The record's typical figures, those given in their place.
    ///
    /// # Errors
    /// A given figure is out of range or of no use to the kind; or the kind was changed and figures are missing.
    pub fn fibre_with(&self, given: &FibreOverrides) -> Result<Fibre, FibreError> {
        Builder::new(Some(self), given).build()
    }
}

impl Fibre {
    /// A fibre from given figures alone.
    ///
    /// # Errors
    /// The kind or a figure that it needs is missing, or a given figure is out of range or of no use to the kind.
    pub fn from_values(given: &FibreOverrides) -> Result<Self, FibreError> {
        Builder::new(None, given).build()
    }
}

/// Takes figures one by one, noting origins and problems.
struct Builder<'a> {
    record: Option<&'a Record>,
    given: &'a FibreOverrides,
    origins: Vec<(FigureName, Origin)>,
    problems: Vec<FibreProblem>,
}

impl<'a> Builder<'a> {
    fn new(record: Option<&'a Record>, given: &'a FibreOverrides) -> Self {
        Self {
            record,
            given,
            origins: Vec::new(),
            problems: Vec::new(),
        }
    }

    fn optional(&mut self, name: FigureName) -> Option<f64> {
        if let Some(value) = self.given.value(name) {
            self.check(name, value);
            self.origins.push((name, Origin::Given));
            return Some(value);
        }
        let value = self.record?.value(name)?;
        let origin = self.record?.origin(name)?;
        self.origins.push((name, origin));
        Some(value)
    }

    /// The figure, or a number that is never used because the problem is noted.
    fn required(&mut self, name: FigureName) -> f64 {
        self.optional(name).unwrap_or_else(|| {
            self.problems.push(FibreProblem::Missing { figure: name });
            f64::NAN
        })
    }

    fn check(&mut self, figure: FigureName, value: f64) {
        let share = figure == FigureName::KinkStrengthLoss;
        let (sound, must) = match figure {
            _ if share => ((0.0..=1.0).contains(&value), "a share from 0 to 1"),
            FigureName::MaxTemp => (value.is_finite(), "a number"),
            FigureName::Friction => (value.is_finite() && value >= 0.0, "zero or above"),
            _ => (value.is_finite() && value > 0.0, "above zero"),
        };
        if !sound {
            self.problems.push(FibreProblem::BadValue {
                figure,
                value,
                must,
            });
        }
    }

    fn refuse_unused(&mut self, kind: Kind, names: &[FigureName]) {
        for &figure in names {
            if self.given.value(figure).is_some() {
                self.problems.push(FibreProblem::Unused { figure, kind });
            }
        }
    }

    fn compression_basis(&self) -> CompressionBasis {
        self.given
            .compression_basis
            .or(self.record.and_then(|record| record.compression_basis))
            .unwrap_or(CompressionBasis::Bending)
    }

    fn mechanism(&mut self, kind: Kind, modulus_mpa: f64, strength_mpa: f64) -> Mechanism {
        use FigureName::{Compression as Compressive, KinkStrengthLoss, StrainAtBreak, Yield};
        let basis = self.compression_basis();
        let compression = |strength_mpa| Compression {
            strength_mpa,
            basis,
        };
        match kind {
            Kind::Brittle => {
                self.refuse_unused(kind, &[Yield, StrainAtBreak, KinkStrengthLoss]);
                Mechanism::Brittle {
                    compression: self.optional(Compressive).map(compression),
                }
            }
            Kind::Fibrillar => {
                self.refuse_unused(kind, &[Yield, StrainAtBreak]);
                Mechanism::Fibrillar {
                    compression: compression(self.required(Compressive)),
                    kink_strength_loss: self.optional(KinkStrengthLoss),
                }
            }
            Kind::Ductile => {
                self.refuse_unused(kind, &[Compressive, KinkStrengthLoss]);
                let yield_mpa = self.required(Yield);
                let strain_at_break = self.required(StrainAtBreak);
                let strain_at_yield = yield_mpa / modulus_mpa;
                if yield_mpa > strength_mpa {
                    self.problems.push(FibreProblem::YieldAboveStrength {
                        yield_mpa,
                        strength_mpa,
                    });
                } else if strain_at_break < strain_at_yield {
                    self.problems.push(FibreProblem::BreaksBeforeYield {
                        strain_at_break,
                        strain_at_yield,
                    });
                }
                Mechanism::Ductile {
                    yield_mpa,
                    strain_at_break,
                }
            }
        }
    }

    fn weibull(&mut self) -> Option<Weibull> {
        let modulus = self.optional(FigureName::WeibullModulus)?;
        Some(Weibull {
            modulus,
            strength_gauge_mm: self.required(FigureName::Gauge),
            flaws: self
                .given
                .flaws
                .or(self.record.map(|record| record.flaws.kind))
                .unwrap_or(FlawKind::Surface),
        })
    }

    fn build(mut self) -> Result<Fibre, FibreError> {
        let (record, given) = (self.record, self.given);
        let id = given
            .id
            .clone()
            .or_else(|| record.map(|record| record.id.clone()))
            .unwrap_or_default();
        let name = match (&given.id, record) {
            (None, Some(record)) => record.name.clone(),
            _ => id.clone(),
        };
        let diameter_mm = self.required(FigureName::Diameter);
        let density_g_cm3 = self.required(FigureName::Density);
        let modulus_mpa = self.required(FigureName::Modulus);
        let strength_mpa = self.required(FigureName::Strength);
        let kind = given.kind.or(record.map(|record| record.kind));
        let mechanism = kind.map(|kind| self.mechanism(kind, modulus_mpa, strength_mpa));
        let weibull = self.weibull();
        let max_temp_c = self.optional(FigureName::MaxTemp);
        let friction_on_guide = self.optional(FigureName::Friction);
        let Some(mechanism) = mechanism else {
            self.problems.insert(0, FibreProblem::KindMissing);
            return Err(self.error(id));
        };
        if !self.problems.is_empty() {
            return Err(self.error(id));
        }
        Ok(Fibre {
            id,
            name,
            family: record.map(|record| record.family.clone()),
            mechanism,
            hazard: given
                .hazard
                .or(record.map(|record| record.hazard))
                .unwrap_or(Hazard::NoHazard),
            diameter_mm,
            modulus_mpa,
            strength_mpa,
            strength_basis: given
                .strength_basis
                .or(record.map(|record| record.strength_basis))
                .unwrap_or(StrengthBasis::Yarn),
            density_g_cm3,
            max_temp_c,
            friction_on_guide,
            weibull,
            origins: self.origins,
        })
    }

    fn error(self, id: String) -> FibreError {
        FibreError {
            id,
            problems: self.problems,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::library;
    use super::*;

    /// The furnace curtain of the design: an alumina with a thicker filament.
    #[test]
    fn a_spec_replaces_one_figure_and_keeps_the_rest() {
        let alumina = library().find("alumina").unwrap();
        let curtain = alumina
            .fibre_with(&FibreOverrides {
                id: Some("curtain-alumina".to_owned()),
                diameter_mm: Some(0.0125),
                ..FibreOverrides::default()
            })
            .unwrap();
        assert_eq!(curtain.id, "curtain-alumina");
        assert_eq!(curtain.name, "curtain-alumina");
        assert_eq!(curtain.diameter_mm, 0.0125);
        assert_eq!(curtain.modulus_mpa, 373_000.0);
        assert_eq!(curtain.origin(FigureName::Diameter), Some(&Origin::Given));
        let modulus = curtain.origin(FigureName::Modulus).unwrap().to_string();
        assert!(modulus.starts_with("library record `alumina`, read in"));
        assert_eq!(curtain.hazard, Hazard::Ceramic);
    }

    #[test]
    fn a_fibre_given_whole_lists_all_that_is_missing() {
        let given = FibreOverrides {
            id: Some("x".to_owned()),
            kind: Some(Kind::Ductile),
            modulus_mpa: Some(195_000.0),
            ..FibreOverrides::default()
        };
        assert_eq!(
            Fibre::from_values(&given).unwrap_err().to_string(),
            "fibre `x`: `filament_diameter` is missing; `density` is missing; `strength` is missing; \
             `yield_stress` is missing; `strain_at_break` is missing"
        );
        let nothing = Fibre::from_values(&FibreOverrides::default()).unwrap_err();
        assert_eq!(nothing.problems[0], FibreProblem::KindMissing);
        assert_eq!(nothing.problems.len(), 5);
    }

    fn whole(kind: Kind) -> FibreOverrides {
        FibreOverrides {
            id: Some("own".to_owned()),
            kind: Some(kind),
            diameter_mm: Some(0.01),
            density_g_cm3: Some(2.0),
            modulus_mpa: Some(100_000.0),
            strength_mpa: Some(1000.0),
            ..FibreOverrides::default()
        }
    }

    #[test]
    fn where_nobody_says_the_safe_side_is_taken() {
        let fibre = Fibre::from_values(&FibreOverrides {
            compressive_strength_mpa: Some(300.0),
            weibull_modulus: Some(5.0),
            strength_gauge_mm: Some(25.0),
            ..whole(Kind::Fibrillar)
        })
        .unwrap();
        // No factor of two on a compressive strength of unknown kind.
        assert_eq!(fibre.compressive_strength_in_bending_mpa(), Some(300.0));
        assert!(fibre.strength_basis.counts_are_indicative());
        assert_eq!(fibre.weibull.unwrap().flaws, FlawKind::Surface);
        assert_eq!(fibre.friction_on_guide, None);
        assert_eq!(fibre.origin(FigureName::Friction), None);
    }

    #[test]
    fn figures_of_another_kind_are_refused_when_given_and_left_when_inherited() {
        let error = Fibre::from_values(&FibreOverrides {
            yield_mpa: Some(100.0),
            ..whole(Kind::Brittle)
        })
        .unwrap_err();
        assert_eq!(
            error.to_string(),
            "fibre `own`: `yield_stress` has no meaning for a brittle fibre"
        );
        // A record's strain at break is only stated, never a limit, for a brittle fibre.
        let glass = library().find("e-glass").unwrap().fibre().unwrap();
        assert_eq!(glass.origin(FigureName::StrainAtBreak), None);
    }

    #[test]
    fn numbers_that_cannot_be_are_refused() {
        for value in [0.0, -1.0, f64::NAN, f64::INFINITY] {
            let error = Fibre::from_values(&FibreOverrides {
                modulus_mpa: Some(value),
                ..whole(Kind::Brittle)
            })
            .unwrap_err();
            assert_eq!(error.problems[0].figure(), Some(FigureName::Modulus));
        }
        let loss = Fibre::from_values(&FibreOverrides {
            compressive_strength_mpa: Some(300.0),
            kink_strength_loss: Some(1.1),
            ..whole(Kind::Fibrillar)
        })
        .unwrap_err();
        assert_eq!(
            loss.to_string(),
            "fibre `own`: `kink_strength_loss` must be a share from 0 to 1, not 1.1"
        );
    }

    #[test]
    fn a_ductile_fibre_yields_before_it_breaks() {
        let with = |yield_mpa, strain| {
            Fibre::from_values(&FibreOverrides {
                yield_mpa: Some(yield_mpa),
                strain_at_break: Some(strain),
                ..whole(Kind::Ductile)
            })
        };
        assert!(with(500.0, 0.1).is_ok());
        assert_eq!(
            with(1100.0, 0.1).unwrap_err().to_string(),
            "fibre `own`: the yield stress, 1100 MPa, lies above the strength, 1000 MPa"
        );
        assert_eq!(
            with(500.0, 0.001).unwrap_err().to_string(),
            "fibre `own`: the strain at break, 0.001, lies below the strain at yield, 0.0050"
        );
    }

    #[test]
    fn a_weibull_modulus_needs_its_gauge() {
        let error = Fibre::from_values(&FibreOverrides {
            weibull_modulus: Some(5.0),
            ..whole(Kind::Brittle)
        })
        .unwrap_err();
        assert_eq!(error.to_string(), "fibre `own`: `gauge_length` is missing");
    }
}
