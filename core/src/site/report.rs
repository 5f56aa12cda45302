//! The report as data: what was found and designed, with its reasons. [`super::text`] turns it into words.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_potential::volt;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::complete::complete;
use super::describe::{self, PlantLines};
use super::energy::demands;
use super::fault::Fault;
use super::finding::{Finding, Severity, digits};
use super::model::{CircuitEntry, Document, Return};
use super::plan::{Fitted, Plan, Planned, Reason, plan};
use super::read::Problems;
use super::sheet::{Label, MaintenanceTask, Meter, Purchase, Step, SwitchingStep, paper, purchases};
use super::system::{BankEntry, FeedKind, Site};
use super::wiring::findings;
use crate::battery::Chemistry;
use crate::cable::Conductor;
use crate::circuit::{Judgement, Run};
use crate::citation::Seen;
use crate::protection::{Earthing, End, Guard, Pole};
use crate::quantity::{ConductorSize, ElectricCurrent, Length};
use crate::rules::{Limit, practice_figure};

/// One device of a circuit.
#[derive(Clone, Debug)]
pub struct DeviceLine {
    /// Name.
    pub name: String,
    /// The device.
    pub guard: Guard,
    /// End it guards.
    pub end: End,
    /// Name of what stands at that end.
    pub at: String,
    /// Whether family or rating were chosen here.
    pub designed: bool,
    /// Voltage and breaking capacity are what must be bought, not what is known of a part.
    pub specified: bool,
    /// Pole it sits in.
    pub pole: Pole,
    /// Conductor between the source's end and the device, where stated.
    pub from_source: Option<Length>,
    /// The most the rule set admits of it, where it holds a length.
    pub distance_limit: Option<Limit<Length>>,
    /// Least prospective current it must see, where known.
    pub least_fault: Option<ElectricCurrent>,
    /// Greatest prospective current it must interrupt, where known.
    pub greatest_fault: Option<ElectricCurrent>,
}

/// One circuit of the report.
#[derive(Clone, Debug)]
pub struct CircuitLine {
    /// Name.
    pub name: String,
    /// Name of its beginning.
    pub from: String,
    /// Name of its end.
    pub to: String,
    /// Positive conductor.
    pub positive: Conductor,
    /// Negative conductor.
    pub negative: Conductor,
    /// Whether the size was chosen here.
    pub designed: bool,
    /// The task the checks were made for.
    pub run: Run,
    /// What was found.
    pub judgement: Judgement,
    /// The same for each further device; in the order of `devices`, the first left out.
    pub further: Vec<Judgement>,
    /// Devices; the one at the source's end first.
    pub devices: Vec<DeviceLine>,
    /// Smaller sizes, each with the reason it was not taken.
    pub refused: Vec<(ConductorSize, String)>,
    /// What decided the size, or uses most of its limit where it is stated.
    pub governing: String,
    /// The chassis carries the return current.
    pub chassis: bool,
    /// The line cannot carry its load: its figures are those of a constant current.
    pub collapsed: bool,
    /// Name of the circuit whose device guards this one from further up.
    pub guarded_by: Option<String>,
    /// Remark on a figure of common practice for this conductor, where there is one.
    pub practice: Option<String>,
}

/// The whole report.
#[derive(Clone, Debug)]
pub struct Report {
    /// Name of the site.
    pub name: String,
    /// Rule set and editions.
    pub edition: String,
    /// The user's own values in place of the rule set's.
    pub overrides: Vec<String>,
    /// Banks and surroundings, one line each.
    pub system: Vec<String>,
    /// Banks, energy, arrays, inverters, sources; empty where only wiring is described.
    pub plant: PlantLines,
    /// Circuits, in the order of the document.
    pub circuits: Vec<CircuitLine>,
    /// Findings, gravest first.
    pub findings: Vec<Finding>,
    /// What meters showed beside what is predicted, in the order of the document.
    pub readings: Vec<super::reading::ReadingLine>,
    /// What passed on boards, parts, lugs and consumers; the checks of single runs stand with their circuits.
    pub passed: Vec<String>,
    /// What to buy for what was designed.
    pub purchases: Vec<Purchase>,
    /// The meter whose errors the commissioning sheet counts with.
    pub meter: Meter,
    /// Commissioning sheet, in working order.
    pub commissioning: Vec<Step>,
    /// Switching order: connecting, then disconnecting.
    pub switching: Vec<SwitchingStep>,
    /// Labels.
    pub labels: Vec<Label>,
    /// Maintenance, the most frequent first.
    pub maintenance: Vec<MaintenanceTask>,
    /// What was taken where the document says nothing.
    pub assumptions: Vec<String>,
    /// Sources of which nobody has seen the page.
    pub recalled: Vec<String>,
    /// What lies outside this report.
    pub not_covered: Vec<String>,
}

