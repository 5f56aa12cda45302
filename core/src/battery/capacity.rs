//! Capacity of a bank (R12): lead-acid and nickel-cadmium step by step after IEEE 1013, lithium by its window.
//!
//! The demand is what leaves the bank: efficiencies of discharge (inverter, cable) are in it already, those of charge
//! belong to array and charger. Each factor stands in one step and nowhere else.

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::day;

use super::charge::checked_celsius;
use super::{Chemistry, Datum, cold_fraction, data, discharge_limit, line};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{ChargeRate, ElectricCharge, ElectricCurrent, Ratio, ThermodynamicTemperature, Time};

/// Source of the factors of [`temperature_factor()`].
pub const TEMPERATURE_FACTOR: Citation =
    Citation::new("IEEE Std 485, reprinted in IEEE Std 1013", "cell size correction, Table 1", Seen::Page);

/// Cell size correction, (°C, factor), coldest first. Rows of −3.9 to 1.7 °C and of 51.7 °C recalled, the others seen.
///
/// Vented lead-acid of relative density 1.215, base 25 °C; between rows the straight line, as the standard has it. Equal to
/// `ieee-485-temperature-factor` in `tests/reference/battery.toml` (tested there).
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

const NO_COLD_FACTOR: &str =
    "ask the maker for the capacity at that temperature and state its factor, or keep the bank warmer";

/// Factor by which a lead-acid or nickel-cadmium bank must be larger at a temperature than at 25 °C.
///
/// Flooded: the table of the standard. AGM and gel: the same table, by common practice, since it is that of vented cells; a
/// maker's own curve governs. Nickel-cadmium: one over [`cold_fraction`]. Above 25 °C the table goes below one;
/// [`lead_acid_capacity`] takes no credit for it.
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

/// What a lead-acid or nickel-cadmium bank has to do.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LeadAcidNeed {
    /// Flooded, AGM, gel or nickel-cadmium.
    pub chemistry: Chemistry,
    /// Charge that leaves the bank in a day, losses of inverter and cables included.
    pub daily_demand: ElectricCharge,
    /// Time without any charge.
    pub autonomy: Time,
    /// Greatest depth of discharge at its end.
    pub greatest_depth: Ratio,
    /// Greatest depth of discharge of an ordinary day.
    pub daily_depth: Ratio,
    /// Part of the capacity at which the bank counts as worn out, and must still do all this.
    pub end_of_life: Ratio,
    /// Lowest temperature of the electrolyte, not of the air.
    pub lowest_temperature: ThermodynamicTemperature,
    /// Factor of the maker at that temperature, in place of [`capacity_factor`].
    pub stated_factor: Option<Ratio>,
    /// What is added for loads to come and for doubt: 0.1 for a tenth.
    pub margin: Ratio,
    /// Greatest current that runs for long: it decides at which hour rate the capacity must be read.
    pub greatest_current: ElectricCurrent,
}

impl LeadAcidNeed {
    /// A need with the usual figures of a chemistry: its depths and end of life from [`data`], and a margin of a tenth.
    pub fn usual(
        chemistry: Chemistry,
        daily_demand: ElectricCharge,
        autonomy: Time,
        lowest_temperature: ThermodynamicTemperature,
        greatest_current: ElectricCurrent,
    ) -> Self {
        let held = data(chemistry);
        Self {
            chemistry,
            daily_demand,
            autonomy,
            greatest_depth: Ratio::new::<ratio>(held.usual_depth.value),
            daily_depth: Ratio::new::<ratio>(held.daily_depth.value),
            end_of_life: Ratio::new::<ratio>(held.end_of_life.value),
            lowest_temperature,
            stated_factor: None,
            margin: Ratio::new::<ratio>(0.1),
            greatest_current,
        }
    }
}

/// Which demand sets the capacity of a bank.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CapacityGoverned {
    /// Autonomy over the greatest depth, or over a lithium bank's usable window.
    Autonomy,
    /// The day's demand over the daily depth.
    Daily,
    /// Autonomy over the capacity left at the end of life.
    EndOfLife,
    /// The greatest current over the rate that a lithium bank bears.
    Current,
}

