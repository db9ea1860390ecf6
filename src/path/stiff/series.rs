//! A run along an elastica by power series.
//!
//! Curvature and both of its variations are power series of order 8 to 18 in steps whose last terms are below 4e-11; the
//! position is the integral of (cos psi, sin psi) by Gauss-Legendre with eight nodes in each step. Serves where the closed
//! form of `elastica` loses its digits: short runs and those next to a circle.

#![expect(
    clippy::needless_range_loop,
    reason = "several small arrays are walked side by side: the index is the mathematics"
)]

use super::elastica::{ACROSS, ALONG, ANGLE, CURVATURE, RATE, Run};
use crate::quadrature::{NODES, WEIGHTS};

const ORDER: usize = 18;
const TERM: f64 = 1e-11;
/// Runs whose curvature turns further than this in one step are cut, rad.
const STEP_TURN: f64 = 0.9;

/// Steps of one run; a piece that takes more is no yarn.
const STEPS: usize = 32;

/// 1/((j + 1)(j + 2)) for the recurrences.
pub(super) const INVERSE: [f64; ORDER + 1] = {
    let mut table = [0.0; ORDER + 1];
    let mut j = 0;
    while j <= ORDER {
        table[j] = 1.0 / ((j + 1) as f64 * (j + 2) as f64);
        j += 1;
    }
    table
};

/// Powers of the nodes, each over its exponent: a series' integral at all nodes is a sum over these.
const INTEGRAL: [[f64; 8]; ORDER + 1] = {
    let mut table = [[0.0; 8]; ORDER + 1];
    let mut node = 0;
    while node < 8 {
        let mut power = 1.0;
        let mut j = 0;
        while j <= ORDER {
            power *= NODES[node];
            table[j][node] = power / (j + 1) as f64;
            j += 1;
        }
        node += 1;
    }
    table
};

/// Orders of a series, and how far it reaches: x with x^(order - 1)/(order - 1)! below TERM.
const ORDERS: [(usize, f64); 6] = [
    (8, 0.090),
    (10, 0.248),
    (12, 0.49),
    (14, 0.81),
    (16, 1.187),
    (ORDER, 1.617),
];

/// Power series of curvature and of its variations with curvature and rate about one place, side by side.
struct Series {
    terms: [[f64; 4]; ORDER + 1],
    order: usize,
}

/// A series' values for curvature and both variations.
type Three = [f64; 4];

impl Series {
    /// The series in steps of `size`: the coefficients are the terms at its end.
    fn new(curvature: f64, rate: f64, pull: f64, size: f64, order: usize) -> Self {
        let square = size * size;
        let mut terms = [[0.0; 4]; ORDER + 1];
        let mut squared = [0.0; ORDER + 1];
        terms[0] = [curvature, 1.0, 0.0, 0.0];
        terms[1] = [rate * size, 0.0, size, 0.0];
        for j in 0..=order - 2 {
            // The square is symmetric: half of it twice.
            let mut sum = 0.0;
            for i in 0..j.div_ceil(2) {
                sum += terms[i][0] * terms[j - i][0];
            }
            if j == 0 {
                sum = 0.0;
            }
            sum *= 2.0;
            if j % 2 == 0 {
                sum += terms[j / 2][0] * terms[j / 2][0];
            }
            squared[j] = sum;
            let (mut even, mut odd) = ([0.0; 4], [0.0; 4]);
            let mut i = 0;
            while i < j {
                let (a, b) = (squared[i], squared[i + 1]);
                let (first, second) = (&terms[j - i], &terms[j - i - 1]);
                for lane in 0..4 {
                    even[lane] += a * first[lane];
                    odd[lane] += b * second[lane];
                }
                i += 2;
            }
            if i == j {
                for lane in 0..4 {
                    even[lane] += squared[j] * terms[0][lane];
                }
            }
            let factor = square * INVERSE[j];
            for lane in 0..4 {
                let cubic = if lane == 0 { 0.5 } else { 1.5 };
                terms[j + 2][lane] =
                    factor * (pull * terms[j][lane] - cubic * (even[lane] + odd[lane]));
            }
        }
        Self { terms, order }
    }

    /// The last terms over the largest they are measured by.
    fn tail(&self) -> f64 {
        let mut tail = 0.0_f64;
        for lane in 0..3 {
            let term = |j: usize| self.terms[j][lane].abs();
            let scale = term(0) + term(1);
            if scale > 0.0 {
                tail = tail.max((term(self.order) + term(self.order - 1)) / scale);
            }
        }
        tail
    }

    fn end(&self) -> Three {
        let mut sum = [0.0; 4];
        for j in (0..=self.order).rev() {
            for lane in 0..4 {
                sum[lane] += self.terms[j][lane];
            }
        }
        sum
    }

