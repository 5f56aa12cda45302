//! The demo reports word by word, so that a number that moves is seen in review.
//!
//! `AMPWRIGHT_REGENERATE=1 cargo test -p ampwright-tests --test pairs golden` writes them anew.

use std::path::Path;

use ampwright::site::{inspect, read};

use crate::badly_built::{BADLY_BUILT, HERON_POINT};

fn agrees(name: &str, text: &str) {
    let site = read(text).unwrap_or_else(|problems| panic!("{problems}"));
    let report = inspect(&site).unwrap_or_else(|problems| panic!("{problems}")).to_string();
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("golden").join(name);
    if std::env::var_os("AMPWRIGHT_REGENERATE").is_some() {
        std::fs::write(&path, &report).unwrap_or_else(|error| panic!("{name}: {error}"));
    }
    let kept = std::fs::read_to_string(&path).unwrap_or_else(|error| panic!("{name}: {error}"));
    let moved: Vec<String> = kept
        .lines()
        .zip(report.lines())
        .enumerate()
        .filter(|(_, (before, now))| before != now)
        .map(|(at, (before, now))| format!("line {}\n- {before}\n+ {now}", at + 1))
        .collect();
    assert!(kept == report, "{name} has changed:\n{}", moved.join("\n"));
}

#[test]
fn the_report_of_heron_point_is_the_one_that_was_reviewed() {
    agrees("heron_point.txt", HERON_POINT);
}

#[test]
fn the_report_of_the_badly_built_site_is_the_one_that_was_reviewed() {
    agrees("badly_built.txt", BADLY_BUILT);
}
