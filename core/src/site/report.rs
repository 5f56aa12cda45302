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
use super::system::Site;
use super::told::{assumptions, not_covered, plant_assumptions, recalled};
use super::wiring::findings;
use crate::battery::Chemistry;
use crate::cable::Conductor;
use crate::circuit::{Judgement, Run};
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
