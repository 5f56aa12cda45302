//! Inverters: those stated, and the one that AC loads need where there is none (R16).

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_potential::volt;
use uom::si::power::watt;
use uom::si::ratio::ratio;

use super::{InverterReason, Reasons, problem, stock};
use crate::converter::InverterDemand;
use crate::error::Error;
use crate::load::{Occasion, coincident_power};
use crate::quantity::{ElectricPotential, Power, Ratio, Time};
use crate::site::energy::{ac_loads, load_of};
use crate::site::finding::digits;
use crate::site::lines::{Rejected, Step};
use crate::site::model::{Document, LoadEntry};
use crate::site::parts::InverterPart;
use crate::site::read::Problem;
use crate::site::system::{InverterEntry, Site};

/// Figures of a plain inverter. Common practice, no source.
pub(super) const PLAIN_EFFICIENCY: f64 = 0.85;
const PLAIN_IDLE: f64 = 0.01;
/// Plain inverters are bought in steps, W.
const PLAIN_STEP_W: f64 = 100.0;
const PLAIN_SURGE: f64 = 2.0;

/// Takes over the stated inverters; those that state no power are returned, to be designed.
pub(super) fn take(document: &Document, site: &mut Site, problems: &mut Vec<Problem>) -> Vec<InverterPart> {
    let mut open = Vec::new();
    for stated in &document.inverters {
        let part = stock::inverter(document, stated);
        let Some(power) = part.power else {
            open.push(part);
            continue;
        };
        let Some(efficiency) = part.efficiency else {
            problems.push(problem(
                part.line,
                format!("[[inverter]] \"{}\"", part.name),
                "key 'efficiency' is missing beside the power; state it at full power and the lowest voltage, or name a \
                 model of the stock",
            ));
            continue;
        };
        site.inverters.push(entry(part, power, efficiency, false));
    }
    open
}

fn entry(part: InverterPart, power: Power, efficiency: Ratio, designed: bool) -> InverterEntry {
    InverterEntry {
        name: part.name.clone(),
        line: part.line,
        power,
        surge: part.surge,
        start: part.surge,
        efficiency,
        idle: part.idle,
        least: part.least,
        greatest: part.greatest,
        stud: part.stud,
        terminal: part.terminal,
        part,
        designed,
    }
}

/// What each inverter gives for seconds: no more than its loads ask for, where they are known.
pub(super) fn limit_starts(site: &mut Site) {
    for index in 0..site.inverters.len() {
        let nominal = site.banks.first().map(|b| b.nominal).unwrap_or_default();
        let asked = demand(site, nominal, ac_loads(site, index)).ok().map(|d| d.starting);
        let Some(inverter) = site.inverters.get_mut(index) else { continue };
        inverter.start = match (inverter.surge, asked) {
            (Some(surge), Some(asked)) if asked.value > 0.0 && asked < surge => {
                // It gives its continuous power at any rate.
                Some(if asked > inverter.power { asked } else { inverter.power })
            }
            (surge, _) => surge,
        };
    }
}

/// What AC loads ask of their inverter: the greatest that coincide, and that with the largest start on top.
pub(in crate::site) fn demand<'a>(
    site: &Site,
    nominal: ElectricPotential,
    loads: impl Iterator<Item = &'a LoadEntry>,
) -> Result<InverterDemand, Error> {
    let (mut occasions, mut watts, mut amperes, mut extra): (
        Vec<Occasion>,
        Vec<Power>,
        Vec<Power>,
        Vec<Power>,
    ) = Default::default();
    let nothing = Power::default();
    // The longest start counts; one that is not stated makes none of them known.
    let mut duration: Option<Time> = Some(Time::default());
    for entry in loads {
        let load = load_of(site, entry, nominal)?;
        occasions.push(load.occasion(None)?);
        watts.push(load.power_at(nominal)?);
        if let Some(start) = load.start {
            duration = duration.zip(start.duration).map(|(a, b)| if b > a { b } else { a });
        }
        let apparent = load.apparent_at(nominal)?;
        amperes.push(apparent);
        extra.push(apparent * load.start_extra()?);
    }
    let none: Vec<Power> = watts.iter().map(|_| nothing).collect();
    let running = coincident_power(&occasions, &watts, &none)?.running;
    let apparent = coincident_power(&occasions, &amperes, &extra)?;
    Ok(InverterDemand {
        power: running,
        apparent: apparent.running,
        starting: apparent.with_start.sum,
        duration,
        ambient: Some(site.ambient.1),
    })
}

