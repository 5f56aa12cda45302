//! Tables and limits of the rule set `craft_us`: 33 CFR 183, ABYC E-11.

use super::book::{
    AmbientRule, ConductorRule, Count, DeviceRule, DropRule, EngineRule, Grouping, NextRating, Placement,
    ProtectiveRule, RuleSet, UnfusedRule,
};
use super::query::{Installation, Key, Limit, ORDER, Terms};
use super::table::{AmpacityTable, Band, FactorColumn, FactorTable, awg, column, figures};
use crate::citation::{Citation, Seen};
use crate::quantity::ConductorSize;

const fn cite(place: &'static str, seen: Seen) -> Citation {
    Citation::new("33 CFR 183 (2015)", place, seen)
}

const fn abyc(place: &'static str, seen: Seen) -> Citation {
    Citation::new("ABYC E-11", place, seen)
}

/// Single conductors, or not more than two current-carrying conductors in a bundle, 30 °C, outside engine spaces.
///
/// Source: 33 CFR 183.425, Table 5, compared with the 2015 edition; 8 AWG at 90 °C recalled.
static TABLE_5: AmpacityTable = AmpacityTable {
    id: "cfr-33-183-425-table-5",
    citation: cite("183.425, Table 5", Seen::Page),
    columns: &[
        column("60 °C", 60.0, Seen::Page),
        column("75 °C", 75.0, Seen::Page),
        column("80 °C", 80.0, Seen::Page),
        column("90 °C", 90.0, Seen::Page),
        column("105 °C", 105.0, Seen::Page),
        column("125 °C", 125.0, Seen::Page),
        column("200 °C", 200.0, Seen::Page),
    ],
    #[rustfmt::skip]
    rows: &[
        //                   60 °C 75 °C 80 °C 90 °C 105 °C 125 °C 200 °C
        (awg(18), figures!( 10.0  10.0  15.0  20.0  20.0  25.0  25.0)),
        (awg(16), figures!( 15.0  15.0  20.0  25.0  25.0  30.0  35.0)),
        (awg(14), figures!( 20.0  20.0  25.0  30.0  35.0  40.0  45.0)),
        (awg(12), figures!( 25.0  25.0  35.0  40.0  45.0  50.0  55.0)),
        (awg(10), figures!( 40.0  40.0  50.0  55.0  60.0  70.0  70.0)),
        (awg(8),  figures!( 55.0  65.0  70.0  70.0  80.0  90.0 100.0)),
        (awg(6),  figures!( 80.0  95.0 100.0 100.0 120.0 125.0 135.0)),
        (awg(4),  figures!(105.0 125.0 130.0 135.0 160.0 170.0 180.0)),
        (awg(3),  figures!(120.0 145.0 150.0 155.0 180.0 195.0 210.0)),
        (awg(2),  figures!(140.0 170.0 175.0 180.0 210.0 225.0 240.0)),
        (awg(1),  figures!(165.0 195.0 210.0 210.0 245.0 265.0 280.0)),
        (awg(0),  figures!(195.0 230.0 245.0 245.0 285.0 305.0 325.0)),
        (awg(-1), figures!(225.0 265.0 285.0 285.0 330.0 355.0 370.0)),
        (awg(-2), figures!(260.0 310.0 330.0 330.0 385.0 410.0 430.0)),
        (awg(-3), figures!(300.0 360.0 385.0 385.0 445.0 475.0 510.0)),
    ],
    recalled: &[(awg(8), Some("90 °C"))],
    lowered: &[],
    begins: "begins at 18 AWG",
};

