//! Arrays and their controllers: those stated, and those that the energy of the worst month asks for (R10).

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::energy::watt_hour;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::time::hour;

use super::{ArrayReason, Reasons, plain, problem, stock};
use crate::array::{
    ARRAY_TO_LOAD, ArrayNeed, EnergyNeed, Exposure, Layout, LoadClass, Module, NeedMonth, Preference,
    StringDevice, array_need, energy_need, layouts, string_voltages, sun_hours,
};
use crate::battery::Datum;
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::quantity::{Energy, Power, Ratio, Time};
use crate::site::energy::{DayDemand, Demand};
use crate::site::finding::digits;
use crate::site::lines::{Rejected, Step};
use crate::site::model::Document;
use crate::site::parts::{ArrayPart, Charging, ControllerKind, ControllerPart, ModulePart, Sense};
use crate::site::pv::{ask, module_of};
use crate::site::read::Problem;
use crate::site::supply::{ARRAY_LOSS, day_energy, efficiency, module_power};
use crate::site::system::{Array, BankEntry, Site};

/// Sun-hours of the worst month below which the sun counts as low. Common practice, no source.
const LOW_SUN_H: f64 = 3.0;
const PRACTICE: Citation =
    Citation::new("common practice, no source", "dirt, mismatch, wiring", Seen::Practice);
/// Most modules that are tried beyond the number that energy asks for: whole strings need a few more.
const MORE: u16 = 12;
/// Takes over the stated arrays; those that state no number of modules are returned, to be designed.
pub(super) fn take(document: &Document, site: &mut Site, problems: &mut Vec<Problem>) -> Vec<ArrayPart> {
    let mut open = Vec::new();
    for stated in &document.arrays {
        if stated.modules.is_none() && stated.series.is_none() && stated.strings.is_none() {
            open.push(stated.clone());
            continue;
        }
        let place = || format!("[[array]] \"{}\"", stated.name);
        let Some(module) = stock::module(document, stated) else {
            let text =
                "its module is not stated; name one of the stock, or state power, voc, isc, vmp and imp";
            problems.push(problem(stated.line, place(), text));
            continue;
        };
        if let Err(error) = module_of(module) {
            problems.push(problem(module.line, place(), error.to_string()));
            continue;
        }
        let controller = match stated.controller.as_ref() {
            Some(name) => site.controllers.iter().position(|c| c.name == *name),
            None => led_to(site, &stated.name).or((site.controllers.len() == 1).then_some(0)),
        };
        let (series, strings) = match (stated.modules, stated.series, stated.strings) {
            (_, Some(series), Some(strings)) => (series, strings),
            (Some(all), Some(series), None) => (series, all / series.max(1)),
            (Some(all), None, Some(strings)) if all % strings.max(1) == 0 => (all / strings.max(1), strings),
            (Some(all), None, Some(strings)) => {
                let text = format!("{all} modules do not divide into {strings} strings; mend one of the two");
                problems.push(problem(stated.line, place(), text));
                continue;
            }
            (None, Some(series), None) => (series, 1),
            (None, None, Some(strings)) => (1, strings),
            // Without a layout the modules stand in parallel, as a single one does; told by the voltages it gives.
            (Some(all), None, None) => (1, all),
            (None, None, None) => continue,
        };
        site.arrays.push(Array {
            part: stated.clone(),
            module: module.clone(),
            series,
            strings,
            controller,
            designed: false,
        });
    }
    open
}

/// The controller that an array's own circuits lead to, through a board between or not.
fn led_to(site: &Site, array: &str) -> Option<usize> {
    let mut here = array;
    // A board between array and controller, and no chain of them without end.
    for _ in 0..4 {
        let circuit = site.circuits.iter().find(|c| c.from == here)?;
        if let Some(found) = site.controllers.iter().position(|c| c.name == circuit.to) {
            return Some(found);
        }
        here = &circuit.to;
    }
    None
}

/// What is asked of an array.
struct Wanted<'a> {
    site: &'a Site,
    bank: &'a BankEntry,
    months: &'a [DayDemand; 12],
    sun: [Time; 12],
    class: LoadClass,
    losses: Ratio,
    /// Part of a charge, and of an energy, that the bank gives back.
    stored: [Datum<f64>; 2],
    shade: Exposure,
}

/// A choice with its price, if every part of it has one.
struct Choice {
    module: ModulePart,
    controller: ControllerPart,
    layout: Layout,
    preference: Preference,
    steps: Vec<Step>,
    worst_month: usize,
    reached: Ratio,
    price: Option<f64>,
}

