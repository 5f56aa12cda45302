//! Fault currents, and devices fit for direct current (R6).
//!
//! Greatest from the highest voltage of a bank just charged (common practice, no source), or full, lead-acid 2.2 V a cell
//! (page seen), LFP 3.65 V (recalled); least from empty, lead-acid 1.98 V (page seen). 20 A/Ah as upper bound of an unknown bank (page seen:
//! `battery-short-circuit-estimate`). k of Table 43A, IEC 60364-4-43:2008 (page seen): PVC 115, XLPE 143.

use ampwright::site::Severity::{self, Danger, NotChecked};
use ampwright::site::{inspect, read};

use crate::document::{Document, device};
use crate::pair::Pair;

fn breaking(edge: &'static str, site: Document, passing: &'static str, failing: &'static str) -> Pair {
    Pair {
        rule: "R6",
        edge,
        slug: "breaking-capacity-too-low",
        severity: Danger,
        site,
        passing,
        failing,
        also: &[],
    }
}

fn withstand(edge: &'static str, site: Document, passing: &'static str, failing: &'static str) -> Pair {
    Pair { rule: "R6", edge, slug: "withstand-exceeded", severity: Danger, site, passing, failing, also: &[] }
}

fn supply(slug: &'static str, edge: &'static str, site: Document) -> Pair {
    Pair {
        rule: "R6",
        edge,
        slug,
        severity: Danger,
        site,
        passing: "dc_voltage = '32 V'",
        failing: "ac_only = true",
        also: &[],
    }
}

