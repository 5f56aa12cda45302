//! The room `law`, on plain numbers.

use ampwright::law;
use ampwright::quantity::{Area, ElectricCurrent, ElectricalResistivity, Length};
use pyo3::prelude::*;
use uom::si::{area, electric_current, electric_potential, electrical_resistivity, length};

use crate::error::raised;

#[pyfunction]
pub(crate) fn voltage_drop(
    py: Python<'_>,
    one_way_m: f64,
    cross_section_mm2: f64,
    resistivity_ohm_m: f64,
    current_A: f64,
) -> PyResult<f64> {
    let drop = law::voltage_drop(
        Length::new::<length::meter>(one_way_m),
        Area::new::<area::square_millimeter>(cross_section_mm2),
        ElectricalResistivity::new::<electrical_resistivity::ohm_meter>(resistivity_ohm_m),
        ElectricCurrent::new::<electric_current::ampere>(current_A),
    );
    let spelling = [
        ("one_way", "one_way_m"),
        ("cross_section", "cross_section_mm2"),
        ("resistivity", "resistivity_ohm_m"),
        ("current", "current_A"),
        ("drop", "drop_V"),
    ];
    drop.map(|drop| drop.get::<electric_potential::volt>()).map_err(|error| raised(py, error, &spelling))
}
