//! Charge controllers: what an array gives through one that clamps it to the bank, and through one that tracks its maximum.
//!
//! The array comes in as numbers and a current for each voltage; how it got them is [`crate::array`]'s business. What the
//! controller uses itself, day and night, is a standing load and belongs to [`crate::load`].

use core::fmt;
use core::str::FromStr;

use arrayvec::ArrayVec;
use uom::si::{electric_current::ampere, electric_potential::volt, power::watt, ratio::ratio};

use crate::catalogue::{Choice, calculations};
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

/// An array at the controller's input, in the light and at the cell temperature of the moment.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ArrayInput {
    /// Rated power times the part of 1000 W/m²: what it would give with cells at 25 °C.
    pub rated: Power,
    /// Voltage at maximum power.
    pub vmp: ElectricPotential,
    /// Current at maximum power.
    pub imp: ElectricCurrent,
    /// Open-circuit voltage.
    pub voc: ElectricPotential,
}

/// What reaches the bank, and where the rest went: the terms sum to what the array is rated for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ControllerYield {
    /// What the array would give in this light with cells at 25 °C.
    pub rated: Power,
    /// Lost to the cells' temperature; negative in the cold.
    pub temperature: Power,
    /// Lost because the array is not held at its voltage of maximum power.
    pub voltage_mismatch: Power,
    /// Lost because the output is at its limit.
    pub clipping: Power,
    /// Lost in the controller.
    pub conversion: Power,
    /// Into the bank.
    pub delivered: Power,
    /// Voltage at which the array is held; 0 where it delivers nothing.
    pub array_voltage: ElectricPotential,
    /// Current into the bank.
    pub current: ElectricCurrent,
}

/// What an array gives through a controller into a bank at a voltage.
///
/// A clamped array stands at the bank's voltage. A tracked one stands at its maximum, or at the end of the controller's
/// window next to it, where the window begins no lower than bank voltage plus start margin (0 where not stated); an array that
/// cannot reach the window gives nothing. Both end at the output current: a clamping controller cannot hold back more
/// current than that, so what is beyond its rating is not counted as yield.
///
/// # Errors
/// [`Error::OutOfRange`] for figures outside their ranges, or a current of the array that is not finite.
pub fn controller_yield(
    controller: &Controller,
    array: &ArrayInput,
    bank: ElectricPotential,
    current_at: impl Fn(ElectricPotential) -> ElectricCurrent,
) -> Result<ControllerYield, Error> {
    controller.check()?;
    let bank = bank.get::<volt>();
    checked("bank voltage", bank, "V", Allowed::AboveUpTo(0.0, 2000.0))?;
    let rated = array.rated.get::<watt>();
    let (vmp, imp) = (array.vmp.get::<volt>(), array.imp.get::<ampere>());
    let voc = array.voc.get::<volt>();
    checked("rated power of the array", rated, "W", Allowed::Between(0.0, 1e9))?;
    checked("vmp", vmp, "V", Allowed::Between(0.0, 1e4))?;
    checked("imp", imp, "A", Allowed::Between(0.0, 1e5))?;
    checked("voc", voc, "V", Allowed::Between(0.0, 1e4))?;
    let held = held_at(controller, vmp, voc, bank);
    let flowing = match held {
        Some(volts) => current_at(ElectricPotential::new::<volt>(volts)).get::<ampere>(),
        None => 0.0,
    };
    checked("current of the array", flowing, "A", Allowed::Between(-1e6, 1e6))?;
    let most = vmp * imp;
    // No array gives more than its maximum, and none takes power through a controller.
    let given = (held.unwrap_or(0.0) * flowing).clamp(0.0, most);
    let efficiency = controller.efficiency().0.get::<ratio>();
    let limit = controller.output_current.get::<ampere>() * bank;
    let delivered = (given * efficiency).min(limit);
    let taken = delivered / efficiency;
    let w = Power::new::<watt>;
    Ok(ControllerYield {
        rated: w(rated),
        temperature: w(rated - most),
        voltage_mismatch: w(most - given),
        clipping: w(given - taken),
        conversion: w(taken - delivered),
        delivered: w(delivered),
        array_voltage: ElectricPotential::new::<volt>(held.filter(|_| given > 0.0).unwrap_or(0.0)),
        current: ElectricCurrent::new::<ampere>(delivered / bank),
    })
}

