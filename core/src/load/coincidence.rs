//! What coincides: the greatest sum of loads over the half-hours of the day and the months of the year (R16).
//!
//! Exact for the schedules stated: every half-hour of every month is looked at, as far as something begins in it. Days
//! of the week are not told apart, so loads of different days are taken to meet.

use uom::si::electric_current::ampere;
use uom::si::power::watt;

use super::months::{MONTHS, Months};
use super::schedule::HALF_HOURS;
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, Power};

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

    /// Half-hours in which it begins; none where it runs through.
    const fn beginnings(&self) -> u64 {
        let before = (self.half_hours << 1 | self.half_hours >> (HALF_HOURS - 1)) & EVERY_HALF_HOUR;
        self.half_hours & !before
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

/// Greatest coincident sum.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Coincidence<Q> {
    /// Greatest sum of what runs.
    pub running: Q,
    /// When; the earliest of several, `None` where nothing ever runs.
    pub slot: Option<Slot>,
    /// Greatest sum with a start on top.
    pub with_start: WithStart<Q>,
}

/// Greatest sum of what runs and the largest start among it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WithStart<Q> {
    /// Sum.
    pub sum: Q,
    /// When.
    pub slot: Option<Slot>,
    /// Which load starts; `None` where no start adds anything.
    pub starting: Option<usize>,
}

/// Greatest coincident power, watts or volt-amperes, and with the largest start.
///
/// `running` is what each load takes, all of its units together; `extra` is what its start adds to that.
///
/// # Errors
/// [`Error::WrongCount`] where the three lists differ in length; [`Error::OutOfRange`] where a power is negative or not
/// finite, or the sum too large for a number.
///
/// # Example
/// A kettle in the morning and a saw in the evening never meet, the lamp meets both:
/// ```
/// use ampwright::load::{Draw, Load, Schedule, coincident_power};
/// use ampwright::quantity::{parse, readable};
/// let occasion = |window: &str| -> Result<_, ampwright::Error> {
///     let schedule = Schedule::windows(&[window.parse()?])?;
///     Load { schedule, ..Load::new(Draw::Power(parse("1 W")?)) }.occasion(None)
/// };
/// let occasions = [occasion("07:00-07:30")?, occasion("18:00-19:00")?, occasion("06:00-22:00")?];
/// let running = [parse("1200 W")?, parse("800 W")?, parse("50 W")?];
/// let extra = [parse("0 W")?, parse("2400 W")?, parse("0 W")?];
/// let most = coincident_power(&occasions, &running, &extra)?;
/// assert_eq!(readable(most.running).to_string(), "1.25 kW");
/// assert_eq!(readable(most.with_start.sum).to_string(), "3.25 kW");
/// assert_eq!(most.with_start.starting, Some(1));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn coincident_power(
    occasions: &[Occasion],
    running: &[Power],
    extra: &[Power],
) -> Result<Coincidence<Power>, Error> {
    greatest(occasions, running, extra, |power| power.get::<watt>(), Power::new::<watt>, "W")
}

/// Greatest coincident current, and with the largest start: as [`coincident_power`], in amperes.
///
/// The currents are those at one voltage. A constant-power load draws most at the lowest, a resistive one at the
/// highest: where that matters, the network is solved for each of the [`maximal_sets`] instead.
///
/// # Errors
/// As [`coincident_power`].
pub fn coincident_current(
    occasions: &[Occasion],
    running: &[ElectricCurrent],
    extra: &[ElectricCurrent],
) -> Result<Coincidence<ElectricCurrent>, Error> {
    greatest(
        occasions,
        running,
        extra,
        |current| current.get::<ampere>(),
        ElectricCurrent::new::<ampere>,
        "A",
    )
}

