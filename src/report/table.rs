//! Tables and folded paragraphs in text.

use comfy_table::{CellAlignment, ContentArrangement, LineStyle, Table, TableStyle};

/// A table as lines without blanks at their ends; `right` columns are set to the right.
pub(super) fn table(
    head: impl IntoIterator<Item = impl Into<String>>,
    rows: impl IntoIterator<Item = Vec<String>>,
    right: &[usize],
) -> String {
    let mut table = Table::new();
    table
        .load_style(TableStyle::new().header_separator(LineStyle::new('-', '-', '-', '-')))
        .set_content_arrangement(ContentArrangement::Disabled)
        .set_header(head.into_iter().map(Into::into).collect::<Vec<String>>());
    for row in rows {
        table.add_row(row);
    }
    for index in right {
        if let Some(column) = table.column_mut(*index) {
            column.set_cell_alignment(CellAlignment::Right);
        }
    }
    let lines: Vec<String> = table
        .lines()
        .map(|line| line.trim_end().to_owned())
        .collect();
    lines.join("\n")
}

/// Width to which paragraphs are folded.
const WIDTH: usize = 100;

/// A paragraph folded at blanks only, its first and its further lines indented.
pub(super) fn folded(text: &str, first: &str, further: &str) -> String {
    let options = textwrap::Options::new(WIDTH)
        .initial_indent(first)
        .subsequent_indent(further)
        .word_separator(textwrap::WordSeparator::AsciiSpace)
        .word_splitter(textwrap::WordSplitter::NoHyphenation);
    textwrap::fill(text, options)
}
