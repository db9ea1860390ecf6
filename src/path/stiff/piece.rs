//! A free piece of yarn between two contacts: its places and directions are given, its length is free.
//!
//! In units of T + B/reach² (see `stiffness`) pull is t, rigidity b, and b + t reach² = reach², so that both
//! limits are finite: b = 0 is the taut thread, t = 0 the elastica without pull. With l = t/b the piece is
//!
//! ```text
//! k'' = l k - k³/2
//! force = (t - b k²/2) along - b k' across          the same all along the piece
//! ```
//!
//! The second line's first term is what free length asks for (force along + b k²/2 = t). A short piece is
//! shot from its middle to both ends (`elastica`); unknown are k and k' in the middle and the length, found by Newton.
//! Where sqrt(l) times the length is large both ends no longer feel each other (see [`Stiffness::long`]): a layer at
//! each end of a straight piece of direction beta, in closed form. With d the angle between end and straight piece,
//!
//! ```text
//! k = 2 sqrt(l) sin(d/2)        sideways (2/sqrt(l)) sin(d/2)        shorter by (2/sqrt(l))(1 - cos(d/2))
//! ```
//!
//! Source: Love, the elastica (from memory for the article). Accuracy 1e-10 of the curvature; where the two forms meet they
//! differ by a thousandth of the accuracy asked for.

use super::elastica::{ACROSS, ALONG, ANGLE, CURVATURE, stepped};
use super::shot::{Shot, inverted};
use super::stiffness::Stiffness;

/// Where a piece ends: place, mm, and direction, rad.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct End {
    pub x: f64,
    pub z: f64,
    pub angle: f64,
}

/// What a piece hangs on: the change of anything with the direction of either end and with how far apart they are.
pub(super) type By = [f64; 4];

/// Quantities with their change.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Felt {
    pub value: f64,
    pub by: By,
}

/// A free piece.
#[derive(Debug, Clone, Copy)]
pub(super) struct Piece {
    pub form: Form,
    /// Where it was found: direction of either end, how far apart they are.
    pub inputs: By,
    /// By how much its closure missed before the last, linear step.
    pub missed: f64,
    /// Length, mm.
    pub length: f64,
    /// Root of the rigidity times the curvature at either end.
    pub bend: [Felt; 2],
    /// Rigidity times the rate of curvature at either end.
    pub rate: [f64; 2],
    /// The force along the cloth and up.
    pub force: [Felt; 2],
}

/// How a piece was found.
#[derive(Debug, Clone, Copy)]
pub(super) enum Form {
    /// Curvature and rate in the middle; their change and that of the length.
    Shot {
        curvature: f64,
        rate: f64,
        by: [By; 3],
        /// Direction and place of the middle, seen from the first end.
        middle: [f64; 3],
    },
    /// Direction of the straight piece between both end layers.
    Layers { beta: f64 },
}

/// Newton steps within one piece.
const STEPS: usize = 14;
/// Relative miss of a piece's closure from which the rest is made up for in one linear step: its error is the square.
pub(super) const CLOSED: f64 = 3e-6;
/// The same while the contacts still move.
pub(super) const LOOSE: f64 = 2e-2;

impl Piece {
    /// The piece from one end to the other, started from `like` where there is one, its closure to `closed`; `None` where it
    /// is not found.
    pub(super) fn between(
        from: &End,
        to: &End,
        stiffness: &Stiffness,
        like: Option<&Self>,
        closed: f64,
    ) -> Option<Self> {
        let (dx, dz) = (to.x - from.x, to.z - from.z);
        let chord = dx.hypot(dz);
        if !(chord > 0.0 && chord.is_finite()) {
            return None;
        }
        // A piece near the limit keeps its form, or Newton would see it jump.
        let long = match like.map(|piece| piece.form) {
            Some(Form::Shot { .. }) => 1.1 * stiffness.long,
            _ => stiffness.long,
        };
        if stiffness.rigidity == 0.0 || stiffness.ratio.sqrt() * chord > long {
            Self::layers(from, to, stiffness)
        } else {
            Self::shot(from, to, stiffness, like, closed)
        }
    }

