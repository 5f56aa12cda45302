//! A rule set with the user's own values: the questions of the floors above, answered from the set's data.

use arrayvec::ArrayVec;
use uom::si::{
    electric_current::ampere, length::meter, ratio::ratio, thermodynamic_temperature::degree_celsius,
};

use super::book::{AmbientRule, ByLine, Count, NextRating, Placement, ProtectiveRule, RuleSet};
use super::overrides::{Overridden, Overrides, STATED};
use super::query::{Ampacity, AmpacityQuery, DeviceLimit, DropLimit, Factor, Limit, LoadUse, Space};
use super::table::{AmpacityTable, Cell};
use super::{craft_iso, craft_us, iec, us};
use crate::cable::{Class, Conductor, Material};
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error, Snippet};
use crate::quantity::{ConductorSize, ElectricCurrent, Length, Ratio, sqrt};

const NAMES: &str =
    "us, iec, craft_iso, craft_us, or pinned us-2023, iec-2009, craft_iso-2020, craft_us-2015";

// R18 of the design: our own rule in every set.
const METALS: Citation = Citation::new("ampwright", "rule R18", Seen::Practice);

/// A rule set with the user's overrides: what the floors above ask.
#[derive(Clone, Copy, Debug)]
pub struct Rules {
    set: &'static RuleSet,
    overrides: Overrides,
}

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

    /// Ampacity after all factors.
    ///
    /// The column is the hottest whose rating does not exceed the insulation's; the row is the size's own, or
    /// the largest whose metal area does not exceed the size's (see [`Ampacity::row`]). The ambient counts with
    /// its adder above a roof; engine spaces take the set's own factor instead of an ambient factor, a hotter
    /// stated ambient lowers it further.
    ///
    /// | input | unit | valid |
    /// | --- | --- | --- |
    /// | `rating_degC` | °C | finite, at least the set's lowest column |
    /// | `ambient` | °C | −273.15 °C or more, up to the table's end |
    /// | `bundled_conductors` | 1 | 2 for one DC run alone; 0 and 1 count as 2 |
    ///
    /// # Errors
    /// [`Error::TableEnds`], [`Error::NotTabulated`], [`Error::OutOfRange`].
    ///
    /// # Source
    /// The set's tables: [`RuleSet::ampacity_tables`], [`RuleSet::factor_tables`].
    ///
    /// # Example
    /// Nine current-carrying 12 AWG conductors of 90 °C insulation in one conduit at 30 °C: 30 A × 0.7.
    /// ```
    /// use ampwright::quantity::{ConductorSize, ThermodynamicTemperature};
    /// use ampwright::rules::{AmpacityQuery, Installation, Rules, Space};
    /// use uom::si::{electric_current::ampere, thermodynamic_temperature::degree_celsius};
    ///
    /// let ampacity = Rules::named("us")?.ampacity(&AmpacityQuery {
    ///     size: ConductorSize::awg(12)?,
    ///     rating_degC: 90.0,
    ///     installation: Installation::Conduit,
    ///     ambient: ThermodynamicTemperature::new::<degree_celsius>(30.0),
    ///     space: Space::Ordinary,
    ///     bundled_conductors: 9,
    /// })?;
    /// assert_eq!(ampacity.corrected.get::<ampere>(), 21.0);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn ampacity(&self, query: &AmpacityQuery) -> Result<Ampacity, Error> {
        let rating = query.rating_degC;
        if !rating.is_finite() {
            let (name, unit) = ("insulation", "degC");
            return Err(Error::OutOfRange { name, value: rating, unit, allowed: Allowed::Finite });
        }
        let ambient = query.ambient.get::<degree_celsius>();
        if !ambient.is_finite() || ambient < -273.15 {
            let allowed = Allowed::AtLeast(-273.15);
            return Err(Error::OutOfRange { name: "ambient", value: ambient, unit: "degC", allowed });
        }
        let placement = self.placement(query)?;
        let pick = placement.pick(query.size, rating)?;

        let mut factors = ArrayVec::new();
        let mut corrected = pick.cell.value;
        let applied = [
            self.surroundings(placement, query.space, ambient, pick.rating)?,
            self.together(placement, query.bundled_conductors)?,
        ];
        for factor in applied.into_iter().flatten() {
            corrected *= factor.value;
            factors.push(factor);
        }
        Ok(Ampacity {
            corrected: ElectricCurrent::new::<ampere>(corrected),
            base: pick.cell,
            column: pick.column,
            row: pick.row,
            factors,
        })
    }

    /// Ampacity of the terminal's column before derating, where the set has that check (`us`).
    ///
    /// `design` picks the column: 60 °C up to 100 A unless the terminal is marked otherwise, else 75 °C. A mark
    /// of more than 75 °C counts as 75 °C. Give as mark the lower of the terminal's and the insulation's rating
    /// where the insulation's is below the column.
    ///
    /// # Errors
    /// [`Error::TableEnds`], [`Error::NotTabulated`]; [`Error::OutOfRange`] for NaN.
    ///
    /// ```
    /// use ampwright::quantity::{ConductorSize, ElectricCurrent};
    /// use ampwright::rules::Rules;
    /// use uom::si::electric_current::ampere;
    /// let (size, design) = (ConductorSize::awg(4)?, ElectricCurrent::new::<ampere>(83.3));
    /// let unmarked = Rules::named("us")?.terminal_column(size, design, None)?;
    /// assert_eq!(unmarked.map(|(cell, column)| (cell.value, column)), Some((70.0, "60 °C")));
    /// let marked = Rules::named("us")?.terminal_column(size, design, Some(75.0))?;
    /// assert_eq!(marked.map(|(cell, _)| cell.value), Some(85.0));
    /// assert_eq!(Rules::named("iec")?.terminal_column(size, design, None)?, None);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn terminal_column(
        &self,
        size: ConductorSize,
        design: ElectricCurrent,
        marked_degC: Option<f64>,
    ) -> Result<Option<(Cell, &'static str)>, Error> {
        let Some(rule) = &self.set.terminal else { return Ok(None) };
        let current = design.get::<ampere>();
        for (name, value, unit) in
            [("design current", current, "A"), ("terminal", marked_degC.unwrap_or(0.0), "degC")]
        {
            if !value.is_finite() {
                return Err(Error::OutOfRange { name, value, unit, allowed: Allowed::Finite });
            }
        }
        let unmarked = if current > rule.upto_A { rule.high_degC } else { rule.low_degC };
        let column = marked_degC.map_or(unmarked, |mark| mark.min(rule.high_degC));
        let pick = pick(&[rule.table], None, size, column)?;
        Ok(Some((pick.cell, pick.column)))
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
        // Written so that NaN falls here too.
        if !(amperes > 0.0) {
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
    /// assert!(Rules::named("us")?.unfused_length(false, true).is_none());
    /// # Ok::<(), Box<dyn core::error::Error>>(())
    /// ```
    // The signature was given: callers have the two facts as flags of a circuit.
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
        if let Some(own) = self.overrides.drop {
            return DropLimit { ratio: own, required: true, citation: STATED };
        }
        let limit = match usage {
            LoadUse::Critical => rule.critical,
            LoadUse::Lighting => rule.lighting,
            LoadUse::Other => rule.other,
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
    /// By the rating of the device (`us`, never larger than the circuit's own conductors need be) or by the line
    /// conductor (`iec`: half a size stays unrounded, choose the next standard size).
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
                let value = if metal == Material::Copper { *copper } else { *aluminium };
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

    fn placement(&self, query: &AmpacityQuery) -> Result<&'static Placement, Error> {
        self.set.placements.iter().find(|p| p.installations.contains(&query.installation)).ok_or(
            Error::NotTabulated {
                what: "this way of installation",
                table: Citation::new(self.set.edition, "", Seen::Page),
                remedy: "state another way of installation",
            },
        )
    }

    /// Factor for the place: ambient, or the engine space.
    fn surroundings(
        &self,
        placement: &Placement,
        space: Space,
        ambient: f64,
        column: f64,
    ) -> Result<Option<Factor>, Error> {
        match space {
            Space::Ordinary => ambient_factor(placement, "ambient", ambient, column),
            Space::Rooftop => {
                let Some(adder) = self.set.rooftop_K else {
                    return Err(Error::NotTabulated {
                        what: "the ambient in sunlight above a roof",
                        table: Citation::new(self.set.edition, "", Seen::Page),
                        remedy: "state the temperature inside the conduit as ambient, and an ordinary space",
                    });
                };
                ambient_factor(placement, "ambient above a roof", ambient + adder.value, column)
            }
            Space::Engine => self.engine_factor(placement, ambient, column),
        }
    }

    fn engine_factor(
        &self,
        placement: &Placement,
        ambient: f64,
        column: f64,
    ) -> Result<Option<Factor>, Error> {
        let name = "engine space";
        let own = self.overrides.engine_space.map(|value| Factor { name, value, citation: STATED });
        let Some(rule) = &self.set.engine else {
            // Without a factor of its own the stated ambient counts; the user's factor replaces it.
            return own
                .map_or_else(|| ambient_factor(placement, "ambient", ambient, column), |f| Ok(Some(f)));
        };
        let mut factor = match own {
            Some(factor) => factor,
            None => {
                let cell = rule.table.factor(0, column)?;
                let mut factor = Factor { name, value: cell.value, citation: cell.citation };
                // Where a recalled value and its derivation disagree the lower governs.
                if cell.citation.seen == Seen::Recalled
                    && let Some(derived) = ambient_factor(placement, name, rule.ambient_degC, column)?
                    && derived.value < factor.value
                {
                    factor = Factor { citation: rule.derived, ..derived };
                }
                factor
            }
        };
        if ambient > rule.ambient_degC
            && let Some(hotter) = ambient_factor(placement, "engine space, stated ambient", ambient, column)?
            && hotter.value < factor.value
        {
            factor = hotter;
        }
        Ok(Some(factor))
    }

    /// Factor for several runs together.
    fn together(&self, placement: &Placement, conductors: u16) -> Result<Option<Factor>, Error> {
        let conductors = conductors.max(2);
        let name = "bundled conductors";
        if conductors > 2
            && let Some(value) = self.overrides.bundling
        {
            return Ok(Some(Factor { name, value, citation: STATED }));
        }
        let grouping = &placement.grouping;
        let count = match grouping.count {
            Count::Conductors => conductors,
            Count::Circuits => conductors.div_ceil(2),
        };
        let cell = grouping.table.factor(grouping.column, f64::from(count))?;
        Ok(Some(Factor { name, value: cell.value, citation: cell.citation }))
    }
}

/// A cell found, with the names of its place.
struct Pick {
    cell: Cell,
    column: &'static str,
    rating: f64,
    row: ConductorSize,
}

impl Placement {
    fn pick(&self, size: ConductorSize, rating: f64) -> Result<Pick, Error> {
        match (pick(self.tables, self.column, size, rating), &self.instead) {
            (Err(Error::NotTabulated { .. }), Some(instead)) => {
                let found = pick(instead.tables, Some(instead.column), size, rating)?;
                Ok(Pick { column: instead.name, ..found })
            }
            (found, _) => found,
        }
    }
}

/// The cell of a size in the hottest column that the rating admits.
fn pick(
    tables: &[&'static AmpacityTable],
    name: Option<&str>,
    size: ConductorSize,
    rating: f64,
) -> Result<Pick, Error> {
    let mut best: Option<(&'static AmpacityTable, usize, f64)> = None;
    for table in tables {
        for (index, column) in table.columns.iter().enumerate() {
            let named = name.is_none_or(|n| n == column.name);
            let hotter = best.is_none_or(|(_, _, found)| column.rating_degC > found);
            if named && hotter && column.rating_degC <= rating {
                best = Some((table, index, column.rating_degC));
            }
        }
    }
    let Some((table, index, column_rating)) = best else {
        return Err(Error::NotTabulated {
            what: "the insulation's temperature rating",
            table: tables.first().map_or(STATED, |t| t.citation),
            remedy: "choose insulation rated higher",
        });
    };
    let Some(row) = table.row(size) else {
        return Err(Error::TableEnds {
            what: "size",
            value: size.area_mm2(),
            unit: "mm2",
            table: table.citation,
            end: table.begins,
            remedy: "choose a larger size",
        });
    };
    let column = table.columns.get(index).map_or("", |c| c.name);
    match table.cell(row, index) {
        Some(cell) => Ok(Pick { cell, column, rating: column_rating, row }),
        None => Err(Error::NotTabulated {
            what: "this size in this column",
            table: table.citation,
            remedy: "choose a larger size or another way of installation",
        }),
    }
}

fn ambient_factor(
    placement: &Placement,
    name: &'static str,
    ambient: f64,
    rating: f64,
) -> Result<Option<Factor>, Error> {
    match placement.ambient {
        AmbientRule::Table(table) => {
            let column = table.column(rating).unwrap_or(usize::MAX);
            let cell = table.factor(column, ambient)?;
            Ok(Some(Factor { name, value: cell.value, citation: cell.citation }))
        }
        AmbientRule::Derived { base_degC, citation } => {
            if ambient <= base_degC {
                return Ok(None);
            }
            if ambient >= rating {
                return Err(Error::OutOfRange {
                    name: "ambient",
                    value: ambient,
                    unit: "degC",
                    allowed: Allowed::Words("below the temperature rating of the conductor's column"),
                });
            }
            let value = sqrt((rating - ambient) / (rating - base_degC));
            Ok(Some(Factor { name, value, citation }))
        }
    }
}

fn stated(value: Option<f64>) -> Option<Limit<f64>> {
    value.map(|value| Limit { value, citation: STATED })
}
