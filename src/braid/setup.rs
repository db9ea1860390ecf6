//! The braider as it is set up: carriers, interlacing, ends on each carrier; and the pattern it makes.
//!
//! N carriers run in two sets of N/2, one in either direction. Each passes over k of the other set and under k:
//! 1/1 diamond, 2/2 regular, 3/3 hercules. On a maypole braider the carriers of one set are outside at every second horn
//! gear and inside at those between, so which set lies on top is fixed by the place round the mandrel: with the yarns of
//! both sets numbered round it, the first set is on top where (i + j) mod 2k < k. Once round, i and j grow by N/2 each, so
//! the interlacing closes where 2k divides N, and there are N/k gears and as many gaps for axials, one in the middle of each.
//!
//! In the [`Pattern`] the warp is the set that winds in Z (as a right-handed screw), the weft the set in S; `#` is Z on
//! top, seen from outside. Its twill lines run along the mandrel.

use super::error::BraidError;
use crate::pattern::{MAX_REPEAT, Pattern, PatternError};

/// A braider set up.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct Setup {
    carriers: u32,
    over: u32,
    ends_per_carrier: u32,
}

impl Setup {
    /// `carriers` of both sets together, interlacing `over`/`over`, and the ends that lie side by side from one carrier.
    ///
    /// # Errors
    /// Where the carriers make no two sets, or the interlacing does not close.
    pub fn new(carriers: u32, over: u32, ends_per_carrier: u32) -> Result<Self, BraidError> {
        let most = (MAX_REPEAT / 2) as u32;
        if carriers < 4 || !carriers.is_multiple_of(2) {
            return Err(BraidError::Carriers { carriers });
        }
        if over == 0 || over > most {
            return Err(BraidError::Over { over, most });
        }
        if !carriers.is_multiple_of(2 * over) {
            return Err(BraidError::Interlacing { over, carriers });
        }
        if ends_per_carrier == 0 {
            return Err(BraidError::NoEnds);
        }
        Ok(Self {
            carriers,
            over,
            ends_per_carrier,
        })
    }

    /// Carriers of both sets together.
    #[must_use]
    pub fn carriers(&self) -> u32 {
        self.carriers
    }

    /// Crossings that a yarn passes over, and then under.
    #[must_use]
    pub fn over(&self) -> u32 {
        self.over
    }

    /// Ends that lie side by side from one carrier.
    #[must_use]
    pub fn ends_per_carrier(&self) -> u32 {
        self.ends_per_carrier
    }

    /// Gaps round the braid that may hold an axial: one for each time that the sets change sides.
    #[must_use]
    pub fn gaps(&self) -> u32 {
        self.carriers / self.over
    }

    /// What the trade calls the interlacing, where it has a name.
    #[must_use]
    pub fn name(&self) -> Option<&'static str> {
        match self.over {
            1 => Some("diamond"),
            2 => Some("regular"),
            3 => Some("hercules"),
            _ => None,
        }
    }

    /// The interlacing as a pattern: warp the set in Z, weft the set in S.
    ///
    /// # Errors
    /// None for a setup that could be made; the pattern's own check is passed on.
    pub fn pattern(&self) -> Result<Pattern, PatternError> {
        let (over, repeat) = (self.over as usize, 2 * self.over as usize);
        Pattern::from_fn(repeat, repeat, |z, s| (z + s) % repeat < over)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pattern::parse_notation;

    #[test]
    fn only_setups_that_close_are_made() {
        for (carriers, over, closes) in [
            (4, 1, true),
            (4, 2, true),
            (6, 1, true),
            (6, 3, true),
            (6, 2, false),
            (8, 3, false),
            (2, 1, false),
            (5, 1, false),
            (0, 1, false),
            (8, 0, false),
            (400, 101, false),
            (u32::MAX - 1, u32::MAX, false),
        ] {
            assert_eq!(
                Setup::new(carriers, over, 1).is_ok(),
                closes,
                "{carriers} {over}"
            );
        }
        assert_eq!(Setup::new(8, 1, 0), Err(BraidError::NoEnds));
    }

    #[test]
    fn the_patterns_are_plain_and_even_twills() {
        for (over, weave) in [(1, "plain"), (2, "twill 2/2 s"), (3, "twill 3/3 s")] {
            let pattern = Setup::new(4 * over, over, 1).unwrap().pattern().unwrap();
            let weave = parse_notation(weave).unwrap();
            assert!(
                pattern.same_up_to_shift(&weave),
                "{over}: {:?}",
                pattern.rows()
            );
            // By symmetry both sets run alike.
            let woven = pattern.interlacing();
            assert_eq!(
                woven.warp.mean_changes_per_crossing(),
                1.0 / f64::from(over)
            );
            assert_eq!(woven.warp.changes, woven.weft.changes);
        }
    }

    /// Yarn by yarn round the whole braid: after N/2 of each set the pattern meets itself.
    #[test]
    fn the_pattern_closes_round_the_braid() {
        for (carriers, over) in [(8, 1), (16, 2), (24, 3), (16, 4)] {
            let setup = Setup::new(carriers, over, 1).unwrap();
            let (pattern, half) = (setup.pattern().unwrap(), carriers as usize / 2);
            for z in 0..half {
                for s in 0..half {
                    assert_eq!(pattern.warp_up(z, s), pattern.warp_up(z + half, s + half));
                }
            }
            assert_eq!(setup.gaps(), carriers / over);
        }
    }
}
