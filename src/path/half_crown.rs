//! What a taut yarn's half crown is made of: its rests from the crest to the straight piece, every one with the way in which a
//! stiff filament may stay away from it (`rod`): over the crest, over a shoulder, or over an outline that turns without a corner.

use super::taut::{Crest, Passing};
use crate::bend::{Crown, Easing, Flanks, Shoulder, Stretch};

/// The stretches of a half crown, from the crest; `wave_mm` is the height from crest to trough.
pub fn half_crown(crest: &Crest, passing: &Passing, wave_mm: f64, flanks: Flanks) -> Vec<Stretch> {
    let crown = Crown {
        drop_mm: 0.5 * wave_mm,
        arm_mm: 0.5 * crest.spacing_mm,
        flanks,
    };
    let half_straight_mm = 0.5 * passing.straight_mm;
    let back_mm = crown.arm_mm - half_straight_mm * passing.slope_rad.cos();
    let rolls = crest.section.arcs().is_none();
    let mut start_rad = 0.0;
    let mut stretches = Vec::with_capacity(passing.rests.len());
    for (index, rest) in passing.rests.iter().enumerate() {
        let shoulder = Shoulder {
            back_mm,
            start_rad,
            slope_rad: passing.slope_rad,
            half_straight_mm,
        };
        start_rad += rest.turn_rad;
        let easing = match rest.outline_radius_mm {
            None => Easing::Held,
            Some(_) if index == 0 => Easing::Crown(crown),
            Some(_) if rolls => Easing::Rounded(crown, shoulder),
            Some(_) => Easing::Shoulder(shoulder),
        };
        stretches.push(Stretch {
            length_mm: rest.length_mm,
            lies_on_mm: rest.outline_radius_mm,
            easing,
        });
    }
    stretches
}
