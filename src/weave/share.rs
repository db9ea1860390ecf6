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

/// How the height came to be shared.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Closed {
    /// By what.
    pub by: Closure,
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
    let warp_mm = asked.clamp(low, high);
    let moved = (warp_mm - asked).abs() > 1e-9 * whole_mm;
    Some(Share {
        warp_mm,
        weft_mm: whole_mm - warp_mm,
        closed: Closed {
            by,
            jam_limited: moved || !exists,
            mismatch,
        },
    })
}
