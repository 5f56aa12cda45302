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
