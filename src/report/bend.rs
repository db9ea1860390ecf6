//! One bend in the report: its fields are the JSON contract.

use crate::bend::{Meets, Stage};
use crate::fibre::Mechanism;
use crate::judge::{Check, Finding, Limit, State};
use crate::quantity::rounded;
use crate::spec::{PathModel, Spec};
use serde::Serialize;

/// One bend in the report.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[expect(
    missing_docs,
    reason = "the units are in the names; the meanings stand in the README's table"
)]
pub struct BendRow {
    pub place: String,
    pub stage: &'static str,
    pub system: &'static str,
    pub yarn: String,
    pub fibre: String,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub radius_mm: Option<f64>,
    pub curvature_per_mm: f64,
    pub lying_curvature_per_mm: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub free_curvature_per_mm: Option<f64>,
    pub governs: &'static str,
    pub governs_because: &'static str,
    /// Half crowns per metre of yarn; absent where all of it travels over the bend.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub half_crowns_per_m: Option<f64>,
    pub tension_n: f64,
    pub axial_stress_mpa: f64,
    pub bending_stress_mpa: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub temperature_c: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub max_temperature_c: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub limit: Option<&'static str>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reserve: Option<f64>,
    /// The reserve that decides: of the handbook's and the filaments' the smaller.
    #[serde(skip)]
    pub deciding_reserve: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub filament_reserve: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub broken_per_m: Option<f64>,
    pub state: &'static str,
    pub fails: bool,
    pub code: &'static str,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub limit_radius_mm: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub kink_radius_mm: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub break_radius_mm: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub strength_loss: Option<f64>,
    pub limits: Vec<LimitRow>,
    pub line: usize,
    /// Whether the yarn follows a path of least energy there.
    #[serde(skip)]
    pub on_path: bool,
    /// The text of that line.
    #[serde(skip)]
    pub quoted: String,
}

/// One limit of a bend.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LimitRow {
    /// Which.
    pub limit: &'static str,
    /// The method's code.
    pub code: &'static str,
    /// Applied stress, MPa; absent where the limit is a strain.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub applied_mpa: Option<f64>,
    /// Allowed stress, MPa.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub allowed_mpa: Option<f64>,
    /// Applied strain; absent where the limit is a stress.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub applied_strain: Option<f64>,
    /// Allowed strain.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub allowed_strain: Option<f64>,
    /// Broken filaments expected per metre of yarn.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub applied_per_m: Option<f64>,
    /// Broken filaments allowed.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub allowed_per_m: Option<f64>,
    /// Allowed over applied, on the stress scale.
    pub reserve: f64,
}

impl BendRow {
    pub(super) fn new(spec: &Spec, finding: &Finding, strict: bool) -> Self {
        let line = spec.source.line_column(finding.governed_by.start).line;
        let strength_loss = match finding.yarn.fibre.mechanism {
            Mechanism::Fibrillar {
                kink_strength_loss, ..
            } if finding.state == State::Kinks => kink_strength_loss,
            _ => None,
        };
        let fibrillar = finding.fibrillar_radii_mm();
        Self {
            place: finding.place.to_string(),
            stage: finding.stage.word(),
            system: finding.system.word(),
            yarn: finding.yarn.name.clone(),
            fibre: finding.yarn.fibre.id.clone(),
            radius_mm: finding.radius_mm().map(rounded),
            curvature_per_mm: rounded(finding.filament.curvature_per_mm),
            lying_curvature_per_mm: rounded(finding.filament.lying_per_mm),
            free_curvature_per_mm: finding.filament.free_per_mm.map(rounded),
            governs: finding.filament.position.word(),
            governs_because: finding.filament.position.why(),
            half_crowns_per_m: match finding.meets {
                Meets::TimesPerMetre(times) => Some(rounded(times)),
                Meets::All => None,
            },
            tension_n: rounded(finding.tension_n),
            axial_stress_mpa: rounded(finding.filament.axial_stress_mpa),
            bending_stress_mpa: rounded(finding.bending_stress_mpa()),
            temperature_c: finding.heat_c.map(|(here, _)| rounded(here)),
            max_temperature_c: finding.heat_c.map(|(_, limit)| rounded(limit)),
            limit: finding.limit.map(Limit::word),
            reserve: finding.reserve().map(rounded),
            deciding_reserve: finding.deciding_reserve().map(rounded),
            filament_reserve: finding.filament_reserve().map(rounded),
            broken_per_m: finding.broken_per_m.map(rounded),
            state: finding.state.word(),
            fails: finding.fails(spec.require.refuse_kinks, strict),
            code: finding.code.word(),
            limit_radius_mm: finding.limit_radius_mm().map(rounded),
            kink_radius_mm: fibrillar.map(|(kink, _)| rounded(kink)),
            break_radius_mm: fibrillar.map(|(_, breaks)| rounded(breaks)),
            strength_loss,
            limits: finding
                .judged
                .checks
                .iter()
                .flatten()
                .map(LimitRow::new)
                .collect(),
            line,
            on_path: spec.weave.path == PathModel::Stiff
                && matches!(finding.stage, Stage::Loom | Stage::Rest | Stage::Draping),
            quoted: spec.source.line(line).trim().to_owned(),
        }
    }
}

impl LimitRow {
    fn new(check: &Check) -> Self {
        let (strain, number) = (check.limit.is_strain(), check.limit == Limit::Filaments);
        let (applied, allowed) = (rounded(check.applied), rounded(check.allowed));
        let stress = !strain && !number;
        Self {
            limit: check.limit.word(),
            code: check.limit.code().word(),
            applied_mpa: stress.then_some(applied),
            allowed_mpa: stress.then_some(allowed),
            applied_strain: strain.then_some(applied),
            allowed_strain: strain.then_some(allowed),
            applied_per_m: number.then_some(applied),
            allowed_per_m: number.then_some(allowed),
            reserve: rounded(check.reserve()),
        }
    }
}
