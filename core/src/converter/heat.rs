//! What a converter still delivers in heat, as its maker states it.

use uom::si::ratio::ratio;

use crate::catalogue::calculations;
use crate::quantity::{Ratio, RatioPerTemperature, TemperatureInterval, ThermodynamicTemperature};

/// Loss of continuous power in heat, as the maker states it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct HeatDerating {
    /// Full power up to here.
    pub from: ThermodynamicTemperature,
    /// Part of full power that is lost for each kelvin above.
    pub per_kelvin: RatioPerTemperature,
    /// Above this it does not run.
    pub greatest: ThermodynamicTemperature,
}

calculations! {
    /// Part of its power that a converter still delivers in heat, by its maker's figures.
    ///
    /// # Example
    /// Full power up to 25 °C, 1 % less for each kelvin above, off above 60 °C; at 40 °C:
    /// ```
    /// use ampwright::{converter::heat_factor, quantity::{parse, readable}};
    /// let at = |ambient| heat_factor(parse(ambient)?, parse("25 degC")?, parse("1 %/K")?, parse("60 degC")?);
    /// assert_eq!(readable(at("40 degC")?).to_string(), "0.85");
    /// assert_eq!(readable(at("61 degC")?).to_string(), "0");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn heat_factor(
        /// Around the converter: in the box, not outside of it.
        ambient: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
        /// Full power up to here.
        from: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
        /// Part lost for each kelvin above.
        per_kelvin: RatioPerTemperature in per_kelvin [0.0 ..= 1.0],
        /// Above this it is off.
        greatest: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
    ) -> factor: Ratio in ratio
    where (from <= greatest) from in degree_celsius: "it must not be above greatest"
    formula "k = 1 − c·(θ − θ₀) above θ₀, at least 0; 1 below; 0 above the greatest"
    source "form in which makers state it"
    {
        let above = (ambient.value - from.value).max(0.0);
        let lost = per_kelvin * TemperatureInterval::new::<uom::si::temperature_interval::kelvin>(above);
        let runs: f64 = if ambient <= greatest { 1.0 } else { 0.0 };
        Ratio::new::<ratio>((1.0f64 - lost.value).clamp(0.0, 1.0) * runs)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::parse;

    #[test]
    fn heat_counts_from_its_first_kelvin_to_the_end() {
        let at = |ambient: &str| {
            heat_factor(
                parse(ambient).unwrap(),
                parse("25 degC").unwrap(),
                parse("5 %/K").unwrap(),
                parse("60 degC").unwrap(),
            )
            .unwrap()
            .value
        };
        assert_eq!([at("-40 degC"), at("25 degC")], [1.0, 1.0]);
        assert!((at("35 degC") - 0.5).abs() < 1e-12);
        // 20 K above nothing is left, and never less than nothing.
        assert!(at("50 degC") == 0.0 && at("61 degC") == 0.0);
        let hotter = parse("26 degC").unwrap();
        assert!(heat_factor(hotter, hotter, parse("1 %/K").unwrap(), parse("25 degC").unwrap()).is_err());
    }
}