/// The steps from a demand to a capacity, each as it comes out.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LeadAcidSteps {
    /// Charge for the whole autonomy, before any factor.
    pub unadjusted: ElectricCharge,
    /// That over the greatest depth.
    pub by_autonomy: ElectricCharge,
    /// The day's demand over the daily depth.
    pub by_daily: ElectricCharge,
    /// The unadjusted charge over the part left at the end of life.
    pub by_end_of_life: ElectricCharge,
    /// Which of the three is the greatest.
    pub governed_by: CapacityGoverned,
    /// The greatest of the three.
    pub greatest: ElectricCharge,
    /// Factor for the lowest temperature, at least one.
    pub temperature_factor: Datum<Ratio>,
    /// The greatest, times that.
    pub at_temperature: ElectricCharge,
    /// One and the margin.
    pub margin_factor: Ratio,
    /// Capacity that the bank must have, at the functional-hour rate.
    pub capacity: ElectricCharge,
    /// Hours in which the greatest current would take that capacity: the maker's rating at this rate, or at a shorter time,
    /// is the one that counts. `None` where the greatest current is nought.
    pub functional_time: Option<Time>,
}

/// Capacity of a lead-acid or nickel-cadmium bank, step by step (R12).
///
/// # Errors
/// [`Error::OutOfRange`] where an input is NaN, infinite or outside its range; [`Error::TableEnds`] where no temperature factor
/// is held and none is stated; [`Error::NotTabulated`] for lithium.
///
/// # Source
/// IEEE Std 1013, the procedure recalled; its temperature factors as [`capacity_factor`].
///
/// # Example
/// 50 Ah a day for 5 days at 10 °C, to 80 % and 20 % daily:
/// ```
/// use ampwright::battery::{CapacityGoverned, Chemistry, LeadAcidNeed, lead_acid_capacity};
/// use ampwright::quantity::{parse, readable};
/// let steps = lead_acid_capacity(&LeadAcidNeed {
///     chemistry: Chemistry::Flooded,
///     daily_demand: parse("50 Ah")?,
///     autonomy: parse("5 d")?,
///     greatest_depth: parse("80 %")?,
///     daily_depth: parse("20 %")?,
///     end_of_life: parse("80 %")?,
///     lowest_temperature: parse("10 degC")?,
///     stated_factor: None,
///     margin: parse("10 %")?,
///     greatest_current: parse("5 A")?,
/// })?;
/// assert_eq!(steps.governed_by, CapacityGoverned::Autonomy);
/// assert_eq!(readable(steps.capacity).to_string(), "409 Ah"); // 250/0.8·1.19·1.1
/// assert_eq!(readable(steps.functional_time.unwrap()).to_string(), "3.41 d");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn lead_acid_capacity(need: &LeadAcidNeed) -> Result<LeadAcidSteps, Error> {
    let unadjusted = demand(need.daily_demand, need.autonomy)?;
    part("greatest depth", need.greatest_depth)?;
    part("daily depth", need.daily_depth)?;
    part("end of life", need.end_of_life)?;
    let margin_factor = margin_factor(need.margin)?;
    let current = current("greatest current", need.greatest_current)?;

    let by_autonomy = unadjusted / need.greatest_depth;
    let by_daily = need.daily_demand / need.daily_depth;
    let by_end_of_life = unadjusted / need.end_of_life;
    let (greatest, governed_by) = greatest_of([
        (by_autonomy, CapacityGoverned::Autonomy),
        (by_daily, CapacityGoverned::Daily),
        (by_end_of_life, CapacityGoverned::EndOfLife),
    ]);
    let temperature_factor = temperature_factor_of(need)?;
    let at_temperature = greatest * temperature_factor.value;
    let capacity = checked_capacity(at_temperature * margin_factor)?;
    let functional_time = (current > 0.0).then(|| capacity / need.greatest_current);
    Ok(LeadAcidSteps {
        unadjusted,
        by_autonomy,
        by_daily,
        by_end_of_life,
        governed_by,
        greatest,
        temperature_factor,
        at_temperature,
        margin_factor,
        capacity,
        functional_time,
    })
}

