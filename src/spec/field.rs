//! What a key held, with its place; what a number must be; the problems found so far.

use super::problem::Problem;
use crate::span::Span;
use std::cell::RefCell;

/// A value and the place it stood.
#[derive(Debug, Clone, PartialEq)]
pub struct Placed<T> {
    /// The value.
    pub value: T,
    /// Its place in the spec's text.
    pub span: Span,
}

/// What a key held.
#[derive(Debug, Clone, PartialEq)]
pub enum Field<T> {
    /// The key is not there.
    Absent,
    /// It is there, wrong, and reported.
    Wrong,
    /// It is there and right.
    Given(Placed<T>),
}

impl<T> Field<T> {
    /// The value where it is there and right.
    pub fn given(self) -> Option<Placed<T>> {
        match self {
            Self::Given(placed) => Some(placed),
            Self::Absent | Self::Wrong => None,
        }
    }

    /// The bare value where it is there and right.
    pub fn value(self) -> Option<T> {
        self.given().map(|placed| placed.value)
    }

    /// Another value from this one.
    pub fn map<U>(self, change: impl FnOnce(T) -> U) -> Field<U> {
        match self {
            Self::Given(placed) => Field::Given(Placed {
                value: change(placed.value),
                span: placed.span,
            }),
            Self::Absent => Field::Absent,
            Self::Wrong => Field::Wrong,
        }
    }
}

/// Collects the problems of one file.
#[derive(Debug, Default)]
pub struct Problems(RefCell<Vec<Problem>>);

impl Problems {
    /// Keeps a problem.
    pub fn push(&self, problem: Problem) {
        self.0.borrow_mut().push(problem);
    }

    /// Whether none was found so far.
    pub fn is_empty(&self) -> bool {
        self.0.borrow().is_empty()
    }

    /// Whether one stands exactly at one of these places.
    pub fn any_at(&self, places: &[Span]) -> bool {
        self.0
            .borrow()
            .iter()
            .any(|problem| places.contains(&problem.span))
    }

    /// All of them, in the order of the text.
    pub fn into_sorted(self) -> Vec<Problem> {
        let mut all = self.0.into_inner();
        all.sort_by_key(|problem| (problem.span.start, problem.span.end));
        all
    }
}

/// What a number must be.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Bound {
    /// Above zero.
    Positive,
    /// Zero or above.
    NotNegative,
    /// Any finite value.
    Any,
    /// From the first to the second, both included.
    Within(f64, f64),
}

impl Bound {
    /// What is wrong with a value, in words; `None` where nothing is.
    pub fn broken_by(self, value: f64) -> Option<String> {
        match self {
            Self::Positive if value <= 0.0 => Some("must be above zero".into()),
            Self::NotNegative if value < 0.0 => Some("must not be negative".into()),
            Self::Within(low, high) if !(low..=high).contains(&value) => {
                Some(if high == f64::MAX {
                    format!("must be {low} or more")
                } else {
                    format!("must lie between {low} and {high}")
                })
            }
            _ => None,
        }
    }
}
