//! Voltage drop and loss along one two-conductor DC run, and the cross-section that keeps to a limit.
//!
//! The conductors only, both alike and at one temperature: joints, fuses and constant-power loads belong to
//! [`crate::network`]; whether a drop is admitted belongs to [`crate::rules`].

use crate::catalogue::calculations;
use crate::quantity::{Area, ElectricCurrent, ElectricPotential, ElectricalResistivity, Length, Power};

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
    source "Ohm's law"
    {
        // There and back: two conductors carry the current, whatever the route's length.
        2.0 * one_way * resistivity / cross_section * current
    }

    /// Power lost in both conductors of a run.
    ///
    /// # Example
    /// The same pump cable:
    /// ```
    /// use ampwright::{law::cable_loss, quantity::{parse, readable}};
    /// let result = cable_loss(parse("12 m")?, parse("16 mm2")?, parse("0.01724 ohm.mm2/m")?, parse("25 A")?)?;
    /// assert_eq!(readable(result).to_string(), "16.16 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn cable_loss(
        /// The route, not the sum of both conductors.
        one_way: Length in meter [> 0.0],
        /// One conductor.
        cross_section: Area in square_millimeter [> 0.0],
        /// At operating temperature, not at 20 °C.
        resistivity: ElectricalResistivity in ohm_meter [> 0.0],
        /// Through both conductors.
        current: ElectricCurrent in ampere [any],
    ) -> loss: Power in watt
    formula "P = 2·l·ρ·I²/A"
    source "Joule's law"
    { 2.0 * one_way * resistivity / cross_section * current * current }

    /// Cross-section that keeps the drop of a run to a limit.
    ///
    /// The area alone: choosing a standard size, and whether it carries the current, come after.
    ///
    /// # Example
    /// 25 A over 12 m with 0.36 V to spare:
    /// ```
    /// use ampwright::{law::required_cross_section, quantity::{parse, readable}};
    /// let result = required_cross_section(parse("12 m")?, parse("0.01724 ohm.mm2/m")?, parse("25 A")?, parse("0.36 V")?)?;
    /// assert_eq!(readable(result).to_string(), "28.7 mm2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn required_cross_section(
        /// The route, not the sum of both conductors.
        one_way: Length in meter [> 0.0],
        /// At operating temperature, not at 20 °C.
        resistivity: ElectricalResistivity in ohm_meter [> 0.0],
        /// Through both conductors.
        current: ElectricCurrent in ampere [>= 0.0],
        /// The most that may be lost on the way there and back.
        greatest_drop: ElectricPotential in volt [> 0.0],
    ) -> cross_section: Area in square_millimeter
    formula "A = 2·l·ρ·I/U"
    source "Ohm's law"
    { 2.0 * one_way * resistivity * current / greatest_drop }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::{
        area::square_millimeter, electric_current::ampere, electrical_resistivity::ohm_meter, length::meter,
    };

    use super::*;

    fn drop(one_way: f64, area: f64, current: f64) -> ElectricPotential {
        voltage_drop(
            Length::new::<meter>(one_way),
            Area::new::<square_millimeter>(area),
            ElectricalResistivity::new::<ohm_meter>(2e-8),
            ElectricCurrent::new::<ampere>(current),
        )
        .unwrap()
    }

    proptest! {
        #[test]
        fn longer_drops_more_and_thicker_less(l in 0.1..100.0f64, a in 0.1..500.0f64, i in 0.1..500.0f64) {
            prop_assert!(drop(l * 1.01, a, i) > drop(l, a, i));
            prop_assert!(drop(l, a * 1.01, i) < drop(l, a, i));
            prop_assert_eq!(drop(l, a, -i), -drop(l, a, i));
        }

        #[test]
        fn the_required_area_drops_just_what_is_allowed(l in 0.1..100.0f64, i in 0.1..500.0f64, u in 0.01..10.0f64) {
            let u = ElectricPotential::new::<uom::si::electric_potential::volt>(u);
            let (l_, rho, i_) = (
                Length::new::<meter>(l),
                ElectricalResistivity::new::<ohm_meter>(2e-8),
                ElectricCurrent::new::<ampere>(i),
            );
            let area = required_cross_section(l_, rho, i_, u).unwrap();
            let back = voltage_drop(l_, area, rho, i_).unwrap();
            prop_assert!((back.value / u.value - 1.0).abs() < 1e-14);
            let loss = cable_loss(l_, area, rho, i_).unwrap();
            prop_assert!((loss.value / (back.value * i) - 1.0).abs() < 1e-14);
        }
    }

    #[test]
    fn negative_length_is_named_in_the_error() {
        extern crate std;
        use std::string::ToString;
        let one = voltage_drop(
            Length::new::<meter>(-3.0),
            Area::new::<square_millimeter>(16.0),
            ElectricalResistivity::new::<ohm_meter>(2e-8),
            ElectricCurrent::new::<ampere>(1.0),
        );
        assert_eq!(one.unwrap_err().to_string(), "one_way is -3 m; it must be greater than 0");
    }
}
