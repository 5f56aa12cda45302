//! The paper that the crew takes along: commissioning sheet, switching order, labels, maintenance, purchases.
//!
//! Data, made from the site and its plan; [`text`] puts it into words.

mod commissioning;
mod dead;
mod labels;
mod loaded;
mod maintenance;
mod meter;
mod path;
mod purchases;
mod switching;
pub(super) mod text;

#[cfg(test)]
mod tests;

use alloc::vec::Vec;

pub use commissioning::{Expected, Stage, Step};
pub use dead::RunTest;
pub use labels::Label;
pub use loaded::{Driven, JointTest, LoadedTest};
pub use maintenance::{Every, MaintenanceTask};
pub use meter::{METER, Meter, MeterRange};
pub use purchases::{Purchase, PurchaseTotal};
pub use switching::{Direction, SwitchingStep};

use super::plan::Plan;
use super::system::Site;

/// Everything on paper.
#[derive(Clone, Debug)]
pub(super) struct Paper {
    /// The meter whose errors the tolerances include.
    pub meter: Meter,
    /// Commissioning, in working order.
    pub commissioning: Vec<Step>,
    /// Connecting first, then disconnecting, each in its order.
    pub switching: Vec<SwitchingStep>,
    /// Labels to fix.
    pub labels: Vec<Label>,
    /// What to look after, the most frequent first.
    pub maintenance: Vec<MaintenanceTask>,
}

pub(super) use purchases::purchases;

/// The sheets of a site.
pub(super) fn paper(site: &Site, plan: &Plan) -> Paper {
    let meter = Meter::usual();
    Paper {
        meter,
        commissioning: commissioning::steps(site, plan, &meter),
        switching: switching::steps(site, plan),
        labels: labels::labels(site, plan),
        maintenance: maintenance::tasks(site, plan),
    }
}
