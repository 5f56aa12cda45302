//! A photovoltaic module: what its sheet states, and whether that can be.

use uom::si::{
    area::square_meter, electric_current::ampere, electric_potential::volt,
    heat_flux_density::watt_per_square_meter, power::watt, ratio::ratio, temperature_coefficient::per_kelvin,
    thermodynamic_temperature::degree_celsius,
};

use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{
    Area, ElectricCurrent, ElectricPotential, Irradiance, Power, Ratio, RatioPerTemperature,
    ThermodynamicTemperature,
};

/// Irradiance and cell temperature of standard test conditions. Source: IEC 60904-3 (recalled).
pub(super) const STC_W_PER_M2: f64 = 1000.0;
pub(super) const STC_DEGC: f64 = 25.0;

/// Nominal operating cell temperature where the sheet gives none, °C: 45 to 47 on most sheets, the upper counts.
/// Common practice, no source.
pub(super) const USUAL_NOCT_DEGC: f64 = 47.0;
/// Coefficient of the short-circuit current where the sheet gives none, 1/K: crystalline silicon.
/// Common practice, no source.
pub(super) const USUAL_ISC_PER_K: f64 = 0.0005;

/// How far rated power may lie from Vmp·Imp on a sheet whose figures are rounded.
const POWER_TOLERANCE: f64 = 0.05;

// Ranges stand once: the checks and the messages read these.
const VOLTAGE: Allowed = Allowed::AboveUpTo(0.0, 1000.0);
const CURRENT: Allowed = Allowed::AboveUpTo(0.0, 100.0);
const POWER: Allowed = Allowed::AboveUpTo(0.0, 5000.0);
const FALLING: Allowed = Allowed::Between(-0.01, 0.0);
const ISC_COEFFICIENT: Allowed = Allowed::Between(-0.002, 0.003);
const NOCT: Allowed = Allowed::Between(25.0, 80.0);
const FUSE: Allowed = Allowed::AboveUpTo(0.0, 200.0);
const SYSTEM: Allowed = Allowed::AboveUpTo(0.0, 3000.0);
const CELLS: Allowed = Allowed::Between(1.0, 400.0);
const BIFACIAL: Allowed = Allowed::Between(0.0, 0.5);
const AREA: Allowed = Allowed::AboveUpTo(0.0, 10.0);
const CELL_DEGC: Allowed = Allowed::Between(-60.0, 150.0);
const IRRADIANCE: Allowed = Allowed::Between(0.0, 2000.0);

/// The four points of a current-voltage curve that a sheet states.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct KeyPoints {
    /// Open-circuit voltage.
    pub voc: ElectricPotential,
    /// Short-circuit current.
    pub isc: ElectricCurrent,
    /// Voltage at maximum power.
    pub vmp: ElectricPotential,
    /// Current at maximum power.
    pub imp: ElectricCurrent,
}

impl KeyPoints {
    /// Maximum power: Vmp·Imp.
    pub fn power(&self) -> Power {
        self.vmp * self.imp
    }

    /// Fill factor: Vmp·Imp/(Voc·Isc); 0 where there is no light.
    pub fn fill_factor(&self) -> Ratio {
        let whole = self.voc * self.isc;
        if whole.value > 0.0 { self.power() / whole } else { Ratio::new::<ratio>(0.0) }
    }
}

/// Sunlight in the plane of the array and temperature of the cells.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Conditions {
    /// In the plane of the array, 0 … 2000 W/m².
    pub irradiance: Irradiance,
    /// Of the cells, not of the air, −60 … 150 °C.
    pub cell: ThermodynamicTemperature,
}

impl Conditions {
    /// Standard test conditions: 1000 W/m², cells at 25 °C.
    pub fn standard() -> Self {
        Self {
            irradiance: Irradiance::new::<watt_per_square_meter>(STC_W_PER_M2),
            cell: ThermodynamicTemperature::new::<degree_celsius>(STC_DEGC),
        }
    }

    /// Part of 1000 W/m², kelvins above 25 °C.
    pub(super) fn relative(&self) -> Result<(f64, f64), Error> {
        let irradiance = self.irradiance.get::<watt_per_square_meter>();
        let cell = self.cell.get::<degree_celsius>();
        checked("irradiance", irradiance, "W/m2", IRRADIANCE)?;
        checked("cell temperature", cell, "degC", CELL_DEGC)?;
        Ok((irradiance / STC_W_PER_M2, cell - STC_DEGC))
    }
}

