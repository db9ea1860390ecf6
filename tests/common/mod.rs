//! Runs the program and reads specs for the tests.

use lissom::flow::{Outcome, run};
use lissom::pattern::Weaves;
use lissom::span::SourceText;
use lissom::spec::Spec;
use std::io::Write as _;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

/// The project's folder.
pub fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// Every example spec, sorted.
#[allow(dead_code, reason = "not every test binary uses every helper")]
pub fn examples() -> Vec<PathBuf> {
    let mut paths: Vec<PathBuf> = std::fs::read_dir(root().join("examples"))
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .filter(|path| path.extension().is_some_and(|ending| ending == "toml"))
        .collect();
    paths.sort();
    paths
}

/// Runs the program in the project's folder.
#[allow(dead_code, reason = "not every test binary uses every helper")]
pub fn lissom(arguments: &[&str], input: &str) -> Output {
    let mut child = Command::new(env!("CARGO_BIN_EXE_lissom"))
        .args(arguments)
        .current_dir(root())
        .env_remove("CLICOLOR_FORCE")
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    // A command that does not read its input may have ended already.
    let _ = child.stdin.take().unwrap().write_all(input.as_bytes());
    child.wait_with_output().unwrap()
}

/// A spec that must be valid.
#[allow(dead_code, reason = "not every test binary uses every helper")]
pub fn spec(text: &str) -> Spec {
    Spec::read(SourceText::new("test.toml", text), &Weaves::builtin())
        .unwrap_or_else(|problems| panic!("{problems:#?}"))
}

/// What becomes of a spec that must be valid and weavable.
#[allow(dead_code, reason = "not every test binary uses every helper")]
pub fn outcome(text: &str) -> Outcome {
    run(&spec(text), 1.0).unwrap()
}
