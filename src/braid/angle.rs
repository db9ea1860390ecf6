//! The braid angle: between the yarn and the mandrel's axis, given or from the machine.
//!
//! While the carriers of one set make n turns a second the mandrel moves on by v, so the yarn lays itself on the mean
//! diameter D at
//!
//! ```text
//! tan a = pi D n/v          v/n: advance per turn, the pitch of the helix
//! ```
//!
//! n -> `turns_per_s`; v -> `take_up_mm_per_s`; D -> `mean_diameter_mm`. Source: textbook kinematics of braiding
//! (from memory). From the picks P per length along the axis and the pitch c of one set: tan a = c P.
//!
//! Holds for steady running: after a change of speed or diameter the fell follows with a delay (about the cone's length),
//! which is left out.

use super::error::{BraidError, size};
use std::f64::consts::PI;

/// A braid angle, above 0 and below 90 degrees.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct BraidAngle(f64);

impl BraidAngle {
    /// The angle in radians.
    ///
    /// # Errors
    /// Where it is not above 0 and below a right angle.
    pub fn from_radians(angle_rad: f64) -> Result<Self, BraidError> {
        // The cosine tells a right angle that rounding left a hair below.
        if angle_rad > 0.0 && angle_rad.cos() > 1e-9 && angle_rad < 2.0 {
            Ok(Self(angle_rad))
        } else {
            Err(BraidError::Angle {
                found_deg: angle_rad.to_degrees(),
            })
        }
    }

    /// The angle in degrees.
    ///
    /// # Errors
    /// As [`BraidAngle::from_radians`].
    pub fn from_degrees(angle_deg: f64) -> Result<Self, BraidError> {
        Self::from_radians(angle_deg.to_radians()).map_err(|_| BraidError::Angle {
            found_deg: angle_deg,
        })
    }

    /// The angle at which picks `picks_per_mm` lie along the axis where one set has this pitch round the mandrel.
    ///
    /// # Errors
    /// Where a number is not above 0.
    pub fn from_picks(pitch_mm: f64, picks_per_mm: f64) -> Result<Self, BraidError> {
        let pitch_mm = size("pitch of one set", pitch_mm, "mm")?;
        Self::from_radians((pitch_mm * size("number of picks", picks_per_mm, "/mm")?).atan())
    }

    /// In radians.
    #[must_use]
    pub fn radians(self) -> f64 {
        self.0
    }

    /// In degrees.
    #[must_use]
    pub fn degrees(self) -> f64 {
        self.0.to_degrees()
    }

    /// How far the mandrel moves on while a yarn makes one turn, mm: pi D/tan a.
    #[must_use]
    pub fn advance_mm_per_turn(self, mean_diameter_mm: f64) -> f64 {
        PI * mean_diameter_mm / self.0.tan()
    }
}

/// How the machine runs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Kinematics {
    turns_per_s: f64,
    take_up_mm_per_s: f64,
}

impl Kinematics {
    /// Turns of the carriers of one set and take-up of the mandrel.
    ///
    /// # Errors
    /// Where a number is not above 0.
    pub fn new(turns_per_s: f64, take_up_mm_per_s: f64) -> Result<Self, BraidError> {
        Ok(Self {
            turns_per_s: size("speed of the carriers", turns_per_s, "turns/s")?,
            take_up_mm_per_s: size("take-up", take_up_mm_per_s, "mm/s")?,
        })
    }

    /// The take-up that gives this angle.
    ///
    /// # Errors
    /// Where a number is not above 0.
    pub fn for_angle(
        angle: BraidAngle,
        mean_diameter_mm: f64,
        turns_per_s: f64,
    ) -> Result<Self, BraidError> {
        let mean_diameter_mm = size("mean diameter", mean_diameter_mm, "mm")?;
        let turns_per_s = size("speed of the carriers", turns_per_s, "turns/s")?;
        Self::new(
            turns_per_s,
            turns_per_s * angle.advance_mm_per_turn(mean_diameter_mm),
        )
    }

    /// Turns of the carriers of one set per second.
    #[must_use]
    pub fn turns_per_s(&self) -> f64 {
        self.turns_per_s
    }

    /// Take-up of the mandrel, mm/s.
    #[must_use]
    pub fn take_up_mm_per_s(&self) -> f64 {
        self.take_up_mm_per_s
    }

    /// How far the mandrel moves on in one turn of the carriers, mm.
    #[must_use]
    pub fn advance_mm_per_turn(&self) -> f64 {
        self.take_up_mm_per_s / self.turns_per_s
    }

    /// The angle at which the yarns lie on this mean diameter.
    ///
    /// # Errors
    /// Where the diameter is not above 0, or the angle rounds to a right angle.
    pub fn angle(&self, mean_diameter_mm: f64) -> Result<BraidAngle, BraidError> {
        let mean_diameter_mm = size("mean diameter", mean_diameter_mm, "mm")?;
        BraidAngle::from_radians((PI * mean_diameter_mm / self.advance_mm_per_turn()).atan())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn what_is_no_angle_is_refused() {
        for angle in [0.0, -10.0, 90.0, 120.0, 400.0, f64::NAN, f64::INFINITY] {
            assert!(BraidAngle::from_degrees(angle).is_err(), "{angle}");
        }
        assert!(Kinematics::new(0.0, 1.0).is_err());
        assert!(Kinematics::new(1.0, f64::NAN).is_err());
    }

    proptest! {
        /// The take-up for an angle gives that angle.
        #[test]
        fn kinematics_invert(angle_deg in 1.0..89.0f64, diameter in 1.0..500.0f64, turns in 0.01..5.0f64) {
            let angle = BraidAngle::from_degrees(angle_deg).unwrap();
            let run = Kinematics::for_angle(angle, diameter, turns).unwrap();
            prop_assert!((run.angle(diameter).unwrap().degrees() - angle_deg).abs() < 1e-10);
            prop_assert!((run.advance_mm_per_turn() / angle.advance_mm_per_turn(diameter) - 1.0).abs() < 1e-12);
        }
    }
}
