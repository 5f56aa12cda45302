//! Sizing and judging one run.
