//! A whole site: its document, its checks, its report.

mod model;
mod read;

pub use model::{
    BankEntry, Board, CircuitEntry, DeviceEntry, Earthing, End, InverterEntry, JointEntry, LoadEntry,
    LoadKind, Part, PartKind, Pole, Return, Site, Stock, StockCable, StockDevice, StockLug,
};
pub use read::{Problem, Problems, read, read_bytes};
