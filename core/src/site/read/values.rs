//! The values of a section, each by its declaration: text, word, flag, count, number, quantity, list.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::str::FromStr;

use toml::Spanned;
use toml::de::DeValue;

use super::entry::{Entry, kind, shown};
use super::keys::{Key, NAME, Words};
use super::log::{Cut, nearest};
use crate::error::{Error, Snippet};
use crate::quantity::{Textual, parse};

/// Longest name, in bytes.
const LONGEST_NAME: usize = 200;

impl<'d> Entry<'d, '_> {
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
        self.problem_at(value.span().start, key, sentence);
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
                self.problem_at(value.span().start, key, error.to_string());
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
                None if all.len() == 1 => {
                    format!("'{}' is not known here; it must be {}", Cut(text), all.join(""))
                }
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

    /// Reports a value of another kind than the key needs.
    pub(super) fn wrong_form(&mut self, key: &Key, value: &Spanned<DeValue<'_>>) {
        let such_as =
            if key.example.is_empty() { String::new() } else { format!(", such as {}", key.example) };
        let found = match value.get_ref() {
            DeValue::Array(_) | DeValue::Table(_) => format!("{} stands here", kind(value)),
            _ => format!("'{}' is {}", Cut(shown(self.text, value)), kind(value)),
        };
        self.problem_at(value.span().start, key, format!("{found}; {} is needed{such_as}", key.needed));
    }
}