/// What a module's sheet states, at standard test conditions (1000 W/m², cells at 25 °C).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ModuleSheet {
    /// Rated power.
    pub power: Power,
    /// Open circuit, short circuit, maximum power.
    pub points: KeyPoints,
    /// Coefficient of the open-circuit voltage, as a ratio; negative.
    pub voc_coefficient: Option<RatioPerTemperature>,
    /// Coefficient of the short-circuit current, as a ratio; positive for crystalline silicon.
    pub isc_coefficient: Option<RatioPerTemperature>,
    /// Coefficient of the maximum power, as a ratio; negative.
    pub power_coefficient: Option<RatioPerTemperature>,
    /// Nominal operating cell temperature.
    pub noct: Option<ThermodynamicTemperature>,
    /// Greatest rating of a fuse in series with the module.
    pub series_fuse: Option<ElectricCurrent>,
    /// Greatest system voltage.
    pub system_voltage: Option<ElectricPotential>,
    /// Cells in series.
    pub cells: Option<u16>,
    /// Current added by light from behind, as a part of the front's; 0 for a module with one face.
    pub bifacial_gain: Ratio,
    /// Area of the module.
    pub area: Option<Area>,
}

impl ModuleSheet {
    /// Power and key points only; everything else not stated, one face.
    ///
    /// ```
    /// use ampwright::array::{KeyPoints, Module, ModuleSheet};
    /// use ampwright::quantity::parse;
    /// let points = KeyPoints {
    ///     voc: parse("22.5 V")?,
    ///     isc: parse("6.1 A")?,
    ///     vmp: parse("18.6 V")?,
    ///     imp: parse("5.38 A")?,
    /// };
    /// let sheet = ModuleSheet { cells: Some(36), ..ModuleSheet::plain(parse("100 W")?, points) };
    /// let module = Module::new(sheet)?;
    /// assert_eq!(module.sheet().cells, Some(36));
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn plain(power: Power, points: KeyPoints) -> Self {
        Self {
            power,
            points,
            voc_coefficient: None,
            isc_coefficient: None,
            power_coefficient: None,
            noct: None,
            series_fuse: None,
            system_voltage: None,
            cells: None,
            bifacial_gain: Ratio::new::<ratio>(0.0),
            area: None,
        }
    }
}

/// A module whose sheet is plausible.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Module {
    sheet: ModuleSheet,
}

impl Module {
    /// A module, if its sheet can be true.
    ///
    /// Maximum power lies below open circuit and short circuit, is within 5 % of Vmp·Imp, and the curve bulges (fill
    /// factor above 0.25, which a resistor has). Coefficients are ratios per kelvin: a sheet's V/K is divided by Voc.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for a value no module has, [`Error::Contradiction`] for values that cannot stand together.
    pub fn new(sheet: ModuleSheet) -> Result<Self, Error> {
        let KeyPoints { voc, isc, vmp, imp } = sheet.points;
        let (voc, isc) = (voc.get::<volt>(), isc.get::<ampere>());
        let (vmp, imp) = (vmp.get::<volt>(), imp.get::<ampere>());
        let power = sheet.power.get::<watt>();
        let coefficient = |c: Option<RatioPerTemperature>| c.map(|c| c.get::<per_kelvin>());
        for (name, value, unit, allowed) in [
            ("power", Some(power), "W", POWER),
            ("voc", Some(voc), "V", VOLTAGE),
            ("isc", Some(isc), "A", CURRENT),
            ("vmp", Some(vmp), "V", VOLTAGE),
            ("imp", Some(imp), "A", CURRENT),
            ("voc_coefficient", coefficient(sheet.voc_coefficient), "/K", FALLING),
            ("isc_coefficient", coefficient(sheet.isc_coefficient), "/K", ISC_COEFFICIENT),
            ("power_coefficient", coefficient(sheet.power_coefficient), "/K", FALLING),
            ("noct", sheet.noct.map(|t| t.get::<degree_celsius>()), "degC", NOCT),
            ("series_fuse", sheet.series_fuse.map(|i| i.get::<ampere>()), "A", FUSE),
            ("system_voltage", sheet.system_voltage.map(|v| v.get::<volt>()), "V", SYSTEM),
            ("cells", sheet.cells.map(f64::from), "", CELLS),
            ("bifacial_gain", Some(sheet.bifacial_gain.get::<ratio>()), "", BIFACIAL),
            ("area", sheet.area.map(|a| a.get::<square_meter>()), "m2", AREA),
        ] {
            if let Some(value) = value {
                checked(name, value, unit, allowed)?;
            }
        }
        let contradiction = |name, value, unit, why| Err(Error::Contradiction { name, value, unit, why });
        if vmp >= voc {
            return contradiction(
                "vmp",
                vmp,
                "V",
                "it must be below voc; look whether the two are exchanged",
            );
        }
        if imp >= isc {
            return contradiction(
                "imp",
                imp,
                "A",
                "it must be below isc; look whether the two are exchanged",
            );
        }
        if (power - vmp * imp).abs() > POWER_TOLERANCE * vmp * imp {
            return contradiction("power", power, "W", "it must be within 5 % of vmp times imp");
        }
        if vmp * imp <= 0.25 * voc * isc {
            let why = "with imp it gives a fill factor that no diode has; look for a misprint";
            return contradiction("vmp", vmp, "V", why);
        }
        if sheet.system_voltage.is_some_and(|most| most.get::<volt>() < voc) {
            return contradiction("voc", voc, "V", "it is above the module's own system_voltage");
        }
        Ok(Self { sheet })
    }

