//! The report in words: plain text, one line a fact.

use alloc::format;
use alloc::string::{String, ToString};
use core::fmt::{self, Write as _};

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::milliohm;
use uom::si::length::meter;
use uom::si::power::watt;
use uom::si::ratio::percent;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::finding::{Severity, digits};
use super::report::{CircuitLine, DeviceLine, Report};
use crate::cable::{Class, Coating, Conductor, Material};
use crate::circuit::{Outcome, lower_bound, upper_bound};
use crate::citation::Seen;
use crate::device::{Polarity, Supply};
use crate::protection::{Guard, Pole};
use crate::rules::{Check, Installation, Key, Space};

/// Stands under every report (DESIGN 11).
pub(super) const CAUTIONS: [&str; 5] = [
    "A bank stores enough energy to melt tools: remove jewellery, insulate tools, cover terminals.",
    "A DC arc does not go out by itself: never open a joint, fuse or connector under load.",
    "Lead-acid and nickel banks give off hydrogen while they charge: ventilate, no sparks.",
    "Isolate, secure against switching on, and prove dead before work.",
    "Local codes and licensed practice decide; the text of each standard governs, in the edition in force.",
];

impl fmt::Display for Report {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        writeln!(f, "{}", printable(&self.name))?;
        writeln!(f, "rules: {}", self.edition)?;
        for line in &self.overrides {
            writeln!(f, "       {line} (the user's own value)")?;
        }
        for line in &self.system {
            writeln!(f, "{}", printable(line))?;
        }
        super::plant_text::print(&self.plant, f)?;
        self.summary(f)?;
        self.found(f)?;
        super::reading::section(&self.readings, f)?;
        heading(f, "Circuits in detail")?;
        for (number, circuit) in self.circuits.iter().enumerate() {
            writeln!(f)?;
            detail(f, number + 1, circuit)?;
        }
        list(f, "Passed on boards, parts, lugs and consumers", &self.passed)?;
        super::sheet::text::print(self, f)?;
        list(f, "Taken where the document says nothing", &self.assumptions)?;
        list(
            f,
            "Rests on recalled figures: conforms to the recalled value only; verify on the page",
            &self.recalled,
        )?;
        list(f, "Not checked here", &self.not_covered)?;
        heading(f, "Cautions")?;
        for caution in CAUTIONS {
            writeln!(f, "  - {caution}")?;
        }
        Ok(())
    }
}

impl Report {
    fn summary(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        heading(f, "Circuits")?;
        writeln!(
            f,
            "  {:<3} {:<18} {:<30} {:>7}  {:<9} {:<20} {:>6} {:>7}",
            "no", "circuit", "from – to", "A", "size", "device", "drop", "V end"
        )?;
        for (number, c) in self.circuits.iter().enumerate() {
            let device = match (c.devices.first(), &c.guarded_by) {
                (Some(d), _) => {
                    format!("{} {} A", d.guard.device.family, digits(d.guard.device.rating.get::<ampere>()))
                }
                (None, Some(above)) => format!("of {}", printable(above)),
                (None, None) => "none".to_string(),
            };
            writeln!(
                f,
                "  {:<3} {:<18} {:<30} {:>7}  {:<9} {:<20} {:>5.1}% {:>7.2}",
                number + 1,
                short(&printable(&c.name), 18),
                short(&format!("{} – {}", printable(&c.from), printable(&c.to)), 30),
                digits(c.judgement.current.get::<ampere>()),
                c.positive.size.to_string(),
                short(&device, 20),
                c.judgement.path_drop.get::<percent>(),
                c.judgement.end_voltage.get::<volt>()
            )?;
        }
        Ok(())
    }

    fn found(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        heading(f, "Findings")?;
        let counts = [Severity::Danger, Severity::Nonconforming, Severity::NotChecked, Severity::Advice]
            .map(|s| format!("{} {}", self.count(s), s.word().to_lowercase()));
        writeln!(f, "  {}", counts.join(", "))?;
        let mut last = None;
        for finding in &self.findings {
            if last != Some(finding.severity) {
                writeln!(f, "  {}", finding.severity.word())?;
                last = Some(finding.severity);
            }
            writeln!(f, "    {}", printable(&finding.to_string()))?;
        }
        Ok(())
    }
}

