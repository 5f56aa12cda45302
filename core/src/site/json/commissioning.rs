//! The commissioning sheet: the meter it counts with, and its steps.

use alloc::vec::Vec;

use super::common::{Citation, list};
use super::number::{Number, amps, ohms, part, volts};
use super::shape::object;
use super::words::{Driven, Stage, StepKind};
use crate::quantity::{ElectricCurrent, ElectricPotential};
use crate::site::sheet;

object! {
    /// The meter whose errors the tolerances of the sheet include. Two last digits come on top of each accuracy.
    Meter {
        /// Direct voltage, small: drops and joints.
        millivolts: VoltageRange,
        /// Direct voltage.
        volts: VoltageRange,
        /// Direct voltage above that.
        high_volts: VoltageRange,
        /// Direct current through the meter.
        in_line: CurrentRange,
        /// Direct current by a clamp.
        clamp: CurrentRange,
        /// Source of its errors.
        citation: Citation,
    }
}

object! {
    /// A range of a voltmeter.
    VoltageRange {
        /// Where it ends, V.
        up_to_V: Number,
        /// Error as part of the reading.
        accuracy_ratio: Number,
        /// Its last digit, V.
        resolution_V: Number,
    }
}

object! {
    /// A range of an ammeter.
    CurrentRange {
        /// Where it ends, A.
        up_to_A: Number,
        /// Error as part of the reading.
        accuracy_ratio: Number,
        /// Its last digit, A.
        resolution_A: Number,
    }
}

object! {
    /// One step of commissioning; by its kind, the keys that it does not speak of are null.
    CommissioningStep<'a> {
        /// What it is.
        kind: StepKind,
        /// When it is made.
        stage: Stage,
        /// Where; empty where the words say it.
        place: Option<&'a str>,
        /// What is done, or between what is measured.
        what: Option<&'a str>,
        /// Volts to expect.
        expected: Option<ExpectedVoltage>,
        /// Current that may not be exceeded, A; null where not known.
        greatest_A: Number,
        /// A run before there is power.
        run: Option<RunTest<'a>>,
        /// A run under load.
        loaded: Option<LoadedTest<'a>>,
    }
}

object! {
    /// What a voltage should lie between; the error of the meter is in it.
    ExpectedVoltage {
        /// Least, V.
        least_V: Number,
        /// The value itself, V; null where there is only a range.
        value_V: Number,
        /// Greatest, V.
        greatest_V: Number,
    }
}

object! {
    /// What a current should lie between; the error of the meter is in it.
    ExpectedCurrent {
        /// Least, A.
        least_A: Number,
        /// The value itself, A; null where there is only a range.
        value_A: Number,
        /// Greatest, A.
        greatest_A: Number,
    }
}

object! {
    /// One run, dead and with its loads off: polarity, both ways through, insulation, torque.
    RunTest<'a> {
        /// Circuit.
        circuit: &'a str,
        /// Name of its beginning.
        from: &'a str,
        /// Name of its end.
        to: &'a str,
        /// Its insulation resistance; null where none is held for the rule set.
        insulation: Option<InsulationTest>,
    }
}

object! {
    /// Insulation resistance to be reached.
    InsulationTest {
        /// Least, Ω.
        least_ohm: Number,
        /// Test voltage, V.
        test_V: Number,
        /// Source.
        citation: Citation,
    }
}

object! {
    /// One circuit while its own loads run and no other.
    LoadedTest<'a> {
        /// Circuit.
        circuit: &'a str,
        /// What drives the current.
        driven: Driven,
        /// Test current; its range holds the nameplate of the load too.
        current: ExpectedCurrent,
        /// Loop at 20 °C with its joints, Ω.
        resistance_ohm: Number,
        /// Drop along the run, both conductors and all joints.
        drop: ExpectedVoltage,
        /// Drop over current from which the run is refused, Ω.
        refused_ohm: Number,
        /// Volts at the terminals of the source for which those at the end stand, V; null where not known.
        source_V: Number,
        /// Volts at the far end; null where not known.
        end: Option<ExpectedVoltage>,
        /// Joints.
        joints: Vec<JointTest<'a>>,
    }
}

object! {
    /// Like joints of a circuit under its test current.
    JointTest<'a> {
        /// Its kind, or the name of the device or part.
        joint: &'a str,
        /// How many, each to be measured.
        joint_count: u32,
        /// Its resistance is stated, else generic.
        stated: bool,
        /// What one should have, Ω.
        resistance_ohm: Number,
        /// From what on one is refused, Ω.
        refused_ohm: Number,
        /// Volts across one at the test current.
        voltage: ExpectedVoltage,
        /// Volts from which one is refused, V.
        refused_above_V: Number,
        /// Current at which one milliohm too much shows on the meter, A; null where its error hides it.
        one_milliohm_A: Number,
        /// Current at which a joint to be refused shows on the meter, A; null where its error hides it.
        needed_A: Number,
    }
}

