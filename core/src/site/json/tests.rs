//! The committed schemas are those of the declarations; numbers and words come out as they should.

extern crate std;

use alloc::string::ToString;
use std::path::Path;

use serde_json::Value;
use uom::si::electric_current::ampere;
use uom::si::electrical_resistance::ohm;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::comparison::Comparison;
use super::number::{degC, exact, tidy};
use super::report::Report;
use super::schema::document;
use crate::quantity::{ElectricCurrent, ElectricalResistance, Power, Ratio, ThermodynamicTemperature};
use crate::site::reading::{Cause, CauseKind, Implied, Measured, NextMeasurement, ReadingLine, Verdict};

/// `AMPWRIGHT_REGENERATE=1` writes them anew.
fn is_committed(name: &str, schema: &str) {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("schema").join(name);
    if std::env::var_os("AMPWRIGHT_REGENERATE").is_some() {
        std::fs::write(&path, schema).unwrap();
    }
    let kept = std::fs::read_to_string(&path).unwrap_or_default();
    assert!(
        kept == schema,
        "core/schema/{name} is not what the code writes; AMPWRIGHT_REGENERATE=1 writes it anew"
    );
}

#[test]
fn the_schemas_are_the_committed_ones() {
    is_committed("report-1.json", &document::<Report>("ampwright.report/1"));
    is_committed("comparison-1.json", &document::<Comparison>("ampwright.comparison/1"));
}

#[test]
fn what_is_no_number_is_null() {
    for value in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        assert_eq!((tidy(value), exact(value)), (None, None));
    }
    assert_eq!(exact(-0.0).map(f64::is_sign_negative), Some(false));
    assert_eq!(tidy(-1e-300), Some(-1e-300));
    assert_eq!(tidy(f64::MAX), Some(1.79769313486e308));
}

#[test]
fn conversions_leave_no_digits_behind() {
    assert_eq!(tidy(0.1 + 0.2), Some(0.3));
    assert_eq!(exact(0.1 + 0.2), Some(0.30000000000000004));
    for value in [-40.0, -25.0, -0.1, 0.0, 0.1, 30.0, 61.3, 160.0] {
        assert_eq!(degC(ThermodynamicTemperature::new::<degree_celsius>(value)), Some(value));
    }
}

/// A resistance without upper end, as a reading that cannot tell one gives it.
#[test]
fn a_bound_without_end_is_null_and_its_text_survives() {
    let ohms = |least, greatest| {
        (ElectricalResistance::new::<ohm>(least), ElectricalResistance::new::<ohm>(greatest))
    };
    let line = ReadingLine {
        name: "bell\u{7}, tab\t, \"quoted\" \\ and \u{2028}".to_string(),
        line: 0,
        at: "lights".to_string(),
        measured: Measured::Density(f64::NAN),
        tolerance: "\u{0}".to_string(),
        predicted: Some((Measured::Density(1.1), Measured::Density(f64::INFINITY))),
        basis: "\u{1b}[31m".to_string(),
        verdict: Verdict::NotComparable("a datum".to_string()),
        implied: alloc::vec![
            Implied::Resistance {
                circuit: "lights".to_string(),
                extra: ohms(0.002, f64::INFINITY),
                current: ElectricCurrent::new::<ampere>(10.0),
                heat: (Power::new::<watt>(0.2), Power::new::<watt>(f64::INFINITY)),
            },
            Implied::Charge(Ratio::new::<ratio>(0.4), Ratio::new::<ratio>(0.6)),
        ],
        causes: alloc::vec![Cause { kind: CauseKind::OutsideHeat, at: "lights".to_string() }],
        next: Some(NextMeasurement {
            what: "volts",
            between: ("a".to_string(), "b".to_string()),
            current: Some(ElectricCurrent::new::<ampere>(2.0)),
        }),
    };
    let json: Value = serde_json::from_str(&super::text(&super::reading::Reading::from(&line))).unwrap();
    for text in [("name", &line.name), ("tolerance", &line.tolerance), ("basis", &line.basis)] {
        assert_eq!(json[text.0].as_str(), Some(text.1.as_str()));
    }
    assert!(json["value"].is_null() && json["line"].is_null() && json["predicted_greatest"].is_null());
    assert_eq!(json["predicted_least"], 1.1);
    assert_eq!(
        (json["verdict"].as_str(), json["missing"].as_str()),
        (Some("not_comparable"), Some("a datum"))
    );
    let resistance = &json["implied"][0];
    assert_eq!((&resistance["least_ohm"], &resistance["least_W"]), (&0.002.into(), &0.2.into()));
    assert!(resistance["greatest_ohm"].is_null() && resistance["greatest_W"].is_null());
    assert_eq!(json["implied"][1]["least_ratio"], 0.4);
    assert_eq!(json["causes"][0]["kind"], "outside_heat");
    assert_eq!(json["next"]["current_A"], 2.0);
}
