//! Readings that their meter may still have got wrong, and those that it cannot (R17, R9, R16, R12).
//!
//! Where nothing else is said the meter errs by its last digit alone: `accuracy = '0 %'; resolution = '1 mV'`, and 0.2 A of
//! a clamp (common practice, no source).

use ampwright::site::Severity::{self, Advice, Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

/// 10 A through 2 m of 2.5 mm² class 5 (7.98 Ω/km, IEC 60228, page seen), four lugs of 0.1 mΩ and a fuse of 100 mV at 20 A
/// (common practice, no source).
///
/// Greatest: θ = 30 + 40·(10/27)² = 35.49 °C, 8.466 Ω/km, 16.93 + 0.4 + 5 = 22.33 mΩ. Least: 1/58/2.5 Ω/m at 20 °C, no
/// joints, 13.79 mΩ.
fn with(keys: &str) -> Document {
    Document::run("iec").add("reading", &format!("name = 'a'; accuracy = '0 %'; resolution = '1 mV'; {keys}"))
}

const AT_RUN: &str = "at = 'run'; on = ['load']";

/// A bank of 5 mΩ, 12.50 V without load.
fn beside_rest(keys: &str) -> Document {
    Document::run("iec")
        .add("reading", "name = 'off'; at = 'bank'; accuracy = '0 %'; resolution = '10 mV'; volts = '12.5 V'")
        .add(
            "reading",
            &format!("name = 'on'; accuracy = '0 %'; resolution = '10 mV'; on = ['load']; {keys}"),
        )
}

/// Flooded, 25 °C, at rest; half the charge may be used.
fn flooded(keys: &str) -> Document {
    Document::run("iec").with("bank", "chemistry = 'flooded'; depth = '50 %'").add(
        "reading",
        &format!(
            "name = 'a'; at = 'bank'; accuracy = '0 %'; resolution = '10 mV'; temperature = '25 degC'; {keys}"
        ),
    )
}

pub fn pairs() -> Vec<Pair> {
    let pair = |rule, edge, slug, severity: Severity, site, passing, failing| Pair {
        rule,
        edge,
        slug,
        severity,
        site,
        passing,
        failing,
        also: &[],
    };
    vec![
        // 10 A × 22.33 mΩ = 223.3 mV, and 1 mV of the meter.
        pair(
            "R9",
            "a drop above the warm loop with all its joints",
            "reading-implies-heat",
            Advice,
            with(&format!("{AT_RUN}; drop = '?'")),
            "0.2240 V",
            "0.2246 V",
        ),
        // 10 A × 13.79 mΩ = 137.9 mV.
        pair(
            "R17",
            "a drop below the cold conductor without joints",
            "reading-not-as-predicted",
            Advice,
            with(&format!("{AT_RUN}; drop = '?'")),
            "0.1372 V",
            "0.1366 V",
        ),
        // The same reading with a wider meter: 0.245 V less 10 %.
        pair(
            "R9",
            "a drop that the accuracy of the meter still explains",
            "reading-implies-heat",
            Advice,
            Document::run("iec").add(
                "reading",
                &format!("name = 'a'; {AT_RUN}; drop = '0.245 V'; resolution = '1 mV'; accuracy = '?'"),
            ),
            "10 %",
            "5 %",
        ),
        // And with a coarser last digit: 0.245 V less 30 mV.
        pair(
            "R9",
            "a drop that the last digit of the meter still explains",
            "reading-implies-heat",
            Advice,
            Document::run("iec").add(
                "reading",
                &format!("name = 'a'; {AT_RUN}; drop = '0.245 V'; accuracy = '0 %'; resolution = '?'"),
            ),
            "30 mV",
            "10 mV",
        ),
        // 100 A² · (1.65 V/9.8 A − 13.79 mΩ) is above 15 W.
        pair(
            "R9",
            "resistance that may make more than 15 W in one joint",
            "reading-implies-heat",
            Nonconforming,
            with(&format!("{AT_RUN}; amps = '10 A'; drop = '?'")),
            "0.2 V",
            "1.65 V",
        ),
        // 100 A² · (3.3 V/10.2 A − 22.33 mΩ) = 30.1 W.
        pair(
            "R9",
            "resistance that makes more than 30 W wherever it is",
            "reading-implies-heat",
            Danger,
            with(&format!("{AT_RUN}; amps = '10 A'; drop = '?'")),
            "0.2 V",
            "3.3 V",
        ),
        // The bank as read: 12.499 − 0.2233 V, and 1 mV of the meter at the load.
        pair(
            "R9",
            "volts at a load below the bank's less the greatest drop",
            "reading-implies-heat",
            Advice,
            with("at = 'bank'; on = ['load']; volts = '12.5 V'").add(
                "reading",
                "name = 'b'; at = 'load'; on = ['load']; accuracy = '0 %'; resolution = '1 mV'; volts = '?'",
            ),
            "12.275 V",
            "12.274 V",
        ),
        // 12.501 − 0.1379 V.
        pair(
            "R17",
            "volts at a load above the bank's less the least drop",
            "reading-not-as-predicted",
            Advice,
            with("at = 'bank'; on = ['load']; volts = '12.5 V'").add(
                "reading",
                "name = 'b'; at = 'load'; on = ['load']; accuracy = '0 %'; resolution = '1 mV'; volts = '?'",
            ),
            "12.364 V",
            "12.365 V",
        ),
        // Conductor at most 35.5 °C, 2 K of the thermometer.
        pair(
            "R9",
            "a joint warmer than its conductor may be",
            "reading-implies-heat",
            Advice,
            with(&format!("{AT_RUN}; temperature = '?'")),
            "37.4 degC",
            "37.6 degC",
        ),
        pair(
            "R4",
            "a joint hotter than insulation of 70 °C",
            "hotter-than-insulation",
            Danger,
            with(&format!("{AT_RUN}; temperature = '?'")),
            "40 degC",
            "72.1 degC",
        ),
        // Constant current: 10 A, and 0.2 A of the clamp.
        pair(
            "R16",
            "a current below what the load draws",
            "current-not-as-predicted",
            Advice,
            with(&format!("{AT_RUN}; amps = '?'")),
            "9.85 A",
            "9.75 A",
        ),
        pair(
            "R16",
            "a current above that of the worst hour",
            "current-above-design",
            Nonconforming,
            with(&format!("{AT_RUN}; amps = '?'")),
            "10.15 A",
            "10.25 A",
        ),
        // 27 A: IEC 60364-5-52:2009, 2.5 mm² clipped, two loaded conductors of PVC.
        pair(
            "R16",
            "a current above what the conductor carries",
            "current-above-design",
            Danger,
            with(&format!("{AT_RUN}; amps = '?'")),
            "10 A",
            "27.3 A",
        ),
        // 12.49 V − 10 A × 5 mΩ × 4.5 (discharged, cold, aged: common practice) = 12.265 V, and 10 mV of the meter.
        pair(
            "R6",
            "a bank that falls further than its resistance explains",
            "bank-resistance-above-taken",
            Nonconforming,
            beside_rest("at = 'bank'; volts = '?'"),
            "12.26 V",
            "12.25 V",
        ),
        // 10 A against 5 A of the 20-hour rate: 0.5^0.15 of 100 Ah by the greatest usual exponent of AGM (recalled), 80 % at
        // the end of life, and 1/1.056 at 20 °C (IEEE 485, Table 1, page seen): 68.28 Ah.
        pair(
            "R12",
            "a discharge that gave less than 80 %",
            "bank-capacity-below-stated",
            Nonconforming,
            with("at = 'bank'; on = ['load']; delivered = '?'"),
            "68.4 Ah",
            "68.1 Ah",
        ),
        pair(
            "R12",
            "a rest of six hours before a voltage tells the charge",
            "bank-reading-not-compared",
            NotChecked,
            flooded("volts = '12.4 V'; rest = '?'"),
            "6 h",
            "5.9 h",
        ),
        // Six cells of 2.04 V at half charge (battery council table, page seen), 15 mV a cell between sources, 10 mV of the
        // meter: 12.14 V.
        pair(
            "R14",
            "a rest voltage below the stated depth",
            "bank-below-depth",
            Advice,
            flooded("rest = '6 h'; volts = '?'"),
            "12.15 V",
            "12.13 V",
        ),
        // 12.6 V at rest: 2.0833 V a cell at least, 81 % of charge, density 1.235; 0.02 between sources, 0.005 of the
        // hydrometer, 2 K of the thermometer: 1.209.
        pair(
            "R12",
            "a density below what the rest voltage tells",
            "density-and-voltage-disagree",
            Advice,
            flooded("rest = '6 h'; volts = '12.6 V'; density = ?"),
            "1.2095",
            "1.2085",
        ),
        // The place of a drop is a circuit.
        pair(
            "R17",
            "a drop is compared along a circuit only",
            "reading-not-compared",
            NotChecked,
            with("on = ['load']; drop = '0.2 V'; at = '?'"),
            "run",
            "bank",
        ),
    ]
}
