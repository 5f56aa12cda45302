//! Touch, bonding, surges, isolators, spaces with petrol vapour and battery gas (R19, R20): what each set asks, as data.
//!
//! Nearly all of it is recalled. Whether a plant keeps to it is judged on the floors above; a blank is "not checked".

use super::answer::Rules;
use super::query::{Key, Limit};
use super::table::{awg, mm2};
use crate::citation::{Citation, Seen};
use crate::quantity::ConductorSize;

/// Voltages at which a set begins to ask for more.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TouchLimits {
    /// Above this DC voltage live parts are covered in dry places.
    pub dry_V: Limit<f64>,
    /// Above this in wet ones; `None`: no figure held.
    pub wet_V: Option<Limit<f64>>,
    /// Above this it is no extra-low voltage any more: protection against electric shock by disconnection, insulation
    /// and bonding as for any supply. `None`: no figure held.
    pub extra_low_V: Option<Limit<f64>>,
    /// Greatest nominal DC voltage for which the set is written; `None`: no such bound within low voltage.
    pub scope_V: Option<Limit<f64>>,
}

/// What a bonding conductor joins.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Bonding {
    /// Mast or discharge unit of an antenna to earth.
    AntennaMast,
    /// Earth of an antenna to that of the plant.
    AntennaToPlant,
    /// Lightning current: main conductor down to earth.
    LightningDown,
    /// Lightning current: bonding bar to bonding bar or to earth.
    LightningBar,
    /// Metal parts to a bonding bar, a part of the lightning current at most.
    LightningPart,
}

/// Least size of a copper bonding conductor.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BondingRow {
    /// What it joins.
    pub joins: Bonding,
    /// Least size, copper.
    pub copper: Limit<ConductorSize>,
}

/// Something that a set asks in words.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Asked {
    /// What, in a few words.
    pub words: &'static str,
    /// Source.
    pub citation: Citation,
}

/// When a surge protective device on the DC side of an exposed array is asked for, by the length of its run.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SurgeLength {
    /// On a building: this many metres over the ground flash density, in flashes for each km² and year.
    pub on_building_m: f64,
    /// Free-standing, likewise.
    pub free_standing_m: f64,
    /// Source.
    pub citation: Citation,
}

/// What a set asks of the surroundings of a plant.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Surroundings {
    /// Touch.
    pub touch: TouchLimits,
    /// Least bonding conductors.
    pub bonding: &'static [BondingRow],
    /// How many points may join the DC system to earth.
    pub bond_points: Limit<u8>,
    /// Parts that can spark in spaces where petrol or gas vapour can gather; `None`: the set has no such rule, and such
    /// a space is a matter of hazardous areas, which is not checked.
    pub ignition_protected: Option<Asked>,
    /// Openings that ventilate a space with vented cells; what air they need, the battery room of the trade computes.
    pub openings: Option<Asked>,
    /// Surge protection of an exposed array by its length; `None`: no figure held.
    pub surge_array: Option<SurgeLength>,
    /// Surge protection of what comes down from a mast.
    pub surge_mast: Option<Asked>,
    /// Isolator of an array.
    pub isolator: Asked,
}

/// Area of one opening for a flow of air, cm² for each m³/h: two of them, one low and one high, on opposite walls or
/// two metres apart.
///
/// Source: IEC 62485-2 (earlier EN 50272-2), 28·Q at an air speed of 0.1 m/s; recalled.
pub const OPENING_CM2_PER_M3_H: Limit<f64> = Limit {
    value: 28.0,
    citation: Citation::new("IEC 62485-2", "natural ventilation, openings", Seen::Recalled),
};

/// Distance from a vented cell within which nothing may spark or glow: this many millimetres times the cube root of the
/// gassing current in mA/Ah times that of the rated capacity in Ah.
///
/// Source: IEC 62485-2 (earlier EN 50272-2), close vicinity of the battery; recalled.
pub const SPARK_DISTANCE_MM: Limit<f64> = Limit {
    value: 28.8,
    citation: Citation::new("IEC 62485-2", "close vicinity of the battery", Seen::Recalled),
};

const fn recalled(document: &'static str, place: &'static str) -> Citation {
    Citation::new(document, place, Seen::Recalled)
}

const fn limit<Q: Copy>(value: Q, citation: Citation) -> Limit<Q> {
    Limit { value, citation }
}

const fn bond(joins: Bonding, copper: ConductorSize, citation: Citation) -> BondingRow {
    BondingRow { joins, copper: limit(copper, citation) }
}

const fn asked(words: &'static str, citation: Citation) -> Asked {
    Asked { words, citation }
}

