//! Units in series and strings in parallel that make a bank.

use uom::si::electric_charge::ampere_hour;

use super::{Chemistry, cells};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCharge, ElectricPotential};

/// A unit that a bank is made of: a cell, a block or a pack.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Unit {
    /// Chemistry.
    pub chemistry: Chemistry,
    /// Its nominal voltage.
    pub nominal: ElectricPotential,
    /// Its capacity, at the rate at which it is used.
    pub capacity: ElectricCharge,
    /// Most units in a string that its maker admits.
    pub max_series: u32,
    /// Most strings in parallel that its maker admits; three or four at most is common practice for lead-acid.
    pub max_parallel: u32,
}

/// Units in series, strings in parallel.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Layout {
    /// Units in each string.
    pub series: u32,
    /// Strings in parallel.
    pub strings: u32,
    /// Cells in each string.
    pub cells: u32,
    /// Nominal voltage of the bank by its units.
    pub nominal: ElectricPotential,
    /// Capacity of the bank.
    pub capacity: ElectricCharge,
}

impl Layout {
    /// Units in all.
    pub const fn units(&self) -> u32 {
        self.series.saturating_mul(self.strings)
    }
}

/// The fewest units that make a bank of a nominal voltage and at least a capacity.
///
/// # Errors
/// [`Error::OutOfRange`] where a voltage or capacity is not above nought and finite, or a limit is nought;
/// [`Error::Contradiction`] where no whole number of cells makes one of the voltages, no whole number of units makes the bank,
/// or more units in series or in parallel would be needed than their maker admits.
///
/// # Example
/// ```
/// use ampwright::battery::{Chemistry, Unit, layout};
/// use ampwright::quantity::parse;
/// let golf_cart = Unit {
///     chemistry: Chemistry::Flooded,
///     nominal: parse("6 V")?,
///     capacity: parse("225 Ah")?,
///     max_series: 8,
///     max_parallel: 3,
/// };
/// let bank = layout(&golf_cart, parse("24 V")?, parse("600 Ah")?)?;
/// assert_eq!((bank.series, bank.strings, bank.units()), (4, 3, 12));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn layout(unit: &Unit, wanted: ElectricPotential, capacity: ElectricCharge) -> Result<Layout, Error> {
    let bank_cells = cells(unit.chemistry, wanted)?;
    let unit_cells = cells(unit.chemistry, unit.nominal)?;
    let asked = checked_capacity("capacity", capacity)?;
    let one = checked_capacity("capacity of a unit", unit.capacity)?;
    if !bank_cells.is_multiple_of(unit_cells) {
        return Err(Error::Contradiction {
            name: "nominal voltage",
            value: wanted.value,
            unit: "V",
            why: "no whole number of these units makes it: take units whose cells divide those of the bank",
        });
    }
    // A sum of units that falls short of the capacity by rounding alone is enough.
    let strings = libm::ceil(asked / one * (1.0 - 1e-12)).max(1.0);
    if strings > f64::from(unit.max_parallel) {
        return Err(Error::Contradiction {
            name: "capacity",
            value: asked,
            unit: "Ah",
            why: "more strings in parallel would be needed than these units admit: take units of greater capacity",
        });
    }
    // No more than `max_parallel`.
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)]
    laid_out(unit, bank_cells / unit_cells, strings as u32)
}

/// A bank of so many units in series and strings in parallel, as it stands.
///
/// # Errors
/// As [`layout`], and [`Error::OutOfRange`] where there are no units.
///
/// # Example
/// Five units of 6 V make 30 V, which is no 24 V bank:
/// ```
/// use ampwright::battery::{Chemistry, Unit, laid_out};
/// use ampwright::quantity::{parse, readable};
/// # let unit = Unit { chemistry: Chemistry::Flooded, nominal: parse("6 V")?, capacity: parse("225 Ah")?, max_series: 8, max_parallel: 3 };
/// let bank = laid_out(&unit, 5, 1)?;
/// assert_eq!(readable(bank.nominal).to_string(), "30 V");
/// assert!(bank.serves(unit.chemistry, parse("24 V")?).is_err());
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn laid_out(unit: &Unit, series: u32, strings: u32) -> Result<Layout, Error> {
    let unit_cells = cells(unit.chemistry, unit.nominal)?;
    checked_capacity("capacity of a unit", unit.capacity)?;
    for (name, count, most) in
        [("units in series", series, unit.max_series), ("strings in parallel", strings, unit.max_parallel)]
    {
        if count == 0 || count > most {
            return Err(Error::OutOfRange {
                name,
                value: f64::from(count),
                unit: "",
                allowed: Allowed::Between(1.0, f64::from(most)),
            });
        }
    }
    Ok(Layout {
        series,
        strings,
        cells: unit_cells.saturating_mul(series),
        nominal: unit.nominal * f64::from(series),
        capacity: unit.capacity * f64::from(strings),
    })
}

impl Layout {
    /// Whether the bank is one of a nominal voltage.
    ///
    /// # Errors
    /// [`Error::Contradiction`] where its strings have more or fewer cells than the voltage asks for, or none has it.
    pub fn serves(&self, chemistry: Chemistry, nominal: ElectricPotential) -> Result<(), Error> {
        let needed = cells(chemistry, nominal)?;
        if self.cells == needed {
            return Ok(());
        }
        Err(Error::Contradiction {
            name: "nominal voltage of the bank",
            value: self.nominal.value,
            unit: "V",
            why: if self.cells > needed {
                "its strings have more cells than that of the system asks for: take units out"
            } else {
                "its strings have fewer cells than that of the system asks for: add units"
            },
        })
    }
}

fn checked_capacity(name: &'static str, capacity: ElectricCharge) -> Result<f64, Error> {
    let value = capacity.get::<ampere_hour>();
    if value > 0.0 && value.is_finite() {
        return Ok(value);
    }
    Err(Error::OutOfRange { name, value, unit: "Ah", allowed: Allowed::Above(0.0) })
}
