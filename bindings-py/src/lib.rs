//! Python binding of `ampwright`: the private module `_ampwright`. What people read is in `python/ampwright`.
#![forbid(unsafe_code)]
#![deny(clippy::unwrap_used, clippy::expect_used, clippy::panic, clippy::indexing_slicing)]
// The unit at the end of a name keeps the symbol's own case, as in every face.
#![allow(non_snake_case)]

mod error;
mod law;

use pyo3::prelude::*;

#[pymodule]
fn _ampwright(module: &Bound<'_, PyModule>) -> PyResult<()> {
    module.add("__version__", env!("CARGO_PKG_VERSION"))?;
    module.add_function(wrap_pyfunction!(law::voltage_drop, module)?)
}
