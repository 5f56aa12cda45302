//! A load: how it draws, when, for how much of that time, and how it starts.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;

use super::duty::Duty;
use super::months::checked_month;
use super::occasion::Occasion;
use super::schedule::Schedule;
use super::start::Start;
use crate::error::{Allowed, Error};
use crate::quantity::{
    ElectricCurrent, ElectricPotential, Energy, Power, Ratio, ThermodynamicTemperature, Time,
};

/// How a load draws (R3).
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Draw {
    /// Constant power: converters, most motors and electronics; the current rises as the voltage falls.
    Power(Power),
    /// Constant current: linear regulators, many lamp drivers.
    Current(ElectricCurrent),
    /// Constant resistance: heaters, filament lamps; the current rises with the voltage.
    Resistive {
        /// At the voltage beside it.
        power: Power,
        /// Voltage for which the power is stated.
        at: ElectricPotential,
    },
}

impl Draw {
    /// Power of one unit at a voltage.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the voltage is not above 0, or the draw negative or not finite.
    pub fn power_at(self, voltage: ElectricPotential) -> Result<Power, Error> {
        Allowed::Above(0.0).check("voltage", voltage.get::<volt>(), "V")?;
        let power = match self {
            Self::Power(power) => power,
            Self::Current(current) => {
                Allowed::AtLeast(0.0).check("current", current.value, "A")?;
                current * voltage
            }
            Self::Resistive { power, at } => {
                Allowed::Above(0.0).check("voltage at which the power is stated", at.get::<volt>(), "V")?;
                let part = voltage / at;
                power * part * part
            }
        };
        Allowed::AtLeast(0.0).check("power", power.value, "W")?;
        Ok(power)
    }

    /// Current of one unit at a voltage.
    ///
    /// # Errors
    /// As [`Draw::power_at`].
    ///
    /// # Example
    /// 60 W stated at 24 V, at 21 V: electronics take more, a heater less.
    /// ```
    /// use ampwright::{load::Draw, quantity::{parse, readable}};
    /// let electronics = Draw::Power(parse("60 W")?).current_at(parse("21 V")?)?;
    /// let heater = Draw::Resistive { power: parse("60 W")?, at: parse("24 V")? }.current_at(parse("21 V")?)?;
    /// assert_eq!((readable(electronics).to_string(), readable(heater).to_string()), ("2.86 A".into(), "2.19 A".into()));
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn current_at(self, voltage: ElectricPotential) -> Result<ElectricCurrent, Error> {
        let current = self.power_at(voltage)? / voltage;
        Allowed::AtLeast(0.0).check("current", current.get::<ampere>(), "A")?;
        Ok(current)
    }
}

/// On which side of an inverter a load hangs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Terminals {
    /// On direct current.
    Dc,
    /// Behind an inverter.
    Ac {
        /// Power factor, above 0 and at most 1.
        power_factor: Ratio,
    },
}

/// Which day an energy is told for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Day {
    /// A day on which every load of the month runs: what a bank must bear.
    Full,
    /// The mean over the week: what an array or an engine must bring.
    Mean,
}

/// For what an energy is told.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Conditions {
    /// Month, 1 to 12.
    pub month: u8,
    /// Around the loads.
    pub ambient: ThermodynamicTemperature,
    /// At the loads: matters to those of constant current and constant resistance.
    pub voltage: ElectricPotential,
    /// Which day.
    pub day: Day,
}

/// Least and greatest ambient of a month.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct AmbientRange {
    /// Least.
    pub least: ThermodynamicTemperature,
    /// Greatest.
    pub greatest: ThermodynamicTemperature,
}

/// One load, or several alike on one schedule.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Load {
    /// How one of them draws.
    pub draw: Draw,
    /// How many there are, at least 1.
    pub count: u32,
    /// Direct current, or behind an inverter.
    pub terminals: Terminals,
    /// When they run.
    pub schedule: Schedule,
    /// Part of that time for which they draw.
    pub duty: Duty,
    /// What they take while they start, where it differs.
    pub start: Option<Start>,
    /// Order of shedding: 0 is shed last, the greatest number first.
    pub priority: u8,
    /// Draws whether or not anybody uses the place: controllers, monitors, alarms, idle inverters.
    pub standing: bool,
}

