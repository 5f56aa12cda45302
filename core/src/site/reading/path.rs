//! Volts at a place and the drop along a circuit: which circuits lose more than they should, and what that implies.

use alloc::collections::BTreeSet;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electrical_resistance::ohm;
use uom::si::power::watt;

use super::group::Conditions;
use super::line::{Cause, CauseKind, Implied, NextMeasurement, Verdict};
use super::meter::telling_current;
use super::network::{Network, Place, is_unknown};
use super::span::Span;
use super::{Grade, Outcome};
use crate::cable::JointKind;
use crate::quantity::{ElectricCurrent, ElectricalResistance, Power};
use crate::site::graph::Item;
use crate::site::joints::limits;
use crate::site::model::Return;
use crate::site::parts::Reading;
use crate::site::wiring::name_of;

/// Below this part of the source's volts a path is open rather than poor.
const OPEN: f64 = 0.5;

/// A circuit that may lose more than it should.
#[derive(Clone, Copy, Debug)]
struct Suspect {
    node: usize,
    circuit: usize,
    /// Resistance beyond what it should have, Ω.
    extra: Span,
}

/// A question about one place under one set of loads.
pub(super) struct Question<'a> {
    pub network: &'a Network<'a>,
    pub under: &'a Conditions<'a>,
    pub reading: &'a Reading,
    pub place: Place,
}

