//! Banks: those stated, with what their batteries tell.

use alloc::format;

use super::{problem, stock};
use crate::site::model::Document;
use crate::site::parts::BankPart;
use crate::site::read::Problem;
use crate::site::system::{BankEntry, FeedKind, Site};

/// A bank as stated.
pub(super) fn stated(document: &Document, _site: &Site, stated: &BankPart) -> Result<BankEntry, Problem> {
    let place = || format!("[[bank]] \"{}\"", stated.name);
    let missing = |text: &str| problem(stated.line, place(), text);
    let part = stated.clone();
    let _ = stock::battery(document, &part);
    let chemistry = part.chemistry.ok_or_else(|| missing("key 'chemistry' is missing"))?;
    let nominal = part.nominal.ok_or_else(|| missing("key 'nominal' is missing"))?;
    Ok(BankEntry {
        name: part.name.clone(),
        line: part.line,
        kind: FeedKind::Battery(chemistry),
        series: 1,
        cells: 0,
        limit: None,
        charged_cold: None,
        nominal,
        capacity: part.capacity.ok_or_else(|| missing("key 'capacity' is missing"))?,
        strings: part.strings.unwrap_or(1),
        cut_off: part.cut_off.ok_or_else(|| missing("key 'cut_off' is missing"))?,
        highest: part.highest.ok_or_else(|| missing("key 'highest' is missing"))?,
        short_circuit: part.short_circuit,
        internal_resistance: part.internal_resistance,
        greatest_discharge: part.greatest_discharge,
        stud: part.stud,
        part: Some(part),
    })
}
