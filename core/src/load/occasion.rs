//! When a load may draw, and the moments that need to be looked at to find what meets.

use super::months::{MONTHS, Months};
use super::schedule::HALF_HOURS;

/// Half-hours and months in which a load may draw.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Occasion {
    half_hours: u64,
    months: Months,
}

const EVERY_HALF_HOUR: u64 = (1 << HALF_HOURS) - 1;

impl Occasion {
    /// At any time.
    pub const ALWAYS: Self = Self { half_hours: EVERY_HALF_HOUR, months: Months::ALL };

    /// Half-hours as a bit each, that from midnight on bit 0; bits from 48 on count for nothing.
    pub const fn new(half_hours: u64, months: Months) -> Self {
        Self { half_hours: half_hours & EVERY_HALF_HOUR, months }
    }

    /// Whether it may draw in a slot.
    pub const fn contains(&self, slot: Slot) -> bool {
        slot.half_hour < HALF_HOURS
            && self.half_hours >> slot.half_hour & 1 == 1
            && self.months.contains(slot.month)
    }

    /// Whether it never draws.
    pub const fn is_never(&self) -> bool {
        self.half_hours == 0 || self.months.count() == 0
    }

    /// Half-hours in which it begins; midnight counts as one, whether or not it ran before.
    const fn beginnings(&self) -> u64 {
        self.half_hours & !(self.half_hours << 1)
    }
}

/// A half-hour of a month.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Slot {
    /// 1 to 12.
    pub month: u8,
    /// 0 to 47; that from midnight on is 0.
    pub half_hour: u8,
}

/// The slots that need to be looked at, earliest first: in any other one, nothing runs but what already ran in the
/// half-hour or the month before it.
pub(super) fn candidates(occasions: &[Occasion]) -> impl Iterator<Item = Slot> {
    // What runs through begins nowhere: midnight and January stand for it.
    let half_hours = occasions.iter().fold(1, |set, occasion| set | occasion.beginnings());
    let begins = |month: u8| {
        month == 1 || occasions.iter().any(|o| o.months.contains(month) && !o.months.contains(month - 1))
    };
    let months = Months::ALL.filter(begins);
    (1..=MONTHS).filter(move |&month| months.contains(month)).flat_map(move |month| {
        (0..HALF_HOURS)
            .filter(move |&half_hour| half_hours >> half_hour & 1 == 1)
            .map(move |half_hour| Slot { month, half_hour })
    })
}

#[cfg(test)]
pub(super) mod tests {
    use proptest::prelude::*;

    use super::*;

    /// Every slot of the year.
    pub(in crate::load) fn slots() -> impl Iterator<Item = Slot> {
        (1..=12).flat_map(|month| (0..48).map(move |half_hour| Slot { month, half_hour }))
    }

    /// A few windows and months, so that loads meet often enough.
    pub(in crate::load) fn any_occasion() -> impl Strategy<Value = Occasion> {
        (0..48u8, 1..49u8, 0..4096u16).prop_map(|(from, length, months)| {
            let half_hours = (0..length).fold(0u64, |set, k| set | 1 << ((from + k) % 48));
            Occasion::new(half_hours, Months::from_bits(months))
        })
    }

    proptest! {
        /// In a slot that is not looked at, nothing runs but what runs in one that is.
        #[test]
        fn every_slot_is_contained_in_a_candidate(
            occasions in proptest::collection::vec(any_occasion(), 0..6),
        ) {
            for slot in slots() {
                let covered = candidates(&occasions)
                    .any(|other| occasions.iter().all(|o| !o.contains(slot) || o.contains(other)));
                prop_assert!(covered, "{slot:?}");
            }
        }
    }

    #[test]
    fn what_is_no_slot_belongs_to_nothing() {
        assert!(!Occasion::ALWAYS.contains(Slot { month: 0, half_hour: 0 }));
        assert!(!Occasion::ALWAYS.contains(Slot { month: 1, half_hour: 48 }));
        assert!(!Occasion::ALWAYS.contains(Slot { month: 13, half_hour: 255 }));
        assert_eq!(Occasion::new(u64::MAX, Months::ALL), Occasion::ALWAYS);
        assert!(Occasion::new(0, Months::ALL).is_never() && Occasion::new(1, Months::NONE).is_never());
    }
}
