//! The text form: number, space, unit. The parser, and the printer that gives the same number again.
//!
//! Units stand in [`super::unit`], the readable printer in [`super::readable`], conductor sizes in [`super::size`].

use core::fmt;

use super::unit::{Dimension, UNITS, find, noun_of};
use crate::error::{Allowed, Error, Snippet};

/// A number as entered, with its unit: the form that round-trips.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Entered {
    /// The number as entered.
    pub value: f64,
    /// Symbol of its unit, as the table spells it; empty for a bare ratio.
    pub unit: &'static str,
    /// What it measures.
    pub dimension: Dimension,
}

impl Entered {
    /// The quantity in its base unit; for output, so that no digit is lost.
    pub fn in_base_unit<Q: Textual>(quantity: Q) -> Self {
        let unit = UNITS.iter().find(|u| u.dimension == Q::DIMENSION && u.factor == 1.0 && u.offset == 0.0);
        Self { value: quantity.base(), unit: unit.map_or("", |u| u.symbol), dimension: Q::DIMENSION }
    }

    /// The value in the base unit.
    ///
    /// # Errors
    /// [`Error::UnknownUnit`] where `unit` does not measure `dimension`, [`Error::NotFinite`] where the value in the
    /// base unit is NaN or infinite, [`Error::OutOfRange`] below absolute zero.
    pub fn base(self) -> Result<f64, Error> {
        let (text, accepted) = (Snippet::new(self.unit), self.dimension.accepted());
        let unit = find(self.unit, self.dimension).ok_or(Error::UnknownUnit { text, accepted })?;
        let base = (self.value + unit.offset) * unit.factor;
        if !base.is_finite() {
            return Err(Error::NotFinite { text, accepted });
        }
        if self.dimension == Dimension::Temperature && base < 0.0 {
            let allowed = Allowed::AtLeast(-unit.offset);
            return Err(Error::OutOfRange {
                name: "temperature",
                value: self.value,
                unit: unit.symbol,
                allowed,
            });
        }
        Ok(base)
    }
}

/// A quantity that has a text form.
pub trait Textual: Copy {
    /// What it measures.
    const DIMENSION: Dimension;
    /// From the value in the base unit.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the type is bound to a range and the value is outside.
    fn from_base(value: f64) -> Result<Self, Error>;
    /// The value in the base unit.
    fn base(self) -> f64;
}

/// Parses a text into a quantity.
///
/// # Errors
/// One of the text errors of [`Error`], which names examples of what is accepted; [`Error::OutOfRange`] below absolute
/// zero or outside the type's own range.
///
/// # Example
/// ```
/// use ampwright::quantity::{ElectricPotential, Length, parse};
/// use uom::si::length::meter;
/// assert_eq!(parse::<Length>("39 ft")?.get::<meter>(), 39.0 * 0.3048);
/// let error = parse::<Length>("12 V").unwrap_err();
/// assert_eq!(error.to_string(), "'12 V' is a voltage; a length is needed, such as '12 m' or '39 ft'");
/// let error = parse::<ElectricPotential>("12").unwrap_err();
/// assert_eq!(error.to_string(), "'12' has no unit; write '12 V' or '500 mV'");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn parse<Q: Textual>(text: &str) -> Result<Q, Error> {
    Q::from_base(parse_entered(text, Q::DIMENSION)?.base()?)
}

/// Parses a text of a known dimension into its number and unit.
///
/// # Errors
/// As [`parse`].
pub fn parse_entered(text: &str, dimension: Dimension) -> Result<Entered, Error> {
    let accepted = dimension.accepted();
    let (number, rest) = split(text, accepted)?;
    let snippet = Snippet::new(text.trim());
    if let Some(unit) = find(rest, dimension) {
        let entered = Entered { value: number, unit: unit.symbol, dimension };
        return match entered.base() {
            // Here the whole text is known, so the error shows it.
            Err(Error::NotFinite { .. }) => Err(Error::NotFinite { text: snippet, accepted }),
            Err(other) => Err(other),
            Ok(_) => Ok(entered),
        };
    }
    Err(unit_error(snippet, rest, dimension.noun(), accepted))
}

/// Why the rest of a text is not the unit that is needed.
pub(super) fn unit_error(text: Snippet, rest: &str, needed: &'static str, accepted: &'static str) -> Error {
    if rest.is_empty() {
        return Error::NoUnit { text, accepted };
    }
    if let Some(found) = noun_of(rest) {
        return Error::WrongUnit { text, found, needed, accepted };
    }
    match rest.split_once(char::is_whitespace) {
        Some((unit, _)) if noun_of(unit).is_some() => Error::MoreThanOne { text, accepted },
        _ => Error::UnknownUnit { text, accepted },
    }
}

