//! Parameters of the kinetic model from capacities at hour rates.

use uom::si::electric_charge::ampere_hour;
use uom::si::ratio::ratio;
use uom::si::time::hour;

use super::Kinetic;
use super::kinetic::{exponentials, hour_rate_part};
use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{ChargeRate, ElectricCharge, Ratio, Time};

/// A capacity, and the time in which a constant current takes it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct HourRate {
    /// Charge delivered.
    pub capacity: ElectricCharge,
    /// In this time.
    pub duration: Time,
}

/// Two ratings as plain numbers: hours and ampere-hours, the longer first.
#[derive(Clone, Copy)]
struct Pair {
    slow: (f64, f64),
    fast: (f64, f64),
}

impl Pair {
    /// Ratio of the capacities, slow over fast.
    fn quotient(self) -> f64 {
        self.slow.1 / self.fast.1
    }

    /// The available part for a rate constant: the ratio of the capacities, solved for it.
    fn available_at(self, k: f64) -> f64 {
        let (x_slow, x_fast) = (k * self.slow.0, k * self.fast.0);
        let ((gone_slow, lag_slow), (gone_fast, lag_fast)) = (exponentials(x_slow), exponentials(x_fast));
        let quotient = self.quotient();
        (x_slow * gone_fast - quotient * x_fast * gone_slow)
            / (quotient * x_fast * lag_slow - x_slow * lag_fast)
    }
}

impl Kinetic {
    /// The battery whose capacities at three hour rates are these, the longest time first.
    ///
    /// The rate constant is looked for between 0.01 over the longest and 20 over the shortest time: beyond, the
    /// ratings tell nothing about it. There is no more than one.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where a rating is not above nought and finite; [`Error::Contradiction`] where times or
    /// capacities do not fall from one to the next, or no two wells have these capacities.
    ///
    /// # Source
    /// Manwell and McGowan (1993), recalled: the available part follows from two of the ratings for each rate
    /// constant; the third decides which.
    ///
    /// # Example
    /// ```
    /// use ampwright::battery::{HourRate, Kinetic};
    /// use ampwright::quantity::parse;
    /// let model = Kinetic::fitted(&[
    ///     HourRate { capacity: parse("273.3 Ah")?, duration: parse("20 h")? },
    ///     HourRate { capacity: parse("216.1 Ah")?, duration: parse("5 h")? },
    ///     HourRate { capacity: parse("127.2 Ah")?, duration: parse("1 h")? },
    /// ])?;
    /// assert!((model.available().value - 0.3).abs() < 0.01);
    /// assert!((model.rate().get() - 1.2).abs() < 0.05);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn fitted(ratings: &[HourRate; 3]) -> Result<Self, Error> {
        let [slow, middle, fast] = *ratings;
        let outer = checked(slow, fast)?;
        let inner = checked(slow, middle)?;
        checked(middle, fast)?;
        let wanted = inner.quotient();
        // What the middle rating is off by; `None` where two wells cannot have the outer ones.
        let off = |k: f64| {
            let c = outer.available_at(k);
            let found = hour_rate_part(c, k, inner.slow.0) / hour_rate_part(c, k, inner.fast.0);
            (c > 0.0 && c < 1.0).then_some(found - wanted)
        };
        let (least, most) = (0.01 / outer.slow.0, 20.0 / outer.fast.0);
        let at = |step: u32| least * libm::pow(most / least, f64::from(step) / f64::from(STEPS));
        let bracket = (0..STEPS).find_map(|step| {
            let (low, high) = (at(step), at(step + 1));
            let (left, right) = (off(low)?, off(high)?);
            ((left <= 0.0) != (right <= 0.0)).then_some((low, high, left <= 0.0))
        });
        let Some((mut low, mut high, rises)) = bracket else { return Err(no_wells(middle)) };
        for _ in 0..100 {
            let k = 0.5 * (low + high);
            match off(k) {
                Some(off) if (off <= 0.0) == rises => low = k,
                _ => high = k,
            }
        }
        Self::of_pair(outer, 0.5 * (low + high)).ok_or(no_wells(middle))?
    }

    /// The battery whose capacities at two hour rates are these, the longer time first, with a rate constant that is
    /// known or taken from [`data`](super::data).
    ///
    /// # Errors
    /// As [`Kinetic::fitted`].
    ///
    /// # Example
    /// ```
    /// use ampwright::battery::{HourRate, Kinetic};
    /// use ampwright::quantity::parse;
    /// let slow = HourRate { capacity: parse("273.3 Ah")?, duration: parse("20 h")? };
    /// let fast = HourRate { capacity: parse("127.2 Ah")?, duration: parse("1 h")? };
    /// let model = Kinetic::fitted_at(parse("1.2 /h")?, slow, fast)?;
    /// assert!((model.available().value - 0.3).abs() < 0.001);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn fitted_at(rate: ChargeRate, slow: HourRate, fast: HourRate) -> Result<Self, Error> {
        let pair = checked(slow, fast)?;
        Self::of_pair(pair, rate.get()).ok_or(no_wells(fast))?
    }

    /// `None` where no two wells have both capacities.
    fn of_pair(pair: Pair, k: f64) -> Option<Result<Self, Error>> {
        let c = pair.available_at(k);
        let whole = pair.slow.1 / hour_rate_part(c, k, pair.slow.0);
        (c > 0.0 && c < 1.0).then(|| {
            let whole = ElectricCharge::new::<ampere_hour>(whole);
            Self::new(whole, Ratio::new::<ratio>(c), ChargeRate::per_hour(k)?)
        })
    }
}

