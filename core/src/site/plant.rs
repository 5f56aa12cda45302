//! What boards, consumers and banks are inspected for (R3, R8, R11, R19).

use alloc::collections::{BTreeMap, BTreeSet};
use alloc::format;
use alloc::string::ToString;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;

use super::bank::cells;
use super::check::At;
use super::check::bank::drawn;
use super::check::place::touch;
use super::finding::{Findings, Severity, digits};
use super::graph::Item;
use super::model::Board;
use super::parts::Monitoring;
use super::plan::{Plan, sources};
use super::system::{BankEntry, Site};
use crate::battery::cell_voltages;
use crate::citation::{Citation, Seen};
use crate::protection::Earthing;

/// Upper limit of extra-low voltage, DC, V.
const EXTRA_LOW_V: f64 = 120.0;
/// Most lugs on one stud (R8).
const LUGS: u32 = 4;

/// What each busbar must carry, A, and what of: all that its sources let pass, or all that its loads draw (R7, R8); in the
/// order of the boards.
pub(super) fn busbar_needs(site: &Site, plan: &Plan) -> Vec<(f64, &'static str)> {
    // What feeds each board and what it feeds, by its name.
    let mut sums: BTreeMap<&str, (f64, f64)> =
        site.boards.iter().map(|board| (board.name.as_str(), (0.0, 0.0))).collect();
    let chargers: BTreeSet<&str> = site.chargers.iter().map(|c| c.name.as_str()).collect();
    for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
        let Some(planned) = planned else { continue };
        let current = planned.judgement.current.get::<ampere>();
        let (from, to) = (circuit.from.as_str(), circuit.to.as_str());
        for (own, other, towards) in [(to, from, planned.feeds.from), (from, to, planned.feeds.to)] {
            let Some((fed, drawn)) = sums.get_mut(own) else { continue };
            // A charger limits itself: no device stands for it.
            if chargers.contains(other) {
                *fed += current;
            } else if towards {
                *fed += planned.fitted.first().map_or(current, |f| f.guard.device.rating.get::<ampere>());
            } else {
                *drawn += current;
            }
        }
    }
    let need = |board: &Board| {
        let (fed, drawn) = sums.get(board.name.as_str()).copied().unwrap_or((0.0, 0.0));
        if fed >= drawn { (fed, "the devices and sources that feed it") } else { (drawn, "its loads") }
    };
    site.boards.iter().map(need).collect()
}

/// Busbars and studs (R8).
pub(super) fn boards(site: &Site, plan: &Plan, found: &mut Findings) {
    for (board, (need, what)) in site.boards.iter().zip(busbar_needs(site, plan)) {
        let place = format!("board \"{}\"", board.name);
        match board.busbar.map(|b| b.get::<ampere>()) {
            None if board.designed => {
                found.pass("R8", &place, &format!("busbar to be bought for at least {} A", digits(need)));
            }
            None => found.add(
                Severity::NotChecked,
                "R8",
                "busbar-rating-not-stated",
                place.clone(),
                board.line,
                "check not made: rated current of the busbar; state busbar".to_string(),
                None,
                "",
            ),
            Some(rating) if rating < need => found.add(
                Severity::Danger,
                "R8",
                "busbar-below-sum",
                place.clone(),
                board.line,
                format!("busbar rated {} A, but {what} let {} A pass", digits(rating), digits(need)),
                None,
                "use a busbar rated for the sum of its sources or loads, whichever is greater",
            ),
            Some(rating) => {
                found.pass(
                    "R8",
                    &place,
                    &format!("busbar rated {} A, at least {} A", digits(rating), digits(need)),
                );
            }
        }
        if let Some(lugs) = board.lugs_on_stud.filter(|&l| l > LUGS) {
            found.add(
                Severity::Nonconforming,
                "R8",
                "too-many-lugs",
                place,
                board.line,
                format!("{lugs} lugs on one stud, at most {LUGS}, the heaviest at the base"),
                None,
                "spread them over more studs or a busbar",
            );
        }
    }
}

