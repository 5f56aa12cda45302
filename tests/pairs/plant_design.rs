//! Designs.
