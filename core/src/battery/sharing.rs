//! How parallel strings share a current (R15).
//!
//! The strings stand between a positive and a negative bar; between neighbours each bar has a link, whose resistance
//! includes its joints. The circuit is a ladder: its equations in the currents summed along it have three diagonals and are
//! solved in place, without a heap.

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
    /// That over an equal share of the whole: 1 where all carry alike, negative where it is driven backwards. Nought where the
    /// whole is nought.
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
/// `current` is that of the whole bank, positive in discharge; nought shows what strings of different voltage drive through
/// each other. `links` has one entry fewer than `strings`, and none for [`TakeOff::Busbar`]. `shares` takes the result, one for
/// each string, and is written on success only in part on an error.
///
/// # Errors
/// [`Error::WrongCount`] where the slices do not go together; [`Error::OutOfRange`] where there is no string, a resistance of a
/// string is not above nought, one of a link is negative, or anything is NaN or infinite; [`Error::Contradiction`] where a
/// take-off names a string that is not there.
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
