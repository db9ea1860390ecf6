//! Where the yarns of one set lie side by side.
//!
//! On a mandrel the spacing across a set falls as the cosine of the braid angle, so with w the width of a carrier's ends
//!
//! ```text
//! cos a_j = w N/(2 pi D)        jammed above a_j; jammed at any angle where the right side is 1 or more
//! D_j     = w N/(2 pi cos a)    the smallest mean diameter at an angle: free yarns drawn together stop there
//! ```
//!
//! Left out: yarns that give way (they get narrower and thicker a little before and after), axials, which leave the
//! spacing of the sets as it is. A sleeve without mandrel jams twice (`sleeve`).

use super::angle::BraidAngle;
use super::laid::Braid;
use super::parts::Parts;
use std::f64::consts::PI;

/// How the yarns of one set lie beside each other.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum JamState {
    /// Apart.
    Open {
        /// Gap between neighbours, mm.
        gap_mm: f64,
    },
    /// Side by side.
    Closed,
    /// They do not fit.
    Jammed {
        /// By how much they are too wide, mm.
        overlap_mm: f64,
    },
}

/// Gaps below this share of the spacing are none.
const TOUCHING: f64 = 1e-9;

impl Parts {
    /// The steepest angle on this mean diameter; `None` where the yarns fit at no angle.
    #[must_use]
    pub fn jam_angle(&self, mean_diameter_mm: f64) -> Option<BraidAngle> {
        let share = self.width_all_round_mm() / (PI * mean_diameter_mm);
        if share >= 1.0 {
            return None;
        }
        BraidAngle::from_radians(share.acos()).ok()
    }

    /// The smallest mean diameter on which the yarns fit at this angle, mm: the free diameter of a braid drawn off
    /// without a mandrel until its yarns lie side by side.
    #[must_use]
    pub fn closed_mean_diameter_mm(&self, angle: BraidAngle) -> f64 {
        self.width_all_round_mm() / (PI * angle.radians().cos())
    }

    /// Widths of the bands of one set together, mm.
    pub(super) fn width_all_round_mm(&self) -> f64 {
        0.5 * f64::from(self.setup().carriers()) * self.band_width_mm()
    }
}

impl Braid {
    /// How the yarns of one set lie beside each other.
    #[must_use]
    pub fn jam(&self) -> JamState {
        let gap_mm = self.lattice().spacing_mm() - self.parts().band_width_mm();
        if gap_mm.abs() <= TOUCHING * self.lattice().spacing_mm() {
            JamState::Closed
        } else if gap_mm > 0.0 {
            JamState::Open { gap_mm }
        } else {
            JamState::Jammed {
                overlap_mm: -gap_mm,
            }
        }
    }

    /// The steepest angle on this mandrel; `None` where the yarns fit at no angle.
    #[must_use]
    pub fn jam_angle(&self) -> Option<BraidAngle> {
        self.parts().jam_angle(self.lattice().mean_diameter_mm())
    }
}

#[cfg(test)]
mod tests {
    use super::super::Setup;
    use super::*;
    use crate::yarn::{Outline, Shape};
    use proptest::prelude::*;

    proptest! {
        /// At the jam angle, and on the closed diameter, the yarns lie side by side; a hair beyond they do not fit.
        #[test]
        fn both_limits_are_where_the_gap_closes(
            half in 2u32..100, width in 0.1..4.0f64, loose in 1.01..20.0f64, angle_deg in 3.0..87.0f64,
        ) {
            let outline = Outline::new(Shape::Lens, width, 0.1 * width).unwrap();
            let parts = Parts::new(Setup::new(2 * half, 1, 1).unwrap(), outline, None).unwrap();
            let diameter = loose * f64::from(half) * width / PI + 0.2 * width;
            let jam = parts.jam_angle(parts.mean_diameter_mm(diameter)).unwrap();
            prop_assert_eq!(parts.on_mandrel(diameter, jam).unwrap().jam(), JamState::Closed);
            let beyond = BraidAngle::from_radians(jam.radians() + 1e-4);
            if let Ok(beyond) = beyond {
                let jammed = matches!(parts.on_mandrel(diameter, beyond).unwrap().jam(), JamState::Jammed { .. });
                prop_assert!(jammed);
            }
            let angle = BraidAngle::from_degrees(angle_deg).unwrap();
            let closed = parts.closed_mean_diameter_mm(angle) - parts.stack_mm();
            prop_assume!(closed > 0.0);
            prop_assert_eq!(parts.on_mandrel(closed, angle).unwrap().jam(), JamState::Closed);
            let open = matches!(parts.on_mandrel(1.01 * closed, angle).unwrap().jam(), JamState::Open { .. });
            prop_assert!(open);
        }
    }

    #[test]
    fn yarns_too_wide_for_the_mandrel_fit_at_no_angle() {
        let outline = Outline::new(Shape::Lens, 3.0, 0.2).unwrap();
        let parts = Parts::new(Setup::new(48, 2, 1).unwrap(), outline, None).unwrap();
        assert_eq!(parts.jam_angle(20.0), None);
    }
}
