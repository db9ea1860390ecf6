//! Text for a terminal: the verdict first, the worst bend, then every bend, the cloth, what it hangs on.

use super::check::{Advice, BendRow, CheckReport, ClothReport, LimitRow, SystemReport};
use super::table::{folded, table};
use crate::quantity::{plain, significant};
use anstyle::{AnsiColor, Style};
use std::fmt::Write as _;

/// The report with colour codes: print it through a stream that knows its terminal.
pub fn text(report: &CheckReport) -> String {
    let mut out = String::new();
    // Writing to a String cannot fail.
    let _ = write_report(&mut out, report);
    out
}

fn write_report(out: &mut String, report: &CheckReport) -> std::fmt::Result {
    let style = verdict_style(report.verdict);
    let reference = report
        .spec
        .reference
        .as_ref()
        .map_or_else(String::new, |number| format!(" ({number})"));
    writeln!(
        out,
        "{style}{}{style:#}  {}{reference}",
        report.verdict.to_uppercase(),
        report.spec.name
    )?;
    writeln!(out, "{}; {}", pattern_line(report), report.spec.file)?;
    if let Some(worst) = report.worst_bend() {
        writeln!(out)?;
        write_bend(out, report, worst, "Worst bend")?;
    }
    for (index, bend) in report.bends.iter().enumerate() {
        if bend.fails && index != report.worst {
            let reserve = bend
                .reserve
                .map_or_else(String::new, |r| format!(" reserve {}", significant(r, 3)));
            let line = format!(
                "Also fails: {} ({}): {}, {}{reserve} [{}]",
                bend.place,
                bend.stage,
                bend.state,
                bend.limit.unwrap_or("no limit"),
                bend.code
            );
            writeln!(out, "{}", folded(&line, "", "  "))?;
            writeln!(out, "  {}:{}: {}", report.spec.file, bend.line, bend.quoted)?;
        }
    }
    let hangs = report.hangs_on_width.then(|| HANGS_ON_WIDTH.to_owned());
    let mut warned = report.warnings.iter().chain(&hangs).peekable();
    if warned.peek().is_some() {
        heading(out, "Mind")?;
    }
    for warning in warned {
        writeln!(out, "{}", folded(warning, "- ", "  "))?;
    }
    if !report.advice.is_empty() {
        heading(out, "What would hold, one at a time")?;
    }
    for place in places(&report.advice) {
        writeln!(out, "{place}")?;
        let here = || report.advice.iter().filter(|advice| advice.place == place);
        for advice in here().filter(|advice| !advice.text.ends_with(OUT_OF_REACH)) {
            writeln!(out, "{}", folded(&advice.text, "- ", "  "))?;
        }
        let no_use: Vec<&str> = here()
            .filter_map(|advice| advice.text.strip_suffix(OUT_OF_REACH))
            .collect();
        if !no_use.is_empty() {
            let line = format!("nothing in reach of: {}", no_use.join(", "));
            writeln!(out, "{}", folded(&line, "- ", "  "))?;
        }
    }
    heading(out, "Bends, in the order of the way")?;
    writeln!(out, "{}", bend_table(&report.bends))?;
    heading(
        out,
        if report.cloth_on_loom.is_some() {
            "Cloth at rest"
        } else {
            "Cloth"
        },
    )?;
    writeln!(
        out,
        "{}",
        system_table(&report.cloth.warp, &report.cloth.weft)
    )?;
    for (name, value) in cloth_lines(&report.cloth) {
        writeln!(out, "  {name:<28} {value}")?;
    }
    if let Some(loom) = &report.cloth_on_loom {
        heading(out, "The same cloth on the loom")?;
        let rows = loom_rows(&loom.warp, &loom.weft)
            .into_iter()
            .map(|row| row.to_vec());
        writeln!(out, "{}", table(["", "warp", "weft"], rows, &[1, 2]))?;
        for (name, value) in loom_lines(loom) {
            writeln!(out, "  {name:<28} {value}")?;
        }
    }
    if !report.rigidity.is_empty() {
        heading(out, "If the yarns were as stiff as")?;
        for row in &report.rigidity {
            let reserve = row
                .reserve
                .map_or_else(String::new, |r| format!(", reserve {}", significant(r, 3)));
            writeln!(out, "  {}: {}{reserve}", stiff_as(row.rigidity), row.state)?;
        }
    }
    if !report.sensitivity.is_empty() {
        heading(out, "If the assumed outlines were")?;
        for row in &report.sensitivity {
            let how = if row.flatness_factor < 1.0 {
                "rounder"
            } else {
                "flatter"
            };
            let reserve = row
                .reserve
                .map_or_else(String::new, |r| format!(", reserve {}", significant(r, 3)));
            writeln!(
                out,
                "  {how} (flatness x {}): {}{reserve}",
                plain(row.flatness_factor, 2),
                row.state
            )?;
        }
    }
    heading(out, "Assumptions")?;
    list(out, &report.assumptions)?;
    heading(out, "Cautions")?;
    list(out, &report.cautions)
}

