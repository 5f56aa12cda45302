//! Banks: capacity, cold, sharing, ventilation (R12, R13, R15, R20).

use alloc::format;
use alloc::string::String;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::area::square_centimeter;
use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electrical_resistance::{milliohm, ohm};
use uom::si::ratio::ratio;
use uom::si::temperature_interval::kelvin;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::{day, hour};
use uom::si::volume_rate::cubic_meter_per_hour;

use super::At;
use crate::battery::{
    self, ChargeStage, Chemistry, ColdSpell, FREEZING_MARGIN_K, GASSING, Link, StringShare, StringSource,
    capacity_left, charge_limit, cold_spell, data, freezing_floor, hour_rate_capacity, is_within, share,
    ventilation_flow, ventilation_opening,
};
use crate::quantity::{ElectricCurrent, ElectricalResistance, Ratio, StateOfCharge, TemperatureInterval};
use crate::site::complete::bank::{Duty, temperatures, was_designed};
use crate::site::complete::need::needed;
use crate::site::energy::Demand;
use crate::site::finding::{Findings, Severity, digits};
use crate::site::parts::{BankPart, Room, TakeOff};
use crate::site::plan::Plan;
use crate::site::system::{BankEntry, Site};

/// A string that carries so much more than its share wears first; beyond the second it is overloaded. Common practice,
/// no source.
const UNEQUAL: (f64, f64) = (1.1, 1.25);
/// Generic resistance of a lug at either end of a link, Ω. Common practice, no source.
const JOINT_OHM: f64 = 0.1e-3;

/// Every bank.
pub(super) fn banks(site: &Site, plan: &Plan, demands: &[Demand], found: &mut Findings) {
    for (index, bank) in site.banks.iter().enumerate() {
        let (Some(chemistry), Some(part)) = (bank.chemistry(), bank.part.as_ref()) else { continue };
        let demand = demands.iter().find(|d| d.banks.contains(&index));
        let mut at = At::new(found, format!("bank \"{}\"", bank.name), bank.line);
        if let Some(demand) = demand {
            capacity(site, bank, chemistry, part, demand, &mut at);
        }
        let is_charged = site.chargers.iter().any(|c| c.bank == Some(index));
        cold(site, bank, (chemistry, is_charged), part, demand, &mut at);
        super::disconnect::disconnects(site, bank, chemistry, part, demand, &mut at);
        limits(bank, part, &mut at);
        ventilation(bank, chemistry, part, &mut at);
        let carried = carried(site, plan, &bank.name);
        sharing(bank, part, carried, &mut at);
    }
}

/// Greatest current through a bank: what is drawn from it, or what its sources drive into it.
pub(in crate::site) fn carried(site: &Site, plan: &Plan, name: &str) -> ElectricCurrent {
    let charge: ElectricCurrent = site
        .circuits
        .iter()
        .zip(&plan.circuits)
        .filter(|(c, _)| c.from == name || c.to == name)
        .filter_map(|(_, p)| p.as_ref())
        .filter(|p| p.flow.charged)
        .map(|p| p.judgement.current)
        .sum();
    let drawn = drawn(site, plan, name);
    if charge > drawn { charge } else { drawn }
}

/// Greatest current out of a bank.
pub(in crate::site) fn drawn(site: &Site, plan: &Plan, name: &str) -> ElectricCurrent {
    site.circuits
        .iter()
        .zip(&plan.circuits)
        .filter(|(c, _)| c.from == name || c.to == name)
        .filter_map(|(_, p)| p.as_ref())
        .map(|p| {
            // What its sources drive into it is charge, not discharge.
            let amps = ElectricCurrent::new::<ampere>(p.flow.low_current.unwrap_or(0.0));
            if p.flow.charged { amps } else { p.judgement.current }
        })
        .sum()
}

