//! Currents that a device of a family carries and opens on.

use uom::si::time::hour;

use super::Family;
use crate::catalogue::{Choice, calculations};
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::quantity::{ElectricCurrent, Time};

impl Choice for Family {
    const ALL: &'static [Self] = &Self::ALL;
    const WORDS: &'static [&'static str] = &[
        "gG",
        "gPV",
        "aR",
        "class T",
        "blade",
        "bolted strip",
        "miniature B",
        "miniature C",
        "industrial",
        "molded case",
        "supplementary",
    ];
    const FIRST: Self = Self::Gg;
}

calculations! {
    /// Current that a device of a family carries for hours.
    ///
    /// A device stated for 100 % of its rating carries that instead.
    ///
    /// # Example
    /// ```
    /// use ampwright::{device::{Family, continuous_current}, quantity::{parse, readable}};
    /// assert_eq!(readable(continuous_current(Family::ClassT, parse("100 A")?)?).to_string(), "80 A");
    /// assert_eq!(readable(continuous_current(Family::Gg, parse("100 A")?)?).to_string(), "100 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn continuous_current(
        /// Of the device.
        family: Family in choice [choice],
        /// Of the device.
        rating: ElectricCurrent in ampere [> 0.0],
    ) -> current: ElectricCurrent in ampere
    formula "I = c·I_n; c = 1 for gG, gPV, aR, miniature and industrial breakers, 0.8 for the others"
    source "rule R5, guide `rules`: at most 80 % unless the family's standard makes the rating the current carried without limit of time"
    { family.data().continuous_ratio * rating }

    /// Currents that a device must carry, and must have opened on, within its conventional time.
    ///
    /// # Example
    /// gG of 100 A has opened within two hours at 160 A, and not at 125 A:
    /// ```
    /// use ampwright::{device::{Family, conventional_currents}, quantity::{parse, readable}};
    /// let of = |rating| conventional_currents(Family::Gg, parse(rating)?);
    /// assert_eq!(readable(of("100 A")?.operating).to_string(), "160 A");
    /// assert_eq!(readable(of("10 A")?.operating).to_string(), "19 A");
    /// assert!(conventional_currents(Family::Ar, parse("100 A")?).is_err());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn conventional_currents(
        /// Of the device.
        family: Family in choice [choice],
        /// Of the device.
        rating: ElectricCurrent in ampere [> 0.0],
    ) => ConventionalCurrents {
        /// It must not have operated at this current.
        non_operating: ElectricCurrent in ampere,
        /// It must have operated at this current.
        operating: ElectricCurrent in ampere,
        /// Conventional time.
        time: Time in hour,
    }
    formula "I = k·I_n, k by family and rating"
    source "IEC 60269-1 (gG), IEC 60269-6 (gPV, recalled), IEC 60898-1, IEC 60947-2, UL 248-15, ISO 8820-3 and UL 489 (all three recalled)"
    fallible "no conventional currents are held for the family or rating"
    {
        let band = family.conventional(rating).ok_or(Error::NotTabulated {
            what: "the conventional current of a device of this family and rating",
            table: Citation::new("the conventional currents held", "", Seen::Derived),
            remedy: "take it as short-circuit protection only, or state its time-current curve",
        })?;
        Ok(ConventionalCurrents {
            non_operating: band.non_operating_ratio * rating,
            operating: band.operating_ratio * rating,
            time: Time::new::<hour>(band.time_h),
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn codes_and_words_keep_one_order() {
        assert!(Family::ALL.map(|family| family.data().word).iter().eq(Family::WORDS));
        assert_eq!(Family::ALL[0], Family::FIRST);
    }
}