/// A bound of the rigidity in words.
pub(super) fn stiff_as(bound: &str) -> &'static str {
    match bound {
        "free" => "filaments that slide freely",
        _ => "fully bonded yarn",
    }
}

/// Where the state changes with the assumed outlines.
pub(super) const HANGS_ON_WIDTH: &str =
    "the verdict hangs on the yarn's width: measure it in the cloth and give `width`";

/// How a lever that does not reach ends its sentence.
const OUT_OF_REACH: &str = ": nothing in reach of this lever";

/// The places with advice, each once.
fn places(advice: &[Advice]) -> Vec<&str> {
    let mut places: Vec<&str> = Vec::new();
    for one in advice {
        if !places.contains(&one.place.as_str()) {
            places.push(&one.place);
        }
    }
    places
}

fn verdict_style(verdict: &str) -> Style {
    let colour = match verdict {
        "breaks" | "overheats" => AnsiColor::Red,
        "holds" => AnsiColor::Green,
        _ => AnsiColor::Yellow,
    };
    colour.on_default().bold()
}

fn heading(out: &mut String, text: &str) -> std::fmt::Result {
    let style = Style::new().bold();
    writeln!(out, "\n{style}{text}{style:#}")
}

fn list(out: &mut String, items: &[String]) -> std::fmt::Result {
    for item in items {
        writeln!(out, "{}", folded(item, "- ", "  "))?;
    }
    Ok(())
}

