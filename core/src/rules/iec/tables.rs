//! Ampacities and correction factors of IEC 60364-5-52:2009.

use super::wiring;
use crate::citation::Seen;
use crate::quantity::ConductorSize;
use crate::rules::table::{AmpacityTable, Band, Column, FactorColumn, FactorTable, column, figures, mm2};

const PVC: &[Column] = &[
    column("A1", 70.0, Seen::Page),
    column("A2", 70.0, Seen::Page),
    column("B1", 70.0, Seen::Page),
    column("B2", 70.0, Seen::Page),
    column("C", 70.0, Seen::Page),
    column("D1", 70.0, Seen::Page),
    column("D2", 70.0, Seen::Recalled),
];

const XLPE: &[Column] = &[
    column("A1", 90.0, Seen::Page),
    column("A2", 90.0, Seen::Page),
    column("B1", 90.0, Seen::Page),
    column("B2", 90.0, Seen::Page),
    column("C", 90.0, Seen::Page),
    column("D1", 90.0, Seen::Page),
    column("D2", 90.0, Seen::Recalled),
];

const PVC_AIR: &[Column] = &[
    column("E, two", 70.0, Seen::Recalled),
    column("E, three", 70.0, Seen::Recalled),
    column("F, two touching", 70.0, Seen::Page),
    column("F, three trefoil", 70.0, Seen::Page),
    column("F, three flat", 70.0, Seen::Recalled),
    column("G, horizontal", 70.0, Seen::Page),
    column("G, vertical", 70.0, Seen::Page),
];

const XLPE_AIR: &[Column] = &[
    column("E, two", 90.0, Seen::Recalled),
    column("E, three", 90.0, Seen::Recalled),
    column("F, two touching", 90.0, Seen::Page),
    column("F, three trefoil", 90.0, Seen::Page),
    column("F, three flat", 90.0, Seen::Page),
    column("G, horizontal", 90.0, Seen::Page),
    column("G, vertical", 90.0, Seen::Page),
];

/// PVC, two loaded conductors, 30 °C air, 20 °C ground.
///
/// Source: IEC 60364-5-52:2009, Table B.52.2; D2 and the sizes above 95 mm² recalled.
pub(super) static TABLE_B_52_2: AmpacityTable = AmpacityTable {
    id: "iec-b52-2-pvc-two",
    citation: wiring("Table B.52.2", Seen::Page),
    columns: PVC,
    #[rustfmt::skip]
    rows: &[
        //                      A1    A2    B1    B2     C    D1    D2
        (mm2(1.5),   figures!( 14.5  14.0  17.5  16.5  19.5  22.0  22.0)),
        (mm2(2.5),   figures!( 19.5  18.5  24.0  23.0  27.0  29.0  28.0)),
        (mm2(4.0),   figures!( 26.0  25.0  32.0  30.0  36.0  37.0  38.0)),
        (mm2(6.0),   figures!( 34.0  32.0  41.0  38.0  46.0  46.0  48.0)),
        (mm2(10.0),  figures!( 46.0  43.0  57.0  52.0  63.0  60.0  64.0)),
        (mm2(16.0),  figures!( 61.0  57.0  76.0  69.0  85.0  78.0  83.0)),
        (mm2(25.0),  figures!( 80.0  75.0 101.0  90.0 112.0  99.0 110.0)),
        (mm2(35.0),  figures!( 99.0  92.0 125.0 111.0 138.0 119.0 132.0)),
        (mm2(50.0),  figures!(119.0 110.0 151.0 133.0 168.0 140.0 156.0)),
        (mm2(70.0),  figures!(151.0 139.0 192.0 168.0 213.0 173.0 192.0)),
        (mm2(95.0),  figures!(182.0 167.0 232.0 201.0 258.0 204.0 230.0)),
        (mm2(120.0), figures!(210.0 192.0 269.0 232.0 299.0 231.0 261.0)),
        (mm2(150.0), figures!(240.0 219.0 300.0 258.0 344.0 261.0 293.0)),
        (mm2(185.0), figures!(273.0 248.0 341.0 294.0 392.0 292.0 331.0)),
        (mm2(240.0), figures!(321.0 291.0 400.0 344.0 461.0 336.0 382.0)),
        (mm2(300.0), figures!(367.0 334.0 458.0 394.0 530.0 379.0 427.0)),
    ],
    recalled: LARGE,
    lowered: &[],
    begins: "begins at 1.5 mm2",
};

