//! Ampacity under a rule set: which table, column and row, and the factors, each once.

use arrayvec::ArrayVec;
use uom::si::{electric_current::ampere, thermodynamic_temperature::degree_celsius};

use super::answer::Rules;
use super::book::{AmbientRule, Count, EngineRule, Placement};
use super::overrides::STATED;
use super::query::{Ampacity, AmpacityQuery, Factor, Space};
use super::table::{AmpacityTable, Cell};
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{ConductorSize, ElectricCurrent, sqrt};

const ENGINE_SPACE: &str = "engine space";

impl Rules {
    /// Ampacity after all factors.
    ///
    /// The column is the hottest whose rating does not exceed the insulation's; the row is the size's own, or
    /// the largest whose metal area does not exceed the size's (see [`Ampacity::row`]). The ambient counts with
    /// its adder above a roof; engine spaces take the set's own factor, or the stated ambient's where that is
    /// lower, never both.
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
    /// The set's tables: [`crate::rules::RuleSet::ampacity_tables`], [`crate::rules::RuleSet::factor_tables`].
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
    ///
    /// 90 °C insulation at 50 °C ambient under each set. The craft sets derate by √((Tc − 50)/(Tc − 30)), Tc 90 °C, and
    /// 85 °C in the column of `craft_iso` for 85 to 90 °C:
    /// ```
    /// use ampwright::prelude::*;
    ///
    /// let amperes = |rules: &str, size: &str, installation| -> Result<f64, Error> {
    ///     let ampacity = Rules::named(rules)?.ampacity(&AmpacityQuery {
    ///         size: size.parse()?,
    ///         rating_degC: 90.0,
    ///         installation,
    ///         ambient: ThermodynamicTemperature::new::<degree_celsius>(50.0),
    ///         space: Space::Ordinary,
    ///         bundled_conductors: 2,
    ///     })?;
    ///     Ok((ampacity.corrected.get::<ampere>() * 10.0).round() / 10.0)
    /// };
    /// assert_eq!(amperes("us", "6 AWG", Installation::Conduit)?, 61.5); // 75 A × 0.82
    /// assert_eq!(amperes("iec", "16 mm2", Installation::Conduit)?, 82.0); // 100 A × 0.82
    /// assert_eq!(amperes("craft_us", "6 AWG", Installation::Loom)?, 81.6); // 100 A × 0.816
    /// assert_eq!(amperes("craft_iso", "16 mm2", Installation::Loom)?, 79.8); // 100 A × 0.798
    /// # Ok::<(), Error>(())
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
        let Some(rule) = &self.set().terminal else { return Ok(None) };
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

    fn placement(&self, query: &AmpacityQuery) -> Result<&'static Placement, Error> {
        self.set().placements.iter().find(|p| p.installations.contains(&query.installation)).ok_or(
            Error::NotTabulated {
                what: "this way of installation",
                table: Citation::new(self.set().edition, "", Seen::Page),
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
                let Some(adder) = self.set().rooftop_K else {
                    return Err(Error::NotTabulated {
                        what: "the ambient in sunlight above a roof",
                        table: Citation::new(self.set().edition, "", Seen::Page),
                        remedy: "state the temperature inside the conduit as ambient, and an ordinary space",
                    });
                };
                let factor =
                    ambient_factor(placement, "ambient above a roof", ambient + adder.value, column)?;
                // The weaker of the two sources marks the factor.
                Ok(factor.map(|f| match adder.citation.seen {
                    Seen::Page => f,
                    _ => Factor { citation: f.citation.recalled(), ..f },
                }))
            }
            Space::Engine => self.engine_factor(placement, ambient, column),
        }
    }

    /// The set's own factor or the user's, or the stated ambient's where that is lower.
    fn engine_factor(
        &self,
        placement: &Placement,
        ambient: f64,
        column: f64,
    ) -> Result<Option<Factor>, Error> {
        let own = self.overrides().engine_space;
        let own = own.map(|value| Factor { name: ENGINE_SPACE, value, citation: STATED });
        let factor = match (own, &self.set().engine) {
            (None, Some(rule)) => Some(rule.factor(placement, column)?),
            (own, _) => own,
        };
        Ok(lower(factor, ambient_factor(placement, "ambient of the engine space", ambient, column)?))
    }

    /// Factor for several runs together.
    fn together(&self, placement: &Placement, conductors: u16) -> Result<Option<Factor>, Error> {
        let conductors = conductors.max(2);
        let name = "bundled conductors";
        if conductors > 2
            && let Some(value) = self.overrides().bundling
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

impl EngineRule {
    /// Where a recalled value and its derivation disagree the lower governs.
    fn factor(&self, placement: &Placement, column: f64) -> Result<Factor, Error> {
        let Cell { value, citation } = self.table.factor(0, column)?;
        let printed = Factor { name: ENGINE_SPACE, value, citation };
        if citation.seen != Seen::Recalled {
            return Ok(printed);
        }
        match ambient_factor(placement, ENGINE_SPACE, self.ambient_degC, column)? {
            Some(derived) if derived.value < value => Ok(Factor { citation: self.derived, ..derived }),
            _ => Ok(printed),
        }
    }
}

/// The lower of two factors of which one may not apply.
fn lower(a: Option<Factor>, b: Option<Factor>) -> Option<Factor> {
    match (a, b) {
        (Some(a), Some(b)) => Some(if b.value < a.value { b } else { a }),
        (a, b) => a.or(b),
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
