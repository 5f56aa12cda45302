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
use super::model::{CircuitEntry, DeviceEntry, Return, Site};
use super::read::{Problem, Problems};
use crate::cable::{Class, Coating, Conductor, JointKind, Material, joint_resistance, rated_joint_resistance};
use crate::circuit::{Checked, Demand, Judgement, Outcome, Run, judge};
use crate::device::{Device, Family, Polarity, Supply};
use crate::error::Error;
use crate::protection::{End, Feeds, Guard, Offer, choose, feeds, least_rating};
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
struct Draft {
    positive: Conductor,
    negative: Conductor,
    offered: Option<usize>,
    refused: Vec<Refused>,
    joints: ElectricalResistance,
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
        if let Some(enlarged) = relieve_collapse(&flows, &trees, &mut drafts, &offers) {
            if enlarged {
                settled = false;
                continue;
            }
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
    Err(Problems(alloc::vec![Problem {
        line: 0,
        place: "design".to_string(),
        text: "the design did not settle; state the sizes of some circuits".to_string(),
    }], 0))
}

/// Where the network collapses: enlarges the designed run of the greatest resistance on the path. `None` where
/// nothing collapsed; `false` where nothing on the path can grow.
fn relieve_collapse(flows: &Flows, trees: &[Tree], drafts: &mut [Draft], offers: &Offers) -> Option<bool> {
    let (tree, node, error) = flows.collapse?;
    let path = trees.get(tree).map(|t| path_to(t, node)).unwrap_or_default();
    Some(grow_worst(&path, drafts, offers, |_, flow_ohms| flow_ohms, flows, Reason::Error(error)))
}

/// Enlarges the circuit of a path that scores highest; ties go to the one nearest the source.
fn grow_worst(
    path: &[usize],
    drafts: &mut [Draft],
    offers: &Offers,
    score: impl Fn(usize, f64) -> f64,
    flows: &Flows,
    reason: Reason,
) -> bool {
    let mut worst: Option<(usize, f64)> = None;
    for &circuit in path {
        let grows = drafts
            .get(circuit)
            .and_then(|d| d.offered)
            .is_some_and(|offered| offered + 1 < offers.sizes.len());
        let value = score(circuit, flows.circuits.get(circuit).map_or(0.0, |f| f.ohms));
        if grows && worst.is_none_or(|(_, most)| value > most) {
            worst = Some((circuit, value));
        }
    }
    match worst {
        Some((circuit, _)) => grow(circuit, drafts, offers, reason),
        None => false,
    }
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
            let parts = (site.circuits.get(index), drafts.get(index), feeding.get(index), flows.circuits.get(index));
            let (Some(circuit), Some(draft), Some(&ends), Some(&flow)) = parts else { continue };
            // The device further up, for a circuit that has none of its own at its feeding end.
            let upstream = tree.nodes.get(node.parent).and_then(|p| p.circuit).and_then(|above| {
                let planned = planned.get(above)?.as_ref()?;
                if planned.fitted.is_empty() { planned.guarded_by } else { Some(above) }
            });
            let done = judge_one(site, offers, &planned, Task { index, circuit, draft, ends, flow, reversed: node.reversed, upstream })
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

fn judge_one(site: &Site, offers: &Offers, planned: &[Option<Planned>], task: Task<'_>) -> Result<Planned, Error> {
    let Task { index, circuit, draft, ends, flow, reversed, upstream } = task;
    let run = run_of(site, circuit, draft, &flow, reversed);
    let bare = judge(&run, &draft.positive, &draft.negative, None)?;
    let fitted = fit(circuit, index, offers, &run, draft, &bare, ends, reversed);

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
    let mut guarded_by = None;
    let judgement = match (fitted.first(), upstream) {
        (Some(first), _) => judge(&at(first.end), &draft.positive, &draft.negative, Some(&first.guard))?,
        (None, Some(above)) => {
            guarded_by = Some(above);
            let guard = planned
                .get(above)
                .and_then(|p| p.as_ref())
                .and_then(|p| p.fitted.first())
                .map(|f| f.guard);
            match guard {
                Some(guard) => {
                    let mut judged = judge(&run, &draft.positive, &draft.negative, Some(&guard))?;
                    // Its terminals and supply are judged where it sits.
                    judged.checks.retain(|c| {
                        !matches!(c.check, Check::Termination | Check::DeviceSupply | Check::DeviceCarries | Check::Breaking)
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
fn run_of(site: &Site, circuit: &CircuitEntry, draft: &Draft, flow: &Flow, _reversed: bool) -> Run {
    let current = ElectricCurrent::new::<ampere>(flow.current);
    let continuous = current * Ratio::new::<ratio>(flow.continuous_share);
    Run {
        rules: site.rules,
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
        moving: circuit.moving,
        terminal: lowest(circuit.terminal, flow.load_terminal),
        usage: flow.usage,
        drop: circuit.drop,
        least_voltage: flow.least_voltage.map(ElectricPotential::new::<volt>),
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
    run: &Run,
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
                && let Some(guard) = offers.best(run, draft, bare, None)
            {
                let suffix = if ends.from && ends.to {
                    if end == End::From { " at from" } else { " at to" }
                } else {
                    ""
                };
                fitted.push(Fitted { name: format!("Q{}{suffix}", index + 1), guard, end, entry: None, designed: true });
            }
        }
        return fitted;
    }
    for (entry, stated) in circuit.devices.iter().enumerate() {
        let complete = complete(stated);
        let guard = match complete {
            Some(guard) => Some(guard),
            None => offers.best(run, draft, bare, Some(stated)),
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

/// A stated device, if family and rating are stated.
fn complete(stated: &DeviceEntry) -> Option<Guard> {
    let (family, rating) = stated.family.zip(stated.rating)?;
    Some(Guard {
        device: Device {
            family,
            rating,
            supply: stated.supply,
            breaking: stated.breaking,
            polarity: stated.polarity,
            full_rated: stated.full_rated,
        },
        let_through_A2s: stated.let_through_A2s,
        terminal_range: stated.terminal_range,
        terminal_degC: stated.terminal.map(|t| t.get::<degree_celsius>()),
    })
}

/// What can be had: from the stock, else standard sizes and plain generic parts.
struct Offers {
    sizes: Vec<Conductor>,
    devices: Vec<OwnedOffer>,
    generic_devices: bool,
}

struct OwnedOffer {
    family: Family,
    ratings_A: Vec<f64>,
    supply: Supply,
    breaking: Option<ElectricCurrent>,
    polarity: Polarity,
    full_rated: bool,
    let_through_A2s: Option<f64>,
    terminal_range: Option<(ConductorSize, ConductorSize)>,
    terminal_degC: Option<f64>,
}

impl Offers {
    fn new(site: &Site) -> Self {
        let mut sizes: Vec<Conductor> = site
            .stock
            .cables
            .iter()
            .map(|c| Conductor {
                size: c.size,
                material: c.material,
                class: c.class,
                coating: c.coating,
                insulation: c.insulation,
            })
            .collect();
        if sizes.is_empty() {
            sizes = site
                .rules
                .sizes()
                .iter()
                .map(|&size| Conductor {
                    size,
                    material: Material::Copper,
                    class: Class::Flexible,
                    coating: Coating::Plain,
                    insulation: site.rules.usual_insulation(),
                })
                .collect();
        }
        sizes.sort_by(|a, b| a.size.area_mm2().total_cmp(&b.size.area_mm2()));
        let mut devices: Vec<OwnedOffer> = site
            .stock
            .devices
            .iter()
            .map(|d| {
                let mut ratings: Vec<f64> = d.ratings.iter().map(|r| r.get::<ampere>()).collect();
                ratings.sort_by(f64::total_cmp);
                OwnedOffer {
                    family: d.family,
                    ratings_A: ratings,
                    supply: d.supply,
                    breaking: d.breaking,
                    polarity: d.polarity,
                    full_rated: d.full_rated,
                    let_through_A2s: d.let_through_A2s,
                    terminal_range: d.terminal_range,
                    terminal_degC: d.terminal.map(|t| t.get::<degree_celsius>()),
                }
            })
            .collect();
        let generic_devices = devices.is_empty();
        if generic_devices {
            devices = site
                .rules
                .usual_families()
                .iter()
                .map(|&family| OwnedOffer {
                    family,
                    ratings_A: Vec::new(),
                    supply: Supply::NotStated,
                    breaking: None,
                    polarity: Polarity::None,
                    full_rated: false,
                    let_through_A2s: None,
                    terminal_range: None,
                    terminal_degC: None,
                })
                .collect();
        }
        Self { sizes, devices, generic_devices }
    }

    /// A circuit's conductors: as stated, or the smallest on offer.
    fn draft(&self, site: &Site, circuit: &CircuitEntry) -> Result<Draft, Problem> {
        let insulation = circuit.insulation.unwrap_or_else(|| site.rules.usual_insulation());
        let stated = |size| Conductor {
            size,
            material: circuit.material,
            class: circuit.class,
            coating: circuit.coating,
            insulation,
        };
        let (positive, negative, offered) = match circuit.size {
            Some(size) => (stated(size), stated(circuit.negative_size.unwrap_or(size)), None),
            None => {
                let Some(first) = self.sizes.first() else {
                    return Err(Problem {
                        line: circuit.line,
                        place: format!("[[circuit]] \"{}\"", circuit.name),
                        text: "no conductor is on offer; add [[stock.cable]] or state size".to_string(),
                    });
                };
                (*first, *first, Some(0))
            }
        };
        Ok(Draft { positive, negative, offered, refused: Vec::new(), joints: joints(circuit, &[]) })
    }

    /// The device that suits a run: the first offer, in the order of the stock, whose smallest sufficient rating
    /// fails no check; else the one that fails fewest.
    fn best(&self, run: &Run, draft: &Draft, bare: &Judgement, stated: Option<&DeviceEntry>) -> Option<Guard> {
        let mut fallback: Option<(usize, Guard)> = None;
        for owned in &self.devices {
            let family = stated.and_then(|s| s.family).unwrap_or(owned.family);
            let fixed = stated.and_then(|s| s.rating).map(|r| [r.get::<ampere>()]);
            let fixed = fixed.as_ref().map(<[f64; 1]>::as_slice);
            let mut offer = Offer {
                family,
                ratings_A: fixed.unwrap_or(if family == owned.family { &owned.ratings_A } else { &[] }),
                supply: owned.supply,
                breaking: owned.breaking,
                polarity: owned.polarity,
                full_rated: owned.full_rated,
                let_through_A2s: owned.let_through_A2s,
                terminal_range: owned.terminal_range,
                terminal_degC: owned.terminal_degC,
            };
            if self.generic_devices {
                // A part to be bought is bought for its place: the requirement becomes the specification.
                offer.supply = Supply::Dc(run.highest);
                offer.breaking = run.greatest_fault;
            }
            if let Some(stated) = stated {
                offer.supply = if stated.supply == Supply::NotStated { offer.supply } else { stated.supply };
                offer.breaking = stated.breaking.or(offer.breaking);
                offer.terminal_range = stated.terminal_range.or(offer.terminal_range);
                offer.full_rated |= stated.full_rated;
            }
            let carries = Ratio::new::<ratio>(family.data().continuous_ratio);
            let factor = run.rules.continuous_factor().value;
            let need = least_rating(
                bare.continuous,
                bare.current - bare.continuous,
                carries,
                offer.full_rated,
                factor,
            );
            let Ok(guard) = choose(&offer, |_| if fixed.is_some() { ElectricCurrent::default() } else { need }) else {
                continue;
            };
            let Ok(judged) = judge(run, &draft.positive, &draft.negative, Some(&guard)) else { continue };
            let failures = judged.checks.iter().filter(|c| c.outcome == Outcome::Failed).count();
            if failures == 0 {
                return Some(guard);
            }
            if fallback.is_none_or(|(fewest, _)| failures < fewest) {
                fallback = Some((failures, guard));
            }
        }
        fallback.map(|(_, guard)| guard)
    }
}

/// All joints of a circuit: stated ones, else a lug at each of four conductor ends; its parts; its devices as fitted.
fn joints(circuit: &CircuitEntry, fitted: &[Fitted]) -> ElectricalResistance {
    let mut sum = ElectricalResistance::new::<ohm>(0.0);
    if circuit.joints.is_empty() {
        sum += 4.0 * joint_resistance(JointKind::Lug);
    }
    for joint in &circuit.joints {
        sum += f64::from(joint.count) * joint.resistance.unwrap_or_else(|| joint_resistance(joint.kind));
    }
    for part in &circuit.parts {
        sum += part.resistance.unwrap_or_else(|| rated(part.kind.joint(), part.rating));
    }
    for device in fitted.iter().map(|f| f.guard.device) {
        let kind = if device.family.data().is_fuse { JointKind::Fuse } else { JointKind::Breaker };
        sum += rated(kind, Some(device.rating));
    }
    sum
}

/// Generic resistance of a part, by its rating where that is known.
fn rated(kind: JointKind, rating: Option<ElectricCurrent>) -> ElectricalResistance {
    rating
        .and_then(|rating| rated_joint_resistance(kind, rating).ok())
        .unwrap_or_else(|| joint_resistance(kind))
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
                    .find(|c| c.outcome == Outcome::Failed && path == matches!(c.check, Check::Drop | Check::LoadVoltage))
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
                if !path.iter().any(|&c| planned.get(c).and_then(|p| p.as_ref()).is_some_and(Planned::designed)) {
                    continue;
                }
                let mut worst: Option<(usize, f64)> = None;
                for &c in &path {
                    let grows = drafts
                        .get(c)
                        .and_then(|d| d.offered)
                        .is_some_and(|offered| offered + 1 < offers.sizes.len());
                    if grows && worst.is_none_or(|(_, most)| own_drop(c) > most) {
                        worst = Some((c, own_drop(c)));
                    }
                }
                match worst {
                    Some((c, _)) => {
                        let reason = if c == circuit { Reason::Check(check) } else { Reason::Path(check, circuit) };
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
