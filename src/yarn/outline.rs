//! The outline of a yarn's cross section: size, area, second moment, polygon.
//!
//! Four outlines, all `width_mm` wide and `thickness_mm` thick, symmetric about both axes:
//! round (width = thickness), ellipse, lens (two equal circular arcs) and racetrack (a rectangle with half
//! rounds at its ends).
//!
//! How a thread touches them is in `touch`. Lens in cloth: Hearle and Shanahan 1978; racetrack: Kemp 1958.

use crate::root::rising_root;
use geo::{LineString, Polygon};
use std::f64::consts::{FRAC_PI_2, FRAC_PI_4, PI};

/// The kind of outline.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Shape {
    /// A circle.
    Round,
    /// An ellipse.
    Ellipse,
    /// Two equal circular arcs that meet in tips.
    Lens,
    /// A rectangle with half rounds at both ends.
    Racetrack,
}

impl Shape {
    /// Every shape, by the word a spec uses.
    pub const ALL: [(&'static str, Self); 4] = [
        ("round", Self::Round),
        ("ellipse", Self::Ellipse),
        ("lens", Self::Lens),
        ("racetrack", Self::Racetrack),
    ];

    /// The word a spec uses.
    pub fn word(self) -> &'static str {
        match self {
            Self::Round => "round",
            Self::Ellipse => "ellipse",
            Self::Lens => "lens",
            Self::Racetrack => "racetrack",
        }
    }
}

/// An outline with its size; width is never below thickness, and both are above zero.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Outline {
    pub(super) shape: Shape,
    pub(super) width_mm: f64,
    pub(super) thickness_mm: f64,
}

impl Outline {
    /// An outline of this width and thickness, or `None` where no such outline exists: sizes not above zero
    /// or not finite, a yarn taller than wide, a round one with two sizes.
    pub fn new(shape: Shape, width_mm: f64, thickness_mm: f64) -> Option<Self> {
        let sound = width_mm.is_finite() && thickness_mm > 0.0 && thickness_mm <= width_mm;
        let round = shape != Shape::Round || width_mm == thickness_mm;
        (sound && round).then_some(Self {
            shape,
            width_mm,
            thickness_mm,
        })
    }

    /// A circle.
    pub fn round(diameter_mm: f64) -> Option<Self> {
        Self::new(Shape::Round, diameter_mm, diameter_mm)
    }

    /// The outline of this area whose width is given, or `None` where it would be taller than wide.
    pub fn with_width(shape: Shape, width_mm: f64, area_mm2: f64) -> Option<Self> {
        // The tallest outline of any shape is the circle over its width; rounding may pass it by a hair.
        if area_mm2 > PI / 4.0 * width_mm * width_mm * (1.0 + 1e-12) {
            return None;
        }
        let thickness_mm = match shape {
            Shape::Round => return Self::round((4.0 * area_mm2 / PI).sqrt()),
            Shape::Ellipse => 4.0 * area_mm2 / (PI * width_mm),
            Shape::Racetrack => {
                // (w - t) t + pi t²/4 = A, the smaller root in the form that does not cancel.
                let corner = 1.0 - FRAC_PI_4;
                let root = (width_mm * width_mm - 4.0 * corner * area_mm2)
                    .max(0.0)
                    .sqrt();
                2.0 * area_mm2 / (width_mm + root)
            }
            // A lens fills between 2/3 and pi/4 of its rectangle.
            Shape::Lens => rising_root(
                |t| lens_area(width_mm, t) - area_mm2,
                area_mm2 / (FRAC_PI_4 * width_mm),
                (1.5 * area_mm2 / width_mm).min(width_mm),
                1e-15 * width_mm,
            ),
        };
        Self::new(shape, width_mm, thickness_mm.min(width_mm))
    }

    /// The outline of this area whose thickness is given, or `None` where it would be taller than wide.
    pub fn with_thickness(shape: Shape, thickness_mm: f64, area_mm2: f64) -> Option<Self> {
        if area_mm2 * (1.0 + 1e-12) < PI / 4.0 * thickness_mm * thickness_mm {
            return None;
        }
        let t = thickness_mm;
        let width_mm = match shape {
            Shape::Round => return Self::round((4.0 * area_mm2 / PI).sqrt()),
            Shape::Ellipse => 4.0 * area_mm2 / (PI * t),
            Shape::Racetrack => area_mm2 / t + t * (1.0 - FRAC_PI_4),
            // A lens fills at least 2/3 of its rectangle, so 1.5 A / t is wide enough.
            Shape::Lens => rising_root(
                |w| lens_area(w, t) - area_mm2,
                t,
                1.6 * area_mm2 / t + t,
                1e-15 * t,
            ),
        };
        Self::new(shape, width_mm.max(t), t)
    }

    /// The outline of this area and this flatness (width over thickness, at least 1).
    pub fn with_flatness(shape: Shape, flatness: f64, area_mm2: f64) -> Option<Self> {
        if flatness < 1.0 {
            return None;
        }
        let unit = Self::new(
            shape,
            if shape == Shape::Round { 1.0 } else { flatness },
            1.0,
        )?;
        let scale = (area_mm2 / unit.area_mm2()).sqrt();
        Self::new(shape, unit.width_mm * scale, scale)
    }

