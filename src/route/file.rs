//! The file of one route: TOML with `name` (the file's own, without `.toml`), `title`, `sentence` and its stations.
//!
//! ```toml
//! [[station]]
//! yarn = ["warp"]                  # warp, weft, braider
//! name = "heald eye"
//! stage = "weaving"
//! [station.radius]                 # radius, turn; friction, tension, temperature, travel where there are such
//! value = "0.3 mm"
//! range = "0.3 to 0.8 mm"          # optional
//! source = "common practice, no source"
//! note = "steel eye"               # optional
//! [[station.radius.by_family]]     # optional: the same keys for fibres of a family
//! family = "carbon"
//! value = "1 mm"
//! source = "common practice, no source"
//! ```
//! No other keys are read, and a figure without a source is refused.

use super::{Figure, Route, Setting, Station, Strand};
use crate::bend::Stage;
use crate::quantity::{Dimension, parse};
use serde::Deserialize;
use thiserror::Error;

/// What is wrong with the file of a route.
#[derive(Debug, Clone, PartialEq, Eq, Error)]
#[error("route `{route}`: {what}")]
pub struct RouteError {
    /// The file's name without `.toml`.
    pub route: String,
    /// What is wrong.
    pub what: String,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawRoute {
    name: String,
    title: String,
    sentence: String,
    station: Vec<RawStation>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawStation {
    yarn: Vec<Strand>,
    name: String,
    stage: RawStage,
    radius: RawSetting,
    turn: RawSetting,
    friction: Option<RawSetting>,
    tension: Option<RawSetting>,
    temperature: Option<RawSetting>,
    travel: Option<RawSetting>,
}

#[derive(Clone, Copy, Deserialize)]
#[serde(rename_all = "lowercase")]
enum RawStage {
    Winding,
    Warping,
    Weaving,
    Braiding,
    Finishing,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawSetting {
    value: String,
    range: Option<String>,
    source: String,
    note: Option<String>,
    #[serde(default)]
    by_family: Vec<RawFamily>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawFamily {
    family: String,
    value: String,
    range: Option<String>,
    source: String,
    note: Option<String>,
}

/// Reads the text of the file whose name without `.toml` is `stem`.
pub(super) fn read(stem: &str, text: &str) -> Result<Route, RouteError> {
    let wrong = |what: String| RouteError {
        route: stem.to_owned(),
        what,
    };
    let raw: RawRoute =
        toml::from_str(text).map_err(|error| wrong(error.to_string().trim_end().to_owned()))?;
    if raw.name != stem {
        return Err(wrong(format!("its name is `{}`", raw.name)));
    }
    if raw.station.is_empty() {
        return Err(wrong("it has no station".to_owned()));
    }
    let mut stations: Vec<Station> = Vec::with_capacity(raw.station.len());
    for raw in raw.station {
        let station = station(raw).map_err(&wrong)?;
        let twice = stations.iter().any(|other| {
            let shared = |strand| other.strands.contains(strand);
            other.name == station.name && station.strands.iter().any(shared)
        });
        if twice {
            return Err(wrong(format!("two stations are named `{}`", station.name)));
        }
        stations.push(station);
    }
    Ok(Route {
        name: raw.name,
        title: raw.title,
        sentence: raw.sentence,
        stations,
    })
}

fn station(raw: RawStation) -> Result<Station, String> {
    if raw.yarn.is_empty() {
        return Err(format!("no yarn runs over `{}`", raw.name));
    }
    let keys = [
        ("radius", Some(raw.radius)),
        ("turn", Some(raw.turn)),
        ("friction", raw.friction),
        ("tension", raw.tension),
        ("temperature", raw.temperature),
        ("travel", raw.travel),
    ];
    let mut settings = Vec::new();
    for (key, setting) in keys {
        let Some(setting) = setting else { continue };
        let setting = Setting::from(setting);
        let families = setting.by_family.iter().map(|(_, figure)| figure);
        for figure in std::iter::once(&setting.usual).chain(families) {
            check(key, figure).map_err(|what| format!("`{key}` of `{}`: {what}", raw.name))?;
        }
        settings.push((key, setting));
    }
    Ok(Station {
        strands: raw.yarn,
        name: raw.name,
        stage: raw.stage.into(),
        settings,
    })
}

/// What is wrong with a figure: each is a value of its kind with a source.
fn check(key: &str, figure: &Figure) -> Result<(), String> {
    let (wanted, least): (&[Dimension], f64) = match key {
        "radius" => (&[Dimension::Length], 0.0),
        "travel" => (&[Dimension::Length], f64::MIN_POSITIVE),
        "turn" => (&[Dimension::Angle], f64::MIN_POSITIVE),
        "tension" => (&[Dimension::Force, Dimension::SpecificForce], 0.0),
        "temperature" => (&[Dimension::Temperature], -273.15),
        _ => (&[], 0.0),
    };
    let value = if wanted.is_empty() {
        figure
            .value
            .parse::<f64>()
            .map_err(|error| error.to_string())
    } else {
        parse(&figure.value, wanted)
            .map(|quantity| quantity.value)
            .map_err(|error| error.to_string())
    }?;
    if !(value.is_finite() && value >= least) {
        return Err(format!("`{}` is out of reach", figure.value));
    }
    if figure.source.trim().is_empty() {
        return Err(
            "no source; write \"common practice, no source\" where there is none".to_owned(),
        );
    }
    Ok(())
}

impl From<RawSetting> for Setting {
    fn from(raw: RawSetting) -> Self {
        let family = |raw: RawFamily| {
            let figure = Figure {
                value: raw.value,
                range: raw.range,
                source: raw.source,
                note: raw.note,
            };
            (raw.family, figure)
        };
        Self {
            usual: Figure {
                value: raw.value,
                range: raw.range,
                source: raw.source,
                note: raw.note,
            },
            by_family: raw.by_family.into_iter().map(family).collect(),
        }
    }
}

impl From<RawStage> for Stage {
    fn from(raw: RawStage) -> Self {
        match raw {
            RawStage::Winding => Self::Winding,
            RawStage::Warping => Self::Warping,
            RawStage::Weaving => Self::Weaving,
            RawStage::Braiding => Self::Braiding,
            RawStage::Finishing => Self::Finishing,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const GOOD: &str = "name = \"r\"\ntitle = \"t\"\nsentence = \"s\"\n[[station]]\nyarn = [\"warp\", \"weft\"]\nname = \"oven roller\"\n\
        stage = \"finishing\"\n[station.radius]\nvalue = \"40 mm\"\nsource = \"x\"\n[station.turn]\nvalue = \"90 deg\"\nsource = \"x\"\n\
        [station.temperature]\nvalue = \"200 degC\"\nsource = \"x\"\n[station.friction]\nvalue = \"0.1\"\nsource = \"x\"\n";

    #[test]
    fn a_station_keeps_its_figures_as_a_spec_would_write_them() {
        let route = read("r", GOOD).unwrap();
        let station = &route.stations[0];
        assert_eq!(station.strands, [Strand::Warp, Strand::Weft]);
        assert_eq!(station.stage, Stage::Finishing);
        let told: Vec<(&str, &str)> = station
            .settings
            .iter()
            .map(|(key, setting)| (*key, setting.usual.value.as_str()))
            .collect();
        assert_eq!(
            told,
            [
                ("radius", "40 mm"),
                ("turn", "90 deg"),
                ("friction", "0.1"),
                ("temperature", "200 degC")
            ]
        );
    }

    #[test]
    fn what_is_wrong_is_told() {
        let says = |from: &str, to: &str| {
            let spoilt = GOOD.replacen(from, to, 1);
            assert_ne!(spoilt, GOOD);
            read("r", &spoilt).unwrap_err().to_string()
        };
        assert!(
            says("source = \"x\"", "source = \" \"")
                .contains("`radius` of `oven roller`: no source")
        );
        assert!(says("source = \"x\"\n", "").contains("missing field `source`"));
        assert!(says("40 mm", "40 tex").contains("`radius` of `oven roller`"));
        assert!(says("0.1", "-0.1").contains("`-0.1` is out of reach"));
        assert!(says("finishing", "dyeing").contains("dyeing"));
        assert!(says("\"r\"", "\"q\"").contains("its name is `q`"));
        let station = GOOD.split_once("[[station]]").unwrap().1;
        assert!(
            read("r", &format!("{GOOD}[[station]]{station}"))
                .unwrap_err()
                .to_string()
                .contains("two stations are named `oven roller`")
        );
    }
}
