//! What a report believes because the file states it: heat of joints and chassis returns (R9), cooler places and the user's
//! own values (R4), let-through (R6), diversity (R16).
//!
//! Watts of a joint (5, 15, 30; a breaker pole 200 mV at its rating) and least let-through (0.05 s × In² of a fuse, 0.1 s
//! × In² of a breaker): common practice, no source.

use ampwright::site::Severity::{self, Advice, Danger, Nonconforming};
use ampwright::site::{inspect, read};

use crate::document::{Document, device};
use crate::pair::Pair;

fn advice(
    rule: &'static str,
    slug: &'static str,
    edge: &'static str,
    site: Document,
    passing: &'static str,
    failing: &'static str,
) -> Pair {
    Pair { rule, edge, slug, severity: Advice, site, passing, failing, also: &[] }
}

/// 30 A through a lug to be told.
fn lug(resistance: &str) -> Document {
    Document::run("iec")
        .with("load", "current = '30 A'")
        .with("circuit", "size = '10 mm2'; drop = '20 %'")
        .with("circuit.device", "rating = '40 A'")
        .add("circuit.joint", &format!("kind = 'lug'; resistance = '{resistance}'"))
}

fn own(rules: &str, keys: &str) -> Document {
    Document::run(rules).add("rules.override", keys)
}

pub fn pairs() -> Vec<Pair> {
    let looser = |edge, site, passing, failing| advice("R4", "override-looser", edge, site, passing, failing);
    let drop =
        |edge, site, passing, failing| advice("R17", "drop-limit-looser", edge, site, passing, failing);
    let through = |edge, family: &str, passing, failing| Pair {
        rule: "R6",
        edge,
        slug: "let-through-implausible",
        severity: Nonconforming,
        site: Document::run("iec")
            .with("circuit.device", &format!("family = '{family}'; rating = '16 A'; let_through = '?'")),
        passing,
        failing,
        also: &[],
    };
    vec![
        Pair {
            severity: Danger,
            ..advice("R9", "joint-heat", "a lug that burns is a danger", lug("?"), "5.45 mohm", "34 mohm")
        },
        // 200 mV × 60 A = 12 W: 3.33 mΩ.
        advice(
            "R9",
            "joint-heat",
            "a breaker is pointed out above the heat that breakers make by design",
            Document::run("iec")
                .with("load", "current = '60 A'")
                .with("circuit", "size = '25 mm2'; drop = '20 %'")
                .with("circuit.device", "rating = '63 A'")
                .add("circuit.joint", "kind = 'breaker'; resistance = '?'"),
            "3.28 mohm",
            "3.38 mohm",
        ),
        advice(
            "R9",
            "joint-heat",
            "a switch of stated resistance is a joint too",
            lug("0.1 mohm").add(
                "circuit.part",
                "name = 'switch'; kind = 'switch'; rating = '50 A'; dc_voltage = '60 V'; resistance = '?'",
            ),
            "5.45 mohm",
            "5.65 mohm",
        ),
        chassis("iec"),
        chassis("us"),
        // B.52.14: 1.06 in 25 °C (page seen).
        advice(
            "R4",
            "ambient-below-greatest",
            "a capacity that rests on a cooler place is told",
            Document::run("iec").with("circuit", "ambient = '?'"),
            "30 degC",
            "25 degC",
        ),
        advice(
            "R4",
            "ambient-below-greatest",
            "a capacity that rests on a cooler place is told",
            Document::run("craft_iso")
                .with("site", "ambient = ['20 degC', '50 degC']")
                .with("circuit", "ambient = '?'"),
            "50 degC",
            "45 degC",
        ),
        // 0.05 × 16² = 12.8, 0.1 × 16² = 25.6 A²s.
        through("a fuse lets something through", "gG", "13 A2s", "12.5 A2s"),
        through("a breaker lets more through", "miniature B", "26 A2s", "25 A2s"),
        looser(
            "a continuous factor below the set's is told",
            own("us", "continuous_factor = ?"),
            "1.25",
            "1.2",
        ),
        // Two circuits clipped in one layer: 0.85 (B.52.17, page seen).
        looser(
            "a bundling factor above the set's is told",
            own("iec", "bundling = ?").with("circuit", "bundled = 4"),
            "0.85",
            "0.86",
        ),
        looser(
            "an engine-space factor above the set's is told",
            own("craft_us", "engine_space = ?").with("circuit", "space = 'engine'"),
            "0.85",
            "0.87",
        ),
        looser("a device ratio above the set's is told", own("iec", "device_ratio = ?"), "1.0", "1.02"),
        drop("a drop limit above the set's is told", own("iec", "drop = '?'"), "5 %", "5.2 %"),
        drop(
            "a circuit's own drop above a limit that is required is told",
            Document::run("craft_iso").with("load", "use = 'critical'").with("circuit", "drop = '?'"),
            "3 %",
            "3.2 %",
        ),
        advice(
            "R7",
            "unfused-length-looser",
            "an unprotected length above the set's is told",
            own("craft_iso", "unfused_length = '?'"),
            "200 mm",
            "210 mm",
        ),
        advice(
            "R7",
            "unfused-length-looser",
            "an unprotected length where the set holds none is told",
            own("iec", "?"),
            "",
            "unfused_length = '500 mm'",
        ),
        advice(
            "R18",
            "aluminium-admitted",
            "aluminium that the user admits is told",
            own("iec", "?"),
            "",
            "aluminium = 'admitted'",
        ),
        // 10 A beside it, 30 A fuse.
        advice(
            "R16",
            "diversity-above-device",
            "a device that opens when all loads run together is told",
            shared(),
            "19 A",
            "21 A",
        ),
    ]
}

