//! The demo sites: every fault of the badly built one is found where it is, and Heron Point has none.

use std::collections::BTreeSet;

use ampwright::site::Severity::{self, Advice, Danger, Nonconforming};
use ampwright::site::{Report, inspect, read};

pub const BADLY_BUILT: &str = include_str!("../../core/examples/sites/badly_built.toml");
/// Wiring only, and clean: what tests change.
pub const CABIN: &str = include_str!("cabin.toml");
pub const HERON_POINT: &str = include_str!("../../core/examples/sites/heron_point.toml");

/// The faults: where, which kind of finding, how grave.
///
/// The arithmetic beside them is by hand; sources as in the pairs. Cut-off of the workshop is 12 × 0.875 = 10.5 V.
const FAULTS: [(&str, &str, Severity); 76] = [
    // Workshop, wiring.
    // 60 A on 12 AWG, which takes 20 A (NFPA 70-2023, 240.4(D)).
    (r#"circuit "bench lights", F5"#, "device-above-ampacity", Danger),
    // 46 A × 1.25 = 57.5 A on 6 AWG, whose 60 °C column ends at 55 A and whose own at 75 A; the next rating is 60 A.
    (r#"circuit "compressor""#, "terminal-column-exceeded", Danger),
    // 2 m against 5 ft (recalled).
    (r#"circuit "bank main", F1"#, "device-too-far-from-source", Danger),
    (r#"circuit "radio", F6"#, "device-in-earthed-pole", Danger),
    (r#"circuit "bank link""#, "second-feeding-end-unprotected", Danger),
    // 15.2 V/1.6 mΩ = 9.5 kA against 5 kA.
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
    // 100 A against 250 + 125 A of the devices, 60 + 22 A of the sources.
    (r#"board "main""#, "busbar-below-sum", Danger),
    (r#"board "main""#, "too-many-lugs", Nonconforming),
    // 1.6 × 20 A = 32 A against 1.45 × 20 A = 29 A (12 AWG, 60 °C).
    (r#"circuit "heater", F11"#, "device-opens-late", Danger),
    // The board feeds 250 + 125 A into 4 AWG, which takes 85 A, and 90 A as the next rating.
    (r#"circuit "alternator output""#, "device-missing", Danger),
    // 60 A through 8 m of at least 0.8 mΩ/m: 0.38 V and more, where 1 % are 0.12 V.
    (r#"circuit "alternator output""#, "drop-exceeded", Nonconforming),
    // Workshop, plant.
    // Less than 0.025 × 12 = 0.3 V between 10.5 and 10.7 V.
    (r#"bank "house""#, "reconnect-too-near", Nonconforming),
    (r#"bank "reserve""#, "bank-without-disconnect", Nonconforming),
    (r#"bank "reserve""#, "mixed-batteries", Advice),
    (r#"load "gate sensor""#, "load-past-disconnect", Nonconforming),
    (r#"inverter "inverter""#, "inverter-overloaded", Nonconforming),
    (r#"inverter "inverter""#, "inverter-start-too-large", Nonconforming),
    // 15.2 V over some 5 mΩ are 3 kA, above ten times 90 A.
    (r#"inverter "inverter""#, "inverter-inrush", Advice),
    (r#""tractor alternator" into "house""#, "compensation-missing", Nonconforming),
    // Half of 60 A for an hour is 30 Ah a day; the loads take more than 100 Ah.
    (r#"bank "house""#, "energy-short", Nonconforming),
    // Half of 60 A, hot, where a tenth of 400 Ah is 40 A.
    (r#"bank "house""#, "charge-rate-low", Advice),
    // Annex.
    // Its fuse lets 200 A pass.
    (r#"circuit "annex main", annex switch"#, "part-below-device", Danger),
    (r#"circuit "annex main", annex switch"#, "part-not-for-dc", Danger),
    // 120² × 0.003 = 43 W, above 30 W.
    (r#"circuit "annex main""#, "joint-heat", Danger),
    // 21 V at cut-off, and it stops at 21 V.
    (r#"circuit "annex freezer""#, "voltage-too-low-at-load", Nonconforming),
    (r#"load "annex freezer""#, "voltage-too-high-at-load", Nonconforming),
    (r#"bank "annex""#, "bank-in-living-space", Danger),
    // 0.05 × 12 × 20 mA/Ah × 400 Ah = 4.8 m³/h, × 28 = 134 cm², against 40 cm².
    (r#"bank "annex""#, "ventilation-too-small", Danger),
    (r#"bank "annex""#, "string-without-device", Danger),
    (r#"bank "annex""#, "strings-not-on-busbar", Nonconforming),
    (r#"bank "annex""#, "strings-share-unequally", Nonconforming),
    (r#"bank "annex""#, "too-many-strings", Nonconforming),
    (r#"bank "annex""#, "mixed-batteries", Advice),
    // 1440 W/24 V and 60 A against 0.2 × 400 = 80 A.
    (r#"bank "annex""#, "charge-above-ceiling", Danger),
    (r#"bank "annex""#, "electrolyte-may-freeze", Nonconforming),
    (r#"bank "annex""#, "disconnect-too-low", Nonconforming),
    // 2.4 V a cell are 28.8 V; float at most 2.27 V, 27.2 V.
    (r#""tracker" into "annex""#, "set-point-low", Nonconforming),
    (r#""tracker" into "annex""#, "set-point-high", Nonconforming),
    (r#""tracker" into "annex""#, "compensation-missing", Nonconforming),
    // Equalises at 31 V; highest is stated as 29.5 V. The charger: 29 V + 12 × 5 mV/K × 35 K = 31.1 V.
    (r#""tracker" into "annex""#, "highest-below-charging", Nonconforming),
    (r#""annex charger" into "annex""#, "highest-below-charging", Nonconforming),
    // 4 × 22.1 V × (1 + 0.003 × 35) = 97.7 V against 75 V.
    (r#"array "roof""#, "array-voltage-above-part", Danger),
    // 2 × 7.3 A × 1.25 = 18.25 A against 12 A.
    (r#"array "roof""#, "string-device-missing", Danger),
    // 3 × 7.3 A × 1.25 = 27.4 A against 20 A.
    (r#"array "roof""#, "array-current-above-controller", Nonconforming),
    (r#"array "roof""#, "isolator-not-load-break", Danger),
    (r#"array "roof""#, "touch-protection-missing", Danger),
    (r#"array "roof""#, "array-without-monitoring", Nonconforming),
    // A third of 400 Ah.
    (r#"reading "discharge of the annex", delivered"#, "bank-capacity-below-stated", Nonconforming),
    // Pump house.
    // At least 0.05 s × 150² A² = 1125 A²s.
    (r#"circuit "pump house main", F19"#, "let-through-implausible", Nonconforming),
    (r#"circuit "well pump""#, "start-voltage-too-low", Nonconforming),
    // 1.9 V over 55 A are 35 mΩ, of which 6 m of 4 AWG, a breaker and four lugs explain less than 10.
    (r#"reading "pump running", drop"#, "reading-implies-heat", Danger),
    // 95 °C on insulation for 75 °C.
    (r#"reading "lug at the pump", temperature"#, "hotter-than-insulation", Danger),
    // 55 A for half an hour and 15 W day and night are more than 55 Ah a day, for four days.
    (r#"bank "pump house""#, "bank-too-small", Nonconforming),
    // 10.5 and 12.4 V under the mean current of a day.
    (r#"bank "house""#, "disconnect-low-under-few-loads", Advice),
    (r#"bank "pump house""#, "disconnect-low-under-few-loads", Advice),
    // 55 A and 15 W against 50 A.
    (r#"bank "pump house""#, "discharge-above-limit", Nonconforming),
    (r#"bank "pump house""#, "charge-not-blocked-in-cold", Danger),
    // 30 A and 40 A against 40 A.
    (r#"bank "pump house""#, "charge-above-limit", Nonconforming),
    (r#"bank "pump house""#, "limit-by-data-link", Nonconforming),
    (r#"bank "pump house""#, "load-dump", Danger),
    // 15.2 W of 31 W or less.
    (r#"bank "pump house""#, "standing-share-high", Advice),
    // Four cells of 3.6 V at most are 14.4 V.
    (r#""clamp" into "pump house""#, "set-point-high", Danger),
    (r#""clamp" into "pump house""#, "set-point-not-for-chemistry", Danger),
    (r#""clamp" into "pump house""#, "compensation-not-for-chemistry", Nonconforming),
    // 1 − 12.8/32.6 = 61 %.
    (r#"array "pump house modules""#, "clamp-loses-yield", Advice),
    // 2 × 9.7 A × 1.25 = 24.3 A against 16 A.
    (r#"array "pump house modules""#, "isolator-current-too-low", Nonconforming),
    // The place.
    ("site", "several-bond-points", Nonconforming),
    ("site", "surge-protection-missing", Nonconforming),
    // 14 AWG against 10 AWG (NFPA 70-2023, 810.21(H), recalled).
    ("site", "bonding-too-thin", Nonconforming),
];

/// What belongs to the faults above and is meant too.
const COMPANIONS: [(&str, &str); 8] = [
    (r#"circuit "inverter feed""#, "terminal-column-exceeded"),
    (r#"circuit "inverter feed""#, "ampacity-exceeded"),
    (r#"circuit "inverter feed", F3"#, "device-below-load"),
    (r#"circuit "inverter feed""#, "start-voltage-too-low"),
    (r#"circuit "alternator output", guarded only by the device of "bank main""#, "device-above-ampacity"),
    (r#""clamp" into "pump house""#, "highest-below-charging"),
    // 39.8 V × (1 + 0.0029 × 35) = 43.8 V, above the 30 V of `us`.
    (r#"array "pump house modules""#, "touch-protection-missing"),
    (r#"array "pump house modules""#, "array-without-monitoring"),
];

/// Fewer kinds of fault than this and the demo shows too little.
const LEAST_KINDS: usize = 60;

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
fn the_badly_built_site_breaks_every_rule_that_a_built_site_can_break() {
    let report = report(BADLY_BUILT);
    let meant: BTreeSet<_> = FAULTS.iter().map(|f| (f.0, f.1)).collect();
    let faults = report.findings.iter().filter(|f| meant.contains(&(f.place.as_str(), f.slug)));
    let (kinds, rules): (BTreeSet<_>, BTreeSet<_>) = faults.map(|f| (f.slug, f.rule)).unzip();
    assert!(kinds.len() >= LEAST_KINDS, "{} kinds, at least {LEAST_KINDS}", kinds.len());
    // R1, R2 and R22 tell how to compute, R21 compares two sites.
    for rule in (3..=20).map(|n| format!("R{n}")) {
        assert!(rules.contains(rule.as_str()), "{rule} is kept everywhere");
    }
}

/// Header of the section of what a finding names.
fn header(place: &str) -> &'static [&'static str] {
    let (thing, part) = place.split_once("\", ").unwrap_or((place, ""));
    match thing.split('"').next() {
        Some("circuit ") if part.starts_with('F') => &["[[circuit.device]]"],
        Some("circuit ") if part.ends_with("switch") => &["[[circuit.part]]"],
        Some("circuit ") => &["[[circuit]]"],
        Some("bank ") => &["[[bank]]"],
        Some("board ") => &["[[board]]"],
        Some("load ") => &["[[load]]"],
        Some("inverter ") => &["[[inverter]]"],
        Some("array ") => &["[[array]]"],
        Some("reading ") => &["[[reading]]"],
        Some("") => &["[[controller]]", "[[generator]]"],
        _ => &[],
    }
}

#[test]
fn each_fault_stands_at_its_own_line() {
    let report = report(BADLY_BUILT);
    let lines: Vec<&str> = BADLY_BUILT.lines().collect();
    for finding in report.findings.iter().filter(|f| f.place != "site") {
        let line = lines[finding.line as usize - 1];
        assert!(header(&finding.place).iter().any(|h| line.starts_with(h)), "{finding}: {line}");
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