/// XLPE or EPR, two loaded conductors, 30 °C air, 20 °C ground.
///
/// Source: IEC 60364-5-52:2009, Table B.52.3; D2, B1 16 mm² and the sizes above 95 mm² recalled.
pub(super) static TABLE_B_52_3: AmpacityTable = AmpacityTable {
    id: "iec-b52-3-xlpe-two",
    citation: wiring("Table B.52.3", Seen::Page),
    columns: XLPE,
    #[rustfmt::skip]
    rows: &[
        //                      A1    A2    B1    B2     C    D1    D2
        (mm2(1.5),   figures!( 19.0  18.5  23.0  22.0  24.0  25.0  27.0)),
        (mm2(2.5),   figures!( 26.0  25.0  31.0  30.0  33.0  33.0  35.0)),
        (mm2(4.0),   figures!( 35.0  33.0  42.0  40.0  45.0  43.0  46.0)),
        (mm2(6.0),   figures!( 45.0  42.0  54.0  51.0  58.0  53.0  58.0)),
        (mm2(10.0),  figures!( 61.0  57.0  75.0  69.0  80.0  71.0  77.0)),
        (mm2(16.0),  figures!( 81.0  76.0 100.0  91.0 107.0  91.0 100.0)),
        (mm2(25.0),  figures!(106.0  99.0 133.0 119.0 138.0 116.0 129.0)),
        (mm2(35.0),  figures!(131.0 121.0 164.0 146.0 171.0 139.0 155.0)),
        (mm2(50.0),  figures!(158.0 145.0 198.0 175.0 209.0 164.0 183.0)),
        (mm2(70.0),  figures!(200.0 183.0 253.0 221.0 269.0 203.0 225.0)),
        (mm2(95.0),  figures!(241.0 220.0 306.0 265.0 328.0 239.0 270.0)),
        (mm2(120.0), figures!(278.0 253.0 354.0 305.0 382.0 271.0 306.0)),
        (mm2(150.0), figures!(318.0 290.0 393.0 334.0 441.0 306.0 343.0)),
        (mm2(185.0), figures!(362.0 329.0 449.0 384.0 506.0 343.0 387.0)),
        (mm2(240.0), figures!(424.0 386.0 528.0 459.0 599.0 395.0 448.0)),
        (mm2(300.0), figures!(486.0 442.0 603.0 532.0 693.0 446.0 502.0)),
    ],
    recalled: &[
        (mm2(16.0), Some("B1")),
        (mm2(120.0), None),
        (mm2(150.0), None),
        (mm2(185.0), None),
        (mm2(240.0), None),
        (mm2(300.0), None),
    ],
    // 1.1 % above A·S^m fitted to 25 … 95 mm²; every other recalled size is within 1 % of it or below.
    lowered: &[(mm2(300.0), "A2", 437.0)],
    begins: "begins at 1.5 mm2",
};

