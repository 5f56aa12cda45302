//! What charges a bank beside one another: each source, what limits it, and the sum (R11).

use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;

use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, Ratio};

/// Kind of a source.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum SourceKind {
    /// Photovoltaic array behind its controller.
    Array,
    /// Alternator on an engine that turns for something else.
    Alternator,
    /// Charger on an engine set.
    EngineSet,
    /// Charger on the shore's or a neighbour's supply.
    Shore,
    /// Wind turbine, as a figure.
    Wind,
    /// Water turbine, as a figure.
    Hydro,
    /// DC–DC converter from another bank.
    Converter,
}

/// What happens to a source when the bank opens while it charges (load dump).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LoadDump {
    /// Stated to bear it: regulator, clamp or brake made for it.
    Bears,
    /// Does not: it drives the voltage up and destroys itself and what is connected.
    DoesNotBear,
    /// Not known.
    Unknown,
}

impl SourceKind {
    /// What is taken where nothing is stated: machines that turn drive the voltage up when their load is gone; of the
    /// rest it is not known. Common practice, no source.
    pub const fn usual_load_dump(self) -> LoadDump {
        match self {
            Self::Alternator | Self::Wind | Self::Hydro => LoadDump::DoesNotBear,
            Self::Array | Self::EngineSet | Self::Shore | Self::Converter => LoadDump::Unknown,
        }
    }
}

/// A source that charges.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChargeSource {
    /// Kind.
    pub kind: SourceKind,
    /// On its plate, or what the array gives at its best.
    pub nameplate: ElectricCurrent,
    /// Greatest output of its controller or charger, if one stands between.
    pub controller_limit: Option<ElectricCurrent>,
    /// What is left of the nameplate in practice: hot alternator, engine in the heat, mean wind. `None`: for alternators
    /// [`ALTERNATOR_HOT`], else all of it.
    pub lasting: Option<Ratio>,
    /// Load dump; `None`: [`SourceKind::usual_load_dump`].
    pub load_dump: Option<LoadDump>,
}

/// What limits a source.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LimitedBy {
    /// Its own plate.
    Nameplate,
    /// The output limit of its controller or charger.
    Controller,
    /// Heat, altitude, wind: what lasts of its plate.
    Lasting,
}

/// What a source contributes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Contribution {
    /// Place of the source in the list.
    pub place: usize,
    /// Kind.
    pub kind: SourceKind,
    /// The most it gives: for conductors, devices and the bank's charge limit.
    pub greatest: ElectricCurrent,
    /// What limits that.
    pub greatest_by: LimitedBy,
    /// What it gives for hours: for recharge times.
    pub lasting: ElectricCurrent,
    /// What limits that.
    pub lasting_by: LimitedBy,
    /// Load dump.
    pub load_dump: LoadDump,
}

/// Sum of sources.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SourceSum {
    /// Of the most they give.
    pub greatest: ElectricCurrent,
    /// Of what they give for hours.
    pub lasting: ElectricCurrent,
}

/// Part of its nameplate that an alternator gives hot, where nothing is stated: the lower end of 50 to 60 %.
pub const ALTERNATOR_HOT: f64 = 0.5;

/// Source of [`ALTERNATOR_HOT`].
pub const ALTERNATOR_HOT_SOURCE: Citation = Citation::new(
    "common practice, no source",
    "alternators give 50 to 60 % of nameplate hot",
    Seen::Practice,
);

impl ChargeSource {
    /// A source of which only this is known.
    pub const fn new(kind: SourceKind, nameplate: ElectricCurrent) -> Self {
        Self { kind, nameplate, controller_limit: None, lasting: None, load_dump: None }
    }

