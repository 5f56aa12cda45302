//! Converters: charge controllers, DC–DC converters, inverters, chargers.
// Unit suffixes keep the symbol's own case: `_A`, `_degC`.
#![allow(non_snake_case)]

mod controller;
mod controller_yield;
mod dc_dc;

pub use controller::*;
pub use controller_yield::*;
pub use dc_dc::*;

use crate::catalogue::Entry;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[controller_yield::ENTRIES, dc_dc::ENTRIES];
