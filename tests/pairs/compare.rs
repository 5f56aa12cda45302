//! Two reports side by side: nothing where nothing changed, and all that feeds a change where something did (R21).

use ampwright::site::{Change, Comparison, Report, Severity, inspect, read};

use crate::badly_built::{BADLY_BUILT, CABIN};
use crate::document::{Document, device};

fn report(text: &str) -> Report {
    let site = read(text).unwrap_or_else(|problems| panic!("{problems}"));
    inspect(&site).unwrap_or_else(|problems| panic!("{problems}"))
}

fn change<'a>(list: &'a [Change], place: &str, what: &str) -> &'a Change {
    let found = list.iter().find(|c| c.place == place && c.what == what);
    found.unwrap_or_else(|| panic!("no {what} of {place} in {list:#?}"))
}

#[test]
fn a_site_beside_itself_is_empty() {
    for text in [CABIN, BADLY_BUILT] {
        let changes = report(text).compare(&report(text));
        assert!(changes.is_empty(), "{changes}");
        assert_eq!((changes.len(), changes.to_string().as_str()), (0, "nothing differs\n"));
    }
    assert_eq!(Comparison::default().to_string(), "nothing differs\n");
}

#[test]
fn forwards_and_backwards_are_each_other_turned_round() {
    let (one, other) = (report(CABIN), report(&CABIN.replace("power = \"110 W\"", "power = \"220 W\"")));
    let (forwards, backwards) = (other.compare(&one), one.compare(&other));
    assert!(!forwards.is_empty());
    assert_eq!(forwards.len(), backwards.len());
    for there in &forwards.findings {
        let back = change(&backwards.findings, &there.place, &there.what);
        assert_eq!((&there.earlier, &there.later), (&back.later, &back.earlier));
    }
}

/// An inverter behind a board of a bank: the feeder, its fuse and its drop are in the list, with what makes them so.
#[test]
fn an_added_inverter_shows_feeder_fuse_and_drop() {
    let before = Document::run_from_board("iec")
        .with("circuit", "size = none; device = 'none'")
        .without("circuit.device")
        .to_string()
        .replace("size = '6 mm2'\n", "");
    let before = before.replace("device = 'none'\n", "");
    let after = format!(
        "{before}\n[[inverter]]\nname = 'inverter'\npower = '800 W'\nefficiency = '90 %'\nleast = '9 V'\n\
         greatest = '16 V'\n\n[[circuit]]\nname = 'inverter feed'\nfrom = 'board'\nto = 'inverter'\none_way = '1 m'\n"
    );
    let changes = report(&after).compare(&report(&before));
    let feeder = "circuit \"feeder\"";
    for what in ["conductor", "device", "current", "drop"] {
        let change = change(&changes.circuits, feeder, what);
        assert!(change.earlier.is_some() && change.later.is_some() && change.earlier != change.later);
    }
    // 800 W/0.9 at no more than 10.5 V: 84.7 A and more on top of 10 A.
    let current = change(&changes.circuits, feeder, "current");
    assert_eq!(current.earlier.as_deref(), Some("10 A"));
    assert!(current.why_later.starts_with("new \"inverter feed\" takes "), "{current}");
    let drop = change(&changes.circuits, feeder, "drop");
    assert!(!drop.why_earlier.is_empty() && !drop.why_later.is_empty(), "{drop}");
    let fuse = change(&changes.circuits, feeder, "device");
    assert!(fuse.later.as_deref().is_some_and(|d| d.contains("gG ")), "{fuse}");
    // The new circuit stands there fact by fact, and what it makes to be bought.
    for what in ["conductor", "device", "current", "drop"] {
        assert_eq!(change(&changes.circuits, "circuit \"inverter feed\"", what).earlier, None);
    }
    assert!(!changes.purchases.is_empty());
    // Sleeves and allowances follow from what they are for.
    let bought = |c: &&Change| c.place.contains("copper class") && !c.place.contains("allowance");
    assert!(changes.purchases.iter().any(|c| bought(&c)));
    let bare = |c: &Change| c.why_earlier.is_empty() && c.why_later.is_empty();
    assert!(!changes.purchases.iter().filter(bought).any(bare));
    let text = changes.to_string();
    assert!(text.lines().any(|l| l.starts_with("  ~ circuit \"feeder\", current: 10 A → ")), "{text}");
    // One line a change, and a heading a group.
    let groups =
        [&changes.system, &changes.circuits, &changes.findings, &changes.purchases, &changes.readings];
    let heads = groups.iter().filter(|g| !g.is_empty()).count();
    assert_eq!(text.lines().count(), changes.len() + heads);
}

#[test]
fn a_circuit_that_is_gone_is_told() {
    let before = Document::run_from_board("iec")
        .add("load", "name = 'lamp'; current = '1 A'; least = '1 V'; greatest = '100 V'")
        .add("circuit", "name = 'lamp run'; from = 'board'; to = 'lamp'; one_way = '1 m'; size = '2.5 mm2'; insulation = 'PVC 70 degC'")
        .add("circuit.device", &device("gG", "10 A"));
    let after = Document::run_from_board("iec");
    let changes = report(&after.to_string()).compare(&report(&before.to_string()));
    assert_eq!(change(&changes.circuits, "circuit \"lamp run\"", "").later, None);
    let feeder = change(&changes.circuits, "circuit \"feeder\"", "current");
    assert_eq!(feeder.why_later, "\"lamp run\" with 1 A is gone");
}

#[test]
fn findings_come_go_and_change_their_severity() {
    let site = |amps: &str| {
        Document::run("iec")
            .add(
                "reading",
                &format!("name = 'a'; at = 'run'; on = ['load']; accuracy = '0 %'; amps = '{amps}'"),
            )
            .to_string()
    };
    let (fine, above, danger) = (report(&site("10 A")), report(&site("11 A")), report(&site("30 A")));
    assert_eq!(danger.count(Severity::Danger), 1);
    let place = "reading \"a\", amps";
    let new = above.compare(&fine);
    let found = change(&new.findings, place, "current-above-design");
    assert_eq!(found.earlier, None);
    let graver = danger.compare(&above);
    let found = change(&graver.findings, place, "current-above-design");
    assert!(found.earlier.as_deref().is_some_and(|t| t.starts_with("NONCONFORMING ")), "{found}");
    assert!(found.later.as_deref().is_some_and(|t| t.starts_with("DANGER ")), "{found}");
    assert_eq!(change(&fine.compare(&above).findings, place, "current-above-design").later, None);
    assert_eq!(change(&new.readings, "reading \"a\"", "amps").later.as_deref(), Some("11 A above"));
}

#[test]
fn another_bank_is_told_in_the_system() {
    let site =
        |capacity: &str| Document::run("iec").with("bank", &format!("capacity = '{capacity}'")).to_string();
    let changes = report(&site("200 Ah")).compare(&report(&site("100 Ah")));
    let bank = change(&changes.system, "bank \"bank\"", "");
    assert!(bank.earlier.as_deref().is_some_and(|t| t.contains("100 Ah")), "{bank}");
    assert!(bank.later.as_deref().is_some_and(|t| t.contains("200 Ah")), "{bank}");
}
