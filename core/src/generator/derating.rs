//! What an engine set still gives on a mountain and in heat, and what it must be rated for (R11).

use uom::si::length::foot;
use uom::si::ratio::ratio;
use uom::si::temperature_interval::kelvin;

use crate::catalogue::calculations;
use crate::quantity::{
    Length, Power, Ratio, RatioPerTemperature, TemperatureInterval, ThermodynamicTemperature,
};

/// Ambient above which an engine without turbocharger loses power, °C: common practice, no source.
#[allow(non_upper_case_globals)]
const FROM_degC: f64 = 25.0;

calculations! {
    /// Part of its power that an engine without turbocharger gives at an altitude.
    ///
    /// In proportion between whole thousands of feet; nothing is gained below the sea's level.
    ///
    /// # Example
    /// ```
    /// use ampwright::{generator::altitude_factor, quantity::{parse, readable}};
    /// assert_eq!(readable(altitude_factor(parse("4000 ft")?)?).to_string(), "0.88");
    /// assert_eq!(readable(altitude_factor(parse("8000 ft")?)?).to_string(), "0.7");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn altitude_factor(
        /// Above the sea's level.
        altitude: Length in meter [-500.0 ..= 5500.0],
    ) -> factor: Ratio in ratio
    formula "k = 1 − 0.03·h up to 6 thousand feet, 0.82 − 0.06·(h − 6) beyond; at most 1"
    source "a solar supplier's generator guide: 3 % for each 1000 ft to 6000 ft, 6 % for each 1000 ft beyond"
    {
        let thousands = altitude.get::<foot>() / 1000.0;
        let lost = 0.03 * thousands.clamp(0.0, 6.0) + 0.06 * (thousands - 6.0).max(0.0);
        Ratio::new::<ratio>(1.0 - lost)
    }

    /// Power that an engine set gives at an altitude and in heat.
    ///
    /// The maker's own derating goes before it. Each factor counts once.
    ///
    /// # Example
    /// 5 kW at 1500 m and 35 °C:
    /// ```
    /// use ampwright::{generator::generator_derated_power, quantity::{parse, readable}};
    /// let power = generator_derated_power(parse("5 kW")?, parse("1500 m")?, parse("35 degC")?, parse("0.4 %/K")?)?;
    /// assert_eq!(readable(power.power).to_string(), "4.09 kW");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn generator_derated_power(
        /// On its plate, without end: not its greatest for an hour.
        rated_power: Power in watt [> 0.0],
        /// Above the sea's level.
        altitude: Length in meter [-500.0 ..= 5500.0],
        /// Around the engine: in its box, not outside of it.
        ambient: ThermodynamicTemperature in degree_celsius [-60.0 ..= 80.0],
        /// Part lost for each kelvin above 25 °C.
        heat_loss: RatioPerTemperature in per_kelvin [0.0 ..= 0.01] = 0.004,
    ) => DeratedGenerator {
        /// For the altitude.
        altitude_factor: Ratio in ratio,
        /// For the heat.
        heat_factor: Ratio in ratio,
        /// What is left.
        power: Power in watt,
    }
    formula "P = P_r·k_h·k_θ, k_h as altitude_factor, k_θ = 1 − c·(θ − 25 °C) above 25 °C"
    source "altitude: a solar supplier's generator guide; heat: 2 % for each 5 K above 25 °C, common practice, no source"
    {
        let altitude_factor = altitude_factor::formula(altitude);
        let heat_factor = heat(ambient, heat_loss);
        DeratedGenerator { altitude_factor, heat_factor, power: rated_power * altitude_factor * heat_factor }
    }

    /// Rating that an engine set needs to charge a bank there.
    ///
    /// Other loads that run meanwhile come on top.
    ///
    /// # Example
    /// A bank takes 2544 W; charger 75 %, power factor 1, at 4000 ft:
    /// ```
    /// use ampwright::{generator::generator_needed_power, quantity::{parse, readable}};
    /// let needed = generator_needed_power(
    ///     parse("2544 W")?, parse("75 %")?, parse("1")?, parse("4000 ft")?, parse("20 degC")?, parse("0.4 %/K")?,
    /// )?;
    /// assert_eq!(readable(needed.real).to_string(), "3.85 kW");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn generator_needed_power(
        /// Into the bank.
        charge_power: Power in watt [>= 0.0],
        /// Of the charger.
        charger_efficiency: Ratio in ratio [> 0.0 ..= 1.0],
        /// Of the charger.
        power_factor: Ratio in ratio [> 0.0 ..= 1.0] = 0.6,
        /// Above the sea's level.
        altitude: Length in meter [-500.0 ..= 5500.0],
        /// Around the engine.
        ambient: ThermodynamicTemperature in degree_celsius [-60.0 ..= 80.0],
        /// Part lost for each kelvin above 25 °C.
        heat_loss: RatioPerTemperature in per_kelvin [0.0 ..= 0.01] = 0.004,
    ) => NeededGenerator {
        /// That the charger takes.
        charger_power: Power in watt,
        /// Rating in watts, at the sea's level and 25 °C.
        real: Power in watt,
        /// Rating in volt-amperes.
        apparent: Power in watt,
    }
    formula "P = P_charge/η, P_r = P/(k_h·k_θ), S_r = P_r/λ, factors as in generator_derated_power"
    source "energy balance; deratings as in generator_derated_power"
    {
        let charger_power = charge_power / charger_efficiency;
        let real = charger_power / (altitude_factor::formula(altitude) * heat(ambient, heat_loss));
        NeededGenerator { charger_power, real, apparent: real / power_factor }
    }
}

