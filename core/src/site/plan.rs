//! The plan: conductors and devices of every circuit, stated or designed, with the flows they result in.
//!
//! What is stated stays. What is left out starts at the smallest size on offer and only ever grows until no check
//! of the plan fails: so it ends, and gives the same result every time.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::bank;
use super::fault::Fault;
use super::flow::{Flow, Flows, Loops, Network, Relief};
use super::graph::{Item, Tree};
use super::grow::{Beside, add_far_devices, can_grow, enlarge, relieve_collapse, restart_leaves};
use super::model::{CircuitEntry, LoadEntry, Return};
use super::offers::{Offers, complete, joints};
use super::read::{Problem, Problems};
use super::smaller::{Neighbours, explain};
use super::system::Site;
use super::trials::Trials;
use crate::cable::Conductor;
use crate::circuit::{Checked, Demand, Judgement, Outcome, Run, judge};
use crate::device::Supply;
use crate::error::Error;
use crate::protection::{End, Feeds, Guard, feeds};
use crate::quantity::{ConductorSize, ElectricCurrent, ElectricPotential, ElectricalResistance, Ratio};
use crate::rules::Check;

/// A device in its place.
#[derive(Clone, Debug)]
pub(super) struct Fitted {
    pub name: String,
    pub guard: Guard,
    /// The end it guards.
    pub end: End,
    /// Its entry in the circuit, where the document has one.
    pub entry: Option<usize>,
    /// Family or rating were chosen here.
    pub designed: bool,
    /// A plain part, not on any shelf: voltage and breaking capacity are what must be bought, not what is known.
    pub specified: bool,
}

/// A smaller size and the check that refused it.
#[derive(Clone, Copy, Debug)]
pub(super) struct Refused {
    pub size: ConductorSize,
    pub by: Reason,
}

/// Why a size was refused.
#[derive(Clone, Copy, Debug)]
pub(super) enum Reason {
    /// A check of its own fails.
    Check(Checked),
    /// A check of another circuit fails, on whose path this one lies.
    Path(Checked, usize),
    /// Its constant power cannot be carried.
    Error(Error),
    /// By these numbers it would pass; with the currents that it would cause the whole plan does not.
    Together,
}

/// One circuit of the plan.
#[derive(Clone, Debug)]
pub(super) struct Planned {
    pub positive: Conductor,
    pub negative: Conductor,
    /// Place among the sizes on offer; `None` where the size is stated.
    offered: Option<usize>,
    pub refused: Vec<Refused>,
    pub fitted: Vec<Fitted>,
    /// Ends of the circuit, in its own direction, that can feed a fault on it.
    pub feeds: Feeds,
    pub run: Run,
    pub judgement: Judgement,
    /// Judgement of each further device; same order as `fitted`, its first left out.
    pub further: Vec<Judgement>,
    /// Its `to` lies on the source's side.
    pub reversed: bool,
    /// Circuit whose device guards this one from further up, where it has none of its own.
    pub guarded_by: Option<usize>,
    pub flow: Flow,
    /// A device at its far end was asked for.
    far: bool,
    /// The circuit with a device next further up, and that device.
    above: Option<(usize, Guard)>,
}

impl Planned {
    /// Whether a task is the one that was judged: the same numbers give the same result.
    fn answers(&self, task: &Task<'_>) -> bool {
        let draft = task.draft;
        self.flow == task.flow
            && self.offered == draft.offered
            && self.positive == draft.positive
            && self.negative == draft.negative
            && self.run.joints == draft.joints
            && self.far == task.far
            && self.above == task.above
    }

    pub fn designed(&self) -> bool {
        self.offered.is_some()
    }
}

/// The whole plan.
pub(super) struct Plan {
    pub trees: Vec<Tree>,
    /// In the order of the document; `None` for a circuit that hangs on no bank.
    pub circuits: Vec<Option<Planned>>,
    /// Circuits between banks that carry a stated current.
    pub links: Vec<usize>,
    /// Circuits where the network cannot carry its constant-power loads.
    pub collapsed: Vec<usize>,
}

