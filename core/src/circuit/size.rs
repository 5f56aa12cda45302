//! Sizes one run: the smallest conductor that passes every check, with the reason each smaller one fell.

use arrayvec::ArrayVec;

use super::checked::Checked;
use super::judge::{Judgement, judge};
use super::run::Run;
use crate::cable::Conductor;
use crate::device::Family;
use crate::error::Error;
use crate::protection::{Guard, Offer, choose, least_rating};
use crate::quantity::{ConductorSize, ElectricCurrent, Ratio};
use uom::si::electric_current::ampere;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

/// A size that was not taken, and the first check it failed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Rejected {
    /// The size.
    pub size: ConductorSize,
    /// Why: the failed check; `None` where the run could not carry its power at all, or no device fitted.
    pub failed: Option<Checked>,
    /// The error in that case.
    pub error: Option<Error>,
}

/// Why the size is what it is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Governing {
    /// The check that refused the next smaller size.
    Check(Checked),
    /// The next smaller size had no solution or no device.
    Impossible(Error),
    /// No smaller size was offered.
    SmallestOffered,
}

/// A sized run.
#[derive(Clone, Debug, PartialEq)]
pub struct SizedRun {
    /// The conductor taken, for both poles.
    pub conductor: Conductor,
    /// The device taken, where one was asked for.
    pub guard: Option<Guard>,
    /// Temperature rating that lugs and terminals must have for this size to hold, °C (R4).
    pub terminal_degC: f64,
    /// Least rating of every switch, relay, busbar, shunt, connector and holder in the path: its device's, or the
    /// design current where there is no device (R8).
    pub part_rating: ElectricCurrent,
    /// What decided.
    pub governing: Governing,
    /// Smaller sizes, each with its reason, smallest first.
    pub rejected: ArrayVec<Rejected, 48>,
    /// The checks of what was taken.
    pub judgement: Judgement,
}

/// Sizes a run from conductors and devices that can be had.
///
/// `conductors` stand in ascending order of size. For each, the devices of `offers` are tried in their order, with
/// the smallest rating that carries the current; the first combination without a failed check is taken. With no
/// offer the run is sized without a device. A check that cannot be made does not stop a size: it stays in the
/// judgement, and in the report.
///
/// # Errors
/// [`Error::NoneFits`] where no conductor offered passes; errors of [`judge`] for numbers out of range.
///
/// # Example
/// ```
/// # use ampwright::{cable::*, circuit::*, device::*, protection::Offer, quantity::ConductorSize, rules::Rules};
/// # use uom::si::{f64::*, electric_current::ampere, electric_potential::volt, length::meter, power::watt};
/// // An inverter that takes 1412 W from a 24 V bank, 2 m away, at cut-off.
/// let mut run = Run::plain(
///     Rules::named("iec")?,
///     ElectricPotential::new::<volt>(24.0),
///     Length::new::<meter>(2.0),
///     Demand::Power { power: Power::new::<watt>(1412.0), continuous: true },
/// );
/// run.beginning = ElectricPotential::new::<volt>(21.0);
/// let insulation = "PVC 70 degC".parse()?;
/// let cables: Vec<Conductor> = METRIC_SERIES
///     .iter()
///     .map(|&size| Conductor {
///         size,
///         material: Material::Copper,
///         class: Class::Flexible,
///         coating: Coating::Plain,
///         insulation,
///     })
///     .collect();
/// let fuses = Offer {
///     family: Family::Gg,
///     ratings_A: &[],
///     supply: Supply::Dc(ElectricPotential::new::<volt>(250.0)),
///     breaking: Some(ElectricCurrent::new::<ampere>(20_000.0)),
///     polarity: Polarity::None,
///     full_rated: false,
///     let_through_A2s: None,
///     terminal_range: None,
///     terminal_degC: None,
/// };
/// let sized = size_run(&run, &cables, &[fuses])?;
/// assert_eq!(sized.guard.map(|g| g.device.rating.get::<ampere>()), Some(80.0));
/// assert!(sized.rejected.iter().all(|r| r.size.area() < sized.conductor.size.area()));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn size_run(run: &Run, conductors: &[Conductor], offers: &[Offer<'_>]) -> Result<SizedRun, Error> {
    let mut rejected: ArrayVec<Rejected, 48> = ArrayVec::new();
    let mut governing = Governing::SmallestOffered;
    for conductor in conductors {
        let outcome = try_conductor(run, conductor, offers)?;
        let (failed, error) = match outcome {
            Ok((guard, judgement)) => {
                return Ok(SizedRun {
                    conductor: *conductor,
                    guard,
                    terminal_degC: terminal_degC(run, conductor, &judgement),
                    part_rating: guard.map_or(judgement.current, |g| g.device.rating),
                    governing,
                    rejected,
                    judgement,
                });
            }
            Err(reason) => reason,
        };
        governing = match (failed, error) {
            (Some(check), _) => Governing::Check(check),
            (None, Some(error)) => Governing::Impossible(error),
            (None, None) => Governing::SmallestOffered,
        };
        // Beyond the room the smallest are already told; the last reason is kept in `governing`.
        let _ = rejected.try_push(Rejected { size: conductor.size, failed, error });
    }
    Err(match governing {
        Governing::Impossible(error) => error,
        Governing::Check(_) | Governing::SmallestOffered => Error::NoneFits {
            what: "conductor size",
            remedy: "offer larger conductors, shorten the run, split the load or raise the voltage",
        },
    })
}

