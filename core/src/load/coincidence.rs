//! What coincides: the greatest sum of loads over the half-hours of the day and the months of the year (R16).
//!
//! Exact for the schedules stated: every half-hour of every month is looked at, as far as something begins in it. Days
//! of the week are not told apart, so loads of different days are taken to meet.

use uom::si::electric_current::ampere;
use uom::si::power::watt;

use super::occasion::{Occasion, Slot, candidates};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, Power};

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
/// highest: where that matters, the network is solved for each of the [`maximal_sets`](crate::load::maximal_sets) instead.
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

#[cfg(test)]
mod tests {
    extern crate std;
    use std::vec::Vec;

    use proptest::prelude::*;

    use super::super::occasion::tests::{any_occasion, slots};
    use super::*;
    use crate::load::{Draw, Load, LoadSet, MaximalSets, Months, Schedule, Window, maximal_sets};

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
    }
}
