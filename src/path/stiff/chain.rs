//! A yarn as a chain of contacts and free pieces, and the contacts moved until the yarn is in balance.
//!
//! The unknowns are the marks of the contacts on their outlines; every free piece follows from its two ends
//! (`piece`). In balance
//!
//! ```text
//! at a point      the curvatures on both sides agree (else it would slide)
//! on an arc       at either end the free curvature is the outline's
//! ```
//!
//! which is a ring of equations, solved by Newton with the pieces' own changes.

use super::cyclic::Ring;
use super::grown::{Grown, Spot};
use super::piece::{By, CLOSED, End, Felt, LOOSE, Piece};
use super::stiffness::Stiffness;

/// What a yarn runs over and under.
#[derive(Debug, Clone, Copy)]
pub(super) struct Course<'a> {
    /// The crossed sections, grown by half of the yarn.
    pub grown: &'a Grown,
    /// Distance between crossings, mm.
    pub spacing: f64,
    /// For each crossing, whether the yarn lies over the section.
    pub over: &'a [bool],
    /// Height of each section's centre, mm.
    pub height: &'a [f64],
    /// The mark to which a taut thread would wrap each section, at least a little.
    pub wide: &'a [f64],
}

/// The yarn touches a section between two marks, or at one.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Contact {
    pub crossing: usize,
    pub into: f64,
    pub out: f64,
    pub arc: bool,
}

impl Contact {
    pub(super) fn point(crossing: usize, mark: f64) -> Self {
        Self {
            crossing,
            into: mark,
            out: mark,
            arc: false,
        }
    }

    pub(super) fn arc(crossing: usize, into: f64, out: f64) -> Self {
        Self {
            crossing,
            into,
            out,
            arc: true,
        }
    }
}

/// Contacts in the order of the yarn, and the free piece behind each.
#[derive(Debug, Clone, Default)]
pub(super) struct Chain {
    pub contacts: Vec<Contact>,
    pub pieces: Vec<Piece>,
}

/// Why the contacts could not be moved into balance.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Stuck {
    /// An end of this contact's arc came to where the outline's curvature jumps.
    Jump(usize),
    /// Newton found no balance; the contact that missed most.
    Lost(usize),
}

/// Newton steps of one balance.
const STEPS: usize = 25;
/// Accuracy of the balance, over the largest curvature of the yarn; short pieces between near sections carry noise.
const BALANCED: f64 = 1e-10;
const NOISE: f64 = 1e-7;
/// The furthest a contact moves in one step.
const LEAP: f64 = 0.35;

impl Course<'_> {
    pub(super) fn sign(&self, crossing: usize) -> f64 {
        if self.over[crossing] { 1.0 } else { -1.0 }
    }

    /// How far a taut thread would wrap the part of the outline on which a mark lies, in marks; at least a little.
    pub(super) fn extent(&self, crossing: usize, mark: f64) -> f64 {
        let wide = self.wide[crossing];
        match self.grown.jump() {
            None => wide,
            Some(jump) if mark.abs() <= jump => wide.min(jump),
            Some(jump) => (wide - jump).max(0.05 * wide.min(jump)).min(0.3),
        }
        .max(1e-6)
    }

    /// Place and direction of the yarn at a mark; `wraps` periods further on.
    pub(super) fn end(&self, crossing: usize, spot: &Spot, wraps: usize) -> End {
        let sign = self.sign(crossing);
        End {
            x: (crossing + wraps * self.over.len()) as f64 * self.spacing + spot.x,
            z: self.height[crossing] + sign * spot.z,
            angle: -sign * spot.angle,
        }
    }

    /// Change of the yarn's end with its mark.
    fn end_by(&self, crossing: usize, spot: &Spot) -> End {
        let sign = self.sign(crossing);
        let (sine, cosine) = spot.angle.sin_cos();
        End {
            x: spot.length_by * cosine,
            z: -sign * spot.length_by * sine,
            angle: -sign * spot.angle_by,
        }
    }
}

fn by_from(by: &By, end: &End) -> f64 {
    by[0] * end.angle - by[2] * end.x - by[3] * end.z
}

fn by_to(by: &By, end: &End) -> f64 {
    by[1] * end.angle + by[2] * end.x + by[3] * end.z
}

/// The equations of a chain about where it stands.
#[derive(Debug, Clone)]
pub(super) struct Balance {
    /// What each equation misses.
    pub miss: Vec<f64>,
    lower: Vec<f64>,
    diagonal: Vec<f64>,
    upper: Vec<f64>,
    /// First equation of each contact.
    pub first: Vec<usize>,
    /// Change of the end with its mark, for each equation.
    pub moves: Vec<End>,
}

