//! The single-diode model as calculations on plain parameters.

use super::diode::{SingleDiode, thermal_volts};
use crate::catalogue::calculations;
use crate::quantity::{
    ElectricCurrent, ElectricPotential, ElectricalResistance, Power, Ratio, ThermodynamicTemperature,
};
use uom::si::{
    electric_current::ampere, electric_potential::volt, electrical_resistance::ohm,
    thermodynamic_temperature::degree_celsius,
};

/// A curve of checked parameters.
fn curve(
    photocurrent: ElectricCurrent,
    saturation: ElectricCurrent,
    series: ElectricalResistance,
    shunt: ElectricalResistance,
    ideality_times_cells: Ratio,
    cell: ThermodynamicTemperature,
) -> SingleDiode {
    SingleDiode {
        photo: photocurrent.get::<ampere>(),
        saturation: saturation.get::<ampere>(),
        series: series.get::<ohm>(),
        leak: 1.0 / shunt.get::<ohm>(),
        thermal: thermal_volts(ideality_times_cells.value, cell.get::<degree_celsius>()),
    }
}

calculations! {
    /// Current of a cell or module at a voltage, by the single-diode model.
    ///
    /// # Example
    /// A module of 36 cells at 45 °C and 12.6 V:
    /// ```
    /// use ampwright::{array::single_diode_current, quantity::{parse, readable}};
    /// let current = single_diode_current(
    ///     parse("12.6 V")?, parse("1.0305 A")?, parse("0.0034823 mA")?, parse("1.2013 ohm")?, parse("982 ohm")?,
    ///     parse("48.643")?, parse("45 degC")?,
    /// )?;
    /// assert_eq!(readable(current).to_string(), "916 mA");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn single_diode_current(
        /// At the terminals.
        voltage: ElectricPotential in volt [-100000.0 ..= 100000.0],
        /// Driven by the light.
        photocurrent: ElectricCurrent in ampere [0.0 ..= 10000.0],
        /// Of the diode.
        saturation: ElectricCurrent in ampere [> 0.0 ..= 10000.0],
        /// Of all cells in series.
        series: ElectricalResistance in ohm [0.0 ..= 1000000.0] = 0.0,
        /// Of all cells in series.
        shunt: ElectricalResistance in ohm [> 0.0 ..= 1000000000.0],
        /// Ideality of the diode times the cells in series.
        ideality_times_cells: Ratio in ratio [> 0.0 ..= 10000.0],
        /// Of the cells.
        cell: ThermodynamicTemperature in degree_celsius [-60.0 ..= 150.0] = 25.0,
    ) -> current: ElectricCurrent in ampere
    formula "I = Iph − I₀·(e^((U + I·Rs)/a) − 1) − (U + I·Rs)/Rsh, a = n·Ns·k·T/q, solved for I"
    source "single-diode model; k and q exact, SI brochure, 9th edition (recalled)"
    {
        let curve = curve(photocurrent, saturation, series, shunt, ideality_times_cells, cell);
        ElectricCurrent::new::<ampere>(curve.current_at(voltage.get::<volt>()))
    }

    /// Open circuit, short circuit and maximum power of a cell or module, by the single-diode model.
    ///
    /// # Example
    /// A module of 36 cells at 45 °C:
    /// ```
    /// use ampwright::{array::single_diode_points, quantity::{parse, readable}};
    /// let points = single_diode_points(
    ///     parse("1.0305 A")?, parse("0.0034823 mA")?, parse("1.2013 ohm")?, parse("982 ohm")?, parse("48.643")?, parse("45 degC")?,
    /// )?;
    /// assert_eq!(readable(points.voc).to_string(), "16.78 V");
    /// assert_eq!(readable(points.power).to_string(), "11.54 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn single_diode_points(
        /// Driven by the light.
        photocurrent: ElectricCurrent in ampere [0.0 ..= 10000.0],
        /// Of the diode.
        saturation: ElectricCurrent in ampere [> 0.0 ..= 10000.0],
        /// Of all cells in series.
        series: ElectricalResistance in ohm [0.0 ..= 1000000.0] = 0.0,
        /// Of all cells in series.
        shunt: ElectricalResistance in ohm [> 0.0 ..= 1000000000.0],
        /// Ideality of the diode times the cells in series.
        ideality_times_cells: Ratio in ratio [> 0.0 ..= 10000.0],
        /// Of the cells.
        cell: ThermodynamicTemperature in degree_celsius [-60.0 ..= 150.0] = 25.0,
    ) => SingleDiodePoints {
        /// Open-circuit voltage.
        voc: ElectricPotential in volt,
        /// Short-circuit current.
        isc: ElectricCurrent in ampere,
        /// Voltage at maximum power.
        vmp: ElectricPotential in volt,
        /// Current at maximum power.
        imp: ElectricCurrent in ampere,
        /// Maximum power.
        power: Power in watt,
    }
    formula "Iph − I₀·(e^(u/a) − 1) − u/Rsh = I, U = u − I·Rs, a = n·Ns·k·T/q: roots I = 0 and U = 0, greatest U·I"
    source "single-diode model; k and q exact, SI brochure, 9th edition (recalled)"
    {
        let points = curve(photocurrent, saturation, series, shunt, ideality_times_cells, cell).key_points();
        SingleDiodePoints {
            voc: points.voc,
            isc: points.isc,
            vmp: points.vmp,
            imp: points.imp,
            power: points.power(),
        }
    }
}
