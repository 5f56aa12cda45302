//! What a design refuses and prefers, just on either side of its edge: batteries in the cold, strings on a cold morning, ways of
//! joining modules, nominal voltage.

use ampwright::site::{inspect, read};

use crate::document::Document;

fn report(site: &Document) -> String {
    let document = read(&site.to_string()).unwrap_or_else(|problems| panic!("{site}\n{problems}"));
    inspect(&document).unwrap_or_else(|problems| panic!("{site}\n{problems}")).to_string()
}

fn holds(report: &str, words: &str) {
    assert!(report.contains(words), "not found: {words}\n{report}");
}

/// Loads of 36 Ah a day and a bank that is open.
fn open(bank: &str) -> Document {
    Document::plant("iec")
        .with("load", "current = '9 A'; hours = '4 h'")
        .without("bank")
        .add("bank", &format!("name = 'bank'; nominal = '12 V'; space = 'room'; {bank}"))
}

/// As `open`, with 3 kWh/m² in every month, a module of `Document::array` and one controller on offer.
fn sunny(array: &str, coldest: &str, controller: &str) -> Document {
    let months = ["'3 kWh/m2'"; 12].join(", ");
    open("chemistry = 'agm'; temperature = ['20 degC', '30 degC']")
        .without("generator")
        .with("site", "ambient = ['0 degC', '30 degC']")
        .add("weather", &format!("in_plane = [{months}]; coldest_morning = '{coldest}'"))
        .add("array", &format!("name = 'array'; module = 'm'; route = '2 m'{array}"))
        .add(
            "stock.module",
            "name = 'm'; power = '100 W'; voc = '22 V'; isc = '6 A'; vmp = '18 V'; imp = '5.6 A'; \
             voc_coefficient = '-0.3 %/K'; isc_coefficient = '0.05 %/K'; power_coefficient = '-0.4 %/K'; noct = '45 degC'; \
             series_fuse = '15 A'; greatest_voltage = '600 V'",
        )
        .add(
            "stock.controller",
            &format!("name = 'c'; input_current = '60 A'; output = '60 A'; start_margin = '1 V'; sense = 'bank'; {controller}"),
        )
}

/// Lithium is charged at 0 °C and not below: the cheaper pack is taken there, and refused a degree below with its reason.
#[test]
fn a_battery_that_takes_no_charge_in_the_cold_is_not_bought() {
    let at = |coldest: &str| {
        let site = open(&format!("temperature = ['{coldest}', '30 degC']"))
            .with("generator", "output = '5 A'; absorption = none; float = none; compensation = none")
            .add(
                "stock.battery",
                "name = 'shy'; chemistry = 'lfp'; nominal = '12 V'; capacity = '100 Ah'; price = 100.0",
            )
            .add(
                "stock.battery",
                "name = 'hardy'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; price = 300.0",
            );
        report(&site)
    };
    holds(&at("0 degC"), "of \"shy\"");
    let frost = at("-1 degC");
    holds(&frost, "of \"hardy\"");
    holds(&frost, "battery shy: at -1 °C it must not be charged; it needs 0 °C at least");
}

/// Three modules of 22 V reach the 70 V of the controller at 22 × 3 × (1 + 0.003 × 20.2 K), which is 4.8 °C.
#[test]
fn strings_that_a_cold_morning_drives_too_high_are_refused() {
    let at = |coldest: &str| report(&sunny("", coldest, "kind = 'mppt'; greatest_input = '70 V'"));
    holds(&at("5 degC"), "3 of \"m\", 3 in series, 1 string");
    // Three in parallel are too low when hot, so that a fourth module is bought.
    holds(&at("4 degC"), "4 of \"m\", 2 in series, 2 strings");
}

/// The same modules: in series where nothing speaks against it, in parallel in part shade and behind a clamp.
#[test]
fn shade_and_clamps_speak_for_parallel() {
    let tracker = "kind = 'mppt'; greatest_input = '150 V'";
    holds(&report(&sunny("; shade = '0 %'", "5 degC", tracker)), "3 in series, 1 string");
    // Four of them, so that there is a choice.
    let four = |array: &str, controller: &str| {
        report(&sunny(array, "5 degC", controller).with("load", "current = '10.5 A'; hours = '4.5 h'"))
    };
    holds(&four("", tracker), "4 in series, 1 string");
    holds(&four("", tracker), "series, up to the controller's highest input voltage");
    holds(&four("; shade = '1 %'", tracker), "2 in series, 2 strings");
    holds(&four("; shade = '1 %'", tracker), "parallel, since a shaded module");
    let clamp = sunny("", "5 degC", "kind = 'pwm'; greatest_input = '150 V'")
        .with("stock.module", "vmp = '20.5 V'; imp = '5 A'; voc = '25 V'");
    holds(&report(&clamp), "1 in series");
    holds(&report(&clamp), "parallel, since the controller clamps");
}

/// 100 A is the most that is practical (common practice, no source): 1200 W at 12 V.
#[test]
fn nominal_voltage_rises_where_the_current_would_not_be_practical() {
    let with = |power: &str, greatest: &str| {
        let site = open("chemistry = 'agm'")
            .with("bank", "nominal = none")
            .with("generator", "absorption = none; float = none")
            .without("load")
            .add(
                "load",
                &format!(
                    "name = 'load'; power = '{power}'; hours = '2 h'; least = '9 V'; greatest = '{greatest}'; route = '0.5 m'"
                ),
            );
        report(&site)
    };
    holds(&with("1190 W", "70 V"), "bank \"bank\": agm 12 V");
    holds(&with("1210 W", "70 V"), "bank \"bank\": agm 24 V");
    // A load that bears no more than 17 V keeps it at 12 V.
    holds(&with("1210 W", "17 V"), "bank \"bank\": agm 12 V");
}
