//! A weave in a weaver's words: `plain`, `twill 2/1/1/2 z`, `satin 8 step 3`, `hopsack 3/3`, `warp rib 2/2`.
//!
//! Words part at blanks, hyphens, underscores and commas, and stand in any order, so `2/2 twill, z`, `8-end satin` and
//! `twill-5-1` are read too; numbers part at `/` as well. Case is set aside. A twill without `z` or `s` is Z.
//!
//! | family | takes | also called |
//! |---|---|---|
//! | plain | nothing, or 1/1 | tabby |
//! | twill | counts over and under along an end, in pairs; z or s | |
//! | satin (warp on the face), sateen (weft on the face) | the number of ends; `step` and a number | |
//! | hopsack | one count, or twice the same | basket, matt |
//! | warp rib, weft rib | counts over and under along an end (a pick), in pairs | |
//!
//! Uneven hopsacks are refused: the trade reads 2/1 in two ways, so rows have to say it.

use super::NotationError;
use super::{Pattern, TwillLine, hopsack, plain, sateen, satin, twill, warp_rib, weft_rib};

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Family {
    Plain,
    Twill,
    Satin,
    Sateen,
    Hopsack,
    WarpRib,
    WeftRib,
}

impl Family {
    /// The family, and how to ask for it.
    fn example(self) -> (&'static str, &'static str) {
        match self {
            Self::Plain => ("plain", "no counts: `plain`"),
            Self::Twill => ("twill", "counts and a line: `twill 2/2 z`"),
            Self::Satin => ("satin", "its ends and a step: `satin 8 step 3`"),
            Self::Sateen => ("sateen", "its ends and a step: `sateen 8 step 5`"),
            Self::Hopsack => ("hopsack", "one count twice: `hopsack 2/2`"),
            Self::WarpRib => ("warp rib", "counts: `warp rib 2/2`"),
            Self::WeftRib => ("weft rib", "counts: `weft rib 2/2`"),
        }
    }
}

/// Every word that is read, to find the nearest to a misspelt one.
pub(super) const VOCABULARY: [&str; 14] = [
    "plain", "tabby", "twill", "satin", "sateen", "hopsack", "basket", "matt", "warp", "weft",
    "rib", "step", "end", "ends",
];

#[derive(Default)]
struct Said {
    family: Option<Family>,
    counts: Vec<usize>,
    line: Option<TwillLine>,
    step: Option<usize>,
}

/// The words of a text, in lower case.
pub(super) fn split(text: &str) -> Vec<String> {
    let parts = text.split(|c: char| c.is_whitespace() || matches!(c, '-' | '_' | ','));
    parts
        .filter(|part| !part.is_empty())
        .map(str::to_lowercase)
        .collect()
}

/// Reads a weave in words. A word that is not known is answered with [`NotationError::Unknown`] without a suggestion.
pub(super) fn parse(text: &str) -> Result<Pattern, NotationError> {
    let said = listen(text)?;
    let Some(family) = said.family else {
        return Err(NotationError::unknown(text, None));
    };
    let out_of_place = || {
        let (family, takes) = family.example();
        NotationError::OutOfPlace { family, takes }
    };
    let is_satin = matches!(family, Family::Satin | Family::Sateen);
    let has_stray_line = said.line.is_some() && family != Family::Twill;
    if has_stray_line || (said.step.is_some() && !is_satin) {
        return Err(out_of_place());
    }
    let counts = said.counts.as_slice();
    let pattern = match (family, counts) {
        (Family::Plain, [] | [1, 1]) => Ok(plain()),
        (Family::Satin, [ends]) => satin(*ends, said.step),
        (Family::Sateen, [ends]) => sateen(*ends, said.step),
        (Family::Hopsack, [together]) => hopsack(*together),
        (Family::Hopsack, [ends, picks]) if ends == picks => hopsack(*ends),
        (Family::Twill, [_, ..]) => twill(counts, said.line.unwrap_or(TwillLine::Z)),
        (Family::WarpRib, [_, ..]) => warp_rib(counts),
        (Family::WeftRib, [_, ..]) => weft_rib(counts),
        _ => return Err(out_of_place()),
    };
    Ok(pattern?)
}

