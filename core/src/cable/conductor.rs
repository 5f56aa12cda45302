//! One conductor: metal, stranding, coating, size, insulation.

use super::Insulation;
use crate::catalogue::Choice;
use crate::quantity::ConductorSize;

/// Metal of the conductor.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Material {
    /// Copper.
    Copper,
    /// Aluminium.
    Aluminium,
    /// Aluminium with a copper skin: refused everywhere (R18).
    CopperCladAluminium,
}

/// Stranding after IEC 60228.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Class {
    /// Class 1: solid.
    Solid,
    /// Class 2: stranded, for fixed wiring.
    Stranded,
    /// Class 5: flexible.
    Flexible,
    /// Class 6: extra flexible (welding and moving cables).
    ExtraFlexible,
}

/// Surface of the strands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Coating {
    /// Plain copper.
    Plain,
    /// Tinned or otherwise metal-coated.
    Tinned,
}

/// One insulated conductor.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Conductor {
    /// Size as designated.
    pub size: ConductorSize,
    /// Metal.
    pub material: Material,
    /// Stranding.
    pub class: Class,
    /// Plain or tinned.
    pub coating: Coating,
    /// Insulation with its temperature rating.
    pub insulation: Insulation,
}

impl Conductor {
    /// Plain copper of class 5, the usual conductor of this trade. Change the fields that differ.
    ///
    /// # Example
    /// ```
    /// # use ampwright::cable::{Coating, Conductor};
    /// let cable = Conductor::flexible_copper("16 mm2".parse()?, "PVC 70 degC".parse()?);
    /// let tinned = Conductor { coating: Coating::Tinned, ..cable };
    /// assert_eq!(tinned.size.to_string(), "16 mm2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub const fn flexible_copper(size: ConductorSize, insulation: Insulation) -> Self {
        Self { size, material: Material::Copper, class: Class::Flexible, coating: Coating::Plain, insulation }
    }
}

impl Choice for Material {
    const ALL: &'static [Self] = &[Self::Copper, Self::Aluminium, Self::CopperCladAluminium];
    const WORDS: &'static [&'static str] = &["copper", "aluminium", "copper_clad_aluminium"];
    const FIRST: Self = Self::Copper;
}

impl Choice for Class {
    const ALL: &'static [Self] = &[Self::Solid, Self::Stranded, Self::Flexible, Self::ExtraFlexible];
    const WORDS: &'static [&'static str] = &["class_1", "class_2", "class_5", "class_6"];
    const FIRST: Self = Self::Solid;
}

impl Choice for Coating {
    const ALL: &'static [Self] = &[Self::Plain, Self::Tinned];
    const WORDS: &'static [&'static str] = &["plain", "tinned"];
    const FIRST: Self = Self::Plain;
}
