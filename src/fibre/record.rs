//! One fibre of the library as its file states it: every figure with its range and its origin.

use serde::Deserialize;
use thiserror::Error;

use super::figure::{Figure, How, Statement, origin_problems};
use super::kind::{CompressionBasis, FlawKind, Hazard, Kind, StrengthBasis};

/// What limits the strength, in a word and in a sentence.
#[derive(Debug, Clone, PartialEq, serde::Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Flaws {
    /// Where they sit.
    pub kind: FlawKind,
    /// What they are.
    pub text: String,
    /// As in [`Figure::source`].
    #[serde(default)]
    pub source: Vec<String>,
    /// As in [`Figure::check_in`].
    #[serde(default)]
    pub check_in: Vec<String>,
    /// How it is known.
    pub how: How,
}

/// A fibre type. Grades are generic.
#[derive(Debug, Clone, PartialEq, serde::Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Record {
    /// Short name in kebab case, unique.
    pub id: String,
    /// Full name.
    pub name: String,
    /// Family: glass, carbon, aramid, polymer, ceramic, metal, natural.
    pub family: String,
    /// How it fails in bending.
    pub kind: Kind,
    /// The caution that goes with it.
    pub hazard: Hazard,
    /// What was pulled to find the strength.
    pub strength_basis: StrengthBasis,
    /// Why the strength is taken to be of that basis.
    pub strength_basis_why: String,
    /// How the compressive strength was read; present where there is one.
    pub compression_basis: Option<CompressionBasis>,
    /// Diameter of one filament in um.
    pub filament_diameter_um: Figure,
    /// Density in g/cm3.
    pub density_g_cm3: Figure,
    /// Axial tensile modulus in GPa.
    pub modulus_gpa: Figure,
    /// Tensile strength in GPa.
    pub strength_gpa: Figure,
    /// Axial compressive strength in GPa, on the basis that `compression_basis` names.
    pub compressive_strength_gpa: Option<Figure>,
    /// A lower bound of the compressive strength in GPa where no figure is known. No limit follows from it.
    pub compressive_strength_at_least_gpa: Option<Figure>,
    /// Yield stress in GPa (ductile fibres).
    pub yield_stress_gpa: Option<Figure>,
    /// Strain at break in per cent.
    pub strain_at_break_pct: Figure,
    /// Weibull modulus of the strength (no unit).
    pub weibull_modulus: Option<Figure>,
    /// What limits the strength.
    pub flaws: Flaws,
    /// Share of the tensile strength lost by kinking (fibrillar fibres, 0 to 1).
    pub kink_strength_loss: Option<Figure>,
    /// Highest temperature in air for handling and desizing in degC. Not a service limit.
    pub max_temp_air_c: Figure,
    /// Coefficient of friction, fibre on fibre.
    pub friction_fibre_fibre: Figure,
    /// Coefficient of friction on steel.
    pub friction_fibre_steel: Figure,
    /// Coefficient of friction on ceramic.
    pub friction_fibre_ceramic: Figure,
    /// How it fails when bent.
    pub failure_in_bending: Statement,
    /// What moisture does to it.
    pub moisture: Statement,
    /// Hazards of handling it.
    pub handling: Statement,
}

/// A built-in data file that is broken: a bug of this program, never of a spec.
#[derive(Debug, Clone, PartialEq, Eq, Error)]
pub enum DataError {
    /// The text is no TOML of the right form.
    #[error("built-in fibre data `{file}` cannot be read: {message}")]
    Toml {
        /// The file.
        file: String,
        /// What the reader says, with line and column.
        message: String,
    },
    /// The text reads, but its figures break a rule.
    #[error("built-in fibre data `{file}` is unsound: {}", .problems.join("; "))]
    Unsound {
        /// The file.
        file: String,
        /// One sentence for each problem.
        problems: Vec<String>,
    },
}

impl DataError {
    pub(super) fn toml(file: &str, error: &toml::de::Error) -> Self {
        Self::Toml {
            file: file.to_owned(),
            message: error.to_string(),
        }
    }

    pub(super) fn unless_empty(file: &str, problems: Vec<String>) -> Result<(), Self> {
        if problems.is_empty() {
            return Ok(());
        }
        Err(Self::Unsound {
            file: file.to_owned(),
            problems,
        })
    }
}

impl Record {
    /// Reads one record and checks it whole.
    ///
    /// # Errors
    /// The text is no record, a figure has no origin or lies outside its range, or a figure that the kind needs is absent.
    pub fn parse(file: &str, text: &str) -> Result<Self, DataError> {
        let record: Self = toml::from_str(text).map_err(|error| DataError::toml(file, &error))?;
        DataError::unless_empty(file, record.problems())?;
        Ok(record)
    }

