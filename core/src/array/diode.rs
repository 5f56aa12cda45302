//! The single-diode model of a cell, module or string, without special functions.
//!
//! Everything is explicit in the voltage behind the series resistance, u = V + I·Rs:
//! I(u) = Iph − I₀·(e^(u/a) − 1) − G·u and V(u) = u − I(u)·Rs, with a = n·Ns·k·T/q. V rises and I falls with u, so a
//! voltage or a current is found by Newton steps from the right-hand side, where convex functions let them never
//! overshoot; the steps are counted and bounded.

use uom::si::{
    electric_current::ampere, electric_potential::volt, electrical_resistance::ohm,
    thermodynamic_temperature::degree_celsius,
};

use super::module::{KeyPoints, checked};
use crate::error::{Allowed, Error};
use crate::quantity::{
    ElectricCurrent, ElectricPotential, ElectricalResistance, Ratio, ThermodynamicTemperature,
};

/// Boltzmann constant, J/K, and elementary charge, C: exact, SI brochure, 9th edition (recalled).
const BOLTZMANN: f64 = 1.380_649e-23;
const CHARGE: f64 = 1.602_176_634e-19;

/// 0 °C in kelvin: exact by definition.
pub(super) const ZERO_DEGC_K: f64 = 273.15;

const STEPS: u32 = 100;

/// n·Ns·k·T/q: the voltage over which a diode's current changes by a factor e, for all cells in series.
///
/// # Errors
/// [`Error::OutOfRange`] unless the ideality times the cells is above 0 and the temperature −60 … 150 °C.
///
/// ```
/// use ampwright::{array::thermal_voltage, quantity::{parse, readable}};
/// let one = thermal_voltage(parse("1")?, parse("25 degC")?)?;
/// assert_eq!(readable(one).to_string(), "25.7 mV");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn thermal_voltage(
    ideality_times_cells: Ratio,
    cell: ThermodynamicTemperature,
) -> Result<ElectricPotential, Error> {
    checked("ideality times cells", ideality_times_cells.value, "", Allowed::AboveUpTo(0.0, 10_000.0))?;
    let celsius = cell.get::<degree_celsius>();
    checked("cell temperature", celsius, "degC", Allowed::Between(-60.0, 150.0))?;
    Ok(ElectricPotential::new::<volt>(thermal_volts(ideality_times_cells.value, celsius)))
}

pub(super) fn thermal_volts(ideality_times_cells: f64, celsius: f64) -> f64 {
    ideality_times_cells * BOLTZMANN * (celsius + ZERO_DEGC_K) / CHARGE
}

/// The five parameters of a single-diode curve.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DiodeParameters {
    /// Light-generated current, 0 or more.
    pub photocurrent: ElectricCurrent,
    /// Saturation current of the diode, above 0.
    pub saturation: ElectricCurrent,
    /// Series resistance, 0 or more.
    pub series: ElectricalResistance,
    /// Shunt resistance, above 0; `None` without leak.
    pub shunt: Option<ElectricalResistance>,
    /// n·Ns·k·T/q, above 0: see [`thermal_voltage()`].
    pub thermal: ElectricPotential,
}

/// A single-diode current-voltage curve.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SingleDiode {
    /// Iph, A.
    pub(super) photo: f64,
    /// I₀, A.
    pub(super) saturation: f64,
    /// Rs, Ω.
    pub(super) series: f64,
    /// 1/Rsh, S.
    pub(super) leak: f64,
    /// n·Ns·k·T/q, V.
    pub(super) thermal: f64,
}

