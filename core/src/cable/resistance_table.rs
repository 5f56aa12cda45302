//! Printed resistances: IEC 60228 by class, NFPA 70 Chapter 9 Table 8.

use super::Coating;
use super::series::{awg, kcmil, mm2};
use crate::citation::{Citation, Seen};
use crate::quantity::ConductorSize;

/// One size: resistance per length, plain and metal-coated, in the table's unit; `None` where nothing is printed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ResistanceRow {
    /// Size as printed.
    pub size: ConductorSize,
    /// Plain (uncoated) copper.
    pub plain: Option<f64>,
    /// Tinned or otherwise metal-coated copper.
    pub coated: Option<f64>,
}

/// A printed table of DC resistances of copper conductors.
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct ResistanceTable {
    /// Name in `tests/reference/conductors.toml`.
    pub id: &'static str,
    /// Standard, edition, table.
    pub citation: Citation,
    /// Conductor temperature of the printed figures, °C.
    pub temperature_degC: f64,
    /// Printed unit in ohms per metre.
    pub unit_ohm_per_m: f64,
    /// Rows, smallest size first.
    pub rows: &'static [ResistanceRow],
    /// Cells that nobody has seen on a page: filled in from memory.
    pub recalled: &'static [(ConductorSize, Coating)],
}

impl ResistanceTable {
    /// The printed figure of a size, in the table's unit, with its citation.
    pub fn cell(&self, size: ConductorSize, coating: Coating) -> Option<(f64, Citation)> {
        let row = self.rows.iter().find(|row| row.size == size)?;
        let printed = match coating {
            Coating::Plain => row.plain,
            Coating::Tinned => row.coated,
        }?;
        let seen = !self.recalled.contains(&(size, coating));
        Some((printed, if seen { self.citation } else { self.citation.recalled() }))
    }
}

const fn row(size: ConductorSize, plain: f64, coated: f64) -> ResistanceRow {
    ResistanceRow { size, plain: Some(plain), coated: Some(coated) }
}

const OHM_PER_KM: f64 = 1e-3;
/// 1000 ft are exactly 304.8 m.
const OHM_PER_KFT: f64 = 1.0 / 304.8;

/// Largest DC resistance at 20 °C of solid copper conductors, class 1.
///
/// Source: IEC 60228:2004, Table 1. Plain column read on a page, coated column recalled.
/// Equal to `iec-60228-class-1` in `tests/reference/conductors.toml` (tested there).
pub const CLASS_1: ResistanceTable = ResistanceTable {
    id: "iec-60228-class-1",
    citation: Citation::new("IEC 60228:2004", "Table 1", Seen::Page),
    temperature_degC: 20.0,
    unit_ohm_per_m: OHM_PER_KM,
    rows: &[
        //  mm²        Ω/km plain  coated
        row(mm2(0.5), 36.0, 36.7),
        row(mm2(0.75), 24.5, 24.8),
        row(mm2(1.0), 18.1, 18.2),
        row(mm2(1.5), 12.1, 12.2),
        row(mm2(2.5), 7.41, 7.56),
        row(mm2(4.0), 4.61, 4.70),
        row(mm2(6.0), 3.08, 3.11),
        row(mm2(10.0), 1.83, 1.84),
        row(mm2(16.0), 1.15, 1.16),
    ],
    recalled: &[
        (mm2(0.5), Coating::Tinned),
        (mm2(0.75), Coating::Tinned),
        (mm2(1.0), Coating::Tinned),
        (mm2(1.5), Coating::Tinned),
        (mm2(2.5), Coating::Tinned),
        (mm2(4.0), Coating::Tinned),
        (mm2(6.0), Coating::Tinned),
        (mm2(10.0), Coating::Tinned),
        (mm2(16.0), Coating::Tinned),
    ],
};

