//! Dense cloth: how yarns give way where they could not interlace as they were laid.
//!
//! Yarns in dense cloth press each other together. Two things may give, and only where the spec did not fix
//! them, in this order:
//!
//! 1. a yarn squeezed to its spacing touches its neighbours and leaves the other system no way between: it
//!    becomes as much narrower as lets it through, down to 0.8 of the spacing;
//! 2. packing that is only assumed is raised, from 0.65 up to the closest, 0.91, and no further than needed: a
//!    dense satin is packed closer than an open plain weave.
//!
//! Both are named in the report. What still does not pass is jammed. That assumed packings give way is common
//! sense of the trade without a source; measured sizes never do.

use super::cloth::{Cloth, ClothError};
use crate::spec::{System, Weave};
use crate::yarn::{CLOSEST_PACKING, DEFAULT_PACKING, Vary};

/// The narrowest that a squeezed yarn becomes, as a share of its spacing.
const NARROWEST: f64 = 0.8;
/// How closely the giving way is found.
const ACCURACY: f64 = 1e-6;

/// The cloth of a weave whose thickness is not measured.
pub(super) fn build(weave: &Weave, flatness: f64) -> Result<Cloth, ClothError> {
    let with = |packing: f64| {
        let vary = Vary {
            flatness,
            packing,
            ..Vary::default()
        };
        build_narrowed(weave, vary)
    };
    let as_laid = with(DEFAULT_PACKING);
    let assumed = |system: &System| {
        let form = &system.yarn.form;
        !system.yarn.is_monofilament()
            && form.packing.is_none()
            && form.sizes_mm(system.yarn.shape()).is_none()
    };
    let may_give = assumed(&weave.warp) || assumed(&weave.weft);
    if as_laid.is_ok() || !may_give || with(CLOSEST_PACKING).is_err() {
        return as_laid;
    }
    let packing = last_that(
        |packing| with(packing).is_ok(),
        CLOSEST_PACKING,
        DEFAULT_PACKING,
    );
    Ok(Cloth {
        raised_packing: Some(packing),
        ..with(packing)?
    })
}

/// The cloth with the yarns' thicknesses scaled by a factor: packing follows and cannot give.
pub(super) fn build_scaled(
    weave: &Weave,
    flatness: f64,
    thickness: f64,
) -> Result<Cloth, ClothError> {
    let vary = Vary {
        flatness,
        thickness,
        ..Vary::default()
    };
    build_narrowed(weave, vary)
}

/// The cloth with squeezed yarns as much narrower as they must be.
fn build_narrowed(weave: &Weave, vary: Vary) -> Result<Cloth, ClothError> {
    let as_laid = Cloth::build_varied(weave, vary);
    let squeezed = |system: &System| {
        system
            .yarn
            .laid_at(system.spacing_mm(), vary)
            .is_ok_and(|laid| laid.squeezed)
    };
    if as_laid != Err(ClothError::Jammed) || !(squeezed(&weave.warp) || squeezed(&weave.weft)) {
        return as_laid;
    }
    let with = |room: f64| Cloth::build_varied(weave, Vary { room, ..vary });
    // Narrower yarns are thicker, so passing may end again: look for the first that passes.
    let step = 0.02;
    let first = (1..)
        .map(|index| 1.0 - step * f64::from(index))
        .take_while(|room| *room >= NARROWEST);
    match first.into_iter().find(|room| with(*room).is_ok()) {
        Some(room) => with(last_that(|room| with(room).is_ok(), room, room + step)),
        None => as_laid,
    }
}

/// The value nearest to `wanted` that still passes, from `passes` on.
fn last_that(does: impl Fn(f64) -> bool, passes: f64, wanted: f64) -> f64 {
    let (mut passes, mut fails) = (passes, wanted);
    while (fails - passes).abs() > ACCURACY {
        let middle = 0.5 * (passes + fails);
        if does(middle) {
            passes = middle;
        } else {
            fails = middle;
        }
    }
    passes
}
