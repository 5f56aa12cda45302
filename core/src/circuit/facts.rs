//! The single checks of a run (R3 to R6, R17, R18): each compares one value with one limit and names both sources.

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::checked::{Checked, Outcome};
use super::run::Run;
use crate::cable::{Conductor, Material, adiabatic_k};
use crate::citation::{Citation, Seen};
use crate::device::{Polarity, Supply, least_let_through_A2s};
use crate::error::Error;
use crate::protection::{Earthing, Guard, least_rating};
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Ratio};
use crate::rules::{Ampacity, Check, DeviceLimit, Key};

/// Where a rule comes from that is this library's own (`R` numbers of its design).
const fn own(place: &'static str) -> Citation {
    Citation::new("design rule", place, Seen::Derived)
}

/// A device that protects against overload and breaks the fault also protects against short-circuit.
const BREAKS_AND_PROTECTS: Citation = Citation::new("IEC 60364-4-43:2008", "435.1", Seen::Recalled);
const ADIABATIC_IEC: Citation = Citation::new("IEC 60364-4-43:2008", "434.5.2, Table 43A", Seen::Page);
/// The same law for the sets that print no k: heat of the fault kept in the metal.
const ADIABATIC_LAW: Citation =
    Citation::new("adiabatic law", "k of the metal between rating and short-circuit limit", Seen::Derived);
/// A greatest fault current from capacity alone is known to a factor at best: nothing conforms by it.
const BY_THUMB: Citation = Citation::new(
    "common practice, no source",
    "fault current from capacity by rule of thumb",
    Seen::Practice,
);
/// Longest opening time of an instantaneous trip, s.
const INSTANTANEOUS_S: f64 = 0.1;
const INSTANTANEOUS: Citation =
    Citation::new("IEC 60898-1", "instantaneous tripping below 0.1 s", Seen::Recalled);

const LET_THROUGH: Citation = Citation::new("the site file", "let_through", Seen::Stated);

/// What the checks of one run share.
pub(super) struct Facts<'a> {
    pub run: &'a Run,
    pub thinner: &'a Conductor,
    pub guard: Option<&'a Guard>,
    pub ampacity: &'a Result<Ampacity, Error>,
    pub current: ElectricCurrent,
    pub continuous: ElectricCurrent,
}

