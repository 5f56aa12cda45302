//! What the standards say of each family, one entry a family.
//!
//! Instantaneous bands of IEC 60898-3 recalled; equal to `iec-60898-3-dc-trip-bands` in
//! `tests/reference/protection.toml` (tested there). DC voltages and breaking capacities are never taken from the
//! family: they must be stated on the device.

use super::conventional;
use super::family::{Family, FamilyData};
use super::rating;
use crate::citation::{Citation, Seen};

const fn recalled(document: &'static str, place: &'static str) -> Citation {
    Citation::new(document, place, Seen::Recalled)
}

/// Eight tenths for continuous load: what every rule of the trade falls back on where nothing else is marked.
const EIGHT_TENTHS: Citation = Citation::new("NFPA 70-2023", "210.20(A) and 215.3, 1/1.25", Seen::Page);
const VEHICLE_EIGHT_TENTHS: Citation =
    Citation::new("common practice, no source", "vehicle fuse-links up to 80 % for hours", Seen::Practice);
/// Rated current as the current carried without limit of time; definition common to fuses and breakers.
const RATED_CONTINUOUSLY_FUSE: Citation = recalled("IEC 60269-1", "rated current of a fuse-link");
const RATED_CONTINUOUSLY_MINIATURE: Citation = recalled("IEC 60898-3", "rated current, uninterrupted duty");
const RATED_CONTINUOUSLY_INDUSTRIAL: Citation = recalled("IEC 60947-2", "rated current, uninterrupted duty");

/// Trip bands on DC; the AC bands of IEC 60898-1 (B 3 … 5, C 5 … 10) do not hold on DC.
const DC_TYPE_B: Option<(f64, f64)> = Some((4.0, 7.0));
const DC_TYPE_C: Option<(f64, f64)> = Some((7.0, 15.0));

pub(super) static GG: FamilyData = FamilyData {
    family: Family::Gg,
    word: "gG",
    is_fuse: true,
    overload: true,
    continuous_ratio: 1.0,
    continuous_source: RATED_CONTINUOUSLY_FUSE,
    conventional: &conventional::GG,
    instantaneous: None,
    ratings_A: &rating::IEC_FUSE,
    ratings_source: rating::IEC_FUSE_SOURCE,
    source: recalled("IEC 60269-2", "utilisation category gG"),
};

pub(super) static GPV: FamilyData = FamilyData {
    family: Family::Gpv,
    word: "gPV",
    is_fuse: true,
    overload: true,
    continuous_ratio: 1.0,
    continuous_source: RATED_CONTINUOUSLY_FUSE,
    conventional: &conventional::GPV,
    instantaneous: None,
    ratings_A: &rating::IEC_FUSE,
    ratings_source: rating::IEC_FUSE_SOURCE,
    source: recalled("IEC 60269-6", "utilisation category gPV"),
};

pub(super) static AR: FamilyData = FamilyData {
    family: Family::Ar,
    word: "aR",
    is_fuse: true,
    overload: false,
    continuous_ratio: 1.0,
    continuous_source: RATED_CONTINUOUSLY_FUSE,
    conventional: &[],
    instantaneous: None,
    ratings_A: &rating::IEC_FUSE,
    ratings_source: rating::IEC_FUSE_SOURCE,
    source: recalled("IEC 60269-4", "utilisation category aR"),
};

pub(super) static CLASS_T: FamilyData = FamilyData {
    family: Family::ClassT,
    word: "class T",
    is_fuse: true,
    overload: true,
    continuous_ratio: 0.8,
    continuous_source: EIGHT_TENTHS,
    conventional: &conventional::CLASS_T,
    instantaneous: None,
    ratings_A: &rating::CLASS_T,
    ratings_source: rating::CLASS_T_SOURCE,
    source: recalled("UL 248-15", ""),
};

pub(super) static BLADE: FamilyData = FamilyData {
    family: Family::Blade,
    word: "blade",
    is_fuse: true,
    overload: true,
    continuous_ratio: 0.8,
    continuous_source: VEHICLE_EIGHT_TENTHS,
    conventional: &conventional::BLADE,
    instantaneous: None,
    ratings_A: &rating::BLADE,
    ratings_source: rating::BLADE_SOURCE,
    source: recalled("ISO 8820-3", ""),
};

pub(super) static BOLTED_STRIP: FamilyData = FamilyData {
    family: Family::BoltedStrip,
    word: "bolted strip",
    is_fuse: true,
    overload: true,
    continuous_ratio: 0.8,
    continuous_source: VEHICLE_EIGHT_TENTHS,
    // Strip fuse-links sold for the same studs differ widely in when they open (R5): none is held.
    conventional: &[],
    instantaneous: None,
    ratings_A: &rating::BOLTED_STRIP,
    ratings_source: rating::BOLTED_STRIP_SOURCE,
    source: recalled("ISO 8820-5", ""),
};

pub(super) static MINIATURE_B: FamilyData = FamilyData {
    family: Family::MiniatureB,
    word: "miniature B",
    is_fuse: false,
    overload: true,
    continuous_ratio: 1.0,
    continuous_source: RATED_CONTINUOUSLY_MINIATURE,
    conventional: &conventional::MINIATURE,
    instantaneous: DC_TYPE_B,
    ratings_A: &rating::MINIATURE,
    ratings_source: rating::MINIATURE_SOURCE,
    source: recalled("IEC 60898-3", "type B on DC"),
};

pub(super) static MINIATURE_C: FamilyData = FamilyData {
    family: Family::MiniatureC,
    word: "miniature C",
    is_fuse: false,
    overload: true,
    continuous_ratio: 1.0,
    continuous_source: RATED_CONTINUOUSLY_MINIATURE,
    conventional: &conventional::MINIATURE,
    instantaneous: DC_TYPE_C,
    ratings_A: &rating::MINIATURE,
    ratings_source: rating::MINIATURE_SOURCE,
    source: recalled("IEC 60898-3", "type C on DC"),
};

pub(super) static INDUSTRIAL: FamilyData = FamilyData {
    family: Family::Industrial,
    word: "industrial",
    is_fuse: false,
    overload: true,
    continuous_ratio: 1.0,
    continuous_source: RATED_CONTINUOUSLY_INDUSTRIAL,
    conventional: &conventional::INDUSTRIAL,
    // Its instantaneous release is set by the maker or the user, within ± 20 % of the setting.
    instantaneous: None,
    ratings_A: &rating::INDUSTRIAL,
    ratings_source: rating::INDUSTRIAL_SOURCE,
    source: recalled("IEC 60947-2", ""),
};

pub(super) static MOLDED_CASE: FamilyData = FamilyData {
    family: Family::MoldedCase,
    word: "molded case",
    is_fuse: false,
    overload: true,
    continuous_ratio: 0.8,
    continuous_source: EIGHT_TENTHS,
    conventional: &conventional::MOLDED_CASE,
    instantaneous: None,
    ratings_A: &rating::MOLDED_CASE,
    ratings_source: rating::MOLDED_CASE_SOURCE,
    source: recalled("UL 489", ""),
};

pub(super) static SUPPLEMENTARY: FamilyData = FamilyData {
    family: Family::Supplementary,
    word: "supplementary",
    is_fuse: false,
    overload: true,
    continuous_ratio: 0.8,
    continuous_source: EIGHT_TENTHS,
    // UL 1077 lets the maker declare when a protector trips: none is held.
    conventional: &[],
    instantaneous: None,
    ratings_A: &rating::SUPPLEMENTARY,
    ratings_source: rating::SUPPLEMENTARY_SOURCE,
    source: recalled("UL 1077", ""),
};