fn detail(f: &mut fmt::Formatter<'_>, number: usize, c: &CircuitLine) -> fmt::Result {
    let j = &c.judgement;
    let row = |f: &mut fmt::Formatter<'_>, head: &str, text: &str| writeln!(f, "    {head:<12} {text}");
    writeln!(f, "  {number}  {}: {} – {}", printable(&c.name), printable(&c.from), printable(&c.to))?;
    let other =
        if c.negative == c.positive { String::new() } else { format!(", negative {}", c.negative.size) };
    let back = if c.chassis {
        "chassis".to_string()
    } else {
        format!("{} m", digits(c.run.negative_length.get::<meter>()))
    };
    let way = match c.run.space {
        Space::Ordinary => "",
        Space::Engine => ", engine space",
        Space::Rooftop => ", above a roof",
    };
    row(
        f,
        "conductor",
        &format!(
            "{}{other}, {}{way}, {} conductors together, {} °C; {} m + {back}; {}",
            conductor_words(&c.positive),
            installation_word(c.run.installation),
            c.run.bundled_conductors,
            digits(c.run.ambient.get::<degree_celsius>()),
            digits(c.run.positive_length.get::<meter>()),
            if c.designed { "designed" } else { "stated" }
        ),
    )?;
    row(
        f,
        "current",
        &format!(
            "{} A in the worst hour, {} A of it for three hours or more",
            digits(j.current.get::<ampere>()),
            digits(j.continuous.get::<ampere>())
        ),
    )?;
    if let Some(a) = &j.ampacity {
        let mut words =
            format!("{} A ({}, column {}, {})", digits(a.base.value), a.base.citation, a.column, a.row);
        for factor in &a.factors {
            {
                // Writing to a String cannot fail.
                let _ = write!(words, " × {} {}", digits(factor.value), factor.name);
            }
        }
        {
            // Writing to a String cannot fail.
            let _ = write!(words, " = {} A", digits(a.corrected.get::<ampere>()));
        }
        let american = matches!(c.run.rules.set().key, Key::Us | Key::CraftUs);
        row(f, if american { "ampacity" } else { "capacity" }, &words)?;
    }
    if let Some(remark) = &c.practice {
        row(f, "practice", remark)?;
    }
    for d in &c.devices {
        let fault = d.greatest_fault.map_or_else(
            || "greatest fault current not known".to_string(),
            |a| format!("greatest fault current {} A", digits(upper_bound(a.get::<ampere>()))),
        );
        row(
            f,
            "device",
            &format!(
                "{}: {}, {}{} \"{}\"; {fault}; {}",
                printable(&d.name),
                device_words(&d.guard, d.specified),
                match d.pole {
                    Pole::Positive => "positive pole, ",
                    Pole::Negative => "negative pole, ",
                    Pole::Both => "both poles, ",
                },
                d.from_source
                    .map_or_else(|| "at".to_string(), |l| format!("{} m from", digits(l.get::<meter>()))),
                printable(&d.at),
                if d.designed { "designed" } else { "stated" }
            ),
        )?;
    }
    if let (true, Some(above)) = (c.devices.is_empty(), &c.guarded_by) {
        row(f, "device", &format!("none of its own; guarded by that of \"{}\"", printable(above)))?;
    }
    if let Some(d) = c.devices.first()
        && let Ok(least) =
            c.run.rules.protective_conductor(c.positive.size, d.guard.device.rating, c.positive.material)
    {
        let words =
            format!("where there is a protective conductor, at least {} ({})", least.value, least.citation);
        row(f, "protective", &words)?;
    }
    let devices = c.devices.iter().filter_map(|d| d.least_fault);
    let least = devices
        .chain(j.least_fault)
        .reduce(|a, b| if b < a { b } else { a })
        .map_or_else(|| "not known".to_string(), |a| format!("{} A", digits(lower_bound(a.get::<ampere>()))));
    row(
        f,
        "loop",
        &format!(
            "{} mΩ with joints, conductor at {:.0} °C; least fault current {least}",
            digits(j.resistance.get::<milliohm>()),
            j.temperature.get::<degree_celsius>()
        ),
    )?;
    row(
        f,
        "drop",
        &format!(
            "{} V here, {:.2} % of nominal from the source; {} W lost; {:.2} V at the end at cut-off",
            digits(j.drop.get::<volt>()),
            j.path_drop.get::<percent>(),
            digits(j.loss.get::<watt>()),
            j.end_voltage.get::<volt>()
        ),
    )?;
    for d in &c.devices {
        if let (Some(actual), Some(limit)) = (d.from_source, d.distance_limit) {
            let most = limit.value.get::<meter>();
            let actual = actual.get::<meter>();
            row(
                f,
                if actual <= most { "passed" } else { "FAILED" },
                &format!(
                    "conductor between \"{}\" and {}: {} m, at most {} m{} ({})",
                    printable(&d.at),
                    printable(&d.name),
                    digits(actual),
                    digits(most),
                    if limit.citation.seen == Seen::Recalled { ": the recalled value; verify" } else { "" },
                    limit.citation
                ),
            )?;
        }
    }
    for (d, judged) in c.devices.iter().skip(1).zip(&c.further) {
        for checked in judged.checks.iter().filter(|x| is_of_device(x.check)) {
            let mark = match checked.outcome {
                Outcome::Passed => "passed",
                Outcome::Failed => "FAILED",
                Outcome::NotChecked => "not checked",
            };
            row(f, mark, &format!("{}: {checked}", printable(&d.name)))?;
        }
    }
    if c.collapsed {
        row(
            f,
            "no solution",
            "the line cannot carry its load: current, drop and volts stand for a constant current",
        )?;
    }
    row(f, "governing", &printable(&c.governing))?;
    for (size, why) in &c.refused {
        row(f, "not taken", &format!("{size}: {}", printable(why)))?;
    }
    for checked in &j.checks {
        let bought = c.devices.first().is_some_and(|d| is_bought(d, checked.check));
        let advice = is_recommended(c, checked.check);
        let mark = match checked.outcome {
            Outcome::Failed if advice => "advice",
            Outcome::Passed if bought => {
                row(f, "to be bought", &format!("{}: {}", checked.what, checked.numbers()))?;
                continue;
            }
            Outcome::Passed => "passed",
            Outcome::Failed => "FAILED",
            Outcome::NotChecked => "not checked",
        };
        row(f, mark, &checked.to_string())?;
    }
    Ok(())
}

