//! State of charge from a rest voltage or a relative density: what a reading is consistent with.

use uom::si::electric_potential::volt;
use uom::si::ratio::ratio;

use super::rest::FLOODED_DENSITY;
use super::set_points::checked_cells;
use super::{Chemistry, line, rest_table};
use crate::catalogue::calculations;
use crate::citation::Citation;
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricPotential, Ratio, StateOfCharge, ThermodynamicTemperature};

/// States of charge that a reading is consistent with.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChargeRange {
    /// Least.
    pub least: StateOfCharge,
    /// Greatest.
    pub greatest: StateOfCharge,
    /// Whether any of them lies on the curve's plateau, [`RestTable::plateau`](super::RestTable::plateau).
    pub on_plateau: bool,
    /// Source of the curve.
    pub citation: Citation,
}

impl ChargeRange {
    /// Width beyond which a reading tells too little to act on.
    const USABLE: f64 = 0.3;

    /// The middle, where the reading is a usable gauge: off the plateau, and where it leaves no more than 30 % of the
    /// capacity open. Common practice, no source.
    pub fn estimate(&self) -> Option<StateOfCharge> {
        let (least, greatest) = (self.least.get(), self.greatest.get());
        if self.on_plateau || greatest - least > Self::USABLE {
            return None;
        }
        StateOfCharge::new(0.5 * (least + greatest)).ok()
    }
}

/// States of charge that a voltage at rest is consistent with.
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `cells` | | 1 or more; in series |
/// | `voltage` | V | of the bank, at rest |
/// | `meter_error` | V | ≥ 0; of the reading, either way |
///
/// The error of the meter and the spread between sources or makers widen the answer: on the plateau of LFP nearly
/// everything is left open, and [`ChargeRange::estimate`] gives nothing.
///
/// # Errors
/// [`Error::OutOfRange`] for NaN, infinity, a voltage not above nought or a negative error; [`Error::Contradiction`]
/// where the voltage is above that of a full cell at rest (it has not rested) or far below that of an empty one (a
/// cell has failed, or the number of cells is another).
///
/// # Source
/// As [`rest_table`], by the straight line between its rows.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, state_of_charge};
/// # use ampwright::quantity::parse;
/// let flooded = state_of_charge(Chemistry::Flooded, 6, parse("12.45 V")?, parse("20 mV")?)?;
/// assert!(flooded.least.get() > 0.6 && flooded.greatest.get() < 0.9);
/// let lfp = state_of_charge(Chemistry::Lfp, 4, parse("13.2 V")?, parse("20 mV")?)?;
/// assert_eq!(lfp.estimate(), None);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn state_of_charge(
    chemistry: Chemistry,
    cells: u32,
    voltage: ElectricPotential,
    meter_error: ElectricPotential,
) -> Result<ChargeRange, Error> {
    let count = checked_cells(cells)?;
    let (reading, error) = (voltage.get::<volt>(), meter_error.get::<volt>());
    let refuse = |name, value, allowed| Err(Error::OutOfRange { name, value, unit: "V", allowed });
    if !(reading > 0.0 && reading.is_finite()) {
        return refuse("rest voltage", reading, Allowed::Above(0.0));
    }
    if !(error >= 0.0 && error.is_finite()) {
        return refuse("meter error", error, Allowed::AtLeast(0.0));
    }
    let table = rest_table(chemistry);
    let rows = table.voltage_V.value;
    let open = error / count + table.spread_V.value;
    let cell = reading / count;
    let contradiction =
        |why| Err(Error::Contradiction { name: "rest voltage", value: reading, unit: "V", why });
    if cell - open > line::held(rows, 1.0) {
        return contradiction(
            "that is above a full battery at rest: let it rest without charge and load, then read again",
        );
    }
    if cell + open < DEAD * line::held(rows, 0.0) {
        return contradiction(
            "that is far below an empty battery at rest: a cell has failed, or the number of cells is another",
        );
    }
    let least = StateOfCharge::new(line::reached(rows, cell - open))?;
    let greatest = StateOfCharge::new(line::reached(rows, cell + open))?;
    Ok(ChargeRange {
        least,
        greatest,
        on_plateau: table.plateau.is_some_and(|(from, to)| greatest.get() > from && least.get() < to),
        citation: table.voltage_V.citation,
    })
}

/// Part of an empty cell's rest voltage below which a cell counts as failed: common practice, no source.
const DEAD: f64 = 0.9;

/// Relative density of lead-acid electrolyte at a state of charge, at about 25 °C; `None` for other chemistries.
///
/// ```
/// # use ampwright::battery::{Chemistry, relative_density};
/// # use ampwright::quantity::StateOfCharge;
/// let full = StateOfCharge::new(1.0)?;
/// assert_eq!(relative_density(Chemistry::Flooded, full).map(|density| density.value), Some(1.265));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn relative_density(chemistry: Chemistry, charge: StateOfCharge) -> Option<Ratio> {
    let rows = rest_table(chemistry).density?.value;
    Some(Ratio::new::<ratio>(line::held(rows, charge.get())))
}

