//! Overcurrent devices and their place: which ends can feed, which poles need one, which rating is chosen.

mod choose;
mod need;
mod place;

use crate::catalogue::Entry;

pub use choose::{Guard, Offer, choose, least_rating};
pub use need::least_device_rating;
pub use place::{Earthing, End, Feeds, Pole, PoleFault, feeds, pole_fault};

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[need::ENTRIES];
