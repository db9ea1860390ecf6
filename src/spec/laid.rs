//! A spec's `[[passage]]`s laid over the stations of its routes.
//!
//! Each station becomes a table as a spec would write it, every value standing where the spec names the route; a
//! `[[passage]]` of the same yarn and name then puts its own values in their place. From there on a station is read
//! as any passage is.

use super::keys::PASSAGE;
use super::problem::{Problem, nearest_of};
use super::reader::Table;
use super::route::{RouteStation, Routes};
use super::tree::{Branch, Value};
use super::weave::Weave;
use crate::bend::SystemName;
use crate::span::Span;

/// A passage of the spec before it is read.
#[derive(Debug)]
pub struct Laid {
    /// Its values: the route's, and those of the spec in their place.
    pub values: Branch,
    /// Where it stands.
    pub span: Span,
    /// What messages call it.
    pub what: String,
    /// Its number among the spec's `[[passage]]`, from 1; `None` for a station that the spec says nothing of.
    pub number: Option<usize>,
    /// The route whose station it is.
    pub route: Option<&'static str>,
    /// Way of the reed along the warp at every pick, as the route has it.
    pub travel: Option<String>,
}

/// Every passage: the routes' stations with what the spec says of them, then the spec's others.
pub fn lay(own: &[Table<'_>], routes: &Routes, weave: Option<&Weave>) -> Vec<Laid> {
    let mut taken = vec![false; own.len()];
    let mut laid: Vec<Laid> = routes
        .stations()
        .map(|station| {
            let over = own.iter().position(|table| is_of(table, &station));
            if let Some(over) = over {
                taken[over] = true;
            }
            lay_one(&station, over.map(|over| (over, &own[over])), weave)
        })
        .collect();
    for (index, table) in own.iter().enumerate() {
        let known = table.place_of("radius").is_some() && table.place_of("turn").is_some();
        if taken[index] {
            continue;
        }
        if let Some(station) = routes.stations().find(|station| is_of(table, station)) {
            let span = table
                .peek_text("name")
                .map_or(table.span(), |name| name.span);
            let name = &station.station.name;
            table.push(
                Problem::at(
                    span,
                    format!("station `{name}` of the route is overridden twice"),
                    "there already",
                )
                .help("put all of its keys into one `[[passage]]`"),
            );
            continue;
        }
        // Of a route that is wrong nobody knows which station was meant.
        if !known && routes.incomplete {
            continue;
        }
        if !known && let Some(problem) = no_station(table, routes) {
            table.push(problem);
            continue;
        }
        laid.push(Laid {
            values: table.values().clone(),
            span: table.span(),
            what: format!("[[passage]] number {}", index + 1),
            number: Some(index + 1),
            route: None,
            travel: None,
        });
    }
    laid
}

fn is_of(table: &Table<'_>, station: &RouteStation) -> bool {
    // Letter case aside, as in the names of routes and weaves.
    let is = |key: &str, word: &str| {
        let text = table.peek_text(key);
        text.is_some_and(|text| text.value.trim().eq_ignore_ascii_case(word))
    };
    is("yarn", station.system.word()) && is("name", &station.station.name)
}

fn lay_one(of: &RouteStation, over: Option<(usize, &Table<'_>)>, weave: Option<&Weave>) -> Laid {
    let family = weave.and_then(|weave| {
        let yarn = match of.system {
            SystemName::Warp => &weave.warp.yarn,
            SystemName::Weft => &weave.weft.yarn,
        };
        yarn.fibre.family.as_deref()
    });
    let mut values = Branch::default();
    let text = |word: &str| Value::Text(word.to_owned());
    values.put("yarn", text(of.system.word()), &of.span);
    values.put("name", text(&of.station.name), &of.span);
    values.put("stage", text(of.station.stage.word()), &of.span);
    let mut travel = None;
    for (key, setting) in &of.station.settings {
        let value = setting.of(family).value.clone();
        match *key {
            "travel" => travel = Some(value),
            "friction" => values.put(key, Value::Real(value), &of.span),
            key => values.put(key, Value::Text(value), &of.span),
        }
    }
    let Some((index, table)) = over else {
        return Laid {
            values,
            span: of.span.clone(),
            what: format!("station `{}` of route `{}`", of.station.name, of.route),
            number: None,
            route: Some(of.route),
            travel,
        };
    };
    for (key, value) in table.values().iter() {
        // Unknown keys have been reported where they stand.
        if key.value != "name" && PASSAGE.iter().any(|known| known.name == key.value) {
            values.lay_over(key, value);
        }
    }
    Laid {
        values,
        span: table.span(),
        what: format!("[[passage]] number {}", index + 1),
        number: Some(index + 1),
        route: Some(of.route),
        travel,
    }
}

/// The problem of a passage without radius or turn that names no station, where the spec has routes.
fn no_station(table: &Table<'_>, routes: &Routes) -> Option<Problem> {
    let (yarn, name) = (table.peek_text("yarn")?, table.peek_text("name")?);
    let known: Vec<&str> = routes
        .stations()
        .filter(|station| station.system.word() == yarn.value)
        .map(|station| station.station.name.as_str())
        .collect();
    if known.is_empty() {
        return None;
    }
    let nearest = nearest_of(&name.value, known.iter().copied());
    Some(
        Problem::at(
            name.span,
            format!(
                "no station of the {} is called `{}` on the spec's route",
                yarn.value, name.value
            ),
            "no such station",
        )
        .nearest(nearest)
        .help(format!("its stations: `{}`", known.join("`, `")))
        .help("a passage of its own needs `radius` and `turn`"),
    )
}
