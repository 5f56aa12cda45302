//! What is held about each chemistry: depths, efficiencies, temperatures, life, each with its source.
//!
//! Charge rates and their temperatures stand in [`charge_bands`](super::charge_bands), set points in
//! [`cell_set_points`](super::cell_set_points), rest voltages in [`rest_table`](super::rest_table). General figures
//! all: what the maker of a battery states governs.

use uom::si::thermodynamic_temperature::degree_celsius;

use super::{Chemistry, line};
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{Ratio, StateOfCharge, ThermodynamicTemperature};

/// A value and where it comes from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Datum<T> {
    /// The value, in the unit that its field names.
    pub value: T,
    /// Source.
    pub citation: Citation,
}

/// Parameters of the kinetic model, see [`Kinetic`](super::Kinetic).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct KineticParameters {
    /// Part of the charge that is available at once, c.
    pub available_ratio: f64,
    /// Rate constant k′ of the step equations, per hour.
    pub rate_per_h: f64,
}

/// What is held about a chemistry. Fractions are parts of one; temperatures are those of the cells.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChemistryData {
    /// Which.
    pub chemistry: Chemistry,
    /// Nominal voltage of a cell, V: a label.
    pub nominal_cell_V: Datum<f64>,
    /// Greatest depth of discharge at the end of autonomy, of types made for deep discharge: a limit.
    pub greatest_depth: Datum<f64>,
    /// Depth of discharge that autonomy is usually designed to: it spares the cells, and the battery lasts.
    pub usual_depth: Datum<f64>,
    /// Greatest depth of discharge of an ordinary day.
    pub daily_depth: Datum<f64>,
    /// Part of the charge that comes out again (coulombic), near full.
    pub charge_efficiency: Datum<f64>,
    /// Part of the energy that comes out again.
    pub energy_efficiency: Datum<f64>,
    /// Charge lost by itself in a month at 25 °C, part of the capacity.
    pub self_discharge_per_month: Datum<f64>,
    /// Capacity at which a battery counts as worn out, part of its rating.
    pub end_of_life: Datum<f64>,
    /// Capacity over temperature, (°C, part of that at 25 °C), coldest first. Empty for lead-acid, whose
    /// [`temperature_factor()`](super::temperature_factor()) is a table of a standard.
    pub cold_capacity: Datum<&'static [(f64, f64)]>,
    /// Least and greatest temperature in storage, °C, charged: apart from those of charge and discharge.
    pub storage_degC: Datum<(f64, f64)>,
    /// Least and greatest temperature of discharge, °C.
    pub discharge_degC: Datum<(f64, f64)>,
    /// Peukert's exponent, usual least and greatest.
    pub peukert: Datum<(f64, f64)>,
    /// Parameters of the kinetic model.
    pub kinetic: Datum<KineticParameters>,
    /// Cycles to the end of life against depth, (depth, cycles), shallowest first.
    pub cycles: Datum<&'static [(f64, f64)]>,
    /// Fall of a cell's voltage under a steady discharge, V at 1 /h, full, at 25 °C; in proportion at other rates.
    pub drop_V_h: Datum<f64>,
    /// Whether it gives off gas in ordinary use, and takes water.
    pub vented: Datum<bool>,
    /// Years until it is worn out by age alone, at 25 °C.
    pub life_years: Datum<f64>,
    /// Temperature rise that halves that life, K.
    pub life_halving_K: Datum<f64>,
}

const fn datum<T: Copy>(value: T, citation: Citation) -> Datum<T> {
    Datum { value, citation }
}

const PRACTICE: Citation = Citation::new("common practice, no source", "", Seen::Practice);
const HANDBOOK: Citation = Citation::new("common handbook values", "cells and batteries", Seen::Recalled);
const SHEETS: Citation = Citation::new("typical cell data sheets", "", Seen::Recalled);
const LABELS: Citation = Citation::new("usual designations", "nominal voltage", Seen::Recalled);
/// Efficiency of charge at 90 % of charge, where an array keeps a bank for most of the year: the least of its table.
const STORAGE: Citation =
    Citation::new("IEC 61427-1", "ampere-hour efficiency at 90 % of charge", Seen::Recalled);
