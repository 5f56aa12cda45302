//! How parallel strings share a current (R15).
//!
//! The strings stand between a positive and a negative bar; between neighbours each bar has a link, whose resistance
//! includes its joints. The circuit is a ladder: its equations in the currents summed along it have three diagonals
//! and are solved in place, without a heap.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::ratio::ratio;

use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Ratio};

/// One of the strings of a bank.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StringSource {
    /// Voltage without current.
    pub emf: ElectricPotential,
    /// Resistance of its cells, of the links and joints within it, and of its own leads.
    pub resistance: ElectricalResistance,
}

/// The links from one string to the next, joints included.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Link {
    /// On the positive side.
    pub positive: ElectricalResistance,
    /// On the negative side.
    pub negative: ElectricalResistance,
}

/// Where the cables of the system leave the bank.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum TakeOff {
    /// Both at the first string.
    OneEnd,
    /// Positive at the first string, negative at the last.
    Diagonal,
    /// Positive and negative at any strings, counted from 0.
    At {
        /// String at which the positive cable leaves.
        positive: usize,
        /// String at which the negative cable leaves.
        negative: usize,
    },
    /// Each string with leads of its own, all alike, to one bar for each pole; there are no links.
    Busbar,
}

impl TakeOff {
    /// Whether this many strings may be joined so (R15): a diagonal take-off for two, leads to a busbar for any number.
    pub const fn is_admitted(self, strings: usize) -> bool {
        match self {
            Self::Busbar => true,
            Self::Diagonal => strings <= 2,
            Self::At { positive, negative } => strings <= 1 || (strings == 2 && positive != negative),
            Self::OneEnd => strings <= 1,
        }
    }
}

/// What one string carries.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StringShare {
    /// Its current, positive in discharge.
    pub current: ElectricCurrent,
    /// That over an equal share of the whole: 1 where all carry alike, negative where it is driven backwards. Nought
    /// where the whole is nought.
    pub part: Ratio,
}

impl Default for StringShare {
    fn default() -> Self {
        Self { current: ElectricCurrent::new::<ampere>(0.0), part: Ratio::new::<ratio>(0.0) }
    }
}

/// How a bank's strings share its current.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sharing {
    /// Voltage between the two take-offs.
    pub voltage: ElectricPotential,
    /// String that carries the most, either way, counted from 0.
    pub hardest: usize,
    /// Its current.
    pub greatest: ElectricCurrent,
    /// That over an equal share.
    pub greatest_part: Ratio,
}

/// Shares the current of a bank between its parallel strings.
///
/// `current` is that of the whole bank, positive in discharge; nought shows what strings of different voltage drive
/// through each other. `links` has one entry fewer than `strings`, and none for [`TakeOff::Busbar`]. `shares` takes
/// the result, one for each string; on an error it may be written in part.
///
/// # Errors
/// [`Error::WrongCount`] where the slices do not go together; [`Error::OutOfRange`] where there is no string, a
/// resistance of a string is not above nought, one of a link is negative, or anything is NaN or infinite;
/// [`Error::Contradiction`] where a take-off names a string that is not there.
///
/// # Source
/// Kirchhoff's laws; tested against a general nodal solution.
///
/// # Example
/// Four strings of 1 mΩ, joined by links of 1 mΩ and taken off diagonally:
/// ```
/// use ampwright::battery::{Link, StringShare, StringSource, TakeOff, share};
/// use ampwright::quantity::parse;
/// use uom::si::electric_current::ampere;
///
/// let string = StringSource { emf: parse("25.6 V")?, resistance: parse("1 mohm")? };
/// let link = Link { positive: parse("1 mohm")?, negative: parse("1 mohm")? };
/// let mut shares = [StringShare::default(); 4];
/// share(&[string; 4], &[link; 3], TakeOff::Diagonal, parse("100 A")?, &mut shares)?;
/// for (share, expected) in shares.iter().zip([37.5, 12.5, 12.5, 37.5]) {
///     assert!((share.current.get::<ampere>() - expected).abs() < 1e-9);
/// }
/// assert!(!TakeOff::Diagonal.is_admitted(4));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn share(
    strings: &[StringSource],
    links: &[Link],
    take_off: TakeOff,
    current: ElectricCurrent,
    shares: &mut [StringShare],
) -> Result<Sharing, Error> {
    let (positive, negative) = checked(strings, links, take_off, shares.len())?;
    let whole = current.get::<ampere>();
    if !whole.is_finite() {
        return out_of_range("current", whole, "A", Allowed::Finite);
    }
    let link =
        |at: usize| links.get(at).map_or((0.0, 0.0), |l| (l.positive.get::<ohm>(), l.negative.get::<ohm>()));
    // Current of all strings beyond a link, where the take-off lies before it.
    let beyond = |take_off: usize, at: usize| if at >= take_off { whole } else { 0.0 };

    // Unknown are the currents summed from the first string to each link. Forward: `part` keeps what is left of the upper
    // diagonal, `current` the right-hand side.
    let (mut above, mut right) = (0.0, 0.0);
    for (at, (pair, share)) in strings.windows(2).zip(shares.iter_mut()).enumerate() {
        let [near, far] = pair else { continue };
        let (near_ohm, far_ohm) = (near.resistance.get::<ohm>(), far.resistance.get::<ohm>());
        let (plus, minus) = link(at);
        let pivot = near_ohm + far_ohm + plus + minus - near_ohm * above;
        let driven = (near.emf - far.emf).get::<volt>()
            + plus * beyond(positive, at)
            + minus * beyond(negative, at)
            + near_ohm * right;
        above = far_ohm / pivot;
        right = driven / pivot;
        share.part = Ratio::new::<ratio>(above);
        share.current = ElectricCurrent::new::<ampere>(right);
    }
    // Backward, and from sums to currents: the last sum is the whole.
    let equal = whole / strings.len() as f64;
    let mut sum = whole;
    let mut worst = (0, 0.0);
    for at in (0..strings.len()).rev() {
        let before = match at.checked_sub(1).and_then(|previous| shares.get(previous)) {
            Some(previous) => previous.current.get::<ampere>() + previous.part.get::<ratio>() * sum,
            None => 0.0,
        };
        let own = sum - before;
        sum = before;
        if own.abs() >= worst.1 {
            worst = (at, own.abs());
        }
        if !own.is_finite() {
            return out_of_range("current of a string", own, "A", Allowed::Finite);
        }
        if let Some(share) = shares.get_mut(at) {
            share.current = ElectricCurrent::new::<ampere>(own);
            share.part = Ratio::new::<ratio>(if equal == 0.0 { 0.0 } else { own / equal });
        }
    }
    let hardest = shares.get(worst.0).copied().unwrap_or_default();
    Ok(Sharing {
        voltage: take_off_voltage(strings, links, shares, (positive, negative), whole),
        hardest: worst.0,
        greatest: hardest.current,
        greatest_part: hardest.part,
    })
}

