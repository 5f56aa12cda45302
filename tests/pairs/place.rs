//! Where devices sit: distance from the source, ends, poles (R7).
//!
//! Distances: `craft_us` 7 in, 40 in in sheath, 72 in in sheath from a battery post (33 CFR 183.455, ABYC E-11, recalled);
//! `craft_iso` 200 mm (ISO 13297, recalled); `iec` 3 m, in a sheath or enclosure throughout (IEC 60364-4-43, 434.2.1,
//! recalled); `us` 5 ft (690.71(H) of 2014, recalled). An inch is 25.4 mm, a foot 304.8 mm.

use ampwright::site::Severity::{Danger, NotChecked};

use crate::document::{Document, device};
use crate::pair::Pair;

fn distance(edge: &'static str, site: Document, passing: &'static str, failing: &'static str) -> Pair {
    Pair {
        rule: "R7",
        edge,
        slug: "device-too-far-from-source",
        severity: Danger,
        site: site.with("circuit", "one_way = '4 m'").with("circuit.device", "from_source = '?'"),
        passing,
        failing,
        also: &[],
    }
}

/// A device in one pole alone.
fn pole(
    slug: &'static str,
    edge: &'static str,
    earthing: &str,
    passing: &'static str,
    failing: &'static str,
) -> Pair {
    Pair {
        rule: "R7",
        edge,
        slug,
        severity: Danger,
        site: Document::run("iec")
            .with("site", &format!("earthing = '{earthing}'"))
            .with("circuit.device", "pole = '?'"),
        passing,
        failing,
        also: &[],
    }
}

/// A link between two banks, with a device at its beginning and one that guards an end to be told.
fn link(set: &str) -> Document {
    Document::run(set)
        .with("circuit", "to = 'reserve'; current = '10 A'")
        .without("load")
        .add(
            "bank",
            "name = 'reserve'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; cut_off = '10.5 V'; \
             highest = '15 V'; internal_resistance = '5 mohm'",
        )
        .add("circuit.device", &format!("{}; end = '?'", device("class T", "20 A")))
}

fn second_end(set: &str) -> Pair {
    Pair {
        rule: "R7",
        edge: "both ends of a link between banks have a device",
        slug: "second-feeding-end-unprotected",
        severity: Danger,
        site: link(set),
        passing: "to",
        failing: "from",
        also: &[],
    }
}

fn missing(set: &str) -> Pair {
    Pair {
        rule: "R7",
        edge: "only cranking conductors under craft rules go without a device",
        slug: "device-missing",
        severity: Danger,
        site: cranking(set).with("circuit", "cranking = ?"),
        passing: "true",
        failing: "false",
        also: &[],
    }
}

/// A run without a device to a load that starts an engine.
fn cranking(set: &str) -> Document {
    Document::run(set)
        .without("circuit.device")
        .with("load", "continuous = false")
        .with("circuit", "device = 'none'; cranking = true")
}

/// What runs for hours starts no engine.
fn not_starting(set: &str) -> Pair {
    Pair {
        rule: "R7",
        edge: "a continuous load makes no cranking conductor",
        slug: "device-missing",
        severity: Danger,
        site: cranking(set).with("load", "continuous = ?"),
        passing: "false",
        failing: "true",
        also: &[],
    }
}

/// A feeder of a board on the way to the starter is no cranking conductor.
fn feeder_to_starter() -> Pair {
    Pair {
        rule: "R7",
        edge: "cranking conductors end at their load",
        slug: "device-missing",
        severity: Danger,
        site: cranking("craft_us").with("circuit", "to = none; ?"),
        passing: "to = 'load'",
        failing: "to = 'board'\n\n[[board]]\nname = 'board'\nbusbar = '100 A'\n\n[[circuit]]\nname = 'branch'\n\
                  from = 'board'\nto = 'load'\none_way = '1 m'\nsize = '10 AWG'\ninsulation = 'PVC 105 degC'\n\
                  cranking = true\ndevice = 'none'",
        also: &[],
    }
}

