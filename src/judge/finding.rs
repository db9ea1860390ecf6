//! What a judgement says: the limits ranked, and the finding with the numbers behind it.

use super::code::{Code, Limit, State};
use super::filament::Filament;
use super::kinked::break_bend;
use super::limits::Check;
use crate::bend::{Bend, Meets, Stage, SystemName};
use crate::fibre::{Kind, Mechanism};
use crate::span::Span;
use crate::yarn::Yarn;
use std::borrow::Cow;
use std::sync::Arc;

/// All limits of one filament, and the one that governs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Judged {
    /// Every limit that applies, the governing one first.
    pub checks: [Option<Check>; 4],
    /// The worst state of them.
    pub state: State,
}

impl Judged {
    /// Ranks the limits: worst state first, then smallest reserve.
    pub fn of(mut checks: [Option<Check>; 4], required: f64) -> Self {
        let state_of = |check: &Check| match check.reserve() {
            // A reserve that is no number fails.
            reserve if reserve.is_nan() || reserve < 1.0 => check.limit.failed(),
            // The strain of a kinked fibre counts only once it is passed; its onset has been judged already.
            _ if check.limit == Limit::KinkStrain => State::Holds,
            reserve if reserve < required => State::Close,
            _ => State::Holds,
        };
        checks.sort_by(|a, b| match (a, b) {
            (Some(a), Some(b)) => state_of(b)
                .cmp(&state_of(a))
                // Both kink limits broken: the one that fails the spec leads.
                .then(
                    (b.limit == Limit::KinkStrain && b.reserve() < 1.0)
                        .cmp(&(a.limit == Limit::KinkStrain && a.reserve() < 1.0)),
                )
                .then(a.reserve().total_cmp(&b.reserve())),
            (a, b) => b.is_some().cmp(&a.is_some()),
        });
        let state = checks[0].as_ref().map_or(State::Holds, state_of);
        Self { checks, state }
    }

    /// Sorts judgements from best to worst: state, then crushed past the kink strain, then smallest reserve.
    pub fn rank(&self) -> (State, bool, std::cmp::Reverse<Ordered>) {
        let leading = self.checks[0];
        let crushed = leading.is_some_and(|check| check.limit == Limit::KinkStrain);
        let reserve = leading.map_or(f64::INFINITY, |check| check.reserve());
        (self.state, crushed, std::cmp::Reverse(Ordered(reserve)))
    }
}

/// A number that sorts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Ordered(f64);

impl Eq for Ordered {}

impl PartialOrd for Ordered {
    fn partial_cmp(&self, other: &Self) -> Option<std::cmp::Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Ordered {
    fn cmp(&self, other: &Self) -> std::cmp::Ordering {
        self.0.total_cmp(&other.0)
    }
}

/// One bend, judged.
#[derive(Debug, Clone, PartialEq)]
pub struct Finding {
    /// What a person calls the place.
    pub place: Cow<'static, str>,
    /// Where on the way.
    pub stage: Stage,
    /// Which yarns.
    pub system: SystemName,
    /// The yarn.
    pub yarn: Arc<Yarn>,
    /// The filament that governs.
    pub filament: Filament,
    /// Pull on the yarn, N.
    pub tension_n: f64,
    /// How much of the yarn meets it.
    pub meets: Meets,
    /// The limits, the governing one first.
    pub judged: Judged,
    /// What governs.
    pub limit: Option<Limit>,
    /// What becomes of the fibre.
    pub state: State,
    /// The method's stable code.
    pub code: Code,
    /// Broken filaments to expect per metre of yarn; absent where the scatter of strength is not known.
    pub broken_per_m: Option<f64>,
    /// Temperature here and the fibre's limit, degrees C, where the finding is about heat.
    pub heat_c: Option<(f64, f64)>,
    /// The line of the spec that governs.
    pub governed_by: Span,
}

impl Finding {
    pub(super) fn new(
        bend: &Bend,
        yarn: Arc<Yarn>,
        filament: Filament,
        judged: Judged,
        broken_per_m: Option<f64>,
    ) -> Self {
        let limit = judged.checks[0].map(|check| check.limit);
        Self {
            place: bend.place.clone(),
            stage: bend.stage,
            system: bend.system,
            yarn,
            filament,
            tension_n: bend.pull_n,
            meets: bend.meets,
            judged,
            limit,
            state: judged.state,
            code: limit.map_or(Code::NoLimit, Limit::code),
            broken_per_m,
            heat_c: None,
            governed_by: bend.governed_by.clone(),
        }
    }

