//! The plant in words: banks, energy of the months, arrays, inverters, sources.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;
use core::fmt;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::energy::watt_hour;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::time::{day, hour};

use super::describe::PlantLines;
use super::finding::digits;
use super::lines::{ArrayLine, BankLine, DemandLine, GeneratorLine, InverterLine, Rejected, Step};
use super::text::printable;
use crate::citation::Seen;
use crate::quantity::Energy;

/// Months as they head a column.
pub(super) const MONTHS: [&str; 12] =
    ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];

/// Prints the plant; nothing where only wiring is described.
pub(super) fn print(plant: &PlantLines, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    if plant.banks.is_empty() {
        return Ok(());
    }
    writeln!(f, "\nBank, array and sources")?;
    for line in &plant.banks {
        bank(line, f)?;
    }
    for line in &plant.arrays {
        array(line, f)?;
    }
    for line in &plant.inverters {
        inverter(line, f)?;
    }
    for line in &plant.generators {
        generator(line, f)?;
    }
    for line in &plant.demands {
        months(line, f)?;
    }
    Ok(())
}

fn row(f: &mut fmt::Formatter<'_>, head: &str, text: &str) -> fmt::Result {
    writeln!(f, "    {head:<12} {}", printable(text))
}

fn steps(f: &mut fmt::Formatter<'_>, steps: &[Step]) -> fmt::Result {
    for step in steps {
        let unit = if step.unit.is_empty() { String::new() } else { format!(" {}", step.unit) };
        let source = step.citation.map_or_else(String::new, |c| match c.seen {
            Seen::Stated => format!(" ({})", c.document),
            _ => format!(" ({c})"),
        });
        row(f, "step", &format!("{}: {}{unit}{source}", step.what, digits(step.value)))?;
    }
    Ok(())
}

fn rejected(f: &mut fmt::Formatter<'_>, list: &[Rejected]) -> fmt::Result {
    for one in list {
        row(f, "not taken", &format!("{}: {}", one.what, one.why))?;
    }
    Ok(())
}

const fn how(designed: bool) -> &'static str {
    if designed { "designed" } else { "stated" }
}

fn bank(line: &BankLine, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    writeln!(f, "\n  bank {}", printable(&line.name))?;
    let volts = |v: crate::quantity::ElectricPotential| digits(v.get::<volt>());
    let made = match (&line.battery, line.series) {
        (Some(name), Some(series)) => format!(
            ", {} of \"{name}\": {series} in series, {} {}",
            series.saturating_mul(line.strings),
            line.strings,
            if line.strings == 1 { "string" } else { "strings" }
        ),
        (None, Some(series)) => format!(", {series} in series, {} strings", line.strings),
        _ if line.strings > 1 => format!(", {} strings", line.strings),
        _ => String::new(),
    };
    row(
        f,
        "battery",
        &format!(
            "{} {} V, {} Ah{made}; {}",
            line.chemistry.word(),
            volts(line.nominal),
            digits(line.capacity.get::<ampere_hour>()),
            how(line.designed)
        ),
    )?;
    let mut points: Vec<String> = Vec::new();
    for (what, value) in
        [("absorption", line.absorption), ("float", line.float), ("equalising", line.equalise)]
    {
        if let Some(value) = value {
            points.push(format!("{what} {} V", volts(value)));
        }
    }
    row(
        f,
        "voltages",
        &format!(
            "{} at 25 °C; {} V at its highest, {} V at least",
            points.join(", "),
            volts(line.highest),
            volts(line.cut_off)
        ),
    )?;
    if let Some(off) = line.disconnect {
        let back = line.reconnect.map_or_else(String::new, |v| format!(", reconnect at {} V", volts(v)));
        row(f, "disconnect", &format!("loads at {} V{back}", volts(off)))?;
    }
    if let (Some(needed), Some(lasts)) = (line.needed, line.autonomy) {
        row(
            f,
            "capacity",
            &format!(
                "{} Ah needed; lasts {:.1} d on the greatest day's demand, new and at 25 °C",
                digits(needed.get::<ampere_hour>()),
                lasts.get::<day>()
            ),
        )?;
    }
    steps(f, &line.steps)?;
    rejected(f, &line.rejected)
}

