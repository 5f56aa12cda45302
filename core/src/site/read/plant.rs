//! Banks, arrays, controllers, generators, converters and inverters, and the same in stock.

use alloc::borrow::ToOwned;
use alloc::format;

use super::entry::{Entry, Found};
use super::keys::{
    CAPACITY, CHEMISTRY, CUT_OFF, EFFICIENCY, GREATEST, GREATEST_DISCHARGE, HIGHEST, IDLE, INTERNAL, Key,
    LEAST, NOMINAL, POWER, PRICE, SHORT_CIRCUIT, STRINGS, STUD, SURGE, TERMINAL,
};
use super::plant_keys::{
    ABSORPTION, AIR_FLOW, AZIMUTH, BANK_NAME, BATTERY, BOARD_NAME, CAPACITANCE, CELLS, CELLS_AT, CHARGE_FROM,
    COMPENSATION, CONTROLLER_KIND, CONTROLLER_NAME, CONTROLLER_WORDS, DAILY, DAILY_DEPTH, DATA_LINK, DEPTH,
    DISCONNECT, EQUALISE, EXPOSED, FLOAT, GENERATOR_KIND, GENERATOR_WORDS, GREATEST_CHARGE, GREATEST_INPUT,
    GREATEST_VOLTAGE, HOT_OUTPUT, HOURS, IMP, INPUT_CURRENT, ISC, ISC_COEFFICIENT, ISOLATED, ISOLATOR,
    ISOLATOR_CURRENT, LIMIT, LINK, LOAD_BREAK, LOAD_DUMP, MAX_PARALLEL, MAX_SERIES, MIXED, MODEL, MODULE,
    MODULES, NOCT, NOMINALS, OPENING, OPENS_UNDER_CHARGE, OPERATING, OUTPUT, OUTPUT_VOLTAGE,
    POWER_COEFFICIENT, POWER_FACTOR, PRECHARGE, RATE, REAR_GAIN, RECONNECT, ROOM, ROOM_WORDS, ROUTE,
    SELF_LIMITING, SENSE, SENSE_WORDS, SERIES, SERIES_FUSE, SHADE, SHELF_COUNT, START_MARGIN, STRING_DEVICE,
    STRING_FUSE, STRING_JOINT, SURGE_TIME, TAKE_OFF, TAKE_OFF_WORDS, TILT, UNIT, UNIT_CAPACITY, UNITS, VMP,
    VOC, VOC_COEFFICIENT,
};
use crate::quantity::{ElectricPotential, Power, Textual, ThermodynamicTemperature};
use crate::site::parts::{
    ArrayPart, BankPart, Charging, ControllerPart, ConverterPart, GeneratorPart, InverterPart, ModulePart,
    StockBattery,
};

/// A flag that may be left out.
fn said(entry: &mut Entry<'_, '_>, key: &Key) -> Option<bool> {
    entry.has(key).then(|| entry.flag(key, false))
}

/// A name of something else in the file.
pub(super) fn named(entry: &mut Entry<'_, '_>, key: &Key) -> Option<alloc::string::String> {
    entry.text(key).map(ToOwned::to_owned)
}

/// Two quantities of which the first must not be above the second.
fn rising<Q: Textual>(entry: &mut Entry<'_, '_>, key: &Key) -> Option<(Q, Q)> {
    let pair: (Q, Q) = entry.two_quantities(key)?;
    if pair.0.base() > pair.1.base() {
        entry.problem(key, "the least is above the greatest; write the least first".to_owned());
        return None;
    }
    Some(pair)
}