/// Splits a text into its number and what follows, trimmed.
pub(super) fn split<'t>(text: &'t str, accepted: &'static str) -> Result<(f64, &'t str), Error> {
    let text = text.trim();
    let snippet = Snippet::new(text);
    let (number, rest) = text.split_at(number_end(text));
    if number.is_empty() {
        let word = text.trim_start_matches(['+', '-']);
        let word = word.split(|c: char| !c.is_alphabetic()).next().unwrap_or("");
        let not_finite =
            ["nan", "inf", "infinity"].iter().any(|w| word.eq_ignore_ascii_case(w)) || text.starts_with('∞');
        return Err(if not_finite {
            Error::NotFinite { text: snippet, accepted }
        } else {
            Error::NotANumber { text: snippet, accepted }
        });
    }
    let unit = rest.trim_start();
    let digit_follows = unit.starts_with(|c: char| c.is_ascii_digit() || c == '-' || c == '+');
    if rest.starts_with([',', '.', '_', '\'', '’', '٫', '٬']) {
        return Err(Error::Separator { text: snippet, accepted });
    }
    if digit_follows {
        return Err(Error::MoreThanOne { text: snippet, accepted });
    }
    match number.parse::<f64>() {
        Ok(value) if value.is_finite() => Ok((value, unit)),
        Ok(_) => Err(Error::NotFinite { text: snippet, accepted }),
        Err(_) => Err(Error::NotANumber { text: snippet, accepted }),
    }
}

/// Where the number at the front of a text ends: sign, digits, point, digits, exponent. 0 where there is none.
fn number_end(text: &str) -> usize {
    let digits = |from: usize| text.bytes().skip(from).take_while(u8::is_ascii_digit).count();
    let at = |i: usize| text.as_bytes().get(i).copied();
    let sign = usize::from(matches!(at(0), Some(b'+' | b'-')));
    let whole = digits(sign);
    let mut end = sign + whole;
    let mut part = 0;
    if at(end) == Some(b'.') {
        part = digits(end + 1);
        // "12." is a number, "." is not.
        if whole + part > 0 {
            end += 1 + part;
        }
    }
    if whole + part == 0 {
        return 0;
    }
    if matches!(at(end), Some(b'e' | b'E')) {
        let sign = usize::from(matches!(at(end + 1), Some(b'+' | b'-')));
        let exponent = digits(end + 1 + sign);
        if exponent > 0 {
            end += 1 + sign + exponent;
        }
    }
    end
}

/// Prints the shortest digits that give the same number again, in the unit entered.
///
/// ```
/// use ampwright::quantity::{Dimension, exact, parse_entered};
/// let entered = parse_entered("0.1 µΩ", Dimension::Resistance)?;
/// assert_eq!(exact(entered).to_string(), "0.1 uohm");
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Exact(pub Entered);

/// Exact printer: see [`Exact`].
pub fn exact(entered: Entered) -> Exact {
    Exact(entered)
}

impl fmt::Display for Exact {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let Entered { value, unit, .. } = self.0;
        // Both forms are the shortest that round-trip; beyond these the zeros would only be counted.
        if value == 0.0 || (1e-7..1e16).contains(&value.abs()) {
            write!(f, "{value}")?;
        } else {
            write!(f, "{value:e}")?;
        }
        if unit.is_empty() { Ok(()) } else { write!(f, " {unit}") }
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use proptest::prelude::*;

    use super::super::*;
    use super::*;

    fn error<Q: Textual + core::fmt::Debug>(text: &str) -> std::string::String {
        parse::<Q>(text).unwrap_err().to_string()
    }

    #[test]
    fn signs_may_be_typed_either_way() {
        for (plain, signs) in [("2 mohm", "2 mΩ"), ("7 uohm", "7 µΩ"), ("7 uohm", "7 μΩ"), ("3 ohm", "3 Ω")]
        {
            assert_eq!(parse::<ElectricalResistance>(plain), parse::<ElectricalResistance>(signs));
        }
        assert_eq!(parse::<Area>("16 mm2"), parse::<Area>(" 16mm² "));
        assert_eq!(parse::<ThermodynamicTemperature>("25 degC"), parse::<ThermodynamicTemperature>("25 °C"));
        assert_eq!(
            parse::<ElectricalResistivity>("0.0172 ohm.mm2/m"),
            parse::<ElectricalResistivity>("0.0172 Ω·mm²/m")
        );
        assert_eq!(parse::<Ratio>("85 %"), parse::<Ratio>("0.85"));
    }

