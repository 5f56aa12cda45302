//! Networks of circuits, those that the design adds included; what is wrong with them tells [`super::fed`].
//!
//! A network hangs together by conductors. Inputs of controllers and converters belong to the network before them,
//! their outputs to that behind. An array keeps a network of its own, which only controllers may tap.

use alloc::collections::{BTreeMap, BTreeSet};
use alloc::vec;
use alloc::vec::Vec;

use super::nodes::{Kind, Node, Wire};
use super::ways::Groups;

/// What one network holds: the first of each, by place among the nodes.
#[derive(Clone, Copy, Default)]
pub(super) struct Held {
    pub(super) bank: Option<usize>,
    pub(super) converter: Option<usize>,
    pub(super) charger: Option<usize>,
    pub(super) array: Option<usize>,
    pub(super) input: Option<usize>,
}

impl Held {
    /// What holds or raises the voltage of this network, other than an array.
    pub(super) fn live(&self) -> Option<usize> {
        self.bank.or(self.converter).or(self.charger)
    }
}

pub(super) struct Reach<'p, 'd> {
    /// The document's nodes, then the bank and the board of the design where it has none.
    pub(super) nodes: Vec<Node<'d>>,
    pub(super) stated: usize,
    pub(super) wires: &'p [Wire<'d>],
    pub(super) names: &'p BTreeMap<&'d str, usize>,
    pub(super) inputs: &'p BTreeMap<&'d str, usize>,
    pub(super) controllers: Vec<usize>,
    pub(super) has_array: bool,
    /// The first circuit that leads to a node and from it.
    pub(super) into: Vec<Option<usize>>,
    pub(super) out: Vec<Option<usize>>,
    /// Where the first way to a node comes from, a designed one included.
    pub(super) feed: Vec<Option<usize>>,
    /// The array whose designed circuit leads to an input.
    pub(super) tapped: Vec<Option<usize>>,
    /// Nodes whose circuit was refused, and whether an array leads nowhere: what is not fed may have its feed there.
    pub(super) doubtful: Vec<bool>,
    pub(super) is_loose: bool,
    pub(super) groups: Groups,
    pub(super) held: Vec<Held>,
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

    pub(super) fn way(list: &[Option<usize>], index: usize) -> Option<usize> {
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
    pub(super) fn controller_of(&self, array: &Node<'d>) -> Option<usize> {
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

    /// What hangs on the network of a node.
    pub(super) fn held_with(&mut self, index: usize) -> Held {
        let top = self.groups.top(index);
        self.held.get(top).copied().unwrap_or_default()
    }
}
