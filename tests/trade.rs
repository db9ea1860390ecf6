//! Known good and known bad by the trade (common practice, no source): cloths that are woven daily must not
//! fail, cloths that nobody can weave must. Nothing here is tuned; where the model disagrees, the test says so
//! and the README's table of checks lists it.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

mod common;

use common::{outcome, spec};
use lissom::judge::{Limit, State};

fn fails(text: &str) -> bool {
    outcome(text).fails(&spec(text), false)
}

fn cloth(yarn: &str, weave: &str, warp: &str, weft: &str) -> String {
    format!(
        "name = \"test\"\n[yarn.y]\n{yarn}\n[weave]\npattern = \"{weave}\"\n\
         warp = {{ yarn = \"y\", sett = \"{warp}\" }}\nweft = {{ yarn = \"y\", sett = \"{weft}\" }}\n"
    )
}

/// 44 x 32 per inch, 66 tex (G 75): woven daily for printed boards.
#[test]
fn a_7628_like_glass_plain_holds() {
    let text = cloth(
        "fibre = \"e-glass\"\nlinear_density = \"66.1 tex\"\nfilaments = 400\ntwist = \"28 /m Z\"",
        "plain",
        "44 /in",
        "32 /in",
    );
    assert!(!fails(&text));
    assert!(outcome(&text).verdict() <= State::Close);
}

#[test]
fn a_3k_carbon_five_end_satin_holds() {
    let text = cloth(
        "fibre = \"carbon-pan-sm\"\nlinear_density = \"198 tex\"\nfilaments = 3000",
        "satin-5",
        "7 /cm",
        "7 /cm",
    );
    assert!(!fails(&text));
    assert!(outcome(&text).verdict() <= State::Close);
}

#[test]
fn a_flat_para_aramid_plain_does_not_fail() {
    for fibre in ["aramid-std", "aramid-hm"] {
        let text = cloth(
            &format!("fibre = \"{fibre}\"\nlinear_density = \"1500 den\""),
            "plain",
            "17 /in",
            "17 /in",
        );
        assert!(!fails(&text), "{fibre}");
    }
}

/// An open mesh of soft wire, aperture four times the wire: it yields and does not break.
#[test]
fn an_annealed_fine_wire_mesh_yields_and_does_not_fail() {
    let text = cloth(
        "fibre = \"stainless-annealed\"\nfilaments = 1\nfilament_diameter = \"0.1 mm\"",
        "plain",
        "20 /cm",
        "20 /cm",
    );
    assert!(!fails(&text));
    assert_eq!(outcome(&text).verdict(), State::Yields);
}

/// KNOWN DISAGREEMENT. A dense mesh (100 per inch of 0.114 mm wire, pitch 2.2 wires) is woven daily too, and the
/// model says it breaks: bent round a wire of its own thickness its outer strain is near 0.5, above the 30 %
/// elongation of the record. Elongation is read over a gauge length and leaves out most of the necking; soft wire
/// passes a wrap round its own diameter. When this test fails, the model has learned better: mend the README.
#[test]
fn a_dense_annealed_mesh_is_said_to_break_though_it_is_woven() {
    let text = cloth(
        "fibre = \"stainless-annealed\"\nfilaments = 1\nfilament_diameter = \"0.114 mm\"",
        "plain",
        "100 /in",
        "100 /in",
    );
    let outcome = outcome(&text);
    let worst = outcome.worst_finding(false).unwrap();
    assert_eq!(
        (worst.state, worst.limit),
        (State::Breaks, Some(Limit::Strain))
    );
    let reserve = worst.reserve().unwrap();
    assert!((0.55..0.7).contains(&reserve), "{reserve}");
}

#[test]
fn a_silicon_carbide_monofilament_in_a_plain_weave_fails() {
    for sett in ["5 /cm", "10 /cm", "20 /cm"] {
        let text = cloth(
            "fibre = \"sic-cvd-mono\"\nfilaments = 1\nfilament_diameter = \"140 um\"",
            "plain",
            sett,
            sett,
        );
        assert!(fails(&text), "{sett}");
        assert_eq!(outcome(&text).verdict(), State::Breaks);
    }
}

#[test]
fn a_pitch_carbon_tow_over_a_sharp_edge_fails() {
    let base = cloth(
        "fibre = \"carbon-pitch-uhm\"\nlinear_density = \"320 tex\"\nfilaments = 2000",
        "twill 2/2",
        "4 /cm",
        "4 /cm",
    );
    let with_edge = format!(
        "{base}[[passage]]\nyarn = \"warp\"\nname = \"edge\"\nradius = \"0.5 mm\"\nturn = \"90 deg\"\n"
    );
    let outcome = outcome(&with_edge);
    let edge = outcome
        .findings
        .iter()
        .find(|finding| finding.place == "edge")
        .unwrap();
    assert_eq!(edge.state, State::Breaks);
    assert_eq!(edge.limit, Some(Limit::Compression));
    assert!(fails(&with_edge));
}
