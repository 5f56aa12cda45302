//! Designs what a site file leaves out, checks what it states, and prints the report.
//!
//! `cargo run --release --example design_site` takes the Heron Point demo; `-- PATH` takes that file.
//! Exit status 0: nothing stands against the site; 1: a danger, a nonconformity or a check not made; 2: bad input.

use std::fs::{self, File};
use std::io::{Read, Write};
use std::process::ExitCode;

use ampwright::site;

/// The reader refuses more; reading stops shortly behind it, so that no file fills the memory.
const MOST_BYTES: u64 = 8 * 1024 * 1024 + 1;

fn main() -> ExitCode {
    let mut arguments = std::env::args_os().skip(1);
    let bytes = match (arguments.next(), arguments.next()) {
        (None, _) => Ok(include_bytes!("sites/heron_point.toml").to_vec()),
        (Some(path), None) => load(&path),
        (Some(_), Some(_)) => Err("one site file at a time, please: design_site [PATH]".to_string()),
    };
    let bytes = match bytes {
        Ok(bytes) => bytes,
        Err(sentence) => {
            eprintln!("{sentence}");
            return ExitCode::from(2);
        }
    };
    match site::read_bytes(&bytes).and_then(|document| site::inspect(&document)) {
        Ok(report) => {
            // A reader that closes the pipe early has seen enough.
            let _ = write!(std::io::stdout().lock(), "{report}");
            ExitCode::from(report.exit_code())
        }
        Err(problems) => {
            eprintln!("{problems}");
            ExitCode::from(2)
        }
    }
}

fn load(path: &std::ffi::OsStr) -> Result<Vec<u8>, String> {
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