/// The factor of a need: as stated, else as tabulated; at least one, since warmth is no reason to buy less.
fn temperature_factor_of(need: &LeadAcidNeed) -> Result<Datum<Ratio>, Error> {
    let celsius = checked_celsius(need.lowest_temperature)?;
    let one = Ratio::new::<ratio>(1.0);
    let found = match need.stated_factor {
        Some(stated) => {
            let value = stated.get::<ratio>();
            if !(0.5..=20.0).contains(&value) {
                let allowed = Allowed::Between(0.5, 20.0);
                return Err(Error::OutOfRange { name: "temperature factor", value, unit: "", allowed });
            }
            Datum { value: stated, citation: Citation::new("the maker's factor", "as stated", Seen::Stated) }
        }
        // Warmer than the table goes the factor would be below one: none is needed.
        None if celsius > 25.0 && need.chemistry.is_lead_acid() => {
            Datum { value: one, citation: TEMPERATURE_FACTOR }
        }
        None => capacity_factor(need.chemistry, need.lowest_temperature)?,
    };
    Ok(if found.value < one { Datum { value: one, ..found } } else { found })
}

/// What a lithium bank has to do.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LithiumNeed {
    /// LFP or NMC.
    pub chemistry: Chemistry,
    /// Charge that leaves the bank in a day, losses of inverter and cables included.
    pub daily_demand: ElectricCharge,
    /// Time without any charge.
    pub autonomy: Time,
    /// Part of the capacity that is used, between the ends that are spared.
    pub window: Ratio,
    /// Part of the capacity at which the bank counts as worn out, and must still do all this.
    pub end_of_life: Ratio,
    /// Lowest temperature of the cells.
    pub lowest_temperature: ThermodynamicTemperature,
    /// Part of the capacity that the maker states there, in place of [`cold_fraction`].
    pub stated_fraction: Option<Ratio>,
    /// What is added for loads to come and for doubt: 0.1 for a tenth.
    pub margin: Ratio,
    /// Greatest current that runs for long.
    pub greatest_current: ElectricCurrent,
    /// Rate that the pack bears, as stated; else that of [`discharge_limit`].
    pub stated_rate: Option<ChargeRate>,
}

impl LithiumNeed {
    /// A need with the usual figures of a chemistry: window and end of life from [`data`], and a margin of a tenth.
    pub fn usual(
        chemistry: Chemistry,
        daily_demand: ElectricCharge,
        autonomy: Time,
        lowest_temperature: ThermodynamicTemperature,
        greatest_current: ElectricCurrent,
    ) -> Self {
        let held = data(chemistry);
        Self {
            chemistry,
            daily_demand,
            autonomy,
            window: Ratio::new::<ratio>(held.usual_depth.value),
            end_of_life: Ratio::new::<ratio>(held.end_of_life.value),
            lowest_temperature,
            stated_fraction: None,
            margin: Ratio::new::<ratio>(0.1),
            greatest_current,
            stated_rate: None,
        }
    }
}

/// The steps from a demand to the capacity of a lithium bank.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LithiumSteps {
    /// Charge for the whole autonomy, before any factor.
    pub unadjusted: ElectricCharge,
    /// That over the window.
    pub by_window: ElectricCharge,
    /// That over the part left at the end of life.
    pub at_end_of_life: ElectricCharge,
    /// Part that the cold leaves.
    pub cold_fraction: Datum<Ratio>,
    /// The capacity at end of life over that.
    pub at_temperature: ElectricCharge,
    /// One and the margin.
    pub margin_factor: Ratio,
    /// The capacity so far.
    pub by_charge: ElectricCharge,
    /// Greatest rate of discharge at the lowest temperature.
    pub rate: Datum<ChargeRate>,
    /// Capacity that bears the greatest current at that rate.
    pub by_current: ElectricCharge,
    /// Which of the two governs.
    pub governed_by: CapacityGoverned,
    /// Capacity that the bank must have.
    pub capacity: ElectricCharge,
}

