//! Figures that the trade carries in its head: common practice, no source.
//!
//! They are checked as values only; what a rule set asks beside them is checked in its own tests. Tolerances are half
//! the last digit that the figure is usually given with, unless a line says otherwise.

use ampwright::law;
use ampwright::quantity::{ConductorSize, Textual, parse};
use ampwright_tests::{Reference, number};

fn q<Q: Textual>(text: &str) -> Q {
    parse(text).unwrap_or_else(|e| panic!("{e}"))
}

fn near(result: f64, figure: f64, tolerance: f64) {
    assert!((result - figure).abs() <= tolerance, "{result}, in practice {figure} ± {tolerance}");
}

/// Common practice, no source: arithmetic at nominal voltage.
#[test]
fn currents_at_nominal_voltage() {
    let at_12 = law::power_current(q("800 W"), q("12 V")).unwrap().value;
    near(at_12, 66.7, 0.05);
    near(1.25 * at_12, 83.3, 0.05);
    // A 100 A device lies between what flows and what 6 AWG at 105 °C is said to carry.
    assert!(1.25 * at_12 <= 100.0 && 100.0 <= 115.0);
    near(law::power_current(q("5 kW"), q("48 V")).unwrap().value, 104.0, 0.5);
}

/// Common practice, no source: in design the voltage is the lowest and the inverter has losses.
#[test]
fn currents_in_design() {
    let at_cut_off = law::inverter_input_current(q("800 W"), q("10.5 V"), q("85 %")).unwrap().value;
    near(at_cut_off, 89.6, 0.05);
    near(1.25 * at_cut_off, 112.0, 0.5);
    near(law::inverter_input_current(q("5 kW"), q("42 V"), q("92 %")).unwrap().value, 129.0, 0.5);
}

/// Common practice, no source: 5 A over 30 m one way at 20 °C; the resistances are those of the reference tables.
#[test]
fn drop_of_a_long_thin_run() {
    let tables = Reference::read("conductors.toml").tables;
    let cell = |table: &str, size: &toml::Value, column: usize| {
        let row = tables[table].rows.iter().find(|row| row[0] == *size).expect(table);
        number(&row[column]).expect(table)
    };
    let drop = |ohm_per_km: f64| {
        let loop_resistance = q(&format!("{} ohm", 2.0 * 30.0 * ohm_per_km / 1000.0));
        law::ohm_voltage(q("5 A"), loop_resistance).unwrap()
    };
    let metric = drop(cell("iec-60228-class-5", &2.5.into(), 1));
    near(metric.value, 2.39, 0.005);

    // 14 AWG by its area and copper of 1/58 Ω·mm²/m: 2.486 V. The figure of 2.48 V is that, cut.
    let area = ConductorSize::awg(14).unwrap().area();
    let copper = q(&format!("{} ohm.mm2/m", 1.0 / 58.0));
    let gauge = law::voltage_drop(q("30 m"), area, copper, q("5 A")).unwrap();
    near(gauge.value, 2.48, 0.01);

    for volts in [metric, gauge] {
        // "About 12 % of 20 V, 13 W": to the nearest whole figure, and one more for the power.
        near(100.0 * volts.value / 20.0, 12.0, 0.5);
        near(law::power(volts, q("5 A")).unwrap().value, 13.0, 1.1);
    }
}

/// Common practice, no source: energy of the sun, and two banks of one energy.
#[test]
fn energies() {
    let day = law::sun_hour_yield(q("100 W"), q("4 h"), q("1")).unwrap();
    near(day.value / 3600.0, 400.0, 1e-9);
    near(3.0 * day.value / 3600.0, 1200.0, 1e-9);
    for (capacity, voltage) in [("100 Ah", "12 V"), ("25 Ah", "48 V")] {
        let energy = law::energy_of_charge(q(capacity), q(voltage)).unwrap();
        near(energy.value / 3600.0, 1200.0, 1e-9);
    }
    assert_eq!(law::days_of_autonomy(q("1200 Wh"), day).unwrap(), q("3 d"));
}

/// Common practice, no source: 0.2 C for lead-acid, 1 C for lithium as ceilings.
#[test]
fn charge_rates_as_ceilings() {
    near(law::c_rate_current(q("0.2 /h"), q("100 Ah")).unwrap().value, 20.0, 1e-12);
    near(law::c_rate_current(q("1 /h"), q("100 Ah")).unwrap().value, 100.0, 1e-12);
    let sum = law::charge_current_sum(&[q("15 A"), q("10 A")], q("100 Ah"), q("0.2 /h")).unwrap();
    assert!(!sum.is_admitted());
}

/// Common practice, no source: a drop of at most 3 %.
#[test]
fn three_per_cent() {
    let volts = 0.03 * 12.0;
    let area =
        law::required_cross_section(q("5 m"), q("0.01724 ohm.mm2/m"), q("66.7 A"), q(&format!("{volts} V")));
    // 2·5 m·0.01724·66.7/0.36 by hand.
    near(area.unwrap().value * 1e6, 31.94, 0.005);
}
