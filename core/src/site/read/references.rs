//! What one section says of another, and what a bank says of its own batteries: names that must exist, numbers that
//! must agree.

use alloc::format;
use alloc::string::String;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_potential::volt;

use super::log::{Cut, Log, Quoted, nearest};
use crate::quantity::Figures;
use crate::site::model::Document;
use crate::site::parts::BankPart;

/// Nominal voltages may be labels: 12.8 V of LFP stand for 12 V.
const LABEL: f64 = 0.1;

pub(super) fn check(document: &Document, log: &mut Log) {
    let banks = || document.banks.iter().map(|b| b.name.as_str());
    let boards = || document.boards.iter().map(|b| b.name.as_str());
    let mut refer =
        |line: u32, place: String, key: &str, name: Option<&String>, what: &str, known: &[&str]| {
            let Some(name) = name else { return };
            if known.contains(&name.as_str()) {
                return;
            }
            let sentence = match nearest(name, known.iter().copied()) {
                Some(word) => format!("nothing is named '{}'; did you mean '{word}'?", Cut(name)),
                None => format!("nothing is named '{}'; name {what} of this file", Cut(name)),
            };
            log.push_line(line, format!("{place}, {key}"), sentence);
        };
    let banks: alloc::vec::Vec<&str> = banks().collect();
    let boards: alloc::vec::Vec<&str> = boards().collect();
    let stock = &document.stock;
    let batteries: alloc::vec::Vec<&str> = stock.batteries.iter().map(|b| b.name.as_str()).collect();
    for bank in &document.banks {
        let place = || format!("[[bank]] {}", Quoted(&bank.name));
        refer(bank.line, place(), "battery", bank.battery.as_ref(), "a [[stock.battery]]", &batteries);
        refer(bank.line, place(), "board", bank.board.as_ref(), "a board", &boards);
    }
    let modules: alloc::vec::Vec<&str> = stock.modules.iter().map(|b| b.name.as_str()).collect();
    let controllers: alloc::vec::Vec<&str> = document.controllers.iter().map(|c| c.name.as_str()).collect();
    for array in &document.arrays {
        let place = || format!("[[array]] {}", Quoted(&array.name));
        refer(array.line, place(), "module", array.module.as_ref(), "a [[stock.module]]", &modules);
        refer(array.line, place(), "controller", array.controller.as_ref(), "a controller", &controllers);
    }
    let models: alloc::vec::Vec<&str> = stock.controllers.iter().map(|c| c.name.as_str()).collect();
    for controller in &document.controllers {
        let place = || format!("[[controller]] {}", Quoted(&controller.name));
        refer(
            controller.line,
            place(),
            "model",
            controller.model.as_ref(),
            "a [[stock.controller]]",
            &models,
        );
        refer(controller.line, place(), "bank", controller.bank.as_ref(), "a bank", &banks);
        refer(controller.line, place(), "board", controller.board.as_ref(), "a board", &boards);
    }
    for generator in &document.generators {
        let place = || format!("[[generator]] {}", Quoted(&generator.name));
        refer(generator.line, place(), "bank", generator.bank.as_ref(), "a bank", &banks);
        refer(generator.line, place(), "board", generator.board.as_ref(), "a board", &boards);
    }
    let models: alloc::vec::Vec<&str> = stock.inverters.iter().map(|c| c.name.as_str()).collect();
    for inverter in &document.inverters {
        let place = || format!("[[inverter]] {}", Quoted(&inverter.name));
        refer(inverter.line, place(), "model", inverter.model.as_ref(), "a [[stock.inverter]]", &models);
        refer(inverter.line, place(), "board", inverter.board.as_ref(), "a board", &boards);
    }
    let inverters: alloc::vec::Vec<&str> = document.inverters.iter().map(|c| c.name.as_str()).collect();
    for load in document.loads.iter().filter(|load| load.inverter.is_some() || load.board.is_some()) {
        let place = || format!("[[load]] {}", Quoted(&load.name));
        refer(load.line, place(), "inverter", load.inverter.as_ref(), "an inverter", &inverters);
        refer(load.line, place(), "board", load.board.as_ref(), "a board", &boards);
    }
    readings(document, log);
    ambient(document, log);
    for bank in &document.banks {
        batteries_of(document, bank, log);
    }
}

/// Readings name things and loads of the file.
fn readings(document: &Document, log: &mut Log) {
    if document.readings.is_empty() {
        return;
    }
    let loads: alloc::vec::Vec<&str> = document.loads.iter().map(|l| l.name.as_str()).collect();
    let mut places = loads.clone();
    places.extend(document.banks.iter().map(|x| x.name.as_str()));
    places.extend(document.boards.iter().map(|x| x.name.as_str()));
    places.extend(document.inverters.iter().map(|x| x.name.as_str()));
    places.extend(document.circuits.iter().map(|x| x.name.as_str()));
    places.extend(document.arrays.iter().map(|x| x.name.as_str()));
    places.extend(document.controllers.iter().map(|x| x.name.as_str()));
    places.extend(document.inverters.iter().map(|x| x.name.as_str()));
    for reading in &document.readings {
        let place = format!("[[reading]] {}", Quoted(&reading.name));
        let at = core::iter::once(("at", &reading.at, &places));
        for (key, name, known) in at.chain(reading.on.iter().map(|name| ("on", name, &loads))) {
            if known.contains(&name.as_str()) {
                continue;
            }
            let sentence = match nearest(name, known.iter().copied()) {
                Some(word) => format!("nothing is named '{}'; did you mean '{word}'?", Cut(name)),
                None => format!("nothing is named '{}'; name what was measured in this file", Cut(name)),
            };
            log.push_line(reading.line, format!("{place}, {key}"), sentence);
        }
    }
}

