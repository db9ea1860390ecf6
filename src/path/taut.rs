//! A tight, flexible thread from the crest over one section to the trough under the next.
//!
//! The thread lies on the outline of the section it crosses, half its own thickness away, leaves it along
//! the common tangent and meets the next section the same way from the other side. Both sections are alike,
//! so the tangent passes the point half way between them, and a quarter wave is enough. With the section's
//! centre as origin and the support function H of its outline (see `yarn::outline`), spacing p, own half
//! thickness o, and the section g below the middle of the cloth (g = (D - h)/2):
//!
//! ```text
//! f(a) = (p/2) sin a + g cos a - H(a) - o = 0      slope a of the straight piece: its first root
//! s    = f'(a)                                     half the straight piece
//! l    = 2 (outline length to a + o a + s)         thread from crest to trough
//! ```
//!
//! f rises to one maximum and falls; where the maximum is below zero the thread cannot pass (jammed), and
//! s = 0 is Peirce's jamming. For circles this is Peirce 1937 in the closed form
//! tan a = (p D - s (D - h))/(p s + D (D - h)); for lenses Hearle and Shanahan 1978; for racetracks Kemp
//! 1958. Floats run straight over the crests between (Love 1954, Hamilton 1964), which holds because all
//! crossings of a system stand at the same two heights.
//!
//! Accuracy: closed form for round, lens and racetrack (1e-14); the ellipse's slope within 1e-14 rad.
//! Leaves out: rigidity (see `rod`), friction, flattening under the pull.

use crate::root::rising_root;
use crate::yarn::Outline;
use std::f64::consts::FRAC_PI_2;

/// A thread of half thickness `half_thickness_mm` that crosses sections `section`, `spacing_mm` apart.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Crest {
    /// The outline crossed.
    pub section: Outline,
    /// Half of the thread's own thickness, mm.
    pub half_thickness_mm: f64,
    /// Distance between neighbouring sections, mm; not below the section's width.
    pub spacing_mm: f64,
}

/// One rest of the thread on a section, from the crest outwards; lengths on the thread's centreline.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rest {
    /// Smallest radius of the outline under this rest, mm; zero at a tip, absent on a flat.
    pub outline_radius_mm: Option<f64>,
    /// Turn made on this rest, rad.
    pub turn_rad: f64,
    /// Length, mm.
    pub length_mm: f64,
}

/// The way from a crest to the next trough, half of which lies on either section.
#[derive(Debug, Clone, PartialEq)]
pub struct Passing {
    /// Slope of the straight piece, rad: the wrap angle on one side of a crest.
    pub slope_rad: f64,
    /// Whole length from crest to trough, mm.
    pub length_mm: f64,
    /// Length of the straight piece, mm.
    pub straight_mm: f64,
    /// Rests on one section, from the crest outwards.
    pub rests: Vec<Rest>,
}

/// How finely the changing curvature of an ellipse is told: rests per crest side.
const ELLIPSE_RESTS: usize = 8;

impl Crest {
    /// Sum of half thicknesses of section and thread: half of Peirce's D, mm.
    fn reach_mm(&self) -> f64 {
        0.5 * self.section.thickness_mm() + self.half_thickness_mm
    }

    /// The thread passing with this wave height (0 to D), or `None` where it cannot.
    pub fn pass(&self, wave_height_mm: f64) -> Option<Passing> {
        let (slope_rad, half_straight_mm) = self.slope(self.depth_mm(wave_height_mm))?;
        Some(Passing {
            slope_rad,
            length_mm: self.length_with(slope_rad, half_straight_mm),
            straight_mm: 2.0 * half_straight_mm,
            rests: self.rests(slope_rad),
        })
    }

    /// Only the slope of the straight piece, rad.
    pub fn slope_rad(&self, wave_height_mm: f64) -> Option<f64> {
        self.slope(self.depth_mm(wave_height_mm))
            .map(|(slope, _)| slope)
    }

    /// Only the length from crest to trough, mm.
    pub fn length_mm(&self, wave_height_mm: f64) -> Option<f64> {
        let (slope, half_straight_mm) = self.slope(self.depth_mm(wave_height_mm))?;
        Some(self.length_with(slope, half_straight_mm))
    }

    /// How far the sections stand below the middle at this wave height, mm.
    fn depth_mm(&self, wave_height_mm: f64) -> f64 {
        self.reach_mm() - 0.5 * wave_height_mm
    }

    fn length_with(&self, slope_rad: f64, half_straight_mm: f64) -> f64 {
        let contact_mm = self.section.touch(slope_rad).arc_mm + self.half_thickness_mm * slope_rad;
        2.0 * (contact_mm + half_straight_mm)
    }

