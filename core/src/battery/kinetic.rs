//! The kinetic battery model: two wells of charge, of which only one can be drawn from at once.
//!
//! What is bound flows over at a rate of its own: a fast discharge empties the available well while charge is left, and a
//! rest brings some back. Losses, temperature and age are not in it.

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;
use uom::si::time::hour;

use super::{Chemistry, KineticParameters, data};
use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{ChargeRate, ElectricCharge, ElectricCurrent, Ratio, Time};

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
    /// [`Error::OutOfRange`] unless the capacity is above nought and finite, the part above 0 and below 1, and the rate above
    /// nought.
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

    /// Both wells full.
    pub fn full(&self) -> Wells {
        self.at_rest(1.0)
    }

    /// Both wells at one height, at a part of the charge.
    fn at_rest(&self, part: f64) -> Wells {
        Wells {
            available: ElectricCharge::new::<ampere_hour>(self.c * self.capacity_Ah * part),
            bound: ElectricCharge::new::<ampere_hour>((1.0 - self.c) * self.capacity_Ah * part),
        }
    }

    /// The wells after a constant current, positive in discharge, over a time.
    ///
    /// The closed form of the model, exact for any length of step. The available well may come out below nought or above
    /// its brim: [`Kinetic::max_discharge`] and [`Kinetic::max_charge`] tell what keeps it within.
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
fn exponentials(x: f64) -> (f64, f64) {
    let gone = -libm::expm1(-x);
    // x − 1 + e^−x loses its digits below: its series, to the bit at 0.01.
    let lag =
        if x < 0.01 { x * x * (0.5 - x * (1.0 / 6.0 - x * (1.0 / 24.0 - x / 120.0))) } else { x - gone };
    (gone, lag)
}

/// Capacity at an hour rate, part of that of a very slow discharge.
fn hour_rate_part(c: f64, k: f64, hours: f64) -> f64 {
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
