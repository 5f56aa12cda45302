//! One overcurrent device as chosen or found.

use super::Family;
use crate::quantity::{ElectricCurrent, ElectricPotential};

/// Whether the device depends on the direction of current.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Polarity {
    /// Works in both directions.
    None,
    /// Marked + and −: must not be reversed, nor used where current can reverse.
    Marked,
}

/// What supply a device is rated for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Supply {
    /// Rated for DC up to this voltage (whole device, poles as wired).
    Dc(ElectricPotential),
    /// Rated for DC up to this voltage for each pole, with so many poles in series.
    PerPole(ElectricPotential, u8),
    /// Rated for AC only: refused on DC (R6).
    AcOnly,
    /// Not stated.
    NotStated,
}

impl Supply {
    /// Greatest DC voltage it breaks; `None` where it is rated for AC only or nothing is stated.
    ///
    /// `shared`: the poles are divided between both conductors, as in a floating system. A fault to earth on each
    /// side of the device then leaves only the poles of one conductor in series: half of them count.
    ///
    /// ```
    /// # use ampwright::device::Supply;
    /// # use uom::si::{f64::ElectricPotential, electric_potential::volt};
    /// let two_poles = Supply::PerPole(ElectricPotential::new::<volt>(60.0), 2);
    /// assert_eq!(two_poles.voltage(false), Some(ElectricPotential::new::<volt>(120.0)));
    /// assert_eq!(two_poles.voltage(true), Some(ElectricPotential::new::<volt>(60.0)));
    /// ```
    pub fn voltage(self, shared: bool) -> Option<ElectricPotential> {
        match self {
            Self::Dc(whole) => Some(whole),
            Self::PerPole(each, poles) => Some(each * f64::from(if shared { poles / 2 } else { poles })),
            Self::AcOnly | Self::NotStated => None,
        }
    }
}

/// One overcurrent device as chosen or found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Device {
    /// Family.
    pub family: Family,
    /// Rated current.
    pub rating: ElectricCurrent,
    /// Supply it is rated for.
    pub supply: Supply,
    /// Interrupting rating (breaking capacity) at that voltage on DC, if stated.
    pub breaking: Option<ElectricCurrent>,
    /// Polarity.
    pub polarity: Polarity,
    /// Stated to carry 100 % of its rating continuously, beyond what the family gives.
    pub full_rated: bool,
}

impl Device {
    /// Current it carries for hours: its rating, or eight tenths of it where the family gives no more and the
    /// device is not marked for 100 %. The 1.25 of `us` on continuous load is the same margin: never both.
    ///
    /// ```
    /// # use ampwright::prelude::*;
    /// let breaker = Device {
    ///     family: Family::MoldedCase,
    ///     rating: ElectricCurrent::new::<ampere>(100.0),
    ///     supply: Supply::NotStated,
    ///     breaking: None,
    ///     polarity: Polarity::None,
    ///     full_rated: false,
    /// };
    /// assert_eq!(breaker.continuous_current(), ElectricCurrent::new::<ampere>(80.0));
    /// ```
    pub fn continuous_current(&self) -> ElectricCurrent {
        if self.full_rated { self.rating } else { self.rating * self.family.data().continuous_ratio }
    }

    /// Current at which it has operated within the conventional time (I2); `None` as
    /// [`Family::operating_ratio`].
    ///
    /// ```
    /// # use ampwright::device::{Device, Family, Polarity, Supply};
    /// # use uom::si::{f64::{ElectricCurrent, ElectricPotential}, electric_current::ampere, electric_potential::volt};
    /// let fuse = Device {
    ///     family: Family::Gg,
    ///     rating: ElectricCurrent::new::<ampere>(100.0),
    ///     supply: Supply::Dc(ElectricPotential::new::<volt>(80.0)),
    ///     breaking: None,
    ///     polarity: Polarity::None,
    ///     full_rated: false,
    /// };
    /// assert_eq!(fuse.operating_current(), Some(ElectricCurrent::new::<ampere>(160.0)));
    /// ```
    pub fn operating_current(&self) -> Option<ElectricCurrent> {
        Some(self.rating * self.family.operating_ratio(self.rating)?)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use uom::si::electric_current::ampere;

    fn device(family: Family, amperes: f64) -> Device {
        Device {
            family,
            rating: ElectricCurrent::new::<ampere>(amperes),
            supply: Supply::NotStated,
            breaking: None,
            polarity: Polarity::None,
            full_rated: false,
        }
    }

    #[test]
    fn eight_tenths_unless_marked_for_full_rating() {
        let breaker = device(Family::MoldedCase, 100.0);
        assert_eq!(breaker.continuous_current(), ElectricCurrent::new::<ampere>(80.0));
        let marked = Device { full_rated: true, ..breaker };
        assert_eq!(marked.continuous_current(), marked.rating);
        let fuse = device(Family::Gg, 100.0);
        assert_eq!(fuse.continuous_current(), fuse.rating);
    }

    #[test]
    fn operating_current_is_none_without_a_figure() {
        assert_eq!(device(Family::Ar, 100.0).operating_current(), None);
        assert_eq!(device(Family::ClassT, 800.0).operating_current(), None);
        let odd = device(Family::Gg, f64::NAN);
        assert_eq!(odd.operating_current(), None);
    }
}
