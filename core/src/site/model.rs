//! The site document as data: what the file states, checked entry by entry, nothing computed.

use alloc::string::String;
use alloc::vec::Vec;

use crate::cable::{Class, Coating, Insulation, JointKind, Material, Stud};
use crate::device::{Family, Polarity, Supply};
pub use crate::protection::{Earthing, End, Pole};
use crate::quantity::{
    ConductorSize, ElectricCurrent, ElectricPotential, ElectricalResistance, Length, Power, Ratio,
    ThermodynamicTemperature, Time,
};

use super::parts::{
    ArrayPart, BankPart, ControllerPart, ConverterPart, GeneratorPart, InverterPart, ModulePart, Place,
    Reading, StockBattery, Weather,
};
use crate::rules::{Installation, LoadUse, Rules, Space};

/// The whole document, as it is stated.
#[derive(Clone, Debug)]
pub struct Document {
    /// `[site] name`.
    pub name: String,
    /// `[site] rules` with `[rules.override]`.
    pub rules: Rules,
    /// `[site] earthing`.
    pub earthing: Earthing,
    /// `[site] ambient = ["-25 degC", "30 degC"]`: least and greatest.
    pub ambient: (ThermodynamicTemperature, ThermodynamicTemperature),
    /// The other keys of `[site]`.
    pub place: Place,
    /// `[weather]`.
    pub weather: Option<Weather>,
    /// `[[bank]]`, in file order; all `Vec`s are.
    pub banks: Vec<BankPart>,
    /// `[[array]]`.
    pub arrays: Vec<ArrayPart>,
    /// `[[controller]]`.
    pub controllers: Vec<ControllerPart>,
    /// `[[generator]]`.
    pub generators: Vec<GeneratorPart>,
    /// `[[converter]]`.
    pub converters: Vec<ConverterPart>,
    /// `[[board]]`.
    pub boards: Vec<Board>,
    /// `[[inverter]]`.
    pub inverters: Vec<InverterPart>,
    /// `[[load]]`.
    pub loads: Vec<LoadEntry>,
    /// `[[circuit]]`.
    pub circuits: Vec<CircuitEntry>,
    /// `[[reading]]`.
    pub readings: Vec<Reading>,
    /// `[stock]`.
    pub stock: Stock,
}

/// `[[board]]`: a busbar or distribution board.
#[derive(Clone, Debug)]
pub struct Board {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `busbar = "250 A"`: rated current.
    pub busbar: Option<ElectricCurrent>,
    /// `stud = "M8"`.
    pub stud: Option<Stud>,
    /// `lugs_on_stud = 3`: the most lugs on one stud.
    pub lugs_on_stud: Option<u32>,
    /// Not in the document: made by the design.
    pub designed: bool,
}

/// How a load draws (R3).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LoadKind {
    /// `constant_power`: converters, most motors and electronics; the default.
    Power,
    /// `constant_current`.
    Current,
    /// `resistive`: heaters, filament lamps.
    Resistive,
}

