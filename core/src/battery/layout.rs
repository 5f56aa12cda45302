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
/// [`Error::Contradiction`] where no whole number of cells makes one of the voltages, no whole number of units makes
/// the bank, or more units in series or in parallel would be needed than their maker admits.
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
/// # let (nominal, capacity) = (parse("6 V")?, parse("225 Ah")?);
/// # let unit = Unit { chemistry: Chemistry::Flooded, nominal, capacity, max_series: 8, max_parallel: 3 };
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

#[cfg(test)]
mod tests {
    use super::*;
    use uom::si::electric_potential::volt;

    fn v(value: f64) -> ElectricPotential {
        ElectricPotential::new::<volt>(value)
    }
    fn ah(value: f64) -> ElectricCharge {
        ElectricCharge::new::<ampere_hour>(value)
    }
    fn unit(chemistry: Chemistry, volts: f64, capacity: f64) -> Unit {
        Unit { chemistry, nominal: v(volts), capacity: ah(capacity), max_series: 8, max_parallel: 4 }
    }
    fn found(unit: Unit, volts: f64, capacity: f64) -> Result<(u32, u32), Error> {
        layout(&unit, v(volts), ah(capacity)).map(|bank| (bank.series, bank.strings))
    }

    #[test]
    fn units_that_divide_the_bank() {
        let golf = unit(Chemistry::Flooded, 6.0, 225.0);
        assert_eq!(found(golf, 24.0, 675.0), Ok((4, 3)));
        assert_eq!(found(golf, 24.0, 675.1), Ok((4, 4)));
        assert_eq!(found(golf, 6.0, 1.0), Ok((1, 1)));
        let pack = unit(Chemistry::Lfp, 12.8, 100.0);
        assert_eq!(found(pack, 24.0, 200.0), Ok((2, 2)));
        assert_eq!(found(pack, 51.2, 100.0), Ok((4, 1)));
        assert_eq!(found(unit(Chemistry::Lfp, 3.2, 280.0), 24.0, 280.0), Ok((8, 1)));
        assert_eq!(found(unit(Chemistry::NickelCadmium, 1.2, 150.0), 6.0, 150.0), Ok((5, 1)));
    }

    #[test]
    fn a_sum_of_parts_that_rounds_below_is_enough() {
        assert_eq!(found(unit(Chemistry::Agm, 12.0, 0.1), 12.0, 0.1 + 0.2), Ok((1, 3)));
    }

    #[test]
    fn what_does_not_divide_or_is_too_many_is_refused() {
        // Five units of 6 V would be 30 V; no whole number makes 20 V.
        assert_eq!(
            found(unit(Chemistry::Flooded, 6.0, 225.0), 20.0, 225.0).unwrap_err().slug(),
            "contradiction"
        );
        assert_eq!(
            found(unit(Chemistry::Flooded, 8.0, 170.0), 12.0, 170.0).unwrap_err().slug(),
            "contradiction"
        );
        assert_eq!(
            found(unit(Chemistry::Lfp, 25.6, 100.0), 36.0, 100.0).unwrap_err().slug(),
            "contradiction"
        );
        assert_eq!(found(unit(Chemistry::Nmc, 3.7, 50.0), 12.0, 50.0).unwrap_err().slug(), "contradiction");
        // A pack that admits eight in series and four in parallel.
        assert_eq!(found(unit(Chemistry::Agm, 2.0, 500.0), 24.0, 500.0).unwrap_err().slug(), "out-of-range");
        assert_eq!(
            found(unit(Chemistry::Agm, 12.0, 100.0), 12.0, 401.0).unwrap_err().slug(),
            "contradiction"
        );
        let none = Unit { max_series: 0, ..unit(Chemistry::Agm, 12.0, 100.0) };
        assert_eq!(found(none, 12.0, 100.0).unwrap_err().slug(), "out-of-range");
        let golf = unit(Chemistry::Flooded, 6.0, 225.0);
        assert!(laid_out(&golf, 5, 1).unwrap().serves(Chemistry::Flooded, v(24.0)).is_err());
        assert!(laid_out(&golf, 3, 1).unwrap().serves(Chemistry::Flooded, v(24.0)).is_err());
        assert_eq!(laid_out(&golf, 4, 2).unwrap().serves(Chemistry::Flooded, v(24.0)), Ok(()));
    }

    proptest::proptest! {
        #[test]
        fn a_layout_holds_what_was_asked_and_one_string_fewer_would_not(
            place in 0usize..4, one in 1.0..1000.0f64, asked in 1.0..4000.0f64,
        ) {
            let volts = [2.0, 4.0, 6.0, 12.0][place];
            if let Ok(bank) = layout(&unit(Chemistry::Gel, volts, one), v(12.0), ah(asked)) {
                proptest::prop_assert!(bank.capacity.get::<ampere_hour>() >= asked * (1.0 - 1e-9));
                proptest::prop_assert!(one * f64::from(bank.strings - 1) < asked);
                proptest::prop_assert!((bank.nominal.get::<volt>() - 12.0).abs() < 1e-12 && bank.cells == 6);
                proptest::prop_assert!(bank.serves(Chemistry::Gel, v(12.0)).is_ok());
            } else {
                proptest::prop_assert!(asked > 3.999 * one);
            }
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(bits: [u64; 4], series: u32, strings: u32) {
            let [a, b, c, d] = bits.map(f64::from_bits);
            for chemistry in Chemistry::ALL {
                let odd = Unit { max_series: series, max_parallel: strings, ..unit(chemistry, a, b) };
                let _ = layout(&odd, v(c), ah(d));
                let _ = layout(&Unit { nominal: v(12.0), ..odd }, v(12.0), ah(d));
                let _ = laid_out(&odd, series, strings);
            }
        }
    }
}
