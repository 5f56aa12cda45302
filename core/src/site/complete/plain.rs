//! Plain modules and controllers, where the stock has none: usual figures, no source.

use alloc::format;
use alloc::string::ToString;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::power::watt;
use uom::si::ratio::ratio;

use crate::quantity::{
    ElectricCurrent, ElectricPotential, Power, Ratio, RatioPerTemperature, ThermodynamicTemperature,
};
use crate::site::finding::digits;
use crate::site::parts::{Charging, ControllerKind, ControllerPart, ModulePart};

/// Output ratings of plain controllers, A. Common practice, no source.
const OUTPUTS_A: [f64; 10] = [10.0, 15.0, 20.0, 30.0, 40.0, 50.0, 60.0, 70.0, 85.0, 100.0];
/// Input ratings of plain controllers, V. Common practice, no source.
const INPUTS_V: [f64; 3] = [75.0, 150.0, 250.0];

/// A plain module of crystalline silicon, 36 cells: usual figures. Common practice, no source.
pub(super) fn module() -> ModulePart {
    let per_kelvin =
        |value: f64| Some(RatioPerTemperature::new::<uom::si::temperature_coefficient::per_kelvin>(value));
    ModulePart {
        name: "plain 100 W, 36 cells".to_string(),
        line: 0,
        power: Power::new::<watt>(100.0),
        voc: ElectricPotential::new::<volt>(22.5),
        isc: ElectricCurrent::new::<ampere>(5.8),
        vmp: ElectricPotential::new::<volt>(18.5),
        imp: ElectricCurrent::new::<ampere>(5.4),
        voc_coefficient: per_kelvin(-0.0033),
        isc_coefficient: per_kelvin(0.0005),
        power_coefficient: per_kelvin(-0.0043),
        noct: Some(ThermodynamicTemperature::new::<uom::si::thermodynamic_temperature::degree_celsius>(47.0)),
        series_fuse: Some(ElectricCurrent::new::<ampere>(15.0)),
        greatest_voltage: Some(ElectricPotential::new::<volt>(600.0)),
        rear_gain: None,
        cells: Some(36),
        price: None,
        count: None,
    }
}

/// Plain tracking controllers, smallest first: usual figures. Common practice, no source.
pub(super) fn controllers() -> Vec<ControllerPart> {
    let mut list = Vec::new();
    for output in OUTPUTS_A {
        for input in INPUTS_V {
            list.push(ControllerPart {
                name: format!("plain, {} A, {} V", digits(output), digits(input)),
                line: 0,
                model: None,
                kind: Some(ControllerKind::Mppt),
                greatest_input: Some(ElectricPotential::new::<volt>(input)),
                input_current: Some(ElectricCurrent::new::<ampere>(output)),
                operating: None,
                start_margin: Some(ElectricPotential::new::<volt>(5.0)),
                output: Some(ElectricCurrent::new::<ampere>(output)),
                nominals: Vec::new(),
                efficiency: Some(Ratio::new::<ratio>(0.95)),
                idle: Some(Power::new::<watt>(1.0)),
                charging: Charging::default(),
                load_dump: None,
                bank: None,
                board: None,
                route: None,
                stud: None,
                price: None,
            });
        }
    }
    list
}
