//! What a comparison varies: a key of the spec and the values it takes.
//!
//! ```text
//! KEY=VALUE,VALUE,... UNIT          fibre.own.filament_diameter=5,7,9,11 um
//! KEY=FROM..TO UNIT step STEP       weave.warp.sett=10..24 /cm step 2
//! KEY=WORD,WORD,...                 weave.pattern=plain,twill-2-2,satin-8
//! ```
//!
//! A unit behind the last value holds for all that have none of their own; where units differ each value keeps its
//! own in the table. A range holds both ends where the
//! steps meet the last (to a billionth of a step).

use crate::quantity::plain;
use crate::spec::{KeyPath, NewValue, SetError};
use thiserror::Error;

/// The most values one key may take.
pub const MOST_VALUES: usize = 1_000_000;

/// A key and the values it takes.
#[derive(Debug, Clone, PartialEq)]
pub struct Axis {
    /// The key.
    pub key: KeyPath,
    /// The unit all values share; empty for words and bare numbers.
    pub unit: String,
    /// The values, in the order given.
    pub values: Vec<AxisValue>,
}

/// One value of an axis.
#[derive(Debug, Clone, PartialEq)]
pub struct AxisValue {
    /// The number, without its unit; absent for a word.
    pub number: Option<f64>,
    /// As a person wrote it, without the shared unit.
    pub text: String,
    /// What is put into the spec.
    pub put: NewValue,
}

/// Why a `--vary` cannot be read.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum VaryError {
    /// No equals sign.
    #[error("`{text}` has no `=`; write a key and its values, `weave.warp.sett=10,12,14 /cm`")]
    NoEquals {
        /// As written.
        text: String,
    },
    /// Nothing behind the equals sign, or an empty place in the list.
    #[error("`{key}` has an empty value; write its values with commas between, `10,12,14 /cm`")]
    Empty {
        /// The key.
        key: String,
    },
    /// No spec has such a key.
    #[error(transparent)]
    Key(#[from] SetError),
    /// A range that is none.
    #[error("`{text}` is no range; write `10..24 /cm step 2`, or `24..10 /cm step -2` downwards")]
    Range {
        /// As written.
        text: String,
    },
    /// Too many values.
    #[error("`{key}` takes {count} values, more than {MOST_VALUES}")]
    TooMany {
        /// The key.
        key: String,
        /// How many.
        count: usize,
    },
}

impl Axis {
    /// Reads `KEY=VALUES`.
    ///
    /// # Errors
    /// See [`VaryError`].
    pub fn parse(text: &str) -> Result<Self, VaryError> {
        let (key, values) = text.split_once('=').ok_or_else(|| VaryError::NoEquals {
            text: text.to_owned(),
        })?;
        let key = KeyPath::parse(key)?;
        if let Some((from, rest)) = values.split_once("..") {
            return Self::range(key, from, rest).ok_or_else(|| VaryError::Range {
                text: values.trim().to_owned(),
            })?;
        }
        let parts: Vec<&str> = values.split(',').map(str::trim).collect();
        if parts.iter().any(|part| part.is_empty()) {
            return Err(VaryError::Empty { key: key.text });
        }
        let read: Vec<Option<(f64, String)>> =
            parts.iter().map(|part| number_and_unit(part)).collect();
        let last = read.last().cloned().flatten();
        let unit = last.map(|(_, unit)| unit).unwrap_or_default();
        let values = parts.iter().map(|part| AxisValue::new(part, &unit));
        let shared = |one: &Option<(f64, String)>| matches!(one, Some((_, own)) if own.is_empty() || *own == unit);
        if read.iter().all(shared) {
            return Ok(Self {
                key,
                values: values.collect(),
                unit,
            });
        }
        // Several units, or words among numbers: each value is told whole, and is no number of one column.
        let whole = |value: AxisValue| AxisValue {
            number: None,
            text: match &value.put {
                NewValue::Text(text) | NewValue::Number(text) => text.clone(),
            },
            ..value
        };
        Ok(Self {
            key,
            values: values.map(whole).collect(),
            unit: String::new(),
        })
    }

    /// `FROM..TO UNIT step STEP`; `None` where it is no range.
    fn range(key: KeyPath, from: &str, rest: &str) -> Option<Result<Self, VaryError>> {
        let (to, step) = rest.split_once("step")?;
        let (from, own) = number_and_unit(from.trim())?;
        let (to, unit) = number_and_unit(to.trim())?;
        let (step, step_unit) = number_and_unit(step.trim())?;
        let alike = |other: &str| other.is_empty() || other == unit;
        if !(alike(&own) && alike(&step_unit)) || step == 0.0 || (to - from) * step < 0.0 {
            return None;
        }
        let steps = ((to - from) / step + 1e-9).floor();
        let count = if steps < 1e15 {
            steps as usize + 1
        } else {
            usize::MAX
        };
        if count > MOST_VALUES {
            return Some(Err(VaryError::TooMany {
                key: key.text,
                count,
            }));
        }
        let value = |index: usize| {
            let text = plain(from + step * index as f64, 10);
            AxisValue::new(&text, &unit)
        };
        let values = (0..count).map(value).collect();
        Some(Ok(Self { key, unit, values }))
    }
}

