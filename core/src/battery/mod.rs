//! Banks: what is held about each chemistry, and what follows for capacity, charge, cold, sharing, air and wear.

mod capacity;
mod cells;
mod charge;
mod chemistry;
mod cold;
mod cold_spell;
mod data;
mod disconnect;
mod factors;
mod fault;
mod kinetic;
mod kinetic_fit;
mod layout;
mod line;
mod lithium;
mod peukert;
mod rest;
mod set_points;
mod sharing;
mod state;
mod temperature;
mod ventilation;
mod wear;

use crate::catalogue::Entry;

pub use capacity::{
    CapacityGoverned, LeadAcidNeed, LeadAcidSteps, LoadClass, autonomy_days, bank_capacity_autonomy,
    bank_capacity_daily, bank_capacity_end_of_life, functional_time, lead_acid_capacity,
};
pub use cells::{SeriesCells, cells, series_cells};
pub use charge::{
    ChargeCurrentLimit, ChargeLimit, TemperatureBand, charge_bands, charge_current_limit, charge_limit,
    discharge_current_limit, discharge_limit,
};
pub use chemistry::Chemistry;
pub use cold::{
    FREEZING_ACID, FREEZING_LYE, FREEZING_MARGIN_K, freezes, freezing_floor, freezing_margin, freezing_point,
    least_state_of_charge,
};
pub use cold_spell::{
    ColdSpell, ColdSpellOutcome, DischargeFloor, capacity_left, cold_spell, days_to_disconnect,
};
pub use data::{ChemistryData, Datum, KineticParameters, data};
pub use disconnect::{DISCONNECT, Disconnect, DisconnectVoltage, disconnect, disconnect_voltage};
pub use factors::{cold_fraction, is_within, life_years, resistance_factor};
pub use fault::{
    CellVoltages, FaultVoltage, LEAD_ACID_SHORT_CIRCUIT, ResistanceRise, ShortCircuitEstimate,
    bank_resistance, cell_voltages, fault_voltage, greatest_bank_resistance, resistance_rise,
    short_circuit_estimate,
};
pub use kinetic::{Kinetic, Wells, kinetic_capacity, kinetic_lifetime};
pub use kinetic_fit::{HourRate, KineticFit, kinetic_available_part};
pub use layout::{Layout, Unit, laid_out, layout};
pub use lithium::{LithiumNeed, LithiumSteps, bank_capacity_lithium, lithium_capacity};
pub use peukert::{delivered_charge, hour_rate_capacity, peukert_exponent};
pub use rest::{RestTable, rest_table, rest_time};
pub use set_points::{
    CellSetPoints, SetPoints, Standing, VoltageRange, absorption_voltage, cell_set_points,
    compensated_voltage, compensation, equalising_voltage, float_voltage, set_points,
};
pub use sharing::{Link, Sharing, StringShare, StringSource, TakeOff, share};
pub use state::{
    ChargeFromVoltage, ChargeRange, relative_density, relative_density_at_reference, rest_voltage,
    state_of_charge, state_of_charge_from_density, state_of_charge_from_voltage,
};
pub use temperature::{TEMPERATURE_FACTOR, TEMPERATURE_FACTORS, capacity_factor, temperature_factor};
pub use ventilation::{
    ChargeStage, GASSING, gassing_current, ignition_distance, ventilation_flow, ventilation_opening,
};
pub use wear::{CountedCycle, cycle_life, cycle_wear, rainflow};

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[
    charge::ENTRIES,
    fault::ENTRIES,
    temperature::ENTRIES,
    capacity::ENTRIES,
    lithium::ENTRIES,
    cells::ENTRIES,
    set_points::ENTRIES,
    disconnect::ENTRIES,
    state::ENTRIES,
    cold::ENTRIES,
    cold_spell::ENTRIES,
    peukert::ENTRIES,
    kinetic::ENTRIES,
    kinetic_fit::ENTRIES,
    wear::ENTRIES,
    ventilation::ENTRIES,
];
