//! Charge voltages: absorption, float and equalisation over temperature (R11).
//!
//! What stands here is usual for a chemistry; the maker's set points govern where they are known. Where loads are
//! dropped belongs to the file `disconnect`.

use uom::si::electric_potential::volt;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::Chemistry;
use super::charge::checked_celsius;
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{
    ElectricPotential, Ratio, ThermodynamicTemperature, VoltagePerTemperature, volts_per_kelvin,
};

/// Set points of a cell at 25 °C, volts, each as (low, high).
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct CellSetPoints {
    /// Absorption: held until the current has fallen.
    pub absorption_V: (f64, f64),
    /// Float, where the chemistry bears being held full.
    pub float_V: Option<(f64, f64)>,
    /// Equalisation, where the chemistry takes any.
    pub equalise_V: Option<(f64, f64)>,
    /// Source of the voltages.
    pub citation: Citation,
    /// Compensation, volts a kelvin: 0 where none is wanted.
    pub compensation_V_per_K: f64,
    /// Temperatures between which compensation runs, °C; beyond them the voltage stands still.
    pub compensated_degC: (f64, f64),
    /// Source of the compensation.
    pub compensation_citation: Citation,
}

const HANDBOOK: Citation = Citation::new("common handbook values", "lead-acid charge voltages", Seen::Page);
const SHEETS: Citation = Citation::new("typical cell data sheets", "charge voltage", Seen::Recalled);
const NICKEL: Citation = Citation::new("common handbook values", "vented nickel-cadmium", Seen::Recalled);
/// 0.028 V per cell per 10 °F, which is 5.04 mV/K, in one maker's FAQ; 5.0 mV/K from a maker of gel batteries.
/// Handbooks give 3 to 5 mV/K.
const LEAD_ACID_COMPENSATION: Citation =
    Citation::new("two battery makers' figures", "5 mV/K a cell", Seen::Page);
const UNCOMPENSATED: Citation = Citation::new("typical cell data sheets", "no compensation", Seen::Recalled);

/// Temperatures between which chargers usually compensate: common practice, no source.
#[allow(non_upper_case_globals)]
const RUNS_degC: (f64, f64) = (-20.0, 50.0);

const fn lead_acid(absorption: (f64, f64), float: (f64, f64), equalise: (f64, f64)) -> CellSetPoints {
    CellSetPoints {
        absorption_V: absorption,
        float_V: Some(float),
        equalise_V: Some(equalise),
        citation: HANDBOOK,
        compensation_V_per_K: -0.005,
        compensated_degC: RUNS_degC,
        compensation_citation: LEAD_ACID_COMPENSATION,
    }
}

const fn lithium(absorption: (f64, f64), float: Option<(f64, f64)>) -> CellSetPoints {
    CellSetPoints {
        absorption_V: absorption,
        float_V: float,
        equalise_V: None,
        citation: SHEETS,
        compensation_V_per_K: 0.0,
        compensated_degC: RUNS_degC,
        compensation_citation: UNCOMPENSATED,
    }
}

/// Usual set points of a cell of a chemistry at 25 °C.
///
/// Lead-acid equals `lead-acid-charge-voltages` in `tests/reference/battery.toml` (tested there); lithium and
/// nickel-cadmium are recalled. Gel's equalisation is no more than its absorption: it takes none above it.
///
/// ```
/// # use ampwright::battery::{Chemistry, cell_set_points};
/// assert_eq!(cell_set_points(Chemistry::Gel).absorption_V, (2.35, 2.4));
/// assert_eq!(cell_set_points(Chemistry::Lfp).equalise_V, None);
/// ```
pub const fn cell_set_points(chemistry: Chemistry) -> CellSetPoints {
    match chemistry {
        Chemistry::Flooded => lead_acid((2.4, 2.47), (2.2, 2.27), (2.5, 2.67)),
        Chemistry::Agm => lead_acid((2.38, 2.45), (2.25, 2.3), (2.45, 2.5)),
        Chemistry::Gel => lead_acid((2.35, 2.4), (2.25, 2.3), (2.4, 2.4)),
        Chemistry::Lfp => lithium((3.45, 3.6), Some((3.3, 3.4))),
        // Held full it ages: charge ends, and begins again when it has fallen.
        Chemistry::Nmc => lithium((4.05, 4.2), None),
        Chemistry::NickelCadmium => CellSetPoints {
            absorption_V: (1.45, 1.6),
            float_V: Some((1.4, 1.45)),
            equalise_V: Some((1.55, 1.7)),
            citation: NICKEL,
            compensation_V_per_K: -0.003,
            compensated_degC: RUNS_degC,
            compensation_citation: NICKEL,
        },
    }
}

