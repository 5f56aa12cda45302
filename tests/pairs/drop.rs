//! Voltage drop of the whole path, by rule set and use (R17).
//!
//! Limits: `voltage-drop-recommendations` in `tests/reference/protection.toml`. Craft rules require 3 % and 10 % (page
//! seen); NFPA 70 recommends 3 % and 5 % in informational notes (page seen); IEC 60364-5-52, Table G.52.1, 3 % and 5 %
//! (recalled). What is recommended only and not kept is advice.
//!
//! Class 2 AWG: NEC, Chapter 9, Table 8, 10 AWG 4.07 Ω/km at 75 °C, 1 + 0.00323·(θ − 75) (page seen). Lugs 0.4 mΩ and fuse
//! 100 mV at its rating: common practice, no source.

use ampwright::site::Severity::{self, Advice, Nonconforming};

use crate::document::{Document, device};
use crate::pair::Pair;

fn drop(
    edge: &'static str,
    severity: Severity,
    site: Document,
    passing: &'static str,
    failing: &'static str,
) -> Pair {
    Pair {
        rule: "R17",
        edge,
        slug: "drop-exceeded",
        severity,
        site: site.with("circuit", "one_way = '?'"),
        passing,
        failing,
        also: &[],
    }
}

pub fn pairs() -> Vec<Pair> {
    // 5 A through 2.5 mm² PVC 70 °C (21.8 A, the lower derivation): 32.1 °C, 8.360 mΩ/m; blade 10 A 10 mΩ, lugs 0.4 mΩ.
    let iso = |usage: &str| {
        Document::run("craft_iso")
            .with("load", &format!("current = '5 A'; use = '{usage}'"))
            .with("circuit", "insulation = 'PVC 70 degC'")
            .with("circuit.device", "family = 'blade'; rating = '10 A'")
    };
    // 10 A through 6 mm² class 5 (3.30 Ω/km), which counts as 10 AWG, 60 A: 32.1 °C, 3.457 mΩ/m; fuse 20 A, lugs 5.4 mΩ.
    let craft_us = |usage: &str| {
        Document::run("craft_us").with("load", &format!("use = '{usage}'")).with("circuit", "size = '6 mm2'")
    };
    // 10 A through 10 AWG of 35 A: 33.7 °C, 3.527 mΩ/m; fuse 20 A and lugs 5.4 mΩ.
    let us = |usage: &str| Document::run("us").with("load", &format!("use = '{usage}'"));
    // 10 A through 2.5 mm² of 27 A: 35.5 °C, 8.466 mΩ/m; fuse 16 A and lugs 6.65 mΩ.
    let iec = |usage: &str| {
        Document::run("iec")
            .with("load", &format!("use = '{usage}'"))
            .with("circuit.device", "rating = '16 A'")
    };
    vec![
        // 0.36 V/5 A = 72 mΩ: (72 − 10.4)/8.360 = 7.37 m, route 3.68 m.
        drop("3 % for what must work", Nonconforming, iso("critical"), "3.6 m", "3.77 m"),
        // 1.2 V/5 A = 240 mΩ: 229.6/8.360 = 27.5 m, route 13.7 m.
        drop("10 % for the rest", Nonconforming, iso("other"), "13.4 m", "14.0 m"),
        drop("10 % for lighting", Nonconforming, iso("lighting"), "13.4 m", "14.0 m"),
        // 36 mΩ: (36 − 5.4)/3.457 = 8.85 m, route 4.43 m.
        drop("3 % for what must work", Nonconforming, craft_us("critical"), "4.32 m", "4.53 m"),
        // 120 mΩ: 114.6/3.457 = 33.2 m, route 16.6 m.
        drop("10 % for the rest", Nonconforming, craft_us("other"), "16.2 m", "17.0 m"),
        // A panel feeder is held to 3 % though its loads are not: 10 A through 6 mm² behind 30 A and lugs (3.73 mΩ);
        // (36 − 3.73)/3.457 = 9.33 m, route 4.67 m.
        Pair {
            site: Document::run("craft_us")
                .with("circuit", "to = 'panel'; one_way = '?'; size = '6 mm2'")
                .with("circuit.device", "rating = '30 A'")
                .add("board", "name = 'panel'; busbar = '50 A'")
                .add(
                    "circuit",
                    "name = 'branch'; from = 'panel'; to = 'load'; one_way = '1 m'; size = '10 AWG'; \
                     insulation = 'PVC 105 degC'",
                )
                .add("circuit.device", &device("class T", "20 A")),
            ..drop("3 % for panel feeders", Nonconforming, Document::run("craft_us"), "4.57 m", "4.77 m")
        },
        // (36 − 5.4)/3.527 = 8.68 m, route 4.34 m.
        drop("3 % as a recommendation", Advice, us("critical"), "4.25 m", "4.45 m"),
        // (60 − 5.4)/3.527 = 15.5 m, route 7.74 m.
        drop("5 % as a recommendation", Advice, us("other"), "7.55 m", "7.95 m"),
        // (36 − 6.65)/8.466 = 3.47 m, route 1.73 m.
        drop("3 % for lighting as a recommendation", Advice, iec("lighting"), "1.69 m", "1.77 m"),
        // (60 − 6.65)/8.466 = 6.30 m, route 3.15 m.
        drop("5 % for the rest as a recommendation", Advice, iec("other"), "3.08 m", "3.22 m"),
        // (24 − 6.65)/8.466 = 2.05 m, route 1.025 m: the user's own limit is one to keep.
        drop(
            "the user's own limit of a circuit",
            Nonconforming,
            iec("other").with("circuit", "drop = '2 %'"),
            "1.0 m",
            "1.05 m",
        ),
        // (48 − 6.65)/8.466 = 4.88 m, route 2.44 m.
        drop(
            "the user's own limit of the site",
            Nonconforming,
            iec("other").add("rules.override", "drop = '4 %'"),
            "2.38 m",
            "2.5 m",
        ),
    ]
}
