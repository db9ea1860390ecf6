//! Advice and limits have been run: each holds when it is put into the spec, and one step beyond it does not.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

mod common;

use common::{examples, lissom, root};
use lissom::flow::run;
use lissom::pattern::Weaves;
use lissom::span::SourceText;
use lissom::spec::{Document, KeyPath, NewValue};
use lissom::study::{Found, Target, advice, limits, margin_of};
use proptest::prelude::*;
use serde_json::Value;

fn put(document: &mut Document, set: &[(String, String)]) {
    for (key, value) in set {
        let value = match value.strip_prefix('"') {
            Some(text) => NewValue::Text(text.trim_end_matches('"').to_owned()),
            None => NewValue::Number(value.clone()),
        };
        document.set(&KeyPath::parse(key).unwrap(), &value).unwrap();
    }
}

/// What is proposed, as its own text says it, makes the place hold in a fresh run.
#[test]
fn every_proposal_of_the_examples_holds_when_it_is_set() {
    let weaves = Weaves::builtin();
    let mut proposals = 0;
    let models = |path: std::path::PathBuf| {
        let text = std::fs::read_to_string(&path).unwrap();
        let taut = text.replace("[weave]\n", "[weave]\npath = \"taut\"\n");
        [(path.clone(), text), (path, taut)]
    };
    for (path, text) in examples().into_iter().flat_map(models) {
        let document = Document::parse(SourceText::new("t", text)).unwrap();
        let spec = document.spec(&weaves).unwrap();
        let outcome = run(&spec, 1.0).unwrap();
        let targets: Vec<Target> = outcome.findings.iter().map(Target::of).collect();
        for proposal in advice(&document, &weaves, &spec, &outcome) {
            if proposal.set.is_empty() {
                continue;
            }
            proposals += 1;
            let mut changed = document.clone();
            put(&mut changed, &proposal.set);
            let target = targets
                .iter()
                .find(|target| target.name() == proposal.place)
                .unwrap();
            assert!(
                margin_of(&changed, &weaves, target) >= 0.0,
                "{path:?} {proposal:?}"
            );
        }
    }
    assert!(proposals >= 8, "{proposals}");
}

/// The advice's `set` stands in the JSON, and a spec so changed checks as holding there.
#[test]
fn a_person_can_follow_the_advice() {
    // Taut: of stiff yarns this cloth holds as it is.
    let kiln = std::fs::read_to_string(root().join("examples/kiln-curtain.toml"))
        .unwrap()
        .replace("[weave]\n", "[weave]\npath = \"taut\"\n");
    let output = lissom(&["check", "-", "--format", "json"], &kiln);
    let report: Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!(report["verdict"], "close");
    let proposals = report["advice"].as_array().unwrap();
    let setts = proposals
        .iter()
        .find(|p| p["text"].as_str().unwrap().starts_with("both setts"))
        .unwrap();
    let value = |index: usize| setts["set"][index]["value"].as_str().unwrap().to_owned();
    let changed = kiln
        .replace("\"16 /cm\"", &value(0))
        .replace("\"14 /cm\"", &value(1));
    assert_ne!(kiln, changed);
    let after = lissom(&["check", "-", "--strict"], &changed);
    assert_eq!(
        after.status.code(),
        Some(0),
        "{}",
        String::from_utf8_lossy(&after.stdout)
    );
}

/// A yarn with linear density and count keeps both in agreement: a finer filament comes with its count.
#[test]
fn a_finer_filament_comes_with_its_count() {
    let dish = std::fs::read_to_string(root().join("examples/dish-face.toml")).unwrap();
    let json = |spec: &str| -> Value {
        let output = lissom(&["check", "-", "--format", "json"], spec);
        serde_json::from_slice(&output.stdout).unwrap()
    };
    let before = json(&dish);
    let finer = before["advice"].as_array().unwrap().iter().find(|p| {
        p["place"] == "the crowns of the cloth"
            && p["text"].as_str().unwrap().starts_with("filament diameter")
    });
    let set = &finer.unwrap()["set"];
    let told = format!(
        "filament_diameter = {}\nfilaments = {}",
        set[0]["value"].as_str().unwrap(),
        set[1]["value"].as_str().unwrap()
    );
    let after = json(&dish.replace("filaments = 2000", &told));
    let crowns: Vec<&Value> = after["bends"]
        .as_array()
        .unwrap()
        .iter()
        .filter(|bend| bend["stage"] == "loom" || bend["stage"] == "rest")
        .collect();
    assert!(!crowns.is_empty() && crowns.iter().all(|bend| bend["state"] == "holds"));
}

