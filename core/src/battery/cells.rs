//! Cells in series behind a nominal voltage.

use uom::si::electric_potential::volt;
use uom::si::ratio::ratio;

use super::Chemistry;
use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricPotential, Ratio};

/// Nominal voltages that are answered; beyond lies no low-voltage bank.
const MOST_V: f64 = 1500.0;
/// A label is printed to a tenth of a volt.
const LABEL_V: f64 = 0.05;

/// Number of cells in series behind a nominal voltage.
///
/// Lead-acid counts 2 V a cell, nickel-cadmium 1.2 V, NMC 3.6 to 3.7 V, and the fewer cells where both would do. LFP
/// counts 3.2 V, and the labels of the lead-acid bank that it replaces, 6 and the multiples of 12 V, count 4 cells
/// for 12 V: 24 V are 8 cells, 48 V are 16 and not 15.
///
/// # Errors
/// [`Error::OutOfRange`] unless the voltage lies above 0 and up to 1500 V; [`Error::Contradiction`] where no whole
/// number of cells has it, which names what is possible.
///
/// # Source
/// Usual designations, recalled.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, cells};
/// # use ampwright::quantity::parse;
/// assert_eq!(cells(Chemistry::Lfp, parse("51.2 V")?)?, 16);
/// assert_eq!(cells(Chemistry::Flooded, parse("24 V")?)?, 12);
/// assert!(cells(Chemistry::Nmc, parse("12 V")?).is_err());
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn cells(chemistry: Chemistry, nominal: ElectricPotential) -> Result<u32, Error> {
    let volts = nominal.get::<volt>();
    if !(volts > 0.0 && volts <= MOST_V) {
        return Err(Error::OutOfRange {
            name: "nominal voltage",
            value: volts,
            unit: "V",
            allowed: Allowed::AboveUpTo(0.0, MOST_V),
        });
    }
    let found = match chemistry {
        Chemistry::Flooded | Chemistry::Agm | Chemistry::Gel => whole(volts, 2.0, 2.0),
        Chemistry::NickelCadmium => whole(volts, 1.2, 1.2),
        Chemistry::Nmc => whole(volts, 3.6, 3.7),
        Chemistry::Lfp => lead_acid_label(volts).or_else(|| whole(volts, 3.2, 3.2)),
    };
    found.ok_or(Error::Contradiction {
        name: "nominal voltage",
        value: volts,
        unit: "V",
        why: match chemistry {
            Chemistry::Flooded | Chemistry::Agm | Chemistry::Gel => {
                "lead-acid cells are of 2 V: state a whole multiple, such as 6, 8, 12, 24 or 48 V"
            }
            Chemistry::NickelCadmium => {
                "nickel-cadmium cells are of 1.2 V: 5 make 6 V, 10 make 12 V, 19 make 22.8 V, 20 make 24 V, 40 make 48 V"
            }
            Chemistry::Nmc => {
                "NMC cells are of 3.6 to 3.7 V: 3 make 10.8 to 11.1 V, 4 make 14.4 to 14.8 V, 7 make 25.2 to 25.9 V, \
                 10 make 36 to 37 V, 13 make 46.8 to 48.1 V, 14 make 50.4 to 51.8 V"
            }
            Chemistry::Lfp => {
                "LFP cells are of 3.2 V: 4 make 12.8 V (12 V), 8 make 25.6 V (24 V), 16 make 51.2 V (48 V)"
            }
        },
    })
}

/// Cells of LFP behind the label of a lead-acid bank.
fn lead_acid_label(volts: f64) -> Option<u32> {
    if volts == 6.0 {
        return Some(2);
    }
    whole(volts, 12.0, 12.0).filter(|_| volts % 12.0 == 0.0).map(|blocks| 4 * blocks)
}

/// The least whole number of cells that makes the voltage, each between two nominal voltages.
fn whole(volts: f64, least: f64, most: f64) -> Option<u32> {
    let count = libm::ceil((volts - LABEL_V) / most);
    let fits = count >= 1.0 && (count * least - LABEL_V..=count * most + LABEL_V).contains(&volts);
    // At most 1500 V of 1.2 V.
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)]
    fits.then_some(count as u32)
}

