//! Every example, checked as a person would, in every format: the exact output is the product.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

mod common;

use common::{examples, lissom, root};
use serde_json::Value;

fn check(name: &str, format: &str) -> (String, Option<i32>) {
    let path = format!("examples/{name}.toml");
    let output = lissom(&["check", &path, "--format", format], "");
    assert!(
        output.stderr.is_empty(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    (
        String::from_utf8(output.stdout).unwrap(),
        output.status.code(),
    )
}

#[test]
fn every_example_is_as_its_snapshots_say() {
    let names: Vec<String> = examples()
        .iter()
        .map(|path| path.file_stem().unwrap().to_string_lossy().into_owned())
        .collect();
    assert!(names.len() >= 10, "the number of examples never falls");
    for name in &names {
        for format in ["text", "markdown", "json"] {
            let (text, status) = check(name, format);
            assert!(
                !text.contains("null") && !text.contains("NaN") && !text.contains("inf"),
                "{name}"
            );
            let seen = format!("exit status {}\n\n{text}", status.unwrap());
            insta::assert_snapshot!(format!("{name}.{format}"), seen);
        }
    }
}

#[test]
fn every_example_says_that_it_is_invented_and_stands_in_the_list() {
    let list = std::fs::read_to_string(root().join("examples/README.md")).unwrap();
    assert!(list.contains("invented"));
    for path in examples() {
        let text = std::fs::read_to_string(&path).unwrap();
        let name = path.file_name().unwrap().to_string_lossy().into_owned();
        assert!(
            text.lines().next().unwrap().contains("(invented)"),
            "{name}"
        );
        assert!(list.contains(&format!("`{name}`")), "{name}");
    }
}

/// The keys of the JSON contract, their presence and types.
#[test]
fn json_keeps_its_contract() {
    let (text, _) = check("kiln-curtain", "json");
    let report: Value = serde_json::from_str(&text).unwrap();
    assert_eq!(report["lissom"], env!("CARGO_PKG_VERSION"));
    for key in ["name", "reference", "sha256"] {
        assert!(report["spec"][key].is_string(), "{key}");
    }
    assert_eq!(report["verdict"], "holds");
    let cloth = &report["cloth"];
    assert!(cloth["pattern"].is_string() && cloth["jam_limited"].is_boolean());
    for key in [
        "thickness_mm",
        "areal_mass_g_m2",
        "cover",
        "fibre_volume_fraction",
    ] {
        assert!(cloth[key].is_f64(), "{key}");
    }
    for (state, system) in ["cloth", "cloth_on_loom"]
        .into_iter()
        .flat_map(|state| ["warp", "weft"].map(|system| (state, system)))
    {
        for key in [
            "crimp",
            "wave_height_mm",
            "min_radius_mm",
            "float_max",
            "spacing_mm",
            "yarn_width_mm",
            "yarn_thickness_mm",
        ] {
            assert!(
                report[state][system][key].is_number(),
                "{state} {system} {key}"
            );
        }
    }
    for bend in report["bends"].as_array().unwrap() {
        for key in [
            "place", "stage", "system", "yarn", "fibre", "limit", "state", "code",
        ] {
            assert!(bend[key].is_string(), "{key}");
        }
        for key in [
            "radius_mm",
            "curvature_per_mm",
            "tension_n",
            "axial_stress_mpa",
            "bending_stress_mpa",
            "reserve",
            "line",
        ] {
            assert!(bend[key].is_number(), "{key}");
        }
    }
    for row in report["sensitivity"].as_array().unwrap() {
        assert!(row["flatness_factor"].is_number() && row["state"].is_string());
    }
    for key in ["advice", "assumptions", "cautions"] {
        assert!(report[key].is_array(), "{key}");
    }
    assert!(
        !text.contains("null"),
        "a value that does not exist is an absent key"
    );
}

/// A finding's line is the line of the spec that governs it.
#[test]
fn findings_point_at_their_lines() {
    let (text, _) = check("dish-face", "json");
    let report: Value = serde_json::from_str(&text).unwrap();
    let spec = std::fs::read_to_string(root().join("examples/dish-face.toml")).unwrap();
    let line = |place: &str| {
        let bends = report["bends"].as_array().unwrap();
        let bend = bends.iter().find(|bend| bend["place"] == place).unwrap();
        spec.lines()
            .nth(bend["line"].as_u64().unwrap() as usize - 1)
            .unwrap()
    };
    assert_eq!(line("creel eyelet"), "radius = \"0.5 mm\"");
    assert!(line("warp crown over weft").starts_with("warp = "));
}
