//! What a run is asked to do and where it lies: everything but its conductor and device.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::length::kilometer;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::error::{Allowed, Error};
use crate::network::Source;
use crate::protection::Earthing;
use crate::quantity::{
    ElectricCurrent, ElectricPotential, ElectricalResistance, Length, Power, Ratio, ThermodynamicTemperature,
};
use crate::rules::{Installation, LoadUse, Rules, Space};

/// What the far end draws in the worst hour.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Demand {
    /// Currents that are known, whatever the voltage.
    Current {
        /// Flowing for three hours or more.
        continuous: ElectricCurrent,
        /// The rest.
        other: ElectricCurrent,
    },
    /// A constant-power load at the far end: it draws most at the lowest voltage, after the drop (R3).
    Power {
        /// Power at its terminals.
        power: Power,
        /// Whether it runs for three hours or more.
        continuous: bool,
    },
}

/// One run of two conductors, as a task.
#[derive(Clone, Copy, Debug)]
pub struct Run {
    /// Rule set with the user's overrides.
    pub rules: Rules,
    /// Which pole is earthed: a floating system divides the poles of a device between both conductors.
    pub earthing: Earthing,
    /// Nominal voltage of the system.
    pub nominal: ElectricPotential,
    /// Highest voltage that can stand: cold-compensated equalising or charge voltage.
    pub highest: ElectricPotential,
    /// Voltage at the run's beginning in the worst hour: cut-off, less the drop before this run.
    pub beginning: ElectricPotential,
    /// Drop from the source to the run's beginning in that hour: the limit holds for the whole path (R17).
    pub drop_before: ElectricPotential,
    /// What the far end draws.
    pub demand: Demand,
    /// Current in the hour of the lowest voltage, where it is less than the demand (resistive loads draw most at the
    /// highest voltage): the drop counts with it.
    pub low_current: Option<ElectricCurrent>,
    /// Length of the positive conductor.
    pub positive_length: Length,
    /// Length of the negative conductor.
    pub negative_length: Length,
    /// Resistance of a return that is no conductor of this run (chassis), in place of the negative conductor.
    pub return_resistance: Option<ElectricalResistance>,
    /// All joints of the run together.
    pub joints: ElectricalResistance,
    /// How it is installed.
    pub installation: Installation,
    /// Where it lies.
    pub space: Space,
    /// Ambient.
    pub ambient: ThermodynamicTemperature,
    /// Current-carrying conductors together, the run's own two included.
    pub bundled_conductors: u16,
    /// Battery, flexing or vibrating run.
    pub moving: bool,
    /// Marked temperature rating of lugs and terminals, the lowest, where known.
    pub terminal: Option<ThermodynamicTemperature>,
    /// Use, for the drop limit.
    pub usage: LoadUse,
    /// The user's own drop limit, where there is one.
    pub drop: Option<Ratio>,
    /// Least supply voltage of what hangs at the far end.
    pub least_voltage: Option<ElectricPotential>,
    /// Current that comes on top while what hangs there starts, where it is stated.
    pub start: Option<ElectricCurrent>,
    /// Loop resistance from the source to the run's beginning: the start current flows through it too.
    pub resistance_before: ElectricalResistance,
    /// Where the network was solved for the start: voltage at the run's beginning then, and the current in the run.
    /// Without it the start's drop is laid over that of the worst hour.
    pub started: Option<(ElectricPotential, ElectricCurrent)>,
    /// Greatest prospective current at the device; `None` where the source's is not known (R6).
    pub greatest_fault: Option<ElectricCurrent>,
    /// Where the greatest is not known: the part of it that is, a lower bound.
    pub fault_floor: Option<ElectricCurrent>,
    /// The fault currents rest on a rule of thumb from capacity.
    pub fault_by_thumb: bool,
    /// The source behind the run's beginning at its weakest; `None` where not known.
    pub weakest_source: Option<Source>,
}