/// A circuit before it is judged.
#[derive(Clone)]
pub(super) struct Draft {
    pub positive: Conductor,
    pub negative: Conductor,
    pub offered: Option<usize>,
    /// What can be had for it, smallest first.
    pub sizes: Vec<Conductor>,
    pub joints: ElectricalResistance,
}

/// Passes that temperatures take to find themselves.
const FIND_TEMPERATURES: usize = 6;
/// Passes times circuits in which one shared run alone grows, in the order of the document; in a site larger than that,
/// parts of the network that have nothing in common then grow at once.
const ONE_BY_ONE: usize = 50_000;

/// So many times as many: then also parts that have nothing in common but what is stated.
const MANY: usize = 16;

/// Makes the plan.
pub(super) fn plan(site: &Site) -> Result<Plan, Problems> {
    let alone = ONE_BY_ONE.checked_div(site.circuits.len()).unwrap_or(0).max(FIND_TEMPERATURES);
    // What is refused is told as it stands where one run alone grows at a time.
    plan_by(site, alone).or_else(|_| plan_by(site, usize::MAX))
}

/// Makes the plan; after so many passes parts that have nothing in common grow at once.
fn plan_by(site: &Site, alone: usize) -> Result<Plan, Problems> {
    let network = Network::new(site);
    let trees = network.graph.trees();
    let offers = Offers::new(site);
    let mut problems = Vec::new();
    let mut drafts: Vec<Draft> = Vec::with_capacity(site.circuits.len());
    for circuit in &site.circuits {
        match offers.draft(site, circuit) {
            Ok(draft) => drafts.push(draft),
            Err(problem) => problems.push(problem),
        }
    }
    if !problems.is_empty() {
        return Err(Problems(problems, 0));
    }
    let feeding = feeding_ends(site, &trees);

    // Each step enlarges at least one circuit; none is enlarged more often than there are sizes.
    // Then each far end gets at most one device.
    let most = drafts.iter().map(|d| 2 * d.sizes.len() + 2).sum::<usize>() + 4;
    let mut temperatures: Vec<Option<f64>> = vec![None; site.circuits.len()];
    let (mut shared_found, mut trimmed, mut settled) = (false, false, false);
    // Far ends of designed circuits that no device further away guards well enough.
    let mut far_devices = vec![false; site.circuits.len()];
    // What the whole plan said to the next smaller size, where the circuit alone had nothing against it.
    let mut tried_out: Vec<Option<Reason>> = vec![None; site.circuits.len()];
    let mut planned: Vec<Option<Planned>> = Vec::new();
    planned.resize_with(site.circuits.len(), || None);
    let fixed = (trees.as_slice(), feeding.as_slice(), &offers);
    let mut loops = Loops::default();
    let mut flows_of = |drafts: &[Draft], temperatures: &[Option<f64>], relieve: bool, at_once: bool| {
        let wired = drafts.iter().map(|d| (d.positive, d.negative, d.joints));
        loops.update(site, wired.zip(temperatures.iter().copied()));
        let can = |path: &[usize]| relieve && path.iter().any(|&c| can_grow(drafts, c));
        Flows::new(site, &network, &trees, &loops, &Relief { can: &can, at_once })
    };
    // Passes since all was last begun anew.
    let mut passes = 0_usize;
    // Passes that only relieved what collapsed.
    let mut reliefs = 0;
    for _ in 0..=most {
        let flows = flows_of(&drafts, &temperatures, true, reliefs > alone);
        if relieve_collapse(&flows, &mut drafts) {
            reliefs += 1;
            settled = false;
            continue;
        }
        judge_all(site, fixed, (&drafts, &far_devices), &flows, &mut planned, |_, _| {})
            .map_err(|problem| Problems(vec![problem], 0))?;
        for ((draft, circuit), done) in drafts.iter_mut().zip(&site.circuits).zip(&planned) {
            draft.joints = joints(site, circuit, done.as_ref().map_or(&[], |p| p.fitted.as_slice()));
        }
        for (slot, done) in temperatures.iter_mut().zip(&planned) {
            *slot = done.as_ref().map(|p| p.judgement.temperature.get::<degree_celsius>());
        }
        let beside = match passes.checked_div(alone) {
            Some(0) | None => Beside::Nowhere,
            Some(1..MANY) => Beside::OtherPaths,
            Some(_) => Beside::OtherRuns,
        };
        passes += 1;
        if enlarge(site, &mut drafts, &planned, &flows, beside)? {
            settled = false;
        } else if !shared_found {
            // Shared runs are found; what hangs on them alone starts anew beside them, and grows no more than it must.
            (shared_found, settled, passes) = (true, false, 0);
            restart_leaves(&trees, &mut drafts);
        } else if add_far_devices(site, &trees, &planned, &mut far_devices) {
            settled = false;
        } else if !settled {
            // Once more with the temperatures and devices of this pass: what is reported is what was judged.
            settled = true;
        } else if !trimmed {
            // Growing one by one may leave a shared run a size larger than what came after it needs.
            trimmed = true;
            let candidates: Vec<usize> = {
                let own = Neighbours::new(site, &offers, &planned, &flows);
                (0..drafts.len()).filter(|&c| own.spare(&drafts, c)).collect()
            };
            let mut trials = Trials::new(candidates, &planned, &flows, site.banks.len() == 1);
            while let Some(round) = trials.next(&mut drafts) {
                let tried = flows_of(&drafts, &temperatures, false, false);
                let mut before = Vec::new();
                let judged =
                    judge_all(site, fixed, (&drafts, &far_devices), &tried, &mut planned, |circuit, done| {
                        before.push((circuit, done));
                    });
                let fits = judged.is_ok() && tried.collapse.is_none();
                let single = round.is_single();
                let kept = trials.conclude(round, fits, &planned, &mut drafts, &mut tried_out);
                settled &= !kept;
                if single && !kept {
                    judged.map_err(|problem| Problems(vec![problem], 0))?;
                }
                // What is not kept is judged as it was before.
                for (circuit, done) in before {
                    if !trials.keeps(circuit)
                        && let Some(slot) = planned.get_mut(circuit)
                    {
                        *slot = done;
                    }
                }
            }
        } else {
            let mut circuits = planned;
            explain(site, &offers, (&drafts, &tried_out), &flows, &mut circuits);
            let links = network.graph.links.keys().copied().collect();
            return Ok(Plan { trees, circuits, links, collapsed: flows.collapsed });
        }
    }
    Err(Problems(
        vec![Problem {
            line: 0,
            place: "design".to_string(),
            text: "the design did not settle; state the sizes of some circuits".to_string(),
        }],
        0,
    ))
}

