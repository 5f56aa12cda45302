//! All arrangements of a number of modules in series and parallel: which pass, why the others do not, which to prefer.

use arrayvec::ArrayVec;

use super::check::PvCheck;
use super::module::checked;
use super::strings::{Regulation, StringQuestion, check_strings};
use crate::error::{Allowed, Error};

/// No number of modules up to 1000 has more divisors.
const TRIALS: usize = 32;
/// Greatest number of modules.
const MODULES: f64 = 1000.0;

/// Modules in series, and such strings in parallel.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Layout {
    /// Modules in each string.
    pub in_series: u16,
    /// Strings.
    pub in_parallel: u16,
}

impl Layout {
    /// Modules in all.
    pub fn modules(&self) -> u32 {
        u32::from(self.in_series) * u32::from(self.in_parallel)
    }
}

/// Whether parts of the array fall into shade while the rest has sun.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Exposure {
    /// Free from shade in the hours that count.
    Open,
    /// Masts, trees, rigging or gables shade parts of it.
    PartlyShaded,
}

/// One arrangement and what became of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LayoutTrial {
    /// The arrangement.
    pub layout: Layout,
    /// The check that refused it; `None` if none did.
    pub refused: Option<PvCheck>,
    /// How many checks lacked a datum.
    pub not_checked_count: u8,
    /// Whether each string needs a device of its own; `None` where data are missing.
    pub device_required: Option<bool>,
}

/// Why an arrangement is preferred.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Preference {
    /// It alone passes.
    Only,
    /// Shade speaks for parallel.
    ParallelForShade,
    /// A controller that clamps the array speaks for parallel.
    ParallelForClamp,
    /// Else series, up to the controller's highest input voltage.
    Series,
}

impl Preference {
    /// The reason in words.
    pub const fn reason(self) -> &'static str {
        match self {
            Self::Only => "no other arrangement passes",
            Self::ParallelForShade => {
                "parallel, since a shaded module then takes nothing from those in the sun"
            }
            Self::ParallelForClamp => {
                "parallel, since the controller clamps the array to the bank's voltage and more volts would be lost"
            }
            Self::Series => {
                "series, up to the controller's highest input voltage: less current in the cable, and fewer strings to protect"
            }
        }
    }
}

/// All arrangements of a number of modules.
#[derive(Clone, Debug, PartialEq)]
pub struct Layouts {
    /// Every arrangement, fewest in series first.
    pub trials: ArrayVec<LayoutTrial, TRIALS>,
    /// The one to prefer and why; `None` where every one is refused.
    pub preferred: Option<(LayoutTrial, Preference)>,
}

/// Tries every arrangement of a number of modules.
///
/// # Errors
/// [`Error::OutOfRange`] unless there are 1 to 1000 modules, and for a question outside its ranges.
pub fn layouts(question: &StringQuestion<'_>, modules: u16, exposure: Exposure) -> Result<Layouts, Error> {
    checked("modules", f64::from(modules), "", Allowed::Between(1.0, MODULES))?;
    let mut trials: ArrayVec<LayoutTrial, TRIALS> = ArrayVec::new();
    for in_series in (1..=modules).filter(|n| modules % n == 0) {
        let layout = Layout { in_series, in_parallel: modules / in_series };
        let answer = check_strings(question, layout)?;
        let not_made = answer.not_made().count();
        let trial = LayoutTrial {
            layout,
            refused: answer.obstacle().copied(),
            not_checked_count: u8::try_from(not_made).unwrap_or(u8::MAX),
            device_required: answer.device_required,
        };
        if trials.try_push(trial).is_err() {
            break;
        }
    }
    let mut passing = trials.iter().filter(|trial| trial.refused.is_none());
    let preferred = match (passing.next(), passing.next_back()) {
        (None, _) => None,
        (Some(&only), None) => Some((only, Preference::Only)),
        (Some(&first), Some(_)) if exposure == Exposure::PartlyShaded => {
            Some((first, Preference::ParallelForShade))
        }
        (Some(&first), Some(_)) if question.input.regulation == Regulation::Clamped => {
            Some((first, Preference::ParallelForClamp))
        }
        (Some(_), Some(&last)) => Some((last, Preference::Series)),
    };
    Ok(Layouts { trials, preferred })
}