fn greatest<Q: Copy>(
    occasions: &[Occasion],
    running: &[Q],
    extra: &[Q],
    plain: impl Fn(Q) -> f64,
    quantity: impl Fn(f64) -> Q,
    unit: &'static str,
) -> Result<Coincidence<Q>, Error> {
    for list in [running, extra] {
        if list.len() != occasions.len() {
            return Err(Error::WrongCount { what: "loads", given: list.len(), needed: occasions.len() });
        }
        for &value in list {
            Allowed::AtLeast(0.0).check("load", plain(value), unit)?;
        }
    }
    let mut most = Coincidence {
        running: 0.0,
        slot: None,
        with_start: WithStart { sum: 0.0, slot: None, starting: None },
    };
    for slot in candidates(occasions) {
        let (mut sum, mut largest, mut starting, mut any) = (0.0, 0.0, None, false);
        let loads = occasions.iter().zip(running).zip(extra).enumerate();
        for (i, ((_, &running), &extra)) in loads.filter(|(_, ((occasion, _), _))| occasion.contains(slot)) {
            any = true;
            sum += plain(running);
            if plain(extra) > largest {
                (largest, starting) = (plain(extra), Some(i));
            }
        }
        if any && (sum > most.running || most.slot.is_none()) {
            (most.running, most.slot) = (sum, Some(slot));
        }
        if any && (sum + largest > most.with_start.sum || most.with_start.slot.is_none()) {
            most.with_start = WithStart { sum: sum + largest, slot: Some(slot), starting };
        }
    }
    Allowed::AtLeast(0.0).check("sum of the loads", most.running, unit)?;
    Allowed::AtLeast(0.0).check("sum of the loads", most.with_start.sum, unit)?;
    let WithStart { sum, slot, starting } = most.with_start;
    Ok(Coincidence {
        running: quantity(most.running),
        slot: most.slot,
        with_start: WithStart { sum: quantity(sum), slot, starting },
    })
}

