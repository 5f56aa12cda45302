//! A module's current-voltage curve at any light and temperature, from its sheet.

use uom::si::{electric_current::ampere, electric_potential::volt, temperature_coefficient::per_kelvin};

use super::diode::{SingleDiode, ZERO_DEGC_K, thermal_volts};
use super::fit::{self, IDEALITY, Points};
use super::module::{Conditions, KeyPoints, Module, STC_DEGC};
use crate::error::Error;
use crate::quantity::ElectricPotential;

/// Open-circuit voltage of one cell where the sheet does not count them: 0.6 to 0.7 V on sheets of crystalline silicon.
/// Common practice, no source.
const CELL_VOC_V: f64 = 0.63;
/// Coefficient of open-circuit voltage where the sheet gives none, 1/K: crystalline silicon, common practice, no source.
/// For yield only; the coldest morning is never judged by it.
const USUAL_VOC_PER_K: f64 = -0.0031;

/// Kelvins above 25 °C at which the curve is given the sheet's coefficient of power: a warm day.
const TUNED_K: f64 = 25.0;
const HALVINGS: u32 = 60;

/// Cells in series: stated, else from the open-circuit voltage.
fn cells(module: &Module) -> f64 {
    let sheet = module.sheet();
    sheet.cells.map_or(sheet.points.voc.get::<volt>() / CELL_VOC_V, f64::from)
}

/// Coefficient of the open-circuit voltage for yield: stated, else usual.
fn voc_per_K(module: &Module) -> f64 {
    module.sheet().voc_coefficient.map_or(USUAL_VOC_PER_K, |c| c.get::<per_kelvin>())
}

impl Module {
    /// Open circuit, short circuit and maximum power in other light and at another temperature, by coefficients alone.
    ///
    /// Currents go with the light and their coefficient; voltages with theirs and with the logarithm of the light, as a diode of
    /// ideality 1.2 has it. Coefficients that are not stated are those usual for crystalline silicon: good for yield, and not for
    /// the coldest morning, which [`super::check_strings`] judges. [`ModuleCurve`] gives the whole curve.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for light or temperature outside [`Conditions`].
    ///
    /// ```
    /// use ampwright::array::{Conditions, KeyPoints, Module, ModuleSheet};
    /// use ampwright::quantity::{parse, readable};
    /// let points =
    ///     KeyPoints { voc: parse("22.5 V")?, isc: parse("6.1 A")?, vmp: parse("18.6 V")?, imp: parse("5.38 A")? };
    /// let sheet = ModuleSheet { power_coefficient: Some(parse("-0.4 %/K")?), ..ModuleSheet::plain(parse("100 W")?, points) };
    /// let hot = Conditions { irradiance: parse("1000 W/m2")?, cell: parse("60 degC")? };
    /// assert_eq!(readable(Module::new(sheet)?.at(&hot)?.power()).to_string(), "85.8 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn at(&self, conditions: &Conditions) -> Result<KeyPoints, Error> {
        let (light, above) = conditions.relative()?;
        let KeyPoints { voc, isc, vmp, imp } = self.sheet().points;
        let currents = light * (1.0 + self.isc_coefficient().0.get::<per_kelvin>() * above).max(0.0);
        let thermal = thermal_volts(IDEALITY * cells(self), STC_DEGC + above);
        // Minus infinity without light: no voltage.
        let dim = thermal * libm::log(light);
        let voc_per_K = voc_per_K(self);
        let vmp_per_K =
            self.vmp_coefficient().map_or(voc_per_K * (voc / vmp).value, |c| c.get::<per_kelvin>());
        let line = |voltage: ElectricPotential, per_K: f64| {
            ElectricPotential::new::<volt>((voltage.get::<volt>() * (1.0 + per_K * above) + dim).max(0.0))
        };
        Ok(KeyPoints {
            voc: line(voc, voc_per_K),
            isc: isc * currents,
            vmp: line(vmp, vmp_per_K),
            imp: imp * currents,
        })
    }
}

