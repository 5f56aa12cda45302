//! What is fed and what is not: networks of circuits, those that the design adds included.
//!
//! A network hangs together by conductors. Inputs of controllers and converters belong to the network before them,
//! their outputs to that behind. An array keeps a network of its own, which only controllers may tap.

use alloc::borrow::ToOwned;
use alloc::collections::{BTreeMap, BTreeSet};
use alloc::format;
use alloc::string::String;
use alloc::vec;
use alloc::vec::Vec;

use super::log::{Log, Quoted};
use super::nodes::{Kind, Node, Placed, Wire};
use super::ways::Groups;

/// What one network holds: the first of each, by place among the nodes.
#[derive(Clone, Copy, Default)]
struct Held {
    bank: Option<usize>,
    converter: Option<usize>,
    charger: Option<usize>,
    array: Option<usize>,
    input: Option<usize>,
}

impl Held {
    /// What holds or raises the voltage of this network, other than an array.
    fn live(&self) -> Option<usize> {
        self.bank.or(self.converter).or(self.charger)
    }
}

pub(super) struct Reach<'p, 'd> {
    /// The document's nodes, then the bank and the board of the design where it has none.
    nodes: Vec<Node<'d>>,
    stated: usize,
    wires: &'p [Wire<'d>],
    names: &'p BTreeMap<&'d str, usize>,
    inputs: &'p BTreeMap<&'d str, usize>,
    controllers: Vec<usize>,
    has_array: bool,
    /// The first circuit that leads to a node and from it.
    into: Vec<Option<usize>>,
    out: Vec<Option<usize>>,
    /// Where the first way to a node comes from, a designed one included.
    feed: Vec<Option<usize>>,
    /// The array whose designed circuit leads to an input.
    tapped: Vec<Option<usize>>,
    /// Nodes whose circuit was refused, and whether an array leads nowhere: what is not fed may have its feed there.
    doubtful: Vec<bool>,
    is_loose: bool,
    groups: Groups,
    held: Vec<Held>,
}

impl<'p, 'd> Reach<'p, 'd> {
    pub(super) fn new(
        nodes: &[Node<'d>],
        wires: &'p [Wire<'d>],
        ends: &[Option<(usize, usize)>],
        refused: &BTreeSet<usize>,
        names: &'p BTreeMap<&'d str, usize>,
        inputs: &'p BTreeMap<&'d str, usize>,
    ) -> Self {
        let stated = nodes.len();
        let mut nodes = nodes.to_vec();
        for kind in [Kind::Bank, Kind::Board] {
            if !nodes.iter().any(|node| node.kind == kind) {
                nodes.push(Node::designed(kind));
            }
        }
        let of_kind = |kind: Kind| {
            nodes.iter().enumerate().filter(move |(_, node)| node.kind == kind).map(|(index, _)| index)
        };
        let controllers: Vec<usize> = of_kind(Kind::Controller).collect();
        let has_array = of_kind(Kind::Array).next().is_some();
        let count = nodes.len();
        let mut reach = Self {
            nodes,
            stated,
            wires,
            names,
            inputs,
            controllers,
            has_array,
            into: vec![None; count],
            out: vec![None; count],
            feed: vec![None; count],
            tapped: vec![None; count],
            doubtful: vec![false; count],
            is_loose: false,
            groups: Groups::new(count),
            held: vec![Held::default(); count],
        };
        for (number, end) in ends.iter().enumerate() {
            let Some((from, to)) = *end else { continue };
            if let (Some(out), Some(into)) = (reach.out.get_mut(from), reach.into.get_mut(to)) {
                out.get_or_insert(number);
                into.get_or_insert(number);
            }
            if refused.contains(&number) {
                for end in [from, to] {
                    if let Some(doubtful) = reach.doubtful.get_mut(end) {
                        *doubtful = true;
                    }
                }
                continue;
            }
            reach.join(from, to);
        }
        reach.add_designed();
        reach.hold();
        reach
    }

