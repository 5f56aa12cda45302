//! The result of one check: passed, failed, or not checked; never "safe".

use core::fmt;

use crate::citation::{Citation, Seen};
use crate::quantity::Figures;
use crate::rules::Check;

/// Outcome of a check.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Outcome {
    /// The value keeps its limit.
    Passed,
    /// It does not.
    Failed,
    /// A datum is missing; nothing is known.
    NotChecked,
}

/// How value and limit relate.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Relation {
    /// The value may not exceed the limit.
    AtMost,
    /// The value may not fall below it.
    AtLeast,
    /// There is no number: a yes or no.
    Plain,
}

/// One check of a run, with its numbers and its source.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Checked {
    /// Which check.
    pub check: Check,
    /// How it went.
    pub outcome: Outcome,
    /// The value found, in `unit`.
    pub actual: f64,
    /// Its limit, in `unit`.
    pub limit: f64,
    /// Unit of both.
    pub unit: &'static str,
    /// How they relate.
    pub relation: Relation,
    /// What was compared, or why nothing was.
    pub what: &'static str,
    /// Source of the limit.
    pub citation: Citation,
}

impl Checked {
    /// A value that may not exceed a limit. NaN fails.
    pub(super) fn at_most(
        check: Check,
        actual: f64,
        limit: f64,
        unit: &'static str,
        what: &'static str,
        citation: Citation,
    ) -> Self {
        let outcome = if actual <= limit { Outcome::Passed } else { Outcome::Failed };
        Self { check, outcome, actual, limit, unit, relation: Relation::AtMost, what, citation }
    }

    /// A value that may not fall below a limit. NaN fails.
    pub(super) fn at_least(
        check: Check,
        actual: f64,
        limit: f64,
        unit: &'static str,
        what: &'static str,
        citation: Citation,
    ) -> Self {
        let outcome = if actual >= limit { Outcome::Passed } else { Outcome::Failed };
        Self { check, outcome, actual, limit, unit, relation: Relation::AtLeast, what, citation }
    }

    /// A check without numbers.
    pub(super) fn plain(check: Check, outcome: Outcome, what: &'static str, citation: Citation) -> Self {
        Self { check, outcome, actual: 0.0, limit: 0.0, unit: "", relation: Relation::Plain, what, citation }
    }

    /// Whether it speaks against taking a size: it failed, or no table gives the capacity.
    pub fn is_obstacle(&self) -> bool {
        match self.outcome {
            Outcome::Passed => false,
            Outcome::Failed => true,
            Outcome::NotChecked => matches!(self.check, Check::Ampacity | Check::TerminalColumn),
        }
    }

    /// Part of the limit that is used; above 1 it failed. Nothing for checks without numbers or not made.
    pub fn used(&self) -> Option<f64> {
        if self.outcome == Outcome::NotChecked {
            return None;
        }
        match self.relation {
            Relation::AtMost if self.limit > 0.0 => Some(self.actual / self.limit),
            Relation::AtLeast if self.actual > 0.0 => Some(self.limit / self.actual),
            _ => None,
        }
    }

    /// The words of a passed check: a recalled value never "conforms".
    pub fn verdict(&self) -> &'static str {
        match (self.outcome, self.citation.seen) {
            (Outcome::Passed, Seen::Recalled) => "conforms to the recalled value; verify",
            (Outcome::Passed, Seen::Practice) => "within common practice",
            (Outcome::Passed, Seen::Stated) => "within the stated value",
            (Outcome::Passed, Seen::Page | Seen::Derived) => "conforms",
            (Outcome::Failed, _) => "does not conform",
            (Outcome::NotChecked, _) => "not checked",
        }
    }
}

impl Checked {
    /// `79.54 A, at most 100 A`; more digits where fewer would make value and limit read the same though one fails.
    pub fn numbers(&self) -> Numbers<'_> {
        Numbers(self)
    }
}

/// Value and limit of a check in words.
#[derive(Clone, Copy, Debug)]
pub struct Numbers<'a>(&'a Checked);

impl fmt::Display for Numbers<'_> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let Checked { actual, limit, unit, relation, outcome, .. } = self.0;
        let words = match relation {
            Relation::AtMost => "at most",
            Relation::AtLeast => "at least",
            Relation::Plain => return Ok(()),
        };
        if *outcome == Outcome::Failed && Figures(*actual).reads_like(*limit) {
            // As many places as tell them apart.
            for places in 3..17_u8 {
                if libm::round(actual * libm::pow(10.0, places.into()))
                    != libm::round(limit * libm::pow(10.0, places.into()))
                {
                    let places = usize::from(places);
                    return write!(f, "{actual:.places$} {unit}, {words} {limit:.places$} {unit}");
                }
            }
            return write!(f, "{actual} {unit}, {words} {limit} {unit}");
        }
        // Prospective currents are bounds, not four digits (R6); rounded, a passed check must not read as a failed one.
        let (rounded_actual, rounded_limit) = match self.0.check {
            Check::Breaking => (*actual, upper_bound(*limit)),
            Check::LeastFault => (lower_bound(*actual), *limit),
            _ => (*actual, *limit),
        };
        let (actual, limit) = if *outcome == Outcome::Passed && rounded_actual < rounded_limit {
            (*actual, *limit)
        } else {
            (rounded_actual, rounded_limit)
        };
        write!(f, "{} {unit}, {words} {} {unit}", Figures(actual), Figures(limit))
    }
}

/// A greatest prospective current in two figures, as many as it deserves: rounded up.
pub fn upper_bound(amps: f64) -> f64 {
    two_figures(amps, |units| libm::ceil(units * (1.0 - 1e-9)))
}

/// A least prospective current in two figures: rounded down.
pub fn lower_bound(amps: f64) -> f64 {
    two_figures(amps, |units| libm::floor(units * (1.0 + 1e-9)))
}

/// The last bit of a sum must not move a figure.
fn two_figures(amps: f64, round: fn(f64) -> f64) -> f64 {
    if !(amps > 0.0 && amps.is_finite()) {
        return 0.0;
    }
    let unit = libm::pow(10.0, libm::floor(libm::log10(amps)) - 1.0);
    round(amps / unit) * unit
}

impl fmt::Display for Checked {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.check == Check::DeviceProtects && self.outcome != Outcome::NotChecked {
            f.write_str("device against its conductor, ")?;
        }
        match (self.relation, self.outcome) {
            (Relation::Plain, _) | (_, Outcome::NotChecked) => write!(f, "{}", self.what)?,
            _ => write!(f, "{}: {}", self.what, self.numbers())?,
        }
        write!(f, ": {} ({})", self.verdict(), self.citation)
    }
}
