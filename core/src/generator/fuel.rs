//! Fuel of engine sets: a published chart for diesel, or the maker's figures.

use uom::si::power::{kilowatt, watt};
use uom::si::time::hour;
use uom::si::volume::liter;

use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{Power, Ratio, Time, Volume, VolumeFlow};

/// Fuel of a diesel set at a quarter, a half, three quarters and all of its rating.
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct DieselRow {
    /// Rating, kW.
    pub rating_kW: f64,
    /// Fuel at these four loads, L/h.
    pub fuel_L_per_h: [f64; 4],
}

const fn row(rating_kW: f64, quarter: f64, half: f64, three_quarters: f64, full: f64) -> DieselRow {
    DieselRow { rating_kW, fuel_L_per_h: [quarter, half, three_quarters, full] }
}

/// Where [`DIESEL`] comes from.
pub const DIESEL_SOURCE: Citation =
    Citation::new("a power rental company's chart", "approximate diesel consumption", Seen::Page);

/// Approximate fuel consumption of diesel sets against load.
///
/// Source: a power rental company's chart, widely reprinted. Page seen. Its 750 kW row has a misprint and is left out.
/// Equal to `diesel-fuel-consumption` in `tests/reference/cases-energy.toml` (tested there).
#[rustfmt::skip]
pub const DIESEL: [DieselRow; 11] = [
    //   kW     ¼     ½     ¾     1  L/h
    row(20.0, 2.7, 3.4, 4.9, 6.1),
    row(30.0, 4.9, 6.8, 9.1, 11.0),
    row(40.0, 6.1, 8.7, 12.1, 15.2),
    row(60.0, 6.8, 11.0, 14.4, 18.2),
    row(75.0, 9.1, 12.9, 17.5, 24.0),
    row(100.0, 9.9, 15.6, 22.0, 28.5),
    row(125.0, 11.8, 18.9, 26.9, 34.5),
    row(150.0, 13.7, 22.4, 31.8, 41.3),
    row(200.0, 17.8, 29.2, 41.7, 54.6),
    row(300.0, 25.8, 42.8, 60.1, 81.4),
    row(500.0, 41.7, 70.1, 100.0, 135.2),
];

/// Loads of the chart's columns, in parts of the rating.
const LOADS: [f64; 4] = [0.25, 0.5, 0.75, 1.0];

/// Fuel over load: straight lines between up to eight points.
///
/// Below the first point its figure is held: an engine idling burns no more than that, and how much less nobody stated.
#[derive(Clone, Copy, Debug, PartialEq)]
#[allow(non_snake_case)]
pub struct FuelCurve {
    rating: Power,
    /// Load as a part of the rating, L/h.
    points: [(f64, f64); Self::ROOM],
    count: usize,
    citation: Citation,
}

impl FuelCurve {
    /// How many points it holds.
    pub const ROOM: usize = 8;

    /// From the chart: the row of the next larger rating, never a mixture of two.
    ///
    /// The set's load is then a smaller part of the row's rating than of its own.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the rating is not above 0; [`Error::TableEnds`] below 20 kW, where the chart has no
    /// row and the maker's figures are needed, and above 500 kW.
    pub fn diesel(rating: Power) -> Result<Self, Error> {
        let kilowatts = rating.get::<kilowatt>();
        Allowed::Above(0.0).check("rated_power", kilowatts, "kW")?;
        let ends = |end| Error::TableEnds {
            what: "rated power of the engine set",
            value: kilowatts,
            unit: "kW",
            table: DIESEL_SOURCE,
            end,
            remedy: "use the maker's consumption at two loads",
        };
        let smallest = DIESEL.first().map_or(0.0, |row| row.rating_kW);
        if kilowatts < smallest {
            return Err(ends("begins at 20 kW"));
        }
        let row =
            DIESEL.iter().find(|row| kilowatts <= row.rating_kW).ok_or_else(|| ends("ends at 500 kW"))?;
        let mut points = [(0.0, 0.0); Self::ROOM];
        for (cell, point) in points.iter_mut().zip(LOADS.into_iter().zip(row.fuel_L_per_h)) {
            *cell = point;
        }
        let rating = Power::new::<kilowatt>(row.rating_kW);
        Ok(Self { rating, points, count: LOADS.len(), citation: DIESEL_SOURCE })
    }

