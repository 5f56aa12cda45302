//! Conductor sizes as the trade names them: AWG, kcmil, mm².

use core::fmt;

use uom::si::area::square_millimeter;

use super::Area;
use crate::error::{Allowed, Error};

/// How a conductor size is designated.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub enum Designation {
    /// American Wire Gauge number n: 40 … 1, then 0 for 1/0, −1 for 2/0, −2 for 3/0, −3 for 4/0.
    Awg(i8),
    /// Thousands of circular mils.
    Kcmil(u16),
    /// Nominal cross-section in square millimetres.
    SquareMillimeter(f64),
}

/// Size of one conductor, kept as it is designated: 14 AWG is 2.08 mm² and never "2.5".
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ConductorSize(Designation);

impl ConductorSize {
    /// American Wire Gauge number from 40 down to −3 (0 is 1/0, −1 is 2/0, −2 is 3/0, −3 is 4/0).
    ///
    /// # Errors
    /// [`Error::OutOfRange`] outside −3 … 40.
    pub const fn awg(number: i8) -> Result<Self, Error> {
        if number < -3 || number > 40 {
            return Err(Error::OutOfRange {
                name: "size",
                value: number as f64,
                unit: "AWG",
                allowed: Allowed::Words("from 40 to 1, or 1/0, 2/0, 3/0, 4/0"),
            });
        }
        Ok(Self(Designation::Awg(number)))
    }

    /// Thousands of circular mils, 212 … 2000 (smaller conductors have a gauge number).
    ///
    /// # Errors
    /// [`Error::OutOfRange`] outside 212 … 2000.
    pub const fn kcmil(size: u16) -> Result<Self, Error> {
        if size < 212 || size > 2000 {
            return Err(Error::OutOfRange {
                name: "size",
                value: size as f64,
                unit: "kcmil",
                allowed: Allowed::Between(212.0, 2000.0),
            });
        }
        Ok(Self(Designation::Kcmil(size)))
    }

    /// Nominal cross-section in mm², 0.01 … 1000.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] if NaN or outside 0.01 … 1000.
    pub const fn mm2(size: f64) -> Result<Self, Error> {
        // Written so that NaN fails.
        if !(size >= 0.01 && size <= 1000.0) {
            return Err(Error::OutOfRange {
                name: "size",
                value: size,
                unit: "mm2",
                allowed: Allowed::Between(0.01, 1000.0),
            });
        }
        Ok(Self(Designation::SquareMillimeter(size)))
    }

    /// How the size is designated.
    pub const fn designation(self) -> Designation {
        self.0
    }

    /// Nominal area of the metal.
    ///
    /// AWG after ASTM B258: d = 0.005 in × 92^((36 − n)/39), area of a solid round conductor.
    pub fn area(self) -> Area {
        Area::new::<square_millimeter>(match self.0 {
            Designation::Awg(n) => {
                let diameter_mm = 0.127 * libm::pow(92.0, (36.0 - f64::from(n)) / 39.0);
                core::f64::consts::FRAC_PI_4 * diameter_mm * diameter_mm
            }
            // 1 cmil is the area of a circle of 1 mil diameter: π/4 × (0.0254 mm)².
            Designation::Kcmil(k) => f64::from(k) * 1000.0 * core::f64::consts::FRAC_PI_4 * 0.0254 * 0.0254,
            Designation::SquareMillimeter(s) => s,
        })
    }

    /// Nominal area in mm².
    pub fn area_mm2(self) -> f64 {
        match self.0 {
            Designation::SquareMillimeter(s) => s,
            _ => self.area().get::<square_millimeter>(),
        }
    }
}

impl fmt::Display for ConductorSize {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.0 {
            Designation::Awg(n @ 1..) => write!(f, "{n} AWG"),
            Designation::Awg(n) => write!(f, "{}/0 AWG", 1 - n),
            Designation::Kcmil(k) => write!(f, "{k} kcmil"),
            Designation::SquareMillimeter(s) => write!(f, "{s} mm2"),
        }
    }
}
