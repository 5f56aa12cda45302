//! Photovoltaic modules and the arrays made of them.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::String;

use uom::si::power::watt;

use super::entry::Entry;
use super::keys::{Key, POWER, PRICE, STRINGS};
use super::plant::{named, said};
use super::plant_keys::{
    AZIMUTH, CELLS, CONTROLLER_NAME, EXPOSED, GREATEST_VOLTAGE, IMP, ISC, ISC_COEFFICIENT, ISOLATOR,
    ISOLATOR_CURRENT, LOAD_BREAK, MODULE, MODULES, NOCT, POWER_COEFFICIENT, REAR_GAIN, ROUTE, SERIES,
    SERIES_FUSE, SHADE, SHELF_COUNT, STRING_FUSE, TILT, VMP, VOC, VOC_COEFFICIENT,
};
use crate::quantity::{ElectricCurrent, ElectricPotential, Figures, Power};
use crate::site::parts::{ArrayPart, ModulePart};

/// A module's power is the product of its voltage and current at maximum power, but for rounding on its label.
const PRODUCT: f64 = 0.1;

/// The electrical keys of a module; `None` where one of those that are needed is missing.
fn values(entry: &mut Entry<'_, '_>) -> Option<ModulePart> {
    let voc: Option<ElectricPotential> = entry.quantity(&VOC);
    let vmp: Option<ElectricPotential> = entry.quantity(&VMP);
    let isc: Option<ElectricCurrent> = entry.quantity(&ISC);
    let imp: Option<ElectricCurrent> = entry.quantity(&IMP);
    entry.ordered(&VMP, vmp, &VOC, voc);
    entry.ordered(&IMP, imp, &ISC, isc);
    let power: Option<Power> = entry.quantity(&POWER);
    if let (Some(power), Some(vmp), Some(imp)) = (power, vmp, imp) {
        let product: Power = vmp * imp;
        if libm::fabs(product.value - power.value) > PRODUCT * power.value {
            let sentence = format!(
                "{} is not vmp times imp, {} W; mend the one that is wrong",
                entry.written(&POWER),
                Figures(product.get::<watt>())
            );
            entry.problem(&POWER, sentence);
        }
    }
    Some(ModulePart {
        name: String::new(),
        line: entry.line(),
        voc_coefficient: entry.quantity(&VOC_COEFFICIENT),
        isc_coefficient: entry.quantity(&ISC_COEFFICIENT),
        power_coefficient: entry.quantity(&POWER_COEFFICIENT),
        noct: entry.quantity(&NOCT),
        series_fuse: entry.quantity(&SERIES_FUSE),
        greatest_voltage: entry.quantity(&GREATEST_VOLTAGE),
        rear_gain: entry.quantity(&REAR_GAIN),
        cells: entry.count(&CELLS),
        price: None,
        count: None,
        power: power?,
        voc: voc?,
        isc: isc?,
        vmp: vmp?,
        imp: imp?,
    })
}

/// `[[stock.module]]`.
pub(super) fn module(entry: &mut Entry<'_, '_>) -> Option<ModulePart> {
    let name = entry.name();
    let values = values(entry);
    let price = entry.number(&PRICE);
    let count = entry.count(&SHELF_COUNT);
    Some(ModulePart { name: name?, price, count, ..values? })
}

/// The module of an array: named in the stock, or stated here, not both.
fn own_module(entry: &mut Entry<'_, '_>) -> Option<ModulePart> {
    const NEEDED: [&Key; 5] = [&POWER, &VOC, &ISC, &VMP, &IMP];
    const MORE: [&Key; 8] = [
        &VOC_COEFFICIENT,
        &ISC_COEFFICIENT,
        &POWER_COEFFICIENT,
        &NOCT,
        &SERIES_FUSE,
        &GREATEST_VOLTAGE,
        &REAR_GAIN,
        &CELLS,
    ];
    let stated: alloc::vec::Vec<&Key> = NEEDED.into_iter().chain(MORE).filter(|key| entry.has(key)).collect();
    if stated.is_empty() {
        return None;
    }
    if entry.has(&MODULE) {
        for key in stated {
            entry
                .problem(key, "the module of the stock tells it already; take one of the two out".to_owned());
        }
        return None;
    }
    for key in NEEDED {
        if !entry.has(key) && !entry.is_excused(&[key]) {
            entry.missing(key);
        }
    }
    values(entry)
}

pub(super) fn array(entry: &mut Entry<'_, '_>) -> Option<ArrayPart> {
    let name = entry.name();
    let own_module = own_module(entry);
    let (modules, series, strings) = (entry.count(&MODULES), entry.count(&SERIES), entry.count(&STRINGS));
    divides(entry, modules, series, strings);
    if !entry.has(&ISOLATOR) && !entry.is_excused(&[&ISOLATOR]) {
        for key in [&ISOLATOR_CURRENT, &LOAD_BREAK] {
            if entry.has(key) {
                let sentence =
                    format!("{} needs isolator beside it, such as isolator = {}", key.name, ISOLATOR.example);
                entry.problem(key, sentence);
            }
        }
    }
    let is_list = entry.value(&CONTROLLER_NAME).is_some_and(|value| value.get_ref().as_array().is_some());
    let controller = if is_list {
        let sentence =
            "one array leads to one controller; name one, and state an array for each of the others";
        entry.problem(&CONTROLLER_NAME, sentence.to_owned());
        None
    } else {
        named(entry, &CONTROLLER_NAME)
    };
    Some(ArrayPart {
        line: entry.line(),
        module: named(entry, &MODULE),
        own_module,
        modules,
        series,
        strings,
        tilt: entry.quantity(&TILT),
        azimuth: entry.quantity(&AZIMUTH),
        shade: entry.quantity(&SHADE),
        controller,
        string_fuse: entry.quantity(&STRING_FUSE),
        isolator: entry.quantity(&ISOLATOR),
        isolator_current: entry.quantity(&ISOLATOR_CURRENT),
        load_break: said(entry, &LOAD_BREAK),
        exposed: entry.flag(&EXPOSED, false),
        route: entry.quantity(&ROUTE),
        name: name?,
    })
}

/// Modules in all, in series and in parallel must agree.
fn divides(entry: &mut Entry<'_, '_>, modules: Option<u32>, series: Option<u32>, strings: Option<u32>) {
    let Some(all) = modules else { return };
    let sentence = match (series, strings) {
        (Some(series), Some(strings)) if series.checked_mul(strings) != Some(all) => format!(
            "{all} modules are not {strings} parallel strings of {series}, which are {}; mend the number that is wrong",
            series.saturating_mul(strings)
        ),
        (Some(part), None) | (None, Some(part)) if all.checked_rem(part).is_some_and(|rest| rest > 0) => {
            let fewer = all.checked_div(part).unwrap_or(0).max(1).saturating_mul(part);
            let what = if series.is_some() {
                format!("into strings of {part}")
            } else {
                format!("over {part} strings")
            };
            format!("{all} modules do not divide {what}; {fewer} or {} do", fewer.saturating_add(part))
        }
        _ => return,
    };
    entry.problem(&MODULES, sentence);
}
