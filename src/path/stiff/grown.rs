//! The outline of a crossed section, grown by half of the yarn's own thickness: what the yarn's centreline may not enter.
//!
//! The upper half is followed from the crest (mark 0) to the right (mark above 0) and to the left (below 0). The outline
//! is convex and made of flats and arcs (round, lens, racetrack; the grown tip of a lens is an arc of the yarn's half
//! thickness), or it is parallel to an ellipse. A mark u moves on with both the turn a and the length s:
//!
//! ```text
//! arcs and flats     u = a + s/scale            ellipse     u = a
//! ```
//!
//! so that neither a flat, which does not turn, nor a tip, which is short, hides a contact; scale is half of the whole
//! width. a is the angle from level,
//! positive where the outline falls to the right.

use crate::quadrature::places;
use crate::yarn::{Outline, Shape};
use std::f64::consts::FRAC_PI_2;

/// A place on the grown outline.
#[derive(Debug, Clone, Copy)]
pub(super) struct Spot {
    /// Across, from the section's centre, mm.
    pub x: f64,
    /// Up, mm.
    pub z: f64,
    /// Angle from level, rad, positive to the right of the crest.
    pub angle: f64,
    /// Curvature of the outline, 1/mm, never below zero.
    pub curvature: f64,
    /// Change of the angle with the mark.
    pub angle_by: f64,
    /// Change of the length with the mark, mm.
    pub length_by: f64,
    /// Change of the curvature with the mark, 1/mm.
    pub curvature_by: f64,
}

#[derive(Debug, Clone, Copy)]
struct Part {
    /// Mark at which it ends.
    until: f64,
    /// Angle and mark at which it begins.
    angle: f64,
    mark: f64,
    /// Radius, mm; infinite for a flat.
    radius: f64,
    /// Centre of the arc; for a flat its left end.
    centre: (f64, f64),
}

#[derive(Debug, Clone, Copy)]
enum Form {
    /// Parts of the right half from the crest outwards; the last goes on beyond the tip.
    Parts([Part; 2]),
    /// Half axes of the ellipse and the distance from it.
    Ellipse { a: f64, b: f64, off: f64 },
}

/// A grown outline.
#[derive(Debug, Clone, Copy)]
pub(super) struct Grown {
    form: Form,
    scale: f64,
    /// Half of its whole height, mm: distance of the centres at a crossing.
    pub reach: f64,
    /// Half of its width, mm.
    pub half_width: f64,
}

impl Grown {
    pub(super) fn new(section: &Outline, half_thickness: f64) -> Self {
        let reach = 0.5 * section.thickness_mm() + half_thickness;
        let half_width = 0.5 * section.width_mm() + half_thickness;
        let scale = half_width;
        let arc = |mark: f64, angle: f64, until: f64, radius: f64, centre: (f64, f64)| Part {
            until: mark + (until - angle) * (1.0 + radius / scale),
            angle,
            mark,
            radius,
            centre,
        };
        let form = match section.arcs() {
            None => Form::Ellipse {
                a: 0.5 * section.width_mm(),
                b: 0.5 * section.thickness_mm(),
                off: half_thickness,
            },
            Some([first, second]) => {
                let radius = first.radius_mm + half_thickness;
                let centre = (first.centre_x_mm, first.centre_z_mm);
                match section.shape() {
                    Shape::Racetrack if first.centre_x_mm > 0.0 => {
                        let until = first.centre_x_mm / scale;
                        let flat = Part {
                            until,
                            angle: 0.0,
                            mark: 0.0,
                            radius: f64::INFINITY,
                            centre: (0.0, reach),
                        };
                        Form::Parts([flat, arc(until, 0.0, FRAC_PI_2, radius, centre)])
                    }
                    Shape::Lens => {
                        let main = arc(0.0, 0.0, first.until_rad, radius, centre);
                        let tip = arc(
                            main.until,
                            first.until_rad,
                            FRAC_PI_2,
                            second.radius_mm + half_thickness,
                            (second.centre_x_mm, second.centre_z_mm),
                        );
                        Form::Parts([main, tip])
                    }
                    _ => {
                        let whole = arc(0.0, 0.0, FRAC_PI_2, radius, centre);
                        Form::Parts([whole, whole])
                    }
                }
            }
        };
        Self {
            form,
            scale,
            reach,
            half_width,
        }
    }

    /// The place at a mark.
    pub(super) fn at(&self, mark: f64) -> Spot {
        let side = if mark < 0.0 { -1.0 } else { 1.0 };
        let spot = self.right(mark.abs());
        Spot {
            x: side * spot.x,
            angle: side * spot.angle,
            curvature_by: side * spot.curvature_by,
            ..spot
        }
    }

