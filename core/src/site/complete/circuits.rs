//! The circuits that the document leaves out: from bank to board, from board to each load, and of every source.

use alloc::collections::BTreeSet;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::length::meter;

use super::Reasons;
use crate::quantity::Length;
use crate::rules::Space;
use crate::site::finding::digits;
use crate::site::model::{Board, CircuitEntry, Return};
use crate::site::system::{ChargerKind, FeedKind, Site};

/// Routes of parts that the document does not even name, m. Common practice, no source; told in the report.
const BANK_ROUTE_M: f64 = 2.0;
const INVERTER_ROUTE_M: f64 = 1.5;
const CONTROLLER_ROUTE_M: f64 = 1.5;
const ARRAY_ROUTE_M: f64 = 10.0;

/// A circuit of which only the ends and the route are known.
pub(super) fn plain(name: String, from: &str, to: &str, one_way: Length) -> CircuitEntry {
    CircuitEntry {
        name,
        line: 0,
        from: from.to_string(),
        to: to.to_string(),
        positive_length: one_way,
        negative_length: one_way,
        size: None,
        negative_size: None,
        material: None,
        class: None,
        coating: None,
        insulation: None,
        sheathed: false,
        installed: None,
        space: Space::Ordinary,
        bundled: 2,
        ambient: None,
        moving: false,
        cranking: false,
        way_back: Return::Conductor,
        current: None,
        diversity: 1.0,
        drop: None,
        terminal: None,
        from_lug: None,
        to_lug: None,
        devices: Vec::new(),
        joints: Vec::new(),
        parts: Vec::new(),
        no_device: false,
    }
}

/// What is still to be joined.
struct Wish {
    name: String,
    from: String,
    to: String,
    route: Option<Length>,
    usual_m: f64,
}

/// Adds every circuit that is missing, and a board where there is none.
pub(super) fn add(site: &mut Site, reasons: &mut Reasons) {
    let from_taken: BTreeSet<String> = site.circuits.iter().map(|c| c.from.clone()).collect();
    let to_taken: BTreeSet<String> = site.circuits.iter().map(|c| c.to.clone()).collect();
    let joined = |name: &str| from_taken.contains(name) || to_taken.contains(name);
    let mut wishes: Vec<Wish> = Vec::new();
    let mut wish = |name: String, from: &str, to: &str, route: Option<Length>, usual_m: f64| {
        wishes.push(Wish { name, from: from.to_string(), to: to.to_string(), route, usual_m });
    };
    let board = board_name(site);
    for bank in site.banks.iter().filter(|b| b.is_battery() && !joined(&b.name)) {
        let part = bank.part.as_ref();
        let to = part.and_then(|p| p.board.clone()).unwrap_or_else(|| board.clone());
        wish(format!("{} main", bank.name), &bank.name, &to, part.and_then(|p| p.route), BANK_ROUTE_M);
    }
    for inverter in site.inverters.iter().filter(|i| !joined(&i.name)) {
        let from = inverter.part.board.clone().unwrap_or_else(|| board.clone());
        wish(format!("{} feed", inverter.name), &from, &inverter.name, inverter.part.route, INVERTER_ROUTE_M);
    }
    for load in site.loads.iter().filter(|l| !l.ac && !joined(&l.name)) {
        let from = load.board.clone().unwrap_or_else(|| board.clone());
        wish(load.name.clone(), &from, &load.name, load.route, 0.0);
    }
    for charger in site.chargers.iter().filter(|c| !from_taken.contains(&c.name)) {
        let (stated, route, usual) = match charger.kind {
            ChargerKind::Controller(i) => {
                site.controllers.get(i).map(|c| (c.board.clone(), c.route, CONTROLLER_ROUTE_M))
            }
            ChargerKind::Generator(i) => site.generators.get(i).map(|g| (g.board.clone(), g.route, 0.0)),
        }
        .unwrap_or((None, None, 0.0));
        // Without any board the bank itself takes it, where its own circuits are written.
        let bank = charger
            .bank
            .and_then(|b| site.banks.get(b))
            .filter(|b| site.boards.is_empty() && joined(&b.name));
        let to = stated.or_else(|| bank.map(|b| b.name.clone())).unwrap_or_else(|| board.clone());
        wish(format!("{} output", charger.name), &charger.name, &to, route, usual);
    }
    for feed in site.banks.iter().filter(|b| !from_taken.contains(&b.name)) {
        let FeedKind::Array(index) = feed.kind else { continue };
        let Some(array) = site.arrays.get(index) else { continue };
        let Some(controller) = array.controller.and_then(|c| site.controllers.get(c)) else { continue };
        wish(
            format!("{} feed", array.part.name),
            &feed.name,
            &controller.name,
            array.part.route,
            ARRAY_ROUTE_M,
        );
    }
    if wishes.is_empty() {
        return;
    }
    if !site.boards.iter().any(|b| b.name == board) && wishes.iter().any(|w| w.from == board || w.to == board)
    {
        site.boards.push(Board {
            name: board.clone(),
            line: 0,
            busbar: None,
            stud: None,
            lugs_on_stud: None,
            designed: true,
        });
        reasons.assumed.push(format!("a board \"{board}\" joins the bank, the sources and the loads"));
    }
    let mut names: BTreeSet<String> = site.circuits.iter().map(|c| c.name.clone()).collect();
    for wish in wishes {
        let route = wish.route.unwrap_or_else(|| {
            reasons.assumed.push(format!(
                "a route of {} m between \"{}\" and \"{}\" (common practice, no source; state route)",
                digits(wish.usual_m),
                wish.from,
                wish.to
            ));
            Length::new::<meter>(wish.usual_m)
        });
        let mut name = wish.name;
        while !names.insert(name.clone()) {
            name.push_str(" 2");
        }
        site.circuits.push(plain(name, &wish.from, &wish.to, route));
    }
}

/// The board that takes what states none: the first of the document, else one that is made.
fn board_name(site: &Site) -> String {
    // The one that a bank leads to, by its circuit or by its own word, comes before an array's.
    let of_bank = |name: &String| {
        site.banks.iter().filter(|b| b.is_battery()).any(|b| {
            b.part.as_ref().and_then(|p| p.board.as_ref()) == Some(name)
                || site
                    .circuits
                    .iter()
                    .any(|c| (c.from == b.name && c.to == *name) || (c.to == b.name && c.from == *name))
        })
    };
    let first = site.boards.iter().find(|b| of_bank(&b.name)).or_else(|| site.boards.first());
    if let Some(board) = first {
        return board.name.clone();
    }
    let taken = |name: &str| {
        site.loads.iter().any(|l| l.name == name)
            || site.banks.iter().any(|b| b.name == name)
            || site.inverters.iter().any(|i| i.name == name)
            || site.chargers.iter().any(|c| c.name == name)
    };
    let mut name = String::from("main");
    while taken(&name) {
        name.push_str(" board");
    }
    name
}
