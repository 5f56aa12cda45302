//! From the document to the site: what is stated is taken over, what is left out is designed.
//!
//! First the parts that the stock tells, then inverter, bank, array and controller from the energy they must give, last
//! the circuits between them. The sizes of the circuits are left to [`super::plan`].

mod array;
pub(super) mod bank;
mod circuits;
pub(super) mod inverter;
pub(super) mod need;
mod plain;
mod stock;

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::lines::{Rejected, Step};
use super::model::Document;
use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::energy::{Demand, demands};
use super::parts::{ArrayPart, BankPart, ControllerPart};
use super::pv;
use super::read::{Problem, Problems};
use super::system::{BankEntry, Charger, ChargerKind, FeedKind, Site};
use crate::quantity::{
    ElectricCharge, ElectricCurrent, ElectricPotential, Power, Ratio, ThermodynamicTemperature,
};

/// Why the parts are what they are.
#[derive(Clone, Debug, Default)]
pub(super) struct Reasons {
    /// What was taken where the document says nothing.
    pub assumed: Vec<String>,
    /// Of arrays that were designed.
    pub arrays: Vec<ArrayReason>,
    /// Of inverters that were designed.
    pub inverters: Vec<InverterReason>,
    /// Of banks that were designed.
    pub banks: Vec<BankReason>,
}

/// How an inverter came to its size.
#[derive(Clone, Debug)]
pub(super) struct InverterReason {
    pub name: String,
    pub steps: Vec<Step>,
    pub rejected: Vec<Rejected>,
}

/// How a bank came to its size.
#[derive(Clone, Debug)]
pub(super) struct BankReason {
    pub name: String,
    pub steps: Vec<Step>,
    pub rejected: Vec<Rejected>,
}

/// How an array came to its size.
#[derive(Clone, Debug)]
pub(super) struct ArrayReason {
    pub name: String,
    pub worst_month: Option<usize>,
    pub reached: Option<Ratio>,
    pub layout: String,
    pub steps: Vec<Step>,
    pub rejected: Vec<Rejected>,
}

/// What one round of the design tells the next.
#[derive(Clone, Debug, Default, PartialEq)]
struct Hint {
    /// What the designed controllers draw idle.
    controllers_idle: Power,
    /// For each bank of the document the capacity that takes all that its sources give.
    least: Vec<Option<ElectricCharge>>,
}

/// Rounds of the design: each takes the parts of the one before into account.
const ROUNDS: u32 = 5;

/// The whole site of a document, with the reasons of what was designed.
///
/// # Errors
/// What cannot be designed from what is on offer, with line and remedy.
pub(super) fn complete(document: &Document) -> Result<(Site, Reasons), Problems> {
    let mut hint = Hint::default();
    let mut last = round(document, &hint)?;
    for _ in 1..ROUNDS {
        let next = hint_of(&last.0, &hint);
        if next == hint {
            break;
        }
        hint = next;
        last = round(document, &hint)?;
    }
    Ok(last)
}

/// Capacity and idle power that the next round has to take into account; they only grow.
fn hint_of(site: &Site, before: &Hint) -> Hint {
    let designed = |c: &&ControllerPart| c.line == 0;
    let idle: Power = site.controllers.iter().filter(designed).filter_map(|c| c.idle).sum();
    let least = site
        .banks
        .iter()
        .enumerate()
        .filter(|(_, bank)| bank.is_battery())
        .map(|(index, bank)| {
            let old = before.least.get(index).copied().flatten();
            let Some(chemistry) = bank.chemistry() else { return old };
            let sum: ElectricCurrent =
                site.chargers.iter().filter(|c| c.bank == Some(index)).filter_map(|c| c.limit).sum();
            let mild = ThermodynamicTemperature::new::<degree_celsius>(25.0);
            let usual = crate::battery::charge_limit(chemistry, mild).map_or(0.0, |l| l.usual.get());
            if usual <= 0.0 || bank.part.as_ref().is_some_and(|p| p.greatest_charge.is_some()) {
                return old;
            }
            let new = ElectricCharge::new::<ampere_hour>(sum.get::<ampere>() / usual);
            if new > bank.capacity * (1.0 + 1e-9) { Some(new) } else { old }
        })
        .collect();
    Hint {
        controllers_idle: if idle > before.controllers_idle { idle } else { before.controllers_idle },
        least,
    }
}

