//! Arrays: strings against controller, bank, module and rules, isolators, yield (R10, R20).

use alloc::format;
use alloc::string::ToString;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::ratio::ratio;

use super::At;
use crate::array::{PvCheck, PvOutcome, PvSubject, StringsChecked};
use crate::citation::Seen;
use crate::site::finding::{Findings, Severity, digits};
use crate::site::graph::{Graph, Item};
use crate::site::parts::{ControllerKind, Monitoring};
use crate::site::pv::{bank_of, checked};
use crate::site::system::{Array, Site};

/// Voltage of an array over its bank from which a clamp is worth a word. Common practice, no source.
const CLAMP_LOSS: f64 = 0.25;

/// Every array.
pub(super) fn arrays(site: &Site, found: &mut Findings) {
    for array in &site.arrays {
        let mut at = At::new(found, format!("array \"{}\"", array.part.name), array.part.line);
        let Some(result) = checked(site, array) else {
            at.unmade(
                ("R10", "array-without-controller"),
                "strings against a controller: it names none, or there is no bank; state controller",
            );
            continue;
        };
        let controller = array.controller.and_then(|c| site.controllers.get(c));
        if controller.is_some_and(|c| c.kind.is_none()) {
            at.unmade(
                ("R10", "array-not-checked"),
                "whether its controller joins array and bank or tracks: taken for one that tracks; state kind",
            );
        }
        match result {
            Ok(strings) => {
                for check in &strings.checks {
                    one(array, check, &mut at);
                }
                isolator(site, array, &strings, &mut at);
                earth_fault(site, &strings, &mut at);
                touch(site, &strings, &mut at);
                clamp(site, array, &strings, &mut at);
                loads_in_reach(site, array, &strings, &mut at);
            }
            Err(error) => at.unmade(("R10", "array-not-checked"), &format!("strings: {error}")),
        }
    }
}

const fn meaning(subject: PvSubject) -> (&'static str, Severity, &'static str) {
    match subject {
        PvSubject::ModuleVoltage | PvSubject::RuleVoltage => {
            ("array-voltage-too-high", Severity::Nonconforming, "use fewer modules in series")
        }
        PvSubject::ControllerVoltage | PvSubject::PartVoltage => (
            "array-voltage-above-part",
            Severity::Danger,
            "use fewer modules in series, or a part for the cold voltage",
        ),
        PvSubject::WindowHigh => (
            "array-yield-cut",
            Severity::Advice,
            "accept the loss in the best hours, or use a larger controller",
        ),
        PvSubject::WindowLow | PvSubject::ChargeVoltage => (
            "array-voltage-too-low",
            Severity::Nonconforming,
            "use more modules in series: hot, it does not charge",
        ),
        // Where the controller limits itself only yield is lost: told apart below.
        PvSubject::ShortCircuit | PvSubject::InputCurrent | PvSubject::OutputCurrent => (
            "array-current-above-controller",
            Severity::Nonconforming,
            "use fewer strings on it, or a larger controller",
        ),
        PvSubject::StringFault => ("string-device-missing", Severity::Danger, "fit a device in every string"),
        _ => (
            "string-device-wrong",
            Severity::Nonconforming,
            "use a device between its least and the module's series-fuse rating",
        ),
    }
}

/// The key that supplies what a check lacks.
fn key(check: &PvCheck) -> &'static str {
    if check.missing.is_some_and(|missing| missing.contains("coefficient of voltage nor")) {
        return "; state voc_coefficient";
    }
    if check.missing.is_some_and(|missing| missing.contains("coefficient of power")) {
        return "; state power_coefficient";
    }
    match check.subject {
        PvSubject::ModuleVoltage => "; state greatest_voltage",
        PvSubject::ControllerVoltage => "; state greatest_input",
        PvSubject::PartVoltage => "; state isolator",
        PvSubject::ChargeVoltage => "; state start_margin",
        PvSubject::ShortCircuit | PvSubject::InputCurrent => "; state input_current",
        PvSubject::OutputCurrent => "; state output",
        PvSubject::StringFault | PvSubject::DeviceModule => "; state series_fuse",
        _ => "",
    }
}