/// A load of 10 A and another, to be told, behind a feeder with a diversity of 0.6 and a fuse of 30 A.
fn shared() -> Document {
    Document::run("iec")
        .with(
            "circuit",
            "name = 'feeder'; to = 'board'; size = '6 mm2'; insulation = 'PVC 90 degC'; diversity = 0.6",
        )
        .with("circuit.device", "family = 'class T'; rating = '30 A'")
        .with("load", "name = 'other'; current = '?'")
        .add("board", "name = 'board'; busbar = '100 A'")
        .add("load", "name = 'load'; current = '10 A'; least = '1 V'; greatest = '100 V'")
        .add("circuit", &branch("load"))
        .add("circuit.device", &device("gG", "25 A"))
        .add("circuit", &branch("other"))
        .add("circuit.device", &device("gG", "25 A"))
}

fn branch(load: &str) -> String {
    format!(
        "name = 'to {load}'; from = 'board'; to = '{load}'; one_way = '1 m'; size = '4 mm2'; \
         insulation = 'PVC 70 degC'; installed = 'clipped'"
    )
}

fn chassis(set: &str) -> Pair {
    advice(
        "R9",
        "chassis-as-return",
        "a chassis of stated resistance as the return is told",
        Document::run(set).with("circuit", "?"),
        "",
        "return = 'chassis'\nreturn_resistance = '1 mohm'",
    )
}

/// How grave the heat of a lug is at 30 A.
fn gravity(resistance: &str) -> Vec<Severity> {
    let site = read(&lug(resistance).to_string()).unwrap_or_else(|problems| panic!("{problems}"));
    let report = inspect(&site).unwrap_or_else(|problems| panic!("{problems}"));
    report.findings.iter().filter(|f| f.slug == "joint-heat").map(|f| f.severity).collect()
}

/// 15 W at 16.7 mΩ, 30 W at 33.3 mΩ.
#[test]
fn a_hot_lug_is_graver_the_hotter_it_is() {
    assert_eq!(gravity("16.5 mohm"), [Advice]);
    assert_eq!(gravity("16.8 mohm"), [Nonconforming]);
    assert_eq!(gravity("33.2 mohm"), [Nonconforming]);
    assert_eq!(gravity("33.5 mohm"), [Danger]);
}

#[test]
fn a_circuit_is_not_colder_than_its_site() {
    let site =
        |ambient: &str| Document::run("us").with("circuit", &format!("ambient = '{ambient}'")).to_string();
    assert!(read(&site("20 degC")).is_ok());
    for (ambient, printed) in [("19 degC", "'19 degC' is below"), ("-80 degC", "'-80 degC' is below")] {
        let problems = read(&site(ambient)).err().map(|problems| problems.to_string()).unwrap_or_default();
        assert!(problems.contains(printed) && problems.contains("least ambient of [site]"), "{problems}");
        assert_eq!(problems.lines().count(), 1, "{problems}");
    }
}

/// A breaker of 10 A at 3 kA.
fn withstand(let_through: &str) -> Vec<String> {
    let keys = format!("family = 'miniature B'; rating = '10 A'; let_through = '{let_through}'");
    let text = Document::run("iec").with("circuit.device", &keys).to_string();
    let site = read(&text).unwrap_or_else(|problems| panic!("{problems}"));
    let report = inspect(&site).unwrap_or_else(|problems| panic!("{problems}"));
    let printed = report.to_string();
    printed
        .lines()
        .filter(|line| line.contains("I²t") || line.contains("let_through"))
        .map(str::to_string)
        .collect()
}

#[test]
fn a_stated_let_through_never_conforms_by_itself() {
    let plausible = withstand("12000 A2s");
    assert!(
        plausible.iter().any(|l| l.ends_with("within the stated value (the site file, let_through)")),
        "{plausible:?}"
    );
    assert!(!plausible.iter().any(|l| l.contains("conforms")), "{plausible:?}");
    let implausible = withstand("1 A2s");
    assert!(!implausible.iter().any(|l| l.contains("passed") || l.contains("conforms")), "{implausible:?}");
    assert!(implausible.iter().any(|l| l.contains("<withstand-not-checked>")), "{implausible:?}");
}

/// What is printed of a run under overrides: nothing conforms to a standard by the user's own factor.
#[test]
fn a_capacity_by_the_users_own_factor_is_within_what_he_states() {
    let text = own("iec", "bundling = 0.85").with("circuit", "bundled = 4").to_string();
    let site = read(&text).unwrap_or_else(|problems| panic!("{problems}"));
    let printed = inspect(&site).unwrap_or_else(|problems| panic!("{problems}")).to_string();
    for what in ["design current Ib against", "device against its conductor", "current I2 at which"] {
        let line = printed.lines().find(|l| l.contains(what) && l.contains("passed")).unwrap_or(what);
        assert!(line.contains("within the stated value (stated by the user"), "{line}");
    }
}
