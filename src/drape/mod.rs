//! Laying the cloth over a tool: corners with a straight edge.
//!
//! A yarn that lies at the angle b to the edge of a corner of radius R takes the normal curvature
//!
//! ```text
//! k = sin² b/Rn                                        Euler 1760, normal curvature of a cylinder
//! Rn = R + (n - 1/2) t   outside, over a convex edge       n the layer counted from the tool
//! Rn = R - (n - 1/2) t   inside, into a concave edge       t the cloth's thickness
//! ```
//!
//! On the outer face of the cloth, away from the centre of the bend, it adds to the curvature of the crowns, which
//! point the same way; on the inner face it takes off, and where it is the stronger the yarn is bent to the other
//! side. Both faces are judged, at rest's pull. Left out: sliding of the yarns over the corner, the pull of laying, and
//! that the layers press on one another.

use crate::bend::{Bend, Easing, Meets, Stage, Stretch, SystemName};
use crate::spec::{Corner, Spec, Tool};
use crate::weave::{Cloth, ClothError, crowns};
use std::f64::consts::FRAC_PI_2;

/// Normal curvature of a yarn at `angle_rad` to the axis of a cylinder, 1/mm; `radius_mm` to the yarn's plane.
pub fn normal_curvature_per_mm(radius_mm: f64, angle_rad: f64) -> f64 {
    angle_rad.sin().powi(2) / radius_mm
}

/// Radius of the middle of the layer that a tool asks for, mm; not above zero where it has no room.
pub fn layer_radius_mm(tool: &Tool, thickness_mm: f64) -> f64 {
    let from_tool_mm = (f64::from(tool.layer) - 0.5) * thickness_mm;
    match tool.corner {
        Corner::Outside => tool.radius_mm + from_tool_mm,
        Corner::Inside => tool.radius_mm - from_tool_mm,
    }
}

/// A face of the cloth at a corner, with the word in its place and the sense in which the corner bends its crowns.
const FACES: [(&str, f64); 2] = [("outer", 1.0), ("inner", -1.0)];

/// Two bends for each system at each tool corner of the spec: the crowns of the outer face and of the inner.
///
/// # Errors
/// A layer has no room inside a corner.
pub fn corners(spec: &Spec, cloth: &Cloth) -> Result<Vec<Bend>, ClothError> {
    if spec.tools.is_empty() {
        return Ok(Vec::new());
    }
    let at_rest: Vec<Bend> = crowns(&spec.weave, cloth, cloth)
        .into_iter()
        .filter(|bend| bend.stage == Stage::Rest)
        .collect();
    let mut bends = Vec::with_capacity(spec.tools.len() * at_rest.len() * FACES.len());
    for tool in &spec.tools {
        let radius_mm = layer_radius_mm(tool, cloth.thickness_mm);
        if radius_mm <= 0.0 {
            return Err(ClothError::Corner {
                name: tool.name.clone(),
                layer: tool.layer,
                thickness_mm: cloth.thickness_mm,
                radius_mm: tool.radius_mm,
            });
        }
        for face in FACES {
            bends.extend(
                at_rest
                    .iter()
                    .map(|crown| corner(tool, radius_mm, crown, face)),
            );
        }
    }
    Ok(bends)
}

fn corner(tool: &Tool, radius_mm: f64, crown: &Bend, (face, sense): (&str, f64)) -> Bend {
    // An edge of unknown direction may lie across either system.
    let angle = match (tool.bend_axis_rad, crown.system) {
        (None, _) => FRAC_PI_2,
        (Some(axis), SystemName::Warp) => axis,
        (Some(axis), SystemName::Weft) => FRAC_PI_2 - axis,
    };
    let mut bend = crown.clone();
    // The straight pieces between the crowns of a taut yarn are bent by the corner too.
    if let Meets::TimesPerMetre(times) = bend.meets {
        let crowned: f64 = bend.profile.iter().map(|stretch| stretch.length_mm).sum();
        let straight_mm = 1e3 / times - crowned;
        if straight_mm > 1e-6 * crowned {
            bend.profile.push(Stretch {
                length_mm: straight_mm,
                lies_on_mm: None,
                easing: Easing::Held,
            });
        }
    }
    bend.place = format!("{}, {face} {} crown", tool.name, crown.system.word()).into();
    bend.stage = Stage::Draping;
    bend.added_per_mm = sense * normal_curvature_per_mm(radius_mm, angle);
    bend.governed_by = tool.radius_span.clone();
    // Every change of side has a half crown on either face: each face has half of them.
    if let Meets::TimesPerMetre(times) = &mut bend.meets {
        *times *= 0.5;
    }
    bend
}

/// Whether a place is one of a tool's corner.
pub fn is_at(tool: &Tool, place: &str) -> bool {
    let rest = place.strip_prefix(tool.name.as_str()).unwrap_or_default();
    FACES.iter().any(|(face, _)| {
        rest.strip_prefix(", ")
            .is_some_and(|rest| rest.starts_with(face))
    })
}

#[cfg(test)]
mod tests {
    use super::*;

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

    /// By hand: R 6 mm, cloth 0.4 mm, third layer: 6 + 2.5 x 0.4 = 7 mm outside, 5 mm inside.
    #[test]
    fn a_layer_lies_beyond_those_before_it() {
        let tool = |corner, layer| Tool {
            name: "edge".into(),
            radius_mm: 6.0,
            corner,
            layer,
            bend_axis_rad: None,
            radius_span: 0..0,
        };
        let radius = |corner, layer| layer_radius_mm(&tool(corner, layer), 0.4);
        assert!((radius(Corner::Outside, 3) - 7.0).abs() < 1e-12);
        assert!((radius(Corner::Inside, 3) - 5.0).abs() < 1e-12);
        assert!(
            (radius(Corner::Inside, 15) - 0.2).abs() < 1e-12 && radius(Corner::Inside, 16) < 0.0
        );
        assert!(is_at(&tool(Corner::Inside, 1), "edge, inner warp crown"));
        assert!(!is_at(
            &tool(Corner::Inside, 1),
            "edge of the mould, outer warp crown"
        ));
    }
}
