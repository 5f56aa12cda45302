//! A change to a built site, inspected through all that feeds it (R21): an inverter for the workshop beside the well built
//! station, and what it does to feeder, main fuse, bank and winter.

use std::collections::BTreeSet;

use ampwright::site::Severity::{Nonconforming, NotChecked};
use ampwright::site::{Change, Report, inspect, read};
use uom::si::{electric_charge::ampere_hour, energy::watt_hour};

use crate::well_built::WELL_BUILT;

const CHANGE: &str = include_str!("../../core/examples/sites/change.toml");

fn report(text: &str) -> Report {
    let site = read(text).unwrap_or_else(|problems| panic!("{problems}"));
    inspect(&site).unwrap_or_else(|problems| panic!("{problems}"))
}

fn change<'a>(list: &'a [Change], place: &str, what: &str) -> &'a Change {
    let found = list.iter().find(|c| c.place == place && c.what == what);
    found.unwrap_or_else(|| panic!("no {what} of {place} in {list:#?}"))
}

/// The first number of a text.
fn number(text: Option<&str>) -> f64 {
    let first = text.and_then(|t| t.split(' ').next()).and_then(|n| n.parse().ok());
    first.unwrap_or_else(|| panic!("{text:?}"))
}

#[test]
fn the_changed_site_is_the_well_built_one_with_four_sections_more() {
    let body = |text: &'static str| text.lines().skip_while(|l| *l != "format = 1").filter(|l| !l.is_empty());
    let mut before = body(WELL_BUILT).peekable();
    let mut added = Vec::new();
    for line in body(CHANGE) {
        if before.peek() == Some(&line) {
            before.next();
        } else {
            added.push(line);
        }
    }
    assert_eq!(before.next(), None, "it leaves nothing out");
    // A header may be taken for the one that follows it in the file before.
    let headers = |text: &str, header: &str| text.lines().filter(|l| l.starts_with(header)).count();
    for (header, more) in
        [("[[inverter]]", 1), ("[[load]]", 2), ("[[circuit]]", 1), ("[[circuit.device]]", 1)]
    {
        assert_eq!(headers(CHANGE, header), headers(WELL_BUILT, header) + more, "{header}");
    }
    assert!(added.contains(&r#"name = "workshop inverter""#));
}

#[test]
fn the_comparison_follows_the_change_through_all_that_feeds_it() {
    let (before, after) = (report(WELL_BUILT), report(CHANGE));
    let changes = after.compare(&before);

    let inverter = change(&changes.system, r#"inverter "workshop inverter""#, "power");
    assert_eq!((inverter.earlier.as_deref(), inverter.later.as_deref()), (None, Some("2500 W")));

    // Feeder. Before, the sources' 60 + 30 A are more than all loads. After, at 23.7 V and less: 2500/0.9 + 600/0.88 W, and
    // behind the panel 48 + 110 + 55 + 0.5 W and 15 A × 12 V/0.9: 3873 W, 163.4 A without any drop, 170.2 A with 4 %.
    let feeder = change(&changes.circuits, r#"circuit "bank main""#, "current");
    assert_eq!(feeder.earlier.as_deref(), Some("90 A"));
    assert!((163.4..170.2).contains(&number(feeder.later.as_deref())), "{feeder}");
    assert!(feeder.why_later.starts_with(r#"new "workshop feed" takes "#), "{feeder}");
    // The new circuit itself: 117.2 A at 23.7 V and more below.
    let own = change(&changes.circuits, r#"circuit "workshop feed""#, "current");
    assert_eq!(own.earlier, None);
    assert!((117.2..122.0).contains(&number(own.later.as_deref())), "{own}");
    // What hangs beside it has less volts.
    for place in ["lights", "water pump", "refrigerator", "radio supply input", "inverter feed"] {
        let volts = change(&changes.circuits, &format!(r#"circuit "{place}""#), "volts at the end");
        assert!(number(volts.later.as_deref()) < number(volts.earlier.as_deref()), "{volts}");
    }

    // Findings: all of them are new.
    let found: BTreeSet<_> = changes.findings.iter().map(|c| (c.place.as_str(), c.what.as_str())).collect();
    let meant: BTreeSet<_> = [
        // 160 A of gG.
        (r#"circuit "bank main", F1"#, "device-below-load"),
        // 150 A by its maker.
        (r#"bank "house""#, "discharge-above-limit"),
        (r#"bank "house""#, "energy-short"),
        (r#"bank "house""#, "bank-too-small"),
        // A start of 1875 + 2750 VA: 4625/0.9/23.7 = 217 A and more; of gG of 160 A is held that it carries 1.25 × 160 A for
        // hours, and no time-current curve.
        (r#"circuit "bank main""#, "start-against-device-not-checked"),
        (r#"circuit "workshop feed""#, "start-against-device-not-checked"),
        // Below the volts that the new current takes away.
        (r#"circuit "lights""#, "drop-exceeded"),
    ]
    .into();
    assert_eq!(found, meant);
    assert!(changes.findings.iter().all(|c| c.earlier.is_none()));
    assert_eq!((after.count(Nonconforming), after.count(NotChecked)), (4, 2));
    assert_eq!((before.exit_code(), after.exit_code()), (0, 1));
}

#[test]
fn the_change_empties_the_bank_in_winter() {
    let left = |report: &Report| -> Vec<f64> {
        let demand = &report.plant.demands[0];
        let arrays = demand.arrays.expect("an array");
        (0..12).map(|m| (arrays[m] + demand.generators - demand.mean[m].total).get::<watt_hour>()).collect()
    };
    let (before, after) = (report(WELL_BUILT), report(CHANGE));
    assert!(left(&before).iter().all(|&wh| wh > 0.0), "{:?}", left(&before));
    let short: Vec<usize> = (1..=12).filter(|m| left(&after)[m - 1] < 0.0).collect();
    assert_eq!(short, [1, 2, 9, 10, 11, 12]);
    // A planer for an hour on five days of seven, a compressor for an hour, 18 W idle: (1500 × 5/7 + 500)/0.9 + 18 × 24 Wh, over
    // 0.97; less where the inverter's idle is part of its loss under load.
    let more = left(&before)[11] - left(&after)[11];
    assert!((2190.0..=2250.0).contains(&more), "{more}");
    // On a full day 2000 Wh, and all for three days over half of the capacity, 1.29 for 5 °C and a margin of a tenth.
    let needed = |report: &Report| report.plant.banks[0].needed.expect("a need").get::<ampere_hour>();
    let factor = 3.0 / 0.5 * 1.29 * 1.1;
    let day = (2000.0 / 0.9 + 432.0) / 0.97 / 24.0;
    let added = needed(&after) - needed(&before);
    assert!((added / (factor * day) - 1.0).abs() < 0.02, "{added} beside {}", factor * day);
}