/// Steps in which the rate constant is looked for: each of some 3 to 6 %.
const STEPS: u32 = 256;

fn no_wells(rating: HourRate) -> Error {
    Error::Contradiction {
        name: "capacity",
        value: rating.capacity.get::<ampere_hour>(),
        unit: "Ah",
        why: "no two wells of charge have these capacities; check the ratings, or take others further apart",
    }
}

fn checked(slow: HourRate, fast: HourRate) -> Result<Pair, Error> {
    let plain = |rating: HourRate| {
        let (hours, charge) = (rating.duration.get::<hour>(), rating.capacity.get::<ampere_hour>());
        for (name, value, unit) in [("duration", hours, "h"), ("capacity", charge, "Ah")] {
            if !(value > 0.0 && value.is_finite()) {
                return Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Above(0.0) });
            }
        }
        Ok((hours, charge))
    };
    let pair = Pair { slow: plain(slow)?, fast: plain(fast)? };
    let contradiction = |name, value, unit, why| Err(Error::Contradiction { name, value, unit, why });
    if pair.fast.0 >= pair.slow.0 {
        return contradiction(
            "duration",
            pair.fast.0,
            "h",
            "state the ratings from the longest time to the shortest",
        );
    }
    if pair.fast.1 >= pair.slow.1 {
        return contradiction("capacity", pair.fast.1, "Ah", "in a shorter time a battery gives less");
    }
    Ok(pair)
}

