//! Arrays (R10): strings against modules, controller and bank; isolators (R20) and faults to earth (R19).
//!
//! Factors: IEC 62548:2016 (1.25, 1.5 to 2.4 of a device, 1000 V, 60 V) and NFPA 70-2023 (1.25 × 1.25, 600 V), recalled.
//! The module and its temperatures stand at `Document::array`: a module gives 22.33 V cold;
//! its voltage at most power falls by 0.4 + 0.05 %/K: hot 18 × (1 − 0.0045 × 36.25) V, less 3 % of wiring and 5 % of ageing.

use ampwright::site::Severity::{Advice, Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

const YIELD: (&str, &str) = ("R10", "array-yield-cut");
const ABOVE: (&str, &str) = ("R10", "array-current-above-controller");
const WRONG_DEVICE: (&str, &str) = ("R10", "string-device-wrong");

fn array(series: u32, strings: u32, keys: &str) -> Document {
    Document::array("iec", series, strings).with("array", keys)
}

fn controller(keys: &str) -> Document {
    Document::array("iec", 2, 1).with("controller", keys)
}

/// Three strings of two.
fn strings(keys: &str) -> Document {
    Document::array("iec", 2, 3)
        .with("controller", "output = '60 A'")
        .with("bank", "capacity = '300 Ah'; disconnect = '12 V'; greatest_discharge = '100 A'")
        .with("array", keys)
}

/// A bank with a charger of its own, and an array beside it.
fn beside(keys: &str) -> Document {
    array(2, 1, keys).without("controller").add(
        "generator",
        "name = 'charger'; kind = 'shore'; output = '12 A'; absorption = '14.4 V'; float = '13.6 V'; \
         compensation = '0 mV/K'; sense = 'bank'; route = '1 m'",
    )
}

const REGULATOR: &str = "controller = 'regulator'\n\n[[controller]]\nname = 'regulator'\nkind = 'mppt'\n\
    greatest_input = '150 V'\ninput_current = '40 A'\nstart_margin = '1 V'\noutput = '10 A'\nidle = '1 mW'\n\
    absorption = '14.4 V'\nfloat = '13.6 V'\ncompensation = '0 mV/K'\nsense = 'bank'\nroute = '1 m'";

/// A controller that joins array and bank.
fn pwm(keys: &str, module: &str) -> Document {
    Document::array("iec", 1, 1)
        .with("controller", "kind = 'pwm'")
        .with("controller", keys)
        .with("array", module)
}

/// One module of 24 V behind a clamp, over a load that bears 20 V.
fn reached(keys: &str) -> Document {
    pwm(keys, "voc = '24 V'; imp = '5 A'; vmp = '20.5 V'").with("load", "greatest = '20 V'")
}

fn voltages() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    let part = ("R10", "array-voltage-above-part");
    let low = ("R10", "array-voltage-too-low");
    vec![
        // 2 × 22.33 V.
        wrong(
            ("R10", "array-voltage-too-high"),
            "modules bear the voltage of a cold morning",
            array(2, 1, "greatest_voltage = '?'"),
            ("45 V", "44 V"),
        ),
        Pair::of(
            Danger,
            part,
            "a controller bears the voltage of a cold morning",
            controller("greatest_input = '?'"),
            ("45 V", "44 V"),
        ),
        Pair::of(
            Danger,
            part,
            "an isolator bears the voltage of a cold morning",
            array(2, 1, "isolator = '?'"),
            ("45 V", "44 V"),
        ),
        // 2 × 18 × 0.8369 × 0.97 × 0.95 = 27.8 V against 14.4 V and the margin.
        wrong(
            low,
            "hot modules stand above the charge voltage and the controller's margin",
            controller("start_margin = '?'"),
            ("13.3 V", "13.5 V"),
        ),
        wrong(
            low,
            "hot modules stand within the controller's window",
            controller("operating = ['?', '100 V']"),
            ("27.7 V", "27.9 V"),
        ),
        // 36 × (1 + 0.0045 × 5) = 36.8 V.
        Pair::of(
            Advice,
            YIELD,
            "cold modules stand within the controller's window",
            controller("operating = ['14 V', '?']"),
            ("37 V", "36.5 V"),
        ),
        // 24 V, warmer by the morning of 0 °C than its label: 25.8 V.
        Pair::of(
            Danger,
            ("R11", "array-reaches-loads"),
            "a clamp keeps the array's voltage from loads that do not bear it",
            reached("load_dump = ?"),
            ("true", "false"),
        ),
        Pair::of(
            NotChecked,
            ("R11", "array-reaches-loads-not-checked"),
            "what a clamp does with the bank off is stated or not checked",
            reached("?"),
            ("load_dump = true", ""),
        ),
        // 12 V of 16 V hot: 16/(0.8369 × 0.9215) = 20.75 V by the label.
        Pair::of(
            Advice,
            ("R10", "clamp-loses-yield"),
            "a clamp leaves less than a quarter behind",
            pwm("output = '10 A'", "voc = '26 V'; imp = '5 A'; vmp = '?'"),
            ("20.6 V", "20.9 V"),
        ),
    ]
}

