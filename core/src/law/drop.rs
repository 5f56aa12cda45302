//! Voltage drop and loss along one two-conductor DC run, and the cross-section that keeps to a limit.
//!
//! The conductors only, both alike and at one temperature: joints, fuses and constant-power loads belong to
//! [`crate::network`]; whether a drop is admitted belongs to [`crate::rules`].

use crate::catalogue::calculations;
use crate::quantity::{Area, ElectricCurrent, ElectricPotential, ElectricalResistivity, Length};

calculations! {
    /// Voltage drop at the far end of a two-conductor run, there and back.
    ///
    /// # Example
    /// A pump 12 m away on 16 mm² of copper at 20 °C (1/58 Ω·mm²/m) draws 25 A:
    /// ```
    /// # use ampwright::law::voltage_drop;
    /// # use uom::si::{f64::*, area::square_millimeter, electric_current::ampere, electric_potential::volt};
    /// # use uom::si::{electrical_resistivity::ohm_square_millimeter_per_meter, length::meter};
    /// let drop = voltage_drop(
    ///     Length::new::<meter>(12.0),
    ///     Area::new::<square_millimeter>(16.0),
    ///     ElectricalResistivity::new::<ohm_square_millimeter_per_meter>(1.0 / 58.0),
    ///     ElectricCurrent::new::<ampere>(25.0),
    /// )?;
    /// assert!((drop.get::<volt>() - 0.6466).abs() < 1e-4);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn voltage_drop(
        /// The route, not the sum of both conductors.
        one_way: Length in meter [> 0.0],
        /// One conductor.
        cross_section: Area in square_millimeter [> 0.0],
        /// At operating temperature, not at 20 °C.
        resistivity: ElectricalResistivity in ohm_meter [> 0.0],
        /// The sign gives the direction.
        current: ElectricCurrent in ampere [any],
    ) -> drop: ElectricPotential in volt
    formula "U = 2·l·ρ·I/A"
    source "Ohm's law; checked against `tests/reference/cases-conductors.toml`"
    {
        // There and back: two conductors carry the current, whatever the route's length.
        2.0 * one_way * resistivity / cross_section * current
    }
}
