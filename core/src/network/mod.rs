//! Voltages and currents in a tree of runs, and prospective fault currents at each of its points.
//!
//! A tree hangs from one source; every node hangs from its parent by one run. Further sources may sit at any
//! node. Resistances come in as numbers (loops, with their joints): what a cable is, [`crate::cable`] knows.

mod prospective;
mod run;
mod tree;

pub use prospective::{FaultNode, FaultState, prospective};
pub use run::{Delivery, deliver};
pub use tree::{NodeLoad, NodeState, Source, TreeNode, solve};
