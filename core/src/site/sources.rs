//! What sources drive through the circuits: chargers towards their bank, arrays towards their controller (R7, R10, R11).
//!
//! They limit themselves: what they can give is their design current, and no fuse is operated by it.

use alloc::collections::BTreeMap;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;

use super::flow::Flows;
use super::graph::{Item, Tree};
use super::parts::Sense;
use super::system::{BankEntry, FeedKind, Site};
use crate::rules::LoadUse;

/// Sums of what hangs at or below each node.
fn below(tree: &Tree, own: impl Fn(Item) -> f64) -> Vec<f64> {
    let mut sums: Vec<f64> = tree.nodes.iter().map(|node| own(node.item)).collect();
    for (index, node) in tree.nodes.iter().enumerate().skip(1).rev() {
        let amps = sums.get(index).copied().unwrap_or(0.0);
        if let Some(parent) = sums.get_mut(node.parent) {
            *parent += amps;
        }
    }
    sums
}

/// The nodes whose circuits lie between a node and another: up from the first, and down to the second.
fn between(tree: &Tree, first: usize, second: usize) -> Vec<usize> {
    let up = |mut node: usize| {
        let mut path = Vec::new();
        while node != 0 {
            path.push(node);
            node = tree.nodes.get(node).map_or(0, |n| n.parent);
        }
        path
    };
    let (mut one, mut other) = (up(first), up(second));
    // What both have in common lies above where they meet.
    while !one.is_empty() && one.last() == other.last() {
        one.pop();
        other.pop();
    }
    one.append(&mut other);
    one
}

impl Flows {
    /// Chargers: each fills its own circuit, and all together what lies between them and the bank.
    pub fn take_chargers(&mut self, site: &Site, tree: &Tree) {
        let limit = |item: Item| match item {
            Item::Charger(i) => site.chargers.get(i).and_then(|c| c.limit).map_or(0.0, |a| a.get::<ampere>()),
            _ => 0.0,
        };
        if !tree.nodes.iter().any(|node| matches!(node.item, Item::Charger(_))) {
            return;
        }
        // Each fills its own bank, where that stands in this network, and may fill the one at the root as well.
        let places: BTreeMap<Item, usize> =
            tree.nodes.iter().enumerate().map(|(index, node)| (node.item, index)).collect();
        let way = |index: usize, charger: usize| {
            let own = site.chargers.get(charger).and_then(|c| c.bank);
            let bank = own.and_then(|bank| places.get(&Item::Bank(bank))).copied().unwrap_or(0);
            between(tree, index, bank)
        };
        let chargers = || {
            tree.nodes.iter().enumerate().filter_map(|(index, node)| match node.item {
                Item::Charger(charger) => Some((index, charger)),
                _ => None,
            })
        };
        let mut charge = vec![0.0; tree.nodes.len()];
        let is_bank = |item: Item| matches!(item, Item::Bank(i) if site.banks.get(i).is_some_and(BankEntry::is_battery));
        for (index, charger) in chargers() {
            let mut ways = way(index, charger);
            // A bank on the way takes what comes: beyond it flows what the document states of the link.
            let mut up = index;
            while let Some(node) = tree.nodes.get(up).filter(|node| up != 0 && !is_bank(node.item)) {
                ways.push(up);
                up = node.parent;
            }
            ways.sort_unstable();
            ways.dedup();
            for node in ways {
                if let Some(sum) = charge.get_mut(node) {
                    *sum += limit(Item::Charger(charger));
                }
            }
        }
        let ohms: Vec<f64> = tree
            .nodes
            .iter()
            .map(|node| node.circuit.and_then(|c| self.circuits.get(c)).map_or(0.0, |flow| flow.ohms))
            .collect();
        // Volts lost on the way to its bank, behind its own circuit, while every source gives all it may.
        let lost = |index: usize, charger: usize| -> f64 {
            let way = way(index, charger);
            let each = |node: usize| {
                charge.get(node).copied().unwrap_or(0.0) * ohms.get(node).copied().unwrap_or(0.0)
            };
            way.into_iter().filter(|node| *node != index).map(each).sum()
        };
        for (index, node) in tree.nodes.iter().enumerate().skip(1) {
            let Some(flow) = node.circuit.and_then(|c| self.circuits.get_mut(c)) else { continue };
            let amps = charge.get(index).copied().unwrap_or(0.0);
            let Item::Charger(charger) = node.item else {
                if amps > flow.current {
                    // By the sources, and no more by the loads.
                    let loads = flow.low_current.unwrap_or(flow.current);
                    flow.low_current = Some(loads);
                    // A start flows the other way: it counts as far as it outgrows what the sources drive.
                    flow.start = flow.start.map(|start| (loads + start - amps).max(0.0));
                    flow.current = amps;
                    flow.continuous_share = 1.0;
                    flow.charged = true;
                }
                continue;
            };
            flow.current = amps;
            flow.low_current = None;
            flow.single = amps;
            flow.continuous_share = 1.0;
            flow.start = None;
            flow.started = None;
            flow.least_voltage = None;
            flow.beginning = flow.highest;
            flow.drop_before = lost(index, charger).min(0.5 * flow.highest);
            flow.charged = true;
            let sensed = site.chargers.get(charger).and_then(|c| c.charging.sense) == Some(Sense::Bank);
            flow.usage = if sensed { LoadUse::Other } else { LoadUse::Charging };
        }
    }

