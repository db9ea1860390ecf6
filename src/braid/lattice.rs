//! Spacings of the unrolled braid.
//!
//! ```text
//! c = pi D/(N/2)                pitch of one set round the mandrel      `pitch_mm`
//! s = c cos a                   spacing across one set                  `spacing_mm`
//! p = s/sin 2a                  crossings along a yarn                  `crossing_spacing_mm`
//! P = tan a/c                   picks along the axis                    `picks_per_mm`
//! k = sin² a/(D/2)              curvature of the helix                  `helix_curvature_per_mm`
//! l = 1/cos a                   length of helix per length of braid     `yarn_per_braid_length`
//! ```
//!
//! D is the mean diameter of the wall. Picks count the crossings on one line along the axis, as wire braids are told:
//! tan a = 2 pi D P/N. Exact on a cylinder (a cylinder unrolls without strain).

use super::angle::BraidAngle;
use super::error::{BraidError, size};
use super::setup::Setup;
use std::f64::consts::PI;

/// The braid's net of centrelines on its mean diameter.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Lattice {
    carriers: u32,
    mean_diameter_mm: f64,
    angle: BraidAngle,
}

impl Lattice {
    /// The net of a setup on this mean diameter at this angle.
    ///
    /// # Errors
    /// Where the diameter is not above 0.
    pub fn new(
        setup: &Setup,
        mean_diameter_mm: f64,
        angle: BraidAngle,
    ) -> Result<Self, BraidError> {
        Ok(Self {
            carriers: setup.carriers(),
            mean_diameter_mm: size("mean diameter", mean_diameter_mm, "mm")?,
            angle,
        })
    }

    /// Diameter of the wall's middle, mm.
    #[must_use]
    pub fn mean_diameter_mm(&self) -> f64 {
        self.mean_diameter_mm
    }

    /// The braid angle.
    #[must_use]
    pub fn angle(&self) -> BraidAngle {
        self.angle
    }

    /// Pitch of one set round the mandrel, mm.
    #[must_use]
    pub fn pitch_mm(&self) -> f64 {
        2.0 * PI * self.mean_diameter_mm / f64::from(self.carriers)
    }

    /// Spacing across one set, mm.
    #[must_use]
    pub fn spacing_mm(&self) -> f64 {
        self.pitch_mm() * self.angle.radians().cos()
    }

    /// Distance of crossings along a yarn, mm.
    #[must_use]
    pub fn crossing_spacing_mm(&self) -> f64 {
        self.spacing_mm() / self.crossing_angle_rad().sin()
    }

    /// Angle at which the sets cross, rad: twice the braid angle.
    #[must_use]
    pub fn crossing_angle_rad(&self) -> f64 {
        2.0 * self.angle.radians()
    }

    /// Picks along the axis per mm.
    #[must_use]
    pub fn picks_per_mm(&self) -> f64 {
        self.angle.radians().tan() / self.pitch_mm()
    }

    /// Length of braid in which a yarn makes one turn, mm.
    #[must_use]
    pub fn advance_mm_per_turn(&self) -> f64 {
        self.angle.advance_mm_per_turn(self.mean_diameter_mm)
    }

    /// Length of helix per length of braid, crimp aside.
    #[must_use]
    pub fn yarn_per_braid_length(&self) -> f64 {
        1.0 / self.angle.radians().cos()
    }

    /// Curvature of the helix, 1/mm.
    #[must_use]
    pub fn helix_curvature_per_mm(&self) -> f64 {
        self.angle.radians().sin().powi(2) / (0.5 * self.mean_diameter_mm)
    }
}
