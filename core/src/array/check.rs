//! The result of one check of an array: passed, failed, or not checked.

use core::fmt;

use crate::citation::Citation;
use crate::quantity::Figures;

/// A number with its source: a factor or a limit of a rule set, which comes into this room as a number.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cited {
    /// The value: a factor, or in the unit of the limit that it sets.
    pub value: f64,
    /// Its source.
    pub citation: Citation,
}

/// Outcome of a check.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PvOutcome {
    /// The value keeps its limit.
    Passed,
    /// It does not.
    Failed,
    /// A datum is missing; nothing is known.
    NotChecked,
}

/// How value and limit relate.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PvRelation {
    /// The value may not exceed the limit.
    AtMost,
    /// The value may not fall below it.
    AtLeast,
}

/// What is checked.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum PvSubject {
    /// Cold open-circuit voltage against the module's greatest system voltage.
    ModuleVoltage,
    /// … against the controller's greatest input voltage.
    ControllerVoltage,
    /// … against a further part: isolator, device, box, surge protection.
    PartVoltage,
    /// … against the greatest that the rule set admits.
    RuleVoltage,
    /// Cold voltage at maximum power against the upper end of the operating window; beyond it only yield is lost.
    WindowHigh,
    /// Hot voltage at maximum power against the lower end of the operating window.
    WindowLow,
    /// Hot voltage at maximum power against the bank's highest charge voltage with the controller's margin.
    ChargeVoltage,
    /// Short-circuit current with the irradiance factor against what the input bears.
    ShortCircuit,
    /// Current at maximum power against the input's operating current; beyond it only yield is lost.
    InputCurrent,
    /// Current into the bank against the output; where the controller limits itself, only yield is lost.
    OutputCurrent,
    /// What the other strings drive into a faulty one against the module's series-fuse rating.
    StringFault,
    /// … against the ampacity of the string's conductor.
    ConductorFault,
    /// Rating of a string's device against its least.
    DeviceLeast,
    /// Rating of a string's device against its most.
    DeviceMost,
    /// Rating of a string's device against the module's series-fuse rating.
    DeviceModule,
}

/// One check of an array, with its numbers and its source.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PvCheck {
    /// What is checked.
    pub subject: PvSubject,
    /// How it went.
    pub outcome: PvOutcome,
    /// The value found, in `unit`; 0 where it is not known.
    pub value: f64,
    /// Its limit, in `unit`; 0 where it is not known.
    pub limit: f64,
    /// Unit of both.
    pub unit: &'static str,
    /// How they relate.
    pub relation: PvRelation,
    /// What is compared.
    pub what: &'static str,
    /// Which datum is missing, where the check is not made.
    pub missing: Option<&'static str>,
    /// Source of the limit.
    pub citation: Citation,
    /// Whether a failure only costs yield, and endangers nothing.
    pub only_yield: bool,
}

impl PvCheck {
    /// Whether it speaks against an arrangement: it failed, and more than yield is at stake.
    pub fn is_obstacle(&self) -> bool {
        self.outcome == PvOutcome::Failed && !self.only_yield
    }
}

impl fmt::Display for PvCheck {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let words = match self.relation {
            PvRelation::AtMost => "at most",
            PvRelation::AtLeast => "at least",
        };
        let Self { what, value, limit, unit, .. } = *self;
        match self.missing {
            Some(missing) => write!(f, "{what}: not checked, {missing}"),
            // Rounded, a failed check must not read as if it passed.
            None if self.outcome == PvOutcome::Failed && Figures(value).reads_like(limit) => {
                write!(f, "{what}: {value} {unit}, {words} {limit} {unit}")
            }
            None => write!(f, "{what}: {} {unit}, {words} {} {unit}", Figures(value), Figures(limit)),
        }
    }
}

/// A comparison before its numbers are known.
#[derive(Clone, Copy)]
pub(super) struct Compared {
    pub subject: PvSubject,
    pub relation: PvRelation,
    pub unit: &'static str,
    pub what: &'static str,
    /// Said where the value is not known.
    pub no_value: &'static str,
    /// Said where the limit is not known.
    pub no_limit: &'static str,
    pub citation: Citation,
    pub only_yield: bool,
}

impl Compared {
    /// The check of a value against a limit. NaN fails.
    pub(super) fn made(self, value: Option<f64>, limit: Option<f64>) -> PvCheck {
        let (outcome, missing) = match (value, limit) {
            (Some(value), Some(limit)) => {
                let held = match self.relation {
                    PvRelation::AtMost => value <= limit,
                    PvRelation::AtLeast => value >= limit,
                };
                (if held { PvOutcome::Passed } else { PvOutcome::Failed }, None)
            }
            (None, _) => (PvOutcome::NotChecked, Some(self.no_value)),
            (_, None) => (PvOutcome::NotChecked, Some(self.no_limit)),
        };
        PvCheck {
            subject: self.subject,
            outcome,
            value: value.unwrap_or(0.0),
            limit: limit.unwrap_or(0.0),
            unit: self.unit,
            relation: self.relation,
            what: self.what,
            missing,
            citation: self.citation,
            only_yield: self.only_yield,
        }
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use super::*;
    use crate::citation::Seen;

    const COMPARED: Compared = Compared {
        subject: PvSubject::ShortCircuit,
        relation: PvRelation::AtMost,
        unit: "A",
        what: "current",
        no_value: "it was not measured",
        no_limit: "its limit is not stated",
        citation: Citation::new("a sheet", "", Seen::Stated),
        only_yield: false,
    };

    #[test]
    fn what_is_not_known_never_passes() {
        for (value, limit, text) in [
            (None, Some(1.0), "current: not checked, it was not measured"),
            (Some(1.0), None, "current: not checked, its limit is not stated"),
            (None, None, "current: not checked, it was not measured"),
        ] {
            let check = COMPARED.made(value, limit);
            assert_eq!((check.outcome, check.to_string().as_str()), (PvOutcome::NotChecked, text));
            assert!(!check.is_obstacle());
        }
        for (value, limit) in [(f64::NAN, 1.0), (1.0, f64::NAN), (1.0 + f64::EPSILON, 1.0)] {
            assert!(COMPARED.made(Some(value), Some(limit)).is_obstacle(), "{value} {limit}");
        }
        let at_least = Compared { relation: PvRelation::AtLeast, ..COMPARED };
        assert_eq!(at_least.made(Some(1.0), Some(1.0)).outcome, PvOutcome::Passed);
        assert_eq!(at_least.made(Some(f64::NAN), Some(1.0)).outcome, PvOutcome::Failed);
        assert!(!Compared { only_yield: true, ..at_least }.made(Some(0.5), Some(1.0)).is_obstacle());
    }

    #[test]
    fn a_failure_by_a_hair_does_not_read_as_if_it_passed() {
        assert_eq!(
            COMPARED.made(Some(100.001), Some(100.0)).to_string(),
            "current: 100.001 A, at most 100 A"
        );
        assert_eq!(COMPARED.made(Some(15.25), Some(100.0)).to_string(), "current: 15.25 A, at most 100 A");
    }
}
