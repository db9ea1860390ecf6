//! Broken filaments to expect: the part of the report, its sentences and its table.

use crate::flow::Broken;
use crate::quantity::{rounded, significant};
use crate::spec::Spec;
use serde::Serialize;

/// What the way of one yarn breaks.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[expect(
    missing_docs,
    reason = "the units are in the names; the meanings stand in the README's table"
)]
pub struct BrokenReport {
    pub system: &'static str,
    pub yarn: String,
    pub least_per_m: f64,
    pub most_per_m: f64,
    pub least_per_m2: f64,
    pub most_per_m2: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub allowed_per_m: Option<f64>,
    pub indicative: bool,
    pub steps: Vec<StepRow>,
}

/// What one bend of the way adds.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[expect(
    missing_docs,
    reason = "the units are in the names; the meanings stand in the README's table"
)]
pub struct StepRow {
    pub place: String,
    pub stage: &'static str,
    pub alone_per_m: f64,
    pub new_least_per_m: f64,
    pub new_most_per_m: f64,
}

impl BrokenReport {
    /// The part of a report.
    pub fn new(spec: &Spec, broken: &Broken) -> Self {
        let system = match broken.system {
            crate::bend::SystemName::Warp => &spec.weave.warp,
            crate::bend::SystemName::Weft => &spec.weave.weft,
        };
        let (least, most) = broken.per_m;
        Self {
            system: broken.system.word(),
            yarn: system.yarn.name.clone(),
            least_per_m: rounded(least),
            most_per_m: rounded(most),
            least_per_m2: rounded(broken.per_m2.0),
            most_per_m2: rounded(broken.per_m2.1),
            allowed_per_m: spec.require.broken_per_m.map(rounded),
            indicative: broken.indicative,
            steps: broken
                .steps
                .iter()
                .map(|(place, stage, step)| StepRow {
                    place: place.to_string(),
                    stage: stage.word(),
                    alone_per_m: rounded(step.alone_per_m),
                    new_least_per_m: rounded(step.new_least_per_m),
                    new_most_per_m: rounded(step.new_most_per_m),
                })
                .collect(),
        }
    }
}

/// Columns of the table of steps; shared by text and Markdown.
pub(super) const BROKEN_COLUMNS: [&str; 6] = [
    "of",
    "place",
    "stage",
    "alone /m",
    "new, least /m",
    "new, most /m",
];

/// A count to two digits; what nobody will ever find is no count.
pub(super) fn count(per_m: f64) -> String {
    if per_m < 1e-6 {
        return "under 1e-6".to_owned();
    }
    // Two digits are more than anybody knows: 13 000, not 12 939.
    let step = 10f64.powf(per_m.log10().floor() - 1.0);
    significant((per_m / step).round() * step, 2)
}

/// Rows of the table of steps, all yarns.
pub(super) fn broken_rows(broken: &[BrokenReport]) -> Vec<[String; 6]> {
    broken
        .iter()
        .flat_map(|yarn| {
            yarn.steps.iter().map(|step| {
                [
                    yarn.system.to_owned(),
                    step.place.clone(),
                    step.stage.to_owned(),
                    count(step.alone_per_m),
                    count(step.new_least_per_m),
                    count(step.new_most_per_m),
                ]
            })
        })
        .collect()
}

/// What the counts add up to, one sentence for each yarn and one for the cloth; and what each reserve knows.
pub(super) fn broken_sentences(broken: &[BrokenReport]) -> Vec<String> {
    let range = |least: f64, most: f64| {
        let (least, most) = (count(least), count(most));
        if least == most {
            most
        } else {
            format!("{least} to {most}")
        }
    };
    let mut said: Vec<String> = broken
        .iter()
        .map(|yarn| {
            let allowed = yarn.allowed_per_m.map_or_else(String::new, |allowed| {
                format!("; {} /m allowed at each bend", significant(allowed, 3))
            });
            let indicative = if yarn.indicative {
                "; indicative only, from the strength of strands or yarns"
            } else {
                ""
            };
            format!(
                "{} yarn `{}`: {} per metre when the cloth is made{allowed}{indicative}",
                yarn.system,
                yarn.yarn,
                range(yarn.least_per_m, yarn.most_per_m)
            )
        })
        .collect();
    if broken.len() == 2 {
        let sum = |of: fn(&BrokenReport) -> f64| broken.iter().map(of).sum();
        said.push(format!(
            "cloth: {} per m2",
            range(sum(|b| b.least_per_m2), sum(|b| b.most_per_m2))
        ));
    }
    said.push(
        "at least: every bend loads the same side of the yarn; at most: every guide loads a fresh one. A handbook reserve knows the mean strength of one gauge length; the count knows its scatter and how much yarn is bent"
            .to_owned(),
    );
    said
}
