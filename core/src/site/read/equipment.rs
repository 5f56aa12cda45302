//! Boards and loads.

use alloc::borrow::ToOwned;
use alloc::format;

use super::entry::Entry;
use super::keys::{
    BUSBAR, CONTINUOUS, COUNT, CURRENT, GREATEST, Key, LEAST, LOAD_KIND, LOAD_KIND_WORDS, LUGS_ON_STUD,
    POWER, START, STUD, TERMINAL, USE, USE_WORDS,
};
use super::plant::named;
use super::plant_keys::{
    AC, BOARD_NAME, INVERTER_NAME, PAST_DISCONNECT, POWER_FACTOR, PRIORITY, ROUTE, START_POWER, START_TIME,
};
use super::times::{is_standing, use_of};
use crate::quantity::ElectricPotential;
use crate::rules::LoadUse;
use crate::site::model::{Board, LoadEntry, LoadKind};

/// Keys of loads on DC, and of AC loads.
const DC_ONLY: &[&Key] =
    &[&CURRENT, &START, &LEAST, &GREATEST, &STUD, &TERMINAL, &PAST_DISCONNECT, &BOARD_NAME, &ROUTE];
const AC_ONLY: &[&Key] = &[&START_POWER, &START_TIME, &POWER_FACTOR, &INVERTER_NAME];

pub(super) fn board(entry: &mut Entry<'_, '_>) -> Option<Board> {
    let name = entry.name();
    let busbar = entry.quantity(&BUSBAR);
    let stud = entry.parsed(&STUD);
    let lugs_on_stud = entry.count(&LUGS_ON_STUD);
    Some(Board { name: name?, line: entry.line(), busbar, stud, lugs_on_stud, designed: false })
}

pub(super) fn load(entry: &mut Entry<'_, '_>) -> Option<LoadEntry> {
    let name = entry.name();
    let power = entry.quantity(&POWER);
    let current = entry.quantity(&CURRENT);
    let kind = entry.word(&LOAD_KIND, LOAD_KIND_WORDS);
    let count = entry.count(&COUNT);
    let continuous = entry.flag(&CONTINUOUS, true);
    let (least, greatest) = supply_range(entry);
    let start = entry.quantity(&START);
    let usage = entry.word(&USE, USE_WORDS);
    let stud = entry.parsed(&STUD);
    let terminal = entry.quantity(&TERMINAL);

    match (entry.has(&POWER), entry.has(&CURRENT)) {
        (true, true) => {
            let (power, current) = (entry.written(&POWER), entry.written(&CURRENT));
            entry.problem(
                &CURRENT,
                format!("both power {power} and current {current} are stated; keep the one on the nameplate"),
            );
        }
        (false, false) if !entry.is_excused(&[&POWER, &CURRENT]) => entry.problem_here(
            "neither power nor current is stated; write power = \"60 W\" or current = \"5 A\"".to_owned(),
        ),
        _ => {}
    }
    entry.ordered(&CURRENT, current, &START, start);
    let ac = entry.flag(&AC, false);
    let start_power = entry.quantity(&START_POWER);
    let start_time = entry.quantity(&START_TIME);
    entry.ordered(&POWER, power, &START_POWER, start_power);
    let power_factor = entry.quantity(&POWER_FACTOR);
    let inverter = named(entry, &INVERTER_NAME);
    let (others, whose) = if ac {
        (DC_ONLY, "a load on DC; an AC load states power and start_power")
    } else {
        (AC_ONLY, "an AC load; write ac = true, or take it out")
    };
    let has_power = entry.has(&POWER);
    for key in others {
        // A current beside a power is reported as such.
        if entry.has(key) && !(has_power && key.name == CURRENT.name) {
            entry.problem(key, format!("it belongs to {whose}"));
        }
    }
    let by_default = if entry.has(&CURRENT) { LoadKind::Current } else { LoadKind::Power };
    Some(LoadEntry {
        line: entry.line(),
        power,
        current,
        kind: kind.unwrap_or(by_default),
        count: count.unwrap_or(1),
        continuous,
        least,
        greatest,
        start,
        usage: usage.unwrap_or(LoadUse::Other),
        stud,
        terminal,
        use_of: use_of(entry),
        ac,
        inverter,
        power_factor,
        start_power,
        start_time,
        standing: is_standing(entry, continuous),
        priority: entry.count(&PRIORITY),
        past_disconnect: entry.flag(&PAST_DISCONNECT, false),
        board: named(entry, &BOARD_NAME),
        route: entry.quantity(&ROUTE),
        name: name?,
    })
}

/// Least and greatest supply voltage.
fn supply_range(entry: &mut Entry<'_, '_>) -> (Option<ElectricPotential>, Option<ElectricPotential>) {
    let least = entry.quantity(&LEAST);
    let greatest = entry.quantity(&GREATEST);
    entry.ordered(&LEAST, least, &GREATEST, greatest);
    (least, greatest)
}
