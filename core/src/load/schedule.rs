//! When a load runs: daily windows or hours a day, days a week, months of the year.
//!
//! Times are those of the site's clock. The day is cut into 48 half-hours: how long a load runs is exact to the minute,
//! and two loads coincide where both run in one half-hour, since nobody switches on the minute.

use uom::si::ratio::ratio;
use uom::si::time::{hour, minute};

use super::months::Months;
use super::window::{HALF_HOUR_MINUTES, Window};
use crate::error::{Allowed, Error};
use crate::quantity::{Ratio, Time};

/// Half-hours of a day.
pub const HALF_HOURS: u8 = 48;

const ALL_DAY: [u8; 48] = [30; 48];

/// When a load runs.
///
/// ```
/// use ampwright::{load::{Months, Schedule}, quantity::readable};
/// let lamp = Schedule::windows(&["17:00-23:00".parse()?, "06:30-08:00".parse()?])?
///     .on_days(2)?
///     .in_months(Months::from_to(10, 3)?);
/// assert_eq!(readable(lamp.hours_on_a_day()).to_string(), "7.5 h");
/// assert!(lamp.may_run(12, 34) && !lamp.may_run(12, 20) && !lamp.may_run(6, 34));
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Schedule {
    /// Minutes of each half-hour that lie in its windows.
    minutes: [u8; 48],
    /// Minutes that it runs on a day on which it runs: at most those of the windows.
    daily: f64,
    days_per_week: u8,
    months: Months,
}

impl Schedule {
    /// All the time.
    pub const CONTINUOUS: Self =
        Self { minutes: ALL_DAY, daily: 1440.0, days_per_week: 7, months: Months::ALL };

    /// Throughout the windows, every day. Windows may overlap: a minute counts once.
    ///
    /// # Errors
    /// [`Error::WrongCount`] without a window.
    pub fn windows(windows: &[Window]) -> Result<Self, Error> {
        if windows.is_empty() {
            return Err(Error::WrongCount { what: "windows", given: 0, needed: 1 });
        }
        let mut minutes = [0u8; 48];
        for (half_hour, cell) in (0u16..).zip(minutes.iter_mut()) {
            let inside = windows.iter().fold(0, |bits, window| bits | window.within(half_hour));
            // At most 30.
            #[allow(clippy::cast_possible_truncation)]
            {
                *cell = inside.count_ones() as u8;
            }
        }
        Ok(Self { minutes, daily: total(&minutes), ..Self::CONTINUOUS })
    }

    /// So many hours a day, nobody knows when: it may coincide with everything.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the hours are not above 0 and at most 24.
    pub fn hours(hours_per_day: Time) -> Result<Self, Error> {
        Self::lasting(Self::CONTINUOUS, hours_per_day)
    }

    /// So many hours a day, some time within the windows.
    ///
    /// # Errors
    /// As [`Schedule::windows`] and [`Schedule::hours`]; [`Error::Contradiction`] where the windows are shorter.
    pub fn within(windows: &[Window], hours_per_day: Time) -> Result<Self, Error> {
        Self::lasting(Self::windows(windows)?, hours_per_day)
    }

    fn lasting(self, hours_per_day: Time) -> Result<Self, Error> {
        let hours = hours_per_day.get::<hour>();
        Allowed::AboveUpTo(0.0, 24.0).check("hours_per_day", hours, "h")?;
        let daily = hours_per_day.get::<minute>();
        // Rounding between hours, seconds and minutes is forgiven.
        if daily > self.daily * (1.0 + 1e-12) {
            return Err(Error::Contradiction {
                name: "hours_per_day",
                value: hours,
                unit: "h",
                why: "the windows together are shorter; widen them or state fewer hours",
            });
        }
        Ok(Self { daily: daily.min(self.daily), ..self })
    }

    /// On so many days of the week, 1 to 7: which ones is not told, so all loads may meet on one of them.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where they are not 1 to 7.
    pub fn on_days(self, days_per_week: u8) -> Result<Self, Error> {
        Allowed::Between(1.0, 7.0).check("days_per_week", f64::from(days_per_week), "")?;
        Ok(Self { days_per_week, ..self })
    }

