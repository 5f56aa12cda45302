//! Two reports side by side: what changed, and why (R21).
//!
//! What reads alike is no change: figures are compared as they are printed.

use alloc::collections::{BTreeMap, BTreeSet};
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::fmt;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::length::meter;
use uom::si::power::watt;
use uom::si::ratio::percent;

use super::finding::{Finding, digits};
use super::lines::{ArrayLine, BankLine, Step};
use super::plant_text::MONTHS;
use super::reading::{ReadingLine, Verdict};
use super::report::{CircuitLine, Report};
use super::sheet::Purchase;
use super::text::{conductor_words, device_words, is_of_device, printable};
use crate::circuit::Outcome;
use crate::quantity::{ElectricCharge, ElectricPotential};
use crate::rules::Check;

/// One thing that differs between two reports.
#[derive(Clone, Debug, PartialEq)]
pub struct Change {
    /// Where: `circuit "pump"`, a finding's place, what is bought, a bank.
    pub place: String,
    /// What of it: `conductor`, `current`, the slug of a finding.
    pub what: String,
    /// In the earlier report; `None` where it is new.
    pub earlier: Option<String>,
    /// In the later report; `None` where it is gone.
    pub later: Option<String>,
    /// The check or finding behind the earlier value; empty where there is none.
    pub why_earlier: String,
    /// The check or finding behind the later value.
    pub why_later: String,
}

impl fmt::Display for Change {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let head = if self.what.is_empty() {
            printable(&self.place)
        } else {
            format!("{}, {}", printable(&self.place), printable(&self.what))
        };
        match (&self.earlier, &self.later) {
            (Some(a), Some(b)) => write!(f, "~ {head}: {} → {}", printable(a), printable(b))?,
            (None, Some(b)) => write!(f, "+ {head}: {}", printable(b))?,
            (Some(a), None) => write!(f, "- {head}: {}", printable(a))?,
            (None, None) => write!(f, "  {head}")?,
        }
        let (was, now) = (printable(&self.why_earlier), printable(&self.why_later));
        match (was.is_empty(), now.is_empty(), was == now) {
            (true, true, _) => Ok(()),
            (false, false, true) => write!(f, " [because, before and after: {now}]"),
            (false, false, false) => write!(f, " [because earlier: {was}; later: {now}]"),
            (true, false, _) => write!(f, " [because: {now}]"),
            (false, true, _) => write!(f, " [was so because: {was}]"),
        }
    }
}

/// What changed from an earlier report to a later one.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Comparison {
    /// Rules, banks, surroundings.
    pub system: Vec<Change>,
    /// Circuits: added, gone, and what differs of those in both.
    pub circuits: Vec<Change>,
    /// Findings: new, gone, and of another severity or text.
    pub findings: Vec<Change>,
    /// What to buy.
    pub purchases: Vec<Change>,
    /// Readings and their verdicts.
    pub readings: Vec<Change>,
}

impl Comparison {
    /// Whether nothing differs.
    pub fn is_empty(&self) -> bool {
        self.len() == 0
    }

    /// Number of changes.
    pub fn len(&self) -> usize {
        self.groups().iter().map(|(_, changes)| changes.len()).sum()
    }

    fn groups(&self) -> [(&'static str, &[Change]); 5] {
        [
            ("System", &self.system),
            ("Circuits", &self.circuits),
            ("Findings", &self.findings),
            ("To buy", &self.purchases),
            ("Readings", &self.readings),
        ]
    }
}

impl fmt::Display for Comparison {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.is_empty() {
            return writeln!(f, "nothing differs");
        }
        for (head, changes) in self.groups() {
            if changes.is_empty() {
                continue;
            }
            writeln!(f, "{head}")?;
            for change in changes {
                writeln!(f, "  {change}")?;
            }
        }
        Ok(())
    }
}

