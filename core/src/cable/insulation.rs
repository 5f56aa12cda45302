//! Insulation: compound and temperature rating.

use crate::error::Error;

/// Compound of the insulation, as far as limits depend on it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Compound {
    /// PVC and other thermoplastics.
    Pvc,
    /// Cross-linked polyethylene or EPR.
    Xlpe,
    /// Natural or synthetic rubber.
    Rubber,
    /// Silicone rubber.
    Silicone,
}

/// Insulation of a conductor.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Insulation {
    compound: Compound,
    /// Greatest conductor temperature in normal service, °C.
    #[allow(non_snake_case)]
    rating_degC: f64,
}

impl Insulation {
    /// Insulation of a compound, for a greatest conductor temperature in normal service of 60 … 200 °C.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] outside the compound's range.
    #[allow(non_snake_case)]
    pub const fn new(compound: Compound, rating_degC: f64) -> Result<Self, Error> {
        Ok(Self { compound, rating_degC })
    }
    /// The compound.
    pub const fn compound(self) -> Compound { self.compound }
    /// Greatest conductor temperature in normal service, °C.
    #[allow(non_snake_case)]
    pub const fn rating_degC(self) -> f64 { self.rating_degC }
    /// Greatest conductor temperature at the end of a short-circuit, °C (IEC 60364-4-43, Table 43A).
    #[allow(non_snake_case)]
    pub fn short_circuit_degC(self) -> f64 { 160.0 }
}
