//! Tables and limits of the rule set `us`.
