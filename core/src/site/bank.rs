//! A bank of the document as two sources: at its strongest and at its weakest (R6).

use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;

use super::system::{BankEntry, FeedKind};
use crate::battery::{Chemistry, fault_voltage, resistance_rise, short_circuit_estimate};
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

/// Cells in series that a nominal voltage stands for, at least and at most.
///
/// Of LFP it is a label, 3.0 to 3.3 V a cell: 12 V are four cells, and 48 V fifteen or sixteen.
pub(super) fn cells(bank: &BankEntry, chemistry: Chemistry) -> (f64, f64) {
    if bank.cells > 0 {
        let known = f64::from(bank.cells);
        return (known, known);
    }
    let nominal = bank.nominal.get::<volt>();
    let exact = nominal / chemistry.nominal_cell().get::<volt>();
    if chemistry != Chemistry::Lfp {
        return (exact, exact);
    }
    let fewest = libm::ceil(nominal / 3.3 - 1e-6);
    let twelves = nominal / 12.0;
    let most = if libm::fabs(twelves - libm::round(twelves)) < 1e-6 { 4.0 * twelves } else { fewest };
    (fewest, most)
}

/// Voltage that drives the greatest current: that of the full cells, or the highest the bank is charged to where that is
/// more.
///
/// Just charged, a bank of any chemistry stands near its highest voltage, and charged double layers hold it there longer
/// than a device takes to open: common practice, no source, on the side of danger.
fn greatest_emf(bank: &BankEntry, chemistry: Chemistry, cell_V: f64) -> ElectricPotential {
    let full = ElectricPotential::new::<volt>(cells(bank, chemistry).1 * cell_V);
    if full >= bank.highest { full } else { bank.highest }
}

pub(super) fn ends(bank: &BankEntry) -> Ends {
    let Some(chemistry) = bank.chemistry() else { return limited(bank) };
    let cell = fault_voltage(chemistry);
    let volts =
        |per_cell: f64| -> ElectricPotential { bank.nominal * (per_cell / chemistry.nominal_cell().value) };
    let rested = volts(cell.greatest_V);
    let full = greatest_emf(bank, chemistry, cell.greatest_V);
    // Stated twice, the stronger source counts for the greatest current, the weaker for the least.
    let stated = match (bank.internal_resistance, bank.short_circuit) {
        (Some(r), Some(amps)) => {
            let (low, high) = (full / amps, rested / amps);
            Some((if r <= low { r } else { low }, if r >= high { r } else { high }))
        }
        (Some(r), None) => Some((r, r)),
        (None, Some(amps)) => Some((full / amps, rested / amps)),
        (None, None) => None,
    };
    let estimate = short_circuit_estimate(chemistry, bank.capacity).ok();
    let by_thumb = stated.is_none() && estimate.is_some();
    let resistance: Option<(ElectricalResistance, ElectricalResistance)> =
        stated.or_else(|| estimate.map(|e| (full / e.upper, rested / e.usual)));
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
    // In weak light an array drives next to nothing.
    let weakest = source.filter(|_| !matches!(feed.kind, FeedKind::Array(_)));
    Ends { strongest: source, weakest, by_thumb: false }
}
