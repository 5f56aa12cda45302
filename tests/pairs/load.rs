//! What loads draw in the worst hour, and the voltages they bear (R3).

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::{Document, device};
use crate::pair::Pair;

/// 150 W at a 15 A device that is rated to carry all of its 15 A: 10 V at the load.
///
/// 2 m of 2.5 mm² class 5 (7.98 Ω/km, IEC 60228, page seen) at θ = 30 + 75·(15/35)² = 43.8 °C: 17.45 mΩ; with four lugs
/// and the fuse (0.4 and 6.67 mΩ, common practice, no source) 24.52 mΩ, which takes 0.368 V.
fn at_fifteen_amperes() -> Document {
    Document::run("craft_iso")
        .with("load", "current = none; power = '150 W'")
        .with("circuit.device", "rating = '15 A'; full_rated = true")
}

/// An inverter of 800 W at 10.5 V, under `us` on 1/0 AWG with a 125 A fuse: 1.25 × I ≤ 125 A, I = 100 A.
///
/// 1 m of 0.399 Ω/km (NEC, Chapter 9, Table 8, page seen) at 30 + 45·(100/150)² = 50 °C, lugs and fuse: 1.567 mΩ,
/// 0.157 V; 100 A × 10.343 V = 1034 W.
fn inverter() -> Document {
    Document::run("us")
        .without("load")
        .with("circuit", "to = 'inverter'; one_way = '0.5 m'; size = '1/0 AWG'")
        .with("circuit.device", "rating = '125 A'")
        .add(
            "inverter",
            "name = 'inverter'; power = '800 W'; efficiency = '?'; least = '9 V'; greatest = '16 V'",
        )
}