pub(super) fn bank(entry: &mut Entry<'_, '_>) -> Option<BankPart> {
    let nominal: Option<ElectricPotential> = entry.quantity(&NOMINAL);
    let cut_off: Option<ElectricPotential> = entry.quantity(&CUT_OFF);
    let highest: Option<ElectricPotential> = entry.quantity(&HIGHEST);
    let disconnect: Option<ElectricPotential> = entry.quantity(&DISCONNECT);
    let reconnect: Option<ElectricPotential> = entry.quantity(&RECONNECT);
    let temperature: Option<(ThermodynamicTemperature, ThermodynamicTemperature)> = rising(entry, &CELLS_AT);
    let part = BankPart {
        name: entry.name().unwrap_or_default(),
        line: entry.line(),
        battery: named(entry, &BATTERY),
        chemistry: entry.parsed(&CHEMISTRY),
        nominal,
        capacity: entry.quantity(&CAPACITY),
        unit: entry.quantity(&UNIT),
        unit_capacity: entry.quantity(&UNIT_CAPACITY),
        units: entry.count(&UNITS),
        series: entry.count(&SERIES),
        strings: entry.count(&STRINGS),
        rate: entry.quantity(&RATE),
        cut_off,
        highest,
        short_circuit: entry.quantity(&SHORT_CIRCUIT),
        internal_resistance: entry.quantity(&INTERNAL),
        greatest_discharge: entry.quantity(&GREATEST_DISCHARGE),
        greatest_charge: entry.quantity(&GREATEST_CHARGE),
        charge_from: entry.quantity(&CHARGE_FROM),
        stud: entry.parsed(&STUD),
        temperature,
        depth: entry.quantity(&DEPTH),
        daily_depth: entry.quantity(&DAILY_DEPTH),
        disconnect,
        reconnect,
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
    };
    entry.ordered(&CUT_OFF, cut_off, &NOMINAL, nominal);
    entry.ordered(&NOMINAL, nominal, &HIGHEST, highest);
    if nominal.is_none() {
        entry.ordered(&CUT_OFF, cut_off, &HIGHEST, highest);
    }
    if cut_off.is_some() && cut_off == highest && nominal == highest {
        let sentence =
            format!("{} is also the highest voltage; the cut-off must be below", entry.written(&CUT_OFF));
        entry.problem(&CUT_OFF, sentence);
    }
    entry.ordered(&DISCONNECT, disconnect, &RECONNECT, reconnect);
    if entry.has(&BATTERY) {
        for key in [&CHEMISTRY, &UNIT, &UNIT_CAPACITY] {
            if entry.has(key) {
                entry.problem(
                    key,
                    "the battery of the stock tells it already; take one of the two out".to_owned(),
                );
            }
        }
    }
    Some(part)
}

fn charging(entry: &mut Entry<'_, '_>) -> Charging {
    let absorption: Option<ElectricPotential> = entry.quantity(&ABSORPTION);
    let float: Option<ElectricPotential> = entry.quantity(&FLOAT);
    let equalise: Option<ElectricPotential> = entry.quantity(&EQUALISE);
    entry.ordered(&FLOAT, float, &ABSORPTION, absorption);
    entry.ordered(&ABSORPTION, absorption, &EQUALISE, equalise);
    Charging {
        absorption,
        float,
        equalise,
        compensation: entry.quantity(&COMPENSATION),
        sense: entry.word(&SENSE, SENSE_WORDS),
    }
}

/// The electrical keys of a module; `None` where one of those that are needed is missing.
fn module_values(entry: &mut Entry<'_, '_>) -> Option<ModulePart> {
    let voc: Option<ElectricPotential> = entry.quantity(&VOC);
    let vmp: Option<ElectricPotential> = entry.quantity(&VMP);
    let isc: Option<crate::quantity::ElectricCurrent> = entry.quantity(&ISC);
    let imp: Option<crate::quantity::ElectricCurrent> = entry.quantity(&IMP);
    entry.ordered(&VMP, vmp, &VOC, voc);
    entry.ordered(&IMP, imp, &ISC, isc);
    let power: Option<Power> = entry.quantity(&POWER);
    if let (Some(power), Some(vmp), Some(imp)) = (power, vmp, imp) {
        let product: Power = vmp * imp;
        let part = product.value / power.value;
        if !(0.9..=1.1).contains(&part) {
            let sentence = format!(
                "{} W does not fit vmp × imp = {:.1} W; mend the one that is wrong",
                power.value, product.value
            );
            entry.problem(&POWER, sentence);
            return None;
        }
    }
    let part = ModulePart {
        name: alloc::string::String::new(),
        line: entry.line(),
        power: power?,
        voc: voc?,
        isc: isc?,
        vmp: vmp?,
        imp: imp?,
        voc_coefficient: entry.quantity(&VOC_COEFFICIENT),
        isc_coefficient: entry.quantity(&ISC_COEFFICIENT),
        power_coefficient: entry.quantity(&POWER_COEFFICIENT),
        noct: entry.quantity(&NOCT),
        series_fuse: entry.quantity(&SERIES_FUSE),
        greatest_voltage: entry.quantity(&GREATEST_VOLTAGE),
        rear_gain: entry.quantity(&REAR_GAIN),
        cells: entry.count(&CELLS),
        price: None,
        count: None,
    };
    Some(part)
}