    /// Arrays and converters: the conductors that leave them carry all that they can give.
    pub fn take_limits(&mut self, site: &Site, tree: &Tree) {
        let Some(Item::Bank(root)) = tree.nodes.first().map(|n| n.item) else { return };
        match site.banks.get(root).map(|feed| feed.kind) {
            Some(FeedKind::Array(_)) => self.take_array(site, tree),
            Some(FeedKind::Converter(_)) => {
                let limit = site.banks.get(root).and_then(|f| f.limit).map_or(0.0, |a| a.get::<ampere>());
                for node in tree.nodes.iter().skip(1) {
                    let Some(flow) = node.circuit.and_then(|c| self.circuits.get_mut(c)) else { continue };
                    // No more than that flows into any fault behind it.
                    flow.limit = Some(limit);
                    if node.parent == 0 && limit > flow.current {
                        flow.low_current = Some(flow.low_current.unwrap_or(flow.current));
                        flow.current = limit;
                    }
                }
            }
            _ => {}
        }
    }

    fn take_array(&mut self, site: &Site, tree: &Tree) {
        let feed = |item: Item| match item {
            Item::Bank(i) => site.banks.get(i),
            _ => None,
        };
        let most = below(tree, |item| feed(item).and_then(|f| f.limit).map_or(0.0, |a| a.get::<ampere>()));
        let usual = below(tree, |item| {
            feed(item).and_then(|f| f.greatest_discharge).map_or(0.0, |a| a.get::<ampere>())
        });
        let inputs = below(tree, |item| if matches!(item, Item::ControllerInput(_)) { 1.0 } else { 0.0 });
        let (all, all_usual) = (most.first().copied().unwrap_or(0.0), usual.first().copied().unwrap_or(0.0));
        for (index, node) in tree.nodes.iter().enumerate().skip(1) {
            let Some(flow) = node.circuit.and_then(|c| self.circuits.get_mut(c)) else { continue };
            let at = |list: &[f64]| list.get(index).copied().unwrap_or(0.0);
            // Towards the controller, from whichever side the arrays stand.
            let (amps, running) = if at(&inputs) > 0.0 {
                (all - at(&most), all_usual - at(&usual))
            } else {
                (at(&most), at(&usual))
            };
            flow.current = amps;
            flow.low_current = Some(running);
            flow.continuous_share = 1.0;
            flow.limit = Some(amps);
            flow.usage = LoadUse::Other;
            flow.drop_before = 0.0;
            let feed = tree.nodes.first().and_then(|n| feed(n.item));
            if let Some(feed) = feed {
                flow.beginning = feed.cut_off.get::<volt>();
            }
        }
    }
}
