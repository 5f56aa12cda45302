//! Judges one run with its conductors and its device: every check of the rule set, in the set's order (R4).

use arrayvec::ArrayVec;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::checked::{Checked, Outcome};
use super::run::{Demand, Run};
use crate::cable::{Conductor, adiabatic_k, linear_resistance};
use crate::citation::{Citation, Seen};
use crate::device::{Polarity, Supply};
use crate::error::Error;
use crate::network::deliver;
use crate::protection::{Guard, least_rating};
use crate::quantity::{
    ElectricCurrent, ElectricPotential, ElectricalResistance, Length, Power, Ratio, ThermodynamicTemperature,
};
use crate::rules::{Ampacity, AmpacityQuery, Check, Key};

/// Everything found about one run.
#[derive(Clone, Debug, PartialEq)]
pub struct Judgement {
    /// Design current in the worst hour.
    pub current: ElectricCurrent,
    /// Its part of three hours or more.
    pub continuous: ElectricCurrent,
    /// Ampacity after all factors, where the set tabulates it.
    pub ampacity: Option<Ampacity>,
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
    /// The checks, in the rule set's order.
    pub checks: ArrayVec<Checked, 24>,
}

impl Judgement {
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

/// Where a rule comes from that is this library's own (`R` numbers of its design).
const fn own(place: &'static str) -> Citation {
    Citation::new("design rule", place, Seen::Derived)
}

/// Upper conventional current of an overload device over the conductor's: the general rule behind R5.
const OVERLOAD: Citation = Citation::new("IEC 60364-4-43:2008", "433.1", Seen::Page);
/// A device that protects against overload and breaks the fault also protects against short-circuit.
const BREAKS_AND_PROTECTS: Citation = Citation::new("IEC 60364-4-43:2008", "435.1", Seen::Recalled);
const ADIABATIC: Citation = Citation::new("IEC 60364-4-43:2008", "434.5.2, Table 43A", Seen::Page);
/// Longest opening time of an instantaneous trip, s.
const INSTANTANEOUS_S: f64 = 0.1;
const INSTANTANEOUS: Citation = Citation::new("IEC 60898-1", "instantaneous tripping below 0.1 s", Seen::Recalled);

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
    let ampacity = run.rules.ampacity(&AmpacityQuery {
        size: thinner.size,
        rating_degC,
        installation: run.installation,
        ambient: run.ambient,
        space: run.space,
        bundled_conductors: run.bundled_conductors,
    });

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

    let drop = current * resistance;
    let end_voltage = run.beginning - drop;
    let path_drop: Ratio = (run.drop_before + drop) / run.nominal;
    let least_fault = run.weakest_source.map(|s| s.emf / (s.resistance + hot_ohms));

    let mut judged = Judgement {
        current,
        continuous,
        ampacity: None,
        temperature,
        resistance,
        drop,
        path_drop,
        end_voltage,
        loss: current * current * resistance,
        least_fault,
        checks: ArrayVec::new(),
    };
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
            Check::DeviceProtects => push(facts.device_protects()),
            Check::OpensLate => push(facts.opens_late()),
            Check::Drop => push(Some(facts.drop(path_drop))),
            Check::LoadVoltage => push(facts.load_voltage(end_voltage)),
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

/// The lowest temperature rating of insulation, lug, terminal and device picks the column (R4). Under `us` the
/// terminal has a check of its own; under `iec` an unmarked terminal counts as made for PVC, 70 °C.
fn counted_rating(run: &Run, conductor: &Conductor, guard: Option<&Guard>) -> f64 {
    let insulation = conductor.insulation.rating_degC();
    if run.rules.set().key == Key::Us {
        return insulation;
    }
    let marked = run.terminal.map(|t| t.get::<degree_celsius>());
    let device = guard.and_then(|g| g.terminal_degC);
    let lowest = match (marked, device) {
        (Some(a), Some(b)) => Some(a.min(b)),
        (one, other) => one.or(other),
    };
    match (lowest, run.rules.unmarked_terminal_degC()) {
        (Some(marked), _) => insulation.min(marked),
        (None, Some(usual)) => insulation.min(usual),
        (None, None) => insulation,
    }
}

/// Loop of a run at one conductor temperature: positive and negative, or the stated return, and the joints (R1, R9).
fn loop_resistance(
    run: &Run,
    positive: &Conductor,
    negative: &Conductor,
    temperature: ThermodynamicTemperature,
) -> Result<ElectricalResistance, Error> {
    let of = |conductor: &Conductor, length: Length| -> Result<ElectricalResistance, Error> {
        Ok(linear_resistance(conductor, temperature)? * length)
    };
    let back = match run.return_resistance {
        Some(stated) => stated,
        None => of(negative, run.negative_length)?,
    };
    Ok(of(positive, run.positive_length)? + back + run.joints)
}

/// Continuous and whole current in the worst hour.
fn drawn(run: &Run, resistance: ElectricalResistance) -> Result<(ElectricCurrent, ElectricCurrent), Error> {
    Ok(match run.demand {
        Demand::Current { continuous, other } => (continuous, continuous + other),
        Demand::Power { power, continuous } => {
            let current = deliver(run.beginning, resistance, power)?.current;
            (if continuous { current } else { ElectricCurrent::new::<ampere>(0.0) }, current)
        }
    })
}

/// Conductor temperature at a current: the rise goes with the square of the current, from ambient at none to the
/// rating at the ampacity. Slightly high below the ampacity, since a cooler conductor also loses less.
fn operating_temperature(
    run: &Run,
    current: ElectricCurrent,
    ampacity: Option<&Ampacity>,
    rating: ThermodynamicTemperature,
) -> ThermodynamicTemperature {
    let Some(ampacity) = ampacity else { return rating };
    let used: f64 = (current / ampacity.corrected).get::<ratio>();
    let (ambient, top) = (run.ambient.get::<degree_celsius>(), rating.get::<degree_celsius>());
    let rise = (top - ambient) * used * used;
    ThermodynamicTemperature::new::<degree_celsius>((ambient + rise.max(0.0)).min(top).max(ambient))
}

/// What the checks of one run share.
struct Facts<'a> {
    run: &'a Run,
    thinner: &'a Conductor,
    guard: Option<&'a Guard>,
    ampacity: &'a Result<Ampacity, Error>,
    current: ElectricCurrent,
    continuous: ElectricCurrent,
}

