//! What stands between the sections: names, ends of circuits, and loops. What is fed and what is not tells
//! [`super::fed`].

use alloc::borrow::ToOwned;
use alloc::collections::{BTreeMap, BTreeSet};
use alloc::format;
use alloc::string::String;
use alloc::vec;
use alloc::vec::Vec;

use super::log::{Cut, Log, Quoted, nearest};
use super::nodes::{Kind, Node, Placed, Wire};
use super::reach::Reach;
use super::ways::{Groups, Way, path};

/// Circuits or loads named in one sentence, at most.
const MOST_NAMED: usize = 8;

/// Loops whose circuits are searched for; the search is linear in the circuits, so it must not be made for all.
const MOST_LOOPS: usize = 50;

/// All nodes and circuits of a document.
pub(super) struct Plan<'d> {
    /// The named things, then the inputs of those that have one.
    nodes: Vec<Node<'d>>,
    /// Input of a node, by its name.
    inputs: BTreeMap<&'d str, usize>,
    wires: Vec<Wire<'d>>,
}

impl<'d> Plan<'d> {
    pub(super) fn new(mut nodes: Vec<Node<'d>>, wires: Vec<Wire<'d>>) -> Self {
        let mut inputs = BTreeMap::new();
        for index in 0..nodes.len() {
            if let Some(input) = nodes.get(index).and_then(Node::input) {
                inputs.insert(input.name, nodes.len());
                nodes.push(input);
            }
        }
        Self { nodes, inputs, wires }
    }

    /// Reports every problem of names, ends and ways.
    pub(super) fn check(&self, log: &mut Log) {
        let (names, doubled) = self.names(log);
        self.check_circuit_names(log);
        self.check_presence(log);
        let mut ways: Vec<Vec<Way>> = vec![Vec::new(); self.nodes.len()];
        let mut all_known = true;
        let mut ends = Vec::with_capacity(self.wires.len());
        for wire in &self.wires {
            let known = self.ends(wire, &names, &doubled, log);
            all_known &= known.is_some();
            ends.push(known);
        }
        let refused = self.check_ways(&ends, &mut ways, log);
        // An end that is not known may be the feed that seems to be missing.
        if all_known {
            Reach::new(&self.nodes, &self.wires, &ends, &refused, &names, &self.inputs).check(log);
        }
    }

    /// What each name stands for, and the names that stand for two things.
    fn names(&self, log: &mut Log) -> (BTreeMap<&'d str, usize>, BTreeSet<&'d str>) {
        let mut names: BTreeMap<&str, usize> = BTreeMap::new();
        let mut doubled = BTreeSet::new();
        for (index, node) in self.nodes.iter().enumerate().filter(|(_, node)| !node.kind.is_input()) {
            let first = *names.entry(node.name).or_insert(index);
            let Some(other) = self.nodes.get(first).filter(|_| first != index) else { continue };
            let sentence = format!(
                "the name is taken by the {} of line {}; circuits could not tell them apart: rename one",
                other.kind.word(),
                log.line(other.at)
            );
            log.push(node.at, node.place(), sentence);
            doubled.insert(node.name);
        }
        (names, doubled)
    }

    fn check_circuit_names(&self, log: &mut Log) {
        let mut first: BTreeMap<&str, usize> = BTreeMap::new();
        for wire in &self.wires {
            let Some(name) = wire.name else { continue };
            let at = *first.entry(name).or_insert(wire.at);
            if at != wire.at {
                let sentence =
                    format!("the name is taken by the circuit of line {}; rename one", log.line(at));
                log.push(wire.at, wire.place(), sentence);
            }
        }
    }

    fn check_presence(&self, log: &mut Log) {
        let designs = self.nodes.iter().any(|node| node.kind == Kind::Load);
        if !designs && !self.nodes.iter().any(|node| node.kind == Kind::Bank) {
            log.push_whole("there is no [[bank]]; write the one that feeds the site".to_owned());
        }
        if self.nodes.iter().any(|node| node.kind.draws()) {
            return;
        }
        // Nothing draws: what is built can be inspected, but no size follows from it.
        if self.wires.is_empty() {
            log.push_whole(
                "there is no [[load]] and no [[circuit]]; write what is to be fed, or what is built"
                    .to_owned(),
            );
        } else if let Some(wire) = self.wires.iter().find(|wire| !wire.is_stated) {
            let sentence = "no [[load]] is stated, so nothing tells the current to design for; \
                            write the loads, or the size and the device that are built";
            log.push(wire.at, wire.place(), sentence.to_owned());
        }
    }

