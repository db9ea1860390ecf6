//! The commands as a person meets them: streams, exit status, files.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

mod common;

use common::{lissom, root};
use lissom::judge::Code;
use serde_json::Value;
use std::process::Output;

fn out(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).unwrap()
}

fn err(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).unwrap()
}

const SMALL: &str = "name = \"s\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\n[weave]\n\
    pattern = \"plain\"\nwarp = { yarn = \"y\", sett = \"10 /cm\" }\nweft = { yarn = \"y\", sett = \"10 /cm\" }\n";

#[test]
fn exit_status_tells_what_became_of_the_spec() {
    let status = |arguments: &[&str]| lissom(arguments, SMALL).status.code();
    assert_eq!(status(&["check", "-"]), Some(0));
    assert_eq!(status(&["check", "examples/rod-grid.toml"]), Some(1));
    assert_eq!(status(&["check", "examples/oven-tape.toml"]), Some(1));
    assert_eq!(
        status(&["check", "examples/hatch-panel.toml"]),
        Some(0),
        "kinks are allowed"
    );
    assert_eq!(
        status(&["check", "--strict", "examples/hatch-panel.toml"]),
        Some(1)
    );
    assert_eq!(
        status(&["check", "--strict", "examples/intake-screen.toml"]),
        Some(1)
    );
    assert_eq!(
        status(&["check", "--strict", "examples/dish-face.toml"]),
        Some(1)
    );
    assert_eq!(
        status(&["check", "--strict", "examples/bare-twill.toml"]),
        Some(0)
    );
    assert_eq!(status(&["check"]), Some(2));
    assert_eq!(status(&["chek"]), Some(2));
    assert_eq!(status(&["check", "no/such/file.toml"]), Some(3));
    assert_eq!(status(&["fibres", "nosuchfibre"]), Some(2));
    assert_eq!(status(&["weaves", "satin 8 step 2"]), Some(2));
    assert_eq!(status(&["explain", "nosuchcode"]), Some(2));
    assert_eq!(status(&["--help"]), Some(0));
    assert_eq!(status(&["--version"]), Some(0));
}

#[test]
fn kinks_refused_fail() {
    let spec = std::fs::read_to_string(root().join("examples/hatch-panel.toml")).unwrap();
    let refused = spec.replace("kinks = \"allow\"", "kinks = \"refuse\"");
    assert_ne!(spec, refused);
    assert_eq!(lissom(&["check", "-"], &refused).status.code(), Some(1));
}

#[test]
fn wrong_input_writes_nothing() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("report.md");
    let path = file.to_str().unwrap();
    let output = lissom(
        &["check", "examples/bare-twill.toml", "-", "--out", path],
        "name = 3",
    );
    assert_eq!(output.status.code(), Some(2));
    assert!(output.stdout.is_empty() && !file.exists());
    assert!(err(&output).contains("<stdin>:1:8"), "{}", err(&output));
}

#[test]
fn out_writes_the_report_whole_and_without_colour() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("report.txt");
    let path = file.to_str().unwrap();
    let arguments = ["check", "examples/bare-twill.toml"];
    let shown = lissom(&arguments, "");
    let written = lissom(
        &[&arguments[..], &["--out", path, "--color", "always"]].concat(),
        "",
    );
    assert_eq!(written.status.code(), Some(0));
    assert!(written.stdout.is_empty());
    assert_eq!(std::fs::read_to_string(&file).unwrap(), out(&shown));
    let nowhere = lissom(
        &[&arguments[..], &["--out", "no/such/folder/x"]].concat(),
        "",
    );
    assert_eq!(nowhere.status.code(), Some(3));
    assert_eq!(
        std::fs::read_dir(folder.path()).unwrap().count(),
        1,
        "nothing is left beside it"
    );
}

