//! What a reader must not miss: where the result is not what the spec asked for, or is known to mislead.

use super::Outcome;
use super::losses::known_losses;
use crate::bend::{Stage, SystemName};
use crate::judge::{Limit, State};
use crate::passage::chain;
use crate::quantity::significant;
use crate::spec::{Passage, SettAt, Spec};

/// Everything to be said beside the verdict, in a stable order.
pub fn warnings(spec: &Spec, outcome: &Outcome) -> Vec<String> {
    let mut said = Vec::new();
    said.extend(crimps(spec, outcome));
    said.extend(floats(outcome));
    said.extend(past_yield(outcome));
    said.extend(chains(spec));
    said.extend(designations(spec));
    said.extend(known_losses(spec));
    if let Some(packing) = outcome.cloth.raised_packing {
        said.push(format!(
            "packing had to be raised to {} before these yarns could interlace: measure their width and thickness",
            significant(packing, 3)
        ));
    }
    let broken_wire = outcome
        .findings
        .iter()
        .any(|finding| finding.state == State::Breaks && finding.limit == Some(Limit::Strain));
    if broken_wire {
        said.push(
            "breaks by elongation: soft wire often bends further than its elongation at break, which leaves out necking (`lissom explain strain-at-break`)"
                .to_owned(),
        );
    }
    said
}

/// Measured crimps that the cloth does not have.
fn crimps(spec: &Spec, outcome: &Outcome) -> Vec<String> {
    let weave = &spec.weave;
    // Crimp is measured in the state in which the sett was counted.
    let cloth = match (weave.sett_at, &outcome.on_loom) {
        (SettAt::Loom, Some(on_loom)) => on_loom,
        _ => &outcome.cloth,
    };
    [("warp", &weave.warp, &cloth.warp), ("weft", &weave.weft, &cloth.weft)]
        .into_iter()
        .filter_map(|(word, system, woven)| {
            let given = system.crimp?;
            let off = (woven.crimp - given).abs() > 0.02 * given.max(woven.crimp).max(1e-5);
            let percent = |crimp: f64| significant(100.0 * crimp, 3);
            off.then(|| {
                format!(
                    "measured {word} crimp {} %, the cloth computed has {} %: crimp, sett or yarn thickness does not fit",
                    percent(given),
                    percent(woven.crimp)
                )
            })
        })
        .collect()
}

/// Stiff floats that stand far off the cloth.
fn floats(outcome: &Outcome) -> Option<String> {
    let cloth = &outcome.cloth;
    let (warp, weft) = (cloth.warp.solved()?, cloth.weft.solved()?);
    let stiff = cloth.warp.crimp + cloth.weft.crimp;
    let taut = warp.taut_crimp + weft.taut_crimp;
    (stiff > 1.5 * taut).then(|| {
        format!(
            "at rest both crimps together are {} times those of taut yarns: with so little pull left stiff floats stand off the cloth; `rest` decides how far",
            significant(stiff / taut, 2)
        )
    })
}

/// Wires whose elastic path bends them past yield.
fn past_yield(outcome: &Outcome) -> Option<String> {
    outcome.cloth.warp.solved()?;
    outcome
        .findings
        .iter()
        .any(|finding| {
            matches!(finding.stage, Stage::Loom | Stage::Rest)
                && matches!(finding.limit, Some(Limit::Yield | Limit::Strain))
                && finding.state >= State::Yields
        })
        .then(|| {
            "the path of a wire past yield is found as if it stayed elastic, or lay on the wire it crosses where it bends more: its strain is overstated"
                .to_owned()
        })
}

/// Yarns whose designation tells another filament than their diameter or count.
fn designations(spec: &Spec) -> Vec<String> {
    let (warp, weft) = (&spec.weave.warp.yarn, &spec.weave.weft.yarn);
    let yarns = [Some(warp), Some(weft).filter(|weft| weft.name != warp.name)];
    yarns
        .into_iter()
        .flatten()
        .filter_map(|yarn| {
            let told = yarn.designated_diameter_mm?;
            let here = yarn.count.filament_diameter_mm;
            // A letter stands for a range of diameters some 15 % wide (from memory).
            let off = (here - told).abs() > 0.15 * told;
            let um = |mm: f64| significant(1e3 * mm, 3);
            off.then(|| {
                format!(
                    "yarn `{}`: its designation tells filaments of {} um, the spec makes them {} um; the latter is taken",
                    yarn.name,
                    um(told),
                    um(here)
                )
            })
        })
        .collect()
}

/// Routes whose pull does not arrive at the fell's.
fn chains(spec: &Spec) -> Vec<String> {
    [("warp", SystemName::Warp, &spec.weave.warp), ("weft", SystemName::Weft, &spec.weave.weft)]
        .into_iter()
        .filter_map(|(word, name, system)| {
            let here = |passage: &&Passage| passage.system == name && passage.stage == Stage::Weaving;
            let route: Vec<&Passage> = spec.passages.iter().filter(here).collect();
            let ends = chain(&route, system.tension_n).last().copied()?;
            let off = (ends - system.tension_n).abs() > 0.05 * system.tension_n;
            let cn = |newton: f64| significant(100.0 * newton, 3);
            off.then(|| {
                format!(
                    "the {word}'s stations end at a mean of {} cN, the fell has {} cN: tensions or frictions do not fit",
                    cn(ends),
                    cn(system.tension_n)
                )
            })
        })
        .collect()
}
