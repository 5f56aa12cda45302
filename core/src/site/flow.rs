//! Flows of the plan: currents and voltages in the worst hour, prospective currents at both ends of each circuit.

use alloc::collections::BTreeMap;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::energy::load_of;
use super::fault::Fault;
use super::graph::{Graph, Item, Tree, path_to};
use super::model::{LoadKind, Return};
use super::plan::sources;
use super::state::{Solver, State};
use super::system::{BankEntry, Site};
use crate::cable::{Conductor, linear_resistance};
use crate::error::Error;
use crate::load::{LoadSet, MaximalSets, maximal_sets};
use crate::network::Source;
use crate::quantity::{ElectricalResistance, Length, ThermodynamicTemperature};
use crate::rules::LoadUse;

/// Sets of loads that are solved apart; beyond it all run at once, which is never too little.
const MOST_SETS: usize = 64;

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
        // Once a pass: every state of the network reads them.
        let ohms: Vec<f64> = (0..site.circuits.len())
            .map(|index| loop_ohms(site, wired, index, temperatures.get(index).copied().flatten()))
            .collect();
        let ohms = |index: usize| ohms.get(index).copied().unwrap_or(0.0);
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
        let drawn = graph.drawn_by_links();
        let mut volts = flows.take_states(site, graph, (&drawn, &drawn), &ohms);
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
            volts = flows.take_states(site, graph, (&at_low, &drawn), &ohms);
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

    /// Solves every island with each of its banks alone, at cut-off and at its highest voltage, and takes for each
    /// circuit the greatest current, and the voltages of the state in which its end stands lowest. Returns the
    /// voltages at the items with the first bank of their island.
    fn take_states(
        &mut self,
        site: &Site,
        graph: &Graph,
        (at_low, at_high): (&BTreeMap<Item, f64>, &BTreeMap<Item, f64>),
        ohms: &impl Fn(usize) -> f64,
    ) -> BTreeMap<Item, f64> {
        let mut volts = BTreeMap::new();
        let mut low: Vec<Vec<State>> = vec![Vec::new(); site.circuits.len()];
        let mut high = low.clone();
        for island in &graph.islands() {
            let Some(first) = root_bank(site, island) else { continue };
            let sets = together(site, island);
            for (off, bank) in sets.iter().flat_map(|off| island.nodes.iter().map(move |n| (off, n.item))) {
                let Item::Bank(bank) = bank else { continue };
                let solver = Solver { site, drawn: at_low, nominal: first.nominal, ohms, off };
                let solver_high = Solver { drawn: at_high, ..solver };
                let (Some(tree), Some(bank)) = (graph.island_from(bank), site.banks.get(bank)) else {
                    continue;
                };
                let solved = solver.solve(&tree, bank.cut_off).unwrap_or_else(|error| {
                    self.note_collapse(&tree, error);
                    solver.linear(&tree, bank.cut_off)
                });
                for state in solver.states(&tree, &solved, bank.cut_off.get::<volt>()) {
                    if let Some(list) = low.get_mut(state.circuit) {
                        list.push(state);
                    }
                }
                for (node, state) in tree.nodes.iter().zip(&solved) {
                    volts.entry(node.item).or_insert(state.voltage.get::<volt>());
                }
                if any_resistive(site)
                    && let Ok(solved) = solver_high.solve(&tree, bank.highest)
                {
                    for state in solver_high.states(&tree, &solved, bank.highest.get::<volt>()) {
                        if let Some(list) = high.get_mut(state.circuit) {
                            list.push(state);
                        }
                    }
                }
            }
        }
        for (index, (low, high)) in low.iter().zip(&high).enumerate() {
            let Some(flow) = self.circuits.get_mut(index) else { continue };
            flow.take(low, high);
            if let (Some(slot), Some(lowest)) = (self.before.get_mut(index), lowest(low)) {
                *slot = lowest.before;
            }
        }
        volts
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
