//! Conductors and devices under the craft rules (R4): a device up to the ampacity, or the next rating up to 150 %.
//!
//! `craft_us`: 33 CFR 183.425, Table 5 and notes 1 and 2 (page seen); 183.455 with ABYC E-11, recalled.
//! `craft_iso`: ISO 10133:2012, Table A.1, and ISO 13297:2020, all recalled. `tests/reference/ampacity.toml` holds both.
//! Class T opens at 1.35 In (recalled), below 1.45, so the device's limit decides alone.

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

fn above(edge: &'static str, site: Document, passing: &'static str, failing: &'static str) -> Pair {
    Pair {
        rule: "R4",
        edge,
        slug: "device-above-ampacity",
        severity: Danger,
        site,
        passing,
        failing,
        also: &[],
    }
}

pub fn pairs() -> Vec<Pair> {
    let iso = || Document::run("craft_iso");
    let us = || Document::run("craft_us");
    vec![
        // 10 mm², 105 °C: 90 A, and no next rating.
        above(
            "a device of 100 % of the capacity at most",
            iso().with("circuit", "size = '10 mm2'").with("circuit.device", "rating = '?'"),
            "90 A",
            "100 A",
        ),
        // Engine space: 0.86 is recalled, √((105 − 60)/(105 − 30)) = 0.7746 lower, and the lower governs: 69.7 A.
        above(
            "an engine space takes the lower of its recalled and its derived factor",
            iso()
                .with("circuit", "size = '10 mm2'; space = '?'")
                .with("circuit.device", "rating = '70 A'"),
            "ordinary",
            "engine",
        ),
        above(
            "a device follows the capacity in an engine space",
            iso()
                .with("circuit", "size = '10 mm2'; space = 'engine'")
                .with("circuit.device", "rating = '?'"),
            "69 A",
            "71 A",
        ),
        // Up to three conductors × 1, four to six × 0.7: 90 and 63 A.
        above(
            "four conductors together derate, three do not",
            iso()
                .with("circuit", "size = '10 mm2'; bundled = ?")
                .with("circuit.device", "rating = '65 A'"),
            "3",
            "4",
        ),
        // 16 mm², 70 °C: 90 A; a device rated to carry all of its 90 A.
        Pair {
            rule: "R4",
            edge: "current does not exceed the capacity",
            slug: "ampacity-exceeded",
            severity: Danger,
            site: iso()
                .with("load", "current = '?'")
                .with("circuit", "size = '16 mm2'; insulation = 'PVC 70 degC'")
                .with("circuit.device", "rating = '90 A'; full_rated = true"),
            passing: "89 A",
            failing: "91 A",
            also: &["device-below-load"],
        },
        // 4 mm², 70 °C: 35 A is recalled; the table of 33 CFR at the same area gives 30.3 A, and the lower governs.
        above(
            "a recalled cell gives way to its lower derivation",
            iso()
                .with("circuit", "size = '4 mm2'; insulation = 'PVC 70 degC'")
                .with("circuit.device", "rating = '?'"),
            "30 A",
            "31 A",
        ),
        // Air of 45 °C: √((105 − 45)/75) = 0.894 × 90 A = 80.5 A; of 46 °C × 0.887 = 79.8 A.
        above(
            "hot air derates",
            iso()
                .with("circuit", "size = '10 mm2'; ambient = '?'")
                .with("circuit.device", "rating = '80 A'"),
            "45 degC",
            "46 degC",
        ),
        Pair {
            rule: "R4",
            edge: "no conductor below 1 mm²",
            slug: "conductor-below-least-size",
            severity: Nonconforming,
            site: iso()
                .with("load", "current = '4 A'")
                .with("circuit", "size = '?'")
                .with("circuit.device", "rating = '5 A'"),
            passing: "1 mm2",
            failing: "0.75 mm2",
            also: &[],
        },
        // 10 AWG, 105 °C: 60 A, in an engine space × 0.85 = 51 A, whose next rating is 60 A (118 %); 70 A is beyond it.
        above(
            "the next standard rating is admitted, none beyond",
            us().with("circuit", "space = 'engine'").with("circuit.device", "rating = '?'"),
            "60 A",
            "70 A",
        ),
        // 60 A is a standard rating itself: nothing above it.
        above(
            "a device of 100 % where that is a standard rating",
            us().with("circuit.device", "rating = '?'"),
            "60 A",
            "70 A",
        ),
        // Two conductors × 1, three × 0.7: 42 A, whose next rating is 45 A.
        above(
            "three conductors together derate, two do not",
            us().with("circuit", "bundled = ?").with("circuit.device", "rating = '50 A'"),
            "2",
            "3",
        ),
        // 16 AWG of 60 °C, 15 A, in an engine space with 25 and more together, × 0.4. At 50 °C × 0.58: 3.48 A, next rating
        // 5 A, 144 %. At 52 °C √((60 − 52)/30) = 0.516 is lower: 3.10 A, and 5 A would be 161 %.
        above(
            "no next rating above 150 %",
            us()
                .with("load", "current = '1 A'")
                .with(
                    "circuit",
                    "size = '16 AWG'; insulation = 'PVC 60 degC'; space = 'engine'; bundled = 25; ambient = '?'",
                )
                .with("circuit.device", "rating = '5 A'"),
            "50 degC",
            "52 degC",
        ),
        // 8 AWG, 75 °C: 65 A; the device is the next rating, 70 A, and carries all of it.
        Pair {
            rule: "R4",
            edge: "current does not exceed the ampacity",
            slug: "ampacity-exceeded",
            severity: Danger,
            site: us()
                .with("load", "current = '?'")
                .with("circuit", "size = '8 AWG'; insulation = 'PVC 75 degC'")
                .with("circuit.device", "rating = '70 A'; full_rated = true"),
            passing: "64 A",
            failing: "66 A",
            also: &[],
        },
        // Starting lasts seconds; the tables are for continuous current.
        Pair {
            rule: "R4",
            edge: "cranking conductors are not checked against continuous current",
            slug: "ampacity-not-checked",
            severity: NotChecked,
            site: us().with("load", "continuous = false").with("circuit", "cranking = ?"),
            passing: "false",
            failing: "true",
            also: &[],
        },
        Pair {
            rule: "R4",
            edge: "no conductor below 16 AWG",
            slug: "conductor-below-least-size",
            severity: Nonconforming,
            site: us()
                .with("load", "current = '5 A'")
                .with("circuit", "size = '?'")
                .with("circuit.device", "rating = '10 A'"),
            passing: "16 AWG",
            failing: "18 AWG",
            also: &[],
        },
    ]
}