/// Capacity against what the loads ask for (R12).
fn capacity(
    site: &Site,
    bank: &BankEntry,
    chemistry: Chemistry,
    part: &BankPart,
    demand: &Demand,
    at: &mut At<'_>,
) {
    if demand.banks.len() > 1 {
        at.unmade(
            ("R12", "capacity-not-checked"),
            "capacity: several banks are joined, and how they share the demand is not known",
        );
        return;
    }
    let duty = Duty::of(site, part, bank.nominal, demand, None);
    if duty.daily.value <= 0.0 {
        return;
    }
    let mut rated = String::new();
    let held = needed(chemistry, &duty).map(|(need, time, _)| {
        // A shorter draw than that of the rating yields less; a longer one is no credit.
        let less = part.rate.zip(time).filter(|(rate, time)| time < rate).and_then(|(rate, time)| {
            let exponent = Ratio::new::<ratio>(data(chemistry).peukert.value.1);
            let less = hour_rate_capacity(bank.capacity, rate, time, exponent).ok()?;
            rated = format!(
                " in {} h, {} Ah by its rating at {} h",
                digits(time.get::<hour>()),
                digits(bank.capacity.get::<ampere_hour>()),
                digits(rate.get::<hour>())
            );
            Some(less)
        });
        (need, less.unwrap_or(bank.capacity))
    });
    match held {
        Ok((need, holds)) if holds < need * (1.0 - 1e-9) => at.nonconforming(
            ("R12", "bank-too-small"),
            format!(
                "{} Ah{rated}, at least {} Ah for {} Ah a day over {} d",
                digits(holds.get::<ampere_hour>()),
                digits(need.get::<ampere_hour>()),
                digits(duty.daily.get::<ampere_hour>()),
                digits(duty.autonomy.get::<day>())
            ),
            "use a larger bank, less load, or state a shorter autonomy",
        ),
        Ok((need, holds)) => at.pass(
            "R12",
            &format!(
                "{} Ah{rated}, at least {} Ah for {} Ah a day over {} d ({})",
                digits(holds.get::<ampere_hour>()),
                digits(need.get::<ampere_hour>()),
                digits(duty.daily.get::<ampere_hour>()),
                digits(duty.autonomy.get::<day>()),
                duty.autonomy_by
            ),
        ),
        Err(error) => at.unmade(("R12", "capacity-not-checked"), &format!("capacity: {error}")),
    }
}

/// Freezing, charge blocked by cold, temperatures of discharge and storage (R13).
fn cold(
    site: &Site,
    bank: &BankEntry,
    (chemistry, is_charged): (Chemistry, bool),
    part: &BankPart,
    demand: Option<&Demand>,
    at: &mut At<'_>,
) {
    let (coldest, warmest) = temperatures(site, part);
    let celsius = coldest.get::<degree_celsius>();
    let held = data(chemistry);
    for (temperature, word) in [(coldest, "coldest"), (warmest, "warmest")] {
        if is_within(held.discharge_degC, temperature) == Ok(false) {
            at.tell(
                Severity::Nonconforming,
                ("R13", "temperature-beyond-discharge"),
                format!(
                    "{} °C at its {word}; it gives current between {} and {} °C",
                    digits(temperature.get::<degree_celsius>()),
                    digits(held.discharge_degC.value.0),
                    digits(held.discharge_degC.value.1)
                ),
                Some(held.discharge_degC.citation),
                "keep the bank milder",
            );
        }
    }
    let margin = TemperatureInterval::new::<kelvin>(FREEZING_MARGIN_K);
    let depth = part.depth.map_or(held.usual_depth.value, |d| d.get::<ratio>());
    match freezing_floor(chemistry, coldest, margin) {
        Ok(None) => {}
        Ok(Some(floor)) if floor.get() > 1.0 - depth => at.nonconforming(
            ("R13", "electrolyte-may-freeze"),
            format!(
                "at {} °C it must stay above {:.0} % of charge, and is discharged to {:.0} %",
                digits(celsius),
                100.0 * floor.get(),
                100.0 * (1.0 - depth)
            ),
            "disconnect earlier, keep the bank warmer, or make it larger",
        ),
        Ok(Some(floor)) => at.pass(
            "R13",
            &format!(
                "at {} °C it must stay above {:.0} % of charge, and does",
                digits(celsius),
                100.0 * floor.get()
            ),
        ),
        Err(error) => {
            at.danger(("R13", "electrolyte-may-freeze"), format!("{error}"), "keep the bank warmer");
        }
    }
    let from = part.charge_from.map(|t| t.get::<degree_celsius>());
    let admitted = match (from, charge_limit(chemistry, coldest)) {
        (Some(from), _) => celsius >= from,
        (None, Ok(limit)) => limit.ceiling.get() > 0.0,
        (None, Err(_)) => false,
    };
    if admitted {
        at.pass("R13", &format!("takes charge at {} °C, its coldest", digits(celsius)));
        return;
    }
    let daily = demand.map(|d| d.greatest_day().charge(bank.nominal)).filter(|q| q.value > 0.0);
    let left = part.cold_capacity.or_else(|| capacity_left(chemistry, coldest).ok().map(|left| left.value));
    let lasts = daily.and_then(|daily_demand| {
        cold_spell(&ColdSpell {
            chemistry,
            capacity: bank.capacity,
            start: StateOfCharge::new(1.0).ok()?,
            temperature: coldest,
            cold_fraction: left?,
            daily_demand,
            margin,
        })
        .ok()
    });
    let text = format!(
        "at {} °C, its coldest, it must not be charged{}",
        digits(celsius),
        lasts.map_or_else(String::new, |o| format!(
            ": the loads empty it in {} d",
            digits(o.until_disconnect.get::<day>())
        ))
    );
    if from.is_none() && is_charged {
        at.danger(
            ("R13", "charge-not-blocked-in-cold"),
            format!("{text}; nothing is known to block its sources"),
            "fit what blocks charge in the cold and state charge_from, keep the bank warmer, or use another chemistry",
        );
    } else {
        at.nonconforming(
            ("R13", "charge-blocked-by-cold"),
            text,
            "keep the bank warmer, or use one that is charged in frost",
        );
    }
}

