//! Readings under the same loads belong together: what one of them tells is no longer open for the others.

use alloc::collections::BTreeMap;
use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::meter;
use super::network::{Network, Place, Solved};
use super::span::Span;
use crate::quantity::Figures;
use crate::site::graph::Item;
use crate::site::parts::Reading;

/// A reading's value with its name.
#[derive(Clone, Copy, Debug)]
pub(super) struct Told<'a> {
    pub span: Span,
    pub name: &'a str,
}

/// One tree under one set of loads.
pub(super) struct Conditions<'a> {
    pub on: Vec<&'a str>,
    /// Volts of the bank: as read, or as far as it may go.
    pub source: Span,
    /// With every load as the document states it.
    pub stated: Result<Solved, String>,
    /// With the currents that were read in place of the stated ones.
    pub measured: Result<Solved, String>,
    /// Volts and amperes that were read, by node, and drops, by circuit.
    pub volts: BTreeMap<usize, Told<'a>>,
    pub amps: BTreeMap<usize, Told<'a>>,
    pub drops: BTreeMap<usize, Told<'a>>,
}

impl Conditions<'_> {
    /// Current into a node: read, or solved.
    pub fn current(&self, node: usize) -> Option<Span> {
        if let Some(read) = self.amps.get(&node) {
            return Some(read.span.nought_or_more());
        }
        self.measured.as_ref().ok()?.amps.get(node).copied()
    }

    /// What the prediction rests on.
    pub fn basis(&self, network: &Network<'_>, tree: usize) -> String {
        let name = network.root(tree).map_or("", |r| r.name.as_str());
        match self.volts.get(&0) {
            Some(read) => format!("\"{name}\" as read in \"{}\"", read.name),
            None => format!(
                "\"{name}\" anywhere between {} and {} V: its volts were not read under the same loads",
                Figures(self.source.least),
                Figures(self.source.greatest)
            ),
        }
    }
}

/// The names of the loads that ran, in order.
pub(super) fn loads(reading: &Reading) -> Vec<&str> {
    let mut on: Vec<&str> = reading.on.iter().map(String::as_str).collect();
    on.sort_unstable();
    on.dedup();
    on
}

/// By loads and tree.
pub(super) type Groups<'a> = BTreeMap<(Vec<&'a str>, usize), Conditions<'a>>;

/// The readings of a group with their places.
type Members<'a> = Vec<(&'a Reading, Place)>;

/// Sorts the readings into groups, and solves each.
pub(super) fn groups<'a>(network: &Network<'_>, readings: &'a [Reading]) -> Groups<'a> {
    let mut members: BTreeMap<(Vec<&str>, usize), Members<'_>> = BTreeMap::new();
    for reading in readings {
        if let Some(place) = network.place(&reading.at) {
            members.entry((loads(reading), place.tree)).or_default().push((reading, place));
        }
    }
    members.into_iter().map(|(key, members)| (key.clone(), conditions(network, key, &members))).collect()
}

fn conditions<'a>(
    network: &Network<'_>,
    (on, tree): (Vec<&'a str>, usize),
    members: &[(&'a Reading, Place)],
) -> Conditions<'a> {
    let (mut volts, mut amps, mut drops) = (BTreeMap::new(), BTreeMap::new(), BTreeMap::new());
    let mut currents: BTreeMap<Item, Span> = BTreeMap::new();
    for &(reading, place) in members {
        let told = |meter: meter::Meter| Told { span: meter.span, name: reading.name.as_str() };
        if let Some(read) = meter::volts(reading) {
            volts.entry(place.node).or_insert_with(|| told(read));
        }
        if let (Some(read), Some(circuit)) = (meter::drop(reading), place.circuit) {
            drops.entry(circuit).or_insert_with(|| told(read));
        }
        if let Some(read) = meter::amps(reading) {
            if let Some(item @ (Item::Load(_) | Item::Inverter(_) | Item::ConverterInput(_))) =
                network.item(place)
            {
                currents.entry(item).or_insert_with(|| read.span.nought_or_more());
            }
            amps.entry(place.node).or_insert_with(|| told(read));
        }
    }
    let unread = network.source(tree).unwrap_or(Span::NOTHING);
    let source = volts.get(&0).map_or(unread, |t: &Told<'_>| t.span);
    let read: BTreeMap<usize, Span> = volts.iter().map(|(&node, told)| (node, told.span)).collect();
    Conditions {
        stated: network.solve(tree, &on, source, &BTreeMap::new(), &BTreeMap::new()),
        measured: network.solve(tree, &on, source, &currents, &read),
        on,
        source,
        volts,
        amps,
        drops,
    }
}
