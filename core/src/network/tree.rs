//! Voltages and currents of a tree with constant-power, constant-current and resistive loads (R1, R3).
//!
//! A subtree seen from its top draws `a + g·V`. Through a run of resistance R that becomes
//! `(a + g·V)/(1 + g·R)`: one pass up folds the tree, one pass down unfolds the voltages, exact and O(n).
//!
//! A constant-power load is linearised at the last voltage (Newton) and draws `2P/V₀ − (P/V₀²)·V`: a negative
//! conductance. Started from the voltages without those loads, which bound the solution from above, each step
//! lowers the voltages until they settle on the higher, stable solution: the equations are convex, and their
//! matrix stays an M-matrix as long as every pivot `1 + g·R` is positive (Ortega and Rheinboldt, Iterative
//! Solution of Nonlinear Equations in Several Variables, 13.3, monotone Newton; recalled). A pivot that is not
//! positive, or a voltage that falls to zero, is the proof that no solution exists.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::power::watt;

use super::run::at_least;
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Power};

/// A source: electromotive force behind a resistance.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Source {
    /// Open-circuit voltage, > 0.
    pub emf: ElectricPotential,
    /// Internal resistance; 0 only for the root's source.
    pub resistance: ElectricalResistance,
}

/// What hangs at a node, by its dependence on voltage.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct NodeLoad {
    /// Sum of constant-power loads, ≥ 0.
    pub power: Power,
    /// Sum of constant-current loads; negative where current is fed in.
    pub current: ElectricCurrent,
    /// Resistive loads: their power at `reference`.
    pub resistive: Power,
    /// Voltage at which `resistive` is stated; unused where that is 0.
    pub reference: ElectricPotential,
}

/// A node and the run it hangs by.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TreeNode {
    /// Index of the parent, less than the node's own; for node 0, the root, it is not read.
    pub parent: usize,
    /// Loop resistance of the run to the parent, both conductors and joints; for the root 0.
    pub resistance: ElectricalResistance,
    /// Loads at the node.
    pub load: NodeLoad,
    /// A further source at the node.
    pub source: Option<Source>,
}

/// State of a node: its voltage, and the current of the run it hangs by.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct NodeState {
    /// Voltage at the node.
    pub voltage: ElectricPotential,
    /// Current from the parent into the node; for the root, from its source.
    pub current: ElectricCurrent,
    // The fold of the subtree, a + g·V, seen from the node and seen from its parent.
    here: (f64, f64),
    above: (f64, f64),
}

/// Steps allowed; at the edge of collapse each step only halves the distance.
const STEPS: u32 = 200;
/// Relative change at which the voltages count as settled.
const SETTLED: f64 = 1e-14;

/// Solves the tree; returns the Newton steps made (0 where every load is linear).
///
/// `states` has one entry a node and receives the result; on an error its contents mean nothing.
///
/// # Errors
/// [`Error::NotATree`] for a parent that does not precede its child or lengths that differ,
/// [`Error::OutOfRange`] for a resistance, load or source out of range,
/// [`Error::Collapse`] where no solution exists.
///
/// # Source
/// Kirchhoff's laws; method above. Checked against the closed form and a general dense solver.
///
/// # Example
/// ```
/// # use ampwright::network::{NodeLoad, NodeState, Source, TreeNode, solve};
/// # use uom::si::{f64::*, electric_potential::volt, electrical_resistance::ohm, power::watt};
/// let node = |parent, ohms, watts| TreeNode {
///     parent,
///     resistance: ElectricalResistance::new::<ohm>(ohms),
///     load: NodeLoad { power: Power::new::<watt>(watts), ..NodeLoad::default() },
///     source: None,
/// };
/// // A board behind 5 mΩ feeds two pumps; the shared feeder is counted once.
/// let tree = [node(0, 0.0, 0.0), node(0, 0.005, 0.0), node(1, 0.02, 100.0), node(1, 0.03, 60.0)];
/// let source = Source {
///     emf: ElectricPotential::new::<volt>(24.0),
///     resistance: ElectricalResistance::new::<ohm>(0.0),
/// };
/// let mut state = [NodeState::default(); 4];
/// solve(source, &tree, &mut state)?;
/// assert!((state[2].voltage.get::<volt>() - 23.8828).abs() < 1e-4);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn solve(root: Source, tree: &[TreeNode], states: &mut [NodeState]) -> Result<u32, Error> {
    check(root, tree, states)?;
    let emf = root.emf.get::<volt>();
    let root_ohm = root.resistance.get::<ohm>();

    let any_power = tree.iter().any(|n| n.load.power.value > 0.0);
    // Without the constant-power loads: exact, and an upper bound for the rest.
    fold(tree, states, root_ohm, false)?;
    unfold(tree, states, emf, root_ohm);
    if !any_power {
        return Ok(0);
    }
    for step in 1..=STEPS {
        fold(tree, states, root_ohm, true)?;
        let change = unfold(tree, states, emf, root_ohm);
        if change <= SETTLED * emf {
            return Ok(step);
        }
    }
    Err(Error::NotSettled { what: "voltages of the network", steps: STEPS })
}

