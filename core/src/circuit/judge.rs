//! Judges one run with its conductors and its device: every check of the rule set, in the set's order (R4).

use arrayvec::ArrayVec;
use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::checked::{Checked, Outcome};
use super::facts::Facts;
use super::run::{Demand, Run};
use crate::cable::{Conductor, Material, linear_resistance};
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::network::line_delivery;
use crate::protection::Guard;
use crate::quantity::{
    ElectricCurrent, ElectricPotential, ElectricalResistance, Power, Ratio, ThermodynamicTemperature,
};
use crate::rules::{Ampacity, AmpacityQuery, Check, DeviceLimit, Key, Space};

/// Everything found about one run.
#[derive(Clone, Debug, PartialEq)]
pub struct Judgement {
    /// Design current in the worst hour.
    pub current: ElectricCurrent,
    /// Its part of three hours or more.
    pub continuous: ElectricCurrent,
    /// Ampacity after all factors, where the set tabulates it.
    pub ampacity: Option<Ampacity>,
    /// Temperature rating that picked the ampacity column, °C: the lowest of insulation, lugs, terminals and device
    /// (under `us` the insulation's; the terminal's column is a check of its own).
    pub counted_degC: f64,
    /// Conductor temperature at the design current.
    pub temperature: ThermodynamicTemperature,
    /// Resistance of the whole loop at that temperature, joints included.
    pub resistance: ElectricalResistance,
    /// Drop of this run.
    pub drop: ElectricPotential,
    /// Drop of the whole path, as part of nominal.
    pub path_drop: Ratio,
    /// Voltage at the far end in the worst hour.
    pub end_voltage: ElectricPotential,
    /// Power lost in the run.
    pub loss: Power,
    /// Least prospective current at the far end, where the source is known.
    pub least_fault: Option<ElectricCurrent>,
    /// Greatest device on this conductor, where its ampacity is tabulated.
    pub device_limit: Option<DeviceLimit>,
    /// The checks, in the rule set's order.
    pub checks: ArrayVec<Checked, 24>,
}

impl Judgement {
    /// The first check that speaks against taking a size: one that failed, or a capacity that no table gives.
    pub fn first_obstacle(&self) -> Option<&Checked> {
        self.checks.iter().find(|c| c.is_obstacle())
    }

    /// The first failed check in the rule set's order.
    pub fn first_failure(&self) -> Option<&Checked> {
        self.checks.iter().find(|c| c.outcome == Outcome::Failed)
    }

    /// The check that uses most of its limit.
    pub fn tightest(&self) -> Option<&Checked> {
        self.checks.iter().filter(|c| c.used().is_some()).max_by(|a, b| {
            let key = |c: &Checked| c.used().unwrap_or(0.0);
            key(a).total_cmp(&key(b))
        })
    }
}

/// Judges a run.
///
/// Positive and negative conductor may differ; where a limit depends on the size, the smaller one counts.
/// Without a device the device checks are not made: whether one is needed, the place in the network tells.
///
/// # Errors
/// [`Error`] for numbers out of range, or [`Error::NoSolution`] where the run cannot carry a constant power.
/// A limit that no table gives is not an error but a check that is not made.
///
/// # Example
/// ```
/// # use ampwright::{cable::*, circuit::{Demand, Run, judge}, quantity::ConductorSize, rules::Rules};
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
/// let cable = Conductor {
///     size: ConductorSize::mm2(16.0)?,
///     material: Material::Copper,
///     class: Class::Flexible,
///     coating: Coating::Plain,
///     insulation: "PVC 70 degC".parse()?,
/// };
/// let judged = judge(&run, &cable, &cable, None)?;
/// assert!(judged.first_failure().is_none());
/// assert!((judged.drop.get::<volt>() - 0.61).abs() < 0.02);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn judge(
    run: &Run,
    positive: &Conductor,
    negative: &Conductor,
    guard: Option<&Guard>,
) -> Result<Judgement, Error> {
    run.check()?;
    let thinner = if positive.size.area() <= negative.size.area() { positive } else { negative };
    let rating_degC = counted_rating(run, thinner, guard);
    let ampacity = capacity(run, thinner, guard);

    // First with the conductor at its greatest temperature, then at the one its current gives (R2).
    let hot = ThermodynamicTemperature::new::<degree_celsius>(thinner.insulation.rating_degC());
    let hot_ohms = loop_resistance(run, positive, negative, hot)?;
    let (continuous, current) = drawn(run, hot_ohms)?;
    let temperature = operating_temperature(run, current, ampacity.as_ref().ok(), hot);
    let resistance = loop_resistance(run, positive, negative, temperature)?;
    let (continuous, current) = match run.demand {
        Demand::Current { .. } => (continuous, current),
        Demand::Power { .. } => drawn(run, resistance)?,
    };

    let drop = run.low_current.unwrap_or(current) * resistance;
    let end_voltage = run.beginning - drop;
    let path_drop: Ratio = (run.drop_before + drop) / run.nominal;
    let least_fault = run.weakest_source.map(|s| s.emf / (s.resistance + hot_ohms));

    let mut judged = Judgement {
        current,
        continuous,
        ampacity: None,
        counted_degC: rating_degC,
        temperature,
        resistance,
        drop,
        path_drop,
        end_voltage,
        loss: current * current * resistance,
        least_fault,
        device_limit: None,
        checks: ArrayVec::new(),
    };
    if let Ok(ampacity) = &ampacity {
        let facts = Facts { run, thinner, guard, ampacity: &Err(OTHER_METALS), current, continuous };
        judged.device_limit = Some(facts.device_limit(ampacity).0);
    }
    for &check in run.rules.set().order {
        let mut push = |checked: Option<Checked>| {
            if let Some(checked) = checked {
                // The order of a set lists each check once; there is room for all.
                let _ = judged.checks.try_push(checked);
            }
        };
        let facts = Facts { run, thinner, guard, ampacity: &ampacity, current, continuous };
        match check {
            Check::Conductor => {
                for conductor in [positive, negative] {
                    push(facts.admitted(conductor));
                    if positive == negative {
                        break;
                    }
                }
            }
            Check::LeastSize => push(Some(facts.least_size())),
            Check::TerminalColumn => push(facts.terminal_column()),
            Check::Ampacity => push(Some(facts.ampacity())),
            Check::DeviceCarries => push(facts.device_carries()),
            Check::DeviceStart => push(facts.device_start()),
            Check::DeviceProtects => push(facts.device_protects()),
            Check::OpensLate => push(facts.opens_late()),
            Check::Drop => push(Some(facts.drop(path_drop))),
            Check::LoadVoltage => push(facts.load_voltage(end_voltage)),
            Check::StartVoltage => push(facts.start_voltage(end_voltage, resistance)),
            Check::Breaking => push(facts.breaking()),
            Check::LeastFault => push(facts.least_fault(least_fault)),
            Check::Withstand => push(facts.withstand()),
            Check::DeviceSupply => push(facts.supply()),
            Check::Termination => push(facts.termination()),
        }
    }
    judged.ampacity = ampacity.ok();
    Ok(judged)
}

