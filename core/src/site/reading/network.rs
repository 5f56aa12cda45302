//! What the network would show with only the named loads running: volts and amperes between two bounds.
//!
//! Volts fall with the resistance of the path and with what is drawn, and rise with the source: one solution at the far
//! end of each gives each bound. Currents follow from the volts load by load, and sum up towards the source.

use alloc::collections::BTreeMap;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::span::Span;
use crate::cable::{Conductor, least_linear_resistance, linear_resistance};
use crate::network::{NodeLoad, NodeState, Source, TreeNode, solve};
use crate::quantity::{
    ElectricCurrent, ElectricPotential, ElectricalResistance, Length, Power, ThermodynamicTemperature,
};
use crate::site::graph::{Item, Tree};
use crate::site::model::{CircuitEntry, LoadKind, Return};
use crate::site::offers::joints;
use crate::site::plan::{Plan, Planned};
use crate::site::system::{BankEntry, FeedKind, Site};
use crate::site::wiring::name_of;

/// How far the output of a converter may lie from its setting. Common practice, no source.
const OUTPUT_RATIO: f64 = 0.02;

/// Where something was measured.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Place {
    pub tree: usize,
    pub node: usize,
    /// The circuit that was measured, or that feeds what was measured.
    pub circuit: Option<usize>,
}

/// Volts at each node and amperes into it; for the root, out of the source.
#[derive(Clone, Debug)]
pub(super) struct Solved {
    pub volts: Vec<Span>,
    pub amps: Vec<Span>,
}

/// What a node takes by itself.
#[derive(Clone, Copy)]
struct Draw {
    /// Constant power, W.
    power: Span,
    /// Constant current, A.
    current: Span,
    /// Resistive, W at nominal voltage.
    resistive: Span,
}

const NO_DRAW: Draw = Draw { power: Span::NOTHING, current: Span::NOTHING, resistive: Span::NOTHING };

/// The network of a plan with its loop resistances between two bounds.
pub(super) struct Network<'a> {
    pub site: &'a Site,
    pub plan: &'a Plan,
    /// Loop of each circuit, Ω.
    pub ohms: Vec<Span>,
    places: BTreeMap<&'a str, Place>,
}

impl<'a> Network<'a> {
    pub fn new(site: &'a Site, plan: &'a Plan) -> Self {
        let ohms = site
            .circuits
            .iter()
            .zip(&plan.circuits)
            .map(|(circuit, planned)| planned.as_ref().map_or(Span::NOTHING, |p| loop_span(site, circuit, p)))
            .collect();
        let mut places = BTreeMap::new();
        for (tree, hung) in plan.trees.iter().enumerate() {
            for (node, own) in hung.nodes.iter().enumerate() {
                let place = Place { tree, node, circuit: own.circuit };
                if let Some(circuit) = own.circuit.and_then(|c| site.circuits.get(c)) {
                    places.insert(circuit.name.as_str(), place);
                }
                // An output that has an input too is measured at its output.
                places.entry(name_of(site, own.item)).or_insert(place);
            }
        }
        Self { site, plan, ohms, places }
    }

    pub fn place(&self, name: &str) -> Option<Place> {
        self.places.get(name).copied()
    }