    fn layers(from: &End, to: &End, stiffness: &Stiffness) -> Option<Self> {
        let (dx, dz) = (to.x - from.x, to.z - from.z);
        let reach = if stiffness.rigidity == 0.0 {
            0.0
        } else {
            2.0 / stiffness.ratio.sqrt()
        };
        let mut beta = dz.atan2(dx);
        let mut slope = 0.0;
        for _ in 0..STEPS {
            let (sine, cosine) = beta.sin_cos();
            let (d0, d1) = (from.angle - beta, to.angle - beta);
            let miss = cosine * dz - sine * dx - reach * ((d0 / 2.0).sin() + (d1 / 2.0).sin());
            slope =
                -(cosine * dx + sine * dz) + 0.5 * reach * ((d0 / 2.0).cos() + (d1 / 2.0).cos());
            if slope >= 0.0 {
                return None;
            }
            let step = (-miss / slope).clamp(-0.3, 0.3);
            beta += step;
            if step.abs() < 1e-15 {
                break;
            }
        }
        let (d0, d1) = (from.angle - beta, to.angle - beta);
        if d0.abs() > 3.0 || d1.abs() > 3.0 {
            return None;
        }
        let (sine, cosine) = beta.sin_cos();
        let half = |d: f64| (d / 2.0).sin_cos();
        let ((s0, c0), (s1, c1)) = (half(d0), half(d1));
        // miss(beta, inputs) = 0: beta moves with the inputs by -(change of miss)/slope.
        let beta_by: By = [
            0.5 * reach * c0 / slope,
            0.5 * reach * c1 / slope,
            sine / slope,
            -cosine / slope,
        ];
        let root_pull = stiffness.pull.sqrt();
        let bend = |sign: f64, s: f64, c: f64, own: usize| {
            let mut by = beta_by.map(|b| -sign * root_pull * c * b);
            by[own] += sign * root_pull * c;
            Felt {
                value: sign * 2.0 * root_pull * s,
                by,
            }
        };
        let shorter = reach * (2.0 - c0 - c1);
        let length = cosine * dx + sine * dz + shorter;
        if length <= 0.0 {
            return None;
        }
        let pull = stiffness.pull;
        Some(Self {
            form: Form::Layers { beta },
            inputs: inputs(from, to),
            missed: 0.0,
            length,
            bend: [bend(-1.0, s0, c0, 0), bend(1.0, s1, c1, 1)],
            rate: [pull * d0.sin(), pull * d1.sin()],
            force: [
                Felt {
                    value: pull * cosine,
                    by: beta_by.map(|b| -pull * sine * b),
                },
                Felt {
                    value: pull * sine,
                    by: beta_by.map(|b| pull * cosine * b),
                },
            ],
        })
    }

    /// The straight, lightly bent piece with these ends: where Newton starts.
    fn first_guess(from: &End, to: &End, ratio: f64) -> (f64, f64, f64) {
        let (dx, dz) = (to.x - from.x, to.z - from.z);
        let (chord, beta) = (dx.hypot(dz), dz.atan2(dx));
        let (d0, d1) = (from.angle - beta, to.angle - beta);
        let (even, odd) = (0.5 * (d0 + d1), 0.5 * (d1 - d0));
        let length = chord * (1.0 + (d0 * d0 + d1 * d1 - 0.5 * d0 * d1) / 30.0);
        let m = 0.5 * ratio.sqrt() * length;
        // odd = A sinh(m)/m L/2; even = B/l (cosh m - sinh m/m), l = (2m/L)².
        let (curvature, rate) = if m < 0.1 {
            (2.0 * odd / length, 12.0 * even / (length * length))
        } else {
            let l = ratio;
            (
                odd * l.sqrt() / m.sinh(),
                even * l / (m.cosh() - m.sinh() / m),
            )
        };
        (curvature, rate, length)
    }

