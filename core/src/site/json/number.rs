//! Numbers of the JSON: quantities in the unit of their key, and null for what is no number.

use alloc::format;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::energy::watt_hour;
use uom::si::length::meter;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::{day, hour};

use crate::quantity::{
    ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance, Energy, Length, Power, Ratio,
    ThermodynamicTemperature, Time,
};

/// A number, or null: JSON knows neither NaN nor infinity.
pub(super) type Number = Option<f64>;

/// To the last bit, as the report's own comparison took it.
pub(super) fn exact(value: f64) -> Number {
    // No negative zero.
    value.is_finite().then_some(value + 0.0)
}

/// To twelve significant digits: what a conversion of units adds behind them is no information.
pub(super) fn tidy(value: f64) -> Number {
    if !value.is_finite() {
        return None;
    }
    format!("{value:.11e}").parse().ok().and_then(exact)
}

pub(super) fn volts(value: ElectricPotential) -> Number {
    tidy(value.get::<volt>())
}

pub(super) fn amps(value: ElectricCurrent) -> Number {
    tidy(value.get::<ampere>())
}

pub(super) fn ohms(value: ElectricalResistance) -> Number {
    tidy(value.get::<ohm>())
}

pub(super) fn watts(value: Power) -> Number {
    tidy(value.get::<watt>())
}

pub(super) fn watt_hours(value: Energy) -> Number {
    tidy(value.get::<watt_hour>())
}

pub(super) fn ampere_hours(value: ElectricCharge) -> Number {
    tidy(value.get::<ampere_hour>())
}

pub(super) fn metres(value: Length) -> Number {
    tidy(value.get::<meter>())
}

pub(super) fn hours(value: Time) -> Number {
    tidy(value.get::<hour>())
}

pub(super) fn days(value: Time) -> Number {
    tidy(value.get::<day>())
}

pub(super) fn part(value: Ratio) -> Number {
    tidy(value.get::<ratio>())
}

/// To a thousand-millionth of a kelvin: near 0 °C the digits that 273.15 K leaves behind are none of the value's.
pub(super) fn degC(value: ThermodynamicTemperature) -> Number {
    tidy(libm::round(value.get::<degree_celsius>() * 1e9) / 1e9)
}
