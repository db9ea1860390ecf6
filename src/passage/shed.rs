//! The open shed as a bend, and how often the warp meets it.
//!
//! The pull it adds is `weave::shed_pull_n`: the end is straight and carries that pull and its mean.

use crate::bend::{Bend, Easing, Meets, Stage, Stretch, SystemName};
use crate::spec::{OPEN_SHED, Spec, Weave};
use crate::weave::shed_pull_n;

/// How many times the shed opens while a point of the warp goes from backrest to fell.
pub fn sheddings(weave: &Weave) -> Option<f64> {
    let shed = weave.shed.as_ref()?;
    Some((shed.front_mm + shed.back_mm) * weave.weft.sett_per_mm)
}

/// How many strokes of the reed a point of the warp meets, where a route tells the reed's way.
pub fn reed_strokes(spec: &Spec) -> Option<f64> {
    spec.passages
        .iter()
        .find_map(|passage| passage.reed_travel_mm)
        .map(|travel_mm| travel_mm * spec.weave.weft.sett_per_mm)
}

/// The end pulled straight in the open shed; none where the spec tells no shed.
pub fn open_shed(weave: &Weave) -> Option<Bend> {
    let shed = weave.shed.as_ref()?;
    Some(Bend {
        place: OPEN_SHED.into(),
        stage: Stage::Weaving,
        system: SystemName::Warp,
        // A straight yarn carries its pull, and its twist.
        profile: vec![Stretch {
            length_mm: shed.front_mm + shed.back_mm,
            lies_on_mm: None,
            easing: Easing::Held,
        }],
        added_per_mm: 0.0,
        pull_n: weave.warp.tension_n + shed_pull_n(weave),
        temperature_c: None,
        meets: Meets::All,
        governed_by: shed.depth_span.clone(),
        heated_by: None,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pattern::Weaves;
    use crate::span::SourceText;

    fn spec(more: &str) -> Spec {
        let text = format!(
            "name = \"t\"\nroute = \"rapier-weaving\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\n\
             pattern = \"plain\"\n{more}\nwarp = {{ yarn = \"y\", sett = \"12 /cm\", tension = \"50 cN\" }}\n\
             weft = {{ yarn = \"y\", sett = \"10 /cm\", tension = \"50 cN\" }}\n"
        );
        Spec::read(SourceText::new("t", text), &Weaves::builtin()).unwrap()
    }

    /// 68 tex of 2.54 g/cm3 are 0.026772 mm2; at 73 GPa and 1.05217 % they pull 20.56 N.
    #[test]
    fn the_open_shed_adds_its_pull() {
        let spec = spec("shed = { depth = \"40 mm\", front = \"150 mm\", back = \"500 mm\" }");
        let bend = open_shed(&spec.weave).unwrap();
        assert!(
            (bend.pull_n - 0.5 - 20.563).abs() < 0.005,
            "{}",
            bend.pull_n
        );
        assert_eq!(
            (bend.stage, bend.system),
            (Stage::Weaving, SystemName::Warp)
        );
        assert_eq!(&spec.source.text[bend.governed_by], "\"40 mm\"");
        // 650 mm at 10 picks per cm; the reed travels 90 mm.
        assert!((sheddings(&spec.weave).unwrap() - 650.0).abs() < 1e-9);
        assert!((reed_strokes(&spec).unwrap() - 90.0).abs() < 1e-9);
    }

    #[test]
    fn without_a_shed_nothing_is_added() {
        let spec = spec("");
        assert!(open_shed(&spec.weave).is_none() && sheddings(&spec.weave).is_none());
        assert_eq!(shed_pull_n(&spec.weave), 0.0);
    }
}