/// Voltage between the take-offs: that of the string at the positive one, and along the negative bar to the other.
fn take_off_voltage(
    strings: &[StringSource],
    links: &[Link],
    shares: &[StringShare],
    (positive, negative): (usize, usize),
    whole: f64,
) -> ElectricPotential {
    let between = strings.get(positive).zip(shares.get(positive));
    let mut volts = between.map_or(f64::NAN, |(s, x)| {
        s.emf.get::<volt>() - s.resistance.get::<ohm>() * x.current.get::<ampere>()
    });
    let mut sum = 0.0;
    for (at, (link, share)) in links.iter().zip(shares).enumerate() {
        sum += share.current.get::<ampere>();
        // Current in the negative link, away from the first string: potential falls that way.
        let along = if at >= negative { whole - sum } else { -sum };
        let fall = link.negative.get::<ohm>() * along;
        // From the string of the positive take-off to that of the negative one.
        if at >= positive && at < negative {
            volts += fall;
        } else if at >= negative && at < positive {
            volts -= fall;
        }
    }
    ElectricPotential::new::<volt>(volts)
}

/// Checks all inputs but the current; the strings of the take-offs.
fn checked(
    strings: &[StringSource],
    links: &[Link],
    take_off: TakeOff,
    room: usize,
) -> Result<(usize, usize), Error> {
    let Some(last) = strings.len().checked_sub(1) else {
        return out_of_range("strings", 0.0, "", Allowed::AtLeast(1.0));
    };
    let needed = if take_off == TakeOff::Busbar { 0 } else { last };
    if links.len() != needed {
        return Err(Error::WrongCount { what: "links", given: links.len(), needed });
    }
    if room != strings.len() {
        return Err(Error::WrongCount { what: "shares", given: room, needed: strings.len() });
    }
    for string in strings {
        let (volts, ohms) = (string.emf.get::<volt>(), string.resistance.get::<ohm>());
        if !volts.is_finite() {
            return out_of_range("voltage of a string", volts, "V", Allowed::Finite);
        }
        if !(ohms > 0.0 && ohms.is_finite()) {
            return out_of_range("resistance of a string", ohms, "ohm", Allowed::Above(0.0));
        }
    }
    for ohms in links.iter().flat_map(|link| [link.positive.get::<ohm>(), link.negative.get::<ohm>()]) {
        if !(ohms >= 0.0 && ohms.is_finite()) {
            return out_of_range("resistance of a link", ohms, "ohm", Allowed::AtLeast(0.0));
        }
    }
    let (positive, negative) = match take_off {
        TakeOff::OneEnd | TakeOff::Busbar => (0, 0),
        TakeOff::Diagonal => (0, last),
        TakeOff::At { positive, negative } => (positive, negative),
    };
    if positive.max(negative) > last {
        return Err(Error::Contradiction {
            name: "take-off",
            value: positive.max(negative) as f64,
            unit: "",
            why: "there is no such string; they are counted from 0",
        });
    }
    Ok((positive, negative))
}