/// Largest DC resistance at 20 °C of stranded copper conductors, class 2.
///
/// Source: IEC 60228:2004, Table 2. Page seen but for 70 mm² plain. At 50 mm² it is above class 5, as published.
/// Equal to `iec-60228-class-2` in `tests/reference/conductors.toml` (tested there).
pub const CLASS_2: ResistanceTable = ResistanceTable {
    id: "iec-60228-class-2",
    citation: Citation::new("IEC 60228:2004", "Table 2", Seen::Page),
    temperature_degC: 20.0,
    unit_ohm_per_m: OHM_PER_KM,
    rows: &[
        //  mm²        Ω/km plain  coated
        row(mm2(0.5), 36.0, 36.7),
        row(mm2(0.75), 24.5, 24.8),
        row(mm2(1.0), 18.1, 18.2),
        row(mm2(1.5), 12.1, 12.2),
        row(mm2(2.5), 7.41, 7.56),
        row(mm2(4.0), 4.61, 4.70),
        row(mm2(6.0), 3.08, 3.11),
        row(mm2(10.0), 1.83, 1.84),
        row(mm2(16.0), 1.15, 1.16),
        row(mm2(25.0), 0.727, 0.734),
        row(mm2(35.0), 0.524, 0.529),
        row(mm2(50.0), 0.387, 0.391),
        row(mm2(70.0), 0.268, 0.270),
        row(mm2(95.0), 0.193, 0.195),
        row(mm2(120.0), 0.153, 0.154),
        row(mm2(150.0), 0.124, 0.126),
        row(mm2(185.0), 0.0991, 0.100),
        row(mm2(240.0), 0.0754, 0.0762),
        row(mm2(300.0), 0.0601, 0.0607),
        row(mm2(400.0), 0.0470, 0.0475),
    ],
    recalled: &[(mm2(70.0), Coating::Plain)],
};

/// Largest DC resistance at 20 °C of flexible copper conductors, class 5.
///
/// Source: IEC 60228:2004, Table 3. Page seen but for 35 mm² plain, 0.5 and 0.75 mm² coated.
/// Equal to `iec-60228-class-5` in `tests/reference/conductors.toml` (tested there).
pub const CLASS_5: ResistanceTable = ResistanceTable {
    id: "iec-60228-class-5",
    citation: Citation::new("IEC 60228:2004", "Table 3", Seen::Page),
    temperature_degC: 20.0,
    unit_ohm_per_m: OHM_PER_KM,
    rows: CLASS_5_ROWS,
    recalled: &[(mm2(0.5), Coating::Tinned), (mm2(0.75), Coating::Tinned), (mm2(35.0), Coating::Plain)],
};

const CLASS_5_ROWS: &[ResistanceRow] = &[
    //  mm²        Ω/km plain  coated
    row(mm2(0.5), 39.0, 40.1),
    row(mm2(0.75), 26.0, 26.7),
    row(mm2(1.0), 19.5, 20.0),
    row(mm2(1.5), 13.3, 13.7),
    row(mm2(2.5), 7.98, 8.21),
    row(mm2(4.0), 4.95, 5.09),
    row(mm2(6.0), 3.30, 3.39),
    row(mm2(10.0), 1.91, 1.95),
    row(mm2(16.0), 1.21, 1.24),
    row(mm2(25.0), 0.780, 0.795),
    row(mm2(35.0), 0.554, 0.565),
    row(mm2(50.0), 0.386, 0.393),
    row(mm2(70.0), 0.272, 0.277),
    row(mm2(95.0), 0.206, 0.210),
    row(mm2(120.0), 0.161, 0.164),
    row(mm2(150.0), 0.129, 0.132),
    row(mm2(185.0), 0.106, 0.108),
    row(mm2(240.0), 0.0801, 0.0817),
    row(mm2(300.0), 0.0641, 0.0654),
    row(mm2(400.0), 0.0486, 0.0495),
];

/// Largest DC resistance at 20 °C of extra flexible copper conductors, class 6.
///
/// Source: IEC 60228:2004, Table 4, recalled as a whole: its maxima are those of class 5, and it ends at
/// 300 mm²; the 400 mm² row is the class 5 figure.
pub const CLASS_6: ResistanceTable = ResistanceTable {
    id: "iec-60228-class-6",
    citation: Citation::new("IEC 60228:2004", "Table 4, as Table 3", Seen::Recalled),
    rows: CLASS_5_ROWS,
    recalled: &[],
    ..CLASS_5
};

const TABLE_8: Citation = Citation::new("NFPA 70-2023", "Chapter 9, Table 8", Seen::Page);

