//! Whether an inverter suffices for what is asked of it, and the first of several that does.

use uom::si::power::watt;
use uom::si::time::second;

use super::inverter::Inverter;
use crate::error::{Allowed, Error};
use crate::quantity::{Power, Ratio, ThermodynamicTemperature, Time};

/// What an inverter is asked for: greatest sums of the loads behind it that coincide.
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
    /// Whether all three were checked and suffice. Where heat did not count, that is to be told beside it.
    pub const fn passes(&self) -> bool {
        self.power.passes() && self.apparent.passes() && self.start.passes()
    }
}

impl Inverter {
    /// Compares it with what is asked.
    ///
    /// A start that stays within the continuous apparent power needs no surge rating; any other must stay within the
    /// surge power for no longer than the surge lasts. Heat takes the same part of surge and continuous power.
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
            Allowed::AtLeast(0.0).check(name, power.get::<watt>(), "W")?;
        }
        let one = Ratio::new::<uom::si::ratio::ratio>(1.0);
        let (part, heat) = match (demand.ambient, self.derating) {
            (Some(ambient), Some(_)) => (self.heat_part(ambient)?, None),
            (None, Some(_)) => (one, Some("ambient of the inverter")),
            (_, None) => (one, Some("derating of the inverter in heat")),
        };
        let (power, apparent) = self.full();
        let (power, apparent) = (power * part, apparent * part);
        Ok(InverterVerdict {
            power: Suffices::compare(power, demand.power),
            apparent: Suffices::compare(apparent, demand.apparent),
            start: self.start(demand, apparent, part)?,
            heat,
        })
    }

    fn start(&self, demand: &InverterDemand, apparent: Power, part: Ratio) -> Result<Suffices, Error> {
        if demand.starting <= apparent {
            return Ok(Suffices::Yes { given: apparent, asked: demand.starting });
        }
        let Some(surge) = self.surge else { return Ok(Suffices::NotChecked { missing: "surge rating" }) };
        Allowed::AtLeast(0.0).check("surge power", surge.power.get::<watt>(), "W")?;
        Allowed::AtLeast(0.0).check("surge duration", surge.duration.get::<second>(), "s")?;
        let given = surge.power * part;
        if demand.starting > given {
            return Ok(Suffices::No { given, asked: demand.starting });
        }
        let Some(asked) = demand.duration else {
            return Ok(Suffices::NotChecked { missing: "duration of the start" });
        };
        Allowed::AtLeast(0.0).check("duration of the start", asked.get::<second>(), "s")?;
        Ok(if asked <= surge.duration {
            Suffices::Yes { given, asked: demand.starting }
        } else {
            Suffices::TooShort { given: surge.duration, asked }
        })
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

#[cfg(test)]
mod tests {
    extern crate std;
    use std::format;

    use super::super::{HeatDerating, Surge};
    use super::*;
    use crate::quantity::parse;

    fn w(watts: f64) -> Power {
        Power::new::<watt>(watts)
    }

    fn s(seconds: f64) -> Time {
        Time::new::<second>(seconds)
    }

    fn inverter() -> Inverter {
        let plain =
            Inverter::plain(w(1000.0), parse("90 %").unwrap(), w(20.0), parse("21 V").unwrap()).unwrap();
        Inverter { surge: Some(Surge { power: w(2000.0), duration: s(5.0) }), ..plain }
    }

    fn asked(running: f64, starting: f64, seconds: f64) -> InverterDemand {
        InverterDemand {
            power: w(running),
            apparent: w(running),
            starting: w(starting),
            duration: Some(s(seconds)),
            ambient: None,
        }
    }

    #[test]
    fn limits_themselves_are_admitted_and_one_step_beyond_is_not() {
        let judge = |demand: InverterDemand| inverter().judge(&demand).unwrap();
        assert!(judge(asked(1000.0, 2000.0, 5.0)).passes());
        assert!(!judge(asked(1000.0f64.next_up(), 2000.0, 5.0)).power.passes());
        assert!(!judge(asked(1000.0, 2000.0f64.next_up(), 5.0)).start.passes());
        let long = judge(asked(1000.0, 2000.0, 5.0f64.next_up())).start;
        assert!(matches!(long, Suffices::TooShort { .. }) && !long.passes());
        // Volt-amperes count beside the watts.
        let reactive = InverterDemand { power: w(700.0), ..asked(1001.0, 1001.0, 0.0) };
        let verdict = judge(reactive);
        assert!(verdict.power.passes() && !verdict.apparent.passes() && !verdict.passes());
    }

    #[test]
    fn what_is_not_stated_is_not_checked() {
        let without = Inverter { surge: None, ..inverter() };
        // A start within the continuous power asks for no surge, however long it is.
        let mild = InverterDemand { duration: None, ..asked(500.0, 900.0, 0.0) };
        assert!(without.judge(&mild).unwrap().passes());
        let hard = asked(500.0, 1001.0, 1.0);
        assert_eq!(without.judge(&hard).unwrap().start, Suffices::NotChecked { missing: "surge rating" });
        let unknown = InverterDemand { duration: None, ..hard };
        let missing = "duration of the start";
        assert_eq!(inverter().judge(&unknown).unwrap().start, Suffices::NotChecked { missing });
        assert_eq!(inverter().judge(&hard).unwrap().heat, Some("derating of the inverter in heat"));
    }

    #[test]
    fn heat_takes_its_part_of_continuous_power_and_surge() {
        let derating = HeatDerating {
            from: parse("25 degC").unwrap(),
            per_kelvin: parse("1 %/K").unwrap(),
            greatest: parse("60 degC").unwrap(),
        };
        let hot = Inverter { derating: Some(derating), ..inverter() };
        let at = |ambient: &str, demand| {
            hot.judge(&InverterDemand { ambient: Some(parse(ambient).unwrap()), ..demand }).unwrap()
        };
        let demand = asked(800.0, 1600.0, 1.0);
        assert!(at("44 degC", demand).passes() && at("44 degC", demand).heat.is_none());
        assert!(!at("46 degC", demand).power.passes() && !at("46 degC", demand).start.passes());
        assert!(!at("61 degC", asked(1.0, 1.0, 0.0)).passes());
        assert_eq!(hot.judge(&demand).unwrap().heat, Some("ambient of the inverter"));
    }

    #[test]
    fn the_first_that_passes_is_chosen() {
        let small = Inverter { surge: None, ..inverter() };
        let demand = asked(500.0, 1500.0, 1.0);
        let (place, verdict) = choose_inverter(&[small, inverter(), inverter()], &demand).unwrap();
        assert!(place == 1 && verdict.passes());
        let none = choose_inverter(&[small], &demand).unwrap_err();
        assert!(format!("{none}").starts_with("no inverter passes every check; take a larger one"), "{none}");
        assert!(choose_inverter(&[], &demand).is_err());
    }

    #[test]
    fn figures_out_of_range_are_errors_wherever_they_stand() {
        for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -1.0] {
            let demand = asked(500.0, 1500.0, 1.0);
            for wrong in [
                InverterDemand { power: w(bad), ..demand },
                InverterDemand { apparent: w(bad), ..demand },
                InverterDemand { starting: w(bad), ..demand },
                InverterDemand { duration: Some(s(bad)), ..demand },
            ] {
                assert!(inverter().judge(&wrong).is_err(), "{bad}");
            }
            for wrong in [
                Inverter { continuous: w(bad), ..inverter() },
                Inverter { apparent: Some(w(bad)), ..inverter() },
                Inverter { idle: w(bad), ..inverter() },
                Inverter { surge: Some(Surge { power: w(bad), duration: s(5.0) }), ..inverter() },
                Inverter { surge: Some(Surge { power: w(2000.0), duration: s(bad) }), ..inverter() },
            ] {
                assert!(wrong.judge(&demand).is_err(), "{bad}");
            }
        }
    }
}