pub fn pairs() -> Vec<Pair> {
    let below = |edge, site, passing, failing| Pair {
        rule: "R3",
        edge,
        slug: "device-below-load",
        severity: Nonconforming,
        site,
        passing,
        failing,
        also: &[],
    };
    vec![
        // 10 + 0.368 = 10.37 V at the bank.
        below(
            "constant power draws most at cut-off, after the drop",
            at_fifteen_amperes().with("bank", "cut_off = '?'"),
            "10.5 V",
            "10.25 V",
        ),
        // 150 W/12 V = 12.5 A whatever the voltage, against 15.2 A of constant power at 10.25 V.
        below(
            "constant current draws its nominal current at cut-off",
            at_fifteen_amperes().with("bank", "cut_off = '10.25 V'").with("load", "kind = '?'"),
            "constant_current",
            "constant_power",
        ),
        // 12²/150 = 0.96 Ω and 24.5 mΩ draw 15 A at 14.77 V.
        below(
            "a resistive load draws most at the highest voltage",
            at_fifteen_amperes().with("bank", "highest = '?'").with("load", "kind = 'resistive'"),
            "14.6 V",
            "14.95 V",
        ),
        // 800 W/1034 W = 77.3 %. The failing one would do for 800 W/12 V = 66.7 A.
        Pair {
            also: &["feed-sized-at-nominal"],
            ..below("an inverter draws its power over efficiency at cut-off", inverter(), "78.5 %", "76.2 %")
        },
        Pair {
            rule: "R3",
            edge: "an inverter feed that suits the nominal voltage only is named",
            slug: "feed-sized-at-nominal",
            severity: Danger,
            site: inverter(),
            passing: "78.5 %",
            failing: "76.2 %",
            also: &["device-below-load"],
        },
        // A 48 V flooded bank passes 64 V when it is equalised cold (R3 of the design).
        Pair {
            rule: "R3",
            edge: "a load bears the highest voltage of its bank",
            slug: "voltage-too-high-at-load",
            severity: Nonconforming,
            site: Document::run("iec")
                .with("bank", "nominal = '48 V'; cut_off = '42 V'; highest = '64 V'")
                .with("load", "greatest = '?'"),
            passing: "64.5 V",
            failing: "63.5 V",
            also: &[],
        },
        Pair {
            rule: "R3",
            edge: "an inverter bears the highest voltage of its bank",
            slug: "voltage-too-high-at-load",
            severity: Nonconforming,
            site: Document::run("us")
                .with("bank", "highest = '15.6 V'")
                .without("load")
                .with("circuit", "to = 'inverter'")
                .add(
                    "inverter",
                    "name = 'inverter'; power = '100 W'; efficiency = '90 %'; least = '9 V'; greatest = '?'",
                ),
            passing: "15.8 V",
            failing: "15.4 V",
            also: &[],
        },
        // Either bank can raise the whole site to its own highest voltage.
        Pair {
            rule: "R3",
            edge: "a load bears the highest voltage of every bank joined",
            slug: "voltage-too-high-at-load",
            severity: Nonconforming,
            site: Document::two_banks("highest = '?'").with("load", "greatest = '15.24 V'"),
            passing: "15.2 V",
            failing: "15.28 V",
            also: &[],
        },
        // 10 A through 10 × 8.466 mΩ (2.5 mm² at 35.5 °C, see path.rs) + 0.4 + 6.25 mΩ loses 0.913 V: 9.587 V of 10.5 V.
        Pair {
            rule: "R3",
            edge: "the voltage left at cut-off suffices for the load",
            slug: "voltage-too-low-at-load",
            severity: Nonconforming,
            site: Document::run("iec")
                .with("load", "least = '?'")
                .with("circuit", "one_way = '5 m'; drop = '20 %'")
                .with("circuit.device", "rating = '16 A'"),
            passing: "9.5 V",
            failing: "9.68 V",
            also: &[],
        },
        // 212 m of 1.5 mm² at 30 °C, 13.3 × 1.0393 Ω/km = 2.930 Ω, lugs and a 2 A breaker (0.4 and 100 mΩ):
        // 3.031 Ω. No more than V²/4R = 100/12.12 = 8.25 W arrive.
        Pair {
            rule: "R3",
            edge: "a line carries no more than V²/4R",
            slug: "no-solution",
            severity: Danger,
            site: Document::run("iec")
                .with("bank", "cut_off = '10 V'")
                .with("load", "current = none; power = '?'")
                .with("circuit", "one_way = '106 m'; size = '1.5 mm2'")
                .with("circuit.device", "family = 'industrial'; rating = '2 A'; let_through = '1000 A2s'"),
            passing: "8.1 W",
            failing: "8.4 W",
            also: &[],
        },
        Pair {
            rule: "R3",
            edge: "a load without its greatest voltage is not checked",
            slug: "greatest-voltage-not-stated",
            severity: NotChecked,
            site: Document::run("craft_us").with("load", "greatest = none; ?"),
            passing: "greatest = '16 V'",
            failing: "",
            also: &[],
        },
        // The reserve alone at 10.5 V: branch 2 × 8.466 + 6.65 = 23.6 mΩ; link of 6 mm², 10 A of 46 A, 31.9 °C, 3.454 mΩ/m,
        // its 20 A fuse and lugs 5.4 mΩ. (10.5 − 9.5) V/10 A = 100 mΩ leave 71.0/3.454 = 20.6 m, route 10.3 m.
        Pair {
            rule: "R3",
            edge: "each bank may have to feed alone",
            slug: "voltage-too-low-at-load",
            severity: Nonconforming,
            site: Document::run("iec")
                .with("load", "least = '9.5 V'")
                .with("circuit", "from = 'board'; drop = '20 %'")
                .with("circuit.device", "rating = '16 A'")
                .add(
                    "bank",
                    "name = 'reserve'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; \
                     cut_off = '10.5 V'; highest = '15 V'; internal_resistance = '5 mohm'",
                )
                .add("board", "name = 'board'; busbar = '100 A'")
                .add(
                    "circuit",
                    "name = 'feeder'; from = 'bank'; to = 'board'; one_way = '1 m'; size = '6 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'; drop = '20 %'",
                )
                .add("circuit.device", &device("gG", "20 A"))
                .add(
                    "circuit",
                    "name = 'link'; from = 'board'; to = 'reserve'; one_way = '?'; size = '6 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'; drop = '20 %'",
                )
                .add("circuit.device", &format!("{}; end = 'to'", device("gG", "20 A"))),
            passing: "10.0 m",
            failing: "10.5 m",
            also: &[],
        },
        // The feeder of two boards carries what both draw: 10 A and 10 A over a 20 A fuse that carries all of it.
        below(
            "a feeder carries the sum of its loads",
            Document::run("iec")
                .with("circuit", "from = 'board'")
                .add("board", "name = 'board'; busbar = '100 A'")
                .add("load", "name = 'other'; current = '?'; least = '1 V'; greatest = '100 V'")
                .add(
                    "circuit",
                    "name = 'feeder'; from = 'bank'; to = 'board'; one_way = '1 m'; size = '6 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'",
                )
                .add("circuit.device", &device("gG", "20 A"))
                .add(
                    "circuit",
                    "name = 'second'; from = 'board'; to = 'other'; one_way = '1 m'; size = '2.5 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'",
                )
                .add("circuit.device", &device("gG", "16 A")),
            "9.8 A",
            "10.2 A",
        ),
        // What nobody stated is not checked, and is no pass.
        Pair {
            rule: "R3",
            edge: "a load without its least voltage is not checked",
            slug: "least-voltage-not-stated",
            severity: NotChecked,
            site: Document::run("iec").with("load", "least = none; ?"),
            passing: "least = '9 V'",
            failing: "",
            also: &[],
        },
    ]
}
