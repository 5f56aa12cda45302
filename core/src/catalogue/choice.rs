//! Inputs that are one of a few words: faces that know numbers only pass 0, 1, 2 ….

use crate::error::Allowed;

/// An enum that is an input of a calculation.
///
/// Codes are permanent: new variants come last.
pub trait Choice: Copy + 'static {
    /// The variants in the order of their codes; never empty.
    const ALL: &'static [Self];
    /// Their words, in the same order.
    const WORDS: &'static [&'static str];
    /// The variant of code 0.
    const FIRST: Self;

    /// The variant of a code; `None` for NaN, fractions and codes that do not exist.
    fn of_code(code: f64) -> Option<Self> {
        Self::ALL.iter().enumerate().find(|&(i, _)| i as f64 == code).map(|(_, &variant)| variant)
    }
}

/// The codes of a number of variants.
pub(crate) const fn codes(variants: usize) -> Allowed {
    // No list of words is that long.
    #[allow(clippy::cast_possible_truncation)]
    Allowed::Code(if variants > 255 { 255 } else { variants as u8 })
}
