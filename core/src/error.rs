//! What can go wrong, as sentences for the person at the bench.
//!
//! One `Copy` enum without owned text: it exists in every build, firmware included. The caller adds the
//! place (which circuit, which line); the variants carry the numbers.

use core::fmt;

use crate::citation::Citation;

/// The valid range of an input, in the unit it is stated in.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Allowed {
    /// Any finite number.
    Finite,
    /// Greater than the limit.
    Above(f64),
    /// The limit or more.
    AtLeast(f64),
    /// From the first to the second, both included.
    Between(f64, f64),
    /// Greater than the first, up to and including the second.
    AboveUpTo(f64, f64),
    /// One of the codes 0 … n − 1.
    Code(u8),
    /// As the sentence says.
    Words(&'static str),
}

impl Allowed {
    const fn has_no_upper_end(&self) -> bool {
        matches!(self, Self::Above(_) | Self::AtLeast(_))
    }

    /// Refuses a value that is NaN, infinite or out of range. Words are not understood: finite is enough for them.
    pub(crate) fn check(self, name: &'static str, value: f64, unit: &'static str) -> Result<(), Error> {
        let admitted = match self {
            Self::Finite | Self::Words(_) => true,
            Self::Above(least) => value > least,
            Self::AtLeast(least) => value >= least,
            Self::Between(least, most) => value >= least && value <= most,
            Self::AboveUpTo(least, most) => value > least && value <= most,
            Self::Code(count) => value >= 0.0 && value < f64::from(count) && libm::floor(value) == value,
        };
        if admitted && value.is_finite() {
            return Ok(());
        }
        Err(Error::OutOfRange { name, value, unit, allowed: self })
    }
}

impl fmt::Display for Allowed {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Self::Finite => f.write_str("a finite number"),
            Self::Above(least) => write!(f, "greater than {least}"),
            Self::AtLeast(least) => write!(f, "{least} or more"),
            Self::Between(least, most) => write!(f, "between {least} and {most}"),
            Self::AboveUpTo(least, most) => write!(f, "greater than {least} and at most {most}"),
            Self::Code(count) => write!(f, "a whole number from 0 to {}", count.saturating_sub(1)),
            Self::Words(words) => f.write_str(words),
        }
    }
}

/// The first characters of a text that was refused; `Copy`, so that errors need no memory.
#[derive(Clone, Copy, PartialEq, Eq)]
pub struct Snippet {
    bytes: [u8; Self::ROOM],
    used: u8,
    cut: bool,
}

impl Snippet {
    const ROOM: usize = 32;

    /// Keeps the first 32 bytes, cut at a character.
    pub fn new(text: &str) -> Self {
        let mut bytes = [0; Self::ROOM];
        let mut end = text.len().min(Self::ROOM);
        while !text.is_char_boundary(end) {
            end -= 1;
        }
        for (to, from) in bytes.iter_mut().zip(text.bytes().take(end)) {
            *to = from;
        }
        // At most 32, see ROOM.
        #[allow(clippy::cast_possible_truncation)]
        Self { bytes, used: end as u8, cut: end < text.len() }
    }

    /// The text kept.
    pub fn as_str(&self) -> &str {
        self.bytes.get(..usize::from(self.used)).and_then(|b| core::str::from_utf8(b).ok()).unwrap_or("")
    }
}

impl fmt::Display for Snippet {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        // Control characters would break the one-line sentence.
        for c in self.as_str().chars() {
            if c.is_control() { write!(f, "{}", c.escape_default())? } else { write!(f, "{c}")? }
        }
        if self.cut { f.write_str("…") } else { Ok(()) }
    }
}

impl fmt::Debug for Snippet {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:?}", self.as_str())
    }
}

