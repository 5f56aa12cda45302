//! Loads and inverters: standing loads, times, what inverters are asked for, starts, inrush (R14, R16).

use alloc::format;

use uom::si::energy::watt_hour;
use uom::si::power::watt;

use super::At;
use crate::cable::least_linear_resistance;
use crate::converter::{Inverter, InverterVerdict, Suffices, Surge};
use crate::load::HIGH_STANDING_SHARE;
use crate::quantity::{ElectricPotential, ElectricalResistance, Time};
use crate::site::complete::inverter::demand;
use crate::site::energy::{Demand, ac_loads, inverter_of};
use crate::site::finding::{Findings, digits};
use crate::site::plan::{Plan, sources};
use crate::site::system::{InverterEntry, Site};

/// Peak of a closing inverter over its device's rating from which a contact suffers. Common practice, no source.
const INRUSH_OVER_RATING: f64 = 10.0;

/// Standing loads, times, and loads wired before the disconnect.
pub(super) fn loads(site: &Site, demands: &[Demand], found: &mut Findings) {
    for demand in demands {
        let Some(bank) = demand.banks.first().and_then(|&b| site.banks.get(b)) else { continue };
        let mut at = At::new(found, format!("bank \"{}\"", bank.name), bank.line);
        if demand.lists_standing {
            at.pass("R16", "standing loads are part of the list");
        } else {
            at.unmade(
                ("R16", "standing-loads-not-stated"),
                "what flows day and night: no load is marked standing = true and no controller or inverter states idle",
            );
        }
        let day = demand.greatest_day();
        let share = day.standing.get::<watt_hour>() / day.total.get::<watt_hour>().max(1e-9);
        if share > HIGH_STANDING_SHARE {
            at.advice(
                ("R16", "standing-share-high"),
                format!(
                    "standing loads take {} of {} Wh a day, {:.0} %; more than {:.0} % is worth a search",
                    digits(day.standing.get::<watt_hour>()),
                    digits(day.total.get::<watt_hour>()),
                    100.0 * share,
                    100.0 * HIGH_STANDING_SHARE
                ),
                "switch off what need not wait, or take parts that draw less idle",
            );
        }
        for name in &demand.idle_unknown {
            let line = site.inverters.iter().find(|i| i.name == *name).map_or(0, |i| i.line);
            At::new(found, format!("inverter \"{name}\""), line).unmade(
                ("R16", "inverter-idle-not-stated"),
                "what it draws without a load is counted as nothing; state idle",
            );
        }
        for name in &demand.untimed {
            let line = site.loads.iter().find(|l| l.name == *name).map_or(0, |l| l.line);
            At::new(found, format!("load \"{name}\""), line).unmade(
                ("R16", "load-time-not-stated"),
                "its hours a day are not stated: counted day and night; state hours, at or standing",
            );
        }
    }
    for load in site.loads.iter().filter(|l| l.past_disconnect) {
        At::new(found, format!("load \"{}\"", load.name), load.line).nonconforming(
            ("R14", "load-past-disconnect"),
            "it is wired before the bank's disconnect: nothing keeps it from emptying the bank".into(),
            "feed it behind the disconnect, or state a disconnect of its own",
        );
    }
}

/// Every inverter against its loads.
pub(super) fn inverters(site: &Site, plan: &Plan, found: &mut Findings) {
    for (index, entry) in site.inverters.iter().enumerate() {
        let mut at = At::new(found, format!("inverter \"{}\"", entry.name), entry.line);
        if site.loads.iter().any(|l| l.ac) && ac_loads(site, index).next().is_none() {
            at.advice(
                ("R16", "inverter-without-load"),
                "no AC load is stated for it: its whole power loads the feed, and its idle the bank".into(),
                "state its loads with ac = true, or take it out",
            );
        }
        let circuit = site.circuits.iter().position(|c| c.to == entry.name);
        let planned = circuit.and_then(|c| plan.circuits.get(c)).and_then(|p| p.as_ref());
        let lowest = planned.map_or_else(ElectricPotential::default, |p| p.judgement.end_voltage);
        let asked = demand(site, lowest, ac_loads(site, index));
        let inverter = inverter_of(entry, lowest).map(|plain| with_surge(entry, plain));
        if let (Ok(inverter), Ok(asked)) = (inverter, asked)
            && asked.power.value > 0.0
            && let Ok(verdict) = inverter.judge(&asked)
        {
            if entry.surge.is_some() && entry.part.surge_time.is_none() && asked.starting > entry.power {
                at.unmade(
                    ("R16", "inverter-start-not-checked"),
                    "for how long it bears its surge, against the largest start; state surge_time",
                );
            }
            judged(&mut at, &verdict);
        }
        inrush(site, entry, circuit, plan, &mut at);
    }
}