    pub fn tree(&self, place: Place) -> Option<&'a Tree> {
        self.plan.trees.get(place.tree)
    }

    pub fn item(&self, place: Place) -> Option<Item> {
        self.tree(place)?.nodes.get(place.node).map(|n| n.item)
    }

    pub fn planned(&self, circuit: usize) -> Option<&'a Planned> {
        self.plan.circuits.get(circuit)?.as_ref()
    }

    pub fn circuit_name(&self, circuit: usize) -> &'a str {
        self.site.circuits.get(circuit).map_or("", |c| c.name.as_str())
    }

    /// Nodes from the root to a node, the root left out.
    pub fn path(&self, place: Place) -> Vec<usize> {
        let mut path = Vec::new();
        let mut here = place.node;
        while let Some(node) =
            self.tree(place).and_then(|t| t.nodes.get(here)).filter(|n| n.circuit.is_some())
        {
            path.push(here);
            here = node.parent;
        }
        path.reverse();
        path
    }

    /// The bank, converter output or array that a tree hangs from.
    pub fn root(&self, tree: usize) -> Option<&'a BankEntry> {
        match self.plan.trees.get(tree)?.nodes.first()?.item {
            Item::Bank(bank) => self.site.banks.get(bank),
            _ => None,
        }
    }

    /// A source other than the bank may feed into the tree.
    pub fn charger(&self, tree: usize) -> Option<&'a str> {
        let nodes = &self.plan.trees.get(tree)?.nodes;
        nodes.iter().find(|n| matches!(n.item, Item::Charger(_))).map(|n| name_of(self.site, n.item))
    }

    /// Why nothing is predicted of a tree.
    fn unknown(&self, tree: usize) -> Option<String> {
        let root = self.root(tree)?;
        if let FeedKind::Array(_) = root.kind {
            return Some("what the sun gave at that moment is not known".to_string());
        }
        let nodes = &self.plan.trees.get(tree)?.nodes;
        let other = nodes.iter().skip(1).find(|n| matches!(n.item, Item::Bank(_)))?;
        Some(format!(
            "\"{}\" and \"{}\" may both feed it; measure with one of them disconnected and taken out of the file",
            root.name,
            name_of(self.site, other.item)
        ))
    }

    /// Where the bank may stand without a reading of it: from disconnect to its highest voltage.
    pub fn source(&self, tree: usize) -> Option<Span> {
        let root = self.root(tree)?;
        let highest = root.highest.get::<volt>();
        if !root.is_battery() {
            return Some(Span::around(highest, highest * OUTPUT_RATIO));
        }
        let disconnect = root.part.as_ref().and_then(|p| p.disconnect).unwrap_or(root.cut_off);
        Some(Span::new(disconnect.get::<volt>().min(highest), highest))
    }

    /// Solves a tree with the named loads on and its source between two voltages. `measured` currents stand in for what
    /// the document states of an item; constant powers draw their current at the volts `read` at their node.
    ///
    /// The sentence of an error says what is missing.
    pub fn solve(
        &self,
        tree: usize,
        on: &[&str],
        source: Span,
        measured: &BTreeMap<Item, Span>,
        read: &BTreeMap<usize, Span>,
    ) -> Result<Solved, String> {
        self.solve_within(tree, on, source, (measured, read), self.site.converters.len())
    }

    fn solve_within(
        &self,
        tree: usize,
        on: &[&str],
        source: Span,
        (measured, read): (&BTreeMap<Item, Span>, &BTreeMap<usize, Span>),
        deeper: usize,
    ) -> Result<Solved, String> {
        let no_tree = || "it hangs on no bank".to_string();
        let hung = self.plan.trees.get(tree).ok_or_else(no_tree)?;
        let nominal = self.root(tree).ok_or_else(no_tree)?.nominal.get::<volt>();
        if let Some(why) = self.unknown(tree) {
            return Err(why);
        }
        let mut draws = Vec::with_capacity(hung.nodes.len());
        for node in &hung.nodes {
            draws.push(match measured.get(&node.item) {
                Some(&current) => Draw { current, ..NO_DRAW },
                None => self.draw(node.item, on, nominal, deeper)?,
            });
        }
        let low = self.volts(hung, &draws, source.least, nominal, |s| s.greatest);
        let high = self.volts(hung, &draws, source.greatest, nominal, |s| s.least);
        let (Some(low), Some(high)) = (low, high) else {
            return Err(format!(
                "with these loads and \"{}\" at {} V no voltage carries them all; measure the volts of the bank \
                 under the same loads",
                self.root(tree).map_or("", |r| r.name.as_str()),
                crate::quantity::Figures(source.least)
            ));
        };
        let volts: Vec<Span> = low.iter().zip(&high).map(|(&a, &b)| Span::new(a.min(b), b.max(a))).collect();
        let mut amps: Vec<Span> = draws
            .iter()
            .zip(&volts)
            .enumerate()
            .map(|(node, (draw, &predicted))| {
                let at = read.get(&node).copied().filter(|s| s.least > 0.0).unwrap_or(predicted);
                let square = Span::exactly(nominal * nominal);
                draw.power.over(at).plus(draw.current).plus(draw.resistive.times(at).over(square))
            })
            .collect();
        for (index, node) in hung.nodes.iter().enumerate().skip(1).rev() {
            let own = amps.get(index).copied().unwrap_or(Span::NOTHING);
            if let Some(parent) = amps.get_mut(node.parent) {
                *parent = parent.plus(own);
            }
        }
        Ok(Solved { volts, amps })
    }

    fn volts(
        &self,
        tree: &Tree,
        draws: &[Draw],
        emf: f64,
        nominal: f64,
        pick: fn(Span) -> f64,
    ) -> Option<Vec<f64>> {
        let nodes: Vec<TreeNode> = tree
            .nodes
            .iter()
            .zip(draws)
            .map(|(node, draw)| TreeNode {
                parent: node.parent,
                resistance: ElectricalResistance::new::<ohm>(
                    node.circuit.and_then(|c| self.ohms.get(c)).map_or(0.0, |&s| pick(s)),
                ),
                load: NodeLoad {
                    power: Power::new::<watt>(pick(draw.power)),
                    current: ElectricCurrent::new::<ampere>(pick(draw.current)),
                    resistive: Power::new::<watt>(pick(draw.resistive)),
                    reference: ElectricPotential::new::<volt>(nominal),
                },
                source: None,
            })
            .collect();
        let mut states = vec![NodeState::default(); nodes.len()];
        let root = Source {
            emf: ElectricPotential::new::<volt>(emf),
            resistance: ElectricalResistance::new::<ohm>(0.0),
        };
        solve(root, &nodes, &mut states).ok()?;
        Some(states.iter().map(|s| s.voltage.get::<volt>()).collect())
    }

    fn draw(&self, item: Item, on: &[&str], nominal: f64, deeper: usize) -> Result<Draw, String> {
        let site = self.site;
        match item {
            Item::Load(i) => {
                let Some(load) = site.loads.get(i) else { return Ok(NO_DRAW) };
                let each = load.power.map_or_else(
                    || load.current.map_or(0.0, |a| a.get::<ampere>() * nominal),
                    |p| p.get::<watt>(),
                );
                let all = each * f64::from(load.count);
                let watts = match (on.contains(&load.name.as_str()), load.standing) {
                    (true, _) => Span::exactly(all),
                    // Always on by its nature, but nobody said that it was.
                    (false, true) => Span::new(0.0, all),
                    (false, false) => return Ok(NO_DRAW),
                };
                Ok(match load.kind {
                    LoadKind::Power => Draw { power: watts, ..NO_DRAW },
                    LoadKind::Current => Draw { current: watts.over(Span::exactly(nominal)), ..NO_DRAW },
                    LoadKind::Resistive => Draw { resistive: watts, ..NO_DRAW },
                })
            }
            Item::Inverter(i) => {
                let Some(inverter) = site.inverters.get(i) else { return Ok(NO_DRAW) };
                let idle = inverter.idle.map_or(0.0, |p| p.get::<watt>());
                let fed = |name: &Option<String>| match name {
                    Some(name) => *name == inverter.name,
                    None => i == 0,
                };
                let given: f64 = site
                    .loads
                    .iter()
                    .filter(|l| l.ac && fed(&l.inverter) && on.contains(&l.name.as_str()))
                    .map(|l| l.power.map_or(0.0, |p| p.get::<watt>()) * f64::from(l.count))
                    .sum();
                Ok(Draw {
                    power: input(Span::exactly(given), inverter.efficiency.get::<ratio>(), idle),
                    ..NO_DRAW
                })
            }
            Item::ConverterInput(i) => {
                let Some(converter) = site.converters.get(i) else { return Ok(NO_DRAW) };
                let own = |t: &usize| self.root(*t).is_some_and(|r| r.kind == FeedKind::Converter(i));
                let Some(tree) = (0..self.plan.trees.len()).find(own) else { return Ok(NO_DRAW) };
                let (Some(source), Some(deeper)) = (self.source(tree), deeper.checked_sub(1)) else {
                    return Err("converters feed one another in a circle".to_string());
                };
                let solved =
                    self.solve_within(tree, on, source, (&BTreeMap::new(), &BTreeMap::new()), deeper)?;
                let given = solved.amps.first().map_or(Span::NOTHING, |a| a.times(source));
                let idle = converter.idle.map_or(0.0, |p| p.get::<watt>());
                Ok(Draw { power: input(given, converter.efficiency.get::<ratio>(), idle), ..NO_DRAW })
            }
            Item::Bank(_) | Item::Board(_) | Item::Charger(_) | Item::ControllerInput(_) => Ok(NO_DRAW),
        }
    }
}

