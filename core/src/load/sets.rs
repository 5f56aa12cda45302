//! The largest sets of loads that can run together, for those who solve a network for each (R16).

use super::months::MONTHS;
use super::occasion::{Occasion, candidates};
use super::schedule::HALF_HOURS;

/// A set of loads, by their place in the list: up to 128.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub struct LoadSet(u128);

impl LoadSet {
    /// How many loads a set can hold.
    pub const ROOM: usize = 128;
    /// Every place.
    pub const ALL: Self = Self(u128::MAX);

    /// Whether the load at a place belongs to it; false from [`LoadSet::ROOM`] on.
    pub const fn contains(self, place: usize) -> bool {
        place < Self::ROOM && self.0 >> place & 1 == 1
    }

    /// Whether all of it belongs to the other.
    pub const fn is_within(self, other: Self) -> bool {
        self.0 & !other.0 == 0
    }

    /// How many loads belong to it.
    pub const fn count(self) -> u32 {
        self.0.count_ones()
    }

    /// The places that belong to it, in order.
    pub fn places(self) -> impl Iterator<Item = usize> {
        (0..Self::ROOM).filter(move |&place| self.contains(place))
    }
}

/// So many sets are never exceeded: one for each half-hour of each month.
pub const MAXIMAL_SETS: usize = HALF_HOURS as usize * MONTHS as usize;

/// What [`maximal_sets`] wrote.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MaximalSets {
    /// So many sets from the front: every set of loads that can meet is contained in one of them.
    Exact(usize),
    /// There are more loads than [`LoadSet::ROOM`], or more sets than fit: all loads are to be taken at once, which is
    /// never too little.
    AllAtOnce,
}

/// The largest sets of loads that can run together, none contained in another.
///
/// A circuit's worst hour is the worst of these, as long as more loads never make it better. Writes into the caller's
/// slice from the front, in the order of the slots in which they first occur; [`MAXIMAL_SETS`] places always suffice, a
/// handful does in practice. Where the answer is [`MaximalSets::AllAtOnce`], the first place holds [`LoadSet::ALL`].
///
/// # Example
/// ```
/// use ampwright::load::{LoadSet, MaximalSets, Months, Occasion, maximal_sets};
/// let at = |half_hours| Occasion::new(half_hours, Months::ALL);
/// let mut sets = [LoadSet::default(); 8];
/// // Two that never meet, and one that meets both.
/// let found = maximal_sets(&[at(0b0011), at(0b1100), at(0b0110)], &mut sets);
/// assert_eq!(found, MaximalSets::Exact(2));
/// assert_eq!(sets[0].places().collect::<Vec<_>>(), [0, 2]);
/// assert_eq!(sets[1].places().collect::<Vec<_>>(), [1, 2]);
/// ```
pub fn maximal_sets(occasions: &[Occasion], into: &mut [LoadSet]) -> MaximalSets {
    found_sets(occasions, into).map_or_else(
        || {
            if let Some(first) = into.first_mut() {
                *first = LoadSet::ALL;
            }
            MaximalSets::AllAtOnce
        },
        MaximalSets::Exact,
    )
}

fn found_sets(occasions: &[Occasion], into: &mut [LoadSet]) -> Option<usize> {
    if occasions.len() > LoadSet::ROOM {
        return None;
    }
    let mut count = 0;
    for slot in candidates(occasions) {
        let active = occasions.iter().enumerate().filter(|(_, occasion)| occasion.contains(slot));
        let set = LoadSet(active.fold(0, |set, (place, _)| set | 1 << place));
        let known = into.get(..count)?;
        if set.0 == 0 || known.iter().any(|&other| set.is_within(other)) {
            continue;
        }
        // Those that it contains go; the rest closes up in its order.
        let mut kept = 0;
        for place in 0..count {
            let other = *into.get(place)?;
            if !other.is_within(set) {
                *into.get_mut(kept)? = other;
                kept += 1;
            }
        }
        *into.get_mut(kept)? = set;
        count = kept + 1;
    }
    Some(count)
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::collections::BTreeSet;
    use std::vec::Vec;

    use proptest::prelude::*;

    use super::super::months::Months;
    use super::super::occasion::tests::{any_occasion, slots};
    use super::*;

    fn sets_of(occasions: &[Occasion]) -> BTreeSet<u128> {
        slots()
            .map(|slot| {
                (0..occasions.len())
                    .filter(|&i| occasions[i].contains(slot))
                    .fold(0, |set, i| set | 1u128 << i)
            })
            .collect()
    }

    proptest! {
        #[test]
        fn the_sets_are_the_maximal_ones_of_all_slots(
            occasions in proptest::collection::vec(any_occasion(), 0..12),
        ) {
            let all = sets_of(&occasions);
            let maximal: BTreeSet<_> = all
                .iter()
                .copied()
                .filter(|&set| set != 0 && !all.iter().any(|&other| other != set && set & !other == 0))
                .collect();
            let mut sets = [LoadSet::default(); MAXIMAL_SETS];
            let MaximalSets::Exact(count) = maximal_sets(&occasions, &mut sets) else {
                return Err(TestCaseError::fail("never too many"));
            };
            let ours: Vec<_> = sets[..count].iter().map(|set| set.0).collect();
            prop_assert_eq!(ours.iter().copied().collect::<BTreeSet<_>>(), maximal);
            prop_assert_eq!(ours.len(), count);
            // With exactly one place too few it falls back, to all.
            if count > 0 {
                let mut short = std::vec![LoadSet::default(); count - 1];
                prop_assert_eq!(maximal_sets(&occasions, &mut short), MaximalSets::AllAtOnce);
                prop_assert!(short.first().is_none_or(|&set| set == LoadSet::ALL));
            }
        }
    }

    #[test]
    fn more_loads_than_a_set_holds_are_taken_all_at_once() {
        let mut sets = [LoadSet::default(); 2];
        assert_eq!(maximal_sets(&[Occasion::ALWAYS; 128], &mut sets), MaximalSets::Exact(1));
        assert_eq!((sets[0], LoadSet::ALL.places().count()), (LoadSet::ALL, 128));
        assert_eq!(maximal_sets(&[Occasion::ALWAYS; 129], &mut sets), MaximalSets::AllAtOnce);
        assert!(!LoadSet::ALL.contains(128));
        // Without a place nothing is written, and the answer is the same.
        assert_eq!(maximal_sets(&[Occasion::ALWAYS], &mut []), MaximalSets::AllAtOnce);
        // Nothing ever runs: no set, and a place is not needed.
        assert_eq!(maximal_sets(&[Occasion::new(0, Months::ALL)], &mut []), MaximalSets::Exact(0));
    }
}
