//! Starts and power factors: what a load takes for seconds, and what an inverter must carry beside the watts.

use uom::si::time::second;

use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{Power, Ratio, Time};

/// A load while it starts.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Start {
    /// Locked-rotor current over rated current, at least 1.
    pub multiple: Ratio,
    /// How long it lasts; `None`: not known, so that no surge rating can be held against it.
    pub duration: Option<Time>,
    /// How many of the load's units start in one moment, at least 1: those on one switch, or all after an outage.
    pub at_once: u32,
}

impl Start {
    /// One unit after the other; the duration may be left open with `None`.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the multiple is below 1, or the duration negative; infinite and NaN too.
    pub fn one_by_one(multiple: Ratio, duration: impl Into<Option<Time>>) -> Result<Self, Error> {
        let start = Self { multiple, duration: duration.into(), at_once: 1 };
        start.check().map(|()| start)
    }

    pub(super) fn check(&self) -> Result<(), Error> {
        Allowed::AtLeast(1.0).check("start multiple", self.multiple.value, "")?;
        if let Some(duration) = self.duration {
            Allowed::AtLeast(0.0).check("start duration", duration.get::<second>(), "s")?;
        }
        Allowed::AtLeast(1.0).check("units that start at once", f64::from(self.at_once), "")
    }
}

calculations! {
    /// Power while a motor starts, beside what else runs.
    ///
    /// Watts or volt-amperes alike, as long as all three are the same. An inverter's surge rating must not be below the
    /// total.
    ///
    /// # Example
    /// A freezer of 480 W that starts with three times its current, while 200 W of other things run:
    /// ```
    /// use ampwright::{load::starting_power, quantity::{parse, readable}};
    /// let start = starting_power(parse("480 W")?, parse("3")?, parse("200 W")?)?;
    /// assert_eq!(readable(start.starting).to_string(), "1.44 kW");
    /// assert_eq!(readable(start.total).to_string(), "1.64 kW");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn starting_power(
        /// Of the motor when it runs.
        running_power: Power in watt [>= 0.0],
        /// Locked-rotor current over rated current.
        multiple: Ratio in ratio [1.0 ..= 20.0],
        /// Everything else that runs meanwhile.
        other_power: Power in watt [>= 0.0] = 0.0,
    ) => StartingPower {
        /// Of the motor alone.
        starting: Power in watt,
        /// What the start adds to the running power.
        extra: Power in watt,
        /// With everything else.
        total: Power in watt,
    }
    formula "P_start = m·P, extra = (m − 1)·P, total = P_other + P_start"
    source "definition of the locked-rotor multiple"
    {
        let starting = running_power * multiple;
        StartingPower { starting, extra: running_power * (multiple.value - 1.0), total: other_power + starting }
    }

    /// Apparent power of an AC load.
    ///
    /// # Example
    /// ```
    /// use ampwright::{load::apparent_power, quantity::{parse, readable}};
    /// let apparent = apparent_power(parse("480 W")?, parse("0.8")?)?; // 600 VA
    /// assert_eq!(readable(apparent).to_string(), "600 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn apparent_power(
        /// Real power.
        power: Power in watt [>= 0.0],
        /// Power factor, displacement and distortion together.
        power_factor: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> apparent: Power in watt
    formula "S = P/λ, in volt-amperes"
    source "definition of the power factor"
    { power / power_factor }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::parse;

    #[test]
    fn a_start_is_never_less_than_running() {
        let start = |multiple: &str, seconds| {
            Start::one_by_one(parse(multiple).unwrap(), Time::new::<second>(seconds))
        };
        assert!(start("1", 0.0).is_ok() && start("6", 2.0).is_ok());
        assert!(start("0.99", 1.0).is_err() && start("2", -1.0).is_err());
        assert!(start("2", f64::NAN).is_err() && start("2", f64::INFINITY).is_err());
        for bad in [f64::NAN, f64::INFINITY] {
            assert!(Start::one_by_one(Ratio::new::<uom::si::ratio::ratio>(bad), None).is_err());
        }
    }

    #[test]
    fn the_parts_of_a_starting_power_add_up() {
        let part =
            starting_power(parse("480 W").unwrap(), parse("3").unwrap(), parse("200 W").unwrap()).unwrap();
        assert_eq!((part.starting.value, part.extra.value, part.total.value), (1440.0, 960.0, 1640.0));
        // At a multiple of 1 a start is running.
        let mild =
            starting_power(parse("480 W").unwrap(), parse("1").unwrap(), parse("0 W").unwrap()).unwrap();
        assert_eq!((mild.extra.value, mild.total.value), (0.0, 480.0));
        assert!(apparent_power(parse("1 W").unwrap(), parse("0").unwrap()).is_err());
    }
}
