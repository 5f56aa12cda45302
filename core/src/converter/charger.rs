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

    /// Charge current that an engine set or a shore supply can drive through a charger.
    ///
    /// The least of what its watts, its volt-amperes and the charger allow.
    ///
    /// # Example
    /// 2 kW and 2.5 kVA, charger of 70 A, 85 %, power factor 0.6, at 28.8 V: the volt-amperes decide.
    /// ```
    /// use ampwright::{converter::supplied_charge_current, quantity::{parse, readable}};
    /// let charge = supplied_charge_current(
    ///     parse("2 kW")?, parse("2.5 kW")?, parse("70 A")?, parse("28.8 V")?, parse("85 %")?, parse("0.6")?,
    /// )?;
    /// assert_eq!(readable(charge.current).to_string(), "44.3 A");
    /// assert_eq!(readable(charge.input_power).to_string(), "1.5 kW");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn supplied_charge_current(
        /// Watts that the supply has left for it, after altitude, heat and other loads.
        real_power: Power in watt [>= 0.0],
        /// Volt-amperes that it has left; where only one figure is known, that.
        apparent_power: Power in watt [>= 0.0],
        /// Of the charger, at its DC terminals.
        greatest_current: ElectricCurrent in ampere [>= 0.0],
        /// At the charger's DC terminals, the highest of the charge.
        voltage: ElectricPotential in volt [> 0.0],
        /// Of the charger.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0],
        /// Of the charger.
        power_factor: Ratio in ratio [> 0.0 ..= 1.0] = 0.6,
    ) => SuppliedCharge {
        /// Into the bank.
        current: ElectricCurrent in ampere,
        /// That the supply delivers for it.
        input_power: Power in watt,
    }
    formula "I = min(I_max, η·min(P, λ·S)/U), P_in = U·I/η"
    source "energy balance; definition of the power factor"
    {
        let reactive = apparent_power * power_factor;
        let watts = if reactive < real_power { reactive } else { real_power };
        let driven = watts * efficiency / voltage;
        let current = if driven < greatest_current { driven } else { greatest_current };
        SuppliedCharge { current, input_power: voltage * current / efficiency }
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::electric_current::ampere;
    use uom::si::electric_potential::volt;
    use uom::si::power::watt;
    use uom::si::ratio::ratio;

    use super::*;

    proptest! {
        #[test]
        fn what_a_supply_drives_is_what_the_charger_takes(
            real in 0.0..5000.0f64, apparent in 0.0..6000.0f64, most in 0.0..200.0f64, u in 10.0..70.0f64,
            efficiency in 0.5..=1.0f64, factor in 0.5..=1.0f64,
        ) {
            let (voltage, efficiency, factor) =
                (ElectricPotential::new::<volt>(u), Ratio::new::<ratio>(efficiency), Ratio::new::<ratio>(factor));
            let (p, s, i) =
                (Power::new::<watt>(real), Power::new::<watt>(apparent), ElectricCurrent::new::<ampere>(most));
            let given = supplied_charge_current(p, s, i, voltage, efficiency, factor).unwrap();
            let taken = charger_input_power(given.current, voltage, efficiency, factor).unwrap();
            prop_assert!((taken.real - given.input_power).value.abs() <= 1e-9);
            // No limit is passed, and one of the three is reached.
            let parts = [
                (given.current.value, most), (taken.real.value, real), (taken.apparent.value, apparent),
            ];
            prop_assert!(parts.iter().all(|(x, limit)| *x <= limit * (1.0 + 1e-12)));
            prop_assert!(parts.iter().any(|(x, limit)| *x >= limit * (1.0 - 1e-12)));
        }
    }
}