/// At least 0.45 within the ranges of its callers.
fn heat(ambient: ThermodynamicTemperature, heat_loss: RatioPerTemperature) -> Ratio {
    let above = (ambient.value - (FROM_degC + 273.15)).max(0.0);
    Ratio::new::<ratio>(1.0) - heat_loss * TemperatureInterval::new::<kelvin>(above)
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::power::watt;

    use super::*;
    use crate::quantity::parse;

    fn feet(h: f64) -> f64 {
        altitude_factor(Length::new::<foot>(h)).unwrap().value
    }

    #[test]
    fn the_two_slopes_meet_at_six_thousand_feet() {
        // By hand: 3 % for each of six thousands, then 6 %.
        for (h, factor) in
            [(-1000.0, 1.0), (0.0, 1.0), (1000.0, 0.97), (6000.0, 0.82), (7000.0, 0.76), (10_000.0, 0.58)]
        {
            assert!((feet(h) - factor).abs() < 1e-12, "{h} ft: {}", feet(h));
        }
        assert!(feet(18_000.0) > 0.0);
    }

    proptest! {
        #[test]
        fn needed_and_derated_power_undo_each_other(
            watts in 100.0..1e5f64, h in -500.0..5500.0f64, celsius in -40.0..60.0f64, loss in 0.0..0.01f64,
        ) {
            let altitude = Length::new::<uom::si::length::meter>(h);
            let ambient = ThermodynamicTemperature::new::<uom::si::thermodynamic_temperature::degree_celsius>(celsius);
            let loss = RatioPerTemperature::new::<uom::si::temperature_coefficient::per_kelvin>(loss);
            let one = Ratio::new::<ratio>(1.0);
            let needed =
                generator_needed_power(Power::new::<watt>(watts), one, one, altitude, ambient, loss).unwrap();
            let given = generator_derated_power(needed.real, altitude, ambient, loss).unwrap();
            prop_assert!((given.power.value / watts - 1.0).abs() < 1e-12);
            // Neither mountain nor heat adds anything, and something is always left.
            prop_assert!(given.power <= needed.real && given.power.value > 0.0);
            prop_assert!(given.altitude_factor.value <= 1.0 && given.heat_factor.value <= 1.0);
        }

        #[test]
        fn higher_and_hotter_never_give_more(a in -500.0..5500.0f64, b in -500.0..5500.0f64) {
            let at = |h: f64| altitude_factor(Length::new::<uom::si::length::meter>(h)).unwrap().value;
            prop_assert!(at(a.max(b)) <= at(a.min(b)));
        }
    }

    #[test]
    fn heat_counts_from_25_degrees_on() {
        let at = |ambient: &str| {
            let level = parse("0 m").unwrap();
            generator_derated_power(
                parse("1 kW").unwrap(),
                level,
                parse(ambient).unwrap(),
                parse("0.4 %/K").unwrap(),
            )
            .unwrap()
            .power
            .value
        };
        assert!((at("25 degC") - 1000.0).abs() < 1e-9 && (at("-30 degC") - 1000.0).abs() < 1e-9);
        assert!((at("30 degC") - 980.0).abs() < 1e-9);
    }

    #[test]
    fn beyond_the_ranges_nothing_is_answered() {
        for bad in [f64::NAN, f64::INFINITY, 5501.0, -501.0] {
            assert!(altitude_factor(Length::new::<uom::si::length::meter>(bad)).is_err(), "{bad}");
        }
    }
}
