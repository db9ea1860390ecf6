//! A sleeve: a braid that no mandrel holds, which gets thinner as it gets longer.
//!
//! Its yarns do not stretch, so the length l of yarn in one turn stays while the angle changes:
//!
//! ```text
//! pi D = l sin a          mean diameter
//! L    = l cos a          length of sleeve in one turn
//! s    = (l/N) sin 2a     spacing across one set: largest at 45 degrees
//! ```
//!
//! Its yarns lie side by side at two angles, sin 2a_j = w N/l: drawn out to the smaller (the thinnest sleeve), pushed
//! together to the larger (the widest). Under closed-end pressure it settles where D² L is largest, tan² a = 2
//! (54.74 degrees), if that lies between both. Source: netting theory of braided sleeves (textbooks, from memory).
//! Left out: crimp interchange, friction, yarns that give way at the jam.

use super::angle::BraidAngle;
use super::error::BraidError;
use super::laid::Braid;
use super::parts::Parts;
use std::f64::consts::{FRAC_PI_2, PI, SQRT_2};

/// A sleeve of inextensible yarns.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sleeve {
    parts: Parts,
    yarn_mm_per_turn: f64,
}

impl Sleeve {
    /// The sleeve that this braid is once it is off its mandrel.
    #[must_use]
    pub fn of(braid: &Braid) -> Self {
        let lattice = braid.lattice();
        Self {
            parts: *braid.parts(),
            yarn_mm_per_turn: PI * lattice.mean_diameter_mm() / lattice.angle().radians().sin(),
        }
    }

    /// Length of yarn in one turn, crimp aside, mm.
    #[must_use]
    pub fn yarn_mm_per_turn(&self) -> f64 {
        self.yarn_mm_per_turn
    }

    /// Mean diameter at this angle, mm.
    #[must_use]
    pub fn mean_diameter_mm(&self, angle: BraidAngle) -> f64 {
        self.yarn_mm_per_turn * angle.radians().sin() / PI
    }

    /// Length of sleeve in which a yarn makes one turn, mm.
    #[must_use]
    pub fn length_mm_per_turn(&self, angle: BraidAngle) -> f64 {
        self.yarn_mm_per_turn * angle.radians().cos()
    }

    /// Angle of the sleeve drawn out as far as its yarns allow; `None` where they fit at no angle.
    #[must_use]
    pub fn drawn_out(&self) -> Option<BraidAngle> {
        BraidAngle::from_radians(self.double_jam_rad()? / 2.0).ok()
    }

    /// Angle of the sleeve pushed together as far as its yarns allow; `None` where they fit at no angle.
    #[must_use]
    pub fn pushed_together(&self) -> Option<BraidAngle> {
        BraidAngle::from_radians(FRAC_PI_2 - self.double_jam_rad()? / 2.0).ok()
    }

    fn double_jam_rad(&self) -> Option<f64> {
        let share = 2.0 * self.parts.width_all_round_mm() / self.yarn_mm_per_turn;
        (share <= 1.0).then(|| share.asin())
    }

    /// The sleeve at this angle, on a mandrel that just fills it.
    ///
    /// # Errors
    /// Where the wall is thicker than the sleeve is wide.
    pub fn at(&self, angle: BraidAngle) -> Result<Braid, BraidError> {
        self.parts
            .on_mandrel(self.mean_diameter_mm(angle) - self.parts.stack_mm(), angle)
    }

    /// Angle at which a sleeve with closed ends settles under pressure, where its jams allow, rad: tan² a = 2.
    #[must_use]
    pub fn pressure_angle_rad() -> f64 {
        SQRT_2.atan()
    }
}

#[cfg(test)]
mod tests {
    use super::super::{JamState, Setup};
    use super::*;
    use crate::yarn::{Outline, Shape};

    fn sleeve() -> (Braid, Sleeve) {
        let outline = Outline::new(Shape::Lens, 0.6, 0.1).unwrap();
        let parts = Parts::new(Setup::new(48, 2, 1).unwrap(), outline, None).unwrap();
        let braid = parts
            .on_mandrel(12.0, BraidAngle::from_degrees(40.0).unwrap())
            .unwrap();
        (braid, Sleeve::of(&braid))
    }

    #[test]
    fn it_is_the_braid_it_was_made_of() {
        let (braid, sleeve) = sleeve();
        let again = sleeve.at(braid.lattice().angle()).unwrap();
        assert!((again.mandrel_diameter_mm() - 12.0).abs() < 1e-12);
        assert!(
            (sleeve.length_mm_per_turn(braid.lattice().angle())
                - braid.lattice().advance_mm_per_turn())
            .abs()
                < 1e-10
        );
    }

    /// Free sleeve: diameter as sin a, length as cos a, until its yarns lie side by side (textbooks of netting theory).
    #[test]
    fn its_yarns_lie_side_by_side_at_both_ends() {
        let (_, sleeve) = sleeve();
        let (out, together) = (
            sleeve.drawn_out().unwrap(),
            sleeve.pushed_together().unwrap(),
        );
        assert!((out.degrees() + together.degrees() - 90.0).abs() < 1e-9);
        for end in [out, together] {
            assert_eq!(sleeve.at(end).unwrap().jam(), JamState::Closed);
        }
        let middle = BraidAngle::from_degrees(45.0).unwrap();
        assert!(matches!(
            sleeve.at(middle).unwrap().jam(),
            JamState::Open { .. }
        ));
        let ratio = sleeve.mean_diameter_mm(together) / sleeve.mean_diameter_mm(out);
        assert!((ratio - together.radians().sin() / out.radians().sin()).abs() < 1e-12);
    }

    /// `netting`: a sleeve under closed-end pressure settles at 54.74 degrees; here as the largest volume of this sleeve.
    #[test]
    fn pressure_takes_the_largest_volume() {
        let (_, sleeve) = sleeve();
        let volume = |degrees: f64| {
            let angle = BraidAngle::from_degrees(degrees).unwrap();
            sleeve.mean_diameter_mm(angle).powi(2) * sleeve.length_mm_per_turn(angle)
        };
        let best = (100..8900)
            .map(|step| f64::from(step) / 100.0)
            .max_by(|a, b| volume(*a).total_cmp(&volume(*b)));
        assert!((best.unwrap() - 54.74).abs() < 0.011, "{best:?}");
        assert!((Sleeve::pressure_angle_rad().to_degrees() - 54.74).abs() < 0.005);
    }
}
