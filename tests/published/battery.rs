//! Banks against `tests/reference/battery.toml`: every table and case, both ways where a table is held.
//!
//! Not covered: nickel-cadmium, NMC, freezing points, gassing currents and disconnect voltages, which stand in no
//! table here (recalled or common practice, and so marked in the library).

use std::collections::BTreeSet;

use ampwright::battery::{self, Chemistry, Kinetic, LoadClass, Wells};
use ampwright::citation::Seen;
use ampwright::law;
use ampwright::quantity::{
    ChargeRate, ElectricCharge, ElectricCurrent, ElectricPotential, Ratio, StateOfCharge,
    ThermodynamicTemperature, Time, volts_per_kelvin,
};
use ampwright_tests::{Case, Reference, number};
use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::{degree_celsius, degree_fahrenheit};
use uom::si::time::{hour, minute};

use crate::conductors::Table;

const BATTERY: &str = include_str!("../reference/battery.toml");

/// Held in the same figures: what is left is the passage through base units.
const EXACT: f64 = 1e-9;

fn ah(x: f64) -> ElectricCharge {
    ElectricCharge::new::<ampere_hour>(x)
}
fn a(x: f64) -> ElectricCurrent {
    ElectricCurrent::new::<ampere>(x)
}
fn v(x: f64) -> ElectricPotential {
    ElectricPotential::new::<volt>(x)
}
fn h(x: f64) -> Time {
    Time::new::<hour>(x)
}
fn part(x: f64) -> Ratio {
    Ratio::new::<ratio>(x)
}
fn celsius(x: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(x)
}
fn fahrenheit(x: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_fahrenheit>(x)
}
fn charge(x: f64) -> StateOfCharge {
    StateOfCharge::new(x).unwrap()
}
fn table(id: &str) -> Table {
    Table::read(BATTERY, id)
}
fn case(id: &str) -> Case {
    Reference::read("battery.toml").cases.remove(id).unwrap_or_else(|| panic!("no case {id}"))
}

/// So that none is forgotten: what the file holds is checked here, or named with the place where it is.
#[test]
fn every_table_and_case_has_its_test() {
    let here = [
        "ieee-485-temperature-factor",
        "lead-acid-charge-voltage-temperature-coefficient",
        "charge-voltage-70F",
        "specific-gravity-90F",
        "lead-acid-charge-voltages",
        "lead-acid-ocv-soc-flooded",
        "lead-acid-ocv-soc-magazine",
        "lfp-ocv-soc-typical",
        "astm-e1049-rainflow-counts",
        "astm-e1049-rainflow-cycles",
        "peukert-one-ampere-form",
        "peukert-20h-rate-10A",
        "peukert-exponent-from-two-ratings",
        "peukert-exponent-ranges",
        "kibam-lifetimes-two-small-cells",
        "kibam-constant-0.96A",
        "kibam-step-trajectory",
        "battery-temperature-multiplier-worksheet",
        "cycle-life-dod-li-ion",
        "autonomy-days",
    ];
    let elsewhere = [
        "charge-rates",           // `devices`
        "lfp-temperature-limits", // `devices`
        "array-to-load-ratio",    // the room of arrays
        "array-to-load-example",  // the room of arrays
    ];
    let file = Reference::read("battery.toml");
    let all: BTreeSet<&str> = file.tables.keys().chain(file.cases.keys()).map(String::as_str).collect();
    let named: BTreeSet<&str> = here.into_iter().chain(elsewhere).collect();
    assert_eq!(all, named, "a table or case is new, gone or renamed");
    assert_eq!(named.len(), here.len() + elsewhere.len(), "one stands twice");
}

/// Source: IEEE Std 485 (1997, 2010), Table 1. Page seen but for four rows. Exact, and as many rows.
#[test]
fn temperature_factors_cell_by_cell() {
    let printed = table("ieee-485-temperature-factor");
    assert_eq!(printed.len(), battery::TEMPERATURE_FACTORS.len());
    for (row, (t, factor)) in printed.rows().zip(battery::TEMPERATURE_FACTORS) {
        row.check("temperature_C", t, 0.0);
        row.check("factor", factor, 0.0);
        let found = battery::temperature_factor(celsius(t)).unwrap();
        row.check("factor", found.get::<ratio>(), EXACT);
        // The two columns of temperature are one, rounded to a tenth.
        let exact = fahrenheit(row.number("temperature_F").unwrap()).get::<degree_celsius>();
        row.check("temperature_C", exact, 0.051);
        // Rows that nobody has seen are marked so.
        let recalled = [25.0, 30.0, 35.0, 125.0].contains(&row.number("temperature_F").unwrap());
        let seen = battery::capacity_factor(Chemistry::Flooded, celsius(t)).unwrap().citation.seen;
        assert_eq!(seen == Seen::Recalled, recalled, "{t} °C");
    }
}

