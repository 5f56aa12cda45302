//! The capacity of a lead-acid bank for a stand-alone system, step by step as IEEE Std 1013 goes.
//!
//! The procedure is recalled; the page with its worked annex was not seen, and nothing here stands in for it. The
//! numbers are our own, an invented repeater station; each step is worked by hand beside the call, in whole numbers
//! where that goes.

use ampwright::battery::{
    CapacityGoverned, Chemistry, LeadAcidNeed, LoadClass, Unit, autonomy_days, bank_capacity_autonomy,
    bank_capacity_daily, bank_capacity_end_of_life, capacity_factor, data, functional_time,
    hour_rate_capacity, layout, lead_acid_capacity, series_cells, set_points, temperature_factor,
};
use ampwright::quantity::{
    ElectricCharge, ElectricCurrent, ElectricPotential, Ratio, ThermodynamicTemperature, Time, parse,
};
use ampwright::{Error, law};
use uom::si::electric_charge::ampere_hour;
use uom::si::electric_potential::volt;
use uom::si::ratio::ratio;
use uom::si::time::{day, hour};

/// Worked by hand without rounding: what is left is the rounding of f64.
fn near(result: f64, by_hand: f64) {
    assert!((result - by_hand).abs() <= 1e-9 * by_hand.abs(), "{result}, by hand {by_hand}");
}
fn ah(x: ElectricCharge) -> f64 {
    x.get::<ampere_hour>()
}

/// Loads of the station, (amperes, hours a day), at the bank: losses of converters are in them.
const LOADS: [(f64, f64); 3] = [
    (2.0, 24.0), // receiver
    (8.0, 3.0),  // transmitter
    (0.5, 24.0), // controllers and alarms
];

fn station() -> Result<LeadAcidNeed, Error> {
    let daily = LOADS.into_iter().try_fold(parse::<ElectricCharge>("0 Ah")?, |sum, (amperes, hours)| {
        let current = ElectricCurrent::new::<uom::si::electric_current::ampere>(amperes);
        law::charge(current, Time::new::<hour>(hours)).map(|charge| sum + charge)
    })?;
    Ok(LeadAcidNeed {
        chemistry: Chemistry::Flooded,
        daily_demand: daily,
        autonomy: Time::new::<day>(autonomy_days(LoadClass::Critical).value.0),
        greatest_depth: parse("80 %")?,
        daily_depth: parse("20 %")?,
        end_of_life: parse("80 %")?,
        lowest_temperature: parse("-1.1 degC")?,
        stated_factor: None,
        margin: parse("10 %")?,
        // Receiver, transmitter and controllers together.
        greatest_current: parse("10.5 A")?,
    })
}

/// Source: IEEE Std 1013, load: charge of each load in a day, summed. 2·24 + 8·3 + 0.5·24 = 84 Ah.
#[test]
fn step_1_the_load_of_a_day() -> Result<(), Error> {
    near(ah(station()?.daily_demand), 48.0 + 24.0 + 12.0);
    Ok(())
}

/// Source: IEEE Std 1013 and 1562, recalled: 7 to 14 days where the load must not fail.
#[test]
fn step_2_days_of_autonomy() -> Result<(), Error> {
    assert_eq!(autonomy_days(LoadClass::Critical).value, (7.0, 14.0));
    assert_eq!(station()?.autonomy.get::<day>(), 7.0);
    Ok(())
}

/// Source: IEEE Std 485 and 1013, recalled: as many cells as the greatest voltage admits, as few volts each as the
/// least leaves. Equipment of 21 to 31 V; flooded cells, equalised at 2.585 V at 25 °C: 31/2.585 = 11.99, so 11; a
/// charger that keeps to 2.5 V admits 12, and leaves each 1.75 V.
#[test]
fn step_3_number_of_cells_and_end_voltage() -> Result<(), Error> {
    let usual = set_points(Chemistry::Flooded, 1, parse("25 degC")?)?.equalise.unwrap().usual();
    near(usual.get::<volt>(), 2.585);
    let volts = ElectricPotential::new::<volt>;
    near(series_cells(volts(31.0), usual, volts(21.0))?.cells.value, 11.0);
    let found = series_cells(volts(31.0), volts(2.5), volts(21.0))?;
    near(found.cells.value, 12.0);
    near(found.end_voltage.get::<volt>(), 21.0 / 12.0);
    Ok(())
}

