//! An array of the site as the array floor sees it: its module, the question it is held against, its limits (R10).

use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::heat_flux_density::watt_per_square_meter;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::parts::{ControllerKind, ControllerPart, ModulePart};
use super::system::{Array, BankEntry, FeedKind, Site};
use crate::array::{
    InputLimits, KeyPoints, Layout, Module, ModuleSheet, Regulation, StringDevice, StringQuestion,
    StringsChecked, VoltagePart, cell_temperature, check_strings,
};
use crate::error::Error;
use crate::quantity::{
    ElectricCharge, ElectricCurrent, ElectricPotential, Irradiance, Ratio, ThermodynamicTemperature,
};

/// Voltage lost in the array's wiring, and over the years, where nothing is known. Common practice, no source.
const WIRING_DROP: f64 = 0.03;
const AGEING: f64 = 0.05;
/// Greatest air temperature for which NOCT holds, °C.
const NOCT_AIR_DEGC: (f64, f64) = (-60.0, 60.0);

/// A module of the document as the array floor knows it.
pub(super) fn module_of(part: &ModulePart) -> Result<Module, Error> {
    Module::new(ModuleSheet {
        power: part.power,
        points: KeyPoints { voc: part.voc, isc: part.isc, vmp: part.vmp, imp: part.imp },
        voc_coefficient: part.voc_coefficient,
        isc_coefficient: part.isc_coefficient,
        power_coefficient: part.power_coefficient,
        noct: part.noct,
        series_fuse: part.series_fuse,
        system_voltage: part.greatest_voltage,
        cells: part.cells.and_then(|c| u16::try_from(c).ok()),
        bifacial_gain: part.rear_gain.unwrap_or_default(),
        area: None,
    })
}

/// Coldest air at first light.
pub(super) fn coldest(site: &Site) -> ThermodynamicTemperature {
    site.weather.as_ref().and_then(|w| w.coldest_morning).unwrap_or(site.ambient.0)
}

/// Hottest cells: the greatest ambient in full sun.
pub(super) fn hottest_cell(site: &Site, module: &Module) -> Result<ThermodynamicTemperature, Error> {
    let air = site.ambient.1.get::<degree_celsius>().clamp(NOCT_AIR_DEGC.0, NOCT_AIR_DEGC.1);
    cell_temperature(
        ThermodynamicTemperature::new::<degree_celsius>(air),
        module.noct().0,
        Irradiance::new::<watt_per_square_meter>(1000.0),
    )
}

/// The bank that a controller charges.
pub(super) fn bank_of<'a>(site: &'a Site, controller: &ControllerPart) -> Option<&'a BankEntry> {
    let charger = site.chargers.iter().find(|c| c.name == controller.name);
    match (charger, controller.bank.as_ref()) {
        (Some(charger), _) => site.banks.get(charger.bank?),
        (None, Some(name)) => site.banks.iter().find(|b| b.name == *name),
        (None, None) => site.banks.iter().find(|b| b.is_battery()),
    }
}

/// What the controller's input bears.
pub(super) fn input_limits(controller: &ControllerPart) -> InputLimits {
    InputLimits {
        regulation: match controller.kind {
            Some(ControllerKind::Pwm) => Regulation::Clamped,
            _ => Regulation::Tracking,
        },
        greatest_voltage: controller.greatest_input,
        window_low: controller.operating.map(|o| o.0),
        window_high: controller.operating.map(|o| o.1),
        start_margin: controller.start_margin,
        short_circuit_current: controller.input_current,
        input_current: None,
        output_current: controller.output,
    }
}