    fn shot(
        from: &End,
        to: &End,
        stiffness: &Stiffness,
        like: Option<&Self>,
        closed: f64,
    ) -> Option<Self> {
        let inputs = inputs(from, to);
        let warm = like.and_then(|piece| match piece.form {
            Form::Shot {
                curvature,
                rate,
                by,
                ..
            } => {
                let moved = |value: f64, by: &By| {
                    value
                        + (0..4)
                            .map(|i| by[i] * (inputs[i] - piece.inputs[i]))
                            .sum::<f64>()
                };
                let length = moved(piece.length, &by[2]);
                Some((
                    moved(curvature, &by[0]),
                    moved(rate, &by[1]),
                    length.clamp(0.6 * piece.length, 1.6 * piece.length),
                ))
            }
            Form::Layers { .. } => None,
        });
        warm.and_then(|start| Self::newton(from, to, stiffness, start, closed))
            .or_else(|| {
                let start = Self::first_guess(from, to, stiffness.ratio);
                Self::newton(from, to, stiffness, start, closed)
            })
    }

    fn newton(
        from: &End,
        to: &End,
        stiffness: &Stiffness,
        start: (f64, f64, f64),
        closed: f64,
    ) -> Option<Self> {
        let (dx, dz) = (to.x - from.x, to.z - from.z);
        let chord = dx.hypot(dz);
        let turn = to.angle - from.angle;
        let (mut curvature, mut rate, mut length) = start;
        let mut last = f64::INFINITY;
        let mut damp = 1.0;
        let mut before = (curvature, rate, length);
        let mut step = [0.0; 3];
        for _ in 0..STEPS {
            let shot = Shot::new(curvature, rate, length, stiffness.ratio);
            let (miss, jacobian) = shot.closure(from.angle, dx, dz, turn);
            let size = (miss[0].abs()).max(miss[1].hypot(miss[2]) / chord);
            if !size.is_finite() || size > 2.0 * last.max(1e-9) {
                // Too far: back half of the way.
                damp *= 0.5;
                if damp < 1e-3 {
                    return None;
                }
                (curvature, rate, length) = (
                    before.0 - damp * step[0],
                    before.1 - damp * step[1],
                    before.2 * (-damp * step[2] / before.2).clamp(-0.7, 0.7).exp(),
                );
                continue;
            }
            let inverse = inverted(&jacobian)?;
            for i in 0..3 {
                step[i] = (0..3).map(|j| inverse[i][j] * miss[j]).sum();
            }
            if size < closed && step[2].abs() < 0.3 * length {
                return Some(Self {
                    missed: size,
                    ..shot.told(from, to, stiffness, &inverse, &miss)
                });
            }
            last = size;
            damp = 1.0;
            before = (curvature, rate, length);
            // Neither the length nor the turn may leap.
            let leap = (step[2] / length)
                .abs()
                .max(step[0].abs() * length)
                .max(step[1].abs() * length * length / 6.0);
            let bound = 1.0 + turn.abs();
            if leap > bound && stiffness.ratio.sqrt() * length < 4.0 {
                for s in &mut step {
                    *s *= bound / leap;
                }
            }
            curvature -= step[0];
            rate -= step[1];
            length *= (-step[2] / length).clamp(-0.7, 0.7).exp();
            if length.is_nan() || length > 100.0 * chord {
                return None;
            }
        }
        None
    }

    /// The piece's energy: pull times length and half of rigidity times curvature squared, over the length.
    pub(super) fn energy(&self, dx: f64, dz: f64, stiffness: &Stiffness) -> f64 {
        // force . (end - start) = pull length - (rigidity/2) integral of k².
        2.0 * stiffness.pull * self.length - self.force[0].value * dx - self.force[1].value * dz
    }

    /// Largest curvature on it, 1/mm: at an end, or where its rate vanishes between them.
    pub(super) fn peak(&self, stiffness: &Stiffness) -> f64 {
        if stiffness.root == 0.0 {
            return 0.0;
        }
        let ends = [0, 1].map(|end| self.bend[end].value / stiffness.root);
        let mut peak = ends[0].abs().max(ends[1].abs());
        // |k| has a maximum between the ends where it rises from one and does not go on rising to the other.
        let rises = |end: usize| ends[end] * self.rate[end];
        let turns = ends[0] * ends[1] < 0.0;
        let inside = rises(0) > 0.0 && (turns || rises(1) < 0.0) || turns && rises(1) < 0.0;
        if inside && stiffness.rigidity > 0.0 {
            // k'^2 = l k^2 - k^4/4 + C: at the maximum k^2 = 2 (l + sqrt(l^2 + C)), and l^2 + C is the force's square.
            let force = self.force[0].value.hypot(self.force[1].value) / stiffness.rigidity;
            peak = peak.max((2.0 * (stiffness.ratio + force)).sqrt());
        }
        peak
    }

