//! Designs what a site file leaves out, checks what it states, and prints the report.
//!
//! `cargo run --release --example design_site` takes the Heron Point demo; `-- PATH` takes that file;
//! `-- --compare EARLIER LATER` inspects both and prints what changed. `--json` before any of these prints the same as JSON.
//! Exit status 0: nothing stands against the site, or nothing differs; 1: a danger, a nonconformity or a check not made, or
//! something differs; 2: bad input.

use std::ffi::{OsStr, OsString};
use std::fs::{self, File};
use std::io::{Read, Write};
use std::process::ExitCode;

use ampwright::site::{self, Comparison, Report};

/// The reader refuses more; reading stops shortly behind it, so that no file fills the memory.
const MOST_BYTES: u64 = 8 * 1024 * 1024 + 1;

fn main() -> ExitCode {
    let arguments: Vec<OsString> = std::env::args_os().skip(1).collect();
    let (as_json, rest) = match arguments.as_slice() {
        [first, rest @ ..] if first == "--json" => (true, rest),
        all => (false, all),
    };
    let done = match rest {
        [] => inspected(include_bytes!("sites/heron_point.toml")).map(|report| told(&report, as_json)),
        [compare, earlier, later] if compare == "--compare" => {
            compared(earlier, later).map(|changes| told_changes(&changes, as_json))
        }
        [compare, ..] if compare == "--compare" => {
            Err("two site files to compare, please: design_site [--json] --compare EARLIER LATER".to_string())
        }
        [first, ..] if is_option(first) => Err(format!(
            "'{}' is no option here; there are --json, then --compare: design_site [--json] [PATH]",
            first.to_string_lossy()
        )),
        [path] => load(path).and_then(|bytes| inspected(&bytes)).map(|report| told(&report, as_json)),
        [_, last] if last == "--json" => {
            Err("--json comes first, please: design_site --json [PATH]".to_string())
        }
        _ => Err("one site file at a time, please: design_site [--json] [PATH]".to_string()),
    };
    match done {
        Ok((text, status)) => {
            // A reader that closes the pipe early has seen enough.
            let _ = write!(std::io::stdout().lock(), "{text}");
            ExitCode::from(status)
        }
        Err(sentences) => {
            eprintln!("{sentences}");
            ExitCode::from(2)
        }
    }
}

/// The report in words or as JSON, and its status.
fn told(report: &Report, as_json: bool) -> (String, u8) {
    (if as_json { report.to_json() } else { report.to_string() }, report.exit_code())
}

/// What changed in words or as JSON, and 1 where anything did.
fn told_changes(changes: &Comparison, as_json: bool) -> (String, u8) {
    let text = if as_json { changes.to_json() } else { changes.to_string() };
    (text, u8::from(!changes.is_empty()))
}

/// A word with two dashes in front is no file: `./--name` is.
fn is_option(word: &OsStr) -> bool {
    word.to_string_lossy().starts_with("--")
}

fn inspected(bytes: &[u8]) -> Result<Report, String> {
    site::read_bytes(bytes)
        .and_then(|document| site::inspect(&document))
        .map_err(|problems| problems.to_string())
}

/// What changed.
fn compared(earlier: &OsStr, later: &OsStr) -> Result<Comparison, String> {
    // Two files: every problem is told with the name of its own.
    let report = |path: &OsStr| {
        load(path).and_then(|bytes| {
            let named = |line: &str| format!("{}: {line}", path.to_string_lossy());
            inspected(&bytes).map_err(|text| text.lines().map(named).collect::<Vec<_>>().join("\n"))
        })
    };
    Ok(report(later)?.compare(&report(earlier)?))
}

fn load(path: &OsStr) -> Result<Vec<u8>, String> {
    let name = path.to_string_lossy();
    let fault = |error: std::io::Error| format!("{name}: cannot be read: {error}");
    let about = fs::metadata(path).map_err(fault)?;
    if about.is_dir() {
        return Err(format!("{name}: is a directory; name a site file"));
    }
    if about.len() >= MOST_BYTES {
        return Err(format!(
            "{name}: has {} bytes; at most {} are read: a site file lists circuits, not measurements",
            about.len(),
            MOST_BYTES - 1
        ));
    }
    let mut bytes = Vec::new();
    File::open(path).map_err(fault)?.take(MOST_BYTES).read_to_end(&mut bytes).map_err(fault)?;
    Ok(bytes)
}