impl Report {
    /// 0 where nothing stands against the site, 1 with any danger, nonconformity or check not made.
    pub fn exit_code(&self) -> u8 {
        u8::from(self.findings.iter().any(|f| f.severity != Severity::Advice))
    }

    /// Number of findings of a severity.
    pub fn count(&self, severity: Severity) -> usize {
        self.findings.iter().filter(|f| f.severity == severity).count()
    }
}

/// Designs what the document leaves out, checks what it states, and reports both.
///
/// # Errors
/// [`Problems`] where the parts on offer cannot serve a circuit, each with its line and remedy.
///
/// # Example
/// ```
/// use ampwright::site::{inspect, read};
/// let site = read(include_str!("../../examples/sites/heron_point.toml")).map_err(|p| p.to_string())?;
/// let report = inspect(&site).map_err(|p| p.to_string())?;
/// assert!(report.to_string().contains("house main"));
/// # Ok::<(), String>(())
/// ```
pub fn inspect(document: &Document) -> Result<Report, Problems> {
    let (site, reasons) = complete(document)?;
    let site = &site;
    let plan = plan(site)?;
    let circuits: Vec<CircuitLine> = site
        .circuits
        .iter()
        .zip(&plan.circuits)
        .enumerate()
        .filter_map(|(index, (circuit, planned))| {
            Some(line_of(site, &plan, index, circuit, planned.as_ref()?))
        })
        .collect();
    let demands = demands(site).unwrap_or_default();
    let mut found = findings(site, &plan, &demands);
    let plant = describe::plant(site, &demands, &reasons);
    let paper = paper(site, &plan);
    let readings = super::reading::readings(site, &plan, &mut found);
    found.list.sort_by_key(|f| f.severity);
    Ok(Report {
        name: site.name.clone(),
        edition: site.rules.set().edition.to_string(),
        overrides: site.rules.overridden().iter().map(ToString::to_string).collect(),
        system: system(site),
        findings: found.list,
        readings,
        passed: found.passed,
        purchases: purchases(site, &plan),
        meter: paper.meter,
        commissioning: paper.commissioning,
        switching: paper.switching,
        labels: paper.labels,
        maintenance: paper.maintenance,
        assumptions: {
            let mut lines = reasons.assumed;
            lines.extend(assumptions(site, &plan));
            lines.extend(plant_assumptions(site));
            lines
        },
        recalled: recalled(&circuits, &plant),
        not_covered: not_covered(site),
        circuits,
        plant,
    })
}

fn line_of(site: &Site, plan: &Plan, index: usize, circuit: &CircuitEntry, planned: &Planned) -> CircuitLine {
    let name = |index: usize| site.circuits.get(index).map_or_else(String::new, |c| c.name.clone());
    let reason = |reason: &Reason| match reason {
        Reason::Check(checked) => checked.to_string(),
        Reason::Error(error) => error.to_string(),
        Reason::Together => {
            "passes with the currents above, but not with those it would cause itself".to_string()
        }
        Reason::Path(checked, other) => format!("path to \"{}\": {checked}", name(*other)),
    };
    let governing = match (planned.designed(), planned.refused.last()) {
        (true, Some(last)) => format!("{} was refused: {}", last.size, reason(&last.by)),
        (true, None) => "the smallest on offer passes".to_string(),
        (false, _) => planned
            .judgement
            .first_failure()
            .or_else(|| planned.judgement.tightest())
            .map_or_else(|| "no check with a limit was made".to_string(), ToString::to_string),
    };
    CircuitLine {
        name: circuit.name.clone(),
        from: circuit.from.clone(),
        to: circuit.to.clone(),
        positive: planned.positive,
        negative: planned.negative,
        designed: planned.designed(),
        run: planned.run,
        judgement: planned.judgement.clone(),
        further: planned.further.clone(),
        devices: planned.fitted.iter().map(|f| device_line(site, circuit, planned, f)).collect(),
        refused: planned.refused.iter().map(|r| (r.size, reason(&r.by))).collect(),
        governing,
        chassis: circuit.way_back != Return::Conductor,
        collapsed: plan.collapsed.contains(&index),
        guarded_by: planned.guarded_by.map(name),
        practice: practice_figure(planned.positive.size, planned.positive.insulation.rating_degC()).map(
            |p| {
                let table = planned.judgement.ampacity.as_ref().map_or(f64::NAN, |a| a.base.value);
                format!(
                    "common practice gives {} A for this conductor ({}); the rule set's table gives {} \
                     A, {:+.1} %",
                    digits(p.amps),
                    p.words,
                    digits(table),
                    (table / p.amps - 1.0) * 100.0
                )
            },
        ),
    }
}