impl Question<'_> {
    fn circuit_of(&self, node: usize) -> Option<usize> {
        self.network.tree(self.place)?.nodes.get(node)?.circuit
    }

    fn item_of(&self, node: usize) -> Option<Item> {
        Some(self.network.tree(self.place)?.nodes.get(node)?.item)
    }

    fn ohms(&self, circuit: usize) -> Span {
        self.network.ohms.get(circuit).copied().unwrap_or(Span::NOTHING)
    }

    /// A circuit whose resistance nobody knows, as a sentence.
    fn unknown_return(&self, nodes: &[usize]) -> Option<String> {
        nodes
            .iter()
            .filter_map(|&n| self.network.site.circuits.get(self.circuit_of(n)?))
            .find(|c| is_unknown(c))
            .map(|c| format!("the resistance of the chassis as a return of \"{}\" is not stated", c.name))
    }

    fn basis(&self) -> String {
        self.under.basis(self.network, self.place.tree)
    }

    /// Drop along the circuit of the place.
    pub fn drop(&self, read: Span) -> Outcome {
        let Some(circuit) = self.place.circuit else {
            return Outcome::not_comparable("a drop is measured along a circuit; name it in 'at'");
        };
        if let Some(why) = self.unknown_return(&[self.place.node]) {
            return Outcome::not_comparable(why);
        }
        let Some(current) = self.under.current(self.place.node) else {
            return Outcome::not_comparable(self.why());
        };
        let node = self.place.node;
        let predicted = current.times(self.ohms(circuit));
        let basis = match self.under.amps.get(&node) {
            Some(amps) => format!("the current as read in \"{}\"", amps.name),
            None => self.basis(),
        };
        let mut outcome = Outcome::compared(read, predicted, basis);
        match outcome.verdict {
            Verdict::Above => {
                let extra = read.over(current).less(self.ohms(circuit)).nought_or_more();
                self.losing(&mut outcome, vec![Suspect { node, circuit, extra }], node);
            }
            Verdict::Below => self.gaining(&mut outcome, &[node]),
            Verdict::Within | Verdict::NotComparable(_) => {}
        }
        outcome
    }

    /// Volts at a place that is not the bank itself.
    pub fn volts(&self, read: Span) -> Outcome {
        let path = self.network.path(self.place);
        if let Some(why) = self.unknown_return(&path) {
            return Outcome::not_comparable(why);
        }
        let predicted = self.under.measured.as_ref().ok().and_then(|s| s.volts.get(self.place.node)).copied();
        let Some(predicted) = predicted else { return Outcome::not_comparable(self.why()) };
        let mut outcome = Outcome::compared(read, predicted, self.basis());
        match outcome.verdict {
            Verdict::Below if read.greatest < OPEN * self.under.source.least => {
                outcome.causes =
                    path.iter().map(|&n| self.cause(CauseKind::OpenPath, n)).chain([self.lead()]).collect();
                outcome.grade = Grade::Differs;
                let next = self.along(&path, "volts at one terminal after the other,");
                outcome.next = next.map(|next| NextMeasurement { current: None, ..next });
            }
            Verdict::Below => {
                let suspects = self.suspects(&path, read);
                self.losing(&mut outcome, suspects, self.place.node);
            }
            Verdict::Above => self.gaining(&mut outcome, &path),
            Verdict::Within | Verdict::NotComparable(_) => {}
        }
        outcome
    }

    fn why(&self) -> String {
        self.under
            .measured
            .as_ref()
            .err()
            .cloned()
            .unwrap_or_else(|| "nothing is predicted there".to_string())
    }

    /// The circuits of a path that may take what is missing at its end: those between two places that were read, where
    /// more is lost than should be, without those whose own drop was read and is as it should be.
    fn suspects(&self, path: &[usize], end: Span) -> Vec<Suspect> {
        let mut suspects = Vec::new();
        let (mut from, mut between) = (self.under.source, Vec::new());
        for &node in path {
            between.push(node);
            let read = if Some(&node) == path.last() {
                Some(end)
            } else {
                self.under.volts.get(&node).map(|t| t.span)
            };
            if let Some(to) = read {
                suspects.extend(self.within(&between, from.less(to)));
                from = to;
                between.clear();
            }
        }
        if suspects.is_empty() {
            // No stretch loses too much by itself; all of them together do.
            suspects = self.within(path, self.under.source.less(end));
        }
        if suspects.is_empty() {
            // The errors of the meter leave nothing proven but that somewhere on the path it is missing.
            suspects = path
                .iter()
                .filter_map(|&node| {
                    Some(Suspect { node, circuit: self.circuit_of(node)?, extra: Span::NOTHING })
                })
                .collect();
        }
        suspects
    }

    /// Suspects of one stretch that loses so many volts.
    fn within(&self, stretch: &[usize], lost: Span) -> Vec<Suspect> {
        let mut suspects = Vec::new();
        let mut open = Vec::new();
        let (mut rest, mut expected) = (lost, Span::NOTHING);
        for &node in stretch {
            let (Some(circuit), Some(current)) = (self.circuit_of(node), self.under.current(node)) else {
                continue;
            };
            let predicted = current.times(self.ohms(circuit));
            if let Some(read) = self.under.drops.get(&circuit) {
                rest = rest.less(read.span);
                if read.span.is_above(predicted) {
                    let extra = read.span.over(current).less(self.ohms(circuit)).nought_or_more();
                    suspects.push(Suspect { node, circuit, extra });
                }
            } else {
                expected = expected.plus(predicted);
                open.push((node, circuit, current));
            }
        }
        if rest.is_above(expected) {
            let missing = rest.less(expected).nought_or_more();
            suspects.extend(open.into_iter().map(|(node, circuit, current)| {
                // What is missing beyond the rest of the stretch, all of it here.
                Suspect { node, circuit, extra: missing.over(current) }
            }));
        }
        suspects
    }

    /// More is lost than should be.
    fn losing(&self, outcome: &mut Outcome, suspects: Vec<Suspect>, end: usize) {
        let carries = |s: &Suspect| self.under.current(s.node).is_some_and(|i| i.greatest > 0.0);
        let suspects: Vec<Suspect> = suspects.into_iter().filter(carries).collect();
        let mut heats: Vec<Heat> = Vec::new();
        for suspect in &suspects {
            let Some(planned) = self.network.planned(suspect.circuit) else { continue };
            let current = planned.judgement.current;
            let heat = Heat::of(suspect.extra, current);
            outcome.implied.push(heat.implied(self.network.circuit_name(suspect.circuit)));
            heats.push(heat);
        }
        outcome.grade = Heat::grade(&heats);
        let mut loads: BTreeSet<&str> = BTreeSet::new();
        for suspect in &suspects {
            outcome.causes.push(self.cause(CauseKind::BadJoint, suspect.node));
            outcome.causes.push(self.cause(CauseKind::ConductorThinnerOrLonger, suspect.node));
            let back = self.network.site.circuits.get(suspect.circuit).map(|c| c.way_back);
            if back.is_some_and(|b| b != Return::Conductor) {
                outcome.causes.push(self.cause(CauseKind::ChassisReturn, suspect.node));
            }
            if self.under.amps.contains_key(&suspect.node) || self.is_ruled_out(suspect) {
                continue;
            }
            for (item, name) in self.loads_behind(suspect.node) {
                if !self.under.amps.keys().any(|&n| self.item_of(n) == Some(item)) {
                    loads.insert(name);
                }
            }
            if !matches!(self.item_of(suspect.node), Some(Item::Load(_))) {
                outcome.causes.push(self.cause(CauseKind::OtherLoadRan, suspect.node));
            }
        }
        outcome.causes.extend(loads.iter().map(|name| Cause::new(CauseKind::LoadDrawsMore, name)));
        if suspects.is_empty() {
            outcome.causes.push(Cause::new(CauseKind::OtherLoadRan, self.name(end)));
        }
        if !self.is_seen_elsewhere(end) {
            outcome.causes.push(self.lead());
        }
        outcome.next = match suspects.as_slice() {
            [] => self.along(&[end], "amps, and volts beside them,"),
            [one] => self.along(&[one.node], self.finer(one)),
            several => {
                let middle = several.get(several.len() / 2).map_or(end, |s| s.node);
                self.along(&[middle], "drop of both poles, and the amps,")
            }
        };
        if outcome.causes.len() < 2 {
            outcome.next = None;
        }
    }

    /// What parts the causes within one circuit.
    fn finer(&self, suspect: &Suspect) -> &'static str {
        if self.under.amps.contains_key(&suspect.node) {
            "drop from lug to lug of each conductor, and over each joint by itself,"
        } else {
            "drop of each pole, and the amps,"
        }
    }

    /// Less is lost than should be.
    fn gaining(&self, outcome: &mut Outcome, path: &[usize]) {
        outcome.grade = Grade::Differs;
        for &node in path {
            outcome.causes.push(self.cause(CauseKind::ConductorThickerOrShorter, node));
        }
        let end = path.last().copied().unwrap_or(0);
        if !self.under.amps.contains_key(&end) {
            let behind = self.loads_behind(end);
            outcome.causes.extend(behind.iter().map(|(_, n)| Cause::new(CauseKind::LoadDrawsLess, n)));
            if let Some(charger) = self.network.charger(self.place.tree) {
                outcome.causes.push(Cause::new(CauseKind::SourceCharged, charger));
            }
        }
        outcome.causes.push(self.lead());
        outcome.next = self.along(&[end], "drop of both poles, and the amps,");
    }

    /// The load draws more than stated: then the other circuits of the same current would lose more in the same
    /// measure; one that was read and does not rules it out.
    fn is_ruled_out(&self, suspect: &Suspect) -> bool {
        let ohms = self.ohms(suspect.circuit);
        let Some(current) = self.under.current(suspect.node) else { return false };
        // So many times the current would be needed at least.
        let times = 1.0 + suspect.extra.least / ohms.greatest.max(1e-12);
        self.under.drops.iter().any(|(&circuit, read)| {
            let node = self.node_of(circuit);
            let same = node.and_then(|n| self.under.current(n)) == Some(current);
            circuit != suspect.circuit
                && same
                && times * current.least * self.ohms(circuit).least > read.span.greatest
        })
    }

    fn node_of(&self, circuit: usize) -> Option<usize> {
        self.network.tree(self.place)?.nodes.iter().position(|n| n.circuit == Some(circuit))
    }

    /// Another reading on the same path, elsewhere, shows too little as well.
    fn is_seen_elsewhere(&self, end: usize) -> bool {
        let Ok(solved) = &self.under.measured else { return false };
        let is_low = |&node: &usize| {
            let read = self.under.volts.get(&node).zip(solved.volts.get(node));
            let low = read.is_some_and(|(read, &predicted)| predicted.is_above(read.span));
            let drop = self.circuit_of(node).and_then(|c| Some((self.under.drops.get(&c)?, c)));
            let high = drop
                .zip(self.under.current(node))
                .is_some_and(|((read, c), current)| read.span.is_above(current.times(self.ohms(c))));
            // The same reading does not bear itself out.
            (low && (node != end || self.reading.volts.is_none()))
                || (high && (node != end || self.reading.drop.is_none()))
        };
        let path = self.network.path(self.place);
        let beyond = self
            .under
            .volts
            .keys()
            .chain(self.under.amps.keys())
            .copied()
            .filter(|&n| self.network.path(Place { node: n, ..self.place }).contains(&end));
        let beyond: Vec<usize> = beyond.collect();
        path.iter().chain(&beyond).any(is_low)
    }

    /// Loads that ran behind a node, with their names.
    fn loads_behind(&self, node: usize) -> Vec<(Item, &str)> {
        let Some(tree) = self.network.tree(self.place) else { return Vec::new() };
        let mut behind = vec![false; tree.nodes.len()];
        let mut loads = Vec::new();
        for (index, own) in tree.nodes.iter().enumerate() {
            let is_behind = index == node || (index > 0 && behind.get(own.parent).copied().unwrap_or(false));
            if let Some(slot) = behind.get_mut(index) {
                *slot = is_behind;
            }
            let name = name_of(self.network.site, own.item);
            let ran = match own.item {
                Item::Load(_) => self.under.on.contains(&name),
                Item::Inverter(_) | Item::ConverterInput(_) => true,
                _ => false,
            };
            if is_behind && ran {
                loads.push((own.item, name));
            }
        }
        loads
    }

    fn name(&self, node: usize) -> &str {
        self.item_of(node).map_or("", |item| name_of(self.network.site, item))
    }

    /// A cause in the circuit that feeds a node.
    fn cause(&self, kind: CauseKind, node: usize) -> Cause {
        Cause::new(kind, self.circuit_of(node).map_or("", |c| self.network.circuit_name(c)))
    }

    fn lead(&self) -> Cause {
        Cause::new(CauseKind::MeterLead, &self.reading.at)
    }

    /// A measurement from the beginning of the first circuit of a path to the end of its last.
    fn along(&self, path: &[usize], what: &'static str) -> Option<NextMeasurement> {
        let tree = self.network.tree(self.place)?;
        let from = tree.nodes.get(tree.nodes.get(*path.first()?)?.parent)?.item;
        let terminal = |name: &str| format!("the terminals of \"{name}\"");
        let ohms = path.iter().filter_map(|&n| self.circuit_of(n)).map(|c| self.ohms(c).greatest).sum();
        Some(NextMeasurement {
            what,
            between: (terminal(name_of(self.network.site, from)), terminal(self.name(*path.last()?))),
            current: telling_current(self.reading, ohms),
        })
    }
}

