//! Parts that name an entry of the stock take from it what they do not state themselves.

use crate::site::model::Document;
use crate::site::parts::{
    ArrayPart, BankPart, Charging, ControllerPart, InverterPart, ModulePart, StockBattery,
};

/// A controller with what its model states.
pub(super) fn controller(document: &Document, stated: &ControllerPart) -> ControllerPart {
    let found =
        stated.model.as_ref().and_then(|name| document.stock.controllers.iter().find(|c| c.name == *name));
    found.map_or_else(|| stated.clone(), |model| merged(stated, model))
}

/// A controller of the stock in the place of a stated one.
pub(super) fn merged(stated: &ControllerPart, model: &ControllerPart) -> ControllerPart {
    let (own, theirs) = (stated.charging, model.charging);
    ControllerPart {
        kind: stated.kind.or(model.kind),
        greatest_input: stated.greatest_input.or(model.greatest_input),
        input_current: stated.input_current.or(model.input_current),
        operating: stated.operating.or(model.operating),
        start_margin: stated.start_margin.or(model.start_margin),
        output: stated.output.or(model.output),
        nominals: if stated.nominals.is_empty() { model.nominals.clone() } else { stated.nominals.clone() },
        efficiency: stated.efficiency.or(model.efficiency),
        idle: stated.idle.or(model.idle),
        charging: Charging {
            absorption: own.absorption.or(theirs.absorption),
            float: own.float.or(theirs.float),
            equalise: own.equalise.or(theirs.equalise),
            compensation: own.compensation.or(theirs.compensation),
            sense: own.sense.or(theirs.sense),
        },
        load_dump: stated.load_dump.or(model.load_dump),
        stud: stated.stud.or(model.stud),
        price: stated.price.or(model.price),
        ..stated.clone()
    }
}

/// An inverter with what its model states.
pub(super) fn inverter(document: &Document, stated: &InverterPart) -> InverterPart {
    let found =
        stated.model.as_ref().and_then(|name| document.stock.inverters.iter().find(|c| c.name == *name));
    found.map_or_else(|| stated.clone(), |model| merged_inverter(stated, model))
}

/// An inverter of the stock in the place of a stated one.
pub(super) fn merged_inverter(stated: &InverterPart, model: &InverterPart) -> InverterPart {
    InverterPart {
        nominal: stated.nominal.or(model.nominal),
        power: stated.power.or(model.power),
        surge: stated.surge.or(model.surge),
        surge_time: stated.surge_time.or(model.surge_time),
        efficiency: stated.efficiency.or(model.efficiency),
        idle: stated.idle.or(model.idle),
        least: stated.least.or(model.least),
        greatest: stated.greatest.or(model.greatest),
        capacitance: stated.capacitance.or(model.capacitance),
        precharge: stated.precharge.or(model.precharge),
        stud: stated.stud.or(model.stud),
        terminal: stated.terminal.or(model.terminal),
        price: stated.price.or(model.price),
        ..stated.clone()
    }
}

/// The module of an array: its own, or that of the stock it names.
pub(super) fn module<'a>(document: &'a Document, array: &'a ArrayPart) -> Option<&'a ModulePart> {
    let named =
        || array.module.as_ref().and_then(|name| document.stock.modules.iter().find(|m| m.name == *name));
    array.own_module.as_ref().or_else(named)
}

/// The battery of the stock that a bank is made of.
pub(super) fn battery<'a>(document: &'a Document, bank: &BankPart) -> Option<&'a StockBattery> {
    bank.battery.as_ref().and_then(|name| document.stock.batteries.iter().find(|b| b.name == *name))
}

/// A bank with what its battery states, whole-bank figures worked out for series and strings.
pub(super) fn bank(stated: &BankPart, battery: &StockBattery, series: u32, strings: u32) -> BankPart {
    let (series_f, strings_f) = (f64::from(series), f64::from(strings));
    BankPart {
        chemistry: Some(battery.chemistry),
        nominal: stated.nominal.or(Some(battery.nominal * series_f)),
        capacity: stated.capacity.or(Some(battery.capacity * strings_f)),
        unit: Some(battery.nominal),
        unit_capacity: Some(battery.capacity),
        units: Some(series.saturating_mul(strings)),
        series: Some(series),
        strings: Some(strings),
        rate: stated.rate.or(battery.rate),
        internal_resistance: stated
            .internal_resistance
            .or(battery.internal_resistance.map(|r| r * series_f / strings_f)),
        short_circuit: stated.short_circuit.or(battery.short_circuit.map(|i| i * strings_f)),
        greatest_charge: stated.greatest_charge.or(battery.greatest_charge.map(|i| i * strings_f)),
        greatest_discharge: stated.greatest_discharge.or(battery.greatest_discharge.map(|i| i * strings_f)),
        charge_from: stated.charge_from.or(battery.charge_from),
        max_series: stated.max_series.or(battery.max_series),
        max_parallel: stated.max_parallel.or(battery.max_parallel),
        stud: stated.stud.or(battery.stud),
        ..stated.clone()
    }
}
