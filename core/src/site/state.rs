//! One state of an island: one bank alone at one voltage, and what each circuit carries in it (R1, R3).

use alloc::collections::BTreeMap;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::power::watt;
use uom::si::ratio::ratio;

use super::graph::{Item, Node, Tree};
use super::model::LoadKind;
use super::system::Site;
use crate::error::Error;
use crate::network::{NodeLoad, NodeState, Source, TreeNode, solve};
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Power};

/// A circuit in one state of the network.
#[derive(Clone, Copy, Debug)]
pub(super) struct State {
    pub circuit: usize,
    pub amps: f64,
    /// Part of it of three hours or more, A.
    pub long: f64,
    /// The largest single load behind it, A.
    pub single: f64,
    /// Volts at the end on the source's side and at the far end.
    pub beginning: f64,
    pub end_volts: f64,
    /// Drop and loop resistance from the source to its beginning.
    pub drop_before: f64,
    pub ohms_before: f64,
    /// The largest start behind it, A on top.
    pub start: Option<f64>,
    /// While its own load starts: volts at its beginning and amperes in it; nought and nought where no voltage
    /// carries the rest of the network any more.
    pub started: Option<(f64, f64)>,
    /// The circuit before it on the way from the source.
    pub before: Option<usize>,
    /// What stands at its far end.
    pub end: Item,
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
        // It draws most while it gives all it may.
        Item::ConverterInput(i) => site.converters.get(i).map_or(0.0, |c| {
            let idle = c.idle.map_or(0.0, |p| p.get::<watt>());
            (c.output * c.limit).get::<watt>() / c.efficiency.get::<ratio>() + idle
        }),
        Item::Bank(_) | Item::Board(_) | Item::Charger(_) | Item::ControllerInput(_) => 0.0,
    }
}

/// Loads of an item as the network sees them. `as_current`: constant powers as the currents they draw at `at`.
pub(super) fn node_load(
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

/// What the solution of an island needs.
pub(super) struct Solver<'a, F> {
    pub site: &'a Site,
    /// Currents drawn at items beside their loads, A.
    pub drawn: &'a BTreeMap<Item, f64>,
    pub nominal: ElectricPotential,
    /// Loop resistance of each circuit, ohm.
    pub ohms: &'a F,
    /// Loads that do not run in this state, by place; none where it is empty.
    pub off: &'a [bool],
}

fn run(nodes: &[TreeNode], emf: ElectricPotential) -> Result<Vec<NodeState>, Error> {
    let mut states = vec![NodeState::default(); nodes.len()];
    // The cut-off voltage is the bank's terminal voltage under load: no resistance behind it.
    let root = Source { emf, resistance: ElectricalResistance::new::<ohm>(0.0) };
    solve(root, nodes, &mut states)?;
    Ok(states)
}

