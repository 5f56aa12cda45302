//! The JSON of a report: of its committed schema for every site there is, readable, and of the same figures as the report.

use std::path::Path;

use ampwright::quantity::ElectricPotential;
use ampwright::site::{Comparison, Report, Severity, inspect, read};
use proptest::prelude::*;
use serde_json::{Value, json};
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::badly_built::{BADLY_BUILT, HERON_POINT};
use crate::document::Document;
use crate::schema::Schema;

const REPORT: &str = "report-1.json";
const COMPARISON: &str = "comparison-1.json";

fn report(text: &str) -> Report {
    let site = read(text).unwrap_or_else(|problems| panic!("{problems}"));
    inspect(&site).unwrap_or_else(|problems| panic!("{problems}"))
}

fn parsed(text: &str) -> Value {
    assert!(text.ends_with("}\n") && !text.ends_with("\n\n"), "one line break at the end");
    serde_json::from_str(text).unwrap_or_else(|error| panic!("{error}"))
}

/// Every demo site by its file's name.
fn demo_sites() -> Vec<(String, String)> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../core/examples/sites");
    let entries = std::fs::read_dir(folder).expect("the demo sites");
    let paths = entries.map(|entry| entry.expect("an entry").path());
    let sites: Vec<_> = paths
        .map(|path| {
            let name = path.file_name().expect("a name").to_string_lossy().into_owned();
            (name, std::fs::read_to_string(&path).expect("a text"))
        })
        .collect();
    assert!(sites.len() >= 4, "{}", sites.len());
    sites
}

#[test]
fn every_demo_site_is_of_the_schema() {
    let schema = Schema::committed(REPORT);
    for (name, text) in demo_sites() {
        let faults = schema.faults(&parsed(&report(&text).to_json()));
        assert!(faults.is_empty(), "{name}:\n{}", faults.join("\n"));
    }
}

/// Hundreds of short sites, most of them with a fault, and what changed from one twin to the other.
#[test]
fn every_twin_is_of_the_schema() {
    let (whole, changes) = (Schema::committed(REPORT), Schema::committed(COMPARISON));
    let mut seen = 0;
    for pair in crate::pairs() {
        let of = |value| read(&pair.text(value)).and_then(|site| inspect(&site));
        // A twin that is refused is a fault of its pair.
        let (Ok(passing), Ok(failing)) = (of(pair.passing), of(pair.failing)) else { continue };
        seen += 1;
        let twins = [passing, failing];
        for twin in &twins {
            let faults = whole.faults(&parsed(&twin.to_json()));
            assert!(faults.is_empty(), "{}:\n{}", pair.edge, faults.join("\n"));
        }
        let comparison = twins[1].compare(&twins[0]);
        let told = parsed(&comparison.to_json());
        assert_eq!(changes.faults(&told), Vec::<String>::new(), "{}", pair.edge);
        assert_eq!(told["change_count"], comparison.len());
    }
    assert!(seen > 150, "{seen}");
}

#[test]
fn an_empty_comparison_is_of_the_schema() {
    let told = parsed(&Comparison::default().to_json());
    assert_eq!(Schema::committed(COMPARISON).faults(&told), Vec::<String>::new());
    assert_eq!((&told["schema"], &told["change_count"]), (&json!("ampwright.comparison/1"), &json!(0)));
}

