//! What smaller sizes would do in the finished plan: whether one is left to save, and why each was refused.
//!
//! Currents are those of the plan: a smaller size raises them a little for constant-power loads, so what passes here
//! is tried on the whole plan before it is taken.

use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;

use super::flow::Flows;
use super::offers::Offers;
use super::plan::{Draft, Planned, Reason, Refused};
use super::system::Site;
use crate::cable::Conductor;
use crate::circuit::{Checked, Outcome, Relation, judge};
use crate::quantity::{ElectricCurrent, ElectricPotential};
use crate::rules::Check;

/// A finished plan as the neighbourhood of one circuit.
pub(super) struct Neighbours<'a> {
    site: &'a Site,
    offers: &'a Offers,
    planned: &'a [Option<Planned>],
    /// For each circuit those that begin where it ends.
    next: Vec<Vec<usize>>,
}

impl<'a> Neighbours<'a> {
    pub fn new(site: &'a Site, offers: &'a Offers, planned: &'a [Option<Planned>], flows: &Flows) -> Self {
        let mut next = vec![Vec::new(); planned.len()];
        for (circuit, before) in flows.before.iter().enumerate() {
            if let Some(list) = before.and_then(|b| next.get_mut(b)) {
                list.push(circuit);
            }
        }
        Self { site, offers, planned, next }
    }

    /// Everything behind a circuit.
    fn behind(&self, circuit: usize) -> Vec<usize> {
        let mut all = Vec::new();
        let mut open = vec![circuit];
        while let Some(here) = open.pop() {
            let next = self.next.get(here).map_or(&[] as &[usize], Vec::as_slice);
            all.extend(next);
            open.extend(next);
        }
        all.sort_unstable();
        all
    }

    /// Whether the next smaller size of a designed circuit would fail nothing here.
    pub fn spare(&self, drafts: &[Draft], circuit: usize) -> bool {
        let next = drafts.get(circuit).and_then(|d| d.sizes.get(d.offered?.checked_sub(1)?));
        next.is_some_and(|next| matches!(self.against(drafts, circuit, next), Some(Reason::Together)))
    }

    /// What speaks against a conductor in the place of a circuit's own; `None` where the circuit is not in the plan.
    fn against(&self, drafts: &[Draft], circuit: usize, conductor: &Conductor) -> Option<Reason> {
        let planned = self.planned.get(circuit)?.as_ref()?;
        let Draft { offered, joints, .. } = *drafts.get(circuit)?;
        let draft = Draft { positive: *conductor, negative: *conductor, offered, sizes: Vec::new(), joints };
        let stated = self.site.circuits.get(circuit)?;
        let bare = match judge(&planned.run, conductor, conductor, None) {
            Ok(bare) => bare,
            Err(error) => return Some(Reason::Error(error)),
        };
        let judged = match planned.fitted.first() {
            None => bare,
            Some(first) if first.designed => {
                let entry = first.entry.and_then(|e| stated.devices.get(e));
                self.offers.best(&planned.run, &draft, &bare, entry).map_or(bare, |(_, judged)| judged)
            }
            Some(first) => judge(&planned.run, conductor, conductor, Some(&first.guard)).ok()?,
        };
        if let Some(failed) = judged.first_failure() {
            return Some(Reason::Check(*failed));
        }
        // At cut-off flows what is drawn there: not what the sources drive, nor what is drawn at the highest voltage.
        let drawn =
            planned.flow.low_current.map_or(planned.judgement.current, ElectricCurrent::new::<ampere>);
        let lost: ElectricPotential = drawn * (judged.resistance - planned.judgement.resistance);
        let lost = lost.get::<volt>();
        // What hangs behind it loses those volts too.
        for other in self.behind(circuit) {
            let Some(Some(behind)) = self.planned.get(other) else { continue };
            let nominal = behind.run.nominal.get::<volt>();
            for checked in &behind.judgement.checks {
                let shifted = match checked.check {
                    Check::Drop => Checked { actual: checked.actual + 100.0 * lost / nominal, ..*checked },
                    Check::LoadVoltage | Check::StartVoltage => {
                        Checked { actual: checked.actual - lost, ..*checked }
                    }
                    _ => continue,
                };
                let fails = match shifted.relation {
                    Relation::AtMost => shifted.actual > shifted.limit,
                    Relation::AtLeast => shifted.actual < shifted.limit,
                    Relation::Plain => false,
                };
                if fails && checked.outcome == Outcome::Passed {
                    return Some(Reason::Path(Checked { outcome: Outcome::Failed, ..shifted }, other));
                }
            }
        }
        Some(Reason::Together)
    }
}

/// Fills in, for every designed circuit, each smaller size on offer with its reason, smallest first.
pub(super) fn explain(
    site: &Site,
    offers: &Offers,
    (drafts, tried_out): (&[Draft], &[Option<Reason>]),
    flows: &Flows,
    planned: &mut [Option<Planned>],
) {
    let reasons: Vec<Vec<Refused>> = {
        let own = Neighbours::new(site, offers, planned, flows);
        drafts
            .iter()
            .enumerate()
            .map(|(circuit, draft)| {
                let smaller = draft.offered.and_then(|o| draft.sizes.get(..o)).unwrap_or_default();
                smaller
                    .iter()
                    .filter_map(|c| {
                        let by = own.against(drafts, circuit, c)?;
                        let whole = tried_out.get(circuit).copied().flatten();
                        let by = if matches!(by, Reason::Together) { whole.unwrap_or(by) } else { by };
                        Some(Refused { size: c.size, by })
                    })
                    .collect()
            })
            .collect()
    };
    for (planned, refused) in planned.iter_mut().zip(reasons) {
        if let Some(planned) = planned {
            planned.refused = refused;
        }
    }
}
