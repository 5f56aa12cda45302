//! What the rule sets ask of arrays, against `tests/reference/pv.toml` where it holds a figure.
//!
//! Everything here is recalled: no page was seen. A test of a recalled figure says only that it is the one we recall.

use ampwright::array::{
    ColdBasis, InputLimits, KeyPoints, Layout, Module, ModuleSheet, PvOutcome, PvSubject, Regulation,
    StringDevice, StringQuestion, check_strings, string_voltages,
};
use ampwright::citation::Seen;
use ampwright::quantity::{Textual, ThermodynamicTemperature, parse};
use ampwright::rules::{PvRule, Rules};
use uom::si::electric_potential::volt;
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::conductors::Table;

const PV: &str = include_str!("../reference/pv.toml");

fn q<Q: Textual>(text: &str) -> Q {
    parse(text).unwrap_or_else(|e| panic!("{e}"))
}

fn pv(set: &str) -> &'static PvRule {
    Rules::named(set).unwrap().pv()
}

fn at(celsius: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(celsius)
}

/// Source: `nec-690.7-correction-factors`, NFPA 70, Table 690.7(A) (recalled), cell by cell, both ways; `iec` the same figures.
#[test]
fn cold_factors() {
    let printed = Table::read(PV, "nec-690.7-correction-factors");
    for set in ["us", "iec"] {
        let table = pv(set).cold.unwrap();
        assert_eq!(table.citation.seen, Seen::Recalled);
        assert_eq!(table.rows.len(), printed.len());
        for (row, &(warm, cold, factor)) in printed.rows().zip(table.rows) {
            row.check("ambient_high_C", warm, 0.0);
            row.check("ambient_low_C", cold, 0.0);
            row.check("factor", factor, 0.0);
            // Both ends of the band, and just below it the next.
            let found = |celsius| pv(set).cold_factor(at(celsius)).map(|cited| cited.value);
            assert_eq!((found(warm), found(cold)), (Ok(factor), Ok(factor)), "{set} {warm}");
            assert!(found(cold - 0.01).is_err() || found(cold - 0.01).unwrap() > factor);
        }
    }
}

/// Source: the note of `nec-690.7-correction-factors`: 1 + 0.004·(25 − T) at the cold end of each band.
#[test]
fn cold_factors_follow_a_coefficient() {
    for &(_, cold, factor) in pv("us").cold.unwrap().rows {
        let derived = 1.0 + 0.004 * (25.0 - cold);
        // DIFFERENCE: at −30, −35 and −40 °C the table is lower by 0.01.
        let lower = if cold <= -30.0 { 0.01 } else { 0.0 };
        assert!((derived - lower - factor).abs() < 1e-9, "{cold}: {derived} {factor}");
    }
}

#[test]
fn beyond_the_table_there_is_no_factor_but_an_error() {
    let found = |celsius| pv("us").cold_factor(at(celsius)).map(|cited| cited.value);
    assert_eq!(found(25.0), Ok(1.0));
    assert_eq!((found(24.9), found(-5.5)), (Ok(1.02), Ok(1.14)));
    assert_eq!(
        found(-40.5).unwrap_err().to_string(),
        "the coldest morning is -40.5 degC; the table (NFPA 70-2023, Table 690.7(A) (recalled)) ends at -40 degC; state the \
         module's coefficient of open-circuit voltage"
    );
    assert!(found(f64::NAN).is_err() && found(f64::INFINITY).is_err());
    for set in ["craft_iso", "craft_us"] {
        assert_eq!(pv(set).cold_factor(at(0.0)).unwrap_err().slug(), "not-tabulated");
    }
}

