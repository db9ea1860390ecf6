//! `route`: the ready routes a spec names, and which of its yarns run over their stations.

use super::field::{Field, Placed};
use super::problem::Problem;
use super::reader::Table;
use crate::bend::SystemName;
use crate::route::{self, FindRouteError, Route, Station, Strand};
use crate::span::Span;

/// The routes a spec names, in its order.
#[derive(Debug, Clone, Default)]
pub struct Routes {
    named: Vec<Placed<&'static Route>>,
    /// Whether one of them is wrong and has been reported.
    pub incomplete: bool,
}

/// One station as one yarn of the cloth meets it.
#[derive(Debug, Clone)]
pub struct RouteStation {
    /// Which yarn.
    pub system: SystemName,
    /// The station.
    pub station: &'static Station,
    /// The route it belongs to.
    pub route: &'static str,
    /// Where the spec names the route.
    pub span: Span,
}

impl Routes {
    /// Every station in the order of the way; one that both yarns run over stands there for each.
    pub fn stations(&self) -> impl Iterator<Item = RouteStation> {
        self.named.iter().flat_map(|named| {
            let route = named.value;
            route.stations.iter().flat_map(move |station| {
                systems(station).map(move |system| RouteStation {
                    system,
                    station,
                    route: &route.name,
                    span: named.span.clone(),
                })
            })
        })
    }
}

fn systems(station: &Station) -> impl Iterator<Item = SystemName> {
    station.strands.iter().filter_map(|strand| match strand {
        Strand::Warp => Some(SystemName::Warp),
        Strand::Weft => Some(SystemName::Weft),
        Strand::Braider => None,
    })
}

/// Reads `route`: a name, or a list of them.
pub fn read_routes(spec: &Table<'_>) -> Routes {
    let names = match spec.one_or_more_texts("route") {
        Field::Absent => return Routes::default(),
        Field::Wrong => {
            return Routes {
                incomplete: true,
                ..Routes::default()
            };
        }
        Field::Given(names) => names.value,
    };
    let mut routes = Routes::default();
    for name in names {
        match resolve(&name, &routes) {
            Ok(route) => routes.named.push(Placed {
                value: route,
                span: name.span,
            }),
            Err(problem) => {
                routes.incomplete = true;
                spec.push(problem);
            }
        }
    }
    routes
}

fn resolve(name: &Placed<String>, before: &Routes) -> Result<&'static Route, Problem> {
    let at = |message: String, label: &str| Problem::at(name.span.clone(), message, label);
    let route = route::find(&name.value).map_err(|error| {
        let nearest = match &error {
            FindRouteError::Unknown { nearest, .. } => *nearest,
            FindRouteError::Broken(_) => None,
        };
        let all: Vec<String> = route::names().map(|name| format!("`{name}`")).collect();
        at(error.to_string(), "unknown route")
            .nearest(nearest)
            .help(format!("ready routes: {}", all.join(", ")))
    })?;
    if before
        .named
        .iter()
        .any(|other| other.value.name == route.name)
    {
        return Err(at(
            format!("route `{}` is named twice", route.name),
            "there already",
        ));
    }
    let mut strands = route.stations.iter().flat_map(|station| &station.strands);
    if let Some(strand) = strands.find(|strand| !strand.is_woven()) {
        return Err(at(
            format!(
                "route `{}` is the way of a {}, and this cloth is woven",
                route.name,
                strand.word()
            ),
            "no route of a woven cloth",
        )
        .help(
            "a woven cloth has a warp and a weft; `lissom routes` tells whose way each route is",
        ));
    }
    let there: Vec<RouteStation> = before.stations().collect();
    let shared = route.stations.iter().find_map(|station| {
        let same = |other: &&RouteStation| {
            other.station.name == station.name
                && systems(station).any(|system| system == other.system)
        };
        there.iter().find(same)
    });
    match shared {
        None => Ok(route),
        Some(other) => Err(at(
            format!(
                "routes `{}` and `{}` both have `{}` of the {}",
                other.route,
                route.name,
                other.station.name,
                other.system.word()
            ),
            "there already",
        )
        .help("name one of them")),
    }
}

#[cfg(test)]
mod tests {
    use crate::bend::{Stage, SystemName};
    use crate::pattern::Weaves;
    use crate::span::SourceText;
    use crate::spec::{Document, KeyPath, NewValue, Passage, Spec};

    fn text(fibre: &str, route: &str, passages: &str) -> String {
        format!(
            "name = \"n\"\nroute = {route}\n[yarn.y]\nfibre = \"{fibre}\"\nlinear_density = \"68 tex\"\n[weave]\n\
             pattern = \"plain\"\nwarp = {{ yarn = \"y\", sett = \"10 /cm\" }}\nweft = {{ yarn = \"y\", sett = \"10 /cm\" }}\n{passages}"
        )
    }

    fn read(text: &str) -> Spec {
        Spec::read(SourceText::new("n", text), &Weaves::builtin()).unwrap()
    }

