//! Strings against controller, bank, module and rules: each check passed, failed and not made.

extern crate std;
use std::string::ToString;
use std::vec::Vec;

use super::sample::{SOURCE, cited, module, q, question, sheet};
use super::{
    Cited, ColdBasis, Layout, Module, ModuleSheet, PvCheck, PvOutcome, PvSubject, Regulation, StringDevice,
    StringQuestion, StringsChecked, VoltagePart, array_currents, check_strings, string_voltages,
};
use crate::error::Error;
use crate::quantity::{ElectricCurrent, ElectricPotential};
use uom::si::{electric_current::ampere, electric_potential::volt};

const THREE_BY_TWO: Layout = Layout { in_series: 3, in_parallel: 2 };

fn find(answer: &StringsChecked, subject: PvSubject) -> Option<PvCheck> {
    answer.checks.iter().find(|check| check.subject == subject).copied()
}

fn outcome(answer: &StringsChecked, subject: PvSubject) -> Option<PvOutcome> {
    find(answer, subject).map(|check| check.outcome)
}

#[test]
fn three_in_series_pass_with_every_number() {
    let module = module();
    let answer = check_strings(&question(&module), THREE_BY_TWO).unwrap();
    let texts: Vec<_> = answer.checks.iter().map(ToString::to_string).collect();
    assert_eq!(
        texts,
        [
            // 3 × 22.5 × (1 + 0.003 × 45).
            "cold open-circuit voltage against the module's greatest system voltage: 76.61 V, at most 600 V",
            "cold open-circuit voltage against the controller's greatest input voltage: 76.61 V, at most 100 V",
            "cold open-circuit voltage against the greatest that the rule set admits: 76.61 V, at most 600 V",
            // 3 × 18.6 × (1 − 0.0045 × 45) × 0.98 against 15.6 + 5.
            "hot voltage at maximum power against the bank's highest charge voltage and the controller's margin: \
             43.61 V, at least 20.6 V",
            // 2 × 6.1 × 1.25.
            "short-circuit current with the irradiance factor against the controller's input: 15.25 A, at most 35 A",
            // 600 W at 12 V.
            "rated power over the bank's nominal voltage against the controller's output: 50 A, at most 30 A",
        ]
    );
    // Too much current for the output costs yield and nothing else.
    assert_eq!(outcome(&answer, PvSubject::OutputCurrent), Some(PvOutcome::Failed));
    assert!(answer.obstacle().is_none() && answer.not_made().count() == 0);
    assert_eq!(answer.device_required, Some(false));
}

#[test]
fn one_module_too_many_breaks_the_controller() {
    let module = module();
    let four = Layout { in_series: 4, in_parallel: 1 };
    let answer = check_strings(&question(&module), four).unwrap();
    let refused = answer.obstacle().unwrap();
    assert_eq!((refused.subject, refused.outcome), (PvSubject::ControllerVoltage, PvOutcome::Failed));
    assert!((refused.value - 4.0 * 22.5 * 1.135).abs() < 1e-9);
}

#[test]
fn the_cold_voltage_comes_from_the_sheet_else_from_the_factor_else_is_not_checked() {
    let stated = module();
    let mut asked = question(&stated);
    asked.cold_factor = Some(cited(1.2));
    let (voltage, basis) = string_voltages(&asked, 3).unwrap().cold_voc.unwrap();
    assert_eq!(basis, ColdBasis::Coefficient);
    assert!((voltage.value - 67.5 * 1.135).abs() < 1e-9);

    let bare = Module::new(ModuleSheet { voc_coefficient: None, ..sheet() }).unwrap();
    asked.module = &bare;
    let (voltage, basis) = string_voltages(&asked, 3).unwrap().cold_voc.unwrap();
    assert_eq!(basis, ColdBasis::Factor(cited(1.2)));
    assert!((voltage.value - 67.5 * 1.2).abs() < 1e-9);

    asked.cold_factor = None;
    let answer = check_strings(&asked, THREE_BY_TWO).unwrap();
    assert_eq!(outcome(&answer, PvSubject::ControllerVoltage), Some(PvOutcome::NotChecked));
    assert_eq!(
        find(&answer, PvSubject::ControllerVoltage).unwrap().to_string(),
        "cold open-circuit voltage against the controller's greatest input voltage: not checked, neither the module's \
         coefficient of voltage nor a factor is stated"
    );
    // The hot side still knows the coefficient of power.
    assert_eq!(outcome(&answer, PvSubject::ChargeVoltage), Some(PvOutcome::Passed));
}

