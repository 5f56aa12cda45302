//! The document as a whole: the top of the file, its sections, the rule set.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::Problems;
use super::bank;
use super::circuits::Circuits;
use super::ends::Plan;
use super::entry::{Entry, Found, section, sections};
use super::equipment;
use super::keys::{
    ALUMINIUM, ALUMINIUM_WORDS, BOARD, BUNDLING, CIRCUIT, CONTINUOUS_FACTOR, DEVICE_RATIO, EARTHING,
    EARTHING_WORDS, ENGINE_SPACE, FORMAT, OVERRIDE, OWN_DROP, RULES, RULES_OVERRIDE, RULES_SECTION,
    SITE_AMBIENT, Section, UNFUSED_LENGTH,
};
use super::log::{Cut, Log, nearest};
use super::meant::MEANT_SECTIONS;
use super::modules;
use super::nodes::{Kind, Node, Wire};
use super::plant::rising;
use super::references::{self, Sections};
use super::sections::{
    ARRAY, BANK, CONTROLLER, CONVERTER, GENERATOR, INVERTER, LOAD, READING, SITE, STOCK, TOP, WEATHER,
};
use super::sources;
use super::stock;
use super::surroundings;
use super::syntax;
use super::times;
use crate::quantity::ThermodynamicTemperature;
use crate::rules::{Overrides, Rules};
use crate::site::model::{Document, Earthing};
use crate::site::parts::Place;

/// Reads a document of moderate length.
pub(super) fn site(text: &str) -> Result<Document, Problems> {
    let mut log = Log::new(text);
    let (tree, obstacles) = syntax::parsed(text, &mut log);
    let site = if obstacles.is_empty() {
        tree.and_then(|tree| document(text, &tree, &mut log))
    } else {
        syntax::without(text, &obstacles).and_then(|text| {
            let (tree, _) = syntax::parsed(&text, &mut log);
            document(&text, &tree?, &mut log)
        })
    };
    match site {
        Some(site) if log.is_empty() => Ok(site),
        _ => Err(log.into_problems()),
    }
}

fn document(text: &str, tree: &DeTable<'_>, log: &mut Log) -> Option<Document> {
    if !syntax::is_moderate(tree, log) {
        return None;
    }
    if tree.is_empty() {
        if log.is_empty() {
            log.push_whole(
                "the file states nothing; a site file begins with 'format = 1' and a section [site]"
                    .to_owned(),
            );
        }
        return None;
    }
    let top = Top { text, tree };
    let is_all_known = top.check_keys(log);
    top.check_format(log);

    let head = top.one("site", &SITE, log);
    // What stands on a broken line, or under a header that is not known, would show up again as missing.
    let is_whole = is_all_known && !log.has_broken_lines();
    if is_whole && !tree.contains_key("site") {
        log.push_whole(
            "there is no section [site]; write one with name, rules, earthing and ambient".to_owned(),
        );
    }
    let head = head.and_then(|found| head_of(&mut Entry::open(text, log, &SITE, found, None)));
    let ambient = head.as_ref().map(|head| head.3);
    let (overrides, overrides_at) = top.overrides(log);

    let mut found = Sections {
        banks: top.many("bank", &BANK, log),
        arrays: top.many("array", &ARRAY, log),
        controllers: top.many("controller", &CONTROLLER, log),
        generators: top.many("generator", &GENERATOR, log),
        converters: top.many("converter", &CONVERTER, log),
        readings: top.many("reading", &READING, log),
        boards: top.many("board", &BOARD, log),
        inverters: top.many("inverter", &INVERTER, log),
        loads: top.many("load", &LOAD, log),
        circuits: top.many("circuit", &CIRCUIT, log),
        ..Sections::default()
    };
    let stock = top.one("stock", &STOCK, log).map(|at| stock::stock(text, log, at, &mut found));
    let stock = stock.unwrap_or_default();
    if is_whole {
        check_ends(&found, log);
        references::check(&found, log);
    }

    let weather = top.one("weather", &WEATHER, log);
    let has_weather = weather.is_some();
    let weather =
        weather.and_then(|at| times::weather(&mut Entry::open(text, log, &WEATHER, at, None), ambient));
    let banks = read_all(text, log, &BANK, &found.banks, |entry| bank::bank(entry, &stock.batteries));
    let arrays = read_all(text, log, &ARRAY, &found.arrays, modules::array);
    let controllers = read_all(text, log, &CONTROLLER, &found.controllers, |entry| {
        sources::controller(entry, &stock.controllers)
    });
    let generators = read_all(text, log, &GENERATOR, &found.generators, sources::generator);
    let converters = read_all(text, log, &CONVERTER, &found.converters, sources::converter);
    let readings = read_all(text, log, &READING, &found.readings, times::reading);
    let boards = read_all(text, log, &BOARD, &found.boards, equipment::board);
    let inverters =
        read_all(text, log, &INVERTER, &found.inverters, |entry| sources::inverter(entry, &stock.inverters));
    let loads = read_all(text, log, &LOAD, &found.loads, equipment::load);
    for circuit in &found.circuits {
        surroundings::check(ambient, *circuit, log);
    }
    let mut reader = Circuits::new(text, &found.circuits);
    let circuits: Vec<_> = found.circuits.iter().map(|circuit| reader.circuit(log, *circuit)).collect();

    let (name, rules, earthing, ambient, place) = head?;
    if has_weather && weather.is_none() {
        return None;
    }
    Some(Document {
        name,
        rules: rules_with(rules, overrides, overrides_at, log)?,
        earthing,
        ambient,
        place,
        weather,
        banks: banks?,
        arrays: arrays?,
        controllers: controllers?,
        generators: generators?,
        converters: converters?,
        readings: readings?,
        boards: boards?,
        inverters: inverters?,
        loads: loads?,
        circuits: circuits.into_iter().collect::<Option<_>>()?,
        stock,
    })
}

