//! Conductors and devices under `us`: terminal column, ampacity after factors, device (R4 a, b, c).
//!
//! Ampacities: NFPA 70-2023, Table 310.16; ambient 310.15(B)(1)(1), bundling 310.15(C)(1), small conductors 240.4(D),
//! ratings 240.6(A): `tests/reference/ampacity.toml` and `protection.toml` (page seen, some cells recalled there).
//! 60 °C up to 100 A, else 75 °C: 110.14(C)(1), recalled. Factor 1.25: 210.20(A), 215.3.
//!
//! The device is held against the lesser of terminal's column and derated ampacity, or the next standard rating above
//! that. So the pairs on the terminal's column stand where the column is no standard rating itself: 6 AWG has 55, 65 and
//! 75 A at 60, 75 and 90 °C, 4/0 AWG 195 and 230 A at 60 and 75 °C; next ratings 60, 70 and 250 A.

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

fn terminal_column(edge: &'static str, site: Document, passing: &'static str, failing: &'static str) -> Pair {
    Pair {
        rule: "R4",
        edge,
        slug: "terminal-column-exceeded",
        severity: Danger,
        site,
        passing,
        failing,
        also: &[],
    }
}

/// Terminals marked for 75 °C at both ends and on the device.
fn marked() -> Document {
    Document::run("us").with("circuit", "terminal = '75 degC'").with("circuit.device", "terminal = '75 degC'")
}

