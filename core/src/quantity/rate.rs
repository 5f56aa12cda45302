//! Values bound to a range: charge rate and state of charge.

use core::fmt;

use crate::error::{Allowed, Error};

/// Current as a multiple of capacity, per hour (the C-rate): 0.2 /h charges 100 Ah with 20 A.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct ChargeRate(f64);

impl ChargeRate {
    /// A rate per hour, 0 … 1000.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] if NaN or outside 0 … 1000 /h.
    pub const fn per_hour(rate: f64) -> Result<Self, Error> {
        if !(rate >= 0.0 && rate <= 1000.0) {
            return Err(Error::OutOfRange {
                name: "charge rate",
                value: rate,
                unit: "/h",
                allowed: Allowed::Between(0.0, 1000.0),
            });
        }
        Ok(Self(rate))
    }

    /// A rate that the catalogue checks itself.
    pub(crate) const fn unchecked(rate: f64) -> Self {
        Self(rate)
    }

    /// The rate per hour.
    pub const fn get(self) -> f64 {
        self.0
    }
}

impl fmt::Display for ChargeRate {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} /h", self.0)
    }
}

/// Charge held, as a part of the capacity: 0 is empty, 1 is full.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct StateOfCharge(f64);

impl StateOfCharge {
    /// A part of the capacity, 0 … 1.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] if NaN or outside 0 … 1.
    pub const fn new(part: f64) -> Result<Self, Error> {
        if !(part >= 0.0 && part <= 1.0) {
            return Err(Error::OutOfRange {
                name: "state of charge",
                value: part,
                unit: "",
                allowed: Allowed::Between(0.0, 1.0),
            });
        }
        Ok(Self(part))
    }

    /// The part of the capacity.
    pub const fn get(self) -> f64 {
        self.0
    }
}
