//! What stands between the sections: names, ends of circuits, loops, and loads that nothing feeds.

use alloc::borrow::ToOwned;
use alloc::collections::{BTreeMap, VecDeque};
use alloc::format;
use alloc::string::String;
use alloc::vec;
use alloc::vec::Vec;

use super::entry::Found;
use super::log::{Cut, Log, Quoted, nearest};
use super::ways::{Groups, Way, path};

/// Circuits or loads named in one sentence, at most.
const MOST_NAMED: usize = 8;

/// Loops whose circuits are searched for; the search is linear in the circuits, so it must not be made for all.
const MOST_LOOPS: usize = 50;

/// What a name stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    Bank,
    Board,
    Inverter,
    Load,
    Array,
    Controller,
    Generator,
    Converter,
    /// Where a controller or converter takes its power in; its output is a node of its own.
    Inlet,
}

impl Kind {
    fn word(self) -> &'static str {
        match self {
            Self::Bank => "bank",
            Self::Board => "board",
            Self::Inverter => "inverter",
            Self::Load => "load",
            Self::Array => "array",
            Self::Controller => "controller",
            Self::Generator => "generator",
            Self::Converter => "converter",
            Self::Inlet => "input",
        }
    }

    fn draws(self) -> bool {
        matches!(self, Self::Inverter | Self::Load | Self::Inlet)
    }

    /// It gives to what it is joined to, and takes nothing there.
    fn gives(self) -> bool {
        matches!(self, Self::Array | Self::Controller | Self::Generator | Self::Converter)
    }

    /// It keeps a network of its own at its voltage.
    fn roots(self) -> bool {
        matches!(self, Self::Bank | Self::Array | Self::Converter)
    }
}

/// Something a circuit may end at.
pub(super) struct Node<'d> {
    kind: Kind,
    name: &'d str,
    at: usize,
    /// Its circuit is designed: its route is stated, or it needs none.
    has_route: bool,
    /// It is fed from the AC side.
    is_ac: bool,
}

impl<'d> Node<'d> {
    /// `None` where the section states no name: that is reported with its section.
    pub(super) fn of(kind: Kind, found: Found<'d>) -> Option<Self> {
        let (name, _) = text_of(found, "name")?;
        let is_ac = found.table.get("ac").and_then(|value| value.get_ref().as_bool()).unwrap_or(false);
        Some(Self { kind, name, at: found.at, has_route: found.table.contains_key("route"), is_ac })
    }

    /// The input of a controller or converter.
    fn inlet(&self) -> Option<Self> {
        matches!(self.kind, Kind::Controller | Kind::Converter).then_some(Self { kind: Kind::Inlet, ..*self })
    }

    fn place(&self) -> String {
        format!("[[{}]] {}", self.kind.word(), Quoted(self.name))
    }
}

/// A circuit as far as its ends go.
pub(super) struct Wire<'d> {
    at: usize,
    name: Option<&'d str>,
    from: Option<(&'d str, usize)>,
    to: Option<(&'d str, usize)>,
    /// Whether size and device are stated, or the current where no load tells it.
    is_stated: bool,
}

impl<'d> Wire<'d> {
    pub(super) fn of(found: Found<'d>) -> Self {
        let has = |key: &str| found.table.contains_key(key);
        Self {
            at: found.at,
            name: text_of(found, "name").map(|(name, _)| name),
            from: text_of(found, "from"),
            to: text_of(found, "to"),
            is_stated: has("size") && has("device") || has("current"),
        }
    }

    fn place(&self) -> String {
        self.name.map_or_else(|| "[[circuit]]".to_owned(), |name| format!("[[circuit]] {}", Quoted(name)))
    }

    fn label(&self, log: &Log) -> String {
        self.name
            .map_or_else(|| format!("that of line {}", log.line(self.at)), |name| format!("{}", Quoted(name)))
    }
}

fn text_of<'d>(found: Found<'d>, key: &str) -> Option<(&'d str, usize)> {
    let value = found.table.get(key)?;
    value.get_ref().as_str().map(|text| (text, value.span().start))
}

/// All nodes and circuits of a document.
pub(super) struct Plan<'d> {
    /// The named things, then the inputs of those that have one.
    nodes: Vec<Node<'d>>,
    /// Input of a node, by its name.
    inlets: BTreeMap<&'d str, usize>,
    wires: Vec<Wire<'d>>,
}

impl<'d> Plan<'d> {
    pub(super) fn new(nodes: Vec<Node<'d>>, wires: Vec<Wire<'d>>) -> Self {
        let (mut nodes, mut inlets) = (nodes, BTreeMap::new());
        for index in 0..nodes.len() {
            if let Some(inlet) = nodes.get(index).and_then(Node::inlet) {
                inlets.insert(inlet.name, nodes.len());
                nodes.push(inlet);
            }
        }
        Self { nodes, inlets, wires }
    }

