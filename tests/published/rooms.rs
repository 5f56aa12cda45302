//! Calculations of the catalogue that belong to rooms above the laws, on plain numbers, as every face calls them.
//!
//! The tables behind them are checked cell by cell in `conductors` and `devices`; here, that the entries give them.

use ampwright_tests::Reference;

use crate::conductors::Table;

const CONDUCTORS: &str = include_str!("../reference/conductors.toml");
const PROTECTION: &str = include_str!("../reference/protection.toml");
const BATTERY: &str = include_str!("../reference/battery.toml");

/// Ohms per 1000 ft hold for this length, in metres.
const KFT_M: f64 = 304.8;

/// An entry's outputs, or its error's slug.
fn call(name: &str, inputs: &[f64]) -> Result<Vec<f64>, &'static str> {
    let entry = ampwright::entries().find(|entry| entry.name == name).unwrap_or_else(|| panic!("{name}"));
    let mut outputs = vec![f64::NAN; entry.outputs.len()];
    (entry.scalar)(inputs, &mut outputs).map(|()| outputs).map_err(|error| error.slug())
}

fn one(name: &str, inputs: &[f64]) -> f64 {
    call(name, inputs).unwrap_or_else(|slug| panic!("{name}({inputs:?}): {slug}"))[0]
}

/// The code of a word.
fn code(name: &str, input: &str, word: &str) -> f64 {
    let entry = ampwright::entries().find(|entry| entry.name == name).unwrap();
    let choices = entry.inputs.iter().find(|i| i.name == input).unwrap().choices;
    choices.iter().position(|choice| *choice == word).unwrap_or_else(|| panic!("no word {word}")) as f64
}

/// Source: IEC 60228:2004, Tables 1 to 3. Exact, but for the rounding of f64: 1e-12 relative.
#[test]
fn a_kilometre_at_20_degrees_has_the_resistance_of_the_table() {
    const NAME: &str = "iec_conductor_resistance";
    let columns = ["plain", "tinned"];
    let mut cells = 0;
    for (table, class) in
        [("iec-60228-class-1", "class_1"), ("iec-60228-class-2", "class_2"), ("iec-60228-class-5", "class_5")]
    {
        let table = Table::read(CONDUCTORS, table);
        let class = code(NAME, "class", class);
        for row in table.rows() {
            let size = row.number("size_mm2").unwrap();
            for column in columns.into_iter().filter(|column| table.has(column)) {
                let Some(printed) = row.number(column) else { continue };
                let ours = one(NAME, &[size, class, code(NAME, "coating", column), 20.0, 1000.0]);
                row.check(column, ours, 1e-12 * printed);
                cells += 1;
            }
            // Off the table there is no figure.
            assert_eq!(call(NAME, &[size * 1.01, class, 0.0, 20.0, 1000.0]), Err("contradiction"));
        }
    }
    assert!(cells >= 49, "{cells} cells");
}

/// Source: NFPA 70-2023, Chapter 9, Table 8, ohms per 1000 ft at 75 °C. Exact but for rounding: 1e-12 relative.
#[test]
fn a_thousand_feet_at_75_degrees_have_the_resistance_of_the_table() {
    const NAME: &str = "gauge_conductor_resistance";
    let mut cells = 0;
    for (table, class) in [("nec-ch9-table-8-stranded", "class_2"), ("nec-ch9-table-8-solid", "class_1")] {
        let class = code(NAME, "class", class);
        for row in Table::read(CONDUCTORS, table).rows() {
            let gauge = match row.text("size_awg").split_once("/0") {
                Some((noughts, _)) => 1.0 - noughts.parse::<f64>().unwrap(),
                None => row.text("size_awg").parse().unwrap(),
            };
            if gauge > 40.0 {
                continue; // kcmil
            }
            let Some(printed) = row.number("ohm_per_kft") else { continue };
            row.check("ohm_per_kft", one(NAME, &[gauge, class, 0.0, 75.0, KFT_M]), 1e-12 * printed);
            cells += 1;
        }
    }
    assert!(cells >= 20, "{cells} cells");
    for untabled in [17.0, 20.0, 6.5] {
        assert_eq!(call(NAME, &[untabled, 1.0, 0.0, 75.0, 1.0]), Err("contradiction"), "{untabled} AWG");
    }
}