/// Stations that only a route has are named and changed too, and so is the shed: each proposal holds when it is set.
#[test]
fn advice_reaches_the_stations_of_a_route_and_the_shed() {
    let text = "name = \"t\"\nroute = [\"winding\", \"creel-warping\", \"rapier-weaving\"]\n[yarn.y]\nfibre = \"carbon-pitch-uhm\"\n\
        linear_density = \"320 tex\"\nfilaments = 2000\n[weave]\npattern = \"twill 2/2 z\"\n\
        shed = { depth = \"40 mm\", front = \"150 mm\", back = \"500 mm\", let_off = 0.5 }\n\
        warp = { yarn = \"y\", sett = \"5 /cm\" }\nweft = { yarn = \"y\", sett = \"5 /cm\" }\n";
    let weaves = Weaves::builtin();
    let document = Document::parse(SourceText::new("t", text)).unwrap();
    let spec = document.spec(&weaves).unwrap();
    let outcome = run(&spec, 1.0).unwrap();
    let targets: Vec<Target> = outcome.findings.iter().map(Target::of).collect();
    let mut keys: Vec<String> = Vec::new();
    for proposal in advice(&document, &weaves, &spec, &outcome) {
        let mut changed = document.clone();
        put(&mut changed, &proposal.set);
        let here = |target: &&Target| target.name() == proposal.place;
        let target = targets.iter().find(here).unwrap();
        if !proposal.set.is_empty() {
            assert!(margin_of(&changed, &weaves, target) >= 0.0, "{proposal:?}");
        }
        keys.extend(proposal.set.into_iter().map(|(key, _)| key));
    }
    for key in [
        "passage.weft traverse guide.radius",
        "passage.warp traverse guide.radius",
        "weave.shed.let_off",
    ] {
        assert!(keys.iter().any(|known| known == key), "{key} {keys:?}");
    }
    let bounds = limits(&document, &weaves, &spec, &outcome);
    let eyelet = |bound: &&lissom::study::Bound| {
        bound.place.starts_with("creel eyelet") && bound.what == "smallest radius"
    };
    let set = &bounds.iter().find(eyelet).unwrap().set;
    assert_eq!(set[0].0, "passage.warp creel eyelet.radius");
}

#[test]
fn limits_are_shown_in_every_format() {
    let run = |format: &str| {
        let output = lissom(
            &["limits", "examples/fin-skin.toml", "--format", format],
            "",
        );
        assert_eq!(output.status.code(), Some(0));
        String::from_utf8(output.stdout).unwrap()
    };
    insta::assert_snapshot!("limits-fin-skin.text", run("text"));
    insta::assert_snapshot!("limits-fin-skin.markdown", run("markdown"));
    let report: Value = serde_json::from_str(&run("json")).unwrap();
    assert!(report["limits"].as_array().unwrap().len() > 8);
    assert_eq!(lissom(&["limits", "-"], "name = 1").status.code(), Some(2));
}

fn spec(fibre: &str, pattern: &str, tex: f64, sett: (f64, f64), radius: f64, turn: f64) -> String {
    format!(
        "name = \"n\"\n[yarn.y]\nfibre = \"{fibre}\"\nlinear_density = \"{tex} tex\"\n[weave]\npattern = \"{pattern}\"\n\
         path = \"taut\"\nwarp = {{ yarn = \"y\", sett = \"{} /cm\" }}\nweft = {{ yarn = \"y\", sett = \"{} /cm\" }}\n\
         [[passage]]\nyarn = \"warp\"\nname = \"eye\"\nradius = \"{radius} mm\"\nturn = \"{turn} deg\"\n",
        sett.0, sett.1
    )
}

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, cases: 40, ..ProptestConfig::default() })]

    /// Over random valid specs (taut: hundreds of runs each): every limit holds as told, and one step to the worse side it does not.
    #[test]
    fn limits_hold_and_fail_one_step_beyond(
        fibre in prop::sample::select(vec!["e-glass", "carbon-pan-sm", "alumina", "carbon-pitch-hm", "quartz"]),
        pattern in prop::sample::select(vec!["plain", "twill-2-2", "satin-5"]),
        tex in 30.0..300.0f64,
        open in 0.35..0.9f64,
        skew in 0.7..1.3f64,
        radius in 0.02..4.0f64,
        turn in 5.0..170.0f64,
    ) {
        let weaves = Weaves::builtin();
        // About as tight as a lens of 0.9 of the spacing lets this yarn lie.
        let sett = open * 16.0 * (68.0 / tex).sqrt();
        let text = spec(fibre, pattern, tex, (sett, sett * skew), radius, turn);
        let document = Document::parse(SourceText::new("t", text)).unwrap();
        let Ok(valid) = document.spec(&weaves) else { return Ok(()); };
        let Ok(outcome) = run(&valid, 1.0) else { return Ok(()); };
        for bound in limits(&document, &weaves, &valid, &outcome) {
            let Found::Holds { value, .. } = bound.found else { continue; };
            let mut told = document.clone();
            put(&mut told, &bound.set);
            prop_assert!(margin_of(&told, &weaves, &bound.target) >= 0.0, "{:?}", bound);
            let mut beyond = document.clone();
            bound.lever.put(&mut beyond, bound.lever.tightened(value).max(0.0), true).unwrap();
            prop_assert!(margin_of(&beyond, &weaves, &bound.target) < 0.0, "one step beyond: {:?}", bound);
        }
        let targets: Vec<Target> = outcome.findings.iter().map(Target::of).collect();
        for proposal in advice(&document, &weaves, &valid, &outcome) {
            let mut told = document.clone();
            put(&mut told, &proposal.set);
            let target = targets.iter().find(|target| target.name() == proposal.place).unwrap();
            let holds = margin_of(&told, &weaves, target) >= 0.0;
            prop_assert_eq!(holds, !proposal.set.is_empty(), "{:?}", proposal);
        }
    }
}
