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
            // In the tail the current is what is missing from full, over what was missing at the knee.
            let part = |state: f64| (1.0 - state) / (1.0 - knee.value);
            let (from, to) = (part(knee.value.max(recharge.start.value)), part(recharge.target.value));
            let decay = time.tail.get::<hour>() / libm::log(from / to);
            tail_fuel(fuel, charging, other, (from, to), decay)
        }
        _ => 0.0,
    };
    let litres = bulk + tail;
    Allowed::Finite.check("fuel", litres, "L")?;
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
        let within = |name, part: Ratio| Allowed::Between(0.0, 1.0).check(name, part.value, "");
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
    Allowed::AtLeast(0.0).check("duration", hours, "h")?;
    Ok(fuel.at(output)? * duration)
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::electric_charge::ampere_hour;
    use uom::si::electric_current::ampere;
    use uom::si::power::watt;
    use uom::si::ratio::ratio;

    use super::*;
    use crate::quantity::{VolumeFlow, parse};

    fn part(x: f64) -> Ratio {
        Ratio::new::<ratio>(x)
    }

    fn curve() -> FuelCurve {
        let flow = |text| parse::<VolumeFlow>(text).unwrap();
        let points = [(0.25, "0.8 L/h"), (0.5, "1.1 L/h"), (0.75, "1.5 L/h"), (1.0, "2.1 L/h")];
        FuelCurve::stated(parse("5 kW").unwrap(), &points.map(|(load, fuel)| (part(load), flow(fuel))))
            .unwrap()
    }

    fn recharge(start: f64, target: f64, knee: f64) -> Recharge {
        Recharge {
            capacity: ElectricCharge::new::<ampere_hour>(400.0),
            current: ElectricCurrent::new::<ampere>(50.0),
            start: part(start),
            target: part(target),
            knee: Some(part(knee)),
            efficiency: part(0.85),
        }
    }

    /// Midpoint steps through the state of charge: hours and litres until the target is passed.
    fn integrated(start: f64, target: f64, knee: f64, charging: f64, other: f64) -> (f64, f64) {
        let (fuel, slope, step) = (curve(), 0.85 * 50.0 / 400.0, 1e-4);
        let share = |s: f64| if s < knee { 1.0 } else { (1.0 - s) / (1.0 - knee) };
        let (mut s, mut hours, mut litres) = (start, 0.0, 0.0);
        while s < target {
            let middle = s + 0.5 * step * slope * share(s);
            let whole = step * slope * share(middle);
            let taken = ((target - s) / whole).min(1.0);
            let load = (charging * share(middle) + other) / 5000.0;
            litres += taken * step * fuel.litres_per_hour(load).unwrap();
            hours += taken * step;
            s += whole;
        }
        (hours, litres)
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(32))]
        #[test]
        fn time_and_fuel_are_the_integral(
            a in 0.0..0.97f64, b in 0.0..0.97f64, knee in 0.0..0.95f64, charging in 0.0..4000.0f64, other in 0.0..1000.0f64,
        ) {
            let (start, target) = (a.min(b), a.max(b));
            let w = Power::new::<watt>;
            let run = engine_run(&recharge(start, target, knee), &curve(), w(charging), w(other)).unwrap();
            let (hours, litres) = integrated(start, target, knee, charging, other);
            // One step at the knee, 1e-4 h, at no more than 2.1 L/h; and the same at each corner of the curve.
            prop_assert!((run.total.get::<hour>() - hours).abs() < 3e-4, "{} {hours}", run.total.get::<hour>());
            prop_assert!((run.fuel.get::<liter>() - litres).abs() < 1e-3, "{} {litres}", run.fuel.get::<liter>());
        }
    }

    #[test]
    fn without_a_knee_it_is_current_and_fuel_throughout() {
        let lithium = Recharge { knee: None, ..recharge(0.2, 0.8, 0.5) };
        let run = engine_run(&lithium, &curve(), parse("2.5 kW").unwrap(), parse("0 W").unwrap()).unwrap();
        let hours = 0.6 * 400.0 / (0.85 * 50.0);
        assert!((run.total.get::<hour>() - hours).abs() < 1e-12 && run.tail.value == 0.0);
        assert!((run.fuel.get::<liter>() - 1.1 * hours).abs() < 1e-12);
        // Nothing missing takes no time.
        let full = Recharge { start: part(0.8), ..lithium };
        assert_eq!(full.time().unwrap().total.value, 0.0);
        for (start, target) in [(0.9, 0.8), (-0.1, 0.8), (0.1, 1.1), (f64::NAN, 0.8), (0.1, f64::NAN)] {
            let wrong = Recharge { start: part(start), target: part(target), ..lithium };
            assert!(wrong.time().is_err(), "{start} to {target}");
        }
    }

    #[test]
    fn more_than_the_set_gives_is_refused_and_so_is_less_than_nothing() {
        let w = Power::new::<watt>;
        let run = |charging, other| engine_run(&recharge(0.5, 0.9, 0.8), &curve(), w(charging), w(other));
        assert!(run(5000.0, 0.0).is_ok() && run(4000.0, 1000.0).is_ok());
        assert!(run(4000.0, 1001.0).is_err());
        for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -1.0] {
            assert!(run(bad, 100.0).is_err() && run(100.0, bad).is_err(), "{bad}");
        }
        assert!(fuel_for(&curve(), w(2500.0), Time::new::<hour>(-1.0)).is_err());
        let day = fuel_for(&curve(), w(2500.0), Time::new::<hour>(3.0)).unwrap();
        assert!((day.get::<liter>() - 3.3).abs() < 1e-12);
    }
}
