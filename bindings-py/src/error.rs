//! Core's errors as Python exceptions; the classes themselves are written in Python.

use ampwright::Error;
use pyo3::prelude::*;

/// The exception for an error, with the input or output named as Python spells it: core's name and the unit suffix.
pub(crate) fn raised(py: Python<'_>, error: Error, spelling: &[(&'static str, &'static str)]) -> PyErr {
    let spelled = |name| spelling.iter().find(|(core, _)| *core == name).map_or(name, |(_, python)| *python);
    let made = match error {
        Error::OutOfRange { name, value, unit, allowed } => {
            let name = spelled(name);
            let sentence = Error::OutOfRange { name, value, unit, allowed }.to_string();
            make(py, "RangeError", (sentence, error.slug(), name, value, unit, allowed.to_string()))
        }
        other => make(py, "AmpwrightError", (other.to_string(), other.slug())),
    };
    made.unwrap_or_else(|problem| problem)
}

fn make<'py>(py: Python<'py>, class: &str, arguments: impl pyo3::call::PyCallArgs<'py>) -> PyResult<PyErr> {
    let class = py.import("ampwright.errors")?.getattr(class)?;
    Ok(PyErr::from_value(class.call1(arguments)?))
}
