//! The open shed: lifting an end from the straight line between backrest and fell lengthens it, and its pull rises, as far as
//! the crowns that are just woven.
//!
//! ```text
//! strain = ( sqrt(l1^2 + h^2) - l1 + sqrt(l2^2 + h^2) - l2 )/(l1 + l2) (1 - e)       exact; for a small h
//!        = h^2/2 (1/l1 + 1/l2)/(l1 + l2) (1 - e)                                     (common practice, no source)
//! pull   = mean + E A strain
//! ```
//!
//! h -> depth_mm; l1 -> front_mm, heald to fell; l2 -> back_mm, heald to backrest; e -> let_off, the share that an easing
//! backrest or the let-off takes up; E -> modulus, A -> fibre area of the end. Left out: the pick's own take-up, the
//! yarn's twist and crimp, stretch behind the backrest, and yield: of wire past it the pull is overstated.

use crate::spec::{Shed, Weave};

/// Strain of an end in the open shed that nothing takes up.
pub fn shed_strain(shed: &Shed) -> f64 {
    // The same as sqrt(l^2 + h^2) - l, without the loss of digits for a small h.
    let longer = |length: f64| shed.depth_mm.powi(2) / (length.hypot(shed.depth_mm) + length);
    let lengthening = longer(shed.front_mm) + longer(shed.back_mm);
    (1.0 - shed.let_off) * lengthening / (shed.front_mm + shed.back_mm)
}

/// Pull that the open shed adds to an end, N; zero where the spec tells no shed.
pub fn shed_pull_n(weave: &Weave) -> f64 {
    let yarn = &weave.warp.yarn;
    weave.shed.as_ref().map_or(0.0, |shed| {
        yarn.fibre.modulus_mpa * yarn.fibre_area_mm2() * shed_strain(shed)
    })
}

/// Largest pull on an end while the cloth is woven, N: the peak, or the mean and what the open shed adds.
pub fn warp_peak_n(weave: &Weave) -> f64 {
    let mean = weave.warp.tension_n;
    (weave.peak * mean).max(mean + shed_pull_n(weave))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn shed(depth_mm: f64, let_off: f64) -> Shed {
        Shed {
            depth_mm,
            front_mm: 150.0,
            back_mm: 500.0,
            let_off,
            depth_span: 0..0,
        }
    }

    /// 40 mm between 150 and 500 mm: about 1.1 % (common practice, no source); by hand sqrt(150^2 + 40^2) = 155.24175 and
    /// sqrt(500^2 + 40^2) = 501.59745, together 6.8392 mm of 650.
    #[test]
    fn strain_is_that_of_the_trade() {
        let strain = shed_strain(&shed(40.0, 0.0));
        assert!((strain - 6.8392 / 650.0).abs() < 1e-7, "{strain}");
        assert!((strain - 0.011).abs() < 5e-4);
        assert!((shed_strain(&shed(40.0, 0.9)) / strain - 0.1).abs() < 1e-12);
        assert_eq!(shed_strain(&shed(0.0, 0.0)), 0.0);
    }

    #[test]
    fn a_small_lift_follows_the_short_form() {
        let h: f64 = 2.0;
        let short = h.powi(2) / 2.0 * (1.0 / 150.0 + 1.0 / 500.0) / 650.0;
        assert!((shed_strain(&shed(h, 0.0)) / short - 1.0).abs() < 1e-4);
    }
}
