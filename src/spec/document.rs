//! A spec's TOML tree with places, whose values can be replaced before it is read: what a study varies.
//!
//! Keys are named by a path: `weave.warp.sett`, `weave.pattern`, `yarn.face.width`, `fibre.own.modulus`,
//! `passage.heald eye.radius` (or its number from 1; `passage.weft eyelet.radius` where both yarns have one of that
//! name), `tool.corner.radius`, `require.reserve`. A station that only a route has is overridden: it gets a `[[passage]]`
//! of its own. A replaced
//! value keeps the place of what it replaced; an added one takes that of its table, so that problems of a
//! variant still point into the text.

use super::field::{Placed, Problems};
use super::keys::{self, Key};
use super::problem::{Problem, nearest_of};
use super::reader::Table;
use super::route::{RouteStation, read_routes};
use super::tree::{self, Branch, Value};
use super::{Spec, read_parts};
use crate::pattern::Weaves;
use crate::span::{SourceText, Span};
use std::sync::Arc;
use thiserror::Error;

/// A parsed text that has not been read as a spec yet.
#[derive(Debug, Clone)]
pub struct Document {
    source: Arc<SourceText>,
    root: Branch,
}

/// Why a key cannot be replaced.
#[derive(Debug, Clone, PartialEq, Eq, Error)]
pub enum SetError {
    /// No table of that name.
    #[error("`{key}` is no key of a spec: it starts with none of {known}")]
    NoTable {
        /// The path.
        key: String,
        /// The tables there are.
        known: String,
    },
    /// No such key in the table.
    #[error("`{key}` is no key of a spec{}", known_names(&[], .nearest.as_deref()))]
    NoKey {
        /// The path.
        key: String,
        /// The nearest path there is.
        nearest: Option<String>,
    },
    /// The spec has no yarn, passage or tool of that name.
    #[error("this spec has no {what} called `{name}`{}", known_names(.known, .nearest.as_deref()))]
    NoSuch {
        /// Yarn, passage or tool.
        what: &'static str,
        /// The name.
        name: String,
        /// The names there are.
        known: Vec<String>,
        /// The nearest of them.
        nearest: Option<String>,
    },
}

fn known_names(known: &[String], nearest: Option<&str>) -> String {
    match nearest {
        Some(near) => format!("; the nearest is `{near}`"),
        None if known.is_empty() => String::new(),
        None => format!("; it has `{}`", known.join("`, `")),
    }
}

/// A key's path, taken apart.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct KeyPath {
    /// As written.
    pub text: String,
    top: &'static str,
    middle: Option<String>,
    last: &'static str,
}

impl KeyPath {
    /// Takes a path apart.
    ///
    /// # Errors
    /// Where no spec has such a key.
    pub fn parse(text: &str) -> Result<Self, SetError> {
        let text = text.trim();
        let in_weave = if text.starts_with("weave.shed.") {
            keys::SHED
        } else {
            keys::SYSTEM
        };
        let tables: [(&str, &'static [Key], bool); 7] = [
            ("fibre", keys::FIBRE, true),
            ("yarn", keys::YARN, true),
            ("passage", keys::PASSAGE, true),
            ("tool", keys::TOOL, true),
            ("weave", keys::WEAVE, false),
            ("require", keys::REQUIRE, false),
            ("weave", in_weave, true),
        ];
        let (top, rest) = text.split_once('.').unwrap_or((text, ""));
        let (middle, last) = match rest.rsplit_once('.') {
            Some((middle, last)) => (Some(middle), last),
            None => (None, rest),
        };
        let here: Vec<_> = tables
            .iter()
            .filter(|(name, _, named)| *name == top && *named == middle.is_some())
            .collect();
        let Some((top, known, _)) = here.first() else {
            let mut known: Vec<String> = tables
                .iter()
                .map(|(name, ..)| format!("`{name}`"))
                .collect();
            known.dedup();
            known.truncate(6);
            return Err(SetError::NoTable {
                key: text.to_owned(),
                known: known.join(", "),
            });
        };
        let system = *top != "weave" || matches!(middle, None | Some("warp" | "weft" | "shed"));
        match known.iter().find(|key| key.name == last) {
            Some(key) if system => Ok(Self {
                text: text.to_owned(),
                top,
                middle: middle.map(str::to_owned),
                last: key.name,
            }),
            _ => Err(SetError::NoKey {
                key: text.to_owned(),
                nearest: nearest_of(last, known.iter().map(|key| key.name)).map(|near| {
                    let middle = match middle {
                        Some(_) if !system => ".warp".to_owned(),
                        Some(name) => format!(".{name}"),
                        None => String::new(),
                    };
                    format!("{top}{middle}.{near}")
                }),
            }),
        }
    }

    /// Last part of the path: the key itself.
    pub fn last(&self) -> &'static str {
        self.last
    }
}

