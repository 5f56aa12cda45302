//! Charge and discharge rates: the C-rate and back, sources summed against a bank's limit, discharge time.

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;

use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{ChargeRate, ElectricCharge, ElectricCurrent, Ratio, Time};

calculations! {
    /// Current of a charge rate.
    ///
    /// # Example
    /// 0.2 /h of 200 Ah:
    /// ```
    /// use ampwright::{law::c_rate_current, quantity::{parse, readable}};
    /// let result = c_rate_current(parse("0.2 /h")?, parse("200 Ah")?)?;
    /// assert_eq!(readable(result).to_string(), "40 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn c_rate_current(
        /// Current as a part of the capacity, per hour.
        rate: ChargeRate in per_hour [0.0 ..= 1000.0],
        /// Rated capacity.
        capacity: ElectricCharge in ampere_hour [> 0.0],
    ) -> current: ElectricCurrent in ampere
    formula "I = r·C"
    source "definition of the charge rate"
    { ElectricCurrent::new::<ampere>(rate.get() * capacity.get::<ampere_hour>()) }

    /// Charge rate of a current.
    ///
    /// # Example
    /// 5 A and 100 Ah, the 20-hour rate:
    /// ```
    /// use ampwright::{law::current_c_rate, quantity::{parse, readable}};
    /// let result = current_c_rate(parse("5 A")?, parse("100 Ah")?)?;
    /// assert_eq!(readable(result).to_string(), "0.05 /h");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn current_c_rate(
        /// Charge or discharge current, as a magnitude.
        current: ElectricCurrent in ampere [>= 0.0],
        /// Rated capacity.
        capacity: ElectricCharge in ampere_hour [> 0.0],
    ) -> rate: ChargeRate in per_hour
    formula "r = I/C"
    source "definition of the charge rate"
    { ChargeRate::unchecked(current.get::<ampere>() / capacity.get::<ampere_hour>()) }

    /// Depth of discharge after a charge has been taken from a full battery.
    ///
    /// # Example
    /// 20 Ah from 100 Ah:
    /// ```
    /// use ampwright::{law::depth_of_discharge, quantity::{parse, readable}};
    /// let result = depth_of_discharge(parse("20 Ah")?, parse("100 Ah")?)?;
    /// assert_eq!(readable(result.depth_of_discharge).to_string(), "0.2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn depth_of_discharge(
        /// Charge taken.
        taken: ElectricCharge in ampere_hour [>= 0.0],
        /// Capacity at this rate, temperature and age.
        capacity: ElectricCharge in ampere_hour [> 0.0],
    ) => DischargeState {
        /// Part of the capacity that is gone.
        depth_of_discharge: Ratio in ratio,
        /// Part that is left.
        state_of_charge: Ratio in ratio,
    }
    where (taken <= capacity) taken in ampere_hour: "no more can be taken than the capacity; state the capacity at this rate"
    formula "DoD = Q/C, SoC = 1 − DoD"
    source "definitions"
    {
        let depth = taken / capacity;
        DischargeState { depth_of_discharge: depth, state_of_charge: Ratio::new::<uom::si::ratio::ratio>(1.0) - depth }
    }

    /// Time that a lead-acid battery delivers a constant current, by Peukert's law.
    ///
    /// A fit to measured discharges of one battery at one temperature: it flatters currents far from those.
    ///
    /// # Example
    /// 100 Ah at the 20-hour rate, 25 A, exponent 1.2:
    /// ```
    /// use ampwright::{law::peukert_time, quantity::{parse, readable}};
    /// let result = peukert_time(parse("25 A")?, parse("100 Ah")?, parse("20 h")?, parse("1.2")?)?;
    /// assert_eq!(readable(result).to_string(), "2.9 h");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn peukert_time(
        /// Discharge current.
        current: ElectricCurrent in ampere [> 0.0],
        /// Capacity at the rated time.
        rated_capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Time to which the capacity is rated.
        rated_time: Time in hour [> 0.0] = 20.0,
        /// Peukert's exponent, from two discharges or from the maker.
        exponent: Ratio in ratio [1.0 ..= 2.0],
    ) -> duration: Time in hour
    formula "t = H·(C/(I·H))^k"
    source "Peukert (1897) in the form with rated time (recalled)"
    { rated_time * libm::pow((rated_capacity / (current * rated_time)).value, exponent.value) }
}

