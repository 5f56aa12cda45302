//! Names that one section states of another, and what depends on both: each at the place where it is written.

use alloc::collections::{BTreeMap, BTreeSet};
use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::entry::Found;
use super::keys::{Key, POWER, Section};
use super::log::{Cut, Log, Quoted, nearest};
use super::nodes::{Placed, text_of};
use super::plant_keys::{
    BANK_NAME, BATTERY, BOARD_NAME, CONTROLLER_NAME, INVERTER_NAME, MEASURED_AT, MODEL, MODULE, ON,
};
use super::sections::{
    ARRAY, BANK, CONTROLLER, GENERATOR, INVERTER, LOAD, READING, STOCK_BATTERY, STOCK_CONTROLLER,
    STOCK_INVERTER, STOCK_MODULE,
};

/// Where the nearest name is no longer searched for: it is dear in a file where every name is wrong.
const MOST_SEARCHED: usize = 200;

/// The sections of a document, as they are found.
#[derive(Default)]
pub(super) struct Sections<'d> {
    pub(super) banks: Vec<Found<'d>>,
    pub(super) arrays: Vec<Found<'d>>,
    pub(super) controllers: Vec<Found<'d>>,
    pub(super) generators: Vec<Found<'d>>,
    pub(super) converters: Vec<Found<'d>>,
    pub(super) boards: Vec<Found<'d>>,
    pub(super) inverters: Vec<Found<'d>>,
    pub(super) loads: Vec<Found<'d>>,
    pub(super) circuits: Vec<Found<'d>>,
    pub(super) readings: Vec<Found<'d>>,
    pub(super) batteries: Vec<Found<'d>>,
    pub(super) modules: Vec<Found<'d>>,
    pub(super) controller_models: Vec<Found<'d>>,
    pub(super) inverter_models: Vec<Found<'d>>,
}

type Names<'d> = BTreeSet<&'d str>;

fn names<'d>(lists: &[&[Found<'d>]]) -> Names<'d> {
    let all = lists.iter().flat_map(|list| list.iter());
    all.filter_map(|found| text_of(*found, "name")).map(|(name, _)| name).collect()
}

fn place(section: &Section, found: Found<'_>) -> String {
    text_of(found, "name").map_or_else(
        || String::from(section.header),
        |(name, _)| format!("{} {}", section.header, Quoted(name)),
    )
}

fn has(found: Found<'_>, key: &Key) -> bool {
    found.table.contains_key(key.name)
}

fn is_ac(load: Found<'_>) -> bool {
    load.table.get("ac").and_then(|value| value.get_ref().as_bool()).unwrap_or(false)
}

/// A name that must be one of those known.
fn known(
    (name, at): Placed<'_>,
    place: impl Fn() -> String,
    key: &Key,
    what: &str,
    known: &Names<'_>,
    log: &mut Log,
) {
    if known.contains(name) {
        return;
    }
    let near = if log.count() < MOST_SEARCHED { nearest(name, known.iter().copied()) } else { None };
    let sentence = match near {
        Some(word) => format!("no {what} is named '{}'; did you mean '{}'?", Cut(name), Cut(word)),
        None => format!("no {what} is named '{}'; name one of this file, or take the line out", Cut(name)),
    };
    log.push(at, format!("{}, {}", place(), key.name), sentence);
}

