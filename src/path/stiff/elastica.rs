//! One run along an elastica under pull: where it leads, and how that changes with how it starts.
//!
//! Between contacts a yarn of rigidity B under pull T obeys (M = B k, forces constant along the piece)
//!
//! ```text
//! k'' = l k - k³/2,     l = T/B                        k: curvature, ' along the yarn
//! f = hypot(l - k²/2, k')                              the force over B, the same all along
//! k = a cn(w s + u)     a² = 2 (l + f), w² = f, m = (l + f)/2f         where f >= l: the yarn waves
//! k = a dn(w s + u)     a² = 2 (l + f), w = a/2, m = 2f/(l + f)        where f <  l: it bends one way only
//! ```
//!
//! From the direction of the force, the tangent is ((l - k²/2), k')/f, so that the place is
//! ((l s - integral of k²/2)/f, (k - k at the start)/f). sn, cn and dn at the start are algebraic in curvature and rate, at the
//! end they follow by the addition theorem (Abramowitz and Stegun 16.17). The run starts at the origin, level.
//! Where f s² is small both formulas lose their digits and the run goes by power series (`series`).
//!
//! Source: Love, A Treatise on the Mathematical Theory of Elasticity, the elastica (from memory for the article).
//! Accuracy: 1e-10 against the closed forms in the tests below, and against the series.

use super::dual::Dual;
use super::jacobi::Jacobi;
use super::series::INVERSE;

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

/// A quantity and its change with curvature and rate at the start.
type Felt = Dual<2>;

/// f s² below which the closed form loses digits: it keeps 1e-16 over this.
const SHORT: f64 = 1e-3;

impl Run {
    /// Runs `length_mm` along the elastica that starts with `curvature` (1/mm) and `rate` (1/mm2); `pull` is T/B, 1/mm2.
    pub(super) fn along(curvature: f64, rate_per_mm2: f64, pull: f64, length_mm: f64) -> Self {
        let force = (pull - 0.5 * curvature * curvature).hypot(rate_per_mm2);
        let short = force * length_mm * length_mm < SHORT || force < SHORT * pull;
        if short || curvature == 0.0 && rate_per_mm2 == 0.0 {
            return Self::by_series(curvature, rate_per_mm2, pull, length_mm);
        }
        // A curve and its mirror image are one: the first bends upwards.
        let side = if curvature < 0.0 { -1.0 } else { 1.0 };
        let run = Self::closed(side * curvature, side * rate_per_mm2, pull, length_mm);
        run.map_or(
            Self {
                at: [f64::NAN; 5],
                by: [[0.0; 2]; 5],
            },
            |run| run.mirrored(side),
        )
    }

    /// The mirror image: what is odd across changes sign; changes with curvature and rate keep theirs.
    fn mirrored(mut self, side: f64) -> Self {
        for which in [CURVATURE, RATE, ANGLE, ACROSS] {
            self.at[which] *= side;
        }
        for i in 0..2 {
            self.by[ALONG][i] *= side;
        }
        self
    }

