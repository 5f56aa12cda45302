//! Inverters: what they deliver, what they draw for it, and how long a surge lasts.
//!
//! The current at the lowest voltage and after the drop is the line's affair ([`crate::law::constant_power_current`]);
//! here stands how much power goes in for what comes out.

use uom::si::energy::joule;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::time::{hour, second};

use super::efficiency::EfficiencyCurve;
use super::heat::{HeatDerating, heat_factor};
use super::inrush::{Inrush, inrush_current};
use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::law::{constant_power_current, inverter_input_current};
use crate::quantity::{
    Capacitance, ElectricCurrent, ElectricPotential, ElectricalResistance, Energy, Power, Ratio,
    ThermodynamicTemperature, Time,
};

/// Power that an inverter bears for a short time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Surge {
    /// Volt-amperes.
    pub power: Power,
    /// For so long.
    pub duration: Time,
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
        Allowed::AtLeast(0.0).check("output power", output.get::<watt>(), "W")?;
        let (load, idle) = (output / self.continuous, self.idle / self.continuous);
        let input = self.continuous * self.efficiency.input(load.value, idle.value);
        Allowed::AtLeast(0.0).check("input power", input.get::<watt>(), "W")?;
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

    /// What it delivers without end at an ambient: real power, apparent power.
    ///
    /// Without a derating, full power at any ambient: whether the ambient counted is told by [`Inverter::judge`].
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the ambient is not −90 to 150 °C, or the inverter's own figures are out of range.
    pub fn continuous_at(&self, ambient: ThermodynamicTemperature) -> Result<(Power, Power), Error> {
        self.check()?;
        let factor = self.heat_part(ambient)?;
        let (power, apparent) = self.full();
        Ok((power * factor, apparent * factor))
    }

    /// Part of its power that is left at an ambient; 1 where no derating is stated.
    pub(super) fn heat_part(&self, ambient: ThermodynamicTemperature) -> Result<Ratio, Error> {
        self.derating.map_or(Ok(Ratio::new::<ratio>(1.0)), |derating| {
            heat_factor(ambient, derating.from, derating.per_kelvin, derating.greatest)
        })
    }

    /// Inrush when its switch closes on empty capacitors; `None` where their capacitance is not stated, so that it is
    /// not checked.
    ///
    /// # Errors
    /// As [`inrush_current`].
    pub fn inrush(
        &self,
        voltage: ElectricPotential,
        loop_resistance: ElectricalResistance,
    ) -> Result<Option<Inrush>, Error> {
        self.input_capacitance
            .map(|capacitance| inrush_current(voltage, loop_resistance, capacitance))
            .transpose()
    }

    /// Energy of a day on its DC side, idle power included, for a steady load while it is on.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the energy is negative, or the hours not above 0 and at most 24.
    pub fn daily_energy(&self, ac_energy: Energy, hours_on: Time) -> Result<Energy, Error> {
        let hours = hours_on.get::<hour>();
        Allowed::AboveUpTo(0.0, 24.0).check("hours_on", hours, "h")?;
        let energy = self.input_power(ac_energy / hours_on)? * hours_on;
        Allowed::Finite.check("energy", energy.get::<joule>(), "J")?;
        Ok(energy)
    }

    pub(super) fn full(&self) -> (Power, Power) {
        (self.continuous, self.apparent.unwrap_or(self.continuous))
    }

    pub(super) fn check(&self) -> Result<(), Error> {
        Allowed::Above(0.0).check("continuous power", self.continuous.get::<watt>(), "W")?;
        Allowed::Above(0.0).check("apparent power", self.full().1.get::<watt>(), "W")?;
        Allowed::AtLeast(0.0).check("idle power", self.idle.get::<watt>(), "W")?;
        Allowed::Above(0.0).check("lowest voltage", self.lowest_voltage.value, "V")
    }
}

