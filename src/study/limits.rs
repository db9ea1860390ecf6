//! How far a spec may go before something stops holding: for each place the smallest radius, the largest turn and
//! tension; for the cloth the tightest setts, the thickest filament, the largest binding. Each is run, and one step
//! beyond it does not hold.

use super::lever::{Better, Lever};
use super::levers::{bindings, filament_diameters, setts, station, tension, tension_at};
use super::margin::Target;
use super::proposed::{Set, set_of};
use super::solve::{Found, solve};
use crate::flow::Outcome;
use crate::pattern::Weaves;
use crate::spec::{Document, Spec};
use rayon::prelude::*;

/// One limit.
#[derive(Debug, Clone, PartialEq)]
pub struct Bound {
    /// The place it is for.
    pub place: String,
    /// What is bounded, such as `smallest radius`.
    pub what: String,
    /// Its value today, with its unit.
    pub today: String,
    /// Keys and values at the limit, as the spec would have them; empty where there is none.
    pub set: Set,
    /// What was found.
    pub found: Found,
    /// The lever it was found with.
    pub lever: Lever,
    /// The place it was found for.
    pub target: Target,
}

/// Every limit of a spec, in the order of the way, the cloth's last.
pub fn limits(document: &Document, weaves: &Weaves, spec: &Spec, outcome: &Outcome) -> Vec<Bound> {
    let mut targets: Vec<Target> = Vec::new();
    for target in outcome.findings.iter().map(Target::of) {
        if target != Target::Crowns && !targets.contains(&target) {
            targets.push(target);
        }
    }
    let bound = |(target, lever): (Target, Lever)| {
        let target = &target;
        let solved = solve(document, weaves, &lever, target);
        let (found, set) = match solved {
            Found::Holds { value, .. } => match set_of(document, weaves, &lever, value) {
                Some(set) => (solved, set),
                None => (Found::Nowhere, Vec::new()),
            },
            Found::Everywhere | Found::Nowhere => (solved, Vec::new()),
        };
        let side = match lever.better {
            Better::Up => "smallest",
            Better::Down => "largest",
        };
        Bound {
            place: target.name(),
            what: if lever.name == "both setts" {
                "tightest setts".to_owned()
            } else {
                format!("{side} {}", lever.name)
            },
            today: format!("{} {}", lever.digits(lever.today), lever.unit)
                .trim_end()
                .to_owned(),
            set,
            found,
            lever,
            target: target.clone(),
        }
    };
    let mut asked: Vec<(Target, Lever)> = Vec::new();
    let weave = &spec.weave;
    for target in &targets {
        let Target::Place { place, system, .. } = target else {
            continue;
        };
        for lever in station(spec, place, *system).into_iter().flatten() {
            asked.push((target.clone(), lever));
        }
        if let Some(lever) = tension_at(spec, target) {
            asked.push((target.clone(), lever));
        }
    }
    let cloth = [
        setts(spec),
        tension(&weave.warp, "warp"),
        tension(&weave.weft, "weft"),
    ];
    let levers = cloth
        .into_iter()
        .chain(filament_diameters(spec))
        .chain(bindings(spec));
    asked.extend(levers.flatten().map(|lever| (Target::Crowns, lever)));
    asked.into_par_iter().map(bound).collect()
}
