//! Voltages at which loads are dropped and taken back (R14).

use uom::si::electric_potential::volt;
use uom::si::ratio::ratio;
use uom::si::temperature_interval::kelvin;

use super::charge::checked_celsius;
use super::cold::{FREEZING_MARGIN_K, freezing_floor};
use super::factors::resistance_factor_at;
use super::set_points::checked_cells;
use super::{Chemistry, DischargeFloor, cell_voltages, data, line, rest_table};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::quantity::{
    ChargeRate, ElectricPotential, Ratio, StateOfCharge, TemperatureInterval, ThermodynamicTemperature,
};

/// Source of the reconnect voltages, and of the fall under load.
pub const DISCONNECT: Citation =
    Citation::new("common practice, no source", "voltages of load disconnects", Seen::Practice);

/// Voltage of a cell, V, at which loads are taken back, while charge runs: some charge must have come in first.
const fn reconnect_V(chemistry: Chemistry) -> f64 {
    match chemistry {
        Chemistry::Flooded => 2.1,
        Chemistry::Agm | Chemistry::Gel => 2.12,
        Chemistry::Lfp => 3.32,
        Chemistry::Nmc => 3.75,
        Chemistry::NickelCadmium => 1.32,
    }
}

/// Least distance of reconnect from disconnect, part of the nominal voltage: else the relay chatters.
const HYSTERESIS: f64 = 0.025;

/// Disconnect and reconnect voltages of a bank.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Disconnect {
    /// Under the stated load: below it the loads are dropped.
    pub disconnect: ElectricPotential,
    /// Above it they are taken back.
    pub reconnect: ElectricPotential,
    /// State of charge at which the loads are dropped.
    pub floor: StateOfCharge,
    /// What sets it: the chemistry's greatest depth, or freezing.
    pub floor_by: DischargeFloor,
    /// Rest voltage that belongs to it.
    pub at_rest: ElectricPotential,
    /// Source.
    pub citation: Citation,
}

/// Disconnect and reconnect voltages of a bank, fit for chemistry, current and freezing (R14).
///
/// The loads are dropped at the greatest depth of discharge of the chemistry, or earlier where the electrolyte would
/// come within [`FREEZING_MARGIN_K`] of freezing. The voltage is that of the charge at rest, less its fall under the
/// load, but never below the least that a cell bears ([`cell_voltages`]).
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `cells` | | 1 or more; in series |
/// | `rate` | /h | of the discharge |
/// | `temperature` | °C | −60 … 100; lowest of the cells |
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or out of range, or there are no cells; [`Error::TableEnds`] where
/// even a full battery does not keep the margin from freezing.
///
/// # Source
/// Rest voltages as [`rest_table`]; the fall under load and the reconnect voltages are common practice, no source.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, disconnect};
/// # use ampwright::quantity::{parse, readable};
/// let slow = disconnect(Chemistry::Flooded, 6, parse("0.05 /h")?, parse("25 degC")?)?;
/// let fast = disconnect(Chemistry::Flooded, 6, parse("0.2 /h")?, parse("25 degC")?)?;
/// assert_eq!(readable(slow.disconnect).to_string(), "11.81 V");
/// assert_eq!(readable(fast.disconnect).to_string(), "11.16 V");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn disconnect(
    chemistry: Chemistry,
    cells: u32,
    rate: ChargeRate,
    temperature: ThermodynamicTemperature,
) -> Result<Disconnect, Error> {
    let count = checked_cells(cells)?;
    let celsius = checked_celsius(temperature)?;
    let deepest = 1.0 - data(chemistry).greatest_depth.value;
    let margin = TemperatureInterval::new::<kelvin>(FREEZING_MARGIN_K);
    let (floor, floor_by) = match freezing_floor(chemistry, temperature, margin)? {
        Some(freezing) if freezing.get() > deepest => (freezing, DischargeFloor::Freezing),
        _ => (StateOfCharge::new(deepest)?, DischargeFloor::Depth),
    };
    let at_rest_V = line::held(rest_table(chemistry).voltage_V.value, floor.get());
    let fall_V =
        rate.get() * data(chemistry).drop_V_h.value * resistance_factor_at(chemistry, floor.get(), celsius);
    let disconnect_V = (at_rest_V - fall_V).max(cell_voltages(chemistry).empty_V);
    let apart_V = HYSTERESIS * data(chemistry).nominal_cell_V.value;
    let whole = |cell_V: f64| ElectricPotential::new::<volt>(count * cell_V);
    Ok(Disconnect {
        disconnect: whole(disconnect_V),
        reconnect: whole(reconnect_V(chemistry).max(at_rest_V + apart_V)),
        floor,
        floor_by,
        at_rest: whole(at_rest_V),
        citation: DISCONNECT,
    })
}

