//! How the yarns of both systems interlace: floats, changes from over to under, isolated crossings.
//!
//! A float of length n is n crossings in a row on the same side of the cloth, counted round the repeat; plain weave thus has
//! floats of 1 only. A change is a place where the yarn goes from over to under or back; each float ends in one. A yarn that
//! never changes has one endless float and no change, and it lies loose on the cloth (see [`Layers`](super::Layers)).
//! Warp and weft have their own numbers of changes: in a warp rib the ends change half as often as the picks.

use super::Pattern;

/// The side of the cloth on which a yarn lies at a crossing.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Side {
    /// Over the yarn it crosses.
    Face,
    /// Under it.
    Back,
}

/// The length of a float; an endless one is longer than any other.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum FloatLength {
    /// So many crossings in a row.
    Crossings(usize),
    /// The yarn never changes sides.
    Endless,
}

impl FloatLength {
    /// The crossings, unless the float has no end.
    #[must_use]
    pub fn crossings(self) -> Option<usize> {
        match self {
            Self::Crossings(count) => Some(count),
            Self::Endless => None,
        }
    }
}

/// One float of one yarn.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Float {
    /// The pick (for an end) or end (for a pick) at which it starts, from 0; it may run on round the repeat.
    pub start: usize,
    /// Where it lies.
    pub side: Side,
    /// How long it is.
    pub length: FloatLength,
}

/// The course of one yarn through the repeat.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct YarnInterlacing {
    /// Its floats in the order of travel; never empty.
    pub floats: Vec<Float>,
    /// Its changes between over and under in the repeat: 0 or an even number.
    pub changes: usize,
}

impl YarnInterlacing {
    /// Whether some crossing has both its neighbours along the yarn on the other side.
    #[must_use]
    pub fn has_isolated_crossing(&self) -> bool {
        let single = FloatLength::Crossings(1);
        self.floats.iter().any(|float| float.length == single)
    }
}

/// All yarns of one system.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct SystemInterlacing {
    /// One for each yarn of the repeat, in order.
    pub yarns: Vec<YarnInterlacing>,
    /// Changes of all yarns of the system in the repeat.
    pub changes: usize,
    crossings: usize,
}

impl SystemInterlacing {
    /// The longest float on one side; none if no yarn of the system ever lies there.
    #[must_use]
    pub fn longest_float(&self, side: Side) -> Option<FloatLength> {
        let floats = self.yarns.iter().flat_map(|yarn| &yarn.floats);
        let here = floats.filter(|float| float.side == side);
        here.map(|float| float.length).max()
    }

    /// Whether some crossing has both its neighbours along the yarn on the other side.
    #[must_use]
    pub fn has_isolated_crossing(&self) -> bool {
        self.yarns
            .iter()
            .any(YarnInterlacing::has_isolated_crossing)
    }

    /// Changes divided by the crossings of the repeat: 1 in plain weave, 2/n in a regular satin of n ends.
    #[must_use]
    pub fn mean_changes_per_crossing(&self) -> f64 {
        self.changes as f64 / self.crossings as f64
    }
}

/// Floats and changes of both systems of a pattern.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Interlacing {
    /// The ends.
    pub warp: SystemInterlacing,
    /// The picks.
    pub weft: SystemInterlacing,
}

impl Interlacing {
    /// The changes of both systems in the repeat.
    #[must_use]
    pub fn total_changes(&self) -> usize {
        self.warp.changes + self.weft.changes
    }
}

impl Pattern {
    /// Floats and changes of both systems: one walk along every yarn of the repeat. Worked out anew at each call.
    #[must_use]
    pub fn interlacing(&self) -> Interlacing {
        let warp = (0..self.ends()).map(|end| walk(&self.warp_sequence(end).collect::<Vec<_>>()));
        let weft =
            (0..self.picks()).map(|pick| walk(&self.weft_sequence(pick).collect::<Vec<_>>()));
        let system = |yarns: Vec<YarnInterlacing>| SystemInterlacing {
            changes: yarns.iter().map(|yarn| yarn.changes).sum(),
            yarns,
            crossings: self.ends() * self.picks(),
        };
        Interlacing {
            warp: system(warp.collect()),
            weft: system(weft.collect()),
        }
    }
}

/// Cuts one round of a yarn's course, `true` where it is over, into floats.
fn walk(over: &[bool]) -> YarnInterlacing {
    let count = over.len();
    let side = |place: usize| if over[place] { Side::Face } else { Side::Back };
    let changed = |place: &usize| over[*place] != over[(place + count - 1) % count];
    let starts: Vec<usize> = (0..count).filter(changed).collect();
    let Some(first) = starts.first() else {
        let float = Float {
            start: 0,
            side: side(0),
            length: FloatLength::Endless,
        };
        return YarnInterlacing {
            floats: vec![float],
            changes: 0,
        };
    };
    let stops = starts.iter().skip(1).copied().chain([first + count]);
    let floats = starts.iter().zip(stops).map(|(&start, stop)| Float {
        start,
        side: side(start),
        length: FloatLength::Crossings(stop - start),
    });
    YarnInterlacing {
        floats: floats.collect(),
        changes: starts.len(),
    }
}