pub fn pairs() -> Vec<Pair> {
    vec![
        // 6 AWG: 55 A in the 60 °C column, 75 A in its own of 90 °C; 55/1.25 = 44 A. The device may have 60 A.
        terminal_column(
            "unmarked terminals take the 60 °C column",
            Document::run("us")
                .with("load", "current = '?'")
                .with("circuit", "size = '6 AWG'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '60 A'"),
            "43.5 A",
            "44.5 A",
        ),
        // 65 A in the 75 °C column; 65/1.25 = 52 A.
        terminal_column(
            "terminals marked for 75 °C take the 75 °C column",
            marked()
                .with("load", "current = '?'")
                .with("circuit", "size = '6 AWG'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '70 A'"),
            "51.5 A",
            "52.5 A",
        ),
        // A mark of 90 °C takes no more than the 75 °C column: 52 A again, where 75/1.25 = 60 A would be the other edge.
        terminal_column(
            "no terminal takes a column above 75 °C",
            Document::run("us")
                .with("load", "current = '?'")
                .with("circuit", "size = '6 AWG'; insulation = 'PVC 90 degC'; terminal = '90 degC'")
                .with("circuit.device", "rating = '70 A'; terminal = '90 degC'"),
            "51.5 A",
            "52.5 A",
        ),
        // 1.25 × 46 A = 57.5 A: within the 65 A of 75 °C, above the 55 A of 60 °C that a device without mark leaves.
        terminal_column(
            "the lower mark of terminal and device counts",
            Document::run("us")
                .with("load", "current = '46 A'")
                .with("circuit", "size = '6 AWG'; insulation = 'PVC 90 degC'; terminal = '75 degC'")
                .with("circuit.device", "rating = '60 A'; ?"),
            "terminal = '75 degC'",
            "",
        ),
        // 4/0 AWG above 100 A: 230 A in the 75 °C column without any mark; 230/1.25 = 184 A. 195/1.25 = 156 A would be
        // 60 °C.
        terminal_column(
            "above 100 A unmarked terminals take the 75 °C column",
            Document::run("us")
                .with("load", "current = '?'")
                .with("circuit", "size = '4/0 AWG'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '250 A'"),
            "183 A",
            "185 A",
        ),
        // 10 AWG, 60 °C column: 30 A. 29 A pass as they are, 1.25 × 29 = 36.3 A do not.
        terminal_column(
            "only continuous current carries the factor 1.25",
            Document::run("us")
                .with("load", "current = '29 A'; continuous = ?")
                .with("circuit.device", "full_rated = true; rating = '30 A'"),
            "false",
            "true",
        ),
        // 10 AWG, 75 °C: 35 A. Up to 45 °C × 0.82 = 28.7 A, up to 50 °C × 0.75 = 26.25 A. Device 30 A in both.
        Pair {
            rule: "R4",
            edge: "hot air derates",
            slug: "ampacity-exceeded",
            severity: Danger,
            site: marked()
                .with("load", "current = '28 A'; continuous = false")
                .with("circuit", "ambient = '?'")
                .with("circuit.device", "rating = '30 A'"),
            passing: "45 degC",
            failing: "46 degC",
            also: &[],
        },
        // 10 AWG, 90 °C: 40 A; seven to nine conductors × 0.7 = 28 A. Device 30 A in both.
        Pair {
            rule: "R4",
            edge: "conductors together derate",
            slug: "ampacity-exceeded",
            severity: Danger,
            site: marked()
                .with("load", "current = '?'; continuous = false")
                .with("circuit", "insulation = 'PVC 90 degC'; bundled = 9")
                .with("circuit.device", "rating = '30 A'"),
            passing: "27.5 A",
            failing: "28.5 A",
            also: &[],
        },
        // 8 AWG, 75 °C: 50 A × 0.82 = 41 A at 45 °C, never × 1.25 too: 41/1.25 would be 32.8 A. The terminal's column,
        // 50 A, holds 1.25 × 40 A without any factor.
        Pair {
            rule: "R4",
            edge: "derating and 1.25 are never multiplied together",
            slug: "ampacity-exceeded",
            severity: Danger,
            site: marked()
                .with("load", "current = '?'; continuous = false")
                .with("circuit", "size = '8 AWG'; ambient = '45 degC'")
                .with("circuit.device", "rating = '45 A'"),
            passing: "40.5 A",
            failing: "41.5 A",
            also: &[],
        },
        // 4 AWG, 75 °C: 85 A, whose next standard rating is 90 A.
        device_limit(
            "the next standard rating above the ampacity is admitted, none beyond",
            marked()
                .with("load", "current = '50 A'")
                .with("circuit", "size = '4 AWG'")
                .with("circuit.device", "rating = '?'"),
            "90 A",
            "100 A",
        ),
        // The terminal decides where its column is the lesser: 8 AWG of 90 °C carries 55 A, but 40 A in the 60 °C column,
        // a standard rating itself.
        device_limit(
            "the device follows the terminal's column where that is the lesser",
            Document::run("us")
                .with("circuit", "size = '8 AWG'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '?'"),
            "40 A",
            "45 A",
        ),
        // 6 AWG: 55 A in the 60 °C column is no standard rating, the next is 60 A; by the 75 A of its insulation 80 A.
        device_limit(
            "the next standard rating above the terminal's column is admitted, none beyond",
            Document::run("us")
                .with("circuit", "size = '6 AWG'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '?'"),
            "60 A",
            "70 A",
        ),
        // 8 AWG: 50 A with terminals of 75 °C at both ends, 40 A where the device's has no mark.
        device_limit(
            "a mark at the terminals admits the larger device",
            Document::run("us")
                .with("circuit", "size = '8 AWG'; insulation = 'PVC 90 degC'; terminal = '75 degC'")
                .with("circuit.device", "rating = '50 A'; ?"),
            "terminal = '75 degC'",
            "",
        ),
        // 6 AWG of 90 °C, 75 A × 0.7 = 52.5 A for nine together, next rating 60 A; × 0.5 = 37.5 A for ten, next rating
        // 40 A. Terminals of 75 °C would leave 65 A and 70 A.
        device_limit(
            "the device follows the derated ampacity where that is the lesser",
            marked()
                .with("circuit", "size = '6 AWG'; insulation = 'PVC 90 degC'; bundled = ?")
                .with("circuit.device", "rating = '60 A'"),
            "9",
            "10",
        ),
        // 14 AWG of 90 °C carries 25 A, 20 A at its terminals, yet takes no device above 15 A.
        device_limit(
            "14 AWG takes a 15 A device at most",
            marked()
                .with("load", "current = '10 A'")
                .with("circuit", "size = '14 AWG'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '?'"),
            "15 A",
            "20 A",
        ),
        // 25 A at its terminals.
        device_limit(
            "12 AWG takes a 20 A device at most",
            marked()
                .with("circuit", "size = '12 AWG'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '?'"),
            "20 A",
            "25 A",
        ),
        // 10 AWG, 75 °C: seven to nine conductors × 0.7 = 24.5 A, next rating 25 A; ten × 0.5 = 17.5 A, next rating 20 A.
        device_limit(
            "the device follows the derated ampacity",
            Document::run("us").with("circuit", "bundled = ?").with("circuit.device", "rating = '25 A'"),
            "9",
            "10",
        ),
        Pair {
            rule: "R4",
            edge: "no conductor below 14 AWG",
            slug: "conductor-below-least-size",
            severity: Nonconforming,
            site: Document::run("us")
                .with("load", "current = '5 A'")
                .with("circuit", "size = '?'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '10 A'"),
            passing: "14 AWG",
            failing: "16 AWG",
            also: &[],
        },
        // 16 AWG stands in no column of 60 or 75 °C: nothing is compared, and nothing passes.
        Pair {
            rule: "R4",
            edge: "a size that its column does not list is not checked",
            slug: "terminal-column-not-checked",
            severity: NotChecked,
            site: Document::run("us")
                .with("load", "current = '5 A'")
                .with("circuit", "size = '?'; insulation = 'PVC 90 degC'")
                .with("circuit.device", "rating = '10 A'"),
            passing: "14 AWG",
            failing: "16 AWG",
            also: &["conductor-below-least-size"],
        },
    ]
}

fn device_limit(edge: &'static str, site: Document, passing: &'static str, failing: &'static str) -> Pair {
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