/// Capacity of a lithium bank, step by step (R12).
///
/// # Errors
/// [`Error::OutOfRange`] where an input is NaN, infinite or outside its range; [`Error::TableEnds`] below the coldest
/// temperature held, [`Error::Contradiction`] where no discharge is admitted there; [`Error::NotTabulated`] for other
/// chemistries.
///
/// # Source
/// Charge balance; the cold fraction recalled, the rate of discharge as [`discharge_limit`].
///
/// # Example
/// 50 Ah a day for 2 days at −10 °C: the current of a large inverter asks for more than the charge does.
/// ```
/// use ampwright::battery::{CapacityGoverned, Chemistry, LithiumNeed, lithium_capacity};
/// use ampwright::quantity::{parse, readable};
/// let need = LithiumNeed::usual(Chemistry::Lfp, parse("50 Ah")?, parse("2 d")?, parse("-10 degC")?, parse("300 A")?);
/// let steps = lithium_capacity(&need)?;
/// assert_eq!(readable(steps.by_charge).to_string(), "246 Ah"); // 100/0.8/0.8/0.7·1.1
/// assert_eq!(steps.governed_by, CapacityGoverned::Current);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn lithium_capacity(need: &LithiumNeed) -> Result<LithiumSteps, Error> {
    let unadjusted = demand(need.daily_demand, need.autonomy)?;
    part("window", need.window)?;
    part("end of life", need.end_of_life)?;
    let margin_factor = margin_factor(need.margin)?;
    current("greatest current", need.greatest_current)?;
    let rate = rate_of(need)?;
    let cold_fraction = match need.stated_fraction {
        Some(stated) => {
            part("cold fraction", stated)?;
            Datum {
                value: stated,
                citation: Citation::new("the maker's capacity", "as stated", Seen::Stated),
            }
        }
        None => cold_fraction(need.chemistry, need.lowest_temperature)?,
    };

    let by_window = unadjusted / need.window;
    let at_end_of_life = by_window / need.end_of_life;
    let at_temperature = at_end_of_life / cold_fraction.value;
    let by_charge = checked_capacity(at_temperature * margin_factor)?;
    let by_current = checked_capacity(ElectricCharge::new::<ampere_hour>(
        need.greatest_current.get::<ampere>() / rate.value.get(),
    ))?;
    let (capacity, governed_by) =
        greatest_of([(by_charge, CapacityGoverned::Autonomy), (by_current, CapacityGoverned::Current)]);
    Ok(LithiumSteps {
        unadjusted,
        by_window,
        at_end_of_life,
        cold_fraction,
        at_temperature,
        margin_factor,
        by_charge,
        rate,
        by_current,
        governed_by,
        capacity,
    })
}

fn rate_of(need: &LithiumNeed) -> Result<Datum<ChargeRate>, Error> {
    let held = discharge_limit(need.chemistry, need.lowest_temperature)?;
    let Some((usual, citation)) = held else {
        return Err(Error::NotTabulated {
            what: "the window of a lead-acid or nickel-cadmium bank",
            table: Citation::new("the procedures held", "lithium", Seen::Derived),
            remedy: "size it step by step after the standard, with depths and a temperature factor",
        });
    };
    let stated = Citation::new("the maker's rate", "as stated", Seen::Stated);
    let rate =
        need.stated_rate.map_or(Datum { value: usual, citation }, |value| Datum { value, citation: stated });
    if rate.value.get() > 0.0 {
        return Ok(rate);
    }
    Err(Error::Contradiction {
        name: "lowest temperature",
        value: need.lowest_temperature.get::<degree_celsius>(),
        unit: "degC",
        why: "no discharge is admitted there; keep the bank warmer, or state the rate of a pack made for it",
    })
}

fn demand(daily: ElectricCharge, autonomy: Time) -> Result<ElectricCharge, Error> {
    let (ampere_hours, days) = (daily.get::<ampere_hour>(), autonomy.get::<day>());
    let refuse = |name, value, unit, allowed| Err(Error::OutOfRange { name, value, unit, allowed });
    if !(ampere_hours > 0.0 && ampere_hours.is_finite()) {
        return refuse("daily demand", ampere_hours, "Ah", Allowed::Above(0.0));
    }
    if !(days > 0.0 && days <= 366.0) {
        return refuse("autonomy", days, "d", Allowed::AboveUpTo(0.0, 366.0));
    }
    Ok(daily * days)
}

