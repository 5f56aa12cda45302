//! Capacity of a lithium bank (R12): by its window, its end of life, the cold, and its current.
//!
//! The demand is what leaves the bank, as for lead-acid. Each factor stands in one step and nowhere else.

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::day;

use super::capacity::{checked_capacity, current, demand, greatest_of, margin_factor, part};
use super::{CapacityGoverned, Chemistry, Datum, cold_fraction, data, discharge_limit};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::quantity::{ChargeRate, ElectricCharge, ElectricCurrent, Ratio, ThermodynamicTemperature, Time};

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

calculations! {
    /// Capacity of a lithium bank by its charge, from the demand to the margin.
    ///
    /// The current that the bank bears is another matter:
    /// [`discharge_current_limit()`](super::discharge_current_limit()).
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

    fn ah(value: f64) -> ElectricCharge {
        ElectricCharge::new::<ampere_hour>(value)
    }
    fn r(value: f64) -> Ratio {
        Ratio::new::<ratio>(value)
    }
    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }
    fn usual(chemistry: Chemistry, celsius: f64, amperes: f64) -> LithiumNeed {
        let current = ElectricCurrent::new::<ampere>(amperes);
        LithiumNeed::usual(chemistry, ah(40.0), Time::new::<day>(2.0), at(celsius), current)
    }

    proptest! {
        #[test]
        fn in_the_cold_or_with_more_current_it_never_needs_less(
            celsius in -20.0..25.0f64, colder in 0.0..10.0f64, amperes in 0.0..500.0f64, more in 0.0..100.0f64,
        ) {
            let of = |celsius: f64, amperes: f64| {
                lithium_capacity(&usual(Chemistry::Lfp, celsius, amperes)).unwrap().capacity.get::<ampere_hour>()
            };
            let base = of(celsius, amperes);
            prop_assert!(of((celsius - colder).max(-20.0), amperes) >= base);
            prop_assert!(of(celsius, amperes + more) >= base && base >= amperes * (1.0 - 1e-12));
        }

        #[test]
        fn the_capacity_fulfils_what_was_asked_of_it(
            window in 0.2..1.0f64, life in 0.5..1.0f64, celsius in -20.0..40.0f64, margin in 0.0..0.5f64,
        ) {
            let base = usual(Chemistry::Nmc, celsius, 1.0);
            let need = LithiumNeed { window: r(window), end_of_life: r(life), margin: r(margin), ..base };
            let steps = lithium_capacity(&need).unwrap();
            // Backwards, in another order: worn, cold, within the window.
            let left = steps.capacity.get::<ampere_hour>() / (1.0 + margin) * life * steps.cold_fraction.value.value * window;
            prop_assert!((left - 80.0).abs() < 1e-9, "{left}");
            let entry = bank_capacity_lithium(
                need.daily_demand, need.autonomy, need.window, need.end_of_life, steps.cold_fraction.value, need.margin,
            ).unwrap();
            prop_assert!((entry.value / steps.by_charge.value - 1.0).abs() < 1e-12);
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(bits: [u64; 6]) {
            let [a, b, c, d, e, f] = bits.map(f64::from_bits);
            for chemistry in Chemistry::ALL {
                let odd = LithiumNeed::usual(chemistry, ah(a), Time::new::<day>(b), at(c), ElectricCurrent::new::<ampere>(d));
                let base = usual(chemistry, 10.0, 5.0);
                for need in [
                    odd,
                    LithiumNeed { window: r(c), end_of_life: r(d), stated_fraction: Some(r(e)), ..base },
                    LithiumNeed { daily_demand: ah(a), margin: r(f), ..base },
                    LithiumNeed { lowest_temperature: at(c), greatest_current: ElectricCurrent::new::<ampere>(e), ..base },
                ] {
                    if let Ok(steps) = lithium_capacity(&need) {
                        prop_assert!(steps.capacity.value.is_finite() && steps.capacity.value > 0.0);
                    }
                }
            }
        }
    }

    #[test]
    fn lead_acid_and_temperatures_without_discharge_are_refused() {
        let slug = |need: &LithiumNeed| lithium_capacity(need).unwrap_err().slug();
        assert_eq!(slug(&usual(Chemistry::Agm, 20.0, 1.0)), "not-tabulated");
        let frozen = usual(Chemistry::Lfp, -30.0, 1.0);
        assert_eq!(slug(&frozen), "contradiction");
        // With a rate alone the capacity is still unknown; with both it is answered.
        let rate = ChargeRate::per_hour(0.1).ok();
        assert_eq!(slug(&LithiumNeed { stated_rate: rate, ..frozen }), "table-ends");
        let stated = LithiumNeed { stated_rate: rate, stated_fraction: Some(r(0.4)), ..frozen };
        assert_eq!(lithium_capacity(&stated).unwrap().rate.citation.seen, Seen::Stated);
    }
}
