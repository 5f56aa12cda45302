//! Walks one section of the file: each key by its declaration, each problem with its place.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::str::FromStr;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::keys::{Key, NAME, Section, Words};
use super::log::{Cut, Log, Quoted, nearest};
use crate::error::{Error, Snippet};
use crate::quantity::{Textual, parse};

/// Longest name, in bytes.
const LONGEST_NAME: usize = 200;

/// A section of the file and where it stands.
#[derive(Clone, Copy)]
pub(super) struct Found<'d> {
    pub(super) table: &'d DeTable<'d>,
    /// Offset of its header.
    pub(super) at: usize,
}

/// A section being read.
pub(super) struct Entry<'d, 'l> {
    text: &'d str,
    pub(super) log: &'l mut Log,
    found: Found<'d>,
    place: String,
    /// Whether a syntax error in this section may hide keys.
    may_hide: bool,
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
        if let Some(name) = found.table.get("name").and_then(|value| value.get_ref().as_str()) {
            place = format!("{place} {}", Quoted(name));
        }
        if let Some(of) = of {
            place = format!("{place} of {}", Quoted(of));
        }
        let mut entry = Self { text, log, found, place, may_hide: false };
        entry.check_keys(section);
        entry
    }

    fn check_keys(&mut self, section: &'static Section) {
        let mut end = self.found.at;
        for (key, value) in self.found.table {
            end = end.max(value.span().end);
            let name: &str = key.get_ref();
            if section.keys().any(|known| known.name == name) {
                continue;
            }
            let sentence = if section.later.contains(&name) {
                format!("this version does not read '{name}' yet; take the line out")
            } else if name == "format" {
                "'format' belongs at the top of the file, before the first section".to_owned()
            } else if let Some(word) = nearest(name, section.keys().map(|known| known.name)) {
                format!("no key '{}'; did you mean '{word}'?", Cut(name))
            } else {
                let names: Vec<&str> = section.keys().map(|known| known.name).collect();
                format!("no key '{}'; the keys here are {}", Cut(name), names.join(", "))
            };
            self.log.push(key.span().start, self.place.clone(), sentence);
        }
        // A key that stands on a line with a syntax error may be the one that seems to be missing.
        self.may_hide = self.is_broken(end);
        if self.may_hide {
            return;
        }
        for key in section.needed {
            if !self.has(key) {
                self.missing(key);
            }
        }
    }

    /// Whether a line of this section has a syntax error: from its header to the next.
    fn is_broken(&self, end: usize) -> bool {
        let rest = self.text.get(end..).unwrap_or("");
        // To the next header, since the broken line may be the last.
        let next = rest.find("\n[").map_or(self.text.len(), |more| end.saturating_add(more));
        self.log.has_broken_lines() && self.log.is_broken(self.found.at, next)
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

    /// Whether a key that seems to be missing may stand on a line with a syntax error.
    pub(super) fn may_hide_keys(&self) -> bool {
        self.may_hide
    }

    /// A key's value as the parser gives it.
    pub(super) fn raw(&self, key: &Key) -> Option<&'d Spanned<DeValue<'d>>> {
        self.value(key)
    }

    fn value(&self, key: &Key) -> Option<&'d Spanned<DeValue<'d>>> {
        self.found.table.get(key.name)
    }

    fn wrong_form(&mut self, key: &Key, value: &Spanned<DeValue<'_>>) {
        let such_as =
            if key.example.is_empty() { String::new() } else { format!(", such as {}", key.example) };
        let sentence = format!("{}; {} is needed{such_as}", described(self.text, value), key.needed);
        let place = format!("{}, {}", self.place, key.name);
        self.log.push(value.span().start, place, sentence);
    }

    /// A text.
    pub(super) fn text(&mut self, key: &Key) -> Option<&'d str> {
        let value = self.value(key)?;
        let text = value.get_ref().as_str();
        if text.is_none() {
            self.wrong_form(key, value);
        }
        text
    }

    /// The entry's own name.
    pub(super) fn name(&mut self) -> Option<String> {
        let name = self.text(&NAME)?;
        let wrong = if name.trim().is_empty() {
            "the name is empty; write the one on the label".to_owned()
        } else if name.len() > LONGEST_NAME {
            format!("the name has {} bytes; at most {LONGEST_NAME} are admitted", name.len())
        } else if name.chars().any(char::is_control) {
            "the name holds a control character (tab, line break or the like); take it out".to_owned()
        } else if name.trim() != name {
            "the name begins or ends with a space; take it out".to_owned()
        } else {
            return Some(name.to_owned());
        };
        self.problem(&NAME, wrong);
        None
    }

    /// A value with a text form of its own: a size, a stud, an insulation.
    pub(super) fn parsed<T: FromStr<Err = Error>>(&mut self, key: &Key) -> Option<T> {
        let value = self.value(key)?;
        self.parse_item(key, value, str::parse)
    }

    /// A quantity within the key's range.
    pub(super) fn quantity<Q: Textual>(&mut self, key: &Key) -> Option<Q> {
        let value = self.value(key)?;
        self.quantity_item(key, value)
    }

    fn quantity_item<Q: Textual>(&mut self, key: &Key, value: &Spanned<DeValue<'d>>) -> Option<Q> {
        let quantity: Q = self.parse_item(key, value, parse)?;
        if key.range.admits(quantity.base()) {
            return Some(quantity);
        }
        self.out_of_range(key, value);
        None
    }

    fn out_of_range(&mut self, key: &Key, value: &Spanned<DeValue<'_>>) {
        let mut allowed = key.range.allowed.to_string();
        if !key.range.unit.is_empty() {
            allowed = format!("{allowed} {}", key.range.unit);
        }
        let sentence = format!("'{}' is out of range; it must be {allowed}", Cut(shown(self.text, value)));
        let place = format!("{}, {}", self.place, key.name);
        self.log.push(value.span().start, place, sentence);
    }

    /// One text, or one number taken as the text it is written as: the parser of the text names the units.
    fn parse_item<T>(
        &mut self,
        key: &Key,
        value: &Spanned<DeValue<'d>>,
        parse: impl Fn(&str) -> Result<T, Error>,
    ) -> Option<T> {
        let text = match value.get_ref() {
            DeValue::String(text) => &**text,
            DeValue::Integer(_) | DeValue::Float(_) => shown(self.text, value),
            _ => {
                self.wrong_form(key, value);
                return None;
            }
        };
        match parse(text) {
            Ok(parsed) => Some(parsed),
            Err(error) => {
                let place = format!("{}, {}", self.place, key.name);
                self.log.push(value.span().start, place, error.to_string());
                None
            }
        }
    }

    /// Two values in a list.
    fn two<T>(
        &mut self,
        key: &Key,
        item: impl Fn(&mut Self, &'d Spanned<DeValue<'d>>) -> Option<T>,
    ) -> Option<(T, T)> {
        let value = self.value(key)?;
        let Some(list) = value.get_ref().as_array() else {
            self.wrong_form(key, value);
            return None;
        };
        let mut items = list.iter();
        let (Some(first), Some(second), None) = (items.next(), items.next(), items.next()) else {
            let count = list.len();
            let values = if count == 1 { "value" } else { "values" };
            self.problem(
                key,
                format!("the list has {count} {values}; {} is needed, such as {}", key.needed, key.example),
            );
            return None;
        };
        let (first, second) = (item(self, first), item(self, second));
        Some((first?, second?))
    }

    /// Two quantities in a list.
    pub(super) fn two_quantities<Q: Textual>(&mut self, key: &Key) -> Option<(Q, Q)> {
        self.two(key, |entry, value| entry.quantity_item(key, value))
    }

    /// Two values with a text form in a list.
    pub(super) fn two_parsed<T: FromStr<Err = Error>>(&mut self, key: &Key) -> Option<(T, T)> {
        self.two(key, |entry, value| entry.parse_item(key, value, str::parse))
    }

    /// A list of quantities; empty if absent.
    pub(super) fn quantities<Q: Textual>(&mut self, key: &Key) -> Vec<Q> {
        let Some(value) = self.value(key) else { return Vec::new() };
        let Some(list) = value.get_ref().as_array() else {
            self.wrong_form(key, value);
            return Vec::new();
        };
        if list.is_empty() {
            self.problem(
                key,
                format!("the list is empty; {} is needed, such as {}", key.needed, key.example),
            );
        }
        list.iter().filter_map(|item| self.quantity_item(key, item)).collect()
    }

    /// One of some words.
    pub(super) fn word<T: Copy>(&mut self, key: &Key, words: Words<T>) -> Option<T> {
        let text = self.text(key)?;
        let found = words.iter().find(|&&(word, _)| word == text).map(|&(_, meaning)| meaning);
        if found.is_none() {
            let all: Vec<&str> = words.iter().map(|&(word, _)| word).collect();
            let sentence = match nearest(text, all.iter().copied()) {
                Some(word) => format!("'{}' is not known here; did you mean '{word}'?", Cut(text)),
                None => format!("'{}' is not known here; it must be one of {}", Cut(text), all.join(", ")),
            };
            self.problem(key, sentence);
        }
        found
    }

    /// True or false; `absent` if absent.
    pub(super) fn flag(&mut self, key: &Key, absent: bool) -> bool {
        let Some(value) = self.value(key) else { return absent };
        let flag = value.get_ref().as_bool();
        if flag.is_none() {
            self.wrong_form(key, value);
        }
        flag.unwrap_or(absent)
    }

    /// A whole number within the key's range.
    pub(super) fn count(&mut self, key: &Key) -> Option<u32> {
        let value = self.value(key)?;
        let DeValue::Integer(integer) = value.get_ref() else {
            self.wrong_form(key, value);
            return None;
        };
        let count = u32::from_str_radix(integer.as_str(), integer.radix()).ok();
        let admitted = count.filter(|&count| key.range.admits(f64::from(count)));
        if admitted.is_none() {
            self.out_of_range(key, value);
        }
        admitted
    }

    /// A plain number within the key's range.
    pub(super) fn number(&mut self, key: &Key) -> Option<f64> {
        let value = self.value(key)?;
        let number = match value.get_ref() {
            DeValue::Integer(integer) if integer.radix() == 10 => integer.as_str().parse::<f64>().ok(),
            DeValue::Float(float) => float.as_str().parse::<f64>().ok(),
            _ => {
                self.wrong_form(key, value);
                return None;
            }
        };
        let admitted = number.filter(|&number| key.range.admits(number));
        if admitted.is_none() {
            self.out_of_range(key, value);
        }
        admitted
    }

    /// Energy let through, A²·s: the one unit that only devices have.
    #[allow(non_snake_case)]
    pub(super) fn let_through_A2s(&mut self, key: &Key) -> Option<f64> {
        let value = self.value(key)?;
        let joule_integral = self.parse_item(key, value, |text| {
            let accepted = "'12000 A2s'";
            let snippet = Snippet::new(text);
            let number_end = text
                .find(|c: char| !(c.is_ascii_digit() || matches!(c, '.' | '+' | '-' | 'e' | 'E')))
                .unwrap_or(text.len());
            let (number, unit) = text.split_at(number_end);
            let number: f64 = number.parse().map_err(|_| Error::NotANumber { text: snippet, accepted })?;
            match unit.trim() {
                "A2s" | "A²s" if number.is_finite() => Ok(number),
                "A2s" | "A²s" => Err(Error::NotFinite { text: snippet, accepted }),
                "" => Err(Error::NoUnit { text: snippet, accepted }),
                _ => Err(Error::UnknownUnit { text: snippet, accepted }),
            }
        })?;
        if key.range.admits(joule_integral) {
            return Some(joule_integral);
        }
        self.out_of_range(key, value);
        None
    }

    /// Reports two values of which the first must not be above the second.
    pub(super) fn ordered<Q: Textual>(
        &mut self,
        low: &Key,
        low_value: Option<Q>,
        high: &Key,
        high_value: Option<Q>,
    ) {
        if let (Some(least), Some(most)) = (low_value, high_value)
            && least.base() > most.base()
        {
            let (least, most) = (self.written(low), self.written(high));
            let sentence = format!("{least} is above {} = {most}; mend the one that is wrong", high.name);
            self.problem(low, sentence);
        }
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
    let header = section.header;
    match value.get_ref() {
        DeValue::Array(list) => list
            .iter()
            .filter_map(|item| {
                let found = item.get_ref().as_table().map(|table| Found { table, at: item.span().start });
                if found.is_none() {
                    let sentence =
                        format!("{} stands where a section {header} belongs", described(text, item));
                    log.push(item.span().start, String::new(), sentence);
                }
                found
            })
            .collect(),
        DeValue::Table(table) => {
            let sentence = format!("write {header} with two brackets: the section may stand several times");
            log.push(value.span().start, String::new(), sentence);
            Vec::from([Found { table, at: value.span().start }])
        }
        _ => {
            let sentence = format!("{} stands where sections {header} belong", described(text, value));
            log.push(value.span().start, String::new(), sentence);
            Vec::new()
        }
    }
}

