//! Fuses and breakers as things: families by open standard, ratings, curves. No rule book.

mod family;

pub use family::{Device, Family, FamilyData, Polarity, Supply};
