//! American Wire Gauge between its sizes: the number of an area and the area of a number.

use core::f64::consts::FRAC_PI_4;

use uom::si::area::square_millimeter;
use uom::si::ratio::ratio;

use crate::catalogue::calculations;
use crate::quantity::{Area, Ratio, sqrt};

calculations! {
    /// Fractional gauge number of an area of metal.
    ///
    /// 1/0 is 0, 2/0 is −1, 3/0 is −2, 4/0 is −3. The number falls as the conductor grows.
    ///
    /// # Example
    /// 2.5 mm² lies between 14 and 13 AWG:
    /// ```
    /// use ampwright::{law::gauge_number, quantity::{parse, readable}};
    /// let result = gauge_number(parse("2.5 mm2")?)?;
    /// assert_eq!(readable(result).to_string(), "13.21");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn gauge_number(
        /// Of the metal.
        cross_section: Area in square_millimeter [> 0.0],
    ) -> number: Ratio in awg
    formula "n = 36 − 39·ln(d/0.127 mm)/ln 92, d = √(4·A/π)"
    source "ASTM B258, solved for the number"
    {
        let diameter_mm = sqrt(cross_section.get::<square_millimeter>() / FRAC_PI_4);
        Ratio::new::<ratio>(36.0 - 39.0 * libm::log(diameter_mm / 0.127) / libm::log(92.0))
    }

    /// Area of a gauge number, which need not be whole.
    ///
    /// # Example
    /// 14 AWG is not 2.5 mm²:
    /// ```
    /// use ampwright::{law::gauge_area, quantity::{parse, readable}};
    /// let result = gauge_area(parse("14")?)?;
    /// assert_eq!(readable(result).to_string(), "2.08 mm2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn gauge_area(
        /// 40 … 1, then 0 for 1/0, −1 for 2/0, −2 for 3/0, −3 for 4/0.
        number: Ratio in awg [-3.0 ..= 40.0],
    ) -> cross_section: Area in square_millimeter
    formula "A = π/4·d², d = 0.127 mm·92^((36 − n)/39)"
    source "ASTM B258"
    {
        let diameter_mm = 0.127 * libm::pow(92.0, (36.0 - number.value) / 39.0);
        Area::new::<square_millimeter>(FRAC_PI_4 * diameter_mm * diameter_mm)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::ConductorSize;

    #[test]
    fn a_number_and_its_area_go_there_and_back() {
        for n in -3i8..=40 {
            let number = Ratio::new::<ratio>(f64::from(n));
            let area = gauge_area(number).unwrap();
            assert_eq!(area, ConductorSize::awg(n).unwrap().area());
            assert!((gauge_number(area).unwrap().value - f64::from(n)).abs() < 1e-12);
        }
    }
}