/// Designs an array with its controller for a bank that nothing charges, from the stock or from plain parts.
pub(super) fn design(
    site: &mut Site,
    bank: usize,
    demand: &Demand,
    stored: [Datum<f64>; 2],
    stated: Option<&ArrayPart>,
    reasons: &mut Reasons,
) -> Result<(), Problem> {
    let Some((weather, entry)) = site.weather.as_ref().zip(site.banks.get(bank)) else { return Ok(()) };
    let mut sun = [Time::new::<hour>(0.0); 12];
    for (cell, irradiation) in sun.iter_mut().zip(&weather.in_plane) {
        *cell = sun_hours(*irradiation).unwrap_or_default();
    }
    let place = || format!("[[bank]] \"{}\"", entry.name);
    if sun.iter().zip(&demand.mean).any(|(sun, day)| sun.value <= 0.0 && day.total.value > 0.0) {
        let text = "a month without any sun carries a demand: no array can be sized for it; state the array and a generator";
        return Err(problem(weather.line, "[weather], in_plane".to_string(), text));
    }
    // The table's words: weak sun asks for the ratio of critical loads.
    let burden = |month: usize| {
        let out = demand.mean.get(month).map_or(0.0, |d| d.total.get::<watt_hour>());
        out / sun.get(month).map_or(1.0, Time::get::<hour>).max(1e-9)
    };
    let worst = (0..12).fold(0, |a, b| if burden(b) > burden(a) { b } else { a });
    let low = sun.get(worst).is_some_and(|s| s.get::<hour>() < LOW_SUN_H);
    let wanted = Wanted {
        site,
        bank: entry,
        months: &demand.mean,
        sun,
        class: if site.place.critical || low { LoadClass::Critical } else { LoadClass::NonCritical },
        losses: {
            let shaded = stated.and_then(|a| a.shade).map_or(0.0, |s| s.get::<ratio>());
            // More than nine tenths lost are refused by the sizing.
            Ratio::new::<ratio>((1.0 - (1.0 - ARRAY_LOSS) * (1.0 - shaded)).min(0.9))
        },
        stored,
        shade: match stated.and_then(|a| a.shade) {
            Some(part) if part.value > 0.0 => Exposure::PartlyShaded,
            _ => Exposure::Open,
        },
    };
    let own: Vec<ModulePart> = stated
        .and_then(|a| {
            a.own_module
                .clone()
                .or_else(|| site.stock.modules.iter().find(|m| Some(&m.name) == a.module.as_ref()).cloned())
        })
        .into_iter()
        .collect();
    let theirs = stated.and_then(|a| a.controller.as_ref());
    let theirs: Vec<ControllerPart> = site
        .controllers
        .iter()
        .filter(|c| theirs.map_or(site.controllers.len() == 1, |name| *name == c.name))
        .cloned()
        .collect();
    let generic_modules = [plain::module()];
    let modules: &[ModulePart] = if !own.is_empty() {
        &own
    } else if site.stock.modules.is_empty() {
        &generic_modules
    } else {
        &site.stock.modules
    };
    let mut rejected = Vec::new();
    let mut best: Option<Choice> = None;
    for part in modules {
        let module = match module_of(part) {
            Ok(module) => module,
            Err(error) => {
                rejected.push(Rejected { what: format!("module {}", part.name), why: error.to_string() });
                continue;
            }
        };
        let plain;
        let controllers: &[ControllerPart] = if !theirs.is_empty() {
            &theirs
        } else if site.stock.controllers.is_empty() {
            plain = plain::controllers();
            &plain
        } else {
            &site.stock.controllers
        };
        for controller in controllers {
            let what = || format!("module {} with controller {}", part.name, controller.name);
            match try_one(&wanted, part, &module, controller) {
                Ok(choice) => {
                    let cheaper = match (&best, choice.price) {
                        (None, _) => true,
                        (Some(best), Some(price)) => best.price.is_some_and(|b| price < b),
                        (Some(_), None) => false,
                    };
                    let (kept, lost) =
                        if cheaper { (Some(choice), best.take()) } else { (best.take(), Some(choice)) };
                    best = kept;
                    if let Some(lost) = lost {
                        let price = lost.price.map_or_else(
                            || "passes; the one taken comes first in the stock".to_string(),
                            |p| format!("passes, {} in all: not the cheapest", digits(p)),
                        );
                        rejected.push(Rejected {
                            what: format!(
                                "module {} with controller {}",
                                lost.module.name, lost.controller.name
                            ),
                            why: price,
                        });
                    }
                }
                // Of plain controllers only the one taken is worth a word.
                Err(_) if site.stock.controllers.is_empty() && theirs.is_empty() => {}
                Err(why) => rejected.push(Rejected { what: what(), why }),
            }
            // Plain controllers come smallest first: the first that serves is the one to buy.
            if site.stock.controllers.is_empty() && best.is_some() {
                break;
            }
        }
    }
    let Some(choice) = best else {
        let last = rejected.last().map_or_else(String::new, |r| format!("; {}: {}", r.what, r.why));
        return Err(problem(
            entry.line,
            place(),
            format!("no module and controller on offer charge it in the worst month{last}"),
        ));
    };
    take_choice(site, (bank, stated), choice, rejected, reasons);
    Ok(())
}

