//! In which order the parts are joined and taken apart (R10).

use alloc::collections::{BTreeMap, BTreeSet};
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::capacitance::farad;
use uom::si::electric_potential::volt;

use super::path::Gear;
use crate::site::finding::digits;
use crate::site::model::CircuitEntry;
use crate::site::plan::{Plan, Planned};
use crate::site::system::{Array, BankEntry, ChargerKind, InverterEntry, Site};

/// Current into an empty input capacitor through its resistor, A. Common practice, no source.
const PRE_CHARGE_A: f64 = 1.0;

/// Which way a step goes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Direction {
    /// Towards power.
    Connect,
    /// Away from it.
    Disconnect,
}

/// One step of the switching order.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SwitchingStep {
    /// Which way.
    pub direction: Direction,
    /// What is done.
    pub what: String,
}

pub(super) fn steps(site: &Site, plan: &Plan) -> Vec<SwitchingStep> {
    let there =
        connect(site, plan).into_iter().map(|what| SwitchingStep { direction: Direction::Connect, what });
    let back = disconnect(site, plan);
    there
        .chain(back.into_iter().map(|what| SwitchingStep { direction: Direction::Disconnect, what }))
        .collect()
}

/// Circuits with an end at a part, and what opens them.
fn at<'a>(site: &'a Site, plan: &'a Plan, name: &'a str) -> impl Iterator<Item = (&'a CircuitEntry, Gear)> {
    let all = site.circuits.iter().zip(&plan.circuits);
    all.filter(move |(c, _)| c.from == name || c.to == name)
        .filter_map(|(c, p): (&CircuitEntry, &Option<Planned>)| Some((c, Gear::of(c, p.as_ref()?))))
}

/// `close breaker 4 (lights), close breaker 5 (pump)`; circuits without a device are left out.
fn listed<'a>(
    site: &'a Site,
    plan: &'a Plan,
    names: impl Iterator<Item = &'a str>,
    words: fn(&Gear) -> String,
) -> String {
    let names: Vec<&str> = names.collect();
    // Circuits by what is asked for at either end, in the order of the document.
    let mut joined: BTreeMap<&str, Vec<(&CircuitEntry, &Planned)>> =
        names.iter().map(|&name| (name, Vec::new())).collect();
    for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
        let Some(planned) = planned else { continue };
        for end in [Some(&circuit.from), Some(&circuit.to).filter(|to| **to != circuit.from)] {
            if let Some(list) = end.and_then(|end| joined.get_mut(end.as_str())) {
                list.push((circuit, planned));
            }
        }
    }
    let mut known = BTreeSet::new();
    let mut list: Vec<String> = Vec::new();
    for &(circuit, planned) in names.iter().filter_map(|name| joined.get(name)).flatten() {
        let gear = Gear::of(circuit, planned);
        if !gear.is_empty() {
            let entry = format!("{} ({})", words(&gear), circuit.name);
            if known.insert(entry.clone()) {
                list.push(entry);
            }
        }
    }
    list.join("; ")
}

fn with_gear(head: String, gear: &str) -> String {
    if gear.is_empty() { head } else { format!("{head}: {gear}") }
}

/// Boards that are fed from another board.
fn feeders(site: &Site, plan: &Plan, words: fn(&Gear) -> String) -> String {
    let boards: BTreeSet<&str> = site.boards.iter().map(|b| b.name.as_str()).collect();
    let board = |name: &String| boards.contains(name.as_str());
    let mut list = Vec::new();
    for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
        if let Some(planned) = planned
            && board(&circuit.from)
            && board(&circuit.to)
        {
            let gear = Gear::of(circuit, planned);
            if !gear.is_empty() {
                list.push(format!("{} ({})", words(&gear), circuit.name));
            }
        }
    }
    list.join("; ")
}

fn controllers(site: &Site) -> impl Iterator<Item = &str> {
    let chargers = site.chargers.iter();
    chargers.filter(|c| matches!(c.kind, ChargerKind::Controller(_))).map(|c| c.name.as_str())
}

fn generators(site: &Site) -> impl Iterator<Item = &str> {
    let chargers = site.chargers.iter();
    chargers.filter(|c| matches!(c.kind, ChargerKind::Generator(_))).map(|c| c.name.as_str())
}

