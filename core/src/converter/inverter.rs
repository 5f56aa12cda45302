//! Inverters: what they deliver, what they draw for it, and how long a surge lasts.
//!
//! The current at the lowest voltage and after the drop is the line's affair ([`crate::law::constant_power_current`]);
//! here stands how much power goes in for what comes out.

use uom::si::energy::joule;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::time::{hour, second};

use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::law::{constant_power_current, inverter_input_current};
use crate::quantity::{
    Capacitance, ElectricCurrent, ElectricPotential, ElectricalResistance, Energy, Power, Ratio,
    RatioPerTemperature, TemperatureInterval, ThermodynamicTemperature, Time,
};

/// Efficiency over load, stated at up to eight loads, linear between them.
///
/// Below the first point the input falls in a straight line to the idle power; above the last its efficiency is held,
/// which flatters a surge. With one figure only, that is taken for full load: the input is then a straight line from
/// idle to full load, so that the figure holds for what is converted and the idle power comes on top.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EfficiencyCurve {
    /// Load as a part of continuous power, efficiency.
    points: [(f64, f64); Self::ROOM],
    count: usize,
}

impl EfficiencyCurve {
    /// How many points it holds.
    pub const ROOM: usize = 8;

    /// One figure.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where it is not above 0 and at most 1.
    pub fn flat(efficiency: Ratio) -> Result<Self, Error> {
        Self::points(&[(Ratio::new::<ratio>(1.0), efficiency)])
    }

    /// Several: load as a part of continuous power, rising, and the efficiency there.
    ///
    /// # Errors
    /// [`Error::WrongCount`] with none or more than eight; [`Error::OutOfRange`] where a load is not above 0 and at most
    /// 4 or an efficiency not above 0 and at most 1; [`Error::Contradiction`] where loads do not rise, or where more
    /// would come out for less that goes in.
    ///
    /// # Example
    /// ```
    /// use ampwright::{converter::EfficiencyCurve, quantity::parse};
    /// let curve = [("10 %", "85 %"), ("30 %", "94 %"), ("100 %", "90 %")];
    /// let curve = curve.map(|(load, efficiency)| (parse(load).unwrap(), parse(efficiency).unwrap()));
    /// assert!(EfficiencyCurve::points(&curve).is_ok());
    /// ```
    pub fn points(points: &[(Ratio, Ratio)]) -> Result<Self, Error> {
        if points.is_empty() || points.len() > Self::ROOM {
            return Err(Error::WrongCount {
                what: "points of efficiency",
                given: points.len(),
                needed: Self::ROOM,
            });
        }
        let mut curve = Self { points: [(0.0, 0.0); Self::ROOM], count: points.len() };
        let mut before = (0.0, 0.0);
        for (cell, &(load, efficiency)) in curve.points.iter_mut().zip(points) {
            let (load, efficiency) = (load.value, efficiency.value);
            above_up_to("load", load, 4.0)?;
            above_up_to("efficiency", efficiency, 1.0)?;
            let input = load / efficiency;
            if load <= before.0 || input <= before.1 {
                let why = if load <= before.0 {
                    "the loads of a curve must rise"
                } else {
                    "more would come out for less that goes in; check the efficiencies beside it"
                };
                return Err(Error::Contradiction { name: "load", value: load, unit: "", why });
            }
            before = (load, input);
            *cell = (load, efficiency);
        }
        Ok(curve)
    }

    /// Input over continuous power, for a load and an idle power over continuous power.
    fn input(&self, load: f64, idle: f64) -> f64 {
        let points = self.points.get(..self.count).unwrap_or_default();
        let (mut low, mut input) = ((0.0, f64::NAN), f64::NAN);
        for &(at, efficiency) in points {
            if load <= at {
                input = if low.0 > 0.0 {
                    load / (low.1 + (efficiency - low.1) * (load - low.0) / (at - low.0))
                } else {
                    load / efficiency + idle * (1.0 - load / at)
                };
                break;
            }
            low = (at, efficiency);
        }
        if input.is_nan() {
            input = load / low.1;
        }
        // Whatever the points say, an inverter at work loses no less than an idle one.
        input.max(load + idle)
    }
}

/// Power that an inverter bears for a short time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Surge {
    /// Volt-amperes.
    pub power: Power,
    /// For so long.
    pub duration: Time,
}