/// PVC in free air, 30 °C.
///
/// Source: IEC 60364-5-52:2009, Table B.52.10; E, F three flat and the sizes above 95 mm² recalled.
pub(super) static TABLE_B_52_10: AmpacityTable = AmpacityTable {
    id: "iec-b52-10-pvc-free-air",
    citation: wiring("Table B.52.10", Seen::Page),
    columns: PVC_AIR,
    #[rustfmt::skip]
    rows: &[
        //                   E two  three F two trefoil flat G horiz. vertical
        (mm2(1.5),   figures!( 22.0  18.5      _     _     _      _      _)),
        (mm2(2.5),   figures!( 30.0  25.0      _     _     _      _      _)),
        (mm2(4.0),   figures!( 40.0  34.0      _     _     _      _      _)),
        (mm2(6.0),   figures!( 51.0  43.0      _     _     _      _      _)),
        (mm2(10.0),  figures!( 70.0  60.0      _     _     _      _      _)),
        (mm2(16.0),  figures!( 94.0  80.0      _     _     _      _      _)),
        (mm2(25.0),  figures!(119.0 101.0  131.0 110.0 114.0  146.0  130.0)),
        (mm2(35.0),  figures!(148.0 126.0  162.0 137.0 143.0  181.0  162.0)),
        (mm2(50.0),  figures!(180.0 153.0  196.0 167.0 174.0  219.0  197.0)),
        (mm2(70.0),  figures!(232.0 196.0  251.0 216.0 225.0  281.0  254.0)),
        (mm2(95.0),  figures!(282.0 238.0  304.0 264.0 275.0  341.0  311.0)),
        (mm2(120.0), figures!(328.0 276.0  352.0 308.0 321.0  396.0  362.0)),
        (mm2(150.0), figures!(379.0 319.0  406.0 356.0 372.0  456.0  419.0)),
        (mm2(185.0), figures!(434.0 364.0  463.0 409.0 427.0  521.0  480.0)),
        (mm2(240.0), figures!(514.0 430.0  546.0 485.0 507.0  615.0  569.0)),
        (mm2(300.0), figures!(593.0 497.0  629.0 561.0 587.0  709.0  659.0)),
        (mm2(400.0), figures!(    _     _  754.0 656.0 689.0  852.0  795.0)),
        (mm2(500.0), figures!(    _     _  868.0 749.0 789.0  982.0  920.0)),
        (mm2(630.0), figures!(    _     _ 1005.0 855.0 905.0 1138.0 1070.0)),
    ],
    recalled: LARGE,
    lowered: &[],
    begins: "begins at 1.5 mm2",
};

/// XLPE or EPR in free air, 30 °C.
///
/// Source: IEC 60364-5-52:2009, Table B.52.12; E and the sizes above 95 mm² recalled.
pub(super) static TABLE_B_52_12: AmpacityTable = AmpacityTable {
    id: "iec-b52-12-xlpe-free-air",
    citation: wiring("Table B.52.12", Seen::Page),
    columns: XLPE_AIR,
    #[rustfmt::skip]
    rows: &[
        //                   E two  three F two trefoil flat G horiz. vertical
        (mm2(1.5),   figures!( 26.0  23.0      _      _      _      _      _)),
        (mm2(2.5),   figures!( 36.0  32.0      _      _      _      _      _)),
        (mm2(4.0),   figures!( 49.0  42.0      _      _      _      _      _)),
        (mm2(6.0),   figures!( 63.0  54.0      _      _      _      _      _)),
        (mm2(10.0),  figures!( 86.0  75.0      _      _      _      _      _)),
        (mm2(16.0),  figures!(115.0 100.0      _      _      _      _      _)),
        (mm2(25.0),  figures!(149.0 127.0  161.0  135.0  141.0  182.0  161.0)),
        (mm2(35.0),  figures!(185.0 158.0  200.0  169.0  176.0  226.0  201.0)),
        (mm2(50.0),  figures!(225.0 192.0  242.0  207.0  216.0  275.0  246.0)),
        (mm2(70.0),  figures!(289.0 246.0  310.0  268.0  279.0  353.0  318.0)),
        (mm2(95.0),  figures!(352.0 298.0  377.0  328.0  342.0  430.0  389.0)),
        (mm2(120.0), figures!(410.0 346.0  437.0  383.0  400.0  500.0  454.0)),
        (mm2(150.0), figures!(473.0 399.0  504.0  444.0  464.0  577.0  527.0)),
        (mm2(185.0), figures!(542.0 456.0  575.0  510.0  533.0  661.0  605.0)),
        (mm2(240.0), figures!(641.0 538.0  679.0  607.0  634.0  781.0  719.0)),
        (mm2(300.0), figures!(741.0 621.0  783.0  703.0  736.0  902.0  833.0)),
        (mm2(400.0), figures!(    _     _  940.0  823.0  868.0 1085.0 1008.0)),
        (mm2(500.0), figures!(    _     _ 1083.0  946.0  998.0 1253.0 1169.0)),
        (mm2(630.0), figures!(    _     _ 1254.0 1088.0 1151.0 1454.0 1362.0)),
    ],
    recalled: LARGE,
    lowered: &[],
    begins: "begins at 1.5 mm2",
};

