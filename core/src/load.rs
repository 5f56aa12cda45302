//! Loads: what draws current, and how it depends on voltage.