/// A check that tells what to buy, since nothing is known of a part yet.
pub(super) fn is_bought(device: &DeviceLine, check: Check) -> bool {
    device.specified && matches!(check, Check::DeviceSupply | Check::Breaking)
}

/// A check against a limit that the rule set only recommends.
pub(super) fn is_recommended(circuit: &CircuitLine, check: Check) -> bool {
    let run = &circuit.run;
    check == Check::Drop && run.drop.is_none() && !run.rules.drop_limit(run.usage).required
}

/// Checks that concern a device rather than its conductor.
pub(super) const fn is_of_device(check: Check) -> bool {
    matches!(
        check,
        Check::Breaking
            | Check::DeviceCarries
            | Check::DeviceStart
            | Check::DeviceProtects
            | Check::DeviceSupply
            | Check::LeastFault
            | Check::OpensLate
            | Check::Termination
            | Check::Withstand
    )
}

pub(super) fn heading(f: &mut fmt::Formatter<'_>, text: &str) -> fmt::Result {
    writeln!(f, "\n{text}")
}

fn list(f: &mut fmt::Formatter<'_>, head: &str, lines: &[String]) -> fmt::Result {
    if lines.is_empty() {
        return Ok(());
    }
    heading(f, head)?;
    for line in lines {
        writeln!(f, "  - {}", printable(line))?;
    }
    Ok(())
}

/// Names come from a file: control characters must not reach a terminal.
pub(super) fn printable(text: &str) -> String {
    text.chars().map(|c| if c.is_control() { '\u{fffd}' } else { c }).collect()
}

/// Cuts to a number of characters.
pub(super) fn short(text: &str, most: usize) -> String {
    if text.chars().count() <= most {
        return text.to_string();
    }
    let mut cut: String = text.chars().take(most.saturating_sub(1)).collect();
    cut.push('…');
    cut
}

/// `16 mm2 copper, class 5, PVC 70 degC`.
pub(super) fn conductor_words(conductor: &Conductor) -> String {
    let metal = match conductor.material {
        Material::Copper => "copper",
        Material::Aluminium => "aluminium",
        Material::CopperCladAluminium => "copper-clad aluminium",
    };
    let class = match conductor.class {
        Class::Solid => "class 1",
        Class::Stranded => "class 2",
        Class::Flexible => "class 5",
        Class::ExtraFlexible => "class 6",
    };
    let coating = match conductor.coating {
        Coating::Plain => "",
        Coating::Tinned => " tinned",
    };
    format!("{} {metal}{coating} {class}, {}", conductor.size, conductor.insulation)
}

/// `gG 63 A, 250 V DC, 25 kA`.
pub(super) fn device_words(guard: &Guard, specified: bool) -> String {
    let device = guard.device;
    let mut words = format!("{} {} A", device.family, digits(device.rating.get::<ampere>()));
    let least = if specified { "at least " } else { "" };
    // Writing to a String cannot fail.
    let _ = match device.supply {
        Supply::Dc(rated) => write!(words, ", {least}{} V DC", digits(rated.get::<volt>())),
        Supply::PerPole(each, poles) => {
            write!(words, ", {poles} poles of {} V DC", digits(each.get::<volt>()))
        }
        Supply::AcOnly => write!(words, ", AC only"),
        Supply::NotStated => write!(words, ", DC voltage not stated"),
    };
    let _ = match device.breaking {
        Some(amps) => write!(words, ", breaks {least}{} kA", digits(amps.get::<ampere>() / 1000.0)),
        None => write!(words, ", what it breaks on DC not stated"),
    };
    if device.polarity == Polarity::Marked {
        words.push_str(", polarity marked");
    }
    words
}

/// The installation in words.
pub(super) const fn installation_word(installation: Installation) -> &'static str {
    match installation {
        Installation::FreeAir => "in free air, touching",
        Installation::SpacedFreeAir => "in free air, spaced",
        Installation::CableFreeAir => "cable in free air",
        Installation::Clipped => "clipped to a surface",
        Installation::Conduit => "in conduit",
        Installation::CableInConduit => "cable in conduit",
        Installation::InsulatedWall => "in conduit in an insulated wall",
        Installation::CableInInsulatedWall => "cable in an insulated wall",
        Installation::Duct => "in a duct in the ground",
        Installation::Buried => "in the ground",
        Installation::Loom => "in a loom",
    }
}