/// Heat in a resistance beyond what is predicted, at the current of the worst hour.
#[derive(Clone, Copy, Debug)]
pub(super) struct Heat {
    extra: Span,
    current: ElectricCurrent,
    watts: Span,
}

impl Heat {
    pub fn of(extra: Span, current: ElectricCurrent) -> Self {
        let amps = current.get::<ampere>();
        let watts = if amps > 0.0 { extra.times(Span::exactly(amps * amps)) } else { Span::NOTHING };
        Self { extra, current, watts }
    }

    pub fn implied(&self, circuit: &str) -> Implied {
        let ohms = ElectricalResistance::new::<ohm>;
        Implied::Resistance {
            circuit: circuit.to_string(),
            extra: (ohms(self.extra.least), ohms(self.extra.greatest)),
            current: self.current,
            heat: (Power::new::<watt>(self.watts.least), Power::new::<watt>(self.watts.greatest)),
        }
    }

    /// A danger where wherever it sits it burns for certain; nonconforming where somewhere it may.
    pub fn grade(all: &[Self]) -> Grade {
        let burns = |heat: &Self| {
            let [_, _, danger_W] = limits(JointKind::Lug, heat.current);
            heat.watts.least > danger_W
        };
        let may = |heat: &Self| {
            let [_, most_W, _] = limits(JointKind::Lug, heat.current);
            heat.watts.greatest > most_W
        };
        if all.is_empty() {
            Grade::Differs
        } else if all.iter().all(burns) {
            Grade::Burns
        } else if all.iter().any(may) {
            Grade::MayBurn
        } else {
            Grade::Warms
        }
    }
}
