//! Which quantity is written in which units.

use core::marker::PhantomData;

use super::text::Textual;
use super::unit::Dimension;
use super::{
    Angle, Area, Capacitance, ChargeRate, ElectricCharge, ElectricCurrent, ElectricPotential,
    ElectricalResistance, ElectricalResistivity, Energy, Irradiance, Irradiation, Length, LinearResistance,
    Power, Ratio, RatioPerTemperature, StateOfCharge, TemperatureInterval, ThermodynamicTemperature, Time,
    VoltagePerTemperature, Volume, VolumeFlow,
};
use crate::error::Error;

macro_rules! textual {
    ($($quantity:ident: $dimension:ident;)+) => {$(
        impl Textual for $quantity {
            const DIMENSION: Dimension = Dimension::$dimension;
            fn from_base(value: f64) -> Result<Self, Error> {
                Ok(Self { dimension: PhantomData, units: PhantomData, value })
            }
            fn base(self) -> f64 {
                self.value
            }
        }
    )+};
}

textual! {
    Length: Length;
    Area: Area;
    ElectricCurrent: Current;
    ElectricPotential: Voltage;
    Power: Power;
    Energy: Energy;
    ElectricCharge: Charge;
    ElectricalResistance: Resistance;
    LinearResistance: LinearResistance;
    ElectricalResistivity: Resistivity;
    ThermodynamicTemperature: Temperature;
    TemperatureInterval: TemperatureDifference;
    Time: Time;
    Ratio: Ratio;
    Angle: Angle;
    Irradiance: Irradiance;
    Irradiation: Irradiation;
    VoltagePerTemperature: VoltagePerTemperature;
    RatioPerTemperature: RatioPerTemperature;
    VolumeFlow: VolumeFlow;
    Volume: Volume;
    Capacitance: Capacitance;
}

impl Textual for ChargeRate {
    const DIMENSION: Dimension = Dimension::Rate;
    fn from_base(value: f64) -> Result<Self, Error> {
        Self::per_hour(value)
    }
    fn base(self) -> f64 {
        self.get()
    }
}

impl Textual for StateOfCharge {
    const DIMENSION: Dimension = Dimension::Ratio;
    fn from_base(value: f64) -> Result<Self, Error> {
        Self::new(value)
    }
    fn base(self) -> f64 {
        self.get()
    }
}
