//! Tests: published.
mod conductors;
mod devices;

mod ampacity;
mod battery;
mod battery_banks;
mod battery_sharing;
mod ieee_1013;
mod law;
mod practice;
mod protection_rules;
mod rooms;
