//! Tables of rule books: rows by size, columns by temperature or method, and correction factors by band.

use crate::citation::{Citation, Seen};
use crate::quantity::ConductorSize;

/// A printed value with its verification.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cell {
    /// The printed value.
    pub value: f64,
    /// Table, and whether this cell was seen.
    pub citation: Citation,
}

/// Head of an ampacity column.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Column {
    /// Name as printed: `75 °C`, `B1`.
    pub name: &'static str,
    /// Least insulation temperature rating that may use the column, °C.
    #[allow(non_snake_case)]
    pub rating_degC: f64,
    /// Whether the column's figures were seen.
    pub seen: Seen,
}

/// Ampacity by size and column.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct AmpacityTable {
    /// Name in `tests/reference`, and in messages.
    pub id: &'static str,
    /// Source.
    pub citation: Citation,
    /// Columns.
    pub columns: &'static [Column],
    /// Rows, smallest size first.
    pub rows: &'static [(ConductorSize, &'static [Option<f64>])],
    /// Single cells that were recalled although the column was seen: (row size, column name).
    pub recalled: &'static [(ConductorSize, &'static str)],
}

/// One band of a correction table: up to and including `upto`, `factor` applies.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Band {
    /// Upper end of the band, included.
    pub upto: f64,
    /// Factor, `None` where the table has none.
    pub factor: Option<f64>,
}
