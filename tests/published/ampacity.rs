//! Ampacity tables, correction factors and worked examples, cell by cell against `tests/reference`.
//!
//! Every figure of the reference must be held as printed, and every figure held must be in the reference or be
//! named here as filled in from memory; so a cell that moves on either side fails.

use ampwright::citation::Seen;
use ampwright::quantity::{ConductorSize, Designation, ElectricCurrent, ThermodynamicTemperature};
use ampwright::rules::{Ampacity, AmpacityQuery, AmpacityTable, FactorTable, Installation, Rules, Space};
use serde::Deserialize;
use toml::Value;
use uom::si::{electric_current::ampere, thermodynamic_temperature::degree_celsius};

#[derive(Deserialize)]
struct Tables {
    table: Vec<Table>,
}

/// One table of the reference.
#[derive(Deserialize)]
pub struct Table {
    id: String,
    source: String,
    confidence: String,
    columns: Vec<String>,
    /// Rows as they stand.
    pub rows: Vec<Vec<Value>>,
}

#[derive(Deserialize)]
struct Cases {
    case: Vec<Case>,
}

/// One worked example of the reference.
#[derive(Deserialize)]
pub struct Case {
    id: String,
    inputs: toml::Table,
    expected: toml::Table,
}

impl Case {
    /// A number among the inputs.
    pub fn input(&self, key: &str) -> f64 {
        number(&self.inputs[key]).unwrap_or_else(|| panic!("{}: {key} is no number", self.id))
    }

    /// A number among the results.
    pub fn expected(&self, key: &str) -> f64 {
        number(&self.expected[key]).unwrap_or_else(|| panic!("{}: {key} is no number", self.id))
    }

    /// Numbers of a list.
    pub fn list(&self, inputs: bool, key: &str) -> Vec<f64> {
        let from = if inputs { &self.inputs } else { &self.expected };
        from[key].as_array().expect(key).iter().map(|v| number(v).expect(key)).collect()
    }
}

/// A reference table by its name.
pub fn table(file: &str, id: &str) -> Table {
    let text = match file {
        "ampacity" => include_str!("../reference/ampacity.toml"),
        _ => include_str!("../reference/protection.toml"),
    };
    let tables: Tables = toml::from_str(text).expect("reference file");
    tables.table.into_iter().find(|t| t.id == id).unwrap_or_else(|| panic!("no table {id}"))
}

/// A worked example by its name.
pub fn case(id: &str) -> Case {
    let cases: Cases =
        toml::from_str(include_str!("../reference/cases-conductors.toml")).expect("reference file");
    cases.case.into_iter().find(|c| c.id == id).unwrap_or_else(|| panic!("no case {id}"))
}

/// A number, also one written as a text (`"12"`); a blank is `None`.
pub fn number(value: &Value) -> Option<f64> {
    match value {
        Value::Integer(n) => Some(*n as f64),
        Value::Float(f) => Some(*f),
        Value::String(s) => s.parse().ok(),
        _ => None,
    }
}

/// The size of a row's head: AWG and kcmil as texts, mm² as numbers.
pub fn size(value: &Value) -> ConductorSize {
    match value {
        Value::String(text) => gauge(text),
        other => ConductorSize::mm2(number(other).expect("size")).expect("size"),
    }
}

/// `14`, `1/0`, or `250` for kcmil.
pub fn gauge(text: &str) -> ConductorSize {
    if let Some(aught) = text.strip_suffix("/0") {
        return ConductorSize::awg(1 - aught.parse::<i8>().expect("size")).expect("size");
    }
    match text.parse::<u16>().expect("size") {
        n @ 212.. => ConductorSize::kcmil(n).expect("size"),
        n => ConductorSize::awg(i8::try_from(n).expect("size")).expect("size"),
    }
}

fn rules(word: &str) -> Rules {
    Rules::named(word).expect("rule set")
}

fn ampacity_table(word: &str, id: &str) -> &'static AmpacityTable {
    rules(word).set().ampacity_tables.iter().find(|t| t.id == id).unwrap_or_else(|| panic!("{word}: no {id}"))
}

fn factor_table(word: &str, id: &str) -> &'static FactorTable {
    rules(word).set().factor_tables.iter().find(|t| t.id == id).unwrap_or_else(|| panic!("{word}: no {id}"))
}

