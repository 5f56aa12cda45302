//! Tables and limits of the rule set `iec`.