/// Loss of continuous power in heat, as the maker states it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct HeatDerating {
    /// Full power up to here.
    pub from: ThermodynamicTemperature,
    /// Part of full power that is lost for each kelvin above.
    pub per_kelvin: RatioPerTemperature,
    /// Above this it does not run.
    pub greatest: ThermodynamicTemperature,
}

/// An inverter, as its sheet states it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Inverter {
    /// Real power that it delivers without end.
    pub continuous: Power,
    /// Apparent power that it delivers without end, volt-amperes; `None`: the same figure as the watts.
    pub apparent: Option<Power>,
    /// Surge, if stated.
    pub surge: Option<Surge>,
    /// Efficiency.
    pub efficiency: EfficiencyCurve,
    /// What it draws without a load.
    pub idle: Power,
    /// Voltage at its terminals at which it stops.
    pub lowest_voltage: ElectricPotential,
    /// Heat, if stated.
    pub derating: Option<HeatDerating>,
    /// Capacitors at its DC input, if stated.
    pub input_capacitance: Option<Capacitance>,
}

/// What an inverter does at the end of its line.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct InverterPoint {
    /// Power at its DC terminals.
    pub power: Power,
    /// Current through the line.
    pub current: ElectricCurrent,
    /// At its DC terminals.
    pub voltage: ElectricPotential,
    /// Whether that voltage is below the one at which it stops: it does not run there.
    pub trips: bool,
}

/// What an inverter is asked for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct InverterDemand {
    /// Greatest coincident real power of the AC loads.
    pub power: Power,
    /// Greatest coincident apparent power, volt-amperes.
    pub apparent: Power,
    /// Greatest apparent power with the largest start, volt-amperes.
    pub starting: Power,
    /// How long that start lasts; `None`: not known.
    pub duration: Option<Time>,
    /// Around the inverter; `None`: not known.
    pub ambient: Option<ThermodynamicTemperature>,
}

/// One comparison of an inverter with what it is asked for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Suffices {
    /// It does.
    Yes {
        /// What it gives.
        given: Power,
        /// What is asked.
        asked: Power,
    },
    /// It does not.
    No {
        /// What it gives.
        given: Power,
        /// What is asked.
        asked: Power,
    },
    /// Too short: it bears the power, but not for so long.
    TooShort {
        /// How long it bears it.
        given: Time,
        /// How long the start lasts.
        asked: Time,
    },
    /// Not checked for want of a datum.
    NotChecked {
        /// Which one: `surge rating`.
        missing: &'static str,
    },
}

impl Suffices {
    /// Whether it was checked and suffices.
    pub const fn passes(&self) -> bool {
        matches!(self, Self::Yes { .. })
    }

    fn compare(given: Power, asked: Power) -> Self {
        if asked <= given { Self::Yes { given, asked } } else { Self::No { given, asked } }
    }
}

/// How an inverter stands to what it is asked for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct InverterVerdict {
    /// Watts without end.
    pub power: Suffices,
    /// Volt-amperes without end.
    pub apparent: Suffices,
    /// Start.
    pub start: Suffices,
    /// Heat: `None` where the ambient counted; else what was missing.
    pub heat: Option<&'static str>,
}

impl InverterVerdict {
    /// Whether all three were checked and suffice. Where heat was not checked, that is to be told beside it.
    pub const fn passes(&self) -> bool {
        self.power.passes() && self.apparent.passes() && self.start.passes()
    }
}

impl Inverter {
    /// An inverter of which only this is known.
    ///
    /// # Errors
    /// As [`EfficiencyCurve::flat`]; the other figures are checked where they are used.
    pub fn plain(
        continuous: Power,
        efficiency: Ratio,
        idle: Power,
        lowest_voltage: ElectricPotential,
    ) -> Result<Self, Error> {
        let inverter = Self {
            continuous,
            apparent: None,
            surge: None,
            efficiency: EfficiencyCurve::flat(efficiency)?,
            idle,
            lowest_voltage,
            derating: None,
            input_capacitance: None,
        };
        inverter.check().map(|()| inverter)
    }