calculations! {
    /// Available part of a battery's charge, from its capacities at two hour rates and a rate constant.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::kinetic_available_part, quantity::{parse, readable}};
    /// let (slow, fast) = (parse("273.3 Ah")?, parse("127.2 Ah")?);
    /// let result = kinetic_available_part(slow, parse("20 h")?, fast, parse("1 h")?, parse("1.2 /h")?)?;
    /// assert_eq!(readable(result.available).to_string(), "0.3");
    /// assert_eq!(readable(result.capacity).to_string(), "300 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn kinetic_available_part(
        /// At the longer time.
        slow_capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Longer of the two times.
        slow_time: Time in hour [> 0.0],
        /// At the shorter time.
        fast_capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Shorter of the two times.
        fast_time: Time in hour [> 0.0],
        /// k′ of the step equations; 1.2 /h fits many lead-acid batteries.
        rate: ChargeRate in per_hour [0.0001 ..= 1000.0] = 1.2,
    ) => KineticFit {
        /// Part that is available at once.
        available: Ratio in ratio,
        /// Of both wells: at a very slow discharge.
        capacity: ElectricCharge in ampere_hour,
    }
    formula "c = (x₁·g₂ − R·x₂·g₁)/(R·x₂·h₁ − x₁·h₂), R = C₁/C₂, x = k′·t, g = 1 − e^−x, h = x − g; C = C₁·(g₁ + \
        c·h₁)/(c·x₁)"
    source "Manwell and McGowan, Solar Energy 50 (1993) 399 (recalled), solved for c"
    fallible "the times or capacities do not fall, or no two wells have these capacities at that rate constant"
    {
        let slow = HourRate { capacity: slow_capacity, duration: slow_time };
        let fast = HourRate { capacity: fast_capacity, duration: fast_time };
        let model = Kinetic::fitted_at(rate, slow, fast)?;
        Ok(KineticFit { available: model.available(), capacity: model.capacity() })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn rating(capacity: f64, hours: f64) -> HourRate {
        HourRate {
            capacity: ElectricCharge::new::<ampere_hour>(capacity),
            duration: Time::new::<hour>(hours),
        }
    }

    proptest! {
        #[test]
        fn the_parameters_of_a_battery_come_back_from_its_ratings(
            c in 0.08..0.92f64, part in 0.0..1.0f64, place in 0usize..4, capacity in 1.0..1e4f64,
        ) {
            let times = [[20.0, 5.0, 1.0], [100.0, 20.0, 5.0], [100.0, 10.0, 1.0], [10.0, 5.0, 3.0]][place];
            // From slow to fast within what the ratings tell of.
            let k = (0.1 / times[0]) * libm::pow(80.0 * times[0] / times[2], part);
            let ratings = times.map(|hours| rating(capacity * hour_rate_part(c, k, hours), hours));
            let model = Kinetic::fitted(&ratings).unwrap();
            prop_assert!((model.available().value / c - 1.0).abs() < 1e-4, "{c}, {k}: {model:?}");
            prop_assert!((model.rate().get() / k - 1.0).abs() < 1e-4, "{c}, {k}: {model:?}");
            prop_assert!((model.capacity().get::<ampere_hour>() / capacity - 1.0).abs() < 1e-4);
            let again = Kinetic::fitted_at(ChargeRate::per_hour(k).unwrap(), ratings[0], ratings[2]).unwrap();
            prop_assert!((again.available().value / c - 1.0).abs() < 1e-6, "{c}, {k}: {again:?}");
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(bits: [u64; 6], k in 0.0..1000.0f64) {
            let [a, b, c, d, e, f] = bits.map(f64::from_bits);
            let ratings = [rating(a, b), rating(c, d), rating(e, f)];
            let _ = Kinetic::fitted(&ratings);
            let _ = Kinetic::fitted_at(ChargeRate::per_hour(k).unwrap(), ratings[0], ratings[1]);
        }
    }

    #[test]
    fn ratings_that_no_two_wells_have_are_refused() {
        let slug = |ratings: [HourRate; 3]| Kinetic::fitted(&ratings).unwrap_err().slug();
        // Times that rise; capacities that do; a battery that gives next to nothing in an hour, then too much.
        assert_eq!(slug([rating(90.0, 1.0), rating(95.0, 5.0), rating(100.0, 20.0)]), "contradiction");
        assert_eq!(slug([rating(80.0, 20.0), rating(90.0, 5.0), rating(100.0, 1.0)]), "contradiction");
        assert_eq!(slug([rating(100.0, 20.0), rating(99.9, 5.0), rating(5.0, 1.0)]), "contradiction");
        assert_eq!(slug([rating(100.0, 20.0), rating(0.0, 5.0), rating(5.0, 1.0)]), "out-of-range");
    }
}
