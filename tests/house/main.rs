//! House tests: what a reviewer would otherwise have to look for in every change.
//!
//! Committed listings are compared here. After an intended change, one command writes them anew:
//! `tests/run regenerate`.

mod arrows;
mod interface;
mod package;
mod readme;
mod slugs;
mod source;
mod tree;
mod versions;

use std::path::{Path, PathBuf};
use std::process::Command;

/// The repository's top directory.
fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .parent()
        .expect("the tests member lies in the repository")
        .to_owned()
}

/// Text of a file, by its path from the top directory.
fn text(path: &str) -> String {
    std::fs::read_to_string(root().join(path)).unwrap_or_else(|e| panic!("{path}: {e}"))
}

/// Paths of the files that are tracked, or new and not ignored.
fn files() -> Vec<String> {
    let list = output(Command::new("git").args(["ls-files", "--cached", "--others", "--exclude-standard"]));
    // A file removed but not yet committed is still listed.
    list.lines().filter(|path| root().join(path).is_file()).map(str::to_owned).collect()
}

/// Rust files below a directory, without those that hold unit tests only.
fn rust_files(directory: &str) -> Vec<String> {
    let is_rust = |path: &Path| path.extension().is_some_and(|e| e == "rs");
    let is_test = |path: &Path| path.iter().any(|part| part == "tests" || part == "tests.rs");
    let wanted = |path: &Path| path.starts_with(directory) && is_rust(path) && !is_test(path);
    files().into_iter().filter(|path| wanted(Path::new(path))).collect()
}

/// Standard output of a command run in the top directory; it must succeed.
fn output(command: &mut Command) -> String {
    let done = command.current_dir(root()).output().unwrap_or_else(|e| panic!("{command:?}: {e}"));
    assert!(done.status.success(), "{command:?}: {}", String::from_utf8_lossy(&done.stderr));
    String::from_utf8(done.stdout).expect("the output is text")
}

/// Fails where a committed file is not what its generator makes now; rewrites it when asked to.
fn compare_committed(path: &str, generated: &str) {
    if std::env::var_os("AMPWRIGHT_REGENERATE").is_some() {
        std::fs::write(root().join(path), generated).unwrap_or_else(|e| panic!("{path}: {e}"));
        return;
    }
    let committed = text(path);
    if committed == generated {
        return;
    }
    let gone = committed.lines().filter(|line| !generated.lines().any(|l| l == *line));
    let new = generated.lines().filter(|line| !committed.lines().any(|l| l == *line));
    let changes: Vec<_> = gone.map(|l| format!("- {l}")).chain(new.map(|l| format!("+ {l}"))).collect();
    panic!("{path} is stale; if the change is meant, run `tests/run regenerate`:\n{}", changes.join("\n"));
}
