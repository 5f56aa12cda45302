//! What is not fed, not led to a bank, or fed by what must not feed it: the sentences.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::String;

use super::log::{Log, Quoted};
use super::nodes::{Kind, Node, Placed};
use super::reach::{Held, Reach};

impl<'d> Reach<'_, 'd> {
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
