//! The heights of all crossings of stiff yarns: least energy over the repeat.
//!
//! At a crossing the centres of both yarns stand D/2 = (t1 + t2)/2 apart, so one height for each kind of crossing
//! (`pattern::alike`) tells both sections. A yarn's path (`path::stiff`) is the one of least energy over the
//! sections it crosses, and its push on each section is how its energy changes with that section's height. The
//! repeat's energy is least where both yarns push alike at every crossing:
//!
//! ```text
//! w P1 + P2 = 0        P: upward push of the section on the yarn, N; w = 1
//! ```
//!
//! Found by Newton: the pushes' own changes times the step make up for what is missed, solved by conjugate
//! gradients (Hestenes and Stiefel 1952); a step is cut back where the energy's slope along it is passed, and where one of
//! two yarns passes a crossing near by without touching it, both count as touching.
//! Contacts only push, so yarns that would float free of one another do.
//!
//! A measured crimp is met by weighting the warp's energy (w other than 1): what holds the cloth in that shape is
//! not asked.
//!
//! Where the balance asked for lies beyond what the yarns can pass, the cloth is jam limited: a wall
//! that rises as -m ln(room) keeps the yarns passing, m falling to 1e-4 of the largest push (or to where the paths are lost,
//! at 1e-2 at most): so near the jam, relative to the yarns' thickness, do they stand.
//!
//! Left out: yarns that tilt or flatten at a crossing; a lifted crest's section stands where it would touch.

use super::conjugate::conjugate;
use crate::path::{NoPath, StiffPath, StiffYarn};
use crate::pattern::{Alike, Pattern};
use rayon::prelude::*;

/// Newton steps, and the miss of a balance over the largest push.
const STEPS: usize = 80;
const BALANCED: f64 = 5e-9;
/// What is taken for balance where no step brings it further: noise of yarns that run close past each other.
const NOISE: f64 = 1e-6;
/// Cuts of one step.
const CUTS: usize = 14;
/// Yarns from which a repeat is worth more than one core.
const MANY: usize = 16;

/// A repeat of stiff yarns.
#[derive(Debug, Clone)]
pub(super) struct Repeat<'a> {
    pub pattern: &'a Pattern,
    pub alike: &'a Alike,
    pub warp: &'a StiffYarn,
    pub weft: &'a StiffYarn,
    /// Distance between ends and between picks, mm.
    pub ends_mm: f64,
    pub picks_mm: f64,
    /// Weight of the warp's energy: 1 but where a measured crimp is met.
    pub warp_weight: f64,
    /// Least rise of a section over the next that lies on the other side of the yarn, for warp and weft, mm.
    pub least_rise_mm: (f64, f64),
}

/// Heights in balance and the paths that follow.
#[derive(Debug, Clone)]
pub(super) struct Balanced {
    /// Height of the weft's centre at every kind of crossing, mm.
    pub heights: Vec<f64>,
    /// One path for each kind of end.
    pub warp: Vec<StiffPath>,
    /// One path for each kind of pick.
    pub weft: Vec<StiffPath>,
    /// Whether the yarns could not pass as the balance asks.
    pub jam_limited: bool,
}

/// Why there is no balance.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum NoBalance {
    /// A yarn has no path: the warp (or else the weft), the yarn, the crossing, and why.
    Path {
        warp: bool,
        yarn: usize,
        why: NoPath,
    },
    /// The heights did not come to rest; the kind of crossing that missed most.
    Heights(usize),
}

/// The course of one yarn through the repeat.
struct Course {
    /// Which end or pick.
    yarn: usize,
    /// Whether it lies over, at every crossing, and of which kind that is.
    over: Vec<bool>,
    kinds: Vec<usize>,
}

impl Course {
    fn new(
        yarn: usize,
        over: impl Iterator<Item = bool>,
        kinds: impl Iterator<Item = usize>,
    ) -> Self {
        Self {
            yarn,
            over: over.collect(),
            kinds: kinds.collect(),
        }
    }
}

/// Paths of warp and weft to start from.
type Near<'a> = (&'a [StiffPath], &'a [StiffPath]);