pub(super) fn module(entry: &mut Entry<'_, '_>) -> Option<ModulePart> {
    let name = entry.name();
    let values = module_values(entry);
    let price = entry.number(&PRICE);
    let count = entry.count(&SHELF_COUNT);
    Some(ModulePart { name: name?, price, count, ..values? })
}

pub(super) fn array(entry: &mut Entry<'_, '_>) -> Option<ArrayPart> {
    const NEEDED: [&Key; 5] = [&POWER, &VOC, &ISC, &VMP, &IMP];
    let name = entry.name();
    let module = named(entry, &MODULE);
    let any = NEEDED.iter().any(|key| entry.has(key));
    let mut own_module = None;
    if module.is_some() && any {
        entry.problem(
            &MODULE,
            "the module of the stock tells its values already; take one of the two out".to_owned(),
        );
    } else if any {
        for key in NEEDED {
            if !entry.has(key) && !entry.is_excused(&[key]) {
                entry.missing(key);
            }
        }
        own_module = module_values(entry);
    }
    let (modules, series, strings) = (entry.count(&MODULES), entry.count(&SERIES), entry.count(&STRINGS));
    if let (Some(all), Some(series)) = (modules, series) {
        let product = strings.map(|s| s.saturating_mul(series));
        if product.is_some_and(|product| product != all) {
            let sentence = format!(
                "{all} modules are not {} strings of {series}; mend the number that is wrong",
                strings.unwrap_or(1)
            );
            entry.problem(&MODULES, sentence);
        } else if product.is_none() && all % series != 0 {
            let sentence = format!(
                "{all} modules do not divide into strings of {series}; {} or {} do",
                all / series * series,
                (all / series).saturating_add(1).saturating_mul(series)
            );
            entry.problem(&MODULES, sentence);
        }
    }
    Some(ArrayPart {
        name: name?,
        line: entry.line(),
        module,
        own_module,
        modules,
        series,
        strings,
        tilt: entry.quantity(&TILT),
        azimuth: entry.quantity(&AZIMUTH),
        shade: entry.quantity(&SHADE),
        controller: named(entry, &CONTROLLER_NAME),
        string_fuse: entry.quantity(&STRING_FUSE),
        isolator: entry.quantity(&ISOLATOR),
        isolator_current: entry.quantity(&ISOLATOR_CURRENT),
        load_break: said(entry, &LOAD_BREAK),
        exposed: entry.flag(&EXPOSED, false),
        route: entry.quantity(&ROUTE),
    })
}

pub(super) fn controller(entry: &mut Entry<'_, '_>) -> Option<ControllerPart> {
    let name = entry.name();
    let nominals = if entry.has(&NOMINALS) { entry.quantities(&NOMINALS) } else { alloc::vec::Vec::new() };
    Some(ControllerPart {
        name: name?,
        line: entry.line(),
        model: named(entry, &MODEL),
        kind: entry.word(&CONTROLLER_KIND, CONTROLLER_WORDS),
        greatest_input: entry.quantity(&GREATEST_INPUT),
        input_current: entry.quantity(&INPUT_CURRENT),
        operating: rising(entry, &OPERATING),
        start_margin: entry.quantity(&START_MARGIN),
        output: entry.quantity(&OUTPUT),
        nominals,
        efficiency: entry.quantity(&EFFICIENCY),
        idle: entry.quantity(&IDLE),
        charging: charging(entry),
        bank: named(entry, &BANK_NAME),
        board: named(entry, &BOARD_NAME),
        route: entry.quantity(&ROUTE),
        stud: entry.parsed(&STUD),
        price: entry.number(&PRICE),
    })
}

