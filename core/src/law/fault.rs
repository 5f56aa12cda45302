//! What a conductor stands while a fault lasts.

use uom::si::time::second;

use crate::catalogue::calculations;
use crate::quantity::{Area, ElectricCurrent, Time, sqrt};
pub use uom::si::f64::ElectricCurrentDensity;

calculations! {
    /// Least cross-section that a fault does not overheat before it is cleared.
    ///
    /// Adiabatic: all heat stays in the metal, which holds for some seconds at most. Below 0.1 s a device that limits the current
    /// lets through its own I²t, by its maker: that counts in place of current and duration.
    ///
    /// # Example
    /// 3 kA for 0.1 s, copper in cross-linked insulation (k = 143):
    /// ```
    /// use ampwright::{law::{ElectricCurrentDensity, adiabatic_area}, quantity::{parse, readable}};
    /// use uom::si::electric_current_density::ampere_per_square_millimeter;
    /// let k = ElectricCurrentDensity::new::<ampere_per_square_millimeter>(143.0);
    /// let area = adiabatic_area(parse("3 kA")?, parse("0.1 s")?, k)?;
    /// assert_eq!(readable(area).to_string(), "6.63 mm2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn adiabatic_area(
        /// Through the conductor.
        fault_current: ElectricCurrent in ampere [>= 0.0],
        /// Until the device has opened, 5 s at most; below 0.1 s the I²t that the device itself lets through counts instead.
        duration: Time in second [> 0.0 ..= 5.0],
        /// k of the standard (A·√s/mm²): the current density that the conductor stands for one second.
        one_second_density: ElectricCurrentDensity in ampere_per_square_millimeter [> 0.0],
    ) -> cross_section: Area in square_millimeter
    formula "S = √(I²·t)/k"
    source "IEC 60364-4-43:2008, 434.5.2, for 0.1 to 5 s; below 0.1 s it asks for the device's own let-through (recalled)"
    { fault_current * sqrt(duration.get::<second>()) / one_second_density }
}

#[cfg(test)]
mod tests {
    use uom::si::electric_current_density::ampere_per_square_millimeter;
    use uom::si::{area::square_millimeter, electric_current::ampere};

    use super::*;

    #[test]
    fn for_one_second_the_density_is_what_its_name_says() {
        let area = adiabatic_area(
            ElectricCurrent::new::<ampere>(1150.0),
            Time::new::<second>(1.0),
            ElectricCurrentDensity::new::<ampere_per_square_millimeter>(115.0),
        )
        .unwrap();
        assert!((area.get::<square_millimeter>() - 10.0).abs() < 1e-12);
    }
}
