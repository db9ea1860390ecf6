//! `[weave]`: the pattern and its two systems.

use super::field::{Bound, Field, Placed};
use super::keys::{SYSTEM, WEAVE};
use super::problem::{Problem, nearest_of};
use super::reader::Table;
use super::shed::{Shed, read_shed};
use super::yarn::SpecYarn;
use crate::pattern::{Pattern, PatternError, Weaves, Woven};
use crate::quantity::Dimension;
use crate::span::Span;
use crate::yarn::{CLOSEST_PACKING, LayError, Vary, Yarn};
use std::sync::Arc;

/// Mean tension where none is given, N/tex (common practice, no source).
pub const DEFAULT_TENSION_N_TEX: f64 = 0.01;
/// Peak over mean tension where none is given (common practice, no source).
pub const DEFAULT_PEAK: f64 = 2.0;
/// Share of the mean pull left at rest where none is given (an assumption).
pub const DEFAULT_REST: f64 = 0.1;

/// The model of a yarn's path.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum PathModel {
    /// A flexible thread.
    Taut,
    /// A rod under pull: the path of least energy.
    Stiff,
}

/// The state of the cloth in which its sett was counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum SettAt {
    /// Off the loom, at rest.
    Finished,
    /// On the loom, under the weaving tension.
    Loom,
}

/// The model where none is given.
pub const DEFAULT_PATH: PathModel = PathModel::Stiff;

/// One system of a weave: the ends or the picks.
#[derive(Debug, Clone)]
pub struct System {
    /// The yarn.
    pub yarn: Arc<Yarn>,
    /// Threads per mm of cloth.
    pub sett_per_mm: f64,
    /// Mean pull on one yarn at the fell, N.
    pub tension_n: f64,
    /// Whether the spec gave that pull.
    pub tension_given: bool,
    /// Measured crimp, a ratio.
    pub crimp: Option<f64>,
    /// The line that holds this system.
    pub span: Span,
    /// The sett's place.
    pub sett_span: Span,
}

impl System {
    /// Distance between neighbouring yarns, mm.
    pub fn spacing_mm(&self) -> f64 {
        1.0 / self.sett_per_mm
    }
}

/// A weave, resolved: it hangs together, and each yarn lies beside its neighbours.
#[derive(Debug, Clone)]
pub struct Weave {
    /// What the spec called the pattern.
    pub pattern_name: String,
    /// The pattern's smallest repeat, its floats and changes; one cloth.
    pub woven: Arc<Woven>,
    /// The ends.
    pub warp: System,
    /// The picks.
    pub weft: System,
    /// Measured thickness of the cloth, mm.
    pub thickness_mm: Option<f64>,
    /// Model of the yarns' paths.
    pub path: PathModel,
    /// The state in which the sett was counted; of no account to taut paths, which have one state.
    pub sett_at: SettAt,
    /// Whether the spec gave it.
    pub sett_at_given: bool,
    /// Share of the mean pull that stays at rest.
    pub rest: f64,
    /// Whether the spec gave that share.
    pub rest_given: bool,
    /// Peak over mean tension.
    pub peak: f64,
    /// Whether the spec gave that ratio.
    pub peak_given: bool,
    /// The open shed, where the spec tells it.
    pub shed: Option<Shed>,
    /// Where the measured thickness stands, else the weave.
    pub span: Span,
}

