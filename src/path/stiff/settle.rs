//! Which contacts a yarn has: begun from the taut thread, mended until every check passes.
//!
//! A chain in balance (`chain`) is the yarn's path only if
//!
//! - every contact pushes and none pulls: a point that pulls is dropped;
//! - at a point the yarn is bent less than the outline: else it lies on it, as an arc where the pull allows
//!   (an arc of curvature c presses only where T >= B c²/2; on an ellipse (T - B c²/2) c - B c'' >= 0), or in two points,
//!   the crest lifted;
//! - arcs have a length, contacts on one section keep their order;
//! - no free piece runs through a section: where it runs deepest a point is added.
//!
//! Where the direct way does not settle, the rigidity is raised step by step from where the yarn is nearly a taut
//! thread: the path is the one reached from the taut path by raising B/T.

#![expect(
    clippy::needless_range_loop,
    reason = "several small arrays are walked side by side: the index is the mathematics"
)]

use super::chain::{Chain, Contact, Course, Stuck, side};
use super::piece::Stiffness;

/// Repairs of one chain before it is given up.
const REPAIRS: usize = 60;
/// What a point may pull before it is dropped, in units of [`Stiffness`].
const SLACK: f64 = 1e-9;
/// Ways in which contacts that do not balance are parted before a chain is given up.
const ATTEMPTS: usize = 6;
/// Halvings of a step in rigidity before it is given up.
const HALVINGS: usize = 24;

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

