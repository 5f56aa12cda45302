//! The sheets in words: tables to be filled in at the site.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::fmt;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::{millivolt, volt};
use uom::si::electrical_resistance::milliohm;
use uom::si::ratio::percent;

use super::commissioning::{Expected, Stage, Step};
use super::dead::RunTest;
use super::loaded::{Driven, LoadedTest};
use super::maintenance::Every;
use super::meter::{METER, Meter};
use super::switching::Direction;
use crate::quantity::{ElectricCurrent, ElectricPotential, Figures};
use crate::site::finding::{Severity, digits};
use crate::site::report::Report;
use crate::site::text::{heading, printable, short};

/// Prints what to buy and the sheets.
pub(in crate::site) fn print(report: &Report, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    bought(report, f)?;
    let dangers = report.count(Severity::Danger);
    if dangers > 0 && !report.commissioning.is_empty() {
        heading(f, "Before anything is switched on")?;
        writeln!(
            f,
            "  {dangers} dangers are open above. The sheets below take the document as it stands, its set points too:\n  mend the \
             dangers first, then make the sheets anew."
        )?;
    }
    commissioning(report, f)?;
    switching(report, f)?;
    labels(report, f)?;
    maintenance(report, f)
}

fn bought(report: &Report, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    if report.purchases.is_empty() {
        return Ok(());
    }
    heading(f, "To buy")?;
    for p in &report.purchases {
        let price = p.price.map_or_else(String::new, |x| format!("  {x:.2}"));
        let places = p.places.iter().map(|s| printable(s)).collect::<Vec<_>>().join(", ");
        let places = if places.is_empty() { places } else { format!(": {places}") };
        let shelf = match p.shelf {
            Some(held) if held < p.amount => format!("  (only {} {} on the shelf)", digits(held), p.unit),
            _ => String::new(),
        };
        let what = printable(&p.what);
        writeln!(f, "  {:>7} {:<4} {what}{places}{price}{shelf}", digits(p.amount), p.unit)?;
    }
    match report.purchase_total() {
        Some(total) if total.without_price == 0 => writeln!(f, "  in all {:.2}", total.sum),
        Some(total) => writeln!(
            f,
            "  {:.2} in all for what has a price; {} of {} lines have none",
            total.sum,
            total.without_price,
            report.purchases.len()
        ),
        None => Ok(()),
    }
}

fn commissioning(report: &Report, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    let steps = &report.commissioning;
    heading(f, "Commissioning: measured, date and name to be filled in")?;
    writeln!(f, "  {}", meter_words(&report.meter))?;
    for (stage, head) in [
        (Stage::Dead, "Before power"),
        (Stage::OpenCircuit, "With power, no load; in the switching order below"),
        (Stage::Loaded, "Under load"),
    ] {
        let of_stage: Vec<&Step> = steps.iter().filter(|s| s.stage() == stage).collect();
        if of_stage.is_empty() {
            continue;
        }
        writeln!(f, "\n  {head}    date ____________  by ____________")?;
        let runs: Vec<&RunTest> =
            of_stage.iter().filter_map(|s| if let Step::Run(run) = s { Some(run) } else { None }).collect();
        let loaded: Vec<&LoadedTest> = of_stage
            .iter()
            .filter_map(|s| if let Step::Loaded(test) = s { Some(test.as_ref()) } else { None })
            .collect();
        if !loaded.is_empty() {
            under_load(f, &loaded)?;
        }
        for step in of_stage {
            single(f, step)?;
        }
        if !runs.is_empty() {
            dead(f, &runs)?;
        }
    }
    Ok(())
}

fn meter_words(meter: &Meter) -> String {
    let millivolts = |v: ElectricPotential| digits(v.get::<millivolt>());
    let amperes = |a: ElectricCurrent| digits(a.get::<ampere>());
    format!(
        "tolerances include a meter of {} % and two last digits: {} mV up to {} mV, {} mV up to {} V; direct current in \
         line {} % and {} A up to {} A, clamp {} % and {} A ({METER})",
        digits(meter.volts.accuracy.get::<percent>()),
        millivolts(meter.millivolts.resolution),
        millivolts(meter.millivolts.up_to),
        millivolts(meter.volts.resolution),
        digits(meter.volts.up_to.get::<volt>()),
        digits(meter.in_line.accuracy.get::<percent>()),
        amperes(meter.in_line.resolution),
        amperes(meter.in_line.up_to),
        digits(meter.clamp.accuracy.get::<percent>()),
        amperes(meter.clamp.resolution)
    )
}

