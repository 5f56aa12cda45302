//! What changed from one report to another.

use alloc::vec::Vec;

use super::common::list;
use super::shape::{object, words};
use crate::site::compare;

words! {
    /// Name of this form and its number.
    ComparisonSchema for () {
        () => "ampwright.comparison/1",
    }
}

object! {
    /// What changed from an earlier report to a later one. It holds neither time nor path.
    Comparison<'a> {
        /// Name of this form and its number.
        schema: ComparisonSchema,
        /// How many changes; 0 where nothing differs.
        change_count: usize,
        /// Rules, banks, surroundings.
        system: Vec<Change<'a>>,
        /// Circuits.
        circuits: Vec<Change<'a>>,
        /// Findings.
        findings: Vec<Change<'a>>,
        /// What to buy.
        purchases: Vec<Change<'a>>,
        /// Readings and their verdicts.
        readings: Vec<Change<'a>>,
    }
}

object! {
    /// One thing that differs.
    Change<'a> {
        /// Where.
        place: &'a str,
        /// What of it; empty where it is the whole place.
        what: &'a str,
        /// In the earlier report, in words; null where it is new.
        earlier: Option<&'a str>,
        /// In the later report, in words; null where it is gone.
        later: Option<&'a str>,
        /// The check or finding behind the earlier value; empty where there is none.
        why_earlier: &'a str,
        /// The check or finding behind the later value; empty where there is none.
        why_later: &'a str,
    }
}

impl<'a> From<&'a compare::Comparison> for Comparison<'a> {
    fn from(source: &'a compare::Comparison) -> Self {
        let compare::Comparison { system, circuits, findings, purchases, readings } = source;
        Self {
            schema: (&()).into(),
            change_count: source.len(),
            system: list(system),
            circuits: list(circuits),
            findings: list(findings),
            purchases: list(purchases),
            readings: list(readings),
        }
    }
}

impl<'a> From<&'a compare::Change> for Change<'a> {
    fn from(change: &'a compare::Change) -> Self {
        let compare::Change { place, what, earlier, later, why_earlier, why_later } = change;
        Self { place, what, earlier: earlier.as_deref(), later: later.as_deref(), why_earlier, why_later }
    }
}
