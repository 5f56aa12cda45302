//! What each rule set asks of photovoltaic arrays. Const data; a set that holds nothing on a point says `None`, and the check
//! that needs it is not made.

use uom::si::thermodynamic_temperature::degree_celsius;

use super::answer::Rules;
use super::query::{Key, Limit};
use crate::array::{Cited, PvFactors};
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::ThermodynamicTemperature;

/// A row of a table of cold-voltage factors: both ends of the band in °C, warmer first, and the factor.
pub type ColdRow = (f64, f64, f64);

/// Factors on rated open-circuit voltage at low ambient temperature, for a module without a coefficient.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ColdTable {
    /// Rows, warmest first.
    pub rows: &'static [ColdRow],
    /// Source.
    pub citation: Citation,
}

/// What a rule set asks of photovoltaic arrays.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PvRule {
    /// For light brighter than the standard 1000 W/m².
    pub irradiance_factor: Option<Limit<f64>>,
    /// On current that flows for hours.
    pub continuous_factor: Option<Limit<f64>>,
    /// Least rating of a string's device over the short-circuit current.
    pub device_least: Option<Limit<f64>>,
    /// Greatest rating of a string's device over the short-circuit current; the module's series-fuse rating counts in every set.
    pub device_most: Option<Limit<f64>>,
    /// Factors for modules without a coefficient of open-circuit voltage.
    pub cold: Option<ColdTable>,
    /// Greatest voltage of an array, V.
    pub greatest_voltage: Option<Limit<f64>>,
    /// Earth-fault protection or insulation monitoring is required from this voltage on, V.
    pub earth_fault_from: Option<Limit<f64>>,
    /// Arc-fault protection is required from this voltage on, V.
    pub arc_fault_from: Option<Limit<f64>>,
    /// An isolator that opens under load is required between array and converter.
    pub isolator: Option<Limit<bool>>,
    /// Above this voltage live parts are kept out of reach, V.
    pub touch_from: Option<Limit<f64>>,
}

const fn us<T: Copy>(value: T, place: &'static str) -> Limit<T> {
    Limit { value, citation: Citation::new("NFPA 70-2023", place, Seen::Recalled) }
}

const fn iec<T: Copy>(value: T, place: &'static str) -> Limit<T> {
    Limit { value, citation: Citation::new("IEC 62548:2016", place, Seen::Recalled) }
}

/// Source: NFPA 70-2023, Table 690.7(A), crystalline and multicrystalline silicon, recalled. IEC 62548 prints the same figures.
#[rustfmt::skip]
const COLD_ROWS: [ColdRow; 13] = [
    (24.0, 20.0, 1.02),
    (19.0, 15.0, 1.04),
    (14.0, 10.0, 1.06),
    (9.0, 5.0, 1.08),
    (4.0, 0.0, 1.10),
    (-1.0, -5.0, 1.12),
    (-6.0, -10.0, 1.14),
    (-11.0, -15.0, 1.16),
    (-16.0, -20.0, 1.18),
    (-21.0, -25.0, 1.20),
    (-26.0, -30.0, 1.21),
    (-31.0, -35.0, 1.23),
    (-36.0, -40.0, 1.25),
];

static US: PvRule = PvRule {
    irradiance_factor: Some(us(1.25, "690.8(A)(1)(a)")),
    continuous_factor: Some(us(1.25, "690.8(B)(1)")),
    device_least: Some(us(1.5625, "690.9(B)(1)")),
    device_most: None,
    cold: Some(ColdTable {
        rows: &COLD_ROWS,
        citation: Citation::new("NFPA 70-2023", "Table 690.7(A)", Seen::Recalled),
    }),
    greatest_voltage: Some(us(600.0, "690.7, one- and two-family dwellings")),
    earth_fault_from: Some(us(30.0, "690.41(B)")),
    arc_fault_from: Some(us(80.0, "690.11")),
    isolator: Some(us(true, "690.13, 690.15")),
    touch_from: Some(us(30.0, "690.31(A)")),
};

