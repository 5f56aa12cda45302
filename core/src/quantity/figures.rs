//! Digits as a table of the trade would print them.

use core::fmt;

/// Prints a number with three to four digits: `3667`, `363.9`, `62.88`, `0.229`.
///
/// ```
/// # use ampwright::quantity::Figures;
/// assert_eq!(Figures(1108334.1).to_string(), "1108334");
/// assert_eq!(Figures(363.95).to_string(), "364");
/// assert_eq!(Figures(62.8771).to_string(), "62.88");
/// assert_eq!(Figures(0.22891).to_string(), "0.229");
/// assert_eq!(Figures(15.0).to_string(), "15");
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Figures(pub f64);

impl Figures {
    /// The number as it will be read.
    fn rounded(self) -> (f64, usize) {
        let size = libm::fabs(self.0);
        let places = match size {
            s if s >= 999.5 => 0,
            s if s >= 99.95 => 1,
            s if s >= 1.0 => 2,
            _ => 3,
        };
        let scale = [1.0, 10.0, 100.0, 1000.0].get(places).copied().unwrap_or(1.0);
        (libm::round(self.0 * scale) / scale, places)
    }

    /// Whether two numbers read the same.
    pub fn reads_like(self, other: f64) -> bool {
        self.rounded().0 == Self(other).rounded().0
    }
}

impl fmt::Display for Figures {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let (value, places) = self.rounded();
        if !self.0.is_finite() {
            return write!(f, "{}", self.0);
        }
        // As few places as give the rounded number.
        for fewer in 0..places {
            let scale = [1.0, 10.0, 100.0].get(fewer).copied().unwrap_or(1.0);
            if libm::round(value * scale) / scale == value {
                return write!(f, "{value:.fewer$}");
            }
        }
        write!(f, "{value:.places$}")
    }
}
