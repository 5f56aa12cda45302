//! Sun-hours, and the array-to-load ratio that they give.

use uom::si::radiant_exposure::watt_hour_per_square_meter;

use super::module::STC_W_PER_M2;
use crate::catalogue::calculations;
use crate::quantity::{ElectricCharge, ElectricCurrent, Irradiation, Ratio, Time};

calculations! {
    /// Sun-hours of an irradiation: hours at 1000 W/m² that give as much.
    ///
    /// # Example
    /// ```
    /// use ampwright::{array::sun_hours, quantity::{parse, readable}};
    /// assert_eq!(readable(sun_hours(parse("3.4 kWh/m2")?)?).to_string(), "3.4 h");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn sun_hours(
        /// In the plane of the array, of a day or of any span.
        irradiation: Irradiation in watt_hour_per_square_meter [>= 0.0],
    ) -> duration: Time in hour
    formula "t = H/(1000 W/m²)"
    source "definition of the sun-hour"
    { Time::new::<uom::si::time::hour>(irradiation.get::<watt_hour_per_square_meter>() / STC_W_PER_M2) }

    /// Array-to-load ratio: what an array charges in a day over what the load takes from the bank.
    ///
    /// # Example
    /// Three strings of 5.38 A, 3.1 sun-hours, 10 % lost, 40 Ah a day:
    /// ```
    /// use ampwright::{array::array_to_load_ratio, quantity::{parse, readable}};
    /// let reached = array_to_load_ratio(parse("5.38 A")?, parse("3")?, parse("3.1 h")?, parse("10 %")?, parse("40 Ah")?)?;
    /// assert_eq!(readable(reached).to_string(), "1.126");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn array_to_load_ratio(
        /// Current of one string at maximum power.
        imp: ElectricCurrent in ampere [> 0.0],
        /// Strings in parallel.
        strings: Ratio in ratio [1.0 ..= 10000.0],
        /// Of an average day of the month, in the plane of the array.
        sun_hours: Time in hour [0.0 ..= 24.0],
        /// Part lost to dirt, mismatch, wiring, the controller's own use, and charging.
        losses: Ratio in ratio [0.0 ..= 0.9] = 0.1,
        /// Taken from the bank in a day.
        demand: ElectricCharge in ampere_hour [> 0.0],
    ) -> array_to_load: Ratio in ratio
    formula "A/L = n·Imp·t·(1 − l)/Q"
    source "IEEE 1562-2007, definition of the array-to-load ratio (recalled)"
    { imp * strings * sun_hours * (Ratio::new::<uom::si::ratio::ratio>(1.0) - losses) / demand }
}
