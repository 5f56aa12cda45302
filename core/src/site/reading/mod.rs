//! What meters showed, beside what is predicted: what it implies, the causes consistent with it, and the next measurement.
//!
//! Predicted is the network with just the named loads on: conductors from cold to the temperature of the worst hour, joints
//! from nothing to their generic resistance, the bank as it was read or as far as it may go. Never is one culprit named
//! without proof: causes are only taken out where another reading under the same loads excludes them.

mod amps;
mod battery;
mod group;
mod line;
mod meter;
mod network;
mod path;
mod rest;
mod span;
mod temperature;
#[cfg(test)]
mod tests;
mod text;

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_charge::ampere_hour;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::finding::{Findings, Severity};
use super::graph::Item;
use super::parts::Reading;
use super::plan::Plan;
use super::system::Site;
use crate::citation::{Citation, Seen};
use group::{Conditions, groups, loads};
pub use line::{Cause, CauseKind, Implied, Measured, NextMeasurement, ReadingLine, Verdict};
use meter::Meter;
use network::{Network, Place};
use path::Question;
use span::Span;
pub(super) use text::section;

const JOINT_HEAT: Citation = Citation::new("common practice, no source", "heat of one joint", Seen::Practice);
const CAPACITY: Citation = Citation::new(
    "common practice, no source",
    "80 % of the stated capacity as the end of life",
    Seen::Practice,
);

/// What a reading that is not as predicted means for the site.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Grade {
    /// As predicted.
    Fine,
    /// Wherever the resistance sits, its heat is a danger.
    Burns,
    /// Its heat may not conform.
    MayBurn,
    /// Its heat is below what is graded.
    Warms,
    /// Different from what is predicted.
    Differs,
    /// Hotter than the insulation may be.
    TooHot,
    /// More flows than the conductor carries, or than the design current.
    AboveCapacity,
    AboveDesign,
    /// The current differs.
    CurrentDiffers,
    /// The bank.
    BankResistance,
    BankCapacity,
    BankLow,
    BankDiffers,
    Disagree,
    /// Nothing to compare with.
    Unknown,
    BankUnknown,
}

/// The comparison of one value.
#[derive(Clone, Debug)]
struct Outcome {
    pub predicted: Option<Span>,
    pub basis: String,
    pub verdict: Verdict,
    pub implied: Vec<Implied>,
    pub causes: Vec<Cause>,
    pub next: Option<NextMeasurement>,
    pub grade: Grade,
}

impl Outcome {
    fn not_comparable(what: impl Into<String>) -> Self {
        Self {
            predicted: None,
            basis: String::new(),
            verdict: Verdict::NotComparable(what.into()),
            implied: Vec::new(),
            causes: Vec::new(),
            next: None,
            grade: Grade::Unknown,
        }
    }

    fn compared(read: Span, predicted: Span, basis: String) -> Self {
        Self {
            predicted: Some(predicted),
            basis,
            verdict: verdict(read, predicted),
            implied: Vec::new(),
            causes: Vec::new(),
            next: None,
            grade: Grade::Fine,
        }
    }
}

/// Above or below only where the error of the meter does not reach.
fn verdict(read: Span, predicted: Span) -> Verdict {
    if read.is_above(predicted) {
        Verdict::Above
    } else if predicted.is_above(read) {
        Verdict::Below
    } else {
        Verdict::Within
    }
}

/// Compares every reading of the site, and adds what follows to the findings.
pub(super) fn readings(site: &Site, plan: &Plan, found: &mut Findings) -> Vec<ReadingLine> {
    if site.readings.is_empty() {
        return Vec::new();
    }
    let network = Network::new(site, plan);
    let groups = groups(&network, &site.readings);
    let mut lines = Vec::new();
    for reading in &site.readings {
        let place = network.place(&reading.at);
        let under = place.and_then(|p| groups.get(&(loads(reading), p.tree)));
        let ask = place.zip(under).map(|(place, under)| Ask {
            network: &network,
            groups: &groups,
            under,
            reading,
            place,
        });
        for (measured, meter) in values(reading) {
            let outcome = match &ask {
                Some(ask) => ask.outcome(measured, meter.span),
                None => Outcome::not_comparable(
                    "it hangs on no bank in this file, or is not part of a network of its own",
                ),
            };
            report(reading, measured, &outcome, found);
            lines.push(line(reading, measured, meter, outcome));
        }
    }
    found.list.sort_by_key(|f| f.severity);
    lines
}

/// The values of a reading with the error of its meter.
fn values(reading: &Reading) -> Vec<(Measured, Meter)> {
    let mut values = Vec::new();
    if let (Some(v), Some(meter)) = (reading.volts, meter::volts(reading)) {
        values.push((Measured::Volts(v), meter));
    }
    if let (Some(v), Some(meter)) = (reading.drop, meter::drop(reading)) {
        values.push((Measured::Drop(v), meter));
    }
    if let (Some(a), Some(meter)) = (reading.amps, meter::amps(reading)) {
        values.push((Measured::Amps(a), meter));
    }
    if let Some(t) = reading.temperature {
        values.push((Measured::Temperature(t), meter::temperature(t.get::<degree_celsius>())));
    }
    if let Some(d) = reading.density {
        values.push((Measured::Density(d), meter::density(d)));
    }
    if let Some(q) = reading.delivered {
        values.push((Measured::Delivered(q), meter::delivered(reading, q.get::<ampere_hour>())));
    }
    values
}

/// A reading with all that may bear on it.
struct Ask<'a> {
    network: &'a Network<'a>,
    groups: &'a group::Groups<'a>,
    under: &'a Conditions<'a>,
    reading: &'a Reading,
    place: Place,
}

