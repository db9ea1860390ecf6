//! Text for a terminal: the verdict first, the worst bend, then every bend, the cloth, what it hangs on.

use super::bend::BendRow;
use super::bend_words::{BEND_COLUMNS, bend_cells, bend_sentences};
use super::broken::{BROKEN_COLUMNS, broken_rows, broken_sentences};
use super::check::{Advice, CheckReport, ClothReport, SystemReport};
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
                .deciding_reserve
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
    if !report.broken_filaments.is_empty() {
        heading(out, "Broken filaments to expect")?;
        for sentence in broken_sentences(&report.broken_filaments) {
            writeln!(out, "{}", folded(&sentence, "- ", "  "))?;
        }
        let rows = broken_rows(&report.broken_filaments);
        let rows = rows.into_iter().map(|row| row.to_vec());
        writeln!(out, "{}", table(BROKEN_COLUMNS, rows, &[3, 4, 5]))?;
    }
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
        "breaks" | "overheats" | "sheds" => AnsiColor::Red,
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

fn bend_table(bends: &[BendRow]) -> String {
    table(
        BEND_COLUMNS,
        bends.iter().map(|bend| bend_cells(bend).to_vec()),
        &[1, 6, 7, 8, 9],
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