/// Source: IEEE Std 485, note to Table 1: the straight line between rows. Its ends are its ends.
#[test]
fn between_rows_the_factor_follows_a_straight_line_and_beyond_the_ends_there_is_none() {
    for pair in battery::TEMPERATURE_FACTORS.windows(2) {
        let middle = 0.5 * (pair[0].0 + pair[1].0);
        let found = battery::temperature_factor(celsius(middle)).unwrap().get::<ratio>();
        assert!((found - 0.5 * (pair[0].1 + pair[1].1)).abs() < EXACT, "{middle} °C");
    }
    for beyond in [-3.91, -20.0, 51.71, 60.0] {
        let error = battery::temperature_factor(celsius(beyond)).unwrap_err();
        assert_eq!(error.slug(), "table-ends", "{beyond} °C");
    }
}

/// Source: an off-grid worksheet, widely reprinted, page seen. Tolerance 0.001: both print two decimals, and its
/// Celsius column is rounded.
///
/// DIFFERENCE: at 80 °F the worksheet takes 1.00 where the standard's table has 0.98 (we take no credit either); at
/// 30 °F 1.40 where the standard has 1.43; at 20 °F it goes on to 1.59 where the standard holds nothing: we refuse.
#[test]
fn the_worksheet_agrees_where_the_standard_has_rows() {
    for row in table("battery-temperature-multiplier-worksheet").rows() {
        let degrees = row.number("temperature_F").unwrap();
        let found = battery::temperature_factor(celsius(
            (fahrenheit(degrees).get::<degree_celsius>() * 10.0).round() / 10.0,
        ));
        match degrees {
            20.0 => assert_eq!(found.unwrap_err().slug(), "table-ends"),
            30.0 => row.check("multiplier", found.unwrap().value, 0.031),
            80.0 => row.check("multiplier", found.unwrap().value.max(1.0), EXACT),
            _ => row.check("multiplier", found.unwrap().value, 0.001),
        }
    }
}

/// Source: as each row names. Ours lies within what makers and handbooks give, at its steep end: colder is charged
/// higher.
#[test]
fn compensation_lies_within_the_published_range() {
    let rows = table("lead-acid-charge-voltage-temperature-coefficient");
    let cell = |column: &str| {
        rows.rows()
            .filter(|r| r.text("what").contains("charge") || r.text("what").contains("range"))
            .map(move |r| r.number(column).unwrap())
            .collect::<Vec<_>>()
    };
    let published = cell("coefficient_mV_per_C_per_cell");
    assert!(published.len() >= 4);
    let (steepest, flattest) =
        published.iter().fold((0.0, f64::MIN), |(s, f): (f64, f64), x| (s.min(*x), f.max(*x)));
    for chemistry in [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel] {
        let ours = 1e3 * battery::compensation(chemistry).value;
        assert!((steepest..=flattest).contains(&ours), "{chemistry}: {ours}");
    }
}

/// Source: a battery maker's technical FAQ, page seen. Tolerance 0.005: printed to the hundredth of a volt.
#[test]
fn charge_voltage_of_a_12_volt_battery_at_70_fahrenheit() {
    let case = case("charge-voltage-70F");
    let per_kelvin = -case.input("step_V_per_cell_per_10F") / (10.0 / 1.8);
    let result = battery::compensated_voltage(
        v(case.input("voltage_at_reference_V")),
        part(case.input("cells")),
        volts_per_kelvin(per_kelvin),
        fahrenheit(case.input("reference_temperature_F")),
        fahrenheit(case.input("temperature_F")),
    );
    case.check("voltage_V", result.unwrap().get::<volt>(), 0.005);
}

