//! Trials of smaller sizes on the whole plan: many at once, so that a large site needs few passes.
//!
//! Smaller conductors only ever take volts from each other: what fits together fits one by one. Where a group does not
//! fit, either half is tried alone, so that each circuit in the end has the answer that it has by itself, with what was
//! taken before it in the order of the document. Branches that a bank holds apart know nothing of each other: each has
//! its own trial in the same pass.

use alloc::vec;
use alloc::vec::Vec;

use super::flow::Flows;
use super::plan::{Draft, Planned, Reason};
use crate::circuit::{Judgement, Outcome};

/// The trials that are left.
pub(super) struct Trials {
    /// For each branch the groups that are still to be tried, the next one last.
    open: Vec<Vec<Vec<usize>>>,
    /// The branch of each circuit.
    branch: Vec<usize>,
    /// Failed checks of each branch before any trial.
    fewest: Vec<usize>,
    /// Which branches kept what was tried last.
    kept: Vec<bool>,
    /// One branch at a time: a collapse tells of no branch.
    one_by_one: bool,
}

/// What is tried in one pass: branch, circuits, and their sizes before.
pub(super) struct Round(Vec<(usize, Vec<(usize, Draft)>)>);

impl Round {
    /// A single circuit.
    pub fn is_single(&self) -> bool {
        matches!(self.0.as_slice(), [(_, group)] if group.len() == 1)
    }
}

impl Trials {
    /// `apart`: branches from the only bank are tried beside each other.
    pub fn new(candidates: Vec<usize>, planned: &[Option<Planned>], flows: &Flows, apart: bool) -> Self {
        // An obstacle that stands already may be the answer to a trial elsewhere: then each is tried for itself.
        let apart = apart && obstacles(planned).next().is_none() && failures(planned) == 0;
        let branch: Vec<usize> = if apart { flows.branches() } else { planned.iter().map(|_| 0).collect() };
        let count = branch.iter().max().map_or(1, |most| most + 1);
        let mut open: Vec<Vec<Vec<usize>>> = vec![Vec::new(); count];
        for circuit in candidates {
            let Some(groups) = branch.get(circuit).and_then(|&b| open.get_mut(b)) else { continue };
            match groups.last_mut() {
                Some(group) => group.push(circuit),
                None => groups.push(vec![circuit]),
            }
        }
        let mut trials =
            Self { open, branch, fewest: Vec::new(), kept: vec![false; count], one_by_one: false };
        trials.fewest = trials.failures_by_branch(planned);
        trials
    }

    /// Takes the sizes of the next round; `None` where nothing is left.
    pub fn next(&mut self, drafts: &mut [Draft]) -> Option<Round> {
        let mut round = Vec::new();
        for (branch, groups) in self.open.iter_mut().enumerate() {
            let Some(group) = groups.pop() else { continue };
            let before: Vec<(usize, Draft)> = group
                .into_iter()
                .filter_map(|circuit| {
                    let draft = drafts.get_mut(circuit)?;
                    let thinner = draft.thinner()?;
                    Some((circuit, core::mem::replace(draft, thinner)))
                })
                .collect();
            if !before.is_empty() {
                round.push((branch, before));
                if self.one_by_one {
                    break;
                }
            }
        }
        (!round.is_empty()).then_some(Round(round))
    }

    /// Keeps what fits, puts the rest back and halves it; `true` where something was kept. `fits`: the plan was judged
    /// and has not collapsed.
    pub fn conclude(
        &mut self,
        Round(round): Round,
        fits: bool,
        planned: &[Option<Planned>],
        drafts: &mut [Draft],
        tried_out: &mut [Option<Reason>],
    ) -> bool {
        self.kept.fill(false);
        let unknown = !fits && round.len() > 1;
        self.one_by_one |= unknown;
        let found = if fits { self.failures_by_branch(planned) } else { Vec::new() };
        let mut any = false;
        for (branch, before) in round {
            let at = |list: &[usize]| list.get(branch).copied().unwrap_or(usize::MAX);
            if fits && at(&found) <= at(&self.fewest) {
                any = true;
                if let Some(kept) = self.kept.get_mut(branch) {
                    *kept = true;
                }
                continue;
            }
            let mut group: Vec<usize> = before.iter().map(|(circuit, _)| *circuit).collect();
            for (circuit, draft) in before {
                if let Some(slot) = drafts.get_mut(circuit) {
                    *slot = draft;
                }
            }
            let Some(groups) = self.open.get_mut(branch) else { continue };
            if unknown {
                groups.push(group);
            } else if let [circuit] = *group.as_slice() {
                if let Some(slot) = tried_out.get_mut(circuit) {
                    *slot = first_obstacle(planned, circuit, &self.branch);
                }
            } else {
                let later = group.split_off(group.len() / 2);
                groups.push(later);
                groups.push(group);
            }
        }
        any
    }

    /// Whether the last trial of a circuit's branch was kept.
    pub fn keeps(&self, circuit: usize) -> bool {
        self.branch.get(circuit).and_then(|&b| self.kept.get(b)).copied().unwrap_or(false)
    }

    fn failures_by_branch(&self, planned: &[Option<Planned>]) -> Vec<usize> {
        let mut sums = vec![0; self.open.len()];
        for (planned, &branch) in planned.iter().zip(&self.branch) {
            if let (Some(planned), Some(sum)) = (planned, sums.get_mut(branch)) {
                *sum += failed(planned);
            }
        }
        sums
    }
}

/// The first check that speaks against a plan, a given circuit's own before those of others of its branch.
fn first_obstacle(planned: &[Option<Planned>], circuit: usize, branch: &[usize]) -> Option<Reason> {
    let own = planned.get(circuit)?.as_ref()?.judgement.first_obstacle();
    if let Some(check) = own {
        return Some(Reason::Check(*check));
    }
    let (other, check) = obstacles(planned).find(|(other, _)| branch.get(*other) == branch.get(circuit))?;
    Some(Reason::Path(check, other))
}

fn obstacles(planned: &[Option<Planned>]) -> impl Iterator<Item = (usize, crate::circuit::Checked)> {
    let all = planned.iter().enumerate();
    all.filter_map(|(circuit, p)| Some((circuit, *p.as_ref()?.judgement.first_obstacle()?)))
}

/// Failed checks of a plan.
fn failures(planned: &[Option<Planned>]) -> usize {
    planned.iter().flatten().map(failed).sum()
}

/// Failed checks of a circuit.
fn failed(planned: &Planned) -> usize {
    let of = |j: &Judgement| j.checks.iter().filter(|c| c.outcome == Outcome::Failed).count();
    of(&planned.judgement) + planned.further.iter().map(of).sum::<usize>()
}
