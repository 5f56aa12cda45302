//! Charge and discharge limits of a bank over its temperature (R11).
//!
//! General figures for a chemistry: the maker's stated limits govern where they are known. Whether the sources
//! that charge a bank together keep to them belongs to the floors above.

use uom::si::thermodynamic_temperature::degree_celsius;

use super::Chemistry;
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::law::c_rate_current;
use crate::quantity::{ChargeRate, ElectricCharge, ElectricCurrent, ThermodynamicTemperature};

/// A rate of a constant table. Only constants call it, so a rate out of range fails the build, never a run.
#[allow(clippy::panic)]
const fn rate(per_hour: f64) -> ChargeRate {
    match ChargeRate::per_hour(per_hour) {
        Ok(rate) => rate,
        Err(_) => panic!("charge rate out of range in a constant table"),
    }
}

const NONE: ChargeRate = rate(0.0);
/// Least rate of lead-acid: slower charge leaves acid layered and plates sulphated. Recalled.
const LEAD_ACID_LEAST: ChargeRate = rate(0.1);
const LITHIUM_DISCHARGE: ChargeRate = rate(1.0);

/// Cell temperatures that are answered, °C; beyond them lies a slip of the pen, not a bank.
#[allow(non_upper_case_globals)]
const RANGE_degC: (f64, f64) = (-60.0, 100.0);

/// Charge limits in a band of cell temperatures; in no band, no charge is admitted.
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct TemperatureBand {
    /// Where the band begins, °C; a temperature on the edge of two bands belongs to the colder one.
    pub from_degC: f64,
    /// Where it ends, °C, included.
    pub upto_degC: f64,
    /// Greatest rate by default.
    pub usual: ChargeRate,
    /// Greatest rate that only the maker's or the pack's stated limit admits.
    pub ceiling: ChargeRate,
    /// Source.
    pub citation: Citation,
}

const fn band(from: f64, upto: f64, usual: f64, ceiling: f64, citation: Citation) -> TemperatureBand {
    TemperatureBand { from_degC: from, upto_degC: upto, usual: rate(usual), ceiling: rate(ceiling), citation }
}

const LEAD_ACID: Citation = Citation::new("common handbook values", "lead-acid charge rates", Seen::Recalled);
const LFP_SHEETS: Citation =
    Citation::new("cell data sheets and a battery manual", "LFP charge limits", Seen::Page);
const NMC_RECALLED: Citation = Citation::new("common cell data", "NMC charge limits", Seen::Recalled);
const NICKEL_CADMIUM: Citation =
    Citation::new("IEC 60623", "charge at 0.2 of capacity an hour", Seen::Recalled);

// Lead-acid from −20 °C, below which even half-charged electrolyte freezes, to 50 °C, above which charging is
// stopped: common practice, no source. In between the charger's voltage, not its current, follows temperature.
const FLOODED_BANDS: [TemperatureBand; 1] = [band(-20.0, 50.0, 0.13, 0.2, LEAD_ACID)];
const AGM_BANDS: [TemperatureBand; 1] = [band(-20.0, 50.0, 0.25, 0.3, LEAD_ACID)];
const GEL_BANDS: [TemperatureBand; 1] = [band(-20.0, 50.0, 0.2, 0.3, LEAD_ACID)];
// Sheets differ in the cold (0.1 /h to 5 °C; 0.2 /h to 10 or to 15 °C): the lower of them at each temperature.
const LFP_BANDS: [TemperatureBand; 3] = [
    band(0.0, 5.0, 0.1, 0.1, LFP_SHEETS),
    band(5.0, 15.0, 0.2, 0.2, LFP_SHEETS),
    band(15.0, 45.0, 0.5, 1.0, LFP_SHEETS),
];
const NMC_BANDS: [TemperatureBand; 3] = [
    band(0.0, 5.0, 0.1, 0.1, NMC_RECALLED),
    band(5.0, 15.0, 0.2, 0.2, NMC_RECALLED),
    band(15.0, 45.0, 0.5, 1.0, NMC_RECALLED),
];
// The rate of the standard's own charge is all that is known with certainty: no ceiling above it.
const NICKEL_CADMIUM_BANDS: [TemperatureBand; 1] = [band(-20.0, 45.0, 0.2, 0.2, NICKEL_CADMIUM)];

