//! The units of the text form, one row a unit.
//!
//! Symbols are written in plain characters; [`fold`] makes `Ω`, `µ`, `²`, `·` and `°` equal to them. Case counts:
//! `mW` and `MW` are a thousand million apart.

use Dimension::*;

/// What a text measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Dimension {
    /// Route or conductor length.
    Length,
    /// Cross-section of a conductor.
    Area,
    /// Electric current.
    Current,
    /// Voltage.
    Voltage,
    /// Power.
    Power,
    /// Energy.
    Energy,
    /// Charge or capacity.
    Charge,
    /// Resistance.
    Resistance,
    /// Resistance per length.
    LinearResistance,
    /// Resistivity.
    Resistivity,
    /// Temperature.
    Temperature,
    /// Temperature difference.
    TemperatureDifference,
    /// Charge rate.
    Rate,
    /// Time.
    Time,
    /// Ratio.
    Ratio,
    /// Plane angle: latitude, tilt.
    Angle,
    /// Power of sunlight on an area.
    Irradiance,
    /// Energy of sunlight on an area.
    Irradiation,
    /// Voltage per temperature difference.
    VoltagePerTemperature,
    /// Ratio per temperature difference.
    RatioPerTemperature,
    /// Volume of air or of fuel in a time.
    VolumeFlow,
    /// Volume of fuel.
    Volume,
    /// Capacitance.
    Capacitance,
}

impl Dimension {
    /// What it is called in a sentence, with its article.
    pub const fn noun(self) -> &'static str {
        match self {
            Length => "a length",
            Area => "a cross-section",
            Current => "a current",
            Voltage => "a voltage",
            Power => "a power",
            Energy => "an energy",
            Charge => "a charge",
            Resistance => "a resistance",
            LinearResistance => "a resistance per length",
            Resistivity => "a resistivity",
            Temperature => "a temperature",
            TemperatureDifference => "a temperature difference",
            Rate => "a charge rate",
            Time => "a time",
            Ratio => "a ratio",
            Angle => "an angle",
            Irradiance => "an irradiance",
            Irradiation => "an irradiation",
            VoltagePerTemperature => "a voltage per kelvin",
            RatioPerTemperature => "a ratio per kelvin",
            VolumeFlow => "a volume in a time",
            Volume => "a volume",
            Capacitance => "a capacitance",
        }
    }

    /// Examples of what is accepted, quoted, for error sentences.
    pub const fn accepted(self) -> &'static str {
        match self {
            Length => "'12 m' or '39 ft'",
            Area => "'16 mm2'",
            Current => "'25 A' or '300 mA'",
            Voltage => "'12 V' or '500 mV'",
            Power => "'800 W' or '1.2 kW'",
            Energy => "'1200 Wh' or '2.4 kWh'",
            Charge => "'100 Ah'",
            Resistance => "'0.5 mohm' or '2 ohm'",
            LinearResistance => "'1.21 ohm/km' or '0.3951 ohm/kft'",
            Resistivity => "'0.01724 ohm.mm2/m'",
            Temperature => "'25 degC' or '77 degF'",
            TemperatureDifference => "'20 K'",
            Rate => "'0.2 /h'",
            Time => "'2.5 h', '90 min' or '0.1 s'",
            Ratio => "'85 %' or '0.85'",
            Angle => "'54.5 deg'",
            Irradiance => "'800 W/m2'",
            Irradiation => "'3.4 kWh/m2'",
            VoltagePerTemperature => "'-5 mV/K'",
            RatioPerTemperature => "'-0.3 %/K'",
            VolumeFlow => "'12 m3/h' or '2.7 L/h'",
            Volume => "'20 L'",
            Capacitance => "'4700 uF'",
        }
    }
}

/// One unit: the value in the base unit is (value + offset) × factor.
pub(super) struct Unit {
    pub symbol: &'static str,
    pub dimension: Dimension,
    pub factor: f64,
    pub offset: f64,
}

const fn unit(symbol: &'static str, dimension: Dimension, factor: f64) -> Unit {
    Unit { symbol, dimension, factor, offset: 0.0 }
}

