//! Tests: published.

mod law;
mod practice;
