//! How a plan grows: which circuit takes a larger size, and where a device is added.

use alloc::format;
use alloc::string::ToString;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;

use super::flow::Flows;
use super::graph::{Item, Tree};
use super::plan::{Draft, Planned};
use super::reach::Reach;
use super::read::{Problem, Problems};
use super::system::Site;
use crate::circuit::{Checked, Outcome, capacity};
use crate::rules::{Check, LoadUse};

/// Where a shared run may grow beside another in one pass.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Beside {
    /// Nowhere.
    Nowhere,
    /// Where the paths have no circuit in common.
    OtherPaths,
    /// Where they have none in common that can grow.
    OtherRuns,
}

/// Enlarges what fails; `true` where something grew.
///
/// In the order of the document: what has a circuit in common with one whose shared run grows waits for the next pass, and
/// so does what comes behind where nothing may grow beside it.
pub(super) fn enlarge(
    site: &Site,
    drafts: &mut [Draft],
    planned: &[Option<Planned>],
    flows: &Flows,
    beside: Beside,
) -> Result<bool, Problems> {
    let mut grew = false;
    // Circuits that what they feed waits for, once a shared run has grown.
    let mut waits = vec![false; if beside == Beside::Nowhere { 0 } else { planned.len() }];
    let mut waiting = false;
    // What grew by itself before.
    let mut alone = Vec::new();
    let hold = |waits: &mut [bool], drafts: &[Draft], path: &[usize]| {
        for &circuit in path.iter().filter(|&&c| beside == Beside::OtherPaths || can_grow(drafts, c)) {
            if let Some(slot) = waits.get_mut(circuit) {
                *slot = true;
            }
        }
    };
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
                .find(|c| c.is_obstacle() && path == is_of_path(c.check))
                .copied()
        };
        if waiting && flows.path(circuit).iter().any(|&c| waits.get(c).copied().unwrap_or(false)) {
            continue;
        }
        // What a larger conductor of this circuit mends.
        if let Some(check) = failed(false).filter(|c| mended_by_size(c.check))
            && p.designed()
        {
            if grow(circuit, drafts) {
                grew = true;
                alone.push(circuit);
            } else {
                problems.push(cannot_serve(site, circuit, p, &check));
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
            Some((c, _)) if c == circuit => {
                grew |= grow(c, drafts);
                alone.push(circuit);
            }
            // A shared run grows once in a pass: the next pass sees what it won.
            Some((c, _)) if beside == Beside::Nowhere => return Ok(grow(c, drafts)),
            Some((c, _)) => {
                if !core::mem::replace(&mut waiting, true) {
                    for &own in &alone {
                        hold(&mut waits, drafts, &flows.path(own));
                    }
                }
                hold(&mut waits, drafts, &path);
                grew |= grow(c, drafts);
            }
            None if p.designed() => problems.push(cannot_serve(site, circuit, p, &check)),
            None => {}
        }
    }
    // A shared run that grew may yet serve those.
    if problems.is_empty() || waiting { Ok(grew) } else { Err(Problems(problems, 0)) }
}

/// Notes the far ends of designed circuits that need a device of their own; `true` where one was added.
pub(super) fn add_far_devices(
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
        let limit = p.judgement.device_limit.map_or(0.0, |l| l.most.get::<ampere>());
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

fn cannot_serve(site: &Site, circuit: usize, planned: &Planned, check: &Checked) -> Problem {
    let (line, name) = site.circuits.get(circuit).map_or((0, ""), |c| (c.line, c.name.as_str()));
    let text = match capacity(&planned.run, &planned.positive, None) {
        // Beyond the tables size does not help.
        Err(error) if check.outcome == Outcome::NotChecked => error.to_string(),
        _ if check.check == Check::Drop && planned.run.usage == LoadUse::Charging => format!(
            "no conductor on offer passes every check; the largest fails: {check}; let the source sense at the bank \
             (sense = \"bank\"), add larger [[stock.cable]] or shorten the run"
        ),
        _ => format!(
            "no conductor on offer passes every check; the largest fails: {check}; add larger [[stock.cable]], \
             shorten the run, split the load or raise the voltage"
        ),
    };
    Problem { line, place: format!("[[circuit]] \"{name}\""), text }
}

/// Where the network collapses: enlarges the designed run of the greatest resistance on the path, and the same on every
/// other branch that collapses; `false` where nothing collapsed, or nothing on the path can grow.
pub(super) fn relieve_collapse(flows: &Flows, drafts: &mut [Draft]) -> bool {
    let Some(first) = &flows.collapse else { return false };
    let mut relieve = |path: &[usize]| {
        let mut worst: Option<(usize, f64)> = None;
        for &circuit in path {
            let ohms = flows.circuits.get(circuit).map_or(0.0, |f| f.ohms);
            if can_grow(drafts, circuit) && worst.is_none_or(|(_, most)| ohms > most) {
                worst = Some((circuit, ohms));
            }
        }
        worst.is_some_and(|(circuit, _)| grow(circuit, drafts))
    };
    if flows.also.is_empty() {
        return relieve(first);
    }
    flows.also.iter().fold(false, |grew, path| relieve(path) | grew)
}

/// Puts designed circuits that feed no board or bank back to the smallest size on offer.
pub(super) fn restart_leaves(trees: &[Tree], drafts: &mut [Draft]) {
    for node in trees.iter().flat_map(|t| &t.nodes) {
        if matches!(node.item, Item::Load(_) | Item::Inverter(_))
            && let Some(draft) = node.circuit.and_then(|c| drafts.get_mut(c))
            && draft.offered.is_some()
        {
            draft.take(0);
        }
    }
}

/// Whether a circuit is designed and a larger size is on offer.
pub(super) fn can_grow(drafts: &[Draft], circuit: usize) -> bool {
    drafts.get(circuit).is_some_and(|d| d.offered.is_some_and(|o| o + 1 < d.sizes.len()))
}

/// Takes the next size on offer; `false` where there is none.
fn grow(circuit: usize, drafts: &mut [Draft]) -> bool {
    drafts.get_mut(circuit).is_some_and(|d| d.offered.is_some_and(|o| d.take(o + 1)))
}
