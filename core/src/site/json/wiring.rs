//! Circuits with their conductors and devices.

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::common::{Citation, Size, list};
use super::judgement::Judgement;
use super::number::{Number, amps, metres, tidy, volts};
use super::run::Run;
use super::shape::object;
use super::words::{Class, Coating, End, Metal, Polarity, Pole, SupplyKind};
use crate::cable;
use crate::device::{self, Supply as Rated};
use crate::protection;
use crate::quantity::Length;
use crate::rules::Limit;
use crate::site::report::{CircuitLine, DeviceLine};

object! {
    /// One circuit.
    Circuit<'a> {
        /// Name.
        name: &'a str,
        /// Name of its beginning.
        from: &'a str,
        /// Name of its end.
        to: &'a str,
        /// Positive conductor.
        positive: Conductor,
        /// Negative conductor.
        negative: Conductor,
        /// The size was chosen by the design.
        designed: bool,
        /// The task that the checks were made for.
        run: Run,
        /// What was found, with the first device.
        judgement: Judgement,
        /// The same for each further device: those of `devices` without the first, in their order.
        further: Vec<Judgement>,
        /// Devices; the one at the source's end first.
        devices: Vec<Device<'a>>,
        /// Smaller sizes that were not taken.
        refused: Vec<Refused<'a>>,
        /// What decided the size, or uses most of its limit where it is stated.
        governing: &'a str,
        /// Hull or chassis carries the return current.
        chassis: bool,
        /// The line cannot carry its load: its figures are those of a constant current.
        collapsed: bool,
        /// Name of the circuit whose device guards this one from further up; null where there is none.
        guarded_by: Option<&'a str>,
        /// Remark on a figure of common practice for this conductor; null where there is none.
        practice: Option<&'a str>,
    }
}

object! {
    /// One insulated conductor.
    Conductor {
        /// Size.
        size: Size,
        /// Metal.
        material: Metal,
        /// Stranding.
        class: Class,
        /// Surface of the strands.
        coating: Coating,
        /// Compound and temperature rating, as a site file writes them.
        insulation: String,
        /// Greatest conductor temperature in normal service, °C.
        insulation_degC: Number,
    }
}

object! {
    /// A size that was not taken.
    Refused<'a> {
        /// Size.
        size: Size,
        /// Why.
        why: &'a str,
    }
}

object! {
    /// One device of a circuit.
    Device<'a> {
        /// Name.
        name: &'a str,
        /// Family, as a site file names it.
        family: &'static str,
        /// Rated current, A.
        rating_A: Number,
        /// Supply it is rated for.
        supply: Supply,
        /// What it interrupts on direct current at that voltage, A; null where not stated.
        breaking_A: Number,
        /// Whether it may be reversed.
        polarity: Polarity,
        /// It carries its whole rating for hours, beyond what the family gives.
        full_rated: bool,
        /// I²t let through at the greatest prospective current, A²·s; null where not stated.
        let_through_A2s: Number,
        /// Least conductor that its terminals take; null where not stated.
        terminal_least: Option<Size>,
        /// Greatest conductor that its terminals take; null where not stated.
        terminal_greatest: Option<Size>,
        /// Temperature rating of its terminals, °C; null where not marked.
        terminal_degC: Number,
        /// End that it guards.
        end: End,
        /// Name of what stands at that end.
        at: &'a str,
        /// Family or rating were chosen by the design.
        designed: bool,
        /// Voltage and breaking capacity are what must be bought, not what is known of a part.
        specified: bool,
        /// Pole that it sits in.
        pole: Pole,
        /// Conductor between the source's end and the device, m; null where not stated.
        from_source_m: Number,
        /// The most that the rule set admits of it; null where it holds no length.
        distance_limit: Option<DistanceLimit>,
        /// Least prospective current that it must see, A; null where not known.
        least_fault_A: Number,
        /// Greatest prospective current that it must interrupt, A; null where not known.
        greatest_fault_A: Number,
    }
}

