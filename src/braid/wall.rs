//! The wall of the braid: thickness, mass, fibre volume.
//!
//! ```text
//! thickness        = height of the braiders' wave + t, which for taut yarns is the stack 2 t, or 2 t + ta
//! mass per length  = N e tex (1 + c)/cos a + Na tex_a (1 + c_a)
//! fibre share      = fibre area per cut / (pi D thickness)
//! ```
//!
//! e: ends per carrier; c: crimp; Na: axials. pi D times the thickness is exactly the ring's area, as D is its middle.
//! Left out: flattening of the yarns by pull and by the next layer.

use super::error::{BraidError, not_negative, size};
use super::laid::Braid;
use super::path::BraiderPath;
use crate::yarn::CLOSEST_PACKING;
use std::f64::consts::PI;

/// How much of a yarn there is.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Strand {
    /// Linear density of one end, tex.
    pub linear_density_tex: f64,
    /// Cross section of the fibre in one end, mm2.
    pub fibre_area_mm2: f64,
}

/// The wall's numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Wall {
    /// Thickness, mm.
    pub thickness_mm: f64,
    /// Mass per length of braid, g/m.
    pub mass_g_per_m: f64,
    /// Mass per area of its mean surface, g/m2.
    pub areal_mass_g_m2: f64,
    /// Share of fibre in the wall's volume.
    pub fibre_volume_fraction: f64,
}

impl Braid {
    /// The wall of this braid with braiders on this path.
    ///
    /// # Errors
    /// Where a yarn holds more fibre than its outline, or the axials' fibre is not told where there are axials.
    pub fn wall(
        &self,
        path: &BraiderPath,
        braider: Strand,
        axial: Option<Strand>,
    ) -> Result<Wall, BraidError> {
        let fits = |strand: Strand, outline_mm2: f64| {
            size("linear density", strand.linear_density_tex, "tex")?;
            let fibre_mm2 = not_negative("area of fibre", strand.fibre_area_mm2, " mm2")?;
            if fibre_mm2 > CLOSEST_PACKING * outline_mm2 * (1.0 + 1e-9) {
                return Err(BraidError::TooMuchFibre {
                    fibre_mm2,
                    outline_mm2,
                });
            }
            Ok(())
        };
        let parts = self.parts();
        fits(braider, parts.braider().area_mm2())?;
        let ends =
            f64::from(parts.setup().carriers()) * f64::from(parts.setup().ends_per_carrier());
        // Lengths of yarn per length of braid, all yarns together.
        let braiders = ends * self.lattice().yarn_per_braid_length() * (1.0 + path.crimp);
        let (mut mass, mut fibre_mm2) = (
            braiders * braider.linear_density_tex,
            braiders * braider.fibre_area_mm2,
        );
        match (parts.axials(), axial) {
            (Some(axials), Some(axial)) => {
                fits(axial, axials.outline().area_mm2())?;
                let length = f64::from(parts.axial_count()) * (1.0 + axials.crimp());
                mass += length * axial.linear_density_tex;
                fibre_mm2 += length * axial.fibre_area_mm2;
            }
            (None, None) => {}
            (axials, _) => {
                return Err(BraidError::AxialFibre {
                    in_braid: axials.is_some(),
                });
            }
        }
        let thickness_mm =
            (path.wave_height_mm + parts.braider().thickness_mm()).max(parts.stack_mm());
        let round_mm = PI * self.lattice().mean_diameter_mm();
        Ok(Wall {
            thickness_mm,
            mass_g_per_m: 1e-3 * mass,
            areal_mass_g_m2: mass / round_mm,
            fibre_volume_fraction: fibre_mm2 / (round_mm * thickness_mm),
        })
    }
}

#[cfg(test)]
mod tests {
    use super::super::{Axials, BraidAngle, Parts, Setup};
    use super::*;
    use crate::yarn::{Outline, Shape};

    /// By hand: 48 ends of 800 tex at 60 degrees are twice as long as the braid, 12 axials of 1600 tex with 1 % crimp.
    #[test]
    fn mass_counts_every_yarn() {
        let outline = Outline::new(Shape::Lens, 2.0, 0.4).unwrap();
        let axials = Axials::new(2, outline, 0.01).unwrap();
        let parts = Parts::new(Setup::new(48, 2, 1).unwrap(), outline, Some(axials)).unwrap();
        let braid = parts
            .on_mandrel(80.0, BraidAngle::from_degrees(60.0).unwrap())
            .unwrap();
        let path = braid.taut().unwrap();
        let strand = |tex: f64, area: f64| Strand {
            linear_density_tex: tex,
            fibre_area_mm2: area,
        };
        let wall = braid
            .wall(&path, strand(800.0, 0.3), Some(strand(1600.0, 0.4)))
            .unwrap();
        let mass = 48.0 * 0.8 * 2.0 * (1.0 + path.crimp) + 12.0 * 1.6 * 1.01;
        assert!((wall.mass_g_per_m - mass).abs() < 1e-9);
        assert!(
            (wall.thickness_mm - 1.2).abs() < 1e-9,
            "{}",
            wall.thickness_mm
        );
        let ring = 0.25 * PI * (82.4f64.powi(2) - 80.0f64.powi(2));
        let fibre = 48.0 * 0.3 * 2.0 * (1.0 + path.crimp) + 12.0 * 0.4 * 1.01;
        assert!((wall.fibre_volume_fraction / (fibre / ring) - 1.0).abs() < 1e-9);
        assert!((wall.areal_mass_g_m2 / (1e3 * mass / (PI * 81.2)) - 1.0).abs() < 1e-9);
        assert!(braid.wall(&path, strand(800.0, 0.3), None).is_err());
        assert!(
            braid
                .wall(&path, strand(800.0, 0.6), Some(strand(1600.0, 0.4)))
                .is_err()
        );
    }
}
