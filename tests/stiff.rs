//! Outside checks of the stiff path against the independent solutions of `tests/reference/` (its README says what each
//! is), and the cloth's two states.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

use lissom::path::{StiffYarn, Strand};
use lissom::pattern::Weaves;
use lissom::span::SourceText;
use lissom::spec::Spec;
use lissom::weave::{States, Varied, YarnPath};
use lissom::yarn::{Outline, Shape};
use serde_json::Value;
use std::path::Path;

fn cases(file: &str) -> Vec<Value> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/reference")
        .join(file);
    let text = std::fs::read_to_string(path).unwrap();
    serde_json::from_str(&text).unwrap()
}

fn number(case: &Value, key: &str) -> f64 {
    case[key]
        .as_f64()
        .unwrap_or_else(|| panic!("{key} in {case}"))
}

fn section(case: &Value) -> Outline {
    let of = &case["section"];
    let size = |key: &str| number(of, key);
    let flat = |shape| Outline::new(shape, size("width_mm"), size("thickness_mm")).unwrap();
    match of["kind"].as_str().unwrap() {
        "circle" => Outline::round(size("diameter_mm")).unwrap(),
        "lens" => flat(Shape::Lens),
        "ellipse" => flat(Shape::Ellipse),
        other => panic!("{other}"),
    }
}

/// What the yarn of a case is found to be: crimp and largest curvature, at this accuracy.
fn found(case: &Value, accuracy: f64) -> (f64, f64) {
    let of = |key: &str| number(case, key);
    let strand = Strand {
        half_thickness_mm: 0.5 * of("yarn_thickness_mm"),
        pull_n: of("T_N"),
        rigidity_n_mm2: of("B_Nmm2"),
    };
    let over: Vec<bool> = case["sequence"]
        .as_str()
        .unwrap()
        .chars()
        .map(|c| c == 'O')
        .collect();
    let depth = of("g_mm");
    let height: Vec<f64> = over
        .iter()
        .map(|o| if *o { -depth } else { depth })
        .collect();
    let yarn = StiffYarn::new(&strand, &section(case), accuracy);
    let path = yarn.path(of("p_mm"), &over, &height, None, true).unwrap();
    let (length, _) = yarn.length_and_energy(&path);
    (
        length / (of("p_mm") * over.len() as f64) - 1.0,
        yarn.peak_per_mm(&path),
    )
}

/// By how much a case's crimp and largest curvature are off at this accuracy, relative, without sign.
fn errors(case: &Value, accuracy: f64) -> (f64, f64) {
    let (crimp, peak) = found(case, accuracy);
    (
        (crimp / number(case, "crimp") - 1.0).abs(),
        (peak / number(case, "kappa_max_per_mm") - 1.0).abs(),
    )
}

/// One yarn over fixed sections: 67 cases by multiple shooting on the elastica's pieces, confirmed by finite elements
/// (Python). Aim 0.1 %; met to 1e-7 in crimp and, where the yarn bends at all, curvature.
#[test]
fn one_yarn_matches_every_independent_solution() {
    let list = cases("d_yarn.json");
    assert_eq!(list.len(), 67, "the number of cases never falls");
    for case in &list {
        let id = case["id"].as_str().unwrap();
        let (crimp, peak) = errors(case, 1e-3);
        assert!(crimp < 1e-7, "{id} crimp {crimp:.1e}");
        assert!(peak < 1e-7, "{id} curvature {peak:.1e}");
    }
}

/// The accuracy asked for is met: against the independent solutions, at three accuracies.
#[test]
fn the_accuracy_asked_for_is_met() {
    for accuracy in [1e-2, 1e-4, 1e-7] {
        for case in &cases("d_yarn.json") {
            let id = case["id"].as_str().unwrap();
            let (crimp_error, peak_error) = errors(case, accuracy);
            // The solutions themselves are good to 1e-9.
            let allowed = accuracy + 2e-9;
            assert!(
                crimp_error < allowed && peak_error < allowed,
                "{id} at {accuracy}: {crimp_error:.1e} {peak_error:.1e}"
            );
        }
    }
}

fn spec(text: &str) -> Spec {
    Spec::read(SourceText::new("t", text), &Weaves::builtin()).unwrap()
}