    fn join(&mut self, from: usize, to: usize) {
        if let Some(feed) = self.feed.get_mut(to) {
            feed.get_or_insert(from);
        }
        self.groups.join(from, to);
    }

    fn way(list: &[Option<usize>], index: usize) -> Option<usize> {
        list.get(index).copied().flatten()
    }

    /// The circuits that the design adds: of banks that nothing is joined to, and of all that state their route.
    fn add_designed(&mut self) {
        let first = self.nodes.iter().position(|node| node.kind == Kind::Board);
        for index in 0..self.nodes.len() {
            let Some(&node) = self.nodes.get(index) else { continue };
            let (into, out) = (Self::way(&self.into, index), Self::way(&self.out, index));
            let named = node.board.and_then(|(name, _)| self.names.get(name).copied());
            let board =
                named.filter(|&at| self.nodes.get(at).is_some_and(|n| n.kind == Kind::Board)).or(first);
            let Some(board) = board else { continue };
            match node.kind {
                Kind::Bank if into.is_none() && out.is_none() => self.join(index, board),
                Kind::Load | Kind::Inverter if into.is_none() && node.route.is_some() && !node.is_ac => {
                    self.join(board, index);
                }
                Kind::Controller | Kind::Generator if out.is_none() && node.route.is_some() => {
                    self.join(index, board);
                }
                Kind::Array if out.is_none() => {
                    let input = self.controller_of(&node).filter(|_| node.route.is_some());
                    let Some(input) = input else {
                        self.is_loose = true;
                        continue;
                    };
                    if Self::way(&self.into, input).is_some() || Self::way(&self.tapped, input).is_some() {
                        continue;
                    }
                    if let Some(slot) = self.tapped.get_mut(input) {
                        *slot = Some(index);
                    }
                    self.join(index, input);
                }
                _ => {}
            }
        }
    }

    /// The input of the controller that an array names, or of the only one.
    fn controller_of(&self, array: &Node<'d>) -> Option<usize> {
        let controller = match array.controller {
            Some((name, _)) => self.names.get(name).copied(),
            None if self.controllers.len() == 1 => self.controllers.first().copied(),
            None => None,
        };
        let controller = controller.and_then(|index| self.nodes.get(index))?;
        (controller.kind == Kind::Controller).then(|| self.inputs.get(controller.name).copied()).flatten()
    }

    fn hold(&mut self) {
        for index in 0..self.nodes.len() {
            let Some(kind) = self.nodes.get(index).map(|node| node.kind) else { continue };
            let top = self.groups.top(index);
            let Some(held) = self.held.get_mut(top) else { continue };
            let slot = match kind {
                Kind::Bank => &mut held.bank,
                Kind::Converter => &mut held.converter,
                Kind::Controller | Kind::Generator => &mut held.charger,
                Kind::Array => &mut held.array,
                Kind::ControllerInput => &mut held.input,
                _ => continue,
            };
            slot.get_or_insert(index);
        }
    }

    /// Reports what is not fed, not led to a bank, or fed by what must not feed it.
    pub(super) fn check(mut self, log: &mut Log) {
        for index in 0..self.stated {
            let Some(&node) = self.nodes.get(index) else { continue };
            let held = self.held_with(index);
            let is_doubtful = self.doubtful.get(index).copied().unwrap_or(false);
            let sentence = match node.kind {
                _ if is_doubtful => None,
                Kind::Bank | Kind::Board => None,
                Kind::Load if node.is_ac => None,
                Kind::Load | Kind::Inverter | Kind::ConverterInput => self.of_load(index, &node, held),
                Kind::ControllerInput => self.of_input(index, &node, held),
                Kind::Array => self.of_array(index, &node, held),
                Kind::Controller | Kind::Generator => self.of_charger(index, &node, held),
                Kind::Converter => Self::way(&self.out, index).is_none().then(|| {
                    format!(
                        "no circuit leads from it; write a [[circuit]] with from = {}, or take it out",
                        Quoted(node.name)
                    )
                }),
            };
            if let Some(sentence) = sentence {
                log.push(node.at, node.place(), sentence);
            }
            if !node.kind.is_input() && !node.is_ac {
                self.check_stated_twice(index, &node, log);
            }
        }
    }