    /// In these months only.
    #[must_use]
    pub const fn in_months(self, months: Months) -> Self {
        Self { months, ..self }
    }

    /// Days of the week on which it runs.
    pub const fn days_per_week(&self) -> u8 {
        self.days_per_week
    }

    /// Months in which it runs.
    pub const fn months(&self) -> Months {
        self.months
    }

    /// Hours that it runs on a day on which it runs.
    pub fn hours_on_a_day(&self) -> Time {
        Time::new::<minute>(self.daily)
    }

    /// Hours a day in the mean over the week.
    pub fn mean_hours(&self) -> Time {
        self.hours_on_a_day() * (f64::from(self.days_per_week) / 7.0)
    }

    /// Whether it may run in a half-hour (0 … 47) of a month (1 … 12); false for what is none.
    pub fn may_run(&self, month: u8, half_hour: u8) -> bool {
        self.months.contains(month) && self.minutes.get(usize::from(half_hour)).is_some_and(|&m| m > 0)
    }

    /// Part of a half-hour for which it runs, on a day and in a month in which it runs.
    ///
    /// Where only the hours a day are known, they are spread evenly over its windows. 0 for what is no half-hour.
    pub fn part_of(&self, half_hour: u8) -> Ratio {
        let minutes = self.minutes.get(usize::from(half_hour)).map_or(0.0, |&m| f64::from(m));
        let whole = total(&self.minutes);
        // Every schedule has a minute in its windows.
        Ratio::new::<ratio>(minutes / f64::from(HALF_HOUR_MINUTES) * (self.daily / whole))
    }

    /// The half-hours in which it may run, a bit each; that from midnight on is bit 0.
    pub fn half_hours(&self) -> u64 {
        (0u8..).zip(&self.minutes).fold(0, |set, (i, &m)| if m > 0 { set | 1 << i } else { set })
    }

    /// The longest time for which it may run without a break: what runs for three hours or more is continuous.
    ///
    /// Windows that touch or share a half-hour count as one.
    pub fn longest_run(&self) -> Time {
        let (mut longest, mut current) = (0.0f64, 0.0);
        // Twice round, so that a run over midnight is seen whole.
        for &minutes in self.minutes.iter().chain(&self.minutes) {
            current = if minutes > 0 { current + f64::from(minutes) } else { 0.0 };
            longest = longest.max(current);
        }
        Time::new::<minute>(longest.min(self.daily))
    }
}

