//! The plant of the document: banks, arrays, controllers, generators as far as the file states them.
//!
//! What is left out is `None` here and is designed by [`super::complete`].

use alloc::string::String;
use alloc::vec::Vec;

use crate::battery::Chemistry;
use crate::cable::Stud;
use crate::quantity::{
    Angle, Area, Capacitance, ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance,
    Energy, Irradiation, Length, Power, Ratio, RatioPerTemperature, ThermodynamicTemperature, Time,
    VoltagePerTemperature, VolumeFlow,
};

/// Where the site lies, and what is expected of it: the optional keys of `[site]`.
#[derive(Clone, Debug, Default)]
pub struct Place {
    /// `latitude = "58.2 deg"`, north positive.
    pub latitude: Option<Angle>,
    /// `longitude = "-4.1 deg"`, east positive.
    pub longitude: Option<Angle>,
    /// `altitude = "40 m"` above the sea.
    pub altitude: Option<Length>,
    /// `autonomy = "5 d"` without any charge.
    pub autonomy: Option<Time>,
    /// `critical = true`: the load must not fail; sets autonomy and array where they are not stated.
    pub critical: bool,
    /// `losses = "3 %"` of energy in the wiring.
    pub losses: Option<Ratio>,
    /// `margin = "10 %"` on capacity and array.
    pub margin: Option<Ratio>,
    /// `bonds = 1`: points at which the system is tied to earth.
    pub bonds: Option<u32>,
    /// `bonding = "16 mm2"`: conductor to the earth electrode.
    pub bonding: Option<crate::quantity::ConductorSize>,
    /// `monitoring = "insulation"`, `"earth_fault"` or `"none"`.
    pub monitoring: Option<Monitoring>,
    /// `covered = true`: live parts are covered against touch.
    pub covered: Option<bool>,
    /// `surge_protection = true`.
    pub surge_protection: Option<bool>,
    /// `mast = true`: conductors run up a mast.
    pub mast: bool,
}

/// Watching for a fault to earth.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Monitoring {
    /// `insulation`: resistance to earth is watched.
    Insulation,
    /// `earth_fault`: current to earth is detected and interrupted.
    EarthFault,
    /// `none`.
    None,
}

/// `[weather]`: twelve months, January first.
#[derive(Clone, Debug, PartialEq)]
pub struct Weather {
    /// Line in the file.
    pub line: u32,
    /// `in_plane = ["0.6 kWh/m2", …]`: daily mean in the plane of the array.
    pub in_plane: [Irradiation; 12],
    /// `temperature = ["2 degC", …]`: mean of the air.
    pub temperature: Option<[ThermodynamicTemperature; 12]>,
    /// `coldest_morning = "-25 degC"`; the least ambient if absent.
    pub coldest_morning: Option<ThermodynamicTemperature>,
}

/// How the strings of a bank are joined (R15).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum TakeOff {
    /// `one_end`: both conductors leave at the first string.
    OneEnd,
    /// `diagonal`: positive at the first string, negative at the last.
    Diagonal,
    /// `busbar`: equal leads from every string.
    Busbar,
}

/// Where a bank stands (R20).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Room {
    /// `room`: a room of a building, not lived in.
    Room,
    /// `living`: people live or sleep there.
    Living,
    /// `box`: a closed box or locker.
    Box,
    /// `engine`: an engine or fuel space.
    Engine,
    /// `outdoors`.
    Outdoors,
}