impl<F: Fn(usize) -> f64> Solver<'_, F> {
    pub fn solve(&self, tree: &Tree, emf: ElectricPotential) -> Result<Vec<NodeState>, Error> {
        self.run(tree, emf, None)
    }

    /// The nodes at which branches collapse, each solved by itself: the source holds its terminals.
    pub fn collapses(&self, tree: &Tree, emf: ElectricPotential) -> Vec<usize> {
        let mut branches = Branches::default();
        branches.fill(self, tree);
        let collapsed: Vec<Option<usize>> = branches
            .all
            .iter()
            .map(|branch| match run(branch, emf) {
                Err(Error::Collapse { node, .. }) => Some(node),
                _ => None,
            })
            .collect();
        let places = branches.places.iter().enumerate();
        places
            .filter(|(_, (branch, place))| collapsed.get(*branch).is_some_and(|at| *at == Some(*place)))
            .map(|(node, _)| node)
            .collect()
    }

    /// With constant powers as constant currents: always has a solution, and stands in where there is none.
    pub fn linear(&self, tree: &Tree, emf: ElectricPotential) -> Vec<NodeState> {
        self.run(tree, emf, Some(emf)).unwrap_or_else(|_| vec![NodeState::default(); tree.nodes.len()])
    }

    fn run(
        &self,
        tree: &Tree,
        emf: ElectricPotential,
        as_current: Option<ElectricPotential>,
    ) -> Result<Vec<NodeState>, Error> {
        let nodes = self.nodes(tree, as_current);
        run(&nodes, emf)
    }

    /// Whether an item is a load that does not run.
    fn is_off(&self, item: Item) -> bool {
        matches!(item, Item::Load(i) if self.off.get(i).copied().unwrap_or(false))
    }

    fn nodes(&self, tree: &Tree, as_current: Option<ElectricPotential>) -> Vec<TreeNode> {
        let node = |n: &Node| {
            let mut load = if self.is_off(n.item) {
                NodeLoad { reference: self.nominal, ..NodeLoad::default() }
            } else {
                node_load(self.site, n.item, self.nominal, as_current)
            };
            if let Some(&amps) = self.drawn.get(&n.item) {
                load.current += ElectricCurrent::new::<ampere>(amps);
            }
            TreeNode {
                parent: n.parent,
                resistance: ElectricalResistance::new::<ohm>(n.circuit.map_or(0.0, self.ohms)),
                load,
                source: None,
            }
        };
        tree.nodes.iter().map(node).collect()
    }

    /// The network once more while one node's own load starts (R3: solved): one of a kind draws its start current, an
    /// inverter its surge. Fills `extra` with what comes on top of `running` at the node and on its way.
    ///
    /// The source holds its terminals: of a network that does not collapse only the branch of that node matters.
    fn started(
        &self,
        tree: &Tree,
        branches: &mut Branches,
        index: usize,
        (emf, collapsed): (f64, bool),
        (running, extra): (&[NodeState], &mut [Option<f64>]),
    ) -> Option<(f64, f64)> {
        let node = tree.nodes.get(index)?;
        if self.is_off(node.item) {
            return None;
        }
        let mut load = node_load(self.site, node.item, self.nominal, None);
        match node.item {
            Item::Load(i) => {
                let stated = self.site.loads.get(i)?;
                let rest = 1.0 - 1.0 / f64::from(stated.count.max(1));
                load.power *= rest;
                load.current *= rest;
                load.resistive *= rest;
                load.current += stated.start?;
            }
            Item::Inverter(i) => {
                let inverter = self.site.inverters.get(i)?;
                load.power = inverter.start? / inverter.efficiency;
            }
            _ => return None,
        }
        if let Some(&amps) = self.drawn.get(&node.item) {
            load.current += ElectricCurrent::new::<ampere>(amps);
        }
        // Only now: most nodes start nothing.
        let mut whole;
        let (branch, place) = if collapsed {
            // Another branch may be what collapses, and this start what relieves it.
            whole = self.nodes(tree, None);
            (&mut whole, index)
        } else {
            branches.of(self, tree, index)?
        };
        let starting = branch.get_mut(place)?;
        let usual = core::mem::replace(&mut starting.load, load);
        let above = starting.parent;
        let solved = run(branch, ElectricPotential::new::<volt>(emf));
        branch.get_mut(place)?.load = usual;
        let amps = |states: &[NodeState], at: usize| {
            states.get(at).map_or(0.0, |state| libm::fabs(state.current.get::<ampere>()))
        };
        // Without a solution what it draws on top stands for the whole way.
        let alone = running.get(index).and_then(|own| {
            start(self.site, node.item, libm::fabs(own.current.get::<ampere>()), own.voltage.get::<volt>())
        });
        let (mut here, mut there) = (index, place);
        loop {
            let more = match &solved {
                Ok(solved) => Some((amps(solved, there) - amps(running, here)).max(0.0)),
                Err(_) => alone,
            };
            if let Some(extra) = extra.get_mut(here) {
                *extra = if *extra > more { *extra } else { more };
            }
            if here == 0 {
                break;
            }
            here = tree.nodes.get(here)?.parent;
            there = branch.get(there)?.parent;
        }
        let Ok(solved) = solved else { return Some((0.0, 0.0)) };
        let beginning = solved.get(above)?.voltage.get::<volt>();
        Some((beginning, libm::fabs(solved.get(place)?.current.get::<ampere>())))
    }

    /// What each circuit of a solved tree carries and where its ends stand, behind what is already in `states`.
    /// `collapsed`: no voltage carries the network, and the solution stands in with constant currents.
    pub fn states(
        &self,
        tree: &Tree,
        (solved, collapsed): (&[NodeState], bool),
        emf: f64,
        states: &mut Vec<State>,
    ) {
        let site = self.site;
        let long = continuous_currents(site, self.drawn, tree, solved);
        let single = single_currents(site, tree, solved);
        let mut branches = Branches::default();
        // The largest start or surge at each node or behind it, A on top: one at a time (R16).
        let mut starts: Vec<Option<f64>> = vec![None; tree.nodes.len()];
        let started: Vec<Option<(f64, f64)>> = (0..tree.nodes.len())
            .map(|index| self.started(tree, &mut branches, index, (emf, collapsed), (solved, &mut starts)))
            .collect();
        let mut path_ohms = vec![0.0; tree.nodes.len()];
        for (index, node) in tree.nodes.iter().enumerate() {
            let (Some(circuit), Some(state)) = (node.circuit, solved.get(index)) else { continue };
            let above = solved.get(node.parent).map_or(emf, |s| s.voltage.get::<volt>());
            let ohms_before = path_ohms.get(node.parent).copied().unwrap_or(0.0);
            if let Some(own) = path_ohms.get_mut(index) {
                *own = ohms_before + (self.ohms)(circuit);
            }
            states.push(State {
                circuit,
                amps: libm::fabs(state.current.get::<ampere>()),
                long: long.get(index).copied().unwrap_or(0.0),
                single: single.get(index).copied().unwrap_or(0.0),
                // A collapsed network may fall below zero here; a run begins at some positive voltage.
                beginning: above.max(0.01 * emf),
                end_volts: state.voltage.get::<volt>(),
                drop_before: (emf - above).clamp(0.0, emf),
                ohms_before,
                start: starts.get(index).copied().flatten(),
                started: started.get(index).copied().flatten(),
                before: tree.nodes.get(node.parent).and_then(|p| p.circuit),
                end: node.item,
            });
        }
    }
}

