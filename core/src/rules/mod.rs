//! Rule sets as data: tables, factors, limits, and the order of checks. No physics.

mod book;
mod craft_iso;
mod craft_us;
mod iec;
mod table;
mod us;

pub use book::{
    Ampacity, AmpacityQuery, Check, CurrentRule, DeviceLimit, DropLimit, Factor, Installation, Key, Limit,
    LoadUse, Overrides, RuleSet, Rules, Space, Terms,
};
pub use table::{AmpacityTable, Band, Cell, Column};
