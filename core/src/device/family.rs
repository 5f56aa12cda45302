//! Device families by open standard: what each standard says of its devices.

use core::fmt;
use core::str::FromStr;

use uom::si::electric_current::ampere;

use super::conventional::{Band, band_of};
use super::data;
use crate::citation::Citation;
use crate::error::{Error, Snippet};
use crate::quantity::ElectricCurrent;

/// Family of overcurrent device, by the standard it is made to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Family {
    /// General-purpose fuse-link, IEC 60269-2.
    Gg,
    /// Photovoltaic fuse-link, IEC 60269-6.
    Gpv,
    /// Semiconductor fuse-link, partial range, IEC 60269-4: short-circuit only.
    Ar,
    /// Class T fuse, UL 248-15.
    ClassT,
    /// Blade fuse-link for road vehicles, ISO 8820-3.
    Blade,
    /// Bolted strip fuse-link, ISO 8820-5.
    BoltedStrip,
    /// Circuit breaker for DC, IEC 60898-3, type B.
    MiniatureB,
    /// Circuit breaker for DC, IEC 60898-3, type C.
    MiniatureC,
    /// Circuit breaker, IEC 60947-2.
    Industrial,
    /// Molded-case circuit breaker, UL 489.
    MoldedCase,
    /// Supplementary protector, UL 1077.
    Supplementary,
}

/// What a family's standard says of it.
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct FamilyData {
    /// The family.
    pub family: Family,
    /// Word in site files: `gG`, `class T`.
    pub word: &'static str,
    /// Fuse (true) or breaker.
    pub is_fuse: bool,
    /// Protects against overload as well as short-circuit.
    pub overload: bool,
    /// Part of the rating it carries for hours: 0.8, or 1.0 where its standard makes the rating the current it
    /// carries without limit of time. The 1.25 of `us` on continuous load is the same margin: never both.
    pub continuous_ratio: f64,
    /// Source of the continuous ratio.
    pub continuous_source: Citation,
    /// Conventional currents by rating; empty where none are held.
    pub conventional: &'static [Band],
    /// Lower and upper edge of the instantaneous trip on DC, × rating; `None` for fuses and where the standard
    /// fixes none.
    pub instantaneous: Option<(f64, f64)>,
    /// Ratings the family is made in, amperes, smallest first.
    pub ratings_A: &'static [f64],
    /// Source of the ratings.
    pub ratings_source: Citation,
    /// Standard.
    pub source: Citation,
}

impl Family {
    /// All families, for lists and errors.
    pub const ALL: [Family; 11] = [
        Self::Gg,
        Self::Gpv,
        Self::Ar,
        Self::ClassT,
        Self::Blade,
        Self::BoltedStrip,
        Self::MiniatureB,
        Self::MiniatureC,
        Self::Industrial,
        Self::MoldedCase,
        Self::Supplementary,
    ];

    /// What the family's standard says.
    ///
    /// ```
    /// # use ampwright::device::Family;
    /// assert_eq!(Family::ClassT.data().word, "class T");
    /// assert!(!Family::Ar.data().overload);
    /// ```
    pub fn data(self) -> &'static FamilyData {
        match self {
            Self::Gg => &data::GG,
            Self::Gpv => &data::GPV,
            Self::Ar => &data::AR,
            Self::ClassT => &data::CLASS_T,
            Self::Blade => &data::BLADE,
            Self::BoltedStrip => &data::BOLTED_STRIP,
            Self::MiniatureB => &data::MINIATURE_B,
            Self::MiniatureC => &data::MINIATURE_C,
            Self::Industrial => &data::INDUSTRIAL,
            Self::MoldedCase => &data::MOLDED_CASE,
            Self::Supplementary => &data::SUPPLEMENTARY,
        }
    }

    /// Conventional currents at a rating, with their source; `None` where none are held for it.
    pub fn conventional(self, rating: ElectricCurrent) -> Option<&'static Band> {
        let amperes = rating.get::<ampere>();
        // Beyond the largest rating the family is made in, its standard says nothing.
        let largest = self.ratings_A().last().copied().unwrap_or(f64::MAX);
        band_of(self.data().conventional, amperes).filter(|_| amperes <= largest)
    }

    /// Upper conventional current (it has operated within the conventional time), × rating.
    ///
    /// `None` where the family does not operate on overload at all (its `overload` is false), and where no
    /// figure is held (its `overload` is true): then whether it opens in time cannot be checked.
    ///
    /// ```
    /// # use ampwright::device::Family;
    /// # use uom::si::{f64::ElectricCurrent, electric_current::ampere};
    /// let ratio = |amperes| Family::Gg.operating_ratio(ElectricCurrent::new::<ampere>(amperes));
    /// assert_eq!(ratio(10.0), Some(1.9));
    /// assert_eq!(ratio(16.0), Some(1.6));
    /// ```
    pub fn operating_ratio(self, rating: ElectricCurrent) -> Option<f64> {
        self.conventional(rating).map(|band| band.operating_ratio)
    }

    /// Lower conventional current (it must not operate within the conventional time), × rating.
    pub fn non_operating_ratio(self, rating: ElectricCurrent) -> Option<f64> {
        self.conventional(rating).map(|band| band.non_operating_ratio)
    }

    /// Upper edge of the instantaneous trip on DC, × rating; `None` for fuses and where the standard fixes none.
    pub fn instantaneous_ratio(self) -> Option<f64> {
        self.data().instantaneous.map(|(_, upper)| upper)
    }

    /// Ratings the family is made in, in ascending order, amperes.
    #[allow(non_snake_case)]
    pub fn ratings_A(self) -> &'static [f64] {
        self.data().ratings_A
    }
}