/// Source: the same FAQ, page seen. Tolerance 0.0005: printed to the thousandth.
#[test]
fn relative_density_read_at_90_fahrenheit() {
    let case = case("specific-gravity-90F");
    let result = battery::relative_density_at_reference(
        part(case.input("reading")),
        fahrenheit(case.input("temperature_F")),
        fahrenheit(case.input("reference_F")),
    );
    case.check("corrected", result.unwrap().value, 0.0005);
}

/// Source: common handbook values, most points read on pages. Exact.
#[test]
fn charge_voltages_of_lead_acid_cell_by_cell() {
    let printed = table("lead-acid-charge-voltages");
    assert_eq!(printed.len(), 3);
    for (row, chemistry) in printed.rows().zip([Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel]) {
        let named = row.text("type").to_lowercase();
        assert!(named.starts_with(chemistry.word()), "{named}");
        let cell = battery::cell_set_points(chemistry);
        let bank = battery::set_points(chemistry, 24, celsius(25.0)).unwrap();
        for (name, ours, whole) in [
            ("absorption", cell.absorption_V, bank.absorption),
            ("float", cell.float_V.unwrap(), bank.float.unwrap()),
            ("equalize", cell.equalise_V.unwrap(), bank.equalise.unwrap()),
        ] {
            row.check(&format!("{name}_low"), ours.0, 0.0);
            row.check(&format!("{name}_high"), ours.1, 0.0);
            row.check(&format!("{name}_low"), whole.low.get::<volt>() / 24.0, EXACT);
            row.check(&format!("{name}_high"), whole.high.get::<volt>() / 24.0, EXACT);
        }
    }
}

/// Source: a battery council's table, widely reprinted, page seen. Exact; six cells within 0.006 V: the column of
/// cells is the other divided by six and rounded to a millivolt.
#[test]
fn rest_voltage_and_density_of_flooded_cells() {
    let printed = table("lead-acid-ocv-soc-flooded");
    let held = battery::rest_table(Chemistry::Flooded);
    assert_eq!(printed.len(), held.voltage_V.value.len());
    for (row, ours) in printed.rows().zip(held.voltage_V.value.iter().rev()) {
        row.check("soc", ours.0, 0.0);
        row.check("ocv_per_cell_V", ours.1, 0.0);
        let soc = charge(ours.0);
        let density = battery::relative_density(Chemistry::Flooded, soc).unwrap().value;
        row.check("specific_gravity", density, 0.0);
        let six = battery::rest_voltage(Chemistry::Flooded, part(6.0), part(ours.0)).unwrap();
        row.check("ocv_12V_V", six.get::<volt>(), 0.006);
        // Back again: the reading leaves the table's own charge within what it admits, and near its middle.
        let printed_V = row.number("ocv_12V_V").unwrap();
        let range = battery::state_of_charge(Chemistry::Flooded, 6, v(printed_V), v(0.0)).unwrap();
        assert!(range.least.get() <= ours.0 && ours.0 <= range.greatest.get(), "{range:?}");
        let from_density = battery::state_of_charge_from_density(part(density)).unwrap().value;
        row.check("soc", from_density, EXACT);
        // Another way: the rule that a cell's rest voltage is its density and 0.845 V, within 0.10 V of six cells.
        row.check("ocv_12V_V", 6.0 * (density + 0.845), 0.101);
    }
}

/// Source: a vehicle magazine's answers, page seen: another table of the same. Our answer to its voltages must not
/// leave out its charge. DIFFERENCE: its densities lie up to 0.015 above those of the council at and below three
/// quarters.
#[test]
fn another_table_of_rest_voltages_lies_within_the_spread() {
    for row in table("lead-acid-ocv-soc-magazine").rows() {
        let soc = row.number("soc").unwrap();
        let range =
            battery::state_of_charge(Chemistry::Flooded, 6, v(row.number("ocv_12V_V").unwrap()), v(0.005));
        let range = range.unwrap();
        assert!(range.least.get() <= soc && soc <= range.greatest.get(), "{soc}: {range:?}");
        let density = battery::relative_density(Chemistry::Flooded, charge(soc)).unwrap().value;
        let low = row.number("specific_gravity_low").unwrap();
        assert!((low - 0.0151..=row.number("specific_gravity_high").unwrap()).contains(&density), "{soc}");
    }
}