/// DC resistance at 75 °C of solid copper conductors, ohms per 1000 ft.
///
/// Source: NFPA 70-2023, Chapter 9, Table 8. Uncoated column read on a page, coated column recalled.
/// Equal to `nec-ch9-table-8-solid` in `tests/reference/conductors.toml` (tested there).
pub const TABLE_8_SOLID: ResistanceTable = ResistanceTable {
    id: "nec-ch9-table-8-solid",
    citation: TABLE_8,
    temperature_degC: 75.0,
    unit_ohm_per_m: OHM_PER_KFT,
    rows: &[
        //  size       Ω/kft uncoated  coated
        row(awg(18), 7.77, 8.08),
        row(awg(16), 4.89, 5.08),
        row(awg(14), 3.07, 3.19),
        row(awg(12), 1.93, 2.01),
        row(awg(10), 1.21, 1.26),
        row(awg(8), 0.764, 0.786),
    ],
    recalled: &[
        (awg(18), Coating::Tinned),
        (awg(16), Coating::Tinned),
        (awg(14), Coating::Tinned),
        (awg(12), Coating::Tinned),
        (awg(10), Coating::Tinned),
        (awg(8), Coating::Tinned),
    ],
};

/// DC resistance at 75 °C of stranded copper conductors, ohms per 1000 ft.
///
/// Source: NFPA 70-2023, Chapter 9, Table 8. Uncoated column read on a page up to 500 kcmil but for 2 AWG;
/// the rest recalled. The per-1000-ft column is held because it is the one that was seen.
/// Equal to `nec-ch9-table-8-stranded` in `tests/reference/conductors.toml` (tested there).
#[allow(clippy::approx_constant)] // 3.14 Ω/kft is 14 AWG as printed, not π
pub const TABLE_8_STRANDED: ResistanceTable = ResistanceTable {
    id: "nec-ch9-table-8-stranded",
    citation: TABLE_8,
    temperature_degC: 75.0,
    unit_ohm_per_m: OHM_PER_KFT,
    rows: &[
        //  size       Ω/kft uncoated  coated
        row(awg(18), 7.95, 8.45),
        row(awg(16), 4.99, 5.29),
        row(awg(14), 3.14, 3.26),
        row(awg(12), 1.98, 2.05),
        row(awg(10), 1.24, 1.29),
        row(awg(8), 0.778, 0.809),
        row(awg(6), 0.491, 0.510),
        row(awg(4), 0.308, 0.321),
        row(awg(3), 0.245, 0.254),
        row(awg(2), 0.194, 0.201),
        row(awg(1), 0.154, 0.160),
        row(awg(0), 0.122, 0.127),
        row(awg(-1), 0.0967, 0.101),
        row(awg(-2), 0.0766, 0.0797),
        row(awg(-3), 0.0608, 0.0626),
        row(kcmil(250), 0.0515, 0.0535),
        row(kcmil(300), 0.0429, 0.0446),
        row(kcmil(350), 0.0367, 0.0382),
        row(kcmil(400), 0.0321, 0.0331),
        row(kcmil(500), 0.0258, 0.0265),
        row(kcmil(600), 0.0214, 0.0223),
        row(kcmil(700), 0.0184, 0.0189),
        row(kcmil(750), 0.0171, 0.0176),
        row(kcmil(800), 0.0161, 0.0166),
        row(kcmil(900), 0.0143, 0.0147),
        row(kcmil(1000), 0.0129, 0.0132),
    ],
    recalled: &[
        (awg(2), Coating::Plain),
        (kcmil(600), Coating::Plain),
        (kcmil(700), Coating::Plain),
        (kcmil(750), Coating::Plain),
        (kcmil(800), Coating::Plain),
        (kcmil(900), Coating::Plain),
        (kcmil(1000), Coating::Plain),
        (awg(18), Coating::Tinned),
        (awg(16), Coating::Tinned),
        (awg(14), Coating::Tinned),
        (awg(12), Coating::Tinned),
        (awg(10), Coating::Tinned),
        (awg(8), Coating::Tinned),
        (awg(6), Coating::Tinned),
        (awg(4), Coating::Tinned),
        (awg(3), Coating::Tinned),
        (awg(2), Coating::Tinned),
        (awg(1), Coating::Tinned),
        (awg(0), Coating::Tinned),
        (awg(-1), Coating::Tinned),
        (awg(-2), Coating::Tinned),
        (awg(-3), Coating::Tinned),
        (kcmil(250), Coating::Tinned),
        (kcmil(300), Coating::Tinned),
        (kcmil(350), Coating::Tinned),
        (kcmil(400), Coating::Tinned),
        (kcmil(500), Coating::Tinned),
        (kcmil(600), Coating::Tinned),
        (kcmil(700), Coating::Tinned),
        (kcmil(750), Coating::Tinned),
        (kcmil(800), Coating::Tinned),
        (kcmil(900), Coating::Tinned),
        (kcmil(1000), Coating::Tinned),
    ],
};
