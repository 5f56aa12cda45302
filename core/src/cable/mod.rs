//! Conductors as things: sizes in stock, resistance, insulation, joints, lugs. No rule book.

mod conductor;
mod heat;
mod insulation;
mod joint;
mod lug;
mod resistance;
mod resistance_table;
pub(crate) mod series;
mod whole;

use crate::catalogue::Entry;

pub use conductor::{Class, Coating, Conductor, Material};
pub use heat::{ADIABATIC_K, AdiabaticK, AdiabaticRow, adiabatic_k, adiabatic_k_between};
pub use insulation::{Compound, Insulation};
pub use joint::{GENERIC_JOINT, JointKind, joint_heat, joint_resistance, rated_joint_resistance};
pub use lug::{Stud, lug_fits, terminal_takes};
pub use resistance::{
    ALUMINIUM_OHM_MM2_PER_M, ALUMINIUM_ZERO_degC, COPPER_ALPHA_75_PER_K, COPPER_CLAD_OHM_MM2_PER_M,
    COPPER_OHM_MM2_PER_M, COPPER_ZERO_degC, ResistanceSource, least_linear_resistance, linear_resistance,
    linear_resistance_with_source, resistivity,
};
pub use resistance_table::{
    CLASS_1, CLASS_2, CLASS_5, CLASS_6, ResistanceRow, ResistanceTable, TABLE_8_SOLID, TABLE_8_STRANDED,
};
pub use series::{AWG_SERIES, METRIC_SERIES};
pub use whole::{conductor_resistance, gauge_conductor_resistance, iec_conductor_resistance};

/// Every calculation of this room, by file.
pub const CATALOGUE: &[&[Entry]] = &[resistance::ENTRIES, whole::ENTRIES, joint::ENTRIES, heat::ENTRIES];