#[test]
fn hot_and_old_strings_must_still_charge() {
    let module = module();
    let mut asked = question(&module);
    let one = Layout { in_series: 1, in_parallel: 1 };
    // 18.6 × 0.7975 × 0.98 = 14.5 V: below 20.6 V, and clamped without margin below 15.6 V.
    let at_most = |asked: &StringQuestion<'_>, layout| {
        outcome(&check_strings(asked, layout).unwrap(), PvSubject::ChargeVoltage)
    };
    assert_eq!(at_most(&asked, one), Some(PvOutcome::Failed));
    asked.input.regulation = Regulation::Clamped;
    asked.input.start_margin = Some(q("0 V"));
    assert_eq!(at_most(&asked, one), Some(PvOutcome::Failed));
    asked.hottest_cell = q("45 degC");
    assert_eq!(at_most(&asked, one), Some(PvOutcome::Passed));
    asked.ageing = q("10 %");
    assert_eq!(at_most(&asked, one), Some(PvOutcome::Failed));
    asked.input.start_margin = None;
    assert_eq!(at_most(&asked, one), Some(PvOutcome::NotChecked));
}

#[test]
fn the_window_is_held_at_both_ends() {
    let module = module();
    let mut asked = question(&module);
    asked.input.window_low = Some(q("45 V"));
    asked.input.window_high = Some(q("60 V"));
    let answer = check_strings(&asked, THREE_BY_TWO).unwrap();
    // 43.6 V hot; 3 × 18.6 × (1 + 0.0045 × 45) = 67.1 V cold, which only costs yield.
    assert_eq!(outcome(&answer, PvSubject::WindowLow), Some(PvOutcome::Failed));
    let high = find(&answer, PvSubject::WindowHigh).unwrap();
    assert!((high.value - 55.8 * 1.2025).abs() < 1e-9 && high.outcome == PvOutcome::Failed);
    assert!(high.only_yield && answer.obstacle().unwrap().subject == PvSubject::WindowLow);
}

#[test]
fn a_clamped_array_may_not_exceed_the_output_either() {
    let module = module();
    let mut asked = question(&module);
    asked.input.regulation = Regulation::Clamped;
    asked.input.short_circuit_current = None;
    asked.input.output_current = Some(q("15 A"));
    let answer = check_strings(&asked, Layout { in_series: 1, in_parallel: 2 }).unwrap();
    // 15.25 A: one limit stands for both ends.
    for subject in [PvSubject::ShortCircuit, PvSubject::OutputCurrent] {
        let check = find(&answer, subject).unwrap();
        assert!(check.is_obstacle() && check.limit == 15.0, "{check}");
    }
    asked.input.output_current = None;
    let answer = check_strings(&asked, Layout { in_series: 1, in_parallel: 2 }).unwrap();
    for subject in [PvSubject::ShortCircuit, PvSubject::OutputCurrent] {
        assert_eq!(outcome(&answer, subject), Some(PvOutcome::NotChecked));
    }
}

#[test]
fn a_third_string_needs_devices() {
    let module = module();
    let mut asked = question(&module);
    asked.device = StringDevice::Absent;
    asked.ampacity = Some(q("30 A"));
    let with = |asked: &StringQuestion<'_>, strings| {
        check_strings(asked, Layout { in_series: 2, in_parallel: strings }).unwrap()
    };
    // One other string: 7.6 A. Two others: 15.25 A against the 15 A of the module.
    assert_eq!(with(&asked, 2).device_required, Some(false));
    let three = with(&asked, 3);
    assert_eq!(three.device_required, Some(true));
    assert_eq!(three.obstacle().unwrap().subject, PvSubject::StringFault);
    // The bank's part counts, a thin conductor counts, and what is not stated is not passed.
    asked.back_feed = Some(q("8 A"));
    assert_eq!(with(&asked, 2).device_required, Some(true));
    asked.back_feed = None;
    assert_eq!(with(&asked, 2).device_required, None);
    assert_eq!(outcome(&with(&asked, 2), PvSubject::StringFault), Some(PvOutcome::NotChecked));
    asked.back_feed = Some(q("0 A"));
    asked.ampacity = Some(q("7 A"));
    assert_eq!(with(&asked, 2).obstacle().unwrap().subject, PvSubject::ConductorFault);
    asked.ampacity = None;
    assert_eq!(with(&asked, 2).device_required, None);
    // One string alone has nobody to feed it.
    assert_eq!(with(&asked, 1).device_required, Some(false));
}

