//! Metal and stranding of conductors (R18).
//!
//! Rule R18 of the design. Stranded conductors under craft rules: 33 CFR 183.425 and ISO 13297, recalled.

use ampwright::site::Severity::{self, Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

fn refused(
    edge: &'static str,
    severity: Severity,
    site: Document,
    passing: &'static str,
    failing: &'static str,
) -> Pair {
    Pair { rule: "R18", edge, slug: "conductor-refused", severity, site, passing, failing, also: &[] }
}

pub fn pairs() -> Vec<Pair> {
    let mut pairs = Vec::new();
    for set in ["us", "iec", "craft_iso", "craft_us"] {
        let metal = || Document::run(set).with("circuit", "material = '?'");
        pairs.push(refused(
            "copper-clad aluminium is refused",
            Danger,
            metal(),
            "copper",
            "copper_clad_aluminium",
        ));
        pairs.push(refused("aluminium is refused", Danger, metal(), "copper", "aluminium"));
        pairs.push(refused(
            "no solid conductor where a cable moves",
            Nonconforming,
            Document::run_from_board(set).with("circuit", "moving = true; class = ?"),
            "5",
            "1",
        ));
    }
    for set in ["craft_iso", "craft_us"] {
        let class = |moving: &str| {
            Document::run_from_board(set).with("circuit", &format!("moving = {moving}; class = ?"))
        };
        pairs.push(refused("no solid conductor under craft rules", Nonconforming, class("false"), "2", "1"));
        pairs.push(refused(
            "no class 2 conductor where a cable moves under craft rules",
            Nonconforming,
            class("true"),
            "5",
            "2",
        ));
    }
    // The user's own word admits aluminium; the terminals and tables remain what they are.
    for set in ["us", "craft_us"] {
        pairs.push(refused(
            "aluminium is refused unless the user admits it",
            Danger,
            Document::run(set)
                .with("load", "current = '2 A'")
                .with("circuit", "material = 'aluminium'")
                .add("rules.override", "?"),
            "aluminium = 'admitted'",
            "drop = '5 %'",
        ));
    }
    // The tables held are copper's: what aluminium carries is not told from them.
    for set in ["us", "iec", "craft_iso", "craft_us"] {
        pairs.push(Pair {
            slug: "ampacity-not-checked",
            ..refused(
                "what admitted aluminium carries is not checked",
                NotChecked,
                Document::run(set)
                    .with("circuit", "material = '?'")
                    .add("rules.override", "aluminium = 'admitted'"),
                "copper",
                "aluminium",
            )
        });
    }
    for set in ["us", "iec"] {
        pairs.push(refused(
            "solid conductors pass in fixed wiring only",
            Nonconforming,
            Document::run_from_board(set).with("circuit", "class = 1; moving = ?"),
            "false",
            "true",
        ));
    }
    // What leaves a bank counts as a battery cable, whatever else is stated.
    for set in ["us", "iec"] {
        pairs.push(refused(
            "no solid conductor at a battery",
            Nonconforming,
            Document::run(set).with("circuit", "class = ?"),
            "2",
            "1",
        ));
    }
    pairs
}