/// A part above nought and up to one.
fn part(name: &'static str, value: Ratio) -> Result<(), Error> {
    let value = value.get::<ratio>();
    if value > 0.0 && value <= 1.0 {
        return Ok(());
    }
    Err(Error::OutOfRange { name, value, unit: "", allowed: Allowed::AboveUpTo(0.0, 1.0) })
}

fn margin_factor(margin: Ratio) -> Result<Ratio, Error> {
    let value = margin.get::<ratio>();
    if (0.0..=2.0).contains(&value) {
        return Ok(Ratio::new::<ratio>(1.0) + margin);
    }
    Err(Error::OutOfRange { name: "margin", value, unit: "", allowed: Allowed::Between(0.0, 2.0) })
}

fn current(name: &'static str, current: ElectricCurrent) -> Result<f64, Error> {
    let value = current.get::<ampere>();
    if value >= 0.0 && value.is_finite() {
        return Ok(value);
    }
    Err(Error::OutOfRange { name, value, unit: "A", allowed: Allowed::AtLeast(0.0) })
}

fn checked_capacity(capacity: ElectricCharge) -> Result<ElectricCharge, Error> {
    let value = capacity.get::<ampere_hour>();
    if value.is_finite() {
        return Ok(capacity);
    }
    Err(Error::OutOfRange { name: "capacity", value, unit: "Ah", allowed: Allowed::Finite })
}

/// The greatest, the first of equals.
fn greatest_of<const N: usize>(
    demands: [(ElectricCharge, CapacityGoverned); N],
) -> (ElectricCharge, CapacityGoverned) {
    let nothing = (ElectricCharge::new::<ampere_hour>(0.0), CapacityGoverned::Autonomy);
    demands.into_iter().fold(nothing, |best, next| if next.0 > best.0 { next } else { best })
}

/// How much hangs on a load.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LoadClass {
    /// It may fail now and then, or the sun is high and steady.
    NonCritical,
    /// It must not fail, or the sun is low.
    Critical,
}

