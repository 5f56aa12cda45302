//! When a load runs: daily windows or hours a day, days a week, months of the year.
//!
//! Times are those of the site's clock. The day is cut into 48 half-hours: how long a load runs is exact to the minute,
//! and two loads coincide where both run in one half-hour, since nobody switches on the minute.

use core::str::FromStr;

use uom::si::time::{hour, minute};

use crate::error::{Allowed, Error, Snippet};
use crate::quantity::Time;

/// Half-hours of a day.
pub const HALF_HOURS: u8 = 48;
/// Months of a year.
pub const MONTHS: u8 = 12;

const DAY_MINUTES: u16 = 1440;
const HALF_HOUR_MINUTES: u16 = 30;
const ALL_DAY: [u8; 48] = [30; 48];

/// Months of the year, 1 to 12, as a set.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Months(u16);

impl Months {
    /// All of them.
    pub const ALL: Self = Self(0xfff);
    /// None.
    pub const NONE: Self = Self(0);

    /// The months listed; in any order, and one may stand twice.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where a month is not 1 to 12.
    pub fn of(months: &[u8]) -> Result<Self, Error> {
        months.iter().try_fold(Self::NONE, |set, &month| Ok(Self(set.0 | bit(checked_month(month)?))))
    }

    /// From the first to the last month, both included; beyond December it goes on in January.
    ///
    /// # Errors
    /// As [`Months::of`].
    ///
    /// # Example
    /// ```
    /// use ampwright::load::Months;
    /// let winter = Months::from_to(11, 2)?;
    /// assert_eq!((1..=12).filter(|&month| winter.contains(month)).collect::<Vec<_>>(), [1, 2, 11, 12]);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn from_to(first: u8, last: u8) -> Result<Self, Error> {
        let (first, last) = (checked_month(first)?, checked_month(last)?);
        let within = |month: u8| {
            if first <= last { (first..=last).contains(&month) } else { month >= first || month <= last }
        };
        Ok(Self((1..=MONTHS).filter(|&month| within(month)).fold(0, |set, month| set | bit(month))))
    }

    /// Whether a month belongs to them; false for what is no month.
    pub const fn contains(self, month: u8) -> bool {
        month >= 1 && month <= MONTHS && self.0 & bit(month) != 0
    }

    /// How many they are.
    pub const fn count(self) -> u32 {
        self.0.count_ones()
    }

    /// Those that belong to both.
    #[must_use]
    pub const fn and(self, other: Self) -> Self {
        Self(self.0 & other.0)
    }

    pub(super) fn filter(self, keep: impl Fn(u8) -> bool) -> Self {
        Self(
            (1..=MONTHS)
                .filter(|&month| self.contains(month) && keep(month))
                .fold(0, |set, month| set | bit(month)),
        )
    }
}

const fn bit(month: u8) -> u16 {
    1 << (month - 1)
}

pub(super) fn checked_month(month: u8) -> Result<u8, Error> {
    if (1..=MONTHS).contains(&month) {
        return Ok(month);
    }
    let allowed = Allowed::Between(1.0, 12.0);
    Err(Error::OutOfRange { name: "month", value: f64::from(month), unit: "", allowed })
}

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
            if value <= most {
                return Ok(());
            }
            let allowed = Allowed::Between(0.0, f64::from(most));
            Err(Error::OutOfRange { name, value: f64::from(value), unit: "min", allowed })
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
    fn within(self, half_hour: u16) -> u32 {
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
        // Written so that NaN fails.
        if !(hours > 0.0 && hours <= 24.0) {
            let allowed = Allowed::AboveUpTo(0.0, 24.0);
            return Err(Error::OutOfRange { name: "hours_per_day", value: hours, unit: "h", allowed });
        }
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
        if (1..=7).contains(&days_per_week) {
            return Ok(Self { days_per_week, ..self });
        }
        let (value, allowed) = (f64::from(days_per_week), Allowed::Between(1.0, 7.0));
        Err(Error::OutOfRange { name: "days_per_week", value, unit: "", allowed })
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
    pub fn part_of(&self, half_hour: u8) -> f64 {
        let minutes = self.minutes.get(usize::from(half_hour)).map_or(0.0, |&m| f64::from(m));
        let whole = total(&self.minutes);
        if whole > 0.0 { minutes / f64::from(HALF_HOUR_MINUTES) * (self.daily / whole) } else { 0.0 }
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