    /// Power at its DC terminals for a power delivered.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the power is negative or not finite, or the inverter's own figures are out of range.
    ///
    /// # Example
    /// 1 kW at 90 %, 20 W idle: full load, a tenth of it, nothing.
    /// ```
    /// use ampwright::{converter::Inverter, quantity::{parse, readable}};
    /// let inverter = Inverter::plain(parse("1 kW")?, parse("90 %")?, parse("20 W")?, parse("10.5 V")?)?;
    /// let input = |out| inverter.input_power(parse(out)?).map(|power| readable(power).to_string());
    /// assert_eq!([input("1 kW")?, input("100 W")?, input("0 W")?], ["1.111 kW", "129.1 W", "20 W"]);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn input_power(&self, output: Power) -> Result<Power, Error> {
        self.check()?;
        at_least("output power", output, 0.0)?;
        let (load, idle) = (output / self.continuous, self.idle / self.continuous);
        let input = self.continuous * self.efficiency.input(load.value, idle.value);
        at_least("input power", input, 0.0)?;
        Ok(input)
    }

    /// Efficiency at a power delivered; 0 without a load.
    ///
    /// # Errors
    /// As [`Inverter::input_power`].
    pub fn efficiency_at(&self, output: Power) -> Result<Ratio, Error> {
        let input = self.input_power(output)?;
        Ok(if output.value > 0.0 { output / input } else { Ratio::new::<ratio>(0.0) })
    }

    /// Greatest current that it draws for a power delivered: at the voltage at which it stops.
    ///
    /// # Errors
    /// As [`Inverter::input_power`].
    pub fn greatest_input_current(&self, output: Power) -> Result<ElectricCurrent, Error> {
        inverter_input_current(self.input_power(output)?, self.lowest_voltage, Ratio::new::<ratio>(1.0))
    }

    /// What it does at the end of a line, for a power delivered.
    ///
    /// # Errors
    /// As [`Inverter::input_power`]; [`Error::NoSolution`] where the line cannot carry the power.
    ///
    /// # Example
    /// 1 kW at 90 % through 10 mΩ from 21 V, stopping at 20.5 V: it does not run.
    /// ```
    /// use ampwright::{converter::Inverter, quantity::{parse, readable}};
    /// let inverter = Inverter::plain(parse("1 kW")?, parse("90 %")?, parse("20 W")?, parse("20.5 V")?)?;
    /// let point = inverter.at_end_of_line(parse("1 kW")?, parse("21 V")?, parse("10 mohm")?)?;
    /// assert_eq!(readable(point.voltage).to_string(), "20.5 V");
    /// assert!(point.trips);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn at_end_of_line(
        &self,
        output: Power,
        source_voltage: ElectricPotential,
        loop_resistance: ElectricalResistance,
    ) -> Result<InverterPoint, Error> {
        let power = self.input_power(output)?;
        let point = constant_power_current(source_voltage, loop_resistance, power)?;
        let (current, voltage) = (point.current, point.load_voltage);
        Ok(InverterPoint { power, current, voltage, trips: voltage < self.lowest_voltage })
    }

    /// What it delivers without end at an ambient, real and apparent power.
    ///
    /// Without a derating, full power at any ambient: whether the ambient counted is told by [`Inverter::judge`].
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the ambient is not −90 to 150 °C, or the inverter's own figures are out of range.
    pub fn continuous_at(&self, ambient: ThermodynamicTemperature) -> Result<(Power, Power), Error> {
        self.check()?;
        let factor = match self.derating {
            None => 1.0,
            Some(derating) => {
                heat_factor(ambient, derating.from, derating.per_kelvin, derating.greatest)?.value
            }
        };
        let apparent = self.apparent.unwrap_or(self.continuous);
        Ok((self.continuous * factor, apparent * factor))
    }

    /// Compares it with what is asked.
    ///
    /// A start that stays within the continuous apparent power needs no surge rating; any other must stay within the
    /// surge power for no longer than the surge lasts.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where a figure of either is out of range.
    ///
    /// # Example
    /// ```
    /// use ampwright::converter::{Inverter, InverterDemand, Suffices, Surge};
    /// use ampwright::quantity::parse;
    /// let plain = Inverter::plain(parse("1 kW")?, parse("90 %")?, parse("20 W")?, parse("10.5 V")?)?;
    /// let freezer = InverterDemand {
    ///     power: parse("480 W")?, apparent: parse("600 W")?, starting: parse("1.8 kW")?,
    ///     duration: Some(parse("1 s")?), ambient: None,
    /// };
    /// assert_eq!(plain.judge(&freezer)?.start, Suffices::NotChecked { missing: "surge rating" });
    /// let surge = Some(Surge { power: parse("2 kW")?, duration: parse("5 s")? });
    /// assert!(Inverter { surge, ..plain }.judge(&freezer)?.passes());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn judge(&self, demand: &InverterDemand) -> Result<InverterVerdict, Error> {
        self.check()?;
        for (name, power) in [
            ("power", demand.power),
            ("apparent power", demand.apparent),
            ("starting power", demand.starting),
        ] {
            at_least(name, power, 0.0)?;
        }
        let ((power, apparent), heat) = match (demand.ambient, self.derating) {
            (Some(ambient), Some(_)) => (self.continuous_at(ambient)?, None),
            (None, Some(_)) => (self.full(), Some("ambient of the inverter")),
            (_, None) => (self.full(), Some("derating of the inverter in heat")),
        };
        Ok(InverterVerdict {
            power: Suffices::compare(power, demand.power),
            apparent: Suffices::compare(apparent, demand.apparent),
            start: self.start(demand, apparent)?,
            heat,
        })
    }

    fn start(&self, demand: &InverterDemand, apparent: Power) -> Result<Suffices, Error> {
        if demand.starting <= apparent {
            return Ok(Suffices::Yes { given: apparent, asked: demand.starting });
        }
        let Some(surge) = self.surge else { return Ok(Suffices::NotChecked { missing: "surge rating" }) };
        at_least("surge power", surge.power, 0.0)?;
        seconds_at_least_0("surge duration", surge.duration)?;
        if demand.starting > surge.power {
            return Ok(Suffices::No { given: surge.power, asked: demand.starting });
        }
        let Some(asked) = demand.duration else {
            return Ok(Suffices::NotChecked { missing: "duration of the start" });
        };
        seconds_at_least_0("duration of the start", asked)?;
        Ok(if asked <= surge.duration {
            Suffices::Yes { given: surge.power, asked: demand.starting }
        } else {
            Suffices::TooShort { given: surge.duration, asked }
        })
    }

    /// Energy of a day on its DC side, idle power included, for a steady load while it is on.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the energy is negative, or the hours not above 0 and at most 24.
    pub fn daily_energy(&self, ac_energy: Energy, hours_on: Time) -> Result<Energy, Error> {
        let hours = hours_on.get::<hour>();
        // Written so that NaN fails.
        if !(hours > 0.0 && hours <= 24.0) {
            let allowed = Allowed::AboveUpTo(0.0, 24.0);
            return Err(Error::OutOfRange { name: "hours_on", value: hours, unit: "h", allowed });
        }
        let energy = self.input_power(ac_energy / hours_on)? * hours_on;
        let value = energy.get::<joule>();
        if value <= f64::MAX {
            return Ok(energy);
        }
        Err(Error::OutOfRange { name: "energy", value, unit: "J", allowed: Allowed::Finite })
    }

    fn full(&self) -> (Power, Power) {
        (self.continuous, self.apparent.unwrap_or(self.continuous))
    }

    fn check(&self) -> Result<(), Error> {
        above_0("continuous power", self.continuous.get::<watt>(), "W")?;
        above_0("apparent power", self.apparent.unwrap_or(self.continuous).get::<watt>(), "W")?;
        at_least("idle power", self.idle, 0.0)?;
        above_0("lowest voltage", self.lowest_voltage.value, "V")
    }
}

