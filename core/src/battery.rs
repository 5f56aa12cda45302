//! Banks as far as wiring and charging limits need them.