/// Supply range of loads and inverters against the highest voltage (R3).
pub(super) fn consumers(site: &Site, plan: &Plan, found: &mut Findings) {
    for tree in &plan.trees {
        for node in &tree.nodes {
            let Some(Some(planned)) = node.circuit.and_then(|c| plan.circuits.get(c)) else { continue };
            let (place, line, least, greatest) = match node.item {
                Item::Load(i) => match site.loads.get(i) {
                    Some(l) => (format!("load \"{}\"", l.name), l.line, l.least, l.greatest),
                    None => continue,
                },
                Item::Inverter(i) => match site.inverters.get(i) {
                    Some(v) => (format!("inverter \"{}\"", v.name), v.line, v.least, v.greatest),
                    None => continue,
                },
                Item::ConverterInput(i) => match site.converters.get(i) {
                    Some(c) => (format!("converter \"{}\"", c.name), c.line, c.least, c.greatest),
                    None => continue,
                },
                Item::Bank(_) | Item::Board(_) | Item::Charger(_) | Item::ControllerInput(_) => continue,
            };
            let highest = planned.flow.highest;
            match greatest.map(|g| g.get::<volt>()) {
                Some(greatest) if greatest < highest => found.add(
                    Severity::Nonconforming,
                    "R3",
                    "voltage-too-high-at-load",
                    place.clone(),
                    line,
                    format!(
                        "bears {} V, but the bank reaches {} V while it is charged cold",
                        digits(greatest),
                        digits(highest)
                    ),
                    None,
                    "use a load for the full range, a converter, or disconnect it while equalising",
                ),
                Some(greatest) => found.pass(
                    "R3",
                    &place,
                    &format!("bears {} V, the bank reaches {} V", digits(greatest), digits(highest)),
                ),
                None => found.add(
                    Severity::NotChecked,
                    "R3",
                    "greatest-voltage-not-stated",
                    place.clone(),
                    line,
                    format!(
                        "check not made: greatest supply voltage against {} V; state greatest",
                        digits(highest)
                    ),
                    None,
                    "",
                ),
            }
            if least.is_none() {
                found.add(
                    Severity::NotChecked,
                    "R3",
                    "least-voltage-not-stated",
                    place,
                    line,
                    format!(
                        "check not made: least supply voltage against {} V at cut-off; state least",
                        digits(planned.judgement.end_voltage.get::<volt>())
                    ),
                    None,
                    "",
                );
            }
        }
    }
}

/// Banks that are joined must be alike (R15).
fn unlike_banks(site: &Site, plan: &Plan, found: &mut Findings) {
    for tree in &plan.trees {
        let mut banks = tree.nodes.iter().filter_map(|n| match n.item {
            Item::Bank(i) => site.banks.get(i).filter(|b| b.is_battery()),
            _ => None,
        });
        let Some(first) = banks.next() else { continue };
        for other in banks {
            let place = format!("bank \"{}\"", other.name);
            let pair =
                |a: f64, b: f64| format!("{} V beside {} V of \"{}\"", digits(b), digits(a), first.name);
            let (a, b) = (first.nominal.get::<volt>(), other.nominal.get::<volt>());
            // LFP of 12.8 V stands for 12 V: the label alone is no danger, half a cell more is.
            if libm::fabs(a - b) > 0.1 * a {
                found.add(
                    Severity::Danger,
                    "R15",
                    "banks-of-unlike-voltage",
                    place,
                    other.line,
                    format!("joined by conductors: {}", pair(a, b)),
                    None,
                    "join them through a converter made for it, never by a cable",
                );
                continue;
            }
            if let (Some(one), Some(two)) = (first.chemistry(), other.chemistry())
                && one != two
            {
                found.add(
                    Severity::Nonconforming,
                    "R15",
                    "banks-of-unlike-chemistry",
                    place.clone(),
                    other.line,
                    format!(
                        "{} beside {} of \"{}\": they neither share nor charge alike",
                        two, one, first.name
                    ),
                    None,
                    "join them through a converter or a selector, or use one chemistry",
                );
            }
            let (a, b) = (first.highest.get::<volt>(), other.highest.get::<volt>());
            if libm::fabs(a - b) > 0.02 * a {
                found.add(
                    Severity::Nonconforming,
                    "R15",
                    "banks-of-unlike-charge-voltage",
                    place,
                    other.line,
                    format!("highest voltage {}", pair(a, b)),
                    None,
                    "charge them apart, or set both to the lower",
                );
            }
        }
    }
}

