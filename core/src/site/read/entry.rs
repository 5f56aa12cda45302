//! Opens one section of the file: its keys against the declared ones, its problems with their place.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::keys::{CIRCUIT, Key, Section};
use super::log::{Cut, Log, Quoted, nearest};
use super::meant::MEANT;

/// A section of the file and where it stands.
#[derive(Clone, Copy)]
pub(super) struct Found<'d> {
    pub(super) table: &'d DeTable<'d>,
    /// Offset of its header.
    pub(super) at: usize,
}

/// A section being read.
pub(super) struct Entry<'d, 'l> {
    pub(super) text: &'d str,
    pub(super) log: &'l mut Log,
    found: Found<'d>,
    place: String,
    /// Whether a syntax error in this section may hide keys.
    may_hide: bool,
    /// Keys that a misspelt one was taken for.
    meant: Vec<&'static str>,
}

impl<'d, 'l> Entry<'d, 'l> {
    /// Opens a section: unknown keys and missing ones are reported here. `of` is the entry it belongs to.
    pub(super) fn open(
        text: &'d str,
        log: &'l mut Log,
        section: &'static Section,
        found: Found<'d>,
        of: Option<&str>,
    ) -> Self {
        let mut place = section.header.to_owned();
        let name = found.table.get("name").and_then(|value| value.get_ref().as_str());
        if let Some(name) = name.filter(|name| !name.is_empty()) {
            place = format!("{place} {}", Quoted(name));
        }
        if let Some(of) = of {
            place = format!("{place} of {}", Quoted(of));
        }
        let mut entry = Self { text, log, found, place, may_hide: false, meant: Vec::new() };
        entry.check_keys(section);
        entry
    }

    fn check_keys(&mut self, section: &'static Section) {
        let mut end = self.found.at;
        for (key, value) in self.found.table {
            end = end.max(value.span().end);
            let name: &str = key.get_ref();
            if !section.keys().any(|known| known.name == name) {
                let sentence = self.unknown(name, section);
                self.log.push(key.span().start, self.place.clone(), sentence);
            }
        }
        // To the next header, since the broken line may be the last.
        self.may_hide = self.log.has_broken_lines() && {
            let rest = self.text.get(end..).unwrap_or("");
            let next = rest.find("\n[").map_or(self.text.len(), |more| end.saturating_add(more));
            self.log.is_broken(self.found.at, next)
        };
        for key in section.needed {
            if !self.has(key) && !self.is_excused(&[key]) {
                self.missing(key);
            }
        }
    }

    fn unknown(&mut self, name: &str, section: &'static Section) -> String {
        let found = Cut(name);
        if name == "format" {
            return "'format' belongs at the top of the file, before the first section".to_owned();
        }
        // Below the header of a device, every line is the device's.
        if section.header.starts_with("[[circuit.") && CIRCUIT.keys().any(|known| known.name == name) {
            return format!("'{found}' belongs to [[circuit]]; write it above the first {}", section.header);
        }
        let known = || section.keys().map(|known| known.name);
        let is_known = |meant: &str| known().any(|known| known == meant);
        let meant = MEANT.iter().find(|&&(word, meant)| word == name && is_known(meant));
        let meant = meant.map(|&(_, meant)| meant);
        if let Some(word) = meant.or_else(|| nearest(name, known())) {
            self.meant.push(word);
            return format!("no key '{found}'; did you mean '{word}'?");
        }
        let names: Vec<&str> = known().collect();
        match names.as_slice() {
            [only] => format!("no key '{found}'; the only key here is {only}"),
            names => format!("no key '{found}'; the keys here are {}", names.join(", ")),
        }
    }

    /// Whether keys that seem to be missing may only be misspelt, or stand on a line with a syntax error.
    pub(super) fn is_excused(&self, keys: &[&Key]) -> bool {
        self.may_hide || keys.iter().any(|key| self.meant.contains(&key.name))
    }

    /// Reports a key as missing.
    pub(super) fn missing(&mut self, key: &Key) {
        let sentence =
            format!("key '{}' is missing; {} is needed, such as {0} = {}", key.name, key.needed, key.example);
        self.problem_here(sentence);
    }

