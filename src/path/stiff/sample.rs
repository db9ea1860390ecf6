//! A path told in short parts: how much of it is bent how sharply.

use super::chain::{Chain, Course};
use super::piece::Place;
use super::stiffness::Stiffness;

/// A short part of a path, told by its sharpest place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sample {
    /// Length on the centreline, mm.
    pub length_mm: f64,
    /// Curvature of the centreline, 1/mm, positive over a crest on the face.
    pub curvature_per_mm: f64,
    /// Turn of the whole run of this sign that it belongs to, rad.
    pub turn_rad: f64,
}

/// A chain in samples: arcs whole, free pieces in `parts` each, told by their sharper end.
pub(super) fn samples(
    chain: &Chain,
    course: &Course<'_>,
    stiffness: &Stiffness,
    parts: usize,
) -> Vec<Sample> {
    let grown = course.grown;
    let mut samples = Vec::with_capacity(chain.contacts.len() * (parts + 1));
    for (index, contact) in chain.contacts.iter().enumerate() {
        if contact.arc {
            let sign = course.sign(contact.crossing);
            let arcs = if grown.is_ellipse() { parts } else { 1 };
            for part in 0..arcs {
                let at = |share: usize| {
                    contact.into + (contact.out - contact.into) * share as f64 / arcs as f64
                };
                let (a, b) = (grown.at(at(part)), grown.at(at(part + 1)));
                samples.push(Sample {
                    length_mm: grown.along(at(part), at(part + 1)).0,
                    curvature_per_mm: sign * a.curvature.max(b.curvature),
                    turn_rad: sign * (b.angle - a.angle),
                });
            }
        }
        let (from, to) = chain.ends(course, index);
        let places: Vec<Place> = chain.pieces[index].places(&from, &to, stiffness, parts);
        for pair in places.windows(2) {
            let sharper = if pair[0].curvature.abs() > pair[1].curvature.abs() {
                pair[0].curvature
            } else {
                pair[1].curvature
            };
            samples.push(Sample {
                length_mm: pair[1].s - pair[0].s,
                // A crest turns down: the path's own curvature is negative there.
                curvature_per_mm: -sharper,
                turn_rad: pair[0].angle - pair[1].angle,
            });
        }
    }
    tell_runs(&mut samples);
    samples
}

/// Gives every sample the turn of its whole run of one sign, round the period.
fn tell_runs(samples: &mut [Sample]) {
    let n = samples.len();
    let same = |a: f64, b: f64| (a >= 0.0) == (b >= 0.0);
    let Some(start) = (0..n).find(|i| {
        !same(
            samples[*i].curvature_per_mm,
            samples[(i + n - 1) % n].curvature_per_mm,
        )
    }) else {
        return;
    };
    let mut from = 0;
    while from < n {
        let sign = samples[(start + from) % n].curvature_per_mm;
        let mut until = from;
        let mut turn = 0.0;
        while until < n && same(samples[(start + until) % n].curvature_per_mm, sign) {
            turn += samples[(start + until) % n].turn_rad;
            until += 1;
        }
        for i in from..until {
            samples[(start + i) % n].turn_rad = turn.abs();
        }
        from = until;
    }
}