/// Source: `cases-conductors.toml`, each case with its own; tolerances as there.
#[test]
fn resistance_of_worked_examples() {
    let cases = Reference::read("cases-conductors.toml").cases;
    let case = &cases["jumper-6awg-8in"];
    // At 20 °C from the area of the gauge, as the source's figure.
    let area = one("gauge_area", &[6.0]);
    let jumper = one("conductor_resistance", &[0.0, 20.0, case.input("length_in") * 0.0254, area]);
    case.check("resistance_ohm", jumper, 0.06 * case.expected("resistance_ohm"));

    // 4.4 mV/(A·m) covers both conductors at 70 °C; what is printed is truncated to 0.01 V, and 4.4 is 4.38.
    let case = &cases["textbook-shower-drop-18m"];
    let length = case.input("length_one_way_m");
    let conductor = one("iec_conductor_resistance", &[case.input("size_mm2"), 1.0, 0.0, 70.0, length]);
    case.check("drop_V", 2.0 * conductor * case.input("current_A"), 0.01);

    // The source's own note: copper near 78 °C.
    let case = &cases["dc-24v-2mm5-30m-2a6"];
    let conductor =
        one("conductor_resistance", &[0.0, 78.0, case.input("length_one_way_m"), case.input("area_mm2")]);
    case.check("drop_V", 2.0 * conductor * case.input("current_A"), 0.005);
}

/// Source: `copper-resistivity` and IEC 60028:1925: 1/58 Ω·mm²/m at 20 °C. Exact but for rounding.
#[test]
fn copper_at_20_degrees_has_the_standard_resistivity() {
    assert!((one("resistivity", &[0.0, 20.0]) * 58e6 - 1.0).abs() < 1e-14);
}

/// Source: IEC 60364-5-54:2011, Annex A: the line `K·√ln(1 + (θf − θi)/(β + θi))` against Table A.54.2, printed to
/// the unit.
#[test]
fn adiabatic_k_of_separate_conductors() {
    let table = Table::read(PROTECTION, "iec-adiabatic-k-pe-separate");
    for row in table.rows() {
        let (initial, end) = (row.number("initial_C").unwrap(), row.number("final_C").unwrap());
        for (column, material) in [("copper", 0.0), ("aluminium", 1.0)] {
            row.check(column, one("adiabatic_k_between", &[material, initial, end]), 0.5);
            assert_eq!(
                call("adiabatic_k_between", &[material, end, end]),
                Err(if end > 250.0 { "out-of-range" } else { "contradiction" })
            );
        }
        assert_eq!(call("adiabatic_k_between", &[2.0, initial, end]), Err("not-tabulated"));
    }
}

/// Source: IEC 60269-1 and the tables' notes. Exact, amperes at the largest rating of each band.
#[test]
fn conventional_currents_of_fuses() {
    for (id, family) in [("iec-60269-gg-conventional", "gG"), ("iec-60269-gpv-conventional", "gPV")] {
        let family = code("conventional_currents", "family", family);
        for row in Table::read(PROTECTION, id).rows() {
            let least = row.number("In_min_A").unwrap();
            // Inside the band; its ends are checked in the room.
            let rating = row.number("In_max_A").map_or(2.0 * least, |most| 0.5 * (least + most));
            let result = call("conventional_currents", &[family, rating]).unwrap();
            row.check("non_fusing", result[0] / rating, 1e-12);
            row.check("fusing", result[1] / rating, 1e-12);
            row.check("time_h", result[2], 1e-12);
        }
    }
    let short_circuit_only = code("conventional_currents", "family", "aR");
    assert_eq!(call("conventional_currents", &[short_circuit_only, 100.0]), Err("not-tabulated"));
}

/// Source: `charge-rates` and `lfp-temperature-limits`, as noted there. Exact but for the passage through coulombs.
#[test]
fn charge_and_discharge_currents_of_100_ampere_hours() {
    for (row, word) in [
        ("flooded lead-acid", "flooded"),
        ("gel lead-acid", "gel"),
        ("AGM lead-acid", "agm"),
        ("lithium iron phosphate", "lfp"),
    ] {
        let table = Table::read(BATTERY, "charge-rates");
        let row = table.rows().find(|r| r.text("chemistry") == row).unwrap();
        let chemistry = code("charge_current_limit", "chemistry", word);
        let limit = call("charge_current_limit", &[chemistry, 100.0, 25.0]).unwrap();
        row.check("recommended_high", limit[0] / 100.0, 1e-12);
        row.check("usual_maximum", limit[1] / 100.0, 1e-12);
        if word == "lfp" {
            assert_eq!(limit[2], 0.0, "no least rate");
        } else {
            row.check("recommended_low", limit[2] / 100.0, 1e-12);
            assert_eq!(call("discharge_current_limit", &[chemistry, 100.0, 25.0]), Err("not-tabulated"));
        }
    }
    let lfp = code("charge_current_limit", "chemistry", "lfp");
    for row in Table::read(BATTERY, "lfp-temperature-limits").rows() {
        let (least, most) = (row.number("minimum_C").unwrap(), row.number("maximum_C").unwrap());
        let limit = row.number("rate_limit_C_rate").unwrap();
        let name = if row.text("operation") == "discharge" {
            "discharge_current_limit"
        } else {
            "charge_current_limit"
        };
        // A tenth of a degree inside; the coldest band of charging lies below the row of the whole range.
        row.check("rate_limit_C_rate", one(name, &[lfp, 100.0, most - 0.1]) / 100.0, 1e-12);
        assert!(one(name, &[lfp, 100.0, least + 0.1]) <= 100.0 * limit + 1e-9);
        assert_eq!(one(name, &[lfp, 100.0, least - 0.1]), 0.0, "{}", row.text("operation"));
    }
}

