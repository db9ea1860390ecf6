//! The bends of a cloth's yarns: the crowns, on the loom and at rest.
//!
//! All crowns of a system are alike in the taut model, so one bend tells them all, from the middle of a crest
//! to the straight piece. It is met twice: on the loom at the peak of the pull, and at rest with what pull
//! friction and set keep. Brittle fibres are worse off with the pull, fibres weak in compression without.

use super::cloth::{Cloth, ClothYarn, StiffSystem, YarnPath};
use super::shed::warp_peak_n;
use crate::bend::{Bend, Crown, Easing, Meets, Stage, Stretch, SystemName};
use crate::path::half_crown;
use crate::spec::{System, Weave};

/// One crown bend for each system and state, warp first; `on_loom` is the same cloth where paths have one state.
pub fn crowns(weave: &Weave, cloth: &Cloth, on_loom: &Cloth) -> Vec<Bend> {
    let mut bends = Vec::with_capacity(4);
    for (name, system) in [
        (SystemName::Warp, &weave.warp),
        (SystemName::Weft, &weave.weft),
    ] {
        let peak_n = match name {
            SystemName::Warp => warp_peak_n(weave),
            SystemName::Weft => weave.peak * system.tension_n,
        };
        let loom = (Stage::Loom, peak_n, on_loom);
        let rest = (Stage::Rest, weave.rest * system.tension_n, cloth);
        for (stage, pull_n, cloth) in [loom, rest] {
            let (yarn, crossed) = match name {
                SystemName::Warp => (&cloth.warp, &cloth.weft),
                SystemName::Weft => (&cloth.weft, &cloth.warp),
            };
            bends.push(crown(name, system, yarn, crossed.spacing_mm, stage, pull_n));
        }
    }
    bends
}

fn crown(
    name: SystemName,
    system: &System,
    yarn: &ClothYarn,
    crossed_spacing_mm: f64,
    stage: Stage,
    pull_n: f64,
) -> Bend {
    let mut profile = profile(yarn, crossed_spacing_mm);
    if profile.is_empty() {
        // A straight yarn still carries its pull, and its twist.
        profile.push(Stretch {
            length_mm: crossed_spacing_mm,
            lies_on_mm: None,
            easing: Easing::Held,
        });
    }
    // Each change has the half crown before it and the half crown behind it.
    let halves_per_mm = 2.0 * yarn.changes_per_crossing / (crossed_spacing_mm * (1.0 + yarn.crimp));
    Bend {
        place: match name {
            SystemName::Warp => "warp crown over weft".into(),
            SystemName::Weft => "weft crown over warp".into(),
        },
        stage,
        system: name,
        profile,
        added_per_mm: 0.0,
        pull_n,
        temperature_c: None,
        meets: Meets::TimesPerMetre(1e3 * halves_per_mm),
        governed_by: system.span.clone(),
        heated_by: None,
    }
}

/// What a half crown is made of.
fn profile(yarn: &ClothYarn, crossed_spacing_mm: f64) -> Vec<Stretch> {
    match &yarn.path {
        YarnPath::Taut { wave, passing } => {
            half_crown(wave.crest(), passing, yarn.wave_height_mm, wave.flanks())
        }
        YarnPath::Stiff(system) => stiff_profile(yarn, system, crossed_spacing_mm),
    }
}

