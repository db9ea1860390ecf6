//! Which contacts a yarn has: mended until every check passes.
//!
//! A chain in balance (`chain`) is the yarn's path only if
//!
//! - every contact pushes and none pulls: a point that pulls is dropped;
//! - at a point the yarn is bent less than the outline: else it lies on it, as an arc where the pull allows
//!   (an arc of curvature c presses only where T >= B c²/2; on an ellipse (T - B c²/2) c - B c'' >= 0), or in two points,
//!   the crest lifted;
//! - arcs have a length, contacts on one section keep their order;
//! - no free piece runs through a section: where it runs deepest a point is added (`touch`).
//!
//! Each round mends what it finds first and balances again. Contacts that meet are made one and, if they must part again,
//! parted otherwise.

#![expect(
    clippy::needless_range_loop,
    reason = "several small arrays are walked side by side: the index is the mathematics"
)]

use super::chain::{Chain, Contact, Course, Stuck, side};
use super::stiffness::Stiffness;
use super::touch::touch;

/// Repairs of one chain before it is given up.
const REPAIRS: usize = 60;
/// What a point may pull before it is dropped, in units of [`Stiffness`].
const SLACK: f64 = 1e-9;
/// Ways in which contacts that do not balance are parted before a chain is given up.
const ATTEMPTS: usize = 6;

/// Mends chains on one course at one stiffness.
pub(super) struct Mender<'a> {
    pub course: &'a Course<'a>,
    pub stiffness: Stiffness,
    pub accuracy: f64,
}

impl Mender<'_> {
    /// Balances a chain and mends its contacts until every check passes; else a crossing that did not.
    pub(super) fn mend(&self, chain: &mut Chain) -> Result<(), usize> {
        // Contacts that met and were made one are parted otherwise the next time.
        let mut attempt = 0;
        for _ in 0..REPAIRS {
            if chain.contacts.len() < 2 {
                return Err(0);
            }
            match chain.settle(self.course, &self.stiffness) {
                Ok(()) => {
                    if !self.improve(chain, attempt) {
                        return Ok(());
                    }
                }
                Err(Stuck::Jump(index)) => cross(chain, self.course, index),
                Err(Stuck::Lost(index)) => {
                    // A contact out of order or turned over, or two that meet, may be what keeps it from balance.
                    attempt += 1;
                    let crossing = chain.contacts[index].crossing;
                    if !order(chain, 0.03 * self.course.wide[crossing]) || attempt > ATTEMPTS {
                        return Err(crossing);
                    }
                }
            }
        }
        Err(chain.contacts[0].crossing)
    }

    /// One round of mending of a chain in balance; whether anything changed.
    fn improve(&self, chain: &mut Chain, attempt: usize) -> bool {
        let (course, stiffness) = (self.course, &self.stiffness);
        if order(chain, 0.0) {
            return true;
        }
        if drop_pulling(chain, course) {
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
            if stiffness.rigidity > 0.0 && bent > lies * (1.0 + 1e-5 * self.accuracy) + 1e-12 {
                contacts.extend(parted(
                    course,
                    stiffness,
                    contact,
                    bent / lies.max(1e-9),
                    attempt,
                ));
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
            1e-5 * self.accuracy * course.grown.reach,
        )
    }
}

/// Drops points that pull, of each run of them the worst; whether any was dropped. Two contacts always stay.
fn drop_pulling(chain: &mut Chain, course: &Course<'_>) -> bool {
    let pushes: Vec<f64> = (0..chain.contacts.len())
        .map(|index| chain.push(course, index))
        .collect();
    let count = pushes.len();
    let stays = |index: usize| {
        let (before, behind) = (
            pushes[(index + count - 1) % count],
            pushes[(index + 1) % count],
        );
        let worst = pushes[index] <= before && pushes[index] < behind
            || before >= -SLACK && behind >= -SLACK;
        pushes[index] >= -SLACK || !worst
    };
    let staying: Vec<Contact> = (0..count)
        .filter(|index| stays(*index))
        .map(|index| chain.contacts[index])
        .collect();
    if staying.len() == count || staying.len() < 2 {
        return false;
    }
    chain.contacts = staying;
    chain.pieces.clear();
    true
}

/// What a point becomes whose yarn is bent `over` times as much as the outline: an arc, or two points with the crest lifted.
/// Both are begun a little apart, the more the more it is bent, and otherwise at every attempt.
fn parted(
    course: &Course<'_>,
    stiffness: &Stiffness,
    point: &Contact,
    over: f64,
    attempt: usize,
) -> Vec<Contact> {
    let wide = course.extent(point.crossing, point.into);
    let near = wide * (over - 1.0).clamp(0.04, 0.3);
    let spread = match attempt % 3 {
        0 => near,
        1 => (2.0 * near).max(0.6 * wide),
        _ => (3.0 * near).max(0.95 * wide),
    };
    let (mut into, mut out) = (point.into - spread, point.into + spread);
    if let Some(jump) = course.grown.jump() {
        // Both ends on the same part as the point.
        match side(point.into, jump) {
            0 => (into, out) = (into.max(-0.98 * jump), out.min(0.98 * jump)),
            1 => into = into.max(0.5 * (jump + point.into)),
            _ => out = out.min(0.5 * (-jump + point.into)),
        }
    }
    let curvature = course.grown.at(point.into).curvature;
    if stiffness.presses(curvature) && curvature > 0.0 {
        vec![Contact::arc(point.crossing, into, out)]
    } else {
        vec![
            Contact::point(point.crossing, into),
            Contact::point(point.crossing, out),
        ]
    }
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
        return (!stiffness.presses(curvature) && stiffness.rigidity > 0.0).then(|| {
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
