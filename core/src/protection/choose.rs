//! Which rating of a family is chosen.

use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;

use crate::device::{Device, Family, Polarity, Supply};
use crate::error::Error;
use crate::quantity::{ConductorSize, ElectricCurrent, ElectricPotential, Ratio};

/// A device with what is known of its unit: what a run's checks need beyond the family.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Guard {
    /// The device.
    pub device: Device,
    /// I²t let through at the greatest prospective current, A²·s, where stated.
    pub let_through_A2s: Option<f64>,
    /// Least and greatest conductor its terminals take, where stated.
    pub terminal_range: Option<(ConductorSize, ConductorSize)>,
    /// Temperature rating of its terminals, °C, where marked.
    pub terminal_degC: Option<f64>,
}

/// Devices that can be had: one family in several ratings.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Offer<'a> {
    /// Family.
    pub family: Family,
    /// Ratings in amperes, ascending; empty means all of the family's standard ratings.
    pub ratings_A: &'a [f64],
    /// Supply they are rated for.
    pub supply: Supply,
    /// Interrupting rating on DC.
    pub breaking: Option<ElectricCurrent>,
    /// Polarity.
    pub polarity: Polarity,
    /// Stated to carry 100 % of the rating continuously.
    pub full_rated: bool,
    /// I²t let through, A²·s.
    pub let_through_A2s: Option<f64>,
    /// Conductors the terminals take.
    pub terminal_range: Option<(ConductorSize, ConductorSize)>,
    /// Marked temperature rating of the terminals, °C.
    pub terminal_degC: Option<f64>,
}

impl Offer<'_> {
    /// All standard ratings of a family, rated for DC up to a voltage, with a stated breaking capacity; not marked
    /// for polarity, and nothing more known. Change the fields that are.
    ///
    /// # Example
    /// ```
    /// # use ampwright::{device::Family, protection::Offer};
    /// # use uom::si::{f64::*, electric_current::kiloampere, electric_potential::volt};
    /// let fuses = Offer::standard(
    ///     Family::Gg,
    ///     ElectricPotential::new::<volt>(80.0),
    ///     ElectricCurrent::new::<kiloampere>(25.0),
    /// );
    /// assert!(fuses.let_through_A2s.is_none() && !fuses.full_rated);
    /// ```
    pub const fn standard(family: Family, upto: ElectricPotential, breaking: ElectricCurrent) -> Self {
        Self {
            family,
            ratings_A: &[],
            supply: Supply::Dc(upto),
            breaking: Some(breaking),
            polarity: Polarity::None,
            full_rated: false,
            let_through_A2s: None,
            terminal_range: None,
            terminal_degC: None,
        }
    }
}

/// Least rating that carries a current: continuous part over the share a device carries for hours, plus the rest.
///
/// `factor` is the rule set's factor on continuous current (1.25, or 1). A device stated for 100 % needs neither.
///
/// | input | unit | valid |
/// | --- | --- | --- |
/// | `continuous` | A | three hours or more |
/// | `other` | A | the rest |
/// | `carries` | 1 | > 0 … 1; the family's continuous ratio |
///
/// # Source
/// Rules rules R4 and R5, guide `rules`: continuous load at most 80 % of a device unless it is rated for 100 %; NFPA 70-2023,
/// 210.20(A) and 215.3 give the factor 1.25 (page seen). Never multiplied together: the larger factor counts.
///
/// # Example
/// ```
/// # use ampwright::protection::least_rating;
/// # use uom::si::{f64::*, electric_current::ampere, ratio::ratio};
/// let need = least_rating(
///     ElectricCurrent::new::<ampere>(89.6),
///     ElectricCurrent::new::<ampere>(0.0),
///     Ratio::new::<ratio>(0.8),
///     false,
///     1.25,
/// );
/// assert!((need.get::<ampere>() - 112.0).abs() < 1e-9);
/// ```
pub fn least_rating(
    continuous: ElectricCurrent,
    other: ElectricCurrent,
    carries: Ratio,
    full_rated: bool,
    factor: f64,
) -> ElectricCurrent {
    let continuous_factor = if full_rated { 1.0 } else { factor.max(1.0 / carries.get::<ratio>()) };
    continuous_factor * continuous + other
}

/// The smallest rating of an offer that is not below a need.
///
/// `need` is asked for each rating, since what is needed may depend on the device (a family's 80 %, a device that
/// carries 100 %): [`least_rating`] gives it. A need of NaN is met by none. Whether the choice also protects the
/// conductor, and breaks what the place can deliver, [`crate::circuit`] checks.
///
/// # Errors
/// [`Error::NoneFits`] where the offer ends below the need.
///
/// # Source
/// Rules R4 and R22 (guide `rules`): choosing from standard ratings is a step of its own.
///
/// # Example
/// An inverter that draws 89.6 A in its worst hour, under a set with the factor 1.25:
/// ```
/// # use ampwright::{device::Family, protection::{Offer, choose, least_rating}};
/// # use uom::si::{f64::*, electric_current::ampere, electric_potential::volt, ratio::ratio};
/// let amperes = ElectricCurrent::new::<ampere>;
/// let fuses = Offer::standard(Family::ClassT, ElectricPotential::new::<volt>(125.0), amperes(20_000.0));
/// let carries = Ratio::new::<ratio>(fuses.family.data().continuous_ratio);
/// let need = least_rating(amperes(89.6), amperes(0.0), carries, fuses.full_rated, 1.25);
/// let guard = choose(&fuses, |_| need)?;
/// assert_eq!(guard.device.rating, amperes(125.0));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn choose(offer: &Offer<'_>, need: impl Fn(&Device) -> ElectricCurrent) -> Result<Guard, Error> {
    let ratings = if offer.ratings_A.is_empty() { offer.family.ratings_A() } else { offer.ratings_A };
    for &rating in ratings {
        let device = Device {
            family: offer.family,
            rating: ElectricCurrent::new::<ampere>(rating),
            supply: offer.supply,
            breaking: offer.breaking,
            polarity: offer.polarity,
            full_rated: offer.full_rated,
        };
        if device.rating >= need(&device) {
            return Ok(Guard {
                device,
                let_through_A2s: offer.let_through_A2s,
                terminal_range: offer.terminal_range,
                terminal_degC: offer.terminal_degC,
            });
        }
    }
    Err(Error::NoneFits {
        what: "device rating",
        remedy: "the offer ends below the design current; add larger ratings or another family, or split the load",
    })
}
