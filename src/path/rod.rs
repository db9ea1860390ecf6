//! Peak curvature of a thin elastic rod under pull: over an edge and at the crown of a wave.
//!
//! Rigidity B, pull T. Only their ratio counts: `pull_over_rigidity_per_mm2` = T/B = lambda².
//!
//! **Over an edge**, long straight arms, total turn theta (Love, A Treatise on the Mathematical Theory of
//! Elasticity, the elastica; from memory for the article):
//!
//! ```text
//! k_max = 2 lambda sin(theta/4)
//! ```
//!
//! Over a guide of radius R the rod lies on it, at 1/R, only where that is the smaller.
//!
//! **At a crown** the arms are short: a yarn in cloth has an inflection half a spacing away, at a drop H
//! (half of the wave height). The beam under pull that leaves the crest level and passes the inflection has
//!
//! ```text
//! k_max = (H/a) lambda u tanh u / (u - tanh u),     u = lambda a          small slopes
//! ```
//!
//! which is 3 H/a² without pull (clamped half wave: 6 h/p²) and the edge law with long arms. For slopes that
//! are not small H/a becomes 2 sin(psi/2), psi = atan(H/a), and a the chord sqrt(a² + H²). With the minimum of
//! this and the outline's own curvature it stands within -5.3 % and +2.5 % of the exact elastica for plain waves
//! of round yarns (the -5.3 % are tight waves with little pull, where the crest lifts off) and is never lower
//! than that for floats. Where the yarn floats on one side only half the turn is made at this contact.
//!
//! **At a shoulder** a taut yarn turns down beside the tip of a wide section: from the slope b, with which the
//! outline comes there, to the slope a of the straight piece, half of which is c long; x is the distance back to
//! the crest. A beam that is level at the crest, rests on the shoulder and passes the inflection has
//!
//! ```text
//! k_max = 2 sin(a/2) lambda/(tanh(lambda x) + coth u - 1/u),          u = lambda c      free of the section behind
//! k_max = 2 sin((a - b)/2) lambda/(coth u - 1/u)                                        lying on it with slope b
//! ```
//!
//! of which the smaller holds. The contact is put where the taut yarn lifts off, which makes the arms short: against
//! constrained elastica by finite elements -0.8 % to +43 % (racetracks and lenses, 13 cases), on the safe side.
//!
//! **Past yield** (ductile fibres, linear hardening E_t behind the yield stress s_y): M = M_p + E_t I k with
//! M_p = s_y d³/6. Over an edge E_t stands for E. At a crown without pull the part f = k/(k + M_p/(E_t I)) of the
//! arm yields, and 2 sin(psi/2) = k c (f/2)(1 - f/3). With pull k² = k_crown² + k_edge² + (2/3) k_crown k_edge, which
//! bounds the elastic crown law from above. An approximation: hardening of wire is not linear.
//!
//! Left out: friction, the pressure of other filaments.

use crate::bend::{Crown, Flanks, Shoulder};
use crate::root::rising_root;
use std::f64::consts::{PI, TAU};

/// Peak curvature over an edge, 1/mm. Zero pull gives zero: an unloaded rod need not follow the edge.
///
/// A turn of more than once round counts as once round: the loop of a pulled rod has 2 lambda.
pub fn edge_peak_per_mm(pull_over_rigidity_per_mm2: f64, turn_rad: f64) -> f64 {
    2.0 * pull_over_rigidity_per_mm2.sqrt() * (turn_rad.clamp(0.0, TAU) / 4.0).sin()
}

impl Crown {
    /// Twice the sine of half the slope turned here, and the chord to the inflection, mm.
    fn turned_and_chord(&self) -> (f64, f64) {
        let slope = self.drop_mm.atan2(self.arm_mm);
        let turned = match self.flanks {
            Flanks::Both => slope,
            Flanks::One => slope / 2.0,
        };
        (2.0 * (turned / 2.0).sin(), self.drop_mm.hypot(self.arm_mm))
    }

    /// Peak curvature of an elastic rod at the crown, 1/mm.
    pub fn peak_per_mm(&self, pull_over_rigidity_per_mm2: f64) -> f64 {
        let (turned, chord) = self.turned_and_chord();
        let lambda = pull_over_rigidity_per_mm2.sqrt();
        turned * lambda_over_langevin(lambda, chord)
    }

