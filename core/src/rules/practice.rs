//! Figures people in the trade carry in their heads: no design values. The report says how far they lie off.

use crate::quantity::ConductorSize;

/// A current that common practice gives a conductor.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PracticeFigure {
    /// Amperes.
    pub amps: f64,
    /// What it is said of.
    pub words: &'static str,
}

/// Common practice, no source: size, temperature rating in °C, amperes, what it is said of.
const FIGURES: [(i8, f64, PracticeFigure); 3] = [
    (4, 75.0, PracticeFigure { amps: 85.0, words: "copper, 75 °C" }),
    (4, 105.0, PracticeFigure { amps: 150.0, words: "105 °C welding cable" }),
    (6, 105.0, PracticeFigure { amps: 115.0, words: "105 °C cable" }),
];

/// The figure of common practice for a conductor, if there is one. Never used for a decision.
///
/// ```
/// # use ampwright::{quantity::ConductorSize, rules::practice_figure};
/// let six = practice_figure(ConductorSize::awg(6)?, 105.0).map(|p| p.amps);
/// assert_eq!(six, Some(115.0));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn practice_figure(size: ConductorSize, rating_degC: f64) -> Option<PracticeFigure> {
    FIGURES
        .iter()
        .find(|(awg, rating, _)| ConductorSize::awg(*awg) == Ok(size) && *rating == rating_degC)
        .map(|(_, _, figure)| *figure)
}