fn one(array: &Array, check: &PvCheck, at: &mut At<'_>) {
    // The string's conductor is not in the document: the question takes the module's rating for it, which is judged already.
    if check.subject == PvSubject::ConductorFault {
        return;
    }
    let (slug, severity, remedy) =
        meaning(if check.only_yield { PvSubject::WindowHigh } else { check.subject });
    match check.outcome {
        PvOutcome::Passed if check.citation.seen == Seen::Recalled => {
            at.pass("R10", &format!("{check}: the recalled value; verify ({})", check.citation));
        }
        PvOutcome::Passed => at.pass("R10", &check.to_string()),
        PvOutcome::Failed => {
            at.tell(severity, ("R10", slug), check.to_string(), Some(check.citation), remedy);
        }
        // One string has no other to feed its fault.
        PvOutcome::NotChecked if array.strings < 2 && check.subject == PvSubject::StringFault => {}
        PvOutcome::NotChecked => {
            at.unmade(("R10", "array-not-checked"), &format!("{check}{}", key(check)));
        }
    }
}

/// A load-break isolator between array and controller.
fn isolator(site: &Site, array: &Array, strings: &StringsChecked, at: &mut At<'_>) {
    let required = site.rules.pv().isolator;
    let part = &array.part;
    if array.designed {
        return;
    }
    match part.load_break {
        Some(false) => at.tell(
            Severity::Danger,
            ("R20", "isolator-not-load-break"),
            "its isolator is not made to open under load: the arc of an array does not go out".into(),
            required.map(|r| r.citation),
            "use a load-break isolator rated for DC at the cold open-circuit voltage",
        ),
        None => at.unmade(
            ("R20", "isolator-not-stated"),
            "a load-break isolator between array and controller; state isolator, isolator_current and load_break",
        ),
        Some(true) => match part.isolator_current {
            Some(rated) if rated < strings.currents.array_greatest => at.nonconforming(
                ("R20", "isolator-current-too-low"),
                format!(
                    "isolator rated {} A, at least {} A",
                    digits(rated.get::<ampere>()),
                    digits(strings.currents.array_greatest.get::<ampere>())
                ),
                "use an isolator for the array's greatest current",
            ),
            Some(rated) => at.pass("R20", &format!("load-break isolator rated {} A", digits(rated.get::<ampere>()))),
            None => at.unmade(("R20", "isolator-not-stated"), "current of the isolator; state isolator_current"),
        },
    }
}

/// Watching for a fault to earth, from the set's voltage on.
fn earth_fault(site: &Site, strings: &StringsChecked, at: &mut At<'_>) {
    let Some((cold, _)) = strings.voltages.cold_voc else { return };
    let volts = cold.get::<volt>();
    let Some(from) = site.rules.pv().earth_fault_from else {
        match site.place.monitoring {
            Some(Monitoring::Insulation | Monitoring::EarthFault) => {
                at.pass("R19", "faults to earth are watched for; the rule set holds nothing on arrays");
            }
            _ => at.unmade(
                ("R19", "monitoring-not-checked"),
                "monitoring of faults to earth: the rule set holds nothing on arrays; state monitoring where there is any",
            ),
        }
        return;
    };
    if volts <= from.value {
        at.pass(
            "R19",
            &format!(
                "{} V cold, at most {} V without monitoring of faults to earth",
                digits(volts),
                digits(from.value)
            ),
        );
        return;
    }
    match site.place.monitoring {
        Some(Monitoring::None) => at.tell(
            Severity::Nonconforming,
            ("R19", "array-without-monitoring"),
            format!(
                "{} V cold, above {} V, and nothing watches for a fault to earth",
                digits(volts),
                digits(from.value)
            ),
            Some(from.citation),
            "fit earth-fault protection or insulation monitoring",
        ),
        None => at.unmade(
            ("R19", "monitoring-not-checked"),
            &format!(
                "earth-fault protection or insulation monitoring at {} V; state monitoring",
                digits(volts)
            ),
        ),
        Some(_) => at.pass("R19", "faults to earth are watched for"),
    }
}

