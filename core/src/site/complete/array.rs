//! Arrays and their controllers: those stated, and those that the energy of the worst month asks for.

use alloc::format;
use alloc::vec::Vec;

use super::{problem, stock};
use crate::site::model::Document;
use crate::site::read::Problem;
use crate::site::system::{Array, BankEntry, Site};

/// Takes over the stated arrays.
pub(super) fn take(document: &Document, site: &mut Site, problems: &mut Vec<Problem>) {
    for stated in &document.arrays {
        let place = || format!("[[array]] \"{}\"", stated.name);
        let Some(module) = stock::module(document, stated) else {
            problems.push(problem(
                stated.line,
                place(),
                "its module is not stated; name one of the stock, or state power, voc, isc, vmp and imp",
            ));
            continue;
        };
        let named = stated.controller.as_ref();
        let controller = match named {
            Some(name) => site.controllers.iter().position(|c| c.name == *name),
            None => (site.controllers.len() == 1).then_some(0),
        };
        let (series, strings) = match (stated.modules, stated.series, stated.strings) {
            (_, Some(series), Some(strings)) => (series, strings),
            (Some(all), Some(series), None) => (series, all / series.max(1)),
            (Some(all), None, Some(strings)) if all % strings == 0 => (all / strings, strings),
            (None, Some(series), None) => (series, 1),
            (None, None, Some(strings)) => (1, strings),
            _ => (1, 1),
        };
        site.arrays.push(Array {
            part: stated.clone(),
            module: module.clone(),
            series,
            strings,
            controller,
            designed: false,
        });
    }
}

/// An array as the source of its own network.
pub(super) fn feed(_site: &Site, _index: usize) -> Option<BankEntry> {
    None
}
