//! What a rule set is, and the questions the floors above ask it.

use arrayvec::ArrayVec;

use super::table::Cell;
use crate::cable::{Conductor, Material};
use crate::citation::Citation;
use crate::error::Error;
use crate::quantity::{ConductorSize, ElectricCurrent, Length, Ratio, ThermodynamicTemperature};

/// The rule sets held.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Key {
    /// NFPA 70.
    Us,
    /// IEC 60364 family.
    Iec,
    /// ISO 13297 (earlier ISO 10133), small craft.
    CraftIso,
    /// 33 CFR 183 and ABYC E-11, small craft.
    CraftUs,
}

/// Terms of the trade under a rule set, lower case.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Terms {
    /// `ampacity` or `current-carrying capacity`.
    pub ampacity: &'static str,
    /// `interrupting rating` or `breaking capacity`.
    pub breaking: &'static str,
    /// `ground` or `earth`.
    pub earth: &'static str,
    /// `raceway` or `conduit`.
    pub conduit: &'static str,
}

/// How a run is installed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Installation {
    /// Single conductors in free air (NEC 310.17; IEC F, two touching; craft).
    FreeAir,
    /// Spaced single conductors in free air (IEC G, horizontal); NEC as free air.
    SpacedFreeAir,
    /// Multi-core cable in free air or on a tray (IEC E); NEC: as in raceway.
    CableFreeAir,
    /// Clipped direct to a surface (IEC C); NEC: as in raceway.
    Clipped,
    /// Single conductors in conduit on a wall (IEC B1; NEC 310.16).
    Conduit,
    /// Multi-core cable in conduit on a wall (IEC B2; NEC 310.16).
    CableInConduit,
    /// Single conductors in conduit in an insulated wall (IEC A1; NEC 310.16).
    InsulatedWall,
    /// Multi-core cable in conduit in an insulated wall (IEC A2; NEC 310.16).
    CableInInsulatedWall,
    /// In ducts in the ground (IEC D1; NEC 310.16).
    Duct,
    /// Direct in the ground (IEC D2; NEC 310.16).
    Buried,
    /// Bundled with others along the craft or in a loom (craft rules).
    Loom,
}

/// Where a run lies.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Space {
    /// Ordinary.
    Ordinary,
    /// Engine or machinery space: the set's own factor under craft rules.
    Engine,
    /// In conduit in sunlight close above a roof (us: adder to the ambient).
    Rooftop,
}

/// What the ampacity of a run depends on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct AmpacityQuery {
    /// Size.
    pub size: ConductorSize,
    /// Temperature rating that counts: the insulation's, °C.
    #[allow(non_snake_case)]
    pub rating_degC: f64,
    /// How installed.
    pub installation: Installation,
    /// Ambient.
    pub ambient: ThermodynamicTemperature,
    /// Where.
    pub space: Space,
    /// Current-carrying conductors bundled together, this run's own included (2 for one DC run alone).
    pub bundled_conductors: u16,
}

/// One correction factor, named.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Factor {
    /// `ambient 45 degC`, `6 bundled conductors`, `engine space`.
    pub name: &'static str,
    /// The value.
    pub value: f64,
    /// Table.
    pub citation: Citation,
}

/// Continuous current-carrying capacity with its reason.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CurrentRule {
    /// The current admitted.
    pub current: ElectricCurrent,
    /// Source.
    pub citation: Citation,
}

/// Ampacity of a conductor as installed.
#[derive(Clone, Debug, PartialEq)]
pub struct Ampacity {
    /// After all factors.
    pub corrected: ElectricCurrent,
    /// The table's cell.
    pub base: Cell,
    /// Column name.
    pub column: &'static str,
    /// Row of the table that was used: the stated size, or the next smaller row where the set does not list it.
    pub row: ConductorSize,
    /// Factors, each once.
    pub factors: ArrayVec<Factor, 4>,
}

/// Greatest device for a conductor.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DeviceLimit {
    /// Greatest rating.
    pub most: ElectricCurrent,
    /// Rule in words: `next standard rating above 85 A`.
    pub rule: &'static str,
    /// Source.
    pub citation: Citation,
}

/// A limit with its source.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limit<Q> {
    /// Limit.
    pub value: Q,
    /// Source.
    pub citation: Citation,
}

/// Voltage-drop limit of a use.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DropLimit {
    /// Part of nominal voltage, whole path.
    pub ratio: Ratio,
    /// Required by the rules (true), or their recommendation (false).
    pub required: bool,
    /// Source.
    pub citation: Citation,
}

/// Use of a circuit as far as the drop limit depends on it (R17).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LoadUse {
    /// Navigation lights, bilge pumps and blowers, electronics, panel feeders.
    Critical,
    /// Lighting.
    Lighting,
    /// Everything else.
    Other,
}

