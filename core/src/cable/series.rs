//! Sizes that can be bought.

use crate::quantity::ConductorSize;

/// AWG and kcmil sizes in trade, smallest first.
pub const AWG_SERIES: [ConductorSize; 0] = [];
/// Metric sizes in trade, smallest first.
pub const METRIC_SERIES: [ConductorSize; 0] = [];