/// A pair of neighbouring crossings between which a yarn changes sides: their rise must keep above the least.
struct Wall {
    from: usize,
    to: usize,
    /// What the sections' centres add to the rise, mm.
    add_mm: f64,
    sign: f64,
    least_mm: f64,
}

/// Heights, the paths over them, and how far they are from balance.
struct State {
    heights: Vec<f64>,
    warp: Vec<StiffPath>,
    weft: Vec<StiffPath>,
    /// What the pushes at every kind of crossing miss balance by, N.
    miss: Vec<f64>,
    /// The largest push, N.
    most: f64,
}

impl State {
    fn near(&self) -> Near<'_> {
        (&self.warp, &self.weft)
    }

    fn balanced(self, jam_limited: bool) -> Balanced {
        Balanced {
            heights: self.heights,
            warp: self.warp,
            weft: self.weft,
            jam_limited,
        }
    }
}

/// Finds the heights of a repeat.
pub(super) struct Solver<'a> {
    repeat: &'a Repeat<'a>,
    warp: Vec<Course>,
    weft: Vec<Course>,
    /// Whether the warp is up at each kind of crossing.
    up: Vec<bool>,
    walls: Vec<Wall>,
}

fn each<T: Sync, R: Send>(items: &[T], of: impl Fn(usize, &T) -> R + Sync + Send) -> Vec<R> {
    if items.len() < MANY {
        items
            .iter()
            .enumerate()
            .map(|(i, item)| of(i, item))
            .collect()
    } else {
        items
            .par_iter()
            .enumerate()
            .map(|(i, item)| of(i, item))
            .collect()
    }
}

impl<'a> Solver<'a> {
    pub(super) fn new(repeat: &'a Repeat<'a>) -> Self {
        let (pattern, alike) = (repeat.pattern, repeat.alike);
        let warp: Vec<Course> = alike
            .ends
            .iter()
            .map(|end| {
                let kinds = (0..pattern.picks()).map(|pick| alike.kind(*end, pick));
                Course::new(*end, pattern.warp_sequence(*end), kinds)
            })
            .collect();
        let weft: Vec<Course> = alike
            .picks
            .iter()
            .map(|pick| {
                let kinds = (0..pattern.ends()).map(|end| alike.kind(end, *pick));
                Course::new(*pick, pattern.weft_sequence(*pick), kinds)
            })
            .collect();
        let mut up = vec![false; alike.kinds];
        for course in &warp {
            for (kind, over) in course.kinds.iter().zip(&course.over) {
                up[*kind] = *over;
            }
        }
        let mut solver = Self {
            repeat,
            warp,
            weft,
            up,
            walls: Vec::new(),
        };
        solver.walls = solver.walls();
        solver
    }

    /// Heights that waves of this height in the warp give.
    pub(super) fn heights_of_wave(&self, warp_wave_mm: f64) -> Vec<f64> {
        let below = 0.5 * warp_wave_mm - self.repeat.warp.reach_mm();
        self.up
            .iter()
            .map(|up| if *up { below } else { -below })
            .collect()
    }

    /// Height of the warp's centre over the weft's at a kind of crossing.
    fn apart(&self, kind: usize) -> f64 {
        let reach = self.repeat.warp.reach_mm();
        if self.up[kind] { reach } else { -reach }
    }

    fn walls(&self) -> Vec<Wall> {
        let mut walls = Vec::new();
        let (warp_least, weft_least) = self.repeat.least_rise_mm;
        for (courses, least_mm, of_weft) in [
            (&self.warp, warp_least, false),
            (&self.weft, weft_least, true),
        ] {
            for course in courses {
                let n = course.over.len();
                for k in 0..n {
                    let next = (k + 1) % n;
                    if course.over[k] == course.over[next] {
                        continue;
                    }
                    let (from, to) = (course.kinds[k], course.kinds[next]);
                    walls.push(Wall {
                        from,
                        to,
                        add_mm: if of_weft {
                            self.apart(to) - self.apart(from)
                        } else {
                            0.0
                        },
                        sign: if course.over[k] { 1.0 } else { -1.0 },
                        least_mm,
                    });
                }
            }
        }
        walls
    }

