//! How much the verdict hangs on the yarns' assumed outlines and on their rigidity.
//!
//! A mill knows sett and tex, seldom a yarn's width. The flow runs again with the assumed flatness (width over
//! thickness, area kept) at 0.7 and 1.4 times its value; measured outlines and solid or round yarns stay.
//! Nor does it know a yarn's bending rigidity: stiff paths are found again with both of its bounds, filaments that slide
//! freely and the fully bonded yarn. The bounds are those of the path; how bonding strains the filaments stays the spec's.

use crate::flow::{Outcome, RigidityBound, Variation, Varied, run_varied};
use crate::spec::{PathModel, Spec};
use crate::weave::Cloth;
use crate::yarn::Basis;
use rayon::prelude::*;

/// The factors on the assumed flatness.
pub const FLATNESS_FACTORS: [f64; 2] = [0.7, 1.4];

/// The worst of the spec at each factor; empty where no outline is assumed.
pub fn sensitivity(spec: &Spec, cloth: &Cloth) -> Vec<Variation> {
    let assumed = [&cloth.warp, &cloth.weft]
        .iter()
        .any(|yarn| matches!(yarn.laid.basis, Basis::Assumed | Basis::OneSize));
    if !assumed {
        return Vec::new();
    }
    FLATNESS_FACTORS
        .par_iter()
        .flat_map_iter(|factor| toward(spec, *factor))
        .collect()
}

/// The worst of the spec with the rigidity's bounds; empty where paths are taut or every yarn is one filament.
pub fn rigidity(spec: &Spec) -> Vec<Variation> {
    let bundles = [&spec.weave.warp, &spec.weave.weft]
        .iter()
        .any(|system| !system.yarn.is_monofilament());
    if spec.weave.path == PathModel::Taut || !bundles {
        return Vec::new();
    }
    [RigidityBound::Free, RigidityBound::Bonded]
        .into_par_iter()
        .map(|rigidity| {
            worst_of(
                spec,
                Varied {
                    rigidity,
                    ..Varied::default()
                },
            )
        })
        .collect()
}

/// The worst of a spec so varied.
fn worst_of(spec: &Spec, varied: Varied) -> Variation {
    let worst = |outcome: Outcome| {
        (
            outcome.verdict(),
            outcome
                .worst_finding(spec.require.refuse_kinks)
                .and_then(|finding| finding.deciding_reserve()),
        )
    };
    Variation {
        varied,
        worst: run_varied(spec, varied).ok().map(worst),
    }
}

/// The worst at one factor; where there is no cloth, also at the farthest factor towards it that has one.
fn toward(spec: &Spec, flatness_factor: f64) -> Vec<Variation> {
    let at = |flatness: f64| {
        worst_of(
            spec,
            Varied {
                flatness,
                ..Varied::default()
            },
        )
    };
    let asked = at(flatness_factor);
    if asked.worst.is_some() {
        return vec![asked];
    }
    let (mut exists, mut jams) = (1.0, flatness_factor);
    while f64::abs(exists - jams) > 0.005 {
        let middle = 0.5 * (exists + jams);
        if at(middle).worst.is_some() {
            exists = middle
        } else {
            jams = middle
        }
    }
    // Two digits, towards the spec as it stands.
    let told = if exists > 1.0 {
        (100.0 * exists).floor()
    } else {
        (100.0 * exists).ceil()
    } / 100.0;
    if told == 1.0 {
        vec![asked]
    } else {
        vec![asked, at(told)]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::flow::run;
    use crate::pattern::Weaves;
    use crate::span::SourceText;

    fn of(yarn: &str, sett: &str) -> Vec<Variation> {
        let text = format!(
            "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\n{yarn}\n[weave]\npattern = \"plain\"\n\
             warp = {{ yarn = \"y\", sett = \"{sett}\" }}\nweft = {{ yarn = \"y\", sett = \"{sett}\" }}\n"
        );
        let spec = Spec::read(SourceText::new("t", text), &Weaves::builtin()).unwrap();
        let outcome = run(&spec, 1.0).unwrap();
        sensitivity(&spec, &outcome.cloth)
    }

    #[test]
    fn rounder_yarns_bend_each_other_more() {
        let rows = of("linear_density = \"68 tex\"", "12 /cm");
        let factors: Vec<f64> = rows.iter().map(|row| row.varied.flatness).collect();
        assert_eq!(factors, FLATNESS_FACTORS);
        let reserve = |index: usize| rows[index].worst.unwrap().1.unwrap();
        assert!(reserve(0) < reserve(1), "{rows:?}");
    }

    #[test]
    fn measured_and_solid_outlines_are_not_varied() {
        assert!(
            of(
                "linear_density = \"68 tex\"\nwidth = \"0.5 mm\"\nthickness = \"0.12 mm\"",
                "12 /cm"
            )
            .is_empty()
        );
        assert!(of("filaments = 1\nfilament_diameter = \"0.1 mm\"", "12 /cm").is_empty());
    }

    #[test]
    fn where_there_is_no_cloth_the_nearest_that_is_one_is_told() {
        // A given packing cannot give way: at 1.4 the tips nearly touch and nothing passes between.
        let rows = of(
            "linear_density = \"68 tex\"\npacking = 0.65\nwidth = \"0.486 mm\"",
            "17.28 /cm",
        );
        assert_eq!((rows[1].varied.flatness, rows[1].worst), (1.4, None));
        let nearest = rows[2].varied.flatness;
        assert!(
            nearest > 1.2 && nearest < 1.4 && rows[2].worst.is_some(),
            "{rows:?}"
        );
    }
}
