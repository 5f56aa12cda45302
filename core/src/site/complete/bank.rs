//! Banks: those stated, with what their batteries tell, and those that the loads ask for (R12, R13).

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::{day, hour};

use super::need::needed;
use super::{BankReason, Reasons, problem, stock};
use crate::battery::{
    Chemistry, LoadClass, Unit, autonomy_days, capacity_factor, cell_set_points, cells, cold_fraction, data,
    discharge_limit, disconnect, hour_rate_capacity, layout,
};
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::law::PRACTICAL_CURRENT_A;
use crate::quantity::{
    ChargeRate, ElectricCharge, ElectricCurrent, ElectricPotential, Power, Ratio, ThermodynamicTemperature,
    Time,
};
use crate::site::energy::Demand;
use crate::site::finding::digits;
use crate::site::lines::{Rejected, Step};
use crate::site::model::Document;
use crate::site::parts::{BankPart, StockBattery};
use crate::site::read::Problem;
use crate::site::system::{BankEntry, FeedKind, Site};

/// Nominal voltages that are designed.
const NOMINALS_V: [f64; 3] = [12.0, 24.0, 48.0];
/// Plain batteries are bought in steps, Ah.
const PLAIN_STEP_AH: f64 = 10.0;
/// Most strings in parallel where nothing is stated (R15): three or more take leads to a busbar and devices of their own.
const MOST_STRINGS: u32 = 4;
const COMMON: Citation = Citation::new("common practice, no source", "", Seen::Practice);

/// Least and greatest temperature of a bank's cells: its own, or that of the air.
pub(in crate::site) fn temperatures(
    site: &Site,
    part: &BankPart,
) -> (ThermodynamicTemperature, ThermodynamicTemperature) {
    part.temperature.unwrap_or(site.ambient)
}

/// Days without charge: the document's, else what is recommended for the class of load.
pub(in crate::site) fn autonomy(site: &Site) -> (Time, Citation) {
    let class = if site.place.critical { LoadClass::Critical } else { LoadClass::NonCritical };
    if let Some(stated) = site.place.autonomy {
        return (stated, Citation::new("the site file", "autonomy", Seen::Stated));
    }
    let held = autonomy_days(class);
    (Time::new::<day>(held.value.0), held.citation)
}

/// Whether its size is to be designed.
pub(super) fn is_open(part: &BankPart) -> bool {
    part.capacity.is_none()
        && part.unit_capacity.is_none()
        && (part.battery.is_none() || part.strings.is_none() && part.units.is_none())
}

/// Whether the size of a bank of the site was designed.
pub(in crate::site) fn was_designed(part: &BankPart) -> bool {
    part.designed
}

/// Nominal voltage: stated, told by its batteries, or the least that suits the loads and keeps the current practical.
fn nominal(
    document: &Document,
    site: &Site,
    part: &BankPart,
    peak: &dyn Fn(ElectricPotential) -> Power,
) -> (ElectricPotential, Option<Step>) {
    let unit = part.unit.or_else(|| stock::battery(document, part).map(|b| b.nominal));
    if let Some(stated) = part.nominal {
        return (stated, None);
    }
    if let (Some(unit), Some(series)) = (unit, part.series) {
        return (unit * f64::from(series), None);
    }
    if let Some(own) = site.inverters.iter().find_map(|i| i.part.nominal.filter(|_| !i.designed)) {
        return (own, None);
    }
    let suits = |volts: f64| {
        site.loads.iter().filter(|l| !l.ac).all(|l| {
            l.least.is_none_or(|v| v.get::<volt>() <= volts)
                && l.greatest.is_none_or(|v| v.get::<volt>() >= volts)
        })
    };
    let fitting: Vec<f64> = NOMINALS_V.iter().copied().filter(|&v| suits(v)).collect();
    let chosen = fitting
        .iter()
        .copied()
        .find(|&v| peak(ElectricPotential::new::<volt>(v)).get::<watt>() / v <= PRACTICAL_CURRENT_A)
        .or_else(|| fitting.last().copied())
        .unwrap_or(12.0);
    let step = Step {
        what: format!(
            "nominal voltage: the least of 12, 24 and 48 V that suits every load's range and keeps all loads together, {} W, \
             within {} A",
            digits(peak(ElectricPotential::new::<volt>(chosen)).get::<watt>()),
            digits(PRACTICAL_CURRENT_A)
        ),
        value: chosen,
        unit: "V",
        citation: Some(COMMON),
    };
    (ElectricPotential::new::<volt>(chosen), Some(step))
}

