//! The cloth: both systems laid, their height shared, and the numbers that follow.
//!
//! ```text
//! thickness   = max(h1 + t1, h2 + t2)
//! areal mass  = n1 tex1 (1 + c1) + n2 tex2 (1 + c2)           n: threads per length
//! cover       = 1 - (1 - w1/p1)(1 - w2/p2)                    straight yarns
//! fibre share = fibre volume per area / thickness
//! ```
//!
//! Left out: nesting, hairiness, flattening by a gauge's pressure.

use super::share::{Closed, Closure, share};
use super::wave::Wave;
use crate::bend::Flanks;
use crate::path::{Passing, Sample};
use crate::pattern::{FloatLength, Side, SystemInterlacing};
use crate::spec::{System, Weave};
use crate::yarn::{Laid, LayError, Vary};
use thiserror::Error;

/// One system in the cloth.
#[derive(Debug, Clone, PartialEq)]
pub struct ClothYarn {
    /// Straightened over cloth length, less 1; mean of the system.
    pub crimp: f64,
    /// Height of the wave from crest to trough of the centreline, mm.
    pub wave_height_mm: f64,
    /// Slope of the straight piece, rad: the wrap angle on one side of a crest.
    pub slope_rad: f64,
    /// Smallest radius of the centreline, mm; absent where the yarn runs straight.
    pub min_radius_mm: Option<f64>,
    /// Length of centreline that lies on the crossed yarn on one side of a crest, mm.
    pub contact_mm: f64,
    /// Longest float on the face, crossings.
    pub float_face: usize,
    /// Longest float on the back, crossings.
    pub float_back: usize,
    /// Distance between neighbouring yarns of this system, mm.
    pub spacing_mm: f64,
    /// The yarn in its outline.
    pub laid: Laid,
    /// Changes of side over crossings, mean of the system.
    pub changes_per_crossing: f64,
    /// The path, as far as bends hang on it.
    pub path: YarnPath,
}

/// The path of one system's yarns.
#[derive(Debug, Clone, PartialEq)]
pub enum YarnPath {
    /// Taut: every crown alike.
    Taut {
        /// The wave: how its crowns may ease.
        wave: Wave,
        /// The way from a crest to the next trough.
        passing: Passing,
    },
    /// Stiff: solved.
    Stiff(StiffSystem),
}

/// The solved paths of one system's yarns.
#[derive(Debug, Clone, PartialEq)]
pub struct StiffSystem {
    /// How much of a yarn is bent how sharply: samples by curvature, the sharpest last; lengths per half crown.
    pub samples: Vec<Sample>,
    /// Crimp the taut path would have, a ratio.
    pub taut_crimp: f64,
    /// Pull at which the path was found, N.
    pub pull_n: f64,
    /// Rigidity of the yarn, N mm2.
    pub rigidity_n_mm2: f64,
    /// Largest push of a crossing on a yarn, N.
    pub push_n: f64,
    /// Whether some path had to be followed from the taut thread, as it was not found at once.
    pub followed: bool,
    /// How sharply the crossed section is bent at its crest, as a radius, mm; absent where it is flat.
    pub section_mm: Option<f64>,
    /// Which sides of its sharpest crowns fall away.
    pub flanks: Flanks,
}

impl ClothYarn {
    /// The solved path, where the yarns are stiff.
    pub fn solved(&self) -> Option<&StiffSystem> {
        match &self.path {
            YarnPath::Stiff(system) => Some(system),
            YarnPath::Taut { .. } => None,
        }
    }

    /// The longest float on either side, crossings.
    pub fn float_max(&self) -> usize {
        self.float_face.max(self.float_back)
    }
}

/// A woven cloth.
#[derive(Debug, Clone, PartialEq)]
pub struct Cloth {
    /// The ends.
    pub warp: ClothYarn,
    /// The picks.
    pub weft: ClothYarn,
    /// How the height is shared.
    pub closed: Closed,
    /// Thickness under a gauge, mm.
    pub thickness_mm: f64,
    /// Height where nothing presses it, mm; of stiff yarns.
    pub free_height_mm: Option<f64>,
    /// Mass per area with crimp, g/m2.
    pub areal_mass_g_m2: f64,
    /// Share of the area covered by yarn.
    pub cover: f64,
    /// Share of fibre in the cloth's volume.
    pub fibre_volume_fraction: f64,
    /// Factor by which a measured cloth thickness scaled the yarns' thicknesses.
    pub thickness_factor: Option<f64>,
    /// Packing to which assumed packings had to be raised before the yarns could interlace.
    pub raised_packing: Option<f64>,
}

