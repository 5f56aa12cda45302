//! What is held about each chemistry: depths, efficiencies, temperatures, life, each with its source.
//!
//! Charge rates and their temperatures stand in [`charge_bands`](super::charge_bands), set points in
//! [`cell_set_points`](super::cell_set_points), rest voltages in [`rest_table`](super::rest_table). General figures
//! all: what the maker of a battery states governs.

use super::Chemistry;
use crate::citation::{Citation, Seen};

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
    kinetic: wells(0.95, 0.5),
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
    kinetic: wells(0.93, 0.5),
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
    end_of_life: datum(0.8, PRACTICE),
    cold_capacity: datum(&NICKEL_COLD, SHEETS),
    storage_degC: datum((-40.0, 50.0), HANDBOOK),
    discharge_degC: datum((-20.0, 45.0), HANDBOOK),
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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::battery::{charge_bands, discharge_limit, is_within};
    use crate::quantity::ThermodynamicTemperature;
    use uom::si::thermodynamic_temperature::degree_celsius;

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }

    fn parts(held: &ChemistryData) -> [f64; 7] {
        [
            held.greatest_depth.value,
            held.usual_depth.value,
            held.daily_depth.value,
            held.charge_efficiency.value,
            held.energy_efficiency.value,
            held.self_discharge_per_month.value,
            held.end_of_life.value,
        ]
    }

    #[test]
    fn each_part_is_one_and_each_limit_is_in_order() {
        for chemistry in Chemistry::ALL {
            let held = data(chemistry);
            assert_eq!(held.chemistry, chemistry);
            assert!(parts(held).iter().all(|part| *part > 0.0 && *part <= 1.0), "{chemistry}");
            assert!(held.daily_depth.value <= held.usual_depth.value, "{chemistry}");
            assert!(held.usual_depth.value <= held.greatest_depth.value, "{chemistry}");
            // Energy is lost with the charge, and to resistance besides.
            assert!(held.energy_efficiency.value < held.charge_efficiency.value, "{chemistry}");
            for (least, most) in [held.storage_degC.value, held.discharge_degC.value, held.peukert.value] {
                assert!(least < most, "{chemistry}");
            }
            assert!(held.peukert.value.0 >= 1.0 && held.life_years.value >= 1.0, "{chemistry}");
        }
    }

    #[test]
    fn one_figure_stands_in_one_place_or_in_two_that_agree() {
        use uom::si::electric_potential::volt;
        for chemistry in Chemistry::ALL {
            let held = data(chemistry);
            assert_eq!(held.nominal_cell_V.value, chemistry.nominal_cell().get::<volt>());
            // Where a rate of discharge is held, it ends where these limits do.
            let (least, most) = held.discharge_degC.value;
            for (celsius, admitted) in
                [(least, true), (most, true), (least - 0.1, false), (most + 0.1, false)]
            {
                if let Some((rate, _)) = discharge_limit(chemistry, at(celsius)).unwrap() {
                    assert_eq!(rate.get() > 0.0, admitted, "{chemistry} at {celsius}");
                }
                assert_eq!(is_within(held.discharge_degC, at(celsius)), Ok(admitted));
            }
            // Whoever charges a bank may discharge it, too.
            let bands = charge_bands(chemistry);
            assert!(bands[0].from_degC >= least && bands[bands.len() - 1].upto_degC <= most, "{chemistry}");
        }
    }

    #[test]
    fn a_recalled_cycle_table_falls_with_depth_but_not_faster_than_charge_moved() {
        for chemistry in Chemistry::ALL {
            for pair in data(chemistry).cycles.value.windows(2) {
                assert!(pair[0].0 < pair[1].0 && pair[0].1 > pair[1].1, "{chemistry}");
            }
        }
    }
}