object! {
    /// Supply that a device is rated for.
    Supply {
        /// How it is rated.
        kind: SupplyKind,
        /// Greatest voltage on direct current, of the whole device or of each pole, V; null where not stated.
        rated_V: Number,
        /// Poles in series, where it is rated for each pole; else null.
        pole_count: Option<u8>,
    }
}

object! {
    /// Greatest unprotected length.
    DistanceLimit {
        /// At most, m.
        most_m: Number,
        /// Source.
        citation: Citation,
    }
}

impl<'a> From<&'a CircuitLine> for Circuit<'a> {
    fn from(line: &'a CircuitLine) -> Self {
        let CircuitLine {
            name,
            from,
            to,
            positive,
            negative,
            designed,
            run,
            judgement,
            further,
            devices,
            refused,
            governing,
            chassis,
            collapsed,
            guarded_by,
            practice,
        } = line;
        Self {
            name,
            from,
            to,
            positive: positive.into(),
            negative: negative.into(),
            designed: *designed,
            run: run.into(),
            judgement: Judgement::of(judgement, line, devices.first()),
            further: further
                .iter()
                .enumerate()
                .map(|(place, judgement)| Judgement::of(judgement, line, devices.get(place + 1)))
                .collect(),
            devices: list(devices),
            refused: refused.iter().map(|(size, why)| Refused { size: size.into(), why }).collect(),
            governing,
            chassis: *chassis,
            collapsed: *collapsed,
            guarded_by: guarded_by.as_deref(),
            practice: practice.as_deref(),
        }
    }
}

impl From<&cable::Conductor> for Conductor {
    fn from(conductor: &cable::Conductor) -> Self {
        let cable::Conductor { size, material, class, coating, insulation } = conductor;
        Self {
            size: size.into(),
            material: material.into(),
            class: class.into(),
            coating: coating.into(),
            insulation: insulation.to_string(),
            insulation_degC: tidy(insulation.rating_degC()),
        }
    }
}

impl<'a> From<&'a DeviceLine> for Device<'a> {
    fn from(line: &'a DeviceLine) -> Self {
        let DeviceLine {
            name,
            guard,
            end,
            at,
            designed,
            specified,
            pole,
            from_source,
            distance_limit,
            least_fault,
            greatest_fault,
        } = line;
        let protection::Guard { device, let_through_A2s, terminal_range, terminal_degC } = guard;
        let device::Device { family, rating, supply, breaking, polarity, full_rated } = device;
        Self {
            name,
            family: family.data().word,
            rating_A: amps(*rating),
            supply: supply.into(),
            breaking_A: breaking.and_then(amps),
            polarity: polarity.into(),
            full_rated: *full_rated,
            let_through_A2s: let_through_A2s.and_then(tidy),
            terminal_least: terminal_range.as_ref().map(|(least, _)| least.into()),
            terminal_greatest: terminal_range.as_ref().map(|(_, greatest)| greatest.into()),
            terminal_degC: terminal_degC.and_then(tidy),
            end: end.into(),
            at,
            designed: *designed,
            specified: *specified,
            pole: pole.into(),
            from_source_m: from_source.and_then(metres),
            distance_limit: distance_limit.as_ref().map(Into::into),
            least_fault_A: least_fault.and_then(amps),
            greatest_fault_A: greatest_fault.and_then(amps),
        }
    }
}

impl From<&Rated> for Supply {
    fn from(supply: &Rated) -> Self {
        let (rated_V, pole_count) = match *supply {
            Rated::Dc(whole) => (volts(whole), None),
            Rated::PerPole(each, poles) => (volts(each), Some(poles)),
            Rated::AcOnly | Rated::NotStated => (None, None),
        };
        Self { kind: supply.into(), rated_V, pole_count }
    }
}

impl From<&Limit<Length>> for DistanceLimit {
    fn from(limit: &Limit<Length>) -> Self {
        let Limit { value, citation } = limit;
        Self { most_m: metres(*value), citation: citation.into() }
    }
}