/// Why there is no cloth.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum ClothError {
    /// The yarns cannot interlace at this sett.
    #[error("the yarns are too close to interlace")]
    Jammed,
    /// A yarn does not fit beside its neighbours.
    #[error("{system} yarn: {error}")]
    Lay {
        /// Which system.
        system: &'static str,
        /// What does not fit.
        error: LayError,
    },
    /// A stiff yarn for which no path was found.
    #[error(
        "no path of least energy was found for {system} yarn {yarn} of the repeat, at its crossing {crossing}"
    )]
    NoPath {
        /// Which system.
        system: &'static str,
        /// Which end or pick of the repeat, from 1.
        yarn: usize,
        /// Which of its crossings, from 1.
        crossing: usize,
    },
    /// The heights of stiff yarns did not come into balance.
    #[error(
        "the yarns' contact forces found no balance where end {end} meets pick {pick} of the repeat"
    )]
    NoBalance {
        /// The end, from 1.
        end: usize,
        /// The pick, from 1.
        pick: usize,
    },
    /// No other state was found in which the yarns have the same lengths.
    #[error("the cloth {state} is found, but no cloth {other} whose yarns have the same lengths")]
    NoOtherState {
        /// The state that was found.
        state: &'static str,
        /// The state that was not.
        other: &'static str,
    },
    /// No scaling of the yarns meets the measured thickness.
    #[error(
        "no thickness of these yarns was found that makes a cloth {asked_mm} mm thick: those tried give {least_mm:.4} to {most_mm:.4} mm"
    )]
    Thickness {
        /// Thickness asked for, mm.
        asked_mm: f64,
        /// The thinnest cloth that can be.
        least_mm: f64,
        /// The thickest cloth that can be.
        most_mm: f64,
    },
    /// A layer that has no room inside of a tool's corner.
    #[error(
        "layer {layer} has no room inside the corner `{name}`: its middle lies {:.3} mm from the tool, the corner's radius is {radius_mm} mm",
        (f64::from(*layer) - 0.5) * thickness_mm
    )]
    Corner {
        /// What the spec calls the corner.
        name: String,
        /// The layer asked for.
        layer: u32,
        /// Thickness of the cloth, mm.
        thickness_mm: f64,
        /// Radius of the corner, mm.
        radius_mm: f64,
    },
}

/// Mass per area of two systems, g/m2: threads per mm, tex, crimp of each.
pub fn areal_mass_g_m2(warp: (f64, f64, f64), weft: (f64, f64, f64)) -> f64 {
    let one = |(sett_per_mm, tex, crimp): (f64, f64, f64)| sett_per_mm * tex * (1.0 + crimp);
    one(warp) + one(weft)
}

/// Share of the area covered by two systems of straight yarns: width and spacing of each.
pub fn cover(warp: (f64, f64), weft: (f64, f64)) -> f64 {
    let open = |(width, spacing): (f64, f64)| 1.0 - (width / spacing).min(1.0);
    1.0 - open(warp) * open(weft)
}

