//! What does not depend on how a document is written: its order, and whether a design is stated or left out.

use std::collections::BTreeMap;

use ampwright::cable::{Class, Stud};
use ampwright::device::Supply;
use ampwright::site::{CircuitLine, DeviceLine, Document as Stated, Report, Severity, inspect, read};
use proptest::prelude::*;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::badly_built::{BADLY_BUILT, CABIN, HERON_POINT};
use crate::document::Document;

/// Some hundred additions in another order: 1e-12 of a number, and room for differences of nearly equal ones.
const SUMS: f64 = 1e-9;
/// A pass takes conductor temperatures from the pass before, and a design makes more passes than an inspection: some 1e-6
/// of a number have been seen.
const PASSES: f64 = 1e-5;

/// A document in pieces: its head, then one piece a section with what belongs to it.
fn pieces(text: &str) -> Vec<String> {
    let mut pieces = vec![String::new()];
    for line in text.lines() {
        if line.starts_with('[') && !line.starts_with("[[circuit.") {
            pieces.push(String::new());
        }
        if let Some(last) = pieces.last_mut() {
            last.push_str(line);
            last.push('\n');
        }
    }
    pieces
}

/// A document whose circuits and loads stand in another order among themselves.
fn reordered(text: &str, keys: &[u64]) -> String {
    let mut pieces = pieces(text);
    for header in ["[[circuit]]", "[[load]]"] {
        let places: Vec<usize> = (0..pieces.len()).filter(|&i| pieces[i].starts_with(header)).collect();
        let mut order = places.clone();
        order.sort_by_key(|i| keys.get(i % keys.len()));
        let moved: Vec<String> = order.iter().map(|&i| pieces[i].clone()).collect();
        for (place, piece) in places.into_iter().zip(moved) {
            pieces[place] = piece;
        }
    }
    pieces.concat()
}

fn report(text: &str) -> Report {
    let site = read(text).unwrap_or_else(|problems| panic!("{problems}\n{text}"));
    inspect(&site).unwrap_or_else(|problems| panic!("{problems}\n{text}"))
}

/// What a circuit came out as: words that must be equal, and numbers.
fn outcome(circuit: &CircuitLine) -> (String, Vec<f64>) {
    let judged = &circuit.judgement;
    let devices: Vec<String> = circuit
        .devices
        .iter()
        .map(|d| format!("{} {:?} {:?}", d.guard.device.family, d.guard.device.rating, d.end))
        .collect();
    let checks: Vec<String> =
        judged.checks.iter().map(|c| format!("{:?} {:?}", c.check, c.outcome)).collect();
    let words = format!("{:?} {:?} {devices:?} {checks:?}", circuit.positive, circuit.negative);
    let mut numbers = vec![
        judged.current.get::<ampere>(),
        judged.temperature.get::<degree_celsius>(),
        judged.drop.get::<volt>(),
        judged.end_voltage.get::<volt>(),
        judged.path_drop.value,
        judged.resistance.value,
        judged.loss.value,
        judged.least_fault.map_or(-1.0, |i| i.get::<ampere>()),
    ];
    numbers.extend(judged.checks.iter().flat_map(|c| [c.actual, c.limit]));
    (words, numbers)
}

fn outcomes(report: &Report) -> BTreeMap<String, (String, Vec<f64>)> {
    report.circuits.iter().map(|c| (c.name.clone(), outcome(c))).collect()
}

fn assert_same(one: &Report, other: &Report, part: f64) -> Result<(), TestCaseError> {
    let (one, other) = (outcomes(one), outcomes(other));
    prop_assert!(one.keys().eq(other.keys()));
    for ((name, (words, numbers)), (_, (other_words, other_numbers))) in one.iter().zip(&other) {
        prop_assert_eq!(words, other_words, "{}", name);
        for (a, b) in numbers.iter().zip(other_numbers) {
            prop_assert!((a - b).abs() <= part * a.abs().max(1.0), "{name}: {a} and {b}");
        }
    }
    Ok(())
}

/// Kinds and places of findings, without the names that were given by order.
fn kinds(report: &Report) -> Vec<(Severity, &'static str, String)> {
    let mut kinds: Vec<_> = report
        .findings
        .iter()
        .map(|f| (f.severity, f.slug, f.place.split(", ").next().unwrap_or_default().to_string()))
        .collect();
    kinds.sort();
    kinds
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 40, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn order_of_circuits_and_loads_changes_no_number(keys in prop::collection::vec(any::<u64>(), 60)) {
        for text in [BADLY_BUILT.to_string(), HERON_POINT.to_string(), stated_cabin()] {
            let (before, after) = (report(&text), report(&reordered(&text, &keys)));
            assert_same(&before, &after, SUMS)?;
            prop_assert_eq!(kinds(&before), kinds(&after));
        }
    }
}

/// The cabin with its design written into it.
fn stated_cabin() -> String {
    let site = read(CABIN).unwrap_or_else(|problems| panic!("{problems}"));
    written_back(CABIN, &site, &report(CABIN))
}

