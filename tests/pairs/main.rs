//! Whole sites through the front door: twins at every edge of the wiring rules, the demo sites, and the main program.
//!
//! Where an edge lies is worked out by hand beside each pair, from the standard's figure and the rules of the design.

mod ampacity_craft;
mod ampacity_iec;
mod ampacity_us;
mod badly_built;
mod bank;
mod change;
mod cli;
mod compare;
mod device;
mod document;
mod drop;
mod fault;
mod golden;
mod json;
mod load;
mod metal;
mod order;
mod pair;
mod part;
mod path;
mod place;
mod plant_array;
mod plant_bank;
mod plant_charge;
mod plant_design;
mod plant_load;
mod plant_place;
mod plant_source;
mod reading;
mod schema;
mod start;
mod trust;
mod well_built;

use std::collections::{BTreeMap, BTreeSet};

use ampwright::site::Severity;
use pair::Pair;

/// Fewer pairs than this and some have been lost.
const LEAST: usize = 300;
const RULES: [&str; 21] = [
    "R1", "R2", "R3", "R4", "R5", "R6", "R7", "R8", "R9", "R10", "R11", "R12", "R13", "R14", "R15", "R16",
    "R17", "R18", "R19", "R20", "R21",
];
/// Kinds of findings of the plant that have no pair, since no twin could pass beside the failing one: `plant_bank` tests them.
const APART: [&str; 2] = ["disconnect-not-checked", "strings-share-unequally"];
const GUIDE: &str = include_str!("../../core/guide/rules.md");

fn pairs() -> Vec<Pair> {
    [
        path::pairs(),
        load::pairs(),
        ampacity_us::pairs(),
        ampacity_iec::pairs(),
        ampacity_craft::pairs(),
        device::pairs(),
        fault::pairs(),
        place::pairs(),
        part::pairs(),
        drop::pairs(),
        metal::pairs(),
        bank::pairs(),
        start::pairs(),
        trust::pairs(),
        reading::pairs(),
        plant_array::pairs(),
        plant_bank::pairs(),
        plant_charge::pairs(),
        plant_load::pairs(),
        plant_place::pairs(),
        plant_source::pairs(),
    ]
    .into_iter()
    .flatten()
    .collect()
}

#[test]
fn every_pair_passes_on_one_side_of_its_edge_and_fails_on_the_other() {
    let faults: Vec<String> = pairs().iter().flat_map(Pair::faults).collect();
    assert!(faults.is_empty(), "{} of them:\n{}", faults.len(), faults.join("\n"));
}

#[test]
fn twins_the_wrong_way_round_are_found_out() {
    for pair in pairs() {
        let swapped = Pair { passing: pair.failing, failing: pair.passing, ..pair };
        assert!(swapped.faults().len() >= 2, "{} {}", swapped.rule, swapped.edge);
    }
}

#[test]
fn every_finding_of_the_plant_has_its_pair() {
    let (_, plant) = GUIDE.split_once("## Of arrays").expect("the tables of the plant");
    let rows = plant.lines().filter_map(|line| line.strip_prefix("| `")?.split_once('`'));
    let slugs: BTreeSet<&str> = rows.map(|(slug, _)| slug).collect();
    assert!(slugs.len() > 70, "{} rows", slugs.len());
    let pairs = pairs();
    let have: BTreeSet<&str> = pairs.iter().map(|p| p.slug).chain(APART).collect();
    let missing: Vec<_> = slugs.difference(&have).collect();
    assert!(missing.is_empty(), "{missing:?}");
}

#[test]
fn every_rule_has_its_pairs() {
    let pairs = pairs();
    let mut count: BTreeMap<(&str, &str), (usize, usize)> = BTreeMap::new();
    for pair in &pairs {
        let slot = count.entry((pair.rule, pair.set())).or_default();
        slot.0 += 1;
        slot.1 += usize::from(pair.severity == Severity::Danger);
    }
    println!("rule, rule set: pairs, of them dangers");
    for ((rule, set), (all, danger)) in &count {
        println!("{rule:>4} {set:<10} {all:>3} {danger:>3}");
    }
    println!("{} pairs", pairs.len());
    assert!(pairs.len() >= LEAST, "{} pairs, at least {LEAST}", pairs.len());
    for rule in RULES {
        assert!(count.keys().any(|(own, _)| *own == rule), "{rule} has no pair");
    }
    for rule in ["R4", "R7", "R17", "R18"] {
        for set in ["us", "iec", "craft_iso", "craft_us"] {
            assert!(count.contains_key(&(rule, set)), "{rule} has no pair under {set}");
        }
    }
    let edges: BTreeSet<_> = pairs.iter().map(|p| (p.set(), p.edge)).collect();
    assert_eq!(edges.len(), pairs.len(), "an edge stands twice");
}
