//! What the loads take out of each bank on a day, month by month (R12, R16): every factor once, and named.

use alloc::string::String;
use alloc::vec::Vec;

use uom::si::energy::watt_hour;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::hour;

use super::graph::{Graph, Item, Tree};
use super::model::{LoadEntry, LoadKind};
use super::system::{FeedKind, InverterEntry, Site};
use crate::converter::Inverter;
use crate::error::Error;
use crate::load::{Conditions, Day, Draw, Duty, Load, Months, Schedule, Start, Terminals, Window};
use crate::quantity::{
    ElectricCharge, ElectricPotential, Energy, Power, Ratio, ThermodynamicTemperature, Time,
};

/// Energy lost in the wiring where nothing is stated. Common practice, no source.
pub(super) const WIRING_LOSS: f64 = 0.03;
/// Ambient at which a load's plain `duty` holds, °C. Common practice, no source.
const MILD_DEGC: f64 = 20.0;

/// What one day of a month takes out of a bank.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DayDemand {
    /// Loads on direct current, at their terminals.
    pub dc: Energy,
    /// Loads behind inverters, at their terminals.
    pub ac: Energy,
    /// What the inverters draw for them, idle included.
    pub inverters: Energy,
    /// What controllers draw idle.
    pub controllers: Energy,
    /// What converters lose and draw idle.
    pub converters: Energy,
    /// What the wiring loses.
    pub wiring: Energy,
    /// All of it, at the bank's terminals.
    pub total: Energy,
    /// Part of it that flows whether or not anybody uses the place.
    pub standing: Energy,
}

impl DayDemand {
    pub(super) const NONE: Self = {
        const NOUGHT: Energy =
            Energy { dimension: core::marker::PhantomData, units: core::marker::PhantomData, value: 0.0 };
        Self {
            dc: NOUGHT,
            ac: NOUGHT,
            inverters: NOUGHT,
            controllers: NOUGHT,
            converters: NOUGHT,
            wiring: NOUGHT,
            total: NOUGHT,
            standing: NOUGHT,
        }
    };

    /// Charge that it takes at a bank's nominal voltage.
    pub fn charge(&self, nominal: ElectricPotential) -> ElectricCharge {
        self.total / nominal
    }
}

/// Demand on one bank, and on those joined to it.
#[derive(Clone, Debug)]
pub(super) struct Demand {
    /// The banks, by place; the first stands for all.
    pub banks: Vec<usize>,
    /// The mean day of each month: what must be brought back.
    pub mean: [DayDemand; 12],
    /// A day on which every load runs: what the bank must bear.
    pub full: [DayDemand; 12],
    /// Loads of which the time is not stated: they count day and night.
    pub untimed: Vec<String>,
    /// Inverters of which the idle power is not stated: it counts as nothing.
    pub idle_unknown: Vec<String>,
    /// Whether any load is marked as standing, or a controller's or inverter's idle power is stated.
    pub lists_standing: bool,
    /// Power of all loads that may coincide, at the bank: an upper bound.
    pub peak: Power,
}

impl Demand {
    /// What further controllers draw day and night, where they are not joined yet.
    pub fn add_idle(&mut self, idle: Power, site: &Site) {
        if idle.value <= 0.0 {
            return;
        }
        let losses = site.place.losses.map_or(WIRING_LOSS, |l| l.get::<ratio>());
        let energy = idle * Time::new::<hour>(24.0);
        for day in self.mean.iter_mut().chain(self.full.iter_mut()) {
            let lost = energy / (1.0 - losses) - energy;
            day.controllers += energy;
            day.standing += energy;
            day.wiring += lost;
            day.total += energy + lost;
        }
        self.lists_standing = true;
    }

    /// What a load says of its time.
    fn note(&mut self, load: &LoadEntry) {
        self.lists_standing |= load.standing;
        if !is_timed(load) {
            self.untimed.push(load.name.clone());
        }
    }

    /// The greatest full day.
    pub fn greatest_day(&self) -> DayDemand {
        self.full.iter().copied().fold(DayDemand::NONE, |a, b| if b.total > a.total { b } else { a })
    }
}

/// Air around the loads in each month: the month's mean, or the site's greatest where no month is stated.
fn ambients(site: &Site) -> [ThermodynamicTemperature; 12] {
    site.weather.as_ref().and_then(|w| w.temperature).unwrap_or([site.ambient.1; 12])
}