/// The chemistry's bands of charge limits, coldest first, without gaps.
///
/// Rates equal `charge-rates` and `lfp-temperature-limits` in `tests/reference/battery.toml` (tested there).
///
/// # Example
/// ```
/// use ampwright::battery::{Chemistry, charge_bands};
/// assert_eq!(charge_bands(Chemistry::Lfp).first().map(|band| band.from_degC), Some(0.0)); // none below
/// ```
pub const fn charge_bands(chemistry: Chemistry) -> &'static [TemperatureBand] {
    match chemistry {
        Chemistry::Flooded => &FLOODED_BANDS,
        Chemistry::Agm => &AGM_BANDS,
        Chemistry::Gel => &GEL_BANDS,
        Chemistry::Lfp => &LFP_BANDS,
        Chemistry::Nmc => &NMC_BANDS,
        Chemistry::NickelCadmium => &NICKEL_CADMIUM_BANDS,
    }
}

/// Charge limits of a chemistry at a cell temperature.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChargeLimit {
    /// Greatest rate by default; 0 where no charge is admitted.
    pub usual: ChargeRate,
    /// Greatest rate on the maker's or the pack's stated limit only; 0 where no charge is admitted.
    pub ceiling: ChargeRate,
    /// Least rate that still mixes and fills the cells: lead-acid only, 0.1 /h.
    pub least: Option<ChargeRate>,
    /// Source.
    pub citation: Citation,
}

/// Charge limits of a chemistry at a cell temperature.
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `temperature` | °C | −60 … 100; of the cells, not of the air |
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or out of range. A temperature at which no charge is admitted is
/// no error: the rates are 0.
///
/// # Source
/// Lead-acid: common handbook values, recalled; its temperatures common practice, no source. LFP: cell data sheets and
/// a battery manual, page seen; where they differ, the lower. NMC and nickel-cadmium recalled.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, charge_limit};
/// # use ampwright::quantity::ThermodynamicTemperature;
/// # use uom::si::thermodynamic_temperature::degree_celsius;
/// let limit = charge_limit(Chemistry::Flooded, ThermodynamicTemperature::new::<degree_celsius>(25.0))?;
/// assert_eq!((limit.usual.get(), limit.ceiling.get()), (0.13, 0.2));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn charge_limit(
    chemistry: Chemistry,
    temperature: ThermodynamicTemperature,
) -> Result<ChargeLimit, Error> {
    checked_celsius(temperature).map(|celsius| charge_limit_at(chemistry, celsius))
}

fn charge_limit_at(chemistry: Chemistry, celsius: f64) -> ChargeLimit {
    let bands = charge_bands(chemistry);
    let found = bands.iter().find(|band| celsius >= band.from_degC && celsius <= band.upto_degC);
    match (found, bands.first()) {
        (Some(band), _) => ChargeLimit {
            usual: band.usual,
            ceiling: band.ceiling,
            least: chemistry.is_lead_acid().then_some(LEAD_ACID_LEAST),
            citation: band.citation,
        },
        (None, first) => ChargeLimit {
            usual: NONE,
            ceiling: NONE,
            least: None,
            citation: first.map_or(LEAD_ACID, |band| band.citation),
        },
    }
}

/// Greatest continuous discharge rate of a chemistry at a cell temperature, if one is held.
///
/// LFP 1 /h from −20 to 60 °C, NMC the same (recalled), 0 outside. `None` for lead-acid and nickel-cadmium, whose
/// cells bear far more than any wiring: the current a bank is designed for is a matter of capacity and volts.
///
/// # Errors
/// As [`charge_limit`].
///
/// # Source
/// LFP: three cell and battery sheets, page seen. NMC recalled.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, discharge_limit};
/// # use ampwright::quantity::ThermodynamicTemperature;
/// # use uom::si::thermodynamic_temperature::degree_celsius;
/// let at = ThermodynamicTemperature::new::<degree_celsius>;
/// assert_eq!(discharge_limit(Chemistry::Lfp, at(-10.0))?.map(|(rate, _)| rate.get()), Some(1.0));
/// assert_eq!(discharge_limit(Chemistry::Lfp, at(-30.0))?.map(|(rate, _)| rate.get()), Some(0.0));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn discharge_limit(
    chemistry: Chemistry,
    temperature: ThermodynamicTemperature,
) -> Result<Option<(ChargeRate, Citation)>, Error> {
    checked_celsius(temperature).map(|celsius| discharge_limit_at(chemistry, celsius))
}