    /// Slope and half the straight piece, for sections `depth_mm` below the middle.
    fn slope(&self, depth_mm: f64) -> Option<(f64, f64)> {
        let half_spacing = 0.5 * self.spacing_mm;
        let Some(arcs) = self.section.arcs() else {
            return self.slope_on_ellipse(depth_mm);
        };
        let mut from_rad = 0.0;
        for arc in arcs {
            let x = half_spacing - arc.centre_x_mm;
            let z = depth_mm - arc.centre_z_mm;
            let reach = arc.radius_mm + self.half_thickness_mm;
            // x sin a + z cos a = reach has the root tan a = (x c - z s)/(z c + x s), s² = x² + z² - c².
            let square = x * x + z * z - reach * reach;
            // At the exact jam s = 0, and rounding may put the square a hair below.
            if square < -1e-13 * reach * reach {
                from_rad = arc.until_rad;
                continue;
            }
            let straight = square.max(0.0).sqrt();
            let slope = (x * reach - z * straight).atan2(z * reach + x * straight);
            // A root before the arc begins is none: the thread would have left the arc before (rounding aside).
            if slope <= arc.until_rad && slope >= from_rad - 1e-12 {
                return Some((slope.max(0.0), straight));
            }
            from_rad = arc.until_rad;
        }
        None
    }

    fn slope_on_ellipse(&self, depth_mm: f64) -> Option<(f64, f64)> {
        let half_spacing = 0.5 * self.spacing_mm;
        let gap = |a: f64| {
            half_spacing * a.sin() + depth_mm * a.cos()
                - self.section.touch(a).distance_mm
                - self.half_thickness_mm
        };
        let straight =
            |a: f64| half_spacing * a.cos() - depth_mm * a.sin() - self.section.touch(a).along_mm;
        let peak = rising_root(|a| -straight(a), 0.0, FRAC_PI_2, 1e-14);
        if gap(peak) < -1e-13 * half_spacing {
            return None;
        }
        let slope = rising_root(gap, 0.0, peak, 1e-14);
        Some((slope, straight(slope).max(0.0)))
    }

    fn rests(&self, slope_rad: f64) -> Vec<Rest> {
        let mut rests = Vec::with_capacity(3);
        let own = self.half_thickness_mm;
        let flat_mm = self.section.touch(0.0).arc_mm;
        if flat_mm > 0.0 {
            rests.push(Rest {
                outline_radius_mm: None,
                turn_rad: 0.0,
                length_mm: flat_mm,
            });
        }
        let mut push = |radius_mm: f64, turn_rad: f64, outline_mm: f64| {
            if turn_rad > 0.0 {
                rests.push(Rest {
                    outline_radius_mm: Some(radius_mm),
                    turn_rad,
                    length_mm: outline_mm + own * turn_rad,
                });
            }
        };
        match self.section.arcs() {
            Some(arcs) => {
                let mut from = 0.0;
                for arc in arcs {
                    let turn = slope_rad.min(arc.until_rad) - from;
                    push(arc.radius_mm, turn, arc.radius_mm * turn);
                    from = arc.until_rad;
                }
            }
            None => {
                let mut from = self.section.touch(0.0);
                for index in 1..=ELLIPSE_RESTS {
                    let share = index as f64 / ELLIPSE_RESTS as f64;
                    let to = self.section.touch(share * slope_rad);
                    let turn = slope_rad / ELLIPSE_RESTS as f64;
                    push(to.radius_mm, turn, to.arc_mm - from.arc_mm);
                    from = to;
                }
            }
        }
        rests
    }

    /// The highest wave with which the thread still passes, mm: at most D, where it takes the whole height.
    ///
    /// There the maximum of f is zero. On an arc about (cx, cz) that is where the distance from its centre to the
    /// point half way, sqrt((p/2 - cx)² + (g - cz)²), equals its radius plus o.
    pub fn highest_wave_mm(&self) -> f64 {
        let whole = 2.0 * self.reach_mm();
        let half_spacing = 0.5 * self.spacing_mm;
        let Some(arcs) = self.section.arcs() else {
            return self.highest_wave_on_ellipse_mm(whole);
        };
        for arc in arcs {
            let x = half_spacing - arc.centre_x_mm;
            let reach = arc.radius_mm + self.half_thickness_mm;
            if x >= reach {
                // Wide enough at any height, unless the next arc is narrower still.
                continue;
            }
            let z = (reach * reach - x * x).sqrt();
            if x.atan2(z) <= arc.until_rad {
                return (whole - 2.0 * (z + arc.centre_z_mm)).clamp(0.0, whole);
            }
        }
        whole
    }