fn single(f: &mut fmt::Formatter<'_>, step: &Step) -> fmt::Result {
    match step {
        Step::Task { place, what, .. } if place.is_empty() => writeln!(f, "    [ ] {}", printable(what)),
        Step::Task { place, what, .. } => writeln!(f, "    [ ] {}: {}", printable(place), printable(what)),
        Step::Voltage { place, what, expected, .. } => {
            let range = expected.map_or_else(String::new, |e| format!(", {} V", between(&e)));
            writeln!(f, "    [ ] {}: {}{range}  ________ V", printable(place), printable(what))
        }
        Step::Current { place, what, greatest, .. } => {
            let most =
                greatest.map_or_else(String::new, |a| format!(", at most {} A", digits(a.get::<ampere>())));
            writeln!(f, "    [ ] {}: {}{most}  ________ A", printable(place), printable(what))
        }
        Step::Run(_) | Step::Loaded(_) => Ok(()),
    }
}

fn between(expected: &Expected<ElectricPotential>) -> String {
    let volts = |v: ElectricPotential| digits(v.get::<volt>());
    format!("{} to {}", volts(expected.least), volts(expected.greatest))
}

fn dead(f: &mut fmt::Formatter<'_>, runs: &[&RunTest]) -> fmt::Result {
    let width = 18;
    writeln!(
        f,
        "    {:<width$} {:<30} {:<8} {:<8} {:<10} N·m at both ends, maker's / set",
        "circuit", "from – to", "polarity", "through", "insulation"
    )?;
    for run in runs {
        writeln!(
            f,
            "    {:<width$} {:<30} {:<8} {:<8} {:<10} ____ / ____   ____ / ____",
            short(&printable(&run.circuit), width),
            short(&format!("{} – {}", printable(&run.from), printable(&run.to)), 30),
            "[ ]",
            "[ ]",
            "_____ MΩ"
        )?;
    }
    Ok(())
}

fn under_load(f: &mut fmt::Formatter<'_>, tests: &[&LoadedTest]) -> fmt::Result {
    let width = 18;
    writeln!(
        f,
        "    each circuit with its own loads running and no other; the drop over both conductors, device and joints; for \
         another current in proportion"
    )?;
    writeln!(
        f,
        "    {:<width$} {:>13} {:>8} {:>9} {:>10} {:>15}  {:<25}",
        "circuit", "A", "mV", "most mV", "most mV/A", "V at end", "measured A, mV, V"
    )?;
    for test in tests {
        writeln!(
            f,
            "    {:<width$} {:>13} {:>8} {:>9} {:>10} {:>15}  _______ _______ _______",
            short(&printable(&test.circuit), width),
            amperes(test),
            test.drop.value.map_or_else(String::new, |v| figures(v.get::<millivolt>())),
            figures(test.drop.greatest.get::<millivolt>()),
            figures(test.refused_resistance.get::<milliohm>()),
            test.end.map_or_else(String::new, |e| between(&e)),
        )?;
    }
    let sources: Vec<String> = tests.iter().filter_map(|t| t.source).fold(Vec::new(), |mut list, v| {
        let words = digits(v.get::<volt>());
        if !list.contains(&words) {
            list.push(words);
        }
        list
    });
    if !sources.is_empty() {
        writeln!(
            f,
            "    V at end: with {} V at the source's terminals; else add what it stands above that, or take off what below",
            sources.join(" or ")
        )?;
    }
    joints(f, tests)
}

/// `66.8 to 83.5`, or `up to 30.8` of a source.
fn amperes(test: &LoadedTest) -> String {
    let greatest = digits(test.current.greatest.get::<ampere>());
    match test.driven {
        Driven::Source => {
            format!("up to {}", test.current.value.map_or(greatest, |a| digits(a.get::<ampere>())))
        }
        Driven::Loads | Driven::Stated => {
            let value = test.current.value.map_or_else(String::new, |a| digits(a.get::<ampere>()));
            let half = test.current.value.map_or(0.0, |a| (test.current.greatest - a).get::<ampere>());
            format!("{value} ± {}", tenths(half))
        }
    }
}