#[test]
fn a_device_fits_between_its_least_and_the_module() {
    use PvOutcome::{Failed, NotChecked, Passed};
    let module = module();
    let mut asked = question(&module);
    let outcomes = |asked: &StringQuestion<'_>, rating: &str| {
        let asked = StringQuestion { device: StringDevice::Rated(q(rating)), ..*asked };
        let answer = check_strings(&asked, Layout { in_series: 2, in_parallel: 3 }).unwrap();
        [PvSubject::DeviceLeast, PvSubject::DeviceMost, PvSubject::DeviceModule]
            .map(|subject| outcome(&answer, subject))
    };
    // 6.1 × 1.5625 = 9.53 A.
    assert_eq!(outcomes(&asked, "10 A"), [Some(Passed), None, Some(Passed)]);
    assert_eq!(outcomes(&asked, "8 A"), [Some(Failed), None, Some(Passed)]);
    assert_eq!(outcomes(&asked, "20 A"), [Some(Passed), None, Some(Failed)]);
    // 6.1 × 2.4 = 14.64 A.
    asked.factors.device_most = Some(cited(2.4));
    assert_eq!(outcomes(&asked, "15 A"), [Some(Passed), Some(Failed), Some(Passed)]);
    asked.factors.device_least = None;
    assert_eq!(outcomes(&asked, "12 A"), [Some(NotChecked), Some(Passed), Some(Passed)]);
    let currents = array_currents(&asked, 3).unwrap();
    assert!((currents.device_most.unwrap().value - 14.64).abs() < 1e-9 && currents.device_least.is_none());
}

#[test]
fn light_from_behind_enters_every_current() {
    let bifacial = Module::new(ModuleSheet { bifacial_gain: q("10 %"), ..sheet() }).unwrap();
    let module = module();
    let (with, without) = (question(&bifacial), question(&module));
    let (a, b) = (array_currents(&with, 4).unwrap(), array_currents(&without, 4).unwrap());
    for (a, b) in [
        (a.string_greatest, b.string_greatest),
        (a.string_design, b.string_design),
        (a.array_greatest, b.array_greatest),
        (a.array_design, b.array_design),
        (a.fault, b.fault),
        (a.device_least.unwrap(), b.device_least.unwrap()),
    ] {
        assert!((a.value - 1.1 * b.value).abs() < 1e-9);
    }
    // 1.25 × 1.25 of four strings.
    assert!((b.array_design.value - 4.0 * 6.1 * 1.5625).abs() < 1e-9);
}

#[test]
fn further_parts_and_the_rule_are_held_against_the_cold_voltage() {
    let module = module();
    let parts = [
        VoltagePart { what: "cold open-circuit voltage against the isolator", greatest: Some(q("60 V")) },
        VoltagePart { what: "cold open-circuit voltage against the surge protection", greatest: None },
    ];
    let mut asked = question(&module);
    asked.parts = &parts;
    asked.factors.greatest_voltage = Some(Cited { value: 70.0, citation: SOURCE });
    let answer = check_strings(&asked, THREE_BY_TWO).unwrap();
    let found: Vec<_> =
        answer.checks.iter().map(|check| (check.subject, check.outcome)).skip(2).take(3).collect();
    assert_eq!(
        found,
        [
            (PvSubject::PartVoltage, PvOutcome::Failed),
            (PvSubject::PartVoltage, PvOutcome::NotChecked),
            (PvSubject::RuleVoltage, PvOutcome::Failed),
        ]
    );
    let many = [parts[0]; 9];
    asked.parts = &many;
    assert!(matches!(
        check_strings(&asked, THREE_BY_TWO),
        Err(Error::WrongCount { given: 9, needed: 8, .. })
    ));
    // All checks of the greatest question fit.
    let most = [parts[0]; 8];
    asked.parts = &most;
    asked.input.window_low = Some(q("1 V"));
    asked.input.window_high = Some(q("99 V"));
    asked.input.input_current = Some(q("20 A"));
    asked.factors.device_most = Some(cited(2.4));
    asked.device = StringDevice::Rated(q("10 A"));
    assert_eq!(check_strings(&asked, THREE_BY_TWO).unwrap().checks.len(), 20);
}

#[test]
fn odd_questions_are_errors() {
    let module = module();
    let asked = question(&module);
    for layout in [Layout { in_series: 0, in_parallel: 1 }, Layout { in_series: 1, in_parallel: 0 }] {
        assert!(check_strings(&asked, layout).is_err());
    }
    let nan = ElectricPotential::new::<volt>(f64::NAN);
    let mut bad = asked;
    bad.bank_highest = nan;
    assert!(check_strings(&bad, THREE_BY_TWO).is_err());
    let mut bad = asked;
    bad.input.greatest_voltage = Some(nan);
    assert!(check_strings(&bad, THREE_BY_TWO).is_err());
    let mut bad = asked;
    bad.factors.irradiance = cited(f64::NAN);
    assert!(check_strings(&bad, THREE_BY_TWO).is_err());
    let mut bad = asked;
    bad.ampacity = Some(ElectricCurrent::new::<ampere>(f64::INFINITY));
    assert!(check_strings(&bad, THREE_BY_TWO).is_err());
}
