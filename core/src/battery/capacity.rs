//! Capacity of a lead-acid or nickel-cadmium bank (R12), step by step after IEEE 1013.
//!
//! The demand is what leaves the bank: efficiencies of discharge (inverter, cable) are in it already, those of charge
//! belong to array and charger. Each factor stands in one step and nowhere else.

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;
use uom::si::time::day;

use super::charge::checked_celsius;
use super::{Chemistry, Datum, TEMPERATURE_FACTOR, capacity_factor, data};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCharge, ElectricCurrent, Ratio, ThermodynamicTemperature, Time};

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
    /// Hours in which the greatest current would take that capacity: the maker's rating at this rate, or at a shorter
    /// time, is the one that counts. `None` where the greatest current is nought.
    pub functional_time: Option<Time>,
}

/// Capacity of a lead-acid or nickel-cadmium bank, step by step (R12).
///
/// # Errors
/// [`Error::OutOfRange`] where an input is NaN, infinite or outside its range; [`Error::TableEnds`] where no
/// temperature factor is held and none is stated; [`Error::NotTabulated`] for lithium.
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

pub(super) fn demand(daily: ElectricCharge, autonomy: Time) -> Result<ElectricCharge, Error> {
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
pub(super) fn part(name: &'static str, value: Ratio) -> Result<(), Error> {
    let value = value.get::<ratio>();
    if value > 0.0 && value <= 1.0 {
        return Ok(());
    }
    Err(Error::OutOfRange { name, value, unit: "", allowed: Allowed::AboveUpTo(0.0, 1.0) })
}

pub(super) fn margin_factor(margin: Ratio) -> Result<Ratio, Error> {
    let value = margin.get::<ratio>();
    if (0.0..=2.0).contains(&value) {
        return Ok(Ratio::new::<ratio>(1.0) + margin);
    }
    Err(Error::OutOfRange { name: "margin", value, unit: "", allowed: Allowed::Between(0.0, 2.0) })
}

pub(super) fn current(name: &'static str, current: ElectricCurrent) -> Result<f64, Error> {
    let value = current.get::<ampere>();
    if value >= 0.0 && value.is_finite() {
        return Ok(value);
    }
    Err(Error::OutOfRange { name, value, unit: "A", allowed: Allowed::AtLeast(0.0) })
}

pub(super) fn checked_capacity(capacity: ElectricCharge) -> Result<ElectricCharge, Error> {
    let value = capacity.get::<ampere_hour>();
    if value.is_finite() {
        return Ok(capacity);
    }
    Err(Error::OutOfRange { name: "capacity", value, unit: "Ah", allowed: Allowed::Finite })
}

/// The greatest, the first of equals.
pub(super) fn greatest_of<const N: usize>(
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

}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::thermodynamic_temperature::degree_celsius;
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
            let base = lead_acid(Chemistry::Flooded, depth, daily, celsius);
            let need = LeadAcidNeed { end_of_life: r(life), margin: r(margin), ..base };
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
                let margin = LeadAcidNeed { margin: r(i), ..base };
                let temperature = LeadAcidNeed { lowest_temperature: at(f), ..base };
                for need in [need, one_odd, margin, temperature] {
                    if let Ok(steps) = lead_acid_capacity(&need) {
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
    fn lithium_has_a_procedure_of_its_own() {
        let lfp = lead_acid(Chemistry::Lfp, 0.5, 0.2, 10.0);
        assert_eq!(lead_acid_capacity(&lfp).unwrap_err().slug(), "not-tabulated");
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
