//! A calculation on whole columns.
//!
//! Blocks of 256 rows: one loop without jumps computes a block and whether every row is valid, which compilers turn
//! into vector code. Only a block with a bad row is searched for it. A calculation whose formula can fail is done row by
//! row instead.

use core::fmt;

use super::{Calculation, Lane};
use crate::error::Error;

const BLOCK: usize = 256;

/// An error and the first row that has it.
#[derive(Clone, Copy, Debug, PartialEq, thiserror::Error)]
pub struct AtIndex {
    /// Row, from 0; `None` where the columns themselves do not fit.
    pub index: Option<usize>,
    /// What is wrong there.
    #[source]
    pub error: Error,
}

impl fmt::Display for AtIndex {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.index {
            Some(index) => write!(f, "row {index}: {}", self.error),
            None => self.error.fmt(f),
        }
    }
}

/// [`super::Entry::array`] of a calculation whose formula cannot fail.
#[allow(clippy::result_large_err, reason = "made once for whole columns")]
pub(crate) fn array<C: Lane<K, N>, const K: usize, const N: usize>(
    inputs: &[&[f64]],
    outputs: &mut [&mut [f64]],
) -> Result<(), AtIndex> {
    let Columns { inputs, outputs, rows } = Columns::<K, N>::fitting(inputs, outputs)?;
    let mut start = 0;
    while start < rows {
        let used = (rows - start).min(BLOCK);
        let block = inputs.map(|column| load(column, start));
        let (valid, results) = compute::<C, K, N>(&block);
        if !valid {
            // The rows behind the last repeat it, so the first bad row is a real one.
            for row in 0..used {
                if let Err(error) = C::one(at(&block, row)) {
                    return Err(AtIndex { index: Some(start + row), error });
                }
            }
        }
        for (column, result) in outputs.iter_mut().zip(&results) {
            for (to, from) in column.iter_mut().skip(start).zip(result.iter().take(used)) {
                *to = *from;
            }
        }
        start += BLOCK;
    }
    Ok(())
}

/// [`super::Entry::array`] of a calculation whose formula can fail.
#[allow(clippy::result_large_err, reason = "as `array`")]
pub(crate) fn array_by_row<C: Calculation<K, N>, const K: usize, const N: usize>(
    inputs: &[&[f64]],
    outputs: &mut [&mut [f64]],
) -> Result<(), AtIndex> {
    let Columns { inputs, outputs, rows } = Columns::<K, N>::fitting(inputs, outputs)?;
    for row in 0..rows {
        // A column of one value ends before the others and repeats it.
        let values = inputs.map(|column| column.get(row).or(column.last()).copied().unwrap_or(f64::NAN));
        let results = C::one(values).map_err(|error| AtIndex { index: Some(row), error })?;
        for (column, result) in outputs.iter_mut().zip(results) {
            if let Some(to) = column.get_mut(row) {
                *to = result;
            }
        }
    }
    Ok(())
}

/// Columns that fit a calculation and each other.
struct Columns<'a, 'b, const K: usize, const N: usize> {
    inputs: [&'a [f64]; K],
    outputs: &'a mut [&'b mut [f64]; N],
    rows: usize,
}

impl<'a, 'b, const K: usize, const N: usize> Columns<'a, 'b, K, N> {
    #[allow(clippy::result_large_err, reason = "as `array`")]
    fn fitting(inputs: &[&'a [f64]], outputs: &'a mut [&'b mut [f64]]) -> Result<Self, AtIndex> {
        let count =
            |what, given, needed| AtIndex { index: None, error: Error::WrongCount { what, given, needed } };
        let inputs = <[&[f64]; K]>::try_from(inputs).map_err(|_| count("inputs", inputs.len(), K))?;
        let given = outputs.len();
        let outputs = <&mut [&mut [f64]; N]>::try_from(outputs).map_err(|_| count("outputs", given, N))?;
        let rows = outputs.iter().map(|column| column.len()).next().unwrap_or(0);
        for column in outputs.iter() {
            if column.len() != rows {
                return Err(count("rows of an output", column.len(), rows));
            }
        }
        for column in &inputs {
            if column.len() != rows && column.len() != 1 {
                return Err(count("rows of an input", column.len(), rows));
            }
        }
        Ok(Self { inputs, outputs, rows })
    }
}

/// One block of a column; its last value fills the rest, a single value fills all.
fn load(column: &[f64], start: usize) -> [f64; BLOCK] {
    let start = if column.len() == 1 { 0 } else { start };
    let mut block = [column.last().copied().unwrap_or(f64::NAN); BLOCK];
    for (to, from) in block.iter_mut().zip(column.iter().skip(start)) {
        *to = *from;
    }
    block
}

fn compute<C: Lane<K, N>, const K: usize, const N: usize>(
    block: &[[f64; BLOCK]; K],
) -> (bool, [[f64; BLOCK]; N]) {
    let mut all = true;
    let mut results = [[0.0; BLOCK]; N];
    for row in 0..BLOCK {
        let (valid, values) = C::lane(at(block, row));
        all &= valid;
        for (column, value) in results.iter_mut().zip(values) {
            // Below BLOCK, the length of the array.
            #[allow(clippy::indexing_slicing)]
            {
                column[row] = value;
            }
        }
    }
    (all, results)
}

#[inline(always)]
#[allow(
    clippy::inline_always,
    reason = "the loop in `compute` becomes vector code only when this is part of it"
)]
fn at<const K: usize>(block: &[[f64; BLOCK]; K], row: usize) -> [f64; K] {
    // Callers pass rows below BLOCK, the length of the array.
    #[allow(clippy::indexing_slicing)]
    core::array::from_fn(|k| block[k][row])
}
