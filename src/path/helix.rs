//! Curvature of a filament that winds round the axis of a twisted yarn, straight or bent.
//!
//! Straight yarn: tan psi = 2 pi r tau, curvature sin² psi / r.
//!
//! Bent yarn, centreline radius R, filament at radius r and phase f (0 outside of the bend, pi inside),
//! exact for the helix that keeps its turns per length of centreline:
//!
//! ```text
//! g = 1 + (r/R) cos f,   w = 2 pi tau,   q = r² w² + g²
//! k² = [(r w² + (g/R) cos f)/q]² + [(sin f/R)(2 r² w² + g²)/q^1.5]²
//! ```
//!
//! tau -> `twist_per_mm`; R -> `bend_radius_mm`; r -> `radius_mm`; f -> `phase_rad`. Neither the plain sum of
//! both curvatures (up to 31 % high) nor the sum of vectors will do. Source: differential geometry of the
//! space curve, checked against derivatives at 40 digits (`H_bent_twisted`, independent solution).
//! Leaves out: sliding of filaments along the yarn; flat yarns, whose helix is not a circle.

use std::f64::consts::{PI, TAU};

/// Curvature of the filament in the straight yarn, 1/mm.
pub fn helix_curvature_per_mm(radius_mm: f64, twist_per_mm: f64) -> f64 {
    let w = TAU * twist_per_mm;
    radius_mm * w * w / (1.0 + (radius_mm * w).powi(2))
}

/// Curvature of the filament at one phase of the bent yarn, 1/mm; `bend_radius_mm` above `radius_mm`.
pub fn bent_helix_curvature_per_mm(
    radius_mm: f64,
    twist_per_mm: f64,
    bend_radius_mm: f64,
    phase_rad: f64,
) -> f64 {
    squared(radius_mm, twist_per_mm, bend_radius_mm, phase_rad).sqrt()
}

fn squared(radius_mm: f64, twist_per_mm: f64, bend_radius_mm: f64, phase_rad: f64) -> f64 {
    let (r, bend) = (radius_mm, bend_radius_mm);
    let (sine, cosine) = phase_rad.sin_cos();
    let w = TAU * twist_per_mm;
    let g = 1.0 + r / bend * cosine;
    let wound = r * r * w * w;
    let q = wound + g * g;
    let in_plane = (r * w * w + g / bend * cosine) / q;
    let across = sine / bend * (2.0 * wound + g * g);
    in_plane * in_plane + across * across / (q * q * q)
}