fn write_bend(
    out: &mut String,
    report: &CheckReport,
    bend: &BendRow,
    what: &str,
) -> std::fmt::Result {
    writeln!(
        out,
        "{what}: {} ({}, {} yarn `{}`)",
        bend.place, bend.stage, bend.system, bend.yarn
    )?;
    for sentence in bend_sentences(bend) {
        writeln!(out, "{}", folded(&sentence, "  ", "  "))?;
    }
    writeln!(out, "  {}:{}: {}", report.spec.file, bend.line, bend.quoted)
}

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
    let (Some(limit), Some(reserve)) = (bend.limit, bend.reserve) else {
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
        "{}: {limit} reserve {} [{}]; {} {radius}, {bending}, {} MPa of pull ({} cN)",
        bend.state,
        significant(reserve, 3),
        bend.code,
        bend.governs,
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
    if let Some(loss) = bend.strength_loss {
        said.push(format!(
            "kinked, not broken: about {} % of tensile strength lost",
            plain(100.0 * loss, 2)
        ));
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
pub(super) const BEND_COLUMNS: [&str; 9] = [
    "state",
    "reserve",
    "limit",
    "place",
    "stage",
    "of",
    "radius mm",
    "pull cN",
    "bend MPa",
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
pub(super) fn bend_cells(bend: &BendRow) -> [String; 9] {
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
        number(bend.reserve),
        limit,
        bend.place.clone(),
        bend.stage.to_owned(),
        bend.system.to_owned(),
        number(bend.radius_mm),
        number(Some(100.0 * bend.tension_n)),
        number(Some(bend.bending_stress_mpa)),
    ]
}

fn bend_table(bends: &[BendRow]) -> String {
    table(
        BEND_COLUMNS,
        bends.iter().map(|bend| bend_cells(bend).to_vec()),
        &[1, 6, 7, 8],
    )
}

/// Rows of the table of both systems: name, warp, weft; shared by text and Markdown.
pub(super) fn system_rows(warp: &SystemReport, weft: &SystemReport) -> Vec<[String; 3]> {
    let row =
        |name: &str, of: &dyn Fn(&SystemReport) -> String| [name.to_owned(), of(warp), of(weft)];
    // Of stiff yarns only: rows without a value are left out.
    let centinewtons = |name: &str, of: fn(&SystemReport) -> Option<f64>| {
        row(name, &|s| {
            of(s).map_or_else(String::new, |n| significant(100.0 * n, 3))
        })
    };
    let mut rows = vec![
        row("yarn", &|s| s.yarn.clone()),
        row("tex", &|s| significant(s.linear_density_tex, 4)),
        row("filaments x um", &|s| {
            format!(
                "{} x {}",
                s.filaments,
                significant(s.filament_diameter_um, 3)
            )
        }),
        row("threads per cm", &|s| significant(10.0 / s.spacing_mm, 4)),
        row("outline", &|s| s.yarn_shape.to_owned()),
        row("width x thickness mm", &|s| {
            format!(
                "{} x {}",
                significant(s.yarn_width_mm, 3),
                significant(s.yarn_thickness_mm, 3)
            )
        }),
        row("packing", &|s| significant(s.packing, 2)),
        row("rigidity N mm2", &|s| {
            significant(s.bending_rigidity_n_mm2, 2)
        }),
        centinewtons("mean pull cN", |s| s.tension_n),
        row("crimp %", &|s| significant(100.0 * s.crimp, 3)),
        row("wave height mm", &|s| significant(s.wave_height_mm, 3)),
        row("slope deg", &|s| significant(s.wrap_angle_deg, 3)),
        row("smallest radius mm", &|s| {
            s.min_radius_mm
                .map_or_else(|| "straight".to_owned(), |r| significant(r, 3))
        }),
        row("contact mm", &|s| significant(s.contact_mm, 3)),
        centinewtons("largest contact force cN", |s| s.contact_force_n),
        row("longest float face, back", &|s| {
            format!("{}, {}", s.float_face, s.float_back)
        }),
    ];
    rows.retain(|[_, warp, weft]| !(warp.is_empty() && weft.is_empty()));
    rows
}

/// Rows that differ on the loom: name, warp, weft; shared by text and Markdown.
pub(super) fn loom_rows(warp: &SystemReport, weft: &SystemReport) -> Vec<[String; 3]> {
    const DIFFER: [&str; 8] = [
        "mean pull cN",
        "threads per cm",
        "crimp %",
        "wave height mm",
        "slope deg",
        "smallest radius mm",
        "contact mm",
        "largest contact force cN",
    ];
    system_rows(warp, weft)
        .into_iter()
        .filter(|[name, ..]| DIFFER.contains(&name.as_str()))
        .collect()
}

/// The cloth's own numbers that differ on the loom.
pub(super) fn loom_lines(cloth: &ClothReport) -> Vec<(&'static str, String)> {
    cloth_lines(cloth)
        .into_iter()
        .filter(|(name, _)| matches!(*name, "areal mass" | "thickness"))
        .collect()
}

fn system_table(warp: &SystemReport, weft: &SystemReport) -> String {
    let rows = system_rows(warp, weft).into_iter().map(|row| row.to_vec());
    table(["", "warp", "weft"], rows, &[1, 2])
}

/// The line that names the weave.
pub(super) fn pattern_line(report: &CheckReport) -> String {
    let cloth = &report.cloth;
    let code = cloth
        .iso_9354
        .as_ref()
        .map_or_else(String::new, |code| format!(", ISO 9354 {code}"));
    format!(
        "{}, repeat {} x {}{code}",
        cloth.pattern, cloth.ends, cloth.picks
    )
}

/// The cloth's own numbers: name and value; shared by text and Markdown.
pub(super) fn cloth_lines(cloth: &ClothReport) -> Vec<(&'static str, String)> {
    vec![
        (
            "areal mass",
            format!("{} g/m2", significant(cloth.areal_mass_g_m2, 4)),
        ),
        (
            "thickness",
            match cloth.free_height_mm {
                Some(free) => format!(
                    "{} mm under a gauge, {} mm where nothing presses it",
                    significant(cloth.thickness_mm, 3),
                    significant(free, 3)
                ),
                None => format!("{} mm", significant(cloth.thickness_mm, 3)),
            },
        ),
        (
            "cover",
            format!("{} %", significant(100.0 * cloth.cover, 3)),
        ),
        (
            "fibre volume",
            format!("{} %", significant(100.0 * cloth.fibre_volume_fraction, 3)),
        ),
        (
            "height shared by",
            format!(
                "{}{}",
                cloth.height_shared_by,
                if cloth.jam_limited {
                    ", jam limited"
                } else {
                    ""
                }
            ),
        ),
    ]
}
