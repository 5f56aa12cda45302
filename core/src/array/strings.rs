//! Strings of modules against a controller, a bank and the rules: voltages cold and hot, currents, devices (R10).

use arrayvec::ArrayVec;
use uom::si::{
    electric_current::ampere, electric_potential::volt, ratio::ratio,
    thermodynamic_temperature::degree_celsius,
};

use super::check::{Cited, PvCheck, PvOutcome};
use super::layout::Layout;
use super::module::{Module, checked};
use super::string_checks;
use super::{
    array_current_design, open_circuit_voltage_cold, operating_voltage_hot, string_fault_current,
    string_fuse_least,
};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, ElectricPotential, Ratio, ThermodynamicTemperature};

/// The most checks that one arrangement gives.
pub(super) const CHECKS: usize = 24;
/// The most further parts that a cold voltage is held against.
const PARTS: usize = 8;

/// How a controller holds its array.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Regulation {
    /// Clamped to the bank's voltage: pulse-width modulation.
    Clamped,
    /// Held at maximum power.
    Tracking,
}

/// What the controller's input and output bear, as its sheet states it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct InputLimits {
    /// How it holds the array.
    pub regulation: Regulation,
    /// Greatest input voltage.
    pub greatest_voltage: Option<ElectricPotential>,
    /// Lower end of the operating window.
    pub window_low: Option<ElectricPotential>,
    /// Upper end of the operating window.
    pub window_high: Option<ElectricPotential>,
    /// How far the array must stand above the bank to start.
    pub start_margin: Option<ElectricPotential>,
    /// Greatest short-circuit current of the array.
    pub short_circuit_current: Option<ElectricCurrent>,
    /// Greatest operating current at the input.
    pub input_current: Option<ElectricCurrent>,
    /// Greatest current into the bank.
    pub output_current: Option<ElectricCurrent>,
}

/// The factors and limits of a rule set that count here.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PvFactors {
    /// For light brighter than the standard 1000 W/m².
    pub irradiance: Cited,
    /// For current that flows for hours.
    pub continuous: Cited,
    /// Least rating of a string's device over Isc.
    pub device_least: Option<Cited>,
    /// Greatest rating of a string's device over Isc.
    pub device_most: Option<Cited>,
    /// Greatest voltage of an array, V.
    pub greatest_voltage: Option<Cited>,
}

/// A further part that bears the array's cold voltage.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct VoltagePart {
    /// What is compared, in words: `cold open-circuit voltage against the isolator`.
    pub what: &'static str,
    /// Its greatest DC voltage, if stated.
    pub greatest: Option<ElectricPotential>,
}

/// The overcurrent device of each string.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum StringDevice {
    /// There is none.
    Absent,
    /// There is one of this rating.
    Rated(ElectricCurrent),
    /// One is chosen later, where it is required.
    ToChoose,
}

impl InputLimits {
    /// Nothing but the kind of regulation is stated.
    pub const fn unknown(regulation: Regulation) -> Self {
        Self {
            regulation,
            greatest_voltage: None,
            window_low: None,
            window_high: None,
            start_margin: None,
            short_circuit_current: None,
            input_current: None,
            output_current: None,
        }
    }
}

/// Everything that strings are held against.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StringQuestion<'a> {
    /// The module.
    pub module: &'a Module,
    /// The controller's limits.
    pub input: InputLimits,
    /// Coldest air at first light.
    pub coldest: ThermodynamicTemperature,
    /// Hottest cells: ambient and NOCT through [`cell_temperature()`](super::cell_temperature()).
    pub hottest_cell: ThermodynamicTemperature,
    /// Factor of the rule set for the coldest morning, for a module without a coefficient.
    pub cold_factor: Option<Cited>,
    /// Nominal voltage of the bank.
    pub bank_nominal: ElectricPotential,
    /// Highest charge voltage of the bank, absorption or equalising, compensated for cold.
    pub bank_highest: ElectricPotential,
    /// Part of the voltage lost in the array's wiring.
    pub drop: Ratio,
    /// Part of the voltage lost over the years.
    pub ageing: Ratio,
    /// Factors of the rule set.
    pub factors: PvFactors,
    /// Device in each string.
    pub device: StringDevice,
    /// Ampacity of a string's conductor.
    pub ampacity: Option<ElectricCurrent>,
    /// What the bank drives back through the controller; 0 where that blocks.
    pub back_feed: Option<ElectricCurrent>,
    /// Further parts that bear the cold voltage; at most 8.
    pub parts: &'a [VoltagePart],
}

