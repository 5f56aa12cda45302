//! Judging and sizing one run: what is stated is checked, what is left out is designed.

mod checked;
mod facts;
mod inverter;
mod judge;
mod run;
mod size;
#[cfg(test)]
mod tests;

use crate::catalogue::Entry;

pub use checked::{Checked, Numbers, Outcome, Relation, lower_bound, upper_bound};
pub use inverter::{InverterFeed, inverter_feed};
pub use judge::{Judgement, capacity, judge};
pub use run::{Demand, Run};
pub use size::{Governing, Rejected, SizedRun, device_need, size_run};

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[inverter::ENTRIES];
