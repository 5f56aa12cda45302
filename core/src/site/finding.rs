//! Findings: what the inspection has to say, each with place, limit, actual, rule, source and remedy.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::fmt;

use crate::cable::Material;
use crate::circuit::{Checked, Outcome, Relation};
use crate::citation::Citation;
use crate::quantity::Figures;
use crate::rules::Check;

/// How grave a finding is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// It can burn, arc or hurt.
    Danger,
    /// It breaks a rule or does not work.
    Nonconforming,
    /// A datum is missing: nothing is known.
    NotChecked,
    /// Worth doing; no rule demands it.
    Advice,
}

impl Severity {
    /// The word in the report.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Danger => "DANGER",
            Self::Nonconforming => "NONCONFORMING",
            Self::NotChecked => "NOT CHECKED",
            Self::Advice => "ADVICE",
        }
    }
}

/// One finding.
#[derive(Clone, Debug, PartialEq)]
pub struct Finding {
    /// How grave.
    pub severity: Severity,
    /// Rule of the design behind it: `R4`.
    pub rule: &'static str,
    /// Permanent short name of its kind.
    pub slug: &'static str,
    /// Where: `circuit "pump", F3`.
    pub place: String,
    /// Line of the entry in the site file.
    pub line: u32,
    /// What was found, with value and limit.
    pub text: String,
    /// Source of the limit; empty where there is none.
    pub source: String,
    /// What to do.
    pub remedy: &'static str,
}

impl fmt::Display for Finding {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} {}", self.rule, self.place)?;
        if self.line > 0 {
            write!(f, " (line {})", self.line)?;
        }
        write!(f, ": {}", self.text)?;
        if !self.source.is_empty() {
            write!(f, " [{}]", self.source)?;
        }
        if !self.remedy.is_empty() {
            write!(f, "; {}", self.remedy)?;
        }
        write!(f, " <{}>", self.slug)
    }
}

/// Collects findings with their place, and what passed beside the checks of single runs.
#[derive(Default)]
pub(super) struct Findings {
    pub list: Vec<Finding>,
    pub passed: Vec<String>,
}

impl Findings {
    #[allow(clippy::too_many_arguments)] // the fields of a finding, in its order
    pub fn add(
        &mut self,
        severity: Severity,
        rule: &'static str,
        slug: &'static str,
        place: impl Into<String>,
        line: u32,
        text: String,
        source: Option<Citation>,
        remedy: &'static str,
    ) {
        let source = source.map_or_else(String::new, |c| c.to_string());
        self.list.push(Finding { severity, rule, slug, place: place.into(), line, text, source, remedy });
    }

    /// Notes a check that passed.
    pub fn pass(&mut self, rule: &'static str, place: &str, text: &str) {
        self.passed.push(format!("{rule} {place}: {text}"));
    }
}