pub(super) fn generator(entry: &mut Entry<'_, '_>) -> Option<GeneratorPart> {
    let name = entry.name();
    let kind = entry.word(&GENERATOR_KIND, GENERATOR_WORDS);
    Some(GeneratorPart {
        name: name?,
        line: entry.line(),
        kind: kind?,
        power: entry.quantity(&POWER),
        output: entry.quantity(&OUTPUT),
        hot_output: entry.quantity(&HOT_OUTPUT),
        efficiency: entry.quantity(&EFFICIENCY),
        power_factor: entry.quantity(&POWER_FACTOR),
        hours: entry.quantity(&HOURS),
        daily: entry.quantity(&DAILY),
        load_dump: said(entry, &LOAD_DUMP),
        self_limiting: entry.flag(&SELF_LIMITING, false),
        charging: charging(entry),
        bank: named(entry, &BANK_NAME),
        board: named(entry, &BOARD_NAME),
        route: entry.quantity(&ROUTE),
        idle: entry.quantity(&IDLE),
        stud: entry.parsed(&STUD),
    })
}

pub(super) fn converter(entry: &mut Entry<'_, '_>) -> Option<ConverterPart> {
    let name = entry.name();
    let output = entry.quantity(&OUTPUT_VOLTAGE);
    let limit = entry.quantity(&LIMIT);
    let efficiency = entry.quantity(&EFFICIENCY);
    let (least, greatest) = (entry.quantity(&LEAST), entry.quantity(&GREATEST));
    entry.ordered::<ElectricPotential>(&LEAST, least, &GREATEST, greatest);
    Some(ConverterPart {
        name: name?,
        line: entry.line(),
        output: output?,
        limit: limit?,
        efficiency: efficiency?,
        least,
        greatest,
        isolated: said(entry, &ISOLATED),
        idle: entry.quantity(&IDLE),
        stud: entry.parsed(&STUD),
    })
}

pub(super) fn inverter(entry: &mut Entry<'_, '_>) -> Option<InverterPart> {
    let name = entry.name();
    let power: Option<Power> = entry.quantity(&POWER);
    let surge: Option<Power> = entry.quantity(&SURGE);
    let idle: Option<Power> = entry.quantity(&IDLE);
    let (least, greatest) = (entry.quantity(&LEAST), entry.quantity(&GREATEST));
    entry.ordered::<ElectricPotential>(&LEAST, least, &GREATEST, greatest);
    entry.ordered(&POWER, power, &SURGE, surge);
    entry.ordered(&IDLE, idle, &POWER, power);
    Some(InverterPart {
        name: name?,
        line: entry.line(),
        model: named(entry, &MODEL),
        nominal: entry.quantity(&NOMINAL),
        power,
        surge,
        surge_time: entry.quantity(&SURGE_TIME),
        efficiency: entry.quantity(&EFFICIENCY),
        idle,
        least,
        greatest,
        capacitance: entry.quantity(&CAPACITANCE),
        precharge: said(entry, &PRECHARGE),
        stud: entry.parsed(&STUD),
        terminal: entry.quantity(&TERMINAL),
        board: named(entry, &BOARD_NAME),
        route: entry.quantity(&ROUTE),
        price: entry.number(&PRICE),
    })
}

pub(super) fn battery(entry: &mut Entry<'_, '_>) -> Option<StockBattery> {
    let name = entry.name();
    let (chemistry, nominal, capacity) =
        (entry.parsed(&CHEMISTRY), entry.quantity(&NOMINAL), entry.quantity(&CAPACITY));
    Some(StockBattery {
        name: name?,
        line: entry.line(),
        chemistry: chemistry?,
        nominal: nominal?,
        capacity: capacity?,
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
    })
}

/// Every entry of a kind in the stock; what could not be read is left out, its problems refuse the file.
pub(super) fn all<'d, T>(
    text: &'d str,
    log: &mut super::log::Log,
    section: &'static super::keys::Section,
    found: alloc::vec::Vec<Found<'d>>,
    read: fn(&mut Entry<'d, '_>) -> Option<T>,
) -> alloc::vec::Vec<T> {
    found.into_iter().filter_map(|found| read(&mut Entry::open(text, log, section, found, None))).collect()
}
