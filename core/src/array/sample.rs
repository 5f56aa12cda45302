//! A module and a question that the tests of this room share; invented.

use super::{
    Cited, InputLimits, KeyPoints, Module, ModuleSheet, PvFactors, Regulation, StringDevice, StringQuestion,
};
use crate::citation::{Citation, Seen};
use crate::quantity::{Textual, parse};

pub(super) const SOURCE: Citation = Citation::new("a rule", "of the test", Seen::Stated);

pub(super) fn q<Q: Textual>(text: &str) -> Q {
    parse(text).unwrap_or_else(|e| panic!("{e}"))
}

/// 100 W of 36 cells, every figure stated.
pub(super) fn sheet() -> ModuleSheet {
    let points = KeyPoints { voc: q("22.5 V"), isc: q("6.1 A"), vmp: q("18.6 V"), imp: q("5.38 A") };
    ModuleSheet {
        voc_coefficient: Some(q("-0.3 %/K")),
        isc_coefficient: Some(q("0.05 %/K")),
        power_coefficient: Some(q("-0.4 %/K")),
        noct: Some(q("45 degC")),
        series_fuse: Some(q("15 A")),
        system_voltage: Some(q("600 V")),
        cells: Some(36),
        ..ModuleSheet::plain(q("100 W"), points)
    }
}

pub(super) fn module() -> Module {
    Module::new(sheet()).unwrap()
}

pub(super) const fn cited(value: f64) -> Cited {
    Cited { value, citation: SOURCE }
}

/// Tracked, 100 V, onto a bank of 12 V; everything stated.
pub(super) fn question(module: &Module) -> StringQuestion<'_> {
    StringQuestion {
        module,
        input: InputLimits {
            regulation: Regulation::Tracking,
            greatest_voltage: Some(q("100 V")),
            window_low: None,
            window_high: None,
            start_margin: Some(q("5 V")),
            short_circuit_current: Some(q("35 A")),
            input_current: None,
            output_current: Some(q("30 A")),
        },
        coldest: q("-20 degC"),
        hottest_cell: q("70 degC"),
        cold_factor: None,
        bank_nominal: q("12 V"),
        bank_highest: q("15.6 V"),
        drop: q("2 %"),
        ageing: q("0"),
        factors: PvFactors {
            irradiance: cited(1.25),
            continuous: cited(1.25),
            device_least: Some(cited(1.5625)),
            device_most: None,
            greatest_voltage: Some(cited(600.0)),
        },
        device: StringDevice::ToChoose,
        ampacity: None,
        back_feed: Some(q("0 A")),
        parts: &[],
    }
}
