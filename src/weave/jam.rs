//! Where the yarns asked for cannot interlace: the largest sett that fits.
//!
//! The cloth is built again with changed setts, in brackets that close to a tenth of a per cent: both setts by
//! one factor, the warp's alone, the weft's alone. The yarns' default widths follow the spacing as ever, so
//! the answer is that of the whole model. For round yarns in plain weave the limit is Peirce's
//! sqrt(1 - (p1/D)²) + sqrt(1 - (p2/D)²) = 1.

use super::cloth::{Cloth, ClothError};
use crate::spec::Weave;

/// The largest setts that fit, threads per mm, rounded down to a tenth of a per cent.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Fits {
    /// Ends and picks with both setts changed in the same ratio.
    pub both_per_mm: Option<(f64, f64)>,
    /// Ends with the picks left as they are.
    pub warp_per_mm: Option<f64>,
    /// Picks with the ends left as they are.
    pub weft_per_mm: Option<f64>,
}

/// A cloth that cannot be woven, and what would fit.
#[derive(Debug, Clone, PartialEq)]
pub struct Jammed {
    /// Why.
    pub why: ClothError,
    /// What would fit.
    pub fits: Fits,
}

impl Jammed {
    /// Finds what would fit instead of this weave.
    pub fn new(weave: &Weave, why: ClothError) -> Self {
        if matches!(
            why,
            ClothError::NoPath { .. }
                | ClothError::NoBalance { .. }
                | ClothError::NoOtherState { .. }
                | ClothError::Corner { .. }
        ) {
            // Not jammed: no sett would be an answer.
            let fits = Fits {
                both_per_mm: None,
                warp_per_mm: None,
                weft_per_mm: None,
            };
            return Self { why, fits };
        }
        let (ends, picks) = (weave.warp.sett_per_mm, weave.weft.sett_per_mm);
        let fits = |warp: f64, weft: f64| {
            let mut changed = weave.clone();
            changed.warp.sett_per_mm = warp;
            changed.weft.sett_per_mm = weft;
            Cloth::build(&changed, 1.0).is_ok()
        };
        let both = largest_factor(|factor| fits(factor * ends, factor * picks));
        Self {
            why,
            fits: Fits {
                both_per_mm: both.map(|factor| (factor * ends, factor * picks)),
                warp_per_mm: largest_factor(|factor| fits(factor * ends, picks)).map(|f| f * ends),
                weft_per_mm: largest_factor(|factor| fits(ends, factor * picks)).map(|f| f * picks),
            },
        }
    }
}

/// The largest factor below 1 that fits, within a tenth of a per cent and on the fitting side.
fn largest_factor(fits: impl Fn(f64) -> bool) -> Option<f64> {
    let mut inside = (1..60)
        .map(|step| 0.9f64.powi(step))
        .find(|factor| fits(*factor))?;
    let mut outside = inside / 0.9;
    while outside - inside > 1e-3 * inside {
        let middle = 0.5 * (inside + outside);
        if fits(middle) {
            inside = middle
        } else {
            outside = middle
        }
    }
    Some(inside)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pattern::Weaves;
    use crate::span::SourceText;
    use crate::spec::Spec;

    /// Round yarns of 0.5 mm in plain weave jam at p = sqrt(3)/2 D = 0.866 mm, both setts alike (Peirce).
    #[test]
    fn the_largest_sett_is_that_of_peirce_to_a_per_cent_and_on_the_safe_side() {
        // 0.5 mm round at packing 0.65 and 2.54 g/cm3: 324.17 tex.
        let text = "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"324.17 tex\"\nshape = \"round\"\n\
            packing = 0.65\n[weave]\npattern = \"plain\"\nwarp = { yarn = \"y\", sett = \"14 /cm\" }\n\
            weft = { yarn = \"y\", sett = \"14 /cm\" }\n";
        let weave = Spec::read(SourceText::new("t", text), &Weaves::builtin())
            .unwrap()
            .weave;
        let why = Cloth::build(&weave, 1.0).unwrap_err();
        let fits = Jammed::new(&weave, why).fits;
        let (ends, picks) = fits.both_per_mm.unwrap();
        let peirce = 1.0 / 0.75f64.sqrt();
        assert_eq!(ends, picks);
        assert!(ends <= peirce && ends > 0.99 * peirce, "{ends} {peirce}");
        // At 14 picks/cm, p2/D = 0.714: sqrt(1 - (p1/D)²) = 1 - 0.7 gives p1 = 0.954 mm.
        let p2: f64 = 1.0 / 1.4;
        let p1 = (1.0 - (1.0 - (1.0 - p2 * p2).sqrt()).powi(2)).sqrt();
        let alone = fits.warp_per_mm.unwrap();
        assert!(
            alone <= 1.0 / p1 && alone > 0.99 / p1,
            "{alone} {}",
            1.0 / p1
        );
    }
}
