//! `[[passage]]` and `[[tool]]`: what a yarn runs over, and what the cloth is laid over.

use super::field::Bound;
use super::keys::{PASSAGE, TOOL};
use super::laid::{Laid, lay};
use super::problem::Problem;
use super::reader::Table;
use super::route::read_routes;
use super::weave::{Weave, read_tension};
use crate::bend::{Stage, SystemName};
use crate::quantity::{Dimension, parse};
use crate::span::Span;

/// Friction where neither spec nor fibre has one (common practice, no source).
pub const DEFAULT_FRICTION: f64 = 0.25;

/// The place at which the open shed is judged.
pub const OPEN_SHED: &str = "open shed";

/// More stations than any way has.
const MOST_PASSAGES: usize = 500;

/// One station on a yarn's way.
#[derive(Debug, Clone, PartialEq)]
pub struct Passage {
    /// What the spec calls it.
    pub name: String,
    /// What reports call it: its name, with the yarn where both yarns have one of that name.
    pub place: String,
    /// Which yarn runs over it.
    pub system: SystemName,
    /// Where on the way.
    pub stage: Stage,
    /// Radius of the edge, mm; zero is a knife edge.
    pub radius_mm: f64,
    /// Wrap angle, rad.
    pub turn_rad: f64,
    /// Coefficient of friction.
    pub friction: f64,
    /// Whether the spec gave that coefficient.
    pub friction_given: bool,
    /// Mean pull in front of it, N, where the chain restarts here.
    pub tension_n: Option<f64>,
    /// Temperature of the yarn there, degrees C.
    pub temperature_c: Option<f64>,
    /// Way of the reed along the warp at every pick, mm, where the route tells it.
    pub reed_travel_mm: Option<f64>,
    /// The ready route whose station it is.
    pub route: Option<&'static str>,
    /// Its number among the spec's own `[[passage]]`, from 1; `None` for a station that the spec takes as its route
    /// has it.
    pub number: Option<usize>,
    /// The line that governs: its radius.
    pub radius_span: Span,
    /// The temperature's place, where given.
    pub temperature_span: Option<Span>,
}

impl Passage {
    /// The path of one of its keys, by which a document finds or adds it.
    pub fn key(&self, last: &str) -> String {
        match self.number {
            Some(number) => format!("passage.{number}.{last}"),
            None => format!("passage.{} {}.{last}", self.system.word(), self.name),
        }
    }
}

/// To which side the cloth is laid round a corner.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Corner {
    /// Over a convex (male) edge: the tool lies inside the bend.
    Outside,
    /// Into a concave (female) edge: the tool lies outside of the bend.
    Inside,
}

/// One corner the cloth is laid over.
#[derive(Debug, Clone, PartialEq)]
pub struct Tool {
    /// What the spec calls it.
    pub name: String,
    /// Radius of the corner, mm.
    pub radius_mm: f64,
    /// To which side the cloth is laid round it.
    pub corner: Corner,
    /// Which layer of the lay, counted from the tool, from 1.
    pub layer: u32,
    /// Direction of the corner's edge from the warp, rad; `None` where it is not known.
    pub bend_axis_rad: Option<f64>,
    /// The line that governs: its radius.
    pub radius_span: Span,
}

/// Reads `route` and every `[[passage]]`: the stations of the routes, then the spec's other passages.
pub fn read_passages(spec: &Table<'_>, weave: Option<&Weave>) -> Vec<Passage> {
    let tables = spec.tables("passage", PASSAGE);
    if let Some(one_too_many) = tables.get(MOST_PASSAGES) {
        spec.push(
            Problem::at(
                one_too_many.span(),
                format!("more than {MOST_PASSAGES} passages"),
                "too many",
            )
            .help("leave out those that bend the yarn least"),
        );
        return Vec::new();
    }
    let laid = lay(&tables, &read_routes(spec), weave);
    let mut passages: Vec<Passage> = Vec::with_capacity(laid.len());
    for laid in &laid {
        let table = spec.beside(&laid.values, laid.span.clone(), laid.what.clone(), PASSAGE);
        let Some(passage) = read_passage(&table, weave, laid) else {
            continue;
        };
        // Reports, advice and varied keys find a passage by its yarn and name.
        let same = |other: &Passage| other.name == passage.name && other.system == passage.system;
        if passages.iter().any(same) {
            let span = table
                .text("name")
                .given()
                .map_or(table.span(), |name| name.span);
            spec.push(
                Problem::at(
                    span,
                    format!(
                        "two passages of the {} are named `{}`",
                        passage.system.word(),
                        passage.name
                    ),
                    "there already",
                )
                .help("give each its own name, \"heald eye, back shaft\""),
            );
        }
        passages.push(passage);
    }
    name_places(&mut passages);
    passages
}

