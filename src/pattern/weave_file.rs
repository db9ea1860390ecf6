//! The file of one weave: TOML with `name` (the file's own, without `.toml`), `title`, `sentence`, and `rows` as drawn.
//!
//! ```toml
//! name = "twill-2-1"
//! title = "2/1 twill"
//! sentence = "What it is and where it is used."
//! rows = [".##", "##.", "#.#"]
//! ```
//! All four keys are needed and no others are read. Built-in files and a user's own have the same form.

use super::{Pattern, PatternError, Weave};
use serde::Deserialize;
use std::path::{Path, PathBuf};
use thiserror::Error;
use toml::Spanned;

/// What is wrong with one file of a folder of weaves, or with the folder.
#[derive(Debug, Error)]
pub enum WeaveFileError {
    /// The folder or file cannot be read.
    #[error("{}: {source}", .path.display())]
    Io {
        /// The folder or file.
        path: PathBuf,
        /// What the system says.
        source: std::io::Error,
    },
    /// Far more bytes than the largest pattern takes.
    #[error("{}: {bytes} bytes are more than a weave takes; at most {MAX_BYTES}", .path.display())]
    TooLarge {
        /// The file.
        path: PathBuf,
        /// Its size.
        bytes: u64,
    },
    /// Not the four keys in TOML.
    #[error("{}: {}", .path.display(), .source.to_string().trim_end())]
    Toml {
        /// The file.
        path: PathBuf,
        /// Place and reason, the line quoted.
        source: Box<toml::de::Error>,
    },
    /// The rows are no pattern.
    #[error("{}: line {line}: {source}", .path.display())]
    Rows {
        /// The file.
        path: PathBuf,
        /// The line of the row.
        line: usize,
        /// The place among the rows, and the reason.
        source: PatternError,
    },
    /// The name in the file is not the file's own, or no name at all.
    #[error("{}: the name is `{name}`; it has to be that of the file, `{expected}`, with a letter in it", .path.display())]
    Name {
        /// The file.
        path: PathBuf,
        /// The name it gives.
        name: String,
        /// The file's own.
        expected: String,
    },
    /// The name already means a weave.
    #[error("{}: `{name}` already names a weave ({taken_by}); choose another name", .path.display())]
    Clash {
        /// The file.
        path: PathBuf,
        /// The name.
        name: String,
        /// What has the name.
        taken_by: String,
    },
}

/// Everything that is wrong with a folder of weaves.
#[derive(Debug, Error)]
#[error("{}", .problems.iter().map(ToString::to_string).collect::<Vec<_>>().join("\n"))]
pub struct FolderErrors {
    /// The problems, file by file in the order of their names; never empty.
    pub problems: Vec<WeaveFileError>,
}

/// 200 x 200 marks with quotes, and room for comments.
pub(super) const MAX_BYTES: u64 = 1 << 20;

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Raw {
    name: String,
    title: String,
    sentence: String,
    rows: Spanned<Vec<Spanned<String>>>,
}

/// Reads the text of the file at `path`, whose name without `.toml` is `stem`.
pub(super) fn read(text: &str, path: &Path, stem: &str) -> Result<Weave, WeaveFileError> {
    let path = path.to_path_buf();
    let raw: Raw = match toml::from_str(text) {
        Ok(raw) => raw,
        Err(source) => {
            let source = Box::new(source);
            return Err(WeaveFileError::Toml { path, source });
        }
    };
    if raw.name != stem || !raw.name.contains(char::is_alphabetic) {
        return Err(WeaveFileError::Name {
            path,
            name: raw.name,
            expected: stem.to_owned(),
        });
    }
    let rows: Vec<&str> = raw
        .rows
        .get_ref()
        .iter()
        .map(|row| row.get_ref().as_str())
        .collect();
    match Pattern::from_rows(&rows) {
        Ok(pattern) => Ok(Weave {
            name: raw.name,
            title: raw.title,
            sentence: raw.sentence,
            pattern,
        }),
        Err(source) => {
            let (row, _) = source.place();
            let row = raw.rows.get_ref().get(row - 1);
            let start = row.map_or_else(|| raw.rows.span().start, |row| row.span().start);
            let above = text.bytes().take(start);
            let line = 1 + above.filter(|byte| *byte == b'\n').count();
            Err(WeaveFileError::Rows { path, line, source })
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn says(text: &str) -> String {
        read(text, Path::new("own/my-twill.toml"), "my-twill")
            .unwrap_err()
            .to_string()
    }

    const HEAD: &str = "name = \"my-twill\"\ntitle = \"t\"\nsentence = \"s\"\n";

    #[test]
    fn the_four_keys_make_a_weave() {
        let weave = read(
            &format!("{HEAD}rows = [\".#\", \"#.\"]"),
            Path::new("x"),
            "my-twill",
        )
        .unwrap();
        assert_eq!(
            (
                weave.name.as_str(),
                weave.title.as_str(),
                weave.sentence.as_str()
            ),
            ("my-twill", "t", "s")
        );
        assert_eq!(weave.pattern, super::super::plain());
    }

    #[test]
    fn errors_name_file_line_and_reason() {
        let wrong_mark = says(&format!("{HEAD}rows = [\n  \"#.\",\n  \"#x\",\n]"));
        assert_eq!(
            wrong_mark,
            "own/my-twill.toml: line 6: row 2, column 2: 'x' is no mark; use `#` (warp up) or `.` (weft up)"
        );
        assert!(
            says(&format!("{HEAD}rows = []"))
                .starts_with("own/my-twill.toml: line 4: row 1, column 1: no mark here")
        );
        let unknown = says(&format!("{HEAD}rows = [\"#\"]\ncolour = \"red\""));
        assert!(
            unknown.contains("unknown field `colour`") && unknown.contains("line 5"),
            "{unknown}"
        );
        assert!(says(HEAD).contains("missing field `rows`"));
        assert!(says("name = ").contains("own/my-twill.toml"));
        let other_name = says(&format!(
            "{}rows = [\"#\"]",
            HEAD.replace("my-twill", "twill")
        ));
        assert_eq!(
            other_name,
            "own/my-twill.toml: the name is `twill`; it has to be that of the file, `my-twill`, with a letter in it"
        );
        assert!(
            read(
                &format!("{}rows = [\"#\"]", HEAD.replace("my-twill", "7")),
                Path::new("7.toml"),
                "7"
            )
            .is_err()
        );
    }
}
