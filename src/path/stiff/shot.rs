//! A short piece shot from its middle to both ends, and what hangs on its ends.
//!
//! Unknown are curvature, its rate and the length; three equations close turn and place. What the piece tells (curvature at
//! either end, force) changes with its inputs through the unknowns: by the inverse of the closure's own changes.

#![expect(
    clippy::needless_range_loop,
    reason = "several small arrays are walked side by side: the index is the mathematics"
)]

use super::elastica::{ACROSS, ALONG, ANGLE, CURVATURE, RATE, Run};
use super::piece::{End, Felt, Form, Piece, inputs};
use super::stiffness::Stiffness;

/// Both halves of a piece, run from its middle.
pub(super) struct Shot {
    /// Curvature, 1/mm, and its rate, 1/mm2, in the middle.
    curvature: f64,
    rate: f64,
    /// Length of both halves, mm.
    length: f64,
    left: Run,
    right: Run,
}

impl Shot {
    pub(super) fn new(curvature: f64, rate: f64, length: f64, ratio: f64) -> Self {
        Self {
            curvature,
            rate,
            length,
            // Backwards along the yarn the curvature is the same and its rate the opposite.
            left: Run::along(curvature, -rate, ratio, 0.5 * length),
            right: Run::along(curvature, rate, ratio, 0.5 * length),
        }
    }

    /// By how much turn and place miss, as seen from the middle, and their change with curvature, rate and length.
    pub(super) fn closure(
        &self,
        from_angle: f64,
        dx: f64,
        dz: f64,
        turn: f64,
    ) -> ([f64; 3], [[f64; 3]; 3]) {
        let (left, right) = (&self.left, &self.right);
        let middle = from_angle + left.at[ANGLE];
        let (sine, cosine) = middle.sin_cos();
        let (tx, tz) = (cosine * dx + sine * dz, cosine * dz - sine * dx);
        let miss = [
            right.at[ANGLE] + left.at[ANGLE] - turn,
            right.at[ALONG] + left.at[ALONG] - tx,
            right.at[ACROSS] - left.at[ACROSS] - tz,
        ];
        let (rs, rc) = right.at[ANGLE].sin_cos();
        let (ls, lc) = left.at[ANGLE].sin_cos();
        // Left runs feel the rate with the opposite sign.
        let by = |which: usize, i: usize| {
            let sign = if i == 1 { -1.0 } else { 1.0 };
            (right.by[which][i], sign * left.by[which][i])
        };
        let mut jacobian = [[0.0; 3]; 3];
        for i in 0..2 {
            let (r, l) = by(ANGLE, i);
            jacobian[0][i] = r + l;
            let turned = l;
            let (r, l) = by(ALONG, i);
            jacobian[1][i] = r + l - tz * turned;
            let (r, l) = by(ACROSS, i);
            jacobian[2][i] = r - l + tx * turned;
        }
        let turned = 0.5 * left.at[CURVATURE];
        jacobian[0][2] = 0.5 * right.at[CURVATURE] + turned;
        jacobian[1][2] = 0.5 * (rc + lc) - tz * turned;
        jacobian[2][2] = 0.5 * (rs - ls) + tx * turned;
        (miss, jacobian)
    }

