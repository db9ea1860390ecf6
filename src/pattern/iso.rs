//! ISO 9354 codes of weaves, read and written.
//!
//! ```text
//! 30-07 01-01-03          family 30 (satin) - 7 up, 1 down - 1 thread alike - step 3
//! ```
//!
//! | group | meaning |
//! | --- | --- |
//! | 1 | family: 10 plain, 11 warp rib, 12 weft rib, 13 hopsack, 20 twill, 30 satin |
//! | 2 | numbers of crossings up and down in turn, along one thread |
//! | 3 | how many threads work alike before the pattern moves on |
//! | 4 | by how much the next group is moved; 00: to the other side (plain and what derives from it) |
//!
//! Known from memory, the standard was not at hand. **Unsure**, and chosen so here: hyphens or blanks between the groups
//! (both are read, the form above is written); group 2 is read along the end (for warp-faced and weft-faced weaves it
//! comes to the same); the step is counted in picks from one end to the next, as in a satin's words, so a twill of S line
//! has the step n - 1; the codes of ribs and hopsacks follow the same rule and are not confirmed. Irregular weaves have
//! no code here.

use super::{Pattern, satin_steps};
use thiserror::Error;

/// Why digits are no code of a weave.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
pub enum IsoError {
    /// Too few groups, or an odd number of ups and downs.
    #[error(
        "`{text}` is no ISO 9354 code: it needs family, ups and downs in pairs, threads alike and step, `30-07 01-01-03`"
    )]
    Form {
        /// As written.
        text: String,
    },
    /// A family that is not known here.
    #[error(
        "`{family:02}` is no family of ISO 9354 known here: 10 plain, 11 warp rib, 12 weft rib, 13 hopsack, 20 twill, 30 satin"
    )]
    Family {
        /// The first group.
        family: usize,
    },
    /// Counts that do not make a weave of that family.
    #[error("`{text}`: {family} takes {takes}")]
    Counts {
        /// As written.
        text: String,
        /// The family's word.
        family: &'static str,
        /// What it takes.
        takes: String,
    },
}

/// Digits, hyphens and blanks only, in several groups.
pub(super) fn looks_like_code(text: &str) -> bool {
    let text = text.trim();
    text.starts_with(|c: char| c.is_ascii_digit())
        && text.contains(|c: char| c == '-' || c.is_whitespace())
        && text
            .chars()
            .all(|c| c.is_ascii_digit() || c == '-' || c.is_whitespace())
}

/// Reads a code.
///
/// # Errors
/// Digits that are no code, or counts that make no weave of the family.
pub fn parse_iso_9354(text: &str) -> Result<Pattern, IsoError> {
    let form = || IsoError::Form {
        text: text.trim().to_owned(),
    };
    let groups: Result<Vec<usize>, _> = text
        .split(|c: char| c == '-' || c.is_whitespace())
        .filter(|group| !group.is_empty())
        .map(str::parse)
        .collect();
    let groups = groups.map_err(|_| form())?;
    let [family, counts @ .., alike, step] = groups.as_slice() else {
        return Err(form());
    };
    let (family, alike, step) = (*family, *alike, *step);
    let repeat: usize = counts
        .iter()
        .fold(0, |sum, count| sum.saturating_add(*count));
    if counts.is_empty()
        || counts.len() % 2 == 1
        || counts.contains(&0)
        || alike == 0
        || repeat > 200
    {
        return Err(form());
    }
    let refuse = |family, takes: String| IsoError::Counts {
        text: text.trim().to_owned(),
        family,
        takes,
    };
    let even = counts.windows(2).all(|pair| pair[0] == pair[1]);
    match family {
        10 if counts != [1, 1] || alike != 1 || step != 0 => {
            return Err(refuse("plain", "10-01 01-01-00".into()));
        }
        11 if alike != 1 || step != 0 || counts.len() != 2 || !even => {
            return Err(refuse(
                "a warp rib",
                "equal ups and downs, 1 alike, step 0: 11-02 02-01-00".into(),
            ));
        }
        12 if counts != [1, 1] || step != 0 => {
            return Err(refuse(
                "a weft rib",
                "1 up 1 down and step 0: 12-01 01-02-00".into(),
            ));
        }
        13 if counts.len() != 2 || !even || alike != counts[0] || step != 0 => {
            return Err(refuse(
                "a hopsack",
                "as many alike as up and down, step 0: 13-02 02-02-00".into(),
            ));
        }
        20 if alike != 1 || (step != 1 && step + 1 != repeat) => {
            return Err(refuse(
                "a twill",
                format!("1 alike and a step of 1 or {}", repeat.saturating_sub(1)),
            ));
        }
        30 if alike != 1
            || counts.len() != 2
            || !counts.contains(&1)
            || !satin_steps(repeat).contains(&step) =>
        {
            let steps: Vec<String> = satin_steps(repeat).iter().map(usize::to_string).collect();
            let steps = if steps.is_empty() {
                "no step at all".to_owned()
            } else {
                format!("a step of {}", steps.join(", "))
            };
            return Err(refuse(
                "a satin",
                format!("one stitch, 1 alike, and on {repeat} threads {steps}"),
            ));
        }
        10..=13 | 20 | 30 => {}
        family => return Err(IsoError::Family { family }),
    }
    build(counts, alike, step).ok_or_else(form)
}

/// The pattern of these groups.
fn build(counts: &[usize], alike: usize, step: usize) -> Option<Pattern> {
    let repeat: usize = counts.iter().sum();
    let up: Vec<bool> = counts
        .iter()
        .enumerate()
        .flat_map(|(index, count)| std::iter::repeat_n(index % 2 == 0, *count))
        .collect();
    // Step 0: the next group of threads takes the other side.
    let (ends, move_by) = if step == 0 {
        (2 * alike, counts[0])
    } else {
        (repeat * alike, step)
    };
    Pattern::from_fn(ends, repeat, |end, pick| {
        let moved = end / alike * move_by % repeat;
        up[(pick + repeat - moved) % repeat]
    })
    .ok()
}

