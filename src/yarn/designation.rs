//! Designations of glass yarns as linear density.
//!
//! ```text
//! ECG 75 1/0      US: glass E, continuous, filament letter G, 75 x 100 yd/lb a strand, 1 strand, not plied
//! EC9 68 1x2      SI (ISO 2078): filament 9 um, 68 tex a strand, strands
//! ```
//!
//! **Tex basis.** A US number is a yield of bare glass: tex = 496 054.7/(yd/lb) (1 lb = 453.592 37 g, 1 yd = 0.9144 m), so
//! G 75 is 66.1 tex; the SI designation of the same yarn says 68 nominal. Both are taken as they say, without size.
//!
//! US folds: strands twisted in the first step / strands plied in the second, 0 for none: 1/2 is 2 strands, 2/2 is 4.
//!
//! The letter is a nominal diameter: BC 4, C 4.5, D 5, DE 6, E 7, G 9, K 13 um (H, 10 or 11 um by list, as 10.5); letters G, K,
//! BC and the SI form were read on supplier pages, the others partly from memory. With the number of filaments given, tex
//! and count fix the diameter instead, which differs from the letter's by up to 7 %.

use thiserror::Error;

/// Grams per pound times 1000 m over metres per yard: tex times yd/lb.
const TEX_YARDS_PER_POUND: f64 = 453.592_37 * 1000.0 / 0.9144;

/// Nominal filament diameters by letter, um.
const LETTERS: [(&str, f64); 8] = [
    ("BC", 4.0),
    ("C", 4.5),
    ("D", 5.0),
    ("DE", 6.0),
    ("E", 7.0),
    ("G", 9.0),
    ("H", 10.5),
    ("K", 13.0),
];

/// What a designation says.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Designation {
    /// Linear density of the whole yarn, tex.
    pub linear_density_tex: f64,
    /// Nominal filament diameter, mm.
    pub filament_diameter_mm: f64,
}

/// Why a text that begins like a designation is none.
#[derive(Debug, Clone, PartialEq, Eq, Error)]
pub enum DesignationError {
    /// An unknown filament letter.
    #[error(
        "`{letter}` is no filament letter; known: BC, C, D, DE, E, G, H, K, or the diameter in um"
    )]
    Letter {
        /// As written.
        letter: String,
    },
    /// No number behind it.
    #[error("the designation has no {what}; write `ECG 75 1/0` or `EC9 68`")]
    Missing {
        /// What is missing.
        what: &'static str,
    },
    /// Folds that are none.
    #[error("`{folds}` are no folds; write `1/0`, `1/2` or `1x2`")]
    Folds {
        /// As written.
        folds: String,
    },
}

impl Designation {
    /// Whether a text begins as a designation does: a glass letter and C for continuous.
    pub fn begins(text: &str) -> bool {
        let mut letters = text.trim_start().chars();
        matches!(letters.next(), Some('E' | 'S')) && letters.next() == Some('C')
    }

    /// Reads a designation.
    ///
    /// # Errors
    /// An unknown letter, a missing number, folds that are none.
    pub fn parse(text: &str) -> Result<Self, DesignationError> {
        let rest = text.trim().get(2..).unwrap_or_default().trim_start();
        let split = rest
            .find(|c: char| !c.is_ascii_alphabetic())
            .unwrap_or(rest.len());
        let (letter, rest) = rest.split_at(split);
        let mut words = rest.split_whitespace();
        let number = |word: Option<&str>, what| {
            word.and_then(|word| word.parse::<f64>().ok())
                .filter(|number| number.is_finite() && *number > 0.0)
                .ok_or(DesignationError::Missing { what })
        };
        let us = !letter.is_empty();
        let diameter_um = if us {
            let known = LETTERS.iter().find(|(known, _)| *known == letter);
            known
                .map(|(_, um)| *um)
                .ok_or_else(|| DesignationError::Letter {
                    letter: letter.to_owned(),
                })?
        } else {
            number(words.next(), "filament diameter or letter")?
        };
        let size = number(words.next(), if us { "number of yards" } else { "tex" })?;
        let strand_tex = if us {
            TEX_YARDS_PER_POUND / (100.0 * size)
        } else {
            size
        };
        Ok(Self {
            linear_density_tex: strand_tex * f64::from(strands(words.next())?),
            filament_diameter_mm: 1e-3 * diameter_um,
        })
    }
}

/// Strands of `1/0`, `1/2`, `2/2`, `1x2`; one where nothing is said.
fn strands(folds: Option<&str>) -> Result<u32, DesignationError> {
    let Some(folds) = folds else {
        return Ok(1);
    };
    let wrong = || DesignationError::Folds {
        folds: folds.to_owned(),
    };
    let (first, second) = folds.split_once(['/', 'x']).ok_or_else(wrong)?;
    let count = |text: &str| {
        text.parse::<u32>()
            .ok()
            .filter(|count| *count <= 100)
            .ok_or_else(wrong)
    };
    let (first, second) = (count(first)?, count(second)?);
    if first == 0 {
        return Err(wrong());
    }
    Ok(first * second.max(1))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Industry table of glass yarns: tex from the US yield, SI nominal tex (rows read or partly read; see the file of
    /// published fabrics for the sources).
    #[test]
    fn tex_follows_from_yield_and_from_the_si_number() {
        for (text, tex, um) in [
            ("ECBC 1500 1/0", 3.31, 4.0),
            ("ECC 1200 1/0", 4.13, 4.5),
            ("ECD 1800 1/0", 2.76, 5.0),
            ("ECD 450 1/2", 22.05, 5.0),
            ("ECDE 75 1/0", 66.14, 6.0),
            ("ECE 225 1/0", 22.05, 7.0),
            ("ECG 75 1/0", 66.14, 9.0),
            ("ECG75 1/0", 66.14, 9.0),
            ("EC G 150 2/2", 132.28, 9.0),
            ("ECG 37 1/2", 268.14, 9.0),
            ("ECH 25 1/0", 198.42, 10.5),
            ("ECK 18 1/0", 275.59, 13.0),
            ("EC9 68", 68.0, 9.0),
            ("EC 9 68 1x2", 136.0, 9.0),
            ("EC5 5.5", 5.5, 5.0),
        ] {
            assert!(Designation::begins(text));
            let read = Designation::parse(text).unwrap();
            assert!(
                (read.linear_density_tex - tex).abs() < 0.006,
                "{text} {read:?}"
            );
            assert!(
                (1e3 * read.filament_diameter_mm - um).abs() < 1e-9,
                "{text}"
            );
        }
    }

    #[test]
    fn what_is_wrong_is_said() {
        let message = |text: &str| Designation::parse(text).unwrap_err().to_string();
        assert!(message("ECX 75 1/0").contains("`X` is no filament letter"));
        assert!(message("ECG").contains("no number of yards"));
        assert!(message("EC9").contains("no tex"));
        assert!(message("ECG 75 1").contains("are no folds"));
        assert!(message("ECG 75 0/2").contains("are no folds"));
        assert!(!Designation::begins("68 tex") && !Designation::begins("e-glass"));
    }
}
