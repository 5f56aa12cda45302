//! Converters: charge controllers, DC–DC converters, inverters, chargers.
// Unit suffixes keep the symbol's own case: `_A`, `_degC`.
#![allow(non_snake_case)]

mod charger;
mod controller;
mod controller_yield;
mod dc_dc;
mod demand;
mod efficiency;
mod heat;
mod inrush;
mod inverter;

pub use charger::*;
pub use controller::*;
pub use controller_yield::*;
pub use dc_dc::*;
pub use demand::*;
pub use efficiency::*;
pub use heat::*;
pub use inrush::*;
pub use inverter::*;

use crate::catalogue::Entry;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[
    controller_yield::ENTRIES,
    dc_dc::ENTRIES,
    inverter::ENTRIES,
    heat::ENTRIES,
    inrush::ENTRIES,
    charger::ENTRIES,
];
