//! One run along an elastica under pull: where it leads, and how that changes with how it starts.
//!
//! Between contacts a yarn of rigidity B under pull T obeys (M = B k, forces constant along the piece)
//!
//! ```text
//! k'' = l k - k^3/2,      l = T/B                       k: curvature, ' along the yarn
//! ```
//!
//! The run starts at the origin, level. Curvature and both of its variations are power series of order 8 to 18 in steps
//! whose last terms are below 4e-11; the position is the integral of (cos psi, sin psi) by Gauss-Legendre with eight
//! nodes in each step.
//!
//! Source: Love, A Treatise on the Mathematical Theory of Elasticity, the elastica (from memory for the article).
//! Accuracy: 1e-10 against the closed forms in the tests below.

#![expect(
    clippy::needless_range_loop,
    reason = "several small arrays are walked side by side: the index is the mathematics"
)]

/// What of the end state a run tells, in this order: curvature, its rate, direction, place along and across.
pub(super) const CURVATURE: usize = 0;
pub(super) const RATE: usize = 1;
pub(super) const ANGLE: usize = 2;
pub(super) const ALONG: usize = 3;
pub(super) const ACROSS: usize = 4;

/// The end of a run.
#[derive(Debug, Clone, Copy)]
pub(super) struct Run {
    /// End state.
    pub at: [f64; 5],
    /// Its change with the curvature and with the rate at the start.
    pub by: [[f64; 2]; 5],
}

const ORDER: usize = 18;
const TERM: f64 = 1e-11;
/// Runs whose curvature turns further than this in one step are cut, rad.
const STEP_TURN: f64 = 0.9;

/// Steps of one run; a piece that takes more is no yarn.
const STEPS: usize = 32;

/// Nodes and weights of Gauss-Legendre with eight points on 0..1 (Abramowitz and Stegun 25.4.30).
pub(super) const NODES: [f64; 8] = [
    0.019_855_071_751_231_884,
    0.101_666_761_293_186_63,
    0.237_233_795_041_835_5,
    0.408_282_678_752_175_1,
    0.591_717_321_247_825,
    0.762_766_204_958_164_5,
    0.898_333_238_706_813_4,
    0.980_144_928_248_768_1,
];
pub(super) const WEIGHTS: [f64; 8] = [
    0.050_614_268_145_188_13,
    0.111_190_517_226_687_24,
    0.156_853_322_938_943_64,
    0.181_341_891_689_181,
    0.181_341_891_689_181,
    0.156_853_322_938_943_64,
    0.111_190_517_226_687_24,
    0.050_614_268_145_188_13,
];

