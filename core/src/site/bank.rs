//! A bank of the document as two sources: at its strongest and at its weakest (R6).

use uom::si::electric_potential::volt;

use super::model::BankEntry;
use crate::battery;
use crate::network::Source;

/// Strongest and weakest, each `None` where nothing is known of it.
#[derive(Clone, Copy, Debug)]
pub(super) struct Ends {
    pub strongest: Option<Source>,
    pub weakest: Option<Source>,
    /// Neither the maker's value nor a resistance is stated: a rule of thumb stands in.
    pub by_thumb: bool,
}

pub(super) fn ends(bank: &BankEntry) -> Ends {
    let full = battery::full_rest_voltage(bank.chemistry, bank.nominal);
    let stated = bank
        .internal_resistance
        .or_else(|| bank.short_circuit.map(|amps| full / amps));
    let (resistance, by_thumb) = match stated {
        Some(known) => (Some(known), false),
        None => (battery::resistance_by_thumb(bank.chemistry, bank.nominal, bank.capacity), true),
    };
    // A maker's stated short-circuit current stands beside a stated resistance: the greater current counts.
    let strongest = resistance.map(|r| match bank.short_circuit {
        Some(amps) if full / amps < r => Source { emf: full, resistance: full / amps },
        _ => Source { emf: full, resistance: r },
    });
    let weakest = resistance.map(|r| Source {
        emf: battery::empty_rest_voltage(bank.chemistry, bank.nominal).max_of(bank.cut_off),
        resistance: r * battery::WEAK_RESISTANCE_FACTOR,
    });
    Ends { strongest, weakest, by_thumb: by_thumb && resistance.is_some() }
}

/// The lesser matters for the weakest source: a bank is cut off before it is empty, but may rest below nominal.
trait MaxOf {
    fn max_of(self, other: Self) -> Self;
}

impl MaxOf for crate::quantity::ElectricPotential {
    fn max_of(self, other: Self) -> Self {
        if self.get::<volt>() < other.get::<volt>() { self } else { other }
    }
}
