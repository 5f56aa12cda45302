//! The least that a device can let through: a bound for plausibility, no figure to design with.

use uom::si::electric_current::ampere;

use super::Family;
use crate::citation::{Citation, Seen};
use crate::quantity::ElectricCurrent;

/// Least I²t that a device of a family and rating can let through, A²·s, and its source: whatever the fault, the element must melt, or the
/// contacts part.
///
/// As multiples of the rating's square: the element of a fuse for semiconductors melts from some 0.03 s, of any other from
/// 0.1 s (gG above 1 s); a breaker takes 1 ms at the very least, at 10 times its rating and more. A part of that, since
/// only what is out of reach must be refused.
pub(crate) fn least_let_through_A2s(family: Family, rating: ElectricCurrent) -> (f64, Citation) {
    let seconds = match family {
        Family::Ar => 0.02,
        _ if family.data().is_fuse => 0.05,
        _ => 0.1,
    };
    let amperes = rating.get::<ampere>();
    let source = Citation::new("common practice, no source", "least let-through of a device", Seen::Practice);
    (seconds * amperes * amperes, source)
}
