//! What a report tells beside its findings: what was assumed, what is recalled, what lies outside.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_potential::volt;

use super::describe::PlantLines;
use super::finding::digits;
use super::model::CircuitEntry;
use super::plan::Plan;
use super::report::CircuitLine;
use super::system::{BankEntry, FeedKind, Site};
use crate::citation::{Citation, Seen};
/// What was taken where the document says nothing about the wiring.
pub(super) fn assumptions(site: &Site, plan: &Plan) -> Vec<String> {
    let mut lines = Vec::new();
    let names = |pick: &dyn Fn(&CircuitEntry) -> bool| {
        let names: Vec<&str> = site.circuits.iter().filter(|c| pick(c)).map(|c| c.name.as_str()).collect();
        names.join(", ")
    };
    let usual = site.rules.usual_installation();
    let plain = names(&|c| c.installed.is_none());
    if !plain.is_empty() {
        lines.push(format!("installed as {}: {plain}", super::text::installation_word(usual)));
    }
    let bare = names(&|c| c.insulation.is_none() && c.size.is_some());
    if !bare.is_empty() {
        lines.push(format!("insulation {}: {bare}", site.rules.usual_insulation()));
    }
    let lugs = names(&|c| c.joints.is_empty());
    if !lugs.is_empty() {
        lines.push(format!("four crimped lugs of 0.1 mΩ (generic, common practice): {lugs}"));
    }
    lines.push(
        "resistance of parts without their own (common practice, no source): volts at rated current over rated \
         current: fuse with holder 100 mV, breaker pole 200 mV, switch or selector 50 mV, relay 80 mV, shunt 75 mV"
            .to_string(),
    );
    lines.push(
        "greatest fault: every bank full and warm (2.2 V a lead-acid cell), or just charged at its highest voltage where that is \
         more, metal of full area at the lowest ambient, \
         no joints; least fault: one bank alone, empty (1.98 V a lead-acid cell), its resistance raised for \
         discharge, cold and age (4.5 times lead-acid, 9 times lithium, 3.4 times nickel-cadmium; common practice), \
         conductors at their rated temperature, joints in"
            .to_string(),
    );
    lines.push(
        "conductor temperature: ambient + (rating − ambient) × (current / capacity)²; flexible AWG conductors count \
         with the greater of the stranded table value and 1.16 times the resistance of their area"
            .to_string(),
    );
    if let Some(rule) = site.rules.set().terminal {
        let unmarked = names(&|c| c.terminal.is_none());
        if !unmarked.is_empty() {
            lines.push(format!(
                "terminals without mark taken for {} °C up to {} A, {} °C above: {unmarked}",
                digits(rule.low_degC),
                digits(rule.upto_A),
                digits(rule.high_degC)
            ));
        }
    }
    if let Some(usual) = site.rules.unmarked_terminal_degC() {
        let unmarked = names(&|c| c.terminal.is_none());
        if !unmarked.is_empty() {
            lines.push(format!("terminals without mark taken for {} °C: {unmarked}", digits(usual)));
        }
    }
    let stalled: Vec<&str> = site
        .loads
        .iter()
        .filter(|l| l.start.is_some())
        .filter(|l| {
            let circuit = site.circuits.iter().position(|c| c.to == l.name);
            let planned = circuit.and_then(|c| plan.circuits.get(c)).and_then(|p| p.as_ref());
            planned.is_some_and(|p| p.fitted.iter().any(|f| f.designed))
        })
        .map(|l| l.name.as_str())
        .collect();
    if !stalled.is_empty() {
        lines.push(format!(
            "devices chosen to carry a start guard the cable, not a motor that stalls: {}",
            stalled.join(", ")
        ));
    }
    if plan.circuits.iter().flatten().any(|p| p.fitted.iter().any(|f| f.designed)) {
        lines.push(
            "devices designed here sit at the source's end, within the unprotected length of the rule set, in every \
             pole that is not earthed"
                .to_string(),
        );
    }
    if !plan.links.is_empty() {
        let linked = |c: &CircuitEntry| {
            plan.links.iter().any(|&l| site.circuits.get(l).is_some_and(|x| x.name == c.name))
        };
        lines.push(format!(
            "stated current in place of what the loads would draw, between banks: {}",
            names(&linked)
        ));
    }
    if site.circuits.iter().any(|c| (c.diversity - 1.0).abs() > f64::EPSILON) {
        lines.push(format!(
            "the user's own diversity: {}",
            names(&|c| (c.diversity - 1.0).abs() > f64::EPSILON)
        ));
    }
    let timed = site.loads.iter().any(|l| !l.use_of.at.is_empty() || l.use_of.months.is_some());
    if timed {
        lines.push(
            "loads that state their times of day or months meet only where those do; all others may meet any of them"
                .to_string(),
        );
    }
    lines.push(
        "worst hour: every load at once that may meet, the bank at cut-off, each of several banks alone, constant-power loads solved \
         at the volts that reach them; resistive loads load conductors and devices with their current at the highest \
         voltage"
            .to_string(),
    );
    lines
}

