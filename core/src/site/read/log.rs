//! Collects the problems of one text: in file order, at most 200, each with its line.

use alloc::collections::BTreeSet;
use alloc::string::String;
use alloc::vec::Vec;
use core::fmt;

use super::{Problem, Problems};

/// Problems kept; beyond it they are counted.
const MOST_KEPT: usize = 200;

/// The problems found so far.
pub(super) struct Log {
    /// Offset of the first byte of every line.
    starts: Vec<usize>,
    /// Lines with a syntax error: what else is found there is likely its consequence.
    broken: BTreeSet<u32>,
    found: Vec<(usize, Problem)>,
    dropped: usize,
}

impl Log {
    pub(super) fn new(text: &str) -> Self {
        let mut starts = Vec::from([0]);
        starts.extend(text.bytes().enumerate().filter(|&(_, b)| b == b'\n').map(|(at, _)| at + 1));
        Self { starts, broken: BTreeSet::new(), found: Vec::new(), dropped: 0 }
    }

    /// Line of an offset, from 1.
    pub(super) fn line(&self, at: usize) -> u32 {
        u32::try_from(self.starts.partition_point(|&start| start <= at)).unwrap_or(u32::MAX)
    }

    /// First syntax error of each line.
    pub(super) fn syntax(&mut self, at: usize, text: String) {
        let line = self.line(at);
        if self.broken.insert(line) {
            self.keep(at, Problem { line, place: String::new(), text });
        }
    }

    /// Whether there was a syntax error between two offsets.
    pub(super) fn is_broken(&self, from: usize, to: usize) -> bool {
        let (from, to) = (self.line(from), self.line(to));
        from <= to && self.broken.range(from..=to).next().is_some()
    }

    /// Whether there was any syntax error.
    pub(super) fn has_broken_lines(&self) -> bool {
        !self.broken.is_empty()
    }

    /// Whether nothing was found.
    pub(super) fn is_empty(&self) -> bool {
        self.found.is_empty()
    }

    /// Problems found, those dropped included.
    pub(super) fn count(&self) -> usize {
        self.found.len().saturating_add(self.dropped)
    }

    /// A problem at a place in the text.
    pub(super) fn push(&mut self, at: usize, place: String, text: String) {
        let line = self.line(at);
        if !self.broken.contains(&line) {
            self.keep(at, Problem { line, place, text });
        }
    }

    /// A problem of the whole file.
    pub(super) fn push_whole(&mut self, text: String) {
        self.keep(0, Problem::whole(text));
    }

    fn keep(&mut self, at: usize, problem: Problem) {
        self.found.push((at, problem));
        // Sorted now and then, so that memory stays bounded and the first in file order survive.
        if self.found.len() >= 2 * MOST_KEPT {
            self.cut();
        }
    }

    fn cut(&mut self) {
        self.found.sort_by_key(|&(at, ref problem)| (problem.line, at));
        self.dropped = self.dropped.saturating_add(self.found.len().saturating_sub(MOST_KEPT));
        self.found.truncate(MOST_KEPT);
    }

    pub(super) fn into_problems(mut self) -> Problems {
        self.cut();
        Problems(self.found.into_iter().map(|(_, problem)| problem).collect(), self.dropped)
    }
}

/// A text of the file as it stands in a sentence: on one line, at most 60 characters.
pub(super) struct Cut<'a>(pub(super) &'a str);

impl fmt::Display for Cut<'_> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (index, c) in self.0.chars().enumerate() {
            if index == 60 {
                return f.write_str("…");
            }
            // Control characters would break the line, or worse, the terminal.
            if c.is_control() { write!(f, "{}", c.escape_default())? } else { write!(f, "{c}")? }
        }
        Ok(())
    }
}

/// A name as a place gives it.
pub(super) struct Quoted<'a>(pub(super) &'a str);

impl fmt::Display for Quoted<'_> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "\"{}\"", Cut(self.0))
    }
}

/// The nearest of some words, where one is near enough to be meant.
pub(super) fn nearest<'w>(found: &str, words: impl Iterator<Item = &'w str>) -> Option<&'w str> {
    // Nothing typed by hand is that long, and the distance is quadratic.
    if found.len() > 64 {
        return None;
    }
    let found = found.to_lowercase();
    let (distance, word) = words
        .map(|word| (strsim::osa_distance(&found, &word.to_lowercase()), word))
        .min_by_key(|&(distance, _)| distance)?;
    // One slip in three letters; no more than that is a typing error.
    (distance <= (found.chars().count() / 3).max(1)).then_some(word)
}
