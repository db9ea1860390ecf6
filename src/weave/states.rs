//! The states of a cloth: taut yarns have one, stiff yarns two, on the loom and at rest.
//!
//! On the loom the yarns carry their mean weaving tension, at rest the share of it that friction and set keep.
//! The two are one cloth: in the state in which the sett was counted the spacings are given and the heights
//! of least energy follow (`heights`), and with them the yarns' lengths; in the other state the yarns keep those lengths
//! and the spacings follow, p = l/(1 + c), found by Broyden's method (1965) to 1e-9.
//!
//! Outlines, packing and whether the yarns can interlace at all are those of the taut cloth (`build`): a stiff yarn passes
//! where a thread does. A measured crimp or thickness is one of the state of the sett.

use super::build::scaled;
use super::cloth::{Cloth, ClothError, ClothYarn, StiffSystem, YarnPath};
use super::heights::{Balanced, NoBalance, Repeat, Solver};
use super::share::{Closed, Closure};
use super::wave::Wave;
use crate::path::{Crest, NoPath, Sample, StiffPath, StiffYarn, Strand, Way};
use crate::root::rising_root;
use crate::spec::{PathModel, SettAt, System, Weave};

/// Crimp and largest curvature of the paths, relative.
const ACCURACY: f64 = 1e-3;
/// Steps of curvature in which a system's bends are told.
const BINS: usize = 12;
/// Samples of a free piece of yarn.
const PARTS: usize = 8;

/// Which rigidity the yarns have.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum RigidityBound {
    /// Their own: measured, or from filaments and binding.
    #[default]
    Own,
    /// That of filaments that slide freely.
    Free,
    /// That of the fully bonded yarn.
    Bonded,
}

/// What is varied of a weave beside its spec.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Varied {
    /// Factor on assumed flatness.
    pub flatness: f64,
    /// Which rigidity.
    pub rigidity: RigidityBound,
}

impl Default for Varied {
    fn default() -> Self {
        Self {
            flatness: 1.0,
            rigidity: RigidityBound::Own,
        }
    }
}

/// A cloth in its states.
#[derive(Debug, Clone, PartialEq)]
pub struct States {
    /// At rest, or the one state of taut yarns.
    pub cloth: Cloth,
    /// On the loom; absent for taut yarns.
    pub on_loom: Option<Cloth>,
}

/// Spacing of ends and of picks, mm.
type Spacings = (f64, f64);

impl States {
    /// The cloth of a weave in its states.
    ///
    /// # Errors
    /// Where there is no cloth, or a stiff path or balance was not found.
    pub fn build(weave: &Weave, varied: Varied) -> Result<Self, ClothError> {
        let taut = Cloth::build(weave, varied.flatness)?;
        if weave.path == PathModel::Taut {
            return Ok(Self {
                cloth: taut,
                on_loom: None,
            });
        }
        let taut = measured(weave, varied, taut)?;
        let (rest, loom) = (weave.rest, 1.0);
        let (first, second) = match weave.sett_at {
            SettAt::Finished => (rest, loom),
            SettAt::Loom => (loom, rest),
        };
        let counted = Pulled::new(weave, &taut, first, varied.rigidity).balanced()?;
        let other = Pulled::new(weave, &taut, second, varied.rigidity);
        let other = match other.with_lengths(&counted) {
            Ok(other) => other,
            Err(why) => {
                let (state, other) = match weave.sett_at {
                    SettAt::Finished => ("at rest", "on the loom"),
                    SettAt::Loom => ("on the loom", "at rest"),
                };
                return Err(match why {
                    ClothError::Jammed => ClothError::NoOtherState { state, other },
                    why => why,
                });
            }
        };
        let (counted, other) = (counted.cloth(weave, &taut), other.cloth(weave, &taut));
        Ok(match weave.sett_at {
            SettAt::Finished => Self {
                cloth: counted,
                on_loom: Some(other),
            },
            SettAt::Loom => Self {
                cloth: other,
                on_loom: Some(counted),
            },
        })
    }

    /// The cloth under the loom's pull: the same where there is one state.
    pub fn on_loom(&self) -> &Cloth {
        self.on_loom.as_ref().unwrap_or(&self.cloth)
    }
}

