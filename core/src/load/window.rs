//! A part of the day, in whole minutes.

use core::fmt;
use core::str::FromStr;

use uom::si::time::minute;

use crate::error::{Allowed, Error, Snippet};
use crate::quantity::Time;

const DAY_MINUTES: u16 = 1440;
pub(super) const HALF_HOUR_MINUTES: u16 = 30;

/// A part of the day, from one minute up to another; beyond midnight it goes on in the morning.
///
/// ```
/// use ampwright::{load::Window, quantity::readable};
/// let night: Window = "22:00-06:30".parse()?;
/// assert_eq!(readable(night.duration()).to_string(), "8.5 h");
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Window {
    from: u16,
    to: u16,
}

impl Window {
    /// The whole day.
    pub const DAY: Self = Self { from: 0, to: DAY_MINUTES };

    /// From one minute of the day (0 … 1439) up to another (0 … 1440).
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where a minute is outside the day; [`Error::Contradiction`] where both are one.
    pub fn minutes(from: u16, to: u16) -> Result<Self, Error> {
        let within = |name, value: u16, most: u16| {
            Allowed::Between(0.0, f64::from(most)).check(name, f64::from(value), "min")
        };
        within("from", from, DAY_MINUTES - 1)?;
        within("to", to, DAY_MINUTES)?;
        if from == to {
            return Err(Error::Contradiction {
                name: "to",
                value: f64::from(to),
                unit: "min",
                why: "a window that ends where it begins has no length; for the whole day write 00:00-24:00",
            });
        }
        Ok(Self { from, to })
    }

    /// From one time of the day up to another, in whole minutes.
    ///
    /// # Errors
    /// As [`Window::minutes`], and where a time is no whole minute.
    ///
    /// # Example
    /// ```
    /// use ampwright::{load::Window, quantity::parse};
    /// assert_eq!(Window::times(parse("7.5 h")?, parse("9 h")?)?, "07:30-09:00".parse()?);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn times(from: Time, to: Time) -> Result<Self, Error> {
        Self::minutes(whole_minute("from", from)?, whole_minute("to", to)?)
    }

    /// Length.
    pub fn duration(self) -> Time {
        Time::new::<minute>(f64::from(self.length()))
    }

    fn length(self) -> u16 {
        if self.from < self.to { self.to - self.from } else { DAY_MINUTES - self.from + self.to }
    }

    /// The minutes of a half-hour that lie inside, a bit each.
    pub(super) fn within(self, half_hour: u16) -> u32 {
        let start = half_hour * HALF_HOUR_MINUTES;
        let part = |from: u16, to: u16| {
            let (from, to) = (from.max(start), to.min(start + HALF_HOUR_MINUTES));
            if from >= to { 0 } else { ((1u32 << (to - from)) - 1) << (from - start) }
        };
        if self.from < self.to {
            part(self.from, self.to)
        } else {
            part(self.from, DAY_MINUTES) | part(0, self.to)
        }
    }
}

fn whole_minute(name: &'static str, time: Time) -> Result<u16, Error> {
    let minutes = time.get::<minute>();
    let nearest = libm::round(minutes);
    // A decimal hour such as 7.1 h is no whole number of minutes in binary: a millionth of a minute is forgiven.
    if nearest >= 0.0 && nearest <= f64::from(DAY_MINUTES) && (minutes - nearest).abs() < 1e-6 {
        // Between 0 and 1440.
        #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)]
        return Ok(nearest as u16);
    }
    let allowed = Allowed::Words("a whole number of minutes from 0 to 1440");
    Err(Error::OutOfRange { name, value: minutes, unit: "min", allowed })
}

impl fmt::Display for Window {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let (from, to) = (self.from, self.to);
        write!(f, "{:02}:{:02}-{:02}:{:02}", from / 60, from % 60, to / 60, to % 60)
    }
}

impl FromStr for Window {
    type Err = Error;

    /// Reads `18:00-23:30`.
    fn from_str(text: &str) -> Result<Self, Error> {
        let of_clock = |clock: &str| {
            let (hours, minutes) = clock.trim().split_once(':')?;
            let digits =
                |text: &str| (1..=2).contains(&text.len()) && text.bytes().all(|b| b.is_ascii_digit());
            let (hours, minutes) = (digits(hours) && digits(minutes) && minutes.len() == 2)
                .then(|| Some((hours.parse::<u16>().ok()?, minutes.parse::<u16>().ok()?)))??;
            (minutes < 60 && hours <= 24).then_some(60 * hours + minutes)
        };
        let ends = text.split_once('-').and_then(|(from, to)| Some((of_clock(from)?, of_clock(to)?)));
        let Some((from, to)) = ends else {
            return Err(Error::UnknownWord {
                text: Snippet::new(text),
                allowed: "the windows of a day, such as 18:00-23:30 or 22:00-06:00",
            });
        };
        Self::minutes(from, to)
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use proptest::prelude::*;

    use super::*;
    use crate::quantity::parse;

    /// Whether a minute of the day lies inside.
    fn inside(from: u16, to: u16, moment: u16) -> bool {
        if from < to { (from..to).contains(&moment) } else { moment >= from || moment < to }
    }

    proptest! {
        #[test]
        fn half_hours_hold_the_minutes_inside(from in 0..1440u16, to in 0..=1440u16) {
            prop_assume!(from != to);
            let window = Window::minutes(from, to).unwrap();
            let mut count = 0;
            for half_hour in 0..48u16 {
                let bits = window.within(half_hour);
                for k in 0..30 {
                    let moment = 30 * half_hour + k;
                    prop_assert_eq!(bits >> k & 1 == 1, inside(from, to, moment), "{} at {}", window, moment);
                    count += u16::from(inside(from, to, moment));
                }
            }
            prop_assert_eq!(window.length(), count);
            // What is printed reads again.
            prop_assert_eq!(window.to_string().parse::<Window>(), Ok(window));
        }
    }

    #[test]
    fn texts_that_are_no_window_are_refused_with_an_example() {
        for bad in [
            "",
            "-",
            "18:00",
            "18-23",
            "18:00-23:60",
            "18:00-25:00",
            "24:01-02:00",
            "18:0-19:00",
            "a:00-b:00",
            "18:00-23:00-24:00",
            "+8:00-09:00",
            "18:00–23:00",
            "ß:00-01:00",
        ] {
            let told = bad.parse::<Window>().unwrap_err().to_string();
            assert!(told.contains("18:00-23:30") || told.contains("0 and 1439"), "{bad}: {told}");
        }
        // The day ends at 24:00 and does not begin there.
        assert!("24:00-02:00".parse::<Window>().is_err());
        assert_eq!("00:00-24:00".parse(), Ok(Window::DAY));
        assert_eq!(" 8:00 - 9:30 ".parse::<Window>().unwrap().to_string(), "08:00-09:30");
        let none = "08:00-08:00".parse::<Window>().unwrap_err().to_string();
        assert!(none.contains("for the whole day write 00:00-24:00"), "{none}");
    }

    #[test]
    fn times_are_whole_minutes_within_a_day() {
        let times = |from: &str, to: &str| Window::times(parse(from).unwrap(), parse(to).unwrap());
        assert_eq!(times("7.1 h", "20.3 h").unwrap().to_string(), "07:06-20:18");
        for (from, to) in [("7.505 h", "8 h"), ("-1 h", "8 h"), ("8 h", "25 h")] {
            assert!(times(from, to).is_err(), "{from} to {to}");
        }
        for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, 1e300] {
            assert!(Window::times(Time::new::<minute>(bad), Time::new::<minute>(5.0)).is_err(), "{bad}");
        }
    }
}
