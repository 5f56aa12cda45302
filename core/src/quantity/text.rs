//! The text form: number, space, unit; one parser and two printers.

use core::fmt;

use super::ConductorSize;
use crate::error::{Error, Snippet};

/// What a text measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Dimension {
    /// Route or conductor length.
    Length,
    /// Cross-section of a conductor.
    Area,
    /// Electric current.
    Current,
    /// Voltage.
    Voltage,
    /// Power.
    Power,
    /// Energy.
    Energy,
    /// Charge or capacity.
    Charge,
    /// Resistance.
    Resistance,
    /// Resistance per length.
    LinearResistance,
    /// Resistivity.
    Resistivity,
    /// Temperature.
    Temperature,
    /// Temperature difference.
    TemperatureDifference,
    /// Charge rate.
    Rate,
    /// Time.
    Time,
    /// Ratio.
    Ratio,
}

/// A number as entered, with its unit: the form that round-trips.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Entered {
    /// The number as entered.
    pub value: f64,
    /// Symbol of its unit, as the table spells it.
    pub unit: &'static str,
    /// What it measures.
    pub dimension: Dimension,
}

/// A quantity that has a text form.
pub trait Textual: Copy {
    /// What it measures.
    const DIMENSION: Dimension;
    /// From the value in the base unit.
    fn from_base(value: f64) -> Self;
    /// The value in the base unit.
    fn base(self) -> f64;
}

/// Prints the shortest digits that give the same number again, in the unit entered.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Exact(pub Entered);

/// Prints readable, honest digits.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Readable<Q>(pub Q);

/// Exact printer.
pub fn exact(entered: Entered) -> Exact { Exact(entered) }
/// Readable printer.
pub fn readable<Q: Textual>(quantity: Q) -> Readable<Q> { Readable(quantity) }

impl fmt::Display for Exact {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} {}", self.0.value, self.0.unit)
    }
}

/// Parses a text of a known dimension into its number and unit.
///
/// # Errors
/// See [`Error`].
pub fn parse_entered(text: &str, dimension: Dimension) -> Result<Entered, Error> {
    let _ = dimension;
    Err(Error::NotANumber { text: Snippet::new(text), accepted: "" })
}

/// Parses a text into a quantity.
///
/// # Errors
/// See [`Error`].
pub fn parse<Q: Textual>(text: &str) -> Result<Q, Error> {
    let e = parse_entered(text, Q::DIMENSION)?;
    Ok(Q::from_base(e.value))
}

impl core::str::FromStr for ConductorSize {
    type Err = Error;
    fn from_str(text: &str) -> Result<Self, Error> {
        Err(Error::NotANumber { text: Snippet::new(text), accepted: "" })
    }
}
