//! The guide tells what the reader reads: its example is read, and every key with its range and its words
//! stands in it, and nothing else.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::{VALID, problems};
use crate::error::Allowed;
use crate::site::read::keys::{self, Key, Range, Section, Words};
use crate::site::read::{plant_keys, sections};

const GUIDE: &str = include_str!("../../../../guide/site_file.md");

const SECTIONS: [Section; 25] = [
    sections::SITE,
    sections::WEATHER,
    sections::BANK,
    sections::ARRAY,
    sections::CONTROLLER,
    sections::GENERATOR,
    sections::CONVERTER,
    keys::BOARD,
    sections::INVERTER,
    sections::LOAD,
    keys::CIRCUIT,
    keys::CIRCUIT_DEVICE,
    keys::CIRCUIT_JOINT,
    keys::CIRCUIT_PART,
    sections::READING,
    sections::STOCK,
    keys::STOCK_CABLE,
    keys::STOCK_DEVICE,
    keys::STOCK_LUG,
    sections::STOCK_BATTERY,
    sections::STOCK_MODULE,
    sections::STOCK_CONTROLLER,
    sections::STOCK_INVERTER,
    keys::RULES_SECTION,
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
fn the_examples_are_read() {
    let examples: Vec<&str> =
        GUIDE.split("```toml\n").skip(1).map(|rest| rest.split("```").next().unwrap_or("")).collect();
    assert_eq!(examples.len(), 3);
    for example in examples {
        assert_eq!(problems(example), "none", "{example}");
    }
}

#[test]
fn every_key_stands_in_its_section_with_its_range() {
    for section in SECTIONS.iter().filter(|section| section.keys().any(is_key)) {
        for key in section.keys().filter(|key| is_key(key)) {
            let row = row(section.header, key);
            let range = range(&key.range);
            assert!(row.contains(&range), "{}, {}: {range}", section.header, key.name);
            let is_open = range.starts_with("> ") || !row.contains(&format!("> {range}"));
            assert!(range.is_empty() || is_open, "{}, {}: {range}", section.header, key.name);
            let is_needed = section.needed.iter().any(|needed| needed.name == key.name);
            assert_eq!(row.contains("| – |"), is_needed, "{}, {}", section.header, key.name);
        }
        let rows = part(section.header).lines().filter(|line| line.starts_with("| `")).count();
        let known = section.keys().filter(|key| is_key(key)).count();
        assert_eq!(rows, known, "{} has a row that is no key", section.header);
    }
}

/// All parts of the whole document under a header, up to the next header.
fn stated(header: &str) -> Vec<&'static str> {
    let begin = format!("\n{header}");
    let parts = VALID.split(begin.as_str()).skip(1);
    parts.map(|rest| rest.split("\n[").next().unwrap_or("")).collect()
}

#[test]
fn every_section_and_every_key_stands_in_the_whole_document() {
    for section in SECTIONS.iter().filter(|section| section.header != keys::RULES_SECTION.header) {
        let parts = stated(section.header);
        assert!(!parts.is_empty(), "{}", section.header);
        for key in section.keys().filter(|key| is_key(key)) {
            let line = format!("\n{} = ", key.name);
            assert!(parts.iter().any(|part| part.contains(&line)), "{}, {}", section.header, key.name);
        }
    }
    for (_, written) in sections::TOP {
        assert!(VALID.contains(written), "{written}");
    }
}

/// Whether a section takes a name at the top of the file, or under one.
#[test]
fn every_section_of_the_top_and_of_the_stock_is_declared_once() {
    for (name, written) in sections::TOP.iter().filter(|(name, _)| !["format", "rules"].contains(name)) {
        let found = SECTIONS.iter().filter(|section| section.header == *written).count();
        assert_eq!(found, 1, "{written}");
        assert_eq!(sections::PLURAL.contains(name), written.starts_with("[["), "{name}");
    }
    for (at, section) in SECTIONS.iter().enumerate() {
        assert!(SECTIONS.iter().skip(at + 1).all(|other| other.header != section.header));
        let names: Vec<&str> = section.keys().map(|key| key.name).collect();
        for (at, name) in names.iter().enumerate() {
            assert!(!names.iter().skip(at + 1).any(|other| other == name), "{} {name}", section.header);
        }
    }
}

/// What people write for another name leads to a name there is, and is none itself where it is taken for another.
#[test]
fn every_meant_word_leads_somewhere() {
    use crate::site::read::meant::{MEANT, MEANT_SECTIONS};
    let is_key = |name: &str| SECTIONS.iter().any(|section| section.keys().any(|key| key.name == name));
    for (word, meant) in MEANT {
        assert!(is_key(meant), "{word} → {meant}");
        let useful = SECTIONS.iter().any(|section| {
            let has = |name: &str| section.keys().any(|key| key.name == name);
            has(meant) && !has(word)
        });
        assert!(useful, "{word} → {meant}");
    }
    for (word, written) in MEANT_SECTIONS {
        assert!(SECTIONS.iter().any(|section| section.header == written), "{word}");
        assert!(!sections::TOP.iter().any(|(name, _)| *name == word), "{word}");
    }
}

/// The value that a sentence gives as an example is one that is read.
#[test]
fn every_example_of_a_key_is_within_its_range() {
    for section in SECTIONS {
        for key in section.keys().filter(|key| is_key(key)) {
            let number =
                key.example.trim_matches(['"', '[', ']']).split([' ', '"', ',']).next().unwrap_or("");
            let Ok(number) = number.parse::<f64>() else { continue };
            let is_within = match key.range.allowed {
                Allowed::Between(least, most) => {
                    let part = if key.example.contains(" %\"") { number / 100.0 } else { number };
                    (least..=most).contains(&part) || !key.example.contains(key.range.unit)
                }
                Allowed::AboveUpTo(least, _) => number > least,
                _ => true,
            };
            assert!(is_within, "{}, {}: {}", section.header, key.name, key.example);
        }
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
    has_words(&sections::SITE, &keys::EARTHING, keys::EARTHING_WORDS);
    has_words(&sections::LOAD, &keys::LOAD_KIND, keys::LOAD_KIND_WORDS);
    has_words(&sections::LOAD, &keys::USE, keys::USE_WORDS);
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
    has_words(&sections::SITE, &plant_keys::MONITORING, sections::MONITORING_WORDS);
    has_words(&sections::BANK, &plant_keys::TAKE_OFF, sections::TAKE_OFF_WORDS);
    has_words(&sections::BANK, &plant_keys::ROOM, sections::ROOM_WORDS);
    for section in [sections::CONTROLLER, sections::STOCK_CONTROLLER] {
        has_words(&section, &plant_keys::CONTROLLER_KIND, sections::CONTROLLER_WORDS);
        has_words(&section, &plant_keys::SENSE, sections::SENSE_WORDS);
    }
    has_words(&sections::GENERATOR, &plant_keys::SENSE, sections::SENSE_WORDS);
    has_words(&sections::GENERATOR, &plant_keys::GENERATOR_KIND, sections::GENERATOR_WORDS);
    for month in sections::MONTH_WORDS {
        assert!(row("[[load]]", &plant_keys::MONTHS).contains(month), "{month}");
    }
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