fn discharge_limit_at(chemistry: Chemistry, celsius: f64) -> Option<(ChargeRate, Citation)> {
    let citation = match chemistry {
        Chemistry::Lfp => Citation::new("cell data sheets", "LFP discharge limits", Seen::Page),
        Chemistry::Nmc => Citation::new("common cell data", "NMC discharge limits", Seen::Recalled),
        Chemistry::Flooded | Chemistry::Agm | Chemistry::Gel | Chemistry::NickelCadmium => return None,
    };
    let admitted = (-20.0..=60.0).contains(&celsius);
    Some((if admitted { LITHIUM_DISCHARGE } else { NONE }, citation))
}

calculations! {
    /// Greatest and least charge current of a bank at a cell temperature, all sources together.
    ///
    /// General figures for the chemistry: the maker's stated limits govern where they are known. Where no charge is
    /// admitted all three are 0, the least too. The bands are those of [`charge_bands`], the source of each figure is in
    /// [`charge_limit`].
    ///
    /// # Example
    /// 100 Ah of LFP takes 50 A at 20 °C, 10 A at 3 °C and nothing in frost:
    /// ```
    /// use ampwright::{battery::{Chemistry, charge_current_limit}, quantity::{parse, readable}};
    /// for (temperature, current) in [("20 degC", "50 A"), ("3 degC", "10 A"), ("-1 degC", "0 A")] {
    ///     let limit = charge_current_limit(Chemistry::Lfp, parse("100 Ah")?, parse(temperature)?)?;
    ///     assert_eq!(readable(limit.usual).to_string(), current);
    /// }
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn charge_current_limit(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// Of the whole bank.
        capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Of the cells, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) => ChargeCurrentLimit {
        /// Greatest by default; 0 where no charge is admitted.
        usual: ElectricCurrent in ampere,
        /// Greatest on the maker's or the pack's stated limit only; 0 where no charge is admitted.
        ceiling: ElectricCurrent in ampere,
        /// Least worth having; 0 where the chemistry wants none, and outside the temperature band.
        least: ElectricCurrent in ampere,
    }
    formula "I = r·C, r in /h usual and ceiling: from −20 to 50 °C flooded 0.13 and 0.2, AGM 0.25 and 0.3, gel 0.2 and 0.3, least \
        for all three 0.1; LFP and NMC from 0 to 5 °C 0.1 and 0.1, above 5 to 15 °C 0.2 and 0.2, above 15 to 45 °C 0.5 and 1, least 0; \
        nickel-cadmium from −20 to 45 °C 0.2 and 0.2, least 0; outside, all three 0. Both ends belong to the band: at 0 °C lithium \
        takes 0.1 /h, below it nothing"
    source "lead-acid: common handbook values (recalled), its temperatures common practice, no source; LFP: cell data sheets and a \
        battery manual, of which the lower; NMC and nickel-cadmium recalled"
    {
        let limit = charge_limit_at(chemistry, temperature.get::<degree_celsius>());
        let current = |rate| c_rate_current::formula(rate, capacity);
        ChargeCurrentLimit {
            usual: current(limit.usual),
            ceiling: current(limit.ceiling),
            least: current(limit.least.unwrap_or(NONE)),
        }
    }

    /// Greatest continuous discharge current of a lithium bank at a cell temperature.
    ///
    /// 0 where no discharge is admitted. [`discharge_limit`] tells the source, and which chemistries have a limit.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{Chemistry, discharge_current_limit}, quantity::{parse, readable}};
    /// let most = discharge_current_limit(Chemistry::Lfp, parse("200 Ah")?, parse("10 degC")?)?;
    /// assert_eq!(readable(most).to_string(), "200 A");
    /// assert!(discharge_current_limit(Chemistry::Flooded, parse("200 Ah")?, parse("10 degC")?).is_err());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn discharge_current_limit(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// Of the whole bank.
        capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Of the cells, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-60.0 ..= 100.0],
    ) -> current: ElectricCurrent in ampere
    formula "I = r·C, r = 1 /h from −20 to 60 °C, else 0"
    source "LFP: three cell and battery sheets; NMC the same, recalled"
    fallible "the chemistry has no discharge limit of its own: lead-acid and nickel-cadmium"
    {
        match discharge_limit_at(chemistry, temperature.get::<degree_celsius>()) {
            Some((rate, _)) => Ok(c_rate_current::formula(rate, capacity)),
            None => Err(Error::NotTabulated {
                what: "the discharge limit of a lead-acid or nickel-cadmium bank",
                table: Citation::new("the limits held", "lithium only", Seen::Derived),
                remedy: "its capacity at the rate and its voltage under load limit it; use the maker's figures",
            }),
        }
    }
}