/// Adds a chosen array with its controller to the site.
fn take_choice(
    site: &mut Site,
    (bank, stated): (usize, Option<&ArrayPart>),
    choice: Choice,
    rejected: Vec<Rejected>,
    reasons: &mut Reasons,
) {
    let Some(entry) = site.banks.get(bank) else { return };
    let taken = |name: &str| {
        site.controllers.iter().any(|c| c.name == name)
            || site.arrays.iter().any(|a| a.part.name == name)
            || site.loads.iter().any(|l| l.name == name)
            || site.boards.iter().any(|b| b.name == name)
            || site.banks.iter().any(|b| b.name == name)
            || site.inverters.iter().any(|i| i.name == name)
    };
    let free = |wish: &str| {
        let mut name = wish.to_string();
        while taken(&name) {
            name.push_str(" 2");
        }
        name
    };
    let array = stated.map_or_else(|| free("array"), |a| a.name.clone());
    let known = site.controllers.iter().position(|c| c.name == choice.controller.name);
    let index = if let Some(index) = known {
        index
    } else {
        let part = ControllerPart {
            model: Some(choice.controller.name.clone()),
            name: free("charge controller"),
            line: 0,
            bank: Some(entry.name.clone()),
            charging: Charging {
                // A designed controller is bought with leads that sense at the bank (R11).
                sense: choice.controller.charging.sense.or(Some(Sense::Bank)),
                ..choice.controller.charging
            },
            ..choice.controller
        };
        site.controllers.push(part);
        site.controllers.len() - 1
    };
    reasons.arrays.push(ArrayReason {
        name: array.clone(),
        worst_month: Some(choice.worst_month),
        reached: Some(choice.reached),
        layout: choice.preference.reason().to_string(),
        steps: choice.steps,
        rejected,
    });
    let plain = ArrayPart {
        name: array,
        line: 0,
        module: None,
        own_module: None,
        modules: None,
        series: None,
        strings: None,
        tilt: None,
        azimuth: None,
        shade: None,
        controller: None,
        string_fuse: None,
        isolator: None,
        isolator_current: None,
        load_break: None,
        exposed: false,
        route: None,
    };
    site.arrays.push(Array {
        part: stated.cloned().unwrap_or(plain),
        series: u32::from(choice.layout.in_series),
        strings: u32::from(choice.layout.in_parallel),
        module: choice.module,
        controller: Some(index),
        designed: true,
    });
}