    /// What the sheet states.
    pub fn sheet(&self) -> &ModuleSheet {
        &self.sheet
    }

    /// Nominal operating cell temperature: stated, else 47 °C, common practice.
    pub fn noct(&self) -> (ThermodynamicTemperature, Citation) {
        match self.sheet.noct {
            Some(stated) => (stated, SHEET),
            None => (ThermodynamicTemperature::new::<degree_celsius>(USUAL_NOCT_DEGC), PRACTICE),
        }
    }

    /// Coefficient of the short-circuit current: stated, else +0.05 %/K, common practice.
    pub fn isc_coefficient(&self) -> (RatioPerTemperature, Citation) {
        match self.sheet.isc_coefficient {
            Some(stated) => (stated, SHEET),
            None => (RatioPerTemperature::new::<per_kelvin>(USUAL_ISC_PER_K), PRACTICE),
        }
    }

    /// Coefficient of the voltage at maximum power, if the sheet allows to know it.
    ///
    /// From the coefficient of power less that of current; without it, as many volts per kelvin as open circuit has.
    pub fn vmp_coefficient(&self) -> Option<RatioPerTemperature> {
        let alpha = self.isc_coefficient().0;
        match (self.sheet.power_coefficient, self.sheet.voc_coefficient) {
            (Some(power), _) => Some(power - alpha),
            (None, Some(voc)) => Some(voc * (self.sheet.points.voc / self.sheet.points.vmp)),
            (None, None) => None,
        }
    }

    /// Current with the light from behind, as a multiple of the front's: 1 + bifacial gain.
    pub fn rear_factor(&self) -> f64 {
        1.0 + self.sheet.bifacial_gain.get::<ratio>()
    }
}

/// Source of what the maker states.
pub(super) const SHEET: Citation = Citation::new("the module's sheet", "", Seen::Stated);
pub(super) const PRACTICE: Citation = Citation::new("common practice, no source", "", Seen::Practice);