impl Balance {
    pub(super) fn ring(&self) -> Option<Ring> {
        Ring::new(self.lower.clone(), &self.diagonal, self.upper.clone())
    }
}

impl Chain {
    /// Ends of the piece behind contact `index`.
    pub(super) fn ends(&self, course: &Course<'_>, index: usize) -> (End, End) {
        let (here, next) = (index, (index + 1) % self.contacts.len());
        let wraps = usize::from(next <= here);
        let (a, b) = (&self.contacts[here], &self.contacts[next]);
        (
            course.end(a.crossing, &course.grown.at(a.out), 0),
            course.end(b.crossing, &course.grown.at(b.into), wraps),
        )
    }

    /// Finds every piece anew, from where it was; the contact before the piece that is not found, else.
    pub(super) fn lay(
        &mut self,
        course: &Course<'_>,
        stiffness: &Stiffness,
        closed: f64,
    ) -> Result<(), usize> {
        let warm = self.pieces.len() == self.contacts.len();
        let mut pieces = Vec::with_capacity(self.contacts.len());
        for index in 0..self.contacts.len() {
            let (from, to) = self.ends(course, index);
            let like = if warm { self.pieces.get(index) } else { None };
            pieces.push(Piece::between(&from, &to, stiffness, like, closed).ok_or(index)?);
        }
        self.pieces = pieces;
        Ok(())
    }

    pub(super) fn balance(&self, course: &Course<'_>, stiffness: &Stiffness) -> Balance {
        let n = self.contacts.len();
        let size = n + self.contacts.iter().filter(|c| c.arc).count();
        let mut balance = Balance {
            miss: Vec::with_capacity(size),
            lower: vec![0.0; size],
            diagonal: vec![0.0; size],
            upper: vec![0.0; size],
            first: Vec::with_capacity(n),
            moves: Vec::with_capacity(size),
        };
        let mut spots = Vec::with_capacity(size);
        for contact in &self.contacts {
            balance.first.push(balance.moves.len());
            for mark in [Some(contact.into), contact.arc.then_some(contact.out)]
                .into_iter()
                .flatten()
            {
                let spot = course.grown.at(mark);
                balance.moves.push(course.end_by(contact.crossing, &spot));
                spots.push(spot);
            }
        }
        for (index, contact) in self.contacts.iter().enumerate() {
            let before: &Felt = &self.pieces[(index + n - 1) % n].bend[1];
            let behind: &Felt = &self.pieces[index].bend[0];
            let row = balance.first[index];
            let last = row + usize::from(contact.arc);
            let previous = (row + size - 1) % size;
            let next = (last + 1) % size;
            let sign = course.sign(contact.crossing);
            if contact.arc {
                let lies = |spot: &Spot| -sign * stiffness.root * spot.curvature;
                let lies_by = |spot: &Spot| -sign * stiffness.root * spot.curvature_by;
                balance.miss.push(before.value - lies(&spots[row]));
                balance.diagonal[row] =
                    by_to(&before.by, &balance.moves[row]) - lies_by(&spots[row]);
                balance.lower[row] = by_from(&before.by, &balance.moves[previous]);
                balance.miss.push(behind.value - lies(&spots[last]));
                balance.diagonal[last] =
                    by_from(&behind.by, &balance.moves[last]) - lies_by(&spots[last]);
                balance.upper[last] = by_to(&behind.by, &balance.moves[next]);
            } else {
                balance.miss.push(before.value - behind.value);
                balance.diagonal[row] = by_to(&before.by, &balance.moves[row])
                    - by_from(&behind.by, &balance.moves[row]);
                balance.lower[row] = by_from(&before.by, &balance.moves[previous]);
                balance.upper[row] = -by_to(&behind.by, &balance.moves[next]);
            }
        }
        balance
    }

    /// Moves the contacts until all balances.
    pub(super) fn settle(
        &mut self,
        course: &Course<'_>,
        stiffness: &Stiffness,
    ) -> Result<(), Stuck> {
        let begun = self.clone();
        // While the contacts move pieces need not close: one shot each. Where that does not come to rest they do.
        self.settle_to(course, stiffness, LOOSE).or_else(|_| {
            *self = begun;
            self.settle_to(course, stiffness, CLOSED)
        })
    }