/// Compares one ampacity table both ways. `filled`: cells blank in the reference, with our recalled figure.
/// `beyond`: number of rows held after the reference's last.
fn agrees(word: &str, id: &str, filled: &[(&str, &str, f64)], beyond: usize) {
    let reference = table("ampacity", id);
    let held = ampacity_table(word, id);
    let of = |row: ConductorSize, column: &str| format!("{}, {row}, {column}", reference.source);
    assert_eq!(held.columns.len(), reference.columns.len() - 1, "{id}: columns");
    assert_eq!(held.rows.len(), reference.rows.len() + beyond, "{id}: rows");
    let mut filled_in = 0;
    for (row, (size_held, cells)) in reference.rows.iter().zip(held.rows) {
        let size = size(&row[0]);
        assert_eq!(size, *size_held, "{id}: order of rows");
        assert_eq!(cells.len(), held.columns.len(), "{id}: {size}");
        for (index, name) in reference.columns.iter().skip(1).enumerate() {
            let figure = held.printed(size, index);
            match (number(&row[index + 1]), figure) {
                (Some(printed), Some(cell)) => {
                    assert_eq!(cell.value, printed, "{}", of(size, name));
                    if reference.confidence == "memory" {
                        assert_eq!(cell.citation.seen, Seen::Recalled, "{}", of(size, name));
                    }
                }
                (None, Some(cell)) => {
                    let known = filled.iter().find(|(s, n, _)| *s == size.to_string() && n == name);
                    assert_eq!(
                        Some(cell.value),
                        known.map(|k| k.2),
                        "{}: not in the reference",
                        of(size, name)
                    );
                    assert_eq!(cell.citation.seen, Seen::Recalled, "{}", of(size, name));
                    filled_in += 1;
                }
                (Some(printed), None) => panic!("{}: {printed} A is not held", of(size, name)),
                (None, None) => {}
            }
        }
    }
    assert_eq!(filled_in, filled.len(), "{id}: filled cells");
    for (size, _) in &held.rows[reference.rows.len()..] {
        for index in 0..held.columns.len() {
            if let Some(cell) = held.printed(*size, index) {
                assert_eq!(cell.citation.seen, Seen::Recalled, "{id}: {size} is beyond the reference");
            }
        }
    }
}

/// Compares one factor table both ways; `column` of the reference with its index here.
fn factors_agree(word: &str, id: &str, filled: &[(f64, usize, f64)]) {
    let reference = table("ampacity", id);
    let held = factor_table(word, id);
    assert_eq!(held.columns.len(), reference.columns.len() - 1, "{id}: columns");
    assert_eq!(held.bands.len(), reference.rows.len(), "{id}: rows");
    let mut filled_in = 0;
    for (row, band) in reference.rows.iter().zip(held.bands) {
        let upto = match &row[0] {
            Value::String(s) if s == "more" => f64::INFINITY,
            // ISO 10133: the column of 85 to 90 °C counts from 85 °C here.
            Value::String(s) if s == "85to90" => 85.0,
            other => number(other).expect("band"),
        };
        assert_eq!(band.upto, upto, "{id}: bands");
        for index in 0..held.columns.len() {
            let place = format!("{}, {upto}, {}", reference.source, held.columns[index].name);
            match (number(&row[index + 1]), band.factors[index]) {
                (Some(printed), Some(figure)) => assert_eq!(figure, printed, "{place}"),
                (None, Some(figure)) => {
                    assert!(filled.contains(&(upto, index, figure)), "{place}: not in the reference");
                    assert_eq!(held.factor(index, upto).expect(id).citation.seen, Seen::Recalled, "{place}");
                    filled_in += 1;
                }
                (Some(printed), None) => panic!("{place}: {printed} is not held"),
                (None, None) => {}
            }
        }
    }
    assert_eq!(filled_in, filled.len(), "{id}: filled cells");
    if reference.confidence == "memory" {
        assert!(held.columns.iter().all(|c| c.seen == Seen::Recalled), "{id}: recalled");
    }
}