    /// From the maker: loads in parts of the rating, rising, and the fuel there.
    ///
    /// # Errors
    /// [`Error::WrongCount`] with none or more than eight; [`Error::OutOfRange`] where a load is not 0 to 1.2, or the
    /// rating or a fuel figure not above 0; [`Error::Contradiction`] where loads do not rise or fuel falls.
    pub fn stated(rating: Power, points: &[(Ratio, VolumeFlow)]) -> Result<Self, Error> {
        if points.is_empty() || points.len() > Self::ROOM {
            return Err(Error::WrongCount {
                what: "points of fuel",
                given: points.len(),
                needed: Self::ROOM,
            });
        }
        Allowed::Above(0.0).check("rating", rating.get::<watt>(), "W")?;
        let citation = Citation::new("as stated", "fuel of the engine set", Seen::Stated);
        let mut curve = Self { rating, points: [(0.0, 0.0); Self::ROOM], count: points.len(), citation };
        let mut before = (-1.0, 0.0);
        for (cell, &(load, fuel)) in curve.points.iter_mut().zip(points) {
            let (load, fuel) = (load.value, litres_per_hour(fuel));
            Allowed::Between(0.0, 1.2).check("load", load, "")?;
            Allowed::Above(0.0).check("fuel", fuel, "L/h")?;
            if load <= before.0 || fuel < before.1 {
                let why = "loads must rise, and fuel must not fall with them";
                return Err(Error::Contradiction { name: "load", value: load, unit: "", why });
            }
            before = (load, fuel);
            *cell = (load, fuel);
        }
        Ok(curve)
    }

    /// Rating to which its loads refer: the row's for the chart.
    pub const fn rating(&self) -> Power {
        self.rating
    }

    /// Where it comes from.
    pub const fn citation(&self) -> Citation {
        self.citation
    }

    /// Fuel at a power delivered.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] where the power is negative, not finite, or above the last point.
    ///
    /// # Example
    /// ```
    /// use ampwright::{generator::FuelCurve, quantity::{Time, parse, readable}};
    /// let points = [(parse("50 %")?, parse("1.1 L/h")?), (parse("100 %")?, parse("1.9 L/h")?)];
    /// let small = FuelCurve::stated(parse("5 kW")?, &points)?;
    /// let an_hour = small.at(parse("3.75 kW")?)? * parse::<Time>("1 h")?;
    /// assert_eq!(readable(an_hour).to_string(), "1.5 L");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn at(&self, output: Power) -> Result<VolumeFlow, Error> {
        let watts = output.get::<watt>();
        Allowed::AtLeast(0.0).check("output power", watts, "W")?;
        let load = (output / self.rating).value;
        let litres = self.litres_per_hour(load).ok_or(Error::Contradiction {
            name: "output power",
            value: watts,
            unit: "W",
            why: "it is above the last load of the fuel curve; use a larger set, or state more points",
        })?;
        Ok(Volume::new::<liter>(litres) / Time::new::<hour>(1.0))
    }

    /// Fuel at a load, both in parts; `None` above the last point.
    pub(super) fn litres_per_hour(&self, load: f64) -> Option<f64> {
        let points = self.points.get(..self.count).unwrap_or_default();
        let (mut low, mut first) = ((0.0, 0.0), true);
        for &(at, fuel) in points {
            // Rounding of powers to parts is forgiven at the last point.
            if load <= at * (1.0 + 1e-12) {
                return Some(if first {
                    fuel
                } else {
                    low.1 + (fuel - low.1) * (load - low.0) / (at - low.0)
                });
            }
            (low, first) = ((at, fuel), false);
        }
        None
    }

    /// Loads at which its slope changes.
    pub(super) fn corners(&self) -> impl Iterator<Item = f64> {
        self.points.into_iter().take(self.count).map(|(load, _)| load)
    }
}

pub(super) fn litres_per_hour(fuel: VolumeFlow) -> f64 {
    (fuel * Time::new::<hour>(1.0)).get::<liter>()
}

