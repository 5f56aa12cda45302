//! What the floors above ask of a rule set, and what it answers.

use arrayvec::ArrayVec;

use super::table::Cell;
use crate::citation::Citation;
use crate::quantity::{ConductorSize, ElectricCurrent, Ratio, ThermodynamicTemperature};

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
    /// `ambient`, `bundled conductors`, `engine space`.
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
    /// Rule in words: `next standard rating above the ampacity`.
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
    /// From a source that measures its charge voltage at its own terminals to the bank (R11).
    Charging,
}

/// Order of the checks where a set has no rule of its own for the terminal.
pub(super) const ORDER: &[Check] = &[
    Check::Conductor,
    Check::LeastSize,
    Check::Ampacity,
    Check::DeviceCarries,
    Check::DeviceStart,
    Check::DeviceProtects,
    Check::OpensLate,
    Check::Drop,
    Check::LoadVoltage,
    Check::StartVoltage,
    Check::DeviceSupply,
    Check::Breaking,
    Check::LeastFault,
    Check::Withstand,
    Check::Termination,
];

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
    /// Device rides through a start or surge (R16).
    DeviceStart,
    /// (c) device protects the conductor.
    DeviceProtects,
    /// The family's upper conventional current (R5).
    OpensLate,
    /// Voltage drop, whole path.
    Drop,
    /// Volts at the load against its least supply voltage.
    LoadVoltage,
    /// Volts at the load while it starts (R16).
    StartVoltage,
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
