//! Voltages and currents in a tree of runs, and prospective fault currents at each of its points.
//!
//! A tree hangs from one source; every node hangs from its parent by one run. Further sources may sit at any
//! node. Resistances come in as numbers (loops, with their joints): what a cable is, [`crate::cable`] knows.

mod prospective;
mod run;
mod tree;

use crate::catalogue::Entry;

pub use prospective::{FaultNode, FaultState, prospective};
pub use run::{Delivery, line_delivery};
pub use tree::{NodeLoad, NodeState, Source, TreeNode, solve};

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[run::ENTRIES];