    /// Rates at the end, by the step.
    fn end_rate(&self) -> Three {
        let mut sum = [0.0; 4];
        for j in (1..=self.order).rev() {
            for lane in 0..4 {
                sum[lane] += j as f64 * self.terms[j][lane];
            }
        }
        sum
    }

    /// Integrals from the step's start: at the nodes, and at its end.
    fn integrals(&self) -> ([[f64; 8]; 3], Three) {
        let mut at = [[0.0; 8]; 3];
        let mut whole = [0.0; 4];
        for j in (0..=self.order).rev() {
            let (term, table) = (&self.terms[j], &INTEGRAL[j]);
            for lane in 0..3 {
                for node in 0..8 {
                    at[lane][node] += term[lane] * table[node];
                }
            }
            let by = 1.0 / (j + 1) as f64;
            for lane in 0..4 {
                whole[lane] += term[lane] * by;
            }
        }
        (at, whole)
    }
}

impl Run {
    /// [`Run::along`] by series.
    pub(super) fn by_series(curvature: f64, rate_per_mm2: f64, pull: f64, length_mm: f64) -> Self {
        let mut run = Self {
            at: [curvature, rate_per_mm2, 0.0, 0.0, 0.0],
            by: [[1.0, 0.0], [0.0, 1.0], [0.0; 2], [0.0; 2], [0.0; 2]],
        };
        let mut left = length_mm;
        let mut steps = 0;
        while left > 1e-15 * length_mm {
            steps += 1;
            if steps > STEPS {
                // Coiled up: no piece of yarn, and the caller's Newton turns back.
                run.at = [f64::NAN; 5];
                return run;
            }
            // cosh(x) needs x below what the order reaches; what bends or turns faster is found by its last terms.
            let fast = pull.sqrt().max(1.3 * run.at[CURVATURE].abs());
            let farthest = ORDERS[ORDERS.len() - 1].1;
            let mut size = left / (fast * left / farthest).ceil().max(1.0);
            let mut series;
            loop {
                let order = ORDERS
                    .iter()
                    .find(|(_, reach)| fast * size <= *reach)
                    .map_or(ORDER, |(order, _)| *order);
                series = Series::new(run.at[CURVATURE], run.at[RATE], pull, size, order);
                if series.tail() <= 4.0 * TERM && run.at[CURVATURE].abs() * size <= STEP_TURN {
                    break;
                }
                if order < ORDER {
                    series = Series::new(run.at[CURVATURE], run.at[RATE], pull, size, ORDER);
                    if series.tail() <= 4.0 * TERM && run.at[CURVATURE].abs() * size <= STEP_TURN {
                        break;
                    }
                }
                size *= 0.5;
                // The floor only stops nonsense input.
                if size < 1e-6 * length_mm {
                    break;
                }
            }
            run.step(&series, size);
            left -= size;
        }
        run
    }

    fn step(&mut self, series: &Series, size: f64) {
        let (nodes, whole) = series.integrals();
        let (end, end_rate) = (series.end(), series.end_rate());
        let (mut along, mut across) = (0.0, 0.0);
        let (mut along_by, mut across_by) = ([0.0; 2], [0.0; 2]);
        for node in 0..8 {
            let weight = WEIGHTS[node] * size;
            let (sine, cosine) = (size * nodes[0][node]).sin_cos();
            along += weight * cosine;
            across += weight * sine;
            let (sine, cosine) = (weight * size * sine, weight * size * cosine);
            for i in 0..2 {
                along_by[i] -= sine * nodes[1 + i][node];
                across_by[i] += cosine * nodes[1 + i][node];
            }
        }
        // What the end of this step makes of its start, then of the whole run's start.
        let (sine, cosine) = self.at[ANGLE].sin_cos();
        let start = self.by;
        let chain = |a: f64, b: f64, i: usize| a * start[CURVATURE][i] + b * start[RATE][i];
        for i in 0..2 {
            let dx = chain(along_by[0], along_by[1], i);
            let dz = chain(across_by[0], across_by[1], i);
            let turned = start[ANGLE][i];
            self.by[ALONG][i] +=
                cosine * dx - sine * dz - (sine * along + cosine * across) * turned;
            self.by[ACROSS][i] +=
                sine * dx + cosine * dz + (cosine * along - sine * across) * turned;
            self.by[CURVATURE][i] = chain(end[1], end[2], i);
            self.by[RATE][i] = chain(end_rate[1], end_rate[2], i) / size;
            self.by[ANGLE][i] += size * chain(whole[1], whole[2], i);
        }
        self.at[ALONG] += cosine * along - sine * across;
        self.at[ACROSS] += sine * along + cosine * across;
        self.at[CURVATURE] = end[0];
        self.at[RATE] = end_rate[0] / size;
        self.at[ANGLE] += size * whole[0];
    }
}
