//! The readable printer: a fitting prefix, three to four significant digits, no trailing zeros.
//!
//! Three digits, four where the first is a 1, so that the last digit printed stands for 0.1 to 1 % of the whole.

use core::fmt::{self, Write as _};

use arrayvec::ArrayString;

use super::text::Textual;
use super::unit::{Dimension, Unit, find};

/// Prints readable, honest digits: see [`readable`].
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Readable<Q>(pub Q);

/// Readable printer: picks mV or V, mΩ or Ω, W or kW; temperatures in °C; 3 to 4 significant digits.
///
/// ```
/// use ampwright::quantity::{ElectricPotential, ThermodynamicTemperature, parse, readable};
/// assert_eq!(readable(parse::<ElectricPotential>("0.64655 V")?).to_string(), "647 mV");
/// assert_eq!(readable(parse::<ThermodynamicTemperature>("77 degF")?).to_string(), "25 degC");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn readable<Q: Textual>(quantity: Q) -> Readable<Q> {
    Readable(quantity)
}

impl<Q: Textual> fmt::Display for Readable<Q> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let base = self.0.base();
        let Some(unit) = fitting(base, Q::DIMENSION) else { return digits(f, base, 6) };
        let most_decimals = if Q::DIMENSION == Dimension::Temperature { 1 } else { 6 };
        digits(f, base / unit.factor - unit.offset, most_decimals)?;
        match unit.symbol.split_once("ohm") {
            Some((before, after)) => write!(f, " {}Ω{after}", if before == "u" { "µ" } else { before }),
            None if unit.symbol.is_empty() => Ok(()),
            None => write!(f, " {}", unit.symbol),
        }
    }
}

/// The units to choose from, least first, and the one for nought, NaN and infinity.
const fn ladder(dimension: Dimension) -> (&'static str, &'static [&'static str]) {
    match dimension {
        Dimension::Length => ("m", &["mm", "m", "km"]),
        Dimension::Area => ("mm2", &["mm2"]),
        Dimension::Current => ("A", &["mA", "A", "kA"]),
        Dimension::Voltage => ("V", &["mV", "V", "kV"]),
        Dimension::Power => ("W", &["mW", "W", "kW", "MW"]),
        Dimension::Energy => ("Wh", &["Wh", "kWh", "MWh"]),
        Dimension::Charge => ("Ah", &["mAh", "Ah"]),
        Dimension::Resistance => ("ohm", &["uohm", "mohm", "ohm", "kohm"]),
        Dimension::LinearResistance => ("ohm/km", &["ohm/km"]),
        Dimension::Resistivity => ("ohm.mm2/m", &["ohm.mm2/m"]),
        Dimension::Temperature => ("degC", &["degC"]),
        Dimension::TemperatureDifference => ("K", &["K"]),
        Dimension::Rate => ("/h", &["/h"]),
        Dimension::Time => ("s", &["ms", "s", "min", "h", "d"]),
        Dimension::Ratio => ("", &[""]),
        Dimension::Angle => ("deg", &["deg"]),
        Dimension::Irradiance => ("W/m2", &["W/m2"]),
        Dimension::Irradiation => ("kWh/m2", &["kWh/m2"]),
        Dimension::VoltagePerTemperature => ("mV/K", &["mV/K", "V/K"]),
        Dimension::RatioPerTemperature => ("%/K", &["%/K"]),
        Dimension::VolumeFlow => ("m3/h", &["m3/h"]),
        Dimension::Volume => ("L", &["L", "m3"]),
        Dimension::Capacitance => ("uF", &["uF", "mF", "F"]),
    }
}

/// The largest unit in which the value is at least 1, or the least there is.
fn fitting(base: f64, dimension: Dimension) -> Option<&'static Unit> {
    let (nought, symbols) = ladder(dimension);
    if base == 0.0 || !base.is_finite() {
        return find(nought, dimension);
    }
    let units = || symbols.iter().filter_map(|symbol| find(symbol, dimension));
    // 0.9995 is printed as 1.
    units().rfind(|unit| (base / unit.factor).abs() >= 0.9995).or_else(|| units().next())
}

