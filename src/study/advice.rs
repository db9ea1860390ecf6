//! What would hold instead: for each place that fails or is close, the levers that reach it, the cheapest first.
//!
//! In this order, which is common practice without a source: less tension; a rounder guide or corner, a smaller wrap;
//! fewer threads; another weave; flatter yarn; finer filaments. Every proposal has been run; a lever that
//! does not reach says so.

use super::lever::{Better, Lever};
use super::levers::levers;
use super::margin::{Target, margin, margin_of};
use super::proposed::{Set, set_of, then, values_of};
use super::solve::{Found, solve};
use crate::flow::Outcome;
use crate::judge::{Finding, State};
use crate::pattern::Weaves;
use crate::quantity::plain;
use crate::spec::{Document, KeyPath, NewValue, Spec};
use rayon::prelude::*;

/// Weaves that bend their yarns less often or less sharply than plain, tried in this order.
const OTHER_WEAVES: [&str; 6] = [
    "twill-2-1",
    "twill-2-2",
    "crowfoot-4",
    "satin-5",
    "satin-8",
    "satin-12",
];

/// One proposal for a place.
#[derive(Debug, Clone, PartialEq)]
pub struct Proposal {
    /// The place it is for.
    pub place: String,
    /// In words.
    pub text: String,
    /// Keys and their new values as the spec would have them; empty where nothing is in reach.
    pub set: Set,
}

/// Proposals for every place that fails or is close.
pub fn advice(
    document: &Document,
    weaves: &Weaves,
    spec: &Spec,
    outcome: &Outcome,
) -> Vec<Proposal> {
    let mut targets: Vec<Target> = Vec::new();
    let mut said = Vec::new();
    for finding in &outcome.findings {
        if let Some((here, limit)) = finding.heat_c {
            said.push(cooler(spec, finding, here, limit));
            continue;
        }
        let target = Target::of(finding);
        let wanting =
            finding.fails(spec.require.refuse_kinks, false) || finding.state == State::Close;
        // Close to kinking where kinks are allowed is no trouble.
        if wanting && !targets.contains(&target) && margin(spec, outcome, &target) < 0.0 {
            targets.push(target);
        }
    }
    let asked: Vec<(&Target, Option<Lever>)> = targets
        .iter()
        .flat_map(|target| {
            levers(spec, outcome, target)
                .into_iter()
                .flat_map(move |lever| {
                    // Another weave comes behind the setts.
                    let weave = (lever.name == "both setts").then_some((target, None));
                    std::iter::once((target, Some(lever))).chain(weave)
                })
        })
        .collect();
    let proposals: Vec<Proposal> = asked
        .into_par_iter()
        .map(|(target, lever)| match lever {
            Some(lever) => proposal(document, weaves, &lever, target),
            None => other_weave(document, weaves, spec, target),
        })
        .collect();
    said.extend(proposals);
    said
}

/// A lower temperature, in whole degrees.
fn cooler(spec: &Spec, finding: &Finding, here_c: f64, limit_c: f64) -> Proposal {
    let limit = plain(limit_c.floor(), 6);
    let passage = spec
        .passages
        .iter()
        .find(|passage| passage.place == finding.place && passage.system == finding.system)
        .map(|passage| passage.key("temperature"));
    Proposal {
        place: Target::of(finding).name(),
        text: format!(
            "temperature: at most {limit} degC (it has {})",
            plain(here_c, 4)
        ),
        set: passage
            .into_iter()
            .map(|key| (key, format!("\"{limit} degC\"")))
            .collect(),
    }
}

fn proposal(document: &Document, weaves: &Weaves, lever: &Lever, target: &Target) -> Proposal {
    let side = match lever.better {
        Better::Up => "at least",
        Better::Down => "at most",
    };
    let set = match solve(document, weaves, lever, target) {
        Found::Holds { value, .. } => set_of(document, weaves, lever, value),
        Found::Everywhere | Found::Nowhere => None,
    };
    let (text, set) = match set {
        Some(set) => {
            let then = then(document, weaves, &set, target);
            let text = format!("{}: {side} {} ({then})", lever.name, values_of(&set));
            (text, set)
        }
        None => (out_of_reach(lever.name), Vec::new()),
    };
    Proposal {
        place: target.name(),
        text,
        set,
    }
}

/// The first other weave that holds.
fn other_weave(document: &Document, weaves: &Weaves, spec: &Spec, target: &Target) -> Proposal {
    let holds = OTHER_WEAVES.into_iter().find(|name| {
        let other = weaves
            .woven(name)
            .is_ok_and(|woven| !woven.pattern.same_up_to_shift(&spec.weave.woven.pattern));
        let Ok(key) = KeyPath::parse("weave.pattern") else {
            return false;
        };
        let mut changed = document.clone();
        other
            && changed
                .set(&key, &NewValue::Text((*name).to_owned()))
                .is_ok()
            && margin_of(&changed, weaves, target) >= 0.0
    });
    let (text, set) = match holds {
        Some(name) => {
            let set = vec![("weave.pattern".to_owned(), format!("\"{name}\""))];
            let then = then(document, weaves, &set, target);
            (format!("weave: {name} ({then})"), set)
        }
        None => (out_of_reach("weave"), Vec::new()),
    };
    Proposal {
        place: target.name(),
        text,
        set,
    }
}

/// What is said of a lever that does not reach.
fn out_of_reach(lever: &str) -> String {
    format!("{lever}: nothing in reach of this lever")
}