/// What was taken of the plant where the document says nothing.
pub(super) fn plant_assumptions(site: &Site) -> Vec<String> {
    let mut lines = Vec::new();
    if !site.is_whole {
        return lines;
    }
    if site.place.losses.is_none() {
        lines.push(format!(
            "{} % of energy lost in the wiring (common practice, no source; state losses)",
            digits(100.0 * super::energy::WIRING_LOSS)
        ));
    }
    if site.inverters.iter().any(|i| i.idle.is_some()) {
        lines.push(
            "inverters on day and night in every month in which one of their loads may run, off in the others"
                .to_string(),
        );
    }
    if site.loads.iter().any(|l| l.use_of.duty_hot.is_some()) {
        lines.push(
            "duty of a load as stated at 20 °C, duty_hot at the greatest ambient, in a straight line between; taken at the mean temperature of each month"
                .to_string(),
        );
    }
    for array in &site.arrays {
        let m = &array.module;
        let taken: Vec<&str> = [
            (
                m.voc_coefficient.is_none(),
                "cold open-circuit voltage by the rule set's table, where it has one",
            ),
            (m.power_coefficient.is_none(), "-0.4 %/K of power, its hot voltage by that of open circuit"),
            (m.isc_coefficient.is_none(), "0.05 %/K of short-circuit current"),
            (m.noct.is_none(), "a NOCT of 47 °C"),
        ]
        .into_iter()
        .filter_map(|(missing, words)| missing.then_some(words))
        .collect();
        if !taken.is_empty() {
            lines.push(format!(
                "module of array \"{}\": {} (common practice, no source; state its coefficients)",
                array.part.name,
                taken.join("; ")
            ));
        }
    }
    if !site.arrays.is_empty() {
        lines.push(format!(
            "arrays: {} % lost to dirt, mismatch and wiring; 3 % of voltage to wiring and 5 % to age; cells of a mean day in \
             800 W/m², hottest in 1000 W/m²; controllers let nothing back into the array (common practice, no source)",
            digits(100.0 * super::supply::ARRAY_LOSS)
        ));
    }
    if site.chargers.iter().any(|c| c.limit.is_some()) {
        lines.push(
            "sources load their circuits, and what lies between them and the bank, with all that their outputs give"
                .to_string(),
        );
    }
    lines
}

fn words(citation: Citation) -> String {
    let Citation { document, place, .. } = citation;
    if place.is_empty() { document.to_string() } else { format!("{document}, {place}") }
}

