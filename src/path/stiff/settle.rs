//! How a path is begun: from the taut thread's contacts, directly, else by following it.
//!
//! The contacts of the taut thread are a good guess of those of a stiff one; they are begun as points or arcs, whichever a
//! thread so stiff is likely to have, and mended (`mend`). Where no direct start settles, a path that is nearly taut, or
//! nearly free of pull, is followed to the stiffness asked for in small steps of T/B.
//!
//! Left out: other balances far from the taut path (loops), and a check of the second variation: that a path found is a least
//! and no saddle is tested on examples (`tests` in `mod`), not for every path.

use super::chain::{Chain, Contact, Course};
use super::mend::Mender;
use super::stiffness::Stiffness;

/// Steps that may be cut on the way before it is given up.
const CUTS: usize = 24;

/// How a path was found.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Way {
    /// At once.
    Direct,
    /// By following it from nearly taut or nearly free.
    Followed,
}

/// Why there is no path, and at which crossing.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum NoPath {
    /// The thread cannot pass from this crossing to the next.
    Jammed(usize),
    /// No balance was found.
    Lost(usize),
}

/// The taut thread's marks on both sides of a crossing, where it changes sides there.
#[derive(Debug, Clone, Copy)]
pub(super) struct Taut {
    /// Mark at which the thread comes to rest, where the yarn changes sides before this crossing.
    pub into: Option<f64>,
    /// Mark at which it leaves, where the yarn changes sides behind it.
    pub out: Option<f64>,
}

/// Finds the path for this pull over rigidity, from the taut marks, its crimp and largest curvature within `accuracy`;
/// without patience only directly.
pub(super) fn settle(
    course: &Course<'_>,
    taut: &[Taut],
    ratio: f64,
    accuracy: f64,
    patient: bool,
) -> Result<(Chain, Way), NoPath> {
    let reach = course.grown.reach;
    let mender = |ratio: f64| Mender {
        course,
        stiffness: Stiffness::new(ratio, reach, accuracy),
        accuracy,
    };
    let target = mender(ratio);
    for start in [Start::Eased, Start::Points, Start::Arcs] {
        let mut direct = first(course, taut, &target.stiffness, start);
        if target.mend(&mut direct).is_ok() {
            return Ok((direct, Way::Direct));
        }
    }
    if !patient {
        return Err(NoPath::Lost(0));
    }
    // Nearly taut: the layers of free yarn are short against the spacing. Nearly free: they are long.
    let scale = 1.0 / (course.spacing * course.spacing);
    let mut lost = 0;
    for (from, start) in [
        (3600.0, Start::Arcs),
        (90_000.0, Start::Arcs),
        (0.01, Start::Points),
        (1e7, Start::Arcs),
    ] {
        let from = from * scale;
        let begin = mender(from);
        let mut chain = first(course, taut, &begin.stiffness, start);
        if let Err(at) = begin.mend(&mut chain) {
            lost = at;
            continue;
        }
        match followed(chain, from, ratio, 1e-3 * scale, mender) {
            Ok(chain) => return Ok((chain, Way::Followed)),
            Err(at) => lost = at,
        }
    }
    Err(NoPath::Lost(lost))
}

/// Follows a path from one pull over rigidity to another, in steps that are cut where the path is lost.
fn followed<'a>(
    mut chain: Chain,
    from: f64,
    to: f64,
    floor: f64,
    mender: impl Fn(f64) -> Mender<'a>,
) -> Result<Chain, usize> {
    // In the logarithm; what lies below the floor is as good as no pull.
    let (mut here, end) = (from.max(floor).ln(), to.clamp(floor, f64::MAX).ln());
    let mut step = 1.6;
    let mut cuts = 0;
    while here != end {
        let next = if (end - here).abs() <= step {
            end
        } else {
            here + step * (end - here).signum()
        };
        let ratio = if next == end { to } else { next.exp() };
        let mut tried = chain.clone();
        match mender(ratio).mend(&mut tried) {
            Ok(()) => {
                chain = tried;
                here = next;
                step = (1.5 * step).min(2.4);
            }
            Err(at) => {
                cuts += 1;
                step *= 0.4;
                if cuts > CUTS || step < 1e-3 {
                    return Err(at);
                }
            }
        }
    }
    Ok(chain)
}

/// What kind of contact a path is begun with.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Start {
    /// What a thread as stiff as this one is likely to have.
    Eased,
    Points,
    Arcs,
}

/// The contacts of the taut thread, as arcs or points.
fn first(course: &Course<'_>, taut: &[Taut], stiffness: &Stiffness, start: Start) -> Chain {
    let mut contacts = Vec::with_capacity(taut.len());
    let jump = course.grown.jump().filter(|_| stiffness.rigidity > 0.0);
    for (crossing, marks) in taut.iter().enumerate() {
        if marks.into.is_none() && marks.out.is_none() {
            continue;
        }
        let into = marks.into.unwrap_or(0.0).min(0.0);
        let out = marks.out.unwrap_or(0.0).max(0.0);
        let arc = Contact::arc(crossing, into, out);
        let parts = match jump {
            None => vec![arc],
            Some(jump) => split(course, arc, jump, stiffness),
        };
        for part in parts {
            let middle = 0.5 * (part.into + part.out);
            let curvature = course.grown.at(middle).curvature;
            // An estimate only: how sharply a thread of this stiffness turns here.
            let turn = course.grown.at(part.out).angle - course.grown.at(part.into).angle;
            let free = 2.0 * stiffness.ratio.sqrt().max(1.5 / course.spacing) * turn / 4.0;
            let is_point = part.out <= part.into
                || match start {
                    Start::Eased => free < curvature || !stiffness.presses(curvature),
                    Start::Points => true,
                    Start::Arcs => false,
                };
            contacts.push(if is_point {
                Contact::point(crossing, middle)
            } else {
                part
            });
        }
    }
    Chain {
        contacts,
        pieces: Vec::new(),
    }
}

/// An arc over places where the curvature jumps, cut there: a stiff yarn lies on a part but not over the jump.
fn split(course: &Course<'_>, arc: Contact, jump: f64, stiffness: &Stiffness) -> Vec<Contact> {
    let mut out = Vec::with_capacity(3);
    let crossing = arc.crossing;
    let tip = |from: f64, to: f64| Contact::arc(crossing, from, to);
    if arc.into < -jump {
        let shy = -jump + 0.1 * (arc.into + jump);
        out.push(tip(arc.into, arc.out.min(shy)));
    }
    // A flat is not lain on: nothing presses a straight yarn.
    let middle = course.grown.at(0.5 * jump).curvature;
    if middle > 0.0 && stiffness.presses(middle) && arc.into < jump && arc.out > -jump {
        let shy = 0.9 * jump;
        out.push(Contact::arc(crossing, arc.into.max(-shy), arc.out.min(shy)));
    }
    if arc.out > jump {
        let shy = jump + 0.1 * (arc.out - jump);
        out.push(tip(arc.into.max(shy), arc.out));
    }
    if out.is_empty() {
        out.push(Contact::point(crossing, 0.5 * (arc.into + arc.out)));
    }
    out
}