/// The columns named are recalled throughout, all others seen at 70 mm².
fn recalled_columns(id: &str, recalled: &[&str]) {
    let held = ampacity_table("iec", id);
    let seventy = ConductorSize::mm2(70.0).expect("size");
    for (index, column) in held.columns.iter().enumerate() {
        let seen = held.printed(seventy, index).expect("cell").citation.seen;
        assert_eq!(seen == Seen::Recalled, recalled.contains(&column.name), "{id}, {}", column.name);
    }
}

/// Source: NFPA 70-2023, Table 310.16. Pages seen up to 500 kcmil; 4 AWG at 75 °C and above 500 kcmil recalled.
#[test]
fn nec_310_16() {
    agrees("us", "nec-310-16-copper", &[("4 AWG", "75C", 85.0)], 10);
    // The cells that later editions changed were recalled, their neighbours seen.
    let held = ampacity_table("us", "nec-310-16-copper");
    let seen = |awg, column| held.printed(gauge(awg), column).expect("cell").citation.seen;
    for (awg, column) in [("14", 0), ("12", 0), ("3", 2), ("1", 2)] {
        assert_eq!(seen(awg, column), Seen::Recalled, "{awg} AWG");
        assert_eq!(seen(awg, 1), Seen::Page, "{awg} AWG, 75 °C");
    }
}

/// Source: NFPA 70-2023, Table 310.17; recalled.
#[test]
fn nec_310_17() {
    agrees("us", "nec-310-17-copper", &[("1 AWG", "75C", 195.0)], 10);
}

/// Source: IEC 60364-5-52:2009, Table B.52.2. Pages seen up to 95 mm²; D2 and larger sizes recalled.
#[test]
fn iec_b_52_2() {
    agrees("iec", "iec-b52-2-pvc-two", &[], 5);
    recalled_columns("iec-b52-2-pvc-two", &["D2"]);
}

/// Source: IEC 60364-5-52:2009, Table B.52.3. Pages seen up to 95 mm²; B1 16 mm², D2, larger sizes recalled.
#[test]
fn iec_b_52_3() {
    agrees("iec", "iec-b52-3-xlpe-two", &[("16 mm2", "B1", 100.0)], 5);
    recalled_columns("iec-b52-3-xlpe-two", &["D2"]);
}

/// Source: IEC 60364-5-52:2009, Table B.52.10. Pages seen for F and G up to 95 mm²; the rest recalled.
#[test]
fn iec_b_52_10() {
    agrees("iec", "iec-b52-10-pvc-free-air", &[], 8);
    recalled_columns("iec-b52-10-pvc-free-air", &["E, two", "E, three", "F, three flat"]);
}

/// Source: IEC 60364-5-52:2009, Table B.52.12. Pages seen for F and G up to 95 mm²; the rest recalled.
#[test]
fn iec_b_52_12() {
    agrees("iec", "iec-b52-12-xlpe-free-air", &[], 8);
    recalled_columns("iec-b52-12-xlpe-free-air", &["E, two", "E, three"]);
}

/// Source: 33 CFR 183.425, Table 5 (2015). Page seen; 8 AWG at 90 °C recalled.
#[test]
fn cfr_table_5() {
    agrees("craft_us", "cfr-33-183-425-table-5", &[("8 AWG", "90C", 70.0)], 0);
}

/// Source: ISO 10133:2012, Table A.1; recalled.
#[test]
fn iso_10133_a_1() {
    agrees("craft_iso", "iso-10133-table-a1", &[], 0);
}

/// Source: NFPA 70-2023, Tables 310.15(B)(1)(1) and (2), 310.15(C)(1), pages seen; 2020, Table 690.31(A), recalled.
#[test]
fn nec_factors() {
    factors_agree("us", "nec-310-15-b-1-ambient-30c", &[(55.0, 1, 0.67)]);
    factors_agree("us", "nec-310-15-b-1-ambient-40c", &[]);
    factors_agree("us", "nec-690-31-ambient-105-125", &[]);
    factors_agree("us", "nec-310-15-c-1-bundling", &[]);
}

/// Source: IEC 60364-5-52:2009, Tables B.52.14 and B.52.17; pages seen, cells marked in the reference recalled.
#[test]
fn iec_factors() {
    factors_agree("iec", "iec-b52-14-ambient", &[(55.0, 1, 0.76)]);
    factors_agree("iec", "iec-b52-17-grouping", &[]);
}