/// Engine spaces, by temperature rating of the conductor: 50 °C ambient.
///
/// Source: 33 CFR 183.425, Table 5, note 1.
static ENGINE: FactorTable = FactorTable {
    id: "cfr-33-183-425-engine-space",
    citation: cite("183.425, Table 5, note 1", Seen::Page),
    what: "temperature rating",
    unit: "degC",
    remedy: "choose insulation of a rating in the table",
    columns: &[factor("ends at 200 degC", Seen::Page)],
    bands: &[
        Band { upto: 60.0, factors: figures!(0.58) },
        Band { upto: 75.0, factors: figures!(0.75) },
        Band { upto: 80.0, factors: figures!(0.78) },
        Band { upto: 90.0, factors: figures!(0.82) },
        Band { upto: 105.0, factors: figures!(0.85) },
        Band { upto: 125.0, factors: figures!(0.89) },
        Band { upto: 200.0, factors: figures!(1.0) },
    ],
    recalled: &[],
};

/// Current-carrying conductors bundled together.
///
/// Source: 33 CFR 183.425, Table 5, note 2.
static BUNDLING: FactorTable = FactorTable {
    id: "cfr-33-183-425-bundling",
    citation: cite("183.425, Table 5, note 2", Seen::Page),
    what: "the bundle",
    unit: "conductors",
    remedy: "bundle fewer conductors",
    columns: &[factor("", Seen::Page)],
    bands: &[
        Band { upto: 2.0, factors: figures!(1.0) },
        Band { upto: 3.0, factors: figures!(0.7) },
        Band { upto: 6.0, factors: figures!(0.6) },
        Band { upto: 24.0, factors: figures!(0.5) },
        Band { upto: f64::INFINITY, factors: figures!(0.4) },
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
    awg(18), awg(16), awg(14), awg(12), awg(10), awg(8), awg(6), awg(4), awg(3), awg(2), awg(1), awg(0),
    awg(-1), awg(-2), awg(-3),
];

const INCH: f64 = 0.0254;

const fn unfused(inches: f64) -> Limit<f64> {
    Limit { value: inches * INCH, citation: cite("183.455; ABYC E-11", Seen::Recalled) }
}

static TABLES: &[&AmpacityTable] = &[&TABLE_5];

/// The rule set `craft_us`.
pub(super) static SET: RuleSet = RuleSet {
    key: Key::CraftUs,
    word: "craft_us-2015",
    edition: "33 CFR 183 subpart I (2015 annual edition) with ABYC E-11",
    terms: Terms {
        ampacity: "ampacity",
        breaking: "interrupting rating",
        earth: "ground",
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
                "√((Tc − Ta)/(Tc − 30)) on 33 CFR 183.425, Table 5",
                Seen::Derived,
            ),
        },
        grouping: Grouping { table: &BUNDLING, column: 0, count: Count::Conductors },
    }],
    engine: Some(EngineRule {
        table: &ENGINE,
        ambient_degC: 50.0,
        derived: Citation::new("derived", "√((Tc − 50)/(Tc − 30))", Seen::Derived),
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
        next: NextRating::Within(1.5),
        rule: "rating not above the ampacity",
        citation: cite("183.455; ABYC E-11", Seen::Recalled),
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
    unfused: UnfusedRule {
        plain: Some(unfused(7.0)),
        sheathed: Some(unfused(40.0)),
        sheathed_from_post: Some(unfused(72.0)),
    },
    drop: DropRule {
        critical: Limit { value: 0.03, citation: abyc("voltage drop, 3 % circuits", Seen::Page) },
        lighting: Limit { value: 0.1, citation: abyc("voltage drop, 10 % circuits", Seen::Page) },
        other: Limit { value: 0.1, citation: abyc("voltage drop, 10 % circuits", Seen::Page) },
        required: true,
    },
    sizes: SIZES,
    standard_ratings_A: RATINGS,
    least_size: Limit { value: awg(16), citation: cite("183.425", Seen::Recalled) },
    // The book counts strands, not IEC classes: class 2 has fewer than it asks of moving cables.
    conductors: ConductorRule {
        solid_fixed: false,
        stranded_moving: false,
        citation: cite("183.425", Seen::Recalled),
    },
    protective: ProtectiveRule::NotHeld(abyc("DC grounding conductor", Seen::Recalled)),
};
