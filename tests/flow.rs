//! The whole flow on small specs, each number by hand: what the stations, the corners and the worst finding are.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

mod common;

use common::outcome;
use lissom::judge::{Finding, State};

const CLOTH: &str = "name = \"t\"\n[yarn.a]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n\
    [yarn.b]\nfibre = \"carbon-pan-sm\"\nlinear_density = \"198 tex\"\n[weave]\npattern = \"plain\"\n\
    warp = { yarn = \"a\", sett = \"8 /cm\", tension = \"50 cN\" }\nweft = { yarn = \"b\", sett = \"6 /cm\", tension = \"80 cN\" }\n";

fn finding<'o>(outcome: &'o lissom::flow::Outcome, place: &str) -> &'o Finding {
    outcome
        .findings
        .iter()
        .find(|finding| finding.place == place)
        .unwrap_or_else(|| panic!("{place}"))
}

/// Behind its wrap, at twice the mean: each system's own pull at the fell.
#[test]
fn stations_are_judged_at_their_peak_behind_the_wrap() {
    let text = format!(
        "{CLOTH}[[passage]]\nyarn = \"warp\"\nname = \"first\"\nradius = \"20 mm\"\nturn = \"90 deg\"\nfriction = 0.2\n\
         [[passage]]\nyarn = \"warp\"\nname = \"last\"\nradius = \"20 mm\"\nturn = \"60 deg\"\nfriction = 0.3\n\
         [[passage]]\nyarn = \"weft\"\nname = \"eyelet\"\nradius = \"2 mm\"\nturn = \"60 deg\"\nfriction = 0.3\n"
    );
    let outcome = outcome(&text);
    let near = |place: &str, pull: f64| {
        let ours = finding(&outcome, place).tension_n;
        assert!((ours / pull - 1.0).abs() < 1e-12, "{place} {ours} {pull}");
    };
    near("last", 1.0);
    near("first", 1.0 / (0.3 * 60f64.to_radians()).exp());
    near("eyelet", 1.6);
    assert_eq!(finding(&outcome, "eyelet").yarn.name, "b");
}

/// An edge along the warp bends the weft fully and the warp not at all, on top of the crowns at rest, twist or not.
#[test]
fn corners_add_to_the_crowns_of_the_system_they_bend() {
    let tool = |axis: &str| {
        format!("[[tool]]\nname = \"edge\"\nradius = \"4 mm\"\nbend_axis = \"{axis}\"\n")
    };
    for twist in ["", "twist = \"40 /m Z\"\n"] {
        let base = CLOTH.replace(
            "linear_density = \"198 tex\"\n",
            &format!("linear_density = \"198 tex\"\n{twist}"),
        );
        for (axis, warp, weft) in [
            ("0 deg", 0.0, 1.0),
            ("90 deg", 1.0, 0.0),
            ("30 deg", 0.25, 0.75),
        ] {
            let outcome = outcome(&format!("{base}{}", tool(axis)));
            let full = 1.0 / (4.0 + outcome.cloth.thickness_mm / 2.0);
            for (system, share) in [("warp", warp), ("weft", weft)] {
                let corner = finding(&outcome, &format!("edge, outer {system} crown"));
                let crown = outcome
                    .findings
                    .iter()
                    .find(|f| f.stage == lissom::bend::Stage::Rest && f.system == corner.system)
                    .unwrap();
                let added = corner.filament.curvature_per_mm - crown.filament.curvature_per_mm;
                assert!(
                    (added - share * full).abs() < 1e-9,
                    "{axis} {system} {added}"
                );
                assert_eq!(corner.tension_n, crown.tension_n);
            }
        }
    }
}