    /// What hangs on the network of a node.
    fn held_with(&mut self, index: usize) -> Held {
        let top = self.groups.top(index);
        self.held.get(top).copied().unwrap_or_default()
    }

    fn words(&self, index: Option<usize>) -> String {
        index.and_then(|index| self.nodes.get(index)).map_or_else(String::new, Node::words)
    }

    /// A load, an inverter, or the input of a converter.
    fn of_load(&self, index: usize, node: &Node<'d>, held: Held) -> Option<String> {
        let is_joined = Self::way(&self.feed, index).is_some();
        if !is_joined && node.kind == Kind::ConverterInput {
            return Some(format!(
                "no circuit leads to its input; write a [[circuit]] with to = {}",
                Quoted(node.name)
            ));
        }
        if !is_joined {
            return Some(format!(
                "no circuit leads to it; write a [[circuit]] with to = {}, or state its route and it is designed",
                Quoted(node.name)
            ));
        }
        if held.bank.is_some() || held.converter.is_some() {
            return None;
        }
        if held.array.is_some() {
            return Some(format!(
                "it hangs on {}, and an array feeds a controller only; feed it from a bank's board",
                self.words(held.array)
            ));
        }
        if held.charger.is_some() {
            return Some(format!(
                "no bank feeds it: it hangs on {}, which gives only beside a bank; join its board to one",
                self.words(held.charger)
            ));
        }
        Some(match self.unfed(index) {
            Some(top) if top.name.is_empty() => {
                "no bank feeds it: there is no [[board]] for its designed circuit; write one, and a circuit to it"
                    .to_owned()
            }
            Some(top) => format!(
                "no bank feeds it: it hangs on {}, to which no circuit leads; write its feed",
                top.words()
            ),
            None => "no bank feeds it: the boards before it feed each other in a ring".to_owned(),
        })
    }

    /// The input of a controller.
    fn of_input(&self, index: usize, node: &Node<'d>, held: Held) -> Option<String> {
        if let Some(live) = held.live() {
            // Where an array hangs there too, that is reported with the array.
            return held.array.is_none().then(|| format!(
                "it takes in what an array gives, and its input hangs on {}; write that circuit from = {}",
                self.words(Some(live)),
                Quoted(node.name)
            ));
        }
        if held.array.is_none() {
            let is_joined = Self::way(&self.into, index).is_some();
            return (is_joined || self.has_array && !self.is_loose).then(|| {
                "no array leads to it; write the circuit, or name it as the controller of an array that states its route"
                    .to_owned()
            });
        }
        (held.input != Some(index)).then(|| {
            format!(
                "it hangs on {} beside {}: one array feeds one controller; state an array for each",
                self.words(held.array),
                self.words(held.input)
            )
        })
    }

    fn of_array(&mut self, index: usize, node: &Node<'d>, held: Held) -> Option<String> {
        if let Some(live) = held.live() {
            let live = Some(live).filter(|_| held.bank.is_some() || held.converter.is_some());
            return Some(match live {
                Some(_) => format!(
                    "it is joined to {} without a controller between; lead its circuit to a controller",
                    self.words(live)
                ),
                None => format!(
                    "the output of {} hangs on it; lead that to the bank's board, by its key 'board' or a circuit",
                    self.words(held.charger)
                ),
            });
        }
        if Self::way(&self.out, index).is_some() {
            return match node.controller.and_then(|_| self.controller_of(node)) {
                Some(input) if held.input != Some(input) => Some(format!(
                    "its circuit does not lead to {}, the controller that it states; mend the one that is wrong",
                    Quoted(node.controller.map_or("", |(name, _)| name))
                )),
                None if held.input.is_none() => {
                    Some("its circuit leads to no controller; write the circuit on to one".to_owned())
                }
                _ => None,
            };
        }
        if node.route.is_none() {
            return Some(format!(
                "no circuit leads from it; write a [[circuit]] with from = {}, or state its route and it is designed",
                Quoted(node.name)
            ));
        }
        if node.controller.is_none() && self.controllers.len() > 1 {
            return Some(format!(
                "which of the {} controllers it leads to is not stated; state it as 'controller'",
                self.controllers.len()
            ));
        }
        // Where the design cannot lead it there, another array is in its place.
        let input = self.controller_of(node)?;
        let other = match Self::way(&self.tapped, input) {
            Some(other) if other == index => return None,
            Some(other) => self.words(Some(other)),
            None => {
                // Fed from elsewhere than an array: that is reported with the input.
                let array = self.held_with(input).array?;
                self.words(Some(array))
            }
        };
        Some(format!(
            "{} is fed by {other} already; write circuits from both to a board before it, or state a controller for each",
            self.words(Some(input))
        ))
    }

