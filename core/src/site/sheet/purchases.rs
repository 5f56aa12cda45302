//! What to buy for what was designed, with all that goes with it.

use alloc::collections::BTreeMap;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::length::meter;
use uom::si::power::watt;

use super::labels::labels;
use super::maintenance::spare;
use super::path::poles;
use crate::cable::{Conductor, Stud};
use crate::device::Supply;
use crate::protection::Guard;
use crate::quantity::ConductorSize;
use crate::site::check::bank::carried;
use crate::site::finding::digits;
use crate::site::model::{CircuitEntry, Return, StockDevice};
use crate::site::parts::{ControllerKind, ControllerPart};
use crate::site::plan::{Plan, Planned};
use crate::site::plant::busbar_needs;
use crate::site::report::Report;
use crate::site::system::{FeedKind, Site};
use crate::site::text::{conductor_words, device_words};
use crate::site::wiring::{name_of, stud_of};

/// Cable on top for cutting and dressing, rounded up to the metre. Common practice, no source.
const ALLOWANCE: f64 = 0.1;

/// One line of what to buy.
#[derive(Clone, Debug, PartialEq)]
pub struct Purchase {
    /// How much: metres of single conductor, or pieces.
    pub amount: f64,
    /// `m` or `pcs`.
    pub unit: &'static str,
    /// What.
    pub what: String,
    /// Where it goes.
    pub places: Vec<String>,
    /// Price of all of it, where the stock states one.
    pub price: Option<f64>,
    /// What lies on the shelf of it, where the stock says so.
    pub shelf: Option<f64>,
}

/// What all of it costs, as far as the stock states prices.
#[derive(Clone, Debug, PartialEq)]
pub struct PurchaseTotal {
    /// Sum of the prices known.
    pub sum: f64,
    /// Lines that have none.
    pub without_price: usize,
}

impl Report {
    /// The sum of what to buy; `None` where nothing has a price.
    pub fn purchase_total(&self) -> Option<PurchaseTotal> {
        let known = self.purchases.iter().filter_map(|p| p.price);
        let count = known.clone().count();
        (count > 0).then(|| PurchaseTotal { sum: known.sum(), without_price: self.purchases.len() - count })
    }
}

