//! What a circuit shows while its own loads run: current, drop, volts at its end, millivolts on each joint (R3, R9).
//!
//! Every other load is off, so what the circuit carries flows in all that lies before it too.

use alloc::collections::VecDeque;
use alloc::string::String;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;

use super::commissioning::Expected;
use super::meter::Meter;
use super::path::{Loop, PathJoint, joints, loop_of};
use crate::network::{NodeLoad, NodeState, Source, TreeNode, solve};
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance};
use crate::site::bank::cells;
use crate::site::graph::{Graph, Item, Tree};
use crate::site::joints::limits;
use crate::site::model::Return;
use crate::site::plan::{Plan, Planned};
use crate::site::state::node_load;
use crate::site::system::{BankEntry, FeedKind, Site};

/// What a load draws beside its nameplate. Common practice, no source.
const NAMEPLATE: f64 = 0.1;
/// A joint is refused at so many times what it should have, and where it would make more heat than the design admits.
/// Common practice, no source.
const REFUSED_AT: f64 = 2.0;
/// The fault that is sought in a joint, ohm.
const SOUGHT: f64 = 1e-3;

/// What drives the test current.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Driven {
    /// The loads behind the circuit, all of them running and no other.
    Loads,
    /// A source, giving all it may: a charger or an array.
    Source,
    /// The document states it.
    Stated,
}

/// Like joints of a circuit under its test current.
#[derive(Clone, Debug, PartialEq)]
pub struct JointTest {
    /// Its kind, or the name of the device or part.
    pub joint: String,
    /// How many, each to be measured.
    pub count: u32,
    /// Its resistance is stated, else generic.
    pub stated: bool,
    /// What one should have, and from what on it is refused.
    pub resistance: ElectricalResistance,
    /// See `resistance`.
    pub refused_resistance: ElectricalResistance,
    /// Volts across one at the test current; least and greatest by the meter's error.
    pub voltage: Expected<ElectricPotential>,
    /// Volts from which one is refused.
    pub refused_above: ElectricPotential,
    /// Current at which one milliohm too much shows on the meter; `None` where its error hides it.
    pub one_milliohm: Option<ElectricCurrent>,
    /// Current at which a joint to be refused shows on the meter; `None` where its error hides it.
    pub current_needed: Option<ElectricCurrent>,
}

/// One circuit under load.
#[derive(Clone, Debug, PartialEq)]
pub struct LoadedTest {
    /// Circuit.
    pub circuit: String,
    /// What drives the current.
    pub driven: Driven,
    /// Test current; its tolerance holds the load's nameplate and the meter.
    pub current: Expected<ElectricCurrent>,
    /// Loop at 20 °C with its joints.
    pub resistance: ElectricalResistance,
    /// Drop along the run, both conductors and all joints, at the test current: expected with conductors at 20 °C; least
    /// with none of the joints, cold; greatest as designed. The errors of volts and amperes are in both.
    pub drop: Expected<ElectricPotential>,
    /// Drop over current from which the run is refused.
    pub refused_resistance: ElectricalResistance,
    /// Volts at the source's terminals for which the volts at the end stand.
    pub source: Option<ElectricPotential>,
    /// Volts at the far end.
    pub end: Option<Expected<ElectricPotential>>,
    /// Joints.
    pub joints: Vec<JointTest>,
}

/// Solved state of one circuit with its own loads.
#[derive(Clone, Copy)]
struct Running {
    amps: f64,
    source: f64,
    end: f64,
    /// Least and greatest loop resistance from the source to the circuit's end, where known.
    path: Option<(f64, f64)>,
}

/// The circuits that carry anything, in the order of the document.
pub(super) fn tests(site: &Site, plan: &Plan, meter: &Meter) -> Vec<LoadedTest> {
    let loops: Vec<Option<Loop>> = site
        .circuits
        .iter()
        .zip(&plan.circuits)
        .map(|(circuit, planned)| loop_of(site, circuit, planned.as_ref()?))
        .collect();
    let running = running(site, plan, &loops);
    let mut tests = Vec::new();
    for (index, (circuit, planned)) in site.circuits.iter().zip(&plan.circuits).enumerate() {
        let (Some(planned), Some(Some(ohms))) = (planned, loops.get(index)) else { continue };
        let own = running.get(index).copied().flatten();
        let (driven, amps) = match own {
            Some(own) => (Driven::Loads, own.amps),
            None if plan.links.contains(&index) => (Driven::Stated, planned.flow.current),
            None if planned.flow.charged || planned.flow.limit.is_some() => {
                (Driven::Source, planned.flow.current)
            }
            None => continue,
        };
        if !(amps.is_finite() && amps > 0.0) {
            continue;
        }
        tests.push(LoadedTest {
            circuit: circuit.name.clone(),
            driven,
            current: current(driven, amps, meter),
            resistance: ElectricalResistance::new::<ohm>(ohms.expected),
            drop: drop(amps, ohms, meter),
            refused_resistance: drop(amps, ohms, meter).greatest / ElectricCurrent::new::<ampere>(amps),
            source: own.map(|own| ElectricPotential::new::<volt>(own.source)),
            end: own.and_then(|own| end(&own, meter)),
            joints: joints(site, circuit, &planned.fitted)
                .iter()
                .map(|joint| joint_test(joint, amps, planned, meter))
                .collect(),
        });
    }
    tests
}

