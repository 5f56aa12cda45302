//! Conventional currents: what a device must carry, and what it must open on, within the conventional time.

use crate::citation::{Citation, Seen};

/// Where a band of ratings begins, amperes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Start {
    /// Above this rating.
    Above(f64),
    /// At this rating.
    At(f64),
}

/// Conventional currents of one band of ratings; it ends where the next begins.
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct Band {
    /// Where it begins.
    pub start: Start,
    /// Greatest rating it holds for, amperes, where no band follows; infinite if there is none.
    pub most_A: f64,
    /// It must not operate at this multiple of its rating.
    pub non_operating_ratio: f64,
    /// It must have operated at this multiple of its rating.
    pub operating_ratio: f64,
    /// Conventional time, hours.
    pub time_h: f64,
    /// Source of the operating multiple, which is what protects.
    pub source: Citation,
}

/// The band a rating lies in; `None` for a rating that is not positive or beyond the last band.
pub(super) fn band_of(bands: &'static [Band], amperes: f64) -> Option<&'static Band> {
    bands
        .iter()
        .rfind(|band| match band.start {
            Start::Above(least) => amperes > least,
            Start::At(least) => amperes >= least,
        })
        .filter(|band| amperes <= band.most_A)
}

/// A band without upper end of its own.
const fn band(start: Start, ratios: (f64, f64), time_h: f64, source: Citation) -> Band {
    Band { start, most_A: f64::MAX, non_operating_ratio: ratios.0, operating_ratio: ratios.1, time_h, source }
}

/// Operating factors read on a page; non-operating factors and the times above 160 A recalled.
const GG_SOURCE: Citation = Citation::new("IEC 60269-1", "conventional currents of gG", Seen::Page);
const GPV_SOURCE: Citation = Citation::new("IEC 60269-6", "conventional currents of gPV", Seen::Recalled);
const MINIATURE_SOURCE: Citation = Citation::new("IEC 60898-1", "conventional currents", Seen::Page);
const INDUSTRIAL_SOURCE: Citation = Citation::new("IEC 60947-2", "conventional currents", Seen::Page);
const CLASS_T_SOURCE: Citation =
    Citation::new("UL 248-1 and UL 248-15", "110 % and 135 % tests", Seen::Recalled);
const BLADE_SOURCE: Citation =
    Citation::new("ISO 8820-3", "operating times at 110 % and 135 %", Seen::Recalled);
const MOLDED_CASE_SOURCE: Citation = Citation::new("UL 489", "100 % and 135 % tests", Seen::Recalled);

/// gG: equal to `iec-60269-gg-conventional` in `tests/reference/protection.toml` (tested there).
pub(super) const GG: [Band; 6] = [
    //   In, A               × In non-operating, operating; h
    band(Start::Above(0.0), (1.5, 2.1), 1.0, GG_SOURCE),
    band(Start::Above(4.0), (1.5, 1.9), 1.0, GG_SOURCE),
    band(Start::At(16.0), (1.25, 1.6), 1.0, GG_SOURCE),
    band(Start::Above(63.0), (1.25, 1.6), 2.0, GG_SOURCE),
    band(Start::Above(160.0), (1.25, 1.6), 3.0, GG_SOURCE),
    band(Start::Above(400.0), (1.25, 1.6), 4.0, GG_SOURCE),
];

/// gPV: equal to `iec-60269-gpv-conventional` in `tests/reference/protection.toml` (tested there).
pub(super) const GPV: [Band; 4] = [
    band(Start::Above(0.0), (1.13, 1.45), 1.0, GPV_SOURCE),
    band(Start::Above(63.0), (1.13, 1.45), 2.0, GPV_SOURCE),
    band(Start::Above(160.0), (1.13, 1.45), 3.0, GPV_SOURCE),
    band(Start::Above(400.0), (1.13, 1.45), 4.0, GPV_SOURCE),
];

/// Breakers of IEC 60898: equal to `iec-breaker-conventional-currents` in `tests/reference/protection.toml`.
pub(super) const MINIATURE: [Band; 2] = [
    band(Start::Above(0.0), (1.13, 1.45), 1.0, MINIATURE_SOURCE),
    band(Start::Above(63.0), (1.13, 1.45), 2.0, MINIATURE_SOURCE),
];

/// Breakers of IEC 60947-2: equal to `iec-breaker-conventional-currents` in `tests/reference/protection.toml`.
pub(super) const INDUSTRIAL: [Band; 2] = [
    band(Start::Above(0.0), (1.05, 1.3), 1.0, INDUSTRIAL_SOURCE),
    band(Start::Above(63.0), (1.05, 1.3), 2.0, INDUSTRIAL_SOURCE),
];

/// Class T up to 600 A; above, other tests hold that are not recalled with certainty.
pub(super) const CLASS_T: [Band; 2] = [
    band(Start::Above(0.0), (1.1, 1.35), 1.0, CLASS_T_SOURCE),
    Band { most_A: 600.0, ..band(Start::Above(60.0), (1.1, 1.35), 2.0, CLASS_T_SOURCE) },
];

/// Blade fuse-links open at 135 % within half an hour at most, whichever type of blade.
pub(super) const BLADE: [Band; 1] = [band(Start::Above(0.0), (1.1, 1.35), 0.5, BLADE_SOURCE)];

/// Breakers of UL 489.
pub(super) const MOLDED_CASE: [Band; 2] = [
    band(Start::Above(0.0), (1.0, 1.35), 1.0, MOLDED_CASE_SOURCE),
    band(Start::Above(50.0), (1.0, 1.35), 2.0, MOLDED_CASE_SOURCE),
];

#[cfg(test)]
mod tests {
    use super::*;

    fn operating(bands: &'static [Band], amperes: f64) -> Option<(f64, f64)> {
        band_of(bands, amperes).map(|b| (b.operating_ratio, b.time_h))
    }

    #[test]
    fn edges_of_gg_bands_belong_where_the_standard_puts_them() {
        assert_eq!(operating(&GG, 4.0), Some((2.1, 1.0)));
        assert_eq!(operating(&GG, 4.0f64.next_up()), Some((1.9, 1.0)));
        assert_eq!(operating(&GG, 16.0f64.next_down()), Some((1.9, 1.0)));
        assert_eq!(operating(&GG, 16.0), Some((1.6, 1.0)));
        assert_eq!(operating(&GG, 63.0), Some((1.6, 1.0)));
        assert_eq!(operating(&GG, 80.0), Some((1.6, 2.0)));
        assert_eq!(operating(&GG, 160.0), Some((1.6, 2.0)));
        assert_eq!(operating(&GG, 400.0), Some((1.6, 3.0)));
        assert_eq!(operating(&GG, 500.0), Some((1.6, 4.0)));
    }

    #[test]
    fn class_t_ends_at_600_amperes() {
        assert_eq!(operating(&CLASS_T, 60.0), Some((1.35, 1.0)));
        assert_eq!(operating(&CLASS_T, 600.0), Some((1.35, 2.0)));
        assert_eq!(operating(&CLASS_T, 700.0), None);
    }

    #[test]
    fn odd_ratings_have_no_band() {
        for amperes in [0.0, -0.0, -5.0, f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
            assert_eq!(operating(&GG, amperes), None, "{amperes}");
        }
    }
}
