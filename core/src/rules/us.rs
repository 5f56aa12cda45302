//! Tables and limits of the rule set `us`: NFPA 70-2023.
//!
//! Figures for copper. A figure is seen where it was read on a published page: not always of this edition, and for Table
//! 310.16 in reprints of earlier ones. Else it is recalled.

mod tables;

use tables::{AMBIENT_30, AMBIENT_40, AMBIENT_PV, BUNDLING, TABLE_310_16, TABLE_310_17};

use super::book::{
    AmbientRule, ConductorRule, Count, DeviceRule, DropRule, Grouping, NextRating, Placement, ProtectiveRule,
    RuleSet, TerminalRule, UnfusedRule,
};
use super::query::{Check, Installation, Key, Limit, Terms};
use super::table::{AmpacityTable, awg, kcmil};
use crate::citation::{Citation, Seen};
use crate::quantity::ConductorSize;

const DOCUMENT: &str = "NFPA 70-2023";

const fn cite(place: &'static str, seen: Seen) -> Citation {
    Citation::new(DOCUMENT, place, seen)
}

/// Largest device for small copper conductors. Source: NFPA 70-2023, 240.4(D); 18 and 16 AWG recalled, and
/// only under its conditions on load and device.
const SMALL: &[(ConductorSize, f64, Citation)] = &[
    (awg(18), 7.0, cite("240.4(D)", Seen::Recalled)),
    (awg(16), 10.0, cite("240.4(D)", Seen::Recalled)),
    (awg(14), 15.0, cite("240.4(D)", Seen::Page)),
    (awg(12), 20.0, cite("240.4(D)", Seen::Page)),
    (awg(10), 30.0, cite("240.4(D)", Seen::Page)),
];

/// Standard ratings of fuses and inverse-time breakers, A.
///
/// Source: NFPA 70-2023, 240.6(A); 15 to 600 A seen, 10 A (new in 2023) and those above 600 A recalled. The
/// ratings for fuses only (1, 3, 6, 601 A) are left out.
#[rustfmt::skip]
const RATINGS: &[f64] = &[
    10.0, 15.0, 20.0, 25.0, 30.0, 35.0, 40.0, 45.0, 50.0, 60.0, 70.0, 80.0, 90.0, 100.0, 110.0, 125.0, 150.0,
    175.0, 200.0, 225.0, 250.0, 300.0, 350.0, 400.0, 450.0, 500.0, 600.0, 700.0, 800.0, 1000.0, 1200.0,
    1600.0, 2000.0, 2500.0, 3000.0, 4000.0, 5000.0, 6000.0,
];

/// Least equipment grounding conductor: device up to, A; copper; aluminium.
///
/// Source: NFPA 70-2023, Table 250.122. Page seen up to 1200 A; 1600 to 4000 A recalled.
#[rustfmt::skip]
const GROUNDING: &[(f64, ConductorSize, ConductorSize, Seen)] = &[
    (15.0, awg(14), awg(12), Seen::Page),
    (20.0, awg(12), awg(10), Seen::Page),
    (60.0, awg(10), awg(8), Seen::Page),
    (100.0, awg(8), awg(6), Seen::Page),
    (200.0, awg(6), awg(4), Seen::Page),
    (300.0, awg(4), awg(2), Seen::Page),
    (400.0, awg(3), awg(1), Seen::Page),
    (500.0, awg(2), awg(0), Seen::Page),
    (600.0, awg(1), awg(-1), Seen::Page),
    (800.0, awg(0), awg(-2), Seen::Page),
    (1000.0, awg(-1), awg(-3), Seen::Page),
    (1200.0, awg(-2), kcmil(250), Seen::Page),
    (1600.0, awg(-3), kcmil(350), Seen::Recalled),
    (2000.0, kcmil(250), kcmil(400), Seen::Recalled),
    (2500.0, kcmil(350), kcmil(600), Seen::Recalled),
    (3000.0, kcmil(400), kcmil(600), Seen::Recalled),
    (4000.0, kcmil(500), kcmil(750), Seen::Recalled),
];

const SIZES: &[ConductorSize] = &[
    awg(18),
    awg(16),
    awg(14),
    awg(12),
    awg(10),
    awg(8),
    awg(6),
    awg(4),
    awg(3),
    awg(2),
    awg(1),
    awg(0),
    awg(-1),
    awg(-2),
    awg(-3),
    kcmil(250),
    kcmil(300),
    kcmil(350),
    kcmil(400),
    kcmil(500),
    kcmil(600),
    kcmil(700),
    kcmil(750),
    kcmil(800),
    kcmil(900),
    kcmil(1000),
    kcmil(1250),
    kcmil(1500),
    kcmil(1750),
    kcmil(2000),
];