/// The one section of a name, `[name]`.
pub(super) fn section<'d>(
    text: &str,
    log: &mut Log,
    value: &'d Spanned<DeValue<'d>>,
    section: &Section,
) -> Option<Found<'d>> {
    let at = value.span().start;
    if let Some(table) = value.get_ref().as_table() {
        return Some(Found { table, at });
    }
    let header = section.header;
    let first = value.get_ref().as_array().and_then(|list| list.iter().next());
    if let Some((table, at)) = first.and_then(|item| Some((item.get_ref().as_table()?, item.span().start))) {
        let sentence = format!("write {header} with single brackets: the section stands once");
        log.push(at, String::new(), sentence);
        return Some(Found { table, at });
    }
    log.push(
        at,
        String::new(),
        format!("{} stands where a section {header} belongs", described(text, value)),
    );
    None
}

/// What a value is, in words.
fn described(text: &str, value: &Spanned<DeValue<'_>>) -> String {
    let shown = Cut(shown(text, value));
    match value.get_ref() {
        DeValue::String(_) => format!("'{shown}' is a text"),
        DeValue::Integer(_) | DeValue::Float(_) => format!("'{shown}' is a number"),
        DeValue::Boolean(_) => format!("'{shown}' is true or false"),
        DeValue::Datetime(_) => format!("'{shown}' is a date"),
        DeValue::Array(_) => "a list".to_owned(),
        DeValue::Table(_) => "a section".to_owned(),
    }
}

/// A value as it is written, without quotation marks.
fn shown<'v>(text: &'v str, value: &'v Spanned<DeValue<'_>>) -> &'v str {
    match value.get_ref() {
        DeValue::String(text) => text,
        _ => text.get(value.span()).unwrap_or(""),
    }
}