/// Every unit known here. The first of each dimension with factor 1 is its base unit, that of `uom`.
///
/// Factors are exact by definition: foot and inch by the international yard of 0.9144 m, the rest powers of ten and
/// 3600. 1 Ω per 1000 ft is 1/304.8 Ω/m.
pub(super) const UNITS: &[Unit] = &[
    unit("m", Length, 1.0),
    unit("mm", Length, 1e-3),
    unit("cm", Length, 1e-2),
    unit("km", Length, 1e3),
    unit("ft", Length, 0.3048),
    unit("in", Length, 0.0254),
    unit("m2", Area, 1.0),
    unit("cm2", Area, 1e-4),
    unit("mm2", Area, 1e-6),
    unit("A", Current, 1.0),
    unit("mA", Current, 1e-3),
    unit("kA", Current, 1e3),
    unit("V", Voltage, 1.0),
    unit("mV", Voltage, 1e-3),
    unit("kV", Voltage, 1e3),
    unit("W", Power, 1.0),
    unit("mW", Power, 1e-3),
    unit("kW", Power, 1e3),
    unit("MW", Power, 1e6),
    unit("J", Energy, 1.0),
    unit("kJ", Energy, 1e3),
    unit("MJ", Energy, 1e6),
    unit("Wh", Energy, 3.6e3),
    unit("kWh", Energy, 3.6e6),
    unit("MWh", Energy, 3.6e9),
    unit("As", Charge, 1.0),
    unit("Ah", Charge, 3.6e3),
    unit("mAh", Charge, 3.6),
    unit("ohm", Resistance, 1.0),
    unit("mohm", Resistance, 1e-3),
    unit("uohm", Resistance, 1e-6),
    unit("kohm", Resistance, 1e3),
    unit("ohm/m", LinearResistance, 1.0),
    unit("ohm/km", LinearResistance, 1e-3),
    unit("mohm/m", LinearResistance, 1e-3),
    unit("ohm/kft", LinearResistance, 1.0 / 304.8),
    unit("ohm.m", Resistivity, 1.0),
    unit("ohm.mm2/m", Resistivity, 1e-6),
    unit("K", Temperature, 1.0),
    Unit { symbol: "degC", dimension: Temperature, factor: 1.0, offset: 273.15 },
    Unit { symbol: "degF", dimension: Temperature, factor: 5.0 / 9.0, offset: 459.67 },
    unit("K", TemperatureDifference, 1.0),
    unit("/h", Rate, 1.0),
    unit("s", Time, 1.0),
    unit("ms", Time, 1e-3),
    unit("min", Time, 60.0),
    unit("h", Time, 3.6e3),
    unit("d", Time, 86_400.0),
    unit("", Ratio, 1.0),
    unit("%", Ratio, 1e-2),
    unit("rad", Angle, 1.0),
    unit("deg", Angle, 1.745_329_251_994_329_5e-2),
    unit("W/m2", Irradiance, 1.0),
    unit("kW/m2", Irradiance, 1e3),
    unit("J/m2", Irradiation, 1.0),
    unit("MJ/m2", Irradiation, 1e6),
    unit("Wh/m2", Irradiation, 3.6e3),
    unit("kWh/m2", Irradiation, 3.6e6),
    unit("V/K", VoltagePerTemperature, 1.0),
    unit("mV/K", VoltagePerTemperature, 1e-3),
    unit("/K", RatioPerTemperature, 1.0),
    unit("%/K", RatioPerTemperature, 1e-2),
    unit("m3/s", VolumeFlow, 1.0),
    unit("m3/h", VolumeFlow, 1.0 / 3.6e3),
    unit("L/h", VolumeFlow, 1e-3 / 3.6e3),
    unit("m3", Volume, 1.0),
    unit("L", Volume, 1e-3),
    unit("F", Capacitance, 1.0),
    unit("mF", Capacitance, 1e-3),
    unit("uF", Capacitance, 1e-6),
];

/// The unit of a symbol within one dimension.
pub(super) fn find(symbol: &str, dimension: Dimension) -> Option<&'static Unit> {
    UNITS.iter().find(|unit| unit.dimension == dimension && same(unit.symbol, symbol))
}

/// What a symbol measures, if any dimension knows it.
pub(super) fn noun_of(symbol: &str) -> Option<&'static str> {
    if is_gauge(symbol) || symbol == "kcmil" {
        return Some("a conductor size");
    }
    UNITS.iter().find(|unit| same(unit.symbol, symbol)).map(|unit| unit.dimension.noun())
}

/// `AWG`, in either case: no other unit is near.
pub(super) fn is_gauge(symbol: &str) -> bool {
    symbol.eq_ignore_ascii_case("AWG")
}

/// Whether two symbols are one and the same, however their signs are typed.
pub(super) fn same(a: &str, b: &str) -> bool {
    fold(a).eq(fold(b))
}

