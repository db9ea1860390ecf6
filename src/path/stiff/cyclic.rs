//! Linear equations in a ring: every unknown knows its two neighbours, the last those of the first.
//!
//! Gauss elimination without exchange of rows along the ring, its two corners by a rank-one change (Sherman and
//! Morrison 1950). The factors are kept for more right sides.

/// A factored ring of equations.
#[derive(Debug, Clone, Default)]
pub(super) struct Ring {
    lower: Vec<f64>,
    /// Inverse pivots.
    pivot: Vec<f64>,
    upper: Vec<f64>,
    /// Solution for the corner's column, and what it takes from the last unknown.
    corner: Vec<f64>,
    last_by: f64,
    whole: f64,
}

impl Ring {
    /// Factors the ring with these rows: `lower[i]` stands before the diagonal of row i, `upper[i]` behind it.
    /// `None` where a pivot vanishes.
    pub(super) fn new(lower: Vec<f64>, diagonal: &[f64], upper: Vec<f64>) -> Option<Self> {
        let n = diagonal.len();
        let mut ring = Self {
            lower,
            pivot: vec![0.0; n],
            upper,
            corner: vec![0.0; n],
            last_by: 0.0,
            whole: 1.0,
        };
        if n == 1 {
            let whole = diagonal[0] + ring.lower[0] + ring.upper[0];
            ring.pivot[0] = 1.0 / whole;
            return (whole != 0.0 && whole.is_finite()).then_some(ring);
        }
        // Corners: row 0 feels the last by lower[0], the last row feels the first by upper[n - 1].
        let (first_feels_last, last_feels_first) = (ring.lower[0], ring.upper[n - 1]);
        let gamma = -diagonal[0];
        if gamma == 0.0 {
            return None;
        }
        let changed = |i: usize| {
            if i == 0 {
                diagonal[0] - gamma
            } else if i == n - 1 {
                diagonal[i] - first_feels_last * last_feels_first / gamma
            } else {
                diagonal[i]
            }
        };
        let mut pivot = changed(0);
        for i in 0..n {
            if i > 0 {
                pivot = changed(i) - ring.lower[i] * ring.upper[i - 1] * ring.pivot[i - 1];
            }
            if pivot == 0.0 || !pivot.is_finite() {
                return None;
            }
            ring.pivot[i] = 1.0 / pivot;
        }
        let mut corner = vec![0.0; n];
        corner[0] = gamma;
        corner[n - 1] = last_feels_first;
        ring.straight(&mut corner);
        ring.last_by = first_feels_last / gamma;
        ring.whole = 1.0 + corner[0] + ring.last_by * corner[n - 1];
        ring.corner = corner;
        (ring.whole != 0.0 && ring.whole.is_finite()).then_some(ring)
    }

    fn straight(&self, x: &mut [f64]) {
        let n = x.len();
        for i in 1..n {
            x[i] -= self.lower[i] * self.pivot[i - 1] * x[i - 1];
        }
        x[n - 1] *= self.pivot[n - 1];
        for i in (0..n - 1).rev() {
            x[i] = (x[i] - self.upper[i] * x[i + 1]) * self.pivot[i];
        }
    }

    /// Solves for one right side, in place.
    pub(super) fn solve(&self, x: &mut [f64]) {
        let n = x.len();
        if n == 1 {
            x[0] *= self.pivot[0];
            return;
        }
        self.straight(x);
        let share = (x[0] + self.last_by * x[n - 1]) / self.whole;
        for (x, c) in x.iter_mut().zip(&self.corner) {
            *x -= share * c;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_ring_solves_what_it_multiplies() {
        for n in 1..7 {
            let lower: Vec<f64> = (0..n).map(|i| 0.3 + 0.1 * i as f64).collect();
            let diagonal: Vec<f64> = (0..n).map(|i| 2.5 + 0.2 * i as f64).collect();
            let upper: Vec<f64> = (0..n).map(|i| 0.7 - 0.1 * i as f64).collect();
            let wanted: Vec<f64> = (0..n).map(|i| (1.0 + i as f64).sin()).collect();
            let mut right: Vec<f64> = (0..n)
                .map(|i| {
                    lower[i] * wanted[(i + n - 1) % n]
                        + diagonal[i] * wanted[i]
                        + upper[i] * wanted[(i + 1) % n]
                })
                .collect();
            Ring::new(lower, &diagonal, upper)
                .unwrap()
                .solve(&mut right);
            for (ours, theirs) in right.iter().zip(&wanted) {
                assert!((ours - theirs).abs() < 1e-12, "{n}");
            }
        }
    }
}
