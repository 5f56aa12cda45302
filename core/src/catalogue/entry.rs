//! What a face knows of a calculation at run time.

use crate::error::{Allowed, Error};

/// One calculation, as the faces see it: plain numbers in stated units.
#[derive(Clone, Copy, Debug)]
pub struct Entry {
    /// Name, the same in every face.
    pub name: &'static str,
    /// One sentence.
    pub summary: &'static str,
    /// Inputs, in order.
    pub inputs: &'static [Input],
    /// Outputs, in order.
    pub outputs: &'static [Output],
    /// What the inputs must fulfil together.
    pub conditions: &'static [&'static str],
    /// When it is refused, where conditions cannot say so.
    pub refusal: Option<&'static str>,
    /// The formula, in the trade's symbols.
    pub formula: &'static str,
    /// Where the formula comes from.
    pub source: &'static str,
    /// The calculation on plain numbers, one for each input and output.
    pub scalar: fn(&[f64], &mut [f64]) -> Result<(), Error>,
    /// The calculation on columns; a column of length 1 counts for all rows.
    ///
    /// On an error the outputs hold no result.
    #[cfg(feature = "std")]
    pub array: Array,
}

/// A calculation on columns: inputs, outputs.
#[cfg(feature = "std")]
pub type Array = fn(&[&[f64]], &mut [&mut [f64]]) -> Result<(), super::AtIndex>;

/// An input of a calculation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Input {
    /// Name without unit.
    pub name: &'static str,
    /// Symbol of its unit; empty for ratios and choices.
    pub unit: &'static str,
    /// Suffix of its name where it is a plain number: `mm2`, `ratio`.
    pub suffix: &'static str,
    /// What it is.
    pub doc: &'static str,
    /// Valid range, in `unit`.
    pub range: Allowed,
    /// Value that a face fills in where the caller gives none.
    pub default: Option<f64>,
    /// The words for the codes 0, 1, …; empty for numbers.
    pub choices: &'static [&'static str],
}

/// An output of a calculation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Output {
    /// Name without unit.
    pub name: &'static str,
    /// Symbol of its unit.
    pub unit: &'static str,
    /// Suffix of its name where it is a plain number.
    pub suffix: &'static str,
    /// What it is.
    pub doc: &'static str,
}

/// A calculation of `K` plain numbers to `N`.
#[doc(hidden)]
pub trait Calculation<const K: usize, const N: usize> {
    /// Checked, through the typed function.
    fn one(inputs: [f64; K]) -> Result<[f64; N], Error>;
}

/// A calculation whose formula cannot fail.
#[doc(hidden)]
pub trait Lane<const K: usize, const N: usize>: Calculation<K, N> {
    /// Whatever the inputs, without a jump; and whether `one` would succeed.
    fn lane(inputs: [f64; K]) -> (bool, [f64; N]);
}

/// [`Entry::scalar`] of a calculation.
#[doc(hidden)]
pub fn scalar<C: Calculation<K, N>, const K: usize, const N: usize>(
    inputs: &[f64],
    outputs: &mut [f64],
) -> Result<(), Error> {
    let count = |what, given, needed| Error::WrongCount { what, given, needed };
    let inputs = <[f64; K]>::try_from(inputs).map_err(|_| count("inputs", inputs.len(), K))?;
    let given = outputs.len();
    let outputs = <&mut [f64; N]>::try_from(outputs).map_err(|_| count("outputs", given, N))?;
    *outputs = C::one(inputs)?;
    Ok(())
}
