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
