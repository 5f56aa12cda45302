//! What stands in many places of the JSON: sources, steps of a derivation, sizes, texts.

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::number::{Number, tidy};
use super::shape::object;
use super::words::Seen;
use crate::citation;
use crate::quantity::ConductorSize;
use crate::site::lines;

object! {
    /// Where a value comes from.
    Citation {
        /// Document and edition.
        document: &'static str,
        /// Table, clause or formula in it; empty where there is none.
        place: &'static str,
        /// Whether anybody has seen the page.
        seen: Seen,
    }
}

impl From<&citation::Citation> for Citation {
    fn from(source: &citation::Citation) -> Self {
        let citation::Citation { document, place, seen } = source;
        Self { document, place, seen: seen.into() }
    }
}

object! {
    /// One step of a derivation.
    DerivationStep<'a> {
        /// What it is.
        what: &'a str,
        /// Its value, in `unit`.
        value: Number,
        /// Unit of the value; empty for a ratio or a count.
        unit: &'static str,
        /// Where it comes from; null where from the steps before.
        citation: Option<Citation>,
    }
}

impl<'a> From<&'a lines::Step> for DerivationStep<'a> {
    fn from(step: &'a lines::Step) -> Self {
        let lines::Step { what, value, unit, citation } = step;
        Self { what, value: tidy(*value), unit, citation: citation.as_ref().map(Into::into) }
    }
}

object! {
    /// Something that was not taken.
    Rejected<'a> {
        /// What.
        what: &'a str,
        /// Why.
        why: &'a str,
    }
}

impl<'a> From<&'a lines::Rejected> for Rejected<'a> {
    fn from(rejected: &'a lines::Rejected) -> Self {
        let lines::Rejected { what, why } = rejected;
        Self { what, why }
    }
}

object! {
    /// Size of one conductor.
    Size {
        /// As the trade names it: `16 mm2`, `6 AWG`, `250 kcmil`.
        designation: String,
        /// Nominal area of the metal, mm².
        area_mm2: Number,
    }
}

impl From<&ConductorSize> for Size {
    fn from(size: &ConductorSize) -> Self {
        Self { designation: size.to_string(), area_mm2: tidy(size.area_mm2()) }
    }
}

/// Every entry of a list in its JSON form.
pub(super) fn list<'a, S, D: From<&'a S>>(entries: &'a [S]) -> Vec<D> {
    entries.iter().map(D::from).collect()
}

pub(super) fn texts(lines: &[String]) -> Vec<&str> {
    lines.iter().map(String::as_str).collect()
}

/// Null for line 0, which means that it stands in no file.
pub(super) fn line_of(line: u32) -> Option<u32> {
    (line > 0).then_some(line)
}
