//! What the way adds up to: flaws are fixed on the filament, so survival hangs on the greatest stress each place of its
//! circumference has met.
//!
//! ```text
//! broken so far = N sum over the yarn of length * mean over f of (max over bends of stress at f / s_0)^m / L0
//! ```
//!
//! A guide loads one side of the yarn and nobody knows which, as the yarn turns on its way. Two bounds: at least what breaks if
//! every bend loads the same side (a later, milder one then adds nothing), at most what breaks if every guide loads a fresh side
//! (they add up). In the cloth a yarn no longer turns: its crowns on the loom, at rest and over a tool load the same side, and
//! what the later adds to the earlier is the same in both bounds. A corner of a tool is met by the crowns of one face, half of
//! all, and by no metre but those that lie on it: it adds to the way that made the cloth, not to other corners.
//!
//! Yarn is told apart by where in a crown it comes to lie, the sharpest part first, and by layer; the integral round the
//! filament is taken at 24 places, so counts here agree with those of `flaws` to 1e-3. In one plane: a guide across the
//! yarn's other axis is met by the bounds too.

use super::filament::Bundle;
use super::flaws::Flaws;
use crate::bend::{Bend, Meets, Stage, Stretch};
use crate::quadrature::places;
use crate::yarn::{Laid, Yarn};
use std::f64::consts::PI;

/// What one bend adds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Step {
    /// Broken filaments per metre at this bend alone.
    pub alone_per_m: f64,
    /// New ones, given all bends before, at least.
    pub new_least_per_m: f64,
    /// New ones, at most.
    pub new_most_per_m: f64,
}

/// Parts of the integral round the filament.
const PARTS: usize = 3;

/// Stress over s_0 met so far, at every place round every layer's filament.
type Met = Vec<f64>;

/// What one length of yarn has met.
#[derive(Clone)]
struct Length {
    /// Share of the yarn.
    share: f64,
    /// On all of the way so far, every bend on the same side; and in the cloth alone.
    way: Met,
    cloth: Met,
    /// What both have broken so far, per metre.
    broken: (f64, f64),
}

/// What every bend of a yarn's way adds, in its order. All bends are of this yarn.
pub fn history(flaws: &Flaws, bends: &[&Bend], yarn: &Yarn, laid: &Laid) -> Vec<Step> {
    let round: Vec<(f64, f64)> = places(0.0, PI, PARTS)
        .map(|(f, weight)| {
            let at = if flaws.in_volume {
                2.0 * f.sin().powi(2)
            } else {
                1.0
            };
            (f.cos(), weight * at / PI)
        })
        .collect();
    let bounds = bounds(bends);
    let mut lengths: Vec<Length> = bounds
        .windows(2)
        .map(|pair| Length {
            share: pair[1] - pair[0],
            way: Met::new(),
            cloth: Met::new(),
            broken: (0.0, 0.0),
        })
        .collect();
    let shares = |stretch: &Stretch, bend: &Bend| -> Vec<f64> {
        let layers = Bundle::new(stretch, bend, yarn, laid).layers(laid);
        layers.iter().map(|(share, _)| *share).collect()
    };
    let layer_shares = bends
        .first()
        .and_then(|bend| Some(shares(bend.profile.first()?, bend)))
        .unwrap_or_default();
    let per_m = 1e3 * f64::from(yarn.count.filaments) / flaws.gauge_mm;
    let broken = |met: &Met| -> f64 {
        met.chunks(round.len())
            .zip(&layer_shares)
            .map(|(layer, share)| {
                let mean: f64 = layer
                    .iter()
                    .zip(&round)
                    .map(|(stress, (_, weight))| weight * stress.powf(flaws.modulus))
                    .sum();
                share * per_m * mean
            })
            .sum()
    };
    bends
        .iter()
        .map(|bend| {
            let sorted = sharpest_first(bend);
            let in_cloth = matches!(bend.meets, Meets::TimesPerMetre(_));
            let on_tool = bend.stage == Stage::Draping;
            let part = if on_tool { 0.5 } else { 1.0 };
            let mut step = Step {
                alone_per_m: 0.0,
                new_least_per_m: 0.0,
                new_most_per_m: 0.0,
            };
            let mut begun = 0.0;
            let mut last: Option<(usize, Met, f64)> = None;
            for length in &mut lengths {
                let middle = begun + 0.5 * length.share;
                begun += length.share;
                let Some(index) = stretch_at(&sorted, middle) else {
                    continue;
                };
                // Neighbouring lengths mostly lie on one stretch.
                let (loaded, alone) = match last {
                    Some((at, ref met, alone)) if at == index => (met.clone(), alone),
                    _ => {
                        let met = loaded(flaws, &bend.profile[index], bend, yarn, laid, &round);
                        let alone = broken(&met);
                        (met, alone)
                    }
                };
                let before = length.broken;
                step.alone_per_m += part * length.share * alone;
                if on_tool {
                    let more = |met: &Met, before: f64| {
                        let mut met = met.clone();
                        raise(&mut met, &loaded);
                        part * length.share * (broken(&met) - before)
                    };
                    step.new_least_per_m += more(&length.way, before.0);
                    step.new_most_per_m += more(&length.cloth, before.1);
                    last = Some((index, loaded, alone));
                    continue;
                }
                if raise(&mut length.way, &loaded) {
                    length.broken.0 = broken(&length.way);
                }
                step.new_least_per_m += length.share * (length.broken.0 - before.0);
                if in_cloth {
                    if raise(&mut length.cloth, &loaded) {
                        length.broken.1 = broken(&length.cloth);
                    }
                    step.new_most_per_m += length.share * (length.broken.1 - before.1);
                } else {
                    step.new_most_per_m += length.share * alone;
                }
                last = Some((index, loaded, alone));
            }
            step
        })
        .collect()
}

