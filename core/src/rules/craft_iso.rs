//! Tables and limits of the rule set `craft_iso`: ISO 13297:2020, with the tables of ISO 10133:2012.
//!
//! All figures are recalled. Where one disagrees with its derivation the lower governs, beside the printed one.

use super::book::{
    AmbientRule, ConductorRule, Count, DeviceRule, DropRule, EngineRule, Grouping, NextRating, Placement,
    ProtectiveRule, RuleSet, UnfusedRule,
};
use super::query::{Installation, Key, Limit, ORDER, Terms};
use super::table::{AmpacityTable, Band, FactorColumn, FactorTable, column, figures, mm2};
use crate::citation::{Citation, Seen};
use crate::quantity::ConductorSize;

const fn cite(place: &'static str) -> Citation {
    Citation::new("ISO 13297:2020", place, Seen::Recalled)
}

const fn earlier(place: &'static str) -> Citation {
    Citation::new("ISO 10133:2012", place, Seen::Recalled)
}

/// Single conductors, 30 °C.
///
/// Source: ISO 10133:2012, Table A.1, carried into ISO 13297:2020; recalled.
static TABLE_A_1: AmpacityTable = AmpacityTable {
    id: "iso-10133-table-a1",
    citation: earlier("Table A.1"),
    columns: &[
        column("60 °C", 60.0, Seen::Recalled),
        column("70 °C", 70.0, Seen::Recalled),
        column("85 to 90 °C", 85.0, Seen::Recalled),
        column("105 °C", 105.0, Seen::Recalled),
        column("125 °C", 125.0, Seen::Recalled),
        column("200 °C", 200.0, Seen::Recalled),
    ],
    #[rustfmt::skip]
    rows: &[
        //                   60 °C 70 °C 85–90 105 °C 125 °C 200 °C
        (mm2(0.75),  figures!(  6.0  10.0  12.0  16.0  20.0  25.0)),
        (mm2(1.0),   figures!(  8.0  14.0  18.0  20.0  25.0  35.0)),
        (mm2(1.5),   figures!( 12.0  18.0  21.0  25.0  30.0  40.0)),
        (mm2(2.5),   figures!( 17.0  25.0  30.0  35.0  40.0  45.0)),
        (mm2(4.0),   figures!( 22.0  35.0  40.0  45.0  50.0  55.0)),
        (mm2(6.0),   figures!( 29.0  45.0  50.0  60.0  70.0  75.0)),
        (mm2(10.0),  figures!( 40.0  65.0  70.0  90.0 100.0 120.0)),
        (mm2(16.0),  figures!( 54.0  90.0 100.0 130.0 150.0 170.0)),
        (mm2(25.0),  figures!( 71.0 120.0 140.0 170.0 185.0 200.0)),
        (mm2(35.0),  figures!( 87.0 160.0 185.0 210.0 225.0 240.0)),
        (mm2(50.0),  figures!(105.0 210.0 230.0 270.0 300.0 325.0)),
        (mm2(70.0),  figures!(135.0 265.0 285.0 330.0 360.0 375.0)),
        (mm2(95.0),  figures!(165.0 310.0 330.0 390.0 410.0 430.0)),
        (mm2(120.0), figures!(190.0 360.0 400.0 450.0 480.0 520.0)),
        (mm2(150.0), figures!(220.0 380.0 430.0 475.0 520.0 560.0)),
    ],
    recalled: &[],
    // The first five: the small-craft table of 33 CFR 183.425 (75 and 200 °C) at the same area, logarithmic
    // between its sizes, is more than a tenth lower. The last three: the column of 85 to 90 °C times
    // √((70 − 30)/(85 − 30)), the temperatures alone.
    lowered: &[
        (mm2(1.0), "70 °C", 11.9),
        (mm2(2.5), "70 °C", 21.8),
        (mm2(4.0), "70 °C", 30.3),
        (mm2(1.0), "200 °C", 28.8),
        (mm2(16.0), "200 °C", 151.4),
        (mm2(50.0), "70 °C", 196.1),
        (mm2(70.0), "70 °C", 243.0),
        (mm2(95.0), "70 °C", 281.4),
    ],
    begins: "begins at 0.75 mm2",
};

/// Engine spaces, by temperature rating of the conductor.
///
/// Source: ISO 10133:2012, Table A.1 note; recalled. The note names 60 °C, the figures fit 50 °C: at 60 °C
/// √((Tc − 60)/(Tc − 30)) is lower for every rating, and governs.
static ENGINE: FactorTable = FactorTable {
    id: "iso-10133-engine-space",
    citation: earlier("Table A.1 note"),
    what: "temperature rating in an engine space",
    unit: "degC",
    remedy: "choose insulation of a rating in the table",
    columns: &[factor("ends at 200 degC", Seen::Recalled)],
    bands: &[
        Band { upto: 70.0, factors: figures!(0.75) },
        Band { upto: 85.0, factors: figures!(0.82) },
        Band { upto: 105.0, factors: figures!(0.86) },
        Band { upto: 125.0, factors: figures!(0.89) },
        Band { upto: 200.0, factors: figures!(1.0) },
    ],
    recalled: &[],
};