fn loads(site: &Site) -> impl Iterator<Item = &str> {
    site.loads.iter().filter(|l| !l.ac).map(|l| l.name.as_str())
}

/// Of a circuit's gear, without what its controller has on the array's side.
fn output<'a>(site: &'a Site, plan: &'a Plan, name: &'a str, words: fn(&Gear) -> String) -> String {
    let outputs = at(site, plan, name).filter(|(c, gear)| c.from == name && !gear.is_empty());
    let list: Vec<String> = outputs.map(|(c, gear)| format!("{} ({})", words(&gear), c.name)).collect();
    list.join("; ")
}

/// Of a bank: what opens the way to boards and other banks. What leads to an inverter, a load or a source has its own step.
fn bank_gear(site: &Site, plan: &Plan, bank: &BankEntry, words: fn(&Gear) -> String) -> String {
    let boards = site.boards.iter().map(|b| b.name.as_str());
    let batteries = site.banks.iter().filter(|b| b.is_battery()).map(|b| b.name.as_str());
    let all: BTreeSet<&str> = boards.chain(batteries).collect();
    let shared = |name: &String| all.contains(name.as_str());
    let circuits =
        at(site, plan, &bank.name).filter(|(c, gear)| shared(&c.from) && shared(&c.to) && !gear.is_empty());
    let list: Vec<String> = circuits.map(|(c, gear)| format!("{} ({})", words(&gear), c.name)).collect();
    list.join("; ")
}

/// What opens the way from an array to its controller: its isolator first, fuses only without current.
fn isolator(site: &Site, plan: &Plan, array: &Array, words: fn(&Gear) -> String) -> Option<String> {
    let gear = listed(site, plan, core::iter::once(array.part.name.as_str()), words);
    let closing = words(&Gear { switches: alloc::vec!["its isolator".to_string()], fuses: Vec::new() });
    // A designed array is to be bought with one.
    match (array.part.isolator.is_some() || array.designed, gear.is_empty()) {
        (true, true) => Some(closing),
        // Closed last, opened first.
        (true, false) if closing.starts_with("close") => Some(format!("{gear}; then {closing}")),
        (true, false) => Some(format!("{closing}; then {gear}")),
        (false, false) => Some(gear),
        (false, true) => None,
    }
}

fn connect(site: &Site, plan: &Plan) -> Vec<String> {
    let mut steps = alloc::vec!["everything open, all loads and sources off".to_string()];
    for bank in site.banks.iter().filter(|b| b.is_battery()) {
        steps.push(with_gear(
            format!("bank \"{}\" joined", bank.name),
            &bank_gear(site, plan, bank, Gear::closing),
        ));
    }
    for name in controllers(site) {
        let gear = output(site, plan, name, Gear::closing);
        let head = format!(
            "controller \"{name}\", its bank side; wait until it shows the bank's volts, enter set points"
        );
        steps.push(with_gear(head, &gear));
    }
    let boards = feeders(site, plan, Gear::closing);
    if !boards.is_empty() {
        steps.push(format!("boards: {boards}"));
    }
    for inverter in &site.inverters {
        let gear = listed(site, plan, core::iter::once(inverter.name.as_str()), Gear::closing);
        let head =
            format!("inverter \"{}\", switched off: {}", inverter.name, pre_charge(site, plan, inverter));
        steps.push(if gear.is_empty() { head } else { format!("{head}; then {gear}") });
    }
    for converter in &site.converters {
        let gear = listed(site, plan, core::iter::once(converter.name.as_str()), Gear::closing);
        steps.push(with_gear(format!("converter \"{}\"", converter.name), &gear));
    }
    let gear = listed(site, plan, loads(site), Gear::closing);
    if loads(site).next().is_some() {
        steps.push(with_gear("loads, one by one, each measured".to_string(), &gear));
    }
    for name in generators(site) {
        steps.push(with_gear(
            format!("charging by \"{name}\", then start it"),
            &output(site, plan, name, Gear::closing),
        ));
    }
    for array in &site.arrays {
        let gear = isolator(site, plan, array, Gear::closing);
        let gear = gear.unwrap_or_else(|| "no isolator is stated; cover the modules first".to_string());
        steps.push(format!("array \"{}\" last: {gear}", array.part.name));
    }
    if !site.arrays.is_empty() {
        steps.push("an array never feeds a controller without battery: no bank, no array".to_string());
    }
    steps
}

