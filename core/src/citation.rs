//! Where a value comes from, and whether anybody has seen the page.

use core::fmt;

/// How a printed value was verified.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Seen {
    /// The figures were read on a published page.
    Page,
    /// Recalled; nobody has seen the page. A check against it never says "conforms".
    Recalled,
    /// Evaluated from a stated formula or law.
    Derived,
    /// Common practice; no source.
    Practice,
    /// Stated by the user: a document's own value or an override.
    Stated,
}

/// Source of a value: a standard, its edition, and the place in it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Citation {
    /// Document and edition, such as `IEC 60364-5-52:2009`.
    pub document: &'static str,
    /// Table, clause or formula, such as `Table B.52.2`.
    pub place: &'static str,
    /// Whether the page was seen.
    pub seen: Seen,
}

impl Citation {
    /// A citation as a constant.
    pub const fn new(document: &'static str, place: &'static str, seen: Seen) -> Self {
        Self { document, place, seen }
    }

    /// The same place, marked as recalled: for a cell that was filled in from memory.
    #[must_use]
    pub const fn recalled(self) -> Self {
        Self { seen: Seen::Recalled, ..self }
    }
}

impl fmt::Display for Citation {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.document)?;
        if !self.place.is_empty() {
            write!(f, ", {}", self.place)?;
        }
        match self.seen {
            Seen::Recalled => f.write_str(" (recalled)"),
            Seen::Page | Seen::Derived | Seen::Practice | Seen::Stated => Ok(()),
        }
    }
}
