//! Values of a rule set that a user replaces with his own.

use core::fmt;

use arrayvec::ArrayVec;
use uom::si::{length::meter, ratio::ratio};

use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{Length, Ratio};

/// Source of every overridden value.
pub(super) const STATED: Citation = Citation::new("stated by the user", "", Seen::Stated);

// Ranges stand once: the checks and the messages read these.
const CONTINUOUS_FACTOR: Allowed = Allowed::Between(1.0, 2.0);
const DROP: Allowed = Allowed::AboveUpTo(0.0, 0.2);
const UNFUSED: Allowed = Allowed::AboveUpTo(0.0, 10.0);
const FACTOR: Allowed = Allowed::AboveUpTo(0.0, 1.0);
const DEVICE_RATIO: Allowed = Allowed::AboveUpTo(0.0, 1.5);

/// Values a user replaces; each shows in the report as the user's own.
///
/// There is none for a table of ampacities: who knows better chooses another size.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Overrides {
    /// Factor on continuous current, 1 … 2.
    pub continuous_factor: Option<f64>,
    /// Greatest drop for every use, as a part of nominal voltage, above 0 and up to 0.2.
    pub drop: Option<Ratio>,
    /// Greatest unprotected length from the source, above 0 and up to 10 m.
    pub unfused: Option<Length>,
    /// Engine-space factor, above 0 and up to 1.
    pub engine_space: Option<f64>,
    /// Factor for more than one run bundled together, above 0 and up to 1.
    pub bundling: Option<f64>,
    /// Greatest device over corrected ampacity, above 0 and up to 1.5.
    pub device_ratio: Option<f64>,
    /// Admit aluminium.
    pub aluminium: Option<bool>,
}

/// One value that the user replaced, for the report.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Overridden {
    /// Name of the value, as [`Overrides`] and site files spell it.
    pub name: &'static str,
    /// The user's value.
    pub value: OwnValue,
}

/// A user's own value.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum OwnValue {
    /// A number with its unit; the unit is empty for a factor.
    Number(f64, &'static str),
    /// Admitted, or not.
    Admitted(bool),
}

impl fmt::Display for Overridden {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.value {
            OwnValue::Number(value, "") => write!(f, "{} = {value}", self.name),
            OwnValue::Number(value, unit) => write!(f, "{} = {value} {unit}", self.name),
            OwnValue::Admitted(true) => write!(f, "{} = admitted", self.name),
            OwnValue::Admitted(false) => write!(f, "{} = refused", self.name),
        }
    }
}

impl Overrides {
    /// Checks each value against its range.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] naming the first value outside its range.
    pub(super) fn check(&self) -> Result<(), Error> {
        for (name, value, unit, allowed) in [
            ("continuous_factor", self.continuous_factor, "", CONTINUOUS_FACTOR),
            ("drop", self.drop.map(|d| d.get::<ratio>()), "", DROP),
            ("unfused_length", self.unfused.map(|l| l.get::<meter>()), "m", UNFUSED),
            ("engine_space", self.engine_space, "", FACTOR),
            ("bundling", self.bundling, "", FACTOR),
            ("device_ratio", self.device_ratio, "", DEVICE_RATIO),
        ] {
            if let Some(value) = value
                && !within(allowed, value)
            {
                return Err(Error::OutOfRange { name, value, unit, allowed });
            }
        }
        Ok(())
    }

    /// The values that are replaced, in the order of the fields.
    pub(super) fn list(&self) -> ArrayVec<Overridden, 7> {
        let number = |name, value: Option<f64>, unit| {
            value.map(|v| Overridden { name, value: OwnValue::Number(v, unit) })
        };
        [
            number("continuous_factor", self.continuous_factor, ""),
            number("drop", self.drop.map(|d| d.get::<ratio>()), ""),
            number("unfused_length", self.unfused.map(|l| l.get::<meter>()), "m"),
            number("engine_space", self.engine_space, ""),
            number("bundling", self.bundling, ""),
            number("device_ratio", self.device_ratio, ""),
            self.aluminium.map(|a| Overridden { name: "aluminium", value: OwnValue::Admitted(a) }),
        ]
        .into_iter()
        .flatten()
        .collect()
    }
}

// Written so that NaN fails.
fn within(allowed: Allowed, value: f64) -> bool {
    match allowed {
        Allowed::Between(least, most) => value >= least && value <= most,
        Allowed::AboveUpTo(least, most) => value > least && value <= most,
        _ => value.is_finite(),
    }
}
