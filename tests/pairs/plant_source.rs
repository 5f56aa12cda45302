//! Conductors of sources that limit themselves: arrays, converters, chargers, alternators (R4, R7); what a
//! new load asks of all that feeds it (R21).

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::{Document, device};
use crate::pair::Pair;

/// 27 A: IEC 60364-5-52:2009, Table B.52.2, method C, two loaded.
const CLIPPED: &str = "size = '2.5 mm2'; insulation = 'PVC 70 degC'; installed = 'clipped'";

/// An array and the conductor to its controller.
fn feed(rules: &str, conductor: &str, current: &str) -> Document {
    Document::array(rules, 2, 1)
        .with("site", "covered = true; monitoring = 'insulation'")
        .with("array", &format!("isc = '{current}'; series_fuse = '60 A'; route = none"))
        .add(
            "circuit",
            &format!("name = 'feed'; from = 'array'; to = 'regulator'; one_way = '2 m'; {conductor}"),
        )
}

/// A converter that feeds a second board, without a device at its output.
fn converter(limit: &str) -> Document {
    Document::plant("iec")
        .with("bank", "capacity = '200 Ah'; greatest_discharge = '100 A'; disconnect = '11.9 V'")
        .with("generator", "output = '30 A'")
        .add("board", "name = 'main'; busbar = '200 A'")
        .add("board", "name = 'second'; busbar = '100 A'")
        .add(
            "converter",
            &format!(
                "name = 'converter'; output = '12 V'; limit = '{limit}'; efficiency = '90 %'; least = '9 V'; greatest = '16 V'; \
                 idle = '1 mW'"
            ),
        )
        .add(
            "load",
            "name = 'radio'; current = '5 A'; hours = '1 h'; least = '1 V'; greatest = '100 V'; board = 'second'; route = '1 m'",
        )
        .add("circuit", "name = 'main'; from = 'bank'; to = 'main'; one_way = '1 m'")
        .add("circuit", "name = 'input'; from = 'main'; to = 'converter'; one_way = '1 m'")
        .add(
            "circuit",
            &format!(
                "name = 'output'; from = 'converter'; to = 'second'; one_way = '1 m'; {CLIPPED}; device = 'none'"
            ),
        )
}

/// A converter whose limit its output and input carry, and a load of 5 A behind its board on 2.5 mm² with 20 A of gG.
fn branch(limit: &str) -> Document {
    converter(limit)
        .with_last("circuit", "size = '6 mm2'")
        .with_last("load", "route = none; board = none")
        .add("circuit", &format!("name = 'radio'; from = 'second'; to = 'radio'; one_way = '1 m'; {CLIPPED}"))
        .add("circuit.device", &device("gG", "20 A"))
}

/// A charger of which the conductor is stated, with a device at the bank's end only.
fn charger(kind: &str, output: &str, at_the_bank: &str) -> Document {
    Document::plant("iec")
        .with("bank", "capacity = '300 Ah'; greatest_discharge = '100 A'")
        .with("generator", &format!("kind = '{kind}'; output = '{output}'; load_dump = true; route = none"))
        .add("board", "name = 'main'; busbar = '100 A'")
        .add("circuit", "name = 'main'; from = 'bank'; to = 'main'; one_way = '1 m'")
        .add(
            "circuit",
            &format!("name = 'charge'; from = 'charger'; to = 'bank'; one_way = '1 m'; {CLIPPED}"),
        )
        .add("circuit.device", &format!("{}; end = '{at_the_bank}'", device("class T", "25 A")))
}

pub fn pairs() -> Vec<Pair> {
    vec![
        // 5 A of the radio.
        Pair::of(
            Nonconforming,
            ("R16", "converter-overloaded"),
            "a converter gives what its loads draw",
            converter("?"),
            ("5.1 A", "4.9 A"),
        ),
        // A load that is added: 10 A and its own on a feeder whose 30 A carry 80 % for hours, 24 A.
        Pair::of(
            Nonconforming,
            ("R21", "device-below-load"),
            "a new load is inspected through its feeder",
            Document::run_from_board("craft_iso")
                .add("load", "name = 'new'; current = '?'; least = '1 V'; greatest = '100 V'")
                .add(
                    "circuit",
                    "name = 'new'; from = 'board'; to = 'new'; one_way = '1 m'; size = '2.5 mm2'; \
                     insulation = 'PVC 105 degC'",
                )
                .add("circuit.device", &device("class T", "20 A")),
            ("13.8 A", "14.2 A"),
        ),
        Pair::of(
            Nonconforming,
            ("R21", "discharge-above-limit"),
            "a new load is inspected through its bank",
            Document::run("craft_iso")
                .with("bank", "greatest_discharge = '15 A'")
                .add("load", "name = 'new'; current = '?'; least = '1 V'; greatest = '100 V'")
                .add(
                    "circuit",
                    "name = 'new'; from = 'bank'; to = 'new'; one_way = '1 m'; size = '2.5 mm2'; \
                     insulation = 'PVC 105 degC'",
                )
                .add("circuit.device", &device("class T", "20 A")),
            ("4.9 A", "5.1 A"),
        ),
        // 15 A of 14 AWG in the 60 °C column, over 1.25 × 1.25: 9.6 A.
        Pair::of(
            Danger,
            ("R4", "terminal-column-exceeded"),
            "an array's conductor carries 1.56 times its current under us",
            feed("us", "size = '14 AWG'; class = 2; insulation = 'PVC 75 degC'; installed = 'conduit'", "?"),
            ("9.5 A", "9.7 A"),
        ),
        // 19.5 A of 1.5 mm² clipped, over 1.25: 15.6 A.
        Pair::of(
            Danger,
            ("R4", "ampacity-exceeded"),
            "an array's conductor carries 1.25 times its current under iec",
            feed("iec", "size = '1.5 mm2'; insulation = 'PVC 70 degC'; installed = 'clipped'", "?"),
            ("15.4 A", "15.8 A"),
        ),
        Pair::of(
            Danger,
            ("R4", "ampacity-exceeded"),
            "a converter's limit needs no device where its conductor carries it",
            converter("?"),
            ("26.5 A", "27.5 A"),
        ),
        Pair::of(
            Danger,
            ("R7", "device-missing"),
            "a charger's conductor has its device at the bank's end",
            charger("shore", "20 A", "?"),
            ("to", "from"),
        ),
        Pair::of(
            Danger,
            ("R7", "device-missing"),
            "an alternator that limits itself has its device at the bank's end",
            charger("alternator", "20 A", "?").with("generator", "self_limiting = true"),
            ("to", "from"),
        ),
        Pair::of(
            NotChecked,
            ("R7", "source-limit-not-stated"),
            "whether an alternator limits itself is stated or not checked",
            charger("alternator", "20 A", "to").with("generator", "self_limiting = ?"),
            ("true", "false"),
        ),
        Pair::of(
            NotChecked,
            ("R7", "source-limit-not-stated"),
            "an alternator that does not limit itself has a device at its own end too",
            charger("alternator", "20 A", "to")
                .add("circuit.device", &device("class T", "25 A"))
                .with_last("circuit.device", "?"),
            ("end = 'from'", "end = 'to'"),
        ),
        // gG of 20 A open at 32 A only: of 28 A it sees nothing, and 2.5 mm² carry 27 A.
        Pair::of(
            Danger,
            ("R6", "least-fault-too-small"),
            "behind the board of a converter a conductor carries the limit that no device sees",
            branch("?"),
            ("26.5 A", "27.5 A"),
        ),
    ]
}
