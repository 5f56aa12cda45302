//! The checks of an arrangement, one after the other: cold, hot, input, devices (R10).

use arrayvec::ArrayVec;
use uom::si::{electric_current::ampere, electric_potential::volt, power::watt};

use super::check::{Compared, PvCheck, PvRelation, PvSubject};
use super::layout::Layout;
use super::module::{PRACTICE, SHEET};
use super::strings::{ArrayCurrents, CHECKS, Regulation, StringDevice, StringQuestion, StringVoltages};
use crate::citation::{Citation, Seen};
use crate::quantity::{ElectricCurrent, ElectricPotential};

const RULE: Citation = Citation::new("design rule", "R10", Seen::Practice);
const CONTROLLER: Citation = Citation::new("the controller's sheet", "", Seen::Stated);
const PART: Citation = Citation::new("the part's sheet", "", Seen::Stated);

const NO_COLD: &str = "neither the module's coefficient of voltage nor a factor is stated";
const NO_VMP: &str = "neither the module's coefficient of power nor that of voltage is stated";
const NO_FUSE: &str = "the module's series-fuse rating is not stated";
const NO_BACK_FEED: &str = "what the controller lets back from the bank is not stated";

type Checks = ArrayVec<PvCheck, CHECKS>;

fn volts(voltage: Option<ElectricPotential>) -> Option<f64> {
    voltage.map(|v| v.get::<volt>())
}

fn amperes(current: Option<ElectricCurrent>) -> Option<f64> {
    current.map(|i| i.get::<ampere>())
}

const fn voltage(
    subject: PvSubject,
    relation: PvRelation,
    what: &'static str,
    citation: Citation,
) -> Compared {
    let no_limit = "its greatest voltage is not stated";
    Compared { subject, relation, unit: "V", what, no_value: NO_COLD, no_limit, citation, only_yield: false }
}

const fn current(
    subject: PvSubject,
    what: &'static str,
    no_limit: &'static str,
    citation: Citation,
) -> Compared {
    let (relation, no_value) = (PvRelation::AtMost, NO_BACK_FEED);
    Compared { subject, relation, unit: "A", what, no_value, no_limit, citation, only_yield: false }
}

/// Cold open circuit against every part, cold maximum power against the window's upper end.
pub(super) fn cold(question: &StringQuestion<'_>, voltages: &StringVoltages, checks: &mut Checks) {
    let value = voltages.cold_voc.map(|(voltage, _)| voltage.get::<volt>());
    let at_most = |subject, what, citation| voltage(subject, PvRelation::AtMost, what, citation);
    let (module, input) = (question.module.sheet(), &question.input);
    checks.push(
        at_most(
            PvSubject::ModuleVoltage,
            "cold open-circuit voltage against the module's greatest system voltage",
            SHEET,
        )
        .made(value, volts(module.system_voltage)),
    );
    checks.push(
        at_most(
            PvSubject::ControllerVoltage,
            "cold open-circuit voltage against the controller's greatest input voltage",
            CONTROLLER,
        )
        .made(value, volts(input.greatest_voltage)),
    );
    for part in question.parts {
        checks.push(at_most(PvSubject::PartVoltage, part.what, PART).made(value, volts(part.greatest)));
    }
    if let Some(most) = question.factors.greatest_voltage {
        let what = "cold open-circuit voltage against the greatest that the rule set admits";
        checks.push(at_most(PvSubject::RuleVoltage, what, most.citation).made(value, Some(most.value)));
    }
    if let Some(high) = input.window_high {
        let what = "cold voltage at maximum power against the upper end of the controller's window";
        let compared = at_most(PvSubject::WindowHigh, what, CONTROLLER);
        let compared = Compared { no_value: NO_VMP, only_yield: true, ..compared };
        checks.push(compared.made(volts(voltages.cold_vmp), Some(high.get::<volt>())));
    }
}

/// Hot maximum power against the bank's highest voltage with margin, and the window's lower end.
pub(super) fn hot(question: &StringQuestion<'_>, voltages: &StringVoltages, checks: &mut Checks) {
    let value = volts(voltages.hot_vmp);
    let at_least = |subject, what, citation| Compared {
        no_value: NO_VMP,
        no_limit: "the controller's start margin is not stated",
        ..voltage(subject, PvRelation::AtLeast, what, citation)
    };
    let least = question.input.start_margin.map(|margin| question.bank_highest + margin);
    checks.push(
        at_least(
            PvSubject::ChargeVoltage,
            "hot voltage at maximum power against the bank's highest charge voltage and the controller's margin",
            RULE,
        )
        .made(value, volts(least)),
    );
    if let Some(low) = question.input.window_low {
        let what = "hot voltage at maximum power against the lower end of the controller's window";
        checks.push(at_least(PvSubject::WindowLow, what, CONTROLLER).made(value, Some(low.get::<volt>())));
    }
}