/// Folds the tree upwards, each node's draw into its parent's.
fn fold(tree: &[TreeNode], states: &mut [NodeState], root_ohm: f64, with_power: bool) -> Result<(), Error> {
    for (index, (node, state)) in tree.iter().zip(states.iter_mut()).enumerate() {
        let volts = state.voltage.value;
        let mut a = node.load.current.value;
        let mut g = 0.0;
        if node.load.resistive.value > 0.0 {
            let reference = node.load.reference.value;
            g += node.load.resistive.value / (reference * reference);
        }
        if let Some(source) = node.source {
            g += 1.0 / source.resistance.value;
            a -= source.emf.value / source.resistance.value;
        }
        if with_power && node.load.power.value > 0.0 {
            let watts = node.load.power.value;
            if volts.is_nan() || volts <= 0.0 {
                return Err(Error::Collapse { node: index, asked_W: watts });
            }
            a += 2.0 * watts / volts;
            g -= watts / (volts * volts);
        }
        state.here = (a, g);
    }
    for index in (0..tree.len()).rev() {
        let Some((node, state)) = tree.get(index).zip(states.get_mut(index)) else { continue };
        let ohms = if index == 0 { root_ohm } else { node.resistance.value };
        let (a, g) = state.here;
        let pivot = 1.0 + g * ohms;
        if pivot.is_nan() || pivot <= 0.0 {
            return Err(Error::Collapse { node: index, asked_W: node.load.power.get::<watt>() });
        }
        let above = (a / pivot, g / pivot);
        state.above = above;
        if index > 0
            && let Some(parent) = states.get_mut(node.parent)
        {
            parent.here.0 += above.0;
            parent.here.1 += above.1;
        }
    }
    Ok(())
}

/// Unfolds voltages and currents downwards; returns the largest change of a voltage.
fn unfold(tree: &[TreeNode], states: &mut [NodeState], emf: f64, root_ohm: f64) -> f64 {
    let mut change = 0.0_f64;
    for (index, node) in tree.iter().enumerate() {
        let (upper, ohms) = match index {
            0 => (emf, root_ohm),
            _ => (states.get(node.parent).map_or(f64::NAN, |s| s.voltage.value), node.resistance.value),
        };
        if let Some(state) = states.get_mut(index) {
            let amps = state.above.0 + state.above.1 * upper;
            let volts = upper - ohms * amps;
            let moved = libm::fabs(volts - state.voltage.value);
            // A NaN must not look settled.
            change = if moved.is_nan() { f64::INFINITY } else { change.max(moved) };
            state.current = ElectricCurrent::new::<ampere>(amps);
            state.voltage = ElectricPotential::new::<volt>(volts);
        }
    }
    change
}

fn check(root: Source, tree: &[TreeNode], states: &[NodeState]) -> Result<(), Error> {
    if tree.is_empty() || tree.len() != states.len() {
        return Err(Error::NotATree {
            what: "the network has no node, or the number of states differs from the number of nodes",
        });
    }
    positive("source", root.emf.get::<volt>(), "V")?;
    at_least("internal resistance", root.resistance.get::<ohm>(), "ohm", 0.0)?;
    for (index, node) in tree.iter().enumerate() {
        if index > 0 && node.parent >= index {
            return Err(Error::NotATree {
                what: "a node hangs from itself or from a later node; list every parent before its children",
            });
        }
        at_least("resistance of a run", node.resistance.get::<ohm>(), "ohm", 0.0)?;
        at_least("power of a load", node.load.power.get::<watt>(), "W", 0.0)?;
        at_least("power of a resistive load", node.load.resistive.get::<watt>(), "W", 0.0)?;
        if node.load.resistive.value > 0.0 {
            positive("reference voltage of a load", node.load.reference.get::<volt>(), "V")?;
        }
        if !node.load.current.value.is_finite() {
            let value = node.load.current.get::<ampere>();
            return Err(Error::OutOfRange {
                name: "current of a load",
                value,
                unit: "A",
                allowed: Allowed::Finite,
            });
        }
        if let Some(source) = node.source {
            positive("source", source.emf.get::<volt>(), "V")?;
            positive("internal resistance", source.resistance.get::<ohm>(), "ohm")?;
        }
    }
    Ok(())
}