/// From memory: `us` 1.25 and 1.25, device 1.5625; `iec` 1.25, device 1.5 to 2.4; the craft books nothing.
#[test]
fn factors_of_each_set() {
    let (us, iec) = (pv("us"), pv("iec"));
    let value = |limit: Option<ampwright::rules::Limit<f64>>| limit.map(|limit| limit.value);
    assert_eq!((value(us.device_least), value(us.device_most)), (Some(1.5625), None));
    assert_eq!((value(iec.device_least), value(iec.device_most)), (Some(1.5), Some(2.4)));
    assert_eq!((us.factors().continuous.value, iec.factors().continuous.value), (1.25, 1.0));
    for rule in [us, iec] {
        assert_eq!(rule.factors().irradiance.value, 1.25);
        for limit in [rule.irradiance_factor, rule.continuous_factor, rule.device_least, rule.touch_from] {
            assert_eq!(limit.unwrap().citation.seen, Seen::Recalled);
        }
        assert!(rule.isolator.unwrap().value);
    }
    for set in ["craft_iso", "craft_us"] {
        let craft = pv(set);
        assert!(
            craft.irradiance_factor.is_none() && craft.device_least.is_none() && craft.isolator.is_none()
        );
        assert!(
            craft.greatest_voltage.is_none()
                && craft.touch_from.is_none()
                && craft.earth_fault_from.is_none()
        );
        // Conductors are chosen for bright light all the same, and it is said that no book asks for it.
        let factors = craft.factors();
        assert_eq!((factors.irradiance.value, factors.irradiance.citation.seen), (1.25, Seen::Practice));
        assert_eq!((factors.continuous.value, factors.continuous.citation.seen), (1.0, Seen::Practice));
    }
}

/// Ten modules of `voc-cold-nec-factor` without a coefficient, through the checks of a string: the factor of the set counts, and
/// where the set has none, nothing passes.
#[test]
fn a_string_without_a_coefficient_takes_the_factor_of_its_set() {
    let points = KeyPoints { voc: q("37 V"), isc: q("9 A"), vmp: q("30 V"), imp: q("8.4 A") };
    let sheet = ModuleSheet { system_voltage: Some(q("1000 V")), ..ModuleSheet::plain(q("252 W"), points) };
    let module = Module::new(sheet).unwrap();
    let layout = Layout { in_series: 10, in_parallel: 1 };
    for (set, known) in [("us", true), ("iec", true), ("craft_us", false)] {
        let rule = pv(set);
        let question = StringQuestion {
            module: &module,
            input: InputLimits {
                regulation: Regulation::Tracking,
                greatest_voltage: Some(q("450 V")),
                window_low: None,
                window_high: None,
                start_margin: None,
                short_circuit_current: None,
                input_current: None,
                output_current: None,
            },
            coldest: q("-10 degC"),
            hottest_cell: q("70 degC"),
            cold_factor: rule.cold_factor(q("-10 degC")).ok(),
            bank_nominal: q("48 V"),
            bank_highest: q("60 V"),
            drop: q("2 %"),
            ageing: q("0"),
            factors: rule.factors(),
            device: StringDevice::ToChoose,
            ampacity: None,
            back_feed: Some(q("0 A")),
            parts: &[],
        };
        let voltages = string_voltages(&question, 10).unwrap();
        let answer = check_strings(&question, layout).unwrap();
        let controller =
            answer.checks.iter().find(|check| check.subject == PvSubject::ControllerVoltage).unwrap();
        if known {
            let (voltage, basis) = voltages.cold_voc.unwrap();
            // 37 × 10 × 1.14.
            assert!((voltage.get::<volt>() - 421.8).abs() < 1e-9);
            assert!(matches!(basis, ColdBasis::Factor(factor) if factor.citation.seen == Seen::Recalled));
            assert_eq!(controller.outcome, PvOutcome::Passed);
        } else {
            assert!(voltages.cold_voc.is_none());
            assert_eq!(controller.outcome, PvOutcome::NotChecked);
        }
        // No coefficient of power or voltage: nothing is known of the hot side.
        let hot = answer.checks.iter().find(|check| check.subject == PvSubject::ChargeVoltage).unwrap();
        assert_eq!(hot.outcome, PvOutcome::NotChecked);
    }
}
