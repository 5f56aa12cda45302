//! Tables of rule books: rows by size, columns by temperature or method, and correction factors by band.
//!
//! The printed figures and how each was verified; what a rule set asks of them stands in [`super::book`].

pub(super) use crate::cable::series::{awg, kcmil, mm2};
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
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
    /// Name as in `tests/reference`: `75C`, `B1`.
    pub name: &'static str,
    /// Least insulation temperature rating that may use the column, °C.
    pub rating_degC: f64,
    /// Whether the column's figures were seen.
    pub seen: Seen,
}

/// Ampacity by size and column, in amperes.
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
    /// What was recalled although the column was seen: a row's cell in the named column, or the whole row.
    pub recalled: &'static [(ConductorSize, Option<&'static str>)],
    /// Recalled cells that disagree with their derivation: size, column, and the lower value, which governs.
    pub lowered: &'static [(ConductorSize, &'static str, f64)],
    /// Where the table begins, for a size below its first row.
    pub begins: &'static str,
}

impl AmpacityTable {
    /// The row of a size: its own, or the largest whose metal area is not above the size's; `None` below the
    /// first row.
    ///
    /// ```
    /// use ampwright::quantity::ConductorSize;
    /// use ampwright::rules::Rules;
    /// let table = Rules::named("us")?.set().ampacity_tables[0];
    /// // 16 mm2 lies between 6 AWG (13.3 mm2) and 4 AWG (21.2 mm2).
    /// assert_eq!(table.row(ConductorSize::mm2(16.0)?), Some(ConductorSize::awg(6)?));
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn row(&self, size: ConductorSize) -> Option<ConductorSize> {
        if self.rows.iter().any(|(row, _)| *row == size) {
            return Some(size);
        }
        let area = size.area_mm2();
        self.rows.iter().rev().find(|(row, _)| row.area_mm2() <= area).map(|(row, _)| *row)
    }

    /// The figure of a row in the column at `index` with its verification, lowered where the derivation of a
    /// recalled figure gives less; `None` where the table is blank.
    ///
    /// ```
    /// use ampwright::citation::Seen;
    /// use ampwright::quantity::ConductorSize;
    /// use ampwright::rules::Rules;
    /// let table = Rules::named("us")?.set().ampacity_tables[0];
    /// let cell = table.cell(ConductorSize::awg(6)?, 1).ok_or("blank")?;
    /// assert_eq!((cell.value, cell.citation.seen), (65.0, Seen::Page));
    /// assert!(table.cell(ConductorSize::awg(18)?, 1).is_none());
    /// # Ok::<(), Box<dyn core::error::Error>>(())
    /// ```
    pub fn cell(&self, row: ConductorSize, index: usize) -> Option<Cell> {
        let column = self.columns.get(index)?;
        let printed = self.printed(row, index)?;
        let lowered = self.lowered.iter().find(|(size, name, _)| *size == row && *name == column.name);
        Some(Cell {
            value: lowered.map_or(printed.value, |(_, _, lower)| lower.min(printed.value)),
            citation: printed.citation,
        })
    }

    /// The figure as printed, without [`AmpacityTable::lowered`].
    ///
    /// ```
    /// use ampwright::quantity::ConductorSize;
    /// use ampwright::rules::Rules;
    /// let table = Rules::named("craft_iso")?.set().ampacity_tables[0];
    /// let (size, column) = (ConductorSize::mm2(50.0)?, 1);
    /// assert_eq!(table.printed(size, column).ok_or("blank")?.value, 210.0);
    /// // The neighbouring column and the temperatures alone give less: that governs.
    /// assert_eq!(table.cell(size, column).ok_or("blank")?.value, 196.1);
    /// # Ok::<(), Box<dyn core::error::Error>>(())
    /// ```
    pub fn printed(&self, row: ConductorSize, index: usize) -> Option<Cell> {
        let column = self.columns.get(index)?;
        let (_, cells) = self.rows.iter().find(|(size, _)| *size == row)?;
        let value = (*cells.get(index)?)?;
        let recalled = column.seen == Seen::Recalled
            || self.recalled.iter().any(|(size, name)| *size == row && name.is_none_or(|n| n == column.name));
        let citation = if recalled { self.citation.recalled() } else { self.citation };
        Some(Cell { value, citation })
    }
}

