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
//! are not small H/a becomes 2 sin(psi/2), psi = atan(H/a), and a the chord sqrt(a² + H²): exact for long
//! arms, and with the minimum of this and the outline's own curvature within -5 % and +3 % of the exact
//! elastica for all plain waves of the independent solutions (`tests/solutions.rs`; the -5 % are tight waves
//! with little pull, where the crest lifts off). Where the yarn floats on one side only half the turn is
//! made at this contact (psi/2 for psi): never low in those solutions by more than the same 5 %.
//!
//! Left out: friction, the pressure of other filaments, plastic set.

use crate::bend::Flanks;

/// Peak curvature over an edge, 1/mm. Zero pull gives zero: an unloaded rod need not follow the edge.
pub fn edge_peak_per_mm(pull_over_rigidity_per_mm2: f64, turn_rad: f64) -> f64 {
    2.0 * pull_over_rigidity_per_mm2.sqrt() * (turn_rad / 4.0).sin()
}

/// Peak curvature at a crown, 1/mm: `drop_mm` H from the crest to the inflection, `arm_mm` a along the cloth.
pub fn crown_peak_per_mm(
    pull_over_rigidity_per_mm2: f64,
    drop_mm: f64,
    arm_mm: f64,
    flanks: Flanks,
) -> f64 {
    let slope = drop_mm.atan2(arm_mm);
    let chord = drop_mm.hypot(arm_mm);
    let turned = match flanks {
        Flanks::Both => slope,
        Flanks::One => slope / 2.0,
    };
    let lambda = pull_over_rigidity_per_mm2.sqrt();
    let u = lambda * chord;
    // lambda u tanh u / (u - tanh u); below 0.05 its series 3/a (1 + u²/15) is exact to 1e-8.
    let stiffness_per_mm = if u < 0.05 {
        3.0 / chord * (1.0 + u * u / 15.0)
    } else {
        let tanh = u.tanh();
        lambda * u * tanh / (u - tanh)
    };
    2.0 * (turned / 2.0).sin() * stiffness_per_mm
}

#[cfg(test)]
mod tests {
    use super::*;

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
        let ours = crown_peak_per_mm(0.0, height / 2.0, spacing / 2.0, Flanks::Both);
        assert!((ours / half_wave - 1.0).abs() < 1e-5);
        // u = 1e4: the arm is 1e4 times the length over which the rod bends.
        let long = crown_peak_per_mm(4e8, 0.1, 0.5, Flanks::Both);
        let edge = edge_peak_per_mm(4e8, 2.0 * 0.1_f64.atan2(0.5));
        assert!((long / edge - 1.0).abs() < 2e-4, "{long} {edge}");
    }

    #[test]
    fn the_series_meets_the_closed_form() {
        let at = |u: f64| crown_peak_per_mm(u * u, 0.0006, 1.0, Flanks::Both);
        assert!((at(0.049_999) / at(0.050_001) - 1.0).abs() < 1e-6);
    }
}