/// One round of the design.
fn round(document: &Document, hint: &Hint) -> Result<(Site, Reasons), Problems> {
    let mut problems: Vec<Problem> = Vec::new();
    let mut reasons = Reasons::default();
    let mut site = taken_over(document);
    let refused = |problems: Vec<Problem>| Err(Problems(problems, 0));
    let open_inverters = inverter::take(document, &mut site, &mut problems);
    let wishes = bank_wishes(document);
    let peak = |nominal| all_loads(document, &site, nominal);
    let mut first_steps = Vec::new();
    let mut banks = Vec::new();
    for part in &wishes {
        let (bank, steps) = bank::provisional(document, &site, part, &peak);
        banks.push(bank);
        first_steps.push(steps);
    }
    site.banks = banks;
    if let Some(nominal) = site.banks.first().map(|b| b.nominal)
        && let Err(problem) = inverter::design(document, &mut site, open_inverters, nominal, &mut reasons)
    {
        problems.push(problem);
    }
    if !problems.is_empty() {
        return refused(problems);
    }
    inverter::limit_starts(&mut site);
    // Which loads hang on which bank: the sizes do not matter for that.
    let mut plan = site.clone();
    add_chargers(&mut plan);
    add_feeds(&mut plan);
    circuits::add(&mut plan, &mut Reasons::default());
    let mut demands = match demands(&plan) {
        Ok(demands) => demands,
        Err(error) => return refused(alloc::vec![problem(0, "loads".into(), error.to_string())]),
    };
    for demand in &mut demands {
        demand.add_idle(hint.controllers_idle, &site);
    }
    for ((index, part), first) in wishes.iter().enumerate().zip(first_steps) {
        let Some(nominal) = site.banks.get(index).map(|b| b.nominal) else { continue };
        let demand = demands.iter().find(|d| d.banks.contains(&index));
        let made = if bank::is_open(part) {
            let Some(demand) = demand.filter(|d| d.greatest_day().total.value > 0.0) else {
                problems.push(problem(
                    part.line,
                    alloc::format!("[[bank]] \"{}\"", part.name),
                    "nothing hangs on it, so no capacity follows; state its capacity, or the loads",
                ));
                continue;
            };
            let least = hint.least.get(index).copied().flatten();
            let duty = bank::Duty::of(&site, part, nominal, demand, least);
            bank::design(document, &site, part, nominal, &duty, first, &mut reasons)
        } else {
            bank::stated(document, &site, part, nominal)
        };
        match made {
            Ok(bank) => {
                if let Some(slot) = site.banks.get_mut(index) {
                    *slot = bank;
                }
            }
            Err(problem) => problems.push(problem),
        }
    }
    if !problems.is_empty() {
        return refused(problems);
    }
    let open = array::take(document, &mut site, &mut problems);
    design_arrays(document, &mut site, &demands, &open, &mut reasons, &mut problems);
    if !problems.is_empty() {
        return refused(problems);
    }
    add_chargers(&mut site);
    add_feeds(&mut site);
    circuits::add(&mut site, &mut reasons);
    Ok((site, reasons))
}

/// The banks of the document; one without a statement where there is none and something draws.
fn bank_wishes(document: &Document) -> Vec<BankPart> {
    if !document.banks.is_empty() {
        return document.banks.clone();
    }
    let taken = |name: &str| {
        document.loads.iter().any(|l| l.name == name) || document.boards.iter().any(|b| b.name == name)
    };
    let mut name = String::from("bank");
    while taken(&name) {
        name.push_str(" 2");
    }
    alloc::vec![BankPart::unstated(name)]
}