/// Head of a factor column.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FactorColumn {
    /// Name as in `tests/reference`.
    pub name: &'static str,
    /// Conductor temperature the column belongs to, °C; 0 where it belongs to all.
    pub rating_degC: f64,
    /// Whether the column's figures were seen.
    pub seen: Seen,
    /// Where the column ends, for the message beyond it; empty where the last factor holds for all that follows.
    pub end: &'static str,
}

/// One band of a correction table: up to and including `upto`, above the band before it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Band {
    /// Upper end of the band, included; infinite in a last band without end.
    pub upto: f64,
    /// Factor of each column, `None` where the table has none.
    pub factors: &'static [Option<f64>],
}

/// Correction factors by band of temperature or number.
///
/// Between two rows nothing is interpolated: the row of the band's upper end holds. Below the first row the
/// first row holds.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FactorTable {
    /// Name in `tests/reference`, and in messages.
    pub id: &'static str,
    /// Source.
    pub citation: Citation,
    /// What the bands measure, as messages name it: `ambient`.
    pub what: &'static str,
    /// Its unit.
    pub unit: &'static str,
    /// What to do beyond the end.
    pub remedy: &'static str,
    /// Columns.
    pub columns: &'static [FactorColumn],
    /// Bands, lowest first.
    pub bands: &'static [Band],
    /// Single cells that were recalled although the column was seen: upper end of the band, column.
    pub recalled: &'static [(f64, &'static str)],
}

impl FactorTable {
    /// The factor at a value in the column at `index`, with its verification.
    ///
    /// # Errors
    /// [`Error::TableEnds`] beyond the column's last figure; [`Error::OutOfRange`] for NaN or infinity;
    /// [`Error::NotTabulated`] where there is no such column.
    ///
    /// ```
    /// use ampwright::rules::Rules;
    /// // IEC 60364-5-52, Table B.52.14, PVC: 42 °C takes the 45 °C row.
    /// let table = Rules::named("iec")?.set().factor_tables[0];
    /// assert_eq!(table.factor(0, 42.0)?.value, 0.79);
    /// assert_eq!(
    ///     table.factor(0, 65.0).unwrap_err().to_string(),
    ///     "ambient is 65 degC; the table (IEC 60364-5-52:2009, Table B.52.14) ends at 60 degC for PVC; \
    ///      choose insulation rated higher"
    /// );
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn factor(&self, index: usize, value: f64) -> Result<Cell, Error> {
        if !value.is_finite() {
            let (name, unit) = (self.what, self.unit);
            return Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Finite });
        }
        let Some(column) = self.columns.get(index) else {
            return Err(Error::NotTabulated { what: self.what, table: self.citation, remedy: self.remedy });
        };
        let filled = |band: &&Band| band.factors.get(index).copied().flatten().is_some();
        let band = self.bands.iter().filter(filled).find(|band| value <= band.upto);
        // A column that ends open keeps its last factor.
        let band = match band {
            None if column.end.is_empty() => self.bands.iter().rfind(filled),
            found => found,
        };
        let factor = band.and_then(|b| Some((b.upto, b.factors.get(index).copied().flatten()?)));
        match factor {
            Some((upto, factor)) => Ok(Cell { value: factor, citation: self.cited(column, upto) }),
            None => Err(Error::TableEnds {
                what: self.what,
                value,
                unit: self.unit,
                table: self.citation,
                end: column.end,
                remedy: self.remedy,
            }),
        }
    }

    /// Index of the column for a conductor temperature.
    pub(super) fn column(&self, rating: f64) -> Option<usize> {
        self.columns.iter().position(|c| c.rating_degC == rating || c.rating_degC == 0.0)
    }

    fn cited(&self, column: &FactorColumn, upto: f64) -> Citation {
        let recalled = column.seen == Seen::Recalled
            || self.recalled.iter().any(|(row, name)| *row == upto && *name == column.name);
        if recalled { self.citation.recalled() } else { self.citation }
    }
}

pub(super) const fn column(name: &'static str, rating: f64, seen: Seen) -> Column {
    Column { name, rating_degC: rating, seen }
}

/// Figures of one row; `_` is a blank cell.
macro_rules! figures {
    (@ _) => { None };
    (@ $figure:literal) => { Some($figure) };
    ($($figure:tt)*) => { &[$($crate::rules::table::figures!(@ $figure)),*] };
}
pub(super) use figures;