/// The taut cloth whose yarns are scaled so that the stiff cloth meets the measured thickness.
fn measured(weave: &Weave, varied: Varied, taut: Cloth) -> Result<Cloth, ClothError> {
    let (Some(asked_mm), Some(begun)) = (weave.thickness_mm, taut.thickness_factor) else {
        return Ok(taut);
    };
    let share = match weave.sett_at {
        SettAt::Finished => weave.rest,
        SettAt::Loom => 1.0,
    };
    let thickness = |factor: f64| -> Result<f64, ClothError> {
        let taut = scaled(weave, varied.flatness, factor)?;
        let found = Pulled::new(weave, &taut, share, varied.rigidity).balanced()?;
        Ok(found.thickness_mm())
    };
    let factor = secant(&thickness, begun, asked_mm).unwrap_or_else(|| {
        // Near the jam the thickness has a kink: closed in from both sides. Where there is no cloth it is too thick above
        // the taut factor and too thin below.
        let excess = |factor: f64| match thickness(factor) {
            Ok(found) => found - asked_mm,
            Err(_) => asked_mm * if factor > begun { 1.0 } else { -1.0 },
        };
        rising_root(excess, 0.6 * begun, 1.3 * begun, 1e-10 * begun)
    });
    let met = thickness(factor)?;
    if (met - asked_mm).abs() > 1e-6 * asked_mm {
        return Err(ClothError::Thickness {
            asked_mm,
            least_mm: met.min(asked_mm),
            most_mm: met.max(asked_mm),
        });
    }
    Ok(Cloth {
        thickness_factor: Some(factor),
        ..scaled(weave, varied.flatness, factor)?
    })
}

/// The factor that meets a thickness, from one near by; `None` where the secant does not come to it.
fn secant(
    thickness: &impl Fn(f64) -> Result<f64, ClothError>,
    begun: f64,
    asked_mm: f64,
) -> Option<f64> {
    let (mut a, mut b) = (begun, begun * 0.995);
    let (mut at_a, mut at_b) = (thickness(a).ok()? - asked_mm, thickness(b).ok()? - asked_mm);
    for _ in 0..10 {
        if at_b.abs() <= 1e-7 * asked_mm {
            return Some(b);
        }
        let slope = (at_b - at_a) / (b - a);
        if !(slope.is_finite() && slope > 0.1 * asked_mm / begun) {
            return None;
        }
        (a, at_a) = (b, at_b);
        b -= at_b / slope;
        at_b = thickness(b).ok()? - asked_mm;
    }
    None
}

/// Yarns under the pull of one state.
struct Pulled<'a> {
    weave: &'a Weave,
    taut: &'a Cloth,
    warp: StiffYarn,
    weft: StiffYarn,
    strands: (Strand, Strand),
}

/// A state that was found.
struct FoundState<'a> {
    pulled: Pulled<'a>,
    spacings: Spacings,
    balanced: Balanced,
    closed: Closed,
}

impl<'a> Pulled<'a> {
    fn new(weave: &'a Weave, taut: &'a Cloth, share: f64, bound: RigidityBound) -> Self {
        let strand = |system: &System, woven: &ClothYarn| Strand {
            half_thickness_mm: 0.5 * woven.laid.outline.thickness_mm(),
            pull_n: share * system.tension_n,
            rigidity_n_mm2: match bound {
                RigidityBound::Own => system.yarn.rigidity_n_mm2(&woven.laid),
                RigidityBound::Free => system.yarn.free_rigidity_n_mm2(),
                RigidityBound::Bonded => system.yarn.bonded_rigidity_n_mm2(&woven.laid),
            },
        };
        let strands = (
            strand(&weave.warp, &taut.warp),
            strand(&weave.weft, &taut.weft),
        );
        Self {
            weave,
            taut,
            warp: StiffYarn::new(&strands.0, &taut.weft.laid.outline, ACCURACY),
            weft: StiffYarn::new(&strands.1, &taut.warp.laid.outline, ACCURACY),
            strands,
        }
    }

