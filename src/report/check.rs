//! The report of `check`: one type, whose fields are the JSON contract and from which every format is printed.
//!
//! Keys may be added, never renamed; a value that does not exist is an absent key. Numbers are kept with seven
//! significant digits.

use super::bend::BendRow;
use super::broken::BrokenReport;
use super::cautions::cautions;
use crate::flow::{
    Broken, Outcome, RigidityBound, Variation, assumptions, over_the_whole_way, warnings,
};
use crate::passage::{reed_strokes, sheddings};
use crate::quantity::rounded;
use crate::spec::Spec;
use crate::weave::{Closure, Cloth, ClothYarn, SharedBy};
use serde::Serialize;
use sha2::{Digest, Sha256};
use std::fmt::Write as _;

/// What `check` reports of one spec.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CheckReport {
    /// Version of the program.
    pub lissom: &'static str,
    /// Which spec.
    pub spec: SpecReport,
    /// Worst state.
    pub verdict: &'static str,
    /// Whether the check fails (exit status 1).
    pub fails: bool,
    /// The cloth at rest, or the one state of taut yarns.
    pub cloth: ClothReport,
    /// The cloth on the loom; absent for taut yarns.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub cloth_on_loom: Option<ClothReport>,
    /// Every bend, judged.
    pub bends: Vec<BendRow>,
    /// Index in `bends` of the one that decides.
    pub worst: usize,
    /// Broken filaments to expect, for each yarn whose scatter of strength is known.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub broken_filaments: Vec<BrokenReport>,
    /// Whether the state changes with the assumed outlines.
    pub hangs_on_width: bool,
    /// The worst at other flatnesses of the assumed outlines.
    pub sensitivity: Vec<SensitivityRow>,
    /// The worst with the bounds of the yarns' rigidity.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub rigidity: Vec<RigidityRow>,
    /// What a reader must not miss.
    pub warnings: Vec<String>,
    /// What would hold instead.
    pub advice: Vec<Advice>,
    /// What the result hangs on that the spec did not say.
    pub assumptions: Vec<String>,
    /// Cautions.
    pub cautions: Vec<String>,
}

/// Which spec a report is of.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SpecReport {
    /// Its name.
    pub name: String,
    /// The owner's number.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reference: Option<String>,
    /// SHA-256 of its text.
    pub sha256: String,
    /// The file as the command named it.
    #[serde(skip)]
    pub file: String,
}

/// The cloth's numbers.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[expect(
    missing_docs,
    reason = "the units are in the names; the meanings stand in the README's table"
)]
pub struct ClothReport {
    pub pattern: String,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub iso_9354: Option<String>,
    pub ends: usize,
    pub picks: usize,
    pub jam_limited: bool,
    pub height_shared_by: &'static str,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub crimp_mismatch: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub thickness_factor: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub raised_packing: Option<f64>,
    pub warp: SystemReport,
    pub weft: SystemReport,
    pub thickness_mm: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub free_height_mm: Option<f64>,
    pub areal_mass_g_m2: f64,
    pub cover: f64,
    pub fibre_volume_fraction: f64,
}

/// The numbers of one system of the cloth.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[expect(
    missing_docs,
    reason = "the units are in the names; the meanings stand in the README's table"
)]
pub struct SystemReport {
    pub yarn: String,
    pub crimp: f64,
    pub wave_height_mm: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub min_radius_mm: Option<f64>,
    pub wrap_angle_deg: f64,
    pub contact_mm: f64,
    pub float_max: usize,
    pub float_face: usize,
    pub float_back: usize,
    pub spacing_mm: f64,
    pub yarn_shape: &'static str,
    pub yarn_width_mm: f64,
    pub yarn_thickness_mm: f64,
    pub packing: f64,
    pub linear_density_tex: f64,
    pub filaments: u32,
    pub filament_diameter_um: f64,
    pub bending_rigidity_n_mm2: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub tension_n: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub contact_force_n: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub sheddings: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reed_strokes: Option<f64>,
}

/// The worst at another flatness.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SensitivityRow {
    /// Factor on the assumed flatness.
    pub flatness_factor: f64,
    /// Reserve of the bend that decides.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reserve: Option<f64>,
    /// State; `jammed` where there is no cloth.
    pub state: &'static str,
}

/// The worst with another rigidity of the yarns.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RigidityRow {
    /// `free` filaments or `bonded` yarn.
    pub rigidity: &'static str,
    /// Reserve of the bend that decides.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reserve: Option<f64>,
    /// State; `jammed` where there is no cloth.
    pub state: &'static str,
}

/// The state of a variation whose yarns cannot interlace.
const JAMMED: &str = "jammed";

/// What would hold instead, checked by running the flow.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Advice {
    /// The bend it is for.
    pub place: String,
    /// In words.
    pub text: String,
    /// Keys and their new values as the spec would have them; absent where nothing is in reach.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub set: Vec<Setting>,
}

/// A key of the spec and its new value.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct Setting {
    /// The key's path.
    pub key: String,
    /// The value as TOML.
    pub value: String,
}

