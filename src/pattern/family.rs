//! The regular weave families, built from their numbers.
//!
//! Counts are read along one yarn, over then under: a 3/1 twill has each end over 3 picks and under 1, from the first pick.
//! - plain: warp up where end + pick is even;
//! - twill: every end repeats the first one, a pick higher (Z) or lower (S) than its left neighbour;
//! - warp rib: plain with the counts along the ends, so the warp floats; weft rib: the same with warp and weft exchanged;
//! - hopsack n/n: plain with n ends and n picks working alike;
//! - satin of n ends, step s: warp up but for one stitch on each end, at pick s * end mod n; sateen: the marks exchanged.
//!
//! Satin rule: 1 < s < n - 1 and gcd(s, n) = 1; floats of n - 1. [a silk-weaving treatise; ISO 3572 for the terms, from memory]
//! Counted along the picks instead, a step s becomes its inverse modulo n: for n = 5, 2 becomes 3; for n = 8, 3 stays 3.

use super::{MAX_REPEAT, Pattern};
use thiserror::Error;

/// The way a twill line rises on the face, named by the middle stroke of the letter.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum TwillLine {
    /// Rises to the right.
    Z,
    /// Rises to the left.
    S,
}

/// Why numbers make no weave of a family.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
pub enum FamilyError {
    /// Counts not in pairs, or one of them 0.
    #[error("counts are pairs of at least 1, over then under, such as `2/2` or `2/1/1/2`")]
    Counts,
    /// A repeat of more yarns than a pattern may have.
    #[error("a repeat of {yarns} yarns is too large; at most {MAX_REPEAT} will do")]
    TooLarge {
        /// The yarns asked for.
        yarns: usize,
    },
    /// Too few ends, or 6: no step exists.
    #[error("no regular satin exists on {ends} ends; use {instead}")]
    NoRegularSatin {
        /// The ends asked for.
        ends: usize,
        /// Weaves that would do.
        instead: &'static str,
    },
    /// A step that breaks the satin rule.
    #[error("step {step} makes no satin on {ends} ends; {}", would_do(*.ends, *.step))]
    Step {
        /// The ends asked for.
        ends: usize,
        /// The step asked for.
        step: usize,
    },
}

/// Plain weave, the first end over the first pick.
#[must_use]
pub fn plain() -> Pattern {
    Pattern::reduced(2, 2, vec![true, false, false, true])
}

/// A twill with these counts, over and under in turn; more than one pair makes a compound twill.
///
/// # Errors
/// Counts not in pairs, 0, or a repeat that is too large.
pub fn twill(counts: &[usize], line: TwillLine) -> Result<Pattern, FamilyError> {
    let course = course(counts)?;
    let size = course.len();
    made(size, size, |end, pick| match line {
        TwillLine::Z => course[(pick + size - end) % size],
        TwillLine::S => course[(pick + end) % size],
    })
}

/// A warp rib: two ends that change together, one over where the other is under; the warp floats.
///
/// # Errors
/// As [`twill`].
pub fn warp_rib(counts: &[usize]) -> Result<Pattern, FamilyError> {
    let course = course(counts)?;
    made(2, course.len(), |end, pick| course[pick] == (end == 0))
}

/// A weft rib: the [`warp_rib`] with warp and weft exchanged, so the counts are those of the first pick.
///
/// # Errors
/// As [`twill`].
pub fn weft_rib(counts: &[usize]) -> Result<Pattern, FamilyError> {
    Ok(warp_rib(counts)?.transposed())
}

/// A hopsack: groups of `together` ends and as many picks weave plain.
///
/// # Errors
/// 0, or a repeat that is too large.
pub fn hopsack(together: usize) -> Result<Pattern, FamilyError> {
    let size = course(&[together, together])?.len();
    made(size, size, |end, pick| {
        (end < together) == (pick < together)
    })
}

/// A satin, warp on the face. The step is counted in picks from one end to the next; without one, the smallest.
///
/// # Errors
/// No regular satin on so many ends, a step that breaks the rule, or a repeat that is too large.
pub fn satin(ends: usize, step: Option<usize>) -> Result<Pattern, FamilyError> {
    let step = checked_step(ends, step)?;
    made(ends, ends, |end, pick| pick != end * step % ends)
}