pub(super) fn checked_celsius(temperature: ThermodynamicTemperature) -> Result<f64, Error> {
    let celsius = temperature.get::<degree_celsius>();
    let (least, most) = RANGE_degC;
    // Written so that NaN fails.
    if !(celsius >= least && celsius <= most) {
        let allowed = Allowed::Between(least, most);
        return Err(Error::OutOfRange { name: "cell temperature", value: celsius, unit: "degC", allowed });
    }
    Ok(celsius)
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::string::ToString;
    use uom::si::electric_charge::ampere_hour;

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }

    fn usual(chemistry: Chemistry, celsius: f64) -> f64 {
        charge_limit(chemistry, at(celsius)).unwrap().usual.get()
    }

    #[test]
    fn bands_join_without_gaps_and_ceilings_are_not_below_defaults() {
        for chemistry in Chemistry::ALL {
            let bands = charge_bands(chemistry);
            assert!(!bands.is_empty());
            for pair in bands.windows(2) {
                assert_eq!(pair[0].upto_degC, pair[1].from_degC, "{chemistry}");
            }
            for band in bands {
                assert!(band.from_degC < band.upto_degC && band.usual <= band.ceiling, "{chemistry}");
            }
        }
    }

    #[test]
    fn no_lithium_is_charged_in_frost_or_great_heat() {
        for chemistry in [Chemistry::Lfp, Chemistry::Nmc] {
            for celsius in [-60.0, -20.0, -0.1, 45.1, 60.0, 100.0] {
                let limit = charge_limit(chemistry, at(celsius)).unwrap();
                assert_eq!((limit.usual, limit.ceiling), (NONE, NONE), "{chemistry} at {celsius}");
            }
            assert_eq!(
                [0.0, 5.0, 5.5, 15.0, 15.5, 45.0].map(|t| usual(chemistry, t)),
                [0.1, 0.1, 0.2, 0.2, 0.5, 0.5]
            );
        }
    }

    #[test]
    fn flooded_default_is_0_13_and_ceiling_0_2() {
        let limit = charge_limit(Chemistry::Flooded, at(25.0)).unwrap();
        assert_eq!((limit.usual.get(), limit.ceiling.get()), (0.13, 0.2));
        assert_eq!(limit.least.map(ChargeRate::get), Some(0.1));
        assert_eq!(usual(Chemistry::Flooded, -21.0), 0.0);
        assert_eq!(usual(Chemistry::Flooded, 51.0), 0.0);
    }

    #[test]
    fn all_functions_answer_the_same_temperatures() {
        let range = Allowed::Between(RANGE_degC.0, RANGE_degC.1);
        for entry in ENTRIES {
            assert_eq!(entry.inputs[2].range, range, "{}", entry.name);
        }
    }

    #[test]
    fn odd_inputs_are_named_in_the_error() {
        let bank = ElectricCharge::new::<ampere_hour>(100.0);
        for celsius in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -60.5, 101.0] {
            assert!(charge_current_limit(Chemistry::Lfp, bank, at(celsius)).is_err(), "{celsius}");
            assert!(discharge_current_limit(Chemistry::Gel, bank, at(celsius)).is_err(), "{celsius}");
        }
        for ampere_hours in [0.0, -0.0, -1.0, f64::NAN, f64::INFINITY] {
            let capacity = ElectricCharge::new::<ampere_hour>(ampere_hours);
            let error = charge_current_limit(Chemistry::Agm, capacity, at(20.0)).unwrap_err();
            assert!(error.to_string().starts_with("capacity is "), "{error}");
        }
    }

    proptest::proptest! {
        #[test]
        fn any_bits_give_an_answer_or_an_error(capacity: u64, celsius: u64) {
            let capacity = ElectricCharge::new::<ampere_hour>(f64::from_bits(capacity));
            let temperature = at(f64::from_bits(celsius));
            for chemistry in Chemistry::ALL {
                if let Ok(limit) = charge_current_limit(chemistry, capacity, temperature) {
                    assert!(limit.usual.value >= 0.0 && limit.usual <= limit.ceiling);
                }
                let _ = discharge_current_limit(chemistry, capacity, temperature);
            }
        }
    }
}
