//! The kinetic battery model: two wells of charge, of which only one can be drawn from at once.
//!
//! What is bound flows over at a rate of its own: a fast discharge empties the available well while charge is left,
//! and a rest brings some back. Losses, temperature and age are not in it.

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;
use uom::si::time::hour;

use super::{Chemistry, KineticParameters, data};
use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{ChargeRate, ElectricCharge, ElectricCurrent, Ratio, StateOfCharge, Time};

/// A battery as two wells.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Kinetic {
    /// Charge of both wells, full, Ah: the capacity at a very slow discharge.
    capacity_Ah: f64,
    /// Part of it in the available well.
    c: f64,
    /// Rate constant k′ of the equations, per hour.
    k: f64,
}

/// Charge in the wells.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Wells {
    /// Can be drawn at once.
    pub available: ElectricCharge,
    /// Must flow over first.
    pub bound: ElectricCharge,
}

impl Wells {
    /// Both together.
    pub fn total(&self) -> ElectricCharge {
        self.available + self.bound
    }
}

impl Kinetic {
    /// A battery of a capacity at a very slow discharge, the available part of it, and the rate constant k′.
    ///
    /// k′ is that of the step equations, k/(c(1 − c)) where k couples the heights of the wells.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] unless the capacity is above nought and finite, the part above 0 and below 1, and the
    /// rate above nought.
    pub fn new(capacity: ElectricCharge, available: Ratio, rate: ChargeRate) -> Result<Self, Error> {
        let (capacity_Ah, c, k) = (capacity.get::<ampere_hour>(), available.get::<ratio>(), rate.get());
        let refuse = |name, value, unit, allowed| Err(Error::OutOfRange { name, value, unit, allowed });
        if !(capacity_Ah > 0.0 && capacity_Ah <= MOST) {
            return refuse("capacity", capacity_Ah, "Ah", Allowed::AboveUpTo(0.0, MOST));
        }
        if !(LEAST_PART..=1.0 - LEAST_PART).contains(&c) {
            return refuse("available part", c, "", Allowed::Between(LEAST_PART, 1.0 - LEAST_PART));
        }
        if !(LEAST_RATE..=1000.0).contains(&k) {
            return refuse("rate constant", k, "/h", Allowed::Between(LEAST_RATE, 1000.0));
        }
        Ok(Self { capacity_Ah, c, k })
    }

    /// A bank of a chemistry whose capacity at an hour rate is known, with the parameters of [`data`].
    ///
    /// # Errors
    /// [`Error::OutOfRange`] as [`Kinetic::new`], and where the hour rate is not above nought and finite.
    pub fn of_chemistry(
        chemistry: Chemistry,
        rated_capacity: ElectricCharge,
        rated_time: Time,
    ) -> Result<Self, Error> {
        let KineticParameters { available_ratio, rate_per_h } = data(chemistry).kinetic.value;
        let hours = rated_time.get::<hour>();
        if !(hours > 0.0 && hours.is_finite()) {
            return Err(Error::OutOfRange {
                name: "rated time",
                value: hours,
                unit: "h",
                allowed: Allowed::Above(0.0),
            });
        }
        let whole = rated_capacity / hour_rate_part(available_ratio, rate_per_h, hours);
        Self::new(whole, Ratio::new::<ratio>(available_ratio), ChargeRate::per_hour(rate_per_h)?)
    }

    /// Charge of both wells, full.
    pub fn capacity(&self) -> ElectricCharge {
        ElectricCharge::new::<ampere_hour>(self.capacity_Ah)
    }

    /// Part of it in the available well, c.
    pub fn available(&self) -> Ratio {
        Ratio::new::<ratio>(self.c)
    }

    /// Rate constant k′ of the step equations.
    pub fn rate(&self) -> ChargeRate {
        ChargeRate::unchecked(self.k)
    }

    /// Both wells full.
    pub fn full(&self) -> Wells {
        self.wells(1.0)
    }

    /// Both wells at one height, as after a long rest.
    pub fn at_rest(&self, charge: StateOfCharge) -> Wells {
        self.wells(charge.get())
    }

    fn wells(&self, part: f64) -> Wells {
        Wells {
            available: ElectricCharge::new::<ampere_hour>(self.c * self.capacity_Ah * part),
            bound: ElectricCharge::new::<ampere_hour>((1.0 - self.c) * self.capacity_Ah * part),
        }
    }

