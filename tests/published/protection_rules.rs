//! Device ratings, small-conductor limits, protective conductors, drop and position limits of the rule sets,
//! against `tests/reference/protection.toml`.

use ampwright::cable::Material;
use ampwright::citation::Seen;
use ampwright::quantity::{ConductorSize, ElectricCurrent};
use ampwright::rules::{LoadUse, ProtectiveRule, Rules};
use toml::Value;
use uom::si::{electric_current::ampere, length::millimeter, ratio::percent};

use super::ampacity::{case, gauge, number, size, table};

fn rules(word: &str) -> Rules {
    Rules::named(word).expect("rule set")
}

fn amperes(value: f64) -> ElectricCurrent {
    ElectricCurrent::new::<ampere>(value)
}

fn most(word: &str, size: ConductorSize, corrected: f64) -> f64 {
    rules(word).device_limit(size, amperes(corrected)).most.get::<ampere>()
}

/// Source: NFPA 70-2023, 240.6(A). Page seen from 15 to 600 A, the rest recalled. Exact.
#[test]
fn nec_240_6_a() {
    let reference: Vec<f64> = table("protection", "nec-240-6-a-standard-ratings")
        .rows
        .iter()
        .filter_map(|r| number(&r[0]))
        .collect();
    assert_eq!(rules("us").standard_ratings_A(), reference);
}

/// Source: NFPA 70-2023, 240.4(D); 18 and 16 AWG recalled. Exact, and no limit from 8 AWG up.
#[test]
fn nec_240_4_d() {
    let reference = table("ampacity", "nec-240-4-d-small-conductors");
    for row in &reference.rows {
        assert_eq!(most("us", size(&row[0]), 500.0), number(&row[1]).unwrap(), "{}", size(&row[0]));
    }
    assert_eq!(rules("us").set().device.small.len(), reference.rows.len());
    assert_eq!(most("us", gauge("8"), 500.0), 500.0);
    // A metric size keeps to the row that serves it: 6 mm² to 10 AWG.
    assert_eq!(most("us", ConductorSize::mm2(6.0).unwrap(), 500.0), 30.0);
    // Small conductors take the lower of the limit and the rating above their ampacity.
    assert_eq!(most("us", gauge("10"), 17.5), 20.0);
}

/// Source: code practice example, recalled (NEC 240.4(B)). Exact.
#[test]
fn next_rating_up_for_500_kcmil() {
    let case = case("next-size-up-500kcmil");
    let ampacity = case.input("ampacity_A");
    assert_eq!(most("us", gauge("500"), ampacity), case.expected("ocpd_A"));
    let below = rules("us").standard_ratings_A().iter().copied().rfind(|r| *r <= ampacity);
    assert_eq!(below, Some(case.expected("ocpd_not_exceeding_A")));
}

/// Source: NFPA 70-2023, 240.4(B), (C), recalled in words: up to 800 A the next rating, above it none.
#[test]
fn next_rating_ends_at_800_a() {
    assert_eq!(most("us", gauge("1000"), 760.0), 800.0);
    assert_eq!(most("us", gauge("1000"), 800.0), 800.0);
    assert_eq!(most("us", gauge("1000"), 801.0), 801.0);
    // The last bit of 0.7 × 50 A or the like does not lift the choice.
    assert_eq!(most("us", gauge("1/0"), 150.0 * (1.0 + 1e-15)), 150.0);
}

/// Source: small-craft teaching gallery quoting ABYC E-11 Table VI. Page seen: 330 A, never above 495 A.
#[test]
fn small_craft_fuse_for_2_0() {
    let case = case("smallcraft-fuse-2-0-150pct");
    let found = most("craft_us", gauge("2/0"), case.input("ampacity_A"));
    assert!(found >= case.expected("fuse_100_A") && found <= case.expected("fuse_150_A"), "{found}");
    assert_eq!(found, 350.0, "the next rating in trade");
    // 0.6 A: the next rating, 1 A, is above 150 %.
    assert_eq!(most("craft_us", gauge("18"), 0.6), 0.6);
    // No set lends its limit to another.
    assert_eq!(most("craft_iso", gauge("2/0"), 330.0), 330.0);
}

/// Source: IEC 60364-4-43:2008, 433.1. Pages seen.
#[test]
fn overload_coordination() {
    let reference = table("protection", "overload-coordination");
    let size = ConductorSize::mm2(16.0).unwrap();
    assert_eq!(most("iec", size, 76.0), 76.0 * number(&reference.rows[0][1]).unwrap());
    let ratio = rules("iec").overload_ratio();
    assert_eq!((ratio.value, ratio.citation.seen), (number(&reference.rows[1][1]).unwrap(), Seen::Page));
    for word in ["us", "craft_us", "craft_iso"] {
        assert_eq!(rules(word).overload_ratio().citation.seen, Seen::Practice, "{word}");
    }
}

