//! Lugs, studs and terminals: what goes over what.

use core::fmt;
use core::str::FromStr;

use crate::error::{Error, Snippet};
use crate::quantity::ConductorSize;

/// Metric stud or bolt, by its nominal diameter in millimetres (M8 is 8).
///
/// ```
/// # use ampwright::cable::Stud;
/// let stud: Stud = "M8".parse()?;
/// assert_eq!(stud, Stud(8));
/// assert_eq!(stud.to_string(), "M8");
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Stud(pub u8);

impl Stud {
    /// Studs that lugs are made for, smallest first: coarse-thread sizes of ISO 262 (recalled).
    pub const ALL: [Self; 8] = [Self(4), Self(5), Self(6), Self(8), Self(10), Self(12), Self(14), Self(16)];
}

impl fmt::Display for Stud {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "M{}", self.0)
    }
}

impl FromStr for Stud {
    type Err = Error;

    fn from_str(text: &str) -> Result<Self, Error> {
        let unknown =
            Error::UnknownWord { text: Snippet::new(text), allowed: "M4, M5, M6, M8, M10, M12, M14, M16" };
        // Digits only: "M+8" and "M08" would parse as numbers.
        let digits = text.trim().strip_prefix('M').filter(|d| !d.starts_with(['+', '0'])).ok_or(unknown)?;
        let stud = Self(digits.parse().map_err(|_| unknown)?);
        if Self::ALL.contains(&stud) { Ok(stud) } else { Err(unknown) }
    }
}

/// Whether a lug made for one stud sits right on another.
///
/// Only its own size: a smaller hole does not go over, and a larger one bears on a rim too narrow to carry
/// the current and the torque. Common practice, no source.
///
/// # Example
/// ```
/// use ampwright::cable::lug_fits;
/// assert!(lug_fits("M8".parse()?, "M8".parse()?));
/// assert!(!lug_fits("M10".parse()?, "M8".parse()?));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn lug_fits(lug: Stud, stud: Stud) -> bool {
    lug == stud
}

/// Whether a terminal with a stated range, both ends included, takes a conductor; compared by metal area.
///
/// ```
/// # use ampwright::cable::terminal_takes;
/// # use ampwright::quantity::ConductorSize;
/// let range = (ConductorSize::mm2(2.5)?, ConductorSize::mm2(35.0)?);
/// assert!(terminal_takes(range, ConductorSize::awg(2)?)); // 33.6 mm²
/// assert!(!terminal_takes(range, ConductorSize::awg(14)?)); // 2.08 mm²
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn terminal_takes((least, most): (ConductorSize, ConductorSize), size: ConductorSize) -> bool {
    let area = size.area_mm2();
    least.area_mm2() <= area && area <= most.area_mm2()
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::string::ToString;

    #[test]
    fn studs_come_back_from_their_text() {
        for stud in Stud::ALL {
            assert_eq!(stud.to_string().parse(), Ok(stud));
        }
        for text in ["", "M", "8", "m8", "M7", "M08", "M+8", "M8x1.25", "M256", "M-8"] {
            assert_eq!(text.parse::<Stud>().unwrap_err().slug(), "unknown-word", "{text}");
        }
    }

    #[test]
    fn a_lug_fits_its_own_stud_only() {
        assert!(lug_fits(Stud(8), Stud(8)));
        assert!(!lug_fits(Stud(6), Stud(8)));
        assert!(!lug_fits(Stud(10), Stud(8)));
    }

    #[test]
    fn terminal_range_includes_both_ends() {
        let mm2 = |s| ConductorSize::mm2(s).unwrap();
        let range = (mm2(2.5), mm2(35.0));
        assert!(terminal_takes(range, mm2(2.5)) && terminal_takes(range, mm2(35.0)));
        assert!(!terminal_takes(range, mm2(1.5)) && !terminal_takes(range, mm2(50.0)));
    }
}
