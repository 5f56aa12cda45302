//! The meter of the crew, where none is named: what its reading may be wrong by.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::ratio::percent;

use crate::citation::{Citation, Seen};
use crate::quantity::{ElectricCurrent, ElectricPotential, Ratio};

/// Source of accuracy and resolution of the usual meter.
pub const METER: Citation = Citation::new("common practice, no source", "hand-held meter", Seen::Practice);

/// Last digits that a reading may be wrong by, beside the part of the reading. Common practice, no source.
const LAST_DIGITS: f64 = 2.0;

/// One range of a meter.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MeterRange<Q> {
    /// Where it ends.
    pub up_to: Q,
    /// Error as part of the reading; two last digits come on top.
    pub accuracy: Ratio,
    /// Its last digit.
    pub resolution: Q,
}

/// A meter for volts, with a clamp for larger currents.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Meter {
    /// DC volts, small: drops and joints.
    pub millivolts: MeterRange<ElectricPotential>,
    /// DC volts.
    pub volts: MeterRange<ElectricPotential>,
    /// DC volts above that.
    pub high_volts: MeterRange<ElectricPotential>,
    /// Direct current through the meter.
    pub in_line: MeterRange<ElectricCurrent>,
    /// Direct current by a clamp.
    pub clamp: MeterRange<ElectricCurrent>,
}

impl Meter {
    /// The usual one: 0.5 % of volts (0.1 mV up to 600 mV, 10 mV up to 60 V, then 0.1 V), 1 % and 10 mA up to 10 A in
    /// line, 2 % and 0.1 A by a clamp. Source: [`METER`].
    ///
    /// ```
    /// use ampwright::{quantity::{parse, readable}, site::Meter};
    /// let error = Meter::usual().voltage_error(parse("25.2 V")?);
    /// assert_eq!(readable(error).to_string(), "146 mV"); // 0.126 V and two digits of 10 mV
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn usual() -> Self {
        let volts = |up_to, resolution| MeterRange {
            up_to: ElectricPotential::new::<volt>(up_to),
            accuracy: Ratio::new::<percent>(0.5),
            resolution: ElectricPotential::new::<volt>(resolution),
        };
        let amperes = |up_to, accuracy, resolution| MeterRange {
            up_to: ElectricCurrent::new::<ampere>(up_to),
            accuracy: Ratio::new::<percent>(accuracy),
            resolution: ElectricCurrent::new::<ampere>(resolution),
        };
        Self {
            millivolts: volts(0.6, 1e-4),
            volts: volts(60.0, 1e-2),
            high_volts: volts(600.0, 0.1),
            in_line: amperes(10.0, 1.0, 0.01),
            clamp: amperes(1000.0, 2.0, 0.1),
        }
    }

    /// What a reading of a voltage may be wrong by, on the finest range that holds it.
    pub fn voltage_error(&self, reading: ElectricPotential) -> ElectricPotential {
        let size = reading.abs();
        let range = [&self.millivolts, &self.volts].into_iter().find(|r| size <= r.up_to);
        let range = range.unwrap_or(&self.high_volts);
        size * range.accuracy + LAST_DIGITS * range.resolution
    }

    /// What a reading of a current may be wrong by: in line as far as that goes, else by the clamp.
    pub fn current_error(&self, reading: ElectricCurrent) -> ElectricCurrent {
        let size = reading.abs();
        let range = if size <= self.in_line.up_to { &self.in_line } else { &self.clamp };
        size * range.accuracy + LAST_DIGITS * range.resolution
    }

    /// Current from which a joint shows an excess over what it should have: there the excess makes more millivolts than
    /// the reading may be wrong by. `None` where the error grows faster than the excess.
    ///
    /// I = 2·d/(ΔR − a·(R + ΔR)), with last digit d and accuracy a of the millivolt range.
    pub(super) fn current_to_show(&self, ohms: f64, excess_ohms: f64) -> Option<ElectricCurrent> {
        let range = &self.millivolts;
        let (digits, accuracy) = (LAST_DIGITS * range.resolution.value, range.accuracy.value);
        let slope = excess_ohms - accuracy * (ohms + excess_ohms);
        let amps = digits / slope;
        (slope > 0.0 && amps.is_finite()).then(|| ElectricCurrent::new::<ampere>(amps))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn errors_are_part_of_the_reading_and_two_digits() {
        let meter = Meter::usual();
        let volts = |v: f64| meter.voltage_error(ElectricPotential::new::<volt>(v)).get::<volt>();
        // 0.5 % of 0.2 V and 0.2 mV; of 24 V and 20 mV; of 100 V and 0.2 V.
        for (reading, error) in [(0.2, 0.0012), (-0.2, 0.0012), (24.0, 0.14), (100.0, 0.7)] {
            assert!((volts(reading) - error).abs() < 1e-12, "{reading} V");
        }
        let amps = |a: f64| meter.current_error(ElectricCurrent::new::<ampere>(a)).get::<ampere>();
        // 1 % of 5 A and 20 mA; 2 % of 80 A and 0.2 A.
        assert!((amps(5.0) - 0.07).abs() < 1e-12);
        assert!((amps(80.0) - 1.8).abs() < 1e-12);
    }

    #[test]
    fn the_current_that_shows_a_milliohm_by_hand() {
        let meter = Meter::usual();
        // A lug of 0.1 mΩ: 0.2 mV/(1 mΩ − 0.5 % of 1.1 mΩ) = 0.2/0.9945.
        let lug = meter.current_to_show(1e-4, 1e-3).unwrap().get::<ampere>();
        assert!((lug - 0.2 / 0.9945).abs() < 1e-9);
        // A part of 0.2 Ω: the meter is wrong by 1.005 mΩ in it, more than the milliohm sought.
        assert!(meter.current_to_show(0.2, 1e-3).is_none());
        assert!(meter.current_to_show(f64::NAN, 1e-3).is_none());
    }
}
