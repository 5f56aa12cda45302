//! What the report says of one reading.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;
use core::fmt;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::{millivolt, volt};
use uom::si::electrical_resistance::milliohm;
use uom::si::power::watt;
use uom::si::ratio::percent;
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::quantity::{
    ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance, Figures, Power, Ratio,
    ThermodynamicTemperature,
};

/// A value of the kind that a meter shows.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub enum Measured {
    /// Voltage at terminals.
    Volts(ElectricPotential),
    /// Voltage lost along a circuit.
    Drop(ElectricPotential),
    /// Current.
    Amps(ElectricCurrent),
    /// Temperature of a joint, a conductor or cells.
    Temperature(ThermodynamicTemperature),
    /// Relative density of the electrolyte.
    Density(f64),
    /// Charge delivered between full and cut-off.
    Delivered(ElectricCharge),
}

impl Measured {
    /// What was measured, in a word.
    pub const fn word(&self) -> &'static str {
        match self {
            Self::Volts(_) => "volts",
            Self::Drop(_) => "drop",
            Self::Amps(_) => "amps",
            Self::Temperature(_) => "temperature",
            Self::Density(_) => "density",
            Self::Delivered(_) => "delivered",
        }
    }

    /// The same kind with another value, in V, A, °C, Ah or without unit.
    pub(super) fn of(self, value: f64) -> Self {
        match self {
            Self::Volts(_) => Self::Volts(ElectricPotential::new::<volt>(value)),
            Self::Drop(_) => Self::Drop(ElectricPotential::new::<volt>(value)),
            Self::Amps(_) => Self::Amps(ElectricCurrent::new::<ampere>(value)),
            Self::Temperature(_) => Self::Temperature(ThermodynamicTemperature::new::<degree_celsius>(value)),
            Self::Density(_) => Self::Density(value),
            Self::Delivered(_) => Self::Delivered(ElectricCharge::new::<ampere_hour>(value)),
        }
    }
}

impl fmt::Display for Measured {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Volts(v) => write!(f, "{:.2} V", v.get::<volt>()),
            Self::Drop(v) => write!(f, "{} mV", Figures(v.get::<millivolt>())),
            Self::Amps(a) => write!(f, "{} A", Figures(a.get::<ampere>())),
            Self::Temperature(t) => write!(f, "{:.1} °C", t.get::<degree_celsius>()),
            Self::Density(d) => write!(f, "{d:.3}"),
            Self::Delivered(q) => write!(f, "{} Ah", Figures(q.get::<ampere_hour>())),
        }
    }
}

/// How a reading stands to what is predicted.
#[derive(Clone, Debug, PartialEq)]
pub enum Verdict {
    /// Within, the error of the meter counted in.
    Within,
    /// Above, by more than the meter can err.
    Above,
    /// Below, by more than the meter can err.
    Below,
    /// Nothing to compare it with: what is missing.
    NotComparable(String),
}

/// What a reading implies; least and greatest by the error of the meter and what is not known of the site.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub enum Implied {
    /// Resistance of a circuit beyond what conductors and joints should have, and the heat in it at the current of the
    /// worst hour, if all of it is in this circuit and in one place.
    Resistance {
        /// Name of the circuit.
        circuit: String,
        /// Beyond the greatest that is predicted at least, beyond the least that is predicted at most.
        extra: (ElectricalResistance, ElectricalResistance),
        /// Of the worst hour.
        current: ElectricCurrent,
        /// In that resistance at that current.
        heat: (Power, Power),
    },
    /// Internal resistance of the bank.
    Internal(ElectricalResistance, ElectricalResistance),
    /// Capacity at the rated time, and what it is of the stated one.
    Capacity {
        /// Least and greatest.
        charge: (ElectricCharge, ElectricCharge),
        /// The same as part of what is stated.
        of_stated: (Ratio, Ratio),
    },
    /// State of charge.
    Charge(Ratio, Ratio),
    /// Heat of one contact at the current that flowed.
    Heat(Power, Power),
}

/// `2 to 3 mΩ`, `at least 2 mΩ`.
fn span(least: f64, greatest: f64, unit: &str) -> String {
    match (Figures(least).reads_like(greatest), greatest.is_finite()) {
        (true, _) => format!("{} {unit}", Figures(least)),
        (false, true) => format!("{} to {} {unit}", Figures(least), Figures(greatest)),
        (false, false) => format!("at least {} {unit}", Figures(least)),
    }
}

impl fmt::Display for Implied {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Resistance { circuit, extra, current, heat } => write!(
                f,
                "in \"{circuit}\" {} beyond what is predicted; in one place, {} of heat at {} A in the worst hour",
                span(extra.0.get::<milliohm>(), extra.1.get::<milliohm>(), "mΩ"),
                span(heat.0.get::<watt>(), heat.1.get::<watt>(), "W"),
                Figures(current.get::<ampere>())
            ),
            Self::Internal(least, greatest) => write!(
                f,
                "an internal resistance of {}",
                span(least.get::<milliohm>(), greatest.get::<milliohm>(), "mΩ")
            ),
            Self::Capacity { charge, of_stated } => write!(
                f,
                "a capacity of {} at the rated time, {:.0} to {:.0} % of the stated one",
                span(charge.0.get::<ampere_hour>(), charge.1.get::<ampere_hour>(), "Ah"),
                of_stated.0.get::<percent>(),
                of_stated.1.get::<percent>()
            ),
            Self::Charge(least, greatest) => write!(
                f,
                "a state of charge of {:.0} to {:.0} %",
                least.get::<percent>(),
                greatest.get::<percent>()
            ),
            Self::Heat(least, greatest) => {
                write!(f, "{} of heat in one contact", span(least.get::<watt>(), greatest.get::<watt>(), "W"))
            }
        }
    }
}

