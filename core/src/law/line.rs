//! Power through a line: what a constant-power load draws, and the most that can pass.

use uom::si::electric_potential::volt;

use crate::catalogue::calculations;
use crate::error::Error;
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Power, Ratio, sqrt};

calculations! {
    /// Direct current into an inverter or converter.
    ///
    /// Design takes the lowest voltage at which it still runs, and the efficiency there (R3).
    ///
    /// # Example
    /// 800 W through 85 % at 10.5 V:
    /// ```
    /// use ampwright::{law::inverter_input_current, quantity::{parse, readable}};
    /// let result = inverter_input_current(parse("800 W")?, parse("10.5 V")?, parse("85 %")?)?;
    /// assert_eq!(readable(result).to_string(), "89.6 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn inverter_input_current(
        /// Delivered.
        output_power: Power in watt [>= 0.0],
        /// At the input terminals.
        input_voltage: ElectricPotential in volt [> 0.0],
        /// At this power and voltage.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> current: ElectricCurrent in ampere
    formula "I = P/(η·U)"
    source "energy balance"
    { output_power / efficiency / input_voltage }

    /// Current and voltage of a constant-power load at the end of a line.
    ///
    /// Of the two solutions the one with the higher voltage, which is the stable one.
    ///
    /// # Example
    /// 1 kW through 10 mΩ from 21 V:
    /// ```
    /// use ampwright::{law::constant_power_current, quantity::{parse, readable}};
    /// let result = constant_power_current(parse("21 V")?, parse("10 mohm")?, parse("1 kW")?)?;
    /// assert_eq!(readable(result.current).to_string(), "48.8 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn constant_power_current(
        /// At the source.
        source_voltage: ElectricPotential in volt [> 0.0],
        /// Both conductors and everything between.
        loop_resistance: ElectricalResistance in ohm [>= 0.0],
        /// Taken by the load.
        power: Power in watt [>= 0.0],
    ) => ConstantPowerPoint {
        /// Through the line.
        current: ElectricCurrent in ampere,
        /// At the load.
        load_voltage: ElectricPotential in volt,
    }
    where (4.0 * loop_resistance * power <= source_voltage * source_voltage)
        => (no_solution(source_voltage, loop_resistance, power))
    formula "I = 2·P/(U + √(U² − 4·R·P)), U_L = U − R·I"
    source "P = (U − R·I)·I solved for the smaller current, written without cancellation"
    {
        let root = sqrt((source_voltage * source_voltage - 4.0 * loop_resistance * power).value);
        let twice_at_load = source_voltage + ElectricPotential::new::<volt>(root);
        ConstantPowerPoint { current: 2.0 * power / twice_at_load, load_voltage: 0.5 * twice_at_load }
    }

    /// The most power that a line can deliver to its end.
    ///
    /// Half the voltage is left there and as much is lost as delivered: a limit of physics, no working point.
    ///
    /// # Example
    /// 21 V behind 0.1034 Ω:
    /// ```
    /// use ampwright::{law::max_power_through, quantity::{parse, readable}};
    /// let result = max_power_through(parse("21 V")?, parse("0.1034 ohm")?)?;
    /// assert_eq!(readable(result).to_string(), "1.066 kW");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn max_power_through(
        /// At the source.
        source_voltage: ElectricPotential in volt [> 0.0],
        /// Both conductors and everything between.
        loop_resistance: ElectricalResistance in ohm [> 0.0],
    ) -> power: Power in watt
    formula "P = U²/(4·R)"
    source "greatest value of (U − R·I)·I"
    { source_voltage * source_voltage / (4.0 * loop_resistance) }
}

/// That a line cannot carry a power, with the most it can.
pub(crate) fn no_solution(
    source: ElectricPotential,
    resistance: ElectricalResistance,
    power: Power,
) -> Error {
    Error::NoSolution {
        asked_W: power.value,
        source_V: source.value,
        loop_ohm: resistance.value,
        most_W: max_power_through::formula(source, resistance).value,
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use proptest::prelude::*;

    use super::*;
    use crate::quantity::parse;

    proptest! {
        #[test]
        fn the_point_balances_and_is_the_upper_one(u in 1.0..100.0f64, r in 1e-4..1.0f64, part in 0.0..1.0f64) {
            let p = part * u * u / (4.0 * r);
            let point = constant_power_current(
                ElectricPotential::new::<volt>(u),
                ElectricalResistance::new::<uom::si::electrical_resistance::ohm>(r),
                Power::new::<uom::si::power::watt>(p),
            ).unwrap();
            let (i, v) = (point.current.value, point.load_voltage.value);
            prop_assert!((i * v - p).abs() <= 1e-12 * p);
            prop_assert!((u - r * i - v).abs() <= 1e-7 * u);
            prop_assert!(v >= 0.5 * u);
        }
    }

    #[test]
    fn without_resistance_it_is_the_plain_quotient() {
        let point =
            constant_power_current(parse("12 V").unwrap(), parse("0 ohm").unwrap(), parse("800 W").unwrap())
                .unwrap();
        assert_eq!(point.current.value, 800.0 / 12.0);
        assert_eq!(point.load_voltage.value, 12.0);
    }

    #[test]
    fn beyond_the_limit_the_error_says_how_much_passes() {
        let (u, r) = (parse("21 V").unwrap(), parse("0.1034 ohm").unwrap());
        assert!(constant_power_current(u, r, max_power_through(u, r).unwrap()).is_ok());
        assert_eq!(
            constant_power_current(u, r, parse("1200 W").unwrap()).unwrap_err().to_string(),
            "the line cannot deliver 1200 W from 21.00 V through 0.10340 ohm; the most is 1066 W (V²/4R); use a larger \
             cross-section, a shorter run or a higher voltage"
        );
    }
}