/// How a cold voltage was found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ColdBasis {
    /// The sheet's coefficient.
    Coefficient,
    /// The rule set's factor.
    Factor(Cited),
}

/// Voltages of a string of so many modules.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StringVoltages {
    /// Open circuit on the coldest morning, and how it was found; `None` without coefficient and factor.
    pub cold_voc: Option<(ElectricPotential, ColdBasis)>,
    /// Maximum power on the coldest morning; `None` without a coefficient.
    pub cold_vmp: Option<ElectricPotential>,
    /// Maximum power with hottest cells, after wiring and ageing; `None` without a coefficient.
    pub hot_vmp: Option<ElectricPotential>,
}

/// Currents of an arrangement for which conductors and devices are chosen.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ArrayCurrents {
    /// Of one string: what the sun can drive.
    pub string_greatest: ElectricCurrent,
    /// Of one string: for which its conductor is chosen.
    pub string_design: ElectricCurrent,
    /// Of the array: what the sun can drive.
    pub array_greatest: ElectricCurrent,
    /// Of the array: for which its conductor is chosen.
    pub array_design: ElectricCurrent,
    /// What the others drive into a faulty string, without the bank.
    pub fault: ElectricCurrent,
    /// Least rating of a string's device, if the rule set has a factor.
    pub device_least: Option<ElectricCurrent>,
    /// Greatest rating of a string's device: the rule set's factor and the module's series-fuse rating, the lower.
    pub device_most: Option<ElectricCurrent>,
}

/// One arrangement with its voltages, currents and checks.
#[derive(Clone, Debug, PartialEq)]
pub struct StringsChecked {
    /// The arrangement.
    pub layout: Layout,
    /// Of a string.
    pub voltages: StringVoltages,
    /// Of a string and of the array.
    pub currents: ArrayCurrents,
    /// Whether each string needs a device of its own; `None` where data are missing.
    pub device_required: Option<bool>,
    /// The checks, in a fixed order.
    pub checks: ArrayVec<PvCheck, CHECKS>,
}

impl StringsChecked {
    /// The first check that speaks against the arrangement.
    pub fn obstacle(&self) -> Option<&PvCheck> {
        self.checks.iter().find(|check| check.is_obstacle())
    }

    /// The checks that were not made for want of a datum.
    pub fn not_made(&self) -> impl Iterator<Item = &PvCheck> {
        self.checks.iter().filter(|check| check.outcome == PvOutcome::NotChecked)
    }
}