/// Source: NFPA 70-2023, 210.20(A), 215.3. Page seen; the other sets have no such factor.
#[test]
fn continuous_factor() {
    let reference = table("protection", "continuous-load-factors");
    assert_eq!(Some(rules("us").continuous_factor().value), number(&reference.rows[0][1]));
    for word in ["iec", "craft_us", "craft_iso"] {
        assert_eq!(rules(word).continuous_factor().value, 1.0, "{word}");
    }
    let case = case("continuous-16a-120v");
    let design = case.input("current_A") * rules("us").continuous_factor().value;
    assert_eq!(design, case.expected("ocpd_A"));
    let column = rules("us").terminal_column(gauge("12"), amperes(design), None).unwrap().unwrap();
    assert!(column.0.value >= design);
    let column = rules("us").terminal_column(gauge("14"), amperes(design), None).unwrap().unwrap();
    assert!(column.0.value < design, "12 AWG is the least");
}

/// Source: NFPA 70-2023, Table 250.122. Page seen up to 1200 A; 1600 to 4000 A recalled.
#[test]
fn nec_250_122() {
    let reference = table("protection", "nec-250-122-egc");
    let ProtectiveRule::ByDevice(held, _) = rules("us").set().protective else { panic!("us: by device") };
    assert_eq!(held.len(), reference.rows.len() + 5);
    for (row, (upto, copper, aluminium, seen)) in reference.rows.iter().zip(held) {
        let text = |v: &Value| gauge(v.as_str().unwrap());
        assert_eq!((Some(*upto), *copper, *aluminium), (number(&row[0]), text(&row[1]), text(&row[2])));
        assert_eq!(*seen, Seen::Page);
    }
    assert!(held[reference.rows.len()..].iter().all(|row| row.3 == Seen::Recalled));
    let line = gauge("1/0");
    let find = |device, metal| rules("us").protective_conductor(line, amperes(device), metal);
    assert_eq!(find(61.0, Material::Copper).unwrap().value, gauge("8"));
    assert_eq!(find(60.0, Material::Aluminium).unwrap().value, gauge("8"));
    // Never larger than the line conductor.
    assert_eq!(find(1200.0, Material::Copper).unwrap().value, line);
    assert!(find(4001.0, Material::Copper).is_err());
    assert!(find(f64::NAN, Material::Copper).is_err());
}

/// Source: IEC 60364-5-54:2011, Table 54.2. Page seen.
#[test]
fn iec_54_2() {
    let reference = table("protection", "iec-pe-minimum-size");
    assert_eq!(number(&reference.rows[0][0]), Some(16.0));
    assert_eq!(number(&reference.rows[1][1]), Some(16.0));
    let find = |mm2: f64| {
        let line = ConductorSize::mm2(mm2).unwrap();
        rules("iec").protective_conductor(line, amperes(100.0), Material::Copper).unwrap().value.area_mm2()
    };
    assert_eq!([2.5, 16.0, 25.0, 35.0, 50.0, 95.0].map(find), [2.5, 16.0, 16.0, 16.0, 25.0, 47.5]);
    assert!(
        rules("craft_us").protective_conductor(gauge("6"), amperes(100.0), Material::Copper).is_err(),
        "no table held"
    );
}

/// Source: NEC informational notes, ABYC E-11, ISO 10133, IEC Table G.52.1 as in the reference; pages seen except
/// the IEC rows. The IEC figures taken are those of a public supply: 3 and 5 %.
#[test]
fn voltage_drop() {
    let reference: Vec<f64> = table("protection", "voltage-drop-recommendations")
        .rows
        .iter()
        .filter_map(|r| number(&r[1]))
        .collect();
    let limit = |word: &str, usage| {
        let limit = rules(word).drop_limit(usage);
        (limit.ratio.get::<percent>(), limit.required)
    };
    let near = |found: (f64, bool), most: f64, required| {
        assert!((found.0 - most).abs() < 1e-12 && found.1 == required, "{found:?}, {most} %");
    };
    near(limit("us", LoadUse::Critical), reference[0], false);
    near(limit("us", LoadUse::Other), reference[1], false);
    for word in ["craft_us", "craft_iso"] {
        near(limit(word, LoadUse::Critical), reference[2], true);
        near(limit(word, LoadUse::Lighting), reference[3], true);
        near(limit(word, LoadUse::Other), reference[3], true);
    }
    near(limit("iec", LoadUse::Lighting), reference[4], false);
    near(limit("iec", LoadUse::Other), reference[5], false);
}

/// Source: 33 CFR 183.455 and ABYC E-11 (7, 40, 72 in), ISO 13297 (200 mm), IEC 60364-4-43, 434.2.1 (3 m); all
/// recalled. The page seen (ISO 13590: 180, 500, 900 mm) is for personal watercraft, no set held here.
#[test]
fn unprotected_length() {
    let length = |word: &str, sheathed, post| {
        let limit = rules(word).unfused_length(sheathed, post)?;
        assert_eq!(limit.citation.seen, Seen::Recalled, "{word}");
        Some(limit.value.get::<millimeter>())
    };
    let near = |found: Option<f64>, mm: f64| assert!((found.unwrap() - mm).abs() < 1e-9, "{found:?}");
    near(length("craft_us", false, true), 177.8);
    near(length("craft_us", true, false), 1016.0);
    near(length("craft_us", true, true), 1828.8);
    near(length("craft_iso", false, false), 200.0);
    near(length("iec", true, true), 3000.0);
    assert_eq!(length("craft_iso", true, true), None);
    near(length("us", false, true), 1524.0);
}
