//! When the electrolyte of a bank freezes, and the charge that keeps it from freezing (R13).

use uom::si::ratio::ratio;
use uom::si::temperature_interval::kelvin;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::charge::checked_celsius;
use super::{Chemistry, line, rest_table};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{Ratio, StateOfCharge, TemperatureInterval, ThermodynamicTemperature};

/// Source of the freezing points of sulphuric acid.
pub const FREEZING_ACID: Citation = Citation::new(
    "storage battery handbooks",
    "freezing points of sulphuric acid by density",
    Seen::Recalled,
);
/// Source of the freezing point of potassium hydroxide at the density of ordinary cells, about 1.20.
pub const FREEZING_LYE: Citation =
    Citation::new("common handbook values", "freezing point of potassium hydroxide, about", Seen::Recalled);

/// Relative density at about 25 °C, and by how many kelvin below 0 °C that acid begins to freeze. Its end is the
/// strongest acid of a battery; beyond 1.29 the freezing point rises again.
const ACID: [(f64, f64); 8] = [
    (1.0, 0.0),
    (1.05, 3.3),
    (1.1, 7.7),
    (1.15, 15.0),
    (1.2, 26.7),
    (1.225, 37.2),
    (1.25, 52.2),
    (1.28, 69.0),
];
const LYE_DEG_C: f64 = -25.0;

/// Distance that is kept from the freezing point: the table is recalled, cells of a bank differ in charge and in
/// temperature, and acid is weakest where it stands layered. Common practice, no source.
pub const FREEZING_MARGIN_K: f64 = 5.0;

/// Freezing point of the electrolyte of a cell, °C; `None` where none of water is in it.
fn freezing_degC(chemistry: Chemistry, charge: f64) -> Option<f64> {
    match (rest_table(chemistry).density, chemistry) {
        (Some(rows), _) => Some(-line::held(&ACID, line::held(rows.value, charge))),
        (None, Chemistry::NickelCadmium) => Some(LYE_DEG_C),
        (None, _) => None,
    }
}

const NO_WATER: Error = Error::NotTabulated {
    what: "the freezing point of a lithium battery",
    table: FREEZING_ACID,
    remedy: "its electrolyte holds no water; keep to the maker's limits of temperature",
};

/// By how much a temperature lies above the freezing point of the electrolyte: negative where it freezes.
///
/// `None` for lithium, which holds no water. At least [`FREEZING_MARGIN_K`] should be left.
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or outside −60 … 100 °C.
///
/// # Source
/// As [`freezing_point()`].
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, freezing_margin};
/// # use ampwright::quantity::{StateOfCharge, parse};
/// # use uom::si::temperature_interval::kelvin;
/// let empty = freezing_margin(Chemistry::Flooded, StateOfCharge::new(0.0)?, parse("-15 degC")?)?;
/// assert!(empty.unwrap().get::<kelvin>() < 0.0); // frozen
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn freezing_margin(
    chemistry: Chemistry,
    charge: StateOfCharge,
    temperature: ThermodynamicTemperature,
) -> Result<Option<TemperatureInterval>, Error> {
    let celsius = checked_celsius(temperature)?;
    Ok(freezing_degC(chemistry, charge.get())
        .map(|freezing| TemperatureInterval::new::<kelvin>(celsius - freezing)))
}

/// Whether the electrolyte freezes at a temperature, or comes within a margin of it; `None` for lithium.
///
/// # Errors
/// As [`freezing_margin`], and where the margin is negative or NaN.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, freezes};
/// # use ampwright::quantity::{StateOfCharge, parse};
/// let half = StateOfCharge::new(0.5)?;
/// assert_eq!(freezes(Chemistry::Flooded, half, parse("-15 degC")?, parse("5 K")?)?, Some(false));
/// assert_eq!(freezes(Chemistry::Flooded, half, parse("-20 degC")?, parse("5 K")?)?, Some(true));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn freezes(
    chemistry: Chemistry,
    charge: StateOfCharge,
    temperature: ThermodynamicTemperature,
    margin: TemperatureInterval,
) -> Result<Option<bool>, Error> {
    let margin = checked_margin(margin)?;
    let left = freezing_margin(chemistry, charge, temperature)?;
    Ok(left.map(|left| left.get::<kelvin>() < margin))
}

