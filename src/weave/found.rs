//! A state that was found, and its cloth: the numbers that follow from the paths of its yarns.

use super::cloth::{Cloth, ClothYarn, StiffSystem, YarnPath};
use super::heights::Balanced;
use super::pulled::{Pulled, Spacings};
use super::share::Closed;
use crate::path::{Sample, StiffPath, StiffYarn, Strand, Way};
use crate::spec::Weave;

/// Steps of curvature in which a system's bends are told.
const BINS: usize = 12;
/// Samples of a free piece of yarn.
const PARTS: usize = 8;

/// A state that was found.
pub(super) struct FoundState<'a> {
    pub pulled: Pulled<'a>,
    pub spacings: Spacings,
    pub balanced: Balanced,
    pub closed: Closed,
    /// Weight of the warp's energy: 1 but where a measured crimp is met.
    pub warp_weight: f64,
}

impl FoundState<'_> {
    /// Thickness under a gauge, mm: the larger of wave height and thickness of both systems. Floats that stand off the cloth
    /// are pressed down by it.
    pub(super) fn thickness_mm(&self) -> f64 {
        let mut most = 0.0_f64;
        for (yarn, paths, strand) in self.systems() {
            for path in paths {
                most = most.max(yarn.wave_mm(path) + 2.0 * strand.half_thickness_mm);
            }
        }
        most
    }

    /// Height of the cloth from its highest to its lowest yarn, mm, where nothing presses it.
    fn free_height_mm(&self) -> f64 {
        let (mut high, mut low) = (f64::MIN, f64::MAX);
        for (yarn, paths, strand) in self.systems() {
            for path in paths {
                let (_, top, bottom) = yarn.slope_and_range(path);
                high = high.max(top + strand.half_thickness_mm);
                low = low.min(bottom - strand.half_thickness_mm);
            }
        }
        high - low
    }

    fn systems(&self) -> [(&StiffYarn, &[StiffPath], &Strand); 2] {
        [
            (
                &self.pulled.warp,
                &self.balanced.warp,
                &self.pulled.strands.0,
            ),
            (
                &self.pulled.weft,
                &self.balanced.weft,
                &self.pulled.strands.1,
            ),
        ]
    }

    /// The cloth's numbers in this state.
    pub(super) fn cloth(&self, weave: &Weave, taut: &Cloth) -> Cloth {
        let (c1, c2) = self.pulled.crimps(self.spacings, &self.balanced);
        let [warp, weft] = self.systems();
        let yarn = |of: (&StiffYarn, &[StiffPath], &Strand),
                    taut: &ClothYarn,
                    crimp: f64,
                    spacing_mm: f64| {
            let (yarn, paths, strand) = of;
            let (mut slope, mut wave) = (0.0_f64, 0.0_f64);
            let (mut peak, mut push, mut contact) = (0.0_f64, 0.0_f64, 0.0);
            let mut samples = Vec::new();
            for path in paths {
                slope = slope.max(yarn.slope_and_range(path).0);
                wave = wave.max(yarn.wave_mm(path));
                peak = peak.max(yarn.peak_per_mm(path));
                push = yarn.pushes_n(path).iter().fold(push, |m, p| m.max(p.abs()));
                contact += yarn.contact_mm(path);
                samples.extend(yarn.samples(path, PARTS));
            }
            let crossings: usize = paths.iter().map(StiffPath::crossings).sum();
            let halves = 2.0 * taut.changes_per_crossing * crossings as f64;
            let flanks = match &taut.path {
                YarnPath::Taut { wave, .. } => wave.flanks(),
                YarnPath::Stiff(system) => system.flanks,
            };
            ClothYarn {
                crimp,
                wave_height_mm: wave,
                slope_rad: slope,
                min_radius_mm: (peak > 0.0).then(|| 1.0 / peak),
                contact_mm: contact / halves,
                spacing_mm,
                path: YarnPath::Stiff(StiffSystem {
                    samples: binned(&samples, peak, halves),
                    taut_crimp: taut.crimp,
                    pull_n: strand.pull_n,
                    rigidity_n_mm2: strand.rigidity_n_mm2,
                    push_n: push,
                    followed: paths.iter().any(|path| path.way() == Way::Followed),
                    section_mm: yarn.section_radius_mm(),
                    flanks,
                }),
                ..taut.clone()
            }
        };
        let (ends_mm, picks_mm) = self.spacings;
        let warp = yarn(warp, &taut.warp, c1, ends_mm);
        let weft = yarn(weft, &taut.weft, c2, picks_mm);
        Cloth {
            free_height_mm: Some(self.free_height_mm()),
            thickness_factor: taut.thickness_factor,
            raised_packing: taut.raised_packing,
            ..Cloth::from_systems(weave, warp, weft, self.closed, self.thickness_mm())
        }
    }
}

/// Samples gathered by curvature, the sharpest last and told exactly; lengths over the number of half crowns.
fn binned(samples: &[Sample], peak_per_mm: f64, halves: f64) -> Vec<Sample> {
    let mut bins = vec![
        Sample {
            length_mm: 0.0,
            curvature_per_mm: 0.0,
            turn_rad: 0.0,
        };
        BINS
    ];
    for sample in samples {
        let curvature = sample.curvature_per_mm.abs();
        let share = if peak_per_mm > 0.0 {
            curvature / peak_per_mm
        } else {
            0.0
        };
        let bin = &mut bins[((share * BINS as f64) as usize).min(BINS - 1)];
        bin.length_mm += sample.length_mm / halves;
        bin.curvature_per_mm = bin.curvature_per_mm.max(curvature);
        bin.turn_rad = bin.turn_rad.max(sample.turn_rad);
    }
    if let Some(last) = bins.last_mut() {
        last.curvature_per_mm = peak_per_mm;
    }
    bins.retain(|bin| bin.length_mm > 0.0);
    bins
}
