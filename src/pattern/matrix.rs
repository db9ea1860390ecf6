//! The matrix of a weave, held as its smallest repeat.
//!
//! Reduction: the shifts along one direction that leave the endless pattern unchanged form a subgroup of the integers that
//! holds the given size, so its smallest member divides that size. Each direction has its own subgroup, untouched by
//! cutting the other one down; the smallest upright repeat is therefore found by two independent searches over divisors.

use thiserror::Error;

/// The largest number of ends, and of picks, in a pattern as given.
pub const MAX_REPEAT: usize = 200;

/// A weave pattern: its smallest repeat, `true` where the warp is up. See the [module](super) for the conventions.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Pattern {
    ends: usize,
    picks: usize,
    /// Pick after pick from the first, each from the first end.
    up: Vec<bool>,
}

/// Why rows of marks are no pattern. Rows and columns count from 1, from the top left, as the rows are written.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
pub enum PatternError {
    /// No rows, or a row without marks.
    #[error(
        "row {row}, column 1: no mark here; a pattern needs 1 to {MAX_REPEAT} rows of 1 to {MAX_REPEAT} marks, `#` (warp up) or `.` (weft up)"
    )]
    Empty {
        /// The row without marks.
        row: usize,
    },
    /// A row is longer or shorter than the first.
    #[error(
        "row {row}, column {column}: this row has {found} marks and the first row has {expected}; give every row {expected}"
    )]
    Ragged {
        /// The row that differs.
        row: usize,
        /// The first column where a mark is missing or too many.
        column: usize,
        /// Its marks.
        found: usize,
        /// The marks of the first row.
        expected: usize,
    },
    /// A character that is no mark.
    #[error("row {row}, column {column}: {found:?} is no mark; use `#` (warp up) or `.` (weft up)")]
    Mark {
        /// Its row.
        row: usize,
        /// Its column.
        column: usize,
        /// The character.
        found: char,
    },
    /// More rows or columns than a pattern may have.
    #[error(
        "row {row}, column {column}: the pattern is larger than {MAX_REPEAT} ends x {MAX_REPEAT} picks; give one repeat of at most that size"
    )]
    TooLarge {
        /// The first row too many, or the row that is too long.
        row: usize,
        /// The first column too many, or 1.
        column: usize,
    },
}

impl PatternError {
    /// The row and column of the trouble, from 1, as the rows are written.
    #[must_use]
    pub fn place(&self) -> (usize, usize) {
        match *self {
            Self::Empty { row } => (row, 1),
            Self::Ragged { row, column, .. }
            | Self::Mark { row, column, .. }
            | Self::TooLarge { row, column } => (row, column),
        }
    }
}

impl Pattern {
    /// Reads rows as drawn: the last row is the first pick, `#` is warp up, `.` is weft up.
    ///
    /// # Errors
    /// Rows that are missing, ragged, larger than [`MAX_REPEAT`] or hold another character.
    pub fn from_rows<S: AsRef<str>>(rows: &[S]) -> Result<Self, PatternError> {
        let Some(first) = rows.first() else {
            return Err(PatternError::Empty { row: 1 });
        };
        if rows.len() > MAX_REPEAT {
            return Err(PatternError::TooLarge {
                row: MAX_REPEAT + 1,
                column: 1,
            });
        }
        let expected = first.as_ref().chars().count();
        let mut drawn = Vec::with_capacity(rows.len());
        for (row, text) in (1..).zip(rows) {
            drawn.push(read_row(row, text.as_ref(), expected)?);
        }
        let up: Vec<bool> = drawn.into_iter().rev().flatten().collect();
        Ok(Self::reduced(expected, rows.len(), up))
    }

