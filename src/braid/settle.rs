//! A yarn whose outline hangs on its spacing, laid on a mandrel.
//!
//! Where a yarn's width is not measured it follows from the spacing (the default is a share of it), its thickness from the
//! width, the mean diameter from the thickness, and the spacing from that: a ring, gone round until it stands still. Each
//! round is off by about 2 t/D of the one before, so a few suffice on any mandrel wider than the wall is thick.

use super::angle::BraidAngle;
use super::error::{BraidError, not_negative, size};
use super::lattice::Lattice;
use super::setup::Setup;
use crate::yarn::Outline;

/// Rounds, and the change of the mean diameter at which it stands still, relative.
const ROUNDS: usize = 200;
const STILL: f64 = 1e-13;

/// A mandrel and what lies on it beside the braiders.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bed {
    /// Diameter of the mandrel, mm.
    pub mandrel_diameter_mm: f64,
    /// Thickness of the axials between the sets, mm; 0 without.
    pub axial_thickness_mm: f64,
}

impl Setup {
    /// The outline of one end that lies at the spacing which its own thickness leaves: `lay` gives the outline for a room
    /// per end in mm, `angle` the braid angle on a mean diameter in mm (the same for all, or [`super::Kinematics::angle`]).
    ///
    /// # Errors
    /// Those of `lay` and `angle`; where the sizes are none; where the ring does not come to rest.
    pub fn settled<E: From<BraidError>>(
        &self,
        bed: Bed,
        angle: impl Fn(f64) -> Result<BraidAngle, BraidError>,
        lay: impl Fn(f64) -> Result<Outline, E>,
    ) -> Result<Outline, E> {
        let bed_mm = size("mandrel diameter", bed.mandrel_diameter_mm, "mm")?
            + not_negative("axials' thickness", bed.axial_thickness_mm, " mm")?;
        let mut mean_mm = bed_mm;
        for _ in 0..ROUNDS {
            let lattice = Lattice::new(self, mean_mm, angle(mean_mm)?)?;
            let outline = lay(lattice.spacing_mm() / f64::from(self.ends_per_carrier()))?;
            let next_mm = bed_mm + 2.0 * outline.thickness_mm();
            if (next_mm - mean_mm).abs() <= STILL * mean_mm {
                return Ok(outline);
            }
            mean_mm = next_mm;
        }
        Err(BraidError::Unsettled.into())
    }
}

#[cfg(test)]
mod tests {
    use super::super::{Kinematics, Parts};
    use super::*;
    use crate::yarn::Shape;

    /// A lens of 0.3 mm2 as wide as 0.9 of its spacing: on the mandrel it is just that.
    #[test]
    fn the_outline_fits_the_spacing_it_leaves() {
        let setup = Setup::new(48, 2, 2).unwrap();
        let run = Kinematics::new(0.5, 60.0).unwrap();
        let bed = Bed {
            mandrel_diameter_mm: 30.0,
            axial_thickness_mm: 0.0,
        };
        let lay =
            |room: f64| Outline::with_width(Shape::Lens, 0.9 * room, 0.3).ok_or(BraidError::Limp);
        let outline = setup.settled(bed, |mean| run.angle(mean), lay).unwrap();
        let braid = Parts::new(setup, outline, None)
            .unwrap()
            .on_machine(30.0, &run)
            .unwrap();
        assert!((braid.filling() - 0.9).abs() < 1e-9, "{}", braid.filling());
        let refused: Result<_, BraidError> =
            setup.settled(bed, |mean| run.angle(mean), |_| Err(BraidError::NoEnds));
        assert_eq!(refused, Err(BraidError::NoEnds));
    }

    #[test]
    fn a_ring_that_never_rests_is_an_error() {
        let setup = Setup::new(48, 2, 1).unwrap();
        let bed = Bed {
            mandrel_diameter_mm: 30.0,
            axial_thickness_mm: 0.0,
        };
        let angle = BraidAngle::from_degrees(45.0);
        // Thin where there is much room, thick where there is little: no mean diameter is its own.
        let middle = std::f64::consts::PI * 30.5 / 24.0 * 0.5f64.sqrt();
        let at = |room: f64| {
            let thickness = if room > middle { 0.1 } else { 0.4 };
            Outline::new(Shape::Lens, 1.0, thickness).ok_or(BraidError::Limp)
        };
        assert_eq!(
            setup.settled(bed, |_| angle.clone(), at),
            Err(BraidError::Unsettled)
        );
    }
}
