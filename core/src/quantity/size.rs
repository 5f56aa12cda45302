//! Conductor sizes as the trade names them: AWG, kcmil, mm².

use core::fmt;

use uom::si::area::square_millimeter;

use super::Area;
use super::text::{split, unit_error};
use super::unit::{is_gauge, same};
use crate::error::{Allowed, Error, Snippet};

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

/// Examples of what is accepted, for error sentences.
const ACCEPTED: &str = "'16 mm2', '6 AWG' or '250 kcmil'";

impl core::str::FromStr for ConductorSize {
    type Err = Error;

    /// Reads `16 mm2`, `16 mm²`, `6 AWG`, `2/0 AWG` (also written `00 AWG`; `0 AWG` is 1/0) and `250 kcmil`.
    fn from_str(text: &str) -> Result<Self, Error> {
        if let Some(number) = before_gauge(text) {
            let unknown = Error::UnknownWord { text: Snippet::new(text.trim()), allowed: GAUGES };
            return gauge_number(number).and_then(|n| Self::awg(n).ok()).ok_or(unknown);
        }
        let (number, unit) = split(text, ACCEPTED)?;
        if same(unit, "mm2") {
            return Self::mm2(number);
        }
        if unit == "kcmil" {
            // 0 … 65535 holds every whole number that `kcmil` admits; the comparison refuses the rest.
            #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)]
            let whole = number as u16;
            let allowed = Allowed::Words("a whole number from 212 to 2000");
            let refused = Error::OutOfRange { name: "size", value: number, unit: "kcmil", allowed };
            return if f64::from(whole) == number {
                Self::kcmil(whole).map_err(|_| refused)
            } else {
                Err(refused)
            };
        }
        Err(unit_error(Snippet::new(text.trim()), unit, "a conductor size", ACCEPTED))
    }
}

const GAUGES: &str = "40 AWG to 1 AWG, 1/0, 2/0, 3/0 or 4/0 AWG";

/// What stands before `AWG`.
fn before_gauge(text: &str) -> Option<&str> {
    let text = text.trim();
    let (number, unit) = text.split_at_checked(text.len().checked_sub(3)?)?;
    let number = number.trim_end();
    (is_gauge(unit) && !number.is_empty()).then_some(number)
}

/// 1/0, 2/0 and so on are numbered 0, −1 and so on; nought may be repeated instead.
fn gauge_number(text: &str) -> Option<i8> {
    let digits = |t: &str| t.bytes().all(|b| b.is_ascii_digit()).then(|| t.parse::<i8>().ok()).flatten();
    if let Some((noughts, "0")) = text.split_once('/') {
        return digits(noughts).filter(|n| (1..=4).contains(n)).map(|n| 1 - n);
    }
    if text.len() <= 4 && text.bytes().all(|b| b == b'0') {
        return i8::try_from(text.len()).ok().map(|n| 1 - n);
    }
    digits(text).filter(|&n| n >= 1)
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::{String, ToString};

    use proptest::prelude::*;

    use super::*;

    fn error(text: &str) -> String {
        text.parse::<ConductorSize>().unwrap_err().to_string()
    }

    #[test]
    fn sizes_read_as_the_trade_writes_them() {
        for (text, size) in [
            ("16 mm2", ConductorSize::mm2(16.0)),
            ("16mm²", ConductorSize::mm2(16.0)),
            ("2.5 mm2", ConductorSize::mm2(2.5)),
            ("6 AWG", ConductorSize::awg(6)),
            ("6awg", ConductorSize::awg(6)),
            ("1/0 AWG", ConductorSize::awg(0)),
            ("0 AWG", ConductorSize::awg(0)),
            ("2/0 AWG", ConductorSize::awg(-1)),
            ("0000 AWG", ConductorSize::awg(-3)),
            ("250 kcmil", ConductorSize::kcmil(250)),
        ] {
            assert_eq!(text.parse::<ConductorSize>(), size, "{text}");
        }
    }

    #[test]
    fn each_bad_size_has_its_own_sentence() {
        assert_eq!(error("16"), "'16' has no unit; write '16 mm2', '6 AWG' or '250 kcmil'");
        assert_eq!(
            error("16 A"),
            "'16 A' is a current; a conductor size is needed, such as '16 mm2', '6 AWG' or '250 kcmil'"
        );
        assert_eq!(
            error("AWG 6"),
            "'AWG 6' does not begin with a number; write '16 mm2', '6 AWG' or '250 kcmil'"
        );
        for text in ["-1 AWG", "5/0 AWG", "0/0 AWG", "6.5 AWG", "41 AWG", "999 AWG", "2/1 AWG", "00000 AWG"] {
            assert_eq!(
                error(text),
                std::format!(
                    "'{text}' is not known here; it must be one of 40 AWG to 1 AWG, 1/0, 2/0, 3/0 or 4/0 AWG"
                )
            );
        }
        assert_eq!(error("0 mm2"), "size is 0 mm2; it must be between 0.01 and 1000");
        for (text, value) in [("250.5 kcmil", "250.5"), ("-250 kcmil", "-250"), ("2001 kcmil", "2001")] {
            assert_eq!(
                error(text),
                std::format!("size is {value} kcmil; it must be a whole number from 212 to 2000")
            );
        }
        assert!(ConductorSize::mm2(f64::NAN).is_err() && ConductorSize::mm2(f64::INFINITY).is_err());
    }

    #[test]
    fn thicker_gauges_have_more_area_up_to_the_first_kcmil() {
        let mut last = 0.0;
        for number in (-3..=40).rev() {
            let area = ConductorSize::awg(number).unwrap().area_mm2();
            assert!(area > last, "{number}");
            last = area;
        }
        // By definition (ASTM B258): 36 AWG is 5 mil, 4/0 is 460 mil, 211.6 kcmil.
        let mils = |mil: f64| core::f64::consts::FRAC_PI_4 * (0.0254 * mil) * (0.0254 * mil);
        assert!((ConductorSize::awg(36).unwrap().area_mm2() / mils(5.0) - 1.0).abs() < 1e-12);
        assert!((last / mils(460.0) - 1.0).abs() < 1e-12);
        assert!(ConductorSize::kcmil(212).unwrap().area_mm2() > last);
    }

    #[test]
    fn every_designation_reads_back_what_it_prints() {
        let gauges = (-3..=40).map(ConductorSize::awg);
        for size in gauges.chain((212..=2000).map(ConductorSize::kcmil)) {
            let size = size.unwrap();
            assert_eq!(size.to_string().parse(), Ok(size));
        }
    }

    proptest! {
        #[test]
        fn every_square_millimetre_reads_back(value in 0.01..1000.0f64) {
            let size = ConductorSize::mm2(value).unwrap();
            prop_assert_eq!(size.to_string().parse(), Ok(size));
        }
    }
}
