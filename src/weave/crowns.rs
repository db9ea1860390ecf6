//! The bends of a cloth's yarns: the crowns, on the loom and at rest.
//!
//! All crowns of a system are alike in the taut model, so one bend tells them all, from the middle of a crest
//! to the straight piece. It is met twice: on the loom at the peak of the pull, and at rest with what pull
//! friction and set keep. Brittle fibres are worse off with the pull, fibres weak in compression without.

use super::cloth::{Cloth, ClothYarn};
use crate::bend::{Bend, Easing, Meets, Stage, Stretch, SystemName};
use crate::spec::{System, Weave};

/// One crown bend for each system and state, warp first.
pub fn crowns(weave: &Weave, cloth: &Cloth) -> Vec<Bend> {
    let mut bends = Vec::with_capacity(4);
    for (name, system, yarn, crossed) in [
        (SystemName::Warp, &weave.warp, &cloth.warp, &cloth.weft),
        (SystemName::Weft, &weave.weft, &cloth.weft, &cloth.warp),
    ] {
        let loom = (Stage::Loom, weave.peak * system.tension_n);
        let rest = (Stage::Rest, weave.rest * system.tension_n);
        for (stage, pull_n) in [loom, rest] {
            bends.push(crown(name, system, yarn, crossed.spacing_mm, stage, pull_n));
        }
    }
    bends
}

fn crown(
    name: SystemName,
    system: &System,
    yarn: &ClothYarn,
    crossed_spacing_mm: f64,
    stage: Stage,
    pull_n: f64,
) -> Bend {
    let profile = yarn.passing.rests.iter().map(|rest| Stretch {
        length_mm: rest.length_mm,
        lies_on_mm: rest.outline_radius_mm,
    });
    // Each change has the half crown before it and the half crown behind it.
    let halves_per_mm =
        2.0 * yarn.wave.changes_per_crossing() / (crossed_spacing_mm * (1.0 + yarn.crimp));
    Bend {
        place: match name {
            SystemName::Warp => "warp crown over weft".into(),
            SystemName::Weft => "weft crown over warp".into(),
        },
        stage,
        system: name,
        profile: profile.collect(),
        easing: Easing::Crown {
            drop_mm: 0.5 * yarn.wave_height_mm,
            arm_mm: 0.5 * crossed_spacing_mm,
            flanks: yarn.wave.flanks(),
        },
        added_per_mm: 0.0,
        plane: 1,
        pull_n,
        temperature_c: None,
        meets: Meets::TimesPerMetre(1e3 * halves_per_mm),
        governed_by: system.span.clone(),
        heated_by: None,
    }
}
