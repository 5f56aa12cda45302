//! Insulation: compound, temperature rating, and what the conductor may reach in a short-circuit.
//!
//! Whether a rating may be used at a terminal or under a rule set belongs to [`crate::rules`].

use core::fmt;
use core::str::FromStr;

use uom::si::thermodynamic_temperature::degree_celsius;

use super::Material;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error, Snippet};
use crate::quantity::{ConductorSize, ThermodynamicTemperature, sqrt};

const ACCEPTED: &str =
    "'PVC 70 degC', 'XLPE 90 degC', 'EPR 90 degC', 'rubber 60 degC' or 'silicone 180 degC'";

/// Table 43A of IEC 60364-4-43: copper cells read on a page, aluminium recalled.
const TABLE_43A: Citation = Citation::new("IEC 60364-4-43:2008", "Table 43A", Seen::Page);
/// Table A.54.4 of IEC 60364-5-54: cores of a cable, which start at the rating as line conductors do.
const TABLE_A54_4: Citation = Citation::new("IEC 60364-5-54:2011", "Table A.54.4", Seen::Page);
const ADIABATIC_FORMULA: Citation =
    Citation::new("IEC 60364-5-54:2011", "Annex A, k = K·√ln(1 + (θf − θi)/(β + θi))", Seen::Derived);

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

/// Row of the adiabatic tables: k of line conductors for a compound at its tabled rating.
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct AdiabaticRow {
    /// Compound.
    pub compound: Compound,
    /// Conductor temperature at the start, °C: the rating.
    pub initial_degC: f64,
    /// Conductor temperature at the end, °C.
    pub final_degC: f64,
    /// k for copper, A·√s/mm².
    pub copper: f64,
    /// k for aluminium, A·√s/mm²; recalled in every row but PVC 70 °C, XLPE and rubber 85 °C.
    pub aluminium: f64,
    /// Table, and whether the copper cell was seen.
    pub copper_citation: Citation,
    /// Table, and whether the aluminium cell was seen.
    pub aluminium_citation: Citation,
}

const fn row(
    compound: Compound,
    temperatures: (f64, f64),
    (copper, copper_citation): (f64, Citation),
    (aluminium, aluminium_citation): (f64, Citation),
) -> AdiabaticRow {
    AdiabaticRow {
        compound,
        initial_degC: temperatures.0,
        final_degC: temperatures.1,
        copper,
        aluminium,
        copper_citation,
        aluminium_citation,
    }
}

/// k = √(I²t)/S of line conductors, A·√s/mm².
///
/// Source: IEC 60364-4-43:2008, Table 43A; rubber 85 °C and silicone from IEC 60364-5-54:2011, Table A.54.4,
/// which holds the same values for cores of a cable. Equal to `iec-adiabatic-k-line` and
/// `iec-adiabatic-k-pe-core` in `tests/reference/protection.toml` (tested there).
pub const ADIABATIC_K: [AdiabaticRow; 8] = [
    // compound, (initial, final) °C, copper, aluminium
    row(Compound::Pvc, (70.0, 160.0), (115.0, TABLE_43A), (76.0, TABLE_43A)),
    row(Compound::Pvc, (70.0, 140.0), (103.0, TABLE_43A), (68.0, TABLE_43A.recalled())),
    row(Compound::Pvc, (90.0, 160.0), (100.0, TABLE_43A), (66.0, TABLE_43A.recalled())),
    row(Compound::Pvc, (90.0, 140.0), (86.0, TABLE_43A), (57.0, TABLE_43A.recalled())),
    row(Compound::Xlpe, (90.0, 250.0), (143.0, TABLE_43A), (94.0, TABLE_43A)),
    row(Compound::Rubber, (60.0, 200.0), (141.0, TABLE_43A), (93.0, TABLE_43A.recalled())),
    row(Compound::Rubber, (85.0, 220.0), (134.0, TABLE_A54_4), (89.0, TABLE_A54_4)),
    row(Compound::Silicone, (180.0, 350.0), (132.0, TABLE_A54_4.recalled()), (87.0, TABLE_A54_4.recalled())),
];

