//! The laws: Ohm, power, energy and charge, sources in series and parallel, C-rate.

mod drop;

use crate::catalogue::Entry;

pub use drop::*;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[drop::ENTRIES];
