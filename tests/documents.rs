//! The documents say what is so: the README's tables, commands and output are held against the program.

#![allow(clippy::unwrap_used, clippy::panic, reason = "helpers of tests")]

mod common;

use common::{lissom, root};
use lissom::judge::Code;
use lissom::spec::keys::TABLES;
use std::path::Path;

fn read(name: &str) -> String {
    std::fs::read_to_string(root().join(name)).unwrap()
}

/// Every key of the spec has its row, word for word.
#[test]
fn the_readme_has_every_key() {
    let readme = read("README.md");
    let mut rows = String::new();
    for (table, keys) in TABLES {
        for key in *keys {
            rows += &format!(
                "| {table} | `{}` | {} | {} | {} |\n",
                key.name, key.takes, key.default, key.says
            );
        }
    }
    assert!(
        readme.contains(&rows),
        "the README's table of keys should be:\n{rows}"
    );
}

/// The worked example is the real output.
#[test]
fn the_readme_shows_real_output() {
    let output = lissom(&["check", "examples/radome-skin.toml"], "");
    let shown = String::from_utf8(output.stdout).unwrap();
    assert!(
        read("README.md").contains(&format!("```text\n{shown}```")),
        "should be:\n{shown}"
    );
}

#[test]
fn the_readme_names_every_example_code_and_command() {
    let readme = read("README.md");
    for code in Code::ALL {
        assert!(
            readme.contains(&format!("`{}`", code.word())),
            "{}",
            code.word()
        );
    }
    for command in [
        "check", "compare", "limits", "fibres", "weaves", "routes", "new", "explain",
    ] {
        assert!(readme.contains(&format!("`lissom {command}")), "{command}");
    }
    assert!(readme.contains("cargo run --release -- check examples/radome-skin.toml"));
    assert!(readme.contains("cargo test"));
}

/// Every path that a document names exists.
#[test]
fn paths_in_the_documents_exist() {
    for name in ["README.md", "DEVELOPERS.md"] {
        let text = read(name);
        for word in text.split('`').skip(1).step_by(2) {
            let is_path = [
                "src/",
                "tests/",
                "benches/",
                "examples/",
                "weaves/",
                "routes/",
                ".ci/",
            ]
            .iter()
            .any(|folder| word.starts_with(folder));
            if is_path && !word.contains(['*', ' ', 'N']) {
                assert!(root().join(Path::new(word)).exists(), "{name} names {word}");
            }
        }
    }
}