const IEC_4_41: Citation = Citation::new("IEC 60364-4-41:2005", "414, extra-low voltage", Seen::Page);
const IEC_62305: &str = "IEC 62305-3";
const NFPA: &str = "NFPA 70-2023";

static US: Surroundings = Surroundings {
    touch: TouchLimits {
        // 110.27(A) counts nominal volts; a 48 V bank stays below by its name and passes 60 V while it charges.
        dry_V: limit(50.0, recalled(NFPA, "110.27(A), nominal volts")),
        wet_V: Some(limit(30.0, recalled(NFPA, "Chapter 9, Table 11(B), wet contact"))),
        extra_low_V: Some(limit(60.0, recalled(NFPA, "480.7(A) and Chapter 9, Table 11(B)"))),
        scope_V: None,
    },
    bonding: &[
        bond(Bonding::AntennaMast, awg(10), recalled(NFPA, "810.21(H)")),
        bond(Bonding::AntennaToPlant, awg(6), recalled(NFPA, "810.21(J)")),
        // 57 400 circular mils are no gauge: the next larger.
        bond(Bonding::LightningDown, awg(2), recalled("NFPA 780", "class I main conductor, 57.4 kcmil")),
        bond(Bonding::LightningPart, awg(6), recalled("NFPA 780", "bonding conductor, 26.24 kcmil")),
    ],
    bond_points: limit(1, recalled(NFPA, "250.164(B) and 690.42")),
    ignition_protected: None,
    openings: Some(asked(
        "vented cells: openings that carry the gas away and let none gather",
        recalled(NFPA, "480.10(A)"),
    )),
    surge_array: None,
    surge_mast: Some(asked(
        "discharge unit on every conductor of an outdoor antenna",
        recalled(NFPA, "810.20(A)"),
    )),
    isolator: asked(
        "load-break rated for the array's greatest current and voltage, or marked not to be opened under load and backed \
         by one that is",
        recalled(NFPA, "690.13 and 690.15"),
    ),
};

static IEC: Surroundings = Surroundings {
    touch: TouchLimits {
        dry_V: limit(60.0, IEC_4_41),
        wet_V: Some(limit(30.0, IEC_4_41.recalled())),
        extra_low_V: Some(limit(120.0, IEC_4_41)),
        scope_V: None,
    },
    bonding: &[
        bond(Bonding::AntennaMast, mm2(16.0), recalled("IEC 60728-11", "earthing of antenna masts")),
        bond(Bonding::AntennaToPlant, mm2(4.0), recalled("IEC 60728-11", "equipotential bonding of screens")),
        bond(Bonding::LightningDown, mm2(50.0), recalled(IEC_62305, "Table 6")),
        bond(Bonding::LightningBar, mm2(16.0), recalled(IEC_62305, "Table 8")),
        bond(Bonding::LightningPart, mm2(6.0), recalled(IEC_62305, "Table 9")),
    ],
    bond_points: limit(1, recalled("IEC 60364-5-54:2011", "earthing arrangements of DC systems")),
    ignition_protected: None,
    openings: Some(asked(
        "two openings, low and high, on opposite walls or two metres apart, each of 28 cm2 for a m3/h",
        OPENING_CM2_PER_M3_H.citation,
    )),
    surge_array: Some(SurgeLength {
        on_building_m: 115.0,
        free_standing_m: 200.0,
        citation: recalled("IEC 60364-7-712:2017", "critical length of DC cables"),
    }),
    surge_mast: Some(asked(
        "surge protective device where a conductor from the mast enters",
        recalled("IEC 62305-4", "boundary of lightning protection zones"),
    )),
    isolator: asked(
        "category DC-PV1 or DC-PV2 at the greatest open-circuit voltage and current of the array",
        recalled("IEC 60947-3", "annex for photovoltaic use"),
    ),
};

static CRAFT_ISO: Surroundings = Surroundings {
    touch: TouchLimits {
        dry_V: limit(50.0, recalled("ISO 13297:2020", "scope: nominal volts")),
        wet_V: None,
        extra_low_V: None,
        scope_V: Some(limit(50.0, recalled("ISO 13297:2020", "scope"))),
    },
    bonding: &[bond(Bonding::LightningDown, mm2(20.0), recalled("ISO 10134", "main conductor"))],
    bond_points: limit(1, recalled("ISO 13297:2020", "negative joined to the ground at one point")),
    ignition_protected: Some(asked(
        "ignition-protected after ISO 8846 in spaces with a petrol engine, tank or joint, or with gas bottles",
        recalled("ISO 13297:2020", "ignition protection"),
    )),
    openings: Some(asked(
        "batteries that give off gas: vented to the outside from the top of their space",
        recalled("ISO 13297:2020", "batteries"),
    )),
    surge_array: None,
    surge_mast: None,
    isolator: asked(
        "a switch for each source, rated for its current and voltage",
        recalled("ISO 13297:2020", "switches"),
    ),
};

