//! Where a free piece of yarn runs into a section it does not touch.
//!
//! The piece is looked at in stations. Between two of them it may come nearer to a section by no more than both curvatures
//! make of their distance, (|k| + c) s²/8; wherever that may be inside, it is looked at closer and closer until it is or cannot
//! be.

use super::chain::{Chain, Contact, Course};
use super::piece::{End, Piece, Place};
use super::stiffness::Stiffness;

/// Stations for each crossing that a piece spans.
const STATIONS: usize = 6;

/// One free piece beside one section.
struct Beside<'a> {
    piece: &'a Piece,
    ends: (End, End),
    stiffness: &'a Stiffness,
    course: &'a Course<'a>,
    /// The section, and where its centre stands along the cloth, mm.
    crossing: usize,
    centre: f64,
}

impl Beside<'_> {
    /// Distance from the section, mm, and the mark nearest; `None` where the place is beside it.
    fn distance(&self, place: &Place) -> Option<(f64, f64)> {
        let x = place.x - self.centre;
        let z = place.z - self.course.height[self.crossing];
        (x.abs() < self.course.grown.half_width).then(|| {
            self.course
                .grown
                .distance(x, self.course.sign(self.crossing) * z)
        })
    }

    /// The mark at which the yarn runs in deepest near this station, if deeper than `deep`, and whether it bends over the
    /// section there.
    fn runs_in(&self, station: &Place, apart: f64, deep: f64) -> Option<(f64, bool)> {
        let sign = self.course.sign(self.crossing);
        let (mut least, mut mark) = self.distance(station)?;
        let (mut middle, mut apart) = (*station, apart);
        // A place nearest within `apart` on either side, so s = 2 apart: (|k| + c) s²/8.
        let bends = 0.5 * (station.curvature.abs() + self.course.grown.sharpest());
        while least < bends * apart * apart - deep && bends * apart * apart > deep {
            let between = (
                (middle.s - apart).max(0.0),
                (middle.s + apart).min(self.piece.length),
            );
            let (from, to) = &self.ends;
            let nearest = self
                .piece
                .places_between(from, to, self.stiffness, between, 6)
                .into_iter()
                .filter_map(|place| self.distance(&place).map(|found| (found, place)))
                .min_by(|a, b| a.0.0.total_cmp(&b.0.0));
            let Some(((distance, at), place)) = nearest else {
                break;
            };
            (least, mark, middle) = (distance, at, place);
            apart /= 3.0;
        }
        (least < -deep).then_some((mark, sign * middle.curvature <= 0.0))
    }
}

/// The crossings a piece spans, the last counted on into the next period.
fn span(chain: &Chain, course: &Course<'_>, index: usize) -> (usize, usize) {
    let next = (index + 1) % chain.contacts.len();
    let wraps = if next <= index { course.over.len() } else { 0 };
    (
        chain.contacts[index].crossing,
        chain.contacts[next].crossing + wraps,
    )
}

/// Adds points where free pieces run into sections by more than `deep`, mm; whether any did.
pub(super) fn touch(
    chain: &mut Chain,
    course: &Course<'_>,
    stiffness: &Stiffness,
    deep: f64,
) -> bool {
    let n = course.over.len();
    // The piece that runs in, the contact, and whether it stands in the next period.
    let mut added: Vec<(usize, Contact, bool)> = Vec::new();
    for index in 0..chain.contacts.len() {
        let ends = chain.ends(course, index);
        let piece = &chain.pieces[index];
        let (first, last) = span(chain, course, index);
        let steps = STATIONS * (last - first + 1);
        let places = piece.places(&ends.0, &ends.1, stiffness, steps);
        let apart = piece.length / steps as f64;
        for crossing in first..=last {
            let beside = Beside {
                piece,
                ends,
                stiffness,
                course,
                crossing: crossing % n,
                centre: crossing as f64 * course.spacing,
            };
            let near: Vec<f64> = places
                .iter()
                .map(|place| {
                    beside
                        .distance(place)
                        .map_or(f64::INFINITY, |found| found.0)
                })
                .collect();
            // The ends of the piece lie on their own sections; between, every station nearer than both beside it.
            let own = |i: usize| i == 0 && crossing == first || i == steps && crossing == last;
            let before = |i: usize| i.checked_sub(1).map_or(f64::INFINITY, |i| near[i]);
            let behind = |i: usize| near.get(i + 1).copied().unwrap_or(f64::INFINITY);
            let found = (0..=steps)
                .filter(|i| !own(*i) && near[*i] <= before(*i) && near[*i] < behind(*i))
                .filter_map(|i| {
                    beside
                        .runs_in(&places[i], apart, deep)
                        .map(|found| (near[i], found))
                })
                // Right behind a contact a yarn bent more than the outline runs in at once.
                .chain([1, steps - 1].into_iter().filter_map(|i| {
                    let inside = near[i] < -deep && own(if i == 1 { 0 } else { steps });
                    let (_, mark) = beside.distance(&places[i]).filter(|_| inside)?;
                    let over = course.sign(crossing % n) * places[i].curvature <= 0.0;
                    Some((near[i], (mark, over)))
                }))
                .min_by(|a, b| a.0.total_cmp(&b.0));
            if let Some((_, (mark, over))) = found {
                for mark in shoulders(course, crossing % n, mark, over) {
                    added.push((index, Contact::point(crossing % n, mark), crossing >= n));
                }
            }
        }
    }
    if added.is_empty() {
        return false;
    }
    let mut ahead = Vec::new();
    for (index, contact, next_period) in added.into_iter().rev() {
        if next_period {
            ahead.push(contact);
        } else {
            chain.contacts.insert(index + 1, contact);
        }
    }
    for contact in ahead {
        chain.contacts.insert(0, contact);
    }
    chain.pieces.clear();
    true
}

/// How far the yarn stays from a section it does not touch, mm, to the nearest station, and the mark nearest; `None` where
/// it passes beside.
pub(super) fn gap(
    chain: &Chain,
    course: &Course<'_>,
    stiffness: &Stiffness,
    crossing: usize,
) -> Option<(f64, f64)> {
    // The piece that runs past it.
    let index = chain
        .contacts
        .iter()
        .rposition(|contact| contact.crossing < crossing)
        .unwrap_or(chain.contacts.len() - 1);
    let (first, last) = span(chain, course, index);
    let absolute = if first < crossing {
        crossing
    } else {
        crossing + course.over.len()
    };
    let ends = chain.ends(course, index);
    let piece = &chain.pieces[index];
    let beside = Beside {
        piece,
        ends,
        stiffness,
        course,
        crossing,
        centre: absolute as f64 * course.spacing,
    };
    piece
        .places(&ends.0, &ends.1, stiffness, STATIONS * (last - first + 1))
        .iter()
        .filter_map(|place| beside.distance(place))
        .min_by(|a, b| a.0.total_cmp(&b.0))
}

/// Where a yarn that runs in at a mark is held. A flat holds nothing that is bent over it: its two ends do.
fn shoulders(course: &Course<'_>, crossing: usize, mark: f64, convex: bool) -> Vec<f64> {
    match course.grown.jump() {
        Some(jump) if convex && mark.abs() <= jump && course.grown.at(0.0).curvature == 0.0 => {
            let over = jump + 0.1 * course.extent(crossing, 1.01 * jump);
            vec![-over, over]
        }
        _ => vec![mark],
    }
}
