//! The well built demo site: nothing stands against it, every check is made, and each datum that is taken away comes back as a
//! check that is not made.

use std::collections::{BTreeMap, BTreeSet};

use ampwright::site::Severity::{Danger, NotChecked};
use ampwright::site::{Report, inspect, read};

pub const WELL_BUILT: &str = include_str!("../../core/examples/sites/well_built.toml");

fn report(text: &str) -> Report {
    let site = read(text).unwrap_or_else(|problems| panic!("{problems}"));
    inspect(&site).unwrap_or_else(|problems| panic!("{problems}"))
}

/// The section whose `name` is given, or the first with the header.
fn place_of(header: &str, name: &str) -> (usize, usize) {
    let lines: Vec<&str> = WELL_BUILT.lines().collect();
    let begins: Vec<usize> =
        (0..lines.len()).filter(|&i| lines[i].starts_with('[')).chain([lines.len()]).collect();
    let named = format!("name = \"{name}\"");
    begins
        .windows(2)
        .map(|w| (w[0], w[1]))
        .find(|&(from, to)| {
            lines[from].split(char::is_whitespace).next() == Some(header)
                && (name.is_empty() || lines[from..to].contains(&named.as_str()))
        })
        .unwrap_or_else(|| panic!("no {header} {name}"))
}

/// The file without one key of one section.
fn without(header: &str, name: &str, key: &str) -> String {
    let (from, to) = place_of(header, name);
    let begins = format!("{key} = ");
    let lines: Vec<&str> = WELL_BUILT.lines().collect();
    let at = (from..to)
        .find(|&i| lines[i].starts_with(&begins))
        .unwrap_or_else(|| panic!("no {key} in {header} {name}"));
    [&lines[..at], &lines[at + 1..]].concat().join("\n")
}

#[test]
fn nothing_stands_against_the_well_built_site_and_every_check_is_made() {
    let report = report(WELL_BUILT);
    assert!(report.findings.is_empty(), "{:#?}", report.findings);
    assert_eq!(report.exit_code(), 0);
}

/// Section, its name, the datum taken away, and what is no longer checked.
#[rustfmt::skip]
const DATA: [(&str, &str, &str, &str); 56] = [
    ("[site]", "", "bonds", "bond-points-not-stated"),
    ("[site]", "", "bonding", "bonding-not-checked"),
    ("[site]", "", "monitoring", "monitoring-not-checked"),
    ("[site]", "", "covered", "touch-protection"),
    ("[site]", "", "surge_protection", "surge-protection-not-stated"),
    ("[[bank]]", "house", "internal_resistance", "strings-not-checked"),
    ("[[bank]]", "house", "greatest_discharge", "discharge-limit-not-stated"),
    ("[[bank]]", "house", "reconnect", "reconnect-not-stated"),
    ("[[bank]]", "house", "take_off", "strings-not-checked"),
    ("[[bank]]", "house", "link", "strings-not-checked"),
    ("[[bank]]", "house", "opening", "ventilation-not-stated"),
    ("[[array]]", "roof array", "isolator_current", "isolator-not-stated"),
    ("[[array]]", "roof array", "load_break", "isolator-not-stated"),
    ("[[stock.module]]", "m120", "series_fuse", "array-not-checked"),
    ("[[stock.module]]", "m120", "greatest_voltage", "array-not-checked"),
    ("[[controller]]", "regulator", "greatest_input", "array-not-checked"),
    ("[[controller]]", "regulator", "input_current", "array-not-checked"),
    ("[[controller]]", "regulator", "start_margin", "array-not-checked"),
    ("[[controller]]", "regulator", "output", "charger-limit-not-stated"),
    ("[[controller]]", "regulator", "absorption", "set-points-not-stated"),
    ("[[controller]]", "regulator", "compensation", "compensation-not-stated"),
    ("[[generator]]", "engine charger", "output", "charger-limit-not-stated"),
    ("[[generator]]", "engine charger", "absorption", "set-points-not-stated"),
    ("[[generator]]", "engine charger", "compensation", "compensation-not-stated"),
    ("[[converter]]", "radio supply", "least", "least-voltage-not-stated"),
    ("[[converter]]", "radio supply", "greatest", "greatest-voltage-not-stated"),
    ("[[board]]", "main", "busbar", "busbar-rating-not-stated"),
    ("[[board]]", "panel", "busbar", "busbar-rating-not-stated"),
    ("[[inverter]]", "inverter", "idle", "inverter-idle-not-stated"),
    ("[[inverter]]", "inverter", "least", "least-voltage-not-stated"),
    ("[[inverter]]", "inverter", "greatest", "greatest-voltage-not-stated"),
    ("[[inverter]]", "inverter", "precharge", "inrush-not-checked"),
    ("[[load]]", "lights", "least", "least-voltage-not-stated"),
    ("[[load]]", "lights", "greatest", "greatest-voltage-not-stated"),
    ("[[load]]", "water pump", "hours", "load-time-not-stated"),
    ("[[load]]", "refrigerator", "hours", "load-time-not-stated"),
    ("[[load]]", "fire alarm", "standing", "load-time-not-stated"),
    ("[[load]]", "VHF radio", "least", "least-voltage-not-stated"),
    ("[[load]]", "freezer", "hours", "load-time-not-stated"),
    ("[[circuit]]", "bank main", "from_lug", "lug-not-stated"),
    ("[[circuit]]", "bank main", "to_lug", "lug-not-stated"),
    ("[[circuit]]", "bank main", "sheathed", "device-distance-not-limited"),
    ("[[circuit.device]]", "F1", "from_source", "device-distance-not-stated"),
    ("[[circuit.device]]", "F1", "dc_voltage", "device-supply-not-checked"),
    ("[[circuit.device]]", "F1", "breaking", "breaking-capacity-not-checked"),
    ("[[circuit.part]]", "bank switch", "rating", "part-rating-not-stated"),
    ("[[circuit.part]]", "shunt", "dc_voltage", "part-voltage-not-stated"),
    ("[[circuit]]", "inverter feed", "to_lug", "lug-not-stated"),
    ("[[circuit.device]]", "F3", "breaking", "breaking-capacity-not-checked"),
    ("[[circuit]]", "array feed", "to_lug", "lug-not-stated"),
    ("[[circuit.device]]", "F5", "dc_voltage", "device-supply-not-checked"),
    ("[[circuit.device]]", "Q1", "let_through", "withstand-not-checked"),
    ("[[circuit.device]]", "Q2", "let_through", "withstand-not-checked"),
    ("[[circuit.device]]", "Q3", "breaking", "breaking-capacity-not-checked"),
    ("[[circuit.device]]", "Q4", "dc_voltage", "device-supply-not-checked"),
    ("[[reading]]", "capacity test", "on", "bank-reading-not-compared"),
];

