//! One bend in words: its sentences and the cells of its row; shared by text, Markdown and pages.

use super::bend::{BendRow, LimitRow};
use super::broken::count;
use crate::quantity::{plain, significant};

/// What a bend does to the fibre, in sentences; shared by text and Markdown.
pub(super) fn bend_sentences(bend: &BendRow) -> Vec<String> {
    let mut said = Vec::new();
    if let (Some(here), Some(limit)) = (bend.temperature_c, bend.max_temperature_c) {
        return vec![format!(
            "{}: {} degC, and {} stands {} degC in air [{}]",
            bend.state,
            plain(here, 4),
            bend.fibre,
            plain(limit, 4),
            bend.code
        )];
    }
    let (Some(limit), Some(reserve)) = (bend.limit, bend.deciding_reserve) else {
        return vec![format!(
            "{}: nothing bends or pulls it [{}]",
            bend.state, bend.code
        )];
    };
    let radius = bend.radius_mm.map_or_else(
        || "straight".to_owned(),
        |radius| format!("bent to {} mm", significant(radius, 3)),
    );
    // Past yield a stress by the elastic formula means nothing to a reader: tell the strain.
    let bending = match bend.limits.iter().find_map(|row| row.applied_strain) {
        Some(strain) => format!(
            "{} % of strain at the surface",
            significant(100.0 * strain, 3)
        ),
        None => format!("{} MPa of bending", significant(bend.bending_stress_mpa, 3)),
    };
    said.push(format!(
        "{}: {limit} reserve {} [{}]; {} ({}) {radius}, {bending}, {} MPa of pull ({} cN)",
        bend.state,
        significant(reserve, 3),
        bend.code,
        bend.governs,
        bend.governs_because,
        significant(bend.axial_stress_mpa, 3),
        significant(100.0 * bend.tension_n, 3)
    ));
    if let Some(radius) = bend.limit_radius_mm {
        said.push(format!(
            "at this pull the limit is met at a filament radius of {} mm",
            significant(radius, 3)
        ));
    }
    if let Some(free) = bend.free_curvature_per_mm {
        let eased = free < bend.lying_curvature_per_mm;
        let at = |per_mm: f64| significant(1.0 / per_mm, 3);
        if bend.lying_curvature_per_mm > 0.0 && free > 0.0 {
            said.push(if bend.on_path {
                format!(
                    "laid along the yarn's path it would be bent to {} mm, by its own stiffness to {} mm: {} governs",
                    at(bend.lying_curvature_per_mm),
                    at(free),
                    if eased { "stiffness" } else { "the path" }
                )
            } else {
                format!(
                    "lying on it would bend it to {} mm, its own stiffness to {} mm: {} governs",
                    at(bend.lying_curvature_per_mm),
                    at(free),
                    if eased { "stiffness" } else { "the surface" }
                )
            });
        }
    }
    if let (Some(kinks), Some(breaks)) = (bend.kink_radius_mm, bend.break_radius_mm) {
        said.push(format!(
            "at this pull a filament kinks at a radius of {} mm and breaks at {} mm",
            significant(kinks, 3),
            significant(breaks, 3)
        ));
    }
    if let Some(loss) = bend.strength_loss {
        said.push(format!(
            "kinked, not broken: about {} % of tensile strength lost",
            plain(100.0 * loss, 2)
        ));
    }
    if let Some(expected) = bend.broken_per_m {
        said.push(match bend.limits.iter().find_map(|row| row.allowed_per_m) {
            Some(allowed) => format!(
                "{} broken filaments expected per metre, {} allowed",
                count(expected),
                significant(allowed, 3)
            ),
            None => format!("{} broken filaments expected per metre", count(expected)),
        });
    }
    for other in bend.limits.iter().skip(1) {
        said.push(format!(
            "{} reserve {} [{}]",
            other.limit,
            significant(other.reserve, 3),
            other.code
        ));
    }
    said
}

/// Columns of the table of bends: head and value; shared by text and Markdown.
pub(super) const BEND_COLUMNS: [&str; 10] = [
    "state",
    "reserve",
    "limit",
    "place",
    "stage",
    "of",
    "radius mm",
    "pull cN",
    "bend MPa",
    "broken /m",
];

/// The governing limit; where the fibre kinks or yields, also how far it is from breaking.
fn limit_cell(bend: &BendRow) -> String {
    let governs = bend.limit.unwrap_or("-");
    let breaks = |row: &&LimitRow| ["fracture", "strain"].contains(&row.limit);
    match bend.limits.iter().skip(1).find(breaks) {
        Some(row) if ["kinks", "yields"].contains(&bend.state) => {
            format!("{governs}; {} {}", row.limit, significant(row.reserve, 3))
        }
        _ => governs.to_owned(),
    }
}

/// One bend as the cells of its row. Heat bends nothing: its row tells the temperatures.
pub(super) fn bend_cells(bend: &BendRow) -> [String; 10] {
    let heat = bend.temperature_c.zip(bend.max_temperature_c);
    let number = |value: Option<f64>| {
        let shown = value.filter(|_| heat.is_none());
        shown.map_or_else(|| "-".to_owned(), |v| significant(v, 3))
    };
    let limit = match heat {
        Some((here, limit)) => format!("{} over {} degC", plain(here, 4), plain(limit, 4)),
        None => limit_cell(bend),
    };
    [
        bend.state.to_owned(),
        number(bend.deciding_reserve),
        limit,
        bend.place.clone(),
        bend.stage.to_owned(),
        bend.system.to_owned(),
        number(bend.radius_mm),
        number(Some(100.0 * bend.tension_n)),
        number(Some(bend.bending_stress_mpa)),
        bend.broken_per_m.map_or_else(|| "-".to_owned(), count),
    ]
}
