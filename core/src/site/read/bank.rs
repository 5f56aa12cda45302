//! Banks and the batteries they are made of: what is stated of both must be one bank.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::{String, ToString};

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_potential::volt;

use super::entry::Entry;
use super::keys::{
    CAPACITY, CHEMISTRY, CUT_OFF, GREATEST_DISCHARGE, HIGHEST, INTERNAL, Key, NOMINAL, PRICE, SHORT_CIRCUIT,
    STRINGS, STUD,
};
use super::plant::{named, rising};
use super::plant_keys::{
    AIR_FLOW, BATTERY, BOARD_NAME, CELLS_AT, CHARGE_FROM, COLD_CAPACITY, DAILY_DEPTH, DATA_LINK, DEPTH,
    DISCONNECT, GREATEST_CHARGE, LINK, MAX_PARALLEL, MAX_SERIES, MIXED, OPENING, OPENS_UNDER_CHARGE, RATE,
    RECONNECT, ROOM, ROUTE, SERIES, SHELF_COUNT, STRING_DEVICE, STRING_JOINT, TAKE_OFF, UNIT, UNIT_CAPACITY,
    UNITS,
};
use super::sections::{ROOM_WORDS, TAKE_OFF_WORDS};
use crate::battery::Chemistry;
use crate::quantity::{ElectricPotential, Figures};
use crate::site::parts::{BankPart, StockBattery};

/// Nominal voltages of lithium and nickel may be labels: 12.8 V of LFP stand for 12 V. Those of lead are exact.
const LABEL: f64 = 0.1;
const EXACT: f64 = 0.005;
/// Capacities that are the same.
const SAME: f64 = 0.01;
/// Batteries in one string that are looked for: 1500 V of 1.2 V and more.
const MOST_SERIES: u32 = 2000;

pub(super) fn bank(entry: &mut Entry<'_, '_>, stock: &[StockBattery]) -> Option<BankPart> {
    let name = entry.name();
    let part = BankPart {
        line: entry.line(),
        battery: named(entry, &BATTERY),
        chemistry: entry.parsed(&CHEMISTRY),
        nominal: entry.quantity(&NOMINAL),
        capacity: entry.quantity(&CAPACITY),
        unit: entry.quantity(&UNIT),
        unit_capacity: entry.quantity(&UNIT_CAPACITY),
        units: entry.count(&UNITS),
        series: entry.count(&SERIES),
        strings: entry.count(&STRINGS),
        rate: entry.quantity(&RATE),
        cut_off: entry.quantity(&CUT_OFF),
        highest: entry.quantity(&HIGHEST),
        short_circuit: entry.quantity(&SHORT_CIRCUIT),
        internal_resistance: entry.quantity(&INTERNAL),
        greatest_discharge: entry.quantity(&GREATEST_DISCHARGE),
        greatest_charge: entry.quantity(&GREATEST_CHARGE),
        charge_from: entry.quantity(&CHARGE_FROM),
        stud: entry.parsed(&STUD),
        temperature: rising(entry, &CELLS_AT),
        cold_capacity: entry.quantity(&COLD_CAPACITY),
        depth: entry.quantity(&DEPTH),
        daily_depth: entry.quantity(&DAILY_DEPTH),
        disconnect: entry.quantity(&DISCONNECT),
        reconnect: entry.quantity(&RECONNECT),
        take_off: entry.word(&TAKE_OFF, TAKE_OFF_WORDS),
        link: entry.quantity(&LINK),
        joint: entry.quantity(&STRING_JOINT),
        string_device: entry.quantity(&STRING_DEVICE),
        max_series: entry.count(&MAX_SERIES),
        max_parallel: entry.count(&MAX_PARALLEL),
        mixed: entry.flag(&MIXED, false),
        data_link: entry.flag(&DATA_LINK, false),
        opens_under_charge: entry.flag(&OPENS_UNDER_CHARGE, false),
        space: entry.word(&ROOM, ROOM_WORDS),
        air: entry.quantity(&AIR_FLOW),
        opening: entry.quantity(&OPENING),
        route: entry.quantity(&ROUTE),
        board: named(entry, &BOARD_NAME),
        designed: false,
        name: name.unwrap_or_default(),
    };
    in_order(entry, &part);
    is_of_something(entry, &part);
    batteries_agree(entry, &part, stock);
    // Without a name it is refused, but only after all that can be said of it.
    (!part.name.is_empty()).then_some(part)
}