fn checked_margin(margin: TemperatureInterval) -> Result<f64, Error> {
    let value = margin.get::<kelvin>();
    if !(0.0..=50.0).contains(&value) {
        return Err(Error::OutOfRange {
            name: "freezing margin",
            value,
            unit: "K",
            allowed: Allowed::Between(0.0, 50.0),
        });
    }
    Ok(value)
}

/// Least state of charge at which the electrolyte keeps a margin from freezing; `None` for lithium, which holds no
/// water.
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or outside −60 … 100 °C, or the margin outside 0 … 50 K;
/// [`Error::TableEnds`] where even a full battery does not keep the margin.
///
/// # Source
/// As [`freezing_point()`].
///
/// # Example
/// A flooded battery in a hut at −15 °C, 5 K left, must stay above 37 %:
/// ```
/// # use ampwright::battery::{Chemistry, freezing_floor};
/// # use ampwright::quantity::parse;
/// let floor = freezing_floor(Chemistry::Flooded, parse("-15 degC")?, parse("5 K")?)?.unwrap();
/// assert!((floor.get() - 0.367).abs() < 0.001, "{floor:?}");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn freezing_floor(
    chemistry: Chemistry,
    temperature: ThermodynamicTemperature,
    margin: TemperatureInterval,
) -> Result<Option<StateOfCharge>, Error> {
    let celsius = checked_celsius(temperature)?;
    let lowest = celsius - checked_margin(margin)?;
    if freezing_degC(chemistry, 1.0).is_none() {
        return Ok(None);
    }
    StateOfCharge::new(floor_at(chemistry, lowest)?).map(Some)
}

/// Least state of charge at which the electrolyte does not freeze.
fn floor_at(chemistry: Chemistry, lowest_degC: f64) -> Result<f64, Error> {
    let full = freezing_degC(chemistry, 1.0).ok_or(NO_WATER)?;
    if lowest_degC < full {
        let (table, end) = if chemistry == Chemistry::NickelCadmium {
            (FREEZING_LYE, "ends at -25 degC for ordinary cells")
        } else {
            (FREEZING_ACID, "ends at the freezing point of a full battery")
        };
        return Err(Error::TableEnds {
            what: "lowest temperature, less the margin",
            value: lowest_degC,
            unit: "degC",
            table,
            end,
            remedy: "keep the bank warmer, or ask its maker for a stronger electrolyte",
        });
    }
    Ok(match rest_table(chemistry).density {
        Some(rows) => line::reached(rows.value, line::reached(&ACID, -lowest_degC)),
        None => 0.0,
    })
}

