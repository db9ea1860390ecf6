//! What would hold instead: for each place that fails or is close, the levers that reach it, the cheapest first.
//!
//! In this order, which is common practice without a source: less tension; a rounder guide or corner, a smaller wrap;
//! fewer threads; another weave; flatter yarn; finer filaments. Every proposal has been run; a lever that
//! does not reach says so.

use super::lever::{Better, Lever};
use super::margin::{Target, margin, margin_of};
use super::proposed::{Set, set_of, then, values_of};
use super::solve::{Found, solve};
use crate::bend::SystemName;
use crate::flow::Outcome;
use crate::judge::{Finding, State};
use crate::pattern::Weaves;
use crate::quantity::plain;
use crate::spec::{Document, KeyPath, NewValue, Spec, System};
use crate::yarn::{Basis, Followed};

/// Weaves that bend their yarns less often or less sharply than plain, tried in this order.
const OTHER_WEAVES: [&str; 6] = [
    "twill-2-1",
    "twill-2-2",
    "crowfoot-4",
    "satin-5",
    "satin-8",
    "satin-12",
];

/// Finer filaments are not advised: below 3 um their fragments can be breathed in (the WHO's definition of respirable
/// fibre), and yarns are made from about 4 um up.
const FINEST_FILAMENT_UM: f64 = 4.0;

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
    for target in &targets {
        for lever in levers(spec, outcome, target) {
            said.push(proposal(document, weaves, &lever, target));
            if lever.name == "both setts" {
                said.push(other_weave(document, weaves, spec, target));
            }
        }
    }
    said
}

