//! A tight thread over and under sections of more than one kind and height.
//!
//! Every section is grown by half of the thread and told as points on its outline, evenly in slope; the shortest line that
//! passes above all points of the sections it lies over and below those of the others is found by walking: from where it
//! last bent, the slopes that pass all points so far are kept, and where a new point leaves none, the line bends at the
//! point that bounds them (the funnel of Lee and Preparata 1984, in its simplest form). Sections may overlap: what is
//! covered is never touched.
//!
//! Accuracy: 1e-6 of the length and 0.01 rad of slope with 256 points per quarter. Alike sections at one spacing have the
//! closed form of `path::taut`, against which it is tested.

use crate::yarn::Outline;
use std::f64::consts::FRAC_PI_2;

/// Points per quarter of a section.
const POINTS: usize = 256;
/// Steps of slope in which the changing radius of an ellipse is told, per quarter.
const ELLIPSE_STEPS: f64 = 8.0;

/// A section on the thread's way.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Crossed {
    /// Place of its centre along the way, mm.
    pub at_mm: f64,
    /// Height of its centre, mm.
    pub height_mm: f64,
    /// Its outline.
    pub section: Outline,
    /// Whether the thread lies over it.
    pub over: bool,
}

/// A stretch of thread on one arc of a section, and what follows.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Contact {
    /// Whether the thread lies over the section.
    pub over: bool,
    /// Slope on coming to it and on leaving it, rad.
    pub into_rad: f64,
    pub out_rad: f64,
    /// Smallest radius of the outline there, mm.
    pub radius_mm: f64,
    /// Length bent, and length flat on a flat, mm.
    pub bent_mm: f64,
    pub flat_mm: f64,
    /// Where the thread leaves it, mm along the way.
    pub leaves_mm: f64,
    /// Straight thread behind it, mm.
    pub straight_mm: f64,
}

/// A thread from crest to crest (or trough).
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Thread {
    pub length_mm: f64,
    /// From its highest to its lowest point, mm.
    pub wave_mm: f64,
    /// Steepest slope, rad.
    pub slope_rad: f64,
    pub contacts: Vec<Contact>,
}

/// A point that the thread passes, and of which section it is (index, arc).
#[derive(Debug, Clone, Copy)]
struct Point {
    x: f64,
    z: f64,
    over: bool,
    of: (usize, usize),
    radius: f64,
}

/// The thread of this half thickness from the crest of the first section to that of the last, at each of which it runs level.
/// `None` where it cannot pass.
pub(super) fn thread(crossed: &[Crossed], half_thickness_mm: f64) -> Option<Thread> {
    let outlines: Vec<Vec<Point>> = crossed
        .iter()
        .enumerate()
        .map(|(index, section)| grown(index, section, half_thickness_mm))
        .collect();
    if !passes(&outlines) {
        return None;
    }
    let (first, last) = (
        outlines.first()?.get(POINTS)?,
        outlines.last()?.get(POINTS)?,
    );
    let crest = |point: &Point, section: &Crossed| Point {
        x: section.at_mm,
        ..*point
    };
    let (from, to) = (crest(first, crossed.first()?), crest(last, crossed.last()?));
    let mut between: Vec<Point> = outlines
        .iter()
        .flatten()
        .filter(|point| point.x > from.x && point.x < to.x)
        .copied()
        .collect();
    between.sort_by(|a, b| a.x.total_cmp(&b.x));
    between.push(to);
    Some(told(&bent_at(from, &between)))
}

