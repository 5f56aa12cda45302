//! Lugs and studs: which lug fits which stud and conductor.

/// Metric stud or bolt, by its nominal diameter in millimetres (M8 is 8).
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Stud(pub u8);

/// Whether a lug made for one stud goes over another.
pub fn lug_fits(lug: Stud, stud: Stud) -> bool { lug.0 == stud.0 }
