//! Banks of a plant: capacity (R12), cold (R13), disconnect (R14), sharing (R15), air and place (R20).
//!
//! The plant of the pairs: 10 A for an hour and 10 mA all day, 3 % lost in the wiring: 10.24/0.97 = 10.56 Ah a day; all loads
//! at once 10.01 A. Depths, temperatures and gassing as `core/src/battery/data.rs` and `ventilation.rs` hold them.

use ampwright::site::Severity::{self, Advice, Danger, Nonconforming, NotChecked};
use ampwright::site::{inspect, read};

use crate::document::Document;
use crate::pair::Pair;

const R12: (&str, &str) = ("R12", "bank-too-small");
const LOW: (&str, &str) = ("R14", "disconnect-too-low");
const NEAR: (&str, &str) = ("R14", "reconnect-too-near");

fn plant(keys: &str) -> Document {
    Document::plant("iec").with("bank", keys)
}

/// With charge compensated for the cold, and disconnected early enough for it.
fn cold(keys: &str) -> Document {
    plant("highest = '17 V'; disconnect = '12.4 V'; reconnect = '13 V'")
        .with("generator", "compensation = '-4 mV/K'")
        .with("bank", keys)
}

fn lithium(keys: &str) -> Document {
    Document::lithium("iec").with("bank", keys).with("generator", "output = '9 A'")
}

/// Two strings, 10 mΩ each, with links of 0.3 mΩ and two joints of 0.1 mΩ.
fn strings(keys: &str) -> Document {
    plant("strings = 2; take_off = 'diagonal'; link = '0.3 mohm'; joint = '0.1 mohm'").with("bank", keys)
}

fn flooded(keys: &str) -> Document {
    plant("chemistry = 'flooded'").with("bank", keys).with("generator", "output = '12 A'")
}

fn size_and_cold() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    vec![
        // 10.56 Ah over a daily depth of 0.2, 10 % more: 58.1 Ah.
        wrong(
            R12,
            "a bank holds its day over its daily depth, with the margin",
            plant("capacity = '?'").with("generator", "output = '10 A'"),
            ("58.5 Ah", "57.5 Ah"),
        ),
        // Days × 10.56/0.5 × 1.1 = 100 Ah: 4.31 d.
        wrong(
            R12,
            "a bank holds its autonomy over its greatest depth, with the margin",
            Document::plant("iec").with("site", "autonomy = '?'"),
            ("4.2 d", "4.4 d"),
        ),
        // 58.1 Ah at 10.01 A are 5.8 h. 70·(5.8/H)^(0.15/1.15) = 58.1 at H = 24.3 h.
        wrong(
            R12,
            "a rating over many hours counts as what it gives in the hours of the greatest current",
            plant("capacity = '70 Ah'; rate = '?'"),
            ("24 h", "25 h"),
        ),
        // LFP: 10.56/0.8/0.8 × 1.1 = 18.2 Ah; 9 A of charge stay below half of it.
        wrong(
            R12,
            "a lithium bank holds its autonomy over window and end of life, with the margin",
            lithium("capacity = '?'; greatest_charge = '20 A'; greatest_discharge = '50 A'"),
            ("18.5 Ah", "17.9 Ah"),
        ),
        // The table of temperature factors ends at −3.9 °C.
        Pair::of(
            NotChecked,
            ("R12", "capacity-not-checked"),
            "capacity is judged only where a factor for the cold is held",
            cold("temperature = ['?', '30 degC']"),
            ("-3 degC", "-5 degC"),
        ),
        Pair::of(
            NotChecked,
            ("R12", "capacity-not-checked"),
            "what a bank holds in a cold beyond the table is stated or not checked",
            cold("temperature = ['-5 degC', '30 degC']; ?"),
            ("cold_capacity = '70 %'", ""),
        ),
        // 58.1 Ah of 100 Ah.
        wrong(
            R12,
            "the maker's figure for the cold takes the place of the table's",
            cold("temperature = ['-5 degC', '30 degC']; cold_capacity = '?'"),
            ("59 %", "57.5 %"),
        ),
        // −20 °C; what it takes there is the pack's own word.
        wrong(
            ("R13", "temperature-beyond-discharge"),
            "a bank gives current only within its temperatures",
            cold("temperature = ['?', '30 degC']; charge_from = '-30 degC'; greatest_charge = '20 A'"),
            ("-19 degC", "-21 degC"),
        ),
        // 20 % of charge is acid of 1.14: 13.5 K below 0 °C; 5 K of margin leave −8.5 °C.
        wrong(
            ("R13", "electrolyte-may-freeze"),
            "electrolyte keeps 5 K from freezing at its greatest depth",
            cold("temperature = ['?', '30 degC']; depth = '80 %'"),
            ("-8 degC", "-9 degC"),
        ),
        Pair::of(
            Danger,
            ("R13", "charge-not-blocked-in-cold"),
            "lithium is not charged below freezing",
            lithium("temperature = ['?', '30 degC']"),
            ("0 degC", "-1 degC"),
        ),
        wrong(
            ("R13", "charge-blocked-by-cold"),
            "a pack's own least charging temperature counts",
            lithium("temperature = ['-5 degC', '30 degC']; charge_from = '?'; greatest_charge = '20 A'"),
            ("-5 degC", "-4 degC"),
        ),
    ]
}

