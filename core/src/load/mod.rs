//! Loads: schedules, duty, starts, and what coincides.

use crate::catalogue::Entry;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[];