impl From<&sheet::Meter> for Meter {
    fn from(meter: &sheet::Meter) -> Self {
        let sheet::Meter { millivolts, volts, high_volts, in_line, clamp } = meter;
        Self {
            millivolts: millivolts.into(),
            volts: volts.into(),
            high_volts: high_volts.into(),
            in_line: in_line.into(),
            clamp: clamp.into(),
            citation: (&sheet::METER).into(),
        }
    }
}

impl From<&sheet::MeterRange<ElectricPotential>> for VoltageRange {
    fn from(range: &sheet::MeterRange<ElectricPotential>) -> Self {
        let sheet::MeterRange { up_to, accuracy, resolution } = *range;
        Self { up_to_V: volts(up_to), accuracy_ratio: part(accuracy), resolution_V: volts(resolution) }
    }
}

impl From<&sheet::MeterRange<ElectricCurrent>> for CurrentRange {
    fn from(range: &sheet::MeterRange<ElectricCurrent>) -> Self {
        let sheet::MeterRange { up_to, accuracy, resolution } = *range;
        Self { up_to_A: amps(up_to), accuracy_ratio: part(accuracy), resolution_A: amps(resolution) }
    }
}

impl From<&sheet::Expected<ElectricPotential>> for ExpectedVoltage {
    fn from(expected: &sheet::Expected<ElectricPotential>) -> Self {
        let sheet::Expected { least, value, greatest } = *expected;
        Self { least_V: volts(least), value_V: value.and_then(volts), greatest_V: volts(greatest) }
    }
}

impl From<&sheet::Expected<ElectricCurrent>> for ExpectedCurrent {
    fn from(expected: &sheet::Expected<ElectricCurrent>) -> Self {
        let sheet::Expected { least, value, greatest } = *expected;
        Self { least_A: amps(least), value_A: value.and_then(amps), greatest_A: amps(greatest) }
    }
}

impl<'a> From<&'a sheet::Step> for CommissioningStep<'a> {
    fn from(step: &'a sheet::Step) -> Self {
        let nothing = Self {
            kind: step.into(),
            stage: (&step.stage()).into(),
            place: None,
            what: None,
            expected: None,
            greatest_A: None,
            run: None,
            loaded: None,
        };
        match step {
            sheet::Step::Task { stage: _, place, what } => {
                Self { place: Some(place), what: Some(what), ..nothing }
            }
            sheet::Step::Voltage { stage: _, place, what, expected } => Self {
                place: Some(place),
                what: Some(what),
                expected: expected.as_ref().map(Into::into),
                ..nothing
            },
            sheet::Step::Current { stage: _, place, what, greatest } => {
                Self { place: Some(place), what: Some(what), greatest_A: greatest.and_then(amps), ..nothing }
            }
            sheet::Step::Run(run) => Self { run: Some(run.into()), ..nothing },
            sheet::Step::Loaded(test) => Self { loaded: Some(test.as_ref().into()), ..nothing },
        }
    }
}

impl<'a> From<&'a sheet::RunTest> for RunTest<'a> {
    fn from(test: &'a sheet::RunTest) -> Self {
        let sheet::RunTest { circuit, from, to, insulation } = test;
        Self {
            circuit,
            from,
            to,
            insulation: insulation.as_ref().map(|(least, test, citation)| InsulationTest {
                least_ohm: ohms(*least),
                test_V: volts(*test),
                citation: citation.into(),
            }),
        }
    }
}

impl<'a> From<&'a sheet::LoadedTest> for LoadedTest<'a> {
    fn from(test: &'a sheet::LoadedTest) -> Self {
        let sheet::LoadedTest {
            circuit,
            driven,
            current,
            resistance,
            drop,
            refused_resistance,
            source,
            end,
            joints,
        } = test;
        Self {
            circuit,
            driven: driven.into(),
            current: current.into(),
            resistance_ohm: ohms(*resistance),
            drop: drop.into(),
            refused_ohm: ohms(*refused_resistance),
            source_V: source.and_then(volts),
            end: end.as_ref().map(Into::into),
            joints: list(joints),
        }
    }
}

impl<'a> From<&'a sheet::JointTest> for JointTest<'a> {
    fn from(test: &'a sheet::JointTest) -> Self {
        let sheet::JointTest {
            joint,
            count,
            stated,
            resistance,
            refused_resistance,
            voltage,
            refused_above,
            one_milliohm,
            current_needed,
        } = test;
        Self {
            joint,
            joint_count: *count,
            stated: *stated,
            resistance_ohm: ohms(*resistance),
            refused_ohm: ohms(*refused_resistance),
            voltage: voltage.into(),
            refused_above_V: volts(*refused_above),
            one_milliohm_A: one_milliohm.and_then(amps),
            needed_A: current_needed.and_then(amps),
        }
    }
}
