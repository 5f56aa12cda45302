//! The DC feed of an inverter: current at the lowest voltage, not at nominal (R3).

use crate::catalogue::calculations;
use crate::law::{inverter_input_current, power_current};
use crate::quantity::{ElectricCurrent, ElectricPotential, Power, Ratio};

calculations! {
    /// What an inverter draws on its DC side at full load.
    ///
    /// # Example
    /// 800 W at 85 %, 12 V nominal, cut-off at 10.5 V:
    /// ```
    /// use ampwright::{circuit::inverter_feed, quantity::{parse, readable}};
    /// let feed = inverter_feed(parse("800 W")?, parse("85 %")?, parse("12 V")?, parse("10.5 V")?)?;
    /// assert_eq!(readable(feed.nominal).to_string(), "66.7 A");
    /// assert_eq!(readable(feed.design).to_string(), "89.6 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn inverter_feed(
        /// AC side, full load.
        power: Power in watt [>= 0.0],
        /// At full power and lowest voltage.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0],
        /// Of the system.
        nominal_voltage: ElectricPotential in volt [> 0.0],
        /// At its own terminals, the lowest at which it still runs.
        lowest_voltage: ElectricPotential in volt [> 0.0],
    ) => InverterFeed {
        /// Power at its DC terminals.
        dc_power: Power in watt,
        /// Current by power over nominal voltage, no losses: the figure people carry in their heads; never for design.
        nominal: ElectricCurrent in ampere,
        /// Current at the lowest voltage and the efficiency there: the design current.
        design: ElectricCurrent in ampere,
    }
    formula "P_DC = P/η, I_nominal = P/U_nominal, I_design = P/(η·U_lowest)"
    source "energy balance"
    {
        InverterFeed {
            dc_power: power / efficiency,
            nominal: power_current::formula(power, nominal_voltage),
            design: inverter_input_current::formula(power, lowest_voltage, efficiency),
        }
    }
}
