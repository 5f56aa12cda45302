//! Loads: schedules, duty, starts, and what coincides.

mod coincidence;
mod consumer;
mod day;
mod duty;
mod schedule;
mod start;

use crate::catalogue::Entry;

pub use coincidence::{
    Coincidence, LoadSet, MAXIMAL_SETS, MaximalSets, Occasion, Slot, WithStart, coincident_current,
    coincident_power, maximal_sets,
};
pub use consumer::{AmbientRange, Conditions, Day, Draw, Load, Terminals};
pub use day::{
    DayEnergy, HIGH_STANDING_SHARE, Standing, daily_charge, daily_energy, energy_by_month, energy_of_day,
    standing_share,
};
pub use duty::{Duty, duty_at_ambient};
pub use schedule::{HALF_HOURS, MONTHS, Months, Schedule, Window};
pub use start::{Start, StartingPower, apparent_power, starting_power};

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[duty::ENTRIES, day::ENTRIES, start::ENTRIES];