/// A report must not overwrite its spec, nor a link or device become a file.
#[cfg(unix)]
#[test]
fn out_spares_specs_links_and_devices() {
    let folder = tempfile::tempdir().unwrap();
    let spec = folder.path().join("spec.toml");
    std::fs::write(&spec, SMALL).unwrap();
    let path = spec.to_str().unwrap();
    for command in ["check", "compare", "limits"] {
        let overwriting = lissom(&[command, path, "--out", path], "");
        assert_eq!(overwriting.status.code(), Some(2), "{command}");
    }
    let csv = ["compare", path, "--format", "csv", "--out", path];
    assert_eq!(lissom(&csv, "").status.code(), Some(2));
    assert_eq!(std::fs::read_to_string(&spec).unwrap(), SMALL);
    let (file, link) = (
        folder.path().join("real.txt"),
        folder.path().join("link.txt"),
    );
    std::fs::write(&file, "old").unwrap();
    std::os::unix::fs::symlink(&file, &link).unwrap();
    assert_eq!(
        lissom(&["check", path, "--out", link.to_str().unwrap()], "")
            .status
            .code(),
        Some(0)
    );
    assert!(link.is_symlink() && std::fs::read_to_string(&file).unwrap().starts_with("HOLDS"));
    assert_eq!(
        lissom(&["check", path, "--out", "/dev/null"], "")
            .status
            .code(),
        Some(0)
    );
    assert!(!std::fs::metadata("/dev/null").unwrap().is_file());
}

/// Time must not grow with the square of what is wrong or long.
#[test]
fn a_flood_of_wrong_keys_is_cut_short() {
    let keys: String = (0..3000).map(|index| format!("key{index} = 1\n")).collect();
    let output = lissom(&["check", "-"], &format!("{keys}{SMALL}"));
    assert_eq!(output.status.code(), Some(2));
    assert!(
        err(&output).contains("and 2950 more like these") && err(&output).contains("3000 problems")
    );
}

#[test]
fn no_colour_in_a_pipe_unless_asked_for() {
    let plain = lissom(&["check", "-"], SMALL);
    assert!(!out(&plain).contains('\u{1b}'));
    let coloured = lissom(&["--color", "always", "check", "-"], SMALL);
    assert!(out(&coloured).contains('\u{1b}'));
    let problem = lissom(&["check", "-"], "name = 3");
    assert!(!err(&problem).contains('\u{1b}'));
}

#[test]
fn several_specs_are_an_array_and_one_an_object() {
    let one = lissom(&["check", "-", "--format", "json"], SMALL);
    assert!(
        serde_json::from_slice::<Value>(&one.stdout)
            .unwrap()
            .is_object()
    );
    let two = lissom(
        &["check", "-", "examples/bare-twill.toml", "--format", "json"],
        SMALL,
    );
    let array: Value = serde_json::from_slice(&two.stdout).unwrap();
    assert_eq!(array.as_array().unwrap().len(), 2);
    assert_eq!(array[0]["spec"]["name"], "s");
}

#[test]
fn the_starter_spec_checks_cleanly_and_is_never_written_over() {
    let starter = lissom(&["new"], "");
    let checked = lissom(&["check", "--strict", "-"], &out(&starter));
    assert_eq!(checked.status.code(), Some(0), "{}", err(&checked));
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("mine.toml");
    let path = file.to_str().unwrap();
    assert_eq!(lissom(&["new", path], "").status.code(), Some(0));
    assert_eq!(std::fs::read_to_string(&file).unwrap(), out(&starter));
    std::fs::write(&file, "mine").unwrap();
    assert_eq!(lissom(&["new", path], "").status.code(), Some(2));
    assert_eq!(std::fs::read_to_string(&file).unwrap(), "mine");
}

