//! Banks: joined ones must be alike (R15), what they state must fit their cells (R6, R11, R14), touch (R19), lugs (R8).
//!
//! Cell voltages that charging reaches and discharge must not: AGM 2.38 V (page seen: `lead-acid-charge-voltages` in
//! `tests/reference/battery.toml`), LFP 3.4 V, lead-acid 1.6 V and LFP 2.5 V (recalled). Nominal 2 and 3.2 V a cell.
//! 60 V and 120 V DC: IEC 60364-4-41:2005, extra-low voltage (page seen). Unlike by more than 10 % of nominal, 2 % of
//! highest voltage or twice the fault current: common practice, no source.

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::{Document, device};
use crate::pair::Pair;

fn bank(
    rule: &'static str,
    slug: &'static str,
    edge: &'static str,
    site: Document,
    passing: &'static str,
    failing: &'static str,
) -> Pair {
    Pair { rule, edge, slug, severity: Nonconforming, site, passing, failing, also: &[] }
}

/// A bank of 48 or 96 V and what bears it.
fn high(nominal: &str, cut_off: &str) -> Document {
    Document::run("iec")
        .with(
            "bank",
            &format!(
                "nominal = '{nominal}'; cut_off = '{cut_off}'; highest = '?'; internal_resistance = '50 mohm'"
            ),
        )
        .with("load", "greatest = '150 V'")
}

/// Four circuits at the bank, and a fifth from a place to be told.
fn fifth() -> Document {
    let mut site = Document::run("iec").add("board", "name = 'board'; busbar = '100 A'");
    for (name, from, to) in [
        ("second", "bank", "load 2"),
        ("third", "bank", "load 3"),
        ("feeder", "bank", "board"),
        ("fifth", "?", "load 5"),
    ] {
        if to != "board" {
            site = site
                .add("load", &format!("name = '{to}'; current = '1 A'; least = '1 V'; greatest = '100 V'"));
        }
        site = site
            .add(
                "circuit",
                &format!(
                    "name = '{name}'; from = '{from}'; to = '{to}'; one_way = '1 m'; size = '2.5 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'"
                ),
            )
            .add("circuit.device", &device("gG", "16 A"));
    }
    site
}

fn unmade(rule: &'static str, slug: &'static str, edge: &'static str, site: Document) -> Pair {
    Pair { severity: NotChecked, ..bank(rule, slug, edge, site, "", "") }
}

pub fn pairs() -> Vec<Pair> {
    let lfp = || Document::run("craft_us").with("bank", "chemistry = 'lfp'; nominal = '12.8 V'");
    vec![
        // 48 V and 10 % of it: 52.8 V. 54 V are 27 cells: highest 65 V is 2.41, cut-off 44 V 1.63 V a cell.
        Pair {
            severity: Danger,
            ..bank(
                "R15",
                "banks-of-unlike-voltage",
                "banks that are joined have one nominal voltage",
                Document::two_banks(
                    "nominal = '?'; cut_off = '44 V'; highest = '65 V'; internal_resistance = '20 mohm'",
                )
                .with(
                    "bank",
                    "nominal = '48 V'; cut_off = '44 V'; highest = '65 V'; internal_resistance = '20 mohm'",
                ),
                "52 V",
                "54 V",
            )
        },
        bank(
            "R15",
            "banks-of-unlike-chemistry",
            "banks that are joined have one chemistry",
            Document::two_banks("chemistry = '?'"),
            "agm",
            "gel",
        ),
        // 15 V and 2 % of it: 15.3 V.
        bank(
            "R15",
            "banks-of-unlike-charge-voltage",
            "banks that are joined are charged to one voltage",
            Document::two_banks("highest = '?'"),
            "15.25 V",
            "15.35 V",
        ),
        // 6 × 2.38 = 14.28 V.
        bank(
            "R11",
            "highest-below-charge-voltage",
            "the highest voltage of a lead-acid bank is one that charging reaches",
            Document::run("iec").with("bank", "highest = '?'"),
            "14.35 V",
            "14.2 V",
        ),
        // 4 × 3.4 = 13.6 V.
        bank(
            "R11",
            "highest-below-charge-voltage",
            "the highest voltage of a lithium bank is one that charging reaches",
            lfp().with("bank", "highest = '?'"),
            "13.7 V",
            "13.5 V",
        ),
        // 12 V of LFP are four cells, not 12/3.2.
        bank(
            "R11",
            "highest-below-charge-voltage",
            "the highest voltage of a lithium bank charges as many cells as its label means",
            lfp().with("bank", "nominal = '12 V'; highest = '?'"),
            "13.7 V",
            "13.5 V",
        ),
        // 6 × 1.6 = 9.6 V.
        bank(
            "R14",
            "cut-off-below-cell-limit",
            "a lead-acid bank is disconnected before it is harmed",
            Document::run("us").with("bank", "cut_off = '?'"),
            "9.7 V",
            "9.5 V",
        ),
        // 4 × 2.5 = 10 V.
        bank(
            "R14",
            "cut-off-below-cell-limit",
            "a lithium bank is disconnected before it is harmed",
            lfp().with("bank", "cut_off = '?'"),
            "10.1 V",
            "9.9 V",
        ),
        // 15 V/5 mΩ = 3 kA: from 1.5 to 6 kA.
        bank(
            "R6",
            "fault-data-contradict",
            "a stated current of half of what the resistance gives still fits it",
            Document::run("iec").with("bank", "short_circuit = '?'"),
            "1.55 kA",
            "1.45 kA",
        ),
        bank(
            "R6",
            "fault-data-contradict",
            "a stated current of twice of what the resistance gives still fits it",
            Document::run("iec").with("bank", "short_circuit = '?'"),
            "5.9 kA",
            "6.1 kA",
        ),
        Pair {
            passing: "greatest_discharge = '50 A'",
            ..unmade(
                "R11",
                "discharge-limit-not-stated",
                "the discharge limit of a bank is stated or not checked",
                Document::run("iec").with("bank", "?"),
            )
        },
        // The load draws 10 A whatever the voltage.
        bank(
            "R11",
            "discharge-above-limit",
            "a bank gives no more than its limit",
            Document::run("craft_iso").with("bank", "greatest_discharge = '?'"),
            "10.2 A",
            "9.8 A",
        ),
        // Each of two banks may have to feed the load alone.
        bank(
            "R11",
            "discharge-above-limit",
            "each bank may have to give all of it",
            Document::two_banks("greatest_discharge = '?'").with("bank", "greatest_discharge = '50 A'"),
            "10.2 A",
            "9.8 A",
        ),
        bank("R8", "too-many-lugs", "at most four circuits at a bank's terminal", fifth(), "board", "bank"),
        // 24 cells × 2.38 = 57.1 V.
        Pair {
            passing: "59.5 V",
            failing: "60.5 V",
            ..unmade("R19", "touch-protection", "above 60 V nobody touches live parts", high("48 V", "42 V"))
        },
        // 48 cells × 2.38 = 114.2 V.
        Pair {
            passing: "119 V",
            failing: "121 V",
            ..unmade(
                "R19",
                "above-extra-low-voltage",
                "above 120 V fault protection is not checked",
                high("96 V", "84 V"),
            )
        },
    ]
}