/// What a bank states against what its cells do (R11): every voltage check rests on it.
fn plausible(bank: &BankEntry, place: &str, found: &mut Findings) {
    let Some(chemistry) = bank.chemistry() else { return };
    let cells = cells(bank, chemistry).0;
    let limits = cell_voltages(chemistry);
    let (highest, cut_off) = (bank.highest.get::<volt>() / cells, bank.cut_off.get::<volt>() / cells);
    if highest < limits.charge_V {
        found.add(
            Severity::Nonconforming,
            "R11",
            "highest-below-charge-voltage",
            place,
            bank.line,
            format!(
                "highest {} V is {} V a cell; charging takes {} V and more",
                digits(bank.highest.get::<volt>()),
                digits(highest),
                digits(limits.charge_V)
            ),
            Some(limits.citation),
            "state the highest voltage that charging reaches, cold",
        );
    }
    if cut_off < limits.empty_V {
        found.add(
            Severity::Nonconforming,
            "R14",
            "cut-off-below-cell-limit",
            place,
            bank.line,
            format!(
                "cut-off {} V is {} V a cell; below {} V it is harmed",
                digits(bank.cut_off.get::<volt>()),
                digits(cut_off),
                digits(limits.empty_V)
            ),
            Some(limits.citation),
            "disconnect earlier",
        );
    }
    if let (Some(amps), Some(ohms)) = (bank.short_circuit, bank.internal_resistance) {
        let by_resistance = bank.highest.get::<volt>() / ohms.value;
        let ratio = by_resistance / amps.get::<ampere>();
        if !(0.5..=2.0).contains(&ratio) {
            found.add(
                Severity::Nonconforming,
                "R6",
                "fault-data-contradict",
                place,
                bank.line,
                format!(
                    "short_circuit {} A stands beside a resistance that gives {} A",
                    digits(amps.get::<ampere>()),
                    digits(crate::circuit::upper_bound(by_resistance))
                ),
                None,
                "state the one that the maker gives or that was measured",
            );
        }
    }
}

/// Banks: discharge limit, touch voltage, what is known of the fault current.
pub(super) fn banks(site: &Site, plan: &Plan, found: &mut Findings) {
    for (index, bank) in site.banks.iter().enumerate().filter(|(_, bank)| bank.is_battery()) {
        let place = format!("bank \"{}\"", bank.name);
        let drawn = drawn(site, plan, &bank.name).get::<ampere>();
        plausible(bank, &place, found);
        let is_told = bank.part.as_ref().is_some_and(|p| p.designed || p.take_off.is_some());
        if bank.strings > 2 && !is_told && !site.is_whole {
            found.add(
                Severity::NotChecked,
                "R15",
                "strings-not-checked",
                place.clone(),
                bank.line,
                format!("check not made: how {} parallel strings share, and their own devices", bank.strings),
                None,
                "lead equal cables with a device each from every string to a busbar",
            );
        }
        let lugs = site.circuits.iter().filter(|c| c.from == bank.name || c.to == bank.name).count();
        if lugs > LUGS as usize {
            found.add(
                Severity::Nonconforming,
                "R8",
                "too-many-lugs",
                place.clone(),
                bank.line,
                format!("{lugs} circuits on each terminal, at most {LUGS} lugs on one stud"),
                None,
                "lead one cable to a busbar and spread them there",
            );
        }
        if bank.greatest_discharge.is_none() {
            found.add(
                Severity::NotChecked,
                "R11",
                "discharge-limit-not-stated",
                place.clone(),
                bank.line,
                format!(
                    "check not made: {} A in the worst hour against what the bank may give; state \
                     greatest_discharge",
                    digits(drawn)
                ),
                None,
                "",
            );
        }
        if let Some(limit) = bank.greatest_discharge.map(|a| a.get::<ampere>())
            && drawn > limit
        {
            found.add(
                Severity::Nonconforming,
                "R11",
                "discharge-above-limit",
                place.clone(),
                bank.line,
                format!(
                    "{} A in the worst hour with this bank alone, at most {} A",
                    digits(drawn),
                    digits(limit)
                ),
                None,
                "less load at a time, a larger bank or another pack",
            );
        }
        let highest = bank.highest.get::<volt>();
        if highest > EXTRA_LOW_V {
            found.add(
                Severity::NotChecked,
                "R19",
                "above-extra-low-voltage",
                place.clone(),
                bank.line,
                format!(
                    "check not made: at {} V DC fault protection by disconnection, insulation and \
                     clearances; above {} V it is no extra-low voltage",
                    digits(highest),
                    digits(EXTRA_LOW_V)
                ),
                Some(Citation::new("IEC 60364-4-41:2005", "extra-low voltage limits", Seen::Page)),
                "",
            );
        }
        touch(site, highest, None, &mut At::new(found, place.clone(), bank.line));
        let known = sources(site);
        if known.get(index).is_some_and(|e| e.by_thumb) {
            found.add(
                Severity::Advice,
                "R6",
                "fault-current-by-rule-of-thumb",
                place,
                bank.line,
                "prospective currents rest on a rule of thumb from capacity: known to a factor at best"
                    .to_string(),
                None,
                "state short_circuit or internal_resistance from the maker's sheet or a measurement",
            );
        }
    }
    unlike_banks(site, plan, found);
    let watched = matches!(site.place.monitoring, Some(Monitoring::Insulation));
    if site.earthing == Earthing::Floating && !watched {
        found.add(
            Severity::Advice,
            "R19",
            "floating-system",
            "site",
            0,
            "neither pole is earthed: a first earth fault shows nowhere".to_string(),
            None,
            "fit insulation monitoring",
        );
    }
}