/// Three digits are enough of what a meter shows.
fn figures(value: f64) -> String {
    if value >= 99.95 {
        format!("{value:.0}")
    } else if value >= 9.995 {
        format!("{value:.1}")
    } else {
        Figures(value).to_string()
    }
}

/// A current that is needed: two digits, rounded up, none below 0.01 A.
fn two_up(amps: f64) -> String {
    let places = if amps > 10.0 {
        1.0
    } else if amps > 1.0 {
        10.0
    } else {
        100.0
    };
    digits(libm::ceil(amps * places - 1e-9) / places)
}

fn tenths(value: f64) -> String {
    if value >= 9.95 {
        format!("{value:.0}")
    } else if value >= 0.95 {
        format!("{value:.1}")
    } else {
        format!("{value:.2}")
    }
}

fn joints(f: &mut fmt::Formatter<'_>, tests: &[&LoadedTest]) -> fmt::Result {
    let width = 18;
    writeln!(
        f,
        "    {:<width$} {:<16} {:>8} {:>12} {:>14} {:>14}  worst mV",
        "joint in", "which", "mV each", "refused over", "1 mΩ shows at", "refusal needs"
    )?;
    let mut weak = false;
    for test in tests {
        let mut name = short(&printable(&test.circuit), width);
        let amps = test.current.value.unwrap_or_default();
        for joint in &test.joints {
            let count = if joint.count > 1 { format!("{} ", joint.count) } else { String::new() };
            let at = |a: Option<ElectricCurrent>| {
                a.map_or_else(|| "hidden".to_string(), |a| format!("{} A", two_up(a.get::<ampere>())))
            };
            let too_low = joint.current_needed.is_none_or(|needed| needed > amps);
            weak |= too_low;
            writeln!(
                f,
                "    {name:<width$} {:<16} {:>8} {:>12} {:>14} {:>14}  _______",
                short(&format!("{count}{}", printable(&joint.joint)), 16),
                figures(joint.voltage.value.unwrap_or_default().get::<millivolt>()),
                figures(joint.refused_above.get::<millivolt>()),
                at(joint.one_milliohm),
                format!("{}{}", at(joint.current_needed), if too_low { " *" } else { "" }),
            )?;
            name.clear();
        }
    }
    if weak {
        writeln!(f, "    * more than the test current: put on more load, or the reading decides nothing")?;
    }
    Ok(())
}

fn switching(report: &Report, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    for (direction, head) in [
        (Direction::Connect, "Switching on, in this order"),
        (Direction::Disconnect, "Switching off, in this order"),
    ] {
        heading(f, head)?;
        let steps = report.switching.iter().filter(|s| s.direction == direction);
        for (number, step) in steps.enumerate() {
            writeln!(f, "  {:>2}  {}", number + 1, printable(&step.what))?;
        }
    }
    Ok(())
}

fn labels(report: &Report, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    if report.labels.is_empty() {
        return Ok(());
    }
    heading(f, "Labels, by the line")?;
    for label in &report.labels {
        let lines: Vec<String> = label.lines.iter().map(|l| printable(l)).collect();
        writeln!(f, "  {} × {}", label.count, lines.join(" | "))?;
    }
    Ok(())
}

fn maintenance(report: &Report, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    if report.maintenance.is_empty() {
        return Ok(());
    }
    heading(f, "Maintenance (intervals common practice, no source; the makers' own come first)")?;
    let mut last = None;
    for task in &report.maintenance {
        if last != Some(task.every) {
            writeln!(f, "  {}", every_words(task.every))?;
            last = Some(task.every);
        }
        writeln!(f, "    - {}: {}", printable(&task.place), printable(&task.what))?;
    }
    Ok(())
}

fn every_words(every: Every) -> String {
    match every {
        Every::RunningHours(hours) => format!("every {hours} h of running"),
        Every::Months(1) => "every month".to_string(),
        Every::Months(12) => "every year".to_string(),
        Every::Months(months) => format!("every {months} months"),
    }
}
