//! Tables and limits of the rule set `iec`: IEC 60364 family.
//!
//! Copper. A direct-current run is two loaded conductors; the tables for three loaded conductors (B.52.4, B.52.5)
//! serve no run of this crate and are not held. Sizes above 95 mm² are recalled.

mod tables;

use tables::{
    AMBIENT_AIR, AMBIENT_GROUND, GROUPING, GROUPING_GROUND, TABLE_B_52_2, TABLE_B_52_3, TABLE_B_52_10,
    TABLE_B_52_12,
};

use super::book::{
    AmbientRule, ByLine, ConductorRule, Count, DeviceRule, DropRule, Grouping, Instead, NextRating,
    Placement, ProtectiveRule, RuleSet, UnfusedRule,
};
use super::query::{Installation, Key, Limit, ORDER, Terms};
use super::table::{AmpacityTable, mm2};
use crate::citation::{Citation, Seen};
use crate::quantity::ConductorSize;

const fn wiring(place: &'static str, seen: Seen) -> Citation {
    Citation::new("IEC 60364-5-52:2009", place, seen)
}

const fn overcurrent(place: &'static str, seen: Seen) -> Citation {
    Citation::new("IEC 60364-4-43:2008", place, seen)
}

#[rustfmt::skip]
const SIZES: &[ConductorSize] = &[
    mm2(1.5), mm2(2.5), mm2(4.0), mm2(6.0), mm2(10.0), mm2(16.0), mm2(25.0), mm2(35.0), mm2(50.0), mm2(70.0),
    mm2(95.0), mm2(120.0), mm2(150.0), mm2(185.0), mm2(240.0), mm2(300.0), mm2(400.0), mm2(500.0), mm2(630.0),
];

/// Rated currents of fuse-links (IEC 60269-1) and breakers (IEC 60898-1), A; recalled.
#[rustfmt::skip]
const RATINGS: &[f64] = &[
    2.0, 4.0, 6.0, 8.0, 10.0, 12.0, 13.0, 16.0, 20.0, 25.0, 32.0, 40.0, 50.0, 63.0, 80.0, 100.0, 125.0, 160.0,
    200.0, 250.0, 315.0, 400.0, 500.0, 630.0, 800.0, 1000.0, 1250.0,
];

static ENCLOSED: &[&AmpacityTable] = &[&TABLE_B_52_2, &TABLE_B_52_3];
static IN_AIR: &[&AmpacityTable] = &[&TABLE_B_52_10, &TABLE_B_52_12];

const BUNCHED: Grouping = Grouping { table: &GROUPING, column: 0, count: Count::Circuits };
const ON_SURFACE: Grouping = Grouping { table: &GROUPING, column: 1, count: Count::Circuits };
const ON_TRAY: Grouping = Grouping { table: &GROUPING, column: 3, count: Count::Circuits };
const BURIED: Grouping = Grouping { table: &GROUPING_GROUND, column: 0, count: Count::Circuits };
const IN_DUCTS: Grouping = Grouping { table: &GROUPING_GROUND, column: 1, count: Count::Circuits };

const fn enclosed(
    installations: &'static [Installation],
    method: &'static str,
    grouping: Grouping,
) -> Placement {
    let ambient = AmbientRule::Table(&AMBIENT_AIR);
    Placement { installations, tables: ENCLOSED, column: Some(method), instead: None, ambient, grouping }
}

const fn in_ground(
    installations: &'static [Installation],
    method: &'static str,
    grouping: Grouping,
) -> Placement {
    let ambient = AmbientRule::Table(&AMBIENT_GROUND);
    Placement { installations, tables: ENCLOSED, column: Some(method), instead: None, ambient, grouping }
}

// Methods F and G begin at 25 mm². Below it the figure of method C serves: the same conductors against a wall,
// cooled less. Our own choice on the low side; where both are tabled C is the lower.
const fn in_air(
    installations: &'static [Installation],
    method: &'static str,
    instead: Option<&'static str>,
    grouping: Grouping,
) -> Placement {
    let instead = match instead {
        Some(name) => Some(Instead { tables: ENCLOSED, column: "C", name }),
        None => None,
    };
    let ambient = AmbientRule::Table(&AMBIENT_AIR);
    Placement { installations, tables: IN_AIR, column: Some(method), instead, ambient, grouping }
}