/// The current-voltage curve of a module, fitted once to its sheet.
///
/// ```
/// use ampwright::array::{Conditions, KeyPoints, Module, ModuleCurve, ModuleSheet};
/// use ampwright::quantity::{parse, readable};
/// let points =
///     KeyPoints { voc: parse("22.5 V")?, isc: parse("6.1 A")?, vmp: parse("18.6 V")?, imp: parse("5.38 A")? };
/// let module = Module::new(ModuleSheet { cells: Some(36), ..ModuleSheet::plain(parse("100 W")?, points) })?;
/// let curve = ModuleCurve::of(&module)?;
/// let dull = Conditions { irradiance: parse("200 W/m2")?, cell: parse("25 degC")? };
/// assert_eq!(readable(curve.at(&dull)?.key_points().power()).to_string(), "18.77 W");
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ModuleCurve {
    standard: SingleDiode,
    isc: f64,
    voc: f64,
    isc_per_K: f64,
    voc_per_K: f64,
    /// Change of the series resistance that gives the sheet's coefficient of power, Ω/K.
    series_per_K: f64,
}

impl ModuleCurve {
    /// Fits the curve to a module's sheet.
    ///
    /// # Errors
    /// [`Error::Contradiction`] where no single-diode curve passes through the sheet's points.
    pub fn of(module: &Module) -> Result<Self, Error> {
        let sheet = module.sheet();
        let KeyPoints { voc, isc, vmp, imp } = sheet.points;
        let points = Points {
            voc: voc.get::<volt>(),
            isc: isc.get::<ampere>(),
            vmp: vmp.get::<volt>(),
            imp: imp.get::<ampere>(),
        };
        let standard = fit::greatest(points, thermal_volts(IDEALITY * cells(module), STC_DEGC))?;
        let curve = Self {
            standard,
            isc: points.isc,
            voc: points.voc,
            isc_per_K: module.isc_coefficient().0.get::<per_kelvin>(),
            voc_per_K: voc_per_K(module),
            series_per_K: 0.0,
        };
        Ok(match sheet.power_coefficient {
            None => curve,
            Some(power) => {
                let wanted = points.vmp * points.imp * (1.0 + power.get::<per_kelvin>() * TUNED_K);
                Self { series_per_K: (curve.series_for(wanted, points) - standard.series) / TUNED_K, ..curve }
            }
        })
    }

    /// The curve at standard test conditions.
    pub fn standard(&self) -> &SingleDiode {
        &self.standard
    }

    /// The curve in other light and at another temperature.
    ///
    /// Short-circuit current goes with the light and its coefficient; open-circuit voltage in full sun with its coefficient,
    /// in less light as the diode gives it; the leak goes with the light. Where the sheet has a coefficient of power, the series
    /// resistance changes with temperature by as much as gives it, which stands for all that makes the curve rounder in heat.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for light or temperature outside [`Conditions`], [`Error::Contradiction`] where the sheet's
    /// coefficients leave no curve.
    pub fn at(&self, conditions: &Conditions) -> Result<SingleDiode, Error> {
        let (light, above) = conditions.relative()?;
        let series = (self.standard.series + self.series_per_K * above).max(0.0);
        self.translated(light, above, series).ok_or(Error::Contradiction {
            name: "cell temperature",
            value: STC_DEGC + above,
            unit: "degC",
            why: "the sheet's coefficients leave no curve there; look whether they are ratios per kelvin",
        })
    }

