//! Banks, arrays, inverters and sources as the report tells them: what they are, and each step to it.

use alloc::string::String;
use alloc::vec::Vec;

use super::energy::DayDemand;
use crate::battery::Chemistry;
use crate::citation::Citation;
use crate::quantity::{ElectricCharge, ElectricCurrent, ElectricPotential, Energy, Power, Ratio, Time};

/// One step of a derivation.
#[derive(Clone, Debug, PartialEq)]
pub struct Step {
    /// What it is: `demand of autonomy over greatest depth`.
    pub what: String,
    /// Its value.
    pub value: f64,
    /// Unit of the value; empty for a ratio or a count.
    pub unit: &'static str,
    /// Where it comes from, if from anywhere but the steps before.
    pub citation: Option<Citation>,
}

/// Something that was not taken, and why.
#[derive(Clone, Debug, PartialEq)]
pub struct Rejected {
    /// What.
    pub what: String,
    /// Why.
    pub why: String,
}

/// One bank.
#[derive(Clone, Debug)]
pub struct BankLine {
    /// Name.
    pub name: String,
    /// Chosen here.
    pub designed: bool,
    /// Chemistry.
    pub chemistry: Chemistry,
    /// Nominal voltage.
    pub nominal: ElectricPotential,
    /// Capacity of the whole bank.
    pub capacity: ElectricCharge,
    /// Name of the battery in the stock, if it is of the stock.
    pub battery: Option<String>,
    /// Batteries in one string, where known.
    pub series: Option<u32>,
    /// Strings in parallel.
    pub strings: u32,
    /// Least voltage in use.
    pub cut_off: ElectricPotential,
    /// Highest charge voltage, compensated for cold.
    pub highest: ElectricPotential,
    /// At which loads are disconnected.
    pub disconnect: Option<ElectricPotential>,
    /// At which they come back.
    pub reconnect: Option<ElectricPotential>,
    /// Absorption at 25 °C.
    pub absorption: Option<ElectricPotential>,
    /// Float at 25 °C.
    pub float: Option<ElectricPotential>,
    /// Equalising at 25 °C.
    pub equalise: Option<ElectricPotential>,
    /// Capacity that the loads ask for, where their times are known.
    pub needed: Option<ElectricCharge>,
    /// Days that it lasts without charge on the greatest day's demand, down to its greatest depth.
    pub autonomy: Option<Time>,
    /// How it came to that.
    pub steps: Vec<Step>,
    /// Batteries that were not taken.
    pub rejected: Vec<Rejected>,
}

/// Energy of the months on one bank.
#[derive(Clone, Debug)]
pub struct DemandLine {
    /// The bank, or the first of those joined.
    pub bank: String,
    /// The mean day of each month.
    pub mean: [DayDemand; 12],
    /// A day on which everything runs.
    pub full: [DayDemand; 12],
    /// What the arrays bring into the bank on the mean day of each month, where there is any weather.
    pub arrays: Option<[Energy; 12]>,
    /// What generators bring on a day, as stated.
    pub generators: Energy,
}

/// One array.
#[derive(Clone, Debug)]
pub struct ArrayLine {
    /// Name.
    pub name: String,
    /// Chosen here.
    pub designed: bool,
    /// Name of the module, where it has one.
    pub module: String,
    /// Modules in each string.
    pub series: u32,
    /// Strings.
    pub strings: u32,
    /// Rated power.
    pub power: Power,
    /// Controller, and whether it was chosen here.
    pub controller: Option<(String, bool)>,
    /// Greatest output current of that.
    pub output: Option<ElectricCurrent>,
    /// Cold open circuit of a string.
    pub cold_voc: Option<ElectricPotential>,
    /// Hot maximum power of a string.
    pub hot_vmp: Option<ElectricPotential>,
    /// Greatest short-circuit current of the array.
    pub greatest: Option<ElectricCurrent>,
    /// Whether every string needs a device of its own.
    pub device_required: Option<bool>,
    /// Month in which demand over sun is greatest, 0 for January.
    pub worst_month: Option<usize>,
    /// Array-to-load ratio reached there.
    pub reached: Option<Ratio>,
    /// Why series or parallel.
    pub layout: String,
    /// How it came to that.
    pub steps: Vec<Step>,
    /// What was not taken.
    pub rejected: Vec<Rejected>,
    /// Checks that passed, in words.
    pub passed: Vec<String>,
}

/// One inverter.
#[derive(Clone, Debug)]
pub struct InverterLine {
    /// Name.
    pub name: String,
    /// Chosen here.
    pub designed: bool,
    /// Continuous power.
    pub power: Power,
    /// Surge.
    pub surge: Option<Power>,
    /// Greatest coincident power of its loads.
    pub demand: Power,
    /// The same as apparent power with the largest start.
    pub starting: Power,
    /// How it came to that.
    pub steps: Vec<Step>,
    /// What was not taken.
    pub rejected: Vec<Rejected>,
}

/// One source beside the sun.
#[derive(Clone, Debug)]
pub struct GeneratorLine {
    /// Name.
    pub name: String,
    /// What it gives to the bank.
    pub current: Option<ElectricCurrent>,
    /// What lasts of it when hot and high.
    pub lasting: Option<ElectricCurrent>,
    /// Hours from greatest depth to full, absorption tail included.
    pub recharge: Option<Time>,
    /// How it came to that.
    pub steps: Vec<Step>,
}