fn currents() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    vec![
        // 6 × 1.25 = 7.5 A.
        wrong(
            ABOVE,
            "the input of a controller bears the array in bright light",
            controller("input_current = '?'"),
            ("7.6 A", "7.4 A"),
        ),
        wrong(
            ABOVE,
            "a controller that joins array and bank carries all of it",
            pwm("output = '?'; input_current = none", "voc = '24 V'; imp = '5 A'; vmp = '20.5 V'"),
            ("7.6 A", "7.4 A"),
        ),
        // 200/12 = 16.7 A: a tracker limits itself.
        Pair::of(
            Advice,
            YIELD,
            "a controller gives all of its array",
            controller("output = '?'"),
            ("17 A", "16.4 A"),
        ),
        // Two strings feed the third: 2 × 7.5 = 15 A.
        Pair::of(
            Danger,
            ("R10", "string-device-missing"),
            "three strings need no device where modules bear what two drive",
            strings("series_fuse = '?'"),
            ("15.2 A", "14.8 A"),
        ),
        Pair::of(
            Danger,
            ("R10", "string-device-missing"),
            "where they do not, every string has a device",
            strings("series_fuse = '12 A'; ?"),
            ("string_fuse = '10 A'", ""),
        ),
        // 1.5 × 6 = 9 A.
        wrong(
            WRONG_DEVICE,
            "the device of a string carries it",
            strings("string_fuse = '?'"),
            ("9.2 A", "8.8 A"),
        ),
        // 2.4 × 6 = 14.4 A.
        wrong(
            WRONG_DEVICE,
            "the device of a string guards it",
            strings("string_fuse = '?'; series_fuse = '20 A'"),
            ("14.2 A", "14.6 A"),
        ),
        wrong(
            WRONG_DEVICE,
            "the device of a string is no larger than the module admits",
            strings("string_fuse = '12 A'; series_fuse = '?'"),
            ("12.1 A", "11.9 A"),
        ),
        // 1.25 × 1.25 × 6 = 9.375 A.
        wrong(
            WRONG_DEVICE,
            "the device of a string carries 1.56 times its current under us",
            Document::array("us", 2, 3)
                .with("controller", "output = '60 A'")
                .with("bank", "capacity = '300 Ah'; disconnect = '12 V'; greatest_discharge = '100 A'")
                .with("array", "string_fuse = '?'")
                .with("site", "covered = true; monitoring = 'earth_fault'"),
            ("9.5 A", "9.3 A"),
        ),
        wrong(
            ("R20", "isolator-current-too-low"),
            "an isolator carries the array in bright light",
            array(2, 1, "isolator_current = '?'"),
            ("7.6 A", "7.4 A"),
        ),
    ]
}

fn rest() -> Vec<Pair> {
    let unmade = |what, edge, site, twins| Pair::of(NotChecked, what, edge, site, twins);
    vec![
        unmade(
            ("R10", "array-without-controller"),
            "the controller of an array is named or not checked",
            beside("controller = none; ?"),
            (REGULATOR, ""),
        ),
        unmade(
            ("R10", "array-not-checked"),
            "the margin of a controller is stated or not checked",
            controller("start_margin = none; ?"),
            ("start_margin = '1 V'", ""),
        ),
        unmade(
            ("R10", "array-not-checked"),
            "whether a controller tracks is stated or not checked",
            controller("kind = none; ?"),
            ("kind = 'mppt'", ""),
        ),
        Pair::of(
            Danger,
            ("R20", "isolator-not-load-break"),
            "the isolator of an array opens under load",
            array(2, 1, "load_break = ?"),
            ("true", "false"),
        ),
        unmade(
            ("R20", "isolator-not-stated"),
            "the isolator of an array is stated or not checked",
            array(2, 1, "load_break = none; ?"),
            ("load_break = true", ""),
        ),
        // 60/(2 × 1.015) = 29.56 V of open circuit at 20 °C.
        Pair::of(
            Nonconforming,
            ("R19", "array-without-monitoring"),
            "above 60 V an array is watched for faults to earth",
            array(2, 1, "voc = '?'; vmp = '23 V'; imp = '4.4 A'")
                .with("site", "covered = true; monitoring = 'none'"),
            ("29.5 V", "29.6 V"),
        ),
        unmade(
            ("R19", "monitoring-not-checked"),
            "what watches an array is stated or not checked",
            array(3, 1, "route = '2 m'")
                .with("controller", "output = '25 A'")
                .with("site", "covered = true; ?"),
            ("monitoring = 'insulation'", ""),
        ),
    ]
}

pub fn pairs() -> Vec<Pair> {
    [voltages(), currents(), rest()].into_iter().flatten().collect()
}

/// A check that lacks a datum names the key that supplies it.
#[test]
fn what_is_missing_is_named_by_its_key() {
    for (section, key) in [
        ("array", "voc_coefficient"),
        ("array", "greatest_voltage"),
        ("array", "series_fuse"),
        ("array", "isolator"),
        ("controller", "greatest_input"),
        ("controller", "start_margin"),
        ("controller", "input_current"),
    ] {
        // Under craft rules no table of factors stands in for a coefficient.
        let mut keys = format!("{key} = none");
        if key == "isolator" {
            // What is told of an isolator needs one.
            keys += "; isolator_current = none; load_break = none";
        }
        let site = Document::array("craft_iso", 2, 2).with(section, &keys).to_string();
        let site = ampwright::site::read(&site).unwrap_or_else(|problems| panic!("{problems}"));
        let report = ampwright::site::inspect(&site).unwrap_or_else(|problems| panic!("{problems}"));
        let told = report.findings.iter().filter(|f| f.slug == "array-not-checked");
        assert!(
            told.clone().any(|f| f.text.ends_with(&format!("; state {key}"))),
            "{key}: {:#?}",
            told.collect::<Vec<_>>()
        );
    }
}