/// 1/((j + 1)(j + 2)) for the recurrences.
const INVERSE: [f64; ORDER + 1] = {
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

/// State on the way along an elastica: curvature, rate, direction, place.
pub(super) type State = [f64; 5];

const LIGHT: usize = 8;
/// Nodes and weights of Gauss-Legendre with three points on 0..1.
const FEW: [(f64, f64); 3] = [
    (0.112_701_665_379_258_3, 5.0 / 18.0),
    (0.5, 4.0 / 9.0),
    (0.887_298_334_620_741_7, 5.0 / 18.0),
];

/// A short step along the elastica, for looking where it runs: eighth order, no variations.
pub(super) fn stepped(state: &State, pull: f64, length: f64) -> State {
    if length == 0.0 {
        return *state;
    }
    let fast = pull.sqrt().max(state[CURVATURE].abs());
    let parts = (2.0 * fast * length.abs()).ceil().clamp(1.0, 64.0);
    let size = length / parts;
    let square = size * size;
    let mut at = *state;
    for _ in 0..parts as usize {
        let mut k = [0.0; LIGHT + 1];
        let mut squared = [0.0; LIGHT + 1];
        (k[0], k[1]) = (at[CURVATURE], at[RATE] * size);
        for j in 0..=LIGHT - 2 {
            squared[j] = (0..=j).map(|i| k[i] * k[j - i]).sum();
            let cube: f64 = (0..=j).map(|i| squared[i] * k[j - i]).sum();
            k[j + 2] = square * INVERSE[j] * (pull * k[j] - 0.5 * cube);
        }
        let angle = |t: f64| {
            (0..=LIGHT)
                .rev()
                .fold(0.0, |sum, j| sum * t + k[j] / (j + 1) as f64)
                * t
                * size
        };
        let (mut along, mut across) = (0.0, 0.0);
        for (node, weight) in FEW {
            let (sine, cosine) = (at[ANGLE] + angle(node)).sin_cos();
            along += weight * cosine;
            across += weight * sine;
        }
        at[ALONG] += size * along;
        at[ACROSS] += size * across;
        at[ANGLE] += angle(1.0);
        at[CURVATURE] = k.iter().sum();
        at[RATE] = (1..=LIGHT).map(|j| j as f64 * k[j]).sum::<f64>() / size;
    }
    at
}

impl Run {
    /// Runs `length_mm` along the elastica that starts with `curvature` (1/mm) and `rate` (1/mm2); `pull` is T/B, 1/mm2.
    pub(super) fn along(curvature: f64, rate_per_mm2: f64, pull: f64, length_mm: f64) -> Self {
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

#[cfg(test)]
mod tests {
    use super::*;

    /// The loop of a pulled rod (independent solution, shooting; the loop test of fibres): from its apex, bent to 2 lambda,
    /// back to where it crosses itself.
    #[test]
    fn the_tension_loop_closes_where_it_should() {
        let text = include_str!("../../../tests/reference/e_loop.json");
        let case = &serde_json::from_str::<serde_json::Value>(text).unwrap()[0];
        let of = |key: &str| case[key].as_f64().unwrap();
        let lambda = 3.7;
        let to = |s: f64| Run::along(2.0 * lambda, 0.0, lambda * lambda, s / lambda).at;
        let crossing = to(of("lam_s_crossing"));
        assert!(crossing[ALONG].abs() < 1e-11, "{crossing:?}");
        let length = crossing[ACROSS] * lambda;
        assert!((length / of("loop_length_times_lam") - 1.0).abs() < 1e-10);
        // Widest where it runs straight across its own axis.
        let upright = |s: f64| to(s)[ANGLE] - std::f64::consts::FRAC_PI_2;
        let widest = crate::root::rising_root(upright, 0.1, 1.9, 1e-13);
        let width = 2.0 * to(widest)[ALONG] * lambda;
        assert!((width / of("loop_width_times_lam") - 1.0).abs() < 1e-10);
        assert!((length / width / of("length_over_width") - 1.0).abs() < 1e-9);
        // Strain at the apex lambda d over the width: 1.0657 d/width.
        assert!((width / of("max_strain_times_width_over_d") - 1.0).abs() < 1e-10);
    }

    /// Variations by central differences, in a run of many steps.
    #[test]
    fn variations_are_differences() {
        let (curvature, rate, pull, length) = (1.3, -2.1, 9.0, 1.4);
        let run = Run::along(curvature, rate, pull, length);
        let h = 1e-6;
        let change = [
            (
                Run::along(curvature + h, rate, pull, length),
                Run::along(curvature - h, rate, pull, length),
            ),
            (
                Run::along(curvature, rate + h, pull, length),
                Run::along(curvature, rate - h, pull, length),
            ),
        ];
        for (i, (high, low)) in change.iter().enumerate() {
            for which in 0..5 {
                let slope = (high.at[which] - low.at[which]) / (2.0 * h);
                let scale = run.by[which][i].abs().max(1.0);
                assert!(
                    (slope - run.by[which][i]).abs() < 1e-6 * scale,
                    "{which} {i}"
                );
            }
        }
        // The light steps lead to nearly the same place: they only look where it runs.
        let mut state = [curvature, rate, 0.0, 0.0, 0.0];
        for _ in 0..7 {
            state = stepped(&state, pull, length / 7.0);
        }
        for which in 0..5 {
            assert!(
                (state[which] - run.at[which]).abs() < 1e-5 * run.at[which].abs().max(1.0),
                "{which}"
            );
        }
        assert_eq!(stepped(&state, pull, 0.0), state, "no way, no change");
    }
}