/// Voltages and depths of which one must not be above the other.
fn in_order(entry: &mut Entry<'_, '_>, part: &BankPart) {
    entry.ordered(&CUT_OFF, part.cut_off, &NOMINAL, part.nominal);
    entry.ordered(&NOMINAL, part.nominal, &HIGHEST, part.highest);
    if part.nominal.is_none() {
        entry.ordered(&CUT_OFF, part.cut_off, &HIGHEST, part.highest);
    }
    if let (Some(cut_off), Some(highest)) = (part.cut_off, part.highest)
        && cut_off == highest
        && part.nominal.is_none_or(|nominal| nominal == highest)
    {
        let sentence =
            format!("{} is also the highest voltage; the cut-off must be below", entry.written(&CUT_OFF));
        entry.problem(&CUT_OFF, sentence);
    }
    entry.ordered(&DISCONNECT, part.disconnect, &RECONNECT, part.reconnect);
    entry.ordered(&RECONNECT, part.reconnect, &HIGHEST, part.highest);
    if part.reconnect.is_none() {
        entry.ordered(&DISCONNECT, part.disconnect, &HIGHEST, part.highest);
    }
    entry.ordered(&DAILY_DEPTH, part.daily_depth, &DEPTH, part.depth);
}

/// What is stated in figures of a bank is a figure of its chemistry and voltage.
fn is_of_something(entry: &mut Entry<'_, '_>, part: &BankPart) {
    const OF_CHEMISTRY: [&Key; 10] = [
        &CAPACITY,
        &UNIT,
        &UNIT_CAPACITY,
        &UNITS,
        &CUT_OFF,
        &HIGHEST,
        &DISCONNECT,
        &RECONNECT,
        &SHORT_CIRCUIT,
        &INTERNAL,
    ];
    if entry.has(&BATTERY) {
        for key in [&CHEMISTRY, &UNIT, &UNIT_CAPACITY] {
            if entry.has(key) {
                entry.problem(
                    key,
                    "the battery of the stock tells it already; take one of the two out".to_owned(),
                );
            }
        }
    } else if let Some(beside) = OF_CHEMISTRY.into_iter().find(|key| entry.has(key))
        && !entry.has(&CHEMISTRY)
        && !entry.is_excused(&[&CHEMISTRY, &BATTERY])
    {
        let sentence = format!(
            "key 'chemistry' is missing beside '{}'; state it, such as chemistry = {}, or name the battery of the stock",
            beside.name, CHEMISTRY.example
        );
        entry.problem_here(sentence);
    }
    let has_series = entry.has(&SERIES) || entry.has(&UNITS) && entry.has(&STRINGS);
    let by_batteries = has_series && (entry.has(&UNIT) || entry.has(&BATTERY));
    let figure = [&CAPACITY, &UNITS, &CUT_OFF, &HIGHEST].into_iter().find(|key| entry.has(key));
    if let Some(beside) = figure
        && !entry.has(&NOMINAL)
        && !by_batteries
        && !entry.is_excused(&[&NOMINAL, &UNIT, &SERIES, &BATTERY])
    {
        let sentence = format!(
            "key 'nominal' is missing beside '{}'; state it, such as nominal = {}, or the batteries and how many are in \
             series",
            beside.name, NOMINAL.example
        );
        entry.problem_here(sentence);
    }
    if part.strings == Some(1) || part.units.is_some() && part.units == part.series {
        for key in [&TAKE_OFF, &LINK, &STRING_DEVICE] {
            if entry.has(key) {
                entry.problem(
                    key,
                    "it belongs to parallel strings, and there is one; take it out, or state the strings"
                        .to_owned(),
                );
            }
        }
    }
}