impl Draft {
    /// Takes a size on offer; `false` where there is none.
    pub fn take(&mut self, place: usize) -> bool {
        let Some(conductor) = self.sizes.get(place) else { return false };
        self.offered = Some(place);
        self.positive = *conductor;
        self.negative = *conductor;
        true
    }

    /// The same one size smaller.
    pub fn thinner(&self) -> Option<Self> {
        let place = self.offered?.checked_sub(1)?;
        let mut thinner = self.clone();
        thinner.take(place).then_some(thinner)
    }
}

/// Ends of each circuit that can feed, in the circuit's own direction.
fn feeding_ends(site: &Site, trees: &[Tree]) -> Vec<Feeds> {
    let mut all = vec![Feeds::default(); site.circuits.len()];
    for tree in trees {
        let parents: Vec<usize> = tree.nodes.iter().map(|n| n.parent).collect();
        let sources: Vec<bool> = tree.nodes.iter().map(|n| matches!(n.item, Item::Bank(_))).collect();
        let mut ends = vec![Feeds::default(); tree.nodes.len()];
        if feeds(&parents, &sources, &mut ends).is_err() {
            continue;
        }
        // What leaves a source that limits itself needs no device there: its conductor bears all that it can give.
        let limited = |node: &super::graph::Node| {
            node.parent == 0
                && matches!(tree.nodes.first().map(|n| n.item),
                    Some(Item::Bank(i)) if site.banks.get(i).is_some_and(|b| !b.is_battery()))
        };
        for (node, end) in tree.nodes.iter().zip(&ends) {
            let end = &if limited(node) { Feeds { from: false, ..*end } } else { *end };
            if let Some(slot) = node.circuit.and_then(|c| all.get_mut(c)) {
                *slot = if node.reversed { Feeds { from: end.to, to: end.from } } else { *end };
            }
        }
    }
    all
}

