//! Readings at a bank: at rest, under load, and over a whole discharge.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_charge::ampere_hour;
use uom::si::electrical_resistance::ohm;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::hour;

use super::line::{Cause, CauseKind, Implied, NextMeasurement, Verdict};
use super::rest::{DENSITY_SPREAD, USUAL_RATE_H, charge_at, density_gain, part_at, value_at};
use super::span::Span;
use super::{Ask, Grade, Outcome, bank_unknown, meter};
use crate::battery::{Chemistry, data, rest_table};
use crate::quantity::{ElectricCharge, ElectricCurrent, ElectricalResistance, Figures, Ratio};
use crate::site::bank::{cells, ends};
use crate::site::system::{BankEntry, FeedKind};

fn implied_charge(charge: Span) -> Implied {
    Implied::Charge(Ratio::new::<ratio>(charge.least), Ratio::new::<ratio>(charge.greatest))
}

fn causes(bank: &BankEntry, kinds: &[CauseKind]) -> Vec<Cause> {
    kinds.iter().map(|&kind| Cause::new(kind, &bank.name)).collect()
}

/// A measurement on every battery of a bank.
fn each(bank: &BankEntry, what: &'static str, current: Option<ElectricCurrent>) -> NextMeasurement {
    let terminals = format!("the terminals of each battery of \"{}\"", bank.name);
    NextMeasurement { what, between: (terminals.clone(), terminals), current }
}

/// Least state of charge in use.
fn least_charge(bank: &BankEntry) -> f64 {
    let depth = bank.part.as_ref().and_then(|p| p.depth).map_or(1.0, |d| d.get::<ratio>());
    (1.0 - depth).clamp(0.0, 1.0)
}

/// State of charge by a rest voltage; what is missing where there is none.
fn charge_by_volts(ask: &Ask<'_>, bank: &BankEntry, read: Span) -> Result<Span, String> {
    let Some(chemistry) = bank.chemistry() else { return Err("it is no bank of cells".to_string()) };
    let table = rest_table(chemistry);
    let needed = table.rest_h.value;
    if !ask.under.on.is_empty() {
        return Err("a rest is stated beside loads that ran".to_string());
    }
    match ask.reading.rest.map(|t| t.get::<hour>()) {
        Some(rested) if rested >= needed => {}
        Some(rested) => {
            return Err(format!(
                "{} h without current, at least {} h before a rest voltage tells the charge (common practice, no \
                 source)",
                Figures(rested),
                Figures(needed)
            ));
        }
        None => return Err("how long it rested; state rest".to_string()),
    }
    let (fewest, most) = cells(bank, chemistry);
    Ok(Span::new(
        charge_at(table.voltage_V.value, read.least / most - table.spread_V.value),
        charge_at(table.voltage_V.value, read.greatest / fewest + table.spread_V.value),
    ))
}

/// Volts at a bank's terminals.
pub(super) fn volts(ask: &Ask<'_>, bank: &BankEntry, read: Span) -> Outcome {
    if let FeedKind::Array(_) = bank.kind {
        return Outcome::not_comparable("what the sun gave at that moment is not known");
    }
    if ask.reading.rest.is_some() {
        return match charge_by_volts(ask, bank, read) {
            Ok(charge) => at_rest(ask, bank, read, charge),
            Err(why) => bank_unknown(&why),
        };
    }
    if let Some(outcome) = under_load(ask, bank, read) {
        return outcome;
    }
    let range = ask.network.source(ask.place.tree).unwrap_or(Span::NOTHING);
    let mut outcome =
        Outcome::compared(read, range, "disconnect (or cut-off) to highest voltage".to_string());
    outside(ask, bank, &mut outcome);
    outcome
}

/// Outside what the bank may have at all.
fn outside(ask: &Ask<'_>, bank: &BankEntry, outcome: &mut Outcome) {
    let kinds: &[CauseKind] = match outcome.verdict {
        Verdict::Above => &[CauseKind::SourceCharged, CauseKind::MeterLead],
        Verdict::Below => {
            &[CauseKind::BankLow, CauseKind::WeakBank, CauseKind::BadCell, CauseKind::MeterLead]
        }
        Verdict::Within | Verdict::NotComparable(_) => return,
    };
    outcome.grade = Grade::BankDiffers;
    outcome.causes = causes(bank, kinds);
    let what = if ask.under.on.is_empty() {
        "volts, with everything off,"
    } else {
        "volts, first under this load and then with everything off,"
    };
    outcome.next = Some(each(bank, what, None));
}

