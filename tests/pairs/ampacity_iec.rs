//! Conductors and devices under `iec`: Ib ≤ In ≤ Iz and I2 ≤ 1.45 Iz (R4).
//!
//! Source: IEC 60364-4-43:2008, 433.1; IEC 60364-5-52:2009, Tables B.52.2 (PVC), B.52.3 (XLPE), B.52.14 (air), B.52.17
//! (groups): `tests/reference/ampacity.toml` (page seen). Breakers of IEC 60947-2 open at 1.3 In, so In ≤ Iz decides alone.

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

/// Ib = 15 A behind an industrial breaker.
fn breaker(rating: &str) -> Document {
    Document::run("iec").with("load", "current = '15 A'").with(
        "circuit.device",
        &format!("family = 'industrial'; rating = '{rating}'; let_through = '1000 A2s'"),
    )
}

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
    vec![
        // Neither 1.25 nor 0.8: a 16 A fuse-link carries 16 A.
        Pair {
            rule: "R4",
            edge: "Ib does not exceed In",
            slug: "device-below-load",
            severity: Nonconforming,
            site: Document::run("iec")
                .with("load", "current = '?'")
                .with("circuit.device", "rating = '16 A'"),
            passing: "15.8 A",
            failing: "16.2 A",
            also: &[],
        },
        // 23 A in conduit (B2); without a device that protects beyond it no current above Iz can be the only fault.
        Pair {
            rule: "R4",
            edge: "Ib does not exceed Iz",
            slug: "ampacity-exceeded",
            severity: Danger,
            site: breaker("23 A")
                .with("load", "current = '?'")
                .with("circuit", "installed = 'cable_in_conduit'"),
            passing: "22.7 A",
            failing: "23.3 A",
            also: &["device-below-load"],
        },
        // 2.5 mm² clipped: 27 A. There is no next rating up: 25 A, not 32 A. 1.3 × 32 A = 41.6 A > 39.2 A fails too.
        Pair {
            also: &["device-opens-late"],
            ..above(
                "In does not exceed Iz",
                breaker("25 A").with("circuit.device", "rating = '?'"),
                "25 A",
                "32 A",
            )
        },
        // 10 mm² clipped: 63 A. In air of up to 35 °C × 0.94 = 59.2 A; 1.3 × 63 = 81.9 A stays below 1.45 × 59.2 = 85.9 A.
        above(
            "a band of air temperature counts by its upper end",
            breaker("63 A").with("circuit", "size = '10 mm2'; ambient = '?'"),
            "30 degC",
            "31 degC",
        ),
        // 16 mm²: 69 A in conduit as a cable (B2), 61 A in an insulated wall as singles (A1).
        above(
            "the way of installation picks the column",
            breaker("63 A").with("circuit", "size = '16 mm2'; installed = '?'"),
            "cable_in_conduit",
            "insulated_wall",
        ),
        // 4 mm² in conduit (B2): 30 A; three circuits × 0.7 = 21 A, four × 0.65 = 19.5 A.
        above(
            "circuits together derate",
            breaker("20 A").with("circuit", "size = '4 mm2'; installed = 'cable_in_conduit'; bundled = ?"),
            "6",
            "8",
        ),
        // The same on a surface (C): 36 A; × 0.75 = 27 A for four circuits, × 0.73 = 26.28 A for five.
        above(
            "circuits together on a surface have their own factors",
            breaker("27 A").with("circuit", "size = '4 mm2'; bundled = ?"),
            "8",
            "10",
        ),
        // 2.5 mm² clipped in XLPE: 33 A, but 27 A as PVC. Unmarked terminals are made for PVC, 70 °C (IEC 60947-1,
        // recalled): 1.3 × 27 A = 35.1 A.
        above(
            "XLPE counts as PVC at terminals of 70 °C",
            breaker("28 A")
                .with("circuit", "insulation = 'XLPE 90 degC'; terminal = '?'")
                .with("circuit.device", "terminal = '90 degC'"),
            "90 degC",
            "70 degC",
        ),
        above(
            "XLPE counts as PVC at an unmarked device",
            breaker("28 A")
                .with("circuit", "insulation = 'XLPE 90 degC'; terminal = '90 degC'")
                .with("circuit.device", "?"),
            "terminal = '90 degC'",
            "",
        ),
        above(
            "XLPE counts as PVC at unmarked terminals",
            breaker("28 A")
                .with("circuit", "insulation = 'XLPE 90 degC'; ?")
                .with("circuit.device", "terminal = '90 degC'"),
            "terminal = '90 degC'",
            "",
        ),
        // gG opens at 1.6 In from 16 A on: 1.6 × 20 = 32 A, 1.6 × 25 = 40 A against 1.45 × 27 = 39.15 A. Both In ≤ Iz.
        Pair {
            rule: "R4",
            edge: "I2 does not exceed 1.45 Iz",
            slug: "device-opens-late",
            severity: Danger,
            site: Document::run("iec").with("circuit.device", "rating = '?'"),
            passing: "20 A",
            failing: "25 A",
            also: &[],
        },
        // Breakers of IEC 60898 open at 1.45 In: then In ≤ Iz is the whole rule. 24 A as singles in conduit (B1), 23 A
        // as a cable (B2): 1.45 × 24 A = 34.8 A > 33.35 A.
        Pair {
            also: &["device-opens-late"],
            ..above(
                "a miniature breaker is as large as Iz at most",
                Document::run("iec").with("circuit", "installed = '?'").with(
                    "circuit.device",
                    "family = 'miniature B'; rating = '24 A'; let_through = '1000 A2s'",
                ),
                "conduit",
                "cable_in_conduit",
            )
        },
        // Least cross-section of a power circuit in fixed wiring 1.5 mm² (Table 52.2, recalled).
        Pair {
            rule: "R4",
            edge: "no conductor below 1.5 mm²",
            slug: "conductor-below-least-size",
            severity: Nonconforming,
            site: Document::run("iec")
                .with("load", "current = '2 A'")
                .with("circuit", "size = '?'")
                .with("circuit.device", "rating = '2 A'"),
            passing: "1.5 mm2",
            failing: "1 mm2",
            also: &[],
        },
        // The table of air temperatures ends at 60 °C for PVC (B.52.14): beyond it nothing is known.
        Pair {
            rule: "R4",
            edge: "beyond the table nothing passes",
            slug: "ampacity-not-checked",
            severity: NotChecked,
            site: Document::run("iec")
                .with("load", "current = '5 A'")
                .with("circuit", "ambient = '?'")
                .with("circuit.device", "rating = '6 A'"),
            passing: "60 degC",
            failing: "61 degC",
            also: &[],
        },
    ]
}