/// Follows a path from one pull over rigidity to another, in steps that are halved where the path is lost.
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
    let mut halvings = 0;
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
                halvings += 1;
                step *= 0.4;
                if halvings > HALVINGS || step < 1e-3 {
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
                    Start::Eased => free < curvature || !presses(stiffness, curvature),
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

/// Whether an arc of this curvature presses.
fn presses(stiffness: &Stiffness, curvature: f64) -> bool {
    stiffness.pull >= 0.5 * stiffness.rigidity * curvature * curvature
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
    if middle > 0.0 && presses(stiffness, middle) && arc.into < jump && arc.out > -jump {
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

/// Mends chains on one course at one stiffness.
pub(super) struct Mender<'a> {
    pub course: &'a Course<'a>,
    pub stiffness: Stiffness,
    pub accuracy: f64,
}

impl Mender<'_> {
    /// Balances a chain and mends its contacts until every check passes; else a crossing that did not.
    pub(super) fn mend(&self, chain: &mut Chain) -> Result<(), usize> {
        mend(chain, self.course, &self.stiffness, self.accuracy)
    }
}

fn mend(
    chain: &mut Chain,
    course: &Course<'_>,
    stiffness: &Stiffness,
    accuracy: f64,
) -> Result<(), usize> {
    // Contacts that met and were made one are parted otherwise the next time.
    let mut attempt = 0;
    for _ in 0..REPAIRS {
        if chain.contacts.len() < 2 {
            return Err(0);
        }
        match chain.settle(course, stiffness) {
            Ok(()) => {
                if !improve(chain, course, stiffness, accuracy, attempt) {
                    return Ok(());
                }
            }
            Err(Stuck::Jump(index)) => cross(chain, course, index),
            Err(Stuck::Lost(index)) => {
                // A contact out of order or turned over, or two that meet, may be what keeps it from balance.
                attempt += 1;
                let crossing = chain.contacts[index].crossing;
                if !order(chain, 0.03 * course.wide[crossing]) || attempt > ATTEMPTS {
                    return Err(crossing);
                }
            }
        }
    }
    Err(chain.contacts[0].crossing)
}

/// An arc that came to a jump draws back a little, and the other side of the jump is touched at a point.
fn cross(chain: &mut Chain, course: &Course<'_>, index: usize) {
    let jump = course.grown.jump().unwrap_or(0.0);
    let contact = chain.contacts[index];
    let crossing = contact.crossing;
    chain.pieces.clear();
    if side(contact.into, jump) == 0 {
        // On the middle part: whichever end is nearer to its jump touches the tip as well.
        let shy = 0.8 * jump;
        let next = (index + 1) % chain.contacts.len();
        let previous = (index + chain.contacts.len() - 1) % chain.contacts.len();
        let has = |at: usize, wanted: i8| {
            chain.contacts[at].crossing == crossing && side(chain.contacts[at].into, jump) == wanted
        };
        let right = contact.out > -contact.into;
        let (left_too, right_too) = (
            (!right || contact.into < -0.95 * jump) && !has(previous, -1),
            (right || contact.out > 0.95 * jump) && !has(next, 1),
        );
        chain.contacts[index].into = contact.into.max(-shy);
        chain.contacts[index].out = contact.out.min(shy);
        let over = jump + 0.4 * course.extent(crossing, 1.01 * jump);
        if right_too {
            chain
                .contacts
                .insert(index + 1, Contact::point(crossing, over));
        }
        if left_too {
            chain
                .contacts
                .insert(index, Contact::point(crossing, -over));
        }
    } else {
        // On a tip, come to the middle part. A flat that is reached is left over its other end.
        let count = chain.contacts.len();
        let left = side(contact.into, jump) < 0;
        let neighbour = if left {
            (index + 1) % count
        } else {
            (index + count - 1) % count
        };
        let flat = course.grown.at(0.0).curvature == 0.0;
        if flat && chain.contacts[neighbour].crossing != crossing {
            let over = jump + 0.1 * course.extent(crossing, 1.01 * jump);
            let other = Contact::point(crossing, if left { over } else { -over });
            chain
                .contacts
                .insert(if left { index + 1 } else { index }, other);
        } else {
            chain.contacts[index] = Contact::point(crossing, 0.5 * (contact.into + contact.out));
        }
    }
}

/// Arcs without length become points, points out of order one.
fn order(chain: &mut Chain, apart: f64) -> bool {
    let mut changed = false;
    for contact in &mut chain.contacts {
        if contact.arc && contact.out <= contact.into {
            *contact = Contact::point(contact.crossing, 0.5 * (contact.into + contact.out));
            changed = true;
        }
    }
    let mut index = 0;
    while index + 1 < chain.contacts.len() {
        let (a, b) = (chain.contacts[index], chain.contacts[index + 1]);
        if a.crossing == b.crossing && a.out >= b.into - apart {
            let merged = Contact::point(a.crossing, 0.5 * (a.out + b.into));
            chain.contacts[index] = match (a.arc, b.arc) {
                (false, false) => merged,
                (true, false) => a,
                (false, true) => b,
                (true, true) => Contact::arc(a.crossing, a.into, b.out),
            };
            chain.contacts.remove(index + 1);
            changed = true;
        } else {
            index += 1;
        }
    }
    if changed {
        chain.pieces.clear();
    }
    changed
}

/// One round of mending of a chain in balance; whether anything changed.
fn improve(
    chain: &mut Chain,
    course: &Course<'_>,
    stiffness: &Stiffness,
    accuracy: f64,
    attempt: usize,
) -> bool {
    if order(chain, 0.0) {
        return true;
    }
    // Points that pull: the worst of each run of them goes.
    let pushes: Vec<f64> = (0..chain.contacts.len())
        .map(|index| chain.push(course, index))
        .collect();
    let mut dropped = false;
    let count = pushes.len();
    let keep: Vec<bool> = (0..count)
        .map(|index| {
            let (before, behind) = (
                pushes[(index + count - 1) % count],
                pushes[(index + 1) % count],
            );
            let pulls = pushes[index] < -SLACK;
            let worst = pushes[index] <= before && pushes[index] < behind
                || before >= -SLACK && behind >= -SLACK;
            !(pulls && worst)
        })
        .collect();
    if keep.iter().any(|kept| !kept) && keep.iter().filter(|kept| **kept).count() >= 2 {
        let mut kept = keep.iter();
        chain.contacts.retain(|_| *kept.next().unwrap_or(&true));
        dropped = true;
    }
    if dropped {
        chain.pieces.clear();
        return true;
    }
    let mut changed = false;
    let mut contacts = Vec::with_capacity(chain.contacts.len() + 2);
    for (index, contact) in chain.contacts.iter().enumerate() {
        let sign = course.sign(contact.crossing);
        if contact.arc {
            match lifts(course, stiffness, contact, attempt) {
                None => contacts.push(*contact),
                Some(parts) => {
                    contacts.extend(parts);
                    changed = true;
                }
            }
            continue;
        }
        let spot = course.grown.at(contact.into);
        let bent = -sign * chain.pieces[index].bend[0].value;
        let lies = stiffness.root * spot.curvature;
        if stiffness.rigidity > 0.0 && bent > lies * (1.0 + 1e-5 * accuracy) + 1e-12 {
            // Half of the turn that the excess of curvature makes over the length in which it fades.
            let wide = course.extent(contact.crossing, contact.into);
            let near = wide * (bent / lies.max(1e-9) - 1.0).clamp(0.04, 0.3);
            let spread = match attempt % 3 {
                0 => near,
                1 => (2.0 * near).max(0.6 * wide),
                _ => (3.0 * near).max(0.95 * wide),
            };
            let (mut into, mut out) = (contact.into - spread, contact.into + spread);
            if let Some(jump) = course.grown.jump() {
                // Both ends on the same part as the point.
                match side(contact.into, jump) {
                    0 => (into, out) = (into.max(-0.98 * jump), out.min(0.98 * jump)),
                    1 => into = into.max(0.5 * (jump + contact.into)),
                    _ => out = out.min(0.5 * (-jump + contact.into)),
                }
            }
            if presses(stiffness, spot.curvature) && spot.curvature > 0.0 {
                contacts.push(Contact::arc(contact.crossing, into, out));
            } else {
                contacts.push(Contact::point(contact.crossing, into));
                contacts.push(Contact::point(contact.crossing, out));
            }
            changed = true;
        } else {
            contacts.push(*contact);
        }
    }
    if changed {
        chain.contacts = contacts;
        chain.pieces.clear();
        return true;
    }
    touch(
        chain,
        course,
        stiffness,
        1e-5 * accuracy * course.grown.reach,
    )
}

/// The parts of an arc that press, where not all of it does.
fn lifts(
    course: &Course<'_>,
    stiffness: &Stiffness,
    arc: &Contact,
    attempt: usize,
) -> Option<Vec<Contact>> {
    let crossing = arc.crossing;
    if !course.grown.is_ellipse() {
        let curvature = course.grown.at(0.5 * (arc.into + arc.out)).curvature;
        return (!presses(stiffness, curvature) && stiffness.rigidity > 0.0).then(|| {
            vec![
                Contact::point(crossing, arc.into),
                Contact::point(crossing, arc.out),
            ]
        });
    }
    const PARTS: usize = 24;
    let step = (arc.out - arc.into) / PARTS as f64;
    // Curvature twice along the length, by differences of its change with the mark.
    let pressure = |mark: f64| {
        let rate = |mark: f64| {
            let spot = course.grown.at(mark);
            spot.curvature_by / spot.length_by
        };
        let spot = course.grown.at(mark);
        let h = 1e-4;
        let second = (rate(mark + h) - rate(mark - h)) / (2.0 * h * spot.length_by);
        (stiffness.pull - 0.5 * stiffness.rigidity * spot.curvature * spot.curvature)
            * spot.curvature
            - stiffness.rigidity * second
    };
    let pressed: Vec<bool> = (0..=PARTS)
        .map(|i| pressure(arc.into + step * i as f64) >= -1e-12)
        .collect();
    if pressed.iter().all(|p| *p) {
        return None;
    }
    let mut parts: Vec<Contact> = Vec::new();
    let mut from: Option<usize> = None;
    for i in 0..=PARTS {
        match (pressed[i], from) {
            (true, None) => from = Some(i),
            (false, Some(start)) => {
                parts.push(Contact::arc(
                    crossing,
                    arc.into + step * start as f64,
                    arc.into + step * (i - 1) as f64,
                ));
                from = None;
            }
            _ => {}
        }
    }
    if let Some(start) = from {
        parts.push(Contact::arc(
            crossing,
            arc.into + step * start as f64,
            arc.out,
        ));
    }
    // An end that does not press lies off the outline and comes back to it further out, at a point.
    let outer = parts.len();
    if !pressed[0] {
        let gap = parts.first().map_or(0.0, |part| part.into - arc.into);
        if let Some(part) = parts.first_mut() {
            part.into += 0.4 * (part.out - part.into);
        }
        parts.insert(0, Contact::point(crossing, arc.into - 0.4 * gap));
    }
    let (left, right) = (!pressed[0], !pressed[PARTS]);
    if right {
        let gap = parts
            .last()
            .filter(|part| part.arc)
            .map_or(0.0, |part| arc.out - part.out);
        if let Some(part) = parts.last_mut().filter(|part| part.arc) {
            part.out -= 0.4 * (part.out - part.into);
        }
        parts.push(Contact::point(crossing, arc.out + 0.4 * gap));
    }
    // Of the middle an arc, then nothing, then a point is tried.
    if (left || right) && !attempt.is_multiple_of(3) && outer == 1 {
        let inner = usize::from(left);
        let middle = 0.5 * (parts[inner].into + parts[inner].out);
        if attempt % 3 == 1 {
            parts.remove(inner);
        } else {
            parts[inner] = Contact::point(crossing, middle);
        }
    }
    for part in &mut parts {
        if part.arc && part.out - part.into < 1e-3 {
            *part = Contact::point(crossing, 0.5 * (part.into + part.out));
        }
    }
    Some(parts)
}

/// Adds a point where a free piece runs deepest into a section; whether any did.
fn touch(chain: &mut Chain, course: &Course<'_>, stiffness: &Stiffness, deep: f64) -> bool {
    let n = course.over.len();
    let grown = course.grown;
    // The piece that runs in, the contact, and whether it stands in the next period.
    let mut added: Vec<(usize, Contact, bool)> = Vec::new();
    for index in 0..chain.contacts.len() {
        let (from, to) = chain.ends(course, index);
        let first = chain.contacts[index].crossing;
        let last = {
            let next = (index + 1) % chain.contacts.len();
            chain.contacts[next].crossing + if next <= index { n } else { 0 }
        };
        let steps = 6 * (last - first + 1);
        let places = chain.pieces[index].places(&from, &to, stiffness, steps);
        for crossing in first..=last {
            let k = crossing % n;
            let sign = course.sign(k);
            let centre = crossing as f64 * course.spacing;
            let depth_at = |place: &super::piece::Place| {
                let x = place.x - centre;
                (x.abs() < grown.half_width)
                    .then(|| grown.distance(x, sign * (place.z - course.height[k])))
            };
            let mut deepest: Option<(f64, f64, usize)> = None;
            for (i, place) in places.iter().enumerate() {
                if let Some((distance, mark)) = depth_at(place)
                    && deepest.is_none_or(|(so_far, ..)| distance < so_far)
                {
                    deepest = Some((distance, mark, i));
                }
            }
            let Some((_, _, at)) = deepest else { continue };
            // Ends of the piece lie on the outline by themselves.
            if (at == 0 && crossing == first) || (at == steps && crossing == last) {
                // Just behind the contact the yarn is outside by its own curvature; look one step further on.
                let inner = if at == 0 { 1 } else { steps - 1 };
                let Some((distance, mark)) = depth_at(&places[inner]) else {
                    continue;
                };
                if distance < -deep {
                    let convex = sign * places[inner].curvature <= 0.0;
                    for mark in shoulders(course, k, mark, convex) {
                        added.push((index, Contact::point(k, mark), crossing >= n));
                    }
                }
                continue;
            }
            // Between two stations the way may run deeper, by no more than both curvatures make of their distance:
            // looked at closer and closer until that cannot be.
            let mut apart = chain.pieces[index].length / steps as f64;
            let bends = 0.6 * (places[at].curvature.abs() + grown.sharpest());
            let Some((mut least, ..)) = deepest else {
                continue;
            };
            let mut middle = places[at].s;
            let mut held = None;
            while least < bends * apart * apart {
                let between = (
                    (middle - apart).max(0.0),
                    (middle + apart).min(chain.pieces[index].length),
                );
                let fine = chain.pieces[index].places_between(&from, &to, stiffness, between, 6);
                let best = fine
                    .iter()
                    .filter_map(|place| {
                        depth_at(place).map(|(distance, mark)| (distance, mark, place))
                    })
                    .min_by(|a, b| a.0.total_cmp(&b.0));
                let Some((distance, mark, place)) = best else {
                    break;
                };
                held = Some((distance, mark, sign * place.curvature <= 0.0));
                (least, middle) = (distance, place.s);
                apart /= 3.0;
                if bends * apart * apart < deep {
                    break;
                }
            }
            if let Some((distance, mark, convex)) = held
                && distance < -deep
            {
                for mark in shoulders(course, k, mark, convex) {
                    added.push((index, Contact::point(k, mark), crossing >= n));
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

/// How far the yarn stays from a section it does not touch, mm, and the mark nearest; `None` where it passes beside.
pub(super) fn gap(
    chain: &Chain,
    course: &Course<'_>,
    stiffness: &Stiffness,
    crossing: usize,
) -> Option<(usize, f64, f64)> {
    let n = course.over.len();
    // The piece that runs past it.
    let behind = chain
        .contacts
        .iter()
        .rposition(|contact| contact.crossing < crossing)
        .unwrap_or(chain.contacts.len() - 1);
    let first = chain.contacts[behind].crossing;
    let absolute = if first < crossing {
        crossing
    } else {
        crossing + n
    };
    let next = (behind + 1) % chain.contacts.len();
    let last = chain.contacts[next].crossing + if next <= behind { n } else { 0 };
    let (from, to) = chain.ends(course, behind);
    let places = chain.pieces[behind].places(&from, &to, stiffness, 6 * (last - first + 1));
    let sign = course.sign(crossing);
    let centre = absolute as f64 * course.spacing;
    places
        .iter()
        .filter(|place| (place.x - centre).abs() < course.grown.half_width)
        .map(|place| {
            course
                .grown
                .distance(place.x - centre, sign * (place.z - course.height[crossing]))
        })
        .min_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(distance, mark)| (behind, distance, mark))
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
