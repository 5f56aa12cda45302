//! Insulation: compound, temperature rating, and what the conductor may reach in a short-circuit.
//!
//! Whether a rating may be used at a terminal or under a rule set belongs to [`crate::rules`].

use core::fmt;
use core::str::FromStr;

use crate::error::{Allowed, Error, Snippet};
use crate::quantity::ConductorSize;

const ACCEPTED: &str =
    "'PVC 70 degC', 'XLPE 90 degC', 'EPR 90 degC', 'rubber 60 degC' or 'silicone 180 degC'";

/// Nominal cross-section up to which PVC may reach 160 °C in a short-circuit; above it 140 °C.
const PVC_LARGE_MM2: f64 = 300.0;

/// Compound of the insulation, as far as limits depend on it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Compound {
    /// PVC and other thermoplastics.
    Pvc,
    /// Cross-linked polyethylene or EPR.
    Xlpe,
    /// Natural or synthetic rubber.
    Rubber,
    /// Silicone rubber.
    Silicone,
}

impl Compound {
    /// All compounds.
    pub const ALL: [Self; 4] = [Self::Pvc, Self::Xlpe, Self::Rubber, Self::Silicone];

    /// Word in the text form.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Pvc => "PVC",
            Self::Xlpe => "XLPE",
            Self::Rubber => "rubber",
            Self::Silicone => "silicone",
        }
    }

    /// Least and greatest rating the compound is made for, °C. Common practice, no source: it catches slips
    /// such as "PVC 180 degC"; it says nothing about a single cable.
    #[allow(non_snake_case)]
    pub const fn ratings_degC(self) -> (f64, f64) {
        match self {
            Self::Pvc | Self::Rubber => (60.0, 105.0),
            Self::Xlpe => (75.0, 150.0),
            Self::Silicone => (150.0, 200.0),
        }
    }
}

/// Insulation of a conductor: compound and greatest conductor temperature in normal service.
///
/// Text form: compound, number, unit.
/// ```
/// # use ampwright::cable::{Compound, Insulation};
/// let insulation: Insulation = "XLPE 90 degC".parse()?;
/// assert_eq!(insulation.compound(), Compound::Xlpe);
/// assert_eq!(insulation.to_string(), "XLPE 90 degC");
/// assert!("PVC 180 degC".parse::<Insulation>().is_err());
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct Insulation {
    compound: Compound,
    rating_degC: f64,
}

impl Insulation {
    /// PVC for 60 °C: the lowest rating there is.
    pub const PVC_60: Self = Self { compound: Compound::Pvc, rating_degC: 60.0 };

    /// Insulation of a compound, for a greatest conductor temperature in normal service: PVC 60 … 105 °C, XLPE
    /// 75 … 150 °C, rubber 60 … 105 °C, silicone 150 … 200 °C.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] if NaN or outside the compound's range.
    #[allow(non_snake_case)]
    pub const fn new(compound: Compound, rating_degC: f64) -> Result<Self, Error> {
        let (least, most) = compound.ratings_degC();
        // Written so that NaN fails.
        if !(rating_degC >= least && rating_degC <= most) {
            let name = match compound {
                Compound::Pvc => "rating of PVC insulation",
                Compound::Xlpe => "rating of XLPE insulation",
                Compound::Rubber => "rating of rubber insulation",
                Compound::Silicone => "rating of silicone insulation",
            };
            let allowed = Allowed::Between(least, most);
            return Err(Error::OutOfRange { name, value: rating_degC, unit: "degC", allowed });
        }
        Ok(Self { compound, rating_degC })
    }

    /// The compound.
    pub const fn compound(self) -> Compound {
        self.compound
    }

    /// Greatest conductor temperature in normal service, °C.
    #[allow(non_snake_case)]
    pub const fn rating_degC(self) -> f64 {
        self.rating_degC
    }

    /// Greatest conductor temperature at the end of a short-circuit of at most 5 s, °C.
    ///
    /// # Source
    /// IEC 60364-4-43:2008, Table 43A: PVC 160 °C up to 300 mm² and 140 °C above, XLPE 250 °C, rubber 200 °C.
    /// IEC 60364-5-54:2011, Table A.54.4: rubber of 85 °C 220 °C, silicone 350 °C (recalled). Rubber between
    /// the two tabled ratings is held to the lower.
    #[allow(non_snake_case)]
    pub fn short_circuit_degC(self, size: ConductorSize) -> f64 {
        match self.compound {
            Compound::Pvc if size.area_mm2() > PVC_LARGE_MM2 => 140.0,
            Compound::Pvc => 160.0,
            Compound::Xlpe => 250.0,
            Compound::Rubber if self.rating_degC < 85.0 => 200.0,
            Compound::Rubber => 220.0,
            Compound::Silicone => 350.0,
        }
    }
}