impl Facts<'_> {
    /// The term of the rule set: one for the American sets, one for the international ones.
    fn term(&self, american: &'static str, international: &'static str) -> &'static str {
        match self.run.rules.set().key {
            Key::Us | Key::CraftUs => american,
            Key::Iec | Key::CraftIso => international,
        }
    }

    fn adiabatic(&self) -> Citation {
        match self.run.rules.set().key {
            Key::Iec => ADIABATIC_IEC,
            Key::Us | Key::CraftIso | Key::CraftUs => ADIABATIC_LAW,
        }
    }

    pub fn admitted(&self, conductor: &Conductor) -> Option<Checked> {
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

    pub fn least_size(&self) -> Checked {
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

    /// Marked rating of the terminals at both ends, as far as marks count: one without a mark makes the pair unmarked.
    fn marked_degC(&self) -> Option<f64> {
        let marked = self.run.terminal.map(|t| t.get::<degree_celsius>());
        let marked = match (marked, self.guard) {
            (Some(terminal), Some(guard)) => guard.terminal_degC.map(|device| device.min(terminal)),
            (terminal, None) => terminal,
            (None, Some(_)) => None,
        };
        // Insulation below the terminal's column counts instead of it.
        let insulation = self.thinner.insulation.rating_degC();
        if insulation < 75.0 { Some(marked.map_or(insulation, |m| m.min(insulation))) } else { marked }
    }

    fn factored(&self) -> ElectricCurrent {
        self.run.rules.continuous_factor().value * self.continuous + (self.current - self.continuous)
    }

    /// (a) of R4, `us` only: the terminal's column, before derating.
    pub fn terminal_column(&self) -> Option<Checked> {
        let need = self.factored();
        if self.thinner.material != Material::Copper
            && let Err(error) = self.ampacity
        {
            let applies = self.run.rules.set().terminal.is_some();
            return applies.then(|| not_tabulated(Check::TerminalColumn, "terminal's column", *error));
        }
        match self.run.rules.terminal_column(self.thinner.size, need, self.marked_degC()) {
            Ok(None) => None,
            Ok(Some((cell, column))) => Some(Checked::at_most(
                Check::TerminalColumn,
                need.get::<ampere>(),
                cell.value,
                "A",
                match (column, self.run.rules.continuous_factor().value == 1.25) {
                    ("60 °C", true) => "1.25 × continuous + rest, 60 °C column of the terminal",
                    ("75 °C", true) => "1.25 × continuous + rest, 75 °C column of the terminal",
                    ("60 °C", false) => {
                        "the user's factor × continuous + rest, 60 °C column of the terminal"
                    }
                    ("75 °C", false) => {
                        "the user's factor × continuous + rest, 75 °C column of the terminal"
                    }
                    _ => "factored current, terminal's column",
                },
                // Without a mark the column itself is a rule's choice.
                match (self.marked_degC(), self.run.rules.set().terminal) {
                    (None, Some(rule)) => rule.citation,
                    _ => cell.citation,
                },
            )),
            Err(error) => Some(not_tabulated(Check::TerminalColumn, "terminal's column", error)),
        }
    }

    /// (b) of R4.
    pub fn ampacity(&self) -> Checked {
        match self.ampacity {
            Ok(ampacity) => Checked::at_most(
                Check::Ampacity,
                self.current.get::<ampere>(),
                ampacity.corrected.get::<ampere>(),
                "A",
                self.term(
                    "design current against ampacity after all factors",
                    "design current Ib against current-carrying capacity Iz after all factors",
                ),
                worst_citation(ampacity),
            ),
            Err(error) => not_tabulated(Check::Ampacity, "current against the conductor's table", *error),
        }
    }

    pub fn device_carries(&self) -> Option<Checked> {
        let device = self.guard?.device;
        let factor = self.run.rules.continuous_factor();
        let in_full = device.family.data().continuous_ratio;
        let carries = Ratio::new::<ratio>(in_full);
        let other = self.current - self.continuous;
        let need = least_rating(self.continuous, other, carries, device.full_rated, factor.value);
        Some(Checked::at_least(
            Check::DeviceCarries,
            device.rating.get::<ampere>(),
            need.get::<ampere>(),
            "A",
            if factor.value == 1.25 && !device.full_rated {
                "rating of the device against 1.25 × continuous + rest"
            } else if factor.value > 1.0 && !device.full_rated {
                "rating of the device against the user's factor × continuous + rest"
            } else if device.full_rated || in_full >= 1.0 {
                "rating of the device, which is made to carry all of it for hours, against the design current"
            } else {
                "rating of the device, of which it carries 80 % for hours, against continuous / 0.8 + rest"
            },
            if factor.value > 1.0 { factor.citation } else { own("R5") },
        ))
    }

    /// A start or surge against the device (R16): breakers by the lower edge of their instantaneous trip, the rest by
    /// curves that are not held.
    pub fn device_start(&self) -> Option<Checked> {
        let device = self.guard?.device;
        let total = self.current + self.run.start?;
        if total <= device.rating {
            return None;
        }
        Some(match device.family.data().instantaneous {
            Some((lower, _)) => Checked::at_most(
                Check::DeviceStart,
                total.get::<ampere>(),
                lower * device.rating.get::<ampere>(),
                "A",
                "current while it starts, seconds at most, against the least that trips the breaker at once",
                device.family.data().source.recalled(),
            ),
            None => match device.family.non_operating_ratio(device.rating) {
                // What it carries for an hour it carries for the seconds of a start.
                Some(multiple) if total.get::<ampere>() <= multiple * device.rating.get::<ampere>() => {
                    Checked::at_most(
                        Check::DeviceStart,
                        total.get::<ampere>(),
                        multiple * device.rating.get::<ampere>(),
                        "A",
                        "current while it starts against that on which the device must not open within its \
                         conventional time (1 h to 4 h)",
                        device.family.data().source.recalled(),
                    )
                }
                _ => Checked::plain(
                    Check::DeviceStart,
                    Outcome::NotChecked,
                    "start or surge above the device's rating: compare with its time-current curve, which is not held",
                    own("R16"),
                ),
            },
        })
    }

    /// (c) of R4.
    pub fn device_protects(&self) -> Option<Checked> {
        let device = self.guard?.device;
        if !device.family.data().overload {
            return Some(Checked::plain(
                Check::DeviceProtects,
                Outcome::Failed,
                "the family opens on short-circuit only; add an overload device",
                device.family.data().source,
            ));
        }
        if let Some(rule) = self.run.rules.refuses_family(device.family) {
            return Some(Checked::plain(
                Check::DeviceProtects,
                Outcome::Failed,
                "a supplementary protector alone does not guard a circuit; put a fuse or breaker before it",
                rule,
            ));
        }
        Some(match self.ampacity {
            Ok(ampacity) => {
                let (limit, by_terminal) = self.device_limit(ampacity);
                let citation = match worst_citation(ampacity) {
                    worse if matches!(worse.seen, Seen::Recalled | Seen::Stated) => worse,
                    _ => limit.citation,
                };
                Checked::at_most(
                    Check::DeviceProtects,
                    device.rating.get::<ampere>(),
                    limit.most.get::<ampere>(),
                    "A",
                    match (by_terminal, limit.rule) {
                        (true, "next standard rating above the ampacity") => {
                            "next standard rating above the terminal's column"
                        }
                        (true, "standard rating not above the ampacity") => {
                            "standard rating not above the terminal's column"
                        }
                        (_, rule) => rule,
                    },
                    citation,
                )
            }
            Err(error) => {
                not_tabulated(Check::DeviceProtects, "device against the conductor's table", *error)
            }
        })
    }

    /// Greatest device on this conductor, and whether the terminal's column decides: where it admits less than the
    /// derated conductor, the device guards the terminal.
    pub fn device_limit(&self, ampacity: &Ampacity) -> (DeviceLimit, bool) {
        let column = self
            .run
            .rules
            .terminal_column(self.thinner.size, self.factored(), self.marked_degC())
            .ok()
            .flatten()
            .map(|(cell, _)| ElectricCurrent::new::<ampere>(cell.value));
        let lesser = column.filter(|c| *c < ampacity.corrected);
        let limit = self.run.rules.device_limit(self.thinner.size, lesser.unwrap_or(ampacity.corrected));
        (limit, lesser.is_some())
    }

    /// R5: families whose upper conventional current lies above 1.45 × rating; under `iec` every family.
    pub fn opens_late(&self) -> Option<Checked> {
        let device = self.guard?.device;
        if !device.family.data().overload {
            return None;
        }
        let what = self.term(
            "current at which the device opens within its conventional time (1 h to 4 h), against 1.45 × ampacity",
            "current I2 at which the device opens within its conventional time (1 h to 4 h), against 1.45 × Iz",
        );
        let Some(times) = device.family.operating_ratio(device.rating) else {
            return Some(Checked::plain(
                Check::OpensLate,
                Outcome::NotChecked,
                what,
                device.family.data().source,
            ));
        };
        let limit = self.run.rules.overload_ratio();
        if self.run.rules.set().key != Key::Iec && times <= limit.value {
            return None;
        }
        let Ok(ampacity) = self.ampacity else {
            return Some(Checked::plain(Check::OpensLate, Outcome::NotChecked, what, limit.citation));
        };
        Some(Checked::at_most(
            Check::OpensLate,
            times * device.rating.get::<ampere>(),
            limit.value * ampacity.corrected.get::<ampere>(),
            "A",
            what,
            own_factor(ampacity).unwrap_or(limit.citation),
        ))
    }

    pub fn drop(&self, path_drop: Ratio) -> Checked {
        let (limit, citation) = if let Some(stated) = self.run.drop {
            (stated, Citation::new("the site file", "drop", Seen::Stated))
        } else {
            let limit = self.run.rules.drop_limit(self.run.usage);
            (limit.ratio, limit.citation)
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

    pub fn load_voltage(&self, end_voltage: ElectricPotential) -> Option<Checked> {
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

    pub fn start_voltage(&self, end: ElectricPotential, own: ElectricalResistance) -> Option<Checked> {
        let (extra, least) = self.run.start.zip(self.run.least_voltage)?;
        let volts: ElectricPotential = match self.run.started {
            Some((beginning, through)) => beginning - through * own,
            None => end - extra * (self.run.resistance_before + own),
        };
        Some(Checked::at_least(
            Check::StartVoltage,
            volts.get::<volt>().max(0.0),
            least.get::<volt>(),
            "V",
            "voltage at the far end while it starts, with the source at cut-off",
            Citation::new("the site file", "least", Seen::Stated),
        ))
    }

    pub fn breaking(&self) -> Option<Checked> {
        let device = self.guard?.device;
        let what = self.term(
            "interrupting rating against the greatest prospective current",
            "breaking capacity against the greatest prospective current",
        );
        if device.supply == Supply::AcOnly {
            return Some(Checked::plain(
                Check::Breaking,
                Outcome::NotChecked,
                "what it breaks is stated for AC, not for DC",
                own("R6"),
            ));
        }
        Some(match (device.breaking, self.run.greatest_fault) {
            (Some(breaking), Some(fault)) => Checked::at_least(
                Check::Breaking,
                breaking.get::<ampere>() / 1000.0,
                fault.get::<ampere>() / 1000.0,
                "kA",
                what,
                if self.run.fault_by_thumb { BY_THUMB } else { own("R6") },
            ),
            (Some(breaking), None) if self.run.fault_floor.is_some_and(|floor| breaking < floor) => {
                Checked::at_least(
                    Check::Breaking,
                    breaking.get::<ampere>() / 1000.0,
                    self.run.fault_floor.map_or(0.0, |floor| floor.get::<ampere>() / 1000.0),
                    "kA",
                    "what it breaks against the part of the greatest prospective current that is known",
                    own("R6"),
                )
            }
            (None, _) => Checked::plain(
                Check::Breaking,
                Outcome::NotChecked,
                self.term("interrupting rating on DC is not stated", "breaking capacity on DC is not stated"),
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
    pub fn least_fault(&self, least: Option<ElectricCurrent>) -> Option<Checked> {
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
                "no current is held at which this family opens",
                own("R6"),
            ));
        };
        Some(Checked::at_least(
            Check::LeastFault,
            least.get::<ampere>(),
            times * device.rating.get::<ampere>(),
            "A",
            "least prospective current at the far end against the current at which the device opens",
            own("R6"),
        ))
    }

    /// The conductor's withstand of the greatest fault until the device opens.
    pub fn withstand(&self) -> Option<Checked> {
        let guard = self.guard?;
        let device = guard.device;
        let data = device.family.data();
        let what = "let-through energy I²t against the conductor's k²S²";
        let adiabatic = self.adiabatic();
        let missing = |what| Some(Checked::plain(Check::Withstand, Outcome::NotChecked, what, adiabatic));
        let Some(fault) = self.run.greatest_fault else {
            return missing("withstand of the conductor: the greatest prospective current is not known");
        };
        let area = self.thinner.size.area_mm2();
        let Ok(k) = adiabatic_k(self.thinner.material, self.thinner.insulation, self.thinner.size) else {
            return missing("withstand of the conductor: no k of its material is held");
        };
        let bearable = k.value * k.value * area * area;
        let amps = fault.get::<ampere>();
        if device.supply == Supply::AcOnly {
            return missing(
                "withstand of the conductor: what the device lets through is stated for AC, not for DC",
            );
        }
        if let Some(stated) = guard.let_through_A2s {
            if stated < least_let_through_A2s(device.family, device.rating).0 {
                return missing(
                    "withstand of the conductor: the stated let_through is less than any such device lets pass",
                );
            }
            // The limit is the law's, but passing it rests on what is stated.
            let citation = if stated <= bearable { LET_THROUGH } else { adiabatic };
            return Some(Checked::at_most(Check::Withstand, stated, bearable, "A²s", what, citation));
        }
        if let Some(times) = device.family.instantaneous_ratio()
            && amps >= times * device.rating.get::<ampere>()
        {
            let energy = amps * amps * INSTANTANEOUS_S;
            // A bound from above: passing it is proof, failing it is none.
            if energy <= bearable {
                return Some(Checked::at_most(
                    Check::Withstand,
                    energy,
                    bearable,
                    "A²s",
                    what,
                    INSTANTANEOUS,
                ));
            }
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
                match self.run.rules.set().key {
                    Key::Iec => BREAKS_AND_PROTECTS,
                    Key::Us | Key::CraftIso | Key::CraftUs => own("R6"),
                },
            ));
        }
        missing("withstand of the conductor: state let_through (I²t) of the device")
    }

    pub fn supply(&self) -> Option<Checked> {
        let device = self.guard?.device;
        let what = "voltage rating on DC against the highest voltage of the system";
        let rated = device.supply.voltage(self.run.earthing == Earthing::Floating);
        Some(match (rated, device.supply) {
            (None, Supply::AcOnly) => Checked::plain(
                Check::DeviceSupply,
                Outcome::Failed,
                "the device is rated for AC only; on DC its arc need not go out: use one rated for DC",
                own("R6"),
            ),
            (None, _) => Checked::plain(
                Check::DeviceSupply,
                Outcome::NotChecked,
                "voltage rating on DC is not stated",
                own("R6"),
            ),
            (Some(rated), _) => Checked::at_least(
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

    pub fn termination(&self) -> Option<Checked> {
        let (least, most) = self.guard?.terminal_range?;
        let area = self.thinner.size.area_mm2();
        let stated = Citation::new("the site file", "terminal_range", Seen::Stated);
        Some(if area < least.area_mm2() {
            Checked::at_least(
                Check::Termination,
                area,
                least.area_mm2(),
                "mm²",
                "least conductor of the device's terminal",
                stated,
            )
        } else {
            Checked::at_most(
                Check::Termination,
                area,
                most.area_mm2(),
                "mm²",
                "greatest conductor of the device's terminal",
                stated,
            )
        })
    }
}

/// A factor of the user's own marks the whole result, and so does a recalled cell or factor.
fn worst_citation(ampacity: &Ampacity) -> Citation {
    if let Some(stated) = own_factor(ampacity) {
        return stated;
    }
    let recalled = ampacity.factors.iter().any(|f| f.citation.seen == Seen::Recalled);
    if recalled { ampacity.base.citation.recalled() } else { ampacity.base.citation }
}

/// Source of a factor that the user states in place of the set's.
fn own_factor(ampacity: &Ampacity) -> Option<Citation> {
    ampacity.factors.iter().map(|f| f.citation).find(|c| c.seen == Seen::Stated)
}

/// A table without an answer is a check not made.
fn not_tabulated(check: Check, what: &'static str, error: Error) -> Checked {
    let citation = match error {
        Error::TableEnds { table, .. } | Error::NotTabulated { table, .. } => table,
        _ => own("R4"),
    };
    Checked::plain(check, Outcome::NotChecked, what, citation)
}
