//! Wear by cycling: cycles counted by the rainflow method, and what they use up of a battery's life.

use uom::si::ratio::ratio;

use super::{Chemistry, data};
use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::Ratio;

/// One counted cycle of a history.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CountedCycle {
    /// Difference of its ends, in the unit of the history: depth of discharge as a part of the capacity.
    pub range: f64,
    /// Middle between its ends, in the same.
    pub mean: f64,
    /// 1 for a whole cycle, 0.5 for half of one.
    pub count: f64,
}

/// Counts the cycles of a history of peaks and valleys: the rainflow method with three points.
///
/// `history` are values in order of time, such as states of charge; what lies between a peak and a valley is passed
/// over. `stack` is room to work in, as long as the history at most; each cycle is handed to `found` in the order of
/// counting.
///
/// # Errors
/// [`Error::OutOfRange`] where a value is NaN or infinite, [`Error::WrongCount`] where the stack is too short.
///
/// # Source
/// ASTM E1049-85, 5.4.4.
///
/// # Example
/// ```
/// use ampwright::battery::rainflow;
/// let mut stack = [0.0; 9];
/// let mut total = 0.0;
/// rainflow(&[-2.0, 1.0, -3.0, 5.0, -1.0, 3.0, -4.0, 4.0, -2.0], &mut stack, |cycle| total += cycle.count)?;
/// assert_eq!(total, 4.0);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn rainflow(
    history: &[f64],
    stack: &mut [f64],
    mut found: impl FnMut(CountedCycle),
) -> Result<(), Error> {
    let mut used = 0;
    for (at, &value) in history.iter().enumerate() {
        if !value.is_finite() {
            return Err(Error::OutOfRange { name: "history", value, unit: "", allowed: Allowed::Finite });
        }
        if !turns(history, at) {
            continue;
        }
        let room = stack.len();
        let Some(place) = stack.get_mut(used) else {
            return Err(Error::WrongCount {
                what: "places of the stack",
                given: room,
                needed: history.len(),
            });
        };
        *place = value;
        used += 1;
        // X is the latest range, Y the one before it; Z is the first of the three points.
        while let Some(&[z, y, x]) =
            used.checked_sub(3).and_then(|from| stack.get(from..used)).and_then(|s| s.first_chunk())
        {
            if (x - y).abs() < (y - z).abs() {
                break;
            }
            if used == 3 {
                // The range begins at the start of what is left: half a cycle, and the start is dropped.
                found(cycle(z, y, 0.5));
                stack.copy_within(1..used, 0);
                used -= 1;
            } else {
                found(cycle(z, y, 1.0));
                stack.copy_within(used - 1..used, used - 3);
                used -= 2;
            }
        }
    }
    for pair in stack.get(..used).unwrap_or_default().windows(2) {
        if let [a, b] = *pair {
            found(cycle(a, b, 0.5));
        }
    }
    Ok(())
}

fn cycle(a: f64, b: f64, count: f64) -> CountedCycle {
    CountedCycle { range: (b - a).abs(), mean: 0.5 * (a + b), count }
}

/// Whether a value is the first, the last, or a peak or valley, a plateau counting once, at its end.
fn turns(history: &[f64], at: usize) -> bool {
    let (Some(&here), Some(before)) = (history.get(at), history.get(..at)) else { return false };
    let Some(&next) = history.get(at + 1) else {
        // The last, unless nothing has moved.
        return at == 0 || before.iter().any(|x| *x != here);
    };
    if next == here {
        return false;
    }
    match before.iter().rev().find(|x| **x != here) {
        Some(&previous) => (previous < here) != (here < next),
        None => true,
    }
}

/// Cycles of one depth that a battery of a chemistry lasts.
///
/// Between rows of [`ChemistryData::cycles`](super::ChemistryData) on a straight line in logarithms, as such curves
/// are drawn: our choice. Shallower than the first row, cycles in proportion to one over the depth, which gives no
/// credit for shallow cycles; deeper than the last, the same, which is on the low side too.
fn cycles_at(chemistry: Chemistry, depth: f64) -> f64 {
    let rows = data(chemistry).cycles.value;
    let inverse = |row: &(f64, f64)| row.1 * row.0 / depth;
    match (rows.first(), rows.last()) {
        (Some(first), _) if depth <= first.0 => inverse(first),
        (_, Some(last)) if depth >= last.0 => inverse(last),
        _ => rows
            .windows(2)
            .find_map(|pair| match *pair {
                [(d0, n0), (d1, n1)] if d0 < depth && depth <= d1 => {
                    let part = libm::log(depth / d0) / libm::log(d1 / d0);
                    Some(n0 * libm::pow(n1 / n0, part))
                }
                _ => None,
            })
            .unwrap_or(f64::NAN),
    }
}

