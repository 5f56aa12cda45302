//! A whole site: its document, its checks, its report.

mod bank;
mod compare;
mod complete;
mod fault;
mod finding;
mod flow;
mod graph;
mod grow;
mod joints;
mod model;
mod offers;
mod overrides;
mod parts;
mod plan;
mod plant;
mod reach;
mod read;
mod reading;
mod report;
mod smaller;
mod state;
mod system;
mod text;
mod trust;
mod wiring;

pub use compare::{Change, Comparison};
pub use finding::{Finding, Severity};
pub use model::{
    Board, CircuitEntry, DeviceEntry, Document, Earthing, End, JointEntry, LoadEntry, LoadKind, LoadUseTime,
    Part, PartKind, Pole, Return, Stock, StockCable, StockDevice, StockLug,
};
pub use parts::{
    ArrayPart, BankPart, Charging, ControllerKind, ControllerPart, ConverterPart, GeneratorKind,
    GeneratorPart, InverterPart, ModulePart, Monitoring, Place, Reading, Room, Sense, StockBattery, TakeOff,
    Weather,
};
pub use read::{Problem, Problems, read, read_bytes};
pub use reading::{Cause, CauseKind, Implied, Measured, NextMeasurement, ReadingLine, Verdict};
pub use report::{CircuitLine, DeviceLine, Purchase, Report, inspect};
