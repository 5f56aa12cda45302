//! Tests: published.

mod ampacity;
mod protection_rules;
