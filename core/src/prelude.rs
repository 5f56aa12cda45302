//! One `use` for everyday work: quantities and their units, the laws, loads, banks, arrays, inverters, conductors,
//! devices, rule sets and runs.
//!
//! Everything here also stands in its room, beside what is needed less often: sources in series and parallel, for
//! one, have a `Source` of their own in [`crate::law`]. Units are types of [`uom`], so while
//! this is imported their names (`ratio`, `hour`, `ohm`, …) do not serve for variables. A difference of temperatures
//! takes its units from [`uom::si::temperature_interval`].
//!
//! ```
//! use ampwright::prelude::*;
//!
//! let run = Length::new::<meter>(12.0);
//! let size: ConductorSize = "16 mm2".parse()?;
//! let copper = ElectricalResistivity::new::<ohm_square_millimeter_per_meter>(1.0 / 58.0);
//! let drop = voltage_drop(run, size.area(), copper, ElectricCurrent::new::<ampere>(25.0))?;
//! assert_eq!(readable(drop).to_string(), "647 mV");
//! # Ok::<(), Error>(())
//! ```

pub use crate::error::Error;
pub use crate::quantity::{
    Area, ChargeRate, ConductorSize, ElectricCharge, ElectricCurrent, ElectricPotential,
    ElectricalResistance, ElectricalResistivity, Energy, Irradiance, Irradiation, Length, LinearResistance,
    Power, Ratio, RatioPerTemperature, StateOfCharge, TemperatureInterval, ThermodynamicTemperature, Time,
    parse, readable,
};
pub use uom::si::area::square_millimeter;
pub use uom::si::electric_charge::ampere_hour;
pub use uom::si::electric_current::{ampere, kiloampere, milliampere};
pub use uom::si::electric_potential::{millivolt, volt};
pub use uom::si::electrical_resistance::{milliohm, ohm};
pub use uom::si::electrical_resistivity::{ohm_meter, ohm_square_millimeter_per_meter};
pub use uom::si::energy::{kilowatt_hour, watt_hour};
pub use uom::si::length::{foot, meter, millimeter};
pub use uom::si::power::{kilowatt, watt};
pub use uom::si::ratio::{percent, ratio};
pub use uom::si::thermodynamic_temperature::{degree_celsius, degree_fahrenheit};
pub use uom::si::time::{day, hour, minute, second};

pub use crate::law::{
    c_rate_current, cable_loss, charge, charge_current_sum, charge_of_energy, constant_power_current,
    current_c_rate, days_of_autonomy, depth_of_discharge, efficiency_chain, energy, energy_of_charge,
    inverter_input_current, ohm_current, ohm_resistance, ohm_voltage, parallel_resistances, power,
    power_current, power_in_resistance, recharge_time, recharge_time_lead_acid, required_cross_section,
    series_resistances, short_circuit_current, sun_hour_power, sun_hour_yield, system_voltage_rows,
    usable_energy, voltage_drop,
};

pub use crate::array::{
    KeyPoints, Module, ModuleSheet, array_power, cell_temperature, energy_need, module_power,
    modules_in_series, open_circuit_voltage_cold, operating_voltage_hot, sun_hours,
};
pub use crate::battery::{
    Chemistry, LeadAcidNeed, LithiumNeed, charge_current_limit, charge_limit, discharge_current_limit,
    discharge_limit, disconnect, freezing_point, hour_rate_capacity, layout, lead_acid_capacity,
    lithium_capacity, set_points, ventilation_flow, ventilation_opening,
};
pub use crate::cable::{
    Class, Coating, Compound, Conductor, Insulation, JointKind, Material, joint_resistance,
};
pub use crate::converter::Inverter;
pub use crate::device::{Device, Family, Polarity, Supply};
pub use crate::generator::{alternator_hot_current, generator_derated_power};
pub use crate::load::{Draw, Load, Schedule, daily_charge, daily_energy, duty_at_ambient, starting_power};
pub use crate::rules::{Ampacity, AmpacityQuery, Installation, LoadUse, Overrides, Rules, Space};

pub use crate::circuit::{
    Checked, Demand, Governing, InverterFeed, Judgement, Outcome, Run, SizedRun, inverter_feed, judge,
    size_run,
};
pub use crate::network::Source;
pub use crate::protection::{Guard, Offer, choose, least_rating};
