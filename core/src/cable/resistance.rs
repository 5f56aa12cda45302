//! Resistance of a conductor per length, at temperature.
//!
//! The printed table where one holds the size, else the metal's resistivity over the area with an allowance for
//! stranding. Joints are [`super::joint_resistance`]'s; the loop of two conductors is the caller's.

use uom::si::electrical_resistance::ohm;
use uom::si::electrical_resistivity::ohm_meter;
use uom::si::length::meter;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::resistance_table::{
    CLASS_1, CLASS_2, CLASS_5, CLASS_6, ResistanceTable, TABLE_8_SOLID, TABLE_8_STRANDED,
};
use super::{Class, Coating, Conductor, Material};
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{
    Designation, ElectricalResistance, ElectricalResistivity, Length, LinearResistance,
    ThermodynamicTemperature,
};

/// Resistivity of standard annealed copper at 20 °C, Ω·mm²/m: 1/58 exactly. Source: IEC 60028:1925.
pub const COPPER_OHM_MM2_PER_M: f64 = 1.0 / 58.0;
/// Resistivity of aluminium wire at 20 °C, Ω·mm²/m. Source: IEC 60889:1987, recalled.
pub const ALUMINIUM_OHM_MM2_PER_M: f64 = 0.028264;
/// Resistivity of wire with a tenth of copper by volume at 20 °C, Ω·mm²/m. Source: ASTM B566, class 10, recalled.
pub const COPPER_CLAD_OHM_MM2_PER_M: f64 = 0.02743;
/// Temperature at which the resistance of copper would vanish on a straight line, °C. Source: IEC 60028:1925.
#[allow(non_upper_case_globals)]
pub const COPPER_ZERO_degC: f64 = -234.5;
/// As [`COPPER_ZERO_degC`], for aluminium. Source: IEC 60364-5-54:2011, Annex A (β = 228), recalled.
#[allow(non_upper_case_globals)]
pub const ALUMINIUM_ZERO_degC: f64 = -228.0;
/// Temperature coefficient of copper at 75 °C, 1/K. Source: NFPA 70-2023, Chapter 9, Table 8, note 2.
pub const COPPER_ALPHA_75_PER_K: f64 = 0.00323;

/// Stranded aluminium against resistivity over area: 0.641 Ω/km at 50 mm² is the worst of IEC 60228:2004,
/// Table 2, aluminium column (recalled).
const ALUMINIUM_ALLOWANCE: f64 = 0.641e-3 * 50.0 / ALUMINIUM_OHM_MM2_PER_M;

/// Conductor temperatures for which a straight line in temperature is used, °C.
#[allow(non_upper_case_globals)]
const RANGE_degC: (f64, f64) = (-80.0, 250.0);

const FROM_AREA: Citation =
    Citation::new("IEC 60028:1925", "1/58 Ω·mm²/m over the area, with the class's allowance", Seen::Derived);
const LEAST_FROM_AREA: Citation =
    Citation::new("IEC 60028:1925", "1/58 Ω·mm²/m over the area", Seen::Derived);
const ALUMINIUM_FROM_AREA: Citation = Citation::new(
    "IEC 60889:1987",
    "0.028264 Ω·mm²/m over the area, with the class's allowance",
    Seen::Recalled,
);
const COPPER_CLAD_FROM_AREA: Citation =
    Citation::new("ASTM B566", "class 10, 0.02743 Ω·mm²/m over the area", Seen::Recalled);

/// Where a resistance comes from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ResistanceSource {
    /// Table or formula.
    pub citation: Citation,
}

