//! A whole site: its document, its checks, its report.

mod bank;
mod fault;
mod finding;
mod flow;
mod graph;
mod grow;
mod joints;
mod model;
mod offers;
mod overrides;
mod plan;
mod plant;
mod reach;
mod read;
mod report;
mod smaller;
mod state;
mod text;
mod trust;
mod wiring;

pub use finding::{Finding, Severity};
pub use model::{
    BankEntry, Board, CircuitEntry, DeviceEntry, Earthing, End, InverterEntry, JointEntry, LoadEntry,
    LoadKind, Part, PartKind, Pole, Return, Site, Stock, StockCable, StockDevice, StockLug,
};
pub use read::{Problem, Problems, read, read_bytes};
pub use report::{CircuitLine, DeviceLine, Purchase, Report, inspect};
