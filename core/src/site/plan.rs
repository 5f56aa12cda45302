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
use super::flow::{Flow, Flows};
use super::graph::{Graph, Tree};
use super::model::{CircuitEntry, Return, Site};
use super::offers::{Offers, complete, joints};
use super::read::{Problem, Problems};
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
    Check(Checked),
    Error(Error),
    /// Another circuit on the path failed its drop or voltage limit, and this one loses most.
    Path(Checked, usize),
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
pub(super) struct Draft {
    pub positive: Conductor,
    pub negative: Conductor,
    pub offered: Option<usize>,
    pub refused: Vec<Refused>,
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
    let most = offers.sizes.len() * site.circuits.len() + 2;
    let mut temperatures: Vec<Option<f64>> = vec![None; site.circuits.len()];
    let mut settled = false;
    for _ in 0..=most {
        let conductors: Vec<(Conductor, Conductor, ElectricalResistance)> =
            drafts.iter().map(|d| (d.positive, d.negative, d.joints)).collect();
        let flows = Flows::new(site, &graph, &trees, &conductors, &temperatures);
        if relieve_collapse(&flows, &trees, &mut drafts, &offers) {
            settled = false;
            continue;
        }
        let planned = match judge_all(site, &trees, &offers, &drafts, &feeding, &flows) {
            Ok(planned) => planned,
            Err(problem) => return Err(Problems(vec![problem], 0)),
        };
        for ((draft, circuit), done) in drafts.iter_mut().zip(&site.circuits).zip(&planned) {
            draft.joints = joints(circuit, done.as_ref().map_or(&[], |p| p.fitted.as_slice()));
        }
        temperatures = planned
            .iter()
            .map(|p| p.as_ref().map(|p| p.judgement.temperature.get::<degree_celsius>()))
            .collect();
        match enlarge(site, &trees, &offers, &mut drafts, &planned)? {
            true => settled = false,
            // Once more with the temperatures and devices of this pass: what is reported is what was judged.
            false if !settled => settled = true,
            false => return Ok(Plan { trees, circuits: planned, collapsed: flows.collapsed }),
        }
    }
    Err(Problems(
        alloc::vec![Problem {
            line: 0,
            place: "design".to_string(),
            text: "the design did not settle; state the sizes of some circuits".to_string(),
        }],
        0,
    ))
}

/// Where the network collapses: enlarges the designed run of the greatest resistance on the path; `false` where nothing
/// collapsed, or nothing on the path can grow.
fn relieve_collapse(flows: &Flows, trees: &[Tree], drafts: &mut [Draft], offers: &Offers) -> bool {
    let Some((tree, node, error)) = flows.collapse else { return false };
    let path = trees.get(tree).map(|t| path_to(t, node)).unwrap_or_default();
    let mut worst: Option<(usize, f64)> = None;
    for &circuit in &path {
        let ohms = flows.circuits.get(circuit).map_or(0.0, |f| f.ohms);
        if can_grow(drafts, offers, circuit) && worst.is_none_or(|(_, most)| ohms > most) {
            worst = Some((circuit, ohms));
        }
    }
    worst.is_some_and(|(circuit, _)| grow(circuit, drafts, offers, Reason::Error(error)))
}

/// Whether a circuit is designed and a larger size is on offer.
fn can_grow(drafts: &[Draft], offers: &Offers, circuit: usize) -> bool {
    drafts.get(circuit).and_then(|d| d.offered).is_some_and(|offered| offered + 1 < offers.sizes.len())
}

/// Takes the next size on offer; `false` where there is none.
fn grow(circuit: usize, drafts: &mut [Draft], offers: &Offers, reason: Reason) -> bool {
    let Some(draft) = drafts.get_mut(circuit) else { return false };
    let Some(next) = draft.offered.map(|o| o + 1) else { return false };
    let Some(conductor) = offers.sizes.get(next) else { return false };
    draft.refused.push(Refused { size: draft.positive.size, by: reason });
    draft.offered = Some(next);
    draft.positive = *conductor;
    draft.negative = *conductor;
    true
}

/// Circuits from the root to a node.
fn path_to(tree: &Tree, mut node: usize) -> Vec<usize> {
    let mut path = Vec::new();
    while let Some(here) = tree.nodes.get(node) {
        match here.circuit {
            Some(circuit) => path.push(circuit),
            None => break,
        }
        node = here.parent;
    }
    path.reverse();
    path
}

