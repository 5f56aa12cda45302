//! One line and one load that takes constant power: the closed form.

use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::law::{constant_power_current, no_solution, power_in_resistance};
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Power};

calculations! {
    /// What reaches a constant-power load behind a resistance, and what is lost on the way.
    ///
    /// Of the two solutions the stable one, with the higher voltage.
    ///
    /// # Example
    /// 1 kW through 10 mΩ from 21 V:
    /// ```
    /// use ampwright::{network::line_delivery, quantity::{parse, readable}};
    /// let run = line_delivery(parse("21 V")?, parse("10 mohm")?, parse("1 kW")?)?;
    /// assert_eq!(readable(run.voltage).to_string(), "20.5 V");
    /// assert_eq!(readable(run.loss).to_string(), "23.8 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn line_delivery(
        /// At the line's beginning.
        source: ElectricPotential in volt [> 0.0],
        /// Of the loop, joints included.
        resistance: ElectricalResistance in ohm [>= 0.0],
        /// Taken at the load's terminals.
        power: Power in watt [>= 0.0],
    ) => Delivery {
        /// Current in the line.
        current: ElectricCurrent in ampere,
        /// Voltage at the load.
        voltage: ElectricPotential in volt,
        /// Power lost in the line.
        loss: Power in watt,
    }
    where (4.0 * resistance * power <= source * source) => (no_solution(source, resistance, power))
    formula "U = R·I + P/I for the smaller current, P_loss = I²·R"
    source "as `constant_power_current`; Joule's law"
    {
        let point = constant_power_current::formula(source, resistance, power);
        Delivery {
            current: point.current,
            voltage: point.load_voltage,
            loss: power_in_resistance::formula(point.current, resistance),
        }
    }
}

/// Checks a number that may be zero.
pub(super) fn at_least(name: &'static str, value: f64, unit: &'static str, least: f64) -> Result<(), Error> {
    if value >= least && value.is_finite() {
        Ok(())
    } else {
        Err(Error::OutOfRange { name, value, unit, allowed: Allowed::AtLeast(least) })
    }
}
