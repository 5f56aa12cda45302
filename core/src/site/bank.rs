//! A bank of the document as two sources: at its strongest and at its weakest (R6).

use uom::si::electrical_resistance::ohm;

use super::system::BankEntry;
use crate::battery::{fault_voltage, resistance_rise, short_circuit_estimate};
use crate::network::Source;
use crate::quantity::{ElectricPotential, ElectricalResistance};

/// Strongest and weakest, each `None` where nothing is known of it.
#[derive(Clone, Copy, Debug)]
pub(super) struct Ends {
    pub strongest: Option<Source>,
    pub weakest: Option<Source>,
    /// Neither a current nor a resistance is stated: a rule of thumb stands in.
    pub by_thumb: bool,
}

pub(super) fn ends(bank: &BankEntry) -> Ends {
    let Some(chemistry) = bank.chemistry() else { return limited(bank) };
    let cell = fault_voltage(chemistry);
    let volts = |per_cell: f64| -> ElectricPotential {
        bank.nominal * (per_cell / chemistry.nominal_cell().value)
    };
    let full = volts(cell.greatest_V);
    let from_current = bank.short_circuit.map(|amps| full / amps);
    // Stated twice, the stronger source counts for the greatest current, the weaker for the least.
    let stated = match (bank.internal_resistance, from_current) {
        (Some(a), Some(b)) => Some(if a <= b { (a, b) } else { (b, a) }),
        (a, b) => a.or(b).map(|r| (r, r)),
    };
    let estimate = short_circuit_estimate(chemistry, bank.capacity).ok();
    let by_thumb = stated.is_none() && estimate.is_some();
    let resistance: Option<(ElectricalResistance, ElectricalResistance)> =
        stated.or_else(|| estimate.map(|e| (full / e.upper, full / e.usual)));
    // A battery without resistance does not exist; a stated zero must not divide.
    let floor = ElectricalResistance::new::<ohm>(1e-7);
    let source = |emf, r: ElectricalResistance| Source { emf, resistance: if r > floor { r } else { floor } };
    Ends {
        strongest: resistance.map(|(low, _)| source(full, low)),
        weakest: resistance
            .map(|(_, high)| source(volts(cell.least_V), high * resistance_rise(chemistry).product())),
        by_thumb,
    }
}

/// A source that limits itself: no more than its limit flows, into whatever resistance.
fn limited(feed: &BankEntry) -> Ends {
    let source = feed
        .limit
        .filter(|limit| limit.value > 0.0)
        .map(|limit| Source { emf: feed.highest, resistance: feed.highest / limit });
    Ends { strongest: source, weakest: source, by_thumb: false }
}
