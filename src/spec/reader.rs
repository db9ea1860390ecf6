//! Reading one table of the spec: values with their places, every problem kept, none fatal.
//!
//! A [`Table`] refuses unknown keys at once; its getters return [`Field`]s, so that a value that is there
//! but wrong (already reported) is told apart from one that is absent (which may be another problem).

use super::field::{Bound, Field, Placed, Problems};
use super::keys::Key;
use super::problem::{Problem, nearest_of};
use super::tree::{Branch, Value};
use crate::quantity::{Dimension, Quantity, QuantityError, parse};
use crate::span::Span;

/// One table being read.
#[derive(Debug, Clone)]
pub struct Table<'a> {
    problems: &'a Problems,
    table: &'a Branch,
    keys: &'static [Key],
    span: Span,
    what: String,
}

impl<'a> Table<'a> {
    /// A table whose keys are checked against the known ones; `what` is its word in messages.
    pub fn new(
        problems: &'a Problems,
        table: &'a Branch,
        span: Span,
        what: impl Into<String>,
        keys: &'static [Key],
    ) -> Self {
        let this = Self {
            problems,
            table,
            keys,
            span,
            what: what.into(),
        };
        for (key, _) in table.iter() {
            let name = key.value.as_str();
            if !keys.iter().any(|known| known.name == name) {
                let known = keys.iter().map(|key| key.name);
                let all: Vec<String> = known.clone().map(|name| format!("`{name}`")).collect();
                problems.push(
                    Problem::at(
                        key.span.clone(),
                        format!("unknown key `{name}` in {}", this.what),
                        "not a key here",
                    )
                    .nearest(nearest_of(name, known))
                    .help(format!("known here: {}", all.join(", "))),
                );
            }
        }
        this
    }

    /// Where the table stands.
    pub fn span(&self) -> Span {
        self.span.clone()
    }

