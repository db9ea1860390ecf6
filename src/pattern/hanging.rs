//! Whether a pattern is one cloth or falls apart into layers.
//!
//! Call a set of yarns a *lid* if every yarn in it lies over every crossing yarn outside it: it can be lifted off. A cloth
//! hangs together when it has no lid but nothing and everything. In terms of the graph with an arrow from the upper to the lower
//! yarn at each crossing, that is strong connection; every end meets every pick of the repeat, and all copies of a yarn are
//! alike, so the smallest repeat decides for the endless cloth. [Clapham, Bull. London Math. Soc. 12 (1980) 161-164; from memory]
//!
//! A lid of r ends (of m) and s picks (of n) is over at r(n - s) + s(m - r) crossings with the rest and at r s inside itself,
//! so the overs of its yarns add up to r n + s m - r s, and no set of that size can have more. Hence a lid of that size
//! exists exactly when the r ends and the s picks that are most often over reach this sum: sorting and (m + 1)(n + 1) sums decide.
//!
//! Layers: unions and intersections of lids are lids. Two yarns of a system with equally many overs, one in a lid of greatest
//! sum and one not, can change places, so each can be lifted off alone: they lie loose side by side. Lids that split no such
//! tie form a chain (of two that do not hold each other, one would have an end over a pick, the other that pick over that
//! end); the layers are the differences along the chain.
//! Cost: about 40 000 sums at 200 x 200. Exact; nothing is left out.

use super::Pattern;
use std::fmt;

/// One layer of a pattern that falls apart: either a cloth of its own or loose yarns of one system lying side by side.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Layer {
    /// Its ends, from 0, ascending.
    pub ends: Vec<usize>,
    /// Its picks, from 0, ascending.
    pub picks: Vec<usize>,
}

impl Layer {
    /// Whether the layer hangs together by itself; if not, it is loose yarns of one system.
    #[must_use]
    pub fn is_cloth(&self) -> bool {
        !self.ends.is_empty() && !self.picks.is_empty()
    }
}

/// The layers into which a pattern falls, at least two, the topmost first.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Layers {
    layers: Vec<Layer>,
}

impl Layers {
    /// The layers from the top down.
    #[must_use]
    pub fn from_top(&self) -> &[Layer] {
        &self.layers
    }
}

impl fmt::Display for Layers {
    /// `from the top: end 1 (loose); ends 2, 3 and picks 1, 2 (a cloth of their own)`; long lists are cut short.
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (place, layer) in self.layers.iter().enumerate() {
            out.write_str(if place == 0 { "from the top: " } else { "; " })?;
            let parts = [list("end", &layer.ends), list("pick", &layer.picks)];
            let parts: Vec<String> = parts.into_iter().flatten().collect();
            let kind = if layer.is_cloth() {
                "a cloth of their own"
            } else {
                "loose"
            };
            write!(out, "{} ({kind})", parts.join(" and "))?;
        }
        Ok(())
    }
}

fn list(noun: &str, numbers: &[usize]) -> Option<String> {
    const SHOWN: usize = 8;
    let shown: Vec<String> = numbers
        .iter()
        .take(SHOWN)
        .map(|n| (n + 1).to_string())
        .collect();
    let rest = numbers.len().saturating_sub(SHOWN);
    match (shown.len(), rest) {
        (0, _) => None,
        (1, _) => Some(format!("{noun} {}", shown.join(", "))),
        (_, 0) => Some(format!("{noun}s {}", shown.join(", "))),
        (_, rest) => Some(format!("{noun}s {} and {rest} more", shown.join(", "))),
    }
}

impl Pattern {
    /// The layers of a pattern that is no one cloth; `None` when it hangs together.
    #[must_use]
    pub fn falls_apart(&self) -> Option<Layers> {
        let ends = Ranking::new((0..self.ends()).map(|e| self.warp_sequence(e)));
        let picks = Ranking::new((0..self.picks()).map(|p| self.weft_sequence(p)));
        let (all_ends, all_picks) = (self.ends(), self.picks());
        let mut layers = Vec::new();
        let mut above = (0, 0);
        for r in 0..=all_ends {
            for s in 0..=all_picks {
                let most = r * all_picks + s * all_ends - r * s;
                let is_lid = ends.sums[r] + picks.sums[s] == most;
                if is_lid && (r, s) != (0, 0) && !ends.splits_tie(r) && !picks.splits_tie(s) {
                    layers.push(Layer {
                        ends: ends.yarns(above.0, r),
                        picks: picks.yarns(above.1, s),
                    });
                    above = (r, s);
                }
            }
        }
        // Everything together is always the last lid of the chain.
        (layers.len() > 1).then_some(Layers { layers })
    }
}

/// The yarns of a system, those most often over first.
struct Ranking {
    order: Vec<usize>,
    overs: Vec<usize>,
    /// `sums[r]`: overs of the first r together.
    sums: Vec<usize>,
}