/// What a bank of a chemistry is before its size is known.
fn entry(
    part: BankPart,
    chemistry: Chemistry,
    nominal: ElectricPotential,
    capacity: ElectricCharge,
    cells: u32,
) -> BankEntry {
    BankEntry {
        name: part.name.clone(),
        line: part.line,
        kind: FeedKind::Battery(chemistry),
        series: part.series.unwrap_or(0),
        cells,
        limit: None,
        charged_cold: None,
        nominal,
        capacity,
        strings: part.strings.unwrap_or(1),
        cut_off: part.cut_off.unwrap_or(nominal * 0.9),
        highest: part.highest.unwrap_or(nominal * 1.25),
        short_circuit: part.short_circuit,
        internal_resistance: part.internal_resistance,
        greatest_discharge: part.greatest_discharge,
        stud: part.stud,
        part: Some(part),
    }
}

/// A bank whose size does not count yet: enough to tell which loads hang on it.
pub(super) fn provisional(
    document: &Document,
    site: &Site,
    stated: &BankPart,
    peak: &dyn Fn(ElectricPotential) -> Power,
) -> (BankEntry, Vec<Step>) {
    let chemistry = chemistry_of(document, stated).unwrap_or(Chemistry::Flooded);
    let (nominal, step) = nominal(document, site, stated, peak);
    let capacity = ElectricCharge::new::<ampere_hour>(1.0);
    (entry(stated.clone(), chemistry, nominal, capacity, 0), step.into_iter().collect())
}

fn chemistry_of(document: &Document, part: &BankPart) -> Option<Chemistry> {
    part.chemistry.or_else(|| stock::battery(document, part).map(|b| b.chemistry))
}

/// A bank as stated, with what its batteries tell.
pub(super) fn stated(
    document: &Document,
    site: &Site,
    stated: &BankPart,
    nominal: ElectricPotential,
) -> Result<BankEntry, Problem> {
    let place = || format!("[[bank]] \"{}\"", stated.name);
    let told = |error: Error| problem(stated.line, place(), error.to_string());
    let battery = stock::battery(document, stated);
    let chemistry = chemistry_of(document, stated).ok_or_else(|| {
        problem(
            stated.line,
            place(),
            "key 'chemistry' is missing; write chemistry = \"flooded\", or name the battery of the stock",
        )
    })?;
    let cells = cells(chemistry, nominal).map_err(told)?;
    let unit = stated.unit.or(battery.map(|b| b.nominal));
    let series = stated.series.or_else(|| {
        let count = libm::round((nominal / unit?).get::<ratio>());
        // A bank has at most a thousand cells in series.
        #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)]
        (1.0..=1000.0).contains(&count).then_some(count as u32)
    });
    let strings = stated.strings.or_else(|| Some(stated.units? / series?.max(1))).unwrap_or(1).max(1);
    let part = match (battery, series) {
        (Some(battery), Some(series)) => stock::bank(stated, battery, series, strings),
        _ => BankPart { series, ..stated.clone() },
    };
    let capacity = part
        .capacity
        .or_else(|| part.unit_capacity.map(|each| each * f64::from(strings)))
        .ok_or_else(|| {
            problem(
                stated.line,
                place(),
                "its capacity is not stated; write capacity = \"400 Ah\", or leave all of it to the design",
            )
        })?;
    let mut bank = entry(BankPart { strings: Some(strings), ..part }, chemistry, nominal, capacity, cells);
    finish(site, &mut bank, None).map_err(told)?;
    Ok(bank)
}