/// `[[bank]]` as stated.
#[derive(Clone, Debug)]
#[allow(clippy::struct_excessive_bools)] // they are the flags of the file, each with its key
pub struct BankPart {
    /// `name`.
    pub name: String,
    /// Line in the file; 0 where the whole bank is designed.
    pub line: u32,
    /// `battery`: name of a `[[stock.battery]]`.
    pub battery: Option<String>,
    /// `chemistry`.
    pub chemistry: Option<Chemistry>,
    /// `nominal`.
    pub nominal: Option<ElectricPotential>,
    /// `capacity`, of the whole bank.
    pub capacity: Option<ElectricCharge>,
    /// `unit = "6 V"`: nominal voltage of one battery.
    pub unit: Option<ElectricPotential>,
    /// `unit_capacity = "225 Ah"`.
    pub unit_capacity: Option<ElectricCharge>,
    /// `units = 8`: batteries in all.
    pub units: Option<u32>,
    /// `series = 4`: batteries in one string.
    pub series: Option<u32>,
    /// `strings = 2`.
    pub strings: Option<u32>,
    /// `rate = "20 h"`: of the stated capacity.
    pub rate: Option<Time>,
    /// `cut_off`.
    pub cut_off: Option<ElectricPotential>,
    /// `highest`.
    pub highest: Option<ElectricPotential>,
    /// `short_circuit`.
    pub short_circuit: Option<ElectricCurrent>,
    /// `internal_resistance`.
    pub internal_resistance: Option<ElectricalResistance>,
    /// `greatest_discharge`.
    pub greatest_discharge: Option<ElectricCurrent>,
    /// `greatest_charge`: the maker's or the pack's own limit.
    pub greatest_charge: Option<ElectricCurrent>,
    /// `charge_from = "0 degC"`: the pack's least charging temperature.
    pub charge_from: Option<ThermodynamicTemperature>,
    /// `stud`.
    pub stud: Option<Stud>,
    /// `temperature = ["5 degC", "30 degC"]` of the cells.
    pub temperature: Option<(ThermodynamicTemperature, ThermodynamicTemperature)>,
    /// `cold_capacity = "60 %"`: part of the capacity left at its coldest, by its maker.
    pub cold_capacity: Option<Ratio>,
    /// `depth = "80 %"`: greatest.
    pub depth: Option<Ratio>,
    /// `daily_depth = "20 %"`.
    pub daily_depth: Option<Ratio>,
    /// `disconnect = "22.8 V"`.
    pub disconnect: Option<ElectricPotential>,
    /// `reconnect = "25.2 V"`.
    pub reconnect: Option<ElectricPotential>,
    /// `take_off`.
    pub take_off: Option<TakeOff>,
    /// `link = "0.3 mohm"`: a conductor between neighbouring strings.
    pub link: Option<ElectricalResistance>,
    /// `joint = "0.1 mohm"`: at either end of a link or lead.
    pub joint: Option<ElectricalResistance>,
    /// `string_device = "100 A"`: a device in every string.
    pub string_device: Option<ElectricCurrent>,
    /// `max_series`, `max_parallel`: what the pack admits.
    pub max_series: Option<u32>,
    /// See `max_series`.
    pub max_parallel: Option<u32>,
    /// `mixed = true`: batteries of different age or type.
    pub mixed: bool,
    /// `data_link = true`: its charge limit reaches the sources over a data link only.
    pub data_link: bool,
    /// `opens_under_charge = true`: the pack may disconnect while it is charged.
    pub opens_under_charge: bool,
    /// `space`.
    pub space: Option<Room>,
    /// `air = "5 m3/h"`: what ventilation moves.
    pub air: Option<VolumeFlow>,
    /// `opening = "150 cm2"`: free area of each of two openings.
    pub opening: Option<Area>,
    /// `route = "2 m"`: one-way route to its board, where the circuit is designed.
    pub route: Option<Length>,
    /// `board`: the board it feeds, where the circuit is designed.
    pub board: Option<String>,
    /// Its size was left to the design.
    pub designed: bool,
}

impl BankPart {
    /// A bank of which nothing is stated but a name.
    pub(super) fn unstated(name: String) -> Self {
        Self {
            name,
            line: 0,
            battery: None,
            chemistry: None,
            nominal: None,
            capacity: None,
            unit: None,
            unit_capacity: None,
            units: None,
            series: None,
            strings: None,
            rate: None,
            cut_off: None,
            highest: None,
            short_circuit: None,
            internal_resistance: None,
            greatest_discharge: None,
            greatest_charge: None,
            charge_from: None,
            stud: None,
            temperature: None,
            cold_capacity: None,
            depth: None,
            daily_depth: None,
            disconnect: None,
            reconnect: None,
            take_off: None,
            link: None,
            joint: None,
            string_device: None,
            max_series: None,
            max_parallel: None,
            mixed: false,
            data_link: false,
            opens_under_charge: false,
            space: None,
            air: None,
            opening: None,
            route: None,
            board: None,
            designed: false,
        }
    }
}

