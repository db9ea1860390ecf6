//! A stiff yarn and its path: what the rooms above ask for.

use super::chain::{Balance, Chain, Contact, Course};
use super::cyclic::Ring;
use super::grown::Grown;
use super::mend::Mender;
use super::piece::{Place, Stiffness};
use super::settle::{NoPath, Taut, Way, settle};
use super::touch::gap;
use crate::path::Crest;
use crate::yarn::Outline;

/// A yarn with its pull and rigidity, and the sections it runs over and under.
#[derive(Debug, Clone)]
pub struct StiffYarn {
    crest: Crest,
    grown: Grown,
    stiffness: Stiffness,
    unit_n: f64,
    accuracy: f64,
}

/// What a yarn is made of and what it crosses.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Strand {
    /// Half of its thickness, mm.
    pub half_thickness_mm: f64,
    /// Pull where it runs straight, N; not below zero.
    pub pull_n: f64,
    /// Bending rigidity, N mm2; not below zero, and above it where there is no pull.
    pub rigidity_n_mm2: f64,
}

/// The path of a yarn over one period.
#[derive(Debug, Clone)]
pub struct StiffPath {
    chain: Chain,
    over: Vec<bool>,
    height: Vec<f64>,
    spacing: f64,
    way: Way,
}

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

/// A run of the path of one curvature sign, told by its sharpest place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sample {
    /// Length on the centreline, mm.
    pub length_mm: f64,
    /// Curvature of the centreline, 1/mm, positive over a crest on the face.
    pub curvature_per_mm: f64,
    /// Turn of the whole run of this sign that it belongs to, rad.
    pub turn_rad: f64,
}

impl StiffYarn {
    /// A yarn `strand` over sections of this outline; crimp and largest curvature of its paths within `accuracy`
    /// (relative, 1e-9 to 1e-2).
    pub fn new(strand: &Strand, section: &Outline, accuracy: f64) -> Self {
        let grown = Grown::new(section, strand.half_thickness_mm);
        let reach = grown.reach;
        let ratio = if strand.rigidity_n_mm2 > 0.0 {
            strand.pull_n / strand.rigidity_n_mm2
        } else {
            f64::INFINITY
        };
        Self {
            crest: Crest {
                section: *section,
                half_thickness_mm: strand.half_thickness_mm,
                spacing_mm: 1.0,
            },
            stiffness: Stiffness::new(ratio, reach, accuracy),
            unit_n: strand.pull_n + strand.rigidity_n_mm2 / (reach * reach),
            accuracy,
            grown,
        }
    }

    /// Radius of the crossed section at its crest, mm; `None` where it is flat.
    pub fn section_radius_mm(&self) -> Option<f64> {
        let radius = self.crest.section.touch(0.0).radius_mm;
        (self.crest.section.shape() != crate::yarn::Shape::Racetrack).then_some(radius)
    }

    /// Distance of the centres of yarn and section where they touch at the crest, mm.
    pub fn reach_mm(&self) -> f64 {
        self.grown.reach
    }

    /// The path over sections `spacing_mm` apart, `over[k]` telling whether the yarn lies over section k, whose centre
    /// stands at `height_mm[k]`. `like` is a path near by to start from; without patience it is sought only directly.
    ///
    /// # Errors
    /// Where the yarn cannot pass, or no balance was found.
    pub fn path(
        &self,
        spacing_mm: f64,
        over: &[bool],
        height_mm: &[f64],
        like: Option<&StiffPath>,
        patient: bool,
    ) -> Result<StiffPath, NoPath> {
        let taut = self.taut(spacing_mm, over, height_mm)?;
        let wide: Vec<f64> = taut
            .iter()
            .map(|t| {
                t.into
                    .unwrap_or(0.0)
                    .abs()
                    .max(t.out.unwrap_or(0.0))
                    .max(1e-9)
            })
            .collect();
        let course = Course {
            grown: &self.grown,
            spacing: spacing_mm,
            over,
            height: height_mm,
            wide: &wide,
        };
        let near = like.and_then(|path| {
            let mut chain = path.chain.clone();
            let mender = Mender {
                course: &course,
                stiffness: self.stiffness,
                accuracy: self.accuracy,
            };
            mender.mend(&mut chain).is_ok().then_some((chain, path.way))
        });
        let (chain, way) = match near {
            Some(found) => found,
            None => settle(&course, &taut, self.stiffness.ratio, self.accuracy, patient)?,
        };
        Ok(StiffPath {
            chain,
            over: over.to_vec(),
            height: height_mm.to_vec(),
            spacing: spacing_mm,
            way,
        })
    }