    /// Places along the whole piece in `count` steps, both ends told.
    pub(super) fn places(
        &self,
        from: &End,
        to: &End,
        stiffness: &Stiffness,
        count: usize,
    ) -> Vec<Place> {
        self.places_between(from, to, stiffness, (0.0, self.length), count)
    }

    /// Places between two lengths from the piece's start.
    pub(super) fn places_between(
        &self,
        from: &End,
        to: &End,
        stiffness: &Stiffness,
        between: (f64, f64),
        count: usize,
    ) -> Vec<Place> {
        let at = |i: usize| between.0 + (between.1 - between.0) * i as f64 / count as f64;
        match self.form {
            Form::Shot {
                curvature,
                rate,
                middle,
                ..
            } => {
                let ratio = stiffness.ratio;
                let half = 0.5 * self.length;
                // Stations are walked from the middle outwards: towards the ends the walk would drift.
                let mut state = [
                    curvature,
                    rate,
                    middle[0],
                    from.x + middle[1],
                    from.z + middle[2],
                ];
                let mut out = vec![Place::default(); count + 1];
                let first_right = (0..=count).find(|i| at(*i) >= half).unwrap_or(count + 1);
                let told = |s: f64, state: &[f64; 5]| Place {
                    s,
                    x: state[ALONG],
                    z: state[ACROSS],
                    angle: state[ANGLE],
                    curvature: state[CURVATURE],
                };
                let start = state;
                let mut s = half;
                for (i, place) in out.iter_mut().enumerate().skip(first_right) {
                    state = stepped(&state, ratio, at(i) - s);
                    s = at(i);
                    *place = told(s, &state);
                }
                (state, s) = (start, half);
                for (i, place) in out.iter_mut().enumerate().take(first_right).rev() {
                    state = stepped(&state, ratio, at(i) - s);
                    s = at(i);
                    *place = told(s, &state);
                }
                out
            }
            Form::Layers { beta } => {
                let lambda = stiffness.ratio.sqrt();
                let layer = Layer {
                    lambda,
                    sine: beta.sin(),
                    cosine: beta.cos(),
                };
                (0..=count)
                    .map(|i| {
                        let s = at(i);
                        let first = 2.0 * s <= self.length;
                        let (end, side, away) = if first {
                            (from, 1.0, s)
                        } else {
                            (to, -1.0, self.length - s)
                        };
                        let (turn, dx, dz) = layer.at(end.angle - beta, away);
                        Place {
                            s,
                            x: end.x + side * dx,
                            z: end.z + side * dz,
                            angle: beta + turn,
                            curvature: if lambda.is_infinite() {
                                0.0
                            } else {
                                -side * 2.0 * lambda * (turn / 2.0).sin()
                            },
                        }
                    })
                    .collect()
            }
        }
    }
}

/// The layer at the end of a straight piece: tan(d/4) falls as e^(-lambda s).
struct Layer {
    lambda: f64,
    sine: f64,
    cosine: f64,
}

impl Layer {
    /// Angle left at `s` from the end, and the way there.
    fn at(&self, turn: f64, s: f64) -> (f64, f64, f64) {
        if self.lambda.is_infinite() {
            return (0.0, self.cosine * s, self.sine * s);
        }
        let here = 4.0 * ((turn / 4.0).tan() * (-self.lambda * s).exp()).atan();
        let (s0, c0) = (turn / 2.0).sin_cos();
        let (s1, c1) = (here / 2.0).sin_cos();
        let along = s - 2.0 / self.lambda * (c1 - c0);
        let across = 2.0 / self.lambda * (s0 - s1);
        (
            here,
            self.cosine * along - self.sine * across,
            self.sine * along + self.cosine * across,
        )
    }
}

/// Direction of both ends and how far apart they are.
pub(super) fn inputs(from: &End, to: &End) -> By {
    [from.angle, to.angle, to.x - from.x, to.z - from.z]
}

/// A place on a piece.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Place {
    /// Length from the piece's start, mm.
    pub s: f64,
    pub x: f64,
    pub z: f64,
    pub angle: f64,
    /// 1/mm.
    pub curvature: f64,
}