/// Everything a calculation of this crate can refuse.
#[derive(Clone, Copy, Debug, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum Error {
    /// An input is NaN, infinite or outside its range.
    #[error(
        "{name} is {value}{}{unit}; it must be {allowed}{}",
        if unit.is_empty() { "" } else { " " },
        if *value == f64::INFINITY && allowed.has_no_upper_end() { " and finite" } else { "" }
    )]
    OutOfRange {
        /// The input, as the face spells it.
        name: &'static str,
        /// Its value in `unit`.
        value: f64,
        /// Unit of value and range.
        unit: &'static str,
        /// What is admitted.
        allowed: Allowed,
    },
    /// Two or more inputs do not go together.
    #[error("{name} is {value} {unit}; {why}")]
    Contradiction {
        /// The input that does not fit the others.
        name: &'static str,
        /// Its value in `unit`.
        value: f64,
        /// Its unit.
        unit: &'static str,
        /// What it contradicts, and what to do.
        why: &'static str,
    },
    /// A bare number where a unit is needed.
    #[error("'{text}' has no unit; write {accepted}")]
    NoUnit {
        /// The text as entered.
        text: Snippet,
        /// Examples of what is accepted.
        accepted: &'static str,
    },
    /// The unit is not known.
    #[error("'{text}' has a unit that is not known here; write {accepted}")]
    UnknownUnit {
        /// The text as entered.
        text: Snippet,
        /// Examples of what is accepted.
        accepted: &'static str,
    },
    /// The unit measures something else.
    #[error("'{text}' is {found}; {needed} is needed, such as {accepted}")]
    WrongUnit {
        /// The text as entered.
        text: Snippet,
        /// What it is, with its article: `a voltage`.
        found: &'static str,
        /// What is needed: `a length`.
        needed: &'static str,
        /// Examples of what is accepted.
        accepted: &'static str,
    },
    /// The text does not begin with a number.
    #[error("'{text}' does not begin with a number; write {accepted}")]
    NotANumber {
        /// The text as entered.
        text: Snippet,
        /// Examples of what is accepted.
        accepted: &'static str,
    },
    /// The number is NaN, infinite or too large to hold.
    #[error("'{text}' is not a finite number; write {accepted}")]
    NotFinite {
        /// The text as entered.
        text: Snippet,
        /// Examples of what is accepted.
        accepted: &'static str,
    },
    /// A comma, a second point or a thousands separator stands inside the number.
    #[error("'{text}' has a separator inside its number; write digits and one point, such as {accepted}")]
    Separator {
        /// The text as entered.
        text: Snippet,
        /// Examples of what is accepted.
        accepted: &'static str,
    },
    /// The text goes on after its number and unit.
    #[error("'{text}' is more than one number and one unit; write {accepted}")]
    MoreThanOne {
        /// The text as entered.
        text: Snippet,
        /// Examples of what is accepted.
        accepted: &'static str,
    },
    /// The text is none of the words that are known here.
    #[error("'{text}' is not known here; it must be one of {allowed}")]
    UnknownWord {
        /// The text as entered.
        text: Snippet,
        /// The words that are.
        allowed: &'static str,
    },
    /// A published table does not go that far.
    #[error("{what} is {value} {unit}; the table ({table}) {end}; {remedy}")]
    TableEnds {
        /// What was looked up.
        what: &'static str,
        /// Its value in `unit`.
        value: f64,
        /// Its unit.
        unit: &'static str,
        /// The table.
        table: Citation,
        /// Where it ends: `ends at 60 degC for PVC`.
        end: &'static str,
        /// What to do.
        remedy: &'static str,
    },
    /// No table of the rule set covers the case.
    #[error("{what} has no value in {table}; {remedy}")]
    NotTabulated {
        /// What was looked up.
        what: &'static str,
        /// The table.
        table: Citation,
        /// What to do.
        remedy: &'static str,
    },
    /// The rule set, material or part is not admitted.
    #[error("{what} is refused: {why} ({rule})")]
    Refused {
        /// What is refused.
        what: &'static str,
        /// The reason, and what to use instead.
        why: &'static str,
        /// The rule behind it.
        rule: Citation,
    },
    /// A line cannot carry the power asked of it.
    #[error(
        "the line cannot deliver {asked_W:.0} W from {source_V:.2} V through {loop_ohm:.5} ohm; the most is \
         {most_W:.0} W (V²/4R); use a larger cross-section, a shorter run or a higher voltage"
    )]
    NoSolution {
        /// Power asked, in watts.
        asked_W: f64,
        /// Voltage at the source, in volts.
        source_V: f64,
        /// Loop resistance, in ohms.
        loop_ohm: f64,
        /// The most that can be delivered, in watts.
        most_W: f64,
    },
    /// Sources of different voltages are to be joined in parallel.
    #[error(
        "sources of {least_V:.2} V to {most_V:.2} V in parallel would drive {circulating_A:.1} A through each other \
         without any load; bring them to one voltage first, within {difference_V:.2} V"
    )]
    MismatchedSources {
        /// Least voltage, in volts.
        least_V: f64,
        /// Greatest voltage, in volts.
        most_V: f64,
        /// Greatest current between them, in amperes.
        circulating_A: f64,
        /// Difference that is admitted, in volts.
        difference_V: f64,
    },
    /// No voltage satisfies a network: it cannot carry its constant-power loads.
    #[error(
        "no voltage carries the constant-power load of {asked_W:.0} W at node {node} and those beyond it; use larger \
         cross-sections, shorter runs, less load or a higher voltage"
    )]
    Collapse {
        /// Index of the node in the network.
        node: usize,
        /// Constant power asked at that node, in watts.
        asked_W: f64,
    },
    /// No size or rating that may be used passes every check.
    #[error("no {what} passes every check; {remedy}")]
    NoneFits {
        /// What was looked for: `conductor size`, `device rating`.
        what: &'static str,
        /// What to do.
        remedy: &'static str,
    },
    /// The parts do not form a tree that hangs from one source.
    #[error("{what}")]
    NotATree {
        /// What is wrong, and what to do.
        what: &'static str,
    },
    /// A face passed another count of numbers than the calculation takes.
    #[error("{given} {what} are given; the calculation needs {needed}")]
    WrongCount {
        /// What was counted: `inputs`, `outputs`.
        what: &'static str,
        /// How many there are.
        given: usize,
        /// How many it takes.
        needed: usize,
    },
    /// An iteration did not reach its tolerance.
    #[error("{what} did not settle within {steps} steps; check the inputs for values far from practice")]
    NotSettled {
        /// What was computed.
        what: &'static str,
        /// Steps made.
        steps: u32,
    },
}