    /// The balance at these spacings; `weight` is that of the warp's energy.
    fn at(
        &self,
        spacings: Spacings,
        weight: f64,
        like: Option<&Balanced>,
    ) -> Result<Balanced, ClothError> {
        let crest = |strand: &Strand, crossed: &ClothYarn, spacing_mm: f64| Crest {
            section: crossed.laid.outline,
            half_thickness_mm: strand.half_thickness_mm,
            spacing_mm,
        };
        let (ends_mm, picks_mm) = spacings;
        let whole = 2.0 * self.warp.reach_mm();
        let highest = (
            crest(&self.strands.0, &self.taut.weft, picks_mm).highest_wave_mm(),
            crest(&self.strands.1, &self.taut.warp, ends_mm).highest_wave_mm(),
        );
        let (low, high) = ((whole - highest.1).max(0.0), highest.0.min(whole));
        if high <= low {
            return Err(ClothError::Jammed);
        }
        let repeat = Repeat {
            pattern: &self.weave.woven.pattern,
            alike: &self.weave.woven.alike,
            warp: &self.warp,
            weft: &self.weft,
            ends_mm,
            picks_mm,
            warp_weight: weight,
            least_rise_mm: (whole - highest.0, whole - highest.1),
        };
        let solver = Solver::new(&repeat);
        let room = 0.02 * (high - low);
        let wave = self.taut.warp.wave_height_mm.clamp(low + room, high - room);
        let fresh = || solver.solve(&solver.heights_of_wave(wave), None);
        let found = match like {
            Some(like) => solver.solve(&like.heights, Some(like)).or_else(|_| fresh()),
            None => fresh(),
        };
        found.map_err(|why| self.told(why))
    }

    fn told(&self, why: NoBalance) -> ClothError {
        match why {
            NoBalance::Path {
                why: NoPath::Jammed(_),
                ..
            } => ClothError::Jammed,
            NoBalance::Path {
                warp,
                yarn,
                why: NoPath::Lost(crossing),
            } => ClothError::NoPath {
                system: if warp { "warp" } else { "weft" },
                yarn: yarn + 1,
                crossing: crossing + 1,
            },
            NoBalance::Heights(kind) => {
                let (ends, picks) = (
                    self.weave.woven.pattern.ends(),
                    self.weave.woven.pattern.picks(),
                );
                let alike = &self.weave.woven.alike;
                let (end, pick) = (0..picks)
                    .flat_map(|pick| (0..ends).map(move |end| (end, pick)))
                    .find(|(end, pick)| alike.kind(*end, *pick) == kind)
                    .unwrap_or((0, 0));
                ClothError::NoBalance {
                    end: end + 1,
                    pick: pick + 1,
                }
            }
        }
    }