/// Resistance of one conductor per length at a conductor temperature: the greatest that its class admits.
///
/// Copper by the printed table where it has a row, else by the formula R20 = ρ/A × the class's allowance:
///
/// | conductor | row in | allowance plain | tinned |
/// | --- | --- | --- | --- |
/// | metric, class 1 | IEC 60228 Table 1, to 16 mm² | 1.07445 | 1.0962 |
/// | metric, class 2 | Table 2, to 400 mm² | 1.1223 | 1.1339 |
/// | metric, class 5 | Table 3, to 400 mm² | 1.1571 | 1.1919 |
/// | metric, class 6 | as class 5 | 1.1571 | 1.1919 |
/// | AWG, class 1 | NFPA 70 Chapter 9 Table 8, solid, 18 to 8 AWG | 1.07445 | 1.0962 |
/// | AWG and kcmil, class 2 | Table 8, stranded, 18 AWG to 1000 kcmil | 1.1223 | 1.1339 |
/// | AWG and kcmil, classes 5 and 6 | none: the greater of Table 8, stranded, and the formula | 1.1571 | 1.1919 |
///
/// So by the formula: metric sizes between the rows and from 500 mm² up, class 1 above 16 mm² and above 8 AWG, gauges
/// that Table 8 leaves out (20, 5 AWG), 1250 kcmil and up, and every flexible gauge, whose formula lies 9 to 14 % above
/// the stranded row. An allowance is the worst ratio of printed maximum to 1/58 Ω·mm²/m over the area in the class's own
/// table: 2.5 mm² for class 1 and plain class 5, 50 mm² for class 2, 1.5 mm² for tinned class 5.
///
/// Aluminium is always by its formula, its allowance at least 1.134 (0.641 Ω/km at 50 mm²); copper-clad aluminium too,
/// with the class's own.
///
/// Against the greatest resistance of tin-plated aircraft wire in FAA AC 43.13-1B, Table 11-9, tinned class 5 lies
/// between 6.3 % below and 7.0 % above from 16 AWG to 4/0: 14, 12 and 10 AWG 1.6, 6.3 and 5.5 % below that maximum; the sizes
/// from 8 AWG on are printed there to two figures at most. Wire at that maximum drops more than is computed here.
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `temperature` | °C | −80 … 250; of the conductor, not of the air |
///
/// # Errors
/// [`Error::OutOfRange`] if the temperature is NaN or out of range.
///
/// # Source
/// IEC 60228:2004, R = R20·(234.5 + t)/254.5; NFPA 70-2023, Chapter 9, Table 8, R = R75·(1 + 0.00323·(t − 75)).
///
/// # Example
/// 16 mm² class 5 at 70 °C: 1.21 × 304.5/254.5 = 1.448 Ω/km.
/// ```
/// # use ampwright::cable::*;
/// # use ampwright::quantity::{ConductorSize, ThermodynamicTemperature};
/// # use uom::si::thermodynamic_temperature::degree_celsius;
/// let conductor = Conductor {
///     size: ConductorSize::mm2(16.0)?,
///     material: Material::Copper,
///     class: Class::Flexible,
///     coating: Coating::Plain,
///     insulation: Insulation::new(Compound::Pvc, 70.0)?,
/// };
/// let hot = linear_resistance(&conductor, ThermodynamicTemperature::new::<degree_celsius>(70.0))?;
/// assert!((hot.value * 1000.0 - 1.4477).abs() < 1e-4); // base unit Ω/m
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn linear_resistance(
    conductor: &Conductor,
    temperature: ThermodynamicTemperature,
) -> Result<LinearResistance, Error> {
    linear_resistance_with_source(conductor, temperature).map(|(r, _)| r)
}

/// As [`linear_resistance`], with its source.
///
/// # Errors
/// As [`linear_resistance`].
///
/// # Example
/// ```
/// # use ampwright::cable::{Conductor, linear_resistance_with_source};
/// # use ampwright::quantity::ThermodynamicTemperature;
/// # use uom::si::thermodynamic_temperature::degree_celsius;
/// let cable = Conductor::flexible_copper("16 mm2".parse()?, "PVC 70 degC".parse()?);
/// let at_20 = ThermodynamicTemperature::new::<degree_celsius>(20.0);
/// let (resistance, source) = linear_resistance_with_source(&cable, at_20)?;
/// assert!((resistance.value * 1000.0 - 1.21).abs() < 1e-9); // Ω/km
/// assert!(source.citation.document.starts_with("IEC 60228"));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn linear_resistance_with_source(
    conductor: &Conductor,
    temperature: ThermodynamicTemperature,
) -> Result<(LinearResistance, ResistanceSource), Error> {
    let celsius = checked_celsius(temperature)?;
    let (value, citation) = match conductor.material {
        Material::Copper => copper(conductor, celsius),
        Material::Aluminium => {
            let allowance = allowance(conductor).max(ALUMINIUM_ALLOWANCE);
            (from_area(conductor, celsius) * allowance, ALUMINIUM_FROM_AREA)
        }
        Material::CopperCladAluminium => {
            (from_area(conductor, celsius) * allowance(conductor), COPPER_CLAD_FROM_AREA)
        }
    };
    Ok((per_meter(value), ResistanceSource { citation }))
}