calculations! {
    /// Freezing point of the electrolyte of a lead-acid or nickel-cadmium battery at a state of charge.
    ///
    /// Keep several kelvin from it: the figures are recalled, and the cells of a bank differ.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{Chemistry, freezing_point}, quantity::parse};
    /// use uom::si::thermodynamic_temperature::degree_celsius;
    /// let half = freezing_point(Chemistry::Flooded, parse("50 %")?)?.get::<degree_celsius>();
    /// assert!((half + 24.36).abs() < 0.005);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn freezing_point(
        /// Of the battery.
        chemistry: Chemistry in choice [choice],
        /// Part of the capacity that is left.
        state_of_charge: Ratio in ratio [0.0 ..= 1.0],
    ) -> temperature: ThermodynamicTemperature in degree_celsius
    formula "by the straight line between rows, first the density of the charge (flooded 1.12, 1.155, 1.19, 1.225, \
        1.265 at 0, 25, 50, 75, 100 %; AGM 1.1 to 1.3; gel 1.1 to 1.28), then its freezing point: 1 0 °C, 1.05 −3.3, \
        1.1 −7.7, 1.15 −15, 1.2 −26.7, 1.225 −37.2, 1.25 −52.2, 1.28 −69 °C; nickel-cadmium about −25 °C at any \
        charge"
    source "freezing points of sulphuric acid by density, storage battery handbooks, recalled; potassium hydroxide \
        recalled"
    fallible "the battery holds no water: lithium"
    {
        freezing_degC(chemistry, state_of_charge.value)
            .map(ThermodynamicTemperature::new::<degree_celsius>)
            .ok_or(NO_WATER)
    }

    /// Least state of charge at which the electrolyte of a lead-acid or nickel-cadmium battery does not freeze.
    ///
    /// Take a margin of some kelvin off the lowest temperature first: [`freezing_floor`] does.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{Chemistry, least_state_of_charge}, quantity::{parse, readable}};
    /// let result = least_state_of_charge(Chemistry::Flooded, parse("-15 degC")?)?;
    /// assert_eq!(readable(result).to_string(), "0.214");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn least_state_of_charge(
        /// Of the battery.
        chemistry: Chemistry in choice [choice],
        /// Lowest of the electrolyte, less a margin.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) -> state_of_charge: Ratio in ratio
    formula "the state of charge whose freezing point it is; 0 where an empty battery does not freeze"
    source "as the freezing point"
    fallible "even a full battery freezes, or the battery holds no water: lithium"
    { floor_at(chemistry, temperature.get::<degree_celsius>()).map(Ratio::new::<ratio>) }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use proptest::prelude::*;

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }
    fn k(value: f64) -> TemperatureInterval {
        TemperatureInterval::new::<kelvin>(value)
    }
    fn soc(part: f64) -> StateOfCharge {
        StateOfCharge::new(part).unwrap()
    }

    #[test]
    fn acid_freezes_the_later_the_fuller_it_is() {
        for chemistry in [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel] {
            let mut last = 1.0;
            for percent in 0..=100 {
                let now = freezing_degC(chemistry, f64::from(percent) / 100.0).unwrap();
                assert!(now <= last && now < 0.0, "{chemistry}, {percent} %");
                last = now;
            }
        }
        assert_eq!(freezes(Chemistry::Lfp, soc(0.0), at(-40.0), k(5.0)), Ok(None));
    }

    /// The table is bent one way between its rows, so that a straight line lies below it: by less than the margin.
    #[test]
    fn the_margin_covers_the_line_between_rows() {
        for w in ACID.windows(4) {
            let line = |a: (f64, f64), b: (f64, f64), x: f64| a.1 + (b.1 - a.1) * (x - a.0) / (b.0 - a.0);
            for part in 1..20 {
                let x = w[1].0 + (w[2].0 - w[1].0) * f64::from(part) / 20.0;
                // The rows before, drawn on, freeze at a higher temperature than a curve that bends downward.
                let within = line(w[1], w[2], x) - line(w[0], w[1], x).max(line(w[2], w[3], x));
                assert!(within < FREEZING_MARGIN_K, "{x}: {within} K");
            }
        }
    }

    proptest! {
        #[test]
        fn at_the_floor_the_margin_is_kept_and_just_below_it_is_not(
            place in 0usize..3, celsius in -60.0..10.0f64, margin in 0.0..8.0f64,
        ) {
            let chemistry = [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel][place];
            let Ok(Some(floor)) = freezing_floor(chemistry, at(celsius), k(margin)) else {
                let full = freezes(chemistry, soc(1.0), at(celsius), k(margin)).unwrap();
                prop_assert_eq!(full, Some(true), "refused, though a full battery keeps the margin");
                return Ok(());
            };
            let left = |charge| freezing_margin(chemistry, soc(charge), at(celsius)).unwrap().unwrap().value;
            prop_assert!(left(floor.get()) >= margin - 1e-9);
            prop_assert!(floor.get() < 1e-4 || left(floor.get() - 1e-4) < margin);
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(a: u64, b: u64, c: u64) {
            let [a, b, c] = [a, b, c].map(f64::from_bits);
            for chemistry in Chemistry::ALL {
                let _ = freezing_floor(chemistry, at(a), k(b));
                let _ = freezes(chemistry, soc(0.5), at(a), k(c));
            }
        }
    }

    /// The faces print the formula: its figures are those of the tables.
    #[test]
    fn the_formula_names_the_figures_of_the_tables() {
        let formula = ENTRIES.iter().find(|e| e.name == "freezing_point").unwrap().formula;
        for (density, below) in ACID {
            let sign = if below > 0.0 { "−" } else { "" };
            assert!(formula.contains(&std::format!("{density} {sign}{below}")), "{density}");
        }
        for rows in Chemistry::ALL.iter().filter_map(|c| rest_table(*c).density) {
            assert!(rows.value.iter().all(|(_, density)| formula.contains(&std::format!("{density}"))));
        }
    }
}
