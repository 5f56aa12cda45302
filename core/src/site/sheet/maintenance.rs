//! What is looked after, and how often, by the parts that the site has.
//!
//! Every interval is common practice, no source: the maker's own come first.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_current::ampere;

use super::path::poles;
use crate::battery::Chemistry;
use crate::device::Family;
use crate::site::finding::digits;
use crate::site::model::Earthing;
use crate::site::parts::{GeneratorKind, Monitoring};
use crate::site::plan::Plan;
use crate::site::system::{BankEntry, Site};

/// How often.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Every {
    /// So many hours of running.
    RunningHours(u32),
    /// So many months.
    Months(u32),
}

/// One thing to look after.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct MaintenanceTask {
    /// How often; common practice, no source.
    pub every: Every,
    /// At what.
    pub place: String,
    /// What.
    pub what: String,
}

const MONTHLY: Every = Every::Months(1);
const QUARTERLY: Every = Every::Months(3);
const HALF_YEARLY: Every = Every::Months(6);
const YEARLY: Every = Every::Months(12);

pub(super) fn tasks(site: &Site, plan: &Plan) -> Vec<MaintenanceTask> {
    let mut list = Vec::new();
    let mut add = |every, place: &str, what: &str| {
        list.push(MaintenanceTask { every, place: place.to_string(), what: what.to_string() });
    };
    for bank in &site.banks {
        if let Some(chemistry) = bank.chemistry() {
            of_bank(bank, chemistry, equalised(site, bank), &mut add);
        }
    }
    sources(site, &mut add);
    wiring(site, plan, &mut add);
    list.sort_by_key(|task| task.every);
    list
}

/// A charging source of this bank has an equalising voltage.
fn equalised(site: &Site, bank: &BankEntry) -> bool {
    let mine =
        |place: Option<usize>| place.and_then(|i| site.banks.get(i)).is_some_and(|b| b.name == bank.name);
    site.chargers.iter().any(|c| mine(c.bank) && c.charging.equalise.is_some())
}

fn of_bank(bank: &BankEntry, chemistry: Chemistry, equalise: bool, add: &mut impl FnMut(Every, &str, &str)) {
    let place = format!("bank \"{}\"", bank.name);
    match chemistry {
        Chemistry::Flooded => {
            add(
                MONTHLY,
                &place,
                "electrolyte above the plates in every cell; top up with distilled water, after charging",
            );
            add(
                QUARTERLY,
                &place,
                "density of every cell, fully charged and rested; cells alike within 0.02",
            );
            add(QUARTERLY, &place, "vents and openings clear, tops clean and dry");
            if equalise {
                add(
                    QUARTERLY,
                    &place,
                    "equalise, or when densities part; loads that cannot bear it off, ventilation on",
                );
            }
        }
        Chemistry::NickelCadmium => {
            add(
                QUARTERLY,
                &place,
                "electrolyte level in every cell, distilled water only; no tool or meter from lead-acid work",
            );
            add(
                QUARTERLY,
                &place,
                "vents and openings clear, tops clean and dry; volts of every cell on charge",
            );
        }
        Chemistry::Agm | Chemistry::Gel => {
            add(
                HALF_YEARLY,
                &place,
                "volts of every battery rested, alike; cases not swollen, openings clear",
            );
        }
        _ => {
            add(
                HALF_YEARLY,
                &place,
                "cells alike and no alarm by the pack's own monitor; charged full once to balance",
            );
        }
    }
    add(
        YEARLY,
        &place,
        "terminals under load: warmth by hand-held thermometer, millivolts; torque again, first after one month",
    );
}

