//! How far a place is from holding: the smallest of its reserves over what each must be, as a logarithm.
//!
//! Fracture, compression and strain must reach the required reserve; the strain of kinked fibre must not be passed;
//! kinking counts only where the spec refuses it, yielding never (woven wire yields). Zero or above holds. Where the
//! yarns do not fit or do not interlace nothing holds.

use crate::bend::{Stage, SystemName};
use crate::flow::{Outcome, run};
use crate::judge::{Finding, Limit, State};
use crate::pattern::Weaves;
use crate::spec::{Document, Spec};

/// Which findings are asked about.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Target {
    /// All crowns of the cloth, both systems, on the loom and at rest.
    Crowns,
    /// One station or corner.
    Place {
        /// Its place as the finding tells it.
        place: String,
        /// Its stage.
        stage: Stage,
        /// Which yarns.
        system: SystemName,
    },
}

impl Target {
    /// The target a finding belongs to.
    pub fn of(finding: &Finding) -> Self {
        match finding.stage {
            Stage::Loom | Stage::Rest => Self::Crowns,
            stage => Self::Place {
                place: finding.place.to_string(),
                stage,
                system: finding.system,
            },
        }
    }

    /// What a person calls it.
    pub fn name(&self) -> String {
        match self {
            Self::Crowns => "the crowns of the cloth".to_owned(),
            Self::Place { place, stage, .. } => format!("{place} ({})", stage.word()),
        }
    }

    /// Whether a finding belongs to it.
    pub fn holds_finding(&self, finding: &Finding) -> bool {
        finding.state != State::Overheats && Self::of(finding) == *self
    }
}

/// The margin of a target; negative infinity where it has no finding.
pub fn margin(spec: &Spec, outcome: &Outcome, target: &Target) -> f64 {
    let here = outcome
        .findings
        .iter()
        .filter(|finding| target.holds_finding(finding));
    here.map(|finding| finding_margin(spec, finding))
        .reduce(f64::min)
        .unwrap_or(f64::NEG_INFINITY)
}

fn finding_margin(spec: &Spec, finding: &Finding) -> f64 {
    let required = spec.require.reserve;
    let needs = |limit: Limit| match limit {
        Limit::Fracture | Limit::Compression | Limit::Strain | Limit::Filaments => Some(required),
        Limit::Kink => spec.require.refuse_kinks.then_some(required),
        Limit::KinkStrain => Some(1.0),
        Limit::Yield | Limit::Temperature => None,
    };
    let each = finding.judged.checks.iter().flatten();
    each.filter_map(|check| Some((check.reserve() / needs(check.limit)?).ln()))
        .reduce(f64::min)
        .unwrap_or(f64::INFINITY)
}

/// The margin of a target in a changed document.
pub fn margin_of(document: &Document, weaves: &Weaves, target: &Target) -> f64 {
    document
        .spec(weaves)
        .ok()
        .and_then(|spec| Some(margin(&spec, &run(&spec, 1.0).ok()?, target)))
        .unwrap_or(f64::NEG_INFINITY)
}
