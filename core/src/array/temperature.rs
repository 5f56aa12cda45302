//! What heat and cold do to a module: cell temperature, cold open circuit, hot operating voltage, power.
//!
//! By the sheet's coefficients, straight lines through 25 °C. The curve between the points is [`super::ModuleCurve`].

use uom::si::{
    heat_flux_density::watt_per_square_meter, ratio::ratio, temperature_coefficient::per_kelvin,
    temperature_interval::kelvin, thermodynamic_temperature::degree_celsius,
};

use super::module::{STC_DEGC, STC_W_PER_M2};

use crate::catalogue::calculations;
use crate::quantity::{
    ElectricPotential, Irradiance, Power, Ratio, RatioPerTemperature, TemperatureInterval,
    ThermodynamicTemperature,
};

/// Conditions of the nominal operating cell temperature. Source: IEC 61215 (1993 and 2005), recalled.
const NOCT_W_PER_M2: f64 = 800.0;
const NOCT_AMBIENT_DEGC: f64 = 20.0;

fn above_standard(cell: ThermodynamicTemperature) -> f64 {
    cell.get::<degree_celsius>() - STC_DEGC
}

/// 1 + c·ΔT, never below 0.
fn line(coefficient: RatioPerTemperature, cell: ThermodynamicTemperature) -> f64 {
    (1.0 + coefficient.get::<per_kelvin>() * above_standard(cell)).max(0.0)
}