    /// What it contributes; `place` is passed on.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where a current is negative or not finite, or the lasting part not 0 to 1.
    ///
    /// # Example
    /// A 100 A alternator: its cable is made for 100 A, the bank gets 50 A.
    /// ```
    /// use ampwright::{generator::{ChargeSource, LimitedBy, SourceKind}, quantity::{parse, readable}};
    /// let given = ChargeSource::new(SourceKind::Alternator, parse("100 A")?).contribution(0)?;
    /// assert_eq!(readable(given.greatest).to_string(), "100 A");
    /// assert_eq!(readable(given.lasting).to_string(), "50 A");
    /// assert_eq!(given.lasting_by, LimitedBy::Lasting);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn contribution(&self, place: usize) -> Result<Contribution, Error> {
        at_least_0("nameplate current", self.nameplate)?;
        let part = self.lasting.unwrap_or(Ratio::new::<ratio>(match self.kind {
            SourceKind::Alternator => ALTERNATOR_HOT,
            _ => 1.0,
        }));
        Allowed::Between(0.0, 1.0).check("lasting part", part.value, "")?;
        let mut greatest = (self.nameplate, LimitedBy::Nameplate);
        let mut lasting = (self.nameplate * part, LimitedBy::Lasting);
        if lasting.0 == self.nameplate {
            lasting.1 = LimitedBy::Nameplate;
        }
        if let Some(limit) = self.controller_limit {
            at_least_0("controller limit", limit)?;
            for current in [&mut greatest, &mut lasting] {
                if limit < current.0 {
                    *current = (limit, LimitedBy::Controller);
                }
            }
        }
        Ok(Contribution {
            place,
            kind: self.kind,
            greatest: greatest.0,
            greatest_by: greatest.1,
            lasting: lasting.0,
            lasting_by: lasting.1,
            load_dump: self.load_dump.unwrap_or(self.kind.usual_load_dump()),
        })
    }
}

/// Sum of all sources of a bank; each contribution is written to its place in the caller's slice.
///
/// # Errors
/// As [`ChargeSource::contribution`]; [`Error::WrongCount`] where the slice differs in length; [`Error::OutOfRange`] where
/// the sum is too large for a number.
pub fn source_sum(sources: &[ChargeSource], into: &mut [Contribution]) -> Result<SourceSum, Error> {
    if into.len() != sources.len() {
        return Err(Error::WrongCount { what: "contributions", given: into.len(), needed: sources.len() });
    }
    let nothing = ElectricCurrent::new::<ampere>(0.0);
    let mut sum = SourceSum { greatest: nothing, lasting: nothing };
    for ((place, source), cell) in sources.iter().enumerate().zip(into.iter_mut()) {
        *cell = source.contribution(place)?;
        sum.greatest += cell.greatest;
        sum.lasting += cell.lasting;
    }
    at_least_0("sum of the sources", sum.greatest)?;
    Ok(sum)
}

fn at_least_0(name: &'static str, current: ElectricCurrent) -> Result<(), Error> {
    Allowed::AtLeast(0.0).check(name, current.get::<ampere>(), "A")
}