    fn settle_to(
        &mut self,
        course: &Course<'_>,
        stiffness: &Stiffness,
        closed: f64,
    ) -> Result<(), Stuck> {
        self.lay(course, stiffness, closed).map_err(Stuck::Lost)?;
        let last_mark = course.grown.last_mark();
        let jump = course.grown.jump();
        let mut damp = 1.0;
        let mut size_before = f64::INFINITY;
        let mut kept = self.clone();
        let mut step: Vec<f64> = Vec::new();
        let mut worst = 0;
        let mut laid = true;
        for _ in 0..STEPS {
            let balance = self.balance(course, stiffness);
            let mut size = 0.0;
            for (index, miss) in balance.miss.iter().enumerate() {
                if miss.abs() > size {
                    size = miss.abs();
                    worst = index;
                }
            }
            let most = self
                .pieces
                .iter()
                .flat_map(|piece| &piece.bend)
                .fold(1e-3, |most: f64, bend| most.max(bend.value.abs()));
            if laid && size < BALANCED * most {
                if self.pieces.iter().all(|piece| piece.missed < CLOSED) {
                    return Ok(());
                }
                laid = self.lay(course, stiffness, CLOSED).is_ok();
                continue;
            }
            let good = laid && size.is_finite() && (size < size_before || damp < 0.2);
            if good {
                kept.contacts.clone_from(&self.contacts);
                kept.pieces.clone_from(&self.pieces);
                size_before = size;
                step = balance.miss;
                let Some(ring) = Ring::new(balance.lower, &balance.diagonal, balance.upper) else {
                    return Err(Stuck::Lost(self.contact_of(worst)));
                };
                ring.solve(&mut step);
                let furthest = step.iter().fold(0.0_f64, |most, s| most.max(s.abs()));
                if !furthest.is_finite() {
                    return Err(Stuck::Lost(self.contact_of(worst)));
                }
                damp = (LEAP / furthest).min(1.0);
            } else {
                // Newton no longer brings it down: what is left is noise, or it is lost.
                if size_before < NOISE * most {
                    self.contacts.clone_from(&kept.contacts);
                    self.pieces.clone_from(&kept.pieces);
                    return Ok(());
                }
                damp *= 0.5;
                if damp < 1e-3 {
                    return Err(Stuck::Lost(self.contact_of(worst)));
                }
                self.contacts.clone_from(&kept.contacts);
                self.pieces.clone_from(&kept.pieces);
            }
            let mut row = 0;
            let mut crossed = None;
            for (index, contact) in self.contacts.iter_mut().enumerate() {
                let moved =
                    |mark: f64, step: f64| (mark - damp * step).clamp(-last_mark, last_mark);
                if contact.arc {
                    let before = *contact;
                    contact.into = moved(contact.into, step[row]);
                    contact.out = moved(contact.out, step[row + 1]);
                    row += 2;
                    if let Some(jump) = jump
                        && stiffness.rigidity > 0.0
                    {
                        let held = hold(before.into, &mut contact.into, jump)
                            | hold(before.out, &mut contact.out, jump);
                        if held {
                            crossed = Some((index, before));
                        }
                    }
                } else {
                    contact.into = moved(contact.into, step[row]);
                    contact.out = contact.into;
                    row += 1;
                }
            }
            if let Some((index, before)) = crossed {
                self.contacts[index] = before;
                return Err(Stuck::Jump(index));
            }
            laid = self.lay(course, stiffness, closed).is_ok();
        }
        Err(Stuck::Lost(self.contact_of(worst)))
    }

    fn contact_of(&self, row: usize) -> usize {
        let mut first = 0;
        for (index, contact) in self.contacts.iter().enumerate() {
            first += 1 + usize::from(contact.arc);
            if row < first {
                return index;
            }
        }
        0
    }

    /// Push of contact `index` along the outline's outer normal at its middle, in units of [`Stiffness`].
    pub(super) fn push(&self, course: &Course<'_>, index: usize) -> f64 {
        let n = self.contacts.len();
        let contact = &self.contacts[index];
        let (before, behind) = (&self.pieces[(index + n - 1) % n], &self.pieces[index]);
        let spot = course.grown.at(0.5 * (contact.into + contact.out));
        let (sine, cosine) = spot.angle.sin_cos();
        let sign = course.sign(contact.crossing);
        (before.force[0].value - behind.force[0].value) * sine
            + (before.force[1].value - behind.force[1].value) * sign * cosine
    }
}

/// An arc's end that would cross a jump goes half of the way there; whether it stands at the jump already.
fn hold(before: f64, after: &mut f64, jump: f64) -> bool {
    let part = side(before, jump);
    if side(*after, jump) == part {
        return false;
    }
    let at = if before > jump || part == 0 && *after > jump {
        jump
    } else {
        -jump
    };
    *after = 0.5 * (before + at);
    (before - at).abs() < 1e-6
}

/// On which part of the outline a mark lies: left tip, middle, right tip.
pub(super) fn side(mark: f64, jump: f64) -> i8 {
    if mark > jump {
        1
    } else if mark < -jump {
        -1
    } else {
        0
    }
}
