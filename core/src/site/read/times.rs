//! Place and weather, times of loads, and readings.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use uom::si::time::minute;

use super::entry::{Entry, shown};
use super::keys::{CONTINUOUS, Key, SITE_AMBIENT};
use super::log::{Cut, nearest};
use super::plant::{named, said};
use super::plant_keys::{
    ACCURACY, ALTITUDE, AT_TIMES, AUTONOMY, BONDING, BONDS, COLDEST_MORNING, COVERED, CRITICAL,
    DAYS_PER_WEEK, DELIVERED, DENSITY, DUTY, DUTY_HOT, HOURS, IN_PLANE, LATITUDE, LONGITUDE, LOSSES, MARGIN,
    MAST, MEANS, MEASURED_AT, MONITORING, MONTHS, ON, READ_AMPS, READ_DROP, READ_TEMPERATURE, READ_VOLTS,
    RESOLUTION, REST, STANDING, SURGE_PROTECTION,
};
use super::sections::{MONITORING_WORDS, MONTH_WORDS};
use crate::quantity::{Irradiation, Ratio, Textual, ThermodynamicTemperature, Time};
use crate::site::model::{Earthing, LoadUseTime};
use crate::site::parts::{Place, Reading, Weather};

/// Minutes of a day.
const DAY_MIN: u16 = 1440;

pub(super) fn place(entry: &mut Entry<'_, '_>, earthing: Option<Earthing>) -> Place {
    let bonds = entry.count(&BONDS);
    if earthing == Some(Earthing::Floating) && bonds.is_some_and(|bonds| bonds > 0) {
        entry.problem(
            &BONDS,
            "earthing = \"floating\" says that no pole is tied to earth; mend the one that is wrong"
                .to_owned(),
        );
    }
    Place {
        latitude: entry.quantity(&LATITUDE),
        longitude: entry.quantity(&LONGITUDE),
        altitude: entry.quantity(&ALTITUDE),
        autonomy: entry.quantity(&AUTONOMY),
        critical: entry.flag(&CRITICAL, false),
        losses: entry.quantity(&LOSSES),
        margin: entry.quantity(&MARGIN),
        bonds,
        bonding: entry.parsed(&BONDING),
        monitoring: entry.word(&MONITORING, MONITORING_WORDS),
        covered: said(entry, &COVERED),
        surge_protection: said(entry, &SURGE_PROTECTION),
        mast: entry.flag(&MAST, false),
    }
}

/// A list of twelve.
fn twelve<Q: Textual>(entry: &mut Entry<'_, '_>, key: &Key) -> Option<[Q; 12]> {
    if !entry.has(key) {
        return None;
    }
    let before = entry.log.count();
    let list: Vec<Q> = entry.quantities(key);
    let count = list.len();
    let twelve = list.try_into().ok();
    // A value that could not be read was reported as such.
    if twelve.is_none() && entry.log.count() == before {
        let months = if count == 1 { "month" } else { "months" };
        let sentence =
            format!("the list has {count} {months}; twelve are needed, January first: {}", key.example);
        entry.problem(key, sentence);
    }
    twelve
}

type Ambient = (ThermodynamicTemperature, ThermodynamicTemperature);

/// Twelve months, held against the least and greatest air temperature of the site.
pub(super) fn weather(entry: &mut Entry<'_, '_>, ambient: Option<Ambient>) -> Option<Weather> {
    let in_plane: Option<[Irradiation; 12]> = twelve(entry, &IN_PLANE);
    let temperature: Option<[ThermodynamicTemperature; 12]> = twelve(entry, &MEANS);
    let coldest_morning: Option<ThermodynamicTemperature> = entry.quantity(&COLDEST_MORNING);
    if let Some((least, greatest)) = ambient {
        let strange = |value: ThermodynamicTemperature| value < least || value > greatest;
        if let Some(month) = temperature.and_then(|list| list.into_iter().position(strange)) {
            let item = entry.value(&MEANS).and_then(|value| value.get_ref().as_array()?.get(month));
            let (at, written) = item.map_or((0, ""), |item| (item.span().start, shown(entry.text, item)));
            let sentence = format!(
                "'{}' of {} is not within {} of [site]; mend the one that is wrong",
                Cut(written),
                MONTH_WORDS.get(month).copied().unwrap_or(""),
                SITE_AMBIENT.name
            );
            entry.problem_at(at, &MEANS, sentence);
        }
        if coldest_morning.is_some_and(strange) {
            let sentence = format!(
                "{} is not within {} of [site]; mend the one that is wrong",
                entry.written(&COLDEST_MORNING),
                SITE_AMBIENT.name
            );
            entry.problem(&COLDEST_MORNING, sentence);
        }
    }
    Some(Weather { line: entry.line(), temperature, coldest_morning, in_plane: in_plane? })
}

