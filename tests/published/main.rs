//! Tests: published.
mod conductors;
mod devices;

mod ampacity;
mod energy;
mod ieee_1562;
mod law;
mod practice;
mod protection_rules;
mod pv;
mod pv_rules;
mod rooms;
