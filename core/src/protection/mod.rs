//! Devices and their place.
