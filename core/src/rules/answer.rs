//! A rule set with the user's own values: the questions of the floors above, answered from the set's data;
//! ampacity has a file of its own.

use arrayvec::ArrayVec;
use uom::si::{electric_current::ampere, length::meter, ratio::ratio};

use super::book::{ByLine, NextRating, ProtectiveRule, RuleSet};
use super::overrides::{Overridden, Overrides, STATED};
use super::query::{DeviceLimit, DropLimit, Limit, LoadUse};
use super::{craft_iso, craft_us, iec, us};
use crate::cable::{Class, Conductor, Material};
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error, Snippet};
use crate::quantity::{ConductorSize, ElectricCurrent, Length, Ratio};

const NAMES: &str =
    "us, iec, craft_iso, craft_us, or pinned us-2023, iec-2009, craft_iso-2020, craft_us-2015";

// Rule R18 (guide `rules`): our own rule in every set.
const METALS: Citation = Citation::new("ampwright", "rule R18", Seen::Practice);

/// A rule set with the user's overrides: what the floors above ask.
#[derive(Clone, Copy, Debug)]
pub struct Rules {
    set: &'static RuleSet,
    overrides: Overrides,
}

/// A source that does not measure at the bank charges it too low by this drop: physics, the same in every set.
const CHARGING_DROP: f64 = 0.01;

impl Rules {
    /// The set named `us`, `iec`, `craft_iso`, `craft_us`, or with a pinned edition such as `us-2023`.
    ///
    /// # Errors
    /// [`Error::UnknownWord`], naming the sets and editions held.
    ///
    /// ```
    /// use ampwright::rules::Rules;
    /// assert_eq!(Rules::named("us")?.set().word, "us-2023");
    /// assert!(Rules::named("us-1999").unwrap_err().to_string().contains("us-2023"));
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn named(word: &str) -> Result<Self, Error> {
        let set = match word {
            "us" | "us-2023" => &us::SET,
            "iec" | "iec-2009" => &iec::SET,
            "craft_iso" | "craft_iso-2020" => &craft_iso::SET,
            "craft_us" | "craft_us-2015" => &craft_us::SET,
            _ => return Err(Error::UnknownWord { text: Snippet::new(word), allowed: NAMES }),
        };
        Ok(Self { set, overrides: Overrides::default() })
    }

    /// With the user's own values.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for a value outside its range.
    ///
    /// ```
    /// use ampwright::rules::{Overrides, Rules};
    /// let own = Overrides { bundling: Some(0.65), ..Overrides::default() };
    /// assert!(Rules::named("iec")?.with_overrides(own).is_ok());
    /// let above_one = Overrides { bundling: Some(1.2), ..Overrides::default() };
    /// assert_eq!(
    ///     Rules::named("iec")?.with_overrides(above_one).unwrap_err().to_string(),
    ///     "bundling is 1.2; it must be greater than 0 and at most 1"
    /// );
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn with_overrides(self, overrides: Overrides) -> Result<Self, Error> {
        overrides.check()?;
        Ok(Self { overrides, ..self })
    }

