//! The plant as the report tells it: banks, energy, arrays, inverters, sources, each with the steps to it.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::length::meter;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::temperature_coefficient::per_kelvin;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::day;

use super::check::charge::source_of;
use super::complete::Reasons;
use super::complete::bank::{Duty, temperatures};
use super::complete::inverter::demand;
use super::complete::need::needed;
use super::energy::{Demand, ac_loads};
use super::finding::digits;
use super::lines::{ArrayLine, BankLine, DemandLine, GeneratorLine, InverterLine, Step};
use super::parts::{Charging, GeneratorKind};
use super::pv::checked;
use super::supply::{arrays_of, generators_of};
use super::system::{BankEntry, Charger, ChargerKind, Site};
use crate::battery::{ChargeStage, data, disconnect, set_points, ventilation_flow, ventilation_opening};
use crate::citation::{Citation, Seen};
use crate::generator::{Recharge, generator_derated_power};
use crate::quantity::{
    ChargeRate, ElectricCurrent, Ratio, RatioPerTemperature, ThermodynamicTemperature, Time,
};

/// State of charge to which the tail of lead-acid is counted: it never ends. Common practice, no source.
const FULL_LEAD_ACID: f64 = 0.98;

/// Power that an engine loses for each kelvin above 25 °C. Common practice, no source.
const HEAT_PER_K: f64 = 0.004;

/// The plant of a report.
#[derive(Clone, Debug, Default)]
pub struct PlantLines {
    /// Banks.
    pub banks: Vec<BankLine>,
    /// Energy of the months, one for each bank or group of banks.
    pub demands: Vec<DemandLine>,
    /// Arrays.
    pub arrays: Vec<ArrayLine>,
    /// Inverters.
    pub inverters: Vec<InverterLine>,
    /// Sources beside the sun.
    pub generators: Vec<GeneratorLine>,
}

/// The plant of a site.
pub(super) fn plant(site: &Site, demands: &[Demand], reasons: &Reasons) -> PlantLines {
    if !site.is_whole {
        return PlantLines::default();
    }
    let name = |index: usize| site.banks.get(index).map_or_else(String::new, |b| b.name.clone());
    PlantLines {
        banks: site
            .banks
            .iter()
            .enumerate()
            .filter_map(|(i, b)| bank_line(site, i, b, demands, reasons))
            .collect(),
        demands: demands
            .iter()
            .filter_map(|d| {
                let first = d.banks.first().copied()?;
                Some(DemandLine {
                    bank: name(first),
                    mean: d.mean,
                    full: d.full,
                    arrays: arrays_of(site, &d.banks),
                    generators: generators_of(site, &d.banks),
                })
            })
            .collect(),
        arrays: array_lines(site, reasons),
        inverters: inverter_lines(site, reasons),
        generators: site.chargers.iter().filter_map(|c| generator_line(site, c)).collect(),
    }
}

