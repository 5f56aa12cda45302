//! The single-diode curve through the four points of a sheet.
//!
//! For a thermal voltage and a series resistance, the other three parameters are linear in the conditions at short
//! circuit, open circuit and maximum power. The series resistance follows from the slope at maximum power by halving, and
//! the ideality is 1.2, or as much less as keeps the shunt from feeding power.

use super::diode::SingleDiode;
use crate::error::Error;

/// Ideality that is sought for crystalline silicon. Common practice, no source.
pub(super) const IDEALITY: f64 = 1.2;
/// Halvings: far more than the bits of a number.
const HALVINGS: u32 = 80;

/// Key points in V and A.
#[derive(Clone, Copy)]
pub(super) struct Points {
    pub voc: f64,
    pub isc: f64,
    pub vmp: f64,
    pub imp: f64,
}

/// The curve of a thermal voltage through the points, if there is one with a shunt that does not feed power.
pub(super) fn with_thermal(points: Points, thermal: f64) -> Option<SingleDiode> {
    let trial = |series| {
        let curve = through(points, thermal, series)?;
        Some((curve, steepness(&curve, points)?))
    };
    // Lower slope at maximum power than −Imp/Vmp on the left, higher on the right.
    let (mut low, mut high) = (0.0, (points.voc - points.vmp) / points.imp);
    let (mut found, first) = trial(low)?;
    if first > 0.0 {
        return None;
    }
    for _ in 0..HALVINGS {
        let middle = 0.5 * (low + high);
        if middle <= low || middle >= high {
            break;
        }
        match trial(middle) {
            Some((curve, rest)) if rest <= 0.0 => {
                low = middle;
                found = curve;
            }
            _ => high = middle,
        }
    }
    let settled = trial(low).is_some_and(|(_, rest)| rest.abs() <= 1e-6 * points.imp / points.vmp);
    (settled && found.leak >= 0.0 && found.saturation > 0.0 && found.photo > 0.0).then_some(found)
}

/// The curve with the sought thermal voltage, or with the greatest below it that is possible.
pub(super) fn greatest(points: Points, sought: f64) -> Result<SingleDiode, Error> {
    if let Some(curve) = with_thermal(points, sought) {
        return Ok(curve);
    }
    // Possible below, impossible above: the edge lies between.
    let mut low = sought;
    let mut best = None;
    for _ in 0..8 {
        low *= 0.7;
        best = with_thermal(points, low);
        if best.is_some() {
            break;
        }
    }
    let Some(mut best) = best else {
        return Err(Error::Contradiction {
            name: "vmp",
            value: points.vmp,
            unit: "V",
            why: "no curve of a diode passes through it with imp, voc and isc; look for a misprint",
        });
    };
    let mut high = low / 0.7;
    for _ in 0..24 {
        let middle = 0.5 * (low + high);
        match with_thermal(points, middle) {
            Some(curve) => {
                low = middle;
                best = curve;
            }
            None => high = middle,
        }
    }
    Ok(best)
}

/// Slope −dI/dV at maximum power less Imp/Vmp.
fn steepness(curve: &SingleDiode, points: Points) -> Option<f64> {
    let u = points.vmp + points.imp * curve.series;
    let s = curve.saturation / curve.thermal * libm::exp(u / curve.thermal) + curve.leak;
    let slope = s / (1.0 + curve.series * s);
    let rest = slope - points.imp / points.vmp;
    rest.is_finite().then_some(rest)
}

/// Photocurrent, saturation and leak for which the three points lie on the curve.
fn through(points: Points, thermal: f64, series: f64) -> Option<SingleDiode> {
    let Points { voc, isc, vmp, imp } = points;
    // Exponentials relative to open circuit, so that none overflows: x = I₀·e^(Voc/a).
    let e = |u: f64| libm::exp((u - voc) / thermal);
    let (u_short, u_most) = (isc * series, vmp + imp * series);
    let (e_short, e_most) = (e(u_short), e(u_most));
    // Differences from open circuit remove the photocurrent:
    // isc = x·(1 − e_short) + G·(voc − u_short); imp = x·(1 − e_most) + G·(voc − u_most).
    let (a, b, c) = (1.0 - e_short, voc - u_short, isc);
    let (d, f, g) = (1.0 - e_most, voc - u_most, imp);
    let determinant = a * f - b * d;
    let x = (c * f - b * g) / determinant;
    let leak = (a * g - c * d) / determinant;
    let saturation = x * e(0.0);
    let photo = x - saturation + leak * voc;
    let curve = SingleDiode { photo, saturation, series, leak, thermal };
    [photo, saturation, leak].iter().all(|p| p.is_finite()).then_some(curve)
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;

    fn points_of(curve: &SingleDiode) -> Points {
        let key = curve.key_points();
        Points { voc: key.voc.value, isc: key.isc.value, vmp: key.vmp.value, imp: key.imp.value }
    }

    fn near(a: f64, b: f64, tolerance: f64) -> bool {
        (a - b).abs() <= tolerance * b.abs()
    }

    proptest! {
        /// Parameters → key points → parameters: the fit is the inverse of the solver.
        #[test]
        fn a_curve_is_found_again_from_its_points(
            photo in 0.3..14.0f64,
            cells in 1.0..144.0f64,
            ideality in 0.8..1.6f64,
            voc_cell in 0.55..0.72f64,
            series in 0.001..0.06f64,
            leak in 0.0..0.02f64,
        ) {
            let thermal = ideality * cells * 0.0257;
            let voc = voc_cell * cells;
            let saturation = photo * (1.0 - leak) / libm::expm1(voc / thermal);
            // Series resistance and leak as parts of Voc/Isc and Isc/Voc.
            let curve = SingleDiode { photo, saturation, series: series * voc / photo, leak: leak * photo / voc, thermal };
            let again = with_thermal(points_of(&curve), thermal).unwrap();
            prop_assert!(near(again.series, curve.series, 1e-4), "{again:?} {curve:?}");
            prop_assert!(near(again.photo, photo, 1e-6) && near(again.saturation, saturation, 1e-3));
            prop_assert!((again.leak - curve.leak).abs() < 1e-4 * photo / voc);
        }

        /// Any plausible sheet: the curve goes through its four points, and its maximum is there.
        #[test]
        fn the_fitted_curve_goes_through_the_points(
            voc in 5.0..60.0f64, isc in 0.3..18.0f64, v in 0.72..0.86f64, i in 0.85..0.97f64, cells in 0.55..0.75f64,
        ) {
            let points = Points { voc, isc, vmp: v * voc, imp: i * isc };
            let curve = greatest(points, IDEALITY * 0.0257 * voc / cells).unwrap();
            let found = points_of(&curve);
            prop_assert!(near(found.voc, voc, 1e-9) && near(found.isc, isc, 1e-9));
            prop_assert!(near(curve.current_at(points.vmp), points.imp, 1e-9));
            prop_assert!(near(found.vmp * found.imp, points.vmp * points.imp, 1e-9), "{found:?}");
            prop_assert!(curve.series >= 0.0 && curve.leak >= 0.0 && curve.saturation > 0.0);
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(a: u64, b: u64, c: u64, d: u64, e: u64) {
            let f = f64::from_bits;
            let _ = greatest(Points { voc: f(a), isc: f(b), vmp: f(c), imp: f(d) }, f(e));
        }
    }

    impl core::fmt::Debug for Points {
        fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
            write!(f, "{} V {} A, {} V {} A", self.voc, self.isc, self.vmp, self.imp)
        }
    }
}