/// Source: IEEE Std 1013: the charge of the whole autonomy. 84 Ah · 7 = 588 Ah.
#[test]
fn step_4_unadjusted_capacity() -> Result<(), Error> {
    near(ah(lead_acid_capacity(&station()?)?.unadjusted), 588.0);
    Ok(())
}

/// Source: IEEE Std 1013: three adjustments side by side, of which the greatest goes on. 588/0.8 = 735 Ah by depth,
/// 84/0.2 = 420 Ah by day, 588/0.8 = 735 Ah by end of life; of equals the first is named.
#[test]
fn step_5_depth_day_and_end_of_life() -> Result<(), Error> {
    let need = station()?;
    let steps = lead_acid_capacity(&need)?;
    near(ah(steps.by_autonomy), 735.0);
    near(ah(steps.by_daily), 420.0);
    near(ah(steps.by_end_of_life), 735.0);
    assert_eq!((ah(steps.greatest), steps.governed_by), (ah(steps.by_autonomy), CapacityGoverned::Autonomy));
    // The catalogue's functions are those steps.
    assert_eq!(
        bank_capacity_autonomy(need.daily_demand, need.autonomy, need.greatest_depth)?,
        steps.by_autonomy
    );
    assert_eq!(bank_capacity_daily(need.daily_demand, need.daily_depth)?, steps.by_daily);
    assert_eq!(
        bank_capacity_end_of_life(need.daily_demand, need.autonomy, need.end_of_life)?,
        steps.by_end_of_life
    );
    // A greater depth, and the end of life governs: 588/0.8 against 588/0.9.
    let deep = LeadAcidNeed { greatest_depth: parse("90 %")?, ..need };
    assert_eq!(lead_acid_capacity(&deep)?.governed_by, CapacityGoverned::EndOfLife);
    near(ah(lead_acid_capacity(&deep)?.greatest), 735.0);
    // Two days of autonomy, and the day governs: 168/0.8 = 210 against 420.
    let short = LeadAcidNeed { autonomy: parse("2 d")?, ..need };
    assert_eq!(lead_acid_capacity(&short)?.governed_by, CapacityGoverned::Daily);
    near(ah(lead_acid_capacity(&short)?.greatest), 420.0);
    Ok(())
}

/// Source: IEEE Std 485, Table 1, row of −1.1 °C (recalled): 1.43. 735 · 1.43 = 1051.05 Ah. Between −1.1 and 1.7 °C
/// the straight line: at 0.3 °C 1.39. Below −3.9 °C the table holds nothing, and the maker's figure is asked for.
#[test]
fn step_6_lowest_temperature() -> Result<(), Error> {
    let steps = lead_acid_capacity(&station()?)?;
    near(steps.temperature_factor.value.get::<ratio>(), 1.43);
    near(ah(steps.at_temperature), 1051.05);
    let half_way: ThermodynamicTemperature = parse("0.3 degC")?;
    near(temperature_factor(half_way)?.value, 1.39);
    near(capacity_factor(Chemistry::Flooded, half_way)?.value.value, 1.39);
    let colder = LeadAcidNeed { lowest_temperature: parse("-12 degC")?, ..station()? };
    assert_eq!(lead_acid_capacity(&colder).unwrap_err().slug(), "table-ends");
    let stated = LeadAcidNeed { stated_factor: Some(Ratio::new::<ratio>(1.9)), ..colder };
    near(ah(lead_acid_capacity(&stated)?.at_temperature), 1396.5);
    Ok(())
}

/// Source: IEEE Std 1013: a margin of 10 to 25 % for loads to come and for doubt. 1051.05 · 1.1 = 1156.155 Ah.
#[test]
fn step_7_design_margin() -> Result<(), Error> {
    let steps = lead_acid_capacity(&station()?)?;
    near(steps.margin_factor.value, 1.1);
    near(ah(steps.capacity), 1156.155);
    Ok(())
}