pub fn pairs() -> Vec<Pair> {
    vec![
        // Highest 15 V, above 6 × 2.2 V: 15 V/5 mΩ = 3 kA.
        breaking(
            "breaking capacity against a bank of stated resistance",
            Document::run("iec").with("circuit.device", "breaking = '?'"),
            "3.05 kA",
            "2.95 kA",
        ),
        breaking(
            "breaking capacity against a bank of stated resistance",
            Document::run("us").with("circuit.device", "breaking = '?'"),
            "3.05 kA",
            "2.95 kA",
        ),
        // 58.4 V/10 mΩ = 5.84 kA, where 15 cells × 3.65 V would give 5.48 kA.
        breaking(
            "breaking capacity against a lithium bank at its highest voltage",
            lithium("58.4 V"),
            "5.9 kA",
            "5.8 kA",
        ),
        // 48 V are 16 cells, full at 16 × 3.65 V = 58.4 V, however low the highest voltage is stated.
        breaking(
            "breaking capacity against the full cells that a lithium bank's nominal voltage stands for",
            lithium("55 V"),
            "5.9 kA",
            "5.8 kA",
        ),
        // The maker's current counts as it is, without the resistance of anything else at the bank.
        breaking(
            "breaking capacity against a stated current",
            Document::run("craft_iso")
                .with("bank", "internal_resistance = none; short_circuit = '3 kA'")
                .with("circuit.device", "breaking = '?'"),
            "3.05 kA",
            "2.95 kA",
        ),
        // 20 A/Ah × 100 Ah = 2 kA.
        breaking(
            "breaking capacity against a lead-acid bank of which nothing is stated",
            Document::run("craft_us")
                .with("bank", "internal_resistance = none")
                .with("circuit.device", "breaking = '?'"),
            "2.05 kA",
            "1.95 kA",
        ),
        // 15 V/(5 mΩ + 1 m × 1000/(58 × 50) mΩ/m) = 2.806 kA from each bank at 20 °C, joints zero: 5.61 kA.
        breaking(
            "all banks feed a fault",
            Document::two_banks("").with("circuit.device", "breaking = '?'"),
            "5.7 kA",
            "5.5 kA",
        ),
        // At a run's far end what comes through the run counts: 15 V/(5 mΩ + 2 m × 1000/(58 × 2.5) mΩ/m) = 798 A, not
        // the 3 kA at its beginning.
        breaking(
            "a device at the far end breaks what comes through the run",
            Document::run("iec").add(
                "circuit.device",
                "family = 'gG'; rating = '20 A'; dc_voltage = '125 V'; breaking = '?'; from_source = '100 mm'; \
                 end = 'to'",
            ),
            "815 A",
            "785 A",
        ),
        // One bank may be switched off: 11.88 V behind 22.5 mΩ (empty, cold, aged), feed of hot 50 mm² with lugs and a 63 A
        // fuse 0.462 + 0.4 + 1.587 mΩ, branch lugs and fuse 5.4 mΩ. gG 20 A opens at 32 A, 371.3 mΩ: 340.9/9.548 = 35.7 m,
        // route 17.9 m. Both banks together would reach 18.5 m.
        Pair {
            rule: "R6",
            edge: "the least fault current comes from one bank alone",
            slug: "least-fault-too-small",
            severity: Danger,
            site: Document::two_banks("").with("load", "current = '0.2 A'").with("circuit", "one_way = '?'"),
            passing: "17.6 m",
            failing: "18.1 m",
            also: &[],
        },
        // No rule of thumb holds for lithium: not checked, and not passed.
        Pair {
            severity: NotChecked,
            slug: "breaking-capacity-not-checked",
            ..breaking(
                "the fault current of a lithium bank is stated or not checked",
                Document::run("craft_us")
                    .with(
                        "bank",
                        "chemistry = '?'; highest = '15.4 V'; internal_resistance = none",
                    )
                    .with("circuit.device", "breaking = '50 kA'"),
                "agm",
                "lfp",
            )
        },
        Pair {
            severity: NotChecked,
            slug: "breaking-capacity-not-checked",
            ..breaking(
                "a breaking capacity is stated or not checked",
                Document::run("iec").with("circuit.device", "breaking = none; ?"),
                "breaking = '20 kA'",
                "",
            )
        },
        supply(
            "device-not-for-this-supply",
            "a device for AC only is refused",
            Document::run("us").with("circuit.device", "dc_voltage = none; ?"),
        ),
        supply(
            "device-not-for-this-supply",
            "a device for AC only is refused",
            Document::run("iec").with("circuit.device", "dc_voltage = none; ?"),
        ),
        supply(
            "part-not-for-dc",
            "a switch for AC only is refused",
            Document::run("craft_iso")
                .add("circuit.part", "name = 'switch'; kind = 'switch'; rating = '50 A'; ?"),
        ),
        Pair {
            rule: "R6",
            edge: "a device's DC voltage reaches the highest of the bank",
            slug: "device-not-for-this-supply",
            severity: Danger,
            site: Document::run("craft_us").with("circuit.device", "dc_voltage = '?'"),
            passing: "15.2 V",
            failing: "14.8 V",
            also: &[],
        },
        // Either bank can raise the whole site to its own highest voltage.
        Pair {
            rule: "R6",
            edge: "a device's DC voltage reaches the highest of every bank joined",
            slug: "device-not-for-this-supply",
            severity: Danger,
            site: Document::two_banks("highest = '?'").with("circuit.device", "dc_voltage = '15.24 V'"),
            passing: "15.2 V",
            failing: "15.28 V",
            also: &[],
        },
        Pair {
            rule: "R6",
            edge: "a DC voltage is stated or not checked",
            slug: "device-supply-not-checked",
            severity: NotChecked,
            site: Document::run("craft_us").with("circuit.device", "dc_voltage = none; ?"),
            passing: "dc_voltage = '32 V'",
            failing: "",
            also: &[],
        },
        Pair {
            rule: "R6",
            edge: "a switch's DC voltage reaches the highest of the bank",
            slug: "part-voltage-too-low",
            severity: Danger,
            site: Document::run("us")
                .add("circuit.part", "name = 'switch'; kind = 'switch'; rating = '50 A'; dc_voltage = '?'"),
            passing: "15.2 V",
            failing: "14.8 V",
            also: &[],
        },
        // Between two banks the current reverses.
        Pair {
            rule: "R6",
            edge: "no marked polarity where both ends feed",
            slug: "polarity-reversible",
            severity: Danger,
            site: Document::run("iec")
                .with("circuit", "to = 'reserve'; current = '10 A'")
                .with("circuit.device", "polarised = ?")
                .without("load")
                .add(
                    "bank",
                    "name = 'reserve'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; \
                     cut_off = '10.5 V'; highest = '15 V'; internal_resistance = '5 mohm'",
                )
                .add("circuit.device", &format!("{}; end = 'to'", device("gG", "20 A"))),
            passing: "false",
            failing: "true",
            also: &[],
        },
        // (115 × 2.5 mm²)² = 82,656 A²s.
        withstand(
            "a PVC conductor withstands what the device lets through",
            Document::run("iec").with("circuit.device", "let_through = '?'"),
            "81000 A2s",
            "84000 A2s",
        ),
        // (143 × 2.5 mm²)² = 127,806 A²s.
        withstand(
            "an XLPE conductor withstands what the device lets through",
            Document::run("iec")
                .with("circuit", "insulation = 'XLPE 90 degC'")
                .with("circuit.device", "let_through = '?'"),
            "126000 A2s",
            "130000 A2s",
        ),
        // The same for a breaker whose I²t is stated.
        withstand(
            "a conductor withstands what a breaker lets through",
            Document::run("iec").with("circuit.device", "family = 'miniature B'; let_through = '?'"),
            "81000 A2s",
            "84000 A2s",
        ),
        // A type B breaker trips within 0.1 s above 7 In (IEC 60898-3, recalled): 3000² × 0.1 = 900,000 A²s, k²S² of 6 mm²
        // 476,000, of 10 mm² 1,322,500 A²s; √(900,000)/115 = 8.25 mm². The 0.1 s are a bound: a conductor that does not
        // withstand them may withstand the breaker.
        Pair {
            severity: NotChecked,
            slug: "withstand-not-checked",
            ..withstand(
                "beyond a breaker's instantaneous trip a conductor's withstand is not checked",
                Document::run("iec")
                    .with("circuit", "size = '?'")
                    .with("circuit.device", "family = 'miniature B'"),
                "8.4 mm2",
                "8.1 mm2",
            )
        },
    ]
}

