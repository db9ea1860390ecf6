//! `[fibre.NAME]`: fibres of the spec's own, from a library record or from given figures alone.

use super::field::{Bound, Field, Placed};
use super::keys::FIBRE;
use super::problem::{Problem, nearest_of};
use super::reader::Table;
use crate::fibre::{
    CompressionBasis, Fibre, FibreOverrides, FibreProblem, FindError, FlawKind, Hazard, Kind,
    StrengthBasis, library,
};
use crate::quantity::Dimension;

/// The fibres a yarn may name: the spec's own first, then the library.
#[derive(Debug, Default)]
pub struct Fibres {
    own: Vec<(String, Option<Fibre>)>,
}

/// Letters and digits only, lower case: case, blanks, commas and hyphens aside.
fn bare(name: &str) -> String {
    name.chars()
        .filter(|c| c.is_alphanumeric())
        .flat_map(char::to_lowercase)
        .collect()
}

impl Fibres {
    /// Reads every `[fibre.NAME]` of the spec.
    pub fn read(spec: &Table<'_>) -> Self {
        let mut fibres = Self::default();
        for (name, table) in spec.named_tables("fibre", FIBRE) {
            let fibre = read_one(&name, &table);
            if fibres
                .own
                .iter()
                .any(|(other, _)| bare(other) == bare(&name.value))
            {
                table.push(
                    Problem::at(
                        name.span.clone(),
                        format!("two fibres are called `{}`", name.value),
                        "again",
                    )
                    .help("case, blanks and hyphens aside; give one of them another name"),
                );
            }
            fibres.own.push((name.value, fibre));
        }
        fibres
    }

    /// The fibre of that name, or `None` with a problem kept.
    pub fn find(&self, spec: &Table<'_>, name: &Placed<String>) -> Option<Fibre> {
        let wanted = bare(&name.value);
        if let Some((_, fibre)) = self.own.iter().find(|(own, _)| bare(own) == wanted) {
            // A fibre with problems has been reported where it stands.
            return fibre.clone();
        }
        from_library(spec, name, &FibreOverrides::default(), |name| {
            nearest_of(name, self.own.iter().map(|(own, _)| own.as_str())).map(str::to_owned)
        })
    }
}

fn from_library(
    table: &Table<'_>,
    name: &Placed<String>,
    given: &FibreOverrides,
    nearest_own: impl Fn(&str) -> Option<String>,
) -> Option<Fibre> {
    let record = match library().find(&name.value) {
        Ok(record) => record,
        Err(FindError::Unknown { query, nearest }) => {
            let nearest = nearest_own(&query).or(nearest.map(str::to_owned));
            table.push(
                Problem::at(
                    name.span.clone(),
                    format!("no fibre is called `{query}`"),
                    "unknown fibre",
                )
                .nearest(nearest.as_deref())
                .help("`lissom fibres` lists the library"),
            );
            return None;
        }
        Err(error @ FindError::Broken(_)) => {
            table.push(Problem::at(
                name.span.clone(),
                error.to_string(),
                "broken record",
            ));
            return None;
        }
    };
    match record.fibre_with(given) {
        Ok(fibre) => Some(fibre),
        Err(error) => {
            report(table, &error.problems);
            None
        }
    }
}

fn report(table: &Table<'_>, problems: &[FibreProblem]) {
    for problem in problems {
        let span = problem
            .figure()
            .and_then(|figure| table.place_of(figure.spec_key()))
            .unwrap_or_else(|| table.span());
        let mut reported = Problem::at(span, problem.to_string(), "here");
        if let FibreProblem::Missing { figure } = problem {
            let takes = FIBRE
                .iter()
                .find(|key| key.name == figure.spec_key())
                .map_or("", |key| key.takes);
            reported = reported.help(format!("`{figure}` takes a {takes}"));
        }
        table.push(reported);
    }
}

fn read_one(name: &Placed<String>, table: &Table<'_>) -> Option<Fibre> {
    let measure =
        |key: &str, kind: Dimension, bound: Bound| table.measure(key, kind, bound).value();
    let stress = |key: &str| measure(key, Dimension::Stress, Bound::Positive);
    let share = |key: &str| measure(key, Dimension::Share, Bound::Within(0.0, 1.0));
    let like = table.text("like");
    let kinds = [
        ("brittle", Kind::Brittle),
        ("fibrillar", Kind::Fibrillar),
        ("ductile", Kind::Ductile),
    ];
    let bases = [
        ("filament", StrengthBasis::Filament),
        ("strand", StrengthBasis::Strand),
        ("yarn", StrengthBasis::Yarn),
    ];
    let tests = [
        ("uniaxial", CompressionBasis::Uniaxial),
        ("bending", CompressionBasis::Bending),
    ];
    let hazards: Vec<(&'static str, Hazard)> = Hazard::ALL
        .iter()
        .map(|hazard| (hazard.word(), *hazard))
        .collect();
    let flaws: Vec<(&'static str, FlawKind)> = FlawKind::ALL
        .iter()
        .map(|flaws| (flaws.word(), *flaws))
        .collect();
    let given = FibreOverrides {
        id: Some(name.value.clone()),
        kind: table.word("kind", &kinds).value(),
        diameter_mm: measure("filament_diameter", Dimension::Length, Bound::Positive),
        density_g_cm3: measure("density", Dimension::Density, Bound::Positive),
        modulus_mpa: stress("modulus"),
        strength_mpa: stress("strength"),
        strength_basis: table.word("strength_basis", &bases).value(),
        strength_gauge_mm: measure("gauge_length", Dimension::Length, Bound::Positive),
        weibull_modulus: table
            .number("weibull_modulus", Bound::Within(1.0, 200.0))
            .value(),
        flaws: table.word("flaws", &flaws).value(),
        compressive_strength_mpa: stress("compressive_strength"),
        compression_basis: table.word("compression_basis", &tests).value(),
        yield_mpa: stress("yield_stress"),
        strain_at_break: measure("strain_at_break", Dimension::Share, Bound::Positive),
        hazard: table.word("hazard", &hazards).value(),
        kink_strength_loss: share("kink_strength_loss"),
        max_temp_c: measure("max_temperature", Dimension::Temperature, Bound::Any),
        friction_on_guide: table.number("friction", Bound::Within(0.0, 2.0)).value(),
    };
    match like {
        Field::Given(like) => from_library(table, &like, &given, |_| None),
        Field::Wrong => None,
        // A figure that was wrong has been reported; do not report it as missing too.
        Field::Absent if table.has_problems_inside() => None,
        Field::Absent => match Fibre::from_values(&given) {
            Ok(fibre) => Some(fibre),
            Err(error) => {
                report(table, &error.problems);
                None
            }
        },
    }
}
