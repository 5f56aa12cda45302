//! A number between two bounds.

/// Least and greatest.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Span {
    pub least: f64,
    pub greatest: f64,
}

impl Span {
    pub const NOTHING: Self = Self::exactly(0.0);

    pub const fn new(least: f64, greatest: f64) -> Self {
        Self { least, greatest }
    }

    pub const fn exactly(value: f64) -> Self {
        Self { least: value, greatest: value }
    }

    pub fn around(value: f64, error: f64) -> Self {
        Self { least: value - error, greatest: value + error }
    }

    pub fn plus(self, other: Self) -> Self {
        Self { least: self.least + other.least, greatest: self.greatest + other.greatest }
    }

    pub fn less(self, other: Self) -> Self {
        Self { least: self.least - other.greatest, greatest: self.greatest - other.least }
    }

    /// Product of spans that hold nothing negative.
    pub fn times(self, other: Self) -> Self {
        Self { least: self.least * other.least, greatest: self.greatest * other.greatest }
    }

    /// Quotient of spans that hold nothing negative; without upper end where the divisor may vanish.
    pub fn over(self, other: Self) -> Self {
        let least = if other.greatest > 0.0 { self.least / other.greatest } else { 0.0 };
        let greatest = if other.least > 0.0 { self.greatest / other.least } else { f64::INFINITY };
        Self { least, greatest }
    }

    /// Nothing below nought.
    pub fn nought_or_more(self) -> Self {
        Self { least: self.least.max(0.0), greatest: self.greatest.max(0.0) }
    }

    /// All of it lies above all of the other.
    pub fn is_above(self, other: Self) -> bool {
        self.least > other.greatest
    }
}