    fn room(&self, wall: &Wall, heights: &[f64]) -> f64 {
        wall.sign * (heights[wall.to] - heights[wall.from] + wall.add_mm) - wall.least_mm
    }

    /// The state at these heights; `push` is the strength of the walls, N mm.
    fn at(
        &self,
        heights: Vec<f64>,
        like: Option<Near<'_>>,
        push: f64,
        patient: bool,
    ) -> Result<State, NoBalance> {
        let repeat = self.repeat;
        let paths = |courses: &[Course], yarn: &StiffYarn, spacing: f64, of_warp: bool| {
            each(courses, |i, course| {
                let height: Vec<f64> = course
                    .kinds
                    .iter()
                    .map(|kind| heights[*kind] + if of_warp { 0.0 } else { self.apart(*kind) })
                    .collect();
                let near = like.map(|(warp, weft)| if of_warp { &warp[i] } else { &weft[i] });
                yarn.path(spacing, &course.over, &height, near, patient)
                    .map_err(|why| NoBalance::Path {
                        warp: of_warp,
                        yarn: course.yarn,
                        why,
                    })
            })
            .into_iter()
            .collect::<Result<Vec<StiffPath>, NoBalance>>()
        };
        let warp = paths(&self.warp, repeat.warp, repeat.picks_mm, true)?;
        let weft = paths(&self.weft, repeat.weft, repeat.ends_mm, false)?;
        let mut miss = vec![0.0; self.up.len()];
        let mut most = 0.0_f64;
        for (courses, found, yarn, weight) in [
            (&self.warp, &warp, repeat.warp, repeat.warp_weight),
            (&self.weft, &weft, repeat.weft, 1.0),
        ] {
            for (course, path) in courses.iter().zip(found) {
                for (kind, push) in course.kinds.iter().zip(yarn.pushes_n(path)) {
                    miss[*kind] += weight * push;
                    most = most.max(weight * push.abs());
                }
            }
        }
        if push > 0.0 {
            for wall in &self.walls {
                let room = self.room(wall, &heights);
                if room <= 0.0 {
                    return Err(NoBalance::Heights(wall.from));
                }
                miss[wall.to] -= push * wall.sign / room;
                miss[wall.from] += push * wall.sign / room;
            }
        }
        Ok(State {
            heights,
            warp,
            weft,
            miss,
            most,
        })
    }

    /// Balances the heights from these.
    pub(super) fn solve(
        &self,
        start: &[f64],
        like: Option<&Balanced>,
    ) -> Result<Balanced, NoBalance> {
        let like = like.map(|balanced| (balanced.warp.as_slice(), balanced.weft.as_slice()));
        let begun = self.at(start.to_vec(), like, 0.0, true)?;
        let (state, settled) = self.descend(begun, 0.0)?;
        if settled {
            return Ok(state.balanced(false));
        }
        // Against the jam: walls, lower and lower.
        let scale = self.repeat.warp.reach_mm() * state.most;
        let mut state = self.at(start.to_vec(), Some(state.near()), 1e-2 * scale, true)?;
        for power in 2..=4 {
            let push = scale * 10f64.powi(-power);
            let next = self
                .at(state.heights.clone(), Some(state.near()), push, true)
                .and_then(|begun| self.descend(begun, push));
            match next {
                Ok((next, true)) => state = next,
                // Nearer to the jam than this the path is lost: what stands is near enough.
                _ if power > 2 => break,
                Ok((next, false)) => return Err(NoBalance::Heights(worst(&next.miss))),
                Err(why) => return Err(why),
            }
        }
        Ok(state.balanced(true))
    }