    fn right(&self, mark: f64) -> Spot {
        match &self.form {
            Form::Parts(parts) => {
                let part = if mark <= parts[0].until {
                    &parts[0]
                } else {
                    &parts[1]
                };
                let on = mark - part.mark;
                if part.radius.is_infinite() {
                    return Spot {
                        x: on * self.scale,
                        z: part.centre.1,
                        angle: 0.0,
                        curvature: 0.0,
                        angle_by: 0.0,
                        length_by: self.scale,
                        curvature_by: 0.0,
                    };
                }
                let angle_by = 1.0 / (1.0 + part.radius / self.scale);
                let angle = part.angle + on * angle_by;
                let (sine, cosine) = angle.sin_cos();
                Spot {
                    x: part.centre.0 + part.radius * sine,
                    z: part.centre.1 + part.radius * cosine,
                    angle,
                    curvature: 1.0 / part.radius,
                    angle_by,
                    length_by: part.radius * angle_by,
                    curvature_by: 0.0,
                }
            }
            Form::Ellipse { a, b, off } => {
                let (sine, cosine) = mark.sin_cos();
                let support = (a * a * sine * sine + b * b * cosine * cosine).sqrt();
                let along = (a * a - b * b) * sine * cosine / support;
                let ellipse_radius = (a * b).powi(2) / support.powi(3);
                let radius = ellipse_radius + off;
                Spot {
                    x: (support + off) * sine + along * cosine,
                    z: (support + off) * cosine - along * sine,
                    angle: mark,
                    curvature: 1.0 / radius,
                    angle_by: 1.0,
                    length_by: radius,
                    curvature_by: 3.0 * ellipse_radius * along / support / (radius * radius),
                }
            }
        }
    }

    /// The mark at an angle; on a flat its end.
    pub(super) fn mark_at(&self, angle: f64) -> f64 {
        let side = angle.signum();
        let angle = angle.abs();
        let Form::Parts(parts) = &self.form else {
            return side * angle;
        };
        let last_of_first = parts[1].angle.max(0.0);
        let part = if parts[0].radius.is_finite() && angle <= last_of_first
            || parts[0].mark == parts[1].mark
        {
            &parts[0]
        } else {
            &parts[1]
        };
        side * (part.mark + (angle - part.angle) * (1.0 + part.radius / self.scale))
    }

    /// The largest mark a contact may have: past the tip by a little more than level turned upright.
    pub(super) fn last_mark(&self) -> f64 {
        self.mark_at(FRAC_PI_2 + 0.6)
    }

    /// The mark beyond which the outline's curvature jumps, on the right half; `None` where it does not.
    pub(super) fn jump(&self) -> Option<f64> {
        match &self.form {
            Form::Parts(parts) if parts[0].mark != parts[1].mark => Some(parts[0].until),
            _ => None,
        }
    }

    /// The outline's largest curvature, 1/mm.
    pub(super) fn sharpest(&self) -> f64 {
        match &self.form {
            Form::Parts(parts) => parts
                .iter()
                .map(|part| 1.0 / part.radius)
                .fold(0.0, f64::max),
            Form::Ellipse { a, b, off } => 1.0 / (b * b / a + off),
        }
    }

    /// Whether the outline's curvature changes along it without jumps.
    pub(super) fn is_ellipse(&self) -> bool {
        matches!(self.form, Form::Ellipse { .. })
    }

    /// Distance from the upper half of the outline, mm, below zero inside; and the mark nearest.
    pub(super) fn distance(&self, x: f64, z: f64) -> (f64, f64) {
        let side = if x < 0.0 { -1.0 } else { 1.0 };
        let x = x.abs();
        let (distance, mark) = match &self.form {
            Form::Parts(parts) => {
                let on = |part: &Part| {
                    if part.radius.is_infinite() {
                        return (z - part.centre.1, part.mark + x / self.scale);
                    }
                    let (dx, dz) = (x - part.centre.0, z - part.centre.1);
                    let angle = dx.atan2(dz);
                    let mark = part.mark + (angle - part.angle) * (1.0 + part.radius / self.scale);
                    (dx.hypot(dz) - part.radius, mark)
                };
                let first = on(&parts[0]);
                if first.1 <= parts[0].until {
                    first
                } else {
                    on(&parts[1])
                }
            }
            Form::Ellipse { a, b, off } => {
                let mut angle = (x * b * b).atan2(z * a * a).max(0.0);
                // Newton on (P - C(angle)) along the tangent; the start is that of a point on the ellipse.
                for _ in 0..8 {
                    let spot = self.right(angle);
                    let (sine, cosine) = angle.sin_cos();
                    let (dx, dz) = (x - spot.x, z - spot.z);
                    let along = dx * cosine - dz * sine;
                    let out = dx * sine + dz * cosine;
                    let step = along / (spot.length_by + out).max(1e-3 * (b + off));
                    angle = (angle + step).clamp(0.0, 3.0);
                    if step.abs() < 1e-10 {
                        break;
                    }
                }
                let _ = a;
                let spot = self.right(angle);
                let (sine, cosine) = angle.sin_cos();
                ((x - spot.x) * sine + (z - spot.z) * cosine, angle)
            }
        };
        (distance, side * mark)
    }
}

impl Grown {
    /// Length between two marks and the integral of the squared curvature over it.
    pub(super) fn along(&self, from: f64, to: f64) -> (f64, f64) {
        let mut bounds = vec![from];
        if let Some(jump) = self.jump() {
            bounds.extend([-jump, jump].into_iter().filter(|j| from < *j && *j < to));
        }
        if self.is_ellipse() {
            // The arc length of a flat ellipse is far from a polynomial: 1e-12 takes short pieces.
            bounds.extend((1..16).map(|i| from + (to - from) * f64::from(i) / 16.0));
        }
        bounds.push(to);
        let (mut length, mut squared) = (0.0, 0.0);
        for pair in bounds.windows(2) {
            for (mark, weight) in places(pair[0], pair[1], 1) {
                let spot = self.at(mark);
                length += weight * spot.length_by;
                squared += weight * spot.length_by * spot.curvature * spot.curvature;
            }
        }
        (length, squared)
    }
}
