//! Tests: house.
