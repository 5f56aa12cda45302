//! Converters: charge controllers, DC–DC converters, inverters, chargers.
// Unit suffixes keep the symbol's own case: `_A`, `_degC`.
#![allow(non_snake_case)]

mod controller;
mod dc_dc;

pub use controller::*;
pub use dc_dc::*;

mod charger;
mod inrush;
mod inverter;

use crate::catalogue::Entry;

pub use charger::*;
pub use inrush::*;
pub use inverter::*;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] =
    &[controller::ENTRIES, dc_dc::ENTRIES, inverter::ENTRIES, inrush::ENTRIES, charger::ENTRIES];