/// One module on one controller: how many the worst month asks for, and how they are joined.
fn try_one(
    wanted: &Wanted<'_>,
    part: &ModulePart,
    module: &Module,
    controller: &ControllerPart,
) -> Result<Choice, String> {
    let words = |error: Error| error.to_string();
    if !controller.nominals.is_empty() {
        let nominal = wanted.bank.nominal.get::<volt>();
        let serves =
            controller.nominals.iter().any(|n| libm::fabs(n.get::<volt>() - nominal) < 0.1 * nominal);
        if !serves {
            return Err(format!("it is not made for a bank of {} V", digits(nominal)));
        }
    }
    let class = ARRAY_TO_LOAD.iter().find(|row| row.class == wanted.class);
    let (to_load, citation) = class.map_or((1.2, None), |row| (row.most, Some(row.citation)));
    let margin = wanted.site.place.margin.map_or(0.0, |m| m.get::<ratio>());
    let to_load = (Ratio::new::<ratio>(to_load), margin);
    let (mut steps, least, worst_month) = if controller.kind == Some(ControllerKind::Pwm) {
        clamped(wanted, part, module, controller, to_load, citation)?
    } else {
        tracked(wanted, module, controller, to_load, citation)?
    };
    let first = least.max(1);
    let mut why = String::from("no arrangement was tried");
    for count in first..=first.saturating_add(MORE) {
        let found = ask(wanted.site, module, controller, wanted.bank, (StringDevice::ToChoose, &[]), |q| {
            layouts(q, count, wanted.shade)
        })
        .map_err(words)?;
        let Some((trial, preference)) = found.preferred else {
            if let Some(refused) = found.trials.iter().find_map(|t| t.refused.as_ref()) {
                why = refused.to_string();
            }
            continue;
        };
        // Beyond its output the sun of the best hours is lost; the worst month has none to lose.
        let power: Power = part.power * f64::from(count);
        let output: Power = controller.output.unwrap_or_default() * wanted.bank.nominal;
        if controller.kind != Some(ControllerKind::Pwm) && power > 1.25 * output {
            why = format!(
                "{} W of modules over an output of {} A at {} V: more than a quarter would be cut off",
                digits(power.get::<watt>()),
                digits(controller.output.unwrap_or_default().get::<ampere>()),
                digits(wanted.bank.nominal.get::<volt>())
            );
            break;
        }
        steps.push(Step {
            what: "modules, in whole strings".to_string(),
            value: f64::from(count),
            unit: "",
            citation: None,
        });
        let price = match (part.price, controller.price) {
            (Some(each), Some(one)) => Some(each * f64::from(count) + one),
            _ => None,
        };
        let reached = reached(wanted, module, controller, trial.layout, worst_month)?;
        return Ok(Choice {
            module: part.clone(),
            controller: controller.clone(),
            layout: trial.layout,
            preference,
            steps,
            worst_month,
            reached,
            price,
        });
    }
    Err(why)
}

/// Months of demand as charge and as energy.
fn months<D: Copy>(wanted: &Wanted<'_>, of: impl Fn(&DayDemand) -> D) -> [NeedMonth<D>; 12] {
    let mut index = 0;
    [(); 12].map(|()| {
        let demand = wanted.months.get(index).map(&of);
        let sun_hours = wanted.sun.get(index).copied().unwrap_or_default();
        index += 1;
        NeedMonth { demand: demand.unwrap_or_else(|| of(&DayDemand::NONE)), sun_hours }
    })
}

fn clamped(
    wanted: &Wanted<'_>,
    part: &ModulePart,
    module: &Module,
    controller: &ControllerPart,
    (to_load, margin): (Ratio, f64),
    citation: Option<Citation>,
) -> Result<(Vec<Step>, u16, usize), String> {
    let words = |error: Error| error.to_string();
    let hot = ask(wanted.site, module, controller, wanted.bank, (StringDevice::ToChoose, &[]), |q| {
        string_voltages(q, 1)
    })
    .map_err(words)?;
    let hot = hot.hot_vmp.ok_or("its voltage in the heat is not known: no coefficient is stated")?;
    let [charge, _] = wanted.stored;
    let need = ArrayNeed {
        months: months(wanted, |day| day.charge(wanted.bank.nominal)),
        array_to_load: to_load * (1.0 + margin),
        losses: wanted.losses,
        charge_efficiency: Ratio::new::<ratio>(charge.value),
        imp: part.imp,
        module_hot_voltage: hot,
        string_voltage: wanted.bank.charged_cold.unwrap_or(wanted.bank.highest)
            + controller.start_margin.unwrap_or_default(),
    };
    let found = array_need(&need).map_err(words)?;
    let step =
        |what: &str, value: f64, unit, citation| Step { what: what.to_string(), value, unit, citation };
    let mut steps = alloc::vec![
        step(
            "demand of a mean day in the worst month",
            found.demand.get::<uom::si::electric_charge::ampere_hour>(),
            "Ah",
            None
        ),
        step("sun-hours of a day there", found.sun_hours.get::<hour>(), "h", None),
        step("array-to-load ratio", to_load.get::<ratio>(), "", citation),
        step("lost to dirt, mismatch, wiring and shade", wanted.losses.get::<ratio>(), "", Some(PRACTICE)),
        step("part of the charge that the bank gives back", charge.value, "", Some(charge.citation)),
        step(
            "charge that the array must give in a day",
            found.array_charge.get::<uom::si::electric_charge::ampere_hour>(),
            "Ah",
            None
        ),
        step(
            "charge of one string in a day",
            found.string_charge.get::<uom::si::electric_charge::ampere_hour>(),
            "Ah",
            None
        ),
        step("strings, before rounding up", found.strings_exact, "", None),
        step("modules in series, before rounding up", found.in_series_exact, "", None),
    ];
    add_margin(&mut steps, margin);
    let modules = u16::try_from(found.modules)
        .map_err(|_| "it would take more modules than can be counted".to_string())?;
    Ok((steps, modules, found.worst_month))
}