/// Current-carrying conductors bundled together.
///
/// Source: ISO 13297:2020, annex A; recalled.
static BUNDLING: FactorTable = FactorTable {
    id: "iso-13297-bundling",
    citation: cite("annex A"),
    what: "the bundle",
    unit: "conductors",
    remedy: "bundle fewer conductors",
    columns: &[factor("", Seen::Recalled)],
    bands: &[
        Band { upto: 3.0, factors: figures!(1.0) },
        Band { upto: 6.0, factors: figures!(0.7) },
        Band { upto: 24.0, factors: figures!(0.6) },
        Band { upto: f64::INFINITY, factors: figures!(0.5) },
    ],
    recalled: &[],
};

const fn factor(end: &'static str, seen: Seen) -> FactorColumn {
    FactorColumn { name: "factor", rating_degC: 0.0, seen, end }
}

/// Ratings of fuse-links and breakers in trade, A: common practice, no source.
#[rustfmt::skip]
const RATINGS: &[f64] = &[
    1.0, 2.0, 3.0, 5.0, 7.5, 10.0, 15.0, 20.0, 25.0, 30.0, 35.0, 40.0, 45.0, 50.0, 60.0, 70.0, 80.0, 90.0, 100.0,
    110.0, 125.0, 150.0, 175.0, 200.0, 225.0, 250.0, 300.0, 350.0, 400.0, 450.0, 500.0, 600.0,
];

#[rustfmt::skip]
const SIZES: &[ConductorSize] = &[
    mm2(0.75), mm2(1.0), mm2(1.5), mm2(2.5), mm2(4.0), mm2(6.0), mm2(10.0), mm2(16.0), mm2(25.0), mm2(35.0),
    mm2(50.0), mm2(70.0), mm2(95.0), mm2(120.0), mm2(150.0),
];

static TABLES: &[&AmpacityTable] = &[&TABLE_A_1];

/// The rule set `craft_iso`.
pub(super) static SET: RuleSet = RuleSet {
    key: Key::CraftIso,
    word: "craft_iso-2020",
    edition: "ISO 13297:2020 with the tables of ISO 10133:2012",
    terms: Terms {
        ampacity: "current-carrying capacity",
        breaking: "breaking capacity",
        earth: "earth",
        conduit: "conduit",
    },
    order: ORDER,
    ampacity_tables: TABLES,
    factor_tables: &[&ENGINE, &BUNDLING],
    placements: &[Placement {
        installations: &[
            Installation::FreeAir,
            Installation::SpacedFreeAir,
            Installation::CableFreeAir,
            Installation::Clipped,
            Installation::Conduit,
            Installation::CableInConduit,
            Installation::InsulatedWall,
            Installation::CableInInsulatedWall,
            Installation::Loom,
        ],
        tables: TABLES,
        column: None,
        instead: None,
        ambient: AmbientRule::Derived {
            base_degC: 30.0,
            citation: Citation::new(
                "derived",
                "√((Tc − Ta)/(Tc − 30)) on ISO 10133:2012, Table A.1",
                Seen::Derived,
            ),
        },
        grouping: Grouping { table: &BUNDLING, column: 0, count: Count::Conductors },
    }],
    engine: Some(EngineRule {
        table: &ENGINE,
        ambient_degC: 60.0,
        derived: earlier("Table A.1 note: √((Tc − 60)/(Tc − 30)), below the recalled factor"),
    }),
    rooftop_K: None,
    terminal: None,
    continuous_factor: Limit {
        value: 1.0,
        citation: Citation::new(
            "common practice, no source",
            "no factor on continuous current",
            Seen::Practice,
        ),
    },
    device: DeviceRule {
        small: &[],
        next: NextRating::No,
        rule: "rating not above the current-carrying capacity",
        citation: cite("overcurrent protection"),
    },
    // Not a rule of these books: our R5, applied to every set.
    overload_ratio: Limit {
        value: 1.45,
        citation: Citation::new(
            "common practice, no source",
            "1.45 × ampacity as in 60364-4-43",
            Seen::Practice,
        ),
    },
    // In a sheath throughout more is admitted; no figure is recalled, so that check is not made.
    unfused: UnfusedRule {
        plain: Some(Limit { value: 0.2, citation: cite("200 mm from the source") }),
        sheathed: None,
        sheathed_from_post: None,
    },
    drop: DropRule {
        critical: Limit { value: 0.03, citation: earlier("voltage drop, 3 % circuits") },
        lighting: Limit { value: 0.1, citation: earlier("voltage drop, 10 % circuits") },
        other: Limit { value: 0.1, citation: earlier("voltage drop, 10 % circuits") },
        required: true,
    },
    sizes: SIZES,
    standard_ratings_A: RATINGS,
    least_size: Limit { value: mm2(1.0), citation: cite("least cross-section") },
    // The book counts strands, not IEC classes: class 2 has fewer than it asks of moving cables.
    conductors: ConductorRule {
        solid_fixed: false,
        stranded_moving: false,
        citation: cite("stranded copper"),
    },
    protective: ProtectiveRule::NotHeld(cite("protective conductors")),
};
