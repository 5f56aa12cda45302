//! Designs or inspects a site and prints the report.
fn main() {}
