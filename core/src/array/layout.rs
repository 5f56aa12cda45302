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
            Self::Only => "no other arrangement of so many modules passes",
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
///
/// # Example
/// Six modules; the question is that of [`check_strings`]:
/// ```
/// # use ampwright::array::*;
/// # use ampwright::{quantity::parse, rules::Rules};
/// # let points = KeyPoints { voc: parse("22.5 V")?, isc: parse("6.1 A")?, vmp: parse("18.6 V")?, imp: parse("5.38 A")? };
/// # let module = Module::new(ModuleSheet {
/// #     voc_coefficient: Some(parse("-0.3 %/K")?),
/// #     power_coefficient: Some(parse("-0.4 %/K")?),
/// #     series_fuse: Some(parse("15 A")?),
/// #     system_voltage: Some(parse("600 V")?),
/// #     ..ModuleSheet::plain(parse("100 W")?, points)
/// # })?;
/// # let rules = Rules::named("us")?.pv();
/// # let question = StringQuestion {
/// #     module: &module, // 100 W: 22.5 V, 6.1 A
/// #     input: InputLimits {
/// #         greatest_voltage: Some(parse("100 V")?),
/// #         start_margin: Some(parse("5 V")?),
/// #         short_circuit_current: Some(parse("35 A")?),
/// #         output_current: Some(parse("30 A")?),
/// #         ..InputLimits::unknown(Regulation::Tracking)
/// #     },
/// #     coldest: parse("-20 degC")?,
/// #     hottest_cell: parse("70 degC")?,
/// #     cold_factor: rules.cold_factor(parse("-20 degC")?).ok(),
/// #     bank_nominal: parse("12 V")?,
/// #     bank_highest: parse("15.6 V")?,
/// #     drop: parse("2 %")?,
/// #     ageing: parse("0 %")?,
/// #     factors: rules.factors(),
/// #     device: StringDevice::ToChoose,
/// #     ampacity: None,
/// #     back_feed: Some(parse("0 A")?),
/// #     parts: &[],
/// # };
/// let answer = layouts(&question, 6, Exposure::Open)?;
/// let passing: Vec<_> = answer.trials.iter().filter(|t| t.refused.is_none()).map(|t| t.layout.in_series).collect();
/// assert_eq!(passing, [2, 3]);
/// let (chosen, why) = answer.preferred.unwrap();
/// assert_eq!((chosen.layout.in_series, why), (3, Preference::Series));
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn layouts(question: &StringQuestion<'_>, modules: u16, exposure: Exposure) -> Result<Layouts, Error> {
    checked("modules", f64::from(modules), "", Allowed::Between(1.0, MODULES))?;
    let mut trials: ArrayVec<LayoutTrial, TRIALS> = ArrayVec::new();
    for in_series in (1..=modules).filter(|n| modules.is_multiple_of(*n)) {
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

#[cfg(test)]
mod tests {
    extern crate std;
    use std::vec::Vec;

    use super::*;
    use crate::array::sample::{module, q, question};
    use crate::array::{PvOutcome, PvSubject};

    #[test]
    fn every_arrangement_passes_or_says_why_not() {
        let module = module();
        let answer = layouts(&question(&module), 6, Exposure::Open).unwrap();
        let told: Vec<_> = answer
            .trials
            .iter()
            .map(|trial| (trial.layout.in_series, trial.layout.in_parallel, trial.refused.map(|c| c.subject)))
            .collect();
        assert_eq!(
            told,
            [
                // One in series is too low when hot; its current of 45.75 A would exceed the input, too.
                (1, 6, Some(PvSubject::ChargeVoltage)),
                (2, 3, None),
                (3, 2, None),
                (6, 1, Some(PvSubject::ControllerVoltage)),
            ]
        );
        assert!(
            answer.trials.iter().all(|trial| trial.layout.modules() == 6 && trial.not_checked_count == 0)
        );
    }

    #[test]
    fn shade_and_a_clamp_speak_for_parallel_else_series() {
        let module = module();
        let mut asked = question(&module);
        let preferred = |asked: &StringQuestion<'_>, exposure| {
            let (trial, why) = layouts(asked, 6, exposure).unwrap().preferred.unwrap();
            (trial.layout.in_series, why)
        };
        assert_eq!(preferred(&asked, Exposure::Open), (3, Preference::Series));
        assert_eq!(preferred(&asked, Exposure::PartlyShaded), (2, Preference::ParallelForShade));
        asked.input.regulation = Regulation::Clamped;
        asked.input.output_current = Some(q("50 A"));
        assert_eq!(preferred(&asked, Exposure::Open), (2, Preference::ParallelForClamp));
        for why in
            [Preference::Series, Preference::ParallelForShade, Preference::ParallelForClamp, Preference::Only]
        {
            assert!(!why.reason().is_empty());
        }
    }

    #[test]
    fn where_one_passes_it_is_the_only_one_and_where_none_does_none_is_preferred() {
        let module = module();
        let mut asked = question(&module);
        let (only, why) = layouts(&asked, 3, Exposure::PartlyShaded).unwrap().preferred.unwrap();
        assert_eq!((only.layout.in_series, why), (3, Preference::Only));
        asked.input.greatest_voltage = Some(q("20 V"));
        let none = layouts(&asked, 6, Exposure::Open).unwrap();
        assert!(none.preferred.is_none() && none.trials.iter().all(|trial| trial.refused.is_some()));
        // A limit that nobody states refuses nothing and is counted.
        asked.input.greatest_voltage = None;
        let unknown = layouts(&asked, 6, Exposure::Open).unwrap();
        assert!(unknown.trials.iter().all(|trial| trial.not_checked_count == 1));
        assert_eq!(unknown.preferred.unwrap().0.layout.in_series, 6);
    }

    #[test]
    fn all_divisors_of_any_number_fit() {
        let module = module();
        let asked = question(&module);
        for modules in 1..=1000_u16 {
            let divisors = (1..=modules).filter(|n| modules.is_multiple_of(*n)).count();
            assert!(divisors <= TRIALS);
        }
        let answer = layouts(&asked, 840, Exposure::Open).unwrap();
        assert_eq!(answer.trials.len(), 32);
        assert!(answer.trials.iter().any(|t| t.refused.is_some_and(|c| c.outcome == PvOutcome::Failed)));
        assert!(
            layouts(&asked, 0, Exposure::Open).is_err() && layouts(&asked, 1001, Exposure::Open).is_err()
        );
    }
}
