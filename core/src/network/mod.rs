//! Voltages and currents in a tree of runs, and prospective fault currents.