impl AxisValue {
    fn new(text: &str, unit: &str) -> Self {
        let Some((number, own)) = number_and_unit(text) else {
            return Self {
                number: None,
                text: text.to_owned(),
                put: NewValue::Text(text.to_owned()),
            };
        };
        let digits = text[..text.len() - own.len()].trim().to_owned();
        let unit_here = if own.is_empty() { unit } else { &own };
        Self {
            number: Some(number),
            text: digits.clone(),
            put: if unit_here.is_empty() {
                NewValue::Number(digits)
            } else {
                NewValue::Text(format!("{digits} {unit_here}"))
            },
        }
    }
}

/// The number at the start of a text and what follows it; `None` where it starts with none, or where letters
/// follow without a blank and are no unit but part of a word (`2x2`).
fn number_and_unit(text: &str) -> Option<(f64, String)> {
    let end = text
        .char_indices()
        .find(|(at, c)| {
            let exponent = matches!(c, 'e' | 'E')
                && text[at + 1..]
                    .starts_with(|next: char| next.is_ascii_digit() || matches!(next, '-' | '+'));
            !(c.is_ascii_digit() || matches!(c, '.' | '-' | '+') || exponent)
        })
        .map_or(text.len(), |(at, _)| at);
    let number: f64 = text[..end].parse().ok()?;
    number
        .is_finite()
        .then(|| (number, text[end..].trim().to_owned()))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(axis: &Axis) -> Vec<&str> {
        axis.values
            .iter()
            .map(|value| value.text.as_str())
            .collect()
    }

    #[test]
    fn lists_ranges_and_words_are_read() {
        let list = Axis::parse("fibre.own.filament_diameter=5,7,9,11 um").unwrap();
        assert_eq!(
            (list.unit.as_str(), texts(&list)),
            ("um", vec!["5", "7", "9", "11"])
        );
        assert_eq!(list.values[0].put, NewValue::Text("5 um".into()));
        let range = Axis::parse("weave.warp.sett=10..24 /cm step 2").unwrap();
        assert_eq!(
            texts(&range),
            ["10", "12", "14", "16", "18", "20", "22", "24"]
        );
        assert_eq!(range.values[7].put, NewValue::Text("24 /cm".into()));
        let tenths = Axis::parse("yarn.y.packing = 0.5..0.8 step 0.1").unwrap();
        assert_eq!(texts(&tenths), ["0.5", "0.6", "0.7", "0.8"]);
        assert_eq!(tenths.values[1].put, NewValue::Number("0.6".into()));
        let down = Axis::parse("weave.warp.sett=12..8 /cm step -2").unwrap();
        assert_eq!(texts(&down), ["12", "10", "8"]);
        let words = Axis::parse("weave.pattern=plain,twill-2-2,twill 3/1 z").unwrap();
        assert_eq!(texts(&words), ["plain", "twill-2-2", "twill 3/1 z"]);
        assert!(words.values.iter().all(|value| value.number.is_none()));
        let mixed = Axis::parse("weave.warp.tension=1 cN/tex,40 cN").unwrap();
        assert_eq!(texts(&mixed), ["1 cN/tex", "40 cN"]);
        assert_eq!((mixed.unit.as_str(), mixed.values[1].number), ("", None));
        let twist = Axis::parse("yarn.y.twist=20,40 /m Z").unwrap();
        assert_eq!(twist.values[0].put, NewValue::Text("20 /m Z".into()));
    }

    #[test]
    fn what_is_wrong_is_said() {
        let message = |text: &str| Axis::parse(text).unwrap_err().to_string();
        assert!(message("weave.warp.sett").contains("has no `=`"));
        assert!(
            message("weave.warp.set=1 /cm").contains("the nearest is `weave.warp.sett`"),
            "{}",
            message("weave.warp.set=1 /cm")
        );
        assert!(message("loom.warp.sett=1 /cm").contains("starts with none of"));
        assert!(message("weave.warp.sett=10..24 /cm").contains("is no range"));
        assert!(message("weave.warp.sett=10..24 /cm step -1").contains("is no range"));
        assert!(message("weave.warp.sett=10,,12 /cm").contains("empty value"));
        assert!(message("weave.warp.sett=1..9 /cm step 1e-9").contains("more than"));
    }
}
