//! Prospective short-circuit current at every node of a tree, and which part comes from which side (R6).
//!
//! Loads are left out; every source counts. One pass up and one pass down: O(n). Whether the greatest or the
//! least current results is decided by what the caller puts in (full, warm, new, cold conductors, no joints; or
//! empty, cold, aged, hot conductors, joints in).

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;

use super::run::at_least;
use super::tree::{Source, positive};
use crate::error::Error;
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance};

/// A node as the fault calculation sees it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FaultNode {
    /// Index of the parent, less than the node's own; for node 0 it is not read.
    pub parent: usize,
    /// Loop resistance of the run to the parent; > 0 except for the root, which has none.
    pub resistance: ElectricalResistance,
    /// Source at the node, its resistance > 0.
    pub source: Option<Source>,
}

/// Prospective currents at a node.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct FaultState {
    /// Into a fault at the node, from all sides.
    pub total: ElectricCurrent,
    /// The part that comes down the run from the parent into a fault at the node.
    pub from_above: ElectricCurrent,
    /// The part that comes from sources at the node and below it: what a device at the run's end must interrupt for
    /// a fault on the run.
    pub from_below: ElectricCurrent,
    /// Into a fault on this run just behind its beginning at the parent, from the parent's side: what a device
    /// there must interrupt.
    pub at_beginning: ElectricCurrent,
    // Norton equivalents: (short-circuit current, conductance) of the side below, seen at the node and at the
    // parent, and of the side above, seen at the parent.
    below: (f64, f64),
    below_at_parent: (f64, f64),
    above_at_parent: (f64, f64),
}

impl FaultState {
    /// The most that a device at the run's beginning must interrupt: a fault on the run fed from the parent's side, or
    /// one on the parent's side fed through the run.
    pub fn duty_at_beginning(&self) -> ElectricCurrent {
        let through = ElectricCurrent::new::<ampere>(self.below_at_parent.0);
        if self.at_beginning >= through { self.at_beginning } else { through }
    }

    /// The most that a device at the run's end must interrupt: a fault on the run fed from the node's side, or one
    /// beyond it fed through the run.
    pub fn duty_at_end(&self) -> ElectricCurrent {
        if self.from_below >= self.from_above { self.from_below } else { self.from_above }
    }

    /// All sources on the parent's side, as one source seen at the run's beginning.
    pub fn source_at_beginning(&self) -> Option<Source> {
        thevenin(self.above_at_parent)
    }

    /// All sources at the node and below it, as one source seen at the run's end.
    pub fn source_at_end(&self) -> Option<Source> {
        thevenin(self.below)
    }
}

/// Thevenin's form of a Norton equivalent; `None` where nothing feeds.
fn thevenin((short, conductance): (f64, f64)) -> Option<Source> {
    (short > 0.0 && conductance > 0.0).then(|| Source {
        emf: ElectricPotential::new::<volt>(short / conductance),
        resistance: ElectricalResistance::new::<ohm>(1.0 / conductance),
    })
}

/// Prospective currents at every node.
///
/// # Errors
/// [`Error::NotATree`], or [`Error::OutOfRange`] for a resistance or source out of range.
///
/// # Source
/// Norton's theorem, folded over the tree. Checked against a dense solution node by node.
///
/// # Example
/// Two 24 V banks of 10 mΩ, joined through 5 mΩ:
/// ```
/// # use ampwright::network::{FaultNode, FaultState, Source, prospective};
/// # use uom::si::{f64::*, electric_current::ampere, electric_potential::volt, electrical_resistance::ohm};
/// let bank = Some(Source {
///     emf: ElectricPotential::new::<volt>(24.0),
///     resistance: ElectricalResistance::new::<ohm>(0.01),
/// });
/// let tree = [
///     FaultNode { parent: 0, resistance: ElectricalResistance::new::<ohm>(0.0), source: bank },
///     FaultNode { parent: 0, resistance: ElectricalResistance::new::<ohm>(0.005), source: bank },
/// ];
/// let mut state = [FaultState::default(); 2];
/// prospective(&tree, &mut state)?;
/// assert!((state[0].total.get::<ampere>() - 4000.0).abs() < 1e-9);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn prospective(tree: &[FaultNode], states: &mut [FaultState]) -> Result<(), Error> {
    check(tree, states)?;
    for (node, state) in tree.iter().zip(states.iter_mut()) {
        *state = FaultState { below: norton(node.source), ..FaultState::default() };
    }
    for index in (1..tree.len()).rev() {
        let Some((node, state)) = tree.get(index).zip(states.get_mut(index)) else { continue };
        let seen = through(state.below, node.resistance.value);
        state.below_at_parent = seen;
        if let Some(parent) = states.get_mut(node.parent) {
            parent.below.0 += seen.0;
            parent.below.1 += seen.1;
        }
    }
    for (index, node) in tree.iter().enumerate() {
        let up = match index {
            0 => (0.0, 0.0),
            // All that feeds the parent, less what this branch itself gives it.
            _ => states.get(node.parent).zip(states.get(index)).map_or((0.0, 0.0), |(parent, own)| {
                let from_top = through_or_none(node_above(tree, states, node.parent));
                // Rounding must not leave a negative source where nothing else feeds.
                (
                    (parent.below.0 - own.below_at_parent.0).max(0.0) + from_top.0,
                    (parent.below.1 - own.below_at_parent.1).max(0.0) + from_top.1,
                )
            }),
        };
        if let Some(state) = states.get_mut(index) {
            state.above_at_parent = up;
            let here = if index == 0 { (0.0, 0.0) } else { through(up, node.resistance.value) };
            state.from_above = ElectricCurrent::new::<ampere>(here.0);
            state.from_below = ElectricCurrent::new::<ampere>(state.below.0);
            state.total = ElectricCurrent::new::<ampere>(here.0 + state.below.0);
            state.at_beginning = ElectricCurrent::new::<ampere>(up.0);
        }
    }
    Ok(())
}

