//! Resistances in series and in parallel, and at another temperature.

use uom::si::electrical_resistance::ohm;

use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricalResistance, ThermodynamicTemperature};

calculations! {
    /// Two resistances in series.
    ///
    /// # Example
    /// A cable of 5 mΩ and a fuse of 0.8 mΩ:
    /// ```
    /// use ampwright::{law::series_resistance, quantity::{parse, readable}};
    /// let result = series_resistance(parse("5 mohm")?, parse("0.8 mohm")?)?;
    /// assert_eq!(readable(result).to_string(), "5.8 mΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn series_resistance(
        /// Of one part.
        first: ElectricalResistance in ohm [>= 0.0],
        /// Of the other.
        second: ElectricalResistance in ohm [>= 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "R = R₁ + R₂"
    source "Kirchhoff's voltage law"
    { first + second }

    /// Two resistances in parallel.
    ///
    /// # Example
    /// Two conductors of 6 mΩ and 3 mΩ:
    /// ```
    /// use ampwright::{law::parallel_resistance, quantity::{parse, readable}};
    /// let result = parallel_resistance(parse("6 mohm")?, parse("3 mohm")?)?;
    /// assert_eq!(readable(result).to_string(), "2 mΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn parallel_resistance(
        /// Of one branch.
        first: ElectricalResistance in ohm [> 0.0],
        /// Of the other.
        second: ElectricalResistance in ohm [> 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "1/R = 1/R₁ + 1/R₂"
    source "Kirchhoff's current law"
    // Written so that neither product nor reciprocal leaves the range of numbers.
    { first / (1.0 + (first / second).value) }

    /// Resistance of a conductor at another temperature.
    ///
    /// The resistance of a metal falls in a straight line that would meet zero at the inferred zero: −234.5 °C for
    /// copper.
    ///
    /// # Example
    /// 5 mΩ of copper at 20 °C, run at 70 °C:
    /// ```
    /// use ampwright::{law::resistance_at_temperature, quantity::{parse, readable}};
    /// let result = resistance_at_temperature(parse("5 mohm")?, parse("20 degC")?, parse("70 degC")?, parse("-234.5 degC")?)?;
    /// assert_eq!(readable(result).to_string(), "5.98 mΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn resistance_at_temperature(
        /// At the reference temperature.
        reference_resistance: ElectricalResistance in ohm [>= 0.0],
        /// Of the given resistance.
        reference_temperature: ThermodynamicTemperature in degree_celsius [-80.0 ..= 250.0] = 20.0,
        /// Of the conductor.
        temperature: ThermodynamicTemperature in degree_celsius [-80.0 ..= 250.0],
        /// Of the metal: −234.5 °C for copper.
        inferred_zero: ThermodynamicTemperature in degree_celsius [-273.0 ..= -200.0] = -234.5,
    ) -> resistance: ElectricalResistance in ohm
    formula "R_θ = R·(θ − θ₀)/(θ_ref − θ₀)"
    source "IEC 60228 and IEC 60287-1-1 for annealed copper (recalled)"
    {
        let zero = inferred_zero.value;
        reference_resistance * ((temperature.value - zero) / (reference_temperature.value - zero))
    }
}

/// Any number of resistances in series; nought for none.
///
/// # Errors
/// [`Error::OutOfRange`] where one is negative or not finite.
///
/// # Example
/// ```
/// use ampwright::{law::series_resistances, quantity::{parse, readable}};
/// let path = [parse("5 mohm")?, parse("0.2 mohm")?, parse("0.2 mohm")?, parse("0.8 mohm")?];
/// assert_eq!(readable(series_resistances(&path)?).to_string(), "6.2 mΩ");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn series_resistances(parts: &[ElectricalResistance]) -> Result<ElectricalResistance, Error> {
    parts.iter().try_fold(ElectricalResistance::new::<ohm>(0.0), |sum, &part| series_resistance(sum, part))
}

/// Any number of resistances in parallel.
///
/// # Errors
/// [`Error::OutOfRange`] where one is nought, negative or not finite, or where there is none.
///
/// # Example
/// ```
/// use ampwright::{law::parallel_resistances, quantity::{parse, readable}};
/// let strings = [parse("6 mohm")?, parse("6 mohm")?, parse("3 mohm")?];
/// assert_eq!(readable(parallel_resistances(&strings)?).to_string(), "1.5 mΩ");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn parallel_resistances(branches: &[ElectricalResistance]) -> Result<ElectricalResistance, Error> {
    let Some((&first, rest)) = branches.split_first() else {
        return Err(Error::OutOfRange {
            name: "branches",
            value: 0.0,
            unit: "",
            allowed: Allowed::AtLeast(1.0),
        });
    };
    // Alone, the first is checked here; in company by `parallel_resistance`.
    if !(first.value > 0.0 && first.value.is_finite()) {
        return Err(Error::OutOfRange {
            name: "resistance",
            value: first.value,
            unit: "Ω",
            allowed: Allowed::Above(0.0),
        });
    }
    rest.iter().try_fold(first, |so_far, &branch| parallel_resistance(so_far, branch))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn r(x: f64) -> ElectricalResistance {
        ElectricalResistance::new::<ohm>(x)
    }

    #[test]
    fn like_branches_share_evenly() {
        let four = parallel_resistances(&[r(8.0); 4]).unwrap();
        assert!((four.value - 2.0).abs() < 1e-15);
        assert_eq!(series_resistances(&[r(8.0); 4]), Ok(r(32.0)));
        assert_eq!(series_resistances(&[]), Ok(r(0.0)));
    }

    #[test]
    fn no_branch_is_a_dead_short_and_one_is_needed() {
        assert!(parallel_resistances(&[]).is_err());
        for bad in [0.0, -1.0, f64::NAN, f64::INFINITY] {
            assert!(
                parallel_resistances(&[r(bad)]).is_err() && parallel_resistances(&[r(1.0), r(bad)]).is_err()
            );
        }
    }

    #[test]
    fn parallel_does_not_overflow_in_between() {
        assert_eq!(parallel_resistance(r(1e200), r(1e200)), Ok(r(0.5e200)));
        assert_eq!(parallel_resistance(r(1e-200), r(1e-200)), Ok(r(0.5e-200)));
    }
}
