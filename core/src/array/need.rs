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
    /// Lower end; a ratio.
    pub least: f64,
    /// Upper end, by which arrays are sized here; a ratio.
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
    /// Ratio that is reached in the worst month; 0 where there is no demand.
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
    /// Ratio that is reached in the worst month; 0 where there is no demand.
    pub reached: Ratio,
}

/// Most modules, strings: beyond it something is mistyped.
const MOST: f64 = 1e6;

/// Sizes an array in ampere-hours from its worst month.
///
/// # Errors
/// [`Error::OutOfRange`] for a need outside its ranges, or one that asks for more than a million strings.
///
/// # Example
/// 40 Ah on every day of the year, and a dark December:
/// ```
/// use ampwright::array::{ArrayNeed, NeedMonth, array_need};
/// use ampwright::quantity::parse;
/// let mut months = [NeedMonth { demand: parse("40 Ah")?, sun_hours: parse("3.4 h")? }; 12];
/// months[11].sun_hours = parse("1.1 h")?;
/// let steps = array_need(&ArrayNeed {
///     months,
///     array_to_load: parse("1.2")?,
///     losses: parse("10 %")?,
///     charge_efficiency: parse("95 %")?,
///     imp: parse("5.38 A")?,
///     module_hot_voltage: parse("14.5 V")?,
///     string_voltage: parse("15.6 V")?,
/// })?;
/// assert_eq!((steps.worst_month, steps.strings, steps.in_series, steps.modules), (11, 10, 2, 20));
/// # Ok::<(), ampwright::Error>(())
/// ```
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
    let r = Ratio::new::<ratio>;
    let reached = if demand.value > 0.0 {
        array_to_load_ratio::formula(need.imp, r(f64::from(strings)), sun_hours, r(1.0 - kept), demand)
    } else {
        r(0.0)
    };
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
        reached,
    })
}