/// What node `index` receives through its own run: the side above seen at the node.
fn node_above(tree: &[FaultNode], states: &[FaultState], index: usize) -> Option<(f64, f64)> {
    if index == 0 {
        return None;
    }
    let (node, state) = tree.get(index).zip(states.get(index))?;
    Some(through(state.above_at_parent, node.resistance.value))
}

fn through_or_none(seen: Option<(f64, f64)>) -> (f64, f64) {
    seen.unwrap_or((0.0, 0.0))
}

/// Norton equivalent of a source.
fn norton(source: Option<Source>) -> (f64, f64) {
    source.map_or((0.0, 0.0), |s| (s.emf.value / s.resistance.value, 1.0 / s.resistance.value))
}

/// A Norton equivalent seen through a series resistance.
fn through((short, conductance): (f64, f64), ohms: f64) -> (f64, f64) {
    let divisor = 1.0 + conductance * ohms;
    (short / divisor, conductance / divisor)
}

fn check(tree: &[FaultNode], states: &[FaultState]) -> Result<(), Error> {
    if tree.is_empty() || tree.len() != states.len() {
        return Err(Error::NotATree {
            what: "the network has no node, or the number of states differs from the number of nodes",
        });
    }
    for (index, node) in tree.iter().enumerate() {
        if index > 0 && node.parent >= index {
            return Err(Error::NotATree {
                what: "a node hangs from itself or from a later node; list every parent before its children",
            });
        }
        at_least("resistance of a run", node.resistance.get::<ohm>(), "ohm", 0.0)?;
        if let Some(source) = node.source {
            positive("source", source.emf.get::<volt>(), "V")?;
            positive("internal resistance", source.resistance.get::<ohm>(), "ohm")?;
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use proptest::prelude::*;
    use std::vec;
    use std::vec::Vec;

    /// Short-circuit current at a node from the full conductance matrix, by Gaussian elimination.
    fn dense(tree: &[FaultNode], at: usize) -> f64 {
        let n = tree.len();
        let mut m = vec![vec![0.0; n + 1]; n];
        for (i, node) in tree.iter().enumerate() {
            if let Some(s) = node.source {
                m[i][i] += 1.0 / s.resistance.value;
                m[i][n] += s.emf.value / s.resistance.value;
            }
            if i > 0 {
                let (p, y) = (node.parent, 1.0 / node.resistance.value);
                m[i][i] += y;
                m[p][p] += y;
                m[i][p] -= y;
                m[p][i] -= y;
            }
        }
        // The fault is a very large conductance to nothing; its current is that conductance times the voltage.
        let fault = 1e12;
        m[at][at] += fault;
        for k in 0..n {
            for row in k + 1..n {
                let f = m[row][k] / m[k][k];
                let pivot_row = m[k].clone();
                for (cell, above) in m[row].iter_mut().zip(pivot_row).skip(k) {
                    *cell -= f * above;
                }
            }
        }
        let mut v = vec![0.0; n];
        for k in (0..n).rev() {
            let sum: f64 = (k + 1..n).map(|c| m[k][c] * v[c]).sum();
            v[k] = (m[k][n] - sum) / m[k][k];
        }
        v[at] * fault
    }

    proptest! {
        #[test]
        fn agrees_with_the_conductance_matrix(
            rows in prop::collection::vec((any::<prop::sample::Index>(), 1e-3..0.05_f64, 0..3_u8), 1..12),
            at in any::<prop::sample::Index>(),
        ) {
            let bank = |ohms| Some(Source {
                emf: ElectricPotential::new::<volt>(25.0),
                resistance: ElectricalResistance::new::<ohm>(ohms),
            });
            let mut tree = vec![FaultNode { parent: 0, resistance: ElectricalResistance::new::<ohm>(0.0), source: bank(0.005) }];
            for (parent, r, source) in &rows {
                tree.push(FaultNode {
                    parent: parent.index(tree.len()),
                    resistance: ElectricalResistance::new::<ohm>(*r),
                    source: if *source == 0 { bank(0.02) } else { None },
                });
            }
            let mut state: Vec<FaultState> = vec![FaultState::default(); tree.len()];
            prospective(&tree, &mut state).unwrap();
            let at = at.index(tree.len());
            approx::assert_relative_eq!(state[at].total.value, dense(&tree, at), max_relative = 1e-6);
            let parts = state[at].from_above.value + state[at].from_below.value;
            approx::assert_relative_eq!(parts, state[at].total.value, max_relative = 1e-12);
        }
    }

    #[test]
    fn a_radial_run_gives_voltage_over_resistance() {
        let tree = [
            FaultNode {
                parent: 0,
                resistance: ElectricalResistance::new::<ohm>(0.0),
                source: Some(Source {
                    emf: ElectricPotential::new::<volt>(24.0),
                    resistance: ElectricalResistance::new::<ohm>(0.006),
                }),
            },
            FaultNode { parent: 0, resistance: ElectricalResistance::new::<ohm>(0.018), source: None },
        ];
        let mut state = [FaultState::default(); 2];
        prospective(&tree, &mut state).unwrap();
        approx::assert_relative_eq!(state[1].total.get::<ampere>(), 1000.0, max_relative = 1e-12);
        approx::assert_relative_eq!(state[1].at_beginning.get::<ampere>(), 4000.0, max_relative = 1e-12);
        approx::assert_relative_eq!(state[1].from_below.get::<ampere>(), 0.0);
    }
}