const LARGE: &[(ConductorSize, Option<&str>)] = &[
    (mm2(120.0), None),
    (mm2(150.0), None),
    (mm2(185.0), None),
    (mm2(240.0), None),
    (mm2(300.0), None),
    (mm2(400.0), None),
    (mm2(500.0), None),
    (mm2(630.0), None),
];

/// Ambient air other than 30 °C.
///
/// Source: IEC 60364-5-52:2009, Table B.52.14; seen from 35 °C up, PVC below 30 °C and XLPE at 55 °C recalled.
/// Every cell equals √((Tc − Ta)/(Tc − 30)), rounded. The standard gives no figure between its rows: the next
/// hotter row holds.
pub(super) static AMBIENT_AIR: FactorTable = FactorTable {
    id: "iec-b52-14-ambient",
    citation: wiring("Table B.52.14", Seen::Page),
    what: "ambient",
    unit: "degC",
    remedy: "choose insulation rated higher",
    columns: &[
        factor("PVC", 70.0, "ends at 60 degC for PVC", Seen::Page),
        factor("XLPE", 90.0, "ends at 80 degC for XLPE", Seen::Page),
    ],
    bands: &[
        Band { upto: 10.0, factors: figures!(1.22 1.15) },
        Band { upto: 15.0, factors: figures!(1.17 1.12) },
        Band { upto: 20.0, factors: figures!(1.12 1.08) },
        Band { upto: 25.0, factors: figures!(1.06 1.04) },
        Band { upto: 30.0, factors: figures!(1.0 1.0) },
        Band { upto: 35.0, factors: figures!(0.94 0.96) },
        Band { upto: 40.0, factors: figures!(0.87 0.91) },
        Band { upto: 45.0, factors: figures!(0.79 0.87) },
        Band { upto: 50.0, factors: figures!(0.71 0.82) },
        Band { upto: 55.0, factors: figures!(0.61 0.76) },
        Band { upto: 60.0, factors: figures!(0.5 0.71) },
        Band { upto: 65.0, factors: figures!(_ 0.65) },
        Band { upto: 70.0, factors: figures!(_ 0.58) },
        Band { upto: 75.0, factors: figures!(_ 0.5) },
        Band { upto: 80.0, factors: figures!(_ 0.41) },
    ],
    recalled: &[(10.0, "PVC"), (15.0, "PVC"), (20.0, "PVC"), (25.0, "PVC"), (55.0, "XLPE")],
};

/// Ambient ground other than 20 °C.
///
/// Source: IEC 60364-5-52:2009, Table B.52.15, recalled; every cell equals √((Tc − Ta)/(Tc − 20)), rounded.
pub(super) static AMBIENT_GROUND: FactorTable = FactorTable {
    id: "iec-b52-15-ground",
    citation: wiring("Table B.52.15", Seen::Recalled),
    what: "ground temperature",
    unit: "degC",
    remedy: "choose insulation rated higher",
    columns: &[
        factor("PVC", 70.0, "ends at 60 degC for PVC", Seen::Recalled),
        factor("XLPE", 90.0, "ends at 80 degC for XLPE", Seen::Recalled),
    ],
    bands: &[
        Band { upto: 10.0, factors: figures!(1.1 1.07) },
        Band { upto: 15.0, factors: figures!(1.05 1.04) },
        Band { upto: 20.0, factors: figures!(1.0 1.0) },
        Band { upto: 25.0, factors: figures!(0.95 0.96) },
        Band { upto: 30.0, factors: figures!(0.89 0.93) },
        Band { upto: 35.0, factors: figures!(0.84 0.89) },
        Band { upto: 40.0, factors: figures!(0.77 0.85) },
        Band { upto: 45.0, factors: figures!(0.71 0.8) },
        Band { upto: 50.0, factors: figures!(0.63 0.76) },
        Band { upto: 55.0, factors: figures!(0.55 0.71) },
        Band { upto: 60.0, factors: figures!(0.45 0.65) },
        Band { upto: 65.0, factors: figures!(_ 0.6) },
        Band { upto: 70.0, factors: figures!(_ 0.53) },
        Band { upto: 75.0, factors: figures!(_ 0.46) },
        Band { upto: 80.0, factors: figures!(_ 0.38) },
    ],
    recalled: &[],
};

