//! How much the verdict hangs on the yarns' assumed outlines.
//!
//! A mill knows sett and tex, seldom a yarn's width. The flow runs again with the assumed flatness (width over
//! thickness, area kept) at 0.7 and 1.4 times its value; measured outlines and solid or round yarns stay.

use crate::flow::{Outcome, Variation, run};
use crate::spec::Spec;
use crate::weave::Cloth;
use crate::yarn::Basis;

/// The factors on the assumed flatness.
pub const FLATNESS_FACTORS: [f64; 2] = [0.7, 1.4];

/// The worst of the spec at each factor; empty where no outline is assumed.
pub fn sensitivity(spec: &Spec, cloth: &Cloth) -> Vec<Variation> {
    let assumed = [&cloth.warp, &cloth.weft]
        .iter()
        .any(|yarn| matches!(yarn.laid.basis, Basis::Assumed | Basis::OneSize));
    if !assumed {
        return Vec::new();
    }
    FLATNESS_FACTORS
        .iter()
        .flat_map(|factor| toward(spec, *factor))
        .collect()
}

/// The worst at one factor; where there is no cloth, also at the farthest factor towards it that has one.
fn toward(spec: &Spec, flatness_factor: f64) -> Vec<Variation> {
    let at = |flatness_factor: f64| {
        let worst = |outcome: Outcome| {
            (
                outcome.verdict(),
                outcome.worst().and_then(|finding| finding.reserve()),
            )
        };
        Variation {
            flatness_factor,
            worst: run(spec, flatness_factor).ok().map(worst),
        }
    };
    let asked = at(flatness_factor);
    if asked.worst.is_some() {
        return vec![asked];
    }
    let (mut exists, mut jams) = (1.0, flatness_factor);
    while f64::abs(exists - jams) > 0.005 {
        let middle = 0.5 * (exists + jams);
        if at(middle).worst.is_some() {
            exists = middle
        } else {
            jams = middle
        }
    }
    // Two digits, towards the spec as it stands.
    let told = if exists > 1.0 {
        (100.0 * exists).floor()
    } else {
        (100.0 * exists).ceil()
    } / 100.0;
    if told == 1.0 {
        vec![asked]
    } else {
        vec![asked, at(told)]
    }
}
