//! The result of one check of an array: passed, failed, or not checked.

use core::fmt;

use crate::citation::Citation;
use crate::quantity::Figures;

/// A number with its source: a factor or a limit of a rule set, which comes into this room as a number.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cited {
    /// The value.
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
    /// The value found, in `unit`.
    pub value: f64,
    /// Its limit, in `unit`.
    pub limit: f64,
    /// Unit of both.
    pub unit: &'static str,
    /// How they relate.
    pub relation: PvRelation,
    /// What was compared, or which datum is missing.
    pub what: &'static str,
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

    /// NaN fails.
    pub(super) fn made(
        subject: PvSubject,
        (value, relation, limit): (f64, PvRelation, f64),
        unit: &'static str,
        what: &'static str,
        citation: Citation,
    ) -> Self {
        let held = match relation {
            PvRelation::AtMost => value <= limit,
            PvRelation::AtLeast => value >= limit,
        };
        let outcome = if held { PvOutcome::Passed } else { PvOutcome::Failed };
        Self { subject, outcome, value, limit, unit, relation, what, citation, only_yield: false }
    }

    pub(super) fn missing(
        subject: PvSubject,
        relation: PvRelation,
        unit: &'static str,
        what: &'static str,
        citation: Citation,
    ) -> Self {
        let outcome = PvOutcome::NotChecked;
        Self { subject, outcome, value: 0.0, limit: 0.0, unit, relation, what, citation, only_yield: false }
    }

    pub(super) fn yield_only(self) -> Self {
        Self { only_yield: true, ..self }
    }
}

impl fmt::Display for PvCheck {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let words = match self.relation {
            PvRelation::AtMost => "at most",
            PvRelation::AtLeast => "at least",
        };
        let Self { what, value, limit, unit, .. } = *self;
        match self.outcome {
            PvOutcome::NotChecked => write!(f, "{what}: not checked"),
            PvOutcome::Passed | PvOutcome::Failed => {
                write!(f, "{what}: {} {unit}, {words} {} {unit}", Figures(value), Figures(limit))
            }
        }
    }
}
