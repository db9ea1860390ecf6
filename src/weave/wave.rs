//! One system's wave: the taut path of its yarns over and under the other system, for any pattern.
//!
//! All crossings of a system stand at two heights, so a yarn's path is made of passings from face to back
//! (or back to face), each one spacing long, and of floats that run straight over the crests between. With
//! m changes in n crossings of spacing p and l the length of one passing (see `path::taut`),
//!
//! ```text
//! length = m l + (n - m) p,       crimp c = length/(n p) - 1 = (m/n)(l/p - 1)
//! ```
//!
//! the crimp form of ASTM D3883 and ISO 7211-3. For plain weave m = n (Peirce 1937); floats: Love 1954,
//! Hamilton 1964.

use crate::bend::Flanks;
use crate::path::{Crest, Passing};
use crate::pattern::SystemInterlacing;
use crate::yarn::Outline;

/// The wave of one system, its height still open.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Wave {
    crest: Crest,
    /// Changes over crossings, all yarns of the system together.
    changes_per_crossing: f64,
    flanks: Flanks,
}

/// A piece of a yarn's path: curvature is positive over a crest on the face, negative under one on the back.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Piece {
    /// Length, mm.
    pub length_mm: f64,
    /// Curvature of the centreline, 1/mm; on an ellipse the largest of the piece.
    pub curvature_per_mm: f64,
    /// Turn made on it, rad, signed as the curvature.
    pub turn_rad: f64,
}

impl Wave {
    /// A yarn of outline `own` that crosses yarns of outline `crossed`, `spacing_mm` apart.
    pub fn new(
        own: &Outline,
        crossed: &Outline,
        spacing_mm: f64,
        system: &SystemInterlacing,
    ) -> Self {
        Self {
            crest: Crest {
                section: *crossed,
                half_thickness_mm: 0.5 * own.thickness_mm(),
                spacing_mm,
            },
            changes_per_crossing: system.mean_changes_per_crossing(),
            flanks: if system.has_isolated_crossing() {
                Flanks::Both
            } else {
                Flanks::One
            },
        }
    }

    /// The geometry at one crossing.
    pub fn crest(&self) -> &Crest {
        &self.crest
    }

    /// Which sides of its sharpest crowns fall away.
    pub fn flanks(&self) -> Flanks {
        self.flanks
    }

    /// Changes over crossings, mean of the system.
    pub fn changes_per_crossing(&self) -> f64 {
        self.changes_per_crossing
    }

    /// The highest wave with which the yarn still passes, mm.
    pub fn highest_mm(&self) -> f64 {
        self.crest.highest_wave_mm()
    }

    /// Mean crimp of the system at a wave height, a ratio; `None` where the yarn cannot pass.
    pub fn crimp(&self, height_mm: f64) -> Option<f64> {
        Some(self.crimp_with(self.crest.length_mm(height_mm)?))
    }

    /// Mean crimp of the system with this passing.
    pub fn crimp_of(&self, passing: &Passing) -> f64 {
        self.crimp_with(passing.length_mm)
    }

    fn crimp_with(&self, passing_length_mm: f64) -> f64 {
        self.changes_per_crossing * (passing_length_mm / self.crest.spacing_mm - 1.0)
    }

    /// Upward pull of one yarn per crossing for unit tension: changes per crossing times the sine of the slope,
    /// which is how fast its length grows with the wave's height.
    pub fn lift(&self, height_mm: f64) -> f64 {
        let slope = self
            .crest
            .slope_rad(height_mm)
            .unwrap_or(std::f64::consts::FRAC_PI_2);
        self.changes_per_crossing * slope.sin()
    }

    /// Smallest radius of the centreline, mm; `None` where the yarn runs straight.
    pub fn min_radius_mm(&self, passing: &Passing) -> Option<f64> {
        passing
            .rests
            .iter()
            .filter_map(|rest| rest.outline_radius_mm)
            .map(|radius| radius + self.crest.half_thickness_mm)
            .reduce(f64::min)
    }

    /// The path of one yarn through its repeat: `over` tells for each crossing whether it lies on the face.
    pub fn path(&self, passing: &Passing, over: &[bool]) -> Vec<Piece> {
        let spacing = self.crest.spacing_mm;
        let mut pieces = Vec::new();
        for (index, here) in over.iter().enumerate() {
            let next = over[(index + 1) % over.len()];
            if *here == next {
                pieces.push(Piece {
                    length_mm: spacing,
                    curvature_per_mm: 0.0,
                    turn_rad: 0.0,
                });
                continue;
            }
            let sign = if *here { 1.0 } else { -1.0 };
            let piece = |rest: &crate::path::Rest, sign: f64| Piece {
                length_mm: rest.length_mm,
                curvature_per_mm: rest
                    .outline_radius_mm
                    .map_or(0.0, |radius| sign / (radius + self.crest.half_thickness_mm)),
                turn_rad: sign * rest.turn_rad,
            };
            pieces.extend(passing.rests.iter().map(|rest| piece(rest, sign)));
            pieces.push(Piece {
                length_mm: passing.straight_mm,
                curvature_per_mm: 0.0,
                turn_rad: 0.0,
            });
            pieces.extend(passing.rests.iter().rev().map(|rest| piece(rest, -sign)));
        }
        pieces
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pattern::parse_notation;
    use crate::yarn::Shape;

    /// The path of a yarn is as long as its crimp says, and turns back to where it came from.
    #[test]
    fn the_path_is_as_long_as_the_crimp_says() {
        let own = Outline::new(Shape::Lens, 1.0, 0.2).unwrap();
        let crossed = Outline::new(Shape::Racetrack, 1.2, 0.3).unwrap();
        for name in ["plain", "twill 2/1", "satin 8 step 3", "warp rib 2/2"] {
            let pattern = parse_notation(name).unwrap();
            let wave = Wave::new(&own, &crossed, 1.5, &pattern.interlacing().warp);
            let passing = wave.crest().pass(0.25).unwrap();
            let (mut length, mut crossings, mut turn) = (0.0, 0, 0.0);
            for end in 0..pattern.ends() {
                let over: Vec<bool> = pattern.warp_sequence(end).collect();
                for piece in wave.path(&passing, &over) {
                    length += piece.length_mm;
                    turn += piece.turn_rad;
                }
                crossings += over.len();
            }
            let crimp = length / (1.5 * crossings as f64) - 1.0;
            assert!((crimp - wave.crimp(0.25).unwrap()).abs() < 1e-12, "{name}");
            assert!(turn.abs() < 1e-12);
        }
    }

    /// The crimp definition's worked examples (a textile calculation page and a garment page, both read): cloth 20.0 cm,
    /// straightened 21.2 cm: 6.0 %; 1 m of cloth from 1.05 m of warp: 5 %, from 1.08 m of weft: 8 %.
    #[test]
    fn crimp_is_straightened_over_cloth_length_less_one() {
        for (cloth, straightened, percent) in
            [(20.0, 21.2, 6.0), (1.0, 1.05, 5.0), (1.0, 1.08, 8.0)]
        {
            let section = Outline::round(0.1).unwrap();
            let pattern = parse_notation("plain").unwrap();
            let wave = Wave::new(&section, &section, cloth, &pattern.interlacing().warp);
            let passing = Passing {
                slope_rad: 0.0,
                length_mm: straightened,
                straight_mm: straightened,
                rests: Vec::new(),
            };
            let crimp = 100.0 * wave.crimp_of(&passing);
            assert!((crimp - percent).abs() < 1e-9, "{crimp} {percent}");
        }
    }
}
