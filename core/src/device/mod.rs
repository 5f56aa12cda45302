//! Fuses and breakers as things: families by open standard, ratings, conventional currents. No rule book.

mod conventional;
mod data;
mod family;
mod let_through;
mod operating;
mod piece;
mod rating;

use crate::catalogue::Entry;

pub use conventional::{Band, Start};
pub use family::{Family, FamilyData};
pub(crate) use let_through::least_let_through_A2s;
pub use operating::{ConventionalCurrents, continuous_current, conventional_currents};
pub use piece::{Device, Polarity, Supply};

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[operating::ENTRIES];
