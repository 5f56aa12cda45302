//! Temperatures that were read: of a joint or conductor under load, and of cells.

use alloc::format;
use alloc::string::ToString;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::power::watt;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::line::{Cause, CauseKind, Implied, NextMeasurement, Verdict};
use super::meter::telling_current;
use super::path::Heat;
use super::span::Span;
use super::{Ask, Grade, Outcome};
use crate::quantity::{Figures, Power};
use crate::site::system::BankEntry;

/// Heat that one contact gives off for each kelvin above the air around it. Common practice, no source: 15 W bring a lug
/// in air of 30 °C to 70 °C, too hot for PVC.
const JOINT_W_PER_K: f64 = 15.0 / 40.0;

/// A joint, or the conductor at it, of the circuit that feeds the place.
pub(super) fn joint(ask: &Ask<'_>, read: Span) -> Outcome {
    let (network, under) = (ask.network, ask.under);
    let circuit = ask.place.circuit;
    let Some((circuit, planned)) = circuit.and_then(|c| Some((c, network.planned(c)?))) else {
        return Outcome::not_comparable("no circuit that is planned feeds it");
    };
    let Some(current) = under.current(ask.place.node) else {
        let why = under.measured.as_ref().err().cloned().unwrap_or_default();
        return Outcome::not_comparable(why);
    };
    let around = planned.run.ambient.get::<degree_celsius>();
    let worst = planned.judgement.current.get::<ampere>();
    // The rise goes with the square of the current, as in every judgement of a run.
    let share = if worst > 0.0 { current.greatest / worst } else { 0.0 };
    let rise = (planned.judgement.temperature.get::<degree_celsius>() - around) * share * share;
    let predicted = Span::new(network.site.ambient.0.get::<degree_celsius>(), around + rise.max(0.0));
    let basis = format!(
        "the air between {} and {} °C, {} A at most",
        Figures(predicted.least),
        Figures(around),
        Figures(current.greatest)
    );
    let mut outcome = Outcome::compared(read, predicted, basis);
    let rating = planned.positive.insulation.rating_degC();
    let name = network.circuit_name(circuit);
    match outcome.verdict {
        Verdict::Above => {
            outcome.grade = Grade::Differs;
            if current.greatest > 0.0 {
                let watts = read
                    .less(Span::new(around, predicted.greatest))
                    .nought_or_more()
                    .times(Span::exactly(JOINT_W_PER_K));
                outcome
                    .implied
                    .push(Implied::Heat(Power::new::<watt>(watts.least), Power::new::<watt>(watts.greatest)));
                // No more than the drop of the same circuit leaves, where that was read.
                let left = under.drops.get(&circuit).map_or(f64::INFINITY, |drop| {
                    let own = network.ohms.get(circuit).copied().unwrap_or(Span::NOTHING);
                    drop.span.over(current).less(own).greatest.max(0.0)
                });
                let ohms = watts.over(current.times(current));
                let ohms = Span::new(ohms.least.min(left), ohms.greatest.min(left));
                let heat = Heat::of(ohms, planned.judgement.current);
                outcome.implied.push(heat.implied(name));
                outcome.grade = Heat::grade(&[heat]);
                outcome.causes.push(Cause::new(CauseKind::BadJoint, name));
                outcome.causes.push(Cause::new(CauseKind::ConductorThinnerOrLonger, name));
                if !under.amps.contains_key(&ask.place.node) {
                    outcome.causes.push(Cause::new(CauseKind::OtherLoadRan, name));
                }
            }
            outcome.causes.push(Cause::new(CauseKind::OutsideHeat, &ask.reading.at));
            let terminal = format!("the terminals of \"{}\"", ask.reading.at);
            outcome.next = Some(NextMeasurement {
                what: "drop from the conductor just behind the lug to the stud, of each joint in turn,",
                between: (terminal.clone(), terminal),
                current: telling_current(ask.reading, 0.0),
            });
        }
        Verdict::Below => {
            outcome.grade = Grade::Differs;
            outcome.causes.push(Cause::new(CauseKind::MeterLead, &ask.reading.at));
        }
        Verdict::Within | Verdict::NotComparable(_) => {}
    }
    if read.least > rating {
        outcome.grade = Grade::TooHot;
    }
    outcome
}

/// Cells of a bank.
pub(super) fn cells(ask: &Ask<'_>, bank: &BankEntry, read: Span) -> Outcome {
    let stated = bank.part.as_ref().and_then(|p| p.temperature);
    let (least, greatest) = stated.unwrap_or(ask.network.site.ambient);
    let predicted = Span::new(least.get::<degree_celsius>(), greatest.get::<degree_celsius>());
    let from = if stated.is_some() { "the bank's stated range" } else { "the site's ambient" };
    let mut outcome = Outcome::compared(read, predicted, from.to_string());
    let kinds: Vec<CauseKind> = match outcome.verdict {
        Verdict::Above => Vec::from([CauseKind::SourceCharged, CauseKind::BadCell, CauseKind::OutsideHeat]),
        Verdict::Below => Vec::from([CauseKind::ColdCells]),
        Verdict::Within | Verdict::NotComparable(_) => Vec::new(),
    };
    if kinds.is_empty() {
        return outcome;
    }
    outcome.grade = Grade::BankDiffers;
    outcome.causes = kinds.into_iter().map(|kind| Cause::new(kind, &bank.name)).collect();
    if outcome.causes.len() > 1 {
        let each = format!("each battery of \"{}\"", bank.name);
        outcome.next = Some(NextMeasurement {
            what: "temperature, at rest, and the volts beside it,",
            between: (each.clone(), each),
            current: None,
        });
    }
    outcome
}