/// Two voltages between which a set point of a bank usually lies.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct VoltageRange {
    /// Lower end.
    pub low: ElectricPotential,
    /// Upper end.
    pub high: ElectricPotential,
}

/// Where a stated voltage stands to a range.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Standing {
    /// Below its lower end.
    Below,
    /// In it, its ends included.
    Within,
    /// Above its upper end.
    Above,
    /// Not a number: not judged.
    NotANumber,
}

impl VoltageRange {
    /// The middle: what is set where nothing else is known.
    pub fn usual(&self) -> ElectricPotential {
        0.5 * (self.low + self.high)
    }

    /// Where a stated voltage stands.
    pub fn standing(&self, stated: ElectricPotential) -> Standing {
        if stated < self.low {
            Standing::Below
        } else if stated > self.high {
            Standing::Above
        } else if stated.value.is_nan() {
            Standing::NotANumber
        } else {
            Standing::Within
        }
    }
}

/// Set points of a bank at a temperature.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SetPoints {
    /// Absorption.
    pub absorption: VoltageRange,
    /// Float, where the chemistry bears being held full.
    pub float: Option<VoltageRange>,
    /// Equalisation, where the chemistry takes any.
    pub equalise: Option<VoltageRange>,
    /// Source of the voltages.
    pub citation: Citation,
    /// Source of the compensation.
    pub compensation_citation: Citation,
}

impl SetPoints {
    /// The highest voltage that charging reaches: every part that stays connected must bear it (R3).
    pub fn greatest(&self) -> ElectricPotential {
        let equalise = self.equalise.map_or(self.absorption.high, |range| range.high);
        if equalise > self.absorption.high { equalise } else { self.absorption.high }
    }
}

/// Usual set points of a bank, compensated for its temperature.
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `cells` | | 1 or more; in series |
/// | `temperature` | °C | −60 … 100; of the cells |
///
/// Beyond the temperatures between which compensation runs, the voltages stand still.
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or out of range, or there are no cells.
///
/// # Source
/// As [`cell_set_points`].
///
/// # Example
/// 24 flooded cells at 0 °C are equalised at up to 67.1 V; "48 V" parts that end at 60 V must be switched off before:
/// ```
/// # use ampwright::battery::{Chemistry, set_points};
/// # use ampwright::quantity::{parse, readable};
/// let points = set_points(Chemistry::Flooded, 24, parse("0 degC")?)?;
/// assert_eq!(readable(points.greatest()).to_string(), "67.1 V");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn set_points(
    chemistry: Chemistry,
    cells: u32,
    temperature: ThermodynamicTemperature,
) -> Result<SetPoints, Error> {
    let celsius = checked_celsius(temperature)?;
    let count = checked_cells(cells)?;
    let cell = cell_set_points(chemistry);
    let range = |(low, high)| VoltageRange {
        low: volts(count * compensated(&cell, low, celsius)),
        high: volts(count * compensated(&cell, high, celsius)),
    };
    Ok(SetPoints {
        absorption: range(cell.absorption_V),
        float: cell.float_V.map(range),
        equalise: cell.equalise_V.map(range),
        citation: cell.citation,
        compensation_citation: cell.compensation_citation,
    })
}

