//! Flows of the plan: currents and voltages in the worst hour, prospective currents at both ends of each circuit.

use alloc::collections::BTreeMap;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::fault::Fault;
use super::graph::{Graph, Item, Tree, path_to};
use super::model::{BankEntry, LoadKind, Return, Site};
use super::plan::sources;
use crate::cable::{Conductor, linear_resistance};
use crate::error::Error;
use crate::network::{NodeLoad, NodeState, Source, TreeNode, solve};
use crate::quantity::{
    ElectricCurrent, ElectricPotential, ElectricalResistance, Length, Power, ThermodynamicTemperature,
};
use crate::rules::LoadUse;

/// What flows in one circuit.
#[derive(Clone, Copy, Debug)]
pub(super) struct Flow {
    /// Design current, A.
    pub current: f64,
    /// Current in the state of the lowest voltage, where resistive loads make it less than `current`, A.
    pub low_current: Option<f64>,
    /// The largest current of a single load behind the circuit, A.
    pub single: f64,
    /// Part of it that flows for three hours or more.
    pub continuous_share: f64,
    /// Voltage at the circuit's end on the source's side in the worst hour, V.
    pub beginning: f64,
    /// Drop from the source to there, V.
    pub drop_before: f64,
    /// Loop resistance that was used, ohm.
    pub ohms: f64,
    /// Nominal and highest voltage of its bank, V.
    pub nominal: f64,
    pub highest: f64,
    /// A bank stands at one of its ends: a battery cable.
    pub at_bank: bool,
    /// Of what hangs at the far end.
    pub usage: LoadUse,
    pub least_voltage: Option<f64>,
    pub load_terminal: Option<ThermodynamicTemperature>,
    /// Greatest prospective current just behind the beginning, and from the far side at the end.
    pub fault_at_beginning: Option<Fault>,
    pub fault_at_end: Option<Fault>,
    /// Weakest sources at both ends.
    pub weakest_at_beginning: Option<Source>,
    pub weakest_at_end: Option<Source>,
    /// Current that comes on top while the load at the far end starts, A.
    pub start: Option<f64>,
    /// Loop resistance from the source to the circuit's beginning, ohm.
    pub ohms_before: f64,
}

/// Conductors, positive and negative, and joints of a circuit.
pub(super) type Wired = (Conductor, Conductor, ElectricalResistance);

/// The flows of a whole site.
pub(super) struct Flows {
    /// In the order of the document.
    pub circuits: Vec<Flow>,
    /// The first collapse met: the circuits from the source to it, and the error.
    pub collapse: Option<(Vec<usize>, Error)>,
    /// Circuits where the network collapsed.
    pub collapsed: Vec<usize>,
    /// For each circuit the one before it on the way from its source.
    pub before: Vec<Option<usize>>,
}

impl Flows {
    /// Circuits from the source to a circuit, itself included.
    pub fn path(&self, circuit: usize) -> Vec<usize> {
        let mut path = vec![circuit];
        let mut here = circuit;
        while let Some(before) = self.before.get(here).copied().flatten() {
            path.push(before);
            here = before;
        }
        path.reverse();
        path
    }
}