/// Both systems of a plain cloth of round yarns in balance: 8 cases, force balance against energy minimum (Python).
/// The whole way from the spec: the sett is that of the loom.
#[test]
fn coupled_plain_cloth_matches_every_independent_solution() {
    let list = cases("d_coupled.json");
    assert_eq!(list.len(), 8, "the number of cases never falls");
    for case in &list {
        let id = case["id"].as_str().unwrap();
        let of = |key: &str| number(case, key);
        // The fibre is of no account: size, rigidity and pull are given.
        let yarn = |name: &str, size: f64, rigidity: f64| {
            let tex = 2.54e3 * 0.5 * std::f64::consts::PI / 4.0 * size * size;
            // A rigidity of zero is no yarn's: that case is the taut cloth.
            let rigidity = if rigidity > 0.0 { rigidity } else { 1.0 };
            format!(
                "[yarn.{name}]\nfibre = \"e-glass\"\nlinear_density = \"{tex} tex\"\nfilaments = 1000\nshape = \"round\"\n\
                 width = \"{size} mm\"\nbending_rigidity = \"{rigidity} N mm2\"\n"
            )
        };
        let model = if of("B1_Nmm2") > 0.0 { "stiff" } else { "taut" };
        let text = format!(
            "name = \"t\"\n{}{}[weave]\npattern = \"plain\"\npath = \"{model}\"\nsett_at = \"loom\"\nrest = \"100 %\"\n\
             warp = {{ yarn = \"a\", sett = \"{} /mm\", tension = \"{} N\" }}\n\
             weft = {{ yarn = \"b\", sett = \"{} /mm\", tension = \"{} N\" }}\n",
            yarn("a", of("t1_mm"), of("B1_Nmm2")),
            yarn("b", of("t2_mm"), of("B2_Nmm2")),
            1.0 / of("p1_mm"),
            of("T1_N"),
            1.0 / of("p2_mm"),
            of("T2_N"),
        );
        let spec = spec(&text.replace(" /mm\"", "e3 /m\""));
        let states = States::build(&spec.weave, Varied::default()).unwrap();
        let cloth = states.on_loom();
        for (yarn, n) in [(&cloth.warp, "1"), (&cloth.weft, "2")] {
            let of = |key: &str| of(&key.replace('#', n));
            let near = |ours: f64, theirs: f64, what: &str| {
                assert!(
                    (ours / theirs - 1.0).abs() < 1e-6,
                    "{id} {what}{n}: {ours} against {theirs}"
                );
            };
            near(yarn.crimp, of("crimp#"), "crimp");
            near(yarn.wave_height_mm, of("h#_mm"), "h");
            near(
                1.0 / yarn.min_radius_mm.unwrap(),
                of("kappa#_max_per_mm"),
                "curvature",
            );
            match &yarn.path {
                YarnPath::Stiff(system) => near(system.push_n, of("contact_force_N"), "force"),
                YarnPath::Taut { .. } => assert_eq!(model, "taut"),
            }
        }
        // With all of the pull left, both states are one.
        assert!((states.cloth.warp.crimp / cloth.warp.crimp - 1.0).abs() < 1e-6);
    }
}

/// What a case tells of both systems at rest, or nothing where it is not solved.
fn cloth(pattern: &str, sett: f64, warp_n: f64, weft_n: f64, extra: &str) -> Option<States> {
    let text = format!(
        "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\npattern = \"{pattern}\"\n{extra}\
         warp = {{ yarn = \"y\", sett = \"{sett} /cm\", tension = \"{warp_n} N\" }}\n\
         weft = {{ yarn = \"y\", sett = \"12 /cm\", tension = \"{weft_n} N\" }}\n"
    );
    States::build(&spec(&text).weave, Varied::default()).ok()
}