/// k of the adiabatic equation with its source.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct AdiabaticK {
    /// k, A·√s/mm²: the conductor bears I²t up to (k·S)².
    pub value: f64,
    /// Table or formula.
    pub citation: Citation,
}

/// k of the adiabatic equation S = √(I²t)/k, from the rating to the short-circuit temperature, for at most 5 s.
///
/// The table's cell where the rating is tabled, else the formula. Where a tabled cell is only recalled, the
/// lower of cell and formula is given.
///
/// # Errors
/// [`Error::NotTabulated`] for copper-clad aluminium, for which no k is held.
///
/// # Source
/// Tables see [`ADIABATIC_K`]; formula k = K·√ln(1 + (θf − θi)/(β + θi)), K and β 226 and 234.5 for copper,
/// 148 and 228 for aluminium (IEC 60364-5-54:2011, Annex A).
///
/// # Example
/// 16 mm² of copper in PVC 70 °C bears (115 × 16)² = 3.39 million A²s:
/// ```
/// # use ampwright::cable::{Compound, Insulation, Material, adiabatic_k};
/// # use ampwright::quantity::ConductorSize;
/// let size = ConductorSize::mm2(16.0)?;
/// let k = adiabatic_k(Material::Copper, Insulation::new(Compound::Pvc, 70.0)?, size)?;
/// assert_eq!(k.value, 115.0);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn adiabatic_k(
    material: Material,
    insulation: Insulation,
    size: ConductorSize,
) -> Result<AdiabaticK, Error> {
    let (initial, end) = (insulation.rating_degC, insulation.short_circuit_degC(size));
    let formula = formula(material, initial, end)?;
    let tabled = ADIABATIC_K
        .iter()
        .find(|r| r.compound == insulation.compound && r.initial_degC == initial && r.final_degC == end)
        .map(|r| match material {
            Material::Copper => (r.copper, r.copper_citation),
            _ => (r.aluminium, r.aluminium_citation),
        });
    Ok(match tabled {
        Some((k, citation)) if citation.seen == Seen::Recalled => {
            AdiabaticK { value: k.min(formula), citation }
        }
        Some((value, citation)) => AdiabaticK { value, citation },
        None => AdiabaticK { value: formula, citation: ADIABATIC_FORMULA },
    })
}

/// k of the adiabatic equation between two conductor temperatures, by the formula alone: for a conductor that does
/// not start at its rating, such as a protective conductor at 30 °C.
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `initial` | °C | −80 … 250 |
/// | `end` | °C | above `initial`, up to 400 |
///
/// # Errors
/// [`Error::OutOfRange`] for a temperature that is NaN or out of range; [`Error::NotTabulated`] for copper-clad
/// aluminium.
///
/// # Source
/// k = K·√ln(1 + (θf − θi)/(β + θi)), IEC 60364-5-54:2011, Annex A.
///
/// # Example
/// ```
/// # use ampwright::cable::{Material, adiabatic_k_between};
/// # use ampwright::quantity::ThermodynamicTemperature;
/// # use uom::si::thermodynamic_temperature::degree_celsius;
/// let at = ThermodynamicTemperature::new::<degree_celsius>;
/// let k = adiabatic_k_between(Material::Copper, at(30.0), at(160.0))?;
/// assert!((k.value - 143.0).abs() < 0.5);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn adiabatic_k_between(
    material: Material,
    initial: ThermodynamicTemperature,
    end: ThermodynamicTemperature,
) -> Result<AdiabaticK, Error> {
    let (initial, end) = (initial.get::<degree_celsius>(), end.get::<degree_celsius>());
    if !(-80.0..=250.0).contains(&initial) {
        let allowed = Allowed::Between(-80.0, 250.0);
        return Err(Error::OutOfRange { name: "initial temperature", value: initial, unit: "degC", allowed });
    }
    // Written so that NaN fails.
    if !(end > initial && end <= 400.0) {
        let allowed = Allowed::AboveUpTo(initial, 400.0);
        return Err(Error::OutOfRange { name: "end temperature", value: end, unit: "degC", allowed });
    }
    Ok(AdiabaticK { value: formula(material, initial, end)?, citation: ADIABATIC_FORMULA })
}