    /// The output of a controller or generator.
    fn of_charger(&mut self, index: usize, node: &Node<'d>, held: Held) -> Option<String> {
        // Its circuit is written the wrong way round: that is reported with its input.
        let input = self.inputs.get(node.name).copied();
        if input.is_some_and(|input| self.held_with(input).live().is_some()) {
            return None;
        }
        if Self::way(&self.out, index).is_none() && node.route.is_none() {
            return Some(format!(
                "no circuit leads from it; write a [[circuit]] with from = {}, or state its route and it is designed",
                Quoted(node.name)
            ));
        }
        // An array's own problem, or that of the controller's input.
        if held.array.is_some() || held.input.is_some() {
            return None;
        }
        if held.bank.is_none() {
            return Some(
                "it charges nothing: no bank hangs on the circuits that it leads to; join one".to_owned(),
            );
        }
        let (name, _) = node.bank?;
        let bank = self
            .names
            .get(name)
            .copied()
            .filter(|&at| self.nodes.get(at).is_some_and(|n| n.kind == Kind::Bank))?;
        (self.groups.top(bank) != self.groups.top(index)).then(|| {
            format!(
                "its circuits do not lead to bank {}, which it states; mend the one that is wrong",
                Quoted(name)
            )
        })
    }

    /// A route or a board of a circuit that is designed, beside the circuit itself.
    fn check_stated_twice(&self, index: usize, node: &Node<'d>, log: &mut Log) {
        let (into, out) = (Self::way(&self.into, index), Self::way(&self.out, index));
        let number = match node.kind {
            Kind::Load | Kind::Inverter => into,
            Kind::Bank => out.or(into),
            _ => out,
        };
        let Some(wire) = number.and_then(|number| self.wires.get(number)) else { return };
        if let Some(at) = node.route {
            let sentence =
                format!("circuit {} states its length already; take the route out", wire.label(log));
            log.push(at, format!("{}, route", node.place()), sentence);
        }
        let is_end = |end: Option<Placed<'d>>, name: &str| end.is_some_and(|(end, _)| end == name);
        let is_board = |name: &str| {
            let named = self.names.get(name).and_then(|&index| self.nodes.get(index));
            named.is_some_and(|node| node.kind == Kind::Board)
        };
        if let Some((name, at)) = node.board
            && is_board(name)
            && !is_end(wire.from, name)
            && !is_end(wire.to, name)
        {
            let sentence = format!(
                "circuit {} leads elsewhere than to {}; mend the one that is wrong",
                wire.label(log),
                Quoted(name)
            );
            log.push(at, format!("{}, board", node.place()), sentence);
        }
    }

    /// The first node upstream that nothing feeds; `None` in a ring.
    fn unfed(&self, start: usize) -> Option<&Node<'d>> {
        let mut index = start;
        for _ in 0..self.nodes.len() {
            match Self::way(&self.feed, index) {
                Some(before) => index = before,
                None => return self.nodes.get(index),
            }
        }
        None
    }
}