impl fmt::Display for Family {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.data().word)
    }
}

impl FromStr for Family {
    type Err = Error;

    fn from_str(text: &str) -> Result<Self, Error> {
        let allowed = "gG, gPV, aR, class T, blade, bolted strip, miniature B, miniature C, industrial, molded case, \
                       supplementary";
        let word = text.trim();
        Self::ALL
            .into_iter()
            .find(|family| family.data().word == word)
            .ok_or(Error::UnknownWord { text: Snippet::new(text), allowed })
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::string::ToString;

    #[test]
    fn every_family_has_its_own_data_and_comes_back_from_its_word() {
        for family in Family::ALL {
            let data = family.data();
            assert_eq!(data.family, family);
            assert_eq!(data.word.parse(), Ok(family));
            assert_eq!(family.to_string(), data.word);
            let error = "fast".parse::<Family>().unwrap_err().to_string();
            assert!(error.contains(data.word), "{error}");
        }
        for text in ["", "gg", "GG", "class t", "Class T", "breaker", "gG fuse"] {
            assert!(text.parse::<Family>().is_err(), "{text}");
        }
    }

    #[test]
    fn ratings_ascend_and_are_positive() {
        for family in Family::ALL {
            let ratings = family.ratings_A();
            assert!(ratings.first().is_some_and(|least| *least > 0.0), "{family}");
            assert!(ratings.is_sorted_by(|a, b| a < b), "{family}");
        }
    }

    #[test]
    fn what_must_not_operate_lies_below_what_must() {
        for family in Family::ALL {
            for &amperes in family.ratings_A() {
                let rating = ElectricCurrent::new::<ampere>(amperes);
                let (lower, upper) = (family.non_operating_ratio(rating), family.operating_ratio(rating));
                assert_eq!(lower.is_some(), upper.is_some(), "{family} {amperes} A");
                if let (Some(lower), Some(upper)) = (lower, upper) {
                    assert!((1.0..upper).contains(&lower) && upper <= 2.1, "{family} {amperes} A");
                }
            }
            assert!(
                family.data().continuous_ratio <= 1.0 && family.data().continuous_ratio >= 0.8,
                "{family}"
            );
        }
    }

    #[test]
    fn a_family_for_short_circuit_only_has_no_conventional_current() {
        assert!(!Family::Ar.data().overload);
        assert_eq!(Family::Ar.operating_ratio(ElectricCurrent::new::<ampere>(100.0)), None);
        // Overload devices without a figure: the check is not made, it is not passed.
        for family in [Family::BoltedStrip, Family::Supplementary] {
            assert!(family.data().overload);
            assert_eq!(family.operating_ratio(ElectricCurrent::new::<ampere>(50.0)), None);
        }
    }

    #[test]
    fn only_miniature_breakers_have_a_fixed_instantaneous_edge() {
        for family in Family::ALL {
            let edge = match family {
                Family::MiniatureB => Some(7.0),
                Family::MiniatureC => Some(15.0),
                _ => None,
            };
            assert_eq!(family.instantaneous_ratio(), edge, "{family}");
            assert!(edge.is_none() || !family.data().is_fuse);
        }
    }
}
