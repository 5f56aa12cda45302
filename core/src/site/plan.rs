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
use super::flow::{Flow, Flows};
use super::graph::{Graph, Item, Tree};
use super::model::{CircuitEntry, Return, Site};
use super::offers::{Offers, complete, joints};
use super::reach::Reach;
use super::read::{Problem, Problems};
use super::smaller::{Neighbours, explain};
use crate::cable::Conductor;
use crate::circuit::{Checked, Demand, Judgement, Outcome, Run, judge};
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
}

impl Planned {
    pub fn designed(&self) -> bool {
        self.offered.is_some()
    }
}

/// The whole plan.
pub(super) struct Plan {
    pub trees: Vec<Tree>,
    /// In the order of the document; `None` for a circuit that hangs on no bank.
    pub circuits: Vec<Option<Planned>>,
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

/// Makes the plan.
pub(super) fn plan(site: &Site) -> Result<Plan, Problems> {
    let graph = Graph::new(site);
    let trees = graph.trees();
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
    for _ in 0..=most {
        let pass = |drafts: &[Draft], temperatures: &[Option<f64>], far_devices: &[bool]| {
            let conductors: Vec<(Conductor, Conductor, ElectricalResistance)> =
                drafts.iter().map(|d| (d.positive, d.negative, d.joints)).collect();
            let flows = Flows::new(site, &graph, &trees, &conductors, temperatures);
            let planned = judge_all(site, &trees, &offers, drafts, &feeding, far_devices, &flows)
                .map_err(|problem| Problems(vec![problem], 0))?;
            Ok::<_, Problems>((flows, planned))
        };
        let (flows, planned) = pass(&drafts, &temperatures, &far_devices)?;
        if relieve_collapse(&flows, &mut drafts) {
            settled = false;
            continue;
        }
        for ((draft, circuit), done) in drafts.iter_mut().zip(&site.circuits).zip(&planned) {
            draft.joints = joints(circuit, done.as_ref().map_or(&[], |p| p.fitted.as_slice()));
        }
        temperatures = planned
            .iter()
            .map(|p| p.as_ref().map(|p| p.judgement.temperature.get::<degree_celsius>()))
            .collect();
        if enlarge(site, &mut drafts, &planned, &flows)? {
            settled = false;
        } else if !shared_found {
            // Shared runs are found; what hangs on them alone starts anew beside them, and grows no more than it must.
            (shared_found, settled) = (true, false);
            restart_leaves(&trees, &mut drafts);
        } else if add_far_devices(site, &trees, &planned, &mut far_devices) {
            settled = false;
        } else if !settled {
            // Once more with the temperatures and devices of this pass: what is reported is what was judged.
            settled = true;
        } else if !trimmed {
            // Growing one by one may leave a shared run a size larger than what came after it needs.
            trimmed = true;
            let own = Neighbours { site, offers: &offers, planned: &planned, flows: &flows };
            let fewest = failures(&planned);
            let candidates: Vec<usize> = (0..drafts.len()).filter(|&c| own.spare(&drafts, c)).collect();
            for circuit in candidates {
                let Some(thinner) = drafts.get(circuit).and_then(Draft::thinner) else { continue };
                let Some(kept) = drafts.get_mut(circuit).map(|d| core::mem::replace(d, thinner)) else {
                    continue;
                };
                let (tried, judged) = pass(&drafts, &temperatures, &far_devices)?;
                if tried.collapse.is_none() && failures(&judged) <= fewest {
                    settled = false;
                } else if let Some(draft) = drafts.get_mut(circuit) {
                    *draft = kept;
                }
            }
        } else {
            let mut circuits = planned;
            explain(site, &offers, &drafts, &flows, &mut circuits);
            return Ok(Plan { trees, circuits, collapsed: flows.collapsed });
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

/// Where the network collapses: enlarges the designed run of the greatest resistance on the path; `false` where nothing
/// collapsed, or nothing on the path can grow.
fn relieve_collapse(flows: &Flows, drafts: &mut [Draft]) -> bool {
    let Some((path, _)) = &flows.collapse else { return false };
    let mut worst: Option<(usize, f64)> = None;
    for &circuit in path {
        let ohms = flows.circuits.get(circuit).map_or(0.0, |f| f.ohms);
        if can_grow(drafts, circuit) && worst.is_none_or(|(_, most)| ohms > most) {
            worst = Some((circuit, ohms));
        }
    }
    worst.is_some_and(|(circuit, _)| grow(circuit, drafts))
}

/// Puts designed circuits that feed no board or bank back to the smallest size on offer.
fn restart_leaves(trees: &[Tree], drafts: &mut [Draft]) {
    for node in trees.iter().flat_map(|t| &t.nodes) {
        if matches!(node.item, Item::Load(_) | Item::Inverter(_))
            && let Some(draft) = node.circuit.and_then(|c| drafts.get_mut(c))
            && draft.offered.is_some()
        {
            draft.take(0);
        }
    }
}

impl Draft {
    /// Takes a size on offer; `false` where there is none.
    fn take(&mut self, place: usize) -> bool {
        let Some(conductor) = self.sizes.get(place) else { return false };
        self.offered = Some(place);
        self.positive = *conductor;
        self.negative = *conductor;
        true
    }

    /// The same one size smaller.
    fn thinner(&self) -> Option<Self> {
        let place = self.offered?.checked_sub(1)?;
        let mut thinner = self.clone();
        thinner.take(place).then_some(thinner)
    }
}

/// Whether a circuit is designed and a larger size is on offer.
fn can_grow(drafts: &[Draft], circuit: usize) -> bool {
    drafts.get(circuit).is_some_and(|d| d.offered.is_some_and(|o| o + 1 < d.sizes.len()))
}

/// Takes the next size on offer; `false` where there is none.
fn grow(circuit: usize, drafts: &mut [Draft]) -> bool {
    drafts.get_mut(circuit).is_some_and(|d| d.offered.is_some_and(|o| d.take(o + 1)))
}

/// Failed checks of a plan.
fn failures(planned: &[Option<Planned>]) -> usize {
    let failed = |j: &Judgement| j.checks.iter().filter(|c| c.outcome == Outcome::Failed).count();
    planned.iter().flatten().map(|p| failed(&p.judgement) + p.further.iter().map(failed).sum::<usize>()).sum()
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
        for (node, end) in tree.nodes.iter().zip(&ends) {
            if let Some(slot) = node.circuit.and_then(|c| all.get_mut(c)) {
                *slot = if node.reversed { Feeds { from: end.to, to: end.from } } else { *end };
            }
        }
    }
    all
}

fn judge_all(
    site: &Site,
    trees: &[Tree],
    offers: &Offers,
    drafts: &[Draft],
    feeding: &[Feeds],
    far_devices: &[bool],
    flows: &Flows,
) -> Result<Vec<Option<Planned>>, Problem> {
    let mut planned: Vec<Option<Planned>> = Vec::new();
    planned.resize_with(site.circuits.len(), || None);
    for tree in trees {
        for node in &tree.nodes {
            let Some(index) = node.circuit else { continue };
            let parts =
                (site.circuits.get(index), drafts.get(index), feeding.get(index), flows.circuits.get(index));
            let (Some(circuit), Some(draft), Some(&ends), Some(&flow)) = parts else { continue };
            // The device further up, for a circuit that has none of its own at its feeding end.
            let upstream = tree.nodes.get(node.parent).and_then(|p| p.circuit).and_then(|above| {
                let planned = planned.get(above)?.as_ref()?;
                if planned.fitted.is_empty() { planned.guarded_by } else { Some(above) }
            });
            // A bank at the far end feeds at once; a board may be guarded by the devices of what feeds it.
            let far = matches!(node.item, Item::Bank(_)) || far_devices.get(index).copied().unwrap_or(false);
            let done = judge_one(
                site,
                offers,
                &planned,
                &Task { index, circuit, draft, ends, flow, reversed: node.reversed, upstream, far },
            )
            .map_err(|error| Problem {
                line: circuit.line,
                place: format!("[[circuit]] \"{}\"", circuit.name),
                text: error.to_string(),
            })?;
            if let Some(slot) = planned.get_mut(index) {
                *slot = Some(done);
            }
        }
    }
    Ok(planned)
}

struct Task<'a> {
    index: usize,
    circuit: &'a CircuitEntry,
    draft: &'a Draft,
    ends: Feeds,
    flow: Flow,
    reversed: bool,
    upstream: Option<usize>,
    /// A designed circuit gets a device at its far end too.
    far: bool,
}

fn judge_one(
    site: &Site,
    offers: &Offers,
    planned: &[Option<Planned>],
    task: &Task<'_>,
) -> Result<Planned, Error> {
    let &Task { index, circuit, draft, ends, flow, reversed, upstream, far } = task;
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
    let fitted = fit(circuit, index, offers, &at, draft, &bare, (ends, far), reversed);
    let mut guarded_by = None;
    let judgement = match (fitted.first(), upstream) {
        (Some(first), _) => judge(&at(first.end), &draft.positive, &draft.negative, Some(&first.guard))?,
        (None, Some(above)) => {
            guarded_by = Some(above);
            let guard =
                planned.get(above).and_then(|p| p.as_ref()).and_then(|p| p.fitted.first()).map(|f| f.guard);
            match guard {
                Some(guard) => {
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
                None => bare,
            }
        }
        (None, None) => bare,
    };
    let further = fitted
        .iter()
        .skip(1)
        .map(|f| judge(&at(f.end), &draft.positive, &draft.negative, Some(&f.guard)))
        .collect::<Result<Vec<_>, _>>()?;
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
    })
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
        resistance_before: ElectricalResistance::new::<ohm>(flow.ohms_before),
        greatest_fault: Fault::parts(flow.fault_at_beginning).0,
        fault_floor: Fault::parts(flow.fault_at_beginning).1,
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
) -> Vec<Fitted> {
    let mut fitted = Vec::new();
    if circuit.devices.is_empty() {
        let order = if reversed { [End::To, End::From] } else { [End::From, End::To] };
        for (place, end) in order.into_iter().enumerate() {
            let feeding = if end == End::From { ends.from } else { ends.to };
            if feeding
                && (place == 0 || far)
                && !circuit.no_device
                && let Some(guard) = offers.best(&run_at(end), draft, bare, None)
            {
                let kind = if guard.device.family.data().is_fuse { "fuse" } else { "breaker" };
                let name = format!("{kind} {}{}", index + 1, if place == 0 { "" } else { "b" });
                fitted.push(Fitted { name, guard, end, entry: None, designed: true });
            }
        }
        return fitted;
    }
    for (entry, stated) in circuit.devices.iter().enumerate() {
        let complete = complete(stated);
        let guard = match complete {
            Some(guard) => Some(guard),
            None => offers.best(&run_at(stated.end), draft, bare, Some(stated)),
        };
        if let Some(guard) = guard {
            fitted.push(Fitted {
                name: stated.name.clone(),
                guard,
                end: stated.end,
                entry: Some(entry),
                designed: complete.is_none(),
            });
        }
    }
    // The device at the source's end first.
    let first = if reversed { End::To } else { End::From };
    fitted.sort_by_key(|f| f.end != first);
    fitted
}

/// Enlarges what fails; `true` where something grew.
fn enlarge(
    site: &Site,
    drafts: &mut [Draft],
    planned: &[Option<Planned>],
    flows: &Flows,
) -> Result<bool, Problems> {
    let mut grew = false;
    let mut problems = Vec::new();
    // Volts won by the next size for the metal it takes: ρ·I·l·(1/A − 1/A') over (A' − A)·l. Growing the best of these
    // first spreads the metal over a path as evenly as the sizes allow (A goes with √I).
    let worth = |drafts: &[Draft], circuit: usize| {
        let amps = planned
            .get(circuit)
            .and_then(|p| p.as_ref())
            .map_or(0.0, |p| p.judgement.current.get::<ampere>());
        let areas = drafts.get(circuit).and_then(|d| {
            let next = d.sizes.get(d.offered? + 1)?;
            Some(d.positive.size.area_mm2() * next.size.area_mm2())
        });
        areas.map_or(0.0, |product| amps / product)
    };
    for (circuit, planned) in planned.iter().enumerate() {
        let Some(p) = planned else { continue };
        let failed = |path: bool| {
            p.judgement
                .checks
                .iter()
                .chain(p.further.iter().flat_map(|j| j.checks.iter()))
                .find(|c| c.outcome == Outcome::Failed && path == is_of_path(c.check))
                .copied()
        };
        // What a larger conductor of this circuit mends.
        if let Some(check) = failed(false).filter(|c| mended_by_size(c.check))
            && p.designed()
        {
            if grow(circuit, drafts) {
                grew = true;
            } else {
                problems.push(cannot_serve(site, circuit, &check));
            }
            continue;
        }
        // What a larger conductor anywhere on the path mends: the one grows that wins most for its metal.
        let Some(check) = failed(true) else { continue };
        let path = flows.path(circuit);
        let mut worst: Option<(usize, f64)> = None;
        for &c in path.iter().filter(|&&c| can_grow(drafts, c)) {
            let gain = worth(drafts, c);
            if worst.is_none_or(|(_, most)| gain > most) {
                worst = Some((c, gain));
            }
        }
        match worst {
            Some((c, _)) if c == circuit => grew |= grow(c, drafts),
            // A shared run grows once in a pass: the next pass sees what it won.
            Some((c, _)) => return Ok(grow(c, drafts)),
            None if p.designed() => problems.push(cannot_serve(site, circuit, &check)),
            None => {}
        }
    }
    if problems.is_empty() { Ok(grew) } else { Err(Problems(problems, 0)) }
}

/// Notes the far ends of designed circuits that need a device of their own; `true` where one was added.
fn add_far_devices(
    site: &Site,
    trees: &[Tree],
    planned: &[Option<Planned>],
    far_devices: &mut [bool],
) -> bool {
    let reach = Reach::new(site, trees, planned);
    let mut added = false;
    for (((circuit, planned), needed), &passed) in
        site.circuits.iter().zip(planned).zip(far_devices.iter_mut()).zip(&reach.far)
    {
        let Some(p) = planned else { continue };
        if *needed || !p.feeds.to || !p.feeds.from || circuit.no_device || !circuit.devices.is_empty() {
            continue;
        }
        let limit = p
            .judgement
            .ampacity
            .as_ref()
            .map_or(0.0, |a| site.rules.device_limit(p.positive.size, a.corrected).most.get::<ampere>());
        if passed > limit {
            *needed = true;
            added = true;
        }
    }
    added
}

/// Whether a larger conductor anywhere on the path mends a failed check.
const fn is_of_path(check: Check) -> bool {
    matches!(check, Check::Drop | Check::LoadVoltage | Check::StartVoltage)
}

/// Whether a larger conductor mends a failed check.
const fn mended_by_size(check: Check) -> bool {
    matches!(
        check,
        Check::LeastSize
            | Check::TerminalColumn
            | Check::Ampacity
            | Check::DeviceProtects
            | Check::OpensLate
            | Check::LeastFault
            | Check::Withstand
            | Check::Termination
    )
}

fn cannot_serve(site: &Site, circuit: usize, check: &Checked) -> Problem {
    let (line, name) = site.circuits.get(circuit).map_or((0, ""), |c| (c.line, c.name.as_str()));
    Problem {
        line,
        place: format!("[[circuit]] \"{name}\""),
        text: format!(
            "no conductor on offer passes every check; the largest fails: {check}; add larger [[stock.cable]], \
             shorten the run, split the load or raise the voltage"
        ),
    }
}

/// The banks' sources, for the flows.
pub(super) fn sources(site: &Site) -> Vec<bank::Ends> {
    site.banks.iter().map(bank::ends).collect()
}
