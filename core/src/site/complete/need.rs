//! The capacity that a chemistry needs for a duty, step by step (R12).

use alloc::string::ToString;
use alloc::vec::Vec;

use uom::si::electric_charge::ampere_hour;
use uom::si::ratio::ratio;
use uom::si::time::{day, hour};

use super::bank::Duty;
use crate::battery::{Chemistry, LeadAcidNeed, LithiumNeed, data, lead_acid_capacity, lithium_capacity};
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::quantity::{ElectricCharge, Ratio, Time};
use crate::site::lines::Step;

/// Capacity that a chemistry needs for a duty, with every step, and the time over which it is drawn.
pub(in crate::site) fn needed(
    chemistry: Chemistry,
    duty: &Duty,
) -> Result<(ElectricCharge, Option<Time>, Vec<Step>), Error> {
    let ah = |what: &str, value: ElectricCharge, citation: Option<Citation>| Step {
        what: what.to_string(),
        value: value.get::<ampere_hour>(),
        unit: "Ah",
        citation,
    };
    let part = |what: &str, value: Ratio, citation: Option<Citation>| Step {
        what: what.to_string(),
        value: value.get::<ratio>(),
        unit: "",
        citation,
    };
    let days = Step {
        what: "days without charge".to_string(),
        value: duty.autonomy.get::<day>(),
        unit: "d",
        citation: Some(duty.autonomy_by),
    };
    let held = data(chemistry);
    let stated = |own: Option<Ratio>, by: Citation| {
        if own.is_some() { Citation::new("the site file", "depth", Seen::Stated) } else { by }
    };
    let mut steps = alloc::vec![ah("demand of the greatest day", duty.daily, None), days];
    let (mut capacity, time) = if matches!(chemistry, Chemistry::Lfp | Chemistry::Nmc) {
        let mut need = LithiumNeed::usual(chemistry, duty.daily, duty.autonomy, duty.coldest, duty.current);
        need.stated_fraction = duty.left;
        need.window = duty.depth.unwrap_or(need.window);
        need.margin = duty.margin.unwrap_or(need.margin);
        let found = lithium_capacity(&need)?;
        steps.push(ah("demand of the autonomy", found.unadjusted, None));
        steps.push(part("usable window", need.window, Some(stated(duty.depth, held.usual_depth.citation))));
        steps.push(ah("over the window", found.by_window, None));
        steps.push(part("left at the end of life", need.end_of_life, Some(held.end_of_life.citation)));
        steps.push(part("left in the cold", found.cold_fraction.value, Some(found.cold_fraction.citation)));
        steps.push(ah("at the end of life, in the cold", found.at_temperature, None));
        steps.push(part("margin", need.margin, None));
        if found.by_current >= found.capacity {
            steps.push(ah("for the current of all loads", found.by_current, None));
        }
        (found.capacity, None)
    } else {
        let mut need = LeadAcidNeed::usual(chemistry, duty.daily, duty.autonomy, duty.coldest, duty.current);
        need.stated_factor = duty.left.map(|left| Ratio::new::<ratio>(1.0) / left);
        need.greatest_depth = duty.depth.unwrap_or(need.greatest_depth);
        need.daily_depth = duty.daily_depth.unwrap_or(need.daily_depth);
        need.margin = duty.margin.unwrap_or(need.margin);
        let found = lead_acid_capacity(&need)?;
        steps.push(ah("demand of the autonomy", found.unadjusted, None));
        steps.push(part(
            "greatest depth",
            need.greatest_depth,
            Some(stated(duty.depth, held.usual_depth.citation)),
        ));
        steps.push(ah("a: autonomy over greatest depth", found.by_autonomy, None));
        steps.push(part(
            "daily depth",
            need.daily_depth,
            Some(stated(duty.daily_depth, held.daily_depth.citation)),
        ));
        steps.push(ah("b: day over daily depth", found.by_daily, None));
        steps.push(part("left at the end of life", need.end_of_life, Some(held.end_of_life.citation)));
        steps.push(ah("c: autonomy over what is left at the end of life", found.by_end_of_life, None));
        steps.push(ah(
            "the greatest of a, b, c",
            found.greatest,
            Some(Citation::new("IEEE Std 1013", "capacity", Seen::Recalled)),
        ));
        steps.push(part(
            "temperature factor",
            found.temperature_factor.value,
            Some(found.temperature_factor.citation),
        ));
        steps.push(part("margin", need.margin, None));
        (found.capacity, found.functional_time)
    };
    steps.push(ah("capacity needed", capacity, None));
    if let Some(least) = duty.least.filter(|least| *least > capacity) {
        steps.push(ah("to take all that the sources give (R11)", least, None));
        capacity = least;
    }
    if let Some(time) = time {
        steps.push(Step {
            what: "drawn in no less than".to_string(),
            value: time.get::<hour>(),
            unit: "h",
            citation: None,
        });
    }
    Ok((capacity, time, steps))
}