fn digits(number: impl Into<f64>) -> String {
    format!("{}", Figures(number.into()))
}

/// What is stated contradicts itself, and was reported: what follows from it would be noise.
struct Contradiction;

/// Voltage, number and capacity of a bank's batteries must agree with the bank's own.
fn batteries_agree(entry: &mut Entry<'_, '_>, bank: &BankPart, stock: &[StockBattery]) {
    let stock = bank.battery.as_ref().and_then(|name| stock.iter().find(|battery| battery.name == *name));
    let chemistry = bank.chemistry.or(stock.map(|battery| battery.chemistry));
    let unit_V = bank.unit.or(stock.map(|battery| battery.nominal)).map(|unit| unit.get::<volt>());
    let nominal_V = bank.nominal.map(|nominal| nominal.get::<volt>());

    // Where a battery is stated or of the stock, its own voltage is what the cells must make; that of the stock is
    // reported with the stock.
    if let Some(chemistry) = chemistry {
        if let Some(unit) = bank.unit {
            cells_fit(entry, &UNIT, chemistry, unit);
        } else if let (Some(nominal), None) = (bank.nominal, stock) {
            cells_fit(entry, &NOMINAL, chemistry, nominal);
        }
    }

    let Ok(series) = series_agree(entry, bank, chemistry, unit_V, nominal_V) else { return };
    if units_agree(entry, bank, series, unit_V.zip(nominal_V)).is_err() {
        return;
    }
    let strings = bank.strings.or_else(|| bank.units?.checked_div(series?));
    let each = bank.unit_capacity.or(stock.map(|battery| battery.capacity));
    let (Some(each), Some(whole)) = (each, bank.capacity) else { return };
    let (each, whole) = (each.get::<ampere_hour>(), whole.get::<ampere_hour>());
    if let Some(strings) = strings.map(f64::from) {
        if libm::fabs(each * strings - whole) > SAME * whole {
            let sentence = format!(
                "{} parallel strings of {} Ah make {} Ah, not {}; mend the number that is wrong",
                digits(strings),
                digits(each),
                digits(each * strings),
                entry.written(&CAPACITY)
            );
            entry.problem(&CAPACITY, sentence);
        }
        return;
    }
    let strings = libm::round(whole / each);
    if libm::fabs(each * strings - whole) > SAME * whole {
        let fewer = libm::floor(whole / each);
        let sentence = format!(
            "{} is no whole number of strings of {} Ah; {} or {} Ah are",
            entry.written(&CAPACITY),
            digits(each),
            digits(if fewer < 1.0 { each } else { fewer * each }),
            digits(if fewer < 1.0 { 2.0 * each } else { (fewer + 1.0) * each })
        );
        entry.problem(&CAPACITY, sentence);
    }
}