/// The least resistance a conductor of that size can have: resistivity over the full nominal area, or the printed
/// figure where its rounding lies lower.
///
/// For the greatest prospective current (R6): printed maxima would make it look smaller than it may be.
///
/// # Errors
/// As [`linear_resistance`].
///
/// # Source
/// IEC 60028:1925, 1/58 Ω·mm²/m at 20 °C.
///
/// # Example
/// 16 mm² at 20 °C: 1/58/16 = 1.078 Ω/km, where the class 5 maximum is 1.21 Ω/km.
/// ```
/// # use ampwright::cable::*;
/// # use ampwright::quantity::{ConductorSize, ThermodynamicTemperature};
/// # use uom::si::thermodynamic_temperature::degree_celsius;
/// let conductor = Conductor {
///     size: ConductorSize::mm2(16.0)?,
///     material: Material::Copper,
///     class: Class::Flexible,
///     coating: Coating::Plain,
///     insulation: Insulation::new(Compound::Pvc, 70.0)?,
/// };
/// let (least, _) = least_linear_resistance(&conductor, ThermodynamicTemperature::new::<degree_celsius>(20.0))?;
/// assert!((least.value * 1000.0 - 1.0776).abs() < 1e-4);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn least_linear_resistance(
    conductor: &Conductor,
    temperature: ThermodynamicTemperature,
) -> Result<(LinearResistance, ResistanceSource), Error> {
    let greatest = linear_resistance_with_source(conductor, temperature)?;
    let citation = match conductor.material {
        Material::Copper => LEAST_FROM_AREA,
        Material::Aluminium => ALUMINIUM_FROM_AREA,
        Material::CopperCladAluminium => COPPER_CLAD_FROM_AREA,
    };
    let full_area = per_meter(from_area(conductor, checked_celsius(temperature)?));
    Ok(if full_area <= greatest.0 { (full_area, ResistanceSource { citation }) } else { greatest })
}

calculations! {
    /// Resistivity of a conductor's metal at a temperature, without any allowance.
    ///
    /// # Example
    /// ```
    /// use ampwright::{cable::{Material, resistivity}, quantity::parse};
    /// use uom::si::electrical_resistivity::ohm_square_millimeter_per_meter;
    /// let at_20 = resistivity(Material::Copper, parse("20 degC")?)?;
    /// assert!((at_20.get::<ohm_square_millimeter_per_meter>() * 58.0 - 1.0).abs() < 1e-12);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn resistivity(
        /// Of the conductor.
        material: Material in choice [choice],
        /// Of the conductor, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-80.0 ..= 250.0],
    ) -> resistivity: ElectricalResistivity in ohm_meter
    formula "ρ = ρ₂₀·(θ − θ₀)/(20 °C − θ₀); ρ₂₀ in Ω·mm²/m and θ₀: copper 1/58, −234.5 °C; aluminium 0.028264, copper-clad aluminium 0.02743, both −228 °C"
    source "IEC 60028:1925; aluminium IEC 60889, copper-clad aluminium ASTM B566, class 10 (both recalled)"
    {
        let celsius = temperature.get::<degree_celsius>();
        ElectricalResistivity::new::<ohm_meter>(ohm_mm2_per_m(material, celsius) * 1e-6)
    }
}