impl Flows {
    pub fn new(
        site: &Site,
        graph: &Graph,
        trees: &[Tree],
        wired: &[Wired],
        temperatures: &[Option<f64>],
    ) -> Self {
        let banks = sources(site);
        let ohms = |index: usize| loop_ohms(site, wired, index, temperatures.get(index).copied().flatten());
        let mut flows = Self {
            circuits: vec![none(); site.circuits.len()],
            collapse: None,
            collapsed: Vec::new(),
            before: vec![None; site.circuits.len()],
        };
        for tree in trees {
            let Some(bank) = root_bank(site, tree) else { continue };
            // Any bank of the tree can raise all of it to its own highest voltage.
            let highest = tree
                .nodes
                .iter()
                .filter_map(|n| match n.item {
                    Item::Bank(i) => site.banks.get(i).map(|b| b.highest.get::<volt>()),
                    _ => None,
                })
                .fold(0.0, f64::max);
            flows.describe(site, tree, bank.nominal.get::<volt>(), highest, &ohms);
            flows.take_faults(site, tree, &banks, wired);
        }
        let links = graph.drawn_by_links();
        let mut volts = BTreeMap::new();
        for tree in &graph.islands() {
            let Some(bank) = root_bank(site, tree) else { continue };
            let solver = Solver { site, links: &links, nominal: bank.nominal, ohms: &ohms };
            let low = solver.solve(tree, bank.cut_off).unwrap_or_else(|error| {
                flows.note_collapse(tree, error);
                solver.linear(tree, bank.cut_off)
            });
            flows.take(site, &links, tree, &low, bank.cut_off.get::<volt>());
            volts.extend(tree.nodes.iter().zip(&low).map(|(n, s)| (n.item, s.voltage.get::<volt>())));
            if any_resistive(site)
                && let Ok(high) = solver.solve(tree, bank.highest)
            {
                flows.take_highest(tree, &high);
            }
            // Each further bank may have to feed the whole island alone.
            for other in tree.nodes.iter().skip(1).filter_map(|n| match n.item {
                Item::Bank(other) => Some(other),
                _ => None,
            }) {
                let (Some(turned), Some(bank)) = (graph.island_from(other), site.banks.get(other)) else {
                    continue;
                };
                let solved = solver
                    .solve(&turned, bank.cut_off)
                    .unwrap_or_else(|_| solver.linear(&turned, bank.cut_off));
                flows.take(site, &links, &turned, &solved, bank.cut_off.get::<volt>());
            }
        }
        flows.take_links(site, graph, trees, &volts);
        for flow in flows.circuits.iter_mut().filter(|f| !f.beginning.is_finite()) {
            flow.beginning = flow.nominal;
        }
        // Stated currents and the user's own diversity.
        for (flow, circuit) in flows.circuits.iter_mut().zip(&site.circuits) {
            // The user's own diversity cannot undo the largest single load.
            let single = flow.single;
            let shared = |amps: f64| (amps * circuit.diversity).max(single.min(amps));
            flow.low_current = flow.low_current.map(shared);
            flow.current = shared(flow.current);
            if let Some(stated) = circuit.current.map(|a| a.get::<ampere>()) {
                flow.current = flow.current.max(stated);
                flow.low_current = flow.low_current.map(|low| low.max(stated));
            }
        }
        flows
    }

    /// What does not depend on currents: voltages, what hangs at the end, shares.
    fn describe(
        &mut self,
        site: &Site,
        tree: &Tree,
        nominal: f64,
        highest: f64,
        ohms: &impl Fn(usize) -> f64,
    ) {
        for node in &tree.nodes {
            let Some(index) = node.circuit else { continue };
            let Some(flow) = self.circuits.get_mut(index) else { continue };
            flow.nominal = nominal;
            flow.highest = highest;
            flow.ohms = ohms(index);
            let above = tree.nodes.get(node.parent).map(|p| p.item);
            flow.at_bank = [above, Some(node.item)].iter().any(|i| matches!(i, Some(Item::Bank(_))));
            match node.item {
                Item::Load(i) => {
                    if let Some(load) = site.loads.get(i) {
                        flow.usage = load.usage;
                        flow.least_voltage = load.least.map(|v| v.get::<volt>());
                        flow.load_terminal = load.terminal;
                    }
                }
                Item::Inverter(i) => {
                    if let Some(inverter) = site.inverters.get(i) {
                        flow.least_voltage = inverter.least.map(|v| v.get::<volt>());
                        flow.load_terminal = inverter.terminal;
                    }
                }
                // A feeder of boards is held to the stricter limit of panel feeders (R17).
                Item::Board(_) => flow.usage = LoadUse::Critical,
                Item::Bank(_) => {}
            }
        }
    }