#[test]
fn a_datum_taken_away_is_a_check_not_made() {
    let mut kinds = BTreeSet::new();
    for (header, name, key, slug) in DATA {
        let report = report(&without(header, name, key));
        let found = report.findings.iter().find(|f| f.slug == slug);
        let what = format!("{header} {name}, {key}");
        assert_eq!(found.map(|f| f.severity), Some(NotChecked), "{what}: {:#?}", report.findings);
        assert_eq!(report.exit_code(), 1, "{what}");
        kinds.insert(slug);
    }
    assert!(kinds.len() >= 20, "{} kinds", kinds.len());
}

/// Whatever single line is taken away: the file is refused in words, or it is inspected to the end; and what is then designed
/// or taken for granted is never found to be a danger, but for these lines, which say how a thing is built.
#[test]
fn any_line_taken_away_is_refused_or_inspected() {
    const BUILT: [&str; 5] = ["string_fuse", "installed", "end", "on", "strings"];
    let lines: Vec<&str> = WELL_BUILT.lines().collect();
    let mut count: BTreeMap<&str, usize> = BTreeMap::new();
    for (index, line) in lines.iter().enumerate() {
        let Some((key, _)) = line.split_once(" = ").filter(|(key, _)| !key.starts_with([' ', '#', '"']))
        else {
            continue;
        };
        let text = [&lines[..index], &lines[index + 1..]].concat().join("\n");
        let report = match read(&text).and_then(|site| inspect(&site)) {
            Ok(report) => report,
            Err(problems) => {
                assert!(!problems.to_string().is_empty(), "{line}");
                *count.entry("refused").or_default() += 1;
                continue;
            }
        };
        let dangers: Vec<_> = report.findings.iter().filter(|f| f.severity == Danger).collect();
        assert!(dangers.is_empty() || BUILT.contains(&key), "line {}: {line}: {dangers:#?}", index + 1);
        let unmade = report.findings.iter().any(|f| f.severity == NotChecked);
        *count.entry(if unmade { "not checked" } else { "inspected" }).or_default() += 1;
    }
    println!("{count:?}");
    assert!(count["not checked"] >= 100, "{count:?}");
    assert!(count["refused"] >= 30, "{count:?}");
}
