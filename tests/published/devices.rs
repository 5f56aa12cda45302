//! Devices, adiabatic k and banks against `tests/reference/protection.toml` and `battery.toml`, both ways.
//!
//! Not covered: type D breakers, steel conductors, mineral insulation by table (not held).

use ampwright::battery::{Chemistry, charge_bands, charge_limit, discharge_limit, short_circuit_estimate};
use ampwright::cable::{Compound, Insulation, Material, adiabatic_k, adiabatic_k_between};
use ampwright::citation::Seen;
use ampwright::device::{Family, Start};
use ampwright::quantity::{ConductorSize, ElectricCharge, ElectricCurrent, ThermodynamicTemperature};
use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_current_density::ampere_per_square_millimeter;
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::conductors::{Row, Table};

const PROTECTION: &str = include_str!("../reference/protection.toml");
const BATTERY: &str = include_str!("../reference/battery.toml");

fn amperes(value: f64) -> ElectricCurrent {
    ElectricCurrent::new::<ampere>(value)
}

/// k between two temperatures, A·√s/mm².
fn between(material: Material, initial: f64, end: f64) -> f64 {
    adiabatic_k_between(material, at(initial), at(end)).unwrap().get::<ampere_per_square_millimeter>()
}

fn at(celsius: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(celsius)
}

/// Source: NFPA 70-2023, 240.6(A), 15 to 600 A page seen. Exact, as far as each family reaches; class T also in the
/// additional fuse ratings 1, 3, 6 A of the same rule.
#[test]
fn standard_ratings_of_american_families() {
    let table = Table::read(PROTECTION, "nec-240-6-a-standard-ratings");
    let standard: Vec<f64> = table.rows().map(|row| row.number("rating_A").unwrap()).collect();
    let upto_1200 = |least: f64| -> Vec<f64> {
        standard.iter().copied().filter(|rating| (least..=1200.0).contains(rating)).collect()
    };
    assert_eq!(Family::MoldedCase.ratings_A(), upto_1200(15.0));
    assert_eq!(Family::ClassT.ratings_A(), [vec![1.0, 3.0, 6.0], upto_1200(10.0)].concat());
}

/// Source: IEC 60898-3, DC bands, recalled. Exact.
#[test]
fn instantaneous_bands_on_dc() {
    let table = Table::read(PROTECTION, "iec-60898-3-dc-trip-bands");
    assert_eq!(table.len(), 2);
    for row in table.rows() {
        let family = if row.text("type") == "B" { Family::MiniatureB } else { Family::MiniatureC };
        let (lower, upper) = family.data().instantaneous.unwrap();
        row.check("no_trip", lower, 0.0);
        row.check("trip", upper, 0.0);
        assert_eq!(family.data().source.seen, Seen::Recalled);
    }
}

/// Source: IEC 60898-1, AC bands, page seen. The recalled DC edges are 1.33 to 1.5 times the AC ones, for a trip
/// follows the peak of the wave: an outside check on them. Type D is not held.
#[test]
fn dc_bands_lie_above_the_ac_bands_by_the_peak_factor() {
    let table = Table::read(PROTECTION, "iec-60898-trip-bands");
    let types: Vec<_> = table.rows().map(|row| row.text("type").to_owned()).collect();
    assert_eq!(types, ["B", "C", "D"]);
    for (row, family) in table.rows().zip([Family::MiniatureB, Family::MiniatureC]) {
        let (lower, upper) = family.data().instantaneous.unwrap();
        for (column, ours) in [("no_trip", lower), ("trip", upper)] {
            let ratio = ours / row.number(column).unwrap();
            assert!((1.33..=1.5).contains(&ratio), "IEC 60898-1 {family} {column}: ratio {ratio}");
        }
    }
}

fn check_band(row: &Row<'_>, family: Family, rating: f64, columns: (&str, &str)) {
    let band = family.conventional(amperes(rating)).unwrap();
    row.check(columns.0, band.non_operating_ratio, 0.0);
    row.check(columns.1, band.operating_ratio, 0.0);
    row.check("time_h", band.time_h, 0.0);
    assert_eq!(family.non_operating_ratio(amperes(rating)), Some(band.non_operating_ratio));
    assert_eq!(family.operating_ratio(amperes(rating)), Some(band.operating_ratio));
}

