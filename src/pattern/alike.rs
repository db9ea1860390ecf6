//! Which ends, picks and crossings of a pattern are alike: carried onto each other by a shift that leaves the cloth
//! unchanged.
//!
//! A satin of eight has eight such shifts, one for each end: all its ends are alike, all its picks, and its 64
//! crossings are of 8 kinds. What is worked out for the first of each kind holds for all. No shift along a yarn alone
//! leaves a smallest repeat unchanged, so a yarn meets every kind of crossing at most once.

use super::Pattern;

/// The kinds of ends, picks and crossings of a pattern.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Alike {
    /// One end of each kind.
    pub ends: Vec<usize>,
    /// One pick of each kind.
    pub picks: Vec<usize>,
    /// How many kinds of crossings there are.
    pub kinds: usize,
    /// How many of each: the number of shifts.
    pub shifts: usize,
    /// Kind of every crossing, pick after pick.
    kind: Vec<u32>,
    across: usize,
}

impl Alike {
    /// The kind of a crossing of the repeat.
    pub fn kind(&self, end: usize, pick: usize) -> usize {
        self.kind[pick * self.across + end] as usize
    }
}

impl Pattern {
    /// The shifts (ends, picks) that leave the endless cloth unchanged, within one repeat, none first.
    fn own_shifts(&self) -> Vec<(usize, usize)> {
        let (ends, picks) = (self.ends(), self.picks());
        let unchanged = |across: usize, up: usize| {
            (0..picks).all(|pick| {
                (0..ends)
                    .all(|end| self.warp_up(end, pick) == self.warp_up(end + across, pick + up))
            })
        };
        let mut shifts = vec![(0, 0)];
        for across in 1..ends {
            shifts.extend(
                (1..picks)
                    .find(|up| unchanged(across, *up))
                    .map(|up| (across, up)),
            );
        }
        shifts
    }

    /// What of this pattern is alike.
    #[must_use]
    pub fn alike(&self) -> Alike {
        let (ends, picks) = (self.ends(), self.picks());
        let shifts = self.own_shifts();
        let mut kind = vec![u32::MAX; ends * picks];
        let mut kinds = 0;
        for pick in 0..picks {
            for end in 0..ends {
                if kind[pick * ends + end] != u32::MAX {
                    continue;
                }
                for (across, up) in &shifts {
                    kind[(pick + up) % picks * ends + (end + across) % ends] = kinds;
                }
                kinds += 1;
            }
        }
        let firsts = |count: usize, by: fn(&(usize, usize)) -> usize| {
            let mut seen = vec![false; count];
            let mut firsts = Vec::new();
            for yarn in 0..count {
                if !seen[yarn] {
                    firsts.push(yarn);
                    for shift in &shifts {
                        seen[(yarn + by(shift)) % count] = true;
                    }
                }
            }
            firsts
        };
        Alike {
            ends: firsts(ends, |shift| shift.0),
            picks: firsts(picks, |shift| shift.1),
            kinds: kinds as usize,
            shifts: shifts.len(),
            kind,
            across: ends,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::parse_notation;
    use super::super::testing::any_pattern;
    use proptest::prelude::*;

    #[test]
    fn a_satin_has_one_end_and_one_pick() {
        for (name, ends, picks, kinds) in [
            ("plain", 1, 1, 2),
            ("satin 8 step 3", 1, 1, 8),
            ("twill 2/2", 1, 1, 4),
            ("twill 3/1", 1, 1, 4),
            ("warp rib 2/2", 1, 2, 4),
            ("hopsack 2/2", 2, 2, 8),
        ] {
            let alike = parse_notation(name).unwrap().alike();
            assert_eq!(
                (alike.ends.len(), alike.picks.len(), alike.kinds),
                (ends, picks, kinds),
                "{name}"
            );
        }
    }

    proptest! {
        /// Crossings of one kind look alike, as many of each, and a yarn meets none twice.
        #[test]
        fn kinds_look_alike(pattern in any_pattern(7)) {
            let alike = pattern.alike();
            let mut up = vec![None; alike.kinds];
            let mut count = vec![0; alike.kinds];
            for pick in 0..pattern.picks() {
                let mut met = vec![false; alike.kinds];
                for end in 0..pattern.ends() {
                    let kind = alike.kind(end, pick);
                    prop_assert!(!met[kind]);
                    met[kind] = true;
                    count[kind] += 1;
                    let here = pattern.warp_up(end, pick);
                    prop_assert_eq!(*up[kind].get_or_insert(here), here);
                }
            }
            prop_assert!(count.iter().all(|c| *c == alike.shifts));
            prop_assert_eq!(alike.kinds * alike.shifts, pattern.ends() * pattern.picks());
        }
    }
}