impl Cloth {
    /// The cloth with these outlines and no others.
    pub(super) fn build_varied(weave: &Weave, vary: Vary) -> Result<Self, ClothError> {
        let lay = |system: &System, name: &'static str| {
            system
                .yarn
                .laid_at(system.spacing_mm(), vary)
                .map_err(|error| ClothError::Lay {
                    system: name,
                    error,
                })
        };
        let (warp, weft) = (lay(&weave.warp, "warp")?, lay(&weave.weft, "weft")?);
        let wave = |own: &Laid, crossed: &Laid, spacing: f64, system: &SystemInterlacing| {
            Wave::new(&own.outline, &crossed.outline, spacing, system)
        };
        let floats = &weave.woven.interlacing;
        let warp_wave = wave(&warp, &weft, weave.weft.spacing_mm(), &floats.warp);
        let weft_wave = wave(&weft, &warp, weave.warp.spacing_mm(), &floats.weft);
        let whole_mm = warp.outline.thickness_mm() + weft.outline.thickness_mm();
        let shared =
            share(&warp_wave, &weft_wave, whole_mm, closure(weave)).ok_or(ClothError::Jammed)?;
        let yarn = |system: &System, laid: Laid, wave: Wave, height_mm: f64, woven| {
            ClothYarn::new(system, laid, wave, height_mm, woven).ok_or(ClothError::Jammed)
        };
        let warp = yarn(&weave.warp, warp, warp_wave, shared.warp_mm, &floats.warp)?;
        let weft = yarn(&weave.weft, weft, weft_wave, shared.weft_mm, &floats.weft)?;
        let height = |yarn: &ClothYarn| yarn.wave_height_mm + yarn.laid.outline.thickness_mm();
        let thickness_mm = height(&warp).max(height(&weft));
        Ok(Self::from_systems(
            weave,
            warp,
            weft,
            shared.closed,
            thickness_mm,
        ))
    }

    /// The numbers that follow from both systems; the setts are those of the yarns' own spacings.
    pub(super) fn from_systems(
        weave: &Weave,
        warp: ClothYarn,
        weft: ClothYarn,
        closed: Closed,
        thickness_mm: f64,
    ) -> Self {
        let mass = |system: &System, yarn: &ClothYarn| {
            (
                1.0 / yarn.spacing_mm,
                system.yarn.count.linear_density_tex,
                yarn.crimp,
            )
        };
        // Per mm2 of cloth: length of yarn times its area of fibre.
        let fibre_mm = |system: &System, yarn: &ClothYarn| {
            (1.0 + yarn.crimp) / yarn.spacing_mm * system.yarn.fibre_area_mm2()
        };
        let width = |yarn: &ClothYarn| (yarn.laid.outline.width_mm(), yarn.spacing_mm);
        Self {
            thickness_mm,
            areal_mass_g_m2: areal_mass_g_m2(mass(&weave.warp, &warp), mass(&weave.weft, &weft)),
            cover: cover(width(&warp), width(&weft)),
            fibre_volume_fraction: (fibre_mm(&weave.warp, &warp) + fibre_mm(&weave.weft, &weft))
                / thickness_mm,
            closed,
            warp,
            weft,
            free_height_mm: None,
            thickness_factor: None,
            raised_packing: None,
        }
    }
}

impl ClothYarn {
    fn new(
        system: &System,
        laid: Laid,
        wave: Wave,
        height_mm: f64,
        woven: &SystemInterlacing,
    ) -> Option<Self> {
        let passing = wave.crest().pass(height_mm)?;
        let float = |side: Side| {
            woven
                .longest_float(side)
                .and_then(FloatLength::crossings)
                .unwrap_or(0)
        };
        Some(Self {
            crimp: wave.crimp_of(&passing),
            wave_height_mm: height_mm,
            slope_rad: passing.slope_rad,
            min_radius_mm: wave.min_radius_mm(&passing),
            contact_mm: passing.rests.iter().map(|rest| rest.length_mm).sum(),
            changes_per_crossing: wave.changes_per_crossing(),
            float_face: float(Side::Face),
            float_back: float(Side::Back),
            spacing_mm: system.spacing_mm(),
            laid,
            path: YarnPath::Taut { wave, passing },
        })
    }
}

/// What closes the height of this weave.
fn closure(weave: &Weave) -> Closure {
    match (weave.warp.crimp, weave.weft.crimp) {
        (Some(warp), Some(weft)) => Closure::BothCrimps(warp, weft),
        (Some(warp), None) => Closure::WarpCrimp(warp),
        (None, Some(weft)) => Closure::WeftCrimp(weft),
        // Two slack systems balance at any split: nothing is known.
        (None, None)
            if weave.warp.tension_given
                && weave.weft.tension_given
                && weave.warp.tension_n + weave.weft.tension_n > 0.0 =>
        {
            Closure::Tensions(weave.warp.tension_n, weave.weft.tension_n)
        }
        (None, None) => Closure::EqualHeights,
    }
}

#[cfg(test)]
mod tests {
    use super::super::share::SharedBy;
    use super::*;
    use crate::pattern::Weaves;
    use crate::span::SourceText;
    use crate::spec::Spec;
    use geo::{Area, BooleanOps, MultiPolygon, Rect};