/// The list as it grows: like things together.
#[derive(Default)]
struct Basket {
    list: Vec<Purchase>,
    /// Place in the list of each thing in its unit.
    places: BTreeMap<String, Vec<(&'static str, usize)>>,
}

impl Basket {
    fn add(
        &mut self,
        (amount, unit): (f64, &'static str),
        what: String,
        place: &str,
        each: Option<f64>,
        shelf: Option<f64>,
    ) {
        let price = each.map(|p| p * amount);
        let known = self.places.get(&what).into_iter().flatten().find(|(known, _)| *known == unit);
        if let Some(line) = known.and_then(|(_, place)| self.list.get_mut(*place)) {
            line.amount += amount;
            if !place.is_empty() && line.places.last().is_none_or(|last| last != place) {
                line.places.push(place.to_string());
            }
            line.price = line.price.zip(price).map(|(a, b)| a + b);
            return;
        }
        let places = if place.is_empty() { Vec::new() } else { alloc::vec![place.to_string()] };
        self.places.entry(what.clone()).or_default().push((unit, self.list.len()));
        self.list.push(Purchase { amount, unit, what, places, price, shelf });
    }

    fn pieces(&mut self, count: u32, what: String, place: &str, each: Option<f64>, shelf: Option<u32>) {
        if count > 0 {
            self.add((f64::from(count), "pcs"), what, place, each, shelf.map(f64::from));
        }
    }
}

/// A string carries more than an equal share as the others age: a quarter on top. Common practice, no source.
const STRING_MARGIN: f64 = 1.25;

/// Everything to buy; nothing where nothing was designed.
pub(in crate::site) fn purchases(site: &Site, plan: &Plan) -> Vec<Purchase> {
    let mut basket = Basket::default();
    plant(site, &mut basket);
    strings(site, plan, &mut basket);
    cables(site, plan, &mut basket);
    lugs(site, plan, &mut basket);
    devices(site, plan, &mut basket);
    let needs = busbar_needs(site, plan);
    for (board, (need, _)) in site.boards.iter().zip(needs).filter(|(board, _)| board.designed) {
        let what = format!("busbar for at least {} A", digits(need));
        basket.pieces(2, what, &board.name, None, None);
    }
    if !basket.list.is_empty() {
        let count = labels(site, plan).iter().map(|l| l.count).fold(0, u32::saturating_add);
        basket.pieces(count, "label, as listed".to_string(), "", None, None);
    }
    basket.list
}

/// A device and equal leads for every string of a designed bank of several (R15), and isolators of designed arrays (R20).
fn strings(site: &Site, plan: &Plan, basket: &mut Basket) {
    for bank in site.banks.iter().filter(|b| b.strings > 1) {
        if !bank.part.as_ref().is_some_and(|p| p.designed) {
            continue;
        }
        let share = carried(site, plan, &bank.name).get::<ampere>() / f64::from(bank.strings);
        let what = format!(
            "device for one string, at least {} A, {} V DC, with two equal leads to a busbar",
            digits(STRING_MARGIN * share),
            digits(bank.highest.get::<volt>())
        );
        basket.pieces(bank.strings, what, &bank.name, None, None);
        basket.pieces(2, "busbar for the strings".to_string(), &bank.name, None, None);
    }
    for feed in &site.banks {
        let FeedKind::Array(index) = feed.kind else { continue };
        let Some(array) = site.arrays.get(index).filter(|a| a.designed && a.part.isolator.is_none()) else {
            continue;
        };
        let amps = feed.limit.map_or(0.0, |a| a.get::<ampere>());
        let what = format!(
            "load-break isolator, at least {} V DC, {} A",
            digits(feed.highest.get::<volt>()),
            digits(amps)
        );
        basket.pieces(1, what, &array.part.name, None, None);
    }
}

/// Batteries, modules, controllers and inverters that the design chose.
fn plant(site: &Site, basket: &mut Basket) {
    for bank in &site.banks {
        let Some(part) = bank.part.as_ref().filter(|p| p.designed) else { continue };
        let of_stock =
            part.battery.as_ref().and_then(|name| site.stock.batteries.iter().find(|b| b.name == *name));
        let volts = part.unit.unwrap_or(bank.nominal).get::<volt>();
        let charge = part.unit_capacity.unwrap_or(bank.capacity).get::<ampere_hour>();
        let chemistry = bank.chemistry().map_or("", crate::battery::Chemistry::word);
        let name = part.battery.as_ref().map_or_else(String::new, |name| format!("{name}, "));
        basket.pieces(
            part.units.unwrap_or(1),
            format!("battery {name}{} V {} Ah {chemistry}", digits(volts), digits(charge)),
            &bank.name,
            of_stock.and_then(|b| b.price),
            of_stock.and_then(|b| b.count),
        );
    }
    for array in site.arrays.iter().filter(|a| a.designed) {
        basket.pieces(
            array.series.saturating_mul(array.strings),
            format!("module {}, {} W", array.module.name, digits(array.module.power.get::<watt>())),
            &array.part.name,
            array.module.price,
            array.module.count,
        );
    }
    for controller in site.controllers.iter().filter(|c| c.line == 0) {
        basket.pieces(1, controller_words(controller), &controller.name, controller.price, None);
    }
    for inverter in site.inverters.iter().filter(|i| i.designed) {
        let model = inverter.part.model.as_ref().map_or_else(String::new, |model| format!("{model}, "));
        basket.pieces(
            1,
            format!("inverter {model}{} W", digits(inverter.power.get::<watt>())),
            &inverter.name,
            inverter.part.price,
            None,
        );
    }
}

fn controller_words(controller: &ControllerPart) -> String {
    let model = controller.model.as_ref().map_or_else(String::new, |model| format!(" {model}"));
    let kind = match controller.kind {
        Some(ControllerKind::Pwm) => ", PWM",
        Some(ControllerKind::Mppt) => ", MPPT",
        None => "",
    };
    let output =
        controller.output.map_or_else(String::new, |amps| format!(", {} A", digits(amps.get::<ampere>())));
    format!("charge controller{model}{kind}{output}")
}

/// Circuits whose conductors were designed.
fn designed<'a>(site: &'a Site, plan: &'a Plan) -> impl Iterator<Item = (&'a CircuitEntry, &'a Planned)> {
    let all = site.circuits.iter().zip(&plan.circuits);
    all.filter_map(|(c, p)| Some((c, p.as_ref().filter(|p| p.designed())?)))
}

/// Metres of single conductor of each kind, with the allowance as a line of its own; the thickest first.
fn cables(site: &Site, plan: &Plan, basket: &mut Basket) {
    let mut runs: Vec<(Conductor, f64, &str)> = designed(site, plan)
        .map(|(circuit, planned)| {
            let back = match circuit.way_back {
                Return::Conductor => circuit.negative_length.get::<meter>(),
                Return::Chassis(_) => 0.0,
            };
            (planned.positive, circuit.positive_length.get::<meter>() + back, circuit.name.as_str())
        })
        .collect();
    while let Some(conductor) =
        runs.iter().map(|(c, ..)| *c).reduce(|a, b| if b.size.area() > a.size.area() { b } else { a })
    {
        let of_stock = site.stock.cables.iter().find(|c| {
            c.size == conductor.size && c.insulation == conductor.insulation && c.class == conductor.class
        });
        let (price, held) = (of_stock.and_then(|c| c.price), of_stock.and_then(|c| c.length));
        let held = held.map(|l| l.get::<meter>());
        let mut whole = 0.0;
        for (_, metres, name) in runs.iter().filter(|(c, ..)| *c == conductor) {
            whole += metres;
            basket.add((*metres, "m"), conductor_words(&conductor), name, price, held);
        }
        let what =
            format!("{}: cutting allowance, {} %", conductor_words(&conductor), digits(ALLOWANCE * 100.0));
        basket.add((allowance(whole), "m"), what, "", price, held.map(|held| (held - whole).max(0.0)));
        runs.retain(|(c, ..)| *c != conductor);
    }
}

/// A tenth on top, rounded up to the metre; what is a metre but for the last bit stays one.
pub(super) fn allowance(metres: f64) -> f64 {
    libm::ceil(ALLOWANCE * metres - 1e-9)
}

/// Lugs at both ends of every designed conductor, by stud, the thickest first, and a sleeve for each.
fn lugs(site: &Site, plan: &Plan, basket: &mut Basket) {
    let items = plan.trees.iter().flat_map(|t| t.nodes.iter().map(|n| n.item));
    let studs: BTreeMap<&str, Stud> =
        items.filter_map(|item| Some((name_of(site, item), stud_of(site, item)?))).collect();
    let mut ends: Vec<(ConductorSize, Option<Stud>, &str, u32)> = Vec::new();
    for (circuit, planned) in designed(site, plan) {
        let conductors = if circuit.way_back == Return::Conductor { 2 } else { 1 };
        for (name, lug) in [(&circuit.from, circuit.from_lug), (&circuit.to, circuit.to_lug)] {
            let stud = lug.or_else(|| studs.get(name.as_str()).copied());
            ends.push((planned.positive.size, stud, &circuit.name, conductors));
        }
    }
    ends.sort_by(|a, b| b.0.area_mm2().total_cmp(&a.0.area_mm2()).then(b.1.cmp(&a.1)));
    let mut sizes: Vec<(ConductorSize, u32)> = Vec::new();
    for (size, stud, circuit, count) in ends {
        let what = stud.map_or_else(|| unknown_lug(size), |stud| format!("lug {stud} for {size}"));
        let of_stock = site.stock.lugs.iter().find(|l| l.size == size && Some(l.stud) == stud);
        basket.pieces(count, what, circuit, of_stock.and_then(|l| l.price), None);
        match sizes.iter_mut().find(|(known, _)| *known == size) {
            Some(entry) => entry.1 = entry.1.saturating_add(count),
            None => sizes.push((size, count)),
        }
    }
    for (size, count) in sizes {
        let what = "heat-shrink sleeve, one over each crimp".to_string();
        basket.pieces(count, what, &format!("{count} for {size}"), None, None);
    }
}

fn unknown_lug(size: ConductorSize) -> String {
    format!("lug for {size}, stud to be measured")
}

/// Devices, a holder for each fuse, and spare fuse-links.
fn devices(site: &Site, plan: &Plan, basket: &mut Basket) {
    let mut holders: Vec<(String, &str, u32)> = Vec::new();
    let mut links: Vec<(Guard, bool, u32)> = Vec::new();
    for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
        for fitted in planned.iter().flat_map(|p| &p.fitted).filter(|f| f.designed) {
            let guard = fitted.guard;
            let pieces = poles(site, circuit, fitted);
            let words = device_words(&guard, fitted.specified);
            basket.pieces(pieces, words, &circuit.name, price(site, &guard), None);
            if guard.device.family.data().is_fuse {
                holders.push((holder_words(&guard, fitted.specified), &circuit.name, pieces));
                match links.iter_mut().find(|(known, ..)| same_link(known, &guard)) {
                    Some(entry) => {
                        entry.2 = entry.2.saturating_add(pieces);
                        // One spare serves all of them: it breaks what the most exposed must.
                        if guard.device.breaking > entry.0.device.breaking {
                            entry.0 = guard;
                        }
                    }
                    None => links.push((guard, fitted.specified, pieces)),
                }
            }
        }
    }
    for (words, place, pieces) in holders {
        basket.pieces(pieces, words, place, None, None);
    }
    for (guard, specified, count) in links {
        let words = format!("{}: spare fuse-link", device_words(&guard, specified));
        basket.pieces(spare(count), words, "", price(site, &guard), None);
    }
}

fn same_link(one: &Guard, other: &Guard) -> bool {
    one.device.family == other.device.family && one.device.rating == other.device.rating
}

fn price(site: &Site, guard: &Guard) -> Option<f64> {
    let serves = |d: &&StockDevice| {
        d.family == guard.device.family && (d.ratings.is_empty() || d.ratings.contains(&guard.device.rating))
    };
    site.stock.devices.iter().find(serves).and_then(|d| d.price)
}

fn holder_words(guard: &Guard, specified: bool) -> String {
    let device = guard.device;
    let volts = match device.supply {
        Supply::Dc(rated) => {
            let least = if specified { "at least " } else { "" };
            format!(", {least}{} V DC", digits(rated.get::<volt>()))
        }
        Supply::PerPole(..) | Supply::AcOnly | Supply::NotStated => String::new(),
    };
    format!("holder for {} {} A{volts}", device.family, digits(device.rating.get::<ampere>()))
}