    /// Peak curvature of a round wire past yield, 1/mm; see [`Hardening`].
    pub fn hardened_peak_per_mm(&self, pull_n: f64, wire: &Hardening) -> f64 {
        let (turned, chord) = self.turned_and_chord();
        let plastic = wire.plastic_per_mm();
        let slope = |k: f64| {
            let share = k / (k + plastic);
            k * chord * 0.5 * share * (1.0 - share / 3.0)
        };
        // The elastic beam, all of it bending, is the least; doubled until it is more than enough.
        let mut high = 3.0 * turned / chord;
        while slope(high) < turned {
            high *= 2.0;
        }
        let crown = rising_root(|k| slope(k) - turned, 0.0, high, 1e-10 * high);
        let edge = (pull_n / wire.rigidity_n_mm2()).sqrt() * turned;
        (crown * crown + edge * edge + 2.0 / 3.0 * crown * edge).sqrt()
    }
}

impl Shoulder {
    /// Peak curvature of an elastic rod at the shoulder, 1/mm; infinite where no straight piece is left.
    pub fn peak_per_mm(&self, pull_over_rigidity_per_mm2: f64) -> f64 {
        if self.half_straight_mm <= 0.0 {
            return f64::INFINITY;
        }
        let lambda = pull_over_rigidity_per_mm2.sqrt();
        // lambda/(coth u - 1/u), over an arm of half the straight piece.
        let arm_per_mm = lambda_over_langevin(lambda, self.half_straight_mm);
        let back_per_mm = if lambda * self.back_mm < 1e-6 {
            1.0 / self.back_mm
        } else {
            lambda / (lambda * self.back_mm).tanh()
        };
        let free = 2.0 * (self.slope_rad / 2.0).sin() / (1.0 / back_per_mm + 1.0 / arm_per_mm);
        let lying = 2.0 * ((self.slope_rad - self.start_rad) / 2.0).sin() * arm_per_mm;
        free.min(lying)
    }
}

/// lambda/(coth u - 1/u), u = lambda c: the stiffness of an arm of length c; 3/c without pull.
fn lambda_over_langevin(lambda: f64, arm_mm: f64) -> f64 {
    let u = lambda * arm_mm;
    // Below 0.05 the series 3/c (1 + u²/15) is exact to 1e-8.
    if u < 0.05 {
        3.0 / arm_mm * (1.0 + u * u / 15.0)
    } else {
        lambda / (1.0 / u.tanh() - 1.0 / u)
    }
}

/// A round ductile wire that hardens linearly behind its yield stress.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Hardening {
    /// Wire diameter, mm.
    pub diameter_mm: f64,
    /// Yield stress, MPa.
    pub yield_mpa: f64,
    /// Slope of the true stress behind it, MPa.
    pub modulus_mpa: f64,
}

impl Hardening {
    /// E_t I, N mm2.
    pub fn rigidity_n_mm2(&self) -> f64 {
        self.modulus_mpa * PI * self.diameter_mm.powi(4) / 64.0
    }