/// A load of the document as the load floor knows it. `None` where its times contradict.
pub(super) fn load_of(site: &Site, entry: &LoadEntry, nominal: ElectricPotential) -> Result<Load, Error> {
    let power = entry.power.unwrap_or_default();
    let draw = match (entry.kind, entry.current) {
        (LoadKind::Current, Some(current)) => Draw::Current(current),
        (LoadKind::Current, None) => Draw::Current(power / nominal),
        (LoadKind::Resistive, current) => {
            Draw::Resistive { power: current.map_or(power, |a| a * nominal), at: nominal }
        }
        (LoadKind::Power, current) => Draw::Power(current.map_or(power, |a| a * nominal)),
    };
    let windows =
        entry.use_of.at.iter().map(|&(from, to)| Window::minutes(from, to)).collect::<Result<Vec<_>, _>>()?;
    let mut schedule = match (windows.is_empty(), entry.use_of.hours) {
        (true, None) => Schedule::CONTINUOUS,
        (true, Some(hours)) => Schedule::hours(hours)?,
        (false, None) => Schedule::windows(&windows)?,
        (false, Some(hours)) => Schedule::within(&windows, hours)?,
    };
    if let Some(days) = entry.use_of.days_per_week.and_then(|d| u8::try_from(d).ok()) {
        schedule = schedule.on_days(days)?;
    }
    if let Some(months) = entry.use_of.months {
        let listed: Vec<u8> = (1..=12_u8).filter(|month| months >> (month - 1) & 1 == 1).collect();
        schedule = schedule.in_months(Months::of(&listed)?);
    }
    let duty = match (entry.use_of.duty, entry.use_of.duty_hot) {
        (None, _) => Duty::full(),
        (Some(duty), None) => Duty::constant(duty)?,
        (Some(duty), Some(hot)) => {
            let mild = ThermodynamicTemperature::new::<degree_celsius>(MILD_DEGC);
            if site.ambient.1 > mild {
                Duty::between(mild, duty, site.ambient.1, hot)?
            } else {
                Duty::constant(hot)?
            }
        }
    };
    let terminals = if entry.ac {
        Terminals::Ac { power_factor: entry.power_factor.unwrap_or_else(|| Ratio::new::<ratio>(1.0)) }
    } else {
        Terminals::Dc
    };
    let start = entry
        .start_power
        .filter(|start| entry.ac && *start > power && power.value > 0.0)
        .map(|start| Start::one_by_one(start / power, entry.start_time))
        .transpose()?;
    Ok(Load {
        draw,
        count: entry.count,
        terminals,
        schedule,
        duty,
        start,
        priority: entry.priority.and_then(|p| u8::try_from(p).ok()).unwrap_or(0),
        standing: entry.standing,
    })
}

/// Whether the document tells when a load runs.
pub(super) fn is_timed(entry: &LoadEntry) -> bool {
    entry.standing || entry.use_of.hours.is_some() || !entry.use_of.at.is_empty()
}

/// AC loads of an inverter: those that name it, and with the first inverter those that name none.
pub(super) fn ac_loads(site: &Site, inverter: usize) -> impl Iterator<Item = &LoadEntry> {
    let name = site.inverters.get(inverter).map(|i| i.name.as_str());
    site.loads.iter().filter(move |load| {
        load.ac && load.inverter.as_deref().map_or(inverter == 0, |wanted| Some(wanted) == name)
    })
}

/// An inverter of the document as the converter floor knows it.
pub(super) fn inverter_of(entry: &InverterEntry, lowest: ElectricPotential) -> Result<Inverter, Error> {
    Inverter::plain(
        entry.power,
        entry.efficiency,
        entry.idle.unwrap_or_default(),
        entry.least.unwrap_or(lowest),
    )
}

/// Adds up one kind of day.
struct Sum<'a> {
    site: &'a Site,
    trees: &'a [Tree],
    nominal: ElectricPotential,
    month: u8,
    ambient: ThermodynamicTemperature,
    day: Day,
}

impl Sum<'_> {
    fn energy(&self, entry: &LoadEntry) -> Result<Energy, Error> {
        let at =
            Conditions { month: self.month, ambient: self.ambient, voltage: self.nominal, day: self.day };
        load_of(self.site, entry, self.nominal)?.daily_energy(&at)
    }

    /// Everything below a root; `deep` guards against converters that feed each other.
    fn tree(&self, tree: &Tree, deep: u32) -> Result<DayDemand, Error> {
        let day = Time::new::<hour>(24.0);
        let mut sum = DayDemand::NONE;
        for node in &tree.nodes {
            match node.item {
                Item::Load(i) => {
                    let Some(entry) = self.site.loads.get(i) else { continue };
                    let energy = self.energy(entry)?;
                    sum.dc += energy;
                    if entry.standing {
                        sum.standing += energy;
                    }
                }
                Item::Inverter(i) => {
                    let Some(entry) = self.site.inverters.get(i) else { continue };
                    let mut ac = Energy::default();
                    for load in ac_loads(self.site, i) {
                        let energy = self.energy(load)?;
                        ac += energy;
                        if load.standing {
                            sum.standing += energy;
                        }
                    }
                    // In months in which none of its loads may run it is off; told among the assumptions.
                    if ac.value <= 0.0 && ac_loads(self.site, i).next().is_some() {
                        continue;
                    }
                    sum.ac += ac;
                    sum.inverters += inverter_of(entry, self.nominal)?.daily_energy(ac, day)?;
                    sum.standing += entry.idle.unwrap_or_default() * day;
                }
                Item::ConverterInput(i) if deep > 0 => {
                    let Some(entry) = self.site.converters.get(i) else { continue };
                    let below = fed_by(self.site, self.trees, i);
                    let inner = match below {
                        Some(tree) => Sum { nominal: entry.output, ..*self }.tree(tree, deep - 1)?,
                        None => DayDemand::NONE,
                    };
                    let idle = entry.idle.unwrap_or_default() * day;
                    sum.dc += inner.dc;
                    sum.ac += inner.ac;
                    sum.inverters += inner.inverters;
                    sum.standing += inner.standing + idle;
                    let out = inner.dc + inner.inverters + inner.converters;
                    sum.converters += inner.converters + out / entry.efficiency - out + idle;
                }
                Item::Charger(i) => {
                    let charger = self.site.chargers.get(i);
                    let idle = match charger.map(|c| c.kind) {
                        Some(super::system::ChargerKind::Controller(c)) => {
                            self.site.controllers.get(c).and_then(|c| c.idle)
                        }
                        _ => None,
                    };
                    let idle = idle.unwrap_or_default() * day;
                    sum.controllers += idle;
                    sum.standing += idle;
                }
                _ => {}
            }
        }
        Ok(sum)
    }

    fn whole(&self, tree: &Tree) -> Result<DayDemand, Error> {
        let mut sum = self.tree(tree, 4)?;
        let losses = self.site.place.losses.map_or(WIRING_LOSS, |l| l.get::<ratio>());
        let used = sum.dc + sum.inverters + sum.controllers + sum.converters;
        sum.total = used / (1.0 - losses);
        sum.wiring = sum.total - used;
        Ok(sum)
    }
}