    /// The finding of its own for a temperature above the fibre's limit.
    pub(super) fn overheated(&self, bend: &Bend, here_c: f64, limit_c: f64) -> Self {
        let mut heat = self.clone();
        heat.limit = Some(Limit::Temperature);
        heat.state = State::Overheats;
        heat.code = Code::OverTemperature;
        heat.judged.checks = [None; 4];
        heat.broken_per_m = None;
        heat.heat_c = Some((here_c, limit_c));
        if let Some(span) = &bend.heated_by {
            heat.governed_by = span.clone();
        }
        heat
    }

    /// The handbook reserve: limit over applied; absent where no limit applies.
    pub fn reserve(&self) -> Option<f64> {
        let mut checks = self.judged.checks.iter().flatten();
        let handbook = checks.find(|check| check.limit != Limit::Filaments);
        handbook.map(Check::reserve)
    }

    /// The filament reserve: allowed over expected breaks, on the stress scale; absent where the spec allows no number.
    pub fn filament_reserve(&self) -> Option<f64> {
        let mut checks = self.judged.checks.iter().flatten();
        let filaments = checks.find(|check| check.limit == Limit::Filaments);
        filaments.map(Check::reserve)
    }

    /// The smaller of both reserves: the one that decides.
    pub fn deciding_reserve(&self) -> Option<f64> {
        let both = [self.reserve(), self.filament_reserve()];
        both.into_iter().flatten().reduce(f64::min)
    }

    /// Radius of the filament's axis, mm; absent where it is straight.
    pub fn radius_mm(&self) -> Option<f64> {
        (self.filament.curvature_per_mm > 0.0).then(|| 1.0 / self.filament.curvature_per_mm)
    }

    /// Bending stress of the filament by the elastic formula, MPa.
    pub fn bending_stress_mpa(&self) -> f64 {
        self.yarn.bending_stress_mpa(self.filament.curvature_per_mm)
    }

    /// Whether the finding fails a check: `refuse_kinks` as the spec says, `strict` as the command does.
    pub fn fails(&self, refuse_kinks: bool, strict: bool) -> bool {
        match self.state {
            State::Breaks | State::Overheats | State::Sheds => true,
            State::Kinks => refuse_kinks || strict || self.code == Code::KinkStrain,
            State::Yields | State::Close => strict,
            State::Holds => false,
        }
    }

    /// Radii of the filament's axis at which a fibrillar fibre kinks and breaks at this axial stress, mm; absent for others, and
    /// where binding makes the axial stress go with the radius.
    pub fn fibrillar_radii_mm(&self) -> Option<(f64, f64)> {
        let fibre = &self.yarn.fibre;
        let Mechanism::Fibrillar { compression, .. } = fibre.mechanism else {
            return None;
        };
        if self.yarn.binding > 0.0 {
            return None;
        }
        let onset = compression.in_bending_mpa();
        let axial = self.filament.axial_stress_mpa;
        let radius = |bending_mpa: f64| self.yarn.bending_stress_mpa(1.0) / bending_mpa;
        let bend = break_bend(fibre.strength_mpa / onset, axial / onset);
        (bend > 0.0).then(|| (radius(onset + axial), radius(bend * onset)))
    }

    /// Radius of the filament's axis at which the governing limit would be met with a reserve of 1 at this axial
    /// stress, mm; absent where bending is not what governs.
    pub fn limit_radius_mm(&self) -> Option<f64> {
        let check = self.judged.checks[0]?;
        let fibre = &self.yarn.fibre;
        let kinked = fibre.kind() == Kind::Fibrillar && check.limit == Limit::Fracture;
        // Past kinking the section is not elastic, and binding makes the axial stress go with the radius.
        if kinked || self.yarn.binding > 0.0 {
            return None;
        }
        let half = fibre.modulus_mpa * self.yarn.count.filament_diameter_mm / 2.0;
        let axial = self.filament.axial_stress_mpa;
        let allowed = match check.limit {
            Limit::Fracture | Limit::Yield => check.allowed - axial,
            Limit::Compression | Limit::Kink => check.allowed + axial,
            Limit::Strain => check.allowed * fibre.modulus_mpa - axial,
            Limit::KinkStrain | Limit::Temperature | Limit::Filaments => return None,
        };
        (allowed > 0.0).then_some(half / allowed)
    }
}
