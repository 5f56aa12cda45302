//! Earthing and touch (R19), masts and surges (R20).
//!
//! 60 V DC: IEC 60364-4-41:2005 (page seen); 30 V for arrays and one bond point: NFPA 70-2023 (recalled). Bonding of masts:
//! 16 mm², IEC 60728-11, and 10 AWG, NFPA 70-2023, 810.21(H) (recalled).

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

fn site(rules: &str, keys: &str) -> Document {
    Document::plant(rules).with("site", keys)
}

/// A bank of 48 V that charging takes to 60 V.
fn high(highest: &str, covered: &str) -> Document {
    Document::plant("iec")
        .with(
            "bank",
            &format!(
                "nominal = '48 V'; cut_off = '42 V'; highest = '{highest}'; disconnect = '47.2 V'; reconnect = '51.6 V'; \
                 internal_resistance = '20 mohm'"
            ),
        )
        .with("generator", "absorption = '57.6 V'; float = '54.4 V'")
        .with("site", covered)
}

pub fn pairs() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    let unmade = |what, edge, site, twins| Pair::of(NotChecked, what, edge, site, twins);
    let mast = "mast = true; surge_protection = true";
    vec![
        unmade(
            ("R19", "bond-points-not-stated"),
            "how often a pole is tied to earth is stated or not checked",
            site("iec", "bonds = none; ?"),
            ("bonds = 1", ""),
        ),
        wrong(
            ("R19", "no-bond-point"),
            "the earthed pole is tied to earth",
            site("iec", "bonds = ?"),
            ("1", "0"),
        ),
        wrong(
            ("R19", "several-bond-points"),
            "the earthed pole is tied to earth once",
            site("iec", "bonds = ?"),
            ("1", "2"),
        ),
        wrong(
            ("R19", "several-bond-points"),
            "a positive pole that is earthed is tied to earth once",
            site("us", "earthing = 'positive'; bonds = ?"),
            ("1", "2"),
        ),
        wrong(
            ("R19", "several-bond-points"),
            "on a craft too",
            site("craft_us", "bonds = ?").with("load", "use = 'critical'"),
            ("1", "2"),
        ),
        wrong(
            ("R19", "floating-but-bonded"),
            "a floating system is tied to earth nowhere",
            site("iec", "earthing = 'floating'; bonds = ?"),
            ("0", "1"),
        ),
        wrong(
            ("R20", "surge-protection-missing"),
            "what comes down from a mast has surge protection",
            site("iec", "mast = true; bonding = '16 mm2'; surge_protection = ?"),
            ("true", "false"),
        ),
        wrong(
            ("R20", "surge-protection-missing"),
            "an exposed array has surge protection",
            Document::array("iec", 2, 1).with("array", "exposed = true").with("site", "surge_protection = ?"),
            ("true", "false"),
        ),
        unmade(
            ("R20", "surge-protection-not-stated"),
            "surge protection of a mast is stated or not checked",
            site("iec", "mast = true; bonding = '16 mm2'; ?"),
            ("surge_protection = true", ""),
        ),
        wrong(
            ("R20", "bonding-too-thin"),
            "a mast is bonded by 16 mm²",
            site("iec", &format!("{mast}; bonding = '?'")),
            ("16 mm2", "10 mm2"),
        ),
        wrong(
            ("R20", "bonding-too-thin"),
            "a mast is bonded by 10 AWG",
            site("us", &format!("{mast}; bonding = '?'")),
            ("10 AWG", "12 AWG"),
        ),
        unmade(
            ("R20", "bonding-not-checked"),
            "the bonding of a mast is stated or not checked",
            site("iec", &format!("{mast}; ?")),
            ("bonding = '16 mm2'", ""),
        ),
        Pair::of(
            Danger,
            ("R19", "touch-protection-missing"),
            "above 60 V live parts are covered",
            high("?", "covered = false"),
            ("59.9 V", "60.1 V"),
        ),
        Pair::of(
            Danger,
            ("R19", "touch-protection-missing"),
            "covers are there",
            high("61 V", "covered = ?"),
            ("true", "false"),
        ),
        unmade(
            ("R19", "touch-protection"),
            "covers are stated or not checked",
            high("61 V", "?"),
            ("covered = true", ""),
        ),
        // 30/1.015 = 29.56 V of open circuit at 20 °C.
        Pair::of(
            Danger,
            ("R19", "touch-protection-missing"),
            "an array is out of reach above 30 V",
            Document::array("us", 1, 1)
                .with("array", "voc = '?'; vmp = '23 V'; imp = '4.4 A'")
                .with("site", "covered = false; monitoring = 'earth_fault'"),
            ("29.5 V", "29.6 V"),
        ),
    ]
}
