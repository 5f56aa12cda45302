//! What meters showed, beside what is predicted.

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::common::{line_of, list};
use super::number::{Number, ampere_hours, amps, degC, ohms, part, tidy, volts, watts};
use super::shape::object;
use super::words::{CauseKind, ImpliedKind, MeasuredKind, Verdict};
use crate::site::reading::{self, Measured, ReadingLine};

object! {
    /// A reading beside its prediction.
    Reading<'a> {
        /// Name of the reading.
        name: &'a str,
        /// Line in the site file.
        line: Option<u32>,
        /// Name of what was measured.
        at: &'a str,
        /// What was measured.
        kind: MeasuredKind,
        /// What the meter showed, in `unit`.
        value: Number,
        /// Unit of the value and of both predictions: V, A, °C, Ah; empty for relative density.
        unit: &'static str,
        /// By how much the meter may err, and what that rests on.
        tolerance: &'a str,
        /// Least that is predicted, before the error of the meter, in `unit`; null where nothing is.
        predicted_least: Number,
        /// Greatest that is predicted, before the error of the meter, in `unit`; null where nothing is.
        predicted_greatest: Number,
        /// What the prediction rests on; empty where there is none.
        basis: &'a str,
        /// The comparison.
        verdict: Verdict,
        /// What is missing where it is not comparable; else null.
        missing: Option<&'a str>,
        /// What it implies, where it tells something.
        implied: Vec<Implied<'a>>,
        /// Causes consistent with it and with the other readings under the same loads.
        causes: Vec<Cause<'a>>,
        /// What tells the causes apart; null where nothing has to.
        next: Option<NextMeasurement<'a>>,
    }
}

object! {
    /// What a reading implies; by its kind, the keys that it does not speak of are null. A greatest that is null beside a
    /// least that is not has no upper end.
    Implied<'a> {
        /// What it speaks of.
        kind: ImpliedKind,
        /// The same in words.
        text: String,
        /// Name of the circuit.
        circuit: Option<&'a str>,
        /// Current of the worst hour, A.
        current_A: Number,
        /// Least resistance, Ω.
        least_ohm: Number,
        /// Greatest resistance, Ω.
        greatest_ohm: Number,
        /// Least heat, W.
        least_W: Number,
        /// Greatest heat, W.
        greatest_W: Number,
        /// Least capacity at the rated time, Ah.
        least_Ah: Number,
        /// Greatest capacity at the rated time, Ah.
        greatest_Ah: Number,
        /// Least part: of the stated capacity, or state of charge.
        least_ratio: Number,
        /// Greatest part: of the stated capacity, or state of charge.
        greatest_ratio: Number,
    }
}

object! {
    /// One cause that is consistent with a reading.
    Cause<'a> {
        /// What.
        kind: CauseKind,
        /// Name of the part of the site.
        at: &'a str,
        /// The same in words.
        text: String,
    }
}

object! {
    /// The measurement that would tell the causes apart.
    NextMeasurement<'a> {
        /// What to measure.
        what: &'static str,
        /// First terminal.
        from: &'a str,
        /// Second terminal; the first again where there is only one.
        to: &'a str,
        /// Current that must flow meanwhile for one milliohm to show, A; null where none must.
        current_A: Number,
    }
}

/// Value and unit of what a meter showed.
fn shown(measured: &Measured) -> (Number, &'static str) {
    match *measured {
        Measured::Volts(v) | Measured::Drop(v) => (volts(v), "V"),
        Measured::Amps(a) => (amps(a), "A"),
        Measured::Temperature(t) => (degC(t), "°C"),
        Measured::Density(d) => (tidy(d), ""),
        Measured::Delivered(q) => (ampere_hours(q), "Ah"),
    }
}

impl<'a> From<&'a ReadingLine> for Reading<'a> {
    fn from(reading: &'a ReadingLine) -> Self {
        let ReadingLine {
            name,
            line,
            at,
            measured,
            tolerance,
            predicted,
            basis,
            verdict,
            implied,
            causes,
            next,
        } = reading;
        let (value, unit) = shown(measured);
        let predicted = predicted.as_ref();
        Self {
            name,
            line: line_of(*line),
            at,
            kind: measured.into(),
            value,
            unit,
            tolerance,
            predicted_least: predicted.and_then(|(least, _)| shown(least).0),
            predicted_greatest: predicted.and_then(|(_, greatest)| shown(greatest).0),
            basis,
            verdict: verdict.into(),
            missing: match verdict {
                reading::Verdict::NotComparable(what) => Some(what),
                reading::Verdict::Within | reading::Verdict::Above | reading::Verdict::Below => None,
            },
            implied: list(implied),
            causes: list(causes),
            next: next.as_ref().map(Into::into),
        }
    }
}

impl<'a> From<&'a reading::Implied> for Implied<'a> {
    fn from(implied: &'a reading::Implied) -> Self {
        let nothing = Self {
            kind: implied.into(),
            text: implied.to_string(),
            circuit: None,
            current_A: None,
            least_ohm: None,
            greatest_ohm: None,
            least_W: None,
            greatest_W: None,
            least_Ah: None,
            greatest_Ah: None,
            least_ratio: None,
            greatest_ratio: None,
        };
        match implied {
            reading::Implied::Resistance { circuit, extra, current, heat } => Self {
                circuit: Some(circuit),
                current_A: amps(*current),
                least_ohm: ohms(extra.0),
                greatest_ohm: ohms(extra.1),
                least_W: watts(heat.0),
                greatest_W: watts(heat.1),
                ..nothing
            },
            reading::Implied::Internal(least, greatest) => {
                Self { least_ohm: ohms(*least), greatest_ohm: ohms(*greatest), ..nothing }
            }
            reading::Implied::Capacity { charge, of_stated } => Self {
                least_Ah: ampere_hours(charge.0),
                greatest_Ah: ampere_hours(charge.1),
                least_ratio: part(of_stated.0),
                greatest_ratio: part(of_stated.1),
                ..nothing
            },
            reading::Implied::Charge(least, greatest) => {
                Self { least_ratio: part(*least), greatest_ratio: part(*greatest), ..nothing }
            }
            reading::Implied::Heat(least, greatest) => {
                Self { least_W: watts(*least), greatest_W: watts(*greatest), ..nothing }
            }
        }
    }
}

impl<'a> From<&'a reading::Cause> for Cause<'a> {
    fn from(cause: &'a reading::Cause) -> Self {
        let reading::Cause { kind, at } = cause;
        Self { kind: kind.into(), at, text: cause.to_string() }
    }
}

impl<'a> From<&'a reading::NextMeasurement> for NextMeasurement<'a> {
    fn from(next: &'a reading::NextMeasurement) -> Self {
        let reading::NextMeasurement { what, between: (from, to), current } = next;
        Self { what, from, to, current_A: current.and_then(amps) }
    }
}