impl Run {
    /// A run in ordinary surroundings: both conductors equally long, alone in its way, 30 °C, full voltage at its
    /// beginning, nothing known of faults. Change the fields that differ.
    ///
    /// # Example
    /// ```
    /// # use ampwright::{circuit::{Demand, Run}, rules::Rules};
    /// # use uom::si::{f64::*, electric_current::ampere, electric_potential::volt, length::meter};
    /// let run = Run::plain(
    ///     Rules::named("iec")?,
    ///     ElectricPotential::new::<volt>(24.0),
    ///     Length::new::<meter>(12.0),
    ///     Demand::Current {
    ///         continuous: ElectricCurrent::new::<ampere>(20.0),
    ///         other: ElectricCurrent::new::<ampere>(0.0),
    ///     },
    /// );
    /// assert!(run.check().is_ok());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn plain(rules: Rules, nominal: ElectricPotential, one_way: Length, demand: Demand) -> Self {
        Self {
            rules,
            earthing: Earthing::Negative,
            nominal,
            highest: nominal,
            beginning: nominal,
            drop_before: ElectricPotential::new::<volt>(0.0),
            demand,
            low_current: None,
            positive_length: one_way,
            negative_length: one_way,
            return_resistance: None,
            joints: ElectricalResistance::new::<ohm>(0.0),
            installation: rules.usual_installation(),
            space: Space::Ordinary,
            ambient: ThermodynamicTemperature::new::<degree_celsius>(30.0),
            bundled_conductors: 2,
            moving: false,
            terminal: None,
            usage: LoadUse::Other,
            drop: None,
            least_voltage: None,
            start: None,
            resistance_before: ElectricalResistance::new::<ohm>(0.0),
            started: None,
            greatest_fault: None,
            fault_floor: None,
            fault_by_thumb: false,
            weakest_source: None,
        }
    }

    /// Checks that every number of the run is one.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] naming the first that is not.
    pub fn check(&self) -> Result<(), Error> {
        let voltage = Allowed::AboveUpTo(0.0, 1500.0);
        within("nominal", self.nominal.get::<volt>(), "V", voltage)?;
        within("highest", self.highest.get::<volt>(), "V", voltage)?;
        within("voltage at the beginning", self.beginning.get::<volt>(), "V", voltage)?;
        within("drop before the run", self.drop_before.get::<volt>(), "V", Allowed::Between(0.0, 1500.0))?;
        let length = Allowed::AboveUpTo(0.0, 10.0);
        within("positive_length", self.positive_length.get::<kilometer>(), "km", length)?;
        within("negative_length", self.negative_length.get::<kilometer>(), "km", length)?;
        let resistance = Allowed::Between(0.0, 1e6);
        within("resistance of the joints", self.joints.get::<ohm>(), "ohm", resistance)?;
        within("resistance before the run", self.resistance_before.get::<ohm>(), "ohm", resistance)?;
        if let Some(way_back) = self.return_resistance {
            within("resistance of the return", way_back.get::<ohm>(), "ohm", resistance)?;
        }
        match self.demand {
            Demand::Current { continuous, other } => {
                let current = Allowed::Between(0.0, 1e6);
                within("continuous current", continuous.get::<ampere>(), "A", current)?;
                within("other current", other.get::<ampere>(), "A", current)?;
            }
            Demand::Power { power, .. } => {
                within("power", power.get::<watt>(), "W", Allowed::Between(0.0, 1e8))?;
            }
        }
        within("ambient", self.ambient.get::<degree_celsius>(), "degC", Allowed::Between(-80.0, 200.0))?;
        if let Some(own) = self.drop {
            within("drop", own.get::<ratio>() * 100.0, "%", Allowed::AboveUpTo(0.0, 50.0))?;
        }
        Ok(())
    }
}

fn within(name: &'static str, value: f64, unit: &'static str, allowed: Allowed) -> Result<(), Error> {
    let fits = match allowed {
        Allowed::Between(least, most) => value >= least && value <= most,
        Allowed::AboveUpTo(least, most) => value > least && value <= most,
        _ => value.is_finite(),
    };
    if fits { Ok(()) } else { Err(Error::OutOfRange { name, value, unit, allowed }) }
}
