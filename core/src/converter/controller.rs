//! Charge controllers, as their sheets state them.
//!
//! What one makes of an array's power is in [`super::controller_yield()`]. What it uses itself, day and night, is a standing
//! load and belongs to [`crate::load`].

use core::fmt;
use core::str::FromStr;

use arrayvec::ArrayVec;
use uom::si::{electric_current::ampere, electric_potential::volt, power::watt, ratio::ratio};

use crate::catalogue::Choice;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error, Snippet};
use crate::quantity::{ElectricCurrent, ElectricPotential, Power, Ratio, VoltagePerTemperature};

/// How a charge controller works.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ControllerKind {
    /// Pulse-width modulation: the array is clamped to the bank's voltage.
    Pwm,
    /// Maximum power point tracking: the array is held where it gives most.
    Mppt,
}

impl ControllerKind {
    /// Word in site files.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Pwm => "pwm",
            Self::Mppt => "mppt",
        }
    }

    /// Efficiency where the sheet gives none: 98 % of a switch in series, 95 % of a converter. Common practice, no source.
    pub fn usual_efficiency(self) -> Ratio {
        Ratio::new::<ratio>(match self {
            Self::Pwm => 0.98,
            Self::Mppt => 0.95,
        })
    }
}

impl Choice for ControllerKind {
    const ALL: &'static [Self] = &[Self::Pwm, Self::Mppt];
    const WORDS: &'static [&'static str] = &[Self::Pwm.word(), Self::Mppt.word()];
    const FIRST: Self = Self::Pwm;
}

impl fmt::Display for ControllerKind {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.word())
    }
}

impl FromStr for ControllerKind {
    type Err = Error;

    fn from_str(text: &str) -> Result<Self, Error> {
        match text.trim() {
            "pwm" => Ok(Self::Pwm),
            "mppt" => Ok(Self::Mppt),
            _ => Err(Error::UnknownWord { text: Snippet::new(text), allowed: "pwm, mppt" }),
        }
    }
}

/// A charge controller, as its sheet states it.
#[derive(Clone, Debug, PartialEq)]
pub struct Controller {
    /// How it works.
    pub kind: ControllerKind,
    /// Greatest input voltage.
    pub greatest_input: Option<ElectricPotential>,
    /// Lower end of the operating window.
    pub window_low: Option<ElectricPotential>,
    /// Upper end of the operating window.
    pub window_high: Option<ElectricPotential>,
    /// Greatest operating current at the input.
    pub input_current: Option<ElectricCurrent>,
    /// Greatest short-circuit current of the array.
    pub input_short_circuit: Option<ElectricCurrent>,
    /// Greatest current into the bank.
    pub output_current: ElectricCurrent,
    /// Nominal voltages of the banks it serves; empty where the sheet does not say.
    pub systems: ArrayVec<ElectricPotential, 8>,
    /// How far the array must stand above the bank to start.
    pub start_margin: Option<ElectricPotential>,
    /// Power into the bank over power from the array.
    pub efficiency: Option<Ratio>,
    /// Its own use, day and night.
    pub idle_power: Option<Power>,
    /// Change of its charge voltages with temperature, for one cell; negative. 0 where it has no sensor.
    pub compensation_per_cell: Option<VoltagePerTemperature>,
}

impl Controller {
    /// A controller of which only kind and output current are known.
    pub fn plain(kind: ControllerKind, output_current: ElectricCurrent) -> Self {
        Self {
            kind,
            greatest_input: None,
            window_low: None,
            window_high: None,
            input_current: None,
            input_short_circuit: None,
            output_current,
            systems: ArrayVec::new(),
            start_margin: None,
            efficiency: None,
            idle_power: None,
            compensation_per_cell: None,
        }
    }

    /// Whether it serves a bank of a nominal voltage; `None` where its sheet does not say.
    pub fn serves(&self, nominal: ElectricPotential) -> Option<bool> {
        let volts = nominal.get::<volt>();
        (!self.systems.is_empty())
            .then(|| self.systems.iter().any(|system| (system.get::<volt>() - volts).abs() < 0.5))
    }

    /// Efficiency: stated, else [`ControllerKind::usual_efficiency`].
    pub fn efficiency(&self) -> (Ratio, Citation) {
        match self.efficiency {
            Some(stated) => (stated, Citation::new("the controller's sheet", "", Seen::Stated)),
            None => (
                self.kind.usual_efficiency(),
                Citation::new("common practice, no source", "", Seen::Practice),
            ),
        }
    }