/// Circuits for which nothing can be expected, and why.
pub(super) fn untested<'a>(site: &'a Site, plan: &Plan) -> Vec<(&'a str, &'static str)> {
    let mut list = Vec::new();
    for (index, (circuit, planned)) in site.circuits.iter().zip(&plan.circuits).enumerate() {
        if planned.is_none() {
            continue;
        }
        if circuit.way_back == Return::Chassis(None) {
            list.push((circuit.name.as_str(), "the resistance of its return is not stated"));
        } else if plan.collapsed.contains(&index) {
            list.push((circuit.name.as_str(), "the line cannot carry its load"));
        }
    }
    list
}

fn current(driven: Driven, amps: f64, meter: &Meter) -> Expected<ElectricCurrent> {
    let value = ElectricCurrent::new::<ampere>(amps);
    let error = meter.current_error(value);
    let (least, greatest) = match driven {
        Driven::Loads => (value * (1.0 - NAMEPLATE) - error, value * (1.0 + NAMEPLATE) + error),
        // What a source gives depends on the day; what it may not exceed does not.
        Driven::Source => (ElectricCurrent::default(), value + error),
        Driven::Stated => (value - error, value + error),
    };
    let least = if least > ElectricCurrent::default() { least } else { ElectricCurrent::default() };
    Expected { least, value: Some(value), greatest }
}

fn drop(amps: f64, ohms: &Loop, meter: &Meter) -> Expected<ElectricPotential> {
    let current = ElectricCurrent::new::<ampere>(amps);
    let of_current = (meter.current_error(current) / current).value;
    let volts = |ohms: f64| ElectricPotential::new::<volt>(amps * ohms);
    // A drop stands against the current read beside it: both readings err.
    let error = |at: ElectricPotential| meter.voltage_error(at) + at * of_current;
    let (low, high) = (volts(ohms.least), volts(ohms.greatest));
    let least = low - error(low);
    Expected {
        least: if least > ElectricPotential::default() { least } else { ElectricPotential::default() },
        value: Some(volts(ohms.expected)),
        greatest: high + error(high),
    }
}

fn end(own: &Running, meter: &Meter) -> Option<Expected<ElectricPotential>> {
    let (least, greatest) = own.path?;
    let value = ElectricPotential::new::<volt>(own.end);
    let error = meter.voltage_error(value);
    let after = |ohms: f64| ElectricPotential::new::<volt>(own.source - own.amps * ohms);
    Some(Expected { least: after(greatest) - error, value: Some(value), greatest: after(least) + error })
}

fn joint_test(joint: &PathJoint, amps: f64, planned: &Planned, meter: &Meter) -> JointTest {
    let current = ElectricCurrent::new::<ampere>(amps);
    let each = joint.each.get::<ohm>();
    let design = planned.judgement.current.get::<ampere>();
    let by_heat = limits(joint.kind, planned.judgement.current)[1] / (design * design);
    let refused = (REFUSED_AT * each).min(by_heat);
    let value = joint.each * current;
    let error = meter.voltage_error(value);
    JointTest {
        joint: joint.name.clone(),
        count: joint.count,
        stated: joint.stated,
        resistance: joint.each,
        refused_resistance: ElectricalResistance::new::<ohm>(refused),
        voltage: Expected {
            least: if value > error { value - error } else { ElectricPotential::default() },
            value: Some(value),
            greatest: value + error,
        },
        refused_above: ElectricPotential::new::<volt>(refused * amps),
        one_milliohm: meter.current_to_show(each, SOUGHT),
        current_needed: meter.current_to_show(each, refused - each),
    }
}

/// Volts at the terminals of a source at which the sheet expects its readings: of a bank its cells' nominal voltage.
pub(super) fn test_voltage(bank: &BankEntry) -> f64 {
    bank.chemistry().map_or_else(
        || bank.nominal.get::<volt>(),
        |chemistry| cells(bank, chemistry).1 * chemistry.nominal_cell().get::<volt>(),
    )
}