/// Batteries in one string, as far as they are known.
#[allow(non_snake_case)] // units keep their case
fn series_agree(
    entry: &mut Entry<'_, '_>,
    bank: &BankPart,
    chemistry: Option<Chemistry>,
    unit_V: Option<f64>,
    nominal_V: Option<f64>,
) -> Result<Option<u32>, Contradiction> {
    let by_units = match (bank.units, bank.strings) {
        (Some(units), Some(strings)) if units.checked_rem(strings) == Some(0) => units.checked_div(strings),
        _ => None,
    };
    let stated = bank.series.or(by_units);
    let Some((unit, nominal)) = unit_V.zip(nominal_V) else { return Ok(stated) };

    let part = if chemistry.is_some_and(Chemistry::is_lead_acid) { EXACT } else { LABEL };
    let beside = |series: u32| libm::fabs(f64::from(series) * unit - nominal);
    let fits = |series: &u32| beside(*series) <= part * nominal;
    // Where the nominal voltage is a label, more than one number may be meant: that which the units allow.
    let nearest = |divides: &dyn Fn(u32) -> bool| {
        let fitting = (1..=MOST_SERIES).filter(fits).filter(|series| divides(*series));
        fitting.min_by(|one, other| beside(*one).total_cmp(&beside(*other)))
    };
    let Some(usual) = nearest(&|_| true) else {
        let fewer = libm::floor(nominal / unit).max(1.0);
        let sentence = format!(
            "{} is no whole number of batteries of {} V; {} in series make {} V, {} make {} V",
            entry.written(&NOMINAL),
            digits(unit),
            digits(fewer),
            digits(fewer * unit),
            digits(fewer + 1.0),
            digits((fewer + 1.0) * unit)
        );
        entry.problem(&NOMINAL, sentence);
        return Err(Contradiction);
    };
    let Some(stated) = stated else {
        let divides = |series: u32| bank.units.is_none_or(|units| units.checked_rem(series) == Some(0));
        return Ok(nearest(&divides).or(Some(usual)));
    };
    if fits(&stated) {
        return Ok(Some(stated));
    }
    let sentence = format!(
        "{stated} in series of {} V make {} V, not {}; {usual} do",
        digits(unit),
        digits(f64::from(stated) * unit),
        entry.written(&NOMINAL),
    );
    entry.problem(if bank.series.is_some() { &SERIES } else { &UNITS }, sentence);
    Err(Contradiction)
}

/// Batteries in all must be whole strings.
fn units_agree(
    entry: &mut Entry<'_, '_>,
    bank: &BankPart,
    series: Option<u32>,
    volts: Option<(f64, f64)>,
) -> Result<(), Contradiction> {
    let (Some(series), Some(units)) = (series, bank.units) else { return Ok(()) };
    let sentence = match bank.strings {
        Some(strings) if strings.checked_mul(series) != Some(units) => format!(
            "{units} batteries are not {strings} parallel strings of {series}, which are {}; mend the number that is \
             wrong",
            strings.saturating_mul(series)
        ),
        None if units.checked_rem(series) != Some(0) => {
            let fewer = units.checked_div(series).unwrap_or(0).max(1).saturating_mul(series);
            let why = volts.map_or_else(String::new, |(unit, nominal)| {
                format!(" ({} V of {} V each)", digits(nominal), digits(unit))
            });
            format!(
                "{units} batteries do not make whole strings of {series}{why}; {fewer} or {} do",
                fewer.saturating_add(series)
            )
        }
        _ => return Ok(()),
    };
    entry.problem(&UNITS, sentence);
    Err(Contradiction)
}

/// A voltage that a whole number of cells has.
fn cells_fit(entry: &mut Entry<'_, '_>, key: &Key, chemistry: Chemistry, volts: ElectricPotential) {
    if let Err(error) = crate::battery::cells(chemistry, volts) {
        entry.problem(key, error.to_string());
    }
}

/// `[[stock.battery]]`.
pub(super) fn battery(entry: &mut Entry<'_, '_>) -> Option<StockBattery> {
    let name = entry.name();
    let (chemistry, nominal, capacity) =
        (entry.parsed(&CHEMISTRY), entry.quantity(&NOMINAL), entry.quantity(&CAPACITY));
    if let (Some(chemistry), Some(nominal)) = (chemistry, nominal) {
        cells_fit(entry, &NOMINAL, chemistry, nominal);
    }
    Some(StockBattery {
        line: entry.line(),
        rate: entry.quantity(&RATE),
        internal_resistance: entry.quantity(&INTERNAL),
        short_circuit: entry.quantity(&SHORT_CIRCUIT),
        greatest_charge: entry.quantity(&GREATEST_CHARGE),
        greatest_discharge: entry.quantity(&GREATEST_DISCHARGE),
        charge_from: entry.quantity(&CHARGE_FROM),
        max_series: entry.count(&MAX_SERIES),
        max_parallel: entry.count(&MAX_PARALLEL),
        stud: entry.parsed(&STUD),
        price: entry.number(&PRICE),
        count: entry.count(&SHELF_COUNT),
        name: name?,
        chemistry: chemistry?,
        nominal: nominal?,
        capacity: capacity?,
    })
}
