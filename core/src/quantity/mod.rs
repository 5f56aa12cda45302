//! Quantities, sizes and their text form.
//!
//! Public functions take and return [`uom`] quantities; this room re-exports those in use and adds the values
//! that are more than a number: conductor sizes, states of charge, charge rates.

mod figures;
mod rate;
mod readable;
mod size;
mod text;
mod textual;
mod unit;

pub use figures::Figures;
pub use rate::{ChargeRate, StateOfCharge};
pub use readable::{Readable, readable};
pub use size::{ConductorSize, Designation};
pub use text::{Entered, Exact, Textual, exact, parse, parse_entered};
pub use unit::Dimension;

pub use uom::si::f64::{
    Angle, Area, Capacitance, ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance,
    ElectricalResistivity, Energy, Length, Power, Ratio, TemperatureInterval, ThermodynamicTemperature, Time,
    Volume,
};

pub use uom::si::f64::{
    HeatFluxDensity as Irradiance, RadiantExposure as Irradiation,
    TemperatureCoefficient as RatioPerTemperature, VolumeRate as VolumeFlow,
};

/// Voltage per temperature difference; base unit V/K.
pub type VoltagePerTemperature = uom::si::Quantity<
    uom::si::ISQ<
        uom::typenum::P2,
        uom::typenum::P1,
        uom::typenum::N3,
        uom::typenum::N1,
        uom::typenum::N1,
        uom::typenum::Z0,
        uom::typenum::Z0,
    >,
    uom::si::SI<f64>,
    f64,
>;

/// A voltage per temperature difference, in V/K.
pub const fn volts_per_kelvin(value: f64) -> VoltagePerTemperature {
    VoltagePerTemperature { dimension: core::marker::PhantomData, units: core::marker::PhantomData, value }
}

/// Resistance per conductor length; base unit Ω/m.
pub type LinearResistance = uom::si::Quantity<
    uom::si::ISQ<
        uom::typenum::P1,
        uom::typenum::P1,
        uom::typenum::N3,
        uom::typenum::N2,
        uom::typenum::Z0,
        uom::typenum::Z0,
        uom::typenum::Z0,
    >,
    uom::si::SI<f64>,
    f64,
>;

/// Square root that is exact to the last bit in every build.
#[must_use]
pub fn sqrt(x: f64) -> f64 {
    #[cfg(feature = "std")]
    return x.sqrt();
    #[cfg(not(feature = "std"))]
    return libm::sqrt(x);
}
