//! One figure, or one statement, with the place it comes from.
//!
//! The rule: a figure that was read or derived names its source; a figure from memory names none, and may only name where
//! it should be checked. Anything else is refused when the data is read.

use serde::{Deserialize, Serialize};

/// How a figure is known.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum How {
    /// Seen in the source named.
    Read,
    /// Computed from figures seen in the source named.
    Derived,
    /// General knowledge of the field, not looked up.
    Memory,
}

/// A number with its range and its origin. Its unit stands in the name of the field that holds it.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Figure {
    /// The typical value, used unless a spec says otherwise.
    pub value: f64,
    /// Lower end of what the sources say.
    pub min: Option<f64>,
    /// Upper end of what the sources say.
    pub max: Option<f64>,
    /// Length of the test piece in mm (strength, Weibull modulus).
    pub gauge_mm: Option<f64>,
    /// Sources it was read in or derived from, as `id` or `id, place`.
    #[serde(default)]
    pub source: Vec<String>,
    /// Sources in which a figure from memory should be checked; they are not its origin.
    #[serde(default)]
    pub check_in: Vec<String>,
    /// How it is known.
    pub how: How,
    /// What the sources say, and where they disagree.
    pub note: Option<String>,
    /// Present where the range is sourced but the typical value is a judgement inside it.
    pub basis: Option<String>,
}

/// A sentence with its origin.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Statement {
    /// The sentence.
    pub text: String,
    /// As in [`Figure::source`].
    #[serde(default)]
    pub source: Vec<String>,
    /// As in [`Figure::check_in`].
    #[serde(default)]
    pub check_in: Vec<String>,
    /// How it is known.
    pub how: How,
    /// Anything more.
    pub note: Option<String>,
}

impl Figure {
    /// What is wrong with the figure called `key`, one sentence each.
    pub(super) fn problems(&self, key: &str) -> Vec<String> {
        let mut problems = origin_problems(key, self.how, &self.source, &self.check_in);
        for (name, value) in [
            ("value", Some(self.value)),
            ("min", self.min),
            ("max", self.max),
            ("gauge_mm", self.gauge_mm),
        ] {
            if value.is_some_and(|value| !value.is_finite() || value <= 0.0) {
                problems.push(format!("`{key}.{name}` must be a number above zero"));
            }
        }
        if self.min.is_some_and(|min| min > self.value) {
            problems.push(format!("`{key}.value` lies below its `min`"));
        }
        if self.max.is_some_and(|max| max < self.value) {
            problems.push(format!("`{key}.value` lies above its `max`"));
        }
        problems
    }
}

/// Checks the rule of this module on one origin.
pub(super) fn origin_problems(
    key: &str,
    how: How,
    source: &[String],
    check_in: &[String],
) -> Vec<String> {
    let mut problems = Vec::new();
    match how {
        How::Read | How::Derived => {
            if source.is_empty() {
                problems.push(format!("`{key}` was read or derived but names no `source`"));
            }
            if !check_in.is_empty() {
                problems.push(format!(
                    "`{key}`: `check_in` is for figures from memory only"
                ));
            }
        }
        How::Memory => {
            if !source.is_empty() {
                problems.push(format!(
                    "`{key}` is from memory, so it has no `source`; where to check it is `check_in`"
                ));
            }
        }
    }
    problems
}

#[cfg(test)]
mod tests {
    use super::*;

    fn figure(text: &str) -> Figure {
        toml::from_str(text).unwrap()
    }

    #[test]
    fn a_read_figure_without_source_is_refused() {
        let problems = figure("value = 7.0\nhow = 'read'").problems("modulus_gpa");
        assert_eq!(
            problems,
            ["`modulus_gpa` was read or derived but names no `source`"]
        );
        let problems = figure("value = 7.0\nhow = 'derived'").problems("modulus_gpa");
        assert_eq!(problems.len(), 1);
    }

    #[test]
    fn a_figure_from_memory_claims_no_source() {
        assert!(
            figure("value = 7.0\nhow = 'memory'")
                .problems("x")
                .is_empty()
        );
        let checked = figure("value = 7.0\nhow = 'memory'\ncheck_in = ['a']");
        assert!(checked.problems("x").is_empty());
        let claimed = figure("value = 7.0\nhow = 'memory'\nsource = ['a']");
        assert_eq!(claimed.problems("x").len(), 1);
    }

    #[test]
    fn a_value_outside_its_range_is_refused() {
        let low = figure("value = 1.0\nmin = 2.0\nmax = 3.0\nhow = 'memory'");
        assert_eq!(low.problems("x"), ["`x.value` lies below its `min`"]);
        let high = figure("value = 4.0\nmin = 2.0\nmax = 3.0\nhow = 'memory'");
        assert_eq!(high.problems("x"), ["`x.value` lies above its `max`"]);
    }

    #[test]
    fn zero_and_infinity_are_no_figures() {
        for value in ["0.0", "-1.0", "inf", "nan"] {
            let figure = figure(&format!("value = {value}\nhow = 'memory'"));
            assert_eq!(
                figure.problems("x"),
                ["`x.value` must be a number above zero"],
                "{value}"
            );
        }
    }
}