/// Each yarn is judged in its own outline: the innermost filament of the thicker weft lies as near as that of the warp.
#[test]
fn every_system_is_judged_as_it_lies() {
    let outcome = outcome(&format!(
        "{CLOTH}[[passage]]\nyarn = \"weft\"\nname = \"bar\"\nradius = \"3 mm\"\nturn = \"90 deg\"\n"
    ));
    let bar = finding(&outcome, "bar");
    assert!((bar.radius_mm().unwrap() - 3.0035).abs() < 1e-9);
    let length = outcome.cloth.weft.laid.outline.thickness_mm();
    assert!(length > outcome.cloth.warp.laid.outline.thickness_mm());
}

#[test]
fn the_worst_finding_is_the_worst_state_then_the_smallest_reserve() {
    let text = format!(
        "{CLOTH}[[passage]]\nyarn = \"warp\"\nname = \"hot\"\nstage = \"finishing\"\nradius = \"50 mm\"\nturn = \"90 deg\"\ntemperature = \"900 degC\"\n\
         [[passage]]\nyarn = \"warp\"\nname = \"near\"\nradius = \"0.2 mm\"\nturn = \"170 deg\"\n"
    );
    let outcome = outcome(&text);
    let worst = outcome.worst_finding(false).unwrap();
    assert_eq!(
        (worst.place.as_ref(), worst.state),
        ("hot", State::Overheats)
    );
    assert_eq!(outcome.verdict(), State::Overheats);
    let cool = common::outcome(&text.replace("temperature = \"900 degC\"\n", ""));
    let worst = cool.worst_finding(false).unwrap();
    assert_eq!(worst.place, "near");
    assert!(
        cool.findings
            .iter()
            .all(|f| f.reserve().unwrap() >= worst.reserve().unwrap())
    );
}

/// A crushed aramid fails the spec, a kinked one at another edge does not: the one that fails decides.
#[test]
fn what_fails_decides_before_what_does_not() {
    let edge = |name: &str, radius: &str| {
        format!(
            "[[passage]]\nyarn = \"warp\"\nname = \"{name}\"\nradius = \"{radius}\"\nturn = \"90 deg\"\ntension = \"200 cN\"\n"
        )
    };
    let cloth = CLOTH.replace("\"e-glass\"", "\"aramid-std\"");
    let outcome = outcome(&format!(
        "{cloth}{}{}",
        edge("kinking", "0.25 mm"),
        edge("crushing", "0.1 mm")
    ));
    let worst = outcome.worst_finding(false).unwrap();
    assert_eq!(
        (worst.place.as_ref(), worst.fails(false, false)),
        ("crushing", true)
    );
}

/// A designation's nominal diameter gives way to one that is written, and the report says so; G is 9 um.
#[test]
fn a_diameter_other_than_the_designations_is_told() {
    let warned = |diameter: &str| {
        let spec = CLOTH.replace(
            "linear_density = \"68 tex\"",
            &format!("linear_density = \"ECG 75 1/0\"{diameter}"),
        );
        let output = common::lissom(&["check", "-", "--format", "json"], &spec);
        let report: serde_json::Value = serde_json::from_slice(&output.stdout).unwrap();
        report["warnings"].to_string()
    };
    assert!(!warned("").contains("designation"));
    assert!(!warned("\nfilament_diameter = \"9.4 um\"").contains("designation"));
    let other = warned("\nfilament_diameter = \"5 um\"");
    assert!(
        other.contains("filaments of 9.00 um, the spec makes them 5.00 um"),
        "{other}"
    );
}

