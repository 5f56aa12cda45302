//! Inverters: those stated, and the one that AC loads need where there is none (R16).

use alloc::format;
use alloc::vec::Vec;

use super::{problem, stock};
use crate::site::model::Document;
use crate::site::read::Problem;
use crate::site::system::{InverterEntry, Site};

/// Takes over the stated inverters.
pub(super) fn take(document: &Document, site: &mut Site, problems: &mut Vec<Problem>) {
    for stated in &document.inverters {
        let part = stock::inverter(document, stated);
        let (Some(power), Some(efficiency)) = (part.power, part.efficiency) else {
            problems.push(problem(
                part.line,
                format!("[[inverter]] \"{}\"", part.name),
                "power or efficiency is missing; state both, or name a model of the stock",
            ));
            continue;
        };
        site.inverters.push(InverterEntry {
            name: part.name.clone(),
            line: part.line,
            power,
            surge: part.surge,
            efficiency,
            idle: part.idle,
            least: part.least,
            greatest: part.greatest,
            stud: part.stud,
            terminal: part.terminal,
            part,
            designed: false,
        });
    }
}
