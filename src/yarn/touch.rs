//! Where a tight thread touches an outline, and where it leaves it.
//!
//! A line that touches a convex outline is known by its slope angle a alone. With the outline's centre as
//! origin and the normal (sin a, cos a) pointing away from it, the line is
//!
//! ```text
//! x sin a + z cos a = H(a),        H: support function
//! ```
//!
//! the point of contact lies H'(a) along the line, and the length of outline between the crest (a = 0) and
//! that point is the integral of the radius of curvature, H + H''. For a circular arc of radius r about
//! (cx, cz): H = cx sin a + cz cos a + r. Round, lens and racetrack are made of such arcs; a tip is an arc
//! of radius zero. The ellipse has H = sqrt(A² sin² a + B² cos² a) with half axes A, B, and its arc length is
//! the incomplete elliptic integral of the second kind.
//!
//! Source: support functions, any text on convex geometry (Bonnesen and Fenchel 1934, from memory).

use super::outline::{Outline, Shape, lens_arc};
use std::f64::consts::FRAC_PI_2;

/// How a tangent of given slope touches an outline; lengths in mm.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Touch {
    /// Distance of the line from the outline's centre, H(a).
    pub distance_mm: f64,
    /// Distance of the contact point from the foot of that normal, along the line, H'(a).
    pub along_mm: f64,
    /// Length of outline from the crest to the contact point.
    pub arc_mm: f64,
    /// Radius of curvature there; zero at a tip.
    pub radius_mm: f64,
}

/// A circular arc of an outline: `until_rad` is the slope at which it ends.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Arc {
    /// Slope at the arc's end, rad.
    pub until_rad: f64,
    /// Centre, across, mm.
    pub centre_x_mm: f64,
    /// Centre, up, mm.
    pub centre_z_mm: f64,
    /// Radius, mm; zero for a tip.
    pub radius_mm: f64,
}

impl Outline {
    /// The circular arcs from the crest to the tip, or `None` for an ellipse that is not round.
    pub fn arcs(&self) -> Option<[Arc; 2]> {
        let (w, t) = (self.width_mm, self.thickness_mm);
        let whole = |centre_x_mm: f64, radius_mm: f64| {
            let arc = Arc {
                until_rad: FRAC_PI_2,
                centre_x_mm,
                centre_z_mm: 0.0,
                radius_mm,
            };
            [arc, arc]
        };
        match self.shape {
            Shape::Ellipse if w > t => None,
            Shape::Round | Shape::Ellipse => Some(whole(0.0, t / 2.0)),
            Shape::Racetrack => Some(whole((w - t) / 2.0, t / 2.0)),
            Shape::Lens => {
                let (radius_mm, alpha) = lens_arc(w, t);
                Some([
                    Arc {
                        until_rad: alpha,
                        centre_x_mm: 0.0,
                        centre_z_mm: t / 2.0 - radius_mm,
                        radius_mm,
                    },
                    Arc {
                        until_rad: FRAC_PI_2,
                        centre_x_mm: w / 2.0,
                        centre_z_mm: 0.0,
                        radius_mm: 0.0,
                    },
                ])
            }
        }
    }

    /// How a tangent of slope `slope_rad` (0 at the crest, pi/2 at the tip) touches the outline.
    pub fn touch(&self, slope_rad: f64) -> Touch {
        let (sine, cosine) = slope_rad.sin_cos();
        match self.arcs() {
            Some(arcs) => {
                let tip = slope_rad > arcs[0].until_rad;
                let arc = arcs[usize::from(tip)];
                let flat_mm = if self.shape == Shape::Racetrack {
                    arc.centre_x_mm
                } else {
                    0.0
                };
                let arc_mm = if tip {
                    arcs[0].radius_mm * arcs[0].until_rad
                } else {
                    flat_mm + arc.radius_mm * slope_rad
                };
                Touch {
                    distance_mm: arc.centre_x_mm * sine + arc.centre_z_mm * cosine + arc.radius_mm,
                    along_mm: arc.centre_x_mm * cosine - arc.centre_z_mm * sine,
                    arc_mm,
                    radius_mm: arc.radius_mm,
                }
            }
            None => {
                let (a, b) = (self.width_mm / 2.0, self.thickness_mm / 2.0);
                let distance_mm = (a * a * sine * sine + b * b * cosine * cosine).sqrt();
                // Eccentric angle of the contact point, counted from the crest: tan u = (A/B) tan a.
                let eccentric = (a * sine).atan2(b * cosine);
                let modulus = 1.0 - (b / a) * (b / a);
                // In range for every ellipse, so the checked form only guards against nothing.
                let arc_mm = a * ellip::ellipeinc(eccentric, modulus).unwrap_or(eccentric);
                Touch {
                    distance_mm,
                    along_mm: (a * a - b * b) * sine * cosine / distance_mm,
                    arc_mm,
                    radius_mm: (a * b).powi(2) / distance_mm.powi(3),
                }
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// H'(a) by central difference and the arc length by adding up chords: the definitions, not the forms.
    #[test]
    fn touching_follows_from_the_support_function() {
        for outline in [
            Outline::round(0.3).unwrap(),
            Outline::new(Shape::Ellipse, 1.2, 0.4).unwrap(),
            Outline::new(Shape::Lens, 1.2, 0.3).unwrap(),
            Outline::new(Shape::Racetrack, 1.2, 0.3).unwrap(),
        ] {
            for slope in [0.05, 0.3, 0.8, 1.4] {
                let (touch, step) = (outline.touch(slope), 1e-6);
                let slope_of_distance = (outline.touch(slope + step).distance_mm
                    - outline.touch(slope - step).distance_mm)
                    / (2.0 * step);
                assert!(
                    (slope_of_distance - touch.along_mm).abs() < 1e-8,
                    "{outline:?} {slope}"
                );
                // Contact point from distance and length along the line, as seen from the crest.
                let point = |a: f64| {
                    let touch = outline.touch(a);
                    let (s, c) = a.sin_cos();
                    (
                        touch.distance_mm * s + touch.along_mm * c,
                        touch.distance_mm * c - touch.along_mm * s,
                    )
                };
                let mut length = outline.touch(0.0).arc_mm;
                let steps = 20_000;
                for index in 0..steps {
                    let (from, to) = (
                        point(slope * f64::from(index) / f64::from(steps)),
                        point(slope * f64::from(index + 1) / f64::from(steps)),
                    );
                    if index > 0 || outline.shape != Shape::Racetrack {
                        length += (to.0 - from.0).hypot(to.1 - from.1);
                    }
                }
                let missing = if outline.shape == Shape::Racetrack {
                    outline.touch(0.0).radius_mm * slope / f64::from(steps)
                } else {
                    0.0
                };
                assert!(
                    (length + missing - touch.arc_mm).abs() < 1e-7,
                    "{outline:?} {slope}"
                );
            }
        }
    }
}