impl Error {
    /// Permanent short name of the variant: the same in every face.
    pub const fn slug(&self) -> &'static str {
        match self {
            Self::OutOfRange { .. } => "out-of-range",
            Self::Contradiction { .. } => "contradiction",
            Self::NoUnit { .. } => "no-unit",
            Self::UnknownUnit { .. } => "unknown-unit",
            Self::WrongUnit { .. } => "wrong-unit",
            Self::NotANumber { .. } => "not-a-number",
            Self::NotFinite { .. } => "not-finite",
            Self::Separator { .. } => "separator",
            Self::MoreThanOne { .. } => "more-than-one",
            Self::UnknownWord { .. } => "unknown-word",
            Self::TableEnds { .. } => "table-ends",
            Self::NotTabulated { .. } => "not-tabulated",
            Self::Refused { .. } => "refused",
            Self::NoSolution { .. } => "no-solution",
            Self::MismatchedSources { .. } => "mismatched-sources",
            Self::Collapse { .. } => "collapse",
            Self::NoneFits { .. } => "none-fits",
            Self::NotATree { .. } => "not-a-tree",
            Self::WrongCount { .. } => "wrong-count",
            Self::NotSettled { .. } => "not-settled",
        }
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;
    use std::vec::Vec;

    use super::*;
    use crate::citation::Seen;

    const TABLE: Citation = Citation::new("IEC 60364-5-52:2009", "Table B.52.14", Seen::Page);

