//! Conductors as things: sizes in stock, resistance, insulation, joints, lugs. No rule book.

mod conductor;
mod insulation;
mod joint;
mod lug;
mod resistance;
mod series;

pub use conductor::{Class, Coating, Conductor, Material};
pub use insulation::{Compound, Insulation};
pub use joint::{JointKind, joint_resistance};
pub use lug::{Stud, lug_fits};
pub use resistance::{ResistanceSource, linear_resistance, linear_resistance_with_source};
pub use series::{AWG_SERIES, METRIC_SERIES};
