//! From text to a tree with spans. A syntax error is reported and stepped over, so that it hides nothing else.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::String;

use toml::de::{DeTable, DeValue, Error};

use super::log::{Cut, Log};

/// Above this size the first syntax error must be mended before the rest is listed: a text of a few MiB can
/// hold millions, and each would take memory.
const MOST_RECOVERED: usize = 1024 * 1024;

/// Keys and values of a document, at most.
const MOST_ENTRIES: usize = 200_000;

/// Levels of nesting, at most; the format itself needs four.
const MOST_DEPTH: usize = 32;

/// The text with the parts that stop the parser blanked out; `None` if there are none.
///
/// The parser recovers from most errors by itself, but reads nothing more after a key without a value, and
/// forgets a list of sections when the same header comes again with single brackets.
pub(super) fn blanked(text: &str, log: &mut Log) -> Option<String> {
    if text.len() > MOST_RECOVERED {
        if let Err(error) = DeTable::parse(text) {
            report(text, &error, log);
            log.push_whole(
                "the file is over 1 MiB: mend its syntax first, then the rest is checked".to_owned(),
            );
        }
        return None;
    }
    let (_, errors) = DeTable::parse_recoverable(text);
    let mut bytes = text.as_bytes().to_vec();
    let mut changed = false;
    for error in &errors {
        report(text, error, log);
        let Some(span) = error.span() else { continue };
        let region = if error.message().starts_with("key with no value") {
            line_of(text, span.start)
        } else if error.message().starts_with("duplicate key") && is_header(text, span.start) {
            section_of(text, span.start)
        } else {
            continue;
        };
        for byte in bytes.get_mut(region).into_iter().flatten().filter(|byte| **byte != b'\n') {
            *byte = b' ';
            changed = true;
        }
    }
    // Lines are blanked whole, so the text stays UTF-8.
    if changed { String::from_utf8(bytes).ok() } else { None }
}

/// Parses what [`blanked`] left. Its errors were reported there, save those the blanking brought to light.
pub(super) fn tree<'t>(text: &'t str, log: &mut Log) -> Option<DeTable<'t>> {
    if text.len() > MOST_RECOVERED {
        return DeTable::parse(text).ok().map(toml::Spanned::into_inner);
    }
    let (table, errors) = DeTable::parse_recoverable(text);
    for error in &errors {
        report(text, error, log);
    }
    Some(table.into_inner())
}

/// Refuses a tree that is too large or too deep to be a site.
pub(super) fn is_moderate(table: &DeTable<'_>, log: &mut Log) -> bool {
    let mut measure = Measure::default();
    measure.table(table, 1);
    if measure.entries > MOST_ENTRIES {
        log.push_whole(format!(
            "the file has {} keys and values; at most {MOST_ENTRIES} are read: split the site",
            measure.entries
        ));
        return false;
    }
    if let Some(at) = measure.too_deep {
        log.push(
            at,
            String::new(),
            format!("nested deeper than {MOST_DEPTH} levels; no section of a site file needs more than 4"),
        );
        return false;
    }
    true
}

#[derive(Default)]
struct Measure {
    entries: usize,
    too_deep: Option<usize>,
}

impl Measure {
    fn table(&mut self, table: &DeTable<'_>, depth: usize) {
        for (key, value) in table {
            self.value(value.get_ref(), key.span().start, depth);
        }
    }

    // The parser itself stops at 80 levels of lists and 80 of dots, so the recursion is bounded.
    fn value(&mut self, value: &DeValue<'_>, at: usize, depth: usize) {
        self.entries = self.entries.saturating_add(1);
        if depth > MOST_DEPTH {
            self.too_deep.get_or_insert(at);
        }
        match value {
            DeValue::Table(table) => self.table(table, depth.saturating_add(1)),
            DeValue::Array(array) => {
                for item in array {
                    self.value(item.get_ref(), item.span().start, depth.saturating_add(1));
                }
            }
            _ => {}
        }
    }
}

/// One syntax error as a sentence of ours, with what to do.
fn report(text: &str, error: &Error, log: &mut Log) {
    let message = error.message();
    let (at, found) = match error.span() {
        Some(span) => (span.start, text.get(span).unwrap_or("")),
        // The one error without a place: too many dots in a key.
        None => (dotted(text), ""),
    };
    let begins = |with: &str| message.starts_with(with);
    let sentence = if begins("string values must be quoted") && found.is_empty() || begins("missing value") {
        "no value after '='; write one, or take the line out".to_owned()
    } else if begins("string values must be quoted") {
        format!("'{0}' must stand in quotation marks: \"{0}\"", Cut(found))
    } else if begins("key with no value") {
        let line = text.get(line_of(text, at)).unwrap_or("").trim();
        format!("'{}' is no line of a site file; write key = value, [section] or # comment", Cut(line))
    } else if begins("duplicate key") {
        format!("'{}' stands twice here; take one of them out", Cut(found))
    } else if begins("unclosed array table") || begins("unclosed table") {
        "the header of the section is not closed; write [name] or [[name]] on a line of its own".to_owned()
    } else if begins("unclosed array") {
        "the list is not closed; write ']' after its last value".to_owned()
    } else if begins("missing comma between array elements") {
        "no comma between two values of the list; write [\"a\", \"b\"]".to_owned()
    } else if begins("invalid basic string") && message.ends_with("`\"`") || begins("invalid literal string")
    {
        "the text in quotation marks is not closed on this line".to_owned()
    } else if begins("cannot recurse") || begins("recursion limit") {
        format!("nested deeper than {MOST_DEPTH} levels; no section of a site file needs more than 4")
    } else {
        format!("this is no TOML: {message}")
    };
    log.syntax(at, sentence);
}

/// Offset of the line with the most dots.
fn dotted(text: &str) -> usize {
    let mut at = 0_usize;
    let mut most = (0, 0);
    for line in text.split_inclusive('\n') {
        let dots = line.bytes().filter(|&byte| byte == b'.').count();
        if dots > most.0 {
            most = (dots, at);
        }
        at = at.saturating_add(line.len());
    }
    most.1
}

fn line_start(text: &str, at: usize) -> usize {
    text.get(..at).and_then(|before| before.rfind('\n')).map_or(0, |end| end.saturating_add(1))
}

fn line_of(text: &str, at: usize) -> core::ops::Range<usize> {
    let start = line_start(text, at);
    let end =
        text.get(at..).and_then(|rest| rest.find('\n')).map_or(text.len(), |end| at.saturating_add(end));
    start..end
}

fn is_header(text: &str, at: usize) -> bool {
    text.get(line_start(text, at)..at).is_some_and(|line| line.trim_start().starts_with('['))
}

/// From the header at an offset to the next header.
fn section_of(text: &str, at: usize) -> core::ops::Range<usize> {
    let start = line_start(text, at);
    let mut end = line_of(text, at).end;
    for line in text.get(end..).unwrap_or("").split_inclusive('\n') {
        if line.trim_start().starts_with('[') {
            break;
        }
        end = end.saturating_add(line.len());
    }
    start..end
}