/// Source: 33 CFR 183.425, Table 5 notes 1 and 2 (2015), page seen; ISO 10133:2012 and ISO 13297:2020, recalled.
#[test]
fn small_craft_factors() {
    factors_agree("craft_us", "cfr-33-183-425-engine-space", &[]);
    factors_agree("craft_us", "cfr-33-183-425-bundling", &[]);
    factors_agree("craft_iso", "iso-10133-engine-space", &[]);
    factors_agree("craft_iso", "iso-13297-bundling", &[]);
}

/// Source: √((Tc − Ta)/(Tc − T0)) at each row, as the reference notes. Tolerance: printed to two figures after
/// the point, 0.5 in the last. Also B.52.15 (20 °C ground), which is recalled and not in the reference.
#[test]
fn ambient_factors_follow_their_law() {
    for (word, id, base) in [
        ("us", "nec-310-15-b-1-ambient-30c", 30.0),
        ("us", "nec-310-15-b-1-ambient-40c", 40.0),
        ("us", "nec-690-31-ambient-105-125", 30.0),
        ("iec", "iec-b52-14-ambient", 30.0),
        ("iec", "iec-b52-15-ground", 20.0),
    ] {
        let held = factor_table(word, id);
        for band in held.bands {
            for (column, figure) in held.columns.iter().zip(band.factors) {
                let Some(figure) = figure else { continue };
                // The first row of the 105 and 125 °C table means 30 °C or less.
                let law = ((column.rating_degC - band.upto) / (column.rating_degC - base)).sqrt();
                assert!(
                    (figure - law).abs() <= 0.005 + 1e-9,
                    "{id}, {}, {}: {figure}, law {law}",
                    band.upto,
                    column.name
                );
            }
        }
    }
}

/// Source: the form I = A·S^m of IEC 60364-5-52:2009, Annex D, fitted to the seen sizes 25 to 95 mm² (47.5 mm²
/// taken for 50 mm²). The sizes above 95 mm² are recalled: none may lie more than 1 % above the fit. B1 and B2
/// from 150 mm² and F with three conductors from 400 mm² are printed up to 6.4 % lower.
#[test]
fn iec_sizes_recalled_do_not_exceed_their_fit() {
    let metal = |size: ConductorSize| match size.designation() {
        Designation::SquareMillimeter(50.0) => 47.5,
        _ => size.area_mm2(),
    };
    for table in rules("iec").set().ampacity_tables {
        for index in 0..table.columns.len() {
            let points: Vec<(f64, f64, f64)> = table
                .rows
                .iter()
                .filter_map(|(size, _)| {
                    Some((size.area_mm2(), metal(*size).ln(), table.cell(*size, index)?.value))
                })
                .collect();
            let seen: Vec<(f64, f64)> =
                points.iter().filter(|p| (25.0..=95.0).contains(&p.0)).map(|p| (p.1, p.2.ln())).collect();
            let count = seen.len() as f64;
            assert_eq!(seen.len(), 5, "{}", table.id);
            let (mx, my) = seen.iter().fold((0.0, 0.0), |(x, y), p| (x + p.0 / count, y + p.1 / count));
            let slope = seen.iter().map(|p| (p.0 - mx) * (p.1 - my)).sum::<f64>()
                / seen.iter().map(|p| (p.0 - mx) * (p.0 - mx)).sum::<f64>();
            for (area, log_metal, current) in points.into_iter().filter(|p| p.0 > 95.0) {
                let fit = (my + slope * (log_metal - mx)).exp();
                let off = current / fit - 1.0;
                let low = match (table.columns[index].name, area) {
                    ("B1" | "B2", 150.0..) => -0.045,
                    ("F, three trefoil" | "F, three flat", 400.0..) => -0.064,
                    _ => -0.01,
                };
                assert!(
                    (low..=0.0101).contains(&off),
                    "{}, {}, {area} mm²: {off:.4}",
                    table.id,
                    table.columns[index].name
                );
            }
        }
    }
}