fn array(line: &ArrayLine, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    writeln!(f, "\n  array {}", printable(&line.name))?;
    row(
        f,
        "modules",
        &format!(
            "{} of \"{}\", {} in series, {} {}: {} W; {}",
            line.series.saturating_mul(line.strings),
            line.module,
            line.series,
            line.strings,
            if line.strings == 1 { "string" } else { "strings" },
            digits(line.power.get::<watt>()),
            how(line.designed)
        ),
    )?;
    if let Some((name, designed)) = &line.controller {
        let output = line.output.map_or_else(String::new, |a| format!(", {} A", digits(a.get::<ampere>())));
        row(f, "controller", &format!("\"{name}\"{output}; {}", how(*designed)))?;
    }
    let volts = |v: Option<crate::quantity::ElectricPotential>| {
        v.map_or_else(|| "not known".into(), |v| format!("{} V", digits(v.get::<volt>())))
    };
    let amps =
        line.greatest.map_or_else(|| "not known".into(), |a| format!("{} A", digits(a.get::<ampere>())));
    row(
        f,
        "string",
        &format!(
            "open circuit at its coldest {}, maximum power at its hottest {}; short circuit of the array in bright sun {amps}",
            volts(line.cold_voc),
            volts(line.hot_vmp)
        ),
    )?;
    match line.device_required {
        Some(true) => row(f, "devices", "every string needs a device of its own")?,
        Some(false) => row(f, "devices", "no string needs a device of its own")?,
        None => row(f, "devices", "whether a string needs a device of its own: not checked")?,
    }
    if let (Some(month), Some(reached)) = (line.worst_month, line.reached) {
        row(
            f,
            "worst month",
            &format!(
                "{}: {:.2} times what is taken out comes in",
                MONTHS.get(month).copied().unwrap_or(""),
                reached.get::<ratio>()
            ),
        )?;
    }
    if !line.layout.is_empty() {
        row(f, "why so", &line.layout)?;
    }
    steps(f, &line.steps)?;
    rejected(f, &line.rejected)
}

fn inverter(line: &InverterLine, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    writeln!(f, "\n  inverter {}", printable(&line.name))?;
    let surge = line.surge.map_or_else(String::new, |s| format!(", surge {} W", digits(s.get::<watt>())));
    row(
        f,
        "power",
        &format!(
            "{} W{surge}; its loads {} W together, {} VA while the largest starts; {}",
            digits(line.power.get::<watt>()),
            digits(line.demand.get::<watt>()),
            digits(line.starting.get::<watt>()),
            how(line.designed)
        ),
    )?;
    rejected(f, &line.rejected)
}

fn generator(line: &GeneratorLine, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    writeln!(f, "\n  source {}", printable(&line.name))?;
    let amps = |a: Option<crate::quantity::ElectricCurrent>| {
        a.map_or_else(|| "not stated".into(), |a| format!("{} A", digits(a.get::<ampere>())))
    };
    row(f, "gives", &format!("{} at most, {} for hours", amps(line.current), amps(line.lasting)))?;
    if let Some(time) = line.recharge {
        row(
            f,
            "recharge",
            &format!(
                "{:.1} h from the usual depth to full (lead-acid to 98 %, with its absorption; others at full current)",
                time.get::<hour>()
            ),
        )?;
    }
    steps(f, &line.steps)
}

/// A figure of a day, Wh.
type Pick = fn(&super::energy::DayDemand) -> f64;

/// Energy of the months: what is taken out on the mean day, and what comes in.
fn months(line: &DemandLine, f: &mut fmt::Formatter<'_>) -> fmt::Result {
    writeln!(f, "\n  energy of bank {}, Wh on the mean day of a month", printable(&line.bank))?;
    let mut print = |head: &str, cells: &[f64; 12]| {
        write!(f, "    {head:<12}")?;
        for cell in cells {
            write!(f, " {cell:>6.0}")?;
        }
        writeln!(f)
    };
    let of = |pick: Pick| {
        let mut cells = [0.0; 12];
        for (cell, one) in cells.iter_mut().zip(&line.mean) {
            *cell = pick(one);
        }
        cells
    };
    let rows: [(&str, Pick); 6] = [
        ("DC loads", |d| d.dc.get::<watt_hour>()),
        ("inverters", |d| d.inverters.get::<watt_hour>()),
        ("controllers", |d| d.controllers.get::<watt_hour>()),
        ("converters", |d| d.converters.get::<watt_hour>()),
        ("wiring", |d| d.wiring.get::<watt_hour>()),
        ("taken out", |d| d.total.get::<watt_hour>()),
    ];
    let mut heads = [0.0; 12];
    for (cell, month) in heads.iter_mut().zip(1_u8..) {
        *cell = f64::from(month);
    }
    print("month", &heads)?;
    for (head, pick) in rows {
        let cells = of(pick);
        if head == "taken out" || cells.iter().any(|c| *c > 0.0) {
            print(head, &cells)?;
        }
    }
    if let Some(arrays) = &line.arrays {
        print("from arrays", &arrays.map(|e| e.get::<watt_hour>()))?;
    }
    if line.generators.value > 0.0 {
        print("from others", &[line.generators.get::<watt_hour>(); 12])?;
    }
    if let Some(balance) = balance(line) {
        print("left over", &balance)?;
    }
    Ok(())
}

/// What is left over on the mean day of each month, Wh; `None` where nothing tells what comes in.
pub(super) fn balance(line: &DemandLine) -> Option<[f64; 12]> {
    if line.arrays.is_none() && line.generators.value <= 0.0 {
        return None;
    }
    let mut cells = [0.0; 12];
    for (month, cell) in cells.iter_mut().enumerate() {
        let arrays = line.arrays.as_ref().and_then(|a| a.get(month)).map_or(0.0, Energy::get::<watt_hour>);
        let out = line.mean.get(month).map_or(0.0, |d| d.total.get::<watt_hour>());
        *cell = arrays + line.generators.get::<watt_hour>() - out;
    }
    Some(cells)
}
