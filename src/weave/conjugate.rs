//! Linear equations known only by what they make of a vector: conjugate gradients (Hestenes and Stiefel 1952).
//!
//! For symmetric equations that lift the whole cloth at no cost: a common change of all unknowns is left out.

/// Steps beyond which more would only turn in rounding.
const STEPS: usize = 1500;

/// Solves `apply(x) = -right` by conjugate gradients until the rest is below this share; stops where `apply` ceases
/// to be positive, with what it has.
pub(super) fn conjugate(apply: impl Fn(&[f64]) -> Vec<f64>, right: &[f64], share: f64) -> Vec<f64> {
    let n = right.len();
    let dot = |a: &[f64], b: &[f64]| a.iter().zip(b).map(|(a, b)| a * b).sum::<f64>();
    let mut x = vec![0.0; n];
    // The whole cloth may be lifted at no cost: that is left out.
    let mean = right.iter().sum::<f64>() / n as f64;
    let mut rest: Vec<f64> = right.iter().map(|r| mean - r).collect();
    let mut way = rest.clone();
    let mut square = dot(&rest, &rest);
    let enough = share * share * square;
    for step in 0..(2 * n + 20).min(STEPS) {
        if square <= enough || square == 0.0 {
            break;
        }
        let pushed = apply(&way);
        let curve = dot(&way, &pushed);
        if curve <= 1e-14 * dot(&way, &way).sqrt() * dot(&pushed, &pushed).sqrt() {
            if step == 0 {
                x = way;
            }
            break;
        }
        let a = square / curve;
        for i in 0..n {
            x[i] += a * way[i];
            rest[i] -= a * pushed[i];
        }
        let next = dot(&rest, &rest);
        let b = next / square;
        square = next;
        for i in 0..n {
            way[i] = rest[i] + b * way[i];
        }
    }
    x
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A chain of springs, ends free: solved up to a common lift.
    #[test]
    fn springs_are_solved_but_for_a_common_lift() {
        let springs = |x: &[f64]| -> Vec<f64> {
            let mut force = vec![0.0; x.len()];
            for i in 1..x.len() {
                let pull = i as f64 * (x[i] - x[i - 1]);
                force[i] += pull;
                force[i - 1] -= pull;
            }
            force
        };
        let wanted = [0.3, -0.7, 0.2, 0.5, -0.3];
        let right: Vec<f64> = springs(&wanted).iter().map(|force| -force).collect();
        let found = conjugate(springs, &right, 1e-14);
        for (ours, theirs) in found.iter().zip(wanted) {
            assert!((ours - theirs).abs() < 1e-12, "{found:?}");
        }
    }
}
