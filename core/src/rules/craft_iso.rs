//! Tables and limits of the rule set `craft_iso`.