/// A value to put in: a text as it stands, or a number.
#[derive(Debug, Clone, PartialEq)]
pub enum NewValue {
    /// A text, such as a quantity with its unit or a word.
    Text(String),
    /// A number without a unit, as TOML writes it.
    Number(String),
}

impl Document {
    /// Parses a text.
    ///
    /// # Errors
    /// All problems of its syntax.
    pub fn parse(source: SourceText) -> Result<Self, Vec<Problem>> {
        let root = tree::parse(&source.text)?;
        Ok(Self {
            source: Arc::new(source),
            root,
        })
    }

    /// The text it was parsed from.
    pub fn source(&self) -> &Arc<SourceText> {
        &self.source
    }

    /// Reads it as a spec; patterns are looked up in `weaves`.
    ///
    /// # Errors
    /// All problems, in the order of the text.
    pub fn spec(&self, weaves: &Weaves) -> Result<Spec, Vec<Problem>> {
        let problems = Problems::default();
        let table = Table::new(
            &problems,
            &self.root,
            self.first_line(),
            "the spec",
            keys::SPEC,
        );
        let read = read_parts(&table, &self.source, weaves);
        match read {
            Some(spec) if problems.is_empty() => Ok(spec),
            _ => Err(problems.into_sorted()),
        }
    }

    /// Whether it gives this key of a yarn.
    pub fn yarn_has(&self, yarn: &str, key: &str) -> bool {
        let inside = |place: Option<&Placed<Value>>, key: &str| match place.map(|p| &p.value) {
            Some(Value::Table(table)) => table.get(key).cloned(),
            _ => None,
        };
        let own = inside(self.root.get("yarn"), yarn);
        inside(own.as_ref(), key).is_some()
    }

    /// Where problems of the whole spec are marked.
    fn first_line(&self) -> Span {
        let text = &self.source.text;
        0..text.find('\n').unwrap_or(text.len())
    }

    /// Replaces or adds a value. A filament diameter frees the count: where linear density and filaments are both
    /// given, the filaments follow.
    ///
    /// # Errors
    /// Where the spec has no such yarn, passage or tool.
    pub fn set(&mut self, key: &KeyPath, value: &NewValue) -> Result<(), SetError> {
        let value = match value {
            NewValue::Text(text) => Value::Text(text.clone()),
            NewValue::Number(digits) if digits.contains(['.', 'e', 'E']) => {
                Value::Real(digits.clone())
            }
            NewValue::Number(digits) => Value::Whole(digits.clone()),
        };
        if key.last == "filament_diameter" {
            self.free_the_count(key);
        }
        let (table, place) = self.table_of(key)?;
        if key.top == "weave" && key.last == "pattern" {
            table.remove("rows");
        }
        table.put(key.last, value, &place);
        Ok(())
    }

    /// The table a key stands in, and its place; made where it may be left out.
    fn table_of(&mut self, key: &KeyPath) -> Result<(&mut Branch, Span), SetError> {
        let everywhere = self.first_line();
        let no_such = |what, name: &str, known: Vec<String>| SetError::NoSuch {
            what,
            name: name.to_owned(),
            nearest: nearest_of(name, known.iter().map(String::as_str)).map(str::to_owned),
            known,
        };
        let Some(name) = key.middle.as_deref() else {
            return Ok(self.root.enter(key.top, &everywhere));
        };
        match key.top {
            "passage" => self.passage_of(name),
            "tool" => {
                let Some(Value::List(list)) =
                    self.root.get_mut(key.top).map(|found| &mut found.value)
                else {
                    return Err(no_such(key.top, name, Vec::new()));
                };
                let names: Vec<String> = list
                    .iter()
                    .map(|item| text_of(&item.value, "name"))
                    .collect();
                let number = name
                    .parse::<usize>()
                    .ok()
                    .and_then(|number| number.checked_sub(1));
                let at = names.iter().position(|known| known == name).or(number);
                let item = at.and_then(|at| list.get_mut(at)).and_then(as_branch);
                item.ok_or_else(|| no_such(key.top, name, names))
            }
            "yarn" => {
                let (yarns, _) = self.root.enter("yarn", &everywhere);
                let known = yarns.iter().map(|(key, _)| key.value.clone()).collect();
                yarns
                    .get_mut(name)
                    .and_then(as_branch)
                    .ok_or_else(|| no_such("yarn", name, known))
            }
            "fibre" => {
                let (fibres, place) = self.root.enter("fibre", &everywhere);
                if fibres.get(name).is_none() {
                    // A fibre of the library, varied: one of the spec's own that starts from it.
                    let (own, place) = fibres.enter(name, &place);
                    own.put("like", Value::Text(name.to_owned()), &place);
                }
                Ok(fibres.enter(name, &place))
            }
            top => {
                let (table, place) = self.root.enter(top, &everywhere);
                Ok(table.enter(name, &place))
            }
        }
    }