impl Facts<'_> {
    fn admitted(&self, conductor: &Conductor) -> Option<Checked> {
        match self.run.rules.admits(conductor, self.run.moving) {
            Ok(()) => None,
            Err(Error::Refused { why, rule, .. }) => {
                Some(Checked::plain(Check::Conductor, Outcome::Failed, why, rule))
            }
            Err(_) => Some(Checked::plain(
                Check::Conductor,
                Outcome::NotChecked,
                "conductor material and class",
                own("R18"),
            )),
        }
    }

    fn least_size(&self) -> Checked {
        let least = self.run.rules.least_size();
        Checked::at_least(
            Check::LeastSize,
            self.thinner.size.area_mm2(),
            least.value.area_mm2(),
            "mm²",
            "mechanical minimum of the conductor",
            least.citation,
        )
    }

    /// (a) of R4, `us` only: the terminal's column, before derating.
    fn terminal_column(&self) -> Option<Checked> {
        let factor = self.run.rules.continuous_factor();
        let need = factor.value * self.continuous + (self.current - self.continuous);
        let marked = self.run.terminal.map(|t| t.get::<degree_celsius>());
        let device = self.guard.and_then(|g| g.terminal_degC);
        let marked = match (marked, device) {
            (Some(a), Some(b)) => Some(a.min(b)),
            // A mark counts only where both ends carry one.
            (Some(a), None) if self.guard.is_none() => Some(a),
            (None, Some(_)) | (Some(_) | None, None) => None,
        };
        match self.run.rules.terminal_column(self.thinner.size, need, marked) {
            Ok(None) => None,
            Ok(Some((cell, column))) => Some(Checked::at_most(
                Check::TerminalColumn,
                need.get::<ampere>(),
                cell.value,
                "A",
                match column {
                    "60 °C" => "1.25 × continuous + rest, 60 °C column of the terminal",
                    "75 °C" => "1.25 × continuous + rest, 75 °C column of the terminal",
                    _ => "1.25 × continuous + rest, terminal's column",
                },
                cell.citation,
            )),
            Err(error) => Some(not_tabulated(Check::TerminalColumn, "terminal's column", error)),
        }
    }

    /// (b) of R4.
    fn ampacity(&self) -> Checked {
        match self.ampacity {
            Ok(ampacity) => Checked::at_most(
                Check::Ampacity,
                self.current.get::<ampere>(),
                ampacity.corrected.get::<ampere>(),
                "A",
                match self.run.rules.set().key {
                    Key::Iec => "design current Ib against Iz after all factors",
                    _ => "design current against ampacity after all factors",
                },
                worst_citation(ampacity),
            ),
            Err(error) => not_tabulated(Check::Ampacity, "current against the conductor's table", *error),
        }
    }

    fn device_carries(&self) -> Option<Checked> {
        let device = self.guard?.device;
        let factor = self.run.rules.continuous_factor();
        let carries = Ratio::new::<ratio>(device.family.data().continuous_ratio);
        let other = self.current - self.continuous;
        let need = least_rating(self.continuous, other, carries, device.full_rated, factor.value);
        Some(Checked::at_least(
            Check::DeviceCarries,
            device.rating.get::<ampere>(),
            need.get::<ampere>(),
            "A",
            "rating of the device against the current it carries for hours",
            if factor.value > 1.0 { factor.citation } else { own("R5") },
        ))
    }

    /// (c) of R4.
    fn device_protects(&self) -> Option<Checked> {
        let device = self.guard?.device;
        if !device.family.data().overload {
            return Some(Checked::plain(
                Check::DeviceProtects,
                Outcome::Failed,
                "the family opens on short-circuit only; add an overload device",
                device.family.data().source,
            ));
        }
        Some(match self.ampacity {
            Ok(ampacity) => {
                let limit = self.run.rules.device_limit(self.thinner.size, ampacity.corrected);
                let mut citation = limit.citation;
                if worst_citation(ampacity).seen == Seen::Recalled {
                    citation = citation.recalled();
                }
                Checked::at_most(
                    Check::DeviceProtects,
                    device.rating.get::<ampere>(),
                    limit.most.get::<ampere>(),
                    "A",
                    limit.rule,
                    citation,
                )
            }
            Err(error) => not_tabulated(Check::DeviceProtects, "device against the conductor's table", *error),
        })
    }

    /// R5: families whose upper conventional current lies above 1.45 × rating; under `iec` every family.
    fn opens_late(&self) -> Option<Checked> {
        let device = self.guard?.device;
        if !device.family.data().overload {
            return None;
        }
        let what = "current at which the device has opened within its conventional time, against 1.45 × ampacity";
        let Some(times) = device.family.operating_ratio(device.rating) else {
            return Some(Checked::plain(Check::OpensLate, Outcome::NotChecked, what, device.family.data().source));
        };
        let limit = self.run.rules.overload_ratio();
        if self.run.rules.set().key != Key::Iec && times <= limit.value {
            return None;
        }
        let ampacity = self.ampacity.as_ref().ok()?;
        Some(Checked::at_most(
            Check::OpensLate,
            times * device.rating.get::<ampere>(),
            limit.value * ampacity.corrected.get::<ampere>(),
            "A",
            what,
            OVERLOAD,
        ))
    }

    fn drop(&self, path_drop: Ratio) -> Checked {
        let (limit, citation) = match self.run.drop {
            Some(stated) => (stated, Citation::new("the site file", "drop", Seen::Stated)),
            None => {
                let limit = self.run.rules.drop_limit(self.run.usage);
                (limit.ratio, limit.citation)
            }
        };
        Checked::at_most(
            Check::Drop,
            path_drop.get::<ratio>() * 100.0,
            limit.get::<ratio>() * 100.0,
            "%",
            "voltage drop from the source, per cent of nominal",
            citation,
        )
    }

    fn load_voltage(&self, end_voltage: ElectricPotential) -> Option<Checked> {
        let least = self.run.least_voltage?;
        Some(Checked::at_least(
            Check::LoadVoltage,
            end_voltage.get::<volt>(),
            least.get::<volt>(),
            "V",
            "voltage at the far end with the source at cut-off",
            Citation::new("the site file", "least", Seen::Stated),
        ))
    }

    fn breaking(&self) -> Option<Checked> {
        let device = self.guard?.device;
        let what = "breaking capacity against the greatest prospective current";
        Some(match (device.breaking, self.run.greatest_fault) {
            (Some(breaking), Some(fault)) => Checked::at_least(
                Check::Breaking,
                breaking.get::<ampere>() / 1000.0,
                fault.get::<ampere>() / 1000.0,
                "kA",
                what,
                own("R6"),
            ),
            (None, _) => Checked::plain(
                Check::Breaking,
                Outcome::NotChecked,
                "breaking capacity on DC is not stated",
                own("R6"),
            ),
            (_, None) => Checked::plain(
                Check::Breaking,
                Outcome::NotChecked,
                "greatest prospective current is not known; state the bank's short_circuit or internal_resistance",
                own("R6"),
            ),
        })
    }

    /// R6: the least prospective current must operate the device before the conductor's limit.
    fn least_fault(&self, least: Option<ElectricCurrent>) -> Option<Checked> {
        let device = self.guard?.device;
        let Some(least) = least else {
            return Some(Checked::plain(
                Check::LeastFault,
                Outcome::NotChecked,
                "least prospective current is not known; state the bank's internal_resistance",
                own("R6"),
            ));
        };
        let Some(times) = device.family.operating_ratio(device.rating) else {
            return Some(Checked::plain(
                Check::LeastFault,
                Outcome::NotChecked,
                "no current is held at which this family surely opens",
                own("R6"),
            ));
        };
        Some(Checked::at_least(
            Check::LeastFault,
            least.get::<ampere>(),
            times * device.rating.get::<ampere>(),
            "A",
            "least prospective current at the far end against the current that surely opens the device",
            own("R6"),
        ))
    }

    /// The conductor's withstand of the greatest fault until the device opens.
    fn withstand(&self) -> Option<Checked> {
        let guard = self.guard?;
        let device = guard.device;
        let data = device.family.data();
        let what = "let-through energy I²t against the conductor's k²S²";
        let missing = |what| Some(Checked::plain(Check::Withstand, Outcome::NotChecked, what, ADIABATIC));
        let Some(fault) = self.run.greatest_fault else {
            return missing("withstand of the conductor: the greatest prospective current is not known");
        };
        let area = self.thinner.size.area_mm2();
        let Ok(k) = adiabatic_k(self.thinner.material, self.thinner.insulation, self.thinner.size) else {
            return missing("withstand of the conductor: no k of its material is held");
        };
        let bearable = k.value * k.value * area * area;
        let amps = fault.get::<ampere>();
        if let Some(stated) = guard.let_through_A2s {
            return Some(Checked::at_most(Check::Withstand, stated, bearable, "A²s", what, ADIABATIC));
        }
        if let Some(times) = device.family.instantaneous_ratio()
            && amps >= times * device.rating.get::<ampere>()
        {
            let energy = amps * amps * INSTANTANEOUS_S;
            return Some(Checked::at_most(Check::Withstand, energy, bearable, "A²s", what, INSTANTANEOUS));
        }
        // A fuse that guards against overload and breaks the fault guards against short-circuit too.
        let guards = self.device_protects().is_some_and(|c| c.outcome == Outcome::Passed)
            && self.opens_late().is_none_or(|c| c.outcome == Outcome::Passed)
            && device.breaking.is_some_and(|b| b >= fault);
        if data.is_fuse && data.overload && guards {
            return Some(Checked::plain(
                Check::Withstand,
                Outcome::Passed,
                "the fuse guards against overload and breaks the fault, so the conductor withstands it",
                BREAKS_AND_PROTECTS,
            ));
        }
        missing("withstand of the conductor: state let_through (I²t) of the device")
    }

    fn supply(&self) -> Option<Checked> {
        let device = self.guard?.device;
        let what = "voltage rating on DC against the highest voltage of the system";
        Some(match device.supply {
            Supply::AcOnly => Checked::plain(
                Check::DeviceSupply,
                Outcome::Failed,
                "the device is rated for AC only; on DC its arc need not go out: use one rated for DC",
                own("R6"),
            ),
            Supply::NotStated => Checked::plain(
                Check::DeviceSupply,
                Outcome::NotChecked,
                "voltage rating on DC is not stated",
                own("R6"),
            ),
            Supply::Dc(rated) => Checked::at_least(
                Check::DeviceSupply,
                rated.get::<volt>(),
                self.run.highest.get::<volt>(),
                "V",
                if device.polarity == Polarity::Marked {
                    "voltage rating on DC (polarity marked: connect + to the source)"
                } else {
                    what
                },
                own("R6"),
            ),
        })
    }

    fn termination(&self) -> Option<Checked> {
        let (least, most) = self.guard?.terminal_range?;
        let area = self.thinner.size.area_mm2();
        let stated = Citation::new("the site file", "terminal_range", Seen::Stated);
        Some(if area < least.area_mm2() {
            Checked::at_least(Check::Termination, area, least.area_mm2(), "mm²", "least conductor of the device's terminal", stated)
        } else {
            Checked::at_most(Check::Termination, area, most.area_mm2(), "mm²", "greatest conductor of the device's terminal", stated)
        })
    }
}

/// A recalled cell or factor marks the whole result.
fn worst_citation(ampacity: &Ampacity) -> Citation {
    let recalled = ampacity.factors.iter().any(|f| f.citation.seen == Seen::Recalled);
    if recalled { ampacity.base.citation.recalled() } else { ampacity.base.citation }
}

/// A table without an answer is a check not made.
fn not_tabulated(check: Check, what: &'static str, error: Error) -> Checked {
    let citation = match error {
        Error::TableEnds { table, .. } | Error::NotTabulated { table, .. } => table,
        _ => own("R4"),
    };
    Checked::plain(check, Outcome::NotChecked, what, citation)
}
