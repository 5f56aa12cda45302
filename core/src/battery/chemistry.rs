//! Cell chemistry and its nominal voltage.

use core::fmt;
use core::str::FromStr;

use uom::si::electric_potential::volt;

use crate::catalogue::Choice;
use crate::error::{Error, Snippet};
use crate::quantity::ElectricPotential;

/// Cell chemistry.
///
/// ```
/// # use ampwright::battery::Chemistry;
/// assert_eq!("lfp".parse::<Chemistry>()?, Chemistry::Lfp);
/// assert_eq!(Chemistry::NickelCadmium.to_string(), "nicd");
/// # Ok::<(), ampwright::Error>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Chemistry {
    /// Vented (flooded) lead-acid.
    Flooded,
    /// Valve-regulated lead-acid, absorbed glass mat.
    Agm,
    /// Valve-regulated lead-acid, gelled.
    Gel,
    /// Lithium iron phosphate.
    Lfp,
    /// Lithium nickel manganese cobalt.
    Nmc,
    /// Nickel-cadmium.
    NickelCadmium,
}

impl Chemistry {
    /// All chemistries.
    pub const ALL: [Self; 6] =
        [Self::Flooded, Self::Agm, Self::Gel, Self::Lfp, Self::Nmc, Self::NickelCadmium];

    /// Word in site files.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Flooded => "flooded",
            Self::Agm => "agm",
            Self::Gel => "gel",
            Self::Lfp => "lfp",
            Self::Nmc => "nmc",
            Self::NickelCadmium => "nicd",
        }
    }

    /// Nominal voltage of one cell: a label, not a measured value. Source: usual designations; recalled.
    pub fn nominal_cell(self) -> ElectricPotential {
        ElectricPotential::new::<volt>(match self {
            Self::Flooded | Self::Agm | Self::Gel => 2.0,
            Self::Lfp => 3.2,
            Self::Nmc => 3.6,
            Self::NickelCadmium => 1.2,
        })
    }

    /// Lead and sulphuric acid, vented or valve-regulated.
    pub const fn is_lead_acid(self) -> bool {
        matches!(self, Self::Flooded | Self::Agm | Self::Gel)
    }
}

impl Choice for Chemistry {
    const ALL: &'static [Self] = &Self::ALL;
    const WORDS: &'static [&'static str] = &[
        Self::Flooded.word(),
        Self::Agm.word(),
        Self::Gel.word(),
        Self::Lfp.word(),
        Self::Nmc.word(),
        Self::NickelCadmium.word(),
    ];
    const FIRST: Self = Self::Flooded;
}

impl fmt::Display for Chemistry {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.word())
    }
}

impl FromStr for Chemistry {
    type Err = Error;

    fn from_str(text: &str) -> Result<Self, Error> {
        let word = text.trim();
        Self::ALL.into_iter().find(|chemistry| chemistry.word() == word).ok_or(Error::UnknownWord {
            text: Snippet::new(text),
            allowed: "flooded, agm, gel, lfp, nmc, nicd",
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn codes_and_words_keep_one_order() {
        assert!(Chemistry::ALL.map(Chemistry::word).iter().eq(<Chemistry as Choice>::WORDS));
        assert_eq!(<Chemistry as Choice>::ALL[0], Chemistry::FIRST);
    }
}
