//! Parts of the path, boards, studs and lugs (R8).
//!
//! Rule R8 of the design; at most four lugs on a stud and lugs of their stud's size only: common practice, no source.

use ampwright::site::Severity::{Danger, Nonconforming, NotChecked};

use crate::document::{Document, device};
use crate::pair::Pair;

/// A board that one fuse of 40 A feeds, with a branch of 10 A.
fn board() -> Document {
    Document::run("iec")
        .with("circuit", "from = 'board'")
        .add("board", "name = 'board'; busbar = '100 A'")
        .add(
            "circuit",
            "name = 'feeder'; from = 'bank'; to = 'board'; one_way = '1 m'; size = '16 mm2'; \
             insulation = 'PVC 70 degC'; installed = 'clipped'",
        )
        .add("circuit.device", &device("gG", "40 A"))
}

pub fn pairs() -> Vec<Pair> {
    let part = |keys: &str| Document::run("craft_us").add("circuit.part", keys);
    vec![
        // The device lets 20 A pass for hours, whatever the load draws.
        Pair {
            rule: "R8",
            edge: "a part carries at least its device",
            slug: "part-below-device",
            severity: Danger,
            site: part("name = 'relay'; kind = 'relay'; rating = '?'; dc_voltage = '32 V'"),
            passing: "20 A",
            failing: "19.5 A",
            also: &[],
        },
        Pair {
            rule: "R8",
            edge: "a part's rating is stated or not checked",
            slug: "part-rating-not-stated",
            severity: NotChecked,
            site: part("name = 'relay'; kind = 'relay'; dc_voltage = '32 V'; ?"),
            passing: "rating = '20 A'",
            failing: "",
            also: &[],
        },
        Pair {
            rule: "R8",
            edge: "a busbar carries the device that feeds it",
            slug: "busbar-below-sum",
            severity: Danger,
            site: board().with("board", "busbar = '?'"),
            passing: "40 A",
            failing: "39 A",
            also: &[],
        },
        // 40 A and 40 A.
        Pair {
            rule: "R8",
            edge: "a busbar carries the sum of the devices that feed it",
            slug: "busbar-below-sum",
            severity: Danger,
            site: board()
                .with("board", "busbar = '?'")
                .with("circuit", "size = '16 mm2'")
                .add(
                    "bank",
                    "name = 'reserve'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; \
                     cut_off = '10.5 V'; highest = '15 V'; internal_resistance = '5 mohm'",
                )
                .add(
                    "circuit",
                    "name = 'second'; from = 'board'; to = 'reserve'; one_way = '1 m'; size = '16 mm2'; \
                     insulation = 'PVC 70 degC'; installed = 'clipped'; current = '10 A'",
                )
                .add("circuit.device", &format!("{}; end = 'to'", device("gG", "40 A"))),
            passing: "81 A",
            failing: "79 A",
            also: &[],
        },
        Pair {
            rule: "R8",
            edge: "a busbar's rating is stated or not checked",
            slug: "busbar-rating-not-stated",
            severity: NotChecked,
            site: board().with("board", "busbar = none; ?"),
            passing: "busbar = '100 A'",
            failing: "",
            also: &[],
        },
        Pair {
            rule: "R8",
            edge: "at most four lugs on a stud",
            slug: "too-many-lugs",
            severity: Nonconforming,
            site: board().with("board", "lugs_on_stud = ?"),
            passing: "4",
            failing: "5",
            also: &[],
        },
        Pair {
            rule: "R8",
            edge: "a lug goes over its stud",
            slug: "lug-too-small",
            severity: Nonconforming,
            site: Document::run("us").with("bank", "stud = 'M10'").with("circuit", "from_lug = '?'"),
            passing: "M10",
            failing: "M8",
            also: &[],
        },
        Pair {
            rule: "R8",
            edge: "a lug bears on its stud's whole rim",
            slug: "lug-too-large",
            severity: Nonconforming,
            site: Document::run("us").with("load", "stud = 'M6'").with("circuit", "to_lug = '?'"),
            passing: "M6",
            failing: "M8",
            also: &[],
        },
        Pair {
            rule: "R8",
            edge: "a lug on a stated stud is stated or not checked",
            slug: "lug-not-stated",
            severity: NotChecked,
            site: Document::run("iec").with("bank", "stud = 'M8'").with("circuit", "?"),
            passing: "from_lug = 'M8'",
            failing: "",
            also: &[],
        },
        Pair {
            rule: "R8",
            edge: "a device's terminals take the conductor",
            slug: "terminal-range",
            severity: Nonconforming,
            site: Document::run("iec")
                .with("circuit", "size = '?'")
                .with("circuit.device", "terminal_range = ['1 mm2', '6 mm2']"),
            passing: "6 mm2",
            failing: "10 mm2",
            also: &[],
        },
        // 10 AWG is 5.26 mm² (ASTM B258): terminals from 6 mm² do not hold it.
        Pair {
            rule: "R8",
            edge: "a device's terminals hold the conductor, compared by metal area",
            slug: "terminal-range",
            severity: Nonconforming,
            site: Document::run("us").with("circuit.device", "terminal_range = ['?', '25 mm2']"),
            passing: "5.2 mm2",
            failing: "5.4 mm2",
            also: &[],
        },
    ]
}