    /// A link carries what the document states, from whichever side stands higher.
    fn take_links(&mut self, site: &Site, graph: &Graph, trees: &[Tree], volts: &BTreeMap<Item, f64>) {
        for tree in trees {
            let Some(bank) = root_bank(site, tree) else { continue };
            let cut_off = bank.cut_off.get::<volt>();
            for node in &tree.nodes {
                let Some((circuit, &amps)) = node.circuit.and_then(|c| Some((c, graph.links.get(&c)?)))
                else {
                    continue;
                };
                let above = tree.nodes.get(node.parent).and_then(|p| volts.get(&p.item)).copied();
                if let Some(flow) = self.circuits.get_mut(circuit) {
                    flow.current = amps;
                    flow.continuous_share = 1.0;
                    // Its own drop alone: a link is no part of the path of a load.
                    flow.beginning = above.unwrap_or(cut_off).max(0.01 * cut_off);
                    flow.drop_before = 0.0;
                }
            }
        }
    }

    fn note_collapse(&mut self, tree: &Tree, error: Error) {
        let node = match error {
            Error::Collapse { node, .. } => node,
            _ => 0,
        };
        if self.collapse.is_none() {
            self.collapse = Some((path_to(tree, node), error));
        }
        if let Some(circuit) = tree.nodes.get(node).and_then(|n| n.circuit) {
            self.collapsed.push(circuit);
        }
    }

    /// Takes one state of the network for every circuit that carries more in it than in those before; where two carry
    /// the same, the one with the lower voltage. Current, share, voltages and start of a circuit belong to one state.
    fn take(
        &mut self,
        site: &Site,
        links: &BTreeMap<Item, f64>,
        tree: &Tree,
        states: &[NodeState],
        emf: f64,
    ) {
        let long = continuous_currents(site, links, tree, states);
        let single = single_currents(site, tree, states);
        let mut path_ohms = vec![0.0; tree.nodes.len()];
        for (index, node) in tree.nodes.iter().enumerate() {
            let Some(circuit) = node.circuit else { continue };
            let above = states.get(node.parent).map_or(emf, |s| s.voltage.get::<volt>());
            let amps = states.get(index).map_or(0.0, |s| libm::fabs(s.current.get::<ampere>()));
            let upstream = path_ohms.get(node.parent).copied().unwrap_or(0.0);
            let Some(flow) = self.circuits.get_mut(circuit) else { continue };
            if let Some(own) = path_ohms.get_mut(index) {
                *own = upstream + flow.ohms;
            }
            let same = libm::fabs(amps - flow.current) <= 1e-9 * amps;
            // A collapsed network may fall below zero here; a run begins at some positive voltage.
            let beginning = above.max(0.01 * emf);
            if (same && beginning >= flow.beginning) || (!same && amps < flow.current) {
                continue;
            }
            if let Some(slot) = self.before.get_mut(circuit) {
                *slot = tree.nodes.get(node.parent).and_then(|p| p.circuit);
            }
            flow.current = amps;
            flow.single = single.get(index).copied().unwrap_or(0.0);
            flow.continuous_share = match long.get(index) {
                Some(long) if amps > 0.0 => (long / amps).clamp(0.0, 1.0),
                _ => 1.0,
            };
            flow.beginning = beginning;
            flow.drop_before = (emf - above).clamp(0.0, emf);
            flow.ohms_before = upstream;
            flow.start =
                start(site, node.item, amps, states.get(index).map_or(emf, |s| s.voltage.get::<volt>()));
        }
    }

    /// Resistive loads draw most at the highest voltage: conductor and device are judged for that current, the drop for
    /// the one of the worst hour.
    fn take_highest(&mut self, tree: &Tree, states: &[NodeState]) {
        for (node, state) in tree.nodes.iter().zip(states) {
            if let Some(flow) = node.circuit.and_then(|c| self.circuits.get_mut(c)) {
                let amps = libm::fabs(state.current.get::<ampere>());
                if amps > flow.current {
                    flow.low_current.get_or_insert(flow.current);
                    flow.current = amps;
                }
            }
        }
    }
}