fn checked_celsius(temperature: ThermodynamicTemperature) -> Result<f64, Error> {
    let celsius = temperature.get::<degree_celsius>();
    let (least, most) = RANGE_degC;
    // Written so that NaN fails.
    if !(celsius >= least && celsius <= most) {
        return Err(Error::OutOfRange {
            name: "conductor temperature",
            value: celsius,
            unit: "degC",
            allowed: Allowed::Between(least, most),
        });
    }
    Ok(celsius)
}

/// Copper, Ω/m.
fn copper(conductor: &Conductor, celsius: f64) -> (f64, Citation) {
    let metric = matches!(conductor.size.designation(), Designation::SquareMillimeter(_));
    let table = match (metric, conductor.class) {
        (true, class) => class_table(class),
        (false, Class::Solid) => &TABLE_8_SOLID,
        (false, _) => &TABLE_8_STRANDED,
    };
    let printed = table
        .cell(conductor.size, conductor.coating)
        .map(|(cell, citation)| (cell * table.unit_ohm_per_m * temperature_factor(table, celsius), citation));
    let own_row = metric || matches!(conductor.class, Class::Solid | Class::Stranded);
    if let (Some(printed), true) = (printed, own_row) {
        return printed;
    }
    let derived = (from_area(conductor, celsius) * allowance(conductor), FROM_AREA);
    match printed {
        Some(printed) if printed.0 >= derived.0 => printed,
        _ => derived,
    }
}

pub(super) const fn class_table(class: Class) -> &'static ResistanceTable {
    match class {
        Class::Solid => &CLASS_1,
        Class::Stranded => &CLASS_2,
        Class::Flexible => &CLASS_5,
        Class::ExtraFlexible => &CLASS_6,
    }
}

/// From the table's temperature to the conductor's, by the rule of the table's own standard.
fn temperature_factor(table: &ResistanceTable, celsius: f64) -> f64 {
    if table.citation.document == TABLE_8_STRANDED.citation.document {
        1.0 + COPPER_ALPHA_75_PER_K * (celsius - table.temperature_degC)
    } else {
        (celsius - COPPER_ZERO_degC) / (table.temperature_degC - COPPER_ZERO_degC)
    }
}

/// Worst ratio of printed maximum to resistivity over area in the class's table, which covers strands longer than
/// the cable and wire at its least diameter.
fn allowance(conductor: &Conductor) -> f64 {
    // Each found once, when this is compiled.
    const ALLOWANCES: [[f64; 2]; 4] = [
        [worst(&CLASS_1, Coating::Plain), worst(&CLASS_1, Coating::Tinned)],
        [worst(&CLASS_2, Coating::Plain), worst(&CLASS_2, Coating::Tinned)],
        [worst(&CLASS_5, Coating::Plain), worst(&CLASS_5, Coating::Tinned)],
        [worst(&CLASS_6, Coating::Plain), worst(&CLASS_6, Coating::Tinned)],
    ];
    let [plain, tinned] = match conductor.class {
        Class::Solid => ALLOWANCES[0],
        Class::Stranded => ALLOWANCES[1],
        Class::Flexible => ALLOWANCES[2],
        Class::ExtraFlexible => ALLOWANCES[3],
    };
    match conductor.coating {
        Coating::Plain => plain,
        Coating::Tinned => tinned,
    }
}

/// The worst ratio of a metric table, at least 1.
#[allow(clippy::indexing_slicing)] // const: no iterator there, and the compiler sees every index
const fn worst(table: &ResistanceTable, coating: Coating) -> f64 {
    let mut worst = 1.0;
    let mut place = 0;
    while place < table.rows.len() {
        let row = &table.rows[place];
        let printed = match coating {
            Coating::Plain => row.plain,
            Coating::Tinned => row.coated,
        };
        if let (Some(printed), Designation::SquareMillimeter(area)) = (printed, row.size.designation()) {
            let ratio = printed * 1e-3 * area / COPPER_OHM_MM2_PER_M;
            if ratio > worst {
                worst = ratio;
            }
        }
        place += 1;
    }
    worst
}