    /// The marks of the taut thread on both sides of every crossing where the yarn changes sides.
    fn taut(&self, spacing: f64, over: &[bool], height: &[f64]) -> Result<Vec<Taut>, NoPath> {
        let n = over.len();
        let crest = Crest {
            spacing_mm: spacing,
            ..self.crest
        };
        let mut taut = vec![
            Taut {
                into: None,
                out: None
            };
            n
        ];
        // Neighbours mostly stand alike: the last slope is kept.
        let mut last = (f64::NAN, 0.0);
        for k in 0..n {
            let next = (k + 1) % n;
            if over[k] == over[next] {
                continue;
            }
            let sign = if over[k] { 1.0 } else { -1.0 };
            let wave = 2.0 * self.grown.reach - sign * (height[next] - height[k]);
            if wave != last.0 {
                // Sections that stand clear of each other ask for no wave.
                let slope = if wave > 0.0 {
                    crest.slope_rad(wave).ok_or(NoPath::Jammed(k))?
                } else {
                    0.0
                };
                last = (wave, self.grown.mark_at(slope));
            }
            taut[k].out = Some(last.1);
            taut[next].into = Some(-last.1);
        }
        Ok(taut)
    }

    fn course<'a>(&'a self, path: &'a StiffPath) -> Course<'a> {
        Course {
            grown: &self.grown,
            spacing: path.spacing,
            over: &path.over,
            height: &path.height,
            wide: &[],
        }
    }

    /// Length of the path over one period, mm, and its energy, N mm: bending and pull times length.
    pub fn length_and_energy(&self, path: &StiffPath) -> (f64, f64) {
        let course = self.course(path);
        let (mut length, mut energy) = (0.0, 0.0);
        for (index, contact) in path.chain.contacts.iter().enumerate() {
            let (from, to) = path.chain.ends(&course, index);
            let piece = &path.chain.pieces[index];
            length += piece.length;
            energy += piece.energy(to.x - from.x, to.z - from.z, &self.stiffness);
            if contact.arc {
                let (on, squared) = self.grown.along(contact.into, contact.out);
                length += on;
                energy += self.stiffness.pull * on + 0.5 * self.stiffness.rigidity * squared;
            }
        }
        (length, self.unit_n * energy)
    }

    /// Upward push of every section on the yarn, N: the change of energy with its height.
    pub fn pushes_n(&self, path: &StiffPath) -> Vec<f64> {
        let mut pushes = vec![0.0; path.over.len()];
        let n = path.chain.contacts.len();
        for (index, contact) in path.chain.contacts.iter().enumerate() {
            let before = path.chain.pieces[(index + n - 1) % n].force[1].value;
            let behind = path.chain.pieces[index].force[1].value;
            pushes[contact.crossing] += self.unit_n * (before - behind);
        }
        pushes
    }

    /// Largest height from crest to trough between neighbouring sections where the yarn changes sides, mm, as if it touched
    /// both at their crests.
    pub fn wave_mm(&self, path: &StiffPath) -> f64 {
        let course = self.course(path);
        let n = path.over.len();
        (0..n)
            .filter(|k| path.over[*k] != path.over[(k + 1) % n])
            .map(|k| {
                let rise = path.height[(k + 1) % n] - path.height[k];
                2.0 * self.grown.reach - course.sign(k) * rise
            })
            .fold(0.0, f64::max)
    }

    /// Whether the yarn touches each section.
    pub fn touches(&self, path: &StiffPath) -> Vec<bool> {
        let mut touches = vec![false; path.over.len()];
        for contact in &path.chain.contacts {
            touches[contact.crossing] = true;
        }
        touches
    }