/// Above 60 V at any time, or above the set's own limit, live parts are out of reach.
fn touch(site: &Site, strings: &StringsChecked, at: &mut At<'_>) {
    let Some((cold, _)) = strings.voltages.cold_voc else { return };
    let limit = site.rules.pv().touch_from;
    super::place::touch(site, cold.get::<volt>(), limit.map(|l| (l.value, l.citation)), at);
}

/// What a clamping controller leaves behind.
fn clamp(site: &Site, array: &Array, strings: &StringsChecked, at: &mut At<'_>) {
    let Some(controller) = array.controller.and_then(|c| site.controllers.get(c)) else { return };
    let Some(bank) = bank_of(site, controller) else { return };
    if controller.kind != Some(ControllerKind::Pwm) {
        return;
    }
    let vmp = array.module.vmp * f64::from(array.series);
    // Warm modules in the sun stand far below their label; by the label every plain module would be told of.
    let lost = 1.0 - (bank.nominal / strings.voltages.hot_vmp.unwrap_or(vmp)).get::<ratio>();
    if lost > CLAMP_LOSS {
        at.advice(
            ("R10", "clamp-loses-yield"),
            format!(
                "a controller that joins array and bank holds {} V of modules{} at {} V: {:.0} % of the power is \
                 left behind",
                digits(vmp.get::<volt>()),
                strings.voltages.hot_vmp.map_or_else(alloc::string::String::new, |hot| format!(
                    " (hot, {} V)",
                    digits(hot.get::<volt>())
                )),
                digits(bank.nominal.get::<volt>()),
                100.0 * lost
            ),
            "use modules nearer to the bank's voltage, or a tracking controller",
        );
    }
}

/// A controller that joins array and bank passes the array's voltage on once the bank is gone: its disconnect opened, or
/// its device. Loads that do not bear it are told (R11).
fn loads_in_reach(site: &Site, array: &Array, strings: &StringsChecked, at: &mut At<'_>) {
    let Some(controller) = array.controller.and_then(|c| site.controllers.get(c)) else { return };
    let Some(bank) = bank_of(site, controller) else { return };
    let Some((cold, _)) = strings.voltages.cold_voc else { return };
    if controller.kind != Some(ControllerKind::Pwm) {
        return;
    }
    let trees = Graph::new(site).trees();
    let of_bank =
        |item: Item| matches!(item, Item::Bank(i) if site.banks.get(i).is_some_and(|b| b.name == bank.name));
    let Some(tree) = trees.iter().find(|t| t.nodes.iter().any(|n| of_bank(n.item))) else { return };
    let bears = |item: Item| match item {
        Item::Load(i) => site.loads.get(i).map(|l| (l.name.as_str(), l.greatest)),
        Item::Inverter(i) => site.inverters.get(i).map(|v| (v.name.as_str(), v.greatest)),
        Item::ConverterInput(i) => site.converters.get(i).map(|c| (c.name.as_str(), c.greatest)),
        _ => None,
    };
    let weak: Vec<&str> = tree
        .nodes
        .iter()
        .filter_map(|node| bears(node.item))
        .filter(|(_, greatest)| greatest.is_some_and(|g| g < cold))
        .map(|(name, _)| name)
        .collect();
    if weak.is_empty() {
        return;
    }
    let (volts, names) = (digits(cold.get::<volt>()), weak.join(", "));
    match controller.load_dump {
        Some(true) => at.pass("R11", "its controller keeps the array's voltage from the loads when the bank is off"),
        Some(false) => at.danger(
            ("R11", "array-reaches-loads"),
            format!("with the bank off, its controller passes up to {volts} V on; that is above what {names} bears"),
            "use a controller that bears load dump, or loads made for that voltage",
        ),
        None => at.unmade(
            ("R11", "array-reaches-loads-not-checked"),
            &format!(
                "whether its controller, with the bank off, keeps {volts} V of the array from {names}; state load_dump"
            ),
        ),
    }
}