impl CheckReport {
    /// The report of a spec's outcome.
    pub fn new(
        spec: &Spec,
        outcome: &Outcome,
        variations: &[Variation],
        rigidity: &[Variation],
        broken: &[Broken],
        advice: Vec<Advice>,
        strict: bool,
    ) -> Self {
        let fibres = [&spec.weave.warp, &spec.weave.weft].map(|system| &system.yarn.fibre);
        let sensitivity: Vec<SensitivityRow> = variations.iter().map(SensitivityRow::new).collect();
        let verdict = outcome.verdict().word();
        Self {
            lissom: env!("CARGO_PKG_VERSION"),
            spec: SpecReport::new(spec),
            // An outline that cannot be woven changes nothing.
            hangs_on_width: sensitivity
                .iter()
                .any(|row| row.state != verdict && row.state != JAMMED),
            verdict,
            fails: outcome.fails(spec, strict),
            cloth: ClothReport::new(spec, &outcome.cloth),
            cloth_on_loom: outcome
                .on_loom
                .as_ref()
                .map(|cloth| ClothReport::new(spec, cloth)),
            bends: outcome
                .findings
                .iter()
                .map(|finding| BendRow::new(spec, finding, strict))
                .collect(),
            worst: outcome.worst(spec.require.refuse_kinks),
            broken_filaments: broken
                .iter()
                .map(|broken| BrokenReport::new(spec, broken))
                .collect(),
            sensitivity,
            rigidity: rigidity.iter().map(RigidityRow::new).collect(),
            warnings: [warnings(spec, outcome), over_the_whole_way(spec, broken)].concat(),
            advice,
            assumptions: assumptions(spec, outcome),
            cautions: cautions(&fibres),
        }
    }

    /// The bend that decides.
    pub fn worst_bend(&self) -> Option<&BendRow> {
        self.bends.get(self.worst)
    }
}

fn sha256(text: &str) -> String {
    Sha256::digest(text.as_bytes())
        .iter()
        .fold(String::new(), |mut hex, byte| {
            // Writing to a String cannot fail.
            let _ = write!(hex, "{byte:02x}");
            hex
        })
}

impl SpecReport {
    /// Which spec it is.
    pub fn new(spec: &Spec) -> Self {
        Self {
            name: spec.name.clone(),
            reference: spec.reference.clone(),
            sha256: sha256(&spec.source.text),
            file: spec.source.name.clone(),
        }
    }
}

impl ClothReport {
    /// The numbers of a spec's cloth.
    pub fn new(spec: &Spec, cloth: &Cloth) -> Self {
        let weave = &spec.weave;
        Self {
            pattern: weave.pattern_name.clone(),
            iso_9354: weave.woven.iso_9354.clone(),
            ends: weave.woven.pattern.ends(),
            picks: weave.woven.pattern.picks(),
            jam_limited: cloth.closed.jam_limited,
            height_shared_by: match cloth.closed.by {
                SharedBy::Closure(Closure::WarpCrimp(_)) => "warp crimp",
                SharedBy::Closure(Closure::WeftCrimp(_)) => "weft crimp",
                SharedBy::Closure(Closure::BothCrimps(..)) => "both crimps",
                SharedBy::Closure(Closure::Tensions(..)) => "tensions",
                SharedBy::Closure(Closure::EqualHeights) => "equal heights",
                SharedBy::LeastEnergy => "least energy",
                SharedBy::KeptLengths => "kept lengths",
            },
            crimp_mismatch: cloth.closed.mismatch.map(rounded),
            thickness_factor: cloth.thickness_factor.map(rounded),
            raised_packing: cloth.raised_packing.map(rounded),
            warp: SystemReport {
                sheddings: sheddings(weave).map(rounded),
                reed_strokes: reed_strokes(spec).map(rounded),
                ..SystemReport::new(&weave.warp.yarn, &cloth.warp)
            },
            weft: SystemReport::new(&weave.weft.yarn, &cloth.weft),
            thickness_mm: rounded(cloth.thickness_mm),
            free_height_mm: cloth.free_height_mm.map(rounded),
            areal_mass_g_m2: rounded(cloth.areal_mass_g_m2),
            cover: rounded(cloth.cover),
            fibre_volume_fraction: rounded(cloth.fibre_volume_fraction),
        }
    }
}

impl SystemReport {
    fn new(yarn: &crate::yarn::Yarn, woven: &ClothYarn) -> Self {
        let outline = &woven.laid.outline;
        Self {
            yarn: yarn.name.clone(),
            crimp: rounded(woven.crimp),
            wave_height_mm: rounded(woven.wave_height_mm),
            min_radius_mm: woven.min_radius_mm.map(rounded),
            wrap_angle_deg: rounded(woven.slope_rad.to_degrees()),
            contact_mm: rounded(woven.contact_mm),
            float_max: woven.float_max(),
            float_face: woven.float_face,
            float_back: woven.float_back,
            spacing_mm: rounded(woven.spacing_mm),
            yarn_shape: outline.shape().word(),
            yarn_width_mm: rounded(outline.width_mm()),
            yarn_thickness_mm: rounded(outline.thickness_mm()),
            packing: rounded(woven.laid.packing),
            linear_density_tex: rounded(yarn.count.linear_density_tex),
            filaments: yarn.count.filaments,
            filament_diameter_um: rounded(1e3 * yarn.count.filament_diameter_mm),
            bending_rigidity_n_mm2: rounded(yarn.rigidity_n_mm2(&woven.laid)),
            tension_n: woven.solved().map(|system| rounded(system.pull_n)),
            contact_force_n: woven.solved().map(|system| rounded(system.push_n)),
            sheddings: None,
            reed_strokes: None,
        }
    }
}

impl RigidityRow {
    fn new(variation: &Variation) -> Self {
        let row = SensitivityRow::new(variation);
        Self {
            rigidity: match variation.varied.rigidity {
                RigidityBound::Own => "own",
                RigidityBound::Free => "free",
                RigidityBound::Bonded => "bonded",
            },
            reserve: row.reserve,
            state: row.state,
        }
    }
}

impl SensitivityRow {
    fn new(variation: &Variation) -> Self {
        Self {
            flatness_factor: variation.varied.flatness,
            reserve: variation
                .worst
                .and_then(|(_, reserve)| reserve)
                .map(rounded),
            state: variation.worst.map_or(JAMMED, |(state, _)| state.word()),
        }
    }
}