/// Each circuit with its own loads alone; where several banks can feed it, the one that drives most through it.
fn running(site: &Site, plan: &Plan, loops: &[Option<Loop>]) -> Vec<Option<Running>> {
    let graph = Graph::new(site);
    let mut best: Vec<Option<Running>> = vec![None; site.circuits.len()];
    for (index, bank) in site.banks.iter().enumerate() {
        if matches!(bank.kind, FeedKind::Array(_)) {
            continue;
        }
        let Some(tree) = graph.island_from(index) else { continue };
        let ohms = |circuit: usize| {
            let known = loops.get(circuit).copied().flatten().map(|l| l.expected);
            let planned = || plan.circuits.get(circuit).and_then(|p| Some(p.as_ref()?.flow.ohms));
            known.or_else(planned).unwrap_or(0.0)
        };
        let mut below: Vec<Vec<usize>> = vec![Vec::new(); tree.nodes.len()];
        for (node, entry) in tree.nodes.iter().enumerate().skip(1) {
            if let Some(list) = below.get_mut(entry.parent) {
                list.push(node);
            }
        }
        for (node, entry) in tree.nodes.iter().enumerate().skip(1) {
            let Some(circuit) = entry.circuit else { continue };
            let state = alone(site, bank, &tree, &below, node, &ohms)
                .map(|state| Running { path: path_ohms(&tree, node, loops), ..state });
            if let (Some(slot), Some(state)) = (best.get_mut(circuit), state)
                && slot.is_none_or(|s| s.amps < state.amps)
            {
                *slot = Some(state);
            }
        }
    }
    best
}

/// Nodes from the root to a node.
fn nodes_to(tree: &Tree, mut node: usize) -> Vec<usize> {
    let mut path = vec![node];
    while node > 0 {
        let Some(entry) = tree.nodes.get(node) else { break };
        node = entry.parent;
        path.push(node);
    }
    path.reverse();
    path
}

fn path_ohms(tree: &Tree, node: usize, loops: &[Option<Loop>]) -> Option<(f64, f64)> {
    let mut sum = (0.0, 0.0);
    for step in nodes_to(tree, node).into_iter().skip(1) {
        let own = loops.get(tree.nodes.get(step)?.circuit?).copied().flatten()?;
        sum = (sum.0 + own.least, sum.1 + own.greatest);
    }
    Some(sum)
}

/// The way to a node and what hangs below it, solved with the loads there alone; `None` where there are none, or where
/// the wiring cannot carry them.
fn alone(
    site: &Site,
    bank: &BankEntry,
    tree: &Tree,
    below: &[Vec<usize>],
    node: usize,
    ohms: &impl Fn(usize) -> f64,
) -> Option<Running> {
    let way = nodes_to(tree, node);
    let steps = way.len();
    let mut nodes: Vec<TreeNode> = Vec::with_capacity(steps);
    let mut drawing = false;
    let mut add = |node: usize, parent: usize, loaded: bool| -> Option<usize> {
        let entry = tree.nodes.get(node)?;
        let load = if loaded {
            node_load(site, entry.item, bank.nominal, None)
        } else {
            NodeLoad { reference: bank.nominal, ..NodeLoad::default() }
        };
        drawing |=
            matches!(entry.item, Item::Load(_) | Item::Inverter(_) | Item::ConverterInput(_)) && loaded;
        let resistance = ElectricalResistance::new::<ohm>(entry.circuit.map_or(0.0, ohms));
        nodes.push(TreeNode { parent, resistance, load, source: None });
        nodes.len().checked_sub(1)
    };
    for (place, &step) in way.iter().enumerate() {
        add(step, place.saturating_sub(1), step == node)?;
    }
    let mut queue = VecDeque::from([(node, steps.checked_sub(1)?)]);
    while let Some((above, place)) = queue.pop_front() {
        for &next in below.get(above).into_iter().flatten() {
            queue.push_back((next, add(next, place, true)?));
        }
    }
    if !drawing {
        return None;
    }
    let source = test_voltage(bank);
    let mut states = vec![NodeState::default(); nodes.len()];
    let emf = ElectricPotential::new::<volt>(source);
    solve(Source { emf, resistance: ElectricalResistance::default() }, &nodes, &mut states).ok()?;
    let state = states.get(steps.checked_sub(1)?)?;
    let (amps, end) = (state.current.get::<ampere>(), state.voltage.get::<volt>());
    (amps > 0.0).then_some(Running { amps, source, end, path: None })
}