/// Source: IEC 60898-1 and IEC 60947-2, page seen. Exact, on both sides of 63 A.
#[test]
fn conventional_currents_of_breakers() {
    let table = Table::read(PROTECTION, "iec-breaker-conventional-currents");
    assert_eq!(table.len(), 4);
    for row in table.rows() {
        let name = row.text("device");
        // IEC 60898-1 ends at 125 A; beyond the largest rating of a family nothing is held.
        let ratings: &[f64] = match (name.ends_with("≤ 63 A"), name.starts_with("IEC 60898-1")) {
            (true, _) => &[6.0, 16.0, 63.0],
            (false, true) => &[63.1, 80.0, 125.0],
            (false, false) => &[63.1, 80.0, 1000.0],
        };
        let families: &[Family] = if name.starts_with("IEC 60898-1") {
            &[Family::MiniatureB, Family::MiniatureC]
        } else {
            &[Family::Industrial]
        };
        for &family in families {
            assert_eq!(family.data().conventional.len(), 2);
            for &rating in ratings {
                check_band(&row, family, rating, ("non_tripping", "tripping"));
            }
        }
    }
}

/// Source: IEC 60269-1/-2 (gG), operating factors page seen; IEC 60269-6 (gPV), recalled. Exact, at both edges and
/// within each band: In ≤ 4; 4 < In < 16; 16 ≤ In ≤ 63; then above the lower edge.
#[test]
fn conventional_currents_of_fuse_links() {
    for (id, family) in
        [("iec-60269-gg-conventional", Family::Gg), ("iec-60269-gpv-conventional", Family::Gpv)]
    {
        let table = Table::read(PROTECTION, id);
        let bands = family.data().conventional;
        assert_eq!(bands.len(), table.len(), "{id}");
        for (row, band) in table.rows().zip(bands) {
            let (least, most) = (row.number("In_min_A").unwrap(), row.number("In_max_A"));
            assert!(matches!(band.start, Start::Above(a) | Start::At(a) if a == least), "{id} {least}");
            let edge_belongs_to_next = family == Family::Gg && most == Some(16.0);
            let top = most.map_or(1250.0, |most| if edge_belongs_to_next { most.next_down() } else { most });
            for rating in [least.next_up(), f64::midpoint(least, top), top] {
                check_band(&row, family, rating, ("non_fusing", "fusing"));
            }
        }
    }
    assert_eq!(Family::Gg.operating_ratio(amperes(16.0)), Some(1.6));
}

/// Compound, rating and a size that a row of the adiabatic tables speaks of; `None` for what is not held.
fn insulation_of(name: &str, initial: f64) -> Option<(Insulation, ConductorSize)> {
    let size = ConductorSize::mm2(if name.contains("> 300") { 400.0 } else { 300.0 }).unwrap();
    let (compound, rating) = if name.starts_with("PVC") {
        (Compound::Pvc, if name.contains("90 °C") { 90.0 } else { 70.0 })
    } else if name.contains("XLPE") {
        (Compound::Xlpe, 90.0)
    } else if name.starts_with("rubber") {
        (Compound::Rubber, if name.contains("85") { 85.0 } else { 60.0 })
    } else if name.starts_with("silicone") {
        (Compound::Silicone, 180.0)
    } else {
        assert!(name.starts_with("mineral"), "{name}");
        return None;
    };
    assert!(initial == rating || initial == 30.0, "{name}");
    Some((Insulation::new(compound, rating).unwrap(), size))
}

const METALS: [(&str, Material); 2] = [("copper", Material::Copper), ("aluminium", Material::Aluminium)];

/// Source: IEC 60364-4-43:2008, Table 43A, and IEC 60364-5-54:2011, Table A.54.4; copper page seen, aluminium and
/// silicone partly recalled. Exact. Steel is not held; mineral insulation has no compound here and is compared by the
/// formula, 0.5 (printed to the unit).
#[test]
fn adiabatic_k_of_conductors_at_their_rating() {
    let mut held = 0;
    for id in ["iec-adiabatic-k-line", "iec-adiabatic-k-pe-core"] {
        for row in Table::read(PROTECTION, id).rows() {
            let (initial, end) = (row.number("initial_C").unwrap(), row.number("final_C").unwrap());
            for (column, material) in METALS {
                if let Some((insulation, size)) = insulation_of(row.text("insulation"), initial) {
                    row.check("final_C", insulation.short_circuit_degC(size), 0.0);
                    let k = adiabatic_k(material, insulation, size).unwrap();
                    assert_ne!(
                        k.citation.seen,
                        Seen::Derived,
                        "{insulation}: the table's cell, not the formula"
                    );
                    // A recalled cell yields to the formula where that is lower: within the rounding to the unit.
                    row.check(column, k.value, if k.citation.seen == Seen::Recalled { 0.5 } else { 0.0 });
                    held += usize::from(id == "iec-adiabatic-k-pe-core");
                } else if row.number(column).is_some() {
                    row.check(column, between(material, initial, end), 0.5);
                }
            }
        }
    }
    // PVC 90 °C above 300 mm² stands in Table 43A only: eight rows are ours, seven of them here.
    assert_eq!(held, 2 * (ampwright::cable::ADIABATIC_K.len() - 1));
}