/// The largest curvature over all phases, 1/mm.
///
/// Accuracy 1e-9 relative: coarse search over half a turn, then the bracket narrowed by golden section (an error
/// of 1e-5 in the phase of a maximum is one of 1e-10 in its value).
pub fn bent_helix_peak_per_mm(radius_mm: f64, twist_per_mm: f64, bend_radius_mm: f64) -> f64 {
    const PHASES: usize = 16;
    const GOLDEN: f64 = 0.618_033_988_749_895;
    let at = |phase: f64| squared(radius_mm, twist_per_mm, bend_radius_mm, phase);
    let step = PI / PHASES as f64;
    let (_, best) = (0..=PHASES)
        .map(|index| index as f64 * step)
        .map(|phase| (at(phase), phase))
        .fold((f64::NEG_INFINITY, 0.0), |best, next| {
            if next.0 > best.0 { next } else { best }
        });
    let (mut low, mut high) = (best - step, best + step);
    let inner = |low: f64, high: f64| high - GOLDEN * (high - low);
    let outer = |low: f64, high: f64| low + GOLDEN * (high - low);
    let (mut a, mut b) = (inner(low, high), outer(low, high));
    let (mut at_a, mut at_b) = (at(a), at(b));
    while high - low > 1e-5 {
        if at_a > at_b {
            (high, b, at_b) = (b, a, at_a);
            a = inner(low, high);
            at_a = at(a);
        } else {
            (low, a, at_a) = (a, b, at_b);
            b = outer(low, high);
            at_b = at(b);
        }
    }
    at(0.5 * (low + high)).sqrt()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::yarn::helix_angle_rad;
    use proptest::prelude::*;

    /// Independent solutions (derivatives of the space curve at 40 digits): straight helix.
    #[test]
    fn straight_helix_matches_the_independent_solution() {
        for (r, tau, psi_deg, k) in [
            (0.1, 0.5, 17.440_594_490_51, 0.898_301_623_537_2),
            (0.05, 1.0, 17.440_594_490_51, 1.796_603_247_074),
            (0.2, 0.05, 3.595_273_779_868, 0.019_661_587_964_14),
            (0.15, 0.3, 15.787_896_975_12, 0.493_505_902_627_7),
        ] {
            assert!((helix_angle_rad(r, tau).to_degrees() / psi_deg - 1.0).abs() < 1e-11);
            assert!(
                (helix_curvature_per_mm(r, tau) / k - 1.0).abs() < 1e-11,
                "{r} {tau}"
            );
        }
    }

    /// Independent solutions, bent: largest, outside and inside value (mm, turns/mm, mm, 1/mm).
    #[test]
    fn bent_helix_matches_the_independent_solution() {
        for (r, tau, bend, largest, outside, inside) in [
            (
                0.1,
                0.05,
                5.0,
                0.205_369_965_753,
                0.205_369_965_753,
                0.193_606_116_224,
            ),
            (
                0.1,
                0.5,
                5.0,
                1.045_531_187_97,
                1.045_531_187_97,
                0.746_825_979_175,
            ),
            (
                0.1,
                0.5,
                1.0,
                1.594_686_902_02,
                1.594_686_902_02,
                0.095_698_050_720_1,
            ),
            (
                0.1,
                2.0,
                1.0,
                6.240_291_610_1,
                6.056_127_337_35,
                6.232_948_920_72,
            ),
            (
                0.2,
                0.1,
                2.0,
                0.515_498_304_224,
                0.513_102_679_722,
                0.449_318_289_825,
            ),
            (
                0.05,
                1.5,
                0.6,
                4.475_875_575_44,
                4.475_875_575_44,
                2.742_562_240_28,
            ),
            (
                0.15,
                0.02,
                3.0,
                0.348_115_539_23,
                0.319_505_834_733,
                0.348_115_539_23,
            ),
            (
                0.25,
                0.3,
                1.5,
                1.060_910_684_45,
                1.052_340_927_6,
                0.363_016_926_443,
            ),
        ] {
            let near = |ours: f64, theirs: f64| {
                assert!(
                    (ours / theirs - 1.0).abs() < 1e-9,
                    "{r} {tau} {bend}: {ours} {theirs}"
                );
            };
            near(bent_helix_peak_per_mm(r, tau, bend), largest);
            near(bent_helix_curvature_per_mm(r, tau, bend, 0.0), outside);
            near(bent_helix_curvature_per_mm(r, tau, bend, PI), inside);
        }
    }

    proptest! {
        /// No phase of a fine sweep lies above the peak.
        #[test]
        fn the_peak_is_the_largest_of_all_phases(
            r in 0.01..0.4f64, twist in 0.0..2.0f64, room in 1.02..40.0f64,
        ) {
            let bend = room * r;
            let peak = bent_helix_peak_per_mm(r, twist, bend);
            let swept = (0..=4000)
                .map(|index| bent_helix_curvature_per_mm(r, twist, bend, PI * f64::from(index) / 4000.0))
                .fold(0.0, f64::max);
            prop_assert!(peak >= swept * (1.0 - 1e-9), "{} {}", peak, swept);
            prop_assert!(peak <= swept * (1.0 + 1e-4));
        }

        /// Without twist the exact form is the circle through the filament.
        #[test]
        fn without_twist_it_is_a_circle(r in 0.0..0.4f64, bend in 0.5..9.0f64) {
            let outside = bent_helix_curvature_per_mm(r, 0.0, bend, 0.0);
            let inside = bent_helix_curvature_per_mm(r, 0.0, bend, PI);
            prop_assert!((outside * (bend + r) - 1.0).abs() < 1e-12);
            prop_assert!((inside * (bend - r) - 1.0).abs() < 1e-12);
        }
    }
}