/// Voltages that follow from chemistry, temperature and current where they are not stated.
fn finish(site: &Site, bank: &mut BankEntry, current: Option<ElectricCurrent>) -> Result<(), Error> {
    let (Some(chemistry), Some(part)) = (bank.chemistry(), bank.part.clone()) else { return Ok(()) };
    let (coldest, _) = temperatures(site, &part);
    let whole = f64::from(bank.cells);
    let cell = cell_set_points(chemistry);
    let own: Vec<_> = site
        .controllers
        .iter()
        .filter(|c| c.bank.as_ref().is_none_or(|name| *name == bank.name))
        .map(|c| c.charging)
        .chain(
            site.generators
                .iter()
                .filter(|g| g.bank.as_ref().is_none_or(|name| *name == bank.name))
                .map(|g| g.charging),
        )
        .collect();
    let most = |values: Vec<ElectricPotential>| values.into_iter().reduce(|a, b| if b > a { b } else { a });
    let middle = |(low, high): (f64, f64)| ElectricPotential::new::<volt>(0.5 * (low + high) * whole);
    let absorption =
        most(own.iter().filter_map(|c| c.absorption).collect()).unwrap_or_else(|| middle(cell.absorption_V));
    let stated_any = own.iter().any(|c| c.absorption.is_some());
    let equalise = most(own.iter().filter_map(|c| c.equalise).collect())
        .or_else(|| cell.equalise_V.filter(|_| !stated_any).map(middle));
    let slope = own
        .iter()
        .filter_map(|c| c.compensation)
        .map(|c| c.value)
        .reduce(f64::min)
        .unwrap_or(cell.compensation_V_per_K);
    let (least, greatest) = cell.compensated_degC;
    let cold = coldest.get::<degree_celsius>().max(least).min(greatest);
    let rise = ElectricPotential::new::<volt>(slope * (cold - 25.0) * whole);
    bank.charged_cold = Some(absorption + rise);
    let top = equalise.map_or(absorption, |e| if e > absorption { e } else { absorption }) + rise;
    bank.highest = part.highest.unwrap_or(top);
    let rate = match current {
        Some(amps) if bank.capacity.value > 0.0 => {
            ChargeRate::per_hour(amps.get::<ampere>() / bank.capacity.get::<ampere_hour>()).ok()
        }
        _ => None,
    };
    let slow = ChargeRate::per_hour(0.05)?;
    let dropped = disconnect(chemistry, bank.cells, rate.unwrap_or(slow), coldest).or_else(|_| {
        disconnect(chemistry, bank.cells, slow, ThermodynamicTemperature::new::<degree_celsius>(25.0))
    })?;
    bank.cut_off = part.cut_off.or(part.disconnect).unwrap_or(dropped.disconnect);
    if bank.greatest_discharge.is_none() {
        let limit = discharge_limit(chemistry, ThermodynamicTemperature::new::<degree_celsius>(25.0))?;
        bank.greatest_discharge = limit
            .map(|(rate, _)| ElectricCurrent::new::<ampere>(rate.get() * bank.capacity.get::<ampere_hour>()));
    }
    Ok(())
}

/// What a bank has to do.
pub(in crate::site) struct Duty {
    pub daily: ElectricCharge,
    pub autonomy: Time,
    pub autonomy_by: Citation,
    pub coldest: ThermodynamicTemperature,
    pub current: ElectricCurrent,
    pub depth: Option<Ratio>,
    pub daily_depth: Option<Ratio>,
    /// Part of the capacity left at the coldest, by the maker.
    pub left: Option<Ratio>,
    pub margin: Option<Ratio>,
    /// Least capacity that the sources may charge with all they give.
    pub least: Option<ElectricCharge>,
}

impl Duty {
    /// The duty of a bank of the site.
    pub fn of(
        site: &Site,
        part: &BankPart,
        nominal: ElectricPotential,
        demand: &Demand,
        least: Option<ElectricCharge>,
    ) -> Self {
        let (autonomy, autonomy_by) = autonomy(site);
        Self {
            daily: demand.greatest_day().charge(nominal),
            autonomy,
            autonomy_by,
            coldest: temperatures(site, part).0,
            current: demand.peak / nominal,
            depth: part.depth,
            left: part.cold_capacity,
            daily_depth: part.daily_depth,
            margin: site.place.margin,
            least,
        }
    }
}

impl Duty {
    /// Current of the mean hour of its greatest day: that at which a disconnect has to hold for most of the time.
    fn mean(&self) -> ElectricCurrent {
        self.daily / Time::new::<day>(1.0)
    }
}

/// A battery that was tried.
struct Choice {
    bank: BankEntry,
    steps: Vec<Step>,
    price: Option<f64>,
    what: String,
}