/// Days of autonomy that are recommended for a class of load, least and greatest.
///
/// Equal to `autonomy-days` in `tests/reference/battery.toml` (tested there).
///
/// ```
/// # use ampwright::battery::{LoadClass, autonomy_days};
/// assert_eq!(autonomy_days(LoadClass::Critical).value, (7.0, 14.0));
/// ```
pub const fn autonomy_days(class: LoadClass) -> Datum<(f64, f64)> {
    let citation = Citation::new("IEEE Std 1013 and IEEE Std 1562", "days of autonomy", Seen::Recalled);
    let value = match class {
        LoadClass::NonCritical => (5.0, 7.0),
        LoadClass::Critical => (7.0, 14.0),
    };
    Datum { value, citation }
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
    formula "the straight line between 41 rows from 1.52 at −3.9 °C over 1.19 at 10 °C and 1 at 25 °C to 0.85 at 51.7 °C"
    source "IEEE Std 485, Table 1, reprinted in IEEE Std 1013; rows up to 1.7 °C and at 51.7 °C recalled"
    fallible "the temperature lies below −3.9 or above 51.7 °C, where the table holds nothing"
    { factor_at(temperature.get::<degree_celsius>()).map(Ratio::new::<ratio>) }

    /// Capacity of a bank by its autonomy, before temperature and margin.
    ///
    /// # Example
    /// 40 Ah a day for 5 days, to 80 %:
    /// ```
    /// use ampwright::{battery::bank_capacity_autonomy, quantity::{parse, readable}};
    /// let result = bank_capacity_autonomy(parse("40 Ah")?, parse("5 d")?, parse("80 %")?)?;
    /// assert_eq!(readable(result).to_string(), "250 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn bank_capacity_autonomy(
        /// Charge that leaves the bank in a day.
        daily_demand: ElectricCharge in ampere_hour [>= 0.0],
        /// Time without any charge.
        autonomy: Time in day [> 0.0],
        /// Greatest depth of discharge at its end; for lithium the usable window.
        greatest_depth: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> capacity: ElectricCharge in ampere_hour
    formula "C = Q·N/DoD"
    source "IEEE Std 1013, recalled"
    { daily_demand * autonomy.get::<day>() / greatest_depth }

    /// Capacity of a bank by its daily depth of discharge, before temperature and margin.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::bank_capacity_daily, quantity::{parse, readable}};
    /// let result = bank_capacity_daily(parse("40 Ah")?, parse("20 %")?)?;
    /// assert_eq!(readable(result).to_string(), "200 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn bank_capacity_daily(
        /// Charge that leaves the bank in a day.
        daily_demand: ElectricCharge in ampere_hour [>= 0.0],
        /// Greatest depth of discharge of an ordinary day.
        daily_depth: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> capacity: ElectricCharge in ampere_hour
    formula "C = Q/DoD"
    source "IEEE Std 1013, recalled"
    { daily_demand / daily_depth }

    /// Capacity of a bank that must hold its autonomy to the end of its life, before temperature and margin.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::bank_capacity_end_of_life, quantity::{parse, readable}};
    /// let result = bank_capacity_end_of_life(parse("40 Ah")?, parse("5 d")?, parse("80 %")?)?;
    /// assert_eq!(readable(result).to_string(), "250 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn bank_capacity_end_of_life(
        /// Charge that leaves the bank in a day.
        daily_demand: ElectricCharge in ampere_hour [>= 0.0],
        /// Time without any charge.
        autonomy: Time in day [> 0.0],
        /// Part of the capacity that is left when the bank counts as worn out.
        end_of_life: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> capacity: ElectricCharge in ampere_hour
    formula "C = Q·N/a"
    source "IEEE Std 1013, recalled"
    { daily_demand * autonomy.get::<day>() / end_of_life }

    /// Hours in which a current takes a capacity: the hour rate at which a rating is read.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::functional_time, quantity::{parse, readable}};
    /// let result = functional_time(parse("400 Ah")?, parse("8 A")?)?;
    /// assert_eq!(readable(result).to_string(), "2.08 d");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn functional_time(
        /// That the bank must have.
        capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Greatest that runs for long.
        current: ElectricCurrent in ampere [> 0.0],
    ) -> duration: Time in hour
    formula "t = C/I"
    source "IEEE Std 1013, functional-hour rate, recalled"
    { capacity / current }

    /// Capacity of a lithium bank by its charge, from the demand to the margin.
    ///
    /// The current that the bank bears is another matter: [`discharge_current_limit()`](super::discharge_current_limit()).
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::bank_capacity_lithium, quantity::{parse, readable}};
    /// let result = bank_capacity_lithium(
    ///     parse("50 Ah")?, parse("2 d")?, parse("80 %")?, parse("80 %")?, parse("70 %")?, parse("10 %")?,
    /// )?;
    /// assert_eq!(readable(result).to_string(), "246 Ah");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn bank_capacity_lithium(
        /// Charge that leaves the bank in a day.
        daily_demand: ElectricCharge in ampere_hour [>= 0.0],
        /// Time without any charge.
        autonomy: Time in day [> 0.0],
        /// Part of the capacity that is used.
        window: Ratio in ratio [> 0.0 ..= 1.0] = 0.8,
        /// Part of the capacity that is left when the bank counts as worn out.
        end_of_life: Ratio in ratio [> 0.0 ..= 1.0] = 0.8,
        /// Part of the capacity that the cold leaves.
        cold_fraction: Ratio in ratio [> 0.0 ..= 1.0] = 1.0,
        /// For loads to come and for doubt.
        margin: Ratio in ratio [0.0 ..= 2.0] = 0.1,
    ) -> capacity: ElectricCharge in ampere_hour
    formula "C = Q·N/(w·a·f)·(1 + m)"
    source "charge balance, each factor once"
    {
        let factors = window * end_of_life * cold_fraction / (Ratio::new::<ratio>(1.0) + margin);
        daily_demand * autonomy.get::<day>() / factors
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::time::hour;

    fn ah(value: f64) -> ElectricCharge {
        ElectricCharge::new::<ampere_hour>(value)
    }
    fn r(value: f64) -> Ratio {
        Ratio::new::<ratio>(value)
    }
    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }
    fn lead_acid(chemistry: Chemistry, depth: f64, daily: f64, celsius: f64) -> LeadAcidNeed {
        LeadAcidNeed {
            greatest_depth: r(depth),
            daily_depth: r(daily),
            ..LeadAcidNeed::usual(
                chemistry,
                ah(40.0),
                Time::new::<day>(4.0),
                at(celsius),
                ElectricCurrent::new::<ampere>(10.0),
            )
        }
    }
    fn needed(need: &LeadAcidNeed) -> f64 {
        lead_acid_capacity(need).unwrap().capacity.get::<ampere_hour>()
    }

    proptest! {
        #[test]
        fn deeper_or_warmer_never_needs_more(
            place in 0usize..4, depth in 0.1..0.9f64, daily in 0.05..0.9f64, deeper in 0.0..0.1f64,
            celsius in -3.9..50.0f64, warmer in 0.0..20.0f64,
        ) {
            let chemistry =
                [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel, Chemistry::NickelCadmium][place];
            let base = needed(&lead_acid(chemistry, depth, daily, celsius));
            let warm = (celsius + warmer).min(51.7);
            for other in [
                lead_acid(chemistry, depth + deeper, daily, celsius),
                lead_acid(chemistry, depth, daily + deeper, celsius),
                lead_acid(chemistry, depth, daily, warm),
            ] {
                prop_assert!(needed(&other) <= base * (1.0 + 1e-12));
            }
        }

        #[test]
        fn the_capacity_fulfils_every_demand_and_no_more_than_one_to_the_brim(
            depth in 0.1..1.0f64, daily in 0.05..1.0f64, life in 0.3..1.0f64, celsius in -3.9..50.0f64,
            margin in 0.0..0.5f64,
        ) {
            let need = LeadAcidNeed { end_of_life: r(life), margin: r(margin), ..lead_acid(Chemistry::Flooded, depth, daily, celsius) };
            let steps = lead_acid_capacity(&need).unwrap();
            // Backwards: what is left of it without margin, in the cold.
            let left = steps.capacity.get::<ampere_hour>() / (1.0 + margin) / steps.temperature_factor.value.value;
            let spare = [left * depth - 160.0, left * daily - 40.0, left * life - 160.0];
            let place = match steps.governed_by {
                CapacityGoverned::Autonomy => 0,
                CapacityGoverned::Daily => 1,
                _ => 2,
            };
            prop_assert!(spare.iter().all(|x| *x > -1e-9), "{spare:?}");
            prop_assert!(spare[place].abs() < 1e-9, "{spare:?}");
        }

        #[test]
        fn lithium_in_the_cold_or_with_more_current_never_needs_less(
            celsius in -20.0..25.0f64, colder in 0.0..10.0f64, amperes in 0.0..500.0f64, more in 0.0..100.0f64,
        ) {
            let need = |celsius: f64, amperes: f64| {
                LithiumNeed::usual(Chemistry::Lfp, ah(40.0), Time::new::<day>(2.0), at(celsius), ElectricCurrent::new::<ampere>(amperes))
            };
            let of = |need| lithium_capacity(&need).unwrap().capacity.get::<ampere_hour>();
            let base = of(need(celsius, amperes));
            prop_assert!(of(need((celsius - colder).max(-20.0), amperes)) >= base);
            prop_assert!(of(need(celsius, amperes + more)) >= base && base >= amperes * (1.0 - 1e-12));
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(bits: [u64; 8]) {
            let [a, b, c, d, e, f, g, i] = bits.map(f64::from_bits);
            for chemistry in Chemistry::ALL {
                let need = LeadAcidNeed {
                    chemistry,
                    daily_demand: ah(a),
                    autonomy: Time::new::<day>(b),
                    greatest_depth: r(c),
                    daily_depth: r(d),
                    end_of_life: r(e),
                    lowest_temperature: at(f),
                    stated_factor: Some(r(g)),
                    margin: r(i),
                    greatest_current: ElectricCurrent::new::<ampere>(a),
                };
                let base = lead_acid(chemistry, 0.5, 0.2, 10.0);
                let one_odd = LeadAcidNeed { daily_demand: ah(a), ..base };
                for need in [need, one_odd, LeadAcidNeed { margin: r(i), ..base }, LeadAcidNeed { lowest_temperature: at(f), ..base }] {
                    if let Ok(steps) = lead_acid_capacity(&need) {
                        prop_assert!(steps.capacity.value.is_finite() && steps.capacity.value > 0.0);
                    }
                }
                let usual = LithiumNeed::usual(chemistry, ah(a), Time::new::<day>(b), at(f), ElectricCurrent::new::<ampere>(g));
                for need in [usual, LithiumNeed { window: r(c), end_of_life: r(d), stated_fraction: Some(r(e)), ..usual }] {
                    if let Ok(steps) = lithium_capacity(&need) {
                        prop_assert!(steps.capacity.value.is_finite() && steps.capacity.value > 0.0);
                    }
                }
            }
        }
    }

    #[test]
    fn nobody_is_credited_with_warmth() {
        for celsius in [25.0, 30.0, 50.0, 60.0] {
            for chemistry in [Chemistry::Flooded, Chemistry::NickelCadmium] {
                let steps = lead_acid_capacity(&lead_acid(chemistry, 0.5, 0.2, celsius)).unwrap();
                assert_eq!(steps.temperature_factor.value.value, 1.0, "{chemistry} at {celsius}");
            }
        }
        let stated =
            LeadAcidNeed { stated_factor: Some(r(0.9)), ..lead_acid(Chemistry::Agm, 0.5, 0.2, 40.0) };
        assert_eq!(lead_acid_capacity(&stated).unwrap().temperature_factor.value.value, 1.0);
    }

    #[test]
    fn below_the_table_the_makers_factor_is_asked_for_and_taken() {
        let cold = lead_acid(Chemistry::Flooded, 0.5, 0.2, -10.0);
        let error = lead_acid_capacity(&cold).unwrap_err();
        assert!(
            matches!(error, Error::TableEnds { value: -10.0, remedy, .. } if remedy.contains("state its factor")),
            "{error}"
        );
        let steps = lead_acid_capacity(&LeadAcidNeed { stated_factor: Some(r(1.8)), ..cold }).unwrap();
        assert_eq!(steps.temperature_factor.citation.seen, Seen::Stated);
        assert!((steps.capacity.get::<ampere_hour>() - 320.0 * 1.8 * 1.1).abs() < 1e-9);
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

    #[test]
    fn chemistries_take_their_own_procedure() {
        assert_eq!(
            lead_acid_capacity(&lead_acid(Chemistry::Lfp, 0.5, 0.2, 10.0)).unwrap_err().slug(),
            "not-tabulated"
        );
        let lead = LithiumNeed::usual(
            Chemistry::Agm,
            ah(1.0),
            Time::new::<day>(1.0),
            at(20.0),
            ElectricCurrent::new::<ampere>(1.0),
        );
        assert_eq!(lithium_capacity(&lead).unwrap_err().slug(), "not-tabulated");
        let frozen = LithiumNeed { chemistry: Chemistry::Lfp, lowest_temperature: at(-30.0), ..lead };
        assert_eq!(lithium_capacity(&frozen).unwrap_err().slug(), "contradiction");
    }

    #[test]
    fn without_a_current_there_is_no_functional_time() {
        let need = LeadAcidNeed {
            greatest_current: ElectricCurrent::new::<ampere>(0.0),
            ..lead_acid(Chemistry::Agm, 0.5, 0.2, 20.0)
        };
        assert_eq!(lead_acid_capacity(&need).unwrap().functional_time, None);
        let hours = lead_acid_capacity(&lead_acid(Chemistry::Agm, 0.5, 0.2, 25.0)).unwrap().functional_time;
        assert!((hours.unwrap().get::<hour>() - 35.2).abs() < 1e-9); // 160/0.5·1.1 Ah by 10 A
    }
}
