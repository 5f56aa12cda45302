//! Banks as far as wiring and charging limits need them: chemistry, charge and discharge limits, fault current.

mod charge;
mod chemistry;
mod fault;

use crate::catalogue::Entry;

pub use charge::{
    ChargeCurrentLimit, ChargeLimit, TemperatureBand, charge_bands, charge_current_limit, charge_limit,
    discharge_current_limit, discharge_limit,
};
pub use chemistry::Chemistry;
pub use fault::{
    CellVoltages, FaultVoltage, LEAD_ACID_SHORT_CIRCUIT, ResistanceRise, ShortCircuitEstimate,
    bank_resistance, cell_voltages, fault_voltage, greatest_bank_resistance, resistance_rise,
    short_circuit_estimate,
};

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[charge::ENTRIES, fault::ENTRIES];
