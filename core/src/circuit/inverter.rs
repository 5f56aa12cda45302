//! The DC feed of an inverter: current at the lowest voltage, not at nominal (R3).

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::power::watt;
use uom::si::ratio::ratio;

use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, ElectricPotential, Power, Ratio};

/// What an inverter draws on its DC side.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct InverterFeed {
    /// Power at its DC terminals, full load.
    pub dc_power: Power,
    /// Current by power over nominal voltage, no losses: the figure people carry in their heads; never for design.
    pub nominal: ElectricCurrent,
    /// Current at the lowest voltage and the efficiency there: the design current.
    pub design: ElectricCurrent,
}

/// DC power and currents of an inverter at full load.
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `power` | W | ≥ 0; AC side |
/// | `efficiency` | 1 | > 0 … 1; at full power and lowest voltage |
/// | `nominal`, `lowest` | V | > 0; `lowest` at its own terminals |
///
/// # Errors
/// [`Error::OutOfRange`].
///
/// # Source
/// I = P/(η·U). Checked against the inverter cases of `tests/reference/cases-conductors.toml`.
///
/// # Example
/// ```
/// # use ampwright::circuit::inverter_feed;
/// # use uom::si::{f64::*, electric_current::ampere, electric_potential::volt, power::watt, ratio::ratio};
/// let feed = inverter_feed(
///     Power::new::<watt>(800.0),
///     Ratio::new::<ratio>(0.85),
///     ElectricPotential::new::<volt>(12.0),
///     ElectricPotential::new::<volt>(10.5),
/// )?;
/// assert!((feed.nominal.get::<ampere>() - 66.7).abs() < 0.05);
/// assert!((feed.design.get::<ampere>() - 89.6).abs() < 0.05);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn inverter_feed(
    power: Power,
    efficiency: Ratio,
    nominal: ElectricPotential,
    lowest: ElectricPotential,
) -> Result<InverterFeed, Error> {
    let within = |name, value: f64, unit, allowed, fits: bool| {
        if fits && value.is_finite() { Ok(()) } else { Err(Error::OutOfRange { name, value, unit, allowed }) }
    };
    let (p, eta) = (power.get::<watt>(), efficiency.get::<ratio>());
    let (un, ul) = (nominal.get::<volt>(), lowest.get::<volt>());
    within("power", p, "W", Allowed::AtLeast(0.0), p >= 0.0)?;
    within("efficiency", eta, "", Allowed::AboveUpTo(0.0, 1.0), eta > 0.0 && eta <= 1.0)?;
    within("nominal", un, "V", Allowed::Above(0.0), un > 0.0)?;
    within("lowest", ul, "V", Allowed::Above(0.0), ul > 0.0)?;
    Ok(InverterFeed {
        dc_power: Power::new::<watt>(p / eta),
        nominal: ElectricCurrent::new::<ampere>(p / un),
        design: ElectricCurrent::new::<ampere>(p / eta / ul),
    })
}