/// `[[load]]`.
#[derive(Clone, Debug)]
#[allow(clippy::struct_excessive_bools)] // they are the flags of the file, each with its key
pub struct LoadEntry {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `power = "60 W"` at nominal voltage; exactly one of `power` and `current`.
    pub power: Option<Power>,
    /// `current = "5 A"`.
    pub current: Option<ElectricCurrent>,
    /// `kind`; `constant_power` with `power`, `constant_current` with `current`.
    pub kind: LoadKind,
    /// `count = 4`; 1 if absent.
    pub count: u32,
    /// `continuous = false`: three hours or more; true if absent.
    pub continuous: bool,
    /// `least = "20 V"`.
    pub least: Option<ElectricPotential>,
    /// `greatest = "30 V"`.
    pub greatest: Option<ElectricPotential>,
    /// `start = "30 A"` while starting.
    pub start: Option<ElectricCurrent>,
    /// `use = "critical" | "lighting" | "other"`; `other` if absent.
    pub usage: LoadUse,
    /// `stud`.
    pub stud: Option<Stud>,
    /// `terminal = "75 degC"`.
    pub terminal: Option<ThermodynamicTemperature>,
    /// What tells when it runs and what it costs in energy.
    pub use_of: LoadUseTime,
    /// `ac = true`: fed by an inverter, not from a board.
    pub ac: bool,
    /// `inverter`: which one, where there are several.
    pub inverter: Option<String>,
    /// `power_factor` of an AC load.
    pub power_factor: Option<Ratio>,
    /// `start_power = "1440 W"` of an AC load.
    pub start_power: Option<Power>,
    /// `start_time = "0.5 s"` of that.
    pub start_time: Option<Time>,
    /// `standing = true`: always on, by its nature: monitor, alarm, controller.
    pub standing: bool,
    /// `priority = 1`: shed last.
    pub priority: Option<u32>,
    /// `past_disconnect = true`: wired before the bank's disconnect.
    pub past_disconnect: bool,
    /// `board`: which feeds it, where the circuit is designed.
    pub board: Option<String>,
    /// `route = "12 m"`: one-way route to that board, where the circuit is designed.
    pub route: Option<Length>,
}

/// When a load runs.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct LoadUseTime {
    /// `hours = "4 h"` a day.
    pub hours: Option<Time>,
    /// `at = ["06:00-08:00", "18:00-23:00"]`: minutes of the day, beginning and end; an end before its beginning is
    /// past midnight.
    pub at: Vec<(u16, u16)>,
    /// `months = ["Nov", "Dec"]`: bit 0 is January; all if absent.
    pub months: Option<u16>,
    /// `days_per_week = 2`.
    pub days_per_week: Option<u32>,
    /// `duty = "40 %"` of the time it is switched on.
    pub duty: Option<Ratio>,
    /// `duty_hot = "60 %"` at the greatest ambient.
    pub duty_hot: Option<Ratio>,
}

/// Way back of the current.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Return {
    /// `return = "conductor"`: the default.
    Conductor,
    /// `return = "chassis"`, with `return_resistance` if stated (R9).
    Chassis(Option<ElectricalResistance>),
}