/// What the schema must refuse, one at a time.
#[test]
fn a_document_that_is_changed_is_not_of_the_schema() {
    type Change = fn(&mut Value);
    let schema = Schema::committed(REPORT);
    let good = parsed(&report(HERON_POINT).to_json());
    let changes: [(&str, Change); 12] = [
        ("no key 'colour'", |d| d["colour"] = json!("red")),
        ("no key 'current_mA'", |d| d["circuits"][0]["judgement"]["current_mA"] = json!(1.0)),
        ("'current_A' is missing", |d| {
            d["circuits"][0]["judgement"].as_object_mut().unwrap().remove("current_A");
        }),
        ("'findings' is missing", |d| {
            d.as_object_mut().unwrap().remove("findings");
        }),
        ("\"20\" is no number and no null", |d| d["circuits"][0]["judgement"]["current_A"] = json!("20")),
        ("null is no string", |d| d["site"]["name"] = Value::Null),
        ("null is no object", |d| d["circuits"][0]["judgement"] = Value::Null),
        ("\"fine\" is none of", |d| d["circuits"][0]["judgement"]["checks"][0]["outcome"] = json!("fine")),
        ("\"ampwright.report/2\" is none of", |d| d["schema"] = json!("ampwright.report/2")),
        ("-1 is below 0", |d| d["counts"]["danger_count"] = json!(-1)),
        ("1.5 is no integer", |d| d["counts"]["danger_count"] = json!(1.5)),
        ("against minItems 12", |d| {
            let day = d["plant"]["demands"][0]["mean_days"].as_array_mut().unwrap();
            day.pop();
        }),
    ];
    assert_eq!(schema.faults(&good), Vec::<String>::new());
    for (expected, change) in changes {
        let mut bad = good.clone();
        change(&mut bad);
        let faults = schema.faults(&bad);
        assert!(faults.len() == 1 && faults[0].contains(expected), "{expected}: {faults:?}");
    }
}

/// Units of keys, and how their description names them.
const UNITS: [(&str, &str); 16] = [
    ("_A", "A"),
    ("_V", "V"),
    ("_W", "W"),
    ("_VA", "VA"),
    ("_Wh", "Wh"),
    ("_Ah", "Ah"),
    ("_ohm", "Ω"),
    ("_m", "m"),
    ("_mm2", "mm²"),
    ("_degC", "°C"),
    ("_K", "K"),
    ("_h", "h"),
    ("_d", "d"),
    ("_A2s", "A²·s"),
    ("_ratio", ""),
    ("_count", ""),
];
/// Numbers that have neither unit nor count anything: a status, a line of a file, a month of the year, money.
const PLAIN: [&str; 4] = ["exit_code", "line", "worst_month", "price"];

/// Whether a schema speaks of a number, alone or in a list.
fn is_number(schema: &Value) -> bool {
    let kind = schema["type"].to_string();
    kind.contains("number") || kind.contains("integer") || schema.get("items").is_some_and(is_number)
}

#[test]
fn every_number_has_its_unit_in_key_and_description() {
    let mut seen = 0;
    for schema in [REPORT, COMPARISON].map(Schema::committed) {
        for (name, definition) in schema.definitions() {
            let Some(properties) = definition["properties"].as_object() else {
                assert!(definition["enum"].is_array(), "{name} is neither object nor words");
                continue;
            };
            assert_eq!(definition["additionalProperties"], false, "{name}");
            assert_eq!(definition["required"].as_array().map(Vec::len), Some(properties.len()), "{name}");
            for (key, property) in properties {
                let description = property["description"].as_str().unwrap_or_default();
                assert!(description.ends_with('.'), "{name}.{key} is not described");
                if !is_number(property) || PLAIN.contains(&key.as_str()) {
                    continue;
                }
                seen += 1;
                // The longest: `_Ah` ends in no `_h`, but `_mm2` must not be taken for less.
                let unit =
                    UNITS.iter().filter(|(end, _)| key.ends_with(end)).max_by_key(|(end, _)| end.len());
                match unit {
                    Some((_, "")) => {}
                    Some((_, symbol)) => {
                        let words = description.split([' ', ',', ';', '.']).any(|word| word == *symbol);
                        assert!(words, "{name}.{key}: '{description}' does not name {symbol}");
                    }
                    None => {
                        assert!(properties.contains_key("unit"), "{name}.{key} has no unit");
                        assert!(description.contains("`unit`"), "{name}.{key}: '{description}'");
                    }
                }
            }
        }
    }
    assert!(seen > 100, "{seen}");
}