/// Tells apart the places of passages of one name on the ways of both yarns.
fn name_places(passages: &mut [Passage]) {
    let shared: Vec<bool> = passages
        .iter()
        .map(|passage| {
            let twin =
                |other: &Passage| other.name == passage.name && other.system != passage.system;
            passages.iter().any(twin)
        })
        .collect();
    for (passage, shared) in passages.iter_mut().zip(shared) {
        if shared {
            passage.place = format!("{}, {}", passage.name, passage.system.word());
        }
    }
}

fn read_passage(table: &Table<'_>, weave: Option<&Weave>, laid: &Laid) -> Option<Passage> {
    let systems = [("warp", SystemName::Warp), ("weft", SystemName::Weft)];
    let stages = [
        ("winding", Stage::Winding),
        ("warping", Stage::Warping),
        ("weaving", Stage::Weaving),
        ("finishing", Stage::Finishing),
    ];
    let system = table.required(table.word("yarn", &systems), "yarn", "\"warp\"");
    let name = table.required(table.text("name"), "name", "\"heald eye\"");
    let stage = table.word("stage", &stages).value();
    let radius = table.measure("radius", Dimension::Length, Bound::NotNegative);
    let radius = table.required(radius, "radius", "\"1.5 mm\"");
    let turn = table.measure("turn", Dimension::Angle, Bound::Positive);
    let turn = table.required(turn, "turn", "\"12 deg\"");
    let friction = table.number("friction", Bound::Within(0.0, 2.0)).value();
    let temperature = table
        .measure(
            "temperature",
            Dimension::Temperature,
            Bound::Within(-273.15, f64::MAX),
        )
        .given();
    let yarn = weave
        .zip(system.as_ref())
        .map(|(weave, system)| match system.value {
            SystemName::Weft => &weave.weft.yarn,
            SystemName::Warp => &weave.warp.yarn,
        });
    if let (Some(yarn), Some(temperature)) = (yarn, &temperature)
        && yarn.fibre.max_temp_c.is_none()
    {
        table.push(
            Problem::at(
                temperature.span.clone(),
                format!("what fibre `{}` stands in air is not known", yarn.fibre.id),
                "cannot be judged",
            )
            .help("give `max_temperature` under the fibre, or leave `temperature` out"),
        );
    }
    let tension_n = read_tension(table, yarn.map(|yarn| Some(&**yarn)));
    let (system, name, radius, turn) = (system?, name?, radius?, turn?);
    // Reports find a bend by its place.
    if name.value.eq_ignore_ascii_case(OPEN_SHED) {
        table.push(
            Problem::at(name.span, format!("`{OPEN_SHED}` is no passage"), "taken")
                .help("give `shed` under [weave] instead, or another name"),
        );
        return None;
    }
    // More than a few full wraps is a slip of the unit: e to the power of friction times turn explodes.
    if turn.value > 20.0 * std::f64::consts::PI {
        table.push(
            Problem::at(turn.span, "`turn` is more than ten full wraps", "too much")
                .help("a wrap angle, \"12 deg\""),
        );
        return None;
    }
    let default_friction = yarn.and_then(|yarn| yarn.fibre.friction_on_guide);
    Some(Passage {
        place: name.value.clone(),
        name: name.value,
        system: system.value,
        stage: stage.unwrap_or(Stage::Weaving),
        radius_mm: radius.value,
        turn_rad: turn.value,
        friction: friction.or(default_friction).unwrap_or(DEFAULT_FRICTION),
        friction_given: friction.is_some(),
        tension_n,
        temperature_span: temperature.as_ref().map(|placed| placed.span.clone()),
        temperature_c: temperature.map(|placed| placed.value),
        reed_travel_mm: laid
            .travel
            .as_deref()
            .and_then(|text| parse(text, &[Dimension::Length]).ok())
            .map(|travel| travel.value),
        route: laid.route,
        number: laid.number,
        radius_span: radius.span,
    })
}

/// Reads every `[[tool]]`.
pub fn read_tools(spec: &Table<'_>) -> Vec<Tool> {
    let mut tools = Vec::new();
    for table in spec.tables("tool", TOOL) {
        let name = table.required(table.text("name"), "name", "\"frame corner\"");
        let radius = table.measure("radius", Dimension::Length, Bound::NotNegative);
        let radius = table.required(radius, "radius", "\"6 mm\"");
        let axis = table
            .measure("bend_axis", Dimension::Angle, Bound::Any)
            .value();
        let corners = [("outside", Corner::Outside), ("inside", Corner::Inside)];
        let corner = table.word("corner", &corners).value();
        let layer = table.count("layer").value();
        if let (Some(name), Some(radius)) = (name, radius) {
            if tools.iter().any(|tool: &Tool| tool.name == name.value) {
                table.push(
                    Problem::at(
                        name.span.clone(),
                        format!("two tools are named `{}`", name.value),
                        "there already",
                    )
                    .help("give each its own name, \"frame corner, layer 2\""),
                );
            }
            tools.push(Tool {
                corner: corner.unwrap_or(Corner::Outside),
                layer: layer.unwrap_or(1),
                name: name.value,
                radius_mm: radius.value,
                bend_axis_rad: axis,
                radius_span: radius.span,
            });
        }
    }
    tools
}
