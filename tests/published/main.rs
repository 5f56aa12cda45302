//! Tests: published.
mod conductors;
mod devices;

mod ampacity;
mod energy;
mod law;
mod practice;
mod protection_rules;
mod rooms;