/// `[[circuit]]`: one run of two conductors between two ends.
#[derive(Clone, Debug)]
#[allow(clippy::struct_excessive_bools)] // they are the flags of the file, each with its key
pub struct CircuitEntry {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `from`: name of a bank or board.
    pub from: String,
    /// `to`: name of a board, load, inverter or bank.
    pub to: String,
    /// `one_way = "2.5 m"`, or both of `positive_length` and `negative_length`: per conductor.
    pub positive_length: Length,
    /// See `positive_length`.
    pub negative_length: Length,
    /// `size = "16 mm2"`; designed if absent.
    pub size: Option<ConductorSize>,
    /// `negative_size`, if it differs.
    pub negative_size: Option<ConductorSize>,
    /// `material`: `copper`, `aluminium`, `copper_clad_aluminium`; copper if absent and the size is stated.
    pub material: Option<Material>,
    /// `class`: 1, 2, 5 or 6; 5 if absent and the size is stated.
    pub class: Option<Class>,
    /// `coating`: `plain` or `tinned`; plain if absent and the size is stated.
    pub coating: Option<Coating>,
    /// `insulation = "PVC 70 degC"`; the rule set's usual one if absent.
    pub insulation: Option<Insulation>,
    /// `sheathed = true`; false if absent.
    pub sheathed: bool,
    /// `installed`: `free_air`, `spaced_free_air`, `cable_free_air`, `clipped`, `conduit`, `cable_in_conduit`,
    /// `insulated_wall`, `cable_in_insulated_wall`, `duct`, `buried`, `loom`; the set's usual one if absent.
    pub installed: Option<Installation>,
    /// `space`: `ordinary` (default), `engine`, `rooftop`.
    pub space: Space,
    /// `bundled = 6`: current-carrying conductors together, its own two included; 2 if absent.
    pub bundled: u16,
    /// `ambient = "40 degC"`; the site's greatest if absent.
    pub ambient: Option<ThermodynamicTemperature>,
    /// `moving = true`: flexing or vibrating run.
    pub moving: bool,
    /// `cranking = true`: engine starting conductors.
    pub cranking: bool,
    /// `return`.
    pub way_back: Return,
    /// `current = "100 A"`: stated design current in place of what the loads tell where a bank stands on either side; elsewhere the greater counts.
    pub current: Option<ElectricCurrent>,
    /// `diversity = 0.7`: the user's own factor on the sum of loads (R16); 1 if absent.
    pub diversity: f64,
    /// `drop = "3 %"`: the user's own limit.
    pub drop: Option<Ratio>,
    /// `terminal = "75 degC"`: marked rating of the terminals at both ends.
    pub terminal: Option<ThermodynamicTemperature>,
    /// `from_lug = "M8"`: stud size of the lugs at `from`.
    pub from_lug: Option<Stud>,
    /// `to_lug = "M8"`.
    pub to_lug: Option<Stud>,
    /// `[[circuit.device]]`; designed if there is none.
    pub devices: Vec<DeviceEntry>,
    /// `[[circuit.joint]]`; the generic lugs of both ends if there is none.
    pub joints: Vec<JointEntry>,
    /// `[[circuit.part]]`: switches, relays, connectors, shunts in the path.
    pub parts: Vec<Part>,
    /// `device = "none"` states that there is none and none shall be designed.
    pub no_device: bool,
}

impl CircuitEntry {
    /// Whether it feeds an engine's starter: `cranking`, and a load at its end that runs for less than three hours.
    pub(super) fn starts_engine(&self, load: Option<&LoadEntry>) -> bool {
        self.cranking && load.is_some_and(|l| !l.continuous)
    }
}

/// `[[circuit.device]]`.
#[derive(Clone, Debug)]
#[allow(non_snake_case)] // units keep their case: A2s
pub struct DeviceEntry {
    /// `name`; `F1`, `F2` … by order in the file if absent.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `family`: the words of [`Family`]; designed if absent.
    pub family: Option<Family>,
    /// `rating = "100 A"`; designed if absent.
    pub rating: Option<ElectricCurrent>,
    /// `dc_voltage = "80 V"`, or `ac_only = true`.
    pub supply: Supply,
    /// `breaking = "10 kA"` on DC at that voltage.
    pub breaking: Option<ElectricCurrent>,
    /// `polarised = true`.
    pub polarity: Polarity,
    /// `full_rated = true`.
    pub full_rated: bool,
    /// `pole`: `positive` (default), `negative`, `both`.
    pub pole: Pole,
    /// `end`: `from` (default) or `to`: which end it guards.
    pub end: End,
    /// `from_source = "150 mm"`: conductor between that end and the device.
    pub from_source: Option<Length>,
    /// `let_through = "12000 A2s"`: I²t at the greatest prospective current, A²·s.
    pub let_through_A2s: Option<f64>,
    /// `terminal_range = ["2.5 mm2", "35 mm2"]`.
    pub terminal_range: Option<(ConductorSize, ConductorSize)>,
    /// `terminal = "75 degC"`.
    pub terminal: Option<ThermodynamicTemperature>,
}

/// `[[circuit.joint]]`.
#[derive(Clone, Debug)]
pub struct JointEntry {
    /// `kind`: `lug`, `terminal`, `switch`, `relay`, `fuse`, `breaker`, `shunt`, `busbar`, `connector`.
    pub kind: JointKind,
    /// `count`; 1 if absent.
    pub count: u32,
    /// `resistance = "0.1 mohm"` each; generic if absent.
    pub resistance: Option<ElectricalResistance>,
}

