//! The commissioning sheet: what is done and measured, in working order, and what to expect.

use alloc::boxed::Box;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::heat_flux_density::watt_per_square_meter;
use uom::si::temperature_coefficient::per_kelvin;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::dead::{RunTest, how, runs};
use super::loaded::{LoadedTest, tests, untested};
use super::meter::Meter;
use crate::array::cell_temperature;
use crate::battery::fault_voltage;
use crate::quantity::{ElectricCurrent, ElectricPotential, Irradiance, ThermodynamicTemperature};
use crate::site::bank::cells;
use crate::site::finding::digits;
use crate::site::graph::Item;
use crate::site::parts::Charging;
use crate::site::plan::Plan;
use crate::site::system::{Array, BankEntry, Charger, Site};

/// Most that strings may differ when they are joined, a cell. Common practice, no source.
const STRINGS_APART_MV_A_CELL: f64 = 10.0;
/// Nominal operating cell temperature where the module's sheet gives none, °C. Common practice, no source.
const USUAL_NOCT_DEGC: f64 = 47.0;

/// When a step is made.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Stage {
    /// Before there is power.
    Dead,
    /// With power and without load, source by source.
    OpenCircuit,
    /// With the loads running, then with the sources.
    Loaded,
}

/// What a reading should lie between; the errors of the meter are in it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Expected<Q> {
    /// Least.
    pub least: Q,
    /// The value itself, where there is one and not a range.
    pub value: Option<Q>,
    /// Greatest.
    pub greatest: Q,
}

/// One step. What was read, the date and who read it are written down beside it.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub enum Step {
    /// To be done, or looked at.
    Task {
        /// When.
        stage: Stage,
        /// Where.
        place: String,
        /// What.
        what: String,
    },
    /// Volts without load.
    Voltage {
        /// When.
        stage: Stage,
        /// Where.
        place: String,
        /// Between what.
        what: String,
        /// What to expect, where that is known.
        expected: Option<Expected<ElectricPotential>>,
    },
    /// Amperes of a source.
    Current {
        /// When.
        stage: Stage,
        /// Where.
        place: String,
        /// What.
        what: String,
        /// What it may not exceed, where that is known.
        greatest: Option<ElectricCurrent>,
    },
    /// A run before there is power.
    Run(RunTest),
    /// A run under load.
    Loaded(Box<LoadedTest>),
}

impl Step {
    /// When it is made.
    pub const fn stage(&self) -> Stage {
        match self {
            Self::Task { stage, .. } | Self::Voltage { stage, .. } | Self::Current { stage, .. } => *stage,
            Self::Run(_) => Stage::Dead,
            Self::Loaded(_) => Stage::Loaded,
        }
    }
}

/// All steps, in working order.
pub(super) fn steps(site: &Site, plan: &Plan, meter: &Meter) -> Vec<Step> {
    let mut steps = Vec::new();
    let task = |stage, place: String, what: String| Step::Task { stage, place, what };
    let none = String::new;
    steps.push(task(
        Stage::Dead,
        none(),
        "all devices and isolators open, loads, inverters and chargers off, bank not joined; secured"
            .to_string(),
    ));
    steps.push(task(
        Stage::Dead,
        none(),
        "proved dead at every board, meter proved before and after".to_string(),
    ));
    let runs = runs(site, plan);
    if !runs.is_empty() {
        steps.extend(how(site, &runs).into_iter().map(|what| task(Stage::Dead, none(), what)));
        steps.extend(runs.into_iter().map(Step::Run));
    }
    for bank in site.banks.iter().filter(|b| b.is_battery()) {
        steps.extend(bank_steps(bank, meter));
    }
    steps.extend(joined_banks(site, plan));
    steps.push(Step::Voltage {
        stage: Stage::OpenCircuit,
        place: "every board and load terminal, nothing drawing".to_string(),
        what: "volts of its source as read there, plus on positive".to_string(),
        expected: None,
    });
    for charger in &site.chargers {
        steps.extend(
            set_points(charger)
                .map(|what| task(Stage::OpenCircuit, named("charging by", &charger.name), what)),
        );
    }
    for array in &site.arrays {
        steps.extend(array_steps(site, array, meter));
    }
    steps.extend(tests(site, plan, meter).into_iter().map(|test| Step::Loaded(Box::new(test))));
    for (name, why) in untested(site, plan) {
        steps.push(task(Stage::Loaded, named("circuit", name), format!("no figure to compare with: {why}")));
    }
    for array in &site.arrays {
        let rated = array.module.imp * f64::from(array.strings);
        steps.push(task(
            Stage::Loaded,
            named("array", &array.part.name),
            format!(
                "joined last; gives about {} A in full sun, less in proportion",
                digits(rated.get::<ampere>())
            ),
        ));
    }
    for charger in &site.chargers {
        steps.push(Step::Current {
            stage: Stage::Loaded,
            place: named("charging by", &charger.name),
            what: "current into the bank".to_string(),
            greatest: charger.limit.map(|limit| limit + meter.current_error(limit)),
        });
    }
    steps
}

fn named(kind: &str, name: &str) -> String {
    format!("{kind} \"{name}\"")
}

