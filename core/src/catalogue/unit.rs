//! The units of declarations, one row a unit: type in `uom`, symbol, suffix of a plain number's name.
//!
//! `uom` gives its symbols through functions; declarations need them inside constants and documentation.

/// `unit!(kind meter)` is the type, `unit!(symbol meter)` is `"m"`, `unit!(suffix meter)` is the suffix.
macro_rules! unit {
    ($want:ident meter) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::length::meter, "m", "m")
    };
    ($want:ident square_millimeter) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::area::square_millimeter, "mm²", "mm2")
    };
    ($want:ident ampere) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::electric_current::ampere, "A", "A")
    };
    ($want:ident volt) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::electric_potential::volt, "V", "V")
    };
    ($want:ident watt) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::power::watt, "W", "W")
    };
    ($want:ident watt_hour) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::energy::watt_hour, "Wh", "Wh")
    };
    ($want:ident ampere_hour) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::electric_charge::ampere_hour, "Ah", "Ah")
    };
    ($want:ident ohm) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::electrical_resistance::ohm, "Ω", "ohm")
    };
    ($want:ident ohm_meter) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::electrical_resistivity::ohm_meter, "Ω·m", "ohm_m")
    };
    ($want:ident degree_celsius) => {
        $crate::catalogue::unit::pick!(
            $want,
            ::uom::si::thermodynamic_temperature::degree_celsius,
            "°C",
            "degC"
        )
    };
    ($want:ident hour) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::time::hour, "h", "h")
    };
    ($want:ident day) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::time::day, "d", "d")
    };
    ($want:ident second) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::time::second, "s", "s")
    };
    ($want:ident ratio) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::ratio::ratio, "", "ratio")
    };
    ($want:ident degree) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::angle::degree, "°", "deg")
    };
    ($want:ident watt_per_square_meter) => {
        $crate::catalogue::unit::pick!(
            $want,
            ::uom::si::heat_flux_density::watt_per_square_meter,
            "W/m²",
            "W_per_m2"
        )
    };
    ($want:ident watt_hour_per_square_meter) => {
        $crate::catalogue::unit::pick!(
            $want,
            ::uom::si::radiant_exposure::watt_hour_per_square_meter,
            "Wh/m²",
            "Wh_per_m2"
        )
    };
    ($want:ident per_kelvin) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::temperature_coefficient::per_kelvin, "/K", "per_K")
    };
    ($want:ident cubic_meter_per_hour) => {
        $crate::catalogue::unit::pick!(
            $want,
            ::uom::si::volume_rate::cubic_meter_per_hour,
            "m³/h",
            "m3_per_h"
        )
    };
    ($want:ident square_centimeter) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::area::square_centimeter, "cm²", "cm2")
    };
    ($want:ident microfarad) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::capacitance::microfarad, "µF", "uF")
    };
    ($want:ident liter) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::volume::liter, "L", "L")
    };
    // Not of `uom`: money of any currency, the same throughout.
    ($want:ident money_per_kWh) => {
        $crate::catalogue::unit::pick!($want, (), "/kWh", "per_kWh")
    };
    ($want:ident money_per_m_mm2) => {
        $crate::catalogue::unit::pick!($want, (), "/(m·mm²)", "per_m_mm2")
    };
    // Not of `uom`: a plain number of V/K.
    ($want:ident volt_per_kelvin) => {
        $crate::catalogue::unit::pick!($want, (), "V/K", "V_per_K")
    };
    ($want:ident ampere_per_square_millimeter) => {
        $crate::catalogue::unit::pick!(
            $want,
            ::uom::si::electric_current_density::ampere_per_square_millimeter,
            "A/mm²",
            "A_per_mm2"
        )
    };
    ($want:ident awg) => {
        $crate::catalogue::unit::pick!($want, ::uom::si::ratio::ratio, "AWG", "awg")
    };
    // Not of `uom`: the type is bound to its range.
    ($want:ident per_hour) => {
        $crate::catalogue::unit::pick!($want, (), "/h", "per_h")
    };
    ($want:ident choice) => {
        $crate::catalogue::unit::pick!($want, (), "", "code")
    };
}

macro_rules! pick {
    (kind, $kind:ty, $symbol:literal, $suffix:literal) => {
        $kind
    };
    (symbol, $kind:ty, $symbol:literal, $suffix:literal) => {
        $symbol
    };
    (suffix, $kind:ty, $symbol:literal, $suffix:literal) => {
        $suffix
    };
}

/// A plain number in the unit as a value of the type, unchecked.
macro_rules! value {
    (volt_per_kelvin $type:ident $x:expr) => { $crate::quantity::volts_per_kelvin($x) };
    (per_hour $type:ident $x:expr) => { <$type>::unchecked($x) };
    (money_per_kWh $type:ident $x:expr) => { <$type>::unchecked($x) };
    (money_per_m_mm2 $type:ident $x:expr) => { <$type>::unchecked($x) };
    (choice $type:ident $x:expr) => {
        <$type as $crate::catalogue::Choice>::of_code($x).unwrap_or(<$type as $crate::catalogue::Choice>::FIRST)
    };
    ($unit:ident $type:ident $x:expr) => { <$type>::new::<$crate::catalogue::unit::unit!(kind $unit)>($x) };
}