/// Reads `[weave]`.
pub fn read_weave(spec: &Table<'_>, yarns: &[SpecYarn], weaves: &Weaves) -> Option<Weave> {
    let table = match spec.table("weave", "[weave]", WEAVE) {
        Field::Given(placed) => placed.value,
        Field::Wrong => return None,
        Field::Absent => {
            spec.push(
                Problem::at(spec.span(), "the spec has no `[weave]`", "nothing to check")
                    .help("add `[weave]` with `pattern`, `warp` and `weft`; `lissom new` writes a spec to start from"),
            );
            return None;
        }
    };
    let pattern = read_pattern(&table, weaves);
    let warp = read_system(&table, "warp", yarns);
    let weft = read_system(&table, "weft", yarns);
    let thickness = table.measure("thickness", Dimension::Length, Bound::Positive);
    let path = table
        .word(
            "path",
            &[("taut", PathModel::Taut), ("stiff", PathModel::Stiff)],
        )
        .value();
    let sett_at = table
        .word(
            "sett_at",
            &[("finished", SettAt::Finished), ("loom", SettAt::Loom)],
        )
        .value();
    let rest = table
        .measure("rest", Dimension::Share, Bound::Within(0.0, 1.0))
        .value();
    let peak = table.number("peak", Bound::Within(1.0, 100.0)).value();
    let shed = read_shed(&table);
    let span = thickness
        .clone()
        .given()
        .map_or_else(|| table.span(), |placed| placed.span);
    let (pattern_name, woven) = pattern?;
    Some(Weave {
        pattern_name,
        woven,
        warp: warp?,
        weft: weft?,
        thickness_mm: thickness.value(),
        path: path.unwrap_or(DEFAULT_PATH),
        sett_at: sett_at.unwrap_or(SettAt::Finished),
        sett_at_given: sett_at.is_some(),
        rest: rest.unwrap_or(DEFAULT_REST),
        rest_given: rest.is_some(),
        peak: peak.unwrap_or(DEFAULT_PEAK),
        peak_given: peak.is_some(),
        shed,
        span,
    })
}

fn read_pattern(table: &Table<'_>, weaves: &Weaves) -> Option<(String, Arc<Woven>)> {
    let (name, span, woven) = match (table.text("pattern"), table.texts("rows")) {
        (Field::Given(_), Field::Given(rows)) => {
            table.push(
                Problem::at(
                    rows.span,
                    "both `pattern` and `rows` are given",
                    "one too many",
                )
                .help("leave one of them out"),
            );
            return None;
        }
        (Field::Given(name), Field::Absent) => match weaves.woven(&name.value) {
            Ok(woven) => (name.value, name.span, woven),
            Err(error) => {
                table.push(
                    Problem::at(name.span, error.to_string(), "no weave")
                        .help("`lissom weaves` lists the named ones"),
                );
                return None;
            }
        },
        (Field::Absent, Field::Given(rows)) => {
            let pattern = pattern_from(table, &rows)?;
            (
                "drawn rows".to_owned(),
                rows.span,
                Arc::new(Woven::new(pattern)),
            )
        }
        (Field::Absent, Field::Absent) => {
            table.missing("pattern", "\"plain\"");
            return None;
        }
        _ => return None,
    };
    if let Some(layers) = &woven.layers {
        table.push(
            Problem::at(
                span,
                format!("this pattern is not one cloth: it falls apart, {layers}"),
                "falls apart",
            )
            .help("let some yarn of the upper layer pass under one of the lower"),
        );
        return None;
    }
    Some((name, woven))
}

fn pattern_from(table: &Table<'_>, rows: &Placed<Vec<Placed<String>>>) -> Option<Pattern> {
    let texts: Vec<&str> = rows.value.iter().map(|row| row.value.as_str()).collect();
    match Pattern::from_rows(&texts) {
        Ok(pattern) => Some(pattern),
        Err(error) => {
            let (row, _) = error.place();
            let span = rows
                .value
                .get(row - 1)
                .map_or(rows.span.clone(), |row| row.span.clone());
            let label = match error {
                PatternError::Empty { .. } => "no marks",
                PatternError::Ragged { .. } => "another length",
                PatternError::Mark { .. } => "no mark",
                PatternError::TooLarge { .. } => "too large",
            };
            table.push(Problem::at(span, error.to_string(), label));
            None
        }
    }
}