/// To twelve digits, or to so many places; null for what is not known.
fn is_figure(json: &Value, value: Option<f64>, what: &str, places: f64) {
    match (json.as_f64(), value) {
        (Some(written), Some(value)) => {
            assert!((written - value).abs() <= 1e-11 * value.abs() + places, "{what}: {written}, {value}");
        }
        (None, None) => assert!(json.is_null(), "{what}: {json}"),
        other => panic!("{what}: {other:?}"),
    }
}

#[test]
fn figures_are_those_of_the_report() {
    for (name, text) in demo_sites() {
        let report = report(&text);
        let json = parsed(&report.to_json());
        assert_eq!(json["exit_code"], report.exit_code(), "{name}");
        assert_eq!(json["circuits"].as_array().map(Vec::len), Some(report.circuits.len()), "{name}");
        for (written, circuit) in json["circuits"].as_array().unwrap().iter().zip(&report.circuits) {
            let (j, judged) = (&written["judgement"], &circuit.judgement);
            let what = format!("{name}, {}", circuit.name);
            is_figure(&j["current_A"], Some(judged.current.get::<ampere>()), &what, 0.0);
            is_figure(&j["drop_V"], Some(judged.drop.get::<volt>()), &what, 0.0);
            is_figure(&j["path_drop_ratio"], Some(judged.path_drop.get::<ratio>()), &what, 0.0);
            is_figure(&j["resistance_ohm"], Some(judged.resistance.get::<ohm>()), &what, 0.0);
            let temperature = judged.temperature.get::<degree_celsius>();
            is_figure(&j["temperature_degC"], Some(temperature), &what, 1e-9);
            is_figure(&j["least_fault_A"], judged.least_fault.map(|a| a.get::<ampere>()), &what, 0.0);
            let corrected = judged.ampacity.as_ref().map(|a| a.corrected.get::<ampere>());
            is_figure(&j["ampacity"]["corrected_A"], corrected, &what, 0.0);
            is_figure(
                &written["positive"]["size"]["area_mm2"],
                Some(circuit.positive.size.area_mm2()),
                &what,
                0.0,
            );
            assert_eq!(j["checks"].as_array().map(Vec::len), Some(judged.checks.len()), "{what}");
            for check in j["checks"].as_array().unwrap() {
                // What is written to the last bit gives the same outcome again.
                let (value, limit) = (check["value"].as_f64(), check["limit"].as_f64());
                let again = match (check["relation"].as_str(), value.zip(limit)) {
                    (Some("at_most"), Some((value, limit))) => value <= limit,
                    (Some("at_least"), Some((value, limit))) => value >= limit,
                    _ => continue,
                };
                assert_eq!(again, check["outcome"] == "passed", "{what}: {check}");
            }
        }
    }
}

/// As the report in words marks them: `to be bought`, and `advice` in place of `FAILED`.
#[test]
fn what_is_bought_or_only_recommended_is_marked() {
    let marked = |report: &Report, key: &str, outcome: &str| {
        let json = parsed(&report.to_json());
        let circuits = json["circuits"].as_array().unwrap();
        let checks = circuits.iter().flat_map(|c| c["judgement"]["checks"].as_array().unwrap());
        checks.filter(|c| c[key] == true && c["outcome"] == outcome).count()
    };
    let rows = |report: &Report, mark: &str| {
        let text = report.to_string();
        text.lines().filter(|line| line.strip_prefix("    ").is_some_and(|l| l.starts_with(mark))).count()
    };
    let (mut bought, mut advice) = (0, 0);
    let long = Document::run("us").with("circuit", "one_way = '30 m'").to_string();
    for text in demo_sites().iter().map(|(_, text)| text).chain([&long]) {
        let report = report(text);
        assert_eq!(marked(&report, "to_be_bought", "passed"), rows(&report, "to be bought "));
        assert_eq!(marked(&report, "recommended", "failed"), rows(&report, "advice "));
        bought += rows(&report, "to be bought ");
        advice += rows(&report, "advice ");
    }
    assert!(bought > 0 && advice > 0, "{bought} {advice}");
}