    fn translated(&self, light: f64, above: f64, series: f64) -> Option<SingleDiode> {
        let standard = &self.standard;
        let thermal = standard.thermal * (STC_DEGC + ZERO_DEGC_K + above) / (STC_DEGC + ZERO_DEGC_K);
        let full_isc = self.isc * (1.0 + self.isc_per_K * above).max(0.0);
        let voc = self.voc * (1.0 + self.voc_per_K * above);
        // In full sun both ends of the curve give saturation and photocurrent: photo = isc·(1 + G·Rs) + I₀·(e^(isc·Rs/a) − 1)
        // at short circuit, photo = G·voc + I₀·(e^(voc/a) − 1) at open circuit.
        let (short, open) = (libm::expm1(full_isc * series / thermal), libm::expm1(voc / thermal));
        let through_diode = full_isc * (1.0 + standard.leak * series) - standard.leak * voc;
        let saturation = through_diode / (open - short);
        let (isc, leak) = (full_isc * light, standard.leak * light);
        let photo = isc * (1.0 + leak * series) + saturation * libm::expm1(isc * series / thermal);
        (saturation > 0.0 && saturation.is_finite() && photo.is_finite()).then_some(SingleDiode {
            photo,
            saturation,
            series,
            leak,
            thermal,
        })
    }

