//! Internal resistance and prospective short-circuit current of a bank (R6): bounds, not four digits.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;

use super::Chemistry;
use super::charge::checked_capacity;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance};

/// Amperes per ampere-hour at a dead short across the terminals: usual, and upper bound.
const LEAD_ACID_A_PER_AH: (f64, f64) = (10.0, 20.0);
const LEAD_ACID_ESTIMATE: Citation = Citation::new(
    "low-voltage DC distribution guide",
    "short-circuit chapter, Isc = k × capacity",
    Seen::Page,
);

/// Short-circuit current of a bank by rule of thumb, where nobody has stated it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ShortCircuitEstimate {
    /// Usual: for the least prospective current, before the rise of resistance.
    pub usual: ElectricCurrent,
    /// Upper bound: for the greatest prospective current.
    pub upper: ElectricCurrent,
    /// Source.
    pub citation: Citation,
}

/// Short-circuit current at the terminals of a bank from its capacity, where the maker's value is not known.
///
/// Lead-acid: 10 A per Ah usually, 20 A per Ah as upper bound. `None` for lithium and nickel-cadmium, for which no
/// rule holds: then the check is not made (R6).
///
/// # Errors
/// [`Error::OutOfRange`] if the capacity is not greater than 0 and finite.
///
/// # Source
/// A guide to low-voltage DC distribution, page seen; `battery-short-circuit-estimate` in
/// `tests/reference/protection.toml`.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, short_circuit_estimate};
/// # use uom::si::{f64::ElectricCharge, electric_charge::ampere_hour, electric_current::ampere};
/// let bank = ElectricCharge::new::<ampere_hour>(400.0);
/// let estimate = short_circuit_estimate(Chemistry::Flooded, bank)?.unwrap();
/// assert!((estimate.upper.get::<ampere>() - 8000.0).abs() < 1e-9);
/// assert!(short_circuit_estimate(Chemistry::Lfp, bank)?.is_none());
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn short_circuit_estimate(
    chemistry: Chemistry,
    capacity: ElectricCharge,
) -> Result<Option<ShortCircuitEstimate>, Error> {
    let ampere_hours = checked_capacity(capacity)?;
    let (usual, upper) = LEAD_ACID_A_PER_AH;
    Ok(chemistry.is_lead_acid().then(|| ShortCircuitEstimate {
        usual: ElectricCurrent::new::<ampere>(usual * ampere_hours),
        upper: ElectricCurrent::new::<ampere>(upper * ampere_hours),
        citation: LEAD_ACID_ESTIMATE,
    }))
}

/// Internal resistance of a bank from its open-circuit voltage and its short-circuit current.
///
/// # Errors
/// [`Error::OutOfRange`] if one of them is not greater than 0 and finite.
///
/// # Source
/// Ohm's law, R = U0/Isc.
///
/// # Example
/// ```
/// # use ampwright::battery::bank_resistance;
/// # use uom::si::f64::{ElectricCurrent, ElectricPotential};
/// # use uom::si::{electric_current::kiloampere, electric_potential::volt, electrical_resistance::milliohm};
/// let resistance = bank_resistance(
///     ElectricPotential::new::<volt>(25.3),
///     ElectricCurrent::new::<kiloampere>(4.0),
/// )?;
/// assert!((resistance.get::<milliohm>() - 6.325).abs() < 1e-9);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn bank_resistance(
    open_circuit: ElectricPotential,
    short_circuit: ElectricCurrent,
) -> Result<ElectricalResistance, Error> {
    let volts = above_zero("open-circuit voltage", open_circuit.get::<volt>(), "V")?;
    let amperes = above_zero("short-circuit current", short_circuit.get::<ampere>(), "A")?;
    Ok(ElectricalResistance::new::<ohm>(volts / amperes))
}

/// By how much a bank's resistance rises from full, warm and new to the state of the least prospective current.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ResistanceRise {
    /// Empty against full.
    pub discharged: f64,
    /// At about −10 °C against 25 °C.
    pub cold: f64,
    /// End of life against new.
    pub aged: f64,
    /// Source.
    pub citation: Citation,
}

impl ResistanceRise {
    /// All three together.
    pub const fn product(&self) -> f64 {
        self.discharged * self.cold * self.aged
    }
}

