//! Flows of the plan: currents and voltages in the worst hour, prospective currents at both ends of each circuit.

use alloc::collections::BTreeMap;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::energy::load_of;
use super::fault::{Fault, cold_ohms};
use super::graph::{Graph, Item, Tree, path_to};
use super::model::{CircuitEntry, LoadKind, Return};
use super::plan::sources;
use super::state::{Solver, State};
use super::system::{BankEntry, Site};
use crate::cable::{Conductor, linear_resistance};
use crate::error::Error;
use crate::load::{LoadSet, MaximalSets, maximal_sets};
use crate::network::Source;
use crate::quantity::{ElectricPotential, ElectricalResistance, Length, ThermodynamicTemperature};
use crate::rules::LoadUse;

/// Sets of loads that are solved apart; beyond it all run at once, which is never too little.
const MOST_SETS: usize = 64;

/// What flows in one circuit.
#[derive(Clone, Copy, Debug, PartialEq)]
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
    /// One of the banks has no stated fault current.
    pub fault_by_thumb: bool,
    /// Weakest sources at both ends.
    pub weakest_at_beginning: Option<Source>,
    pub weakest_at_end: Option<Source>,
    /// Current that comes on top while the load at the far end starts, A.
    pub start: Option<f64>,
    /// Volts at its beginning and amperes in it while its own load starts.
    pub started: Option<(f64, f64)>,
    /// Loop resistance from the source to the circuit's beginning, ohm.
    pub ohms_before: f64,
    /// What stands at its end, seen from the source.
    pub end: Option<Item>,
    /// It is its sources, not its loads, that drive the design current.
    pub charged: bool,
    /// Greatest current of a source that limits itself, where the circuit leaves one, A.
    pub limit: Option<f64>,
}

/// What is done about a network that collapses.
pub(super) struct Relief<'a> {
    /// Whether something on a path that collapses can grow: then the rest need not be known.
    pub can: &'a dyn Fn(&[usize]) -> bool,
    /// Branches know nothing of each other: all are relieved at once, if each can be; else the first.
    pub at_once: bool,
}

/// Conductors, positive and negative, and joints of a circuit.
pub(super) type Wired = (Conductor, Conductor, ElectricalResistance);

/// The flows of a whole site.
pub(super) struct Flows {
    /// In the order of the document.
    pub circuits: Vec<Flow>,
    /// The first collapse met: the circuits from the source to it.
    pub collapse: Option<Vec<usize>>,
    /// Where that is to be relieved, the paths to those that collapse beside it; nothing else is filled in then.
    pub also: Vec<Vec<usize>>,
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
    /// For each circuit the number of the branch it lies on: all that hangs on one circuit at a source.
    pub fn branches(&self) -> Vec<usize> {
        let mut branches: Vec<Option<usize>> = vec![None; self.before.len()];
        let mut count = 0;
        for circuit in 0..self.before.len() {
            // Up to what is known or stands first, then down again.
            let mut path = vec![circuit];
            let mut known = branches.get(circuit).copied().flatten();
            let mut here = circuit;
            while let (None, Some(before)) = (known, self.before.get(here).copied().flatten()) {
                here = before;
                known = branches.get(here).copied().flatten();
                path.push(here);
            }
            let branch = known.unwrap_or_else(|| {
                count += 1;
                count - 1
            });
            for circuit in path {
                if let Some(slot) = branches.get_mut(circuit) {
                    *slot = Some(branch);
                }
            }
        }
        branches.into_iter().map(|b| b.unwrap_or(0)).collect()
    }