#[test]
fn the_same_site_gives_the_same_text_without_any_path() {
    for text in [HERON_POINT, BADLY_BUILT] {
        let json = report(text).to_json();
        assert_eq!(json, report(text).to_json());
        assert!(!json.contains(env!("CARGO_MANIFEST_DIR")) && !json.contains(".toml"));
    }
}

/// The report under other names, as a program could give it: the reader of site files admits no control character.
fn renamed(mut report: Report, name: &str, circuit: &str) -> Report {
    name.clone_into(&mut report.name);
    circuit.clone_into(&mut report.circuits[0].name);
    report.findings.iter_mut().for_each(|finding| circuit.clone_into(&mut finding.place));
    report
}

fn counts(json: &Value, report: &Report) {
    for (key, severity) in [
        ("danger_count", Severity::Danger),
        ("nonconforming_count", Severity::Nonconforming),
        ("not_checked_count", Severity::NotChecked),
        ("advice_count", Severity::Advice),
    ] {
        assert_eq!(json["counts"][key], report.count(severity), "{key}");
        let word = key.trim_end_matches("_count");
        let found = json["findings"].as_array().unwrap().iter().filter(|f| f["severity"] == word);
        assert_eq!(found.count(), report.count(severity), "{key}");
    }
}

#[test]
fn control_characters_of_names_survive() {
    let (name, circuit) =
        ("bell\u{7} \u{0}\u{1b}[31m \u{7f}\u{2028}", "tab\tquote\" back\\slash\r\nline \u{1F6F6}");
    let report = renamed(report(BADLY_BUILT), name, circuit);
    assert!(!report.findings.is_empty());
    let json = parsed(&report.to_json());
    assert_eq!((&json["site"]["name"], &json["circuits"][0]["name"]), (&json!(name), &json!(circuit)));
    assert!(json["findings"].as_array().unwrap().iter().all(|finding| finding["place"] == circuit));
    counts(&json, &report);
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 64, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn any_report_reads_back(
        name in prop::collection::vec(any::<char>(), 0..12),
        circuit in prop::collection::vec(any::<char>(), 0..12),
        rules in prop::sample::select(vec!["us", "iec", "craft_iso", "craft_us"]),
        amps in 0.01..400.0,
        one_way in 0.1..60.0,
        designed in any::<bool>(),
        figure in prop::num::f64::ANY,
    ) {
        let (name, circuit) = (name.iter().collect::<String>(), circuit.iter().collect::<String>());
        let mut site = Document::run(rules)
            .with("load", &format!("current = '{amps:.3} A'"))
            .with("circuit", &format!("one_way = '{one_way:.3} m'"));
        if designed {
            site = site.with("circuit", "size = none; class = 5");
        }
        // A load that nothing on offer serves has no report.
        let inspected = read(&site.to_string()).and_then(|document| inspect(&document));
        let Ok(report) = inspected else { return Err(TestCaseError::reject("no report")) };
        let mut report = renamed(report, &name, &circuit);
        report.circuits[0].judgement.drop = ElectricPotential::new::<volt>(figure);
        let json = parsed(&report.to_json());
        counts(&json, &report);
        prop_assert_eq!(&json["site"]["name"], &name);
        prop_assert_eq!(&json["circuits"][0]["name"], &circuit);
        is_figure(&json["circuits"][0]["judgement"]["drop_V"], figure.is_finite().then_some(figure), "drop", 0.0);
        let faults = Schema::committed(REPORT).faults(&json);
        prop_assert!(faults.is_empty(), "{:?}", faults);
    }
}