/// The rule set `iec`.
pub(super) static SET: RuleSet = RuleSet {
    key: Key::Iec,
    word: "iec-2009",
    edition: "IEC 60364-5-52:2009, IEC 60364-4-43:2008, IEC 60364-5-54:2011",
    terms: Terms {
        ampacity: "current-carrying capacity",
        breaking: "breaking capacity",
        earth: "earth",
        conduit: "conduit",
    },
    order: ORDER,
    ampacity_tables: &[&TABLE_B_52_2, &TABLE_B_52_3, &TABLE_B_52_10, &TABLE_B_52_12],
    factor_tables: &[&AMBIENT_AIR, &AMBIENT_GROUND, &GROUPING, &GROUPING_GROUND],
    placements: &[
        enclosed(&[Installation::InsulatedWall], "A1", BUNCHED),
        enclosed(&[Installation::CableInInsulatedWall], "A2", BUNCHED),
        enclosed(&[Installation::Conduit], "B1", BUNCHED),
        enclosed(&[Installation::CableInConduit, Installation::Loom], "B2", BUNCHED),
        enclosed(&[Installation::Clipped], "C", ON_SURFACE),
        in_ground(&[Installation::Duct], "D1", IN_DUCTS),
        in_ground(&[Installation::Buried], "D2", BURIED),
        in_air(&[Installation::CableFreeAir], "E, two", None, ON_TRAY),
        in_air(&[Installation::FreeAir], "F, two touching", Some("C, since F begins at 25 mm2"), BUNCHED),
        in_air(&[Installation::SpacedFreeAir], "G, horizontal", Some("C, since G begins at 25 mm2"), BUNCHED),
    ],
    engine: None,
    rooftop_K: None,
    terminal: None,
    continuous_factor: Limit { value: 1.0, citation: overcurrent("433.1", Seen::Page) },
    device: DeviceRule {
        small: &[],
        next: NextRating::No,
        rule: "rating not above the current-carrying capacity (In ≤ Iz)",
        citation: overcurrent("433.1", Seen::Page),
    },
    overload_ratio: Limit { value: 1.45, citation: overcurrent("433.1", Seen::Page) },
    // With the conditions of the clause: risk of short-circuit reduced to a minimum, nothing combustible near. A sheath
    // or enclosure throughout is taken for the first; without one the check is not made.
    unfused: UnfusedRule { plain: None, sheathed: UNFUSED, sheathed_from_post: UNFUSED },
    drop: DropRule {
        // The table knows lighting and other uses; the stricter row for these uses is practice.
        critical: Limit {
            value: 0.03,
            citation: Citation::new(
                "common practice, no source",
                "3 % as Table G.52.1 for lighting",
                Seen::Practice,
            ),
        },
        lighting: Limit {
            value: 0.03,
            citation: wiring("Table G.52.1, public supply, lighting", Seen::Recalled),
        },
        other: Limit {
            value: 0.05,
            citation: wiring("Table G.52.1, public supply, other uses", Seen::Recalled),
        },
        required: false,
    },
    sizes: SIZES,
    standard_ratings_A: RATINGS,
    least_size: Limit { value: mm2(1.5), citation: wiring("Table 52.2", Seen::Recalled) },
    conductors: ConductorRule {
        solid_fixed: true,
        stranded_moving: true,
        citation: wiring("521", Seen::Recalled),
    },
    protective: ProtectiveRule::ByLine(
        &[(16.0, ByLine::Same), (35.0, ByLine::Size(mm2(16.0))), (f64::INFINITY, ByLine::Part(0.5))],
        Citation::new("IEC 60364-5-54:2011", "Table 54.2", Seen::Page),
    ),
};

const UNFUSED: Option<Limit<f64>> = Some(Limit {
    value: 3.0,
    citation: overcurrent(
        "434.2.1, where short-circuit and fire risk are reduced to a minimum",
        Seen::Recalled,
    ),
});
