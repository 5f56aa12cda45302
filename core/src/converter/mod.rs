//! Converters: charge controllers, DC–DC converters, inverters, chargers.

use crate::catalogue::Entry;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[];
