//! What coincides: the greatest sum of loads over the half-hours of the day and the months of the year (R16).
//!
//! Exact for the schedules stated: every half-hour of every month is looked at, as far as something begins in it. Days
//! of the week are not told apart, so loads of different days are taken to meet.

use uom::si::electric_current::ampere;
use uom::si::power::watt;

use super::schedule::{HALF_HOURS, MONTHS, Months};
use super::start::at_least;
use crate::error::Error;
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
            at_least("load", plain(value), 0.0, unit)?;
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
    at_least("sum of the loads", most.running, 0.0, unit)?;
    at_least("sum of the loads", most.with_start.sum, 0.0, unit)?;
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
