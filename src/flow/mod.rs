//! The straight flow of the program, on one page: spec -> cloth -> bends -> judge -> findings.
//!
//! Every command and study runs this and nothing else. It takes no decisions of its own.

mod assumptions;
mod broken;
mod losses;
mod warnings;

pub use crate::weave::{RigidityBound, Varied};
pub use assumptions::assumptions;
pub use broken::{Broken, broken, over_the_whole_way};
pub use warnings::warnings;

use crate::bend::{Bend, SystemName};
use crate::judge::{Count, Finding, Flaws, Required, State, judge};
use crate::spec::{Spec, System};
use crate::weave::{Cloth, ClothError, States, crowns};
use crate::{drape, passage};

/// What becomes of a spec.
#[derive(Debug, Clone, PartialEq)]
pub struct Outcome {
    /// The cloth at rest, or the one state of taut yarns.
    pub cloth: Cloth,
    /// The cloth on the loom; absent for taut yarns.
    pub on_loom: Option<Cloth>,
    /// Every bend, in the order of the way from package to tool.
    pub bends: Vec<Bend>,
    /// Every bend, judged, in that order; heat has a finding of its own behind its bend's.
    pub findings: Vec<Finding>,
}

/// What becomes of a spec whose assumed outlines are flatter or rounder, or whose yarns are as stiff as they may be.
#[derive(Debug, Clone, PartialEq)]
pub struct Variation {
    /// What was varied.
    pub varied: Varied,
    /// The worst of it: state and reserve; `None` where there is no cloth.
    pub worst: Option<(State, Option<f64>)>,
}

/// Runs the flow; `flatness` varies the assumed outlines (1 for the spec as it stands).
///
/// # Errors
/// Where there is no cloth: the yarns do not fit or do not interlace; or it has no room inside a corner.
pub fn run(spec: &Spec, flatness: f64) -> Result<Outcome, ClothError> {
    run_varied(
        spec,
        Varied {
            flatness,
            ..Varied::default()
        },
    )
}

/// Runs the flow with assumed outlines and rigidities varied.
///
/// # Errors
/// As [`run`].
pub fn run_varied(spec: &Spec, varied: Varied) -> Result<Outcome, ClothError> {
    run_counting(spec, varied, false)
}

/// Runs the flow and counts broken filaments at every bend, for a report.
///
/// # Errors
/// As [`run`].
pub fn run_counted(spec: &Spec) -> Result<Outcome, ClothError> {
    run_counting(spec, Varied::default(), true)
}

/// Broken filaments are counted where it is asked for or the spec allows a number.
fn run_counting(spec: &Spec, varied: Varied, count: bool) -> Result<Outcome, ClothError> {
    let States { cloth, on_loom } = States::build(&spec.weave, varied)?;
    let mut bends: Vec<Bend> = passage::stations(spec, &cloth);
    bends.extend(crowns(
        &spec.weave,
        &cloth,
        on_loom.as_ref().unwrap_or(&cloth),
    ));
    bends.extend(drape::corners(spec, &cloth)?);
    bends.sort_by_key(|bend| bend.stage);
    let allowed = spec.require.broken_per_m;
    let flaws = |system: &System| {
        let counted = count || allowed.is_some();
        counted.then(|| Flaws::of(&system.yarn.fibre)).flatten()
    };
    let (warp_flaws, weft_flaws) = (flaws(&spec.weave.warp), flaws(&spec.weave.weft));
    let mut findings = Vec::with_capacity(bends.len());
    for bend in &bends {
        let (system, woven, flaws) = match bend.system {
            SystemName::Warp => (&spec.weave.warp, &cloth.warp, &warp_flaws),
            SystemName::Weft => (&spec.weave.weft, &cloth.weft, &weft_flaws),
        };
        let required = Required {
            reserve: spec.require.reserve,
            count: match (flaws, allowed) {
                (None, _) => Count::Leave,
                (Some(flaws), None) => Count::Tell(flaws),
                (Some(flaws), Some(allowed)) => Count::Allow(flaws, allowed),
            },
        };
        let (finding, heat) = judge(bend, &system.yarn, &woven.laid, required);
        findings.push(finding);
        findings.extend(heat);
    }
    Ok(Outcome {
        cloth,
        on_loom,
        bends,
        findings,
    })
}

impl Outcome {
    /// Place among the findings of the one that decides: one that fails before one that does not, then worst state,
    /// then smallest reserve; the first of equals.
    pub fn worst(&self, refuse_kinks: bool) -> usize {
        let rank = |index: &usize| {
            let finding = &self.findings[*index];
            (
                finding.fails(refuse_kinks, false),
                finding.state,
                finding.judged.rank(),
            )
        };
        (0..self.findings.len()).rev().max_by_key(rank).unwrap_or(0)
    }

    /// The finding that decides.
    pub fn worst_finding(&self, refuse_kinks: bool) -> Option<&Finding> {
        self.findings.get(self.worst(refuse_kinks))
    }

    /// The spec's verdict: its worst state.
    pub fn verdict(&self) -> State {
        self.findings
            .iter()
            .map(|finding| finding.state)
            .max()
            .unwrap_or(State::Holds)
    }

    /// Whether a check fails.
    pub fn fails(&self, spec: &Spec, strict: bool) -> bool {
        self.findings
            .iter()
            .any(|finding| finding.fails(spec.require.refuse_kinks, strict))
    }
}