    /// The table of a passage and its place, made where only a route has it.
    fn passage_of(&mut self, name: &str) -> Result<(&mut Branch, Span), SetError> {
        let stations: Vec<RouteStation> = {
            let unheard = Problems::default();
            let spec = Table::new(&unheard, &self.root, 0..0, "the spec", keys::SPEC);
            read_routes(&spec).stations().collect()
        };
        let own: Vec<(String, String)> = match self.root.get("passage").map(|found| &found.value) {
            Some(Value::List(list)) => list
                .iter()
                .map(|item| (text_of(&item.value, "yarn"), text_of(&item.value, "name")))
                .collect(),
            _ => Vec::new(),
        };
        let is_called =
            |yarn: &str, known: &str| name.strip_prefix(yarn).map(str::trim_start) == Some(known);
        let bare = own.iter().position(|(_, known)| known == name);
        let at = bare.or_else(|| own.iter().position(|(yarn, known)| is_called(yarn, known)));
        let of_route = |station: &&RouteStation| {
            let known = station.station.name.as_str();
            known == name || is_called(station.system.word(), known)
        };
        let at = match (at, stations.iter().find(of_route)) {
            (Some(at), _) => Some(at),
            (None, Some(station)) => {
                self.override_station(station);
                Some(own.len())
            }
            (None, None) => name
                .parse::<usize>()
                .ok()
                .and_then(|number| number.checked_sub(1)),
        };
        let known: Vec<String> = own
            .into_iter()
            .map(|(_, name)| name)
            .chain(stations.iter().map(|station| station.station.name.clone()))
            .collect();
        let list = match self.root.get_mut("passage").map(|found| &mut found.value) {
            Some(Value::List(list)) => Some(list),
            _ => None,
        };
        let item = list.and_then(|list| list.get_mut(at?)).and_then(as_branch);
        item.ok_or_else(|| SetError::NoSuch {
            what: "passage",
            name: name.to_owned(),
            nearest: nearest_of(name, known.iter().map(String::as_str)).map(str::to_owned),
            known,
        })
    }

    /// Adds a `[[passage]]` that overrides nothing yet.
    fn override_station(&mut self, of: &RouteStation) {
        let mut values = Branch::default();
        for (key, word) in [("yarn", of.system.word()), ("name", &of.station.name)] {
            values.put(key, Value::Text(word.to_owned()), &of.span);
        }
        let item = Placed {
            value: Value::Table(values),
            span: of.span.clone(),
        };
        match self.root.get_mut("passage").map(|found| &mut found.value) {
            Some(Value::List(list)) => list.push(item),
            _ => self.root.put("passage", Value::List(vec![item]), &of.span),
        }
    }

    /// Takes `filaments` out of the yarns whose diameter is varied and whose linear density is given.
    fn free_the_count(&mut self, key: &KeyPath) {
        let Some(Value::Table(yarns)) = self.root.get_mut("yarn").map(|found| &mut found.value)
        else {
            return;
        };
        for (name, yarn) in yarns.iter_mut() {
            let Value::Table(yarn) = &mut yarn.value else {
                continue;
            };
            let varied = match (key.top, yarn.get("fibre").map(|fibre| &fibre.value)) {
                ("yarn", _) => key.middle.as_deref() == Some(name),
                (_, Some(Value::Text(fibre))) => key.middle.as_ref() == Some(fibre),
                _ => false,
            };
            if varied && yarn.get("linear_density").is_some() {
                yarn.remove("filaments");
            }
        }
    }
}

fn text_of(item: &Value, key: &str) -> String {
    match item {
        Value::Table(table) => match table.get(key).map(|found| &found.value) {
            Some(Value::Text(name)) => name.clone(),
            _ => String::new(),
        },
        _ => String::new(),
    }
}

fn as_branch(found: &mut Placed<Value>) -> Option<(&mut Branch, Span)> {
    match &mut found.value {
        Value::Table(table) => Some((table, found.span.clone())),
        _ => None,
    }
}