/// What goes in where so much comes out: at least that, at most with the stated efficiency and idle draw.
fn input(given: Span, efficiency: f64, idle: f64) -> Span {
    let efficiency = if efficiency > 0.0 { efficiency } else { 1.0 };
    Span::new(given.least, given.greatest / efficiency + idle)
}

/// The way back is the chassis, and nobody says what it has.
pub(super) fn is_unknown(circuit: &CircuitEntry) -> bool {
    circuit.way_back == Return::Chassis(None)
}

/// Loop of a circuit: full metal at the least ambient with the stated joints only, to the conductor at the temperature of
/// the worst hour with all joints.
fn loop_span(site: &Site, circuit: &CircuitEntry, planned: &Planned) -> Span {
    let hot = planned.judgement.temperature.get::<degree_celsius>().clamp(-80.0, 250.0);
    let hot = ThermodynamicTemperature::new::<degree_celsius>(hot);
    let of = |conductor: &Conductor, length: Length| -> Span {
        let least =
            least_linear_resistance(conductor, site.ambient.0).map_or(0.0, |(r, _)| (r * length).value);
        let greatest = linear_resistance(conductor, hot).map_or(0.0, |r| (r * length).value);
        Span::new(least, greatest.max(least))
    };
    let there = of(&planned.positive, circuit.positive_length);
    let back = match circuit.way_back {
        Return::Chassis(Some(stated)) => Span::exactly(stated.get::<ohm>()),
        Return::Chassis(None) | Return::Conductor => of(&planned.negative, circuit.negative_length),
    };
    let stated = circuit
        .joints
        .iter()
        .filter_map(|j| Some(f64::from(j.count) * j.resistance?.get::<ohm>()))
        .chain(circuit.parts.iter().filter_map(|p| Some(p.resistance?.get::<ohm>())))
        .sum::<f64>();
    let all = joints(site, circuit, &planned.fitted).get::<ohm>();
    there.plus(back).plus(Span::new(stated.min(all), all))
}