const WORN: Citation =
    Citation::new("IEEE Std 450 and 1188", "replacement at 80 % of capacity", Seen::Recalled);
const EXPONENTS: Citation = Citation::new("common handbook values", "Peukert exponents", Seen::Recalled);
const CYCLE_TABLE: Citation = Citation::new(
    "public battery education site",
    "table of cycle life against depth, to 70 %; rows at 0.8 and 1.0 seen, the rest recalled",
    Seen::Recalled,
);
/// Chosen so that the capacities at 1, 5, 10 and 20 h stand to each other as usual ones do, and the exponent between
/// 5 and 20 h lies in the usual range (tested).
const WELLS: Citation =
    Citation::new("common practice, no source", "fits usual hour-rate capacities", Seen::Practice);
const LFP_PAGES: Citation = Citation::new("cell data sheets", "LFP discharge limits", Seen::Page);
const NICKEL_STANDARD: Citation = Citation::new("IEC 60623", "", Seen::Recalled);

const fn wells(available_ratio: f64, rate_per_h: f64) -> Datum<KineticParameters> {
    datum(KineticParameters { available_ratio, rate_per_h }, WELLS)
}

/// Lead-acid has a standard's table instead.
const NO_COLD: Datum<&[(f64, f64)]> = datum(&[], HANDBOOK);

const FLOODED_CYCLES: [(f64, f64); 4] = [(0.1, 5000.0), (0.2, 2800.0), (0.5, 1200.0), (0.8, 700.0)];
const AGM_CYCLES: [(f64, f64); 4] = [(0.1, 3000.0), (0.3, 1200.0), (0.5, 600.0), (0.8, 400.0)];
const GEL_CYCLES: [(f64, f64); 4] = [(0.1, 4000.0), (0.3, 1500.0), (0.5, 900.0), (0.8, 500.0)];
const LFP_CYCLES: [(f64, f64); 6] =
    [(0.1, 15000.0), (0.2, 9000.0), (0.4, 3000.0), (0.6, 1500.0), (0.8, 900.0), (1.0, 600.0)];
const NMC_CYCLES: [(f64, f64); 6] =
    [(0.1, 6000.0), (0.2, 2000.0), (0.4, 1000.0), (0.6, 600.0), (0.8, 400.0), (1.0, 300.0)];
const NICKEL_CYCLES: [(f64, f64); 3] = [(0.2, 6000.0), (0.5, 2500.0), (0.8, 1500.0)];

const LFP_COLD: [(f64, f64); 5] = [(-20.0, 0.55), (-10.0, 0.7), (0.0, 0.85), (10.0, 0.95), (25.0, 1.0)];
const NMC_COLD: [(f64, f64); 5] = [(-20.0, 0.6), (-10.0, 0.75), (0.0, 0.87), (10.0, 0.95), (25.0, 1.0)];
const NICKEL_COLD: [(f64, f64); 4] = [(-20.0, 0.7), (0.0, 0.88), (10.0, 0.95), (25.0, 1.0)];

const FLOODED: ChemistryData = ChemistryData {
    chemistry: Chemistry::Flooded,
    nominal_cell_V: datum(2.0, LABELS),
    greatest_depth: datum(0.8, HANDBOOK),
    usual_depth: datum(0.5, PRACTICE),
    daily_depth: datum(0.2, PRACTICE),
    charge_efficiency: datum(0.85, STORAGE),
    energy_efficiency: datum(0.75, HANDBOOK),
    self_discharge_per_month: datum(0.05, HANDBOOK),
    end_of_life: datum(0.8, WORN),
    cold_capacity: NO_COLD,
    storage_degC: datum((-40.0, 50.0), HANDBOOK),
    discharge_degC: datum((-20.0, 50.0), HANDBOOK),
    peukert: datum((1.2, 1.6), EXPONENTS),
    kinetic: wells(0.3, 1.2),
    cycles: datum(&FLOODED_CYCLES, HANDBOOK),
    drop_V_h: datum(0.4, PRACTICE),
    vented: datum(true, HANDBOOK),
    life_years: datum(8.0, HANDBOOK),
    life_halving_K: datum(10.0, HANDBOOK),
};

