//! Bending rigidity of a yarn and the pull on one of its filaments.
//!
//! ```text
//! B = N E pi d^4/64 + b² E phi I          b = 0: filaments slide freely .. 1: fully bonded
//! ```
//!
//! N -> filaments; d -> filament diameter; phi -> packing; I -> second moment of the outline. The first term
//! is the free bundle, the second what bonding adds; b² is an interpolation between both bounds (common
//! practice, no source). A measured rigidity in the spec stands in for it.

use super::{Laid, Yarn};

impl Yarn {
    /// Rigidity of the free bundle, N mm2: the lower bound.
    pub fn free_rigidity_n_mm2(&self) -> f64 {
        f64::from(self.count.filaments) * self.filament_rigidity_n_mm2()
    }

    /// Rigidity of the fully bonded yarn, N mm2: the upper bound.
    pub fn bonded_rigidity_n_mm2(&self, laid: &Laid) -> f64 {
        if self.is_monofilament() {
            return self.free_rigidity_n_mm2();
        }
        self.free_rigidity_n_mm2()
            + self.fibre.modulus_mpa * laid.packing * laid.outline.second_moment_mm4()
    }

    /// Rigidity at the yarn's binding, or as measured, N mm2.
    pub fn rigidity_n_mm2(&self, laid: &Laid) -> f64 {
        self.bending_rigidity_n_mm2.unwrap_or_else(|| {
            let free = self.free_rigidity_n_mm2();
            free + self.binding.powi(2) * (self.bonded_rigidity_n_mm2(laid) - free)
        })
    }

    /// Pull over rigidity of the thing that bends on its own, 1/mm2: a single free filament (its share of the
    /// pull over its own rigidity), or with binding the yarn as a whole.
    pub fn pull_over_rigidity_per_mm2(&self, pull_n: f64, laid: &Laid) -> f64 {
        let rigidity_n_mm2 = if self.binding > 0.0 {
            self.rigidity_n_mm2(laid)
        } else {
            self.free_rigidity_n_mm2()
        };
        pull_n * self.tension_spread / rigidity_n_mm2
    }

    /// Axial stress of the filament that carries most, MPa: pull over fibre area times the tension spread.
    pub fn axial_stress_mpa(&self, pull_n: f64) -> f64 {
        pull_n * self.tension_spread / (f64::from(self.count.filaments) * self.filament_area_mm2())
    }
}