/// Demand on every bank, by the network it hangs on.
///
/// # Errors
/// Where the times of a load contradict each other.
pub(super) fn demands(site: &Site) -> Result<Vec<Demand>, Error> {
    let graph = Graph::new(site);
    let trees = graph.trees();
    let ambients = ambients(site);
    let mut demands = Vec::new();
    for tree in &trees {
        let banks: Vec<usize> = tree
            .nodes
            .iter()
            .filter_map(|n| match n.item {
                Item::Bank(i) if site.banks.get(i).is_some_and(super::system::BankEntry::is_battery) => {
                    Some(i)
                }
                _ => None,
            })
            .collect();
        let Some(bank) = banks.first().and_then(|&b| site.banks.get(b)) else { continue };
        let mut demand = Demand {
            banks,
            mean: [DayDemand::NONE; 12],
            full: [DayDemand::NONE; 12],
            untimed: Vec::new(),
            idle_unknown: Vec::new(),
            lists_standing: false,
            peak: Power::default(),
        };
        for (day, list) in [(Day::Mean, &mut demand.mean), (Day::Full, &mut demand.full)] {
            for ((month, cell), &ambient) in (1_u8..).zip(list.iter_mut()).zip(&ambients) {
                let sum = Sum { site, trees: &trees, nominal: bank.nominal, month, ambient, day };
                *cell = sum.whole(tree)?;
            }
        }
        describe(site, &trees, tree, &mut demand, 4);
        demand.lists_standing |= demand.full.iter().any(|d| d.standing.get::<watt_hour>() > 0.0);
        demands.push(demand);
    }
    Ok(demands)
}

/// What is missing, and the most that may be drawn.
fn describe(site: &Site, trees: &[Tree], tree: &Tree, demand: &mut Demand, deep: u32) {
    let root = match tree.nodes.first().map(|n| n.item) {
        Some(Item::Bank(b)) => site.banks.get(b),
        _ => None,
    };
    let nominal = root.map_or_else(ElectricPotential::default, |b| b.nominal);
    let each = |load: &LoadEntry| {
        let power = load.power.or_else(|| load.current.map(|a| a * nominal)).unwrap_or_default();
        power * f64::from(load.count)
    };
    for node in &tree.nodes {
        match node.item {
            Item::Load(i) => {
                let Some(load) = site.loads.get(i) else { continue };
                demand.peak += each(load);
                demand.note(load);
            }
            Item::Inverter(i) => {
                let Some(inverter) = site.inverters.get(i) else { continue };
                let mut ac = Power::default();
                for load in ac_loads(site, i) {
                    ac += each(load);
                    demand.note(load);
                }
                demand.peak += ac / inverter.efficiency;
                if inverter.idle.is_none() {
                    demand.idle_unknown.push(inverter.name.clone());
                }
            }
            Item::ConverterInput(i) if deep > 0 => {
                let (Some(converter), Some(below)) = (site.converters.get(i), fed_by(site, trees, i)) else {
                    continue;
                };
                let before = demand.peak;
                demand.peak = Power::default();
                describe(site, trees, below, demand, deep - 1);
                demand.peak = before + demand.peak / converter.efficiency;
            }
            _ => {}
        }
    }
}

/// The network behind a converter.
fn fed_by<'a>(site: &Site, trees: &'a [Tree], converter: usize) -> Option<&'a Tree> {
    trees.iter().find(|tree| {
        matches!(tree.nodes.first().map(|n| n.item), Some(Item::Bank(b))
            if site.banks.get(b).is_some_and(|f| f.kind == FeedKind::Converter(converter)))
    })
}