fn total(minutes: &[u8; 48]) -> f64 {
    f64::from(minutes.iter().map(|&m| u16::from(m)).sum::<u16>())
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;

    /// The minutes of a day, one by one.
    fn by_the_minute(windows: &[(u16, u16)]) -> [bool; 1440] {
        let mut day = [false; 1440];
        for &(from, to) in windows {
            let mut moment = from;
            loop {
                day[usize::from(moment)] = true;
                moment = (moment + 1) % 1440;
                if moment == to % 1440 {
                    break;
                }
            }
        }
        day
    }

    /// Longest run of minutes without a break, round midnight.
    fn longest(day: &[bool; 1440]) -> usize {
        let (mut most, mut run) = (0, 0);
        for moment in 0..2880 {
            run = if day[moment % 1440] { run + 1 } else { 0 };
            most = most.max(run);
        }
        most.min(1440)
    }

    fn schedule(windows: &[(u16, u16)]) -> Schedule {
        let windows: std::vec::Vec<_> =
            windows.iter().map(|&(from, to)| Window::minutes(from, to).unwrap()).collect();
        Schedule::windows(&windows).unwrap()
    }

    extern crate std;

    fn any_window() -> impl Strategy<Value = (u16, u16)> {
        (0..1440u16, 0..=1440u16)
            .prop_filter("no length", |(from, to)| from != to && (*from, *to) != (0, 1440))
    }

    proptest! {
        #[test]
        fn hours_and_half_hours_are_those_of_the_minutes(
            windows in proptest::collection::vec(any_window(), 1..5),
            days in 1..=7u8,
        ) {
            let (day, ours) = (by_the_minute(&windows), schedule(&windows).on_days(days).unwrap());
            let minutes = day.iter().filter(|&&on| on).count();
            prop_assert!((ours.hours_on_a_day().get::<minute>() - minutes as f64).abs() < 1e-9);
            prop_assert!((ours.mean_hours().get::<minute>() * 7.0 - minutes as f64 * f64::from(days)).abs() < 1e-6);
            for half_hour in 0..48u8 {
                let slice = &day[30 * usize::from(half_hour)..][..30];
                let on = slice.iter().filter(|&&on| on).count();
                prop_assert_eq!(ours.may_run(6, half_hour), on > 0);
                prop_assert_eq!(ours.half_hours() >> half_hour & 1 == 1, on > 0);
                prop_assert!((ours.part_of(half_hour).value - on as f64 / 30.0).abs() < 1e-12);
            }
            // Gaps within a half-hour are not seen, so a run is never told too short.
            prop_assert!(ours.longest_run().get::<minute>() >= longest(&day) as f64 - 1e-9);
        }

        #[test]
        fn on_half_hours_a_run_is_that_of_the_minutes(
            windows in proptest::collection::vec((0..48u16, 0..48u16), 1..5),
        ) {
            let windows: std::vec::Vec<_> =
                windows.into_iter().filter(|(from, to)| from != to).map(|(from, to)| (30 * from, 30 * to)).collect();
            prop_assume!(!windows.is_empty());
            let run = schedule(&windows).longest_run().get::<minute>();
            prop_assert_eq!(run, longest(&by_the_minute(&windows)) as f64);
        }

        #[test]
        fn hours_within_windows_are_spread_over_them(
            windows in proptest::collection::vec(any_window(), 1..4), part in 0.01..1.0f64,
        ) {
            let whole = schedule(&windows);
            let windows: std::vec::Vec<_> =
                windows.iter().map(|&(from, to)| Window::minutes(from, to).unwrap()).collect();
            let ours = Schedule::within(&windows, whole.hours_on_a_day() * part).unwrap();
            let sum: f64 = (0..48).map(|half_hour| 30.0 * ours.part_of(half_hour).value).sum();
            prop_assert!((sum - ours.hours_on_a_day().get::<minute>()).abs() < 1e-9);
            prop_assert_eq!(ours.half_hours(), whole.half_hours());
            prop_assert!(ours.longest_run() <= ours.hours_on_a_day());
        }
    }

    #[test]
    fn hours_without_a_window_may_meet_everything() {
        let four = Schedule::hours(Time::new::<hour>(4.0)).unwrap();
        assert!((0..48).all(|half_hour| four.may_run(1, half_hour)));
        assert!((four.part_of(7).value - 4.0 / 24.0).abs() < 1e-15);
        assert_eq!(four.longest_run(), four.hours_on_a_day());
        assert_eq!(Schedule::hours(Time::new::<hour>(24.0)), Ok(Schedule::CONTINUOUS));
        for bad in [0.0, -1.0, 24.1, f64::NAN, f64::INFINITY] {
            assert!(Schedule::hours(Time::new::<hour>(bad)).is_err(), "{bad}");
        }
    }

    #[test]
    fn what_contradicts_itself_is_refused() {
        assert!(Schedule::windows(&[]).is_err());
        let evening: Window = "18:00-22:00".parse().unwrap();
        assert!(Schedule::within(&[evening], Time::new::<hour>(4.0)).is_ok());
        assert!(matches!(
            Schedule::within(&[evening], Time::new::<hour>(4.01)),
            Err(Error::Contradiction { name: "hours_per_day", .. })
        ));
        for bad in [0, 8, 255] {
            assert!(Schedule::CONTINUOUS.on_days(bad).is_err(), "{bad}");
        }
        let none = Schedule::CONTINUOUS.in_months(Months::NONE);
        assert!((0..=13).all(|month| !none.may_run(month, 0)));
        assert!(!Schedule::CONTINUOUS.may_run(1, 48) && Schedule::CONTINUOUS.part_of(48).value == 0.0);
    }
}
