//! The named weaves for people and programs.

use super::table::folded;
use crate::pattern::{FloatLength, Marks, Side, SystemInterlacing, Weave, draw};
use serde_json::{Value, json};
use std::fmt::Write as _;

fn float(system: &SystemInterlacing, side: Side) -> usize {
    system
        .longest_float(side)
        .and_then(FloatLength::crossings)
        .unwrap_or(0)
}

/// The listing, in the order given.
pub fn weaves_text(weaves: &[Weave]) -> String {
    let width = weaves
        .iter()
        .map(|weave| weave.name.len())
        .max()
        .unwrap_or(0);
    let mut out = String::new();
    for weave in weaves {
        let size = format!("{} x {}", weave.pattern.ends(), weave.pattern.picks());
        // Writing to a String cannot fail.
        let _ = writeln!(out, "{:<width$}  {size:>7}  {}", weave.name, weave.title);
    }
    out.push_str(
        "\n`lissom weaves NAME` draws one. Words do as well: \"twill 2/2 z\", \"satin 8 step 3\", \"hopsack 2/2\".\n",
    );
    out
}

/// One weave on point paper, with what follows from it.
pub fn weave_text(weave: &Weave, marks: Marks) -> String {
    let woven = weave.pattern.interlacing();
    let floats = |system: &SystemInterlacing| {
        format!(
            "{} on the face, {} on the back",
            float(system, Side::Face),
            float(system, Side::Back)
        )
    };
    let together = match weave.pattern.falls_apart() {
        None => "one cloth".to_owned(),
        Some(layers) => format!("falls apart, {layers}"),
    };
    format!(
        "{}: {}\n{}\n\n{}\nrepeat           {} ends x {} picks\n\
         longest float    warp {}\n                 weft {}\n\
         interlacings     {} in the repeat\nhangs together   {together}\nISO 9354         {}\n",
        weave.name,
        weave.title,
        folded(&weave.sentence, "", ""),
        draw(&weave.pattern, marks),
        weave.pattern.ends(),
        weave.pattern.picks(),
        floats(&woven.warp),
        floats(&woven.weft),
        woven.total_changes(),
        weave.pattern.iso_9354().as_deref().unwrap_or("none"),
    )
}

/// The listing as JSON.
pub fn weaves_json(weaves: &[Weave]) -> Value {
    let list = weaves.iter().map(|weave| {
        let woven = weave.pattern.interlacing();
        json!({
            "name": weave.name,
            "title": weave.title,
            "sentence": weave.sentence,
            "iso_9354": weave.pattern.iso_9354().unwrap_or_default(),
            "ends": weave.pattern.ends(),
            "picks": weave.pattern.picks(),
            "rows": weave.pattern.rows(),
            "warp_float_face": float(&woven.warp, Side::Face),
            "warp_float_back": float(&woven.warp, Side::Back),
            "weft_float_face": float(&woven.weft, Side::Face),
            "weft_float_back": float(&woven.weft, Side::Back),
            "interlacings": woven.total_changes(),
        })
    });
    Value::Array(list.collect())
}
