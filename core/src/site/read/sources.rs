//! What charges and what converts: controllers, generators, converters and inverters.

use alloc::borrow::ToOwned;
use alloc::format;

use super::entry::Entry;
use super::keys::{EFFICIENCY, GREATEST, IDLE, Key, LEAST, NOMINAL, POWER, PRICE, STUD, SURGE, TERMINAL};
use super::plant::{named, rising, said};
use super::plant_keys::{
    ABSORPTION, BANK_NAME, BOARD_NAME, CAPACITANCE, COMPENSATION, CONTROLLER_KIND, DAILY, EQUALISE, FLOAT,
    GENERATOR_KIND, GREATEST_INPUT, HOT_OUTPUT, HOURS, INPUT_CURRENT, ISOLATED, LIMIT, LOAD_DUMP, MODEL,
    NOMINALS, OPERATING, OUTPUT, OUTPUT_VOLTAGE, POWER_FACTOR, PRECHARGE, ROUTE, SELF_LIMITING, SENSE,
    START_MARGIN, SURGE_TIME,
};
use super::sections::{CONTROLLER_WORDS, GENERATOR_WORDS, SENSE_WORDS};
use crate::quantity::{ElectricPotential, Power, Textual};
use crate::site::parts::{
    Charging, ControllerKind, ControllerPart, ConverterPart, GeneratorKind, GeneratorPart, InverterPart,
};

fn charging(entry: &mut Entry<'_, '_>) -> Charging {
    let absorption: Option<ElectricPotential> = entry.quantity(&ABSORPTION);
    let float: Option<ElectricPotential> = entry.quantity(&FLOAT);
    let equalise: Option<ElectricPotential> = entry.quantity(&EQUALISE);
    entry.ordered(&FLOAT, float, &ABSORPTION, absorption);
    entry.ordered(&ABSORPTION, absorption, &EQUALISE, equalise);
    if absorption.is_none() {
        entry.ordered(&FLOAT, float, &EQUALISE, equalise);
    }
    Charging {
        absorption,
        float,
        equalise,
        compensation: entry.quantity(&COMPENSATION),
        sense: entry.word(&SENSE, SENSE_WORDS),
    }
}

/// What a part says beyond its model in the stock.
fn within<Q: Textual>(entry: &mut Entry<'_, '_>, key: &Key, own: Option<Q>, model: Option<Q>) {
    if let (Some(own), Some(model)) = (own, model)
        && own.base() > model.base()
    {
        let sentence = format!(
            "{} is above what its model in the stock states; mend the one that is wrong",
            entry.written(key)
        );
        entry.problem(key, sentence);
    }
}

/// What a part says otherwise than its model in the stock.
fn alike<T: PartialEq>(entry: &mut Entry<'_, '_>, key: &Key, own: Option<T>, model: Option<T>) {
    if let (Some(own), Some(model)) = (own, model)
        && own != model
    {
        let sentence = format!(
            "{} is not what its model in the stock states; mend the one that is wrong",
            entry.written(key)
        );
        entry.problem(key, sentence);
    }
}

/// `[[controller]]` with the stock's, or one of the stock.
pub(super) fn controller(entry: &mut Entry<'_, '_>, stock: &[ControllerPart]) -> Option<ControllerPart> {
    let name = entry.name();
    let kind = entry.word(&CONTROLLER_KIND, CONTROLLER_WORDS);
    let nominals = entry.quantities(&NOMINALS);
    let operating: Option<(ElectricPotential, ElectricPotential)> = rising(entry, &OPERATING);
    let part = ControllerPart {
        line: entry.line(),
        model: named(entry, &MODEL),
        kind,
        greatest_input: entry.quantity(&GREATEST_INPUT),
        input_current: entry.quantity(&INPUT_CURRENT),
        operating,
        start_margin: entry.quantity(&START_MARGIN),
        output: entry.quantity(&OUTPUT),
        nominals,
        efficiency: entry.quantity(&EFFICIENCY),
        idle: entry.quantity(&IDLE),
        charging: charging(entry),
        load_dump: said(entry, &LOAD_DUMP),
        bank: named(entry, &BANK_NAME),
        board: named(entry, &BOARD_NAME),
        route: entry.quantity(&ROUTE),
        stud: entry.parsed(&STUD),
        price: entry.number(&PRICE),
        name: name?,
    };
    if kind == Some(ControllerKind::Pwm) && operating.is_some() {
        entry.problem(
            &OPERATING,
            "it belongs to an mppt controller; a pwm one joins array and bank and tracks nothing: take it out"
                .to_owned(),
        );
    }
    if let (Some((_, most)), Some(greatest)) = (operating, part.greatest_input)
        && most > greatest
    {
        let sentence = format!(
            "its upper end is above greatest_input = {}; mend the one that is wrong",
            entry.written(&GREATEST_INPUT)
        );
        entry.problem(&OPERATING, sentence);
    }
    if let Some(model) = part.model.as_ref().and_then(|name| stock.iter().find(|model| model.name == *name)) {
        alike(entry, &CONTROLLER_KIND, kind, model.kind);
        within(entry, &GREATEST_INPUT, part.greatest_input, model.greatest_input);
        within(entry, &INPUT_CURRENT, part.input_current, model.input_current);
        within(entry, &OUTPUT, part.output, model.output);
    }
    Some(part)
}