/// Least rating of a family that carries what a run draws, and rides through its start: a breaker must not trip at
/// once, a fuse must carry the start for good, since its curve is not held.
pub fn device_need(run: &Run, judged: &Judgement, family: Family, full_rated: bool) -> ElectricCurrent {
    let data = family.data();
    let carries = Ratio::new::<ratio>(data.continuous_ratio);
    let factor = run.rules.continuous_factor().value;
    let other = judged.current - judged.continuous;
    let need = least_rating(judged.continuous, other, carries, full_rated, factor);
    match (data.instantaneous, run.start) {
        (Some((lower, _)), Some(extra)) => {
            let start = (judged.current + extra) / lower;
            if start > need { start } else { need }
        }
        // The curves between are not held: it is chosen so that it carries the start as long as it likes.
        (None, Some(extra)) => {
            let start = judged.current + extra;
            let ridden = family.non_operating_ratio(start).map_or(need, |multiple| start / multiple);
            if ridden > need { ridden } else { need }
        }
        _ => need,
    }
}

/// Rating the terminals must have: under `us` that of the column the terminal check used, else the counted one.
fn terminal_degC(run: &Run, conductor: &Conductor, judged: &Judgement) -> f64 {
    let Some(rule) = run.rules.set().terminal else { return judged.counted_degC };
    let factor = run.rules.continuous_factor().value;
    let need = factor * judged.continuous + (judged.current - judged.continuous);
    let marked = run.terminal.map(|t| t.get::<degree_celsius>());
    let usual = if need.get::<ampere>() <= rule.upto_A { rule.low_degC } else { rule.high_degC };
    marked.map_or(usual, |m| m.min(rule.high_degC)).min(conductor.insulation.rating_degC())
}

/// Why a conductor was refused.
type Reason = (Option<Checked>, Option<Error>);

/// Tries every offer on one conductor. The outer error stops the sizing, the inner one only this conductor.
fn try_conductor(
    run: &Run,
    conductor: &Conductor,
    offers: &[Offer<'_>],
) -> Result<Result<(Option<Guard>, Judgement), Reason>, Error> {
    let bare = match judge(run, conductor, conductor, None) {
        Ok(judged) => judged,
        Err(error @ Error::NoSolution { .. }) => return Ok(Err((None, Some(error)))),
        Err(error) => return Err(error),
    };
    if offers.is_empty() {
        return Ok(match bare.first_obstacle() {
            Some(failed) => Err((Some(*failed), None)),
            None => Ok((None, bare)),
        });
    }
    let mut reason: Reason = (bare.first_obstacle().copied(), None);
    for offer in offers {
        let need = device_need(run, &bare, offer.family, offer.full_rated);
        let guard = match choose(offer, |_| need) {
            Ok(guard) => guard,
            Err(error) => {
                if reason.0.is_none() && reason.1.is_none() {
                    reason.1 = Some(error);
                }
                continue;
            }
        };
        let judged = judge(run, conductor, conductor, Some(&guard))?;
        match judged.first_obstacle() {
            None => return Ok(Ok((Some(guard), judged))),
            Some(failed) => {
                if reason.0.is_none() {
                    reason = (Some(*failed), None);
                }
            }
        }
    }
    Ok(Err(reason))
}
