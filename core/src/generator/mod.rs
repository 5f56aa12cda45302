//! Engine sets, alternators and other sources beside the sun.

use crate::catalogue::Entry;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[];
