//! What is wrong with a spec, where, and what would be right.

use crate::span::Span;

/// One problem of a spec; a person sees it with its line and a mark under the place.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Problem {
    /// What is wrong, in one line without a full stop.
    pub message: String,
    /// The place in the spec's text.
    pub span: Span,
    /// Two or three words under the mark.
    pub label: String,
    /// What would be right; each a line of its own.
    pub help: Vec<String>,
    /// Whether the spec is well written and its yarns only do not fit beside each other: what a study tells as jammed.
    pub crowded: bool,
}

impl Problem {
    /// A problem at a place.
    pub fn at(span: Span, message: impl Into<String>, label: impl Into<String>) -> Self {
        Self {
            message: message.into(),
            span,
            label: label.into(),
            help: Vec::new(),
            crowded: false,
        }
    }

    /// The same problem, told as yarns that do not fit beside each other.
    #[must_use]
    pub fn crowded(mut self) -> Self {
        self.crowded = true;
        self
    }

    /// With a line of what would be right.
    #[must_use]
    pub fn help(mut self, help: impl Into<String>) -> Self {
        self.help.push(help.into());
        self
    }

    /// With the nearest known name, where there is one.
    #[must_use]
    pub fn nearest(self, name: Option<&str>) -> Self {
        match name {
            Some(name) => self.help(format!("the nearest known name is `{name}`")),
            None => self,
        }
    }
}

/// The known name nearest to a misspelt one, where one is near at all.
pub fn nearest_of<'a>(text: &str, known: impl Iterator<Item = &'a str>) -> Option<&'a str> {
    let wanted = text.to_lowercase();
    known
        .map(|name| (strsim::jaro_winkler(&wanted, &name.to_lowercase()), name))
        .filter(|(likeness, _)| *likeness > 0.75)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, name)| name)
}