/// The slots that need to be looked at, earliest first: in any other one, nothing runs but what already ran in the
/// half-hour or the month before it.
fn candidates(occasions: &[Occasion]) -> impl Iterator<Item = Slot> {
    // What runs through begins nowhere: midnight and January stand for it.
    let half_hours = occasions.iter().fold(1, |set, occasion| set | occasion.beginnings());
    let begins = |month: u8| {
        let before = if month == 1 { MONTHS } else { month - 1 };
        month == 1 || occasions.iter().any(|o| o.months.contains(month) && !o.months.contains(before))
    };
    let months = Months::ALL.filter(begins);
    (1..=MONTHS).filter(move |&month| months.contains(month)).flat_map(move |month| {
        (0..HALF_HOURS)
            .filter(move |&half_hour| half_hours >> half_hour & 1 == 1)
            .map(move |half_hour| Slot { month, half_hour })
    })
}

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

    use super::*;
    use crate::load::{Draw, Load, Schedule, Window};

    /// Every slot of the year.
    fn slots() -> impl Iterator<Item = Slot> {
        (1..=12).flat_map(|month| (0..48).map(move |half_hour| Slot { month, half_hour }))
    }

    fn sets_of(occasions: &[Occasion]) -> BTreeSet<u128> {
        slots()
            .map(|slot| {
                (0..occasions.len())
                    .filter(|&i| occasions[i].contains(slot))
                    .fold(0, |set, i| set | 1u128 << i)
            })
            .collect()
    }

    /// A few windows and months, so that loads meet often enough.
    fn any_occasion() -> impl Strategy<Value = Occasion> {
        (0..48u8, 1..49u8, 0..4096u16).prop_map(|(from, length, months)| {
            let half_hours = (0..length).fold(0u64, |set, k| set | 1 << ((from + k) % 48));
            Occasion::new(half_hours, Months::from_bits(months))
        })
    }

    fn w(watts: f64) -> Power {
        Power::new::<watt>(watts)
    }

    proptest! {
        #[test]
        fn the_sum_is_the_greatest_of_all_slots(
            loads in proptest::collection::vec((any_occasion(), 0..1000u32, 0..3000u32), 0..10),
        ) {
            let occasions: Vec<_> = loads.iter().map(|load| load.0).collect();
            let running: Vec<_> = loads.iter().map(|load| w(f64::from(load.1))).collect();
            let extra: Vec<_> = loads.iter().map(|load| w(f64::from(load.2))).collect();
            let ours = coincident_power(&occasions, &running, &extra).unwrap();
            let (mut sum, mut with_start) = (0, 0);
            for slot in slots() {
                let active: Vec<_> = loads.iter().filter(|load| load.0.contains(slot)).collect();
                let here: u32 = active.iter().map(|load| load.1).sum();
                sum = sum.max(here);
                with_start = with_start.max(here + active.iter().map(|load| load.2).max().unwrap_or(0));
            }
            prop_assert_eq!(ours.running, w(f64::from(sum)));
            prop_assert_eq!(ours.with_start.sum, w(f64::from(with_start)));
            // The slot told is one in which that happens.
            if let Some(slot) = ours.slot {
                let here: u32 = loads.iter().filter(|load| load.0.contains(slot)).map(|load| load.1).sum();
                prop_assert_eq!(here, sum);
            } else {
                prop_assert!(occasions.iter().all(Occasion::is_never));
            }
            if let (Some(slot), Some(i)) = (ours.with_start.slot, ours.with_start.starting) {
                prop_assert!(occasions[i].contains(slot));
            }
            // Amperes as watts.
            let amperes: Vec<_> = running.iter().map(|p| ElectricCurrent::new::<ampere>(p.value)).collect();
            let none = std::vec![ElectricCurrent::new::<ampere>(0.0); loads.len()];
            let current = coincident_current(&occasions, &amperes, &none).unwrap();
            prop_assert_eq!(current.running.value, ours.running.value);
            prop_assert_eq!(current.with_start.starting, None);
        }

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

        /// Windows to the minute, minute by minute: what meets in one minute meets in one half-hour.
        #[test]
        fn no_minute_of_any_month_exceeds_the_sum(
            loads in proptest::collection::vec((0..1440u16, 0..1440u16, 0..4096u16, 1..500u32), 1..6),
            aligned in any::<bool>(),
        ) {
            let round = |minute: u16| if aligned { minute / 30 * 30 } else { minute };
            let loads: Vec<_> = loads
                .into_iter()
                .map(|(from, to, months, watts)| (round(from), round(to), months, watts))
                .filter(|(from, to, ..)| from != to)
                .collect();
            let occasions: Vec<_> = loads
                .iter()
                .map(|&(from, to, months, _)| {
                    let window = Window::minutes(from, to).unwrap();
                    let schedule = Schedule::windows(&[window]).unwrap().in_months(Months::from_bits(months));
                    Load { schedule, ..Load::new(Draw::Power(w(1.0))) }.occasion(None).unwrap()
                })
                .collect();
            let running: Vec<_> = loads.iter().map(|load| w(f64::from(load.3))).collect();
            let none = std::vec![w(0.0); loads.len()];
            let ours = coincident_power(&occasions, &running, &none).unwrap().running.value;
            let mut most = 0;
            for month in 0..12u16 {
                for minute in 0..1440u16 {
                    let on = |&&(from, to, months, _): &&(u16, u16, u16, u32)| {
                        months >> month & 1 == 1
                            && if from < to { (from..to).contains(&minute) } else { minute >= from || minute < to }
                    };
                    most = most.max(loads.iter().filter(on).map(|load| load.3).sum::<u32>());
                }
            }
            if aligned {
                prop_assert_eq!(ours, f64::from(most));
            } else {
                prop_assert!(ours >= f64::from(most));
            }
        }
    }

    #[test]
    fn no_minute_is_lost_at_midnight_and_new_year() {
        let night = Occasion::new(1 << 47 | 1, Months::of(&[12, 1]).unwrap());
        let eve = Occasion::new(1 << 47, Months::of(&[12]).unwrap());
        let mut sets = [LoadSet::default(); 4];
        assert_eq!(maximal_sets(&[night, eve], &mut sets), MaximalSets::Exact(1));
        assert_eq!(sets[0].count(), 2);
        let most = coincident_power(&[night, eve], &[w(1.0), w(2.0)], &[w(0.0), w(0.0)]).unwrap();
        assert_eq!((most.running, most.slot), (w(3.0), Some(Slot { month: 12, half_hour: 47 })));
    }

    #[test]
    fn the_largest_start_need_not_meet_the_greatest_sum() {
        let (morning, evening) = (Occasion::new(1 << 14, Months::ALL), Occasion::new(1 << 40, Months::ALL));
        let most =
            coincident_power(&[morning, evening], &[w(1000.0), w(200.0)], &[w(0.0), w(1000.0)]).unwrap();
        assert_eq!((most.running, most.slot.unwrap().half_hour), (w(1000.0), 14));
        assert_eq!((most.with_start.sum, most.with_start.slot.unwrap().half_hour), (w(1200.0), 40));
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

    #[test]
    fn lists_of_different_length_and_figures_out_of_range_are_errors() {
        let one = [Occasion::ALWAYS];
        assert!(matches!(coincident_power(&one, &[], &[w(0.0)]), Err(Error::WrongCount { .. })));
        assert!(matches!(coincident_power(&one, &[w(0.0)], &[]), Err(Error::WrongCount { .. })));
        for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -1.0] {
            assert!(coincident_power(&one, &[w(bad)], &[w(0.0)]).is_err(), "{bad}");
            assert!(coincident_power(&one, &[w(0.0)], &[w(bad)]).is_err(), "{bad}");
        }
        let huge = [w(f64::MAX), w(f64::MAX)];
        assert!(coincident_power(&[Occasion::ALWAYS; 2], &huge, &[w(0.0); 2]).is_err());
        let nothing = coincident_power(&[], &[], &[]).unwrap();
        assert_eq!((nothing.running, nothing.slot), (w(0.0), None));
        assert!(!Occasion::ALWAYS.contains(Slot { month: 0, half_hour: 0 }));
        assert!(!Occasion::ALWAYS.contains(Slot { month: 1, half_hour: 255 }));
    }
}
