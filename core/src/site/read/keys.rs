//! The sections, their keys, and what each key admits. Ranges and words stand here once: the reader, its
//! sentences and the test of the guide all read them.

use super::super::model::{Earthing, End, LoadKind, PartKind, Pole};
use crate::cable::{Class, Coating, JointKind, Material};
use crate::error::Allowed;
use crate::rules::{Installation, LoadUse, Space};

/// What a number may be, in the unit it is named in.
pub(super) struct Range {
    pub(super) allowed: Allowed,
    pub(super) unit: &'static str,
    /// Base units per unit, and the base value of zero.
    scale: f64,
    zero: f64,
}

impl Range {
    pub(super) const fn new(allowed: Allowed, unit: &'static str) -> Self {
        Self { allowed, unit, scale: 1.0, zero: 0.0 }
    }

    pub(super) const fn scaled(self, scale: f64) -> Self {
        Self { scale, ..self }
    }

    pub(super) const fn celsius(least: f64, most: f64) -> Self {
        Self { allowed: Allowed::Between(least, most), unit: "degC", scale: 1.0, zero: 273.15 }
    }

    /// Whether a value in base units lies within; written so that NaN does not.
    pub(super) fn admits(&self, base: f64) -> bool {
        let limit = |in_unit: f64| in_unit * self.scale + self.zero;
        match self.allowed {
            Allowed::Above(least) => base > limit(least) && base.is_finite(),
            Allowed::AtLeast(least) => base >= limit(least) && base.is_finite(),
            Allowed::Between(least, most) => base >= limit(least) && base <= limit(most),
            Allowed::AboveUpTo(least, most) => base > limit(least) && base <= limit(most),
            _ => base.is_finite(),
        }
    }
}

pub(super) const VOLTS: Range = Range::new(Allowed::AboveUpTo(0.0, 1500.0), "V");
pub(super) const AMPERES: Range = Range::new(Allowed::AboveUpTo(0.0, 100_000.0), "A");
pub(super) const FAULT: Range = Range::new(Allowed::AboveUpTo(0.0, 1000.0), "kA").scaled(1000.0);
pub(super) const AMPERE_HOURS: Range = Range::new(Allowed::AboveUpTo(0.0, 1_000_000.0), "Ah").scaled(3600.0);
pub(super) const WATTS: Range = Range::new(Allowed::AboveUpTo(0.0, 10_000.0), "kW").scaled(1000.0);
pub(super) const OHMS: Range = Range::new(Allowed::AboveUpTo(0.0, 1000.0), "ohm");
pub(super) const METRES: Range = Range::new(Allowed::AboveUpTo(0.0, 10_000.0), "m");
// A device may sit on the terminal itself.
const DISTANCE: Range = Range::new(Allowed::Between(0.0, 10_000.0), "m");
pub(super) const AIR: Range = Range::celsius(-90.0, 150.0);
const MARKED: Range = Range::celsius(30.0, 300.0);
pub(super) const PART: Range = Range::new(Allowed::AboveUpTo(0.0, 1.0), "");
const LET_THROUGH: Range = Range::new(Allowed::AboveUpTo(0.0, 1e12), "A2s");
pub(super) const PRICE_RANGE: Range = Range::new(Allowed::Between(0.0, 1e9), "");
pub(super) const ANY: Range = Range::new(Allowed::Finite, "");

pub(super) const fn count(least: f64, most: f64) -> Range {
    Range::new(Allowed::Between(least, most), "")
}

/// One key of a section.
pub(super) struct Key {
    pub(super) name: &'static str,
    /// What is needed, with its article: `a voltage`.
    pub(super) needed: &'static str,
    /// A value as it is written.
    pub(super) example: &'static str,
    pub(super) range: Range,
}

pub(super) const fn key(
    name: &'static str,
    needed: &'static str,
    example: &'static str,
    range: Range,
) -> Key {
    Key { name, needed, example, range }
}

pub(super) const fn flag(name: &'static str) -> Key {
    key(name, "true or false", "", ANY)
}

pub(super) const FORMAT: Key = key("format", "the number of the format", "1", ANY);