/// Names, ends of circuits, and what they feed.
fn check_ends(found: &Sections<'_>, log: &mut Log) {
    let nodes = [
        (Kind::Bank, &found.banks),
        (Kind::Array, &found.arrays),
        (Kind::Controller, &found.controllers),
        (Kind::Generator, &found.generators),
        (Kind::Converter, &found.converters),
        (Kind::Board, &found.boards),
        (Kind::Inverter, &found.inverters),
        (Kind::Load, &found.loads),
    ];
    let nodes =
        nodes.into_iter().flat_map(|(kind, list)| list.iter().filter_map(move |at| Node::of(kind, *at)));
    let wires = found.circuits.iter().map(|circuit| Wire::of(*circuit)).collect();
    Plan::new(nodes.collect(), wires).check(log);
}

/// Reads every section of a kind, so that the problems of all are found.
fn read_all<'d, T>(
    text: &'d str,
    log: &mut Log,
    section: &'static Section,
    found: &[Found<'d>],
    read: impl Fn(&mut Entry<'d, '_>) -> Option<T>,
) -> Option<Vec<T>> {
    let entries: Vec<Option<T>> =
        found.iter().map(|found| read(&mut Entry::open(text, log, section, *found, None))).collect();
    entries.into_iter().collect()
}

type Head = (String, Rules, Earthing, (ThermodynamicTemperature, ThermodynamicTemperature), Place);

fn head_of(entry: &mut Entry<'_, '_>) -> Option<Head> {
    let name = entry.name();
    let earthing = entry.word(&EARTHING, EARTHING_WORDS);
    let ambient: Option<(ThermodynamicTemperature, ThermodynamicTemperature)> = rising(entry, &SITE_AMBIENT);
    let rules = entry.text(&RULES).and_then(|word| {
        let rules = Rules::named(word);
        if let Err(error) = &rules {
            entry.problem(&RULES, error.to_string());
        }
        rules.ok()
    });
    let place = times::place(entry, earthing);
    Some((name?, rules?, earthing?, ambient?, place))
}

