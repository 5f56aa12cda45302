//! Internal resistance and prospective short-circuit current of a bank (R6): bounds, not four digits.

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;

use super::Chemistry;
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::law::ohm_resistance;
use crate::quantity::{ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance};

/// Amperes per ampere-hour at a dead short across the terminals: usual, and upper bound.
const LEAD_ACID_A_PER_AH: (f64, f64) = (10.0, 20.0);
/// Source of [`short_circuit_estimate()`].
pub const LEAD_ACID_SHORT_CIRCUIT: Citation = Citation::new(
    "low-voltage DC distribution guide",
    "short-circuit chapter, Isc = k × capacity",
    Seen::Page,
);

calculations! {
    /// Short-circuit current at the terminals of a lead-acid bank from its capacity, where nobody has stated it.
    ///
    /// A rule of thumb: bounds, not digits. For lithium and nickel-cadmium no rule holds, and the check is not made (R6).
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{Chemistry, short_circuit_estimate}, quantity::{parse, readable}};
    /// let estimate = short_circuit_estimate(Chemistry::Flooded, parse("400 Ah")?)?;
    /// assert_eq!(readable(estimate.upper).to_string(), "8 kA");
    /// assert!(short_circuit_estimate(Chemistry::Lfp, parse("400 Ah")?).is_err());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn short_circuit_estimate(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// Of the whole bank.
        capacity: ElectricCharge in ampere_hour [> 0.0],
    ) => ShortCircuitEstimate {
        /// For the least prospective current, before the rise of resistance.
        usual: ElectricCurrent in ampere,
        /// For the greatest prospective current.
        upper: ElectricCurrent in ampere,
    }
    where (chemistry.is_lead_acid()) => (Error::NotTabulated {
        what: "the short-circuit current of a lithium or nickel-cadmium bank",
        table: Citation::new("the rules of thumb held", "lead-acid only", Seen::Derived),
        remedy: "state the maker's figure, or measure the internal resistance",
    })
    formula "I = k·C, k = 10 A/Ah usually, 20 A/Ah as upper bound"
    source "a guide to low-voltage DC distribution, short-circuit chapter"
    {
        let ampere_hours = capacity.get::<ampere_hour>();
        let (usual, upper) = LEAD_ACID_A_PER_AH;
        ShortCircuitEstimate {
            usual: ElectricCurrent::new::<ampere>(usual * ampere_hours),
            upper: ElectricCurrent::new::<ampere>(upper * ampere_hours),
        }
    }

    /// Internal resistance of a bank from its open-circuit voltage and its short-circuit current.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::bank_resistance, quantity::{parse, readable}};
    /// let result = bank_resistance(parse("25.3 V")?, parse("4 kA")?)?;
    /// assert_eq!(readable(result).to_string(), "6.33 mΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn bank_resistance(
        /// Without load.
        open_circuit_voltage: ElectricPotential in volt [> 0.0],
        /// At the terminals.
        short_circuit_current: ElectricCurrent in ampere [> 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "R = U₀/I"
    source "Ohm's law"
    { ohm_resistance::formula(open_circuit_voltage, short_circuit_current) }

    /// Internal resistance of a bank that is empty, cold and aged, from that of the same bank full, warm and new.
    ///
    /// For the least prospective current (R6), which must operate the device even then: on the high side.
    ///
    /// # Example
    /// Each of the three raises 5 mΩ of lead-acid, together to 4.5 times:
    /// ```
    /// use ampwright::{battery::{Chemistry, greatest_bank_resistance}, quantity::{parse, readable}};
    /// let result = greatest_bank_resistance(Chemistry::Agm, parse("5 mohm")?)?;
    /// assert_eq!(readable(result).to_string(), "22.5 mΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn greatest_bank_resistance(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// Full, warm and new.
        internal_resistance: ElectricalResistance in ohm [>= 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "R = R₀·k_discharged·k_cold·k_aged: lead-acid 2·1.5·1.5, lithium 1.5·3·2, nickel-cadmium 1.5·1.5·1.5"
    source "common practice, no source"
    { internal_resistance * resistance_rise(chemistry).product() }
}

/// By how much a bank's resistance rises from full, warm and new to the state of the least prospective current.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ResistanceRise {
    /// Empty against full; a factor, as the two below.
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

/// Voltages per cell that a bank's stated limits are held against.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CellVoltages {
    /// Charging reaches at least this, V a cell.
    pub charge_V: f64,
    /// Below this a cell is harmed by discharge, V a cell.
    pub empty_V: f64,
    /// Source.
    pub citation: Citation,
}

/// Least charge voltage and least discharge voltage of a cell: bounds for plausibility, not set points.
///
/// Charge of gel and AGM: the lower edges of usual ranges, page seen; the rest recalled.
///
/// ```
/// # use ampwright::battery::{Chemistry, cell_voltages};
/// assert_eq!(cell_voltages(Chemistry::Flooded).charge_V, 2.4);
/// ```
pub const fn cell_voltages(chemistry: Chemistry) -> CellVoltages {
    let citation = Citation::new("usual handbook values", "voltage per cell", Seen::Recalled);
    let (charge_V, empty_V) = match chemistry {
        Chemistry::Flooded => (2.4, 1.6),
        Chemistry::Agm => (2.38, 1.6),
        Chemistry::Gel => (2.35, 1.6),
        Chemistry::Lfp => (3.4, 2.5),
        Chemistry::Nmc => (4.0, 2.7),
        Chemistry::NickelCadmium => (1.45, 0.9),
    };
    CellVoltages { charge_V, empty_V, citation }
}

/// Voltage behind the resistance of a bank in a fault, per cell: at most and at least.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FaultVoltage {
    /// Full, V a cell; a lead-acid bank on charge stands above it, and a site counts its highest voltage then.
    pub greatest_V: f64,
    /// Empty and rested, V a cell.
    pub least_V: f64,
    /// Source.
    pub citation: Citation,
}

/// Voltage per cell that drives the greatest and the least prospective current (R6).
///
/// Lead-acid from two sources, pages seen: 2.2 V from a guide to low-voltage DC distribution, short-circuit chapter; 1.98 V, a
/// sixth of 11.89 V, from a battery council's table of rest voltages, flooded. The other chemistries recalled.
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
            citation: Citation::new(
                "low-voltage DC distribution guide, short-circuit chapter",
                "2.2 V full; and a battery council's table of rest voltages, 1.98 V empty",
                Seen::Page,
            ),
        },
        Chemistry::Lfp => FaultVoltage { greatest_V: 3.65, least_V: 2.5, citation: recalled },
        Chemistry::Nmc => FaultVoltage { greatest_V: 4.2, least_V: 3.0, citation: recalled },
        Chemistry::NickelCadmium => FaultVoltage { greatest_V: 1.45, least_V: 1.0, citation: recalled },
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use uom::si::electric_potential::volt;

    #[test]
    fn no_rule_of_thumb_for_lithium_and_nickel() {
        let bank = ElectricCharge::new::<ampere_hour>(100.0);
        for chemistry in Chemistry::ALL {
            let estimate = short_circuit_estimate(chemistry, bank).map_err(|e| e.slug());
            assert_eq!(estimate.is_ok(), chemistry.is_lead_acid(), "{chemistry}");
            assert!(matches!(estimate, Ok(_) | Err("not-tabulated")), "{chemistry}");
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