/// Texts of a list.
fn texts<'d>(entry: &mut Entry<'d, '_>, key: &Key) -> Vec<(&'d str, usize)> {
    let Some(value) = entry.value(key) else { return Vec::new() };
    let Some(list) = value.get_ref().as_array() else {
        entry.wrong_form(key, value);
        return Vec::new();
    };
    if list.is_empty() {
        entry.problem(key, format!("the list is empty; {} is needed, such as {}", key.needed, key.example));
    }
    let mut found = Vec::new();
    for item in list {
        match item.get_ref().as_str() {
            Some(text) => found.push((text, item.span().start)),
            None => entry.wrong_form(key, item),
        }
    }
    found
}

/// `06:30` as minutes of the day.
fn minutes(text: &str) -> Option<u16> {
    let (hours, minutes) = text.trim().split_once(':')?;
    let number = |digits: &str, most: usize| -> Option<u16> {
        let plain = !digits.is_empty() && digits.len() <= most && digits.bytes().all(|b| b.is_ascii_digit());
        plain.then(|| digits.parse().ok()).flatten()
    };
    if minutes.len() != 2 {
        return None;
    }
    let (hours, minutes) = (number(hours, 2)?, number(minutes, 2)?);
    let all = hours.checked_mul(60)?.checked_add(minutes)?;
    (minutes < 60 && all <= DAY_MIN).then_some(all)
}

/// Minutes from one time of the day to another, past midnight where the end comes first.
fn length((from, to): (u16, u16)) -> u16 {
    if to > from { to.saturating_sub(from) } else { DAY_MIN.saturating_sub(from).saturating_add(to) }
}

/// Spans of the day, none of which runs into another.
fn spans(entry: &mut Entry<'_, '_>) -> Vec<(u16, u16)> {
    let mut at: Vec<(u16, u16)> = Vec::new();
    let mut taken = [false; DAY_MIN as usize];
    for (text, place) in texts(entry, &AT_TIMES) {
        let ends = text.split_once('-').and_then(|(from, to)| minutes(from).zip(minutes(to)));
        let span = ends.map(|(from, to)| (from % DAY_MIN, to)).filter(|(from, to)| from != to);
        let Some(span) = span else {
            let sentence = format!("'{}' is no span of time; write it as '18:00-23:00'", Cut(text));
            entry.problem_at(place, &AT_TIMES, sentence);
            continue;
        };
        let mut doubled = false;
        for offset in 0..length(span) {
            let here = span.0.saturating_add(offset) % DAY_MIN;
            if let Some(slot) = taken.get_mut(usize::from(here)) {
                doubled |= core::mem::replace(slot, true);
            }
        }
        if doubled {
            let sentence =
                format!("'{}' runs into another span of the list; write the two as one", Cut(text));
            entry.problem_at(place, &AT_TIMES, sentence);
        }
        at.push(span);
    }
    at
}

