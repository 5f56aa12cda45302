//! Efficiency of stages one behind the other.

use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::Ratio;

calculations! {
    /// Efficiency of two stages.
    ///
    /// # Example
    /// An inverter behind a battery:
    /// ```
    /// use ampwright::{law::two_stage_efficiency, quantity::{parse, readable}};
    /// let result = two_stage_efficiency(parse("90 %")?, parse("95 %")?)?;
    /// assert_eq!(readable(result).to_string(), "0.855");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn two_stage_efficiency(
        /// Of the first stage.
        first: Ratio in ratio [> 0.0 ..= 1.0],
        /// Of the second.
        second: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> efficiency: Ratio in ratio
    formula "η = η₁·η₂"
    source "energy balance"
    { first * second }

    /// Efficiency of three stages.
    ///
    /// # Example
    /// Controller, battery, inverter:
    /// ```
    /// use ampwright::{law::three_stage_efficiency, quantity::{parse, readable}};
    /// let result = three_stage_efficiency(parse("97 %")?, parse("90 %")?, parse("90 %")?)?;
    /// assert_eq!(readable(result).to_string(), "0.786");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn three_stage_efficiency(
        /// Of the first stage.
        first: Ratio in ratio [> 0.0 ..= 1.0],
        /// Of the second.
        second: Ratio in ratio [> 0.0 ..= 1.0],
        /// Of the third.
        third: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> efficiency: Ratio in ratio
    formula "η = η₁·η₂·η₃"
    source "energy balance"
    { first * second * third }
}

/// Efficiency of any number of stages; 1 for none.
///
/// # Errors
/// [`Error::OutOfRange`] where a stage is not above 0 and at most 1.
///
/// # Example
/// ```
/// use ampwright::{law::efficiency_chain, quantity::{parse, readable}};
/// let stages = [parse("97 %")?, parse("90 %")?, parse("90 %")?, parse("99 %")?];
/// assert_eq!(readable(efficiency_chain(&stages)?).to_string(), "0.778");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn efficiency_chain(stages: &[Ratio]) -> Result<Ratio, Error> {
    stages.iter().try_fold(Ratio::new::<uom::si::ratio::ratio>(1.0), |chain, &stage| {
        if stage.value > 0.0 && stage.value <= 1.0 {
            return Ok(chain * stage);
        }
        Err(Error::OutOfRange {
            name: "efficiency",
            value: stage.value,
            unit: "",
            allowed: Allowed::AboveUpTo(0.0, 1.0),
        })
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_chain_is_what_its_stages_give_in_pairs() {
        let r = Ratio::new::<uom::si::ratio::ratio>;
        let three = three_stage_efficiency(r(0.97), r(0.9), r(0.85)).unwrap();
        assert_eq!(efficiency_chain(&[r(0.97), r(0.9), r(0.85)]), Ok(three));
        assert_eq!(two_stage_efficiency(two_stage_efficiency(r(0.97), r(0.9)).unwrap(), r(0.85)), Ok(three));
        assert_eq!(efficiency_chain(&[]), Ok(r(1.0)));
    }

    #[test]
    fn no_stage_gains_and_none_is_nought() {
        for bad in [0.0, -0.0, -0.5, 1.0 + f64::EPSILON, f64::NAN, f64::INFINITY] {
            let stage = Ratio::new::<uom::si::ratio::ratio>(bad);
            assert!(
                efficiency_chain(&[stage]).is_err() && two_stage_efficiency(stage, stage).is_err(),
                "{bad}"
            );
        }
    }
}
