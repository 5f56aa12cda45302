//! The rating that a current needs.

use uom::si::ratio::ratio;

use super::least_rating;
use crate::catalogue::calculations;
use crate::quantity::{ElectricCurrent, Ratio};

calculations! {
    /// Least rating of a device that carries a current.
    ///
    /// The continuous part is taken over the share that a device carries for hours, or times the rule set's factor:
    /// the larger of the two, never both. A device stated for 100 % needs neither: then both are 1.
    ///
    /// # Example
    /// 89.6 A for hours, at 80 % of a device or times 1.25:
    /// ```
    /// use ampwright::{protection::least_device_rating, quantity::{parse, readable}};
    /// let rating = least_device_rating(parse("89.6 A")?, parse("0 A")?, parse("0.8")?, parse("1.25")?)?;
    /// assert_eq!(readable(rating).to_string(), "112 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn least_device_rating(
        /// For three hours or more.
        continuous_current: ElectricCurrent in ampere [>= 0.0],
        /// The rest.
        other_current: ElectricCurrent in ampere [>= 0.0],
        /// Share of its rating that the device carries for hours: 0.8, or 1 where its standard or maker says so.
        continuous_share: Ratio in ratio [> 0.0 ..= 1.0] = 0.8,
        /// Of the rule set on continuous current: 1.25 or 1.
        continuous_factor: Ratio in ratio [1.0 ..= 2.0] = 1.25,
    ) -> rating: ElectricCurrent in ampere
    formula "I_n ≥ max(k, 1/c)·I_continuous + I_other"
    source "rules R4 and R5, guide `rules`; NFPA 70-2023, 210.20(A) and 215.3 give the factor 1.25"
    { least_rating(continuous_current, other_current, continuous_share, false, continuous_factor.get::<ratio>()) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::parse;

    #[test]
    fn the_larger_factor_counts_and_the_rest_is_added_plain() {
        let need = |share, factor| {
            let (share, factor) = (parse(share).unwrap(), parse(factor).unwrap());
            least_device_rating(parse("40 A").unwrap(), parse("10 A").unwrap(), share, factor).unwrap().value
        };
        assert_eq!([need("0.8", "1.25"), need("0.8", "1"), need("1", "1.25")], [60.0; 3]);
        assert_eq!(need("1", "1"), 50.0);
        assert_eq!(need("0.5", "1.25"), 90.0);
    }
}
