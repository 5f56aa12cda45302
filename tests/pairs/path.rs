//! The path and its resistance: both conductors (R1), their temperature (R2), joints and returns (R9).
//!
//! Resistances at 20 °C: IEC 60228:2004, Table 3, class 5, plain (page seen); 2.5 mm² 7.98, 4 mm² 4.95, 6 mm² 3.30 Ω/km.
//! Temperature θ = air + (rating − air)·(I/Iz)², factor (234.5 + θ)/254.5. Generic joints, common practice, no source: a
//! lug 0.1 mΩ, a fuse with its holder 100 mV at its rating.

use ampwright::site::Severity::{Advice, Danger, Nonconforming};

use crate::document::{Document, device};
use crate::pair::Pair;

/// 10 A at 24 V through 2.5 mm², 3 % own limit: 0.72 V or 72 mΩ, of which four lugs take 0.4 and the fuse 6.25 mΩ.
///
/// At 30 °C clipped 2.5 mm² carries 27 A (B.52.2, C): θ = 30 + 40·(10/27)² = 35.5 °C, 7.98 × 1.0609 = 8.466 mΩ/m.
fn ten_amperes() -> Document {
    Document::run("iec")
        .with("bank", "nominal = '24 V'; cut_off = '21 V'; highest = '31 V'")
        .with("circuit", "drop = '3 %'")
        .with("circuit.device", "rating = '16 A'")
}