/// Voltages of charge, stated with a charging source, for the whole bank at 25 °C.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Charging {
    /// `absorption = "28.8 V"`.
    pub absorption: Option<ElectricPotential>,
    /// `float = "27 V"`.
    pub float: Option<ElectricPotential>,
    /// `equalise = "31 V"`.
    pub equalise: Option<ElectricPotential>,
    /// `compensation = "-5 mV/K"`, per cell; 0 where none is applied.
    pub compensation: Option<VoltagePerTemperature>,
    /// `sense = "bank"`: measured at the bank, else at its own terminals.
    pub sense: Option<Sense>,
}

/// Where a source measures the voltage it charges to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sense {
    /// `bank`.
    Bank,
    /// `terminals`: its own.
    Terminals,
}

/// A photovoltaic module: `[[stock.module]]`, or keys of an `[[array]]`.
#[derive(Clone, Debug)]
pub struct ModulePart {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `power = "120 W"` under standard test conditions; all below likewise.
    pub power: Power,
    /// `voc`: open-circuit voltage.
    pub voc: ElectricPotential,
    /// `isc`: short-circuit current.
    pub isc: ElectricCurrent,
    /// `vmp`: voltage at maximum power.
    pub vmp: ElectricPotential,
    /// `imp`: current at maximum power.
    pub imp: ElectricCurrent,
    /// `voc_coefficient = "-0.3 %/K"`.
    pub voc_coefficient: Option<RatioPerTemperature>,
    /// `isc_coefficient = "0.05 %/K"`.
    pub isc_coefficient: Option<RatioPerTemperature>,
    /// `power_coefficient = "-0.4 %/K"`.
    pub power_coefficient: Option<RatioPerTemperature>,
    /// `noct = "45 degC"`.
    pub noct: Option<ThermodynamicTemperature>,
    /// `series_fuse = "15 A"`: greatest that the module admits.
    pub series_fuse: Option<ElectricCurrent>,
    /// `greatest_voltage = "600 V"` of the system.
    pub greatest_voltage: Option<ElectricPotential>,
    /// `rear_gain = "10 %"` of a bifacial module.
    pub rear_gain: Option<Ratio>,
    /// `cells = 36` in series.
    pub cells: Option<u32>,
    /// `price` each.
    pub price: Option<f64>,
    /// `count` on the shelf.
    pub count: Option<u32>,
}

/// `[[array]]` as stated.
#[derive(Clone, Debug)]
pub struct ArrayPart {
    /// `name`.
    pub name: String,
    /// Line in the file; 0 where designed.
    pub line: u32,
    /// `module`: name of a `[[stock.module]]`.
    pub module: Option<String>,
    /// The module's own keys.
    pub own_module: Option<ModulePart>,
    /// `modules = 6` in all.
    pub modules: Option<u32>,
    /// `series = 2` in a string.
    pub series: Option<u32>,
    /// `strings = 3` in parallel.
    pub strings: Option<u32>,
    /// `tilt = "60 deg"`.
    pub tilt: Option<Angle>,
    /// `azimuth = "180 deg"`, from north over east.
    pub azimuth: Option<Angle>,
    /// `shade = "20 %"`: part of the modules that lies in shade for part of the day.
    pub shade: Option<Ratio>,
    /// `controller`: name of its controller.
    pub controller: Option<String>,
    /// `string_fuse = "15 A"`: a device in every string.
    pub string_fuse: Option<ElectricCurrent>,
    /// `isolator = "150 V"`: DC rating of its load-break isolator; `isolator_current` its current.
    pub isolator: Option<ElectricPotential>,
    /// See `isolator`.
    pub isolator_current: Option<ElectricCurrent>,
    /// `load_break = false`: the isolator is not made to break under load.
    pub load_break: Option<bool>,
    /// `exposed = true`: stands where lightning may find it.
    pub exposed: bool,
    /// `route = "15 m"` to its controller, where the circuit is designed.
    pub route: Option<Length>,
}

/// Kind of charge controller.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ControllerKind {
    /// `pwm`: joins array and bank.
    Pwm,
    /// `mppt`: tracks the point of maximum power.
    Mppt,
}