    pub fn new(site: &Site, network: &Network, trees: &[Tree], loops: &Loops, relief: &Relief<'_>) -> Self {
        let graph = &network.graph;
        let banks = sources(site);
        let ohms = |index: usize| loops.now(index);
        let mut flows = Self {
            circuits: vec![none(); site.circuits.len()],
            collapse: None,
            also: Vec::new(),
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
            flows.take_faults(tree, &banks, loops);
        }
        let drawn = graph.drawn_by_links();
        let Some(mut volts) = flows.take_states(site, network, (&drawn, &drawn), &ohms, relief) else {
            return flows;
        };
        // A stated current above what the loads draw flows to the circuit's end, through all before it; at the highest
        // voltage it is left out, since it would take volts, and so current, from resistive loads.
        let mut at_low = drawn.clone();
        let mut above_loads = false;
        for (index, (flow, circuit)) in flows.circuits.iter().zip(&site.circuits).enumerate() {
            let (Some(stated), Some(end)) = (circuit.current, flow.end) else { continue };
            if graph.links.contains_key(&index) {
                continue;
            }
            let stated = stated.get::<ampere>();
            let low = flow.low_current.unwrap_or(flow.current);
            *at_low.entry(end).or_insert(0.0) += (stated - low).max(0.0);
            above_loads |= stated > low;
        }
        if above_loads {
            match flows.take_states(site, network, (&at_low, &drawn), &ohms, relief) {
                Some(again) => volts = again,
                None => return flows,
            }
        }
        flows.take_links(site, graph, trees, &volts);
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
        for tree in trees {
            flows.take_chargers(site, tree);
            flows.take_limits(site, tree);
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
            // A cable from a further bank is a feeder of the board it leads to, whichever way the tree hangs.
            let consumer = if node.reversed { above.unwrap_or(node.item) } else { node.item };
            match consumer {
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
                Item::ConverterInput(i) => {
                    flow.least_voltage =
                        site.converters.get(i).and_then(|c| c.least).map(|v| v.get::<volt>());
                }
                Item::Bank(_) | Item::Charger(_) | Item::ControllerInput(_) => {}
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

    fn note_collapse(&mut self, tree: &Tree, error: &Error) {
        let node = match error {
            Error::Collapse { node, .. } => *node,
            _ => 0,
        };
        if self.collapse.is_none() {
            self.collapse = Some(path_to(tree, node));
        }
        if let Some(circuit) = tree.nodes.get(node).and_then(|n| n.circuit) {
            self.collapsed.push(circuit);
        }
    }

    /// Solves every island with each of its banks alone, at cut-off and at its highest voltage, and takes for each
    /// circuit the greatest current, and the voltages of the state in which its end stands lowest. Returns the
    /// voltages at the items with the first bank of their island, where there are links; `None` where the network
    /// collapses and can be relieved.
    fn take_states(
        &mut self,
        site: &Site,
        network: &Network,
        (at_low, at_high): (&BTreeMap<Item, f64>, &BTreeMap<Item, f64>),
        ohms: &impl Fn(usize) -> f64,
        relief: &Relief<'_>,
    ) -> Option<BTreeMap<Item, f64>> {
        let mut volts = BTreeMap::new();
        let mut low: Vec<State> = Vec::with_capacity(site.circuits.len());
        let mut high = Vec::new();
        let resistive = any_resistive(site);
        for island in &network.islands {
            for (off, (bank, tree)) in
                island.sets.iter().flat_map(|off| island.seen_from.iter().map(move |seen| (off, seen)))
            {
                let Some(bank) = site.banks.get(*bank) else { continue };
                let solver = Solver { site, drawn: at_low, nominal: island.nominal, ohms, off };
                let solver_high = Solver { drawn: at_high, ..solver };
                let solution = solver.solve(tree, bank.cut_off);
                let collapsed = solution.is_err();
                if let Err(error) = &solution {
                    self.note_collapse(tree, error);
                    if self.collapse.as_ref().is_some_and(|path| (relief.can)(path)) {
                        if relief.at_once {
                            let nodes = solver.collapses(tree, bank.cut_off).into_iter();
                            let all: Vec<Vec<usize>> = nodes.map(|node| path_to(tree, node)).collect();
                            if all.iter().all(|path| (relief.can)(path)) {
                                self.also = all;
                            }
                        }
                        return None;
                    }
                }
                let solved = solution.unwrap_or_else(|_| solver.linear(tree, bank.cut_off));
                solver.states(tree, (&solved, collapsed), bank.cut_off.get::<volt>(), &mut low);
                // Only links read them.
                if !network.graph.links.is_empty() {
                    for (node, state) in tree.nodes.iter().zip(&solved) {
                        volts.entry(node.item).or_insert(state.voltage.get::<volt>());
                    }
                }
                if resistive && let Ok(solved) = solver_high.solve(tree, bank.highest) {
                    solver_high.states(tree, (&solved, false), bank.highest.get::<volt>(), &mut high);
                }
            }
        }
        // By circuit, in the order of the states.
        low.sort_by_key(|state| state.circuit);
        high.sort_by_key(|state| state.circuit);
        let (mut low, mut high) = (low.as_slice(), high.as_slice());
        for (index, (flow, before)) in self.circuits.iter_mut().zip(&mut self.before).enumerate() {
            let (low, high) = (first_of(&mut low, index), first_of(&mut high, index));
            flow.take(low, high);
            if let Some(lowest) = lowest(low) {
                *before = lowest.before;
            }
        }
        Some(volts)
    }
}

/// Takes the states of a circuit from the front.
fn first_of<'a>(states: &mut &'a [State], circuit: usize) -> &'a [State] {
    let count = states.iter().take_while(|state| state.circuit == circuit).count();
    let (own, rest) = states.split_at_checked(count).unwrap_or((&[], *states));
    *states = rest;
    own
}

/// What of a site's network does not depend on conductors: found once, read in every pass.
pub(super) struct Network {
    pub graph: Graph,
    islands: Vec<Island>,
}

struct Island {
    /// Nominal voltage of its first bank.
    nominal: ElectricPotential,
    /// Loads that do not run, for each of the largest sets that meet.
    sets: Vec<Vec<bool>>,
    /// The island as each of its banks sees it.
    seen_from: Vec<(usize, Tree)>,
}

impl Network {
    pub fn new(site: &Site) -> Self {
        let graph = Graph::new(site);
        let island = |island: &Tree| {
            let first = root_bank(site, island)?;
            let seen = |bank: usize| Some((bank, graph.island_from(bank)?));
            let banks = island.nodes.iter().filter_map(|n| match n.item {
                Item::Bank(bank) => Some(bank),
                _ => None,
            });
            Some(Island {
                nominal: first.nominal,
                sets: together(site, island),
                seen_from: banks.filter_map(seen).collect(),
            })
        };
        let islands = graph.islands().iter().filter_map(island).collect();
        Self { graph, islands }
    }
}

/// Loop resistances of all circuits, ohm: kept from pass to pass where nothing changed.
#[derive(Default)]
pub(super) struct Loops(Vec<Loop>);

struct Loop {
    wired: Wired,
    at_degC: Option<f64>,
    now: f64,
    hot: f64,
    cold: f64,
}

impl Loops {
    /// Takes each circuit's conductors and their temperature.
    pub fn update(&mut self, site: &Site, all: impl Iterator<Item = (Wired, Option<f64>)>) {
        for (index, ((wired, at_degC), circuit)) in all.zip(&site.circuits).enumerate() {
            let known = self.0.get_mut(index);
            if known.as_ref().is_some_and(|k| k.at_degC == at_degC && k.wired == wired) {
                continue;
            }
            let now = loop_ohms(circuit, &wired, at_degC);
            let same_metal = |k: &Loop| (k.wired.0, k.wired.1) == (wired.0, wired.1);
            let cold = match &known {
                Some(k) if same_metal(k) => k.cold,
                _ => cold_ohms(site, circuit, &wired),
            };
            let hot = match &known {
                Some(k) if k.wired == wired => k.hot,
                _ => loop_ohms(circuit, &wired, None),
            };
            let new = Loop { wired, at_degC, now, hot, cold };
            match known {
                Some(known) => *known = new,
                None => self.0.push(new),
            }
        }
    }

