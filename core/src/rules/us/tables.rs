//! Ampacities and correction factors of NFPA 70-2023.

use super::cite;
use crate::citation::{Citation, Seen};
use crate::rules::table::{
    AmpacityTable, Band, Column, FactorColumn, FactorTable, awg, column, figures, kcmil,
};

const COLUMNS: &[Column] = &[
    column("60 °C", 60.0, Seen::Page),
    column("75 °C", 75.0, Seen::Page),
    column("90 °C", 90.0, Seen::Page),
];

const COLUMNS_RECALLED: &[Column] = &[
    column("60 °C", 60.0, Seen::Recalled),
    column("75 °C", 75.0, Seen::Recalled),
    column("90 °C", 90.0, Seen::Recalled),
];

/// Copper, not more than three current-carrying conductors in raceway, cable or earth, 30 °C ambient.
///
/// Source: NFPA 70-2023, Table 310.16. The pages seen are reprints of editions up to 2008, none of 2023. Recalled: the four
/// cells that the 2011 edition changed (14 and 12 AWG at 60 °C, 3 and 1 AWG at 90 °C), 4 AWG at 75 °C, all sizes above
/// 500 kcmil.
pub(super) static TABLE_310_16: AmpacityTable = AmpacityTable {
    id: "nec-310-16-copper",
    citation: cite("Table 310.16", Seen::Page),
    columns: COLUMNS,
    #[rustfmt::skip]
    rows: &[
        //                      60 °C  75 °C  90 °C
        (awg(18),     figures!(    _     _  14.0)),
        (awg(16),     figures!(    _     _  18.0)),
        (awg(14),     figures!( 15.0  20.0  25.0)),
        (awg(12),     figures!( 20.0  25.0  30.0)),
        (awg(10),     figures!( 30.0  35.0  40.0)),
        (awg(8),      figures!( 40.0  50.0  55.0)),
        (awg(6),      figures!( 55.0  65.0  75.0)),
        (awg(4),      figures!( 70.0  85.0  95.0)),
        (awg(3),      figures!( 85.0 100.0 115.0)),
        (awg(2),      figures!( 95.0 115.0 130.0)),
        (awg(1),      figures!(110.0 130.0 145.0)),
        (awg(0),      figures!(125.0 150.0 170.0)),
        (awg(-1),     figures!(145.0 175.0 195.0)),
        (awg(-2),     figures!(165.0 200.0 225.0)),
        (awg(-3),     figures!(195.0 230.0 260.0)),
        (kcmil(250),  figures!(215.0 255.0 290.0)),
        (kcmil(300),  figures!(240.0 285.0 320.0)),
        (kcmil(350),  figures!(260.0 310.0 350.0)),
        (kcmil(400),  figures!(280.0 335.0 380.0)),
        (kcmil(500),  figures!(320.0 380.0 430.0)),
        (kcmil(600),  figures!(350.0 420.0 475.0)),
        (kcmil(700),  figures!(385.0 460.0 520.0)),
        (kcmil(750),  figures!(400.0 475.0 535.0)),
        (kcmil(800),  figures!(410.0 490.0 555.0)),
        (kcmil(900),  figures!(435.0 520.0 585.0)),
        (kcmil(1000), figures!(455.0 545.0 615.0)),
        (kcmil(1250), figures!(495.0 590.0 665.0)),
        (kcmil(1500), figures!(525.0 625.0 705.0)),
        (kcmil(1750), figures!(545.0 650.0 735.0)),
        (kcmil(2000), figures!(555.0 665.0 750.0)),
    ],
    recalled: &[
        (awg(14), Some("60 °C")),
        (awg(12), Some("60 °C")),
        (awg(4), Some("75 °C")),
        (awg(3), Some("90 °C")),
        (awg(1), Some("90 °C")),
        (kcmil(600), None),
        (kcmil(700), None),
        (kcmil(750), None),
        (kcmil(800), None),
        (kcmil(900), None),
        (kcmil(1000), None),
        (kcmil(1250), None),
        (kcmil(1500), None),
        (kcmil(1750), None),
        (kcmil(2000), None),
    ],
    lowered: &[],
    begins: "begins at 18 AWG",
};