/// Source: the two tables themselves: log-log interpolation between the neighbours. The sizes above 500 kcmil are
/// recalled; tolerance 2.5 %, the roughness of the seen rows.
#[test]
fn nec_sizes_recalled_are_smooth() {
    for table in rules("us").set().ampacity_tables {
        for index in 0..3 {
            let points: Vec<(f64, f64)> = table
                .rows
                .iter()
                .filter(|(size, _)| size.area_mm2() > 200.0)
                .filter_map(|(size, _)| Some((size.area_mm2().ln(), table.printed(*size, index)?.value.ln())))
                .collect();
            assert_eq!(points.len(), 12);
            for three in points.windows(3) {
                let (a, b, c) = (three[0], three[1], three[2]);
                let between = a.1 + (c.1 - a.1) * (b.0 - a.0) / (c.0 - a.0);
                assert!((b.1 - between).abs() < 0.025, "{}, column {index}: {}", table.id, b.1.exp());
            }
        }
    }
}

fn query(size: ConductorSize, rating: f64, installation: Installation) -> AmpacityQuery {
    AmpacityQuery {
        size,
        rating_degC: rating,
        installation,
        ambient: ThermodynamicTemperature::new::<degree_celsius>(30.0),
        space: Space::Ordinary,
        bundled_conductors: 2,
    }
}

fn at(query: AmpacityQuery, ambient: f64) -> AmpacityQuery {
    AmpacityQuery { ambient: ThermodynamicTemperature::new::<degree_celsius>(ambient), ..query }
}

fn answer(word: &str, query: AmpacityQuery) -> Ampacity {
    rules(word).ampacity(&query).unwrap_or_else(|error| panic!("{word}: {error}"))
}

fn current(word: &str, query: AmpacityQuery) -> f64 {
    answer(word, query).corrected.get::<ampere>()
}

/// Source: code question column (NEC 310.15, 310.16). Page seen. Exact.
#[test]
fn nine_conductors_of_12_awg() {
    let case = case("code-forum-nine-12awg-thhn");
    let found = answer(
        "us",
        AmpacityQuery {
            bundled_conductors: 9,
            ..query(gauge("12"), case.input("insulation_C"), Installation::Conduit)
        },
    );
    assert_eq!(found.base.value, case.expected("base_A"));
    assert!(found.factors.iter().any(|f| f.value == case.expected("factor")));
    assert!((found.corrected.get::<ampere>() - case.expected("ampacity_A")).abs() < 1e-9);
    // Still good for a 20 A circuit.
    let limit = rules("us").device_limit(gauge("12"), found.corrected);
    assert_eq!(limit.most.get::<ampere>(), 20.0);
}

/// Source: code training article (NEC Table 310.15(B)(1)). Page seen. Exact.
#[test]
fn ten_awg_at_120_fahrenheit() {
    let case = case("code-training-10awg-120f");
    let ambient = (case.input("ambient_F") - 32.0) / 1.8;
    let found =
        answer("us", at(query(gauge("10"), case.input("insulation_C"), Installation::Conduit), ambient));
    assert_eq!(found.base.value, case.expected("base_A"));
    assert!(found.factors.iter().any(|f| f.value == case.expected("factor")));
    assert!((found.corrected.get::<ampere>() - case.expected("ampacity_A")).abs() < 1e-9);
}

/// Source: city permit calculation sheet (2013 state code). Page seen.
/// DIFFERENCE: the sheet's adder of 22 K and its factor 0.58 (61 to 70 °C) are of an older table; at its 62.9 °C the
/// table held gives 0.65 (61 to 65 °C), so the current it needs, 32.97 A, asks for 29.4 A of table ampacity.
#[test]
fn permit_sheet_for_photovoltaic_conductors() {
    let case = case("permit-pv-15a3");
    let design = case.input("current_A") * case.input("continuous_factor");
    assert!((design - case.expected("design_current_A")).abs() < 1e-9);
    let rating = rules("us").standard_ratings_A().iter().copied().find(|r| *r >= design);
    assert_eq!(rating, Some(case.expected("ocpd_A")));
    let found = answer(
        "us",
        at(query(gauge("10"), 90.0, Installation::Conduit), case.expected("adjusted_ambient_C")),
    );
    assert_eq!(found.base.value, case.expected("table_ampacity_A"));
    assert!((design / case.input("ambient_factor") - case.expected("needed_table_ampacity_A")).abs() < 0.1);
    assert!((found.corrected.get::<ampere>() - 40.0 * 0.65).abs() < 1e-9);
    assert!(found.corrected.get::<ampere>() >= design);
}