pub fn pairs() -> Vec<Pair> {
    let drop = |rule, edge, site, passing, failing| Pair {
        rule,
        edge,
        slug: "drop-exceeded",
        severity: Nonconforming,
        site,
        passing,
        failing,
        also: &[],
    };
    vec![
        // (72 − 6.65)/8.466 = 7.72 m of conductor, 5 m of it positive: 2.72 m.
        drop(
            "R1",
            "the negative conductor counts by its own length",
            ten_amperes().with("circuit", "one_way = none; positive_length = '5 m'; negative_length = '?'"),
            "2.65 m",
            "2.79 m",
        ),
        // The same with the roles changed: twice the positive length would be 5.44 m.
        drop(
            "R1",
            "the positive conductor counts by its own length",
            ten_amperes().with("circuit", "one_way = none; positive_length = '?'; negative_length = '5 m'"),
            "2.65 m",
            "2.79 m",
        ),
        // 4 mm² at the same 35.5 °C: 4.95 × 1.0609 = 5.251 mΩ/m; 65.35/(8.466 + 5.251) = 4.76 m.
        drop(
            "R1",
            "the negative conductor counts by its own size",
            ten_amperes().with("circuit", "one_way = '?'; negative_size = '4 mm2'"),
            "4.65 m",
            "4.88 m",
        ),
        // Branch 2 m: 4 × 8.466 + 6.65 = 40.5 mΩ, 0.405 V of 10 A. Feeder of 6 mm², 20 A of 46 A: 37.6 °C, 3.528 mΩ/m;
        // (0.72 − 0.405) V/20 A = 15.74 mΩ, less lugs and a 32 A fuse (0.4 + 3.125): 12.22/3.528 = 3.46 m, 1.73 m route.
        drop(
            "R1",
            "a shared feeder counts once, with the sum of its currents",
            ten_amperes()
                .with("circuit", "from = 'board'; one_way = '2 m'")
                .add("board", "name = 'board'; busbar = '100 A'")
                .add("load", "name = 'other'; current = '10 A'; least = '1 V'; greatest = '100 V'")
                .add(
                    "circuit",
                    "name = 'feeder'; from = 'bank'; to = 'board'; one_way = '?'; size = '6 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'; drop = '20 %'",
                )
                .add("circuit.device", &device("gG", "32 A"))
                .add(
                    "circuit",
                    "name = 'short'; from = 'board'; to = 'other'; one_way = '1 m'; size = '2.5 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'",
                )
                .add("circuit.device", &device("gG", "16 A")),
            "1.68 m",
            "1.79 m",
        ),
        // 7.38 m of conductor. In 40 °C air Iz = 27 × 0.87: θ = 40 + 30·(10/23.49)² = 45.4 °C, 7.38 × 7.98 × 1.100 =
        // 64.8 mΩ; in 45 °C, Iz = 27 × 0.79: 50.5 °C, × 1.120 = 65.9 mΩ; the edge is 65.35 mΩ. Factors: B.52.14 (page seen).
        drop(
            "R2",
            "hot air makes the drop grow",
            ten_amperes().with("circuit", "one_way = '3.69 m'; ambient = '?'"),
            "40 degC",
            "45 degC",
        ),
        // 36 mΩ (3 % of 12 V at 10 A) less lugs and a 20 A fuse, 5.4 mΩ. 2.5 mm², 105 °C, 35 A × 0.7746 = 27.1 A in an
        // engine space of 60 °C: 60 + 45·(10/27.1)² = 66.1 °C, 7.98 × 1.1812 = 9.426 mΩ/m: 3.246 m, route 1.62 m. In air
        // of 30 °C it would be 1.78 m.
        drop(
            "R2",
            "an engine space heats the conductor",
            Document::run("craft_iso")
                .with("load", "use = 'critical'")
                .with("circuit", "space = 'engine'; one_way = '?'"),
            "1.60 m",
            "1.65 m",
        ),
        // 6 mm² (3.30 Ω/km), counted as 10 AWG, 60 A × 0.85 = 51 A in 50 °C (33 CFR 183.425, Table 5, note 1, page seen):
        // 50 + 55·(10/51)² = 52.1 °C, 3.30 × 1.1261 = 3.716 mΩ/m: 8.234 m, route 4.12 m. In air of 30 °C 4.42 m.
        drop(
            "R2",
            "an engine space heats the conductor",
            Document::run("craft_us")
                .with("load", "use = 'critical'")
                .with("circuit", "size = '6 mm2'; space = 'engine'; one_way = '?'"),
            "4.05 m",
            "4.18 m",
        ),
        // Weakest bank 6 × 1.98 V = 11.88 V behind 5 mΩ × 2 × 1.5 × 1.5 (empty, cold, aged: common practice, no source).
        // Class T 20 A opens at 1.35 × 20 = 27 A (UL 248, recalled): 440 mΩ, less 22.5 and 5.4 mΩ: 412.1 mΩ. Hot, 70 °C:
        // 7.98 × 304.5/254.5 = 9.548 mΩ/m: 43.2 m, 21.6 m route. Cold it would reach 25.8 m.
        Pair {
            rule: "R2",
            edge: "the least fault current flows through hot conductors",
            slug: "least-fault-too-small",
            severity: Danger,
            site: Document::run("craft_iso")
                .with("load", "current = '0.2 A'")
                .with("circuit", "insulation = 'PVC 70 degC'; one_way = '?'"),
            passing: "21.2 m",
            failing: "22.0 m",
            also: &[],
        },
        // As before with 15 A: 11.88/20.25 A = 586.7 mΩ, less 22.5, 0.4 and 6.67: 557.1 mΩ over 10.3 Ω/km (NEC, Chapter 9,
        // Table 8, 14 AWG stranded at 75 °C, page seen) = 54.1 m, 27.0 m route.
        Pair {
            rule: "R2",
            edge: "the least fault current flows through conductors at 75 °C",
            slug: "least-fault-too-small",
            severity: Danger,
            site: Document::run("us")
                .with("load", "current = '0.2 A'")
                .with("circuit", "size = '14 AWG'; one_way = '?'")
                .with("circuit.device", "rating = '15 A'"),
            passing: "26.5 m",
            failing: "27.6 m",
            also: &[],
        },
        // Bank just charged, 31 V behind 5 mΩ; 2.4 kA at 12.92 mΩ. 7.9 m of 16 mm² at 1/58 Ω·mm²/m (IEC 60028): 8.513 mΩ
        // at 20 °C; at 5 °C × 0.941: 2.38 kA; at −2 °C × 0.914: 2.43 kA.
        Pair {
            rule: "R2",
            edge: "the greatest fault current flows through cold conductors",
            slug: "breaking-capacity-too-low",
            severity: Danger,
            site: ten_amperes()
                .with("site", "ambient = ['?', '30 degC']")
                .with("circuit", "from = 'board'")
                .with("circuit.device", "breaking = '2.4 kA'")
                .add("board", "name = 'board'; busbar = '100 A'")
                .add(
                    "circuit",
                    "name = 'feeder'; from = 'bank'; to = 'board'; one_way = '3.95 m'; size = '16 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'",
                )
                .add("circuit.device", &device("gG", "40 A")),
            passing: "5 degC",
            failing: "-2 degC",
            also: &[],
        },
        // 6 m of conductor 50.8 mΩ, fuse 6.25 mΩ: (72 − 57.05)/4 = 3.74 mΩ for each of four joints.
        drop(
            "R9",
            "joints count in the drop",
            ten_amperes()
                .with("circuit", "one_way = '3 m'")
                .add("circuit.joint", "kind = 'lug'; count = 4; resistance = '?'"),
            "3.65 mohm",
            "3.83 mohm",
        ),
        // 50.8 + 6.25 + 0.4 = 57.4 mΩ: 14.55 mΩ are left for a switch of stated resistance.
        drop(
            "R9",
            "a switch in the path counts in the drop",
            ten_amperes().with("circuit", "one_way = '3 m'").add(
                "circuit.part",
                "name = 'switch'; kind = 'switch'; rating = '50 A'; dc_voltage = '60 V'; resistance = '?'",
            ),
            "14.2 mohm",
            "14.9 mohm",
        ),
        // 30 A through 5.56 mΩ makes 5 W. That 5 W deserve a look is common practice, no source.
        Pair {
            rule: "R9",
            edge: "a joint that makes more than 5 W is pointed out",
            slug: "joint-heat",
            severity: Advice,
            site: Document::run("iec")
                .with("load", "current = '30 A'")
                .with("circuit", "size = '10 mm2'; drop = '20 %'")
                .with("circuit.device", "rating = '40 A'")
                .add("circuit.joint", "kind = 'lug'; resistance = '?'"),
            passing: "5.45 mohm",
            failing: "5.65 mohm",
            also: &[],
        },
        // 5 m of positive conductor 42.3 mΩ: 65.35 − 42.3 = 23.0 mΩ are left for the chassis.
        drop(
            "R9",
            "a stated chassis return counts in the drop",
            ten_amperes().with("circuit", "one_way = '5 m'; return = 'chassis'; return_resistance = '?'"),
            "22.5 mohm",
            "23.6 mohm",
        ),
        Pair {
            rule: "R9",
            edge: "a chassis return is refused unless its resistance is stated",
            slug: "chassis-return",
            severity: Danger,
            site: Document::run("us").with("circuit", "return = 'chassis'; ?"),
            passing: "return_resistance = '1 mohm'",
            failing: "",
            also: &[],
        },
        Pair {
            rule: "R9",
            edge: "a chassis return is refused unless its resistance is stated",
            slug: "chassis-return",
            severity: Danger,
            site: Document::run("iec").with("circuit", "return = 'chassis'; ?"),
            passing: "return_resistance = '1 mohm'",
            failing: "",
            also: &[],
        },
        hull("craft_iso"),
        hull("craft_us"),
        // Under craft rules the engine block may carry the return, for cranking and alternator only.
        engine_block("craft_iso"),
        engine_block("craft_us"),
    ]
}

/// A stated resistance does not admit the hull.
fn hull(set: &str) -> Pair {
    Pair {
        rule: "R9",
        edge: "hull or chassis is no return under craft rules",
        slug: "chassis-return",
        severity: Danger,
        site: Document::run(set).with("circuit", "?"),
        passing: "",
        failing: "return = 'chassis'\nreturn_resistance = '1 mohm'",
        also: &[],
    }
}

fn engine_block(set: &str) -> Pair {
    Pair {
        rule: "R9",
        edge: "only engine starting returns through the block",
        slug: "chassis-return",
        severity: Danger,
        site: Document::run(set)
            .with("circuit", "return_resistance = '1 mohm'; return = 'chassis'; cranking = ?"),
        passing: "true",
        failing: "false",
        also: &[],
    }
}