/// What may be behind a reading that is not as predicted.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum CauseKind {
    /// A lug, terminal, holder or contact with more resistance than its kind has.
    BadJoint,
    /// A conductor that is thinner or longer than stated.
    ConductorThinnerOrLonger,
    /// A conductor that is thicker or shorter than stated.
    ConductorThickerOrShorter,
    /// The return through chassis or hull.
    ChassisReturn,
    /// An open device, a lead that is off, a joint that has parted.
    OpenPath,
    /// A load that draws more than stated.
    LoadDrawsMore,
    /// A load that draws less than stated, or did not run.
    LoadDrawsLess,
    /// Something that ran and is not named with the reading.
    OtherLoadRan,
    /// A source that charged meanwhile.
    SourceCharged,
    /// A bank below its disconnect voltage.
    BankLow,
    /// A bank of more internal resistance than taken: aged, cold or discharged.
    WeakBank,
    /// One cell or battery that is worse than the others.
    BadCell,
    /// Less capacity than stated, by age or sulphation.
    LostCapacity,
    /// A bank that was not full at the beginning.
    NotFull,
    /// Cells colder than the stated capacity holds for.
    ColdCells,
    /// Acid that is denser below than above.
    Stratification,
    /// Charge at the surface of the plates that has not settled.
    SurfaceCharge,
    /// Acid of another density than the table is for.
    OtherAcid,
    /// Heat that comes from elsewhere: engine, sun, a part beside it.
    OutsideHeat,
    /// A lead or contact of the meter.
    MeterLead,
}

impl CauseKind {
    const fn words(self) -> &'static str {
        match self {
            Self::BadJoint => "a bad joint, holder or contact in",
            Self::ConductorThinnerOrLonger => "a conductor thinner or longer than stated in",
            Self::ConductorThickerOrShorter => "a conductor thicker or shorter than stated in",
            Self::ChassisReturn => "the chassis as return of",
            Self::OpenPath => "an open device, a lead that is off or a joint that has parted in",
            Self::LoadDrawsMore => "more drawn than stated by",
            Self::LoadDrawsLess => "less drawn than stated by",
            Self::OtherLoadRan => "another load that ran, beyond",
            Self::SourceCharged => "a source that charged beside",
            Self::BankLow => "too little charge in",
            Self::WeakBank => "more internal resistance than taken (aged, cold or discharged) in",
            Self::BadCell => "one cell or battery worse than the others in",
            Self::LostCapacity => "capacity lost by age or sulphation in",
            Self::NotFull => "no full charge at the beginning in",
            Self::ColdCells => "cells colder than the stated capacity holds for in",
            Self::Stratification => "acid denser below than above in",
            Self::SurfaceCharge => "charge at the surface of the plates, not yet settled, in",
            Self::OtherAcid => "acid of another density than the table is for in",
            Self::OutsideHeat => "heat from elsewhere (engine, sun, a part beside it) at",
            Self::MeterLead => "a lead or contact of the meter at",
        }
    }
}

/// One cause that is consistent with a reading, and where.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Cause {
    /// What.
    pub kind: CauseKind,
    /// Name of the part of the site.
    pub at: String,
}

impl Cause {
    pub(super) fn new(kind: CauseKind, at: &str) -> Self {
        Self { kind, at: String::from(at) }
    }
}

impl fmt::Display for Cause {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} \"{}\"", self.kind.words(), self.at)
    }
}

/// The measurement that would tell the causes apart.
#[derive(Clone, Debug, PartialEq)]
pub struct NextMeasurement {
    /// What to measure.
    pub what: &'static str,
    /// Between which two terminals, or at the first one where both are the same.
    pub between: (String, String),
    /// Current that must flow meanwhile, so that the last digit of the meter is 1 mΩ at most.
    pub current: Option<ElectricCurrent>,
}

impl fmt::Display for NextMeasurement {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let (one, other) = &self.between;
        if one == other {
            write!(f, "{} at {one}", self.what)?;
        } else {
            write!(f, "{} between {one} and {other}", self.what)?;
        }
        match self.current {
            Some(amps) => {
                write!(f, ", with {} A or more flowing: 1 mΩ shows", Figures(amps.get::<ampere>()))
            }
            None => Ok(()),
        }
    }
}

/// A reading beside its prediction.
#[derive(Clone, Debug, PartialEq)]
pub struct ReadingLine {
    /// Name of the reading.
    pub name: String,
    /// Line in the file.
    pub line: u32,
    /// Name of what was measured.
    pub at: String,
    /// What the meter showed.
    pub measured: Measured,
    /// By how much the meter may err, and what that rests on.
    pub tolerance: String,
    /// Least and greatest that is predicted, before the error of the meter.
    pub predicted: Option<(Measured, Measured)>,
    /// What the prediction rests on.
    pub basis: String,
    /// The comparison.
    pub verdict: Verdict,
    /// What it implies, where it tells something.
    pub implied: Vec<Implied>,
    /// Causes consistent with it and with the other readings under the same loads; empty where it is as predicted.
    pub causes: Vec<Cause>,
    /// What tells the causes apart, where there are several.
    pub next: Option<NextMeasurement>,
}