/// Copper, single conductors in free air, 30 °C ambient.
///
/// Source: NFPA 70-2023, Table 310.17. Recalled as this table; the cells from 8 to 4/0 AWG were read as the
/// one-conductor column of the portable-cable table.
pub(super) static TABLE_310_17: AmpacityTable = AmpacityTable {
    id: "nec-310-17-copper",
    citation: cite("Table 310.17", Seen::Recalled),
    columns: COLUMNS_RECALLED,
    #[rustfmt::skip]
    rows: &[
        //                      60 °C  75 °C  90 °C
        (awg(18),     figures!(     _      _   18.0)),
        (awg(16),     figures!(     _      _   24.0)),
        (awg(14),     figures!(  25.0   30.0   35.0)),
        (awg(12),     figures!(  30.0   35.0   40.0)),
        (awg(10),     figures!(  40.0   50.0   55.0)),
        (awg(8),      figures!(  60.0   70.0   80.0)),
        (awg(6),      figures!(  80.0   95.0  105.0)),
        (awg(4),      figures!( 105.0  125.0  140.0)),
        (awg(3),      figures!( 120.0  145.0  165.0)),
        (awg(2),      figures!( 140.0  170.0  190.0)),
        (awg(1),      figures!( 165.0  195.0  220.0)),
        (awg(0),      figures!( 195.0  230.0  260.0)),
        (awg(-1),     figures!( 225.0  265.0  300.0)),
        (awg(-2),     figures!( 260.0  310.0  350.0)),
        (awg(-3),     figures!( 300.0  360.0  405.0)),
        (kcmil(250),  figures!( 340.0  405.0  455.0)),
        (kcmil(300),  figures!( 375.0  445.0  500.0)),
        (kcmil(350),  figures!( 420.0  505.0  570.0)),
        (kcmil(400),  figures!( 455.0  545.0  615.0)),
        (kcmil(500),  figures!( 515.0  620.0  700.0)),
        (kcmil(600),  figures!( 575.0  690.0  780.0)),
        (kcmil(700),  figures!( 630.0  755.0  850.0)),
        (kcmil(750),  figures!( 655.0  785.0  885.0)),
        (kcmil(800),  figures!( 680.0  815.0  920.0)),
        (kcmil(900),  figures!( 730.0  870.0  980.0)),
        (kcmil(1000), figures!( 780.0  935.0 1055.0)),
        (kcmil(1250), figures!( 890.0 1065.0 1200.0)),
        (kcmil(1500), figures!( 980.0 1175.0 1325.0)),
        (kcmil(1750), figures!(1070.0 1280.0 1445.0)),
        (kcmil(2000), figures!(1155.0 1385.0 1560.0)),
    ],
    recalled: &[],
    lowered: &[],
    begins: "begins at 18 AWG",
};

/// Ambient factors for tables with 30 °C ambient.
///
/// Source: NFPA 70-2023, Table 310.15(B)(1)(1); 55 °C in the 75 °C column recalled, √(20/45) = 0.667.
pub(super) static AMBIENT_30: FactorTable = FactorTable {
    id: "nec-310-15-b-1-ambient-30c",
    citation: cite("Table 310.15(B)(1)(1)", Seen::Page),
    what: "ambient",
    unit: "degC",
    remedy: "choose insulation rated higher",
    columns: &[
        temperature("60C", 60.0, Seen::Page, "ends at 55 degC for 60 degC insulation"),
        temperature("75C", 75.0, Seen::Page, "ends at 70 degC for 75 degC insulation"),
        temperature("90C", 90.0, Seen::Page, "ends at 85 degC for 90 degC insulation"),
    ],
    bands: &[
        Band { upto: 10.0, factors: figures!(1.29 1.2 1.15) },
        Band { upto: 15.0, factors: figures!(1.22 1.15 1.12) },
        Band { upto: 20.0, factors: figures!(1.15 1.11 1.08) },
        Band { upto: 25.0, factors: figures!(1.08 1.05 1.04) },
        Band { upto: 30.0, factors: figures!(1.0 1.0 1.0) },
        Band { upto: 35.0, factors: figures!(0.91 0.94 0.96) },
        Band { upto: 40.0, factors: figures!(0.82 0.88 0.91) },
        Band { upto: 45.0, factors: figures!(0.71 0.82 0.87) },
        Band { upto: 50.0, factors: figures!(0.58 0.75 0.82) },
        Band { upto: 55.0, factors: figures!(0.41 0.67 0.76) },
        Band { upto: 60.0, factors: figures!(_ 0.58 0.71) },
        Band { upto: 65.0, factors: figures!(_ 0.47 0.65) },
        Band { upto: 70.0, factors: figures!(_ 0.33 0.58) },
        Band { upto: 75.0, factors: figures!(_ _ 0.5) },
        Band { upto: 80.0, factors: figures!(_ _ 0.41) },
        Band { upto: 85.0, factors: figures!(_ _ 0.29) },
    ],
    recalled: &[(55.0, "75C")],
};