/// The first inverter of a list that passes, with its place; the list is searched in its order, so the preferred one,
/// such as the cheapest, comes first.
///
/// # Errors
/// As [`Inverter::judge`]; [`Error::NoneFits`] where none passes. Why one fails, its own [`Inverter::judge`] tells.
pub fn choose_inverter(
    offers: &[Inverter],
    demand: &InverterDemand,
) -> Result<(usize, InverterVerdict), Error> {
    for (place, offer) in offers.iter().enumerate() {
        let verdict = offer.judge(demand)?;
        if verdict.passes() {
            return Ok((place, verdict));
        }
    }
    Err(Error::NoneFits {
        what: "inverter",
        remedy: "take a larger one, or one with a longer surge, or start the largest load while others are off",
    })
}

fn above_up_to(name: &'static str, value: f64, most: f64) -> Result<(), Error> {
    // Written so that NaN fails.
    if value > 0.0 && value <= most {
        return Ok(());
    }
    Err(Error::OutOfRange { name, value, unit: "", allowed: Allowed::AboveUpTo(0.0, most) })
}

fn above_0(name: &'static str, value: f64, unit: &'static str) -> Result<(), Error> {
    if value > 0.0 && value <= f64::MAX {
        return Ok(());
    }
    Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Above(0.0) })
}