fn disconnects() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    vec![
        wrong(
            ("R14", "bank-without-disconnect"),
            "a bank has a disconnect",
            plant("disconnect = none; reconnect = none; ?"),
            ("disconnect = '11.8 V'", ""),
        ),
        // A fifth left is 1.993 V a cell at rest; 0.1 /h × 0.25 V·h × 1.8 fall off: 11.69 V, 1 % of nominal less 11.57 V.
        wrong(
            LOW,
            "a lead-acid bank is disconnected while a fifth is left, all loads drawing",
            plant("disconnect = '?'"),
            ("11.6 V", "11.5 V"),
        ),
        // A tenth left is 3.18 V; 0.1 × 0.12 × 1.45 fall off: 12.65 V, less 0.128 V: 12.52 V.
        wrong(
            LOW,
            "a lithium bank is disconnected while a tenth is left",
            lithium("disconnect = '?'"),
            ("12.56 V", "12.48 V"),
        ),
        // 10.56 Ah over a day are 0.44 A: 11.96 − 6 × 0.0044 × 0.25 × 1.8 = 11.95 V, less 0.12 V.
        Pair::of(
            Advice,
            ("R14", "disconnect-low-under-few-loads"),
            "a bank is not emptied by few loads before its disconnect",
            plant("disconnect = '?'"),
            ("11.85 V", "11.8 V"),
        ),
        wrong(
            ("R14", "disconnect-below-cut-off"),
            "wiring is laid out for the voltage of the disconnect",
            plant("cut_off = '11.7 V'; disconnect = '?'"),
            ("11.75 V", "11.65 V"),
        ),
        Pair::of(
            NotChecked,
            ("R14", "reconnect-not-stated"),
            "the reconnect voltage is stated or not checked",
            plant("reconnect = none; ?"),
            ("reconnect = '12.9 V'", ""),
        ),
        // 11.8 V and 2.5 % of nominal: 12.1 V.
        wrong(
            NEAR,
            "reconnect keeps its distance from disconnect",
            plant("reconnect = '?'"),
            ("12.12 V", "12.08 V"),
        ),
        // 6 × 1.993 = 11.96 V at rest, above 11.6 + 0.3 V.
        wrong(
            NEAR,
            "a bank at rest does not take its loads back by itself",
            plant("disconnect = '11.6 V'; reconnect = '?'"),
            ("11.98 V", "11.94 V"),
        ),
    ]
}

fn sharing() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    let unmade = |what, edge, site, twins| Pair::of(NotChecked, what, edge, site, twins);
    vec![
        wrong(
            ("R15", "too-many-strings"),
            "no more strings in parallel than their maker admits",
            strings("max_parallel = ?"),
            ("2", "1"),
        ),
        Pair::of(
            Danger,
            ("R15", "too-many-in-series"),
            "no more packs in series than their maker admits",
            plant("unit = '6 V'; max_series = ?"),
            ("2", "1"),
        ),
        unmade(
            ("R15", "series-not-checked"),
            "how many stand in series is stated or not checked",
            plant("max_series = 1; ?"),
            ("unit = '12 V'", ""),
        ),
        Pair::of(
            Advice,
            ("R15", "mixed-batteries"),
            "batteries of a bank are alike",
            plant("mixed = ?"),
            ("false", "true"),
        ),
        unmade(
            ("R15", "strings-not-checked"),
            "how strings are joined is stated or not checked",
            plant("strings = 2; ?"),
            ("take_off = 'busbar'", ""),
        ),
        wrong(
            ("R15", "strings-not-on-busbar"),
            "two strings are taken off diagonally",
            strings("take_off = '?'"),
            ("diagonal", "one_end"),
        ),
        wrong(
            ("R15", "strings-not-on-busbar"),
            "three strings lead to a busbar",
            strings("strings = 3; string_device = '50 A'; take_off = '?'"),
            ("busbar", "diagonal"),
        ),
        Pair::of(
            Danger,
            ("R15", "string-without-device"),
            "three strings have a device each",
            strings("strings = 3; take_off = 'busbar'; ?"),
            ("string_device = '50 A'", ""),
        ),
        // 15 A of charge, half of it in each of two.
        wrong(
            ("R15", "string-device-too-small"),
            "the device of a string carries its share of the charge",
            strings("take_off = 'busbar'; string_device = '?'"),
            ("7.6 A", "7.4 A"),
        ),
        // 10.01 A of loads where the charger gives less.
        wrong(
            ("R15", "string-device-too-small"),
            "the device of a string carries its share of what is drawn",
            strings("take_off = 'busbar'; string_device = '?'").with("generator", "output = '8 A'"),
            ("5.1 A", "4.9 A"),
        ),
    ]
}