/// Source: IEEE Std 1013: the hour rate at which the rating is read. 1156.155 Ah / 10.5 A = 110.11 h: a rating at 100
/// h, the next shorter of the usual ones, holds.
#[test]
fn step_8_functional_hour_rate() -> Result<(), Error> {
    let need = station()?;
    let steps = lead_acid_capacity(&need)?;
    let hours = steps.functional_time.unwrap();
    near(hours.get::<hour>(), 1156.155 / 10.5);
    assert_eq!(functional_time(steps.capacity, need.greatest_current)?, hours);
    let usual = [5.0, 10.0, 20.0, 100.0, 240.0];
    let read_at = usual.into_iter().rfind(|rate| *rate <= hours.get::<hour>());
    assert_eq!(read_at, Some(100.0));
    Ok(())
}

/// Source: IEEE Std 1013: cells are chosen whose capacity at that rate is enough, in one string or a few. Invented
/// cells of 2 V, 500 Ah at 10 h, by Peukert's law with 1.2: 500·10^(1/6) = 733.9 Ah at 100 h, so two strings of
/// twelve.
#[test]
fn step_9_cells_and_strings() -> Result<(), Error> {
    let steps = lead_acid_capacity(&station()?)?;
    let exponent = data(Chemistry::Flooded).peukert.value.0;
    let capacity =
        hour_rate_capacity(parse("500 Ah")?, parse("10 h")?, parse("100 h")?, Ratio::new::<ratio>(exponent))?;
    let rise = ah(capacity) / 500.0;
    near(rise * rise * rise * rise * rise * rise, 10.0);
    let cell = Unit {
        chemistry: Chemistry::Flooded,
        nominal: parse("2 V")?,
        capacity,
        max_series: 24,
        max_parallel: 3,
    };
    let bank = layout(&cell, parse("24 V")?, steps.capacity)?;
    assert_eq!((bank.series, bank.strings, bank.cells), (12, 2, 12));
    assert!(bank.capacity >= steps.capacity);
    Ok(())
}

/// Source: IEEE Std 1013, the steps together, in plain numbers beside the library's: every product of the table's rows.
#[test]
fn the_steps_together_over_many_needs() -> Result<(), Error> {
    let base = station()?;
    let mut governed = [0; 3];
    for daily in [1.0, 17.5, 84.0, 900.0] {
        for days in [0.5, 2.0, 7.0, 14.0] {
            for (depth, day_depth, life) in [(0.8, 0.2, 0.8), (0.5, 0.15, 0.8), (0.9, 0.4, 0.6)] {
                for (celsius, factor) in [(4.4, 1.3), (10.0, 1.19), (25.0, 1.0), (35.0, 1.0)] {
                    for margin in [0.0, 0.1, 0.25] {
                        let need = LeadAcidNeed {
                            daily_demand: ElectricCharge::new::<ampere_hour>(daily),
                            autonomy: Time::new::<day>(days),
                            greatest_depth: Ratio::new::<ratio>(depth),
                            daily_depth: Ratio::new::<ratio>(day_depth),
                            end_of_life: Ratio::new::<ratio>(life),
                            lowest_temperature: ThermodynamicTemperature::new::<
                                uom::si::thermodynamic_temperature::degree_celsius,
                            >(celsius),
                            margin: Ratio::new::<ratio>(margin),
                            ..base
                        };
                        let steps = lead_acid_capacity(&need)?;
                        let demands = [daily * days / depth, daily / day_depth, daily * days / life];
                        let most = demands.into_iter().fold(0.0, f64::max);
                        near(ah(steps.capacity), most * factor * (1.0 + margin));
                        let place = match steps.governed_by {
                            CapacityGoverned::Autonomy => 0,
                            CapacityGoverned::Daily => 1,
                            _ => 2,
                        };
                        near(demands[place], most);
                        governed[place] += 1;
                    }
                }
            }
        }
    }
    assert!(governed.iter().all(|count| *count >= 48), "each of the three governs somewhere: {governed:?}");
    Ok(())
}