/// A sateen, weft on the face; the step is counted as in [`satin`], from one end to the next.
///
/// # Errors
/// As [`satin`].
pub fn sateen(ends: usize, step: Option<usize>) -> Result<Pattern, FamilyError> {
    let step = checked_step(ends, step)?;
    made(ends, ends, |end, pick| pick == end * step % ends)
}

/// The steps that make a regular satin on so many ends, ascending; both of each pair s, n - s. Empty for 0 to 4 and 6.
#[must_use]
pub fn satin_steps(ends: usize) -> Vec<usize> {
    let inner = 2..ends.saturating_sub(1);
    inner.filter(|step| gcd(*step, ends) == 1).collect()
}

fn checked_step(ends: usize, step: Option<usize>) -> Result<usize, FamilyError> {
    if ends > MAX_REPEAT {
        return Err(FamilyError::TooLarge { yarns: ends });
    }
    let steps = satin_steps(ends);
    let Some(&smallest) = steps.first() else {
        let instead = match ends {
            4 => "`crowfoot-4`, the 4-end broken twill, or `satin 5`",
            6 => "`satin-6-irregular`, `satin 5` or `satin 7`",
            _ => "5 ends or more, such as `satin 5`",
        };
        return Err(FamilyError::NoRegularSatin { ends, instead });
    };
    let step = step.unwrap_or(smallest);
    if steps.contains(&step) {
        Ok(step)
    } else {
        Err(FamilyError::Step { ends, step })
    }
}

/// The steps to offer: all of them, or on many ends the twelve nearest to the one asked for.
fn would_do(ends: usize, asked: usize) -> String {
    const SHOWN: usize = 12;
    let mut steps = satin_steps(ends);
    let all = steps.len();
    steps.sort_by_key(|step| step.abs_diff(asked));
    steps.truncate(SHOWN);
    steps.sort_unstable();
    let shown: Vec<String> = steps.iter().map(usize::to_string).collect();
    let shown = shown.join(", ");
    if all > SHOWN {
        format!("the nearest that would do: {shown}")
    } else {
        format!("these would do: {shown}")
    }
}

/// The course of one yarn, `true` where it is over.
fn course(counts: &[usize]) -> Result<Vec<bool>, FamilyError> {
    let paired = !counts.is_empty() && counts.len().is_multiple_of(2);
    if !paired || counts.contains(&0) {
        return Err(FamilyError::Counts);
    }
    let yarns = counts
        .iter()
        .fold(0, |sum: usize, n| sum.saturating_add(*n));
    if yarns > MAX_REPEAT {
        return Err(FamilyError::TooLarge { yarns });
    }
    let sides = [true, false].into_iter().cycle();
    let floats = counts.iter().zip(sides);
    Ok(floats
        .flat_map(|(n, over)| std::iter::repeat_n(over, *n))
        .collect())
}

fn made(
    ends: usize,
    picks: usize,
    warp_up: impl Fn(usize, usize) -> bool,
) -> Result<Pattern, FamilyError> {
    let yarns = ends.max(picks);
    Pattern::from_fn(ends, picks, warp_up).map_err(|_| FamilyError::TooLarge { yarns })
}