/// Source: a typical published curve, recalled. Exact; and the plateau of its note is refused as a gauge.
#[test]
fn rest_voltage_of_lfp() {
    let printed = table("lfp-ocv-soc-typical");
    let held = battery::rest_table(Chemistry::Lfp);
    assert_eq!(printed.len(), held.voltage_V.value.len());
    assert_eq!(held.voltage_V.citation.seen, Seen::Recalled);
    for (row, ours) in printed.rows().zip(held.voltage_V.value.iter().rev()) {
        row.check("soc", ours.0, 0.0);
        row.check("ocv_per_cell_V", ours.1, 0.0);
        let reading = v(row.number("ocv_per_cell_V").unwrap());
        let range = battery::state_of_charge(Chemistry::Lfp, 1, reading, v(0.0)).unwrap();
        assert!(range.least.get() <= ours.0 && ours.0 <= range.greatest.get(), "{range:?}");
        if (0.3..=0.9).contains(&ours.0) {
            assert_eq!(range.estimate(), None, "{} %: {range:?}", 100.0 * ours.0);
        }
    }
}

/// Source: ASTM E1049-85, 5.4.4, Fig. 6, page seen. Exact: the cycles in the order of counting, and their sums by
/// range.
#[test]
fn rainflow_counts_of_the_standard_history() {
    let history = [-2.0, 1.0, -3.0, 5.0, -1.0, 3.0, -4.0, 4.0, -2.0];
    let (mut stack, mut found) = ([0.0; 9], Vec::new());
    battery::rainflow(&history, &mut stack, |cycle| found.push(cycle)).unwrap();
    let cycles = table("astm-e1049-rainflow-cycles");
    assert_eq!(cycles.len(), found.len());
    for (row, ours) in cycles.rows().zip(&found) {
        row.check("range", ours.range, 0.0);
        row.check("mean", ours.mean, 0.0);
        row.check("count", ours.count, 0.0);
    }
    let counts = table("astm-e1049-rainflow-counts");
    for row in counts.rows() {
        let range = row.number("range").unwrap();
        row.check("cycle_count", found.iter().filter(|c| c.range == range).map(|c| c.count).sum(), 0.0);
    }
    assert_eq!(found.iter().map(|c| c.count).sum::<f64>(), 4.0);
    // Between turning points nothing counts: the same with steps put in.
    let stepped: Vec<f64> =
        history.windows(2).flat_map(|w| [w[0], 0.5 * (w[0] + w[1])]).chain([-2.0]).collect();
    let (mut stack, mut again) = (vec![0.0; stepped.len()], Vec::new());
    battery::rainflow(&stepped, &mut stack, |cycle| again.push(cycle)).unwrap();
    assert_eq!(again, found);
}

/// Source: a public article on Peukert's law, page seen: t = C/I^k, the form of one ampere. Tolerance 0.05: printed
/// to a tenth.
#[test]
fn peukert_in_the_form_of_one_ampere() {
    let case = case("peukert-one-ampere-form");
    let capacity = case.input("peukert_capacity_Ah");
    // One ampere for as many hours is that rating.
    let time = law::peukert_time(
        a(case.input("current_A")),
        ah(capacity),
        h(capacity),
        part(case.input("exponent")),
    );
    case.check("time_h", time.unwrap().get::<hour>(), 0.05);
}

/// Source: a widely reprinted example, recalled. Tolerances as printed.
#[test]
fn peukert_with_a_rated_time() {
    let case = case("peukert-20h-rate-10A");
    let (current, capacity) = (a(case.input("current_A")), ah(case.input("rated_capacity_Ah")));
    let (rated, exponent) = (h(case.input("rated_time_h")), part(case.input("exponent")));
    let time = law::peukert_time(current, capacity, rated, exponent).unwrap();
    case.check("time_h", time.get::<hour>(), 0.05);
    let charge = battery::delivered_charge(current, capacity, rated, exponent).unwrap();
    case.check("delivered_Ah", charge.get::<ampere_hour>(), 0.5);
}

