//! Prospective currents of the site, greatest and least, at both ends of each circuit (R6).

use alloc::vec;
use alloc::vec::Vec;

use uom::si::electrical_resistance::ohm;

use super::bank::Ends;
use super::flow::{Flows, Loops, Wired};
use super::graph::{Item, Tree};
use super::model::{CircuitEntry, Return};
use super::system::Site;
use crate::cable::{Conductor, least_linear_resistance};
use crate::network::{FaultNode, FaultState, Source, prospective};
use crate::quantity::{ElectricCurrent, ElectricalResistance, Length};

/// Greatest prospective current at a device, as far as it is known.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Fault {
    /// Every bank's is known.
    Known(ElectricCurrent),
    /// At least so much: that of a further bank is not known.
    AtLeast(ElectricCurrent),
}

impl Fault {
    fn of(amps: ElectricCurrent, complete: bool) -> Option<Self> {
        if complete { Some(Self::Known(amps)) } else { (amps.value > 0.0).then_some(Self::AtLeast(amps)) }
    }

    /// The current where it is known, and the part of it that is where it is not.
    pub fn parts(fault: Option<Self>) -> (Option<ElectricCurrent>, Option<ElectricCurrent>) {
        match fault {
            Some(Self::Known(amps)) => (Some(amps), None),
            Some(Self::AtLeast(amps)) => (None, Some(amps)),
            None => (None, None),
        }
    }
}

impl Flows {
    pub fn take_faults(&mut self, tree: &Tree, banks: &[Ends], loops: &Loops) {
        let source = |item: Item, pick: fn(&Ends) -> Option<Source>| match item {
            Item::Bank(i) => banks.get(i).and_then(pick),
            _ => None,
        };
        let unknown = |pick: fn(&Ends) -> Option<Source>| {
            tree.nodes.iter().any(|n| matches!(n.item, Item::Bank(_)) && source(n.item, pick).is_none())
        };
        let run = |pick: fn(&Ends) -> Option<Source>,
                   only: Option<Item>,
                   ohms: &dyn Fn(usize) -> f64|
         -> Option<Vec<FaultState>> {
            let nodes: Vec<FaultNode> = tree
                .nodes
                .iter()
                .map(|n| FaultNode {
                    parent: n.parent,
                    resistance: ElectricalResistance::new::<ohm>(n.circuit.map_or(0.0, ohms)),
                    source: source(n.item, pick).filter(|_| only.is_none_or(|only| only == n.item)),
                })
                .collect();
            let mut states = vec![FaultState::default(); nodes.len()];
            prospective(&nodes, &mut states).ok().map(|()| states)
        };
        // One bank of unknown current makes every greatest sum a lower bound, and the least unknown.
        let complete = !unknown(|e| e.strongest);
        let strongest = run(|e| e.strongest, None, &|c| loops.cold(c));
        // The least current flows with one bank alone, the others disconnected.
        let weakest: Vec<Vec<FaultState>> = tree
            .nodes
            .iter()
            .filter(|n| matches!(n.item, Item::Bank(_)) && !unknown(|e| e.weakest))
            .filter_map(|n| run(|e| e.weakest, Some(n.item), &|c| loops.hot(c)))
            .collect();
        let by_thumb = tree.nodes.iter().any(|n| match n.item {
            Item::Bank(i) => banks.get(i).is_some_and(|e| e.by_thumb),
            _ => false,
        });
        for (index, node) in tree.nodes.iter().enumerate() {
            let Some(flow) = node.circuit.and_then(|c| self.circuits.get_mut(c)) else { continue };
            flow.fault_by_thumb = by_thumb;
            if let Some(state) = strongest.as_ref().and_then(|s| s.get(index)) {
                flow.fault_at_beginning = Fault::of(state.duty_at_beginning(), complete);
                flow.fault_at_end = Fault::of(state.duty_at_end(), complete);
            }
            let weaker = |one: Option<Source>, other: Option<Source>| match (one, other) {
                (Some(a), Some(b)) => Some(if a.emf / a.resistance <= b.emf / b.resistance { a } else { b }),
                (a, b) => a.or(b),
            };
            for state in weakest.iter().filter_map(|s| s.get(index)) {
                flow.weakest_at_beginning = weaker(flow.weakest_at_beginning, state.source_at_beginning());
                flow.weakest_at_end = weaker(flow.weakest_at_end, state.source_at_end());
            }
        }
    }
}

/// The least loop of a circuit: metal at the coldest ambient, full area, joints left out (R6).
pub(super) fn cold_ohms(site: &Site, circuit: &CircuitEntry, (positive, negative, _): &Wired) -> f64 {
    let of = |conductor: &Conductor, length: Length| -> f64 {
        least_linear_resistance(conductor, site.ambient.0).map_or(0.0, |(r, _)| {
            let run: ElectricalResistance = r * length;
            run.get::<ohm>()
        })
    };
    let back = match circuit.way_back {
        Return::Conductor => of(negative, circuit.negative_length),
        Return::Chassis(_) => 0.0,
    };
    of(positive, circuit.positive_length) + back
}