impl StringQuestion<'_> {
    fn check(&self) -> Result<(), Error> {
        for (name, temperature, most) in
            [("coldest", self.coldest, 40.0), ("hottest_cell", self.hottest_cell, 150.0)]
        {
            checked(name, temperature.get::<degree_celsius>(), "degC", Allowed::Between(-60.0, most))?;
        }
        for (name, part) in [("drop", self.drop), ("ageing", self.ageing)] {
            checked(name, part.get::<ratio>(), "", Allowed::Between(0.0, 0.5))?;
        }
        for (name, voltage) in [("bank_nominal", self.bank_nominal), ("bank_highest", self.bank_highest)] {
            checked(name, voltage.get::<volt>(), "V", Allowed::AboveUpTo(0.0, 2000.0))?;
        }
        let input = &self.input;
        for (name, voltage) in [
            ("greatest input voltage", input.greatest_voltage),
            ("window_low", input.window_low),
            ("window_high", input.window_high),
            ("start_margin", input.start_margin),
        ] {
            if let Some(voltage) = voltage {
                checked(name, voltage.get::<volt>(), "V", Allowed::Between(0.0, 3000.0))?;
            }
        }
        let device = match self.device {
            StringDevice::Rated(rating) => Some(rating),
            StringDevice::Absent | StringDevice::ToChoose => None,
        };
        for (name, current) in [
            ("short_circuit_current", input.short_circuit_current),
            ("input_current", input.input_current),
            ("output_current", input.output_current),
            ("ampacity", self.ampacity),
            ("back_feed", self.back_feed),
            ("string device", device),
        ] {
            if let Some(current) = current {
                checked(name, current.get::<ampere>(), "A", Allowed::Between(0.0, 1e5))?;
            }
        }
        for part in self.parts {
            if let Some(voltage) = part.greatest {
                checked(
                    "greatest voltage of a part",
                    voltage.get::<volt>(),
                    "V",
                    Allowed::Between(0.0, 1e5),
                )?;
            }
        }
        let factors = &self.factors;
        for (name, factor) in [
            ("irradiance factor", Some(factors.irradiance)),
            ("continuous factor", Some(factors.continuous)),
            ("device_least", factors.device_least),
            ("device_most", factors.device_most),
            ("cold_factor", self.cold_factor),
        ] {
            if let Some(factor) = factor {
                checked(name, factor.value, "", Allowed::Between(1.0, 4.0))?;
            }
        }
        if let Some(most) = factors.greatest_voltage {
            checked("greatest voltage of the rule set", most.value, "V", Allowed::AboveUpTo(0.0, 1e4))?;
        }
        if self.parts.len() > PARTS {
            return Err(Error::WrongCount { what: "voltage parts", given: self.parts.len(), needed: PARTS });
        }
        Ok(())
    }
}

/// Voltages of a string of so many modules, cold and hot. [`check_strings`] has an example.
///
/// # Errors
/// [`Error::OutOfRange`] for a count of 0 or a question outside its ranges.
pub fn string_voltages(question: &StringQuestion<'_>, in_series: u16) -> Result<StringVoltages, Error> {
    question.check()?;
    let sheet = question.module.sheet();
    let count = Ratio::new::<ratio>(f64::from(in_series));
    let cold_voc = match (sheet.voc_coefficient, question.cold_factor) {
        (Some(coefficient), _) => {
            let voltage = open_circuit_voltage_cold(sheet.points.voc, coefficient, question.coldest, count)?;
            Some((voltage, ColdBasis::Coefficient))
        }
        (None, Some(factor)) => {
            checked("modules in series", count.value, "", Allowed::Between(1.0, 1000.0))?;
            Some((sheet.points.voc * count * factor.value, ColdBasis::Factor(factor)))
        }
        (None, None) => None,
    };
    let zero = Ratio::new::<ratio>(0.0);
    let at = |temperature, drop, ageing| {
        question.module.vmp_coefficient().map(|coefficient| {
            operating_voltage_hot(sheet.points.vmp, coefficient, temperature, count, drop, ageing)
        })
    };
    Ok(StringVoltages {
        cold_voc,
        cold_vmp: at(question.coldest, zero, zero).transpose()?,
        hot_vmp: at(question.hottest_cell, question.drop, question.ageing).transpose()?,
    })
}

