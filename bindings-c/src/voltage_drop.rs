//! Drop along one run.

use ampwright::law;
use ampwright::quantity::{Area, ElectricCurrent, ElectricalResistivity, Length};
use uom::si::{area, electric_current, electric_potential, electrical_resistivity, length};

use crate::Status;

/// Two-conductor DC run, owned by the caller; read only during a call.
#[repr(C)]
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CableRun {
    /// Route, not the sum of both conductors; > 0.
    pub one_way_m: f64,
    /// One conductor; > 0.
    pub cross_section_mm2: f64,
    /// At operating temperature; > 0.
    pub resistivity_ohm_m: f64,
}

/// Voltage drop at the far end, there and back. U = 2·l·ρ·I/A.
///
/// @param[in]  run        not NULL
/// @param[in]  current_A  finite; the sign gives the direction
/// @param[out] drop_V     volts; untouched unless AW_STATUS_OK
/// @return AW_STATUS_OK, AW_STATUS_NULL_POINTER or AW_STATUS_OUT_OF_RANGE, also where the drop is too large for a double
#[unsafe(no_mangle)]
#[allow(clippy::missing_safety_doc)] // the header states once, for all functions, what pointers must be
pub unsafe extern "C" fn aw_voltage_drop(run: *const CableRun, current_A: f64, drop_V: *mut f64) -> Status {
    if run.is_null() || drop_V.is_null() {
        return Status::AW_STATUS_NULL_POINTER;
    }
    // SAFETY: not NULL, and the caller owes a readable, aligned run; it is copied at once.
    let run = unsafe { run.read() };
    let drop = law::voltage_drop(
        Length::new::<length::meter>(run.one_way_m),
        Area::new::<area::square_millimeter>(run.cross_section_mm2),
        ElectricalResistivity::new::<electrical_resistivity::ohm_meter>(run.resistivity_ohm_m),
        ElectricCurrent::new::<electric_current::ampere>(current_A),
    );
    match drop {
        Ok(drop) => {
            // SAFETY: not NULL, and the caller owes a writable, aligned double.
            unsafe { drop_V.write(drop.get::<electric_potential::volt>()) };
            Status::AW_STATUS_OK
        }
        Err(error) => error.into(),
    }
}
