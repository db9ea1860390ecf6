//! Point paper for the terminal: one repeat, a filled cell where the warp is up.
//!
//! A cell is two characters wide, near to square in most terminal letters. Picks are numbered up the left side and ends along
//! the bottom, from 1; up to nine are all numbered, of more only the first and every fifth, so that numbers never touch.

use super::Pattern;
use std::fmt::Write;

/// The letters of a drawing.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Marks {
    /// Full blocks and middle dots.
    Blocks,
    /// `##` and `. `, for terminals without such letters.
    Ascii,
}

/// Draws one repeat, the last pick on top; every line ends with a line break, none with blanks.
///
/// ```
/// use lissom::pattern::{Marks, draw, plain};
/// assert_eq!(draw(&plain(), Marks::Ascii), "2 . ##\n1 ##.\n   1 2\n");
/// ```
#[must_use]
pub fn draw(pattern: &Pattern, marks: Marks) -> String {
    let (up, down) = match marks {
        Marks::Blocks => ("██", "· "),
        Marks::Ascii => ("##", ". "),
    };
    let (ends, picks) = (pattern.ends(), pattern.picks());
    let margin = picks.to_string().len();
    let mut drawn = String::new();
    for pick in (0..picks).rev() {
        let cells = (0..ends).map(|end| if pattern.warp_up(end, pick) { up } else { down });
        let cells: String = cells.collect();
        let number = numbered(pick + 1, picks);
        push_line(&mut drawn, &format!("{number:>margin$} {cells}"));
    }
    let mut feet = " ".repeat(margin + 1);
    let mut blank = 0;
    for end in 1..=ends {
        blank += 2;
        let number = numbered(end, ends);
        if !number.is_empty() {
            // Right-aligned to its cell; writing to a string cannot fail.
            let _ = write!(feet, "{number:>blank$}");
            blank = 0;
        }
    }
    push_line(&mut drawn, &feet);
    drawn
}

fn push_line(drawn: &mut String, line: &str) {
    drawn.push_str(line.trim_end());
    drawn.push('\n');
}

/// The number itself, or nothing where it would crowd.
fn numbered(number: usize, of: usize) -> String {
    const ALL: usize = 9;
    if of <= ALL || number == 1 || number.is_multiple_of(5) {
        number.to_string()
    } else {
        String::new()
    }
}

#[cfg(test)]
mod tests {
    use super::super::{TwillLine, sateen, twill};
    use super::*;

    #[test]
    fn a_twill_in_both_letters() {
        let z = twill(&[2, 1], TwillLine::Z).unwrap();
        assert_eq!(
            draw(&z, Marks::Ascii),
            "3 . ####\n2 ####.\n1 ##. ##\n   1 2 3\n"
        );
        assert_eq!(
            draw(&z, Marks::Blocks),
            "3 · ████\n2 ████·\n1 ██· ██\n   1 2 3\n"
        );
    }

    #[test]
    fn large_repeats_number_every_fifth() {
        let drawn = draw(&sateen(12, None).unwrap(), Marks::Ascii);
        let lines: Vec<&str> = drawn.lines().collect();
        assert_eq!(lines.len(), 13);
        assert_eq!(lines[12], "    1       5        10");
        assert_eq!(lines[11], " 1 ##. . . . . . . . . . .");
        assert!(lines[10].starts_with("   . "), "pick 2 has no number");
        assert!(lines[2].starts_with("10 . "));
    }

    #[test]
    fn numbers_of_the_largest_repeat_stand_apart_over_their_cells() {
        let large = Pattern::from_fn(200, 200, |e, p| e == p).unwrap();
        let drawn = draw(&large, Marks::Ascii);
        let feet = drawn.lines().last().unwrap();
        assert_eq!(feet.split_whitespace().count(), 41);
        assert!(feet.ends_with("200") && feet.len() == 4 + 400);
        assert!(drawn.lines().all(|line| line == line.trim_end()));
    }
}