    /// A pattern from a rule: `warp_up(end, pick)` for every crossing.
    ///
    /// # Errors
    /// No ends or picks, or more than [`MAX_REPEAT`]; the place is given as a drawing from the top would show it.
    pub fn from_fn(
        ends: usize,
        picks: usize,
        mut warp_up: impl FnMut(usize, usize) -> bool,
    ) -> Result<Self, PatternError> {
        if ends == 0 || picks == 0 {
            return Err(PatternError::Empty { row: 1 });
        }
        if ends > MAX_REPEAT {
            return Err(PatternError::TooLarge {
                row: 1,
                column: MAX_REPEAT + 1,
            });
        }
        if picks > MAX_REPEAT {
            return Err(PatternError::TooLarge {
                row: MAX_REPEAT + 1,
                column: 1,
            });
        }
        let crossings = (0..picks).flat_map(|pick| (0..ends).map(move |end| (end, pick)));
        let up = crossings.map(|(end, pick)| warp_up(end, pick)).collect();
        Ok(Self::reduced(ends, picks, up))
    }

    /// The smallest repeat of a full matrix. `up` holds `ends * picks` marks, both at least 1.
    pub(super) fn reduced(ends: usize, picks: usize, up: Vec<bool>) -> Self {
        let at = |end: usize, pick: usize| up[pick * ends + end];
        let few_ends = smallest_period(ends, |period| {
            (0..picks).all(|p| (period..ends).all(|e| at(e, p) == at(e - period, p)))
        });
        let few_picks = smallest_period(picks, |period| {
            (period..picks).all(|p| (0..ends).all(|e| at(e, p) == at(e, p - period)))
        });
        let crossings = (0..few_picks).flat_map(|pick| (0..few_ends).map(move |end| (end, pick)));
        let up = crossings.map(|(end, pick)| at(end, pick)).collect();
        Self {
            ends: few_ends,
            picks: few_picks,
            up,
        }
    }

    /// Ends in the repeat.
    #[must_use]
    pub fn ends(&self) -> usize {
        self.ends
    }

    /// Picks in the repeat.
    #[must_use]
    pub fn picks(&self) -> usize {
        self.picks
    }

    /// Whether the warp lies over the weft where this end meets this pick; both count from 0 and wrap round the repeat.
    #[must_use]
    pub fn warp_up(&self, end: usize, pick: usize) -> bool {
        self.up[(pick % self.picks) * self.ends + end % self.ends]
    }

    /// Whether this end is over, at pick 0, 1, 2 ... of one repeat.
    pub fn warp_sequence(&self, end: usize) -> impl ExactSizeIterator<Item = bool> + '_ {
        (0..self.picks).map(move |pick| self.warp_up(end, pick))
    }

    /// Whether this pick is over, at end 0, 1, 2 ... of one repeat.
    pub fn weft_sequence(&self, pick: usize) -> impl ExactSizeIterator<Item = bool> + '_ {
        (0..self.ends).map(move |end| !self.warp_up(end, pick))
    }

    /// The repeat as drawn: the first string is the last pick.
    #[must_use]
    pub fn rows(&self) -> Vec<String> {
        let mark = |up: &bool| if *up { '#' } else { '.' };
        let picks = self.up.chunks(self.ends).rev();
        picks.map(|row| row.iter().map(mark).collect()).collect()
    }
}

fn read_row(row: usize, text: &str, expected: usize) -> Result<Vec<bool>, PatternError> {
    let found = text.chars().count();
    if found == 0 {
        return Err(PatternError::Empty { row });
    }
    let marks = (1..).zip(text.chars()).map(|(column, mark)| match mark {
        '#' => Ok(true),
        '.' => Ok(false),
        found => Err(PatternError::Mark { row, column, found }),
    });
    let marks = marks.collect::<Result<Vec<_>, _>>()?;
    if found > MAX_REPEAT {
        return Err(PatternError::TooLarge {
            row,
            column: MAX_REPEAT + 1,
        });
    }
    if found != expected {
        return Err(PatternError::Ragged {
            row,
            column: found.min(expected) + 1,
            found,
            expected,
        });
    }
    Ok(marks)
}

/// The smallest divisor of `size` that `repeats`; `size` itself always does.
fn smallest_period(size: usize, repeats: impl Fn(usize) -> bool) -> usize {
    let mut divisors = (1..size).filter(|period| size.is_multiple_of(*period));
    divisors.find(|period| repeats(*period)).unwrap_or(size)
}

