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

    /// A bit for each, January bit 0; bits from 12 on count for nothing.
    pub const fn from_bits(bits: u16) -> Self {
        Self(bits & Self::ALL.0)
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

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ranges_go_round_the_year() {
        for first in 1..=12u8 {
            for last in 1..=12u8 {
                // Counted off month by month.
                let (mut listed, mut month) = (std::vec![first], first);
                while month != last {
                    month = month % 12 + 1;
                    listed.push(month);
                }
                assert_eq!(Months::from_to(first, last), Months::of(&listed), "{first} to {last}");
            }
        }
        assert_eq!(Months::from_to(1, 12), Ok(Months::ALL));
    }

    #[test]
    fn what_is_no_month_is_refused_or_belongs_to_none() {
        for bad in [0, 13, 255] {
            assert!(
                Months::of(&[1, bad]).is_err()
                    && Months::from_to(bad, 1).is_err()
                    && Months::from_to(1, bad).is_err()
            );
            assert!(!Months::ALL.contains(bad));
        }
        assert_eq!(Months::of(&[]), Ok(Months::NONE));
        assert_eq!(Months::from_bits(0xffff), Months::ALL);
        assert_eq!(Months::from_bits(1 << 11), Months::of(&[12]).unwrap());
        assert_eq!(Months::of(&[12, 12]).unwrap().count(), 1);
    }

    extern crate std;
}
