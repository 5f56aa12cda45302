//! By how much a bank must be larger in the cold (R12): the table of a standard.

use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::charge::checked_celsius;
use super::{Chemistry, Datum, cold_fraction, line};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::quantity::{Ratio, ThermodynamicTemperature};

/// Source of the factors of [`temperature_factor()`].
pub const TEMPERATURE_FACTOR: Citation =
    Citation::new("IEEE Std 485, reprinted in IEEE Std 1013", "cell size correction, Table 1", Seen::Page);

/// Cell size correction, (°C, factor), coldest first. Rows of −3.9 to 1.7 °C and of 51.7 °C recalled, the others seen.
///
/// Vented lead-acid of relative density 1.215, base 25 °C; between rows the straight line, as the standard has it.
/// Equal to `ieee-485-temperature-factor` in `tests/reference/battery.toml` (tested there).
pub const TEMPERATURE_FACTORS: [(f64, f64); 41] = [
    (-3.9, 1.52),
    (-1.1, 1.43),
    (1.7, 1.35),
    (4.4, 1.3),
    (7.2, 1.25),
    (10.0, 1.19),
    (12.8, 1.15),
    (15.6, 1.11),
    (18.3, 1.08),
    (18.9, 1.072),
    (19.4, 1.064),
    (20.0, 1.056),
    (20.6, 1.048),
    (21.1, 1.04),
    (21.7, 1.034),
    (22.2, 1.029),
    (22.8, 1.023),
    (23.3, 1.017),
    (23.9, 1.011),
    (24.4, 1.006),
    (25.0, 1.0),
    (25.6, 0.994),
    (26.1, 0.987),
    (26.7, 0.98),
    (27.2, 0.976),
    (27.8, 0.972),
    (28.3, 0.968),
    (28.9, 0.964),
    (29.4, 0.96),
    (30.0, 0.956),
    (30.6, 0.952),
    (31.1, 0.948),
    (31.7, 0.944),
    (32.2, 0.94),
    (35.0, 0.93),
    (37.8, 0.91),
    (40.6, 0.89),
    (43.3, 0.88),
    (46.1, 0.87),
    (48.9, 0.86),
    (51.7, 0.85),
];

/// Rows seen on a page, °C: a factor that rests on others is recalled.
#[allow(non_upper_case_globals)]
const SEEN_degC: (f64, f64) = (4.4, 48.9);

const NO_COLD_FACTOR: &str = "ask the maker for the part of the capacity left there and state it (cold_capacity), or keep the bank warmer";

/// Factor by which a lead-acid or nickel-cadmium bank must be larger at a temperature than at 25 °C.
///
/// Flooded: the table of the standard. AGM and gel: the same table, by common practice, since it is that of vented
/// cells; a maker's own curve governs. Nickel-cadmium: one over [`cold_fraction`]. Above 25 °C the table goes below
/// one; [`lead_acid_capacity`](super::lead_acid_capacity) takes no credit for it.
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or outside −60 … 100 °C; [`Error::TableEnds`] below −3.9 and above
/// 51.7 °C, for nickel-cadmium below −20 °C, where no value is held; [`Error::NotTabulated`] for lithium.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, capacity_factor};
/// # use ampwright::quantity::parse;
/// assert_eq!(capacity_factor(Chemistry::Flooded, parse("10 degC")?)?.value.value, 1.19);
/// assert!(capacity_factor(Chemistry::Flooded, parse("-10 degC")?).is_err());
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn capacity_factor(
    chemistry: Chemistry,
    temperature: ThermodynamicTemperature,
) -> Result<Datum<Ratio>, Error> {
    match chemistry {
        Chemistry::Flooded | Chemistry::Agm | Chemistry::Gel => {
            let celsius = line::printed(checked_celsius(temperature)?);
            let factor = factor_at(celsius)?;
            let seen = celsius >= SEEN_degC.0 && celsius <= SEEN_degC.1;
            let citation = if chemistry != Chemistry::Flooded {
                Citation {
                    place: "cell size correction, Table 1, of vented cells",
                    seen: Seen::Practice,
                    ..TEMPERATURE_FACTOR
                }
            } else if seen {
                TEMPERATURE_FACTOR
            } else {
                TEMPERATURE_FACTOR.recalled()
            };
            Ok(Datum { value: Ratio::new::<ratio>(factor), citation })
        }
        Chemistry::NickelCadmium => {
            let fraction = cold_fraction(chemistry, temperature)?;
            Ok(Datum { value: Ratio::new::<ratio>(1.0) / fraction.value, citation: fraction.citation })
        }
        Chemistry::Lfp | Chemistry::Nmc => Err(Error::NotTabulated {
            what: "the temperature factor of a lithium bank",
            table: TEMPERATURE_FACTOR,
            remedy: "use its capacity over temperature, the cold fraction",
        }),
    }
}

fn factor_at(celsius: f64) -> Result<f64, Error> {
    line::between(&TEMPERATURE_FACTORS, line::printed(celsius)).ok_or(Error::TableEnds {
        what: "lowest temperature of the electrolyte",
        value: celsius,
        unit: "degC",
        table: TEMPERATURE_FACTOR,
        end: if celsius < 0.0 { "begins at -3.9 degC" } else { "ends at 51.7 degC" },
        remedy: if celsius < 0.0 { NO_COLD_FACTOR } else { "cool the bank: its life is short there" },
    })
}

calculations! {
    /// Factor by which a lead-acid bank must be larger at its lowest temperature than at 25 °C.
    ///
    /// For vented cells of relative density 1.215; for others by common practice. Below −3.9 °C no value is held.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::temperature_factor, quantity::{parse, readable}};
    /// let result = temperature_factor(parse("4.4 degC")?)?;
    /// assert_eq!(readable(result).to_string(), "1.3");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn temperature_factor(
        /// Lowest of the electrolyte, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) -> factor: Ratio in ratio
    formula "the straight line between 41 rows from 1.52 at −3.9 °C over 1.19 at 10 °C and 1 at 25 °C to 0.85 at \
        51.7 °C"
    source "IEEE Std 485, Table 1, reprinted in IEEE Std 1013; rows up to 1.7 °C and at 51.7 °C recalled"
    fallible "the temperature lies below −3.9 or above 51.7 °C, where the table holds nothing"
    { factor_at(temperature.get::<degree_celsius>()).map(Ratio::new::<ratio>) }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }

    #[test]
    fn factors_fall_with_warmth() {
        assert!(TEMPERATURE_FACTORS.windows(2).all(|w| w[0].0 < w[1].0 && w[0].1 > w[1].1));
    }

    #[test]
    fn a_recalled_cell_and_a_borrowed_table_are_named() {
        let seen = |chemistry, celsius| capacity_factor(chemistry, at(celsius)).unwrap().citation.seen;
        assert_eq!(seen(Chemistry::Flooded, 10.0), Seen::Page);
        assert_eq!(seen(Chemistry::Flooded, 4.3), Seen::Recalled); // between a seen and a recalled row
        assert_eq!(seen(Chemistry::Flooded, 50.0), Seen::Recalled);
        assert_eq!(seen(Chemistry::Gel, 10.0), Seen::Practice);
        assert_eq!(seen(Chemistry::NickelCadmium, 10.0), Seen::Recalled);
        assert_eq!(capacity_factor(Chemistry::Lfp, at(10.0)).unwrap_err().slug(), "not-tabulated");
    }
}
