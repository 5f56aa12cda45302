//! Peukert's law between hour rates: the exponent of two ratings, the capacity at another rate.
//!
//! The time that a constant current lasts is [`peukert_time`](crate::law::peukert_time()).

use uom::si::ratio::ratio;

use crate::catalogue::calculations;
use crate::quantity::{ElectricCharge, ElectricCurrent, Ratio, Time};

calculations! {
    /// Peukert's exponent of a battery from its capacities at two hour rates.
    ///
    /// # Example
    /// 120 Ah at the 20-hour and 100 Ah at the 5-hour rate:
    /// ```
    /// use ampwright::{battery::peukert_exponent, quantity::{parse, readable}};
    /// let result = peukert_exponent(parse("120 Ah")?, parse("20 h")?, parse("100 Ah")?, parse("5 h")?)?;
    /// assert_eq!(readable(result).to_string(), "1.151");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn peukert_exponent(
        /// At the longer time.
        slow_capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Longer of the two times.
        slow_time: Time in hour [> 0.0],
        /// At the shorter time.
        fast_capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Shorter of the two times.
        fast_time: Time in hour [> 0.0],
    ) -> exponent: Ratio in ratio
    where (fast_time < slow_time) fast_time in hour: "it must be shorter than the slow time"
    where (fast_capacity <= slow_capacity) fast_capacity in ampere_hour: "a faster discharge does not give more; \
        exchange the two"
    where (fast_capacity / fast_time > slow_capacity / slow_time) fast_capacity in ampere_hour: "the shorter \
        discharge must have the greater current"
    formula "k = ln(t₁/t₂)/ln(I₂/I₁), I = C/t"
    source "Peukert's law, solved for its exponent; the form is given in a battery monitor's manual, recalled"
    {
        let currents = (fast_capacity / fast_time) / (slow_capacity / slow_time);
        Ratio::new::<ratio>(libm::log((slow_time / fast_time).value) / libm::log(currents.value))
    }

    /// Capacity at another hour rate than the rated one, by Peukert's law.
    ///
    /// # Example
    /// 100 Ah at the 20-hour rate, taken in 5 h, exponent 1.2:
    /// ```
    /// use ampwright::{battery::hour_rate_capacity, quantity::{parse, readable}};
    /// let result = hour_rate_capacity(parse("100 Ah")?, parse("20 h")?, parse("5 h")?, parse("1.2")?)?;
    /// assert_eq!(readable(result).to_string(), "79.4 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn hour_rate_capacity(
        /// Capacity at the rated time.
        rated_capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Time to which the capacity is rated.
        rated_time: Time in hour [> 0.0] = 20.0,
        /// Time in which it is to be taken.
        duration: Time in hour [> 0.0],
        /// Peukert's exponent.
        exponent: Ratio in ratio [1.0 ..= 2.0],
    ) -> capacity: ElectricCharge in ampere_hour
    formula "C = C₀·(t/H)^((k − 1)/k)"
    source "Peukert (1897) in the form with rated time, solved for the charge (recalled)"
    { rated_capacity * libm::pow((duration / rated_time).value, (exponent.value - 1.0) / exponent.value) }

    /// Charge that a constant current takes until the battery is empty, by Peukert's law.
    ///
    /// # Example
    /// 10 A from 100 Ah at the 20-hour rate, exponent 1.2:
    /// ```
    /// use ampwright::{battery::delivered_charge, quantity::{parse, readable}};
    /// let result = delivered_charge(parse("10 A")?, parse("100 Ah")?, parse("20 h")?, parse("1.2")?)?;
    /// assert_eq!(readable(result).to_string(), "87.1 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn delivered_charge(
        /// Discharge current.
        current: ElectricCurrent in ampere [> 0.0],
        /// Capacity at the rated time.
        rated_capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Time to which the capacity is rated.
        rated_time: Time in hour [> 0.0] = 20.0,
        /// Peukert's exponent.
        exponent: Ratio in ratio [1.0 ..= 2.0],
    ) -> charge: ElectricCharge in ampere_hour
    formula "Q = C₀·(C₀/(I·H))^(k − 1)"
    source "Peukert (1897) in the form with rated time, times the current (recalled)"
    { rated_capacity * libm::pow((rated_capacity / (current * rated_time)).value, exponent.value - 1.0) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::law::peukert_time;
    use proptest::prelude::*;
    use uom::si::electric_charge::ampere_hour;
    use uom::si::electric_current::ampere;
    use uom::si::time::hour;

    fn ah(value: f64) -> ElectricCharge {
        ElectricCharge::new::<ampere_hour>(value)
    }
    fn h(value: f64) -> Time {
        Time::new::<hour>(value)
    }
    fn r(value: f64) -> Ratio {
        Ratio::new::<ratio>(value)
    }

    proptest! {
        #[test]
        fn exponent_capacity_and_time_are_one_law(
            exponent in 1.01..2.0f64, slow in 2.0..120.0f64, part in 0.05..0.9f64, capacity in 1.0..2000.0f64,
        ) {
            let fast = slow * part;
            let at_fast = hour_rate_capacity(ah(capacity), h(slow), h(fast), r(exponent)).unwrap();
            let back = peukert_exponent(ah(capacity), h(slow), at_fast, h(fast)).unwrap();
            prop_assert!((back.value - exponent).abs() < 1e-9);
            // The time of that rate's current, by the law's own function, and the charge it moves.
            let current = at_fast / h(fast);
            let time = peukert_time(current, ah(capacity), h(slow), r(exponent)).unwrap();
            prop_assert!((time.get::<hour>() / fast - 1.0).abs() < 1e-9);
            let charge = delivered_charge(current, ah(capacity), h(slow), r(exponent)).unwrap();
            prop_assert!((charge.value / at_fast.value - 1.0).abs() < 1e-9);
        }
    }

    #[test]
    fn ratings_the_wrong_way_round_are_named() {
        let name = |a, b, c, d| match peukert_exponent(ah(a), h(b), ah(c), h(d)).unwrap_err() {
            crate::Error::Contradiction { name, .. } => name,
            other => panic!("{other}"),
        };
        assert_eq!(name(100.0, 5.0, 120.0, 20.0), "fast_time");
        assert_eq!(name(100.0, 20.0, 120.0, 5.0), "fast_capacity");
        // Less current for a shorter time is no discharge to empty.
        assert_eq!(name(100.0, 20.0, 10.0, 5.0), "fast_capacity");
        let equal =
            delivered_charge(ElectricCurrent::new::<ampere>(5.0), ah(100.0), h(20.0), r(1.3)).unwrap();
        assert!((equal.get::<ampere_hour>() - 100.0).abs() < 1e-9);
    }
}