/// Ambient factors for tables with 40 °C ambient; no table of that kind is held, so no answer uses it.
///
/// Source: NFPA 70-2023, Table 310.15(B)(1)(2).
pub(super) static AMBIENT_40: FactorTable = FactorTable {
    id: "nec-310-15-b-1-ambient-40c",
    citation: cite("Table 310.15(B)(1)(2)", Seen::Page),
    what: "ambient",
    unit: "degC",
    remedy: "choose insulation rated higher",
    columns: &[
        temperature("60C", 60.0, Seen::Page, "ends at 55 degC for 60 degC insulation"),
        temperature("75C", 75.0, Seen::Page, "ends at 70 degC for 75 degC insulation"),
        temperature("90C", 90.0, Seen::Page, "ends at 80 degC for 90 degC insulation"),
    ],
    bands: &[
        Band { upto: 10.0, factors: figures!(1.58 1.36 1.26) },
        Band { upto: 15.0, factors: figures!(1.5 1.31 1.22) },
        Band { upto: 20.0, factors: figures!(1.41 1.25 1.18) },
        Band { upto: 25.0, factors: figures!(1.32 1.2 1.14) },
        Band { upto: 30.0, factors: figures!(1.22 1.13 1.1) },
        Band { upto: 35.0, factors: figures!(1.12 1.07 1.05) },
        Band { upto: 40.0, factors: figures!(1.0 1.0 1.0) },
        Band { upto: 45.0, factors: figures!(0.87 0.93 0.95) },
        Band { upto: 50.0, factors: figures!(0.71 0.85 0.89) },
        Band { upto: 55.0, factors: figures!(0.5 0.76 0.84) },
        Band { upto: 60.0, factors: figures!(_ 0.65 0.77) },
        Band { upto: 65.0, factors: figures!(_ 0.53 0.71) },
        Band { upto: 70.0, factors: figures!(_ 0.38 0.63) },
        Band { upto: 75.0, factors: figures!(_ _ 0.55) },
        Band { upto: 80.0, factors: figures!(_ _ 0.45) },
    ],
    recalled: &[],
};

/// Ambient factors of 105 and 125 °C conductors in photovoltaic wiring.
///
/// Held for photovoltaic circuits with conductors listed for it; the wiring answers fall to the 90 °C column.
/// Source: NFPA 70-2020, Table 690.31(A), recalled; every cell equals √((Tc − Ta)/(Tc − 30)), rounded.
pub(super) static AMBIENT_PV: FactorTable = FactorTable {
    id: "nec-690-31-ambient-105-125",
    citation: Citation::new("NFPA 70-2020", "Table 690.31(A)", Seen::Recalled),
    what: "ambient",
    unit: "degC",
    remedy: "choose insulation rated higher",
    columns: &[
        temperature("105C", 105.0, Seen::Recalled, "ends at 100 degC for 105 degC insulation"),
        temperature("125C", 125.0, Seen::Recalled, "ends at 120 degC for 125 degC insulation"),
    ],
    bands: &[
        Band { upto: 30.0, factors: figures!(1.0 1.0) },
        Band { upto: 35.0, factors: figures!(0.97 0.97) },
        Band { upto: 40.0, factors: figures!(0.93 0.95) },
        Band { upto: 45.0, factors: figures!(0.89 0.92) },
        Band { upto: 50.0, factors: figures!(0.86 0.89) },
        Band { upto: 55.0, factors: figures!(0.82 0.86) },
        Band { upto: 60.0, factors: figures!(0.77 0.83) },
        Band { upto: 65.0, factors: figures!(0.73 0.79) },
        Band { upto: 70.0, factors: figures!(0.68 0.76) },
        Band { upto: 75.0, factors: figures!(0.63 0.73) },
        Band { upto: 80.0, factors: figures!(0.58 0.69) },
        Band { upto: 85.0, factors: figures!(0.52 0.65) },
        Band { upto: 90.0, factors: figures!(0.45 0.61) },
        Band { upto: 95.0, factors: figures!(0.37 0.56) },
        Band { upto: 100.0, factors: figures!(0.26 0.51) },
        Band { upto: 105.0, factors: figures!(_ 0.46) },
        Band { upto: 110.0, factors: figures!(_ 0.4) },
        Band { upto: 115.0, factors: figures!(_ 0.32) },
        Band { upto: 120.0, factors: figures!(_ 0.23) },
    ],
    recalled: &[],
};

/// More than three current-carrying conductors together.
///
/// Source: NFPA 70-2023, Table 310.15(C)(1).
pub(super) static BUNDLING: FactorTable = FactorTable {
    id: "nec-310-15-c-1-bundling",
    citation: cite("Table 310.15(C)(1)", Seen::Page),
    what: "the bundle",
    unit: "conductors",
    remedy: "bundle fewer conductors",
    columns: &[FactorColumn { name: "factor", rating_degC: 0.0, seen: Seen::Page, end: "" }],
    bands: &[
        Band { upto: 3.0, factors: figures!(1.0) },
        Band { upto: 6.0, factors: figures!(0.8) },
        Band { upto: 9.0, factors: figures!(0.7) },
        Band { upto: 20.0, factors: figures!(0.5) },
        Band { upto: 30.0, factors: figures!(0.45) },
        Band { upto: 40.0, factors: figures!(0.4) },
        Band { upto: f64::INFINITY, factors: figures!(0.35) },
    ],
    recalled: &[],
};

const fn temperature(name: &'static str, rating: f64, seen: Seen, end: &'static str) -> FactorColumn {
    FactorColumn { name, rating_degC: rating, seen, end }
}
