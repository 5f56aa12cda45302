//! The task that the checks of a circuit were made for.

use super::number::{Number, amps, degC, metres, ohms, part, volts, watts};
use super::shape::object;
use super::words::{DemandKind, Earthing, Installation, Space, Usage};
use crate::circuit;
use crate::network;

object! {
    /// The task: everything about a circuit but its conductors and devices.
    Run {
        /// Rule set with its pinned edition, as a site file names it.
        rules: &'static str,
        /// Which pole is tied to earth.
        earthing: Earthing,
        /// Nominal voltage of the system, V.
        nominal_V: Number,
        /// Highest voltage that can stand, V.
        highest_V: Number,
        /// Voltage at the beginning of the run in the worst hour, V.
        beginning_V: Number,
        /// Drop from the source to the beginning of the run in that hour, V.
        drop_before_V: Number,
        /// What the far end draws.
        demand: Demand,
        /// Current in the hour of the lowest voltage, A; null where it is that of the demand.
        low_current_A: Number,
        /// Length of the positive conductor, m.
        positive_length_m: Number,
        /// Length of the negative conductor, m.
        negative_length_m: Number,
        /// Resistance of a return that is no conductor of this run, Ω; null where the negative conductor returns.
        return_resistance_ohm: Number,
        /// All joints of the run together, Ω.
        joints_ohm: Number,
        /// How it is installed.
        installation: Installation,
        /// Where it lies.
        space: Space,
        /// Ambient, °C.
        ambient_degC: Number,
        /// Current-carrying conductors together, its own two included.
        bundled_conductor_count: u16,
        /// It belongs to a battery, flexes or vibrates.
        moving: bool,
        /// Marked temperature rating of lugs and terminals, the lowest, °C; null where none is marked.
        terminal_degC: Number,
        /// Use, for the drop limit.
        usage: Usage,
        /// The user's own drop limit as part of nominal voltage; null where the rule set's holds.
        own_drop_limit_ratio: Number,
        /// Least supply voltage of what hangs at the far end, V; null where not stated.
        least_voltage_V: Number,
        /// Current on top while what hangs there starts, A; null where not stated.
        start_A: Number,
        /// Loop resistance from the source to the beginning of the run, Ω.
        resistance_before_ohm: Number,
        /// The network solved for the start; null where it was not.
        started: Option<Started>,
        /// Greatest prospective current at the device, A; null where not known.
        greatest_fault_A: Number,
        /// Where the greatest is not known: the part of it that is, A.
        fault_floor_A: Number,
        /// The fault currents rest on a rule of thumb from capacity.
        fault_by_thumb: bool,
        /// The source behind the beginning of the run at its weakest; null where not known.
        weakest_source: Option<Source>,
    }
}

object! {
    /// What the far end of a run draws in the worst hour; by its kind, the other keys are null.
    Demand {
        /// Which keys hold.
        kind: DemandKind,
        /// Current that flows for three hours or more, A.
        continuous_A: Number,
        /// The rest of the current, A.
        other_A: Number,
        /// Constant power at its terminals, W.
        power_W: Number,
        /// That power is drawn for three hours or more.
        power_is_continuous: Option<bool>,
    }
}

object! {
    /// A run while what hangs at its end starts.
    Started {
        /// Voltage at the beginning of the run, V.
        beginning_V: Number,
        /// Current in the run, A.
        current_A: Number,
    }
}

object! {
    /// A source by its volts without load and its resistance.
    Source {
        /// Volts without load, V.
        emf_V: Number,
        /// Internal resistance, Ω.
        resistance_ohm: Number,
    }
}

impl From<&circuit::Demand> for Demand {
    fn from(demand: &circuit::Demand) -> Self {
        let kind = demand.into();
        match *demand {
            circuit::Demand::Current { continuous, other } => Self {
                kind,
                continuous_A: amps(continuous),
                other_A: amps(other),
                power_W: None,
                power_is_continuous: None,
            },
            circuit::Demand::Power { power, continuous } => Self {
                kind,
                continuous_A: None,
                other_A: None,
                power_W: watts(power),
                power_is_continuous: Some(continuous),
            },
        }
    }
}

impl From<&network::Source> for Source {
    fn from(source: &network::Source) -> Self {
        let network::Source { emf, resistance } = *source;
        Self { emf_V: volts(emf), resistance_ohm: ohms(resistance) }
    }
}

impl From<&circuit::Run> for Run {
    fn from(run: &circuit::Run) -> Self {
        let circuit::Run {
            rules,
            earthing,
            nominal,
            highest,
            beginning,
            drop_before,
            demand,
            low_current,
            positive_length,
            negative_length,
            return_resistance,
            joints,
            installation,
            space,
            ambient,
            bundled_conductors,
            moving,
            terminal,
            usage,
            drop,
            least_voltage,
            start,
            resistance_before,
            started,
            greatest_fault,
            fault_floor,
            fault_by_thumb,
            weakest_source,
        } = run;
        Self {
            rules: rules.set().word,
            earthing: earthing.into(),
            nominal_V: volts(*nominal),
            highest_V: volts(*highest),
            beginning_V: volts(*beginning),
            drop_before_V: volts(*drop_before),
            demand: demand.into(),
            low_current_A: low_current.and_then(amps),
            positive_length_m: metres(*positive_length),
            negative_length_m: metres(*negative_length),
            return_resistance_ohm: return_resistance.and_then(ohms),
            joints_ohm: ohms(*joints),
            installation: installation.into(),
            space: space.into(),
            ambient_degC: degC(*ambient),
            bundled_conductor_count: *bundled_conductors,
            moving: *moving,
            terminal_degC: terminal.and_then(degC),
            usage: usage.into(),
            own_drop_limit_ratio: drop.and_then(part),
            least_voltage_V: least_voltage.and_then(volts),
            start_A: start.and_then(amps),
            resistance_before_ohm: ohms(*resistance_before),
            started: started.map(|(beginning, current)| Started {
                beginning_V: volts(beginning),
                current_A: amps(current),
            }),
            greatest_fault_A: greatest_fault.and_then(amps),
            fault_floor_A: fault_floor.and_then(amps),
            fault_by_thumb: *fault_by_thumb,
            weakest_source: weakest_source.as_ref().map(Into::into),
        }
    }
}