/// Short circuit, operating current and current into the bank.
pub(super) fn input(
    question: &StringQuestion<'_>,
    layout: Layout,
    currents: &ArrayCurrents,
    checks: &mut Checks,
) {
    let (input, sheet) = (&question.input, question.module.sheet());
    let clamped = input.regulation == Regulation::Clamped;
    // A clamped array drives its current straight through: then the output's rating is the input's, too.
    let bears = input.short_circuit_current.or(input.input_current);
    let bears = if clamped { bears.or(input.output_current) } else { bears };
    let greatest = Some(currents.array_greatest.get::<ampere>());
    checks.push(
        current(
            PvSubject::ShortCircuit,
            "short-circuit current with the irradiance factor against the controller's input",
            "neither its short-circuit nor its input current is stated",
            CONTROLLER,
        )
        .made(greatest, amperes(bears)),
    );
    let parallel = f64::from(layout.in_parallel) * question.module.rear_factor();
    if let Some(limit) = input.input_current {
        let what = "current at maximum power against the controller's input current";
        let compared = current(PvSubject::InputCurrent, what, "", CONTROLLER);
        let operating = parallel * sheet.points.imp.get::<ampere>();
        let compared = Compared { only_yield: !clamped, ..compared };
        checks.push(compared.made(Some(operating), Some(limit.get::<ampere>())));
    }
    let no_output = "its output current is not stated";
    checks.push(if clamped {
        let what = "short-circuit current with the irradiance factor against the controller's output";
        let compared = current(PvSubject::OutputCurrent, what, no_output, CONTROLLER);
        compared.made(greatest, amperes(input.output_current))
    } else {
        let what = "rated power over the bank's nominal voltage against the controller's output";
        let compared = current(PvSubject::OutputCurrent, what, no_output, CONTROLLER);
        let power = sheet.power.get::<watt>() * f64::from(layout.in_series) * parallel;
        let value = power / question.bank_nominal.get::<volt>();
        Compared { only_yield: true, ..compared }.made(Some(value), amperes(input.output_current))
    });
}

/// Whether a string needs a device, and whether the one it has fits.
pub(super) fn string_device(
    question: &StringQuestion<'_>,
    currents: &ArrayCurrents,
    checks: &mut Checks,
) -> Option<bool> {
    let fuse = amperes(question.module.sheet().series_fuse);
    // A conductor still to be chosen carries at least the design current.
    let chosen_for = (question.device == StringDevice::ToChoose).then_some(currents.string_design);
    let ampacity = amperes(question.ampacity.or(chosen_for));
    let fault = question.back_feed.map(|back| (currents.fault + back).get::<ampere>());
    if fault == Some(0.0) && !matches!(question.device, StringDevice::Rated(_)) {
        return Some(false);
    }
    let exceeds = |limit: Option<f64>| fault.zip(limit).map(|(fault, limit)| fault > limit);
    // One limit that is exceeded is enough; none is known to be kept while one is unknown.
    let required = match (exceeds(fuse), exceeds(ampacity)) {
        (Some(true), _) | (_, Some(true)) => Some(true),
        (Some(false), Some(false)) => Some(false),
        _ => None,
    };
    let source = question.factors.irradiance.citation;
    match question.device {
        StringDevice::Absent => {
            let what = "current that the other strings drive into a faulty one against the module's series-fuse rating";
            checks.push(current(PvSubject::StringFault, what, NO_FUSE, source).made(fault, fuse));
            let what = "current that the other strings drive into a faulty one against its conductor";
            let no_ampacity = "the ampacity of the string's conductor is not known";
            checks.push(current(PvSubject::ConductorFault, what, no_ampacity, source).made(fault, ampacity));
        }
        StringDevice::Rated(rating) => rated(question, currents, rating.get::<ampere>(), checks),
        // Where a device is or may be required, one that is large enough must not be too large for the module.
        StringDevice::ToChoose if required == Some(false) => {}
        StringDevice::ToChoose => {
            let what = "least rating of a string's device against the module's series-fuse rating";
            let compared = current(PvSubject::DeviceModule, what, NO_FUSE, SHEET);
            let compared = Compared { no_value: NO_FACTOR, ..compared };
            checks.push(compared.made(amperes(currents.device_least), fuse));
        }
    }
    required
}

/// The rating of a string's device between its least and its most.
fn rated(question: &StringQuestion<'_>, currents: &ArrayCurrents, rating: f64, checks: &mut Checks) {
    let sheet = question.module.sheet();
    let least = question.factors.device_least;
    let what = "rating of a string's device against its least";
    let compared =
        current(PvSubject::DeviceLeast, what, NO_FACTOR, least.map_or(PRACTICE, |factor| factor.citation));
    checks.push(
        Compared { relation: PvRelation::AtLeast, ..compared }
            .made(Some(rating), amperes(currents.device_least)),
    );
    if let Some(factor) = question.factors.device_most {
        let most = sheet.points.isc.get::<ampere>() * question.module.rear_factor() * factor.value;
        let what = "rating of a string's device against its most";
        let compared = current(PvSubject::DeviceMost, what, "", factor.citation);
        checks.push(compared.made(Some(rating), Some(most)));
    }
    let what = "rating of a string's device against the module's series-fuse rating";
    let compared = current(PvSubject::DeviceModule, what, NO_FUSE, SHEET);
    checks.push(compared.made(Some(rating), amperes(sheet.series_fuse)));
}

const NO_FACTOR: &str = "the rule set holds no factor for it";
