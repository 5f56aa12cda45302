//! Duty over ambient: a refrigerator runs longer in a hot room (R16).

use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::catalogue::calculations;
use crate::error::Error;
use crate::quantity::{Ratio, ThermodynamicTemperature};

/// Part of its time switched on for which a load draws its power, at the ambient around it.
///
/// Stated at two ambients, linear between them, held beyond them.
///
/// ```
/// use ampwright::{load::Duty, quantity::{parse, readable}};
/// let fridge = Duty::between(parse("15 degC")?, parse("30 %")?, parse("35 degC")?, parse("60 %")?)?;
/// assert_eq!(readable(fridge.at(parse("20 degC")?)?).to_string(), "0.375");
/// assert_eq!(readable(fridge.at(parse("40 degC")?)?).to_string(), "0.6");
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Duty {
    cold: ThermodynamicTemperature,
    in_cold: Ratio,
    warm: ThermodynamicTemperature,
    in_warm: Ratio,
}

impl Duty {
    /// The same at all ambients.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where it is not 0 to 1.
    pub fn constant(duty: Ratio) -> Result<Self, Error> {
        let at = ThermodynamicTemperature::new::<degree_celsius>;
        Self::between(at(0.0), duty, at(1.0), duty)
    }

    /// Draws all the time it is switched on.
    ///
    /// # Example
    /// ```
    /// use ampwright::{load::Duty, quantity::parse};
    /// assert_eq!(Duty::full().at(parse("35 degC")?)?.value, 1.0);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn full() -> Self {
        let at = ThermodynamicTemperature::new::<degree_celsius>;
        let one = Ratio::new::<ratio>(1.0);
        Self { cold: at(0.0), in_cold: one, warm: at(1.0), in_warm: one }
    }

    /// At two ambients, the first the colder; a heater has the greater duty in the cold.
    ///
    /// # Errors
    /// As [`duty_at_ambient`].
    pub fn between(
        cold: ThermodynamicTemperature,
        in_cold: Ratio,
        warm: ThermodynamicTemperature,
        in_warm: Ratio,
    ) -> Result<Self, Error> {
        duty_at_ambient(cold, cold, in_cold, warm, in_warm)?;
        Ok(Self { cold, in_cold, warm, in_warm })
    }

    /// At an ambient.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the ambient is not −90 to 150 °C.
    pub fn at(&self, ambient: ThermodynamicTemperature) -> Result<Ratio, Error> {
        duty_at_ambient(ambient, self.cold, self.in_cold, self.warm, self.in_warm)
    }

    /// The greatest between two ambients: at one of them, since the line has no hump.
    ///
    /// # Errors
    /// As [`Duty::at`].
    pub fn greatest(
        &self,
        one: ThermodynamicTemperature,
        other: ThermodynamicTemperature,
    ) -> Result<Ratio, Error> {
        let (one, other) = (self.at(one)?, self.at(other)?);
        Ok(if one > other { one } else { other })
    }
}

calculations! {
    /// Duty of a load at an ambient, from the duties stated at two.
    ///
    /// Linear between the two, held beyond them: nothing is guessed outside of what was stated.
    ///
    /// # Example
    /// A refrigerator, 30 % at 15 °C and 60 % at 35 °C, at 25 °C:
    /// ```
    /// use ampwright::{load::duty_at_ambient, quantity::{parse, readable}};
    /// let duty = duty_at_ambient(parse("25 degC")?, parse("15 degC")?, parse("30 %")?, parse("35 degC")?, parse("60 %")?)?;
    /// assert_eq!(readable(duty).to_string(), "0.45");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn duty_at_ambient(
        /// Around the load.
        ambient: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
        /// The colder of the two.
        cold: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
        /// Duty there.
        cold_duty: Ratio in ratio [0.0 ..= 1.0],
        /// The warmer of the two.
        warm: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
        /// Duty there.
        warm_duty: Ratio in ratio [0.0 ..= 1.0],
    ) -> duty: Ratio in ratio
    where (cold < warm) cold in degree_celsius: "it must be below warm"
    formula "D = D_c + (D_w − D_c)·x, x = (θ − θ_c)/(θ_w − θ_c), at least 0 and at most 1"
    source "straight line between two stated points; that the duty of a refrigerator follows one is common practice, no source"
    {
        let x = ((ambient.value - cold.value) / (warm.value - cold.value)).clamp(0.0, 1.0);
        cold_duty + (warm_duty - cold_duty) * x
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;
    use crate::quantity::parse;

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }

    fn part(x: f64) -> Ratio {
        Ratio::new::<ratio>(x)
    }

    proptest! {
        #[test]
        fn a_duty_stays_between_its_two_figures(
            cold in -40.0..20.0f64, width in 0.1..60.0f64, a in 0.0..=1.0f64, b in 0.0..=1.0f64, ambient in -90.0..150.0f64,
        ) {
            let duty = Duty::between(at(cold), part(a), at(cold + width), part(b)).unwrap();
            let here = duty.at(at(ambient)).unwrap().value;
            prop_assert!(here >= a.min(b) - 1e-15 && here <= a.max(b) + 1e-15);
            if ambient <= cold { prop_assert_eq!(here, a); }
            if ambient >= cold + width + 1e-9 { prop_assert!((here - b).abs() < 1e-15); }
            // The greatest over a range is no less than anywhere in it.
            let (low, high) = (ambient.min(cold), ambient.max(cold));
            let greatest = duty.greatest(at(low), at(high)).unwrap().value;
            for k in 0..=10 {
                let between = low + (high - low) * f64::from(k) / 10.0;
                prop_assert!(duty.at(at(between)).unwrap().value <= greatest + 1e-12);
            }
        }
    }

    #[test]
    fn what_is_no_duty_is_refused() {
        for bad in [-0.01, 1.01, f64::NAN, f64::INFINITY] {
            assert!(Duty::constant(part(bad)).is_err(), "{bad}");
        }
        let half = parse("50 %").unwrap();
        assert!(Duty::between(at(20.0), half, at(20.0), half).is_err());
        assert!(Duty::between(at(30.0), half, at(20.0), half).is_err());
        for bad in [-91.0, 151.0, f64::NAN, f64::INFINITY] {
            assert!(Duty::full().at(at(bad)).is_err(), "{bad}");
        }
        assert_eq!(Duty::constant(half).unwrap().at(at(-20.0)), Ok(half));
    }
}
