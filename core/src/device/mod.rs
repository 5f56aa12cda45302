//! Fuses and breakers as things: families by open standard, ratings, conventional currents. No rule book.

mod conventional;
mod data;
mod family;
mod piece;
mod rating;

pub use conventional::{Band, Start};
pub use family::{Family, FamilyData};
pub use piece::{Device, Polarity, Supply};
