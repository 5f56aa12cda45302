//! What temperature and charge do to a battery: capacity in the cold, resistance, life in the heat.

use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::charge::checked_celsius;
use super::{Chemistry, Datum, data, line, resistance_rise};
use crate::error::{Allowed, Error};
use crate::quantity::{Ratio, StateOfCharge, ThermodynamicTemperature};

/// Part of the capacity at 25 °C that a lithium or nickel-cadmium battery gives at a temperature.
///
/// By the straight line between the rows of [`ChemistryData::cold_capacity`](super::ChemistryData::cold_capacity);
/// above 25 °C no more than the whole.
///
/// # Errors
/// [`Error::OutOfRange`] for NaN; [`Error::TableEnds`] below the coldest row, where no discharge is admitted either;
/// [`Error::NotTabulated`] for lead-acid, which takes [`temperature_factor()`](super::temperature_factor()).
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, cold_fraction};
/// # use ampwright::quantity::parse;
/// assert_eq!(cold_fraction(Chemistry::Lfp, parse("-10 degC")?)?.value.value, 0.7);
/// assert!(cold_fraction(Chemistry::Lfp, parse("-30 degC")?).is_err());
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn cold_fraction(
    chemistry: Chemistry,
    temperature: ThermodynamicTemperature,
) -> Result<Datum<Ratio>, Error> {
    let celsius = line::printed(checked_celsius(temperature)?);
    let Datum { value: rows, citation } = data(chemistry).cold_capacity;
    let Some(first) = rows.first() else {
        return Err(Error::NotTabulated {
            what: "the capacity of a lead-acid battery over temperature",
            table: citation,
            remedy: "take its temperature factor, which a standard tabulates",
        });
    };
    if celsius < first.0 {
        return Err(Error::TableEnds {
            what: "cell temperature",
            value: celsius,
            unit: "degC",
            table: citation,
            end: "begins at -20 degC",
            remedy: "keep the bank warmer, or state the maker's capacity there",
        });
    }
    Ok(Datum { value: Ratio::new::<ratio>(line::held(rows, celsius)), citation })
}

/// By how much a cell's resistance differs from that of the same cell full, at 25 °C and new.
///
/// From [`resistance_rise`](super::resistance_rise): in proportion to the depth of discharge, and exponential in
/// temperature through 1 at 25 °C and its figure at −10 °C. Common practice, no source; for wiring and disconnect
/// voltages, not for measurement.
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or outside −60 … 100 °C.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, resistance_factor};
/// # use ampwright::quantity::{StateOfCharge, parse};
/// let empty_and_cold = resistance_factor(Chemistry::Agm, StateOfCharge::new(0.0)?, parse("-10 degC")?)?;
/// assert!((empty_and_cold.value - 3.0).abs() < 1e-12);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn resistance_factor(
    chemistry: Chemistry,
    charge: StateOfCharge,
    temperature: ThermodynamicTemperature,
) -> Result<Ratio, Error> {
    let celsius = checked_celsius(temperature)?;
    Ok(Ratio::new::<ratio>(resistance_factor_at(chemistry, charge.get(), celsius)))
}

pub(super) fn resistance_factor_at(chemistry: Chemistry, charge: f64, celsius: f64) -> f64 {
    let rise = resistance_rise(chemistry);
    let depth = 1.0 + (rise.discharged - 1.0) * (1.0 - charge);
    depth * libm::pow(rise.cold, (25.0 - celsius) / 35.0)
}

/// Years until a battery is worn out by age alone at a mean temperature.
///
/// [`ChemistryData::life_years`](super::ChemistryData::life_years), halved with every
/// [`ChemistryData::life_halving_K`](super::ChemistryData::life_halving_K) above 25 °C; below, no longer.
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or outside −60 … 100 °C.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, life_years};
/// # use ampwright::quantity::parse;
/// assert_eq!(life_years(Chemistry::Flooded, parse("35 degC")?)?, 4.0);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn life_years(chemistry: Chemistry, temperature: ThermodynamicTemperature) -> Result<f64, Error> {
    let celsius = checked_celsius(temperature)?;
    let data = data(chemistry);
    let above = (celsius - 25.0).max(0.0);
    Ok(data.life_years.value * libm::pow(0.5, above / data.life_halving_K.value))
}

/// Whether a temperature lies within a pair of limits of [`ChemistryData`](super::ChemistryData), both included.
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or infinite.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, data, is_within};
/// # use ampwright::quantity::parse;
/// assert!(!is_within(data(Chemistry::Lfp).storage_degC, parse("-30 degC")?)?);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn is_within(
    limits_degC: Datum<(f64, f64)>,
    temperature: ThermodynamicTemperature,
) -> Result<bool, Error> {
    let celsius = line::printed(temperature.get::<degree_celsius>());
    if !celsius.is_finite() {
        return Err(Error::OutOfRange {
            name: "cell temperature",
            value: celsius,
            unit: "degC",
            allowed: Allowed::Finite,
        });
    }
    let (least, most) = limits_degC.value;
    Ok(celsius >= least && celsius <= most)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }

    #[test]
    fn cold_takes_capacity_and_below_the_table_there_is_none() {
        for chemistry in [Chemistry::Lfp, Chemistry::Nmc, Chemistry::NickelCadmium] {
            let part = |celsius| cold_fraction(chemistry, at(celsius)).map(|f| f.value.value);
            let mut last = 0.0;
            for tenth in -200..=600 {
                let now = part(f64::from(tenth) / 10.0).unwrap();
                assert!(now >= last && now <= 1.0, "{chemistry} at {tenth}");
                last = now;
            }
            assert_eq!(part(25.0), Ok(1.0));
            assert_eq!(part(-20.1).unwrap_err().slug(), "table-ends");
            assert_eq!(part(f64::NAN).unwrap_err().slug(), "out-of-range");
            // The table begins where discharge does.
            assert_eq!(data(chemistry).cold_capacity.value[0].0, data(chemistry).discharge_degC.value.0);
        }
        assert_eq!(cold_fraction(Chemistry::Agm, at(0.0)).unwrap_err().slug(), "not-tabulated");
    }

    #[test]
    fn resistance_runs_through_the_stated_points() {
        for chemistry in Chemistry::ALL {
            let rise = resistance_rise(chemistry);
            let factor = |charge, celsius| {
                resistance_factor(chemistry, StateOfCharge::new(charge).unwrap(), at(celsius)).unwrap().value
            };
            assert!((factor(1.0, 25.0) - 1.0).abs() < 1e-15);
            assert!((factor(0.0, 25.0) - rise.discharged).abs() < 1e-12);
            assert!((factor(1.0, -10.0) - rise.cold).abs() < 1e-12);
            assert!(factor(1.0, 40.0) < 1.0 && factor(0.5, -30.0) > factor(0.5, -20.0));
            assert!(resistance_factor(chemistry, StateOfCharge::new(1.0).unwrap(), at(f64::NAN)).is_err());
        }
    }

    #[test]
    fn heat_shortens_life_and_cold_does_not_lengthen_it() {
        for chemistry in Chemistry::ALL {
            let held = data(chemistry);
            let hot = 25.0 + held.life_halving_K.value;
            assert!((life_years(chemistry, at(hot)).unwrap() - 0.5 * held.life_years.value).abs() < 1e-12);
            assert_eq!(life_years(chemistry, at(-10.0)), Ok(held.life_years.value));
        }
    }
}