    /// A problem of the whole section.
    pub(super) fn problem_here(&mut self, sentence: String) {
        self.log.push(self.found.at, self.place.clone(), sentence);
    }

    /// A problem of one key; of the section, where the key is absent.
    pub(super) fn problem(&mut self, key: &Key, sentence: String) {
        let at = self.value(key).map_or(self.found.at, |value| value.span().start);
        self.problem_at(at, key, sentence);
    }

    /// A problem within the value of a key.
    pub(super) fn problem_at(&mut self, at: usize, key: &Key, sentence: String) {
        let place = format!("{}, {}", self.place, key.name);
        self.log.push(at, place, sentence);
    }

    /// Line of the section's header.
    pub(super) fn line(&self) -> u32 {
        self.log.line(self.found.at)
    }

    pub(super) fn has(&self, key: &Key) -> bool {
        self.found.table.contains_key(key.name)
    }

    /// A key's value as the parser gives it.
    pub(super) fn value(&self, key: &Key) -> Option<&'d Spanned<DeValue<'d>>> {
        self.found.table.get(key.name)
    }

    /// A key's value as it is written.
    pub(super) fn written(&self, key: &Key) -> String {
        self.value(key).map_or_else(String::new, |value| format!("'{}'", Cut(shown(self.text, value))))
    }

    /// The sections under a key.
    pub(super) fn sections(&mut self, key: &Key, section: &'static Section) -> Vec<Found<'d>> {
        let Some(value) = self.value(key) else { return Vec::new() };
        sections(self.text, self.log, value, section)
    }
}

/// The sections of a list, `[[name]]`.
pub(super) fn sections<'d>(
    text: &str,
    log: &mut Log,
    value: &'d Spanned<DeValue<'d>>,
    section: &Section,
) -> Vec<Found<'d>> {
    let (header, at) = (section.header, value.span().start);
    match value.get_ref() {
        DeValue::Array(list) => list
            .iter()
            .filter_map(|item| {
                let found = item.get_ref().as_table().map(|table| Found { table, at: item.span().start });
                if found.is_none() {
                    let sentence = format!("{} stands where a section {header} belongs", kind(item));
                    log.push(item.span().start, String::new(), sentence);
                }
                found
            })
            .collect(),
        DeValue::Table(table) => {
            let is_header = text.get(at..).is_some_and(|rest| rest.starts_with(['[', '{']));
            let sentence = if is_header {
                format!("write {header} with two brackets: the section may stand several times")
            } else {
                format!("this needs a section {header} above it; write that first")
            };
            log.push(at, String::new(), sentence);
            Vec::from([Found { table, at }])
        }
        _ => {
            log.push(at, String::new(), format!("{} stands where sections {header} belong", kind(value)));
            Vec::new()
        }
    }
}

/// The one section of a name, `[name]`.
pub(super) fn section<'d>(
    log: &mut Log,
    value: &'d Spanned<DeValue<'d>>,
    section: &Section,
) -> Option<Found<'d>> {
    let (header, at) = (section.header, value.span().start);
    if let Some(table) = value.get_ref().as_table() {
        return Some(Found { table, at });
    }
    let first = value.get_ref().as_array().and_then(|list| list.iter().next());
    if let Some((table, at)) = first.and_then(|item| Some((item.get_ref().as_table()?, item.span().start))) {
        let sentence = format!("write {header} with single brackets: the section stands once");
        log.push(at, String::new(), sentence);
        return Some(Found { table, at });
    }
    log.push(at, String::new(), format!("{} stands where a section {header} belongs", kind(value)));
    None
}

/// What a value is, in words.
pub(super) fn kind(value: &Spanned<DeValue<'_>>) -> &'static str {
    match value.get_ref() {
        DeValue::String(_) => "a text",
        DeValue::Integer(_) | DeValue::Float(_) => "a number",
        DeValue::Boolean(_) => "a truth value",
        DeValue::Datetime(_) => "a date",
        DeValue::Array(_) => "a list",
        DeValue::Table(_) => "a section",
    }
}

/// A value as it is written, without quotation marks.
pub(super) fn shown<'v>(text: &'v str, value: &'v Spanned<DeValue<'_>>) -> &'v str {
    match value.get_ref() {
        DeValue::String(text) => text,
        _ => text.get(value.span()).unwrap_or(""),
    }
}