/// Three significant digits, four where the first is a 1; whole digits are never rounded away.
fn digits(f: &mut fmt::Formatter<'_>, value: f64, most_decimals: usize) -> fmt::Result {
    let magnitude = value.abs();
    if !value.is_finite() || magnitude >= 1e7 || (magnitude < 1e-3 && magnitude > 0.0 && most_decimals > 1) {
        return write!(f, "{value:.2e}");
    }
    let (mut decimals, mut step) = (0, 199.95);
    while magnitude < step && decimals < most_decimals {
        step /= 10.0;
        decimals += 1;
    }
    // Sign, seven digits, point and six digits fit.
    let mut text = ArrayString::<24>::new();
    write!(text, "{value:.decimals$}")?;
    let text =
        if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.') } else { text.as_str() };
    f.write_str(if text == "-0" { "0" } else { text })
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use proptest::prelude::*;

    use super::super::*;
    use super::*;

    fn printed<Q: Textual>(text: &str) -> std::string::String {
        readable(parse::<Q>(text).unwrap()).to_string()
    }

    #[test]
    fn digits_are_honest_and_units_fit() {
        assert_eq!(printed::<ElectricCurrent>("66.66666 A"), "66.7 A");
        assert_eq!(printed::<ElectricCurrent>("104.1666 A"), "104.2 A");
        assert_eq!(printed::<ElectricCurrent>("199.97 A"), "200 A");
        assert_eq!(printed::<ElectricCurrent>("0.9996 A"), "1 A");
        assert_eq!(printed::<ElectricCurrent>("-0.0 A"), "0 A");
        assert_eq!(printed::<ElectricPotential>("24 V"), "24 V");
        assert_eq!(printed::<ElectricPotential>("0.0123 V"), "12.3 mV");
        assert_eq!(printed::<Power>("1066 W"), "1.066 kW");
        assert_eq!(printed::<Power>("800 W"), "800 W");
        assert_eq!(printed::<ElectricalResistance>("0.00055 ohm"), "550 µΩ");
        assert_eq!(printed::<ElectricalResistance>("12.34 mohm"), "12.34 mΩ");
        assert_eq!(printed::<Area>("16 mm2"), "16 mm2");
        assert_eq!(printed::<ThermodynamicTemperature>("-12.5 degC"), "-12.5 degC");
        assert_eq!(printed::<ThermodynamicTemperature>("20 degC"), "20 degC");
        assert_eq!(printed::<ThermodynamicTemperature>("0 degC"), "0 degC");
        assert_eq!(printed::<ThermodynamicTemperature>("0.0001 degC"), "0 degC");
        assert_eq!(printed::<TemperatureInterval>("20 K"), "20 K");
        assert_eq!(printed::<Energy>("2.4 kWh"), "2.4 kWh");
        assert_eq!(printed::<Ratio>("85 %"), "0.85");
        assert_eq!(printed::<ChargeRate>("0.2 /h"), "0.2 /h");
        assert_eq!(printed::<Time>("90 min"), "1.5 h");
        assert_eq!(printed::<Power>("1e300 W"), "1.00e294 MW");
        assert_eq!(readable(Power::new::<uom::si::power::watt>(f64::NAN)).to_string(), "NaN W");
    }

    proptest! {
        #[test]
        fn a_reader_is_within_one_half_per_cent(value in prop_oneof![1e-3..1.0f64, 1.0..1e5f64]) {
            for negative in [1.0, -1.0] {
                let quantity = ElectricPotential::from_base(value * negative).unwrap();
                let again: ElectricPotential = parse(&readable(quantity).to_string()).unwrap();
                prop_assert!((again.value / quantity.value - 1.0).abs() <= 0.00251, "{}", readable(quantity));
            }
        }
    }
}