/// Designs what is open: a stated inverter without power, and one for AC loads where none is stated at all.
pub(super) fn design(
    document: &Document,
    site: &mut Site,
    open: Vec<InverterPart>,
    nominal: ElectricPotential,
    reasons: &mut Reasons,
) -> Result<(), Problem> {
    let mut wishes = open;
    if wishes.is_empty() && site.inverters.is_empty() && site.loads.iter().any(|l| l.ac) {
        let mut name = String::from("inverter");
        while site.loads.iter().any(|l| l.name == name) || site.boards.iter().any(|b| b.name == name) {
            name.push_str(" 2");
        }
        wishes.push(plain(name));
    }
    for wish in wishes {
        let place = format!("[[inverter]] \"{}\"", wish.name);
        let line = wish.line;
        let told = |error: Error| problem(line, place.clone(), error.to_string());
        // Its loads are those of its place among the inverters, once it is there.
        let index = site.inverters.len();
        site.inverters.push(entry(
            wish.clone(),
            Power::new::<watt>(1.0),
            Ratio::new::<ratio>(PLAIN_EFFICIENCY),
            true,
        ));
        let asked = demand(site, nominal, ac_loads(site, index)).map_err(told)?;
        let steps = alloc::vec![
            Step {
                what: "greatest coincident power of its loads".to_string(),
                value: asked.power.get::<watt>(),
                unit: "W",
                citation: None
            },
            Step {
                what: "the same as apparent power".to_string(),
                value: asked.apparent.get::<watt>(),
                unit: "VA",
                citation: None
            },
            Step {
                what: "with the largest start".to_string(),
                value: asked.starting.get::<watt>(),
                unit: "VA",
                citation: None
            },
        ];
        let (part, rejected) =
            choose(document, &wish, nominal, &asked).map_err(|why| problem(line, place.clone(), why))?;
        let (power, efficiency) = (part.power.unwrap_or_default(), part.efficiency.unwrap_or_default());
        if let Some(slot) = site.inverters.get_mut(index) {
            *slot = entry(part, power, efficiency, true);
        }
        reasons.inverters.push(InverterReason { name: wish.name.clone(), steps, rejected });
    }
    Ok(())
}

/// The cheapest of the stock that passes, else a plain one.
fn choose(
    document: &Document,
    wish: &InverterPart,
    nominal: ElectricPotential,
    asked: &InverterDemand,
) -> Result<(InverterPart, Vec<Rejected>), String> {
    let mut rejected = Vec::new();
    if document.stock.inverters.is_empty() {
        let need = if asked.apparent > asked.power { asked.apparent } else { asked.power };
        let rounded = libm::ceil(need.get::<watt>() / PLAIN_STEP_W).max(1.0) * PLAIN_STEP_W;
        // The surge that a plain one has, or a larger one where the start asks for more.
        let by_surge = libm::ceil(asked.starting.get::<watt>() / PLAIN_SURGE / PLAIN_STEP_W) * PLAIN_STEP_W;
        let power = Power::new::<watt>(rounded.max(by_surge));
        let part = InverterPart {
            nominal: Some(nominal),
            power: Some(power),
            surge: Some(power * PLAIN_SURGE),
            surge_time: Some(Time::new::<uom::si::time::second>(2.0)),
            efficiency: Some(Ratio::new::<ratio>(PLAIN_EFFICIENCY)),
            idle: Some(power * PLAIN_IDLE),
            ..wish.clone()
        };
        return Ok((part, rejected));
    }
    let mut best: Option<(InverterPart, Option<f64>)> = None;
    for model in &document.stock.inverters {
        let part = stock::merged_inverter(wish, model);
        let what = format!("inverter {}", model.name);
        if let Some(own) = part.nominal
            && libm::fabs(own.get::<volt>() - nominal.get::<volt>()) > 0.1 * nominal.get::<volt>()
        {
            rejected.push(Rejected { what, why: format!("it is made for {} V", digits(own.get::<volt>())) });
            continue;
        }
        match suits(&part, nominal, asked) {
            Ok(()) => {
                let cheaper = match (&best, part.price) {
                    (None, _) => true,
                    (Some((_, Some(price))), Some(own)) => own < *price,
                    _ => false,
                };
                if cheaper {
                    if let Some((lost, _)) = best.take() {
                        rejected.push(Rejected {
                            what: format!("inverter {}", lost.model.unwrap_or_default()),
                            why: "passes; not the cheapest".to_string(),
                        });
                    }
                    let price = part.price;
                    best = Some((InverterPart { model: Some(model.name.clone()), ..part }, price));
                } else {
                    rejected.push(Rejected {
                        what,
                        why: "passes; the one taken is cheaper or comes first".to_string(),
                    });
                }
            }
            Err(why) => rejected.push(Rejected { what, why }),
        }
    }
    match best {
        Some((part, _)) => Ok((part, rejected)),
        None => Err(format!(
            "no inverter of the stock serves its loads: {}",
            rejected.iter().map(|r| format!("{}: {}", r.what, r.why)).collect::<Vec<_>>().join("; ")
        )),
    }
}

/// Whether an inverter gives what is asked.
fn suits(part: &InverterPart, nominal: ElectricPotential, asked: &InverterDemand) -> Result<(), String> {
    let power = part.power.unwrap_or_default();
    if power < asked.power || power < asked.apparent {
        return Err(format!(
            "{} W continuous, at least {} VA",
            digits(power.get::<watt>()),
            digits(asked.apparent.get::<watt>())
        ));
    }
    let surge = part.surge.unwrap_or(power);
    if surge < asked.starting {
        return Err(format!(
            "{} W of surge, at least {} VA while the largest load starts",
            digits(surge.get::<watt>()),
            digits(asked.starting.get::<watt>())
        ));
    }
    if let Some(least) = part.least
        && least > nominal
    {
        return Err(format!("it stops at {} V, above the nominal voltage", digits(least.get::<volt>())));
    }
    Ok(())
}

/// An inverter of which nothing is stated.
fn plain(name: String) -> InverterPart {
    InverterPart {
        name,
        line: 0,
        model: None,
        nominal: None,
        power: None,
        surge: None,
        surge_time: None,
        efficiency: None,
        idle: None,
        least: None,
        greatest: None,
        capacitance: None,
        precharge: None,
        stud: None,
        terminal: None,
        board: None,
        route: None,
        price: None,
    }
}
