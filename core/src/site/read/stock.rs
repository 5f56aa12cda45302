//! What can be bought or lies on the shelf.

use alloc::vec::Vec;

use super::bank;
use super::circuits::{device_supply, metal, polarity, terminal_range};
use super::entry::{Entry, Found};
use super::keys::{
    BREAKING, CABLE, FAMILY, FULL_RATED, INSULATION, LENGTH, LET_THROUGH_KEY, LUG, PRICE, RATINGS, SHEATHED,
    SIZE, STOCK_CABLE, STOCK_DEVICE, STOCK_DEVICES, STOCK_LUG, STUD, Section, TERMINAL,
};
use super::log::Log;
use super::modules;
use super::plant_keys::{BATTERIES, STOCK_CONTROLLERS, STOCK_INVERTERS, STOCK_MODULES};
use super::references::Sections;
use super::sections::{STOCK, STOCK_BATTERY, STOCK_CONTROLLER, STOCK_INVERTER, STOCK_MODULE};
use super::sources;
use crate::cable::{Class, Coating, Material};
use crate::site::model::{Stock, StockCable, StockDevice, StockLug};

/// What could not be read is left out: its problems refuse the file in any case.
pub(super) fn stock<'d>(text: &'d str, log: &mut Log, at: Found<'d>, found: &mut Sections<'d>) -> Stock {
    let mut entry = Entry::open(text, log, &STOCK, at, None);
    let cables = entry.sections(&CABLE, &STOCK_CABLE);
    let devices = entry.sections(&STOCK_DEVICES, &STOCK_DEVICE);
    let lugs = entry.sections(&LUG, &STOCK_LUG);
    found.batteries = entry.sections(&BATTERIES, &STOCK_BATTERY);
    found.modules = entry.sections(&STOCK_MODULES, &STOCK_MODULE);
    found.controller_models = entry.sections(&STOCK_CONTROLLERS, &STOCK_CONTROLLER);
    found.inverter_models = entry.sections(&STOCK_INVERTERS, &STOCK_INVERTER);
    Stock {
        cables: all(text, log, &STOCK_CABLE, &cables, cable),
        devices: all(text, log, &STOCK_DEVICE, &devices, device),
        lugs: all(text, log, &STOCK_LUG, &lugs, lug),
        batteries: all(text, log, &STOCK_BATTERY, &found.batteries, bank::battery),
        modules: all(text, log, &STOCK_MODULE, &found.modules, modules::module),
        controllers: all(text, log, &STOCK_CONTROLLER, &found.controller_models, |entry| {
            sources::controller(entry, &[])
        }),
        inverters: all(text, log, &STOCK_INVERTER, &found.inverter_models, |entry| {
            sources::inverter(entry, &[])
        }),
    }
}

/// Every entry of a kind that can be read.
fn all<'d, T>(
    text: &'d str,
    log: &mut Log,
    section: &'static Section,
    found: &[Found<'d>],
    read: impl Fn(&mut Entry<'d, '_>) -> Option<T>,
) -> Vec<T> {
    found.iter().filter_map(|found| read(&mut Entry::open(text, log, section, *found, None))).collect()
}

fn cable(entry: &mut Entry<'_, '_>) -> Option<StockCable> {
    let size = entry.parsed(&SIZE);
    let (material, class, coating) = metal(entry);
    let insulation = entry.parsed(&INSULATION);
    let sheathed = entry.flag(&SHEATHED, false);
    let length = entry.quantity(&LENGTH);
    let price = entry.number(&PRICE);
    Some(StockCable {
        line: entry.line(),
        size: size?,
        material: material.unwrap_or(Material::Copper),
        class: class.unwrap_or(Class::Flexible),
        coating: coating.unwrap_or(Coating::Plain),
        insulation: insulation?,
        sheathed,
        length,
        price,
    })
}

fn device(entry: &mut Entry<'_, '_>) -> Option<StockDevice> {
    let family = entry.parsed(&FAMILY);
    let ratings = entry.quantities(&RATINGS);
    let supply = device_supply(entry);
    let breaking = entry.quantity(&BREAKING);
    let polarity = polarity(entry);
    let full_rated = entry.flag(&FULL_RATED, false);
    let let_through = entry.let_through_A2s(&LET_THROUGH_KEY);
    let terminal_range = terminal_range(entry);
    let terminal = entry.quantity(&TERMINAL);
    let price = entry.number(&PRICE);
    Some(StockDevice {
        line: entry.line(),
        family: family?,
        ratings,
        supply,
        breaking,
        polarity,
        full_rated,
        let_through_A2s: let_through,
        terminal_range,
        terminal,
        price,
    })
}

fn lug(entry: &mut Entry<'_, '_>) -> Option<StockLug> {
    let size = entry.parsed(&SIZE);
    let stud = entry.parsed(&STUD);
    let price = entry.number(&PRICE);
    Some(StockLug { line: entry.line(), size: size?, stud: stud?, price })
}
