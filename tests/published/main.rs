//! Tests: published.
mod conductors;
mod devices;

mod ampacity;
mod battery;
mod battery_banks;
mod battery_sharing;
mod energy;
mod ieee_1013;
mod ieee_1562;
mod law;
mod practice;
mod protection_rules;
mod pv;
mod pv_rules;
mod rooms;
