//! A spec's TOML as a tree of values with places, owned, so that a study can replace values in it.
//!
//! The parsing is `toml`'s; this is its tree without the lifetime of the text and with numbers as the decimal
//! digits a person would write. Tables keep the order of the text.

use super::field::Placed;
use super::problem::Problem;
use crate::span::Span;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// A value.
#[derive(Debug, Clone, PartialEq)]
pub enum Value {
    /// A text.
    Text(String),
    /// A whole number, as decimal digits.
    Whole(String),
    /// Another number, as written (`inf` and `nan` too).
    Real(String),
    /// True or false.
    Truth,
    /// A date or time.
    Date,
    /// A list.
    List(Vec<Placed<Value>>),
    /// A table.
    Table(Branch),
}

/// A table: keys and values with their places.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Branch(Vec<(Placed<String>, Placed<Value>)>);

impl Branch {
    /// The value of a key.
    pub fn get(&self, key: &str) -> Option<&Placed<Value>> {
        self.iter()
            .find(|(name, _)| name.value == key)
            .map(|(_, value)| value)
    }

    /// The value of a key, to be changed.
    pub fn get_mut(&mut self, key: &str) -> Option<&mut Placed<Value>> {
        self.0
            .iter_mut()
            .find(|(name, _)| name.value == key)
            .map(|(_, value)| value)
    }

    /// Keys and values in the order of the text.
    pub fn iter(&self) -> impl Iterator<Item = &(Placed<String>, Placed<Value>)> {
        self.0.iter()
    }

    /// Keys and values to be changed.
    pub fn iter_mut(&mut self) -> impl Iterator<Item = (&str, &mut Placed<Value>)> {
        self.0
            .iter_mut()
            .map(|(name, value)| (name.value.as_str(), value))
    }

    /// Replaces the value of a key, which keeps its place, or adds it with the place given.
    pub fn put(&mut self, key: &str, value: Value, place: &Span) {
        match self.get_mut(key) {
            Some(old) => old.value = value,
            None => {
                let span = place.clone();
                let name = Placed {
                    value: key.to_owned(),
                    span: span.clone(),
                };
                self.0.push((name, Placed { value, span }));
            }
        }
    }

    /// Puts a value with the places it has, instead of the one that is there.
    pub fn lay_over(&mut self, key: &Placed<String>, value: &Placed<Value>) {
        self.remove(&key.value);
        self.0.push((key.clone(), value.clone()));
    }

    /// The table under a key and its place, made where there is none; anything else there gives way to it.
    pub fn enter(&mut self, key: &str, place: &Span) -> (&mut Branch, Span) {
        let at = match self.0.iter().position(|(name, _)| name.value == key) {
            Some(at) => at,
            None => {
                self.put(key, Value::Table(Branch::default()), place);
                self.0.len() - 1
            }
        };
        let found = &mut self.0[at].1;
        let span = found.span.clone();
        (found.value.as_branch(), span)
    }

    /// Takes a key out.
    pub fn remove(&mut self, key: &str) {
        self.0.retain(|(name, _)| name.value != key);
    }
}

/// Parses a text.
///
/// # Errors
/// All problems of its syntax.
pub fn parse(text: &str) -> Result<Branch, Vec<Problem>> {
    let (document, errors) = DeTable::parse_recoverable(text);
    if errors.is_empty() {
        return Ok(branch(document.get_ref()));
    }
    let problem = |error: &toml::de::Error| {
        let message = format!("this is no TOML: {}", error.message().trim());
        Problem::at(error.span().unwrap_or(0..0), message, "here")
    };
    Err(errors.iter().map(problem).collect())
}

fn branch(table: &DeTable<'_>) -> Branch {
    let mut entries: Vec<(Placed<String>, Placed<Value>)> = table
        .iter()
        .map(|(key, found)| {
            let name = Placed {
                value: key.get_ref().to_string(),
                span: key.span(),
            };
            (name, node(found))
        })
        .collect();
    entries.sort_by_key(|(name, _)| name.span.start);
    Branch(entries)
}

fn node(found: &Spanned<DeValue<'_>>) -> Placed<Value> {
    let value = match found.get_ref() {
        DeValue::String(text) => Value::Text(text.to_string()),
        // A number that i64 does not hold stays as written and fails as a number later.
        DeValue::Integer(number) => Value::Whole(
            i64::from_str_radix(number.as_str(), number.radix())
                .map_or_else(|_| number.as_str().to_owned(), |whole| whole.to_string()),
        ),
        DeValue::Float(number) => Value::Real(number.as_str().to_owned()),
        DeValue::Boolean(_) => Value::Truth,
        DeValue::Datetime(_) => Value::Date,
        DeValue::Array(items) => Value::List(items.iter().map(node).collect()),
        DeValue::Table(table) => Value::Table(branch(table)),
    };
    Placed {
        value,
        span: found.span(),
    }
}

impl Value {
    /// This value as a table; anything else gives way to an empty one.
    fn as_branch(&mut self) -> &mut Branch {
        if !matches!(self, Self::Table(_)) {
            *self = Self::Table(Branch::default());
        }
        match self {
            Self::Table(branch) => branch,
            // The line above has made it a table.
            _ => unreachable!("a table by the line above"),
        }
    }

    /// The word for messages.
    pub fn word(&self) -> &'static str {
        match self {
            Self::Text(_) => "a text",
            Self::Whole(_) | Self::Real(_) => "a number",
            Self::Truth => "true or false",
            Self::Date => "a date",
            Self::List(_) => "a list",
            Self::Table(_) => "a table",
        }
    }

    /// The digits of a number.
    pub fn digits(&self) -> Option<&str> {
        match self {
            Self::Whole(digits) | Self::Real(digits) => Some(digits),
            _ => None,
        }
    }
}
