//! C binding of `ampwright`: `include/ampwright.h` is made from this file.
//!
//! The C interface is stable within one `AW_ABI_VERSION`; this Rust side is not, and nothing should depend on it.
#![deny(clippy::unwrap_used, clippy::expect_used, clippy::panic, clippy::indexing_slicing)]
// The unit at the end of a name keeps the symbol's own case, as in every face.
#![allow(non_snake_case, non_camel_case_types)]

mod status;
mod version;
mod voltage_drop;

pub use status::{Status, aw_status_text};
pub use version::{
    AW_ABI_VERSION, AW_VERSION_MAJOR, AW_VERSION_MINOR, AW_VERSION_NUMBER, AW_VERSION_PATCH, aw_abi_version,
};
pub use voltage_drop::{CableRun, aw_voltage_drop};