/// All loads at once at a nominal voltage; those behind inverters through a usual efficiency.
fn all_loads(document: &Document, site: &Site, nominal: ElectricPotential) -> Power {
    // Of the inverter that a load names, or of the only one; a model's comes from the stock.
    let efficiency = |load: &super::model::LoadEntry| {
        let only = if document.inverters.len() == 1 { document.inverters.first() } else { None };
        let name = load.inverter.as_ref().or_else(|| only.map(|i| &i.name))?;
        let taken = site.inverters.iter().find(|i| i.name == *name).map(|i| i.efficiency);
        taken.or_else(|| document.inverters.iter().find(|i| i.name == *name)?.efficiency)
    };
    let one = |load: &super::model::LoadEntry| {
        let power = load.power.or_else(|| load.current.map(|a| a * nominal)).unwrap_or_default();
        let plain = Ratio::new::<uom::si::ratio::ratio>(inverter::PLAIN_EFFICIENCY);
        let each = if load.ac { power / efficiency(load).unwrap_or(plain) } else { power };
        each * f64::from(load.count)
    };
    site.loads.iter().map(one).sum()
}

/// Arrays whose size is open, and one for a bank that nothing charges.
fn design_arrays(
    document: &Document,
    site: &mut Site,
    demands: &[Demand],
    open: &[ArrayPart],
    reasons: &mut Reasons,
    problems: &mut Vec<Problem>,
) {
    let mut wishes: Vec<(usize, Option<&ArrayPart>)> = Vec::new();
    for part in open {
        let controller =
            part.controller.as_ref().and_then(|name| site.controllers.iter().find(|c| c.name == *name));
        let name = controller.and_then(|c| c.bank.as_ref());
        let bank = name.map_or(Some(0), |name| site.banks.iter().position(|b| b.name == *name));
        match bank {
            Some(bank) if !wishes.iter().any(|(b, _)| *b == bank) => wishes.push((bank, Some(part))),
            _ => problems.push(problem(
                part.line,
                alloc::format!("[[array]] \"{}\"", part.name),
                "a second array without modules for one bank: state the modules of all but one",
            )),
        }
    }
    let nothing = document.arrays.is_empty() && document.generators.is_empty() && site.weather.is_some();
    if nothing {
        wishes.extend(demands.iter().filter_map(|d| d.banks.first().map(|&b| (b, None))));
    } else if site.weather.is_none()
        && let Some(part) = open.first()
    {
        problems.push(problem(
            part.line,
            alloc::format!("[[array]] \"{}\"", part.name),
            "no number of modules is stated and there is no [weather] to design for; write one of the two",
        ));
        return;
    }
    for (bank, part) in wishes {
        let Some(demand) = demands.iter().find(|d| d.banks.contains(&bank)) else { continue };
        let chemistry = site.banks.get(bank).and_then(BankEntry::chemistry);
        let Some(chemistry) = chemistry else { continue };
        let held = crate::battery::data(chemistry);
        let stored = [held.charge_efficiency, held.energy_efficiency];
        if let Err(problem) = array::design(site, bank, demand, stored, part, reasons) {
            problems.push(problem);
        }
    }
}

/// A problem of a section.
fn problem(line: u32, place: String, text: impl Into<String>) -> Problem {
    Problem { line, place, text: text.into() }
}

