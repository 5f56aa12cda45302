//! Banks as far as wiring and charging limits need them.

/// Cell chemistry.
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
}

impl core::fmt::Display for Chemistry {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        f.write_str(self.word())
    }
}

impl core::str::FromStr for Chemistry {
    type Err = crate::error::Error;

    fn from_str(text: &str) -> Result<Self, Self::Err> {
        let word = text.trim();
        Self::ALL.into_iter().find(|chemistry| chemistry.word() == word).ok_or(
            crate::error::Error::UnknownWord {
                text: crate::error::Snippet::new(text),
                allowed: "flooded, agm, gel, lfp, nmc, nicd",
            },
        )
    }
}