impl Pattern {
    /// The ISO 9354 code, where the weave is regular enough to have one here.
    #[must_use]
    pub fn iso_9354(&self) -> Option<String> {
        let (n, ends) = (self.picks(), self.ends());
        let first: Vec<bool> = self.warp_sequence(0).collect();
        let counts = runs(&first)?;
        let candidates: Vec<(usize, usize, usize)> = match counts.as_slice() {
            [1, 1] if ends == 2 => vec![(10, 1, 0)],
            [1, 1] => vec![(12, ends / 2, 0)],
            [a, b] if a == b && ends == 2 => vec![(11, 1, 0)],
            [a, b] if a == b && ends == n && *a > 1 => {
                vec![(13, *a, 0), (20, 1, 1), (20, 1, n - 1)]
            }
            _ if ends == n => {
                let twills = [(20, 1, 1), (20, 1, n - 1)];
                let satins = satin_steps(n).into_iter().map(|step| (30, 1, step));
                twills.into_iter().chain(satins).collect()
            }
            _ => Vec::new(),
        };
        let word = |(family, alike, step): (usize, usize, usize)| {
            let counts: Vec<String> = counts.iter().map(|count| format!("{count:02}")).collect();
            format!("{family:02}-{}-{alike:02}-{step:02}", counts.join(" "))
        };
        candidates
            .into_iter()
            .map(word)
            .find(|code| parse_iso_9354(code).is_ok_and(|pattern| pattern.same_up_to_shift(self)))
    }
}

/// Ups and downs in turn, beginning with the first up behind a down; `None` where the thread never changes sides. Of
/// several turns the one that comes first in order of counts, largest first, so that a weave has one code.
fn runs(up: &[bool]) -> Option<Vec<usize>> {
    let n = up.len();
    let starts: Vec<usize> = (0..n)
        .filter(|&at| up[at] && !up[(at + n - 1) % n])
        .collect();
    let from = |start: usize| {
        let mut counts: Vec<usize> = Vec::new();
        let mut side = false;
        for offset in 0..n {
            let here = up[(start + offset) % n];
            match counts.last_mut() {
                Some(count) if here == side => *count += 1,
                _ => counts.push(1),
            }
            side = here;
        }
        counts
    };
    starts.into_iter().map(from).max()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pattern::{Weaves, parse_notation};

    /// The table of codes known from memory of ISO 9354.
    #[test]
    fn known_codes_are_read_and_written() {
        for (code, words) in [
            ("10-01 01-01-00", "plain"),
            ("13-02 02-02-00", "hopsack 2/2"),
            ("20-02 01-01-01", "twill 2/1 z"),
            ("20-02 02-01-01", "twill 2/2 z"),
            ("20-03 01-01-01", "twill 3/1 z"),
            ("30-04 01-01-02", "satin 5 step 2"),
            ("30-07 01-01-03", "satin 8 step 3"),
        ] {
            let (by_code, by_words) = (
                parse_iso_9354(code).unwrap(),
                parse_notation(words).unwrap(),
            );
            assert!(
                by_code.same_up_to_shift(&by_words),
                "{code}: {:?} {:?}",
                by_code.rows(),
                by_words.rows()
            );
            assert_eq!(by_words.iso_9354().as_deref(), Some(code), "{words}");
            assert!(
                parse_notation(code).unwrap().same_up_to_shift(&by_words),
                "through the one entry"
            );
            let blanks = code.replace('-', " ");
            assert!(parse_iso_9354(&blanks).unwrap().same_up_to_shift(&by_words));
        }
    }

    #[test]
    fn every_code_that_is_written_reads_back() {
        let mut coded = 0;
        for weave in Weaves::builtin().iter() {
            if let Some(code) = weave.pattern.iso_9354() {
                coded += 1;
                let back = parse_iso_9354(&code).unwrap();
                assert!(
                    back.same_up_to_shift(&weave.pattern),
                    "{} {code}",
                    weave.name
                );
            } else {
                let irregular = ["crowfoot", "herringbone", "crepe", "mock", "irregular"];
                assert!(
                    irregular.iter().any(|word| weave.name.contains(word)),
                    "{}",
                    weave.name
                );
            }
        }
        assert!(coded >= 20, "{coded}");
        assert_eq!(
            parse_notation("twill 2/1 s").unwrap().iso_9354().as_deref(),
            Some("20-02 01-01-02")
        );
        assert_eq!(
            parse_notation("warp rib 2/2")
                .unwrap()
                .iso_9354()
                .as_deref(),
            Some("11-02 02-01-00")
        );
        assert_eq!(
            parse_notation("weft rib 2/2")
                .unwrap()
                .iso_9354()
                .as_deref(),
            Some("12-01 01-02-00")
        );
    }

    #[test]
    fn what_is_no_code_is_said() {
        let message = |text: &str| parse_iso_9354(text).unwrap_err().to_string();
        assert!(
            message("30-07 01-01-02").contains("a step of 3, 5"),
            "{}",
            message("30-07 01-01-02")
        );
        assert!(message("30-05 01-01-02").contains("no step at all"));
        assert!(message("40-01 01-01-00").contains("no family"));
        assert!(message("10-01").contains("is no ISO 9354 code"));
        assert!(message("20-02 00-01-01").contains("is no ISO 9354 code"));
        assert!(message("99999999999999999999999-1").contains("is no ISO 9354 code"));
        assert!(parse_notation("30-07 01-01-02").is_err());
    }
}
