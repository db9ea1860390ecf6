//! Losses of strength that are known from elsewhere and not computed: what heat and weaving take from glass.
//!
//! Figures and sources stand in the fibre room's general factors.

use crate::bend::{Stage, SystemName};
use crate::fibre::{Hazard, general};
use crate::quantity::significant;
use crate::spec::{Passage, Spec};

/// What is known and left out, in sentences.
pub(super) fn known_losses(spec: &Spec) -> Vec<String> {
    let glass: Vec<&Passage> = spec
        .passages
        .iter()
        .filter(|passage| {
            let system = match passage.system {
                SystemName::Warp => &spec.weave.warp,
                SystemName::Weft => &spec.weave.weft,
            };
            system.yarn.fibre.hazard == Hazard::Glass
        })
        .collect();
    [heated(&glass), woven(&glass)]
        .into_iter()
        .flatten()
        .collect()
}

fn heated(glass: &[&Passage]) -> Option<String> {
    let hottest = glass
        .iter()
        .filter_map(|passage| passage.temperature_c)
        .max_by(f64::total_cmp)?;
    let loss = &general().ok()?.glass_heat_loss;
    let (safe, lost) = loss.points.split_first()?;
    let lost: Vec<String> = lost
        .iter()
        .map(|point| format!("{} % at {} degC", 100.0 * point.loss, point.at_c))
        .collect();
    (hottest > safe.at_c).then(|| {
        format!(
            "glass heated to {} degC: sized E-glass keeps its strength to {} degC and has lost {} (sources {}); the reserves are those of glass not heated",
            significant(hottest, 3),
            safe.at_c,
            lost.join(", "),
            loss.source.join(", ")
        )
    })
}

fn woven(glass: &[&Passage]) -> Option<String> {
    let loss = &general().ok()?.weaving_strength_loss_glass_3d;
    glass.iter().any(|passage| passage.stage == Stage::Weaving).then(|| {
        format!(
            "abrasion is not computed: glass yarn lost {} to {} % of its strength on the way into a 3D orthogonal cloth on a jacquard loom (source {})",
            100.0 * loss.min,
            100.0 * loss.max,
            loss.source.join(", ")
        )
    })
}
