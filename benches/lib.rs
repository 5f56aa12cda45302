//! What the typed calculations are measured against: the same arithmetic on plain `f64`, by hand.
//!
//! All inputs in base units. The checked twins make the same checks and the same error as core does, so that
//! the difference is the price of units alone.

use ampwright::Error;
use ampwright::error::Allowed;

/// I = U/R; amperes from volts and ohms.
#[must_use]
pub fn ohm_current(voltage: f64, resistance: f64) -> f64 {
    voltage / resistance
}

/// U = 2·l·ρ·I/A; volts from metres, square metres, ohm metres and amperes.
#[must_use]
pub fn voltage_drop(one_way: f64, cross_section: f64, resistivity: f64, current: f64) -> f64 {
    2.0 * one_way * resistivity / cross_section * current
}

/// [`ohm_current`] with core's checks.
///
/// # Errors
/// [`Error::OutOfRange`] as core gives it.
pub fn ohm_current_checked(voltage: f64, resistance: f64) -> Result<f64, Error> {
    finite("voltage", "V", voltage)?;
    positive("resistance", "Ω", resistance)?;
    Ok(ohm_current(voltage, resistance))
}

/// [`voltage_drop`] with core's checks.
///
/// # Errors
/// [`Error::OutOfRange`] as core gives it.
pub fn voltage_drop_checked(
    one_way: f64,
    cross_section: f64,
    resistivity: f64,
    current: f64,
) -> Result<f64, Error> {
    positive("one_way", "m", one_way)?;
    positive("cross_section", "mm²", cross_section)?;
    positive("resistivity", "Ω·m", resistivity)?;
    finite("current", "A", current)?;
    Ok(voltage_drop(one_way, cross_section, resistivity, current))
}

fn finite(name: &'static str, unit: &'static str, value: f64) -> Result<(), Error> {
    if value.is_finite() {
        Ok(())
    } else {
        Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Finite })
    }
}

fn positive(name: &'static str, unit: &'static str, value: f64) -> Result<(), Error> {
    if value > 0.0 && value.is_finite() {
        Ok(())
    } else {
        Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Above(0.0) })
    }
}