/// Ends of each circuit that can feed, in the circuit's own direction.
fn feeding_ends(site: &Site, trees: &[Tree]) -> Vec<Feeds> {
    let mut all = vec![Feeds::default(); site.circuits.len()];
    for tree in trees {
        let parents: Vec<usize> = tree.nodes.iter().map(|n| n.parent).collect();
        let sources: Vec<bool> =
            tree.nodes.iter().map(|n| matches!(n.item, super::graph::Item::Bank(_))).collect();
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
            let done = judge_one(
                site,
                offers,
                &planned,
                &Task { index, circuit, draft, ends, flow, reversed: node.reversed, upstream },
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
}

fn judge_one(
    site: &Site,
    offers: &Offers,
    planned: &[Option<Planned>],
    task: &Task<'_>,
) -> Result<Planned, Error> {
    let &Task { index, circuit, draft, ends, flow, reversed, upstream } = task;
    let run = run_of(site, circuit, draft, &flow);
    let bare = judge(&run, &draft.positive, &draft.negative, None)?;
    // The device at the end that the source feeds comes first; further ones see their own fault currents.
    let at = |end: End| {
        let mut seen = run;
        let parent_side = (end == End::From) != reversed;
        if !parent_side {
            seen.greatest_fault = flow.fault_at_end;
            seen.weakest_source = flow.weakest_at_end;
        }
        seen
    };
    let fitted = fit(circuit, index, offers, &at, draft, &bare, ends, reversed);
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
        refused: draft.refused.clone(),
        fitted,
        feeds: ends,
        run,
        judgement,
        further,
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
        greatest_fault: flow.fault_at_beginning,
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
    ends: Feeds,
    reversed: bool,
) -> Vec<Fitted> {
    let mut fitted = Vec::new();
    if circuit.devices.is_empty() {
        let order = if reversed { [End::To, End::From] } else { [End::From, End::To] };
        for end in order {
            let feeding = if end == End::From { ends.from } else { ends.to };
            if feeding
                && !circuit.no_device
                && let Some(guard) = offers.best(&run_at(end), draft, bare, None)
            {
                let suffix = if ends.from && ends.to {
                    if end == End::From { " at from" } else { " at to" }
                } else {
                    ""
                };
                fitted.push(Fitted {
                    name: format!("Q{}{suffix}", index + 1),
                    guard,
                    end,
                    entry: None,
                    designed: true,
                });
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
    trees: &[Tree],
    offers: &Offers,
    drafts: &mut [Draft],
    planned: &[Option<Planned>],
) -> Result<bool, Problems> {
    let mut grew = false;
    let mut problems = Vec::new();
    let own_drop = |circuit: usize| {
        planned.get(circuit).and_then(|p| p.as_ref()).map_or(0.0, |p| p.judgement.drop.get::<volt>())
    };
    for tree in trees {
        for (index, node) in tree.nodes.iter().enumerate() {
            let Some(circuit) = node.circuit else { continue };
            let Some(Some(p)) = planned.get(circuit) else { continue };
            let failed = |p: &Planned, path: bool| {
                p.judgement
                    .checks
                    .iter()
                    .chain(p.further.iter().flat_map(|j| j.checks.iter()))
                    .find(|c| c.outcome == Outcome::Failed && path == is_of_path(c.check))
                    .copied()
            };
            // What a larger conductor of this circuit mends.
            if let Some(check) = failed(p, false).filter(|c| mended_by_size(c.check))
                && p.designed()
            {
                if grow(circuit, drafts, offers, Reason::Check(check)) {
                    grew = true;
                } else {
                    problems.push(cannot_serve(site, circuit, &check));
                }
                continue;
            }
            // What a larger conductor anywhere on the path mends: the one that loses most grows.
            if let Some(check) = failed(p, true) {
                let path = path_to(tree, index);
                if !path
                    .iter()
                    .any(|&c| planned.get(c).and_then(|p| p.as_ref()).is_some_and(Planned::designed))
                {
                    continue;
                }
                let mut worst: Option<(usize, f64)> = None;
                for &c in &path {
                    if can_grow(drafts, offers, c) && worst.is_none_or(|(_, most)| own_drop(c) > most) {
                        worst = Some((c, own_drop(c)));
                    }
                }
                match worst {
                    Some((c, _)) => {
                        let reason =
                            if c == circuit { Reason::Check(check) } else { Reason::Path(check, circuit) };
                        grew |= grow(c, drafts, offers, reason);
                        // One enlargement of a path at a time: the next pass sees its effect.
                        if c != circuit {
                            return Ok(true);
                        }
                    }
                    None if p.designed() => problems.push(cannot_serve(site, circuit, &check)),
                    None => {}
                }
            }
        }
    }
    if problems.is_empty() { Ok(grew) } else { Err(Problems(problems, 0)) }
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
