//! The ready routes for people and programs.

use super::table::{folded, table};
use crate::route::{Figure, Route, Station};
use serde_json::{Map, Value, json};
use std::fmt::Write as _;

fn strands(station: &Station) -> Vec<&'static str> {
    station.strands.iter().map(|strand| strand.word()).collect()
}

/// The listing, in the order given.
pub fn routes_text(routes: &[&Route]) -> String {
    let rows = routes.iter().map(|route| {
        vec![
            route.name.clone(),
            route.title.clone(),
            route.stations.len().to_string(),
        ]
    });
    format!(
        "{}\n\n`lissom routes NAME` shows the stations of one, every figure with its source. A spec names them in order:\n\
         route = [\"creel-warping\", \"rapier-weaving\"]\n",
        table(["route", "way", "stations"], rows, &[2])
    )
}

/// Everything known of one route.
pub fn route_text(route: &Route) -> String {
    let mut out = String::new();
    // Writing to a String cannot fail.
    let _ = write_route(&mut out, route);
    out
}

fn write_route(out: &mut String, route: &Route) -> std::fmt::Result {
    writeln!(out, "{}: {}", route.name, route.title)?;
    writeln!(out, "{}", folded(&route.sentence, "", ""))?;
    for station in &route.stations {
        writeln!(
            out,
            "\n{} ({}, {})",
            station.name,
            station.stage.word(),
            strands(station).join(" and ")
        )?;
        for (key, setting) in &station.settings {
            write_figure(out, key, &setting.usual)?;
            for (family, figure) in &setting.by_family {
                write_figure(out, &format!("{key}, {family}"), figure)?;
            }
        }
    }
    writeln!(
        out,
        "\nThe most severe value of a range is taken, of tensions the middle; pulls are means, judged at their peak.\n\
         A `[[passage]]` of the same `yarn` and `name` in the spec overrides what it gives."
    )
}

fn write_figure(out: &mut String, key: &str, figure: &Figure) -> std::fmt::Result {
    let range = figure
        .range
        .as_ref()
        .map_or_else(String::new, |range| format!(", machines {range}"));
    writeln!(out, "  {key:<20} {}{range}", figure.value)?;
    for more in figure.note.iter().chain([&figure.source]) {
        writeln!(out, "{}", folded(more, "      ", "      "))?;
    }
    Ok(())
}

/// The listing as JSON.
pub fn routes_json(routes: &[&Route]) -> Value {
    let list = routes.iter().map(|route| {
        json!({
            "name": route.name,
            "title": route.title,
            "sentence": route.sentence,
            "stations": route.stations.iter().map(station_json).collect::<Vec<Value>>(),
        })
    });
    Value::Array(list.collect())
}

fn station_json(station: &Station) -> Value {
    let mut object = Map::new();
    object.insert("yarn".to_owned(), json!(strands(station)));
    object.insert("name".to_owned(), json!(station.name));
    object.insert("stage".to_owned(), json!(station.stage.word()));
    for (key, setting) in &station.settings {
        let mut figure = figure_json(&setting.usual);
        if !setting.by_family.is_empty() {
            let families: Map<String, Value> = setting
                .by_family
                .iter()
                .map(|(family, figure)| (family.clone(), Value::Object(figure_json(figure))))
                .collect();
            figure.insert("by_family".to_owned(), Value::Object(families));
        }
        object.insert((*key).to_owned(), Value::Object(figure));
    }
    Value::Object(object)
}

fn figure_json(figure: &Figure) -> Map<String, Value> {
    let mut object = Map::new();
    object.insert("value".to_owned(), json!(figure.value));
    object.insert("source".to_owned(), json!(figure.source));
    for (key, text) in [("range", &figure.range), ("note", &figure.note)] {
        if let Some(text) = text {
            object.insert(key.to_owned(), json!(text));
        }
    }
    object
}