/// `[[controller]]`, or a `[[stock.controller]]`.
#[derive(Clone, Debug)]
pub struct ControllerPart {
    /// `name`.
    pub name: String,
    /// Line in the file; 0 where designed.
    pub line: u32,
    /// `model`: name of a `[[stock.controller]]` that states the rest.
    pub model: Option<String>,
    /// `kind`.
    pub kind: Option<ControllerKind>,
    /// `greatest_input = "100 V"`.
    pub greatest_input: Option<ElectricPotential>,
    /// `input_current = "30 A"`: greatest short-circuit current of the array.
    pub input_current: Option<ElectricCurrent>,
    /// `operating = ["20 V", "90 V"]`: in which it tracks.
    pub operating: Option<(ElectricPotential, ElectricPotential)>,
    /// `start_margin = "5 V"` above the bank.
    pub start_margin: Option<ElectricPotential>,
    /// `output = "30 A"`.
    pub output: Option<ElectricCurrent>,
    /// `nominals = ["12 V", "24 V"]` it serves; any if empty.
    pub nominals: Vec<ElectricPotential>,
    /// `efficiency`.
    pub efficiency: Option<Ratio>,
    /// `idle`.
    pub idle: Option<Power>,
    /// Its set points.
    pub charging: Charging,
    /// `load_dump = true`: it bears that the bank is disconnected under charge.
    pub load_dump: Option<bool>,
    /// `bank`: name of the bank it charges.
    pub bank: Option<String>,
    /// `board`: to which its output leads, where the circuit is designed.
    pub board: Option<String>,
    /// `route = "1 m"` to that board or bank, where the circuit is designed.
    pub route: Option<Length>,
    /// `stud`.
    pub stud: Option<Stud>,
    /// `price`.
    pub price: Option<f64>,
}

/// Kind of source beside the sun.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum GeneratorKind {
    /// `engine`: an engine set with a charger.
    Engine,
    /// `alternator`: on an engine that runs for something else.
    Alternator,
    /// `shore`: a supply from elsewhere with a charger.
    Shore,
    /// `wind`.
    Wind,
    /// `hydro`.
    Hydro,
}

/// `[[generator]]`.
#[derive(Clone, Debug)]
pub struct GeneratorPart {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `kind`.
    pub kind: GeneratorKind,
    /// `power = "2 kW"`: nameplate, on the AC side.
    pub power: Option<Power>,
    /// `output = "50 A"`: greatest current into the bank: the charger's limit, or an alternator's nameplate.
    pub output: Option<ElectricCurrent>,
    /// `hot_output = "55 %"` of nameplate, of a hot alternator.
    pub hot_output: Option<Ratio>,
    /// `efficiency` of the charger.
    pub efficiency: Option<Ratio>,
    /// `power_factor` of the charger.
    pub power_factor: Option<Ratio>,
    /// `hours = "2 h"` a day it may run.
    pub hours: Option<Time>,
    /// `daily = "1.2 kWh"`: wind or hydro, as a figure, in the worst month.
    pub daily: Option<Energy>,
    /// `load_dump = true`: it bears that the bank is disconnected under charge.
    pub load_dump: Option<bool>,
    /// `self_limiting = true`.
    pub self_limiting: bool,
    /// Its set points.
    pub charging: Charging,
    /// `bank`: name of the bank it charges.
    pub bank: Option<String>,
    /// `board`.
    pub board: Option<String>,
    /// `route`.
    pub route: Option<Length>,
    /// `idle` draw of its charger.
    pub idle: Option<Power>,
    /// `stud`.
    pub stud: Option<Stud>,
}

/// `[[converter]]`: DC to DC.
#[derive(Clone, Debug)]
pub struct ConverterPart {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `output = "12 V"`.
    pub output: ElectricPotential,
    /// `limit = "20 A"`: greatest output current, kept by the converter itself.
    pub limit: ElectricCurrent,
    /// `efficiency` at the lowest input voltage.
    pub efficiency: Ratio,
    /// `least` input voltage.
    pub least: Option<ElectricPotential>,
    /// `greatest` input voltage.
    pub greatest: Option<ElectricPotential>,
    /// `isolated = true`: output and input share no pole.
    pub isolated: Option<bool>,
    /// `idle`.
    pub idle: Option<Power>,
    /// `stud`.
    pub stud: Option<Stud>,
}

