//! The same cloth seen otherwise: turned over, in a mirror, with warp and weft exchanged, or counted from another corner.
//!
//! None of these changes the size of the smallest repeat (exchanging swaps its sides), so nothing is reduced again.

use super::Pattern;

impl Pattern {
    /// Warp and weft exchanged: end i becomes pick i and pick j becomes end j. What was warp over weft is then weft over
    /// warp, so the marks change as well as their places: floats on the face stay on the face.
    #[must_use]
    pub fn transposed(&self) -> Self {
        self.remade(self.picks(), self.ends(), |end, pick| {
            !self.warp_up(pick, end)
        })
    }

    /// Left and right exchanged, as in a mirror beside the cloth: a Z twill becomes an S twill.
    #[must_use]
    pub fn mirrored(&self) -> Self {
        let last = self.ends() - 1;
        self.remade(self.ends(), self.picks(), |end, pick| {
            self.warp_up(last - end, pick)
        })
    }

    /// Seen from the back, the cloth turned over about the warp: left and right change, and so does every mark. A twill
    /// line therefore leans the other way.
    #[must_use]
    pub fn turned_over(&self) -> Self {
        let last = self.ends() - 1;
        self.remade(self.ends(), self.picks(), |end, pick| {
            !self.warp_up(last - end, pick)
        })
    }

    /// Whether the two are the same endless cloth, only counted from another end and pick.
    #[must_use]
    pub fn same_up_to_shift(&self, other: &Self) -> bool {
        if (self.ends(), self.picks()) != (other.ends(), other.picks()) {
            return false;
        }
        let (ends, picks) = (self.ends(), self.picks());
        let agrees = |across: usize, up: usize| {
            (0..picks).all(|pick| {
                (0..ends)
                    .all(|end| self.warp_up(end, pick) == other.warp_up(end + across, pick + up))
            })
        };
        (0..picks).any(|up| (0..ends).any(|across| agrees(across, up)))
    }

    fn remade(
        &self,
        ends: usize,
        picks: usize,
        warp_up: impl Fn(usize, usize) -> bool + Copy,
    ) -> Self {
        let up = (0..picks).flat_map(|pick| (0..ends).map(move |end| warp_up(end, pick)));
        Self::reduced(ends, picks, up.collect())
    }
}

#[cfg(test)]
mod tests {
    use super::super::testing::any_pattern;
    use super::super::{TwillLine, twill};
    use super::*;
    use proptest::prelude::*;

    /// Definition, by hand on an uneven pattern.
    #[test]
    fn each_turn_by_hand() {
        let pattern = Pattern::from_rows(&["..#", "##."]).unwrap();
        assert_eq!(pattern.mirrored().rows(), ["#..", ".##"]);
        assert_eq!(pattern.turned_over().rows(), [".##", "#.."]);
        // End 0 is over at pick 0 only; as pick 0 it lies over end 0 only, so the warp is up at end 1.
        assert_eq!(
            pattern.transposed().rows(),
            ["#.", ".#", ".#"].map(|row| {
                row.chars()
                    .map(|c| if c == '#' { '.' } else { '#' })
                    .rev()
                    .collect::<String>()
            })
        );
    }

    #[test]
    fn a_twill_leans_the_other_way_from_the_back() {
        let z = twill(&[3, 1], TwillLine::Z).unwrap();
        let s_weft_faced = twill(&[1, 3], TwillLine::S).unwrap();
        assert!(z.turned_over().same_up_to_shift(&s_weft_faced));
        assert!(
            z.mirrored()
                .same_up_to_shift(&twill(&[3, 1], TwillLine::S).unwrap())
        );
        assert!(!z.same_up_to_shift(&z.mirrored()));
    }

    proptest! {
        #[test]
        fn twice_is_once_too_many(pattern in any_pattern(8)) {
            prop_assert_eq!(&pattern.transposed().transposed(), &pattern);
            prop_assert_eq!(&pattern.mirrored().mirrored(), &pattern);
            prop_assert_eq!(&pattern.turned_over().turned_over(), &pattern);
        }

        /// Exchanging the systems exchanges their sequences, yarn by yarn.
        #[test]
        fn exchanging_keeps_every_yarns_course(pattern in any_pattern(8)) {
            let exchanged = pattern.transposed();
            for end in 0..pattern.ends() {
                prop_assert!(pattern.warp_sequence(end).eq(exchanged.weft_sequence(end)));
            }
            for pick in 0..pattern.picks() {
                prop_assert!(pattern.weft_sequence(pick).eq(exchanged.warp_sequence(pick)));
            }
        }

        #[test]
        fn any_shift_is_the_same_cloth(pattern in any_pattern(7), across in 0..7usize, up in 0..7usize) {
            let shifted = Pattern::from_fn(pattern.ends(), pattern.picks(), |e, p| pattern.warp_up(e + across, p + up)).unwrap();
            prop_assert!(pattern.same_up_to_shift(&shifted));
        }
    }
}
