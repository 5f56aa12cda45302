//! Ohm's law and the power of a current.

use crate::catalogue::calculations;
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Power};

calculations! {
    /// Voltage across a resistance.
    ///
    /// # Example
    /// 25 A through 2 mΩ of joints:
    /// ```
    /// use ampwright::{law::ohm_voltage, quantity::{parse, readable}};
    /// let result = ohm_voltage(parse("25 A")?, parse("2 mohm")?)?;
    /// assert_eq!(readable(result).to_string(), "50 mV");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn ohm_voltage(
        /// The sign gives the direction.
        current: ElectricCurrent in ampere [any],
        /// Of the conductor or part.
        resistance: ElectricalResistance in ohm [>= 0.0],
    ) -> voltage: ElectricPotential in volt
    formula "U = I·R"
    source "Ohm's law"
    { current * resistance }

    /// Current through a resistance.
    ///
    /// # Example
    /// A 12 V lamp of 7.2 Ω, hot:
    /// ```
    /// use ampwright::{law::ohm_current, quantity::{parse, readable}};
    /// let result = ohm_current(parse("12 V")?, parse("7.2 ohm")?)?;
    /// assert_eq!(readable(result).to_string(), "1.667 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn ohm_current(
        /// Across the resistance.
        voltage: ElectricPotential in volt [any],
        /// Of the conductor or part.
        resistance: ElectricalResistance in ohm [> 0.0],
    ) -> current: ElectricCurrent in ampere
    formula "I = U/R"
    source "Ohm's law"
    { voltage / resistance }

    /// Resistance from a measured voltage and current.
    ///
    /// # Example
    /// A crimp that drops 42 mV at 60 A:
    /// ```
    /// use ampwright::{law::ohm_resistance, quantity::{parse, readable}};
    /// let result = ohm_resistance(parse("42 mV")?, parse("60 A")?)?;
    /// assert_eq!(readable(result).to_string(), "700 µΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn ohm_resistance(
        /// Across the part.
        voltage: ElectricPotential in volt [>= 0.0],
        /// Through the part, in the same direction.
        current: ElectricCurrent in ampere [> 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "R = U/I"
    source "Ohm's law"
    { voltage / current }

    /// Power of a current at a voltage.
    ///
    /// # Example
    /// An array at 36 V and 8.5 A:
    /// ```
    /// use ampwright::{law::power, quantity::{parse, readable}};
    /// let result = power(parse("36 V")?, parse("8.5 A")?)?;
    /// assert_eq!(readable(result).to_string(), "306 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn power(
        /// Across the part.
        voltage: ElectricPotential in volt [any],
        /// Through the part; power is taken up where both have one sign.
        current: ElectricCurrent in ampere [any],
    ) -> power: Power in watt
    formula "P = U·I"
    source "definition of electric power"
    { voltage * current }

    /// Current that a power takes at a voltage, losses left out.
    ///
    /// # Example
    /// 800 W at 12 V:
    /// ```
    /// use ampwright::{law::power_current, quantity::{parse, readable}};
    /// let result = power_current(parse("800 W")?, parse("12 V")?)?;
    /// assert_eq!(readable(result).to_string(), "66.7 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn power_current(
        /// Taken at the terminals.
        power: Power in watt [>= 0.0],
        /// At the terminals.
        voltage: ElectricPotential in volt [> 0.0],
    ) -> current: ElectricCurrent in ampere
    formula "I = P/U"
    source "definition of electric power"
    { power / voltage }

    /// Power that a current turns into heat in a resistance.
    ///
    /// # Example
    /// 60 A through a poor joint of 5 mΩ:
    /// ```
    /// use ampwright::{law::power_in_resistance, quantity::{parse, readable}};
    /// let result = power_in_resistance(parse("60 A")?, parse("5 mohm")?)?;
    /// assert_eq!(readable(result).to_string(), "18 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn power_in_resistance(
        /// Through the resistance.
        current: ElectricCurrent in ampere [any],
        /// Of the conductor or part.
        resistance: ElectricalResistance in ohm [>= 0.0],
    ) -> power: Power in watt
    formula "P = I²·R"
    source "Joule's law"
    { current * current * resistance }

    /// Current that a source drives into a short circuit.
    ///
    /// # Example
    /// A 12.8 V bank of 3 mΩ with 5 mΩ of cable:
    /// ```
    /// use ampwright::{law::short_circuit_current, quantity::{parse, readable}};
    /// let result = short_circuit_current(parse("12.8 V")?, parse("8 mohm")?)?;
    /// assert_eq!(readable(result).to_string(), "1.6 kA");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn short_circuit_current(
        /// Of the source without load.
        open_circuit_voltage: ElectricPotential in volt [> 0.0],
        /// Of the whole loop: source, conductors and joints.
        loop_resistance: ElectricalResistance in ohm [> 0.0],
    ) -> current: ElectricCurrent in ampere
    formula "I = U/R"
    source "Ohm's law"
    { open_circuit_voltage / loop_resistance }
}
