//! Inrush into the capacitors at a converter's input, and how to charge them before the switch closes (R16).

use crate::catalogue::calculations;
use crate::quantity::{
    Capacitance, ElectricCurrent, ElectricPotential, ElectricalResistance, Energy, Power, Ratio, Time,
};

calculations! {
    /// Inrush when a switch closes on empty capacitors.
    ///
    /// Inductance is left out, so the peak is a bound that no real circuit quite reaches. The resistance is everything in
    /// the loop: bank, cables, joints, the capacitors' own.
    ///
    /// # Example
    /// 10 mF at 26 V through 10 mΩ:
    /// ```
    /// use ampwright::{converter::inrush_current, quantity::{parse, readable}};
    /// let inrush = inrush_current(parse("26 V")?, parse("10 mohm")?, parse("10 mF")?)?;
    /// assert_eq!(readable(inrush.peak).to_string(), "2.6 kA");
    /// assert_eq!(readable(inrush.time_constant).to_string(), "0.1 ms");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn inrush_current(
        /// Across the switch before it closes.
        voltage: ElectricPotential in volt [> 0.0],
        /// Of the loop.
        loop_resistance: ElectricalResistance in ohm [> 0.0],
        /// Of all capacitors at the input.
        capacitance: Capacitance in microfarad [> 0.0],
    ) => Inrush {
        /// At the first moment.
        peak: ElectricCurrent in ampere,
        /// In which the current falls to 37 %.
        time_constant: Time in second,
        /// That the capacitors take; as much again becomes heat in the loop, whatever its resistance.
        energy: Energy in watt_hour,
    }
    formula "I = U/R, τ = R·C, W = C·U²/2"
    source "charge of a capacitor through a resistance"
    {
        Inrush {
            peak: voltage / loop_resistance,
            time_constant: loop_resistance * capacitance,
            energy: capacitance * voltage * voltage * 0.5,
        }
    }

    /// Resistor that charges a converter's capacitors before its switch closes.
    ///
    /// # Example
    /// 10 mF at 26 V within 2 s, until 5 % of the voltage are left across the switch:
    /// ```
    /// use ampwright::{converter::precharge_resistance, quantity::{parse, readable}};
    /// let resistor = precharge_resistance(parse("26 V")?, parse("10 mF")?, parse("2 s")?, parse("5 %")?)?;
    /// assert_eq!(readable(resistor.resistance).to_string(), "66.8 Ω");
    /// assert_eq!(readable(resistor.peak_power).to_string(), "10.13 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn precharge_resistance(
        /// Across the switch before.
        voltage: ElectricPotential in volt [> 0.0],
        /// Of all capacitors at the input.
        capacitance: Capacitance in microfarad [> 0.0],
        /// Until the switch may close.
        duration: Time in second [> 0.0],
        /// Part of the voltage that is then left across it.
        remaining: Ratio in ratio [0.0001 ..= 0.5] = 0.05,
    ) => Precharge {
        /// At most; a smaller one is quicker and gets hotter.
        resistance: ElectricalResistance in ohm,
        /// At the first moment.
        peak_current: ElectricCurrent in ampere,
        /// At the first moment; where the converter is shorted it stays, until something opens.
        peak_power: Power in watt,
        /// That becomes heat in the resistor at each start.
        energy: Energy in watt_hour,
    }
    formula "R = t/(C·ln(1/r)), I = U/R, P = U²/R, W = C·U²·(1 − r²)/2"
    source "charge of a capacitor through a resistance"
    {
        let resistance = duration / (capacitance * libm::log(1.0 / remaining.value));
        Precharge {
            resistance,
            peak_current: voltage / resistance,
            peak_power: voltage * voltage / resistance,
            energy: capacitance * voltage * voltage * (0.5 * (1.0 - remaining.value * remaining.value)),
        }
    }

    /// Time until a pre-charge resistor has charged a converter's capacitors.
    ///
    /// # Example
    /// ```
    /// use ampwright::{converter::precharge_time, quantity::{parse, readable}};
    /// let time = precharge_time(parse("100 ohm")?, parse("10 mF")?, parse("5 %")?)?;
    /// assert_eq!(readable(time).to_string(), "3 s");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn precharge_time(
        /// Of the resistor.
        resistance: ElectricalResistance in ohm [> 0.0],
        /// Of all capacitors at the input.
        capacitance: Capacitance in microfarad [> 0.0],
        /// Part of the voltage that is left across the switch when it closes.
        remaining: Ratio in ratio [0.0001 ..= 0.5] = 0.05,
    ) -> duration: Time in second
    formula "t = R·C·ln(1/r)"
    source "charge of a capacitor through a resistance"
    { resistance * capacitance * libm::log(1.0 / remaining.value) }

    /// Peak that is left when the switch closes after a pre-charge.
    ///
    /// # Example
    /// 5 % of 26 V across 10 mΩ:
    /// ```
    /// use ampwright::{converter::closing_current, quantity::{parse, readable}};
    /// let peak = closing_current(parse("26 V")?, parse("10 mohm")?, parse("5 %")?)?;
    /// assert_eq!(readable(peak).to_string(), "130 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn closing_current(
        /// Of the source.
        voltage: ElectricPotential in volt [> 0.0],
        /// Of the loop without the resistor.
        loop_resistance: ElectricalResistance in ohm [> 0.0],
        /// Part of the voltage that is left across the switch.
        remaining: Ratio in ratio [0.0 ..= 1.0] = 0.05,
    ) -> peak: ElectricCurrent in ampere
    formula "I = r·U/R"
    source "Ohm's law"
    { voltage * remaining / loop_resistance }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::capacitance::microfarad;
    use uom::si::electric_potential::volt;
    use uom::si::electrical_resistance::ohm;
    use uom::si::energy::joule;
    use uom::si::ratio::ratio;
    use uom::si::time::second;

    use super::*;

    /// Midpoint steps through dU/dt = (U₀ − U)/(R·C): time until the rest is left, heat in the resistor.
    fn charged(u0: f64, r: f64, c: f64, remaining: f64) -> (f64, f64) {
        let step = 1e-4 * r * c;
        let (mut u, mut time, mut heat) = (0.0, 0.0, 0.0);
        while u0 - u > remaining * u0 {
            let middle = u + 0.5 * step * (u0 - u) / (r * c);
            let current = (u0 - middle) / r;
            heat += current * current * r * step;
            u += step * current / c;
            time += step;
        }
        (time, heat)
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(16))]
        #[test]
        fn closed_forms_are_the_integral(
            u0 in 5.0..800.0f64, r in 0.5..500.0f64, uf in 100.0..50_000.0f64, remaining in 0.01..0.5f64,
        ) {
            let (u, c) = (ElectricPotential::new::<volt>(u0), Capacitance::new::<microfarad>(uf));
            let (time, heat) = charged(u0, r, uf * 1e-6, remaining);
            let part = Ratio::new::<ratio>(remaining);
            let ours = precharge_time(ElectricalResistance::new::<ohm>(r), c, part).unwrap();
            // One step of 1e-4 time constants.
            prop_assert!((ours.value - time).abs() <= 1.1e-4 * r * uf * 1e-6);
            // The resistor for that time is the one it took.
            let resistor = precharge_resistance(u, c, ours, part).unwrap();
            prop_assert!((resistor.resistance.value / r - 1.0).abs() < 1e-12);
            prop_assert!((resistor.energy.get::<joule>() / heat - 1.0).abs() < 1e-3);
            prop_assert!((resistor.peak_power.value / (u0 * u0 / r) - 1.0).abs() < 1e-12);
            // What is left across the switch drives what is left of the peak.
            let inrush = inrush_current(u, ElectricalResistance::new::<ohm>(0.01), c).unwrap();
            let closing = closing_current(u, ElectricalResistance::new::<ohm>(0.01), part).unwrap();
            prop_assert!((closing.value / (inrush.peak.value * remaining) - 1.0).abs() < 1e-12);
        }
    }

    #[test]
    fn nothing_out_of_range_passes() {
        let (u, c) = (ElectricPotential::new::<volt>(26.0), Capacitance::new::<microfarad>(10_000.0));
        let (t, part) = (Time::new::<second>(2.0), Ratio::new::<ratio>(0.05));
        for bad in [f64::NAN, f64::INFINITY, 0.0, -1.0] {
            assert!(precharge_resistance(ElectricPotential::new::<volt>(bad), c, t, part).is_err(), "{bad}");
            assert!(precharge_resistance(u, Capacitance::new::<microfarad>(bad), t, part).is_err(), "{bad}");
            assert!(precharge_resistance(u, c, Time::new::<second>(bad), part).is_err(), "{bad}");
            assert!(precharge_resistance(u, c, t, Ratio::new::<ratio>(bad)).is_err(), "{bad}");
            assert!(inrush_current(u, ElectricalResistance::new::<ohm>(bad), c).is_err(), "{bad}");
        }
    }
}
