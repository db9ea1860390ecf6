//! `shed` under `[weave]`: how far the warp is opened, and between where.

use super::field::Bound;
use super::keys::SHED;
use super::reader::Table;
use crate::quantity::Dimension;
use crate::span::Span;

/// An open shed.
#[derive(Debug, Clone, PartialEq)]
pub struct Shed {
    /// How far an end is lifted from the straight line between backrest and fell, mm.
    pub depth_mm: f64,
    /// From the heald to the fell, mm.
    pub front_mm: f64,
    /// From the heald back to the backrest, mm.
    pub back_mm: f64,
    /// Share of the lengthening that an easing backrest or the let-off takes up, 0 to 1.
    pub let_off: f64,
    /// The line that governs: its depth.
    pub depth_span: Span,
}

/// Reads `shed`, where it is given.
pub fn read_shed(weave: &Table<'_>) -> Option<Shed> {
    let table = weave.table("shed", "`shed`", SHED).value()?;
    let length = |key: &str, bound: Bound, takes: &str| {
        let found = table.measure(key, Dimension::Length, bound);
        table.required(found, key, takes)
    };
    let depth = length("depth", Bound::NotNegative, "\"40 mm\"");
    let front = length("front", Bound::Positive, "\"150 mm\"");
    let back = length("back", Bound::Positive, "\"500 mm\"");
    // A share, with its sign or as a number.
    let let_off = match table.peek_text("let_off") {
        Some(_) => table.measure("let_off", Dimension::Share, Bound::Within(0.0, 1.0)),
        None => table.number("let_off", Bound::Within(0.0, 1.0)),
    }
    .value();
    let (depth, front, back) = (depth?, front?, back?);
    Some(Shed {
        depth_mm: depth.value,
        front_mm: front.value,
        back_mm: back.value,
        let_off: let_off.unwrap_or(0.0),
        depth_span: depth.span,
    })
}
