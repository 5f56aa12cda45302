//! The demo sites: every fault of the badly built one is found where it is, and Heron Point has none.

use std::collections::BTreeSet;

use ampwright::site::Severity::{self, Advice, Danger, Nonconforming};
use ampwright::site::{Report, inspect, read};

pub const BADLY_BUILT: &str = include_str!("../../core/examples/sites/badly_built.toml");
/// Wiring only, and clean: what tests change.
pub const CABIN: &str = include_str!("cabin.toml");
pub const HERON_POINT: &str = include_str!("../../core/examples/sites/heron_point.toml");

/// The wiring faults: where, which kind of finding, how grave.
///
/// The arithmetic beside them takes 12 × 0.875 = 10.5 V as cut-off; sources as in the pairs.
const FAULTS: [(&str, &str, Severity); 15] = [
    // 60 A on 12 AWG, which takes 20 A (NFPA 70-2023, 240.4(D)).
    (r#"circuit "bench lights", F5"#, "device-above-ampacity", Danger),
    // 46 A × 1.25 = 57.5 A on 6 AWG, whose 60 °C column ends at 55 A and whose own at 75 A; the next rating is 60 A.
    (r#"circuit "compressor""#, "terminal-column-exceeded", Danger),
    // 2 m against 5 ft (recalled).
    (r#"circuit "bank main", F1"#, "device-too-far-from-source", Danger),
    (r#"circuit "radio", F6"#, "device-in-earthed-pole", Danger),
    (r#"circuit "bank link""#, "second-feeding-end-unprotected", Danger),
    // 13.2 V/1.6 mΩ = 8.25 kA against 5 kA.
    (r#"circuit "bank main", F1"#, "breaking-capacity-too-low", Danger),
    // 80 m of at least 10.3 Ω/km leave less than 11.88/0.824 = 14.4 A; 15 A of class T open at 20.25 A.
    (r#"circuit "gate sensor", F8"#, "least-fault-too-small", Danger),
    (r#"circuit "fan", F9"#, "device-not-for-this-supply", Danger),
    (r#"circuit "work lamp""#, "conductor-refused", Danger),
    (r#"circuit "bank main""#, "lug-too-small", Nonconforming),
    // 24 m of 6.5 Ω/km and more, 7.6 A and more: above 1.1 V, where 5 % are 0.6 V. `us` recommends the limit only.
    (r#"circuit "far pump""#, "drop-exceeded", Advice),
    // 800/0.85/10.5 = 89.6 A, × 1.25 = 112 A; at nominal 66.7 A, × 1.25 = 83.3 A, which 4 AWG (85 A) and 90 A would bear.
    (r#"circuit "inverter feed""#, "feed-sized-at-nominal", Danger),
    (r#"circuit "sender""#, "chassis-return", Danger),
    // 100 A against 250 + 125 A.
    (r#"board "main""#, "busbar-below-sum", Danger),
    // 1.6 × 20 A = 32 A against 1.45 × 20 A = 29 A (12 AWG, 60 °C).
    (r#"circuit "heater", F11"#, "device-opens-late", Danger),
];

/// What belongs to the faults above and is meant too.
const COMPANIONS: [(&str, &str); 4] = [
    (r#"circuit "inverter feed""#, "terminal-column-exceeded"),
    (r#"circuit "inverter feed""#, "ampacity-exceeded"),
    (r#"circuit "inverter feed", F3"#, "device-below-load"),
    (r#"board "main""#, "too-many-lugs"),
];

fn report(text: &str) -> Report {
    let site = read(text).unwrap_or_else(|problems| panic!("{problems}"));
    inspect(&site).unwrap_or_else(|problems| panic!("{problems}"))
}

#[test]
fn every_fault_of_the_badly_built_site_is_found_in_its_place() {
    let report = report(BADLY_BUILT);
    for (place, slug, severity) in FAULTS {
        let found: Vec<_> = report.findings.iter().filter(|f| f.place == place && f.slug == slug).collect();
        assert_eq!(found.len(), 1, "{place}: {slug}");
        assert_eq!(found[0].severity, severity, "{place}: {slug}");
    }
    assert_eq!(report.exit_code(), 1);
}

#[test]
fn nothing_else_fails_in_the_badly_built_site() {
    let report = report(BADLY_BUILT);
    let meant: BTreeSet<_> = FAULTS.iter().map(|f| (f.0, f.1)).chain(COMPANIONS).collect();
    let failed = report.findings.iter().filter(|f| f.severity <= Nonconforming || f.severity == Advice);
    let found: BTreeSet<_> = failed.map(|f| (f.place.as_str(), f.slug)).collect();
    assert_eq!(found, meant);
}

#[test]
fn each_fault_stands_at_its_own_line() {
    let report = report(BADLY_BUILT);
    let lines: Vec<&str> = BADLY_BUILT.lines().collect();
    for finding in &report.findings {
        let line = lines[finding.line as usize - 1];
        let header = if finding.place.contains(", F") { "[[circuit.device]]" } else { "[[" };
        assert!(line.starts_with(header), "{finding}: {line}");
    }
}

#[test]
fn the_cabin_has_no_fault_and_leaves_nothing_unchecked() {
    let report = report(CABIN);
    let against: Vec<_> = report.findings.iter().filter(|f| f.severity != Advice).collect();
    assert!(against.is_empty(), "{against:#?}");
    assert_eq!(report.exit_code(), 0);
}

#[test]
fn heron_point_has_no_fault() {
    let report = report(HERON_POINT);
    let against: Vec<_> = report.findings.iter().filter(|f| f.severity <= Nonconforming).collect();
    assert!(against.is_empty(), "{against:#?}");
}

#[test]
fn a_site_gives_the_same_text_every_time() {
    for text in [CABIN, HERON_POINT, BADLY_BUILT] {
        assert_eq!(report(text).to_string(), report(text).to_string());
    }
}
