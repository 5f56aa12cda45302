//! Sizes that can be bought.

use crate::error::Error;
use crate::quantity::ConductorSize;

/// A size in a constant table. Only constants call it, so a size out of range fails the build, never a run.
#[allow(clippy::panic)]
const fn fixed(size: Result<ConductorSize, Error>) -> ConductorSize {
    match size {
        Ok(size) => size,
        Err(_) => panic!("size out of range in a constant table"),
    }
}

/// Nominal cross-section of a constant table.
pub(crate) const fn mm2(size: f64) -> ConductorSize {
    fixed(ConductorSize::mm2(size))
}

/// Gauge number of a constant table: 0 is 1/0, −1 is 2/0, −2 is 3/0, −3 is 4/0.
pub(crate) const fn awg(number: i8) -> ConductorSize {
    fixed(ConductorSize::awg(number))
}

/// Thousands of circular mils of a constant table.
pub(crate) const fn kcmil(size: u16) -> ConductorSize {
    fixed(ConductorSize::kcmil(size))
}

/// AWG and kcmil sizes in trade, smallest first.
///
/// Source: the sizes of NFPA 70-2023, Chapter 9, Table 8 from 18 AWG to 1000 kcmil; those above 500 kcmil recalled.
pub const AWG_SERIES: [ConductorSize; 26] = [
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
];

/// Metric sizes in trade, smallest first.
///
/// Source: nominal cross-sections of IEC 60228:2004, Tables 2 and 3, from 0.5 to 400 mm².
pub const METRIC_SERIES: [ConductorSize; 20] = [
    mm2(0.5),
    mm2(0.75),
    mm2(1.0),
    mm2(1.5),
    mm2(2.5),
    mm2(4.0),
    mm2(6.0),
    mm2(10.0),
    mm2(16.0),
    mm2(25.0),
    mm2(35.0),
    mm2(50.0),
    mm2(70.0),
    mm2(95.0),
    mm2(120.0),
    mm2(150.0),
    mm2(185.0),
    mm2(240.0),
    mm2(300.0),
    mm2(400.0),
];

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_series_ascend() {
        for series in [&AWG_SERIES[..], &METRIC_SERIES[..]] {
            assert!(series.is_sorted_by(|a, b| a.area_mm2() < b.area_mm2()));
        }
    }
}