/// A lower temperature, in whole degrees.
fn cooler(spec: &Spec, finding: &Finding, here_c: f64, limit_c: f64) -> Proposal {
    let limit = plain(limit_c.floor(), 6);
    let passage = spec
        .passages
        .iter()
        .position(|passage| passage.name == finding.place)
        .map(|index| format!("passage.{}.temperature", index + 1));
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
    let (text, set) = match solve(document, weaves, lever, target) {
        Found::Holds { value, .. } => {
            let set = set_of(document, weaves, lever, value);
            let then = then(document, weaves, &set, target);
            let text = format!("{}: {side} {} ({then})", lever.name, values_of(&set));
            (text, set)
        }
        Found::Everywhere | Found::Nowhere => (out_of_reach(lever.name), Vec::new()),
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

/// The levers that may reach a place, the cheapest first.
fn levers(spec: &Spec, outcome: &Outcome, target: &Target) -> Vec<Lever> {
    let weave = &spec.weave;
    let mut levers: Vec<Option<Lever>> = Vec::new();
    match target {
        Target::Crowns => {
            levers.extend([
                tension(&weave.warp, "warp"),
                tension(&weave.weft, "weft"),
                setts(spec),
            ]);
            levers.extend(flatness(spec, outcome));
            levers.extend(filament_diameters(spec));
        }
        Target::Place { place, system, .. } => {
            let yarn = match system {
                SystemName::Warp => &weave.warp.yarn,
                SystemName::Weft => &weave.weft.yarn,
            };
            levers.push(tension_at(spec, target));
            levers.extend(station(spec, place, *system));
            let own = format!("yarn.{}.filament_diameter", yarn.name);
            let of_own = |lever: &Option<Lever>| {
                lever
                    .as_ref()
                    .is_some_and(|lever| lever.keys[0].0.text == own)
            };
            levers.extend(filament_diameters(spec).into_iter().filter(of_own));
        }
    }
    levers.into_iter().flatten().collect()
}

/// Radius, turn and own tension of a station; radius of a corner.
pub(super) fn station(spec: &Spec, place: &str, of: SystemName) -> Vec<Option<Lever>> {
    let system = match of {
        SystemName::Warp => &spec.weave.warp,
        SystemName::Weft => &spec.weave.weft,
    };
    if let Some(index) = spec
        .passages
        .iter()
        .position(|passage| passage.name == place && passage.system == of)
    {
        let passage = &spec.passages[index];
        let key = |last: &str| format!("passage.{}.{last}", index + 1);
        let turn = passage.turn_rad.to_degrees();
        let mut levers = Vec::new();
        if let Some(newton) = passage.tension_n {
            let cn = 100.0 * newton;
            levers.push(Lever::of_key(
                "tension in front of it",
                &key("tension"),
                "cN",
                cn,
                Better::Down,
                (least_tension_cn(system), 50.0 * cn.max(1.0)),
                0.1,
            ));
        }
        levers.extend([
            Lever::of_key(
                "radius",
                &key("radius"),
                "mm",
                passage.radius_mm,
                Better::Up,
                (0.0, 1000.0),
                0.01,
            ),
            Lever::of_key(
                "turn",
                &key("turn"),
                "deg",
                turn,
                Better::Down,
                (1.0, 360.0),
                0.1,
            ),
        ]);
        return levers;
    }
    let corner = spec
        .tools
        .iter()
        .position(|tool| place.starts_with(&format!("{}, outer", tool.name)));
    let of_corner = |index: usize| {
        let key = format!("tool.{}.radius", index + 1);
        Lever::of_key(
            "radius",
            &key,
            "mm",
            spec.tools[index].radius_mm,
            Better::Up,
            (0.0, 1000.0),
            0.01,
        )
    };
    corner.map(of_corner).into_iter().collect()
}

/// Below this a yarn hangs loose on a machine: 0.1 cN/tex (common practice, no source).
fn least_tension_cn(system: &System) -> f64 {
    0.1 * system.yarn.count.linear_density_tex
}

/// Tension of a place's system, where the place has none of its own.
pub(super) fn tension_at(spec: &Spec, target: &Target) -> Option<Lever> {
    let Target::Place { place, system, .. } = target else {
        return None;
    };
    let own = spec.passages.iter().any(|passage| {
        passage.name == *place && passage.system == *system && passage.tension_n.is_some()
    });
    match system {
        _ if own => None,
        SystemName::Warp => tension(&spec.weave.warp, "warp"),
        SystemName::Weft => tension(&spec.weave.weft, "weft"),
    }
}

/// Tension of a system at the fell.
pub(super) fn tension(system: &System, word: &'static str) -> Option<Lever> {
    let name = if word == "warp" {
        "warp tension"
    } else {
        "weft tension"
    };
    let key = format!("weave.{word}.tension");
    let cn = 100.0 * system.tension_n;
    Lever::of_key(
        name,
        &key,
        "cN",
        cn,
        Better::Down,
        (least_tension_cn(system), 50.0 * cn.max(1.0)),
        0.1,
    )
}

/// Both setts in the same ratio, in the unit the spec writes.
pub(super) fn setts(spec: &Spec) -> Option<Lever> {
    let weave = &spec.weave;
    let written = &spec.source.text[weave.warp.sett_span.clone()];
    let (unit, per_mm) = if written.contains("in") {
        ("/in", 25.4)
    } else {
        ("/cm", 10.0)
    };
    Some(Lever {
        name: "both setts",
        keys: vec![
            (KeyPath::parse("weave.warp.sett").ok()?, 1.0),
            (
                KeyPath::parse("weave.weft.sett").ok()?,
                weave.weft.sett_per_mm / weave.warp.sett_per_mm,
            ),
        ],
        unit,
        today: per_mm * weave.warp.sett_per_mm,
        better: Better::Down,
        reach: (
            0.2 * per_mm * weave.warp.sett_per_mm,
            20.0 * per_mm * weave.warp.sett_per_mm,
        ),
        step: 0.1,
        decade_share: 0.01,
    })
}

/// Flatness of the yarns whose outline is wholly assumed.
fn flatness(spec: &Spec, outcome: &Outcome) -> Vec<Option<Lever>> {
    let mut levers = Vec::new();
    for (system, woven) in [
        (&spec.weave.warp, &outcome.cloth.warp),
        (&spec.weave.weft, &outcome.cloth.weft),
    ] {
        let key = format!("yarn.{}.flatness", system.yarn.name);
        let known = |lever: &Option<Lever>| {
            lever
                .as_ref()
                .is_some_and(|lever| lever.keys[0].0.text == key)
        };
        if woven.laid.basis == Basis::Assumed && !levers.iter().any(known) {
            let today = woven.laid.outline.flatness();
            levers.push(
                Lever::of_key(
                    "flatness of the yarn",
                    &key,
                    "",
                    today,
                    Better::Up,
                    (1.0, 10.0 * today),
                    0.1,
                )
                .map(Lever::fine),
            );
        }
    }
    levers
}

/// Filament diameter of the yarns whose linear density is given, tex kept.
pub(super) fn filament_diameters(spec: &Spec) -> Vec<Option<Lever>> {
    let mut levers: Vec<Option<Lever>> = Vec::new();
    for system in [&spec.weave.warp, &spec.weave.weft] {
        let yarn = &system.yarn;
        let key = format!("yarn.{}.filament_diameter", yarn.name);
        let known = |lever: &Option<Lever>| {
            lever
                .as_ref()
                .is_some_and(|lever| lever.keys[0].0.text == key)
        };
        // Where the linear density follows from the filaments it would change with them.
        let tex_given = yarn.count.followed != Followed::LinearDensity;
        if !yarn.is_monofilament() && tex_given && !levers.iter().any(known) {
            let um = 1e3 * yarn.count.filament_diameter_mm;
            levers.push(
                Lever::of_key(
                    "filament diameter",
                    &key,
                    "um",
                    um,
                    Better::Down,
                    (FINEST_FILAMENT_UM.min(um), 20.0 * um),
                    0.1,
                )
                .map(Lever::fine),
            );
        }
    }
    levers
}
