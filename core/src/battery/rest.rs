//! Batteries at rest: voltage and relative density against the state of charge.

use uom::si::time::hour;

use super::{Chemistry, Datum};
use crate::citation::{Citation, Seen};
use crate::quantity::Time;

const COUNCIL: Citation =
    Citation::new("battery council table, widely reprinted", "rest voltage and relative density", Seen::Page);
const SEALED: Citation =
    Citation::new("common handbook values", "rest voltage, valve-regulated", Seen::Recalled);
const CURVES: Citation = Citation::new("typical published curves", "rest voltage", Seen::Recalled);
const STRONGER: Citation =
    Citation::new("common handbook values", "relative density, valve-regulated", Seen::Recalled);
const REST: Citation = Citation::new("common practice, no source", "rest before a reading", Seen::Practice);

// (state of charge, V a cell), emptiest first.
const FLOODED: [(f64, f64); 5] = [(0.0, 1.982), (0.25, 2.01), (0.5, 2.04), (0.75, 2.075), (1.0, 2.108)];
const AGM: [(f64, f64); 5] = [(0.0, 1.967), (0.25, 2.0), (0.5, 2.05), (0.75, 2.1), (1.0, 2.133)];
const GEL: [(f64, f64); 5] = [(0.0, 1.967), (0.25, 2.0), (0.5, 2.058), (0.75, 2.108), (1.0, 2.142)];
const LFP: [(f64, f64); 12] = [
    (0.0, 2.5),
    (0.05, 3.05),
    (0.1, 3.18),
    (0.2, 3.23),
    (0.3, 3.26),
    (0.4, 3.28),
    (0.5, 3.29),
    (0.6, 3.3),
    (0.7, 3.31),
    (0.8, 3.33),
    (0.9, 3.34),
    (1.0, 3.4),
];
const NMC: [(f64, f64); 12] = [
    (0.0, 3.0),
    (0.05, 3.35),
    (0.1, 3.45),
    (0.2, 3.55),
    (0.3, 3.61),
    (0.4, 3.66),
    (0.5, 3.7),
    (0.6, 3.78),
    (0.7, 3.87),
    (0.8, 3.95),
    (0.9, 4.05),
    (1.0, 4.18),
];
const NICKEL: [(f64, f64); 6] = [(0.0, 1.1), (0.1, 1.2), (0.2, 1.24), (0.5, 1.27), (0.8, 1.3), (1.0, 1.35)];

// (state of charge, relative density at about 25 °C), emptiest first.
pub(super) const FLOODED_DENSITY: [(f64, f64); 5] =
    [(0.0, 1.12), (0.25, 1.155), (0.5, 1.19), (0.75, 1.225), (1.0, 1.265)];
const AGM_DENSITY: [(f64, f64); 2] = [(0.0, 1.1), (1.0, 1.3)];
const GEL_DENSITY: [(f64, f64); 2] = [(0.0, 1.1), (1.0, 1.28)];

/// What is held about readings of a chemistry at rest.
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct RestTable {
    /// Rest voltage of a cell at about 25 °C, (state of charge, V), emptiest first.
    pub voltage_V: Datum<&'static [(f64, f64)]>,
    /// By how much sources or makers differ from it, V a cell.
    pub spread_V: Datum<f64>,
    /// States of charge between which the curve is too flat to tell anything, if it has such a plateau.
    pub plateau: Option<(f64, f64)>,
    /// Relative density of the electrolyte at about 25 °C, (state of charge, density), emptiest first; `None` where the
    /// electrolyte takes no part in the reaction or is no liquid of that kind.
    pub density: Option<Datum<&'static [(f64, f64)]>>,
    /// Time without charge and load before a voltage is one at rest, hours.
    pub rest_h: Datum<f64>,
}

const fn of<T: Copy>(value: T, citation: Citation) -> Datum<T> {
    Datum { value, citation }
}

const FLOODED_REST: RestTable = RestTable {
    voltage_V: of(&FLOODED, COUNCIL),
    // Another source, page seen, is higher by 0.06 to 0.09 V for six cells at and below half charge.
    spread_V: of(
        0.015,
        Citation::new("vehicle magazine, technical answers", "rest voltage bands", Seen::Page),
    ),
    plateau: None,
    density: Some(of(&FLOODED_DENSITY, COUNCIL)),
    rest_h: of(6.0, REST),
};
const AGM_REST: RestTable = RestTable {
    voltage_V: of(&AGM, SEALED),
    spread_V: of(0.02, SEALED),
    plateau: None,
    density: Some(of(&AGM_DENSITY, STRONGER)),
    rest_h: of(6.0, REST),
};
const GEL_REST: RestTable = RestTable {
    voltage_V: of(&GEL, SEALED),
    spread_V: of(0.02, SEALED),
    plateau: None,
    density: Some(of(&GEL_DENSITY, STRONGER)),
    rest_h: of(6.0, REST),
};
const LFP_REST: RestTable = RestTable {
    voltage_V: of(&LFP, CURVES),
    spread_V: of(0.02, CURVES),
    // 0.07 V in all.
    plateau: Some((0.3, 0.9)),
    density: None,
    rest_h: of(2.0, REST),
};
const NMC_REST: RestTable = RestTable {
    voltage_V: of(&NMC, CURVES),
    spread_V: of(0.02, CURVES),
    plateau: None,
    density: None,
    rest_h: of(2.0, REST),
};
const NICKEL_REST: RestTable = RestTable {
    voltage_V: of(&NICKEL, CURVES),
    spread_V: of(0.03, CURVES),
    plateau: Some((0.2, 0.9)),
    density: None,
    rest_h: of(12.0, REST),
};

/// Rest voltages and densities of a chemistry.
///
/// Flooded equals `lead-acid-ocv-soc-flooded`, LFP `lfp-ocv-soc-typical` in `tests/reference/battery.toml` (tested
/// there); the rest recalled.
///
/// ```
/// # use ampwright::battery::{Chemistry, rest_table};
/// assert_eq!(rest_table(Chemistry::Flooded).voltage_V.value.last(), Some(&(1.0, 2.108)));
/// ```
pub const fn rest_table(chemistry: Chemistry) -> &'static RestTable {
    match chemistry {
        Chemistry::Flooded => &FLOODED_REST,
        Chemistry::Agm => &AGM_REST,
        Chemistry::Gel => &GEL_REST,
        Chemistry::Lfp => &LFP_REST,
        Chemistry::Nmc => &NMC_REST,
        Chemistry::NickelCadmium => &NICKEL_REST,
    }
}

/// Time without charge and load before a bank's voltage is one at rest.
///
/// ```
/// # use ampwright::battery::{Chemistry, rest_time};
/// # use ampwright::quantity::readable;
/// assert_eq!(readable(rest_time(Chemistry::Flooded)).to_string(), "6 h");
/// ```
pub fn rest_time(chemistry: Chemistry) -> Time {
    Time::new::<hour>(rest_table(chemistry).rest_h.value)
}
