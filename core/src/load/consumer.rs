//! A load: how it draws, when, for how much of that time, and how it starts.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;

use super::coincidence::Occasion;
use super::duty::Duty;
use super::schedule::{Schedule, checked_month};
use super::start::{Start, at_least};
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
        above_zero("voltage", voltage)?;
        let power = match self {
            Self::Power(power) => power,
            Self::Current(current) => {
                at_least("current", current.value, 0.0, "A")?;
                current * voltage
            }
            Self::Resistive { power, at } => {
                above_zero("voltage at which the power is stated", at)?;
                let part = voltage / at;
                power * part * part
            }
        };
        at_least("power", power.value, 0.0, "W")?;
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
        at_least("current", current.get::<ampere>(), 0.0, "A")?;
        Ok(current)
    }
}

fn above_zero(name: &'static str, voltage: ElectricPotential) -> Result<(), Error> {
    let value = voltage.get::<volt>();
    // Written so that NaN fails.
    if value > 0.0 && value <= f64::MAX {
        return Ok(());
    }
    Err(Error::OutOfRange { name, value, unit: "V", allowed: Allowed::Above(0.0) })
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
        let power = self.draw.power_at(voltage)? * f64::from(self.count);
        at_least("power", power.value, 0.0, "W")?;
        Ok(power)
    }

    /// Current of all of them while they draw: on the DC side for a DC load. `None` behind an inverter, whose current is
    /// the inverter's.
    ///
    /// # Errors
    /// As [`Load::power_at`].
    pub fn current_at(&self, voltage: ElectricPotential) -> Result<Option<ElectricCurrent>, Error> {
        let power = self.power_at(voltage)?;
        Ok(match self.terminals {
            Terminals::Dc => Some(power / voltage),
            Terminals::Ac { .. } => None,
        })
    }

    /// Volt-amperes of all of them while they draw; for DC loads the watts.
    ///
    /// # Errors
    /// As [`Load::power_at`].
    pub fn apparent_at(&self, voltage: ElectricPotential) -> Result<Power, Error> {
        let power = self.power_at(voltage)?;
        Ok(match self.terminals {
            Terminals::Dc => power,
            Terminals::Ac { power_factor } => power / power_factor,
        })
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
        at_least("energy", energy.value, 0.0, "J")?;
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
        at_least("count", f64::from(self.count), 1.0, "")?;
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
            // Written so that NaN fails.
            if !(power_factor.value > 0.0 && power_factor.value <= 1.0) {
                let (value, allowed) = (power_factor.value, Allowed::AboveUpTo(0.0, 1.0));
                return Err(Error::OutOfRange { name: "power factor", value, unit: "", allowed });
            }
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