    /// Series resistance with which the hot curve in full sun gives a power; the nearest end where none does.
    fn series_for(&self, wanted: f64, points: Points) -> f64 {
        let (mut low, mut high) = (0.0, 2.0 * (points.voc - points.vmp) / points.imp);
        for _ in 0..HALVINGS {
            let middle = 0.5 * (low + high);
            let power = self.translated(1.0, TUNED_K, middle).map(|hot| hot.maximum_power());
            // More resistance, less power.
            if power.is_some_and(|power| power > wanted) { low = middle } else { high = middle }
        }
        low
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::{heat_flux_density::watt_per_square_meter, thermodynamic_temperature::degree_celsius};

    use super::*;
    use crate::array::ModuleSheet;
    use crate::array::sample::{module, q, sheet};
    use crate::quantity::{Irradiance, RatioPerTemperature, ThermodynamicTemperature};

    fn conditions(light: f64, celsius: f64) -> Conditions {
        Conditions {
            irradiance: Irradiance::new::<watt_per_square_meter>(light),
            cell: ThermodynamicTemperature::new::<degree_celsius>(celsius),
        }
    }

    fn close(a: f64, b: f64, relative: f64) -> bool {
        (a - b).abs() <= relative * b.abs()
    }

    #[test]
    fn at_standard_conditions_it_is_the_sheet() {
        let (module, points) = (module(), sheet().points);
        let curve = ModuleCurve::of(&module).unwrap();
        for found in [
            curve.at(&Conditions::standard()).unwrap().key_points(),
            module.at(&Conditions::standard()).unwrap(),
        ] {
            assert!(close(found.voc.value, points.voc.value, 1e-9));
            assert!(close(found.isc.value, points.isc.value, 1e-9));
            assert!(close(found.vmp.value, points.vmp.value, 1e-6), "{found:?}");
            assert!(close(found.imp.value, points.imp.value, 1e-6));
        }
        let (standard, again) = (*curve.standard(), curve.at(&Conditions::standard()).unwrap());
        assert!(
            close(again.photo, standard.photo, 1e-12) && close(again.saturation, standard.saturation, 1e-9)
        );
    }

    #[test]
    fn in_full_sun_open_circuit_follows_its_coefficient() {
        let curve = ModuleCurve::of(&module()).unwrap();
        for celsius in [-40.0, -20.0, 0.0, 45.0, 80.0] {
            let found = curve.at(&conditions(1000.0, celsius)).unwrap().key_points();
            assert!(close(found.voc.value, 22.5 * (1.0 - 0.003 * (celsius - 25.0)), 1e-9), "{celsius}");
            assert!(close(found.isc.value, 6.1 * (1.0 + 0.0005 * (celsius - 25.0)), 1e-9), "{celsius}");
        }
    }

    /// Power has its coefficient where the curve is tuned, and nearly so elsewhere.
    #[test]
    fn in_full_sun_power_follows_its_coefficient() {
        // Beside −0.3 %/K of open circuit; the ends are further than sheets go, and cold the resistance ends at 0.
        for (per_K, coldest) in
            [(-0.003, -20.0), (-0.0035, -20.0), (-0.004, -20.0), (-0.0045, 0.0), (-0.005, 10.0)]
        {
            let tuned = ModuleSheet {
                power_coefficient: Some(RatioPerTemperature::new::<per_kelvin>(per_K)),
                ..sheet()
            };
            let curve = ModuleCurve::of(&Module::new(tuned).unwrap()).unwrap();
            let power = |celsius| curve.at(&conditions(1000.0, celsius)).unwrap().key_points().power().value;
            let rated = 18.6 * 5.38;
            assert!(close(power(50.0), rated * (1.0 + per_K * 25.0), 1e-6), "{per_K}");
            for celsius in [coldest, 10.0, 40.0, 60.0, 70.0] {
                assert!(
                    close(power(celsius), rated * (1.0 + per_K * (celsius - 25.0)), 0.01),
                    "{per_K} {celsius}"
                );
            }
        }
    }

    /// Two ways to the same power: one solves the curve, the other knows coefficients and a logarithm only. The lines do not
    /// know that less current drops less in the series resistance: up to 2.7 % in little light.
    #[test]
    fn curve_and_coefficients_tell_nearly_the_same() {
        let module = module();
        let curve = ModuleCurve::of(&module).unwrap();
        for (light, celsius) in
            [(1000.0, 0.0), (1000.0, 50.0), (1000.0, 70.0), (800.0, 45.0), (500.0, 30.0), (200.0, 10.0)]
        {
            let here = conditions(light, celsius);
            let (a, b) = (curve.at(&here).unwrap().key_points(), module.at(&here).unwrap());
            assert!(close(a.power().value, b.power().value, 0.03), "{light} {celsius}: {a:?} {b:?}");
            assert!(close(a.voc.value, b.voc.value, 0.01), "{light} {celsius}: {a:?} {b:?}");
        }
    }

    #[test]
    fn without_light_there_is_no_power() {
        let module = module();
        let curve = ModuleCurve::of(&module).unwrap();
        for points in [
            curve.at(&conditions(0.0, 10.0)).unwrap().key_points(),
            module.at(&conditions(0.0, 10.0)).unwrap(),
        ] {
            assert_eq!((points.voc.value, points.isc.value, points.power().value), (0.0, 0.0, 0.0));
        }
    }

    #[test]
    fn a_sheet_without_cells_and_coefficients_has_a_curve_too() {
        let bare = Module::new(ModuleSheet::plain(sheet().power, sheet().points)).unwrap();
        let full = ModuleCurve::of(&module()).unwrap();
        let power =
            |curve: &ModuleCurve| curve.at(&conditions(400.0, 40.0)).unwrap().key_points().power().value;
        assert!(close(power(&ModuleCurve::of(&bare).unwrap()), power(&full), 0.01));
    }

    #[test]
    fn coefficients_that_leave_no_voltage_are_an_error() {
        let steep = ModuleSheet { voc_coefficient: Some(q("-1 %/K")), ..sheet() };
        let curve = ModuleCurve::of(&Module::new(steep).unwrap()).unwrap();
        assert!(matches!(curve.at(&conditions(1000.0, 140.0)), Err(Error::Contradiction { .. })));
        assert!(curve.at(&conditions(1000.0, 60.0)).is_ok());
    }

    proptest! {
        #[test]
        fn more_light_never_gives_less_power(light in 0.0..1999.0f64, more in 0.0..1.0f64, celsius in -40.0..90.0f64) {
            let curve = ModuleCurve::of(&module()).unwrap();
            let power = |g: f64| curve.at(&conditions(g, celsius)).unwrap().key_points().power().value;
            prop_assert!(power(light + more * (2000.0 - light)) >= power(light) - 1e-9);
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(light: u64, celsius: u64) {
            let here = conditions(f64::from_bits(light), f64::from_bits(celsius));
            let curve = ModuleCurve::of(&module()).unwrap();
            let _ = curve.at(&here).map(|c| c.key_points());
            let _ = module().at(&here);
        }
    }
}
