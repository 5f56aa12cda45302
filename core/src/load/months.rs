//! Months of the year as a set.

use crate::error::{Allowed, Error};

/// Months of a year.
pub const MONTHS: u8 = 12;

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
    Allowed::Between(1.0, 12.0).check("month", f64::from(month), "").map(|()| month)
}