/// Change of relative density with temperature: 3 points (0.003) for 10 °F.
const DENSITY_PER_K: f64 = 0.003 / (10.0 / 1.8);

calculations! {
    /// Voltage of a bank at rest at a state of charge, at about 25 °C.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{Chemistry, rest_voltage}, quantity::{parse, readable}};
    /// let result = rest_voltage(Chemistry::Flooded, parse("12")?, parse("50 %")?)?;
    /// assert_eq!(readable(result).to_string(), "24.5 V");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn rest_voltage(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// In series.
        cells: Ratio in ratio [1.0 ..= 1000.0],
        /// Part of the capacity that is left.
        state_of_charge: Ratio in ratio [0.0 ..= 1.0],
    ) -> voltage: ElectricPotential in volt
    formula "U = n·U₀(s), U₀ by the straight line between rows, at 0, 25, 50, 75 and 100 %: flooded 1.982, 2.01, \
        2.04, 2.075, 2.108 V; AGM 1.967, 2, 2.05, 2.1, 2.133 V; gel 1.967, 2, 2.058, 2.108, 2.142 V; LFP, NMC and \
        nickel-cadmium by rows of their own, at half charge 3.29, 3.7 and 1.27 V"
    source "flooded: a battery council's table, page seen; LFP: a typical curve, recalled; the rest recalled"
    {
        let cell = line::held(rest_table(chemistry).voltage_V.value, state_of_charge.value);
        cells.value * ElectricPotential::new::<volt>(cell)
    }

    /// State of charge that a bank's voltage at rest is consistent with, from least to greatest.
    ///
    /// The meter's error and the spread between makers are in it. Where the two lie far apart, voltage is no gauge.
    ///
    /// # Example
    /// 13.2 V of four cells of LFP may be anything from a third to nine tenths:
    /// ```
    /// use ampwright::{battery::{Chemistry, state_of_charge_from_voltage}, quantity::{parse, readable}};
    /// let result = state_of_charge_from_voltage(Chemistry::Lfp, parse("4")?, parse("13.2 V")?, parse("20 mV")?)?;
    /// assert_eq!(readable(result.least).to_string(), "0.375");
    /// assert_eq!(readable(result.greatest).to_string(), "0.775");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn state_of_charge_from_voltage(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// In series; a whole number.
        cells: Ratio in ratio [1.0 ..= 1000.0],
        /// Of the bank, after hours without charge and load.
        voltage: ElectricPotential in volt [> 0.0],
        /// Error of the reading, either way.
        meter_error: ElectricPotential in volt [>= 0.0] = 0.02,
    ) => ChargeFromVoltage {
        /// Least that is consistent with the reading.
        least: Ratio in ratio,
        /// Greatest that is consistent with the reading.
        greatest: Ratio in ratio,
    }
    formula "s where U₀(s) = U/n ∓ (e/n + spread), U₀ as for the rest voltage; spread a cell: flooded 15 mV, AGM, \
        gel, LFP and NMC 20 mV, nickel-cadmium 30 mV"
    source "as the rest voltage; the spread of flooded is that between two sources, the others recalled"
    fallible "the voltage is above that of a full battery at rest, or far below that of an empty one"
    {
        // A part of a cell does not count.
        #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "1 to 1000, and saturating")]
        let range = super::state_of_charge(chemistry, cells.value as u32, voltage, meter_error)?;
        Ok(ChargeFromVoltage {
            least: Ratio::new::<ratio>(range.least.get()),
            greatest: Ratio::new::<ratio>(range.greatest.get()),
        })
    }

    /// Relative density as it would read at the reference temperature.
    ///
    /// # Example
    /// 1.250 read at 90 °F is 1.253 at 80 °F:
    /// ```
    /// use ampwright::{battery::relative_density_at_reference, quantity::parse};
    /// let result = relative_density_at_reference(parse("1.25")?, parse("90 degF")?, parse("80 degF")?)?;
    /// assert!((result.value - 1.253).abs() < 1e-9);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn relative_density_at_reference(
        /// Of the hydrometer.
        reading: Ratio in ratio [1.0 ..= 1.4],
        /// Of the electrolyte.
        temperature: ThermodynamicTemperature in degree_celsius [-40.0 ..= 60.0],
        /// Of the table that the reading is held against.
        reference: ThermodynamicTemperature in degree_celsius [0.0 ..= 40.0] = 25.0,
    ) -> relative_density: Ratio in ratio
    formula "d = d₁ + 0.003·(t − t₀)/(10 °F), which is 0.00054/K"
    source "battery maker's technical FAQ, page seen"
    { reading + Ratio::new::<ratio>(DENSITY_PER_K * (temperature.value - reference.value)) }

    /// State of charge of a flooded battery from the relative density of its electrolyte, corrected to about 25 °C.
    ///
    /// A cell that differs from its neighbours by more than 0.03 is a finding of its own.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::state_of_charge_from_density, quantity::{parse, readable}};
    /// let result = state_of_charge_from_density(parse("1.19")?)?;
    /// assert_eq!(readable(result).to_string(), "0.5");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn state_of_charge_from_density(
        /// At about 25 °C, see [`relative_density_at_reference()`].
        density: Ratio in ratio [1.0 ..= 1.4],
    ) -> state_of_charge: Ratio in ratio
    formula "the straight line between rows: 1.12 is 0, 1.155 is 0.25, 1.19 is 0.5, 1.225 is 0.75, 1.265 is 1; \
        beyond the ends 0 and 1"
    source "battery council table, page seen; for electrolyte of 1.265 when full"
    { Ratio::new::<ratio>(line::reached(&FLOODED_DENSITY, density.value)) }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use proptest::prelude::*;

    fn v(volts: f64) -> ElectricPotential {
        ElectricPotential::new::<volt>(volts)
    }

    #[test]
    fn tables_rise_with_charge() {
        for chemistry in Chemistry::ALL {
            let table = rest_table(chemistry);
            for rows in [Some(table.voltage_V), table.density].into_iter().flatten() {
                assert_eq!((rows.value[0].0, rows.value[rows.value.len() - 1].0), (0.0, 1.0), "{chemistry}");
                assert!(rows.value.windows(2).all(|w| w[0].0 < w[1].0 && w[0].1 < w[1].1), "{chemistry}");
            }
            assert_eq!(table.density.is_some(), chemistry.is_lead_acid());
        }
    }

    proptest! {
        #[test]
        fn the_true_state_of_charge_is_never_left_out(
            place in 0usize..6, cells in 1u32..30, charge in 0.0..=1.0f64, error in -0.05..0.05f64,
        ) {
            let chemistry = Chemistry::ALL[place];
            let one = line::held(rest_table(chemistry).voltage_V.value, charge);
            // A meter that is wrong by no more than it says, and a cell that differs by no more than the spread.
            let reading = f64::from(cells) * (one + 0.99 * rest_table(chemistry).spread_V.value) + error;
            let found = state_of_charge(chemistry, cells, v(reading), v(0.05)).unwrap();
            prop_assert!(found.least.get() <= charge + 1e-9 && charge <= found.greatest.get() + 1e-9, "{found:?}");
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(voltage: u64, error: u64, cells: u32) {
            for chemistry in Chemistry::ALL {
                let read = state_of_charge(chemistry, cells, v(f64::from_bits(voltage)), v(f64::from_bits(error)));
                if let Ok(range) = read {
                    prop_assert!(range.least <= range.greatest);
                }
            }
        }
    }

    #[test]
    fn the_plateau_of_lfp_is_no_gauge_and_its_ends_are() {
        let estimate = |volts| state_of_charge(Chemistry::Lfp, 4, v(volts), v(0.02)).unwrap().estimate();
        for plateau in [13.1, 13.15, 13.2, 13.25, 13.3] {
            assert_eq!(estimate(plateau), None, "{plateau} V");
        }
        for (volts, least, most) in [(12.0, 0.0, 0.1), (12.7, 0.0, 0.2), (13.55, 0.9, 1.0)] {
            let found = estimate(volts).unwrap().get();
            assert!((least..=most).contains(&found), "{volts} V: {found}");
        }
    }

    #[test]
    fn a_reading_under_charge_and_a_dead_cell_are_named() {
        let told = |volts| state_of_charge(Chemistry::Flooded, 6, v(volts), v(0.02)).unwrap_err();
        assert!(matches!(told(14.2), Error::Contradiction { why, .. } if why.contains("let it rest")));
        assert!(matches!(told(10.3), Error::Contradiction { why, .. } if why.contains("a cell has failed")));
        assert!(state_of_charge(Chemistry::Flooded, 0, v(12.5), v(0.0)).is_err());
        assert!(state_of_charge(Chemistry::Flooded, 6, v(12.5), v(-0.1)).is_err());
    }

    #[test]
    fn density_and_charge_go_there_and_back() {
        for percent in 0..=100 {
            let charge = StateOfCharge::new(f64::from(percent) / 100.0).unwrap();
            let density = relative_density(Chemistry::Flooded, charge).unwrap();
            let back = state_of_charge_from_density(density).unwrap().value;
            assert!((back - charge.get()).abs() < 1e-12, "{percent} %");
        }
    }

    /// The faces print the formula: its figures are those of the tables.
    #[test]
    fn formulas_name_the_figures_of_the_tables() {
        let of = |name: &str| ENTRIES.iter().find(|e| e.name == name).unwrap().formula;
        for chemistry in [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel] {
            for (_, volts) in rest_table(chemistry).voltage_V.value {
                assert!(of("rest_voltage").contains(&std::format!("{volts}")), "{chemistry}: {volts}");
            }
        }
        for chemistry in Chemistry::ALL {
            let spread = std::format!("{} mV", 1e3 * rest_table(chemistry).spread_V.value);
            assert!(of("state_of_charge_from_voltage").contains(&spread), "{chemistry}: {spread}");
            let half = line::held(rest_table(chemistry).voltage_V.value, 0.5);
            assert!(of("rest_voltage").contains(&std::format!("{half}")), "{chemistry}: {half}");
        }
        for (charge, density) in FLOODED_DENSITY {
            assert!(of("state_of_charge_from_density").contains(&std::format!("{density} is {charge}")));
        }
    }
}
