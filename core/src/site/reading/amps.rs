//! Currents that were read.

use alloc::format;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;

use super::line::{Cause, CauseKind, NextMeasurement, Verdict};
use super::span::Span;
use super::{Ask, Grade, Outcome};
use crate::site::graph::Item;
use crate::site::wiring::name_of;

/// Amperes in the circuit that feeds the place, or out of the bank.
pub(super) fn amps(ask: &Ask<'_>, read: Span) -> Outcome {
    let Ask { network, under, place, .. } = ask;
    let solved = match &under.stated {
        Ok(solved) => solved,
        Err(why) => return Outcome::not_comparable(why.clone()),
    };
    let Some(&predicted) = solved.amps.get(place.node) else {
        return Outcome::not_comparable("nothing is predicted there");
    };
    let mut outcome = Outcome::compared(read, predicted, under.basis(network, place.tree));
    outcome.grade = match outcome.verdict {
        Verdict::Above | Verdict::Below => Grade::CurrentDiffers,
        Verdict::Within | Verdict::NotComparable(_) => Grade::Fine,
    };
    if let Some(planned) = place.circuit.and_then(|c| network.planned(c)) {
        let carried = planned.judgement.ampacity.as_ref().map(|a| a.corrected.get::<ampere>());
        if carried.is_some_and(|most| read.least > most) {
            outcome.grade = Grade::AboveCapacity;
        } else if read.least > planned.judgement.current.get::<ampere>() {
            outcome.grade = Grade::AboveDesign;
        }
    }
    let ran = ran_behind(ask);
    let at = ask.reading.at.as_str();
    let each = |kind: CauseKind| ran.iter().map(move |name| Cause::new(kind, name));
    match outcome.verdict {
        Verdict::Above => {
            outcome.causes.extend(each(CauseKind::LoadDrawsMore));
            if !matches!(network.item(*place), Some(Item::Load(_))) || ran.is_empty() {
                outcome.causes.push(Cause::new(CauseKind::OtherLoadRan, at));
            }
            if !under.volts.contains_key(&place.node) && !under.volts.contains_key(&0) {
                outcome.causes.push(Cause::new(CauseKind::BankLow, name_of_root(ask)));
            }
        }
        Verdict::Below => {
            outcome.causes.extend(each(CauseKind::LoadDrawsLess));
            if let Some(charger) = network.charger(place.tree) {
                outcome.causes.push(Cause::new(CauseKind::SourceCharged, charger));
            }
            if place.circuit.is_some() && !under.volts.contains_key(&place.node) {
                outcome.causes.push(Cause::new(CauseKind::BadJoint, at));
            }
        }
        Verdict::Within | Verdict::NotComparable(_) => {}
    }
    if outcome.causes.len() > 1 {
        let terminal = format!(
            "the terminals of \"{}\"",
            match ran.as_slice() {
                [one] => one,
                _ => at,
            }
        );
        let what = if ran.len() > 1 {
            "amps of each load that ran, by itself,"
        } else {
            "volts, and the amps beside them,"
        };
        outcome.next = Some(NextMeasurement { what, between: (terminal.clone(), terminal), current: None });
    }
    outcome
}

fn name_of_root<'a>(ask: &Ask<'a>) -> &'a str {
    ask.network.root(ask.place.tree).map_or("", |r| r.name.as_str())
}

/// Names of the loads that ran at the place or behind it.
fn ran_behind<'a>(ask: &Ask<'a>) -> Vec<&'a str> {
    let Some(tree) = ask.network.tree(ask.place) else { return Vec::new() };
    let mut behind: Vec<bool> = Vec::with_capacity(tree.nodes.len());
    let mut names = Vec::new();
    for (index, node) in tree.nodes.iter().enumerate() {
        let is_behind =
            index == ask.place.node || (index > 0 && behind.get(node.parent).copied().unwrap_or(false));
        behind.push(is_behind);
        let name = name_of(ask.network.site, node.item);
        let ran = match node.item {
            Item::Load(_) => ask.under.on.contains(&name),
            Item::Inverter(_) | Item::ConverterInput(_) => true,
            _ => false,
        };
        if is_behind && ran {
            names.push(name);
        }
    }
    names
}
