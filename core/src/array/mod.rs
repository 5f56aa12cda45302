//! Photovoltaic modules, strings and arrays.

use crate::catalogue::Entry;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[];
