//! The straight flow of the program, on one page: spec -> cloth -> bends -> judge -> findings.
//!
//! Every command and study runs this and nothing else. It takes no decisions of its own.

mod assumptions;

pub use assumptions::assumptions;

use crate::bend::{Bend, SystemName};
use crate::judge::{Finding, State, judge};
use crate::spec::Spec;
use crate::weave::{Cloth, ClothError, crowns};
use crate::{drape, passage};

/// What becomes of a spec.
#[derive(Debug, Clone, PartialEq)]
pub struct Outcome {
    /// The cloth.
    pub cloth: Cloth,
    /// Every bend, judged, in the order of the way from package to tool.
    pub findings: Vec<Finding>,
}

/// What becomes of a spec whose assumed outlines are flatter or rounder.
#[derive(Debug, Clone, PartialEq)]
pub struct Variation {
    /// Factor on the assumed flatness.
    pub flatness_factor: f64,
    /// The worst of it: state and reserve; `None` where there is no cloth.
    pub worst: Option<(State, Option<f64>)>,
}

/// Runs the flow; `flatness` varies the assumed outlines (1 for the spec as it stands).
///
/// # Errors
/// Where there is no cloth: the yarns do not fit or do not interlace.
pub fn run(spec: &Spec, flatness: f64) -> Result<Outcome, ClothError> {
    let cloth = Cloth::build(&spec.weave, flatness)?;
    let mut bends: Vec<Bend> = passage::stations(spec, &cloth);
    bends.extend(crowns(&spec.weave, &cloth));
    bends.extend(drape::corners(spec, &cloth));
    bends.sort_by_key(|bend| bend.stage);
    let mut findings = Vec::with_capacity(bends.len());
    for bend in &bends {
        let (system, woven) = match bend.system {
            SystemName::Warp => (&spec.weave.warp, &cloth.warp),
            SystemName::Weft => (&spec.weave.weft, &cloth.weft),
        };
        let (finding, heat) = judge(bend, &system.yarn, &woven.laid, spec.require.reserve);
        findings.push(finding);
        findings.extend(heat);
    }
    Ok(Outcome { cloth, findings })
}

impl Outcome {
    /// The finding that decides: worst state, then smallest reserve.
    pub fn worst(&self) -> Option<&Finding> {
        self.findings.iter().max_by(|a, b| {
            let reserve = |finding: &Finding| finding.reserve().unwrap_or(f64::INFINITY);
            a.state
                .cmp(&b.state)
                .then(reserve(b).total_cmp(&reserve(a)))
        })
    }

    /// The spec's verdict: its worst state.
    pub fn verdict(&self) -> State {
        self.worst().map_or(State::Holds, |finding| finding.state)
    }

    /// Whether a check fails.
    pub fn fails(&self, spec: &Spec, strict: bool) -> bool {
        self.findings
            .iter()
            .any(|finding| finding.fails(spec.require.refuse_kinks, strict))
    }
}