static IEC: PvRule = PvRule {
    irradiance_factor: Some(iec(1.25, "6.5, maximum current of a string")),
    continuous_factor: Some(iec(1.0, "no factor on continuous current")),
    device_least: Some(iec(1.5, "6.5.3")),
    device_most: Some(iec(2.4, "6.5.3")),
    cold: Some(ColdTable {
        rows: &COLD_ROWS,
        citation: Citation::new(
            "IEC 62548:2016",
            "voltage correction factors, the maker's coefficient first",
            Seen::Recalled,
        ),
    }),
    greatest_voltage: Some(iec(1000.0, "7.2, arrays on buildings")),
    earth_fault_from: Some(iec(60.0, "6.4, arrays above DVC-A")),
    arc_fault_from: None,
    isolator: Some(iec(true, "7.4, switch-disconnector")),
    touch_from: Some(Limit {
        value: 60.0,
        citation: Citation::new("IEC 60364-4-41:2005", "414.4.5", Seen::Recalled),
    }),
};

// The craft books hold nothing on arrays that we know of, beyond what they ask of every circuit.
static CRAFT: PvRule = PvRule {
    irradiance_factor: None,
    continuous_factor: None,
    device_least: None,
    device_most: None,
    cold: None,
    greatest_voltage: None,
    earth_fault_from: None,
    arc_fault_from: None,
    isolator: None,
    touch_from: None,
};

/// Where a set holds no factor for bright light, conductors are still chosen for it.
const PRACTICE_IRRADIANCE: Cited = Cited {
    value: 1.25,
    citation: Citation::new("common practice, no source", "1.25 for bright light", Seen::Practice),
};

/// Temperature at which modules are rated, °C.
const RATED_DEGC: f64 = 25.0;

impl PvRule {
    /// The factors as the array's room takes them.
    ///
    /// Where the set holds none for bright light, 1.25 as common practice; none for hours, 1.
    pub fn factors(&self) -> PvFactors {
        let cited = |limit: Option<Limit<f64>>| {
            limit.map(|limit| Cited { value: limit.value, citation: limit.citation })
        };
        let none = Cited { value: 1.0, citation: PRACTICE_IRRADIANCE.citation };
        PvFactors {
            irradiance: cited(self.irradiance_factor).unwrap_or(PRACTICE_IRRADIANCE),
            continuous: cited(self.continuous_factor).unwrap_or(none),
            device_least: cited(self.device_least),
            device_most: cited(self.device_most),
            greatest_voltage: cited(self.greatest_voltage),
        }
    }

    /// Factor on rated open-circuit voltage at the coldest ambient, for a module without a coefficient.
    ///
    /// 1 from 25 °C on, where the module is rated; between two bands, which are whole degrees, the colder counts.
    ///
    /// # Errors
    /// [`Error::NotTabulated`] where the set holds no table, [`Error::TableEnds`] below its coldest band,
    /// [`Error::OutOfRange`] for a temperature that is not finite.
    pub fn cold_factor(&self, coldest: ThermodynamicTemperature) -> Result<Cited, Error> {
        let celsius = coldest.get::<degree_celsius>();
        if !celsius.is_finite() {
            let (value, allowed) = (celsius, Allowed::Finite);
            return Err(Error::OutOfRange { name: "coldest", value, unit: "degC", allowed });
        }
        let Some(table) = self.cold else {
            return Err(Error::NotTabulated {
                what: "the cold open-circuit voltage of a module without a coefficient",
                table: Citation::new("the rule set", "cold-voltage factors", Seen::Derived),
                remedy: "state the module's coefficient of open-circuit voltage",
            });
        };
        if celsius >= RATED_DEGC {
            return Ok(Cited { value: 1.0, citation: table.citation });
        }
        match table.rows.iter().find(|&&(_, cold, _)| celsius >= cold) {
            Some(&(_, _, value)) => Ok(Cited { value, citation: table.citation }),
            None => Err(Error::TableEnds {
                what: "the coldest morning",
                value: celsius,
                unit: "degC",
                table: table.citation,
                end: "ends at -40 degC",
                remedy: "state the module's coefficient of open-circuit voltage",
            }),
        }
    }
}

impl Rules {
    /// What the set asks of photovoltaic arrays.
    ///
    /// ```
    /// use ampwright::{quantity::parse, rules::Rules};
    /// let pv = Rules::named("us")?.pv();
    /// assert_eq!(pv.factors().irradiance.value, 1.25);
    /// assert_eq!(pv.cold_factor(parse("-10 degC")?)?.value, 1.14);
    /// assert!(Rules::named("craft_us")?.pv().cold_factor(parse("-10 degC")?).is_err());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn pv(&self) -> &'static PvRule {
        match self.set().key {
            Key::Us => &US,
            Key::Iec => &IEC,
            Key::CraftIso | Key::CraftUs => &CRAFT,
        }
    }
}
