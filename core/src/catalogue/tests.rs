//! The macro itself, on declarations that belong to no room.

extern crate std;
use std::string::ToString;

use uom::si::{electric_potential::volt, f64::*, thermodynamic_temperature::degree_celsius};

use super::{Choice, calculations};
use crate::error::{Allowed, Error};

/// A choice of three.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Metal {
    /// Code 0.
    Copper,
    /// Code 1.
    Aluminium,
    /// Code 2.
    Brass,
}

impl Choice for Metal {
    const ALL: &'static [Self] = &[Self::Copper, Self::Aluminium, Self::Brass];
    const WORDS: &'static [&'static str] = &["copper", "aluminium", "brass"];
    const FIRST: Self = Self::Copper;
}

calculations! {
    /// A stand-in with every kind of range.
    fn probe(
        /// Chosen.
        metal: Metal in choice [choice],
        /// Open below.
        open: ElectricPotential in volt [> 0.0],
        /// Closed at both ends, in a unit with an offset.
        closed: ThermodynamicTemperature in degree_celsius [-80.0 ..= 250.0] = 20.0,
        /// Half open.
        half: Area in square_millimeter [> 0.0 ..= 10.0],
        /// Closed below, in a unit larger than its base.
        stored: ElectricCharge in ampere_hour [>= 0.0],
    ) => Probe {
        /// First.
        first: ElectricPotential in volt,
        /// Second.
        second: Ratio in ratio,
    }
    where (open.value < 1e6) open in volt: "too much"
    formula "none"
    source "none"
    {
        let factor = match metal { Metal::Copper => 1.0, Metal::Aluminium => 2.0, Metal::Brass => 3.0 };
        let more = closed.get::<degree_celsius>() + stored.value;
        Probe { first: open * factor, second: Ratio::new::<uom::si::ratio::ratio>(more / half.value) }
    }

    /// A stand-in whose formula can fail.
    fn moody(
        /// Chosen.
        metal: Metal in choice [choice],
        /// Doubled.
        single: ElectricPotential in volt [any],
    ) -> double: ElectricPotential in volt
    formula "none"
    source "none"
    fallible "the metal is brass"
    {
        if metal == Metal::Brass { Err(BRASS) } else { Ok(single + single) }
    }
}

const BRASS: Error = Error::NotATree { what: "brass" };

const GOOD: [f64; 5] = [2.0, 12.0, 20.0, 10.0, 1.0];

fn with(place: usize, value: f64) -> Result<[f64; 2], Error> {
    let mut inputs = GOOD;
    inputs[place] = value;
    let mut outputs = [0.0; 2];
    (probe::ENTRY.scalar)(&inputs, &mut outputs).map(|()| outputs)
}

fn refused(place: usize, value: f64) -> std::string::String {
    with(place, value).unwrap_err().to_string()
}

#[test]
fn codes_become_variants_and_nothing_else_does() {
    for (code, factor) in [(0.0, 1.0), (-0.0, 1.0), (1.0, 2.0), (2.0, 3.0)] {
        assert_eq!(with(0, code).unwrap()[0], 12.0 * factor);
    }
    for bad in [0.5, -1.0, 3.0, f64::NAN, f64::INFINITY, 1e300, 1.0f64.next_up()] {
        assert!(refused(0, bad).ends_with("it must be a whole number from 0 to 2"), "{bad}");
    }
}

#[test]
fn open_ends_stay_open_after_conversion() {
    for bad in [0.0, -0.0, -1.0, f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        assert!(with(1, bad).is_err() && with(3, bad).is_err(), "{bad}");
    }
    // 5e-324 mm² is 0 m².
    assert_eq!(refused(3, 5e-324), "half is 0 mm²; it must be greater than 0 and at most 10");
    assert!(with(1, 5e-324).is_ok());
    // The largest number of ampere-hours is no number of coulombs.
    assert_eq!(refused(4, f64::MAX), "stored is inf Ah; it must be 0 or more and finite");
    assert_eq!(refused(4, f64::INFINITY), "stored is inf Ah; it must be 0 or more and finite");
}

#[test]
fn closed_ends_are_admitted() {
    for good in [-80.0, 250.0] {
        assert!(with(2, good).is_ok());
    }
    assert!(with(3, 10.0).is_ok() && with(4, 0.0).is_ok() && with(4, -0.0).is_ok());
    assert!(with(2, 251.0).is_err() && with(2, -81.0).is_err() && with(3, 10.1).is_err());
}

#[test]
fn conditions_and_overflowing_results_are_errors() {
    assert_eq!(refused(1, 1e6), "open is 1000000 V; too much");
    assert_eq!(refused(3, f64::MIN_POSITIVE), "second is inf; it must be a finite number");
}

#[test]
fn the_entry_tells_what_was_declared() {
    let entry = probe::ENTRY;
    assert_eq!((entry.name, entry.summary), ("probe", "A stand-in with every kind of range."));
    assert_eq!(entry.inputs.len(), 5);
    assert_eq!(entry.inputs[0].choices, Metal::WORDS);
    assert_eq!(entry.inputs[0].range, Allowed::Code(3));
    assert_eq!(entry.inputs[2].default, Some(20.0));
    assert_eq!((entry.inputs[3].unit, entry.inputs[3].suffix), ("mm²", "mm2"));
    assert_eq!(entry.outputs[1].doc, "Second.");
    assert_eq!(entry.conditions, ["open.value < 1e6"]);
    assert_eq!((entry.refusal, moody::ENTRY.refusal), (None, Some("the metal is brass")));
}