static CRAFT_US: Surroundings = Surroundings {
    touch: TouchLimits {
        dry_V: limit(50.0, recalled("ABYC E-11", "scope: under 50 V")),
        wet_V: None,
        extra_low_V: None,
        scope_V: Some(limit(50.0, recalled("33 CFR 183.425", "circuits of less than 50 V"))),
    },
    bonding: &[
        bond(Bonding::LightningDown, awg(4), recalled("ABYC TE-4", "main conductor")),
        bond(Bonding::LightningPart, awg(6), recalled("ABYC TE-4", "secondary conductor")),
    ],
    bond_points: limit(
        1,
        recalled("ABYC E-11", "DC main negative bus, one connection to the engine's negative"),
    ),
    ignition_protected: Some(asked(
        "ignition-protected in spaces with a petrol engine, tank or joint that are not open to the air",
        recalled("33 CFR 183.410", "ignition protection"),
    )),
    openings: Some(asked(
        "hydrogen discharged: openings at the top of the space or box",
        recalled("33 CFR 183.420", "batteries"),
    )),
    surge_array: None,
    surge_mast: None,
    isolator: asked(
        "a switch for each source, rated for its current and voltage",
        recalled("ABYC E-11", "switches"),
    ),
};

/// What a set asks of the surroundings.
const fn surroundings(key: Key) -> &'static Surroundings {
    match key {
        Key::Us => &US,
        Key::Iec => &IEC,
        Key::CraftIso => &CRAFT_ISO,
        Key::CraftUs => &CRAFT_US,
    }
}

impl Surroundings {
    /// Least copper conductor for a bonding; `None`: no figure held, so it is not checked.
    pub fn least_bonding(&self, joins: Bonding) -> Option<Limit<ConductorSize>> {
        self.bonding.iter().find(|row| row.joins == joins).map(|row| row.copper)
    }
}

impl Rules {
    /// What the set asks of the surroundings of a plant.
    ///
    /// ```
    /// use ampwright::rules::{Bonding, Rules};
    /// let mast = Rules::named("us")?.surroundings_rule().least_bonding(Bonding::AntennaMast);
    /// assert_eq!(mast.map(|limit| limit.value.to_string()), Some("10 AWG".into()));
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn surroundings_rule(&self) -> &'static Surroundings {
        surroundings(self.set().key)
    }
}

#[cfg(test)]
mod tests {
    extern crate std;

    use super::*;
    use std::string::ToString;

    #[test]
    fn limits_rise_from_wet_to_dry_to_the_end_of_extra_low_voltage() {
        for key in [Key::Us, Key::Iec, Key::CraftIso, Key::CraftUs] {
            let touch = surroundings(key).touch;
            if let Some(wet) = touch.wet_V {
                assert!(wet.value < touch.dry_V.value);
            }
            if let Some(end) = touch.extra_low_V {
                assert!(touch.dry_V.value <= end.value);
            }
            assert!(touch.dry_V.value <= 60.0, "R19 asks from 60 V on in any case");
        }
    }

    #[test]
    fn no_bonding_stands_twice_and_a_main_conductor_is_never_the_smaller() {
        for key in [Key::Us, Key::Iec, Key::CraftIso, Key::CraftUs] {
            let set = surroundings(key);
            for (i, row) in set.bonding.iter().enumerate() {
                assert!(set.bonding[i + 1..].iter().all(|other| other.joins != row.joins));
                assert_eq!(row.copper.citation.seen, Seen::Recalled, "{}", row.copper.value);
            }
            let area = |joins| set.least_bonding(joins).map(|limit| limit.value.area_mm2());
            if let (Some(down), Some(part)) = (area(Bonding::LightningDown), area(Bonding::LightningPart)) {
                assert!(down > part);
            }
        }
    }

    #[test]
    fn nothing_of_one_set_is_cited_from_the_other_side_of_the_ocean() {
        for (key, foreign) in
            [(Key::Us, "IEC"), (Key::Iec, "NFPA"), (Key::CraftIso, "ABYC"), (Key::CraftUs, "ISO")]
        {
            let set = surroundings(key);
            let mut cited =
                std::vec![set.touch.dry_V.citation, set.bond_points.citation, set.isolator.citation];
            cited.extend(set.bonding.iter().map(|row| row.copper.citation));
            cited.extend(
                [set.ignition_protected, set.openings, set.surge_mast]
                    .into_iter()
                    .flatten()
                    .map(|d| d.citation),
            );
            assert!(cited.iter().all(|citation| !citation.to_string().contains(foreign)), "{foreign}");
        }
    }
}