/// Designs a bank: of the stock, else of plain batteries of any capacity.
pub(super) fn design(
    document: &Document,
    site: &Site,
    stated: &BankPart,
    nominal: ElectricPotential,
    duty: &Duty,
    first_steps: Vec<Step>,
    reasons: &mut Reasons,
) -> Result<BankEntry, Problem> {
    let place = || format!("[[bank]] \"{}\"", stated.name);
    let mut rejected = Vec::new();
    let own = stock::battery(document, stated);
    let offers: Vec<&StockBattery> = match own {
        Some(one) => alloc::vec![one],
        None => document
            .stock
            .batteries
            .iter()
            .filter(|b| stated.chemistry.is_none_or(|c| c == b.chemistry))
            .collect(),
    };
    let mut best: Option<Choice> = None;
    if offers.is_empty() && document.stock.batteries.is_empty() {
        let chemistry = stated.chemistry.unwrap_or(Chemistry::Flooded);
        let made = plain(site, stated, chemistry, nominal, duty)
            .map_err(|error| problem(stated.line, place(), error.to_string()))?;
        best = Some(made);
    }
    for battery in offers {
        let what = format!("battery {}", battery.name);
        match of_stock(site, stated, battery, nominal, duty) {
            Ok(choice) => {
                let cheaper = match (&best, choice.price) {
                    (None, _) => true,
                    (Some(best), Some(price)) => best.price.is_some_and(|b| price < b),
                    (Some(_), None) => false,
                };
                let lost = if cheaper { best.replace(choice) } else { Some(choice) };
                if let Some(lost) = lost {
                    let why = lost.price.map_or_else(
                        || "passes; the one taken comes first in the stock".to_string(),
                        |p| format!("passes, {} in all: not the cheapest", digits(p)),
                    );
                    rejected.push(Rejected { what: lost.what, why });
                }
            }
            Err(why) => rejected.push(Rejected { what, why }),
        }
    }
    let Some(choice) = best else {
        let all: Vec<String> = rejected.iter().map(|r| format!("{}: {}", r.what, r.why)).collect();
        let all = if all.is_empty() { "none of its chemistry".to_string() } else { all.join("; ") };
        return Err(problem(stated.line, place(), format!("no battery of the stock serves: {all}")));
    };
    let mut steps = first_steps;
    steps.extend(choice.steps);
    reasons.banks.push(BankReason { name: stated.name.clone(), steps, rejected });
    Ok(choice.bank)
}

/// Plain batteries: as much capacity as is needed, in steps.
fn plain(
    site: &Site,
    stated: &BankPart,
    chemistry: Chemistry,
    nominal: ElectricPotential,
    duty: &Duty,
) -> Result<Choice, Error> {
    let cells = cells(chemistry, nominal)?;
    let (need, _, mut steps) = needed(chemistry, duty)?;
    let rounded = libm::ceil(need.get::<ampere_hour>() / PLAIN_STEP_AH).max(1.0) * PLAIN_STEP_AH;
    steps.push(Step { what: "rounded up".to_string(), value: rounded, unit: "Ah", citation: None });
    let capacity = ElectricCharge::new::<ampere_hour>(rounded);
    let mut bank = entry(
        BankPart {
            designed: true,
            chemistry: Some(chemistry),
            nominal: Some(nominal),
            capacity: Some(capacity),
            ..stated.clone()
        },
        chemistry,
        nominal,
        capacity,
        cells,
    );
    finish(site, &mut bank, Some(duty.mean()))?;
    Ok(Choice { bank, steps, price: None, what: format!("plain {}", chemistry.word()) })
}

