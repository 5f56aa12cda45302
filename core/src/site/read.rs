//! Reads a site file: every problem with its line and its remedy, not the first only.

use alloc::string::String;
use alloc::vec::Vec;
use core::fmt;

use super::model::Site;

/// One problem of a file.
#[derive(Clone, Debug, PartialEq)]
pub struct Problem {
    /// Line in the file, from 1; 0 where it concerns the whole file.
    pub line: u32,
    /// Place: `[[circuit]] "pump", size`.
    pub place: String,
    /// The sentence.
    pub text: String,
}

/// All problems of a file, in file order; never empty.
#[derive(Clone, Debug, PartialEq)]
pub struct Problems(pub Vec<Problem>);

impl fmt::Display for Problems {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let _ = f;
        Ok(())
    }
}

/// Reads a site document.
///
/// # Errors
/// All its problems.
pub fn read(text: &str) -> Result<Site, Problems> {
    let _ = text;
    Err(Problems(Vec::new()))
}
