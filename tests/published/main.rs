//! Tests: published.
mod conductors;
mod devices;

mod ampacity;
mod protection_rules;