fn device_line(site: &Site, circuit: &CircuitEntry, planned: &Planned, fitted: &Fitted) -> DeviceLine {
    let entry = fitted.entry.and_then(|e| circuit.devices.get(e));
    let parent_side = (fitted.end == End::From) != planned.reversed;
    DeviceLine {
        name: fitted.name.clone(),
        guard: fitted.guard,
        end: fitted.end,
        at: if fitted.end == End::From { circuit.from.clone() } else { circuit.to.clone() },
        designed: fitted.designed,
        specified: fitted.specified,
        pole: match (entry, site.earthing) {
            (Some(entry), _) => entry.pole,
            (None, Earthing::Negative) => Pole::Positive,
            (None, Earthing::Positive) => Pole::Negative,
            (None, Earthing::Floating) => Pole::Both,
        },
        from_source: entry.and_then(|e| e.from_source),
        distance_limit: {
            let name = if fitted.end == End::From { &circuit.from } else { &circuit.to };
            let post = site.banks.iter().any(|b| b.name == *name);
            site.rules.unfused_length(circuit.sheathed, post)
        },
        least_fault: match planned.fitted.iter().position(|f| f.name == fitted.name) {
            Some(0) | None => planned.judgement.least_fault,
            Some(place) => planned.further.get(place - 1).and_then(|j| j.least_fault),
        },
        greatest_fault: Fault::parts(if parent_side {
            planned.flow.fault_at_beginning
        } else {
            planned.flow.fault_at_end
        })
        .0,
    }
}

fn system(site: &Site) -> Vec<String> {
    let mut lines: Vec<String> = site
        .banks
        .iter()
        .filter(|b| b.is_battery())
        .map(|b| {
            format!(
                "bank \"{}\": {} {} V, {} Ah, from {} V at cut-off to {} V at its highest",
                b.name,
                b.chemistry().map_or("", Chemistry::word),
                digits(b.nominal.get::<volt>()),
                digits(b.capacity.get::<uom::si::electric_charge::ampere_hour>()),
                digits(b.cut_off.get::<volt>()),
                digits(b.highest.get::<volt>())
            )
        })
        .collect();
    let earth = site.rules.set().terms.earth;
    let points = match site.place.bonds {
        Some(1) | None => "one point".to_string(),
        Some(count) => format!("{count} points"),
    };
    lines.push(match site.earthing {
        Earthing::Negative => format!("negative pole to {earth} at {points}"),
        Earthing::Positive => format!("positive pole to {earth} at {points}"),
        Earthing::Floating => format!("neither pole to {earth}"),
    });
    lines.push(format!(
        "ambient {} to {} °C",
        digits(site.ambient.0.get::<degree_celsius>()),
        digits(site.ambient.1.get::<degree_celsius>())
    ));
    lines
}

fn assumptions(site: &Site, plan: &Plan) -> Vec<String> {
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
fn plant_assumptions(site: &Site) -> Vec<String> {
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

/// Sources used that nobody has seen.
fn recalled(circuits: &[CircuitLine], plant: &PlantLines) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    for circuit in circuits {
        let factors = circuit.judgement.ampacity.iter().flat_map(|a| a.factors.iter().map(|f| f.citation));
        let all = core::iter::once(&circuit.judgement).chain(&circuit.further);
        let checks = all.flat_map(|j| j.checks.iter().map(|c| c.citation));
        let distances = circuit.devices.iter().filter(|d| d.from_source.is_some());
        let distances = distances.filter_map(|d| d.distance_limit.as_ref().map(|l| l.citation));
        for citation in checks.chain(factors).chain(distances).filter(|c| c.seen == Seen::Recalled) {
            let line = format!("{}, {}", citation.document, citation.place);
            if !lines.contains(&line) {
                lines.push(line);
            }
        }
    }
    let banks = plant.banks.iter().flat_map(|b| &b.steps);
    let arrays = plant.arrays.iter().flat_map(|a| &a.steps);
    let sources = plant.generators.iter().flat_map(|g| &g.steps);
    for citation in banks.chain(arrays).chain(sources).filter_map(|step| step.citation) {
        let line = format!("{}, {}", citation.document, citation.place);
        if citation.seen == Seen::Recalled && !lines.contains(&line) {
            lines.push(line);
        }
    }
    lines
}

fn not_covered(site: &Site) -> Vec<String> {
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
    if site.is_whole {
        lines.push("derating of inverters, chargers and controllers in their own heat".to_string());
        lines.extend(
            [
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
