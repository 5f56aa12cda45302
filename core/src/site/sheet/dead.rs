//! What is tested on each run before there is power: polarity, continuity, insulation, torque.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::megaohm;

use crate::citation::{Citation, Seen};
use crate::quantity::{ElectricPotential, ElectricalResistance};
use crate::rules::Key;
use crate::site::finding::digits;
use crate::site::model::Earthing;
use crate::site::plan::Plan;
use crate::site::system::Site;

/// Greatest voltage for which the least insulation resistance below is held, V DC.
const EXTRA_LOW_V: f64 = 120.0;

/// One run, dead and with its loads off: both polarities, both ways through, insulation, torque of both ends to note.
///
/// No torque is held for any part: the maker's figure and what was set are written down.
#[derive(Clone, Debug, PartialEq)]
pub struct RunTest {
    /// Circuit.
    pub circuit: String,
    /// Its ends.
    pub from: String,
    /// See `from`.
    pub to: String,
    /// Least insulation resistance, the test voltage, and where that stands; `None` where the rule set's is not held.
    pub insulation: Option<(ElectricalResistance, ElectricPotential, Citation)>,
}

pub(super) fn runs(site: &Site, plan: &Plan) -> Vec<RunTest> {
    let joined = site.circuits.iter().zip(&plan.circuits).filter_map(|(c, p)| Some((c, p.as_ref()?)));
    joined
        .map(|(circuit, planned)| RunTest {
            circuit: circuit.name.clone(),
            from: circuit.from.clone(),
            to: circuit.to.clone(),
            insulation: insulation(site, planned.flow.highest),
        })
        .collect()
}

/// Extra-low voltage under `iec` only; the other sets ask for none that is held.
fn insulation(site: &Site, highest: f64) -> Option<(ElectricalResistance, ElectricPotential, Citation)> {
    (site.rules.set().key == Key::Iec && highest <= EXTRA_LOW_V).then(|| {
        (
            ElectricalResistance::new::<megaohm>(0.5),
            ElectricPotential::new::<volt>(250.0),
            Citation::new("IEC 60364-6", "insulation resistance of extra-low voltage", Seen::Recalled),
        )
    })
}

/// How insulation and torque are tested, once for all runs.
pub(super) fn how(site: &Site, runs: &[RunTest]) -> Vec<String> {
    let earth = site.rules.set().terms.earth;
    let bond = if site.earthing == Earthing::Floating {
        String::new()
    } else {
        format!(", the bond to {earth} open meanwhile")
    };
    let limit = match runs.iter().find_map(|run| run.insulation) {
        Some((ohms, volts, citation)) => format!(
            "at {} V DC at least {} MΩ ({citation}; verify)",
            digits(volts.get::<volt>()),
            digits(ohms.get::<megaohm>())
        ),
        None => "no least value is held: write down volts and reading".to_string(),
    };
    alloc::vec![
        format!(
            "insulation: both conductors together to {earth}, electronics and surge protection taken off{bond}; {limit}"
        ),
        "torque: as the maker of each terminal states; none is held here".to_string(),
    ]
}
