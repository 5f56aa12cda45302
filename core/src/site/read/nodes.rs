//! What circuits end at, and the circuits as far as their ends go.

use alloc::borrow::ToOwned;
use alloc::format;
use alloc::string::String;

use super::entry::Found;
use super::log::{Log, Quoted};

/// What a name stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    Bank,
    Board,
    Inverter,
    Load,
    Array,
    /// A controller's output; its input is a node of its own, and so is a converter's.
    Controller,
    Generator,
    Converter,
    ControllerInput,
    ConverterInput,
}

impl Kind {
    pub(super) const fn word(self) -> &'static str {
        match self {
            Self::Bank => "bank",
            Self::Board => "board",
            Self::Inverter => "inverter",
            Self::Load => "load",
            Self::Array => "array",
            Self::Controller | Self::ControllerInput => "controller",
            Self::Generator => "generator",
            Self::Converter | Self::ConverterInput => "converter",
        }
    }

    pub(super) const fn article(self) -> &'static str {
        if matches!(self, Self::Inverter | Self::Array) { "an" } else { "a" }
    }

    pub(super) const fn is_input(self) -> bool {
        matches!(self, Self::ControllerInput | Self::ConverterInput)
    }

    /// It takes power and passes none on in its own network.
    pub(super) const fn draws(self) -> bool {
        matches!(self, Self::Inverter | Self::Load) || self.is_input()
    }
}

/// A text and where it stands.
pub(super) type Placed<'d> = (&'d str, usize);

/// Something a circuit may end at.
#[derive(Clone, Copy)]
pub(super) struct Node<'d> {
    pub(super) kind: Kind,
    pub(super) name: &'d str,
    pub(super) at: usize,
    /// Where its route is stated: then its circuit is designed.
    pub(super) route: Option<usize>,
    /// The board it states for that circuit, the controller of an array, the bank of a source.
    pub(super) board: Option<Placed<'d>>,
    pub(super) controller: Option<Placed<'d>>,
    pub(super) bank: Option<Placed<'d>>,
    /// It is fed from the AC side.
    pub(super) is_ac: bool,
}

impl<'d> Node<'d> {
    /// `None` where the section states no name: that is reported with its section.
    pub(super) fn of(kind: Kind, found: Found<'d>) -> Option<Self> {
        let (name, _) = text_of(found, "name")?;
        Some(Self {
            kind,
            name,
            at: found.at,
            route: found.table.get("route").map(|value| value.span().start),
            board: text_of(found, "board"),
            controller: text_of(found, "controller"),
            bank: text_of(found, "bank"),
            is_ac: found.table.get("ac").and_then(|value| value.get_ref().as_bool()).unwrap_or(false),
        })
    }

    /// What the design adds where the document has none: a bank, or the board that joins all.
    pub(super) const fn designed(kind: Kind) -> Self {
        Self { kind, name: "", at: 0, route: None, board: None, controller: None, bank: None, is_ac: false }
    }

    /// The input of a controller or converter.
    pub(super) fn input(&self) -> Option<Self> {
        let kind = match self.kind {
            Kind::Controller => Kind::ControllerInput,
            Kind::Converter => Kind::ConverterInput,
            _ => return None,
        };
        Some(Self { kind, ..*self })
    }

    pub(super) fn place(&self) -> String {
        format!("[[{}]] {}", self.kind.word(), Quoted(self.name))
    }

    /// `bank "house"`, as it stands in a sentence.
    pub(super) fn words(&self) -> String {
        if self.name.is_empty() {
            return format!("the designed {}", self.kind.word());
        }
        format!("{} {}", self.kind.word(), Quoted(self.name))
    }
}

/// A circuit as far as its ends go.
pub(super) struct Wire<'d> {
    pub(super) at: usize,
    pub(super) name: Option<&'d str>,
    pub(super) from: Option<Placed<'d>>,
    pub(super) to: Option<Placed<'d>>,
    /// Whether size and device are stated, or the current where no load tells it.
    pub(super) is_stated: bool,
}

impl<'d> Wire<'d> {
    pub(super) fn of(found: Found<'d>) -> Self {
        let has = |key: &str| found.table.contains_key(key);
        Self {
            at: found.at,
            name: text_of(found, "name").map(|(name, _)| name),
            from: text_of(found, "from"),
            to: text_of(found, "to"),
            is_stated: has("size") && has("device") || has("current"),
        }
    }

    pub(super) fn place(&self) -> String {
        self.name.map_or_else(|| "[[circuit]]".to_owned(), |name| format!("[[circuit]] {}", Quoted(name)))
    }

    pub(super) fn label(&self, log: &Log) -> String {
        self.name
            .map_or_else(|| format!("that of line {}", log.line(self.at)), |name| format!("{}", Quoted(name)))
    }
}

pub(super) fn text_of<'d>(found: Found<'d>, key: &str) -> Option<Placed<'d>> {
    let value = found.table.get(key)?;
    value.get_ref().as_str().map(|text| (text, value.span().start))
}
