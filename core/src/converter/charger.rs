//! Chargers that an engine set or the shore feeds: what they take on the AC side.

use crate::catalogue::calculations;
use crate::quantity::{ElectricCurrent, ElectricPotential, Power, Ratio};

calculations! {
    /// What a battery charger takes on its AC side.
    ///
    /// At the highest charge voltage and full current, which is when a small engine set stalls. A charger without
    /// correction has a power factor of 0.6 to 0.7 (common practice, no source): the set must be rated for the
    /// volt-amperes.
    ///
    /// # Example
    /// 50 A at 28.8 V, 85 %, power factor 0.7:
    /// ```
    /// use ampwright::{converter::charger_input_power, quantity::{parse, readable}};
    /// let input = charger_input_power(parse("50 A")?, parse("28.8 V")?, parse("85 %")?, parse("0.7")?)?;
    /// assert_eq!(readable(input.real).to_string(), "1.694 kW");
    /// assert_eq!(readable(input.apparent).to_string(), "2.42 kW"); // kVA
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn charger_input_power(
        /// Into the bank.
        current: ElectricCurrent in ampere [>= 0.0],
        /// At the charger's DC terminals, the highest of the charge.
        voltage: ElectricPotential in volt [> 0.0],
        /// Of the charger.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0],
        /// Of the charger.
        power_factor: Ratio in ratio [> 0.0 ..= 1.0] = 0.6,
    ) => ChargerInput {
        /// Watts.
        real: Power in watt,
        /// Volt-amperes.
        apparent: Power in watt,
    }
    formula "P = U·I/η, S = P/λ"
    source "energy balance; definition of the power factor"
    {
        let real = voltage * current / efficiency;
        ChargerInput { real, apparent: real / power_factor }
    }
}