/// What its maker admits in series and in parallel, and batteries that are not alike (R15).
fn limits(bank: &BankEntry, part: &BankPart, at: &mut At<'_>) {
    if let Some(most) = part.max_parallel.filter(|&most| bank.strings > most) {
        at.nonconforming(
            ("R15", "too-many-strings"),
            format!("{} strings in parallel, at most {most} by its maker", bank.strings),
            "use batteries of greater capacity",
        );
    }
    if part.max_series.is_some() && bank.series == 0 {
        at.unmade(
            ("R15", "series-not-checked"),
            "packs in series against what their maker admits; state series or unit",
        );
    }
    if let Some(most) = part.max_series.filter(|&most| bank.series > most) {
        at.danger(
            ("R15", "too-many-in-series"),
            format!("{} packs in series, at most {most} by their maker", bank.series),
            "use packs for the voltage of the bank",
        );
    }
    if part.mixed {
        at.advice(
            ("R15", "mixed-batteries"),
            "batteries of different age or type: the weakest is overcharged and emptied first".into(),
            "renew them together",
        );
    }
}

/// Air and place (R20).
fn ventilation(bank: &BankEntry, chemistry: Chemistry, part: &BankPart, at: &mut At<'_>) {
    let cells = Ratio::new::<ratio>(f64::from(bank.cells));
    let Ok(flow) = ventilation_flow(chemistry, ChargeStage::Boost, cells, bank.capacity) else {
        at.pass("R20", "gives off no hydrogen in ordinary use");
        return;
    };
    let vented = data(chemistry).vented.value;
    match part.space {
        Some(Room::Living) if vented => at.tell(
            Severity::Danger,
            ("R20", "bank-in-living-space"),
            format!("{} cells gas where people live or sleep", chemistry.word()),
            Some(GASSING),
            "put it in a ventilated room or box of its own",
        ),
        Some(Room::Engine) if vented => at.danger(
            ("R20", "bank-in-engine-space"),
            format!("{} cells gas beside what can ignite it", chemistry.word()),
            "put it in a ventilated box away from engine and fuel",
        ),
        Some(Room::Engine) => at.advice(
            ("R20", "bank-in-engine-space"),
            format!("{} cells age fast in the heat, and gas when they are overcharged", chemistry.word()),
            "put it in a cooler place, and let its charger measure its temperature",
        ),
        Some(Room::Outdoors) => {
            at.pass("R20", "stands outdoors");
            return;
        }
        None if vented && !part.designed => at.unmade(
            ("R20", "bank-space-not-stated"),
            "whether people live or sleep, or an engine stands, where its cells gas; state space",
        ),
        _ => {}
    }
    let hours = flow.get::<cubic_meter_per_hour>();
    let opening = ventilation_opening(flow).map_or(f64::NAN, |a| a.get::<square_centimeter>());
    let words = format!("{} m³/h of air, or two openings of {} cm² each", digits(hours), digits(opening));
    match (
        part.air.map(|a| a.get::<cubic_meter_per_hour>()),
        part.opening.map(|a| a.get::<square_centimeter>()),
    ) {
        (Some(air), _) if air >= hours * (1.0 - 1e-9) => {
            at.pass("R20", &format!("{} m³/h of air, at least {} m³/h", digits(air), digits(hours)));
        }
        (_, Some(own)) if own >= opening * (1.0 - 1e-9) => {
            at.pass("R20", &format!("two openings of {} cm², at least {} cm²", digits(own), digits(opening)));
        }
        (None, None) if part.designed => at.pass("R20", &format!("to be ventilated by {words}")),
        (None, None) => at.unmade(
            ("R20", "ventilation-not-stated"),
            &format!("ventilation: it needs {words}; state air or opening"),
        ),
        (air, own) => at.tell(
            Severity::Danger,
            ("R20", "ventilation-too-small"),
            format!(
                "{}, it needs {words}",
                match (air, own) {
                    (Some(air), _) => format!("{} m³/h of air", digits(air)),
                    (None, own) => format!("openings of {} cm²", digits(own.unwrap_or(0.0))),
                }
            ),
            Some(GASSING),
            "enlarge the openings, one low and one high, or move more air",
        ),
    }
}

