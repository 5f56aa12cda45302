//! Energy and charge: of a power or a current over time, of a bank, of the sun.

use uom::si::time::day;

use crate::catalogue::calculations;
use crate::quantity::{ElectricCharge, ElectricCurrent, ElectricPotential, Energy, Power, Ratio, Time};

calculations! {
    /// Energy of a power over a time.
    ///
    /// # Example
    /// A 60 W fridge that runs 8 h a day in all:
    /// ```
    /// use ampwright::{law::energy, quantity::{parse, readable}};
    /// let result = energy(parse("60 W")?, parse("8 h")?)?;
    /// assert_eq!(readable(result).to_string(), "480 Wh");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn energy(
        /// Mean over the time.
        power: Power in watt [any],
        /// How long it lasts.
        duration: Time in hour [>= 0.0],
    ) -> energy: Energy in watt_hour
    formula "W = P·t"
    source "definition of energy"
    { power * duration }

    /// Charge of a current over a time.
    ///
    /// # Example
    /// 5 A for 20 h:
    /// ```
    /// use ampwright::{law::charge, quantity::{parse, readable}};
    /// let result = charge(parse("5 A")?, parse("20 h")?)?;
    /// assert_eq!(readable(result).to_string(), "100 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn charge(
        /// Mean over the time.
        current: ElectricCurrent in ampere [any],
        /// How long it lasts.
        duration: Time in hour [>= 0.0],
    ) -> charge: ElectricCharge in ampere_hour
    formula "Q = I·t"
    source "definition of charge"
    { current * duration }

    /// Energy of a charge at a voltage: what a bank holds by its rating.
    ///
    /// # Example
    /// 12 V, 100 Ah:
    /// ```
    /// use ampwright::{law::energy_of_charge, quantity::{parse, readable}};
    /// let result = energy_of_charge(parse("100 Ah")?, parse("12 V")?)?;
    /// assert_eq!(readable(result).to_string(), "1.2 kWh");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn energy_of_charge(
        /// Charge moved, or rated capacity.
        charge: ElectricCharge in ampere_hour [>= 0.0],
        /// Nominal voltage.
        voltage: ElectricPotential in volt [> 0.0],
    ) -> energy: Energy in watt_hour
    formula "W = Q·U"
    source "definition of voltage"
    { charge * voltage }

    /// Charge that an energy takes at a voltage: the capacity for a bank's energy.
    ///
    /// # Example
    /// 6.5 kWh at 12 V:
    /// ```
    /// use ampwright::{law::charge_of_energy, quantity::{parse, readable}};
    /// let result = charge_of_energy(parse("6.5 kWh")?, parse("12 V")?)?;
    /// assert_eq!(readable(result).to_string(), "542 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn charge_of_energy(
        /// Energy moved, or rated energy.
        energy: Energy in watt_hour [>= 0.0],
        /// Nominal voltage.
        voltage: ElectricPotential in volt [> 0.0],
    ) -> charge: ElectricCharge in ampere_hour
    formula "Q = W/U"
    source "definition of voltage"
    { energy / voltage }

    /// Energy that an array yields in a number of sun-hours.
    ///
    /// A sun-hour is one hour at 1000 W/m², or as much energy spread over more hours.
    ///
    /// # Example
    /// 100 W, 4 sun-hours, nothing lost:
    /// ```
    /// use ampwright::{law::sun_hour_yield, quantity::{parse, readable}};
    /// let result = sun_hour_yield(parse("100 W")?, parse("4 h")?, parse("100 %")?)?;
    /// assert_eq!(readable(result).to_string(), "400 Wh");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn sun_hour_yield(
        /// Rated power of the array.
        power: Power in watt [>= 0.0],
        /// Sun-hours, of a day or of any span.
        sun_hours: Time in hour [>= 0.0],
        /// Part that reaches the bank, after heat, dirt, wiring and controller.
        derate: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> energy: Energy in watt_hour
    formula "W = P·t·f"
    source "definition of the sun-hour"
    { power * sun_hours * derate }

    /// Rated power of an array that yields an energy in a number of sun-hours.
    ///
    /// # Example
    /// 18 kWh a day in 4.5 sun-hours, nothing lost:
    /// ```
    /// use ampwright::{law::sun_hour_power, quantity::{parse, readable}};
    /// let result = sun_hour_power(parse("18 kWh")?, parse("4.5 h")?, parse("100 %")?)?;
    /// assert_eq!(readable(result).to_string(), "4 kW");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn sun_hour_power(
        /// Energy that must reach the bank.
        energy: Energy in watt_hour [>= 0.0],
        /// Sun-hours in which it must.
        sun_hours: Time in hour [> 0.0],
        /// Part that reaches the bank, after heat, dirt, wiring and controller.
        derate: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> power: Power in watt
    formula "P = W/(t·f)"
    source "definition of the sun-hour"
    { energy / sun_hours / derate }

    /// Rated energy that a bank needs to carry a daily demand for a number of days.
    ///
    /// The plain product, for a first look: [`crate::battery`] sizes a bank by the rules of its chemistry.
    ///
    /// # Example
    /// 1 kWh a day for 2.5 days at half depth, at 40 °F (factor 1.3):
    /// ```
    /// use ampwright::{law::bank_energy, quantity::{parse, readable}};
    /// let result = bank_energy(parse("1 kWh")?, parse("2.5 d")?, parse("50 %")?, parse("1.3")?)?;
    /// assert_eq!(readable(result).to_string(), "6.5 kWh");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn bank_energy(
        /// Energy taken from the bank in a day.
        daily_demand: Energy in watt_hour [>= 0.0],
        /// How long the bank must do without a source.
        autonomy: Time in day [> 0.0],
        /// Greatest depth of discharge, as a part of the rated energy.
        depth_of_discharge: Ratio in ratio [> 0.0 ..= 1.0],
        /// What cold and rate ask for beyond that, 1 or more.
        capacity_factor: Ratio in ratio [1.0 ..= 10.0] = 1.0,
    ) -> energy: Energy in watt_hour
    formula "W = W_d·n·f/DoD"
    source "energy balance"
    { daily_demand * (autonomy / Time::new::<day>(1.0)) * capacity_factor / depth_of_discharge }

    /// Energy that may be taken from a bank.
    ///
    /// # Example
    /// 1830 Wh to a depth of 30 %:
    /// ```
    /// use ampwright::{law::usable_energy, quantity::{parse, readable}};
    /// let result = usable_energy(parse("1830 Wh")?, parse("30 %")?, parse("100 %")?)?;
    /// assert_eq!(readable(result).to_string(), "549 Wh");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn usable_energy(
        /// Rated energy.
        rated_energy: Energy in watt_hour [>= 0.0],
        /// Greatest depth of discharge.
        depth_of_discharge: Ratio in ratio [> 0.0 ..= 1.0],
        /// Part that reaches the loads.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0] = 1.0,
    ) -> energy: Energy in watt_hour
    formula "W_u = W·DoD·η"
    source "energy balance"
    { rated_energy * depth_of_discharge * efficiency }

    /// Days that a bank carries its loads without a source.
    ///
    /// # Example
    /// 3.6 kWh usable, 1.2 kWh a day:
    /// ```
    /// use ampwright::{law::days_of_autonomy, quantity::{parse, readable}};
    /// let result = days_of_autonomy(parse("3.6 kWh")?, parse("1.2 kWh")?)?;
    /// assert_eq!(readable(result).to_string(), "3 d");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn days_of_autonomy(
        /// Energy that may be taken from the bank.
        usable_energy: Energy in watt_hour [>= 0.0],
        /// Energy taken in a day.
        daily_demand: Energy in watt_hour [> 0.0],
    ) -> autonomy: Time in day
    formula "n = W_u/W_d"
    source "energy balance"
    { Time::new::<day>((usable_energy / daily_demand).value) }
}