    /// The wells after a constant current, positive in discharge, over a time.
    ///
    /// The closed form of the model, exact for any length of step. The available well may come out below nought or
    /// above its brim: [`Kinetic::max_discharge`] and [`Kinetic::max_charge`] tell what keeps it within.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where an input is NaN or infinite or the time negative.
    pub fn step(&self, wells: Wells, current: ElectricCurrent, duration: Time) -> Result<Wells, Error> {
        let (available, bound) = checked_wells(wells)?;
        let (amperes, hours) = (checked_current(current)?, checked_time(duration)?);
        let (available, bound) = self.moved(available, bound, amperes, hours);
        Ok(Wells {
            available: ElectricCharge::new::<ampere_hour>(available),
            bound: ElectricCharge::new::<ampere_hour>(bound),
        })
    }

    fn moved(&self, available: f64, bound: f64, amperes: f64, hours: f64) -> (f64, f64) {
        let (c, k) = (self.c, self.k);
        let (gone, lag) = exponentials(k * hours);
        let kept = 1.0 - gone;
        let total = available + bound;
        let new = available * kept + (total * k * c - amperes) * gone / k - amperes * c * lag / k;
        let rest = bound * kept + total * (1.0 - c) * gone - amperes * (1.0 - c) * lag / k;
        (new, rest)
    }

    /// Greatest current that can be drawn throughout a step: it just empties the available well at the end.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where an input is NaN or infinite or the time not above nought.
    pub fn max_discharge(&self, wells: Wells, duration: Time) -> Result<ElectricCurrent, Error> {
        self.limit(wells, duration, 0.0)
    }

    /// Greatest current that can be put in throughout a step, as a positive number: it just fills the available well.
    ///
    /// # Errors
    /// As [`Kinetic::max_discharge`].
    pub fn max_charge(&self, wells: Wells, duration: Time) -> Result<ElectricCurrent, Error> {
        self.limit(wells, duration, self.c * self.capacity_Ah).map(|current| -current)
    }

    /// Current that brings the available well to a level at the end of a step.
    fn limit(&self, wells: Wells, duration: Time, level_Ah: f64) -> Result<ElectricCurrent, Error> {
        let (available, bound) = checked_wells(wells)?;
        let hours = checked_time(duration)?;
        if hours <= 0.0 {
            return Err(Error::OutOfRange {
                name: "step",
                value: hours,
                unit: "h",
                allowed: Allowed::Above(0.0),
            });
        }
        let (c, k) = (self.c, self.k);
        let (gone, lag) = exponentials(k * hours);
        let numerator = k * (available * (1.0 - gone) - level_Ah) + (available + bound) * k * c * gone;
        Ok(ElectricCurrent::new::<ampere>(numerator / (gone + c * lag)))
    }

    /// Time until a constant current empties the available well; `None` where it does not within the time asked for.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where an input is NaN or infinite or the time negative.
    pub fn time_to_empty(
        &self,
        wells: Wells,
        current: ElectricCurrent,
        within: Time,
    ) -> Result<Option<Time>, Error> {
        let (available, bound) = checked_wells(wells)?;
        let (amperes, hours) = (checked_current(current)?, checked_time(within)?);
        Ok(self.emptied(available, bound, amperes, hours).map(Time::new::<hour>))
    }

    /// The only zero of the available well on a stretch of constant current, by halving.
    fn emptied(&self, available: f64, bound: f64, amperes: f64, hours: f64) -> Option<f64> {
        if available <= 0.0 {
            return Some(0.0);
        }
        let level = |t: f64| self.moved(available, bound, amperes, t).0;
        // Bent one way only: at the end of the stretch it is above nought, or it has passed nought once.
        let end = level(hours);
        if end > 0.0 || end.is_nan() {
            return None;
        }
        let (mut early, mut late) = (0.0, hours);
        // As many halvings as separate neighbouring numbers.
        for _ in 0..200 {
            let middle = 0.5 * (early + late);
            if level(middle) > 0.0 { early = middle } else { late = middle }
        }
        Some(late)
    }
}

const MOST: f64 = 1e9;
const LEAST_PART: f64 = 1e-3;
const LEAST_RATE: f64 = 1e-4;