fn of_stock(
    site: &Site,
    stated: &BankPart,
    battery: &StockBattery,
    nominal: ElectricPotential,
    duty: &Duty,
) -> Result<Choice, String> {
    let words = |error: Error| error.to_string();
    let chemistry = battery.chemistry;
    charges_in_the_cold(site, stated, battery)?;
    let (mut need, time, mut steps) = needed(chemistry, duty).map_err(words)?;
    if let Some(limit) = battery.greatest_discharge.filter(|limit| limit.value > 0.0) {
        let by_current = battery.capacity * (duty.current / limit).get::<ratio>();
        if by_current > need {
            need = by_current;
            steps.push(Step {
                what: format!(
                    "for the current of all loads, {} A, at {} A a battery",
                    digits(duty.current.get::<ampere>()),
                    digits(limit.get::<ampere>())
                ),
                value: need.get::<ampere_hour>(),
                unit: "Ah",
                citation: None,
            });
        }
    }
    // A shorter draw than that of the rating yields less; a longer one is no credit.
    let each = match (battery.rate, time) {
        (Some(rate), Some(time)) if time < rate => {
            let exponent = Ratio::new::<ratio>(data(chemistry).peukert.value.1);
            let less = hour_rate_capacity(battery.capacity, rate, time, exponent).map_err(words)?;
            steps.push(Step {
                what: format!(
                    "one battery of {} Ah at {} h, drawn in that time",
                    digits(battery.capacity.get::<ampere_hour>()),
                    digits(rate.get::<hour>())
                ),
                value: less.get::<ampere_hour>(),
                unit: "Ah",
                citation: Some(data(chemistry).peukert.citation),
            });
            less
        }
        _ => battery.capacity,
    };
    let unit = Unit {
        chemistry,
        nominal: battery.nominal,
        capacity: each,
        max_series: battery.max_series.or(stated.max_series).unwrap_or(1000),
        max_parallel: battery.max_parallel.or(stated.max_parallel).unwrap_or(MOST_STRINGS),
    };
    let strings = libm::ceil((need / each).get::<ratio>() * (1.0 - 1e-12));
    if strings > f64::from(unit.max_parallel) {
        return Err(format!(
            "it takes {} strings of {} Ah for {} Ah, at most {} {}",
            digits(strings),
            digits(each.get::<ampere_hour>()),
            digits(need.get::<ampere_hour>()),
            unit.max_parallel,
            if battery.max_parallel.or(stated.max_parallel).is_some() {
                "by its maker"
            } else {
                "by common practice"
            }
        ));
    }
    let found = layout(&unit, nominal, need).map_err(words)?;
    steps.push(Step {
        what: "batteries in series".to_string(),
        value: f64::from(found.series),
        unit: "",
        citation: None,
    });
    steps.push(Step {
        what: "strings".to_string(),
        value: f64::from(found.strings),
        unit: "",
        citation: None,
    });
    let part = stock::bank(
        &BankPart {
            designed: true,
            battery: Some(battery.name.clone()),
            nominal: Some(nominal),
            ..stated.clone()
        },
        battery,
        found.series,
        found.strings,
    );
    let capacity = part.capacity.unwrap_or(battery.capacity);
    let mut bank = entry(part, chemistry, nominal, capacity, found.cells);
    finish(site, &mut bank, Some(duty.mean())).map_err(words)?;
    if let Some(limit) = bank.greatest_discharge
        && limit < duty.current
    {
        return Err(format!(
            "{} strings give {} A at most, and all loads together draw {} A",
            found.strings,
            digits(limit.get::<ampere>()),
            digits(duty.current.get::<ampere>())
        ));
    }
    let price = battery.price.map(|each| each * f64::from(found.units()));
    Ok(Choice { bank, steps, price, what: format!("battery {}", battery.name) })
}

/// A battery that cannot be charged at its coldest is not chosen (R13).
fn charges_in_the_cold(site: &Site, stated: &BankPart, battery: &StockBattery) -> Result<(), String> {
    let coldest = temperatures(site, stated).0.get::<degree_celsius>();
    let from = battery.charge_from.or(stated.charge_from).map_or_else(
        || crate::battery::charge_bands(battery.chemistry).first().map_or(-20.0, |band| band.from_degC),
        |t| t.get::<degree_celsius>(),
    );
    if coldest < from {
        return Err(format!(
            "at {} °C it must not be charged; it needs {} °C at least",
            digits(coldest),
            digits(from)
        ));
    }
    if stated.cold_capacity.is_some() {
        return Ok(());
    }
    let factor = match battery.chemistry {
        Chemistry::Lfp | Chemistry::Nmc => {
            cold_fraction(battery.chemistry, temperatures(site, stated).0).map(|_| ())
        }
        _ => capacity_factor(battery.chemistry, temperatures(site, stated).0).map(|_| ()),
    };
    factor.map_err(|error| error.to_string())
}
