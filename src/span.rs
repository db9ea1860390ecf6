//! Places in a text file: byte ranges, and the line and column a person counts.
//!
//! The spec keeps a [`Span`] for every value it read, so that a problem or a finding can point at the
//! line that governs it. Lines and columns are counted from 1; a column counts characters, not bytes.

use std::ops::Range;

/// A range of bytes in a [`SourceText`].
pub type Span = Range<usize>;

/// A text and the name under which a person knows it (a path, or `<stdin>`).
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SourceText {
    /// The name shown before line and column.
    pub name: String,
    /// The whole text.
    pub text: String,
}

/// Line and column of a place, both counted from 1.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct LineColumn {
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
}

impl SourceText {
    /// A text under a name.
    pub fn new(name: impl Into<String>, text: impl Into<String>) -> Self {
        Self {
            name: name.into(),
            text: text.into(),
        }
    }

    /// Line and column of a byte offset; an offset past the end is the end.
    pub fn line_column(&self, offset: usize) -> LineColumn {
        let mut end = offset.min(self.text.len());
        while !self.text.is_char_boundary(end) {
            end -= 1;
        }
        let before = &self.text[..end];
        let line_start = before.rfind('\n').map_or(0, |at| at + 1);
        LineColumn {
            line: before.matches('\n').count() + 1,
            column: before[line_start..].chars().count() + 1,
        }
    }

    /// The text of a line (from 1) without its line end; empty where there is no such line.
    pub fn line(&self, line: usize) -> &str {
        self.text.lines().nth(line.saturating_sub(1)).unwrap_or("")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn counts_lines_and_columns_from_one_in_characters() {
        let text = SourceText::new("a", "one\nµ = 2\n");
        assert_eq!(text.line_column(0), LineColumn { line: 1, column: 1 });
        let equals = text.text.find('=').unwrap();
        assert_eq!(
            text.line_column(equals),
            LineColumn { line: 2, column: 3 },
            "the two bytes of µ are one column"
        );
        assert_eq!(text.line(2), "µ = 2");
        assert_eq!(text.line_column(999), LineColumn { line: 3, column: 1 });
        assert_eq!(text.line(7), "");
    }
}
