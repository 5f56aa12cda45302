//! Declaration of the calculations that every face offers.