    fn highest_wave_on_ellipse_mm(&self, whole: f64) -> f64 {
        let half_spacing = 0.5 * self.spacing_mm;
        // The maximum of f at a height: how far the thread stays clear of jamming.
        let margin = |wave_height_mm: f64| {
            let depth = self.depth_mm(wave_height_mm);
            let steepest =
                |a: f64| self.section.touch(a).along_mm + depth * a.sin() - half_spacing * a.cos();
            let peak = rising_root(steepest, 0.0, FRAC_PI_2, 1e-14);
            half_spacing * peak.sin() + depth * peak.cos()
                - self.section.touch(peak).distance_mm
                - self.half_thickness_mm
        };
        rising_root(|h| -margin(h), 0.0, whole, 1e-14 * whole)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::yarn::Shape;
    use proptest::prelude::*;

    fn round(diameter_mm: f64, half_thickness_mm: f64, spacing_mm: f64) -> Crest {
        Crest {
            section: Outline::round(diameter_mm).unwrap(),
            half_thickness_mm,
            spacing_mm,
        }
    }

    /// Jamming curve of Peirce's geometry, sqrt(1 - (p1/D)²) + sqrt(1 - (p2/D)²) = 1 (independent solution).
    #[test]
    fn the_highest_wave_is_on_the_jamming_curve() {
        for (p_over_d, h_over_d) in [
            (0.1, 0.005_012_562_893_38),
            (0.5, 0.133_974_596_215_6),
            (0.866_025_403_784_4, 0.5),
            (0.99, 0.858_932_640_203_3),
        ] {
            let highest = round(0.6, 0.2, p_over_d).highest_wave_mm();
            assert!((highest - h_over_d).abs() < 1e-12, "{p_over_d} {highest}");
        }
        assert_eq!(
            round(0.6, 0.2, 1.1).highest_wave_mm(),
            1.0,
            "never jams alone"
        );
    }

    fn crests() -> impl Strategy<Value = Crest> {
        (
            0usize..4,
            1.0..12.0f64,
            0.05..0.5f64,
            0.02..0.3f64,
            1.0..3.0f64,
        )
            .prop_map(|(kind, flatness, thickness, own, loose)| {
                let shape = Shape::ALL[kind].1;
                let width = if shape == Shape::Round {
                    thickness
                } else {
                    flatness * thickness
                };
                let section = Outline::new(shape, width, thickness).unwrap();
                Crest {
                    section,
                    half_thickness_mm: own,
                    spacing_mm: loose * width,
                }
            })
    }

    proptest! {
        /// Walking the rests and the straight piece ends at the next trough: spacing across, height down.
        #[test]
        fn the_pieces_add_up_to_the_span(crest in crests(), share in 0.0..1.0f64) {
            let height = share * crest.highest_wave_mm();
            let passing = crest.pass(height).unwrap();
            // Flats and arcs of known radius; the ellipse's chords are told by `yarn::outline`'s own test.
            prop_assume!(crest.section.arcs().is_some());
            let (mut x, mut z, mut slope) = (0.0, 0.0, 0.0_f64);
            let walk: Vec<Rest> = passing.rests.clone();
            for rest in walk {
                match rest.outline_radius_mm {
                    None => x += rest.length_mm,
                    Some(radius) => {
                        let r = radius + crest.half_thickness_mm;
                        let to = slope + rest.turn_rad;
                        x += r * (to.sin() - slope.sin());
                        z += r * (slope.cos() - to.cos());
                        slope = to;
                    }
                }
            }
            prop_assert!((slope - passing.slope_rad).abs() < 1e-12);
            x += 0.5 * passing.straight_mm * slope.cos();
            z += 0.5 * passing.straight_mm * slope.sin();
            prop_assert!((2.0 * x - crest.spacing_mm).abs() < 1e-10 * crest.spacing_mm, "{x} {crest:?}");
            prop_assert!((2.0 * z - height).abs() < 1e-10 * crest.spacing_mm, "{z} {height}");
            let length: f64 = passing.rests.iter().map(|rest| 2.0 * rest.length_mm).sum();
            prop_assert!((length + passing.straight_mm - passing.length_mm).abs() < 1e-12);
        }

        /// A shorter thread does not exist: no thread is shorter than the straight line, and a higher wave
        /// takes more thread (its rate is the sine of the slope).
        #[test]
        fn a_higher_wave_takes_more_thread(crest in crests(), share in 0.01..0.98f64) {
            let height = share * crest.highest_wave_mm();
            let step = 1e-5 * crest.highest_wave_mm();
            let (low, high) = (crest.pass(height).unwrap(), crest.pass(height + step).unwrap());
            let rate = (high.length_mm - low.length_mm) / step;
            let sine = (0.5 * (low.slope_rad + high.slope_rad)).sin();
            prop_assert!((rate - sine).abs() < 2e-3, "{rate} {sine} {crest:?}");
        }

        /// All lengths scaled, all radii scaled; slope kept.
        #[test]
        fn scaling_all_lengths_scales_the_path(crest in crests(), share in 0.01..0.99f64, by in 0.2..7.0f64) {
            let scaled = Crest {
                section: Outline::new(
                    crest.section.shape(),
                    by * crest.section.width_mm(),
                    by * crest.section.thickness_mm(),
                ).unwrap(),
                half_thickness_mm: by * crest.half_thickness_mm,
                spacing_mm: by * crest.spacing_mm,
            };
            let height = share * crest.highest_wave_mm();
            let (a, b) = (crest.pass(height).unwrap(), scaled.pass(by * height).unwrap());
            prop_assert!((a.slope_rad - b.slope_rad).abs() < 1e-9);
            prop_assert!((b.length_mm / a.length_mm / by - 1.0).abs() < 1e-9);
        }
    }
}
