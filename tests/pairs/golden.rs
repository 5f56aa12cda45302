//! The demo reports word by word, and their JSON line by line, so that a number that moves is seen in review.
//!
//! `AMPWRIGHT_REGENERATE=1 cargo test -p ampwright-tests --test pairs golden` writes them anew.

use std::path::Path;

use ampwright::site::{Report, inspect, read};

use crate::badly_built::{BADLY_BUILT, HERON_POINT};

const LAUNCH: &str = include_str!("../../core/examples/sites/launch.toml");
const TELEMETRY_MAST: &str = include_str!("../../core/examples/sites/telemetry_mast.toml");
/// Lines that a failure shows; one line more moves all that follow.
const SHOWN: usize = 40;

fn report(text: &str) -> Report {
    let site = read(text).unwrap_or_else(|problems| panic!("{problems}"));
    inspect(&site).unwrap_or_else(|problems| panic!("{problems}"))
}

fn agrees(name: &str, text: &str) {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("golden").join(name);
    if std::env::var_os("AMPWRIGHT_REGENERATE").is_some() {
        std::fs::write(&path, text).unwrap_or_else(|error| panic!("{name}: {error}"));
    }
    let kept = std::fs::read_to_string(&path).unwrap_or_else(|error| panic!("{name}: {error}"));
    let moved: Vec<String> = kept
        .lines()
        .zip(text.lines())
        .enumerate()
        .filter(|(_, (before, now))| before != now)
        .take(SHOWN)
        .map(|(at, (before, now))| format!("line {}\n- {before}\n+ {now}", at + 1))
        .collect();
    assert!(kept == text, "{name} has changed:\n{}", moved.join("\n"));
}

#[test]
fn the_report_of_heron_point_is_the_one_that_was_reviewed() {
    agrees("heron_point.txt", &report(HERON_POINT).to_string());
}

#[test]
fn the_report_of_the_badly_built_site_is_the_one_that_was_reviewed() {
    agrees("badly_built.txt", &report(BADLY_BUILT).to_string());
}

#[test]
fn the_json_of_heron_point_is_the_one_that_was_reviewed() {
    agrees("heron_point.json", &report(HERON_POINT).to_json());
}

#[test]
fn the_json_of_the_telemetry_mast_is_the_one_that_was_reviewed() {
    agrees("telemetry_mast.json", &report(TELEMETRY_MAST).to_json());
}

#[test]
fn the_json_of_the_launch_is_the_one_that_was_reviewed() {
    agrees("launch.json", &report(LAUNCH).to_json());
}

#[test]
fn the_json_of_the_badly_built_site_is_the_one_that_was_reviewed() {
    agrees("badly_built.json", &report(BADLY_BUILT).to_json());
}
