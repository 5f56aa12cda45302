//! Texts of the JSON that are one of few words; where a site file has a word for it, it is the same.

use super::shape::words;
use crate::cable::{self, Material};
use crate::circuit;
use crate::citation;
use crate::device;
use crate::protection;
use crate::rules::{self, LoadUse};
use crate::site::finding;
use crate::site::reading;
use crate::site::sheet;

words! {
    /// Whether a source was seen: read on the page; recalled from memory, never "conforms"; evaluated from a stated
    /// formula; common practice without source; stated by the user.
    Seen for citation::Seen {
        citation::Seen::Page => "page",
        citation::Seen::Recalled => "recalled",
        citation::Seen::Derived => "derived",
        citation::Seen::Practice => "practice",
        citation::Seen::Stated => "stated",
    }
}

words! {
    /// How grave a finding is: it can burn, arc or hurt; breaks a rule or does not work; a datum is missing; worth doing.
    Severity for finding::Severity {
        finding::Severity::Danger => "danger",
        finding::Severity::Nonconforming => "nonconforming",
        finding::Severity::NotChecked => "not_checked",
        finding::Severity::Advice => "advice",
    }
}

words! {
    /// Metal of a conductor.
    Metal for Material {
        Material::Copper => "copper",
        Material::Aluminium => "aluminium",
        Material::CopperCladAluminium => "copper_clad_aluminium",
    }
}

words! {
    /// Stranding after IEC 60228.
    Class for cable::Class {
        cable::Class::Solid => "class_1",
        cable::Class::Stranded => "class_2",
        cable::Class::Flexible => "class_5",
        cable::Class::ExtraFlexible => "class_6",
    }
}

words! {
    /// Surface of the strands.
    Coating for cable::Coating {
        cable::Coating::Plain => "plain",
        cable::Coating::Tinned => "tinned",
    }
}

words! {
    /// Which pole is tied to earth.
    Earthing for protection::Earthing {
        protection::Earthing::Negative => "negative",
        protection::Earthing::Positive => "positive",
        protection::Earthing::Floating => "floating",
    }
}

words! {
    /// Pole that a device sits in.
    Pole for protection::Pole {
        protection::Pole::Positive => "positive",
        protection::Pole::Negative => "negative",
        protection::Pole::Both => "both",
    }
}

words! {
    /// End of a run.
    End for protection::End {
        protection::End::From => "from",
        protection::End::To => "to",
    }
}

words! {
    /// What supply a device is rated for.
    SupplyKind for device::Supply {
        device::Supply::Dc(_) => "dc",
        device::Supply::PerPole(..) => "dc_per_pole",
        device::Supply::AcOnly => "ac_only",
        device::Supply::NotStated => "not_stated",
    }
}

words! {
    /// Whether a device may be reversed: without polarity, or marked + and −.
    Polarity for device::Polarity {
        device::Polarity::None => "none",
        device::Polarity::Marked => "marked",
    }
}

words! {
    /// How a run is installed.
    Installation for rules::Installation {
        rules::Installation::FreeAir => "free_air",
        rules::Installation::SpacedFreeAir => "spaced_free_air",
        rules::Installation::CableFreeAir => "cable_free_air",
        rules::Installation::Clipped => "clipped",
        rules::Installation::Conduit => "conduit",
        rules::Installation::CableInConduit => "cable_in_conduit",
        rules::Installation::InsulatedWall => "insulated_wall",
        rules::Installation::CableInInsulatedWall => "cable_in_insulated_wall",
        rules::Installation::Duct => "duct",
        rules::Installation::Buried => "buried",
        rules::Installation::Loom => "loom",
    }
}

words! {
    /// Where a run lies.
    Space for rules::Space {
        rules::Space::Ordinary => "ordinary",
        rules::Space::Engine => "engine",
        rules::Space::Rooftop => "rooftop",
    }
}

words! {
    /// Use of a circuit, as far as its drop limit depends on it.
    Usage for LoadUse {
        LoadUse::Critical => "critical",
        LoadUse::Lighting => "lighting",
        LoadUse::Other => "other",
        LoadUse::Charging => "charging",
    }
}

words! {
    /// What the far end of a run draws: known currents, or a constant power.
    DemandKind for circuit::Demand {
        circuit::Demand::Current { .. } => "current",
        circuit::Demand::Power { .. } => "power",
    }
}

words! {
    /// Which check of a run.
    CheckKind for rules::Check {
        rules::Check::Conductor => "conductor",
        rules::Check::LeastSize => "least_size",
        rules::Check::TerminalColumn => "terminal_column",
        rules::Check::Ampacity => "ampacity",
        rules::Check::DeviceCarries => "device_carries",
        rules::Check::DeviceStart => "device_start",
        rules::Check::DeviceProtects => "device_protects",
        rules::Check::OpensLate => "opens_late",
        rules::Check::Drop => "drop",
        rules::Check::LoadVoltage => "load_voltage",
        rules::Check::StartVoltage => "start_voltage",
        rules::Check::Breaking => "breaking",
        rules::Check::LeastFault => "least_fault",
        rules::Check::Withstand => "withstand",
        rules::Check::DeviceSupply => "device_supply",
        rules::Check::Termination => "termination",
    }
}

