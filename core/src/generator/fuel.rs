//! Fuel of engine sets: a published chart for diesel, or the maker's figures.

use uom::si::power::kilowatt;
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
        if !(kilowatts > 0.0 && kilowatts <= f64::MAX) {
            let (value, allowed) = (kilowatts, Allowed::Above(0.0));
            return Err(Error::OutOfRange { name: "rated_power", value, unit: "kW", allowed });
        }
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
        let watts = rating.get::<uom::si::power::watt>();
        if !(watts > 0.0 && watts <= f64::MAX) {
            return Err(Error::OutOfRange {
                name: "rating",
                value: watts,
                unit: "W",
                allowed: Allowed::Above(0.0),
            });
        }
        let citation = Citation::new("as stated", "fuel of the engine set", Seen::Stated);
        let mut curve = Self { rating, points: [(0.0, 0.0); Self::ROOM], count: points.len(), citation };
        let mut before = (-1.0, 0.0);
        for (cell, &(load, fuel)) in curve.points.iter_mut().zip(points) {
            let (load, fuel) = (load.value, litres_per_hour(fuel));
            if !(0.0..=1.2).contains(&load) {
                let allowed = Allowed::Between(0.0, 1.2);
                return Err(Error::OutOfRange { name: "load", value: load, unit: "", allowed });
            }
            if !(fuel > 0.0 && fuel <= f64::MAX) {
                let allowed = Allowed::Above(0.0);
                return Err(Error::OutOfRange { name: "fuel", value: fuel, unit: "L/h", allowed });
            }
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
    /// use ampwright::{generator::FuelCurve, quantity::parse};
    /// let small = FuelCurve::stated(parse("5 kW")?, &[(parse("50 %")?, parse("1.1 L/h")?), (parse("100 %")?, parse("1.9 L/h")?)])?;
    /// assert!((small.at(parse("3.75 kW")?)?.value - ampwright::quantity::parse::<ampwright::quantity::VolumeFlow>("1.5 L/h")?.value).abs() < 1e-12);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn at(&self, output: Power) -> Result<VolumeFlow, Error> {
        let watts = output.get::<uom::si::power::watt>();
        if !(watts >= 0.0 && watts <= f64::MAX) {
            return Err(Error::OutOfRange {
                name: "output power",
                value: watts,
                unit: "W",
                allowed: Allowed::AtLeast(0.0),
            });
        }
        let load = (output / self.rating).value;
        let litres = self.litres_per_hour(load).ok_or(Error::Contradiction {
            name: "output power",
            value: watts,
            unit: "W",
            why: "it is above the last load of the fuel curve; use a larger set, or state more points",
        })?;
        Ok(Volume::new::<liter>(litres) / Time::new::<hour>(1.0))
    }

    /// Lines of the curve within a range of loads: from, to, fuel there at the load's lower end, slope.
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
        /// Of the set.
        rated_power: Power in watt [> 0.0],
        /// Delivered.
        output_power: Power in watt [>= 0.0],
        /// At this load.
        duration: Time in hour [>= 0.0],
    ) -> fuel: Volume in liter
    where (output_power <= rated_power) output_power in watt: "it must not be above rated_power"
    formula "V = v(P/P_row)·t, v linear between ¼, ½, ¾ and 1 of the row's rating, v(¼) below"
    source "a power rental company's chart of 20 to 500 kW (approximate); that lines may be drawn between its columns is common \
        practice, no source"
    fallible "the rating is below 20 or above 500 kW"
    { FuelCurve::diesel(rated_power)?.at(output_power).map(|flow| flow * duration) }
}