calculations! {
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

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::energy::watt_hour;

    use super::*;
    use crate::quantity::parse;

    fn inverter(watts: f64, efficiency: f64, idle: f64) -> Inverter {
        let w = Power::new::<watt>;
        Inverter::plain(w(watts), Ratio::new::<ratio>(efficiency), w(idle), parse("10.5 V").unwrap()).unwrap()
    }

    #[test]
    fn at_full_load_the_feed_of_the_circuit_and_ours_are_one() {
        // 800/0.85/10.5, the figure of R3.
        let current = inverter(800.0, 0.85, 20.0).greatest_input_current(parse("800 W").unwrap()).unwrap();
        assert!((current.value - 800.0 / 0.85 / 10.5).abs() < 1e-12);
    }

    #[test]
    fn the_point_at_the_end_of_a_line_balances() {
        let inverter = inverter(1000.0, 0.9, 20.0);
        let (u, r) = (parse("12 V").unwrap(), parse("5 mohm").unwrap());
        let point = inverter.at_end_of_line(parse("500 W").unwrap(), u, r).unwrap();
        assert!((point.voltage * point.current / point.power).value - 1.0 < 1e-12);
        assert!((12.0 - 0.005 * point.current.value - point.voltage.value).abs() < 1e-9);
        assert!(!point.trips);
        let weak = parse("40 mohm").unwrap();
        assert!(matches!(
            inverter.at_end_of_line(parse("1 kW").unwrap(), u, weak),
            Err(Error::NoSolution { .. })
        ));
    }

    #[test]
    fn inrush_is_not_told_without_the_capacitance() {
        let plain = inverter(1000.0, 0.9, 20.0);
        let (u, r) = (parse("26 V").unwrap(), parse("10 mohm").unwrap());
        assert_eq!(plain.inrush(u, r), Ok(None));
        let known = Inverter { input_capacitance: Some(parse("10 mF").unwrap()), ..plain };
        assert!((known.inrush(u, r).unwrap().unwrap().peak.value - 2600.0).abs() < 1e-9);
    }

    proptest! {
        /// The closed form of the catalogue against the curve, hour by hour, for any profile of 24 loads.
        #[test]
        fn a_day_of_any_profile_is_the_closed_form(
            loads in proptest::collection::vec(0.0..1000.0f64, 24),
            efficiency in 0.5..0.97f64,
            idle in 0.0..30.0f64,
        ) {
            // Idle losses within those at full load, as the closed form takes them.
            prop_assume!(idle <= 1000.0 / efficiency - 1000.0);
            let inverter = inverter(1000.0, efficiency, idle);
            let day: f64 = loads.iter().map(|&w| inverter.input_power(Power::new::<watt>(w)).unwrap().value).sum();
            let closed = inverter_daily_energy(
                Energy::new::<watt_hour>(loads.iter().sum()),
                Time::new::<hour>(24.0),
                inverter.continuous,
                Ratio::new::<ratio>(efficiency),
                inverter.idle,
            ).unwrap();
            prop_assert!((closed.total.get::<watt_hour>() / day - 1.0).abs() < 1e-12);
            prop_assert!((closed.idle + closed.converted - closed.total).value.abs() <= 1e-6);
        }
    }

    #[test]
    fn a_steady_day_is_its_hours_times_the_input() {
        let inverter = inverter(1000.0, 0.9, 20.0);
        let day = inverter.daily_energy(parse("1200 Wh").unwrap(), parse("24 h").unwrap()).unwrap();
        let steady = inverter.input_power(parse("50 W").unwrap()).unwrap();
        assert!((day.get::<watt_hour>() - 24.0 * steady.value).abs() < 1e-9);
        for hours in ["0 h", "25 h", "-1 h"] {
            assert!(inverter.daily_energy(parse("1 Wh").unwrap(), parse(hours).unwrap()).is_err());
        }
        // Nothing delivered: idle alone. More than it can deliver in these hours is an error of the closed form.
        let idle = inverter.daily_energy(parse("0 Wh").unwrap(), parse("10 h").unwrap()).unwrap();
        assert!((idle.get::<watt_hour>() - 200.0).abs() < 1e-9);
        assert!(
            inverter_daily_energy(
                parse("1001 Wh").unwrap(),
                parse("1 h").unwrap(),
                parse("1 kW").unwrap(),
                parse("90 %").unwrap(),
                parse("20 W").unwrap()
            )
            .is_err()
        );
    }

    #[test]
    fn figures_out_of_range_are_errors() {
        for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -1.0] {
            let w = Power::new::<watt>(bad);
            let good = inverter(1000.0, 0.9, 20.0);
            assert!(good.input_power(w).is_err() && good.efficiency_at(w).is_err(), "{bad}");
            assert!(Inverter { idle: w, ..good }.input_power(good.idle).is_err(), "{bad}");
            assert!(Inverter { continuous: w, ..good }.input_power(good.idle).is_err(), "{bad}");
            let voltage = ElectricPotential::new::<uom::si::electric_potential::volt>(bad);
            assert!(Inverter { lowest_voltage: voltage, ..good }.input_power(good.idle).is_err(), "{bad}");
            assert!(good.daily_energy(Energy::new::<joule>(bad), parse("1 h").unwrap()).is_err(), "{bad}");
        }
        // Larger than any number.
        assert!(inverter(1000.0, 0.9, 20.0).input_power(Power::new::<watt>(f64::MAX)).is_err());
    }
}
