//! Reads a site file: every problem with its line and its remedy, not the first only.
//!
//! The text becomes a tree of spans ([`syntax`]), each section is walked against its declared keys
//! ([`keys`], [`plant_keys`], [`sections`], [`entry`]), and what stands between sections is checked by itself ([`ends`],
//! [`reach`], [`fed`], [`references`]), so that no slip in one place hides another.

mod bank;
mod circuits;
mod ends;
mod entry;
mod equipment;
mod fed;
mod keys;
mod log;
mod meant;
mod modules;
mod nodes;
mod plant;
mod plant_keys;
mod reach;
mod references;
mod sections;
mod sources;
mod stock;
mod surroundings;
mod syntax;
#[cfg(test)]
mod tests;
mod times;
mod values;
mod ways;
mod whole;

use alloc::format;
use alloc::string::String;
use alloc::vec;
use alloc::vec::Vec;
use core::fmt;

use super::model::Document;

/// Largest text that is read, in bytes: 8 MiB.
const MOST_BYTES: usize = 8 * 1024 * 1024;

/// One problem of a file.
#[derive(Clone, Debug, PartialEq)]
pub struct Problem {
    /// Line in the file, from 1; 0 where it concerns the whole file.
    pub line: u32,
    /// Place: `[[circuit]] "pump", size`; empty where the line says all.
    pub place: String,
    /// The sentence.
    pub text: String,
}

impl Problem {
    /// A problem of the whole file.
    fn whole(text: String) -> Self {
        Self { line: 0, place: String::new(), text }
    }
}

impl fmt::Display for Problem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.line > 0 {
            write!(f, "line {}", self.line)?;
            f.write_str(if self.place.is_empty() { ": " } else { ", " })?;
        }
        if !self.place.is_empty() {
            write!(f, "{}: ", self.place)?;
        }
        f.write_str(&self.text)
    }
}

/// All problems of a file, in file order; never empty. At most 200 are kept; the second field counts the others.
#[derive(Clone, Debug, PartialEq)]
pub struct Problems(pub Vec<Problem>, pub usize);

impl fmt::Display for Problems {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (index, problem) in self.0.iter().enumerate() {
            if index > 0 {
                f.write_str("\n")?;
            }
            write!(f, "{problem}")?;
        }
        if self.1 > 0 {
            write!(f, "\nand {} more", self.1)?;
        }
        Ok(())
    }
}

impl core::error::Error for Problems {}

/// Reads a site document.
///
/// The format is described key by key in the guide, `core/guide/site_file.md`. Read in full are texts of at
/// most 8 MiB, 200,000 keys and values, and 32 levels of nesting.
///
/// # Errors
/// All its problems, in file order, one sentence each, with line and remedy.
///
/// # Example
/// ```
/// let problems = ampwright::site::read("format = 1\n[site]\nnmae = 'Heron Point'\n").unwrap_err();
/// assert!(problems.to_string().contains("line 3, [site]: no key 'nmae'; did you mean 'name'?"));
/// ```
pub fn read(text: &str) -> Result<Document, Problems> {
    if text.len() > MOST_BYTES {
        return Err(refused(format!(
            "the file has {} bytes; at most {MOST_BYTES} are read: a site file lists circuits, not measurements",
            text.len()
        )));
    }
    whole::site(text)
}

/// Reads a site document from the bytes of a file.
///
/// # Errors
/// As [`read`]; and where the bytes are no text, the first byte that shows it.
///
/// # Example
/// ```
/// let problems = ampwright::site::read_bytes(b"format = 1\n\xff").unwrap_err();
/// assert!(problems.to_string().starts_with("not a text file: byte 12 is not UTF-8"));
/// ```
pub fn read_bytes(bytes: &[u8]) -> Result<Document, Problems> {
    // The size first: nothing is gained by looking through the bytes of a disk image.
    if bytes.len() > MOST_BYTES {
        return Err(refused(format!(
            "the file has {} bytes; at most {MOST_BYTES} are read: a site file lists circuits, not measurements",
            bytes.len()
        )));
    }
    if let Some(at) = bytes.iter().position(|&byte| byte == 0) {
        return Err(refused(format!(
            "not a text file: byte {} is zero; a site file is plain text in UTF-8",
            at.saturating_add(1)
        )));
    }
    match core::str::from_utf8(bytes) {
        Ok(text) => read(text),
        Err(error) => Err(refused(format!(
            "not a text file: byte {} is not UTF-8; save the site file as plain text in UTF-8",
            error.valid_up_to().saturating_add(1)
        ))),
    }
}

fn refused(text: String) -> Problems {
    Problems(vec![Problem::whole(text)], 0)
}
