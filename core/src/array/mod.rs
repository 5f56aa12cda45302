//! Photovoltaic modules, strings and arrays: from the maker's sheet to volts, amperes, counts and reasons.
//!
//! Physics and arithmetic only. Which factors a rule set asks for stands in [`crate::rules`] and comes in as numbers;
//! what a charge controller makes of an array's power stands in [`crate::converter`].
// Unit suffixes keep the symbol's own case: `_A`, `_degC`.
#![allow(non_snake_case)]

mod check;
mod current;
mod curve;
mod diode;
mod fit;
mod layout;
mod module;
mod need;
mod points;
mod shade;
mod string_checks;
mod strings;
mod sun;
mod temperature;

#[cfg(test)]
mod sample;
#[cfg(test)]
mod string_tests;

pub use check::{Cited, PvCheck, PvOutcome, PvRelation, PvSubject};
pub use current::*;
pub use curve::ModuleCurve;
pub use diode::{DiodeParameters, SingleDiode, thermal_voltage};
pub use layout::{Exposure, Layout, LayoutTrial, Layouts, Preference, layouts};
pub use module::{Conditions, KeyPoints, Module, ModuleSheet};
pub use need::*;
pub use points::*;
pub use shade::{ShadeCase, Shaded, shade};
pub use strings::{
    ArrayCurrents, ColdBasis, InputLimits, PvFactors, Regulation, StringDevice, StringQuestion,
    StringVoltages, StringsChecked, VoltagePart, array_currents, check_strings, string_voltages,
};
pub use sun::*;
pub use temperature::*;

use crate::catalogue::Entry;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] =
    &[temperature::ENTRIES, current::ENTRIES, sun::ENTRIES, need::ENTRIES, points::ENTRIES];