#[cfg(test)]
mod tests {
    use super::super::testing::{any_pattern, tiled};
    use super::*;
    use proptest::prelude::*;

    /// ISO 7211-1 (from memory) and the 19th-century textbook rule: origin bottom left.
    #[test]
    fn the_last_drawn_row_is_the_first_pick() {
        let pattern = Pattern::from_rows(&["..#", ".#.", "##."]).unwrap();
        assert!(pattern.warp_up(0, 0) && pattern.warp_up(1, 0) && !pattern.warp_up(2, 0));
        assert!(!pattern.warp_up(0, 2) && pattern.warp_up(2, 2));
        assert!(pattern.warp_up(3, 3), "wraps round the repeat");
        assert_eq!(
            pattern.warp_sequence(1).collect::<Vec<_>>(),
            [true, true, false]
        );
        assert_eq!(
            pattern.weft_sequence(0).collect::<Vec<_>>(),
            [false, false, true]
        );
        assert_eq!(pattern.rows(), ["..#", ".#.", "##."]);
    }

    #[test]
    fn each_direction_is_reduced() {
        let plain = Pattern::from_rows(&["#.#.", ".#.#"]).unwrap();
        assert_eq!(plain.rows(), ["#.", ".#"]);
        let across_only = Pattern::from_rows(&["##..##..", "#.#.#.#.", "#..##..#"]).unwrap();
        assert_eq!((across_only.ends(), across_only.picks()), (4, 3));
        let solid = Pattern::from_rows(&["###", "###"]).unwrap();
        assert_eq!(solid.rows(), ["#"]);
    }

    #[test]
    fn errors_name_the_place_and_what_would_do() {
        let says = |rows: &[&str]| Pattern::from_rows(rows).unwrap_err().to_string();
        assert_eq!(
            says(&[]),
            "row 1, column 1: no mark here; a pattern needs 1 to 200 rows of 1 to 200 marks, `#` (warp up) or `.` (weft up)"
        );
        assert!(says(&["#.", ""]).starts_with("row 2, column 1: no mark"));
        assert_eq!(
            says(&["#.", "#x"]),
            "row 2, column 2: 'x' is no mark; use `#` (warp up) or `.` (weft up)"
        );
        assert_eq!(
            says(&["#.#", "#."]),
            "row 2, column 3: this row has 2 marks and the first row has 3; give every row 3"
        );
        assert!(says(&["#.", "#.#"]).starts_with("row 2, column 3: this row has 3"));
        let wide = "#".repeat(201);
        assert!(says(&[&wide]).starts_with("row 1, column 201: the pattern is larger than 200"));
        assert!(says(&["#"; 201]).starts_with("row 201, column 1: the pattern is larger"));
        assert_eq!(
            says(&["\u{1b}"]).split(';').next(),
            Some("row 1, column 1: '\\u{1b}' is no mark")
        );
        for error in [
            Pattern::from_fn(0, 3, |_, _| true),
            Pattern::from_fn(3, 201, |_, _| true),
        ] {
            assert!(error.is_err());
        }
    }

    proptest! {
        /// Oracle: try every shift, divisor or not, on a pattern laid out twice each way.
        #[test]
        fn the_repeat_is_the_smallest_shift(pattern in any_pattern(9), across in 1..4usize, up in 1..4usize) {
            let (wide, high) = (2 * pattern.ends(), 2 * pattern.picks());
            let least = |limit: usize, same: &dyn Fn(usize) -> bool| (1..=limit).find(|s| same(*s)).unwrap();
            let ends = least(pattern.ends(), &|s| (0..wide).all(|e| (0..high).all(|p| pattern.warp_up(e + s, p) == pattern.warp_up(e, p))));
            let picks = least(pattern.picks(), &|s| (0..wide).all(|e| (0..high).all(|p| pattern.warp_up(e, p + s) == pattern.warp_up(e, p))));
            prop_assert_eq!((pattern.ends(), pattern.picks()), (ends, picks));
            prop_assert_eq!(&Pattern::from_rows(&pattern.rows()).unwrap(), &pattern);
            prop_assert_eq!(&tiled(&pattern, across, up), &pattern);
        }
    }
}