calculations! {
    /// Voltages at which the loads of a bank are dropped and taken back.
    ///
    /// See [`disconnect`] for what they rest on. A setting in a device counts at its own terminals: take the drop of
    /// the cable between off.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{Chemistry, disconnect_voltage}, quantity::{parse, readable}};
    /// let result = disconnect_voltage(Chemistry::Lfp, parse("4")?, parse("0.2 /h")?, parse("25 degC")?)?;
    /// assert_eq!(readable(result.disconnect).to_string(), "12.58 V");
    /// assert_eq!(readable(result.reconnect).to_string(), "13.28 V");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn disconnect_voltage(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// In series; a whole number.
        cells: Ratio in ratio [1.0 ..= 1000.0],
        /// Of the discharge.
        rate: ChargeRate in per_hour [0.0 ..= 10.0],
        /// Lowest of the cells.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) => DisconnectVoltage {
        /// Under that load.
        disconnect: ElectricPotential in volt,
        /// Loads are taken back above it.
        reconnect: ElectricPotential in volt,
        /// State of charge at which they are dropped.
        state_of_charge: Ratio in ratio,
    }
    formula "disconnect = n·max(U₀(s) − r·k·(1 + (a − 1)(1 − s))·b^((25 °C − t)/35 K), least of a cell); s the \
        greater of one less the greatest depth (lead-acid 0.8, others 0.9) and the least that keeps 5 K from \
        freezing; k in V·h: flooded 0.4, AGM 0.25, gel 0.3, LFP 0.12, NMC 0.15, nickel-cadmium 0.2; a and b the rise \
        of resistance discharged and cold; reconnect = n·max(2.1, 2.12, 2.12, 3.32, 3.75, 1.32 V; U₀(s) + 2.5 % of \
        nominal)"
    source "rest voltages by table; fall under load and reconnect voltages are common practice, no source"
    fallible "even a full battery comes within 5 K of freezing"
    {
        #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "1 to 1000, and saturating")]
        let found = super::disconnect(chemistry, cells.value as u32, rate, temperature)?;
        Ok(DisconnectVoltage {
            disconnect: found.disconnect,
            reconnect: found.reconnect,
            state_of_charge: Ratio::new::<ratio>(found.floor.get()),
        })
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use proptest::prelude::*;
    use uom::si::thermodynamic_temperature::degree_celsius;

    fn found(chemistry: Chemistry, rate: f64, celsius: f64) -> Result<Disconnect, Error> {
        let temperature = ThermodynamicTemperature::new::<degree_celsius>(celsius);
        disconnect(chemistry, 1, ChargeRate::per_hour(rate)?, temperature)
    }

    proptest! {
        #[test]
        fn more_current_lowers_it_and_it_stays_within_what_a_cell_bears(
            place in 0usize..6, rate in 0.0..2.0f64, more in 0.0..2.0f64, celsius in -20.0..50.0f64,
        ) {
            let chemistry = Chemistry::ALL[place];
            let slow = found(chemistry, rate, celsius).unwrap();
            let fast = found(chemistry, rate + more, celsius).unwrap();
            prop_assert!(fast.disconnect <= slow.disconnect && fast.floor == slow.floor);
            prop_assert!(fast.disconnect.value >= cell_voltages(chemistry).empty_V);
            prop_assert!(slow.disconnect <= slow.at_rest && slow.at_rest < slow.reconnect);
            // Reconnect is reached by charging.
            let charged = super::super::set_points::cell_set_points(chemistry).absorption_V.0;
            prop_assert!(slow.reconnect.value < charged, "{chemistry}: {:?}", slow.reconnect);
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(celsius: u64, rate in 0.0..1000.0f64, cells: u32) {
            let temperature = ThermodynamicTemperature::new::<degree_celsius>(f64::from_bits(celsius));
            for chemistry in Chemistry::ALL {
                if let Ok(found) = disconnect(chemistry, cells, ChargeRate::per_hour(rate).unwrap(), temperature) {
                    prop_assert!(found.disconnect.value.is_finite() && found.reconnect > found.disconnect);
                }
            }
        }
    }

    #[test]
    fn frost_raises_the_state_of_charge_at_which_loads_are_dropped() {
        let warm = found(Chemistry::Flooded, 0.05, 20.0).unwrap();
        let cold = found(Chemistry::Flooded, 0.05, -20.0).unwrap();
        assert_eq!((warm.floor_by, cold.floor_by), (DischargeFloor::Depth, DischargeFloor::Freezing));
        assert!(cold.floor.get() > 0.5 && cold.at_rest > warm.at_rest);
        assert_eq!(found(Chemistry::Flooded, 0.05, -55.0).unwrap().floor_by, DischargeFloor::Freezing);
        assert_eq!(found(Chemistry::NickelCadmium, 0.05, -24.0).unwrap_err().slug(), "table-ends");
        assert_eq!(found(Chemistry::Lfp, 0.05, -20.0).unwrap().floor_by, DischargeFloor::Depth);
    }

    #[test]
    fn the_entry_is_the_function() {
        for chemistry in Chemistry::ALL {
            let rate = ChargeRate::per_hour(0.1).unwrap();
            let temperature = ThermodynamicTemperature::new::<degree_celsius>(0.0);
            let whole = disconnect(chemistry, 8, rate, temperature).unwrap();
            let entry = disconnect_voltage(chemistry, Ratio::new::<ratio>(8.0), rate, temperature).unwrap();
            assert_eq!((entry.disconnect, entry.reconnect), (whole.disconnect, whole.reconnect));
            assert_eq!(entry.state_of_charge.value, whole.floor.get());
        }
    }

    /// The faces print the formula: its figures are those of the tables.
    #[test]
    fn the_formula_names_the_figures_of_the_tables() {
        for chemistry in Chemistry::ALL {
            for figure in
                [data(chemistry).drop_V_h.value, reconnect_V(chemistry), data(chemistry).greatest_depth.value]
            {
                assert!(ENTRIES[0].formula.contains(&std::format!("{figure}")), "{chemistry}: {figure}");
            }
        }
        assert!(ENTRIES[0].formula.contains(&std::format!("{FREEZING_MARGIN_K} K")));
    }
}
