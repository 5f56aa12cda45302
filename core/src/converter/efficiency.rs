//! Efficiency of an inverter over its load, and what it draws for it.

use uom::si::ratio::ratio;

use crate::error::{Allowed, Error};
use crate::quantity::Ratio;

/// Efficiency over load, stated at up to eight loads, linear between them.
///
/// Below the first point the input falls in a straight line to the idle power; above the last its efficiency is held,
/// which flatters a surge. With one figure only, that is taken for full load: the input is then a straight line from
/// idle to full load, so that the figure holds for what is converted and the idle power comes on top.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EfficiencyCurve {
    /// Load as a part of continuous power, efficiency.
    points: [(f64, f64); Self::ROOM],
    count: usize,
}

impl EfficiencyCurve {
    /// How many points it holds.
    pub const ROOM: usize = 8;

    /// One figure.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where it is not above 0 and at most 1.
    pub fn flat(efficiency: Ratio) -> Result<Self, Error> {
        Self::points(&[(Ratio::new::<ratio>(1.0), efficiency)])
    }

    /// Several: load as a part of continuous power, rising, and the efficiency there.
    ///
    /// # Errors
    /// [`Error::WrongCount`] with none or more than eight; [`Error::OutOfRange`] where a load is not above 0 and at most
    /// 4 or an efficiency not above 0 and at most 1; [`Error::Contradiction`] where loads do not rise, or where more
    /// would come out for less that goes in.
    ///
    /// # Example
    /// ```
    /// use ampwright::{converter::EfficiencyCurve, quantity::parse};
    /// let curve = [("10 %", "85 %"), ("30 %", "94 %"), ("100 %", "90 %")];
    /// let curve = curve.map(|(load, efficiency)| (parse(load).unwrap(), parse(efficiency).unwrap()));
    /// assert!(EfficiencyCurve::points(&curve).is_ok());
    /// ```
    pub fn points(points: &[(Ratio, Ratio)]) -> Result<Self, Error> {
        if points.is_empty() || points.len() > Self::ROOM {
            return Err(Error::WrongCount {
                what: "points of efficiency",
                given: points.len(),
                needed: Self::ROOM,
            });
        }
        let mut curve = Self { points: [(0.0, 0.0); Self::ROOM], count: points.len() };
        let mut before = (0.0, 0.0);
        for (cell, &(load, efficiency)) in curve.points.iter_mut().zip(points) {
            let (load, efficiency) = (load.value, efficiency.value);
            Allowed::AboveUpTo(0.0, 4.0).check("load", load, "")?;
            Allowed::AboveUpTo(0.0, 1.0).check("efficiency", efficiency, "")?;
            let input = load / efficiency;
            if load <= before.0 || input <= before.1 {
                let why = if load <= before.0 {
                    "the loads of a curve must rise"
                } else {
                    "more would come out for less that goes in; check the efficiencies beside it"
                };
                return Err(Error::Contradiction { name: "load", value: load, unit: "", why });
            }
            before = (load, input);
            *cell = (load, efficiency);
        }
        Ok(curve)
    }

    /// Input over continuous power, for a load and an idle power over continuous power.
    pub(super) fn input(&self, load: f64, idle: f64) -> f64 {
        let points = self.points.get(..self.count).unwrap_or_default();
        let (mut low, mut input) = ((0.0, f64::NAN), f64::NAN);
        for &(at, efficiency) in points {
            if load <= at {
                input = if low.0 > 0.0 {
                    load / (low.1 + (efficiency - low.1) * (load - low.0) / (at - low.0))
                } else {
                    load / efficiency + idle * (1.0 - load / at)
                };
                break;
            }
            low = (at, efficiency);
        }
        if input.is_nan() {
            input = load / low.1;
        }
        // Whatever the points say, an inverter at work loses no less than an idle one.
        input.max(load + idle)
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use proptest::prelude::*;

    use super::*;

    fn part(x: f64) -> Ratio {
        Ratio::new::<ratio>(x)
    }

    fn curve(points: &[(f64, f64)]) -> Result<EfficiencyCurve, Error> {
        let points: arrayvec::ArrayVec<_, 16> = points.iter().map(|&(x, y)| (part(x), part(y))).collect();
        EfficiencyCurve::points(&points)
    }

    #[test]
    fn points_are_hit_and_lines_lie_between() {
        let curve = curve(&[(0.1, 0.8), (0.5, 0.94), (1.0, 0.9)]).unwrap();
        for (load, efficiency) in [(0.1, 0.8), (0.3, 0.87), (0.5, 0.94), (0.75, 0.92), (1.0, 0.9), (1.5, 0.9)]
        {
            let input = curve.input(load, 0.005);
            assert!((load / input - efficiency).abs() < 1e-12, "{load}: {}", load / input);
        }
        // Below the first point a line to the idle power: halfway in load is halfway in input.
        assert!((curve.input(0.05, 0.005) - 0.5 * (0.005 + 0.1 / 0.8)).abs() < 1e-15);
        assert_eq!(curve.input(0.0, 0.005), 0.005);
    }

    #[test]
    fn an_inverter_at_work_loses_no_less_than_an_idle_one() {
        // 99 % at full load and 5 % idle contradict each other: the greater loss counts.
        let flat = EfficiencyCurve::flat(part(0.99)).unwrap();
        for load in [0.0, 0.1, 0.5, 1.0, 2.0] {
            assert!(flat.input(load, 0.05) >= load + 0.05);
        }
    }

    #[test]
    fn curves_that_make_no_sense_are_refused() {
        assert!(curve(&[]).is_err());
        assert!(curve(&[(0.1, 0.8); 9]).is_err());
        assert!(curve(&[(0.5, 0.9), (0.5, 0.9)]).is_err());
        // 0.1/0.5 = 0.2 in, 0.15/0.99 = 0.152 in: more out for less.
        assert!(matches!(curve(&[(0.1, 0.5), (0.15, 0.99)]), Err(Error::Contradiction { name: "load", .. })));
        for bad in [0.0, -0.1, 1.0f64.next_up(), f64::NAN, f64::INFINITY] {
            assert!(EfficiencyCurve::flat(part(bad)).is_err(), "{bad}");
        }
        for bad in [0.0, -0.1, 4.1, f64::NAN, f64::INFINITY] {
            assert!(curve(&[(bad, 0.9)]).is_err(), "{bad}");
        }
    }

    proptest! {
        #[test]
        fn more_out_takes_more_in_and_never_gains(
            loads in proptest::collection::btree_set(1u32..400, 1..8),
            efficiencies in proptest::collection::vec(0.3..1.0f64, 8),
            idle in 0.0..0.1f64,
            a in 0.0..4.0f64,
            b in 0.0..4.0f64,
        ) {
            let points: std::vec::Vec<_> =
                loads.into_iter().map(|x| f64::from(x) / 100.0).zip(efficiencies).collect();
            if let Ok(curve) = curve(&points) {
                let (low, high) = (a.min(b), a.max(b));
                prop_assert!(curve.input(low, idle) <= curve.input(high, idle) * (1.0 + 1e-12));
                prop_assert!(curve.input(low, idle) >= low + idle);
                prop_assert!((curve.input(0.0, idle) - idle).abs() <= 1e-15);
            }
        }
    }
}