fn bank_line(
    site: &Site,
    index: usize,
    bank: &BankEntry,
    demands: &[Demand],
    reasons: &Reasons,
) -> Option<BankLine> {
    let (chemistry, part) = (bank.chemistry()?, bank.part.as_ref()?);
    let mild = ThermodynamicTemperature::new::<degree_celsius>(25.0);
    let points = set_points(chemistry, bank.cells, mild).ok();
    let own: Charging = site
        .chargers
        .iter()
        .find(|c| c.bank == Some(index) && c.line > 0)
        .map(|c| c.charging)
        .unwrap_or_default();
    let demand = demands.iter().find(|d| d.banks.contains(&index));
    let peak = demand.map_or(0.0, |d| (d.peak / bank.nominal).get::<ampere>());
    let rate = ChargeRate::per_hour((peak / bank.capacity.get::<ampere_hour>()).clamp(0.0, 100.0)).ok();
    let asked = rate.and_then(|r| disconnect(chemistry, bank.cells, r, temperatures(site, part).0).ok());
    let reason = reasons.banks.iter().find(|r| r.name == bank.name);
    let duty = demand.filter(|d| d.banks.len() == 1).map(|d| Duty::of(site, part, bank.nominal, d, None));
    let need = duty.as_ref().filter(|d| d.daily.value > 0.0).and_then(|d| needed(chemistry, d).ok());
    let depth = part.depth.map_or(data(chemistry).usual_depth.value, |d| d.get::<ratio>());
    let autonomy = duty
        .as_ref()
        .filter(|d| d.daily.value > 0.0)
        .map(|d| Time::new::<day>((bank.capacity * depth / d.daily).get::<ratio>()));
    let mut steps = match (reason, &need) {
        (Some(reason), _) => reason.steps.clone(),
        (None, Some((_, _, steps))) => steps.clone(),
        (None, None) => Vec::new(),
    };
    air(bank, &mut steps);
    Some(BankLine {
        name: bank.name.clone(),
        designed: part.designed,
        chemistry,
        nominal: bank.nominal,
        capacity: bank.capacity,
        battery: part.battery.clone(),
        series: (bank.series > 0).then_some(bank.series),
        strings: bank.strings,
        cut_off: bank.cut_off,
        highest: bank.highest,
        disconnect: part.disconnect.or_else(|| part.designed.then_some(bank.cut_off)),
        reconnect: part.reconnect.or_else(|| asked.filter(|_| part.designed).map(|a| a.reconnect)),
        absorption: own.absorption.or_else(|| points.map(|p| p.absorption.usual())),
        float: own.float.or_else(|| points.and_then(|p| p.float).map(|f| f.usual())),
        equalise: own.equalise.or_else(|| {
            points.filter(|_| own.absorption.is_none()).and_then(|p| p.equalise).map(|e| e.usual())
        }),
        needed: need.map(|(need, _, _)| need),
        autonomy,
        steps,
        rejected: reason.map_or_else(Vec::new, |r| r.rejected.clone()),
    })
}

/// Air that it needs, as a step.
fn air(bank: &BankEntry, steps: &mut Vec<Step>) {
    let Some(chemistry) = bank.chemistry() else { return };
    let cells = Ratio::new::<ratio>(f64::from(bank.cells));
    let Ok(flow) = ventilation_flow(chemistry, ChargeStage::Boost, cells, bank.capacity) else { return };
    let opening = ventilation_opening(flow).unwrap_or_default();
    let citation = Some(crate::battery::GASSING);
    steps.push(Step {
        what: "air to be moved while it gasses".to_string(),
        value: flow.get::<uom::si::volume_rate::cubic_meter_per_hour>(),
        unit: "m³/h",
        citation,
    });
    steps.push(Step {
        what: "or two openings, one low and one high, of".to_string(),
        value: opening.get::<uom::si::area::square_centimeter>(),
        unit: "cm²",
        citation,
    });
}

fn array_lines(site: &Site, reasons: &Reasons) -> Vec<ArrayLine> {
    site.arrays
        .iter()
        .map(|array| {
            let found = checked(site, array).and_then(Result::ok);
            let reason = reasons.arrays.iter().find(|r| r.name == array.part.name);
            let controller = array.controller.and_then(|c| site.controllers.get(c));
            ArrayLine {
                name: array.part.name.clone(),
                designed: array.designed,
                module: if array.module.name.is_empty() {
                    "its own figures".to_string()
                } else {
                    array.module.name.clone()
                },
                series: array.series,
                strings: array.strings,
                power: array.module.power * f64::from(array.series) * f64::from(array.strings),
                controller: controller.map(|c| (c.name.clone(), c.line == 0)),
                output: controller.and_then(|c| c.output),
                cold_voc: found.as_ref().and_then(|f| f.voltages.cold_voc).map(|(v, _)| v),
                hot_vmp: found.as_ref().and_then(|f| f.voltages.hot_vmp),
                greatest: found.as_ref().map(|f| f.currents.array_greatest),
                device_required: found.as_ref().and_then(|f| f.device_required),
                worst_month: reason.and_then(|r| r.worst_month),
                reached: reason.and_then(|r| r.reached),
                layout: reason.map_or_else(String::new, |r| r.layout.clone()),
                steps: reason.map_or_else(Vec::new, |r| r.steps.clone()),
                rejected: reason.map_or_else(Vec::new, |r| r.rejected.clone()),
                passed: Vec::new(),
            }
        })
        .collect()
}