fn at_least(name: &'static str, power: Power, least: f64) -> Result<(), Error> {
    let value = power.get::<watt>();
    if value >= least && value <= f64::MAX {
        return Ok(());
    }
    Err(Error::OutOfRange { name, value, unit: "W", allowed: Allowed::AtLeast(least) })
}

fn seconds_at_least_0(name: &'static str, time: Time) -> Result<(), Error> {
    let value = time.get::<second>();
    if value >= 0.0 && value <= f64::MAX {
        return Ok(());
    }
    Err(Error::OutOfRange { name, value, unit: "s", allowed: Allowed::AtLeast(0.0) })
}

calculations! {
    /// Part of its power that a converter still delivers in heat, by its maker's figures.
    ///
    /// # Example
    /// Full power up to 25 °C, 1 % less for each kelvin above, off above 60 °C; at 40 °C:
    /// ```
    /// use ampwright::{converter::heat_factor, quantity::{parse, readable}};
    /// let at = |ambient| heat_factor(parse(ambient)?, parse("25 degC")?, parse("1 %/K")?, parse("60 degC")?);
    /// assert_eq!(readable(at("40 degC")?).to_string(), "0.85");
    /// assert_eq!(readable(at("61 degC")?).to_string(), "0");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn heat_factor(
        /// Around the converter: in the box, not outside of it.
        ambient: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
        /// Full power up to here.
        from: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
        /// Part lost for each kelvin above.
        per_kelvin: RatioPerTemperature in per_kelvin [0.0 ..= 1.0],
        /// Above this it is off.
        greatest: ThermodynamicTemperature in degree_celsius [-90.0 ..= 150.0],
    ) -> factor: Ratio in ratio
    where (from <= greatest) from in degree_celsius: "it must not be above greatest"
    formula "k = 1 − c·(θ − θ₀) above θ₀, at least 0; 1 below; 0 above the greatest"
    source "form in which makers state it"
    {
        let above = (ambient.value - from.value).max(0.0);
        let lost = per_kelvin * TemperatureInterval::new::<uom::si::temperature_interval::kelvin>(above);
        let runs: f64 = if ambient <= greatest { 1.0 } else { 0.0 };
        Ratio::new::<ratio>((1.0f64 - lost.value).clamp(0.0, 1.0) * runs)
    }

    /// Energy of a day on an inverter's DC side, idle power included.
    ///
    /// For any load profile, as long as one figure of efficiency is all that is known: its input is then a straight line
    /// from idle to full load.
    ///
    /// # Example
    /// 1200 Wh through 1 kW at 90 %, 20 W idle, on for the whole day:
    /// ```
    /// use ampwright::{converter::inverter_daily_energy, quantity::{parse, readable}};
    /// let day = inverter_daily_energy(parse("1200 Wh")?, parse("24 h")?, parse("1 kW")?, parse("90 %")?, parse("20 W")?)?;
    /// assert_eq!(readable(day.total).to_string(), "1.789 kWh");
    /// assert_eq!(readable(day.idle).to_string(), "456 Wh");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn inverter_daily_energy(
        /// Delivered in a day.
        ac_energy: Energy in watt_hour [>= 0.0],
        /// Switched on, loaded or not.
        hours_on: Time in hour [> 0.0 ..= 24.0],
        /// Continuous.
        rated_power: Power in watt [> 0.0],
        /// At full load.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0],
        /// Drawn without a load.
        idle_power: Power in watt [>= 0.0],
    ) => InverterDay {
        /// For what is delivered.
        converted: Energy in watt_hour,
        /// For standing by.
        idle: Energy in watt_hour,
        /// Both.
        total: Energy in watt_hour,
    }
    where (ac_energy <= rated_power * hours_on) ac_energy in watt_hour: "it is more than the inverter delivers in these hours"
    formula "E = E_AC/η + P_idle·(t − E_AC/P_r)"
    source "sum over the day of P/η + P_idle·(1 − P/P_r); that the input is a straight line is common practice, no source"
    {
        let converted = ac_energy / efficiency;
        let idle = idle_power * (hours_on - ac_energy / rated_power).max(Time::new::<second>(0.0));
        InverterDay { converted, idle, total: converted + idle }
    }
}