    #[test]
    fn milli_and_mega_differ_by_case_alone() {
        assert_eq!(parse::<Power>("1 MW").unwrap().value, 1e6);
        assert_eq!(parse::<Power>("1 mW").unwrap().value, 1e-3);
        assert_eq!(
            error::<ElectricCurrent>("1 MA"),
            "'1 MA' has a unit that is not known here; write '25 A' or '300 mA'"
        );
        assert_eq!(
            error::<Power>("1 Kw"),
            "'1 Kw' has a unit that is not known here; write '800 W' or '1.2 kW'"
        );
    }

    #[test]
    fn each_bad_text_has_its_own_sentence() {
        assert_eq!(error::<Length>("12"), "'12' has no unit; write '12 m' or '39 ft'");
        assert_eq!(
            error::<Length>("12 V"),
            "'12 V' is a voltage; a length is needed, such as '12 m' or '39 ft'"
        );
        assert_eq!(
            error::<Length>("6 AWG"),
            "'6 AWG' is a conductor size; a length is needed, such as '12 m' or '39 ft'"
        );
        assert_eq!(error::<Area>("16 A"), "'16 A' is a current; a cross-section is needed, such as '16 mm2'");
        assert_eq!(error::<ChargeRate>("0.2 C"), "'0.2 C' has a unit that is not known here; write '0.2 /h'");
        assert_eq!(
            error::<ThermodynamicTemperature>("25 C"),
            "'25 C' has a unit that is not known here; write '25 degC' or '77 degF'"
        );
        assert_eq!(
            error::<TemperatureInterval>("20 degC"),
            "'20 degC' is a temperature; a temperature difference is needed, such as '20 K'"
        );
        assert_eq!(error::<Power>("1e400 W"), "'1e400 W' is not a finite number; write '800 W' or '1.2 kW'");
        for text in ["NaN W", "inf W", "-Infinity W", "∞ W", "1e308 kW"] {
            assert_eq!(
                error::<Power>(text),
                std::format!("'{text}' is not a finite number; write '800 W' or '1.2 kW'")
            );
        }
        for text in ["", "W", "- W", ".", "about 5 W", "information"] {
            assert_eq!(
                error::<Power>(text),
                std::format!("'{text}' does not begin with a number; write '800 W' or '1.2 kW'")
            );
        }
        for text in ["2,5 kW", "1,000 W", "1'000 W", "1_000 W", "1.000.000 W"] {
            assert_eq!(
                error::<Power>(text),
                std::format!(
                    "'{text}' has a separator inside its number; write digits and one point, such as '800 W' or '1.2 kW'"
                )
            );
        }
        for text in ["12 13 W", "1 000 W", "12 W 13", "12 W or so", "5-6 W", "0.2 1/h"] {
            assert_eq!(
                error::<Power>(text),
                std::format!("'{text}' is more than one number and one unit; write '800 W' or '1.2 kW'")
            );
        }
        assert_eq!(
            error::<ThermodynamicTemperature>("-300 degC"),
            "temperature is -300 degC; it must be -273.15 or more"
        );
        assert_eq!(error::<ChargeRate>("-0.2 /h"), "charge rate is -0.2 /h; it must be between 0 and 1000");
        assert_eq!(error::<StateOfCharge>("120 %"), "state of charge is 1.2; it must be between 0 and 1");
    }

    proptest! {
        #[test]
        fn exact_gives_the_same_number_again(bits: u64, value in -1e6..1e6f64, row in 0..UNITS.len()) {
            let unit = &UNITS[row];
            for value in [f64::from_bits(bits), value, 0.0, -0.0, f64::MIN_POSITIVE] {
                let entered = Entered { value, unit: unit.symbol, dimension: unit.dimension };
                if entered.base().is_ok() {
                    let again = parse_entered(&exact(entered).to_string(), unit.dimension).unwrap();
                    prop_assert_eq!(again.value.to_bits(), value.to_bits());
                    prop_assert_eq!(again.unit, unit.symbol);
                }
            }
        }

        #[test]
        fn any_text_gives_a_quantity_or_an_error(text in "\\PC*", number in "[-+0-9.,e ]{0,12}", unit in "[a-zA-ZΩµ²°/% ]{0,8}") {
            for text in [text.as_str(), &std::format!("{number}{unit}")] {
                for row in UNITS {
                    if let Ok(entered) = parse_entered(text, row.dimension) {
                        prop_assert!(entered.base().unwrap().is_finite());
                    }
                }
                let _ = text.parse::<ConductorSize>();
            }
        }
    }
}