/// Source: arithmetic on the form of a monitor's manual, computed apart. Tolerance 0.0001: printed to four decimals.
#[test]
fn peukert_exponent_of_two_ratings() {
    let case = case("peukert-exponent-from-two-ratings");
    let (c1, t1) = (case.input("capacity_1_Ah"), case.input("time_1_h"));
    let (c2, t2) = (case.input("capacity_2_Ah"), case.input("time_2_h"));
    let found = battery::peukert_exponent(ah(c1), h(t1), ah(c2), h(t2)).unwrap().value;
    case.check("exponent", found, 0.0001);
    case.check("current_1_A", c1 / t1, EXACT);
    case.check("current_2_A", c2 / t2, EXACT);
    let back = battery::hour_rate_capacity(ah(c1), h(t1), h(t2), part(found)).unwrap();
    assert!((back.get::<ampere_hour>() - c2).abs() < EXACT);
}

/// Source: common handbook values, recalled. Exact.
#[test]
fn peukert_exponents_by_type() {
    for (row, chemistry) in
        table("peukert-exponent-ranges").rows().zip([Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel])
    {
        assert!(row.text("type").to_lowercase().starts_with(chemistry.word()));
        let (low, high) = battery::data(chemistry).peukert.value;
        row.check("low", low, 0.0);
        row.check("high", high, 0.0);
    }
}

/// Minutes until a battery is empty under a pattern of (mA, minutes) that repeats.
fn lifetime(model: &Kinetic, pattern: &[(f64, f64)]) -> f64 {
    let (mut wells, mut passed) = (model.full(), 0.0);
    for (milliamperes, minutes) in pattern.iter().cycle() {
        let (current, stretch) = (a(milliamperes / 1000.0), Time::new::<minute>(*minutes));
        if let Some(time) = model.time_to_empty(wells, current, stretch).unwrap() {
            return passed + time.get::<minute>();
        }
        wells = model.step(wells, current, stretch).unwrap();
        passed += minutes;
        assert!(passed < 1e4, "it never empties");
    }
    unreachable!("a pattern without end")
}

/// Source: Jongerden and others, DSN 2009, recalled. Published figures within 0.006 min (printed to 0.01, one of them
/// cut), the recomputed ones within 0.0006 (printed to 0.001).
#[test]
fn kinetic_lifetimes_of_two_small_batteries() {
    let model = |ampere_minutes: f64| {
        Kinetic::new(ah(ampere_minutes / 60.0), part(0.166), ChargeRate::per_hour(0.122 * 60.0).unwrap())
            .unwrap()
    };
    let patterns: [&[(f64, f64)]; 8] = [
        &[(250.0, 1.0)],
        &[(500.0, 1.0)],
        &[(500.0, 1.0), (250.0, 1.0)],
        &[(250.0, 1.0), (0.0, 1.0)],
        &[(500.0, 1.0), (0.0, 1.0)],
        &[(500.0, 1.0), (0.0, 1.0), (250.0, 1.0), (0.0, 1.0)],
        &[(250.0, 1.0), (0.0, 2.0)],
        &[(500.0, 1.0), (0.0, 2.0)],
    ];
    let printed = table("kibam-lifetimes-two-small-cells");
    assert_eq!(printed.len(), patterns.len());
    for (row, pattern) in printed.rows().zip(patterns) {
        for (ampere_minutes, name) in [(5.5, "battery_5.5_A_min"), (11.0, "battery_11_A_min")] {
            let found = lifetime(&model(ampere_minutes), pattern);
            row.check(&format!("{name}_published"), found, 0.006);
            // The recomputed column of the second battery has as few as two decimals.
            row.check(&format!("{name}_recomputed"), found, 0.0051);
        }
        // A constant load, by the catalogue's own function.
        if let [(milliamperes, _)] = pattern {
            let rate = ChargeRate::per_hour(0.122 * 60.0).unwrap();
            let whole =
                battery::kinetic_lifetime(ah(5.5 / 60.0), part(0.166), rate, a(milliamperes / 1000.0));
            row.check("battery_5.5_A_min_recomputed", whole.unwrap().get::<minute>(), 0.0006);
        }
    }
}

/// Source: Jongerden and Haverkort, IET Software 3 (2009) 445, recalled. ±1 min. k there couples the wells: k′ =
/// k/(c(1 − c)).
#[test]
fn kinetic_lifetime_at_a_constant_current() {
    let case = case("kibam-constant-0.96A");
    let (c, k) = (case.input("c"), case.input("k_per_s"));
    let rate = |per_s: f64| ChargeRate::per_hour(3600.0 * per_s).unwrap();
    let capacity = ah(case.input("capacity_As") / 3600.0);
    let life = |rate| {
        let life = battery::kinetic_lifetime(capacity, part(c), rate, a(case.input("current_A")));
        life.unwrap().get::<minute>()
    };
    case.check("lifetime_min", life(rate(k / (c * (1.0 - c)))), 1.0);
    // Read as k′ instead it does not agree: the note's 81.2 min.
    assert!((life(rate(k)) - 81.2).abs() < 0.06);
}