/// What several charge sources do to one bank.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChargeCurrentSum {
    /// All sources together.
    pub total: ElectricCurrent,
    /// The most that the bank takes.
    pub limit: ElectricCurrent,
    /// How much the sum is above the limit; nought where it is not.
    pub excess: ElectricCurrent,
}

impl ChargeCurrentSum {
    /// Whether the sum keeps to the limit.
    pub fn is_admitted(&self) -> bool {
        self.total <= self.limit
    }
}

/// Sum of the charge sources of one bank against its charge rate (R11): it is the sum that charges, not the largest.
///
/// Each source counts with the most that it can give at the bank.
///
/// # Errors
/// [`Error::OutOfRange`] where a source is negative or not finite, or the capacity is not above nought.
///
/// # Example
/// A controller and an alternator on 200 Ah that takes 0.2 /h:
/// ```
/// use ampwright::{law::charge_current_sum, quantity::{parse, readable}};
/// let sum = charge_current_sum(&[parse("30 A")?, parse("25 A")?], parse("200 Ah")?, parse("0.2 /h")?)?;
/// assert!(!sum.is_admitted());
/// assert_eq!(readable(sum.excess).to_string(), "15 A");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn charge_current_sum(
    sources: &[ElectricCurrent],
    capacity: ElectricCharge,
    limit: ChargeRate,
) -> Result<ChargeCurrentSum, Error> {
    let limit = c_rate_current(limit, capacity)?;
    let nought = ElectricCurrent::new::<ampere>(0.0);
    let total = sources.iter().try_fold(nought, |sum, &source| {
        let sum = sum + source;
        if source.value >= 0.0 && sum.value.is_finite() {
            return Ok(sum);
        }
        Err(Error::OutOfRange {
            name: "charge current",
            value: source.get::<ampere>(),
            unit: "A",
            allowed: Allowed::AtLeast(0.0),
        })
    })?;
    let excess = if total > limit { total - limit } else { nought };
    Ok(ChargeCurrentSum { total, limit, excess })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::parse;

    #[test]
    fn a_rate_and_its_current_go_there_and_back() {
        let capacity = parse("280 Ah").unwrap();
        let rate = ChargeRate::per_hour(0.5).unwrap();
        assert_eq!(current_c_rate(c_rate_current(rate, capacity).unwrap(), capacity), Ok(rate));
    }

    #[test]
    fn a_rate_beyond_its_type_is_refused() {
        let error = current_c_rate(parse("2000 A").unwrap(), parse("1 Ah").unwrap()).unwrap_err();
        assert_eq!(
            error,
            Error::OutOfRange {
                name: "rate",
                value: 2000.0,
                unit: "/h",
                allowed: Allowed::Between(0.0, 1000.0)
            }
        );
    }

    #[test]
    fn the_sum_at_its_limit_is_admitted_and_one_step_more_is_not() {
        let (capacity, limit) = (parse("200 Ah").unwrap(), parse("0.2 /h").unwrap());
        let a = |x: f64| ElectricCurrent::new::<ampere>(x);
        assert!(charge_current_sum(&[a(25.0), a(15.0)], capacity, limit).unwrap().is_admitted());
        assert!(!charge_current_sum(&[a(40.0f64.next_up())], capacity, limit).unwrap().is_admitted());
        assert!(charge_current_sum(&[], capacity, limit).unwrap().is_admitted());
        for bad in [-1.0, f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
            assert!(charge_current_sum(&[a(bad)], capacity, limit).is_err());
        }
    }

    #[test]
    fn at_the_rated_current_the_rated_time_is_reached_whatever_the_exponent() {
        for exponent in ["1", "1.1", "1.4", "2"] {
            let time = peukert_time(
                parse("5 A").unwrap(),
                parse("100 Ah").unwrap(),
                parse("20 h").unwrap(),
                parse(exponent).unwrap(),
            )
            .unwrap();
            assert!((time.value / 72_000.0 - 1.0).abs() < 1e-15);
        }
    }
}
