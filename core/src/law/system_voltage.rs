//! Why a higher system voltage pays: one load and one run, compared at 12, 24 and 48 V.

use uom::si::{electric_current::ampere, electric_potential::volt, f64::Mass};

use super::{power_current, required_cross_section};
use crate::error::{Allowed, Error};
use crate::quantity::{
    Area, ElectricCurrent, ElectricPotential, ElectricalResistivity, Length, Power, Ratio,
};

/// Currents below this are wired with ordinary cable, lugs and devices; above it a higher system voltage is due.
///
/// Rule of thumb: common practice, no source.
pub const PRACTICAL_CURRENT_A: f64 = 100.0;

/// A device is rated for at least this many times the current that flows for hours; common practice, no source.
///
/// What the rules ask belongs to [`crate::rules`].
pub const DEVICE_FACTOR: f64 = 1.25;

/// Density of annealed copper, kg/m³: IEC 60028 (recalled).
const COPPER_DENSITY: f64 = 8890.0;

/// Nominal system voltages that are compared.
const VOLTAGES: [f64; 3] = [12.0, 24.0, 48.0];

/// What is compared.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SystemVoltageTask<'a> {
    /// All loads together, at the end of the run.
    pub load: Power,
    /// The route, not the sum of both conductors.
    pub one_way: Length,
    /// Resistivity of the conductors at operating temperature.
    pub resistivity: ElectricalResistivity,
    /// The most that may be dropped, as a part of the nominal voltage.
    pub greatest_drop: Ratio,
    /// Price of a kilogram of copper, in any currency.
    pub price_per_kg: f64,
    /// Standard device ratings, smallest first.
    pub ratings: &'a [ElectricCurrent],
}

/// The task at one voltage.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SystemVoltageRow {
    /// Nominal voltage.
    pub voltage: ElectricPotential,
    /// Current at nominal voltage.
    pub current: ElectricCurrent,
    /// Cross-section that keeps to the drop; no standard size.
    pub cross_section: Area,
    /// Copper in both conductors.
    pub copper: Mass,
    /// Its price, in the currency of the task.
    pub cost: f64,
    /// Power lost in the run at that cross-section.
    pub loss: Power,
    /// Least rating of at least [`DEVICE_FACTOR`] times the current; `None` where there is none.
    pub device: Option<ElectricCurrent>,
    /// Whether the current is below [`PRACTICAL_CURRENT_A`].
    pub is_practical: bool,
}

/// Compares 12, 24 and 48 V for one load at the end of one run.
///
/// At equal relative drop, twice the voltage asks for a quarter of the copper and loses as much power.
///
/// # Errors
/// [`Error::OutOfRange`] where the load is negative, the length, resistivity or price is not above 0, the drop is not
/// above 0 and below 1, or anything is not finite.
///
/// # Example
/// 800 W over 5 m, 3 % drop, copper at 70 °C:
/// ```
/// use ampwright::{law::{SystemVoltageTask, system_voltage_rows}, quantity::{parse, readable}};
/// let rows = system_voltage_rows(&SystemVoltageTask {
///     load: parse("800 W")?,
///     one_way: parse("5 m")?,
///     resistivity: parse("0.0206 ohm.mm2/m")?,
///     greatest_drop: parse("3 %")?,
///     price_per_kg: 12.0,
///     ratings: &[parse("25 A")?, parse("50 A")?, parse("100 A")?],
/// })?;
/// let printed = rows.map(|row| (readable(row.current).to_string(), readable(row.cross_section).to_string()));
/// assert_eq!(printed[0], ("66.7 A".into(), "38.1 mm2".into()));
/// assert_eq!(printed[1], ("33.3 A".into(), "9.54 mm2".into()));
/// assert_eq!(rows[1].device, Some(parse("50 A")?));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn system_voltage_rows(task: &SystemVoltageTask<'_>) -> Result<[SystemVoltageRow; 3], Error> {
    let drop = task.greatest_drop.value;
    if !(drop > 0.0 && drop < 1.0) {
        let allowed = Allowed::Words("greater than 0 and below 1");
        return Err(Error::OutOfRange { name: "greatest_drop", value: drop, unit: "", allowed });
    }
    if !(task.price_per_kg > 0.0 && task.price_per_kg.is_finite()) {
        let allowed = Allowed::Above(0.0);
        return Err(Error::OutOfRange { name: "price_per_kg", value: task.price_per_kg, unit: "", allowed });
    }
    let [a, b, c] = VOLTAGES.map(|voltage| row(task, ElectricPotential::new::<volt>(voltage)));
    Ok([a?, b?, c?])
}

fn row(task: &SystemVoltageTask<'_>, voltage: ElectricPotential) -> Result<SystemVoltageRow, Error> {
    let current = power_current(task.load, voltage)?;
    let drop = voltage * task.greatest_drop;
    let cross_section = required_cross_section(task.one_way, task.resistivity, current, drop)?;
    let density =
        uom::si::f64::MassDensity::new::<uom::si::mass_density::kilogram_per_cubic_meter>(COPPER_DENSITY);
    let copper = 2.0 * task.one_way * cross_section * density;
    Ok(SystemVoltageRow {
        voltage,
        current,
        cross_section,
        copper,
        cost: copper.value * task.price_per_kg,
        loss: current * drop,
        device: task.ratings.iter().copied().find(|&rating| rating >= DEVICE_FACTOR * current),
        is_practical: current.get::<ampere>() < PRACTICAL_CURRENT_A,
    })
}

#[cfg(test)]
mod tests {
    use uom::si::ratio::ratio;

    use super::*;
    use crate::quantity::parse;

    fn task<'a>() -> SystemVoltageTask<'a> {
        SystemVoltageTask {
            load: parse("1200 W").unwrap(),
            one_way: parse("8 m").unwrap(),
            resistivity: parse("0.0206 ohm.mm2/m").unwrap(),
            greatest_drop: parse("3 %").unwrap(),
            price_per_kg: 10.0,
            ratings: &[],
        }
    }

    #[test]
    fn twice_the_voltage_takes_a_quarter_of_the_copper_at_the_same_loss() {
        let [low, middle, high] = system_voltage_rows(&task()).unwrap();
        for (a, b) in [(low, middle), (middle, high)] {
            assert!((a.copper.value / b.copper.value - 4.0).abs() < 1e-12);
            assert!((a.cost / b.cost - 4.0).abs() < 1e-12);
            assert!((a.loss.value / b.loss.value - 1.0).abs() < 1e-12);
        }
        // 8 m there and back of the area at 8.89 kg/dm³.
        let by_hand = 16.0 * low.cross_section.value * 8890.0;
        assert!((low.copper.value - by_hand).abs() < 1e-12);
        // Exactly at the limit is not below it.
        assert!(!low.is_practical && middle.is_practical);
        assert_eq!(low.device, None);
    }

    #[test]
    fn bad_limits_are_refused() {
        for bad in [0.0, 1.0, -0.1, f64::NAN, f64::INFINITY] {
            assert!(
                system_voltage_rows(&SystemVoltageTask { greatest_drop: Ratio::new::<ratio>(bad), ..task() })
                    .is_err()
            );
        }
        for bad in [0.0, -1.0, f64::NAN, f64::INFINITY] {
            assert!(system_voltage_rows(&SystemVoltageTask { price_per_kg: bad, ..task() }).is_err());
        }
    }
}