/// The document with everything that was designed written into it.
fn written_back(text: &str, site: &Stated, report: &Report) -> String {
    let mut pieces = pieces(text);
    for (circuit, entry) in report.circuits.iter().zip(&site.circuits) {
        let names = [format!("name = \"{}\"", circuit.name), format!("name = '{}'", circuit.name)];
        let piece = pieces
            .iter_mut()
            .find(|piece| piece.starts_with("[[circuit]]") && names.iter().any(|name| piece.contains(name)))
            .unwrap_or_else(|| panic!("no circuit {}", circuit.name));
        if circuit.designed {
            let mut lines = vec!["[[circuit]]".to_string()];
            lines.extend(conductor_keys(circuit));
            // A designed circuit gets the lugs that fit.
            for (key, stated, name) in
                [("from_lug", entry.from_lug, &entry.from), ("to_lug", entry.to_lug, &entry.to)]
            {
                if let (None, Some(stud)) = (stated, stud_of(site, name)) {
                    lines.push(format!("{key} = '{stud}'"));
                }
            }
            lines.push(String::new());
            *piece = piece.replacen("[[circuit]]\n", &lines.join("\n"), 1);
        }
        for device in circuit.devices.iter().filter(|d| d.designed) {
            piece.push_str("[[circuit.device]]\n");
            piece.push_str(&device_keys(device, circuit).join("\n"));
            piece.push('\n');
        }
    }
    pieces.concat()
}

fn conductor_keys(circuit: &CircuitLine) -> [String; 3] {
    let conductor = &circuit.positive;
    let class = match conductor.class {
        Class::Solid => 1,
        Class::Stranded => 2,
        Class::Flexible => 5,
        Class::ExtraFlexible => 6,
    };
    [
        format!("size = '{}'", conductor.size),
        format!("class = {class}"),
        format!("insulation = '{}'", conductor.insulation),
    ]
}

fn device_keys(line: &DeviceLine, circuit: &CircuitLine) -> Vec<String> {
    let guard = &line.guard;
    let mut keys = vec![
        format!("family = '{}'", guard.device.family),
        format!("rating = '{} A'", guard.device.rating.get::<ampere>()),
        format!("end = '{}'", if line.at == circuit.from { "from" } else { "to" }),
        "from_source = '0 m'".to_string(),
    ];
    if let Supply::Dc(rated) = guard.device.supply {
        keys.push(format!("dc_voltage = '{} V'", rated.get::<volt>()));
    }
    keys.extend(guard.device.breaking.map(|breaks| format!("breaking = '{} A'", breaks.get::<ampere>())));
    keys.extend(guard.let_through_A2s.map(|energy| format!("let_through = '{energy} A2s'")));
    keys.extend(guard.terminal_range.map(|(least, most)| format!("terminal_range = ['{least}', '{most}']")));
    keys
}

fn stud_of(site: &Stated, name: &str) -> Option<Stud> {
    let banks = site.banks.iter().map(|x| (&x.name, x.stud));
    let boards = site.boards.iter().map(|x| (&x.name, x.stud));
    let inverters = site.inverters.iter().map(|x| (&x.name, x.stud));
    let loads = site.loads.iter().map(|x| (&x.name, x.stud));
    banks.chain(boards).chain(inverters).chain(loads).find(|(own, _)| *own == name).and_then(|(_, stud)| stud)
}

/// Sites that leave something to be designed: the cabin, and a plain run under each rule set.
fn to_be_designed() -> Vec<String> {
    let mut texts = vec![CABIN.to_string()];
    for set in ["us", "iec", "craft_iso", "craft_us"] {
        let stranding = if set == "us" { "class = none" } else { "" };
        for (load, length) in [("10 A", "4 m"), ("35 A", "12 m"), ("2 A", "40 m")] {
            texts.push(
                Document::run(set)
                    .without("circuit.device")
                    .with("circuit", stranding)
                    .with("load", &format!("current = '{load}'; least = '9 V'"))
                    .with("circuit", &format!("size = none; insulation = none; one_way = '{length}'"))
                    .to_string(),
            );
        }
    }
    texts
}

#[test]
fn a_design_that_is_written_down_passes_and_stays_what_it_is() {
    for text in to_be_designed() {
        let site = read(&text).unwrap_or_else(|problems| panic!("{problems}\n{text}"));
        let designed = report(&text);
        let stated_text = written_back(&text, &site, &designed);
        let stated = report(&stated_text);
        assert!(stated.circuits.iter().all(|c| !c.designed && c.devices.iter().all(|d| !d.designed)));
        assert_same(&designed, &stated, PASSES).unwrap_or_else(|error| panic!("{error}\n{stated_text}"));
        let failed = |report: &Report| -> Vec<_> {
            kinds(report).into_iter().filter(|(severity, ..)| *severity <= Severity::Nonconforming).collect()
        };
        assert_eq!(failed(&stated), failed(&designed), "{stated_text}");
        assert!(failed(&designed).is_empty(), "a design fails no check of its own:\n{designed}");
    }
}
