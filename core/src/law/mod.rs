//! The laws: Ohm, power, energy and charge, resistances and sources in series and parallel, C-rate, drop.
//!
//! Free functions that know no rule book: whether a result is admitted belongs to [`crate::rules`].

mod balance;
mod drop;
mod efficiency;
mod fault;
mod gauge;
mod kelvin;
mod line;
mod ohm;
mod rate;
mod recharge;
mod resistance;
mod source;
mod system_voltage;

use crate::catalogue::Entry;

pub use balance::*;
pub use drop::*;
pub use efficiency::*;
pub use fault::*;
pub use gauge::*;
pub use kelvin::*;
pub use line::*;
pub use ohm::*;
pub use rate::*;
pub use recharge::*;
pub use resistance::*;
pub use source::*;
pub use system_voltage::*;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[
    ohm::ENTRIES,
    balance::ENTRIES,
    efficiency::ENTRIES,
    resistance::ENTRIES,
    rate::ENTRIES,
    recharge::ENTRIES,
    drop::ENTRIES,
    line::ENTRIES,
    fault::ENTRIES,
    kelvin::ENTRIES,
    gauge::ENTRIES,
];
