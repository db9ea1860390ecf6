//! Broken filaments to expect of both yarns on their whole way, and of a square metre of cloth.

use super::Outcome;
use crate::bend::{Bend, Stage, SystemName};
use crate::judge::{Flaws, Step, history};
use crate::quantity::significant;
use crate::spec::{Spec, System};
use crate::weave::ClothYarn;
use std::borrow::Cow;

/// What one yarn's way breaks.
#[derive(Debug, Clone, PartialEq)]
pub struct Broken {
    /// Which yarn.
    pub system: SystemName,
    /// Every bend of its way in order: place, stage, what it adds.
    pub steps: Vec<(Cow<'static, str>, Stage, Step)>,
    /// Broken filaments per metre of yarn when the cloth is made, at least and at most.
    pub per_m: (f64, f64),
    /// The same per square metre of cloth.
    pub per_m2: (f64, f64),
    /// Whether the strength is that of strands or yarns: the count is indicative then.
    pub indicative: bool,
}

/// What the ways of warp and weft break; a yarn whose scatter of strength is not known is left out.
pub fn broken(spec: &Spec, outcome: &Outcome) -> Vec<Broken> {
    let cloth = &outcome.cloth;
    [
        (SystemName::Warp, &spec.weave.warp, &cloth.warp),
        (SystemName::Weft, &spec.weave.weft, &cloth.weft),
    ]
    .into_iter()
    .filter_map(|(name, system, woven)| of_yarn(name, system, woven, &outcome.bends))
    .collect()
}

/// Where single bends pass the number the spec allows and the whole way does not.
pub fn over_the_whole_way(spec: &Spec, broken: &[Broken]) -> Vec<String> {
    let allowed = spec.require.broken_per_m;
    broken
        .iter()
        .filter_map(|way| {
            let (allowed, (least, _)) = (allowed?, way.per_m);
            let alone = way.steps.iter().map(|(.., step)| step.alone_per_m);
            (least > allowed && alone.fold(0.0, f64::max) <= allowed).then(|| {
                format!(
                    "every bend of the {} breaks fewer filaments than the {} /m allowed, its whole way at least {} /m",
                    way.system.word(),
                    significant(allowed, 3),
                    significant(least, 3)
                )
            })
        })
        .collect()
}

fn of_yarn(name: SystemName, system: &System, woven: &ClothYarn, bends: &[Bend]) -> Option<Broken> {
    let yarn = &system.yarn;
    let flaws = Flaws::of(&yarn.fibre)?;
    let way: Vec<&Bend> = bends.iter().filter(|bend| bend.system == name).collect();
    let steps = history(&flaws, &way, yarn, &woven.laid);
    // What a tool breaks it breaks where the cloth lies on it, not in every metre.
    let made = |of: fn(&Step) -> f64| {
        way.iter()
            .zip(&steps)
            .filter(|(bend, _)| bend.stage != Stage::Draping)
            .map(|(_, step)| of(step))
            .sum::<f64>()
    };
    let (least, most) = (made(|s| s.new_least_per_m), made(|s| s.new_most_per_m));
    let m_per_m2 = 1e3 / woven.spacing_mm * (1.0 + woven.crimp);
    Some(Broken {
        system: name,
        per_m: (least, most),
        per_m2: (least * m_per_m2, most * m_per_m2),
        indicative: yarn.fibre.strength_basis.counts_are_indicative(),
        steps: way
            .iter()
            .zip(steps)
            .map(|(bend, step)| (bend.place.clone(), bend.stage, step))
            .collect(),
    })
}