/// k = K·√ln(1 + (θf − θi)/(β + θi)), temperatures in °C.
fn formula(material: Material, initial: f64, end: f64) -> Result<f64, Error> {
    let (constant, beta) = match material {
        Material::Copper => (226.0, 234.5),
        Material::Aluminium => (148.0, 228.0),
        Material::CopperCladAluminium => {
            return Err(Error::NotTabulated {
                what: "adiabatic k of copper-clad aluminium",
                table: TABLE_43A,
                remedy: "use a copper conductor",
            });
        }
    };
    Ok(constant * sqrt(libm::log(1.0 + (end - initial) / (beta + initial))))
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
        assert_eq!(adiabatic_k(Material::Copper, pvc, mm2(400.0)).unwrap().value, 103.0);
    }

    #[test]
    fn untabled_ratings_follow_the_formula_and_fall_between_their_neighbours() {
        let k = |rating| {
            let pvc = Insulation::new(Compound::Pvc, rating).unwrap();
            adiabatic_k(Material::Copper, pvc, mm2(16.0)).unwrap()
        };
        // 226·√ln(1 + 85/309.5), evaluated independently.
        assert!((k(75.0).value - 111.329042463705).abs() < 1e-9, "{}", k(75.0).value);
        assert_eq!(k(75.0).citation.seen, Seen::Derived);
        assert!(k(90.0).value < k(75.0).value && k(75.0).value < k(70.0).value);
        assert!(k(105.0).value < k(90.0).value);
    }

    #[test]
    fn a_recalled_cell_never_beats_the_formula() {
        for compound in Compound::ALL {
            let (least, most) = compound.ratings_degC();
            for rating in [least, 70.0, 85.0, 90.0, 180.0, most] {
                let Ok(insulation) = Insulation::new(compound, rating) else { continue };
                for material in [Material::Copper, Material::Aluminium] {
                    let k = adiabatic_k(material, insulation, mm2(16.0)).unwrap();
                    assert!(k.value > 50.0, "{insulation} {material:?}");
                    if k.citation.seen == Seen::Recalled {
                        let beta = if material == Material::Copper { 234.5 } else { 228.0 };
                        let constant = if material == Material::Copper { 226.0 } else { 148.0 };
                        let end = insulation.short_circuit_degC(mm2(16.0));
                        let formula = constant * sqrt(libm::log((beta + end) / (beta + rating)));
                        assert!(k.value <= formula + 1e-9, "{insulation} {material:?}");
                    }
                }
            }
        }
    }

    #[test]
    fn odd_temperatures_between_are_refused() {
        let at = ThermodynamicTemperature::new::<degree_celsius>;
        for odd in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, 1e9, -300.0] {
            assert!(adiabatic_k_between(Material::Copper, at(odd), at(160.0)).is_err(), "{odd}");
            assert!(adiabatic_k_between(Material::Copper, at(70.0), at(odd)).is_err(), "{odd}");
        }
        assert!(adiabatic_k_between(Material::Copper, at(160.0), at(160.0)).is_err());
    }

    #[test]
    fn copper_clad_aluminium_has_no_k() {
        let pvc = Insulation::new(Compound::Pvc, 70.0).unwrap();
        let error = adiabatic_k(Material::CopperCladAluminium, pvc, mm2(16.0)).unwrap_err();
        assert_eq!(error.slug(), "not-tabulated");
        assert!(format!("{error}").contains("copper-clad"));
    }
}