/// Keys that only some kinds of source have, with those kinds.
const OF_KINDS: [(&Key, &[GeneratorKind], &str); 7] = [
    (
        &POWER,
        &[GeneratorKind::Engine, GeneratorKind::Shore, GeneratorKind::Wind, GeneratorKind::Hydro],
        "sources with a nameplate in watts; of an alternator state output",
    ),
    (
        &EFFICIENCY,
        &[GeneratorKind::Engine, GeneratorKind::Shore],
        "the charger of an engine set or a shore supply",
    ),
    (
        &POWER_FACTOR,
        &[GeneratorKind::Engine, GeneratorKind::Shore],
        "the charger of an engine set or a shore supply",
    ),
    (&HOT_OUTPUT, &[GeneratorKind::Alternator], "an alternator"),
    (&SELF_LIMITING, &[GeneratorKind::Alternator], "an alternator"),
    (
        &HOURS,
        &[GeneratorKind::Engine, GeneratorKind::Alternator, GeneratorKind::Shore],
        "a source that runs when it is wanted; of wind and hydro state daily",
    ),
    (
        &DAILY,
        &[GeneratorKind::Wind, GeneratorKind::Hydro],
        "wind and hydro; of other kinds state output and hours",
    ),
];

pub(super) fn generator(entry: &mut Entry<'_, '_>) -> Option<GeneratorPart> {
    let name = entry.name();
    let kind = entry.word(&GENERATOR_KIND, GENERATOR_WORDS);
    if let Some(kind) = kind {
        for (key, kinds, whose) in OF_KINDS {
            if entry.has(key) && !kinds.contains(&kind) {
                entry.problem(key, format!("it belongs to {whose}; take it out, or mend kind"));
            }
        }
    }
    Some(GeneratorPart {
        line: entry.line(),
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
        name: name?,
        kind: kind?,
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
        line: entry.line(),
        least,
        greatest,
        isolated: said(entry, &ISOLATED),
        idle: entry.quantity(&IDLE),
        stud: entry.parsed(&STUD),
        name: name?,
        output: output?,
        limit: limit?,
        efficiency: efficiency?,
    })
}

/// `[[inverter]]` with the stock's, or one of the stock.
pub(super) fn inverter(entry: &mut Entry<'_, '_>, stock: &[InverterPart]) -> Option<InverterPart> {
    let name = entry.name();
    let power: Option<Power> = entry.quantity(&POWER);
    let surge: Option<Power> = entry.quantity(&SURGE);
    let idle: Option<Power> = entry.quantity(&IDLE);
    let (least, greatest) = (entry.quantity(&LEAST), entry.quantity(&GREATEST));
    entry.ordered::<ElectricPotential>(&LEAST, least, &GREATEST, greatest);
    entry.ordered(&POWER, power, &SURGE, surge);
    entry.ordered(&IDLE, idle, &POWER, power);
    let part = InverterPart {
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
        name: name?,
    };
    entry.ordered(&LEAST, least, &NOMINAL, part.nominal);
    entry.ordered(&NOMINAL, part.nominal, &GREATEST, greatest);
    if part.surge_time.is_some() && !entry.has(&SURGE) && !entry.has(&MODEL) && !entry.is_excused(&[&SURGE]) {
        let sentence = format!("surge_time needs surge beside it, such as surge = {}", SURGE.example);
        entry.problem(&SURGE_TIME, sentence);
    }
    if let Some(model) = part.model.as_ref().and_then(|name| stock.iter().find(|model| model.name == *name)) {
        alike(entry, &NOMINAL, part.nominal, model.nominal);
        within(entry, &POWER, power, model.power);
        within(entry, &SURGE, surge, model.surge);
    }
    Some(part)
}