impl SingleDiode {
    /// A curve of given parameters.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where a parameter is not finite or has no physical sense.
    ///
    /// # Example
    /// A cell of 100 cm² in full sun:
    /// ```
    /// use ampwright::array::{DiodeParameters, SingleDiode};
    /// use ampwright::quantity::{parse, readable};
    /// let cell = SingleDiode::new(DiodeParameters {
    ///     photocurrent: parse("4 A")?,
    ///     saturation: parse("0.0000001 mA")?,
    ///     series: parse("0 ohm")?,
    ///     shunt: None,
    ///     thermal: parse("25.7 mV")?,
    /// })?;
    /// assert_eq!(readable(cell.open_circuit_voltage()).to_string(), "627 mV");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn new(parameters: DiodeParameters) -> Result<Self, Error> {
        let photo = parameters.photocurrent.get::<ampere>();
        let saturation = parameters.saturation.get::<ampere>();
        let series = parameters.series.get::<ohm>();
        let shunt = parameters.shunt.map(|r| r.get::<ohm>());
        let thermal = parameters.thermal.get::<volt>();
        checked("photocurrent", photo, "A", Allowed::Between(0.0, 1e4))?;
        checked("saturation current", saturation, "A", Allowed::AboveUpTo(0.0, 1e4))?;
        checked("series resistance", series, "ohm", Allowed::Between(0.0, 1e6))?;
        if let Some(shunt) = shunt {
            checked("shunt resistance", shunt, "ohm", Allowed::AboveUpTo(0.0, 1e12))?;
        }
        checked("thermal voltage", thermal, "V", Allowed::AboveUpTo(0.0, 1e3))?;
        Ok(Self { photo, saturation, series, leak: shunt.map_or(0.0, |r| 1.0 / r), thermal })
    }

    /// The parameters.
    pub fn parameters(&self) -> DiodeParameters {
        DiodeParameters {
            photocurrent: ElectricCurrent::new::<ampere>(self.photo),
            saturation: ElectricCurrent::new::<ampere>(self.saturation),
            series: ElectricalResistance::new::<ohm>(self.series),
            shunt: (self.leak > 0.0).then(|| ElectricalResistance::new::<ohm>(1.0 / self.leak)),
            thermal: ElectricPotential::new::<volt>(self.thermal),
        }
    }

    /// Current at a voltage; negative above open circuit.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for a voltage that is not finite or beyond ±1 MV.
    pub fn current(&self, voltage: ElectricPotential) -> Result<ElectricCurrent, Error> {
        let volts = voltage.get::<volt>();
        checked("voltage", volts, "V", Allowed::Between(-1e6, 1e6))?;
        Ok(ElectricCurrent::new::<ampere>(self.current_at(volts)))
    }

    /// Voltage at a current; negative above short circuit, if the shunt lets it flow.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for a current that is not finite, or that the curve never carries.
    pub fn voltage(&self, current: ElectricCurrent) -> Result<ElectricPotential, Error> {
        let amps = current.get::<ampere>();
        checked("current", amps, "A", Allowed::Between(-1e6, 1e6))?;
        let allowed = Allowed::Words("less than what the light gives, since no shunt resistance is stated");
        let volts = self.voltage_at(amps).ok_or(Error::OutOfRange {
            name: "current",
            value: amps,
            unit: "A",
            allowed,
        })?;
        Ok(ElectricPotential::new::<volt>(volts))
    }

    /// Voltage without load.
    pub fn open_circuit_voltage(&self) -> ElectricPotential {
        ElectricPotential::new::<volt>(self.junction_at_current(0.0).unwrap_or(0.0))
    }

    /// Current at no voltage.
    pub fn short_circuit_current(&self) -> ElectricCurrent {
        ElectricCurrent::new::<ampere>(self.current_at(0.0))
    }

    /// Open circuit, short circuit and maximum power.
    pub fn key_points(&self) -> KeyPoints {
        let (vmp, imp) = self.maximum();
        KeyPoints {
            voc: self.open_circuit_voltage(),
            isc: self.short_circuit_current(),
            vmp: ElectricPotential::new::<volt>(vmp),
            imp: ElectricCurrent::new::<ampere>(imp),
        }
    }

    /// Strings of this curve: so many in series, so many of these in parallel, all alike.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for a count of 0.
    pub fn array(&self, in_series: u16, in_parallel: u16) -> Result<Self, Error> {
        let (series, parallel) = (f64::from(in_series), f64::from(in_parallel));
        checked("modules in series", series, "", Allowed::AtLeast(1.0))?;
        checked("strings in parallel", parallel, "", Allowed::AtLeast(1.0))?;
        Ok(Self {
            photo: self.photo * parallel,
            saturation: self.saturation * parallel,
            series: self.series * series / parallel,
            leak: self.leak * parallel / series,
            thermal: self.thermal * series,
        })
    }

    /// Current that leaves the junction at u.
    fn junction_current(&self, u: f64) -> f64 {
        self.photo - self.saturation * libm::expm1(u / self.thermal) - self.leak * u
    }

    /// −dI/du.
    fn slope(&self, u: f64) -> f64 {
        self.saturation / self.thermal * libm::exp(u / self.thermal) + self.leak
    }

    /// Current at a voltage, A and V; any finite voltage.
    pub(super) fn current_at(&self, volts: f64) -> f64 {
        self.junction_current(self.junction_at_voltage(volts))
    }

    /// u at a voltage: root of u + Rs·(I₀·(e^(u/a) − 1) + G·u) = V + Rs·Iph, rising and convex.
    fn junction_at_voltage(&self, volts: f64) -> f64 {
        let target = volts + self.series * self.photo;
        self.rising_root(target, 1.0 + self.series * self.leak, self.series * self.saturation)
    }

    /// u at a current: root of G·u + I₀·(e^(u/a) − 1) = Iph − I, rising and convex; `None` where it has none.
    fn junction_at_current(&self, amps: f64) -> Option<f64> {
        let target = self.photo - amps;
        // Without a leak the diode blocks all but its saturation current.
        if self.leak == 0.0 && target <= -self.saturation {
            return None;
        }
        Some(self.rising_root(target, self.leak, self.saturation))
    }

    pub(super) fn voltage_at(&self, amps: f64) -> Option<f64> {
        self.junction_at_current(amps).map(|u| u - amps * self.series)
    }

    /// Root u of slope·u + scale·(e^(u/a) − 1) = target; slope, scale ≥ 0, not both 0.
    fn rising_root(&self, target: f64, slope: f64, scale: f64) -> f64 {
        let a = self.thermal;
        if target == 0.0 {
            return 0.0;
        }
        // A bound to the right of the root, from which Newton steps only go left.
        let mut u = if target < 0.0 {
            0.0
        } else {
            let by_exponential = if scale > 0.0 { a * libm::log1p(target / scale) } else { f64::INFINITY };
            let by_line = if slope > 0.0 { target / slope } else { f64::INFINITY };
            by_exponential.min(by_line)
        };
        for _ in 0..STEPS {
            let over = slope * u + scale * libm::expm1(u / a) - target;
            let steep = slope + scale / a * libm::exp(u / a);
            let step = over / steep;
            if step.is_nan() || step <= 0.0 || u - step == u {
                break;
            }
            u -= step;
        }
        u
    }

    pub(super) fn maximum_power(&self) -> f64 {
        let (volts, amps) = self.maximum();
        volts * amps
    }

    /// Voltage and current at maximum power.
    fn maximum(&self) -> (f64, f64) {
        // dP/du = I·V' + V·I', with V' = 1 + Rs·s, I' = −s: falls from + to − on 0 … Voc.
        let gain = |u: f64| {
            let (i, s) = (self.junction_current(u), self.slope(u));
            let v = u - i * self.series;
            i * (1.0 + self.series * s) - v * s
        };
        let (mut low, mut high) = (0.0, self.junction_at_current(0.0).unwrap_or(0.0));
        for _ in 0..STEPS {
            let middle = 0.5 * (low + high);
            if middle <= low || middle >= high {
                break;
            }
            if gain(middle) > 0.0 { low = middle } else { high = middle }
        }
        let i = self.junction_current(low);
        ((low - i * self.series).max(0.0), i.max(0.0))
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use proptest::prelude::*;

    use super::*;

    fn curve(photo: f64, saturation: f64, series: f64, leak: f64, thermal: f64) -> SingleDiode {
        SingleDiode { photo, saturation, series, leak, thermal }
    }

    prop_compose! {
        /// From a cell in dim light to an array of hundreds of modules.
        fn any_curve()(
            photo in 0.0..200.0f64,
            saturation in -14.0..-3.0f64,
            series in -6.0..1.0f64,
            leak in -9.0..0.0f64,
            thermal in 0.02..40.0f64,
        ) -> SingleDiode {
            let ten = |x: f64| libm::pow(10.0, x);
            curve(photo, ten(saturation), ten(series), ten(leak), thermal)
        }
    }

    proptest! {
        #[test]
        fn the_current_solves_the_implicit_equation(c in any_curve(), part in -2.0..1.5f64) {
            let volts = part * c.open_circuit_voltage().value;
            let i = c.current_at(volts);
            let u = volts + i * c.series;
            let right = c.photo - c.saturation * libm::expm1(u / c.thermal) - c.leak * u;
            // What the last bit of u moves on the right side, and the last bit of each term.
            let bits = (u.abs() + volts.abs() + c.series * c.photo) * c.slope(u) + c.photo + i.abs();
            prop_assert!((i - right).abs() <= 1e-13 * (1.0 + c.series * c.slope(u)) * bits, "{i} {right}");
        }

        #[test]
        fn voltage_and_current_are_inverse(c in any_curve(), part in 0.0..1.2f64) {
            let volts = part * c.open_circuit_voltage().value;
            let amps = c.current_at(volts);
            let back = c.voltage_at(amps).unwrap();
            // A flat curve tells little about its voltage: the last bit of the current over the slope.
            let slope = c.slope(volts + amps * c.series);
            let bits = volts.abs() + c.series * (c.photo + amps.abs()) + (c.photo + amps.abs()) / slope;
            prop_assert!((back - volts).abs() <= 1e-12 * bits, "{back} {volts}");
        }

        #[test]
        fn current_falls_with_voltage_and_no_point_beats_the_maximum(c in any_curve()) {
            let points = c.key_points();
            let voc = points.voc.value;
            let mut last = f64::INFINITY;
            for k in 0..=200 {
                let volts = voc * f64::from(k) / 200.0;
                let amps = c.current_at(volts);
                prop_assert!(amps <= last + 1e-12 * c.photo);
                last = amps;
                prop_assert!(volts * amps <= points.power().value * (1.0 + 1e-9) + 1e-12, "{volts} V");
            }
            prop_assert!(points.vmp <= points.voc && points.imp.value <= points.isc.value + 1e-12 * c.photo);
        }

        #[test]
        fn an_array_is_so_many_volts_and_amperes_more(c in any_curve(), n in 1..40u16, m in 1..40u16) {
            let (one, all) = (c.key_points(), c.array(n, m).unwrap().key_points());
            let (n, m) = (f64::from(n), f64::from(m));
            prop_assert!((all.voc.value - n * one.voc.value).abs() <= 1e-9 * all.voc.value);
            prop_assert!((all.isc.value - m * one.isc.value).abs() <= 1e-9 * all.isc.value);
            prop_assert!((all.power().value - n * m * one.power().value).abs() <= 1e-9 * all.power().value);
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(a: u64, b: u64, c: u64, d: u64, e: u64, v: u64) {
            let f = f64::from_bits;
            let made = SingleDiode::new(DiodeParameters {
                photocurrent: ElectricCurrent::new::<ampere>(f(a)),
                saturation: ElectricCurrent::new::<ampere>(f(b)),
                series: ElectricalResistance::new::<ohm>(f(c)),
                shunt: Some(ElectricalResistance::new::<ohm>(f(d))),
                thermal: ElectricPotential::new::<volt>(f(e)),
            });
            if let Ok(curve) = made {
                let _ = curve.key_points();
                let _ = curve.current(ElectricPotential::new::<volt>(f(v)));
                let _ = curve.voltage(ElectricCurrent::new::<ampere>(f(v)));
            }
        }
    }

    /// Without losses open circuit is a·ln(1 + Iph/I₀), in closed form.
    #[test]
    fn open_circuit_of_an_ideal_diode_is_a_logarithm() {
        for photo in [1e-6, 0.1, 4.0, 13.0] {
            let voc = curve(photo, 1e-10, 0.0, 0.0, 0.0257).open_circuit_voltage().value;
            assert!((voc - 0.0257 * libm::log1p(photo / 1e-10)).abs() < 1e-15);
        }
    }

    #[test]
    fn in_the_dark_there_is_nothing() {
        let points = curve(0.0, 1e-9, 0.3, 0.0, 1.0).key_points();
        assert_eq!((points.voc.value, points.isc.value, points.power().value), (0.0, 0.0, 0.0));
        assert_eq!(points.fill_factor().value, 0.0);
    }

    #[test]
    fn a_diode_without_leak_blocks_what_the_light_does_not_give() {
        let c = curve(5.0, 1e-9, 0.3, 0.0, 1.0);
        assert_eq!(
            c.voltage(ElectricCurrent::new::<ampere>(5.1)).unwrap_err().to_string(),
            "current is 5.1 A; it must be less than what the light gives, since no shunt resistance is stated"
        );
        assert!(c.voltage(ElectricCurrent::new::<ampere>(f64::NAN)).is_err());
        assert!(c.current(ElectricPotential::new::<volt>(f64::INFINITY)).is_err());
    }

    #[test]
    fn parameters_come_back() {
        let c = curve(5.0, 1e-9, 0.3, 0.004, 1.0);
        assert_eq!(SingleDiode::new(c.parameters()), Ok(c));
        assert!(c.array(0, 1).is_err() && c.array(1, 0).is_err());
    }
}
