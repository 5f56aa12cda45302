//! Like sources in series and in parallel, and what follows when they are not alike.

use uom::si::{electric_charge::ampere_hour, electric_current::ampere, electric_potential::volt};

use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance};

/// One battery, or a string of them taken as one.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Source {
    /// Voltage without load.
    pub voltage: ElectricPotential,
    /// Capacity.
    pub capacity: ElectricCharge,
    /// Internal resistance with its leads.
    pub resistance: ElectricalResistance,
}

impl Source {
    fn check(&self) -> Result<(), Error> {
        let above_nought = |name, value, base: f64, unit| {
            if base > 0.0 && base.is_finite() {
                return Ok(());
            }
            Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Above(0.0) })
        };
        above_nought("voltage", self.voltage.get::<volt>(), self.voltage.value, "V")?;
        above_nought("capacity", self.capacity.get::<ampere_hour>(), self.capacity.value, "Ah")?;
        above_nought("resistance", self.resistance.value, self.resistance.value, "Ω")
    }
}

/// Sources in series.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SeriesString {
    /// The string as one source; its capacity is the least of its members'.
    pub whole: Source,
    /// Capacity of the largest member that can never be used, because the smallest is empty before; nought where all
    /// are alike. Where it is not nought, the smallest member is driven below empty on every deep discharge and
    /// overcharged on every full charge.
    pub stranded: ElectricCharge,
}

/// Sources in series: voltages and resistances add, the least capacity counts.
///
/// # Errors
/// [`Error::OutOfRange`] where a value is not above 0 and finite, or where there is no source.
///
/// # Example
/// Four 6 V batteries of 210 Ah, one of them replaced by 180 Ah:
/// ```
/// use ampwright::{law::{Source, sources_in_series}, quantity::{parse, readable}};
/// let old = Source { voltage: parse("6 V")?, capacity: parse("210 Ah")?, resistance: parse("2 mohm")? };
/// let string = sources_in_series(&[old, old, old, Source { capacity: parse("180 Ah")?, ..old }])?;
/// assert_eq!(readable(string.whole.voltage).to_string(), "24 V");
/// assert_eq!(readable(string.whole.capacity).to_string(), "180 Ah");
/// assert_eq!(readable(string.stranded).to_string(), "30 Ah");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn sources_in_series(sources: &[Source]) -> Result<SeriesString, Error> {
    let (&first, rest) = sources.split_first().ok_or(NO_SOURCE)?;
    first.check()?;
    let (mut whole, mut largest) = (first, first.capacity);
    for source in rest {
        source.check()?;
        whole.voltage += source.voltage;
        whole.resistance += source.resistance;
        if source.capacity < whole.capacity {
            whole.capacity = source.capacity;
        }
        if source.capacity > largest {
            largest = source.capacity;
        }
    }
    whole.check()?;
    Ok(SeriesString { whole, stranded: largest - whole.capacity })
}

/// Sources in parallel.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ParallelBank {
    /// The bank as one source.
    pub whole: Source,
    /// Greatest current that flows between the sources without any load, when they are joined.
    pub circulating: ElectricCurrent,
}

/// Sources in parallel: capacities and conductances add; differing voltages drive a current between them.
///
/// The bank settles at U = Σ(Uᵢ/Rᵢ)/Σ(1/Rᵢ) (Millman's theorem); each source then carries (Uᵢ − U)/Rᵢ. How the load is
/// shared among links and joints is computed in [`crate::network`].
///
/// # Errors
/// [`Error::MismatchedSources`] where the voltages differ by more than `greatest_difference`, with the current that
/// would flow; [`Error::OutOfRange`] where a value is not above 0 and finite, or where there is no source.
///
/// # Example
/// A full 12.8 V battery beside an empty one of 11.8 V, 10 mΩ each:
/// ```
/// use ampwright::{law::{Source, sources_in_parallel}, quantity::parse};
/// let full = Source { voltage: parse("12.8 V")?, capacity: parse("100 Ah")?, resistance: parse("10 mohm")? };
/// let empty = Source { voltage: parse("11.8 V")?, ..full };
/// let error = sources_in_parallel(&[full, empty], parse("0.1 V")?).unwrap_err();
/// assert_eq!(
///     error.to_string(),
///     "sources of 11.80 V to 12.80 V in parallel would drive 50.0 A through each other without any load; bring them \
///      to one voltage first, within 0.10 V"
/// );
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn sources_in_parallel(
    sources: &[Source],
    greatest_difference: ElectricPotential,
) -> Result<ParallelBank, Error> {
    if !(greatest_difference.value >= 0.0 && greatest_difference.value.is_finite()) {
        let value = greatest_difference.get::<volt>();
        return Err(Error::OutOfRange {
            name: "greatest_difference",
            value,
            unit: "V",
            allowed: Allowed::AtLeast(0.0),
        });
    }
    let (&first, rest) = sources.split_first().ok_or(NO_SOURCE)?;
    first.check()?;
    let (mut least, mut most, mut capacity) = (first.voltage, first.voltage, first.capacity);
    let mut conductance = 1.0 / first.resistance;
    // Weighted differences from the first: like voltages then give exactly that voltage.
    let mut driven = ElectricCurrent::new::<ampere>(0.0);
    for source in rest {
        source.check()?;
        if source.voltage < least {
            least = source.voltage;
        }
        if source.voltage > most {
            most = source.voltage;
        }
        capacity += source.capacity;
        conductance += 1.0 / source.resistance;
        driven += (source.voltage - first.voltage) / source.resistance;
    }
    let whole =
        Source { voltage: first.voltage + driven / conductance, capacity, resistance: 1.0 / conductance };
    whole.check()?;
    let mut circulating = ElectricCurrent::new::<ampere>(0.0);
    for source in sources {
        let current = ((source.voltage - whole.voltage) / source.resistance).abs();
        if current > circulating {
            circulating = current;
        }
    }
    if most - least > greatest_difference {
        return Err(Error::MismatchedSources {
            least_V: least.get::<volt>(),
            most_V: most.get::<volt>(),
            circulating_A: circulating.get::<ampere>(),
            difference_V: greatest_difference.get::<volt>(),
        });
    }
    Ok(ParallelBank { whole, circulating })
}