/// A bend's stretches, the sharpest first: index, and the share of the yarn up to its end.
fn sharpest_first(bend: &Bend) -> Vec<(usize, f64)> {
    let radius = |stretch: &Stretch| stretch.lies_on_mm.unwrap_or(f64::INFINITY);
    let mut order: Vec<usize> = (0..bend.profile.len()).collect();
    order.sort_by(|a, b| radius(&bend.profile[*a]).total_cmp(&radius(&bend.profile[*b])));
    match bend.meets {
        // All yarn meets the sharpest.
        Meets::All => order
            .first()
            .map(|index| (*index, 1.0))
            .into_iter()
            .collect(),
        Meets::TimesPerMetre(times) => {
            // Told apart over all crowns, of either face.
            let times = if bend.stage == Stage::Draping {
                2.0 * times
            } else {
                times
            };
            let mut until = 0.0;
            order
                .into_iter()
                .map(|index| {
                    until += 1e-3 * times * bend.profile[index].length_mm;
                    (index, until)
                })
                .collect()
        }
    }
}

fn stretch_at(sorted: &[(usize, f64)], share: f64) -> Option<usize> {
    sorted
        .iter()
        .find(|(_, until)| share <= *until)
        .map(|(index, _)| *index)
}

/// Where the yarn must be told apart: every end of a stretch of every bend, from 0 to the last.
fn bounds(bends: &[&Bend]) -> Vec<f64> {
    let mut bounds = vec![0.0, 1.0];
    for bend in bends {
        bounds.extend(sharpest_first(bend).into_iter().map(|(_, until)| until));
    }
    bounds.sort_by(f64::total_cmp);
    bounds.dedup_by(|a, b| *a - *b < 1e-9);
    bounds
}

/// Stress over s_0 round every layer's filament, below zero as none.
fn loaded(
    flaws: &Flaws,
    stretch: &Stretch,
    bend: &Bend,
    yarn: &Yarn,
    laid: &Laid,
    round: &[(f64, f64)],
) -> Met {
    let layers = Bundle::new(stretch, bend, yarn, laid).layers(laid);
    let mut met = Vec::with_capacity(layers.len() * round.len());
    for (_, filament) in &layers {
        let (axial, bending) = Flaws::borne(yarn, filament);
        // A bend to the other side loads the other side.
        let bending = if filament.reversed { -bending } else { bending };
        met.extend(
            round
                .iter()
                .map(|(cosine, _)| (axial + bending * cosine).max(0.0) / flaws.characteristic_mpa),
        );
    }
    met
}

/// Raises what was met to what is met now; whether any of it was more.
fn raise(met: &mut Met, by: &Met) -> bool {
    if met.is_empty() {
        met.clone_from(by);
        return true;
    }
    let mut raised = false;
    for (so_far, now) in met.iter_mut().zip(by) {
        raised |= *now > *so_far;
        *so_far = so_far.max(*now);
    }
    raised
}

