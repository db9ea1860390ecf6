//! The open shed: lifting an end from the straight line between backrest and fell lengthens it, and its pull rises.
//!
//! ```text
//! strain = ( sqrt(l1^2 + h^2) - l1 + sqrt(l2^2 + h^2) - l2 )/(l1 + l2) (1 - e)       exact; for a small h
//!        = h^2/2 (1/l1 + 1/l2)/(l1 + l2) (1 - e)                                     (common practice, no source)
//! pull   = mean + E A strain
//! ```
//!
//! h -> depth_mm; l1 -> front_mm, heald to fell; l2 -> back_mm, heald to backrest; e -> let_off, the share that an easing
//! backrest or the let-off takes up; E -> modulus, A -> fibre area of the end. Left out: the pick's own take-up, the
//! yarn's twist and crimp, stretch behind the backrest, and yield: of wire past it the pull is overstated.

use crate::bend::{Bend, Easing, Meets, Stage, Stretch, SystemName};
use crate::spec::{Shed, Spec, Weave};

/// The place of the bend.
pub const OPEN_SHED: &str = "open shed";

/// Strain of an end in the open shed that nothing takes up.
pub fn shed_strain(shed: &Shed) -> f64 {
    // The same as sqrt(l^2 + h^2) - l, without the loss of digits for a small h.
    let longer = |length: f64| shed.depth_mm.powi(2) / (length.hypot(shed.depth_mm) + length);
    let lengthening = longer(shed.front_mm) + longer(shed.back_mm);
    (1.0 - shed.let_off) * lengthening / (shed.front_mm + shed.back_mm)
}

/// Pull that the open shed adds to an end, N; zero where the spec tells no shed.
pub fn shed_pull_n(weave: &Weave) -> f64 {
    let yarn = &weave.warp.yarn;
    weave.shed.as_ref().map_or(0.0, |shed| {
        yarn.fibre.modulus_mpa * yarn.fibre_area_mm2() * shed_strain(shed)
    })
}

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

    fn shed(depth_mm: f64, let_off: f64) -> Shed {
        Shed {
            depth_mm,
            front_mm: 150.0,
            back_mm: 500.0,
            let_off,
            depth_span: 0..0,
        }
    }

    /// 40 mm between 150 and 500 mm: about 1.1 % (common practice, no source); by hand sqrt(150^2 + 40^2) = 155.24175 and
    /// sqrt(500^2 + 40^2) = 501.59745, together 6.8392 mm of 650.
    #[test]
    fn strain_is_that_of_the_trade() {
        let strain = shed_strain(&shed(40.0, 0.0));
        assert!((strain - 6.8392 / 650.0).abs() < 1e-7, "{strain}");
        assert!((strain - 0.011).abs() < 5e-4);
        assert!((shed_strain(&shed(40.0, 0.9)) / strain - 0.1).abs() < 1e-12);
        assert_eq!(shed_strain(&shed(0.0, 0.0)), 0.0);
    }

    #[test]
    fn a_small_lift_follows_the_short_form() {
        let h: f64 = 2.0;
        let short = h.powi(2) / 2.0 * (1.0 / 150.0 + 1.0 / 500.0) / 650.0;
        assert!((shed_strain(&shed(h, 0.0)) / short - 1.0).abs() < 1e-4);
    }

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