/// A cell's voltage at a temperature; NaN for NaN.
fn compensated(cell: &CellSetPoints, at_25: f64, celsius: f64) -> f64 {
    let (least, most) = cell.compensated_degC;
    // Not `clamp`, which panics where the ends are NaN.
    at_25 + cell.compensation_V_per_K * (celsius.max(least).min(most) - 25.0)
}

fn middle((low, high): (f64, f64)) -> f64 {
    0.5 * (low + high)
}

fn volts(value: f64) -> ElectricPotential {
    ElectricPotential::new::<volt>(value)
}

pub(super) fn checked_cells(cells: u32) -> Result<f64, Error> {
    if cells == 0 {
        return Err(Error::OutOfRange {
            name: "cells",
            value: 0.0,
            unit: "",
            allowed: Allowed::AtLeast(1.0),
        });
    }
    Ok(f64::from(cells))
}

const NO_FLOAT: Error = Error::NotTabulated {
    what: "the float voltage of an NMC bank",
    table: SHEETS,
    remedy: "end the charge after absorption, and begin again when the voltage has fallen",
};
const NO_EQUALISATION: Error = Error::NotTabulated {
    what: "the equalising voltage of a lithium bank",
    table: SHEETS,
    remedy: "it takes none: switch equalisation off",
};

