//! Yarns: how much fibre, in how many filaments, laid into which outline.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `outline` | the four outlines: area, second moment, polygon |
//! | `touch` | where a tight thread touches an outline and leaves it |
//! | `count` | linear density, filaments and filament diameter: two fix the third |
//! | `designation` | designations of glass yarns, `ECG 75 1/0`, as linear density |
//! | `lay` | a yarn laid at its spacing: width, thickness and packing from what is given |
//! | `rigidity` | bending rigidity of the yarn and pull on one filament |

mod count;
mod designation;
mod lay;
mod outline;
mod rigidity;
mod touch;

pub use count::{Count, CountError, CountGiven, Followed};
pub use designation::{Designation, DesignationError};
pub use lay::{
    Basis, CLOSEST_PACKING, DEFAULT_PACKING, DEFAULT_WIDTH_SHARE, Laid, LayError, ROUND_HELIX_DEG,
    Vary,
};
pub use outline::{Outline, Shape};
pub use touch::{Arc, Touch};

use crate::fibre::Fibre;
use crate::quantity::TwistDirection;
use std::f64::consts::{PI, TAU};

/// Angle between a filament at radius `radius_mm` and the axis of a straight yarn, rad: tan psi = 2 pi r tau.
pub fn helix_angle_rad(radius_mm: f64, twist_per_mm: f64) -> f64 {
    (TAU * radius_mm * twist_per_mm).atan()
}

/// What a spec says of a yarn's outline; what is absent follows.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct YarnForm {
    /// Kind of outline.
    pub shape: Option<Shape>,
    /// Width, mm.
    pub width_mm: Option<f64>,
    /// Thickness, mm.
    pub thickness_mm: Option<f64>,
    /// Width over thickness.
    pub flatness: Option<f64>,
    /// Fibre area over outline area.
    pub packing: Option<f64>,
}

impl YarnForm {
    /// Width and thickness, mm, where what is given fixes both: two of three, or one of a circle.
    pub fn sizes_mm(&self, shape: Shape) -> Option<(f64, f64)> {
        match (self.width_mm, self.thickness_mm, self.flatness) {
            (Some(w), Some(t), _) => Some((w, t)),
            (Some(d), None, _) | (None, Some(d), _) if shape == Shape::Round => Some((d, d)),
            (Some(w), None, Some(f)) => Some((w, w / f)),
            (None, Some(t), Some(f)) => Some((t * f, t)),
            _ => None,
        }
    }
}

/// A yarn, resolved: its fibre, its count and what is known of its form.
#[derive(Debug, Clone, PartialEq)]
pub struct Yarn {
    /// The spec's own name for it.
    pub name: String,
    /// The fibre; its diameter is the library's or the spec's, the yarn's own stands in `count`.
    pub fibre: Fibre,
    /// Linear density, filaments, filament diameter.
    pub count: Count,
    /// Nominal filament diameter its designation tells, mm, where it has one.
    pub designated_diameter_mm: Option<f64>,
    /// Turns per mm.
    pub twist_per_mm: f64,
    /// Direction of twist, where there is one.
    pub twist_direction: Option<TwistDirection>,
    /// What is given of the outline.
    pub form: YarnForm,
    /// 0: filaments slide freely .. 1: fully bonded.
    pub binding: f64,
    /// Measured bending rigidity, N mm2.
    pub bending_rigidity_n_mm2: Option<f64>,
    /// Pull of the filament that carries most over the mean.
    pub tension_spread: f64,
}

impl Yarn {
    /// Whether the yarn is one filament: a wire or monofilament.
    pub fn is_monofilament(&self) -> bool {
        self.count.filaments == 1
    }

    /// Cross section of all fibre, mm2: tex / density.
    pub fn fibre_area_mm2(&self) -> f64 {
        if self.is_monofilament() {
            return self.filament_area_mm2();
        }
        1e-3 * self.count.linear_density_tex / self.fibre.density_g_cm3
    }

    /// Cross section of one filament, mm2.
    pub fn filament_area_mm2(&self) -> f64 {
        PI / 4.0 * self.count.filament_diameter_mm.powi(2)
    }

    /// Bending stress at the surface of one filament by the elastic formula, MPa: E d k/2; curvature in 1/mm.
    pub fn bending_stress_mpa(&self, curvature_per_mm: f64) -> f64 {
        self.fibre.modulus_mpa * self.count.filament_diameter_mm * curvature_per_mm / 2.0
    }

    /// Bending rigidity of one filament, N mm2: E pi d^4/64.
    pub fn filament_rigidity_n_mm2(&self) -> f64 {
        self.fibre.modulus_mpa * PI / 64.0 * self.count.filament_diameter_mm.powi(4)
    }
}