/// Asks a question about strings of a module on a controller.
pub(super) fn ask<R>(
    site: &Site,
    module: &Module,
    controller: &ControllerPart,
    bank: &BankEntry,
    (device, parts): (StringDevice, &[VoltagePart]),
    answer: impl FnOnce(&StringQuestion<'_>) -> Result<R, Error>,
) -> Result<R, Error> {
    let cold_factor = match module.sheet().voc_coefficient {
        Some(_) => None,
        // No factor held: the check is not made, and says so.
        None => site.rules.pv().cold_factor(coldest(site)).ok(),
    };
    let question = StringQuestion {
        module,
        input: input_limits(controller),
        coldest: coldest(site),
        hottest_cell: hottest_cell(site, module)?,
        cold_factor,
        bank_nominal: bank.nominal,
        bank_highest: bank.charged_cold.unwrap_or(bank.highest),
        drop: Ratio::new::<ratio>(WIRING_DROP),
        ageing: Ratio::new::<ratio>(AGEING),
        factors: site.rules.pv().factors(),
        device,
        ampacity: module.sheet().series_fuse,
        // Told among the assumptions: the controller lets nothing back into its array.
        back_feed: Some(ElectricCurrent::new::<ampere>(0.0)),
        parts,
    };
    answer(&question)
}

/// The device in each string of an array.
pub(super) fn string_device(array: &Array) -> StringDevice {
    match (array.part.string_fuse, array.designed) {
        (Some(rating), _) => StringDevice::Rated(rating),
        (None, true) => StringDevice::ToChoose,
        (None, false) => StringDevice::Absent,
    }
}

/// An array of the site held against everything.
pub(super) fn checked(site: &Site, array: &Array) -> Option<Result<StringsChecked, Error>> {
    let controller = site.controllers.get(array.controller?)?;
    let bank = bank_of(site, controller)?;
    let mut parts: Vec<VoltagePart> = Vec::new();
    if !array.designed {
        parts.push(VoltagePart {
            what: if array.part.isolator.is_some() {
                "cold open-circuit voltage against the isolator"
            } else {
                "cold open-circuit voltage against the isolator: its DC voltage is not stated"
            },
            greatest: array.part.isolator,
        });
    }
    let layout = Layout {
        in_series: u16::try_from(array.series).unwrap_or(u16::MAX),
        in_parallel: u16::try_from(array.strings).unwrap_or(u16::MAX),
    };
    Some(module_of(&array.module).and_then(|module| {
        ask(site, &module, controller, bank, (string_device(array), &parts), |q| check_strings(q, layout))
    }))
}

/// An array as the source of its own network: from hot maximum power to cold open circuit, limited by the sun.
pub(super) fn feed(site: &Site, index: usize) -> Option<BankEntry> {
    let array = site.arrays.get(index)?;
    let series = f64::from(array.series);
    let checked = checked(site, array).and_then(Result::ok);
    let factors = site.rules.pv().factors();
    let rear = 1.0 + array.module.rear_gain.map_or(0.0, |g| g.get::<ratio>());
    let strings = f64::from(array.strings);
    let greatest = checked.as_ref().map_or_else(
        || array.module.isc * strings * rear * factors.irradiance.value,
        |c| c.currents.array_greatest,
    );
    let nominal: ElectricPotential = array.module.vmp * series;
    let voltages = checked.as_ref().map(|c| c.voltages);
    let cold = voltages
        .and_then(|v| v.cold_voc)
        .map_or_else(|| array.module.voc * series * 1.25, |(volts, _)| volts);
    let hot = voltages.and_then(|v| v.hot_vmp).filter(|v| v.get::<volt>() > 0.0).unwrap_or(0.8 * nominal);
    Some(BankEntry {
        name: array.part.name.clone(),
        line: array.part.line,
        kind: FeedKind::Array(index),
        part: None,
        series: array.series,
        cells: 0,
        limit: Some(greatest),
        charged_cold: None,
        nominal,
        capacity: ElectricCharge::default(),
        strings: array.strings,
        cut_off: if hot <= nominal { hot } else { nominal },
        highest: cold,
        short_circuit: Some(greatest),
        internal_resistance: None,
        // What it gives in full sun.
        greatest_discharge: Some(array.module.imp * strings * rear),
        stud: None,
    })
}