fn with_surge(entry: &InverterEntry, plain: Inverter) -> Inverter {
    // Without a stated time the power alone is compared; that the time is missing is told beside it.
    let duration = entry.part.surge_time.unwrap_or_else(|| Time::new::<uom::si::time::hour>(1.0));
    Inverter { surge: entry.surge.map(|power| Surge { power, duration }), ..plain }
}

fn judged(at: &mut At<'_>, verdict: &InverterVerdict) {
    let mut one = |what: &str,
                   slug: (&'static str, &'static str),
                   suffices: Suffices,
                   remedy: &'static str| match suffices {
        Suffices::Yes { given, asked } => at.pass(
            "R16",
            &format!(
                "{what}: {} VA, at least {} VA",
                digits(given.get::<watt>()),
                digits(asked.get::<watt>())
            ),
        ),
        Suffices::No { given, asked } => at.nonconforming(
            slug,
            format!(
                "{what}: {} VA, at least {} VA",
                digits(given.get::<watt>()),
                digits(asked.get::<watt>())
            ),
            remedy,
        ),
        Suffices::TooShort { given, asked } => at.nonconforming(
            slug,
            format!("{what}: for {} s, the start lasts {} s", digits(given.value), digits(asked.value)),
            remedy,
        ),
        Suffices::NotChecked { missing } => {
            let key = if missing == "surge rating" { "surge" } else { "start_time of its loads" };
            at.unmade(("R16", "inverter-start-not-checked"), &format!("{what}: {missing}; state {key}"));
        }
    };
    one(
        "continuous power against its loads",
        ("R16", "inverter-overloaded"),
        if verdict.power.passes() { verdict.apparent } else { verdict.power },
        "use a larger inverter, or fewer loads at a time",
    );
    one(
        "power while the largest load starts",
        ("R16", "inverter-start-too-large"),
        verdict.start,
        "use an inverter with more surge, or a soft start",
    );
}

/// What flows into its empty capacitors when its switch closes.
fn inrush(site: &Site, entry: &InverterEntry, circuit: Option<usize>, plan: &Plan, at: &mut At<'_>) {
    if entry.part.precharge == Some(true) {
        at.pass("R16", "its input is charged through a resistor before the switch closes");
        return;
    }
    let Some(planned) = circuit.and_then(|c| plan.circuits.get(c)).and_then(|p| p.as_ref()) else { return };
    let Some(capacitance) = entry.part.capacitance else {
        at.unmade(
            ("R16", "inrush-not-checked"),
            "inrush into its input when the switch closes; state capacitance, or precharge = true",
        );
        return;
    };
    // The bank's own resistance, where it is known, and the loop up to the inverter.
    let behind = sources(site)
        .iter()
        .filter_map(|s| s.strongest)
        .map(|s| s.resistance)
        .fold(None, |least: Option<ElectricalResistance>, r| {
            Some(least.map_or(r, |l| if r < l { r } else { l }))
        });
    let highest = planned.run.highest;
    // The greatest: what may flow at its circuit's beginning, through cold metal without joints (R6).
    let upstream = planned
        .run
        .greatest_fault
        .filter(|amps| amps.value > 0.0)
        .map_or_else(|| planned.run.resistance_before + behind.unwrap_or_default(), |amps| highest / amps);
    let cold = |conductor, length| {
        least_linear_resistance(conductor, site.ambient.0).map_or_else(
            |_| ElectricalResistance::default(),
            |(r, _)| {
                let run: ElectricalResistance = r * length;
                run
            },
        )
    };
    let own = cold(&planned.positive, planned.run.positive_length)
        + cold(&planned.negative, planned.run.negative_length);
    let peak = highest / (upstream + own);
    let amps = peak.get::<uom::si::electric_current::ampere>();
    let rating =
        planned.fitted.first().map(|f| f.guard.device.rating.get::<uom::si::electric_current::ampere>());
    let joules = 0.5 * capacitance.value * highest.value * highest.value;
    let text = format!(
        "at {} V up to {} A flow into {} µF when the switch closes, {} J",
        digits(highest.get::<uom::si::electric_potential::volt>()),
        digits(crate::circuit::upper_bound(amps)),
        digits(capacitance.value * 1e6),
        digits(joules)
    );
    if rating.is_some_and(|r| amps > INRUSH_OVER_RATING * r) {
        at.advice(
            ("R16", "inverter-inrush"),
            format!("{text}: contacts weld, and its device ages"),
            "charge the input through a resistor first, and state precharge = true",
        );
    } else {
        at.pass("R16", &text);
    }
}