/// 1 − e^−x, and x − that: both without loss for small x.
pub(super) fn exponentials(x: f64) -> (f64, f64) {
    let gone = -libm::expm1(-x);
    // x − 1 + e^−x loses its digits below: its series, to the bit at 0.01.
    let lag =
        if x < 0.01 { x * x * (0.5 - x * (1.0 / 6.0 - x * (1.0 / 24.0 - x / 120.0))) } else { x - gone };
    (gone, lag)
}

/// Capacity at an hour rate, part of that of a very slow discharge.
pub(super) fn hour_rate_part(c: f64, k: f64, hours: f64) -> f64 {
    let x = k * hours;
    let (gone, lag) = exponentials(x);
    c * x / (gone + c * lag)
}

fn checked_wells(wells: Wells) -> Result<(f64, f64), Error> {
    let of = |name, charge: ElectricCharge| {
        let value = charge.get::<ampere_hour>();
        if value.abs() <= MOST {
            return Ok(value);
        }
        Err(Error::OutOfRange { name, value, unit: "Ah", allowed: Allowed::Between(-MOST, MOST) })
    };
    Ok((of("available charge", wells.available)?, of("bound charge", wells.bound)?))
}

fn checked_current(current: ElectricCurrent) -> Result<f64, Error> {
    let value = current.get::<ampere>();
    if value.abs() <= MOST {
        return Ok(value);
    }
    Err(Error::OutOfRange { name: "current", value, unit: "A", allowed: Allowed::Between(-MOST, MOST) })
}

fn checked_time(duration: Time) -> Result<f64, Error> {
    let value = duration.get::<hour>();
    if (0.0..=MOST).contains(&value) {
        return Ok(value);
    }
    Err(Error::OutOfRange { name: "step", value, unit: "h", allowed: Allowed::Between(0.0, MOST) })
}