    /// Newton from a state; whether it came to rest, else it stands before the jam.
    fn descend(&self, mut state: State, push: f64) -> Result<(State, bool), NoBalance> {
        let reach = self.repeat.warp.reach_mm();
        let mut last_jam = false;
        let mut near_mm = 0.3 * reach;
        let mut jams = 0;
        for _ in 0..STEPS {
            let size = largest(&state.miss);
            if size <= BALANCED * state.most {
                return Ok((state, true));
            }
            let share_of = (size / state.most).clamp(1e-10, 1e-2);
            // Slope of the energy along a step: it rises towards zero, and pushes know it better than energies.
            let slope = |step: &[f64], state: &State| -> f64 {
                step.iter().zip(&state.miss).map(|(s, m)| s * m).sum()
            };
            let mut step = self.newton_step(&state, push, near_mm, share_of);
            if slope(&step, &state) >= 0.0 {
                // Sections taken as touched misled it.
                step = self.newton_step(&state, push, 0.0, share_of);
            }
            let furthest = largest(&step);
            let mut share = (0.25 * reach / furthest).min(1.0);
            let begun = slope(&step, &state);
            let mut next = None;
            last_jam = false;
            for _ in 0..CUTS {
                let heights: Vec<f64> = state
                    .heights
                    .iter()
                    .zip(&step)
                    .map(|(height, step)| height + share * step)
                    .collect();
                match self.at(heights, Some(state.near()), push, false) {
                    Ok(tried) => {
                        let ended = slope(&step, &tried);
                        let nearer = largest(&tried.miss) <= (1.0 - 0.2 * share) * size;
                        if nearer || begun < 0.0 && ended <= -0.5 * begun {
                            next = Some(tried);
                            break;
                        }
                        // Too far: where the slope would vanish.
                        let cut = if begun < 0.0 {
                            begun / (begun - ended)
                        } else {
                            0.3
                        };
                        share *= cut.clamp(0.05, 0.7);
                    }
                    Err(why) => {
                        last_jam |= matches!(
                            why,
                            NoBalance::Path {
                                why: NoPath::Jammed(_),
                                ..
                            }
                        );
                        share *= 0.3;
                    }
                }
            }
            // Against the jam again and again: the walls do better.
            jams = if last_jam && share < 0.1 { jams + 1 } else { 0 };
            if jams >= 2 && push == 0.0 {
                return Ok((next.unwrap_or(state), false));
            }
            near_mm = (2.0 * share * furthest).clamp(1e-4 * reach, 0.5 * reach);
            match next {
                Some(tried) => state = tried,
                None if last_jam && push == 0.0 => return Ok((state, false)),
                None if size <= NOISE * state.most => return Ok((state, true)),
                None => return Err(NoBalance::Heights(worst(&state.miss))),
            }
        }
        if last_jam && push == 0.0 {
            return Ok((state, false));
        }
        Err(NoBalance::Heights(worst(&state.miss)))
    }

    /// The step that makes up for what is missed, to this share of it.
    fn newton_step(&self, state: &State, push: f64, near_mm: f64, share: f64) -> Vec<f64> {
        let repeat = self.repeat;
        // Where one yarn pushes and the other passes near by, both count: the next step brings them together.
        let mut pushed = [vec![false; self.up.len()], vec![false; self.up.len()]];
        let systems = [
            (&self.warp, &state.warp, repeat.warp),
            (&self.weft, &state.weft, repeat.weft),
        ];
        for (system, (courses, paths, yarn)) in systems.iter().enumerate() {
            for (course, path) in courses.iter().zip(paths.iter()) {
                for (kind, touches) in course.kinds.iter().zip(yarn.touches(path)) {
                    pushed[system][*kind] |= touches;
                }
            }
        }
        let responses = |system: usize| {
            let (courses, paths, yarn) = systems[system];
            each(paths, |i, path| {
                let about: Vec<bool> = courses[i]
                    .kinds
                    .iter()
                    .map(|kind| pushed[1 - system][*kind] && !pushed[system][*kind])
                    .collect();
                yarn.response(path, &about, near_mm)
            })
        };
        let (warp, weft) = (responses(0), responses(1));
        // A crossing that neither yarn touches keeps its height by this much.
        let slack = 1e-7 * state.most / repeat.warp.reach_mm();
        let apply = |rise: &[f64]| -> Vec<f64> {
            let mut change: Vec<f64> = rise.iter().map(|r| slack * r).collect();
            for (courses, responses, weight) in [
                (&self.warp, &warp, repeat.warp_weight),
                (&self.weft, &weft, 1.0),
            ] {
                let parts = each(courses, |i, course| {
                    let along: Vec<f64> = course.kinds.iter().map(|kind| rise[*kind]).collect();
                    let mut pushes = vec![0.0; along.len()];
                    if let Some(response) = &responses[i] {
                        response.to(&along, &mut pushes);
                    }
                    pushes
                });
                for (course, pushes) in courses.iter().zip(parts) {
                    for (kind, push) in course.kinds.iter().zip(pushes) {
                        change[*kind] += weight * push;
                    }
                }
            }
            if push > 0.0 {
                for wall in &self.walls {
                    let room = self.room(wall, &state.heights);
                    let force = push / (room * room) * (rise[wall.to] - rise[wall.from]);
                    change[wall.to] += force;
                    change[wall.from] -= force;
                }
            }
            change
        };
        conjugate(apply, &state.miss, share)
    }
}