/// Currents of so many strings in parallel. [`check_strings`] has an example of a question.
///
/// # Errors
/// [`Error::OutOfRange`] for a count of 0 or a question outside its ranges.
pub fn array_currents(question: &StringQuestion<'_>, in_parallel: u16) -> Result<ArrayCurrents, Error> {
    question.check()?;
    let sheet = question.module.sheet();
    let r = Ratio::new::<ratio>;
    let (isc, gain) = (sheet.points.isc, sheet.bifacial_gain);
    let irradiance = r(question.factors.irradiance.value);
    let design = |strings: f64| {
        array_current_design(isc, r(strings), gain, irradiance, r(question.factors.continuous.value))
    };
    let (string, array) = (design(1.0)?, design(f64::from(in_parallel))?);
    let of_isc = |factor: Option<Cited>| factor.map(|f| isc * question.module.rear_factor() * f.value);
    let device_least = match question.factors.device_least {
        Some(factor) => Some(string_fuse_least(isc, gain, r(factor.value))?),
        None => None,
    };
    let device_most = match (of_isc(question.factors.device_most), sheet.series_fuse) {
        (Some(a), Some(b)) => Some(if b < a { b } else { a }),
        (a, b) => a.or(b),
    };
    Ok(ArrayCurrents {
        string_greatest: string.greatest,
        string_design: string.design,
        array_greatest: array.greatest,
        array_design: array.design,
        fault: string_fault_current(
            isc,
            r(f64::from(in_parallel)),
            gain,
            irradiance,
            ElectricCurrent::new::<ampere>(0.0),
        )?,
        device_least,
        device_most,
    })
}

/// Holds an arrangement against controller, bank, module and rules.
///
/// # Errors
/// [`Error::OutOfRange`] for a count of 0 or a question outside its ranges, [`Error::WrongCount`] for more than eight
/// further parts. A check that fails, or lacks a datum, is no error.
///
/// # Example
/// ```
/// # use ampwright::array::*;
/// # use ampwright::{quantity::parse, rules::Rules};
/// # let points = KeyPoints { voc: parse("22.5 V")?, isc: parse("6.1 A")?, vmp: parse("18.6 V")?, imp: parse("5.38 A")? };
/// # let module = Module::new(ModuleSheet {
/// #     voc_coefficient: Some(parse("-0.3 %/K")?),
/// #     power_coefficient: Some(parse("-0.4 %/K")?),
/// #     series_fuse: Some(parse("15 A")?),
/// #     system_voltage: Some(parse("600 V")?),
/// #     ..ModuleSheet::plain(parse("100 W")?, points)
/// # })?;
/// let rules = Rules::named("us")?.pv();
/// let question = StringQuestion {
///     module: &module, // 100 W: 22.5 V, 6.1 A
///     input: InputLimits {
///         greatest_voltage: Some(parse("100 V")?),
///         start_margin: Some(parse("5 V")?),
///         short_circuit_current: Some(parse("35 A")?),
///         output_current: Some(parse("30 A")?),
///         ..InputLimits::unknown(Regulation::Tracking)
///     },
///     coldest: parse("-20 degC")?,
///     hottest_cell: parse("70 degC")?,
///     cold_factor: rules.cold_factor(parse("-20 degC")?).ok(),
///     bank_nominal: parse("12 V")?,
///     bank_highest: parse("15.6 V")?,
///     drop: parse("2 %")?,
///     ageing: parse("0 %")?,
///     factors: rules.factors(),
///     device: StringDevice::ToChoose,
///     ampacity: None,
///     back_feed: Some(parse("0 A")?),
///     parts: &[],
/// };
/// let four = check_strings(&question, Layout { in_series: 4, in_parallel: 1 })?;
/// assert_eq!(
///     four.obstacle().unwrap().to_string(),
///     "cold open-circuit voltage against the controller's greatest input voltage: 102.2 V, at most 100 V"
/// );
/// let three = check_strings(&question, Layout { in_series: 3, in_parallel: 2 })?;
/// assert!(three.obstacle().is_none());
/// assert_eq!(three.device_required, Some(false));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn check_strings(question: &StringQuestion<'_>, layout: Layout) -> Result<StringsChecked, Error> {
    let voltages = string_voltages(question, layout.in_series)?;
    let currents = array_currents(question, layout.in_parallel)?;
    let mut checks = ArrayVec::new();
    string_checks::cold(question, &voltages, &mut checks);
    string_checks::hot(question, &voltages, &mut checks);
    string_checks::input(question, layout, &currents, &mut checks);
    let device_required = string_checks::string_device(question, &currents, &mut checks);
    Ok(StringsChecked { layout, voltages, currents, device_required, checks })
}