calculations! {
    /// Absorption voltage of a bank at a cell temperature, the middle of what is usual.
    ///
    /// The range is that of [`set_points`]; the maker's figure governs where it is known.
    ///
    /// # Example
    /// Twelve flooded cells in a cold shed:
    /// ```
    /// use ampwright::{battery::{Chemistry, absorption_voltage}, quantity::{parse, readable}};
    /// let result = absorption_voltage(Chemistry::Flooded, parse("12")?, parse("5 degC")?)?;
    /// assert_eq!(readable(result).to_string(), "30.4 V");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn absorption_voltage(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// In series.
        cells: Ratio in ratio [1.0 ..= 1000.0],
        /// Of the cells, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) -> voltage: ElectricPotential in volt
    formula "U = n·(U₂₅ + k·(t − 25 °C)), t held between −20 and 50 °C; U₂₅ a cell and k: flooded 2.435 V, AGM 2.415 \
        V, gel 2.375 V, each −5 mV/K; LFP 3.525 V, NMC 4.125 V, both 0; nickel-cadmium 1.525 V, −3 mV/K"
    source "lead-acid: the middle of usual handbook ranges, and two makers' compensation; the rest recalled"
    {
        let cell = cell_set_points(chemistry);
        cells.value * volts(compensated(&cell, middle(cell.absorption_V), temperature.get::<degree_celsius>()))
    }

    /// Float voltage of a bank at a cell temperature, the middle of what is usual.
    ///
    /// # Example
    /// Six cells of gel at 25 °C:
    /// ```
    /// use ampwright::{battery::{Chemistry, float_voltage}, quantity::{parse, readable}};
    /// let result = float_voltage(Chemistry::Gel, parse("6")?, parse("25 degC")?)?;
    /// assert_eq!(readable(result).to_string(), "13.65 V");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn float_voltage(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// In series.
        cells: Ratio in ratio [1.0 ..= 1000.0],
        /// Of the cells, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) -> voltage: ElectricPotential in volt
    formula "U = n·(U₂₅ + k·(t − 25 °C)), t held between −20 and 50 °C; U₂₅ a cell and k: flooded 2.235 V, AGM and \
        gel 2.275 V, each −5 mV/K; LFP 3.35 V, 0; nickel-cadmium 1.425 V, −3 mV/K"
    source "lead-acid: the middle of usual handbook ranges, and two makers' compensation; the rest recalled"
    fallible "the chemistry is not held at a float voltage: NMC"
    {
        let cell = cell_set_points(chemistry);
        let at_25 = middle(cell.float_V.ok_or(NO_FLOAT)?);
        Ok(cells.value * volts(compensated(&cell, at_25, temperature.get::<degree_celsius>())))
    }

    /// Equalising voltage of a bank at a cell temperature, the middle of what is usual.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{Chemistry, equalising_voltage}, quantity::{parse, readable}};
    /// let result = equalising_voltage(Chemistry::Flooded, parse("24")?, parse("25 degC")?)?;
    /// assert_eq!(readable(result).to_string(), "62 V");
    /// assert!(equalising_voltage(Chemistry::Lfp, parse("16")?, parse("25 degC")?).is_err());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn equalising_voltage(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// In series.
        cells: Ratio in ratio [1.0 ..= 1000.0],
        /// Of the cells, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) -> voltage: ElectricPotential in volt
    formula "U = n·(U₂₅ + k·(t − 25 °C)), t held between −20 and 50 °C; U₂₅ a cell and k: flooded 2.585 V, AGM 2.475 \
        V, gel 2.4 V (its absorption: no more), each −5 mV/K; nickel-cadmium 1.625 V, −3 mV/K"
    source "lead-acid: the middle of usual handbook ranges, and two makers' compensation; the rest recalled"
    fallible "the chemistry takes no equalisation: lithium"
    {
        let cell = cell_set_points(chemistry);
        let at_25 = middle(cell.equalise_V.ok_or(NO_EQUALISATION)?);
        Ok(cells.value * volts(compensated(&cell, at_25, temperature.get::<degree_celsius>())))
    }

    /// A charge voltage, stated at one temperature, at another.
    ///
    /// Without ends: hold the temperature between those at which the charger compensates.
    ///
    /// # Example
    /// 14.6 V at 80 °F for six flooded cells, of 5.04 mV/K each, are more at 70 °F:
    /// ```
    /// use ampwright::{battery::compensated_voltage, quantity::{parse, readable}};
    /// let (stated, coefficient) = (parse("14.6 V")?, parse("-5.04 mV/K")?);
    /// let result = compensated_voltage(stated, parse("6")?, coefficient, parse("80 degF")?, parse("70 degF")?)?;
    /// assert_eq!(readable(result).to_string(), "14.77 V");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn compensated_voltage(
        /// Of the bank, at the reference temperature.
        stated: ElectricPotential in volt [> 0.0],
        /// In series.
        cells: Ratio in ratio [1.0 ..= 1000.0],
        /// Of a cell; negative where the voltage falls with heat.
        coefficient: VoltagePerTemperature in volt_per_kelvin [-0.02 ..= 0.02] = -0.005,
        /// At which the voltage is stated.
        reference: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0] = 25.0,
        /// Of the cells.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) -> voltage: ElectricPotential in volt
    formula "U = U₀ + n·k·(t − t₀)"
    source "definition of a temperature coefficient"
    {
        let rise = temperature.value - reference.value;
        stated + volts(cells.value * coefficient.value * rise)
    }
}