const AGM: ChemistryData = ChemistryData {
    chemistry: Chemistry::Agm,
    nominal_cell_V: datum(2.0, LABELS),
    greatest_depth: datum(0.8, HANDBOOK),
    usual_depth: datum(0.5, PRACTICE),
    daily_depth: datum(0.2, PRACTICE),
    charge_efficiency: datum(0.9, HANDBOOK),
    energy_efficiency: datum(0.8, HANDBOOK),
    self_discharge_per_month: datum(0.03, HANDBOOK),
    end_of_life: datum(0.8, WORN),
    cold_capacity: NO_COLD,
    storage_degC: datum((-20.0, 40.0), HANDBOOK),
    discharge_degC: datum((-20.0, 50.0), HANDBOOK),
    peukert: datum((1.05, 1.15), EXPONENTS),
    kinetic: wells(0.45, 1.2),
    cycles: datum(&AGM_CYCLES, HANDBOOK),
    drop_V_h: datum(0.25, PRACTICE),
    vented: datum(false, HANDBOOK),
    life_years: datum(7.0, HANDBOOK),
    life_halving_K: datum(10.0, HANDBOOK),
};

const GEL: ChemistryData = ChemistryData {
    chemistry: Chemistry::Gel,
    nominal_cell_V: datum(2.0, LABELS),
    greatest_depth: datum(0.8, HANDBOOK),
    usual_depth: datum(0.5, PRACTICE),
    daily_depth: datum(0.2, PRACTICE),
    charge_efficiency: datum(0.9, HANDBOOK),
    energy_efficiency: datum(0.8, HANDBOOK),
    self_discharge_per_month: datum(0.03, HANDBOOK),
    end_of_life: datum(0.8, WORN),
    cold_capacity: NO_COLD,
    storage_degC: datum((-20.0, 40.0), HANDBOOK),
    discharge_degC: datum((-20.0, 50.0), HANDBOOK),
    peukert: datum((1.1, 1.25), EXPONENTS),
    kinetic: wells(0.4, 1.2),
    cycles: datum(&GEL_CYCLES, HANDBOOK),
    drop_V_h: datum(0.3, PRACTICE),
    vented: datum(false, HANDBOOK),
    life_years: datum(8.0, HANDBOOK),
    life_halving_K: datum(10.0, HANDBOOK),
};

const LFP: ChemistryData = ChemistryData {
    chemistry: Chemistry::Lfp,
    nominal_cell_V: datum(3.2, LABELS),
    greatest_depth: datum(0.9, SHEETS),
    usual_depth: datum(0.8, PRACTICE),
    daily_depth: datum(0.8, PRACTICE),
    charge_efficiency: datum(0.99, SHEETS),
    energy_efficiency: datum(0.93, SHEETS),
    self_discharge_per_month: datum(0.03, SHEETS),
    end_of_life: datum(0.8, SHEETS),
    cold_capacity: datum(&LFP_COLD, SHEETS),
    storage_degC: datum((-20.0, 45.0), SHEETS),
    discharge_degC: datum((-20.0, 60.0), LFP_PAGES),
    peukert: datum((1.01, 1.05), EXPONENTS),
    kinetic: wells(0.9, 4.0),
    cycles: datum(&LFP_CYCLES, CYCLE_TABLE),
    drop_V_h: datum(0.12, PRACTICE),
    vented: datum(false, HANDBOOK),
    life_years: datum(12.0, PRACTICE),
    life_halving_K: datum(10.0, PRACTICE),
};

const NMC: ChemistryData = ChemistryData {
    chemistry: Chemistry::Nmc,
    nominal_cell_V: datum(3.6, LABELS),
    greatest_depth: datum(0.9, SHEETS),
    usual_depth: datum(0.8, PRACTICE),
    daily_depth: datum(0.6, PRACTICE),
    charge_efficiency: datum(0.99, SHEETS),
    energy_efficiency: datum(0.93, SHEETS),
    self_discharge_per_month: datum(0.03, SHEETS),
    end_of_life: datum(0.8, SHEETS),
    cold_capacity: datum(&NMC_COLD, SHEETS),
    storage_degC: datum((-20.0, 45.0), SHEETS),
    discharge_degC: datum((-20.0, 60.0), SHEETS),
    peukert: datum((1.01, 1.08), EXPONENTS),
    kinetic: wells(0.85, 4.0),
    cycles: datum(&NMC_CYCLES, CYCLE_TABLE),
    drop_V_h: datum(0.15, PRACTICE),
    vented: datum(false, HANDBOOK),
    life_years: datum(9.0, PRACTICE),
    life_halving_K: datum(10.0, PRACTICE),
};

