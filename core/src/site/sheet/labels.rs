//! Labels: one for each device, circuit end, board, bank, array and inverter, short enough to print.

use alloc::collections::{BTreeMap, BTreeSet};
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::power::watt;

use super::path::poles;
use crate::array::open_circuit_voltage_cold;
use crate::protection::End;
use crate::quantity::Ratio;
use crate::site::finding::digits;
use crate::site::plan::{Plan, Planned};
use crate::site::system::{Array, FeedKind, Site};

/// Characters of a line, and lines of a label: what a tape of 12 mm takes. Common practice, no source.
const LINE: usize = 28;
const LINES: usize = 3;

/// Like labels.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Label {
    /// How many.
    pub count: u32,
    /// Where they go.
    pub place: String,
    /// At most three lines of at most 28 characters; a longer name is cut.
    pub lines: Vec<String>,
}

impl Label {
    fn new(count: u32, place: String, lines: [String; LINES]) -> Self {
        let lines = lines.into_iter().filter(|l| !l.is_empty()).map(|l| cut(&l)).collect();
        Self { count, place, lines }
    }
}

/// Cuts a line to what a label takes.
fn cut(text: &str) -> String {
    if text.chars().count() <= LINE {
        return text.to_string();
    }
    let mut kept: String = text.chars().take(LINE - 1).collect();
    kept.push('…');
    kept
}

fn system_words(nominal: f64, highest: f64) -> String {
    format!("{} V DC, max. {} V", digits(nominal), digits(highest))
}

pub(super) fn labels(site: &Site, plan: &Plan) -> Vec<Label> {
    let mut list = Vec::new();
    banks(site, &mut list);
    for (index, array) in site.arrays.iter().enumerate() {
        list.push(array_label(site, index, array));
    }
    boards(site, plan, &mut list);
    inverters(site, plan, &mut list);
    let chargers: BTreeSet<&str> = site.chargers.iter().map(|c| c.name.as_str()).collect();
    let arrays: BTreeSet<&str> = site.arrays.iter().map(|a| a.part.name.as_str()).collect();
    for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
        let Some(planned) = planned else { continue };
        let volts = system_words(planned.flow.nominal, planned.flow.highest);
        let from_source = |name: &String| chargers.contains(name.as_str());
        for fitted in &planned.fitted {
            let device = fitted.guard.device;
            let fed = if fitted.end == End::From { &circuit.to } else { &circuit.from };
            list.push(Label::new(
                poles(site, circuit, fitted),
                format!("device {}", fitted.name),
                [
                    format!("{}: {} {} A", fitted.name, device.family, digits(device.rating.get::<ampere>())),
                    // What stands at the other end of a charger's circuit is no load of it.
                    if from_source(&circuit.from) { circuit.name.clone() } else { format!("feeds {fed}") },
                    volts.clone(),
                ],
            ));
        }
        let of_array = |name: &String| arrays.contains(name.as_str());
        let third = if of_array(&circuit.from) || of_array(&circuit.to) {
            "LIVE IN DAYLIGHT".to_string()
        } else if (planned.feeds.from && planned.feeds.to)
            || from_source(&circuit.from)
            || planned.flow.charged
        {
            "LIVE FROM BOTH ENDS".to_string()
        } else {
            let guarded = planned.fitted.first().map_or_else(String::new, |f| {
                let device = f.guard.device;
                let kind = if device.family.data().is_fuse { "fuse" } else { "breaker" };
                format!(", {kind} {} A", digits(device.rating.get::<ampere>()))
            });
            format!("{} V, {}{guarded}", digits(planned.flow.nominal), planned.positive.size)
        };
        list.push(Label::new(
            2,
            format!("ends of circuit {}", circuit.name),
            [circuit.name.clone(), format!("{} – {}", circuit.from, circuit.to), third],
        ));
    }
    list
}

