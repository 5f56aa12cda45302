//! How far the meter may be wrong.
//!
//! Accuracy and last digit as the reading states them, else those of a hand-held meter: common practice, no source.

use alloc::format;
use alloc::string::String;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::ratio::{percent, ratio};

use super::span::Span;
use crate::quantity::{ElectricCurrent, Figures};
use crate::site::parts::Reading;

/// Part of the reading, by which a hand-held voltmeter may be wrong.
const VOLTS_RATIO: f64 = 0.005;
/// Its last digit at a battery's voltage, and at a drop, V.
const VOLTS_DIGIT_V: f64 = 0.01;
const DROP_DIGIT_V: f64 = 0.001;
/// The same of a clamp meter, A.
const AMPS_RATIO: f64 = 0.02;
const AMPS_DIGIT_A: f64 = 0.1;
/// Of a probe thermometer, K.
const TEMPERATURE_K: f64 = 2.0;
/// Of a hydrometer.
const DENSITY: f64 = 0.005;
/// Of a charge that was counted or timed.
const DELIVERED_RATIO: f64 = 0.03;

/// The value of a reading with the error of its meter.
#[derive(Clone, Debug)]
pub(super) struct Meter {
    pub span: Span,
    pub words: String,
}

const TAKEN: &str = "taken: common practice, no source";

fn by_parts(
    reading: &Reading,
    value: f64,
    (taken_ratio, taken_digit): (f64, f64),
    digit: Option<f64>,
    unit: &str,
) -> Meter {
    let part = reading.accuracy.map(|a| a.get::<ratio>());
    let error = value.abs() * part.unwrap_or(taken_ratio) + digit.unwrap_or(taken_digit);
    let shown = crate::quantity::Ratio::new::<ratio>(part.unwrap_or(taken_ratio)).get::<percent>();
    let from = match (part, digit) {
        (Some(_), Some(_)) => "stated",
        (Some(_), None) => "its last digit taken: common practice, no source",
        (None, Some(_)) => "its accuracy taken: common practice, no source",
        (None, None) => TAKEN,
    };
    // A drop is told in millivolts.
    let scale = if unit == "mV" { 1e3 } else { 1.0 };
    let words = format!(
        "± {} {unit} ({} % and {} {unit}, {from})",
        Figures(error * scale),
        Figures(shown),
        Figures(digit.unwrap_or(taken_digit) * scale)
    );
    Meter { span: Span::around(value, error), words }
}

/// Volts at terminals.
pub(super) fn volts(reading: &Reading) -> Option<Meter> {
    let value = reading.volts?.get::<volt>();
    let digit = reading.resolution.map(|r| r.get::<volt>());
    Some(by_parts(reading, value, (VOLTS_RATIO, VOLTS_DIGIT_V), digit, "V"))
}

/// Volts along a circuit.
pub(super) fn drop(reading: &Reading) -> Option<Meter> {
    let value = reading.drop?.get::<volt>();
    let digit = reading.resolution.map(|r| r.get::<volt>());
    Some(by_parts(reading, value, (VOLTS_RATIO, DROP_DIGIT_V), digit, "mV"))
}

/// Amperes; a stated last digit is that of the volt range.
pub(super) fn amps(reading: &Reading) -> Option<Meter> {
    let value = reading.amps?.get::<ampere>();
    Some(by_parts(reading, value, (AMPS_RATIO, AMPS_DIGIT_A), None, "A"))
}

pub(super) fn temperature(degC: f64) -> Meter {
    Meter {
        span: Span::around(degC, TEMPERATURE_K),
        words: format!("± {} K ({TAKEN})", Figures(TEMPERATURE_K)),
    }
}

pub(super) fn density(value: f64) -> Meter {
    Meter { span: Span::around(value, DENSITY), words: format!("± {DENSITY} ({TAKEN})") }
}

pub(super) fn delivered(reading: &Reading, value_Ah: f64) -> Meter {
    let (part, from) = reading.accuracy.map_or((DELIVERED_RATIO, TAKEN), |a| (a.get::<ratio>(), "stated"));
    let words = format!("± {} Ah ({} %, {from})", Figures(value_Ah * part), Figures(part * 100.0));
    Meter { span: Span::around(value_Ah, value_Ah * part), words }
}

/// Current at which the last digit of the meter of a reading is 1 mΩ.
pub(super) fn telling_current(reading: &Reading) -> ElectricCurrent {
    let digit = reading.resolution.map_or(DROP_DIGIT_V, |r| r.get::<volt>());
    ElectricCurrent::new::<ampere>(digit / 1e-3)
}