fn listen(text: &str) -> Result<Said, NotationError> {
    let mut said = Said::default();
    let words = split(text);
    let mut words = words.iter().map(String::as_str).peekable();
    while let Some(word) = words.next() {
        let family = match word {
            "plain" | "tabby" => Family::Plain,
            "twill" => Family::Twill,
            "satin" => Family::Satin,
            "sateen" => Family::Sateen,
            "hopsack" | "basket" | "matt" => Family::Hopsack,
            "warp" if words.next_if_eq(&"rib").is_some() => Family::WarpRib,
            "weft" if words.next_if_eq(&"rib").is_some() => Family::WeftRib,
            "z" => {
                set(&mut said.line, TwillLine::Z, "z or s")?;
                continue;
            }
            "s" => {
                set(&mut said.line, TwillLine::S, "z or s")?;
                continue;
            }
            "step" => {
                let number = words.next().and_then(|word| word.parse().ok());
                set(&mut said.step, number.ok_or(NotationError::NoStep)?, "step")?;
                continue;
            }
            "end" | "ends" => continue,
            word if word.starts_with(|c: char| c.is_ascii_digit()) => {
                said.counts.extend(counts(word)?);
                continue;
            }
            word => return Err(NotationError::unknown(text, Some(word))),
        };
        set(&mut said.family, family, "the kind of weave")?;
    }
    Ok(said)
}

fn set<T>(place: &mut Option<T>, value: T, what: &'static str) -> Result<(), NotationError> {
    match place.replace(value) {
        None => Ok(()),
        Some(_) => Err(NotationError::Twice { what }),
    }
}

fn counts(word: &str) -> Result<Vec<usize>, NotationError> {
    let numbers = word.split('/').map(str::parse);
    let numbers: Result<Vec<usize>, _> = numbers.collect();
    numbers.map_err(|_| NotationError::number(word))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn rows(text: &str) -> Vec<String> {
        parse(text)
            .unwrap_or_else(|error| panic!("{text}: {error}"))
            .rows()
    }

    #[test]
    fn words_of_every_family() {
        let same = |text: &str, pattern: Result<Pattern, super::super::FamilyError>| {
            assert_eq!(rows(text), pattern.unwrap().rows(), "{text}");
        };
        for text in ["plain", "Tabby", "plain 1/1"] {
            same(text, Ok(plain()));
        }
        for text in [
            "twill 2/2 z",
            "2/2 TWILL, z",
            "twill-2-2-Z",
            "twill 2/2",
            "z twill 2 2",
        ] {
            same(text, twill(&[2, 2], TwillLine::Z));
        }
        same("twill 3/1 s", twill(&[3, 1], TwillLine::S));
        same("twill 2/1/1/2 z", twill(&[2, 1, 1, 2], TwillLine::Z));
        for text in [
            "satin 8 step 3",
            "8-end satin step 3",
            "satin-8-step-3",
            "satin 8",
        ] {
            same(text, satin(8, Some(3)));
        }
        same("sateen 8 step 5", sateen(8, Some(5)));
        same("satin 5", satin(5, Some(2)));
        same("hopsack 3/3", hopsack(3));
        same("basket 2", hopsack(2));
        same("warp rib 2/2", warp_rib(&[2, 2]));
        same("weft-rib-3-1", weft_rib(&[3, 1]));
    }

    #[test]
    fn errors_of_words() {
        let says = |text: &str| parse(text).unwrap_err().to_string();
        assert_eq!(
            says("twill"),
            "twill takes counts and a line: `twill 2/2 z`"
        );
        assert_eq!(
            says("satin 8 z"),
            "satin takes its ends and a step: `satin 8 step 3`"
        );
        assert_eq!(
            says("hopsack 2/1"),
            "hopsack takes one count twice: `hopsack 2/2`"
        );
        assert_eq!(says("plain 2/2"), "plain takes no counts: `plain`");
        assert_eq!(
            says("twill 2/2 step 2"),
            "twill takes counts and a line: `twill 2/2 z`"
        );
        assert_eq!(
            says("twill satin 8"),
            "the kind of weave is said twice; say it once"
        );
        assert_eq!(says("twill 2/2 z s"), "z or s is said twice; say it once");
        assert_eq!(
            says("satin 8 step"),
            "`step` needs a number after it, such as `satin 8 step 3`"
        );
        assert_eq!(
            says("twill 2//2"),
            "`2//2` is no count; write whole numbers, such as `2/2`"
        );
        assert_eq!(
            says("twill 2/-2"),
            "`2/` is no count; write whole numbers, such as `2/2`"
        );
        assert!(says("twill 99999999999999999999/2").contains("is no count"));
        assert_eq!(
            says("twill 2"),
            "counts are pairs of at least 1, over then under, such as `2/2` or `2/1/1/2`"
        );
        assert!(says("satin 8 step 4").contains("these would do: 3, 5"));
    }
}