/// Both states are one cloth: the yarns keep their lengths, the sett is that of the state it was counted in.
#[test]
fn yarns_keep_their_lengths_between_the_states() {
    for extra in ["", "sett_at = \"loom\"\n", "rest = \"0 %\"\n"] {
        for pattern in ["plain", "twill 2/2", "satin 8 step 3"] {
            let states = cloth(pattern, 14.0, 0.8, 0.5, extra).unwrap();
            let (rest, loom) = (&states.cloth, states.on_loom.as_ref().unwrap());
            let counted = if extra.contains("loom") { loom } else { rest };
            assert!((1.0 / counted.warp.spacing_mm - 1.4).abs() < 1e-12);
            assert!((1.0 / counted.weft.spacing_mm - 1.2).abs() < 1e-12);
            for (crimp, spacing) in [
                (
                    (rest.warp.crimp, loom.warp.crimp),
                    (rest.weft.spacing_mm, loom.weft.spacing_mm),
                ),
                (
                    (rest.weft.crimp, loom.weft.crimp),
                    (rest.warp.spacing_mm, loom.warp.spacing_mm),
                ),
            ] {
                let length = |crimp: f64, spacing: f64| (1.0 + crimp) * spacing;
                let (a, b) = (length(crimp.0, spacing.0), length(crimp.1, spacing.1));
                assert!((a / b - 1.0).abs() < 1e-8, "{pattern} {a} {b}");
            }
            assert_ne!(rest.warp.crimp, loom.warp.crimp);
        }
    }
}

/// More warp tension never raises the warp's crimp: it lowers it.
#[test]
fn more_warp_tension_never_raises_warp_crimp() {
    for pattern in ["plain", "twill 2/1", "satin 5"] {
        let mut last = f64::INFINITY;
        for warp_n in [0.1, 0.2, 0.4, 0.8, 1.6, 3.2] {
            let crimp = cloth(pattern, 12.0, warp_n, 0.5, "")
                .unwrap()
                .cloth
                .warp
                .crimp;
            assert!(crimp < 0.99 * last, "{pattern} {warp_n}");
            last = crimp;
        }
    }
}

/// What holds a measured crimp holds it in both states: with all of the pull left they are one, whichever was counted.
#[test]
fn a_measured_crimp_is_that_of_both_states_under_one_pull() {
    for sett_at in ["finished", "loom"] {
        let text = format!(
            "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"100 tex\"\nflatness = 4\n[weave]\n\
             pattern = \"plain\"\nrest = \"100 %\"\nsett_at = \"{sett_at}\"\n\
             warp = {{ yarn = \"y\", sett = \"10 /cm\", tension = \"50 cN\", crimp = \"0.4 %\" }}\n\
             weft = {{ yarn = \"y\", sett = \"9 /cm\", tension = \"50 cN\" }}\n"
        );
        let states = States::build(&spec(&text).weave, Varied::default()).unwrap();
        let (rest, loom) = (&states.cloth, states.on_loom.as_ref().unwrap());
        for cloth in [rest, loom] {
            assert!((cloth.warp.crimp / 0.004 - 1.0).abs() < 1e-6);
        }
        assert!((rest.weft.crimp / loom.weft.crimp - 1.0).abs() < 1e-6);
    }
}

/// Measured crimp and thickness are met.
#[test]
fn measured_crimp_and_thickness_are_met() {
    let base = cloth("plain", 12.0, 0.5, 0.5, "").unwrap().cloth;
    let text = |system: &str, extra: &str| {
        format!(
            "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\npattern = \"plain\"\n{extra}\
             warp = {{ yarn = \"y\", sett = \"12 /cm\"{system} }}\nweft = {{ yarn = \"y\", sett = \"12 /cm\" }}\n"
        )
    };
    let asked = 0.7 * base.warp.crimp;
    let states = States::build(
        &spec(&text(&format!(", crimp = \"{} %\"", 100.0 * asked), "")).weave,
        Varied::default(),
    )
    .unwrap();
    assert!((states.cloth.warp.crimp / asked - 1.0).abs() < 1e-6);
    assert!(states.cloth.weft.crimp > base.weft.crimp);
    let thickness = 0.9 * base.thickness_mm;
    let states = States::build(
        &spec(&text("", &format!("thickness = \"{thickness} mm\"\n"))).weave,
        Varied::default(),
    )
    .unwrap();
    assert!((states.cloth.thickness_mm / thickness - 1.0).abs() < 1e-6);
}

/// A crimp of nothing is met: the warp lies straight, as the taut one does.
#[test]
fn a_straight_warp_is_no_jam() {
    let text = "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\npattern = \"plain\"\n\
                warp = { yarn = \"y\", sett = \"10 /cm\", crimp = \"0 %\" }\nweft = { yarn = \"y\", sett = \"10 /cm\" }\n";
    let states = States::build(&spec(text).weave, Varied::default()).unwrap();
    assert!(!states.cloth.closed.jam_limited);
    assert!(states.cloth.warp.crimp < 1e-9);
}