    /// The closed form, for a curvature not below zero; `None` where the run is no piece of yarn.
    fn closed(curvature: f64, rate: f64, pull: f64, length: f64) -> Option<Self> {
        let (k, r) = (Felt::own(curvature, 0), Felt::own(rate, 1));
        let (l, s) = (Felt::fixed(pull), Felt::fixed(length));
        let kk = k * k;
        let p = l - kk.times(0.5);
        let f = (p * p + r * r).sqrt();
        let sum = l + f;
        let a = sum.times(2.0).sqrt();
        // (f - l)(f + l), without what cancels.
        let over = r * r - kk * (l - kk.times(0.25));
        let waves = over.value >= 0.0;
        // f + p and f - p: their product is r².
        let (plus, minus) = if p.value > 0.0 {
            let plus = f + p;
            (plus, r * r / plus)
        } else {
            let minus = f - p;
            (r * r / minus, minus)
        };
        let (w, m, m1) = if waves {
            let double = f.times(2.0);
            (f.sqrt(), sum / double, over / (sum * double))
        } else {
            (a.times(0.5), f.times(2.0) / sum, -(over / (sum * sum)))
        };
        // sn, cn and dn at the start: of sn and its partner in the rate one by its root, the other from their product.
        let (sn0, cn0, dn0) = if waves {
            let cn = k / a;
            if p.value > 0.0 {
                let side = if rate < 0.0 { 1.0 } else { -1.0 };
                let sn = (plus / sum).sqrt().times(side);
                (sn, cn, -(r / (a * w * sn)))
            } else {
                let dn = (minus / f.times(2.0)).sqrt();
                (-(r / (a * w * dn)), cn, dn)
            }
        } else {
            let dn = k / a;
            if p.value > 0.0 {
                let sn = -(plus / f.times(2.0)).sqrt();
                (sn, -(r / (f * sn).times(2.0)), dn)
            } else {
                let cn = (minus / f.times(2.0)).sqrt();
                (-(r / (f * cn).times(2.0)), cn, dn)
            }
        };
        let on = Jacobi::at(w * s, m, m1)?;
        // 1 - m sn0² sn², without what cancels.
        let whole = on.cn * on.cn + on.sn * on.sn * dn0 * dn0;
        let sn = (sn0 * on.cn * on.dn + on.sn * cn0 * dn0) / whole;
        let cn = (cn0 * on.cn - sn0 * on.sn * dn0 * on.dn) / whole;
        let dn = (dn0 * on.dn - m * sn0 * on.sn * cn0 * on.cn) / whole;
        // The integral of sn² from start to end.
        let square = (on.square + sn0 * on.sn * sn) / w;
        let (k1, r1, squared) = if waves {
            (a * cn, -(a * w * sn * dn), a * a * (s - square))
        } else {
            (a * dn, -(f * sn * cn).times(2.0), a * a * (s - m * square))
        };
        let along = (l * s - squared.times(0.5)) / f;
        let across = (k1 - k) / f;
        let p1 = l - (k1 * k1).times(0.5);
        let turn = if waves {
            // The tangent never runs along the force: from its back the angle is the whole.
            (-r1).atan2(-p1) - (-r).atan2(-p)
        } else {
            let turn = (r1 * p - p1 * r).atan2(p1 * p + r1 * r);
            // It turns one way only, and by less than once round.
            if turn.value < -1e-9 {
                turn + Felt::fixed(std::f64::consts::TAU)
            } else {
                turn
            }
        };
        let x = (p * along + r * across) / f;
        let z = (p * across - r * along) / f;
        let told = [k1, r1, turn, x, z];
        let mut run = Self {
            at: [0.0; 5],
            by: [[0.0; 2]; 5],
        };
        for (which, felt) in told.iter().enumerate() {
            run.at[which] = felt.value;
            run.by[which] = felt.by;
        }
        Some(run)
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
        for (ours, theirs) in state.iter().zip(run.at) {
            assert!((ours - theirs).abs() < 1e-5 * theirs.abs().max(1.0));
        }
        assert_eq!(stepped(&state, pull, 0.0), state, "no way, no change");
    }

    /// Closed form and series are two ways to one end, next to every border between the cases.
    #[test]
    fn the_closed_form_is_the_series() {
        let mut compared = 0;
        for pull in [0.0, 0.3, 4.0, 90.0] {
            for curvature in [-2.0, -0.01, 0.0, 1e-6, 0.3, 1.9, 4.1] {
                for rate in [-30.0, -0.7, -1e-7, 0.0, 1e-4, 0.05, 3.0] {
                    for length in [0.04, 0.3, 0.65] {
                        let run = Run::along(curvature, rate, pull, length);
                        let other = Run::by_series(curvature, rate, pull, length);
                        // More than once round is no yarn.
                        if other.at[ANGLE].abs() > std::f64::consts::TAU {
                            continue;
                        }
                        let scale = other.at[CURVATURE].abs().max(curvature.abs()).max(1e-3);
                        let tell = format!("{pull} {curvature} {rate} {length}");
                        for (which, scale) in [
                            (CURVATURE, scale),
                            (ANGLE, 1.0),
                            (ALONG, length),
                            (ACROSS, length),
                        ] {
                            let off = (run.at[which] - other.at[which]).abs() / scale;
                            assert!(off < 1e-9, "{tell}: {which} {off:e}");
                            for i in 0..2 {
                                let size = other.by[which][0].abs() + other.by[which][1].abs();
                                let off = (run.by[which][i] - other.by[which][i]).abs();
                                assert!(
                                    off < 1e-6 * size.max(1e-6),
                                    "{tell}: {which} by {i} {off:e}"
                                );
                            }
                        }
                        compared += 1;
                    }
                }
            }
        }
        assert!(compared > 500, "{compared}");
    }
}
