//! The site as trees: each bank with what hangs on it, parents before children.

use alloc::collections::{BTreeMap, VecDeque};
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;

use super::system::Site;

/// What a node is, by its place in the document.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Item {
    Bank(usize),
    Board(usize),
    Load(usize),
    Inverter(usize),
    /// Output of a controller or generator, by its place among the chargers.
    Charger(usize),
    /// Where an array feeds into a controller.
    ControllerInput(usize),
    /// Where a DC–DC converter draws from.
    ConverterInput(usize),
}

/// A node and the circuit it hangs by.
#[derive(Clone, Copy, Debug)]
pub(super) struct Node {
    pub item: Item,
    pub parent: usize,
    /// The circuit to the parent; `None` for the root.
    pub circuit: Option<usize>,
    /// The circuit's `to` lies on the parent's side.
    pub reversed: bool,
}

/// One tree, hung from a bank.
#[derive(Clone, Debug)]
pub(super) struct Tree {
    pub nodes: Vec<Node>,
}

/// All items and who is joined to whom.
pub(super) struct Graph {
    items: Vec<Item>,
    /// For each item: circuit, other item, and whether the circuit runs towards this item.
    joined: Vec<Vec<(usize, usize, bool)>>,
    /// Links: circuits between two banks, with the current that the document states for them. What flows in them the
    /// loads do not tell; to the rest of the network they are a load of that current at either end.
    pub links: BTreeMap<usize, f64>,
}

impl Graph {
    pub fn new(site: &Site) -> Self {
        let mut items = Vec::new();
        let mut names = BTreeMap::new();
        let mut add = |name, item| {
            names.insert(name, items.len());
            items.push(item);
        };
        // A source that has an input too: a circuit from it leaves its output, a circuit to it enters there.
        site.banks.iter().enumerate().for_each(|(i, x)| add(x.name.as_str(), Item::Bank(i)));
        site.boards.iter().enumerate().for_each(|(i, x)| add(x.name.as_str(), Item::Board(i)));
        site.loads.iter().enumerate().for_each(|(i, x)| add(x.name.as_str(), Item::Load(i)));
        site.inverters.iter().enumerate().for_each(|(i, x)| add(x.name.as_str(), Item::Inverter(i)));
        site.chargers.iter().enumerate().for_each(|(i, x)| add(x.name.as_str(), Item::Charger(i)));
        let mut inputs = BTreeMap::new();
        for (i, controller) in site.controllers.iter().enumerate() {
            inputs.insert(controller.name.as_str(), items.len());
            items.push(Item::ControllerInput(i));
        }
        for (i, converter) in site.converters.iter().enumerate() {
            inputs.insert(converter.name.as_str(), items.len());
            items.push(Item::ConverterInput(i));
        }

        let mut joined = vec![Vec::new(); items.len()];
        for (index, circuit) in site.circuits.iter().enumerate() {
            // The reader has refused ends that do not exist.
            let to = inputs.get(circuit.to.as_str()).or_else(|| names.get(circuit.to.as_str()));
            let ends = names.get(circuit.from.as_str()).zip(to);
            let Some((&from, &to)) = ends else { continue };
            if let Some(list) = joined.get_mut(from) {
                list.push((index, to, false));
            }
            if let Some(list) = joined.get_mut(to) {
                list.push((index, from, true));
            }
        }
        let mut graph = Self { items, joined, links: BTreeMap::new() };
        graph.find_links(site);
        graph
    }

    /// Takes a circuit with a stated current for a link as long as a bank remains on either side.
    fn find_links(&mut self, site: &Site) {
        if site.banks.len() < 2 {
            return;
        }
        for (index, circuit) in site.circuits.iter().enumerate() {
            let Some(amps) = circuit.current.map(|a| a.get::<ampere>()) else { continue };
            self.links.insert(index, amps);
            let ends: Vec<usize> = self
                .joined
                .iter()
                .enumerate()
                .filter(|(_, list)| list.iter().any(|&(c, ..)| c == index))
                .map(|(item, _)| item)
                .collect();
            let fed = |&item: &usize| {
                let side = self.walk(item, &mut vec![false; self.items.len()], true);
                side.nodes.iter().any(|n| matches!(n.item, Item::Bank(_)))
            };
            if !ends.iter().all(fed) {
                self.links.remove(&index);
            }
        }
    }

    /// One tree for each group of joined items, from its first bank.
    pub fn trees(&self) -> Vec<Tree> {
        self.forest(false)
    }

    /// The same with the links taken out: what each bank feeds by itself.
    pub fn islands(&self) -> Vec<Tree> {
        self.forest(true)
    }

    fn forest(&self, cut: bool) -> Vec<Tree> {
        let mut seen = vec![false; self.items.len()];
        let mut trees = Vec::new();
        for (index, item) in self.items.iter().enumerate() {
            if matches!(item, Item::Bank(_)) && !seen.get(index).copied().unwrap_or(true) {
                trees.push(self.walk(index, &mut seen, cut));
            }
        }
        trees
    }

    /// The island as seen from another of its banks.
    pub fn island_from(&self, bank: usize) -> Option<Tree> {
        let start = self.items.iter().position(|&i| i == Item::Bank(bank))?;
        Some(self.walk(start, &mut vec![false; self.items.len()], true))
    }

    /// Currents that links take out of the items they end at, A.
    pub fn drawn_by_links(&self) -> BTreeMap<Item, f64> {
        let mut drawn = BTreeMap::new();
        for (item, list) in self.items.iter().zip(&self.joined) {
            let sum: f64 = list.iter().filter_map(|(circuit, ..)| self.links.get(circuit)).sum();
            if sum > 0.0 {
                drawn.insert(*item, sum);
            }
        }
        drawn
    }

    fn walk(&self, start: usize, seen: &mut [bool], cut: bool) -> Tree {
        let mut nodes = Vec::new();
        let mut queue = VecDeque::new();
        queue.push_back((start, 0, None, false));
        while let Some((item_index, parent, circuit, reversed)) = queue.pop_front() {
            let Some((item, known)) = self.items.get(item_index).zip(seen.get_mut(item_index)) else {
                continue;
            };
            if core::mem::replace(known, true) {
                continue;
            }
            let own = nodes.len();
            nodes.push(Node { item: *item, parent, circuit, reversed });
            for &(circuit, other, towards) in self.joined.get(item_index).into_iter().flatten() {
                if cut && self.links.contains_key(&circuit) {
                    continue;
                }
                if !seen.get(other).copied().unwrap_or(true) {
                    queue.push_back((other, own, Some(circuit), towards));
                }
            }
        }
        Tree { nodes }
    }
}

/// Circuits from the root to a node.
pub(super) fn path_to(tree: &Tree, mut node: usize) -> Vec<usize> {
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