#[cfg(test)]
mod tests {
    use super::super::testing::any_pattern;
    use super::super::{plain, satin, satin_steps, warp_rib};
    use super::*;
    use FloatLength::{Crossings, Endless};
    use proptest::prelude::*;

    /// Definition of plain weave (ISO 3572, from memory): every crossing differs from its neighbours.
    #[test]
    fn plain_floats_over_one() {
        let found = plain().interlacing();
        for system in [&found.warp, &found.weft] {
            assert_eq!(system.longest_float(Side::Face), Some(Crossings(1)));
            assert_eq!(system.longest_float(Side::Back), Some(Crossings(1)));
            assert!(system.has_isolated_crossing());
            assert_eq!(
                (system.changes, system.mean_changes_per_crossing()),
                (4, 1.0)
            );
        }
        assert_eq!(found.total_changes(), 8);
    }

    /// The satin rule of a silk-weaving treatise: float = n - 1.
    #[test]
    fn a_satin_of_n_floats_over_n_less_1() {
        for (ends, step) in (5..=16).flat_map(|n| satin_steps(n).into_iter().map(move |s| (n, s))) {
            let found = satin(ends, Some(step)).unwrap().interlacing();
            assert_eq!(
                found.warp.longest_float(Side::Face),
                Some(Crossings(ends - 1))
            );
            assert_eq!(found.warp.longest_float(Side::Back), Some(Crossings(1)));
            assert_eq!(found.weft.longest_float(Side::Face), Some(Crossings(1)));
            assert_eq!(
                found.weft.longest_float(Side::Back),
                Some(Crossings(ends - 1))
            );
            assert_eq!(found.warp.changes, 2 * ends);
        }
    }

    #[test]
    fn floats_run_on_round_the_repeat() {
        let pattern = Pattern::from_rows(&["#.", "..", ".#", "#."]).unwrap();
        let found = pattern.interlacing();
        let float = |start, side, length| Float {
            start,
            side,
            length,
        };
        assert_eq!(
            found.warp.yarns[0].floats,
            [
                float(1, Side::Back, Crossings(2)),
                float(3, Side::Face, Crossings(2))
            ]
        );
        assert!(!found.warp.yarns[0].has_isolated_crossing());
        assert!(found.warp.yarns[1].has_isolated_crossing());
        let rib = warp_rib(&[2, 2]).unwrap().interlacing();
        assert!(!rib.warp.has_isolated_crossing() && rib.weft.has_isolated_crossing());
    }

    #[test]
    fn a_yarn_that_never_changes_floats_without_end() {
        let found = Pattern::from_rows(&["#.", "##"]).unwrap().interlacing();
        let loose = &found.warp.yarns[0];
        assert_eq!((loose.changes, loose.floats[0].length), (0, Endless));
        assert_eq!(loose.floats[0].length.crossings(), None);
        assert!(!loose.has_isolated_crossing());
        assert_eq!(found.warp.longest_float(Side::Face), Some(Endless));
        assert_eq!(found.warp.longest_float(Side::Back), Some(Crossings(1)));
        assert_eq!(found.weft.longest_float(Side::Face), Some(Crossings(1)));
        assert_eq!(
            Pattern::from_rows(&["#"])
                .unwrap()
                .interlacing()
                .warp
                .longest_float(Side::Back),
            None
        );
    }

    proptest! {
        /// Floats tile the repeat; their sides alternate; crossing by crossing they say what the matrix says.
        #[test]
        fn floats_cover_every_crossing_once(pattern in any_pattern(9)) {
            let found = pattern.interlacing();
            for (end, yarn) in found.warp.yarns.iter().enumerate() {
                let mut seen = vec![0; pattern.picks()];
                for float in &yarn.floats {
                    for step in 0..float.length.crossings().unwrap_or(pattern.picks()) {
                        seen[(float.start + step) % pattern.picks()] += 1;
                        prop_assert_eq!(pattern.warp_up(end, float.start + step), float.side == Side::Face);
                    }
                }
                prop_assert!(seen.iter().all(|times| *times == 1));
                prop_assert!(yarn.floats.windows(2).all(|pair| pair[0].side != pair[1].side));
                prop_assert_eq!(yarn.changes % 2, 0);
            }
        }
    }
}