    /// The state in which the sett was counted.
    fn balanced(self) -> Result<FoundState<'a>, ClothError> {
        let weave = self.weave;
        let spacings = (weave.warp.spacing_mm(), weave.weft.spacing_mm());
        let (balanced, closed) = match (weave.warp.crimp, weave.weft.crimp) {
            (None, None) => {
                let balanced = self.at(spacings, 1.0, None)?;
                let closed = Closed {
                    by: Closure::LeastEnergy,
                    jam_limited: balanced.jam_limited,
                    mismatch: None,
                };
                (balanced, closed)
            }
            (warp, weft) => self.with_crimp(spacings, warp, weft)?,
        };
        Ok(FoundState {
            pulled: self,
            spacings,
            balanced,
            closed,
        })
    }

    /// The balance with a measured crimp, by weighting the warp's energy.
    fn with_crimp(
        &self,
        spacings: Spacings,
        warp: Option<f64>,
        weft: Option<f64>,
    ) -> Result<(Balanced, Closed), ClothError> {
        let by = match (warp, weft) {
            (Some(warp), Some(weft)) => Closure::BothCrimps(warp, weft),
            (Some(warp), None) => Closure::WarpCrimp(warp),
            (None, weft) => Closure::WeftCrimp(weft.unwrap_or(0.0)),
        };
        // How much more crimp the warp has than asked for; it falls as the warp weighs more.
        let excess = |balanced: &Balanced| {
            let (c1, c2) = self.crimps(spacings, balanced);
            match by {
                Closure::BothCrimps(warp, weft) => c1 * weft - c2 * warp,
                Closure::WarpCrimp(warp) => c1 - warp,
                Closure::WeftCrimp(weft) => weft - c2,
                _ => 0.0,
            }
        };
        let mut last = self.at(spacings, 1.0, None)?;
        let begun = excess(&last);
        let way = if begun > 0.0 { 1.0 } else { -1.0 };
        // Double the weight until the crimp asked for lies between.
        let (mut near, mut far) = (0.0, 0.0);
        for step in 1..=12 {
            near = far;
            far = way * 1.0 * f64::from(step);
            match self.at(spacings, f64::exp(far), Some(&last)) {
                Ok(found) => {
                    let crossed = excess(&found) * way <= 0.0;
                    last = found;
                    if crossed {
                        break;
                    }
                }
                Err(_) => break,
            }
        }
        let (low, high) = (near.min(far), near.max(far));
        let mut best = last.clone();
        let mut failed = false;
        let weight = rising_root(
            |weight| match self.at(spacings, weight.exp(), Some(&best)) {
                Ok(found) => {
                    let excess = excess(&found);
                    best = found;
                    -excess
                }
                Err(_) => {
                    failed = true;
                    0.0
                }
            },
            low,
            high,
            1e-11,
        );
        let balanced = if failed {
            best
        } else {
            self.at(spacings, weight.exp(), Some(&best))?
        };
        let (c1, c2) = self.crimps(spacings, &balanced);
        let reached = match by {
            Closure::BothCrimps(warp, weft) => (c1 * weft - c2 * warp).abs() <= 1e-6 * warp * weft,
            Closure::WarpCrimp(warp) => (c1 - warp).abs() <= 1e-6 * warp,
            Closure::WeftCrimp(weft) => (c2 - weft).abs() <= 1e-6 * weft,
            _ => true,
        };
        // Heights go as the square root of crimp.
        let mismatch = match by {
            Closure::BothCrimps(warp, weft) if c1 + c2 > 0.0 => {
                Some(((warp + weft) / (c1 + c2)).sqrt() - 1.0)
            }
            _ => None,
        };
        let closed = Closed {
            by,
            jam_limited: balanced.jam_limited || !reached,
            mismatch,
        };
        Ok((balanced, closed))
    }

    /// Mean crimp of warp and weft.
    fn crimps(&self, spacings: Spacings, balanced: &Balanced) -> (f64, f64) {
        let pattern = &self.weave.woven.pattern;
        let mean = |yarn: &StiffYarn, paths: &[StiffPath], period_mm: f64| {
            let whole: f64 = paths
                .iter()
                .map(|path| yarn.length_and_energy(path).0)
                .sum();
            whole / (paths.len() as f64 * period_mm) - 1.0
        };
        (
            mean(
                &self.warp,
                &balanced.warp,
                spacings.1 * pattern.picks() as f64,
            ),
            mean(
                &self.weft,
                &balanced.weft,
                spacings.0 * pattern.ends() as f64,
            ),
        )
    }

    /// The state in which the yarns have the lengths of another.
    fn with_lengths(self, counted: &FoundState<'_>) -> Result<FoundState<'a>, ClothError> {
        let (c1, c2) = counted.pulled.crimps(counted.spacings, &counted.balanced);
        // Length of weft between ends and of warp between picks.
        let lengths = (
            counted.spacings.0 * (1.0 + c2),
            counted.spacings.1 * (1.0 + c1),
        );
        let mut balanced = self.at(counted.spacings, 1.0, Some(&counted.balanced))?;
        let miss = |spacings: Spacings, balanced: &Balanced| {
            let (c1, c2) = self.crimps(spacings, balanced);
            (
                spacings.0 - lengths.0 / (1.0 + c2),
                spacings.1 - lengths.1 / (1.0 + c1),
            )
        };
        let mut spacings = counted.spacings;
        let mut missed = miss(spacings, &balanced);
        // Inverse of the change of the miss, nearly one: crimp changes little with the spacing.
        let mut inverse = [[1.0, 0.0], [0.0, 1.0]];
        let mut measured = false;
        for _ in 0..40 {
            if missed.0.abs() <= 1e-9 * lengths.0 && missed.1.abs() <= 1e-9 * lengths.1 {
                let jam_limited = balanced.jam_limited;
                return Ok(FoundState {
                    pulled: self,
                    spacings,
                    balanced,
                    closed: Closed {
                        by: Closure::KeptLengths,
                        jam_limited,
                        mismatch: None,
                    },
                });
            }
            let step = (
                -(inverse[0][0] * missed.0 + inverse[0][1] * missed.1),
                -(inverse[1][0] * missed.0 + inverse[1][1] * missed.1),
            );
            // Half of the way where the cloth jams or the miss grows; in dense cloth crimp falls faster than the spacing
            // rises, and the change must be measured first.
            let size = |missed: (f64, f64)| (missed.0 / lengths.0).hypot(missed.1 / lengths.1);
            let mut found = None;
            for halving in 0..6 {
                let share = 0.5_f64.powi(halving);
                let tried = (spacings.0 + share * step.0, spacings.1 + share * step.1);
                if let Ok(there) = self.at(tried, 1.0, Some(&balanced)) {
                    let next = miss(tried, &there);
                    if size(next) < size(missed) {
                        found = Some((tried, there, next, share));
                        break;
                    }
                }
                if !measured {
                    break;
                }
            }
            let Some((tried, there, next, share)) = found else {
                if measured {
                    break;
                }
                measured = true;
                inverse = self.measured_inverse(spacings, missed, &balanced, &miss)?;
                continue;
            };
            let step = (share * step.0, share * step.1);
            (spacings, balanced) = (tried, there);
            let change = (next.0 - missed.0, next.1 - missed.1);
            missed = next;
            // Broyden's change of the inverse.
            let moved = (
                inverse[0][0] * change.0 + inverse[0][1] * change.1,
                inverse[1][0] * change.0 + inverse[1][1] * change.1,
            );
            let along = step.0 * moved.0 + step.1 * moved.1;
            if along.abs() > 1e-30 {
                let row = (
                    step.0 * inverse[0][0] + step.1 * inverse[1][0],
                    step.0 * inverse[0][1] + step.1 * inverse[1][1],
                );
                let off = ((step.0 - moved.0) / along, (step.1 - moved.1) / along);
                inverse[0][0] += off.0 * row.0;
                inverse[0][1] += off.0 * row.1;
                inverse[1][0] += off.1 * row.0;
                inverse[1][1] += off.1 * row.1;
            }
        }
        Err(ClothError::Jammed)
    }

    /// The inverse of how the missed lengths change with both spacings, by differences.
    fn measured_inverse(
        &self,
        spacings: Spacings,
        missed: (f64, f64),
        balanced: &Balanced,
        miss: &impl Fn(Spacings, &Balanced) -> (f64, f64),
    ) -> Result<[[f64; 2]; 2], ClothError> {
        let part = 1e-4;
        let by = |moved: Spacings, step: f64| -> Result<(f64, f64), ClothError> {
            let next = miss(moved, &self.at(moved, 1.0, Some(balanced))?);
            Ok(((next.0 - missed.0) / step, (next.1 - missed.1) / step))
        };
        let (ends, picks) = (part * spacings.0, part * spacings.1);
        let a = by((spacings.0 + ends, spacings.1), ends)?;
        let b = by((spacings.0, spacings.1 + picks), picks)?;
        let determinant = a.0 * b.1 - b.0 * a.1;
        if determinant == 0.0 || !determinant.is_finite() {
            return Err(ClothError::Jammed);
        }
        Ok([
            [b.1 / determinant, -b.0 / determinant],
            [-a.1 / determinant, a.0 / determinant],
        ])
    }
}