impl Report {
    /// What changed since an earlier report, each with both values and the check or finding behind them.
    ///
    /// Circuits are matched by name, findings by slug and place.
    ///
    /// # Example
    /// ```
    /// use ampwright::site::{inspect, read};
    /// let before = include_str!("../../examples/sites/badly_built.toml");
    /// let after = before.replacen("one_way = \"40 m\"", "one_way = \"30 m\"", 1);
    /// let report = |text: &str| inspect(&read(text).map_err(|p| p.to_string())?).map_err(|p| p.to_string());
    /// let (earlier, later) = (report(before)?, report(&after)?);
    /// assert!(earlier.compare(&earlier).is_empty());
    /// assert!(later.compare(&earlier).circuits.iter().any(|c| c.what == "drop"));
    /// # Ok::<(), String>(())
    /// ```
    pub fn compare(&self, earlier: &Self) -> Comparison {
        Comparison {
            system: {
                let mut changes = system(earlier, self);
                changes.extend(plant(earlier, self));
                changes
            },
            circuits: circuits(earlier, self),
            findings: matched(&earlier.findings, &self.findings, finding_key, |f| Value {
                text: format!("{} {}", f.severity.word(), f.text),
                why: f.source.clone(),
            }),
            purchases: matched(
                &earlier.purchases,
                &self.purchases,
                |p| (p.what.clone(), p.unit.to_string()),
                bought,
            )
            .into_iter()
            .map(|change| with_reason(change, earlier, self))
            .collect(),
            readings: matched(&earlier.readings, &self.readings, reading_key, verdict),
        }
    }
}

/// A value in words and what stands behind it.
struct Value {
    text: String,
    why: String,
}

/// Matches two lists by place and kind; of those that stand there several times, first with first.
fn matched<T>(
    earlier: &[T],
    later: &[T],
    key: impl Fn(&T) -> (String, String),
    value: impl Fn(&T) -> Value,
) -> Vec<Change> {
    let keyed = |list: &[T]| -> Vec<((String, String, usize), Value)> {
        let mut seen: BTreeMap<(String, String), usize> = BTreeMap::new();
        list.iter()
            .map(|entry| {
                let (place, what) = key(entry);
                let times = seen.entry((place.clone(), what.clone())).or_insert(0);
                *times += 1;
                ((place, what, *times), value(entry))
            })
            .collect()
    };
    let later = keyed(later);
    let earlier: BTreeMap<_, _> =
        keyed(earlier).into_iter().enumerate().map(|(i, (k, v))| (k, (i, v))).collect();
    let mut met: BTreeSet<&(String, String, usize)> = BTreeSet::new();
    let mut changes = Vec::new();
    for (key, now) in &later {
        let (place, what, _) = key.clone();
        let before = earlier.get(key).map(|(_, v)| v);
        met.insert(key);
        match before {
            Some(before) if before.text == now.text => {}
            before => changes.push(Change {
                place,
                what,
                earlier: before.map(|b| b.text.clone()),
                later: Some(now.text.clone()),
                why_earlier: before.map_or_else(String::new, |b| b.why.clone()),
                why_later: now.why.clone(),
            }),
        }
    }
    let mut gone: Vec<_> = earlier.iter().filter(|(key, _)| !met.contains(*key)).collect();
    gone.sort_by_key(|(_, (at, _))| *at);
    changes.extend(gone.into_iter().map(|((place, what, _), (_, before))| Change {
        place: place.clone(),
        what: what.clone(),
        earlier: Some(before.text.clone()),
        later: None,
        why_earlier: before.why.clone(),
        why_later: String::new(),
    }));
    changes
}

fn finding_key(finding: &Finding) -> (String, String) {
    (finding.place.clone(), finding.slug.to_string())
}

fn reading_key(line: &ReadingLine) -> (String, String) {
    (format!("reading \"{}\"", line.name), line.measured.word().to_string())
}