/// The grown outline on the side of the thread, from left to right.
fn grown(index: usize, crossed: &Crossed, half_thickness_mm: f64) -> Vec<Point> {
    let up = if crossed.over { 1.0 } else { -1.0 };
    let arcs = crossed.section.arcs();
    (0..=2 * POINTS)
        .map(|step| {
            let slope = (step as f64 / POINTS as f64 - 1.0) * FRAC_PI_2;
            let (side, slope) = (if slope < 0.0 { -1.0 } else { 1.0 }, slope.abs());
            let touch = crossed.section.touch(slope);
            let (sine, cosine) = slope.sin_cos();
            let out = touch.distance_mm + half_thickness_mm;
            let arc = match arcs {
                Some(arcs) => usize::from(slope > arcs[0].until_rad),
                None => (slope / FRAC_PI_2 * ELLIPSE_STEPS) as usize,
            };
            Point {
                x: crossed.at_mm + side * (out * sine + touch.along_mm * cosine),
                z: crossed.height_mm + up * (out * cosine - touch.along_mm * sine),
                over: crossed.over,
                of: (index, arc),
                radius: touch.radius_mm,
            }
        })
        .collect()
}

/// Whether the sections the thread lies over leave room below those it lies under.
fn passes(outlines: &[Vec<Point>]) -> bool {
    let height_at = |outline: &[Point], x: f64| {
        let right = outline.partition_point(|point| point.x < x);
        let (a, b) = (outline.get(right.checked_sub(1)?)?, outline.get(right)?);
        Some(a.z + (b.z - a.z) * (x - a.x) / (b.x - a.x).max(f64::MIN_POSITIVE))
    };
    let range = |outline: &[Point]| Some((outline.first()?.x, outline.last()?.x));
    let meet = |a: &[Point], b: &[Point]| match (range(a), range(b)) {
        (Some(a), Some(b)) => a.0 <= b.1 && b.0 <= a.1,
        _ => false,
    };
    let (floors, ceilings): (Vec<&Vec<Point>>, Vec<&Vec<Point>>) = outlines
        .iter()
        .partition(|outline| outline.first().is_some_and(|point| point.over));
    floors.iter().all(|floor| {
        let near = ceilings.iter().filter(|ceiling| meet(floor, ceiling));
        near.into_iter().all(|ceiling| {
            let below =
                |point: &Point| height_at(ceiling, point.x).is_none_or(|z| point.z <= z + 1e-9);
            floor.iter().all(below)
        })
    })
}

/// The points at which the shortest line bends, both ends among them.
fn bent_at(from: Point, points: &[Point]) -> Vec<Point> {
    let mut line = vec![from];
    let (mut apex, mut next) = (from, 0);
    let last = points.len().saturating_sub(1);
    while next < points.len() {
        let (mut low, mut high) = (f64::NEG_INFINITY, f64::INFINITY);
        let (mut low_at, mut high_at) = (next, next);
        let mut bends = last;
        for (index, point) in points.iter().enumerate().skip(next) {
            if point.x <= apex.x {
                continue;
            }
            let slope = (point.z - apex.z) / (point.x - apex.x);
            // The end is to be met exactly, from both sides.
            if (point.over || index == last) && slope > high {
                bends = high_at;
                break;
            }
            if (!point.over || index == last) && slope < low {
                bends = low_at;
                break;
            }
            if point.over && slope > low {
                (low, low_at) = (slope, index);
            }
            if !point.over && slope < high {
                (high, high_at) = (slope, index);
            }
        }
        apex = points[bends];
        line.push(apex);
        next = bends + 1;
    }
    line
}

