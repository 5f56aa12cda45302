//! Loads: schedules, duty, starts, and what coincides.

mod coincidence;
mod consumer;
mod day;
mod duty;
mod months;
mod occasion;
mod schedule;
mod sets;
mod start;
mod window;

use crate::catalogue::Entry;

pub use coincidence::{Coincidence, WithStart, coincident_current, coincident_power};
pub use consumer::{AmbientRange, Conditions, Day, Draw, Load, Terminals};
pub use day::{
    DayEnergy, HIGH_STANDING_SHARE, Standing, daily_charge, daily_energy, energy_by_month, energy_of_day,
    standing_share,
};
pub use duty::{Duty, duty_at_ambient};
pub use months::{MONTHS, Months};
pub use occasion::{Occasion, Slot};
pub use schedule::{HALF_HOURS, Schedule};
pub use sets::{LoadSet, MAXIMAL_SETS, MaximalSets, maximal_sets};
pub use start::{Start, StartingPower, apparent_power, starting_power};
pub use window::Window;

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[duty::ENTRIES, day::ENTRIES, start::ENTRIES];
