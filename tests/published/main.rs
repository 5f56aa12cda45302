//! Tests: published.
