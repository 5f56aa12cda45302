//! Twins for counting instructions: each calculation typed and raw, with and without checks.
//!
//! `benches/run ratio` runs this under callgrind and reads the count of each function by its name. Every twin
//! adds a constant of its own, since the compiler would otherwise merge those that are equal.

use std::hint::black_box;

use ampwright::law;
use ampwright::quantity::{
    Area, ElectricCurrent, ElectricPotential, ElectricalResistance, ElectricalResistivity, Length,
};
use uom::si::area::square_meter;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::electrical_resistivity::ohm_meter;
use uom::si::length::meter;

/// Calls of each twin; `benches/run` divides by it.
const CALLS: u32 = 1000;

#[inline(never)]
fn ohm_current_raw(voltage: f64, resistance: f64) -> f64 {
    ampwright_benches::ohm_current(voltage, resistance) + 1.0
}

#[inline(never)]
fn ohm_current_typed(voltage: ElectricPotential, resistance: ElectricalResistance) -> ElectricCurrent {
    law::ohm_current::formula(voltage, resistance) + ElectricCurrent::new::<ampere>(2.0)
}

#[inline(never)]
fn ohm_current_checked_raw(voltage: f64, resistance: f64) -> f64 {
    ampwright_benches::ohm_current_checked(voltage, resistance).map_or(0.0, |current| current + 3.0)
}

#[inline(never)]
fn ohm_current_checked_typed(voltage: ElectricPotential, resistance: ElectricalResistance) -> f64 {
    law::ohm_current(voltage, resistance).map_or(0.0, |current| current.value + 4.0)
}

#[inline(never)]
fn voltage_drop_raw(one_way: f64, cross_section: f64, resistivity: f64, current: f64) -> f64 {
    ampwright_benches::voltage_drop(one_way, cross_section, resistivity, current) + 5.0
}

#[inline(never)]
fn voltage_drop_typed(
    one_way: Length,
    cross_section: Area,
    resistivity: ElectricalResistivity,
    current: ElectricCurrent,
) -> ElectricPotential {
    law::voltage_drop::formula(one_way, cross_section, resistivity, current)
        + ElectricPotential::new::<volt>(6.0)
}

#[inline(never)]
fn voltage_drop_checked_raw(one_way: f64, cross_section: f64, resistivity: f64, current: f64) -> f64 {
    ampwright_benches::voltage_drop_checked(one_way, cross_section, resistivity, current)
        .map_or(0.0, |drop| drop + 7.0)
}

#[inline(never)]
fn voltage_drop_checked_typed(
    one_way: Length,
    cross_section: Area,
    resistivity: ElectricalResistivity,
    current: ElectricCurrent,
) -> f64 {
    law::voltage_drop(one_way, cross_section, resistivity, current).map_or(0.0, |drop| drop.value + 8.0)
}

fn main() {
    let (volts, ohms) = (12.0, 0.5);
    let (voltage, resistance) =
        (ElectricPotential::new::<volt>(volts), ElectricalResistance::new::<ohm>(ohms));
    let (metres, square_metres, ohm_metres, amperes) = (12.0, 16e-6, 1.0 / 58e6, 25.0);
    let one_way = Length::new::<meter>(metres);
    let cross_section = Area::new::<square_meter>(square_metres);
    let resistivity = ElectricalResistivity::new::<ohm_meter>(ohm_metres);
    let current = ElectricCurrent::new::<ampere>(amperes);
    for _ in 0..CALLS {
        black_box(ohm_current_raw(black_box(volts), black_box(ohms)));
        black_box(ohm_current_typed(black_box(voltage), black_box(resistance)));
        black_box(ohm_current_checked_raw(black_box(volts), black_box(ohms)));
        black_box(ohm_current_checked_typed(black_box(voltage), black_box(resistance)));
        let raw = black_box((metres, square_metres, ohm_metres, amperes));
        let typed = black_box((one_way, cross_section, resistivity, current));
        black_box(voltage_drop_raw(raw.0, raw.1, raw.2, raw.3));
        black_box(voltage_drop_typed(typed.0, typed.1, typed.2, typed.3));
        black_box(voltage_drop_checked_raw(raw.0, raw.1, raw.2, raw.3));
        black_box(voltage_drop_checked_typed(typed.0, typed.1, typed.2, typed.3));
    }
    println!("{CALLS}");
}
