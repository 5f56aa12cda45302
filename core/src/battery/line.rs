//! Tables read between their rows.

/// The straight line between the rows around `x`; rows rise in the first column. `None` beyond the first and the last
/// row, and for NaN.
pub(super) fn between(rows: &[(f64, f64)], x: f64) -> Option<f64> {
    let exact = rows.iter().find(|row| row.0 == x).map(|row| row.1);
    exact.or_else(|| {
        rows.windows(2).find_map(|pair| match *pair {
            [(x0, y0), (x1, y1)] if x0 < x && x < x1 => Some(y0 + (y1 - y0) * ((x - x0) / (x1 - x0))),
            _ => None,
        })
    })
}

/// As [`between`], the first and the last row holding beyond the ends; NaN for NaN and for no rows.
pub(super) fn held(rows: &[(f64, f64)], x: f64) -> f64 {
    match (rows.first(), rows.last()) {
        (Some(first), _) if x <= first.0 => first.1,
        (_, Some(last)) if x >= last.0 => last.1,
        _ => between(rows, x).unwrap_or(f64::NAN),
    }
}

/// The least first column at which rows that rise in both columns reach `y`, by the straight line; the ends hold.
pub(super) fn reached(rows: &[(f64, f64)], y: f64) -> f64 {
    match (rows.first(), rows.last()) {
        (Some(first), _) if y <= first.1 => first.0,
        (_, Some(last)) if y >= last.1 => last.0,
        _ => rows
            .windows(2)
            .find_map(|pair| match *pair {
                [(x0, y0), (x1, y1)] if y0 < y && y <= y1 => Some(x0 + (x1 - x0) * ((y - y0) / (y1 - y0))),
                _ => None,
            })
            .unwrap_or(f64::NAN),
    }
}

/// A temperature as it was printed: through kelvin and back it has lost its last digits, and a table's edge would be
/// missed.
pub(super) fn printed(celsius: f64) -> f64 {
    libm::round(celsius * 1e9) / 1e9
}

#[cfg(test)]
mod tests {
    use super::*;

    const ROWS: [(f64, f64); 3] = [(0.0, 1.0), (1.0, 3.0), (3.0, 4.0)];

    #[test]
    fn rows_are_met_exactly_and_the_line_runs_between_them() {
        for (x, y) in ROWS {
            assert_eq!((between(&ROWS, x), held(&ROWS, x), reached(&ROWS, y)), (Some(y), y, x));
        }
        assert_eq!((between(&ROWS, 2.0), reached(&ROWS, 3.5)), (Some(3.5), 2.0));
    }

    #[test]
    fn beyond_the_ends_there_is_nothing_or_the_end() {
        for odd in [-0.1, 3.1, f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
            assert_eq!(between(&ROWS, odd), None);
        }
        assert_eq!((held(&ROWS, -9.0), held(&ROWS, f64::INFINITY)), (1.0, 4.0));
        assert_eq!((reached(&ROWS, -9.0), reached(&ROWS, 9.0)), (0.0, 3.0));
        assert!(held(&ROWS, f64::NAN).is_nan() && held(&[], 1.0).is_nan() && reached(&[], 1.0).is_nan());
    }
}
