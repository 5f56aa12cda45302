//! How long loads run on a bank while the cold blocks its charge (R13).

use uom::si::ratio::ratio;
use uom::si::time::day;

use super::{Chemistry, Datum, capacity_factor, charge_limit, cold_fraction, data, freezing_floor};
use crate::catalogue::calculations;
use crate::error::Error;
use crate::quantity::{
    ElectricCharge, Ratio, StateOfCharge, TemperatureInterval, ThermodynamicTemperature, Time,
};

/// A bank that drains while the cold may block its charge.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ColdSpell {
    /// Chemistry.
    pub chemistry: Chemistry,
    /// Rated capacity of the bank.
    pub capacity: ElectricCharge,
    /// State of charge at the beginning.
    pub start: StateOfCharge,
    /// Temperature of the cells throughout.
    pub temperature: ThermodynamicTemperature,
    /// Part of the capacity that the cold leaves: as the maker states it, else [`capacity_left`].
    pub cold_fraction: Ratio,
    /// Charge that the loads take in a day.
    pub daily_demand: ElectricCharge,
    /// Distance kept from the freezing point.
    pub margin: TemperatureInterval,
}

/// What keeps a bank from being discharged further.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum DischargeFloor {
    /// The greatest depth of discharge of the chemistry.
    Depth,
    /// The electrolyte would freeze.
    Freezing,
}

/// Outcome of a cold spell.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ColdSpellOutcome {
    /// Whether the chemistry admits any charge at this temperature: if so, the spell is no spell.
    pub charge_admitted: bool,
    /// State of charge at which the loads must be dropped.
    pub floor: StateOfCharge,
    /// What sets it.
    pub floor_by: DischargeFloor,
    /// Charge that the loads get until then; nought where the bank begins below the floor.
    pub usable: ElectricCharge,
    /// Time until then.
    pub until_disconnect: Time,
}

/// How long loads run on a bank while the cold blocks its charge, and what ends it (R13).
///
/// # Errors
/// [`Error::OutOfRange`] where a quantity is NaN, infinite or not above nought; [`Error::TableEnds`] where even a
/// full battery does not keep the margin from freezing, or where no capacity is held for that temperature and none is
/// stated.
///
/// # Example
/// A telemetry mast on AGM at −20 °C: the freezing of acid, not the depth, ends its discharge.
/// ```
/// use ampwright::battery::{Chemistry, ColdSpell, DischargeFloor, cold_spell};
/// use ampwright::quantity::{StateOfCharge, parse, readable};
/// let outcome = cold_spell(&ColdSpell {
///     chemistry: Chemistry::Agm,
///     capacity: parse("100 Ah")?,
///     start: StateOfCharge::new(1.0)?,
///     temperature: parse("-20 degC")?,
///     cold_fraction: parse("50 %")?,
///     daily_demand: parse("5 Ah")?,
///     margin: parse("5 K")?,
/// })?;
/// assert_eq!(outcome.floor_by, DischargeFloor::Freezing);
/// assert_eq!(readable(outcome.until_disconnect).to_string(), "5.36 d");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn cold_spell(spell: &ColdSpell) -> Result<ColdSpellOutcome, Error> {
    let charge_admitted = charge_limit(spell.chemistry, spell.temperature)?.usual.get() > 0.0;
    let deepest = 1.0 - data(spell.chemistry).greatest_depth.value;
    let freezing = freezing_floor(spell.chemistry, spell.temperature, spell.margin)?;
    let (floor, floor_by) = match freezing {
        Some(freezing) if freezing.get() > deepest => (freezing, DischargeFloor::Freezing),
        _ => (StateOfCharge::new(deepest)?, DischargeFloor::Depth),
    };
    let start = Ratio::new::<ratio>(spell.start.get());
    let least = Ratio::new::<ratio>(floor.get().min(spell.start.get()));
    let until_disconnect =
        days_to_disconnect(spell.capacity, start, least, spell.cold_fraction, spell.daily_demand)?;
    let usable = spell.capacity * usable_part(start.value, least.value, spell.cold_fraction.value);
    Ok(ColdSpellOutcome { charge_admitted, floor, floor_by, usable, until_disconnect })
}

/// Part of the capacity at 25 °C that a battery of any chemistry gives at a temperature, at most the whole.
///
/// For lead-acid one over its [`capacity_factor`], for the others [`cold_fraction`].
///
/// # Errors
/// As those two: [`Error::OutOfRange`] if the temperature is NaN or outside −60 … 100 °C, [`Error::TableEnds`] where none is
/// held, below −3.9 °C for lead-acid and below −20 °C for the others.
///
/// # Example
/// ```
/// # use ampwright::battery::{Chemistry, capacity_left};
/// # use ampwright::quantity::parse;
/// let left = capacity_left(Chemistry::Flooded, parse("1.7 degC")?)?.value.value;
/// assert!((left - 1.0 / 1.35).abs() < 1e-12);
/// assert!(capacity_left(Chemistry::Flooded, parse("-10 degC")?).is_err());
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn capacity_left(
    chemistry: Chemistry,
    temperature: ThermodynamicTemperature,
) -> Result<Datum<Ratio>, Error> {
    if !chemistry.is_lead_acid() {
        return cold_fraction(chemistry, temperature);
    }
    let one = Ratio::new::<ratio>(1.0);
    let Datum { value, citation } = capacity_factor(chemistry, temperature)?;
    let fraction = one / value;
    // Warmth is no reason to count on more than the rating.
    Ok(Datum { value: if fraction > one { one } else { fraction }, citation })
}

