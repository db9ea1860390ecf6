//! How warp and weft share the height of the cloth.
//!
//! At a crossing the centres stand (t1 + t2)/2 apart, so the wave heights add up to D = t1 + t2. One more
//! equation closes the cloth, in this order:
//!
//! 1. measured crimp of one system: its height is the one with that crimp. Both measured over-determine it:
//!    D is shared in the ratio of the two heights, and what they miss D by is reported;
//! 2. both tensions given: least energy T1 L1 + T2 L2, which is balance of the contact forces,
//!    m1 T1 sin a1 = m2 T2 sin a2 (m: changes per crossing; for plain and twill m1 = m2);
//! 3. else equal wave heights.
//!
//! A height exists only up to each system's jam. Where the split asked for lies outside, the nearest inside is
//! taken (`jam_limited`); where none exists the cloth is jammed.

use super::wave::Wave;
use crate::root::rising_root;

/// What closes the height.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Closure {
    /// Measured crimp of the warp, a ratio.
    WarpCrimp(f64),
    /// Measured crimp of the weft, a ratio.
    WeftCrimp(f64),
    /// Both crimps measured: warp, weft.
    BothCrimps(f64, f64),
    /// Tensions of one yarn of warp and weft, N.
    Tensions(f64, f64),
    /// Nothing known: equal wave heights.
    EqualHeights,
}

/// What shared the height in the end.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum SharedBy {
    /// What closes the height of taut yarns, or the measured crimp of stiff ones.
    Closure(Closure),
    /// Stiff yarns: least energy at the tensions of the state.
    LeastEnergy,
    /// Stiff yarns in the other state: least energy, lengths kept.
    KeptLengths,
}

/// How the height came to be shared.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Closed {
    /// By what.
    pub by: SharedBy,
    /// Whether the split asked for did not exist and the nearest was taken.
    pub jam_limited: bool,
    /// With both crimps measured: how much more (+) or less (-) height they ask for than the yarns have, as a
    /// share of it.
    pub mismatch: Option<f64>,
}

/// The two wave heights.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Share {
    /// Wave height of the warp, mm.
    pub warp_mm: f64,
    /// Wave height of the weft, mm.
    pub weft_mm: f64,
    /// How they came about.
    pub closed: Closed,
}

/// Accuracy of a height, as a share of the whole.
const ACCURACY: f64 = 1e-13;

/// The height at which a system has this crimp, capped at its highest wave.
fn height_with_crimp(wave: &Wave, crimp: f64, highest_mm: f64) -> f64 {
    // Beyond what passes crimp only grows, so an endless crimp keeps the function rising.
    let excess = |height: f64| wave.crimp(height).unwrap_or(f64::MAX) - crimp;
    rising_root(excess, 0.0, highest_mm, ACCURACY * highest_mm)
}