/// Part in the path (R8).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PartKind {
    /// `switch`.
    Switch,
    /// `selector`.
    Selector,
    /// `relay`.
    Relay,
    /// `shunt`.
    Shunt,
    /// `connector`.
    Connector,
    /// `holder`.
    Holder,
}

impl PartKind {
    /// The kind of joint it counts as in the path.
    pub const fn joint(self) -> JointKind {
        match self {
            Self::Switch | Self::Selector => JointKind::Switch,
            Self::Relay => JointKind::Relay,
            Self::Shunt => JointKind::Shunt,
            Self::Connector => JointKind::Connector,
            Self::Holder => JointKind::Fuse,
        }
    }
}

/// `[[circuit.part]]`.
#[derive(Clone, Debug)]
pub struct Part {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `kind`.
    pub kind: PartKind,
    /// `rating = "200 A"`.
    pub rating: Option<ElectricCurrent>,
    /// `resistance`; generic if absent.
    pub resistance: Option<ElectricalResistance>,
    /// `dc_voltage = "80 V"`, or `ac_only = true`.
    pub supply: Supply,
}

/// `[stock]`: what can be bought or lies on the shelf. An empty list means: standard sizes and plain generic parts.
#[derive(Clone, Debug, Default)]
pub struct Stock {
    /// `[[stock.cable]]`.
    pub cables: Vec<StockCable>,
    /// `[[stock.device]]`.
    pub devices: Vec<StockDevice>,
    /// `[[stock.lug]]`.
    pub lugs: Vec<StockLug>,
    /// `[[stock.battery]]`.
    pub batteries: Vec<StockBattery>,
    /// `[[stock.module]]`.
    pub modules: Vec<ModulePart>,
    /// `[[stock.controller]]`.
    pub controllers: Vec<ControllerPart>,
    /// `[[stock.inverter]]`.
    pub inverters: Vec<InverterPart>,
}

/// `[[stock.cable]]`.
#[derive(Clone, Debug)]
pub struct StockCable {
    /// Line in the file.
    pub line: u32,
    /// `size`.
    pub size: ConductorSize,
    /// `material`, `class`, `coating` as in a circuit.
    pub material: Material,
    /// Stranding.
    pub class: Class,
    /// Coating.
    pub coating: Coating,
    /// `insulation`.
    pub insulation: Insulation,
    /// `sheathed`.
    pub sheathed: bool,
    /// `length = "50 m"` on the shelf, of single conductor.
    pub length: Option<Length>,
    /// `price`: per metre of single conductor, in the user's currency.
    pub price: Option<f64>,
}

/// `[[stock.device]]`.
#[derive(Clone, Debug)]
#[allow(non_snake_case)] // units keep their case: A2s
pub struct StockDevice {
    /// Line in the file.
    pub line: u32,
    /// `family`.
    pub family: Family,
    /// `ratings = ["10 A", "15 A"]`; all of the family's if absent.
    pub ratings: Vec<ElectricCurrent>,
    /// `dc_voltage` or `ac_only`.
    pub supply: Supply,
    /// `breaking`.
    pub breaking: Option<ElectricCurrent>,
    /// `polarised`.
    pub polarity: Polarity,
    /// `full_rated`.
    pub full_rated: bool,
    /// `let_through`, A²·s.
    pub let_through_A2s: Option<f64>,
    /// `terminal_range`.
    pub terminal_range: Option<(ConductorSize, ConductorSize)>,
    /// `terminal`.
    pub terminal: Option<ThermodynamicTemperature>,
    /// `price` each.
    pub price: Option<f64>,
}

/// `[[stock.lug]]`.
#[derive(Clone, Debug)]
pub struct StockLug {
    /// Line in the file.
    pub line: u32,
    /// `size` of the conductor.
    pub size: ConductorSize,
    /// `stud`.
    pub stud: Stud,
    /// `price` each.
    pub price: Option<f64>,
}
