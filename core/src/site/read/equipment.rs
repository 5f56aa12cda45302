//! Banks, boards, inverters and loads.

use alloc::borrow::ToOwned;
use alloc::format;

use super::entry::Entry;
use super::keys::{
    BUSBAR, CAPACITY, CHEMISTRY, CONTINUOUS, COUNT, CURRENT, CUT_OFF, EFFICIENCY, GREATEST,
    GREATEST_DISCHARGE, HIGHEST, IDLE, INTERNAL, LEAST, LOAD_KIND, LOAD_KIND_WORDS, LUGS_ON_STUD, NOMINAL,
    POWER, SHORT_CIRCUIT, START, STRINGS, STUD, SURGE, TERMINAL, USE, USE_WORDS,
};
use crate::quantity::{ElectricPotential, Power};
use crate::rules::LoadUse;
use crate::site::model::{BankEntry, Board, InverterEntry, LoadEntry, LoadKind};

pub(super) fn bank(entry: &mut Entry<'_, '_>) -> Option<BankEntry> {
    let name = entry.name();
    let chemistry = entry.parsed(&CHEMISTRY);
    let nominal: Option<ElectricPotential> = entry.quantity(&NOMINAL);
    let capacity = entry.quantity(&CAPACITY);
    let strings = entry.count(&STRINGS);
    let cut_off: Option<ElectricPotential> = entry.quantity(&CUT_OFF);
    let highest: Option<ElectricPotential> = entry.quantity(&HIGHEST);
    let short_circuit = entry.quantity(&SHORT_CIRCUIT);
    let internal_resistance = entry.quantity(&INTERNAL);
    let greatest_discharge = entry.quantity(&GREATEST_DISCHARGE);
    let stud = entry.parsed(&STUD);

    entry.ordered(&CUT_OFF, cut_off, &NOMINAL, nominal);
    entry.ordered(&NOMINAL, nominal, &HIGHEST, highest);
    if cut_off.is_some() && cut_off == highest {
        let sentence =
            format!("{} is also the highest voltage; the cut-off must be below", entry.written(&CUT_OFF));
        entry.problem(&CUT_OFF, sentence);
    }
    Some(BankEntry {
        name: name?,
        line: entry.line(),
        chemistry: chemistry?,
        nominal: nominal?,
        capacity: capacity?,
        strings: strings.unwrap_or(1),
        cut_off: cut_off?,
        highest: highest?,
        short_circuit,
        internal_resistance,
        greatest_discharge,
        stud,
    })
}

pub(super) fn board(entry: &mut Entry<'_, '_>) -> Option<Board> {
    let name = entry.name();
    let busbar = entry.quantity(&BUSBAR);
    let stud = entry.parsed(&STUD);
    let lugs_on_stud = entry.count(&LUGS_ON_STUD);
    Some(Board { name: name?, line: entry.line(), busbar, stud, lugs_on_stud })
}

pub(super) fn inverter(entry: &mut Entry<'_, '_>) -> Option<InverterEntry> {
    let name = entry.name();
    let power: Option<Power> = entry.quantity(&POWER);
    let surge: Option<Power> = entry.quantity(&SURGE);
    let efficiency = entry.quantity(&EFFICIENCY);
    let idle: Option<Power> = entry.quantity(&IDLE);
    let (least, greatest) = supply_range(entry);
    let stud = entry.parsed(&STUD);
    let terminal = entry.quantity(&TERMINAL);

    entry.ordered(&POWER, power, &SURGE, surge);
    entry.ordered(&IDLE, idle, &POWER, power);
    Some(InverterEntry {
        name: name?,
        line: entry.line(),
        power: power?,
        surge,
        efficiency: efficiency?,
        idle,
        least,
        greatest,
        stud,
        terminal,
    })
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
        (false, false) if !entry.may_hide_keys() => entry.problem_here(
            "neither power nor current is stated; write power = \"60 W\" or current = \"5 A\"".to_owned(),
        ),
        _ => {}
    }
    let by_default = if entry.has(&CURRENT) { LoadKind::Current } else { LoadKind::Power };
    Some(LoadEntry {
        name: name?,
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
    })
}

/// Least and greatest supply voltage.
fn supply_range(entry: &mut Entry<'_, '_>) -> (Option<ElectricPotential>, Option<ElectricPotential>) {
    let least = entry.quantity(&LEAST);
    let greatest = entry.quantity(&GREATEST);
    entry.ordered(&LEAST, least, &GREATEST, greatest);
    (least, greatest)
}
