//! Resistance of a conductor per length, at temperature.

use super::Conductor;
use crate::citation::Citation;
use crate::error::Error;
use crate::quantity::{LinearResistance, ThermodynamicTemperature};

/// Where a resistance comes from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ResistanceSource {
    /// Table or formula.
    pub citation: Citation,
}

/// Resistance of one conductor per length at a conductor temperature.
///
/// # Errors
/// [`Error`] outside the tables.
pub fn linear_resistance(
    conductor: &Conductor,
    temperature: ThermodynamicTemperature,
) -> Result<LinearResistance, Error> {
    linear_resistance_with_source(conductor, temperature).map(|(r, _)| r)
}

/// As [`linear_resistance`], with its source.
///
/// # Errors
/// As [`linear_resistance`].
pub fn linear_resistance_with_source(
    conductor: &Conductor,
    temperature: ThermodynamicTemperature,
) -> Result<(LinearResistance, ResistanceSource), Error> {
    let _ = (conductor, temperature);
    Err(Error::NotSettled { what: "", steps: 0 })
}