#[test]
fn wrong_counts_are_named() {
    let error = (probe::ENTRY.scalar)(&GOOD[..4], &mut [0.0; 2]).unwrap_err();
    assert_eq!(error, Error::WrongCount { what: "inputs", given: 4, needed: 5 });
    let error = (probe::ENTRY.scalar)(&GOOD, &mut [0.0; 3]).unwrap_err();
    assert_eq!(error, Error::WrongCount { what: "outputs", given: 3, needed: 2 });
}

#[test]
fn a_formula_that_fails_gives_its_own_error_after_the_checks() {
    let of = |metal, volts| {
        let mut double = [0.0];
        (moody::ENTRY.scalar)(&[metal, volts], &mut double).map(|()| double[0])
    };
    assert_eq!(of(0.0, 3.0), Ok(6.0));
    assert_eq!(of(2.0, 3.0), Err(BRASS));
    assert!(matches!(of(2.0, f64::NAN), Err(Error::OutOfRange { name: "single", .. })));
    assert!(matches!(of(0.0, f64::MAX), Err(Error::OutOfRange { name: "double", .. })));
}

#[cfg(feature = "std")]
mod columns {
    use std::vec;

    use super::*;

    /// `rows` good rows with one bad voltage among them.
    fn first_bad(rows: usize, bad: &[usize]) -> Option<usize> {
        let mut volts = vec![12.0; rows];
        for &row in bad {
            volts[row] = -1.0;
        }
        let (mut first, mut second) = (vec![0.0; rows], vec![0.0; rows]);
        let [a, _, c, d, e] = GOOD;
        let result = (probe::ENTRY.array)(&[&[a], &volts, &[c], &[d], &[e]], &mut [&mut first, &mut second]);
        match result {
            Ok(()) => {
                assert!(first.iter().all(|&x| x == 36.0), "every row is written");
                None
            }
            Err(error) => error.index,
        }
    }

    #[test]
    fn the_first_bad_row_is_found_at_the_seams_of_blocks() {
        for rows in [1, 255, 256, 257, 1000] {
            assert_eq!(first_bad(rows, &[]), None);
            for bad in [0, 1, 254, 255, 256, 511, 512, rows - 1] {
                if bad < rows {
                    assert_eq!(first_bad(rows, &[bad, rows - 1]), Some(bad));
                }
            }
        }
        assert_eq!(first_bad(0, &[]), None);
    }

    #[test]
    fn a_formula_that_can_fail_is_done_row_by_row() {
        let rows = 600;
        let volts: vec::Vec<f64> = (0..rows).map(f64::from).collect();
        let mut metals = vec![1.0; volts.len()];
        let mut doubles = vec![f64::NAN; volts.len()];
        let run = |metals: &[f64], doubles: &mut [f64]| {
            (moody::ENTRY.array)(&[metals, &volts], &mut [doubles]).map_err(|e| (e.index, e.error.slug()))
        };
        assert_eq!(run(&metals, &mut doubles), Ok(()));
        assert!(doubles.iter().zip(&volts).all(|(double, single)| *double == 2.0 * single));
        assert_eq!(run(&[0.0], &mut doubles), Ok(()));
        metals[300] = 2.0;
        metals[301] = 7.0;
        assert_eq!(run(&metals, &mut doubles), Err((Some(300), BRASS.slug())));
        assert_eq!(run(&metals[..2], &mut doubles), Err((None, "wrong-count")));
    }

    #[test]
    fn columns_that_do_not_fit_are_refused() {
        let (mut first, mut second, mut short) = ([0.0; 3], [0.0; 3], [0.0; 2]);
        let [a, b, c, d, e] = GOOD.map(|x| [x; 2]);
        let inputs: [&[f64]; 5] = [&a, &b, &c, &d, &e];
        let error = (probe::ENTRY.array)(&inputs, &mut [&mut first, &mut second]).unwrap_err();
        assert_eq!(error.to_string(), "2 rows of an input are given; the calculation needs 3");
        let error = (probe::ENTRY.array)(&inputs, &mut [&mut first, &mut short]).unwrap_err();
        assert_eq!(error.error, Error::WrongCount { what: "rows of an output", given: 2, needed: 3 });
        assert!((probe::ENTRY.array)(&inputs[..4], &mut [&mut first, &mut second]).is_err());
        let mut out = [0.0; 2];
        assert!((probe::ENTRY.array)(&inputs, &mut [&mut out]).is_err());
    }
}

/// Symbols of the unit table against those of `uom`, spaces aside.
#[test]
fn symbols_agree_with_uom() {
    use uom::si::{
        Unit, area, electric_charge as charge, electrical_resistivity as resistivity, energy, length, time,
    };
    let plain = |text: &str| text.replace(' ', "");
    macro_rules! check {
        ($($unit:ident: $type:ty;)+) => {$(
            let symbol: &str = crate::catalogue::unit::unit!(symbol $unit);
            let theirs = plain(<$type as Unit>::abbreviation());
            // Trade practice writes Ah and Wh without the point.
            assert!(theirs == symbol || theirs.replace('·', "") == symbol, "{} {theirs}", symbol);
        )+};
    }
    check! {
        meter: length::meter;
        square_millimeter: area::square_millimeter;
        ampere: uom::si::electric_current::ampere;
        volt: volt;
        watt: uom::si::power::watt;
        watt_hour: energy::watt_hour;
        ampere_hour: charge::ampere_hour;
        ohm: uom::si::electrical_resistance::ohm;
        ohm_meter: resistivity::ohm_meter;
        degree_celsius: degree_celsius;
        hour: time::hour;
        day: time::day;
        second: time::second;
        ampere_per_square_millimeter: uom::si::electric_current_density::ampere_per_square_millimeter;
    }
    assert!(ENTRIES.len() == 2);
}
