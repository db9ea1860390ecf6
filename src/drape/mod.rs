//! Laying the cloth over a tool: corners with a straight edge.
//!
//! A yarn that lies at the angle b to the edge of a corner of radius R takes the normal curvature
//!
//! ```text
//! k = sin² b/(R + half the cloth's thickness)          Euler 1760, normal curvature of a cylinder
//! ```
//!
//! On the outer face of the lay it adds to the curvature of the crowns, which point the same way; on the
//! inner face it takes off. The outer face is judged, at rest's pull. Left out: sliding of the yarns over
//! the corner, more than one layer, the pull of laying.

use crate::bend::{Bend, Stage, SystemName};
use crate::spec::{Spec, Tool};
use crate::weave::{Cloth, crowns};
use std::f64::consts::FRAC_PI_2;

/// Normal curvature of a yarn at `angle_rad` to the axis of a cylinder, 1/mm; `radius_mm` to the yarn's plane.
pub fn normal_curvature_per_mm(radius_mm: f64, angle_rad: f64) -> f64 {
    angle_rad.sin().powi(2) / radius_mm
}

/// One bend for each system at each tool corner of the spec.
pub fn corners(spec: &Spec, cloth: &Cloth) -> Vec<Bend> {
    if spec.tools.is_empty() {
        return Vec::new();
    }
    let at_rest: Vec<Bend> = crowns(&spec.weave, cloth, cloth)
        .into_iter()
        .filter(|bend| bend.stage == Stage::Rest)
        .collect();
    spec.tools
        .iter()
        .flat_map(|tool| at_rest.iter().map(|crown| corner(tool, crown, cloth)))
        .collect()
}

fn corner(tool: &Tool, crown: &Bend, cloth: &Cloth) -> Bend {
    // An edge of unknown direction may lie across either system.
    let angle = match (tool.bend_axis_rad, crown.system) {
        (None, _) => FRAC_PI_2,
        (Some(axis), SystemName::Warp) => axis,
        (Some(axis), SystemName::Weft) => FRAC_PI_2 - axis,
    };
    let mut bend = crown.clone();
    bend.place = format!("{}, outer {} crown", tool.name, crown.system.word()).into();
    bend.stage = Stage::Draping;
    bend.added_per_mm = normal_curvature_per_mm(tool.radius_mm + 0.5 * cloth.thickness_mm, angle);
    bend.governed_by = tool.radius_span.clone();
    bend
}

#[cfg(test)]
mod tests {
    use super::normal_curvature_per_mm;

    /// Helix on a cylinder, derivatives at 40 digits (independent solution): radius mm, angle deg, curvature.
    #[test]
    fn matches_the_independent_solution() {
        for (radius, angle_deg, curvature) in [
            (10.0, 90.0_f64, 0.1),
            (25.0, 45.0, 0.02),
            (5.0, 30.0, 0.05),
            (40.0, 15.0, 0.001_674_682_452_695),
        ] {
            let ours = normal_curvature_per_mm(radius, angle_deg.to_radians());
            assert!((ours / curvature - 1.0).abs() < 1e-11, "{ours} {curvature}");
        }
    }
}
