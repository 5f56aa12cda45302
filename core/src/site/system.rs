//! The site as it is planned: every part of the document with what the design added, nothing left open but circuits.

use alloc::string::String;
use alloc::vec::Vec;

use super::model::{Board, CircuitEntry, LoadEntry, Stock};
use super::parts::{
    ArrayPart, BankPart, Charging, ControllerPart, ConverterPart, GeneratorPart, InverterPart, ModulePart,
    Place, Reading, Weather,
};
use crate::battery::Chemistry;
use crate::cable::Stud;
use crate::protection::Earthing;
use crate::quantity::{
    ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance, Power, Ratio,
    ThermodynamicTemperature,
};
use crate::rules::Rules;

/// The whole site.
#[derive(Clone, Debug)]
pub(super) struct Site {
    pub name: String,
    pub rules: Rules,
    pub earthing: Earthing,
    /// Least and greatest temperature of the air.
    pub ambient: (ThermodynamicTemperature, ThermodynamicTemperature),
    pub place: Place,
    pub weather: Option<Weather>,
    /// Banks in file order, then outputs of converters, then arrays.
    pub banks: Vec<BankEntry>,
    pub boards: Vec<Board>,
    pub inverters: Vec<InverterEntry>,
    pub loads: Vec<LoadEntry>,
    pub circuits: Vec<CircuitEntry>,
    pub arrays: Vec<Array>,
    pub controllers: Vec<ControllerPart>,
    pub generators: Vec<GeneratorPart>,
    pub converters: Vec<ConverterPart>,
    /// Outputs that charge a bank: of every controller, then of every generator.
    pub chargers: Vec<Charger>,
    pub readings: Vec<Reading>,
    pub stock: Stock,
    /// More than wiring is described: bank, charging and energy are inspected too.
    pub is_whole: bool,
}

/// An array with its module.
#[derive(Clone, Debug)]
pub(super) struct Array {
    pub part: ArrayPart,
    pub module: ModulePart,
    pub series: u32,
    pub strings: u32,
    /// Its controller, by place.
    pub controller: Option<usize>,
    pub designed: bool,
}

/// What charges a bank through an output that limits itself.
#[derive(Clone, Debug)]
pub(super) struct Charger {
    pub name: String,
    pub line: u32,
    pub kind: ChargerKind,
    /// Greatest output current; `None` where it is not stated.
    pub limit: Option<ElectricCurrent>,
    pub charging: Charging,
    /// The bank it charges, by place.
    pub bank: Option<usize>,
    pub stud: Option<Stud>,
}

/// Whose output it is, by place in the document.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum ChargerKind {
    Controller(usize),
    Generator(usize),
}

/// What keeps a network at its voltage.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum FeedKind {
    /// A bank of batteries.
    Battery(Chemistry),
    /// The output of a DC–DC converter, by its place in the document.
    Converter(usize),
    /// An array.
    Array(usize),
}

/// A source that a network hangs from: a bank, and likewise the output of a converter, and an array.
#[derive(Clone, Debug)]
pub(super) struct BankEntry {
    /// What it is.
    pub kind: FeedKind,
    /// What the document states of a bank, with what the design added.
    pub part: Option<BankPart>,
    /// Batteries in one string, and cells in one string.
    pub series: u32,
    pub cells: u32,
    /// Greatest current of a source that limits itself.
    pub limit: Option<ElectricCurrent>,
    /// Absorption voltage of a bank, compensated for its coldest.
    pub charged_cold: Option<ElectricPotential>,
    /// `name`.
    pub name: String,
    /// Line of its header in the file, from 1.
    pub line: u32,
    /// `nominal = "24 V"`.
    pub nominal: ElectricPotential,
    /// `capacity = "400 Ah"`, of the whole bank.
    pub capacity: ElectricCharge,
    /// `strings = 2`, in parallel; 1 if absent.
    pub strings: u32,
    /// `cut_off = "21 V"`: least terminal voltage in use.
    pub cut_off: ElectricPotential,
    /// `highest = "31 V"`: cold-compensated equalising or charge voltage.
    pub highest: ElectricPotential,
    /// `short_circuit = "4 kA"`: the maker's stated value for the whole bank.
    pub short_circuit: Option<ElectricCurrent>,
    /// `internal_resistance = "6 mohm"`: whole bank, full, warm, new.
    pub internal_resistance: Option<ElectricalResistance>,
    /// `greatest_discharge = "200 A"`: the maker's or the pack's own limit.
    pub greatest_discharge: Option<ElectricCurrent>,
    /// `stud = "M8"` of the terminals.
    pub stud: Option<Stud>,
}

impl BankEntry {
    /// The chemistry of a bank.
    pub const fn chemistry(&self) -> Option<Chemistry> {
        match self.kind {
            FeedKind::Battery(chemistry) => Some(chemistry),
            FeedKind::Converter(_) | FeedKind::Array(_) => None,
        }
    }

    /// Whether it is a bank of batteries.
    pub const fn is_battery(&self) -> bool {
        matches!(self.kind, FeedKind::Battery(_))
    }
}

/// `[[inverter]]`.
#[derive(Clone, Debug)]
pub(super) struct InverterEntry {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `power = "1200 W"`: continuous, AC side.
    pub power: Power,
    /// `surge = "2400 W"`.
    pub surge: Option<Power>,
    /// The most that it gives for seconds: its surge, or what its loads ask for at their start where that is less.
    pub start: Option<Power>,
    /// The rest of what is stated.
    pub part: InverterPart,
    /// Power, surge and efficiency were chosen here.
    pub designed: bool,
    /// `efficiency = 0.9` or `"90 %"`: at full power and lowest voltage.
    pub efficiency: Ratio,
    /// `idle = "12 W"`.
    pub idle: Option<Power>,
    /// `least = "21 V"`: it trips below.
    pub least: Option<ElectricPotential>,
    /// `greatest = "32 V"`.
    pub greatest: Option<ElectricPotential>,
    /// `stud = "M8"`.
    pub stud: Option<Stud>,
    /// `terminal = "75 degC"`: marked temperature rating.
    pub terminal: Option<ThermodynamicTemperature>,
}