fn sources(site: &Site, add: &mut impl FnMut(Every, &str, &str)) {
    for array in &site.arrays {
        let place = format!("array \"{}\"", array.part.name);
        let strings = if array.strings > 1 { "; currents of the strings alike in the same sun" } else { "" };
        add(
            HALF_YEARLY,
            &place,
            &format!("clean, unshaded by growth; glass, frames, connectors and cables whole{strings}"),
        );
    }
    for charger in &site.chargers {
        let what = if charger.charging.absorption.is_some() || charger.charging.float.is_some() {
            "set points as on the commissioning sheet, air ways clean"
        } else {
            "set points as entered, air ways clean"
        };
        add(YEARLY, &format!("charging by \"{}\"", charger.name), what);
    }
    for generator in &site.generators {
        let place = format!("\"{}\"", generator.name);
        match generator.kind {
            GeneratorKind::Engine => {
                add(
                    Every::RunningHours(100),
                    &place,
                    "oil, filters, belts as the maker states; running hours written down",
                );
                add(
                    MONTHLY,
                    &place,
                    "started and loaded for half an hour; fuel, oil, coolant, starting battery",
                );
            }
            GeneratorKind::Alternator => {
                add(Every::RunningHours(100), &place, "belt, mounting, terminals; output hot");
            }
            GeneratorKind::Wind => add(HALF_YEARLY, &place, "blades, guys, bearings, brake"),
            GeneratorKind::Hydro => add(MONTHLY, &place, "intake and screen clear, bearings, flow"),
            GeneratorKind::Shore => add(HALF_YEARLY, &place, "inlet and cable whole, not warm under load"),
        }
    }
    for inverter in &site.inverters {
        add(
            YEARLY,
            &format!("inverter \"{}\"", inverter.name),
            "air ways and fan clean, DC terminals not warm under load",
        );
    }
}

fn wiring(site: &Site, plan: &Plan, add: &mut impl FnMut(Every, &str, &str)) {
    let earth = site.rules.set().terms.earth;
    let fuses = fuse_links(site, plan);
    if !fuses.is_empty() {
        let words: Vec<String> = fuses
            .iter()
            .map(|(family, amps, count)| format!("{} of {family} {} A", spare(*count), digits(*amps)))
            .collect();
        add(HALF_YEARLY, "spare fuse-links", &format!("present: {}", words.join(", ")));
    }
    match site.place.monitoring {
        Some(Monitoring::Insulation) => {
            add(MONTHLY, "insulation monitor", "reading written down, its test button");
        }
        Some(Monitoring::EarthFault) => add(MONTHLY, &format!("{earth}-fault detection"), "its test button"),
        Some(Monitoring::None) | None => {}
    }
    if site.earthing == Earthing::Floating && site.place.monitoring != Some(Monitoring::Insulation) {
        add(
            HALF_YEARLY,
            "both poles",
            &format!("volts of each to {earth}: alike; a pole near nought has a fault"),
        );
    }
    if site.circuits.is_empty() {
        return;
    }
    let bond = if site.earthing == Earthing::Floating {
        String::new()
    } else {
        format!("; the bond to {earth} tight, and the only one")
    };
    add(YEARLY, "all circuits", &format!("insulation test, loads off{bond}"));
    add(
        YEARLY,
        "all circuits",
        "millivolts of each joint under load beside those of the commissioning sheet; chafe, warmth, labels",
    );
    add(YEARLY, "breakers, switches, isolators", "opened and closed twice, without load");
    if site.place.surge_protection == Some(true) {
        add(HALF_YEARLY, "surge protection", "indicator, and after every thunderstorm");
    }
}

/// Fuses by family and rating, and how many of each.
pub(super) fn fuse_links(site: &Site, plan: &Plan) -> Vec<(Family, f64, u32)> {
    let mut list: Vec<(Family, f64, u32)> = Vec::new();
    for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
        for fitted in planned.iter().flat_map(|p| &p.fitted) {
            let device = fitted.guard.device;
            if !device.family.data().is_fuse {
                continue;
            }
            let (amps, count) = (device.rating.get::<ampere>(), poles(site, circuit, fitted));
            match list.iter_mut().find(|(f, a, _)| *f == device.family && *a == amps) {
                Some(entry) => entry.2 += count,
                None => list.push((device.family, amps, count)),
            }
        }
    }
    list
}

/// Spare fuse-links for so many fuses of one rating: one in ten, rounded up. Common practice, no source.
pub(super) const fn spare(fuses: u32) -> u32 {
    fuses.div_ceil(10)
}
