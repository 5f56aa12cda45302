//! Inputs that are one of a few words: faces that know numbers only pass 0, 1, 2 ….

/// An enum that is an input of a calculation.
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