/// Length, slope and contacts of a line through these points.
fn told(line: &[Point]) -> Thread {
    let mut contacts: Vec<Contact> = Vec::new();
    let (mut length_mm, mut slope_rad) = (0.0, 0.0_f64);
    let (mut high, mut low) = (f64::MIN, f64::MAX);
    let open = |point: &Point, into_rad: f64| Contact {
        over: point.over,
        into_rad,
        out_rad: into_rad,
        radius_mm: point.radius,
        bent_mm: 0.0,
        flat_mm: 0.0,
        leaves_mm: point.x,
        straight_mm: 0.0,
    };
    let mut here = line.first().map(|point| open(point, 0.0));
    for pair in line.windows(2) {
        let (dx, dz) = (pair[1].x - pair[0].x, pair[1].z - pair[0].z);
        let (length, slope) = (dx.hypot(dz), dz.atan2(dx));
        length_mm += length;
        slope_rad = slope_rad.max(slope.abs());
        high = high.max(pair[0].z.max(pair[1].z));
        low = low.min(pair[0].z.min(pair[1].z));
        let Some(contact) = here.as_mut() else {
            continue;
        };
        let same_section = pair[0].of.0 == pair[1].of.0;
        if pair[0].of == pair[1].of {
            if slope.abs() < 1e-9 {
                contact.flat_mm += length;
            } else {
                contact.bent_mm += length;
            }
            contact.radius_mm = contact.radius_mm.min(pair[1].radius);
            contact.out_rad = slope;
            contact.leaves_mm = pair[1].x;
            continue;
        }
        contact.out_rad = slope;
        if same_section {
            contact.bent_mm += length;
        } else {
            contact.straight_mm = length;
        }
        contacts.push(*contact);
        here = Some(open(&pair[1], slope));
    }
    if let Some(mut contact) = here {
        contact.out_rad = 0.0;
        contacts.push(contact);
    }
    Thread {
        length_mm,
        wave_mm: high - low,
        slope_rad,
        contacts,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::path::Crest;
    use crate::yarn::Shape;
    use proptest::prelude::*;

    proptest! {
        #![proptest_config(ProptestConfig { cases: 64, failure_persistence: None, ..ProptestConfig::default() })]

        /// Alike sections at one spacing: the closed form (Peirce, Kemp, Hearle and Shanahan).
        #[test]
        fn alike_sections_give_the_closed_form(
            kind in 0usize..4, flat in 1.2..8.0f64, thickness in 0.05..0.4f64, half in 0.02..0.2f64,
            loose in 1.2..3.0f64, share in 0.05..0.9f64,
        ) {
            let shape = Shape::ALL[kind].1;
            let width = if shape == Shape::Round { thickness } else { flat * thickness };
            let section = Outline::new(shape, width, thickness).unwrap();
            let spacing_mm = loose * (width + half);
            let crest = Crest { section, half_thickness_mm: half, spacing_mm };
            let wave = share * crest.highest_wave_mm();
            let passing = crest.pass(wave).unwrap();
            let depth = 0.5 * thickness + half - 0.5 * wave;
            let at = |at_mm: f64, over: bool| Crossed { at_mm, height_mm: if over { -depth } else { depth }, section, over };
            let found = thread(&[at(0.0, true), at(spacing_mm, false)], half).unwrap();
            prop_assert!((found.length_mm / passing.length_mm - 1.0).abs() < 1e-5, "{} {}", found.length_mm, passing.length_mm);
            prop_assert!((found.wave_mm - wave).abs() < 1e-9);
            prop_assert!((found.slope_rad - passing.slope_rad).abs() < 0.01);
            let turn: f64 = found.contacts.iter().map(|c| (c.out_rad - c.into_rad).abs()).sum();
            prop_assert!((turn - 2.0 * passing.slope_rad).abs() < 0.02, "{} {}", turn, passing.slope_rad);
        }
    }

    #[test]
    fn what_lies_in_the_way_cannot_be_passed() {
        let section = Outline::round(0.5).unwrap();
        let at = |at_mm: f64, over: bool| Crossed {
            at_mm,
            height_mm: 0.0,
            section,
            over,
        };
        assert_eq!(thread(&[at(0.0, true), at(0.6, false)], 0.25), None);
        assert!(thread(&[at(0.0, true), at(2.0, false)], 0.25).is_some());
    }

    /// A small section in the shadow of a large one is never touched.
    #[test]
    fn what_is_covered_is_not_touched() {
        let (large, small) = (Outline::round(1.0).unwrap(), Outline::round(0.2).unwrap());
        let at = |at_mm: f64, section: Outline, over: bool| Crossed {
            at_mm,
            height_mm: 0.0,
            section,
            over,
        };
        let alone = thread(&[at(0.0, large, true), at(4.0, large, false)], 0.1).unwrap();
        let both = thread(
            &[
                at(0.0, large, true),
                at(0.1, small, true),
                at(4.0, large, false),
            ],
            0.1,
        )
        .unwrap();
        assert_eq!(alone, both);
    }
}
