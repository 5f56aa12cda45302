//! A whole site: its document, its checks, its report.

mod bank;
mod check;
mod compare;
mod complete;
mod describe;
mod energy;
mod fault;
mod finding;
mod flow;
mod graph;
mod grow;
mod joints;
mod json;
mod lines;
mod model;
mod offers;
mod overrides;
mod parts;
mod plan;
mod plant;
mod plant_text;
mod pv;
mod reach;
mod read;
mod reading;
mod report;
mod sheet;
mod smaller;
mod sources;
mod state;
mod supply;
mod system;
mod text;
mod told;
mod trials;
mod trust;
mod wiring;

pub use compare::{Change, Comparison};
pub use describe::PlantLines;
pub use energy::DayDemand;
pub use finding::{Finding, Severity};
pub use lines::{
    ArrayLine, BankLine, DemandLine, GeneratorLine, InverterLine, Rejected, Step as DerivationStep,
};
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
pub use report::{CircuitLine, DeviceLine, Report, inspect};
pub use sheet::{
    Direction, Driven, Every, Expected, JointTest, Label, LoadedTest, METER, MaintenanceTask, Meter,
    MeterRange, Purchase, PurchaseTotal, RunTest, Stage, Step, SwitchingStep,
};