    /// The set.
    pub fn set(&self) -> &'static RuleSet {
        self.set
    }

    /// The user's overrides.
    pub fn overrides(&self) -> &Overrides {
        &self.overrides
    }

    /// The values the user replaced, each with its name, for the report.
    ///
    /// ```
    /// use ampwright::rules::{Overrides, Rules};
    /// let own = Overrides { engine_space: Some(0.8), ..Overrides::default() };
    /// let rules = Rules::named("craft_iso")?.with_overrides(own)?;
    /// assert_eq!(rules.overridden()[0].to_string(), "engine_space = 0.8");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn overridden(&self) -> ArrayVec<Overridden, 7> {
        self.overrides.list()
    }

    /// Factor on continuous current for conductor and device (1.25, or 1).
    ///
    /// ```
    /// assert_eq!(ampwright::rules::Rules::named("us")?.continuous_factor().value, 1.25);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn continuous_factor(&self) -> Limit<f64> {
        stated(self.overrides.continuous_factor).unwrap_or(self.set.continuous_factor)
    }

    /// Greatest device on a conductor of this size and corrected ampacity.
    ///
    /// An ampacity that is NaN or not above 0 admits no device (0 A).
    ///
    /// ```
    /// use ampwright::quantity::{ConductorSize, ElectricCurrent};
    /// use ampwright::rules::Rules;
    /// use uom::si::electric_current::ampere;
    /// let corrected = ElectricCurrent::new::<ampere>(85.0);
    /// let size = ConductorSize::awg(4)?;
    /// assert_eq!(Rules::named("us")?.device_limit(size, corrected).most.get::<ampere>(), 90.0);
    /// assert_eq!(Rules::named("iec")?.device_limit(size, corrected).most.get::<ampere>(), 85.0);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn device_limit(&self, size: ConductorSize, corrected: ElectricCurrent) -> DeviceLimit {
        let rule = &self.set.device;
        let limit = |most, words, citation| DeviceLimit {
            most: ElectricCurrent::new::<ampere>(most),
            rule: words,
            citation,
        };
        let amperes = corrected.get::<ampere>();
        if amperes.is_nan() || amperes <= 0.0 {
            return limit(0.0, "no ampacity, no device", rule.citation);
        }
        if let Some(part) = self.overrides.device_ratio {
            return limit(part * amperes, "the user's own multiple of the ampacity", STATED);
        }
        let mut found = limit(amperes, rule.rule, rule.citation);
        // The last bit of a product of factors must not lift the choice by a whole rating.
        let reached = amperes * (1.0 - 1e-9);
        let next = self.set.standard_ratings_A.iter().copied().find(|r| *r >= reached);
        let admitted = |next: f64| match rule.next {
            NextRating::No => false,
            NextRating::UpTo(most) => next <= most,
            NextRating::Within(times) => next <= times * amperes,
        };
        if let Some(next) = next
            && admitted(next)
        {
            let words = if next > amperes { "next standard rating above the ampacity" } else { rule.rule };
            found = limit(next, words, rule.citation);
        }
        // The row that serves a size of the other system brings its limit with it.
        let row = self.set.ampacity_tables.first().and_then(|t| t.row(size));
        let small = rule.small.iter().find(|(s, _, _)| Some(*s) == row);
        match small {
            Some(&(_, most, citation)) if ElectricCurrent::new::<ampere>(most) < found.most => {
                limit(most, "limit for small conductors", citation)
            }
            _ => found,
        }
    }

    /// Upper conventional current over corrected ampacity: 1.45.
    ///
    /// ```
    /// assert_eq!(ampwright::rules::Rules::named("iec")?.overload_ratio().value, 1.45);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn overload_ratio(&self) -> Limit<f64> {
        self.set.overload_ratio
    }

    /// Greatest unprotected conductor length from the source; `None` where the set gives no figure, then the
    /// check is not made.
    ///
    /// ```
    /// use ampwright::rules::Rules;
    /// use uom::si::length::inch;
    /// let rules = Rules::named("craft_us")?;
    /// let sheathed_from_post = rules.unfused_length(true, true).ok_or("none")?;
    /// assert!((sheathed_from_post.value.get::<inch>() - 72.0).abs() < 1e-12);
    /// assert!(Rules::named("craft_iso")?.unfused_length(true, true).is_none());
    /// # Ok::<(), Box<dyn core::error::Error>>(())
    /// ```
    pub fn unfused_length(&self, sheathed: bool, from_battery_post: bool) -> Option<Limit<Length>> {
        if let Some(value) = self.overrides.unfused {
            return Some(Limit { value, citation: STATED });
        }
        let rule = &self.set.unfused;
        let limit = match (sheathed, from_battery_post) {
            (true, true) => rule.sheathed_from_post,
            (true, false) => rule.sheathed,
            (false, _) => rule.plain,
        }?;
        Some(Limit { value: Length::new::<meter>(limit.value), citation: limit.citation })
    }

    /// Greatest voltage drop for a use, as a part of nominal voltage, source to load.
    ///
    /// ```
    /// use ampwright::rules::{LoadUse, Rules};
    /// use uom::si::ratio::percent;
    /// let limit = Rules::named("craft_iso")?.drop_limit(LoadUse::Critical);
    /// assert!(limit.required && (limit.ratio.get::<percent>() - 3.0).abs() < 1e-12);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn drop_limit(&self, usage: LoadUse) -> DropLimit {
        let rule = &self.set.drop;
        if usage == LoadUse::Charging {
            return DropLimit {
                ratio: Ratio::new::<ratio>(CHARGING_DROP),
                required: true,
                citation: Citation::new(
                    "design rule",
                    "R11, sense at the bank or at most 1 %",
                    Seen::Derived,
                ),
            };
        }
        if let Some(own) = self.overrides.drop {
            return DropLimit { ratio: own, required: true, citation: STATED };
        }
        let limit = match usage {
            LoadUse::Critical => rule.critical,
            LoadUse::Lighting => rule.lighting,
            LoadUse::Other | LoadUse::Charging => rule.other,
        };
        DropLimit {
            ratio: Ratio::new::<ratio>(limit.value),
            required: rule.required,
            citation: limit.citation,
        }
    }

    /// Sizes the set's tables know, smallest first.
    ///
    /// ```
    /// let sizes = ampwright::rules::Rules::named("iec")?.sizes();
    /// assert_eq!(sizes[0].to_string(), "1.5 mm2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn sizes(&self) -> &'static [ConductorSize] {
        self.set.sizes
    }

    /// Standard device ratings, amperes, smallest first.
    ///
    /// ```
    /// assert!(ampwright::rules::Rules::named("iec")?.standard_ratings_A().contains(&63.0));
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn standard_ratings_A(&self) -> &'static [f64] {
        self.set.standard_ratings_A
    }

    /// Least conductor size for a power circuit.
    ///
    /// ```
    /// assert_eq!(ampwright::rules::Rules::named("us")?.least_size().value.to_string(), "14 AWG");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn least_size(&self) -> Limit<ConductorSize> {
        self.set.least_size
    }

    /// Whether the conductor's metal and class are admitted (R18); `moving` for battery and moving cables.
    ///
    /// # Errors
    /// [`Error::Refused`] with the reason.
    ///
    /// ```
    /// use ampwright::cable::{Class, Coating, Compound, Conductor, Insulation, Material};
    /// use ampwright::quantity::ConductorSize;
    /// use ampwright::rules::Rules;
    /// let clad = Conductor {
    ///     size: ConductorSize::mm2(16.0)?,
    ///     material: Material::CopperCladAluminium,
    ///     class: Class::Flexible,
    ///     coating: Coating::Plain,
    ///     insulation: Insulation::new(Compound::Xlpe, 90.0)?,
    /// };
    /// assert!(Rules::named("iec")?.admits(&clad, false).is_err());
    /// let copper = Conductor { material: Material::Copper, ..clad };
    /// assert!(Rules::named("iec")?.admits(&copper, true).is_ok());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn admits(&self, conductor: &Conductor, moving: bool) -> Result<(), Error> {
        let rule = &self.set.conductors;
        let refuse = |what, why, rule| Err(Error::Refused { what, why, rule });
        match conductor.material {
            Material::Copper => {}
            Material::Aluminium if self.overrides.aluminium == Some(true) => {}
            Material::Aluminium => {
                return refuse(
                    "aluminium",
                    "its joints loosen and corrode and every table here is for copper; use copper, or admit it in \
                     the overrides with its own resistance",
                    METALS,
                );
            }
            Material::CopperCladAluminium => {
                return refuse(
                    "copper-clad aluminium",
                    "it carries less than copper of its size and its skin does not survive crimping; use copper",
                    METALS,
                );
            }
        }
        match conductor.class {
            Class::Solid if moving => {
                refuse("solid conductor", "it breaks where a cable moves or shakes; use class 5 or 6", METALS)
            }
            Class::Solid if !rule.solid_fixed => refuse(
                "solid conductor",
                "small craft take stranded conductors only; use class 5",
                rule.citation,
            ),
            Class::Stranded if moving && !rule.stranded_moving => refuse(
                "class 2 conductor",
                "its few strands tire where a cable moves or shakes; use class 5 or 6",
                rule.citation,
            ),
            _ => Ok(()),
        }
    }

    /// Least protective conductor, of the line conductor's metal.
    ///
    /// By the rating of the device (`us`, never larger than the line conductor) or by the line conductor (`iec`: half a size stays unrounded, choose the next standard size).
    ///
    /// # Errors
    /// [`Error::NotTabulated`] where the set holds no table; [`Error::TableEnds`] beyond it;
    /// [`Error::OutOfRange`] for a device that is not above 0 A.
    ///
    /// ```
    /// use ampwright::cable::Material;
    /// use ampwright::quantity::{ConductorSize, ElectricCurrent};
    /// use ampwright::rules::Rules;
    /// use uom::si::electric_current::ampere;
    /// let device = ElectricCurrent::new::<ampere>(100.0);
    /// let line = ConductorSize::mm2(25.0)?;
    /// let us = Rules::named("us")?.protective_conductor(line, device, Material::Copper)?;
    /// assert_eq!(us.value.to_string(), "8 AWG");
    /// let iec = Rules::named("iec")?.protective_conductor(line, device, Material::Copper)?;
    /// assert_eq!(iec.value.to_string(), "16 mm2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn protective_conductor(
        &self,
        line: ConductorSize,
        device: ElectricCurrent,
        metal: Material,
    ) -> Result<Limit<ConductorSize>, Error> {
        let amperes = device.get::<ampere>();
        if !(amperes > 0.0 && amperes.is_finite()) {
            let allowed = Allowed::Above(0.0);
            return Err(Error::OutOfRange { name: "device rating", value: amperes, unit: "A", allowed });
        }
        match self.set.protective {
            ProtectiveRule::ByDevice(rows, citation) => {
                let Some((_, copper, aluminium, seen)) = rows.iter().find(|(upto, ..)| amperes <= *upto)
                else {
                    return Err(Error::TableEnds {
                        what: "device rating",
                        value: amperes,
                        unit: "A",
                        table: citation,
                        end: "ends before it",
                        remedy: "state the size of the protective conductor",
                    });
                };
                let tabled = if metal == Material::Copper { *copper } else { *aluminium };
                let value = if tabled.area_mm2() > line.area_mm2() { line } else { tabled };
                Ok(Limit { value, citation: Citation { seen: *seen, ..citation } })
            }
            ProtectiveRule::ByLine(rows, citation) => {
                let area = line.area_mm2();
                let row = rows.iter().find(|(upto, _)| area <= *upto).map_or(ByLine::Same, |(_, row)| *row);
                let value = match row {
                    ByLine::Same => line,
                    ByLine::Size(size) => size,
                    ByLine::Part(part) => ConductorSize::mm2(area * part)?,
                };
                Ok(Limit { value, citation })
            }
            ProtectiveRule::NotHeld(table) => Err(Error::NotTabulated {
                what: "the protective conductor",
                table,
                remedy: "state its size after the standard",
            }),
        }
    }
}

fn stated(value: Option<f64>) -> Option<Limit<f64>> {
    value.map(|value| Limit { value, citation: STATED })
}