const fn none() -> Flow {
    Flow {
        current: 0.0,
        low_current: None,
        single: 0.0,
        continuous_share: 1.0,
        beginning: f64::INFINITY,
        drop_before: 0.0,
        ohms: 0.0,
        nominal: 0.0,
        highest: 0.0,
        at_bank: false,
        usage: LoadUse::Other,
        least_voltage: None,
        load_terminal: None,
        fault_at_beginning: None,
        fault_at_end: None,
        weakest_at_beginning: None,
        weakest_at_end: None,
        start: None,
        ohms_before: 0.0,
    }
}

/// Current that comes on top while a load starts or an inverter surges, A.
fn start(site: &Site, item: Item, amps: f64, volts: f64) -> Option<f64> {
    match item {
        Item::Load(i) => {
            let load = site.loads.get(i)?;
            // One of them starts while the rest runs.
            let running = amps / f64::from(load.count.max(1));
            Some((load.start?.get::<ampere>() - running).max(0.0))
        }
        Item::Inverter(i) => {
            let inverter = site.inverters.get(i)?;
            let surge = inverter.surge?.get::<watt>() / inverter.efficiency.get::<ratio>() / volts.max(1e-3);
            Some((surge - amps).max(0.0))
        }
        Item::Bank(_) | Item::Board(_) => None,
    }
}

/// Current of the largest single load at each node or behind it, A.
fn single_currents(site: &Site, tree: &Tree, states: &[NodeState]) -> Vec<f64> {
    let mut largest: Vec<f64> = tree
        .nodes
        .iter()
        .zip(states)
        .map(|(node, state)| match node.item {
            Item::Load(i) => {
                let count = site.loads.get(i).map_or(1, |l| l.count.max(1));
                state.current.get::<ampere>() / f64::from(count)
            }
            Item::Inverter(_) => state.current.get::<ampere>(),
            Item::Bank(_) | Item::Board(_) => 0.0,
        })
        .collect();
    for (index, node) in tree.nodes.iter().enumerate().skip(1).rev() {
        let own = largest.get(index).copied().unwrap_or(0.0);
        if let Some(parent) = largest.get_mut(node.parent) {
            *parent = parent.max(own);
        }
    }
    largest
}

/// Currents of loads of three hours or more, summed up to each node, A.
fn continuous_currents(
    site: &Site,
    links: &BTreeMap<Item, f64>,
    tree: &Tree,
    states: &[NodeState],
) -> Vec<f64> {
    let mut sums: Vec<f64> = tree
        .nodes
        .iter()
        .zip(states)
        .map(|(node, state)| {
            // A load ends its branch: all that arrives at it is its own.
            let own = match node.item {
                Item::Load(i) if site.loads.get(i).is_some_and(|l| l.continuous) => {
                    state.current.get::<ampere>()
                }
                Item::Inverter(_) => state.current.get::<ampere>(),
                _ => 0.0,
            };
            own + links.get(&node.item).copied().unwrap_or(0.0)
        })
        .collect();
    for (index, node) in tree.nodes.iter().enumerate().skip(1).rev() {
        let own = sums.get(index).copied().unwrap_or(0.0);
        if let Some(parent) = sums.get_mut(node.parent) {
            *parent += own;
        }
    }
    sums
}

fn any_resistive(site: &Site) -> bool {
    site.loads.iter().any(|l| l.kind == LoadKind::Resistive)
}

/// Power of an item at nominal voltage, W.
fn nominal_watts(site: &Site, item: Item, nominal: f64) -> f64 {
    match item {
        Item::Load(i) => site.loads.get(i).map_or(0.0, |load| {
            let each = load.power.map_or_else(
                || load.current.map_or(0.0, |a| a.get::<ampere>() * nominal),
                |p| p.get::<watt>(),
            );
            each * f64::from(load.count)
        }),
        Item::Inverter(i) => site
            .inverters
            .get(i)
            .map_or(0.0, |inverter| inverter.power.get::<watt>() / inverter.efficiency.get::<ratio>()),
        Item::Bank(_) | Item::Board(_) => 0.0,
    }
}

