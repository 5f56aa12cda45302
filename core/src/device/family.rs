//! Device families by open standard.

use crate::citation::Citation;
use crate::quantity::{ElectricCurrent, ElectricPotential};

/// Family of overcurrent device, by the standard it is made to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Family {
    /// General-purpose fuse-link, IEC 60269-2.
    Gg,
    /// Photovoltaic fuse-link, IEC 60269-6.
    Gpv,
    /// Semiconductor fuse-link, partial range, IEC 60269-4: short-circuit only.
    Ar,
    /// Class T fuse, UL 248-15.
    ClassT,
    /// Blade fuse-link for road vehicles, ISO 8820-3.
    Blade,
    /// Bolted strip fuse-link, ISO 8820-5.
    BoltedStrip,
    /// Circuit breaker for DC, IEC 60898-3, type B.
    MiniatureB,
    /// Circuit breaker for DC, IEC 60898-3, type C.
    MiniatureC,
    /// Circuit breaker, IEC 60947-2.
    Industrial,
    /// Molded-case circuit breaker, UL 489.
    MoldedCase,
    /// Supplementary protector, UL 1077.
    Supplementary,
}

/// Whether the device depends on the direction of current.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Polarity {
    /// Works in both directions.
    None,
    /// Marked + and −: must not be reversed, nor used where current can reverse.
    Marked,
}

/// What supply a device is rated for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Supply {
    /// Rated for DC up to this voltage (whole device, poles as wired).
    Dc(ElectricPotential),
    /// Rated for AC only: refused on DC (R6).
    AcOnly,
    /// Not stated.
    NotStated,
}

/// What a family's standard says of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FamilyData {
    /// The family.
    pub family: Family,
    /// Word in site files: `gG`, `class T`.
    pub word: &'static str,
    /// Fuse (true) or breaker.
    pub is_fuse: bool,
    /// Protects against overload as well as short-circuit.
    pub overload: bool,
    /// Part of the rating it carries for hours: 0.8, or 1.0 where its standard tests at 100 %.
    pub continuous_ratio: f64,
    /// Standard.
    pub source: Citation,
}

impl Family {
    /// What the family's standard says.
    pub fn data(self) -> &'static FamilyData {
        unimplemented!("family data: {self:?}")
    }
    /// Upper conventional current (it has operated within the conventional time), × rating; `None` where the
    /// family does not operate on overload at all.
    pub fn operating_ratio(self, rating: ElectricCurrent) -> Option<f64> { let _ = rating; None }
    /// Lower conventional current (it must not operate), × rating.
    pub fn non_operating_ratio(self, rating: ElectricCurrent) -> Option<f64> { let _ = rating; None }
    /// Upper edge of the instantaneous trip on DC, × rating; `None` for fuses and where the standard fixes none.
    pub fn instantaneous_ratio(self) -> Option<f64> { None }
    /// Ratings the family is made in, in ascending order, amperes.
    #[allow(non_snake_case)]
    pub fn ratings_A(self) -> &'static [f64] { &[] }
    /// All families, for lists and errors.
    pub const ALL: [Family; 11] = [Self::Gg, Self::Gpv, Self::Ar, Self::ClassT, Self::Blade, Self::BoltedStrip,
        Self::MiniatureB, Self::MiniatureC, Self::Industrial, Self::MoldedCase, Self::Supplementary];
}

/// One overcurrent device as chosen or found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Device {
    /// Family.
    pub family: Family,
    /// Rated current.
    pub rating: ElectricCurrent,
    /// Supply it is rated for.
    pub supply: Supply,
    /// Interrupting rating (breaking capacity) at that voltage on DC, if stated.
    pub breaking: Option<ElectricCurrent>,
    /// Polarity.
    pub polarity: Polarity,
    /// Stated to carry 100 % of its rating continuously, beyond what the family gives.
    pub full_rated: bool,
}