/// Refuses a value outside its range; written so that NaN fails.
pub(super) fn checked(
    name: &'static str,
    value: f64,
    unit: &'static str,
    allowed: Allowed,
) -> Result<(), Error> {
    let held = match allowed {
        Allowed::Between(least, most) => value >= least && value <= most,
        Allowed::AboveUpTo(least, most) => value > least && value <= most,
        Allowed::Above(least) => value > least && value <= f64::MAX,
        Allowed::AtLeast(least) => value >= least && value <= f64::MAX,
        _ => value.is_finite(),
    };
    if held { Ok(()) } else { Err(Error::OutOfRange { name, value, unit, allowed }) }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use proptest::prelude::*;

    use super::*;
    use crate::array::sample::{q, sheet};

    fn refused(change: impl Fn(&mut ModuleSheet)) -> std::string::String {
        let mut changed = sheet();
        change(&mut changed);
        Module::new(changed).unwrap_err().to_string()
    }

    #[test]
    fn what_cannot_be_true_together_is_named() {
        assert!(Module::new(sheet()).is_ok());
        assert_eq!(
            refused(|s| core::mem::swap(&mut s.points.voc, &mut s.points.vmp)),
            "vmp is 22.5 V; it must be below voc; look whether the two are exchanged"
        );
        assert_eq!(
            refused(|s| core::mem::swap(&mut s.points.isc, &mut s.points.imp)),
            "imp is 6.1 A; it must be below isc; look whether the two are exchanged"
        );
        // 5 % of 100.07 W.
        assert_eq!(
            refused(|s| s.power = q("105.1 W")),
            "power is 105.1 W; it must be within 5 % of vmp times imp"
        );
        assert_eq!(refused(|s| s.power = q("95 W")), "power is 95 W; it must be within 5 % of vmp times imp");
        let mut edge = sheet();
        edge.power = q("105 W");
        assert!(Module::new(edge).is_ok());
        assert_eq!(
            refused(|s| (s.points.vmp, s.power) = (q("6 V"), q("32.28 W"))),
            "vmp is 6 V; with imp it gives a fill factor that no diode has; look for a misprint"
        );
        assert_eq!(
            refused(|s| s.system_voltage = Some(q("20 V"))),
            "voc is 22.5 V; it is above the module's own system_voltage"
        );
    }

    #[test]
    fn a_coefficient_per_volt_or_in_percent_is_out_of_range() {
        // −0.3 %/K entered as −0.3 /K.
        assert_eq!(
            refused(|s| s.voc_coefficient = Some(q("-0.3 /K"))),
            "voc_coefficient is -0.3 /K; it must be between -0.01 and 0"
        );
        assert_eq!(
            refused(|s| s.power_coefficient = Some(q("0.4 %/K"))),
            "power_coefficient is 0.004 /K; it must be between -0.01 and 0"
        );
        assert!(refused(|s| s.bifacial_gain = q("70 %")).starts_with("bifacial_gain is 0.7"));
        assert!(refused(|s| s.cells = Some(0)).starts_with("cells is 0"));
    }

    #[test]
    fn the_voltage_at_maximum_power_has_its_coefficient_from_power_or_from_open_circuit() {
        let of = |sheet| Module::new(sheet).unwrap().vmp_coefficient().map(|c| c.get::<per_kelvin>());
        assert!((of(sheet()).unwrap() - (-0.004 - 0.0005)).abs() < 1e-15);
        // As many volts per kelvin as open circuit: −0.3 % of 22.5 V.
        let without = ModuleSheet { power_coefficient: None, ..sheet() };
        assert!((of(without).unwrap() * 18.6 - (-0.003 * 22.5)).abs() < 1e-15);
        assert_eq!(of(ModuleSheet { voc_coefficient: None, ..without }), None);
    }

    #[test]
    fn what_is_not_stated_is_named_as_practice() {
        let bare = Module::new(ModuleSheet::plain(sheet().power, sheet().points)).unwrap();
        assert_eq!((bare.noct().1.seen, bare.isc_coefficient().1.seen), (Seen::Practice, Seen::Practice));
        let full = Module::new(sheet()).unwrap();
        assert_eq!((full.noct().1.seen, full.isc_coefficient().1.seen), (Seen::Stated, Seen::Stated));
    }

    proptest! {
        #[test]
        fn any_bits_are_a_module_or_an_error(bits in prop::array::uniform9(any::<u64>())) {
            let [a, b, c, d, e, f, g, h, i] = bits.map(f64::from_bits);
            let points = KeyPoints {
                voc: ElectricPotential::new::<volt>(a),
                isc: ElectricCurrent::new::<ampere>(b),
                vmp: ElectricPotential::new::<volt>(c),
                imp: ElectricCurrent::new::<ampere>(d),
            };
            let sheet = ModuleSheet {
                voc_coefficient: Some(RatioPerTemperature::new::<per_kelvin>(f)),
                noct: Some(ThermodynamicTemperature::new::<degree_celsius>(g)),
                series_fuse: Some(ElectricCurrent::new::<ampere>(h)),
                bifacial_gain: Ratio::new::<ratio>(i),
                ..ModuleSheet::plain(Power::new::<watt>(e), points)
            };
            prop_assert!(Module::new(sheet).is_err(), "random bits are no plausible module");
        }
    }
}