    macro_rules! variants {
        ($($variant:ident)+) => {
            /// No wildcard, so that a new variant must be named here and then listed below.
            fn variant(error: &Error) -> &'static str {
                match error { $(Error::$variant { .. } => stringify!($variant),)+ }
            }
            const VARIANTS: &[&str] = &[$(stringify!($variant)),+];
        };
    }

    variants! {
        OutOfRange
        Contradiction
        NoUnit
        UnknownUnit
        WrongUnit
        NotANumber
        NotFinite
        Separator
        MoreThanOne
        UnknownWord
        TableEnds
        NotTabulated
        Refused
        NoSolution
        MismatchedSources
        Collapse
        NoneFits
        NotATree
        WrongCount
        NotSettled
    }

    #[test]
    fn each_variant_has_its_text_and_slug() {
        let text = Snippet::new("16 X");
        let accepted = "'12 m'";
        let all = [
            (
                Error::OutOfRange { name: "one_way", value: -3.0, unit: "m", allowed: Allowed::Above(0.0) },
                "out-of-range",
                "one_way is -3 m; it must be greater than 0",
            ),
            (
                Error::Contradiction {
                    name: "start",
                    value: 0.9,
                    unit: "h",
                    why: "it must not be above target",
                },
                "contradiction",
                "start is 0.9 h; it must not be above target",
            ),
            (Error::NoUnit { text, accepted }, "no-unit", "'16 X' has no unit; write '12 m'"),
            (
                Error::UnknownUnit { text, accepted },
                "unknown-unit",
                "'16 X' has a unit that is not known here; write '12 m'",
            ),
            (
                Error::WrongUnit { text, found: "a voltage", needed: "a length", accepted },
                "wrong-unit",
                "'16 X' is a voltage; a length is needed, such as '12 m'",
            ),
            (
                Error::NotANumber { text, accepted },
                "not-a-number",
                "'16 X' does not begin with a number; write '12 m'",
            ),
            (
                Error::NotFinite { text, accepted },
                "not-finite",
                "'16 X' is not a finite number; write '12 m'",
            ),
            (
                Error::Separator { text, accepted },
                "separator",
                "'16 X' has a separator inside its number; write digits and one point, such as '12 m'",
            ),
            (
                Error::MoreThanOne { text, accepted },
                "more-than-one",
                "'16 X' is more than one number and one unit; write '12 m'",
            ),
            (
                Error::UnknownWord { text, allowed: "us, iec" },
                "unknown-word",
                "'16 X' is not known here; it must be one of us, iec",
            ),
            (
                Error::TableEnds {
                    what: "ambient",
                    value: 65.0,
                    unit: "degC",
                    table: TABLE,
                    end: "ends at 60 degC for PVC",
                    remedy: "choose insulation rated higher",
                },
                "table-ends",
                "ambient is 65 degC; the table (IEC 60364-5-52:2009, Table B.52.14) ends at 60 degC for PVC; choose \
                 insulation rated higher",
            ),
            (
                Error::NotTabulated { what: "1 AWG", table: TABLE.recalled(), remedy: "state a size" },
                "not-tabulated",
                "1 AWG has no value in IEC 60364-5-52:2009, Table B.52.14 (recalled); state a size",
            ),
            (
                Error::Refused { what: "aluminium", why: "use copper", rule: TABLE },
                "refused",
                "aluminium is refused: use copper (IEC 60364-5-52:2009, Table B.52.14)",
            ),
            (
                Error::NoSolution { asked_W: 1200.0, source_V: 21.0, loop_ohm: 0.1034, most_W: 1066.2 },
                "no-solution",
                "the line cannot deliver 1200 W from 21.00 V through 0.10340 ohm; the most is 1066 W (V²/4R); use a \
                 larger cross-section, a shorter run or a higher voltage",
            ),
            (
                Error::MismatchedSources {
                    least_V: 11.8,
                    most_V: 12.8,
                    circulating_A: 50.0,
                    difference_V: 0.1,
                },
                "mismatched-sources",
                "sources of 11.80 V to 12.80 V in parallel would drive 50.0 A through each other without any load; \
                 bring them to one voltage first, within 0.10 V",
            ),
            (
                Error::Collapse { node: 3, asked_W: 900.0 },
                "collapse",
                "no voltage carries the constant-power load of 900 W at node 3 and those beyond it; use larger \
                 cross-sections, shorter runs, less load or a higher voltage",
            ),
            (
                Error::NoneFits { what: "conductor size", remedy: "add sizes to the stock" },
                "none-fits",
                "no conductor size passes every check; add sizes to the stock",
            ),
            (
                Error::NotATree { what: "board B feeds itself; remove one circuit" },
                "not-a-tree",
                "board B feeds itself; remove one circuit",
            ),
            (
                Error::WrongCount { what: "inputs", given: 3, needed: 4 },
                "wrong-count",
                "3 inputs are given; the calculation needs 4",
            ),
            (
                Error::NotSettled { what: "network", steps: 50 },
                "not-settled",
                "network did not settle within 50 steps; check the inputs for values far from practice",
            ),
        ];
        let mut slugs = Vec::new();
        let listed: Vec<_> = all.iter().map(|(error, ..)| variant(error)).collect();
        assert_eq!(listed, VARIANTS);
        for (error, slug, text) in all {
            assert_eq!(error.slug(), slug);
            assert_eq!(error.to_string(), text);
            slugs.push(slug);
        }
        slugs.sort_unstable();
        slugs.dedup();
        assert_eq!(slugs.len(), VARIANTS.len(), "two variants share a slug");
    }

    #[test]
    fn ranges_read_as_sentences() {
        let told = |value, allowed| Error::OutOfRange { name: "x", value, unit: "", allowed }.to_string();
        assert_eq!(told(f64::NAN, Allowed::Finite), "x is NaN; it must be a finite number");
        assert_eq!(
            told(f64::INFINITY, Allowed::Above(0.0)),
            "x is inf; it must be greater than 0 and finite"
        );
        assert_eq!(told(f64::NEG_INFINITY, Allowed::AtLeast(0.0)), "x is -inf; it must be 0 or more");
        assert_eq!(told(2.0, Allowed::Between(0.0, 1.0)), "x is 2; it must be between 0 and 1");
        assert_eq!(
            told(0.0, Allowed::AboveUpTo(0.0, 1.0)),
            "x is 0; it must be greater than 0 and at most 1"
        );
        assert_eq!(told(0.5, Allowed::Code(3)), "x is 0.5; it must be a whole number from 0 to 2");
        assert_eq!(told(0.5, Allowed::Words("even")), "x is 0.5; it must be even");
    }

    #[test]
    fn a_range_admits_what_it_says_and_no_nan() {
        let admits = |allowed: Allowed, value| allowed.check("x", value, "V").is_ok();
        let cases = [
            (Allowed::Finite, [true, true, true, true]),
            (Allowed::Above(0.0), [false, false, true, true]),
            (Allowed::AtLeast(0.0), [false, true, true, true]),
            (Allowed::Between(0.0, 1.0), [false, true, true, false]),
            (Allowed::AboveUpTo(0.0, 1.0), [false, false, true, false]),
            (Allowed::Code(2), [false, true, true, false]),
            (Allowed::Words("even"), [true, true, true, true]),
        ];
        for (allowed, expected) in cases {
            assert_eq!([-1.0, 0.0, 1.0, 2.0].map(|value| admits(allowed, value)), expected, "{allowed}");
            for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
                assert!(!admits(allowed, bad), "{allowed}: {bad}");
            }
        }
        assert!(!admits(Allowed::Code(2), 0.5));
        let refused = Allowed::Above(0.0).check("x", -1.0, "V").unwrap_err();
        assert_eq!(refused.to_string(), "x is -1 V; it must be greater than 0");
    }

    #[test]
    fn a_snippet_is_cut_at_a_character_and_shows_no_control_character() {
        let long = Snippet::new("0123456789012345678901234567890ΩΩΩ");
        assert_eq!(long.to_string(), "0123456789012345678901234567890…");
        assert_eq!(Snippet::new("1\n2").to_string(), "1\\n2");
        assert_eq!(Snippet::new("").to_string(), "");
    }
}
