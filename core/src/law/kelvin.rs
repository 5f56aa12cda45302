//! Kelvin's law: the cross-section at which losses and conductor cost least together (R17). Advice, never a requirement.

use uom::si::area::square_meter;
use uom::si::electric_current::ampere;
use uom::si::electrical_resistivity::ohm_meter;

use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{Area, ElectricCurrent, ElectricalResistivity, Ratio, Time, sqrt};

macro_rules! price {
    ($(#[$about:meta])* $name:ident $input:literal $unit:literal) => {
        $(#[$about])*
        #[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
        pub struct $name(f64);

        impl $name {
            /// So much money: any currency, the same throughout a calculation.
            ///
            /// # Errors
            /// [`Error::OutOfRange`] where it is negative or not finite.
            pub const fn new(money: f64) -> Result<Self, Error> {
                // Written so that NaN fails.
                if money >= 0.0 && money <= f64::MAX {
                    return Ok(Self(money));
                }
                Err(Error::OutOfRange { name: $input, value: money, unit: $unit, allowed: Allowed::AtLeast(0.0) })
            }

            /// For results and inputs that the catalogue checks itself.
            pub(crate) const fn unchecked(money: f64) -> Self {
                Self(money)
            }

            /// The money.
            pub const fn get(self) -> f64 {
                self.0
            }
        }
    };
}

price! {
    /// Price of a kilowatt-hour, in any currency.
    EnergyPrice "energy_price" "/kWh"
}
price! {
    /// What one metre of one conductor costs more for each square millimetre, in any currency.
    ConductorPrice "conductor_price" "/(m·mm²)"
}

calculations! {
    /// Cross-section at which the losses of a year cost as much as the year's charge on the conductor.
    ///
    /// There their sum is least; around it the sum is flat, so that half or double the area costs a quarter more. What does
    /// not grow with the area (insulation, laying) plays no part. Drop, ampacity and protection decide first.
    ///
    /// # Example
    /// 200 A all year, 1.73 μΩ·cm, 0.10 a metre and mm² for each conductor, 10 % a year, 0.05 a kilowatt-hour:
    /// ```
    /// use ampwright::law::{ConductorPrice, EnergyPrice, economic_area};
    /// use ampwright::quantity::{parse, readable};
    /// let area = economic_area(
    ///     parse("200 A")?, parse("8760 h")?, EnergyPrice::new(0.05)?, ConductorPrice::new(0.10)?, parse("10 %")?,
    ///     parse("0.0173 ohm.mm2/m")?,
    /// )?;
    /// assert_eq!(readable(area).to_string(), "174.1 mm2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn economic_area(
        /// Root mean square over the hours of use: more than the mean, where the current varies.
        current: ElectricCurrent in ampere [>= 0.0],
        /// Hours of use a year.
        hours_per_year: Time in hour [> 0.0 ..= 8784.0],
        /// What a kilowatt-hour costs to make there.
        energy_price: EnergyPrice in money_per_kWh [>= 0.0],
        /// What one metre of one conductor costs more for each mm².
        conductor_price: ConductorPrice in money_per_m_mm2 [> 0.0],
        /// Interest and depreciation, a year.
        annual_charge: Ratio in ratio [> 0.0 ..= 1.0],
        /// At operating temperature.
        resistivity: ElectricalResistivity in ohm_meter [> 0.0],
    ) -> area: Area in square_millimeter
    formula "A = I·√(ρ·t·p_E/(c·p_A))"
    source "W. Thomson (Lord Kelvin), 1881 (recalled): least of ρ·I²·t·p_E/A + c·p_A·A"
    {
        let kilowatt_hours = resistivity.get::<ohm_meter>() * hours_per_year.get::<uom::si::time::hour>() / 1000.0;
        // The price for a metre and mm² is 1e-6 of that for a metre and m².
        let square = kilowatt_hours * energy_price.get() * 1e-6 / (annual_charge.value * conductor_price.get());
        Area::new::<square_meter>(current.get::<ampere>() * sqrt(square))
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::area::square_millimeter;
    use uom::si::electrical_resistivity::ohm_square_millimeter_per_meter;
    use uom::si::ratio::ratio;
    use uom::si::time::hour;

    use super::*;

    proptest! {
        /// The area against the cost itself: at no area beside it is the year cheaper.
        #[test]
        fn beside_the_economic_area_the_year_costs_more(
            amperes in 1.0..500.0f64, hours in 10.0..8760.0f64, energy in 0.01..5.0f64, metal in 0.001..10.0f64,
            charge in 0.01..1.0f64, rho in 0.017..0.03f64,
        ) {
            let area = economic_area(
                ElectricCurrent::new::<ampere>(amperes),
                Time::new::<hour>(hours),
                EnergyPrice::new(energy).unwrap(),
                ConductorPrice::new(metal).unwrap(),
                Ratio::new::<ratio>(charge),
                ElectricalResistivity::new::<ohm_square_millimeter_per_meter>(rho),
            ).unwrap().get::<square_millimeter>();
            let losses = |mm2: f64| amperes * amperes * rho / mm2 * hours / 1000.0 * energy;
            let cost = |mm2: f64| losses(mm2) + charge * metal * mm2;
            // Losses cost as much as the charge, which is Kelvin's rule itself.
            prop_assert!((losses(area) / (charge * metal * area) - 1.0).abs() < 1e-9);
            for k in [0.5, 0.9, 1.1, 2.0] {
                prop_assert!(cost(k * area) > cost(area));
            }
            // Half or double the area: a quarter more, as the documentation says.
            prop_assert!((cost(2.0 * area) / cost(area) - 1.25).abs() < 1e-9);
            prop_assert!((cost(0.5 * area) / cost(area) - 1.25).abs() < 1e-9);
        }
    }

    #[test]
    fn prices_are_not_negative_and_a_conductor_is_not_for_nothing() {
        for bad in [-1.0, f64::NAN, f64::INFINITY] {
            assert!(EnergyPrice::new(bad).is_err() && ConductorPrice::new(bad).is_err(), "{bad}");
        }
        let area = |conductor: f64| {
            economic_area(
                ElectricCurrent::new::<ampere>(10.0),
                Time::new::<hour>(1000.0),
                EnergyPrice::new(0.0).unwrap(),
                ConductorPrice::new(conductor).unwrap(),
                Ratio::new::<ratio>(0.1),
                ElectricalResistivity::new::<ohm_square_millimeter_per_meter>(0.0175),
            )
        };
        // Free energy asks for no metal at all: the other checks decide.
        assert_eq!(area(1.0).unwrap().value, 0.0);
        assert!(area(0.0).is_err());
    }
}
