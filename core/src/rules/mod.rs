//! Rule sets as data: tables, factors, limits, and the order of checks. No physics.
#![doc = ""]
#![doc = include_str!("../../guide/rule_sets.md")]
// Unit suffixes keep the symbol's own case: `_A`, `_degC`.
#![allow(non_snake_case)]

mod ampacity;
mod answer;
mod book;
mod craft_iso;
mod craft_us;
mod iec;
mod overrides;
mod practice;
mod pv;
mod query;
mod surroundings;
mod table;
mod us;
mod usual;

#[cfg(test)]
mod tests;

pub use answer::Rules;
pub use book::{
    AmbientRule, ByLine, ConductorRule, Count, DeviceRule, DropRule, EngineRule, Grouping, Instead,
    NextRating, Placement, ProtectiveRule, RuleSet, TerminalRule, UnfusedRule,
};
pub use overrides::{Overridden, Overrides, OwnValue};
pub use practice::{PracticeFigure, practice_figure};
pub use pv::{ColdRow, ColdTable, PvRule};
pub use query::{
    Ampacity, AmpacityQuery, Check, CurrentRule, DeviceLimit, DropLimit, Factor, Installation, Key, Limit,
    LoadUse, Space, Terms,
};
pub use surroundings::{
    Asked, Bonding, BondingRow, OPENING_CM2_PER_M3_H, SPARK_DISTANCE_MM, SurgeLength, Surroundings,
    TouchLimits,
};
pub use table::{AmpacityTable, Band, Cell, Column, FactorColumn, FactorTable};