words! {
    /// How a check went. What is not checked has passed nothing.
    Outcome for circuit::Outcome {
        circuit::Outcome::Passed => "passed",
        circuit::Outcome::Failed => "failed",
        circuit::Outcome::NotChecked => "not_checked",
    }
}

words! {
    /// How value and limit relate: the value is at most, or at least, the limit; plain has no numbers.
    Relation for circuit::Relation {
        circuit::Relation::AtMost => "at_most",
        circuit::Relation::AtLeast => "at_least",
        circuit::Relation::Plain => "plain",
    }
}

words! {
    /// When a step of commissioning is made: before power, with power and no load, under load.
    Stage for sheet::Stage {
        sheet::Stage::Dead => "dead",
        sheet::Stage::OpenCircuit => "open_circuit",
        sheet::Stage::Loaded => "loaded",
    }
}

words! {
    /// What a step of commissioning is: a task, volts, amperes, a run before power (`run`) or under load (`loaded`).
    StepKind for sheet::Step {
        sheet::Step::Task { .. } => "task",
        sheet::Step::Voltage { .. } => "voltage",
        sheet::Step::Current { .. } => "current",
        sheet::Step::Run(_) => "run",
        sheet::Step::Loaded(_) => "loaded",
    }
}

words! {
    /// What drives a test current: the loads behind the circuit, a source, or what the document states.
    Driven for sheet::Driven {
        sheet::Driven::Loads => "loads",
        sheet::Driven::Source => "source",
        sheet::Driven::Stated => "stated",
    }
}

words! {
    /// Which way a switching step goes.
    Direction for sheet::Direction {
        sheet::Direction::Connect => "connect",
        sheet::Direction::Disconnect => "disconnect",
    }
}

words! {
    /// What a meter showed.
    MeasuredKind for reading::Measured {
        reading::Measured::Volts(_) => "volts",
        reading::Measured::Drop(_) => "drop",
        reading::Measured::Amps(_) => "amps",
        reading::Measured::Temperature(_) => "temperature",
        reading::Measured::Density(_) => "density",
        reading::Measured::Delivered(_) => "delivered",
    }
}

words! {
    /// How a reading stands to what is predicted, the error of the meter counted in.
    Verdict for reading::Verdict {
        reading::Verdict::Within => "within",
        reading::Verdict::Above => "above",
        reading::Verdict::Below => "below",
        reading::Verdict::NotComparable(_) => "not_comparable",
    }
}

words! {
    /// What a reading implies: resistance of a circuit beyond what is predicted, internal resistance of a bank, its
    /// capacity, its state of charge, heat of one contact.
    ImpliedKind for reading::Implied {
        reading::Implied::Resistance { .. } => "resistance",
        reading::Implied::Internal(..) => "internal_resistance",
        reading::Implied::Capacity { .. } => "capacity",
        reading::Implied::Charge(..) => "state_of_charge",
        reading::Implied::Heat(..) => "heat",
    }
}

words! {
    /// What may be behind a reading that is not as predicted.
    CauseKind for reading::CauseKind {
        reading::CauseKind::BadJoint => "bad_joint",
        reading::CauseKind::ConductorThinnerOrLonger => "conductor_thinner_or_longer",
        reading::CauseKind::ConductorThickerOrShorter => "conductor_thicker_or_shorter",
        reading::CauseKind::ChassisReturn => "chassis_return",
        reading::CauseKind::OpenPath => "open_path",
        reading::CauseKind::LoadDrawsMore => "load_draws_more",
        reading::CauseKind::LoadDrawsLess => "load_draws_less",
        reading::CauseKind::OtherLoadRan => "other_load_ran",
        reading::CauseKind::SourceCharged => "source_charged",
        reading::CauseKind::BankLow => "bank_low",
        reading::CauseKind::WeakBank => "weak_bank",
        reading::CauseKind::BadCell => "bad_cell",
        reading::CauseKind::LostCapacity => "lost_capacity",
        reading::CauseKind::NotFull => "not_full",
        reading::CauseKind::ColdCells => "cold_cells",
        reading::CauseKind::Stratification => "stratification",
        reading::CauseKind::SurfaceCharge => "surface_charge",
        reading::CauseKind::OtherAcid => "other_acid",
        reading::CauseKind::OutsideHeat => "outside_heat",
        reading::CauseKind::MeterLead => "meter_lead",
    }
}
