//! How far a spec may go, in text, Markdown and JSON.

use super::check::{Setting, SpecReport};
use super::markdown::escaped;
use super::table::table;
use serde::Serialize;

/// One limit.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LimitsRow {
    /// The place it is for.
    pub place: String,
    /// What is bounded.
    pub what: String,
    /// Its value today.
    pub today: String,
    /// The limit in words: its value, `holds throughout` or `nothing in reach holds`.
    pub limit: String,
    /// Keys and values at the limit.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub set: Vec<Setting>,
}

/// The limits of a spec.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LimitsReport {
    /// Version of the program.
    pub lissom: &'static str,
    /// Which spec.
    pub spec: SpecReport,
    /// The reserve that must be reached.
    pub reserve: f64,
    /// The limits.
    pub limits: Vec<LimitsRow>,
}

const HEAD: [&str; 4] = ["place", "what", "today", "limit"];

impl LimitsReport {
    fn cells(row: &LimitsRow) -> Vec<String> {
        vec![
            row.place.clone(),
            row.what.clone(),
            row.today.clone(),
            row.limit.clone(),
        ]
    }

    fn closing(&self) -> String {
        format!(
            "Each alone and for its own place alone, all else as in the spec: up to there every reserve that must be met is {} or more; one step beyond, it is not. Yielding, and kinking where the spec allows it, need none.",
            self.reserve
        )
    }

    /// For the terminal.
    pub fn text(&self) -> String {
        let rows = self.limits.iter().map(Self::cells);
        format!(
            "{}\n\n{}\n\n{}\n",
            self.spec.name,
            table(HEAD, rows, &[]),
            self.closing()
        )
    }

    /// For attaching and comparing by line.
    pub fn markdown(&self) -> String {
        let mut out = format!(
            "# {}: limits\n\n- spec: SHA-256 {}\n\n",
            escaped(&self.spec.name),
            self.spec.sha256
        );
        out.push_str(&format!(
            "| {} |\n|{}\n",
            HEAD.join(" | "),
            " --- |".repeat(HEAD.len())
        ));
        for row in &self.limits {
            let cells: Vec<String> = Self::cells(row).iter().map(|cell| escaped(cell)).collect();
            out.push_str(&format!("| {} |\n", cells.join(" | ")));
        }
        out.push_str(&format!("\n{}\n", self.closing()));
        out
    }
}