#[cfg(test)]
mod tests {
    use super::super::tests::{bend, yarn};
    use super::*;
    use crate::judge::broken_per_m;
    use crate::yarn::Vary;

    fn steps(bends: &[Bend]) -> (Vec<Step>, Vec<f64>) {
        let yarn = yarn("e-glass", 400, 9.0);
        let laid = yarn.laid_at(2.0, Vary::default()).unwrap();
        let flaws = Flaws::of(&yarn.fibre).unwrap();
        let way: Vec<&Bend> = bends.iter().collect();
        let alone = bends
            .iter()
            .map(|bend| broken_per_m(&flaws, bend, &yarn, &laid))
            .collect();
        (history(&flaws, &way, &yarn, &laid), alone)
    }

    fn near(a: f64, b: f64) {
        assert!((a - b).abs() <= 2e-3 * b.abs().max(1e-12), "{a} {b}");
    }

    /// Two equal bends that load the same side break h, two that load opposite sides 2 h; which of them nobody knows.
    #[test]
    fn equal_bends_break_once_or_twice() {
        let (steps, alone) = steps(&[bend(1.0, 0.2), bend(1.0, 0.2)]);
        for (step, alone) in steps.iter().zip(&alone) {
            near(step.alone_per_m, *alone);
            near(step.new_most_per_m, *alone);
        }
        near(steps[0].new_least_per_m, alone[0]);
        near(steps[1].new_least_per_m, 0.0);
    }

    /// A milder bend on the same side adds nothing, a sharper one what it breaks more.
    #[test]
    fn only_more_stress_breaks_more() {
        let (steps, alone) = steps(&[bend(1.0, 0.2), bend(3.0, 0.2), bend(0.5, 0.2)]);
        near(steps[1].new_least_per_m, 0.0);
        near(steps[2].new_least_per_m, alone[2] - alone[0]);
        let most: f64 = steps.iter().map(|step| step.new_most_per_m).sum();
        near(most, alone.iter().sum());
    }

    /// A corner that turns a crown to the other side loads the other side: what the crown broke before does not spare it.
    #[test]
    fn a_reversed_bend_loads_the_other_side() {
        let crown = |radius: f64, stage: Stage, times: f64, added: f64| Bend {
            stage,
            meets: Meets::TimesPerMetre(times),
            added_per_mm: added,
            ..bend(radius, 0.2)
        };
        // 1/(3 + e) mm less 1.5/mm: bent to the other side everywhere.
        let (steps, alone) = steps(&[
            crown(3.0, Stage::Rest, 400.0, 0.0),
            crown(3.0, Stage::Draping, 200.0, -1.5),
        ]);
        near(steps[1].new_least_per_m, alone[1]);
        near(steps[1].new_most_per_m, alone[1]);
    }

    /// A corner is met by the crowns of one face: alone it is counted as its bend says, and two corners do not add up.
    #[test]
    fn corners_stand_alone() {
        let crown = |radius: f64, stage: Stage, times: f64| Bend {
            stage,
            meets: Meets::TimesPerMetre(times),
            ..bend(radius, 0.2)
        };
        let (steps, alone) = steps(&[
            crown(1.0, Stage::Rest, 400.0),
            crown(0.5, Stage::Draping, 200.0),
            crown(0.5, Stage::Draping, 200.0),
        ]);
        for corner in [1, 2] {
            near(steps[corner].alone_per_m, alone[corner]);
            near(
                steps[corner].new_least_per_m,
                alone[corner] - 0.5 * alone[0],
            );
            near(steps[corner].new_most_per_m, steps[corner].new_least_per_m);
        }
    }

    /// Crowns on the loom and at rest load the same side: the rest adds nothing where it is the milder, in both bounds.
    #[test]
    fn crowns_are_one_yarn() {
        let crown = |radius: f64, pull: f64| Bend {
            meets: Meets::TimesPerMetre(400.0),
            ..bend(radius, pull)
        };
        let (steps, alone) = steps(&[bend(2.0, 0.2), crown(0.5, 2.0), crown(0.6, 0.2)]);
        near(steps[1].new_most_per_m, alone[1]);
        near(steps[2].new_most_per_m, 0.0);
        near(steps[2].new_least_per_m, 0.0);
        // Of one metre, 0.4 m lies in crowns; there the guide broke what the crown need not break again.
        near(steps[1].new_least_per_m, alone[1] - 0.4 * alone[0]);
    }
}