/// Ampacity of a conductor in the place of a run, after all factors; the temperature rating that counts is the lowest of
/// insulation, terminals and device.
///
/// # Errors
/// [`Error::TableEnds`] or [`Error::NotTabulated`] where no table of the set gives it.
pub fn capacity(run: &Run, conductor: &Conductor, guard: Option<&Guard>) -> Result<Ampacity, Error> {
    // The sets' tables held are copper's.
    if conductor.material != Material::Copper {
        return Err(OTHER_METALS);
    }
    run.rules.ampacity(&AmpacityQuery {
        size: conductor.size,
        rating_degC: counted_rating(run, conductor, guard),
        installation: run.installation,
        ambient: run.ambient,
        space: run.space,
        bundled_conductors: run.bundled_conductors,
    })
}

const OTHER_METALS: Error = Error::NotTabulated {
    what: "conductors of another metal than copper",
    table: Citation::new("the tables held", "copper only", Seen::Derived),
    remedy: "use copper, or have them judged by the standard's own table",
};

/// The lowest temperature rating of insulation, lug, terminal and device picks the column (R4). Under `us` the
/// terminal has a check of its own; under `iec` an unmarked terminal counts as made for PVC, 70 °C.
fn counted_rating(run: &Run, conductor: &Conductor, guard: Option<&Guard>) -> f64 {
    let insulation = conductor.insulation.rating_degC();
    if run.rules.set().key == Key::Us {
        return insulation;
    }
    let usual = run.rules.unmarked_terminal_degC();
    let terminal = run.terminal.map(|t| t.get::<degree_celsius>()).or(usual);
    let device = guard.and_then(|g| g.terminal_degC.or(usual));
    [terminal, device].into_iter().flatten().fold(insulation, f64::min)
}

/// Loop of a run at one conductor temperature: positive and negative, or the stated return, and the joints (R1, R9).
fn loop_resistance(
    run: &Run,
    positive: &Conductor,
    negative: &Conductor,
    temperature: ThermodynamicTemperature,
) -> Result<ElectricalResistance, Error> {
    let there = linear_resistance(positive, temperature)?;
    let back: ElectricalResistance = match run.return_resistance {
        Some(stated) => stated,
        None if negative == positive => there * run.negative_length,
        None => linear_resistance(negative, temperature)? * run.negative_length,
    };
    let there: ElectricalResistance = there * run.positive_length;
    Ok(there + back + run.joints)
}

/// Continuous and whole current in the worst hour.
fn drawn(run: &Run, resistance: ElectricalResistance) -> Result<(ElectricCurrent, ElectricCurrent), Error> {
    Ok(match run.demand {
        Demand::Current { continuous, other } => (continuous, continuous + other),
        Demand::Power { power, continuous } => {
            let current = line_delivery(run.beginning, resistance, power)?.current;
            (if continuous { current } else { ElectricCurrent::new::<ampere>(0.0) }, current)
        }
    })
}

/// Air around the conductor, °C: an engine space and a sunlit roof are hotter than the ambient stated.
fn air_degC(run: &Run) -> f64 {
    let ambient = run.ambient.get::<degree_celsius>();
    let set = run.rules.set();
    match run.space {
        Space::Ordinary => ambient,
        Space::Engine => set.engine.map_or(ambient, |e| ambient.max(e.ambient_degC)),
        Space::Rooftop => ambient + set.rooftop_K.map_or(0.0, |k| k.value),
    }
}

/// Where an overloaded conductor's computed temperature ends, °C: the resistance tables end not far above.
const HOTTEST: f64 = 200.0;

/// Conductor temperature at a current: the rise goes with the square of the current, from ambient at none to the
/// rating at the ampacity. Slightly high below the ampacity, since a cooler conductor also loses less; an overloaded one
/// goes beyond its rating.
fn operating_temperature(
    run: &Run,
    current: ElectricCurrent,
    ampacity: Option<&Ampacity>,
    rating: ThermodynamicTemperature,
) -> ThermodynamicTemperature {
    let Some(ampacity) = ampacity else { return rating };
    let used: f64 = (current / ampacity.corrected).get::<ratio>();
    let (ambient, top) = (air_degC(run), rating.get::<degree_celsius>());
    let rise = (top - ambient) * used * used;
    ThermodynamicTemperature::new::<degree_celsius>((ambient + rise.max(0.0)).min(HOTTEST))
}
