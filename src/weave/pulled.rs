//! Stiff yarns under the pull of one state, and the heights at which they balance.
//!
//! A measured crimp is met by weighting the warp's energy (`heights`): what holds the cloth in that shape is not asked, and
//! it holds it in the other state too (`lengths`).

use super::cloth::{Cloth, ClothError, ClothYarn};
use super::found::FoundState;
use super::heights::{Balanced, NoBalance, Repeat, Solver};
use super::share::{Closed, Closure, SharedBy};
use super::states::RigidityBound;
use crate::path::{Crest, NoPath, StiffPath, StiffYarn, Strand};
use crate::root::rising_root;
use crate::spec::{System, Weave};

/// Crimp and largest curvature of the paths, relative.
const ACCURACY: f64 = 1e-3;

/// Spacing of ends and of picks, mm.
pub(super) type Spacings = (f64, f64);

/// Yarns under the pull of one state.
pub(super) struct Pulled<'a> {
    weave: &'a Weave,
    taut: &'a Cloth,
    pub warp: StiffYarn,
    pub weft: StiffYarn,
    /// What warp and weft are made of.
    pub strands: (Strand, Strand),
}

impl<'a> Pulled<'a> {
    /// The weave's yarns, laid as in the taut cloth, with this share of their mean tension.
    pub(super) fn new(weave: &'a Weave, taut: &'a Cloth, share: f64, bound: RigidityBound) -> Self {
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
    pub(super) fn at(
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
    pub(super) fn balanced(self) -> Result<FoundState<'a>, ClothError> {
        let weave = self.weave;
        let spacings = (weave.warp.spacing_mm(), weave.weft.spacing_mm());
        let (balanced, closed, warp_weight) = match (weave.warp.crimp, weave.weft.crimp) {
            (None, None) => {
                let balanced = self.at(spacings, 1.0, None)?;
                let closed = Closed {
                    by: SharedBy::LeastEnergy,
                    jam_limited: balanced.jam_limited,
                    mismatch: None,
                };
                (balanced, closed, 1.0)
            }
            (warp, weft) => self.with_crimp(spacings, warp, weft)?,
        };
        Ok(FoundState {
            pulled: self,
            spacings,
            balanced,
            closed,
            warp_weight,
        })
    }

    /// The balance with a measured crimp, and the weight of the warp's energy that gives it.
    fn with_crimp(
        &self,
        spacings: Spacings,
        warp: Option<f64>,
        weft: Option<f64>,
    ) -> Result<(Balanced, Closed, f64), ClothError> {
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
        // Where the weight drives the cloth into its jam the crimp ends; where it is not solved nothing is known.
        let weighted =
            |weight: f64, like: &Balanced| match self.at(spacings, weight.exp(), Some(like)) {
                Ok(found) => Ok(Some(found)),
                Err(ClothError::Jammed) => Ok(None),
                Err(why) => Err(why),
            };
        let mut last = self.at(spacings, 1.0, None)?;
        let way = if excess(&last) > 0.0 { 1.0 } else { -1.0 };
        // The weight e times as large (or small) until the crimp asked for lies between.
        let (mut near, mut far) = (0.0, 0.0);
        for step in 1..=12 {
            (near, far) = (far, way * f64::from(step));
            let Some(found) = weighted(far, &last)? else {
                break;
            };
            let crossed = excess(&found) * way <= 0.0;
            last = found;
            if crossed {
                break;
            }
        }
        let mut best = last;
        let mut trouble = None;
        let weight = rising_root(
            |weight| match weighted(weight, &best) {
                Ok(Some(found)) => {
                    let excess = excess(&found);
                    best = found;
                    -excess
                }
                // Beyond the jam: back towards the weight that still passes.
                Ok(None) => way,
                Err(why) => {
                    trouble = Some(why);
                    0.0
                }
            },
            near.min(far),
            near.max(far),
            1e-11,
        );
        if let Some(why) = trouble {
            return Err(why);
        }
        let balanced = weighted(weight, &best)?.unwrap_or(best);
        let (c1, c2) = self.crimps(spacings, &balanced);
        // A crimp of nothing is met by less than can be measured.
        let met = |crimp: f64, asked: f64| (crimp - asked).abs() <= 1e-6 * asked.max(1e-3);
        let reached = match by {
            Closure::BothCrimps(warp, weft) => {
                (c1 * weft - c2 * warp).abs() <= 1e-6 * warp.max(1e-3) * weft.max(1e-3)
            }
            Closure::WarpCrimp(warp) => met(c1, warp),
            Closure::WeftCrimp(weft) => met(c2, weft),
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
            by: SharedBy::Closure(by),
            jam_limited: !reached,
            mismatch,
        };
        Ok((balanced, closed, weight.exp()))
    }

    /// Mean crimp of warp and weft.
    pub(super) fn crimps(&self, spacings: Spacings, balanced: &Balanced) -> (f64, f64) {
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
}
