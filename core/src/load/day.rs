//! Energy and charge of a day, month by month, and the share of what stands by (R16).

use uom::si::energy::joule;
use uom::si::ratio::ratio;

use super::consumer::{Conditions, Day, Load, Terminals};
use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{
    ElectricCharge, ElectricPotential, Energy, Power, Ratio, ThermodynamicTemperature, Time,
};

/// Share of standing loads above which it is worth looking for others: a rule of this design (R16), no source.
pub const HIGH_STANDING_SHARE: f64 = 0.2;

/// Energy of a list of loads on one day, at their terminals.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DayEnergy {
    /// Of the loads on direct current.
    pub dc: Energy,
    /// Of the loads behind inverters.
    pub ac: Energy,
    /// Of the standing loads on either side; contained in the other two.
    pub standing: Energy,
    /// Whether the list has a standing load at all.
    pub lists_standing: bool,
}

/// What a list says of its standing loads.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Standing {
    /// None is listed: something was forgotten, since every plant has a controller, a monitor or an alarm.
    NoneListed,
    /// Their share of the day's energy.
    Share(Ratio),
    /// A share above [`HIGH_STANDING_SHARE`].
    HighShare(Ratio),
}

impl DayEnergy {
    const NONE: Self = {
        const NOTHING: Energy =
            Energy { dimension: core::marker::PhantomData, units: core::marker::PhantomData, value: 0.0 };
        Self { dc: NOTHING, ac: NOTHING, standing: NOTHING, lists_standing: false }
    };

    /// Both sides together.
    pub fn total(&self) -> Energy {
        self.dc + self.ac
    }

    /// With the idle energy of an inverter, drawn on direct current: it stands by as well.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where it is negative or not finite.
    pub fn with_idle(self, idle: Energy) -> Result<Self, Error> {
        checked(idle)?;
        Ok(Self { dc: self.dc + idle, standing: self.standing + idle, lists_standing: true, ..self })
    }

    /// What the list says of its standing loads.
    pub fn standing(&self) -> Standing {
        let share = self.standing / self.total();
        match share.value {
            _ if !self.lists_standing => Standing::NoneListed,
            x if x > HIGH_STANDING_SHARE => Standing::HighShare(share),
            // A list without any energy has no share.
            x if x >= 0.0 => Standing::Share(share),
            _ => Standing::Share(Ratio::new::<ratio>(0.0)),
        }
    }
}

/// Energy of a list of loads on one day.
///
/// # Errors
/// As [`Load::daily_energy`].
///
/// # Example
/// One lamp, one fan, one refrigerator that runs half of its time:
/// ```
/// use ampwright::load::{Conditions, Day, Draw, Duty, Load, Schedule, Standing, energy_of_day};
/// use ampwright::quantity::{parse, readable};
/// let hours = |power, hours| -> Result<Load, ampwright::Error> {
///     Ok(Load { schedule: Schedule::hours(parse(hours)?)?, ..Load::new(Draw::Power(parse(power)?)) })
/// };
/// let fridge = Load { duty: Duty::constant(parse("50 %")?)?, ..hours("75 W", "24 h")? };
/// let at = Conditions { month: 7, ambient: parse("25 degC")?, voltage: parse("12 V")?, day: Day::Full };
/// let energy = energy_of_day(&[hours("18 W", "4 h")?, hours("60 W", "2 h")?, fridge], &at)?;
/// assert_eq!(readable(energy.dc).to_string(), "1.092 kWh");
/// assert_eq!(energy.standing(), Standing::NoneListed);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn energy_of_day(loads: &[Load], at: &Conditions) -> Result<DayEnergy, Error> {
    let mut sum = DayEnergy::NONE;
    for load in loads {
        let energy = load.daily_energy(at)?;
        match load.terminals {
            Terminals::Dc => sum.dc += energy,
            Terminals::Ac { .. } => sum.ac += energy,
        }
        if load.standing {
            sum.standing += energy;
            sum.lists_standing = true;
        }
    }
    checked(sum.dc)?;
    checked(sum.ac)?;
    Ok(sum)
}

/// Energy of a day in each month, January first, with the month's mean ambient around the loads.
///
/// # Errors
/// As [`energy_of_day`].
pub fn energy_by_month(
    loads: &[Load],
    ambient: &[ThermodynamicTemperature; 12],
    voltage: ElectricPotential,
    day: Day,
) -> Result<[DayEnergy; 12], Error> {
    let mut months = [DayEnergy::NONE; 12];
    for ((month, cell), &ambient) in (1u8..).zip(months.iter_mut()).zip(ambient) {
        *cell = energy_of_day(loads, &Conditions { month, ambient, voltage, day })?;
    }
    Ok(months)
}