calculations! {
    /// Cells in series that a system's greatest voltage admits, and what its least voltage leaves each.
    ///
    /// The fewest volts that a cell may be discharged to must not be above the second.
    ///
    /// # Example
    /// Equipment for 21 to 32 V, flooded cells equalised at 2.6 V:
    /// ```
    /// use ampwright::{battery::series_cells, quantity::{parse, readable}};
    /// let result = series_cells(parse("32 V")?, parse("2.6 V")?, parse("21 V")?)?;
    /// assert_eq!(readable(result.cells).to_string(), "12");
    /// assert_eq!(readable(result.end_voltage).to_string(), "1.75 V");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn series_cells(
        /// Greatest that the equipment bears.
        greatest_voltage: ElectricPotential in volt [> 0.0],
        /// Greatest to which a cell is charged, cold or equalising.
        charge_voltage: ElectricPotential in volt [> 0.0],
        /// Least at which the equipment works.
        least_voltage: ElectricPotential in volt [> 0.0],
    ) => SeriesCells {
        /// Whole number of cells.
        cells: Ratio in ratio,
        /// Of each cell at the least voltage.
        end_voltage: ElectricPotential in volt,
    }
    where (charge_voltage <= greatest_voltage) charge_voltage in volt: "a single cell is charged above the greatest \
        voltage"
    where (least_voltage < greatest_voltage) least_voltage in volt: "it must be below the greatest voltage"
    formula "n = U_max/U_charge, rounded down to the whole; U_end = U_min/n"
    source "IEEE Std 485 and 1013, number of cells, recalled"
    {
        // A quotient that is whole but for rounding counts as whole.
        let cells = libm::floor((greatest_voltage / charge_voltage).value * (1.0 + 1e-12));
        SeriesCells { cells: Ratio::new::<ratio>(cells), end_voltage: least_voltage / cells }
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use super::*;

    fn count(chemistry: Chemistry, volts: f64) -> Option<u32> {
        cells(chemistry, ElectricPotential::new::<volt>(volts)).ok()
    }

    #[test]
    fn labels_of_the_trade() {
        for (volts, lead, lfp, nickel) in [
            (2.0, Some(1), None, None),
            (3.2, None, Some(1), None),
            (6.0, Some(3), Some(2), Some(5)),
            (6.4, None, Some(2), None),
            (12.0, Some(6), Some(4), Some(10)),
            (12.8, None, Some(4), None),
            (24.0, Some(12), Some(8), Some(20)),
            (25.6, None, Some(8), None),
            (36.0, Some(18), Some(12), Some(30)),
            (48.0, Some(24), Some(16), Some(40)),
            (51.2, None, Some(16), None),
            (22.8, None, None, Some(19)),
            (13.0, None, None, None),
        ] {
            for chemistry in [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel] {
                assert_eq!(count(chemistry, volts), lead, "{volts} V");
            }
            assert_eq!(count(Chemistry::Lfp, volts), lfp, "{volts} V");
            assert_eq!(count(Chemistry::NickelCadmium, volts), nickel, "{volts} V");
        }
    }

    #[test]
    fn nmc_takes_either_nominal_voltage_and_nothing_between_counts() {
        for (volts, cells) in [
            (3.6, Some(1)),
            (3.7, Some(1)),
            (11.1, Some(3)),
            (14.4, Some(4)),
            (14.8, Some(4)),
            (25.9, Some(7)),
            (36.0, Some(10)),
            (48.0, Some(13)),
            (51.8, Some(14)),
            (12.0, None),
            (24.0, None),
        ] {
            assert_eq!(count(Chemistry::Nmc, volts), cells, "{volts} V");
        }
    }

    #[test]
    fn the_error_names_what_is_possible() {
        let error = cells(Chemistry::Nmc, ElectricPotential::new::<volt>(12.0)).unwrap_err().to_string();
        assert!(
            error.starts_with("nominal voltage is 12 V; NMC cells are of 3.6 to 3.7 V: 3 make 10.8"),
            "{error}"
        );
        for odd in [0.0, -12.0, f64::NAN, f64::INFINITY, 1e9, 0.01] {
            for chemistry in Chemistry::ALL {
                assert_eq!(count(chemistry, odd), None, "{chemistry} {odd}");
            }
        }
    }

    #[test]
    fn a_nominal_voltage_times_its_cells_comes_back() {
        for chemistry in Chemistry::ALL {
            let one = chemistry.nominal_cell().get::<volt>();
            // From 36 cells of NMC on, either nominal voltage may be meant: the fewer cells are taken.
            let most = if chemistry == Chemistry::Nmc { 35 } else { 100 };
            for n in 1..=most {
                let volts = one * f64::from(n);
                // 15 cells of LFP are 48 V, but the label means 16.
                let expected = match lead_acid_label(volts) {
                    Some(label) if chemistry == Chemistry::Lfp => label,
                    _ => n,
                };
                assert_eq!(count(chemistry, volts), Some(expected), "{chemistry}, {n}");
            }
        }
    }
}