fn tracked(
    wanted: &Wanted<'_>,
    module: &Module,
    controller: &ControllerPart,
    (to_load, margin): (Ratio, f64),
    citation: Option<Citation>,
) -> Result<(Vec<Step>, u16, usize), String> {
    let worst = worst_month(wanted, module);
    let power = module_power(wanted.site, module, worst);
    // Only that month counts: by demand over sun alone another may seem worse, whose cells are cooler.
    let mut months = months(wanted, |day| day.total);
    for (index, month) in months.iter_mut().enumerate() {
        if index != worst {
            month.demand = Energy::default();
        }
    }
    let efficiency = efficiency(controller);
    let [_, energy] = wanted.stored;
    let need = EnergyNeed {
        months,
        array_to_load: to_load * (1.0 + margin),
        losses: wanted.losses,
        controller_efficiency: efficiency,
        charge_efficiency: Ratio::new::<ratio>(energy.value),
        module_power: power,
        in_series: 1,
    };
    let found = energy_need(&need).map_err(|error| error.to_string())?;
    let step =
        |what: &str, value: f64, unit, citation| Step { what: what.to_string(), value, unit, citation };
    let mut steps = alloc::vec![
        step("demand of a mean day in the worst month", found.demand.get::<watt_hour>(), "Wh", None),
        step("sun-hours of a day there", found.sun_hours.get::<hour>(), "h", None),
        step("array-to-load ratio", to_load.get::<ratio>(), "", citation),
        step("lost to dirt, mismatch, wiring and shade", wanted.losses.get::<ratio>(), "", Some(PRACTICE)),
        step("efficiency of the controller", efficiency.get::<ratio>(), "", None),
        step("part of the energy that the bank gives back", energy.value, "", Some(energy.citation)),
        step("energy that the array must give in a day", found.array_energy.get::<watt_hour>(), "Wh", None),
        step("power that gives it in those sun-hours", found.array_power.get::<watt>(), "W", None),
        step("power of a module with the cells of that month", power.get::<watt>(), "W", None),
        step("modules, before rounding up", found.modules_exact, "", None),
    ];
    add_margin(&mut steps, margin);
    let modules = u16::try_from(found.modules)
        .map_err(|_| "it would take more modules than can be counted".to_string())?;
    Ok((steps, modules, found.worst_month))
}

/// The site's margin, behind the ratio that it multiplies.
fn add_margin(steps: &mut Vec<Step>, margin: f64) {
    let place = steps.iter().position(|s| s.what == "array-to-load ratio").map_or(steps.len(), |at| at + 1);
    if margin > 0.0 {
        steps.insert(place, Step { what: "margin".to_string(), value: margin, unit: "", citation: None });
    }
}

/// Month that takes the most modules: demand over sun and over what a module gives with the cells of that month.
fn worst_month(wanted: &Wanted<'_>, module: &Module) -> usize {
    let burden = |month: usize| {
        let demand = wanted.months.get(month).map_or(0.0, |d| d.total.get::<watt_hour>());
        let sun = wanted.sun.get(month).map_or(1.0, Time::get::<hour>).max(1e-9);
        demand / sun / module_power(wanted.site, module, month).get::<watt>().max(1e-9)
    };
    (0..12).fold(0, |worst, month| if burden(month) > burden(worst) { month } else { worst })
}

/// Ratio of what the array brings into the bank to what is taken out, in the worst month.
fn reached(
    wanted: &Wanted<'_>,
    module: &Module,
    controller: &ControllerPart,
    layout: Layout,
    month: usize,
) -> Result<Ratio, String> {
    let demand = wanted.months.get(month).map_or(DayDemand::NONE, |d| *d);
    let [charge, energy_part] = wanted.stored;
    let stored = if controller.kind == Some(ControllerKind::Pwm) { charge } else { energy_part };
    let kept = (1.0 - wanted.losses.get::<ratio>()) * stored.value;
    let counts = (u32::from(layout.in_series), u32::from(layout.in_parallel));
    let energy =
        day_energy(wanted.site, module, controller, counts, wanted.bank.nominal, month).unwrap_or_default();
    if demand.total.value <= 0.0 {
        return Err("there is no demand to charge for".to_string());
    }
    Ok(energy * kept / demand.total)
}