/// Part of the rated capacity that comes out between two states of charge where the cold leaves a fraction.
fn usable_part(start: f64, least: f64, fraction: f64) -> f64 {
    (fraction * (start - least)).min(start - (1.0 - fraction)).max(0.0)
}

calculations! {
    /// Days until loads alone have brought a bank down to a state of charge, while the cold admits no charge.
    ///
    /// The cold takes its part in two ways, of which the one that leaves less counts: in proportion, as a bank is
    /// sized, and from the bottom, where the voltage of a cold cell has fallen before it is empty.
    ///
    /// # Example
    /// 200 Ah of LFP from 90 to 10 %, of which the cold leaves 70 %, with 16 Ah a day:
    /// ```
    /// use ampwright::{battery::days_to_disconnect, quantity::{parse, readable}};
    /// let result = days_to_disconnect(parse("200 Ah")?, parse("90 %")?, parse("10 %")?, parse("70 %")?, parse("16 Ah")?)?;
    /// assert_eq!(readable(result).to_string(), "7 d");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn days_to_disconnect(
        /// Of the bank, rated.
        capacity: ElectricCharge in ampere_hour [> 0.0],
        /// State of charge at the beginning.
        start: Ratio in ratio [0.0 ..= 1.0],
        /// At which the loads are dropped.
        least: Ratio in ratio [0.0 ..= 1.0],
        /// Part of the capacity that the cold leaves.
        cold_fraction: Ratio in ratio [> 0.0 ..= 1.0] = 1.0,
        /// Charge that the loads take in a day.
        daily_demand: ElectricCharge in ampere_hour [> 0.0],
    ) -> duration: Time in day
    where (least <= start) least in ratio: "it must not be above the start"
    formula "t = max(0, min(f·(s₀ − s₁), s₀ − (1 − f)))·C/Q"
    source "charge balance; that the cold takes from the bottom is our reading of capacities in the cold"
    {
        let part = usable_part(start.value, least.value, cold_fraction.value);
        Time::new::<day>(part * (capacity / daily_demand).value)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::electric_charge::ampere_hour;
    use uom::si::temperature_interval::kelvin;
    use uom::si::thermodynamic_temperature::degree_celsius;

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }
    fn k(value: f64) -> TemperatureInterval {
        TemperatureInterval::new::<kelvin>(value)
    }
    fn soc(part: f64) -> StateOfCharge {
        StateOfCharge::new(part).unwrap()
    }

    proptest! {
        #[test]
        fn any_bits_give_an_answer_or_an_error(bits: [u64; 4]) {
            let [a, b, c, d] = bits.map(f64::from_bits);
            for chemistry in Chemistry::ALL {
                let outcome = cold_spell(&ColdSpell {
                    chemistry,
                    capacity: ElectricCharge::new::<ampere_hour>(c),
                    start: soc(0.9),
                    temperature: at(if b > 0.0 { a } else { -10.0 }),
                    cold_fraction: Ratio::new::<ratio>(0.5),
                    daily_demand: ElectricCharge::new::<ampere_hour>(d),
                    margin: k(5.0),
                });
                if let Ok(outcome) = outcome {
                    prop_assert!(outcome.until_disconnect.value >= 0.0 && outcome.usable.value >= 0.0);
                }
            }
        }
    }

    fn spell(
        chemistry: Chemistry,
        start: f64,
        celsius: f64,
        fraction: Option<f64>,
    ) -> Result<ColdSpellOutcome, Error> {
        cold_spell(&ColdSpell {
            chemistry,
            capacity: ElectricCharge::new::<ampere_hour>(100.0),
            start: soc(start),
            temperature: at(celsius),
            cold_fraction: match fraction {
                Some(stated) => Ratio::new::<ratio>(stated),
                None => capacity_left(chemistry, at(celsius))?.value,
            },
            daily_demand: ElectricCharge::new::<ampere_hour>(10.0),
            margin: k(5.0),
        })
    }

    #[test]
    fn lithium_in_frost_drains_without_charge_and_lead_acid_is_charged_still() {
        let lfp = spell(Chemistry::Lfp, 1.0, -10.0, None).unwrap();
        assert!(!lfp.charge_admitted && lfp.floor_by == DischargeFloor::Depth);
        // 100 Ah, of which nine tenths, of which 0.7.
        assert!((lfp.until_disconnect.get::<day>() - 6.3).abs() < 1e-9);
        let flooded = spell(Chemistry::Flooded, 1.0, 1.7, None).unwrap();
        assert!(flooded.charge_admitted);
        // 100 Ah, of which 0.8, over the factor of the cold.
        assert!((flooded.usable.get::<ampere_hour>() - 80.0 / 1.35).abs() < 1e-9);
        // Below its table the cold of lead-acid must be stated.
        assert_eq!(spell(Chemistry::Flooded, 1.0, -10.0, None).unwrap_err().slug(), "table-ends");
        assert!(spell(Chemistry::Flooded, 1.0, -10.0, Some(0.6)).is_ok());
    }

    #[test]
    fn a_bank_below_its_floor_has_nothing_to_give() {
        let outcome = spell(Chemistry::Flooded, 0.3, -20.0, Some(0.5)).unwrap();
        assert_eq!(outcome.floor_by, DischargeFloor::Freezing);
        assert_eq!((outcome.usable.value, outcome.until_disconnect.value), (0.0, 0.0));
        // Half full, of which the cold leaves the upper half alone: nothing comes out either.
        assert_eq!(spell(Chemistry::Lfp, 0.5, -10.0, Some(0.5)).unwrap().usable.value, 0.0);
    }
}