calculations! {
    /// Fuel of a diesel set for some hours at one load, after a published chart.
    ///
    /// The row of the next larger rating; straight lines between its four loads, since an engine's fuel grows nearly in
    /// proportion to what it delivers beyond idling; below a quarter the figure there.
    ///
    /// # Example
    /// A 20 kW set at 12.5 kW for an hour, midway between half and three quarters:
    /// ```
    /// use ampwright::{generator::fuel_consumption, quantity::{parse, readable}};
    /// let fuel = fuel_consumption(parse("20 kW")?, parse("12.5 kW")?, parse("1 h")?)?;
    /// assert_eq!(readable(fuel).to_string(), "4.15 L");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn fuel_consumption(
        /// Of the set; of a smaller or larger one the chart says nothing.
        rated_power: Power in watt [20000.0 ..= 500000.0],
        /// Delivered.
        output_power: Power in watt [>= 0.0],
        /// At this load.
        duration: Time in hour [>= 0.0],
    ) -> fuel: Volume in liter
    where (output_power <= rated_power) output_power in watt: "it must not be above rated_power"
    formula "V = v(P/P_row)·t, v linear between ¼, ½, ¾ and 1 of the row's rating, v(¼) below"
    source "a power rental company's chart of 20 to 500 kW (approximate); that lines may be drawn between its columns is common \
        practice, no source"
    {
        let flow = FuelCurve::diesel(rated_power).and_then(|curve| curve.at(output_power));
        // Within the ranges there always is one.
        Volume::new::<liter>(flow.map_or(f64::NAN, litres_per_hour) * duration.get::<hour>())
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use proptest::prelude::*;
    use uom::si::ratio::ratio;

    use super::*;

    fn kw(kilowatts: f64) -> Power {
        Power::new::<kilowatt>(kilowatts)
    }

    fn flow(litres: f64) -> VolumeFlow {
        Volume::new::<liter>(litres) / Time::new::<hour>(1.0)
    }

    fn stated(points: &[(f64, f64)]) -> Result<FuelCurve, Error> {
        let points: std::vec::Vec<_> =
            points.iter().map(|&(load, fuel)| (Ratio::new::<ratio>(load), flow(fuel))).collect();
        FuelCurve::stated(kw(5.0), &points)
    }

    #[test]
    fn rows_and_columns_rise_as_they_were_printed() {
        for pair in DIESEL.windows(2) {
            assert!(pair[0].rating_kW < pair[1].rating_kW);
            for (smaller, larger) in pair[0].fuel_L_per_h.iter().zip(pair[1].fuel_L_per_h) {
                assert!(*smaller < larger);
            }
        }
        for row in DIESEL {
            assert!(row.fuel_L_per_h.windows(2).all(|pair| pair[0] < pair[1]), "{} kW", row.rating_kW);
        }
    }

    #[test]
    fn a_rating_between_two_rows_takes_the_larger() {
        let of = |rating: f64, load: f64| {
            litres_per_hour(FuelCurve::diesel(kw(rating)).unwrap().at(kw(load)).unwrap())
        };
        assert!((of(20.0, 10.0) - 3.4).abs() < 1e-12);
        // 20.1 kW takes the row of 30 kW: 15 kW are half of it.
        assert!((of(20.1, 15.0) - 6.8).abs() < 1e-12);
        // Below a quarter the figure of a quarter.
        assert!((of(20.0, 0.0) - 2.7).abs() < 1e-12 && (of(20.0, 5.0) - 2.7).abs() < 1e-12);
        let small = FuelCurve::diesel(kw(19.9)).unwrap_err().to_string();
        assert!(small.contains("begins at 20 kW; use the maker's"), "{small}");
        assert!(FuelCurve::diesel(kw(500.1)).unwrap_err().to_string().contains("ends at 500 kW"));
        assert_eq!(FuelCurve::diesel(kw(20.0)).unwrap().citation().seen, Seen::Page);
    }

    #[test]
    fn curves_that_make_no_sense_are_refused() {
        assert!(stated(&[(0.25, 0.8), (1.0, 1.9)]).is_ok());
        for bad in
            [&[][..], &[(0.5, 1.0), (0.5, 1.1)], &[(0.5, 1.0), (1.0, 0.9)], &[(1.3, 1.0)], &[(0.5, 0.0)]]
        {
            assert!(stated(bad).is_err(), "{bad:?}");
        }
        assert!(stated(&[(0.1, 1.0); 9]).is_err());
        for bad in [f64::NAN, f64::INFINITY, -1.0] {
            assert!(stated(&[(bad, 1.0)]).is_err() && stated(&[(0.5, bad)]).is_err(), "{bad}");
            assert!(FuelCurve::diesel(kw(bad)).is_err() && FuelCurve::stated(kw(bad), &[]).is_err(), "{bad}");
            assert!(stated(&[(1.0, 1.0)]).unwrap().at(kw(bad)).is_err(), "{bad}");
        }
        assert!(matches!(
            stated(&[(0.5, 1.0)]).unwrap().at(kw(2.6)),
            Err(Error::Contradiction { name: "output power", .. })
        ));
    }

    proptest! {
        #[test]
        fn more_load_never_burns_less(rating in 20.0..500.0f64, a in 0.0..=1.0f64, b in 0.0..=1.0f64) {
            let curve = FuelCurve::diesel(kw(rating)).unwrap();
            let at = |part: f64| litres_per_hour(curve.at(kw(part * rating)).unwrap());
            prop_assert!(at(a.min(b)) <= at(a.max(b)) + 1e-12);
            // The catalogue's function for two hours.
            let two =
                fuel_consumption(kw(rating), kw(a * rating), Time::new::<hour>(2.0)).unwrap().get::<liter>();
            prop_assert!((two - 2.0 * at(a)).abs() < 1e-9);
        }
    }

    #[test]
    fn no_set_delivers_more_than_its_rating() {
        let one = Time::new::<hour>(1.0);
        assert!(fuel_consumption(kw(25.0), kw(25.1), one).is_err());
        assert!(matches!(
            fuel_consumption(kw(5.0), kw(4.0), one),
            Err(Error::OutOfRange { name: "rated_power", .. })
        ));
    }
}