fn gcd(a: usize, b: usize) -> usize {
    if b == 0 { a } else { gcd(b, a % b) }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The table of a silk-weaving treatise: the smaller step of each pair. 6 has none.
    const TREATISE: [(usize, &[usize]); 12] = [
        (5, &[2]),
        (6, &[]),
        (7, &[2, 3]),
        (8, &[3]),
        (9, &[2, 4]),
        (10, &[3]),
        (11, &[2, 3, 4, 5]),
        (12, &[5]),
        (13, &[2, 3, 4, 5, 6]),
        (14, &[3, 5]),
        (15, &[2, 4, 7]),
        (16, &[3, 5, 7]),
    ];

    #[test]
    fn satin_steps_of_the_treatise_and_no_others() {
        for (ends, smaller) in TREATISE {
            for step in 0..=2 * ends {
                let valid =
                    smaller.contains(&step) || (step < ends && smaller.contains(&(ends - step)));
                assert_eq!(
                    satin(ends, Some(step)).is_ok(),
                    valid,
                    "satin {ends} step {step}"
                );
                assert_eq!(
                    sateen(ends, Some(step)).is_ok(),
                    valid,
                    "sateen {ends} step {step}"
                );
            }
            assert_eq!(
                satin(ends, None).ok(),
                smaller.first().and_then(|s| satin(ends, Some(*s)).ok())
            );
        }
        assert!((0..5).all(|ends| satin(ends, None).is_err()));
    }

    /// Each end and each pick of a satin holds one stitch, and the stitch rises by the step from end to end.
    #[test]
    fn the_step_counts_picks_from_one_end_to_the_next() {
        let satin = satin(5, Some(2)).unwrap();
        assert_eq!(satin.rows(), ["##.##", "####.", "#.###", "###.#", ".####"]);
        assert_eq!(
            sateen(5, Some(2)).unwrap().rows(),
            ["..#..", "....#", ".#...", "...#.", "#...."]
        );
    }

    /// A turned satin is the sateen of step n - s: the mirror reverses the step.
    #[test]
    fn sateen_is_satin_turned_over() {
        for (ends, step) in (5..=16).flat_map(|n| satin_steps(n).into_iter().map(move |s| (n, s))) {
            let turned = satin(ends, Some(step)).unwrap().turned_over();
            assert!(turned.same_up_to_shift(&sateen(ends, Some(ends - step)).unwrap()));
            assert!(
                turned
                    .mirrored()
                    .same_up_to_shift(&sateen(ends, Some(step)).unwrap())
            );
        }
    }

    /// ISO 2 letters (from memory): the middle stroke of a Z rises to the right, from a bottom left origin.
    #[test]
    fn a_z_line_rises_to_the_right() {
        let z = twill(&[2, 2], TwillLine::Z).unwrap();
        assert_eq!(z.rows(), ["..##", ".##.", "##..", "#..#"]);
        let s = twill(&[2, 2], TwillLine::S).unwrap();
        assert_eq!(s.rows(), [".##.", "..##", "#..#", "##.."]);
        let start_of_float = |pattern: &Pattern, end: usize| {
            (0..4)
                .find(|p| pattern.warp_up(end, *p) && !pattern.warp_up(end, p + 3))
                .unwrap()
        };
        assert!((0..4).all(|e| start_of_float(&z, e) == e));
        assert!((0..4).all(|e| start_of_float(&s, e) == (4 - e) % 4));
    }

    #[test]
    fn counts_run_along_the_yarn() {
        let three_one = twill(&[3, 1], TwillLine::Z).unwrap();
        assert_eq!(
            three_one.warp_sequence(0).collect::<Vec<_>>(),
            [true, true, true, false]
        );
        let compound = twill(&[2, 1, 1, 2], TwillLine::Z).unwrap();
        assert_eq!(
            compound.warp_sequence(0).collect::<Vec<_>>(),
            [true, true, false, true, false, false]
        );
        assert_eq!(warp_rib(&[2, 2]).unwrap().rows(), [".#", ".#", "#.", "#."]);
        assert_eq!(weft_rib(&[2, 2]).unwrap().rows(), ["##..", "..##"]);
        assert_eq!(hopsack(2).unwrap().rows(), ["..##", "..##", "##..", "##.."]);
        assert_eq!(hopsack(1).unwrap(), plain());
        assert_eq!(twill(&[1, 1], TwillLine::S).unwrap(), plain());
        assert_eq!(twill(&[2, 2, 2, 2], TwillLine::Z).unwrap().ends(), 4);
    }

    #[test]
    fn errors_say_what_would_do() {
        let says = |made: Result<Pattern, FamilyError>| made.unwrap_err().to_string();
        assert_eq!(
            says(satin(8, Some(4))),
            "step 4 makes no satin on 8 ends; these would do: 3, 5"
        );
        assert_eq!(
            says(satin(4, None)),
            "no regular satin exists on 4 ends; use `crowfoot-4`, the 4-end broken twill, or `satin 5`"
        );
        assert!(says(sateen(6, Some(2))).contains("`satin-6-irregular`"));
        assert!(
            says(satin(101, Some(1)))
                .ends_with("the nearest that would do: 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13")
        );
        assert_eq!(
            says(satin(201, None)),
            "a repeat of 201 yarns is too large; at most 200 will do"
        );
        assert!(says(twill(&[usize::MAX, 3], TwillLine::Z)).contains("too large"));
        assert!(says(hopsack(101)).contains("202 yarns"));
        for counts in [&[][..], &[2], &[2, 0], &[2, 1, 1]] {
            assert_eq!(twill(counts, TwillLine::Z), Err(FamilyError::Counts));
            assert_eq!(warp_rib(counts), Err(FamilyError::Counts));
        }
        assert_eq!(hopsack(0), Err(FamilyError::Counts));
    }
}