/// Judges what is not judged yet with these flows and drafts; hands over what each judgement takes the place of.
fn judge_all(
    site: &Site,
    (trees, feeding, offers): (&[Tree], &[Feeds], &Offers),
    (drafts, far_devices): (&[Draft], &[bool]),
    flows: &Flows,
    planned: &mut [Option<Planned>],
    mut replaced: impl FnMut(usize, Option<Planned>),
) -> Result<(), Problem> {
    for tree in trees {
        for node in &tree.nodes {
            let Some(index) = node.circuit else { continue };
            let parts =
                (site.circuits.get(index), drafts.get(index), feeding.get(index), flows.circuits.get(index));
            let (Some(circuit), Some(draft), Some(&ends), Some(&flow)) = parts else { continue };
            // The device further up, for a circuit that has none of its own at its feeding end.
            let above = tree.nodes.get(node.parent).and_then(|p| p.circuit).and_then(|above| {
                let over = planned.get(above)?.as_ref()?;
                match over.fitted.first() {
                    Some(first) => Some((above, first.guard)),
                    None => over.above,
                }
            });
            let child = match node.item {
                Item::Load(i) => site.loads.get(i),
                _ => None,
            };
            // A bank at the far end feeds at once; a board may be guarded by the devices of what feeds it.
            let far = matches!(node.item, Item::Bank(_)) || far_devices.get(index).copied().unwrap_or(false);
            let task = Task { index, circuit, draft, ends, flow, reversed: node.reversed, above, far, child };
            let Some(slot) = planned.get_mut(index) else { continue };
            if slot.as_ref().is_some_and(|done| done.answers(&task)) {
                continue;
            }
            let done = judge_one(site, offers, &task).map_err(|error| Problem {
                line: circuit.line,
                place: format!("[[circuit]] \"{}\"", circuit.name),
                text: error.to_string(),
            })?;
            replaced(index, slot.replace(done));
        }
    }
    Ok(())
}

struct Task<'a> {
    index: usize,
    circuit: &'a CircuitEntry,
    draft: &'a Draft,
    ends: Feeds,
    flow: Flow,
    reversed: bool,
    /// The circuit with a device next further up, and that device.
    above: Option<(usize, Guard)>,
    /// A designed circuit gets a device at its far end too.
    far: bool,
    /// The load at its far end, if it is one.
    child: Option<&'a LoadEntry>,
}

