//! Starts and shared currents (R16).
//!
//! A breaker of type B holds 4 In, one of type C 7 In on DC (IEC 60898-3, recalled). Of fuses no time-current curve is
//! held. Joints as in `path.rs`.

use ampwright::site::Severity::{Nonconforming, NotChecked};

use crate::document::{Document, device};
use crate::pair::Pair;

fn pair(
    slug: &'static str,
    edge: &'static str,
    site: Document,
    passing: &'static str,
    failing: &'static str,
) -> Pair {
    Pair { rule: "R16", edge, slug, severity: Nonconforming, site, passing, failing, also: &[] }
}

/// A load of 10 A behind a breaker of 16 A.
fn breaker(family: &str) -> Document {
    let keys = format!("family = '{family}'; rating = '16 A'; let_through = '1000 A2s'");
    Document::run("iec").with("circuit.device", &keys)
}

fn motor(family: &str) -> Document {
    breaker(family).with("load", "start = '?'")
}

/// A plant with an inverter of 100 W behind the same breaker, and a drill of 90 W whose start is to be told.
fn drilling(start: &str) -> Document {
    Document::plant("iec")
        .with("bank", "capacity = '200 Ah'; greatest_discharge = '200 A'; disconnect = '12 V'")
        .with("generator", "output = '30 A'")
        .without("load")
        .add(
            "load",
            "name = 'clock'; current = '10 mA'; standing = true; least = '1 V'; greatest = '100 V'; route = '1 m'",
        )
        .add(
            "inverter",
            "name = 'inverter'; power = '100 W'; efficiency = '90 %'; idle = '1 W'; surge = '2 kW'; surge_time = '5 s'; \
             precharge = true; least = '1 V'; greatest = '100 V'",
        )
        .add(
            "load",
            &format!(
                "name = 'drill'; ac = true; hours = '0.2 h'; power = '90 W'; start_power = '{start}'; start_time = '2 s'"
            ),
        )
        .add("board", "name = 'main'; busbar = '100 A'")
        .add("circuit", "name = 'main'; from = 'bank'; to = 'main'; one_way = '1 m'")
        .add(
            "circuit",
            "name = 'run'; from = 'bank'; to = 'inverter'; one_way = '1 m'; size = '6 mm2'; insulation = 'PVC 70 degC'; \
             installed = 'clipped'",
        )
        .add("circuit.device", &format!("{}; let_through = '1000 A2s'", device("miniature B", "16 A")))
}

/// A feeder of 6 mm² behind 20 A of gG, which carries all of it, and two loads that share it by the user's diversity.
fn shared(first: &str, second: &str, diversity: &str) -> Document {
    Document::run("iec")
        .with("load", &format!("current = '{first}'"))
        .with("circuit", "from = 'board'; size = '6 mm2'")
        .with("circuit.device", "rating = '25 A'")
        .add("board", "name = 'board'; busbar = '100 A'")
        .add("load", &format!("name = 'other'; current = '{second}'; least = '1 V'; greatest = '100 V'"))
        .add(
            "circuit",
            &format!(
                "name = 'feeder'; from = 'bank'; to = 'board'; one_way = '1 m'; size = '6 mm2'; \
                 insulation = 'PVC 70 degC'; installed = 'clipped'; diversity = {diversity}"
            ),
        )
        .add("circuit.device", &device("gG", "20 A"))
        .add(
            "circuit",
            "name = 'second'; from = 'board'; to = 'other'; one_way = '1 m'; size = '6 mm2'; \
             insulation = 'PVC 70 degC'; installed = 'clipped'",
        )
        .add("circuit.device", &device("gG", "25 A"))
}

pub fn pairs() -> Vec<Pair> {
    vec![
        // 4 × 16 A = 64 A, in place of the 10 A that run.
        pair("device-trips-at-start", "a type B breaker holds 4 In", motor("miniature B"), "63 A", "65 A"),
        // 7 × 16 A = 112 A.
        pair("device-trips-at-start", "a type C breaker holds 7 In", motor("miniature C"), "110 A", "114 A"),
        // Two alike of 5 A: one starts while the other runs, 60 − 5 + 10 A = 64 A at 59 A.
        pair(
            "device-trips-at-start",
            "one of several alike starts while the rest runs",
            motor("miniature B").with("load", "current = '5 A'; count = 2"),
            "58 A",
            "60 A",
        ),
        // 100 W/0.9 through 2 m of 6 mm² (3.30 Ω/km at 32 °C), lugs and 16 A breaker, 6.9 + 0.4 + 12.5 = 19.8 mΩ, leave
        // 9.23 V of 10.5 V at 64 A: 64 A × 9.23 V × 0.9 = 532 W.
        pair(
            "device-trips-at-start",
            "an inverter's surge counts as its start",
            breaker("miniature B").without("load").with("circuit", "to = 'inverter'; size = '6 mm2'").add(
                "inverter",
                "name = 'inverter'; power = '100 W'; efficiency = '90 %'; surge = '?'; least = '1 V'; \
                     greatest = '100 V'",
            ),
            "525 W",
            "540 W",
        ),
        // The same for an inverter that could give 2 kW, of which its load asks for less.
        pair(
            "device-trips-at-start",
            "of an inverter's surge counts what its loads ask for",
            drilling("?"),
            "525 W",
            "540 W",
        ),
        // What it carries for an hour a fuse carries for seconds: 1.25 In (IEC 60269-1, recalled), 25 A.
        Pair {
            severity: NotChecked,
            ..pair(
                "start-against-device-not-checked",
                "a start above the current that a fuse carries for an hour is not checked",
                Document::run("iec").with("load", "start = '?'"),
                "24.5 A",
                "25.5 A",
            )
        },
        // 10 A through 10 m of 2.5 mm² at 35.5 °C and joints (see `load.rs`) meet 91.3 mΩ; 40 A lose 3.65 V of 10.5 V.
        pair(
            "start-voltage-too-low",
            "the voltage left while a load starts suffices for it",
            Document::run("iec")
                .with("load", "start = '40 A'; least = '?'")
                .with("circuit", "one_way = '5 m'; drop = '20 %'")
                .with("circuit.device", "rating = '16 A'"),
            "6.75 V",
            "6.95 V",
        ),
        // 30 A × 0.65 = 19.5 A, × 0.68 = 20.4 A.
        pair(
            "device-below-load",
            "the user's own diversity counts",
            shared("15 A", "15 A", "?"),
            "0.65",
            "0.68",
        ),
        // A tenth of 29.8 A would be 3 A: one load alone draws more.
        pair(
            "device-below-load",
            "diversity leaves the largest single load",
            shared("10 A", "?", "0.1"),
            "19.8 A",
            "20.2 A",
        ),
    ]
}