static TABLES_IN_RACEWAY: &[&AmpacityTable] = &[&TABLE_310_16];
static TABLES_FREE_AIR: &[&AmpacityTable] = &[&TABLE_310_17];

static BUNDLED: Grouping = Grouping { table: &BUNDLING, column: 0, count: Count::Conductors };

const FIVE_FEET: Option<Limit<f64>> = Some(Limit {
    value: 1.524,
    citation: cite("240.21(H), as close as practicable; 690.71(H) of 2014, 5 ft", Seen::Recalled),
});

/// The rule set `us`.
pub(super) static SET: RuleSet = RuleSet {
    key: Key::Us,
    word: "us-2023",
    edition: "NFPA 70, 2023 edition",
    terms: Terms {
        ampacity: "ampacity",
        breaking: "interrupting rating",
        earth: "ground",
        conduit: "raceway",
    },
    order: &[
        Check::Conductor,
        Check::LeastSize,
        Check::TerminalColumn,
        Check::Ampacity,
        Check::DeviceCarries,
        Check::DeviceStart,
        Check::DeviceProtects,
        Check::OpensLate,
        Check::Drop,
        Check::LoadVoltage,
        Check::StartVoltage,
        Check::DeviceSupply,
        Check::Breaking,
        Check::LeastFault,
        Check::Withstand,
        Check::Termination,
    ],
    ampacity_tables: &[&TABLE_310_16, &TABLE_310_17],
    factor_tables: &[&AMBIENT_30, &AMBIENT_40, &AMBIENT_PV, &BUNDLING],
    placements: &[
        Placement {
            installations: &[Installation::FreeAir, Installation::SpacedFreeAir],
            tables: TABLES_FREE_AIR,
            column: None,
            instead: None,
            ambient: AmbientRule::Table(&AMBIENT_30),
            grouping: BUNDLED,
        },
        Placement {
            installations: &[
                Installation::CableFreeAir,
                Installation::Clipped,
                Installation::Conduit,
                Installation::CableInConduit,
                Installation::InsulatedWall,
                Installation::CableInInsulatedWall,
                Installation::Duct,
                Installation::Buried,
                Installation::Loom,
            ],
            tables: TABLES_IN_RACEWAY,
            column: None,
            instead: None,
            ambient: AmbientRule::Table(&AMBIENT_30),
            grouping: BUNDLED,
        },
    ],
    engine: None,
    rooftop_K: Some(Limit { value: 33.0, citation: cite("310.15(B)(2)", Seen::Recalled) }),
    terminal: Some(TerminalRule {
        table: &TABLE_310_16,
        low_degC: 60.0,
        upto_A: 100.0,
        high_degC: 75.0,
        citation: cite("110.14(C)(1)", Seen::Recalled),
    }),
    continuous_factor: Limit { value: 1.25, citation: cite("210.20(A), 215.3", Seen::Page) },
    device: DeviceRule {
        small: SMALL,
        next: NextRating::UpTo(800.0),
        rule: "standard rating not above the ampacity",
        citation: cite("240.4(B), (C)", Seen::Recalled),
    },
    // Not a rule of this book: our R5, applied to every set.
    overload_ratio: Limit {
        value: 1.45,
        citation: Citation::new(
            "common practice, no source",
            "1.45 × ampacity as in 60364-4-43",
            Seen::Practice,
        ),
    },
    // 240.21 asks for the device where the conductor is supplied and gives no length for a battery's.
    // As close as practicable to the battery; beyond 5 ft the article on storage asks for a device at the battery's end.
    unfused: UnfusedRule { plain: FIVE_FEET, sheathed: FIVE_FEET, sheathed_from_post: FIVE_FEET },
    drop: DropRule {
        // The note speaks of branch circuits; taking it for these uses over the whole path is practice.
        critical: Limit {
            value: 0.03,
            citation: Citation::new(
                "common practice, no source",
                "3 % after 210.19(A), informational note",
                Seen::Practice,
            ),
        },
        lighting: Limit { value: 0.05, citation: cite("215.2(A), informational note", Seen::Page) },
        other: Limit { value: 0.05, citation: cite("215.2(A), informational note", Seen::Page) },
        required: false,
    },
    sizes: SIZES,
    standard_ratings_A: RATINGS,
    least_size: Limit { value: awg(14), citation: cite("Table 310.3(A)", Seen::Recalled) },
    conductors: ConductorRule {
        solid_fixed: true,
        stranded_moving: true,
        citation: cite("310.3", Seen::Recalled),
    },
    protective: ProtectiveRule::ByDevice(GROUNDING, cite("Table 250.122", Seen::Page)),
};