    /// Reports every problem of names, ends and ways.
    pub(super) fn check(&self, log: &mut Log) {
        let names = self.names(log);
        self.check_circuit_names(log);
        self.check_presence(log);
        let mut ways: Vec<Vec<Way>> = vec![Vec::new(); self.nodes.len()];
        let mut all_known = true;
        let mut ends = Vec::with_capacity(self.wires.len());
        for wire in &self.wires {
            let known = self.ends(wire, &names, log);
            all_known &= known.is_some();
            ends.push(known);
        }
        self.check_ways(&ends, &mut ways, log);
        // An end that is not known may be the feed that seems to be missing.
        if all_known {
            self.check_reach(&ends, log);
        }
    }

    fn names(&self, log: &mut Log) -> BTreeMap<&'d str, usize> {
        let mut names: BTreeMap<&str, usize> = BTreeMap::new();
        for (index, node) in self.nodes.iter().enumerate().filter(|(_, node)| node.kind != Kind::Inlet) {
            let first = *names.entry(node.name).or_insert(index);
            let Some(other) = self.nodes.get(first).filter(|_| first != index) else { continue };
            let sentence = format!(
                "the name is taken by the {} of line {}; circuits could not tell them apart: rename one",
                other.kind.word(),
                log.line(other.at)
            );
            log.push(node.at, node.place(), sentence);
        }
        names
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
        log: &mut Log,
    ) -> Option<(usize, usize)> {
        let from = Self::end(wire, "from", wire.from, names, log);
        let to = Self::end(wire, "to", wire.to, names, log);
        let (from, named) = (from?, to?);
        let target = self.nodes.get(named)?;
        let to = self.inlets.get(target.name).copied().unwrap_or(named);
        if target.is_ac || matches!(target.kind, Kind::Array | Kind::Generator) {
            let at = wire.to.map_or(wire.at, |(_, at)| at);
            let sentence = if target.is_ac {
                format!(
                    "{} is an AC load: its inverter feeds it, and no circuit of this file",
                    Quoted(target.name)
                )
            } else {
                format!(
                    "{} is an {} and only gives: write the circuit the other way round, from it",
                    Quoted(target.name),
                    if target.kind == Kind::Array { "array" } else { "engine or other source" }
                )
            };
            log.push(at, format!("{}, to", wire.place()), sentence);
            return None;
        }
        if from == named {
            log.push(wire.at, wire.place(), "both ends are the same; mend 'from' or 'to'".to_owned());
            return None;
        }
        let source = self.nodes.get(from)?;
        if let (Kind::Array, false) = (source.kind, matches!(target.kind, Kind::Controller | Kind::Board)) {
            let at = wire.to.map_or(wire.at, |(_, at)| at);
            let sentence = format!(
                "{} is an array: it leads to a controller, or to a board before one, never to a {} itself",
                Quoted(source.name),
                target.kind.word()
            );
            log.push(at, format!("{}, to", wire.place()), sentence);
            return None;
        }
        if source.kind.draws() {
            let at = wire.from.map_or(wire.at, |(_, at)| at);
            let sentence = format!(
                "{} is {} {}, which feeds nothing; a circuit runs from a bank or board to what it feeds",
                Quoted(source.name),
                if source.kind == Kind::Inverter { "an" } else { "a" },
                source.kind.word()
            );
            log.push(at, format!("{}, from", wire.place()), sentence);
            return None;
        }
        Some((from, to))
    }

    fn end(
        wire: &Wire<'d>,
        key: &str,
        end: Option<(&'d str, usize)>,
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
                    "nothing is named '{}'; name a bank, board, inverter, load or source of this file",
                    Cut(name)
                )
            }
        };
        log.push(at, place, sentence);
        None
    }

    /// Two ways to one node.
    fn check_ways(&self, ends: &[Option<(usize, usize)>], ways: &mut [Vec<Way>], log: &mut Log) {
        let mut groups = Groups::new(self.nodes.len());
        let mut feeds: Vec<Option<usize>> = vec![None; self.nodes.len()];
        let mut loops = 0_usize;
        for (number, (wire, end)) in self.wires.iter().zip(ends).enumerate() {
            let Some((from, to)) = *end else { continue };
            let Some(node) = self.nodes.get(to) else { continue };
            let feed = feeds.get(to).copied().flatten();
            let first = feed.and_then(|first| self.wires.get(first));
            if self.nodes.get(from).is_some_and(|node| node.kind == Kind::Array)
                && let Some(&(other, _)) = ways.get(from).and_then(|list| list.first())
            {
                let other = self.wires.get(other).map_or_else(String::new, |wire| wire.label(log));
                let sentence = format!(
                    "{} feeds circuit {other} already: one array leads to one controller; state two arrays, or put a \
                     board between",
                    self.nodes.get(from).map_or("the array", |node| node.name)
                );
                log.push(wire.at, wire.place(), sentence);
                continue;
            }
            if let Some(first) = first.filter(|_| node.kind.draws()) {
                let sentence = format!(
                    "{} {} is fed by circuit {} already; a load has one feed: put a board between, or take one out",
                    node.kind.word(),
                    Quoted(node.name),
                    first.label(log)
                );
                log.push(wire.at, wire.place(), sentence);
                continue;
            }
            if !groups.join(from, to) {
                loops = loops.saturating_add(1);
                let path = if loops <= MOST_LOOPS { path(ways, from, to) } else { Vec::new() };
                let sentence = self.loop_sentence(node, &path, log);
                log.push(wire.at, wire.place(), sentence);
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

    /// Loads and inverters that no bank feeds.
    fn check_reach(&self, ends: &[Option<(usize, usize)>], log: &mut Log) {
        let mut onward: Vec<Vec<usize>> = vec![Vec::new(); self.nodes.len()];
        let mut feed: Vec<Option<usize>> = vec![None; self.nodes.len()];
        for &(from, to) in ends.iter().flatten() {
            if let Some(list) = onward.get_mut(from) {
                list.push(to);
            }
            if let Some(feed) = feed.get_mut(to) {
                feed.get_or_insert(from);
            }
        }
        let mut reached = vec![false; self.nodes.len()];
        let mut queue: VecDeque<usize> = VecDeque::new();
        for (index, node) in self.nodes.iter().enumerate() {
            if node.kind.roots() {
                queue.push_back(index);
            }
        }
        self.add_designed(&mut onward);
        while let Some(index) = queue.pop_front() {
            match reached.get_mut(index) {
                Some(seen) if !*seen => *seen = true,
                _ => continue,
            }
            queue.extend(onward.get(index).into_iter().flatten());
        }
        let no_bank = !self.nodes.iter().any(|node| node.kind == Kind::Bank);
        for (index, node) in self.nodes.iter().enumerate() {
            let joined = onward.get(index).is_some_and(|list| !list.is_empty());
            if node.kind.gives() && node.kind != Kind::Converter && !joined && !node.has_route {
                let sentence = format!(
                    "no circuit leads from it; write a [[circuit]] with from = {}, or state its route and it is designed",
                    Quoted(node.name)
                );
                log.push(node.at, node.place(), sentence);
                continue;
            }
            let first = feed.get(index).copied().flatten();
            if !node.kind.draws() || node.is_ac || reached.get(index).copied().unwrap_or(true) {
                continue;
            }
            // What is designed: a load with its route, the input of a controller, and all of it where the bank is.
            if first.is_none() && (node.has_route || node.kind == Kind::Inlet) || no_bank {
                continue;
            }
            let sentence = match feed.get(index).copied().flatten().map(|first| self.unfed(first, &feed)) {
                None => format!(
                    "no circuit leads to it; write a [[circuit]] with to = {}, or state its route and it is designed",
                    Quoted(node.name)
                ),
                Some(Some(top)) => format!(
                    "no bank feeds it: it hangs on board {}, to which no circuit leads; write its feed",
                    Quoted(top.name)
                ),
                Some(None) => "no bank feeds it: the boards before it feed each other in a ring".to_owned(),
            };
            log.push(node.at, node.place(), sentence);
        }
    }

    /// A bank that states its route, and from which no circuit leads, is joined to a board by the design.
    fn add_designed(&self, onward: &mut [Vec<usize>]) {
        let Some(board) = self.nodes.iter().position(|node| node.kind == Kind::Board) else { return };
        for (index, node) in self.nodes.iter().enumerate() {
            if let (Kind::Bank, true, Some(list)) = (node.kind, node.has_route, onward.get_mut(index))
                && list.is_empty()
            {
                list.push(board);
            }
        }
    }

    /// The first node upstream that nothing feeds; `None` in a ring.
    fn unfed(&self, start: usize, feed: &[Option<usize>]) -> Option<&Node<'d>> {
        let mut index = start;
        for _ in 0..self.nodes.len() {
            match feed.get(index).copied().flatten() {
                Some(before) => index = before,
                None => return self.nodes.get(index),
            }
        }
        None
    }
}
