//! The repository's tree: what stands at the top, how long files are, which words stay out.

use std::collections::BTreeSet;
use std::process::Command;

use crate::source::{string_literals, tokens};
use crate::{files, output, rust_files, text};

#[test]
fn the_top_level_is_exactly_the_designs() {
    let required = "Cargo.toml Cargo.lock README.md DEVELOPERS.md LICENSE core bindings-py bindings-c tests benches \
                    .rustfmt.toml .clippy.toml .deny.toml .editorconfig .ci .gitignore";
    let required: BTreeSet<_> = required.split_whitespace().collect();
    let files = files();
    let present: BTreeSet<_> = files.iter().filter_map(|path| path.split('/').next()).collect();
    assert_eq!(present, required);
}

#[test]
fn files_of_core_stay_short() {
    let long: Vec<_> = rust_files("core/src/")
        .into_iter()
        .map(|path| (text(&path).lines().count(), path))
        .filter(|(lines, _)| *lines > 600)
        .collect();
    assert!(long.is_empty(), "one idea a file: {long:?}");
}

#[test]
fn no_host_and_no_machine_path_is_named() {
    // Put together here, so that this file does not hold them itself.
    let words = ["http", "root", "home", "work", "tmp"].map(|word| match word {
        "http" => "http".to_owned() + "://",
        path => format!("/{path}/"),
    });
    let words: Vec<_> = words.into_iter().chain([["https", "://"].concat()]).collect();
    // A dialect of JSON Schema is named by an address; nothing is fetched from it.
    let dialect = [words[5].as_str(), "json-schema.org/draft/2020-12/schema"].concat();
    let mut found = Vec::new();
    // The lock file and the licence are not our wording.
    for path in files().iter().filter(|p| !["Cargo.lock", "LICENSE"].contains(&p.as_str())) {
        let Ok(bytes) = std::fs::read(crate::root().join(path)) else { continue };
        for (number, line) in String::from_utf8_lossy(&bytes).lines().enumerate() {
            let line = line.replace(&format!("\"$schema\": \"{dialect}\""), "");
            if words.iter().any(|word| line.contains(word.as_str())) {
                found.push(format!("{path}:{}: {line}", number + 1));
            }
        }
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
}

/// Whether a text holds the word that nothing may print.
fn says_safe(text: &str) -> bool {
    let lower = text.to_lowercase();
    lower.split(|c: char| !c.is_alphanumeric()).any(|word| ["safe", "safely", "safer"].contains(&word))
}

#[test]
fn nothing_prints_the_word_safe() {
    let mut found = Vec::new();
    let ours = ["core/src/", "core/examples/", "bindings-c/src/", "bindings-py/src/"];
    for path in ours.into_iter().flat_map(rust_files) {
        let literals = string_literals(&tokens(&path, &text(&path)));
        found.extend(literals.into_iter().filter(|l| says_safe(l)).map(|l| format!("{path}: {l}")));
    }
    assert!(found.is_empty(), "a check passes or does not; it promises nothing:\n{}", found.join("\n"));
    assert!(says_safe("this run is Safe.") && !says_safe("unsafe, safety, fail-safer2"));
}

#[test]
fn core_needs_no_std_without_features() {
    let root = text("core/src/lib.rs");
    assert!(root.contains("#![no_std]\n") && root.contains("#![forbid(unsafe_code)]"));
    let lines: Vec<_> = root.lines().collect();
    for (crate_name, feature) in [("alloc", "alloc"), ("std", "std")] {
        let at = lines.iter().position(|l| *l == format!("extern crate {crate_name};")).expect(crate_name);
        assert_eq!(lines[at - 1], format!("#[cfg(feature = \"{feature}\")]"));
    }
    // What it depends on must be without std as well.
    let mut cargo = Command::new(env!("CARGO"));
    cargo.args(["tree", "--locked", "-p", "ampwright", "--no-default-features", "-e", "normal,features"]);
    let tree = output(cargo.args(["--prefix", "none"]));
    assert!(
        tree.contains("uom feature \"f64\""),
        "the listing has another form than this test reads:\n{tree}"
    );
    // Procedural macros run in the compiler, where std is at hand.
    let with_std: Vec<_> =
        tree.lines().filter(|l| l.contains("feature \"std\"") && !l.contains("proc-macro2")).collect();
    assert!(with_std.is_empty(), "{with_std:?}");
}

#[test]
fn ci_only_calls_the_test_script() {
    let script = text(".ci/run");
    let commands: Vec<_> = script.lines().filter(|l| !l.starts_with('#') && !l.trim().is_empty()).collect();
    assert_eq!(commands, ["exec \"$(dirname \"$0\")/../tests/run\" \"$@\""]);
}