/// The coldest morning is no warmer than the site's least.
fn ambient(document: &Document, log: &mut Log) {
    let Some((weather, coldest)) = document.weather.as_ref().and_then(|w| Some((w, w.coldest_morning?)))
    else {
        return;
    };
    if coldest > document.ambient.1 {
        let sentence = "the coldest morning is above the site's greatest ambient; mend the one that is wrong";
        log.push_line(weather.line, String::from("[weather], coldest_morning"), String::from(sentence));
    }
}

/// Voltage, number and capacity of a bank's batteries must agree with the bank's own.
fn batteries_of(document: &Document, bank: &BankPart, log: &mut Log) {
    let place = format!("[[bank]] {}", Quoted(&bank.name));
    let stock =
        bank.battery.as_ref().and_then(|name| document.stock.batteries.iter().find(|b| b.name == *name));
    let chemistry = bank.chemistry.or(stock.map(|b| b.chemistry));
    let unit = bank.unit.or(stock.map(|b| b.nominal)).map(|u| u.get::<volt>());
    let nominal = bank.nominal.map(|n| n.get::<volt>());
    let digits = |x: f64| format!("{}", Figures(x));
    if chemistry.is_none() && bank.battery.is_none() && bank.capacity.is_some() {
        let sentence = "key 'chemistry' is missing beside a stated capacity; write chemistry = \"flooded\", or name the \
                        battery of the stock";
        log.push_line(bank.line, place.clone(), String::from(sentence));
    }
    if let (Some(chemistry), Some(volts)) = (chemistry, unit.or(nominal))
        && let Err(error) =
            crate::battery::cells(chemistry, uom::si::f64::ElectricPotential::new::<volt>(volts))
    {
        log.push_line(bank.line, place.clone(), format!("{error}"));
    }
    let series = match (unit, nominal) {
        (Some(unit), Some(nominal)) => {
            let count = libm::round(nominal / unit);
            if count < 1.0 || libm::fabs(count * unit - nominal) > LABEL * nominal {
                let lower = libm::floor(nominal / unit).max(1.0);
                log.push_line(
                    bank.line,
                    place.clone(),
                    format!(
                        "{} V are no whole number of batteries of {} V: {} in series make {} V, {} make {} V",
                        digits(nominal),
                        digits(unit),
                        digits(lower),
                        digits(lower * unit),
                        digits(lower + 1.0),
                        digits((lower + 1.0) * unit)
                    ),
                );
                return;
            }
            Some(count)
        }
        _ => None,
    };
    if let (Some(count), Some(stated), Some(unit), Some(nominal)) =
        (series, bank.series.map(f64::from), unit, nominal)
        && libm::fabs(count - stated) > 0.5
    {
        log.push_line(
            bank.line,
            place.clone(),
            format!(
                "{} in series of {} V make {} V, not {} V; mend the number that is wrong",
                digits(stated),
                digits(unit),
                digits(stated * unit),
                digits(nominal)
            ),
        );
        return;
    }
    let series = series.or(bank.series.map(f64::from));
    if let (Some(series), Some(units)) = (series, bank.units.map(f64::from)) {
        let strings = bank.strings.map_or_else(|| libm::round(units / series).max(1.0), f64::from);
        if libm::fabs(strings * series - units) > 0.5 {
            log.push_line(
                bank.line,
                place.clone(),
                format!(
                    "{} batteries do not make whole strings of {}; {} or {} do",
                    digits(units),
                    digits(series),
                    digits(libm::floor(units / series).max(1.0) * series),
                    digits((libm::floor(units / series) + 1.0) * series)
                ),
            );
            return;
        }
    }
    let each = bank.unit_capacity.or(stock.map(|b| b.capacity)).map(|c| c.get::<ampere_hour>());
    let strings = bank.strings.map(f64::from).or_else(|| {
        let (units, series) = bank.units.zip(series)?;
        Some(libm::round(f64::from(units) / series))
    });
    if let (Some(each), Some(strings), Some(whole)) =
        (each, strings, bank.capacity.map(|c| c.get::<ampere_hour>()))
        && libm::fabs(each * strings - whole) > 0.01 * whole
    {
        log.push_line(
            bank.line,
            place,
            format!(
                "{} strings of {} Ah make {} Ah, not {} Ah; mend the number that is wrong",
                digits(strings),
                digits(each),
                digits(each * strings),
                digits(whole)
            ),
        );
    }
}