fn places() -> Vec<Pair> {
    let danger = |what, edge, site, twins| Pair::of(Danger, what, edge, site, twins);
    let small = ("R20", "ventilation-too-small");
    vec![
        danger(
            ("R20", "bank-in-living-space"),
            "vented cells stand in no living space",
            flooded("space = '?'"),
            ("room", "living"),
        ),
        danger(
            ("R20", "bank-in-engine-space"),
            "vented cells stand in no engine space",
            flooded("space = '?'"),
            ("box", "engine"),
        ),
        Pair::of(
            Advice,
            ("R20", "bank-in-engine-space"),
            "valve-regulated cells had better stand in no engine space",
            plant("space = '?'"),
            ("box", "engine"),
        ),
        Pair::of(
            NotChecked,
            ("R20", "bank-space-not-stated"),
            "where vented cells stand is stated or not checked",
            flooded("space = none; ?"),
            ("space = 'room'", ""),
        ),
        Pair::of(
            NotChecked,
            ("R20", "ventilation-not-stated"),
            "ventilation is stated or not checked",
            plant("air = none; ?"),
            ("air = '1 m3/h'", ""),
        ),
        // 0.05 × 6 × 8 × 100/1000 = 0.24 m³/h.
        danger(
            small,
            "valve-regulated cells get their air",
            plant("air = '?'"),
            ("0.245 m3/h", "0.235 m3/h"),
        ),
        // 0.05 × 6 × 20 × 100/1000 = 0.6 m³/h.
        danger(small, "vented cells get their air", flooded("air = '?'"), ("0.61 m3/h", "0.59 m3/h")),
        // 28 × 0.24 = 6.72 cm².
        danger(
            small,
            "openings let the air through, where people live too",
            plant("space = 'living'; air = none; opening = '?'"),
            ("6.8 cm2", "6.6 cm2"),
        ),
    ]
}

pub fn pairs() -> Vec<Pair> {
    [size_and_cold(), disconnects(), sharing(), places()].into_iter().flatten().collect()
}

fn found(site: &Document, slug: &str) -> Option<Severity> {
    let document = read(&site.to_string()).unwrap_or_else(|problems| panic!("{problems}"));
    let report = inspect(&document).unwrap_or_else(|problems| panic!("{problems}"));
    report.findings.iter().find(|f| f.slug == slug).map(|f| f.severity)
}

/// No twin can pass: four strings taken off diagonally are wrong however they share.
#[test]
fn strings_share_by_their_links() {
    // Strings of 1 mΩ with links of 1 mΩ: half as much again as an equal share; with links of a tenth of that 6 %.
    let four = |link: &str| {
        strings(&format!(
            "strings = 4; internal_resistance = '0.25 mohm'; string_device = '80 A'; joint = '1 uohm'; link = '{link}'"
        ))
    };
    assert_eq!(found(&four("1 mohm"), "strings-share-unequally"), Some(Nonconforming));
    assert_eq!(found(&four("0.3 mohm"), "strings-share-unequally"), Some(Advice));
    assert_eq!(found(&four("0.1 mohm"), "strings-share-unequally"), None);
}

/// No twin can pass: where even full cells freeze, none is charged or discharged.
#[test]
fn full_cells_that_freeze_are_a_danger() {
    // Acid of 1.265 freezes at −60.6 °C; 5 K of margin leave −55.6 °C.
    let at = |celsius: &str| flooded(&format!("temperature = ['{celsius} degC', '30 degC']"));
    assert_eq!(found(&at("-55"), "electrolyte-may-freeze"), Some(Nonconforming));
    assert_eq!(found(&at("-56"), "electrolyte-may-freeze"), Some(Danger));
    assert_eq!(found(&at("-55"), "disconnect-not-checked"), None);
    assert_eq!(found(&at("-56"), "disconnect-not-checked"), Some(NotChecked));
}