fn at_rest(ask: &Ask<'_>, bank: &BankEntry, read: Span, charge: Span) -> Outcome {
    let Some(chemistry) = bank.chemistry() else { return bank_unknown("it is no bank of cells") };
    let table = rest_table(chemistry);
    let (fewest, most) = cells(bank, chemistry);
    let least = least_charge(bank);
    let predicted = Span::new(
        fewest * (value_at(table.voltage_V.value, least) - table.spread_V.value),
        most * (value_at(table.voltage_V.value, 1.0) + table.spread_V.value),
    );
    let basis = format!(
        "at rest, from {:.0} % of charge to full ({}), {} mV a cell between sources",
        least * 100.0,
        table.voltage_V.citation,
        Figures(table.spread_V.value * 1e3)
    );
    let mut outcome = Outcome::compared(read, predicted, basis);
    outcome.implied.push(implied_charge(charge));
    match outcome.verdict {
        Verdict::Above => {
            outcome.grade = Grade::BankDiffers;
            outcome.causes =
                causes(bank, &[CauseKind::SurfaceCharge, CauseKind::SourceCharged, CauseKind::MeterLead]);
            outcome.next = Some(each(bank, "volts, after a longer rest with every source off,", None));
        }
        Verdict::Below => {
            outcome.grade = Grade::BankLow;
            outcome.causes = causes(bank, &[CauseKind::BankLow, CauseKind::BadCell, CauseKind::MeterLead]);
            let what = if ask.reading.density.is_none() && chemistry == Chemistry::Flooded {
                "volts, and the density of every cell,"
            } else {
                "volts"
            };
            outcome.next = Some(each(bank, what, None));
        }
        Verdict::Within | Verdict::NotComparable(_) => {}
    }
    outcome
}

/// Volts under load beside those without: the internal resistance.
fn under_load(ask: &Ask<'_>, bank: &BankEntry, read: Span) -> Option<Outcome> {
    if ask.under.on.is_empty() || !bank.is_battery() {
        return None;
    }
    let unloaded = ask.groups.get(&(Vec::new(), ask.place.tree))?.volts.get(&0).copied()?;
    let current = ask.under.current(0)?;
    if current.greatest <= 0.0 {
        return None;
    }
    let ends = ends(bank);
    let taken = Span::new(ends.strongest?.resistance.get::<ohm>(), ends.weakest?.resistance.get::<ohm>());
    let predicted = unloaded.span.less(current.times(taken));
    let from = if ends.by_thumb { "a rule of thumb" } else { "what is stated" };
    let basis = format!(
        "\"{}\" without load, {} to {} mΩ by {from}, raised for discharge, cold and age",
        unloaded.name,
        Figures(taken.least * 1e3),
        Figures(taken.greatest * 1e3)
    );
    let mut outcome = Outcome::compared(read, predicted, basis);
    let own = unloaded.span.less(read).nought_or_more().over(current);
    let ohms = ElectricalResistance::new::<ohm>;
    outcome.implied.push(Implied::Internal(ohms(own.least), ohms(own.greatest)));
    match outcome.verdict {
        Verdict::Below => {
            outcome.grade = if own.is_above(taken) { Grade::BankResistance } else { Grade::BankDiffers };
            outcome.causes = causes(
                bank,
                &[CauseKind::WeakBank, CauseKind::BadCell, CauseKind::BadJoint, CauseKind::BankLow],
            );
            if !ask.under.amps.contains_key(&0) {
                outcome.causes.extend(causes(bank, &[CauseKind::OtherLoadRan]));
            }
            let telling = meter::telling_current(ask.reading, 0.0);
            outcome.next = Some(each(bank, "volts, and the drop over each link between them,", telling));
        }
        Verdict::Above => {
            outcome.grade = Grade::BankDiffers;
            outcome.causes = causes(bank, &[CauseKind::SourceCharged, CauseKind::LoadDrawsLess]);
            outcome.next = Some(each(bank, "volts, and the amps of the bank, with every source off,", None));
        }
        Verdict::Within | Verdict::NotComparable(_) => {}
    }
    Some(outcome)
}

/// Temperature of the cells, °C: as read, else the bank's stated range, else the site's ambient.
fn temperature(ask: &Ask<'_>, bank: &BankEntry) -> Span {
    if let Some(read) = ask.reading.temperature {
        return meter::temperature(read.get::<degree_celsius>()).span;
    }
    let stated = bank.part.as_ref().and_then(|p| p.temperature);
    let (least, greatest) = stated.unwrap_or(ask.network.site.ambient);
    Span::new(least.get::<degree_celsius>(), greatest.get::<degree_celsius>())
}

