//! A yarn's outline as a yarn that crosses it obliquely meets it.
//!
//! Cut along the crossing yarn, at the angle b between both, a section of width w and thickness t is w/sin b wide and t
//! thick. A circle becomes an ellipse and an ellipse stays one, exactly. The arcs of a lens become arcs of ellipses and the
//! half rounds of a racetrack half ellipses: a wider lens and a wider racetrack stand in for them, with the same crest, tip
//! and width; exact at a right angle. Ends side by side on one carrier make a band: a racetrack as wide as all of them.
//!
//! Left out, on the safe side: a thread half a thickness o away from a crest of radius r turns, met at b, with the radius
//! (r + o)/sin² b (Euler 1760); cut first and then set off, as paths are made here, it is r/sin² b + o, which is less by
//! o (1/sin² b - 1). The shoulders of a band, and of an oblique racetrack, are taken as sharp as half its thickness.

use crate::yarn::{Outline, Shape};

/// The outline of `ends` yarns side by side, met at the angle `between_rad` (above 0, up to a right angle and beyond).
///
/// `None` where the angle is none: 0, or a straight one.
#[must_use]
pub fn met_obliquely(outline: &Outline, ends: u32, between_rad: f64) -> Option<Outline> {
    let width_mm = f64::from(ends) * outline.width_mm() / between_rad.sin();
    let shape = match (outline.shape(), ends) {
        (_, 2..) => Shape::Racetrack,
        (Shape::Round, _) if width_mm > outline.thickness_mm() => Shape::Ellipse,
        (shape, _) => shape,
    };
    Outline::new(shape, width_mm, outline.thickness_mm())
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::f64::consts::{FRAC_PI_2, FRAC_PI_3, PI};

    #[test]
    fn a_right_angle_leaves_the_outline() {
        for outline in [
            Outline::round(0.3).unwrap(),
            Outline::new(Shape::Lens, 1.0, 0.2).unwrap(),
            Outline::new(Shape::Racetrack, 1.0, 0.2).unwrap(),
        ] {
            assert_eq!(met_obliquely(&outline, 1, FRAC_PI_2), Some(outline));
        }
    }

    #[test]
    fn an_oblique_wire_is_an_ellipse_and_a_band_is_flat() {
        let wire = Outline::round(0.3).unwrap();
        let met = met_obliquely(&wire, 1, FRAC_PI_3).unwrap();
        assert_eq!(met.shape(), Shape::Ellipse);
        assert!((met.width_mm() - 0.6 / 3f64.sqrt()).abs() < 1e-12);
        assert_eq!(met.thickness_mm(), 0.3);
        let band = met_obliquely(&wire, 5, FRAC_PI_2).unwrap();
        assert_eq!((band.shape(), band.width_mm()), (Shape::Racetrack, 1.5));
        assert_eq!(met_obliquely(&wire, 1, 0.0), None);
        assert_eq!(met_obliquely(&wire, 0, 1.0), None);
        assert_eq!(met_obliquely(&wire, 1, 1.5 * PI), None);
    }
}
