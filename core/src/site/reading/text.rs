//! Readings in words.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::fmt::{self, Write as _};

use super::line::{Implied, Measured, ReadingLine, Verdict};
use super::span::Span;
use super::{Grade, Outcome};
use crate::site::text::printable;

/// The section of a report.
pub(in crate::site) fn section(readings: &[ReadingLine], f: &mut fmt::Formatter<'_>) -> fmt::Result {
    if readings.is_empty() {
        return Ok(());
    }
    writeln!(f, "\nReadings")?;
    for line in readings {
        writeln!(f, "{}", printable_lines(&line.to_string()))?;
    }
    Ok(())
}

/// Line by line: names may hold control characters.
fn printable_lines(text: &str) -> String {
    let lines: Vec<String> = text.lines().map(|line| format!("  {}", printable(line))).collect();
    lines.join("\n")
}

impl fmt::Display for ReadingLine {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let verdict = match &self.verdict {
            Verdict::Within => "within",
            Verdict::Above => "ABOVE",
            Verdict::Below => "BELOW",
            Verdict::NotComparable(_) => "not compared",
        };
        let (what, measured) = (self.measured.word(), self.measured);
        write!(f, "{}, {what} at \"{}\": {measured} {}", self.name, self.at, self.tolerance)?;
        match (&self.predicted, &self.verdict) {
            (_, Verdict::NotComparable(why)) => write!(f, "\n  {verdict}: {why}")?,
            (Some((least, greatest)), _) => {
                write!(f, "\n  {verdict}: predicted {least} to {greatest}; {}", self.basis)?;
            }
            (None, _) => write!(f, "\n  {verdict}")?,
        }
        for implied in &self.implied {
            write!(f, "\n  implies {implied}")?;
        }
        for cause in &self.causes {
            write!(f, "\n  consistent with {cause}")?;
        }
        if let Some(next) = &self.next {
            write!(f, "\n  next: {next}")?;
        }
        Ok(())
    }
}

/// The text of a finding: what was read, what was predicted, and what that implies.
pub(super) fn finding(measured: Measured, outcome: &Outcome) -> String {
    let Span { least, greatest } = outcome.predicted.unwrap_or(Span::NOTHING);
    let mut text = format!("{measured} read, {} to {} predicted", measured.of(least), measured.of(greatest));
    let worst = outcome.implied.iter().max_by(|a, b| heat(a).total_cmp(&heat(b)));
    if let Some(implied) = worst.filter(|_| outcome.grade != Grade::AboveDesign) {
        // Writing to a String cannot fail.
        let _ = write!(text, "; implies {implied}");
    }
    match outcome.grade {
        Grade::AboveDesign => {
            text.push_str("; it is above the current of the worst hour that everything was sized for");
        }
        Grade::AboveCapacity => text.push_str("; it is above what the conductor carries"),
        Grade::TooHot => text.push_str("; it is above the rating of the insulation"),
        _ => {}
    }
    if outcome.causes.len() > 1 {
        let _ = write!(text, "; {} causes are consistent with it", outcome.causes.len());
    }
    text
}

fn heat(implied: &Implied) -> f64 {
    match implied {
        Implied::Resistance { heat, .. } => heat.1.value,
        _ => 0.0,
    }
}