calculations! {
    /// Temperature of a module's cells in the sun, by its nominal operating cell temperature.
    ///
    /// For an open rack in light wind; a module close to a roof is hotter.
    ///
    /// # Example
    /// Full sun and 30 °C with a NOCT of 47 °C:
    /// ```
    /// use ampwright::{array::cell_temperature, quantity::{parse, readable}};
    /// let cell = cell_temperature(parse("30 degC")?, parse("47 degC")?, parse("1000 W/m2")?)?;
    /// assert_eq!(readable(cell).to_string(), "63.8 degC");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn cell_temperature(
        /// Of the air.
        ambient: ThermodynamicTemperature in degree_celsius [-60.0 ..= 60.0],
        /// Nominal operating cell temperature.
        noct: ThermodynamicTemperature in degree_celsius [25.0 ..= 80.0] = 47.0,
        /// In the plane of the array.
        irradiance: Irradiance in watt_per_square_meter [0.0 ..= 2000.0],
    ) -> cell: ThermodynamicTemperature in degree_celsius
    formula "Tc = Ta + (NOCT − 20 °C)·G/(800 W/m²)"
    source "conditions of NOCT: IEC 61215 (1993, 2005), 800 W/m², 20 °C, 1 m/s, open rack (recalled); default NOCT common practice, no \
        source"
    {
        let rise = (noct.get::<degree_celsius>() - NOCT_AMBIENT_DEGC) * irradiance.get::<watt_per_square_meter>() / NOCT_W_PER_M2;
        ambient + TemperatureInterval::new::<kelvin>(rise)
    }

    /// Open-circuit voltage of a string on its coldest morning.
    ///
    /// # Example
    /// 18 modules of 49.5 V with −0.28 %/K at −5 °C:
    /// ```
    /// use ampwright::{array::open_circuit_voltage_cold, quantity::{parse, readable}};
    /// let cold = open_circuit_voltage_cold(parse("49.5 V")?, parse("-0.28 %/K")?, parse("-5 degC")?, parse("18")?)?;
    /// assert_eq!(readable(cold).to_string(), "966 V");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn open_circuit_voltage_cold(
        /// Of one module at 25 °C.
        voc: ElectricPotential in volt [> 0.0],
        /// Coefficient of the open-circuit voltage.
        coefficient: RatioPerTemperature in per_kelvin [-0.01 ..= 0.0],
        /// Coldest air at first light: the cells are no warmer yet.
        coldest: ThermodynamicTemperature in degree_celsius [-60.0 ..= 40.0],
        /// Modules in series.
        in_series: Ratio in ratio [> 0.0 ..= 1000.0] = 1.0,
    ) -> voltage: ElectricPotential in volt
    formula "Voc,cold = n·Voc·(1 + β·(T − 25 °C))"
    source "straight line of the sheet's coefficient (IEC 60891, recalled)"
    { voc * line(coefficient, coldest) * in_series }

    /// Voltage at maximum power of a string of old, hot modules, at the far end of its wiring.
    ///
    /// # Example
    /// Two modules of 18.6 V with −0.4 %/K at 70 °C, 2 % lost in wiring, 5 % by ageing:
    /// ```
    /// use ampwright::{array::operating_voltage_hot, quantity::{parse, readable}};
    /// let hot = operating_voltage_hot(parse("18.6 V")?, parse("-0.4 %/K")?, parse("70 degC")?, parse("2")?, parse("2 %")?, parse("5 %")?)?;
    /// assert_eq!(readable(hot).to_string(), "28.4 V");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn operating_voltage_hot(
        /// Voltage of one module at maximum power and 25 °C.
        vmp: ElectricPotential in volt [> 0.0],
        /// Coefficient of the voltage at maximum power: that of power less that of current.
        coefficient: RatioPerTemperature in per_kelvin [-0.05 ..= 0.01],
        /// Hottest cells.
        hottest: ThermodynamicTemperature in degree_celsius [-60.0 ..= 150.0],
        /// Modules in series.
        in_series: Ratio in ratio [> 0.0 ..= 1000.0] = 1.0,
        /// Part of the voltage lost in wiring.
        drop: Ratio in ratio [0.0 ..= 0.5] = 0.0,
        /// Part of the voltage lost over the years.
        ageing: Ratio in ratio [0.0 ..= 0.5] = 0.0,
    ) -> voltage: ElectricPotential in volt
    formula "Vmp,hot = n·Vmp·(1 + c·(T − 25 °C))·(1 − drop)·(1 − ageing)"
    source "straight line of the sheet's coefficient (IEC 60891, recalled)"
    {
        let one = Ratio::new::<ratio>(1.0);
        vmp * line(coefficient, hottest) * in_series * (one - drop) * (one - ageing)
    }

    /// Least and most modules in series between a voltage that they must reach hot and one they may not exceed cold.
    ///
    /// # Example
    /// 49.5 V with −0.28 %/K at −5 °C, 38.9 V hot, for an input of 200 to 1000 V:
    /// ```
    /// use ampwright::{array::modules_in_series, quantity::{parse, readable}};
    /// let count = modules_in_series(
    ///     parse("49.5 V")?, parse("-0.28 %/K")?, parse("-5 degC")?, parse("1000 V")?, parse("38.9 V")?, parse("200 V")?,
    /// )?;
    /// assert_eq!((count.least.value, count.most.value), (6.0, 18.0));
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn modules_in_series(
        /// Of one module at 25 °C.
        voc: ElectricPotential in volt [> 0.0],
        /// Coefficient of the open-circuit voltage.
        coefficient: RatioPerTemperature in per_kelvin [-0.01 ..= 0.0],
        /// Coldest air at first light.
        coldest: ThermodynamicTemperature in degree_celsius [-60.0 ..= 40.0],
        /// The lowest of all that bear the array's voltage: controller, modules, isolator, devices.
        greatest_voltage: ElectricPotential in volt [> 0.0],
        /// Voltage of one module at maximum power, hot, after wiring and ageing.
        hot_voltage: ElectricPotential in volt [> 0.0],
        /// What the string must reach: the bank's highest charge voltage with the controller's margin.
        needed_voltage: ElectricPotential in volt [> 0.0],
    ) => ModulesInSeries {
        /// Fewest that reach the needed voltage hot.
        least: Ratio in ratio,
        /// Most that keep to the greatest voltage cold; where it is below the least, no count fits.
        most: Ratio in ratio,
    }
    formula "least = ⌈U_needed/U_hot⌉, most = ⌊U_greatest/(Voc·(1 + β·(T − 25 °C)))⌋"
    source "straight line of the sheet's coefficient (IEC 60891, recalled)"
    {
        // The last bit of a quotient must not move a count of modules.
        let exact = (needed_voltage / hot_voltage).value;
        let room = (greatest_voltage / (voc * line(coefficient, coldest))).value;
        ModulesInSeries {
            least: Ratio::new::<ratio>(libm::ceil(exact * (1.0 - 1e-12))),
            most: Ratio::new::<ratio>(libm::floor(room * (1.0 + 1e-12))),
        }
    }

    /// Power of modules at a cell temperature and an irradiance.
    ///
    /// # Example
    /// 150 W with −0.5 %/K in full sun at 63.75 °C:
    /// ```
    /// use ampwright::{array::module_power, quantity::{parse, readable}};
    /// let power = module_power(parse("150 W")?, parse("-0.5 %/K")?, parse("63.8 degC")?, parse("1000 W/m2")?)?;
    /// assert_eq!(readable(power).to_string(), "120.9 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn module_power(
        /// Rated, at 1000 W/m² and 25 °C; of one module or of all.
        power: Power in watt [>= 0.0],
        /// Coefficient of the maximum power.
        coefficient: RatioPerTemperature in per_kelvin [-0.01 ..= 0.0],
        /// Of the cells.
        cell: ThermodynamicTemperature in degree_celsius [-60.0 ..= 150.0],
        /// In the plane of the array.
        irradiance: Irradiance in watt_per_square_meter [0.0 ..= 2000.0],
    ) -> delivered: Power in watt
    formula "P = P₀·(G/(1000 W/m²))·(1 + γ·(Tc − 25 °C))"
    source "straight line of the sheet's coefficient (IEC 60891, recalled)"
    { power * line(coefficient, cell) * (irradiance.get::<watt_per_square_meter>() / STC_W_PER_M2) }
}