calculations! {
    /// Current that an alternator gives once it is hot.
    ///
    /// For recharge times. Its conductors and devices are made for the nameplate.
    ///
    /// # Example
    /// ```
    /// use ampwright::{generator::alternator_hot_current, quantity::{parse, readable}};
    /// let hot = alternator_hot_current(parse("120 A")?, parse("50 %")?)?;
    /// assert_eq!(readable(hot).to_string(), "60 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn alternator_hot_current(
        /// On its plate: cold, at full speed.
        nameplate_current: ElectricCurrent in ampere [>= 0.0],
        /// Part that is left; 0.5 to 0.6 unless stated.
        hot_part: Ratio in ratio [> 0.0 ..= 1.0] = 0.5,
    ) -> current: ElectricCurrent in ampere
    formula "I = k·I_n"
    source "50 to 60 % of nameplate hot: common practice, no source"
    { nameplate_current * hot_part }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::vec::Vec;

    use proptest::prelude::*;

    use super::*;

    fn a(amperes: f64) -> ElectricCurrent {
        ElectricCurrent::new::<ampere>(amperes)
    }

    fn nothing() -> Contribution {
        ChargeSource::new(SourceKind::Shore, a(0.0)).contribution(0).unwrap()
    }

    #[test]
    fn a_controller_limits_what_lies_behind_it() {
        let array =
            ChargeSource { controller_limit: Some(a(30.0)), ..ChargeSource::new(SourceKind::Array, a(41.0)) };
        let given = array.contribution(3).unwrap();
        assert_eq!((given.greatest, given.greatest_by, given.place), (a(30.0), LimitedBy::Controller, 3));
        assert_eq!((given.lasting, given.lasting_by), (a(30.0), LimitedBy::Controller));
        // A hot alternator below the limit of its converter, a cold one above it.
        let alternator = ChargeSource {
            controller_limit: Some(a(60.0)),
            ..ChargeSource::new(SourceKind::Alternator, a(100.0))
        };
        let given = alternator.contribution(0).unwrap();
        assert_eq!((given.greatest, given.greatest_by), (a(60.0), LimitedBy::Controller));
        assert_eq!((given.lasting, given.lasting_by), (a(50.0), LimitedBy::Lasting));
        // Stated to last: its plate.
        let cool =
            ChargeSource { lasting: Some(Ratio::new::<ratio>(1.0)), controller_limit: None, ..alternator };
        assert_eq!(cool.contribution(0).unwrap().lasting_by, LimitedBy::Nameplate);
    }

    #[test]
    fn nothing_bears_a_load_dump_unless_it_is_stated() {
        let kinds = [
            SourceKind::Array,
            SourceKind::Alternator,
            SourceKind::EngineSet,
            SourceKind::Shore,
            SourceKind::Wind,
            SourceKind::Hydro,
            SourceKind::Converter,
        ];
        for kind in kinds {
            assert_ne!(kind.usual_load_dump(), LoadDump::Bears);
            let stated =
                ChargeSource { load_dump: Some(LoadDump::Bears), ..ChargeSource::new(kind, a(10.0)) };
            assert_eq!(stated.contribution(0).unwrap().load_dump, LoadDump::Bears);
        }
    }

    proptest! {
        #[test]
        fn the_sum_is_that_of_its_parts_and_lasting_never_exceeds_the_greatest(
            given in proptest::collection::vec((0.0..500.0f64, proptest::option::of(0.0..500.0f64), 0.0..=1.0f64), 0..8),
        ) {
            let sources: Vec<_> = given
                .iter()
                .map(|&(plate, limit, part)| ChargeSource {
                    controller_limit: limit.map(a),
                    lasting: Some(Ratio::new::<ratio>(part)),
                    ..ChargeSource::new(SourceKind::Wind, a(plate))
                })
                .collect();
            let mut parts = std::vec![nothing(); sources.len()];
            let sum = source_sum(&sources, &mut parts).unwrap();
            let (mut greatest, mut lasting) = (a(0.0), a(0.0));
            for (part, &(plate, limit, _)) in parts.iter().zip(&given) {
                prop_assert!(part.lasting <= part.greatest);
                prop_assert!((part.greatest.value - limit.unwrap_or(f64::MAX).min(plate)).abs() == 0.0);
                greatest += part.greatest;
                lasting += part.lasting;
            }
            prop_assert_eq!((sum.greatest, sum.lasting), (greatest, lasting));
        }
    }

    #[test]
    fn what_does_not_fit_is_an_error() {
        let source = ChargeSource::new(SourceKind::Shore, a(30.0));
        assert!(matches!(source_sum(&[source], &mut []), Err(Error::WrongCount { .. })));
        for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -1.0] {
            assert!(ChargeSource { nameplate: a(bad), ..source }.contribution(0).is_err(), "{bad}");
            assert!(
                ChargeSource { controller_limit: Some(a(bad)), ..source }.contribution(0).is_err(),
                "{bad}"
            );
            let lasting = Some(Ratio::new::<ratio>(bad));
            assert!(ChargeSource { lasting, ..source }.contribution(0).is_err(), "{bad}");
        }
        let huge = ChargeSource::new(SourceKind::Shore, a(f64::MAX));
        assert!(source_sum(&[huge, huge], &mut [nothing(); 2]).is_err());
    }
}