    /// The kind of outline.
    pub fn shape(&self) -> Shape {
        self.shape
    }

    /// Width in the cloth's plane, mm.
    pub fn width_mm(&self) -> f64 {
        self.width_mm
    }

    /// Thickness across the cloth's plane, mm.
    pub fn thickness_mm(&self) -> f64 {
        self.thickness_mm
    }

    /// Width over thickness.
    pub fn flatness(&self) -> f64 {
        self.width_mm / self.thickness_mm
    }

    /// Enclosed area, mm2.
    pub fn area_mm2(&self) -> f64 {
        let (w, t) = (self.width_mm, self.thickness_mm);
        match self.shape {
            Shape::Round | Shape::Ellipse => FRAC_PI_4 * w * t,
            Shape::Racetrack => (w - t) * t + FRAC_PI_4 * t * t,
            Shape::Lens => lens_area(w, t),
        }
    }

    /// Width at a height over the middle, mm; zero outside.
    pub fn width_at_mm(&self, height_mm: f64) -> f64 {
        let (w, t, y) = (self.width_mm, self.thickness_mm, height_mm.abs());
        if 2.0 * y >= t {
            return 0.0;
        }
        match self.shape {
            Shape::Round | Shape::Ellipse => w * (1.0 - (2.0 * y / t).powi(2)).sqrt(),
            Shape::Racetrack => w - t + (t * t - 4.0 * y * y).sqrt(),
            Shape::Lens => {
                let radius = (w * w + t * t) / (4.0 * t);
                let below = radius - 0.5 * t + y;
                2.0 * (radius * radius - below * below).max(0.0).sqrt()
            }
        }
    }

    /// Second moment of the enclosed area about the axis along its width, mm4: the one that resists bending
    /// out of the cloth's plane.
    ///
    /// Ellipse pi w t³/64; racetrack: rectangle and two half rounds; lens: by quadrature, 1e-12.
    pub fn second_moment_mm4(&self) -> f64 {
        let (w, t) = (self.width_mm, self.thickness_mm);
        match self.shape {
            Shape::Round | Shape::Ellipse => PI * w * t.powi(3) / 64.0,
            Shape::Racetrack => (w - t) * t.powi(3) / 12.0 + PI * t.powi(4) / 64.0,
            Shape::Lens => lens_second_moment(w, t),
        }
    }

    /// The outline as a polygon about the origin with at least `points` corners.
    pub fn polygon(&self, points: usize) -> Polygon<f64> {
        let quarter = (points / 4).max(2);
        let right_top: Vec<(f64, f64)> = (0..=quarter)
            .map(|step| {
                let share = step as f64 / quarter as f64;
                self.point(share)
            })
            .collect();
        let mirrored = |sx: f64, sz: f64| move |&(x, z): &(f64, f64)| (sx * x, sz * z);
        let ring: Vec<(f64, f64)> = right_top
            .iter()
            .map(mirrored(1.0, 1.0))
            .chain(right_top.iter().rev().map(mirrored(1.0, -1.0)))
            .chain(right_top.iter().map(mirrored(-1.0, -1.0)))
            .chain(right_top.iter().rev().map(mirrored(-1.0, 1.0)))
            .collect();
        Polygon::new(LineString::from(ring), vec![])
    }

    /// A point of the quarter from the crest (share 0) to the tip (share 1).
    fn point(&self, share: f64) -> (f64, f64) {
        let (half_width, half_thickness) = (self.width_mm / 2.0, self.thickness_mm / 2.0);
        match self.shape {
            Shape::Round | Shape::Ellipse => {
                let (sine, cosine) = (share * FRAC_PI_2).sin_cos();
                (half_width * sine, half_thickness * cosine)
            }
            Shape::Racetrack => {
                if share == 0.0 {
                    return (0.0, half_thickness);
                }
                let (sine, cosine) = (share * FRAC_PI_2).sin_cos();
                (
                    half_width - half_thickness + half_thickness * sine,
                    half_thickness * cosine,
                )
            }
            Shape::Lens => {
                let (radius, alpha) = lens_arc(self.width_mm, self.thickness_mm);
                let (sine, cosine) = (share * alpha).sin_cos();
                (radius * sine, radius * (cosine - alpha.cos()))
            }
        }
    }
}

/// Radius and half angle of a lens's arc.
pub(super) fn lens_arc(width_mm: f64, thickness_mm: f64) -> (f64, f64) {
    let (w, t) = (width_mm, thickness_mm);
    ((w * w + t * t) / (4.0 * t), 2.0 * (t / w).atan())
}

