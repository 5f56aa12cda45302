//! The guide tells what the reader reads: its example is read, and every key with its range and its words
//! stands in it, and nothing else.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::{VALID, problems};
use crate::error::Allowed;
use crate::site::read::keys::{self, Key, Range, Section, Words};

const GUIDE: &str = include_str!("../../../../guide/site_file.md");

const SECTIONS: [Section; 14] = [
    keys::SITE,
    keys::BANK,
    keys::BOARD,
    keys::INVERTER,
    keys::LOAD,
    keys::CIRCUIT,
    keys::CIRCUIT_DEVICE,
    keys::CIRCUIT_JOINT,
    keys::CIRCUIT_PART,
    keys::STOCK,
    keys::STOCK_CABLE,
    keys::STOCK_DEVICE,
    keys::STOCK_LUG,
    keys::RULES_OVERRIDE,
];

/// The part of the guide under a heading.
fn part(header: &str) -> &'static str {
    let heading = format!("\n## `{header}`\n");
    let (_, rest) = GUIDE.split_once(heading.as_str()).unwrap_or_else(|| panic!("no heading for {header}"));
    rest.split("\n## ").next().unwrap_or("")
}

/// The row of a key.
fn row(header: &str, key: &Key) -> &'static str {
    let begin = format!("| `{}` |", key.name);
    let found = part(header).lines().find(|line| line.starts_with(&begin));
    found.unwrap_or_else(|| panic!("{header} has no row for {}", key.name))
}

/// Keys that stand for sections have a part of their own.
fn is_key(key: &Key) -> bool {
    !key.needed.starts_with("sections ") && !key.needed.starts_with("a section ")
}

fn range(range: &Range) -> String {
    let unit = if range.unit.is_empty() { String::new() } else { format!(" {}", range.unit) };
    match range.allowed {
        Allowed::AboveUpTo(least, most) => format!("> {least} … {most}{unit}"),
        Allowed::Between(least, most) => format!("{least} … {most}{unit}"),
        _ => String::new(),
    }
}

#[test]
fn the_example_is_read() {
    let examples: Vec<&str> =
        GUIDE.split("```toml\n").skip(1).map(|rest| rest.split("```").next().unwrap_or("")).collect();
    assert_eq!(examples.len(), 1);
    assert_eq!(problems(examples[0]), "none");
}

#[test]
fn every_key_stands_in_its_section_with_its_range() {
    for section in SECTIONS {
        for key in section.keys().filter(|key| is_key(key)) {
            let row = row(section.header, key);
            let range = range(&key.range);
            assert!(row.contains(&range), "{}, {}: {range}", section.header, key.name);
            let is_needed = section.needed.iter().any(|needed| needed.name == key.name);
            assert_eq!(row.contains("| – |"), is_needed, "{}, {}", section.header, key.name);
        }
        let rows = part(section.header).lines().filter(|line| line.starts_with("| `")).count();
        let known = section.keys().filter(|key| is_key(key)).count();
        assert_eq!(rows, known, "{} has a row that is no key", section.header);
    }
}

#[test]
fn every_section_and_every_key_stands_in_the_whole_document() {
    for section in SECTIONS {
        assert!(VALID.contains(section.header), "{}", section.header);
        for key in section.keys().filter(|key| is_key(key)) {
            assert!(VALID.contains(&format!("\n{} = ", key.name)), "{}", key.name);
        }
    }
    for (_, written) in keys::TOP {
        assert!(VALID.contains(written), "{written}");
    }
    let (_, later) = GUIDE.split_once("\n## Sections that this version does not read\n").unwrap();
    for name in keys::LATER {
        assert!(later.contains(&format!("[{name}]")), "{name}");
    }
}

fn has_words<T>(section: &Section, key: &Key, words: Words<T>) {
    for (word, _) in words {
        assert!(
            row(section.header, key).contains(&format!("`{word}`")),
            "{}, {}: {word}",
            section.header,
            key.name
        );
    }
}

#[test]
fn every_word_stands_in_the_row_of_its_key() {
    has_words(&keys::SITE, &keys::EARTHING, keys::EARTHING_WORDS);
    has_words(&keys::LOAD, &keys::LOAD_KIND, keys::LOAD_KIND_WORDS);
    has_words(&keys::LOAD, &keys::USE, keys::USE_WORDS);
    for section in [keys::CIRCUIT, keys::STOCK_CABLE] {
        has_words(&section, &keys::MATERIAL, keys::MATERIAL_WORDS);
        has_words(&section, &keys::COATING, keys::COATING_WORDS);
        for (class, _) in keys::CLASS_NUMBERS {
            assert!(row(section.header, &keys::CLASS).contains(&format!("{class}")), "{class}");
        }
    }
    has_words(&keys::CIRCUIT, &keys::INSTALLED, keys::INSTALLED_WORDS);
    has_words(&keys::CIRCUIT, &keys::SPACE, keys::SPACE_WORDS);
    has_words(&keys::CIRCUIT, &keys::RETURN, keys::RETURN_WORDS);
    has_words(&keys::CIRCUIT_DEVICE, &keys::POLE, keys::POLE_WORDS);
    has_words(&keys::CIRCUIT_DEVICE, &keys::END, keys::END_WORDS);
    has_words(&keys::CIRCUIT_JOINT, &keys::JOINT_KIND, keys::JOINT_WORDS);
    has_words(&keys::CIRCUIT_PART, &keys::PART_KIND, keys::PART_WORDS);
    has_words(&keys::RULES_OVERRIDE, &keys::ALUMINIUM, keys::ALUMINIUM_WORDS);
}

#[test]
fn families_and_chemistries_of_the_guide_are_known() {
    let words = |row: &'static str| -> Vec<&str> {
        let form = row.split('|').nth(2).unwrap_or("");
        form.split('`').skip(1).step_by(2).collect()
    };
    let families = words(row("[[circuit.device]]", &keys::FAMILY));
    assert_eq!(families.len(), crate::device::Family::ALL.len());
    for family in families {
        assert!(family.parse::<crate::device::Family>().is_ok(), "{family}");
    }
    let chemistries = words(row("[[bank]]", &keys::CHEMISTRY));
    assert_eq!(chemistries.len(), 6);
    for chemistry in chemistries {
        assert!(chemistry.parse::<crate::battery::Chemistry>().is_ok(), "{chemistry}");
    }
}