    /// Counted independently over one square metre: areal mass (g/m2), cover (point sampling of the plan view).
    #[test]
    fn mass_and_cover_match_the_independent_count() {
        // ends, picks per cm, widths mm, tex, crimps, mass, cover
        let cases = [
            (
                (5.0, 5.0),
                (1.7, 1.7),
                (200.0, 200.0),
                (0.004, 0.004),
                200.8,
                0.9775,
            ),
            (
                (10.0, 9.0),
                (0.8, 0.9),
                (68.0, 68.0),
                (0.01, 0.012),
                130.6144,
                0.962,
            ),
            (
                (22.0, 20.0),
                (0.3, 0.32),
                (34.0, 34.0),
                (0.05, 0.07),
                151.3,
                0.8776,
            ),
            (
                (7.0, 6.0),
                (1.4, 1.2),
                (300.0, 136.0),
                (0.006, 0.02),
                294.492,
                0.9944,
            ),
            (
                (30.0, 25.0),
                (0.28, 0.3),
                (20.0, 25.0),
                (0.09, 0.04),
                130.4,
                0.96,
            ),
        ];
        for (sett, width, tex, crimp, mass, covered) in cases {
            let (n1, n2) = (sett.0 / 10.0, sett.1 / 10.0);
            let ours = areal_mass_g_m2((n1, tex.0, crimp.0), (n2, tex.1, crimp.1));
            assert!((ours - mass).abs() < 1e-9, "{ours} {mass}");
            let share = cover((width.0, 1.0 / n1), (width.1, 1.0 / n2));
            assert!((share - covered).abs() < 1e-12, "{share} {covered}");
        }
    }

    fn cloth(warp: &str, weft: &str) -> Cloth {
        let text = format!(
            "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\npattern = \"plain\"\n\
             warp = {{ yarn = \"y\", sett = \"12 /cm\"{warp} }}\nweft = {{ yarn = \"y\", sett = \"10 /cm\"{weft} }}\n"
        );
        let spec = Spec::read(SourceText::new("t", text), &Weaves::builtin()).unwrap();
        Cloth::build(&spec.weave, 1.0).unwrap()
    }

    #[test]
    fn the_spec_closes_the_height_of_its_own_system() {
        let warp = cloth(", crimp = \"1.2 %\"", "");
        assert!(
            (warp.warp.crimp - 0.012).abs() < 1e-9,
            "{}",
            warp.warp.crimp
        );
        let weft = cloth("", ", crimp = \"0.4 %\"");
        assert!(
            (weft.weft.crimp - 0.004).abs() < 1e-9,
            "{}",
            weft.weft.crimp
        );
        // A taut warp and a slack weft: the weft takes the wave.
        let pulled = cloth(", tension = \"90 cN\"", ", tension = \"30 cN\"");
        assert!(pulled.warp.wave_height_mm < pulled.weft.wave_height_mm);
        let both = cloth(", crimp = \"40 %\"", ", crimp = \"40 %\"");
        assert!(both.closed.jam_limited, "no such crimps exist");
        let slack = cloth(", tension = \"0 cN\"", ", tension = \"0 cN\"");
        assert_eq!(slack.closed.by, SharedBy::Closure(Closure::EqualHeights));
    }

    /// By hand from the cloth's own crimp: 1.2 ends per mm of 68 tex, 1.0 picks, 2.54 g/cm3.
    #[test]
    fn mass_and_fibre_volume_count_the_crimp() {
        let cloth = cloth(", crimp = \"1.2 %\"", "");
        let mass = 1.2 * 68.0 * 1.012 + 1.0 * 68.0 * (1.0 + cloth.weft.crimp);
        assert!((cloth.areal_mass_g_m2 - mass).abs() < 1e-6);
        let volume = mass / 1e3 / 2.54 / cloth.thickness_mm;
        assert!((cloth.fibre_volume_fraction - volume).abs() < 1e-9);
    }

    /// Cover by the union of rectangles over four repeats (geo): the formula's own definition, drawn.
    #[test]
    fn cover_equals_the_union_of_the_yarns() {
        let (w1, p1, w2, p2) = (0.3, 0.45, 0.32, 0.5);
        let mut union = MultiPolygon::new(vec![]);
        for index in 0..4 {
            let at = f64::from(index);
            let end = Rect::new((at * p1, 0.0), (at * p1 + w1, 4.0 * p2)).to_polygon();
            let pick = Rect::new((0.0, at * p2), (4.0 * p1, at * p2 + w2)).to_polygon();
            union = union.union(&end).union(&pick);
        }
        let drawn = union.unsigned_area() / (16.0 * p1 * p2);
        assert!((drawn - cover((w1, p1), (w2, p2))).abs() < 1e-9, "{drawn}");
    }
}
