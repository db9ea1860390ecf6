//! The built-in fibres: found by id or by full name, each read when it is first wanted.

use std::collections::HashMap;
use std::sync::OnceLock;

use thiserror::Error;

use super::entries::{COUNT, ENTRIES, Entry};
use super::record::{DataError, Record};

/// The built-in fibres. There is one: [`library`].
pub struct Library {
    records: [OnceLock<Result<Record, DataError>>; COUNT],
}

/// Why a fibre was not found.
#[derive(Debug, Clone, PartialEq, Eq, Error)]
pub enum FindError {
    /// No fibre has that id or name.
    #[error("no fibre is called `{query}`{}", .nearest.map_or_else(String::new, |id| format!("; did you mean `{id}`?")))]
    Unknown {
        /// What was asked for.
        query: String,
        /// The id of the fibre that looks most like it, if one does.
        nearest: Option<&'static str>,
    },
    /// Its file is broken: a bug of this program.
    #[error(transparent)]
    Broken(#[from] DataError),
}

/// The library of built-in fibres.
#[must_use]
pub fn library() -> &'static Library {
    static LIBRARY: Library = Library {
        records: [const { OnceLock::new() }; COUNT],
    };
    &LIBRARY
}

impl Library {
    /// The record with that id or full name; case, blanks and every sign that is no letter or digit aside.
    ///
    /// # Errors
    /// There is none, or its file is broken.
    pub fn find(&'static self, query: &str) -> Result<&'static Record, FindError> {
        let wanted = bare(query);
        match index().get(&wanted).copied() {
            Some(index) => Ok(self.record(index).map_err(Clone::clone)?),
            None => Err(FindError::Unknown {
                query: query.to_owned(),
                nearest: self.nearest(query),
            }),
        }
    }

    /// The id of the fibre whose id or name looks most like `query`, if one looks like it at all.
    #[must_use]
    pub fn nearest(&self, query: &str) -> Option<&'static str> {
        let wanted = bare(query);
        ENTRIES
            .iter()
            .map(|entry| {
                let likeness = [entry.id, entry.name]
                    .map(|name| likeness(&wanted, &bare(name)))
                    .into_iter()
                    .fold(0.0, f64::max);
                (entry.id, likeness)
            })
            .filter(|(_, likeness)| *likeness >= LEAST_LIKENESS)
            .rev() // `max_by` keeps the last of equals; the list should win in its own order
            .max_by(|(_, a), (_, b)| a.total_cmp(b))
            .map(|(id, _)| id)
    }

    /// Every record, by family. Reads what has not been read yet.
    pub fn iter(
        &'static self,
    ) -> impl Iterator<Item = Result<&'static Record, &'static DataError>> {
        (0..COUNT).map(|index| self.record(index))
    }

    /// Every id, by family, without reading any record.
    pub fn ids(&self) -> impl Iterator<Item = &'static str> {
        ENTRIES.iter().map(|entry| entry.id)
    }

    fn record(&'static self, index: usize) -> Result<&'static Record, &'static DataError> {
        let entry = &ENTRIES[index];
        self.records[index]
            .get_or_init(|| Record::parse(entry.id, entry.text))
            .as_ref()
    }
}

/// Place of every record by its bare id and bare name.
fn index() -> &'static HashMap<String, usize> {
    static INDEX: OnceLock<HashMap<String, usize>> = OnceLock::new();
    INDEX.get_or_init(|| {
        let both = |(at, entry): (usize, &Entry)| [(bare(entry.id), at), (bare(entry.name), at)];
        ENTRIES.iter().enumerate().flat_map(both).collect()
    })
}

/// Below this two names are taken to have nothing to do with each other. A third of the letters may differ; chosen by eye.
const LEAST_LIKENESS: f64 = 0.65;

/// From 0 (nothing in common) to 1 (equal). A name that holds the whole query counts as somewhat like it.
fn likeness(query: &str, name: &str) -> f64 {
    let edits = strsim::normalized_damerau_levenshtein(query, name);
    let holds = query.len() >= 3 && name.contains(query);
    if holds { edits.max(0.75) } else { edits }
}

/// Lower-case letters and digits only.
pub(super) fn bare(name: &str) -> String {
    name.chars()
        .filter(|letter| letter.is_alphanumeric())
        .flat_map(char::to_lowercase)
        .collect()
}
