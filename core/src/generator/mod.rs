//! Engine sets, alternators and other sources beside the sun.

mod derating;
mod fuel;
mod run;
mod sources;

use crate::catalogue::Entry;

pub use derating::*;
pub use fuel::{DIESEL, DIESEL_SOURCE, DieselRow, FuelCurve, fuel_consumption};
pub use run::*;
pub use sources::*;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[derating::ENTRIES, fuel::ENTRIES, sources::ENTRIES];