fn fold(symbol: &str) -> impl Iterator<Item = char> + '_ {
    symbol.chars().flat_map(|c| {
        let (plain, rest) = match c {
            '\u{3a9}' | '\u{2126}' => ('o', "hm"), // Greek capital omega, ohm sign
            '\u{b5}' | '\u{3bc}' => ('u', ""),     // micro sign, Greek mu
            '°' => ('d', "eg"),
            '²' => ('2', ""),
            '³' => ('3', ""),
            '·' | '⋅' => ('.', ""),
            other => (other, ""),
        };
        core::iter::once(plain).chain(rest.chars())
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_symbol_stands_twice_in_one_dimension() {
        for (i, a) in UNITS.iter().enumerate() {
            for b in &UNITS[i + 1..] {
                assert!(a.dimension != b.dimension || !same(a.symbol, b.symbol), "{}", a.symbol);
            }
        }
    }

    #[test]
    fn each_example_parses_in_its_own_dimension() {
        for unit in UNITS {
            for quoted in unit.dimension.accepted().split('\'').skip(1).step_by(2) {
                let found = super::super::parse_entered(quoted, unit.dimension);
                assert!(found.is_ok(), "{quoted}: {found:?}");
            }
        }
    }

    #[test]
    fn factors_agree_with_uom() {
        use uom::si::angle::degree as deg;
        use uom::si::{
            area::*, capacitance::*, electric_charge::*, electric_current::*, electric_potential::*,
            electrical_resistance::*, electrical_resistivity::*, energy::*, heat_flux_density::*, length::*,
            power::*, radiant_exposure::*, ratio::*, temperature_coefficient::*, time::*, volume::*,
            volume_rate::*,
        };
        use uom::si::{f64::ThermodynamicTemperature, thermodynamic_temperature as tt};
        macro_rules! check {
            ($($symbol:literal $dimension:ident $quantity:ident $unit:ident;)+) => {$(
                for x in [1.0, 39.0, 0.3951, 1e-7, 123456.789] {
                    let unit = find($symbol, $dimension).unwrap();
                    let ours = (x + unit.offset) * unit.factor;
                    let theirs = uom::si::f64::$quantity::new::<$unit>(x).value;
                    assert_eq!(ours.to_bits(), theirs.to_bits(), "{x} {}", $symbol);
                }
            )+};
        }
        check! {
            "mm" Length Length millimeter; "cm" Length Length centimeter; "km" Length Length kilometer;
            "ft" Length Length foot; "in" Length Length inch;
            "cm2" Area Area square_centimeter; "mm2" Area Area square_millimeter;
            "mA" Current ElectricCurrent milliampere; "kA" Current ElectricCurrent kiloampere;
            "mV" Voltage ElectricPotential millivolt; "kV" Voltage ElectricPotential kilovolt;
            "mW" Power Power milliwatt; "kW" Power Power kilowatt; "MW" Power Power megawatt;
            "Wh" Energy Energy watt_hour; "kWh" Energy Energy kilowatt_hour; "MJ" Energy Energy megajoule;
            "Ah" Charge ElectricCharge ampere_hour; "mAh" Charge ElectricCharge milliampere_hour;
            "mΩ" Resistance ElectricalResistance milliohm; "µΩ" Resistance ElectricalResistance microohm;
            "Ω·mm²/m" Resistivity ElectricalResistivity ohm_square_millimeter_per_meter;
            "h" Time Time hour; "min" Time Time minute; "d" Time Time day; "%" Ratio Ratio percent;
            "°" Angle Angle deg;"W/m²" Irradiance HeatFluxDensity watt_per_square_meter;
            "Wh/m²" Irradiation RadiantExposure watt_hour_per_square_meter;
            "/K" RatioPerTemperature TemperatureCoefficient per_kelvin;
            "m³/h" VolumeFlow VolumeRate cubic_meter_per_hour; "L" Volume Volume liter; "µF" Capacitance Capacitance microfarad;
        }
        for x in [-40.0, 0.0, 20.0, 25.0, 77.3, 250.0] {
            let unit = find("°C", Temperature).unwrap();
            let uom = ThermodynamicTemperature::new::<tt::degree_celsius>(x).value;
            assert_eq!(((x + unit.offset) * unit.factor).to_bits(), uom.to_bits(), "{x} °C");
            let unit = find("degF", Temperature).unwrap();
            let uom = ThermodynamicTemperature::new::<tt::degree_fahrenheit>(x).value;
            assert_eq!(((x + unit.offset) * unit.factor).to_bits(), uom.to_bits(), "{x} °F");
        }
    }
}