pub(super) const NAME: Key = key("name", "a text", "\"pump\"", ANY);
pub(super) const SITE_NAME: Key = key("name", "a text", "\"Heron Point\"", ANY);
pub(super) const RULES: Key = key("rules", "a rule set", "\"iec\"", ANY);
pub(super) const EARTHING: Key = key("earthing", "a pole", "\"negative\"", ANY);
pub(super) const SITE_AMBIENT: Key =
    key("ambient", "a list of the least and the greatest temperature", "[\"-25 degC\", \"30 degC\"]", AIR);

pub(super) const CHEMISTRY: Key = key("chemistry", "a chemistry", "\"lfp\"", ANY);
pub(super) const NOMINAL: Key = key("nominal", "a voltage", "\"24 V\"", VOLTS);
pub(super) const CAPACITY: Key = key("capacity", "a charge", "\"400 Ah\"", AMPERE_HOURS);
pub(super) const STRINGS: Key = key("strings", "a whole number", "2", count(1.0, 1000.0));
pub(super) const CUT_OFF: Key = key("cut_off", "a voltage", "\"21 V\"", VOLTS);
pub(super) const HIGHEST: Key = key("highest", "a voltage", "\"31 V\"", VOLTS);
pub(super) const SHORT_CIRCUIT: Key = key("short_circuit", "a current", "\"4 kA\"", FAULT);
pub(super) const INTERNAL: Key = key("internal_resistance", "a resistance", "\"6 mohm\"", OHMS);
pub(super) const GREATEST_DISCHARGE: Key = key("greatest_discharge", "a current", "\"200 A\"", AMPERES);
pub(super) const STUD: Key = key("stud", "a stud", "\"M8\"", ANY);

pub(super) const BUSBAR: Key = key("busbar", "a current", "\"250 A\"", AMPERES);
pub(super) const LUGS_ON_STUD: Key = key("lugs_on_stud", "a whole number", "3", count(1.0, 20.0));

pub(super) const POWER: Key = key("power", "a power", "\"60 W\"", WATTS);
pub(super) const SURGE: Key = key("surge", "a power", "\"2400 W\"", WATTS);
pub(super) const EFFICIENCY: Key = key("efficiency", "a ratio", "0.9", PART);
pub(super) const IDLE: Key = key("idle", "a power", "\"12 W\"", WATTS);
pub(super) const LEAST: Key = key("least", "a voltage", "\"21 V\"", VOLTS);
pub(super) const GREATEST: Key = key("greatest", "a voltage", "\"32 V\"", VOLTS);
pub(super) const TERMINAL: Key = key("terminal", "a temperature", "\"75 degC\"", MARKED);

pub(super) const CURRENT: Key = key("current", "a current", "\"5 A\"", AMPERES);
pub(super) const LOAD_KIND: Key = key("kind", "a kind of load", "\"constant_power\"", ANY);
pub(super) const COUNT: Key = key("count", "a whole number", "4", count(1.0, 10_000.0));
pub(super) const CONTINUOUS: Key = flag("continuous");
pub(super) const START: Key = key("start", "a current", "\"30 A\"", AMPERES);
pub(super) const USE: Key = key("use", "a use", "\"lighting\"", ANY);

