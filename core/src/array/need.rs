//! Size of an array from its worst month, after the procedure of IEEE 1562-2007 (recalled).
//!
//! Two forms: in ampere-hours for a controller that clamps the array to the bank, in watt-hours for one that holds it at
//! maximum power. Charge efficiency enters here; discharge efficiency enters the demand.

use uom::si::{
    electric_charge::ampere_hour, electric_potential::volt, energy::watt_hour, ratio::ratio, time::hour,
};

use super::array_to_load_ratio;
use super::module::checked;
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCharge, ElectricCurrent, ElectricPotential, Energy, Power, Ratio, Time};

/// How much depends on the load, and how steady its sun is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LoadClass {
    /// Its failure is borne, or the sun is strong and steady.
    NonCritical,
    /// It must not fail, or the sun is weak or variable.
    Critical,
}

/// Array-to-load ratios of a class of load.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ArrayToLoad {
    /// Class.
    pub class: LoadClass,
    /// Lower end.
    pub least: f64,
    /// Upper end, by which arrays are sized here.
    pub most: f64,
    /// Source.
    pub citation: Citation,
}

const GUIDE: Citation = Citation::new("IEEE 1562-2007", "array-to-load ratio", Seen::Recalled);

/// Array-to-load ratio by class of load.
///
/// Source: IEEE 1562-2007, recalled.
pub const ARRAY_TO_LOAD: [ArrayToLoad; 2] = [
    ArrayToLoad { class: LoadClass::NonCritical, least: 1.1, most: 1.2, citation: GUIDE },
    ArrayToLoad { class: LoadClass::Critical, least: 1.3, most: 1.4, citation: GUIDE },
];

/// One month: what is taken from the bank on an average day, and its sun-hours in the plane of the array.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct NeedMonth<D> {
    /// Demand of an average day; discharge losses included.
    pub demand: D,
    /// Sun-hours of an average day in the plane of the array.
    pub sun_hours: Time,
}

/// What an array must supply, in ampere-hours.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ArrayNeed {
    /// January to December.
    pub months: [NeedMonth<ElectricCharge>; 12],
    /// Array-to-load ratio, 1 … 5: see [`ARRAY_TO_LOAD`].
    pub array_to_load: Ratio,
    /// Part lost to dirt, mismatch, wiring and the controller's own use, 0 … 0.9.
    pub losses: Ratio,
    /// Part of the charge that the bank stores, above 0 and up to 1.
    pub charge_efficiency: Ratio,
    /// Current of a module at maximum power.
    pub imp: ElectricCurrent,
    /// Voltage of a module at maximum power with hottest cells, after wiring and ageing.
    pub module_hot_voltage: ElectricPotential,
    /// Voltage a string must reach hot: the bank's highest charge voltage with the controller's margin.
    pub string_voltage: ElectricPotential,
}

/// The steps of a sizing in ampere-hours, in the order of the procedure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ArraySteps {
    /// Month with the greatest demand over sun-hours, 0 for January.
    pub worst_month: usize,
    /// Its demand of a day.
    pub demand: ElectricCharge,
    /// Its sun-hours of a day.
    pub sun_hours: Time,
    /// Charge the array must give in a day: demand × ratio/((1 − losses)·η).
    pub array_charge: ElectricCharge,
    /// Charge one string gives in a day: Imp × sun-hours.
    pub string_charge: ElectricCharge,
    /// Their quotient, before rounding up.
    pub strings_exact: f64,
    /// Strings in parallel.
    pub strings: u32,
    /// Quotient of the string's voltage and a module's, before rounding up.
    pub in_series_exact: f64,
    /// Modules in series.
    pub in_series: u32,
    /// Modules in all.
    pub modules: u32,
    /// Ratio that is reached in the worst month.
    pub reached: Ratio,
}

/// What an array must supply, in watt-hours: held at maximum power.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EnergyNeed {
    /// January to December.
    pub months: [NeedMonth<Energy>; 12],
    /// Array-to-load ratio, 1 … 5: see [`ARRAY_TO_LOAD`].
    pub array_to_load: Ratio,
    /// Part lost to dirt, mismatch and wiring, 0 … 0.9.
    pub losses: Ratio,
    /// Efficiency of the controller, above 0 and up to 1.
    pub controller_efficiency: Ratio,
    /// Part of the energy that the bank stores, above 0 and up to 1.
    pub charge_efficiency: Ratio,
    /// Power of a module with the cells as hot as on a day of that month.
    pub module_power: Power,
    /// Modules in series in each string.
    pub in_series: u16,
}