fn disconnect(site: &Site, plan: &Plan) -> Vec<String> {
    let mut steps = Vec::new();
    for array in &site.arrays {
        let gear = isolator(site, plan, array, Gear::opening);
        let mut what = match (gear, array.part.load_break) {
            (Some(gear), Some(false)) => {
                format!("{gear}, not under load: only while its controller is off or it is dark")
            }
            (Some(gear), _) => gear,
            (None, _) => {
                "no isolator is stated; cover the modules first, part no connector under load".to_string()
            }
        };
        what.push_str("; up to there it stays live in daylight");
        steps.push(format!("array \"{}\" first: {what}", array.part.name));
    }
    for inverter in &site.inverters {
        let gear = listed(site, plan, core::iter::once(inverter.name.as_str()), Gear::opening);
        steps.push(with_gear(format!("inverter \"{}\" off, its AC loads first", inverter.name), &gear));
    }
    if loads(site).next().is_some() {
        let gear = listed(site, plan, loads(site), Gear::opening);
        steps.push(with_gear("loads off".to_string(), &gear));
    }
    for converter in &site.converters {
        let gear = listed(site, plan, core::iter::once(converter.name.as_str()), Gear::opening);
        steps.push(with_gear(format!("converter \"{}\"", converter.name), &gear));
    }
    for name in generators(site) {
        steps.push(with_gear(format!("stop \"{name}\""), &output(site, plan, name, Gear::opening)));
    }
    for name in controllers(site) {
        let gear = output(site, plan, name, Gear::opening);
        steps.push(with_gear(format!("controller \"{name}\", its bank side, once its array is off"), &gear));
    }
    let boards = feeders(site, plan, Gear::opening);
    if !boards.is_empty() {
        steps.push(format!("boards: {boards}"));
    }
    for bank in site.banks.iter().filter(|b| b.is_battery()) {
        steps.push(with_gear(
            format!("bank \"{}\" last", bank.name),
            &bank_gear(site, plan, bank, Gear::opening),
        ));
    }
    let mut end = String::from("prove dead at every board");
    if !site.inverters.is_empty() {
        end.push_str("; inverter inputs hold their charge: wait and measure");
    }
    end.push_str("; the bank's own terminals stay live");
    steps.push(end);
    steps
}

/// Highest volts at an inverter's input.
fn highest(site: &Site, plan: &Plan, inverter: &InverterEntry) -> Option<f64> {
    let mut circuits = site.circuits.iter().zip(&plan.circuits);
    let planned = circuits
        .find_map(|(c, p)| (c.to == inverter.name || c.from == inverter.name).then_some(p.as_ref())?);
    let bank = || site.banks.iter().find(|b: &&BankEntry| b.is_battery()).map(|b| b.highest.get::<volt>());
    planned.map(|p| p.flow.highest).or_else(bank)
}

/// How an empty input is filled before its device closes. A resistor of V/I, and five time constants.
fn pre_charge(site: &Site, plan: &Plan, inverter: &InverterEntry) -> String {
    if inverter.part.precharge == Some(true) {
        return "through its own pre-charge until the volts across the open contact stay".to_string();
    }
    let Some(volts) = highest(site, plan, inverter) else {
        return "fill its input through a resistor until the volts across the open contact stay".to_string();
    };
    let ohms = volts / PRE_CHARGE_A;
    match inverter.part.capacitance.map(|c| c.get::<farad>()) {
        Some(farads) => format!(
            "fill its input through a resistor of {} Ω for {} s ({} A at most, five time constants)",
            digits(ohms),
            digits(5.0 * ohms * farads),
            digits(PRE_CHARGE_A)
        ),
        None => format!(
            "fill its input through a resistor of {} Ω ({} A at most) until the volts across the open contact stay",
            digits(ohms),
            digits(PRE_CHARGE_A)
        ),
    }
}