    fn at<'s>(spec: &'s Spec, system: SystemName, name: &str) -> &'s Passage {
        let here = |passage: &&Passage| passage.system == system && passage.name == name;
        spec.passages.iter().find(here).unwrap()
    }

    #[test]
    fn stations_follow_one_another_and_stand_at_their_route() {
        let spec = read(&text(
            "e-glass",
            "[\"creel-warping\", \"rapier-weaving\"]",
            "",
        ));
        let stages: Vec<Stage> = spec.passages.iter().map(|p| p.stage).collect();
        assert!(stages.is_sorted() && stages.contains(&Stage::Warping));
        let eye = at(&spec, SystemName::Warp, "heald eye");
        assert_eq!(
            (eye.radius_mm, eye.route, eye.number),
            (0.3, Some("rapier-weaving"), None)
        );
        assert_eq!(
            &spec.source.text[eye.radius_span.clone()],
            "\"rapier-weaving\""
        );
        let creel = at(&spec, SystemName::Warp, "creel eyelet");
        // 1 cN/tex on 68 tex.
        assert!((creel.tension_n.unwrap() - 0.68).abs() < 1e-12);
        assert!((at(&spec, SystemName::Warp, "backrest").friction - 0.05).abs() < 1e-12);
    }

    #[test]
    fn the_family_of_the_yarn_decides() {
        let carbon = read(&text("carbon-pan-sm", "\"rapier-weaving\"", ""));
        assert_eq!(at(&carbon, SystemName::Warp, "heald eye").radius_mm, 1.0);
        let own = text(
            "own",
            "\"rapier-weaving\"",
            "[fibre.own]\nlike = \"alumina\"\n",
        );
        assert_eq!(
            at(&read(&own), SystemName::Warp, "heald eye").radius_mm,
            1.0
        );
    }

    #[test]
    fn a_station_of_both_yarns_stands_there_for_each() {
        let spec = read(&text("e-glass", "\"winding\"", ""));
        for system in [SystemName::Warp, SystemName::Weft] {
            let guide = at(&spec, system, "traverse guide");
            assert_eq!(guide.radius_mm, 2.0);
            assert_eq!(guide.place, format!("traverse guide, {}", system.word()));
        }
    }

    #[test]
    fn a_passage_overrides_what_it_gives() {
        let over = "[[passage]]\nyarn = \"warp\"\nname = \"whip roll\"\nradius = \"20 mm\"\nturn = \"5 deg\"\n\
            [[passage]]\nyarn = \"warp\"\nname = \"heald eye\"\nradius = \"0.5 mm\"\ntemperature = \"310 degC\"\n";
        let spec = read(&text("e-glass", "\"rapier-weaving\"", over));
        let eye = at(&spec, SystemName::Warp, "heald eye");
        assert_eq!(
            (eye.radius_mm, eye.temperature_c, eye.number),
            (0.5, Some(310.0), Some(2))
        );
        assert!((eye.turn_rad - 12f64.to_radians()).abs() < 1e-12);
        assert_eq!(&spec.source.text[eye.radius_span.clone()], "\"0.5 mm\"");
        assert_eq!(
            &spec.source.text[eye.temperature_span.clone().unwrap()],
            "\"310 degC\""
        );
        // It keeps its place on the way; the other one comes behind the route.
        assert_eq!(spec.passages.last().unwrap().name, "whip roll");
        assert_eq!(
            spec.passages
                .iter()
                .filter(|p| p.name == "heald eye")
                .count(),
            1
        );
    }

    #[test]
    fn a_study_overrides_stations_of_a_route() {
        let weaves = Weaves::builtin();
        let text = text("e-glass", "[\"winding\", \"rapier-weaving\"]", "");
        let mut document = Document::parse(SourceText::new("n", text)).unwrap();
        let mut set = |key: &str, value: &str| {
            let value = NewValue::Text(value.to_owned());
            document.set(&KeyPath::parse(key).unwrap(), &value)
        };
        set("passage.heald eye.radius", "0.7 mm").unwrap();
        set("passage.weft traverse guide.radius", "3 mm").unwrap();
        set("passage.weft traverse guide.turn", "20 deg").unwrap();
        let unknown = set("passage.heald eyes.radius", "1 mm")
            .unwrap_err()
            .to_string();
        assert!(unknown.ends_with("the nearest is `heald eye`"), "{unknown}");
        let spec = document.spec(&weaves).unwrap();
        assert_eq!(at(&spec, SystemName::Warp, "heald eye").radius_mm, 0.7);
        assert_eq!(at(&spec, SystemName::Warp, "traverse guide").radius_mm, 2.0);
        let guide = at(&spec, SystemName::Weft, "traverse guide");
        assert!(
            (guide.radius_mm - 3.0).abs() < 1e-12
                && (guide.turn_rad - 20f64.to_radians()).abs() < 1e-12
        );
    }
}