/// The steps of a sizing in watt-hours.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EnergySteps {
    /// Month with the greatest demand over sun-hours, 0 for January.
    pub worst_month: usize,
    /// Its demand of a day.
    pub demand: Energy,
    /// Its sun-hours of a day.
    pub sun_hours: Time,
    /// Energy the array must give in a day: demand × ratio/((1 − losses)·η·η).
    pub array_energy: Energy,
    /// Power that gives it in those sun-hours.
    pub array_power: Power,
    /// Their quotient, before rounding up.
    pub modules_exact: f64,
    /// Strings in parallel.
    pub strings: u32,
    /// Modules in all: whole strings.
    pub modules: u32,
    /// Ratio that is reached in the worst month.
    pub reached: Ratio,
}

/// Most modules, strings: beyond it something is mistyped.
const MOST: f64 = 1e6;

/// Sizes an array in ampere-hours from its worst month.
///
/// # Errors
/// [`Error::OutOfRange`] for a need outside its ranges, or one that asks for more than a million strings.
pub fn array_need(need: &ArrayNeed) -> Result<ArraySteps, Error> {
    let imp = need.imp.get::<uom::si::electric_current::ampere>();
    checked("imp", imp, "A", Allowed::AboveUpTo(0.0, 100.0))?;
    let (one, string) = (need.module_hot_voltage.get::<volt>(), need.string_voltage.get::<volt>());
    checked("module_hot_voltage", one, "V", Allowed::AboveUpTo(0.0, 1000.0))?;
    checked("string_voltage", string, "V", Allowed::AboveUpTo(0.0, 2000.0))?;
    let kept = kept(need.losses, need.charge_efficiency, "charge_efficiency", need.array_to_load)?;
    let (worst_month, demand, sun) = worst(&need.months, |q| q.get::<ampere_hour>())?;
    let sun_hours = Time::new::<hour>(sun);
    let wanted = demand * need.array_to_load.get::<ratio>() / kept;
    let given = imp * sun;
    let (strings_exact, strings) = count("strings", wanted / given)?;
    let (in_series_exact, in_series) = count("modules in series", string / one)?;
    let (_, modules) = count("modules", f64::from(strings) * f64::from(in_series))?;
    let demand = ElectricCharge::new::<ampere_hour>(demand);
    Ok(ArraySteps {
        worst_month,
        demand,
        sun_hours,
        array_charge: ElectricCharge::new::<ampere_hour>(wanted),
        string_charge: ElectricCharge::new::<ampere_hour>(given),
        strings_exact,
        strings,
        in_series_exact,
        in_series,
        modules,
        reached: array_to_load_ratio::formula(
            need.imp,
            Ratio::new::<ratio>(f64::from(strings)),
            sun_hours,
            Ratio::new::<ratio>(1.0 - kept),
            demand,
        ),
    })
}

/// Sizes an array in watt-hours from its worst month.
///
/// # Errors
/// [`Error::OutOfRange`] for a need outside its ranges, or one that asks for more than a million modules.
pub fn energy_need(need: &EnergyNeed) -> Result<EnergySteps, Error> {
    let power = need.module_power.get::<uom::si::power::watt>();
    checked("module_power", power, "W", Allowed::AboveUpTo(0.0, 5000.0))?;
    let series = f64::from(need.in_series);
    checked("modules in series", series, "", Allowed::AtLeast(1.0))?;
    let controller = need.controller_efficiency.get::<ratio>();
    checked("controller_efficiency", controller, "", Allowed::AboveUpTo(0.0, 1.0))?;
    let kept =
        controller * kept(need.losses, need.charge_efficiency, "charge_efficiency", need.array_to_load)?;
    let (worst_month, demand, sun) = worst(&need.months, |e| e.get::<watt_hour>())?;
    let wanted = demand * need.array_to_load.get::<ratio>() / kept;
    let (modules_exact, modules) = count("modules", wanted / sun / power)?;
    let (_, strings) = count("strings", f64::from(modules) / series)?;
    let whole = f64::from(strings) * series;
    let (_, modules) = count("modules", whole)?;
    Ok(EnergySteps {
        worst_month,
        demand: Energy::new::<watt_hour>(demand),
        sun_hours: Time::new::<hour>(sun),
        array_energy: Energy::new::<watt_hour>(wanted),
        array_power: Power::new::<uom::si::power::watt>(wanted / sun),
        modules_exact,
        strings,
        modules,
        reached: Ratio::new::<ratio>(if demand > 0.0 { whole * power * sun * kept / demand } else { 0.0 }),
    })
}

