//! One bracketed root of a continuous function, by a kept library.
//!
//! Method: ITP (Oliveira and Takahashi 2020, doi 10.1145/3423597) as `kurbo` keeps it: never slower than
//! bisection by more than one step, and the answer lies within the accuracy asked for.

use kurbo::common::solve_itp;

/// The place in `[low, high]` where `f` turns from below zero to above it, within `accuracy` (same unit).
///
/// Where `f` is not below zero at `low`, `low` is returned; where it is not above zero at `high`, `high`:
/// the nearest end of the bracket, never an answer outside it.
pub fn rising_root(mut f: impl FnMut(f64) -> f64, low: f64, high: f64, accuracy: f64) -> f64 {
    let (at_low, at_high) = (f(low), f(high));
    if at_low >= 0.0 || low >= high {
        return low;
    }
    if at_high <= 0.0 {
        return high;
    }
    // Below a few units in the last place no accuracy can be met.
    let floor = 4.0 * f64::EPSILON * low.abs().max(high.abs());
    let epsilon = accuracy.max(floor);
    solve_itp(
        f,
        low,
        high,
        epsilon,
        1,
        0.2 / (high - low),
        at_low,
        at_high,
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn meets_the_accuracy_asked_for() {
        for accuracy in [1e-3, 1e-6, 1e-9, 1e-12, 0.0] {
            let root = rising_root(|x| x * x - 2.0, 0.0, 2.0, accuracy);
            assert!(
                (root - 2f64.sqrt()).abs() <= accuracy.max(2e-15),
                "{accuracy}"
            );
        }
    }

    #[test]
    fn without_a_change_of_sign_the_nearer_end_is_returned() {
        assert_eq!(rising_root(|x| x + 1.0, 0.0, 2.0, 1e-9), 0.0);
        assert_eq!(rising_root(|x| x - 3.0, 0.0, 2.0, 1e-9), 2.0);
    }
}
