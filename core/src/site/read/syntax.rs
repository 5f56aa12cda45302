//! From text to a tree with spans. A syntax error is reported and stepped over, so that it hides nothing else.

use alloc::borrow::ToOwned;
use alloc::collections::BTreeSet;
use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;
use core::ops::Range;

use toml::de::{DeTable, DeValue, Error};

use super::log::{Cut, Log};
use super::sections::PLURAL;

/// Above this size the first syntax error must be mended before the rest is listed: a text of a few MiB can
/// hold millions, and each would take memory.
const MOST_RECOVERED: usize = 1024 * 1024;

/// Keys and values of a document, at most.
const MOST_ENTRIES: usize = 200_000;

/// Levels of nesting, at most; the format itself needs four.
const MOST_DEPTH: usize = 32;

/// Parses a text; beside the tree, the parts that stopped the parser or confused it.
///
/// The parser recovers from most errors by itself, but reads nothing more after a key without a value, and
/// forgets a list of sections when the same header comes again with single brackets.
pub(super) fn parsed<'t>(text: &'t str, log: &mut Log) -> (Option<DeTable<'t>>, Vec<Range<usize>>) {
    if text.len() > MOST_RECOVERED {
        let tree = DeTable::parse(text);
        if let Err(error) = &tree {
            report(text, error, log);
            log.push_whole(
                "the file is over 1 MiB: mend its syntax first, then the rest is checked".to_owned(),
            );
        }
        return (tree.ok().map(toml::Spanned::into_inner), Vec::new());
    }
    let (tree, errors) = DeTable::parse_recoverable(text);
    let mut obstacles: Vec<Range<usize>> = Vec::new();
    let mut headers: BTreeSet<&str> = BTreeSet::new();
    for error in &errors {
        let at = place_of(text, error);
        // Within a section that stands twice, every key may stand twice.
        if obstacles.last().is_some_and(|last| last.contains(&at)) {
            continue;
        }
        let message = error.message();
        let is_twice = message.starts_with("duplicate key") && is_header(text, at);
        let header = error.span().and_then(|span| text.get(span)).filter(|_| is_twice);
        // Once a section of that name has stood in the wrong form, each later one repeats the error.
        if header.is_none_or(|name| headers.insert(name)) {
            report(text, error, log);
        }
        if message.starts_with("key with no value") || message.starts_with("recursion limit") {
            obstacles.push(line_of(text, at));
        } else if header.is_some() {
            obstacles.push(section_of(text, at));
        }
    }
    (Some(tree.into_inner()), obstacles)
}

/// The text with some parts blanked out; every offset and line stays where it was.
pub(super) fn without(text: &str, obstacles: &[Range<usize>]) -> Option<String> {
    let mut bytes = text.as_bytes().to_vec();
    for obstacle in obstacles {
        for byte in bytes.get_mut(obstacle.clone()).into_iter().flatten().filter(|byte| **byte != b'\n') {
            *byte = b' ';
        }
    }
    // Lines are blanked whole, so this stays UTF-8.
    String::from_utf8(bytes).ok()
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
    let at = place_of(text, error);
    let found = error.span().and_then(|span| text.get(span)).unwrap_or("");
    let begins = |with: &str| message.starts_with(with);
    let sentence = if begins("string values must be quoted") && found.is_empty() || begins("missing value") {
        "no value after '='; write one, or take the line out".to_owned()
    } else if begins("string values must be quoted") {
        format!("'{0}' must stand in quotation marks: \"{0}\"", Cut(found))
    } else if begins("key with no value") {
        let line = text.get(line_of(text, at)).unwrap_or("").trim();
        format!("'{}' is no line of a site file; write key = value, [section] or # comment", Cut(line))
    } else if begins("duplicate key") && is_header(text, at) {
        let start = text.get(line_start(text, at)..at).unwrap_or("").trim();
        let name = Cut(found);
        if start == "[[" {
            format!(
                "a section [{name}] or [[{name}.…]] stands above the first [[{name}]]; move it below, or mend its header"
            )
        } else if PLURAL.contains(&found) {
            format!("write [[{name}]] with two brackets: the section may stand several times")
        } else {
            format!("the section [{name}] stands twice; put all its keys into the first")
        }
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
    } else if begins("unexpected key or value") {
        "more stands on this line than one key = value; take it out, or begin it with #".to_owned()
    } else if begins("cannot recurse") || begins("recursion limit") {
        format!("nested deeper than {MOST_DEPTH} levels; no section of a site file needs more than 4")
    } else {
        format!("this is no TOML: {message}")
    };
    log.syntax(at, sentence);
}

/// Where an error stands.
fn place_of(text: &str, error: &Error) -> usize {
    // The one error without a place: too many dots in a key.
    error.span().map_or_else(|| dotted(text), |span| span.start)
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

fn line_of(text: &str, at: usize) -> Range<usize> {
    let start = line_start(text, at);
    let end =
        text.get(at..).and_then(|rest| rest.find('\n')).map_or(text.len(), |end| at.saturating_add(end));
    start..end
}

fn is_header(text: &str, at: usize) -> bool {
    text.get(line_start(text, at)..at).is_some_and(|line| line.trim_start().starts_with('['))
}

/// From the header at an offset to the next header.
fn section_of(text: &str, at: usize) -> Range<usize> {
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