/// Relative density of the electrolyte.
pub(super) fn density(ask: &Ask<'_>, bank: &BankEntry, read: Span) -> Outcome {
    let rows = match bank.chemistry() {
        Some(Chemistry::Flooded) => rest_table(Chemistry::Flooded).density.map(|d| d.value),
        _ => None,
    };
    let Some(rows) = rows else {
        return bank_unknown("density tells the charge of vented lead-acid cells only");
    };
    // As it would be at the temperature of the table.
    let correction = density_gain(temperature(ask, bank));
    let at_table = read.plus(correction);
    let by_density = Span::new(
        charge_at(rows, at_table.least - DENSITY_SPREAD),
        charge_at(rows, at_table.greatest + DENSITY_SPREAD),
    );
    let by_volts = meter::volts(ask.reading).and_then(|v| charge_by_volts(ask, bank, v.span).ok());
    let charge = by_volts.unwrap_or(Span::new(least_charge(bank), 1.0));
    let predicted = Span::new(
        value_at(rows, charge.least) - DENSITY_SPREAD,
        value_at(rows, charge.greatest) + DENSITY_SPREAD,
    )
    .less(correction);
    let basis = match by_volts {
        Some(charge) => format!(
            "its rest voltage, {:.0} to {:.0} % of charge, at the temperature of the cells",
            charge.least * 100.0,
            charge.greatest * 100.0
        ),
        None => {
            format!("from {:.0} % of charge to full, at the temperature of the cells", charge.least * 100.0)
        }
    };
    let mut outcome = Outcome::compared(read, predicted, basis);
    outcome.implied.push(implied_charge(by_density));
    let (grade, kinds): (Grade, &[CauseKind]) = match (&outcome.verdict, by_volts.is_some()) {
        (Verdict::Above, true) => (Grade::Disagree, &[CauseKind::BadCell, CauseKind::OtherAcid]),
        (Verdict::Below, true) => (
            Grade::Disagree,
            &[CauseKind::Stratification, CauseKind::SurfaceCharge, CauseKind::BadCell, CauseKind::OtherAcid],
        ),
        (Verdict::Above, false) => (Grade::BankDiffers, &[CauseKind::OtherAcid]),
        (Verdict::Below, false) => (
            Grade::BankLow,
            &[CauseKind::BankLow, CauseKind::Stratification, CauseKind::BadCell, CauseKind::OtherAcid],
        ),
        (Verdict::Within | Verdict::NotComparable(_), _) => (Grade::Fine, &[]),
    };
    outcome.grade = grade;
    outcome.causes = causes(bank, kinds);
    if outcome.causes.len() > 1 {
        outcome.next = Some(each(
            bank,
            "density of every cell and volts at rest, after a charge that mixes the acid,",
            None,
        ));
    }
    outcome
}

/// Charge between full and cut-off.
pub(super) fn delivered(ask: &Ask<'_>, bank: &BankEntry, read: Span) -> Outcome {
    let Some(chemistry) = bank.chemistry() else { return bank_unknown("it is no bank of cells") };
    let current = ask.under.current(0).filter(|i| i.least > 0.0);
    let Some(current) = current else {
        return bank_unknown("neither the amps nor the loads of the discharge are stated; state amps or on");
    };
    let stated = bank.capacity.get::<ampere_hour>();
    let part = bank.part.as_ref();
    let rate = part.and_then(|p| p.rate).map(|t| t.get::<hour>());
    let hours = rate.unwrap_or(USUAL_RATE_H);
    if !(stated > 0.0 && hours > 0.0) {
        return bank_unknown("its stated capacity");
    }
    // Q = C·(C/(I·H))^(k − 1), at the usual least and greatest exponent and at both ends of the current.
    let held = data(chemistry);
    let (low, high) = held.peukert.value;
    let worn = held.end_of_life.value;
    let share = |amps: f64, exponent: f64| libm::pow(stated / (amps * hours), exponent - 1.0);
    let corners = [
        share(current.least, low),
        share(current.least, high),
        share(current.greatest, low),
        share(current.greatest, high),
    ];
    let factor = Span::new(
        corners.iter().copied().fold(f64::INFINITY, f64::min),
        corners.iter().copied().fold(0.0, f64::max),
    );
    let degC = temperature(ask, bank);
    let Some(warmth) = part_at(chemistry, degC) else {
        return bank_unknown(
            "at the least temperature that its cells may have had no capacity is held; state temperature",
        );
    };
    let factor = factor.times(warmth);
    let predicted = Span::new(stated * factor.least * worn, stated * factor.greatest);
    let basis = format!(
        "{} Ah in {} h{}, Peukert exponent {low} to {high} ({}), {} to {} A, {} to {} °C; {} % at the end of life",
        Figures(stated),
        Figures(hours),
        if rate.is_some() { "" } else { " (the rate taken: common practice, no source)" },
        held.peukert.citation,
        Figures(current.least),
        Figures(current.greatest),
        Figures(degC.least),
        Figures(degC.greatest),
        Figures(worn * 100.0)
    );
    let mut outcome = Outcome::compared(read, predicted, basis);
    let own = read.over(factor);
    let charge = ElectricCharge::new::<ampere_hour>;
    let of_stated = |ah: f64| Ratio::new::<ratio>(ah / stated);
    outcome.implied.push(Implied::Capacity {
        charge: (charge(own.least), charge(own.greatest)),
        of_stated: (of_stated(own.least), of_stated(own.greatest)),
    });
    match outcome.verdict {
        Verdict::Below => {
            outcome.grade = Grade::BankCapacity;
            outcome.causes = causes(bank, &[CauseKind::LostCapacity, CauseKind::BadCell, CauseKind::NotFull]);
            outcome.next = Some(each(
                bank,
                "volts towards the end of the next discharge, and the temperature of the cells,",
                None,
            ));
        }
        Verdict::Above => {
            outcome.grade = Grade::BankDiffers;
            outcome.causes = causes(bank, &[CauseKind::SourceCharged, CauseKind::LoadDrawsLess]);
            outcome.next =
                Some(each(bank, "amps of the bank through a whole discharge, with every source off,", None));
        }
        Verdict::Within | Verdict::NotComparable(_) => {}
    }
    outcome
}