fn read_system(weave: &Table<'_>, which: &'static str, yarns: &[SpecYarn]) -> Option<System> {
    let takes = "{ yarn = \"face\", sett = \"18 /cm\" }";
    let placed = weave.required(weave.table(which, which, SYSTEM), which, takes)?;
    let table = placed.value;
    let yarn_name = table.required(table.text("yarn"), "yarn", "\"face\"");
    let sett = table.measure("sett", Dimension::Sett, Bound::Positive);
    let sett = table.required(sett, "sett", "\"18 /cm\"");
    let crimp = table.measure("crimp", Dimension::Share, Bound::NotNegative);
    let found = yarn_name.and_then(|name| find_yarn(&table, &name, yarns));
    let tension = read_tension(&table, found.map(|yarn| yarn.yarn.as_deref()));
    let (found, sett) = (found?, sett?);
    let yarn = Arc::clone(found.yarn.as_ref()?);
    // Without neighbours to lie beside there is no cloth: found here, where the sett can be pointed at.
    // An assumed packing may give way up to the closest.
    let closest = Vary {
        packing: CLOSEST_PACKING,
        ..Vary::default()
    };
    if let Err(error) = yarn.laid_at(1.0 / sett.value, closest) {
        table.push(lay_problem(&error, found, &yarn, &sett));
        return None;
    }
    Some(System {
        tension_n: tension.unwrap_or(DEFAULT_TENSION_N_TEX * yarn.count.linear_density_tex),
        tension_given: tension.is_some(),
        yarn,
        sett_per_mm: sett.value,
        crimp: crimp.value(),
        span: placed.span,
        sett_span: sett.span,
    })
}

fn find_yarn<'y>(
    table: &Table<'_>,
    name: &Placed<String>,
    yarns: &'y [SpecYarn],
) -> Option<&'y SpecYarn> {
    let found = yarns.iter().find(|yarn| yarn.name == name.value);
    if found.is_none() {
        let names = yarns.iter().map(|yarn| yarn.name.as_str());
        let all: Vec<String> = names.clone().map(|name| format!("`{name}`")).collect();
        let known = if all.is_empty() {
            "the spec has no `[yarn.NAME]`".to_owned()
        } else {
            format!("yarns of this spec: {}", all.join(", "))
        };
        table.push(
            Problem::at(
                name.span.clone(),
                format!("no yarn is called `{}`", name.value),
                "unknown yarn",
            )
            .nearest(nearest_of(&name.value, names))
            .help(known),
        );
    }
    found
}

/// A force, or a force per tex of the yarn; `None` where absent or wrong. The yarn is `None` where it is unknown.
pub fn read_tension(table: &Table<'_>, yarn: Option<Option<&Yarn>>) -> Option<f64> {
    let wanted = [Dimension::Force, Dimension::SpecificForce];
    let tension = table
        .quantity("tension", &wanted, Bound::NotNegative)
        .value()?;
    match tension.dimension {
        Dimension::SpecificForce => yarn
            .flatten()
            .map(|yarn| tension.value * yarn.count.linear_density_tex),
        _ => Some(tension.value),
    }
}

fn lay_problem(error: &LayError, spec: &SpecYarn, yarn: &Yarn, sett: &Placed<f64>) -> Problem {
    let span = match error {
        LayError::TooDense { .. }
        | LayError::NoOutline { .. }
        | LayError::ThinnerThanFilament { .. } => spec.form_span.clone(),
        LayError::SolidTooWide { .. } | LayError::OnEdge { .. } => sett.span.clone(),
    };
    // The largest sett at which the yarn still lies beside its neighbours: a circle in the spacing.
    let area = yarn.fibre_area_mm2()
        / if yarn.is_monofilament() {
            1.0
        } else {
            yarn.form.packing.unwrap_or(CLOSEST_PACKING)
        };
    let largest_per_cm = 10.0 / (4.0 * area / std::f64::consts::PI).sqrt();
    let message = format!("yarn `{}`: {error}", yarn.name);
    match error {
        LayError::TooDense { .. } | LayError::NoOutline { .. } => {
            return Problem::at(span, message, "does not fit")
                .help("check linear density, width and thickness against each other");
        }
        LayError::ThinnerThanFilament { .. } => {
            return Problem::at(span, message, "too thin")
                .help("check width, thickness, flatness and packing");
        }
        LayError::SolidTooWide { .. } | LayError::OnEdge { .. } => {}
    }
    Problem::at(span, message, "too close")
        .crowded()
        .help(format!(
            "this yarn lies side by side up to {} /cm; interlacing needs more room still",
            floor_3_digits(largest_per_cm)
        ))
}

/// Rounded down to three digits, for a limit a person may set.
fn floor_3_digits(value: f64) -> f64 {
    let scale = 10f64.powf(2.0 - value.log10().floor());
    (value * scale).floor() / scale
}
