//! Markdown made for attaching and for comparing by line: stable order, fixed digits, one fact a line.

use super::bend_words::{BEND_COLUMNS, bend_cells, bend_sentences};
use super::broken::{BROKEN_COLUMNS, broken_rows, broken_sentences};
use super::check::CheckReport;
use super::text::{
    HANGS_ON_WIDTH, cloth_lines, loom_lines, loom_rows, pattern_line, stiff_as, system_rows,
};
use crate::quantity::{plain, significant};
use std::fmt::Write as _;

/// The report as Markdown.
pub fn markdown(report: &CheckReport) -> String {
    let mut out = String::new();
    // Writing to a String cannot fail.
    let _ = write_report(&mut out, report);
    out
}

/// A user's text so that it cannot become markup.
pub(super) fn escaped(text: &str) -> String {
    let mut safe = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '\\' | '`' | '*' | '_' | '[' | ']' | '<' | '>' | '|' | '#' | '&' => {
                safe.push('\\');
                safe.push(c);
            }
            c if c.is_control() => safe.push(' '),
            c => safe.push(c),
        }
    }
    safe
}

fn row(out: &mut String, cells: &[String]) -> std::fmt::Result {
    let cells: Vec<String> = cells.iter().map(|cell| escaped(cell)).collect();
    writeln!(out, "| {} |", cells.join(" | "))
}

fn head(out: &mut String, cells: &[&str]) -> std::fmt::Result {
    writeln!(out, "| {} |", cells.join(" | "))?;
    writeln!(out, "|{}", " --- |".repeat(cells.len()))
}

fn write_report(out: &mut String, report: &CheckReport) -> std::fmt::Result {
    writeln!(
        out,
        "# {}: {}\n",
        escaped(&report.spec.name),
        report.verdict
    )?;
    if let Some(reference) = &report.spec.reference {
        writeln!(out, "- reference: {}", escaped(reference))?;
    }
    writeln!(out, "- weave: {}", escaped(&pattern_line(report)))?;
    let file = std::path::Path::new(&report.spec.file).file_name();
    let file = file.map_or_else(
        || report.spec.file.clone(),
        |name| name.to_string_lossy().into_owned(),
    );
    writeln!(
        out,
        "- spec: {}, SHA-256 {}",
        escaped(&file),
        report.spec.sha256
    )?;
    writeln!(out, "- checked by: lissom {}", report.lissom)?;
    let failing = report.bends.iter().filter(|bend| bend.fails);
    let worst = report.worst_bend().filter(|bend| !bend.fails);
    for bend in worst.into_iter().chain(failing) {
        let what = if bend.fails { "Fails" } else { "Worst bend" };
        writeln!(
            out,
            "\n## {what}: {} ({})\n",
            escaped(&bend.place),
            bend.stage
        )?;
        for sentence in bend_sentences(bend) {
            writeln!(out, "- {}", escaped(&sentence))?;
        }
        // A fence longer than any run of backticks a line of a spec may hold.
        writeln!(
            out,
            "- line {} of the spec:\n\n`````toml\n{}\n`````",
            bend.line, bend.quoted
        )?;
    }
    let hangs = report.hangs_on_width.then(|| HANGS_ON_WIDTH.to_owned());
    let mut warned = report.warnings.iter().chain(&hangs).peekable();
    if warned.peek().is_some() {
        writeln!(out, "\n## Mind\n")?;
    }
    for warning in warned {
        writeln!(out, "- {}", escaped(warning))?;
    }
    if !report.advice.is_empty() {
        writeln!(out, "\n## What would hold, one at a time\n")?;
    }
    for advice in &report.advice {
        let set: Vec<String> = advice
            .set
            .iter()
            .map(|set| format!("{} = {}", set.key, set.value))
            .collect();
        let set = if set.is_empty() {
            String::new()
        } else {
            format!("; {}", set.join(", "))
        };
        writeln!(
            out,
            "- {}: {}{}",
            escaped(&advice.place),
            escaped(&advice.text),
            escaped(&set)
        )?;
    }
    writeln!(out, "\n## Bends, in the order of the way\n")?;
    head(out, &BEND_COLUMNS)?;
    for bend in &report.bends {
        row(out, &bend_cells(bend))?;
    }
    if !report.broken_filaments.is_empty() {
        writeln!(out, "\n## Broken filaments to expect\n")?;
        for sentence in broken_sentences(&report.broken_filaments) {
            writeln!(out, "- {}", escaped(&sentence))?;
        }
        writeln!(out)?;
        head(out, &BROKEN_COLUMNS)?;
        for cells in broken_rows(&report.broken_filaments) {
            row(out, &cells)?;
        }
    }
    let at_rest = if report.cloth_on_loom.is_some() {
        " at rest"
    } else {
        ""
    };
    writeln!(out, "\n## Cloth{at_rest}\n")?;
    head(out, &["", "warp", "weft"])?;
    for cells in system_rows(&report.cloth.warp, &report.cloth.weft) {
        row(out, &cells)?;
    }
    writeln!(out)?;
    for (name, value) in cloth_lines(&report.cloth) {
        writeln!(out, "- {name}: {value}")?;
    }
    if let Some(loom) = &report.cloth_on_loom {
        writeln!(out, "\n## The same cloth on the loom\n")?;
        head(out, &["", "warp", "weft"])?;
        for cells in loom_rows(&loom.warp, &loom.weft) {
            row(out, &cells)?;
        }
        writeln!(out)?;
        for (name, value) in loom_lines(loom) {
            writeln!(out, "- {name}: {value}")?;
        }
    }
    if !report.rigidity.is_empty() {
        writeln!(out, "\n## If the yarns were as stiff as\n")?;
        head(out, &["", "state", "reserve"])?;
        for variation in &report.rigidity {
            row(
                out,
                &[
                    stiff_as(variation.rigidity).to_owned(),
                    variation.state.to_owned(),
                    reserve_cell(variation.reserve),
                ],
            )?;
        }
    }
    if !report.sensitivity.is_empty() {
        writeln!(
            out,
            "\n## If the assumed outlines were flatter or rounder\n"
        )?;
        head(out, &["flatness x", "state", "reserve"])?;
        for variation in &report.sensitivity {
            row(
                out,
                &[
                    plain(variation.flatness_factor, 2),
                    variation.state.to_owned(),
                    reserve_cell(variation.reserve),
                ],
            )?;
        }
    }
    writeln!(out, "\n## Assumptions\n")?;
    for item in &report.assumptions {
        writeln!(out, "- {}", escaped(item))?;
    }
    writeln!(out, "\n## Cautions\n")?;
    for item in &report.cautions {
        writeln!(out, "- {}", escaped(item))?;
    }
    Ok(())
}

/// A reserve, or a dash where there is none.
fn reserve_cell(reserve: Option<f64>) -> String {
    reserve.map_or_else(|| "-".to_owned(), |r| significant(r, 3))
}

#[cfg(test)]
mod tests {
    use super::escaped;

    #[test]
    fn a_name_cannot_become_markup() {
        assert_eq!(
            escaped("a|b <i>`x`</i>\n# c"),
            "a\\|b \\<i\\>\\`x\\`\\</i\\> \\# c"
        );
    }
}
