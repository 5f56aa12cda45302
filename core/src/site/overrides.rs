//! The user's own values that are looser than what his rule set says: told, and by how much.

use alloc::format;
use alloc::string::{String, ToString};

use uom::si::electric_current::ampere;
use uom::si::length::meter;
use uom::si::ratio::percent;

use super::finding::{Findings, Severity, digits};
use super::model::CircuitEntry;
use super::plan::{Plan, Planned};
use super::system::Site;
use crate::circuit::{Run, capacity};
use crate::rules::{Overrides, Rules};

const PLACE: &str = "[rules.override]";
const REMEDY: &str = "take it out, unless you can show why it holds here";
/// The last bit of a quotient is no looser value.
const SAME: f64 = 1.0 + 1e-9;

/// Overrides, and the drop limits of single circuits.
pub(super) fn overrides(site: &Site, plan: &Plan, found: &mut Findings) {
    let own = site.rules.overrides();
    let Ok(set) = Rules::named(site.rules.set().word) else { return };
    let mut looser = |text: String| {
        found.add(Severity::Advice, "R4", "override-looser", PLACE, 0, text, None, REMEDY);
    };
    if let Some(value) = own.continuous_factor
        && value * SAME < set.continuous_factor().value
    {
        let theirs = set.continuous_factor().value;
        looser(format!(
            "continuous_factor {} in place of {}: conductors and devices may be {} % smaller",
            digits(value),
            digits(theirs),
            digits(100.0 * (1.0 - value / theirs))
        ));
    }
    for (name, value, without) in [
        ("engine_space", own.engine_space, Overrides { engine_space: None, ..*own }),
        ("bundling", own.bundling, Overrides { bundling: None, ..*own }),
    ] {
        if let (Some(value), Ok(without)) = (value, set.with_overrides(without))
            && let Some(told) = derating(site, plan, without)
        {
            looser(format!("{name} {}: {told}", digits(value)));
        }
    }
    if own.device_ratio.is_some()
        && let Ok(without) = set.with_overrides(Overrides { device_ratio: None, ..*own })
        && let Some(told) = devices(site, plan, without)
    {
        looser(told);
    }
    if own.aluminium == Some(true) {
        found.add(
            Severity::Advice,
            "R18",
            "aluminium-admitted",
            PLACE,
            0,
            "aluminium is admitted, which every set here refuses: its joints loosen and corrode, and no table of \
             its capacity is held"
                .to_string(),
            None,
            "use copper, or lugs and paste made for aluminium, and have it judged by the standard's own table",
        );
    }
    distance(site, plan, set, found);
    drops(site, plan, set, found);
}

fn planned<'a>(site: &'a Site, plan: &'a Plan) -> impl Iterator<Item = (&'a CircuitEntry, &'a Planned)> {
    site.circuits.iter().zip(&plan.circuits).filter_map(|(c, p)| Some((c, p.as_ref()?)))
}

/// The circuit whose capacity a factor raises most above what the set without it gives.
fn derating(site: &Site, plan: &Plan, without: Rules) -> Option<String> {
    let mut worst: Option<(f64, String)> = None;
    for (circuit, planned) in planned(site, plan) {
        let Ok(own) = capacity(&planned.run, &planned.positive, None) else { continue };
        let own = own.corrected.get::<ampere>();
        let theirs = capacity(&Run { rules: without, ..planned.run }, &planned.positive, None);
        let (ratio, told) = match theirs.map(|a| a.corrected.get::<ampere>()) {
            Ok(theirs) => (
                own / theirs,
                format!(
                    "circuit \"{}\" counts with {} A where the set gives {} A, {} times as much",
                    circuit.name,
                    digits(own),
                    digits(theirs),
                    digits(own / theirs)
                ),
            ),
            Err(error) => (
                f64::INFINITY,
                format!(
                    "circuit \"{}\" counts with {} A where the set gives none: {error}",
                    circuit.name,
                    digits(own)
                ),
            ),
        };
        if ratio > worst.as_ref().map_or(SAME, |(most, _)| *most) {
            worst = Some((ratio, told));
        }
    }
    worst.map(|(_, told)| told)
}

/// The circuit whose device may exceed most what the set admits.
fn devices(site: &Site, plan: &Plan, without: Rules) -> Option<String> {
    let mut worst: Option<(f64, String)> = None;
    for (circuit, planned) in planned(site, plan) {
        let Some(ampacity) = &planned.judgement.ampacity else { continue };
        let size = planned.positive.size;
        let own = site.rules.device_limit(size, ampacity.corrected).most.get::<ampere>();
        let theirs = without.device_limit(size, ampacity.corrected).most.get::<ampere>();
        if own / theirs > worst.as_ref().map_or(SAME, |(most, _)| *most) {
            let told = format!(
                "device_ratio: circuit \"{}\" may have a device of {} A where the set admits {} A, {} times as much",
                circuit.name,
                digits(own),
                digits(theirs),
                digits(own / theirs)
            );
            worst = Some((own / theirs, told));
        }
    }
    worst.map(|(_, told)| told)
}

/// Unprotected length (R7).
fn distance(site: &Site, plan: &Plan, set: Rules, found: &mut Findings) {
    let Some(own) = site.rules.overrides().unfused.map(|l| l.get::<meter>()) else { return };
    let mut least: Option<(f64, &str)> = None;
    let mut unheld: Option<&str> = None;
    for (circuit, planned) in planned(site, plan).filter(|(_, p)| !p.fitted.is_empty()) {
        let from_post = planned.flow.at_bank;
        match set.unfused_length(circuit.sheathed, from_post).map(|l| l.value.get::<meter>()) {
            Some(theirs) if own > theirs * SAME && least.is_none_or(|(m, _)| theirs < m) => {
                least = Some((theirs, &circuit.name));
            }
            Some(_) => {}
            None => unheld = unheld.or(Some(&circuit.name)),
        }
    }
    let text = match (least, unheld) {
        (Some((theirs, name)), _) => format!(
            "unfused_length {} m in place of {} m at circuit \"{name}\", {} times as much",
            digits(own),
            digits(theirs),
            digits(own / theirs)
        ),
        (None, Some(name)) => {
            format!("unfused_length {} m where the set holds no length for circuit \"{name}\"", digits(own))
        }
        (None, None) => return,
    };
    found.add(Severity::Advice, "R7", "unfused-length-looser", PLACE, 0, text, None, REMEDY);
}

/// Voltage drop (R17): the override against every limit of the set, a circuit's own where the set requires one.
fn drops(site: &Site, plan: &Plan, set: Rules, found: &mut Findings) {
    let mut told = false;
    for (circuit, planned) in planned(site, plan) {
        let theirs = set.drop_limit(planned.run.usage);
        let most = theirs.ratio.get::<percent>();
        let (place, line, own) = match (circuit.drop, site.rules.overrides().drop) {
            (Some(own), _) if theirs.required => (format!("circuit \"{}\"", circuit.name), circuit.line, own),
            (None, Some(own)) if !told => (PLACE.to_string(), 0, own),
            _ => continue,
        };
        let own = own.get::<percent>();
        if own <= most * SAME {
            continue;
        }
        told |= circuit.drop.is_none();
        found.add(
            Severity::Advice,
            "R17",
            "drop-limit-looser",
            place,
            line,
            format!(
                "drop {} % in place of {} % of the set for circuit \"{}\", {} times as much",
                digits(own),
                digits(most),
                circuit.name,
                digits(own / most)
            ),
            Some(theirs.citation),
            REMEDY,
        );
    }
}