/// Sources used that nobody has seen.
pub(super) fn recalled(circuits: &[CircuitLine], plant: &PlantLines) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    for circuit in circuits {
        let factors = circuit.judgement.ampacity.iter().flat_map(|a| a.factors.iter().map(|f| f.citation));
        let all = core::iter::once(&circuit.judgement).chain(&circuit.further);
        let checks = all.flat_map(|j| j.checks.iter().map(|c| c.citation));
        let distances = circuit.devices.iter().filter(|d| d.from_source.is_some());
        let distances = distances.filter_map(|d| d.distance_limit.as_ref().map(|l| l.citation));
        for citation in checks.chain(factors).chain(distances).filter(|c| c.seen == Seen::Recalled) {
            let line = words(citation);
            if !lines.contains(&line) {
                lines.push(line);
            }
        }
    }
    let banks = plant.banks.iter().flat_map(|b| &b.steps);
    let arrays = plant.arrays.iter().flat_map(|a| &a.steps);
    let sources = plant.generators.iter().flat_map(|g| &g.steps);
    for citation in banks.chain(arrays).chain(sources).filter_map(|step| step.citation) {
        let line = words(citation);
        if citation.seen == Seen::Recalled && !lines.contains(&line) {
            lines.push(line);
        }
    }
    lines
}

/// What lies outside the report.
pub(super) fn not_covered(site: &Site) -> Vec<String> {
    let mut lines = Vec::new();
    for inverter in &site.inverters {
        lines.push(format!("everything beyond the AC terminals of inverter \"{}\"", inverter.name));
        if !site.is_whole {
            let surge = if inverter.surge.is_some() { "" } else { "surge (not stated), " };
            lines.push(format!(
                "{surge}inrush and pre-charge of inverter \"{}\", and its idle draw",
                inverter.name
            ));
        }
    }
    let open: Vec<&str> = site
        .circuits
        .iter()
        .flat_map(|c| c.devices.iter())
        .filter(|d| d.terminal_range.is_none())
        .map(|d| d.name.as_str())
        .collect();
    if !open.is_empty() {
        lines.push(format!(
            "whether the terminals take the conductor (terminal_range not stated): {}",
            open.join(", ")
        ));
    }
    lines.push("loads and inverters that can feed back: every one is taken for a load only".to_string());
    let bare: Vec<&str> = site
        .circuits
        .iter()
        .filter(|c| c.size.is_some() && (c.from_lug.is_none() || c.to_lug.is_none()))
        .map(|c| c.name.as_str())
        .collect();
    if !bare.is_empty() {
        lines.push(format!(
            "whether lugs fit, where the stud of a terminal or the lug is not stated: {}",
            bare.join(", ")
        ));
    }
    if let Some(from) = site.rules.pv().arc_fault_from {
        let above = |feed: &&BankEntry| {
            matches!(feed.kind, FeedKind::Array(_)) && feed.highest.get::<volt>() > from.value
        };
        for feed in site.banks.iter().filter(above) {
            lines.push(format!(
                "arc-fault protection of array \"{}\", asked for above {} V ({})",
                feed.name,
                digits(from.value),
                from.citation
            ));
        }
    }
    let mut idle_keys: Vec<&str> = Vec::new();
    if site.place.latitude.is_some() || site.place.longitude.is_some() {
        idle_keys.push("latitude and longitude");
    }
    if site.arrays.iter().any(|a| a.part.tilt.is_some() || a.part.azimuth.is_some()) {
        idle_keys.push("tilt and azimuth: the sun is stated in the plane of the array");
    }
    if site.loads.iter().any(|l| l.priority.is_some()) {
        idle_keys.push("priority: nothing is shed");
    }
    if !idle_keys.is_empty() {
        lines.push(format!("stated, and used for nothing yet: {}", idle_keys.join("; ")));
    }
    if !site.arrays.is_empty() {
        lines.push(
            "insulation of array cables against sun, weather and hot modules; shutdown of an array in a fire"
                .to_string(),
        );
    }
    if site.is_whole {
        lines.extend(
            [
                "derating of inverters, chargers and controllers in their own heat; of all parts above 2000 m",
                "weather from hour to hour, the loss of load over years, ageing: mean days of the months only",
                "foundations, wind and snow loads, fire, and what a building or boat asks beyond its wiring",
            ]
            .map(ToString::to_string),
        );
    } else {
        lines.push(
            "only wiring is described: size of bank and array, charging, ventilation, lightning and protective \
             conductors are not part of this report"
                .to_string(),
        );
    }
    lines
}