/// Source: Manwell and McGowan, Solar Energy 50 (1993) 399, evaluated apart. Tolerance 5e-6: printed to five
/// decimals, and to four in the first row.
#[test]
fn kinetic_trajectory_under_a_stepped_current() {
    let model = Kinetic::new(ah(300.0), part(0.3), ChargeRate::per_hour(1.2).unwrap()).unwrap();
    let mut wells: Wells = model.full();
    let printed = table("kibam-step-trajectory");
    assert_eq!(printed.len(), 13);
    for row in printed.rows() {
        if row.number("hour").unwrap() > 0.0 {
            wells = model.step(wells, a(row.number("current_A").unwrap()), h(1.0)).unwrap();
        }
        row.check("available_Ah", wells.available.get::<ampere_hour>(), 1e-5);
        row.check("bound_Ah", wells.bound.get::<ampere_hour>(), 1e-5);
        let most = model.max_discharge(wells, h(1.0)).unwrap().get::<ampere>();
        row.check("max_discharge_next_hour_A", most, 1e-5);
        // There a charge is negative; ours is a magnitude.
        let charge = model.max_charge(wells, h(1.0)).unwrap().get::<ampere>();
        row.check("max_charge_next_hour_A", -charge, 1e-5);
    }
}

/// Source: a public table of cycles to 70 %, part of it recalled. Exact.
#[test]
fn cycles_of_lithium_against_depth() {
    let printed = table("cycle-life-dod-li-ion");
    for (column, chemistry) in [("nmc_cycles", Chemistry::Nmc), ("lfp_cycles", Chemistry::Lfp)] {
        let held = battery::data(chemistry).cycles;
        assert_eq!((held.value.len(), held.citation.seen), (printed.len(), Seen::Recalled));
        for (row, ours) in printed.rows().zip(held.value.iter().rev()) {
            row.check("dod", ours.0, 0.0);
            row.check(column, ours.1, 0.0);
            let found = battery::cycle_life(chemistry, part(ours.0)).unwrap().value;
            row.check(column, found, EXACT * ours.1);
        }
    }
}

/// Source: IEEE Std 1013 and IEEE Std 1562, recalled. Exact.
#[test]
fn days_of_autonomy_by_class_of_load() {
    for (row, class) in table("autonomy-days").rows().zip([LoadClass::NonCritical, LoadClass::Critical]) {
        assert_eq!(row.text("load_class").starts_with("non-critical"), class == LoadClass::NonCritical);
        let held = battery::autonomy_days(class);
        row.check("low", held.value.0, 0.0);
        row.check("high", held.value.1, 0.0);
        assert_eq!(held.citation.seen, Seen::Recalled);
    }
}

/// Source: the file's own words on its tables: a row that nobody has seen is marked so in the library.
#[test]
fn confidence_of_the_file_is_that_of_the_library() {
    let file = Reference::read("battery.toml");
    let of = |id: &str| match file.tables[id].confidence.as_str() {
        "page" => Seen::Page,
        _ => Seen::Recalled,
    };
    for (id, ours) in [
        ("lead-acid-charge-voltages", battery::cell_set_points(Chemistry::Agm).citation),
        ("lead-acid-ocv-soc-flooded", battery::rest_table(Chemistry::Flooded).voltage_V.citation),
        ("lfp-ocv-soc-typical", battery::rest_table(Chemistry::Lfp).voltage_V.citation),
        ("peukert-exponent-ranges", battery::data(Chemistry::Gel).peukert.citation),
        ("cycle-life-dod-li-ion", battery::data(Chemistry::Nmc).cycles.citation),
        ("autonomy-days", battery::autonomy_days(LoadClass::Critical).citation),
    ] {
        assert_eq!(ours.seen, of(id), "{id}");
    }
    assert!(number(&file.tables["autonomy-days"].rows[0][1]).is_some());
}
