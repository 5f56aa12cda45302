//! Heat in a fault: k of the adiabatic equation, which tells what I²t a conductor bears.
//!
//! How long a fault lasts, and whether the conductor withstands it, belongs to [`crate::protection`].

use uom::si::electric_current_density::ampere_per_square_millimeter;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::{Compound, Insulation, Material};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::law::ElectricCurrentDensity;
use crate::quantity::{ConductorSize, ThermodynamicTemperature, sqrt};

/// Table 43A of IEC 60364-4-43: copper cells read on a page, aluminium recalled.
const TABLE_43A: Citation = Citation::new("IEC 60364-4-43:2008", "Table 43A", Seen::Page);
/// Table A.54.4 of IEC 60364-5-54: cores of a cable, which start at the rating as line conductors do.
const TABLE_A54_4: Citation = Citation::new("IEC 60364-5-54:2011", "Table A.54.4", Seen::Page);
const ADIABATIC_FORMULA: Citation =
    Citation::new("IEC 60364-5-54:2011", "Annex A, k = K·√ln(1 + (θf − θi)/(β + θi))", Seen::Derived);

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
    let (initial, end) = (insulation.rating_degC(), insulation.short_circuit_degC(size));
    let formula = formula_k(material, initial, end)?;
    let tabled = ADIABATIC_K
        .iter()
        .find(|r| r.compound == insulation.compound() && r.initial_degC == initial && r.final_degC == end)
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

calculations! {
    /// Current density that a conductor bears for one second between two temperatures: k of the adiabatic equation.
    ///
    /// By the formula alone, for a conductor that does not start at its rating, such as a protective conductor at 30 °C; at its rating
    /// [`adiabatic_k`] knows the tables. [`law::adiabatic_area()`](crate::law::adiabatic_area()) takes it.
    ///
    /// # Example
    /// ```
    /// use ampwright::{cable::{Material, adiabatic_k_between}, quantity::parse};
    /// use uom::si::electric_current_density::ampere_per_square_millimeter;
    /// let k = adiabatic_k_between(Material::Copper, parse("30 degC")?, parse("160 degC")?)?;
    /// assert!((k.get::<ampere_per_square_millimeter>() - 143.0).abs() < 0.5);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn adiabatic_k_between(
        /// Of the conductor.
        material: Material in choice [choice],
        /// Before the fault.
        initial: ThermodynamicTemperature in degree_celsius [-80.0 ..= 250.0],
        /// When the device has opened.
        end: ThermodynamicTemperature in degree_celsius [-80.0 ..= 400.0],
    ) -> one_second_density: ElectricCurrentDensity in ampere_per_square_millimeter
    where (initial < end) end in degree_celsius: "it must be above the initial temperature"
    formula "k = K·√ln(1 + (θ_f − θ_i)/(β + θ_i)); K = 226, β = 234.5 for copper, 148 and 228 for aluminium"
    source "IEC 60364-5-54:2011, Annex A"
    fallible "the conductor is copper-clad aluminium, for which no k is held"
    {
        let k = formula_k(material, initial.get::<degree_celsius>(), end.get::<degree_celsius>())?;
        Ok(ElectricCurrentDensity::new::<ampere_per_square_millimeter>(k))
    }
}

/// k = K·√ln(1 + (θf − θi)/(β + θi)), temperatures in °C.
fn formula_k(material: Material, initial: f64, end: f64) -> Result<f64, Error> {
    let (constant, beta) = match material {
        Material::Copper => (226.0, 234.5),
        Material::Aluminium => (148.0, 228.0),
        Material::CopperCladAluminium => {
            return Err(Error::NotTabulated {
                what: "adiabatic k of copper-clad aluminium",
                table: Citation::new("the tables held", "copper and aluminium only", Seen::Derived),
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

    fn mm2(size: f64) -> ConductorSize {
        ConductorSize::mm2(size).unwrap()
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

    #[test]
    fn pvc_above_300_mm2_has_its_own_rows() {
        let pvc = Insulation::new(Compound::Pvc, 70.0).unwrap();
        assert_eq!(adiabatic_k(Material::Copper, pvc, mm2(300.0)).unwrap().value, 115.0);
        assert_eq!(adiabatic_k(Material::Copper, pvc, mm2(400.0)).unwrap().value, 103.0);
    }

    proptest::proptest! {
        #[test]
        fn any_bits_give_an_answer_or_an_error(bits: u64, other: u64) {
            let (bits, other) = (f64::from_bits(bits), f64::from_bits(other));
            let at = ThermodynamicTemperature::new::<degree_celsius>;
            if let Ok(k) = adiabatic_k_between(Material::Copper, at(bits), at(other)) {
                assert!(k.value > 0.0 && k.value.is_finite());
            }
        }
    }
}