/// Volts of a rested bank between empty and full; of its batteries and strings one by one.
fn bank_steps(bank: &BankEntry, meter: &Meter) -> Vec<Step> {
    let mut steps = Vec::new();
    let Some(chemistry) = bank.chemistry() else { return steps };
    let (fewest, most) = cells(bank, chemistry);
    let cell = fault_voltage(chemistry);
    let between = |part: f64| {
        let low = ElectricPotential::new::<volt>(part * fewest * cell.least_V);
        let high = ElectricPotential::new::<volt>(part * most * cell.greatest_V);
        Some(Expected {
            least: low - meter.voltage_error(low),
            value: None,
            greatest: high + meter.voltage_error(high),
        })
    };
    let place = named("bank", &bank.name);
    let voltage = |what: String, expected| Step::Voltage {
        stage: Stage::OpenCircuit,
        place: place.clone(),
        what,
        expected,
    };
    if bank.series > 1 && bank.part.as_ref().is_some_and(|p| p.unit.is_some()) {
        let what = format!("each of its {} batteries alone", bank.series.saturating_mul(bank.strings));
        steps.push(voltage(what, between(1.0 / f64::from(bank.series))));
    }
    if bank.strings > 1 {
        steps.push(Step::Task {
            stage: Stage::OpenCircuit,
            place: place.clone(),
            what: apart(&format!("{} strings read apart", bank.strings), fewest),
        });
    }
    let what = format!(
        "terminals, {}, rested, empty to full, plus on positive",
        cell_words(chemistry.word(), fewest, most)
    );
    steps.push(voltage(what, between(1.0)));
    steps
}

fn cell_words(chemistry: &str, fewest: f64, most: f64) -> String {
    if fewest < most {
        format!("{} to {} {chemistry} cells", digits(fewest), digits(most))
    } else {
        format!("{} {chemistry} cells", digits(fewest))
    }
}

/// The set points that are stated; `None` where none is.
fn set_points(charger: &Charger) -> Option<String> {
    let Charging { absorption, float, equalise, compensation, .. } = charger.charging;
    let volts = |word: &str, value: Option<ElectricPotential>| {
        value.map(|v| format!("{word} {} V", digits(v.get::<volt>())))
    };
    let list: Vec<String> =
        [volts("absorption", absorption), volts("float", float), volts("equalise", equalise)]
            .into_iter()
            .flatten()
            .collect();
    let by_heat = compensation.map(|c| format!("compensation {} mV/K a cell", digits(c.value * 1e3)));
    let at_25 = (!list.is_empty()).then(|| format!("{} at 25 °C", list.join(", ")));
    let all: Vec<String> = at_25.into_iter().chain(by_heat).collect();
    (!all.is_empty()).then(|| format!("set points entered: {}", all.join("; ")))
}

/// Banks that conductors join (R15): brought together before the last device between them closes.
fn joined_banks(site: &Site, plan: &Plan) -> Vec<Step> {
    let mut steps = Vec::new();
    for tree in &plan.trees {
        let banks: Vec<(&BankEntry, f64)> = tree
            .nodes
            .iter()
            .filter_map(|node| match node.item {
                Item::Bank(i) => site.banks.get(i),
                _ => None,
            })
            .filter_map(|bank| Some((bank, cells(bank, bank.chemistry()?).0)))
            .collect();
        let fewest = banks.iter().map(|(_, cells)| *cells).fold(f64::INFINITY, f64::min);
        if banks.len() > 1 {
            let names: Vec<String> = banks.iter().map(|(bank, _)| format!("\"{}\"", bank.name)).collect();
            steps.push(Step::Task {
                stage: Stage::OpenCircuit,
                place: format!("banks {}", names.join(", ")),
                what: apart("read apart", fewest),
            });
        }
    }
    steps
}

fn apart(what: &str, cells: f64) -> String {
    format!(
        "{what}; join them only when they differ by {} mV or less (common practice, no source)",
        digits(STRINGS_APART_MV_A_CELL * cells)
    )
}

/// Open-circuit volts of a string: cells as cold as on the coldest morning, to cells in full sun in the hottest air.
fn array_steps(site: &Site, array: &Array, meter: &Meter) -> Vec<Step> {
    let place = named("array", &array.part.name);
    let expected = string_range(site, array).map(|(least, greatest)| Expected {
        least: least - meter.voltage_error(least),
        value: None,
        greatest: greatest + meter.voltage_error(greatest),
    });
    let bare = array.module.voc * f64::from(array.series);
    let what = if expected.is_some() {
        "each string open, plus on positive; full sun; in weak light a few per cent less".to_string()
    } else {
        format!(
            "each string open, plus on positive; {} V with cells at 25 °C, less when warm (voc_coefficient is not stated)",
            digits(bare.get::<volt>())
        )
    };
    let mut steps =
        alloc::vec![Step::Voltage { stage: Stage::OpenCircuit, place: place.clone(), what, expected }];
    if array.strings > 1 {
        steps.push(Step::Task {
            stage: Stage::OpenCircuit,
            place: place.clone(),
            what: format!("its {} strings alike within 2 % (common practice, no source)", array.strings),
        });
    }
    steps
}

/// Volts of a string, warm and cold, by the straight line of the sheet's coefficient.
fn string_range(site: &Site, array: &Array) -> Option<(ElectricPotential, ElectricPotential)> {
    let coefficient = array.module.voc_coefficient?.get::<per_kelvin>();
    let cold = site.weather.as_ref().and_then(|w| w.coldest_morning).unwrap_or(site.ambient.0);
    let noct =
        array.module.noct.unwrap_or_else(|| ThermodynamicTemperature::new::<degree_celsius>(USUAL_NOCT_DEGC));
    let sun = Irradiance::new::<watt_per_square_meter>(1000.0);
    let hot = cell_temperature(site.ambient.1, noct, sun).ok()?;
    let bare = array.module.voc * f64::from(array.series);
    let at = |cells: ThermodynamicTemperature| {
        bare * (1.0 + coefficient * (cells.get::<degree_celsius>() - 25.0)).max(0.0)
    };
    Some((at(hot), at(cold)))
}