impl Ask<'_> {
    fn outcome(&self, measured: Measured, read: Span) -> Outcome {
        let bank = match self.network.item(self.place) {
            Some(Item::Bank(index)) if self.place.circuit.is_none() => self.network.site.banks.get(index),
            _ => None,
        };
        let question =
            Question { network: self.network, under: self.under, reading: self.reading, place: self.place };
        match (measured, bank) {
            (Measured::Volts(_), Some(bank)) => battery::volts(self, bank, read),
            (Measured::Density(_), Some(bank)) => battery::density(self, bank, read),
            (Measured::Delivered(_), Some(bank)) => battery::delivered(self, bank, read),
            (Measured::Temperature(_), Some(bank)) => temperature::cells(self, bank, read),
            (Measured::Density(_) | Measured::Delivered(_), None) => {
                Outcome::not_comparable("density and delivered charge are read at a bank; name it in 'at'")
            }
            (Measured::Volts(_), None) => question.volts(read),
            (Measured::Drop(_), _) => question.drop(read),
            (Measured::Amps(_), _) => amps::amps(self, read),
            (Measured::Temperature(_), None) => temperature::joint(self, read),
        }
    }
}

fn line(reading: &Reading, measured: Measured, meter: Meter, outcome: Outcome) -> ReadingLine {
    ReadingLine {
        name: reading.name.clone(),
        line: reading.line,
        at: reading.at.clone(),
        measured,
        tolerance: meter.words,
        predicted: outcome.predicted.map(|p| (measured.of(p.least), measured.of(p.greatest))),
        basis: outcome.basis,
        verdict: outcome.verdict,
        implied: outcome.implied,
        causes: outcome.causes,
        next: outcome.next,
    }
}

/// Adds the finding of a reading that is not as predicted.
fn report(reading: &Reading, measured: Measured, outcome: &Outcome, found: &mut Findings) {
    let place = format!("reading \"{}\", {}", reading.name, measured.word());
    let line = reading.line;
    if let Verdict::NotComparable(what) = &outcome.verdict {
        let text = format!("check not made: {what}");
        if outcome.grade == Grade::BankUnknown {
            found.add(Severity::NotChecked, "R12", "bank-reading-not-compared", place, line, text, None, "");
        } else {
            found.add(Severity::NotChecked, "R17", "reading-not-compared", place, line, text, None, "");
        }
        return;
    }
    let text = text::finding(measured, outcome);
    let joint = "measure on as the section Readings says, and remake what it shows";
    match outcome.grade {
        Grade::Fine => found.pass("R17", &place, "as predicted, within the error of the meter"),
        Grade::Burns => found.add(
            Severity::Danger,
            "R9",
            "reading-implies-heat",
            place,
            line,
            text,
            Some(JOINT_HEAT),
            "switch it off; then measure on as the section Readings says, and remake what it shows",
        ),
        Grade::MayBurn => found.add(
            Severity::Nonconforming,
            "R9",
            "reading-implies-heat",
            place,
            line,
            text,
            Some(JOINT_HEAT),
            joint,
        ),
        Grade::Warms => {
            found.add(
                Severity::Advice,
                "R9",
                "reading-implies-heat",
                place,
                line,
                text,
                Some(JOINT_HEAT),
                joint,
            );
        }
        Grade::Differs => found.add(
            Severity::Advice,
            "R17",
            "reading-not-as-predicted",
            place,
            line,
            text,
            None,
            "measure on as the section Readings says, or mend what the file states",
        ),
        Grade::TooHot => found.add(
            Severity::Danger,
            "R4",
            "hotter-than-insulation",
            place,
            line,
            text,
            None,
            "switch it off; let it cool, and remake what got hot",
        ),
        Grade::AboveCapacity => found.add(
            Severity::Danger,
            "R16",
            "current-above-design",
            place,
            line,
            text,
            None,
            "less load at a time, or a larger conductor with its device",
        ),
        Grade::AboveDesign => found.add(
            Severity::Nonconforming,
            "R16",
            "current-above-design",
            place,
            line,
            text,
            None,
            "state the loads as they draw, and inspect again",
        ),
        Grade::CurrentDiffers => found.add(
            Severity::Advice,
            "R16",
            "current-not-as-predicted",
            place,
            line,
            text,
            None,
            "state the loads as they draw, and inspect again",
        ),
        Grade::BankResistance => found.add(
            Severity::Nonconforming,
            "R6",
            "bank-resistance-above-taken",
            place,
            line,
            text,
            None,
            "find the weak battery or joint; the least fault current is less than these checks took",
        ),
        Grade::BankCapacity => found.add(
            Severity::Nonconforming,
            "R12",
            "bank-capacity-below-stated",
            place,
            line,
            text,
            Some(CAPACITY),
            "charge it fully, measure again, and replace the bank or state what it still holds",
        ),
        Grade::BankLow => found.add(
            Severity::Advice,
            "R14",
            "bank-below-depth",
            place,
            line,
            text,
            None,
            "charge it; a lower charge ages the cells and freezes them sooner",
        ),
        Grade::BankDiffers => found.add(
            Severity::Advice,
            "R12",
            "bank-not-as-predicted",
            place,
            line,
            text,
            None,
            "measure on as the section Readings says",
        ),
        Grade::Disagree => found.add(
            Severity::Advice,
            "R12",
            "density-and-voltage-disagree",
            place,
            line,
            text,
            None,
            "read every cell, after a charge that mixes the acid",
        ),
        Grade::Unknown | Grade::BankUnknown => {}
    }
}

/// What is missing, of a bank.
fn bank_unknown(what: &str) -> Outcome {
    Outcome { grade: Grade::BankUnknown, ..Outcome::not_comparable(what.to_string()) }
}