fn verdict(line: &ReadingLine) -> Value {
    let word = match &line.verdict {
        Verdict::Within => "within",
        Verdict::Above => "above",
        Verdict::Below => "below",
        Verdict::NotComparable(_) => "not compared",
    };
    let why = match (&line.verdict, &line.predicted) {
        (Verdict::NotComparable(why), _) => why.clone(),
        (_, Some((least, greatest))) => format!("predicted {least} to {greatest}"),
        (_, None) => String::new(),
    };
    Value { text: format!("{} {word}", line.measured), why }
}

fn bought(purchase: &Purchase) -> Value {
    let price = purchase.price.map_or_else(String::new, |p| format!(", {p:.2}"));
    let places = match purchase.places.as_slice() {
        [] => String::new(),
        places => format!(" for {}", places.join(", ")),
    };
    let text = format!("{} {}{places}{price}", digits(purchase.amount), purchase.unit);
    Value { text, why: String::new() }
}

/// What is bought changes because of the circuits that it is for.
fn with_reason(change: Change, earlier: &Report, later: &Report) -> Change {
    let of = |report: &Report| {
        let purchase = report.purchases.iter().find(|p| p.what == change.place && p.unit == change.what)?;
        purchase.places.iter().find_map(|place| {
            let circuit = report.circuits.iter().find(|c| c.name == *place);
            let of_circuit = circuit.map(|c| format!("\"{}\": {}", c.name, c.governing));
            let of_bank = || report.plant.banks.iter().find(|b| b.name == *place).map(needed);
            let of_array = || report.plant.arrays.iter().find(|a| a.name == *place).map(reached);
            of_circuit.or_else(of_bank).or_else(of_array)
        })
    };
    let (why_earlier, why_later) = (of(earlier).unwrap_or_default(), of(later).unwrap_or_default());
    Change { what: String::new(), why_earlier, why_later, ..change }
}

/// The gravest finding at a place.
fn gravest(report: &Report, place: &str) -> String {
    let found = report.findings.iter().find(|f| f.place == place);
    found.map_or_else(String::new, |f| format!("{} {}", f.severity.word(), f.text))
}

fn system(earlier: &Report, later: &Report) -> Vec<Change> {
    let lines =
        |report: &Report| -> Vec<(String, Value)> {
            let plain = |place: &str, text: &str| {
                (place.to_string(), Value { text: text.to_string(), why: gravest(report, place) })
            };
            let mut lines = Vec::from([plain("name", &report.name), plain("rules", &report.edition)]);
            lines.extend(report.overrides.iter().map(|line| {
                plain(&format!("override {}", line.split([':', ' ']).next().unwrap_or("")), line)
            }));
            lines.extend(report.system.iter().map(|line| match line.split_once(": ") {
                Some((place, text)) => plain(place, text),
                None => plain(line.split(' ').next().unwrap_or(""), line),
            }));
            lines
        };
    let key = |(place, _): &(String, Value)| (place.clone(), String::new());
    let value = |(_, value): &(String, Value)| Value { text: value.text.clone(), why: value.why.clone() };
    matched(&lines(earlier), &lines(later), key, value)
}

/// Banks, arrays, inverters and sources as they are laid out, with the step of their sizing that decided last.
fn plant(earlier: &Report, later: &Report) -> Vec<Change> {
    let key = |(place, what, _): &Fact| (place.clone(), (*what).to_string());
    let value = |(_, _, value): &Fact| Value { text: value.text.clone(), why: value.why.clone() };
    matched(&laid_out(earlier), &laid_out(later), key, value)
}