/// `[[inverter]]` as stated, or a `[[stock.inverter]]`.
#[derive(Clone, Debug)]
pub struct InverterPart {
    /// `name`.
    pub name: String,
    /// Line in the file; 0 where designed.
    pub line: u32,
    /// `model`: name of a `[[stock.inverter]]` that states the rest.
    pub model: Option<String>,
    /// `nominal = "24 V"` of its DC side.
    pub nominal: Option<ElectricPotential>,
    /// `power`.
    pub power: Option<Power>,
    /// `surge`.
    pub surge: Option<Power>,
    /// `surge_time = "5 s"`.
    pub surge_time: Option<Time>,
    /// `efficiency`.
    pub efficiency: Option<Ratio>,
    /// `idle`.
    pub idle: Option<Power>,
    /// `least`.
    pub least: Option<ElectricPotential>,
    /// `greatest`.
    pub greatest: Option<ElectricPotential>,
    /// `capacitance = "10000 uF"` of its input.
    pub capacitance: Option<Capacitance>,
    /// `precharge = true`: its input is charged through a resistor first.
    pub precharge: Option<bool>,
    /// `stud`.
    pub stud: Option<Stud>,
    /// `terminal`.
    pub terminal: Option<ThermodynamicTemperature>,
    /// `board`: which feeds it, where the circuit is designed.
    pub board: Option<String>,
    /// `route`.
    pub route: Option<Length>,
    /// `price`.
    pub price: Option<f64>,
}

/// `[[stock.battery]]`: one battery or pack.
#[derive(Clone, Debug)]
pub struct StockBattery {
    /// `name`.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `chemistry`.
    pub chemistry: Chemistry,
    /// `nominal = "12 V"`.
    pub nominal: ElectricPotential,
    /// `capacity = "120 Ah"`.
    pub capacity: ElectricCharge,
    /// `rate = "20 h"` of that capacity.
    pub rate: Option<Time>,
    /// `internal_resistance` of one.
    pub internal_resistance: Option<ElectricalResistance>,
    /// `short_circuit` of one.
    pub short_circuit: Option<ElectricCurrent>,
    /// `greatest_charge` of one.
    pub greatest_charge: Option<ElectricCurrent>,
    /// `greatest_discharge` of one.
    pub greatest_discharge: Option<ElectricCurrent>,
    /// `charge_from`.
    pub charge_from: Option<ThermodynamicTemperature>,
    /// `max_series`.
    pub max_series: Option<u32>,
    /// `max_parallel`.
    pub max_parallel: Option<u32>,
    /// `stud`.
    pub stud: Option<Stud>,
    /// `price`.
    pub price: Option<f64>,
    /// `count` on the shelf.
    pub count: Option<u32>,
}

/// `[[reading]]`: what a meter showed.
#[derive(Clone, Debug)]
pub struct Reading {
    /// `name`, for the report.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// `at`: name of a bank, board, load or inverter whose terminals were measured, or of a circuit for its drop.
    pub at: String,
    /// `on = ["water pump"]`: loads that ran; none if empty.
    pub on: Vec<String>,
    /// `volts` at the terminals.
    pub volts: Option<ElectricPotential>,
    /// `drop` along a circuit, both conductors and all joints.
    pub drop: Option<ElectricPotential>,
    /// `amps` in the circuit, or out of the bank.
    pub amps: Option<ElectricCurrent>,
    /// `temperature` of joint, conductor or cells.
    pub temperature: Option<ThermodynamicTemperature>,
    /// `density = 1.225`: relative density of the electrolyte.
    pub density: Option<f64>,
    /// `rest = "4 h"` without current before the reading.
    pub rest: Option<Time>,
    /// `delivered = "60 Ah"` between full and cut-off.
    pub delivered: Option<ElectricCharge>,
    /// `accuracy = "0.5 %"` of the meter.
    pub accuracy: Option<Ratio>,
    /// `resolution = "10 mV"`: last digit on the volt range used.
    pub resolution: Option<ElectricPotential>,
}
