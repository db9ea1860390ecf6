//! `compare` as a person meets it, and held against single checks.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

mod common;

use common::{lissom, root};
use serde_json::Value;

const KILN: &str = "examples/kiln-curtain.toml";

fn run(arguments: &[&str]) -> String {
    let output = lissom(arguments, "");
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    String::from_utf8(output.stdout).unwrap()
}

fn json(arguments: &[&str]) -> Value {
    serde_json::from_str(&run(&[arguments, &["--format", "json"]].concat())).unwrap()
}

/// The best row and every other are what a single check of the changed text says.
#[test]
fn rows_equal_single_checks_and_the_best_is_the_best_of_them() {
    let report = json(&[
        "compare",
        KILN,
        "--vary",
        "fibre.curtain-alumina.filament_diameter=6,7,9,11 um",
        "--vary",
        "weave.pattern=plain,twill-2-2,satin-8",
    ]);
    let text = std::fs::read_to_string(root().join(KILN)).unwrap();
    let variants = report["variants"].as_array().unwrap();
    assert_eq!(variants.len(), 12);
    let mut best: Option<(bool, f64, usize)> = None;
    for (index, variant) in variants.iter().enumerate() {
        let (um, pattern) = (
            &variant["values"][0],
            variant["values"][1].as_str().unwrap(),
        );
        let changed = text
            .replace("\"10.5 um\"", &format!("\"{um} um\""))
            .replace("\"satin-8\"", &format!("\"{pattern}\""));
        let output = lissom(&["check", "-", "--format", "json"], &changed);
        let single: Value = serde_json::from_slice(&output.stdout).unwrap();
        assert_eq!(single["verdict"], variant["verdict"], "{um} {pattern}");
        let worst = &single["bends"][single["worst"].as_u64().unwrap() as usize];
        assert_eq!(worst["reserve"], variant["reserve"], "{um} {pattern}");
        assert_eq!(single["cloth"], variant["cloth"], "{um} {pattern}");
        assert_eq!(single["fails"], variant["fails"]);
        let (holds, reserve) = (
            single["verdict"] == "holds",
            worst["reserve"].as_f64().unwrap(),
        );
        if single["fails"] == false && best.is_none_or(|(h, r, _)| (holds, reserve) > (h, r)) {
            best = Some((holds, reserve, index));
        }
    }
    assert_eq!(report["best"].as_u64().unwrap() as usize, best.unwrap().2);
}

#[test]
fn the_edge_lies_between_holding_and_failing() {
    let report = json(&[
        "compare",
        KILN,
        "--vary",
        "weave.warp.sett=14..50 /cm step 4",
    ]);
    let variants = report["variants"].as_array().unwrap();
    let fails: Vec<bool> = variants
        .iter()
        .map(|v| v["jammed"] == true || v["fails"] == true)
        .collect();
    assert!(fails.contains(&true) && fails.contains(&false));
    for (index, variant) in variants.iter().enumerate() {
        let turns = |other: Option<&bool>| other.is_some_and(|other| *other != fails[index]);
        let before = index.checked_sub(1).and_then(|before| fails.get(before));
        assert_eq!(
            variant["edge"] == true,
            turns(before) || turns(fails.get(index + 1)),
            "{index}"
        );
    }
}

/// CSV holds the rows of JSON, in order, whatever the threads.
#[test]
fn csv_has_the_same_rows_in_order_for_any_threads() {
    let vary = [
        "--vary",
        "weave.warp.sett=8..26 /cm step 0.05",
        "--vary",
        "weave.weft.sett=8,12,200 /cm",
    ];
    let csv = |threads: &str| {
        run(&[
            &["compare", KILN],
            &vary[..],
            &["--format", "csv", "--threads", threads],
        ]
        .concat())
    };
    let one = csv("1");
    assert_eq!(one, csv("4"));
    let report = json(&[&["compare", KILN], &vary[..]].concat());
    let mut reader = csv::Reader::from_reader(one.as_bytes());
    assert_eq!(&reader.headers().unwrap()[1], "weave.warp.sett [/cm]");
    let records: Vec<csv::StringRecord> = reader.records().map(Result::unwrap).collect();
    let variants = report["variants"].as_array().unwrap();
    assert_eq!(records.len(), variants.len());
    for (record, variant) in records.iter().zip(variants) {
        assert_eq!(
            record[1].parse::<f64>().unwrap(),
            variant["values"][0].as_f64().unwrap()
        );
        assert_eq!(&record[3], variant["verdict"].as_str().unwrap());
        if let Some(reserve) = variant["reserve"].as_f64() {
            assert!((record[5].parse::<f64>().unwrap() / reserve - 1.0).abs() < 1e-5);
        }
    }
    assert!(records.iter().any(|record| &record[3] == "jammed"));
}

#[test]
fn specs_stand_side_by_side() {
    let report = json(&["compare", KILN, "examples/bare-twill.toml"]);
    assert_eq!(report["variants"].as_array().unwrap().len(), 2);
    assert_eq!(report["specs"][1]["name"], "Store cover, first idea");
    assert_eq!(report["variants"][1]["spec"], 1);
    insta::assert_snapshot!(
        "compare-specs",
        run(&[
            "compare",
            KILN,
            "examples/bare-twill.toml",
            "examples/rod-grid.toml"
        ])
    );
    insta::assert_snapshot!(
        "compare-grid.markdown",
        run(&[
            "compare",
            KILN,
            "--vary",
            "weave.pattern=plain,satin-8",
            "--vary",
            "weave.warp.sett=10..34 /cm step 12",
            "--format",
            "markdown"
        ])
    );
}

#[test]
fn what_is_wrong_is_said_and_nothing_is_written() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("rows.csv");
    for (vary, message) in [
        ("weave.warp.set=1 /cm", "the nearest is `weave.warp.sett`"),
        ("weave.warp.sett=1 tex", "is the unit of a linear density"),
        ("weave.pattern=plain,plane", "`plane` names no weave"),
        ("yarn.fase.width=1 mm", "the nearest is `face`"),
        ("passage.heald.radius=1 mm", "the nearest is `heald eye`"),
        (
            "yarn.face.packing=0.5,2",
            "in the variant yarn.face.packing=2",
        ),
        ("weave.warp.sett", "has no `=`"),
    ] {
        let output = lissom(
            &[
                "compare",
                KILN,
                "--vary",
                vary,
                "--format",
                "csv",
                "--out",
                file.to_str().unwrap(),
            ],
            "",
        );
        let text = String::from_utf8(output.stderr).unwrap();
        assert_eq!(output.status.code(), Some(2), "{vary}");
        assert!(text.contains(message), "{vary}: {text}");
        assert!(output.stdout.is_empty() && !file.exists(), "{vary}");
    }
    assert_eq!(std::fs::read_dir(folder.path()).unwrap().count(), 0);
}