pub fn pairs() -> Vec<Pair> {
    let sheathed = |site: Document| site.with("circuit", "sheathed = true");
    vec![
        // 7 in = 177.8 mm.
        distance("7 in from the source", Document::run("craft_us"), "175 mm", "180 mm"),
        // 40 in = 1.016 m, at a board.
        distance("40 in in a sheath", sheathed(Document::run_from_board("craft_us")), "1.0 m", "1.03 m"),
        // 72 in = 1.829 m, at the bank.
        distance(
            "72 in in a sheath from a battery post",
            sheathed(Document::run("craft_us")),
            "1.81 m",
            "1.85 m",
        ),
        distance("200 mm from the source", Document::run("craft_iso"), "195 mm", "205 mm"),
        distance("3 m in a sheath", sheathed(Document::run("iec")), "2.95 m", "3.05 m"),
        // 5 ft = 1.524 m.
        distance("5 ft from the source", Document::run("us"), "1.5 m", "1.55 m"),
        // The user's own length replaces the set's.
        distance(
            "the user's own distance from the source",
            Document::run("iec").add("rules.override", "unfused_length = '0.5 m'"),
            "0.49 m",
            "0.51 m",
        ),
        // The 3 m hold where risk of short-circuit is small, for which a sheath throughout is taken: without it no length
        // is held.
        Pair {
            rule: "R7",
            edge: "a length without sheath is not checked",
            slug: "device-distance-not-limited",
            severity: NotChecked,
            site: Document::run("iec").with("circuit", "sheathed = ?"),
            passing: "true",
            failing: "false",
            also: &[],
        },
        // At the source's very terminal there is no length to judge.
        Pair {
            rule: "R7",
            edge: "a device at its source's terminal needs no length",
            slug: "device-distance-not-limited",
            severity: NotChecked,
            site: Document::run("iec").with("circuit.device", "from_source = '?'"),
            passing: "0 mm",
            failing: "10 mm",
            also: &[],
        },
        // More is admitted in a sheath throughout, but nobody recalls how much.
        Pair {
            rule: "R7",
            edge: "a length in sheath is not checked",
            slug: "device-distance-not-limited",
            severity: NotChecked,
            site: Document::run("craft_iso").with("circuit", "sheathed = ?"),
            passing: "false",
            failing: "true",
            also: &[],
        },
        Pair {
            rule: "R7",
            edge: "the distance of a device at the bank is stated or not checked",
            slug: "device-distance-not-stated",
            severity: NotChecked,
            site: Document::run("us").with("circuit.device", "from_source = none; ?"),
            passing: "from_source = '0.3 m'",
            failing: "",
            also: &[],
        },
        second_end("us"),
        second_end("craft_us"),
        // Two banks meet at a board, each behind its fuse at its own end: what comes from the far side, 20 A, may stand on
        // 10 AWG with its 35 A (310.16, 75 °C; 30 A after 240.4(D)); 40 A may not.
        Pair {
            rule: "R7",
            edge: "a device further away guards an end only as far as the conductor's limit",
            slug: "second-feeding-end-unprotected",
            severity: Danger,
            site: Document::run("us")
                .with("circuit", "to = 'board'; current = '10 A'")
                .without("load")
                .add(
                    "bank",
                    "name = 'reserve'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; \
                     cut_off = '10.5 V'; highest = '15 V'; internal_resistance = '5 mohm'",
                )
                .add("board", "name = 'board'; busbar = '100 A'")
                .add(
                    "circuit",
                    "name = 'second'; from = 'board'; to = 'reserve'; one_way = '1 m'; size = '4 AWG'; \
                     class = 2; insulation = 'PVC 75 degC'; current = '10 A'",
                )
                .add("circuit.device", &format!("{}; end = 'to'", device("class T", "?"))),
            passing: "30 A",
            failing: "35 A",
            also: &[],
        },
        missing("craft_iso"),
        missing("craft_us"),
        not_starting("craft_iso"),
        not_starting("craft_us"),
        feeder_to_starter(),
        // The exemption belongs to the craft rules.
        Pair {
            rule: "R7",
            edge: "cranking conductors go without a device under craft rules only",
            slug: "device-missing",
            severity: Danger,
            site: cranking("craft_iso").with("site", "rules = '?'").with("circuit", "size = '16 mm2'"),
            passing: "craft_iso",
            failing: "iec",
            also: &[],
        },
        pole(
            "device-in-earthed-pole",
            "negative-earthed: not in the negative pole alone",
            "negative",
            "positive",
            "negative",
        ),
        pole(
            "device-in-earthed-pole",
            "positive-earthed: not in the positive pole alone",
            "positive",
            "negative",
            "positive",
        ),
        pole(
            "device-in-earthed-pole",
            "both poles are right where one is earthed",
            "negative",
            "both",
            "negative",
        ),
        pole("one-pole-of-floating-system", "floating: in both poles", "floating", "both", "positive"),
        Pair {
            rule: "R7",
            edge: "floating: two single-pole devices guard both poles",
            slug: "one-pole-of-floating-system",
            severity: Danger,
            site: Document::run("iec")
                .with("site", "earthing = 'floating'")
                .with("circuit.device", "pole = 'positive'")
                .add("circuit.device", &format!("{}; pole = '?'", device("gG", "20 A"))),
            passing: "negative",
            failing: "positive",
            also: &[],
        },
        // With one at each end a fault between them keeps one pole that nothing opens.
        Pair {
            rule: "R7",
            edge: "floating: two single-pole devices sit at one end",
            slug: "one-pole-of-floating-system",
            severity: Danger,
            site: Document::run("iec")
                .with("site", "earthing = 'floating'")
                .with("circuit.device", "pole = 'positive'")
                .add("circuit.device", &format!("{}; pole = 'negative'; end = '?'", device("gG", "20 A"))),
            passing: "from",
            failing: "to",
            also: &[],
        },
        pole(
            "one-pole-of-floating-system",
            "floating: not in the negative pole alone",
            "floating",
            "both",
            "negative",
        ),
    ]
}