/// The solved path of the whole system, as much of it as one half crown has on average.
fn stiff_profile(yarn: &ClothYarn, system: &StiffSystem, crossed_spacing_mm: f64) -> Vec<Stretch> {
    let crown = Crown {
        drop_mm: 0.5 * yarn.wave_height_mm,
        arm_mm: 0.5 * crossed_spacing_mm,
        flanks: system.flanks,
    };
    let half_thickness_mm = 0.5 * yarn.laid.outline.thickness_mm();
    system
        .samples
        .iter()
        .map(|sample| Stretch {
            length_mm: sample.length_mm,
            lies_on_mm: (sample.curvature_per_mm > 0.0)
                .then(|| 1.0 / sample.curvature_per_mm - half_thickness_mm),
            easing: Easing::Path {
                turn_rad: sample.turn_rad,
                crown,
                section_mm: system.section_mm,
            },
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pattern::Weaves;
    use crate::span::SourceText;
    use crate::spec::Spec;

    fn bends(pattern: &str, yarn: &str) -> (Spec, Cloth, Vec<Bend>) {
        let text = format!(
            "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n{yarn}\n[weave]\npattern = \"{pattern}\"\n\
             rest = \"20 %\"\npeak = 3\nwarp = {{ yarn = \"y\", sett = \"12 /cm\", tension = \"50 cN\" }}\n\
             weft = {{ yarn = \"y\", sett = \"8 /cm\", tension = \"50 cN\" }}\n"
        );
        let spec = Spec::read(SourceText::new("t", text), &Weaves::builtin()).unwrap();
        let cloth = Cloth::build(&spec.weave, 1.0).unwrap();
        let bends = crowns(&spec.weave, &cloth, &cloth);
        (spec, cloth, bends)
    }

    #[test]
    fn crowns_carry_the_peak_on_the_loom_and_the_rest_at_rest() {
        let (_, _, bends) = bends("plain", "");
        let told: Vec<_> = bends.iter().map(|b| (b.system, b.stage)).collect();
        use SystemName::{Warp, Weft};
        assert_eq!(
            told,
            [
                (Warp, Stage::Loom),
                (Warp, Stage::Rest),
                (Weft, Stage::Loom),
                (Weft, Stage::Rest)
            ]
        );
        for bend in &bends {
            let pull = if bend.stage == Stage::Loom { 1.5 } else { 0.1 };
            assert!((bend.pull_n - pull).abs() < 1e-12, "{bend:?}");
        }
    }

    /// The end that is woven in is under the open shed's pull up to the fell: 20.563 N by hand (`shed`) and the mean.
    #[test]
    fn an_open_shed_pulls_the_crowns_on_the_loom() {
        let text = "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\npattern = \"plain\"\n\
                    shed = { depth = \"40 mm\", front = \"150 mm\", back = \"500 mm\" }\n\
                    warp = { yarn = \"y\", sett = \"12 /cm\", tension = \"50 cN\" }\nweft = { yarn = \"y\", sett = \"8 /cm\", tension = \"50 cN\" }\n";
        let spec = Spec::read(SourceText::new("t", text), &Weaves::builtin()).unwrap();
        let cloth = Cloth::build(&spec.weave, 1.0).unwrap();
        let pulls: Vec<f64> = crowns(&spec.weave, &cloth, &cloth)
            .iter()
            .map(|bend| bend.pull_n)
            .collect();
        assert!((pulls[0] - 0.5 - 20.563).abs() < 0.005, "{pulls:?}");
        assert!(
            (pulls[2] - 1.0).abs() < 1e-12,
            "the weft knows no shed: {pulls:?}"
        );
    }

    /// The warp crosses the picks: its inflection is half a pick spacing (0.625 mm) away, half its wave down.
    #[test]
    fn a_crown_reaches_to_the_inflection() {
        let (_, cloth, bends) = bends("plain", "");
        let Easing::Crown(crown) = bends[0].profile[0].easing else {
            panic!("{:?}", bends[0].profile)
        };
        assert!((crown.arm_mm - 0.625).abs() < 1e-12);
        assert!((crown.drop_mm - cloth.warp.wave_height_mm / 2.0).abs() < 1e-12);
        assert_eq!(crown.flanks, crate::bend::Flanks::Both);
        let (_, _, twill) = super::tests::bends("twill 2/2", "");
        let Easing::Crown(crown) = twill[0].profile[0].easing else {
            panic!("{:?}", twill[0].profile)
        };
        assert_eq!(crown.flanks, crate::bend::Flanks::One);
    }

    #[test]
    fn a_flat_yarn_turns_at_its_shoulder() {
        let (_, cloth, bends) = bends("plain", "shape = \"racetrack\"");
        assert!(matches!(bends[0].profile[0].easing, Easing::Held));
        let Easing::Shoulder(shoulder) = bends[0].profile[1].easing else {
            panic!("{:?}", bends[0].profile)
        };
        assert_eq!(shoulder.start_rad, 0.0);
        // Back to the crest and on to the inflection make half a spacing.
        let reach = shoulder.back_mm + shoulder.half_straight_mm * shoulder.slope_rad.cos();
        assert!((reach - 0.625).abs() < 1e-12);
        assert!((shoulder.slope_rad - cloth.warp.slope_rad).abs() < 1e-12);
    }

    /// Plain: two half crowns for every crossing, 8 picks per cm of cloth, in 1 + crimp of yarn.
    #[test]
    fn crowns_are_counted_per_metre_of_yarn() {
        let (_, cloth, bends) = bends("plain", "");
        let Meets::TimesPerMetre(times) = bends[0].meets else {
            panic!("{:?}", bends[0].meets)
        };
        assert!((times - 2.0 * 800.0 / (1.0 + cloth.warp.crimp)).abs() < 1e-9);
    }
}
