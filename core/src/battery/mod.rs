//! Banks as far as wiring and charging limits need them: chemistry, charge and discharge limits, fault current.

mod charge;
mod chemistry;
mod fault;

pub use charge::{
    ChargeCurrentLimit, ChargeLimit, TemperatureBand, charge_bands, charge_current_limit, charge_limit,
    discharge_current_limit, discharge_limit,
};
pub use chemistry::Chemistry;
pub use fault::{FaultVoltage, ResistanceRise, ShortCircuitEstimate, bank_resistance, resistance_rise, short_circuit_estimate, fault_voltage};