impl Load {
    /// One load that runs all the time, on direct current.
    ///
    /// ```
    /// use ampwright::{load::{Draw, Load, Schedule}, quantity::parse};
    /// let lamp = Load { schedule: Schedule::hours(parse("4 h")?)?, ..Load::new(Draw::Power(parse("18 W")?)) };
    /// assert_eq!(lamp.count, 1);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn new(draw: Draw) -> Self {
        Self {
            draw,
            count: 1,
            terminals: Terminals::Dc,
            schedule: Schedule::CONTINUOUS,
            duty: Duty::full(),
            start: None,
            priority: 0,
            standing: false,
        }
    }

    /// Power of all of them while they draw.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where draw, voltage, count, power factor or start are outside their ranges;
    /// [`Error::Contradiction`] where an AC load is not stated by its power, or more units start than there are.
    pub fn power_at(&self, voltage: ElectricPotential) -> Result<Power, Error> {
        self.check()?;
        let one = match (self.terminals, self.draw) {
            // The inverter holds the voltage for which it is stated.
            (Terminals::Ac { .. }, Draw::Resistive { power, .. }) => Draw::Power(power),
            (_, draw) => draw,
        };
        let power = one.power_at(voltage)? * f64::from(self.count);
        Allowed::AtLeast(0.0).check("power", power.value, "W")?;
        Ok(power)
    }

    /// Current of all of them while they draw: on the DC side for a DC load. `None` behind an inverter, whose current is
    /// the inverter's.
    ///
    /// # Errors
    /// As [`Load::power_at`].
    pub fn current_at(&self, voltage: ElectricPotential) -> Result<Option<ElectricCurrent>, Error> {
        let current = self.power_at(voltage)? / voltage;
        Allowed::AtLeast(0.0).check("current", current.get::<ampere>(), "A")?;
        Ok(match self.terminals {
            Terminals::Dc => Some(current),
            Terminals::Ac { .. } => None,
        })
    }

    /// Volt-amperes of all of them while they draw; for DC loads the watts.
    ///
    /// # Errors
    /// As [`Load::power_at`].
    pub fn apparent_at(&self, voltage: ElectricPotential) -> Result<Power, Error> {
        let power = self.power_at(voltage)?;
        let apparent = match self.terminals {
            Terminals::Dc => power,
            Terminals::Ac { power_factor } => power / power_factor,
        };
        Allowed::AtLeast(0.0).check("apparent power", apparent.value, "W")?;
        Ok(apparent)
    }

    /// What a start adds to the running current, in parts of the running current of all of them; 0 without a start.
    ///
    /// Times running watts, amperes or volt-amperes it is what comes on top of the coincident sum. The watts of a locked
    /// rotor are less than this, since its power factor is low: for them it lies on the high side.
    ///
    /// # Errors
    /// As [`Load::power_at`].
    pub fn start_extra(&self) -> Result<Ratio, Error> {
        self.check()?;
        let units = self.start.map_or(0.0, |start| {
            (start.multiple.value - 1.0) * f64::from(start.at_once) / f64::from(self.count)
        });
        Ok(Ratio::new::<uom::si::ratio::ratio>(units))
    }

    /// Energy of a day, at the load's terminals.
    ///
    /// # Errors
    /// As [`Load::power_at`]; [`Error::OutOfRange`] where the month is not 1 to 12 or the ambient not −90 to 150 °C.
    pub fn daily_energy(&self, at: &Conditions) -> Result<Energy, Error> {
        let power = self.power_at(at.voltage)?;
        let duty = self.duty.at(at.ambient)?;
        if !self.schedule.months().contains(checked_month(at.month)?) {
            return Ok(Energy::new::<uom::si::energy::joule>(0.0));
        }
        let hours: Time = match at.day {
            Day::Full => self.schedule.hours_on_a_day(),
            Day::Mean => self.schedule.mean_hours(),
        };
        let energy = power * (hours * duty);
        Allowed::AtLeast(0.0).check("energy", energy.value, "J")?;
        Ok(energy)
    }

    /// Half-hours and months in which it may draw.
    ///
    /// With the ambients of the twelve months, January first, those months are left out in which its duty is 0
    /// throughout: a heater does not meet the summer. Without them the schedule alone counts.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where an ambient is not −90 to 150 °C.
    pub fn occasion(&self, ambient: Option<&[AmbientRange; 12]>) -> Result<Occasion, Error> {
        let mut months = self.schedule.months();
        if let Some(ambient) = ambient {
            for (month, range) in (1u8..).zip(ambient) {
                if self.duty.greatest(range.least, range.greatest)?.value <= 0.0 {
                    months = months.filter(|other| other != month);
                }
            }
        }
        Ok(Occasion::new(self.schedule.half_hours(), months))
    }

    /// Whether it may run for three hours or more without a break. A duty below 1 does not shorten it: in a hot hour a
    /// compressor does not stop.
    pub fn is_continuous(&self) -> bool {
        self.schedule.longest_run() >= Time::new::<uom::si::time::hour>(3.0)
    }

    fn check(&self) -> Result<(), Error> {
        Allowed::AtLeast(1.0).check("count", f64::from(self.count), "")?;
        if let Some(start) = self.start {
            start.check()?;
            if start.at_once > self.count {
                return Err(Error::Contradiction {
                    name: "units that start at once",
                    value: f64::from(start.at_once),
                    unit: "",
                    why: "there are not so many of this load",
                });
            }
        }
        if let Terminals::Ac { power_factor } = self.terminals {
            Allowed::AboveUpTo(0.0, 1.0).check("power factor", power_factor.value, "")?;
            if let Draw::Current(current) = self.draw {
                return Err(Error::Contradiction {
                    name: "current",
                    value: current.value,
                    unit: "A",
                    why: "a load behind an inverter does not see the bank's voltage; state its power",
                });
            }
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use uom::si::energy::watt_hour;
    use uom::si::power::watt;
    use uom::si::ratio::ratio;

    use super::*;
    use crate::load::{Months, Slot};
    use crate::quantity::{Textual, parse};

    fn q<Q: Textual>(text: &str) -> Q {
        parse(text).unwrap()
    }

    fn lamp() -> Load {
        Load { count: 3, ..Load::new(Draw::Power(q("10 W"))) }
    }

    #[test]
    fn kinds_part_where_the_voltage_does() {
        let draws = [
            Draw::Power(q("48 W")),
            Draw::Current(q("2 A")),
            Draw::Resistive { power: q("48 W"), at: q("24 V") },
        ];
        let watts = |volts: f64| {
            let voltage = ElectricPotential::new::<volt>(volts);
            draws.map(|draw| draw.power_at(voltage).unwrap().value)
        };
        assert_eq!(watts(24.0), [48.0, 48.0, 48.0]);
        assert_eq!(watts(12.0), [48.0, 24.0, 12.0]);
        let amperes = draws.map(|draw| draw.current_at(q("12 V")).unwrap().value);
        assert_eq!(amperes, [4.0, 2.0, 1.0]);
    }

    #[test]
    fn a_resistive_load_behind_an_inverter_does_not_see_the_bank() {
        let heater = Load {
            terminals: Terminals::Ac { power_factor: q("1") },
            ..Load::new(Draw::Resistive { power: q("500 W"), at: q("230 V") })
        };
        assert_eq!(heater.power_at(q("21 V")), Ok(q("500 W")));
        assert_eq!(heater.current_at(q("21 V")), Ok(None));
    }

    #[test]
    fn an_energy_is_power_by_hours_by_duty_by_days() {
        let load = Load {
            schedule: Schedule::windows(&["22:00-02:00".parse().unwrap()])
                .unwrap()
                .on_days(2)
                .unwrap()
                .in_months(Months::from_to(11, 1).unwrap()),
            duty: Duty::constant(q("25 %")).unwrap(),
            ..lamp()
        };
        let at = |month, day| {
            let conditions = Conditions { month, ambient: q("20 degC"), voltage: q("24 V"), day };
            load.daily_energy(&conditions).map(|energy| energy.get::<watt_hour>())
        };
        // 3 · 10 W · 4 h · 0.25.
        assert!((at(12, Day::Full).unwrap() - 30.0).abs() < 1e-12);
        assert!((at(12, Day::Mean).unwrap() - 60.0 / 7.0).abs() < 1e-12);
        assert_eq!(at(6, Day::Full), Ok(0.0));
        assert!(at(0, Day::Full).is_err() && at(13, Day::Full).is_err());
    }

    #[test]
    fn starts_count_units_that_start_at_once() {
        let pump = |count, at_once| {
            let start = Some(Start { multiple: q("4"), duration: None, at_once });
            Load { count, start, ..Load::new(Draw::Power(q("100 W"))) }.start_extra().map(|part| part.value)
        };
        // One of two adds 3 · 100 W to 200 W.
        assert_eq!(pump(2, 1), Ok(1.5));
        assert_eq!(pump(2, 2), Ok(3.0));
        assert!(matches!(pump(2, 3), Err(Error::Contradiction { name: "units that start at once", .. })));
        assert!(pump(2, 0).is_err());
        assert_eq!(lamp().start_extra().map(|part| part.value), Ok(0.0));
    }

    #[test]
    fn a_load_of_no_duty_in_a_month_does_not_occur_in_it() {
        let heater =
            Load { duty: Duty::between(q("0 degC"), q("60 %"), q("15 degC"), q("0 %")).unwrap(), ..lamp() };
        let mut year = [AmbientRange { least: q("16 degC"), greatest: q("30 degC") }; 12];
        year[0] = AmbientRange { least: q("-20 degC"), greatest: q("0 degC") };
        // A single cold night is enough.
        year[4] = AmbientRange { least: q("14.9 degC"), greatest: q("30 degC") };
        let occasion = heater.occasion(Some(&year)).unwrap();
        for month in 1..=12 {
            assert_eq!(occasion.contains(Slot { month, half_hour: 0 }), month == 1 || month == 5, "{month}");
        }
        // Without ambients nothing is left out.
        assert_eq!(heater.occasion(None), Ok(Occasion::ALWAYS));
        year[7].greatest = q("200 degC");
        assert!(heater.occasion(Some(&year)).is_err());
    }

    #[test]
    fn three_hours_are_continuous() {
        let of = |window: &str| {
            let schedule = Schedule::windows(&[window.parse().unwrap()]).unwrap();
            Load { schedule, ..lamp() }.is_continuous()
        };
        assert!(of("22:30-01:30") && !of("22:30-01:29") && lamp().is_continuous());
    }

    #[test]
    fn figures_out_of_range_are_errors() {
        let volts = ElectricPotential::new::<volt>;
        for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -1.0] {
            let power = Load::new(Draw::Power(Power::new::<watt>(bad)));
            assert!(power.power_at(q("24 V")).is_err(), "{bad}");
            assert!(
                Load::new(Draw::Current(ElectricCurrent::new::<ampere>(bad))).current_at(q("24 V")).is_err()
            );
            let at = volts(bad);
            assert!(Draw::Resistive { power: q("1 W"), at }.power_at(q("24 V")).is_err(), "{bad}");
            assert!(lamp().power_at(volts(bad)).is_err() && lamp().apparent_at(volts(bad)).is_err(), "{bad}");
            let terminals = Terminals::Ac { power_factor: Ratio::new::<ratio>(bad) };
            assert!(Load { terminals, ..lamp() }.apparent_at(q("24 V")).is_err(), "{bad}");
        }
        assert!(lamp().power_at(volts(0.0)).is_err());
        assert!(Load { count: 0, ..lamp() }.power_at(q("24 V")).is_err());
        let terminals = Terminals::Ac { power_factor: q("0.8") };
        let reactive = Load { terminals, ..lamp() }.apparent_at(q("24 V")).unwrap();
        assert_eq!(reactive.get::<watt>(), 37.5);
        let current = Load { terminals, ..Load::new(Draw::Current(q("1 A"))) };
        assert!(matches!(current.power_at(q("24 V")), Err(Error::Contradiction { name: "current", .. })));
        // Larger than any number.
        assert!(Load::new(Draw::Power(Power::new::<watt>(f64::MAX))).current_at(volts(1e-300)).is_err());
    }
}