fn out_of_range<T>(name: &'static str, value: f64, unit: &'static str, allowed: Allowed) -> Result<T, Error> {
    Err(Error::OutOfRange { name, value, unit, allowed })
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use proptest::collection::vec;
    use proptest::prelude::*;

    fn string(volts: f64, milliohms: f64) -> StringSource {
        StringSource {
            emf: ElectricPotential::new::<volt>(volts),
            resistance: ElectricalResistance::new::<ohm>(milliohms * 1e-3),
        }
    }
    fn link(plus: f64, minus: f64) -> Link {
        let of = |milliohms: f64| ElectricalResistance::new::<ohm>(milliohms * 1e-3);
        Link { positive: of(plus), negative: of(minus) }
    }
    fn a(value: f64) -> ElectricCurrent {
        ElectricCurrent::new::<ampere>(value)
    }
    fn currents<const N: usize>(
        strings: [StringSource; N],
        links: &[Link],
        take_off: TakeOff,
        amperes: f64,
    ) -> ([f64; N], Sharing) {
        let mut shares = [StringShare::default(); N];
        let sharing = share(&strings, links, take_off, a(amperes), &mut shares).unwrap();
        (shares.map(|s| s.current.get::<ampere>()), sharing)
    }

    #[test]
    fn one_string_carries_all_and_two_on_a_diagonal_carry_alike() {
        let (one, sharing) = currents([string(12.0, 5.0)], &[], TakeOff::OneEnd, 40.0);
        assert_eq!(one, [40.0]);
        assert!((sharing.voltage.get::<volt>() - 11.8).abs() < 1e-12);
        let two = [string(12.0, 5.0); 2];
        let (diagonal, _) = currents(two, &[link(1.0, 1.0)], TakeOff::Diagonal, 100.0);
        assert!(diagonal.iter().all(|x| (x - 50.0).abs() < 1e-9), "{diagonal:?}");
        let (end, sharing) = currents(two, &[link(1.0, 1.0)], TakeOff::OneEnd, 100.0);
        // 5 against 5 + 2 mΩ.
        assert!((end[0] - 700.0 / 12.0).abs() < 1e-9 && sharing.hardest == 0);
    }

    /// Where the strings are as stiff as the links, the middle ones carry a third of the outer.
    #[test]
    fn a_diagonal_over_four_shares_by_the_ratio_of_string_to_link() {
        // By hand: outer = 25 A·(r + 2l)/(r + l) of 100 A.
        for (milliohms, outer) in [(1.0, 37.5), (1e-6, 50.0), (3.0, 31.25), (9.0, 27.5), (1e6, 25.0)] {
            let (shares, sharing) =
                currents([string(12.0, milliohms); 4], &[link(1.0, 1.0); 3], TakeOff::Diagonal, 100.0);
            for (share, expected) in shares.iter().zip([outer, 50.0 - outer, 50.0 - outer, outer]) {
                assert!((share - expected).abs() < 1e-4, "{milliohms} mΩ: {shares:?}");
            }
            assert!((sharing.greatest.get::<ampere>() - outer).abs() < 1e-4);
            assert!((sharing.greatest_part.value - outer / 25.0).abs() < 1e-5);
        }
    }

    #[test]
    fn a_busbar_with_leads_alike_shares_alike_however_many() {
        let (shares, sharing) = currents([string(24.0, 4.0); 7], &[], TakeOff::Busbar, 210.0);
        assert!(shares.iter().all(|x| (x - 30.0).abs() < 1e-9), "{shares:?}");
        assert!((sharing.voltage.get::<volt>() - (24.0 - 0.12)).abs() < 1e-9);
        assert_eq!(
            [TakeOff::OneEnd, TakeOff::Diagonal, TakeOff::Busbar]
                .map(|t| [1, 2, 3, 8].map(|n| t.is_admitted(n))),
            [[true, false, false, false], [true, true, false, false], [true; 4]]
        );
    }

    #[test]
    fn a_weaker_string_is_charged_by_the_others_without_any_load() {
        let strings = [string(12.8, 5.0), string(12.2, 5.0)];
        let (shares, sharing) = currents(strings, &[], TakeOff::Busbar, 0.0);
        assert!((shares[0] - 60.0).abs() < 1e-9 && (shares[1] + 60.0).abs() < 1e-9);
        assert_eq!(sharing.greatest_part.value, 0.0);
        assert!((sharing.voltage.get::<volt>() - 12.5).abs() < 1e-9);
    }

    proptest! {
        #[test]
        fn currents_sum_to_the_whole_and_both_laws_hold(
            ohms in vec(0.05..50.0f64, 2..9), links in vec((0.0..5.0f64, 0.0..5.0f64), 8), volts in vec(11.0..13.0f64, 9),
            amperes in -300.0..300.0f64, ends in (0usize..8, 0usize..8),
        ) {
            let strings: std::vec::Vec<_> = ohms.iter().zip(&volts).map(|(r, v)| string(*v, *r)).collect();
            let links: std::vec::Vec<_> = links.iter().take(strings.len() - 1).map(|(p, m)| link(*p, *m)).collect();
            let (positive, negative) = (ends.0 % strings.len(), ends.1 % strings.len());
            let mut shares = std::vec![StringShare::default(); strings.len()];
            let sharing = share(&strings, &links, TakeOff::At { positive, negative }, a(amperes), &mut shares).unwrap();
            let own: std::vec::Vec<f64> = shares.iter().map(|s| s.current.get::<ampere>()).collect();
            prop_assert!((own.iter().sum::<f64>() - amperes).abs() < 1e-6);
            // Round every mesh of two neighbours the voltages sum to nought.
            let mut sum = 0.0;
            for (at, link) in links.iter().enumerate() {
                sum += own[at];
                let plus = if at >= positive { amperes - sum } else { -sum };
                let minus = if at >= negative { amperes - sum } else { -sum };
                let across = |at: usize| strings[at].emf.value - strings[at].resistance.value * own[at];
                let around = across(at) + link.positive.value * plus + link.negative.value * minus - across(at + 1);
                prop_assert!(around.abs() < 1e-9, "mesh {at}: {around}");
            }
            // Power: what the strings give is delivered or lost.
            let given: f64 = strings.iter().zip(&own).map(|(s, i)| s.emf.value * i - s.resistance.value * i * i).sum();
            let mut lost = 0.0;
            sum = 0.0;
            for (at, link) in links.iter().enumerate() {
                sum += own[at];
                let plus = if at >= positive { amperes - sum } else { -sum };
                let minus = if at >= negative { amperes - sum } else { -sum };
                lost += link.positive.value * plus * plus + link.negative.value * minus * minus;
            }
            prop_assert!((given - lost - sharing.voltage.value * amperes).abs() < 1e-6 * (1.0 + given.abs()));
            prop_assert!(own.iter().all(|i| i.abs() <= sharing.greatest.value.abs() + 1e-9));
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(bits: [u64; 6]) {
            let [u, r, p, m, i, v] = bits.map(f64::from_bits);
            let mut shares = [StringShare::default(); 3];
            let odd = [string(u, r), string(12.0, 5.0), string(v, 5.0)];
            for take_off in [TakeOff::OneEnd, TakeOff::Diagonal, TakeOff::Busbar] {
                let links: &[Link] = if take_off == TakeOff::Busbar { &[] } else { &[link(p, m), link(1.0, 1.0)] };
                if share(&odd, links, take_off, a(i), &mut shares).is_ok() {
                    prop_assert!(shares.iter().all(|s| s.current.value.is_finite()));
                }
            }
        }
    }

    #[test]
    fn counts_and_places_that_do_not_go_together_are_refused() {
        let (two, mut shares) = ([string(12.0, 5.0); 2], [StringShare::default(); 2]);
        let mut slug =
            |links: &[Link], take_off| share(&two, links, take_off, a(1.0), &mut shares).unwrap_err().slug();
        assert_eq!(slug(&[], TakeOff::OneEnd), "wrong-count");
        assert_eq!(slug(&[link(1.0, 1.0)], TakeOff::Busbar), "wrong-count");
        assert_eq!(slug(&[link(1.0, -1.0)], TakeOff::OneEnd), "out-of-range");
        assert_eq!(slug(&[link(1.0, 1.0)], TakeOff::At { positive: 0, negative: 2 }), "contradiction");
        assert_eq!(share(&[], &[], TakeOff::OneEnd, a(1.0), &mut []).unwrap_err().slug(), "out-of-range");
        let short = share(&two, &[link(1.0, 1.0)], TakeOff::OneEnd, a(1.0), &mut shares[..1]);
        assert_eq!(short.unwrap_err().slug(), "wrong-count");
        let stiff = share(&[string(12.0, 0.0)], &[], TakeOff::OneEnd, a(1.0), &mut shares[..1]);
        assert_eq!(stiff.unwrap_err().slug(), "out-of-range");
    }
}
