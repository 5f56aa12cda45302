//! From the document to the site: what is stated is taken over, what is left out is designed.
//!
//! First the parts that the stock tells, then inverter, bank, array and controller from the energy they must give, last
//! the circuits between them. The sizes of the circuits are left to [`super::plan`].

mod array;
mod bank;
mod circuits;
mod inverter;
mod stock;

use alloc::string::String;
use alloc::vec::Vec;

use super::lines::{Rejected, Step};
use super::model::Document;
use super::parts::ControllerPart;
use super::pv;
use super::read::{Problem, Problems};
use super::system::{BankEntry, Charger, ChargerKind, FeedKind, Site};
use crate::quantity::{ElectricCharge, Ratio};

/// Why the parts are what they are.
#[derive(Clone, Debug, Default)]
pub(super) struct Reasons {
    /// What was taken where the document says nothing.
    pub assumed: Vec<String>,
    /// Of arrays that were designed.
    pub arrays: Vec<ArrayReason>,
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

/// The whole site of a document, with the reasons of what was designed.
pub(super) fn complete(document: &Document) -> Result<(Site, Reasons), Problems> {
    let mut problems: Vec<Problem> = Vec::new();
    let mut reasons = Reasons::default();
    let mut site = taken_over(document);
    for part in &document.banks {
        match bank::stated(document, &site, part) {
            Ok(bank) => site.banks.push(bank),
            Err(problem) => problems.push(problem),
        }
    }
    inverter::take(document, &mut site, &mut problems);
    array::take(document, &mut site, &mut problems);
    add_chargers(&mut site);
    add_feeds(&mut site);
    circuits::add(&mut site, &mut reasons);
    if problems.is_empty() { Ok((site, reasons)) } else { Err(Problems(core::mem::take(&mut problems), 0)) }
}

/// A problem of a section.
fn problem(line: u32, place: String, text: impl Into<String>) -> Problem {
    Problem { line, place, text: text.into() }
}

/// The outputs that charge, and the banks they charge: the one named, else the only one.
fn add_chargers(site: &mut Site) {
    let bank = |name: Option<&String>| match name {
        Some(name) => site.banks.iter().position(|b| b.name == *name),
        None => site.banks.iter().position(BankEntry::is_battery),
    };
    let mut chargers = Vec::new();
    for (index, controller) in site.controllers.iter().enumerate() {
        chargers.push(Charger {
            name: controller.name.clone(),
            line: controller.line,
            kind: ChargerKind::Controller(index),
            limit: controller.output,
            charging: controller.charging,
            bank: bank(controller.bank.as_ref()),
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
            bank: bank(generator.bank.as_ref()),
            stud: generator.stud,
        });
    }
    site.chargers = chargers;
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
