//! The laws: Ohm, power, energy and charge, sources in series and parallel, C-rate.
