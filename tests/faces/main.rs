//! Tests: faces.