pub(super) fn positive(name: &'static str, value: f64, unit: &'static str) -> Result<(), Error> {
    if value > 0.0 && value.is_finite() {
        Ok(())
    } else {
        Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Above(0.0) })
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::super::line_delivery;
    use super::*;
    use proptest::prelude::*;
    use std::vec;

    fn node(parent: usize, ohms: f64, watts: f64, amps: f64, resistive: f64) -> TreeNode {
        TreeNode {
            parent,
            resistance: ElectricalResistance::new::<ohm>(ohms),
            load: NodeLoad {
                power: Power::new::<watt>(watts),
                current: ElectricCurrent::new::<ampere>(amps),
                resistive: Power::new::<watt>(resistive),
                reference: ElectricPotential::new::<volt>(24.0),
            },
            source: None,
        }
    }

    fn root(emf: f64, ohms: f64) -> Source {
        Source {
            emf: ElectricPotential::new::<volt>(emf),
            resistance: ElectricalResistance::new::<ohm>(ohms),
        }
    }

    #[test]
    fn one_load_agrees_with_the_closed_form() {
        for (e, r, p) in [(21.0, 0.01, 1000.0), (12.0, 0.1, 359.0), (48.0, 0.0, 5000.0), (10.5, 0.2, 137.8)] {
            let tree = [node(0, 0.0, 0.0, 0.0, 0.0), node(0, r, p, 0.0, 0.0)];
            let mut state = [NodeState::default(); 2];
            solve(root(e, 0.0), &tree, &mut state).unwrap();
            let closed = line_delivery(
                ElectricPotential::new::<volt>(e),
                ElectricalResistance::new::<ohm>(r),
                Power::new::<watt>(p),
            )
            .unwrap();
            approx::assert_relative_eq!(state[1].voltage.value, closed.voltage.value, max_relative = 1e-9);
            approx::assert_relative_eq!(state[1].current.value, closed.current.value, max_relative = 1e-9);
        }
    }

    #[test]
    fn more_power_than_the_line_carries_is_refused() {
        // V²/4R = 21²/0.04/... : 12 V through 0.1 Ω carries at most 360 W.
        let mut state = [NodeState::default(); 2];
        let tree = |p| [node(0, 0.0, 0.0, 0.0, 0.0), node(0, 0.1, p, 0.0, 0.0)];
        assert!(solve(root(12.0, 0.0), &tree(359.9), &mut state).is_ok());
        let refused = solve(root(12.0, 0.0), &tree(360.1), &mut state);
        assert_eq!(refused, Err(Error::Collapse { node: 1, asked_W: 360.1 }));
    }

    /// Kirchhoff's laws, node by node, without the solver's own fold.
    fn worst_imbalance(emf: f64, root_ohm: f64, tree: &[TreeNode], state: &[NodeState]) -> f64 {
        let mut worst = 0.0_f64;
        for (i, n) in tree.iter().enumerate() {
            let v = state[i].voltage.value;
            let children: f64 = (1..tree.len())
                .filter(|&c| tree[c].parent == i && c != i)
                .map(|c| state[c].current.value)
                .sum();
            let load =
                n.load.current.value + n.load.resistive.value * v / (24.0 * 24.0) + n.load.power.value / v;
            let source = n.source.map_or(0.0, |s| (s.emf.value - v) / s.resistance.value);
            let (upper, r) =
                if i == 0 { (emf, root_ohm) } else { (state[n.parent].voltage.value, n.resistance.value) };
            worst = worst.max((state[i].current.value + source - children - load).abs());
            worst = worst.max((upper - r * state[i].current.value - v).abs());
        }
        worst
    }

    proptest! {
        #[test]
        fn every_solution_obeys_kirchhoff(
            emf in 10.0..60.0_f64,
            rows in prop::collection::vec((any::<prop::sample::Index>(), 1e-4..0.05_f64, 0.0..60.0_f64, 0.0..3.0_f64, 0.0..40.0_f64, 0..5_u8), 1..40),
        ) {
            let mut tree = vec![node(0, 0.0, 0.0, 0.0, 0.0)];
            for (parent, r, p, i, w, source) in &rows {
                let mut n = node(parent.index(tree.len()), *r, *p, *i, *w);
                if *source == 0 {
                    n.source = Some(root(emf, 0.1));
                }
                tree.push(n);
            }
            let mut state = vec![NodeState::default(); tree.len()];
            match solve(root(emf, 0.002), &tree, &mut state) {
                Ok(_) => {
                    let scale: f64 = state.iter().map(|s| s.current.value.abs()).fold(1.0, f64::max);
                    prop_assert!(worst_imbalance(emf, 0.002, &tree, &state) < 1e-9 * scale);
                }
                Err(Error::Collapse { .. }) => {}
                Err(other) => prop_assert!(false, "{other}"),
            }
        }

        #[test]
        fn odd_numbers_give_a_sentence_never_a_panic(bits in prop::array::uniform7(any::<u64>())) {
            let f = bits.map(f64::from_bits);
            let mut tree = [node(0, 0.0, f[0], f[1], f[2]), node(0, f[3], f[4], f[1], f[2])];
            tree[1].source = Some(root(f[5], f[6]));
            let mut state = [NodeState::default(); 2];
            let _ = solve(root(f[6], f[5]), &tree, &mut state);
        }
    }

    #[test]
    fn sources_at_nodes_share_the_load() {
        // Two equal sources, equal resistances, one load in the middle: half each.
        let mut tree = [node(0, 0.0, 0.0, 10.0, 0.0), node(0, 0.1, 0.0, 0.0, 0.0)];
        tree[1].source = Some(root(24.0, 0.1));
        let mut state = [NodeState::default(); 2];
        solve(root(24.0, 0.2), &tree, &mut state).unwrap();
        approx::assert_relative_eq!(state[0].current.value, 5.0, max_relative = 1e-12);
        approx::assert_relative_eq!(state[1].current.value, -5.0, max_relative = 1e-12);
    }
}
