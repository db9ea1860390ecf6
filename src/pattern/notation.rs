//! One entry for every way to name a weave in a text.
//!
//! In this order, so that a name always means the file it stands for:
//! 1. a name of the library, loosely: case, blanks, hyphens and underscores aside (`Satin 8`, `hopsack_2-2`);
//! 2. ISO 9354 codes, which are digits, hyphens and blanks only, as no name and no words are (`iso`);
//! 3. words (`twill 2/2 z`); a test holds the library's regular weaves to what the words give.
//!
//! A text that is none of them is answered with the nearest text that is: the same words with the misspelt ones put right,
//! if that reads as a weave, else the nearest name.

use super::iso::{IsoError, looks_like_code, parse_iso_9354};
use super::{FamilyError, Pattern, Weaves, words};
use thiserror::Error;

/// Why a text names no weave.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
pub enum NotationError {
    /// Nothing but blanks.
    #[error(
        "no weave is named; give a name such as `satin-8`, words such as `twill 2/2 z`, or rows"
    )]
    Empty,
    /// Neither a name nor words.
    #[error("`{text}` names no weave{}; {}", word_note(.word.as_deref()), advice(.suggestion.as_deref()))]
    Unknown {
        /// The text, cut short if it is long.
        text: String,
        /// The first word that is none of a weaver's, if there is one.
        word: Option<String>,
        /// The nearest text that does name a weave.
        suggestion: Option<String>,
    },
    /// Something said twice.
    #[error("{what} is said twice; say it once")]
    Twice {
        /// What.
        what: &'static str,
    },
    /// `step` without a number.
    #[error("`step` needs a number after it, such as `satin 8 step 3`")]
    NoStep,
    /// A number that cannot be read.
    #[error("`{word}` is no count; write whole numbers, such as `2/2`")]
    Number {
        /// The word, cut short if it is long.
        word: String,
    },
    /// Words that do not go with the kind of weave, or too few or too many numbers.
    #[error("{family} takes {takes}")]
    OutOfPlace {
        /// The kind of weave.
        family: &'static str,
        /// What it takes, with an example.
        takes: &'static str,
    },
    /// Words in order, numbers that make no such weave.
    #[error(transparent)]
    Family(#[from] FamilyError),
    /// Digits that are no ISO 9354 code.
    #[error(transparent)]
    Iso(#[from] IsoError),
}

impl NotationError {
    pub(super) fn unknown(text: &str, word: Option<&str>) -> Self {
        Self::Unknown {
            text: short(text.trim()),
            word: word.map(short),
            suggestion: None,
        }
    }

    pub(super) fn number(word: &str) -> Self {
        Self::Number { word: short(word) }
    }
}

/// Reads a name of the built-in library or words. [`Weaves::pattern`] does the same with a user's own folder.
///
/// # Errors
/// A text that names no weave, with the nearest that does; or numbers that make none.
pub fn parse_notation(text: &str) -> Result<Pattern, NotationError> {
    Weaves::builtin().pattern(text)
}

impl Weaves {
    /// Reads a name of this library or words.
    ///
    /// # Errors
    /// As [`parse_notation`].
    pub fn pattern(&self, text: &str) -> Result<Pattern, NotationError> {
        if text.trim().is_empty() {
            return Err(NotationError::Empty);
        }
        if let Some(weave) = self.find(text) {
            return Ok(weave.pattern);
        }
        if looks_like_code(text) {
            return Ok(parse_iso_9354(text)?);
        }
        words::parse(text).map_err(|error| match error {
            NotationError::Unknown {
                text: shown, word, ..
            } => NotationError::Unknown {
                text: shown,
                word,
                suggestion: self.suggestion(text),
            },
            other => other,
        })
    }

    fn suggestion(&self, text: &str) -> Option<String> {
        // Longer texts are no misspelt name, and the distances would take long.
        const LONGEST: usize = 80;
        if text.chars().count() > LONGEST {
            return None;
        }
        let corrected: Vec<String> = words::split(text)
            .iter()
            .map(|word| corrected(word))
            .collect();
        let corrected = corrected.join(" ");
        let reads = words::parse(&corrected).is_ok();
        let nearest = || self.nearest(text).map(str::to_owned);
        if reads { Some(corrected) } else { nearest() }
    }
}

/// The word itself, or the nearest of a weaver's words if it is one or two letters off.
fn corrected(word: &str) -> String {
    let is_name_like = word.chars().count() > 2 && word.starts_with(char::is_alphabetic);
    let near = words::VOCABULARY
        .iter()
        .map(|known| (strsim::osa_distance(word, known), *known));
    match near.min() {
        Some((distance, known)) if is_name_like && distance <= 2 => known.to_owned(),
        _ => word.to_owned(),
    }
}

/// A text fit for one line of an error: no control characters, at most 60 characters.
fn short(text: &str) -> String {
    const LONGEST: usize = 60;
    let clean = text
        .chars()
        .map(|c| if c.is_control() { '\u{fffd}' } else { c });
    let mut shown: String = clean.take(LONGEST).collect();
    if text.chars().nth(LONGEST).is_some() {
        shown.push_str("...");
    }
    shown
}

fn word_note(word: Option<&str>) -> String {
    word.map_or_else(String::new, |word| {
        format!(" (`{word}` is no word of weaves)")
    })
}

fn advice(suggestion: Option<&str>) -> String {
    suggestion.map_or_else(
        || "give a name such as `satin-8`, words such as `twill 2/2 z`, or rows".to_owned(),
        |suggestion| format!("did you mean `{suggestion}`?"),
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn names_are_read_loosely() {
        let satin = parse_notation("satin-8").unwrap();
        for text in [
            "satin-8",
            "Satin 8",
            " SATIN_8 ",
            "satin8",
            "satin 8 step 3",
        ] {
            assert_eq!(parse_notation(text).as_ref(), Ok(&satin), "{text}");
        }
        assert_eq!(parse_notation("hopsack_2 2"), parse_notation("hopsack 2/2"));
        assert!(parse_notation("satin-1-2").is_err(), "not satin-12");
    }

    #[test]
    fn errors_carry_the_nearest() {
        let says = |text: &str| parse_notation(text).unwrap_err().to_string();
        assert_eq!(
            says("twil 2/2 z"),
            "`twil 2/2 z` names no weave (`twil` is no word of weaves); did you mean `twill 2/2 z`?"
        );
        assert_eq!(
            says("satine-8"),
            "`satine-8` names no weave (`satine` is no word of weaves); did you mean `satin 8`?"
        );
        assert_eq!(
            says("twill 2/2 right"),
            "`twill 2/2 right` names no weave (`right` is no word of weaves); give a name such as `satin-8`, words such as `twill 2/2 z`, or rows"
        );
        assert_eq!(
            says("crowfoot"),
            "`crowfoot` names no weave (`crowfoot` is no word of weaves); did you mean `crowfoot-4`?"
        );
        assert_eq!(
            says("herringbne-2-2"),
            "`herringbne-2-2` names no weave (`herringbne` is no word of weaves); did you mean `herringbone-2-2`?"
        );
        assert_eq!(
            says("  "),
            "no weave is named; give a name such as `satin-8`, words such as `twill 2/2 z`, or rows"
        );
        assert!(says("satin 4").contains("`crowfoot-4`"));
        assert!(says("7").starts_with("`7` names no weave; give"));
        assert!(says(&"x".repeat(100_000)).len() < 250);
        assert!(!says("a\u{1b}[31m\nb").contains(['\u{1b}', '\n']));
    }

    proptest! {
        #[test]
        fn any_text_is_answered(text in "\\PC*") {
            let _ = parse_notation(&text);
        }

        #[test]
        fn any_heap_of_words_is_answered(words in proptest::collection::vec("(twill|satin|sateen|warp|weft|rib|step|z|s|hopsack|plain|[0-9]{1,21}|/|-|[0-9]/[0-9]|\\PC)", 0..6)) {
            if let Err(error) = parse_notation(&words.join(" ")) {
                prop_assert!(!error.to_string().is_empty());
            }
        }

        /// A suggestion is worth nothing unless it works.
        #[test]
        fn every_suggestion_reads(text in "(twil|satn|hopsak|crepe|crowfot|plane|mock leno|herring|wrap rib)[ -]?([0-9]{1,2}([/-][0-9])?)?") {
            if let Err(NotationError::Unknown { suggestion: Some(suggestion), .. }) = parse_notation(&text) {
                prop_assert!(parse_notation(&suggestion).is_ok(), "{suggestion}");
            }
        }
    }
}