impl FoundState<'_> {
    /// Thickness under a gauge, mm: the larger of wave height and thickness of both systems. Floats that stand off the cloth
    /// are pressed down by it.
    fn thickness_mm(&self) -> f64 {
        let mut most = 0.0_f64;
        for (yarn, paths, strand) in self.systems() {
            for path in paths {
                most = most.max(yarn.wave_mm(path) + 2.0 * strand.half_thickness_mm);
            }
        }
        most
    }

    /// Height of the cloth from its highest to its lowest yarn, mm, where nothing presses it.
    fn free_height_mm(&self) -> f64 {
        let (mut high, mut low) = (f64::MIN, f64::MAX);
        for (yarn, paths, strand) in self.systems() {
            for path in paths {
                let (_, top, bottom) = yarn.slope_and_range(path);
                high = high.max(top + strand.half_thickness_mm);
                low = low.min(bottom - strand.half_thickness_mm);
            }
        }
        high - low
    }

    fn systems(&self) -> [(&StiffYarn, &[StiffPath], &Strand); 2] {
        [
            (
                &self.pulled.warp,
                &self.balanced.warp,
                &self.pulled.strands.0,
            ),
            (
                &self.pulled.weft,
                &self.balanced.weft,
                &self.pulled.strands.1,
            ),
        ]
    }

    /// The cloth's numbers in this state.
    fn cloth(&self, weave: &Weave, taut: &Cloth) -> Cloth {
        let (c1, c2) = self.pulled.crimps(self.spacings, &self.balanced);
        let [warp, weft] = self.systems();
        let yarn = |of: (&StiffYarn, &[StiffPath], &Strand),
                    taut: &ClothYarn,
                    crimp: f64,
                    spacing_mm: f64| {
            let (yarn, paths, strand) = of;
            let (mut slope, mut wave) = (0.0_f64, 0.0_f64);
            let (mut peak, mut push, mut contact) = (0.0_f64, 0.0_f64, 0.0);
            let mut samples = Vec::new();
            for path in paths {
                slope = slope.max(yarn.slope_and_range(path).0);
                wave = wave.max(yarn.wave_mm(path));
                peak = peak.max(yarn.peak_per_mm(path));
                push = yarn.pushes_n(path).iter().fold(push, |m, p| m.max(p.abs()));
                contact += yarn.contact_mm(path);
                samples.extend(yarn.samples(path, PARTS));
            }
            let crossings: usize = paths.iter().map(StiffPath::crossings).sum();
            let halves = 2.0 * taut.changes_per_crossing * crossings as f64;
            let flanks = match &taut.path {
                YarnPath::Taut { wave, .. } => Wave::flanks(wave),
                YarnPath::Stiff(system) => system.flanks,
            };
            ClothYarn {
                crimp,
                wave_height_mm: wave,
                slope_rad: slope,
                min_radius_mm: (peak > 0.0).then(|| 1.0 / peak),
                contact_mm: contact / halves,
                spacing_mm,
                path: YarnPath::Stiff(StiffSystem {
                    samples: binned(&samples, peak, halves),
                    taut_crimp: taut.crimp,
                    pull_n: strand.pull_n,
                    rigidity_n_mm2: strand.rigidity_n_mm2,
                    push_n: push,
                    followed: paths.iter().any(|path| path.way() == Way::Followed),
                    section_mm: yarn.section_radius_mm(),
                    flanks,
                }),
                ..taut.clone()
            }
        };
        let (ends_mm, picks_mm) = self.spacings;
        let warp = yarn(warp, &taut.warp, c1, ends_mm);
        let weft = yarn(weft, &taut.weft, c2, picks_mm);
        Cloth {
            free_height_mm: Some(self.free_height_mm()),
            thickness_factor: taut.thickness_factor,
            raised_packing: taut.raised_packing,
            ..Cloth::from_systems(weave, warp, weft, self.closed, self.thickness_mm())
        }
    }
}

/// Samples gathered by curvature, the sharpest last and told exactly; lengths over the number of half crowns.
fn binned(samples: &[Sample], peak_per_mm: f64, halves: f64) -> Vec<Sample> {
    let mut bins = vec![
        Sample {
            length_mm: 0.0,
            curvature_per_mm: 0.0,
            turn_rad: 0.0,
        };
        BINS
    ];
    for sample in samples {
        let curvature = sample.curvature_per_mm.abs();
        let share = if peak_per_mm > 0.0 {
            curvature / peak_per_mm
        } else {
            0.0
        };
        let bin = &mut bins[((share * BINS as f64) as usize).min(BINS - 1)];
        bin.length_mm += sample.length_mm / halves;
        bin.curvature_per_mm = bin.curvature_per_mm.max(curvature);
        bin.turn_rad = bin.turn_rad.max(sample.turn_rad);
    }
    if let Some(last) = bins.last_mut() {
        last.curvature_per_mm = peak_per_mm;
    }
    bins.retain(|bin| bin.length_mm > 0.0);
    bins
}