/// Each branch of a tree by itself, behind a root of its own: made where the first load starts.
#[derive(Default)]
struct Branches {
    all: Vec<Vec<TreeNode>>,
    /// For each node of the tree its branch and its place there.
    places: Vec<(usize, usize)>,
}

impl Branches {
    fn fill<F: Fn(usize) -> f64>(&mut self, solver: &Solver<'_, F>, tree: &Tree) {
        if self.places.is_empty() {
            for (index, node) in solver.nodes(tree, None).into_iter().enumerate() {
                let (branch, parent) = match (index, node.parent) {
                    // The root has no branch.
                    (0, _) => (usize::MAX, 0),
                    (_, 0) => {
                        let root = TreeNode { parent: 0, load: NodeLoad::default(), ..node };
                        let root = TreeNode { resistance: ElectricalResistance::default(), ..root };
                        self.all.push(vec![root]);
                        (self.all.len() - 1, 0)
                    }
                    (_, parent) => self.places.get(parent).copied().unwrap_or((usize::MAX, 0)),
                };
                let place = self.all.get_mut(branch).map_or(0, |nodes| {
                    nodes.push(TreeNode { parent, ..node });
                    nodes.len() - 1
                });
                self.places.push((branch, place));
            }
        }
    }

    fn of<F: Fn(usize) -> f64>(
        &mut self,
        solver: &Solver<'_, F>,
        tree: &Tree,
        index: usize,
    ) -> Option<(&mut Vec<TreeNode>, usize)> {
        self.fill(solver, tree);
        let (branch, place) = self.places.get(index).copied()?;
        Some((self.all.get_mut(branch)?, place))
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
            let surge = inverter.start?.get::<watt>() / inverter.efficiency.get::<ratio>() / volts.max(1e-3);
            Some((surge - amps).max(0.0))
        }
        _ => None,
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
            Item::Inverter(_) | Item::ConverterInput(_) => state.current.get::<ampere>(),
            _ => 0.0,
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
    drawn: &BTreeMap<Item, f64>,
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
                Item::Inverter(_) | Item::ConverterInput(_) => state.current.get::<ampere>(),
                _ => 0.0,
            };
            own + drawn.get(&node.item).copied().unwrap_or(0.0)
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