/// The outputs that charge, and the banks they charge: the one named, else the one they are joined to, else the only one.
fn add_chargers(site: &mut Site) {
    let bank = |name: Option<&String>, own: &str, board: Option<&String>| match name {
        Some(name) => site.banks.iter().position(|b| b.name == *name),
        None => joined_bank(site, own, board).or_else(|| site.banks.iter().position(BankEntry::is_battery)),
    };
    let mut chargers = Vec::new();
    for (index, controller) in site.controllers.iter().enumerate() {
        chargers.push(Charger {
            name: controller.name.clone(),
            line: controller.line,
            kind: ChargerKind::Controller(index),
            limit: controller.output,
            charging: controller.charging,
            bank: bank(controller.bank.as_ref(), &controller.name, controller.board.as_ref()),
            stud: controller.stud,
        });
    }
    for (index, generator) in site.generators.iter().enumerate() {
        chargers.push(Charger {
            name: generator.name.clone(),
            line: generator.line,
            kind: ChargerKind::Generator(index),
            limit: generator.output,
            charging: generator.charging,
            bank: bank(generator.bank.as_ref(), &generator.name, generator.board.as_ref()),
            stud: generator.stud,
        });
    }
    site.chargers = chargers;
}

/// The bank that a source's own circuits lead to, or those of the board that it is to be joined to.
fn joined_bank(site: &Site, own: &str, board: Option<&String>) -> Option<usize> {
    let is_inlet = |name: &str| {
        site.controllers.iter().any(|c| c.name == name) || site.converters.iter().any(|c| c.name == name)
    };
    let mut seen: Vec<&str> = core::iter::once(own).chain(board.map(String::as_str)).collect();
    let mut next = 0;
    while let Some(&here) = seen.get(next) {
        next += 1;
        if let Some(bank) = site.banks.iter().position(|b| b.is_battery() && b.name == here) {
            return Some(bank);
        }
        for circuit in &site.circuits {
            // What enters a controller or converter does not come out on the same side.
            let other = match (circuit.from == here, circuit.to == here && here != own) {
                (true, _) if !is_inlet(&circuit.to) => circuit.to.as_str(),
                (_, true) if !is_inlet(&circuit.from) => circuit.from.as_str(),
                _ => continue,
            };
            if !seen.contains(&other) {
                seen.push(other);
            }
        }
    }
    None
}

/// Outputs of converters and arrays as sources of their own networks.
fn add_feeds(site: &mut Site) {
    for (index, converter) in site.converters.iter().enumerate() {
        site.banks.push(BankEntry {
            name: converter.name.clone(),
            line: converter.line,
            kind: FeedKind::Converter(index),
            part: None,
            series: 1,
            cells: 0,
            limit: Some(converter.limit),
            charged_cold: None,
            nominal: converter.output,
            capacity: ElectricCharge::default(),
            strings: 1,
            cut_off: converter.output,
            highest: converter.output,
            short_circuit: Some(converter.limit),
            internal_resistance: None,
            greatest_discharge: Some(converter.limit),
            stud: converter.stud,
        });
    }
    for index in 0..site.arrays.len() {
        if let Some(feed) = pv::feed(site, index) {
            site.banks.push(feed);
        }
    }
}

/// Whether more than wiring is described.
fn is_whole(document: &Document) -> bool {
    document.weather.is_some()
        || !document.arrays.is_empty()
        || !document.controllers.is_empty()
        || !document.generators.is_empty()
        || document.banks.is_empty()
        || document.banks.iter().any(|b| b.capacity.is_none() && b.unit_capacity.is_none())
        || document
            .loads
            .iter()
            .any(|l| l.use_of != super::model::LoadUseTime::default() || l.ac || l.standing)
}

/// The parts of the document as far as they are stated.
fn taken_over(document: &Document) -> Site {
    let controllers: Vec<ControllerPart> =
        document.controllers.iter().map(|c| stock::controller(document, c)).collect();
    Site {
        name: document.name.clone(),
        rules: document.rules,
        earthing: document.earthing,
        ambient: document.ambient,
        place: document.place.clone(),
        weather: document.weather.clone(),
        banks: Vec::new(),
        boards: document.boards.clone(),
        inverters: Vec::new(),
        loads: document.loads.clone(),
        circuits: document.circuits.clone(),
        arrays: Vec::new(),
        controllers,
        generators: document.generators.clone(),
        converters: document.converters.clone(),
        chargers: Vec::new(),
        readings: document.readings.clone(),
        stock: document.stock.clone(),
        is_whole: is_whole(document),
    }
}