fn inverter_lines(site: &Site, reasons: &Reasons) -> Vec<InverterLine> {
    site.inverters
        .iter()
        .enumerate()
        .map(|(index, inverter)| {
            let nominal = site.banks.first().map(|b| b.nominal).unwrap_or_default();
            let asked = demand(site, nominal, ac_loads(site, index)).ok();
            let reason = reasons.inverters.iter().find(|r| r.name == inverter.name);
            InverterLine {
                name: inverter.name.clone(),
                designed: inverter.designed,
                power: inverter.power,
                surge: inverter.surge,
                demand: asked.map(|a| a.power).unwrap_or_default(),
                starting: asked.map(|a| a.starting).unwrap_or_default(),
                steps: reason.map_or_else(Vec::new, |r| r.steps.clone()),
                rejected: reason.map_or_else(Vec::new, |r| r.rejected.clone()),
            }
        })
        .collect()
}

fn generator_line(site: &Site, charger: &Charger) -> Option<GeneratorLine> {
    let ChargerKind::Generator(index) = charger.kind else { return None };
    let part = site.generators.get(index)?;
    let mut steps = Vec::new();
    let contribution = source_of(site, charger).and_then(|s| s.contribution(0).ok());
    let engine = part.kind == GeneratorKind::Engine;
    let power = part.power.filter(|_| engine).map(|power| {
        let altitude = site.place.altitude.unwrap_or_default();
        let hot = site.ambient.1;
        steps.push(Step {
            what: "nameplate".to_string(),
            value: power.get::<watt>(),
            unit: "W",
            citation: None,
        });
        let left =
            generator_derated_power(power, altitude, hot, RatioPerTemperature::new::<per_kelvin>(HEAT_PER_K))
                .map_or(power, |d| d.power);
        steps.push(Step {
            what: format!(
                "left at {} m and {} °C",
                digits(altitude.get::<meter>()),
                digits(hot.get::<degree_celsius>())
            ),
            value: left.get::<watt>(),
            unit: "W",
            citation: Some(Citation::new("common practice, no source", "altitude and heat", Seen::Practice)),
        });
        left
    });
    let bank = charger.bank.and_then(|b| site.banks.get(b))?;
    let lasting = contribution.map(|c| c.lasting);
    // What the charger can draw of the engine's power, if that is less.
    let lasting = match (lasting, power) {
        (Some(lasting), Some(power)) => {
            let efficiency = part.efficiency.map_or(0.85, |e| e.get::<ratio>());
            let factor = part.power_factor.map_or(1.0, |f| f.get::<ratio>());
            let by_engine: ElectricCurrent = power * efficiency * factor / bank.highest;
            steps.push(Step {
                what: "current that the engine can drive through its charger".to_string(),
                value: by_engine.get::<ampere>(),
                unit: "A",
                citation: None,
            });
            Some(if by_engine < lasting { by_engine } else { lasting })
        }
        (lasting, _) => lasting,
    };
    let chemistry = bank.chemistry()?;
    let depth = bank
        .part
        .as_ref()
        .and_then(|p| p.depth)
        .map_or(data(chemistry).usual_depth.value, |d| d.get::<ratio>());
    let recharge = lasting.filter(|a| a.get::<ampere>() > 0.0).map(|current| Recharge {
        capacity: bank.capacity,
        current,
        start: Ratio::new::<ratio>(1.0 - depth),
        target: Ratio::new::<ratio>(if chemistry.is_lead_acid() { FULL_LEAD_ACID } else { 1.0 }),
        knee: chemistry.is_lead_acid().then(|| Ratio::new::<ratio>(0.8)),
        efficiency: Ratio::new::<ratio>(data(chemistry).charge_efficiency.value),
    });
    let time = recharge.and_then(|r| r.time().ok());
    Some(GeneratorLine {
        name: charger.name.clone(),
        current: contribution.map(|c| c.greatest),
        lasting,
        recharge: time.map(|t| t.total),
        steps,
    })
}