const NICKEL_CADMIUM: ChemistryData = ChemistryData {
    chemistry: Chemistry::NickelCadmium,
    nominal_cell_V: datum(1.2, LABELS),
    greatest_depth: datum(0.9, HANDBOOK),
    usual_depth: datum(0.8, PRACTICE),
    daily_depth: datum(0.3, PRACTICE),
    charge_efficiency: datum(0.8, STORAGE),
    energy_efficiency: datum(0.65, HANDBOOK),
    self_discharge_per_month: datum(0.1, HANDBOOK),
    end_of_life: datum(
        0.8,
        Citation::new("IEEE Std 1106", "replacement at 80 % of capacity", Seen::Recalled),
    ),
    cold_capacity: datum(&NICKEL_COLD, SHEETS),
    storage_degC: datum((-40.0, 50.0), HANDBOOK),
    discharge_degC: datum((-20.0, 45.0), NICKEL_STANDARD),
    peukert: datum((1.05, 1.2), EXPONENTS),
    kinetic: wells(0.5, 1.5),
    cycles: datum(&NICKEL_CYCLES, HANDBOOK),
    drop_V_h: datum(0.2, PRACTICE),
    vented: datum(true, HANDBOOK),
    life_years: datum(15.0, HANDBOOK),
    life_halving_K: datum(30.0, HANDBOOK),
};

/// What is held about a chemistry.
///
/// ```
/// # use ampwright::battery::{Chemistry, data};
/// assert_eq!(data(Chemistry::Flooded).daily_depth.value, 0.2);
/// assert_eq!(data(Chemistry::Lfp).discharge_degC.value, (-20.0, 60.0));
/// ```
pub const fn data(chemistry: Chemistry) -> &'static ChemistryData {
    match chemistry {
        Chemistry::Flooded => &FLOODED,
        Chemistry::Agm => &AGM,
        Chemistry::Gel => &GEL,
        Chemistry::Lfp => &LFP,
        Chemistry::Nmc => &NMC,
        Chemistry::NickelCadmium => &NICKEL_CADMIUM,
    }
}

/// Part of the capacity at 25 °C that a lithium or nickel-cadmium battery gives at a temperature.
///
/// By the straight line between the rows of [`ChemistryData::cold_capacity`]; above 25 °C no more than the whole.
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
    let celsius = super::charge::checked_celsius(temperature)?;
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
    Ok(datum(Ratio::new::<uom::si::ratio::ratio>(line::held(rows, celsius)), citation))
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
    let celsius = super::charge::checked_celsius(temperature)?;
    Ok(Ratio::new::<uom::si::ratio::ratio>(resistance_factor_at(chemistry, charge.get(), celsius)))
}

pub(super) fn resistance_factor_at(chemistry: Chemistry, charge: f64, celsius: f64) -> f64 {
    let rise = super::resistance_rise(chemistry);
    let depth = 1.0 + (rise.discharged - 1.0) * (1.0 - charge);
    depth * libm::pow(rise.cold, (25.0 - celsius) / 35.0)
}

/// Years until a battery is worn out by age alone at a mean temperature.
///
/// [`ChemistryData::life_years`], halved with every [`ChemistryData::life_halving_K`] above 25 °C; below, no longer.
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
    let celsius = super::charge::checked_celsius(temperature)?;
    let data = data(chemistry);
    let above = (celsius - 25.0).max(0.0);
    Ok(data.life_years.value * libm::pow(0.5, above / data.life_halving_K.value))
}

/// Whether a temperature lies within a pair of limits of [`ChemistryData`], both included.
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
    let celsius = temperature.get::<degree_celsius>();
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
