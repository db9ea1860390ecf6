//! A lever's value as a proposal: every key to be set, and how the place is with them.
//!
//! A yarn with linear density and count given gets a new count with a new filament diameter: the three must agree.
//! What is said of the place comes from running the changed spec: its worst state and reserve there, whether the yarns
//! then lie as close as they can (beyond such an edge reserves jump), and that a measured crimp or thickness is of the
//! cloth as it was.

use super::lever::Lever;
use super::margin::Target;
use crate::flow::run;
use crate::pattern::Weaves;
use crate::quantity::significant;
use crate::spec::{Document, KeyPath, NewValue};

/// Keys and their new values as the spec would have them.
pub type Set = Vec<(String, String)>;

/// The keys to be set for a lever's value; `None` where a whole number of filaments does not make the linear density.
pub fn set_of(document: &Document, weaves: &Weaves, lever: &Lever, value: f64) -> Option<Set> {
    let mut set = lever.settings(value);
    let (key, _) = lever.keys.first()?;
    let counted = key
        .text
        .strip_prefix("yarn.")
        .and_then(|rest| rest.strip_suffix(".filament_diameter"))
        .filter(|name| document.yarn_has(name, "filaments"));
    let Some(name) = counted else {
        return Some(set);
    };
    let mut changed = document.clone();
    lever.put(&mut changed, value, true).ok()?;
    let spec = changed.spec(weaves).ok()?;
    let yarns = [&spec.weave.warp.yarn, &spec.weave.weft.yarn];
    let yarn = yarns.into_iter().find(|yarn| yarn.name == name)?;
    let count = yarn.count.filaments.to_string();
    let key = KeyPath::parse(&format!("yarn.{name}.filaments")).ok()?;
    changed.set(&key, &NewValue::Number(count.clone())).ok()?;
    changed.spec(weaves).ok()?;
    set.push((key.text, count));
    Some(set)
}

/// The values of a set in words.
pub fn values_of(set: &[(String, String)]) -> String {
    let mut said = String::new();
    for (key, value) in set {
        let value = value.trim_matches('"');
        if key.ends_with(".filaments") {
            said.push_str(&format!(" with {value} filaments"));
        } else if said.is_empty() {
            said.push_str(value);
        } else {
            said.push_str(&format!(" and {value}"));
        }
    }
    said
}

/// How the place is with the keys set, in words.
pub fn then(
    document: &Document,
    weaves: &Weaves,
    set: &[(String, String)],
    target: &Target,
) -> String {
    let mut changed = document.clone();
    for (key, value) in set {
        let value = match value
            .strip_prefix('"')
            .and_then(|value| value.strip_suffix('"'))
        {
            Some(text) => NewValue::Text(text.to_owned()),
            None => NewValue::Number(value.clone()),
        };
        let put = KeyPath::parse(key).and_then(|key| changed.set(&key, &value));
        if put.is_err() {
            return String::new();
        }
    }
    let ran = changed
        .spec(weaves)
        .ok()
        .and_then(|spec| run(&spec, 1.0).ok().map(|outcome| (spec, outcome)));
    let Some((spec, outcome)) = ran else {
        return String::new();
    };
    let worst = outcome
        .findings
        .iter()
        .filter(|finding| target.holds_finding(finding))
        .max_by_key(|finding| finding.judged.rank());
    let Some(worst) = worst else {
        return String::new();
    };
    let mut said = format!("then {}", worst.state.word());
    if let Some(check) = worst.judged.checks[0] {
        said.push_str(&format!(", reserve {}", significant(check.reserve(), 3)));
    }
    if *target == Target::Crowns {
        if outcome.cloth.closed.jam_limited {
            said.push_str("; jam limited");
        }
        let weave = &spec.weave;
        let crimp = weave.warp.crimp.is_some() || weave.weft.crimp.is_some();
        // Measured on the cloth as it was.
        if crimp || weave.thickness_mm.is_some() {
            said.push_str("; measure the changed cloth again");
        }
    }
    said
}
