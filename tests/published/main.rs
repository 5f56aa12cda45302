//! Tests: published.
mod conductors;
mod devices;

mod ampacity;
mod law;
mod practice;
mod protection_rules;
mod rooms;