    /// M_p/(E_t I), 1/mm: the curvature at which hardening carries as much as yielding.
    fn plastic_per_mm(&self) -> f64 {
        self.yield_mpa * self.diameter_mm.powi(3) / 6.0 / self.rigidity_n_mm2()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn crown(drop_mm: f64, arm_mm: f64) -> Crown {
        Crown {
            drop_mm,
            arm_mm,
            flanks: Flanks::Both,
        }
    }

    /// Boundary-value problem of the exact rod, solved independently (relative difference 1e-15).
    #[test]
    fn edges_match_the_independent_solution() {
        for (rigidity, pull, turn_deg, peak) in [
            (0.01, 1.0, 30.0_f64, 2.610_523_844_401),
            (0.002, 2.0, 90.0, 24.203_025_381_69),
        ] {
            let ours = edge_peak_per_mm(pull / rigidity, turn_deg.to_radians());
            assert!((ours / peak - 1.0).abs() < 1e-12);
        }
    }

    /// A free filament's bending strain over a sharp edge is 4 sqrt(axial strain) sin(theta/4), whatever its
    /// diameter: d k/2 with T/B = 16 strain/d².
    #[test]
    fn over_a_sharp_edge_the_pull_alone_decides() {
        for diameter_mm in [0.005_f64, 0.012, 0.14] {
            let axial_strain = 0.002_f64;
            let peak = edge_peak_per_mm(16.0 * axial_strain / diameter_mm.powi(2), 1.2);
            let strain = diameter_mm / 2.0 * peak;
            assert!((strain - 4.0 * axial_strain.sqrt() * 0.3_f64.sin()).abs() < 1e-12);
        }
    }

    #[test]
    fn a_crown_without_pull_is_the_clamped_half_wave_and_with_long_arms_the_edge() {
        let (height, spacing) = (0.001, 1.0);
        let half_wave = 6.0 * height / (spacing * spacing);
        let ours = crown(height / 2.0, spacing / 2.0).peak_per_mm(0.0);
        assert!((ours / half_wave - 1.0).abs() < 1e-5);
        // u = 1e4: the arm is 1e4 times the length over which the rod bends.
        let long = crown(0.1, 0.5).peak_per_mm(4e8);
        let edge = edge_peak_per_mm(4e8, 2.0 * 0.1_f64.atan2(0.5));
        assert!((long / edge - 1.0).abs() < 2e-4, "{long} {edge}");
    }

    #[test]
    fn the_series_meets_the_closed_form() {
        let at = |u: f64| crown(0.0006, 1.0).peak_per_mm(u * u);
        assert!((at(0.049_999) / at(0.050_001) - 1.0).abs() < 1e-6);
    }

    /// Constrained elastica by finite elements (independent, Python): racetrack 0.9 of the spacing wide and 0.1 thick,
    /// yarn 0.1 thick, equal heights, spacing 1. Taut: slope 0.6435, half straight 0.05, lift-off 0.46.
    #[test]
    fn the_shoulder_law_stands_on_the_safe_side_of_finite_elements() {
        let shoulder = Shoulder {
            back_mm: 0.46,
            start_rad: 0.0,
            slope_rad: 0.643_501_108_8,
            half_straight_mm: 0.05,
        };
        for (lambda, exact) in [(30.0, 10.08), (12.0, 5.82), (4.0, 2.44), (1.5, 1.41)] {
            let ours = shoulder.peak_per_mm(lambda * lambda).min(10.0);
            let error = ours / exact - 1.0;
            assert!((-0.01..0.10).contains(&error), "{lambda} {ours} {exact}");
        }
        let none_left = Shoulder {
            half_straight_mm: 0.0,
            ..shoulder
        };
        assert_eq!(none_left.peak_per_mm(1.0), f64::INFINITY);
    }

    #[test]
    fn more_turn_never_bends_less_and_once_round_is_the_loop() {
        let at = |turn_deg: f64| edge_peak_per_mm(100.0, turn_deg.to_radians());
        assert!(at(10.0) < at(90.0) && at(90.0) < at(180.0) && at(180.0) < at(359.0));
        assert_eq!(at(720.0), 20.0);
    }

    /// Without yielding (M_p = 0) the hardened crown is the elastic one with E_t; the bound on pull lies above it.
    #[test]
    fn the_hardened_crown_bounds_the_elastic_one_from_above() {
        let wire = Hardening {
            diameter_mm: 0.1,
            yield_mpa: 1e-9,
            modulus_mpa: 2000.0,
        };
        for pull in [0.0, 0.01, 0.1, 1.0, 10.0] {
            let elastic = crown(0.05, 0.25).peak_per_mm(pull / wire.rigidity_n_mm2());
            let ours = crown(0.05, 0.25).hardened_peak_per_mm(pull, &wire);
            assert!(
                ours >= elastic * (1.0 - 1e-6) && ours < 1.12 * elastic,
                "{pull} {ours} {elastic}"
            );
        }
        // With a yield stress the bend gathers at the crest.
        let soft = Hardening {
            yield_mpa: 250.0,
            ..wire
        };
        let (gathered, spread) = (
            crown(0.05, 0.25).hardened_peak_per_mm(0.0, &soft),
            crown(0.05, 0.25).peak_per_mm(0.0),
        );
        assert!(
            gathered > 1.3 * spread && gathered < 3.0 * spread,
            "{gathered} {spread}"
        );
    }
}