/// How parallel strings share (R15).
pub(in crate::site) fn sharing(bank: &BankEntry, part: &BankPart, drawn: ElectricCurrent, at: &mut At<'_>) {
    let strings = bank.strings as usize;
    if strings < 2 {
        return;
    }
    let designed = was_designed(part);
    let Some(take_off) = part.take_off else {
        if designed {
            at.pass("R15", "strings to be led by equal leads to a busbar, with a device in every string");
        } else {
            at.unmade(
                ("R15", "strings-not-checked"),
                &format!("how {strings} parallel strings share; state take_off, link and joint"),
            );
        }
        return;
    };
    let way = match take_off {
        TakeOff::OneEnd => battery::TakeOff::OneEnd,
        TakeOff::Diagonal => battery::TakeOff::Diagonal,
        TakeOff::Busbar => battery::TakeOff::Busbar,
    };
    if !way.is_admitted(strings) {
        at.nonconforming(
            ("R15", "strings-not-on-busbar"),
            format!(
                "{strings} strings taken off {}",
                if take_off == TakeOff::OneEnd { "at one end" } else { "diagonally: for two only" }
            ),
            "take two strings off diagonally, and lead equal cables from each of more than two to a busbar",
        );
    }
    if strings > 2 && part.string_device.is_none() && !designed {
        at.danger(
            ("R15", "string-without-device"),
            format!(
                "{strings} strings, and no device in each: the others feed a shorted cell with all they have"
            ),
            "fit a device in every string, and state string_device",
        );
    }
    if take_off == TakeOff::Busbar {
        at.pass("R15", &format!("{strings} strings led by equal leads to a busbar share alike"));
        string_device(part, drawn / f64::from(bank.strings), at);
        return;
    }
    let Some(resistance) = part.internal_resistance.map(|r| r * f64::from(bank.strings)) else {
        at.unmade(
            ("R15", "strings-not-checked"),
            "how its strings share: its internal_resistance is not stated",
        );
        return;
    };
    let joint = part.joint.unwrap_or_else(|| ElectricalResistance::new::<ohm>(JOINT_OHM));
    let Some(link) = part.link else {
        at.unmade(
            ("R15", "strings-not-checked"),
            "how its strings share: link, the resistance between neighbours, is not stated",
        );
        return;
    };
    let whole = link + joint * 2.0;
    let source = StringSource { emf: bank.nominal, resistance };
    let links = vec![Link { positive: whole, negative: whole }; strings - 1];
    let mut shares = vec![StringShare::default(); strings];
    let current = if drawn.value > 0.0 { drawn } else { ElectricCurrent::new::<ampere>(1.0) };
    match share(&vec![source; strings], &links, way, current, &mut shares) {
        Ok(result) => {
            let part_of = result.greatest_part.get::<ratio>();
            let each: Vec<String> = shares.iter().map(|s| digits(s.current.get::<ampere>())).collect();
            let text = format!(
                "strings share {} A as {} A, links of {} mΩ with their joints, {} mΩ a string",
                digits(current.get::<ampere>()),
                each.join(", "),
                digits(whole.get::<milliohm>()),
                digits(resistance.get::<milliohm>())
            );
            if part_of > UNEQUAL.1 {
                at.nonconforming(("R15", "strings-share-unequally"), text, "lead equal cables to a busbar");
            } else if part_of > UNEQUAL.0 {
                at.advice(("R15", "strings-share-unequally"), text, "lead equal cables to a busbar");
            } else {
                at.pass("R15", &text);
            }
            if drawn.value > 0.0 {
                string_device(part, result.greatest, at);
            }
        }
        Err(error) => at.unmade(("R15", "strings-not-checked"), &format!("how its strings share: {error}")),
    }
}

/// The device of a string against what the hardest string carries.
fn string_device(part: &BankPart, greatest: ElectricCurrent, at: &mut At<'_>) {
    let Some(device) = part.string_device else { return };
    if device < greatest {
        at.nonconforming(
            ("R15", "string-device-too-small"),
            format!(
                "device of a string {} A, and the hardest string carries {} A",
                digits(device.get::<ampere>()),
                digits(greatest.get::<ampere>())
            ),
            "use a larger device, and leads that it protects",
        );
    }
}