/// Rise of internal resistance for the least prospective current (R6). Common practice, no source; on the high
/// side, because the device must operate even then.
///
/// ```
/// # use ampwright::battery::{Chemistry, resistance_rise};
/// assert_eq!(resistance_rise(Chemistry::Agm).product(), 4.5);
/// ```
pub const fn resistance_rise(chemistry: Chemistry) -> ResistanceRise {
    let citation = Citation::new(
        "common practice, no source",
        "rise of internal resistance, empty, cold, aged",
        Seen::Practice,
    );
    match chemistry {
        // Weak acid conducts about half as well as strong; cold half as much again; a battery is worn out when
        // its conductance has fallen by about a third.
        Chemistry::Flooded | Chemistry::Agm | Chemistry::Gel => {
            ResistanceRise { discharged: 2.0, cold: 1.5, aged: 1.5, citation }
        }
        // Flat over the charge, steep over the cold; end of life is often put at twice the resistance.
        Chemistry::Lfp | Chemistry::Nmc => ResistanceRise { discharged: 1.5, cold: 3.0, aged: 2.0, citation },
        // Potassium hydroxide takes no part in the reaction: little change with charge.
        Chemistry::NickelCadmium => ResistanceRise { discharged: 1.5, cold: 1.5, aged: 1.5, citation },
    }
}

/// Voltage behind the resistance of a bank in a fault, per cell: at most and at least.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FaultVoltage {
    /// Full and just charged, V a cell.
    pub greatest_V: f64,
    /// Empty and rested, V a cell.
    pub least_V: f64,
    /// Source.
    pub citation: Citation,
}

/// Voltage per cell that drives the greatest and the least prospective current (R6).
///
/// Lead-acid 2.2 V is the figure of the case `dc-battery-short-circuit-one` in `tests/reference/cases-conductors.toml`
/// (page seen), 1.98 V the empty cell of `lead-acid-ocv-soc-flooded` (page seen); the other chemistries recalled.
///
/// ```
/// # use ampwright::battery::{Chemistry, fault_voltage};
/// assert_eq!(fault_voltage(Chemistry::Flooded).greatest_V, 2.2);
/// ```
pub const fn fault_voltage(chemistry: Chemistry) -> FaultVoltage {
    let recalled = Citation::new("typical cell sheets", "rest voltage, full and empty", Seen::Recalled);
    match chemistry {
        Chemistry::Flooded | Chemistry::Agm | Chemistry::Gel => FaultVoltage {
            greatest_V: 2.2,
            least_V: 1.98,
            citation: Citation::new("low-voltage DC distribution guide", "short-circuit chapter", Seen::Page),
        },
        Chemistry::Lfp => FaultVoltage { greatest_V: 3.4, least_V: 2.5, citation: recalled },
        Chemistry::Nmc => FaultVoltage { greatest_V: 4.2, least_V: 3.0, citation: recalled },
        Chemistry::NickelCadmium => FaultVoltage { greatest_V: 1.45, least_V: 1.0, citation: recalled },
    }
}

fn above_zero(name: &'static str, value: f64, unit: &'static str) -> Result<f64, Error> {
    // Written so that NaN fails.
    if !(value > 0.0 && value <= f64::MAX) {
        return Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Above(0.0) });
    }
    Ok(value)
}

#[cfg(test)]
mod tests {
    use super::*;
    use uom::si::electric_charge::ampere_hour;

    #[test]
    fn no_rule_of_thumb_for_lithium_and_nickel() {
        let bank = ElectricCharge::new::<ampere_hour>(100.0);
        for chemistry in Chemistry::ALL {
            let estimate = short_circuit_estimate(chemistry, bank).unwrap();
            assert_eq!(estimate.is_some(), chemistry.is_lead_acid(), "{chemistry}");
        }
    }

    #[test]
    fn every_state_of_the_least_current_raises_the_resistance() {
        for chemistry in Chemistry::ALL {
            let rise = resistance_rise(chemistry);
            assert!(rise.discharged >= 1.0 && rise.cold >= 1.0 && rise.aged >= 1.0, "{chemistry}");
            assert!(rise.product() >= 2.0, "{chemistry}");
        }
    }

    #[test]
    fn resistance_needs_a_voltage_and_a_current_above_zero() {
        for odd in [0.0, -1.0, f64::NAN, f64::INFINITY] {
            let (u, i) = (ElectricPotential::new::<volt>(odd), ElectricCurrent::new::<ampere>(odd));
            assert!(bank_resistance(u, ElectricCurrent::new::<ampere>(1.0)).is_err());
            assert!(bank_resistance(ElectricPotential::new::<volt>(1.0), i).is_err());
        }
    }
}