fn checked(energy: Energy) -> Result<(), Error> {
    Allowed::AtLeast(0.0).check("energy", energy.get::<joule>(), "J")
}

calculations! {
    /// Energy of a load on a day, at its terminals.
    ///
    /// # Example
    /// A refrigerator of 75 W that runs half of its time:
    /// ```
    /// use ampwright::{load::daily_energy, quantity::{parse, readable}};
    /// let energy = daily_energy(parse("75 W")?, parse("24 h")?, parse("50 %")?, parse("7 d")?)?;
    /// assert_eq!(readable(energy).to_string(), "900 Wh");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn daily_energy(
        /// While it draws.
        power: Power in watt [>= 0.0],
        /// Switched on, on a day of use.
        hours_per_day: Time in hour [0.0 ..= 24.0],
        /// Part of that time for which it draws.
        duty: Ratio in ratio [0.0 ..= 1.0] = 1.0,
        /// Days of use in a week; 7 also for the energy of a day of use itself.
        days_per_week: Time in day [> 0.0 ..= 7.0] = 7.0,
    ) -> energy: Energy in watt_hour
    formula "E = P·t·D·d/7"
    source "definitions"
    { power * hours_per_day * duty * (days_per_week.get::<uom::si::time::day>() / 7.0) }

    /// Charge that a day's loads take from the bank.
    ///
    /// What the inverter draws idle is not in its efficiency: add it to the DC energy.
    ///
    /// # Example
    /// 3000 Wh a day on alternating current through 85 %, at 24 V:
    /// ```
    /// use ampwright::{load::daily_charge, quantity::{parse, readable}};
    /// let charge = daily_charge(parse("0 Wh")?, parse("3000 Wh")?, parse("85 %")?, parse("24 V")?)?;
    /// assert_eq!(readable(charge).to_string(), "147.1 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn daily_charge(
        /// On direct current, line losses included where they count.
        dc_energy: Energy in watt_hour [>= 0.0],
        /// Behind the inverter.
        ac_energy: Energy in watt_hour [>= 0.0] = 0.0,
        /// Of the inverter at its usual load.
        inverter_efficiency: Ratio in ratio [> 0.0 ..= 1.0] = 1.0,
        /// Of the bank.
        voltage: ElectricPotential in volt [> 0.0],
    ) -> charge: ElectricCharge in ampere_hour
    formula "Q = (E_DC + E_AC/η)/U"
    source "energy balance"
    { (dc_energy + ac_energy / inverter_efficiency) / voltage }

    /// Share of the standing loads in a day's energy.
    ///
    /// Above 0.2 it is worth looking for others, or for a switch.
    ///
    /// # Example
    /// ```
    /// use ampwright::{load::standing_share, quantity::{parse, readable}};
    /// let share = standing_share(parse("240 Wh")?, parse("960 Wh")?)?;
    /// assert_eq!(readable(share).to_string(), "0.25");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn standing_share(
        /// Of controllers, monitors, alarms and idle inverters.
        standing_energy: Energy in watt_hour [>= 0.0],
        /// Of all loads, these among them.
        total_energy: Energy in watt_hour [> 0.0],
    ) -> share: Ratio in ratio
    where (standing_energy <= total_energy) standing_energy in watt_hour: "it is part of total_energy and cannot exceed it"
    formula "s = E_standing/E_total"
    source "definition"
    { standing_energy / total_energy }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::energy::watt_hour;
    use uom::si::power::watt;

    use super::*;
    use crate::load::{Draw, Duty, Months, Schedule};
    use crate::quantity::parse;

    extern crate std;

    fn standing(watts: f64, standing: bool) -> Load {
        Load { standing, ..Load::new(Draw::Power(Power::new::<watt>(watts))) }
    }

    fn july() -> Conditions {
        Conditions {
            month: 7,
            ambient: parse("25 degC").unwrap(),
            voltage: parse("24 V").unwrap(),
            day: Day::Full,
        }
    }

    #[test]
    fn a_list_without_standing_loads_says_so_and_a_fifth_is_not_yet_high() {
        let of = |loads: &[Load]| energy_of_day(loads, &july()).unwrap();
        assert_eq!(of(&[]).standing(), Standing::NoneListed);
        assert_eq!(of(&[standing(10.0, false)]).standing(), Standing::NoneListed);
        let share = |watts| of(&[standing(10.0, true), standing(watts, false)]).standing();
        assert_eq!(share(40.0), Standing::Share(Ratio::new::<ratio>(0.2)));
        assert!(matches!(share(39.9), Standing::HighShare(_)));
        // A monitor without consumption is listed all the same.
        assert_eq!(of(&[standing(0.0, true)]).standing(), Standing::Share(Ratio::new::<ratio>(0.0)));
        // An inverter that idles stands by.
        let idle = of(&[standing(10.0, false)]).with_idle(parse("240 Wh").unwrap()).unwrap();
        assert_eq!(idle.standing(), Standing::HighShare(Ratio::new::<ratio>(0.5)));
        assert!(of(&[]).with_idle(Energy::new::<joule>(f64::NAN)).is_err());
    }

    proptest! {
        /// Minute by minute over the week against hours, duty and days.
        #[test]
        fn a_weeks_energy_is_that_of_its_minutes(
            from in 0..1440u16, length in 1..1439u16, days in 1..=7u8, watts in 0.0..2000.0f64, duty in 0.0..=1.0f64,
        ) {
            let to = (from + length) % 1440;
            prop_assume!(from != to);
            let window = crate::load::Window::minutes(from, to).unwrap();
            let load = Load {
                schedule: Schedule::windows(&[window]).unwrap().on_days(days).unwrap(),
                duty: Duty::constant(Ratio::new::<ratio>(duty)).unwrap(),
                ..standing(watts, false)
            };
            let mut week = 0.0;
            for day in 0..7 {
                for minute in 0..1440u16 {
                    let inside = if from < to { minute >= from && minute < to } else { minute >= from || minute < to };
                    if day < days && inside {
                        week += watts * duty / 60.0;
                    }
                }
            }
            let mean = energy_of_day(&[load], &Conditions { day: Day::Mean, ..july() }).unwrap().dc;
            prop_assert!((7.0 * mean.get::<watt_hour>() - week).abs() <= 1e-9 * week.max(1.0));
            // The catalogue's closed form says the same.
            let scalar = daily_energy(
                Power::new::<watt>(watts),
                load.schedule.hours_on_a_day(),
                Ratio::new::<ratio>(duty),
                Time::new::<uom::si::time::day>(f64::from(days)),
            ).unwrap();
            prop_assert!((scalar.value - mean.value).abs() <= 1e-12 * mean.value.max(1.0));
        }
    }

    #[test]
    fn months_take_their_own_ambient_and_sides_stay_apart() {
        let fridge = Load {
            duty: Duty::between(
                parse("10 degC").unwrap(),
                parse("20 %").unwrap(),
                parse("30 degC").unwrap(),
                parse("60 %").unwrap(),
            )
            .unwrap(),
            ..standing(50.0, false)
        };
        let winter =
            Schedule::hours(parse("5 h").unwrap()).unwrap().in_months(Months::from_to(12, 2).unwrap());
        let terminals = Terminals::Ac { power_factor: parse("0.9").unwrap() };
        let lamp = Load { schedule: winter, terminals, ..standing(100.0, false) };
        let mut ambient = [parse("10 degC").unwrap(); 12];
        ambient[6] = parse("30 degC").unwrap();
        let year = energy_by_month(&[fridge, lamp], &ambient, parse("24 V").unwrap(), Day::Full).unwrap();
        for (i, month) in year.iter().enumerate() {
            let dc = if i == 6 { 720.0 } else { 240.0 };
            let ac = if [0, 1, 11].contains(&i) { 500.0 } else { 0.0 };
            assert!((month.dc.get::<watt_hour>() - dc).abs() < 1e-9, "{i}");
            assert!((month.ac.get::<watt_hour>() - ac).abs() < 1e-9, "{i}");
            assert_eq!(month.total(), month.dc + month.ac);
        }
        ambient[3] = parse("200 degC").unwrap();
        assert!(energy_by_month(&[fridge], &ambient, parse("24 V").unwrap(), Day::Full).is_err());
    }

    #[test]
    fn a_sum_too_large_for_a_number_is_an_error() {
        let huge =
            Load { schedule: Schedule::hours(parse("1 s").unwrap()).unwrap(), ..standing(1.5e308, false) };
        assert!(energy_of_day(&[huge], &july()).is_ok());
        assert!(energy_of_day(&[huge, huge], &july()).is_err());
    }
}
