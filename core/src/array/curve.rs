//! A module's current-voltage curve at any light and temperature, from its sheet.

use uom::si::{electric_current::ampere, electric_potential::volt, temperature_coefficient::per_kelvin};

use super::diode::SingleDiode;
use super::fit::{self, IDEALITY, Points};
use super::module::{Conditions, KeyPoints, Module, STC_DEGC};
use crate::error::Error;

/// Thermal voltage of one cell at 25 °C: k·T/q.
const CELL_THERMAL_V: f64 = 0.025_692_579;
/// Open-circuit voltage of one cell where the sheet does not count them: 0.6 to 0.7 V on sheets of crystalline silicon.
/// Common practice, no source.
const CELL_VOC_V: f64 = 0.63;
/// Coefficient of open-circuit voltage where the sheet gives none, 1/K: crystalline silicon, common practice, no source.
/// For yield only; the coldest morning is never judged by it.
const USUAL_VOC_PER_K: f64 = -0.0031;

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
/// assert_eq!(readable(curve.at(&dull)?.key_points().power()).to_string(), "18.2 W");
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ModuleCurve {
    standard: SingleDiode,
    isc: f64,
    voc: f64,
    isc_per_K: f64,
    voc_per_K: f64,
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
        let cells = sheet.cells.map_or(points.voc / CELL_VOC_V, f64::from);
        let standard = fit::greatest(points, IDEALITY * cells * CELL_THERMAL_V)?;
        Ok(Self {
            standard,
            isc: points.isc,
            voc: points.voc,
            isc_per_K: module.isc_coefficient().0.get::<per_kelvin>(),
            voc_per_K: sheet.voc_coefficient.map_or(USUAL_VOC_PER_K, |c| c.get::<per_kelvin>()),
        })
    }

    /// The curve at standard test conditions.
    pub fn standard(&self) -> &SingleDiode {
        &self.standard
    }

    /// The curve in other light and at another temperature.
    ///
    /// Short-circuit current goes with the light and its coefficient; open-circuit voltage in full sun with its coefficient,
    /// in less light as the diode gives it; the leak goes with the light; the series resistance stays.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for light or temperature outside [`Conditions`].
    pub fn at(&self, conditions: &Conditions) -> Result<SingleDiode, Error> {
        let (light, above) = conditions.relative()?;
        let standard = &self.standard;
        let thermal = standard.thermal * (STC_DEGC + 273.15 + above) / (STC_DEGC + 273.15);
        let full_isc = self.isc * (1.0 + self.isc_per_K * above).max(0.0);
        let voc = (self.voc * (1.0 + self.voc_per_K * above)).max(0.0);
        let leak = standard.leak * light;
        let series = standard.series;
        // In full sun both ends of the curve give saturation and photocurrent: isc = photo − I₀·(…) − leak·isc·Rs.
        let (short, open) = (libm::expm1(full_isc * series / thermal), libm::expm1(voc / thermal));
        let full_leak = standard.leak;
        let saturation = (full_isc * (1.0 + full_leak * series) - full_leak * voc) / (open - short);
        let saturation =
            if saturation > 0.0 && saturation.is_finite() { saturation } else { f64::MIN_POSITIVE };
        let isc = full_isc * light;
        let photo = isc * (1.0 + leak * series) + saturation * libm::expm1(isc * series / thermal);
        Ok(SingleDiode { photo, saturation, series, leak, thermal })
    }
}