fn judge_one(site: &Site, offers: &Offers, task: &Task<'_>) -> Result<Planned, Error> {
    let &Task { index, circuit, draft, ends, flow, reversed, above, far, child } = task;
    let run = run_of(site, circuit, draft, &flow);
    let bare = judge(&run, &draft.positive, &draft.negative, None)?;
    // The device at the end that the source feeds comes first; further ones see their own fault currents.
    let at = |end: End| {
        let mut seen = run;
        let parent_side = (end == End::From) != reversed;
        if !parent_side {
            (seen.greatest_fault, seen.fault_floor) = Fault::parts(flow.fault_at_end);
            // Nothing feeds from there: the least fault is the one beyond it, through this run.
            seen.weakest_source = flow.weakest_at_end.or(flow.weakest_at_beginning);
        }
        seen
    };
    let (fitted, judged): (Vec<Fitted>, Vec<Option<Judgement>>) =
        fit(circuit, index, offers, &at, draft, &bare, (ends, far), reversed).into_iter().unzip();
    let mut judged = judged.into_iter();
    // What was judged to choose a device is not judged again.
    let mut own = |fitted: &Fitted| match judged.next().flatten() {
        Some(judged) => Ok(judged),
        None => judge(&at(fitted.end), &draft.positive, &draft.negative, Some(&fitted.guard)),
    };
    let mut guarded_by = None;
    let judgement = match (fitted.first(), above) {
        (Some(first), _) => own(first)?,
        (None, Some((above, guard))) => {
            guarded_by = Some(above);
            let mut judged = judge(&run, &draft.positive, &draft.negative, Some(&guard))?;
            // Its terminals and supply are judged where it sits.
            judged.checks.retain(|c| {
                !matches!(
                    c.check,
                    Check::Termination | Check::DeviceSupply | Check::DeviceCarries | Check::Breaking
                )
            });
            judged
        }
        (None, None) => bare,
    };
    let further = fitted.iter().skip(1).map(own).collect::<Result<Vec<_>, _>>()?;
    let mut judgement = judgement;
    if circuit.starts_engine(child) && site.rules.exempts_cranking() {
        // Engine starting lasts seconds; the tables are for continuous current.
        for checked in &mut judgement.checks {
            if matches!(checked.check, Check::Ampacity | Check::TerminalColumn) {
                checked.outcome = Outcome::NotChecked;
                checked.what = "seconds of engine starting against a table for continuous current";
            }
        }
    }
    if let Some(limit) = flow.limit {
        by_limit(&mut judgement, limit);
    }
    if circuit.way_back == Return::Chassis(None) {
        // On an assumed return nothing is known.
        for checked in &mut judgement.checks {
            if matches!(
                checked.check,
                Check::Drop | Check::LoadVoltage | Check::StartVoltage | Check::LeastFault
            ) {
                checked.outcome = Outcome::NotChecked;
                checked.what =
                    "the resistance of the chassis as a return is not stated: drop, volts and least fault";
            }
        }
    }
    Ok(Planned {
        positive: draft.positive,
        negative: draft.negative,
        offered: draft.offered,
        refused: Vec::new(),
        fitted,
        feeds: ends,
        run,
        judgement,
        further,
        reversed,
        guarded_by,
        flow,
        far,
        above,
    })
}

/// A source that cannot deliver the operating current of a device: its own limit protects the conductor, or nothing
/// does (R6).
fn by_limit(judgement: &mut Judgement, limit: f64) {
    let Some(ampacity) = judgement.ampacity.as_ref().map(|a| a.corrected.get::<ampere>()) else { return };
    for checked in &mut judgement.checks {
        if checked.check == Check::LeastFault && checked.outcome != Outcome::Passed && limit <= ampacity {
            *checked = Checked {
                outcome: Outcome::Passed,
                actual: limit,
                limit: ampacity,
                unit: "A",
                relation: crate::circuit::Relation::AtMost,
                what: "greatest current of the source, which no device can see, against the conductor's capacity",
                ..*checked
            };
        }
    }
}

