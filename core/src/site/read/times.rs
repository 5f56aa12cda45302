//! Place, weather, times of loads, and readings.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::entry::Entry;
use super::keys::Key;
use super::log::{Cut, nearest};
use super::plant::named;
use super::plant_keys::{
    ACCURACY, ALTITUDE, AT_TIMES, AUTONOMY, BONDING, BONDS, COLDEST_MORNING, COVERED, CRITICAL,
    DAYS_PER_WEEK, DELIVERED, DENSITY, DUTY, DUTY_HOT, HOURS, IN_PLANE, LATITUDE, LONGITUDE, LOSSES, MARGIN,
    MAST, MEANS, MEASURED_AT, MONITORING, MONITORING_WORDS, MONTH_WORDS, MONTHS, ON, READ_AMPS, READ_DROP,
    READ_TEMPERATURE, READ_VOLTS, RESOLUTION, REST, SURGE_PROTECTION,
};
use crate::quantity::{Ratio, Textual, Time};
use crate::site::model::LoadUseTime;
use crate::site::parts::{Place, Reading, Weather};

/// Minutes of a day.
const DAY_MIN: u16 = 1440;

pub(super) fn place(entry: &mut Entry<'_, '_>) -> Place {
    let covered = entry.has(&COVERED).then(|| entry.flag(&COVERED, false));
    let surge_protection = entry.has(&SURGE_PROTECTION).then(|| entry.flag(&SURGE_PROTECTION, false));
    Place {
        latitude: entry.quantity(&LATITUDE),
        longitude: entry.quantity(&LONGITUDE),
        altitude: entry.quantity(&ALTITUDE),
        autonomy: entry.quantity(&AUTONOMY),
        critical: entry.flag(&CRITICAL, false),
        losses: entry.quantity(&LOSSES),
        margin: entry.quantity(&MARGIN),
        bonds: entry.count(&BONDS),
        bonding: entry.parsed(&BONDING),
        monitoring: entry.word(&MONITORING, MONITORING_WORDS),
        covered,
        surge_protection,
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
    match list.try_into() {
        Ok(array) => Some(array),
        Err(_) => {
            // A value that could not be read was reported as such.
            if entry.log.count() == before {
                let months = if count == 1 { "month" } else { "months" };
                entry.problem(
                    key,
                    format!(
                        "the list has {count} {months}; twelve are needed, January first, such as {}",
                        key.example
                    ),
                );
            }
            None
        }
    }
}

pub(super) fn weather(entry: &mut Entry<'_, '_>) -> Option<Weather> {
    let in_plane = twelve(entry, &IN_PLANE);
    let temperature = twelve(entry, &MEANS);
    let coldest_morning = entry.quantity(&COLDEST_MORNING);
    Some(Weather { line: entry.line(), in_plane: in_plane?, temperature, coldest_morning })
}

/// Texts of a list.
fn texts<'d>(entry: &mut Entry<'d, '_>, key: &Key) -> Vec<(&'d str, usize)> {
    let Some(value) = entry.value(key) else { return Vec::new() };
    let Some(list) = value.get_ref().as_array() else {
        let sentence = format!("{} is needed, such as {}", key.needed, key.example);
        entry.problem(key, sentence);
        return Vec::new();
    };
    let mut found = Vec::new();
    for item in list {
        match item.get_ref().as_str() {
            Some(text) => found.push((text, item.span().start)),
            None => entry.problem_at(
                item.span().start,
                key,
                format!("{} is needed, such as {}", key.needed, key.example),
            ),
        }
    }
    if found.is_empty() && list.is_empty() {
        entry.problem(key, format!("the list is empty; {} is needed, such as {}", key.needed, key.example));
    }
    found
}

/// `06:30` as minutes of the day.
fn minutes(text: &str) -> Option<u16> {
    let (hours, minutes) = text.trim().split_once(':')?;
    let (hours, minutes): (u16, u16) = (hours.parse().ok()?, minutes.parse().ok()?);
    let all = hours.checked_mul(60)?.checked_add(minutes)?;
    (minutes < 60 && all <= DAY_MIN).then_some(all)
}

/// When a load runs.
pub(super) fn use_of(entry: &mut Entry<'_, '_>) -> LoadUseTime {
    let hours: Option<Time> = entry.quantity(&HOURS);
    let mut at = Vec::new();
    for (text, place) in texts(entry, &AT_TIMES) {
        let ends = text.split_once('-').and_then(|(from, to)| minutes(from).zip(minutes(to)));
        match ends {
            Some((from, to)) if from != to => at.push((from % DAY_MIN, to)),
            _ => entry.problem_at(
                place,
                &AT_TIMES,
                format!("'{}' is no span of time; write it as '18:00-23:00'", Cut(text)),
            ),
        }
    }
    let mut months = None;
    for (text, place) in texts(entry, &MONTHS) {
        match MONTH_WORDS.iter().position(|word| *word == text) {
            Some(month) => months = Some(months.unwrap_or(0) | (1_u16 << month)),
            None => {
                let sentence = match nearest(text, MONTH_WORDS.iter().copied()) {
                    Some(word) => format!("'{}' is no month here; did you mean '{word}'?", Cut(text)),
                    None => format!("'{}' is no month here; write {}", Cut(text), MONTH_WORDS.join(", ")),
                };
                entry.problem_at(place, &MONTHS, sentence);
            }
        }
    }
    let days_per_week = entry.count(&DAYS_PER_WEEK);
    let duty: Option<Ratio> = entry.quantity(&DUTY);
    let duty_hot: Option<Ratio> = entry.quantity(&DUTY_HOT);
    entry.ordered(&DUTY, duty, &DUTY_HOT, duty_hot);
    if duty.is_none() && duty_hot.is_some() && !entry.is_excused(&[&DUTY]) {
        entry.problem(
            &DUTY_HOT,
            "there is no duty beside it; state the duty at mild ambient as 'duty'".to_owned(),
        );
    }
    LoadUseTime { hours, at, months, days_per_week, duty, duty_hot }
}

pub(super) fn reading(entry: &mut Entry<'_, '_>) -> Option<Reading> {
    let name = entry.name();
    let at = named(entry, &MEASURED_AT);
    let on: Vec<String> = texts(entry, &ON).into_iter().map(|(text, _)| text.to_owned()).collect();
    let reading = Reading {
        name: name?,
        line: entry.line(),
        at: at?,
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
    };
    let nothing = [&READ_VOLTS, &READ_DROP, &READ_AMPS, &READ_TEMPERATURE, &DENSITY, &DELIVERED];
    if nothing.iter().all(|key| !entry.has(key)) && !entry.is_excused(&nothing) {
        entry.problem_here(
            "nothing was read; state volts, drop, amps, temperature, density or delivered".to_owned(),
        );
    }
    Some(reading)
}