fn largest(values: &[f64]) -> f64 {
    values.iter().fold(0.0, |most, v| most.max(v.abs()))
}

fn worst(values: &[f64]) -> usize {
    (0..values.len())
        .max_by(|a, b| values[*a].abs().total_cmp(&values[*b].abs()))
        .unwrap_or(0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::path::{Crest, Strand};
    use crate::pattern::parse_notation;
    use crate::yarn::{Outline, Shape};

    /// Largest force that is not balanced over the largest push, and how many heights there are.
    fn unbalanced(pattern: &Pattern, pulls: (f64, f64)) -> (f64, usize) {
        let section = Outline::new(Shape::Lens, 0.5, 0.1).unwrap();
        let (alike, half, spacing) = (pattern.alike(), 0.05, 0.6);
        let yarn = |pull: f64| {
            let strand = Strand {
                half_thickness_mm: half,
                pull_n: pull,
                rigidity_n_mm2: 0.01,
            };
            StiffYarn::new(&strand, &section, 1e-3)
        };
        let (warp, weft) = (yarn(pulls.0), yarn(pulls.1));
        let crest = Crest {
            section,
            half_thickness_mm: half,
            spacing_mm: spacing,
        };
        let least = 2.0 * warp.reach_mm() - crest.highest_wave_mm();
        let repeat = Repeat {
            pattern,
            alike: &alike,
            warp: &warp,
            weft: &weft,
            ends_mm: spacing,
            picks_mm: spacing,
            warp_weight: 1.0,
            least_rise_mm: (least, least),
        };
        let solver = Solver::new(&repeat);
        let found = solver.solve(&solver.heights_of_wave(0.1), None).unwrap();
        assert!(!found.jam_limited);
        let state = solver.at(found.heights, None, 0.0, true).unwrap();
        (largest(&state.miss) / state.most, alike.kinds)
    }

    /// Contact forces balance on every crossing to 1e-8 of the largest, found anew from the heights alone.
    #[test]
    fn forces_balance_on_every_crossing() {
        for name in [
            "plain",
            "twill 2/2",
            "satin 5",
            "satin 8 step 3",
            "hopsack 2/2",
            "warp rib 2/2",
        ] {
            for pulls in [(1.0, 0.7), (0.1, 0.07), (0.0, 0.0)] {
                let (off, _) = unbalanced(&parse_notation(name).unwrap(), pulls);
                assert!(off < 1e-8, "{name} {pulls:?}: {off}");
            }
        }
    }

    /// A pattern without any symmetry, whole.
    #[test]
    fn an_irregular_repeat_balances() {
        let mut seed = 11u64;
        let mut coin = || {
            seed = seed
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407);
            seed >> 63 == 0
        };
        let pattern = Pattern::from_fn(10, 10, |_, _| coin()).unwrap();
        assert!(pattern.falls_apart().is_none());
        let (off, heights) = unbalanced(&pattern, (0.1, 0.07));
        assert_eq!(heights, 100);
        assert!(off < 1e-8, "{off}");
    }
}