impl fmt::Display for Insulation {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} {} degC", self.compound.word(), self.rating_degC)
    }
}

impl FromStr for Insulation {
    type Err = Error;

    fn from_str(text: &str) -> Result<Self, Error> {
        let snippet = Snippet::new(text);
        let (word, rating) = text.trim().split_once(char::is_whitespace).unwrap_or((text.trim(), ""));
        let compound = match word {
            "PVC" => Compound::Pvc,
            "XLPE" | "EPR" => Compound::Xlpe,
            "rubber" => Compound::Rubber,
            "silicone" => Compound::Silicone,
            _ => return Err(Error::UnknownWord { text: snippet, allowed: ACCEPTED }),
        };
        let rating = rating.trim();
        // The unit begins where the number ends; "70degC" is as clear as "70 degC".
        let end = rating.find(|c: char| !c.is_ascii_digit() && c != '.').unwrap_or(rating.len());
        let (number, unit) = rating.split_at(end);
        let Ok(number) = number.parse() else {
            return Err(Error::UnknownWord { text: snippet, allowed: ACCEPTED });
        };
        match unit.trim() {
            "degC" | "°C" => Self::new(compound, number),
            "" => Err(Error::NoUnit { text: snippet, accepted: ACCEPTED }),
            _ => Err(Error::UnknownUnit { text: snippet, accepted: ACCEPTED }),
        }
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::format;
    use std::string::ToString;

    fn mm2(size: f64) -> ConductorSize {
        ConductorSize::mm2(size).unwrap()
    }

    #[test]
    fn text_form_comes_back() {
        for text in ["PVC 70 degC", "PVC 105 degC", "XLPE 90 degC", "rubber 60 degC", "silicone 180 degC"] {
            assert_eq!(text.parse::<Insulation>().unwrap().to_string(), text);
        }
        for text in [" PVC  70 degC ", "PVC 70degC", "PVC 70 °C", "PVC 70.0 degC"] {
            assert_eq!(text.parse(), Insulation::new(Compound::Pvc, 70.0), "{text}");
        }
        assert_eq!("EPR 90 degC".parse(), Insulation::new(Compound::Xlpe, 90.0));
    }

    #[test]
    fn what_is_wrong_with_a_text_is_said() {
        for (text, slug) in [
            ("", "unknown-word"),
            ("PVC", "unknown-word"),
            ("PVC degC", "unknown-word"),
            ("pvc 70 degC", "unknown-word"),
            ("PVC -70 degC", "unknown-word"),
            ("PVC 7.0.0 degC", "unknown-word"),
            ("PVC 70", "no-unit"),
            ("PVC 70 degF", "unknown-unit"),
            ("PVC 70 degC 90", "unknown-unit"),
            ("PVC 59.9 degC", "out-of-range"),
            ("XLPE 200 degC", "out-of-range"),
        ] {
            assert_eq!(text.parse::<Insulation>().unwrap_err().slug(), slug, "{text}");
        }
        assert_eq!(
            "PVC 180 degC".parse::<Insulation>().unwrap_err().to_string(),
            "rating of PVC insulation is 180 degC; it must be between 60 and 105"
        );
        for rating in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, 0.0] {
            assert!(Insulation::new(Compound::Rubber, rating).is_err());
        }
    }

    #[test]
    fn pvc_above_300_mm2_may_reach_less() {
        let pvc = Insulation::new(Compound::Pvc, 70.0).unwrap();
        assert_eq!(pvc.short_circuit_degC(mm2(300.0)), 160.0);
        assert_eq!(pvc.short_circuit_degC(mm2(400.0)), 140.0);
    }

    proptest::proptest! {
        #[test]
        fn any_text_and_any_bits_give_an_answer_or_an_error(text: std::string::String, bits: u64) {
            let _ = text.parse::<Insulation>();
            let _ = format!("PVC {text}").parse::<Insulation>();
            let bits = f64::from_bits(bits);
            for compound in Compound::ALL {
                if let Ok(insulation) = Insulation::new(compound, bits) {
                    assert_eq!(insulation.to_string().parse(), Ok(insulation));
                }
            }
        }

        #[test]
        fn every_rating_comes_back_from_its_text(rating in 60.0..=105.0f64) {
            let insulation = Insulation::new(Compound::Pvc, rating).unwrap();
            assert_eq!(insulation.to_string().parse(), Ok(insulation));
        }
    }
}