fn banks(site: &Site, list: &mut Vec<Label>) {
    for bank in &site.banks {
        let Some(chemistry) = bank.chemistry() else { continue };
        list.push(Label::new(
            1,
            format!("bank {}", bank.name),
            [
                bank.name.clone(),
                format!(
                    "{} V {} Ah {}",
                    digits(bank.nominal.get::<volt>()),
                    digits(bank.capacity.get::<ampere_hour>()),
                    chemistry.word()
                ),
                format!("always live, max. {} V DC", digits(bank.highest.get::<volt>())),
            ],
        ));
    }
}

/// The highest voltage as the plan counts it, else by the sheet's coefficient; none where neither is known.
fn array_label(site: &Site, index: usize, array: &Array) -> Label {
    let planned = site.banks.iter().find(|b| b.kind == FeedKind::Array(index)).map(|b| b.highest);
    let cold = site.weather.as_ref().and_then(|w| w.coldest_morning).unwrap_or(site.ambient.0);
    let by_sheet = || {
        let series = Ratio::from(f64::from(array.series));
        open_circuit_voltage_cold(array.module.voc, array.module.voc_coefficient?, cold, series).ok()
    };
    let most = planned.or_else(by_sheet);
    let amps = array.module.isc * f64::from(array.strings);
    Label::new(
        1,
        format!("array {}", array.part.name),
        [
            format!("array {}", array.part.name),
            "LIVE IN DAYLIGHT".to_string(),
            match most {
                Some(volts) => {
                    format!(
                        "max. {} V DC, Isc {} A",
                        digits(volts.get::<volt>()),
                        digits(amps.get::<ampere>())
                    )
                }
                None => format!("Isc {} A", digits(amps.get::<ampere>())),
            },
        ],
    )
}

/// What hangs on a board: its first planned circuit, and the sources that can put volts on it by themselves: banks behind
/// its circuits, and outputs that charge.
#[derive(Default)]
struct OnBoard<'a> {
    first: Option<&'a Planned>,
    sources: usize,
}

fn boards(site: &Site, plan: &Plan, list: &mut Vec<Label>) {
    let mut all: BTreeMap<&str, OnBoard<'_>> =
        site.boards.iter().map(|b| (b.name.as_str(), OnBoard::default())).collect();
    let chargers: BTreeSet<&str> = site.chargers.iter().map(|c| c.name.as_str()).collect();
    for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
        let Some(planned) = planned else { continue };
        let (from, to) = (circuit.from.as_str(), circuit.to.as_str());
        for (own, other, towards) in [(to, from, planned.feeds.from), (from, to, planned.feeds.to)] {
            if let Some(board) = all.get_mut(own) {
                board.first.get_or_insert(planned);
                board.sources += usize::from(towards || chargers.contains(other));
            }
        }
    }
    for board in &site.boards {
        let Some(on) = all.get(board.name.as_str()) else { continue };
        let volts = on.first.map_or_else(String::new, |p| system_words(p.flow.nominal, p.flow.highest));
        let third = match (on.sources, board.busbar) {
            (0 | 1, None) => String::new(),
            (0 | 1, Some(rating)) => format!("busbar {} A", digits(rating.get::<ampere>())),
            (2, _) => "TWO SOURCES: isolate both".to_string(),
            (many, _) => format!("{many} SOURCES: isolate all"),
        };
        list.push(Label::new(1, format!("board {}", board.name), [board.name.clone(), volts, third]));
    }
}

fn inverters(site: &Site, plan: &Plan, list: &mut Vec<Label>) {
    for inverter in &site.inverters {
        let mut circuits = site.circuits.iter().zip(&plan.circuits);
        let planned = circuits.find_map(|(c, p)| {
            (c.from == inverter.name || c.to == inverter.name).then_some(p.as_ref()).flatten()
        });
        let power = format!("{} W AC", digits(inverter.power.get::<watt>()));
        list.push(Label::new(
            1,
            format!("inverter {}", inverter.name),
            [
                format!("{}, {power}", inverter.name),
                planned.map_or_else(String::new, |p| system_words(p.flow.nominal, p.flow.highest)),
                "input stays charged".to_string(),
            ],
        ));
    }
}