    /// The nodes at both ends; `None` where one is not known or not admitted.
    fn ends(
        &self,
        wire: &Wire<'d>,
        names: &BTreeMap<&'d str, usize>,
        doubled: &BTreeSet<&'d str>,
        log: &mut Log,
    ) -> Option<(usize, usize)> {
        let from = Self::end(wire, "from", wire.from, names, log);
        let to = Self::end(wire, "to", wire.to, names, log);
        let (from, named) = (from?, to?);
        // What such a name means is not known, and that it is doubled is reported.
        if [wire.from, wire.to].iter().flatten().any(|(name, _)| doubled.contains(name)) {
            return None;
        }
        let (source, target) = (self.nodes.get(from)?, self.nodes.get(named)?);
        let to = self.inputs.get(target.name).copied().unwrap_or(named);
        let (from_at, to_at) =
            (wire.from.map_or(wire.at, |(_, at)| at), wire.to.map_or(wire.at, |(_, at)| at));
        if from == named {
            log.push(wire.at, wire.place(), "both ends are the same; mend 'from' or 'to'".to_owned());
            return None;
        }
        let (at, key, sentence) = if target.is_ac {
            let sentence = format!(
                "{} is an AC load: its inverter feeds it, and no circuit of this file; take the circuit out",
                Quoted(target.name)
            );
            (to_at, "to", sentence)
        } else if matches!(target.kind, Kind::Array | Kind::Generator) {
            let sentence = format!(
                "{} is {} {}, which only gives; write the circuit the other way round, from = {0}",
                Quoted(target.name),
                target.kind.article(),
                target.kind.word()
            );
            (to_at, "to", sentence)
        } else if source.kind == Kind::Array && !matches!(target.kind, Kind::Controller | Kind::Board) {
            let sentence = format!(
                "{} is an array: it leads to a controller, or to a board before one, and to no {}",
                Quoted(source.name),
                target.kind.word()
            );
            (to_at, "to", sentence)
        } else if target.kind == Kind::Controller && !matches!(source.kind, Kind::Array | Kind::Board) {
            let sentence = format!(
                "a controller takes in what an array gives, and {} is {} {}; write the circuit from the controller to it",
                Quoted(source.name),
                source.kind.article(),
                source.kind.word()
            );
            (from_at, "from", sentence)
        } else if source.kind.draws() {
            let sentence = format!(
                "{} is {} {}, which feeds nothing; a circuit runs from a bank, a board or a source to what it feeds",
                Quoted(source.name),
                source.kind.article(),
                source.kind.word()
            );
            (from_at, "from", sentence)
        } else {
            return Some((from, to));
        };
        log.push(at, format!("{}, {key}", wire.place()), sentence);
        None
    }

    fn end(
        wire: &Wire<'d>,
        key: &str,
        end: Option<Placed<'d>>,
        names: &BTreeMap<&'d str, usize>,
        log: &mut Log,
    ) -> Option<usize> {
        let (name, at) = end?;
        if let Some(&index) = names.get(name) {
            return Some(index);
        }
        let place = format!("{}, {key}", wire.place());
        // Searching for the nearest name is dear in a file where every end is wrong.
        let near = if log.count() < 200 { nearest(name, names.keys().copied()) } else { None };
        let sentence = match near {
            Some(word) => format!("nothing is named '{}'; did you mean '{}'?", Cut(name), Cut(word)),
            None => {
                format!(
                    "nothing is named '{}'; name a bank, board, source, inverter or load of this file",
                    Cut(name)
                )
            }
        };
        log.push(at, place, sentence);
        None
    }

    /// Two ways to one node; the circuits that were refused for it.
    fn check_ways(
        &self,
        ends: &[Option<(usize, usize)>],
        ways: &mut [Vec<Way>],
        log: &mut Log,
    ) -> BTreeSet<usize> {
        let mut refused = BTreeSet::new();
        let mut groups = Groups::new(self.nodes.len());
        let mut feeds: Vec<Option<usize>> = vec![None; self.nodes.len()];
        let mut loops = 0_usize;
        for (number, (wire, end)) in self.wires.iter().zip(ends).enumerate() {
            let Some((from, to)) = *end else { continue };
            let Some(node) = self.nodes.get(to) else { continue };
            let feed = feeds.get(to).copied().flatten();
            let first = feed.and_then(|first| self.wires.get(first));
            let source = self.nodes.get(from).filter(|source| source.kind == Kind::Array);
            if let Some((array, &(other, _))) = source.zip(ways.get(from).and_then(|list| list.first())) {
                let other = self.wires.get(other).map_or_else(String::new, |wire| wire.label(log));
                let sentence = format!(
                    "{} leads to circuit {other} already: one array feeds one controller; state an array for each",
                    array.words()
                );
                log.push(wire.at, wire.place(), sentence);
                refused.insert(number);
                continue;
            }
            if let Some(first) = first.filter(|_| node.kind.draws()) {
                let what = match node.kind {
                    Kind::ControllerInput => {
                        "its arrays meet on a board before it, or each has a controller of its own"
                    }
                    Kind::ConverterInput => "put a board between, or take one out",
                    _ => "a load has one feed: put a board between, or take one out",
                };
                let sentence =
                    format!("{} is fed by circuit {} already; {what}", node.words(), first.label(log));
                log.push(wire.at, wire.place(), sentence);
                refused.insert(number);
                continue;
            }
            if !groups.join(from, to) {
                loops = loops.saturating_add(1);
                let path = if loops <= MOST_LOOPS { path(ways, from, to) } else { Vec::new() };
                let sentence = self.loop_sentence(node, &path, log);
                log.push(wire.at, wire.place(), sentence);
                refused.insert(number);
                continue;
            }
            if let Some(feed) = feeds.get_mut(to) {
                *feed = Some(number);
            }
            for (at, other) in [(from, to), (to, from)] {
                if let Some(list) = ways.get_mut(at) {
                    list.push((number, other));
                }
            }
        }
        refused
    }

    fn loop_sentence(&self, node: &Node<'_>, path: &[usize], log: &Log) -> String {
        let mut names: Vec<String> = path
            .iter()
            .take(MOST_NAMED)
            .filter_map(|&number| self.wires.get(number))
            .map(|wire| wire.label(log))
            .collect();
        let more = path.len().saturating_sub(MOST_NAMED);
        if more > 0 {
            names.push(format!("{more} more"));
        }
        let with = match names.len() {
            0 => String::new(),
            1 => format!(" with circuit {}", names.concat()),
            _ => format!(" with circuits {}", names.join(", ")),
        };
        format!(
            "it closes a loop{with}: there are two ways to {} {}; take one circuit of the loop out",
            node.kind.word(),
            Quoted(node.name)
        )
    }
}