pub(super) const FROM: Key = key("from", "the name of a bank, board or source", "\"house\"", ANY);
pub(super) const TO: Key = key("to", "the name of what it feeds", "\"pump\"", ANY);
pub(super) const ONE_WAY: Key = key("one_way", "a length", "\"2.5 m\"", METRES);
pub(super) const POSITIVE_LENGTH: Key = key("positive_length", "a length", "\"2.5 m\"", METRES);
pub(super) const NEGATIVE_LENGTH: Key = key("negative_length", "a length", "\"3 m\"", METRES);
pub(super) const SIZE: Key = key("size", "a conductor size", "\"16 mm2\"", ANY);
pub(super) const NEGATIVE_SIZE: Key = key("negative_size", "a conductor size", "\"16 mm2\"", ANY);
pub(super) const MATERIAL: Key = key("material", "a metal", "\"copper\"", ANY);
pub(super) const CLASS: Key = key("class", "a class of stranding (1, 2, 5 or 6)", "5", ANY);
pub(super) const COATING: Key = key("coating", "a coating", "\"tinned\"", ANY);
pub(super) const INSULATION: Key = key("insulation", "an insulation", "\"PVC 70 degC\"", ANY);
pub(super) const SHEATHED: Key = flag("sheathed");
pub(super) const INSTALLED: Key = key("installed", "a way of installation", "\"clipped\"", ANY);
pub(super) const SPACE: Key = key("space", "a space", "\"engine\"", ANY);
pub(super) const BUNDLED: Key = key("bundled", "a whole number", "6", count(2.0, 1000.0));
pub(super) const AMBIENT: Key = key("ambient", "a temperature", "\"40 degC\"", AIR);
pub(super) const MOVING: Key = flag("moving");
pub(super) const CRANKING: Key = flag("cranking");
pub(super) const RETURN: Key = key("return", "a way back", "\"conductor\"", ANY);
pub(super) const RETURN_RESISTANCE: Key = key("return_resistance", "a resistance", "\"5 mohm\"", OHMS);
pub(super) const DIVERSITY: Key = key("diversity", "a number", "0.7", PART);
pub(super) const DROP: Key = key("drop", "a ratio", "\"3 %\"", PART);
pub(super) const FROM_LUG: Key = key("from_lug", "a stud", "\"M8\"", ANY);
pub(super) const TO_LUG: Key = key("to_lug", "a stud", "\"M8\"", ANY);
pub(super) const DEVICE: Key = key("device", "\"none\", or sections [[circuit.device]]", "\"none\"", ANY);
pub(super) const JOINT: Key = key("joint", "sections [[circuit.joint]]", "", ANY);
pub(super) const PART_KEY: Key = key("part", "sections [[circuit.part]]", "", ANY);

pub(super) const FAMILY: Key = key("family", "a family of devices", "\"gG\"", ANY);
pub(super) const RATING: Key = key("rating", "a current", "\"100 A\"", AMPERES);
pub(super) const DC_VOLTAGE: Key = key("dc_voltage", "a voltage", "\"80 V\"", VOLTS);
pub(super) const POLE_VOLTAGE: Key = key("pole_voltage", "a voltage", "\"60 V\"", VOLTS);
pub(super) const POLES: Key = key("poles", "a whole number", "2", count(1.0, 4.0));
pub(super) const AC_ONLY: Key = flag("ac_only");
pub(super) const BREAKING: Key = key("breaking", "a current", "\"10 kA\"", FAULT);
pub(super) const POLARISED: Key = flag("polarised");
pub(super) const FULL_RATED: Key = flag("full_rated");
pub(super) const POLE: Key = key("pole", "a pole", "\"positive\"", ANY);
pub(super) const END: Key = key("end", "an end", "\"from\"", ANY);
pub(super) const FROM_SOURCE: Key = key("from_source", "a length", "\"150 mm\"", DISTANCE);
pub(super) const LET_THROUGH_KEY: Key =
    key("let_through", "an energy let through (I²t)", "\"12000 A2s\"", LET_THROUGH);
pub(super) const TERMINAL_RANGE: Key = key(
    "terminal_range",
    "a list of the least and the greatest conductor size",
    "[\"2.5 mm2\", \"35 mm2\"]",
    ANY,
);

pub(super) const JOINT_KIND: Key = key("kind", "a kind of joint", "\"lug\"", ANY);
pub(super) const RESISTANCE: Key = key("resistance", "a resistance", "\"0.1 mohm\"", OHMS);
pub(super) const PART_KIND: Key = key("kind", "a kind of part", "\"switch\"", ANY);

pub(super) const LENGTH: Key = key("length", "a length", "\"50 m\"", METRES);
pub(super) const PRICE: Key = key("price", "a number", "2.40", PRICE_RANGE);
pub(super) const RATINGS: Key = key("ratings", "a list of currents", "[\"10 A\", \"15 A\"]", AMPERES);
pub(super) const CABLE: Key = key("cable", "sections [[stock.cable]]", "", ANY);
pub(super) const STOCK_DEVICES: Key = key("device", "sections [[stock.device]]", "", ANY);
pub(super) const LUG: Key = key("lug", "sections [[stock.lug]]", "", ANY);