impl Ranking {
    fn new(sequences: impl Iterator<Item = impl Iterator<Item = bool>>) -> Self {
        let counts = sequences.map(|yarn| yarn.filter(|over| *over).count());
        let mut ranked: Vec<(usize, usize)> = counts.enumerate().collect();
        ranked.sort_by_key(|&(yarn, overs)| (std::cmp::Reverse(overs), yarn));
        let (order, overs): (Vec<usize>, Vec<usize>) = ranked.into_iter().unzip();
        let running = overs.iter().scan(0, |sum, count| {
            *sum += count;
            Some(*sum)
        });
        let sums = std::iter::once(0).chain(running).collect();
        Self { order, overs, sums }
    }

    /// Whether the first r would leave out a yarn that is over as often as one of them.
    fn splits_tie(&self, r: usize) -> bool {
        r > 0 && r < self.overs.len() && self.overs[r - 1] == self.overs[r]
    }

    fn yarns(&self, from: usize, to: usize) -> Vec<usize> {
        let mut yarns: Vec<usize> = self.order[from..to].to_vec();
        yarns.sort_unstable();
        yarns
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    /// The definition itself: every subset of yarns that lies wholly over the rest, as bit masks (ends, picks).
    fn lids_by_trial(
        ends: usize,
        picks: usize,
        up: impl Fn(usize, usize) -> bool,
    ) -> Vec<(u32, u32)> {
        let over: Vec<u32> = (0..ends)
            .map(|e| {
                (0..picks)
                    .filter(|p| up(e, *p))
                    .fold(0, |mask, p| mask | 1 << p)
            })
            .collect();
        let (all_ends, all_picks) = ((1u32 << ends) - 1, (1u32 << picks) - 1);
        let mut lids = Vec::new();
        for e_set in 0..=all_ends {
            // An end inside must be over each pick outside; an end outside must be under each pick inside.
            let (mut must, mut may) = (0, all_picks);
            for (e, over) in over.iter().enumerate() {
                if e_set >> e & 1 == 1 {
                    must |= all_picks & !over;
                } else {
                    may &= !over;
                }
            }
            for p_set in 0..=all_picks {
                let trivial = (e_set, p_set) == (0, 0) || (e_set, p_set) == (all_ends, all_picks);
                if !trivial && must & !p_set == 0 && p_set & !may == 0 {
                    lids.push((e_set, p_set));
                }
            }
        }
        lids
    }

    fn mask(yarns: &[usize]) -> u32 {
        yarns.iter().fold(0, |mask, yarn| mask | 1 << yarn)
    }

    /// Compares the layers with every lid found by trial on the smallest repeat.
    fn agrees_with_trial(pattern: &Pattern) -> Result<(), String> {
        let lids = lids_by_trial(pattern.ends(), pattern.picks(), |e, p| {
            pattern.warp_up(e, p)
        });
        let Some(layers) = pattern.falls_apart() else {
            return if lids.is_empty() {
                Ok(())
            } else {
                Err(format!("{:?} has lids {lids:?}", pattern.rows()))
            };
        };
        let layers = layers.from_top();
        let mut chain = vec![(0, 0)];
        for layer in layers {
            let (e, p) = chain[chain.len() - 1];
            chain.push((e | mask(&layer.ends), p | mask(&layer.picks)));
        }
        let everything = chain.pop().unwrap();
        if everything != ((1 << pattern.ends()) - 1, (1 << pattern.picks()) - 1) {
            return Err(format!("{:?}: layers miss yarns", pattern.rows()));
        }
        if let Some(wrong) = chain.iter().skip(1).find(|lid| !lids.contains(lid)) {
            return Err(format!("{:?}: {wrong:?} is no lid", pattern.rows()));
        }
        // Any other lid may only cut through a layer of loose yarns.
        chain.push(everything);
        for lid in lids {
            let inside = |part: (u32, u32), whole: (u32, u32)| {
                part.0 & !whole.0 == 0 && part.1 & !whole.1 == 0
            };
            let cut = chain
                .windows(2)
                .zip(layers)
                .find(|(pair, _)| inside(pair[0], lid) && !inside(pair[1], lid));
            let (pair, layer) = cut.unwrap();
            if !inside(lid, pair[1]) || (layer.is_cloth() && lid != pair[0]) {
                return Err(format!(
                    "{:?}: {lid:?} cuts the layers {layers:?}",
                    pattern.rows()
                ));
            }
        }
        Ok(())
    }

    /// All 65 536 patterns of 4 x 4, reduced or not, against trial of all 256 subsets.
    #[test]
    fn every_pattern_of_four_by_four() {
        let mut one_cloth = 0;
        for bits in 0..1u32 << 16 {
            let up = |e: usize, p: usize| bits >> (4 * p + e) & 1 == 1;
            let pattern = Pattern::from_fn(4, 4, up).unwrap();
            let hangs = lids_by_trial(4, 4, up).is_empty();
            assert_eq!(
                pattern.falls_apart().is_none(),
                hangs,
                "{:?}",
                pattern.rows()
            );
            agrees_with_trial(&pattern).unwrap();
            one_cloth += usize::from(hangs);
        }
        assert!(one_cloth > 0 && one_cloth < 1 << 16);
    }

    /// Found by hand: one loose end on top, and two plain cloths lying on each other.
    #[test]
    fn layers_are_named_from_the_top() {
        let loose = Pattern::from_rows(&["#.#", "##."])
            .unwrap()
            .falls_apart()
            .unwrap();
        assert_eq!(
            loose.to_string(),
            "from the top: end 1 (loose); ends 2, 3 and picks 1, 2 (a cloth of their own)"
        );
        // Ends 1, 3 with picks 1, 3 weave plain on top; ends 2, 4 with picks 2, 4 weave plain below.
        let double = Pattern::from_rows(&["#.##", "..#.", "###.", "#..."]).unwrap();
        let plain = |yarns: [usize; 2]| Layer {
            ends: yarns.to_vec(),
            picks: yarns.to_vec(),
        };
        assert_eq!(
            double.falls_apart().unwrap().from_top(),
            [plain([0, 2]), plain([1, 3])]
        );
    }

    #[test]
    fn a_repeat_of_one_yarn_never_hangs_together() {
        let solid = Pattern::from_rows(&["#"]).unwrap().falls_apart().unwrap();
        assert_eq!(
            solid.to_string(),
            "from the top: end 1 (loose); pick 1 (loose)"
        );
        let column = Pattern::from_rows(&["#", "."])
            .unwrap()
            .falls_apart()
            .unwrap();
        assert_eq!(
            column.to_string(),
            "from the top: pick 1 (loose); end 1 (loose); pick 2 (loose)"
        );
    }

    #[test]
    fn long_lists_are_cut_short() {
        let loose = Pattern::from_fn(20, 3, |e, p| e != 0 || p == 0)
            .unwrap()
            .falls_apart()
            .unwrap();
        assert_eq!(
            loose.to_string(),
            "from the top: ends 2, 3, 4, 5, 6, 7, 8, 9 and 11 more (loose); picks 2, 3 (loose); end 1 (loose); pick 1 (loose)"
        );
    }

    /// The criterion as a graph: from the first end, every yarn is reached going down and going up.
    fn is_strongly_connected(pattern: &Pattern) -> bool {
        let (ends, yarns) = (pattern.ends(), pattern.ends() + pattern.picks());
        let over = |a: usize, b: usize| match (a < ends, b < ends) {
            (true, false) => pattern.warp_up(a, b - ends),
            (false, true) => !pattern.warp_up(b, a - ends),
            _ => false,
        };
        let reaches_all = |arrow: &dyn Fn(usize, usize) -> bool| {
            let (mut seen, mut waiting) = (vec![false; yarns], vec![0]);
            seen[0] = true;
            while let Some(from) = waiting.pop() {
                for (to, seen) in seen.iter_mut().enumerate() {
                    if !*seen && arrow(from, to) {
                        *seen = true;
                        waiting.push(to);
                    }
                }
            }
            seen.into_iter().all(|seen| seen)
        };
        reaches_all(&over) && reaches_all(&|a, b| over(b, a))
    }

    proptest! {
        #[test]
        fn random_patterns_against_trial(up in proptest::collection::vec(any::<bool>(), 36), ends in 5..7usize, picks in 5..7usize) {
            let pattern = Pattern::from_fn(ends, picks, |e, p| up[p * ends + e]).unwrap();
            prop_assert_eq!(agrees_with_trial(&pattern), Ok(()));
        }

        /// Random patterns mostly hang together; these are two random layers laid on each other.
        #[test]
        fn stacked_layers_against_trial(up in proptest::collection::vec(any::<bool>(), 36), top_ends in 0..64u32, top_picks in 0..64u32) {
            let pattern = Pattern::from_fn(6, 6, |e, p| match (top_ends >> e & 1, top_picks >> p & 1) {
                (1, 0) => true,
                (0, 1) => false,
                _ => up[p * 6 + e],
            }).unwrap();
            prop_assert_eq!(agrees_with_trial(&pattern), Ok(()));
        }

        /// Larger than trial can go: up to 40 x 40, a random number of loose or stacked yarns, few or many marks.
        #[test]
        fn large_patterns_against_the_graph(seed in proptest::collection::vec(0..100u32, 1600), ends in 1..41usize, picks in 1..41usize, share in 0..101u32, top in 0..4usize) {
            let pattern = Pattern::from_fn(ends, picks, |e, p| match (e < top, p < top) {
                (true, false) => true,
                (false, true) => false,
                _ => seed[p * 40 + e] < share,
            }).unwrap();
            prop_assert_eq!(pattern.falls_apart().is_none(), is_strongly_connected(&pattern));
        }
    }
}
