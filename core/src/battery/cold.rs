//! Banks in the cold (R13): when the electrolyte freezes, and how long loads run while no charge is admitted.

use uom::si::ratio::ratio;
use uom::si::temperature_interval::kelvin;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::day;

use super::charge::checked_celsius;
use super::{Chemistry, charge_limit, data, line, rest_table};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{
    ElectricCharge, Ratio, StateOfCharge, TemperatureInterval, ThermodynamicTemperature, Time,
};

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
    formula "by the straight line between rows, first the density of the charge (flooded 1.12, 1.155, 1.19, 1.225, 1.265 at 0, 25, 50, 75, 100 %; AGM 1.1 \
        to 1.3; gel 1.1 to 1.28), then its freezing point: 1 0 °C, 1.05 −3.3, 1.1 −7.7, 1.15 −15, 1.2 −26.7, 1.225 −37.2, 1.25 −52.2, 1.28 \
        −69 °C; nickel-cadmium about −25 °C at any charge"
    source "freezing points of sulphuric acid by density, storage battery handbooks, recalled; potassium hydroxide recalled"
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

    /// Days until loads alone have brought a bank down to a state of charge, while the cold admits no charge.
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
        /// At the beginning.
        start: Ratio in ratio [0.0 ..= 1.0],
        /// At which the loads are dropped.
        least: Ratio in ratio [0.0 ..= 1.0],
        /// Part of the capacity that the cold leaves.
        cold_fraction: Ratio in ratio [> 0.0 ..= 1.0] = 1.0,
        /// Charge that the loads take in a day.
        daily_demand: ElectricCharge in ampere_hour [> 0.0],
    ) -> duration: Time in day
    where (least <= start) least in ratio: "it must not be above the start"
    formula "t = f·C·(s₀ − s₁)/Q"
    source "charge balance"
    { Time::new::<day>((cold_fraction * capacity * (start - least) / daily_demand).value) }
}

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
    /// Part of the capacity that the cold leaves: for lead-acid 1 over its temperature factor, else the cold fraction.
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
/// [`Error::OutOfRange`] where a quantity is NaN, infinite or not above nought; [`Error::TableEnds`] where even a full
/// battery does not keep the margin from freezing.
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
    let least = if floor < spell.start { floor } else { spell.start };
    let until_disconnect = days_to_disconnect(
        spell.capacity,
        Ratio::new::<ratio>(spell.start.get()),
        Ratio::new::<ratio>(least.get()),
        spell.cold_fraction,
        spell.daily_demand,
    )?;
    let usable = spell.cold_fraction * spell.capacity * (spell.start.get() - least.get());
    Ok(ColdSpellOutcome { charge_admitted, floor, floor_by, usable, until_disconnect })
}