    fn of(&self, circuit: usize, pick: fn(&Loop) -> f64) -> f64 {
        self.0.get(circuit).map_or(0.0, pick)
    }

    /// At its temperature, or at the insulation's rating where none is known yet.
    pub fn now(&self, circuit: usize) -> f64 {
        self.of(circuit, |l| l.now)
    }

    /// At the insulation's rating.
    pub fn hot(&self, circuit: usize) -> f64 {
        self.of(circuit, |l| l.hot)
    }

    /// The least it can be.
    pub fn cold(&self, circuit: usize) -> f64 {
        self.of(circuit, |l| l.cold)
    }
}

impl Flow {
    fn take(&mut self, low: &[State], high: &[State]) {
        let greatest = low.iter().chain(high).max_by(|a, b| a.amps.total_cmp(&b.amps));
        let (Some(greatest), Some(lowest)) = (greatest, lowest(low)) else {
            self.beginning = self.nominal;
            return;
        };
        self.current = greatest.amps;
        self.continuous_share =
            if greatest.amps > 0.0 { (greatest.long / greatest.amps).clamp(0.0, 1.0) } else { 1.0 };
        self.low_current = (lowest.amps < greatest.amps * (1.0 - 1e-9)).then_some(lowest.amps);
        self.single = low.iter().chain(high).map(|s| s.single).fold(0.0, f64::max);
        self.beginning = lowest.beginning;
        self.drop_before = lowest.drop_before;
        self.ohms_before = lowest.ohms_before;
        self.start = lowest.start;
        self.started = lowest.started;
        self.end = Some(lowest.end);
    }
}

/// Which loads do not run, for each of the largest sets of loads that meet; one list without any where no load states
/// its times, or where there are too many to tell apart: then all run at once.
fn together(site: &Site, island: &Tree) -> Vec<Vec<bool>> {
    let all = || vec![Vec::new()];
    let loads: Vec<usize> = island
        .nodes
        .iter()
        .filter_map(|n| match n.item {
            Item::Load(i) => Some(i),
            _ => None,
        })
        .collect();
    let is_timed =
        |&i: &usize| site.loads.get(i).is_some_and(|l| !l.use_of.at.is_empty() || l.use_of.months.is_some());
    if loads.len() > LoadSet::ROOM || !loads.iter().any(is_timed) {
        return all();
    }
    let Some(bank) = root_bank(site, island) else { return all() };
    let occasion = |&i: &usize| {
        let load = load_of(site, site.loads.get(i)?, bank.nominal).ok()?;
        load.occasion(None).ok()
    };
    let Some(occasions) = loads.iter().map(occasion).collect::<Option<Vec<_>>>() else { return all() };
    let mut sets = [LoadSet::default(); MOST_SETS];
    match maximal_sets(&occasions, &mut sets) {
        MaximalSets::AllAtOnce | MaximalSets::Exact(0) => all(),
        MaximalSets::Exact(count) => sets
            .iter()
            .take(count)
            .map(|set| {
                let mut off = vec![false; site.loads.len()];
                for (place, &load) in loads.iter().enumerate() {
                    if let Some(slot) = off.get_mut(load) {
                        *slot = !set.contains(place);
                    }
                }
                off
            })
            .collect(),
    }
}

/// The state in which a circuit's end stands lowest, of those in which it carries current worth the name: where another
/// bank feeds, a cable may lie dead beside the current.
fn lowest(states: &[State]) -> Option<&State> {
    let most = states.iter().map(|s| s.amps).fold(0.0, f64::max);
    states.iter().filter(|s| s.amps >= 0.2 * most).min_by(|a, b| a.end_volts.total_cmp(&b.end_volts))
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
        fault_by_thumb: false,
        weakest_at_beginning: None,
        weakest_at_end: None,
        start: None,
        started: None,
        ohms_before: 0.0,
        end: None,
        charged: false,
        limit: None,
    }
}

fn root_bank<'a>(site: &'a Site, tree: &Tree) -> Option<&'a BankEntry> {
    match tree.nodes.first()?.item {
        Item::Bank(root) => site.banks.get(root),
        _ => None,
    }
}

fn any_resistive(site: &Site) -> bool {
    site.loads.iter().any(|l| l.kind == LoadKind::Resistive)
}

/// Loop of a circuit at a conductor temperature, or at the insulation's rating where none is known yet.
fn loop_ohms(circuit: &CircuitEntry, (positive, negative, joints): &Wired, at_degC: Option<f64>) -> f64 {
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
