//! Ratings each family is made in, amperes.

use crate::citation::{Citation, Seen};

const fn recalled(document: &'static str, place: &'static str) -> Citation {
    Citation::new(document, place, Seen::Recalled)
}

/// Source of [`IEC_FUSE`].
pub(super) const IEC_FUSE_SOURCE: Citation = recalled("IEC 60269-1", "preferred rated currents");
/// Fuse-links of IEC 60269.
pub(super) const IEC_FUSE: [f64; 26] = [
    2.0, 4.0, 6.0, 8.0, 10.0, 12.0, 16.0, 20.0, 25.0, 32.0, 40.0, 50.0, 63.0, 80.0, 100.0, 125.0, 160.0,
    200.0, 250.0, 315.0, 400.0, 500.0, 630.0, 800.0, 1000.0, 1250.0,
];

/// Source of [`CLASS_T`]: 15 to 600 A were read on a page; one mark serves the list, so it is the lower one.
pub(super) const CLASS_T_SOURCE: Citation =
    recalled("NFPA 70-2023", "240.6(A), as far as UL 248-15 reaches; 15 to 600 A seen, the rest");
/// Class T: the standard ratings and the additional fuse ratings up to 1200 A.
pub(super) const CLASS_T: [f64; 34] = [
    1.0, 3.0, 6.0, 10.0, 15.0, 20.0, 25.0, 30.0, 35.0, 40.0, 45.0, 50.0, 60.0, 70.0, 80.0, 90.0, 100.0,
    110.0, 125.0, 150.0, 175.0, 200.0, 225.0, 250.0, 300.0, 350.0, 400.0, 450.0, 500.0, 600.0, 700.0, 800.0,
    1000.0, 1200.0,
];

/// Source of [`BLADE`].
pub(super) const BLADE_SOURCE: Citation = recalled("ISO 8820-3", "rated currents");
/// Blade fuse-links, small and large.
pub(super) const BLADE: [f64; 17] =
    [1.0, 2.0, 3.0, 4.0, 5.0, 7.5, 10.0, 15.0, 20.0, 25.0, 30.0, 35.0, 40.0, 50.0, 60.0, 70.0, 80.0];

/// Source of [`BOLTED_STRIP`].
pub(super) const BOLTED_STRIP_SOURCE: Citation = recalled("ISO 8820-5", "rated currents");
/// Bolted strip fuse-links, small and large.
pub(super) const BOLTED_STRIP: [f64; 18] = [
    30.0, 40.0, 50.0, 60.0, 70.0, 80.0, 100.0, 125.0, 150.0, 175.0, 200.0, 225.0, 250.0, 300.0, 350.0, 400.0,
    450.0, 500.0,
];

/// Source of [`MINIATURE`].
pub(super) const MINIATURE_SOURCE: Citation = recalled("IEC 60898-1", "preferred rated currents");
/// Breakers of IEC 60898.
pub(super) const MINIATURE: [f64; 14] =
    [6.0, 8.0, 10.0, 13.0, 16.0, 20.0, 25.0, 32.0, 40.0, 50.0, 63.0, 80.0, 100.0, 125.0];

/// Source of [`INDUSTRIAL`].
pub(super) const INDUSTRIAL_SOURCE: Citation = recalled("IEC 60059", "series R10, 16 to 1600 A");
/// Breakers of IEC 60947-2.
pub(super) const INDUSTRIAL: [f64; 21] = [
    16.0, 20.0, 25.0, 32.0, 40.0, 50.0, 63.0, 80.0, 100.0, 125.0, 160.0, 200.0, 250.0, 315.0, 400.0, 500.0,
    630.0, 800.0, 1000.0, 1250.0, 1600.0,
];

/// Source of [`MOLDED_CASE`]: as [`CLASS_T_SOURCE`].
pub(super) const MOLDED_CASE_SOURCE: Citation =
    recalled("NFPA 70-2023", "240.6(A), 15 to 1200 A; 15 to 600 A seen, the rest");
/// Breakers of UL 489.
pub(super) const MOLDED_CASE: [f64; 30] = [
    15.0, 20.0, 25.0, 30.0, 35.0, 40.0, 45.0, 50.0, 60.0, 70.0, 80.0, 90.0, 100.0, 110.0, 125.0, 150.0,
    175.0, 200.0, 225.0, 250.0, 300.0, 350.0, 400.0, 450.0, 500.0, 600.0, 700.0, 800.0, 1000.0, 1200.0,
];

/// Source of [`SUPPLEMENTARY`].
pub(super) const SUPPLEMENTARY_SOURCE: Citation =
    Citation::new("common practice, no source", "ratings of panel breakers", Seen::Practice);
/// Protectors of UL 1077: the standard fixes no ratings.
pub(super) const SUPPLEMENTARY: [f64; 13] =
    [1.0, 2.0, 3.0, 5.0, 7.5, 10.0, 15.0, 20.0, 25.0, 30.0, 40.0, 50.0, 60.0];
