//! One line and one load that takes constant power: the closed form.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::power::watt;

use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Power, sqrt};

/// What reaches the far end of a line.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Delivery {
    /// Current in the line.
    pub current: ElectricCurrent,
    /// Voltage at the load.
    pub voltage: ElectricPotential,
    /// Power lost in the line.
    pub loss: Power,
}

/// Current and voltage at a constant-power load behind a resistance.
///
/// Of the two solutions the stable one, with the higher voltage, is given: V = (E + √(E² − 4·P·R))/2.
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `source` | V | > 0; at the line's beginning |
/// | `resistance` | Ω | ≥ 0; loop, joints included |
/// | `power` | W | ≥ 0; taken at the load's terminals |
///
/// # Errors
/// [`Error::OutOfRange`]; [`Error::NoSolution`] where the line cannot carry the power (P > E²/4R).
///
/// # Source
/// E = V + R·P/V, from Ohm's and Joule's laws.
///
/// # Example
/// ```
/// # use ampwright::network::deliver;
/// # use uom::si::{f64::*, electric_potential::volt, electrical_resistance::ohm, power::watt};
/// let run = deliver(
///     ElectricPotential::new::<volt>(21.0),
///     ElectricalResistance::new::<ohm>(0.01),
///     Power::new::<watt>(1000.0),
/// )?;
/// assert!((run.voltage.get::<volt>() - 20.5125).abs() < 1e-4);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn deliver(
    source: ElectricPotential,
    resistance: ElectricalResistance,
    power: Power,
) -> Result<Delivery, Error> {
    let (e, r, p) = (source.get::<volt>(), resistance.get::<ohm>(), power.get::<watt>());
    at_least("resistance", r, "ohm", 0.0)?;
    at_least("power", p, "W", 0.0)?;
    if !(e > 0.0 && e.is_finite()) {
        return Err(Error::OutOfRange { name: "source", value: e, unit: "V", allowed: Allowed::Above(0.0) });
    }
    let root = e * e - 4.0 * p * r;
    if root < 0.0 {
        return Err(Error::NoSolution { asked_W: p, source_V: e, loop_ohm: r, most_W: e * e / (4.0 * r) });
    }
    let v = 0.5 * (e + sqrt(root));
    let i = p / v;
    if !(v.is_finite() && i.is_finite()) {
        return Err(Error::OutOfRange { name: "source", value: e, unit: "V", allowed: Allowed::Between(0.0, 1e150) });
    }
    Ok(Delivery {
        current: ElectricCurrent::new::<ampere>(i),
        voltage: ElectricPotential::new::<volt>(v),
        loss: Power::new::<watt>(i * i * r),
    })
}

/// Checks a number that may be zero.
pub(super) fn at_least(name: &'static str, value: f64, unit: &'static str, least: f64) -> Result<(), Error> {
    if value >= least && value.is_finite() {
        Ok(())
    } else {
        Err(Error::OutOfRange { name, value, unit, allowed: Allowed::AtLeast(least) })
    }
}