    /// The piece, its last linear step made, with all its changes.
    pub(super) fn told(
        &self,
        from: &End,
        to: &End,
        stiffness: &Stiffness,
        inverse: &[[f64; 3]; 3],
        miss: &[f64; 3],
    ) -> Piece {
        let (left, right) = (&self.left, &self.right);
        let (dx, dz) = (to.x - from.x, to.z - from.z);
        let middle = from.angle + left.at[ANGLE];
        let (sine, cosine) = middle.sin_cos();
        let (tx, tz) = (cosine * dx + sine * dz, cosine * dz - sine * dx);
        // The last, linear step makes up for what is still missed.
        let mut last = [0.0; 3];
        for (i, slot) in last.iter_mut().enumerate() {
            *slot = -(0..3).map(|j| inverse[i][j] * miss[j]).sum::<f64>();
        }
        // Change of the miss with the inputs (angle at either end, dx, dz), the unknowns held.
        let miss_by = [
            [1.0, -1.0, 0.0, 0.0],
            [-tz, 0.0, -cosine, -sine],
            [tx, 0.0, sine, -cosine],
        ];
        let mut unknown_by = [[0.0; 4]; 3];
        for i in 0..3 {
            for input in 0..4 {
                unknown_by[i][input] = -(0..3)
                    .map(|j| inverse[i][j] * miss_by[j][input])
                    .sum::<f64>();
            }
        }
        let felt = |value: f64, by_unknown: [f64; 3], by_first_angle: f64| {
            let mut by = [0.0; 4];
            for (input, slot) in by.iter_mut().enumerate() {
                *slot = (0..3).map(|i| by_unknown[i] * unknown_by[i][input]).sum();
            }
            by[0] += by_first_angle;
            let rest: f64 = (0..3).map(|i| by_unknown[i] * last[i]).sum();
            Felt {
                value: value + rest,
                by,
            }
        };
        let root = stiffness.root;
        let start = felt(
            root * left.at[CURVATURE],
            [
                root * left.by[CURVATURE][0],
                -root * left.by[CURVATURE][1],
                0.5 * root * left.at[RATE],
            ],
            0.0,
        );
        let end = felt(
            root * right.at[CURVATURE],
            [
                root * right.by[CURVATURE][0],
                root * right.by[CURVATURE][1],
                0.5 * root * right.at[RATE],
            ],
            0.0,
        );
        let (t, b) = (stiffness.pull, stiffness.rigidity);
        let along = t - 0.5 * b * self.curvature * self.curvature;
        let across = -b * self.rate;
        // The middle turns with the first end and with the run back to it.
        let turned = [
            left.by[ANGLE][0],
            -left.by[ANGLE][1],
            0.5 * left.at[CURVATURE],
        ];
        let (along_by, across_by) = (-b * self.curvature, -b);
        let force_x = along * cosine - across * sine;
        let force_z = along * sine + across * cosine;
        let fx = felt(
            force_x,
            [
                along_by * cosine - force_z * turned[0],
                -across_by * sine - force_z * turned[1],
                -force_z * turned[2],
            ],
            -force_z,
        );
        let fz = felt(
            force_z,
            [
                along_by * sine + force_x * turned[0],
                across_by * cosine + force_x * turned[1],
                force_x * turned[2],
            ],
            force_x,
        );
        // The middle's place, with the last step counted too.
        let (ls, lc) = left.at[ANGLE].sin_cos();
        let stepped_to = |which: usize, rate: f64| {
            left.at[which] + left.by[which][0] * last[0] - left.by[which][1] * last[1]
                + 0.5 * rate * last[2]
        };
        let turned_middle = from.angle + stepped_to(ANGLE, left.at[CURVATURE]);
        let (middle_sine, middle_cosine) = turned_middle.sin_cos();
        let (lx, lz) = (-stepped_to(ALONG, lc), stepped_to(ACROSS, ls));
        Piece {
            form: Form::Shot {
                curvature: self.curvature + last[0],
                rate: self.rate + last[1],
                by: unknown_by,
                middle: [
                    turned_middle,
                    -(middle_cosine * lx - middle_sine * lz),
                    -(middle_sine * lx + middle_cosine * lz),
                ],
            },
            inputs: inputs(from, to),
            missed: 0.0,
            length: self.length + last[2],
            bend: [start, end],
            // The left run's rate is counted backwards.
            rate: [-b * left.at[RATE], b * right.at[RATE]],
            force: [fx, fz],
        }
    }
}

/// The inverse of a matrix of three by three; `None` where it has none.
pub(super) fn inverted(m: &[[f64; 3]; 3]) -> Option<[[f64; 3]; 3]> {
    let minor = |i: usize, j: usize| {
        let (r, c) = ([(i + 1) % 3, (i + 2) % 3], [(j + 1) % 3, (j + 2) % 3]);
        m[r[0]][c[0]] * m[r[1]][c[1]] - m[r[0]][c[1]] * m[r[1]][c[0]]
    };
    let determinant: f64 = (0..3).map(|j| m[0][j] * minor(0, j)).sum();
    if determinant == 0.0 || !determinant.is_finite() {
        return None;
    }
    let mut inverse = [[0.0; 3]; 3];
    for (i, row) in inverse.iter_mut().enumerate() {
        for (j, slot) in row.iter_mut().enumerate() {
            *slot = minor(j, i) / determinant;
        }
    }
    Some(inverse)
}