/// Voltage at which the array is held, if it delivers there.
fn held_at(controller: &Controller, vmp: f64, voc: f64, bank: f64) -> Option<f64> {
    let volts = match controller.kind {
        ControllerKind::Pwm => bank,
        ControllerKind::Mppt => {
            let margin = controller.start_margin.map_or(0.0, |v| v.get::<volt>());
            let low = controller.window_low.map_or(0.0, |v| v.get::<volt>()).max(bank + margin);
            let high = controller.window_high.map_or(f64::INFINITY, |v| v.get::<volt>());
            if low > high {
                return None;
            }
            vmp.clamp(low, high)
        }
    };
    (volts < voc).then_some(volts)
}

fn checked(name: &'static str, value: f64, unit: &'static str, allowed: Allowed) -> Result<(), Error> {
    // Written so that NaN fails.
    let held = match allowed {
        Allowed::Between(least, most) => value >= least && value <= most,
        Allowed::AboveUpTo(least, most) => value > least && value <= most,
        _ => value.is_finite(),
    };
    if held { Ok(()) } else { Err(Error::OutOfRange { name, value, unit, allowed }) }
}

calculations! {
    /// Power into a bank from an array that is clamped to its voltage.
    ///
    /// The plain product: the current at the bank's voltage is nearly that at maximum power, a little more in truth.
    ///
    /// # Example
    /// A module of 17 V and 7 A on a bank at 12 V:
    /// ```
    /// use ampwright::{converter::pwm_power, quantity::{parse, readable}};
    /// let result = pwm_power(parse("17 V")?, parse("7 A")?, parse("12 V")?, parse("100 %")?)?;
    /// assert_eq!(readable(result.delivered).to_string(), "84 W");
    /// assert_eq!(readable(result.mismatch_part).to_string(), "0.294");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn pwm_power(
        /// Voltage of the array at maximum power, with the cells as hot as they are.
        vmp: ElectricPotential in volt [> 0.0],
        /// Current of the array at maximum power.
        imp: ElectricCurrent in ampere [>= 0.0],
        /// Of the bank.
        bank_voltage: ElectricPotential in volt [> 0.0],
        /// Of the controller.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0] = 0.98,
    ) => PwmPower {
        /// Into the bank.
        delivered: Power in watt,
        /// Part of the maximum power that the clamp loses.
        mismatch_part: Ratio in ratio,
    }
    where (bank_voltage <= vmp) bank_voltage in volt: "it must not be above vmp: the array's current falls there; take more modules in series"
    formula "P = Imp·U·η, part lost 1 − U/Vmp"
    source "energy balance; the default efficiency is common practice, no source"
    {
        PwmPower {
            delivered: imp * bank_voltage * efficiency,
            mismatch_part: Ratio::new::<ratio>(1.0) - bank_voltage / vmp,
        }
    }

    /// Power into a bank from an array held at its maximum, up to the controller's output current.
    ///
    /// # Example
    /// 900 W through 95 % into 24 V with at most 30 A:
    /// ```
    /// use ampwright::{converter::mppt_power, quantity::{parse, readable}};
    /// let result = mppt_power(parse("900 W")?, parse("24 V")?, parse("30 A")?, parse("95 %")?)?;
    /// assert_eq!(readable(result.delivered).to_string(), "720 W");
    /// assert_eq!(readable(result.clipped).to_string(), "142 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn mppt_power(
        /// Greatest power of the array in this light and heat.
        array_power: Power in watt [>= 0.0],
        /// Of the bank.
        bank_voltage: ElectricPotential in volt [> 0.0],
        /// Greatest current into the bank.
        output_current: ElectricCurrent in ampere [> 0.0],
        /// Of the controller.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0] = 0.95,
    ) => MpptPower {
        /// Into the bank.
        delivered: Power in watt,
        /// Power that the array could give and the output does not take.
        clipped: Power in watt,
        /// Lost in the controller.
        conversion: Power in watt,
    }
    formula "P = min(η·P_array, I·U), clipped = P_array − P/η, conversion = P/η − P"
    source "energy balance; the default efficiency is common practice, no source"
    {
        let limit = output_current * bank_voltage;
        let could = array_power * efficiency;
        let delivered = if could < limit { could } else { limit };
        let taken = delivered / efficiency;
        MpptPower { delivered, clipped: array_power - taken, conversion: taken - delivered }
    }
}