/// The circuit as a run of the circuit floor.
fn run_of(site: &Site, circuit: &CircuitEntry, draft: &Draft, flow: &Flow) -> Run {
    let current = ElectricCurrent::new::<ampere>(flow.current);
    let continuous = current * Ratio::new::<ratio>(flow.continuous_share);
    Run {
        rules: site.rules,
        earthing: site.earthing,
        nominal: ElectricPotential::new::<volt>(flow.nominal),
        highest: ElectricPotential::new::<volt>(flow.highest),
        beginning: ElectricPotential::new::<volt>(flow.beginning),
        drop_before: ElectricPotential::new::<volt>(flow.drop_before),
        demand: Demand::Current { continuous, other: current - continuous },
        positive_length: circuit.positive_length,
        negative_length: circuit.negative_length,
        return_resistance: match circuit.way_back {
            Return::Conductor => None,
            // Not stated: refused by a finding; meanwhile the way back counts as the way there.
            Return::Chassis(stated) => stated,
        },
        joints: draft.joints,
        installation: circuit.installed.unwrap_or_else(|| site.rules.usual_installation()),
        space: circuit.space,
        ambient: circuit.ambient.unwrap_or(site.ambient.1),
        bundled_conductors: circuit.bundled,
        moving: circuit.moving || flow.at_bank,
        terminal: lowest(circuit.terminal, flow.load_terminal),
        usage: flow.usage,
        drop: circuit.drop,
        least_voltage: flow.least_voltage.map(ElectricPotential::new::<volt>),
        start: flow.start.map(ElectricCurrent::new::<ampere>),
        started: flow.started.map(|(volts, amps)| {
            (ElectricPotential::new::<volt>(volts), ElectricCurrent::new::<ampere>(amps))
        }),
        resistance_before: ElectricalResistance::new::<ohm>(flow.ohms_before),
        greatest_fault: Fault::parts(flow.fault_at_beginning).0,
        fault_floor: Fault::parts(flow.fault_at_beginning).1,
        fault_by_thumb: flow.fault_by_thumb,
        low_current: flow.low_current.map(ElectricCurrent::new::<ampere>),
        weakest_source: flow.weakest_at_beginning,
    }
}

fn lowest(
    one: Option<crate::quantity::ThermodynamicTemperature>,
    other: Option<crate::quantity::ThermodynamicTemperature>,
) -> Option<crate::quantity::ThermodynamicTemperature> {
    match (one, other) {
        (Some(a), Some(b)) => Some(if a <= b { a } else { b }),
        (a, b) => a.or(b),
    }
}

/// The devices of a circuit: stated ones with their gaps filled, or one at each feeding end where none is stated.
#[allow(clippy::too_many_arguments)] // one caller; a struct would only repeat these names
fn fit(
    circuit: &CircuitEntry,
    index: usize,
    offers: &Offers,
    run_at: &dyn Fn(End) -> Run,
    draft: &Draft,
    bare: &Judgement,
    (ends, far): (Feeds, bool),
    reversed: bool,
) -> Vec<(Fitted, Option<Judgement>)> {
    let mut fitted = Vec::new();
    if circuit.devices.is_empty() {
        let order = if reversed { [End::To, End::From] } else { [End::From, End::To] };
        for (place, end) in order.into_iter().enumerate() {
            let feeding = if end == End::From { ends.from } else { ends.to };
            if feeding
                && (place == 0 || far)
                && !circuit.no_device
                && let Some((guard, judged)) = offers.best(&run_at(end), draft, bare, None)
            {
                let kind = if guard.device.family.data().is_fuse { "fuse" } else { "breaker" };
                let name = format!("{kind} {}{}", index + 1, if place == 0 { "" } else { "b" });
                let specified = offers.specifies();
                let own = Fitted { name, guard, end, entry: None, designed: true, specified };
                fitted.push((own, Some(judged)));
            }
        }
        return fitted;
    }
    for (entry, stated) in circuit.devices.iter().enumerate() {
        let complete = complete(stated);
        let guard = complete.map(|guard| (guard, None)).or_else(|| {
            let best = offers.best(&run_at(stated.end), draft, bare, Some(stated));
            best.map(|(guard, judged)| (guard, Some(judged)))
        });
        if let Some((guard, judged)) = guard {
            let own = Fitted {
                name: stated.name.clone(),
                guard,
                end: stated.end,
                entry: Some(entry),
                designed: complete.is_none(),
                specified: complete.is_none()
                    && offers.specifies()
                    && (stated.supply == Supply::NotStated || stated.breaking.is_none()),
            };
            fitted.push((own, judged));
        }
    }
    // The device at the source's end first.
    let first = if reversed { End::To } else { End::From };
    fitted.sort_by_key(|(f, _)| f.end != first);
    fitted
}

/// The banks' sources, for the flows.
pub(super) fn sources(site: &Site) -> Vec<bank::Ends> {
    site.banks.iter().map(bank::ends).collect()
}
