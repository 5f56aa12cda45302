//! The whole report.

use alloc::vec::Vec;

use super::commissioning::{CommissioningStep, Meter};
use super::common::{line_of, list, texts};
use super::plant::Plant;
use super::reading::Reading;
use super::shape::{object, words};
use super::sheet::{Label, MaintenanceTask, Purchase, PurchaseTotal, SwitchingStep};
use super::wiring::Circuit;
use super::words::Severity;
use crate::site::finding::{self, Severity as Grave};
use crate::site::report;
use crate::site::text::CAUTIONS;

words! {
    /// Name of this form and its number.
    ReportSchema for () {
        () => "ampwright.report/1",
    }
}

object! {
    /// What was found and designed at a site. It holds neither time nor path: the same site gives the same text.
    Report<'a> {
        /// Name of this form and its number.
        schema: ReportSchema,
        /// Status of a program that reports this: 0 where nothing stands against the site, 1 with any danger,
        /// nonconformity or check not made.
        exit_code: u8,
        /// How many findings of each severity.
        counts: Counts,
        /// The site.
        site: Site<'a>,
        /// The rules applied.
        rules: Rules<'a>,
        /// Banks, energy, arrays, inverters, sources.
        plant: Plant<'a>,
        /// Circuits, in the order of the site file.
        circuits: Vec<Circuit<'a>>,
        /// Findings, gravest first.
        findings: Vec<Finding<'a>>,
        /// What meters showed beside what is predicted, in the order of the site file.
        readings: Vec<Reading<'a>>,
        /// What passed on boards, parts, lugs and consumers; the checks of single runs stand with their circuits.
        passed: Vec<&'a str>,
        /// What to buy for what was designed.
        purchases: Vec<Purchase<'a>>,
        /// What that costs; null where nothing has a price.
        purchase_total: Option<PurchaseTotal>,
        /// The meter whose errors the commissioning sheet counts with.
        meter: Meter,
        /// Commissioning sheet, in working order.
        commissioning: Vec<CommissioningStep<'a>>,
        /// Switching order: connecting, then disconnecting.
        switching: Vec<SwitchingStep<'a>>,
        /// Labels.
        labels: Vec<Label<'a>>,
        /// Maintenance, the most frequent first.
        maintenance: Vec<MaintenanceTask<'a>>,
        /// What was taken where the site file says nothing.
        assumptions: Vec<&'a str>,
        /// Sources of which nobody has seen the page.
        recalled: Vec<&'a str>,
        /// What lies outside this report.
        not_covered: Vec<&'a str>,
        /// Cautions that stand under every report.
        cautions: Vec<&'static str>,
    }
}

object! {
    /// How many findings of each severity.
    Counts {
        /// It can burn, arc or hurt.
        danger_count: usize,
        /// It breaks a rule or does not work.
        nonconforming_count: usize,
        /// A datum is missing: nothing is known.
        not_checked_count: usize,
        /// Worth doing; no rule demands it.
        advice_count: usize,
    }
}

object! {
    /// The site.
    Site<'a> {
        /// Name.
        name: &'a str,
        /// Banks and surroundings, one line each, in words.
        system: Vec<&'a str>,
    }
}

object! {
    /// The rules applied.
    Rules<'a> {
        /// Documents and editions, in words.
        edition: &'a str,
        /// The user's own values in place of the rule set's, in words.
        overrides: Vec<&'a str>,
    }
}

object! {
    /// What the inspection has to say.
    Finding<'a> {
        /// How grave.
        severity: Severity,
        /// Rule of the design behind it: `R4`.
        rule: &'static str,
        /// Permanent short name of its kind.
        slug: &'static str,
        /// Where.
        place: &'a str,
        /// Line of the entry in the site file; null where it stands for none.
        line: Option<u32>,
        /// What was found, with value and limit.
        text: &'a str,
        /// Source of the limit; empty where there is none.
        source: &'a str,
        /// What to do; empty where nothing is known.
        remedy: &'static str,
    }
}

impl<'a> From<&'a report::Report> for Report<'a> {
    fn from(source: &'a report::Report) -> Self {
        // Without `..`: a field that the report gets wants its place here.
        let report::Report {
            name,
            edition,
            overrides,
            system,
            plant,
            circuits,
            findings,
            readings,
            passed,
            purchases,
            meter,
            commissioning,
            switching,
            labels,
            maintenance,
            assumptions,
            recalled,
            not_covered,
        } = source;
        Self {
            schema: (&()).into(),
            exit_code: source.exit_code(),
            counts: Counts {
                danger_count: source.count(Grave::Danger),
                nonconforming_count: source.count(Grave::Nonconforming),
                not_checked_count: source.count(Grave::NotChecked),
                advice_count: source.count(Grave::Advice),
            },
            site: Site { name, system: texts(system) },
            rules: Rules { edition, overrides: texts(overrides) },
            plant: plant.into(),
            circuits: list(circuits),
            findings: list(findings),
            readings: list(readings),
            passed: texts(passed),
            purchases: list(purchases),
            purchase_total: source.purchase_total().as_ref().map(Into::into),
            meter: meter.into(),
            commissioning: list(commissioning),
            switching: list(switching),
            labels: list(labels),
            maintenance: list(maintenance),
            assumptions: texts(assumptions),
            recalled: texts(recalled),
            not_covered: texts(not_covered),
            cautions: CAUTIONS.to_vec(),
        }
    }
}

impl<'a> From<&'a finding::Finding> for Finding<'a> {
    fn from(source: &'a finding::Finding) -> Self {
        let finding::Finding { severity, rule, slug, place, line, text, source, remedy } = source;
        Self { severity: severity.into(), rule, slug, place, line: line_of(*line), text, source, remedy }
    }
}