#[test]
fn fibres_lists_and_shows() {
    let list = out(&lissom(&["fibres"], ""));
    assert!(list.lines().filter(|line| line.contains("brittle")).count() > 15);
    let json: Value =
        serde_json::from_slice(&lissom(&["fibres", "--format", "json"], "").stdout).unwrap();
    let all = json.as_array().unwrap();
    assert!(all.len() >= 28);
    for fibre in all {
        for key in ["name", "id", "kind"] {
            assert!(fibre[key].is_string(), "{key}");
        }
        for key in [
            "filament_diameter_um",
            "modulus_gpa",
            "strength_gpa",
            "density_g_cm3",
            "min_radius_mm",
            "specific_modulus",
            "specific_strength",
        ] {
            assert!(fibre[key].is_number(), "{key}");
        }
        assert!(fibre["sources"].is_object());
    }
    let radius = |fibre: &Value| fibre["whole_radius_mm"].as_f64().unwrap();
    assert!(
        all.windows(2)
            .all(|pair| radius(&pair[0]) <= radius(&pair[1])),
        "sorted by how well they bend"
    );
    let shown = out(&lissom(&["fibres", "Para-aramid, high modulus"], ""));
    for word in [
        "kink bands form at",
        "max_temp_air_c",
        "handling",
        "Sources",
        "from memory",
    ] {
        assert!(shown.contains(word), "{word}");
    }
}

#[test]
fn weaves_lists_and_draws() {
    assert!(out(&lissom(&["weaves"], "")).lines().count() >= 24);
    insta::assert_snapshot!("weaves-satin-8", out(&lissom(&["weaves", "satin-8"], "")));
    insta::assert_snapshot!(
        "weaves-words",
        out(&lissom(&["weaves", "twill 2/1 s", "--ascii"], ""))
    );
}

#[test]
fn routes_lists_and_shows_every_figure_with_its_source() {
    let list = out(&lissom(&["routes"], ""));
    for name in [
        "winding",
        "creel-warping",
        "rapier-weaving",
        "shuttle-weaving",
        "maypole-braiding",
        "roll-up",
    ] {
        assert!(list.contains(name), "{name}");
    }
    insta::assert_snapshot!(
        "routes-rapier-weaving",
        out(&lissom(&["routes", "rapier-weaving"], ""))
    );
    let json: Value =
        serde_json::from_slice(&lissom(&["routes", "--format", "json"], "").stdout).unwrap();
    for route in json.as_array().unwrap() {
        for station in route["stations"].as_array().unwrap() {
            for key in ["radius", "turn"] {
                let source = station[key]["source"].as_str().unwrap();
                assert!(!source.is_empty(), "{route} {key}");
            }
        }
    }
    let unknown = lissom(&["routes", "rolling-up"], "");
    assert_eq!(unknown.status.code(), Some(2));
    assert!(
        err(&unknown).contains("did you mean `roll-up`?"),
        "{}",
        err(&unknown)
    );
}

#[test]
fn a_folder_of_own_weaves_is_read() {
    let folder = tempfile::tempdir().unwrap();
    std::fs::write(
        folder.path().join("gate.toml"),
        "name = \"gate\"\ntitle = \"Gate\"\nsentence = \"Own.\"\nrows = [\"##.\", \"#.#\", \".##\"]\n",
    )
    .unwrap();
    let path = folder.path().to_str().unwrap();
    let spec = SMALL.replace("\"plain\"", "\"gate\"");
    assert_eq!(lissom(&["check", "-"], &spec).status.code(), Some(2));
    let checked = lissom(&["check", "-", "--weaves", path], &spec);
    assert_eq!(checked.status.code(), Some(0), "{}", err(&checked));
    assert!(out(&checked).contains("gate, repeat 3 x 3"));
}

#[test]
fn explain_tells_every_code() {
    let list = out(&lissom(&["explain"], ""));
    for code in Code::ALL {
        assert!(list.contains(code.word()));
        let told = lissom(&["explain", code.word()], "");
        assert_eq!(told.status.code(), Some(0));
        assert!(out(&told).starts_with(code.word()));
    }
}

#[test]
fn help_is_as_its_snapshots_say() {
    for command in [
        "", "check", "compare", "limits", "fibres", "weaves", "routes", "new", "explain",
    ] {
        let arguments = [command, "--help"];
        let from = usize::from(command.is_empty());
        let name = if command.is_empty() {
            "lissom"
        } else {
            command
        };
        insta::assert_snapshot!(format!("help-{name}"), out(&lissom(&arguments[from..], "")));
    }
}