/// Sizes an array in watt-hours from its worst month.
///
/// # Errors
/// [`Error::OutOfRange`] for a need outside its ranges, or one that asks for more than a million modules.
///
/// # Example
/// 500 Wh on every day of the year, and a dark December:
/// ```
/// use ampwright::array::{EnergyNeed, NeedMonth, energy_need};
/// use ampwright::quantity::parse;
/// let mut months = [NeedMonth { demand: parse("500 Wh")?, sun_hours: parse("3.4 h")? }; 12];
/// months[11].sun_hours = parse("1.1 h")?;
/// let steps = energy_need(&EnergyNeed {
///     months,
///     array_to_load: parse("1.2")?,
///     losses: parse("10 %")?,
///     controller_efficiency: parse("95 %")?,
///     charge_efficiency: parse("95 %")?,
///     module_power: parse("100 W")?,
///     in_series: 2,
/// })?;
/// assert_eq!((steps.worst_month, steps.strings, steps.modules), (11, 4, 8));
/// # Ok::<(), ampwright::Error>(())
/// ```
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

    /// Power of an array for one month, in watt-hours.
    ///
    /// For a controller that holds the array at maximum power. [`energy_need()`] finds the worst of twelve months.
    ///
    /// # Example
    /// 1 kWh a day, 3.1 sun-hours, ratio 1.2, a tenth lost, controller 95 %, bank 90 %:
    /// ```
    /// use ampwright::{array::array_power, quantity::{parse, readable}};
    /// let power = array_power(parse("1 kWh")?, parse("3.1 h")?, parse("1.2")?, parse("10 %")?, parse("95 %")?, parse("90 %")?)?;
    /// assert_eq!(readable(power).to_string(), "503 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn array_power(
        /// Taken from the bank on an average day of the month.
        demand: Energy in watt_hour [>= 0.0],
        /// Of an average day, in the plane of the array.
        sun_hours: Time in hour [> 0.0 ..= 24.0],
        /// 1.1 to 1.2 for loads whose failure is borne, 1.3 to 1.4 for critical ones.
        array_to_load: Ratio in ratio [1.0 ..= 5.0] = 1.2,
        /// Part lost to heat, dirt, mismatch and wiring.
        losses: Ratio in ratio [0.0 ..= 0.9] = 0.1,
        /// Of the controller.
        controller_efficiency: Ratio in ratio [> 0.0 ..= 1.0] = 0.95,
        /// Part of the energy that the bank stores.
        charge_efficiency: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> power: Power in watt
    formula "P = W·r/((1 − l)·η_controller·η_charge·t)"
    source "IEEE 1562-2007 in the form of energy (recalled); the default efficiency is common practice, no source"
    {
        let kept = (Ratio::new::<ratio>(1.0) - losses) * controller_efficiency * charge_efficiency;
        demand * array_to_load / (kept * sun_hours)
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::{electric_current::ampere, power::watt};

    use super::*;
    use crate::array::sample::q;

    const SUN: [f64; 12] = [1.4, 2.3, 3.4, 4.6, 5.2, 5.4, 5.1, 4.5, 3.6, 2.4, 1.5, 1.1];

    fn months<D: Copy>(demand: [D; 12]) -> [NeedMonth<D>; 12] {
        core::array::from_fn(|k| NeedMonth { demand: demand[k], sun_hours: Time::new::<hour>(SUN[k]) })
    }

    fn need(demand: [f64; 12]) -> ArrayNeed {
        ArrayNeed {
            months: months(demand.map(ElectricCharge::new::<ampere_hour>)),
            array_to_load: q("1.2"),
            losses: q("10 %"),
            charge_efficiency: q("95 %"),
            imp: q("5.38 A"),
            module_hot_voltage: q("14.5 V"),
            string_voltage: q("31.2 V"),
        }
    }

    fn energy(demand: f64) -> EnergyNeed {
        EnergyNeed {
            months: months([Energy::new::<watt_hour>(demand); 12]),
            array_to_load: q("1.2"),
            losses: q("10 %"),
            controller_efficiency: q("95 %"),
            charge_efficiency: q("90 %"),
            module_power: q("85 W"),
            in_series: 3,
        }
    }

    #[test]
    fn the_darkest_month_decides_unless_its_demand_is_small() {
        let steps = array_need(&need([40.0; 12])).unwrap();
        assert_eq!(steps.worst_month, 11);
        // 40 × 1.2 / 0.855 = 56.14 Ah against 5.38 × 1.1 = 5.918 Ah: 9.49 strings; 31.2 V of 14.5 V: three in series.
        assert!((steps.array_charge.get::<ampere_hour>() - 48.0 / 0.855).abs() < 1e-9);
        assert!((steps.strings_exact - 48.0 / 0.855 / 5.918).abs() < 1e-9);
        assert_eq!((steps.strings, steps.in_series, steps.modules), (10, 3, 30));
        assert!((steps.reached.value - 59.18 * 0.855 / 40.0).abs() < 1e-9);
        // Closed in winter, the cabin's worst month is April against its sun: 40/4.6 is more than 2/1.1.
        let mut seasonal = [40.0; 12];
        for month in [0, 1, 2, 9, 10, 11] {
            seasonal[month] = 2.0;
        }
        assert_eq!(array_need(&need(seasonal)).unwrap().worst_month, 8);
    }

    #[test]
    fn a_month_without_demand_needs_nothing() {
        let steps = array_need(&need([0.0; 12])).unwrap();
        assert_eq!((steps.strings, steps.modules), (0, 0));
        assert_eq!(steps.reached.value, 0.0);
        let steps = energy_need(&energy(0.0)).unwrap();
        assert_eq!((steps.strings, steps.modules), (0, 0));
    }

    /// Both forms of one plant: a module of 85 W that is held at 15.8 V stands for 5.38 A.
    #[test]
    fn energy_and_charge_ask_for_the_same_array() {
        let volts = 85.0 / 5.38;
        let mut by_charge = need([40.0; 12]);
        by_charge.module_hot_voltage = ElectricPotential::new::<volt>(volts);
        by_charge.string_voltage = ElectricPotential::new::<volt>(volts);
        let mut by_energy = energy(40.0 * volts);
        by_energy.controller_efficiency = q("1");
        by_energy.charge_efficiency = q("95 %");
        by_energy.in_series = 1;
        let (a, b) = (array_need(&by_charge).unwrap(), energy_need(&by_energy).unwrap());
        assert!((a.strings_exact - b.modules_exact).abs() < 1e-9);
        assert_eq!((a.modules, a.worst_month), (b.modules, b.worst_month));
        assert!((a.reached.value - b.reached.value).abs() < 1e-9);
    }

    #[test]
    fn whole_strings_only() {
        let steps = energy_need(&energy(1000.0)).unwrap();
        // 1200/0.7695/1.1/85 = 16.68: 17 modules make 6 strings of 3.
        assert!((steps.modules_exact - 1200.0 / 0.7695 / 1.1 / 85.0).abs() < 1e-9);
        assert_eq!((steps.strings, steps.modules), (6, 18));
        assert!((steps.array_power.get::<watt>() - 85.0 * steps.modules_exact).abs() < 1e-9);
    }

    #[test]
    fn a_quotient_that_is_whole_is_not_rounded_up_by_its_last_bit() {
        for strings in 1..=50_u32 {
            let mut exact = need([40.0; 12]);
            let current = 48.0 / 0.855 / 1.1 / f64::from(strings);
            exact.imp = ElectricCurrent::new::<ampere>(current);
            assert_eq!(array_need(&exact).unwrap().strings, strings);
        }
    }

    proptest! {
        /// What is reached is never below what was asked, and one string less would be.
        #[test]
        fn as_many_strings_as_needed_and_no_more(demand in prop::array::uniform12(0.1..500.0f64), imp in 0.3..18.0f64) {
            let asked = ArrayNeed { imp: ElectricCurrent::new::<ampere>(imp), ..need(demand) };
            let steps = array_need(&asked).unwrap();
            let each = steps.reached.value / f64::from(steps.strings);
            prop_assert!(steps.reached.value >= 1.2 * (1.0 - 1e-9));
            prop_assert!(steps.reached.value - each < 1.2);
            for (k, demand) in demand.iter().enumerate() {
                let reached = f64::from(steps.strings) * imp * SUN[k] * 0.855 / demand;
                prop_assert!(reached >= steps.reached.value * (1.0 - 1e-9), "month {k}");
            }
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(bits in prop::array::uniform6(any::<u64>())) {
            let [a, b, c, d, e, f] = bits.map(f64::from_bits);
            let mut asked = need([a; 12]);
            asked.imp = ElectricCurrent::new::<ampere>(b);
            asked.array_to_load = Ratio::new::<ratio>(c);
            asked.losses = Ratio::new::<ratio>(d);
            asked.module_hot_voltage = ElectricPotential::new::<volt>(e);
            asked.months[3].sun_hours = Time::new::<hour>(f);
            let _ = array_need(&asked);
            let mut asked = energy(a);
            asked.module_power = Power::new::<watt>(b);
            asked.months[3].sun_hours = Time::new::<hour>(f);
            let _ = energy_need(&asked);
        }
    }
}
