//! Converters: charge controllers, DC–DC converters, inverters, chargers.

mod charger;
mod demand;
mod efficiency;
mod inrush;
mod inverter;

use crate::catalogue::Entry;

pub use charger::*;
pub use demand::*;
pub use efficiency::*;
pub use inrush::*;
pub use inverter::*;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[inverter::ENTRIES, inrush::ENTRIES, charger::ENTRIES];