    /// How those pushes change with the heights; `None` where the path is about to give way. Sections in `about` that the
    /// yarn passes within `near_mm` are taken as touched: they will be, as soon as they move.
    pub fn response(&self, path: &StiffPath, about: &[bool], near_mm: f64) -> Option<Response> {
        let mut height = path.height.clone();
        let mut chain = path.chain.clone();
        let course = self.course(path);
        let mut added = false;
        for (crossing, wanted) in about.iter().enumerate() {
            if !wanted || chain.contacts.iter().any(|c| c.crossing == crossing) {
                continue;
            }
            if let Some((distance, mark)) = gap(&path.chain, &course, &self.stiffness, crossing)
                && distance < near_mm
            {
                chain.contacts.push(Contact::point(crossing, mark));
                height[crossing] += course.sign(crossing) * distance;
                added = true;
            }
        }
        if added {
            chain.contacts.sort_by_key(|contact| contact.crossing);
            chain.pieces.clear();
            let course = Course {
                height: &height,
                ..course
            };
            if chain.lay(&course, &self.stiffness).is_ok()
                && let Some(response) = self.response_of(&chain, &course)
            {
                return Some(response);
            }
        }
        self.response_of(&path.chain, &course)
    }

    fn response_of(&self, chain: &Chain, course: &Course<'_>) -> Option<Response> {
        let balance = chain.balance(course, &self.stiffness);
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
        Some(Response {
            ring,
            balance,
            pieces,
            crossings: course.over.len(),
            unit_n: self.unit_n,
        })
    }

    /// The path in samples: arcs whole, free pieces in `parts` each, told by their sharper end.
    pub fn samples(&self, path: &StiffPath, parts: usize) -> Vec<Sample> {
        let course = self.course(path);
        let mut samples = Vec::with_capacity(path.chain.contacts.len() * (parts + 1));
        for (index, contact) in path.chain.contacts.iter().enumerate() {
            if contact.arc {
                let sign = course.sign(contact.crossing);
                let arcs = if self.grown.is_ellipse() { parts } else { 1 };
                for part in 0..arcs {
                    let at = |share: usize| {
                        contact.into + (contact.out - contact.into) * share as f64 / arcs as f64
                    };
                    let (a, b) = (self.grown.at(at(part)), self.grown.at(at(part + 1)));
                    samples.push(Sample {
                        length_mm: self.grown.along(at(part), at(part + 1)).0,
                        curvature_per_mm: sign * a.curvature.max(b.curvature),
                        turn_rad: sign * (b.angle - a.angle),
                    });
                }
            }
            let (from, to) = path.chain.ends(&course, index);
            let places: Vec<Place> =
                path.chain.pieces[index].places(&from, &to, &self.stiffness, parts);
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

    /// Largest curvature of the centreline, 1/mm.
    pub fn peak_per_mm(&self, path: &StiffPath) -> f64 {
        let mut peak = 0.0_f64;
        for (index, contact) in path.chain.contacts.iter().enumerate() {
            if contact.arc {
                peak = peak
                    .max(self.grown.at(contact.into).curvature)
                    .max(self.grown.at(contact.out).curvature);
            }
            peak = peak.max(path.chain.pieces[index].peak(&self.stiffness));
        }
        peak
    }

    /// Steepest slope, rad, and highest and lowest place of the centreline, mm.
    pub fn slope_and_range(&self, path: &StiffPath) -> (f64, f64, f64) {
        let course = self.course(path);
        let (mut slope, mut high, mut low) = (0.0_f64, f64::MIN, f64::MAX);
        for (index, contact) in path.chain.contacts.iter().enumerate() {
            if contact.arc && contact.into * contact.out < 0.0 {
                let crest = course.end(contact.crossing, &self.grown.at(0.0), 0);
                (high, low) = (high.max(crest.z), low.min(crest.z));
            }
            let (from, to) = path.chain.ends(&course, index);
            for place in path.chain.pieces[index].places(&from, &to, &self.stiffness, 8) {
                slope = slope.max(place.angle.abs());
                (high, low) = (high.max(place.z), low.min(place.z));
            }
        }
        (slope, high, low)
    }

    /// Length of centreline that lies on the sections, over one period, mm.
    pub fn contact_mm(&self, path: &StiffPath) -> f64 {
        path.chain
            .contacts
            .iter()
            .filter(|contact| contact.arc)
            .map(|contact| self.grown.along(contact.into, contact.out).0)
            .sum()
    }
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

impl StiffPath {
    /// Crossings of one period.
    pub fn crossings(&self) -> usize {
        self.over.len()
    }

    /// How it was found.
    pub fn way(&self) -> Way {
        self.way
    }
}

impl Response {
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