/// Place, what of it, and its value.
type Fact = (String, &'static str, Value);

/// What the bank was sized for.
fn needed(bank: &BankLine) -> String {
    let ah = |q: ElectricCharge| digits(q.get::<ampere_hour>());
    bank.needed
        .map_or_else(String::new, |q| format!("{} Ah are needed, {} Ah are there", ah(q), ah(bank.capacity)))
}

/// What the array was sized for.
fn reached(array: &ArrayLine) -> String {
    let month = array.worst_month.and_then(|m| MONTHS.get(m));
    month.zip(array.reached).map_or_else(String::new, |(month, part)| {
        format!("in {month}, its worst month, it gives {:.0} % of what is needed", part.get::<percent>())
    })
}

fn laid_out(report: &Report) -> Vec<Fact> {
    let decided = |steps: &[Step]| {
        steps.last().map_or_else(String::new, |s| format!("{}: {} {}", s.what, digits(s.value), s.unit))
    };
    let volts = |v: Option<ElectricPotential>| {
        v.map_or_else(|| "not known".to_string(), |v| format!("{} V", digits(v.get::<volt>())))
    };
    let mut facts = Vec::new();
    for b in &report.plant.banks {
        let place = format!("bank \"{}\"", b.name);
        let series = b.series.map_or_else(String::new, |s| format!("{s} in series, "));
        let battery = b.battery.as_ref().map_or_else(String::new, |name| format!(" of {name}"));
        let text = format!("{series}{} in parallel{battery}", b.strings);
        facts.push((place.clone(), "layout", Value { text, why: needed(b) }));
        let text = format!("{}, back at {}", volts(b.disconnect), volts(b.reconnect));
        facts.push((place, "disconnect", Value { text, why: String::new() }));
    }
    for a in &report.plant.arrays {
        let place = format!("array \"{}\"", a.name);
        let text = format!("{} in series, {} in parallel of {}", a.series, a.strings, a.module);
        facts.push((place.clone(), "layout", Value { text, why: reached(a) }));
        facts.push((
            place,
            "cold open-circuit voltage",
            Value { text: volts(a.cold_voc), why: String::new() },
        ));
    }
    for i in &report.plant.inverters {
        let text = format!("{} W", digits(i.power.get::<watt>()));
        facts.push((format!("inverter \"{}\"", i.name), "power", Value { text, why: decided(&i.steps) }));
    }
    for g in &report.plant.generators {
        let amps = g.lasting.or(g.current);
        let text =
            amps.map_or_else(|| "not known".to_string(), |a| format!("{} A", digits(a.get::<ampere>())));
        facts.push((format!("generator \"{}\"", g.name), "current", Value { text, why: decided(&g.steps) }));
    }
    facts
}

/// The check that decides among some: the first that failed, else the one that uses most of its limit.
fn decisive(circuit: &CircuitLine, of: fn(Check) -> bool) -> String {
    let all = || circuit.judgement.checks.iter().filter(|c| of(c.check));
    let failed = all().find(|c| c.outcome == Outcome::Failed);
    let tightest =
        || all().filter_map(|c| Some((c.used()?, c))).max_by(|a, b| a.0.total_cmp(&b.0)).map(|(_, c)| c);
    failed.or_else(tightest).map_or_else(|| circuit.governing.clone(), ToString::to_string)
}

/// What is compared of a circuit, with the check behind each.
fn facts(c: &CircuitLine) -> Vec<(&'static str, Value)> {
    let plain = |text: String| Value { text, why: String::new() };
    let negative = if c.negative == c.positive {
        String::new()
    } else {
        format!(", negative {}", conductor_words(&c.negative))
    };
    let devices: Vec<String> = c.devices.iter().map(|d| device_words(&d.guard, d.specified)).collect();
    let devices = match (devices.is_empty(), &c.guarded_by) {
        (true, Some(above)) => format!("that of \"{above}\""),
        (true, None) => "none".to_string(),
        (false, _) => devices.join(" and "),
    };
    let lengths = [c.run.positive_length, c.run.negative_length].map(|l| digits(l.get::<meter>()));
    Vec::from([
        ("ends", plain(format!("\"{}\" – \"{}\"", c.from, c.to))),
        ("length", plain(format!("{} m + {} m", lengths[0], lengths[1]))),
        (
            "conductor",
            Value { text: format!("{}{negative}", conductor_words(&c.positive)), why: c.governing.clone() },
        ),
        ("device", Value { text: devices, why: decisive(c, is_of_device) }),
        ("current", plain(format!("{} A", digits(c.judgement.current.get::<ampere>())))),
        (
            "drop",
            Value {
                text: format!(
                    "{} V, {:.2} % of nominal from the source",
                    digits(c.judgement.drop.get::<volt>()),
                    c.judgement.path_drop.get::<percent>()
                ),
                why: decisive(c, |check| matches!(check, Check::Drop | Check::LoadVoltage)),
            },
        ),
        ("volts at the end", plain(format!("{:.2} V", c.judgement.end_voltage.get::<volt>()))),
        ("governing", plain(c.governing.clone())),
        ("no solution", plain(if c.collapsed { "the line cannot carry its load" } else { "no" }.to_string())),
    ])
}

/// What makes the current of a circuit another one: the circuits that go on from its end, or what stands there.
fn drawn(circuit: &CircuitLine, before: &BTreeMap<String, CircuitLine>, later: &Report) -> String {
    let amps = |c: &CircuitLine| digits(c.judgement.current.get::<ampere>());
    let beyond = later.circuits.iter().filter(|c| c.from == circuit.to);
    let told: Vec<String> = beyond
        .filter_map(|c| match before.get(&c.name) {
            None => Some(format!("new \"{}\" takes {} A", c.name, amps(c))),
            Some(was) if amps(was) != amps(c) => {
                Some(format!("\"{}\" takes {} A in place of {} A", c.name, amps(c), amps(was)))
            }
            Some(_) => None,
        })
        .chain(
            before
                .values()
                .filter(|c| c.from == circuit.to && !later.circuits.iter().any(|l| l.name == c.name))
                .map(|c| format!("\"{}\" with {} A is gone", c.name, amps(c))),
        )
        .collect();
    if told.is_empty() { format!("what \"{}\" draws", circuit.to) } else { told.join(", ") }
}

fn circuits(earlier: &Report, later: &Report) -> Vec<Change> {
    let by_name = |report: &Report| -> BTreeMap<String, CircuitLine> {
        report.circuits.iter().map(|c| (c.name.clone(), c.clone())).collect()
    };
    let (before, after) = (by_name(earlier), by_name(later));
    let place = |name: &str| format!("circuit \"{name}\"");
    let mut changes = Vec::new();
    for c in &later.circuits {
        let Some(was) = before.get(&c.name) else {
            // What a new circuit is, fact by fact.
            changes.extend(
                facts(c).into_iter().filter(|(what, _)| *what != "no solution" || c.collapsed).map(
                    |(what, now)| Change {
                        place: place(&c.name),
                        what: what.to_string(),
                        earlier: None,
                        later: Some(now.text),
                        why_earlier: String::new(),
                        why_later: now.why,
                    },
                ),
            );
            continue;
        };
        for ((what, old), (_, mut now)) in facts(was).into_iter().zip(facts(c)) {
            if old.text != now.text {
                if what == "current" {
                    now.why = drawn(c, &before, later);
                }
                changes.push(Change {
                    place: place(&c.name),
                    what: what.to_string(),
                    earlier: Some(old.text),
                    later: Some(now.text),
                    why_earlier: old.why,
                    why_later: now.why,
                });
            }
        }
    }
    changes.extend(earlier.circuits.iter().filter(|c| !after.contains_key(&c.name)).map(|c| Change {
        place: place(&c.name),
        what: String::new(),
        earlier: Some(format!("\"{}\" – \"{}\", {}", c.from, c.to, conductor_words(&c.positive))),
        later: None,
        why_earlier: c.governing.clone(),
        why_later: String::new(),
    }));
    changes
}
