//! What comes in against what is taken out, month by month (R10, R21).

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use uom::si::energy::watt_hour;

use super::At;
use crate::quantity::Energy;
use crate::site::energy::Demand;
use crate::site::finding::{Findings, digits};
use crate::site::plant_text::MONTHS;
use crate::site::supply::{arrays_of, generators_of};
use crate::site::system::{ChargerKind, Site};

/// Every bank on the mean day of each month.
pub(super) fn balance(site: &Site, demands: &[Demand], found: &mut Findings) {
    for demand in demands {
        let Some(bank) = demand.banks.first().and_then(|&b| site.banks.get(b)) else {
            continue;
        };
        let mut at = At::new(found, format!("bank \"{}\"", bank.name), bank.line);
        let charged = site.chargers.iter().any(|c| c.bank.is_some_and(|b| demand.banks.contains(&b)));
        if !charged {
            // Told as a bank without charge.
            continue;
        }
        let arrays = arrays_of(site, &demand.banks);
        let others = generators_of(site, &demand.banks).get::<watt_hour>();
        if arrays.is_none() && others <= 0.0 {
            at.unmade(
                ("R10", "energy-not-checked"),
                if site.arrays.is_empty() {
                    "energy of the day: what its sources bring is not known; state hours or daily of a generator"
                } else {
                    "energy of the day: the sun is not known; write [weather] with in_plane"
                },
            );
            continue;
        }
        let mut short: Vec<String> = Vec::new();
        let mut worst = f64::INFINITY;
        for (month, day) in demand.mean.iter().enumerate() {
            let sun = arrays.as_ref().and_then(|a| a.get(month)).map_or(0.0, Energy::get::<watt_hour>);
            let (brought, taken) = (sun + others, day.total.get::<watt_hour>());
            if taken <= 0.0 {
                continue;
            }
            worst = worst.min(brought / taken);
            if brought < taken {
                let name = MONTHS.get(month).copied().unwrap_or("");
                short.push(format!("{name} {} of {} Wh", digits(brought), digits(taken)));
            }
        }
        let unknown: Vec<&str> = site
            .chargers
            .iter()
            .filter(|c| c.bank.is_some_and(|b| demand.banks.contains(&b)))
            .filter_map(|c| match c.kind {
                ChargerKind::Generator(i) => site.generators.get(i),
                ChargerKind::Controller(_) => None,
            })
            .filter(|g| g.daily.is_none() && (g.hours.is_none() || g.output.is_none()))
            .map(|g| g.name.as_str())
            .collect();
        if short.is_empty() {
            at.pass("R10", &format!("in the worst month {} times what is taken out comes in", digits(worst)));
        } else if !unknown.is_empty() {
            // What is missing may come from there.
            at.unmade(
                ("R10", "energy-not-checked"),
                &format!(
                    "energy of the day: without {} less comes in than is taken out ({}); state its hours or daily",
                    unknown.join(", "),
                    months_of(&short)
                ),
            );
        } else {
            at.nonconforming(
                ("R10", "energy-short"),
                format!("on the mean day less comes in than is taken out: {}", months_of(&short)),
                "use a larger array, less load in those months, or a generator for longer",
            );
        }
    }
}

/// The short months; one for all where they are alike.
fn months_of(short: &[String]) -> String {
    match short {
        [first, .., last] if short.len() == 12 && first.get(4..) == last.get(4..) => {
            format!("every month {}", first.get(4..).unwrap_or(""))
        }
        list => list.join(", "),
    }
}