pub(super) const OVERRIDE: Key = key("override", "a section [rules.override]", "", ANY);
pub(super) const CONTINUOUS_FACTOR: Key =
    key("continuous_factor", "a number", "1.25", Range::new(Allowed::Between(1.0, 2.0), ""));
pub(super) const OWN_DROP: Key =
    key("drop", "a ratio", "\"3 %\"", Range::new(Allowed::AboveUpTo(0.0, 0.2), ""));
pub(super) const UNFUSED_LENGTH: Key =
    key("unfused_length", "a length", "\"200 mm\"", Range::new(Allowed::AboveUpTo(0.0, 10.0), "m"));
pub(super) const ENGINE_SPACE: Key = key("engine_space", "a number", "0.85", PART);
pub(super) const BUNDLING: Key = key("bundling", "a number", "0.7", PART);
pub(super) const DEVICE_RATIO: Key =
    key("device_ratio", "a number", "1.0", Range::new(Allowed::AboveUpTo(0.0, 1.5), ""));
pub(super) const ALUMINIUM: Key = key("aluminium", "a decision", "\"admitted\"", ANY);

/// A section: its header, the keys that must stand in it and those that may.
pub(super) struct Section {
    pub(super) header: &'static str,
    pub(super) needed: &'static [&'static Key],
    pub(super) optional: &'static [&'static Key],
}

impl Section {
    pub(super) const fn new(
        header: &'static str,
        needed: &'static [&'static Key],
        optional: &'static [&'static Key],
    ) -> Self {
        Self { header, needed, optional }
    }

    /// All its keys, those needed first.
    pub(super) fn keys(&self) -> impl Iterator<Item = &'static Key> + Clone {
        self.needed.iter().chain(self.optional).copied()
    }
}

pub(super) const BOARD: Section = Section::new("[[board]]", &[&NAME], &[&BUSBAR, &STUD, &LUGS_ON_STUD]);
pub(super) const CIRCUIT: Section = Section::new(
    "[[circuit]]",
    &[&NAME, &FROM, &TO],
    &[
        &ONE_WAY,
        &POSITIVE_LENGTH,
        &NEGATIVE_LENGTH,
        &SIZE,
        &NEGATIVE_SIZE,
        &MATERIAL,
        &CLASS,
        &COATING,
        &INSULATION,
        &SHEATHED,
        &INSTALLED,
        &SPACE,
        &BUNDLED,
        &AMBIENT,
        &MOVING,
        &CRANKING,
        &RETURN,
        &RETURN_RESISTANCE,
        &CURRENT,
        &DIVERSITY,
        &DROP,
        &TERMINAL,
        &FROM_LUG,
        &TO_LUG,
        &DEVICE,
        &JOINT,
        &PART_KEY,
    ],
);
pub(super) const CIRCUIT_DEVICE: Section = Section::new(
    "[[circuit.device]]",
    &[],
    &[
        &NAME,
        &FAMILY,
        &RATING,
        &DC_VOLTAGE,
        &POLE_VOLTAGE,
        &POLES,
        &AC_ONLY,
        &BREAKING,
        &POLARISED,
        &FULL_RATED,
        &POLE,
        &END,
        &FROM_SOURCE,
        &LET_THROUGH_KEY,
        &TERMINAL_RANGE,
        &TERMINAL,
    ],
);
pub(super) const CIRCUIT_JOINT: Section =
    Section::new("[[circuit.joint]]", &[&JOINT_KIND], &[&COUNT, &RESISTANCE]);
pub(super) const CIRCUIT_PART: Section =
    Section::new("[[circuit.part]]", &[&NAME, &PART_KIND], &[&RATING, &RESISTANCE, &DC_VOLTAGE, &AC_ONLY]);
