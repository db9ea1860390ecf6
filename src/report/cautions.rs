//! What every report warns of: by the hazard of the fibres in it, and always what the results are not.

use crate::fibre::{Fibre, Hazard, library};

/// The cautions for a cloth of these fibres, in a stable order.
pub fn cautions(fibres: &[&Fibre]) -> Vec<String> {
    let mut said = Vec::new();
    for &hazard in Hazard::ALL {
        if fibres.iter().any(|fibre| fibre.hazard == hazard)
            && let Some(text) = of(hazard)
        {
            said.push(text.to_owned());
        }
    }
    for fibre in fibres {
        let unknown = fibre.hazard == Hazard::NoHazard && library().find(&fibre.id).is_err();
        let caution = format!(
            "The hazards of fibre `{}` are not known here: look them up.",
            fibre.id
        );
        if unknown && !said.contains(&caution) {
            said.push(caution);
        }
    }
    said.push(
        "These are screening values from handbook strengths. They are no design allowables and do not replace a trial on the machine."
            .to_owned(),
    );
    said.push("Local rules, safety data sheets and qualified people come first.".to_owned());
    said
}

fn of(hazard: Hazard) -> Option<&'static str> {
    match hazard {
        Hazard::ConductiveCarbon => Some(
            "Broken carbon filaments conduct, drift far and short electrical gear: enclose drives, seal cabinets, extract the dust.",
        ),
        Hazard::Glass => {
            Some("Fragments of glass and mineral fibre irritate skin, eyes and airways.")
        }
        Hazard::Ceramic => Some(
            "Fragments of ceramic fibre irritate skin, eyes and airways, and some ceramic fibres are classed as hazardous to breathe: look up the class of yours.",
        ),
        Hazard::Wire => Some("Fine wire springs and cuts: protect eyes and hands."),
        Hazard::OrganicDust => {
            Some("Cut and rubbed fibre sheds fine dust and fibrils: extract it.")
        }
        Hazard::NoHazard => None,
    }
}