calculations! {
    /// Cycles of one depth until a battery is worn out.
    ///
    /// General figures: stationary cells are often rated for several times as many, cheap ones for fewer.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{Chemistry, cycle_life}, quantity::{parse, readable}};
    /// let result = cycle_life(Chemistry::Lfp, parse("80 %")?)?;
    /// assert_eq!(readable(result).to_string(), "900");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn cycle_life(
        /// Of the battery.
        chemistry: Chemistry in choice [choice],
        /// Of each cycle.
        depth: Ratio in ratio [0.001 ..= 1.0],
    ) -> cycles: Ratio in ratio
    formula "the straight line in logarithms between rows (flooded 5000 at 0.1, 2800 at 0.2, 1200 at 0.5, 700 at \
        0.8; AGM 3000 at 0.1, 1200 at 0.3, 600 at 0.5, 400 at 0.8; gel 4000, 1500, 900, 500 there; LFP 15000 at 0.1, \
        9000 at 0.2, 3000 at 0.4, 1500 at 0.6, 900 at 0.8, 600 at 1; NMC 6000, 2000, 1000, 600, 400, 300 there; \
        nickel-cadmium 6000 at 0.2, 2500 at 0.5, 1500 at 0.8); beyond the ends N·d of the end"
    source "lithium: a public table of cycles to 70 %, part of it seen; the rest recalled; the line between rows is \
        our choice"
    { Ratio::new::<ratio>(cycles_at(chemistry, depth.value)) }

    /// Part of a battery's life that a number of cycles of one depth uses up.
    ///
    /// # Example
    /// A year of LFP at 40 % a day:
    /// ```
    /// use ampwright::{battery::{Chemistry, cycle_wear}, quantity::{parse, readable}};
    /// let result = cycle_wear(Chemistry::Lfp, parse("40 %")?, parse("365")?)?;
    /// assert_eq!(readable(result).to_string(), "0.1217");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn cycle_wear(
        /// Of the battery.
        chemistry: Chemistry in choice [choice],
        /// Of each cycle.
        depth: Ratio in ratio [0.001 ..= 1.0],
        /// Cycles; halves count.
        cycles: Ratio in ratio [>= 0.0],
    ) -> wear: Ratio in ratio
    formula "w = n/N(d); the sum over all depths is 1 when the battery is worn out"
    source "Miner's rule; N as for the cycle life"
    { Ratio::new::<ratio>(cycles.value / cycles_at(chemistry, depth.value)) }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use proptest::prelude::*;
    use std::vec::Vec;

    fn counted(history: &[f64]) -> Vec<CountedCycle> {
        let mut stack = std::vec![0.0; history.len()];
        let mut found = Vec::new();
        rainflow(history, &mut stack, |cycle| found.push(cycle)).unwrap();
        found
    }

    #[test]
    fn nothing_a_point_and_a_slope() {
        assert!(counted(&[]).is_empty() && counted(&[1.0]).is_empty() && counted(&[1.0, 1.0]).is_empty());
        let half = CountedCycle { range: 2.0, mean: 1.0, count: 0.5 };
        assert_eq!(counted(&[0.0, 2.0]), [half]);
        assert_eq!(counted(&[0.0, 0.5, 0.5, 1.0, 2.0, 2.0]), [half]);
    }

    #[test]
    fn a_full_swing_with_small_ones_in_it() {
        // Down to 0.2 by day, a dip on the way, and back.
        let cycles = counted(&[1.0, 0.6, 0.7, 0.2, 1.0]);
        let whole: f64 = cycles.iter().filter(|c| (c.range - 0.8).abs() < 1e-12).map(|c| c.count).sum();
        let small: f64 = cycles.iter().filter(|c| (c.range - 0.1).abs() < 1e-12).map(|c| c.count).sum();
        assert_eq!((whole, small), (1.0, 1.0));
    }

    proptest! {
        #[test]
        fn half_cycles_are_as_many_as_slopes_and_the_greatest_range_is_among_them(
            history in proptest::collection::vec(-1.0..1.0f64, 2..60),
        ) {
            let cycles = counted(&history);
            let mut turns: Vec<f64> = Vec::new();
            for (at, value) in history.iter().enumerate() {
                let peak = at == 0
                    || at + 1 == history.len()
                    || (history[at - 1] < *value) == (*value > history[at + 1]);
                if peak {
                    turns.push(*value);
                }
            }
            let halves: f64 = cycles.iter().map(|c| 2.0 * c.count).sum();
            prop_assert_eq!(halves, turns.len() as f64 - 1.0);
            let most = turns.iter().copied().fold(f64::MIN, f64::max);
            let least = turns.iter().copied().fold(f64::MAX, f64::min);
            let greatest = cycles.iter().map(|c| c.range).fold(0.0, f64::max);
            prop_assert!((greatest - (most - least)).abs() < 1e-12);
        }

        #[test]
        fn deeper_cycles_wear_more(place in 0usize..6, depth in 0.001..0.99f64, more in 0.001..0.01f64) {
            let chemistry = Chemistry::ALL[place];
            prop_assert!(cycles_at(chemistry, depth + more) < cycles_at(chemistry, depth));
            prop_assert!(cycles_at(chemistry, depth).is_finite());
        }
    }

    #[test]
    fn odd_histories_and_too_short_a_stack_are_refused() {
        for odd in [f64::NAN, f64::INFINITY] {
            assert!(rainflow(&[0.0, odd, 1.0], &mut [0.0; 3], |_| ()).is_err());
        }
        let error = rainflow(&[0.0, 1.0, 0.2, 0.9, 0.3], &mut [0.0; 2], |_| ()).unwrap_err();
        assert_eq!(error.slug(), "wrong-count");
    }

    #[test]
    fn rows_are_met_and_the_ends_go_on() {
        for chemistry in Chemistry::ALL {
            let rows = data(chemistry).cycles.value;
            for (depth, cycles) in rows {
                assert!((cycles_at(chemistry, *depth) / cycles - 1.0).abs() < 1e-12, "{chemistry} {depth}");
            }
            let (depth, cycles) = rows[0];
            assert!((cycles_at(chemistry, 0.5 * depth) - 2.0 * cycles).abs() < 1e-6);
        }
    }

    /// The faces print the formula: its figures are those of the tables.
    #[test]
    fn the_formula_names_the_figures_of_the_tables() {
        let formula = ENTRIES.iter().find(|e| e.name == "cycle_life").unwrap().formula;
        for chemistry in Chemistry::ALL {
            for (_, cycles) in data(chemistry).cycles.value {
                assert!(formula.contains(&std::format!("{cycles}")), "{chemistry}: {cycles}");
            }
        }
    }
}