/// The checks a run must pass; the rule set gives their order.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Check {
    /// Conductor material and class admitted (R18).
    Conductor,
    /// Mechanical minimum.
    LeastSize,
    /// (a) 1.25 × continuous + non-continuous against the terminal's column, before derating.
    TerminalColumn,
    /// (b) current against ampacity after all factors.
    Ampacity,
    /// Device carries the design current.
    DeviceCarries,
    /// (c) device protects the conductor.
    DeviceProtects,
    /// The family's upper conventional current (R5).
    OpensLate,
    /// Voltage drop, whole path.
    Drop,
    /// Volts at the load against its least supply voltage.
    LoadVoltage,
    /// Interrupting rating against the greatest prospective current (R6).
    Breaking,
    /// Least prospective current operates the device (R6).
    LeastFault,
    /// Conductor withstands the fault until the device opens.
    Withstand,
    /// Device voltage and DC rating, polarity (R6).
    DeviceSupply,
    /// Lug, stud and terminal range.
    Termination,
}

/// Values a user replaces; each shows in the report as the user's own.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Overrides {
    /// Factor on continuous current.
    pub continuous_factor: Option<f64>,
    /// Greatest drop for every use.
    pub drop: Option<Ratio>,
    /// Greatest unprotected length from the source.
    pub unfused: Option<Length>,
    /// Engine-space factor.
    pub engine_space: Option<f64>,
    /// Admit aluminium.
    pub aluminium: Option<bool>,
}

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
}

/// A rule set with the user's overrides: what the floors above ask.
#[derive(Clone, Copy, Debug)]
pub struct Rules {
    set: &'static RuleSet,
    overrides: Overrides,
}

impl Rules {
    /// The set named `us`, `iec`, `craft_iso`, `craft_us`, or with a pinned edition such as `us-2023`.
    ///
    /// # Errors
    /// [`Error::UnknownWord`].
    pub fn named(word: &str) -> Result<Self, Error> { let _ = word; unimplemented!() }
    /// With the user's own values.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for a value outside its range.
    pub fn with_overrides(self, overrides: Overrides) -> Result<Self, Error> { Ok(Self { overrides, ..self }) }
    /// The set.
    pub fn set(&self) -> &'static RuleSet { self.set }
    /// The user's overrides.
    pub fn overrides(&self) -> &Overrides { &self.overrides }
    /// Ampacity after all factors.
    ///
    /// # Errors
    /// [`Error::TableEnds`], [`Error::NotTabulated`].
    pub fn ampacity(&self, query: &AmpacityQuery) -> Result<Ampacity, Error> { let _ = query; unimplemented!() }
    /// Ampacity of the terminal's column before derating, where the set has that check (`us`).
    /// `design` picks the column: 60 °C up to 100 A unless the terminal is marked otherwise, else 75 °C.
    ///
    /// # Errors
    /// [`Error::TableEnds`], [`Error::NotTabulated`].
    #[allow(non_snake_case)]
    pub fn terminal_column(&self, size: ConductorSize, design: ElectricCurrent, marked_degC: Option<f64>)
        -> Result<Option<(Cell, &'static str)>, Error> { let _ = (size, design, marked_degC); unimplemented!() }
    /// Factor on continuous current for conductor and device (1.25, or 1).
    pub fn continuous_factor(&self) -> Limit<f64> { unimplemented!() }
    /// Greatest device on a conductor of this size and corrected ampacity.
    pub fn device_limit(&self, size: ConductorSize, corrected: ElectricCurrent) -> DeviceLimit { let _ = (size, corrected); unimplemented!() }
    /// Upper conventional current over corrected ampacity: 1.45.
    pub fn overload_ratio(&self) -> Limit<f64> { unimplemented!() }
    /// Greatest unprotected length from the source; `None` where the set gives none.
    pub fn unfused_length(&self, sheathed: bool, from_battery_post: bool) -> Option<Limit<Length>> { let _ = (sheathed, from_battery_post); unimplemented!() }
    /// Greatest voltage drop for a use.
    pub fn drop_limit(&self, usage: LoadUse) -> DropLimit { let _ = usage; unimplemented!() }
    /// Sizes the set's tables know, smallest first.
    pub fn sizes(&self) -> &'static [ConductorSize] { unimplemented!() }
    /// Standard device ratings, amperes, smallest first.
    #[allow(non_snake_case)]
    pub fn standard_ratings_A(&self) -> &'static [f64] { unimplemented!() }
    /// Least conductor size for a power circuit.
    pub fn least_size(&self) -> Limit<ConductorSize> { unimplemented!() }
    /// Whether the conductor's metal and class are admitted (R18); `moving` for battery and moving cables.
    ///
    /// # Errors
    /// [`Error::Refused`] with the reason.
    pub fn admits(&self, conductor: &Conductor, moving: bool) -> Result<(), Error> { let _ = (conductor, moving, Material::Copper); unimplemented!() }
}
