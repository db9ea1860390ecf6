//! Broken filaments to expect at one bend: flaws (`flaws`) over its stretches and all filaments of the yarn.
//!
//! A crown holds its own length, so many times per metre of yarn; over a guide all yarn travels, so all of it meets the sharpest
//! stretch:
//!
//! ```text
//! crown      n = N times per m * sum over stretches of length * mean over filaments of h
//! guide      n = N 1000 mm/m * largest mean over filaments of h
//! ```
//!
//! N filaments. The same flaw met again does not break again: what a later bend adds is in `history`.

use super::filament::Bundle;
use super::flaws::Flaws;
use crate::bend::{Bend, Meets, Stretch};
use crate::yarn::{Laid, Yarn};

/// Broken filaments to expect per metre of yarn at a bend.
pub fn broken_per_m(flaws: &Flaws, bend: &Bend, yarn: &Yarn, laid: &Laid) -> f64 {
    let on = |stretch: &Stretch| mean_per_mm(flaws, stretch, bend, yarn, laid);
    let filaments = f64::from(yarn.count.filaments);
    match bend.meets {
        Meets::TimesPerMetre(times) => {
            let sum: f64 = bend.profile.iter().map(|s| s.length_mm * on(s)).sum();
            filaments * times * sum
        }
        Meets::All => filaments * 1e3 * bend.profile.iter().map(on).fold(0.0, f64::max),
    }
}

/// Breaks to expect per mm of one filament on a stretch, the mean over all filaments.
fn mean_per_mm(flaws: &Flaws, stretch: &Stretch, bend: &Bend, yarn: &Yarn, laid: &Laid) -> f64 {
    Bundle::new(stretch, bend, yarn, laid)
        .layers(laid)
        .iter()
        .map(|(share, filament)| {
            let (axial, bending) = Flaws::borne(yarn, filament);
            share * flaws.breaks_per_mm(axial, bending)
        })
        .sum()
}