/// Compensation of a chemistry's charge voltages, a cell.
///
/// ```
/// # use ampwright::battery::{Chemistry, compensation};
/// # use ampwright::quantity::readable;
/// assert_eq!(readable(compensation(Chemistry::Agm)).to_string(), "-5 mV/K");
/// ```
pub const fn compensation(chemistry: Chemistry) -> VoltagePerTemperature {
    volts_per_kelvin(cell_set_points(chemistry).compensation_V_per_K)
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use crate::battery::{cell_voltages, fault_voltage};

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }

    #[test]
    fn float_lies_below_absorption_and_absorption_below_equalisation() {
        for chemistry in Chemistry::ALL {
            let points = set_points(chemistry, 4, at(25.0)).unwrap();
            assert!(points.absorption.low < points.absorption.high, "{chemistry}");
            if let Some(float) = points.float {
                assert!(float.low < float.high && float.high <= points.absorption.high, "{chemistry}");
                assert!(float.usual() < points.absorption.usual());
            }
            if let Some(equalise) = points.equalise {
                assert!(equalise.low <= equalise.high && equalise.usual() > points.absorption.usual());
            }
            // Charging lies above rest, and above the least that makes a charge plausible.
            let cell = cell_set_points(chemistry);
            assert!(cell.absorption_V.0 >= cell_voltages(chemistry).charge_V, "{chemistry}");
            assert!(cell.absorption_V.1 > fault_voltage(chemistry).least_V, "{chemistry}");
        }
    }

    #[test]
    fn compensation_runs_with_the_cold_and_stands_still_at_its_ends() {
        for chemistry in Chemistry::ALL {
            let voltage = |celsius| set_points(chemistry, 6, at(celsius)).unwrap().greatest().get::<volt>();
            assert!(voltage(0.0) >= voltage(25.0) && voltage(25.0) >= voltage(40.0), "{chemistry}");
            assert_eq!((voltage(-20.0), voltage(50.0)), (voltage(-45.0), voltage(90.0)), "{chemistry}");
            let steps = 6.0 * cell_set_points(chemistry).compensation_V_per_K;
            assert!((voltage(35.0) - voltage(25.0) - 10.0 * steps).abs() < 1e-12, "{chemistry}");
        }
    }

    #[test]
    fn a_stated_voltage_is_judged_and_nan_never_passes() {
        let range = set_points(Chemistry::Flooded, 1, at(25.0)).unwrap().absorption;
        let standing = |v: f64| range.standing(ElectricPotential::new::<volt>(v));
        assert_eq!(
            [2.39, 2.4, 2.45, 2.47, 2.48].map(standing),
            [Standing::Below, Standing::Within, Standing::Within, Standing::Within, Standing::Above]
        );
        assert_eq!(standing(f64::NAN), Standing::NotANumber);
        assert_eq!(
            (standing(f64::INFINITY), standing(f64::NEG_INFINITY)),
            (Standing::Above, Standing::Below)
        );
    }

    #[test]
    fn the_entries_are_the_middle_of_the_ranges() {
        for chemistry in Chemistry::ALL {
            for celsius in [-30.0, 0.0, 25.0, 60.0] {
                let points = set_points(chemistry, 12, at(celsius)).unwrap();
                let twelve = Ratio::new::<uom::si::ratio::ratio>(12.0);
                let close = |a: ElectricPotential, b: ElectricPotential| assert!((a - b).value.abs() < 1e-12);
                close(absorption_voltage(chemistry, twelve, at(celsius)).unwrap(), points.absorption.usual());
                match points.float {
                    Some(float) => {
                        close(float_voltage(chemistry, twelve, at(celsius)).unwrap(), float.usual());
                    }
                    None => assert!(float_voltage(chemistry, twelve, at(celsius)).is_err()),
                }
                match points.equalise {
                    Some(range) => {
                        close(equalising_voltage(chemistry, twelve, at(celsius)).unwrap(), range.usual());
                    }
                    None => assert!(equalising_voltage(chemistry, twelve, at(celsius)).is_err()),
                }
            }
        }
    }

    #[test]
    fn no_cells_and_no_temperature_are_refused() {
        assert!(set_points(Chemistry::Agm, 0, at(25.0)).is_err());
        for odd in [f64::NAN, f64::INFINITY, -61.0, 101.0] {
            assert!(set_points(Chemistry::Agm, 6, at(odd)).is_err());
        }
    }

    /// The faces print the formula: its figures are those of the table.
    #[test]
    fn formulas_name_the_figures_of_the_table() {
        let named = |entry: &str, volts: f64| {
            let formula = ENTRIES.iter().find(|e| e.name == entry).unwrap().formula;
            assert!(formula.contains(&std::format!("{} V", (1e4 * volts).round() / 1e4)), "{entry}: {volts}");
        };
        for chemistry in Chemistry::ALL {
            let cell = cell_set_points(chemistry);
            named("absorption_voltage", middle(cell.absorption_V));
            if let Some(float) = cell.float_V {
                named("float_voltage", middle(float));
            }
            if let Some(equalise) = cell.equalise_V {
                named("equalising_voltage", middle(equalise));
            }
        }
    }
}