/// Source: IEC 60364-5-54:2011, Table A.54.2, partly page seen: insulated protective conductors that start at 30 °C.
/// Tolerance 0.5: printed to the unit.
#[test]
fn adiabatic_k_of_separate_protective_conductors() {
    let table = Table::read(PROTECTION, "iec-adiabatic-k-pe-separate");
    assert_eq!(table.len(), 7);
    for row in table.rows() {
        let (insulation, size) = insulation_of(row.text("insulation"), 30.0).unwrap();
        let (initial, end) = (row.number("initial_C").unwrap(), insulation.short_circuit_degC(size));
        row.check("final_C", end, 0.0);
        for (column, material) in METALS {
            row.check(column, between(material, initial, end), 0.5);
        }
    }
}

/// Source: common handbook values, recalled (LFP rates page seen). Exact, at 25 °C. Nickel-cadmium and NMC are
/// recalled by us and stand in no table.
#[test]
fn charge_rates_by_chemistry() {
    let table = Table::read(BATTERY, "charge-rates");
    let mut seen = Vec::new();
    for row in table.rows() {
        let chemistry = match row.text("chemistry") {
            "flooded lead-acid" => Chemistry::Flooded,
            "gel lead-acid" => Chemistry::Gel,
            "AGM lead-acid" => Chemistry::Agm,
            "lithium iron phosphate" => Chemistry::Lfp,
            other => panic!("{other}"),
        };
        let limit = charge_limit(chemistry, at(25.0)).unwrap();
        row.check("recommended_high", limit.usual.get(), 0.0);
        row.check("usual_maximum", limit.ceiling.get(), 0.0);
        // The lower edge is a least rate for lead-acid only: lithium does without.
        match limit.least {
            Some(least) => row.check("recommended_low", least.get(), 0.0),
            None => assert_eq!(chemistry, Chemistry::Lfp),
        }
        seen.push(chemistry);
    }
    let missing: Vec<_> = Chemistry::ALL.into_iter().filter(|c| !seen.contains(c)).collect();
    assert_eq!(missing, [Chemistry::Nmc, Chemistry::NickelCadmium]);
}

/// Source: cell data sheets, page seen. Limits of temperature exact; charge rates at the ends of each row. Between 5
/// and 15 °C ours is lower, 0.2 /h, after another sheet named in the table's note.
#[test]
fn lfp_temperature_limits() {
    let bands = charge_bands(Chemistry::Lfp);
    let charge = |celsius| charge_limit(Chemistry::Lfp, at(celsius)).unwrap().usual.get();
    let discharge = |celsius| discharge_limit(Chemistry::Lfp, at(celsius)).unwrap().unwrap().0.get();
    let table = Table::read(BATTERY, "lfp-temperature-limits");
    assert_eq!(table.len(), 3);
    for row in table.rows() {
        let (least, most) = (row.number("minimum_C").unwrap(), row.number("maximum_C").unwrap());
        match row.text("operation") {
            "charge" => {
                row.check("minimum_C", bands[0].from_degC, 0.0);
                row.check("maximum_C", bands[bands.len() - 1].upto_degC, 0.0);
                row.check("rate_limit_C_rate", charge(most), 0.0);
                assert_eq!((charge(least - 0.1), charge(most + 0.1)), (0.0, 0.0));
                assert_eq!((charge(5.1), charge(15.0), charge(15.1)), (0.2, 0.2, 0.5));
            }
            "charge, cold band" => {
                row.check("rate_limit_C_rate", charge(least), 0.0);
                row.check("rate_limit_C_rate", charge(most), 0.0);
            }
            "discharge" => {
                row.check("rate_limit_C_rate", discharge(least), 0.0);
                row.check("rate_limit_C_rate", discharge(most), 0.0);
                assert_eq!((discharge(least - 0.1), discharge(most + 0.1)), (0.0, 0.0));
            }
            other => panic!("{other}"),
        }
    }
}

/// Source: low-voltage DC distribution guide, page seen. Exact, amperes per ampere-hour.
#[test]
fn short_circuit_current_of_lead_acid_from_capacity() {
    let table = Table::read(PROTECTION, "battery-short-circuit-estimate");
    assert_eq!(table.len(), 2);
    let bank = ElectricCharge::new::<ampere_hour>(1.0);
    for chemistry in [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel] {
        let estimate = short_circuit_estimate(chemistry, bank).unwrap();
        for row in table.rows() {
            let ours = if row.text("quantity") == "usual" { estimate.usual } else { estimate.upper };
            // 1e-12: one ampere-hour passes through coulombs.
            row.check("k", ours.get::<ampere>(), 1e-12);
        }
    }
}
