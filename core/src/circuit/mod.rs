//! Judging and sizing one run: what is stated is checked, what is left out is designed.

mod checked;
mod inverter;
mod judge;
mod run;
mod size;

pub use checked::{Checked, Outcome, Relation};
pub use inverter::{InverterFeed, inverter_feed};
pub use judge::{Judgement, judge};
pub use run::{Demand, Run};
pub use size::{Governing, Rejected, SizedRun, size_run};