    /// Checks that its figures can be true together.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for a figure no controller has, [`Error::Contradiction`] for a window upside down or above the
    /// greatest input voltage.
    pub fn check(&self) -> Result<(), Error> {
        let volts = |v: Option<ElectricPotential>| v.map(|v| v.get::<volt>());
        let amperes = |i: Option<ElectricCurrent>| i.map(|i| i.get::<ampere>());
        let voltage = Allowed::Between(0.0, 3000.0);
        let current = Allowed::AboveUpTo(0.0, 10_000.0);
        for (name, value, unit, allowed) in [
            ("greatest_input", volts(self.greatest_input), "V", voltage),
            ("window_low", volts(self.window_low), "V", voltage),
            ("window_high", volts(self.window_high), "V", voltage),
            ("start_margin", volts(self.start_margin), "V", Allowed::Between(0.0, 100.0)),
            ("input_current", amperes(self.input_current), "A", current),
            ("input_short_circuit", amperes(self.input_short_circuit), "A", current),
            ("output_current", Some(self.output_current.get::<ampere>()), "A", current),
            ("efficiency", self.efficiency.map(|e| e.get::<ratio>()), "", Allowed::AboveUpTo(0.0, 1.0)),
            ("idle_power", self.idle_power.map(|p| p.get::<watt>()), "W", Allowed::Between(0.0, 1000.0)),
            (
                "compensation_per_cell",
                self.compensation_per_cell.map(|c| c.value),
                "V/K",
                Allowed::Between(-0.02, 0.0),
            ),
        ] {
            if let Some(value) = value {
                checked(name, value, unit, allowed)?;
            }
        }
        for system in &self.systems {
            checked("nominal voltage", system.get::<volt>(), "V", Allowed::AboveUpTo(0.0, 1000.0))?;
        }
        let (low, high, most) = (volts(self.window_low), volts(self.window_high), volts(self.greatest_input));
        if let (Some(low), Some(high)) = (low, high)
            && low > high
        {
            let why = "it must not be above window_high";
            return Err(Error::Contradiction { name: "window_low", value: low, unit: "V", why });
        }
        if let (Some(high), Some(most)) = (high, most)
            && high > most
        {
            let why = "it must not be above greatest_input";
            return Err(Error::Contradiction { name: "window_high", value: high, unit: "V", why });
        }
        Ok(())
    }
}

/// Refuses a value outside its range; written so that NaN fails.
pub(super) fn checked(
    name: &'static str,
    value: f64,
    unit: &'static str,
    allowed: Allowed,
) -> Result<(), Error> {
    let held = match allowed {
        Allowed::Between(least, most) => value >= least && value <= most,
        Allowed::AboveUpTo(least, most) => value > least && value <= most,
        _ => value.is_finite(),
    };
    if held { Ok(()) } else { Err(Error::OutOfRange { name, value, unit, allowed }) }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use super::*;
    use crate::quantity::{Textual, parse};

    fn q<Q: Textual>(text: &str) -> Q {
        parse(text).unwrap()
    }

    #[test]
    fn sheets_that_cannot_be_true_are_refused() {
        let mut controller = Controller::plain(ControllerKind::Mppt, q("20 A"));
        controller.window_low = Some(q("60 V"));
        controller.window_high = Some(q("50 V"));
        assert_eq!(
            controller.check().unwrap_err().to_string(),
            "window_low is 60 V; it must not be above window_high"
        );
        controller.window_low = None;
        controller.greatest_input = Some(q("45 V"));
        assert_eq!(
            controller.check().unwrap_err().to_string(),
            "window_high is 50 V; it must not be above greatest_input"
        );
        assert!(Controller::plain(ControllerKind::Pwm, q("0 A")).check().is_err());
    }

    #[test]
    fn what_it_serves_is_known_or_not() {
        let mut controller = Controller::plain(ControllerKind::Pwm, q("20 A"));
        assert_eq!(controller.serves(q("12 V")), None);
        controller.systems.push(q("12 V"));
        controller.systems.push(q("24 V"));
        assert_eq!((controller.serves(q("24 V")), controller.serves(q("48 V"))), (Some(true), Some(false)));
        assert_eq!(controller.efficiency().1.seen, Seen::Practice);
        assert_eq!("mppt".parse::<ControllerKind>(), Ok(ControllerKind::Mppt));
        assert!("MPPT".parse::<ControllerKind>().is_err());
        assert!(
            <ControllerKind as Choice>::ALL
                .iter()
                .map(|k| k.word())
                .eq(ControllerKind::WORDS.iter().copied())
        );
    }
}