/// A value of the type as a plain number in the unit.
macro_rules! plain {
    (volt_per_kelvin $x:expr) => { $x.value };
    (per_hour $x:expr) => { $x.get() };
    (money_per_kWh $x:expr) => { $x.get() };
    (money_per_m_mm2 $x:expr) => { $x.get() };
    ($unit:ident $x:expr) => { $x.get::<$crate::catalogue::unit::unit!(kind $unit)>() };
}

/// A value of the type as a plain number in the base unit, in which checks are made.
macro_rules! base {
    (per_hour $x:expr) => {
        $x.get()
    };
    (money_per_kWh $x:expr) => {
        $x.get()
    };
    (money_per_m_mm2 $x:expr) => {
        $x.get()
    };
    ($unit:ident $x:expr) => {
        $x.value
    };
}

/// Whether a value is in its range: compared in the base unit, where an open end stays open.
macro_rules! valid {
    (choice $type:ident $x:expr; $($range:tt)+) => { true };
    ($unit:ident $type:ident $x:expr; any) => { $crate::catalogue::unit::base!($unit $x).is_finite() };
    ($unit:ident $type:ident $x:expr; > $least:literal ..= $most:literal) => {
        ($crate::catalogue::unit::base!($unit $x) > $crate::catalogue::unit::limit!($unit $type $least)) & ($crate::catalogue::unit::base!($unit $x) <= $crate::catalogue::unit::limit!($unit $type $most))
    };
    ($unit:ident $type:ident $x:expr; > $least:literal) => {
        ($crate::catalogue::unit::base!($unit $x) > $crate::catalogue::unit::limit!($unit $type $least)) & ($crate::catalogue::unit::base!($unit $x) <= f64::MAX)
    };
    ($unit:ident $type:ident $x:expr; >= $least:literal) => {
        ($crate::catalogue::unit::base!($unit $x) >= $crate::catalogue::unit::limit!($unit $type $least)) & ($crate::catalogue::unit::base!($unit $x) <= f64::MAX)
    };
    ($unit:ident $type:ident $x:expr; $least:literal ..= $most:literal) => {
        ($crate::catalogue::unit::base!($unit $x) >= $crate::catalogue::unit::limit!($unit $type $least)) & ($crate::catalogue::unit::base!($unit $x) <= $crate::catalogue::unit::limit!($unit $type $most))
    };
}

macro_rules! limit {
    ($unit:ident $type:ident $x:literal) => { $crate::catalogue::unit::base!($unit $crate::catalogue::unit::value!($unit $type $x)) };
}

/// The range as a value.
macro_rules! range {
    ($type:ident any) => {
        $crate::error::Allowed::Finite
    };
    ($type:ident choice) => {
        $crate::catalogue::codes(<$type as $crate::catalogue::Choice>::ALL.len())
    };
    ($type:ident > $least:literal ..= $most:literal) => {
        $crate::error::Allowed::AboveUpTo($least, $most)
    };
    ($type:ident > $least:literal) => {
        $crate::error::Allowed::Above($least)
    };
    ($type:ident >= $least:literal) => {
        $crate::error::Allowed::AtLeast($least)
    };
    ($type:ident $least:literal ..= $most:literal) => {
        $crate::error::Allowed::Between($least, $most)
    };
}

/// The range as the documentation prints it.
macro_rules! range_text {
    (any) => {
        "finite"
    };
    (choice) => {
        "one of its variants"
    };
    (> $least:literal ..= $most:literal) => {
        concat!("> ", $least, ", ≤ ", $most)
    };
    (> $least:literal) => {
        concat!("> ", $least)
    };
    (>= $least:literal) => {
        concat!("≥ ", $least)
    };
    ($least:literal ..= $most:literal) => {
        concat!($least, " … ", $most)
    };
}

/// What a result must fulfil: finite in the declared unit, so that typed callers and faces agree, or what its type is
/// bound to.
macro_rules! result_valid {
    (per_hour $x:expr) => { $crate::quantity::ChargeRate::per_hour($x.get()).is_ok() };
    ($unit:ident $x:expr) => { $crate::catalogue::unit::plain!($unit $x).is_finite() };
}
macro_rules! result_range {
    (per_hour) => {
        $crate::error::Allowed::Between(0.0, 1000.0)
    };
    ($unit:ident) => {
        $crate::error::Allowed::Finite
    };
}

/// The words of a choice.
macro_rules! words {
    (choice $type:ident) => {
        <$type as $crate::catalogue::Choice>::WORDS
    };
    ($unit:ident $type:ident) => {
        &[]
    };
}

/// A plain number of a face as a value of the type: codes are checked here, numbers by the typed function.
macro_rules! entered {
    (choice $type:ident $input:ident) => {
        <$type as $crate::catalogue::Choice>::of_code($input).ok_or($crate::error::Error::OutOfRange {
            name: stringify!($input),
            value: $input,
            unit: "",
            allowed: $crate::catalogue::unit::range!($type choice),
        })?
    };
    ($unit:ident $type:ident $input:ident) => { $crate::catalogue::unit::value!($unit $type $input) };
}

/// Whether the plain number of a face is a code.
macro_rules! code_valid {
    (choice $type:ident $x:expr) => {
        <$type as $crate::catalogue::Choice>::of_code($x).is_some()
    };
    ($unit:ident $type:ident $x:expr) => {
        true
    };
}
pub(crate) use {
    base, code_valid, entered, limit, pick, plain, range, range_text, result_range, result_valid, unit,
    valid, value, words,
};