const NO_SOURCE: Error =
    Error::OutOfRange { name: "sources", value: 0.0, unit: "", allowed: Allowed::AtLeast(1.0) };

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::parse;

    fn source(volts: &str, ampere_hours: &str, ohms: &str) -> Source {
        Source {
            voltage: parse(volts).unwrap(),
            capacity: parse(ampere_hours).unwrap(),
            resistance: parse(ohms).unwrap(),
        }
    }

    #[test]
    fn like_sources_in_parallel_share_voltage_and_drive_nothing() {
        let one = source("12.1 V", "120 Ah", "3 mohm");
        let bank = sources_in_parallel(&[one; 6], parse("0 V").unwrap()).unwrap();
        assert_eq!(bank.whole.voltage, one.voltage);
        assert_eq!(bank.circulating.value, 0.0);
        assert!((bank.whole.capacity.get::<ampere_hour>() - 720.0).abs() < 1e-12);
        assert!((bank.whole.resistance.value - 0.0005).abs() < 1e-15);
    }

    #[test]
    fn the_currents_between_unlike_sources_cancel() {
        let (a, b, c) = (
            source("12 V", "100 Ah", "5 mohm"),
            source("12.3 V", "100 Ah", "9 mohm"),
            source("12.6 V", "50 Ah", "20 mohm"),
        );
        let bank = sources_in_parallel(&[a, b, c], parse("1 V").unwrap()).unwrap();
        let flow = |s: Source| ((s.voltage - bank.whole.voltage) / s.resistance).value;
        assert!((flow(a) + flow(b) + flow(c)).abs() < 1e-10);
        assert!((bank.circulating.value - flow(a).abs()).abs() < 1e-10);
    }

    #[test]
    fn a_difference_at_the_limit_passes_and_beyond_it_is_refused() {
        let (low, high) = (source("12 V", "100 Ah", "5 mohm"), source("12.5 V", "100 Ah", "5 mohm"));
        assert!(sources_in_parallel(&[low, high], parse("0.5 V").unwrap()).is_ok());
        let error = sources_in_parallel(&[high, low], parse("0.49 V").unwrap()).unwrap_err();
        assert_eq!(error.slug(), "mismatched-sources");
    }

    #[test]
    fn like_members_strand_nothing() {
        let string = sources_in_series(&[source("6 V", "225 Ah", "2 mohm"); 4]).unwrap();
        assert_eq!(string.stranded.value, 0.0);
        assert_eq!(string.whole, source("24 V", "225 Ah", "8 mohm"));
    }

    #[test]
    fn bad_sources_are_refused_in_both_ways() {
        assert!(sources_in_series(&[]).is_err() && sources_in_parallel(&[], parse("1 V").unwrap()).is_err());
        let good = source("12 V", "100 Ah", "5 mohm");
        for bad in [0.0, -0.0, -1.0, f64::NAN, f64::INFINITY] {
            for wrong in [
                Source { voltage: ElectricPotential::new::<volt>(bad), ..good },
                Source { capacity: ElectricCharge::new::<ampere_hour>(bad), ..good },
                Source {
                    resistance: ElectricalResistance::new::<uom::si::electrical_resistance::ohm>(bad),
                    ..good
                },
            ] {
                assert!(sources_in_series(&[good, wrong]).is_err(), "{wrong:?}");
                assert!(sources_in_parallel(&[wrong, good], parse("1 V").unwrap()).is_err(), "{wrong:?}");
            }
        }
    }
}