/// Part of what the array gives that the bank stores.
fn kept(losses: Ratio, efficiency: Ratio, name: &'static str, array_to_load: Ratio) -> Result<f64, Error> {
    checked("array_to_load", array_to_load.get::<ratio>(), "", Allowed::Between(1.0, 5.0))?;
    checked("losses", losses.get::<ratio>(), "", Allowed::Between(0.0, 0.9))?;
    checked(name, efficiency.get::<ratio>(), "", Allowed::AboveUpTo(0.0, 1.0))?;
    Ok((1.0 - losses.get::<ratio>()) * efficiency.get::<ratio>())
}

/// The month with the greatest demand over sun-hours, its demand and its sun-hours.
fn worst<D: Copy>(months: &[NeedMonth<D>; 12], plain: impl Fn(D) -> f64) -> Result<(usize, f64, f64), Error> {
    let mut found = (0, 0.0, 0.0);
    let mut greatest = -1.0;
    for (place, month) in months.iter().enumerate() {
        let (demand, sun) = (plain(month.demand), month.sun_hours.get::<hour>());
        checked("demand of a day", demand, "Ah or Wh", Allowed::AtLeast(0.0))?;
        checked("sun-hours of a day", sun, "h", Allowed::AboveUpTo(0.0, 24.0))?;
        if demand / sun > greatest {
            greatest = demand / sun;
            found = (place, demand, sun);
        }
    }
    Ok(found)
}

/// Rounded up; the last bit of a quotient must not add a string.
fn count(what: &'static str, exact: f64) -> Result<(f64, u32), Error> {
    checked(what, exact, "", Allowed::Between(0.0, MOST))?;
    let whole = libm::ceil(exact * (1.0 - 1e-12));
    // Between 0 and a million.
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)]
    Ok((exact, whole as u32))
}

calculations! {
    /// Strings and modules of an array for one month, in ampere-hours.
    ///
    /// For a controller that clamps the array to the bank. [`array_need()`] finds the worst of twelve months.
    ///
    /// # Example
    /// 40 Ah a day, 3.1 sun-hours, ratio 1.2, a tenth lost, modules of 5.38 A, two in series:
    /// ```
    /// use ampwright::{array::array_modules, quantity::{parse, readable}};
    /// let array = array_modules(parse("40 Ah")?, parse("3.1 h")?, parse("1.2")?, parse("10 %")?, parse("5.38 A")?, parse("2")?)?;
    /// assert_eq!(readable(array.strings_exact).to_string(), "3.2");
    /// assert_eq!((array.strings.value, array.modules.value), (4.0, 8.0));
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn array_modules(
        /// Taken from the bank on an average day of the month.
        demand: ElectricCharge in ampere_hour [>= 0.0],
        /// Of an average day, in the plane of the array.
        sun_hours: Time in hour [> 0.0 ..= 24.0],
        /// 1.1 to 1.2 for loads whose failure is borne, 1.3 to 1.4 for critical ones.
        array_to_load: Ratio in ratio [1.0 ..= 5.0] = 1.2,
        /// Part lost to dirt, mismatch, wiring, the controller's own use, and charging.
        losses: Ratio in ratio [0.0 ..= 0.9] = 0.1,
        /// Current of a module at maximum power.
        imp: ElectricCurrent in ampere [> 0.0],
        /// Modules in series.
        in_series: Ratio in ratio [1.0 ..= 1000.0] = 1.0,
    ) => ArrayModules {
        /// Before rounding up.
        strings_exact: Ratio in ratio,
        /// In parallel.
        strings: Ratio in ratio,
        /// In all.
        modules: Ratio in ratio,
    }
    formula "strings = ⌈Q·r/((1 − l)·t·Imp)⌉, modules = strings·n"
    source "IEEE 1562-2007, number of strings in parallel (recalled)"
    {
        let one = Ratio::new::<ratio>(1.0);
        let exact = demand * array_to_load / ((one - losses) * sun_hours * imp);
        let strings = Ratio::new::<ratio>(libm::ceil(exact.value * (1.0 - 1e-12)));
        ArrayModules { strings_exact: exact, strings, modules: strings * in_series }
    }
}
