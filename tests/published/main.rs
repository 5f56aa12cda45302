//! Tests: published.
mod conductors;
mod devices;
