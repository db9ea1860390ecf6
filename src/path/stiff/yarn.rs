//! A stiff yarn and its path: what the rooms above ask for.

use super::chain::{Chain, Contact, Course};
use super::grown::Grown;
use super::mend::Mender;
use super::piece::CLOSED;
use super::response::Response;
use super::sample::{Sample, samples};
use super::settle::{NoPath, Taut, Way, settle};
use super::stiffness::Stiffness;
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
            if chain.lay(&course, &self.stiffness, CLOSED).is_ok()
                && let Some(response) = Response::of(&chain, &course, &self.stiffness, self.unit_n)
            {
                return Some(response);
            }
        }
        Response::of(&path.chain, &course, &self.stiffness, self.unit_n)
    }

    /// The path in samples: arcs whole, free pieces in `parts` each, told by their sharper end.
    pub fn samples(&self, path: &StiffPath, parts: usize) -> Vec<Sample> {
        samples(&path.chain, &self.course(path), &self.stiffness, parts)
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