/// Shares the height `whole_mm` between both waves; `None` where the cloth is jammed.
pub fn share(warp: &Wave, weft: &Wave, whole_mm: f64, by: Closure) -> Option<Share> {
    let highest_warp = warp.highest_mm();
    let highest_weft = weft.highest_mm();
    // Rounding of the highest waves must not jam a cloth that just passes.
    let slack = 1e-12 * whole_mm;
    if highest_warp + highest_weft < whole_mm - slack {
        return None;
    }
    let low = (whole_mm - highest_weft).clamp(0.0, whole_mm);
    let high = highest_warp.clamp(low, whole_mm);
    let accuracy = ACCURACY * whole_mm;
    let by_crimp = |wave: &Wave, crimp: f64, highest: f64| {
        let height = height_with_crimp(wave, crimp, highest);
        let reached = wave
            .crimp(height)
            .is_some_and(|c| (c - crimp).abs() <= 1e-9 + 1e-6 * crimp);
        (height, reached)
    };
    let mut mismatch = None;
    let (asked, exists) = match by {
        Closure::WarpCrimp(crimp) => by_crimp(warp, crimp, highest_warp),
        Closure::WeftCrimp(crimp) => {
            let (height, reached) = by_crimp(weft, crimp, highest_weft);
            (whole_mm - height, reached)
        }
        Closure::BothCrimps(warp_crimp, weft_crimp) => {
            let (h1, reached1) = by_crimp(warp, warp_crimp, highest_warp);
            let (h2, reached2) = by_crimp(weft, weft_crimp, highest_weft);
            mismatch = Some((h1 + h2) / whole_mm - 1.0);
            // Two straight systems cannot share a height: leave it in the middle.
            let ratio = if h1 + h2 > 0.0 { h1 / (h1 + h2) } else { 0.5 };
            (whole_mm * ratio, reached1 && reached2)
        }
        Closure::Tensions(warp_n, weft_n) => {
            let balance =
                |height: f64| warp_n * warp.lift(height) - weft_n * weft.lift(whole_mm - height);
            let root = rising_root(balance, low, high, accuracy);
            // A root at the end of the bracket is one only where the forces balance there.
            let inside = balance(low) <= 0.0 && balance(high) >= 0.0;
            (root, inside)
        }
        Closure::EqualHeights => (0.5 * whole_mm, true),
    };
    // A wave lower than the accuracy of its height is none.
    let warp_mm = asked.clamp(low, high);
    let warp_mm = if warp_mm < slack { 0.0 } else { warp_mm };
    let moved = (warp_mm - asked).abs() > 1e-9 * whole_mm;
    Some(Share {
        warp_mm,
        weft_mm: whole_mm - warp_mm,
        closed: Closed {
            by: SharedBy::Closure(by),
            jam_limited: moved || !exists,
            mismatch,
        },
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pattern::parse_notation;
    use crate::yarn::{Outline, Shape};

    fn waves(pattern: &str) -> (Wave, Wave, f64) {
        let woven = parse_notation(pattern).unwrap().interlacing();
        let warp = Outline::new(Shape::Lens, 0.5, 0.12).unwrap();
        let weft = Outline::new(Shape::Ellipse, 0.7, 0.15).unwrap();
        (
            Wave::new(&warp, &weft, 0.95, &woven.warp),
            Wave::new(&weft, &warp, 0.70, &woven.weft),
            0.27,
        )
    }

    /// Balance of forces is least energy: T1 L1 + T2 L2 over the repeat, here by trying heights on either side.
    #[test]
    fn given_tensions_take_the_least_energy() {
        for pattern in ["plain", "warp rib 2/2", "weft rib 3/1", "satin 5"] {
            let (warp, weft, whole) = waves(pattern);
            let (t1, t2) = (0.7, 0.45);
            let shared = share(&warp, &weft, whole, Closure::Tensions(t1, t2)).unwrap();
            assert!(!shared.closed.jam_limited, "{pattern}");
            // Length of one end over its repeat: (1 + crimp) times picks; ends stand 0.70 apart, picks 0.95, so
            // per area of cloth the energies are weighted by 1/0.70 and 1/0.95.
            let energy = |h: f64| {
                t1 * (1.0 + warp.crimp(h).unwrap()) / 0.70
                    + t2 * (1.0 + weft.crimp(whole - h).unwrap()) / 0.95
            };
            let least = energy(shared.warp_mm);
            for step in [-0.01, -1e-3, 1e-3, 0.01] {
                assert!(
                    energy(shared.warp_mm + step * whole) > least,
                    "{pattern} {step}"
                );
            }
        }
    }

    #[test]
    fn measured_crimp_is_met_and_two_of_them_are_held_against_each_other() {
        let (warp, weft, whole) = waves("plain");
        let shared = share(&warp, &weft, whole, Closure::WarpCrimp(0.01)).unwrap();
        assert!((warp.crimp(shared.warp_mm).unwrap() - 0.01).abs() < 1e-9);
        let other = share(&warp, &weft, whole, Closure::WeftCrimp(0.02)).unwrap();
        assert!((weft.crimp(other.weft_mm).unwrap() - 0.02).abs() < 1e-9);
        // Two crimps of one and the same cloth agree.
        let same = weft.crimp(shared.weft_mm).unwrap();
        let both = share(&warp, &weft, whole, Closure::BothCrimps(0.01, same)).unwrap();
        assert!((both.warp_mm - shared.warp_mm).abs() < 1e-6);
        assert!(both.closed.mismatch.unwrap().abs() < 1e-6);
        // Twice the crimp in the weft asks for more height than there is.
        let more = share(&warp, &weft, whole, Closure::BothCrimps(0.01, 2.0 * same)).unwrap();
        assert!(more.closed.mismatch.unwrap() > 0.1);
        assert!((more.warp_mm + more.weft_mm - whole).abs() < 1e-12);
    }

    #[test]
    fn a_split_out_of_reach_is_the_nearest_and_says_so() {
        let (warp, weft, whole) = waves("plain");
        let shared = share(&warp, &weft, whole, Closure::WarpCrimp(0.9)).unwrap();
        assert!(shared.closed.jam_limited);
        let straight = share(&warp, &weft, whole, Closure::WarpCrimp(0.0)).unwrap();
        assert_eq!(
            (straight.warp_mm, straight.closed.jam_limited),
            (0.0, false)
        );
    }
}