/// Resistivity over the nominal area, Ω/m.
fn from_area(conductor: &Conductor, celsius: f64) -> f64 {
    ohm_mm2_per_m(conductor.material, celsius) / conductor.size.area_mm2()
}

fn ohm_mm2_per_m(material: Material, celsius: f64) -> f64 {
    let (at_20, zero) = match material {
        Material::Copper => (COPPER_OHM_MM2_PER_M, COPPER_ZERO_degC),
        Material::Aluminium => (ALUMINIUM_OHM_MM2_PER_M, ALUMINIUM_ZERO_degC),
        Material::CopperCladAluminium => (COPPER_CLAD_OHM_MM2_PER_M, ALUMINIUM_ZERO_degC),
    };
    at_20 * (celsius - zero) / (20.0 - zero)
}

fn per_meter(ohm_per_m: f64) -> LinearResistance {
    ElectricalResistance::new::<ohm>(ohm_per_m) / Length::new::<meter>(1.0)
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::super::series::{AWG_SERIES, METRIC_SERIES, awg, mm2};
    use super::super::{Compound, Insulation};
    use super::*;
    use crate::quantity::ConductorSize;
    use std::string::ToString;

    const CLASSES: [Class; 4] = [Class::Solid, Class::Stranded, Class::Flexible, Class::ExtraFlexible];
    const COATINGS: [Coating; 2] = [Coating::Plain, Coating::Tinned];
    const METALS: [Material; 3] = [Material::Copper, Material::Aluminium, Material::CopperCladAluminium];

    fn conductor(size: ConductorSize, class: Class) -> Conductor {
        Conductor {
            size,
            material: Material::Copper,
            class,
            coating: Coating::Plain,
            insulation: Insulation::new(Compound::Pvc, 70.0).unwrap(),
        }
    }

    fn at(celsius: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(celsius)
    }

    fn ohm_per_km(conductor: &Conductor, celsius: f64) -> f64 {
        linear_resistance(conductor, at(celsius)).unwrap().value * 1000.0
    }

    #[test]
    fn tabled_sizes_give_the_printed_figure_at_the_printed_temperature() {
        assert!((ohm_per_km(&conductor(mm2(35.0), Class::Flexible), 20.0) - 0.554).abs() < 1e-12);
        assert!((ohm_per_km(&conductor(mm2(70.0), Class::Stranded), 20.0) - 0.268).abs() < 1e-12);
        let six = conductor(awg(6), Class::Stranded);
        assert!((ohm_per_km(&six, 75.0) - 0.491 / 0.3048).abs() < 1e-12);
        // R2 = R1·[1 + 0.00323·(t − 75)].
        assert!((ohm_per_km(&six, 25.0) - 0.491 / 0.3048 * (1.0 - 0.00323 * 50.0)).abs() < 1e-12);
    }

    #[test]
    fn flexible_awg_is_never_below_its_stranded_row() {
        for size in AWG_SERIES {
            let stranded = ohm_per_km(&conductor(size, Class::Stranded), 75.0);
            for class in [Class::Flexible, Class::ExtraFlexible] {
                assert!(ohm_per_km(&conductor(size, class), 75.0) >= stranded, "{size}");
            }
        }
    }

    #[test]
    fn untabled_sizes_lie_between_their_neighbours() {
        let r = |size, class| ohm_per_km(&conductor(size, class), 20.0);
        assert!(r(mm2(30.0), Class::Flexible) > r(mm2(35.0), Class::Flexible));
        assert!(r(mm2(30.0), Class::Flexible) < r(mm2(25.0), Class::Flexible));
        let odd = linear_resistance_with_source(&conductor(mm2(30.0), Class::Flexible), at(20.0)).unwrap();
        assert_eq!(odd.1.citation.seen, Seen::Derived);
        assert!(
            r(awg(9), Class::Solid) < r(awg(10), Class::Solid)
                && r(awg(9), Class::Solid) > r(awg(8), Class::Solid)
        );
    }

    #[test]
    fn thicker_hotter_and_least_are_ordered_whatever_the_conductor() {
        let runs = [&METRIC_SERIES[..], &AWG_SERIES[..]].into_iter();
        for (series, class) in runs.flat_map(|series| CLASSES.map(|class| (series, class))) {
            for coating in COATINGS {
                for material in METALS {
                    let of = |size| Conductor { material, coating, ..conductor(size, class) };
                    for pair in series.windows(2) {
                        assert!(
                            ohm_per_km(&of(pair[1]), 20.0) < ohm_per_km(&of(pair[0]), 20.0),
                            "{} {class:?} {coating:?} {material:?}",
                            pair[1]
                        );
                    }
                    for &size in series {
                        let of = of(size);
                        assert!(ohm_per_km(&of, 90.0) > ohm_per_km(&of, -40.0));
                        for celsius in [-80.0, -40.0, 20.0, 250.0] {
                            let least = least_linear_resistance(&of, at(celsius)).unwrap().0;
                            let most = linear_resistance(&of, at(celsius)).unwrap();
                            assert!(least.value > 0.0 && least <= most, "{size} {class:?} at {celsius}");
                        }
                    }
                }
            }
        }
    }

    #[test]
    fn tinned_is_never_below_plain() {
        for class in CLASSES {
            for size in METRIC_SERIES.into_iter().chain(AWG_SERIES) {
                let plain = conductor(size, class);
                let tinned = Conductor { coating: Coating::Tinned, ..plain };
                assert!(ohm_per_km(&tinned, 20.0) > ohm_per_km(&plain, 20.0), "{size} {class:?}");
            }
        }
    }

    #[test]
    fn recalled_cells_say_so() {
        let seen = |size, class| {
            linear_resistance_with_source(&conductor(size, class), at(20.0)).unwrap().1.citation.seen
        };
        assert_eq!(seen(mm2(35.0), Class::Flexible), Seen::Recalled);
        assert_eq!(seen(mm2(25.0), Class::Flexible), Seen::Page);
        assert_eq!(seen(mm2(25.0), Class::ExtraFlexible), Seen::Recalled);
        assert_eq!(seen(awg(2), Class::Stranded), Seen::Recalled);
        assert_eq!(seen(awg(6), Class::Stranded), Seen::Page);
    }

    #[test]
    fn all_functions_answer_the_same_temperatures() {
        assert_eq!(ENTRIES[0].inputs[1].range, Allowed::Between(RANGE_degC.0, RANGE_degC.1));
    }

    #[test]
    fn temperature_outside_the_range_is_named_in_the_error() {
        let conductor = conductor(mm2(16.0), Class::Flexible);
        for odd in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -80.5, 250.5, -300.0] {
            let error = linear_resistance(&conductor, at(odd)).unwrap_err();
            assert_eq!(error.slug(), "out-of-range");
            assert!(error.to_string().starts_with("conductor temperature is "), "{error}");
            assert!(least_linear_resistance(&conductor, at(odd)).is_err());
            assert!(resistivity(Material::Copper, at(odd)).is_err());
        }
        for edge in [-80.0, 250.0] {
            assert!(linear_resistance(&conductor, at(edge)).is_ok(), "{edge}");
        }
    }

    proptest::proptest! {
        #[test]
        fn any_bits_give_an_answer_or_an_error(size: u64, celsius: u64) {
            let Ok(size) = ConductorSize::mm2(f64::from_bits(size)) else { return Ok(()) };
            for class in CLASSES {
                if let Ok(r) = linear_resistance(&conductor(size, class), at(f64::from_bits(celsius))) {
                    assert!(r.value > 0.0 && r.value.is_finite());
                }
            }
        }

        #[test]
        fn every_size_and_temperature_in_range_has_a_resistance(area in 0.01..1000.0f64, celsius in -79.9..249.9f64) {
            let of = conductor(ConductorSize::mm2(area).unwrap(), Class::Flexible);
            assert!(linear_resistance(&of, at(celsius)).is_ok());
        }
    }
}
