//! The sources behind the figures, and the factors that hold for whole classes of fibre.

use std::sync::OnceLock;

use serde::{Deserialize, Serialize};

use super::figure::{Figure, How, origin_problems};
use super::record::DataError;

/// How much of a source was seen.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Seen {
    /// The content cited was read in a public page or document.
    Read,
    /// Only an abstract or title page was read.
    Abstract,
    /// Known from memory only: look it up before relying on it.
    Memory,
}

/// One published source.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Source {
    /// The id by which figures name it.
    pub id: String,
    /// Authors, title, place; trade names are left out of titles as `[..]`.
    pub citation: String,
    /// How much of it was seen.
    pub seen: Seen,
    /// Anything more about what was seen.
    pub note: Option<String>,
}

/// A share of strength lost after heating to a temperature.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct HeatPoint {
    /// Temperature of conditioning in degC.
    pub at_c: f64,
    /// Share of the room-temperature strength lost (0 to 1).
    pub loss: f64,
}

/// Strength that sized glass loses by heat.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct HeatLoss {
    /// By rising temperature.
    pub points: Vec<HeatPoint>,
    /// As in [`Figure::source`].
    #[serde(default)]
    pub source: Vec<String>,
    /// How it is known.
    pub how: How,
    /// What the points stand for.
    pub note: String,
}

/// A range whose sources give no typical value.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FigureRange {
    /// Lower end.
    pub min: f64,
    /// Upper end.
    pub max: f64,
    /// As in [`Figure::source`].
    #[serde(default)]
    pub source: Vec<String>,
    /// How it is known.
    pub how: How,
    /// What the range stands for.
    pub note: String,
}

/// Factors that hold for whole classes of fibre.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct General {
    /// Compressive strength in bending over the uniaxial figure. The mechanics use
    /// [`COMPRESSION_BENDING_FACTOR`](super::COMPRESSION_BENDING_FACTOR), which a test holds equal to it.
    pub compression_bending_factor: Figure,
    /// Share of tensile strength lost by kinking, for the one fibre on which it was read.
    pub kink_strength_loss: Figure,
    /// Strength that sized E-glass loses by heat.
    pub glass_heat_loss: HeatLoss,
    /// Share of yarn strength lost in weaving one kind of glass cloth.
    pub weaving_strength_loss_glass_3d: FigureRange,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct SourceFile {
    source: Vec<Source>,
}

/// All sources that a record or a general factor names, by id.
///
/// # Errors
/// The built-in file is broken; a test sees to it that it is not.
pub fn sources() -> Result<&'static [Source], &'static DataError> {
    static CELL: OnceLock<Result<Vec<Source>, DataError>> = OnceLock::new();
    CELL.get_or_init(|| {
        toml::from_str::<SourceFile>(include_str!("sources.toml"))
            .map(|file| file.source)
            .map_err(|error| DataError::toml("sources", &error))
    })
    .as_ref()
    .map(Vec::as_slice)
}

/// The id in a reference such as `bunsell-2018, table 1.4`.
#[must_use]
pub fn source_id(reference: &str) -> &str {
    reference
        .split_once(',')
        .map_or(reference, |(id, _place)| id)
        .trim()
}

/// The general factors.
///
/// # Errors
/// The built-in file is broken; a test sees to it that it is not.
pub fn general() -> Result<&'static General, &'static DataError> {
    static CELL: OnceLock<Result<General, DataError>> = OnceLock::new();
    CELL.get_or_init(|| parse_general(include_str!("general.toml")))
        .as_ref()
}

fn parse_general(text: &str) -> Result<General, DataError> {
    let general: General =
        toml::from_str(text).map_err(|error| DataError::toml("general", &error))?;
    let mut problems = general
        .compression_bending_factor
        .problems("compression_bending_factor");
    problems.extend(general.kink_strength_loss.problems("kink_strength_loss"));
    let heat = &general.glass_heat_loss;
    problems.extend(origin_problems(
        "glass_heat_loss",
        heat.how,
        &heat.source,
        &[],
    ));
    let weaving = &general.weaving_strength_loss_glass_3d;
    problems.extend(origin_problems(
        "weaving_strength_loss_glass_3d",
        weaving.how,
        &weaving.source,
        &[],
    ));
    DataError::unless_empty("general", problems)?;
    Ok(general)
}

#[cfg(test)]
mod tests {
    use super::super::{COMPRESSION_BENDING_FACTOR, library};
    use super::*;
    use std::collections::BTreeSet;

    /// Every id named anywhere: as a source, as a place to check in, or in square brackets in a note.
    fn named_ids() -> BTreeSet<String> {
        let mut ids = BTreeSet::new();
        let mut texts = vec![include_str!("general.toml").to_owned()];
        texts.extend(
            super::super::entries::ENTRIES
                .iter()
                .map(|e| e.text.to_owned()),
        );
        for text in texts {
            for line in text.lines() {
                if line.starts_with("source") || line.starts_with("check_in") {
                    ids.extend(
                        line.split('"')
                            .skip(1)
                            .step_by(2)
                            .map(|reference| source_id(reference).to_owned()),
                    );
                } else if line.starts_with("note") || line.starts_with("text") {
                    for part in line.split('[').skip(1) {
                        ids.extend(part.split_once(']').map(|(id, _)| id.to_owned()));
                    }
                }
            }
        }
        ids
    }

    #[test]
    fn the_table_holds_exactly_the_sources_that_are_named() {
        let table: BTreeSet<String> = sources().unwrap().iter().map(|s| s.id.clone()).collect();
        assert_eq!(table.len(), sources().unwrap().len(), "ids are unique");
        assert_eq!(named_ids(), table);
    }

    #[test]
    fn figures_of_records_name_sources_of_the_table() {
        let table: BTreeSet<&str> = sources().unwrap().iter().map(|s| s.id.as_str()).collect();
        for record in library().iter() {
            let record = record.unwrap();
            for (key, figure) in record.figures() {
                for reference in figure.source.iter().chain(&figure.check_in) {
                    assert!(table.contains(source_id(reference)), "{} {key}", record.id);
                }
            }
        }
    }

    #[test]
    fn a_place_is_no_part_of_the_id() {
        assert_eq!(source_id("bunsell-2018, table 1.4"), "bunsell-2018");
        assert_eq!(source_id("nrc-1824"), "nrc-1824");
    }

    #[test]
    fn general_factors_agree_with_the_code() {
        let general = general().unwrap();
        assert_eq!(
            general.compression_bending_factor.value,
            COMPRESSION_BENDING_FACTOR
        );
        // Thomason et al.: stable to 250 degC, more than half lost at 400.
        let points = &general.glass_heat_loss.points;
        assert!(points.is_sorted_by(|a, b| a.at_c < b.at_c && a.loss <= b.loss));
        assert!(
            parse_general(
                &include_str!("general.toml")
                    .replace("source = [\"rudov-clark-2003\"]", "source = []")
            )
            .is_err()
        );
    }
}