/// What a failed check of a run means: its rule, name, gravity and remedy.
const fn meaning(check: Check) -> (&'static str, &'static str, Severity, &'static str) {
    match check {
        Check::Conductor => ("R18", "conductor-refused", Severity::Nonconforming, "replace the conductor"),
        Check::LeastSize => {
            ("R4", "conductor-below-least-size", Severity::Nonconforming, "use a larger conductor")
        }
        Check::TerminalColumn => (
            "R4",
            "terminal-column-exceeded",
            Severity::Danger,
            "use a larger conductor, or terminals marked for the higher temperature at both ends",
        ),
        Check::Ampacity => (
            "R4",
            "ampacity-exceeded",
            Severity::Danger,
            "use a larger conductor, a higher insulation rating, less grouping or a cooler way",
        ),
        Check::DeviceCarries => (
            "R5",
            "device-below-load",
            Severity::Nonconforming,
            "use a larger device, and a conductor that it protects",
        ),
        Check::DeviceStart => (
            "R16",
            "device-trips-at-start",
            Severity::Nonconforming,
            "use a larger breaker, a later type or a soft start",
        ),
        Check::DeviceProtects => {
            ("R4", "device-above-ampacity", Severity::Danger, "use a smaller device or a larger conductor")
        }
        Check::OpensLate => (
            "R5",
            "device-opens-late",
            Severity::Danger,
            "use a smaller rating, a family that opens earlier, or a larger conductor",
        ),
        Check::Drop => {
            ("R17", "drop-exceeded", Severity::Nonconforming, "use a larger conductor or a shorter run")
        }
        Check::LoadVoltage => (
            "R3",
            "voltage-too-low-at-load",
            Severity::Nonconforming,
            "use larger conductors on its path, or a higher cut-off",
        ),
        Check::StartVoltage => (
            "R16",
            "start-voltage-too-low",
            Severity::Nonconforming,
            "use larger conductors on its path, or a soft start",
        ),
        Check::Breaking => {
            ("R6", "breaking-capacity-too-low", Severity::Danger, "use a device that interrupts more on DC")
        }
        Check::LeastFault => (
            "R6",
            "least-fault-too-small",
            Severity::Danger,
            "use a smaller device, a larger conductor or a shorter run",
        ),
        Check::Withstand => (
            "R6",
            "withstand-exceeded",
            Severity::Danger,
            "use a larger conductor or a device that lets less through",
        ),
        Check::DeviceSupply => (
            "R6",
            "device-not-for-this-supply",
            Severity::Danger,
            "use a device rated for DC at this voltage",
        ),
        Check::Termination => (
            "R4",
            "terminal-range",
            Severity::Nonconforming,
            "use a device or an adapter made for this conductor",
        ),
    }
}

/// The name of a check that could not be made.
const fn unmade(check: Check) -> &'static str {
    match check {
        Check::Conductor => "conductor-not-checked",
        Check::LeastSize => "least-size-not-checked",
        Check::TerminalColumn => "terminal-column-not-checked",
        Check::Ampacity => "ampacity-not-checked",
        Check::DeviceCarries => "device-load-not-checked",
        Check::DeviceStart => "start-against-device-not-checked",
        Check::DeviceProtects => "device-against-ampacity-not-checked",
        Check::OpensLate => "opening-current-not-checked",
        Check::Drop => "drop-not-checked",
        Check::LoadVoltage => "load-voltage-not-checked",
        Check::StartVoltage => "start-voltage-not-checked",
        Check::Breaking => "breaking-capacity-not-checked",
        Check::LeastFault => "least-fault-not-checked",
        Check::Withstand => "withstand-not-checked",
        Check::DeviceSupply => "device-supply-not-checked",
        Check::Termination => "termination-not-checked",
    }
}

/// The finding of a check that was not passed; `None` for one that was.
pub(super) fn of_check(
    checked: &Checked,
    place: &str,
    line: u32,
    material: Material,
    required: bool,
) -> Option<Finding> {
    let (rule, slug, grave, remedy) = meaning(checked.check);
    let (severity, text) = match checked.outcome {
        Outcome::Passed => return None,
        Outcome::NotChecked => (Severity::NotChecked, format!("check not made: {}", checked.what)),
        Outcome::Failed => {
            let severity = match checked.check {
                // A recommendation that is not kept is advice.
                Check::Drop if !required => Severity::Advice,
                Check::Conductor if material != Material::Copper => Severity::Danger,
                _ => grave,
            };
            (severity, words(checked))
        }
    };
    Some(Finding {
        severity,
        rule,
        slug: if severity == Severity::NotChecked { unmade(checked.check) } else { slug },
        place: place.to_string(),
        line,
        text,
        source: checked.citation.to_string(),
        remedy: if checked.outcome == Outcome::NotChecked { "" } else { remedy },
    })
}

/// A failed check in words: what, value, limit.
fn words(checked: &Checked) -> String {
    match checked.relation {
        Relation::Plain => checked.what.to_string(),
        Relation::AtMost | Relation::AtLeast => format!("{}: {}", checked.what, checked.numbers()),
    }
}

/// Digits as the trade prints them.
pub(super) fn digits(value: f64) -> String {
    Figures(value).to_string()
}
