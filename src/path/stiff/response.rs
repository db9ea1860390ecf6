//! How the pushes of a path change with the heights of what it crosses.
//!
//! A height moves the ends of the pieces beside it; the contacts then move so that the chain stays in balance, which is one
//! more right side of the equations of `chain`; the pieces' upward forces follow.

use super::chain::{Balance, Chain, Course};
use super::cyclic::Ring;
use super::stiffness::Stiffness;

/// How the pushes of a path change with the heights of what it crosses.
#[derive(Debug, Clone)]
pub struct Response {
    ring: Ring,
    balance: Balance,
    /// For each piece: crossing before and behind, change of its ends' curvature with how far apart they are in
    /// height, and of its upward force with its inputs.
    pieces: Vec<Link>,
    crossings: usize,
    unit_n: f64,
}

#[derive(Debug, Clone, Copy)]
struct Link {
    from: usize,
    to: usize,
    from_row: usize,
    to_row: usize,
    bend_by_rise: [f64; 2],
    force_by: [f64; 4],
    from_arc: bool,
}

impl Response {
    /// The response of a chain in balance; `None` where it is about to give way. `unit_n`: N for one unit of `Stiffness`.
    pub(super) fn of(
        chain: &Chain,
        course: &Course<'_>,
        stiffness: &Stiffness,
        unit_n: f64,
    ) -> Option<Self> {
        let balance = chain.balance(course, stiffness);
        let ring = balance.ring()?;
        let n = chain.contacts.len();
        let pieces = (0..n)
            .map(|index| {
                let next = (index + 1) % n;
                let (from, to) = (&chain.contacts[index], &chain.contacts[next]);
                let piece = &chain.pieces[index];
                Link {
                    from: from.crossing,
                    to: to.crossing,
                    from_row: balance.first[index] + usize::from(from.arc),
                    to_row: balance.first[next],
                    bend_by_rise: [piece.bend[0].by[3], piece.bend[1].by[3]],
                    force_by: piece.force[1].by,
                    from_arc: from.arc,
                }
            })
            .collect();
        Some(Self {
            ring,
            balance,
            pieces,
            crossings: course.over.len(),
            unit_n,
        })
    }

    /// Change of the upward pushes, N, with changes of the heights, mm.
    pub fn to(&self, rise_mm: &[f64], change_n: &mut [f64]) {
        let moves = &self.balance.moves;
        let mut marks = vec![0.0; moves.len()];
        for link in &self.pieces {
            let rise = rise_mm[link.to] - rise_mm[link.from];
            // miss = before - behind at a point, before - lies and behind - lies on an arc.
            marks[link.to_row] -= link.bend_by_rise[1] * rise;
            let start = link.bend_by_rise[0] * rise;
            if link.from_arc {
                marks[link.from_row] -= start;
            } else {
                marks[link.from_row] += start;
            }
        }
        self.ring.solve(&mut marks);
        change_n[..self.crossings].fill(0.0);
        for link in &self.pieces {
            let rise = rise_mm[link.to] - rise_mm[link.from];
            let (from, to) = (&moves[link.from_row], &moves[link.to_row]);
            let (a, b) = (marks[link.from_row], marks[link.to_row]);
            let by = &link.force_by;
            let force = by[0] * from.angle * a
                + by[1] * to.angle * b
                + by[2] * (to.x * b - from.x * a)
                + by[3] * (to.z * b - from.z * a + rise);
            change_n[link.to] += self.unit_n * force;
            change_n[link.from] -= self.unit_n * force;
        }
    }
}
