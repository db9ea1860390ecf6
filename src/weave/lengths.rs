//! The state in which the yarns have the lengths of another.
//!
//! Pull and lengths are given, spacings follow: p = l/(1 + c) for both systems, with crimps c that hang on both spacings. Solved
//! by Broyden's method (1965) to 1e-9 of the lengths, from the spacings of the other state. In open cloth crimp changes little
//! with the spacing and p = l/(1 + c) may be followed at once; in dense cloth it falls faster than the spacing rises, and the
//! change is measured by differences first.

use super::cloth::ClothError;
use super::found::FoundState;
use super::heights::Balanced;
use super::pulled::{Pulled, Spacings};
use super::share::{Closed, SharedBy};

/// What the lengths may miss, relative, and the steps in which they are met.
const MET: f64 = 1e-9;
const STEPS: usize = 40;
/// Step of the spacings when the change of crimp is measured, relative.
const PART: f64 = 1e-4;

impl<'a> Pulled<'a> {
    /// The state in which the yarns have the lengths of another.
    ///
    /// # Errors
    /// `Jammed` where no such spacings were found.
    pub(super) fn with_lengths(
        self,
        counted: &FoundState<'_>,
    ) -> Result<FoundState<'a>, ClothError> {
        let (c1, c2) = counted.pulled.crimps(counted.spacings, &counted.balanced);
        // Length of weft between ends and of warp between picks.
        let lengths = (
            counted.spacings.0 * (1.0 + c2),
            counted.spacings.1 * (1.0 + c1),
        );
        // What held a measured crimp holds on.
        let weight = counted.warp_weight;
        let mut balanced = self.at(counted.spacings, weight, Some(&counted.balanced))?;
        let miss = |spacings: Spacings, balanced: &Balanced| {
            let (c1, c2) = self.crimps(spacings, balanced);
            (
                spacings.0 - lengths.0 / (1.0 + c2),
                spacings.1 - lengths.1 / (1.0 + c1),
            )
        };
        let mut spacings = counted.spacings;
        let mut missed = miss(spacings, &balanced);
        // Inverse of the change of the miss, nearly one: crimp changes little with the spacing.
        let mut inverse = [[1.0, 0.0], [0.0, 1.0]];
        let mut measured = false;
        for _ in 0..STEPS {
            if missed.0.abs() <= MET * lengths.0 && missed.1.abs() <= MET * lengths.1 {
                let jam_limited = balanced.jam_limited;
                return Ok(FoundState {
                    pulled: self,
                    spacings,
                    balanced,
                    closed: Closed {
                        by: SharedBy::KeptLengths,
                        jam_limited,
                        mismatch: None,
                    },
                    warp_weight: weight,
                });
            }
            let step = (
                -(inverse[0][0] * missed.0 + inverse[0][1] * missed.1),
                -(inverse[1][0] * missed.0 + inverse[1][1] * missed.1),
            );
            // Where the cloth jams or the miss grows the change is measured, and from then on half of the way is gone.
            let size = |missed: (f64, f64)| (missed.0 / lengths.0).hypot(missed.1 / lengths.1);
            let mut found = None;
            for halving in 0..6 {
                let share = 0.5_f64.powi(halving);
                let tried = (spacings.0 + share * step.0, spacings.1 + share * step.1);
                if let Ok(there) = self.at(tried, weight, Some(&balanced)) {
                    let next = miss(tried, &there);
                    if size(next) < size(missed) {
                        found = Some((tried, there, next, share));
                        break;
                    }
                }
                if !measured {
                    break;
                }
            }
            let Some((tried, there, next, share)) = found else {
                if measured {
                    break;
                }
                measured = true;
                inverse = self.measured_inverse(spacings, missed, (&balanced, weight), &miss)?;
                continue;
            };
            let step = (share * step.0, share * step.1);
            (spacings, balanced) = (tried, there);
            let change = (next.0 - missed.0, next.1 - missed.1);
            missed = next;
            // Broyden's change of the inverse.
            let moved = (
                inverse[0][0] * change.0 + inverse[0][1] * change.1,
                inverse[1][0] * change.0 + inverse[1][1] * change.1,
            );
            let along = step.0 * moved.0 + step.1 * moved.1;
            if along.abs() > 1e-30 {
                let row = (
                    step.0 * inverse[0][0] + step.1 * inverse[1][0],
                    step.0 * inverse[0][1] + step.1 * inverse[1][1],
                );
                let off = ((step.0 - moved.0) / along, (step.1 - moved.1) / along);
                inverse[0][0] += off.0 * row.0;
                inverse[0][1] += off.0 * row.1;
                inverse[1][0] += off.1 * row.0;
                inverse[1][1] += off.1 * row.1;
            }
        }
        Err(ClothError::Jammed)
    }

    /// The inverse of how the missed lengths change with both spacings, by differences.
    fn measured_inverse(
        &self,
        spacings: Spacings,
        missed: (f64, f64),
        (balanced, weight): (&Balanced, f64),
        miss: &impl Fn(Spacings, &Balanced) -> (f64, f64),
    ) -> Result<[[f64; 2]; 2], ClothError> {
        let by = |moved: Spacings, step: f64| -> Result<(f64, f64), ClothError> {
            let next = miss(moved, &self.at(moved, weight, Some(balanced))?);
            Ok(((next.0 - missed.0) / step, (next.1 - missed.1) / step))
        };
        let (ends, picks) = (PART * spacings.0, PART * spacings.1);
        let a = by((spacings.0 + ends, spacings.1), ends)?;
        let b = by((spacings.0, spacings.1 + picks), picks)?;
        let determinant = a.0 * b.1 - b.0 * a.1;
        if determinant == 0.0 || !determinant.is_finite() {
            return Err(ClothError::Jammed);
        }
        Ok([
            [b.1 / determinant, -b.0 / determinant],
            [-a.1 / determinant, a.0 / determinant],
        ])
    }
}
