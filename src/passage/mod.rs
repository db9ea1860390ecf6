//! The way from package to cloth: every station a yarn runs over is a bend under a pull.
//!
//! The pull grows along the route by friction (see `path::guide`). The tension given for the weave is the
//! mean at the fell, so the stations before it in the same stage see less; a station with its own tension
//! restarts the chain there (creel, beam, spool); those before it end at that tension. Each station is judged behind its wrap, where the pull is
//! largest, at the peak. Over a small turn a stiff strand does not close up to the guide: the edge law of
//! `path::rod` caps the curvature, the judge takes the smaller.
//!
//! In an open shed the warp's pull is higher still (`shed`): its stations while weaving are judged at the larger of both.
//!
//! Left out: the outline a yarn has on a guide (it is judged in that of the cloth), bending of the strand as a whole taking up some pull; guides that roll; speed.

mod shed;

pub use shed::{open_shed, reed_strokes, sheddings};

use crate::bend::{Bend, Easing, Meets, Stage, Stretch, SystemName};
use crate::path::tension_after;
use crate::spec::{Passage, Spec, Weave};
use crate::weave::{Cloth, shed_pull_n};

/// Mean pull behind each of the stations of one yarn, N, in order: they share a stage.
///
/// Backwards from a known pull: in front of a station that restarts the chain, else at the fell. Forwards behind it.
pub fn chain(stations: &[&Passage], fell_n: f64) -> Vec<f64> {
    let mut behind = vec![0.0; stations.len()];
    let first_restart = stations
        .iter()
        .position(|station| station.tension_n.is_some());
    let before_restart = first_restart.unwrap_or(stations.len());
    let mut pull = stations
        .get(before_restart)
        .and_then(|station| station.tension_n)
        .unwrap_or(fell_n);
    for index in (0..before_restart).rev() {
        behind[index] = pull;
        pull = tension_after(pull, -stations[index].friction, stations[index].turn_rad);
    }
    for index in before_restart..stations.len() {
        let station = stations[index];
        let before = station.tension_n.unwrap_or_else(|| behind[index - 1]);
        behind[index] = tension_after(before, station.friction, station.turn_rad);
    }
    behind
}

/// One bend for each station of the spec, in its order, and one for the open shed.
pub fn stations(spec: &Spec, cloth: &Cloth) -> Vec<Bend> {
    let same_route = |a: &Passage, b: &Passage| a.system == b.system && a.stage == b.stage;
    spec.passages
        .iter()
        .enumerate()
        .map(|(index, passage)| {
            let route: Vec<&Passage> = spec
                .passages
                .iter()
                .filter(|other| same_route(other, passage))
                .collect();
            let place = spec.passages[..index]
                .iter()
                .filter(|other| same_route(other, passage))
                .count();
            let pulls = chain(&route, mean_tension_n(&spec.weave, passage.system));
            let mean_n = pulls[place];
            let at_peak_n = spec.weave.peak * mean_n;
            let in_shed_n = match (passage.system, passage.stage) {
                (SystemName::Warp, Stage::Weaving) => mean_n + shed_pull_n(&spec.weave),
                _ => 0.0,
            };
            station(passage, cloth, at_peak_n.max(in_shed_n))
        })
        .chain(open_shed(&spec.weave))
        .collect()
}

fn mean_tension_n(weave: &Weave, system: SystemName) -> f64 {
    match system {
        SystemName::Warp => weave.warp.tension_n,
        SystemName::Weft => weave.weft.tension_n,
    }
}

fn station(passage: &Passage, cloth: &Cloth, pull_n: f64) -> Bend {
    let laid = match passage.system {
        SystemName::Warp => &cloth.warp.laid,
        SystemName::Weft => &cloth.weft.laid,
    };
    let centre_mm = passage.radius_mm + 0.5 * laid.outline.thickness_mm();
    Bend {
        place: passage.place.clone().into(),
        stage: passage.stage,
        system: passage.system,
        profile: vec![Stretch {
            length_mm: centre_mm * passage.turn_rad,
            lies_on_mm: Some(passage.radius_mm),
            easing: Easing::LongArms {
                turn_rad: passage.turn_rad,
            },
        }],
        added_per_mm: 0.0,
        pull_n,
        temperature_c: passage.temperature_c,
        meets: Meets::All,
        governed_by: passage.radius_span.clone(),
        heated_by: passage.temperature_span.clone(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn station(friction: f64, turn_deg: f64, tension_n: Option<f64>) -> Passage {
        Passage {
            name: "station".into(),
            place: "station".into(),
            system: SystemName::Warp,
            stage: Stage::Weaving,
            radius_mm: 1.0,
            turn_rad: turn_deg.to_radians(),
            friction,
            friction_given: true,
            tension_n,
            temperature_c: None,
            reed_travel_mm: None,
            route: None,
            number: None,
            radius_span: 0..0,
            temperature_span: None,
        }
    }

    /// Hand calculation: the fell's 1 N is behind the last station; each before it sees less by exp(-mu theta).
    #[test]
    fn pulls_fall_backwards_from_the_fell() {
        let stations = [
            station(0.2, 90.0, None),
            station(0.3, 45.0, None),
            station(0.25, 180.0, None),
        ];
        let route: Vec<&Passage> = stations.iter().collect();
        let behind = chain(&route, 1.0);
        let factor = |mu: f64, deg: f64| (mu * deg.to_radians()).exp();
        assert!((behind[2] - 1.0).abs() < 1e-12);
        assert!((behind[1] - 1.0 / factor(0.25, 180.0)).abs() < 1e-12);
        assert!((behind[0] - 1.0 / factor(0.25, 180.0) / factor(0.3, 45.0)).abs() < 1e-12);
    }

    #[test]
    fn a_given_tension_restarts_the_chain_forwards() {
        let stations = [
            station(0.2, 90.0, None),
            station(0.3, 45.0, Some(0.4)),
            station(0.25, 180.0, None),
            station(0.2, 60.0, Some(0.1)),
        ];
        let route: Vec<&Passage> = stations.iter().collect();
        let behind = chain(&route, 1.0);
        let factor = |mu: f64, deg: f64| (mu * deg.to_radians()).exp();
        assert!(
            (behind[0] - 0.4).abs() < 1e-12,
            "behind it is in front of the restart"
        );
        assert!((behind[1] - 0.4 * factor(0.3, 45.0)).abs() < 1e-12);
        assert!((behind[2] - behind[1] * factor(0.25, 180.0)).abs() < 1e-12);
        assert!((behind[3] - 0.1 * factor(0.2, 60.0)).abs() < 1e-12);
    }
}