/// 68 tex of E-glass at 73 GPa, lifted 40 mm between 150 and 500 mm: 20.563 N (`passage::shed`), a tenth of it left by
/// the let-off. With the mean of 0.5 N that is more than the peak of 1 N at the last station, whose mean is the fell's.
#[test]
fn an_open_shed_pulls_at_the_warps_stations_while_weaving() {
    let with = |let_off: &str| {
        let shed = format!(
            "shed = {{ depth = \"40 mm\", front = \"150 mm\", back = \"500 mm\", let_off = {let_off} }}\n[[passage]]\nyarn = \"warp\"\n\
             name = \"beam\"\nstage = \"warping\"\nradius = \"80 mm\"\nturn = \"90 deg\"\n[[passage]]\nyarn = \"warp\"\nname = \"reed\"\n\
             radius = \"1 mm\"\nturn = \"5 deg\"\n[[passage]]\nyarn = \"weft\"\nname = \"eyelet\"\nradius = \"2 mm\"\nturn = \"60 deg\"\n"
        );
        outcome(&format!("{CLOTH}{shed}"))
    };
    let eased = with("0.9");
    let near = |outcome: &lissom::flow::Outcome, place: &str, pull: f64| {
        let ours = finding(outcome, place).tension_n;
        assert!((ours / pull - 1.0).abs() < 1e-4, "{place} {ours} {pull}");
    };
    for place in ["reed", "open shed"] {
        near(&eased, place, 0.5 + 2.0563);
    }
    near(&eased, "beam", 1.0);
    near(&eased, "eyelet", 1.6);
    let slack = with("1");
    near(&slack, "reed", 1.0);
    near(&slack, "open shed", 0.5);
}

/// A station of a route is heated as any other.
#[test]
fn a_routes_station_overheats() {
    let text = CLOTH.replacen("name = \"t\"\n", "name = \"t\"\nroute = \"roll-up\"\n", 1);
    let hot =
        "[[passage]]\nyarn = \"warp\"\nname = \"take-up roller\"\ntemperature = \"330 degC\"\n";
    let outcome = outcome(&format!("{text}{hot}"));
    let heated = |f: &&Finding| f.state == State::Overheats;
    let places: Vec<&str> = outcome
        .findings
        .iter()
        .filter(heated)
        .map(|f| f.place.as_ref())
        .collect();
    assert_eq!(places, ["take-up roller"]);
}

/// On the inner face a wide corner takes off what it adds on the outer; a sharp one bends the flanks of the crown to the
/// other side, at most as the corner bends a straight yarn. Inside, it bends the more the further the layer.
#[test]
fn both_faces_of_a_corner_are_judged() {
    let tool = |more: &str| {
        let tool = format!("[[tool]]\nname = \"edge\"\nbend_axis = \"0 deg\"\n{more}\n");
        outcome(&format!("{CLOTH}{tool}"))
    };
    let curvature = |outcome: &lissom::flow::Outcome, face: &str| {
        finding(outcome, &format!("edge, {face} weft crown"))
            .filament
            .curvature_per_mm
    };
    let wide = tool("radius = \"60 mm\"");
    let thickness = wide.cloth.thickness_mm;
    let full = 1.0 / (60.0 + thickness / 2.0);
    let crown = curvature(&wide, "outer") - full;
    assert!(crown > 2.0 * full);
    assert!((curvature(&wide, "inner") - (crown - full)).abs() < 1e-9);
    // Half of a yarn's crowns lie on either face.
    let met = |finding: &Finding| match finding.meets {
        lissom::bend::Meets::TimesPerMetre(times) => times,
        lissom::bend::Meets::All => f64::NAN,
    };
    let at_rest = |f: &&Finding| {
        f.stage == lissom::bend::Stage::Rest && f.system == lissom::bend::SystemName::Weft
    };
    let all = met(wide.findings.iter().find(at_rest).unwrap());
    for face in ["outer", "inner"] {
        let here = met(finding(&wide, &format!("edge, {face} weft crown")));
        assert!((here - 0.5 * all).abs() < 1e-9, "{here} {all}");
    }
    let full = 1.0 / (6.0 + thickness / 2.0);
    let inner = curvature(&tool("radius = \"6 mm\""), "inner");
    assert!(
        inner > full - crown && inner <= full,
        "{inner} {crown} {full}"
    );
    let third = tool("radius = \"6 mm\"\ncorner = \"inside\"\nlayer = 3");
    let full = 1.0 / (6.0 - 2.5 * thickness);
    assert!((curvature(&third, "outer") - crown - full).abs() < 1e-9);
}
