//! What devices carry for hours, and families that open late (R5).
//!
//! Conventional currents: IEC 60269 gG 1.9 In above 4 A, 1.6 In from 16 A (page seen): `tests/reference/protection.toml`.
//! Continuous load at most 80 % of a device: 1/1.25, NFPA 70-2023, 210.20(A), 215.3 (page seen); for vehicle fuse-links
//! common practice, no source. Fuse-links and breakers of IEC carry their rating without limit of time, recalled.

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

fn late(edge: &'static str, site: Document, passing: &'static str, failing: &'static str) -> Pair {
    Pair { rule: "R5", edge, slug: "device-opens-late", severity: Danger, site, passing, failing, also: &[] }
}

fn below(edge: &'static str, site: Document, passing: &'static str, failing: &'static str) -> Pair {
    Pair {
        rule: "R5",
        edge,
        slug: "device-below-load",
        severity: Nonconforming,
        site,
        passing,
        failing,
        also: &[],
    }
}

pub fn pairs() -> Vec<Pair> {
    vec![
        // 8 AWG, 75 °C as its terminals: 50 A. 1.6 × 45 = 72 A against 1.45 × 50 = 72.5 A; 1.6 × 50 = 80 A, though
        // 50 A ≤ 50 A.
        late(
            "a gG fuse is chosen from its 1.6 In",
            Document::run("us")
                .with("load", "current = '30 A'")
                .with("circuit", "size = '8 AWG'; terminal = '75 degC'")
                .with("circuit.device", "family = 'gG'; rating = '?'; terminal = '75 degC'"),
            "45 A",
            "50 A",
        ),
        // 10 AWG, 105 °C: 60 A; 1.45 × 60 = 87 A; 1.6 × 50 = 80 A, 1.6 × 60 = 96 A.
        late(
            "a gG fuse is chosen from its 1.6 In",
            Document::run("craft_us").with("circuit.device", "family = 'gG'; rating = '?'"),
            "54 A",
            "55 A",
        ),
        // 2.5 mm², 105 °C: 35 A; 1.45 × 35 = 50.75 A; 1.6 × 31 = 49.6 A, 1.6 × 32 = 51.2 A.
        late(
            "a gG fuse is chosen from its 1.6 In",
            Document::run("craft_iso").with("circuit.device", "family = 'gG'; rating = '?'"),
            "31 A",
            "32 A",
        ),
        // 1.5 mm² in an insulated wall (B.52.2, A1): 14.5 A, 1.45 × 14.5 = 21.03 A. 1.9 × 11 = 20.9 A, 1.9 × 11.5 = 21.9 A;
        // with 1.6 it would be 18.4 A.
        late(
            "a gG fuse below 16 A is chosen from its 1.9 In",
            Document::run("iec")
                .with("circuit", "size = '1.5 mm2'; installed = 'insulated_wall'")
                .with("circuit.device", "rating = '?'"),
            "11 A",
            "11.5 A",
        ),
        // The family alone: class T opens at 1.35 In and suits 50 A of ampacity, gG at 1.6 In does not.
        late(
            "a family that opens late needs a smaller rating",
            Document::run("us")
                .with("load", "current = '30 A'")
                .with("circuit", "size = '8 AWG'; terminal = '75 degC'")
                .with("circuit.device", "family = '?'; rating = '50 A'; terminal = '75 degC'"),
            "class T",
            "gG",
        ),
        // Strip fuse-links of one shape differ widely in when they open: no current is held, so nothing passes.
        Pair {
            severity: NotChecked,
            slug: "opening-current-not-checked",
            ..late(
                "a family without a known edge is not checked",
                Document::run("craft_iso").with("circuit.device", "family = '?'; rating = '30 A'"),
                "blade",
                "bolted strip",
            )
        },
        // aR opens on short-circuit only (IEC 60269-4, recalled): as the only device it guards against no overload.
        Pair {
            rule: "R5",
            edge: "a device for short-circuit only does not protect against overload",
            slug: "device-above-ampacity",
            severity: Danger,
            site: Document::run("iec").with("circuit.device", "family = '?'"),
            passing: "gG",
            failing: "aR",
            also: &[],
        },
        // NFPA 70-2023, 240.10 (recalled): supplementary protection stands behind a branch circuit's own device.
        Pair {
            rule: "R5",
            edge: "a supplementary protector alone guards no circuit",
            slug: "device-above-ampacity",
            severity: Danger,
            site: Document::run("us").with("circuit.device", "family = '?'"),
            passing: "molded case",
            failing: "supplementary",
            also: &[],
        },
        // 0.8 × 20 A = 16 A.
        below(
            "a blade fuse carries 80 % of its rating for hours",
            Document::run("craft_iso")
                .with("load", "current = '?'")
                .with("circuit.device", "family = 'blade'"),
            "15.8 A",
            "16.2 A",
        ),
        below(
            "a class T fuse carries 80 % of its rating for hours",
            Document::run("craft_us").with("load", "current = '?'"),
            "15.8 A",
            "16.2 A",
        ),
        // 1.25 × 16 A = 20 A; 1.25 and 80 % together would leave 12.8 A.
        below(
            "1.25 and 80 % are one margin, not two",
            Document::run("us").with("load", "current = '?'"),
            "15.8 A",
            "16.2 A",
        ),
        below(
            "a device carries what is not continuous up to its rating",
            Document::run("us").with("load", "current = '19 A'; continuous = ?"),
            "false",
            "true",
        ),
        below(
            "a device that is rated for 100 % carries all of it",
            Document::run("craft_us")
                .with("load", "current = '19 A'")
                .with("circuit.device", "full_rated = ?"),
            "true",
            "false",
        ),
    ]
}
