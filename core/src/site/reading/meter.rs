//! How far the meter may be wrong.
//!
//! Accuracy and last digit as the reading states them, else those of the usual meter of the commissioning sheet: a clamp for
//! every current, since nobody says that it went through the meter.

use alloc::format;
use alloc::string::String;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::ratio::ratio;

use super::span::Span;
use crate::quantity::{ElectricCurrent, ElectricPotential, Figures};
use crate::site::parts::Reading;
use crate::site::sheet::Meter as Usual;

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

/// Part of the reading and last digits of a meter.
#[derive(Clone, Copy)]
struct Error {
    part: f64,
    digits: f64,
}

fn with_error(
    reading: &Reading,
    value: f64,
    usual: Error,
    digit: Option<f64>,
    (unit, scale): (&str, f64),
) -> Meter {
    let stated = reading.accuracy.map(|a| a.get::<ratio>());
    let (part, digits) = (stated.unwrap_or(usual.part), digit.unwrap_or(usual.digits));
    let error = value.abs() * part + digits;
    let from = match (stated, digit) {
        (Some(_), Some(_)) => "stated",
        (Some(_), None) => "its last digits taken: common practice, no source",
        (None, Some(_)) => "its accuracy taken: common practice, no source",
        (None, None) => TAKEN,
    };
    let words = format!(
        "± {} {unit} ({} % and {} {unit}, {from})",
        Figures(error * scale),
        Figures(part * 100.0),
        Figures(digits * scale)
    );
    Meter { span: Span::around(value, error), words }
}

/// Error of the usual meter at a voltage.
fn usual_volts(value: f64) -> Error {
    let usual = Usual::usual();
    let part = usual.volts.accuracy.get::<ratio>();
    let error = usual.voltage_error(ElectricPotential::new::<volt>(value)).get::<volt>();
    Error { part, digits: error - part * value.abs() }
}

/// Volts at terminals.
pub(super) fn volts(reading: &Reading) -> Option<Meter> {
    let value = reading.volts?.get::<volt>();
    let digit = reading.resolution.map(|r| r.get::<volt>());
    Some(with_error(reading, value, usual_volts(value), digit, ("V", 1.0)))
}

/// Volts along a circuit.
pub(super) fn drop(reading: &Reading) -> Option<Meter> {
    let value = reading.drop?.get::<volt>();
    let digit = reading.resolution.map(|r| r.get::<volt>());
    Some(with_error(reading, value, usual_volts(value), digit, ("mV", 1e3)))
}

/// Amperes; a stated last digit is that of the volt range.
pub(super) fn amps(reading: &Reading) -> Option<Meter> {
    let value = reading.amps?.get::<ampere>();
    let clamp = Usual::usual().clamp;
    let usual = Error { part: clamp.accuracy.get::<ratio>(), digits: 2.0 * clamp.resolution.get::<ampere>() };
    Some(with_error(reading, value, usual, None, ("A", 1.0)))
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

/// Current from which the meter of a reading shows a milliohm beside a resistance: there it makes more volts than the drop
/// may be wrong by. `None` where the error grows faster, so that the path must be measured in parts.
///
/// I = d/(1 mΩ − a·(R + 1 mΩ)), with last digits d and accuracy a.
pub(super) fn telling_current(reading: &Reading, ohms: f64) -> Option<ElectricCurrent> {
    let usual = usual_volts(0.0);
    let digits = reading.resolution.map_or(usual.digits, |r| r.get::<volt>());
    let part = reading.accuracy.map_or(usual.part, |a| a.get::<ratio>());
    let slope = 1e-3 - part * (ohms + 1e-3);
    (slope > 0.0).then(|| ElectricCurrent::new::<ampere>(digits / slope))
}