    /// Its keys and values as they stand.
    pub fn values(&self) -> &'a Branch {
        self.table
    }

    /// Another table whose problems are kept with this one's; its keys have been looked at.
    pub fn beside<'b>(
        &self,
        table: &'b Branch,
        span: Span,
        what: String,
        keys: &'static [Key],
    ) -> Table<'b>
    where
        'a: 'b,
    {
        Table {
            problems: self.problems,
            table,
            keys,
            span,
            what,
        }
    }

    /// Where the value of a key stands, if it is there.
    pub fn place_of(&self, key: &str) -> Option<Span> {
        self.raw(key).map(|found| found.span.clone())
    }

    /// Whether a value of this table has been reported.
    pub fn has_problems_inside(&self) -> bool {
        let values: Vec<Span> = self
            .table
            .iter()
            .map(|(_, found)| found.span.clone())
            .collect();
        self.problems.any_at(&values)
    }

    /// Keeps a problem.
    pub fn push(&self, problem: Problem) {
        self.problems.push(problem);
    }

    /// Whether an unknown key of this table looks like a known one: it has been reported, and what it should have
    /// been is not missing.
    pub fn has_misspelt(&self, key: &str) -> bool {
        let known = || self.keys.iter().map(|known| known.name);
        self.table
            .iter()
            .filter(|(name, _)| !known().any(|known| known == name.value))
            .any(|(name, _)| nearest_of(&name.value, known()) == Some(key))
    }

    /// Reports a missing key; `takes` says what would do.
    pub fn missing(&self, key: &str, takes: &str) {
        if self.has_misspelt(key) {
            return;
        }
        self.push(
            Problem::at(
                self.span(),
                format!("{} has no `{key}`", self.what),
                format!("`{key}` is missing"),
            )
            .help(format!("add `{key} = {takes}`")),
        );
    }

    /// The field's value, or `None` with a problem kept where it is absent.
    pub fn required<T>(&self, field: Field<T>, key: &str, takes: &str) -> Option<Placed<T>> {
        if matches!(field, Field::Absent) {
            self.missing(key, takes);
        }
        field.given()
    }

    fn raw(&self, key: &str) -> Option<&'a Placed<Value>> {
        self.table.get(key)
    }

    fn wrong_type<T>(&self, key: &str, found: &Placed<Value>, wanted: &str) -> Field<T> {
        let word = found.value.digits().unwrap_or_else(|| found.value.word());
        let mut problem = Problem::at(
            found.span.clone(),
            format!("`{key}` takes {wanted}, not {word}"),
            format!("{wanted} needed"),
        );
        if wanted == "a table" {
            let inside = self
                .what
                .strip_prefix('[')
                .and_then(|what| what.strip_suffix(']'));
            problem = problem.help(match inside {
                Some(outer) => format!("write `[{outer}.{key}]`"),
                None => format!("write `[{key}]`"),
            });
        }
        self.push(problem);
        Field::Wrong
    }

    /// The text under a key as it stands, if it is one.
    pub fn peek_text(&self, key: &str) -> Option<Placed<String>> {
        let found = self.raw(key)?;
        match &found.value {
            Value::Text(text) => Some(Placed {
                value: text.clone(),
                span: found.span.clone(),
            }),
            _ => None,
        }
    }

    /// A text that is not empty.
    pub fn text(&self, key: &str) -> Field<String> {
        let Some(found) = self.raw(key) else {
            return Field::Absent;
        };
        match &found.value {
            Value::Text(text) if text.trim().is_empty() => {
                self.push(Problem::at(
                    found.span.clone(),
                    format!("`{key}` is empty"),
                    "empty",
                ));
                Field::Wrong
            }
            Value::Text(text) if text.chars().any(hidden) => {
                self.push(
                    Problem::at(
                        found.span.clone(),
                        format!("`{key}` has a line end or another character that is not shown"),
                        "not shown",
                    )
                    .help("write it in one line of plain text"),
                );
                Field::Wrong
            }
            Value::Text(text) => Field::Given(Placed {
                value: text.to_string(),
                span: found.span.clone(),
            }),
            _ => self.wrong_type(key, found, "a text"),
        }
    }

    /// One of some words.
    pub fn word<T: Copy>(&self, key: &str, words: &[(&'static str, T)]) -> Field<T> {
        let Field::Given(text) = self.text(key) else {
            return if self.raw(key).is_some() {
                Field::Wrong
            } else {
                Field::Absent
            };
        };
        match words.iter().find(|(word, _)| *word == text.value) {
            Some((_, value)) => Field::Given(Placed {
                value: *value,
                span: text.span,
            }),
            None => {
                let all: Vec<String> = words
                    .iter()
                    .map(|(word, _)| format!("\"{word}\""))
                    .collect();
                self.push(
                    Problem::at(
                        text.span,
                        format!("`{key}` takes one of some words, not `{}`", text.value),
                        "unknown word",
                    )
                    .nearest(nearest_of(&text.value, words.iter().map(|(word, _)| *word)))
                    .help(format!("would do: {}", all.join(", "))),
                );
                Field::Wrong
            }
        }
    }

    /// A quantity with its unit, inside its bound.
    pub fn quantity(&self, key: &str, wanted: &[Dimension], bound: Bound) -> Field<Quantity> {
        let Some(found) = self.raw(key) else {
            return Field::Absent;
        };
        let span = found.span.clone();
        let units = || {
            let symbols: Vec<&str> = wanted.iter().flat_map(|kind| kind.symbols()).collect();
            format!("units that would do: {}", symbols.join(", "))
        };
        let text = match &found.value {
            Value::Text(text) => text,
            Value::Whole(digits) | Value::Real(digits) => {
                let symbol = wanted
                    .first()
                    .and_then(|kind| kind.symbols().next())
                    .unwrap_or("mm");
                self.push(
                    Problem::at(span, format!("`{key}` is a bare number"), "no unit")
                        .help(format!(
                            "write a text with its unit, `\"{digits} {symbol}\"`"
                        ))
                        .help(units()),
                );
                return Field::Wrong;
            }
            _ => return self.wrong_type(key, found, "a text with a unit"),
        };
        match parse(text, wanted) {
            Ok(quantity) if !plausible(&quantity) => {
                self.push(
                    Problem::at(
                        span,
                        format!("`{key}` is out of any reach"),
                        "check the unit",
                    )
                    .help(units()),
                );
                Field::Wrong
            }
            Ok(quantity) => match bound.broken_by(quantity.value) {
                None => Field::Given(Placed {
                    value: quantity,
                    span,
                }),
                Some(broken) => {
                    self.push(Problem::at(
                        span,
                        format!("`{key}` {broken}{}", in_unit(quantity.dimension)),
                        text.as_str(),
                    ));
                    Field::Wrong
                }
            },
            Err(error) => {
                self.push(quantity_problem(key, span, &error, units()));
                Field::Wrong
            }
        }
    }

    /// A quantity of one dimension, as its internal value.
    pub fn measure(&self, key: &str, wanted: Dimension, bound: Bound) -> Field<f64> {
        self.quantity(key, &[wanted], bound)
            .map(|quantity| quantity.value)
    }

    /// A number without a unit, finite and inside its bound.
    pub fn number(&self, key: &str, bound: Bound) -> Field<f64> {
        let Some(found) = self.raw(key) else {
            return Field::Absent;
        };
        let Some(digits) = found.value.digits() else {
            return self.wrong_type(key, found, "a number");
        };
        let broken = match digits.parse::<f64>() {
            Ok(value) if value.is_finite() => match bound.broken_by(value) {
                None => {
                    return Field::Given(Placed {
                        value,
                        span: found.span.clone(),
                    });
                }
                Some(broken) => broken,
            },
            _ => "must be a finite number".to_owned(),
        };
        self.push(Problem::at(
            found.span.clone(),
            format!("`{key}` {broken}"),
            digits,
        ));
        Field::Wrong
    }

    /// A whole number from 1 up.
    pub fn count(&self, key: &str) -> Field<u32> {
        let Some(found) = self.raw(key) else {
            return Field::Absent;
        };
        let Value::Whole(digits) = &found.value else {
            return self.wrong_type(key, found, "a whole number");
        };
        match digits.parse::<u32>() {
            Ok(value) if value > 0 => Field::Given(Placed {
                value,
                span: found.span.clone(),
            }),
            _ => {
                self.push(Problem::at(
                    found.span.clone(),
                    format!("`{key}` must be a whole number from 1 to {}", u32::MAX),
                    digits.as_str(),
                ));
                Field::Wrong
            }
        }
    }

    /// A list of texts with the place of each.
    pub fn texts(&self, key: &str) -> Field<Vec<Placed<String>>> {
        let Some(found) = self.raw(key) else {
            return Field::Absent;
        };
        let Value::List(items) = &found.value else {
            return self.wrong_type(key, found, "a list of texts");
        };
        let mut texts = Vec::new();
        for item in items.iter() {
            match &item.value {
                Value::Text(text) => texts.push(Placed {
                    value: text.to_string(),
                    span: item.span.clone(),
                }),
                _ => return self.wrong_type(key, item, "texts only"),
            }
        }
        Field::Given(Placed {
            value: texts,
            span: found.span.clone(),
        })
    }

    /// A text, or a list of texts with the place of each.
    pub fn one_or_more_texts(&self, key: &str) -> Field<Vec<Placed<String>>> {
        match self.raw(key).map(|found| (found, &found.value)) {
            None => Field::Absent,
            Some((_, Value::List(_))) => self.texts(key),
            Some((_, Value::Text(_))) => match self.text(key) {
                Field::Given(one) => Field::Given(Placed {
                    span: one.span.clone(),
                    value: vec![one],
                }),
                Field::Absent | Field::Wrong => Field::Wrong,
            },
            Some((found, _)) => self.wrong_type(key, found, "a text or a list of texts"),
        }
    }

    /// A table under a key.
    pub fn table(&self, key: &str, what: &str, keys: &'static [Key]) -> Field<Table<'a>> {
        let Some(found) = self.raw(key) else {
            return Field::Absent;
        };
        let Value::Table(table) = &found.value else {
            return self.wrong_type(key, found, "a table");
        };
        Field::Given(Placed {
            value: Table::new(self.problems, table, found.span.clone(), what, keys),
            span: found.span.clone(),
        })
    }

    /// The tables under the keys of a table, `[yarn.NAME]`: name, its place, table.
    pub fn named_tables(
        &self,
        key: &str,
        keys: &'static [Key],
    ) -> Vec<(Placed<String>, Table<'a>)> {
        let Some(found) = self.raw(key) else {
            return Vec::new();
        };
        let Value::Table(outer) = &found.value else {
            self.wrong_type::<()>(key, found, &format!("tables, `[{key}.NAME]`"));
            return Vec::new();
        };
        let is_table = |found: &Placed<Value>| matches!(found.value, Value::Table(_));
        if !outer.iter().any(|(_, value)| is_table(value)) {
            self.push(
                Problem::at(
                    found.span.clone(),
                    format!("`[{key}]` has no name"),
                    "no name",
                )
                .help(format!("write `[{key}.NAME]`, with a name of your own")),
            );
            return Vec::new();
        }
        let mut tables = Vec::new();
        for (name, value) in outer.iter() {
            let text = name.value.clone();
            match &value.value {
                Value::Table(table) => {
                    let what = format!("[{key}.{text}]");
                    tables.push((
                        Placed {
                            value: text,
                            span: name.span.clone(),
                        },
                        Table::new(self.problems, table, value.span.clone(), what, keys),
                    ));
                }
                _ => {
                    self.wrong_type::<()>(&text, value, &format!("a table, `[{key}.NAME]`"));
                }
            }
        }
        tables
    }

    /// The tables of a list, `[[passage]]`.
    pub fn tables(&self, key: &str, keys: &'static [Key]) -> Vec<Table<'a>> {
        let Some(found) = self.raw(key) else {
            return Vec::new();
        };
        let Value::List(items) = &found.value else {
            self.wrong_type::<()>(key, found, &format!("a list of tables, `[[{key}]]`"));
            return Vec::new();
        };
        let mut tables = Vec::new();
        for (index, item) in items.iter().enumerate() {
            match &item.value {
                Value::Table(table) => {
                    let what = format!("[[{key}]] number {}", index + 1);
                    tables.push(Table::new(
                        self.problems,
                        table,
                        item.span.clone(),
                        what,
                        keys,
                    ));
                }
                _ => {
                    self.wrong_type::<()>(key, item, &format!("tables, `[[{key}]]`"));
                }
            }
        }
        tables
    }
}

/// How the bound of a quantity is told: in the internal unit of its dimension.
fn in_unit(dimension: Dimension) -> &'static str {
    match dimension {
        Dimension::Temperature => " degC",
        Dimension::Share => " (as a share: 1 is 100 %)",
        _ => "",
    }
}

/// Characters that move or hide text on a terminal: controls, and the marks that turn the direction of writing.
fn hidden(c: char) -> bool {
    c.is_control()
        || matches!(c, '\u{200e}' | '\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}')
}

/// Whether a quantity is zero or of a size that can be.
fn plausible(quantity: &Quantity) -> bool {
    let (least, most) = quantity.dimension.plausible();
    quantity.value == 0.0 || (least..=most).contains(&quantity.value.abs())
}

/// The problem of a text that is no quantity.
pub fn quantity_problem(key: &str, span: Span, error: &QuantityError, units: String) -> Problem {
    let label = match error {
        QuantityError::NoNumber { .. } => "a number and a unit needed",
        QuantityError::Comma { .. } => "a point, not a comma",
        QuantityError::NotFinite { .. } => "not finite",
        QuantityError::NoUnit { .. } => "no unit",
        QuantityError::UnknownUnit { .. } => "unknown unit",
        QuantityError::WrongDimension { .. } => "unit of something else",
        QuantityError::NoDirection { .. } => "S or Z needed",
    };
    let nearest = match error {
        QuantityError::UnknownUnit { nearest, .. } => *nearest,
        _ => None,
    };
    Problem::at(span, format!("`{key}`: {error}"), label)
        .nearest(nearest)
        .help(units)
}
