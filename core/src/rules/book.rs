//! What a rule set is made of. Const data only: the sets fill it, [`super::Rules`] answers from it.

use super::query::{Check, Installation, Key, Limit, Terms};
use super::table::{AmpacityTable, FactorTable};
use crate::citation::{Citation, Seen};
use crate::quantity::ConductorSize;

/// One rule set: const data.
#[derive(Debug)]
pub struct RuleSet {
    /// Key.
    pub key: Key,
    /// Word in site files, pinned: `us-2023`.
    pub word: &'static str,
    /// Documents and editions, for the report.
    pub edition: &'static str,
    /// Terms.
    pub terms: Terms,
    /// Order of checks.
    pub order: &'static [Check],
    /// Every ampacity table held.
    pub ampacity_tables: &'static [&'static AmpacityTable],
    /// Every table of correction factors held.
    pub factor_tables: &'static [&'static FactorTable],
    /// Which table, column and factors an installation takes.
    pub placements: &'static [Placement],
    /// Factor for engine spaces, where the set has one of its own.
    pub engine: Option<EngineRule>,
    /// Adder to the ambient in sunlight above a roof, K.
    pub rooftop_K: Option<Limit<f64>>,
    /// Terminal temperature rule.
    pub terminal: Option<TerminalRule>,
    /// Factor on continuous current.
    pub continuous_factor: Limit<f64>,
    /// Greatest device on a conductor.
    pub device: DeviceRule,
    /// Upper conventional current over ampacity.
    pub overload_ratio: Limit<f64>,
    /// Greatest unprotected length.
    pub unfused: UnfusedRule,
    /// Voltage drop.
    pub drop: DropRule,
    /// Sizes of the tables, smallest first.
    pub sizes: &'static [ConductorSize],
    /// Standard device ratings, A, smallest first.
    pub standard_ratings_A: &'static [f64],
    /// Least size of a power circuit.
    pub least_size: Limit<ConductorSize>,
    /// Conductors admitted.
    pub conductors: ConductorRule,
    /// Least protective conductor.
    pub protective: ProtectiveRule,
}

/// What the installations listed take.
#[derive(Clone, Copy, Debug)]
pub struct Placement {
    /// Installations it holds for.
    pub installations: &'static [Installation],
    /// Tables to choose from.
    pub tables: &'static [&'static AmpacityTable],
    /// The column of this name only; `None`: any, by the insulation's rating.
    pub column: Option<&'static str>,
    /// Where that column is blank: tables, column, and its name in the answer.
    pub instead: Option<Instead>,
    /// Ambient other than the tables' own.
    pub ambient: AmbientRule,
    /// Several runs together.
    pub grouping: Grouping,
}

/// Column that serves where a method's own begins only at a larger size.
#[derive(Clone, Copy, Debug)]
pub struct Instead {
    /// Tables to choose from.
    pub tables: &'static [&'static AmpacityTable],
    /// Column in them.
    pub column: &'static str,
    /// Name in the answer: `C, since F begins at 25 mm2`.
    pub name: &'static str,
}

/// Correction for ambient.
#[derive(Clone, Copy, Debug)]
pub enum AmbientRule {
    /// The set's table, by the conductor temperature of the ampacity column.
    Table(&'static FactorTable),
    /// The set has no table: no credit below the tables' own ambient, above it √((Tc − Ta)/(Tc − base)).
    Derived {
        /// Ambient of the tables, °C.
        base_degC: f64,
        /// Named as derived.
        citation: Citation,
    },
}

/// Reduction for several runs together.
#[derive(Clone, Copy, Debug)]
pub struct Grouping {
    /// Table.
    pub table: &'static FactorTable,
    /// Column.
    pub column: usize,
    /// What its rows count.
    pub count: Count,
}

/// What a grouping table counts.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Count {
    /// Current-carrying conductors.
    Conductors,
    /// Circuits of two loaded conductors.
    Circuits,
}

/// Engine spaces.
#[derive(Clone, Copy, Debug)]
pub struct EngineRule {
    /// Factor by temperature rating.
    pub table: &'static FactorTable,
    /// Ambient the factors are stated for, °C: a recalled factor is held against √((Tc − this)/(Tc − base)), and
    /// the lower governs.
    pub ambient_degC: f64,
    /// Cited where the derivation governs.
    pub derived: Citation,
}

/// Which column a terminal admits.
#[derive(Clone, Copy, Debug)]
pub struct TerminalRule {
    /// Table, whatever the installation.
    pub table: &'static AmpacityTable,
    /// Column up to `upto_A` for a terminal without mark, °C.
    pub low_degC: f64,
    /// Current up to which the lower column holds, A.
    pub upto_A: f64,
    /// Column above it, and the greatest a mark can give, °C.
    pub high_degC: f64,
    /// Source.
    pub citation: Citation,
}

/// Greatest device on a conductor.
#[derive(Clone, Copy, Debug)]
pub struct DeviceRule {
    /// Limits of small conductors: size, A, source.
    pub small: &'static [(ConductorSize, f64, Citation)],
    /// Whether the next standard rating above the ampacity is admitted.
    pub next: NextRating,
    /// Words for a rating not above the ampacity.
    pub rule: &'static str,
    /// Source.
    pub citation: Citation,
}

/// When the next standard rating above the ampacity is admitted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum NextRating {
    /// Never.
    No,
    /// While it does not exceed so many amperes.
    UpTo(f64),
    /// While it does not exceed so many times the ampacity.
    Within(f64),
}

/// Greatest unprotected conductor length from the source, m.
#[derive(Clone, Copy, Debug)]
pub struct UnfusedRule {
    /// Without sheath.
    pub plain: Option<Limit<f64>>,
    /// In a sheath or enclosure throughout.
    pub sheathed: Option<Limit<f64>>,
    /// In a sheath or enclosure throughout, from the battery's terminal.
    pub sheathed_from_post: Option<Limit<f64>>,
}

/// Greatest voltage drop as a part of nominal voltage.
#[derive(Clone, Copy, Debug)]
pub struct DropRule {
    /// Navigation lights, bilge pumps and blowers, electronics, panel feeders.
    pub critical: Limit<f64>,
    /// Lighting.
    pub lighting: Limit<f64>,
    /// Everything else.
    pub other: Limit<f64>,
    /// Required, or recommended.
    pub required: bool,
}

/// Stranding admitted (R18). Solid never serves a battery or moving cable, in any set.
#[derive(Clone, Copy, Debug)]
pub struct ConductorRule {
    /// Class 1 in fixed wiring.
    pub solid_fixed: bool,
    /// Class 2 in battery and moving cables.
    pub stranded_moving: bool,
    /// Source.
    pub citation: Citation,
}

/// Least protective conductor.
#[derive(Clone, Copy, Debug)]
pub enum ProtectiveRule {
    /// By the rating of the device: up to so many amperes, copper, aluminium, whether the row was seen.
    ByDevice(&'static [(f64, ConductorSize, ConductorSize, Seen)], Citation),
    /// By the line conductor: up to so many mm², the rule.
    ByLine(&'static [(f64, ByLine)], Citation),
    /// No table held.
    NotHeld(Citation),
}

/// One row of a table of protective conductors by line conductor.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ByLine {
    /// As the line conductor.
    Same,
    /// This size.
    Size(ConductorSize),
    /// So many times the line conductor's area.
    Part(f64),
}