fn rules_with(rules: Rules, overrides: Overrides, at: usize, log: &mut Log) -> Option<Rules> {
    match rules.with_overrides(overrides) {
        Ok(rules) => Some(rules),
        Err(error) => {
            log.push(at, RULES_OVERRIDE.header.to_owned(), error.to_string());
            None
        }
    }
}

/// The top of the file.
struct Top<'d> {
    text: &'d str,
    tree: &'d DeTable<'d>,
}

impl<'d> Top<'d> {
    /// Whether every section is known.
    fn check_keys(&self, log: &mut Log) -> bool {
        let mut is_all_known = true;
        for key in self.tree.keys() {
            let name: &str = key.get_ref();
            if TOP.iter().any(|&(known, _)| known == name) {
                continue;
            }
            let at = key.span().start;
            let meant = MEANT_SECTIONS.iter().find(|&&(word, _)| word == name).map(|&(_, written)| written);
            let near = || {
                let word = nearest(name, TOP.iter().map(|&(known, _)| known))?;
                TOP.iter().find(|&&(known, _)| known == word).map(|&(_, written)| written)
            };
            let sentence = if let Some(written) = meant.or_else(near) {
                format!("no section '{}'; did you mean {written}?", Cut(name))
            } else {
                let all: Vec<&str> = TOP.iter().map(|&(_, written)| written).collect();
                format!("no section '{}'; at the top stand {}", Cut(name), all.join(", "))
            };
            is_all_known = false;
            log.push(at, String::new(), sentence);
        }
        is_all_known
    }

    fn check_format(&self, log: &mut Log) {
        let Some(value) = self.tree.get(FORMAT.name) else {
            if !log.has_broken_lines() && !self.is_format_misplaced() {
                log.push_whole(
                    "key 'format' is missing; write 'format = 1' at the top of the file".to_owned(),
                );
            }
            return;
        };
        let is_known = matches!(value.get_ref(), DeValue::Integer(number) if number.as_str() == "1");
        if !is_known {
            let written = Cut(self.text.get(value.span()).unwrap_or(""));
            let sentence = format!("format {written} is not known to this version, which reads format 1");
            log.push(value.span().start, FORMAT.name.to_owned(), sentence);
        }
    }

    /// Whether it stands in a section, which that section reports.
    fn is_format_misplaced(&self) -> bool {
        self.tree.values().any(|value| value.get_ref().get(FORMAT.name).is_some())
    }

    fn value(&self, name: &str) -> Option<&'d Spanned<DeValue<'d>>> {
        self.tree.get(name)
    }

    fn one(&self, name: &str, form: &Section, log: &mut Log) -> Option<Found<'d>> {
        section(log, self.value(name)?, form)
    }

    fn many(&self, name: &str, form: &Section, log: &mut Log) -> Vec<Found<'d>> {
        self.value(name).map(|value| sections(self.text, log, value, form)).unwrap_or_default()
    }

    /// The user's own values and where they stand.
    fn overrides(&self, log: &mut Log) -> (Overrides, usize) {
        let none = (Overrides::default(), 0);
        let Some(rules) = self.one("rules", &RULES_SECTION, log) else { return none };
        // Opened for its keys: under [rules] stands nothing but the overrides.
        Entry::open(self.text, log, &RULES_SECTION, rules, None);
        let Some(value) = rules.table.get(OVERRIDE.name) else { return none };
        let Some(found) = section(log, value, &RULES_OVERRIDE) else { return none };
        let mut entry = Entry::open(self.text, log, &RULES_OVERRIDE, found, None);
        let overrides = Overrides {
            continuous_factor: entry.number(&CONTINUOUS_FACTOR),
            drop: entry.quantity(&OWN_DROP),
            unfused: entry.quantity(&UNFUSED_LENGTH),
            engine_space: entry.number(&ENGINE_SPACE),
            bundling: entry.number(&BUNDLING),
            device_ratio: entry.number(&DEVICE_RATIO),
            aluminium: entry.word(&ALUMINIUM, ALUMINIUM_WORDS),
        };
        (overrides, found.at)
    }
}
