//! How long an engine runs to recharge a bank, and what it burns for it (R11).

use uom::si::time::hour;
use uom::si::volume::liter;

use super::fuel::{FuelCurve, litres_per_hour};
use crate::error::{Allowed, Error};
use crate::law::{LeadAcidRecharge, recharge_time, recharge_time_lead_acid};
use crate::quantity::{ElectricCharge, ElectricCurrent, Power, Ratio, Time, Volume};

/// A recharge that an engine set makes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Recharge {
    /// Rated capacity of the bank.
    pub capacity: ElectricCharge,
    /// Charge current, limited by charger, engine and bank.
    pub current: ElectricCurrent,
    /// State of charge at the start.
    pub start: Ratio,
    /// State of charge at the end.
    pub target: Ratio,
    /// State of charge from which the current falls: lead-acid. `None`: it does not fall before the target (lithium).
    pub knee: Option<Ratio>,
    /// Part of the charge that is stored.
    pub efficiency: Ratio,
}

/// Run of an engine set that recharges a bank.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EngineRun {
    /// At full current.
    pub bulk: Time,
    /// At falling current.
    pub tail: Time,
    /// Both.
    pub total: Time,
    /// Fuel burnt.
    pub fuel: Volume,
}

/// Time and fuel of a recharge.
///
/// `charging` is what the set delivers to the charger at full current, `other` what it delivers besides, throughout. In
/// the tail the charger's share falls with the current.
///
/// # Errors
/// As [`recharge_time_lead_acid`] and [`FuelCurve::at`].
///
/// # Example
/// 400 Ah of lead-acid from half to 90 % with 50 A, 2 kW from a 5 kW set:
/// ```
/// use ampwright::generator::{FuelCurve, Recharge, engine_run};
/// use ampwright::quantity::{parse, readable};
/// let fuel = FuelCurve::stated(parse("5 kW")?, &[(parse("25 %")?, parse("0.8 L/h")?), (parse("100 %")?, parse("2 L/h")?)])?;
/// let recharge = Recharge {
///     capacity: parse("400 Ah")?, current: parse("50 A")?, start: parse("50 %")?, target: parse("90 %")?,
///     knee: Some(parse("80 %")?), efficiency: parse("85 %")?,
/// };
/// let run = engine_run(&recharge, &fuel, parse("2 kW")?, parse("0 W")?)?;
/// assert_eq!(readable(run.total).to_string(), "4.13 h");
/// assert_eq!(readable(run.fuel).to_string(), "4.08 L");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn engine_run(
    recharge: &Recharge,
    fuel: &FuelCurve,
    charging: Power,
    other: Power,
) -> Result<EngineRun, Error> {
    let time = recharge.time()?;
    let full_rate = litres_per_hour(fuel.at(charging + other)?);
    // Either may be negative while their sum is not.
    fuel.at(charging)?;
    fuel.at(other)?;
    let bulk = full_rate * time.bulk.get::<hour>();
    let tail = match recharge.knee {
        Some(knee) if time.tail.value > 0.0 => {
            let begin = (1.0 - recharge.start.value) / (1.0 - knee.value);
            // Above the knee from the beginning, the current begins as the sources give it all the same: see the law.
            let part = begin.min(1.0);
            let end = part * (1.0 - recharge.target.value) / (1.0 - knee.value.max(recharge.start.value));
            let decay = time.tail.get::<hour>() / libm::log(part / end);
            tail_fuel(fuel, charging, other, (part, end), decay)
        }
        _ => 0.0,
    };
    let litres = bulk + tail;
    if !litres.is_finite() {
        return Err(Error::OutOfRange { name: "fuel", value: litres, unit: "L", allowed: Allowed::Finite });
    }
    Ok(EngineRun { bulk: time.bulk, tail: time.tail, total: time.total, fuel: Volume::new::<liter>(litres) })
}

impl Recharge {
    /// Time that it takes, bulk and tail.
    ///
    /// # Errors
    /// As [`recharge_time_lead_acid`].
    pub fn time(&self) -> Result<LeadAcidRecharge, Error> {
        if let Some(knee) = self.knee {
            let (start, target) = (self.start, self.target);
            return recharge_time_lead_acid(
                self.capacity,
                self.current,
                start,
                target,
                knee,
                self.efficiency,
            );
        }
        let within = |name, part: Ratio| {
            if (0.0..=1.0).contains(&part.value) {
                return Ok(());
            }
            let allowed = Allowed::Between(0.0, 1.0);
            Err(Error::OutOfRange { name, value: part.value, unit: "", allowed })
        };
        within("start", self.start)?;
        within("target", self.target)?;
        if self.start > self.target {
            let (value, why) = (self.start.value, "it must not be above target");
            return Err(Error::Contradiction { name: "start", value, unit: "", why });
        }
        let missing = self.capacity * (self.target - self.start);
        let total = recharge_time(missing, self.current, self.efficiency)?;
        Ok(LeadAcidRecharge { bulk: total, tail: Time::new::<hour>(0.0), total })
    }
}

/// Litres while the charger's power falls as an exponential from one part of its full power to another.
///
/// The load is `other + charging·x`, `x` falls with the time constant `decay` in hours; on each line of the fuel curve
/// `v = a + b·x`, so that the integral is `a·Δt + b·decay·Δx`.
fn tail_fuel(fuel: &FuelCurve, charging: Power, other: Power, (from, to): (f64, f64), decay: f64) -> f64 {
    let load = |x: f64| ((other + charging * x) / fuel.rating()).value;
    let at = |x: f64| fuel.litres_per_hour(load(x)).unwrap_or(f64::NAN);
    let share = (charging / fuel.rating()).value;
    let mut sum = 0.0;
    let mut high = from;
    while high > to {
        // The next corner below, where there is one.
        let corner = fuel
            .corners()
            .map(|corner| (corner - load(0.0)) / share)
            .filter(|&x| x < high * (1.0 - 1e-12) && x > to)
            .fold(to, f64::max);
        let (upper, lower) = (at(high), at(corner));
        let slope = (upper - lower) / (high - corner);
        let level = lower - slope * corner;
        sum += decay * (level * libm::log(high / corner) + slope * (high - corner));
        high = corner;
    }
    sum
}

/// Fuel for some hours at a rate: of a day, a week, a winter.
///
/// # Errors
/// [`Error::OutOfRange`] where the hours are negative or not finite, and as [`FuelCurve::at`].
pub fn fuel_for(fuel: &FuelCurve, output: Power, duration: Time) -> Result<Volume, Error> {
    let hours = duration.get::<hour>();
    if !(hours >= 0.0 && hours <= f64::MAX) {
        let allowed = Allowed::AtLeast(0.0);
        return Err(Error::OutOfRange { name: "duration", value: hours, unit: "h", allowed });
    }
    Ok(fuel.at(output)? * duration)
}
