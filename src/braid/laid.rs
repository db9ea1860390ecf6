//! The braid on its mandrel.
//!
//! A braider's curvature is that of its path between the yarns it crosses and that of the helix, in one plane: over a
//! crest on the outside both bend towards the mandrel and add up, under a trough on the inside they are opposed.

use super::error::{BraidError, size};
use super::lattice::Lattice;
use super::parts::Parts;
use super::section::met_obliquely;
use crate::yarn::Outline;

/// A braid on a mandrel; it may be jammed ([`Braid::jam`]), in which case its yarns have no paths.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Braid {
    parts: Parts,
    mandrel_diameter_mm: f64,
    lattice: Lattice,
    crossed: Outline,
    crossed_axial: Option<Outline>,
}

impl Braid {
    pub(super) fn new(
        parts: Parts,
        mandrel_diameter_mm: f64,
        lattice: Lattice,
    ) -> Result<Self, BraidError> {
        let no_section = || BraidError::Angle {
            found_deg: lattice.angle().degrees(),
        };
        let ends = parts.setup().ends_per_carrier();
        let crossed = met_obliquely(parts.braider(), ends, lattice.crossing_angle_rad())
            .ok_or_else(no_section)?;
        let crossed_axial = match parts.axials() {
            Some(axials) => Some(
                met_obliquely(axials.outline(), 1, lattice.angle().radians())
                    .ok_or_else(no_section)?,
            ),
            None => None,
        };
        size(
            "spacing along a braider",
            lattice.crossing_spacing_mm(),
            "mm",
        )?;
        Ok(Self {
            parts,
            mandrel_diameter_mm,
            lattice,
            crossed,
            crossed_axial,
        })
    }

    /// What is braided.
    #[must_use]
    pub fn parts(&self) -> &Parts {
        &self.parts
    }

    /// Diameter of the mandrel, mm.
    #[must_use]
    pub fn mandrel_diameter_mm(&self) -> f64 {
        self.mandrel_diameter_mm
    }

    /// Angle and spacings.
    #[must_use]
    pub fn lattice(&self) -> &Lattice {
        &self.lattice
    }

    /// The band of the other set as a braider meets it.
    #[must_use]
    pub fn crossed(&self) -> &Outline {
        &self.crossed
    }

    /// The axial as a braider meets it, where there are axials.
    #[must_use]
    pub fn crossed_axial(&self) -> Option<&Outline> {
        self.crossed_axial.as_ref()
    }

    /// Distance of neighbouring axials round the mandrel, mm.
    #[must_use]
    pub fn axial_spacing_mm(&self) -> Option<f64> {
        let axials = self.parts.axials()?;
        let crossings = f64::from(axials.every()) * f64::from(self.parts.setup().over());
        Some(0.5 * crossings * self.lattice.pitch_mm())
    }
}