pub(super) const STOCK_CABLE: Section = Section::new(
    "[[stock.cable]]",
    &[&SIZE, &INSULATION],
    &[&MATERIAL, &CLASS, &COATING, &SHEATHED, &LENGTH, &PRICE],
);
pub(super) const STOCK_DEVICE: Section = Section::new(
    "[[stock.device]]",
    &[&FAMILY],
    &[
        &RATINGS,
        &DC_VOLTAGE,
        &POLE_VOLTAGE,
        &POLES,
        &AC_ONLY,
        &BREAKING,
        &POLARISED,
        &FULL_RATED,
        &LET_THROUGH_KEY,
        &TERMINAL_RANGE,
        &TERMINAL,
        &PRICE,
    ],
);
pub(super) const STOCK_LUG: Section = Section::new("[[stock.lug]]", &[&SIZE, &STUD], &[&PRICE]);
pub(super) const RULES_SECTION: Section = Section::new("[rules]", &[], &[&OVERRIDE]);
pub(super) const RULES_OVERRIDE: Section = Section::new(
    "[rules.override]",
    &[],
    &[&CONTINUOUS_FACTOR, &OWN_DROP, &UNFUSED_LENGTH, &ENGINE_SPACE, &BUNDLING, &DEVICE_RATIO, &ALUMINIUM],
);

/// Words and what they stand for.
pub(super) type Words<T> = &'static [(&'static str, T)];

pub(super) const EARTHING_WORDS: Words<Earthing> =
    &[("negative", Earthing::Negative), ("positive", Earthing::Positive), ("floating", Earthing::Floating)];
pub(super) const LOAD_KIND_WORDS: Words<LoadKind> = &[
    ("constant_power", LoadKind::Power),
    ("constant_current", LoadKind::Current),
    ("resistive", LoadKind::Resistive),
];
pub(super) const USE_WORDS: Words<LoadUse> =
    &[("critical", LoadUse::Critical), ("lighting", LoadUse::Lighting), ("other", LoadUse::Other)];
pub(super) const MATERIAL_WORDS: Words<Material> = &[
    ("copper", Material::Copper),
    ("aluminium", Material::Aluminium),
    ("copper_clad_aluminium", Material::CopperCladAluminium),
];
pub(super) const CLASS_NUMBERS: [(u32, Class); 4] =
    [(1, Class::Solid), (2, Class::Stranded), (5, Class::Flexible), (6, Class::ExtraFlexible)];
pub(super) const COATING_WORDS: Words<Coating> = &[("plain", Coating::Plain), ("tinned", Coating::Tinned)];
pub(super) const INSTALLED_WORDS: Words<Installation> = &[
    ("free_air", Installation::FreeAir),
    ("spaced_free_air", Installation::SpacedFreeAir),
    ("cable_free_air", Installation::CableFreeAir),
    ("clipped", Installation::Clipped),
    ("conduit", Installation::Conduit),
    ("cable_in_conduit", Installation::CableInConduit),
    ("insulated_wall", Installation::InsulatedWall),
    ("cable_in_insulated_wall", Installation::CableInInsulatedWall),
    ("duct", Installation::Duct),
    ("buried", Installation::Buried),
    ("loom", Installation::Loom),
];
pub(super) const SPACE_WORDS: Words<Space> =
    &[("ordinary", Space::Ordinary), ("engine", Space::Engine), ("rooftop", Space::Rooftop)];
/// Whether the way back is the chassis.
pub(super) const RETURN_WORDS: Words<bool> = &[("conductor", false), ("chassis", true)];
pub(super) const POLE_WORDS: Words<Pole> =
    &[("positive", Pole::Positive), ("negative", Pole::Negative), ("both", Pole::Both)];
pub(super) const END_WORDS: Words<End> = &[("from", End::From), ("to", End::To)];
pub(super) const JOINT_WORDS: Words<JointKind> = &[
    ("lug", JointKind::Lug),
    ("terminal", JointKind::Terminal),
    ("switch", JointKind::Switch),
    ("relay", JointKind::Relay),
    ("fuse", JointKind::Fuse),
    ("breaker", JointKind::Breaker),
    ("shunt", JointKind::Shunt),
    ("busbar", JointKind::Busbar),
    ("connector", JointKind::Connector),
];
pub(super) const PART_WORDS: Words<PartKind> = &[
    ("switch", PartKind::Switch),
    ("selector", PartKind::Selector),
    ("relay", PartKind::Relay),
    ("shunt", PartKind::Shunt),
    ("connector", PartKind::Connector),
    ("holder", PartKind::Holder),
];
pub(super) const ALUMINIUM_WORDS: Words<bool> = &[("admitted", true)];