/// Source: `battery-short-circuit-estimate`, and the cases named, with their tolerances.
#[test]
fn banks_in_a_short_circuit() {
    for row in Table::read(PROTECTION, "battery-short-circuit-estimate").rows() {
        let estimate = call("short_circuit_estimate", &[0.0, 400.0]).unwrap();
        let place = usize::from(row.text("quantity") != "usual");
        row.check("k", estimate[place] / 400.0, 1e-12);
    }
    assert_eq!(call("short_circuit_estimate", &[3.0, 400.0]), Err("not-tabulated"));

    let cases = Reference::read("cases-conductors.toml").cases;
    let case = &cases["dc-battery-short-circuit-one"];
    let volts = case.input("battery_voltage_V");
    let resistance = one("bank_resistance", &[volts, case.expected("short_circuit_A")]);
    // ±10 A of 4370 A.
    case.check("battery_resistance_ohm", resistance, 0.055 * 10.0 / 4360.0);

    let case = &cases["lithium-cell-short-circuit"];
    let cell = one("bank_resistance", &[case.input("cell_voltage_V"), case.expected("short_circuit_A")]);
    // Rounded to the whole ampere.
    case.close("cell_resistance_ohm", cell, case.input("cell_resistance_ohm"), 0.00075 * 0.5 / 4666.0);
}

/// Source: the cases named, page seen. Tolerances as printed.
#[test]
fn inverters_at_low_battery_and_at_nominal() {
    let cases = Reference::read("cases-conductors.toml").cases;
    for id in ["inverter-2500w-24v-input-current", "inverter-4000w-24v-low-battery"] {
        let case = &cases[id];
        let (power, volts) = (case.input("power_W"), case.input("battery_voltage_V"));
        let feed = call("inverter_feed", &[power, case.input("efficiency"), 24.0, volts]).unwrap();
        case.check("input_current_A", feed[2], 0.5);
    }
    let case = &Reference::read("cases-energy.toml").cases["inverter-1000W-12V"];
    let (loads, volts) = (case.inputs("loads_W"), case.input("voltage_V"));
    for (place, key) in [(1, "at_90_A"), (2, "at_500W_92_A"), (3, "at_1000W_85_A")] {
        let efficiency = case.inputs("efficiencies")[place];
        let feed = call("inverter_feed", &[loads[place], efficiency, volts, volts]).unwrap();
        case.check(key, feed[2], 0.1);
        case.close("energy", feed[0] * efficiency, loads[place], 1e-9);
    }
    case.check("ideal_A", call("inverter_feed", &[loads[0], 0.9, volts, volts]).unwrap()[1], 0.1);
}

/// Source: `continuous-16a-120v`; and common practice, no source: 89.6 A of an 800 W inverter need 112 A.
#[test]
fn ratings_for_continuous_current() {
    let case = &Reference::read("cases-conductors.toml").cases["continuous-16a-120v"];
    case.check("ocpd_A", one("least_device_rating", &[case.input("current_A"), 0.0, 0.8, 1.25]), 1e-12);
    let feed = call("inverter_feed", &[800.0, 0.85, 12.0, 10.5]).unwrap();
    assert!((one("least_device_rating", &[feed[2], 0.0, 0.8, 1.25]) - 112.0).abs() < 0.5);
}

/// Source: Kirchhoff's laws, evaluated apart: what leaves the source is delivered or lost.
#[test]
fn a_line_loses_what_it_does_not_deliver() {
    for (source, resistance, power) in [(21.0, 0.01, 1000.0), (12.0, 0.1, 359.0), (48.0, 0.0, 5000.0)] {
        let result = call("line_delivery", &[source, resistance, power]).unwrap();
        let (current, voltage, loss) = (result[0], result[1], result[2]);
        assert!((source * current - power - loss).abs() < 1e-9 * power, "{result:?}");
        assert!((current * voltage - power).abs() < 1e-9 * power && voltage >= 0.5 * source);
    }
    // 12² / (4 × 0.1) W is the most.
    assert_eq!(call("line_delivery", &[12.0, 0.1, 361.0]), Err("no-solution"));
}

/// Source: common practice, no source: shunts of the trade drop 75 mV at their rating; a fuse with its holder 0.1 V.
#[test]
fn joints_of_a_rating_and_their_heat() {
    let shunt = one("rated_joint_resistance", &[code("rated_joint_resistance", "kind", "shunt"), 500.0]);
    assert!((shunt - 0.15e-3).abs() < 1e-15);
    assert!((one("joint_heat", &[500.0, shunt]) - 37.5).abs() < 1e-9);
    let fuse = one("rated_joint_resistance", &[code("rated_joint_resistance", "kind", "fuse"), 100.0]);
    assert!((one("joint_heat", &[100.0, fuse]) - 10.0).abs() < 1e-9);
}