calculations! {
    /// Time that a full battery lasts under a constant current, by the kinetic model.
    ///
    /// # Example
    /// 2 Ah, of which 5/8 at once, at 0.96 A:
    /// ```
    /// use ampwright::{battery::kinetic_lifetime, quantity::{parse, readable}};
    /// let result = kinetic_lifetime(parse("2 Ah")?, parse("0.625")?, parse("0.6912 /h")?, parse("0.96 A")?)?;
    /// assert_eq!(readable(result).to_string(), "1.519 h");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn kinetic_lifetime(
        /// Of both wells: at a very slow discharge.
        capacity: ElectricCharge in ampere_hour [> 0.0 ..= 1e9],
        /// Part of it that is available at once.
        available: Ratio in ratio [0.001 ..= 0.999],
        /// k′ of the step equations: k/(c(1 − c)) where k couples the heights of the wells.
        rate: ChargeRate in per_hour [0.0001 ..= 1000.0],
        /// Drawn throughout.
        current: ElectricCurrent in ampere [> 0.0 ..= 1e9],
    ) -> duration: Time in hour
    formula "t where q₁ = 0, q₁ = c·C·e^(−k′t) + (C·k′·c − I)(1 − e^(−k′t))/k′ − I·c·(k′t − 1 + e^(−k′t))/k′"
    source "Manwell and McGowan, Solar Energy 50 (1993) 399, from full (recalled)"
    {
        let (whole, c) = (capacity.get::<ampere_hour>(), available.value);
        let model = Kinetic { capacity_Ah: whole, c, k: rate.get() };
        let amperes = current.get::<ampere>();
        // All charge is gone by then.
        let most = whole / amperes;
        let time = model.emptied(c * whole, (1.0 - c) * whole, amperes, most);
        Time::new::<hour>(time.unwrap_or(most))
    }

    /// Capacity of a battery at an hour rate, by the kinetic model.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::kinetic_capacity, quantity::{parse, readable}};
    /// let result = kinetic_capacity(parse("300 Ah")?, parse("0.3")?, parse("1.2 /h")?, parse("20 h")?)?;
    /// assert_eq!(readable(result).to_string(), "273 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn kinetic_capacity(
        /// Of both wells: at a very slow discharge.
        capacity: ElectricCharge in ampere_hour [> 0.0 ..= 1e9],
        /// Part of it that is available at once.
        available: Ratio in ratio [0.001 ..= 0.999],
        /// k′ of the step equations.
        rate: ChargeRate in per_hour [0.0001 ..= 1000.0],
        /// In which it is taken.
        duration: Time in hour [> 0.0 ..= 1e6],
    ) -> delivered: ElectricCharge in ampere_hour
    formula "Q = C·c·x/(1 − e^−x + c·(x − 1 + e^−x)), x = k′·t"
    source "Manwell and McGowan, Solar Energy 50 (1993) 399 (recalled)"
    { capacity * hour_rate_part(available.value, rate.get(), duration.get::<hour>()) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn model(capacity: f64, c: f64, k: f64) -> Kinetic {
        let whole = ElectricCharge::new::<ampere_hour>(capacity);
        Kinetic::new(whole, Ratio::new::<ratio>(c), ChargeRate::per_hour(k).unwrap()).unwrap()
    }
    fn a(value: f64) -> ElectricCurrent {
        ElectricCurrent::new::<ampere>(value)
    }
    fn h(value: f64) -> Time {
        Time::new::<hour>(value)
    }
    fn ah(charge: ElectricCharge) -> f64 {
        charge.get::<ampere_hour>()
    }

    /// The differential equations of the wells, in steps of Runge and Kutta: another way to the closed form.
    fn integrated(model: Kinetic, wells: Wells, amperes: f64, hours: f64) -> (f64, f64) {
        let rate = |q1: f64, q2: f64| {
            let flow = model.k * model.c * (1.0 - model.c) * (q2 / (1.0 - model.c) - q1 / model.c);
            (-amperes + flow, -flow)
        };
        let (mut q1, mut q2) = (ah(wells.available), ah(wells.bound));
        let steps = 400;
        let dt = hours / f64::from(steps);
        for _ in 0..steps {
            let (a1, b1) = rate(q1, q2);
            let (a2, b2) = rate(q1 + 0.5 * dt * a1, q2 + 0.5 * dt * b1);
            let (a3, b3) = rate(q1 + 0.5 * dt * a2, q2 + 0.5 * dt * b2);
            let (a4, b4) = rate(q1 + dt * a3, q2 + dt * b3);
            q1 += dt * (a1 + 2.0 * a2 + 2.0 * a3 + a4) / 6.0;
            q2 += dt * (b1 + 2.0 * b2 + 2.0 * b3 + b4) / 6.0;
        }
        (q1, q2)
    }

    proptest! {
        #[test]
        fn the_closed_form_is_the_integral(
            c in 0.05..0.95f64, k in 0.05..5.0f64, part in 0.1..1.0f64, amperes in -20.0..20.0f64, hours in 0.0..3.0f64,
        ) {
            let model = model(100.0, c, k);
            let start = model.wells(part);
            let end = model.step(start, a(amperes), h(hours)).unwrap();
            let (q1, q2) = integrated(model, start, amperes, hours);
            prop_assert!((ah(end.available) - q1).abs() < 1e-6 && (ah(end.bound) - q2).abs() < 1e-6);
            // No charge is lost.
            prop_assert!((ah(end.total()) - ah(start.total()) + amperes * hours).abs() < 1e-9);
        }

        #[test]
        fn a_step_is_the_sum_of_its_parts(
            c in 0.01..0.99f64, k in 0.001..20.0f64, amperes in -50.0..50.0f64, first in 0.0..5.0f64, then in 0.0..5.0f64,
        ) {
            let model = model(300.0, c, k);
            let whole = model.step(model.full(), a(amperes), h(first + then)).unwrap();
            let parts = model.step(model.step(model.full(), a(amperes), h(first)).unwrap(), a(amperes), h(then)).unwrap();
            prop_assert!((ah(whole.available) - ah(parts.available)).abs() < 1e-8);
            prop_assert!((ah(whole.bound) - ah(parts.bound)).abs() < 1e-8);
        }

        #[test]
        fn the_limits_just_empty_and_just_fill(
            c in 0.05..0.95f64, k in 0.01..10.0f64, part in 0.05..0.95f64, hours in 0.01..10.0f64,
        ) {
            let model = model(200.0, c, k);
            let start = model.wells(part);
            let out = model.max_discharge(start, h(hours)).unwrap();
            prop_assert!(ah(model.step(start, out, h(hours)).unwrap().available).abs() < 1e-8);
            let into = model.max_charge(start, h(hours)).unwrap();
            let filled = model.step(start, -into, h(hours)).unwrap();
            prop_assert!((ah(filled.available) - 200.0 * c).abs() < 1e-8 && into.value > 0.0);
            // The time to empty is that of the limit.
            let time = model.time_to_empty(start, out, h(2.0 * hours)).unwrap().unwrap();
            prop_assert!((time.get::<hour>() - hours).abs() < 1e-7 * hours);
        }

        #[test]
        fn a_faster_discharge_gives_less_and_lasts_as_its_hour_rate(
            c in 0.05..0.95f64, k in 0.01..10.0f64, hours in 0.1..200.0f64, less in 0.1..0.99f64,
        ) {
            let slow = hour_rate_part(c, k, hours);
            prop_assert!(slow <= 1.0 && hour_rate_part(c, k, hours * less) <= slow && slow >= c);
            // Two ways to one number: the capacity at an hour rate, and the lifetime at the current of that rate.
            let whole = ElectricCharge::new::<ampere_hour>(100.0);
            let (part, rate) = (Ratio::new::<ratio>(c), ChargeRate::per_hour(k).unwrap());
            let life = kinetic_lifetime(whole, part, rate, a(100.0 * slow / hours)).unwrap();
            prop_assert!((life.get::<hour>() - hours).abs() < 1e-7 * hours);
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(bits: [u64; 6]) {
            let [capacity, c, available, bound, amperes, hours] = bits.map(f64::from_bits);
            let charge = |x| ElectricCharge::new::<ampere_hour>(x);
            let rate = ChargeRate::per_hour(1.2).unwrap();
            let wells = Wells { available: charge(available), bound: charge(bound) };
            let _ = Kinetic::new(charge(capacity), Ratio::new::<ratio>(c), rate);
            let model = model(100.0, 0.3, 1.2);
            let _ = model.step(wells, a(amperes), h(hours));
            let _ = (model.max_discharge(wells, h(hours)), model.max_charge(wells, h(hours)));
            let _ = model.time_to_empty(wells, a(amperes), h(hours));
            let _ = Kinetic::of_chemistry(Chemistry::Agm, charge(capacity), h(hours));
        }
    }

    #[test]
    fn a_rest_brings_charge_back_but_makes_none() {
        let model = model(100.0, 0.3, 1.2);
        let tired = model.step(model.full(), a(30.0), h(0.8)).unwrap();
        let rested = model.step(tired, a(0.0), h(2.0)).unwrap();
        assert!(rested.available > tired.available && rested.bound < tired.bound);
        assert!((ah(rested.total()) - ah(tired.total())).abs() < 1e-12);
        let long = model.step(tired, a(0.0), h(1000.0)).unwrap();
        let even = model.at_rest(StateOfCharge::new(ah(tired.total()) / 100.0).unwrap());
        assert!((ah(long.available) - ah(even.available)).abs() < 1e-9);
    }

    #[test]
    fn a_step_of_no_time_moves_nothing_and_has_no_limit() {
        let model = model(100.0, 0.3, 1.2);
        let same = model.step(model.full(), a(50.0), h(0.0)).unwrap();
        assert_eq!(
            (ah(same.available), ah(same.bound)),
            (ah(model.full().available), ah(model.full().bound))
        );
        assert!(model.max_discharge(model.full(), h(0.0)).is_err());
        assert_eq!(model.time_to_empty(model.full(), a(-5.0), h(10.0)), Ok(None));
    }

    /// Chosen so that they agree with the recalled range of exponents: that is what their source says.
    #[test]
    fn parameters_of_each_chemistry_give_its_usual_peukert_exponent() {
        for chemistry in Chemistry::ALL {
            let KineticParameters { available_ratio: c, rate_per_h: k } = data(chemistry).kinetic.value;
            let (c20, c5) = (hour_rate_part(c, k, 20.0), hour_rate_part(c, k, 5.0));
            let exponent = libm::log(4.0) / libm::log((c5 / 5.0) / (c20 / 20.0));
            let (low, high) = data(chemistry).peukert.value;
            assert!((low..=high).contains(&exponent), "{chemistry}: {exponent}");
            // A rating comes back as the capacity of both wells at its hour rate.
            let rated = ElectricCharge::new::<ampere_hour>(100.0);
            let model = Kinetic::of_chemistry(chemistry, rated, h(20.0)).unwrap();
            let again = kinetic_capacity(model.capacity(), model.available(), model.rate(), h(20.0)).unwrap();
            assert!((ah(again) - 100.0).abs() < 1e-9);
        }
    }
}