    /// Every figure the record has, with its key.
    pub fn figures(&self) -> impl Iterator<Item = (&'static str, &Figure)> {
        [
            ("filament_diameter_um", Some(&self.filament_diameter_um)),
            ("density_g_cm3", Some(&self.density_g_cm3)),
            ("modulus_gpa", Some(&self.modulus_gpa)),
            ("strength_gpa", Some(&self.strength_gpa)),
            (
                "compressive_strength_gpa",
                self.compressive_strength_gpa.as_ref(),
            ),
            (
                "compressive_strength_at_least_gpa",
                self.compressive_strength_at_least_gpa.as_ref(),
            ),
            ("yield_stress_gpa", self.yield_stress_gpa.as_ref()),
            ("strain_at_break_pct", Some(&self.strain_at_break_pct)),
            ("weibull_modulus", self.weibull_modulus.as_ref()),
            ("kink_strength_loss", self.kink_strength_loss.as_ref()),
            ("max_temp_air_c", Some(&self.max_temp_air_c)),
            ("friction_fibre_fibre", Some(&self.friction_fibre_fibre)),
            ("friction_fibre_steel", Some(&self.friction_fibre_steel)),
            ("friction_fibre_ceramic", Some(&self.friction_fibre_ceramic)),
        ]
        .into_iter()
        .filter_map(|(key, figure)| figure.map(|figure| (key, figure)))
    }

    /// Every statement the record has, with its key.
    pub fn statements(&self) -> impl Iterator<Item = (&'static str, &Statement)> {
        [
            ("failure_in_bending", &self.failure_in_bending),
            ("moisture", &self.moisture),
            ("handling", &self.handling),
        ]
        .into_iter()
    }

    fn problems(&self) -> Vec<String> {
        let mut problems = Vec::new();
        for (key, figure) in self.figures() {
            problems.extend(figure.problems(key));
        }
        for (key, text) in self.statements() {
            problems.extend(origin_problems(key, text.how, &text.source, &text.check_in));
        }
        let flaws = &self.flaws;
        problems.extend(origin_problems(
            "flaws",
            flaws.how,
            &flaws.source,
            &flaws.check_in,
        ));
        if self.compression_basis.is_some() != self.compressive_strength_gpa.is_some() {
            problems
                .push("`compression_basis` and `compressive_strength_gpa` go together".to_owned());
        }
        if self.weibull_modulus.is_some() && self.strength_gpa.gauge_mm.is_none() {
            problems.push("`weibull_modulus` needs `strength_gpa.gauge_mm`".to_owned());
        }
        if let Err(error) = self.fibre() {
            problems.push(error.to_string());
        }
        problems
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const GLASS: &str = include_str!("data/e-glass.toml");
    const ARAMID: &str = include_str!("data/aramid-hm.toml");
    const WIRE: &str = include_str!("data/stainless-annealed.toml");

    fn refusal(text: &str) -> String {
        Record::parse("doctored", text).unwrap_err().to_string()
    }

    #[test]
    fn a_record_without_sources_is_refused() {
        let doctored: String = GLASS
            .lines()
            .filter(|line| !line.starts_with("source"))
            .map(|line| format!("{line}\n"))
            .collect();
        let message = refusal(&doctored);
        for key in ["density_g_cm3", "modulus_gpa", "flaws", "handling"] {
            let sentence = format!("`{key}` was read or derived but names no `source`");
            assert!(message.contains(&sentence), "{message}");
        }
    }

    #[test]
    fn a_figure_outside_its_range_is_refused() {
        let message = refusal(&GLASS.replace("value = 73.0", "value = 730.0"));
        assert_eq!(
            message,
            "built-in fibre data `doctored` is unsound: `modulus_gpa.value` lies above its `max`"
        );
    }

    #[test]
    fn a_kind_without_the_figures_it_needs_is_refused() {
        let fibrillar = refusal(&GLASS.replace("kind = \"brittle\"", "kind = \"fibrillar\""));
        assert!(fibrillar.contains("`compressive_strength`"), "{fibrillar}");
        let ductile = refusal(&ARAMID.replace("kind = \"fibrillar\"", "kind = \"ductile\""));
        assert!(ductile.contains("`yield_stress`"), "{ductile}");
        let stronger = refusal(&WIRE.replace("value = 0.25\nmin = 0.2\nmax = 0.35", "value = 0.9"));
        assert!(stronger.contains("yield stress"), "{stronger}");
    }

    #[test]
    fn an_unknown_key_is_refused() {
        assert!(refusal(&format!("colour = \"white\"\n{GLASS}")).contains("colour"));
    }

    #[test]
    fn basis_and_strength_go_together() {
        let message = refusal(&ARAMID.replace("compression_basis = \"uniaxial\"\n", ""));
        assert!(message.contains("go together"), "{message}");
    }
}