/// Source: NFPA 70-2023, 310.15(B)(2), recalled: 33 K above a roof. 30 °C becomes 63 °C, factor 0.65.
#[test]
fn rooftop_adder() {
    let found = answer(
        "us",
        AmpacityQuery { space: Space::Rooftop, ..query(gauge("10"), 90.0, Installation::Conduit) },
    );
    assert_eq!(found.factors[0].value, 0.65);
    for word in ["iec", "craft_iso", "craft_us"] {
        let on_roof =
            AmpacityQuery { space: Space::Rooftop, ..query(gauge("10"), 90.0, Installation::Clipped) };
        assert!(rules(word).ampacity(&on_roof).is_err(), "{word}");
    }
}

/// Source: solar owner article, wire size part (NEC 310.16). Page seen.
/// DIFFERENCE: 0.58 is the older value for 61 to 70 °C; the table held gives it at 66 to 70 °C, used here.
#[test]
fn photovoltaic_cable_at_70_degrees() {
    let case = case("pv-use2-rooftop-058");
    let figures = case.list(false, "ampacity_A");
    for ((gauge_text, base), expected) in
        ["10", "12", "14"].iter().zip(case.list(true, "base_A")).zip(figures)
    {
        let found = answer("us", at(query(gauge(gauge_text), 90.0, Installation::Conduit), 70.0));
        assert_eq!(found.base.value, base);
        assert!((found.corrected.get::<ampere>() - expected).abs() < 0.005);
    }
    assert!((case.input("circuit_current_A") * 1.25 - case.expected("needed_A")).abs() < 0.005);
}

/// Source: wiring forum question (BS 7671 method): tabled rating = device / factors. Page seen.
/// DIFFERENCE: its 1.03 for 25 °C is of another insulation table and its 0.90 of single-layer spaced cables; the
/// method is checked with the case's factors, and that our factor at 25 °C for PVC is 1.06.
#[test]
fn tabled_rating_for_a_32_a_device() {
    let case = case("bs7671-it-32a-25c");
    let needed = case.input("device_A") / (case.input("ca") * case.input("cg"));
    assert!((needed - case.expected("it_A")).abs() < 0.005);
    let found = answer("iec", at(query(ConductorSize::mm2(6.0).unwrap(), 70.0, Installation::Clipped), 25.0));
    assert_eq!(found.factors[0].value, 1.06);
}

/// Source: Basic electrical installation textbook, cable size example. Page seen. 10 mm² in an insulated wall is
/// 43 A in its newer edition: column A2 of B.52.2.
#[test]
fn shower_circuit_at_35_degrees() {
    let case = case("textbook-shower-it-35c");
    assert!((case.input("device_A") / case.input("ca") - case.expected("it_A")).abs() < 0.005);
    let wall = |mm2: f64| {
        at(query(ConductorSize::mm2(mm2).unwrap(), 70.0, Installation::CableInInsulatedWall), 35.0)
    };
    let found = answer("iec", wall(case.expected("size_mm2")));
    assert_eq!((found.base.value, found.factors[0].value), (43.0, case.input("ca")));
    assert!(found.corrected.get::<ampere>() >= case.input("device_A"));
    assert!(current("iec", wall(6.0)) < case.input("device_A"));
}

/// Source: machine installation manual after IEC 60364-5-52 (B.52.14 at 45 °C). Page seen. Three loaded conductors
/// are not held (a DC run has two); its ambient factor is.
#[test]
fn ambient_factor_of_the_b2_example() {
    let case = case("iec-method-b2-pvc-45c");
    let factor = factor_table("iec", "iec-b52-14-ambient").factor(0, case.input("ambient_C")).unwrap().value;
    assert_eq!(factor, case.input("factor"));
    for (base, expected) in case.list(true, "base_A").iter().zip(case.list(false, "ampacity_A")) {
        assert_eq!((base * factor).round(), expected);
    }
}

