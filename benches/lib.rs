//! What the typed calculations are measured against: the same arithmetic on plain `f64`, by hand.
//!
//! All inputs in base units. The checked twins make the same checks, of the result too, and the same error as core does, so
//! that the difference is the price of units alone.

use ampwright::Error;
use ampwright::error::Allowed;

/// I = U/R; amperes from volts and ohms.
#[must_use]
#[inline]
pub fn ohm_current(voltage: f64, resistance: f64) -> f64 {
    voltage / resistance
}

/// U = 2·l·ρ·I/A; volts from metres, square metres, ohm metres and amperes.
#[must_use]
#[inline]
pub fn voltage_drop(one_way: f64, cross_section: f64, resistivity: f64, current: f64) -> f64 {
    2.0 * one_way * resistivity / cross_section * current
}

/// [`ohm_current`] with core's checks.
///
/// # Errors
/// [`Error::OutOfRange`] as core gives it.
#[inline]
pub fn ohm_current_checked(voltage: f64, resistance: f64) -> Result<f64, Error> {
    if !voltage.is_finite() {
        return Err(refused("voltage", "V", voltage, Allowed::Finite));
    }
    if !positive(resistance) {
        return Err(refused("resistance", "Ω", resistance, Allowed::Above(0.0)));
    }
    let current = ohm_current(voltage, resistance);
    if !current.is_finite() {
        return Err(refused("current", "A", current, Allowed::Finite));
    }
    Ok(current)
}

/// [`voltage_drop`] with core's checks.
///
/// # Errors
/// [`Error::OutOfRange`] as core gives it.
#[inline]
pub fn voltage_drop_checked(
    one_way: f64,
    cross_section: f64,
    resistivity: f64,
    current: f64,
) -> Result<f64, Error> {
    if !positive(one_way) {
        return Err(refused("one_way", "m", one_way, Allowed::Above(0.0)));
    }
    if !positive(cross_section) {
        return Err(refused("cross_section", "mm²", cross_section, Allowed::Above(0.0)));
    }
    if !positive(resistivity) {
        return Err(refused("resistivity", "Ω·m", resistivity, Allowed::Above(0.0)));
    }
    if !current.is_finite() {
        return Err(refused("current", "A", current, Allowed::Finite));
    }
    let drop = voltage_drop(one_way, cross_section, resistivity, current);
    if !drop.is_finite() {
        return Err(refused("drop", "V", drop, Allowed::Finite));
    }
    Ok(drop)
}

#[inline]
fn positive(value: f64) -> bool {
    value > 0.0 && value <= f64::MAX
}

#[inline]
fn refused(name: &'static str, unit: &'static str, value: f64, allowed: Allowed) -> Error {
    Error::OutOfRange { name, value, unit, allowed }
}