/// One circuit, or a group of circuits.
///
/// Source: IEC 60364-5-52:2009, Table B.52.17; the column under a ceiling recalled. In a single layer nothing is
/// reduced further beyond nine circuits.
pub(super) static GROUPING: FactorTable = FactorTable {
    id: "iec-b52-17-grouping",
    citation: wiring("Table B.52.17", Seen::Page),
    what: "the group",
    unit: "circuits",
    remedy: "group fewer circuits",
    columns: &[
        factor("bunched", 0.0, "ends at 20 circuits", Seen::Page),
        factor("single layer on wall or floor", 0.0, "", Seen::Page),
        factor("single layer under ceiling", 0.0, "", Seen::Recalled),
        factor("single layer on perforated tray", 0.0, "", Seen::Page),
        factor("single layer on ladder", 0.0, "", Seen::Page),
    ],
    bands: &[
        Band { upto: 1.0, factors: figures!(1.0 1.0 0.95 1.0 1.0) },
        Band { upto: 2.0, factors: figures!(0.8 0.85 0.81 0.88 0.87) },
        Band { upto: 3.0, factors: figures!(0.7 0.79 0.72 0.82 0.82) },
        Band { upto: 4.0, factors: figures!(0.65 0.75 0.68 0.77 0.8) },
        Band { upto: 5.0, factors: figures!(0.6 0.73 0.66 0.75 0.8) },
        Band { upto: 6.0, factors: figures!(0.57 0.72 0.64 0.73 0.79) },
        Band { upto: 7.0, factors: figures!(0.54 0.72 0.63 0.73 0.79) },
        Band { upto: 8.0, factors: figures!(0.52 0.71 0.62 0.72 0.78) },
        Band { upto: 9.0, factors: figures!(0.5 0.7 0.61 0.72 0.78) },
        Band { upto: 12.0, factors: figures!(0.45 _ _ _ _) },
        Band { upto: 16.0, factors: figures!(0.41 _ _ _ _) },
        Band { upto: 20.0, factors: figures!(0.38 _ _ _ _) },
    ],
    recalled: &[],
};

/// Circuits side by side in the ground, touching.
///
/// Source: IEC 60364-5-52:2009, Tables B.52.18 (laid direct) and B.52.19 (single-core cables in single-way
/// ducts), columns without clearance, recalled; more than six circuits are left out.
pub(super) static GROUPING_GROUND: FactorTable = FactorTable {
    id: "iec-b52-18-19-ground",
    citation: wiring("Tables B.52.18 and B.52.19", Seen::Recalled),
    what: "the group in the ground",
    unit: "circuits",
    remedy: "lay fewer circuits together",
    columns: &[
        factor("direct, touching", 0.0, "is held up to 6 circuits", Seen::Recalled),
        factor("ducts, touching", 0.0, "is held up to 6 circuits", Seen::Recalled),
    ],
    bands: &[
        Band { upto: 1.0, factors: figures!(1.0 1.0) },
        Band { upto: 2.0, factors: figures!(0.75 0.8) },
        Band { upto: 3.0, factors: figures!(0.65 0.7) },
        Band { upto: 4.0, factors: figures!(0.6 0.65) },
        Band { upto: 5.0, factors: figures!(0.55 0.6) },
        Band { upto: 6.0, factors: figures!(0.5 0.6) },
    ],
    recalled: &[],
};

const fn factor(name: &'static str, rating: f64, end: &'static str, seen: Seen) -> FactorColumn {
    FactorColumn { name, rating_degC: rating, seen, end }
}