/// Source: ABYC E-11 and 33 CFR 183.425 Table 5 with note 1, as reprinted. Page seen. Tolerance: printed to whole
/// amperes, halves down.
#[test]
fn small_craft_105_degree_cable() {
    for row in table("ampacity", "smallcraft-105c-cable").rows {
        let run = query(size(&row[0]), 105.0, Installation::Loom);
        let inside = AmpacityQuery { space: Space::Engine, ..run };
        assert_eq!(current("craft_us", run), number(&row[1]).unwrap(), "{}", run.size);
        let found = current("craft_us", inside);
        assert!((found - number(&row[2]).unwrap()).abs() <= 0.5 + 1e-9, "{}: {found}", run.size);
    }
}

/// Source: boat-cable amperage table as reprinted (Table 5 × notes 1 and 2). Page seen. Tolerance: printed to
/// 0.1 A, 0.05 of it; some cells to whole amperes.
#[test]
fn small_craft_105_degree_cable_bundled() {
    for row in table("ampacity", "smallcraft-105c-bundled").rows {
        for (index, conductors) in [2, 2, 3, 3, 6, 6, 24, 24].into_iter().enumerate() {
            let space = if index % 2 == 0 { Space::Ordinary } else { Space::Engine };
            let run = query(size(&row[0]), 105.0, Installation::Loom);
            let found = current("craft_us", AmpacityQuery { space, bundled_conductors: conductors, ..run });
            let printed = number(&row[index + 1]).unwrap();
            let places = if printed.fract() == 0.0 { 0.5 } else { 0.05 };
            assert!(
                (found - printed).abs() <= places + 1e-9,
                "{}, {conductors}: {found}, printed {printed}",
                run.size
            );
        }
    }
}

/// Source: small-craft wire sizing sheet, 100 A over a 10 ft circuit: 8 AWG carries 80 A, 6 AWG 120 A. Page seen.
#[test]
fn small_craft_100_a_takes_6_awg() {
    let case = case("smallcraft-100a-10ft-24v-3pct");
    let carries =
        |awg| current("craft_us", query(gauge(awg), case.input("insulation_C"), Installation::FreeAir));
    assert!(carries("8") < case.input("current_A") && carries("6") >= case.input("current_A"));
}

/// Source: code practice example, recalled (NEC 310.10(G), Table 310.16): two sets in separate raceways. Exact.
#[test]
fn parallel_sets() {
    let case = case("parallel-3-0-two-sets");
    let one = current("us", query(gauge("3/0"), 75.0, Installation::Conduit));
    assert_eq!(one, case.input("ampacity_one_A"));
    assert_eq!(one * case.input("sets"), case.expected("ampacity_A"));
}

/// Source: public PV suggested-practices manual, design example, recalled: 10 AWG free air 90 °C 55 A × 0.58.
#[test]
fn ten_awg_in_free_air_above_a_roof() {
    let case = case("pv-direct-pump-subarray");
    let found = current("us", at(query(gauge("10"), 90.0, Installation::FreeAir), 70.0));
    assert!((found - 31.9).abs() < 1e-9);
    assert!(found >= case.expected("subarray_conductor_ampacity_A"));
}

/// Source: facts of the trade, common practice, no source: 4 AWG copper 75 °C 85 A; 6 AWG under the craft table at
/// 105 °C 120 A where practice says 115 A; 105 °C counts as 90 °C under `us` and `iec`.
#[test]
fn facts_of_the_trade() {
    assert_eq!(current("us", query(gauge("4"), 75.0, Installation::Conduit)), 85.0);
    assert_eq!(current("craft_us", query(gauge("6"), 105.0, Installation::FreeAir)), 120.0);
    assert_eq!(current("us", query(gauge("6"), 105.0, Installation::Conduit)), 75.0);
    let sixteen = ConductorSize::mm2(16.0).unwrap();
    assert_eq!(current("iec", query(sixteen, 105.0, Installation::Conduit)), 100.0);
    // Nothing of one set is used in another: 60 °C insulation has no column under `iec`.
    assert!(rules("iec").ampacity(&query(sixteen, 60.0, Installation::Conduit)).is_err());
    assert_eq!(
        rules("us").standard_ratings_A().iter().copied().find(|r| *r >= 83.3),
        Some(90.0),
        "800 W at 12 V × 1.25"
    );
    let device = rules("us").device_limit(gauge("4"), ElectricCurrent::new::<ampere>(85.0));
    assert_eq!(device.most.get::<ampere>(), 90.0);
}
