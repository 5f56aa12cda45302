//! Report and comparison as JSON for other programs: own objects, so that a changed type here changes no key there.
//!
//! The guide page `report` says what may change; `core/schema` holds the JSON Schema, made from the same declarations.

mod commissioning;
mod common;
mod comparison;
mod judgement;
mod number;
mod plant;
mod reading;
mod report;
mod run;
#[cfg(test)]
mod schema;
mod shape;
mod sheet;
#[cfg(test)]
mod tests;
mod wiring;
mod words;

use alloc::string::String;

use serde::Serialize;

use super::compare::Comparison;
use super::report::Report;

impl Report {
    /// The report as JSON of the form `ampwright.report/1`: keys in a fixed order, with the unit as their last part, null
    /// for what is not known, no time and no path. Ends with a line break. What may change within the form stands in the
    /// guide, `guide::report`.
    ///
    /// # Example
    /// ```
    /// use ampwright::site::{inspect, read};
    /// let site = read(include_str!("../../../examples/sites/heron_point.toml")).map_err(|p| p.to_string())?;
    /// let json = inspect(&site).map_err(|p| p.to_string())?.to_json();
    /// assert!(json.starts_with("{\n \"schema\": \"ampwright.report/1\",\n"));
    /// # Ok::<(), String>(())
    /// ```
    pub fn to_json(&self) -> String {
        text(&report::Report::from(self))
    }
}

impl Comparison {
    /// What changed as JSON of the form `ampwright.comparison/1`; see [`Report::to_json`].
    ///
    /// # Example
    /// ```
    /// use ampwright::site::Comparison;
    /// assert!(Comparison::default().to_json().contains("\"change_count\": 0,"));
    /// ```
    pub fn to_json(&self) -> String {
        text(&comparison::Comparison::from(self))
    }
}

/// The text of an object, indented by one space.
fn text(object: &impl Serialize) -> String {
    let mut bytes = alloc::vec::Vec::new();
    let form = serde_json::ser::PrettyFormatter::with_indent(b" ");
    // Texts as keys, written to memory: neither can fail, and what is written is UTF-8.
    let _ = object.serialize(&mut serde_json::Serializer::with_formatter(&mut bytes, form));
    bytes.push(b'\n');
    String::from_utf8(bytes).unwrap_or_default()
}