pub(super) fn check(sections: &Sections<'_>, log: &mut Log) {
    let boards = names(&[&sections.boards]);
    let banks = names(&[&sections.banks]);
    let controllers = names(&[&sections.controllers]);
    let inverters = names(&[&sections.inverters]);
    let batteries = names(&[&sections.batteries]);
    let modules = names(&[&sections.modules]);
    let controller_models = names(&[&sections.controller_models]);
    let inverter_models = names(&[&sections.inverter_models]);
    let all: [(&[Found<'_>], &Section, &Key, &str, &Names<'_>); 13] = [
        (&sections.banks, &BANK, &BATTERY, "[[stock.battery]]", &batteries),
        (&sections.banks, &BANK, &BOARD_NAME, "board", &boards),
        (&sections.arrays, &ARRAY, &MODULE, "[[stock.module]]", &modules),
        (&sections.arrays, &ARRAY, &CONTROLLER_NAME, "controller", &controllers),
        (&sections.controllers, &CONTROLLER, &MODEL, "[[stock.controller]]", &controller_models),
        (&sections.controllers, &CONTROLLER, &BANK_NAME, "bank", &banks),
        (&sections.controllers, &CONTROLLER, &BOARD_NAME, "board", &boards),
        (&sections.generators, &GENERATOR, &BANK_NAME, "bank", &banks),
        (&sections.generators, &GENERATOR, &BOARD_NAME, "board", &boards),
        (&sections.inverters, &INVERTER, &MODEL, "[[stock.inverter]]", &inverter_models),
        (&sections.inverters, &INVERTER, &BOARD_NAME, "board", &boards),
        (&sections.loads, &LOAD, &INVERTER_NAME, "inverter", &inverters),
        (&sections.loads, &LOAD, &BOARD_NAME, "board", &boards),
    ];
    for (list, section, key, what, names) in all {
        for &found in list {
            if let Some(name) = text_of(found, key.name) {
                known(name, || place(section, found), key, what, names, log);
            }
        }
    }
    for (list, section) in [
        (&sections.batteries, &STOCK_BATTERY),
        (&sections.modules, &STOCK_MODULE),
        (&sections.controller_models, &STOCK_CONTROLLER),
        (&sections.inverter_models, &STOCK_INVERTER),
        (&sections.readings, &READING),
    ] {
        once(list, section, log);
    }
    ac(sections, log);
    readings(sections, log);
}

/// A name stands once among sections of a kind.
fn once(list: &[Found<'_>], section: &Section, log: &mut Log) {
    let mut first: BTreeMap<&str, usize> = BTreeMap::new();
    for &found in list {
        let Some((name, at)) = text_of(found, "name") else { continue };
        let before = *first.entry(name).or_insert(found.at);
        if before != found.at {
            let sentence = format!(
                "the name is taken by the {} of line {}; rename one",
                section.header,
                log.line(before)
            );
            log.push(at, format!("{}, name", place(section, found)), sentence);
        }
    }
}

/// AC loads and the inverters that feed them.
fn ac(sections: &Sections<'_>, log: &mut Log) {
    let several = sections.inverters.len() > 1;
    let mut fed: Names<'_> = BTreeSet::new();
    let mut any = false;
    for &load in sections.loads.iter().filter(|load| is_ac(**load)) {
        any = true;
        match text_of(load, INVERTER_NAME.name) {
            Some((name, _)) => {
                fed.insert(name);
            }
            None if several && !has(load, &INVERTER_NAME) => {
                let sentence = format!(
                    "which of the {} inverters feeds it is not stated; state it as 'inverter'",
                    sections.inverters.len()
                );
                log.push(load.at, place(&LOAD, load), sentence);
            }
            None => {}
        }
    }
    for &inverter in &sections.inverters {
        let is_sized = has(inverter, &POWER) || has(inverter, &MODEL);
        let feeds =
            if several { text_of(inverter, "name").is_some_and(|(name, _)| fed.contains(name)) } else { any };
        if !is_sized && !feeds {
            let sentence =
                "no AC load tells its power; state power, or the loads that it feeds with ac = true";
            log.push(inverter.at, place(&INVERTER, inverter), String::from(sentence));
        }
    }
}

/// Readings are of things of the file.
fn readings(sections: &Sections<'_>, log: &mut Log) {
    if sections.readings.is_empty() {
        return;
    }
    let loads = names(&[&sections.loads]);
    // Of what sort each is, and whether what was read can be read there, tells the report.
    let all = names(&[
        &sections.banks,
        &sections.boards,
        &sections.loads,
        &sections.inverters,
        &sections.arrays,
        &sections.controllers,
        &sections.generators,
        &sections.converters,
        &sections.circuits,
    ]);
    for &reading in &sections.readings {
        let here = || place(&READING, reading);
        if let Some(at) = text_of(reading, MEASURED_AT.name) {
            known(at, here, &MEASURED_AT, "part or circuit", &all, log);
        }
        let on = reading.table.get(ON.name).and_then(|value| value.get_ref().as_array());
        for item in on.into_iter().flat_map(|list| list.iter()) {
            if let Some(name) = item.get_ref().as_str() {
                known((name, item.span().start), here, &ON, "load", &loads, log);
            }
        }
    }
}