/// A lithium bank of 48 V and 10 mΩ, and the breaking capacity to be told.
fn lithium(highest: &str) -> Document {
    Document::run("iec")
        .with(
            "bank",
            &format!(
                "chemistry = 'lfp'; nominal = '48 V'; cut_off = '44 V'; highest = '{highest}'; \
                 internal_resistance = '10 mohm'"
            ),
        )
        .with("circuit.device", "breaking = '?'")
}

/// A device of a site where the second bank's current is not known, with this breaking capacity.
///
/// The first alone: highest 15 V/(5 mΩ + 1 m × 1000/(58 × 50) mΩ/m) = 2.806 kA.
fn beside_an_unknown_bank(breaking: &str) -> Vec<(Severity, &'static str)> {
    let text = Document::two_banks("chemistry = 'lfp'; nominal = '12.8 V'; internal_resistance = none")
        .with("bank", "chemistry = 'lfp'; nominal = '12.8 V'")
        .with("circuit.device", &format!("breaking = '{breaking}'"))
        .to_string();
    let site = read(&text).unwrap_or_else(|problems| panic!("{problems}"));
    let report = inspect(&site).unwrap_or_else(|problems| panic!("{problems}"));
    let own = report.findings.iter().filter(|f| f.place == "circuit \"run\", F1");
    own.filter(|f| f.slug.starts_with("breaking")).map(|f| (f.severity, f.slug)).collect()
}

#[test]
fn a_bank_of_unknown_current_leaves_the_known_part_as_a_lower_bound() {
    assert_eq!(beside_an_unknown_bank("2.75 kA"), [(Danger, "breaking-capacity-too-low")]);
    assert_eq!(beside_an_unknown_bank("2.85 kA"), [(NotChecked, "breaking-capacity-not-checked")]);
}