fn months(entry: &mut Entry<'_, '_>) -> Option<u16> {
    let mut months = None;
    for (text, place) in texts(entry, &MONTHS) {
        let Some(month) = MONTH_WORDS.iter().position(|word| *word == text) else {
            let lower = text.to_lowercase();
            let begins = MONTH_WORDS.into_iter().find(|word| lower.starts_with(&word.to_lowercase()));
            let sentence = match begins.or_else(|| nearest(text, MONTH_WORDS.iter().copied())) {
                Some(word) => format!("'{}' is no month here; did you mean '{word}'?", Cut(text)),
                None => {
                    format!("'{}' is no month here; it must be one of {}", Cut(text), MONTH_WORDS.join(", "))
                }
            };
            entry.problem_at(place, &MONTHS, sentence);
            continue;
        };
        let (bit, before) = (1_u16 << month, months.unwrap_or(0));
        if before & bit != 0 {
            entry.problem_at(place, &MONTHS, format!("'{text}' stands twice here; take one of them out"));
        }
        months = Some(before | bit);
    }
    months
}

/// When a load runs.
pub(super) fn use_of(entry: &mut Entry<'_, '_>) -> LoadUseTime {
    let hours: Option<Time> = entry.quantity(&HOURS);
    let at = spans(entry);
    let in_all: f64 = at.iter().map(|span| f64::from(length(*span))).sum();
    if let Some(hours) = hours
        && in_all > 0.0
        && hours.get::<minute>() > in_all + 1e-6
    {
        let sentence =
            format!("{} is more than the spans of 'at' hold, {} h", entry.written(&HOURS), in_all / 60.0);
        entry.problem(&HOURS, format!("{sentence}; mend the one that is wrong"));
    }
    let months = months(entry);
    let days_per_week = entry.count(&DAYS_PER_WEEK);
    let duty: Option<Ratio> = entry.quantity(&DUTY);
    let duty_hot: Option<Ratio> = entry.quantity(&DUTY_HOT);
    entry.ordered(&DUTY, duty, &DUTY_HOT, duty_hot);
    if !entry.has(&DUTY) && entry.has(&DUTY_HOT) && !entry.is_excused(&[&DUTY]) {
        entry.problem(
            &DUTY_HOT,
            "there is no duty beside it; state the duty at mild ambient as 'duty'".to_owned(),
        );
    }
    LoadUseTime { hours, at, months, days_per_week, duty, duty_hot }
}

/// A load that is always on by its nature, with what says otherwise.
pub(super) fn is_standing(entry: &mut Entry<'_, '_>, continuous: bool) -> bool {
    let standing = entry.flag(&STANDING, false);
    if standing {
        for key in [&HOURS, &AT_TIMES, &MONTHS, &DAYS_PER_WEEK] {
            if entry.has(key) {
                let sentence = "standing = true says that it is always on; take one of the two out";
                entry.problem(key, sentence.to_owned());
            }
        }
        if !continuous {
            let sentence = "standing = true says that it is always on; mend the one that is wrong";
            entry.problem(&CONTINUOUS, sentence.to_owned());
        }
    }
    standing
}

pub(super) fn reading(entry: &mut Entry<'_, '_>) -> Option<Reading> {
    const READ: [&Key; 6] = [&READ_VOLTS, &READ_DROP, &READ_AMPS, &READ_TEMPERATURE, &DENSITY, &DELIVERED];
    let name = entry.name();
    let at = named(entry, &MEASURED_AT);
    let on: Vec<String> = texts(entry, &ON).into_iter().map(|(text, _)| text.to_owned()).collect();
    if READ.iter().all(|key| !entry.has(key)) && !entry.is_excused(&READ) {
        entry.problem_here(
            "nothing was read; state volts, drop, amps, temperature, density or delivered".to_owned(),
        );
    }
    Some(Reading {
        line: entry.line(),
        on,
        volts: entry.quantity(&READ_VOLTS),
        drop: entry.quantity(&READ_DROP),
        amps: entry.quantity(&READ_AMPS),
        temperature: entry.quantity(&READ_TEMPERATURE),
        density: entry.number(&DENSITY),
        rest: entry.quantity(&REST),
        delivered: entry.quantity(&DELIVERED),
        accuracy: entry.quantity(&ACCURACY),
        resolution: entry.quantity(&RESOLUTION),
        name: name?,
        at: at?,
    })
}
