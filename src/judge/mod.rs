//! The one room that judges: a bend, a yarn and its fibre in, a finding out.
//!
//! It knows no geometry of cloth or machine: it sees radii, turns, pulls and temperatures in a
//! [`Bend`].
//!
//! | file | what is in it |
//! | --- | --- |
//! | `easing` | how far a filament stays away by its own stiffness, elastic and past yield |
//! | `filament` | how each filament through the yarn's thickness is bent and pulled at a bend |
//! | `limits` | the limits of brittle, fibrillar and ductile fibres under pull and bending |
//! | `flaws` | how many breaks to expect of flaws under a stress |
//! | `count` | broken filaments over a bend and all filaments |
//! | `history` | what the way adds up to, bend after bend |
//! | `kinked` | the kinked section: elastic in tension, yielding in compression |
//! | `code` | states, limits, and the stable codes of their methods |
//! | `finding` | the limits ranked, and the finding itself |
//! | `explain` | the method behind every code |

mod code;
mod count;
mod easing;
mod explain;
mod filament;
mod finding;
mod flaws;
mod history;
mod kinked;
mod limits;
#[cfg(test)]
mod tests;

pub use code::{Code, Limit, State};
pub use count::broken_per_m;
pub use explain::{Explanation, explain};
pub use filament::{Filament, Position, filaments};
pub use finding::{Finding, Judged};
pub use flaws::Flaws;
pub use history::{Step, history};
pub use kinked::{Section, break_bend, kinked_section};
pub use limits::{Check, KINK_STRAIN_LIMIT, checks};

use crate::bend::Bend;
use crate::yarn::{Laid, Yarn};
use std::sync::Arc;

/// What must be met.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Required<'a> {
    /// Smallest reserve that counts as holding.
    pub reserve: f64,
    /// What is done about broken filaments.
    pub count: Count<'a>,
}

/// What is done about broken filaments.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Count<'a> {
    /// They are not counted: nothing hangs on it and counting takes time, or the scatter of strength is not known.
    Leave,
    /// They are counted and told.
    Tell(&'a Flaws),
    /// They are counted and held against the number allowed per metre of yarn.
    Allow(&'a Flaws, f64),
}

/// Judges one bend of a yarn: the worst limit over all filaments and stretches, the broken filaments to expect, and a finding
/// of its own for a temperature above the fibre's limit.
pub fn judge(
    bend: &Bend,
    yarn: &Arc<Yarn>,
    laid: &Laid,
    required: Required<'_>,
) -> (Finding, Option<Finding>) {
    let reserve = required.reserve;
    let mut worst: Option<(Judged, Filament)> = None;
    for filament in filaments(bend, yarn, laid) {
        let judged = Judged::of(checks(yarn, &filament), reserve);
        let worse = match &worst {
            None => true,
            Some((so_far, at)) => judged
                .rank()
                .cmp(&so_far.rank())
                .then(filament.curvature_per_mm.total_cmp(&at.curvature_per_mm))
                .is_gt(),
        };
        if worse {
            worst = Some((judged, filament));
        }
    }
    let (judged, filament) = worst.unwrap_or_else(|| {
        let straight = Filament::straight(yarn.axial_stress_mpa(bend.pull_n));
        (Judged::of(checks(yarn, &straight), reserve), straight)
    });
    let (broken, judged) = match required.count {
        Count::Leave => (None, judged),
        Count::Tell(flaws) => (Some(broken_per_m(flaws, bend, yarn, laid)), judged),
        Count::Allow(flaws, allowed) => {
            let expected = broken_per_m(flaws, bend, yarn, laid);
            let [a, b, c, _] = judged.checks;
            let count = Check::filaments(expected, allowed, flaws.modulus);
            (Some(expected), Judged::of([a, b, c, count], reserve))
        }
    };
    let finding = Finding::new(bend, Arc::clone(yarn), filament, judged, broken);
    let heat = match (bend.temperature_c, yarn.fibre.max_temp_c) {
        (Some(here), Some(limit)) if here > limit => Some(finding.overheated(bend, here, limit)),
        _ => None,
    };
    (finding, heat)
}