/// Loads of an item as the network sees them. `as_current`: constant powers as the currents they draw at `at`.
fn node_load(
    site: &Site,
    item: Item,
    nominal: ElectricPotential,
    as_current: Option<ElectricPotential>,
) -> NodeLoad {
    let mut node = NodeLoad { reference: nominal, ..NodeLoad::default() };
    let whole = Power::new::<watt>(nominal_watts(site, item, nominal.get::<volt>()));
    let kind = match item {
        Item::Load(i) => site.loads.get(i).map_or(LoadKind::Power, |l| l.kind),
        _ => LoadKind::Power,
    };
    match (kind, as_current) {
        (LoadKind::Power, Some(at)) => node.current = whole / at,
        (LoadKind::Power, None) => node.power = whole,
        (LoadKind::Current, _) => node.current = whole / nominal,
        (LoadKind::Resistive, _) => node.resistive = whole,
    }
    node
}

fn root_bank<'a>(site: &'a Site, tree: &Tree) -> Option<&'a BankEntry> {
    match tree.nodes.first()?.item {
        Item::Bank(root) => site.banks.get(root),
        _ => None,
    }
}

/// What the solution of an island needs.
struct Solver<'a, F> {
    site: &'a Site,
    links: &'a BTreeMap<Item, f64>,
    nominal: ElectricPotential,
    ohms: &'a F,
}

impl<F: Fn(usize) -> f64> Solver<'_, F> {
    fn solve(&self, tree: &Tree, emf: ElectricPotential) -> Result<Vec<NodeState>, Error> {
        self.run(tree, emf, None)
    }

    /// With constant powers as constant currents: always has a solution, and stands in where there is none.
    fn linear(&self, tree: &Tree, emf: ElectricPotential) -> Vec<NodeState> {
        self.run(tree, emf, Some(emf)).unwrap_or_else(|_| vec![NodeState::default(); tree.nodes.len()])
    }

    fn run(
        &self,
        tree: &Tree,
        emf: ElectricPotential,
        as_current: Option<ElectricPotential>,
    ) -> Result<Vec<NodeState>, Error> {
        let nodes: Vec<TreeNode> = tree
            .nodes
            .iter()
            .map(|n| {
                let mut load = node_load(self.site, n.item, self.nominal, as_current);
                if let Some(&amps) = self.links.get(&n.item) {
                    load.current += ElectricCurrent::new::<ampere>(amps);
                }
                TreeNode {
                    parent: n.parent,
                    resistance: ElectricalResistance::new::<ohm>(n.circuit.map_or(0.0, self.ohms)),
                    load,
                    source: None,
                }
            })
            .collect();
        let mut states = vec![NodeState::default(); nodes.len()];
        // The cut-off voltage is the bank's terminal voltage under load: no resistance behind it.
        let root = Source { emf, resistance: ElectricalResistance::new::<ohm>(0.0) };
        solve(root, &nodes, &mut states)?;
        Ok(states)
    }
}

/// Loop of a circuit at a conductor temperature, or at the insulation's rating where none is known yet.
pub(super) fn loop_ohms(site: &Site, wired: &[Wired], index: usize, at_degC: Option<f64>) -> f64 {
    let Some((circuit, (positive, negative, joints))) = site.circuits.get(index).zip(wired.get(index)) else {
        return 0.0;
    };
    let of = |conductor: &Conductor, length: Length| -> f64 {
        let at = ThermodynamicTemperature::new::<degree_celsius>(
            at_degC.unwrap_or_else(|| conductor.insulation.rating_degC()),
        );
        linear_resistance(conductor, at).map_or(0.0, |r| {
            let run: ElectricalResistance = r * length;
            run.get::<ohm>()
        })
    };
    let back = match circuit.way_back {
        Return::Chassis(Some(stated)) => stated.get::<ohm>(),
        Return::Chassis(None) | Return::Conductor => of(negative, circuit.negative_length),
    };
    of(positive, circuit.positive_length) + back + joints.get::<ohm>()
}
