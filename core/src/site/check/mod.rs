//! What the plant is inspected for beside its wiring: loads, arrays, charging, banks, earthing and surroundings.
//!
//! Only where the document describes more than wiring; a datum that is missing is not checked, and the text names the
//! key to state.

mod array;
mod balance;
pub(super) mod bank;
pub(super) mod charge;
mod disconnect;
mod load;
pub(super) mod place;

use alloc::string::String;

use super::energy::Demand;
use super::finding::{Findings, Severity};
use super::plan::Plan;
use super::system::Site;
use crate::citation::Citation;

/// One thing under inspection: where it stands, and where its findings go.
pub(super) struct At<'a> {
    found: &'a mut Findings,
    place: String,
    line: u32,
}

impl<'a> At<'a> {
    pub fn new(found: &'a mut Findings, place: String, line: u32) -> Self {
        Self { found, place, line }
    }

    /// A finding of any severity.
    pub fn tell(
        &mut self,
        severity: Severity,
        (rule, slug): (&'static str, &'static str),
        text: String,
        source: Option<Citation>,
        remedy: &'static str,
    ) {
        self.found.add(severity, rule, slug, self.place.clone(), self.line, text, source, remedy);
    }

    pub fn danger(&mut self, what: (&'static str, &'static str), text: String, remedy: &'static str) {
        self.tell(Severity::Danger, what, text, None, remedy);
    }

    pub fn nonconforming(&mut self, what: (&'static str, &'static str), text: String, remedy: &'static str) {
        self.tell(Severity::Nonconforming, what, text, None, remedy);
    }

    pub fn advice(&mut self, what: (&'static str, &'static str), text: String, remedy: &'static str) {
        self.tell(Severity::Advice, what, text, None, remedy);
    }

    /// A check that lacks a datum: `text` tells what is compared and which key to state.
    pub fn unmade(&mut self, what: (&'static str, &'static str), text: &str) {
        self.tell(Severity::NotChecked, what, alloc::format!("check not made: {text}"), None, "");
    }

    pub fn pass(&mut self, rule: &'static str, text: &str) {
        let place = self.place.clone();
        self.found.pass(rule, &place, text);
    }
}

/// Inspects the plant.
pub(super) fn plant(site: &Site, plan: &Plan, demands: &[Demand], found: &mut Findings) {
    if !site.is_whole {
        return;
    }
    load::loads(site, demands, found);
    load::inverters(site, plan, found);
    load::converters(site, plan, found);
    balance::balance(site, demands, found);
    bank::banks(site, plan, demands, found);
    charge::banks(site, found);
    array::arrays(site, found);
    place::place(site, found);
}
