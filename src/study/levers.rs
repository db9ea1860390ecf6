//! What a spec lets be changed: the levers of a place, of the yarns and of the whole cloth, with the reach a mill has.

use super::lever::{Better, Lever};
use super::margin::Target;
use crate::bend::{Stage, SystemName};
use crate::drape::is_at;
use crate::flow::Outcome;
use crate::spec::OPEN_SHED;
use crate::spec::{KeyPath, Spec, System};
use crate::yarn::{Basis, Followed};

/// Finer filaments are not advised: below 3 um their fragments can be breathed in (the WHO's definition of respirable
/// fibre), and yarns are made from about 4 um up.
const FINEST_FILAMENT_UM: f64 = 4.0;

/// The levers that may reach a place, the cheapest first.
pub fn levers(spec: &Spec, outcome: &Outcome, target: &Target) -> Vec<Lever> {
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
pub fn station(spec: &Spec, place: &str, of: SystemName) -> Vec<Option<Lever>> {
    let system = match of {
        SystemName::Warp => &spec.weave.warp,
        SystemName::Weft => &spec.weave.weft,
    };
    if let Some(passage) = spec
        .passages
        .iter()
        .find(|passage| passage.place == place && passage.system == of)
    {
        let key = |last: &str| passage.key(last);
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
        if of == SystemName::Warp && passage.stage == Stage::Weaving {
            levers.extend(shed(spec));
        }
        return levers;
    }
    if place == OPEN_SHED {
        return shed(spec);
    }
    let corner = spec.tools.iter().position(|tool| is_at(tool, place));
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

/// Let-off and depth of the open shed.
fn shed(spec: &Spec) -> Vec<Option<Lever>> {
    let Some(shed) = &spec.weave.shed else {
        return Vec::new();
    };
    let let_off = Lever::of_key(
        "let-off of the shed",
        "weave.shed.let_off",
        "",
        shed.let_off,
        Better::Up,
        (0.0, 1.0),
        0.01,
    );
    let depth = Lever::of_key(
        "depth of the shed",
        "weave.shed.depth",
        "mm",
        shed.depth_mm,
        Better::Down,
        (0.0, 10.0 * shed.depth_mm.max(1.0)),
        1.0,
    );
    vec![let_off, depth]
}

/// Below this a yarn hangs loose on a machine: 0.1 cN/tex (common practice, no source).
fn least_tension_cn(system: &System) -> f64 {
    0.1 * system.yarn.count.linear_density_tex
}

/// Tension of a place's system, where the place has none of its own.
pub fn tension_at(spec: &Spec, target: &Target) -> Option<Lever> {
    let Target::Place { place, system, .. } = target else {
        return None;
    };
    let own = spec.passages.iter().any(|passage| {
        passage.place == *place && passage.system == *system && passage.tension_n.is_some()
    });
    match system {
        _ if own => None,
        SystemName::Warp => tension(&spec.weave.warp, "warp"),
        SystemName::Weft => tension(&spec.weave.weft, "weft"),
    }
}

/// Tension of a system at the fell.
pub fn tension(system: &System, word: &'static str) -> Option<Lever> {
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
pub fn setts(spec: &Spec) -> Option<Lever> {
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
pub fn filament_diameters(spec: &Spec) -> Vec<Option<Lever>> {
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

/// Binding of the yarns of several filaments.
pub fn bindings(spec: &Spec) -> Vec<Option<Lever>> {
    let mut levers: Vec<Option<Lever>> = Vec::new();
    for yarn in [&spec.weave.warp.yarn, &spec.weave.weft.yarn] {
        let key = format!("yarn.{}.binding", yarn.name);
        let known = |lever: &Option<Lever>| {
            lever
                .as_ref()
                .is_some_and(|lever| lever.keys[0].0.text == key)
        };
        if !yarn.is_monofilament() && !levers.iter().any(known) {
            levers.push(
                Lever::of_key(
                    "binding",
                    &key,
                    "",
                    yarn.binding,
                    Better::Down,
                    (0.0, 1.0),
                    0.001,
                )
                .map(Lever::fine),
            );
        }
    }
    levers
}