/// (2/3) times the integral of z³ over the width, z the arc's height; across as x = (w/2) sin f.
///
/// z = (w²/4 - x²)/(sqrt(r² - x²) + r - t/2) does not cancel in a flat lens (the closed form does), and the integrand
/// vanishes so smoothly at both tips that the trapezium rule is exact to 1e-12 with 64 steps.
fn lens_second_moment(width_mm: f64, thickness_mm: f64) -> f64 {
    const STEPS: usize = 64;
    let (radius, _) = lens_arc(width_mm, thickness_mm);
    let half = 0.5 * width_mm;
    let step = PI / STEPS as f64;
    let sum: f64 = (1..STEPS)
        .map(|index| {
            let (sine, cosine) = (index as f64 * step - 0.5 * PI).sin_cos();
            let x = half * sine;
            let height = (half * cosine).powi(2)
                / ((radius * radius - x * x).sqrt() + radius - 0.5 * thickness_mm);
            height.powi(3) * cosine
        })
        .sum();
    2.0 / 3.0 * sum * half * step
}

/// Two circular segments: r² (2 alpha - sin 2 alpha).
fn lens_area(width_mm: f64, thickness_mm: f64) -> f64 {
    if thickness_mm <= 0.0 {
        return 0.0;
    }
    let (radius, alpha) = lens_arc(width_mm, thickness_mm);
    // 2 alpha - sin 2 alpha loses digits in a flat lens; its series does not.
    let twice = 2.0 * alpha;
    let segment = if twice < 0.2 {
        let square = twice * twice;
        twice * square / 6.0 * (1.0 - square / 20.0 * (1.0 - square / 42.0 * (1.0 - square / 72.0)))
    } else {
        twice - twice.sin()
    };
    radius * radius * segment
}

#[cfg(test)]
mod tests {
    use super::*;
    use geo::Area;

    const FLAT: [Shape; 3] = [Shape::Ellipse, Shape::Lens, Shape::Racetrack];

    /// The area of a polygon with many corners: an independent computation (geo, shoelace).
    #[test]
    fn areas_equal_those_of_their_polygons() {
        let mut outlines = vec![Outline::round(0.3).unwrap()];
        for shape in FLAT {
            for (w, t) in [(1.0, 0.9), (1.2, 0.3), (2.0, 0.05)] {
                outlines.push(Outline::new(shape, w, t).unwrap());
            }
        }
        for outline in outlines {
            let polygon = outline.polygon(8000).unsigned_area();
            assert!(
                (polygon / outline.area_mm2() - 1.0).abs() < 2e-6,
                "{outline:?} {polygon} {}",
                outline.area_mm2()
            );
        }
    }

    /// Second moments by strips of the polygon's own width function: independent of the closed forms.
    #[test]
    fn second_moments_equal_the_sum_of_strips() {
        for shape in FLAT {
            let outline = Outline::new(shape, 1.2, 0.4).unwrap();
            let corners = outline.polygon(40_000);
            // Green: I = 1/12 sum (x_i z_j - x_j z_i)(z_i² + z_i z_j + z_j²).
            let sum: f64 = corners
                .exterior()
                .lines()
                .map(|line| {
                    let (a, b) = (line.start, line.end);
                    (a.x * b.y - b.x * a.y) * (a.y * a.y + a.y * b.y + b.y * b.y) / 12.0
                })
                .sum();
            let closed = outline.second_moment_mm4();
            assert!(
                (sum.abs() / closed - 1.0).abs() < 1e-6,
                "{shape:?} {sum} {closed}"
            );
        }
    }

    /// A very flat lens is a parabola: (4/105) w t³ (hand calculation: (1/12) w t³ times the integral of (1 - u²)³).
    #[test]
    fn a_very_flat_lens_has_the_second_moment_of_a_parabola() {
        for flatness in [100.0, 500.0, 3000.0] {
            let lens = Outline::new(Shape::Lens, flatness, 1.0).unwrap();
            let parabola = 4.0 / 105.0 * flatness;
            assert!(
                (lens.second_moment_mm4() / parabola - 1.0).abs() < 1e-3,
                "{flatness}"
            );
        }
        let circle = Outline::new(Shape::Lens, 1.0, 1.0).unwrap();
        assert!((circle.second_moment_mm4() / (PI / 64.0) - 1.0).abs() < 1e-12);
    }

    #[test]
    fn the_given_size_and_the_area_fix_the_outline() {
        for shape in FLAT {
            for flatness in [1.0, 1.3, 4.0, 60.0] {
                let outline = Outline::with_flatness(shape, flatness, 0.04).unwrap();
                assert!((outline.area_mm2() / 0.04 - 1.0).abs() < 1e-12);
                let by_width = Outline::with_width(shape, outline.width_mm, 0.04).unwrap();
                let by_thickness =
                    Outline::with_thickness(shape, outline.thickness_mm, 0.04).unwrap();
                for other in [by_width, by_thickness] {
                    assert!(
                        (other.flatness() / flatness - 1.0).abs() < 1e-6,
                        "{shape:?} {other:?}"
                    );
                }
            }
            assert!(
                Outline::with_width(shape, 0.2, 0.04).is_none(),
                "taller than wide"
            );
        }
        assert!(Outline::new(Shape::Lens, 1.0, f64::NAN).is_none());
        assert!(Outline::new(Shape::Lens, 1.0, 0.0).is_none());
        assert!(Outline::new(Shape::Round, 1.0, 0.5).is_none());
    }
}
